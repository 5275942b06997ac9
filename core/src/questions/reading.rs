//! What is this staff reading worth?

mod figure;

use crate::constants::HANDBOOK_K;
use crate::doubt::Estimate;
use crate::quantity::show::{Show, Shown, places};
use crate::quantity::unit::Quantity;
use crate::quantity::{Metres, Tilt};
use crate::question::answer::{Doubt, State, Table};
use crate::question::field::{Field, Opt};
use crate::question::pencil::line;
use crate::question::{Answer, Asked, Caution, Promised, Question, site};
use crate::ray;
use crate::sight::budget::{Budget, Part, Term};

pub const QUESTION: Question = Question {
    id: "reading",
    phrase: "What is this staff reading worth?",
    about: "What curve and air put into one reading, what it is when corrected, and how far that is in doubt.",
    fields: &[
        READING,
        site::DISTANCE,
        APPLIED,
        site::LINE_HEIGHT,
        site::SKY,
        site::K,
        site::K_DOUBT,
        site::RADIUS,
        DISTANCE_DOUBT,
        site::UNITS,
    ],
    results: &[CORRECTED, COMBINED, DOUBT, CURVATURE, REFRACTION, site::K_IN_FORCE],
    cautions: &[
        Caution {
            text: "Never point a telescope at or near the sun: it blinds at once.",
            governed_by: "your site's safety rules and the maker's manual",
        },
        Caution {
            text: "Corrected is not accurate: the doubt stays when the correction has been made.",
            governed_by: "the job's specification",
        },
    ],
    sources: &[
        "Curvature and refraction: closed forms for a ray of constant k (refractive index in proportion to a power of the radius), derived for this calculator and checked to 50 digits.",
        "Parabola (1 − k) D²/2R: Ghilani & Wolf, Elementary Surveying, chapter 4. Handbook k after Gauss's value for the Hannover arc.",
        "k by height of the line and sky: a rule of this calculator, not a published table.",
        "Doubt and adding in squares: JCGM 100:2008, 5.1.2.",
    ],
    answer,
};

const READING: Field = Field::number("reading", "Staff reading", Quantity::Height, "1.234 m")
    .range(-20.0, 20.0, "no staff is longer")
    .help("As booked; − for a staff held upside down.")
    .required();
const APPLIED: Field = Field::choice(
    "applied",
    "Corrected already?",
    &[
        Opt { value: "raw", label: "no, as read" },
        Opt { value: "already", label: "yes, curve and air are taken off" },
        Opt { value: "unknown", label: "I don't know" },
    ],
    "a correction must be made once, not twice and not never",
)
.help("Some instruments take it off by themselves. Their settings tell.")
.required();
const DISTANCE_DOUBT: Field = site::DISTANCE_DOUBT
    .help("By default the distance is taken as exact. Pacing is good to a twentieth, that is 5 % (common practice, no source).")
    .default("0 %");

const CORRECTED: Promised = Promised::new(
    "corrected",
    "Corrected reading",
    "what the staff would read on a level surface through the instrument",
);
const COMBINED: Promised = Promised::new("combined", "Curvature and refraction", "what the reading is too large by");
const DOUBT: Promised = Promised::new(
    "doubt",
    "Doubt of the correction",
    "95 % half-width; the greater side where the two differ. The reading's own doubt is not in it",
);
const CURVATURE: Promised =
    Promised::new("curvature", "Curvature", "how far the level surface lies below the horizontal line at the staff");
const REFRACTION: Promised = Promised::new(
    "refraction",
    "Refraction",
    "how far the line of sight lies below the horizontal line at the staff; − where it lies above",
);

/// What the entry comes to.
struct Worth {
    distance: Metres,
    reading: f64,
    radius: Metres,
    air: site::AirInForce,
    curvature: f64,
    refraction: f64,
    /// Curvature less refraction, with its doubt.
    combined: Estimate,
}

