//! The wasm answers as the native code does, byte for byte; within a stated tolerance where a library comes in that uses
//! std's functions.

use crate::Stage;
use farstaff::quantity::unit::Quantity;
use farstaff::question::{Field, Kind, Question, ask, catalogue};
use farstaff_tests::steps::{Tally, check, same};
use farstaff_tests::table::{entries, rows};
use farstaff_tests::{Result, entry, words};
use serde_json::{Value, json};

/// Both sides are written by the engine's own JSON.stringify, which would hide the sign of a zero.
const COMPARE: &str = r#"
    const { ask } = await import("./core.js");
    const signed = (_, value) => Object.is(value, -0) ? "minus zero" : value;
    const write = (value) => JSON.stringify(value, signed);
    const near = (one, other) => typeof one === "number" && typeof other === "number"
        ? Math.abs(one - other) <= NEAR * Math.max(1, Math.abs(other))
        : one !== null && other !== null && typeof one === "object" && typeof other === "object"
            ? Object.keys(one).join() === Object.keys(other).join() && Object.keys(one).every((key) => near(one[key], other[key]))
            : one === other;
    return JSON.parse(ROWS).flatMap(([id, entry, native, loose]) => {
        const wanted = write(JSON.parse(native));
        const pairs = Object.fromEntries(new URLSearchParams(entry));
        return [entry, pairs].map((entry) => write(ask(id, entry)))
            .filter((answer) => answer !== wanted && !(loose && near(JSON.parse(answer), JSON.parse(wanted)))).map((answer) => [id, entry, answer, wanted]);
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
    let mut asked = entries()?;
    for question in catalogue().questions {
        asked.extend(rows(question.id)?.into_iter().map(|row| (question.id.to_owned(), row.entry)));
        asked.extend(edges(question).into_iter().map(|entry| (question.id.to_owned(), entry)));
    }
    check(asked.len() > 300, || format!("{} rows only", asked.len()))?;
    let rows: Vec<(String, String, String, bool)> = asked
        .into_iter()
        .map(|(id, entry)| {
            let answer = ask(&id, &entry).ok_or(format!("no question named {id}"))?;
            let answer = serde_json::to_string(&answer).map_err(words)?;
            let loose = entry.contains("=latlon");
            Ok((id, entry, answer, loose))
        })
        .collect::<Result<_>>()?;
    let _server = stage.open()?;
    // Not all at once: an engine takes a script of some megabytes only.
    for part in rows.chunks(ROWS_AT_ONCE) {
        let rows = serde_json::to_string(part).map_err(words)?;
        let wrong = stage.browser.js(&COMPARE.replace("ROWS", &json!(rows).to_string()).replace("NEAR", GEODESIC))?;
        check(wrong == json!([]), || format!("{:.2000}", wrong.to_string()))?;
    }
    Ok(())
}
/// Geodesics come from a library with std's functions, an ulp apart: 1e-9 m of 50 km, and what follows from it.
const GEODESIC: &str = "1e-8";
/// A clearance with its picture is some ten kilobytes.
const ROWS_AT_ONCE: usize = 200;

/// Entries of a question in which one field stands at an edge of what it may be, in each of its units, or beyond it; and
/// each pair of choices.
fn edges(question: &Question) -> Vec<String> {
    let required: Vec<(&str, &str)> =
        question.fields.iter().filter(|field| field.required).map(|field| (field.name, field.example)).collect();
    let with = |more: &[(&str, &str)]| {
        let base = required.iter().filter(|(name, _)| more.iter().all(|(other, _)| other != name));
        entry(&base.copied().chain(more.iter().copied()).collect::<Vec<_>>())
    };
    let mut all = vec![];
    for field in question.fields {
        all.extend(texts(field).iter().map(|text| with(&[(field.name, text)])));
    }
    let choices = question.fields.iter().filter(|field| matches!(field.kind, Kind::Choice { .. }));
    let choices: Vec<&Field> = choices.collect();
    for (i, one) in choices.iter().enumerate() {
        for other in &choices[..i] {
            for (a, b) in texts(one).iter().flat_map(|a| texts(other).into_iter().map(move |b| (a.clone(), b))) {
                all.push(with(&[(one.name, &a), (other.name, &b)]));
            }
        }
    }
    all
}

/// Texts that a field may come to hold.
fn texts(field: &Field) -> Vec<String> {
    let mut all = vec![field.example.to_owned(), "12,5".to_owned(), "far".to_owned()];
    match field.kind {
        Kind::Text { .. } | Kind::Table { .. } => {}
        Kind::Choice { options, .. } => all.extend(options.iter().map(|option| option.value.to_owned())),
        Kind::Number { quantity, min, max, .. } => {
            for unit in quantity.info().units {
                for si in [min, max, min + (max - min) / 3.0, max * 1.01, min - 1.0] {
                    all.extend(in_unit(quantity, unit.symbol, si));
                }
            }
        }
    }
    all
}

fn in_unit(quantity: Quantity, symbol: &str, si: f64) -> Option<String> {
    Some(format!("{} {symbol}", quantity.unit(symbol)?.from_si(si)?))
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
