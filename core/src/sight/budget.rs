//! What one sight, the two sights of a setup, or a sight observed both ways loses: each term with bias and doubt.
//!
//! Errors are positive when the staff reads too much. A setup's error is that of this sight's reading less the other's.

use crate::air::guide::KRange;
use crate::doubt::Estimate;
use crate::quantity::{Coefficient, Metres, Tilt};
use crate::ray;

/// Where an error comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Term {
    /// The earth's curve.
    Curvature,
    /// The bent line.
    Refraction,
    /// The level's line not being horizontal.
    Collimation,
    /// Reading the staff.
    Reading,
    /// The distance not being known exactly.
    Distance,
}

/// One term and what it does.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Part {
    /// Which.
    pub term: Term,
    /// How much.
    pub error: Estimate,
}

/// What is known of air, earth, level and observer. All doubts are 95 % half-widths.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Budget {
    /// k and its range.
    pub k: KRange,
    /// Share of the variance of k that is the same on both sights of a setup, or both ways: the correlation ρ, 0 to 1.
    pub common: f64,
    /// Radius of the earth.
    pub radius: Metres,
    /// Its doubt, as a share.
    pub radius_doubt: f64,
    /// Collimation error, positive when the line points up.
    pub collimation: Tilt,
    /// Its doubt.
    pub collimation_doubt: Tilt,
    /// Doubt of a reading at any distance.
    pub reading: Metres,
    /// What distance adds to it.
    pub reading_growth: Tilt,
    /// Doubt of a distance, as a share.
    pub distance_doubt: f64,
}

/// What refraction takes off one reading, and how much more or less it may take.
pub(crate) struct Bend {
    pub value: f64,
    /// Lost when k is at its low end: the reading is greater by so much.
    pub above: f64,
    pub below: f64,
}

impl Budget {
    /// Refraction at k, by the exact form; by the parabola k s²/2R where the exact ray turns upright before it arrives.
    fn refraction(&self, d: Metres, k: Coefficient) -> f64 {
        ray::refraction(d, k, self.radius).map_or(k.0 * d.0 * d.0 / (2.0 * self.radius.0), |r| r.0)
    }
    pub(crate) fn bend(&self, d: Metres) -> Bend {
        let value = self.refraction(d, self.k.value);
        let (low, high) = (self.refraction(d, self.k.low), self.refraction(d, self.k.high));
        Bend { value, above: (value - low).max(0.0), below: (high - value).max(0.0) }
    }
    /// How fast the expected error grows with distance: (1 − k) s/R + α.
    pub(crate) fn slope(&self, d: Metres) -> f64 {
        (1.0 - self.k.value.0) * d.0 / self.radius.0 + self.collimation.0
    }
    pub(crate) fn reading_doubt(&self, d: Metres) -> f64 {
        libm::hypot(self.reading.0, self.reading_growth.0 * d.0)
    }
    fn parts(
        curvature: Estimate,
        refraction: Estimate,
        collimation: Estimate,
        reading: f64,
        distance: f64,
    ) -> [Part; 5] {
        [
            Part { term: Term::Curvature, error: curvature },
            Part { term: Term::Refraction, error: refraction },
            Part { term: Term::Collimation, error: collimation },
            Part { term: Term::Reading, error: Estimate::even(0.0, reading) },
            Part { term: Term::Distance, error: Estimate::even(0.0, distance) },
        ]
    }
    /// One sight by itself, metres; JCGM 100:2008, 5.1.2 for what is added in squares: curvature s²/2R, refraction −k s²/2R (exact forms of [`ray`]), collimation α·s, reading
    /// √(U₀² + (g·s)²), distance |d bias/ds|·U_s.
    pub fn sight(&self, d: Metres) -> [Part; 5] {
        let curvature = ray::curvature(d, self.radius).0;
        let bend = self.bend(d);
        Self::parts(
            Estimate::even(curvature, self.radius_doubt * curvature),
            Estimate { bias: -bend.value, below: bend.below, above: bend.above },
            Estimate::even(self.collimation.0 * d.0, self.collimation_doubt.0 * d.0),
            self.reading_doubt(d),
            self.slope(d).abs() * self.distance_doubt * d.0,
        )
    }
    /// The height difference of a setup. Collimation and radius are common to both sights; of k the share ρ is: with G
    /// what a sight gains on one side of k, U² = ρ (G − G′)² + (1 − ρ)(G² + G′²).
    pub fn setup(&self, d: Metres, other: Metres) -> [Part; 5] {
        let (curvature, second) = (ray::curvature(d, self.radius).0, ray::curvature(other, self.radius).0);
        let (here, there) = (self.bend(d), self.bend(other));
        // A low k lifts both readings; their difference grows by it only while this sight gains more than the other.
        let low = here.above - there.above;
        let high = here.below - there.below;
        let mixed = |common: f64, own: f64, others: f64| {
            (self.common * common * common + (1.0 - self.common) * (own * own + others * others)).sqrt()
        };
        let refraction = Estimate {
            bias: there.value - here.value,
            above: mixed(low.max(-high).max(0.0), here.above, there.below),
            below: mixed(high.max(-low).max(0.0), here.below, there.above),
        };
        let imbalance = d.0 - other.0;
        let (near, far) = (self.slope(d) * d.0, self.slope(other) * other.0);
        Self::parts(
            Estimate::even(curvature - second, self.radius_doubt * (curvature - second).abs()),
            refraction,
            Estimate::even(self.collimation.0 * imbalance, self.collimation_doubt.0 * imbalance.abs()),
            libm::hypot(self.reading_doubt(d), self.reading_doubt(other)),
            libm::hypot(near, far) * self.distance_doubt,
        )
    }
    /// The mean of the height differences seen from both ends. Curvature, collimation and the common share of k cancel;
    /// what is left of k is U √((1 − ρ)/2), of the readings U/√2.
    pub fn both_ways(&self, d: Metres) -> [Part; 5] {
        let bend = self.bend(d);
        let half = bend.above.max(bend.below) * ((1.0 - self.common) / 2.0).sqrt();
        Self::parts(
            Estimate::even(0.0, 0.0),
            Estimate::even(0.0, half),
            Estimate::even(0.0, 0.0),
            self.reading_doubt(d) * std::f64::consts::FRAC_1_SQRT_2,
            0.0,
        )
    }
}

/// Everything together.
pub fn total(parts: &[Part]) -> Estimate {
    Estimate::sum(parts.iter().map(|p| &p.error))
}
