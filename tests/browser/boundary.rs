//! The wasm answers as the native code does, byte for byte.

use crate::Stage;
use farstaff_tests::steps::{Tally, check, same};
use farstaff_tests::{Result, entries, words};
use serde_json::{Value, json};

/// Both sides are written by the engine's own JSON.stringify, which would hide the sign of a zero.
const COMPARE: &str = r#"
    const { ask } = await import("./core.js");
    const signed = (_, value) => Object.is(value, -0) ? "minus zero" : value;
    const write = (value) => JSON.stringify(value, signed);
    return JSON.parse(ROWS).flatMap(([id, entry, native]) => {
        const wanted = write(JSON.parse(native));
        const pairs = Object.fromEntries(new URLSearchParams(entry));
        return [entry, pairs].map((entry) => write(ask(id, entry)))
            .filter((answer) => answer !== wanted).map((answer) => [id, entry, answer, wanted]);
    });"#;

const UNKNOWN: &str = r#"
    const { ask } = await import("./core.js");
    try { ask("no such question", ""); } catch (error) { return error instanceof Error ? error.message : "no Error"; }
    return "no error";"#;

const CATALOGUE: &str = r#"const { catalogue } = await import("./core.js"); return catalogue();"#;

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("the wasm gives the native answers", || answers(stage));
    tally.step("the wasm gives the native catalogue", || {
        let _server = stage.open()?;
        let native = serde_json::to_value(farstaff::question::catalogue()).map_err(words)?;
        same(whole(stage.browser.js(CATALOGUE)?), whole(native))
    });
    tally.step("a question that does not exist throws, and only that", || {
        let _server = stage.open()?;
        same(stage.browser.js(UNKNOWN)?, json!("no question named no such question"))
    });
}

fn answers(stage: &Stage) -> Result<()> {
    let rows: Vec<[String; 3]> = entries()
        .into_iter()
        .map(|(id, entry)| {
            let answer = farstaff::question::ask(id, entry).ok_or(format!("no question named {id}"))?;
            Ok([id.to_owned(), entry.to_owned(), serde_json::to_string(&answer).map_err(words)?])
        })
        .collect::<Result<_>>()?;
    check(!rows.is_empty(), || "there are no reference entries".to_owned())?;
    let _server = stage.open()?;
    let rows = serde_json::to_string(&rows).map_err(words)?;
    let wrong = stage.browser.js(&COMPARE.replace("ROWS", &json!(rows).to_string()))?;
    same(wrong, json!([]))
}

/// JavaScript has one kind of number: 5.0 comes back as 5.
fn whole(value: Value) -> Value {
    match value {
        Value::Number(number) => json!(number.as_f64()),
        Value::Array(items) => items.into_iter().map(whole).collect(),
        Value::Object(items) => items.into_iter().map(|(name, item)| (name, whole(item))).collect(),
        other => other,
    }
}
