//! Which single slip would explain that a run does not close: candidates, never a proof, and nothing is changed.
//!
//! Each kind of slip is tried at every place where it can have happened. What the run would close by with the slip put
//! right is what the slip *leaves*; candidates that leave no more than the run may close by are kept, the likeliest
//! first. One pass over the rows: the level at the end is a sum, so each slip moves it by an amount of its own.
//!
//! **Order.** By Bayes' theorem the odds of a candidate are those of its kind, shared among all places where that kind
//! could have happened in this run, times how well what it leaves agrees with an honest run:
//!
//!   ln odds = ln(P / n) − left² / 2σ²
//!
//! P how often the kind happens (`odds`: our judgement, no source), n how many slips of the kind were tried, σ the
//! standard deviation of an honest misclosure. So a reading whose two digits are swapped does not come first merely
//! because sixty readings have three such pairs each and one of them had to fit. A slip of unknown size (collimation,
//! curvature, a staff that slipped, half an interval by a paced distance) has a range of sizes besides places; with
//! size s ± τ and lever L
//!
//!   ln odds = ln(P / n) − ½ ln(1 + L²τ²/σ²) − (w − L s)² / 2(σ² + L²τ²)
//!
//! and the size named is the likeliest under both, s + Lτ²(w − L s)/(σ² + L²τ²), which leaves a little; none is kept that
//! would have to lie three standard deviations √(σ² + L²τ²) off.
//!
//! Two slips in one run, or a mark that moved, look like nothing here or like the wrong thing.

mod digits;
mod readings;
mod whole;

use super::{Run, Setup};
use crate::constants::COVERAGE;
use crate::doubt::Estimate;
use crate::order;

/// What is known of a run beside what was read.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Known<'a> {
    /// What the run may close by, metres, above 0; taken for three standard deviations of an honest misclosure (common
    /// practice, no source).
    pub allowed: f64,
    /// Metres in the unit of the staff: 1, or a foot. Digits and round numbers are those of this unit.
    pub unit: f64,
    /// Length of the staff, metres: no slip is one that would have been read beyond it.
    pub staff: f64,
    /// Heights of the staff's joints over its foot, metres, ascending.
    pub joints: &'a [f64],
    /// Distance per interval between the outer wires, 100 as a rule.
    pub stadia: f64,
    /// Doubt of a distance as a share of it, 95 %.
    pub distance_doubt: f64,
    /// Tilt of the line that is still in the readings, radians, up positive, 95 %.
    pub collimation: Estimate,
    /// (1 − k)/2R that is still in the readings, 1/m, 95 %: what a sight reads too much is this × its distance squared.
    pub bend: Estimate,
}

/// Which sight of a setup.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Side {
    /// The back sight.
    Back,
    /// The fore sight.
    Fore,
}

/// A sight that carries the level on.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Place {
    /// Setup, from 0.
    pub setup: usize,
    /// Which of its sights.
    pub side: Side,
}

/// Which end of the run.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum End {
    /// The mark it starts from.
    Start,
    /// The mark it closes on.
    Close,
}

/// One slip, with what would be right. Lengths in metres.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Slip {
    /// Some back sight was read too great by so much, or some fore sight too small: a whole unit, tenth or hundredth;
    /// negative for the reverse.
    Round(f64),
    /// Two neighbouring digits stand the wrong way round; the reading would be `reading`.
    Swapped {
        /// Where.
        at: Place,
        /// What it would be.
        reading: f64,
    },
    /// The staff stood head down and was booked as upright, or the reverse.
    Inverted(Place),
    /// Back and fore sight of this setup stand in each other's column.
    Exchanged(usize),
    /// The fore sight is this intermediate sight, and the reading booked as fore sight the intermediate.
    Intermediate {
        /// Setup, from 0.
        setup: usize,
        /// Which of its intermediate sights, from 0.
        inter: usize,
    },
    /// An outer wire was read for the middle one; the reading would be `reading`.
    Wire {
        /// Where.
        at: Place,
        /// What it would be.
        reading: f64,
    },
    /// A section of this length was not drawn out when a reading on this side was taken above it.
    Undrawn {
        /// Length of the section.
        section: f64,
        /// The side.
        side: Side,
    },
    /// The staff slipped at the joint of this height, and all readings above it are too great by `by`.
    Slipped {
        /// Height of the joint over the foot.
        joint: f64,
        /// How far it slid together.
        by: f64,
    },
    /// The level of a mark was copied wrong; it would be `level`.
    Mark {
        /// Which mark.
        end: End,
        /// What it would be.
        level: f64,
        /// Two neighbouring digits stand the wrong way round, rather than one digit being wrong.
        swapped: bool,
    },
    /// The line is tilted by so much, radians, up positive, and back and fore sights were not equally long.
    Collimation(f64),
    /// Curvature and refraction together are this, (1 − k)/2R in 1/m, and back and fore sights were not equally long.
    Curvature(f64),
}

