//! Guide values of k and its doubt by height of the line and sky.
//!
//! **A rule of this project, not a published table.** Day values: Monin–Obukhov profiles (Dyer 1974), widened by the
//! fluctuations Hirt et al. saw 1.8 m over grass (J. Geophys. Res. 115, D21102, 2010) and, aloft, by the spread of 144
//! lines in McCaw (MNRAS, 1907). Night: the 95 % range of `tests/tables/make_night_range.py`, rounded outwards aloft;
//! it is lopsided, so the two sides are kept apart. Between heights: straight in the logarithm of the height; outside
//! 0.5–100 m the nearest end.

use crate::quantity::{Coefficient, Metres};

/// What is seen of the sky.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Sky {
    /// Sun on the ground.
    Sunny,
    /// Overcast, or windy.
    Overcast,
    /// Clear calm night.
    ClearNight,
    /// Daytime, nothing known.
    Unknown,
}

/// A value of k with the ends of its 95 % range.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct KRange {
    /// The value to reckon with.
    pub value: Coefficient,
    /// Lower end.
    pub low: Coefficient,
    /// Upper end.
    pub high: Coefficient,
}

/// Height of the line, m; then value and 95 % half-width for sun, overcast, nothing known; then night value, low, high.
type Row = (f64, [(f64, f64); 3], (f64, f64, f64));

const ROWS: [Row; 8] = [
    (0.5, [(-14.0, 13.0), (-2.0, 6.0), (-7.0, 14.0)], (5.0, 1.0, 65.0)),
    (1.0, [(-5.5, 5.0), (-0.8, 2.6), (-3.0, 6.0)], (3.0, 0.6, 40.0)),
    (1.75, [(-2.5, 2.6), (-0.5, 1.2), (-1.0, 3.0)], (2.0, 0.4, 23.0)),
    (3.0, [(-1.1, 1.2), (-0.2, 0.6), (-0.5, 1.6)], (1.5, 0.3, 14.0)),
    (5.0, [(-0.5, 0.6), (-0.05, 0.3), (-0.2, 0.8)], (1.2, 0.2, 8.0)),
    (17.3, [(0.02, 0.2), (0.10, 0.12), (0.08, 0.3)], (0.8, 0.15, 2.5)),
    (54.8, [(0.12, 0.08), (0.14, 0.08), (0.13, 0.12)], (0.4, 0.13, 0.9)),
    (100.0, [(0.13, 0.06), (0.14, 0.06), (0.13, 0.06)], (0.2, 0.06, 0.6)),
];

/// k for a line that runs `height` over the ground under that sky.
pub fn k(height: Metres, sky: Sky) -> KRange {
    let at = |row: &Row| -> [f64; 3] {
        let (_, [sun, cloud, unknown], night) = *row;
        let even = |(value, half): (f64, f64)| [value, value - half, value + half];
        match sky {
            Sky::Sunny => even(sun),
            Sky::Overcast => even(cloud),
            Sky::Unknown => even(unknown),
            Sky::ClearNight => [night.0, night.1, night.2],
        }
    };
    let [first, .., last] = &ROWS;
    let of = |[value, low, high]: [f64; 3]| KRange {
        value: Coefficient(value),
        low: Coefficient(low),
        high: Coefficient(high),
    };
    for (below, above) in ROWS.iter().zip(ROWS.iter().skip(1)) {
        if height.0 >= below.0 && height.0 <= above.0 {
            let share = libm::log(height.0 / below.0) / libm::log(above.0 / below.0);
            let ([a, b, c], [x, y, z]) = (at(below), at(above));
            return of([a + share * (x - a), b + share * (y - b), c + share * (z - c)]);
        }
    }
    of(at(if height.0 > last.0 { last } else { first }))
}
