//! The decision.

use super::OTHER;
use super::case::{Case, Count, SEARCH};
use super::limit::{End, Limit, OPTICAL};
use crate::air::guide::Sky;
use crate::quantity::show::{Round, Show};
use crate::question::answer::{Answer, State};
use crate::question::{Asked, site};
use crate::sight::bounds::Stretch;
use crate::sight::budget::Term;

const TAKE: &str = "Take it";
const SHORTEN: &str = "Shorten to";
const BALANCE: &str = "Balance within";
const BOTH: &str = "Observe both ways";
const NONE: &str = "No distance will do";

/// A sight that must shrink to less than this share of itself is better balanced, or observed both ways.
const WORTH_SHORTENING: f64 = 1.0 / 3.0;

/// Sets the verdict.
pub fn decide(asked: &Asked, case: &Case, limits: &[Limit], answer: &mut Answer) {
    let show = asked.show();
    let error = case.error(case.distance);
    let rule = ruling(case, show);
    let verdict = &mut answer.verdict;
    verdict.state = error.state(case.allowed);

    if let Some(broken) = limits.iter().find(|l| !l.alone && l.name != OPTICAL && l.broken_at(case.distance)) {
        verdict.state = State::Beyond;
        // The first limit is the nearest one: this one, or the tolerance before it.
        let nearest = limits.first().unwrap_or(broken);
        let why = if nearest.name == OPTICAL { &rule } else { &sentence_of(nearest, show) };
        match nearest.end {
            End::At(d) => {
                verdict.word = SHORTEN;
                verdict.number = show.distance(d, Round::Down).to_string();
                verdict.sentence = why.clone();
                if nearest.name == OPTICAL {
                    verdict.sentence.push_str(&format!(" Balancing does not help. {}", sentence_of(broken, show)));
                }
            }
            End::Never | End::Always => {
                verdict.word = NONE;
                verdict.sentence = if nearest.name == OPTICAL { too_fine(case, show) } else { why.clone() };
            }
        }
        return;
    }

    if error.worst() <= case.allowed {
        verdict.word = TAKE;
        (verdict.number, verdict.sentence) = taken(case, limits, &rule, show);
        return;
    }

    if let Some(text) = depends_on_sky(asked, show) {
        answer.not_known(format!("{text} {rule}"));
        return;
    }

    // Every other limit lies beyond this distance, or the sight would have been refused above.
    let far = case.reach(Count::All);
    let other = case.other_range();
    let given = asked.given(&OTHER);
    let alone =
        far.map_or("at no distance".to_owned(), |s| format!("no further than {}", show.distance(s.to, Round::Down)));
    let long_enough = far.filter(|s| s.to >= WORTH_SHORTENING * case.distance && s.to < case.distance);
    if given && let Some(range) = other {
        verdict.word = BALANCE;
        verdict.number = range_words(range, show);
        verdict.sentence = format!(
            "The other sight may be {} with this one at {}. {rule}",
            range_words(range, show),
            at(case.distance, show)
        );
    } else if let Some(s) = long_enough.filter(|_| !given) {
        verdict.word = SHORTEN;
        verdict.number = show.distance(s.to, Round::Down).to_string();
        let balance = other
            .map(|range| format!(" Or balance it: with the other sight {} it may stay.", range_words(range, show)));
        verdict.sentence = format!("{rule}{}", balance.unwrap_or_default());
    } else if !given && let Some(range) = other {
        verdict.word = BALANCE;
        verdict.number = range_words(range, show);
        verdict.sentence = format!("By itself it may run {alone}. {rule}");
    } else if case.both_ways().worst() <= case.allowed {
        verdict.word = BOTH;
        verdict.number = format!("± {}", show.own(case.both_ways().half()));
        verdict.sentence = format!(
            "Seen from both ends, at the same time if you can, curvature and collimation cancel; the doubt of the mean is {}. From one end it may run {alone}. {rule}",
            show.own(case.both_ways().half())
        );
    } else {
        shortest_help(case, far, given, &rule, show, answer);
    }
}

/// Nothing keeps the distance: as short as it has to be, or nothing at all.
fn shortest_help(case: &Case, far: Option<Stretch>, given: bool, rule: &str, show: Show, answer: &mut Answer) {
    let verdict = &mut answer.verdict;
    let equal = case.equal_reach().filter(|s| s.to < case.distance);
    if given && let Some(s) = equal {
        let d = show.distance(s.to, Round::Down);
        verdict.word = SHORTEN;
        verdict.number = d.to_string();
        verdict.sentence =
            format!("Not even an equal other sight helps at this distance; both sights may run {d}. {rule}");
    } else if let Some(s) = far.filter(|s| s.open_below && s.to < case.distance) {
        verdict.word = SHORTEN;
        verdict.number = show.distance(s.to, Round::Down).to_string();
        verdict.sentence = format!("Neither balancing nor observing both ways keeps this distance. {rule}");
    } else {
        verdict.word = NONE;
        verdict.sentence = too_fine(case, show);
    }
}

