//! May this sight run this far?

mod case;
mod decide;
mod figure;
mod limit;
mod sheet;
mod working;

use crate::limits;
use crate::quantity::unit::Quantity;
use crate::question::field::{Field, Opt};
use crate::question::{Answer, Asked, Caution, Promised, Question, site};
use case::Case;
pub use decide::range_words;

pub const QUESTION: Question = Question {
    id: "sight",
    phrase: "May this sight run this far?",
    about: "Paces, tolerance, height of the line and sky: take it, shorten it, balance it or observe it both ways.",
    fields: &[
        site::DISTANCE,
        site::TOLERANCE,
        site::LINE_HEIGHT,
        site::SKY,
        OTHER,
        site::COLLIMATION,
        site::COLLIMATION_DOUBT,
        site::K,
        site::K_DOUBT,
        site::K_SHARED,
        site::RADIUS,
        STAFF,
        INSTRUMENT,
        SLOPE,
        CLEARANCE,
        site::SHARE,
        CLASS,
        site::READING_DOUBT,
        site::READING_GROWTH,
        DISTANCE_DOUBT,
        site::UNITS,
    ],
    results: &[
        BIAS,
        DOUBT,
        REACH_UNCORRECTED,
        REACH_CORRECTED,
        OTHER_SHORTEST,
        OTHER_LONGEST,
        BOTH_WAYS,
        CURVATURE,
        REFRACTION,
        COLLIMATION_PART,
        READING_PART,
        DISTANCE_PART,
        site::K_IN_FORCE,
    ],
    cautions: &[
        Caution {
            text: "Never point a telescope at or near the sun: it blinds at once.",
            governed_by: "your site's safety rules and the maker's manual",
        },
        Caution {
            text: "Keep staffs and poles away from overhead lines: wet or dry, wood or metal, they can kill.",
            governed_by: "the line's owner and the safety law of the place",
        },
        Caution {
            text: "Beside traffic, plant, water or a drop, one person watches while the other observes.",
            governed_by: "the site's traffic and safety plan",
        },
        Caution {
            text: "The verdict is about the limit you entered. Your specification and the surveyor in charge come first.",
            governed_by: "the contract, and the law on licensed practice",
        },
    ],
    sources: &[
        "Curvature and refraction: closed forms for a ray of constant k (refractive index in proportion to a power of the radius), derived for this calculator and checked to 50 digits.",
        "Parabola D²/2R and (1 − k) D²/2R: Ghilani & Wolf, Elementary Surveying, chapter 4.",
        "k by height of the line and sky: a rule of this calculator, not a published table; bracketed by k from −4 to +16 seen 1.8 m over grass (Hirt and others, J. Geophys. Res. 115, D21102, 2010).",
        "Doubt, coverage and adding in squares: JCGM 100:2008, Guide to the expression of uncertainty in measurement, 5.1.2 and 6.3.3.",
        "Bias plus doubt within a share of the tolerance: a planning rule of this calculator; the share is yours to set.",
    ],
    answer,
};

pub const GROUND: &str = "Staff and ground";

const OTHER: Field = Field::number("other_distance", "The other sight of the setup", Quantity::Distance, "55 m")
    .range(site::NEAREST, site::FARTHEST, site::DISTANCES)
    .help("Back sight to this fore sight, or the other way round. Left empty: this sight stands alone, as an intermediate one does.")
    .under("The setup");
pub const DISTANCE_DOUBT: Field = site::DISTANCE_DOUBT
    .help("Pacing is good to a twentieth (common practice, no source). Only the bias depends on it.")
    .default("5 %");
pub const STAFF: Field = Field::number("staff_length", "Length of the staff", Quantity::Height, "4 m")
    .range(0.1, 20.0, "staffs are between a short scale and a long telescopic one")
    .help("Left empty: the top of the staff is no limit.")
    .under(GROUND);
pub const INSTRUMENT: Field = Field::number("instrument_height", "Height of the instrument", Quantity::Height, "1.5 m")
    .range(0.0, 100.0, "of the line over the ground where the level stands")
    .help("Of its line over the ground where it stands. Left empty: the height of the line.")
    .under(GROUND);
const SLOPE: Field = Field::number("ground_slope", "Slope of the ground", Quantity::Gradient, "4 %")
    .range(-2.0, 2.0, "steeper than two in one is no ground to level over")
    .help("Towards the staff: + uphill, − downhill. Uphill the line meets the foot of the staff, downhill it leaves the top.")
    .under(GROUND);
const CLEARANCE: Field =
    Field::number("ground_clearance", "Least clearance over the ground", Quantity::Height, "0.5 m")
        .range(0.0, 100.0, "it is a height over the ground")
        .help("How close to the ground the line may come. Left empty: only the ground itself is in the way.")
        .under(GROUND);
#[allow(clippy::indexing_slicing, reason = "worked out and checked while compiling")]
const CLASS_OPTIONS: &[Opt] = &{
    let mut options = [Opt { value: "none", label: "no class: your own limit only" }; limits::CLASSES.len() + 1];
    let mut i = 0;
    while i < limits::CLASSES.len() {
        options[i + 1] = Opt { value: limits::CLASSES[i].name, label: limits::CLASSES[i].label };
        i += 1;
    }
    options
};
const CLASS: Field =
    Field::choice("limit_class", "Published class", CLASS_OPTIONS, "they are the classes whose limits we hold")
        .help("Its longest sight becomes one more limit. Your specification governs.")
        .default("none")
        .under(site::RULE);
const BIAS: Promised = Promised::new(
    "bias",
    "Bias",
    "what the reading, or the difference of the two, is expected to be out by; + reads too much",
);
const DOUBT: Promised =
    Promised::new("doubt", "Doubt", "95 % half-width about the bias; the greater side where the two differ");
const CURVATURE: Promised = Promised::new("curvature", "Curvature", "what the earth's curve adds to the reading");
const REFRACTION: Promised =
    Promised::new("refraction", "Refraction", "what the bent line adds to the reading; − where it bends down, k > 0");
const COLLIMATION_PART: Promised =
    Promised::new("collimation_part", "Collimation", "what the level's own error adds to the reading");
const READING_PART: Promised = Promised::new("reading_part", "Reading", "doubt of the reading itself");
const DISTANCE_PART: Promised =
    Promised::new("distance_part", "Distance", "doubt because the distance is not known exactly");
const REACH_UNCORRECTED: Promised = Promised::new(
    "reach_uncorrected",
    "Reach, nothing corrected",
    "longest sight whose bias and doubt are within the allowance",
);
const REACH_CORRECTED: Promised = Promised::new(
    "reach_corrected",
    "Reach, correction applied",
    "longest sight whose doubt alone is within the allowance",
);
const OTHER_SHORTEST: Promised =
    Promised::new("other_shortest", "Other sight at least", "shortest other sight that still balances this one");
const OTHER_LONGEST: Promised =
    Promised::new("other_longest", "Other sight at most", "longest other sight that still balances this one");
const BOTH_WAYS: Promised = Promised::new(
    "both_ways",
    "Doubt when observed both ways",
    "95 % half-width of the mean of the differences seen from both ends",
);

fn answer(asked: &Asked, answer: &mut Answer) {
    let case = Case::of(asked, site::sky(asked));
    let limits = limit::all(asked, &case);
    decide::decide(asked, &case, &limits, answer);
    sheet::fill(asked, &case, &limits, answer);
    answer.figure = Some(figure::draw(asked, &case));
}
