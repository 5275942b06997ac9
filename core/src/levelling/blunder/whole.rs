//! Slips that many readings share: marks, the staff, the line of sight.

use super::{End, Known, Side, Sieve, Slip, digits};
use crate::doubt::Estimate;
use crate::levelling::{Run, Sight};

/// How far a staff slips together at a joint, metres, 95 %: our assumption, no source.
const SLIP: f64 = 0.03;

/// Offers every one of them; `steps` of the last decimal of a reading make a unit.
pub fn offer(run: &Run, known: &Known, steps: f64, sieve: &mut Sieve) {
    if let Some(close) = run.close
        && close != run.start
    {
        // A mark may be given finer than the staff is read.
        let steps = digits::steps([run.start, close].into_iter(), known.unit, steps);
        mark(End::Start, run.start, 1.0, known.unit / steps, steps as i64, sieve);
        mark(End::Close, close, -1.0, known.unit / steps, steps as i64, sieve);
    }
    sections(run, known, sieve);
    sights(run, known, sieve);
}

/// The level of a mark; `lift` is what a level too great by one does to the misclosure.
fn mark(end: End, booked: f64, lift: f64, step: f64, unit: i64, sieve: &mut Sieve) {
    let sign = if booked < 0.0 { -1.0 } else { 1.0 };
    let number = digits::whole(booked, step);
    let mut offer = |more: i64, swapped| {
        let off = sign * more as f64 * step;
        sieve.offer(Slip::Mark { end, level: booked + off, swapped }, -lift * off);
    };
    digits::swaps(number, unit, |more| offer(more, true));
    digits::misreads(number, unit, |more| offer(more, false));
}

/// Back sights with +1, fore sights with −1.
fn carrying(run: &Run) -> impl Iterator<Item = (f64, Sight)> {
    run.setups.iter().flat_map(|setup| [Some((1.0, setup.back)), setup.fore.map(|fore| (-1.0, fore))]).flatten()
}

/// The staff's sections.
fn sections(run: &Run, known: &Known, sieve: &mut Sieve) {
    let mut below = 0.0;
    let mut seen: Vec<f64> = vec![];
    for &joint in known.joints {
        let section = joint - below;
        // The lowest section cannot be left undrawn, and a second one of the same length looks like the first.
        let new = below > 0.0 && !seen.iter().any(|length| (length - section).abs() < 1e-6);
        let above = |side: f64| carrying(run).any(|(lift, sight)| lift == side && sight.reading > joint);
        for (side, lift) in [(Side::Back, 1.0), (Side::Fore, -1.0)] {
            if new && above(lift) {
                sieve.offer(Slip::Undrawn { section, side }, lift * section);
            }
        }
        if new {
            seen.push(section);
        }
        // A staff that stood head down reads too much downwards.
        let reach = |(lift, sight): (f64, Sight)| {
            if sight.reading.abs() > joint { lift * sight.reading.signum() } else { 0.0 }
        };
        let lever: f64 = carrying(run).map(reach).sum();
        // It slides together and never apart.
        if lever * sieve.misclosure > 0.0 {
            sieve.offer_sized(|by| Slip::Slipped { joint, by }, Estimate::even(0.0, SLIP), lever);
        }
        below = joint;
    }
}

/// Back and fore sights that were not equally long; nothing where a distance is missing.
fn sights(run: &Run, known: &Known, sieve: &mut Sieve) {
    let (mut plain, mut squares) = (0.0, 0.0);
    for (lift, sight) in carrying(run) {
        let Some(distance) = sight.distance else { return };
        plain += lift * distance;
        squares += lift * distance * distance;
    }
    sieve.offer_sized(Slip::Collimation, known.collimation, plain);
    sieve.offer_sized(Slip::Curvature, known.bend, squares);
}
