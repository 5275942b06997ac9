//! The line of sight between two stations, and what stands under it.
//!
//! The model is that of [`crate::ray`]: refractive index ∝ r^(−k), any real k. There r^q · cos β is kept along a ray
//! and β grows by qθ (β elevation, q = 1 − k, θ = x/R), so that r^(−q) is a plain sine of qθ: the ray through two
//! points is known everywhere by two sines, as a straight line is in polar coordinates. This is what the effective
//! radius R/q of the handbooks stands for, made exact.
//!
//! - [`profile`]: clearance over points, the least of a million of them in one pass.
//! - [`remedy`]: the k that grazes, how far to raise which end, the cheapest pair of stands.
//! - [`along`]: k along a line that runs low, where it is not one number.
//! - [`chance`]: the chance that the whole line clears.

pub mod along;
pub mod chance;
pub mod profile;
pub mod remedy;

use crate::quantity::{Coefficient, Metres};
use std::f64::consts::PI;

/// A ray between two points, ready to be asked for its height anywhere.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Line {
    a: f64,
    b: f64,
    s: f64,
    k: f64,
    r: f64,
    q: f64,
    /// (1 + a/R)^(−q) − 1 and the same for b; log1p(a/R), log1p(b/R) where q = 0.
    at_a: f64,
    at_b: f64,
    /// sin qΘ, cos(qΘ/2); Θ = s/R.
    sine: f64,
    half: f64,
}

impl Line {
    /// The ray between heights `a` and `b` over the level surface of radius `r`, `s` apart along it.
    ///
    /// `None` where no ray joins them (|1 − k|·s/R ≥ π), where a station lies at the earth's centre, or `s` is not
    /// above nought: for lines below 200 km that takes |1 − k| of a hundred.
    pub fn new(a: Metres, b: Metres, s: Metres, k: Coefficient, r: Metres) -> Option<Line> {
        let q = 1.0 - k.0;
        let turn = q * (s.0 / r.0);
        let [at_a, at_b] = [a.0, b.0].map(|h| {
            let log = libm::log1p(h / r.0);
            if q == 0.0 { log } else { libm::expm1(-q * log) }
        });
        let (a, b, s, k, r) = (a.0, b.0, s.0, k.0, r.0);
        let line = Line { a, b, s, k, r, q, at_a, at_b, sine: libm::sin(turn), half: libm::cos(turn / 2.0) };
        (s > 0.0 && turn.abs() < PI && at_a.is_finite() && at_b.is_finite()).then_some(line)
    }

    /// How far apart the stations are.
    pub fn length(&self) -> Metres {
        Metres(self.s)
    }

    /// The same stations in other air.
    pub fn in_air(&self, k: Coefficient) -> Option<Line> {
        Line::new(Metres(self.a), Metres(self.b), Metres(self.s), k, Metres(self.r))
    }

    /// The same with one or both stations raised.
    pub fn raised(&self, a: Metres, b: Metres) -> Option<Line> {
        let (a, b) = (Metres(self.a + a.0), Metres(self.b + b.0));
        Line::new(a, b, Metres(self.s), Coefficient(self.k), Metres(self.r))
    }

    /// Height of the line over the level surface at arc `x` from the first station, 0 to s.
    ///
    /// With u(h) = (1 + h/R)^(−q) − 1: u = [u(a) sin q(Θ−θ) + u(b) sin qθ]/sin qΘ + 2 sin(qθ/2)
    /// sin(q(Θ−θ)/2)/cos(qΘ/2), of which the last term is the bulge of the earth and none cancels for stations above
    /// the surface; then h = R·expm1(−log1p(u)/q). At q = 0 log1p(h/R) runs straight. Metres. Good to a few ulps of
    /// what is added (core/tests/line counts them): 1e-13 m at 50 km. At k = 0 it is the straight line in space. On the
    /// ellipsoid R is the radius in the azimuth of the line. Beyond about 50 km k falls with height, by metres at 200
    /// km: not in this form. Source: Bouguer's n·r·cos β = constant, integrated here between two points; 100-digit rows
    /// made from the launching form of the same integral.
    pub fn height(&self, x: Metres) -> Metres {
        Metres(self.at(x.0))
    }

    /// As [`Self::height`], also before and behind the stations; not finite where the ray has turned upright before.
    fn at(&self, x: f64) -> f64 {
        let rest = self.s - x;
        if self.q == 0.0 {
            return self.r * libm::expm1((self.at_a * rest + self.at_b * x) / self.s);
        }
        let turn = self.q / (2.0 * self.r);
        let (sine_x, cosine_x) = libm::sincos(turn * x);
        let (sine_rest, cosine_rest) = libm::sincos(turn * rest);
        let ends = 2.0 * (self.at_a * (sine_rest * cosine_rest) + self.at_b * (sine_x * cosine_x)) / self.sine;
        let u = ends + 2.0 * (sine_x * sine_rest) / self.half;
        self.r * libm::expm1(-libm::log1p(u) / self.q)
    }

    /// The handbook's parabola for [`Self::height`]: a + (b − a)·x/s − (1 − k)·x(s − x)/2R, metres.
    ///
    /// Between stations of equal height it is 0.1 µm off at 10 km and 0.06 mm at 50 km (k 0); with a difference of 1000
    /// m in 50 km, 43 mm. Source: US Army Engineer School, EN0593 Surveying III (2001), para 2-53.
    pub fn handbook_height(&self, x: Metres) -> Metres {
        Metres(self.a + (self.b - self.a) * (x.0 / self.s) - self.q * self.lever(x.0))
    }

    /// How far the line rises at `x` for k growing by one, by the parabola: x(s − x)/2R.
    fn lever(&self, x: f64) -> f64 {
        x * (self.s - x) / (2.0 * self.r)
    }

    /// Between the stations, they themselves left out: a station does not stand in its own way.
    fn holds(&self, x: f64) -> bool {
        let half = self.s / 2.0;
        (x - half).abs() < half
    }

    /// tan of the elevation at the stations, along the line: −[(u(b) − u(a) cos qΘ)/sin qΘ + tan(qΘ/2)]/(1 + u(a)).
    fn slopes(&self) -> [f64; 2] {
        if self.q == 0.0 {
            let slope = (self.at_b - self.at_a) * self.r / self.s;
            return [slope, slope];
        }
        let (cosine, tangent) = (2.0 * self.half * self.half - 1.0, self.sine / (2.0 * self.half * self.half));
        let slope = |own: f64, other: f64| -((other - own * cosine) / self.sine + tangent) / (1.0 + own);
        [slope(self.at_a, self.at_b), -slope(self.at_b, self.at_a)]
    }
}
