//! The level book: published runs, and what holds for every run.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::levelling::{Run, Setup, Sight};
use farstaff::question::{Answer, ask};

mod booking;
mod flags;
mod properties;
mod published;
#[path = "../common/random.rs"]
mod random;

/// Back sight, intermediate sights, fore sight.
type Readings<'a> = (f64, &'a [f64], f64);

fn sight(reading: f64) -> Sight {
    Sight { reading, distance: None }
}

/// A run without distances.
fn run(start: f64, setups: &[Readings]) -> Run {
    let of = |(back, inters, fore): &Readings| Setup {
        back: sight(*back),
        inters: inters.iter().map(|r| sight(*r)).collect(),
        fore: Some(sight(*fore)),
    };
    Run { start, close: None, setups: setups.iter().map(of).collect() }
}

/// The answer of the book to rows, and to more fields.
fn book(rows: &str, more: &[(&str, &str)]) -> Answer {
    let mut form = form_urlencoded::Serializer::new(String::new());
    form.extend_pairs(more).append_pair("book", rows);
    ask("book", &form.finish()).unwrap()
}

fn value(answer: &Answer, name: &str) -> Option<f64> {
    answer.results.iter().find(|r| r.name == name).unwrap().value
}

/// The cells of a column of the table `levels`, by the heading it begins with.
fn column(answer: &Answer, heading: &str) -> Vec<String> {
    let table = answer.tables.iter().find(|t| t.name == "levels").unwrap();
    let at = table.columns.iter().position(|c| c.starts_with(heading)).unwrap();
    table.rows.iter().map(|row| row[at].clone()).collect()
}
