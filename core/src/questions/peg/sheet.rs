//! Results, tables and the working.

use super::case::{Case, Sets, seconds, tilt};
use super::decide::worth_adjusting;
use super::*;
use crate::doubt::Estimate;
use crate::pairs::{Shot, reading_to_set};
use crate::quantity::Tilt;
use crate::quantity::show::{Round, Show, Shown};
use crate::question::answer::{Doubt, Table};
use crate::question::pencil::line;

/// Imbalance whose cost is told, metres.
const IMBALANCE: f64 = 10.0;
/// An unbalanced sight as intermediates have it, metres.
const INTERMEDIATE: f64 = 40.0;

pub fn fill(asked: &Asked, case: &Case, answer: &mut Answer) {
    let show = asked.show();
    results(case, show, answer);
    answer.tables.push(remedies(case, show));
    answer.tables.push(readings(case, show));
    working(case, answer);
    notes(asked, case, answer);
}

/// A doubt in the unit of its result, each side for itself where they differ.
fn doubt(error: &Estimate, text: impl Fn(f64) -> String) -> Doubt {
    let words = if error.lopsided() {
        format!("from {} to {}", text(error.bias - error.below), text(error.bias + error.above))
    } else {
        format!("± {}", text(error.half()))
    };
    Doubt { value: error.half(), text: words }
}

fn results(case: &Case, show: Show, answer: &mut Answer) {
    let error = &case.error;
    let half = error.half();
    let fine = |si: f64| tilt(show, si, half);
    let way = match error.bias {
        s if s > 0.0 => "the line points up: a far staff reads too much",
        s if s < 0.0 => "the line points down: a far staff reads too little",
        _ => "the line is level",
    };
    answer.result(
        &COLLIMATION,
        Some(error.bias),
        fine(error.bias),
        Some(doubt(error, |si| fine(si).text)),
        way.to_owned(),
    );
    let seconds = |si: f64| seconds(show, si, half);
    let meaning = COLLIMATION_SECONDS.meaning.to_owned();
    answer.result(
        &COLLIMATION_SECONDS,
        Some(error.bias),
        seconds(error.bias),
        Some(doubt(error, |si| seconds(si).text)),
        meaning,
    );
    let cost =
        Estimate { bias: IMBALANCE * error.bias, below: IMBALANCE * error.below, above: IMBALANCE * error.above };
    let (shown, about) = site::with_doubt(&cost, show);
    answer.result(&IMBALANCE_COST, Some(cost.bias), shown, Some(about), IMBALANCE_COST.meaning.to_owned());
    for (promise, shot) in [(&SET_A, case.test.second.a), (&SET_B, case.test.second.b)] {
        let set = reading_to_set(shot, Tilt(error.bias)).0;
        let text = show.height(half * shot.distance.0).text;
        let about = Doubt { value: half * shot.distance.0, text: format!("± {text}") };
        answer.result(promise, Some(set), show.height(set), Some(about), promise.meaning.to_owned());
    }
    let [read, curve, air, _] = case.parts.map(|part| part.error);
    let taken = Estimate::sum([&curve, &air]);
    let out = Estimate { bias: -taken.bias, below: taken.above, above: taken.below };
    answer.result(
        &TAKEN_OUT,
        Some(out.bias),
        fine(out.bias),
        Some(doubt(&out, |si| fine(si).text)),
        TAKEN_OUT.meaning.to_owned(),
    );
    answer.result(&WITH_AIR, Some(read.bias), fine(read.bias), None, WITH_AIR.meaning.to_owned());
    let about = Doubt { value: case.rise.half(), text: format!("± {}", show.height(case.rise.half()).text) };
    answer.result(&RISE, Some(case.rise.bias), show.height(case.rise.bias), Some(about), RISE.meaning.to_owned());
    match case.sets {
        Sets::Two { difference, explained, agree } => {
            let within = if agree { "they agree" } else { "they do not agree" };
            let meaning = format!("{within}: the readings explain {}", tilt(show, explained, explained));
            answer.result(&REPEAT_DIFFERENCE, Some(difference), tilt(show, difference, explained), None, meaning);
        }
        Sets::One(_) => {
            let none = Shown { text: "no second set".to_owned(), unit: "" };
            answer.result(&REPEAT_DIFFERENCE, None, none, None, "one set alone proves no reading".to_owned());
        }
    }
    site::k_result(&case.air, show, answer);
}

/// What to do, the cheapest first, and what each leaves.
fn remedies(case: &Case, show: Show) -> Table {
    let error = &case.error;
    let half = error.half();
    let far = case.far();
    let out = show.own(error.bias.abs() * far.distance.0);
    let adjust = if worth_adjusting(case) {
        let set = show.height(reading_to_set(far, Tilt(error.bias)).0);
        format!(
            "Set the far staff to {set} by the maker's manual, check the near one, and test again. The doubt stays."
        )
    } else {
        let seen = show.own(case.readable(far).max(half * far.distance.0));
        format!("No: at the far staff it is {out}, and a setting there is only good to {seen}.")
    };
    let each = show.small((IMBALANCE * error.bias).abs(), IMBALANCE * half);
    let way = if error.bias < 0.0 { ("Add", "to") } else { ("Take", "off") };
    let off = format!(
        "{} {each} {} a reading for each 10 m of unbalanced sight; at {} {} stays in doubt.",
        way.0,
        way.1,
        show.distance(INTERMEDIATE, Round::Near),
        show.own(half * INTERMEDIATE)
    );
    let rows = [
        ("First, balance", "Equal sights cost nothing, however far the level is out.".to_owned()),
        ("Else, apply it", off),
        ("Last, adjust", adjust),
    ];
    Table {
        name: "remedies",
        caption: "What to do, in this order".to_owned(),
        columns: ["What", "How"].map(str::to_owned).to_vec(),
        rows: rows.into_iter().map(|(what, how)| vec![what.to_owned(), how]).collect(),
    }
}

