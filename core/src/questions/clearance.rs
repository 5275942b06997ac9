//! Does A see B over this ground?

mod case;
mod decide;
mod figure;
mod position;
mod rows;
mod sheet;

use crate::quantity::unit::Quantity;
use crate::question::asked::gpx;
use crate::question::field::{Field, Opt};
use crate::question::{Answer, Asked, Caution, Promised, Question, site};
use case::Case;
use position::*;

pub const QUESTION: Question = Question {
    id: "clearance",
    phrase: "Does A see B over this ground?",
    about: "A walked profile or one read off a map: does the line clear, with what chance by day and by night, and what is the cheapest remedy.",
    fields: &[
        GROUND_A,
        HEIGHT_A,
        GROUND_B,
        HEIGHT_B,
        POSITIONS,
        DISTANCE,
        LATITUDE_A,
        LONGITUDE_A,
        LATITUDE_B,
        LONGITUDE_B,
        EASTING_A,
        NORTHING_A,
        EASTING_B,
        NORTHING_B,
        SCALE,
        PROFILE,
        ASIDE,
        HEIGHTS_FROM,
        SEPARATION,
        OVER,
        WANTED,
        site::SKY,
        site::K,
        site::K_DOUBT,
        NIGHT_K,
        NIGHT_K_DOUBT,
        site::RADIUS,
        GROUND_DOUBT,
        COVER_DOUBT,
        GROUND_SHARED,
        CHANCE,
        site::UNITS,
    ],
    results: &[
        LEAST,
        LEAST_AT,
        CHANCE_DAY,
        CHANCE_NIGHT,
        K_GRAZING,
        RAISE_A,
        RAISE_B,
        RAISE_BOTH,
        DOUBT,
        SHARE_GROUND,
        SHARE_COVER,
        SHARE_K,
        LENGTH,
        AZIMUTH,
        RADIUS_IN_FORCE,
    ],
    cautions: &[
        Caution {
            text: "A line seen by night may be blocked by day: prove it by light in the middle of the day before building on it.",
            governed_by: "the survey's specification",
        },
        Caution {
            text: "Towers, trees and ladders: nobody climbs without the gear and the training for it, nor under power lines or in wind.",
            governed_by: "the law on work at height, and the owner of the ground",
        },
        Caution {
            text: "Felling or lopping needs the owner's leave, and often a permit.",
            governed_by: "the owner and the forestry law of the place",
        },
    ],
    sources: &[
        "Line of sight: closed form for a ray of constant k between two points, derived for this calculator and checked to 60 digits; k along a low line weighted by Green's function of a loaded string.",
        "Clearances over ground: US Army Engineer School, EN0593 Surveying III (2001), paras 2-53 to 2-55, as read.",
        "Chance: one k and part of the ground's error shared by all points; our own integral, checked against sampling.",
        "k by height of the line and sky: a rule of this calculator, not a published table.",
    ],
    answer,
};

const STATIONS: &str = "The limits";
const HEIGHTS: (f64, f64, &str) = (-500.0, 9000.0, "the ground lies between the lowest shore and the highest mountain");
const STANDS: (f64, f64, &str) = (0.0, 1000.0, "no stand is higher");

const fn ground(name: &'static str, label: &'static str) -> Field {
    Field::number(name, label, Quantity::Height, "212 m").range(HEIGHTS.0, HEIGHTS.1, HEIGHTS.2)
}
const fn stand(name: &'static str, label: &'static str, example: &'static str) -> Field {
    Field::number(name, label, Quantity::Height, example).range(STANDS.0, STANDS.1, STANDS.2)
}
const GROUND_A: Field =
    ground("ground_a", "Ground at A").help("Above the datum of the map, as all heights here.").required();
const HEIGHT_A: Field = stand("height_a", "Eye or light at A", "1.5 m").help("Over the ground there.").default("1.5 m");
const GROUND_B: Field = ground("ground_b", "Ground at B").help("Above the same datum.").required();
const HEIGHT_B: Field = stand("height_b", "Eye or light at B", "1.5 m").help("Over the ground there.").default("1.5 m");
const DISTANCE: Field = Field::number("distance", "From A to B", Quantity::Distance, "12 km")
    .range(
        SHORTEST,
        site::FARTHEST,
        "below it nothing has to be reckoned, and no line of sight over the ground is longer",
    )
    .help("Along the ground, as on the map.")
    .required()
    .when("positions", GIVEN);
