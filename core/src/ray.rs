//! One sight in air of constant k, as the level, the horizontal and the bent line part along the plumb line at the staff.
//!
//! The model: refractive index ∝ r^(−k), in which a ray keeps the same k all along and which has a closed form for any
//! real k. With θ = s/R and q = 1 − k, a ray that leaves horizontally stands R·expm1(−log1p(−2 sin²(qθ/2))/q) above the
//! level surface at arc s. The textbook parabola q·s²/2R is the first term of its series.

use crate::quantity::{Coefficient, Metres};

/// Curvature: how far the horizontal line stands above the level surface at arc `s`, along the plumb line, ≥ 0.
///
/// 2R sin²(θ/2)/cos θ, free of the cancellation of R/cos θ − R. Holds below a quarter of the earth's girth.
pub fn curvature(s: Metres, r: Metres) -> Metres {
    let theta = s.0 / r.0;
    let half = libm::sin(theta / 2.0);
    Metres(2.0 * r.0 * half * half / libm::cos(theta))
}

/// Curvature and refraction together: how far the line of sight stands above the level surface at arc `s`.
///
/// `None` where such a ray has turned upright before it gets there (|q|·θ ≥ π/2). Negative for k > 1, zero at k = 1.
pub fn combined(s: Metres, k: Coefficient, r: Metres) -> Option<Metres> {
    let q = 1.0 - k.0;
    if q == 0.0 {
        return Some(Metres(0.0));
    }
    let turn = q * s.0 / r.0;
    if turn.abs() >= std::f64::consts::FRAC_PI_2 {
        return None;
    }
    let half = libm::sin(turn / 2.0);
    Some(Metres(r.0 * libm::expm1(-libm::log1p(-2.0 * half * half) / q)))
}

/// The handbook's parabola for [`combined`]: (1 − k) s²/2R. Differs by 0.1 mm at 19 km and k = 0.
pub fn handbook_combined(s: Metres, k: Coefficient, r: Metres) -> Metres {
    Metres((1.0 - k.0) * s.0 * s.0 / (2.0 * r.0))
}

/// Refraction alone: [`curvature`] − [`combined`], without the digits that the difference loses at small k.
///
/// With A(q) = −ln cos(qθ)/q, refraction = R·exp(A(q))·expm1(A(1) − A(q)). For |qθ| < 0.05, where A(1) and A(q) may be
/// close, A(1) − A(q) = k·Σ c_n θ^2n (1 + q + … + q^(2n−2)), c = 1/2, 1/12, 1/45, 17/2520, 31/14175, 691/935550: the next
/// term is below 1e-17 of the sum. `None` where [`combined`] is.
pub fn refraction(s: Metres, k: Coefficient, r: Metres) -> Option<Metres> {
    const C: [f64; 6] = [1.0 / 2.0, 1.0 / 12.0, 1.0 / 45.0, 17.0 / 2520.0, 31.0 / 14175.0, 691.0 / 935_550.0];
    let seen = combined(s, k, r)?;
    let (theta, q) = (s.0 / r.0, 1.0 - k.0);
    if (q * theta).abs() >= 0.05 || theta >= 0.05 {
        return Some(Metres(curvature(s, r).0 - seen.0));
    }
    let (mut sum, mut power, mut geometric, mut next) = (0.0, theta * theta, 1.0, q);
    for c in C {
        sum += c * power * geometric;
        power *= theta * theta;
        geometric += next + next * q;
        next *= q * q;
    }
    Some(Metres((r.0 + seen.0) * libm::expm1(k.0 * sum)))
}
