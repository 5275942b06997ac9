//! Positions: geodesics and feet of perpendiculars against a general geodesic library (`rows/geodesics.tsv`) and against
//! straight lines through space; what is exchanged; the grid; any numbers at all.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::earth::{GRS80, WGS84};
use farstaff::place::{Foot, Geodesic, GridLine, GridPoint, Position, ends_exchanged};
use farstaff::quantity::{Angle, Metres};
use std::f64::consts::PI;

const ROWS: &str = include_str!("rows/geodesics.tsv");
/// What the library promises, and the digits of four coordinates in radians and back in degrees. Metres.
const LIBRARY: f64 = 15e-9 + 10e-9;
/// What [`Geodesic::foot`] promises within 200 km and 5 km. Metres.
const FOOT: f64 = 5e-6;

fn at(latitude: f64, longitude: f64) -> Position {
    Position { latitude: Angle(latitude.to_radians()), longitude: Angle(longitude.to_radians()) }
}

fn rows(kind: &str) -> Vec<Vec<f64>> {
    let cells = |line: &str| line.split('\t').skip(1).map(|cell| cell.parse().unwrap()).collect();
    let found: Vec<_> = ROWS.lines().filter(|line| line.split('\t').next() == Some(kind)).map(cells).collect();
    assert!(found.len() > 50, "{kind}");
    found
}

/// From one direction to another, either way round.
fn turn(a: f64, b: f64) -> f64 {
    libm::remainder(a - b, 2.0 * PI).abs()
}

#[test]
fn geodesics_of_a_general_library() {
    for row in rows("line") {
        let line = Geodesic::between(at(row[0], row[1]), at(row[2], row[3])).unwrap();
        assert!((line.length.0 - row[4]).abs() <= LIBRARY, "{} {row:?}", line.length.0);
        if row[4] == 0.0 {
            continue;
        }
        // A step to the side at the other end turns the line by its share of the reduced length.
        let angle = LIBRARY / row[7].abs().max(1e-12) + 4.0 * f64::EPSILON;
        for (got, expected) in [(line.azimuth, row[5]), (line.azimuth_at_end, row[6])] {
            assert!((0.0..=2.0 * PI).contains(&got.0), "{got:?}");
            let off = turn(got.0, expected.to_radians());
            // Antipodal points have many shortest lines.
            assert!(off <= angle || row[7] == 0.0, "{off} of {angle}: {row:?}");
        }
    }
}

#[test]
fn feet_of_a_general_library() {
    let (mut along, mut offset) = (0.0_f64, 0.0_f64);
    for row in rows("foot") {
        let line = Geodesic::between(at(row[0], row[1]), at(row[2], row[3])).unwrap();
        let foot = line.foot(at(row[4], row[5])).unwrap();
        along = along.max((foot.along.0 - row[6]).abs());
        offset = offset.max((foot.offset.0 - row[7]).abs());
        assert!(along <= FOOT && offset <= FOOT, "{foot:?} {row:?}");
    }
    println!("worst {along:e} m along, {offset:e} m to the side");
}

/// Coordinates in space of a point of the ellipsoid.
fn in_space(p: Position) -> [f64; 3] {
    let n = WGS84.prime_vertical(p.latitude).0;
    let ((sp, cp), (sl, cl)) = (libm::sincos(p.latitude.0), libm::sincos(p.longitude.0));
    [n * cp * cl, n * cp * sl, n * (1.0 - WGS84.eccentricity_squared()) * sp]
}

#[test]
fn the_chord_through_space_spans_the_same_arc() {
    // 2R asin(chord/2R) with R in the azimuth of the middle: within 20 µm of the geodesic at 200 km, by trial in Python.
    for row in rows("line").iter().filter(|row| row[4] > 0.5 && row[4] < 201e3) {
        let (a, b) = (at(row[0], row[1]), at(row[2], row[3]));
        let line = Geodesic::between(a, b).unwrap();
        let (p, q) = (in_space(a), in_space(b));
        let chord = (0..3).map(|i| (q[i] - p[i]) * (q[i] - p[i])).sum::<f64>().sqrt();
        let r = line.radius(&WGS84).0;
        let arc = 2.0 * r * libm::asin(chord / 2.0 / r);
        assert!((arc - line.length.0).abs() < 20e-6, "{arc} {row:?}");
    }
}

#[test]
fn the_same_line_from_either_end() {
    for row in rows("foot") {
        let (a, b, p) = (at(row[0], row[1]), at(row[2], row[3]), at(row[4], row[5]));
        let (there, back) = (Geodesic::between(a, b).unwrap(), Geodesic::between(b, a).unwrap());
        assert!((there.length.0 - back.length.0).abs() <= LIBRARY);
        assert!((there.radius(&GRS80).0 - back.radius(&GRS80).0).abs() < 1e-6);
        let (one, other) = (there.foot(p).unwrap(), back.foot(p).unwrap());
        assert!((one.along.0 + other.along.0 - there.length.0).abs() < 2.0 * FOOT, "{one:?} {other:?} {row:?}");
        assert!((one.offset.0 + other.offset.0).abs() < 2.0 * FOOT, "{one:?} {other:?} {row:?}");
    }
}