/// Shortest line, metres.
const SHORTEST: f64 = 10.0;

const AT: Field = Field::number("distance", "Distance from A", Quantity::Distance, "3.4 km")
    .range(0.0, site::FARTHEST, "it lies between A and B")
    .help("Along the line; left empty where its position is entered.");
const GROUND: Field = ground("ground", "Ground height").help("Above the same datum.").required();
const COVER: Field = Field::number("cover", "Cover on it", Quantity::Height, "18 m")
    .range(0.0, 500.0, "nothing that grows or is built is higher")
    .help("Trees, buildings: their height over the ground.")
    .default("0 m");
const MORE: &str = "More of this point";
const INCLUDED: Field = Field::choice(
    "included",
    "Cover included?",
    &[Opt { value: "no", label: "no" }, Opt { value: "yes", label: "yes: a surface model" }],
    "it is or it is not",
)
.help("A surface model holds the crowns already: their height is then not added again.")
.default("no")
.under(MORE);
const GROWTH: Field = Field::number("growth", "Growth to allow", Quantity::Height, "1 m")
    .range(0.0, 100.0, "it is what grows until the line is used")
    .help("What the cover will have grown when the line is used.")
    .default("0 m")
    .under(MORE);
const POINT_DOUBT: Field = Field::number("doubt", "Doubt of the ground", Quantity::Height, "2 m")
    .range(0.0, 500.0, "it is a half-width")
    .help("Half-width that holds it 95 times in 100. Left empty: as given for all points.")
    .under(MORE);
const NAME: Field = Field::text("name", "Name", 24, "it must fit beside the picture", "Kestrel Edge")
    .help("To find it again.")
    .under(MORE);
const PROFILE: Field = Field::table("profile", "Points under the line", &[AT, GROUND, COVER, INCLUDED, GROWTH, POINT_DOUBT, NAME, LATITUDE, LONGITUDE, EASTING, NORTHING], "point")
    .rows(1_000_000, "more would not fit into a phone")
    .help("The high ones and what stands on them; every knoll near the line. Typed, pasted from a spreadsheet, or from a file: GPX too.")
    .file(gpx::reader)
    .example("3.4 km\t186\t18\n7.9 km\t204\t0")
    .required();

const OVER: Field = Field::choice(
    "over",
    "Clearance by rule",
    &[
        Opt { value: "own", label: "none: my own" },
        Opt { value: "water", label: "water, 3 m" },
        Opt { value: "treetops", label: "treetops, 3 m" },
        Opt { value: "wooded", label: "fields and woods, 6 m" },
        Opt { value: "plain", label: "hot open plain, 12 m" },
    ],
    "they are the kinds of ground that field practice tells apart",
)
.help("US Army EN0593 (2001): 3 m over water and treetops, 4.5 to 6 m over fields with woods, 9 to 12 m over a hot dry plain; the safer figure counts. Your specification governs.")
.default("own")
.under(STATIONS);
/// Clearance by the rule of that name, metres; EN0593 para 2-55 (read), the greater figure where it gives two.
const RULES: &[(&str, f64)] = &[("water", 3.0), ("treetops", 3.0), ("wooded", 6.0), ("plain", 12.0)];
const WANTED: Field = Field::number("wanted", "Clearance wanted", Quantity::Height, "3 m")
    .range(0.0, 1000.0, "it is a height over what stands under the line")
    .help("Over the top of whatever stands there; near a station, where the line comes down, it falls off to nothing within a twentieth of the line. Overrules the rule. Left empty and no rule: just clear.")
    .under(STATIONS);
const CHANCE: Field = Field::number("chance", "Chance wanted", Quantity::Share, "95 %")
    .range(0.5, 0.9999, "below a half it is no decision, and nothing is certain")
    .help("That the whole line clears.")
    .default("95 %")
    .under(STATIONS);