/// Why no distance at all is within what is allowed.
fn too_fine(case: &Case, show: Show) -> String {
    format!(
        "Doubt grows from {} at the shortest sight on, and {} is allowed. Read finer, or allow more.",
        show.own(case.error(SEARCH.0).half()),
        show.entered(case.allowed)
    )
}

/// How far a sight that may be taken might run, and a sentence: how much of the allowance it uses, where the answer flips.
fn taken(case: &Case, limits: &[Limit], rule: &str, show: Show) -> (String, String) {
    let error = case.error(case.distance);
    let mut words =
        format!("Bias and doubt come to {} of the {} allowed.", show.own(error.worst()), show.entered(case.allowed));
    let stretch = case.bounds(Count::All).into_iter().find(|s| s.holds(case.distance));
    let optical = stretch.filter(|s| !s.open_above).map(|s| s.to);
    let other = limits.iter().filter(|l| !l.alone && l.name != OPTICAL).find_map(|l| match l.end {
        End::At(d) => Some((d, l)),
        End::Never | End::Always => None,
    });
    let to = match (other, optical) {
        (Some((d, limit)), to) if to.is_none_or(|to| d < to) => {
            words.push_str(&format!(" {}", sentence_of(limit, show)));
            Some(d)
        }
        (_, Some(to)) => {
            words.push_str(&format!(" {rule} The answer flips at {}.", show.distance(to, Round::Down)));
            Some(to)
        }
        _ => {
            words.push_str(&format!(" No distance is a limit, up to {}.", show.distance(SEARCH.1, Round::Near)));
            None
        }
    };
    if let Some(s) = stretch.filter(|s| !s.open_below) {
        words.push_str(&format!(
            " It holds only from {} on, where the errors cancel.",
            show.distance(s.from, Round::Up)
        ));
    }
    (to.map_or(String::new(), |d| format!("up to {}", show.distance(d, Round::Down))), words)
}

/// "At 38 m the line meets the foot of the staff."
fn sentence_of(limit: &Limit, show: Show) -> String {
    match limit.end {
        End::At(d) => format!("At {} {}.", show.distance(d, Round::Down), limit.why),
        End::Never => format!("No distance is a limit: {}.", limit.why),
        End::Always => format!("Whatever the distance, {}.", limit.why),
    }
}

/// "Refraction rules: up to 5.4 mm of 5.6 mm."
pub fn ruling(case: &Case, show: Show) -> String {
    let parts = case.parts(case.distance);
    let Some(first) = parts.iter().max_by(|a, b| a.error.worst().total_cmp(&b.error.worst())) else {
        return String::new();
    };
    let name = match first.term {
        Term::Curvature => "Curvature",
        Term::Refraction => "Refraction",
        Term::Collimation => "Collimation",
        Term::Reading => "The reading",
        Term::Distance => "The distance",
    };
    format!("{name} rules: up to {} at {}.", show.own(first.error.worst()), at(case.distance, show))
}

/// Where the sky was not chosen and the kinds of daytime sky disagree about this sight, what each would say.
fn depends_on_sky(asked: &Asked, show: Show) -> Option<String> {
    if site::sky(asked) != Sky::Unknown || asked.given(&site::K) {
        return None;
    }
    let skies = [Sky::Sunny, Sky::Overcast].map(|sky| (sky, Case::of(asked, sky)));
    let passes = |c: &Case| c.error(c.distance).worst() <= c.allowed;
    if skies.iter().all(|(_, c)| passes(c)) || !skies.iter().any(|(_, c)| passes(c)) {
        return None;
    }
    let words = skies.iter().map(|(sky, c)| {
        let far = match c.reach(Count::All) {
            None => "no distance will do".to_owned(),
            Some(s) if s.open_above => "no distance is a limit".to_owned(),
            Some(s) => format!("it may run {}", show.distance(s.to, Round::Down)),
        };
        format!("{} {far}", site::sky_words(*sky))
    });
    let words: Vec<String> = words.collect();
    Some(format!("It depends on the sky: {}. Choose the sky.", words.join(", ")))
}

/// "52 to 68 m", or with one end open.
pub fn range_words(range: Stretch, show: Show) -> String {
    match (range.open_below, range.open_above) {
        (true, true) => "of any length".to_owned(),
        (true, false) => format!("up to {}", show.distance(range.to, Round::Down)),
        (false, true) => format!("from {} on", show.distance(range.from, Round::Up)),
        (false, false) => {
            let (from, to) = show.range(range.from, range.to);
            if from.unit == to.unit { format!("{} to {to}", from.text) } else { format!("{from} to {to}") }
        }
    }
}

fn at(d: f64, show: Show) -> String {
    show.distance(d, Round::Near).to_string()
}
