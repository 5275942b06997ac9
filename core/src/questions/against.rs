//! Error against distance: its band, and what is allowed.

use crate::doubt::Estimate;
use crate::quantity::show::{Round, Show};
use crate::quantity::unit::Quantity;
use crate::question::figure::{Band, Figure, Mark, Reading, Series, Stroke, axis};

/// Points of a line.
const POINTS: u32 = 60;
/// Height of the picture to either side, in what is allowed.
const HEIGHT: f64 = 2.2;

/// What is drawn.
pub struct Against<'a> {
    /// Error at a distance.
    pub error: &'a dyn Fn(f64) -> Estimate,
    /// Distance at the right edge.
    pub end: f64,
    /// To either side.
    pub allowed: f64,
    /// Distances that are marked, with their words.
    pub at: Vec<(f64, String)>,
    /// More lines.
    pub beside: Vec<Line<'a>>,
}

/// A line beside the band.
pub struct Line<'a> {
    /// For the legend.
    pub name: &'static str,
    /// How it is drawn.
    pub stroke: Stroke,
    /// Error at a distance.
    pub error: &'a dyn Fn(f64) -> f64,
}

impl Against<'_> {
    /// The picture; title, description and what the error is called are its question's.
    pub fn draw(&self, show: Show, what: &str, (title, description): (&str, String), table: &'static str) -> Figure {
        let height = HEIGHT * self.allowed;
        let x = |d: f64| (d / self.end).clamp(0.0, 1.0);
        // Beyond the frame a line runs along its edge, so that it is seen to leave.
        let y = |e: f64| (0.5 + e / (2.0 * height)).clamp(0.0, 1.0);
        let distances: Vec<f64> = (0..=POINTS).map(|i| self.end * f64::from(i) / f64::from(POINTS)).collect();
        let errors: Vec<Estimate> = distances.iter().map(|d| (self.error)(*d)).collect();
        let xs: Vec<f64> = distances.iter().map(|d| x(*d)).collect();
        let (small, long) = (show.small_unit(height), Quantity::Distance.usual(show.0));
        let allowed = show.entered(self.allowed);
        let mut marks = vec![
            Mark::Level { y: y(self.allowed), label: format!("+ {allowed} allowed") },
            Mark::Level { y: y(-self.allowed), label: format!("− {allowed} allowed") },
        ];
        let inside = self.at.iter().filter(|at| at.0 <= self.end);
        marks.extend(inside.map(|(d, words)| Mark::Upright { x: x(*d), label: words.clone() }));
        let readings = distances.iter().zip(&errors).skip(1).map(|(d, e)| Reading {
            at: x(*d),
            text: format!(
                "{}: {} to {}",
                show.distance(*d, Round::Near),
                show.small(e.bias - e.below, e.half()),
                show.small(e.bias + e.above, e.half())
            ),
        });
        let heights = |of: &dyn Fn(&Estimate) -> f64| -> Vec<f64> { errors.iter().map(|e| y(of(e))).collect() };
        let series = |name: &str, stroke, y: Vec<f64>| Series { name: name.to_owned(), stroke, x: xs.clone(), y };
        let mut lines = vec![series("bias", Stroke::Heavy, heights(&|e| e.bias))];
        for Line { name, stroke, error } in &self.beside {
            lines.push(series(name, *stroke, distances.iter().map(|d| y(error(*d))).collect()));
        }
        let none = Series { name: "no error".to_owned(), stroke: Stroke::Thin, x: vec![0.0, 1.0], y: vec![y(0.0); 2] };
        lines.push(none);
        Figure {
            title: title.to_owned(),
            description,
            x: axis(format!("Distance, {}", long.symbol), 0.0, long.from_si(self.end).unwrap_or(1.0)),
            y: axis(
                format!("{what}, {}", small.symbol),
                small.from_si(-height).unwrap_or(-1.0),
                small.from_si(height).unwrap_or(1.0),
            ),
            bands: vec![Band {
                name: "bias and doubt".to_owned(),
                x: xs.clone(),
                low: heights(&|e| e.bias - e.below),
                high: heights(&|e| e.bias + e.above),
            }],
            series: lines,
            marks,
            readings: readings.collect(),
            note: format!("Drawn to {} either way; what lies beyond runs along the edge.", show.entered(height)),
            table,
        }
    }
}
