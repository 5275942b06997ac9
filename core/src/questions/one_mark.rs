//! What does distance do to levels set out from one mark?

mod case;
mod decide;
mod figure;
mod sheet;

use crate::quantity::unit::Quantity;
use crate::question::field::Field;
use crate::question::{Answer, Asked, Caution, Promised, Question, site};
use case::Case;

pub const QUESTION: Question = Question {
    id: "one_mark",
    phrase: "What does distance do to levels set out from one mark?",
    about: "For a level, a laser or a machine that works from one benchmark: how high or low it builds, and within which distance it may finish.",
    fields: &[
        MARK,
        site::TOLERANCE,
        site::LINE_HEIGHT,
        site::SKY,
        WORKS,
        site::COLLIMATION,
        site::COLLIMATION_DOUBT,
        site::K,
        site::K_DOUBT,
        site::K_SHARED,
        site::RADIUS,
        site::SHARE,
        site::READING_DOUBT,
        site::READING_GROWTH,
        DISTANCE_DOUBT,
        site::UNITS,
    ],
    results: &[
        FINISH,
        ERROR,
        ERROR_SUNNY,
        ERROR_OVERCAST,
        ERROR_NIGHT,
        COLLIMATION_PART,
        BEST_MARK,
        BEST_WORST,
        site::K_IN_FORCE,
    ],
    cautions: &[
        Caution {
            text: "Lasers: the lowest class that does the work, above or below eye level, off when nobody attends; beware of mirrors, glass and water, and put no optics into the beam.",
            governed_by: "the radiation and labour authorities of the place",
        },
        Caution {
            text: "Plant: stay out of its reach until the operator has seen you and stopped.",
            governed_by: "the principal contractor",
        },
        Caution {
            text: "Never point a telescope at or near the sun: it blinds at once.",
            governed_by: "your site's safety rules and the maker's manual",
        },
        Caution {
            text: "Check on a second mark before concrete is poured. The verdict is about the tolerance you entered.",
            governed_by: "the contract, and the surveyor in charge",
        },
    ],
    sources: &[
        "Built too high by C(D) − C(D₀) + α (D − D₀), D to the work, D₀ to the mark: one setup with two unequal sights.",
        "Curvature and refraction: closed forms for a ray of constant k, derived for this calculator and checked to 50 digits.",
        "k by height of the line and sky: a rule of this calculator, not a published table.",
        "Doubt and adding in squares: JCGM 100:2008, 5.1.2. Bias plus doubt within a share of the tolerance: a planning rule of this calculator.",
    ],
    answer,
};

const MARK: Field = Field::number("mark_distance", "Distance to the mark", Quantity::Distance, "30 m")
    .range(site::NEAREST, site::FARTHEST, site::DISTANCES)
    .help("From the level or laser to the benchmark the height is taken from. Paces are good enough.")
    .required();
const AT: Field = Field::number("distance", "Distance", Quantity::Distance, "300 m")
    .range(site::NEAREST, site::FARTHEST, site::DISTANCES)
    .help("From the level or laser to the work.")
    .required();
const ITS_TOLERANCE: Field = Field::number("tolerance", "Its own tolerance", Quantity::SmallLength, "10 mm")
    .range(0.00001, 10.0, "a hundredth of a millimetre is finer than any staff, ten metres is no tolerance")
    .help("Left empty: the one for all.");
const NAME: Field =
    Field::text("name", "What is there", 24, "it must fit into a line", "far kerb").help("To find it again.");
const WORKS: Field = Field::table("work_distances", "Where the work is", &[AT, ITS_TOLERANCE, NAME], "place")
    .rows(100, "a range card holds no more")
    .help("Distances from the level or laser, not from the mark. Left empty: a row of usual ones.")
    .example("50\t\n120\n300\t20\tfar kerb");
const DISTANCE_DOUBT: Field = site::DISTANCE_DOUBT
    .help("Pacing is good to a twentieth (common practice, no source). Only the bias depends on it.")
    .default("5 %");

const FINISH: Promised = Promised::new(
    "finish_radius",
    "Finish within",
    "farthest work whose bias and doubt are within the allowance, with the mark where it is",
);
const ERROR: Promised =
    Promised::new("error", "Farthest work comes out", "in the air as entered; + too high, − too low");
const ERROR_SUNNY: Promised =
    Promised::new("error_sunny", "The same in the sun", "by day over hot ground, k by our guide");
const ERROR_OVERCAST: Promised =
    Promised::new("error_overcast", "The same under cloud", "overcast or windy, k by our guide");
const ERROR_NIGHT: Promised =
    Promised::new("error_clear_night", "The same by night", "on a clear calm night, k by our guide");
const COLLIMATION_PART: Promised = Promised::new(
    "collimation_part",
    "Of that, the level",
    "what collimation or cone error puts into the farthest work; + too high",
);
const BEST_MARK: Promised = Promised::new(
    "best_mark_distance",
    "Best distance of the mark",
    "where a mark would have to stand for the worst of the works to be least",
);
const BEST_WORST: Promised =
    Promised::new("best_mark_worst", "Worst from there", "bias and doubt together of the worst of the works then");

fn answer(asked: &Asked, answer: &mut Answer) {
    let case = Case::of(asked);
    decide::decide(asked, &case, answer);
    sheet::fill(asked, &case, answer);
    answer.figure = Some(figure::draw(&case, asked.show()));
}
