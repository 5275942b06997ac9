//! Reach and imbalance against values from 50-digit arithmetic (coverage 2, so each half-width is twice the standard one).
#![allow(
    clippy::unwrap_used,
    clippy::excessive_precision,
    reason = "a test may panic; references keep their printed digits"
)]

use farstaff::quantity::{Metres, Tilt};
use farstaff::sight::{SightDoubt, imbalance, reach};
use std::f64::consts::PI;

const R: Metres = Metres(6_371_000.0);
const ARC_SECOND: f64 = PI / 648_000.0;

fn close(got: Option<Metres>, reference: f64, tolerance: f64) {
    assert!((got.unwrap().0 - reference).abs() <= tolerance, "{got:?} {reference}");
}

#[test]
fn longest_sight() {
    let only_k = SightDoubt { reading: Metres(0.0), reading_growth: Tilt(0.0), collimation: Tilt(0.0), k: 2.0 };
    close(reach(Metres(0.001), only_k, R), 79.8185442112295, 1e-12);
    let all =
        SightDoubt { reading: Metres(0.0004), reading_growth: Tilt(2e-5), collimation: Tilt(0.6 * ARC_SECOND), k: 1.0 };
    close(reach(Metres(0.001), all, R), 44.6810678199985, 1e-12);
    assert_eq!(reach(Metres(0.0003), all, R), None);
}

#[test]
fn greatest_imbalance() {
    // 14.154 m: three decimals printed.
    let d =
        SightDoubt { reading: Metres(0.0002), reading_growth: Tilt(0.0), collimation: Tilt(4.0 * ARC_SECOND), k: 2.0 };
    close(imbalance(Metres(0.0005), Metres(40.0), d, 0.5, R), 14.154, 0.0005);
    // The longest balanced sight, where the imbalance allowed is nothing: 51.2526154852707 m.
    assert!(imbalance(Metres(0.0005), Metres(51.2526), d, 0.5, R).is_some());
    assert_eq!(imbalance(Metres(0.0005), Metres(51.2527), d, 0.5, R), None);
}
