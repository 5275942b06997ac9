//! What many questions of a site ask alike: declared once, read once.

use super::answer::{Answer, Doubt, Fix, Level, Note};
use super::field::{Field, Opt};
use super::{Asked, Promised};
use crate::air::guide::{self, KRange, Sky};
use crate::constants::{EARTH_RADIUS, RADIUS_SPREAD};
use crate::doubt::Estimate;
use crate::quantity::show::{Show, Shown};
use crate::quantity::unit::{Quantity, Unit};
use crate::quantity::{Coefficient, Metres, Tilt};
use crate::sight::budget::Budget;

/// Heading of the fields about the air.
pub const AIR: &str = "The air";
/// Heading of the fields about the level in use.
pub const LEVEL: &str = "The level";
/// Heading of the fields that set the rule.
pub const RULE: &str = "The rule";

/// Below this height a line is near the ground, where k above 1 is ordinary by day too: the guide's range holds it there.
const NEAR_GROUND: f64 = 3.0;

/// Which unit a bare number has.
pub const UNITS: Field = Field::choice(
    "units",
    "Units",
    &[
        Opt { value: "metric", label: "metres and millimetres" },
        Opt { value: "foot", label: "international feet" },
        Opt { value: "survey_foot", label: "US survey feet" },
    ],
    "a number may always bring its own unit",
)
.help("What a number without a unit is in, and what the answer is shown in.")
.default("metric")
.shared()
.under(RULE);

/// Shortest distance that is read, metres.
pub const NEAREST: f64 = 1.0;
/// Longest distance that is read, metres.
pub const FARTHEST: f64 = 200_000.0;
/// Why distances have that range.
pub const DISTANCES: &str = "a level does not focus closer, and no line of sight over the ground is longer";

/// Length of a sight.
pub const DISTANCE: Field = Field::number("distance", "Distance", Quantity::Distance, "60 m")
    .range(NEAREST, FARTHEST, DISTANCES)
    .help("From the level to the staff, along the ground. Paces are good enough.")
    .required();

/// Doubt of a distance; each question says what is usual for it.
pub const DISTANCE_DOUBT: Field = Field::number("distance_doubt", "Doubt of the distances", Quantity::Share, "5 %")
    .range(0.0, 1.0, "it is a share of the distance")
    .under(RULE);

/// What a height may be out by.
pub const TOLERANCE: Field = Field::number("tolerance", "Tolerance", Quantity::SmallLength, "3 mm")
    .range(0.00001, 10.0, "a hundredth of a millimetre is finer than any staff, ten metres is no tolerance")
    .help("What the height may be out by because of this sight, or of this setup.")
    .required()
    .shared();

/// Collimation error of the level in use.
pub const COLLIMATION: Field = Field::number(
    "collimation",
    "Collimation error of the level",
    Quantity::Collimation,
    "0.03 mm/m",
)
.range(-0.01, 0.01, "a level further out than 10 mm/m is broken")
.help(
    "From the last peg test, + where the line points up; of a laser, its cone error. Left empty: none is known, and the doubt below stands for it.",
)
.shared()
.under(LEVEL);

/// Its doubt.
pub const COLLIMATION_DOUBT: Field =
    Field::number("collimation_doubt", "Doubt of the collimation error", Quantity::Collimation, "0.02 mm/m")
        .range(0.0, 0.01, "a level further out than 10 mm/m is broken")
        .help("Half-width that holds it 95 times in 100. By default what a level in adjustment is often allowed (common practice, no source).")
        .default("0.05 mm/m")
        .shared()
        .under(LEVEL);

/// Correlation of k between sights.
pub const K_SHARED: Field = Field::number("k_shared", "Correlation of k", Quantity::Share, "50 %")
    .range(0.0, 1.0, "it is a share: at 0 % the two sights have each their own air, at 100 % the same")
    .help("How much of the doubt of k is common to the two sights of a setup, or to the two ways (our assumption, no source).")
    .default("50 %")
    .under(AIR);

/// Share of the tolerance that one sight or setup may use.
pub const SHARE: Field = Field::number("share", "Share of the tolerance", Quantity::Share, "50 %")
    .range(0.01, 1.0, "it is a share of the tolerance")
    .help("How much of the tolerance this sight may use: bias and doubt together. The rest is for everything else.")
    .default("50 %")
    .under(RULE);

/// Doubt of a reading.
pub const READING_DOUBT: Field = Field::number("reading_doubt", "Doubt of a reading", Quantity::SmallLength, "0.5 mm")
    .range(0.0, 0.1, "a reading in doubt by more than a decimetre is no reading")
    .help("Half-width at a short distance: half a millimetre for a centimetre staff read with care (common practice, no source).")
    .default("0.5 mm")
    .under(RULE);

