//! The book as entered, and everything that follows from it.

use super::columns::{BOOK, MARK};
use super::digits::Digits;
use super::fields::*;
use super::rows::{Book, Places};
use super::running::{Running, running};
use crate::levelling::adjust::{By, corrections as spread};
use crate::levelling::closure::{self, Rule};
use crate::levelling::correct::{self, Corrected};
use crate::levelling::reduce::{Reduced, reduce};
use crate::levelling::{Setup, slope};
use crate::limits;
use crate::question::{Asked, site};
use crate::questions::sight;
use crate::sight::budget::Budget;

/// A known level on the way.
pub struct Mark {
    pub name: String,
    pub known: f64,
    pub observed: f64,
}

pub struct Case<'a> {
    pub book: Book<'a>,
    pub budget: Budget,
    pub air: site::AirInForce,
    pub reduced: Reduced,
    pub corrected: Vec<Corrected>,
    pub running: Running,
    pub marks: Vec<Mark>,
    /// Known level of the closing mark.
    pub close: Option<f64>,
    /// The run ends on the mark it began from.
    pub circuit: bool,
    /// Length of the run; `None` where distances are missing.
    pub length: Option<f64>,
    pub rule: Option<Rule>,
    pub allowed: Option<f64>,
    /// Corrected levels count.
    pub by_corrected: bool,
    pub adjusted: Adjusted,
    pub limits: Limits,
    /// Of intermediate points that have none of their own.
    pub tolerance: f64,
    pub digits: Digits,
}

/// What came of spreading the misclosure.
pub enum Adjusted {
    /// It was not asked for, or there is nothing to spread.
    No,
    /// For each setup, what is added.
    By(Vec<f64>),
    /// Why not.
    Refused(&'static str),
}

/// What is looked out for.
#[derive(Clone, Copy)]
pub struct Limits {
    pub lowest: f64,
    pub staff: Option<f64>,
    pub section: Option<f64>,
    pub sight: f64,
    pub imbalance: f64,
    pub wires: f64,
    pub stadia: f64,
    /// Longest sights uphill and downhill of where the level stands, and + where it is uphill ahead.
    pub slope: Option<([f64; 2], f64)>,
}

impl Limits {
    pub fn of(asked: &Asked) -> Limits {
        let lowest = asked.must(&LOWEST);
        let staff = asked.number(&sight::STAFF);
        let instrument = asked.number(&sight::INSTRUMENT).unwrap_or(asked.must(&site::LINE_HEIGHT));
        let slope = asked.number(&SLOPE).map(|s| (slope::longest(instrument, staff, lowest, s), s));
        Limits {
            lowest,
            staff,
            section: asked.number(&SECTION),
            sight: asked.must(&SIGHT_LIMIT),
            imbalance: asked.must(&IMBALANCE),
            wires: asked.must(&WIRES),
            stadia: asked.must(&STADIA),
            slope,
        }
    }
}

/// The rows as a run, from the level entered, else from the known level in its first row, else from 0.
pub fn book(asked: &Asked) -> Book<'_> {
    let rows = asked.rows(&BOOK);
    let start = first_level(asked).unwrap_or(asked.must(&START));
    Book::read(rows, &BOOK, start, asked.must(&STADIA))
}

/// The level of the first mark, where the person gave it.
pub fn first_level(asked: &Asked) -> Option<f64> {
    if asked.given(&START) { asked.number(&START) } else { asked.rows(&BOOK).first()?.number(&MARK) }
}

/// Air, level and observer.
pub fn budget(asked: &Asked) -> Budget {
    let k = site::air(asked, site::sky(asked)).k;
    site::budget(asked, k, asked.must(&sight::DISTANCE_DOUBT))
}

