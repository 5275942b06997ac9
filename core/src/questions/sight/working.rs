//! The formulas with the numbers in them, by the handbook's parabola: to be checked with a pencil.

use super::case::Case;
use crate::doubt::Estimate;
use crate::quantity::show::{places, significant};
use crate::sight::budget::Part;

/// Metres.
fn m(si: f64) -> String {
    significant(si, 7)
}

/// Millimetres.
fn mm(si: f64) -> String {
    significant(si * 1000.0, 4)
}

/// Line by line; `error` is the sum of `parts`.
pub fn lines(case: &Case, parts: &[Part; 5], error: Estimate) -> Vec<String> {
    let mut lines = bias(case, error);
    lines.extend(match case.other {
        Some(other) => doubts_of_setup(case, other),
        None => doubts(case),
    });
    for (side, of) in [("above", (|e| e.above) as fn(&Estimate) -> f64), ("below", |e| e.below)] {
        let squares: Vec<String> = parts.iter().map(|p| format!("{}²", mm(of(&p.error)))).collect();
        lines.push(format!("doubt {side} it = √({}) = {} mm", squares.join(" + "), mm(of(&error))));
    }
    let sign = if error.worst() <= case.allowed { "≤" } else { ">" };
    let share = significant(case.share * 100.0, 4);
    lines.push(format!(
        "farther end = {} mm {sign} {share} % of {} mm = {} mm",
        mm(error.worst()),
        mm(case.tolerance),
        mm(case.allowed)
    ));
    lines
}

fn bias(case: &Case, error: Estimate) -> Vec<String> {
    let (d, r, k) = (case.distance, case.budget.radius.0, case.budget.k);
    let k_text = |k: f64| places(k, 4);
    let mut lines = vec![format!(
        "D = {} m, R = {} m, k = {} (from {} to {}), {}",
        m(d),
        m(r),
        k_text(k.value.0),
        k_text(k.low.0),
        k_text(k.high.0),
        case.air.source
    )];
    let (squares, run) = match case.other {
        Some(other) => (d * d - other * other, d - other),
        None => (d * d, d),
    };
    let (square, length) = if case.other.is_some() { ("(D² − D′²)", "(D − D′)") } else { ("D²", "D") };
    if let Some(other) = case.other {
        lines.push(format!("the other sight D′ = {} m: D² − D′² = {} m²", m(other), m(squares)));
    }
    let curve = squares / (2.0 * r);
    let alpha = case.budget.collimation.0;
    let sum = (1.0 - k.value.0) * curve + alpha * run;
    lines.push(format!("curvature = {square} / 2R = {} / {} = {} mm", m(squares), m(2.0 * r), mm(curve)));
    lines.push(format!(
        "refraction = −k · curvature = −({}) × {} = {} mm",
        k_text(k.value.0),
        mm(curve),
        mm(-k.value.0 * curve)
    ));
    lines.push(format!("collimation = α · {length} = {} mm/m × {} m = {} mm", mm(alpha), m(run), mm(alpha * run)));
    lines.push(format!("bias = the three together = {} mm (by the exact forms {} mm)", mm(sum), mm(error.bias)));
    lines
}

/// Shares in percent.
fn percent(share: f64) -> String {
    format!("{} %", significant(share * 100.0, 4))
}

fn doubts(case: &Case) -> Vec<String> {
    let (b, d) = (&case.budget, case.distance);
    let curve = d * d / (2.0 * b.radius.0);
    let (low, high) = (b.k.value.0 - b.k.low.0, b.k.high.0 - b.k.value.0);
    let slope = ((1.0 - b.k.value.0) * d / b.radius.0 + b.collimation.0).abs();
    let reading = libm::hypot(b.reading.0, b.reading_growth.0 * d);
    vec![
        format!("doubt of curvature = {} of it = {} mm", percent(b.radius_doubt), mm(b.radius_doubt * curve)),
        format!(
            "doubt of refraction above = (k − least k) · curvature = {} × {} = {} mm",
            places(low, 4),
            mm(curve),
            mm(low * curve)
        ),
        format!(
            "doubt of refraction below = (greatest k − k) · curvature = {} × {} = {} mm",
            places(high, 4),
            mm(curve),
            mm(high * curve)
        ),
        format!(
            "doubt of collimation = U(α) · D = {} mm/m × {} m = {} mm",
            mm(b.collimation_doubt.0),
            m(d),
            mm(b.collimation_doubt.0 * d)
        ),
        format!(
            "doubt of reading = √({}² + ({} mm/m × {} m)²) = {} mm",
            mm(b.reading.0),
            mm(b.reading_growth.0),
            m(d),
            mm(reading)
        ),
        format!(
            "doubt by distance = |(1 − k) D/R + α| · U(D) = {} mm/m × {} of {} m = {} mm",
            mm(slope),
            percent(b.distance_doubt),
            m(d),
            mm(slope * b.distance_doubt * d)
        ),
    ]
}

fn doubts_of_setup(case: &Case, other: f64) -> Vec<String> {
    let (b, d) = (&case.budget, case.distance);
    let gain = |d: f64| d * d / (2.0 * b.radius.0);
    let (low, high) = (b.k.value.0 - b.k.low.0, b.k.high.0 - b.k.value.0);
    let run = (d - other).abs();
    let reading = |d: f64| libm::hypot(b.reading.0, b.reading_growth.0 * d);
    vec![
        format!(
            "doubt of curvature = {} of it = {} mm",
            percent(b.radius_doubt),
            mm(b.radius_doubt * (gain(d) - gain(other)).abs())
        ),
        format!(
            "doubt of refraction = √(ρ (G − G′)² + (1 − ρ)(G² + G′²)), ρ = {}; with G = U(k) · D²/2R: U(k) = {} gives {} and {} mm, U(k) = {} gives {} and {} mm",
            percent(b.common),
            places(low, 4),
            mm(low * gain(d)),
            mm(low * gain(other)),
            places(high, 4),
            mm(high * gain(d)),
            mm(high * gain(other))
        ),
        format!(
            "doubt of collimation = U(α) · |D − D′| = {} mm/m × {} m = {} mm",
            mm(b.collimation_doubt.0),
            m(run),
            mm(b.collimation_doubt.0 * run)
        ),
        format!(
            "doubt of the two readings = √({}² + {}²) = {} mm",
            mm(reading(d)),
            mm(reading(other)),
            mm(libm::hypot(reading(d), reading(other)))
        ),
        format!(
            "doubt by distance: of each sight |(1 − k) D/R + α| · {} of D, the two in squares",
            percent(b.distance_doubt)
        ),
    ]
}
