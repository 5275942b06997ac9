//! The search for a slip, held to runs into which one was planted.
//!
//! **Identifiable** means, in so many words: the run shows it (|w| > 3σ, σ the standard deviation of an honest misclosure
//! of that run), and at most two other single edits of the listed kinds explain w as well within noise. An edit explains
//! w within noise when it leaves at most 2σ; one of unknown size when w lies within 2 of its own standard deviations
//! √(σ² + L²τ²). Which edits there are is enumerated here, digit by digit, without the code under test and without its
//! order. So three places can hold all that the numbers cannot tell apart, and what is tested is whether they do. The
//! planted edit itself need not leave 2σ, so one run in twenty is lost unless the order makes up for it. That no other
//! edit at all explains w is rarer; it is printed beside.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

mod edits;
mod plant;
#[path = "../common/random.rs"]
mod random;

use edits::{Edit, applied, closes, edits};
use farstaff::doubt::Estimate;
use farstaff::levelling::blunder::{Candidate, Known, Slip, candidates};
use farstaff::levelling::{Run, Setup, Sight};
use plant::{KINDS, planted, staffed};
use random::Random;
use std::time::Instant;

/// What the tests know of every run: a staff of four sections, distances by the wires, a level within 20″, k within 3.
pub fn known(sigma: f64) -> Known<'static> {
    Known {
        allowed: 3.0 * sigma,
        unit: 1.0,
        staff: 5.0,
        joints: &[1.3, 2.55, 3.8],
        stadia: 100.0,
        distance_doubt: 0.005,
        collimation: Estimate::even(0.0, 20.0 / 206_264.8),
        bend: Estimate::even(0.0, 3.0 / (2.0 * 6_371_000.0)),
    }
}

/// The same slip, whatever its size was found to be.
fn same(a: &Slip, b: &Slip) -> bool {
    let near = |x: f64, y: f64| (x - y).abs() < 1e-6;
    match (a, b) {
        (Slip::Round(x), Slip::Round(y)) => near(*x, *y),
        (Slip::Swapped { at, reading }, Slip::Swapped { at: to, reading: other }) => at == to && near(*reading, *other),
        // Reckoned from a measured distance: nearer to this wire than to the other.
        (Slip::Wire { at, reading }, Slip::Wire { at: to, reading: other }) => {
            at == to && (reading - other).abs() < 0.02
        }
        (Slip::Slipped { joint, .. }, Slip::Slipped { joint: other, .. }) => near(*joint, *other),
        (Slip::Undrawn { section, side }, Slip::Undrawn { section: other, side: to }) => {
            near(*section, *other) && side == to
        }
        (Slip::Mark { end, level, swapped }, Slip::Mark { end: to, level: other, swapped: how }) => {
            end == to && swapped == how && near(*level, *other)
        }
        (Slip::Collimation(_), Slip::Collimation(_)) | (Slip::Curvature(_), Slip::Curvature(_)) => true,
        _ => a == b,
    }
}

/// How many edits other than the planted one explain the misclosure within noise.
fn rivals(edits: &[Edit], truth: &Slip, misclosure: f64, sigma: f64) -> usize {
    let explains = |edit: &&Edit| (misclosure - edit.moved).abs() <= 2.0 * libm::hypot(sigma, edit.spread);
    edits.iter().filter(explains).filter(|edit| !same(&edit.slip, truth)).count()
}

#[derive(Default, Clone, Copy)]
struct Tally {
    runs: usize,
    identifiable: usize,
    found: usize,
    alone: usize,
    alone_first: usize,
    anyhow: usize,
}

#[test]
fn a_planted_blunder_is_among_the_first_three() {
    let (mut random, mut tallies) = (Random(0x5EED_B00C), [Tally::default(); KINDS.len()]);
    while tallies.iter().map(|tally| tally.identifiable).sum::<usize>() < 10_000 {
        let kind = random.below(KINDS.len());
        let Some((run, sigma, truth)) = planted(&mut random, kind) else { continue };
        let misclosure = closes(&run);
        if misclosure.abs() <= 3.0 * sigma {
            continue;
        }
        let known = known(sigma);
        let found = candidates(&run, misclosure, &known);
        let place = found.iter().position(|candidate| same(&candidate.slip, &truth)).unwrap_or(usize::MAX);
        let others = rivals(&edits(&run, &known), &truth, misclosure, sigma);
        let tally = &mut tallies[kind];
        tally.runs += 1;
        tally.anyhow += usize::from(place < 3);
        tally.identifiable += usize::from(others <= 2);
        tally.found += usize::from(others <= 2 && place < 3);
        tally.alone += usize::from(others == 0);
        tally.alone_first += usize::from(others == 0 && place == 0);
    }
    let line = |name: &str, t: &Tally| {
        let share = |part: usize, of: usize| 100.0 * part as f64 / of.max(1) as f64;
        println!(
            "{name:34} {:6} runs; identifiable {:5} ({:5.1} %), of these among the first three {:5.1} %; \
             no rival {:5}, of these first {:5.1} %; of all runs among the first three {:5.1} %",
            t.runs,
            t.identifiable,
            share(t.identifiable, t.runs),
            share(t.found, t.identifiable),
            t.alone,
            share(t.alone_first, t.alone),
            share(t.anyhow, t.runs)
        );
    };
    let mut all = Tally::default();
    for (name, t) in KINDS.iter().zip(&tallies) {
        line(name, t);
        assert!(t.identifiable < 100 || t.found * 10 >= t.identifiable * 9, "{name}");
        all.runs += t.runs;
        all.identifiable += t.identifiable;
        all.found += t.found;
        all.alone += t.alone;
        all.alone_first += t.alone_first;
        all.anyhow += t.anyhow;
    }
    line("all", &all);
    assert!(all.found * 100 >= all.identifiable * 95, "{} of {}", all.found, all.identifiable);
}

