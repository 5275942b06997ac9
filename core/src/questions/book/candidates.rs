//! Where the run does not close: what single slip would explain it. Nothing is changed.

use super::case::Case;
use super::columns::LONGEST;
use super::fields::STADIA;
use super::levels::NONE;
use super::rows::Spot;
use crate::doubt::Estimate;
use crate::levelling::blunder::{Candidate, End, Known, Place, Side, Slip, candidates};
use crate::quantity::show::{Show, significant};
use crate::question::answer::{Answer, Table};
use crate::question::{Asked, Promised};

pub const LEAVES: Promised = Promised::new(
    "blunder_leaves",
    "Likeliest slip leaves",
    "what the run would close by with the first candidate put right; + high",
);

/// Candidates of the table at most, and of one kind: thirty sights of one length explain a wire equally well.
const SHOWN: usize = 8;
const ALIKE: usize = 4;

/// Adds the result, and the table where the run is beyond its limit.
pub fn fill(asked: &Asked, case: &Case, answer: &mut Answer) {
    let beyond = case.judged().zip(case.allowed).filter(|(off, allowed)| off.abs() > *allowed);
    let Some((off, allowed)) = beyond else {
        let why = "the run closes within its limit, or has not closed yet".to_owned();
        return answer.idle(&LEAVES, why);
    };
    let found = search(asked, case, off, allowed);
    let show = asked.show();
    let Some(first) = found.first() else {
        let why = "no single slip of the usual kinds explains the misclosure: two of them, or a mark that moved";
        return answer.idle(&LEAVES, why);
    };
    let [what, at, ..] = told(case, show, &first.slip);
    answer.verdict.sentence.push_str(&format!(" First candidate: {what}, {at}."));
    let meaning = format!("{what}, {at}: a candidate, not a proof. Re-read it first");
    answer.result(&LEAVES, Some(first.left), show.small(first.left, 0.001), None, meaning);
    table(case, show, &found, answer);
}

fn search(asked: &Asked, case: &Case, off: f64, allowed: f64) -> Vec<Candidate> {
    let staff = case.limits.staff.unwrap_or(LONGEST);
    let mut joints = vec![];
    if let Some(section) = case.limits.section {
        // The others are taken to be as long.
        while joints.len() < 20 && (joints.len() + 1) as f64 * section < staff {
            joints.push((joints.len() + 1) as f64 * section);
        }
    }
    let (k, twice) = (case.budget.k, 2.0 * case.budget.radius.0);
    let bend = Estimate {
        bias: (1.0 - k.value.0) / twice,
        below: (k.high.0 - k.value.0) / twice,
        above: (k.value.0 - k.low.0) / twice,
    };
    let tilt = Estimate::even(case.budget.collimation.0, case.budget.collimation_doubt.0);
    // What has been taken out is no longer in the misclosure; its doubt is.
    let still = |error: Estimate| if case.by_corrected { error.corrected() } else { error };
    let known = Known {
        allowed,
        unit: case.digits.unit.to_si(1.0).unwrap_or(1.0),
        staff,
        joints: &joints,
        stadia: asked.must(&STADIA),
        distance_doubt: case.budget.distance_doubt,
        collimation: still(tilt),
        bend: still(bend),
    };
    let mut found = candidates(&case.book.run, off, &known);
    // With three wires the reading is a mean: its digits were never read, and a wire taken for another shows by itself.
    found.retain(|c| match c.slip {
        Slip::Swapped { at, .. } | Slip::Wire { at, .. } => spot(case, at).is_some_and(|spot| spot.wires.is_none()),
        _ => true,
    });
    // Readings are whole nanometres: so is what is left of them.
    found.iter_mut().for_each(|c| c.left = libm::round(c.left * 1e9) / 1e9);
    found
}

fn table(case: &Case, show: Show, found: &[Candidate], answer: &mut Answer) {
    let row = |c: &Candidate| {
        let mut row = told(case, show, &c.slip).to_vec();
        row.push(show.small(c.left, 0.001).to_string());
        row
    };
    let rows: Vec<Vec<String>> = varied(found).map(row).collect();
    let columns = ["What may have happened", "Where", "Booked", "Would be", "Leaves"].map(str::to_owned).to_vec();
    let more = found.len().saturating_sub(rows.len());
    let more = if more > 0 { format!(" {more} more would close it as well.") } else { String::new() };
    let caption = format!("Candidates for a blunder, the likeliest first: none is a proof, re-read first.{more}");
    answer.tables.push(Table { name: "candidates", caption, columns, rows });
    answer.caution(
        "Look for the blunder before anything is adjusted. Each candidate is one slip by itself, and their order is our judgement: two slips, or a mark that moved, look like nothing here or like the wrong thing.",
    );
}

