//! The decision.

use super::case::{Adjusted, Case, exact, first_level};
use super::fields::{LIMIT, REASON};
use crate::doubt::Estimate;
use crate::limits;
use crate::quantity::show::{Round, Show, Shown};
use crate::question::answer::{Answer, State};
use crate::question::{Asked, site};

/// Sets the verdict, and says what goes with it.
pub fn decide(asked: &Asked, case: &Case, answer: &mut Answer) {
    let show = asked.show();
    if case.book.run.setups.is_empty() {
        return answer.not_known("No reading is booked yet. Begin with a back sight.".to_owned());
    }
    match case.judged() {
        Some(off) => closed(asked, case, off, answer),
        None => so_far(case, show, answer),
    }
    notes(asked, case, answer);
}

/// "7 mm high": by so many digits as were read, or by a tenth of a millimetre where it was corrected.
pub fn ran(off: f64, corrected: bool, show: Show) -> String {
    let size = misclosure(off.abs(), corrected, show);
    match off {
        o if o > 0.0 => format!("{size} high"),
        o if o < 0.0 => format!("{size} low"),
        _ => "true".to_owned(),
    }
}

/// A misclosure with its sign.
pub fn misclosure(off: f64, corrected: bool, show: Show) -> Shown {
    if corrected { show.small(off, 0.001) } else { show.entered(off) }
}

fn closed(asked: &Asked, case: &Case, off: f64, answer: &mut Answer) {
    let show = asked.show();
    let (which, besides, other) = if case.by_corrected {
        ("corrected", "As booked", case.misclosure())
    } else {
        ("as booked", "Corrected", case.misclosure_corrected())
    };
    let ran_words = ran(off, case.by_corrected, show);
    let Some(allowed) = case.allowed else {
        let missing = match case.rule {
            None => "enter your own limit",
            Some(_) => "it goes by length: enter the distances, or the length of the run",
        };
        answer.not_known(format!("The run came out {ran_words}, {which}. What is allowed is not known: {missing}."));
        return;
    };
    let within = off.abs() <= allowed;
    let rule = limits::closure(asked.choice(&LIMIT)).map_or("your own limit", |c| c.label);
    let verdict = &mut answer.verdict;
    (verdict.word, verdict.state) =
        if within { ("It closes", State::Within) } else { ("It does not close", State::Beyond) };
    verdict.number.clone_from(&ran_words);
    verdict.sentence =
        format!("The run came out {ran_words}, {which}; {} is allowed by {rule}.", show.entered(allowed));
    if let Some(other) = other {
        let turned = if (other.abs() <= allowed) != within { ", which would turn the verdict" } else { "" };
        verdict.sentence.push_str(&format!(" {besides} it came out {}{turned}.", ran(other, !case.by_corrected, show)));
    }
}

/// The run is still being booked, or closes on nothing known.
fn so_far(case: &Case, show: Show, answer: &mut Answer) {
    let last = case.digits.shown(case.last());
    let now = case.running.now;
    let verdict = &mut answer.verdict;
    verdict.word = "So far";
    verdict.number = last.to_string();
    let since = case.running.since.map_or(String::new(), |spot| case.book.name(spot));
    let worth = now.worth(&case.budget).total();
    let (size, _) = site::with_doubt(&Estimate { bias: worth.bias.abs(), ..worth }, show);
    let way = match worth.bias {
        w if w > 0.0 => ", carried too high",
        w if w < 0.0 => ", carried too low",
        _ => "",
    };
    let balance = match now.run {
        r if r > 0.0 => format!("back sights {} longer in all", show.distance(r, Round::Near)),
        r if r < 0.0 => format!("fore sights {} longer in all", show.distance(-r, Round::Near)),
        _ => "sights balanced".to_owned(),
    };
    verdict.sentence = if case.book.done() == 0 {
        format!("The first setup has no fore sight yet. {}", next_words(case, show))
    } else if now.setups == 0 && now.missing > 0 {
        format!(
            "Level of the last point carried on. No setup since {since} has both its distances: the balance is not known."
        )
    } else {
        format!(
            "Level of the last point carried on. Since {since}: {balance}, now worth {size}{way}. {}",
            next_words(case, show)
        )
    };
    if case.close.is_some() && case.book.standing().is_some() {
        verdict.sentence.push_str(" The last setup has no fore sight yet: it has not closed.");
    }
}

/// What brings the balance back.
fn next_words(case: &Case, show: Show) -> String {
    let distance = |d: f64| show.distance(d, Round::Near);
    match next_fore(case) {
        Some((fore, rest)) if rest.abs() < 0.5 => format!("A fore sight of {} balances it.", distance(fore)),
        Some((fore, rest)) => {
            format!(
                "A fore sight of {} is as near as the limits allow; {} would be left.",
                distance(fore),
                distance(rest.abs())
            )
        }
        None => match case.running.now.run {
            r if r > 0.5 => format!("Make the next fore sights the longer ones, by {} in all.", distance(r)),
            r if r < -0.5 => format!("Make the next back sights the longer ones, by {} in all.", distance(-r)),
            _ => "Keep the next sights equal.".to_owned(),
        },
    }
}

/// The fore sight of the standing setup that brings the balance back, and what is left of it.
///
/// Within what two sights may differ, not longer than the longest sight, and not shorter than a third of the back sight: a
/// shorter one wins no ground.
pub fn next_fore(case: &Case) -> Option<(f64, f64)> {
    let (setup, _) = case.book.standing()?;
    let back = setup.back.distance?;
    let limits = &case.limits;
    let most = limits.sight.max(back).min(back + limits.imbalance);
    Some(case.running.now.next_fore(back, most, (back / 3.0).max(back - limits.imbalance)))
}

fn notes(asked: &Asked, case: &Case, answer: &mut Answer) {
    let show = asked.show();
    if case.misclosure().is_some() && case.circuit {
        answer.note("It closed on its own mark: that proves neither the mark's level nor the scale of the staff.");
    }
    if let Some(c) = limits::closure(asked.choice(&LIMIT)).filter(|_| case.misclosure().is_some()) {
        answer.note(format!("{}. Your specification governs.", c.source));
    }
    match &case.adjusted {
        Adjusted::Refused(why) => answer.caution(format!("Nothing was spread: {why}.")),
        Adjusted::By(_) => {
            let reason = asked.text(&REASON);
            let why = if reason.is_empty() { String::new() } else { format!(" Reason given: {reason}.") };
            answer.note(format!("The misclosure is spread over the run; what was read stays as it was.{why}"));
        }
        Adjusted::No => {}
    }
    for mark in case.marks.iter().take(20) {
        let off = ran(exact(mark.observed - mark.known), false, show);
        answer.note(format!("At {} the run is {off} against the known level.", mark.name));
    }
    let missing = case.running.whole.missing;
    if missing > 0 {
        answer.note(format!("{missing} of {} setups lack a distance and are taken as balanced.", case.book.done()));
    }
    if first_level(asked).is_none() {
        answer.note("No level of the first mark was entered: every level is a height over it.");
    }
}
