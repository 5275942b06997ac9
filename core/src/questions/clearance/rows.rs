//! Where each point stands along the line; what does not fit is named at its row.

use super::position::{ASIDE, Course, EASTING, LATITUDE, LONGITUDE, NORTHING, POSITIONS};
use super::{AT, PROFILE};
use crate::order::sort;
use crate::place::Foot;
use crate::quantity::Metres;
use crate::quantity::show::Round;
use crate::question::answer::{AtCell, AtRow, Booked, Cell, Fix, Problem};
use crate::question::asked::Row;
use crate::question::field::Field;
use crate::question::{Answer, Asked};

/// Rows that are told one by one; more are counted.
const TOLD: usize = 8;

/// Rows at which something is said; beyond, the notes alone tell.
const AT_ROWS: usize = 200;

/// What is said at single rows.
#[derive(Default)]
struct Said(Vec<(usize, AtCell)>);

impl Said {
    /// `rows` as the page counts them.
    fn at(&mut self, rows: &[usize], text: &str) {
        let room = AT_ROWS.saturating_sub(self.0.len());
        let cell = || AtCell { column: 0, text: text.to_owned() };
        self.0.extend(rows.iter().take(room).map(|row| (row - 1, cell())));
    }
    fn into(mut self) -> Booked {
        sort(&mut self.0, |said| [said.0 as f64, 0.0]);
        let mut rows: Vec<AtRow> = vec![];
        for (row, cell) in self.0 {
            match rows.last_mut().filter(|last| last.row == row) {
                Some(last) => last.cautions.push(cell),
                None => rows.push(AtRow { row, cautions: vec![cell], ..AtRow::default() }),
            }
        }
        Booked { field: PROFILE.name, rows, ..Booked::default() }
    }
}

/// A point and its distance from A.
pub struct Spot<'a> {
    pub row: &'a Row,
    pub at: f64,
}

impl Spot<'_> {
    /// As the page counts rows.
    fn number(&self) -> usize {
        self.row.line + 1
    }
}

/// The points between A and B, in the order of the rows. `None` where a row has no place: the answer then says so.
pub fn spots<'a>(asked: &'a Asked, course: &Course, answer: &mut Answer) -> Option<Vec<Spot<'a>>> {
    let most = Metres(asked.must(&ASIDE));
    let (mut spots, mut lost, mut turned, mut aside) = (vec![], vec![], vec![], vec![]);
    for row in asked.rows(&PROFILE) {
        match row.number(&AT).map(|at| Foot { along: Metres(at), offset: Metres(0.0) }).or_else(|| course.foot(row)) {
            None => lost.push(row),
            Some(foot) if foot.strays(Metres(course.s), most) && course.exchanged(row, most) => turned.push(row),
            Some(foot) if foot.offset.0.abs() > most.0 => aside.push((row.line + 1, foot.offset.0)),
            Some(foot) => spots.push(Spot { row, at: foot.along.0 }),
        }
    }
    let mut lacks: Vec<Problem> = lost.iter().take(TOLD).map(|row| lacking(asked, row)).collect();
    // Where positions of A and B are what is lacking, one row that says so is enough.
    if lacks.iter().all(|problem| !problem.fixes.is_empty()) {
        lacks.truncate(1);
    }
    answer.problems.extend(lacks);
    answer.problems.extend(turned.first().map(|first| exchange(asked, first, &turned)));
    if let Some(first) = answer.problems.first() {
        answer.not_known(first.message.clone());
        return None;
    }
    let mut said = Said::default();
    say_aside(asked, &aside, &mut said, answer);
    say_order(&spots, &mut said, answer);
    spots = say_outside(spots, course.s, &mut said, answer);
    say_gaps(asked, &spots, course.s, &mut said, answer);
    answer.booked.push(said.into());
    Some(spots)
}

/// A row without a distance, and without a position that could stand for it.
fn lacking(asked: &Asked, row: &Row) -> Problem {
    let has = |column: &Field| row.number(column).is_some();
    let by = asked.choice(&POSITIONS);
    let own = |value: &str, pair: [&Field; 2]| if by == value { pair.map(has) } else { [false; 2] };
    let (column, what, fix) = match (own("latlon", [&LATITUDE, &LONGITUDE]), own("grid", [&EASTING, &NORTHING])) {
        ([true, _], _) => (&LONGITUDE, "enter the longitude too", None),
        ([_, true], _) => (&LATITUDE, "enter the latitude too", None),
        (_, [true, _]) => (&NORTHING, "enter the northing too", None),
        (_, [_, true]) => (&EASTING, "enter the easting too", None),
        _ if has(&LATITUDE) => (&AT, "it has a latitude and longitude: enter those of A and B too", Some("latlon")),
        _ if has(&EASTING) => (&AT, "it has an easting and northing: enter those of A and B too", Some("grid")),
        _ if by == "given" => (&AT, "enter the distance from A", None),
        _ => (&AT, "enter the distance from A, or its position", None),
    };
    let cell = Some(Cell { row: row.line, column: row.column(column) });
    let fixes = fix.map(|value| Fix {
        label: "Enter positions of A and B".to_owned(),
        field: POSITIONS.name,
        cell: None,
        text: value.to_owned(),
        unit: "",
    });
    let message = format!("Point {}: {what}.", row.line + 1);
    Problem { field: PROFILE.name, cell, message, fixes: fixes.into_iter().collect() }
}

