//! Slips at one reading or one setup.

use super::{Known, Place, Side, Sieve, Slip, digits, rise};
use crate::doubt::Estimate;
use crate::levelling::{Run, Setup, Sight};

/// Offers every one of them; `steps` of the last decimal make a unit.
pub fn offer(run: &Run, known: &Known, steps: f64, sieve: &mut Sieve) {
    for tenths in [1.0, 0.1, 0.01] {
        sieve.offer(Slip::Round(tenths * known.unit), tenths * known.unit);
        sieve.offer(Slip::Round(-tenths * known.unit), -tenths * known.unit);
    }
    for (setup, booked) in run.setups.iter().enumerate() {
        one(Place { setup, side: Side::Back }, booked.back, steps, known, sieve);
        if let Some(fore) = booked.fore {
            one(Place { setup, side: Side::Fore }, fore, steps, known, sieve);
            columns(setup, booked, fore, sieve);
        }
    }
}

/// Slips at one reading.
fn one(at: Place, sight: Sight, steps: f64, known: &Known, sieve: &mut Sieve) {
    // A back sight read too great lifts all that follows, a fore sight lowers it.
    let lift = if at.side == Side::Back { 1.0 } else { -1.0 };
    let booked = sight.reading;
    let on_staff = |reading: f64| reading.abs() <= known.staff;
    let (step, sign) = (known.unit / steps, if booked < 0.0 { -1.0 } else { 1.0 });
    digits::swaps(digits::whole(booked, step), steps as i64, |more| {
        let reading = booked + sign * more as f64 * step;
        if on_staff(reading) {
            sieve.offer(Slip::Swapped { at, reading }, lift * (booked - reading));
        }
    });
    if booked != 0.0 {
        sieve.offer(Slip::Inverted(at), lift * 2.0 * booked);
    }
    let half = sight.distance.unwrap_or(0.0) / (2.0 * known.stadia);
    for off in [half, -half] {
        if off != 0.0 && on_staff(booked - off) {
            let wire = |off| Slip::Wire { at, reading: booked - off };
            sieve.offer_sized(wire, Estimate::even(off, known.distance_doubt * half), lift);
        }
    }
}

/// Readings of a setup that stand in the wrong column.
fn columns(setup: usize, booked: &Setup, fore: Sight, sieve: &mut Sieve) {
    sieve.offer(Slip::Exchanged(setup), 2.0 * rise(booked));
    for (inter, sight) in booked.inters.iter().enumerate() {
        sieve.offer(Slip::Intermediate { setup, inter }, sight.reading - fore.reading);
    }
}
