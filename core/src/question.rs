//! What a question, an entry and an answer are.
//!
//! A [`Question`] is a declaration: its fields, its results, its cautions and sources, and the function that answers.
//! An entry is text by field name. Reading it never fails: it yields what was read and what was wrong ([`Asked`]).

pub mod answer;
pub mod asked;
pub mod field;
pub mod figure;
pub mod names;
pub mod pencil;
pub mod site;

use crate::quantity::unit::{QUANTITIES, QuantityInfo};
pub use answer::{Answer, State};
pub use asked::Asked;
pub use field::{Field, Kind};
use serde::Serialize;

/// One thing the page can be asked.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Question {
    /// Name at the boundary and in an address, e.g. `sight`.
    pub id: &'static str,
    /// The question as a person would ask it: "May this sight run this far?"
    pub phrase: &'static str,
    /// One line below the phrase on the home page: what it decides.
    pub about: &'static str,
    /// Fields in the order in which they are entered.
    pub fields: &'static [Field],
    /// The results the answer can hold.
    pub results: &'static [Promised],
    /// Dangers of this work, and who governs.
    pub cautions: &'static [Caution],
    /// Where the formulas and figures come from.
    pub sources: &'static [&'static str],
    /// Computes the answer from what was read, which holds no problem.
    #[serde(skip)]
    #[cfg_attr(feature = "ts", tsify(skip))]
    pub answer: fn(&Asked, &mut Answer),
}

/// A result that a question's answer can hold.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Promised {
    /// Name at the boundary.
    pub name: &'static str,
    /// Name on the page, in trade words.
    pub label: &'static str,
    /// What the number means, with its sign.
    pub meaning: &'static str,
}

impl Promised {
    /// Name at the boundary, label on the page, meaning.
    pub const fn new(name: &'static str, label: &'static str, meaning: &'static str) -> Promised {
        Promised { name, label, meaning }
    }
}

/// A danger of the work and who governs it.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Caution {
    /// What to do or never to do.
    pub text: &'static str,
    /// The body whose rules come first.
    pub governed_by: &'static str,
}

/// Everything the page needs to show every question: fields, units, words.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Catalogue {
    /// Version of the calculator.
    pub version: &'static str,
    /// In the page's order.
    pub questions: &'static [&'static Question],
    /// Units by quantity.
    pub quantities: &'static [QuantityInfo],
    /// Name of the field whose choice says which unit a bare number has.
    pub units_field: &'static str,
}

/// Every question and its fields, as data.
pub fn catalogue() -> Catalogue {
    Catalogue {
        version: env!("CARGO_PKG_VERSION"),
        questions: crate::questions::ALL,
        quantities: QUANTITIES,
        units_field: site::UNITS.name,
    }
}

/// Answers question `id` for an entry in the form an HTML form submits: `distance=300+m&tolerance=2+mm`.
///
/// Returns `None` only where no question has that id.
pub fn ask(id: &str, entry: &str) -> Option<Answer> {
    let question = crate::questions::ALL.iter().find(|q| q.id == id)?;
    let asked = Asked::read(question, entry);
    let mut answer = Answer::new(question, &asked);
    for field in question.fields {
        if let Kind::Table { booking: Some(booking), .. } = field.kind {
            answer.booked.push((booking.rows)(&asked));
        }
    }
    site::doubt_k(&asked, &mut answer);
    match asked.problems.first() {
        Some(first) => answer.not_known(first.message.clone()),
        None => (question.answer)(&asked, &mut answer),
    }
    Some(answer)
}
