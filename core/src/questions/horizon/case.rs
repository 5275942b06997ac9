//! The heights and distances as entered, and what each k makes of them.

use super::{DIP, DISTANCE, EYE, HIDDEN, HORIZON, LINE, RANGE, SHORE, SURFACE, TARGET};
use crate::air::guide::{self, KRange, Sky};
use crate::doubt::State;
use crate::horizon;
use crate::quantity::show::{Show, Shown, significant};
use crate::quantity::unit::{ARC_MINUTE, NAUTICAL_MILE, Quantity, Unit};
use crate::quantity::{Coefficient, Metres};
use crate::question::{Asked, Promised, site};

/// What can be reckoned for one k.
#[derive(Clone, Copy, PartialEq)]
pub enum What {
    Horizon,
    Line,
    Dip,
    Hidden,
    Range,
}

impl What {
    /// In the order of the results.
    pub const ALL: [What; 5] = [What::Horizon, What::Line, What::Dip, What::Hidden, What::Range];

    pub fn promise(self) -> &'static Promised {
        match self {
            What::Horizon => &HORIZON,
            What::Line => &LINE,
            What::Dip => &DIP,
            What::Hidden => &HIDDEN,
            What::Range => &RANGE,
        }
    }
}

/// A value and the ends of its range; infinite where it has no end: no horizon and so no dip, hidden at any height, raised
/// at any distance.
#[derive(Clone, Copy)]
pub struct Spread {
    pub value: f64,
    pub low: f64,
    pub high: f64,
}

pub struct Case {
    pub eye: Metres,
    pub target: Option<Metres>,
    pub distance: Option<Metres>,
    pub shore: Option<Metres>,
    pub radius: Metres,
    radius_doubt: f64,
    pub air: site::AirInForce,
    pub k_given: bool,
    /// By our rules, under the sky of the day and on a clear night.
    pub day: KRange,
    pub night: KRange,
    nautical: bool,
    pub show: Show,
}

impl Case {
    pub fn of(asked: &Asked) -> Case {
        let metres = |field| asked.number(field).map(Metres);
        let (eye, target) = (Metres(asked.must(&EYE)), metres(&TARGET));
        let height = horizon::line_height(eye, target.unwrap_or(Metres(0.0)));
        let surface = asked.choice(&SURFACE);
        let (nautical, ground) = (surface == "nautical", surface == "ground");
        let rule = |sky| {
            let range = if ground { guide::k(height, sky) } else { horizon::over_water(height, sky) };
            KRange { value: if nautical { horizon::NAUTICAL_K } else { range.value }, ..range }
        };
        let (sky, show) = (site::sky(asked), asked.show());
        let words = match surface {
            "nautical" => "nautical tables".to_owned(),
            surface => {
                format!("our rule for a line {} over {surface} {}", show.height_words(height.0), site::sky_words(sky))
            }
        };
        let (radius, radius_doubt) = site::radius(asked);
        Case {
            eye,
            target,
            distance: metres(&DISTANCE),
            shore: metres(&SHORE),
            radius,
            radius_doubt,
            air: site::in_force(asked, rule(sky), &words),
            k_given: asked.given(&site::K),
            day: rule(if sky == Sky::ClearNight { Sky::Unknown } else { sky }),
            night: rule(Sky::ClearNight),
            nautical,
            show,
        }
    }

    /// What it comes to at this k; `None` where it was not asked.
    pub fn at(&self, what: What, k: Coefficient, r: Metres) -> Option<f64> {
        let horizon = horizon::distance(self.eye, k, r);
        let far = match what {
            What::Horizon => horizon,
            What::Line => horizon::line(self.eye, k, r),
            What::Hidden => horizon::hidden(self.eye, self.distance?, k, r),
            What::Range => horizon::visible_range(self.eye, self.target?, k, r),
            What::Dip => {
                let shore = self.shore.filter(|s| horizon.is_none_or(|h| s.0 < h.0));
                let dip = shore.map_or_else(|| horizon::dip(self.eye, k, r), |s| horizon::dip_short(self.eye, s, k, r));
                return Some(dip.map_or(f64::NEG_INFINITY, |d| d.0));
            }
        };
        Some(far.map_or(f64::INFINITY, |d| d.0))
    }

