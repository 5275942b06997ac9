//! One sight against figures from 50-digit arithmetic (15 digits printed) and against printed handbook coefficients.
#![allow(
    clippy::unwrap_used,
    clippy::excessive_precision,
    reason = "a test may panic; references keep their printed digits"
)]

use farstaff::quantity::{Coefficient, Metres};
use farstaff::ray::{combined, curvature, handbook_combined, refraction};

const R: Metres = Metres(6_371_000.0);

/// The tolerance is the reference's: half a unit of its 15th digit, and a few ulps of our own.
fn close(got: f64, reference: f64) {
    assert!((got - reference).abs() <= 5e-15 * reference.abs(), "{got:e} {reference:e}");
}

#[test]
fn fifty_digit_rows() {
    close(curvature(Metres(100.0), R).0, 0.000784806152960802);
    close(curvature(Metres(1000.0), R).0, 0.0784806160936545);
    close(curvature(Metres(10_000.0), R).0, 7.84806958511634);
    for (s, k, h) in [
        (1000.0, 0.13, 0.0682781358786539),
        (10_000.0, 0.13, 6.82781931079411),
        (200_000.0, 0.13, 2732.05062587115),
        (100.0, 16.0, -0.0117720923910877),
        (50_000.0, 0.25, 147.153702771139),
    ] {
        close(combined(Metres(s), Coefficient(k), R).unwrap().0, h);
    }
}

#[test]
fn feet_table() {
    // Wolf & Ghilani, Elementary Surveying, 11th ed., ch. 4 (lecture table): R = 20 906 000 ft, k = 0.14, printed to 1e-6 ft.
    let r = Metres(20_906_000.0);
    for (d, c) in [(500.0, 0.005142), (1000.0, 0.020568), (2000.0, 0.082273), (4000.0, 0.329092), (8000.0, 1.316368)] {
        assert!((handbook_combined(Metres(d), Coefficient(0.14), r).0 - c).abs() < 1e-6);
    }
}

#[test]
fn limits() {
    assert_eq!(combined(Metres(1000.0), Coefficient(1.0), R), Some(Metres(0.0)));
    assert_eq!(combined(Metres(0.0), Coefficient(0.13), R), Some(Metres(0.0)));
    assert_eq!(combined(Metres(200_000.0), Coefficient(-100.0), R), None);
}

/// Within 4 ulp of 50-digit arithmetic (tests/tables/make_refraction.py), at small k too.
#[test]
fn refraction_keeps_its_digits() {
    for (s, k, h) in [
        (1.0, 1e-09, 7.8480615288025796508e-17),
        (1.0, 0.13, 1.020247998744332946e-8),
        (1.0, 0.999, 7.8402134672736639809e-8),
        (1.0, -2.5, -1.9620153822007857759e-7),
        (1.0, 16.0, 1.2556898446093613765e-6),
        (100.0, 1e-09, 7.848061530735899711e-13),
        (100.0, 0.13, 0.00010202479989718676396),
        (100.0, 0.999, 0.00078402134680792135229),
        (100.0, -2.5, -0.0019620153840938283377),
        (100.0, 16.0, 0.012556898544048498285),
        (10000.0, 1e-09, 7.8480808639689170112e-9),
        (10000.0, 0.13, 1.0202502743222383588),
        (10000.0, 0.999, 7.8402215235827040429),
        (10000.0, -2.5, -19.620343146978986433),
        (10000.0, 16.0, 125.57878234247574692),
        (200000.0, 1e-09, 3.1423203089611954802e-6),
        (200000.0, 0.13, 408.46351138007421384),
        (200000.0, 0.999, 3137.3749118657835167),
        (200000.0, -2.5, -7878.4679174254447394),
        (200000.0, 16.0, 51891.920582159108109),
    ] {
        let got = refraction(Metres(s), Coefficient(k), R).unwrap().0;
        let ulp = f64::from_bits(f64::abs(h).to_bits() + 1) - f64::abs(h);
        assert!((got - h).abs() <= 4.0 * ulp, "{s} {k}: {got:e} {h:e} {} ulp", (got - h) / ulp);
    }
    assert_eq!(refraction(Metres(200_000.0), Coefficient(-100.0), R), None);
}