const NIGHT_K: Field = site::coefficient("night_k", "k by night", "0.3")
    .help("Left empty: by our guide for a clear calm night, at the height of the line.");
const NIGHT_K_DOUBT: Field = site::coefficient_doubt("night_k_doubt", "Doubt of k by night", "0.15")
    .help("Left empty: as wide as the guide has it.");
const DOUBTS: &str = "Doubts";
const GROUND_DOUBT: Field = Field::number("ground_doubt", "Doubt of the ground heights", Quantity::Height, "3 m")
    .range(0.0, 500.0, "it is a half-width")
    .help("Against the two stations; 95 times in 100. Levelled 0.1 m, contours about half their interval, global models 10 m and more (common practice, no source).")
    .default("2 m")
    .under(DOUBTS);
const COVER_DOUBT: Field = Field::number("cover_doubt", "Doubt of the cover", Quantity::Height, "3 m")
    .range(0.0, 500.0, "it is a half-width")
    .help("Where there is cover: of its height, 95 times in 100 (common practice, no source).")
    .default("4 m")
    .under(DOUBTS);
const GROUND_SHARED: Field =
    Field::number("ground_shared", "Correlation of the ground heights", Quantity::Share, "50 %")
        .range(0.0, 1.0, "it is a share: at 0 % each point errs by itself, at 100 % all alike")
        .help("How much of their doubt all points of one map or model share (our assumption, no source).")
        .default("50 %")
        .under(DOUBTS);

const LEAST: Promised = Promised::new(
    "least",
    "Least clearance",
    "height of the line by day, as expected, over the point that leaves least to spare; − where it is blocked",
);
const LEAST_AT: Promised =
    Promised::new("least_at", "Worst point", "distance from A of the point with the least clearance");
const CHANCE_DAY: Promised = Promised::new("chance_day", "Chance by day", "that the whole line clears what is wanted");
const CHANCE_NIGHT: Promised =
    Promised::new("chance_night", "Chance by night", "that the whole line clears what is wanted on a clear calm night");
const K_GRAZING: Promised =
    Promised::new("k_grazing", "k that just does", "the line clears what is wanted where k is greater");
const RAISE_A: Promised =
    Promised::new("raise_a", "Raise A by", "with B as it is, for the clearance wanted, as expected by day");
const RAISE_B: Promised =
    Promised::new("raise_b", "Raise B by", "with A as it is, for the clearance wanted, as expected by day");
const RAISE_BOTH: Promised =
    Promised::new("raise_both", "Raise both by", "each by so much, for the clearance wanted, as expected by day");
const DOUBT: Promised =
    Promised::new("doubt", "Doubt of the least clearance", "95 % half-width on the side that may block");
const SHARE_GROUND: Promised = Promised::new(
    "share_ground",
    "Of that, ground",
    "share of the square of the doubt that better ground heights would take away",
);
const SHARE_COVER: Promised =
    Promised::new("share_cover", "Of that, cover", "share that better heights of trees and buildings would take away");
const SHARE_K: Promised =
    Promised::new("share_k", "Of that, air", "share that only another time of day or better k would take away");

const LENGTH: Promised = Promised::new(
    "length",
    "Length of the line",
    "from A to B along the level surface: as entered, or by the positions",
);
const AZIMUTH: Promised = Promised::new("azimuth", "Azimuth", "the way the line runs, from north over east");
const RADIUS_IN_FORCE: Promised = Promised::new("radius", "Radius of the earth", "radius reckoned with");

fn answer(asked: &Asked, answer: &mut Answer) {
    let Some(course) = Course::of(asked, answer) else { return };
    let Some(spots) = rows::spots(asked, &course, answer) else { return };
    say_heights(asked, answer);
    let Some(case) = Case::of(asked, &course, &spots) else {
        answer.not_known("No ray joins the two stations at this k, or no point lies between them.".to_owned());
        return;
    };
    decide::decide(asked, &case, answer);
    sheet::fill(asked, &course, &case, answer);
    answer.figure = Some(figure::draw(asked, &case));
}
