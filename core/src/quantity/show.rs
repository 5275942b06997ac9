//! Quantity → text: how many digits, which unit, which way to round.

use super::unit::{Quantity, System, Unit};
use std::f64::consts::PI;

/// A value as a person reads it.
#[derive(Debug, Clone, PartialEq)]
pub struct Shown {
    /// Digits.
    pub text: String,
    /// Unit, empty for none.
    pub unit: &'static str,
}

impl std::fmt::Display for Shown {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        // A no-break space: number and unit are one word.
        let gap = if self.unit.is_empty() || self.unit.starts_with(['″', '′', '°']) { "" } else { "\u{a0}" };
        write!(f, "{}{gap}{}", self.text, self.unit)
    }
}

/// Which way a shown distance is rounded: always to the safe side of a limit.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Round {
    /// To the nearest.
    Near,
    /// A longest distance.
    Down,
    /// A shortest distance.
    Up,
}

/// `value` with so many places, a real minus, and no minus before a zero.
pub fn places(value: f64, places: usize) -> String {
    let text = format!("{value:.places$}");
    match text.strip_prefix('-') {
        Some(rest) if rest.chars().any(|c| c.is_ascii_digit() && c != '0') => format!("−{rest}"),
        Some(rest) => rest.to_owned(),
        None => text,
    }
}

/// Power of ten of the leading digit.
fn magnitude(value: f64) -> i32 {
    if value == 0.0 || !value.is_finite() { 0 } else { libm::floor(libm::log10(value.abs())) as i32 }
}

/// Places that leave `digits` significant digits of `grain`, at most 9.
pub fn fitting(grain: f64, digits: i32) -> usize {
    if grain == 0.0 { 0 } else { (digits - 1 - magnitude(grain)).clamp(0, 9) as usize }
}

/// `value` to so many significant digits, in plain notation, without trailing zeros after the point.
pub fn significant(value: f64, digits: i32) -> String {
    let spare = magnitude(value) + 1 - digits;
    if spare > 0 {
        let step = libm::pow(10.0, f64::from(spare));
        return places(libm::round(value / step) * step, 0);
    }
    let text = places(value, fitting(value, digits));
    if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.').to_owned() } else { text }
}

fn in_unit(si: f64, unit: &Unit) -> f64 {
    unit.from_si(si).unwrap_or(0.0)
}

/// Units of the answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Show(pub System);