/// A slip and what it leaves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Candidate {
    /// The slip.
    pub slip: Slip,
    /// What the run would close by with it put right, metres; + too high.
    pub left: f64,
    /// ln odds, but for a sum that all candidates of a run share.
    odds: f64,
}

/// Every single slip that would leave no more than `known.allowed` of `misclosure` (what the run came out too high by on
/// the mark it closes on, metres), the likeliest first.
pub fn candidates(run: &Run, misclosure: f64, known: &Known) -> Vec<Candidate> {
    let mut sieve = Sieve { misclosure, sigma: known.allowed / 3.0, tried: [0; KINDS], kept: vec![] };
    let readings = run.setups.iter().flat_map(|setup| [Some(setup.back), setup.fore]).flatten();
    let steps = digits::steps(readings.map(|sight| sight.reading), known.unit, 100.0);
    readings::offer(run, known, steps, &mut sieve);
    whole::offer(run, known, steps, &mut sieve);
    sieve.ranked()
}

/// Back minus fore sight.
fn rise(setup: &Setup) -> f64 {
    setup.back.reading - setup.fore.map_or(0.0, |fore| fore.reading)
}

/// How many kinds [`odds`] tells apart.
const KINDS: usize = 12;

/// Kind of a slip, below [`KINDS`], and how often it happens among all of them: **our judgement, no source**. Only the
/// order of candidates rests on it.
fn odds(slip: &Slip) -> (usize, f64) {
    match slip {
        Slip::Round(_) => (0, 0.30),
        Slip::Swapped { .. } => (1, 0.20),
        Slip::Inverted(_) => (2, 0.05),
        Slip::Exchanged(_) => (3, 0.08),
        Slip::Intermediate { .. } => (4, 0.08),
        Slip::Wire { .. } => (5, 0.10),
        Slip::Undrawn { .. } => (6, 0.04),
        Slip::Slipped { .. } => (7, 0.04),
        Slip::Mark { swapped: false, .. } => (8, 0.05),
        Slip::Mark { swapped: true, .. } => (9, 0.03),
        Slip::Collimation(_) => (10, 0.05),
        Slip::Curvature(_) => (11, 0.02),
    }
}

/// Takes slips in and keeps those that explain the misclosure.
struct Sieve {
    misclosure: f64,
    /// Standard deviation of an honest misclosure.
    sigma: f64,
    /// How many slips of each kind were offered.
    tried: [u32; KINDS],
    kept: Vec<Candidate>,
}

impl Sieve {
    /// A slip that moved the level at the end up by `moved`.
    fn offer(&mut self, slip: Slip, moved: f64) {
        let left = self.misclosure - moved;
        self.weigh(Candidate { slip, left, odds: -left * left / (2.0 * self.sigma * self.sigma) }, left, self.sigma);
    }
    /// A slip of unknown size, which moved the level at the end up by `lever` × size, of which `size` is known.
    fn offer_sized(&mut self, slip: impl Fn(f64) -> Slip, size: Estimate, lever: f64) {
        let spread = lever * size.half() / COVERAGE;
        let (noise, spread) = (self.sigma * self.sigma, spread * spread);
        let (off, all) = (self.misclosure - lever * size.bias, noise + spread);
        let explained = off * spread / all;
        let odds = -off * off / (2.0 * all) - 0.5 * libm::log1p(spread / noise);
        if lever != 0.0 {
            let slip = slip(size.bias + explained / lever);
            self.weigh(Candidate { slip, left: off - explained, odds }, off, all.sqrt());
        }
    }
    /// Counts a candidate, and keeps it where `off` is within three times its standard deviation.
    fn weigh(&mut self, candidate: Candidate, off: f64, deviation: f64) {
        if let Some(tried) = self.tried.get_mut(odds(&candidate.slip).0) {
            *tried += 1;
        }
        let close = off.abs() <= 3.0 * deviation && candidate.left.abs() <= 3.0 * self.sigma;
        if close && candidate.odds.is_finite() {
            self.kept.push(candidate);
        }
    }
    fn ranked(mut self) -> Vec<Candidate> {
        for kept in &mut self.kept {
            let (kind, often) = odds(&kept.slip);
            let tried = self.tried.get(kind).map_or(1.0, |tried| f64::from(*tried));
            kept.odds += libm::log(often / tried);
        }
        order::sort(&mut self.kept, |candidate| [-candidate.odds, 0.0]);
        self.kept
    }
}
