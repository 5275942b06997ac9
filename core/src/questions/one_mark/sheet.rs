//! Results, tables and the working.

use super::case::Case;
use super::decide::{comes_out, high_or_low};
use super::*;
use crate::doubt::{Estimate, State};
use crate::quantity::Metres;
use crate::quantity::show::{Round, Show, Shown};
use crate::question::answer::Table;
use crate::question::pencil::line;
use crate::sight::budget::Term;

pub fn fill(asked: &Asked, case: &Case, answer: &mut Answer) {
    let show = asked.show();
    results(case, show, answer);
    answer.tables.push(levels(case, show));
    answer.tables.push(skies(case, show));
    answer.tables.push(drawn(case, show));
    working(case, answer);
    if asked.rows(&WORKS).is_empty() {
        answer.note("No places were entered: the rows are usual ones. Enter where the work is.");
    }
    if !asked.given(&site::COLLIMATION) {
        answer.note(
            "No collimation or cone error was entered: a test today would take the largest doubt out of most works.",
        );
    }
    answer.note("A far point that is measured, not set out, looks the other way: by day it comes out too low.");
}

fn results(case: &Case, show: Show, answer: &mut Answer) {
    let words = |text: &str| Shown { text: text.to_owned(), unit: "" };
    match case.finish {
        None => answer.result(&FINISH, None, words("none"), None, "not even work beside the mark is within".to_owned()),
        Some(s) if s.open_above => {
            answer.result(&FINISH, None, words("no limit"), None, "no distance is a limit".to_owned())
        }
        Some(s) => {
            let meaning = if s.open_below {
                FINISH.meaning.to_owned()
            } else {
                format!("{}, and no nearer than {}", FINISH.meaning, show.distance(s.from, Round::Up))
            };
            answer.result(&FINISH, Some(s.to), show.distance(s.to, Round::Down), None, meaning);
        }
    }
    let far = case.farthest();
    let here = case.error(far);
    let [sunny, overcast, night] = case.under(far);
    let of = [(&ERROR, here), (&ERROR_SUNNY, sunny), (&ERROR_OVERCAST, overcast), (&ERROR_NIGHT, night)];
    for (promise, error) in of {
        let (shown, doubt) = site::with_doubt(&error, show);
        let meaning =
            format!("{} at {}, {}", high_or_low(&error, show), show.distance(far, Round::Near), promise.meaning);
        answer.result(promise, Some(error.bias), shown, Some(doubt), meaning);
    }
    let (work, mark) = (Metres(far), Metres(case.mark));
    let parts = case.budget.setup(work, mark);
    let level = parts.iter().find(|part| part.term == Term::Collimation).map_or(Estimate::even(0.0, 0.0), |p| p.error);
    let (shown, doubt) = site::with_doubt(&level, show);
    answer.result(&COLLIMATION_PART, Some(level.bias), shown, Some(doubt), COLLIMATION_PART.meaning.to_owned());
    let (best, worst) = case.best;
    answer.result(&BEST_MARK, Some(best), show.distance(best, Round::Near), None, BEST_MARK.meaning.to_owned());
    answer.result(&BEST_WORST, Some(worst), show.own(worst), None, BEST_WORST.meaning.to_owned());
    site::k_result(&case.air, show, answer);
}

fn place(case: &Case, i: usize, show: Show) -> String {
    case.places.get(i).map_or(String::new(), |place| {
        let at = show.distance(place.at, Round::Near).to_string();
        if place.name.is_empty() { at } else { format!("{at}, {}", place.name) }
    })
}

fn levels(case: &Case, show: Show) -> Table {
    let rows = case.places.iter().enumerate().map(|(i, p)| {
        let fits = match p.state() {
            State::Within => "within",
            State::Beyond => "out",
            _ => "may be out",
        };
        vec![place(case, i, show), comes_out(&p.error, show), format!("{fits}, {} allowed", show.entered(p.allowed))]
    });
    Table {
        name: "levels",
        caption: "How high or low the work comes out".to_owned(),
        columns: ["Work at", "Comes out", "Is that"].map(str::to_owned).to_vec(),
        rows: rows.collect(),
    }
}

fn skies(case: &Case, show: Show) -> Table {
    let unit = show.small_unit(0.0);
    let cell = |e: &Estimate| {
        let text = |si: f64| show.small_in(unit, si, if e.half() > 0.0 { e.half() } else { si }).text;
        match e.lopsided() {
            true => format!("{}: {} to {}", text(e.bias), text(e.bias - e.below), text(e.bias + e.above)),
            false => format!("{} ± {}", text(e.bias), text(e.half())),
        }
    };
    let rows = case.places.iter().enumerate().map(|(i, p)| {
        let mut row = vec![place(case, i, show)];
        row.extend(case.under(p.at).iter().map(cell));
        row
    });
    Table {
        name: "skies",
        caption: format!("The same at other hours, {}: − too low; k by our guide", unit.symbol),
        columns: ["Work at", "Sun on hot ground", "Overcast or wind", "Clear calm night"].map(str::to_owned).to_vec(),
        rows: rows.collect(),
    }
}

/// What the picture shows, at each place.
fn drawn(case: &Case, show: Show) -> Table {
    let most = case.places.iter().map(|p| p.error.worst()).fold(0.0, f64::max);
    let unit = show.small_unit(most);
    let rows = case.places.iter().enumerate().map(|(i, p)| {
        let e = &p.error;
        let ends = [e.bias, e.bias - e.below, e.bias + e.above];
        let mut row = vec![place(case, i, show)];
        row.extend(ends.map(|si| show.small_in(unit, si, if e.half() > 0.0 { e.half() } else { si }).text));
        row
    });
    let columns = ["Work at", "Too high", "From", "To"].iter().enumerate();
    let columns = columns.map(|(i, name)| if i == 0 { (*name).to_owned() } else { format!("{name}, {}", unit.symbol) });
    let caption = "Bias and range, + too high".to_owned();
    Table { name: "drawn", caption, columns: columns.collect(), rows: rows.collect() }
}

/// The farthest work by the handbook's parabola.
fn working(case: &Case, answer: &mut Answer) {
    let (d, mark, k) = (case.farthest(), case.mark, case.air.k);
    let (r, alpha) = (case.budget.radius.0, case.budget.collimation.0);
    let air = line(
        "D = {m} m, D₀ = {m} m, R = {m} m, k = {k} (from {k} to {k}), ",
        &[d, mark, r, k.value.0, k.low.0, k.high.0],
    );
    let squares = d * d - mark * mark;
    let curve = (1.0 - k.value.0) * squares / (2.0 * r);
    let level = alpha * (d - mark);
    let error = case.error(d);
    let lines = &mut answer.working;
    lines.push(air + &case.air.source);
    lines.push(line(
        "curve and air = (1 − k)(D² − D₀²) / 2R = {k} × {m} / {m} = {mm} mm",
        &[1.0 - k.value.0, squares, 2.0 * r, curve],
    ));
    lines.push(line("collimation = α (D − D₀) = {mm} mm/m × {m} m = {mm} mm", &[alpha, d - mark, level]));
    lines.push(line(
        "too high by the two together = {mm} mm (by the exact forms {mm} mm)",
        &[curve + level, error.bias],
    ));
    lines.push(line("doubt: from {mm} to {mm} mm about it", &[-error.below, error.above]));
    let sign = if error.worst() <= case.allowed { "≤" } else { ">" };
    lines.push(line(
        &["farther end = {mm} mm ", sign, " {%} of {mm} mm = {mm} mm"].concat(),
        &[error.worst(), case.share, case.tolerance, case.allowed],
    ));
}
