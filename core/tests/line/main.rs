//! A line over ground: held to 100-digit arithmetic, to figures of others, to sampling, and to what holds for every
//! line.
//!
//! The rows are made by `tests/tables/make_line_rows.py`, which says what its columns are. Tolerances are ulps of our
//! own arithmetic, digits that a source prints, or errors that the function's own text states: each says which.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

mod air;
mod chances;
mod figures;
mod profiles;
mod properties;
#[path = "../common/random.rs"]
mod random;

use farstaff::line::Line;
use farstaff::line::profile::Profile;
use farstaff::quantity::{Coefficient, Metres};
use random::Random;
use std::collections::BTreeMap;

const R: Metres = Metres(6_371_000.0);
const ROWS: &str = include_str!("../rows/line.tsv");

/// What is promised, in ulps of the reference times the conditioning of the row. A promise that is broken fails, and so
/// does one that is looser than what is measured.
const PROMISES: &[(&str, f64)] = &[
    // Beside a station, at k of −9: the logarithm and the power do not quite undo each other.
    ("height", 6.0),
    ("space", 6.0),
    ("handbook", 2.0),
    ("grazing_k", 5.0),
    ("raise_a", 3.0),
    ("raise_both", 4.0),
];

fn line(a: f64, b: f64, s: f64, k: f64) -> Line {
    Line::new(Metres(a), Metres(b), Metres(s), Coefficient(k), R).unwrap()
}

/// Distances and heights of a profile that owns them.
#[derive(Debug, Clone, Default)]
struct Ground {
    at_m: Vec<f64>,
    top_m: Vec<f64>,
}

impl Ground {
    fn of(points: impl IntoIterator<Item = (f64, f64)>) -> Ground {
        let (at_m, top_m) = points.into_iter().unzip();
        Ground { at_m, top_m }
    }
    fn profile(&self) -> Profile<'_> {
        Profile { at_m: &self.at_m, top_m: &self.top_m }
    }
}

impl Random {
    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.share()
    }
    /// Standard normal, by Box and Muller.
    fn normal(&mut self) -> f64 {
        let size = libm::sqrt(-2.0 * libm::log(self.share()));
        size * libm::cos(2.0 * std::f64::consts::PI * self.share())
    }
}

/// What core makes of a row.
fn core(function: &str, n: &[f64]) -> Option<f64> {
    let of = |k: f64| Line::new(Metres(n[0]), Metres(n[1]), Metres(n[2]), Coefficient(k), Metres(n[n.len() - 1]));
    let x = Metres(n[3]);
    let one = |top: usize| Profile { at_m: &n[3..4], top_m: &n[top..=top] };
    Some(match function {
        "height" => of(n[4])?.height(x).0,
        "space" => of(0.0)?.height(x).0,
        "handbook" => of(n[4])?.handbook_height(x).0,
        "grazing_k" => of(0.13)?.grazing_k(one(4), Metres(n[5]))?.0,
        "raise_a" => of(n[6])?.raise_a(one(4), Metres(n[5]))?.0,
        "raise_both" => of(n[6])?.raise_both(one(4), Metres(n[5]))?.0,
        _ => panic!("no such function: {function}"),
    })
}

#[test]
fn promises_are_kept_and_no_looser_than_measured() {
    let mut worst: BTreeMap<&str, (f64, &str)> = BTreeMap::new();
    let hunt = std::env::var("LINE_ROWS").map(|path| std::fs::read_to_string(path).unwrap());
    for row in hunt.as_deref().unwrap_or(ROWS).lines() {
        let cells: Vec<&str> = row.split('\t').collect();
        let [function, arguments @ .., reference, residual, conditioning] = &cells[..] else { panic!("{row}") };
        let n: Vec<f64> = arguments.iter().map(|text| text.parse().unwrap()).collect();
        let [near, residual, conditioning] = [reference, residual, conditioning].map(|t| t.parse::<f64>().unwrap());
        let ulp = f64::from_bits(near.abs().to_bits() >> 52 << 52) * f64::EPSILON;
        let error = ((core(function, &n).unwrap_or(f64::INFINITY) - near) / ulp - residual).abs() / conditioning;
        let entry = worst.entry(function).or_insert((0.0, row));
        if error.is_nan() || error > entry.0 {
            *entry = (error, row);
        }
    }
    let mut wrong = vec![];
    for &(function, promised) in PROMISES {
        let (measured, row) = worst.remove(function).unwrap_or((f64::NAN, "no rows"));
        println!("{function:12} promised {promised} ulp, measured {measured:.2} at {row}");
        if measured.ceil() != promised {
            wrong.push(format!("{function}: promised {promised} ulp, measured {measured:.2}"));
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
    assert!(worst.is_empty(), "rows without a promise: {:?}", worst.keys());
}
