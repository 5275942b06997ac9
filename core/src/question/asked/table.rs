//! A table: what a person types row by row, or pastes whole from a spreadsheet or a file of separated values.

use super::cell::{What, lower, missing, take};
use crate::quantity::unit::{System, Unit};
use crate::question::answer::{Cell, Fix, Problem};
use crate::question::field::{Field, Kind};

/// Begins a line that was struck.
pub const STRUCK: char = '~';
/// Problems of one table that are told one by one; more are counted.
const TOLD: usize = 20;

/// A row that counts.
#[derive(Debug, Clone)]
pub struct Row {
    /// Line of the table's text, from 0; struck rows count.
    pub line: usize,
    columns: &'static [Field],
    cells: Vec<Option<What>>,
}

impl Row {
    fn what(&self, column: &Field) -> Option<&What> {
        let at = self.columns.iter().position(|c| c.name == column.name)?;
        self.cells.get(at)?.as_ref()
    }
    /// SI value of a number, entered or by default.
    pub fn number(&self, column: &Field) -> Option<f64> {
        self.what(column)?.number()
    }
    /// A number with the unit it was read in.
    pub fn measured(&self, column: &Field) -> Option<(f64, &Unit)> {
        match self.what(column)? {
            What::Number(si, unit) => Some((*si, unit)),
            _ => None,
        }
    }
    /// What was chosen; empty where nothing was.
    pub fn choice(&self, column: &Field) -> &'static str {
        self.what(column).map_or("", What::choice)
    }
    /// Words; empty where there are none.
    pub fn text(&self, column: &Field) -> &str {
        match self.what(column) {
            Some(What::Text(text)) => text,
            _ => "",
        }
    }
    /// Number of the column.
    pub fn column(&self, column: &Field) -> usize {
        self.columns.iter().position(|c| c.name == column.name).unwrap_or(0)
    }
}

/// A table as it was read.
pub struct Table {
    /// Rows that count.
    pub rows: Vec<Row>,
    /// A tab between cells, a new line for each row, struck rows too.
    pub text: String,
    /// Unit of each column, empty where it has none.
    pub units: Vec<String>,
    /// "14 points, 2 struck".
    pub echo: String,
    /// What was wrong.
    pub problems: Vec<Problem>,
    /// How a text that was pasted has been understood.
    pub notes: Vec<String>,
}

/// Reads `text`; `picked` is the unit chosen for a column. Of a column that is not asked nothing is wrong.
pub fn read(
    field: &'static Field,
    columns: &'static [Field],
    system: System,
    text: &str,
    picked: impl Fn(&Field) -> String,
    asks: impl Fn(&Field) -> bool,
) -> Table {
    let mut units: Vec<String> = columns.iter().map(|c| unit_of(c, system, &picked(c))).collect();
    let mut notes = vec![];
    let Kind::Table { row, most, why, .. } = field.kind else { return empty(units) };
    let file = match field.file.and_then(|reader| reader(text, columns, most)).transpose() {
        Ok(file) => file,
        Err(message) => return refused(field, units, text, message),
    };
    let text = file.as_ref().map_or(text, |file| &file.text);
    let mut lines = split(text, columns.len(), &mut notes);
    // A row that ends in a tab is one of the page's own: whatever words it holds, it is no line of headings.
    if !text.lines().next().is_some_and(|line| line.ends_with('\t')) {
        headings(&mut lines, columns, &mut units, &mut notes);
    }
    notes = file.map_or(notes, |file| file.notes);
    let mut table = Table { rows: vec![], text: String::new(), units, echo: String::new(), problems: vec![], notes };
    if lines.len() > most {
        let message = format!("{} may have {most} rows at most: {why}. It has {}.", field.label, lines.len());
        table.problems.push(Problem { field: field.name, cell: None, message, fixes: vec![] });
    }
    let mut struck = 0;
    for (line, cells) in lines.iter().enumerate() {
        if line > 0 {
            table.text.push('\n');
        }
        table.text.push_str(&cells.join("\t"));
        if line == 0 {
            // So that it is taken for no headings, and read by tabs, when it is read again.
            table.text.push('\t');
        }
        let out = cells.first().is_some_and(|c| c.starts_with(STRUCK));
        struck += usize::from(out);
        if !out && cells.iter().any(|c| !c.is_empty()) {
            let row = table.read_row(field, columns, system, row, line, cells);
            table.rows.push(row);
        }
    }
    table.problems.retain(|p| p.cell.and_then(|cell| columns.get(cell.column)).is_none_or(&asks));
    if table.problems.len() > TOLD {
        let more = table.problems.len() - TOLD;
        table.problems.truncate(TOLD);
        let message = format!("{}: {more} more cells need a look.", field.label);
        table.problems.push(Problem { field: field.name, cell: None, message, fixes: vec![] });
    }
    let kept = table.rows.len();
    table.echo = format!("{kept} {row}{}", if kept == 1 { "" } else { "s" });
    if struck > 0 {
        table.echo.push_str(&format!(", {struck} struck"));
    }
    table
}

