//! A GPX file (GPS exchange format 1.0 or 1.1, an XML file of tracks, routes and waypoints) as the rows of a table.
//!
//! A scanner of our own for the few marks that hold a point: the parsers that are kept (quick-xml, xmlparser) weigh 7.7
//! and 6.2 kB packed before a row is made of what they find, all of this 3.5. It walks the text once, keeps nothing but
//! the rows, whatever the depth, and knows no entities but XML's own: a file that declares any is refused. Cells are
//! passed on as they are written, so that what is no number is named at its row like anything typed.
//!
//! It does not check that a file is valid GPX. What lies deeper inside a point, where devices put data of their own, is
//! passed over.

use crate::question::field::{Field, Kind};

/// Columns a file can fill, with their units, in the order of the rows.
const COLUMNS: [(&str, &str); 4] =
    [("latitude", "latitude (°)"), ("longitude", "longitude (°)"), ("ground", "ground (m)"), ("name", "name")];
/// Longest cell that is no name: no number has more.
const CELL: usize = 40;

/// Rows, as a table's text with headings, and how they have been understood.
pub struct Rows {
    /// Headings, then a line for each point.
    pub text: String,
    /// What was read, and what a file cannot say.
    pub notes: Vec<String>,
}

/// For [`Field::file`].
pub fn reader(text: &str, columns: &[Field], most: usize) -> Option<Result<Rows, String>> {
    looks_like(text).then(|| read(text, columns, most))
}

/// The text is a file of marks, whatever its encoding has become, and no table.
pub fn looks_like(text: &str) -> bool {
    let mut letters = start(text).chars();
    letters.next() == Some('<')
        && letters.next().is_some_and(|c| c.is_ascii_alphabetic() || matches!(c, '?' | '!' | '\0'))
}

/// Without what a byte order mark may have become.
fn start(text: &str) -> &str {
    text.trim_start_matches(|c: char| c.is_whitespace() || matches!(c, '\u{feff}' | '\u{fffd}'))
}

/// Reads the points of a track, else of a route, else the waypoints, for those `columns` that a file can fill.
pub fn read(text: &str, columns: &[Field], most: usize) -> Result<Rows, String> {
    let column = |name: &str| columns.iter().find(|c| c.name == name);
    if column("latitude").is_none() || column("longitude").is_none() {
        return Err("This is a file of positions (GPX or another XML); these rows have none.".to_owned());
    }
    let filled = COLUMNS.map(|(name, _)| column(name));
    let longest = filled.map(|c| match c.map(|c| c.kind) {
        Some(Kind::Text { most, .. }) => most,
        Some(_) => CELL,
        None => 0,
    });
    let mut file = File { longest, most, ..File::default() };
    if let Err(what) = file.walk(start(text)) {
        let read: usize = file.found.iter().map(|f| f.points).sum();
        return Err(format!(
            "This is no whole GPX file: {what} ({read} points before that). Take the file as it was saved, in UTF-8."
        ));
    }
    let [tracks, routes, waypoints] = &file.found;
    let (kind, found) = match () {
        () if tracks.points > 0 => ("track", tracks),
        () if routes.points > 0 => ("route", routes),
        () => ("single", waypoints),
    };
    let points = found.points;
    if points == 0 {
        return Err("The GPX file holds no points.".to_owned());
    }
    if points > most {
        return Err(format!("The GPX file has {points} {kind} points, and {most} are the most: thin it out."));
    }
    let s = if points == 1 { "" } else { "s" };
    let mut notes = vec![format!("Read as GPX: {points} {kind} point{s}.")];
    if found.parts > 1 {
        notes.push(format!("It is in {} parts, which were joined in their order.", found.parts));
    }
    if file.found.iter().filter(|f| f.points > 0).count() > 1 {
        notes.push("Other points of the file were left out.".to_owned());
    }
    if column("ground").is_some() && found.heights {
        notes.push(
            "GPX does not say whether its heights are above the ellipsoid or above sea level, up to 100 m apart: find out."
                .to_owned(),
        );
    }
    let headings: Vec<&str> = COLUMNS.iter().zip(filled).filter(|(_, c)| c.is_some()).map(|(c, _)| c.1).collect();
    Ok(Rows { text: headings.join("\t") + &found.rows, notes })
}

