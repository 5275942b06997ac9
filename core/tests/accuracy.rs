//! How exact each closed form is, in one table, held to 80-digit arithmetic over its declared range, edges included.
//!
//! The rows are made by `tests/tables/make_rows.py`, which says what its columns are. An error is counted in ulps of the
//! reference, times the conditioning of the row where no arithmetic in f64 can do better (the row says so).
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::air::guide::{KRange, Sky, k};
use farstaff::horizon;
use farstaff::quantity::unit::{Quantity, Unit};
use farstaff::quantity::{Coefficient, Metres, Tilt};
use farstaff::ray::{combined, curvature, handbook_combined, refraction};
use farstaff::sight::{SightDoubt, imbalance, reach};
use std::collections::BTreeMap;

/// What is promised, in ulps. A promise that is broken fails, and so does one that is looser than what is measured.
const PROMISES: &[(&str, f64)] = &[
    ("curvature", 4.0),
    ("combined", 3.0),
    ("refraction", 3.0),
    // |1 − k|·s/R from 0.16 up: k beyond −4 or 6 over 200 km, beyond ±30 over 30 km. The plain closed form is a dozen
    // roundings, those of the angle doubled by its square; less takes more than f64, for air that no such line has.
    ("combined_steep", 7.0),
    ("refraction_steep", 7.0),
    ("handbook_combined", 3.0),
    ("dip", 3.0),
    ("horizon", 4.0),
    ("visible_range", 4.0),
    // Beside what an ulp of the distance, or of the horizon, makes of it: the conditioning of its rows.
    ("hidden", 4.0),
    ("hidden_steep", 4.0),
    // A chain of a dozen roundings each, to be shown to four digits: fewer take series of their own.
    ("horizon_line", 5.0),
    ("dip_short", 6.0),
    ("reach", 2.0),
    ("imbalance", 3.0),
    ("ratio_to_si", 1.0),
    ("ratio_from_si", 1.0),
    ("angle_to_si", 3.0),
    ("angle_from_si", 3.0),
    ("inverse_to_si", 1.0),
    ("factor_to_si", 1.0),
    ("factor_from_si", 1.0),
    ("guide_value", 4.0),
    ("guide_low", 3.0),
    ("guide_high", 4.0),
];

const ROWS: &str = include_str!("rows/accuracy.tsv");

/// What core makes of a row; `None` where it says that there is no value.
fn core(function: &str, texts: &[&str]) -> Option<f64> {
    let n: Vec<f64> = texts.iter().filter_map(|t| t.parse().ok()).collect();
    let metres = |i: usize| Metres(n[i]);
    let doubt = |i: usize| SightDoubt {
        reading: metres(i),
        reading_growth: Tilt(n[i + 1]),
        collimation: Tilt(n[i + 2]),
        k: n[i + 3],
    };
    match function {
        "curvature" => Some(curvature(metres(0), metres(1)).0),
        "combined" | "combined_steep" => combined(metres(0), Coefficient(n[1]), metres(2)).map(|m| m.0),
        "refraction" | "refraction_steep" => refraction(metres(0), Coefficient(n[1]), metres(2)).map(|m| m.0),
        "handbook_combined" => Some(handbook_combined(metres(0), Coefficient(n[1]), metres(2)).0),
        "dip" => horizon::dip(metres(0), Coefficient(n[1]), metres(2)).map(|a| a.0),
        "horizon" => horizon::distance(metres(0), Coefficient(n[1]), metres(2)).map(|m| m.0),
        "horizon_line" => horizon::line(metres(0), Coefficient(n[1]), metres(2)).map(|m| m.0),
        "dip_short" => horizon::dip_short(metres(0), metres(1), Coefficient(n[2]), metres(3)).map(|a| a.0),
        "hidden" | "hidden_steep" => horizon::hidden(metres(0), metres(1), Coefficient(n[2]), metres(3)).map(|m| m.0),
        "visible_range" => horizon::visible_range(metres(0), metres(1), Coefficient(n[2]), metres(3)).map(|m| m.0),
        "reach" => reach(metres(0), doubt(1), metres(5)).map(|m| m.0),
        "imbalance" => imbalance(metres(0), metres(1), doubt(2), n[6], metres(7)).map(|m| m.0),
        "guide_value" => Some(guide(texts[0], n[0]).value.0),
        "guide_low" => Some(guide(texts[0], n[0]).low.0),
        "guide_high" => Some(guide(texts[0], n[0]).high.0),
        unit if unit.ends_with("to_si") => find(texts).to_si(n[0]),
        unit if unit.ends_with("from_si") => find(texts).from_si(n[0]),
        _ => panic!("no such function: {function}"),
    }
}

fn guide(sky: &str, height: f64) -> KRange {
    let all = [Sky::Sunny, Sky::Overcast, Sky::ClearNight, Sky::Unknown];
    k(Metres(height), all.into_iter().find(|s| format!("{s:?}") == sky).unwrap())
}

fn find(texts: &[&str]) -> Unit {
    let all = farstaff::quantity::unit::QUANTITIES.iter().map(|q| q.name);
    let quantity: Quantity = all.into_iter().find(|q| format!("{q:?}") == texts[0]).unwrap();
    *quantity.unit(texts[1]).unwrap()
}

/// The error of a row in ulps of the reference over its conditioning; infinite where one has a value and the other none.
fn error(row: &[&str]) -> f64 {
    let [function, arguments @ .., reference, residual, conditioning] = row else { panic!("{row:?}") };
    let Some(got) = core(function, arguments) else {
        return if *reference == "none" { 0.0 } else { f64::INFINITY };
    };
    let Ok(near) = reference.parse::<f64>() else { return f64::INFINITY };
    if near == 0.0 {
        return if got == 0.0 { 0.0 } else { f64::INFINITY };
    }
    // `parse` rounds correctly, so that near + residual is the reference to three digits of an ulp.
    let residual: f64 = residual.parse().unwrap();
    assert!(residual.abs() <= 0.5, "{row:?}");
    let exponent = near.abs().to_bits() >> 52 << 52;
    let ulp = f64::from_bits(exponent) * f64::EPSILON;
    ((got - near) / ulp - residual).abs() / conditioning.parse::<f64>().unwrap()
}

#[test]
fn promises_are_kept_and_no_looser_than_measured() {
    let mut worst: BTreeMap<&str, (f64, &str)> = BTreeMap::new();
    for line in ROWS.lines().filter(|l| !l.starts_with('#')) {
        let row: Vec<&str> = line.split('\t').collect();
        let found = error(&row);
        let entry = worst.entry(row[0]).or_insert((0.0, line));
        if found.is_nan() || found > entry.0 {
            *entry = (found, line);
        }
    }
    let mut wrong = vec![];
    for &(function, promised) in PROMISES {
        let (measured, line) = worst.remove(function).unwrap_or((f64::NAN, "no rows"));
        println!("{function:20} promised {promised} ulp, measured {measured:.2} at {line}");
        if measured.ceil() != promised {
            wrong.push(format!("{function}: promised {promised} ulp, measured {measured:.2} at {line}"));
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
    assert!(worst.is_empty(), "rows without a promise: {:?}", worst.keys());
}
