//! Lines of a working: the formula as it is written, with its numbers put in.

use crate::quantity::show::{places, significant};

/// Puts `values` (SI) into `template`, one after the other: `{m}` metres, `{mm}` millimetres, also of a metre per metre,
/// `{k}` to four places, `{%}` a share in percent. A place without a value stays as it is written, and shows in a test.
pub fn line(template: &str, values: &[f64]) -> String {
    let mut text = String::with_capacity(template.len() + 8 * values.len());
    let mut values = values.iter();
    let mut rest = template;
    while let Some((before, after)) = rest.split_once('{') {
        text.push_str(before);
        let Some((code, after)) = after.split_once('}') else { break };
        match values.next() {
            Some(value) => text.push_str(&number(code, *value)),
            None => text.push_str(code),
        }
        rest = after;
    }
    text.push_str(rest);
    text
}

fn number(code: &str, value: f64) -> String {
    match code {
        "mm" => significant(value * 1000.0, 4),
        "k" => places(value, 4),
        "%" => significant(value * 100.0, 4) + " %",
        _ => significant(value, 7),
    }
}
