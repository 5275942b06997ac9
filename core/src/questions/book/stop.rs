//! The marks of an overnight stop.

use crate::levelling::stop::{Check, Found, LEAST, Readings, check};
use crate::quantity::show::Show;
use crate::quantity::unit::Quantity;
use crate::question::answer::Answer;
use crate::question::field::{Aid, Field};
use crate::question::{Asked, Promised};
use crate::sight::budget::Budget;

const STOP: &str = "Overnight stop";
const THIRD: &str = "A third point, where it was read too: it tells which mark moved.";

const fn staff(name: &'static str, label: &'static str, example: &'static str, help: &'static str) -> Field {
    Field::number(name, label, Quantity::Height, example)
        .range(0.0, super::columns::LONGEST, "no staff is longer")
        .help(help)
        .aid(Aid::Staff)
        .under(STOP)
}
const LEFT: &str = "From one setup midway, on leaving. Two marks that differ by 0.3 m or more (US Army EN0593, read).";
const FOUND: &str = "From one setup midway, on return.";
pub const LEFT_A: Field = staff("stop_a", "First mark, on leaving", "1.612", LEFT);
pub const LEFT_B: Field = staff("stop_b", "Second mark, on leaving", "1.204", LEFT);
pub const LEFT_C: Field = staff("stop_c", "Third point, on leaving", "2.300", THIRD);
pub const FOUND_A: Field = staff("return_a", "First mark, on return", "1.433", FOUND);
pub const FOUND_B: Field = staff("return_b", "Second mark, on return", "1.025", FOUND);
pub const FOUND_C: Field = staff("return_c", "Third point, on return", "2.121", THIRD);

pub const CHANGE: Promised =
    Promised::new("stop_change", "Overnight", "how far the second mark went up against the first; − down");

/// Adds the result, with a caution where the marks did not hold.
pub fn fill(asked: &Asked, budget: &Budget, answer: &mut Answer) {
    let readings = |a: &Field, b: &Field, c: &Field| {
        Some(Readings { first: asked.number(a)?, second: asked.number(b)?, third: asked.number(c) })
    };
    let both = readings(&LEFT_A, &LEFT_B, &LEFT_C).zip(readings(&FOUND_A, &FOUND_B, &FOUND_C));
    let Some((leaving, returning)) = both else {
        let why = "no marks were read on leaving and again on return".to_owned();
        return answer.idle(&CHANGE, why);
    };
    // Four readings, each with its doubt.
    let expected = 2.0 * budget.reading.0;
    let check = check(leaving, returning, expected);
    let show = asked.show();
    let (good, text) = says(&check, expected, show);
    if !good {
        answer.caution(["Overnight stop: ", &text, "."].concat());
    }
    let change = libm::round(check.change() * 1e9) / 1e9;
    answer.result(&CHANGE, Some(change), show.entered(change), None, text);
}

/// What was found, and whether the run may go on from the marks.
fn says(check: &Check, expected: f64, show: Show) -> (bool, String) {
    let up = |by: f64| {
        format!("{} {}", show.entered(libm::round(by.abs() * 1e9) / 1e9), if by < 0.0 { "down" } else { "up" })
    };
    let text = match check.found {
        Found::Held => return (true, format!("held: two differences may disagree by {}", show.own(expected))),
        Found::NoCheck => format!(
            "the marks differ by less than {}: no check, one taken for the other would not show",
            show.height_words(LEAST)
        ),
        Found::Exchanged => {
            "the differences agree once one mark is taken for the other: were they mixed up?".to_owned()
        }
        Found::Moved => {
            format!(
                "the second mark went {} against the first, or one was misread. Two marks do not tell which: go back to a third",
                up(check.change())
            )
        }
        Found::This { second, by } => {
            let (mark, other) = if second { ("second", "first") } else { ("first", "second") };
            format!("the {mark} mark went {}; carry on from the {other}", up(by))
        }
        Found::All => {
            "all three moved against each other, or one was misread: go back to the last good mark".to_owned()
        }
    };
    (false, text)
}
