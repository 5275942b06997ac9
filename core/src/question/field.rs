//! A field of a question: what is asked, in which quantity, over which range and why.

use super::Asked;
use super::answer::Booked;
use super::asked::gpx::Rows;
use crate::quantity::unit::Quantity;
use serde::Serialize;

/// One thing an entry may hold.
#[derive(Debug, Clone, Copy, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Field {
    /// Name at the boundary; the unit picked beside the box comes as `NAME.unit`.
    pub name: &'static str,
    /// Label on the page, in trade words.
    pub label: &'static str,
    /// One or two lines that say what is meant and how good it has to be.
    pub help: &'static str,
    /// What kind of thing is entered.
    pub kind: Kind,
    /// Text assumed where nothing is entered; empty where there is none.
    pub default: &'static str,
    /// An entry that is right, as a person would type it.
    pub example: &'static str,
    /// Must be entered for an answer.
    pub required: bool,
    /// The same for every question of a site: remembered once.
    pub shared: bool,
    /// Heading under which it stands; empty for those always in view.
    pub group: &'static str,
    /// How it fills itself, or is typed with fewer keys.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub aid: Option<Aid>,
    /// Asked only where a choice of the question has a value; a column is then out of sight.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub when: Option<When>,
    /// Reads a file that is no table into the rows of this one: GPX for a table with positions.
    #[serde(skip)]
    #[cfg_attr(feature = "ts", tsify(skip))]
    pub file: Option<FileReader>,
}

/// A choice, and the values it must have for a field to be asked.
#[derive(Debug, Clone, Copy, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct When {
    /// Name of the choice, a field of the question that stands before.
    pub field: &'static str,
    /// What must be chosen: one of these.
    pub values: &'static [&'static str],
}

/// What spares the person keys. What was typed by hand is never changed by it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
#[serde(rename_all = "snake_case")]
pub enum Aid {
    /// A staff reading: four digits and nothing else are read with the point where a staff has it, 1234 as 1.234 m, in
    /// feet as 12.34 ft; it is said back digit by digit. Five digits are asked back: a key may have bounced.
    Staff,
    /// A column of names: a row that is begun takes the name that [`Booked`] offers.
    Numbered,
    /// A column of times: a row that is begun takes the time of the device's clock, `14:05`, and on a new day
    /// `2026-12-01 14:05`.
    Stamped,
}

/// What a table needs to be booked row by row, as the work goes on.
#[derive(Debug, Clone, Copy, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Booking {
    /// What belongs to single rows. It is asked each time, whatever else is wrong or missing in the entry; also with
    /// the last rows alone.
    #[serde(skip)]
    #[cfg_attr(feature = "ts", tsify(skip))]
    pub rows: fn(&Asked) -> Booked,
    /// What to ask when the work was interrupted.
    pub pause: Option<Pause>,
}

/// After a break something may have moved: what to ask then.
#[derive(Debug, Clone, Copy, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Pause {
    /// Minutes without an entry after which it is asked.
    pub after: u32,
    /// The question, in a sentence or two.
    pub text: &'static str,
    /// Name of the field that answers it.
    pub field: &'static str,
}

/// Text, columns, most rows → rows; `None` where the text is no such file, words where it is a broken one.
pub type FileReader = fn(&str, &[Field], usize) -> Option<Result<Rows, String>>;

/// The closed list of kinds of field.
#[derive(Debug, Clone, Copy, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
#[serde(tag = "type", rename_all = "snake_case")]
pub enum Kind {
    /// A number with a unit.
    Number {
        /// Which units it may have.
        quantity: Quantity,
        /// Least value, SI.
        min: f64,
        /// Greatest value, SI.
        max: f64,
        /// Why the range is what it is.
        why: &'static str,
        /// May be below zero: the page gives it a ± key.
        negative: bool,
    },
    /// One of a few.
    Choice {
        /// What may be chosen.
        options: &'static [Opt],
        /// Why these and no others.
        why: &'static str,
    },
    /// Words: the name of a point, a remark.
    Text {
        /// Longest, in characters.
        most: usize,
        /// Why no longer.
        why: &'static str,
    },
    /// Rows of columns, as a spreadsheet copies them: a tab between cells, a new line for each row. A line that begins
    /// with `~` is a row that was struck: it is kept and counts for nothing. The unit of a column comes as
    /// `NAME.COLUMN.unit`.
    Table {
        /// What each row holds; no table in it.
        columns: &'static [Field],
        /// A row in the words of the trade: "point", "setup".
        row: &'static str,
        /// Most rows.
        most: usize,
        /// Why no more.
        why: &'static str,
        /// Where it is booked row by row.
        #[serde(skip_serializing_if = "Option::is_none")]
        booking: Option<&'static Booking>,
    },
}

