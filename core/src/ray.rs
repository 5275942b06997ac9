//! One sight in air of constant k, as the level, the horizontal and the bent line part along the plumb line at the staff.
//!
//! The model: refractive index ∝ r^(−k), in which a ray keeps the same k all along and which has a closed form for any
//! real k. With θ = s/R and q = 1 − k, a ray that leaves horizontally stands R·expm1(A) above the level surface at arc
//! s, A(q) = −ln cos(qθ)/q. The textbook parabola q·s²/2R is the first term of its series; where the ray is shallow, the
//! rest of that series is added to it, which loses fewer digits than the closed form (tests/accuracy.rs has both).

use crate::quantity::{Coefficient, Metres};

/// Shallow: θ and |q|·θ below this.
const SHALLOW: f64 = 0.16;

/// −ln cos x = x²/2 · (1 + S₁x² + S₂x⁴ + …): at 0.16 the next term is 1e-17.
const S: [f64; 7] = [
    1.0 / 6.0,
    2.0 / 45.0,
    17.0 / 1260.0,
    62.0 / 14_175.0,
    691.0 / 467_775.0,
    21_844.0 / 42_567_525.0,
    929_569.0 / 5_108_103_000.0,
];

/// Curvature: how far the horizontal line stands above the level surface at arc `s`, along the plumb line, ≥ 0.
///
/// s arc along the level surface, R its radius, θ = s/R: R/cos θ − R = R tan θ tan(θ/2), which does not cancel. Metres;
/// holds below a quarter of the earth's girth. On the ellipsoid R is the radius in the azimuth of the sight: the mean one
/// is wrong by [`crate::constants::RADIUS_SPREAD`] at most. Source: plane trigonometry of the sphere; 50-digit rows in
/// core/tests/rows.
pub fn curvature(s: Metres, r: Metres) -> Metres {
    let theta = s.0 / r.0;
    Metres(r.0 * libm::tan(theta) * libm::tan(theta / 2.0))
}

/// Curvature and refraction together: how far the line of sight stands above the level surface at arc `s`.
///
/// q = 1 − k, θ = s/R: R·expm1(−ln cos(qθ)/q), metres, any k. `None` where such a ray has turned upright before it gets
/// there (|q|·θ ≥ π/2). Negative for k > 1, zero at k = 1. A circular ray of the same k differs by 0.3 µm at 10 km and
/// 55 mm at 200 km (k 0.13): far inside any doubt of k. Beyond about 50 km k itself falls with height, by metres at
/// 200 km: not in this form. Source: Bouguer's n·r·cos β = constant with n ∝ r^(−k), integrated here; 50-digit rows.
pub fn combined(s: Metres, k: Coefficient, r: Metres) -> Option<Metres> {
    let (theta, q) = (s.0 / r.0, 1.0 - k.0);
    let turn = q * theta;
    if q == 0.0 {
        return Some(Metres(0.0));
    }
    if turn.abs() >= std::f64::consts::FRAC_PI_2 {
        return None;
    }
    if turn.abs().max(theta.abs()) >= SHALLOW {
        let half = libm::sin(turn / 2.0);
        return Some(Metres(r.0 * libm::expm1(-libm::log1p(-2.0 * half * half) / q)));
    }
    let square = turn * turn;
    let rest = S.iter().rev().fold(0.0, |more, c| (more + c) * square);
    let parabola = handbook_combined(s, k, r).0;
    Some(Metres(parabola + parabola * joined(rest, growth(turn * theta / 2.0 * (1.0 + rest)))))
}

/// The handbook's parabola for [`combined`]: (1 − k) s²/2R, metres. Differs by 0.1 mm at 19 km and k = 0, by a metre and
/// more at 200 km. Source: Ghilani & Wolf, Elementary Surveying, ch. 4.
pub fn handbook_combined(s: Metres, k: Coefficient, r: Metres) -> Metres {
    Metres((1.0 - k.0) * s.0 * s.0 / (2.0 * r.0))
}

/// Refraction alone: [`curvature`] − [`combined`], without the digits that the difference loses at small k.
///
/// How far the line of sight lies below the horizontal line at the staff, metres; negative for k < 0. Where it holds and
/// how wrong it is: as [`combined`]. It is R·exp(A(q))·expm1(A(1) − A(q)), and A(1) − A(q) = k θ²/2 · (1 + Σ S_n θ^2n (1 + q + … + q^2n)). `None` where
/// [`combined`] is.
pub fn refraction(s: Metres, k: Coefficient, r: Metres) -> Option<Metres> {
    let seen = combined(s, k, r)?;
    let (theta, q) = (s.0 / r.0, 1.0 - k.0);
    if (q * theta).abs().max(theta.abs()) >= SHALLOW {
        return Some(Metres(curvature(s, r).0 - seen.0));
    }
    let (mut rest, mut power, mut geometric, mut next) = (0.0, 1.0, 1.0, q);
    for c in S {
        power *= theta * theta;
        geometric += next + next * q;
        next *= q * q;
        rest += c * power * geometric;
    }
    let parabola = k.0 * s.0 * s.0 / (2.0 * r.0);
    let grown = growth(k.0 * theta * theta / 2.0 * (1.0 + rest));
    Some(Metres(parabola + parabola * joined(rest, joined(grown, seen.0 / r.0))))
}

/// (1 + a)(1 + b) − 1.
fn joined(a: f64, b: f64) -> f64 {
    a + b + a * b
}

/// expm1(a)/a − 1 = a/2 · (1 + a/3 · (1 + …)), for the small a of a shallow ray: below 0.013, where it is good to 1e-17.
fn growth(a: f64) -> f64 {
    [7.0, 6.0, 5.0, 4.0, 3.0, 2.0].iter().fold(0.0, |more, n| a / n * (1.0 + more))
}
