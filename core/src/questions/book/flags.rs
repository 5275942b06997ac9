//! What to look at again, at its row, while it can still be mended; and where the book goes on.

use super::case::{Limits, book, budget, exact};
use super::columns::{BACK, BACK_DISTANCE, BOOK, DISTANCE, FORE, INTER, POINT, REMARK, TIME, UPPER};
use super::rows::{Book, Places, Spot};
use super::running::running;
use crate::levelling::{Setup, Sight};
use crate::order::{hash, sort};
use crate::quantity::show::{Round, Show};
use crate::quantity::unit::Quantity;
use crate::question::answer::{AtCell, AtRow, Booked, Named};
use crate::question::field::Field;
use crate::question::{Asked, names};

/// Minutes within a setup after which it is asked whether the level has moved (a rule of this project).
pub const PAUSE: u32 = 10;
const DAY: i64 = 24 * 60;

/// How far a paced distance and that of the wires may lie apart: metres, and a share (our rule, no source).
const PACED: (f64, f64) = (2.0, 0.1);

/// What is to be said at a row: at a column, or over it as the heading of a setup.
struct Said {
    row: usize,
    column: Option<usize>,
    text: String,
}

/// Where the book goes on, the heading of each setup, and what may be wrong at its rows.
pub fn booked(asked: &Asked) -> Booked {
    let book = book(asked);
    let mut flags = Flags { book: &book, limits: Limits::of(asked), show: asked.show(), said: vec![] };
    flags.heads(asked);
    flags.readings();
    for (setup, places) in book.run.setups.iter().zip(&book.places) {
        flags.setup(setup, places);
    }
    flags.change_points();
    flags.slope();
    flags.names();
    flags.blanks();
    let mut said = flags.said;
    sort(&mut said, |s| [s.row as f64, s.column.map_or(-1.0, |c| c as f64)]);
    let mut rows: Vec<AtRow> = vec![];
    for Said { row, column, text } in said {
        if rows.last().is_none_or(|r| r.row != row) {
            rows.push(AtRow { row, ..AtRow::default() });
        }
        let Some(here) = rows.last_mut() else { continue };
        match column {
            Some(column) => here.cautions.push(AtCell { column, text }),
            None => here.head = text,
        }
    }
    let (begin, names) = next(&book);
    Booked { field: BOOK.name, begin, names, rows }
}

struct Flags<'a> {
    book: &'a Book<'a>,
    limits: Limits,
    show: Show,
    said: Vec<Said>,
}

