//! The ellipsoid and its radii of curvature.
//!
//! Symbols: a semi-major axis, f flattening, e² = f(2 − f), φ latitude, W² = 1 − e² sin²φ, M radius along the meridian,
//! N radius across it (prime vertical). Nothing cancels in any of the forms: each is good to a few ulps at every latitude,
//! and core/tests/earth.rs holds them to 50-digit arithmetic.
//!
//! What is left out: heights. A line at height h above the ellipsoid curves with R + h, 0.016 % more for each kilometre.

use crate::quantity::{Angle, Metres};

/// An ellipsoid of revolution.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Ellipsoid {
    /// a, semi-major axis.
    pub semi_major: Metres,
    /// 1/f.
    pub inverse_flattening: f64,
}

/// Geodetic Reference System 1980 (Moritz 1980). 1/f is a derived constant there, printed to twelve digits.
pub const GRS80: Ellipsoid = Ellipsoid { semi_major: Metres(6_378_137.0), inverse_flattening: 298.257_222_101 };

/// World Geodetic System 1984, by definition (NGA.STND.0036, table 3.1; both numbers from memory, and as in [`crate::place`]'s
/// library). What satellite receivers use; differs from [`GRS80`] by 0.1 mm in the semi-minor axis.
pub const WGS84: Ellipsoid = Ellipsoid { semi_major: Metres(6_378_137.0), inverse_flattening: 298.257_223_563 };

impl Ellipsoid {
    /// f, flattening.
    pub fn flattening(&self) -> f64 {
        1.0 / self.inverse_flattening
    }
    /// e² = f(2 − f), square of the first eccentricity.
    pub fn eccentricity_squared(&self) -> f64 {
        self.flattening() * (2.0 - self.flattening())
    }
    /// b = a(1 − f), semi-minor axis.
    pub fn semi_minor(&self) -> Metres {
        Metres(self.semi_major.0 * (1.0 - self.flattening()))
    }
    /// W² = 1 − e² sin²φ.
    fn w_squared(&self, latitude: Angle) -> f64 {
        let sine = libm::sin(latitude.0);
        1.0 - self.eccentricity_squared() * sine * sine
    }
    /// M = a(1 − e²)/W³: radius along the meridian, from 6335 km at the equator to 6400 km at the poles.
    ///
    /// Source: Deakin & Hunter, Geometric Geodesy A (2010).
    pub fn meridian(&self, latitude: Angle) -> Metres {
        let w2 = self.w_squared(latitude);
        Metres(self.semi_major.0 * (1.0 - self.eccentricity_squared()) / (w2 * w2.sqrt()))
    }
    /// N = a/W: radius across the meridian, from 6378 km at the equator to 6400 km at the poles. Source: as
    /// [`Self::meridian`].
    pub fn prime_vertical(&self, latitude: Angle) -> Metres {
        Metres(self.semi_major.0 / self.w_squared(latitude).sqrt())
    }
    /// √(MN) = b/W²: Gauss's mean radius of all azimuths, that of the sphere which fits best around a point. Source: as
    /// [`Self::meridian`].
    pub fn gauss(&self, latitude: Angle) -> Metres {
        Metres(self.semi_minor().0 / self.w_squared(latitude))
    }
    /// R = MN/(N cos²α + M sin²α): radius in azimuth α from north (Euler). Source: as [`Self::meridian`].
    ///
    /// Holds at a point; over a line take the latitude and the azimuth of its middle. Beside the doubt of k it is a
    /// refinement: no radius differs from the mean one by more than [`crate::constants::RADIUS_SPREAD`].
    pub fn in_azimuth(&self, latitude: Angle, azimuth: Angle) -> Metres {
        let (m, n) = (self.meridian(latitude).0, self.prime_vertical(latitude).0);
        let (sine, cosine) = libm::sincos(azimuth.0);
        Metres(m * n / (n * cosine * cosine + m * sine * sine))
    }
    /// R₁ = (2a + b)/3: arithmetic mean of the axes. Source: Moritz, Geodetic Reference System 1980.
    pub fn mean(&self) -> Metres {
        Metres((2.0 * self.semi_major.0 + self.semi_minor().0) / 3.0)
    }
    /// R₂ = √(a²/2 · (1 + (1 − e²)/e · artanh e)): radius of the sphere of the same area. Source: as [`Self::mean`].
    pub fn authalic(&self) -> Metres {
        let e2 = self.eccentricity_squared();
        let e = e2.sqrt();
        Metres(self.semi_major.0 * ((1.0 + (1.0 - e2) / e * libm::atanh(e)) / 2.0).sqrt())
    }
    /// R₃ = ∛(a²b): radius of the sphere of the same volume. Source: as [`Self::mean`].
    pub fn volumetric(&self) -> Metres {
        Metres(self.semi_major.0 * libm::cbrt(1.0 - self.flattening()))
    }
}
