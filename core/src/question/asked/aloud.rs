//! A cell said back, so that a slip is heard: a staff reading digit by digit, a distance as one walks it.

use super::echo;
use crate::quantity::show::{Show, Shown, places};
use crate::quantity::unit::{Quantity, Unit};
use crate::question::answer::Heard;
use crate::question::field::{Aid, Field, Kind};

const DIGITS: [&str; 10] = ["zero", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine"];

/// What is said of a number that was read; `None` where there is nothing to add.
pub fn heard(field: &Field, si: f64, unit: &Unit, show: Show) -> Option<Heard> {
    let Kind::Number { quantity, .. } = field.kind else { return None };
    let (label, words) = match field.aid {
        Some(Aid::Staff) => {
            let reading = on_staff(si, unit);
            (format!("As heard, {reading}"), said(&reading))
        }
        _ => ("That is".to_owned(), echo::words(quantity, si, unit, show)),
    };
    (!words.is_empty()).then_some(Heard { label, words })
}

/// The same in one line, for the field itself.
pub fn line(heard: &Heard) -> String {
    format!("{}: {}", heard.label, heard.words)
}

/// A reading as it stands on a staff: metres to the millimetre or feet to the hundredth, finer where it was read so.
fn on_staff(si: f64, unit: &Unit) -> Shown {
    let (unit, least) = match Quantity::Height.unit("m") {
        Some(metre) if unit.symbol.starts_with('m') => (metre, 3),
        _ => (unit, 2),
    };
    let value = unit.from_si(si).unwrap_or(0.0);
    let whole = |digits: &usize| {
        let shifted = value * libm::pow(10.0, *digits as f64);
        libm::fabs(shifted - libm::round(shifted)) < 1e-4
    };
    let digits = (least..6).find(whole).unwrap_or(6);
    Shown { text: places(value, digits), unit: unit.symbol }
}

/// Digit by digit. The point of a metric reading below ten metres is not said: every reading has it in the same place.
fn said(reading: &Shown) -> String {
    let silent = reading.unit == "m" && reading.text.trim_start_matches('−').find('.') == Some(1);
    let words = reading.text.chars().filter_map(|c| match c {
        '−' => Some("minus"),
        '.' if silent => None,
        '.' => Some("point"),
        c => c.to_digit(10).and_then(|d| DIGITS.get(d as usize)).copied(),
    });
    words.collect::<Vec<_>>().join(" ")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::unit::System;

    const READING: Field = Field::number("back", "Back sight", Quantity::Height, "1.234")
        .range(-5.0, 5.0, "a staff is no longer")
        .aid(Aid::Staff);

    /// What is said of an entry, or what is wrong with it.
    fn said_of(text: &str, picked: &str) -> String {
        static FIELD: Field = READING;
        match super::super::entered::read(&FIELD, Quantity::Height, System::Metric, text, picked) {
            Ok(read) => heard(&FIELD, read.si, read.unit, Show(System::Metric)).map_or(String::new(), |h| line(&h)),
            Err((message, fixes)) => {
                format!("{message} {}", fixes.iter().map(|f| &*f.label).collect::<Vec<_>>().join(", "))
            }
        }
    }

    #[test]
    fn four_digits_are_a_reading_and_are_said_back() {
        for text in ["1234", "1.234", "1,234", "1234 mm", " 1234 "] {
            assert_eq!(said_of(text, "m"), "As heard, 1.234\u{a0}m: one two three four", "{text}");
        }
        for (text, unit, said) in [
            ("0512", "m", "As heard, 0.512\u{a0}m: zero five one two"),
            ("-0512", "", "As heard, −0.512\u{a0}m: minus zero five one two"),
            ("1.2", "", "As heard, 1.200\u{a0}m: one two zero zero"),
            ("1.2345", "", "As heard, 1.2345\u{a0}m: one two three four five"),
            ("1234", "ft", "As heard, 12.34\u{a0}ft: one two point three four"),
            ("0512", "ft", "As heard, 5.12\u{a0}ft: five point one two"),
            ("4.125 ft", "m", "As heard, 4.125\u{a0}ft: four point one two five"),
            ("1234", "mm", "As heard, 1.234\u{a0}m: one two three four"),
        ] {
            assert_eq!(said_of(text, unit), said, "{text} {unit}");
        }
    }

    #[test]
    fn what_is_not_certain_is_asked_back() {
        assert!(said_of("12334", "m").ends_with("Enter the back sight with its point. It is 1.2334\u{a0}m"));
        assert!(said_of("512", "m").ends_with("It is 512\u{a0}mm"), "{}", said_of("512", "m"));
        assert!(said_of("1234 m", "").starts_with("Back sight must be between"));
        assert!(said_of("9999", "m").starts_with("Back sight must be between"));
    }
}
