//! Every limit on this sight: what the tolerance leaves, the staff, the ground, a published class.

use super::case::{Case, Count, SEARCH};
use super::{CLASS, CLEARANCE, INSTRUMENT, SLOPE, STAFF};
use crate::limits;
use crate::order::sort;
use crate::quantity::Metres;
use crate::question::{Asked, site};
use crate::ray;
use crate::sight::bounds::stretches;
use crate::sight::budget::Term;

/// Where a limit lies.
#[derive(Clone, Copy, PartialEq, PartialOrd)]
pub enum End {
    /// At this distance.
    At(f64),
    /// At no distance that was searched.
    Never,
    /// No distance is within it.
    Always,
}

pub struct Limit {
    pub name: &'static str,
    pub end: End,
    pub why: String,
    /// One term by itself: shown, but never ruling.
    pub alone: bool,
}

impl Limit {
    /// For sorting: the nearest rules.
    fn rank(&self) -> f64 {
        match self.end {
            End::At(d) => d,
            End::Never => f64::INFINITY,
            End::Always => 0.0,
        }
    }
    /// The sight as entered is beyond it.
    pub fn broken_at(&self, d: f64) -> bool {
        match self.end {
            End::At(end) => d > end,
            End::Never => false,
            End::Always => true,
        }
    }
}

pub const OPTICAL: &str = "tolerance, every term together";

/// All limits, the ruling one first; after them each term by itself, the strongest first.
pub fn all(asked: &Asked, case: &Case) -> Vec<Limit> {
    let show = asked.show();
    let allowed = show.entered(case.allowed);
    let optical = |name, count, why: String, alone| {
        let end = match case.reach(count) {
            None => End::Always,
            Some(s) if s.open_above => End::Never,
            Some(s) => End::At(s.to),
        };
        Limit { name, end, why, alone }
    };
    let mut limits = vec![optical(OPTICAL, Count::All, format!("bias and doubt reach {allowed}"), false)];
    limits.extend(ground(asked, case));
    if let Some(class) = limits::class(asked.choice(&CLASS)) {
        limits.push(Limit {
            name: "sight limit of the class",
            end: End::At(class.sight),
            why: format!("{} ends", class.label),
            alone: false,
        });
    }
    for (term, name) in TERMS {
        limits.push(optical(name, Count::One(term), format!("by itself it reaches {allowed}"), true));
    }
    sort(&mut limits, |l| [f64::from(u8::from(l.alone)), l.rank()]);
    limits
}

/// Each term and its name when it stands alone.
pub const TERMS: [(Term, &str); 5] = [
    (Term::Curvature, "curvature alone"),
    (Term::Refraction, "refraction alone"),
    (Term::Collimation, "collimation alone"),
    (Term::Reading, "reading alone"),
    (Term::Distance, "distance alone"),
];

/// Limits of ground and staff, each only where what it needs was entered.
fn ground(asked: &Asked, case: &Case) -> Vec<Limit> {
    let show = asked.show();
    let line = asked.must(&site::LINE_HEIGHT);
    let instrument = asked.number(&INSTRUMENT).unwrap_or(line);
    let clearance = asked.number(&CLEARANCE);
    let slope = asked.number(&SLOPE);
    let mut limits = vec![];
    if let Some(least) = clearance.filter(|c| *c > line) {
        let why = format!(
            "the line runs {} over the ground, {} is wanted",
            show.height_words(line),
            show.height_words(least)
        );
        limits.push(Limit { name: "clearance over the ground", end: End::Always, why, alone: false });
    }
    // What the staff reads at d on an even slope, curve and air included: HI − s·d + combined(d).
    let bent = |d: f64| ray::combined(Metres(d), case.budget.k.value, case.budget.radius).map_or(f64::NAN, |h| h.0);
    let rise = slope.unwrap_or(0.0);
    let end = |excess: &dyn Fn(f64) -> f64| match stretches(SEARCH.0, SEARCH.1, &[], excess).first() {
        Some(s) if s.open_below && s.open_above => End::Never,
        Some(s) if s.open_below => End::At(s.to),
        _ => End::Always,
    };
    if slope.is_some() || clearance.is_some() {
        let least = clearance.unwrap_or(0.0);
        let (name, why) = match clearance {
            Some(c) => {
                ("clearance at the staff", format!("the line comes within {} of the ground", show.height_words(c)))
            }
            None => ("foot of the staff", "the line meets the ground".to_owned()),
        };
        limits.push(Limit { name, end: end(&|d| least - (instrument - rise * d + bent(d))), why, alone: false });
    }
    if let Some(length) = asked.number(&STAFF) {
        let why = format!("the line leaves the staff of {}", show.height_words(length));
        limits.push(Limit {
            name: "top of the staff",
            end: end(&|d| instrument - rise * d + bent(d) - length),
            why,
            alone: false,
        });
    }
    limits
}
