//! Radii of the ellipsoid: each row of `rows/radii.tsv` with its source beside it, and what must hold at any latitude.
//!
//! The tolerance is the source's digits, and two ulps of our own.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::constants::{EARTH_RADIUS, RADIUS_SPREAD};
use farstaff::earth::{Ellipsoid, GRS80, WGS84};
use farstaff::quantity::number::{number, sexagesimal};
use farstaff::quantity::{Angle, Metres};

const ROWS: &str = include_str!("rows/radii.tsv");
const ULP: f64 = 9.4e-10;

/// Degrees as a person types them; nothing where there are none.
fn angle(text: &str) -> Angle {
    let degrees = sexagesimal(text).unwrap_or_else(|| number(text));
    Angle(degrees.map_or(0.0, |n| n.value).to_radians())
}

fn radius(what: &str, earth: &Ellipsoid, latitude: Angle, azimuth: Angle) -> Metres {
    match what {
        "semi_minor" => earth.semi_minor(),
        "meridian" => earth.meridian(latitude),
        "prime_vertical" => earth.prime_vertical(latitude),
        "gauss" => earth.gauss(latitude),
        "in_azimuth" => earth.in_azimuth(latitude, azimuth),
        "mean" => earth.mean(),
        "authalic" => earth.authalic(),
        "volumetric" => earth.volumetric(),
        _ => panic!("no such radius: {what}"),
    }
}

#[test]
fn figures_of_others() {
    let mut wrong = vec![];
    for line in ROWS.lines().filter(|l| !l.starts_with('#')) {
        let [_, what, earth, latitude, azimuth, printed, rule, source] = line.split('\t').collect::<Vec<_>>()[..]
        else {
            panic!("{line}")
        };
        assert!(!source.is_empty(), "{line}");
        let earth = if earth == "WGS84" { WGS84 } else { GRS80 };
        let got = radius(what, &earth, angle(latitude), angle(azimuth)).0;
        let digits = i32::try_from(printed.split_once('.').map_or(0, |p| p.1.len())).unwrap();
        let tolerance = match rule {
            "half" => libm::pow(10.0, f64::from(-digits)) / 2.0,
            "15" => libm::pow(10.0, -8.0) / 2.0,
            metres => metres.parse().unwrap(),
        };
        let expected: f64 = printed.parse().unwrap();
        if (got - expected).abs() > tolerance + 2.0 * ULP {
            wrong.push(format!("{got}: {line}"));
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
}

#[test]
fn at_any_latitude() {
    let right = Angle(std::f64::consts::FRAC_PI_2);
    for tenth in -900..=900 {
        let latitude = Angle((f64::from(tenth) / 10.0).to_radians());
        let [m, n, g] = [GRS80.meridian(latitude), GRS80.prime_vertical(latitude), GRS80.gauss(latitude)].map(|r| r.0);
        let near = |a: f64, b: f64| assert!((a - b).abs() <= 4.0 * ULP, "{a} {b} at {tenth}");
        near(GRS80.in_azimuth(latitude, Angle(0.0)).0, m);
        near(GRS80.in_azimuth(latitude, right).0, n);
        near((m * n).sqrt(), g);
        // North or south, and a line is one line whichever end it is seen from.
        near(GRS80.meridian(Angle(-latitude.0)).0, m);
        let azimuth = Angle(f64::from(tenth) / 100.0);
        let r = GRS80.in_azimuth(latitude, azimuth).0;
        near(GRS80.in_azimuth(latitude, Angle(azimuth.0 + std::f64::consts::PI)).0, r);
        assert!(m <= n + ULP && (m - ULP..=n + ULP).contains(&r), "{m} {r} {n} at {tenth}");
        assert!((r / EARTH_RADIUS.0 - 1.0).abs() <= RADIUS_SPREAD, "{r} at {tenth}");
        // The other ellipsoid is the same but for the last millimetres.
        assert!((WGS84.gauss(latitude).0 - g).abs() < 0.0005, "{tenth}");
    }
}
