//! The decision.

use super::case::{Case, Sets, seconds, tilt};
use crate::doubt::State;
use crate::pairs::reading_to_set;
use crate::quantity::Tilt;
use crate::quantity::show::Show;
use crate::question::Answer;

/// Whether turning the screw can make it better: the far staff shows the error, and its doubt does not hide it.
pub fn worth_adjusting(case: &Case) -> bool {
    let far = case.far();
    let out = case.error.bias.abs();
    out * far.distance.0 > case.readable(far) && out > case.error.half()
}

/// Sets the verdict.
pub fn decide(case: &Case, show: Show, answer: &mut Answer) {
    let Case { error, limit, .. } = case;
    let half = error.half();
    let value = tilt(show, error.bias, half);
    let words = format!(
        "{} ± {}, and {} is allowed ({})",
        value.text,
        tilt(show, half, half),
        tilt(show, *limit, *limit),
        case.whose
    );
    if let Sets::Two { difference, explained, agree: false } = case.sets {
        answer.not_known(format!(
            "The two sets differ by {}, their readings explain {}: one reading is wrong, or a peg moved. Read both sets again before you touch the level.",
            tilt(show, difference.abs(), explained),
            tilt(show, explained, explained)
        ));
        return;
    }
    let state = error.state(*limit);
    if state == State::Doubtful && half > *limit {
        answer.not_known(format!(
            "{words}: the doubt alone exceeds the limit. {}, and test again under cloud or early, the line high over the ground.",
            if matches!(case.sets, Sets::One(_)) { "Read a second set" } else { "Read finer" }
        ));
        return;
    }
    let cost = format!("10 m of imbalance costs {}.", show.small(10.0 * error.bias.abs(), 10.0 * half));
    let verdict = &mut answer.verdict;
    verdict.state = state;
    // As an angle: mm/m would be too long for a phone beside the word.
    verdict.number = seconds(show, error.bias, half).to_string();
    (verdict.word, verdict.sentence) = match state {
        State::Within => (
            "Within the limit",
            format!("{words}. {cost} Balance the sights; where you cannot, apply it. Leave the screw alone."),
        ),
        State::Beyond if matches!(case.sets, Sets::One(_)) => (
            "Repeat the test",
            format!(
                "{words}: it is out. Read a second set before anything is touched; until then balance every setup. {cost}"
            ),
        ),
        State::Beyond if worth_adjusting(case) => {
            let set = show.height(reading_to_set(case.far(), Tilt(error.bias)).0);
            (
                "Adjust or apply",
                format!(
                    "{words}, and both sets say so. Balance, or apply it; to adjust, set the far staff to {set}, then test again. {cost}"
                ),
            )
        }
        State::Beyond => (
            "Balance and apply",
            format!(
                "{words}, but at the far staff that is less than a reading can tell: adjusting would be a guess. {cost}"
            ),
        ),
        _ => (
            "At the limit",
            format!(
                "{words}: the doubt reaches across it. Balance every setup, and test again before you adjust. {cost}"
            ),
        ),
    };
}
