//! Results and tables: what the decision rests on.

use super::case::{Case, Count, SEARCH};
use super::limit::{End, Limit};
use super::*;
use crate::doubt::Estimate;
use crate::quantity::show::{Round, Show, Shown};
use crate::question::answer::Table;
use crate::sight::bounds::Stretch;
use crate::sight::budget::{Part, Term};

/// Fills in everything below the verdict.
pub fn fill(asked: &Asked, case: &Case, limits: &[Limit], answer: &mut Answer) {
    let show = asked.show();
    let parts = case.parts(case.distance);
    let error = case.error(case.distance);
    sum(case, &error, show, answer);
    reaches(case, show, answer);
    each(case, &parts, asked.number(&site::COLLIMATION).is_some(), show, answer);
    answer.tables.push(terms(limits, show));
    answer.tables.push(contributions(&parts, error, show));
    answer.working = working::lines(case, &parts, error);
    notes(asked, case, answer);
}

/// What an error does to the reading, or to the difference of the two of a setup, in words.
fn effect(case: &Case, bias: f64, show: Show) -> String {
    let size = show.own(bias.abs());
    match (case.other, bias) {
        (None, b) if b > 0.0 => format!("reads {size} too much: the point is {size} higher than booked"),
        (None, b) if b < 0.0 => format!("reads {size} too little: the point is {size} lower than booked"),
        (None, _) => "does nothing to the reading".to_owned(),
        (Some(_), b) if b > 0.0 => format!("this sight reads {size} too much against the other"),
        (Some(_), b) if b < 0.0 => format!("this sight reads {size} too little against the other"),
        (Some(_), _) => "falls out of the difference".to_owned(),
    }
}

/// Bias and doubt of everything together.
fn sum(case: &Case, error: &Estimate, show: Show, answer: &mut Answer) {
    let (bias, doubt) = site::with_doubt(error, show);
    answer.result(&BIAS, Some(error.bias), bias, None, effect(case, error.bias, show));
    let meaning = if error.lopsided() {
        format!("the error lies {} {}: the range of k is lopsided", doubt.text, show.small_unit(error.worst()).symbol)
    } else {
        "95 times in 100 the error lies within it of the bias".to_owned()
    };
    answer.result(&DOUBT, Some(error.half()), show.own(error.half()), None, meaning);
}

/// Bias and doubt of each term.
fn each(case: &Case, parts: &[Part; 5], known: bool, show: Show, answer: &mut Answer) {
    for Part { term, error } in parts {
        let (promise, meaning) = match term {
            Term::Curvature => (&CURVATURE, effect(case, error.bias, show)),
            Term::Refraction => (&REFRACTION, effect(case, error.bias, show)),
            Term::Collimation if known => (&COLLIMATION_PART, effect(case, error.bias, show)),
            Term::Collimation => (&COLLIMATION_PART, "not known: only its doubt counts".to_owned()),
            Term::Reading => (&READING_PART, READING_PART.meaning.to_owned()),
            Term::Distance => (&DISTANCE_PART, DISTANCE_PART.meaning.to_owned()),
        };
        if matches!(term, Term::Reading | Term::Distance) {
            answer.result(promise, Some(error.half()), show.own(error.half()), None, meaning);
        } else {
            let (bias, doubt) = site::with_doubt(error, show);
            answer.result(promise, Some(error.bias), bias, Some(doubt), meaning);
        }
    }
    site::k_result(&case.air, show, answer);
}

