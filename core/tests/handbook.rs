//! Figures of others: each row of `rows/handbook.tsv` with its source beside it, read from text as a person types it.
//!
//! The tolerance is the source's printed digits, and four ulps of our own.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::air::guide::{KRange, Sky, k};
use farstaff::constants::{COVERAGE, EARTH_RADIUS, RADIUS_SPREAD};
use farstaff::horizon;
use farstaff::quantity::number::{number, split};
use farstaff::quantity::unit::{ARC_MINUTE, QUANTITIES, Quantity, System};
use farstaff::quantity::{Coefficient, Metres, Tilt};
use farstaff::ray::{combined, curvature, handbook_combined};
use farstaff::sight::{SightDoubt, imbalance, reach};

const ROWS: &str = include_str!("rows/handbook.tsv");

/// SI value of a text: number, then unit, or the usual metric one.
fn si(text: &str, quantity: Quantity) -> f64 {
    let (digits, unit) = split(text);
    let unit = if unit.is_empty() { quantity.usual(System::Metric) } else { quantity.unit(&unit).unwrap() };
    unit.to_si(number(&digits).unwrap().value).unwrap()
}

/// The inputs of a row, `name=text` by semicolons; one that a row does not have is nothing.
struct Inputs<'a>(&'a str);

impl Inputs<'_> {
    fn text(&self, name: &str) -> Option<&str> {
        let mut parts = self.0.split("; ").filter_map(|p| p.split_once('='));
        parts.find(|p| p.0 == name).map(|p| p.1)
    }
    fn get(&self, name: &str, quantity: Quantity) -> f64 {
        self.text(name).map_or(0.0, |text| si(text, quantity))
    }
    fn metres(&self, name: &str) -> Metres {
        Metres(self.get(name, Quantity::Distance))
    }
    fn r(&self) -> Metres {
        Metres(self.get("R", Quantity::Radius))
    }
    fn k(&self) -> Coefficient {
        Coefficient(self.get("k", Quantity::Refraction))
    }
    fn allowed(&self) -> Metres {
        Metres(self.get("T", Quantity::SmallLength))
    }
    fn doubt(&self) -> SightDoubt {
        SightDoubt {
            reading: Metres(self.get("U_0", Quantity::SmallLength)),
            reading_growth: Tilt(self.get("U_g", Quantity::Collimation)),
            collimation: Tilt(self.get("U_a", Quantity::Collimation)),
            k: self.get("U_k", Quantity::Refraction),
        }
    }
    fn guide(&self) -> KRange {
        let all = [Sky::Sunny, Sky::Overcast, Sky::ClearNight, Sky::Unknown];
        let sky = all.into_iter().find(|s| Some(format!("{s:?}").as_str()) == self.text("sky")).unwrap();
        k(self.metres("H"), sky)
    }
}

/// Where a rising function passes `level`, to the last bit.
fn arc(level: f64, rising: impl Fn(f64) -> f64) -> f64 {
    let (mut low, mut high) = (0.0, 1e6);
    loop {
        let middle = f64::midpoint(low, high);
        if middle == low || middle == high {
            return middle;
        }
        *(if rising(middle) < level { &mut low } else { &mut high }) = middle;
    }
}