fn readings(case: &Case, show: Show) -> Table {
    let small = show.small_unit(0.0);
    let row = |name: &str, shot: Shot| {
        let bent = case.combined(shot);
        vec![
            name.to_owned(),
            show.distance(shot.distance.0, Round::Near).to_string(),
            show.height(shot.reading.0).text,
            show.small_in(small, bent, 0.0001).text,
            show.height(reading_to_set(shot, Tilt(case.error.bias)).0).text,
        ]
    };
    let (first, second) = (case.test.first, case.test.second);
    let unit = show.height(0.0).unit;
    Table {
        name: "readings",
        caption: match case.sets {
            Sets::Two { .. } => "The four readings, two sets in the mean".to_owned(),
            Sets::One(_) => "The four readings".to_owned(),
        },
        columns: vec![
            "Staff".to_owned(),
            "Distance".to_owned(),
            format!("Read, {unit}"),
            format!("Curve and air, {}", small.symbol),
            format!("In order, {unit}"),
        ],
        rows: vec![
            row("First, A", first.a),
            row("First, B", first.b),
            row("Second, A", second.a),
            row("Second, B", second.b),
        ],
    }
}

/// By the handbook's parabola, which at these distances is the exact form.
fn working(case: &Case, answer: &mut Answer) {
    let (test, k, r) = (&case.test, case.budget.k, case.budget.radius.0);
    let lines = &mut answer.working;
    let mut differences = vec![];
    for (name, station) in [("first", test.first), ("second", test.second)] {
        let (a, b) = (station.a, station.b);
        let difference = a.reading.0 - b.reading.0;
        lines.push(line(
            &[name, " station: a − b = {m} − {m} = {mm} mm, d_A − d_B = {m} − {m} = {m} m"].concat(),
            &[a.reading.0, b.reading.0, difference, a.distance.0, b.distance.0, a.distance.0 - b.distance.0],
        ));
        differences.push(difference);
    }
    let read: f64 = case.parts[0].error.bias * case.lever;
    lines.push(line(
        "difference of the differences = {mm} mm over a lever of {m} m: {mm} mm/m as read",
        &[read, case.lever, case.parts[0].error.bias],
    ));
    let air = line("R = {m} m, k = {k} (from {k} to {k}), ", &[r, k.value.0, k.low.0, k.high.0]);
    lines.push(air + &case.air.source);
    let bent = [test.first.a, test.first.b, test.second.a, test.second.b].map(|shot| case.combined(shot));
    let [a, b, c, d] = bent;
    let together = (a - b) - (c - d);
    lines.push(line("curve and air, (1 − k) d²/2R: ({mm} − {mm}) − ({mm} − {mm}) = {mm} mm", &[a, b, c, d, together]));
    lines.push(line(
        "collimation error = ({mm} − ({mm})) / ({m}) = {mm} mm/m",
        &[read, together, case.lever, case.error.bias],
    ));
    let [readings, _, air, distances] = case.parts.map(|part| part.error);
    lines.push(line(
        "doubt above = √({mm}² of readings + {mm}² of air + {mm}² of distances) = {mm} mm/m; below √({mm}² + {mm}² + {mm}²) = {mm} mm/m",
        &[
            readings.above, air.above, distances.above, case.error.above,
            readings.below, air.below, distances.below, case.error.below,
        ],
    ));
    let far = case.far();
    let set = reading_to_set(far, Tilt(case.error.bias)).0;
    lines.push(line(
        "far staff, in order = {m} − ({mm} mm/m) × {m} m = {m} m",
        &[far.reading.0, case.error.bias, far.distance.0, set],
    ));
}

fn notes(asked: &Asked, case: &Case, answer: &mut Answer) {
    match case.sets {
        Sets::One(0) => answer.note("Read a second set, the level set up anew: it is the only check on the first."),
        Sets::One(n) => {
            answer.caution(format!("Of the second set {n} of 4 readings are entered: it counts when all are."))
        }
        Sets::Two { .. } => {}
    }
    let [readings, _, air, _] = case.parts.map(|part| part.error);
    if air.half() > readings.half() {
        answer.note("The air is in more doubt than the readings: pegs closer together, a line higher over the ground, or a cloudy hour would tell more.");
    }
    if let Some(source) =
        limits::COLLIMATION.iter().find(|rule| rule.name == asked.choice(&LIMIT_RULE)).filter(|_| !asked.given(&LIMIT))
    {
        answer.note(format!("Limit: {}. Your specification governs.", source.source));
    }
}