/// The points of one kind.
#[derive(Default)]
struct Found {
    /// Each after a new line, at most as many as are asked for.
    rows: String,
    points: usize,
    /// Tracks and segments, or routes, that have points.
    parts: usize,
    heights: bool,
}

/// A file as far as it has been walked.
#[derive(Default)]
struct File<'a> {
    /// Track, route, waypoint.
    found: [Found; 3],
    longest: [usize; 4],
    most: usize,
    depth: usize,
    /// Names of the open marks at depth 2 and 3.
    outer: [&'a str; 2],
    /// A part has begun that has no points yet.
    fresh: bool,
    point: Option<Point<'a>>,
}

/// A point that is being read.
struct Point<'a> {
    kind: usize,
    mark: &'a str,
    depth: usize,
    cells: [String; 4],
    /// Which cell the text goes to.
    cell: Option<usize>,
}

type Wrong = &'static str;
const BROKEN: Wrong = "a mark is broken or has no end";
const CROSSED: Wrong = "marks close that are not open";

impl<'a> File<'a> {
    fn walk(&mut self, text: &'a str) -> Result<(), Wrong> {
        let mut rest = text;
        while !rest.is_empty() {
            rest = if let Some(after) = rest.strip_prefix("<!--") {
                until(after, "-->")?.1
            } else if let Some(after) = rest.strip_prefix("<?") {
                until(after, "?>")?.1
            } else if let Some(after) = rest.strip_prefix("<![CDATA[") {
                let (plain, after) = until(after, "]]>")?;
                self.text(plain, false);
                after
            } else if rest.starts_with("<!") {
                return Err("it declares entities of its own, which GPX does not need");
            } else if let Some(after) = rest.strip_prefix("</") {
                let (name, after) = until(after, ">")?;
                self.close(local(name.trim_end()))?;
                after
            } else if let Some(after) = rest.strip_prefix('<') {
                let (mark, after) = after.split_at(end(after).ok_or(BROKEN)?);
                let (mark, alone) = mark.strip_suffix('/').map_or((mark, false), |mark| (mark, true));
                let name = mark.split(|c: char| c.is_whitespace()).next().unwrap_or("");
                self.open(local(name), mark.get(name.len()..).unwrap_or(""))?;
                if alone {
                    self.close(local(name))?;
                }
                after.get(1..).unwrap_or("")
            } else {
                let (text, after) = rest.split_at(rest.find('<').unwrap_or(rest.len()));
                self.text(text, true);
                after
            };
        }
        if self.depth > 0 { Err("its end is missing") } else { Ok(()) }
    }

    fn open(&mut self, name: &'a str, attributes: &'a str) -> Result<(), Wrong> {
        self.depth += 1;
        if let Some(point) = &mut self.point {
            point.cell = match name {
                "ele" if self.depth == point.depth + 1 => Some(2),
                "name" if self.depth == point.depth + 1 => Some(3),
                _ => None,
            };
            return Ok(());
        }
        let kind = match (self.depth, name, self.outer) {
            (1, "gpx", _) => return Ok(()),
            (1, ..) => return Err("its outermost mark is not gpx"),
            (2, "wpt", _) => 2,
            (3, "rtept", ["rte", _]) => 1,
            (4, "trkpt", ["trk", "trkseg"]) => 0,
            (depth, ..) => {
                if let Some(slot) = depth.checked_sub(2).and_then(|at| self.outer.get_mut(at)) {
                    *slot = name;
                    self.fresh |= matches!(name, "trkseg" | "rte");
                }
                return Ok(());
            }
        };
        let cell =
            |name, at: usize| cell(attribute(attributes, name), true, self.longest.get(at).copied().unwrap_or(0));
        let cells = [cell("lat", 0), cell("lon", 1), String::new(), String::new()];
        self.point = Some(Point { kind, mark: name, depth: self.depth, cells, cell: None });
        Ok(())
    }

