//! The running balance: what unequal sights have put into the level since the last mark.
//!
//! A level carried forward is out by Σ(e_B − e_F), where e is what each reading is too large by: α D + (1 − k) D²/2R.
//! So the collimation error works through Σ(D_B − D_F), curvature and refraction through Σ(D_B² − D_F²). By the parabola:
//! 1e-8 of itself off the exact form below 1 km.

use super::Sight;
use crate::doubt::Estimate;
use crate::sight::budget::Budget;

/// Sums over setups whose two distances are known.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Balance {
    /// Σ(D_B − D_F), metres.
    pub run: f64,
    /// Σ(D_B² − D_F²), square metres.
    pub squares: f64,
    /// Σ(D_B + D_F), metres.
    pub length: f64,
    /// Σ(D_B² + D_F²), Σ(D_B³ + D_F³), Σ(D_B⁴ + D_F⁴): what independent doubts gather.
    powers: [f64; 3],
    /// Setups counted.
    pub setups: usize,
    /// Setups that lack a distance, taken as balanced.
    pub missing: usize,
}

/// What the balance has put into the level, metres; + the level is carried too high.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Worth {
    /// By the collimation error.
    pub collimation: Estimate,
    /// By curvature and refraction.
    pub curve: Estimate,
    /// Because the distances are not known exactly.
    pub distances: Estimate,
}

impl Worth {
    /// All together.
    pub fn total(&self) -> Estimate {
        Estimate::sum([&self.collimation, &self.curve, &self.distances])
    }
}

impl Balance {
    /// Takes a setup in.
    pub fn add(&mut self, back: Sight, fore: Sight) {
        let Some((b, f)) = back.distance.zip(fore.distance) else {
            self.missing += 1;
            return;
        };
        self.setups += 1;
        self.run += b - f;
        self.squares += (b - f) * (b + f);
        self.length += b + f;
        let [two, three, four] = &mut self.powers;
        for d in [b, f] {
            *two += d * d;
            *three += d * d * d;
            *four += d * d * d * d;
        }
    }
    /// What it is worth with this level in this air.
    ///
    /// Bias α Σ(D_B − D_F) + (1 − k) Σ(D_B² − D_F²)/2R. Doubts: U_α |Σ(D_B − D_F)|, the collimation error being the same in
    /// all; of k with S = Σ(D_B² − D_F²), Q = Σ(D_B⁴ + D_F⁴): U_k √(ρ S² + (1 − ρ) Q)/2R on each side; of each distance
    /// |α + (1 − k) D/R| · share of D, in squares (JCGM 100:2008, 5.1.2). ρ is the budget's `common`.
    pub fn worth(&self, budget: &Budget) -> Worth {
        let r = budget.radius.0;
        let (alpha, q) = (budget.collimation.0, 1.0 - budget.k.value.0);
        let curve = q * self.squares / (2.0 * r);
        let [two, three, four] = self.powers;
        let lever = (budget.common * self.squares * self.squares + (1.0 - budget.common) * four).sqrt() / (2.0 * r);
        // A low k lifts the readings: where the back sights are the longer ones, the level with them.
        let (low, high) = (budget.k.value.0 - budget.k.low.0, budget.k.high.0 - budget.k.value.0);
        let (above, below) = if self.squares >= 0.0 { (low, high) } else { (high, low) };
        let radius = (budget.radius_doubt * self.squares / (2.0 * r)).abs();
        let slopes = alpha * alpha * two + 2.0 * alpha * q / r * three + q * q / (r * r) * four;
        Worth {
            collimation: Estimate::even(alpha * self.run, budget.collimation_doubt.0 * self.run.abs()),
            curve: Estimate {
                bias: curve,
                below: libm::hypot(below * lever, radius),
                above: libm::hypot(above * lever, radius),
            },
            distances: Estimate::even(0.0, budget.distance_doubt * slopes.max(0.0).sqrt()),
        }
    }
    /// Doubt by the readings themselves, 95 % half-width: √(2n U₀² + g² Σ(D_B² + D_F²)), n setups.
    pub fn readings(&self, budget: &Budget) -> f64 {
        let count = 2.0 * (self.setups + self.missing) as f64;
        let growth = budget.reading_growth.0 * budget.reading_growth.0 * self.powers[0];
        (count * budget.reading.0 * budget.reading.0 + growth).sqrt()
    }
    /// The fore sight that brings Σ(D_B − D_F) back to nothing from a setup with this back sight, as far as sights from 0
    /// to `most` can; the second number is what would be left.
    pub fn next_fore(&self, back: f64, most: f64, least: f64) -> (f64, f64) {
        let wanted = back + self.run;
        let fore = wanted.min(most).max(least);
        (fore, wanted - fore)
    }
}
