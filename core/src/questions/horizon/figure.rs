//! The curved surface under the line that grazes it, and what of the target stands below that line.

use super::case::{Case, What};
use crate::quantity::unit::Unit;
use crate::question::figure::{Figure, Mark, Series, Stroke, axis};

/// Points of a line.
const POINTS: u32 = 60;

/// Drawn against the line of sight, by the parabola: eye and horizon at nought, the surface −(√q x − √(2Rh))²/2R.
/// `None` without a horizon.
pub fn draw(case: &Case) -> Option<Figure> {
    let (k, r) = (case.air.k, case.radius.0);
    let at = |what| case.at(what, k.value, case.radius);
    let horizon = at(What::Horizon).filter(|d| d.is_finite())?;
    let root = (2.0 * r * case.eye.0).sqrt();
    let surface = |k: f64, x: f64| {
        let below = (1.0 - k).sqrt() * x - root;
        -below * below / (2.0 * r)
    };
    let level = |x: f64| surface(k.value.0, x);
    let place = case.distance.map(|d| d.0).or(at(What::Range)).unwrap_or(0.0);
    let end = 1.1 * place.max(horizon);
    let (foot, stands) = (level(place), case.target.map_or(0.0, |h| h.0));
    let low = 1.1 * level(0.0).min(level(end));
    let high = 1.1 * (foot + stands).max(-0.3 * low);
    let left = -0.05 * end;
    let x = |d: f64| (d - left) / (end - left);
    let y = |h: f64| ((h - low) / (high - low)).clamp(0.0, 1.0);
    let mut series = vec![];
    for (name, stroke, k) in [
        ("surface", Stroke::Heavy, k.value.0),
        ("surface at the least k", Stroke::Dashed, k.low.0),
        ("surface at the greatest k", Stroke::Dotted, k.high.0),
    ] {
        let mut line = Series { name: name.to_owned(), stroke, x: vec![], y: vec![] };
        for i in 0..=POINTS {
            let d = end * f64::from(i) / f64::from(POINTS);
            line.x.push(x(d));
            // From k = 1 on it is as level as the line, and never nearer.
            line.y.push(y(surface(k.min(1.0), d)));
        }
        series.push(line);
    }
    let words = |what: What| Some(format!("{} {}", what.promise().label, case.cell(what, k.value)?));
    let mut marks = vec![
        Mark::Level { y: y(0.0), label: "line of sight".to_owned() },
        Mark::Span { x: x(0.0), from: y(level(0.0)), to: y(0.0), label: "eye".to_owned() },
        Mark::Point { x: x(horizon), y: y(0.0), label: words(What::Horizon)? },
    ];
    if stands > 0.0 {
        marks.push(Mark::Staff { x: x(place), from: y(foot), to: y(foot + stands) });
    }
    if case.distance.is_some() && place > horizon {
        marks.push(Mark::Span { x: x(place), from: y(foot), to: y(0.0), label: words(What::Hidden)? });
    }
    let (far, tall) = (case.unit(What::Horizon, end), case.unit(What::Hidden, high - low));
    let axis = |unit: &Unit, name: &str, low, high| {
        Some(axis(format!("{name}, {}", unit.symbol), unit.from_si(low)?, unit.from_si(high)?))
    };
    Some(Figure {
        title: "The surface under the line of sight".to_owned(),
        description: format!(
            "The line of sight grazes the surface and parts from it beyond. {}.",
            words(What::Horizon)?
        ),
        x: axis(far, "Distance", left, end)?,
        y: axis(tall, "Against the line", low, high)?,
        bands: vec![],
        series,
        marks,
        readings: vec![],
        note: "The line of sight is drawn straight, heights larger than lengths.".to_owned(),
        table: "airs",
    })
}
