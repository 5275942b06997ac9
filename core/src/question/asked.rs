//! Reading an entry: text by field name → what was read and what was wrong. It never fails and never guesses silently.

mod echo;
mod entered;

use super::answer::{Fix, Level, Note, Problem, Read};
use super::field::{Field, Kind};
use super::{Question, site};
use crate::quantity::show::Show;
use crate::quantity::unit::{Quantity, System, Unit};
use entered::Entered;

/// An entry as it was read.
#[derive(Debug, Clone, PartialEq)]
pub struct Asked {
    /// What was wrong.
    pub problems: Vec<Problem>,
    /// What is asked back.
    pub notes: Vec<Note>,
    /// How each field was read.
    pub read: Vec<Read>,
    /// What was asked, with units and defaults.
    pub entry: String,
    /// Which unit a bare number has, and which the answer is shown in.
    pub system: System,
    values: Vec<Value>,
}

#[derive(Debug, Clone, PartialEq)]
struct Value {
    field: &'static str,
    what: What,
    /// Entered by the person, not by default.
    given: bool,
    /// Entered without a unit.
    bare: bool,
}

#[derive(Debug, Clone, PartialEq)]
enum What {
    Number(f64, Unit),
    Choice(&'static str),
}

impl Asked {
    /// Reads `entry`, in the form an HTML form submits, against the fields of `question`.
    pub fn read(question: &Question, entry: &str) -> Asked {
        let pairs: Vec<(String, String)> = form_urlencoded::parse(entry.as_bytes())
            .map(|(name, text)| (name.into_owned(), text.into_owned()))
            .collect();
        // The last one counts, as the last thing a person did.
        let typed = |name: &str| pairs.iter().rev().find(|p| p.0 == name).map_or("", |p| p.1.trim());
        let system = match choose(&site::UNITS, typed(site::UNITS.name)) {
            Ok("foot") => System::Foot,
            Ok("survey_foot") => System::SurveyFoot,
            _ => System::Metric,
        };
        let mut asked =
            Asked { problems: vec![], notes: vec![], read: vec![], entry: String::new(), system, values: vec![] };
        let mut canonical = form_urlencoded::Serializer::new(String::new());
        for field in question.fields {
            let text = typed(field.name);
            let picked = typed(&format!("{}.unit", field.name));
            let kept = match field.kind {
                Kind::Choice { .. } => asked.read_choice(field, text),
                Kind::Number { quantity, .. } => asked.read_number(field, quantity, text, picked),
            };
            match kept {
                Some(kept) => {
                    if !kept.is_empty() {
                        canonical.append_pair(field.name, &kept);
                    }
                }
                None => {
                    canonical.append_pair(field.name, text);
                    if !picked.is_empty() {
                        canonical.append_pair(&format!("{}.unit", field.name), picked);
                    }
                }
            }
        }
        asked.entry = canonical.finish();
        let known = |name: &str| {
            let name = name.strip_suffix(".unit").unwrap_or(name);
            question.fields.iter().any(|f| f.name == name)
        };
        let mut strangers: Vec<&str> = pairs.iter().map(|p| p.0.as_str()).filter(|n| !known(n)).collect();
        strangers.dedup();
        if let [first, ..] = strangers.as_slice() {
            let more = if strangers.len() > 1 { " and others" } else { "" };
            let text =
                format!("The entry also holds “{}”{more}, which is not asked here. It was left out.", clip(first));
            asked.notes.push(Note { level: Level::Caution, text, fixes: vec![] });
        }
        asked
    }

    /// Reads a choice; `None` where something was wrong, else the text to keep.
    fn read_choice(&mut self, field: &'static Field, text: &str) -> Option<String> {
        let given = !text.is_empty();
        let text = if given { text } else { field.default };
        if text.is_empty() {
            if field.required {
                self.problem(field, format!("Choose one for “{}”.", field.label), vec![]);
                return None;
            }
            return Some(String::new());
        }
        match choose(field, text) {
            Ok(value) => {
                self.values.push(Value { field: field.name, what: What::Choice(value), given, bare: false });
                self.read.push(Read {
                    field: field.name,
                    text: value.to_owned(),
                    unit: "",
                    echo: String::new(),
                    assumed: !given,
                });
                Some(value.to_owned())
            }
            Err(labels) => {
                let message =
                    format!("“{}” is not one of the choices for {}: {labels}.", clip(text), lower(field.label));
                self.problem(field, message, vec![]);
                None
            }
        }
    }