/// What distance adds to it.
pub const READING_GROWTH: Field =
    Field::number("reading_growth", "Growth of that doubt with distance", Quantity::Collimation, "0.01 mm/m")
        .range(0.0, 0.001, "beyond 1 mm/m the staff cannot be read at all")
        .help("1 mm in 100 m for an ordinary telescope in still air (common practice, no source).")
        .default("0.01 mm/m")
        .under(RULE);

/// Height of the line over the ground.
pub const LINE_HEIGHT: Field = Field::number("line_height", "Height of the line", Quantity::Height, "1.5 m")
    .range(0.05, 1000.0, "below 5 cm the line is in the grass, above 1 km the guide of k says nothing")
    .help("Over the ground, where it runs lowest for long. Half a metre more is worth more than any correction.")
    .default("1.5 m")
    .shared();

/// What is seen of the sky.
pub const SKY: Field = Field::choice(
    "sky",
    "Sky",
    &[
        Opt { value: "sunny", label: "sunny" },
        Opt { value: "overcast", label: "overcast, windy" },
        Opt { value: "clear_night", label: "clear night" },
        Opt { value: "unknown", label: "not known" },
    ],
    "they are what the guide of k tells apart",
)
.help("As it was over the last half hour: sun on the ground, cloud or wind, or a clear calm night. Not known means by day.")
.default("unknown")
.shared();

/// A coefficient of refraction.
pub const fn coefficient(name: &'static str, label: &'static str, example: &'static str) -> Field {
    let field = Field::number(name, label, Quantity::Refraction, example);
    field.range(-100.0, 100.0, "beyond it no line of sight has been reported").under(AIR)
}

/// The doubt of one.
pub const fn coefficient_doubt(name: &'static str, label: &'static str, example: &'static str) -> Field {
    let field = Field::number(name, label, Quantity::Refraction, example);
    field.range(0.0, 100.0, "it is a half-width, and as wide as k itself can be").under(AIR)
}

/// k, where it is known better than from sky and height.
pub const K: Field = coefficient("k", "Coefficient of refraction k", "0.13")
    .help("Overrules sky and height. k is the earth's radius over the ray's; books that print m mean half of it.")
    .shared()
    .under(AIR);

/// Doubt of k.
pub const K_DOUBT: Field = coefficient_doubt("k_doubt", "Doubt of k", "0.5")
    .help("Half of the range that holds k 95 times in 100. Left empty: as wide as the guide has it for this sky and height.")
    .shared();

/// Radius of the earth.
pub const RADIUS: Field = Field::number("radius", "Radius of the earth", Quantity::Radius, "6371 km")
    .range(6_300_000.0, 6_420_000.0, "the earth's radii of curvature lie between 6335 and 6400 km")
    .help("Left empty: the mean radius, doubted by as much as radii differ over the earth. Entered: taken as exact.")
    .shared()
    .under(AIR);

/// The k in force, and how it was come by.
#[derive(Debug, Clone, PartialEq)]
pub struct AirInForce {
    /// k and its range.
    pub k: KRange,
    /// Where it comes from, as part of a sentence.
    pub source: String,
}

/// The sky that was chosen.
pub fn sky(asked: &Asked) -> Sky {
    match asked.choice(&SKY) {
        "sunny" => Sky::Sunny,
        "overcast" => Sky::Overcast,
        "clear_night" => Sky::ClearNight,
        _ => Sky::Unknown,
    }
}

/// The words for a sky.
pub fn sky_words(sky: Sky) -> &'static str {
    match sky {
        Sky::Sunny => "with sun on the ground",
        Sky::Overcast => "under an overcast or windy sky",
        Sky::ClearNight => "on a clear calm night",
        Sky::Unknown => "by day under any sky",
    }
}

/// The k in force under `sky`: as entered, else by the guide.
pub fn air(asked: &Asked, sky: Sky) -> AirInForce {
    let height = asked.must(&LINE_HEIGHT);
    let at = asked.show().height_words(height);
    let words = format!("our guide for a line {at} over the ground {}", sky_words(sky));
    in_force(asked, guide::k(Metres(height), sky), &words)
}

/// Value and half-width as entered; each that was not, by `rule`.
pub fn entered_or(value: Option<f64>, half: Option<f64>, rule: KRange) -> KRange {
    let value = value.unwrap_or(rule.value.0);
    let below = half.unwrap_or(rule.value.0 - rule.low.0);
    let above = half.unwrap_or(rule.high.0 - rule.value.0);
    KRange { value: Coefficient(value), low: Coefficient(value - below), high: Coefficient(value + above) }
}

