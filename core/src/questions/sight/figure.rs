//! Error against distance: its band, the allowance and the reach.

use super::case::{Case, Count};
use crate::quantity::show::Round;
use crate::quantity::unit::Quantity;
use crate::question::Asked;
use crate::question::figure::{Band, Figure, Mark, Reading, Series, Stroke, axis};

/// Points of a line.
const POINTS: u32 = 60;

/// Draws it from nought to well beyond both this sight and its reach, up to twice the allowance.
pub fn draw(asked: &Asked, case: &Case) -> Figure {
    let show = asked.show();
    let reach = case.reach(Count::All);
    let flips = reach.filter(|s| !s.open_above).map(|s| s.to);
    let widest = 8.0 * case.distance;
    let end = 1.25 * case.distance.max(flips.filter(|d| *d < widest).unwrap_or(0.0)).max(case.other.unwrap_or(0.0));
    let height = 2.2 * case.allowed;
    let x = |d: f64| (d / end).clamp(0.0, 1.0);
    // Beyond the frame a line runs along its edge, so that it is seen to leave.
    let y = |e: f64| (0.5 + e / (2.0 * height)).clamp(0.0, 1.0);
    let distances: Vec<f64> = (0..=POINTS).map(|i| end * f64::from(i) / f64::from(POINTS)).collect();
    let errors: Vec<_> = distances.iter().map(|d| case.error(*d)).collect();
    let xs: Vec<f64> = distances.iter().map(|d| x(*d)).collect();
    let small = show.small_unit(height);
    let long = Quantity::Distance.usual(show.0);
    let mut marks = vec![
        Mark::Level { y: y(case.allowed), label: format!("+ {} allowed", show.entered(case.allowed)) },
        Mark::Level { y: y(-case.allowed), label: format!("− {} allowed", show.entered(case.allowed)) },
        Mark::Upright {
            x: x(case.distance),
            label: format!("this sight, {}", show.distance(case.distance, Round::Near)),
        },
    ];
    if let Some(d) = flips.filter(|d| *d <= end) {
        marks.push(Mark::Upright { x: x(d), label: format!("reach, {}", show.distance(d, Round::Down)) });
    }
    if let Some(other) = case.other {
        marks.push(Mark::Upright { x: x(other), label: format!("the other, {}", show.distance(other, Round::Near)) });
    }
    let readings = distances.iter().zip(&errors).skip(1).map(|(d, e)| Reading {
        at: x(*d),
        text: format!(
            "{}: {} to {}",
            show.distance(*d, Round::Near),
            show.small(e.bias - e.below, e.half()),
            show.small(e.bias + e.above, e.half())
        ),
    });
    let readings = readings.collect();
    let far = flips.map_or("no distance in view".to_owned(), |d| show.distance(d, Round::Down).to_string());
    let here = case.error(case.distance);
    let description = format!(
        "Error of the reading against the distance. At {} it is expected to be {}, and may be anything from {} to {}; {} to either side is allowed. It leaves what is allowed at: {far}.",
        show.distance(case.distance, Round::Near),
        show.small(here.bias, here.half()),
        show.small(here.bias - here.below, here.half()),
        show.small(here.bias + here.above, here.half()),
        show.entered(case.allowed),
    );
    Figure {
        title: "Error against distance".to_owned(),
        description,
        x: axis(
            format!("Distance, {}", long.symbol),
            long.from_si(0.0).unwrap_or(0.0),
            long.from_si(end).unwrap_or(1.0),
        ),
        y: axis(
            format!("Error, {}", small.symbol),
            small.from_si(-height).unwrap_or(-1.0),
            small.from_si(height).unwrap_or(1.0),
        ),
        bands: vec![Band {
            name: "bias and doubt".to_owned(),
            x: xs.clone(),
            low: errors.iter().map(|e| y(e.bias - e.below)).collect(),
            high: errors.iter().map(|e| y(e.bias + e.above)).collect(),
        }],
        series: vec![
            Series {
                name: "bias".to_owned(),
                stroke: Stroke::Heavy,
                x: xs,
                y: errors.iter().map(|e| y(e.bias)).collect(),
            },
            Series { name: "no error".to_owned(), stroke: Stroke::Thin, x: vec![0.0, 1.0], y: vec![y(0.0), y(0.0)] },
        ],
        marks,
        readings,
        note: format!("Drawn to {} either way; what lies beyond runs along the edge.", show.entered(height)),
        table: "parts",
    }
}
