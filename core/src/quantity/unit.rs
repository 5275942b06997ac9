//! Every unit once, with its exact ratio.

use crate::constants::{FOOT_M, PACE_M, SURVEY_FOOT_M};
use serde::Serialize;
use std::f64::consts::PI;

/// What a number measures, and so which units it may have.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
#[serde(rename_all = "snake_case")]
pub enum Quantity {
    /// Along the ground, usually metres and more.
    Distance,
    /// Upright, usually metres: a staff reading, the height of an instrument.
    Height,
    /// Millimetres: a tolerance, a doubt.
    SmallLength,
    /// A radius of curvature.
    Radius,
    /// Collimation error: rise of the line over distance.
    Collimation,
    /// Slope of the ground.
    Gradient,
    /// Coefficient of refraction.
    Refraction,
    /// A share of a whole.
    Share,
    /// North of the equator; south is below 0. Radians.
    Latitude,
    /// East of Greenwich; west is below 0. Radians.
    Longitude,
    /// Easting or northing of a grid.
    Coordinate,
    /// A factor near one: the scale of a grid.
    Factor,
}

/// A unit as the page shows it.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct UnitInfo {
    /// As written behind a number and in an entry.
    pub symbol: &'static str,
    /// In words.
    pub label: &'static str,
}

/// The units of a quantity, and which one a bare number has under each choice of units.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct QuantityInfo {
    /// Which quantity.
    pub name: Quantity,
    /// Its units, usual ones first.
    pub units: &'static [UnitInfo],
    /// Symbol of the unit a bare number has in metric work.
    pub metric: &'static str,
    /// The same in international feet.
    pub foot: &'static str,
    /// The same in US survey feet.
    pub survey_foot: &'static str,
}

/// How a unit turns into SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Scale {
    /// SI = number × numerator / denominator: an exact ratio.
    Ratio(f64, f64),
    /// An angle of which the tangent is meant; radians = number × π × numerator / denominator.
    TangentOf(f64, f64),
    /// SI = 1 / number.
    Inverse,
    /// k from the effective-radius factor: k = 1 − 1 / number.
    RadiusFactor,
}

/// A unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unit {
    /// As written behind a number.
    pub symbol: &'static str,
    /// Other spellings that are read, lower case.
    pub also: &'static [&'static str],
    /// How it turns into SI.
    pub scale: Scale,
}

impl Unit {
    /// SI value of a number in this unit; `None` where there is none (1/0).
    pub fn to_si(&self, number: f64) -> Option<f64> {
        let si = match self.scale {
            Scale::Ratio(above, below) => number * above / below,
            Scale::TangentOf(above, below) => libm::tan(number * PI * above / below),
            Scale::Inverse => 1.0 / number,
            Scale::RadiusFactor => 1.0 - 1.0 / number,
        };
        si.is_finite().then_some(si)
    }
    /// Number in this unit of an SI value; `None` where there is none.
    pub fn from_si(&self, si: f64) -> Option<f64> {
        let number = match self.scale {
            Scale::Ratio(above, below) => si * below / above,
            Scale::TangentOf(above, below) => libm::atan(si) * below / (PI * above),
            Scale::Inverse => 1.0 / si,
            Scale::RadiusFactor => 1.0 / (1.0 - si),
        };
        number.is_finite().then_some(number)
    }
}