/// One of the things that may be chosen.
#[derive(Debug, Clone, Copy, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
pub struct Opt {
    /// Value at the boundary.
    pub value: &'static str,
    /// Words on the page.
    pub label: &'static str,
}

impl Field {
    const fn plain(name: &'static str, label: &'static str, kind: Kind, example: &'static str) -> Field {
        let (help, default, group) = ("", "", "");
        Field {
            name,
            label,
            help,
            kind,
            default,
            example,
            required: false,
            shared: false,
            group,
            aid: None,
            when: None,
            file: None,
        }
    }
    /// A number of the given quantity; `example` is an entry that is right.
    pub const fn number(name: &'static str, label: &'static str, quantity: Quantity, example: &'static str) -> Field {
        Field::plain(name, label, Kind::Number { quantity, min: 0.0, max: 0.0, why: "", negative: false }, example)
    }
    /// One of `options`.
    pub const fn choice(name: &'static str, label: &'static str, options: &'static [Opt], why: &'static str) -> Field {
        let example = match options {
            [first, ..] => first.value,
            [] => "",
        };
        Field::plain(name, label, Kind::Choice { options, why }, example)
    }
    /// Words of at most `most` characters.
    pub const fn text(
        name: &'static str,
        label: &'static str,
        most: usize,
        why: &'static str,
        example: &'static str,
    ) -> Field {
        Field::plain(name, label, Kind::Text { most, why }, example)
    }
    /// Rows of `columns`, each called `row`.
    pub const fn table(name: &'static str, label: &'static str, columns: &'static [Field], row: &'static str) -> Field {
        Field::plain(name, label, Kind::Table { columns, row, most: 0, why: "", booking: None }, "")
    }
    /// Most rows of a table, and why no more.
    pub const fn rows(mut self, limit: usize, reason: &'static str) -> Field {
        if let Kind::Table { columns, row, booking, .. } = self.kind {
            self.kind = Kind::Table { columns, row, most: limit, why: reason, booking };
        }
        self
    }
    /// The table is booked row by row.
    pub const fn booking(mut self, how: &'static Booking) -> Field {
        if let Kind::Table { columns, row, most, why, .. } = self.kind {
            self.kind = Kind::Table { columns, row, most, why, booking: Some(how) };
        }
        self
    }
    /// Spares the person keys.
    pub const fn aid(mut self, aid: Aid) -> Field {
        self.aid = Some(aid);
        self
    }
    /// Reads files of this kind too.
    pub const fn file(mut self, reader: FileReader) -> Field {
        self.file = Some(reader);
        self
    }
    /// An entry that is right.
    pub const fn example(mut self, example: &'static str) -> Field {
        self.example = example;
        self
    }
    /// Range in SI units, ends included, and why.
    pub const fn range(mut self, low: f64, high: f64, reason: &'static str) -> Field {
        if let Kind::Number { quantity, .. } = self.kind {
            self.kind = Kind::Number { quantity, min: low, max: high, why: reason, negative: low < 0.0 };
        }
        self
    }
    /// What is meant.
    pub const fn help(mut self, help: &'static str) -> Field {
        self.help = help;
        self
    }
    /// What is assumed where nothing is entered.
    pub const fn default(mut self, default: &'static str) -> Field {
        self.default = default;
        self
    }
    /// Must be entered.
    pub const fn required(mut self) -> Field {
        self.required = true;
        self
    }
    /// The same for every question of a site.
    pub const fn shared(mut self) -> Field {
        self.shared = true;
        self
    }
    /// Asked only where the choice of that name has one of these values.
    pub const fn when(mut self, field: &'static str, values: &'static [&'static str]) -> Field {
        self.when = Some(When { field, values });
        self
    }
    /// Stands under this heading.
    pub const fn under(mut self, heading: &'static str) -> Field {
        self.group = heading;
        self
    }
}
