//! What one field, or one cell of a table, holds.

use super::entered::{self, Entered};
use crate::quantity::unit::{Quantity, System, Unit};
use crate::question::answer::Fix;
use crate::question::field::{Field, Kind};

/// What was read.
#[derive(Debug, Clone, PartialEq)]
pub enum What {
    /// SI value, and the unit it was read in.
    Number(f64, &'static Unit),
    /// Value of an option.
    Choice(&'static str),
    /// Words.
    Text(String),
}

impl What {
    /// SI value, where it is a number.
    pub fn number(&self) -> Option<f64> {
        match self {
            What::Number(si, _) => Some(*si),
            _ => None,
        }
    }
    /// Value of the option, where it is a choice; else empty.
    pub fn choice(&self) -> &'static str {
        match self {
            What::Choice(value) => value,
            _ => "",
        }
    }
}

/// What was read, and how to say it again.
pub struct Taken {
    pub what: What,
    /// As typed, without unit.
    pub text: String,
    /// A number without a unit.
    pub bare: bool,
    /// The text that says the same by itself.
    pub kept: String,
    /// What else may have been meant.
    pub also: Option<Fix>,
}

/// What to do, and what may have been meant.
pub type Wrong = (String, Vec<Fix>);

/// Reads `text`, which is not empty; `picked` is the unit chosen beside it.
pub fn take(field: &'static Field, system: System, text: &str, picked: &str) -> Result<Taken, Wrong> {
    match field.kind {
        Kind::Number { quantity, .. } => {
            let Entered { number, unit, bare, si } = entered::read(field, quantity, system, text, picked)?;
            let also = number.also.as_ref().filter(|also| entered::fits(field, unit, also)).map(|also| Fix {
                label: format!("It is {also}"),
                field: field.name,
                cell: None,
                text: also.clone(),
                unit: unit.symbol,
            });
            // A bare k stays bare: whether it is k or m must be asked each time it is read.
            let kept = entered::written(&number, unit, bare && quantity == Quantity::Refraction);
            Ok(Taken { what: What::Number(si, unit), text: number.text, bare, kept, also })
        }
        Kind::Choice { .. } => match choose(field, text) {
            Ok(value) => Ok(plain(What::Choice(value), value)),
            Err(labels) => {
                let message =
                    format!("“{}” is not one of the choices for {}: {labels}.", clip(text), lower(field.label));
                Err((message, vec![]))
            }
        },
        Kind::Text { most, why } => {
            let words: String = text.chars().map(|c| if c.is_control() { ' ' } else { c }).collect();
            if words.chars().count() > most {
                return Err((format!("{} may have {most} characters at most: {why}.", field.label), vec![]));
            }
            Ok(plain(What::Text(words.clone()), &words))
        }
        // Tables are read by `table`; a cell is none.
        Kind::Table { .. } => Err((format!("{} is a table.", field.label), vec![])),
    }
}

fn plain(what: What, text: &str) -> Taken {
    Taken { what, text: text.to_owned(), bare: false, kept: text.to_owned(), also: None }
}

/// What to say where something is required and nothing is there.
pub fn missing(field: &Field) -> String {
    match field.kind {
        Kind::Choice { .. } => format!("Choose one for “{}”.", field.label),
        _ => format!("Enter {}.", the(field.label)),
    }
}

/// The option of a choice that was meant, by value or by label; else the labels there are.
pub fn choose(field: &Field, text: &str) -> Result<&'static str, String> {
    let Kind::Choice { options, .. } = field.kind else { return Err(String::new()) };
    let found = options.iter().find(|o| o.value.eq_ignore_ascii_case(text) || o.label.eq_ignore_ascii_case(text));
    found.map(|o| o.value).ok_or_else(|| options.iter().map(|o| o.label).collect::<Vec<_>>().join(", "))
}

/// A label inside a sentence, with its article.
pub fn the(label: &str) -> String {
    let label = lower(label);
    if label.starts_with("the ") { label } else { format!("the {label}") }
}

/// A label inside a sentence.
pub fn lower(label: &str) -> String {
    let mut letters = label.chars();
    match (letters.next(), label.chars().nth(1)) {
        (Some(first), Some(second)) if second.is_ascii_lowercase() => {
            std::iter::once(first.to_ascii_lowercase()).chain(letters).collect()
        }
        _ => label.to_owned(),
    }
}

/// What was typed, short enough for a sentence.
pub fn clip(text: &str) -> String {
    let short: String = text.chars().filter(|c| !c.is_control()).take(24).collect();
    if short.len() < text.len() { format!("{short}…") } else { short }
}