impl Show {
    /// The unit errors and corrections are shown in: mm, or feet; metres from ten metres up.
    pub fn small_unit(self, si: f64) -> &'static Unit {
        let quantity = if si.abs() >= 10.0 { Quantity::Height } else { Quantity::SmallLength };
        quantity.usual(self.0)
    }
    /// A small length to two significant digits of `grain` (its doubt, or itself).
    pub fn small(self, si: f64, grain: f64) -> Shown {
        self.small_in(self.small_unit(si.abs().max(grain.abs())), si, grain)
    }
    /// The same in a given unit; to one digit of its own where those of `grain` would make it look like nothing.
    pub fn small_in(self, unit: &Unit, si: f64, grain: f64) -> Shown {
        let value = in_unit(si, unit);
        let places_of_grain = fitting(in_unit(grain, unit), 2);
        let vanishes = value != 0.0 && !places(value, places_of_grain).contains(|c: char| ('1'..='9').contains(&c));
        Shown { text: places(value, if vanishes { fitting(value, 1) } else { places_of_grain }), unit: unit.symbol }
    }
    /// A small length to two significant digits of its own, on both sides of the point.
    pub fn own(self, si: f64) -> Shown {
        let unit = self.small_unit(si);
        let value = in_unit(si, unit);
        if magnitude(value) >= 2 {
            return Shown { text: significant(value, 2), unit: unit.symbol };
        }
        self.small_in(unit, si, si)
    }
    /// A small length that was entered, or follows from what was: four significant digits, no zeros after them.
    pub fn entered(self, si: f64) -> Shown {
        let unit = self.small_unit(si);
        Shown { text: significant(in_unit(si, unit), 4), unit: unit.symbol }
    }
    /// A height, to a tenth of a millimetre or a thousandth of a foot.
    pub fn height(self, si: f64) -> Shown {
        let unit = Quantity::Height.usual(self.0);
        Shown { text: places(in_unit(si, unit), if unit.symbol == "m" { 4 } else { 3 }), unit: unit.symbol }
    }
    /// A length in metres or feet to two significant digits of `grain`.
    pub fn metres(self, si: f64, grain: f64) -> Shown {
        let grain = if si == 0.0 { 1.0 } else { grain.abs().max(0.001) };
        self.small_in(Quantity::Height.usual(self.0), si, grain)
    }
    /// A height in words: as many digits as it has, up to the centimetre or the hundredth of a foot.
    pub fn height_words(self, si: f64) -> Shown {
        let unit = Quantity::Height.usual(self.0);
        let text = places(in_unit(si, unit), 2);
        Shown { text: text.trim_end_matches('0').trim_end_matches('.').to_owned(), unit: unit.symbol }
    }
    /// A distance along the ground: three significant digits, never finer than 0.1; kilometres or miles from ten up.
    pub fn distance(self, si: f64, round: Round) -> Shown {
        let usual = Quantity::Distance.usual(self.0);
        let long = Quantity::Distance.unit(if usual.symbol == "m" { "km" } else { "mi" }).unwrap_or(usual);
        let unit = if in_unit(si, long).abs() >= 10.0 { long } else { usual };
        let value = in_unit(si, unit);
        let places_left = (2 - magnitude(value)).min(1);
        let step = libm::pow(10.0, -f64::from(places_left));
        let steps = value / step;
        let whole = match round {
            Round::Near => libm::round(steps),
            // A value that is whole but for the last bits of the division stays what it is.
            Round::Down => libm::floor(steps * (1.0 + 1e-12)),
            Round::Up => libm::ceil(steps * (1.0 - 1e-12)),
        };
        let text = places(whole * step, places_left.max(0) as usize);
        let text = match (round, text.strip_suffix(".0")) {
            (Round::Near, Some(short)) => short.to_owned(),
            _ => text,
        };
        Shown { text, unit: unit.symbol }
    }
    /// The two ends of a range of distances, rounded inwards: to whole units where that leaves most of it.
    pub fn range(self, from: f64, to: f64) -> (Shown, Shown) {
        let (fine_from, fine_to) = (self.distance(from, Round::Up), self.distance(to, Round::Down));
        let unit = Quantity::Distance.usual(self.0);
        let (low, high) = (libm::ceil(in_unit(from, unit)), libm::floor(in_unit(to, unit)));
        let coarse = fine_from.unit == unit.symbol && fine_to.unit == unit.symbol && high < 1000.0 && high - low >= 4.0;
        if coarse {
            let whole = |value: f64| Shown { text: places(value, 0), unit: unit.symbol };
            return (whole(low), whole(high));
        }
        (fine_from, fine_to)
    }
    /// An angle of a position in degrees, minutes and seconds, to a hundredth of a second: 0.3 m of the earth.
    pub fn position(self, radians: f64) -> String {
        let hundredths = libm::round(radians.abs() * 180.0 / PI * 360_000.0) as u64;
        let (seconds, rest) = (hundredths / 100, hundredths % 100);
        format!("{}°{:02}′{:02}.{rest:02}″", seconds / 3600, seconds / 60 % 60, seconds % 60)
    }
    /// A tilt of the line, mm/m and seconds of arc.
    pub fn tilt(self, rise: f64) -> String {
        let seconds = Quantity::Collimation.unit("″").and_then(|u| u.from_si(rise)).unwrap_or(0.0);
        format!("{}\u{a0}mm/m, {}″", significant(rise * 1000.0, 2), significant(seconds, 2))
    }
    /// k to three significant digits, two where it is small.
    pub fn k(self, k: f64) -> String {
        significant(k, if k.abs() >= 0.1 { 3 } else { 2 })
    }
}
