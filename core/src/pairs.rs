//! Observations made twice so that the level's own error shows: the two-peg test.
//!
//! The model: a staff reads h − H + s·d + C(d): h height of the line at the level, H of the mark, s collimation error
//! (positive when the line points up), d distance, C curvature less refraction ([`ray::combined`]).

use crate::doubt::Estimate;
use crate::quantity::{Metres, Tilt};
use crate::ray;
use crate::sight::budget::{Budget, Part, Term};

/// Of the four sights in what a collimation error shows in: A − B of the first station less A − B of the second.
const SIGNS: [f64; 4] = [1.0, -1.0, -1.0, 1.0];

/// What distances are in doubt by at least: what our own arithmetic may leave of a lever that is none.
const ROUNDING: f64 = 1e-12;

/// A staff as it is seen from the level.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Shot {
    /// What it reads.
    pub reading: Metres,
    /// How far off it stands.
    pub distance: Metres,
}

/// The level stands still, a staff stands on each of the two pegs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Station {
    /// On peg A.
    pub a: Shot,
    /// On peg B.
    pub b: Shot,
}

impl Station {
    /// How much farther off A is than B.
    fn arm(&self) -> f64 {
        self.a.distance.0 - self.b.distance.0
    }
}

/// Both pegs seen from two stations whose sights are unequal in different ways.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PegTest {
    /// First station.
    pub first: Station,
    /// Second station.
    pub second: Station,
}

/// What a staff at this distance would read of a level without collimation error that stood as this one: r − s·d.
/// Curvature and refraction stay in it, as they stay in any reading.
pub fn reading_to_set(shot: Shot, collimation: Tilt) -> Metres {
    Metres(shot.reading.0 - collimation.0 * shot.distance.0)
}