const fn unit(symbol: &'static str, also: &'static [&'static str], above: f64, below: f64) -> Unit {
    Unit { symbol, also, scale: Scale::Ratio(above, below) }
}

const M: Unit = unit("m", &["metre", "metres", "meter", "meters"], 1.0, 1.0);
const MM: Unit = unit("mm", &["millimetre", "millimetres", "millimeters"], 1.0, 1000.0);
const CM: Unit = unit("cm", &[], 1.0, 100.0);
const KM: Unit = unit("km", &["kilometre", "kilometres", "kilometers"], 1000.0, 1.0);
const FT: Unit = unit("ft", &["foot", "feet"], FOOT_M, 1.0);
const FT_US: Unit = unit("ftUS", &["ft us", "us ft", "usft", "us-ft", "sft"], SURVEY_FOOT_M.0, SURVEY_FOOT_M.1);
const MI: Unit = unit("mi", &["mile", "miles"], 5280.0 * FOOT_M, 1.0);
/// International nautical mile: 1852 m exactly (First International Extraordinary Hydrographic Conference, Monaco, 1929).
pub const NAUTICAL_MILE: Unit = unit("NM", &["nmi", "nautical mile", "nautical miles", "sea miles"], 1852.0, 1.0);
/// Minute of arc, of an angle in radians: what a dip is shown in.
pub const ARC_MINUTE: Unit = unit("′", &[], PI, 10_800.0);
const PACES: Unit = unit("paces", &["pace"], PACE_M, 1.0);
const MM_PER_M: Unit = unit("mm/m", &["‰"], 1.0, 1000.0);
const PERCENT: Unit = unit("%", &["percent"], 1.0, 100.0);
const PER_ONE: Unit = unit("of 1", &[], 1.0, 1.0);
const RATIO: Unit = unit("m/m", &[], 1.0, 1.0);
const FT_PER_100_FT: Unit = unit("ft/100 ft", &["ft/100ft"], 1.0, 100.0);
const ARC_SECOND: Unit =
    Unit { symbol: "″", also: &["\"", "''", "′′", "arcsec", "sec"], scale: Scale::TangentOf(1.0, 648_000.0) };
const MILLIGON: Unit = Unit { symbol: "mgon", also: &["mgrad"], scale: Scale::TangentOf(1.0, 200_000.0) };
const DEGREE: Unit = Unit { symbol: "°", also: &["deg", "º"], scale: Scale::TangentOf(1.0, 180.0) };
const GON: Unit = Unit { symbol: "gon", also: &["grad", "g"], scale: Scale::TangentOf(1.0, 200.0) };
/// An angle by itself, not its tangent.
const ARC_DEGREE: Unit = unit("°", &["deg", "º"], PI, 180.0);
const ARC_GON: Unit = unit("gon", &["grad", "g"], PI, 200.0);
const TIMES: Unit = unit("×", &["x"], 1.0, 1.0);
const ONE_IN: Unit = Unit { symbol: "1 in", also: &[], scale: Scale::Inverse };
const K: Unit = unit("k", &[], 1.0, 1.0);
const HALF_K: Unit = unit("m", &[], 2.0, 1.0);
const FACTOR: Unit = Unit { symbol: "factor", also: &["r'/r", "×r"], scale: Scale::RadiusFactor };
const ONE_OVER: Unit = Unit { symbol: "1/", also: &["1/n"], scale: Scale::Inverse };

const fn info(unit: Unit, label: &'static str) -> UnitInfo {
    UnitInfo { symbol: unit.symbol, label }
}

const METRE: UnitInfo = info(M, "metre");
const MILLIMETRE: UnitInfo = info(MM, "millimetre");
const FOOT: UnitInfo = info(FT, "international foot");
const SURVEY_FOOT: UnitInfo = info(FT_US, "US survey foot");
const MILE: UnitInfo = info(MI, "mile");
const SEA_MILE: UnitInfo = info(NAUTICAL_MILE, "nautical mile");
const KILOMETRE: UnitInfo = info(KM, "kilometre");

const ANGLES: &[UnitInfo] = &[info(ARC_DEGREE, "degree"), info(ARC_GON, "gon")];

const fn same(name: Quantity, units: &'static [UnitInfo], usual: &'static str) -> QuantityInfo {
    QuantityInfo { name, units, metric: usual, foot: usual, survey_foot: usual }
}

const fn lengths(name: Quantity, units: &'static [UnitInfo], metric: &'static str) -> QuantityInfo {
    QuantityInfo { name, units, metric, foot: "ft", survey_foot: "ftUS" }
}

/// Every quantity.
pub const QUANTITIES: &[QuantityInfo] = &[
    lengths(Quantity::Distance, &[METRE, KILOMETRE, FOOT, SURVEY_FOOT, MILE, SEA_MILE, info(PACES, "pace")], "m"),
    lengths(Quantity::Height, &[METRE, MILLIMETRE, FOOT, SURVEY_FOOT], "m"),
    lengths(Quantity::SmallLength, &[MILLIMETRE, info(CM, "centimetre"), METRE, FOOT, SURVEY_FOOT], "mm"),
    same(Quantity::Radius, &[KILOMETRE, METRE, MILE, FOOT, SURVEY_FOOT], "km"),
    same(
        Quantity::Collimation,
        &[
            info(MM_PER_M, "millimetre per metre"),
            info(ARC_SECOND, "second of arc"),
            info(MILLIGON, "milligon"),
            info(FT_PER_100_FT, "foot per 100 feet"),
        ],
        "mm/m",
    ),
    same(
        Quantity::Gradient,
        &[
            info(PERCENT, "percent"),
            info(ONE_IN, "one in …"),
            info(DEGREE, "degree"),
            info(GON, "gon"),
            info(RATIO, "rise over run"),
        ],
        "%",
    ),
    same(
        Quantity::Refraction,
        &[
            info(K, "k, radius of the earth over radius of the ray"),
            info(HALF_K, "m, half of k"),
            info(FACTOR, "factor on the earth's radius"),
            info(ONE_OVER, "one over …: k = 1/n"),
        ],
        "k",
    ),
    same(Quantity::Share, &[info(PERCENT, "percent"), info(PER_ONE, "of one")], "%"),
    same(Quantity::Latitude, ANGLES, "°"),
    same(Quantity::Longitude, ANGLES, "°"),
    lengths(Quantity::Coordinate, &[METRE, KILOMETRE, FOOT, SURVEY_FOOT], "m"),
    same(Quantity::Factor, &[info(TIMES, "times")], "×"),
];

const ALL: &[Unit] = &[
    M,
    MM,
    CM,
    KM,
    FT,
    FT_US,
    MI,
    NAUTICAL_MILE,
    PACES,
    MM_PER_M,
    ARC_SECOND,
    MILLIGON,
    FT_PER_100_FT,
    PERCENT,
    ONE_IN,
    DEGREE,
    GON,
    RATIO,
    K,
    HALF_K,
    FACTOR,
    ONE_OVER,
    PER_ONE,
    TIMES,
];
/// Where [`ALL`] has other units of the same name.
const ARCS: &[Unit] = &[ARC_DEGREE, ARC_GON];

/// Which unit a bare number has.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum System {
    /// Metres and millimetres.
    Metric,
    /// International feet.
    Foot,
    /// US survey feet.
    SurveyFoot,
}

