//! The decision.

use super::case::{Case, View};
use crate::quantity::show::Round;
use crate::question::Asked;
use crate::question::answer::{Answer, State};

/// Sets the verdict.
pub fn decide(asked: &Asked, case: &Case, answer: &mut Answer) {
    let show = asked.show();
    let passes = |view: &View| view.chance >= case.chance;
    let fails = |view: &View| view.chance <= 1.0 - case.chance;
    let verdict = &mut answer.verdict;
    (verdict.word, verdict.state) = match (passes(&case.day), passes(&case.night)) {
        (true, true) => ("It clears", State::Within),
        (false, false) if fails(&case.day) && fails(&case.night) => ("It is blocked", State::Beyond),
        (false, true) => ("By night only", State::Doubtful),
        (true, false) => ("By day only", State::Doubtful),
        (false, false) => ("It may clear", State::Doubtful),
    };
    let half = case.half(case.day.worst);
    let least = show.metres(case.day.least.abs(), half);
    verdict.number = match verdict.state {
        State::Within => format!("by {least}"),
        State::Beyond if case.day.least < 0.0 => format!("by {least}"),
        _ => format!("least {}", show.metres(case.day.least, half)),
    };
    let worst = case.worst().map_or(String::new(), |p| {
        let at = show.distance(p.at, Round::Near);
        if p.name.is_empty() { format!("at {at}") } else { format!("at {}, {at}", p.name) }
    });
    let rules = ruling(case);
    verdict.sentence = format!(
        "Least {worst}: {} over the top, {} wanted, {} in doubt. The whole line clears with a chance of {} by day, {} on a clear night. {rules}",
        show.metres(case.day.least, half),
        show.height_words(case.wanted),
        show.metres(half, half),
        percent(case.day.chance),
        percent(case.night.chance),
    );
}

/// A chance in whole percent, never a certainty.
pub fn percent(chance: f64) -> String {
    match chance * 100.0 {
        c if c < 1.0 => "less than 1 %".to_owned(),
        c if c > 99.0 => "more than 99 %".to_owned(),
        c => format!("{c:.0} %"),
    }
}

/// What to survey better.
fn ruling(case: &Case) -> &'static str {
    let [ground, cover, air] = case.doubt(&case.day, case.day.worst).map_or([0.0; 3], |p| p.shares());
    match (ground, cover, air) {
        (0.0, 0.0, 0.0) => "Nothing is in doubt.",
        _ if ground >= cover && ground >= air => "The ground rules the doubt: level that point.",
        _ if cover >= air => "What stands there rules the doubt: measure it.",
        _ => "The air rules the doubt: look again at another time of day.",
    }
}