impl PegTest {
    fn shots(&self) -> [Shot; 4] {
        [self.first.a, self.first.b, self.second.a, self.second.b]
    }
    /// Collimation error, part by part, as a tilt: what the readings say, what curvature and refraction put into that,
    /// and doubt. `None` where the geometry cannot tell: see [`PegTest::lever`].
    ///
    /// s = [(a₁ − b₁) − (a₂ − b₂) − (C(d_A1) − C(d_B1)) + (C(d_A2) − C(d_B2))] / [(d_A1 − d_B1) − (d_A2 − d_B2)].
    /// Any distances. Doubt: of the readings in squares; of k, ρ common to all four sights and the rest of each sight's
    /// own; of the distances |C′ + s|·U(d) each, to the first order. Source: the model above solved for s, JCGM
    /// 100:2008, 5.1.2 and 5.2.2; with C left out the peg test of any handbook.
    pub fn collimation(&self, budget: &Budget) -> Option<[Part; 4]> {
        let lever = self.lever(budget)?.0;
        Some(self.weighed(SIGNS, lever, budget))
    }
    /// How much B stands higher than A, part by part; `None` as [`PegTest::collimation`].
    ///
    /// With m = a − b − C(d_A) + C(d_B) and e = d_A − d_B of each station: (e₁ m₂ − e₂ m₁) / (e₁ − e₂). Doubt and source
    /// as there.
    pub fn rise(&self, budget: &Budget) -> Option<[Part; 4]> {
        let lever = self.lever(budget)?.0;
        let (first, second) = (self.first.arm(), self.second.arm());
        Some(self.weighed([-second, second, first, -first], lever, budget))
    }
    /// The lever by which a collimation error shows: (d_A1 − d_B1) − (d_A2 − d_B2). `None` where it is no longer than
    /// its own doubt, in squares: then even the sign of the error would be in doubt.
    pub fn lever(&self, budget: &Budget) -> Option<Metres> {
        let squares: f64 = self.shots().iter().map(|shot| shot.distance.0 * shot.distance.0).sum();
        let lever = self.first.arm() - self.second.arm();
        let share = budget.distance_doubt.max(ROUNDING);
        (lever.abs() > share * squares.sqrt()).then_some(Metres(lever))
    }
    /// The same test with its readings and those of `other` in the mean; distances are this one's.
    pub fn mean(&self, other: &PegTest) -> PegTest {
        let mean = |one: Shot, two: Shot| Shot {
            reading: Metres(f64::midpoint(one.reading.0, two.reading.0)),
            distance: one.distance,
        };
        let both = |one: &Station, two: &Station| Station { a: mean(one.a, two.a), b: mean(one.b, two.b) };
        PegTest { first: both(&self.first, &other.first), second: both(&self.second, &other.second) }
    }
    /// Σ weight · of(shot): in pairs, so that pegs or stations that are exchanged give the same bits.
    fn sum(&self, weights: [f64; 4], of: &dyn Fn(Shot) -> f64) -> f64 {
        let [a, b, c, d] = self.shots().map(of);
        let [p, q, r, s] = weights;
        (p * a + q * b) + (r * c + s * d)
    }
    /// Σ weight · (reading − C) / lever over the four sights, part by part.
    fn weighed(&self, weights: [f64; 4], lever: f64, budget: &Budget) -> [Part; 4] {
        let seen = self.shots();
        let curve_at = |shot: Shot| ray::curvature(shot.distance, budget.radius).0;
        let read = self.sum(weights, &|shot| shot.reading.0) / lever;
        let curve = -self.sum(weights, &curve_at) / lever;
        let bent = self.sum(weights, &|shot| budget.bend(shot.distance).value) / lever;
        // A distance in doubt counts by how steeply the line leaves the level surface at its staff.
        let straight = |shot: Shot| shot.reading.0 - curve_at(shot) + budget.bend(shot.distance).value;
        let tilt = Tilt(self.sum(SIGNS, &straight) / (self.first.arm() - self.second.arm()));
        let line = Budget { collimation: tilt, ..*budget };
        let squared = |of: &dyn Fn(Shot) -> f64| {
            let squares = seen.iter().zip(weights).map(|(shot, weight)| {
                let part = weight * of(*shot) / lever;
                part * part
            });
            squares.sum::<f64>().sqrt()
        };
        let readings = squared(&|shot| budget.reading_doubt(shot.distance));
        let distances = squared(&|shot| line.slope(shot.distance) * budget.distance_doubt * shot.distance.0);
        let part = |term, error| Part { term, error };
        [
            part(Term::Reading, Estimate::even(read, readings)),
            part(Term::Curvature, Estimate::even(curve, budget.radius_doubt * curve.abs())),
            part(Term::Refraction, self.refraction(weights, lever, bent, budget)),
            part(Term::Distance, Estimate::even(0.0, distances)),
        ]
    }
    /// Refraction's part and its doubt to either side. A low k lifts the reading of a sight by G and a high one drops it
    /// by G′; the share ρ of that is common to all sights, so that it adds with its sign.
    fn refraction(&self, weights: [f64; 4], lever: f64, bias: f64, budget: &Budget) -> Estimate {
        let (mut low, mut high, mut up, mut down) = (0.0, 0.0, 0.0, 0.0);
        for (shot, weight) in self.shots().iter().zip(weights) {
            let bend = budget.bend(shot.distance);
            // A reading that is lifted is taken off by as much: the result falls where its weight is positive.
            let (at_low, at_high) = (-weight * bend.above / lever, weight * bend.below / lever);
            low += at_low;
            high += at_high;
            let (more, less) = (at_low.max(at_high), at_low.min(at_high));
            up += more * more;
            down += less * less;
        }
        let mixed = |common: f64, own: f64| {
            let common = common.max(0.0);
            (budget.common * common * common + (1.0 - budget.common) * own).sqrt()
        };
        Estimate { bias, above: mixed(low.max(high), up), below: mixed((-low).max(-high), down) }
    }
}

/// Two results of the same test agree: their difference is no greater than the doubt of the readings of both.
///
/// `doubt` is that of one result by its readings; air and distances are the same for both and fall out. Source: JCGM
/// 100:2008, 5.1.2.
pub fn agree(one: Tilt, other: Tilt, doubt: Tilt) -> bool {
    (one.0 - other.0).abs() <= doubt.0 * std::f64::consts::SQRT_2
}