    /// Reads a number; `None` where something was wrong, else the text to keep.
    fn read_number(&mut self, field: &'static Field, quantity: Quantity, text: &str, picked: &str) -> Option<String> {
        let given = !text.is_empty();
        let text = if given { text } else { field.default };
        if text.is_empty() {
            if field.required {
                self.problem(field, format!("Enter {}.", the(field.label)), vec![]);
                return None;
            }
            return Some(String::new());
        }
        let picked = if given { picked } else { "" };
        match entered::read(field, quantity, self.system, text, picked) {
            Ok(Entered { number, unit, bare, si }) => {
                if let Some(also) = number.also.as_ref().filter(|also| entered::fits(field, &unit, also)) {
                    let fix = Fix {
                        label: format!("It is {also}"),
                        field: field.name,
                        text: also.clone(),
                        unit: unit.symbol,
                    };
                    let text = format!("{} was read as {}. Is it {also}?", field.label, number.text);
                    self.notes.push(Note { level: Level::Caution, text, fixes: vec![fix] });
                }
                self.read.push(Read {
                    field: field.name,
                    text: number.text.clone(),
                    unit: unit.symbol,
                    echo: echo::words(quantity, si, &unit, Show(self.system)),
                    assumed: !given,
                });
                self.values.push(Value { field: field.name, what: What::Number(si, unit), given, bare });
                Some(entered::written(&number, &unit, bare && quantity == Quantity::Refraction))
            }
            Err((message, fixes)) => {
                self.problem(field, message, fixes);
                None
            }
        }
    }

    fn problem(&mut self, field: &'static Field, message: String, fixes: Vec<Fix>) {
        self.problems.push(Problem { field: field.name, message, fixes });
    }

    fn value(&self, field: &Field) -> Option<&Value> {
        self.values.iter().find(|v| v.field == field.name)
    }
    /// SI value of a number, entered or by default; `None` where there is neither.
    pub fn number(&self, field: &Field) -> Option<f64> {
        match self.value(field)?.what {
            What::Number(si, _) => Some(si),
            What::Choice(_) => None,
        }
    }
    /// SI value of a number the question cannot do without; its default or required entry is held by a test.
    pub fn must(&self, field: &Field) -> f64 {
        self.number(field).unwrap_or(0.0)
    }
    /// The unit a number was read in.
    pub fn unit(&self, field: &Field) -> Option<Unit> {
        match self.value(field)?.what {
            What::Number(_, unit) => Some(unit),
            What::Choice(_) => None,
        }
    }
    /// What was chosen, by the person or by default; empty where nothing was.
    pub fn choice(&self, field: &Field) -> &'static str {
        match self.value(field).map(|v| &v.what) {
            Some(What::Choice(value)) => value,
            _ => "",
        }
    }
    /// Entered by the person, not by default.
    pub fn given(&self, field: &Field) -> bool {
        self.value(field).is_some_and(|v| v.given)
    }
    /// Entered without a unit, which is then the usual one.
    pub fn bare(&self, field: &Field) -> bool {
        self.value(field).is_some_and(|v| v.bare)
    }
    /// The number as it was typed, without unit.
    pub fn text(&self, field: &Field) -> &str {
        self.read.iter().find(|r| r.field == field.name).map_or("", |r| &r.text)
    }
    /// How the answer shows its numbers.
    pub fn show(&self) -> Show {
        Show(self.system)
    }
}

/// The option of a choice that was meant, by value or by label; else the labels there are.
fn choose(field: &Field, text: &str) -> Result<&'static str, String> {
    let Kind::Choice { options, .. } = field.kind else { return Err(String::new()) };
    let found = options.iter().find(|o| o.value.eq_ignore_ascii_case(text) || o.label.eq_ignore_ascii_case(text));
    found.map(|o| o.value).ok_or_else(|| options.iter().map(|o| o.label).collect::<Vec<_>>().join(", "))
}

/// A label inside a sentence, with its article.
fn the(label: &str) -> String {
    let label = lower(label);
    if label.starts_with("the ") { label } else { format!("the {label}") }
}

/// A label inside a sentence.
fn lower(label: &str) -> String {
    let mut letters = label.chars();
    match (letters.next(), label.chars().nth(1)) {
        (Some(first), Some(second)) if second.is_ascii_lowercase() => {
            std::iter::once(first.to_ascii_lowercase()).chain(letters).collect()
        }
        _ => label.to_owned(),
    }
}

/// What was typed, short enough for a sentence.
fn clip(text: &str) -> String {
    let short: String = text.chars().filter(|c| !c.is_control()).take(24).collect();
    if short.len() < text.len() { format!("{short}…") } else { short }
}
