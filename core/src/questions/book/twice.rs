//! A second run of the same line, the same way or back, beside the first.

use super::case::Case;
use super::columns::{self, POINT};
use super::fields::STADIA;
use super::levels::NONE;
use super::rows::{Book, Spot};
use crate::levelling::closure::allowed;
use crate::levelling::reduce::reduce;
use crate::levelling::twice::{Leg, Point, adjusted, legs, parting, per_km};
use crate::quantity::show::Show;
use crate::question::answer::{Answer, Doubt, Table};
use crate::question::field::Field;
use crate::question::{Asked, Promised};

pub const SECOND: Field = columns::table("second", "Second run")
    .help("The same line run again, the same way or back: compared between points of the same name. The level it starts from does not matter.")
    .example("BM 7\t1.310\t\t\t29\nCP 1\t2.604\t\t1.500\t30\t31\nBM 4\t\t\t1.312\t30")
    .under("Second run");

pub const PER_KM: Promised = Promised::new(
    "double_run",
    "1 km of double run",
    "standard deviation of the mean of both runs, ½ √(Σ(d²/L)/n) over n legs, from their differences d alone",
);
pub const APART: Promised = Promised::new(
    "runs_apart",
    "Runs part by",
    "first less second run, in the leg where that is most beyond its limit",
);

/// Legs of the table at most.
const SHOWN: usize = 200;

/// The second run's rows.
pub fn second(asked: &Asked) -> Book<'_> {
    Book::read(asked.rows(&SECOND), &SECOND, 0.0, asked.must(&STADIA))
}

/// Adds both results, and the table of legs where there is a second run.
pub fn fill(asked: &Asked, case: &Case, answer: &mut Answer) {
    let show = asked.show();
    let second = second(asked);
    let first = points(&case.book);
    let legs = legs(&first, &points(&second));
    let most = |leg: &Leg| allowed(case.rule?, leg.length, libm::round(leg.setups) as usize);
    let none = match (second.run.setups.is_empty(), legs.is_empty()) {
        (true, _) => Some("no second run is booked"),
        (_, true) => Some("no two points have the same names in both runs"),
        _ => None,
    };
    deviation(&legs, none.unwrap_or("distances are missing"), show, answer);
    let parts = parting(&legs, most).and_then(|i| legs.get(i));
    apart(&first, parts, none.unwrap_or("no leg is known to be beyond its limit"), show, answer);
    if !legs.is_empty() {
        answer.tables.push(table(case, show, &legs, &first, most));
    }
}

/// What the differences say of the levelling; `none`: why they do not.
fn deviation(legs: &[Leg], none: &str, show: Show, answer: &mut Answer) {
    let Some(s) = per_km(legs) else {
        return answer.idle(&PER_KM, none);
    };
    let text = format!("from {} to {}", show.own(s.bias - s.below), show.own(s.bias + s.above));
    let few = if legs.len() < 10 { "; few legs: it is hardly known" } else { "" };
    let doubt = Some(Doubt { value: s.half(), text });
    answer.result(&PER_KM, Some(s.bias), show.own(s.bias), doubt, [PER_KM.meaning, few].concat());
}

/// The leg in which they part; `none`: why there is none.
fn apart(first: &[Point], leg: Option<&Leg>, none: &str, show: Show, answer: &mut Answer) {
    let Some(leg) = leg else {
        return answer.idle(&APART, none);
    };
    let off = fine(leg.difference());
    let between = format!("between {} and {}", name(first, leg.from), name(first, leg.to));
    answer.caution(["The two runs part ", &between, "."].concat());
    answer.result(&APART, Some(off), show.entered(off), None, between + ": run that leg again first");
}

/// Readings are whole nanometres: so is what is left of them.
fn fine(si: f64) -> f64 {
    libm::round(si * 1e9) / 1e9
}

fn name<'a>(points: &[Point<'a>], i: usize) -> &'a str {
    points.get(i).map_or("", |point| point.name)
}

/// The points that carry the level on, with their levels and how far along the run they are.
fn points<'a>(book: &'a Book) -> Vec<Point<'a>> {
    let name = |spot: Spot| book.rows.get(spot.row).map_or("", |row| row.text(&POINT));
    let stations = reduce(&book.run).stations;
    let mut along = Some(0.0);
    let first = book.places.first().zip(stations.first());
    let first = first.map(|(places, station)| Point { name: name(places.back), level: station.from, along, setups: 0 });
    let mut points: Vec<Point> = first.into_iter().collect();
    for (i, ((setup, places), station)) in book.run.setups.iter().zip(&book.places).zip(&stations).enumerate() {
        let length = setup.back.distance.zip(setup.fore.and_then(|fore| fore.distance));
        along = along.zip(length).map(|(along, (back, fore))| along + back + fore);
        let fore = places.fore.zip(station.fore);
        points.extend(fore.map(|(spot, seen)| Point { name: name(spot), level: seen.level, along, setups: i + 1 }));
    }
    points
}

fn table(case: &Case, show: Show, legs: &[Leg], first: &[Point], most: impl Fn(&Leg) -> Option<f64>) -> Table {
    // A run that does not close is not pulled onto its mark.
    let within = case.judged().zip(case.allowed).is_some_and(|(off, allowed)| off.abs() <= allowed);
    let levels = adjusted(legs, first, case.close.filter(|_| within)).map_or(vec![], |net| net.levels);
    let row = |(i, leg): (usize, &Leg)| {
        let off = fine(leg.difference());
        let allowed = most(leg);
        let says = match allowed {
            Some(most) if off.abs() <= most => "within",
            Some(_) => "beyond",
            None => NONE,
        };
        vec![
            [name(first, leg.from), " – ", name(first, leg.to)].concat(),
            case.digits.text(leg.rises[0]),
            case.digits.text(leg.rises[1]),
            show.entered(off).to_string(),
            allowed.map_or(NONE.to_owned(), |most| show.entered(most).to_string()),
            says.to_owned(),
            levels.get(i + 1).map_or(NONE.to_owned(), |level| case.digits.fine(*level)),
        ]
    };
    let columns = ["Leg", "First run", "Second run", "Difference", "Allowed", "Says", "Level by both"];
    Table {
        name: "legs",
        caption: "Both runs, leg by leg".to_owned(),
        columns: columns.map(str::to_owned).to_vec(),
        rows: legs.iter().enumerate().take(SHOWN).map(row).collect(),
    }
}
