//! How far a sight may run, and how unequal the two sights of a setup may be, from the doubts alone.
//!
//! All doubts here are half-widths at one and the same coverage as the allowance (95 % throughout this crate).

pub mod bounds;
pub mod budget;
pub mod one_mark;

use crate::quantity::{Metres, Tilt};

/// The doubts of one sight, each the half-width of an independent part.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SightDoubt {
    /// Of a reading, whatever the distance.
    pub reading: Metres,
    /// Of a reading, growing with distance (resolution of the eye).
    pub reading_growth: Tilt,
    /// Of the collimation error.
    pub collimation: Tilt,
    /// Of k.
    pub k: f64,
}

/// Longest single sight whose doubt stays inside `allowed`; `None` where the reading alone exceeds it, infinite where
/// nothing grows with distance.
///
/// With X = D², (U_k/2R)² X² + (U_α² + U_g²) X + U_0² = allowed², solved in the form that does not cancel:
/// X = 2c / (b + √(b² + 4ac)), c = allowed² − U_0². U_k, U_α, U_g, U_0 are the members of [`SightDoubt`], R the radius;
/// metres. By the parabola: 1e-8 of itself off the exact form below 1 km. Source: the adding of independent doubts in
/// squares, JCGM 100:2008, 5.1.2; 50-digit rows.
pub fn reach(allowed: Metres, doubt: SightDoubt, r: Metres) -> Option<Metres> {
    let c = (allowed.0 - doubt.reading.0) * (allowed.0 + doubt.reading.0);
    if c.is_nan() || c < 0.0 {
        return None;
    }
    let b = doubt.collimation.0 * doubt.collimation.0 + doubt.reading_growth.0 * doubt.reading_growth.0;
    let root_a = doubt.k / (2.0 * r.0);
    let squared = 2.0 * c / (b + (b * b + 4.0 * root_a * root_a * c).sqrt());
    (!squared.is_nan()).then(|| Metres(squared.sqrt()))
}

/// Greatest difference between the two sights of a setup of mean length `mean` whose doubt stays inside `allowed`;
/// `None` where not even equal sights do. `common` is the correlation of k on the two sights.
///
/// e² = [allowed² − 2U_0² − 2(D U_g)² − (1−ρ) D⁴ U_k²/2R²] / [U_α² + U_g²/2 + (D U_k/R)²]. Of what k's doubt adds with
/// e² no more than (3 + ρ)/4 is real: the rest is on the safe side, as long as e ≤ 2D; beyond that there is no such setup.
/// Symbols and source as [`reach`], D = `mean`, ρ = `common`.
pub fn imbalance(allowed: Metres, mean: Metres, doubt: SightDoubt, common: f64, r: Metres) -> Option<Metres> {
    let swing = mean.0 * doubt.k / r.0;
    let kept = (1.0 - common) * mean.0 * mean.0 * swing * swing / 2.0;
    let growth = doubt.reading_growth.0 * doubt.reading_growth.0;
    let readings = 2.0 * (doubt.reading.0 * doubt.reading.0 + growth * mean.0 * mean.0);
    let left = allowed.0 * allowed.0 - readings - kept;
    let squared = left / (doubt.collimation.0 * doubt.collimation.0 + growth / 2.0 + swing * swing);
    (squared >= 0.0).then(|| Metres(squared.sqrt()))
}
