//! How far out is this level? The two-peg test, and the log of the levels tested.

mod case;
mod decide;
mod figure;
mod log;
mod sheet;

use crate::limits;
use crate::quantity::unit::Quantity;
use crate::question::field::{Aid, Field, Opt};
use crate::question::{Answer, Asked, Caution, Promised, Question, site};
use case::Case;

pub const QUESTION: Question = Question {
    id: "peg",
    phrase: "How far out is this level?",
    about: "Two pegs, two stations, four readings: the collimation error without curve and air, and whether to balance, apply or adjust.",
    fields: &[
        LAYOUT,
        PEGS,
        NEAR,
        FIRST_A,
        FIRST_B,
        SECOND_A,
        SECOND_B,
        FIRST_DISTANCE_A,
        FIRST_DISTANCE_B,
        SECOND_DISTANCE_A,
        SECOND_DISTANCE_B,
        site::LINE_HEIGHT,
        site::SKY,
        REPEAT_FIRST_A,
        REPEAT_FIRST_B,
        REPEAT_SECOND_A,
        REPEAT_SECOND_B,
        SERIAL,
        DATE,
        site::COLLIMATION,
        site::COLLIMATION_DOUBT,
        HISTORY,
        LIMIT_RULE,
        LIMIT,
        site::K,
        site::K_DOUBT,
        site::K_SHARED,
        site::RADIUS,
        site::READING_DOUBT,
        site::READING_GROWTH,
        DISTANCE_DOUBT,
        site::UNITS,
    ],
    results: &[
        COLLIMATION,
        COLLIMATION_SECONDS,
        IMBALANCE_COST,
        SET_A,
        SET_B,
        TAKEN_OUT,
        WITH_AIR,
        RISE,
        REPEAT_DIFFERENCE,
        site::K_IN_FORCE,
    ],
    cautions: &[
        Caution {
            text: "Never point a telescope at or near the sun: it blinds at once.",
            governed_by: "your site's safety rules and the maker's manual",
        },
        Caution {
            text: "Choose pegs clear of traffic, plant and overhead lines; look up before a staff goes up.",
            governed_by: "the site's traffic and safety plan, and the line's owner",
        },
        Caution {
            text: "A test is good until the next knock. The verdict is about the limit shown; your specification governs.",
            governed_by: "the contract, and the maker's manual for the adjustment",
        },
    ],
    sources: &[
        "Two-peg test: the four readings solved for the collimation error, curvature and refraction taken off each (closed forms derived for this calculator, checked to 50 digits).",
        "Limits: US Army, TM 5-6675-329-13&P, 2 mm in 30 m, as read; Australia, Division of National Mapping, First Order Levelling, 1.0 mm in 50 m, as read; USA, FGCC (1984), 0.05 mm/m, third order 0.10 mm/m, as recalled: check your copy.",
        "k by height of the line and sky: a rule of this calculator, not a published table.",
        "Doubt and adding in squares: JCGM 100:2008, 5.1.2 and 5.2.2.",
    ],
    answer,
};

const REPEAT: &str = "Read a second time";
const LIMITS: &str = "The limit";

const LAYOUT: Field = Field::choice(
    "layout",
    "Where the level stands",
    &[
        Opt { value: "middle", label: "midway, then beyond peg B" },
        Opt { value: "near", label: "near A, then near B, between them" },
        Opt { value: "measured", label: "elsewhere: four distances" },
    ],
    "the last one holds any other",
)
.help(
    "Two stations: one with sights as equal as can be, one with sights as unequal as can be, or each close to one peg.",
)
.default("middle");
const PACED: &[&str] = &["middle", "near"];
const PEGS: Field = Field::number("peg_distance", "Distance of the pegs", Quantity::Distance, "50 m")
    .range(5.0, 500.0, "closer pegs show nothing, farther staffs cannot be read to the millimetre")
    .help("From one to the other: 30 to 50 m is best: farther, curve and air grow faster than the lever. Paces are good enough.")
    .when("layout", PACED)
    .required();
const NEAR: Field = Field::number("near_distance", "Distance to the near peg", Quantity::Distance, "3 m")
    .range(0.0, 200.0, "it is the short one of two sights")
    .help("From the level: beyond peg B, or to each peg in turn. Nought where the eyepiece is held to the staff.")
    .when("layout", PACED)
    .default("5 m");

const fn staff(name: &'static str, label: &'static str, example: &'static str) -> Field {
    Field::number(name, label, Quantity::Height, example).range(-20.0, 20.0, "no staff is longer").aid(Aid::Staff)
}
const FIRST_A: Field = staff("first_a", "Staff on A, first station", "1.283 m")
    .help("Set and read it with care, bubble checked.")
    .required();
const FIRST_B: Field =
    staff("first_b", "Staff on B, first station", "0.860 m").help("From the same station.").required();
const SECOND_A: Field = staff("second_a", "Staff on A, second station", "1.612 m")
    .help("The level carried over, pegs untouched.")
    .required();
const SECOND_B: Field =
    staff("second_b", "Staff on B, second station", "1.219 m").help("From the same station.").required();

const fn away(name: &'static str, label: &'static str, example: &'static str) -> Field {
    Field::number(name, label, Quantity::Distance, example)
        .range(0.0, 500.0, "a farther staff cannot be read to the millimetre")
        .help("From the level to the staff.")
        .when("layout", &["measured"])
}
const FIRST_DISTANCE_A: Field = away("first_distance_a", "Distance to A, first station", "25 m");
const FIRST_DISTANCE_B: Field = away("first_distance_b", "Distance to B, first station", "25 m");
const SECOND_DISTANCE_A: Field = away("second_distance_a", "Distance to A, second station", "55 m");
const SECOND_DISTANCE_B: Field = away("second_distance_b", "Distance to B, second station", "5 m");

