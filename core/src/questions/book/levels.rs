//! The reduced book, row by row, and its page checks.

use super::case::{Adjusted, Case, exact};
use super::rows::{Places, Spot};
use super::running::Step;
use super::sheet::signed;
use crate::levelling::reduce::{Seen, Station};
use crate::levelling::{Setup, Sight};
use crate::quantity::show::Round;
use crate::question::answer::{Answer, Table};
use crate::question::site;

/// What an empty cell of a book says.
pub const NONE: &str = "·";

/// One row of the reduced book.
struct Line {
    spot: Spot,
    back: Option<f64>,
    inter: Option<f64>,
    fore: Option<f64>,
    /// Rise, fall below 0.
    step: Option<f64>,
    collimation: Option<f64>,
    level: f64,
    by_rise: f64,
    corrected: Option<f64>,
    adjusted: Option<f64>,
}

pub fn fill(case: &Case, answer: &mut Answer) {
    answer.tables.push(levels(case));
    answer.tables.push(checks(case));
    answer.tables.push(run(case));
    answer.tables.extend(wires(case));
}

/// One line for each point: the fore and the next back sight of a change point stand together.
fn lines(case: &Case) -> Vec<Line> {
    let mut lines: Vec<Line> = vec![];
    let spread = match &case.adjusted {
        Adjusted::By(all) => Some(all),
        _ => None,
    };
    let stations = case.reduced.stations.iter().zip(&case.corrected);
    for (i, ((setup, places), (station, corrected))) in case.setups().zip(stations).enumerate() {
        let share = spread.and_then(|all| all.get(i).copied());
        let seen = |sight: &Sight, spot: Spot, seen: &Seen, correction: Option<f64>, inter: bool| Line {
            spot,
            back: None,
            inter: inter.then_some(sight.reading),
            fore: (!inter).then_some(sight.reading),
            step: Some(seen.rise),
            collimation: None,
            level: seen.level,
            by_rise: seen.by_rise,
            corrected: correction.map(|c| seen.level + c),
            adjusted: counted(case, seen.level, correction).zip(share).map(|(level, share)| level + share),
        };
        begin(case, setup, places.back, station.from, corrected.carried, &mut lines);
        if let Some(last) = lines.last_mut() {
            last.collimation = Some(station.collimation);
        }
        let inters = setup.inters.iter().zip(&places.inters).zip(station.inters.iter().zip(&corrected.inters));
        lines.extend(inters.map(|((sight, spot), (of, correction))| seen(sight, *spot, of, *correction, true)));
        if let (Some(sight), Some(spot), Some(of)) = (&setup.fore, places.fore, &station.fore) {
            lines.push(seen(sight, spot, of, corrected.fore, false));
        }
    }
    lines
}

/// The level that counts: as booked, or corrected where it can be.
fn counted(case: &Case, level: f64, correction: Option<f64>) -> Option<f64> {
    if case.by_corrected { correction.map(|c| level + c) } else { Some(level) }
}

/// The back sight: on the line of the change point before, or on the first line.
fn begin(case: &Case, setup: &Setup, spot: Spot, from: f64, carried: f64, lines: &mut Vec<Line>) {
    if let Some(last) = lines.last_mut() {
        last.back = Some(setup.back.reading);
        return;
    }
    let adjusted = matches!(case.adjusted, Adjusted::By(_)).then_some(from);
    lines.push(Line {
        spot,
        back: Some(setup.back.reading),
        inter: None,
        fore: None,
        step: None,
        collimation: None,
        level: from,
        by_rise: from,
        corrected: Some(from + carried),
        adjusted,
    });
}