impl Worth {
    fn of(asked: &Asked) -> Option<Worth> {
        let air = site::air(asked, site::sky(asked));
        let (radius, radius_doubt) = site::radius(asked);
        let distance = Metres(asked.must(&site::DISTANCE));
        let combined = ray::combined(distance, air.k.value, radius)?;
        let refraction = ray::refraction(distance, air.k.value, radius)?;
        let budget = Budget {
            k: air.k,
            common: 0.0,
            radius,
            radius_doubt,
            collimation: Tilt(0.0),
            collimation_doubt: Tilt(0.0),
            reading: Metres(0.0),
            reading_growth: Tilt(0.0),
            distance_doubt: asked.must(&DISTANCE_DOUBT),
        };
        let parts: [Part; 5] = budget.sight(distance);
        let doubt = Estimate::sum(parts.iter().filter(|p| p.term != Term::Collimation).map(|p| &p.error));
        Some(Worth {
            distance,
            reading: asked.must(&READING),
            radius,
            curvature: ray::curvature(distance, radius).0,
            refraction: refraction.0,
            combined: Estimate { bias: combined.0, ..doubt },
            air,
        })
    }
}

fn answer(asked: &Asked, answer: &mut Answer) {
    let show = asked.show();
    let Some(worth) = Worth::of(asked) else {
        answer.not_known(format!(
            "At k = {} the line has turned upright before it comes so far: no staff is seen.",
            asked.text(&site::K)
        ));
        return;
    };
    let corrected = worth.reading - worth.combined.bias;
    verdict(asked, &worth, corrected, show, answer);
    results(asked, &worth, corrected, show, answer);
    answer.tables.push(side_by_side(&worth, show));
    answer.figure = Some(figure::draw(&worth, show));
    working(asked, &worth, corrected, answer);
    if worth.combined.half() >= worth.combined.bias.abs() && worth.combined.bias != 0.0 {
        answer.note("The doubt is larger than the correction: correcting does not make this reading better. Shorten the sight, balance it, raise the line, or observe both ways.");
    }
}

fn verdict(asked: &Asked, worth: &Worth, corrected: f64, show: Show, answer: &mut Answer) {
    let bias = worth.combined.bias;
    let doubt = show.own(worth.combined.half());
    let (size, _) = site::with_doubt(&Estimate { bias: bias.abs(), ..worth.combined }, show);
    let verdict = &mut answer.verdict;
    let way = if bias < 0.0 { "Add" } else { "Take off" };
    match asked.choice(&APPLIED) {
        "already" => {
            verdict.word = "Leave it";
            verdict.number = show.height(worth.reading).to_string();
            verdict.state = State::Within;
            verdict.sentence = format!(
                "It is corrected already: {size} once more would put the error back in. What stays in doubt is {doubt}."
            );
        }
        // A correction smaller than its doubt must not look like a gain.
        "raw" if worth.combined.half() >= bias.abs() && bias != 0.0 => {
            verdict.word = "In doubt by";
            verdict.number = doubt.to_string();
            verdict.state = State::Doubtful;
            let corrected = show.height(corrected);
            verdict.sentence = format!(
                "The correction is smaller than its doubt: {} {size}, which makes it {corrected}, and it is hardly better.",
                way.to_ascii_lowercase()
            );
        }
        "raw" => {
            verdict.word = way;
            verdict.number = size.to_string();
            verdict.state = State::Within;
            verdict.sentence = format!("Corrected {}. What stays in doubt is {doubt}.", show.height(corrected));
        }
        _ => answer.not_known(format!(
            "If it is as read, it is {size} too {}; if it is corrected already, leave it. Look what the instrument takes off by itself.",
            if bias < 0.0 { "small" } else { "large" }
        )),
    }
}