impl Case<'_> {
    pub fn of(asked: &Asked) -> Case<'_> {
        let mut book = book(asked);
        let (air, budget) = (site::air(asked, site::sky(asked)), budget(asked));
        let reduced = reduce(&book.run);
        let last = book.places.last().and_then(|places| places.fore);
        let close = asked.number(&CLOSE).or(last.and_then(|spot| book.mark(spot)));
        book.run.close = close;
        let corrected = correct::corrections(&book.run, &budget);
        let named = |spot| book.name(spot).to_lowercase();
        let first = book.places.first().map(|places| named(places.back));
        let circuit = close == Some(book.run.start) || (first.is_some() && first == last.map(named));
        let (sum, missing) = closure::length(&book.run);
        let length = asked.number(&LENGTH).or((missing == 0 && book.done() > 0).then_some(sum));
        let rule = rule(asked, circuit);
        let allowed = rule.and_then(|rule| closure::allowed(rule, length, book.done()));
        let digits = Digits::of(
            asked.show(),
            book.sights().filter(|s| s.1.wires.is_none()).map(|s| s.0.reading).chain([book.run.start]).chain(close),
            book.sights().any(|s| s.1.wires.is_some()),
        );
        let running = running(&book, &budget);
        let mut case = Case {
            book,
            budget,
            air,
            reduced,
            corrected,
            running,
            marks: vec![],
            close,
            circuit,
            length,
            rule,
            allowed,
            by_corrected: asked.choice(&COUNTS) == "corrected",
            adjusted: Adjusted::No,
            limits: Limits::of(asked),
            tolerance: asked.must(&TOLERANCE),
            digits,
        };
        case.marks = case.passed();
        case.adjusted = case.adjust(asked);
        case
    }
    /// The known levels on the way, without the closing one.
    fn passed(&self) -> Vec<Mark> {
        let (book, setups) = (&self.book, self.book.run.setups.len());
        let mut marks = vec![];
        for (i, (places, station)) in book.places.iter().zip(&self.reduced.stations).enumerate() {
            let fore = station.fore.zip(places.fore).filter(|_| i + 1 < setups);
            for (seen, spot) in station.inters.iter().copied().zip(places.inters.iter().copied()).chain(fore) {
                marks.extend(book.mark(spot).map(|known| Mark { name: book.name(spot), known, observed: seen.level }));
            }
        }
        marks
    }
    /// The last level that is carried on, as booked.
    pub fn last(&self) -> f64 {
        self.reduced.sums.last
    }
    /// The same, corrected; `None` where no setup has both its distances.
    pub fn last_corrected(&self) -> Option<f64> {
        let correction = self.corrected.iter().rev().find_map(|c| c.fore).filter(|_| self.running.whole.setups > 0);
        correction.map(|c| self.last() + c)
    }
    /// Some setup, or some intermediate point, has what a correction needs.
    pub fn correctable(&self) -> bool {
        self.running.whole.setups > 0 || self.corrected.iter().any(|c| c.inters.iter().any(Option::is_some))
    }
    /// Known level of the closing mark, once the run stands on it.
    fn closed_on(&self) -> Option<f64> {
        self.close.filter(|_| self.book.done() > 0 && self.book.standing().is_none())
    }
    /// Observed less known, as booked: + ran high.
    pub fn misclosure(&self) -> Option<f64> {
        self.closed_on().map(|close| exact(self.last() - close))
    }
    /// The same, corrected.
    pub fn misclosure_corrected(&self) -> Option<f64> {
        self.closed_on().zip(self.last_corrected()).map(|(close, level)| exact(level - close))
    }
    /// The misclosure that is judged.
    pub fn judged(&self) -> Option<f64> {
        if self.by_corrected { self.misclosure_corrected() } else { self.misclosure() }
    }
    fn adjust(&self, asked: &Asked) -> Adjusted {
        let by = match asked.choice(&ADJUST) {
            "length" => By::Length,
            "setups" => By::Setups,
            _ => return Adjusted::No,
        };
        let Some(off) = self.judged() else {
            return Adjusted::Refused("the levels that count have not closed on a known level");
        };
        if asked.text(&REASON).trim().is_empty() {
            match self.allowed {
                Some(allowed) if off.abs() <= allowed => {}
                Some(_) => {
                    return Adjusted::Refused(
                        "it is not within the limit. Look for a blunder first; to adjust all the same, give a reason",
                    );
                }
                None => return Adjusted::Refused("what is allowed is not known"),
            }
        }
        let all = spread(&self.book.run, off, by);
        all.map_or(Adjusted::Refused("a distance is missing, and it goes by length"), Adjusted::By)
    }
    /// The setups with their places.
    pub fn setups(&self) -> impl Iterator<Item = (&Setup, &Places)> {
        self.book.run.setups.iter().zip(&self.book.places)
    }
}

/// What readings in whole nanometres differ by, without the last bits of the subtraction.
pub fn exact(difference: f64) -> f64 {
    libm::round(difference * 1e9) / 1e9
}

/// The limit chosen; `None` where it is one's own and was not entered.
fn rule(asked: &Asked, circuit: bool) -> Option<Rule> {
    match asked.choice(&LIMIT) {
        "own_km" => asked.number(&OWN).map(Rule::RootKm),
        "own_setups" => asked.number(&OWN).map(Rule::RootSetups),
        name => limits::closure(name).map(|c| if circuit { c.circuit } else { c.section }),
    }
}