/// A text that is no table stays as it was entered.
fn refused(field: &'static Field, units: Vec<String>, text: &str, message: String) -> Table {
    let problems = vec![Problem { field: field.name, cell: None, message, fixes: vec![] }];
    Table { text: text.to_owned(), problems, ..empty(units) }
}

fn empty(units: Vec<String>) -> Table {
    Table { rows: vec![], text: String::new(), units, echo: String::new(), problems: vec![], notes: vec![] }
}

impl Table {
    fn read_row(
        &mut self,
        field: &'static Field,
        columns: &'static [Field],
        system: System,
        row: &str,
        line: usize,
        cells: &[String],
    ) -> Row {
        let mut read = Vec::with_capacity(columns.len());
        for (at, column) in columns.iter().enumerate() {
            let typed = cells.get(at).map_or("", String::as_str);
            let text = if typed.is_empty() { column.default } else { typed };
            let unit = self.units.get(at).map_or("", String::as_str);
            let what = match text {
                "" if column.required => Err((missing(column), vec![])),
                "" => Ok(None),
                text => take(column, system, text, if typed.is_empty() { "" } else { unit }).map(|t| Some(t.what)),
            };
            match what {
                Ok(what) => read.push(what),
                Err((message, fixes)) => {
                    read.push(None);
                    let cell = Some(Cell { row: line, column: at });
                    let name = capital(row);
                    // In a cell the unit goes with the number.
                    let fixes = fixes.into_iter().map(|f| Fix {
                        field: field.name,
                        cell,
                        text: format!("{} {}", f.text, f.unit),
                        unit: "",
                        ..f
                    });
                    let message = format!("{name} {}: {}", line + 1, lower(&message));
                    self.problems.push(Problem { field: field.name, cell, message, fixes: fixes.collect() });
                }
            }
        }
        if let Some(extra) = cells.get(columns.len()..).filter(|e| e.iter().any(|c| !c.is_empty())) {
            let message =
                format!("{} {}: it has {} cells more than there are columns.", capital(row), line + 1, extra.len());
            self.problems.push(Problem {
                field: field.name,
                cell: Some(Cell { row: line, column: 0 }),
                message,
                fixes: vec![],
            });
        }
        Row { line, columns, cells: read }
    }
}

fn capital(word: &str) -> String {
    let mut letters = word.chars();
    letters.next().map(|c| c.to_ascii_uppercase()).into_iter().chain(letters).collect()
}

/// The unit of a column: as picked, else the usual one; empty where it has none.
fn unit_of(column: &Field, system: System, picked: &str) -> String {
    match column.kind {
        Kind::Number { quantity, .. } => quantity.unit(picked).unwrap_or(quantity.usual(system)).symbol.to_owned(),
        _ => String::new(),
    }
}

