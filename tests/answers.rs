//! Each question against its table of checked figures, `tables/ID.tsv`.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test may panic")]

use farstaff::question::{Answer, ask, catalogue};
use farstaff_tests::table::{Row, rows};

/// What is wrong with a row; nothing where it holds.
fn wrong(answer: &Answer, row: &Row) -> Option<String> {
    if row.source.is_empty() {
        return Some("names no source".to_owned());
    }
    if !answer.problems.is_empty() {
        return Some(format!("{:?}", answer.problems));
    }
    let words = |got: &str| (got.replace('\u{a0}', " ") != row.figure).then(|| format!("says {got}"));
    match row.what.as_str() {
        "verdict" => return words(answer.verdict.word),
        "number" => return words(&answer.verdict.number),
        _ => {}
    }
    let Some(result) = answer.results.iter().find(|r| r.name == row.what) else {
        return Some("has no such result".to_owned());
    };
    match (result.value, row.tolerance.as_str()) {
        (None, "absent") => None,
        (Some(got), tolerance) if tolerance != "absent" => {
            let off = (got - row.figure.parse::<f64>().unwrap()).abs();
            (off.is_nan() || off > tolerance.parse().unwrap()).then(|| format!("{got} is {off:e} off"))
        }
        (got, _) => Some(format!("{got:?}")),
    }
}

#[test]
fn figures_of_every_question_hold() {
    for question in catalogue().questions {
        let rows = rows(question.id).unwrap_or_else(|e| panic!("{e}"));
        assert!(rows.len() >= 10, "{}: {} rows", question.id, rows.len());
        let mut failures = vec![];
        for row in rows {
            let answer = ask(question.id, &row.entry).unwrap();
            let known = ["verdict", "number"].contains(&row.what.as_str())
                || question.results.iter().any(|promised| promised.name == row.what);
            assert!(known, "{}: no result is named {}", question.id, row.what);
            if let Some(why) = wrong(&answer, &row) {
                failures.push(format!("{} {}: {why}\n", row.written, row.what));
            }
        }
        assert!(failures.is_empty(), "{}\n{}", question.id, failures.concat());
    }
}
