//! Each number once: symbol, unit, edition, page.

use crate::quantity::{Coefficient, Metres};

/// R, mean radius of the earth, rounded to the kilometre as levelling does. The arithmetic mean radius of GRS80 is
/// 6 371 008.7714 m (Moritz, Geodetic Reference System 1980, table of derived constants).
pub const EARTH_RADIUS: Metres = Metres(6_371_000.0);

/// How far the radius of curvature in any azimuth at any latitude lies from [`EARTH_RADIUS`], as a share of it: 6335 km
/// (along the meridian at the equator) to 6400 km (at the poles), GRS80 (Moritz 1980: polar radius 6 399 593.6259 m).
pub const RADIUS_SPREAD: f64 = 0.0056;

/// k as levelling handbooks have it, after Gauss's value for the Hannover arc: 0.13. Used for the handbook column only.
pub const HANDBOOK_K: Coefficient = Coefficient(0.13);

/// International foot, metres: 0.3048 exactly (agreed 1959).
pub const FOOT_M: f64 = 0.3048;

/// US survey foot as a ratio: 1200/3937 m (Mendenhall order, 1893; deprecated after 2022, Federal Register 2020-21902).
pub const SURVEY_FOOT_M: (f64, f64) = (1200.0, 3937.0);

/// Walking speed used to say a distance in everyday words, metres a minute (common practice, no source).
pub const WALK_M_PER_MIN: f64 = 75.0;

/// Length of a pace, metres (common practice, no source).
pub const PACE_M: f64 = 0.75;

/// 95 % half-width of a normal distribution in standard deviations, rounded to 2 as JCGM 100 (GUM) 6.3.3 allows.
pub const COVERAGE: f64 = 2.0;