/// Latitude and longitude have changed places in these rows: asked back, and one key turns them all.
fn exchange(asked: &Asked, first: &Row, turned: &[&Row]) -> Problem {
    let (latitude, longitude) = (first.column(&LATITUDE), first.column(&LONGITUDE));
    let lines: Vec<usize> = turned.iter().map(|row| row.line).collect();
    let line = |(at, line): (usize, &str)| {
        let mut cells: Vec<&str> = line.split('\t').collect();
        if lines.binary_search(&at).is_ok() && cells.len() > longitude.max(latitude) {
            cells.swap(latitude, longitude);
        }
        cells.join("\t")
    };
    let text: Vec<String> = asked.text(&PROFILE).split('\n').enumerate().map(line).collect();
    let message = format!(
        "Point {}: latitude and longitude have changed places? The other way round it lies on the line. So in {}.",
        first.line + 1,
        named(&lines.iter().map(|line| line + 1).collect::<Vec<_>>())
    );
    let label = "Exchange them".to_owned();
    let fix = Fix { label, field: PROFILE.name, cell: None, text: text.join("\n"), unit: "" };
    let cell = Some(Cell { row: first.line, column: latitude });
    Problem { field: PROFILE.name, cell, message, fixes: vec![fix] }
}

fn say_aside(asked: &Asked, aside: &[(usize, f64)], said: &mut Said, answer: &mut Answer) {
    let Some(farthest) = aside.iter().copied().reduce(|a, b| if b.1.abs() > a.1.abs() { b } else { a }) else { return };
    let distance = |si: f64| asked.show().distance(si, Round::Near);
    for (row, off) in aside {
        said.at(&[*row], &format!("{} off the line: left out.", distance(off.abs())));
    }
    answer.caution(format!(
        "More than {} off the line, and left out: {}. Point {} lies {} to the {}.",
        distance(asked.must(&ASIDE)),
        named(&aside.iter().map(|row| row.0).collect::<Vec<_>>()),
        farthest.0,
        distance(farthest.1.abs()),
        if farthest.1 > 0.0 { "right" } else { "left" },
    ));
}

fn say_order(spots: &[Spot], said: &mut Said, answer: &mut Answer) {
    let pairs = spots.iter().zip(spots.iter().skip(1));
    let back: Vec<usize> = pairs.filter(|(one, next)| next.at < one.at).map(|(_, next)| next.number()).collect();
    if !back.is_empty() {
        said.at(&back, "Nearer to A than the row before: put in order.");
        answer.note(format!("Nearer to A than the row before: {}. The points were put in order.", named(&back)));
    }
}

/// Those between the stations.
fn say_outside<'a>(spots: Vec<Spot<'a>>, s: f64, said: &mut Said, answer: &mut Answer) -> Vec<Spot<'a>> {
    let (inside, outside): (Vec<_>, Vec<_>) = spots.into_iter().partition(|spot| spot.at > 0.0 && spot.at < s);
    if !outside.is_empty() {
        let rows: Vec<usize> = outside.iter().map(Spot::number).collect();
        said.at(&rows, "Not between A and B: left out.");
        answer.caution(format!("Not between A and B, and left out: {}.", named(&rows)));
    }
    inside
}

/// Points at one distance, and ends of the line of which nothing is known.
fn say_gaps(asked: &Asked, spots: &[Spot], s: f64, said: &mut Said, answer: &mut Answer) {
    let mut rows: Vec<(f64, usize)> = spots.iter().map(|spot| (spot.at, spot.number())).collect();
    sort(&mut rows, |row| [row.0, row.1 as f64]);
    let pairs = rows.iter().zip(rows.iter().skip(1));
    let same: Vec<usize> = pairs.filter(|(one, other)| one.0 == other.0).map(|(_, other)| other.1).collect();
    if !same.is_empty() {
        said.at(&same, "At the distance of another point: the higher counts.");
        answer.caution(format!("At the same distance as another point: {}. The higher counts.", named(&same)));
    }
    if let [first, ..] = rows[..]
        && let [.., last] = rows[..]
        && (first.0 > 0.25 * s || last.0 < 0.75 * s)
    {
        let distance = |si: f64| asked.show().distance(si, Round::Near);
        answer.caution(format!(
            "The points run from {} (point {}) to {} (point {}) only: nothing is known of the rest of the line.",
            distance(first.0),
            first.1,
            distance(last.0),
            last.1
        ));
    }
}

/// "points 3, 7 and 12 more".
fn named(rows: &[usize]) -> String {
    let mut text = if rows.len() == 1 { "point " } else { "points " }.to_owned();
    for (i, row) in rows.iter().take(TOLD).enumerate() {
        if i > 0 {
            text.push_str(", ");
        }
        text.push_str(&row.to_string());
    }
    if rows.len() > TOLD {
        text.push_str(&format!(" and {} more", rows.len() - TOLD));
    }
    text
}
