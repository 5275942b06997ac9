//! Results.

use super::case::{Case, exact};
use super::decide::next_fore;
use super::*;
use crate::doubt::Estimate;
use crate::quantity::show::{Round, Show, Shown, significant};
use crate::question::answer::Doubt;

/// Fills in every result, in the order promised.
pub fn fill(asked: &Asked, case: &Case, inters: &[inters::Inter], answer: &mut Answer) {
    let show = asked.show();
    levels(case, show, answer);
    sums(case, show, answer);
    balance(case, show, answer);
    inters::results(case, inters, show, answer);
    wires(case, show, answer);
    reread(asked, case, show, answer);
    slope(case, show, answer);
    site::k_result(&case.air, show, answer);
}

pub fn words(text: &str) -> Shown {
    Shown { text: text.to_owned(), unit: "" }
}

/// Where nothing is known of the balance.
const NO_DISTANCES: &str = "no setup has both its distances";

/// A result, or words where there is none.
fn maybe(answer: &mut Answer, promise: &Promised, found: Option<(f64, Shown)>, none: &str) {
    match found {
        Some((value, shown)) => answer.result(promise, Some(value), shown, None, promise.meaning.to_owned()),
        None => answer.idle(promise, none),
    }
}

fn levels(case: &Case, show: Show, answer: &mut Answer) {
    let booked = case.last();
    let worth = case.running.whole.worth(&case.budget).total();
    let readings = case.running.whole.readings(&case.budget);
    // As booked its bias stands as well: the doubt of the readings and of what unequal sights have put in.
    let of_readings = Estimate::even(0.0, readings);
    let half = Estimate::sum([&of_readings, &worth.corrected()]).half();
    let doubt = Doubt { value: half, text: format!("± {}", case.digits.fine(half)) };
    answer.result(&LAST, Some(booked), case.digits.shown(booked), Some(doubt), LAST.meaning.to_owned());
    let unit = case.digits.unit.symbol;
    let corrected = case.last_corrected().map(|c| (c, Shown { text: case.digits.fine(c), unit }));
    maybe(answer, &CORRECTED, corrected, NO_DISTANCES);
    let closed = [(&MISCLOSURE, case.misclosure()), (&MISCLOSURE_CORRECTED, case.misclosure_corrected())];
    for ((promise, off), corrected) in closed.into_iter().zip([false, true]) {
        match off {
            Some(off) => {
                let shown = decide::misclosure(off, corrected, show);
                answer.result(promise, Some(off), shown, None, format!("ran {}", decide::ran(off, corrected, show)));
            }
            None => answer.result(promise, None, words("open"), None, "it has not closed on a known level".to_owned()),
        }
    }
    let allowed = case.allowed.map(|a| (a, show.entered(a)));
    maybe(answer, &ALLOWED, allowed, "it needs the limit, and what that goes by");
}

fn sums(case: &Case, show: Show, answer: &mut Answer) {
    let count = case.book.done();
    answer.result(&SETUPS, Some(count as f64), words(&count.to_string()), None, SETUPS.meaning.to_owned());
    let length = case.length.map(|l| (l, show.distance(l, Round::Near)));
    maybe(answer, &RUN_LENGTH, length, "distances are missing");
    let sums = case.reduced.sums;
    for (promise, sum) in [(&SUM_BACK, sums.back), (&SUM_FORE, sums.fore)] {
        answer.result(promise, Some(sum), case.digits.shown(sum), None, promise.meaning.to_owned());
    }
}

/// "+4 m", with its sign.
pub fn signed(d: f64, show: Show) -> Shown {
    let shown = show.distance(d, Round::Near);
    if d > 0.0 { Shown { text: ["+", &shown.text].concat(), ..shown } } else { shown }
}

fn balance(case: &Case, show: Show, answer: &mut Answer) {
    let now = case.running.now;
    if now.setups == 0 && now.missing > 0 {
        for promise in [&BALANCE, &SQUARES, &WORTH, &WORTH_COLLIMATION, &WORTH_CURVE, &NEXT_FORE] {
            maybe(answer, promise, None, NO_DISTANCES);
        }
        return;
    }
    answer.result(&BALANCE, Some(now.run), signed(now.run, show), None, BALANCE.meaning.to_owned());
    let area = case.digits.unit.from_si(1.0).unwrap_or(1.0);
    let unit = if case.digits.unit.symbol == "m" { "m²" } else { "ft²" };
    let shown = Shown { text: significant(now.squares * area * area, 4), unit };
    answer.result(&SQUARES, Some(now.squares), shown, None, SQUARES.meaning.to_owned());
    let worth = now.worth(&case.budget);
    for (promise, part) in
        [(&WORTH, &worth.total()), (&WORTH_COLLIMATION, &worth.collimation), (&WORTH_CURVE, &worth.curve)]
    {
        let (shown, doubt) = site::with_doubt(part, show);
        answer.result(promise, Some(part.bias), shown, Some(doubt), promise.meaning.to_owned());
    }
    let fore = next_fore(case).map(|(fore, _)| (fore, show.distance(fore, Round::Near)));
    maybe(answer, &NEXT_FORE, fore, "no setup stands whose back sight has a distance");
}

fn wires(case: &Case, show: Show, answer: &mut Answer) {
    let unequal = case.book.sights().filter_map(|s| s.1.wires).map(|w| w.unequal());
    // Readings are whole nanometres.
    let most = unequal.reduce(f64::max).map(exact);
    maybe(answer, &HALVES, most.map(|m| (m, show.entered(m))), "no sight has three wires");
}

/// Whether the level has moved, by its back sight read again.
fn reread(asked: &Asked, case: &Case, show: Show, answer: &mut Answer) {
    let Some((again, setup)) = asked.number(&REREAD).zip(case.book.run.setups.last()) else {
        return answer.idle(&SHIFT, "the back sight was not read again");
    };
    let first = setup.back.reading;
    let again = if first < 0.0 { -again } else { again };
    let shift = exact(again - first);
    // Two readings of a level that stands still, each with its doubt.
    let growth = case.budget.reading_growth.0 * setup.back.distance.unwrap_or(0.0);
    let most = std::f64::consts::SQRT_2 * libm::hypot(case.budget.reading.0, growth);
    let meaning = if shift.abs() <= most {
        format!("not moved: two readings may differ by {}", show.own(most))
    } else {
        let text = format!(
            "The back sight read again differs by {}; a level that stands still differs by {} at most. It has moved, or one of the two was misread: book this setup anew.",
            show.entered(shift.abs()),
            show.own(most)
        );
        answer.caution(text);
        format!("moved, or misread: more than {}", show.own(most))
    };
    answer.result(&SHIFT, Some(shift), show.entered(shift), None, meaning);
}

fn slope(case: &Case, show: Show, answer: &mut Answer) {
    let ends = case.limits.slope.map(|s| s.0);
    let of = |end: Option<f64>| end.filter(|d| d.is_finite()).map(|d| (d, show.distance(d, Round::Down)));
    let none = "enter the slope of the ground, and the length of the staff for downhill";
    maybe(answer, &UPHILL, of(ends.map(|e| e[0])), none);
    maybe(answer, &DOWNHILL, of(ends.map(|e| e[1])), none);
}
