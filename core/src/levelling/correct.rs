//! Curvature, refraction and collimation taken out of every sight.

use super::{Run, Setup, Sight};
use crate::doubt::Estimate;
use crate::quantity::Metres;
use crate::sight::budget::{Budget, total};

/// Levels seen from a setup, corrected, metres.
#[derive(Debug, Clone, PartialEq)]
pub struct Corrected {
    /// What the corrected level of the back sight's point is above the one as booked.
    pub carried: f64,
    /// The same of each intermediate point; `None` where a distance is missing.
    pub inters: Vec<Option<f64>>,
    /// The same of the point of the fore sight.
    pub fore: Option<f64>,
}

/// What a reading at that distance is expected to be too large by, metres; exact forms of [`crate::ray`].
pub fn excess(budget: &Budget, distance: f64) -> f64 {
    total(&budget.sight(Metres(distance))).bias
}

/// What correcting adds to each level as booked: Σ(e_F − e_B) up to the setup, and e − e_B for its intermediate points.
///
/// e as [`excess`]. A setup that lacks a distance is taken as balanced: its fore sight adds nothing.
pub fn corrections(run: &Run, budget: &Budget) -> Vec<Corrected> {
    let mut carried = 0.0;
    let mut all = Vec::with_capacity(run.setups.len());
    for setup in &run.setups {
        let back = setup.back.distance.map(|d| excess(budget, d));
        let of = |sight: &Sight| Some(excess(budget, sight.distance?) - back?);
        let inters = setup.inters.iter().map(|sight| of(sight).map(|more| carried + more)).collect();
        let fore = setup.fore.as_ref().map(|sight| carried + of(sight).unwrap_or(0.0));
        all.push(Corrected { carried, inters, fore });
        carried = fore.unwrap_or(carried);
    }
    all
}

/// What the level of an intermediate point is out by against that of the back sight's point, as booked; + booked too
/// high. `None` where a distance is missing.
///
/// Booked level = level of the mark + back − reading, so its error is e_B − e: the setup's error of [`Budget::setup`].
pub fn intermediate(setup: &Setup, sight: &Sight, budget: &Budget) -> Option<Estimate> {
    Some(total(&budget.setup(Metres(setup.back.distance?), Metres(sight.distance?))))
}

/// Trial distances of [`best_back`].
const TRIALS: usize = 60;

/// The length of the back sight at which the worst of the intermediate sights of a setup, each against its own tolerance,
/// would be least, with that share of the tolerance: where to stand, as far as the mark's distance decides.
///
/// Each is (distance, tolerance), metres. The share is (|bias| + doubt)/tolerance of the parabola for D against the trial
/// distance, without the readings' own doubt, which no standpoint changes. Tried at even steps between the nearest and the
/// farthest of them, beyond which every difference grows.
pub fn best_back(sights: &[(f64, f64)], budget: &Budget) -> Option<(f64, f64)> {
    let near = sights.iter().map(|s| s.0).fold(f64::INFINITY, f64::min);
    let far = sights.iter().map(|s| s.0).fold(0.0, f64::max);
    let (alpha, tilt) = (budget.collimation.0, budget.collimation_doubt.0);
    let half = (budget.k.high.0 - budget.k.value.0).max(budget.k.value.0 - budget.k.low.0);
    let (curve, bend) = ((1.0 - budget.k.value.0) / (2.0 * budget.radius.0), half / (2.0 * budget.radius.0));
    let worst = |x: f64| {
        let share = |(d, tolerance): &(f64, f64)| {
            let (run, squares) = (d - x, (d - x) * (d + x));
            let (by_tilt, by_air) = (tilt * run, bend * squares);
            ((alpha * run + curve * squares).abs() + (by_tilt * by_tilt + by_air * by_air).sqrt()) / tolerance
        };
        sights.iter().map(share).fold(0.0, f64::max)
    };
    let trials = (0..=TRIALS).map(|i| near + (far - near) * i as f64 / TRIALS as f64);
    trials.map(|x| (x, worst(x))).filter(|t| t.1.is_finite()).min_by(|a, b| a.1.total_cmp(&b.1))
}
