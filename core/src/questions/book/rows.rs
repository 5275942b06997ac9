//! From the rows of a book to a run of levels, and back to the rows.

use super::columns::{BACK, BACK_DISTANCE, DISTANCE, FORE, INTER, INVERTED, LOWER, MARK, POINT, TOLERANCE, UPPER};
use crate::levelling::wires::Wires;
use crate::levelling::{Run, Setup, Sight};
use crate::question::answer::{Cell, Problem};
use crate::question::asked::Row;
use crate::question::field::Field;

/// Problems that are told one by one.
const TOLD: usize = 20;

/// Where a sight was read.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Spot {
    /// Which of the rows that count, from 0.
    pub row: usize,
    /// The wires, where all three were read.
    pub wires: Option<Wires>,
}

/// Where the sights of a setup were read.
#[derive(Debug, Clone, PartialEq)]
pub struct Places {
    pub back: Spot,
    pub inters: Vec<Spot>,
    pub fore: Option<Spot>,
}

/// A book: the run, the rows it came from, and what is wrong with them.
pub struct Book<'a> {
    pub rows: &'a [Row],
    pub run: Run,
    /// Beside the run's setups.
    pub places: Vec<Places>,
    /// Rows without any reading.
    pub blank: Vec<usize>,
    pub problems: Vec<Problem>,
}

impl<'a> Book<'a> {
    /// Reads the rows of `field`. `stadia` is the constant that makes distances of outer wires.
    pub fn read(rows: &'a [Row], field: &Field, start: f64, stadia: f64) -> Book<'a> {
        let run = Run { start, close: None, setups: vec![] };
        let mut book = Book { rows, run, places: vec![], blank: vec![], problems: vec![] };
        for (at, row) in rows.iter().enumerate() {
            book.take(at, row, field, stadia);
        }
        book.problems.truncate(TOLD);
        book
    }
    fn take(&mut self, at: usize, row: &Row, field: &Field, stadia: f64) {
        let [back, inter, fore] = [BACK, INTER, FORE].map(|column| row.number(&column));
        let mut wrong = |column: &Field, what: &str| {
            let cell = Some(Cell { row: row.line, column: row.column(column) });
            let message = format!("Row {}: {what}", row.line + 1);
            self.problems.push(Problem { field: field.name, cell, message, fixes: vec![] });
        };
        let both = back.is_some() && fore.is_some();
        if inter.is_some() && (back.is_some() || fore.is_some()) {
            wrong(&INTER, "an intermediate sight needs a row of its own.");
        }
        if both && (row.number(&UPPER).is_some() || row.number(&LOWER).is_some()) {
            wrong(&UPPER, "whose wires are these? Book fore and back sight in two rows.");
        }
        let standing = self.run.setups.last().is_some_and(|setup| setup.fore.is_none());
        if inter.is_some() && !standing && back.is_none() && fore.is_none() {
            wrong(&INTER, "an intermediate sight, but no back sight before it.");
        }
        if fore.is_some() && !standing {
            wrong(&FORE, "a fore sight, but no back sight before it.");
        }
        if back.is_some() && standing && fore.is_none() {
            wrong(&BACK, "a second back sight, but no fore sight has ended the setup before.");
        }
        if back.is_none() && inter.is_none() && fore.is_none() {
            self.blank.push(at);
        }
        if let (Some(setup), Some(places)) = (self.run.setups.last_mut(), self.places.last_mut())
            && setup.fore.is_none()
        {
            if let Some(reading) = inter {
                let (sight, spot) = sight(at, row, reading, row.number(&DISTANCE), stadia);
                setup.inters.push(sight);
                places.inters.push(spot);
            }
            if let Some(reading) = fore {
                let (sight, spot) = sight(at, row, reading, row.number(&DISTANCE), stadia);
                setup.fore = Some(sight);
                places.fore = Some(spot);
            }
        }
        if let Some(reading) = back {
            let distance = row.number(&BACK_DISTANCE).or(row.number(&DISTANCE).filter(|_| !both));
            let (back, spot) = sight(at, row, reading, distance, stadia);
            self.run.setups.push(Setup { back, inters: vec![], fore: None });
            self.places.push(Places { back: spot, inters: vec![], fore: None });
        }
    }
    /// Number of a row as the page counts them, from 1.
    pub fn number(&self, spot: Spot) -> usize {
        self.rows.get(spot.row).map_or(0, |row| row.line + 1)
    }
    /// Name of a point, else the number of its row.
    pub fn name(&self, spot: Spot) -> String {
        match self.rows.get(spot.row).map_or("", |row| row.text(&POINT)) {
            "" => format!("row {}", self.number(spot)),
            name => name.to_owned(),
        }
    }
    /// Known level of the point of a row.
    pub fn mark(&self, spot: Spot) -> Option<f64> {
        self.rows.get(spot.row)?.number(&MARK)
    }
    /// Tolerance of the point of a row.
    pub fn tolerance(&self, spot: Spot) -> Option<f64> {
        self.rows.get(spot.row)?.number(&TOLERANCE)
    }
    /// Setups that have their fore sight.
    pub fn done(&self) -> usize {
        self.run.setups.iter().filter(|setup| setup.fore.is_some()).count()
    }
    /// The setup that lacks its fore sight.
    pub fn standing(&self) -> Option<(&Setup, &Places)> {
        self.run.setups.last().zip(self.places.last()).filter(|(setup, _)| setup.fore.is_none())
    }
    /// Every sight with its place and the column it was read in, in the order observed.
    pub fn sights(&self) -> impl Iterator<Item = (Sight, Spot, &'static Field)> {
        self.run.setups.iter().zip(&self.places).flat_map(|(setup, places)| {
            let inters = setup.inters.iter().zip(&places.inters).map(|(sight, spot)| (*sight, *spot, &INTER));
            let fore = setup.fore.zip(places.fore).map(|(sight, spot)| (sight, spot, &FORE));
            std::iter::once((setup.back, places.back, &BACK)).chain(inters).chain(fore)
        })
    }
}

/// One sight: the mean of three wires where there are three, negative where the staff was held head down.
fn sight(at: usize, row: &Row, reading: f64, distance: Option<f64>, stadia: f64) -> (Sight, Spot) {
    let sign = if row.choice(&INVERTED) == "yes" { -1.0 } else { 1.0 };
    let middle = sign * reading;
    let [upper, lower] = [UPPER, LOWER].map(|column| row.number(&column).map(|wire| sign * wire));
    let wires = upper.zip(lower).map(|(upper, lower)| Wires { upper, middle, lower });
    // One outer wire alone gives half the interval.
    let half = upper.or(lower).map(|wire| 2.0 * (wire - middle).abs() * stadia);
    let by_wires = wires.map(|w| w.distance(stadia)).or(half).filter(|d| *d > 0.0);
    let reading = wires.map_or(middle, |w| w.mean());
    (Sight { reading, distance: distance.or(by_wires) }, Spot { row: at, wires })
}
