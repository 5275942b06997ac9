//! A picture, as data. Every coordinate is a share of the drawing's width (from the left) or height (from the bottom),
//! 0 to 1, so that the page only scales: it does no arithmetic on a measurement.

use crate::quantity::show::fitting;
use serde::Serialize;

/// A picture; the table of the same name in the answer holds its numbers.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Figure {
    /// What it shows.
    pub title: String,
    /// The same for someone who cannot see it: what can be read off.
    pub description: String,
    /// Across.
    pub x: Axis,
    /// Up.
    pub y: Axis,
    /// Areas, drawn first.
    pub bands: Vec<Band>,
    /// Lines.
    pub series: Vec<Series>,
    /// Single places, spans and limits.
    pub marks: Vec<Mark>,
    /// What can be read off, from left to right, where a finger or an arrow key asks.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub readings: Vec<Reading>,
    /// Exaggeration or scale, in words.
    pub note: String,
    /// Name of the table with the same data.
    pub table: &'static str,
}

/// What a picture says at one place.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Reading {
    /// Place, across.
    pub at: f64,
    /// Words with figures.
    pub text: String,
}

/// An axis.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Axis {
    /// What runs along it, with unit.
    pub label: String,
    /// Where a figure stands, and which.
    pub ticks: Vec<Tick>,
}

/// A figure on an axis.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Tick {
    /// Place, 0 to 1.
    pub at: f64,
    /// Text.
    pub text: String,
}

/// An area between two lines.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Band {
    /// What it is, for the legend.
    pub name: String,
    /// Across.
    pub x: Vec<f64>,
    /// Lower edge at each x.
    pub low: Vec<f64>,
    /// Upper edge at each x.
    pub high: Vec<f64>,
}

/// A line.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Series {
    /// What it is, for the legend.
    pub name: String,
    /// How it is drawn, so that lines differ without colour.
    pub stroke: Stroke,
    /// Across.
    pub x: Vec<f64>,
    /// Up.
    pub y: Vec<f64>,
}

/// How a line is drawn.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
#[serde(rename_all = "snake_case")]
pub enum Stroke {
    /// Heavy, unbroken.
    Heavy,
    /// Thin, unbroken.
    Thin,
    /// Dashed.
    Dashed,
    /// Dotted.
    Dotted,
}

/// A single place.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
#[serde(tag = "type", rename_all = "snake_case")]
pub enum Mark {
    /// A line right across at this height: a limit.
    Level {
        /// Height.
        y: f64,
        /// Words.
        label: String,
    },
    /// A line from bottom to top at this place.
    Upright {
        /// Place.
        x: f64,
        /// Words.
        label: String,
    },
    /// A gap from one height to another, measured at this place.
    Span {
        /// Place.
        x: f64,
        /// From.
        from: f64,
        /// To.
        to: f64,
        /// Words.
        label: String,
    },
    /// A staff standing from one height to another.
    Staff {
        /// Place.
        x: f64,
        /// Foot.
        from: f64,
        /// Top.
        to: f64,
    },
    /// A point.
    Point {
        /// Place.
        x: f64,
        /// Height.
        y: f64,
        /// Words.
        label: String,
    },
}

/// An axis from `low` to `high` with four to eight round figures on it.
pub fn axis(label: String, low: f64, high: f64) -> Axis {
    let span = high - low;
    let rough = libm::pow(10.0, libm::floor(libm::log10(span / 4.0)));
    let step = [5.0, 2.0, 1.0].iter().map(|m| m * rough).find(|s| span / s >= 4.0).unwrap_or(rough);
    let first = libm::ceil(low / step);
    let count = libm::floor((high - first * step) / step);
    let places = fitting(step, 1);
    let mut ticks = vec![];
    let mut i = 0.0;
    while i <= count && ticks.len() < 12 {
        let value = (first + i) * step;
        ticks.push(Tick {
            at: ((value - low) / span).clamp(0.0, 1.0),
            text: crate::quantity::show::places(value, places),
        });
        i += 1.0;
    }
    Axis { label, ticks }
}