    fn close(&mut self, name: &str) -> Result<(), Wrong> {
        if let Some(point) = self.point.as_mut() {
            point.cell = None;
            if self.depth == point.depth {
                if name != point.mark {
                    return Err(CROSSED);
                }
                if let Some(point) = self.point.take() {
                    self.keep(point);
                }
            }
        }
        self.depth = self.depth.checked_sub(1).ok_or(CROSSED)?;
        Ok(())
    }

    fn text(&mut self, text: &str, coded: bool) {
        let Some(point) = &mut self.point else { return };
        if let Some(at) = point.cell
            && let (Some(slot), Some(most)) = (point.cells.get_mut(at), self.longest.get(at))
            && slot.len() < *most
        {
            slot.push_str(&cell(text, coded, most - slot.len()));
        }
    }

    fn keep(&mut self, point: Point) {
        let Some(found) = self.found.get_mut(point.kind) else { return };
        found.points += 1;
        found.parts += usize::from(std::mem::take(&mut self.fresh) && point.kind < 2);
        found.heights |= point.cells.get(2).is_some_and(|c| !c.is_empty());
        if found.points > self.most {
            return;
        }
        for (at, (cell, _)) in point.cells.iter().zip(self.longest).filter(|(_, most)| *most > 0).enumerate() {
            found.rows.push(if at == 0 { '\n' } else { '\t' });
            found.rows.push_str(cell);
        }
    }
}

/// What stands before `mark`, and after it.
fn until<'a>(text: &'a str, mark: &str) -> Result<(&'a str, &'a str), Wrong> {
    text.split_once(mark).ok_or(BROKEN)
}

/// A name without its prefix.
fn local(name: &str) -> &str {
    name.rsplit(':').next().unwrap_or(name)
}

/// Where the mark ends; in quotes its sign is text.
fn end(mark: &str) -> Option<usize> {
    let mut quote = None;
    for (at, byte) in mark.bytes().enumerate() {
        match (quote, byte) {
            (Some(open), _) if open == byte => quote = None,
            (Some(_), _) => {}
            (None, b'"' | b'\'') => quote = Some(byte),
            (None, b'>') => return Some(at),
            (None, b'<') => return None,
            _ => {}
        }
    }
    None
}

/// The value of an attribute; empty where there is none.
fn attribute<'a>(attributes: &'a str, wanted: &str) -> &'a str {
    let mut rest = attributes;
    while let Some((name, after)) = rest.split_once('=') {
        let after = after.trim_start();
        let Some(quote) = after.chars().next().filter(|c| matches!(c, '"' | '\'')) else { return "" };
        let Some((value, after)) = after.get(1..).and_then(|text| text.split_once(quote)) else { return "" };
        if name.trim() == wanted {
            return value;
        }
        rest = after;
    }
    ""
}

/// A text as a cell: in one line, without the marks of a struck row or of a cell's end, `most` characters at most.
fn cell(text: &str, coded: bool, most: usize) -> String {
    let mut found = String::new();
    let mut rest = text.trim();
    // Each round takes one character, so that a megabyte in a name costs no more than what is kept of it.
    for _ in 0..most {
        let Some(letter) = rest.chars().next() else { break };
        let (letter, length) = if coded && letter == '&' { entity(rest) } else { (letter, letter.len_utf8()) };
        let struck = found.is_empty() && letter == super::table::STRUCK;
        found.push(if struck || letter.is_control() { ' ' } else { letter });
        rest = rest.get(length..).unwrap_or("");
    }
    found.trim().to_owned()
}

/// The character that `&…;` stands for and how long that is; the sign itself where it stands for none.
fn entity(text: &str) -> (char, usize) {
    let none = ('&', 1);
    let Some((name, _)) = text.get(1..).and_then(|t| t.get(..t.len().min(10)).unwrap_or("").split_once(';')) else {
        return none;
    };
    let number = |digits: &str, base| u32::from_str_radix(digits, base).ok().and_then(char::from_u32);
    let letter = match name {
        "amp" => Some('&'),
        "lt" => Some('<'),
        "gt" => Some('>'),
        "quot" => Some('"'),
        "apos" => Some('\''),
        name => match name.strip_prefix("#x") {
            Some(digits) => number(digits, 16),
            None => name.strip_prefix('#').and_then(|digits| number(digits, 10)),
        },
    };
    letter.map_or(none, |letter| (letter, name.len() + 2))
}
