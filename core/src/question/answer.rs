//! What comes back: the decision first, then everything it rests on.

use super::figure::Figure;
use super::{Asked, Promised, Question};
pub use crate::doubt::State;
use crate::quantity::show::Shown;
use serde::Serialize;

/// The answer to one entry.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Answer {
    /// Id of the question.
    pub question: &'static str,
    /// What was wrong with the entry, field by field, in words that say what to do.
    pub problems: Vec<Problem>,
    /// The decision.
    pub verdict: Verdict,
    /// Numbers, by name.
    pub results: Vec<Outcome>,
    /// Tables, by name.
    pub tables: Vec<Table>,
    /// Picture, as data.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub figure: Option<Figure>,
    /// The formulas with the numbers in them, line by line, to be checked with a pencil.
    pub working: Vec<String>,
    /// What else to know.
    pub notes: Vec<Note>,
    /// What can be handed on to the site.
    pub offers: Vec<Offer>,
    /// Where formulas and figures come from.
    pub sources: Vec<&'static str>,
    /// How each field was read.
    pub read: Vec<Read>,
    /// What belongs to single rows of tables.
    pub booked: Vec<Booked>,
    /// The cell in hand, said back. The entry names it as `TABLE.at`: the column, from 0, of the table's first row.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub heard: Option<Heard>,
    /// What was asked, self-contained, with units and defaults: a link, a record, a row of a test.
    pub entry: String,
}

/// Something wrong with one field.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Problem {
    /// Name of the field.
    pub field: &'static str,
    /// Where in a table it is wrong.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub cell: Option<Cell>,
    /// What to do.
    pub message: String,
    /// What may have been meant.
    pub fixes: Vec<Fix>,
}

/// A place in a table.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Cell {
    /// Line of the table's text, from 0; struck rows count.
    pub row: usize,
    /// Column, from 0.
    pub column: usize,
}

/// An entry that may have been meant: one tap puts it in.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Fix {
    /// Words on the key: "It is m: k = 0.14".
    pub label: String,
    /// Field to set.
    pub field: &'static str,
    /// Where in a table to set it.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub cell: Option<Cell>,
    /// Its new text, without unit.
    pub text: String,
    /// Its new unit, empty for none.
    pub unit: &'static str,
}

/// Values that the answer hands on: one tap puts them all in, one undo takes them out again.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Offer {
    /// Words on the key: "Reckon with −0.024 mm/m from now on".
    pub label: String,
    /// What the tap does.
    pub text: String,
    /// What is put where: in fields of this question, those shared with the site among them.
    pub values: Vec<Handed>,
}

/// A value that is handed on.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Handed {
    /// Field to set.
    pub field: &'static str,
    /// Its new text, without unit; a whole table as its rows.
    pub text: String,
    /// Its new unit, empty for none.
    pub unit: &'static str,
}

/// The decision: words and shape, never colour alone.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Verdict {
    /// What to do, in two to four words: "Take it", "Shorten to".
    pub word: &'static str,
    /// The one number that goes with the word, with its unit; may be empty.
    pub number: String,
    /// The reason and the distance at which the answer flips, in one or two sentences.
    pub sentence: String,
    /// How it stands to the limit.
    pub state: State,
}

/// A number that came out.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Outcome {
    /// Name at the boundary.
    pub name: &'static str,
    /// Name on the page.
    pub label: &'static str,
    /// SI value; absent where the text says why there is none.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub value: Option<f64>,
    /// The value as a person reads it, without unit, or words where there is no value.
    pub text: String,
    /// Unit of `text`, empty for words.
    pub unit: &'static str,
    /// 95 % half-width.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub doubt: Option<Doubt>,
    /// What the number does, in words, with its sign.
    pub meaning: String,
    /// It does not arise with this entry.
    pub idle: bool,
}

/// Doubt of a result: a 95 % half-width.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Doubt {
    /// SI value.
    pub value: f64,
    /// As shown, in the unit of its result: "± 0.9", or "from −3.1 to +0.8" where it is lopsided.
    pub text: String,
}

/// A table: every cell is text, ready to be read.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Table {
    /// Name at the boundary.
    pub name: &'static str,
    /// Heading.
    pub caption: String,
    /// Column headings, units in them.
    pub columns: Vec<String>,
    /// Rows; the first cell of each is its heading.
    pub rows: Vec<Vec<String>>,
}