const fn again(name: &'static str, label: &'static str, example: &'static str) -> Field {
    staff(name, label, example).help("Level set up and read anew at the same place.").under(REPEAT)
}
const REPEAT_FIRST_A: Field = again("repeat_first_a", "Staff on A, first station, again", "1.301 m");
const REPEAT_FIRST_B: Field = again("repeat_first_b", "Staff on B, first station, again", "0.878 m");
const REPEAT_SECOND_A: Field = again("repeat_second_a", "Staff on A, second station, again", "1.598 m");
const REPEAT_SECOND_B: Field = again("repeat_second_b", "Staff on B, second station, again", "1.205 m");

const SERIAL: Field =
    Field::text("serial", "Serial number of the level", 24, "it must fit into a line of the log", "48213")
        .help("So that the log knows one level from another.")
        .shared()
        .under(site::LEVEL);
const DATE: Field = Field::text("date", "Date of the test", 24, "it must fit into a line of the log", "2026-12-01")
    .help("Goes into the log. Year first keeps it in order.")
    .under(site::LEVEL);
const PAST_DATE: Field = Field::text("date", "Date", 24, "it must fit into a line", "2026-11-02").help("Of the test.");
const PAST_SERIAL: Field =
    Field::text("serial", "Level", 24, "it must fit into a line", "48213").help("Its serial number.");
const PAST_VALUE: Field = Field::number("collimation", "Collimation error", Quantity::Collimation, "0.03 mm/m")
    .range(-0.01, 0.01, "a level further out than 10 mm/m is broken")
    .help("+ where the line points up.")
    .required();
const PAST_DOUBT: Field = Field::number("doubt", "Doubt", Quantity::Collimation, "0.02 mm/m")
    .range(0.0, 0.01, "a level further out than 10 mm/m is broken")
    .help("Half-width that holds it 95 times in 100.");
const HISTORY: Field =
    Field::table("history", "Log of earlier tests", &[PAST_DATE, PAST_SERIAL, PAST_VALUE, PAST_DOUBT], "test")
        .rows(2000, "a level is tested once a day, and this is years of it")
        .help("Grows by one row each time a result is taken over. Oldest first.")
        .example("2026-10-05\t48213\t0.012\t0.02\n2026-11-02\t48213\t0.019\t0.02")
        .shared()
        .under(site::LEVEL);

const LIMIT_RULE: Field = Field::choice("limit_rule", "Published limit", RULES, "they are the limits we hold")
    .help("How far a level may be out. Your specification governs; sources stand below.")
    .default("army")
    .under(LIMITS);
#[allow(clippy::indexing_slicing, reason = "worked out and checked while compiling")]
const RULES: &[Opt] = &{
    let mut options = [Opt { value: "", label: "" }; limits::COLLIMATION.len()];
    let mut i = 0;
    while i < options.len() {
        options[i] = Opt { value: limits::COLLIMATION[i].name, label: limits::COLLIMATION[i].label };
        i += 1;
    }
    options
};
const LIMIT: Field = Field::number("limit", "Limit of your own", Quantity::Collimation, "0.05 mm/m")
    .range(0.000_000_1, 0.01, "a finer one cannot be tested, and a level further out than 10 mm/m is broken")
    .help("From the specification or the maker. Overrules the published one.")
    .under(LIMITS);
const DISTANCE_DOUBT: Field = site::DISTANCE_DOUBT
    .help("Pacing is good to a twentieth (common practice, no source): enough for this test.")
    .default("5 %");

const COLLIMATION: Promised =
    Promised::new("collimation", "Collimation error", "rise of the line over distance; + where it points up");
const COLLIMATION_SECONDS: Promised =
    Promised::new("collimation_seconds", "The same as an angle", "rise of the line over distance, as an angle");
const IMBALANCE_COST: Promised = Promised::new(
    "imbalance_cost",
    "10 m of imbalance",
    "what a setup whose one sight is 10 m longer reads too much on that side",
);
const SET_A: Promised = Promised::new(
    "set_a",
    "To set on A",
    "what the staff on A reads from the second station when the level is in order",
);
const SET_B: Promised = Promised::new(
    "set_b",
    "To set on B",
    "what the staff on B reads from the second station when the level is in order",
);
const TAKEN_OUT: Promised =
    Promised::new("taken_out", "Curve and air", "what they put into the test, taken out of the collimation error");
const WITH_AIR: Promised =
    Promised::new("with_air", "Left in, it would be", "the collimation error as a test without them says");
const RISE: Promised = Promised::new("rise", "B over A", "how much peg B stands higher; − where it stands lower");
const REPEAT_DIFFERENCE: Promised =
    Promised::new("repeat_difference", "Second set less first", "by how much the two collimation errors differ");

fn answer(asked: &Asked, answer: &mut Answer) {
    let case = match Case::of(asked) {
        Ok(case) => case,
        Err(why) => return answer.not_known(why),
    };
    let past = log::past(asked, &case);
    decide::decide(&case, asked.show(), answer);
    sheet::fill(asked, &case, answer);
    log::fill(asked, &case, &past, answer);
    answer.figure = Some(figure::draw(&case, &past, asked.show()));
}