impl Flags<'_> {
    fn say(&mut self, spot: Spot, column: &Field, text: String) {
        if let Some(row) = self.book.rows.get(spot.row) {
            self.said.push(Said { row: row.line, column: Some(row.column(column)), text });
        }
    }
    /// The balance with which each setup begins.
    fn heads(&mut self, asked: &Asked) {
        let going = running(self.book, &budget(asked));
        let before = std::iter::once(None).chain(going.steps.iter().map(Some));
        for (i, (places, before)) in self.book.places.iter().zip(before).enumerate() {
            let mut text = format!("Setup {}", i + 1);
            if let Some(step) = before.filter(|step| step.next.setups > 0 || step.next.missing == 0) {
                let (run, worth) = (step.next.run, step.next.worth(&going.budget).total().bias);
                let sign = |si: f64| if si > 0.0 { "+" } else { "" };
                text.push_str(" · balance ");
                text.push_str(sign(run));
                text.push_str(&self.show.distance(run, Round::Near).to_string());
                text.push_str(", ");
                text.push_str(sign(worth));
                text.push_str(&self.show.own(worth).to_string());
            }
            if let Some(row) = self.book.rows.get(places.back.row) {
                self.said.push(Said { row: row.line, column: None, text });
            }
        }
    }
    /// Each reading by itself, and against the one before.
    fn readings(&mut self) {
        let (mut before, mut drawn) = (None, false);
        for (sight, spot, column) in self.book.sights() {
            // Once in a setup: from then on the staff is known to be drawn out.
            drawn &= column.name != BACK.name;
            self.reading(sight.reading, spot, column, &mut drawn);
            if let Some(last) = before {
                self.against(last, sight.reading, spot, column);
            }
            before = Some(sight.reading);
            self.wires(sight, spot, column);
            self.distance(sight, spot, column);
        }
    }
    fn reading(&mut self, reading: f64, spot: Spot, column: &Field, drawn: &mut bool) {
        let Limits { lowest, staff, section, .. } = self.limits;
        let metre = |si: f64| self.show.height_words(si);
        let text = if reading >= 0.0 && reading < lowest {
            format!("Near the foot of the staff, below {}: the air is worst there.", metre(lowest))
        } else if let Some(length) = staff.filter(|length| reading.abs() > *length) {
            format!("Over the top of the staff of {}.", metre(length))
        } else if let Some(joint) = section.filter(|joint| reading.abs() > *joint && !*drawn) {
            *drawn = true;
            format!("Over the first section, {}: is the staff fully drawn out?", metre(joint))
        } else {
            return;
        };
        self.say(spot, column, text);
    }
    fn against(&mut self, last: f64, reading: f64, spot: Spot, column: &Field) {
        // Whole millimetres, or hundredths of a foot.
        let unit = Quantity::Height.usual(self.show.0);
        let fine = if unit.symbol == "m" { 1000.0 } else { 100.0 };
        let digits = |si: f64| (unit.from_si(si).unwrap_or(0.0).abs() * fine).round() as u64;
        if last == reading {
            self.say(spot, column, "The same reading as the one before: was it read again?".to_owned());
        } else if swapped(digits(last), digits(reading)) {
            self.say(spot, column, "Like the reading before with two digits swapped: read it again.".to_owned());
        }
    }
    fn wires(&mut self, sight: Sight, spot: Spot, column: &Field) {
        let Some(wires) = spot.wires else { return };
        let unequal = wires.unequal();
        if !wires.in_order() {
            self.say(spot, &UPPER, "The middle wire does not lie between the outer ones.".to_owned());
        } else if exact(unequal - self.limits.wires) > 0.0 {
            let by = self.show.entered(unequal);
            self.say(spot, &UPPER, format!("The half intervals differ by {by}: read the wires again."));
        } else {
            let by_wires = wires.distance(self.limits.stadia);
            if sight.distance.is_some_and(|d| (d - by_wires).abs() > PACED.0 + PACED.1 * by_wires) {
                let by = self.show.distance(by_wires, Round::Near);
                self.say(spot, self.distance_column(spot, column), format!("By the wires it is {by}: pace it again."));
            }
        }
    }
    fn distance(&mut self, sight: Sight, spot: Spot, column: &Field) {
        if sight.distance.is_some_and(|d| d > self.limits.sight) {
            let most = self.show.distance(self.limits.sight, Round::Near);
            self.say(spot, self.distance_column(spot, column), format!("Longer than {most}."));
        }
    }
    /// Where the distance of that reading stands.
    fn distance_column(&self, spot: Spot, column: &Field) -> &'static Field {
        let row = self.book.rows.get(spot.row);
        let both = row.is_some_and(|r| r.number(&BACK).is_some() && r.number(&FORE).is_some());
        if both && column.name == BACK.name { &BACK_DISTANCE } else { &DISTANCE }
    }
    /// The two sights of a setup, and how long it stood.
    fn setup(&mut self, setup: &Setup, places: &Places) {
        if let (Some(fore), Some(spot)) = (setup.fore, places.fore)
            && let Some((b, f)) = setup.back.distance.zip(fore.distance)
            && exact((b - f).abs() - self.limits.imbalance) > 0.0
        {
            let by = self.show.distance((b - f).abs(), Round::Near);
            let longer = if b > f { "back" } else { "fore" };
            self.say(spot, &DISTANCE, format!("Unequal sights: the {longer} sight is {by} longer."));
        }
        self.one_distance(setup, places);
        let minute = |spot: Spot| -> Option<i64> { minutes(self.book.rows.get(spot.row)?.text(&TIME)) };
        let spots = [places.back].into_iter().chain(places.inters.iter().copied()).chain(places.fore);
        let mut before: Option<i64> = None;
        for spot in spots {
            let now = minute(spot);
            if let Some((before, now)) = before.zip(now) {
                let gap = (now - before).rem_euclid(DAY);
                if gap > i64::from(PAUSE) {
                    let text =
                        format!("{gap} minutes after the row before: has the level moved? Read the back sight again.");
                    self.say(spot, &TIME, text);
                }
            }
            before = now.or(before);
        }
    }
    /// Only one of the two sights has a distance.
    fn one_distance(&mut self, setup: &Setup, places: &Places) {
        let (Some(fore), Some(spot)) = (setup.fore, places.fore) else { return };
        let side = match (setup.back.distance, fore.distance) {
            (None, Some(_)) => "back",
            (Some(_), None) => "fore",
            _ => return,
        };
        self.say(spot, &DISTANCE, format!("The {side} sight of this setup has no distance: it counts as balanced."));
    }
    /// A back sight goes to the point of the fore sight before it.
    fn change_points(&mut self) {
        for (one, next) in self.book.places.iter().zip(self.book.places.iter().skip(1)) {
            let Some(fore) = one.fore else { continue };
            let name = |spot: Spot| self.book.rows.get(spot.row).map_or("", |row| row.text(&POINT));
            let (left, found) = (name(fore), name(next.back));
            if !left.is_empty() && !found.is_empty() && !left.eq_ignore_ascii_case(found) {
                let text = format!("The fore sight before went to {left}. This back sight is carried on from there.");
                self.say(next.back, &POINT, text);
            }
        }
    }
    /// The last setup, on the slope entered.
    fn slope(&mut self) {
        let Some(([up, down], slope)) = self.limits.slope else { return };
        let Some((setup, places)) = self.book.run.setups.last().zip(self.book.places.last()) else { return };
        let (ahead, behind) = if slope > 0.0 { (up, down) } else { (down, up) };
        let fore = setup.fore.zip(places.fore).map(|(sight, spot)| (sight, spot, ahead));
        for (sight, spot, most) in [Some((setup.back, places.back, behind)), fore].into_iter().flatten() {
            if sight.distance.is_some_and(|d| exact(d - most) > 0.0) {
                let most = self.show.distance(most, Round::Down);
                self.say(spot, &DISTANCE, format!("On this slope a sight that way reaches {most} at most."));
            }
        }
    }
    /// Points that are booked in two places.
    fn names(&mut self) {
        let mut named: Vec<(f64, usize)> = vec![];
        for (at, row) in self.book.rows.iter().enumerate() {
            let name = row.text(&POINT);
            if !name.is_empty() {
                named.push((hash(name), at));
            }
        }
        sort(&mut named, |n| [n.0, n.1 as f64]);
        let line = |at: usize| self.book.rows.get(at);
        let mut twice = vec![];
        for (one, next) in named.iter().zip(named.iter().skip(1)) {
            // Rows of one point that follow each other are one point, and a run may return to its first mark.
            let returns = one.1 == 0 && next.1 + 1 == self.book.rows.len();
            if one.0 == next.0
                && !returns
                && next.1 > one.1 + 1
                && let Some((first, second)) = line(one.1).zip(line(next.1))
                && first.text(&POINT).eq_ignore_ascii_case(second.text(&POINT))
            {
                let text = format!("So is row {} named: the same point again?", first.line + 1);
                twice.push((next.1, text));
            }
        }
        for (row, text) in twice {
            self.say(Spot { row, wires: None }, &POINT, text);
        }
    }
    fn blanks(&mut self) {
        for row in &self.book.blank {
            // The last row is being begun.
            let remark = self.book.rows.get(*row).is_some_and(|r| !r.text(&REMARK).is_empty());
            if row + 1 < self.book.rows.len() && !remark {
                self.say(Spot { row: *row, wires: None }, &BACK, "No reading in this row.".to_owned());
            }
        }
    }
}