#[test]
fn radius_of_lines_along_and_across() {
    let north = Geodesic::between(at(44.9, 7.0), at(45.1, 7.0)).unwrap();
    let east = Geodesic::between(at(45.0, 6.9), at(45.0, 7.1)).unwrap();
    let latitude = Angle(45f64.to_radians());
    assert!((north.radius(&GRS80).0 - GRS80.meridian(latitude).0).abs() < 1e-3);
    assert!((east.radius(&GRS80).0 - GRS80.prime_vertical(latitude).0).abs() < 1e-3);
    // To either side of north: the mean of 0.1° and 359.9° is not south-east.
    let back = Geodesic::between(at(44.0, 7.0), at(44.0 + 1e-3, 7.0 - 1e-9)).unwrap();
    assert!((back.radius(&GRS80).0 - GRS80.meridian(Angle(44.0005f64.to_radians())).0).abs() < 1e-3);
}

#[test]
fn right_of_the_line_is_positive() {
    let line = Geodesic::between(at(50.0, 10.0), at(50.1, 10.0)).unwrap();
    let foot = line.foot(at(50.05, 10.001)).unwrap();
    assert!(foot.offset.0 > 71.0 && foot.offset.0 < 72.0 && foot.along.0 > 5561.0 && foot.along.0 < 5562.0, "{foot:?}");
    assert!(line.foot(at(50.05, 9.999)).unwrap().offset.0 < -71.0);
    let start = line.foot(at(50.0, 10.0)).unwrap();
    assert_eq!((start.along.0.abs(), start.offset.0.abs()), (0.0, 0.0));
}

#[test]
fn far_off_is_told_from_near() {
    let (length, most) = (Metres(1000.0), Metres(20.0));
    let strays = |along, offset| Foot { along: Metres(along), offset: Metres(offset) }.strays(length, most);
    assert!(!strays(0.0, 0.0) && !strays(-20.0, 20.0) && !strays(1020.0, -20.0));
    assert!(strays(500.0, 20.1) && strays(500.0, -20.1) && strays(-20.1, 0.0) && strays(1020.1, 0.0));
}

#[test]
fn exchanged_latitude_and_longitude_are_noticed() {
    let (a, b, most) = (at(52.10, 5.10), at(52.20, 5.30), Metres(200e3));
    assert_eq!(ends_exchanged(a, b, most), []);
    // One of the two, and which cannot be told: near 52° 5° or near 5° 52°.
    assert_eq!(ends_exchanged(a, b.exchanged(), most), [(true, false), (false, true)]);
    // A latitude beyond 90° tells.
    let (c, d) = (at(-33.0, 151.0), at(-33.1, 151.2));
    assert_eq!(ends_exchanged(c.exchanged(), d.exchanged(), most), [(true, true)]);
    assert_eq!(ends_exchanged(c, d.exchanged(), most), [(false, true)]);
    // Too far apart in any order: something else is wrong.
    assert_eq!(ends_exchanged(a, c, most), []);
    let line = Geodesic::between(a, b).unwrap();
    let near = at(52.15, 5.20);
    assert!(!line.seems_exchanged(near, Metres(500.0)) && line.seems_exchanged(near.exchanged(), Metres(500.0)));
    assert!(!line.seems_exchanged(at(10.0, 10.0), Metres(500.0)));
}

#[test]
fn lines_on_a_grid() {
    let point = |easting, northing| GridPoint { easting: Metres(easting), northing: Metres(northing) };
    let line = GridLine::between(point(500_000.0, 5_800_000.0), point(503_000.0, 5_804_000.0), 0.9996);
    assert!((line.length.0 - 5000.0 / 0.9996).abs() < 1e-9);
    assert!((line.bearing.0 - libm::atan2(3.0, 4.0)).abs() < 1e-15);
    // 2500 m along and 100 m to the right, on the grid.
    let foot = line.foot(point(500_000.0 + 1500.0 + 80.0, 5_800_000.0 + 2000.0 - 60.0));
    assert!((foot.along.0 - 2500.0 / 0.9996).abs() < 1e-9 && (foot.offset.0 - 100.0 / 0.9996).abs() < 1e-9, "{foot:?}");
    let west = GridLine::between(point(0.0, 0.0), point(-1.0, 0.0), 1.0);
    assert!((west.bearing.0 - 1.5 * PI).abs() < 1e-15);
}

#[test]
fn any_numbers_are_legal() {
    let odd = [0.0, -0.0, 1e-300, 45.0, 90.0, -90.0, 90.0000001, 179.999_999, 180.0, -180.0, 540.0, 1e6, 1e300];
    let worse = [f64::NAN, f64::INFINITY, f64::NEG_INFINITY];
    let all: Vec<Position> = odd
        .iter()
        .chain(&worse)
        .flat_map(|latitude| odd.iter().chain(&worse).map(|longitude| at(*latitude, *longitude)))
        .collect();
    for a in &all {
        for b in &all {
            let line = Geodesic::between(*a, *b);
            assert_eq!(line.is_some(), a.exists() && b.exists(), "{a:?} {b:?}");
            let Some(line) = line else { continue };
            let numbers = [line.length.0, line.azimuth.0, line.azimuth_at_end.0, line.radius(&WGS84).0];
            assert!(numbers.iter().all(|n| n.is_finite() && *n >= 0.0), "{numbers:?} {a:?} {b:?}");
            for p in all.iter().step_by(7) {
                let foot = line.foot(*p);
                assert_eq!(foot.is_some(), p.exists());
                assert!(foot.is_none_or(|f| f.along.0.is_finite() && f.offset.0.is_finite()), "{a:?} {b:?} {p:?}");
            }
        }
    }
}
