//! Verdict, results, table and working.

use super::case::{Case, What};
use crate::doubt::State;
use crate::quantity::show::{Shown, significant};
use crate::quantity::unit::ARC_MINUTE;
use crate::quantity::{Coefficient, Metres};
use crate::question::answer::{Answer, Doubt, Table};

/// Sets the verdict.
pub fn decide(case: &Case, answer: &mut Answer) {
    let k = case.air.k;
    let hidden = case.spread(What::Hidden, k);
    let state = case.state(k);
    let (word, what, why) = match state {
        Some(State::Within) if hidden.is_some_and(|h| h.high == 0.0) => {
            ("Seen", None, "All of it is above the horizon.")
        }
        Some(State::Within) => ("Partly hidden", Some(What::Hidden), "Its top is seen."),
        Some(State::Beyond) => ("Hidden", Some(What::Hidden), "Its top is below the horizon."),
        Some(_) => ("Depends on the air", None, "The air decides whether its top is seen."),
        None if hidden.is_some() => ("Hidden below", Some(What::Hidden), ""),
        None if case.target.is_some() => ("Raised at", Some(What::Range), ""),
        None if k.value.0 < 1.0 => ("Horizon at", Some(What::Horizon), ""),
        None => ("No horizon", None, "The line bends as much as the earth or more."),
    };
    let verdict = &mut answer.verdict;
    verdict.word = word;
    verdict.state = state.unwrap_or(State::Within);
    verdict.sentence.push_str(why);
    // What decides comes first.
    for each in [What::Hidden, What::Range, What::Horizon] {
        let Some(spread) = case.spread(each, k) else { continue };
        let (shown, range) = case.said(each, spread);
        let gap = if verdict.sentence.is_empty() { "" } else { " " };
        verdict.sentence.push_str(&format!("{gap}{}: {shown}, {range}.", each.promise().label));
        if what == Some(each) {
            verdict.number = shown.to_string();
        }
    }
}

/// Fills in everything below the verdict but the figure.
pub fn fill(case: &Case, answer: &mut Answer) {
    let k = case.air.k;
    for what in What::ALL {
        let mut result = (None, Shown { text: "not asked".to_owned(), unit: "" }, None);
        if let Some(spread) = case.spread(what, k) {
            let (shown, range) = case.said(what, spread);
            let sides = [spread.value - spread.low, spread.high - spread.value];
            let half = sides.into_iter().filter(|s| s.is_finite()).fold(0.0, f64::max);
            let value = Some(spread.value).filter(|v| v.is_finite());
            result = (value, shown, value.map(|_| Doubt { value: half, text: range.text }));
        }
        let promise = what.promise();
        answer.result(promise, result.0, result.1, result.2, promise.meaning.to_owned());
    }
    if case.state(case.day) != case.state(case.night) {
        answer.note(
            "Day and clear night differ on this target. Seen by night is not clear by day: prove the line about noon.",
        );
    }
    if k.high.0 >= 1.0 {
        answer.note("From k = 1 on the line bends as much as the earth or more: there is no horizon, and the curve hides nothing.");
    }
    if case.shore > case.at(What::Horizon, k.value, case.radius).map(Metres) {
        answer.note("The shore lies beyond the horizon: the dip is the horizon's.");
    }
}

/// One k a row: by day, by night, without air.
pub fn airs(case: &Case) -> Table {
    let asked = [What::Horizon, What::Dip, What::Hidden, What::Range];
    let (mut columns, mut rows) = (vec!["Air".to_owned(), "k".to_owned()], vec![]);
    let mut add = |name: &str, end: &str, k: Coefficient| {
        let mut row = vec![name.to_owned() + end, case.show.k(k.0)];
        for what in asked {
            if let Some(cell) = case.cell(what, k) {
                row.push(cell.to_string());
            }
        }
        rows.push(row);
    };
    let airs = [(case.k_given, "k as entered", case.air.k), (true, "by day", case.day), (true, "by night", case.night)];
    for (_, name, k) in airs.into_iter().filter(|air| air.0) {
        for (end, at) in [("", k.value), (", least k", k.low), (", greatest k", k.high)] {
            if end.is_empty() || at != k.value {
                add(name, end, at);
            }
        }
    }
    add("no air", "", Coefficient(0.0));
    for what in asked {
        if case.cell(what, Coefficient(0.0)).is_some() {
            columns.push(what.promise().label.to_owned());
        }
    }
    Table { name: "airs", caption: "By day and by night, and how far k may go".to_owned(), columns, rows }
}

/// By the parabola, with the exact value behind.
pub fn working(case: &Case) -> Vec<String> {
    let (k, r, h) = (case.air.k, case.radius.0, case.eye.0);
    let q = 1.0 - k.value.0;
    let mut lines = vec![
        with_numbers("h = # m, R = # m, k = # (from # to #), ", &[h, r, k.value.0, k.low.0, k.high.0])
            + &case.air.source,
        with_numbers("q = 1 − k = #", &[q]),
    ];
    let mut line = |what, formula: &str, numbers: &[f64], si: f64| {
        let Some(exact) = case.at(what, k.value, Metres(r)).filter(|v| v.is_finite()) else { return };
        let minutes = |si| ARC_MINUTE.from_si(si).unwrap_or(0.0);
        let text = with_numbers(formula, numbers);
        lines.push(
            text + &match what {
                What::Dip => with_numbers(" = #′ (exact #′)", &[minutes(si), minutes(exact)]),
                _ => with_numbers(" = # m (exact # m)", &[si, exact]),
            },
        );
    };
    let leg = |h: f64| (2.0 * r * h / q).sqrt();
    let horizon = leg(h);
    line(What::Horizon, "horizon = √(2Rh / q) = √(2 × # × # / #)", &[r, h, q], horizon);
    match case.shore.filter(|s| horizon.is_nan() || s.0 < horizon) {
        Some(Metres(d)) => {
            let tan = h / d + q * d / (2.0 * r);
            line(What::Dip, "tan dip = h / d + q d / 2R = # / # + # × # / #", &[h, d, q, d, 2.0 * r], libm::atan(tan));
        }
        None => line(What::Dip, "dip = q · horizon / R = # × # / #", &[q, horizon, r], q * horizon / r),
    }
    if let Some(Metres(d)) = case.distance.filter(|d| d.0 > horizon) {
        let beyond = d - horizon;
        let hidden = q * beyond * beyond / (2.0 * r);
        line(What::Hidden, "hidden = q (D − horizon)² / 2R = # × (# − #)² / #", &[q, d, horizon, 2.0 * r], hidden);
    }
    if let Some(Metres(top)) = case.target {
        let formula = "raised at = horizon + √(2RH / q) = # + √(2 × # × # / #)";
        line(What::Range, formula, &[horizon, r, top, q], horizon + leg(top));
    }
    lines
}

/// A formula with each # replaced by a number.
fn with_numbers(formula: &str, numbers: &[f64]) -> String {
    let mut parts = formula.split('#');
    let mut text = parts.next().unwrap_or("").to_owned();
    for (part, number) in parts.zip(numbers) {
        text.push_str(&significant(*number, 7));
        text.push_str(part);
    }
    text
}
