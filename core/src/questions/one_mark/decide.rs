//! The decision.

use super::case::Case;
use crate::air::guide::Sky;
use crate::doubt::{Estimate, State};
use crate::quantity::show::{Round, Show};
use crate::quantity::unit::Unit;
use crate::question::{Answer, Asked, site};
use crate::questions::sight::range_words;

/// A move of the mark by less than this share of its distance is not worth naming.
const WORTH_MOVING: f64 = 0.1;

/// Sets the verdict.
pub fn decide(asked: &Asked, case: &Case, answer: &mut Answer) {
    let show = asked.show();
    let Some(worst) = case.worst() else { return };
    let at = show.distance(worst.at, Round::Near);
    let allowed = show.entered(worst.allowed);
    let verdict = &mut answer.verdict;
    verdict.state = worst.state();
    let radius = case.finish.map(|s| range_words(s, show));
    let comes = format!("At {at} it comes out {}; {allowed} is allowed.", comes_out(&worst.error, show));
    let Some(radius) = radius else {
        verdict.word = "No distance will do";
        verdict.sentence = format!(
            "Two readings alone are in doubt by {}, and {} is allowed. Read finer, or allow more.",
            show.own(case.error(case.mark).half()),
            show.entered(case.allowed)
        );
        return;
    };
    if verdict.state == State::Within {
        verdict.word = "Set out from it";
        verdict.sentence = format!("{comes} For {}, the work may be {radius} off.", show.entered(case.allowed));
        verdict.number = radius;
        return;
    }
    verdict.word = "Finish within";
    verdict.number = match case.finish {
        Some(s) if s.open_below && !s.open_above => show.distance(s.to, Round::Down).to_string(),
        _ => radius,
    };
    verdict.sentence =
        [comes, remedy(case, show), hint(asked, worst.error.half() > worst.error.bias.abs()).to_owned()].concat();
}

/// What another mark would do.
fn remedy(case: &Case, show: Show) -> String {
    let (best, worst) = case.best;
    let least = case.places.iter().map(|p| p.allowed).fold(f64::INFINITY, f64::min);
    let there = show.distance(best, Round::Near);
    if (best - case.mark).abs() < WORTH_MOVING * case.mark {
        " Beyond it, carry the level forward.".to_owned()
    } else if worst <= least {
        format!(" With a mark {there} off, all of it is within.")
    } else {
        format!(
            " Beyond it, carry the level forward: even with a mark {there} off, the worst would be {}.",
            show.own(worst)
        )
    }
}

/// The sky, where it was not chosen and its doubt is most of it.
fn hint(asked: &Asked, doubt_rules: bool) -> &'static str {
    let open = site::sky(asked) == Sky::Unknown && !asked.given(&site::K);
    if open && doubt_rules { " Choose the sky: not knowing it is most of the doubt." } else { "" }
}

/// "6.1 mm high (± 2.1 mm)", or its range where that is lopsided.
pub fn comes_out(error: &Estimate, show: Show) -> String {
    let (unit, half) = (show.small_unit(error.worst()), error.half());
    let range = if error.lopsided() {
        let end = |si: f64| side(show, unit, si, half);
        format!("{} to {}", end(error.bias - error.below), end(error.bias + error.above))
    } else {
        format!("± {}", show.small_in(unit, half, half))
    };
    format!("{} ({range})", high_or_low(error, show))
}

/// "6.1 mm high", to the digits that the doubt leaves it.
pub fn high_or_low(error: &Estimate, show: Show) -> String {
    if error.bias == 0.0 {
        return "true".to_owned();
    }
    let grain = if error.half() > 0.0 { error.half() } else { error.bias / 10.0 };
    side(show, show.small_unit(error.worst()), error.bias, grain)
}

fn side(show: Show, unit: &Unit, si: f64, grain: f64) -> String {
    [show.small_in(unit, si.abs(), grain).to_string().as_str(), if si < 0.0 { " low" } else { " high" }].concat()
}