fn levels(case: &Case) -> Table {
    let digits = case.digits;
    let text = |value: Option<f64>| value.map_or(NONE.to_owned(), |v| digits.text(v));
    let fine = |value: Option<f64>| value.map_or(NONE.to_owned(), |v| digits.fine(v));
    let (correctable, spread) = (case.correctable(), matches!(case.adjusted, Adjusted::By(_)));
    let row = |line: Line| {
        let mut cells = vec![
            case.book.name(line.spot),
            text(line.back),
            text(line.inter),
            text(line.fore),
            text(line.step.filter(|s| *s >= 0.0)),
            text(line.step.filter(|s| *s < 0.0).map(f64::abs)),
            text(line.collimation),
            digits.text(line.level),
            digits.text(line.by_rise),
        ];
        if correctable {
            cells.push(fine(line.corrected));
        }
        if spread {
            cells.push(fine(line.adjusted));
        }
        cells
    };
    let rows = lines(case).into_iter().map(row).collect();
    let mut columns = [
        "Point",
        "Back",
        "Inter",
        "Fore",
        "Rise",
        "Fall",
        "Height of collimation",
        "Level by collimation",
        "Level by rise and fall",
    ]
    .map(str::to_owned)
    .to_vec();
    if correctable {
        columns.push("Corrected".to_owned());
    }
    if spread {
        columns.push("Adjusted".to_owned());
    }
    Table { name: "levels", caption: ["Reduced levels, ", digits.unit.symbol].concat(), columns, rows }
}

/// ΣB − ΣF = Σrise − Σfall = last − first.
fn checks(case: &Case) -> Table {
    let (sums, digits) = (case.reduced.sums, case.digits);
    let rows = [
        ("Σ back − Σ fore", sums.back, sums.fore),
        ("Σ rise − Σ fall", sums.rise, sums.fall),
        ("last − first", sums.last, sums.first),
    ]
    .iter()
    .zip(sums.checks())
    .map(|((name, more, less), left)| {
        vec![(*name).to_owned(), digits.text(*more), digits.text(*less), digits.text(left)]
    })
    .collect();
    let columns = ["Sum", "of", "less", "leaves"].map(str::to_owned).to_vec();
    let [a, b, c] = sums.checks();
    let same = a == b && b == c;
    let caption = if same { "Page check: all three leave the same" } else { "Page check: they differ" };
    Table { name: "checks", caption: caption.to_owned(), columns, rows }
}

/// The run from change point to change point, with its running balance: what the picture shows.
fn run(case: &Case) -> Table {
    let digits = case.digits;
    let row = |((places, station), step): ((&Places, &Station), &Step)| {
        let (spot, seen) = (places.fore?, station.fore?);
        let now = step.balance;
        let (balance, worth) = if now.setups == 0 {
            (NONE.to_owned(), NONE.to_owned())
        } else {
            let (size, doubt) = site::with_doubt(&step.worth, digits.show);
            (signed(now.run, digits.show).to_string(), [&size.to_string(), " ", &doubt.text].concat())
        };
        let along = digits.show.distance(step.along, Round::Near).to_string();
        Some(vec![case.book.name(spot), along, digits.text(seen.level), balance, worth])
    };
    let done = case.book.places.iter().zip(&case.reduced.stations).zip(&case.running.steps);
    let first = case.book.places.first().map(|places| {
        let level = digits.text(case.reduced.sums.first);
        vec![
            case.book.name(places.back),
            digits.show.distance(0.0, Round::Near).to_string(),
            level,
            NONE.to_owned(),
            NONE.to_owned(),
        ]
    });
    let rows = first.into_iter().chain(done.filter_map(row)).collect();
    let level = ["Level, ", digits.unit.symbol].concat();
    let columns = ["Point", "Along the sights", &level, "Balance", "Worth"].map(str::to_owned).to_vec();
    Table { name: "run", caption: "The run and its balance since the last mark".to_owned(), columns, rows }
}

/// The three wires of every sight that has them.
fn wires(case: &Case) -> Option<Table> {
    let digits = case.digits;
    let row = |(sight, spot): (Sight, Spot)| {
        let wires = spot.wires?;
        let mm = |si: f64| digits.show.entered(exact(si)).to_string();
        let [upper, lower] = wires.halves();
        let off = digits.show.own(wires.off()).to_string();
        Some(vec![
            case.book.name(spot),
            digits.text(wires.mean()),
            off,
            mm(upper),
            mm(lower),
            sight.distance.map_or(NONE.to_owned(), |d| digits.show.distance(d, Round::Near).to_string()),
        ])
    };
    let rows: Vec<Vec<String>> = case.book.sights().filter_map(|(sight, spot, _)| row((sight, spot))).collect();
    let columns =
        ["Point", "Mean", "Middle − mean", "Upper half", "Lower half", "Distance"].map(str::to_owned).to_vec();
    (!rows.is_empty()).then(|| Table { name: "wires", caption: "Three wires".to_owned(), columns, rows })
}
