//! How far the horizon is, how low it lies, and what it hides: closed forms in air of constant k.
//!
//! The model of [`crate::ray`]: refractive index ∝ r^(−k), in which a ray keeps r^q · cos β and turns by qθ along the
//! level surface (β elevation of the ray, q = 1 − k, θ = s/R). The line that grazes the surface has β = 0 there, so that
//! at the eye, h above it, cos δ = (1 + h/R)^(−q). Everything follows from δ; each form is the one that does not cancel,
//! for heights from millimetres to kilometres. Derived for this project, checked to 80 digits.
//!
//! At k ≥ 1 the line bends with the earth or more: there is no horizon, and nothing is hidden by the curve. Just below 1
//! the horizon would lie further round than the other side of the earth: none is given there either.

use crate::air::guide::{self, KRange, Sky};
use crate::quantity::{Angle, Coefficient, Metres};
use crate::ray;
use std::f64::consts::PI;

/// k of nautical tables, three digits: 1 − 0.8321 (Bowditch, The American Practical Navigator, explanation of tables 14
/// and 15), which also gives the rules 1.17 √h nautical miles and 0.97′ √h for h in feet.
pub const NAUTICAL_K: Coefficient = Coefficient(0.168);

/// δ, how far the horizon lies below the horizontal: 1 − cos δ = v = −expm1(−q · log1p(h/R)), δ = 2 atan √(v/(2 − v)).
///
/// `None` where there is no horizon. The parabola is √(2qh/R).
pub fn dip(eye: Metres, k: Coefficient, r: Metres) -> Option<Angle> {
    let q = 1.0 - k.0;
    let v = -libm::expm1(-q * libm::log1p(eye.0 / r.0));
    let dip = 2.0 * libm::atan((v / (2.0 - v)).sqrt());
    // Below k = 1 v lies between 0 and 1; above it the root is none and so is the horizon.
    (q > 0.0 && dip <= q * PI).then_some(Angle(dip))
}

/// How far the horizon is along the level surface: s = Rδ/q. The parabola is √(2Rh/q).
pub fn distance(eye: Metres, k: Coefficient, r: Metres) -> Option<Metres> {
    dip(eye, k, r).map(|dip| Metres(r.0 * (dip.0 / (1.0 - k.0))))
}

/// How far the horizon is in a straight line from the eye: √(h² + 4R(R + h) sin²(s/2R)), two sides and the angle at the
/// earth's centre.
pub fn line(eye: Metres, k: Coefficient, r: Metres) -> Option<Metres> {
    let half = libm::sin(dip(eye, k, r)?.0 / (1.0 - k.0) / 2.0);
    Some(Metres((eye.0 * eye.0 + 4.0 * half * half * (r.0 * (r.0 + eye.0))).sqrt()))
}

/// How far the water's edge at a shore lies below the horizontal, the shore being nearer than the horizon:
/// tan δ = (2 sin²(qθ/2) + expm1(q · log1p(h/R))) / sin qθ, at q = 0 log1p(h/R)/θ.
///
/// Nothing cancels below k = 1. Above it the sum passes through nought where the shore is seen level, and negative values
/// lie above the horizontal. `None` where no ray gets there (|q|θ ≥ π). The parabola is h/s + qs/2R.
pub fn dip_short(eye: Metres, shore: Metres, k: Coefficient, r: Metres) -> Option<Angle> {
    let (theta, q, height) = (shore.0 / r.0, 1.0 - k.0, libm::log1p(eye.0 / r.0));
    let turn = q * theta;
    let half = libm::sin(turn / 2.0);
    let rise = 2.0 * half * half + libm::expm1(q * height);
    let slope = if q == 0.0 { height / theta } else { rise / libm::sin(turn) };
    (turn.abs() < PI).then(|| Angle(libm::atan(slope)))
}

/// How high a target at arc `s` is hidden by the surface: up to where the line that grazes the horizon passes it, 0 where
/// it stands this side of the horizon or there is none. `None` where that line has turned upright before: whatever its
/// height, it is hidden.
///
/// [`ray::combined`] at s − horizon. The parabola is q (s − horizon)²/2R.
pub fn hidden(eye: Metres, s: Metres, k: Coefficient, r: Metres) -> Option<Metres> {
    match distance(eye, k, r) {
        Some(horizon) if s.0 > horizon.0 => ray::combined(Metres(s.0 - horizon.0), k, r),
        _ => Some(Metres(0.0)),
    }
}

/// How far off the top of a target is raised: where it comes over the horizon. The horizons of both heights together.
pub fn visible_range(eye: Metres, target: Metres, k: Coefficient, r: Metres) -> Option<Metres> {
    Some(Metres(distance(eye, k, r)?.0 + distance(target, k, r)?.0))
}

/// Mean height over the surface of the line between two heights that grazes it between them: (h − √(hH) + H)/6.
///
/// On each leg the line rises as the square of the way from the point where it grazes, and the air does the more the nearer
/// to that point it is: the mean so weighted is a sixth of the leg's height. The legs count by their lengths, as √h to √H.
pub fn line_height(eye: Metres, target: Metres) -> Metres {
    Metres((eye.0 - (eye.0 * target.0).sqrt() + target.0) / 6.0)
}

/// k of a line that grazes water and runs `height` over it in the mean.
///
/// **A rule of this project, not a published table.** The lowest metres have what air a degree warmer or colder than the
/// water gives, k 0.16 ± 0.2 (neutral profile, 0.11 per kelvin 5 m up, our own arithmetic; Clarke's mean of rays that
/// cross the sea is 0.162, second-hand). Above [`NEAR_WATER`] the line runs in the air of the guide's highest row, and
/// each counts by its share of the bending. A clear night reaches over water from above only: the value and the upper end
/// are that row's throughout.
pub fn over_water(height: Metres, sky: Sky) -> KRange {
    let aloft = guide::k(Metres(f64::INFINITY), sky);
    let rest = 1.0 - (NEAR_WATER / (6.0 * height.0)).sqrt().min(1.0);
    let near = 1.0 - rest * rest;
    let mix = |low: f64, high: Coefficient| Coefficient(high.0 + near * (low - high.0));
    let low = mix(0.16 - 0.2, aloft.low);
    match sky {
        Sky::ClearNight => KRange { low, ..aloft },
        _ => KRange { value: mix(0.16, aloft.value), low, high: mix(0.16 + 0.2, aloft.high) },
    }
}

/// How high the water's own air reaches, metres (our rule).
const NEAR_WATER: f64 = 10.0;
