//! What do these levels come to?

mod candidates;
mod case;
mod columns;
mod decide;
mod digits;
mod fields;
mod figure;
mod flags;
mod inters;
mod levels;
mod rows;
mod running;
mod sheet;
mod stop;
mod twice;
mod working;

use crate::question::{Answer, Asked, Caution, Promised, Question, site};
use crate::questions::sight;
use case::Case;
use columns::BOOK;
use fields::*;

pub const QUESTION: Question = Question {
    id: "book",
    phrase: "What do these levels come to?",
    about: "A level book that guards as you book: levels both ways, the balance in millimetres, what is lost at the intermediate sights, and how it closes.",
    fields: &[
        START,
        BOOK,
        REREAD,
        site::LINE_HEIGHT,
        site::SKY,
        CLOSE,
        LIMIT,
        OWN,
        LENGTH,
        COUNTS,
        ADJUST,
        REASON,
        site::COLLIMATION,
        site::COLLIMATION_DOUBT,
        STADIA,
        site::K,
        site::K_DOUBT,
        site::K_SHARED,
        site::RADIUS,
        sight::STAFF,
        SECTION,
        LOWEST,
        sight::INSTRUMENT,
        SLOPE,
        SIGHT_LIMIT,
        IMBALANCE,
        WIRES,
        TOLERANCE,
        site::READING_DOUBT,
        site::READING_GROWTH,
        sight::DISTANCE_DOUBT,
        twice::SECOND,
        stop::LEFT_A,
        stop::LEFT_B,
        stop::LEFT_C,
        stop::FOUND_A,
        stop::FOUND_B,
        stop::FOUND_C,
        site::UNITS,
    ],
    results: &[
        LAST,
        CORRECTED,
        MISCLOSURE,
        MISCLOSURE_CORRECTED,
        ALLOWED,
        SETUPS,
        RUN_LENGTH,
        SUM_BACK,
        SUM_FORE,
        BALANCE,
        SQUARES,
        WORTH,
        WORTH_COLLIMATION,
        WORTH_CURVE,
        NEXT_FORE,
        OUTSIDE,
        BEST_BACK,
        HALVES,
        SHIFT,
        UPHILL,
        DOWNHILL,
        site::K_IN_FORCE,
        candidates::LEAVES,
        twice::PER_KM,
        twice::APART,
        stop::CHANGE,
    ],
    cautions: &[
        Caution {
            text: "Beside traffic, plant or a drop, one person watches while the other reads; nobody steps back while reading.",
            governed_by: "the highway authority, and the site's traffic and safety plan",
        },
        Caution {
            text: "Look up before a staff goes up: assume every overhead line is live, and never raise a staff to measure one.",
            governed_by: "the line's owner and the safety law of the place",
        },
        Caution {
            text: "Never point a telescope at or near the sun: it blinds at once.",
            governed_by: "your site's safety rules and the maker's manual",
        },
        Caution {
            text: "The verdict is about the limit that stands here. Your specification and the surveyor in charge come first.",
            governed_by: "the contract, and the law on licensed practice",
        },
    ],
    sources: &[
        "Reduction by height of collimation and by rise and fall, page sums: common practice of the level book; checked against worked examples in Ghilani & Wolf, Elementary Surveying.",
        "Three wires: a third of the difference of the half intervals, US Army FM 3-34.331, table 7-1.",
        "Curvature and refraction: closed forms for a ray of constant k; k by height of the line and sky is a rule of this calculator, not a published table.",
        "Doubt, coverage and adding in squares: JCGM 100:2008, 5.1.2 and 6.3.3.",
    ],
    answer,
};

const LAST: Promised =
    Promised::new("last_level", "Last level", "of the last point that carries the level on, as booked");
const CORRECTED: Promised = Promised::new(
    "corrected_level",
    "Last level, corrected",
    "curvature, refraction and collimation taken out where both distances are known",
);
const MISCLOSURE: Promised =
    Promised::new("misclosure", "Misclosure as booked", "observed less known level of the closing mark; + ran high");
const MISCLOSURE_CORRECTED: Promised =
    Promised::new("misclosure_corrected", "Misclosure, corrected", "the same with the corrected levels");
const ALLOWED: Promised = Promised::new("allowed", "Allowed", "by the limit chosen");
const SETUPS: Promised = Promised::new("setups", "Setups", "that have their fore sight");
const RUN_LENGTH: Promised = Promised::new("length_run", "Length", "of the run, along its sights");
const SUM_BACK: Promised = Promised::new("sum_back", "Σ back sights", "of the setups that have their fore sight");
const SUM_FORE: Promised = Promised::new("sum_fore", "Σ fore sights", "of the same setups");
const BALANCE: Promised = Promised::new(
    "balance",
    "Balance",
    "Σ(back − fore distance) since the last mark; + the back sights were the longer ones",
);
const SQUARES: Promised =
    Promised::new("balance_squares", "Balance of the squares", "Σ(back² − fore² of the distances) since the last mark");
const WORTH: Promised = Promised::new(
    "worth",
    "Now worth",
    "what unequal sights have put into the level since the last mark; + it is carried too high",
);
const WORTH_COLLIMATION: Promised =
    Promised::new("worth_collimation", "Of that, collimation", "collimation error × Σ(back − fore distance)");
const WORTH_CURVE: Promised = Promised::new("worth_curve", "Of that, curve and air", "(1 − k)/2R × Σ(back² − fore²)");
const NEXT_FORE: Promised = Promised::new(
    "next_fore",
    "Next fore sight",
    "brings the balance back to nothing, or as near as the limit lets it",
);
const OUTSIDE: Promised = Promised::new(
    "outside",
    "Intermediate points outside",
    "whose bias and doubt together pass their tolerance as booked",
);
const BEST_BACK: Promised = Promised::new(
    "best_back",
    "Best back sight for them",
    "so far from the mark the worst intermediate point of that setup would be best",
);
const HALVES: Promised =
    Promised::new("half_intervals", "Half intervals differ by", "at most, of all sights with three wires");
const SHIFT: Promised =
    Promised::new("shift", "Read again", "less the back sight as booked; + the line has risen since");
const UPHILL: Promised =
    Promised::new("uphill", "Uphill at most", "on this slope, before the line comes too near the ground");
const DOWNHILL: Promised =
    Promised::new("downhill", "Downhill at most", "on this slope, before the line leaves the staff");

fn answer(asked: &Asked, answer: &mut Answer) {
    let case = Case::of(asked);
    answer.problems.extend_from_slice(&case.book.problems);
    answer.problems.extend(twice::second(asked).problems);
    if let Some(first) = answer.problems.first() {
        let why = first.message.clone();
        answer.not_known(why);
        return;
    }
    decide::decide(asked, &case, answer);
    let inters = inters::all(&case);
    sheet::fill(asked, &case, &inters, answer);
    candidates::fill(asked, &case, answer);
    twice::fill(asked, &case, answer);
    stop::fill(asked, &case.budget, answer);
    levels::fill(&case, answer);
    inters::fill(&case, &inters, answer);
    working::fill(&case, answer);
    answer.figure = Some(figure::draw(&case));
}