fn results(asked: &Asked, worth: &Worth, corrected: f64, show: Show, answer: &mut Answer) {
    let combined = &worth.combined;
    let (shown, doubt) = site::with_doubt(combined, show);
    let unit = show.small_unit(combined.worst());
    let fine =
        |si: f64| show.small_in(unit, si, if doubt.value > 0.0 { doubt.value.min(si.abs()) } else { si / 1000.0 });
    let words = |text: &str| Shown { text: text.to_owned(), unit: "" };
    let about = Doubt { value: combined.half(), text: format!("± {}", show.height(combined.half()).text) };
    match asked.choice(&APPLIED) {
        "raw" => answer.result(
            &CORRECTED,
            Some(corrected),
            show.height(corrected),
            Some(about),
            CORRECTED.meaning.to_owned(),
        ),
        "already" => answer.result(
            &CORRECTED,
            Some(worth.reading),
            show.height(worth.reading),
            Some(about),
            "as booked: it is corrected already".to_owned(),
        ),
        _ => answer.result(
            &CORRECTED,
            None,
            words("not known"),
            None,
            "say whether curve and air have been taken off".to_owned(),
        ),
    }
    let effect = match combined.bias {
        b if b > 0.0 => {
            format!("the staff reads {0} too much: the point is {0} higher than a raw reading says", fine(b))
        }
        b if b < 0.0 => {
            format!("the staff reads {0} too little: the point is {0} lower than a raw reading says", fine(-b))
        }
        _ => "the line follows the earth: nothing to correct".to_owned(),
    };
    answer.result(&COMBINED, Some(combined.bias), shown, Some(doubt.clone()), effect);
    answer.result(&DOUBT, Some(combined.half()), show.own(combined.half()), None, DOUBT.meaning.to_owned());
    answer.result(&CURVATURE, Some(worth.curvature), fine(worth.curvature), None, CURVATURE.meaning.to_owned());
    answer.result(&REFRACTION, Some(worth.refraction), fine(worth.refraction), None, REFRACTION.meaning.to_owned());
    site::k_result(&worth.air, show, answer);
}

/// Exact values beside the parabola at the same k, and beside the handbook's k.
fn side_by_side(worth: &Worth, show: Show) -> Table {
    let (d, r, k) = (worth.distance, worth.radius, worth.air.k.value);
    let handbook = |k| ray::handbook_combined(d, k, r).0;
    let curve = handbook(crate::quantity::Coefficient(0.0));
    let columns = |k| [curve, curve - handbook(k), handbook(k)];
    let exact = [worth.curvature, worth.refraction, worth.combined.bias];
    let unit = show.small_unit(worth.curvature);
    let cell = |si: f64| {
        places(
            unit.from_si(si).unwrap_or(0.0),
            crate::quantity::show::fitting(unit.from_si(worth.curvature).unwrap_or(0.0), 5),
        )
    };
    let (same, usual) = (columns(k), columns(HANDBOOK_K));
    let names = [CURVATURE.label, REFRACTION.label, "Together"];
    let rows = names
        .iter()
        .zip(exact)
        .zip(same.into_iter().zip(usual))
        .map(|((name, exact), (same, usual))| vec![(*name).to_owned(), cell(exact), cell(same), cell(usual)]);
    let headings = vec![
        "Term".to_owned(),
        format!("Exact, k {}, {}", show.k(k.0), unit.symbol),
        format!("Parabola, k {}, {}", show.k(k.0), unit.symbol),
        format!("Handbook, k {}, {}", show.k(HANDBOOK_K.0), unit.symbol),
    ];
    Table {
        name: "values",
        caption: "Exact and handbook values side by side".to_owned(),
        columns: headings,
        rows: rows.collect(),
    }
}

fn working(asked: &Asked, worth: &Worth, corrected: f64, answer: &mut Answer) {
    let (d, r, k) = (worth.distance.0, worth.radius.0, worth.air.k);
    let (curve, value) = (d * d / (2.0 * r), k.value.0);
    let air = line("D = {m} m, R = {m} m, k = {k} (from {k} to {k}), ", &[d, r, value, k.low.0, k.high.0]);
    let lines = &mut answer.working;
    lines.push(air + &worth.air.source);
    lines.push(line(
        "curvature = D² / 2R = {m} / {m} = {mm} mm (exact {mm} mm)",
        &[d * d, 2.0 * r, curve, worth.curvature],
    ));
    lines.push(line(
        "refraction = k · curvature = {k} × {mm} = {mm} mm (exact {mm} mm)",
        &[value, curve, value * curve, worth.refraction],
    ));
    lines.push(line(
        "together = curvature − refraction = {mm} mm (exact {mm} mm)",
        &[curve - value * curve, worth.combined.bias],
    ));
    lines.push(line("doubt: from {mm} to {mm} mm about it", &[-worth.combined.below, worth.combined.above]));
    if asked.choice(&APPLIED) == "raw" {
        lines.push(line(
            "corrected = reading − together = {m} − {m} = {m} m",
            &[worth.reading, worth.combined.bias, corrected],
        ));
    }
}