/// Something else to know.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Note {
    /// How much it matters.
    pub level: Level,
    /// What to know, or what is asked back.
    pub text: String,
    /// Keys that answer what is asked back; empty where nothing is.
    pub fixes: Vec<Fix>,
}

/// How much a note matters.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
#[serde(rename_all = "snake_case")]
pub enum Level {
    /// Good to know.
    Note,
    /// Something may be wrong or dangerous.
    Caution,
}

/// How a field was read.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Read {
    /// Name of the field.
    pub field: &'static str,
    /// What was typed, without its unit; empty where nothing was.
    pub text: String,
    /// Unit it was read in, empty for none.
    pub unit: &'static str,
    /// The same in everyday words, or in SI where another unit was typed: "about 4 minutes' walk".
    pub echo: String,
    /// Nothing was entered and the default stands in.
    pub assumed: bool,
}

/// What is to be said at the rows of a table and, of one that is booked row by row, where it goes on.
#[derive(Debug, Clone, PartialEq, Default, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Booked {
    /// Name of the table.
    pub field: &'static str,
    /// Column, from 0, in which the row to come is most likely begun: the back sight after a fore sight.
    pub begin: usize,
    /// What the row to come is called, by the column it is begun in; columns that are not listed give it no name.
    pub names: Vec<Named>,
    /// Rows at which something is to be said, from the first on.
    pub rows: Vec<AtRow>,
}

/// A name for the row to come.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Named {
    /// Where it is begun in this column, from 0,
    pub column: usize,
    /// it is called so; empty where the point it belongs to has no name.
    pub text: String,
}

/// What is to be said at a row.
#[derive(Debug, Clone, PartialEq, Default, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct AtRow {
    /// Line of the table's text, from 0; struck rows count.
    pub row: usize,
    /// The row begins something, a setup: its heading. Empty where it does not.
    pub head: String,
    /// What may be wrong there though it can be read.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub cautions: Vec<AtCell>,
}

/// What may be wrong at a cell.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct AtCell {
    /// Column, from 0.
    pub column: usize,
    /// What to know, in a sentence.
    pub text: String,
}

/// A cell said back.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Heard {
    /// What is said: "As heard, 1.234 m".
    pub label: String,
    /// The words, to be read out: "one two three four".
    pub words: String,
}

/// The verdict where nothing is decided.
const NOT_KNOWN: &str = "Not enough is known";

impl Answer {
    /// An answer in which nothing is decided yet, with what `asked` found.
    pub fn new(question: &Question, asked: &Asked) -> Answer {
        let verdict = Verdict { word: "", number: String::new(), sentence: String::new(), state: State::Unknown };
        Answer {
            question: question.id,
            problems: asked.problems.clone(),
            verdict,
            results: vec![],
            tables: vec![],
            figure: None,
            working: vec![],
            notes: asked.notes.clone(),
            offers: vec![],
            sources: question.sources.to_vec(),
            read: asked.read.clone(),
            booked: vec![],
            heard: asked.heard.clone(),
            entry: asked.entry.clone(),
        }
    }
    /// Adds a result; `doubt` with its text.
    pub fn result(
        &mut self,
        promise: &Promised,
        value: Option<f64>,
        shown: Shown,
        doubt: Option<Doubt>,
        meaning: String,
    ) {
        let Promised { name, label, .. } = *promise;
        let Shown { text, unit } = shown;
        self.results.push(Outcome { name, label, value, text, unit, doubt, meaning, idle: false });
    }
    /// A result that does not arise with this entry, and why: the page puts it behind the others.
    pub fn idle(&mut self, promise: &Promised, why: impl Into<String>) {
        self.result(promise, None, Shown { text: "none".to_owned(), unit: "" }, None, why.into());
        if let Some(last) = self.results.last_mut() {
            last.idle = true;
        }
    }
    /// Decides nothing, and says why.
    pub fn not_known(&mut self, why: String) {
        self.verdict = Verdict { word: NOT_KNOWN, number: String::new(), sentence: why, state: State::Unknown };
    }
    /// Adds a note.
    pub fn note(&mut self, text: impl Into<String>) {
        self.notes.push(Note { level: Level::Note, text: text.into(), fixes: vec![] });
    }
    /// Adds a caution.
    pub fn caution(&mut self, text: impl Into<String>) {
        self.notes.push(Note { level: Level::Caution, text: text.into(), fixes: vec![] });
    }
}
