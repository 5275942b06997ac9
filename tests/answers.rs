//! Each question against its table of checked figures, `tables/ID.tsv`.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test may panic")]

use farstaff::question::{Answer, ask, catalogue};

/// Entry, what is checked, figure, tolerance, source.
type Row<'a> = [&'a str; 5];

/// Written once in a table's head, meant in its rows.
const SHORT: (&str, &str) =
    ("&K1", "&k_doubt=0&collimation_doubt=0&reading_doubt=0&reading_growth=0&distance_doubt=0&share=100 %");

fn form(entry: &str) -> String {
    let pairs = entry.split('&').filter_map(|pair| pair.split_once('='));
    form_urlencoded::Serializer::new(String::new()).extend_pairs(pairs).finish()
}

/// What is wrong with a row; nothing where it holds.
fn wrong(answer: &Answer, [_, what, figure, tolerance, source]: Row) -> Option<String> {
    if source.is_empty() {
        return Some("names no source".to_owned());
    }
    if !answer.problems.is_empty() {
        return Some(format!("{:?}", answer.problems));
    }
    let words = |got: &str| (got.replace('\u{a0}', " ") != figure).then(|| format!("says {got}"));
    match what {
        "verdict" => return words(answer.verdict.word),
        "number" => return words(&answer.verdict.number),
        _ => {}
    }
    let Some(result) = answer.results.iter().find(|r| r.name == what) else {
        return Some("has no such result".to_owned());
    };
    match (result.value, tolerance) {
        (None, "absent") => None,
        (Some(got), tolerance) if tolerance != "absent" => {
            let off = (got - figure.parse::<f64>().unwrap()).abs();
            (off.is_nan() || off > tolerance.parse().unwrap()).then(|| format!("{got} is {off:e} off"))
        }
        (got, _) => Some(format!("{got:?}")),
    }
}

#[test]
fn figures_of_every_question_hold() {
    for question in catalogue().questions {
        let path = format!("{}/tables/{}.tsv", env!("CARGO_MANIFEST_DIR"), question.id);
        let table = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{path}: {e}"));
        let rows: Vec<Row> = table
            .lines()
            .filter(|line| !line.starts_with('#'))
            .map(|line| line.split('\t').collect::<Vec<_>>().try_into().unwrap_or_else(|_| panic!("{path}: {line}")))
            .collect();
        assert!(rows.len() >= 10, "{path} holds {} rows", rows.len());
        let mut failures = vec![];
        for row in rows {
            let answer = ask(question.id, &form(&row[0].replace(SHORT.0, SHORT.1))).unwrap();
            let known = ["verdict", "number"].contains(&row[1]) || question.results.iter().any(|p| p.name == row[1]);
            assert!(known, "{path}: no result is named {}", row[1]);
            if let Some(why) = wrong(&answer, row) {
                failures.push(format!("{} {}: {why}\n", row[0], row[1]));
            }
        }
        assert!(failures.is_empty(), "{path}\n{}", failures.concat());
    }
}
