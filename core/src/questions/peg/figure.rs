//! Collimation error test by test, with its doubt and the limit.

use super::case::{Case, tilt};
use super::log::Past;
use crate::quantity::show::Show;
use crate::quantity::unit::Quantity;
use crate::question::figure::{Axis, Band, Figure, Mark, Reading, Series, Stroke, Tick, axis};

/// Tests that are drawn at most: the last ones.
const SHOWN: usize = 12;
/// Places there are at least, so that one test does not fill the picture.
const PLACES: usize = 3;

/// A test as it is drawn.
struct Test<'a> {
    name: &'a str,
    value: f64,
    low: f64,
    high: f64,
}

pub fn draw(case: &Case, past: &[Past], show: Show) -> Figure {
    let earlier = past.iter().skip(past.len().saturating_sub(SHOWN - 1));
    let earlier =
        earlier.map(|p| Test { name: &p.name, value: p.value, low: p.value - p.doubt, high: p.value + p.doubt });
    let error = &case.error;
    let now =
        Test { name: "this test", value: error.bias, low: error.bias - error.below, high: error.bias + error.above };
    let tests: Vec<Test> = earlier.chain([now]).collect();
    let first = past.len() + 2 - tests.len();
    let places = tests.len().max(PLACES) as f64;
    let widest = tests.iter().fold(case.limit, |most, t| most.max(-t.low).max(t.high));
    let height = 1.2 * widest;
    let y = |value: f64| (0.5 + value / (2.0 * height)).clamp(0.0, 1.0);
    let middle = |i: usize| (i as f64 + 0.5) / places;
    // Each test is drawn as wide as most of its place, so that a single one is seen too.
    let ends = |i: usize| [middle(i) - 0.3 / places, middle(i) + 0.3 / places];
    let xs: Vec<f64> = (0..tests.len()).flat_map(ends).collect();
    let twice = |of: &dyn Fn(&Test) -> f64| -> Vec<f64> { tests.iter().flat_map(|test| [y(of(test)); 2]).collect() };
    let allowed = tilt(show, case.limit, case.limit);
    let mut marks = vec![
        Mark::Level { y: y(case.limit), label: format!("+ {allowed} allowed") },
        Mark::Level { y: y(-case.limit), label: format!("− {allowed} allowed") },
    ];
    marks.push(Mark::Point { x: middle(tests.len() - 1), y: y(error.bias), label: "this test".to_owned() });
    let words = |test: &Test| {
        let shown = |si: f64| tilt(show, si, (test.high - test.low) / 2.0);
        format!("{}: {}, from {} to {}", test.name, shown(test.value), shown(test.low).text, shown(test.high).text)
    };
    let readings = tests.iter().enumerate().map(|(i, test)| Reading { at: middle(i), text: words(test) });
    let unit = Quantity::Collimation.usual(show.0);
    let end = unit.from_si(height).unwrap_or(1.0);
    let ticks = (0..places as usize).map(|i| Tick { at: middle(i), text: (first + i).to_string() });
    Figure {
        title: "The level, test by test".to_owned(),
        description: format!(
            "Collimation error of this level, test by test: {}; {allowed} to either side is allowed.",
            tests.last().map_or(String::new(), words)
        ),
        x: Axis { label: "Test".to_owned(), ticks: ticks.collect() },
        y: axis(format!("Collimation error, {}", unit.symbol), -end, end),
        bands: vec![Band { name: "doubt".to_owned(), x: xs.clone(), low: twice(&|t| t.low), high: twice(&|t| t.high) }],
        series: vec![
            Series { name: "collimation error".to_owned(), stroke: Stroke::Heavy, x: xs, y: twice(&|t| t.value) },
            Series { name: "none".to_owned(), stroke: Stroke::Thin, x: vec![0.0, 1.0], y: vec![y(0.0), y(0.0)] },
        ],
        marks,
        readings: readings.collect(),
        note: "Tests in the order of the log; the last is this one.".to_owned(),
        table: "trend",
    }
}
