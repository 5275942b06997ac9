//! Numbers and units as people type them.
#![allow(
    clippy::unwrap_used,
    clippy::excessive_precision,
    reason = "a test may panic; references keep their printed digits"
)]

use farstaff::quantity::number::{NotANumber, number, sexagesimal, split};
use farstaff::quantity::unit::{Quantity, System};

#[test]
fn point_and_comma_are_both_decimal() {
    assert_eq!(number("12,5").unwrap().value, 12.5);
    assert_eq!(number("12.5").unwrap().value, 12.5);
    assert_eq!(number("1 234,5").unwrap().value, 1234.5);
    assert!(matches!(number("1,234.5"), Err(NotANumber::Separators(_))));
    assert_eq!(number("1,234").unwrap().also.as_deref(), Some("1234"));
}

#[test]
fn number_and_unit_part() {
    assert_eq!(split("984 ft"), ("984".into(), "ft".into()));
    assert_eq!(split("−0,2 mm/m"), ("-0,2".into(), "mm/m".into()));
    assert_eq!(number("1/8").unwrap().value, 0.125);
    assert!(number("abc").is_err());
}

#[test]
fn degrees_minutes_seconds() {
    let angle = sexagesimal("89°58′12″").unwrap().unwrap();
    assert!((angle.value - 89.97).abs() < 1e-12);
    assert!(sexagesimal("12.5").is_none());
}

#[test]
fn feet_are_exact() {
    // International foot 0.3048 m; US survey foot 1200/3937 m (Federal Register 2020-21902).
    assert_eq!(Quantity::Distance.unit("ft").unwrap().to_si(1000.0), Some(304.8));
    assert_eq!(Quantity::Distance.unit("ftUS").unwrap().to_si(3937.0), Some(1200.0));
    assert_eq!(Quantity::Refraction.unit("m").unwrap().to_si(0.0625), Some(0.125));
    assert_eq!(Quantity::SmallLength.usual(System::Metric).symbol, "mm");
}
