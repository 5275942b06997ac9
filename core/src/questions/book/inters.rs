//! What is lost at the intermediate sights, which no balance protects, and where to stand for them.

use super::case::Case;
use super::levels::NONE;
use super::sheet::words;
use super::{BEST_BACK, OUTSIDE};
use crate::doubt::Estimate;
use crate::levelling::correct::{best_back, intermediate};
use crate::quantity::show::{Round, Show};
use crate::question::answer::{Answer, Table};
use crate::question::site;

/// Points of the table at most: those outside first come, and the rest as booked.
const SHOWN: usize = 200;

/// An intermediate sight, against its tolerance.
pub struct Inter {
    setup: usize,
    name: String,
    /// Level as booked.
    level: f64,
    /// What correcting adds.
    correction: Option<f64>,
    /// What the level is out by, against the mark of its back sight; `None` where a distance is missing.
    error: Option<Estimate>,
    tolerance: f64,
}

impl Inter {
    fn outside(&self) -> bool {
        self.error.is_some_and(|e| e.worst() > self.tolerance)
    }
    fn says(&self) -> &'static str {
        match self.error {
            None => "distance missing",
            Some(e) if e.worst() <= self.tolerance => "within",
            Some(e) if e.half() <= self.tolerance => "correct it",
            Some(_) => "read it from nearer by",
        }
    }
}

/// Every one, in the order observed.
pub fn all(case: &Case) -> Vec<Inter> {
    let mut found = vec![];
    let stations = case.reduced.stations.iter().zip(&case.corrected);
    for (i, ((setup, places), (station, corrected))) in case.setups().zip(stations).enumerate() {
        let seen = station.inters.iter().zip(&corrected.inters);
        for ((sight, spot), (seen, correction)) in setup.inters.iter().zip(&places.inters).zip(seen) {
            found.push(Inter {
                setup: i,
                name: case.book.name(*spot),
                level: seen.level,
                correction: *correction,
                error: intermediate(setup, sight, &case.budget),
                tolerance: case.book.tolerance(*spot).unwrap_or(case.tolerance),
            });
        }
    }
    found
}

/// The back sight at which the worst point of the setup that has the most trouble would be best.
fn best(case: &Case, inters: &[Inter]) -> Option<(usize, f64, f64)> {
    let worst = inters.iter().filter(|i| i.outside()).max_by(|a, b| {
        let share = |i: &Inter| i.error.map_or(0.0, |e| e.worst() / i.tolerance);
        share(a).total_cmp(&share(b))
    })?;
    let setup = case.book.run.setups.get(worst.setup)?;
    let of = inters.iter().filter(|i| i.setup == worst.setup);
    let sights: Vec<(f64, f64)> =
        setup.inters.iter().zip(of).filter_map(|(sight, inter)| Some((sight.distance?, inter.tolerance))).collect();
    best_back(&sights, &case.budget).map(|(distance, share)| (worst.setup, distance, share))
}

pub fn results(case: &Case, inters: &[Inter], show: Show, answer: &mut Answer) {
    let outside = inters.iter().filter(|i| i.outside()).count();
    answer.result(&OUTSIDE, Some(outside as f64), words(&outside.to_string()), None, OUTSIDE.meaning.to_owned());
    match best(case, inters) {
        Some((setup, d, share)) => {
            let shown = show.distance(d, Round::Near);
            let text = format!(
                "in setup {}: with the mark so far off, the worst point would use {} % of its tolerance, its readings apart",
                setup + 1,
                crate::quantity::show::significant(share * 100.0, 2)
            );
            answer.result(&BEST_BACK, Some(d), shown, None, text);
        }
        None => answer.idle(&BEST_BACK, "no point is outside its tolerance"),
    }
}

pub fn fill(case: &Case, inters: &[Inter], answer: &mut Answer) {
    if inters.is_empty() {
        return;
    }
    let show = case.digits.show;
    let outside: Vec<&str> = inters.iter().filter(|i| i.outside()).map(|i| i.name.as_str()).collect();
    if !outside.is_empty() {
        let first: Vec<&str> = outside.iter().take(10).copied().collect();
        let more = if outside.len() > first.len() {
            format!(" and {} more", outside.len() - first.len())
        } else {
            String::new()
        };
        let stand = best(case, inters).map_or(String::new(), |(setup, d, _)| {
            format!(
                " From setup {}, a mark {} off would serve its points best.",
                setup + 1,
                show.distance(d, Round::Near)
            )
        });
        answer.caution(format!("Outside their tolerance as booked: {}{more}.{stand}", first.join(", ")));
    }
    let row = |inter: &Inter| {
        let (bias, doubt) = match inter.error {
            Some(error) => {
                // The size of the bias, to the digits its doubt leaves it, and which way it goes.
                let (size, _) = site::with_doubt(&Estimate { bias: error.bias.abs(), ..error }, show);
                let way = if error.bias < 0.0 { " low" } else { " high" };
                (size.to_string() + way, site::with_doubt(&error, show).1.text)
            }
            None => (NONE.to_owned(), NONE.to_owned()),
        };
        let corrected = inter.correction.map_or(NONE.to_owned(), |c| case.digits.fine(inter.level + c));
        vec![
            inter.name.clone(),
            case.digits.text(inter.level),
            bias,
            doubt,
            corrected,
            show.entered(inter.tolerance).to_string(),
            inter.says().to_owned(),
        ]
    };
    // Those outside first.
    let order = inters.iter().filter(|i| i.outside()).chain(inters.iter().filter(|i| !i.outside()));
    let rows = order.take(SHOWN).map(row).collect();
    let columns =
        ["Point", "As booked", "That is", "Doubt", "Corrected", "Tolerance", "Says"].map(str::to_owned).to_vec();
    let caption = "Intermediate points, against the mark of their back sight; those outside first".to_owned();
    answer.tables.push(Table { name: "intermediates", caption, columns, rows });
}