/// Two neighbouring digits changed places, and nothing else.
fn swapped(mut one: u64, mut other: u64) -> bool {
    while one != other && one % 10 == other % 10 {
        (one, other) = (one / 10, other / 10);
    }
    one != other && one % 10 == other / 10 % 10 && other % 10 == one / 10 % 10 && one / 100 == other / 100
}

/// Minutes of the day in `14:05`, whatever stands before it.
fn minutes(text: &str) -> Option<i64> {
    let (before, after) = text.split_once(':')?;
    let number = |text: &str| text.parse::<i64>().ok();
    let hours = number(before.get(before.len().saturating_sub(2)..)?.trim())?;
    let minutes = number(after.get(..2)?)?;
    ((0..24).contains(&hours) && (0..60).contains(&minutes)).then_some(hours * 60 + minutes)
}

/// The column the row to come is begun in, and what it is called then.
fn next(book: &Book) -> (usize, Vec<Named>) {
    let column = |field: &Field| super::columns::COLUMNS.iter().position(|c| c.name == field.name).unwrap_or(0);
    let (back, inter, fore) = (column(&BACK), column(&INTER), column(&FORE));
    let name = |spot: Spot| book.rows.get(spot.row).map_or("", |row| row.text(&POINT));
    let Some((_, last, kind)) = book.sights().last() else { return (back, vec![]) };
    if kind.name == FORE.name {
        let same = Named { column: back, text: name(last).to_owned() };
        return (back, vec![same]);
    }
    let of = |found: Option<Spot>, first: &str| match found.map_or("", name) {
        "" => first.to_owned(),
        name => names::next(name),
    };
    let change = book.places.iter().rev().find_map(|places| places.fore);
    let side = book.places.iter().rev().find_map(|places| places.inters.last().copied());
    let named = vec![Named { column: inter, text: of(side, "P 1") }, Named { column: fore, text: of(change, "CP 1") }];
    (if kind.name == INTER.name { inter } else { fore }, named)
}
