//! The sight as entered, and what it loses at any distance.

use super::{DISTANCE_DOUBT, OTHER};
use crate::air::guide::Sky;
use crate::doubt::Estimate;
use crate::quantity::Metres;
use crate::question::{Asked, site};
use crate::sight::bounds::{Stretch, joined, places, stretches};
use crate::sight::budget::{Budget, Part, Term, total};

/// Edges of the search for limits, metres. Below the first no level stands; the second is the longest distance read.
pub const SEARCH: (f64, f64) = (0.1, site::FARTHEST);

pub struct Case {
    pub budget: Budget,
    pub air: site::AirInForce,
    pub distance: f64,
    pub other: Option<f64>,
    /// Share × tolerance.
    pub allowed: f64,
    pub tolerance: f64,
    pub share: f64,
    /// Every term at every place of the search: worked out once, asked for each limit.
    scan: Vec<(f64, [Part; 5])>,
}

/// What counts against the allowance.
#[derive(Clone, Copy, PartialEq)]
pub enum Count {
    All,
    DoubtOnly,
    One(Term),
}

impl Case {
    pub fn of(asked: &Asked, sky: Sky) -> Case {
        let air = site::air(asked, sky);
        let budget = site::budget(asked, air.k, asked.must(&DISTANCE_DOUBT));
        let (tolerance, share) = (asked.must(&site::TOLERANCE), asked.must(&site::SHARE));
        let distance = asked.must(&site::DISTANCE);
        let other = asked.number(&OTHER);
        let allowed = share * tolerance;
        let mut case = Case { budget, air, distance, other, allowed, tolerance, share, scan: vec![] };
        let places = places(SEARCH.0, SEARCH.1, &[distance, other.unwrap_or(distance)]);
        case.scan = places.into_iter().map(|d| (d, case.parts(d))).collect();
        case
    }
    /// Every term at distance `d`, with the other sight as entered.
    pub fn parts(&self, d: f64) -> [Part; 5] {
        match self.other {
            Some(other) => self.budget.setup(Metres(d), Metres(other)),
            None => self.budget.sight(Metres(d)),
        }
    }
    pub fn error(&self, d: f64) -> Estimate {
        total(&self.parts(d))
    }
    pub fn balanced(&self, other: f64) -> Estimate {
        total(&self.budget.setup(Metres(self.distance), Metres(other)))
    }
    pub fn both_ways(&self) -> Estimate {
        total(&self.budget.both_ways(Metres(self.distance)))
    }
    /// The distances at which what counts stays within the allowance.
    pub fn bounds(&self, count: Count) -> Vec<Stretch> {
        let within = |parts: &[Part; 5]| {
            let worst = match count {
                Count::All => total(parts).worst(),
                Count::DoubtOnly => total(parts).corrected().worst(),
                Count::One(term) => parts.iter().filter(|p| p.term == term).map(|p| p.error.worst()).sum(),
            };
            worst <= self.allowed
        };
        joined(self.scan.iter().map(|(d, parts)| (*d, within(parts))), |d| within(&self.parts(d)))
    }
    /// The stretch that says how far this sight may run: the one that holds the other sight, else the first.
    pub fn reach(&self, count: Count) -> Option<Stretch> {
        let all = self.bounds(count);
        let held = self.other.and_then(|o| all.iter().find(|s| s.holds(o)));
        held.or(all.first()).copied()
    }
    /// How short and how long the other sight may be for this one: the stretch about equal sights.
    pub fn other_range(&self) -> Option<Stretch> {
        let all = stretches(SEARCH.0, SEARCH.1, &[self.distance], |other| self.balanced(other).worst() - self.allowed);
        all.into_iter().find(|s| s.holds(self.distance))
    }
    /// The longest setup with equal sights.
    pub fn equal_reach(&self) -> Option<Stretch> {
        let excess = |d: f64| total(&self.budget.setup(Metres(d), Metres(d))).worst() - self.allowed;
        stretches(SEARCH.0, SEARCH.1, &[self.distance], excess).first().copied()
    }
}
