//! The mark and the work as entered, and how high each place comes out.

use super::{AT, DISTANCE_DOUBT, ITS_TOLERANCE, MARK, NAME, WORKS};
use crate::air::guide::{self, Sky};
use crate::doubt::{Estimate, State};
use crate::order::sort;
use crate::quantity::Metres;
use crate::question::{Asked, site};
use crate::sight::bounds::Stretch;
use crate::sight::budget::Budget;
use crate::sight::one_mark::{best_mark, too_high, within};

/// Work that is assumed where none is entered, metres: what lasers and levels are used for.
const USUAL: [f64; 6] = [25.0, 50.0, 100.0, 150.0, 200.0, 300.0];
/// Nearest distance of the search for limits, metres: below it no level stands.
const NEAREST: f64 = 0.1;
/// The skies that are told beside the one entered.
pub const SKIES: [Sky; 3] = [Sky::Sunny, Sky::Overcast, Sky::ClearNight];

/// A place of the work.
pub struct Place {
    pub at: f64,
    pub name: String,
    pub allowed: f64,
    /// How much too high it comes out.
    pub error: Estimate,
}

impl Place {
    pub fn state(&self) -> State {
        self.error.state(self.allowed)
    }
}

pub struct Case {
    pub budget: Budget,
    pub air: site::AirInForce,
    pub mark: f64,
    pub tolerance: f64,
    pub share: f64,
    /// Share × tolerance.
    pub allowed: f64,
    /// By distance.
    pub places: Vec<Place>,
    pub finish: Option<Stretch>,
    /// Best distance of a mark, and the worst from there.
    pub best: (f64, f64),
    /// With k of the guide for each of [`SKIES`].
    skies: [Budget; 3],
}

impl Case {
    pub fn of(asked: &Asked) -> Case {
        let air = site::air(asked, site::sky(asked));
        let budget = site::budget(asked, air.k, asked.must(&DISTANCE_DOUBT));
        let (tolerance, share) = (asked.must(&site::TOLERANCE), asked.must(&site::SHARE));
        let (mark, allowed) = (asked.must(&MARK), share * tolerance);
        let rows = asked.rows(&WORKS).iter();
        let entered = rows.map(|row| (row.number(&AT).unwrap_or(mark), row.number(&ITS_TOLERANCE), row.text(&NAME)));
        let mut works: Vec<(f64, Option<f64>, &str)> = entered.collect();
        if works.is_empty() {
            works.extend(USUAL.map(|at| (at, None, "")));
        }
        sort(&mut works, |work| [work.0, 0.0]);
        let distances: Vec<Metres> = works.iter().map(|work| Metres(work.0)).collect();
        let places = works.into_iter().map(|(at, own, name)| Place {
            at,
            name: name.to_owned(),
            allowed: own.map_or(allowed, |own| share * own),
            error: too_high(&budget, Metres(mark), Metres(at)),
        });
        let height = Metres(asked.must(&site::LINE_HEIGHT));
        let best = best_mark(&budget, &distances, Metres(site::NEAREST)).map_or((mark, 0.0), |(m, w)| (m.0, w.0));
        let places = places.collect();
        let finish = within(&budget, Metres(mark), Metres(allowed), Metres(NEAREST), Metres(site::FARTHEST));
        let skies = SKIES.map(|sky| Budget { k: guide::k(height, sky), ..budget });
        Case { budget, air, mark, tolerance, share, allowed, places, finish, best, skies }
    }
    /// How much too high work at `d` comes out in the air as entered.
    pub fn error(&self, d: f64) -> Estimate {
        too_high(&self.budget, Metres(self.mark), Metres(d))
    }
    /// The same under each of [`SKIES`].
    pub fn under(&self, d: f64) -> [Estimate; 3] {
        self.skies.map(|budget| too_high(&budget, Metres(self.mark), Metres(d)))
    }
    /// The place that fits least.
    pub fn worst(&self) -> Option<&Place> {
        self.places.iter().max_by(|a, b| (a.error.worst() / a.allowed).total_cmp(&(b.error.worst() / b.allowed)))
    }
    pub fn farthest(&self) -> f64 {
        self.places.last().map_or(self.mark, |place| place.at)
    }
}