fn reaches(case: &Case, show: Show, answer: &mut Answer) {
    let words = |text: &str| Shown { text: text.to_owned(), unit: "" };
    let end = |d: f64, round| show.distance(d, round);
    for (promise, count) in [(&REACH_UNCORRECTED, Count::All), (&REACH_CORRECTED, Count::DoubtOnly)] {
        match case.reach(count) {
            None => answer.result(promise, None, words("none"), None, "no distance is acceptable".to_owned()),
            Some(s) if s.open_above => {
                let meaning = format!("no distance is a limit, up to {}", end(SEARCH.1, Round::Near));
                answer.result(promise, None, words("no limit"), None, meaning);
            }
            Some(s) => answer.result(promise, Some(s.to), end(s.to, Round::Down), None, promise.meaning.to_owned()),
        }
    }
    let range = case.other_range();
    let no_range = "not even an equal other sight keeps this one within the allowance";
    let open_end = |s: Stretch, below: bool| if below { s.open_below } else { s.open_above };
    for (promise, below) in [(&OTHER_SHORTEST, true), (&OTHER_LONGEST, false)] {
        match range {
            None => answer.result(promise, None, words("none"), None, no_range.to_owned()),
            Some(s) if open_end(s, below) => {
                answer.result(promise, None, words("no limit"), None, "any length will do on this side".to_owned())
            }
            Some(s) => {
                let (d, round) = if below { (s.from, Round::Up) } else { (s.to, Round::Down) };
                answer.result(promise, Some(d), end(d, round), None, promise.meaning.to_owned());
            }
        }
    }
    let both = case.both_ways();
    let meaning = format!("{}; curvature and collimation cancel", BOTH_WAYS.meaning);
    answer.result(&BOTH_WAYS, Some(both.half()), show.own(both.half()), None, meaning);
}

fn terms(limits: &[Limit], show: Show) -> Table {
    let rows = limits.iter().map(|l| {
        let end = match l.end {
            End::At(d) => show.distance(d, Round::Down).to_string(),
            End::Never => "no limit".to_owned(),
            End::Always => "none will do".to_owned(),
        };
        vec![l.name.to_owned(), end, l.why.clone()]
    });
    let columns = ["Limit", "Distance", "Because"].map(str::to_owned).to_vec();
    Table {
        name: "terms",
        caption: "What limits this sight, the ruling one first".to_owned(),
        columns,
        rows: rows.collect(),
    }
}

fn contributions(parts: &[Part; 5], error: Estimate, show: Show) -> Table {
    let unit = show.small_unit(error.worst());
    let cell = |si: f64, grain: f64| show.small_in(unit, si, grain.max(error.half() / 100.0)).text;
    let row = |name: &str, e: &Estimate| {
        let grain = if e.half() > 0.0 { e.half() } else { e.bias.abs() };
        vec![name.to_owned(), cell(e.bias, grain), cell(e.below, grain), cell(e.above, grain)]
    };
    let mut rows: Vec<Vec<String>> = parts.iter().map(|p| row(name(p.term), &p.error)).collect();
    rows.push(row("Together", &error));
    let columns = vec![
        "Term".to_owned(),
        format!("Bias, {}", unit.symbol),
        format!("Doubt below, {}", unit.symbol),
        format!("Doubt above, {}", unit.symbol),
    ];
    Table { name: "parts", caption: "What each term puts into the reading".to_owned(), columns, rows }
}

/// Name of a term on the sheet.
pub fn name(term: Term) -> &'static str {
    match term {
        Term::Curvature => CURVATURE.label,
        Term::Refraction => REFRACTION.label,
        Term::Collimation => COLLIMATION_PART.label,
        Term::Reading => READING_PART.label,
        Term::Distance => DISTANCE_PART.label,
    }
}

fn notes(asked: &Asked, case: &Case, answer: &mut Answer) {
    if !asked.given(&site::COLLIMATION) {
        answer.note(
            "No collimation error was entered: a peg test today would take the largest doubt out of most setups.",
        );
    }
    if case.budget.k.value.0 >= 1.0 {
        answer.note("At this k the line bends as much as the earth or more: it never rises off the level surface.");
    }
    if let Some(class) = limits::class(asked.choice(&CLASS)) {
        if let (Some(most), Some(other)) = (class.imbalance, case.other)
            && (case.distance - other).abs() > most
        {
            let show = asked.show();
            let text = format!(
                "{} allows the two sights of a setup to differ by {} at most; these differ by {}.",
                class.label,
                show.distance(most, Round::Near),
                show.distance((case.distance - other).abs(), Round::Near)
            );
            answer.caution(text);
        }
        answer.note(format!("{}. Your specification governs.", class.source));
    }
}