#[test]
fn each_candidate_leaves_what_it_says() {
    let (mut random, mut seen) = (Random(7), 0);
    for turn in 0..600 {
        let Some((run, sigma, _)) = planted(&mut random, turn % KINDS.len()) else { continue };
        // A wide net, so that every kind is caught.
        let known = Known { allowed: 60.0 * sigma, ..known(sigma) };
        for Candidate { slip, left, .. } in candidates(&run, closes(&run), &known) {
            // What some reading would be, or a staff was, is not in the book.
            let Some(mended) = applied(&run, &slip) else { continue };
            let off = closes(&mended) - left;
            assert!(off.abs() < 1e-9, "{slip:?} leaves {left}, reckoned again {off:e} more");
            seen += 1;
        }
    }
    assert!(seen > 10_000, "{seen}");
}

#[test]
fn candidates_are_those_enumerated_here() {
    let mut random = Random(11);
    for turn in 0..240 {
        let Some((run, sigma, _)) = planted(&mut random, turn % KINDS.len()) else { continue };
        let known = Known { allowed: 10.0 * sigma, ..known(sigma) };
        let misclosure = closes(&run);
        let found = candidates(&run, misclosure, &known);
        for edit in &edits(&run, &known) {
            let most = 3.0 * libm::hypot(known.allowed / 3.0, edit.spread);
            if (misclosure - edit.moved).abs() < most - 1e-9 {
                assert!(found.iter().any(|c| same(&c.slip, &edit.slip)), "{:?} is missing", edit.slip);
            }
        }
        for candidate in &found {
            assert!(candidate.left.abs() <= known.allowed + 1e-12);
            assert!(edits(&run, &known).iter().any(|edit| same(&edit.slip, &candidate.slip)), "{candidate:?}");
        }
    }
}

fn plain(reading: f64) -> Sight {
    Sight { reading, distance: Some(30.0) }
}

#[test]
fn digits_as_written() {
    // 0.456 read as 4.056, in a run that would close.
    let setups = vec![Setup { back: plain(4.056), inters: vec![], fore: Some(plain(1.234)) }];
    let run = Run { start: 100.0, close: Some(99.222), setups };
    let found = candidates(&run, 3.6, &known(0.001));
    assert!(found.iter().any(|c| matches!(c.slip, Slip::Swapped { reading, .. } if (reading - 0.456).abs() < 1e-9)));
}

#[test]
fn nothing_explains_what_nothing_explains() {
    let setups = vec![Setup { back: plain(1.111), inters: vec![], fore: Some(plain(2.222)) }];
    let run = Run { start: 100.0, close: Some(100.0), setups };
    let found = candidates(&run, 0.0377, &known(0.0005));
    assert!(found.is_empty(), "{found:?}");
}

#[test]
fn feet_have_digits_of_their_own() {
    const FOOT: f64 = 0.3048;
    let sight = |feet: f64| Sight { reading: feet * FOOT, distance: None };
    // 12.43 ft for 12.34 ft.
    let setups = vec![Setup { back: sight(12.43), inters: vec![], fore: Some(sight(5.55)) }];
    let run = Run { start: 100.0, close: Some(100.0 + 6.79 * FOOT), setups };
    let known = Known { unit: FOOT, ..known(0.001) };
    let found = candidates(&run, 0.09 * FOOT, &known);
    let reading =
        found.iter().find_map(|c| if let Slip::Swapped { reading, .. } = c.slip { Some(reading) } else { None });
    assert!((reading.unwrap() / FOOT - 12.34).abs() < 1e-9, "{found:?}");
}

#[test]
fn any_number_is_borne() {
    for odd in [0.0, -0.0, 1e-300, 1e300, f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        let sight = Sight { reading: odd, distance: Some(odd) };
        let setups = vec![Setup { back: sight, inters: vec![sight], fore: Some(plain(1.0)) }];
        let run = Run { start: odd, close: Some(3.0), setups };
        for allowed in [odd, 0.01] {
            for misclosure in [odd, 0.02] {
                let known = Known { allowed, ..known(0.001) };
                for candidate in candidates(&run, misclosure, &known) {
                    assert!(candidate.left.is_finite(), "{candidate:?}");
                }
            }
        }
    }
}

#[test]
fn ten_thousand_setups() {
    let run = staffed(&mut Random(3), 10_000);
    let start = Instant::now();
    assert!(!candidates(&run, 0.9, &known(0.02)).is_empty());
    println!("10,000 setups: {:?}", start.elapsed());
}