impl Quantity {
    /// Its units and which one a bare number has.
    pub fn info(self) -> &'static QuantityInfo {
        const NONE: &QuantityInfo = &same(Quantity::Share, &[], "");
        QUANTITIES.iter().find(|q| q.name == self).unwrap_or(NONE)
    }
    /// Half of a position: it may have a letter for its side of the equator or of Greenwich.
    pub fn is_position(self) -> bool {
        matches!(self, Quantity::Latitude | Quantity::Longitude)
    }
    /// The unit a bare number has.
    pub fn usual(self, system: System) -> &'static Unit {
        let info = self.info();
        let symbol = match system {
            System::Metric => info.metric,
            System::Foot => info.foot,
            System::SurveyFoot => info.survey_foot,
        };
        self.unit(symbol).unwrap_or(&PER_ONE)
    }
    /// The unit of this quantity that is written so, in any usual spelling. `m` is metre, or half of k, by the quantity.
    pub fn unit(self, text: &str) -> Option<&'static Unit> {
        let text = text.trim().trim_end_matches('.');
        let lower = text.to_ascii_lowercase();
        let lower = lower.strip_suffix(')').and_then(|t| t.strip_prefix('(')).unwrap_or(&lower);
        let mine = |u: &&Unit| self.info().units.iter().any(|i| i.symbol == u.symbol);
        let half = |u: &Unit| u.scale == HALF_K.scale && u.symbol == HALF_K.symbol;
        let right = |u: &&Unit| half(u) == (self == Quantity::Refraction && u.symbol == HALF_K.symbol);
        let known = if self.is_position() { ARCS } else { ALL };
        let all = || known.iter().filter(mine).filter(right);
        all()
            .find(|u| u.symbol == text)
            .or_else(|| all().find(|u| u.symbol.eq_ignore_ascii_case(lower) || u.also.contains(&lower)))
    }
}