    /// The same over a range of k, widened by what the radius is in doubt by.
    pub fn spread(&self, what: What, k: KRange) -> Option<Spread> {
        let at = |k, share: f64| self.at(what, k, Metres(self.radius.0 * (1.0 + share)));
        let value = at(k.value, 0.0)?;
        let (one, other) = (at(k.low, 0.0)?, at(k.high, 0.0)?);
        let radius = (at(k.value, self.radius_doubt)? - at(k.value, -self.radius_doubt)?) / 2.0;
        let (mut low, mut high) = (one.min(other), one.max(other));
        // Where there is no value there is nothing to widen.
        if radius.is_finite() {
            low = value - libm::hypot(value - low, radius);
            high = value + libm::hypot(high - value, radius);
        }
        // Only a dip may be below nought: a shore above the eye.
        Some(Spread { value, low: if what == What::Dip { low } else { low.max(0.0) }, high })
    }

    /// How a target stands to the horizon over a range of k; `None` without target or distance.
    pub fn state(&self, k: KRange) -> Option<State> {
        let (hidden, top) = (self.spread(What::Hidden, k)?, self.target?.0);
        Some(match hidden {
            Spread { high, .. } if high < top => State::Within,
            Spread { low, .. } if low >= top => State::Beyond,
            _ => State::Doubtful,
        })
    }

    /// The unit that suits a size.
    pub fn unit(&self, what: What, si: f64) -> &'static Unit {
        let usual = Quantity::Distance.usual(self.show.0);
        let long = if usual.symbol == "m" { "km" } else { "mi" };
        let long = Quantity::Distance.unit(long).filter(|u| u.from_si(si).is_some_and(|n| n >= 10.0));
        match what {
            What::Dip => &ARC_MINUTE,
            What::Hidden if si > 0.0 && si < 0.1 => Quantity::SmallLength.usual(self.show.0),
            What::Hidden => usual,
            _ if self.nautical => &NAUTICAL_MILE,
            _ => long.unwrap_or(usual),
        }
    }

    /// The value as it is shown, and its range, in one unit.
    pub fn said(&self, what: What, s: Spread) -> (Shown, Shown) {
        let size = [s.value, s.low, s.high].into_iter().filter(|v| v.is_finite()).fold(0.0, f64::max);
        let unit = self.unit(what, if s.value.is_finite() && what != What::Hidden { s.value } else { size });
        let text = |si| {
            let number = unit.from_si(si).unwrap_or(0.0);
            significant(number, if number >= 100.0 { 4 } else { 3 })
        };
        let (low, high) = (text(s.low), text(s.high));
        let range = match (s.low.is_finite(), s.high.is_finite()) {
            (true, true) if s.low == s.high => "± 0".to_owned(),
            (true, true) => format!("from {low} to {high}"),
            (true, false) => format!("≥ {low}"),
            (false, true) => format!("≤ {high}"),
            (false, false) => "whatever the air".to_owned(),
        };
        let shown = match what {
            _ if s.value.is_finite() => Shown { text: text(s.value), unit: unit.symbol },
            What::Hidden => Shown { text: "any height".to_owned(), unit: "" },
            What::Range => Shown { text: "any distance".to_owned(), unit: "" },
            _ => Shown { text: "none".to_owned(), unit: "" },
        };
        let bounded = s.low.is_finite() || s.high.is_finite();
        (shown, Shown { text: range, unit: if bounded { unit.symbol } else { "" } })
    }

    /// The value at one k as it is shown.
    pub fn cell(&self, what: What, k: Coefficient) -> Option<Shown> {
        let value = self.at(what, k, self.radius)?;
        Some(self.said(what, Spread { value, low: value, high: value }).0)
    }
}
