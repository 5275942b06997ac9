//! Level line, horizontal line and line of sight between level and staff, with the three gaps at the staff.

use super::Worth;
use crate::quantity::show::{Round, Show, significant};
use crate::quantity::unit::Quantity;
use crate::question::figure::{Axis, Figure, Mark, Series, Stroke, axis};

/// Points of a line.
const POINTS: u32 = 40;
/// Where along the drawing the staff stands; right of it the gaps.
const STAFF: f64 = 0.72;
/// Height of the drawing over its width, about, as the page draws it.
const SHAPE: f64 = 0.62;

/// Heights are drawn against the horizontal line, gaps in true proportion to each other.
pub fn draw(worth: &Worth, show: Show) -> Figure {
    // The exact gaps at the staff, each spread along the line as the square of the distance.
    let level = -worth.curvature;
    let sight = -worth.refraction;
    let (low, high) = (level.min(sight), sight.max(0.0));
    let span = if high > low { high - low } else { 1e-9 };
    let (low, high) = (low - 0.12 * span, high + 0.12 * span);
    let y = |h: f64| (h - low) / (high - low);
    let shares: Vec<f64> = (0..=POINTS).map(|i| f64::from(i) / f64::from(POINTS)).collect();
    let line = |name: &str, stroke, end: f64| Series {
        name: name.to_owned(),
        stroke,
        x: shares.iter().map(|t| t * STAFF).collect(),
        y: shares.iter().map(|t| y(end * t * t)).collect(),
    };
    let gap = |place: f64, from: f64, to: f64, name: &str, size: f64| Mark::Span {
        x: STAFF + place * (1.0 - STAFF),
        from: y(from),
        to: y(to),
        label: format!("{name} {}", show.own(size)),
    };
    let d = worth.distance.0;
    let unit = Quantity::Distance.usual(show.0);
    let small = show.small_unit(span);
    let tall = d / STAFF / (high - low) * SHAPE;
    // Right of the staff there is no distance: only the gaps.
    let across = axis(format!("Distance, {}", unit.symbol), 0.0, unit.from_si(d / STAFF).unwrap_or(1.0));
    let below = if worth.combined.bias < 0.0 { "below" } else { "above" };
    Figure {
        title: "The gaps at the staff".to_owned(),
        description: format!(
            "At {} the level line lies {} below the horizontal line, the line of sight {} {} it, and so {} {below} the level line.",
            show.distance(d, Round::Near),
            show.own(worth.curvature),
            show.own(worth.refraction.abs()),
            if worth.refraction < 0.0 { "above" } else { "below" },
            show.own(worth.combined.bias.abs()),
        ),
        x: Axis { ticks: across.ticks.into_iter().filter(|t| t.at <= STAFF).collect(), ..across },
        y: axis(
            format!("Against the horizontal line, {}", small.symbol),
            small.from_si(low).unwrap_or(-1.0),
            small.from_si(high).unwrap_or(1.0),
        ),
        bands: vec![],
        series: vec![
            line("line of sight", Stroke::Heavy, sight),
            line("horizontal line", Stroke::Dashed, 0.0),
            line("level line", Stroke::Thin, level),
        ],
        marks: vec![
            Mark::Staff { x: STAFF, from: 0.02, to: 0.98 },
            gap(0.2, level, 0.0, "curvature", worth.curvature),
            gap(0.5, sight.min(0.0), sight.max(0.0), "refraction", worth.refraction),
            gap(0.8, level.min(sight), level.max(sight), "together", worth.combined.bias),
        ],
        readings: vec![],
        note: format!(
            "Heights are drawn about {} times larger than lengths; the gaps are in proportion.",
            significant(tall, 1)
        ),
        table: "values",
    }
}
