//! The log of levels tested: what it says of this one, and what is handed on to it and to the site.

use super::case::{Case, Sets, tilt};
use super::*;
use crate::quantity::show::Show;
use crate::question::answer::{Handed, Offer, Table};

/// An earlier test of this level.
pub struct Past {
    pub name: String,
    pub value: f64,
    pub doubt: f64,
}

/// Of the level with the serial number entered, as the log has them, this one left out; with none entered, those
/// without one.
pub fn past(asked: &Asked, case: &Case) -> Vec<Past> {
    let serial = asked.text(&SERIAL);
    let (this, log) = (Taken::of(asked, case).row, asked.text(&HISTORY));
    let is_this = |line: usize| log.lines().nth(line).is_some_and(|line| line.trim_end() == this);
    let mine = asked.rows(&HISTORY).iter();
    let mine = mine.filter(|row| row.text(&PAST_SERIAL).eq_ignore_ascii_case(serial) && !is_this(row.line));
    let name = |date: &str, at: usize| if date.is_empty() { format!("row {at}") } else { date.to_owned() };
    mine.map(|row| Past {
        name: name(row.text(&PAST_DATE), row.line + 1),
        value: row.number(&PAST_VALUE).unwrap_or(0.0),
        doubt: row.number(&PAST_DOUBT).unwrap_or(0.0),
    })
    .collect()
}

/// Table of the trend, what has changed, and the offer.
pub fn fill(asked: &Asked, case: &Case, past: &[Past], answer: &mut Answer) {
    let show = asked.show();
    answer.tables.push(trend(case, past, show));
    if let Some(last) = past.last() {
        moved(case, last.value, last.doubt, &format!("the test before this ({})", last.name), show, answer);
    } else if let Some(used) = asked.number(&site::COLLIMATION) {
        moved(case, used, asked.must(&site::COLLIMATION_DOUBT), "what is in use on this site", show, answer);
    }
    let sound = !matches!(case.sets, Sets::Two { agree: false, .. }) && case.error.worst() <= WORST;
    if sound {
        answer.offers.extend(offer(asked, &Taken::of(asked, case)));
    }
}

/// Beyond it a result is none that could be used: the field that takes it over goes no further.
const WORST: f64 = 0.01;

/// Says where the level has moved by more than the doubts of both tests.
fn moved(case: &Case, value: f64, doubt: f64, since: &str, show: Show, answer: &mut Answer) {
    let change = case.error.bias - value;
    let explained = libm::hypot(case.error.half(), doubt);
    if change.abs() > explained {
        answer.caution(format!(
            "It has changed by {} against {since}, and the doubts explain {}: it was knocked, or a reading is wrong. What was levelled in between is in question.",
            tilt(show, change, explained),
            tilt(show, explained, explained)
        ));
    }
}

fn trend(case: &Case, past: &[Past], show: Show) -> Table {
    let mut rows = vec![];
    let mut before: Option<f64> = None;
    let mut row = |name: &str, value: f64, doubt: f64| {
        let grain = if doubt > 0.0 { doubt } else { value };
        let change = before.map_or("–".to_owned(), |old| tilt(show, value - old, grain).text);
        before = Some(value);
        rows.push(vec![name.to_owned(), tilt(show, value, grain).text, tilt(show, doubt, grain).text, change]);
    };
    for test in past {
        row(&test.name, test.value, test.doubt);
    }
    row("this test", case.error.bias, case.error.half());
    let unit = tilt(show, 0.0, 0.0).unit;
    Table {
        name: "trend",
        caption: "This level, test by test".to_owned(),
        columns: vec!["Test".to_owned(), format!("Collimation, {unit}"), format!("Doubt, {unit}"), "Change".to_owned()],
        rows,
    }
}

/// The result as it is taken over, rounded by its doubt.
struct Taken {
    value: String,
    doubt: String,
    /// Its row of the log.
    row: String,
}

impl Taken {
    fn of(asked: &Asked, case: &Case) -> Taken {
        let (show, half) = (asked.show(), case.error.half());
        let (value, doubt) = (tilt(show, case.error.bias, half), tilt(show, half, half));
        let cells = [asked.text(&DATE).to_owned(), asked.text(&SERIAL).to_owned()];
        let unit = [" ", value.unit].concat();
        let row =
            [cells.join("\t"), [&value.text, unit.as_str()].concat(), [&doubt.text, unit.as_str()].concat()].join("\t");
        Taken { value: value.text, doubt: doubt.text, row }
    }
}

/// Hands the result on to the site, and to the log where the test has a date; nothing where both have it.
fn offer(asked: &Asked, taken: &Taken) -> Option<Offer> {
    let unit = Quantity::Collimation.usual(asked.show().0).symbol;
    let mut values = vec![];
    for (field, text) in [(&site::COLLIMATION, &taken.value), (&site::COLLIMATION_DOUBT, &taken.doubt)] {
        if asked.text(field) != text || asked.unit(field).is_none_or(|u| u.symbol != unit) {
            values.push(Handed { field: field.name, text: text.clone(), unit });
        }
    }
    let log = asked.text(&HISTORY);
    let logged = log.lines().any(|line| line.trim_end() == taken.row);
    let dated = asked.given(&DATE);
    if dated && !logged {
        // The tab after the first row says that tabs part the cells.
        let text = if log.is_empty() { [&taken.row, "\t"].concat() } else { [log, "\n", &taken.row].concat() };
        values.push(Handed { field: HISTORY.name, text, unit: "" });
    }
    let text = match (dated, logged) {
        (true, false) => "For every question of this site, and as a row of the log.",
        (true, true) => "For every question of this site. The log has it.",
        (false, _) => "For every question of this site. With a date it goes into the log too.",
    };
    (!values.is_empty()).then(|| Offer {
        label: format!("Reckon with {}\u{a0}{unit} from now on", taken.value),
        text: text.to_owned(),
        values,
    })
}
