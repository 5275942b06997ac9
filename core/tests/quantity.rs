//! Numbers as people type them: what is read, what is asked back, what is refused.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::quantity::number::{NotANumber, number, sexagesimal, split};

#[track_caller]
fn reads(text: &str, value: f64, plain: &str, also: Option<&str>) {
    let read = number(text).unwrap();
    assert_eq!((read.value, read.text.as_str(), read.also.as_deref()), (value, plain, also), "{text}");
    assert!(!read.sexagesimal);
}

#[test]
fn point_and_comma_are_both_decimal() {
    reads("12,5", 12.5, "12.5", None);
    reads("12.5", 12.5, "12.5", None);
    reads("-,5", -0.5, "-.5", None);
    reads("+5.", 5.0, "5.", None);
    reads("1,5e3", 1500.0, "1.5e3", None);
}

#[test]
fn spaces_group() {
    reads("1 234,5", 1234.5, "1234.5", None);
    reads("20 906 000", 20_906_000.0, "20906000", None);
    reads("- 5", -5.0, "-5", None);
    for two in ["1 2", "12 34", "1 2345", "1.5 000", "5 -"] {
        assert_eq!(number(two), Err(NotANumber::Unreadable), "{two}");
    }
}

#[test]
fn a_comma_before_three_digits_is_asked_back() {
    reads("1,234", 1.234, "1.234", Some("1234"));
    reads("-12,345", -12.345, "-12.345", Some("-12345"));
    // A point is decimal here; a zero, or other than three digits, cannot be grouping.
    for text in ["1.234", "0,234", "1,2345", "1234,567"] {
        assert_eq!(number(text).unwrap().also, None, "{text}");
    }
}

#[test]
fn points_and_commas_together_are_never_guessed() {
    let meanings = |text| match number(text) {
        Err(NotANumber::Separators(meanings)) => meanings,
        other => panic!("{other:?}"),
    };
    assert_eq!(meanings("1,234.5"), ["1234.5", "12345"]);
    assert_eq!(meanings("1.234,5"), ["1234.5", "12345"]);
    assert_eq!(meanings("1,234,567"), ["1234.567", "1234567"]);
    assert_eq!(meanings("1..5"), ["1.5", "15"]);
}

#[test]
fn fractions() {
    reads("1/8", 0.125, "1/8", None);
    reads("1:20", 0.05, "1/20", None);
    reads("-1,5 / 3", -0.5, "-1.5/3", None);
    assert_eq!(number("1/0"), Err(NotANumber::OutOfReach));
    assert_eq!(number("1/"), Err(NotANumber::Unreadable));
}

#[test]
fn what_is_no_number() {
    for text in ["", " ", "abc", ".", "-", "--5", "e5", "1e", "5-", "inf", "NaN", "0x10", "1e5,5", "½", "٣"] {
        assert_eq!(number(text), Err(NotANumber::Unreadable), "{text}");
    }
    assert_eq!(number("1e999"), Err(NotANumber::OutOfReach));
}

#[test]
fn number_and_unit_part() {
    for (text, digits, unit) in [
        ("984 ft", "984", "ft"),
        ("−0,2 mm/m", "-0,2", "mm/m"),
        ("1 in 20", "1", "in 20"),
        ("300m", "300", "m"),
        ("1e3 m", "1e3", "m"),
        ("5 e", "5", "e"),
        ("4/3 factor", "4/3", "factor"),
        ("2″", "2", "″"),
        ("ft", "", "ft"),
        ("", "", ""),
    ] {
        assert_eq!(split(text), (digits.to_owned(), unit.to_owned()), "{text}");
    }
}

#[test]
fn degrees_minutes_seconds() {
    let read = sexagesimal("90′").unwrap().unwrap();
    assert_eq!((read.value, read.text.as_str(), read.sexagesimal), (1.5, "90′", true));
    assert_eq!(sexagesimal("1° 30′").unwrap().unwrap().text, "1°30′");
    for none in ["12.5", "", "12 30 15", "gon"] {
        assert_eq!(sexagesimal(none), None, "{none}");
    }
    for wrong in ["1°60′", "1°0′60″", "°", "1°-5′", "5′1°", "1°2", "x°"] {
        assert_eq!(sexagesimal(wrong), Some(Err(NotANumber::Unreadable)), "{wrong}");
    }
    assert!(matches!(sexagesimal("1.2.3°"), Some(Err(NotANumber::Separators(_)))));
}