/// The k in force: as entered, else by a rule that `words` name.
pub fn in_force(asked: &Asked, rule: KRange, words: &str) -> AirInForce {
    let (given, half) = (asked.number(&K), asked.number(&K_DOUBT));
    let k = entered_or(given, half, rule);
    let source = match (given, half) {
        (Some(_), Some(_)) => "as entered".to_owned(),
        (Some(_), None) => format!("as entered, its doubt from {words}"),
        (None, Some(_)) => format!("from {words}, its doubt as entered"),
        (None, None) => format!("from {words}"),
    };
    AirInForce { k, source }
}

/// Bias and doubt of an error in one unit, each to the digits the doubt leaves it.
pub fn with_doubt(error: &Estimate, show: Show) -> (Shown, Doubt) {
    let unit = show.small_unit(error.worst());
    let half = error.half();
    let text = |si: f64| show.small_in(unit, si, half).text;
    let range = if error.lopsided() {
        format!("from {} to {}", text(error.bias - error.below), text(error.bias + error.above))
    } else {
        format!("± {}", text(half))
    };
    let grain = if half > 0.0 { half.min(error.bias.abs().max(half / 10.0)) } else { error.bias / 1000.0 };
    (show.small_in(unit, error.bias, grain), Doubt { value: half, text: range })
}

/// Which k is in force.
pub const K_IN_FORCE: Promised =
    Promised::new("k", "k in force", "coefficient of refraction reckoned with, and its range");

/// The result that says so.
pub fn k_result(air: &AirInForce, show: Show, answer: &mut Answer) {
    let k = air.k;
    let half = (k.value.0 - k.low.0).max(k.high.0 - k.value.0);
    let doubt = Doubt { value: half, text: format!("from {} to {}", show.k(k.low.0), show.k(k.high.0)) };
    let shown = Shown { text: show.k(k.value.0), unit: "" };
    answer.result(&K_IN_FORCE, Some(k.value.0), shown, Some(doubt), air.source.clone());
}

/// What is known of air, earth, level and observer, as entered.
pub fn budget(asked: &Asked, k: KRange, distance_doubt: f64) -> Budget {
    let (radius, radius_doubt) = radius(asked);
    Budget {
        k,
        common: asked.must(&K_SHARED),
        radius,
        radius_doubt,
        collimation: Tilt(asked.number(&COLLIMATION).unwrap_or(0.0)),
        collimation_doubt: Tilt(asked.must(&COLLIMATION_DOUBT)),
        reading: Metres(asked.must(&READING_DOUBT)),
        reading_growth: Tilt(asked.must(&READING_GROWTH)),
        distance_doubt,
    }
}

/// The radius in force and its doubt as a share: none where it was entered.
pub fn radius(asked: &Asked) -> (Metres, f64) {
    match asked.number(&RADIUS) {
        Some(radius) => (Metres(radius), 0.0),
        None => (EARTH_RADIUS, RADIUS_SPREAD),
    }
}

/// Asks back where k looks like m, or like a factor on the earth's radius.
pub fn doubt_k(asked: &Asked, answer: &mut Answer) {
    let Some(k) = asked.number(&K) else { return };
    if !asked.bare(&K) {
        return;
    }
    let near_ground = asked.given(&LINE_HEIGHT) && asked.must(&LINE_HEIGHT) < NEAR_GROUND;
    let meant = if (0.06..=0.09).contains(&k) {
        Some(("m", "It is m", "is it m, which is half of k?"))
    } else if k > 1.0 && !near_ground {
        Some((
            "factor",
            "It is a factor",
            "is it the factor on the earth's radius? Above 1, the line bends more than the earth does.",
        ))
    } else {
        None
    };
    let Some((symbol, label, question)) = meant else { return };
    let unit: Option<&Unit> = Quantity::Refraction.unit(symbol);
    let Some(converted) = unit.and_then(|u| u.to_si(k)) else { return };
    let text = asked.text(&K).to_owned();
    let fix = |label: String, unit| Fix { label, field: K.name, cell: None, text: text.clone(), unit };
    let fixes = vec![
        fix(format!("{label}: k = {}", asked.show().k(converted)), symbol),
        fix(format!("It is k: k = {}", asked.show().k(k)), "k"),
    ];
    answer.notes.push(Note {
        level: Level::Caution,
        text: format!("k was entered as {}: {question}", asked.text(&K)),
        fixes,
    });
}
