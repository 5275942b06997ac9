//! Where points are: by latitude and longitude on the ellipsoid, or by easting and northing on a grid; how long a line
//! between two is, which way it runs, and where another point stands beside it.
//!
//! Distances are along the ellipsoid, at height 0: at height h the ground is longer by h/R, 16 mm/km for each 100 m. Where
//! a line starts and ends at one point it has no direction, and what lies beside it means nothing: length 0 tells.

use crate::earth::{Ellipsoid, WGS84};
use crate::quantity::{Angle, Metres};
use geographiclib_rs::InverseGeodesic;
use std::f64::consts::{FRAC_PI_2, TAU};

/// A position on [`WGS84`]: latitude north positive, longitude east positive. Another modern datum (ETRS89, NAD83) moves
/// all points of a line alike; an older one may lie 200 m off, and may not be mixed with positions from a satellite.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Position {
    /// −π/2 to π/2.
    pub latitude: Angle,
    /// Any.
    pub longitude: Angle,
}

impl Position {
    /// There is such a latitude, and both are numbers.
    pub fn exists(&self) -> bool {
        self.latitude.0.abs() <= FRAC_PI_2 && self.longitude.0.is_finite()
    }
    /// The position that was meant where latitude and longitude were entered in each other's place.
    pub fn exchanged(&self) -> Position {
        Position { latitude: self.longitude, longitude: self.latitude }
    }
}

/// Where a point stands beside a line.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Foot {
    /// From the start of the line to the foot of the perpendicular; below 0 before the start.
    pub along: Metres,
    /// From the foot to the point, positive to the right.
    pub offset: Metres,
}

impl Foot {
    /// The point lies farther than `most` to the side of a line of that length, or before its start or beyond its end.
    pub fn strays(&self, length: Metres, most: Metres) -> bool {
        self.offset.0.abs() > most.0 || self.along.0 < -most.0 || self.along.0 > length.0 + most.0
    }
}

/// The shortest line on the ellipsoid between two positions.
#[derive(Debug, Clone, Copy)]
pub struct Geodesic {
    from: Position,
    to: Position,
    solver: geographiclib_rs::Geodesic,
    /// How long it is. Karney's method, as geographiclib-rs has it: good to 15 nm, between any two points of the earth
    /// (Karney, Algorithms for geodesics, J. Geodesy 87, 2013); and a few nm for the digits of a position.
    pub length: Metres,
    /// Its azimuth at the start, from north over east, 0 to 2π.
    pub azimuth: Angle,
    /// Its azimuth at the end, the way it goes on.
    pub azimuth_at_end: Angle,
}

impl Geodesic {
    /// The line between two positions; `None` where one does not exist.
    pub fn between(from: Position, to: Position) -> Option<Geodesic> {
        let solver = geographiclib_rs::Geodesic::new(WGS84.semi_major.0, WGS84.flattening());
        let (length, azimuth, azimuth_at_end) = inverse(&solver, from, to)?;
        Some(Geodesic { from, to, solver, length, azimuth, azimuth_at_end })
    }
    /// R in the azimuth of the line at its middle, on `ellipsoid`. Over 200 km R changes by 0.02 % at most.
    pub fn radius(&self, ellipsoid: &Ellipsoid) -> Metres {
        // Half a turn too much, where the two stand to either side of north, points along the same line.
        ellipsoid.in_azimuth(middle(self.from, self.to), Angle((self.azimuth.0 + self.azimuth_at_end.0) / 2.0))
    }
    /// Where `point` stands beside the line; `None` where there is no such position.
    ///
    /// Distance s and azimuth α from the start by the same method, then the right-angled triangle on Gauss's sphere,
    /// radius R at the mean latitude of start and point, δ = α − azimuth: sin(offset/R) = sin(s/R) sin δ and
    /// tan(along/R) = tan(s/R) cos δ (Napier). For lines to 200 km and offsets to 5 km both are good to 5 µm against the
    /// exact foot (core/tests/place.rs); farther out the error grows, where the point strays all the same.
    pub fn foot(&self, point: Position) -> Option<Foot> {
        let (distance, azimuth, _) = inverse(&self.solver, self.from, point)?;
        let r = WGS84.gauss(middle(self.from, point)).0;
        let (sine, cosine) = libm::sincos(distance.0 / r);
        let (across, ahead) = libm::sincos(azimuth.0 - self.azimuth.0);
        let along = r * libm::atan2(sine * ahead, cosine);
        Some(Foot { along: Metres(along), offset: Metres(r * libm::asin(sine * across)) })
    }
    /// Latitude and longitude of `point` seem to be exchanged: as entered it strays, the other way round it does not.
    pub fn seems_exchanged(&self, point: Position, most: Metres) -> bool {
        let near = |p| self.foot(p).is_some_and(|foot| !foot.strays(self.length, most));
        !near(point) && near(point.exchanged())
    }
}