/// The first candidates, no more than [`ALIKE`] of a kind.
fn varied(found: &[Candidate]) -> impl Iterator<Item = &Candidate> {
    let mut kinds = vec![];
    let fresh = move |c: &&Candidate| {
        let kind = std::mem::discriminant(&c.slip);
        kinds.push(kind);
        kinds.iter().filter(|k| **k == kind).count() <= ALIKE
    };
    found.iter().filter(fresh).take(SHOWN)
}

fn spot(case: &Case, at: Place) -> Option<Spot> {
    let places = case.book.places.get(at.setup)?;
    if at.side == Side::Back { Some(places.back) } else { places.fore }
}

/// "row 12, CP 3".
fn row(case: &Case, spot: Option<Spot>) -> String {
    let Some(spot) = spot else { return String::new() };
    let (number, name) = (case.book.number(spot), case.book.name(spot));
    let row = format!("row {number}");
    if name == row { row } else { [&row, ", ", &name].concat() }
}

/// What happened, where, what is booked, what would be right.
fn told(case: &Case, show: Show, slip: &Slip) -> [String; 4] {
    let reading = |si: f64| case.digits.text(si);
    let booked = |at: Place| {
        let setup = case.book.run.setups.get(at.setup);
        let fore = setup.and_then(|setup| setup.fore).map_or(0.0, |fore| fore.reading);
        if at.side == Side::Back { setup.map_or(0.0, |setup| setup.back.reading) } else { fore }
    };
    let one = |what: &str, at: Place, right: f64| {
        let side = if at.side == Side::Back { "back sight, " } else { "fore sight, " };
        [what.to_owned(), [side, &row(case, spot(case, at))].concat(), reading(booked(at)), reading(right)]
    };
    let all = |what: String, place: &str, would: String| [what, place.to_owned(), NONE.to_owned(), would];
    match *slip {
        Slip::Round(off) => {
            let (back, fore) = if off > 0.0 { ("great", "small") } else { ("small", "great") };
            let what = format!("A reading out by {}", show.height_words(off.abs()));
            all(what, &format!("a back sight too {back}, or a fore sight too {fore}"), NONE.to_owned())
        }
        Slip::Swapped { at, reading } => one("Two digits swapped", at, reading),
        Slip::Wire { at, reading } => {
            let [what, place, was, would] = one("Outer wire read for the middle one", at, reading);
            [what, place, was, ["about ", &would].concat()]
        }
        Slip::Inverted(at) if booked(at) < 0.0 => one("Staff upright, booked as head down", at, -booked(at)),
        Slip::Inverted(at) => one("Staff head down, not booked so", at, -booked(at)),
        Slip::Exchanged(setup) => {
            let [back, fore] = [Side::Back, Side::Fore].map(|side| Place { setup, side });
            let rows = [row(case, spot(case, back)), row(case, spot(case, fore))].join("; ");
            let pair = |a: f64, b: f64| [reading(a), reading(b)].join("; ");
            let (b, f) = (booked(back), booked(fore));
            ["Back and fore sight exchanged".to_owned(), rows, pair(b, f), pair(f, b)]
        }
        Slip::Intermediate { setup, inter } => {
            let at = Place { setup, side: Side::Fore };
            let right = case.book.run.setups.get(setup).and_then(|s| s.inters.get(inter)).map_or(0.0, |s| s.reading);
            let from = case.book.places.get(setup).and_then(|places| places.inters.get(inter)).copied();
            let [_, place, was, would] = one("", at, right);
            let place = [&place, "; ", &row(case, from)].concat();
            ["Intermediate and fore sight exchanged".to_owned(), place, was, would]
        }
        Slip::Undrawn { section, side } => {
            let place = if side == Side::Back { "a back sight above it" } else { "a fore sight above it" };
            let what = format!("Section of {} not drawn out (if all are as long)", show.height_words(section));
            all(what, place, NONE.to_owned())
        }
        Slip::Slipped { joint, by } => {
            let what = format!("Staff slipped by {}", show.small(by, 0.001));
            all(what, &format!("at the joint of {}, all readings above it", show.height_words(joint)), NONE.to_owned())
        }
        Slip::Mark { end, level, swapped } => {
            let (place, was) = match end {
                End::Start => ("first mark", case.book.run.start),
                End::Close => ("closing mark", case.close.unwrap_or(0.0)),
            };
            let what = if swapped { "Two digits of a mark swapped" } else { "One digit of a mark wrong" };
            [what.to_owned(), place.to_owned(), reading(was), reading(level)]
        }
        Slip::Collimation(tilt) => all("Line tilted, sights unequal".to_owned(), "the whole run", show.tilt(tilt)),
        Slip::Curvature(bend) => {
            let k = 1.0 - 2.0 * case.budget.radius.0 * bend;
            let k = ["k ", &significant(k, 2)].concat();
            all("Curvature and refraction, sights unequal".to_owned(), "the whole run", k)
        }
    }
}
