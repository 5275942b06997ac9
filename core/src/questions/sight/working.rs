//! The formulas with the numbers in them, by the handbook's parabola: to be checked with a pencil.

use super::case::Case;
use crate::doubt::Estimate;
use crate::question::pencil::line;
use crate::sight::budget::Part;

/// Line by line; `error` is the sum of `parts`.
pub fn lines(case: &Case, parts: &[Part; 5], error: Estimate) -> Vec<String> {
    let mut lines = bias(case, error);
    lines.extend(match case.other {
        Some(other) => doubts_of_setup(case, other),
        None => doubts(case),
    });
    let [a, b, c, d, e] = parts.map(|p| p.error);
    let squares = "it = √({mm}² + {mm}² + {mm}² + {mm}² + {mm}²) = {mm} mm";
    let above = [a.above, b.above, c.above, d.above, e.above, error.above];
    let below = [a.below, b.below, c.below, d.below, e.below, error.below];
    lines.push(line(&["doubt above ", squares].concat(), &above));
    lines.push(line(&["doubt below ", squares].concat(), &below));
    let sign = if error.worst() <= case.allowed { "≤" } else { ">" };
    let end = ["farther end = {mm} mm ", sign, " {%} of {mm} mm = {mm} mm"].concat();
    lines.push(line(&end, &[error.worst(), case.share, case.tolerance, case.allowed]));
    lines
}

fn bias(case: &Case, error: Estimate) -> Vec<String> {
    let (d, r, k) = (case.distance, case.budget.radius.0, case.budget.k);
    let air = line("D = {m} m, R = {m} m, k = {k} (from {k} to {k}), ", &[d, r, k.value.0, k.low.0, k.high.0]);
    let mut lines = vec![air + &case.air.source];
    let (squares, run) = match case.other {
        Some(other) => (d * d - other * other, d - other),
        None => (d * d, d),
    };
    let (square, length) = if case.other.is_some() { ("(D² − D′²)", "(D − D′)") } else { ("D²", "D") };
    if let Some(other) = case.other {
        lines.push(line("the other sight D′ = {m} m: D² − D′² = {m} m²", &[other, squares]));
    }
    let curve = squares / (2.0 * r);
    let (alpha, k) = (case.budget.collimation.0, k.value.0);
    let written = ["curvature = ", square, " / 2R = {m} / {m} = {mm} mm"].concat();
    lines.push(line(&written, &[squares, 2.0 * r, curve]));
    lines.push(line("refraction = −k · curvature = −({k}) × {mm} = {mm} mm", &[k, curve, -k * curve]));
    let written = ["collimation = α · ", length, " = {mm} mm/m × {m} m = {mm} mm"].concat();
    lines.push(line(&written, &[alpha, run, alpha * run]));
    let sum = (1.0 - k) * curve + alpha * run;
    lines.push(line("bias = the three together = {mm} mm (by the exact forms {mm} mm)", &[sum, error.bias]));
    lines
}

fn doubts(case: &Case) -> Vec<String> {
    let (b, d) = (&case.budget, case.distance);
    let curve = d * d / (2.0 * b.radius.0);
    let (low, high) = (b.k.value.0 - b.k.low.0, b.k.high.0 - b.k.value.0);
    let slope = ((1.0 - b.k.value.0) * d / b.radius.0 + b.collimation.0).abs();
    let reading = libm::hypot(b.reading.0, b.reading_growth.0 * d);
    let tilt = b.collimation_doubt.0;
    vec![
        line("doubt of curvature = {%} of it = {mm} mm", &[b.radius_doubt, b.radius_doubt * curve]),
        line(
            "doubt of refraction above = (k − least k) · curvature = {k} × {mm} = {mm} mm",
            &[low, curve, low * curve],
        ),
        line(
            "doubt of refraction below = (greatest k − k) · curvature = {k} × {mm} = {mm} mm",
            &[high, curve, high * curve],
        ),
        line("doubt of collimation = U(α) · D = {mm} mm/m × {m} m = {mm} mm", &[tilt, d, tilt * d]),
        line(
            "doubt of reading = √({mm}² + ({mm} mm/m × {m} m)²) = {mm} mm",
            &[b.reading.0, b.reading_growth.0, d, reading],
        ),
        line(
            "doubt by distance = |(1 − k) D/R + α| · U(D) = {mm} mm/m × {%} of {m} m = {mm} mm",
            &[slope, b.distance_doubt, d, slope * b.distance_doubt * d],
        ),
    ]
}

fn doubts_of_setup(case: &Case, other: f64) -> Vec<String> {
    let (b, d) = (&case.budget, case.distance);
    let gain = |d: f64| d * d / (2.0 * b.radius.0);
    let (low, high) = (b.k.value.0 - b.k.low.0, b.k.high.0 - b.k.value.0);
    let (run, tilt) = ((d - other).abs(), b.collimation_doubt.0);
    let reading = |d: f64| libm::hypot(b.reading.0, b.reading_growth.0 * d);
    let curve = (gain(d) - gain(other)).abs();
    let both = libm::hypot(reading(d), reading(other));
    vec![
        line("doubt of curvature = {%} of it = {mm} mm", &[b.radius_doubt, b.radius_doubt * curve]),
        line(
            "doubt of refraction = √(ρ (G − G′)² + (1 − ρ)(G² + G′²)), ρ = {%}; with G = U(k) · D²/2R: U(k) = {k} gives {mm} and {mm} mm, U(k) = {k} gives {mm} and {mm} mm",
            &[b.common, low, low * gain(d), low * gain(other), high, high * gain(d), high * gain(other)],
        ),
        line("doubt of collimation = U(α) · |D − D′| = {mm} mm/m × {m} m = {mm} mm", &[tilt, run, tilt * run]),
        line("doubt of the two readings = √({mm}² + {mm}²) = {mm} mm", &[reading(d), reading(other), both]),
        line("doubt by distance: of each sight |(1 − k) D/R + α| · {%} of D, the two in squares", &[b.distance_doubt]),
    ]
}