/// Lines of cells, whatever separates them: tabs, else semicolons, else commas, else spaces.
fn split(text: &str, columns: usize, notes: &mut Vec<String>) -> Vec<Vec<String>> {
    let text = text.replace('\r', if text.contains('\n') { "" } else { "\n" });
    // Asked of the whole text: while its first cell is filled, a table has its only tab at the end.
    let tabs = text.contains('\t');
    let text = text.trim_end();
    if text.is_empty() {
        return vec![];
    }
    let first = text.lines().find(|l| !l.trim().is_empty()).unwrap_or("");
    let (separator, name) = match () {
        () if tabs || columns < 2 => ('\t', ""),
        () if text.contains(';') => (';', "semicolons"),
        () if text.contains(',') && first.matches(',').count() < columns => (',', "commas"),
        () if first.trim().contains(' ') && first.split_whitespace().count() <= columns => (' ', "spaces"),
        () => ('\t', ""),
    };
    if !name.is_empty() {
        notes.push(format!("The cells were read as separated by {name}."));
    }
    let mut lines: Vec<Vec<String>> = text.lines().map(|line| cells(line, separator)).collect();
    while lines.last().is_some_and(Vec::is_empty) {
        lines.pop();
    }
    lines
}

/// The cells of a line. One in double quotes may hold the separator, and a quote written twice (RFC 4180).
fn cells(line: &str, separator: char) -> Vec<String> {
    let (mut found, mut cell, mut quoted) = (vec![], String::new(), false);
    let mut letters = line.chars().peekable();
    while let Some(c) = letters.next() {
        match c {
            '"' if quoted && letters.peek() == Some(&'"') => {
                letters.next();
                cell.push('"');
            }
            '"' if quoted => quoted = false,
            '"' if cell.trim().is_empty() && separator != '\t' => {
                cell.clear();
                quoted = true;
            }
            c if c == separator && !quoted => found.push(std::mem::take(&mut cell)),
            c => cell.push(c),
        }
    }
    found.push(cell);
    let mut found: Vec<String> = found.iter().map(|c| c.trim().replace('\t', " ")).collect();
    if separator == ' ' {
        found.retain(|c| !c.is_empty());
    }
    without_empty_end(found)
}

fn without_empty_end(mut cells: Vec<String>) -> Vec<String> {
    while cells.last().is_some_and(String::is_empty) {
        cells.pop();
    }
    cells
}

/// Takes a first line off that names columns, puts the cells in their order and takes their units. A first line of other
/// words stays a row: what is wrong with it is then said at its cells.
fn headings(lines: &mut Vec<Vec<String>>, columns: &[Field], units: &mut [String], notes: &mut Vec<String>) {
    let names = |line: &Vec<String>| line.iter().map(|heading| named(heading, columns)).collect::<Option<Vec<usize>>>();
    let Some((first, order)) = lines.first().filter(|l| l.len() > 1).and_then(|l| Some((l.clone(), names(l)?))) else {
        return;
    };
    lines.remove(0);
    for (heading, at) in first.iter().zip(&order) {
        let unit = heading.rsplit([' ', '(', '[', ',']).next().map(|u| u.trim_end_matches([')', ']']));
        if let (Some(Kind::Number { quantity, .. }), Some(slot)) =
            (columns.get(*at).map(|c| c.kind), units.get_mut(*at))
            && let Some(unit) = unit.and_then(|u| quantity.unit(u))
        {
            *slot = unit.symbol.to_owned();
        }
    }
    for line in lines.iter_mut() {
        let mut placed = vec![String::new(); columns.len()];
        for (cell, at) in line.iter().zip(&order) {
            if let Some(slot) = placed.get_mut(*at) {
                slot.clone_from(cell);
            }
        }
        *line = without_empty_end(placed);
    }
    notes.push("The first line was read as headings.".to_owned());
}

/// The column a heading names: by its own name or label, whatever follows in brackets.
fn named(heading: &str, columns: &[Field]) -> Option<usize> {
    let plain = heading.split(['(', '[', ',']).next().unwrap_or("").trim();
    let fits = |c: &Field| c.name.eq_ignore_ascii_case(plain) || c.label.eq_ignore_ascii_case(plain);
    columns.iter().position(fits)
}
