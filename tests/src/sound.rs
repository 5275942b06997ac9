//! What holds for every answer, whatever was asked.

use farstaff::question::field::Kind;
use farstaff::question::figure::{Axis, Mark};
use farstaff::question::{Answer, Question};

/// What is wrong with an answer; empty where nothing is.
pub fn faults(question: &Question, answer: &Answer) -> Vec<String> {
    let mut faults = vec![];
    let mut check = |ok: bool, what: &dyn Fn() -> String| {
        if !ok {
            faults.push(what());
        }
    };
    let text = serde_json::to_string(answer).unwrap_or_default();
    for word in ["NaN", "inf", "null"] {
        // What the person typed may hold any word, and names are said again in many places; what we write must not.
        let typed = answer.read.iter().map(|r| r.text.as_str()).chain([answer.entry.as_str()]);
        let quoted =
            answer.problems.iter().map(|p| p.message.as_str()).chain(answer.notes.iter().map(|n| n.text.as_str()));
        let theirs = typed.chain(quoted).any(|t| t.contains(word));
        check(theirs || !text.contains(word), &|| format!("says {word}"));
    }
    check(!answer.verdict.word.is_empty() && !answer.verdict.sentence.is_empty(), &|| "decides nothing".to_owned());
    for problem in &answer.problems {
        check(!problem.message.is_empty(), &|| format!("{}: a problem without words", problem.field));
        check(question.fields.iter().any(|f| f.name == problem.field), &|| format!("{} is no field", problem.field));
    }
    check(answer.problems.is_empty() || answer.results.is_empty(), &|| "results in spite of a problem".to_owned());
    for result in &answer.results {
        check(question.results.iter().any(|p| p.name == result.name), &|| format!("{} is not promised", result.name));
        check(result.value.is_none_or(f64::is_finite), &|| format!("{} is {:?}", result.name, result.value));
        check(!result.text.is_empty() && !result.meaning.is_empty(), &|| format!("{} says nothing", result.name));
        let doubt = result.doubt.as_ref().map_or(0.0, |d| d.value);
        check(doubt.is_finite() && doubt >= 0.0, &|| format!("{} is in doubt by {doubt}", result.name));
        // A result that is not nought never looks like it.
        let nought = !result.text.contains(|c: char| c.is_ascii_digit() && c != '0');
        check(!(nought && result.value.is_some_and(|v| v.abs() > 1e-12) && result.text.contains('0')), &|| {
            format!("{} is {:?} and reads {}", result.name, result.value, result.text)
        });
    }
    for booked in &answer.booked {
        let columns = question.fields.iter().find(|f| f.name == booked.field).map(|f| f.kind);
        let columns = if let Some(Kind::Table { columns, .. }) = columns { columns.len() } else { 0 };
        check(booked.begin < columns && booked.names.iter().all(|n| n.column < columns), &|| {
            "it goes on nowhere".to_owned()
        });
        check(booked.rows.windows(2).all(|pair| pair[0].row < pair[1].row), &|| "rows out of order".to_owned());
        let said = booked.rows.iter().flat_map(|row| &row.cautions);
        check(said.clone().all(|c| c.column < columns && !c.text.is_empty()), &|| "a caution nowhere".to_owned());
        check(booked.rows.iter().all(|row| !row.head.is_empty() || !row.cautions.is_empty()), &|| {
            "a row at which nothing is said".to_owned()
        });
    }
    for table in &answer.tables {
        check(table.rows.iter().all(|r| r.len() == table.columns.len()), &|| format!("{} is ragged", table.name));
        check(table.rows.iter().flatten().all(|c| !c.is_empty()), &|| format!("{} has an empty cell", table.name));
    }
    if let Some(figure) = &answer.figure {
        check(answer.tables.iter().any(|t| t.name == figure.table), &|| "a figure without its table".to_owned());
        check(!figure.title.is_empty() && !figure.description.is_empty(), &|| "a figure without words".to_owned());
        check(figure.readings.iter().all(|r| (0.0..=1.0).contains(&r.at) && !r.text.is_empty()), &|| {
            "a reading off the picture".to_owned()
        });
        let ticks = |axis: &Axis| axis.ticks.iter().map(|t| t.at).collect::<Vec<_>>();
        let mut places = [ticks(&figure.x), ticks(&figure.y)].concat();
        check(figure.x.ticks.len() >= 3 && figure.y.ticks.len() >= 3, &|| "an axis without figures".to_owned());
        figure.bands.iter().for_each(|b| places.extend([&b.x, &b.low, &b.high].into_iter().flatten()));
        figure.series.iter().for_each(|s| places.extend([&s.x, &s.y].into_iter().flatten()));
        for mark in &figure.marks {
            places.extend(match *mark {
                Mark::Level { y, .. } => vec![y],
                Mark::Upright { x, .. } => vec![x],
                Mark::Span { x, from, to, .. } | Mark::Staff { x, from, to } => vec![x, from, to],
                Mark::Point { x, y, .. } => vec![x, y],
            });
        }
        check(places.iter().all(|p| (0.0..=1.0).contains(p)), &|| "a figure that leaves its frame".to_owned());
    }
    faults
}
