//! How far is the horizon, and what is hidden?

mod case;
mod figure;
mod sheet;

use crate::quantity::unit::Quantity;
use crate::question::field::{Field, Opt};
use crate::question::{Answer, Asked, Caution, Promised, Question, site};
use case::Case;

pub const QUESTION: Question = Question {
    id: "horizon",
    phrase: "How far is the horizon, and what is hidden?",
    about: "Heights of eye and target: whether it shows, and how far off it is raised, by day and by night.",
    fields: &[EYE, TARGET, DISTANCE, SURFACE, site::SKY, SHORE, site::K, site::K_DOUBT, site::RADIUS, site::UNITS],
    results: &[HORIZON, LINE, DIP, HIDDEN, RANGE, site::K_IN_FORCE],
    cautions: &[
        Caution {
            text: "Not for navigation.",
            governed_by: "the official charts, tables and lists of lights, and the officer of the watch",
        },
        Caution {
            text: "Never point a telescope at or near the sun: it blinds at once.",
            governed_by: "your site's safety rules and the maker's manual",
        },
    ],
    sources: &[
        "Horizon, dip and hidden height: closed forms for a line of constant k (refractive index in proportion to a power of the radius), derived for this calculator and checked to 80 digits.",
        "k of nautical tables: Bowditch, The American Practical Navigator, explanation of tables 14 and 15.",
        "k over water, and by height of the line and sky: rules of this calculator, not published tables.",
    ],
    answer,
};

const HIGHEST: f64 = 10_000.0;
const HEIGHTS: &str = "below a centimetre there is no horizon to speak of, and nobody stands higher than 10 km";
const FAR: f64 = 1_000_000.0;
const FAR_OFF: &str = "at the far end the highest mountains are below the horizon";

const EYE: Field = Field::number("eye_height", "Height of the eye", Quantity::Height, "10 m")
    .range(0.01, HIGHEST, HEIGHTS)
    .help("Over the surface as it is now: mind tide and swell.")
    .required();
const TARGET: Field = Field::number("target_height", "Height of the target", Quantity::Height, "30 m")
    .range(0.01, HIGHEST, HEIGHTS)
    .help("Of its top, or its light, over the same surface.");
const DISTANCE: Field = Field::number("target_distance", "Distance of the target", Quantity::Distance, "25 km")
    .range(site::NEAREST, FAR, FAR_OFF)
    .help("Along the surface. Left empty: how far off the target is raised.");
const SURFACE: Field = Field::choice(
    "surface",
    "Surface",
    &[
        Opt { value: "water", label: "water" },
        Opt { value: "nautical", label: "water, k of nautical tables" },
        Opt { value: "ground", label: "flat open ground" },
    ],
    "they are what our rules of k tell apart",
)
.help("What the line grazes. Nautical tables have one k, 0.168, and nautical miles.")
.default("water");
const SHORE: Field = Field::number("shore_distance", "Distance of the shore", Quantity::Distance, "400 m")
    .range(site::NEAREST, FAR, FAR_OFF)
    .help("Where land is nearer than the horizon: the dip is then that of its waterline.");

const HORIZON: Promised =
    Promised::new("horizon_distance", "Horizon", "where the line of sight grazes the surface, along the surface");
const LINE: Promised = Promised::new("horizon_line", "Horizon, straight line", "from the eye to that place");
const DIP: Promised =
    Promised::new("dip", "Dip", "how far the line to the horizon, or to a nearer shore, points below the horizontal");
const HIDDEN: Promised = Promised::new(
    "hidden",
    "Hidden height",
    "what stands lower than this at the target's distance is below the horizon",
);
const RANGE: Promised =
    Promised::new("visible_range", "Raised at", "the distance at which the top of the target comes over the horizon");

fn answer(asked: &Asked, answer: &mut Answer) {
    let case = Case::of(asked);
    sheet::decide(&case, answer);
    sheet::fill(&case, answer);
    site::k_result(&case.air, case.show, answer);
    answer.tables.push(sheet::airs(&case));
    answer.working = sheet::working(&case);
    answer.figure = figure::draw(&case);
}
