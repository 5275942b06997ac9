//! Reading an entry: text by field name → what was read and what was wrong. It never fails and never guesses silently.

mod aloud;
mod cell;
mod echo;
mod entered;
pub mod gpx;
mod table;

use super::answer::{Fix, Heard, Level, Note, Problem, Read};
use super::field::{Field, Kind};
use super::{Question, site};
use crate::quantity::show::Show;
use crate::quantity::unit::{System, Unit};
pub use cell::What;
use cell::{Taken, choose, clip};
pub use table::Row;

/// An entry as it was read.
#[derive(Debug, Clone)]
pub struct Asked {
    /// What was wrong.
    pub problems: Vec<Problem>,
    /// What is asked back.
    pub notes: Vec<Note>,
    /// How each field was read.
    pub read: Vec<Read>,
    /// What was asked, with units and defaults.
    pub entry: String,
    /// The cell in hand, said back.
    pub heard: Option<Heard>,
    /// Which unit a bare number has, and which the answer is shown in.
    pub system: System,
    values: Vec<Value>,
    rows: Vec<(&'static str, Vec<Row>)>,
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

/// The pairs of a form.
struct Form(Vec<(String, String)>);

impl Form {
    /// The last one counts, as the last thing a person did.
    fn get(&self, name: &str) -> &str {
        self.0.iter().rev().find(|p| p.0 == name).map_or("", |p| &p.1)
    }
    fn unit_of(&self, name: &str) -> &str {
        self.get(&format!("{name}.unit")).trim()
    }
}

type Canonical<'a> = form_urlencoded::Serializer<'a, String>;

impl Asked {
    /// Reads `entry`, in the form an HTML form submits, against the fields of `question`.
    pub fn read(question: &Question, entry: &str) -> Asked {
        let pairs = form_urlencoded::parse(entry.as_bytes()).map(|(name, text)| (name.into_owned(), text.into_owned()));
        let form = Form(pairs.collect());
        let system = match choose(&site::UNITS, form.get(site::UNITS.name).trim()) {
            Ok("foot") => System::Foot,
            Ok("survey_foot") => System::SurveyFoot,
            _ => System::Metric,
        };
        let mut asked = Asked {
            problems: vec![],
            notes: vec![],
            read: vec![],
            entry: String::new(),
            heard: None,
            system,
            values: vec![],
            rows: vec![],
        };
        let mut canonical = form_urlencoded::Serializer::new(String::new());
        for field in question.fields {
            match field.kind {
                Kind::Table { columns, .. } => asked.read_table(field, columns, &form, &mut canonical),
                _ => asked.read_field(field, &form, &mut canonical),
            }
        }
        asked.entry = canonical.finish();
        asked.name_strangers(question, &form);
        asked
    }

    fn read_field(&mut self, field: &'static Field, form: &Form, canonical: &mut Canonical) {
        // A sign that cannot be seen is no more than a space at either end.
        let typed = form.get(field.name).trim_matches(|c: char| c.is_whitespace() || c.is_control());
        let picked = form.unit_of(field.name);
        let given = !typed.is_empty();
        if !self.asks(field) {
            // Kept for when it is asked again.
            for (name, text) in [(field.name, typed), (&format!("{}.unit", field.name), picked)] {
                if !text.is_empty() {
                    canonical.append_pair(name, text);
                }
            }
            return;
        }
        let text = if given { typed } else { field.default };
        if text.is_empty() {
            if field.required {
                self.problem(field, cell::missing(field), vec![]);
            }
            return;
        }
        match cell::take(field, self.system, text, if given { picked } else { "" }) {
            Ok(taken) => {
                let Taken { what, text, bare, kept, also } = taken;
                if let Some(fix) = also {
                    let text = format!("{} was read as {text}. Is it {}?", field.label, fix.text);
                    self.notes.push(Note { level: Level::Caution, text, fixes: vec![fix] });
                }
                let (unit, echo) = match (&what, field.kind) {
                    (What::Number(si, unit), Kind::Number { .. }) if field.aid.is_some() => {
                        let heard = aloud::heard(field, *si, unit, self.show());
                        (unit.symbol, heard.map_or(String::new(), |heard| aloud::line(&heard)))
                    }
                    (What::Number(si, unit), Kind::Number { quantity, .. }) => {
                        (unit.symbol, echo::words(quantity, *si, unit, self.show()))
                    }
                    _ => ("", String::new()),
                };
                self.read.push(Read { field: field.name, text, unit, echo, assumed: !given });
                self.values.push(Value { field: field.name, what, given, bare });
                canonical.append_pair(field.name, &kept);
            }
            Err((message, fixes)) => {
                self.problem(field, message, fixes);
                canonical.append_pair(field.name, typed);
                if !picked.is_empty() {
                    canonical.append_pair(&format!("{}.unit", field.name), picked);
                }
            }
        }
    }

    fn read_table(&mut self, field: &'static Field, columns: &'static [Field], form: &Form, canonical: &mut Canonical) {
        let text = form.get(field.name);
        let picked = |column: &Field| form.unit_of(&format!("{}.{}", field.name, column.name)).to_owned();
        let table = table::read(field, columns, self.system, text, picked, |column| self.asks(column));
        if table.text.is_empty() {
            if field.required {
                self.problem(field, cell::missing(field), vec![]);
            }
        } else {
            canonical.append_pair(field.name, &table.text);
            for (column, unit) in columns.iter().zip(&table.units) {
                if !unit.is_empty() {
                    canonical.append_pair(&format!("{}.{}.unit", field.name, column.name), unit);
                }
            }
            self.read.push(Read { field: field.name, text: table.text, unit: "", echo: table.echo, assumed: false });
        }
        let at = form.get(&format!("{}.at", field.name)).parse().ok().and_then(|at: usize| columns.get(at));
        if let (Some(column), Some(row)) = (at, table.rows.first()) {
            self.heard = row.measured(column).and_then(|(si, unit)| aloud::heard(column, si, unit, self.show()));
        }
        self.problems.extend(table.problems);
        self.notes.extend(table.notes.into_iter().map(|text| Note { level: Level::Note, text, fixes: vec![] }));
        self.rows.push((field.name, table.rows));
    }

    /// Says what the entry holds that the question does not ask.
    fn name_strangers(&mut self, question: &Question, form: &Form) {
        let known = |name: &str| {
            let name = name.split('.').next().unwrap_or(name);
            question.fields.iter().any(|f| f.name == name)
        };
        let mut strangers: Vec<&str> = form.0.iter().map(|p| p.0.as_str()).filter(|n| !known(n)).collect();
        strangers.dedup();
        if let [first, ..] = strangers.as_slice() {
            let more = if strangers.len() > 1 { " and others" } else { "" };
            let text =
                format!("The entry also holds “{}”{more}, which is not asked here. It was left out.", clip(first));
            self.notes.push(Note { level: Level::Caution, text, fixes: vec![] });
        }
    }

    fn problem(&mut self, field: &'static Field, message: String, fixes: Vec<Fix>) {
        self.problems.push(Problem { field: field.name, cell: None, message, fixes });
    }

    /// The choice that it hangs on, if any, is made that way.
    fn asks(&self, field: &Field) -> bool {
        field.when.is_none_or(|when| {
            self.values.iter().any(|v| v.field == when.field && when.values.contains(&v.what.choice()))
        })
    }
    fn value(&self, field: &Field) -> Option<&Value> {
        self.values.iter().find(|v| v.field == field.name)
    }
    /// SI value of a number, entered or by default; `None` where there is neither.
    pub fn number(&self, field: &Field) -> Option<f64> {
        self.value(field)?.what.number()
    }
    /// SI value of a number the question cannot do without; its default or required entry is held by a test.
    pub fn must(&self, field: &Field) -> f64 {
        self.number(field).unwrap_or(0.0)
    }
    /// The unit a number was read in.
    pub fn unit(&self, field: &Field) -> Option<&'static Unit> {
        match self.value(field)?.what {
            What::Number(_, unit) => Some(unit),
            _ => None,
        }
    }
    /// What was chosen, by the person or by default; empty where nothing was.
    pub fn choice(&self, field: &Field) -> &'static str {
        self.value(field).map_or("", |v| v.what.choice())
    }
    /// Entered by the person, not by default.
    pub fn given(&self, field: &Field) -> bool {
        self.value(field).is_some_and(|v| v.given)
    }
    /// Entered without a unit, which is then the usual one.
    pub fn bare(&self, field: &Field) -> bool {
        self.value(field).is_some_and(|v| v.bare)
    }
    /// What was typed, without unit.
    pub fn text(&self, field: &Field) -> &str {
        self.read.iter().find(|r| r.field == field.name).map_or("", |r| &r.text)
    }
    /// The rows of a table that count: neither struck nor empty.
    pub fn rows(&self, field: &Field) -> &[Row] {
        self.rows.iter().find(|r| r.0 == field.name).map_or(&[], |r| &r.1)
    }
    /// How the answer shows its numbers.
    pub fn show(&self) -> Show {
        Show(self.system)
    }
}