/// Which of two ends may have latitude and longitude exchanged: every way that would do, so that where there are two the
/// person is asked. None where they may stand as they are, and none where no exchange helps.
///
/// As entered, one does not exist or the two are more than `most` apart; so exchanged they are within it. Both exchanged
/// alike cannot be told from their distance, but by a latitude that does not exist or by [`Geodesic::seems_exchanged`].
pub fn ends_exchanged(a: Position, b: Position, most: Metres) -> Vec<(bool, bool)> {
    let turned = |p: Position, turn| if turn { p.exchanged() } else { p };
    let fits = |&(first, second): &(bool, bool)| {
        Geodesic::between(turned(a, first), turned(b, second)).is_some_and(|line| line.length <= most)
    };
    if fits(&(false, false)) {
        return vec![];
    }
    [(true, true), (true, false), (false, true)].into_iter().filter(fits).collect()
}

/// Length and both azimuths of the geodesic; `None` where a position does not exist.
fn inverse(solver: &geographiclib_rs::Geodesic, from: Position, to: Position) -> Option<(Metres, Angle, Angle)> {
    let (a, b) = (from.exists().then_some(from)?, to.exists().then_some(to)?);
    let [a, b] = [a, b].map(|p| (p.latitude.0.to_degrees(), p.longitude.0.to_degrees()));
    let (length, azimuth, azimuth_at_end, _): (f64, f64, f64, f64) = solver.inverse(a.0, a.1, b.0, b.1);
    Some((Metres(length), from_north(azimuth.to_radians()), from_north(azimuth_at_end.to_radians())))
}

/// 0 to 2π.
fn from_north(angle: f64) -> Angle {
    Angle(if angle < 0.0 { angle + TAU } else { angle })
}

fn middle(a: Position, b: Position) -> Angle {
    Angle((a.latitude.0 + b.latitude.0) / 2.0)
}

/// A point of a plane grid.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct GridPoint {
    /// Eastwards.
    pub easting: Metres,
    /// Northwards.
    pub northing: Metres,
}

/// The straight line on the grid between two of its points.
///
/// One scale factor stands for the whole line: grid distance over distance on the ellipsoid, at its middle (0.9996 on the
/// central meridian of UTM; a combined factor holds the height too). The line is straight on the grid, not on the earth:
/// in a transverse Mercator grid the line of sight bows out by about s²y/8R² at its middle, y from the central meridian:
/// 6 cm on 10 km at y 200 km (arc-to-chord correction; our own derivation from its first term Δn·y/2R²).
#[derive(Debug, Clone, Copy)]
pub struct GridLine {
    from: GridPoint,
    factor: f64,
    /// How long it is on the ellipsoid: grid distance / factor.
    pub length: Metres,
    /// From grid north over east, 0 to 2π: off the azimuth by the convergence of the grid.
    pub bearing: Angle,
}

impl GridLine {
    /// The line between two points; `factor` > 0.
    pub fn between(from: GridPoint, to: GridPoint, factor: f64) -> GridLine {
        let (east, north) = (to.easting.0 - from.easting.0, to.northing.0 - from.northing.0);
        let bearing = from_north(libm::atan2(east, north));
        GridLine { from, factor, length: Metres(libm::hypot(east, north) / factor), bearing }
    }
    /// Where `point` stands beside the line.
    pub fn foot(&self, point: GridPoint) -> Foot {
        let (east, north) = (point.easting.0 - self.from.easting.0, point.northing.0 - self.from.northing.0);
        let (sine, cosine) = libm::sincos(self.bearing.0);
        let along = (east * sine + north * cosine) / self.factor;
        Foot { along: Metres(along), offset: Metres((east * cosine - north * sine) / self.factor) }
    }
}
