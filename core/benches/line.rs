//! How long the least clearance over a profile takes, beside one pass of plain sums over the same two arrays:
//! `cargo bench -p farstaff --bench line`. The same points in NumPy and in plain JavaScript:
//! tests/tables/bench_line.py, tests/bench_line.mjs. Times depend on the machine and on what else it does: they are
//! printed and judged by people.

#![allow(clippy::expect_used, reason = "a benchmark may panic")]

use farstaff::line::Line;
use farstaff::line::profile::Profile;
use farstaff::quantity::{Coefficient, Metres};
use std::hint::black_box;
use std::time::Instant;

const LENGTH: f64 = 50e3;
const ROUNDS: u32 = 25;

/// A hill under a line of 50 km, three metres rough; the noise is the linear congruence of Numerical Recipes (from
/// memory).
fn hill(n: u32) -> (Vec<f64>, Vec<f64>) {
    let mut state = 1_u32;
    (0..n)
        .map(|i| {
            state = state.wrapping_mul(1_664_525).wrapping_add(1_013_904_223);
            let share = (f64::from(i) + 0.5) / f64::from(n);
            let rough = f64::from(state) / 4_294_967_296.0;
            (LENGTH * share, 100.0 - 240.0 * (share - 0.6) * (share - 0.6) + 3.0 * rough)
        })
        .unzip()
}

fn sums(at_m: &[f64], top_m: &[f64]) -> (f64, f64) {
    at_m.iter().zip(top_m).fold((0.0, 0.0), |(x, top), (new_x, new_top)| (x + new_x, top + new_top))
}

/// The fastest of many rounds, nanoseconds: what disturbs only adds.
fn nanoseconds<T>(mut work: impl FnMut() -> T) -> f64 {
    let once = |work: &mut dyn FnMut() -> T| {
        let start = Instant::now();
        black_box(work());
        start.elapsed().as_secs_f64() * 1e9
    };
    (0..ROUNDS).map(|_| once(&mut work)).fold(f64::INFINITY, f64::min)
}

fn main() {
    let line = Line::new(Metres(140.0), Metres(180.0), Metres(LENGTH), Coefficient(0.13), Metres(6_371_000.0))
        .expect("a line");
    println!("{:>9} {:>12} {:>12} {:>6} {:>9}  least", "points", "sums, µs", "least, µs", "ratio", "ns/point");
    let row = |n: u32, at_m: &[f64], top_m: &[f64]| {
        let plain = nanoseconds(|| sums(black_box(at_m), black_box(top_m)));
        let time = nanoseconds(|| line.least(Profile { at_m: black_box(at_m), top_m: black_box(top_m) }));
        let least = line.least(Profile { at_m, top_m }).expect("points");
        println!(
            "{n:>9} {:>12.1} {:>12.1} {:>6.2} {:>9.2}  {:.9} m at {:.3} m",
            plain / 1e3,
            time / 1e3,
            time / plain,
            time / f64::from(n),
            least.clearance.0,
            least.at.0,
        );
    };
    for n in [1000, 10_000, 100_000, 1_000_000, 4_000_000] {
        let (at_m, top_m) = hill(n);
        row(n, &at_m, &top_m);
    }
    println!("ground that follows the line to a nanometre, so that every point is computed exactly:");
    let (at_m, rough) = hill(100_000);
    let top_m: Vec<f64> =
        at_m.iter().zip(&rough).map(|(x, rough)| line.height(Metres(*x)).0 - 1.0 - 1e-12 * rough).collect();
    row(100_000, &at_m, &top_m);
}