/// What a row asks for, in SI. `printed` is what the row has, for those that only ask whether it lies inside.
fn compute(what: &str, inputs: &Inputs, printed: f64) -> f64 {
    let (s, r, k) = (inputs.metres("s"), inputs.r(), inputs.k());
    let at = |s: Metres| handbook_combined(s, k, r).0;
    match what {
        "curvature" => curvature(s, r).0,
        // Across the tangent instead of along the plumb line.
        "drop_arc" => curvature(s, r).0 * libm::cos(s.0 / r.0),
        // The distance measured along the tangent: to the plumb line of the staff, or to the foot across from it.
        "curvature_tangent" => curvature(Metres(r.0 * libm::atan(s.0 / r.0)), r).0,
        "drop_foot" => {
            let theta = libm::asin(s.0 / r.0);
            curvature(Metres(r.0 * theta), r).0 * libm::cos(theta)
        }
        "bulge" => curvature(Metres(s.0 / 2.0), r).0 * libm::cos(s.0 / 2.0 / r.0),
        "effective_radius" => r.0 * Quantity::Refraction.unit("factor").unwrap().from_si(k.0).unwrap(),
        "curvature_effective" => curvature(s, Metres(r.0 / (1.0 - k.0))).0,
        "combined" => combined(s, k, r).unwrap().0,
        "combined_difference" => combined(s, k, r).unwrap().0 - combined(inputs.metres("s2"), k, r).unwrap().0,
        "arc_combined" => arc(inputs.metres("h").0, |s| combined(Metres(s), k, r).unwrap().0),
        "arc_parabola_short" => {
            arc(inputs.metres("h").0, |s| curvature(Metres(s), r).0 - handbook_combined(Metres(s), k, r).0)
        }
        "handbook" => at(s),
        "handbook_refraction" => handbook_combined(s, Coefficient(0.0), r).0 - at(s),
        "corrected" => inputs.metres("a").0 - at(s),
        "corrected_difference" => (inputs.metres("a").0 - at(s)) - (inputs.metres("a2").0 - at(inputs.metres("s2"))),
        "dip" => horizon::dip(inputs.metres("h"), k, r).unwrap().0,
        "horizon" => horizon::distance(inputs.metres("h"), k, r).unwrap().0,
        "horizon_line" => horizon::line(inputs.metres("h"), k, r).unwrap().0,
        "dip_short" => horizon::dip_short(inputs.metres("h"), s, k, r).unwrap().0,
        "hidden" => horizon::hidden(inputs.metres("h"), s, k, r).unwrap().0,
        "visible_range" => horizon::visible_range(inputs.metres("h"), inputs.metres("H"), k, r).unwrap().0,
        "nautical_k" => horizon::NAUTICAL_K.0,
        "reach" => reach(inputs.allowed(), inputs.doubt(), r).unwrap().0,
        "imbalance" => {
            let common = inputs.get("rho", Quantity::Refraction);
            imbalance(inputs.allowed(), inputs.metres("D"), inputs.doubt(), common, r).unwrap().0
        }
        "longest_balanced" => {
            let common = inputs.get("rho", Quantity::Refraction);
            let ends = |d| imbalance(inputs.allowed(), Metres(d), inputs.doubt(), common, r).is_none();
            arc(1.0, |d| f64::from(u8::from(ends(d))))
        }
        "tilt_rise" => inputs.get("x", Quantity::Collimation) * inputs.metres("e").0,
        "earth_radius" => EARTH_RADIUS.0,
        "radius_low" => EARTH_RADIUS.0 * (1.0 - RADIUS_SPREAD),
        "radius_holds" => printed.clamp(EARTH_RADIUS.0 * (1.0 - RADIUS_SPREAD), EARTH_RADIUS.0 * (1.0 + RADIUS_SPREAD)),
        "guide_value" => inputs.guide().value.0,
        "guide_doubt" => (inputs.guide().high.0 - inputs.guide().low.0) / 2.0 / COVERAGE,
        "guide_holds" => printed.clamp(inputs.guide().low.0, inputs.guide().high.0),
        unit => inputs.get("x", named(unit)),
    }
}

fn named(quantity: &str) -> Quantity {
    QUANTITIES.iter().map(|q| q.name).find(|q| format!("{q:?}") == quantity).unwrap()
}

/// A quantity that has the unit of the output.
fn quantity(what: &str, unit: &str) -> Quantity {
    match unit {
        "m" | "km" | "ft" | "NM" => Quantity::Distance,
        "mm" => Quantity::SmallLength,
        "k" => Quantity::Refraction,
        _ => named(what),
    }
}

/// In units of the output: half of the last digit printed, and so on (the head of the rows says which).
fn tolerance(rule: &str, printed: &str) -> f64 {
    let digits = printed.split_once('.').map_or(0, |p| p.1.len());
    let last = libm::pow(10.0, -f64::from(u8::try_from(digits).unwrap()));
    let value: f64 = printed.parse().unwrap();
    match rule {
        "half" => last / 2.0,
        "unit" => last,
        "15" if value == 0.0 => 0.0,
        "15" => libm::pow(10.0, libm::floor(libm::log10(value.abs())) - 14.0) / 2.0,
        number => number.parse().unwrap(),
    }
}

#[test]
fn figures_of_others() {
    let mut wrong = vec![];
    for line in ROWS.lines().filter(|l| !l.starts_with('#')) {
        let [_, what, inputs, printed, unit, rule, source] = line.split('\t').collect::<Vec<_>>()[..] else {
            panic!("{line}")
        };
        assert!(!source.is_empty(), "{line}");
        let output = if unit == "′" { ARC_MINUTE } else { *quantity(what, unit).unit(unit).unwrap() };
        let expected: f64 = printed.parse().unwrap();
        let got = compute(what, &Inputs(inputs), output.to_si(expected).unwrap());
        let got = output.from_si(got).unwrap();
        let ours = 4.0 * f64::EPSILON * expected.abs();
        if (got - expected).abs() > tolerance(rule, printed) + ours {
            wrong.push(format!("{got}: {line}"));
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
}
