//! Whole profiles in 100-digit arithmetic, `rows/profiles.tsv` by tests/tables/make_profile_rows.py: to the ulps that
//! [`crate::PROMISES`] has for one point, and through the question as a person enters them.

use crate::{Ground, PROMISES};
use farstaff::line::Line;
use farstaff::quantity::{Coefficient, Metres};
use farstaff::question::ask;

const ROWS: &str = include_str!("../rows/profiles.tsv");
const FIGURES: [&str; 6] = ["least", "least_at", "k_grazing", "raise_a", "raise_b", "raise_both"];

struct Row<'a> {
    /// a, b, s, k, r, wanted.
    numbers: [f64; 6],
    at: Vec<&'a str>,
    top: Vec<&'a str>,
    /// Figure and the size of what is added for it.
    figures: Vec<(f64, f64)>,
}

fn rows() -> impl Iterator<Item = Row<'static>> {
    ROWS.lines().map(|line| {
        let cells: Vec<&str> = line.split('\t').collect();
        let pair = |cell: &&str| {
            let (figure, size) = cell.split_once('/').unwrap();
            (figure.parse().unwrap(), size.parse().unwrap())
        };
        Row {
            numbers: std::array::from_fn(|i| cells[i].parse().unwrap()),
            at: cells[6].split(' ').collect(),
            top: cells[7].split(' ').collect(),
            figures: cells[8..].iter().map(pair).collect(),
        }
    })
}

fn promised(function: &str) -> f64 {
    PROMISES.iter().find(|p| p.0 == function).unwrap().1
}

#[test]
fn whole_profiles() {
    let mut worst = [0.0_f64; 6];
    for Row { numbers: [a, b, s, k, r, wanted], at, top, figures } in rows() {
        let line = Line::new(Metres(a), Metres(b), Metres(s), Coefficient(k), Metres(r)).unwrap();
        let number = |text: &&str| text.parse::<f64>().unwrap();
        let ground = Ground { at_m: at.iter().map(number).collect(), top_m: top.iter().map(number).collect() };
        let (profile, wanted) = (ground.profile(), Metres(wanted));
        let least = line.least(profile).unwrap();
        let got = [
            least.clearance.0,
            least.at.0,
            line.grazing_k(profile, wanted).unwrap().0,
            line.raise_a(profile, wanted).unwrap().0,
            line.raise_b(profile, wanted).unwrap().0,
            line.raise_both(profile, wanted).unwrap().0,
        ];
        for (i, (&(figure, size), got)) in figures.iter().zip(got).enumerate() {
            worst[i] = worst[i].max((got - figure).abs() / (size * f64::EPSILON));
        }
    }
    println!("{worst:?} ulp of {FIGURES:?}");
    // The top is taken off a height.
    let promises = ["height", "height", "grazing_k", "raise_a", "raise_a", "raise_both"].map(promised);
    assert!(worst.iter().zip(promises).all(|(worst, promised)| *worst <= promised), "{worst:?}");
}

/// As text, through everything that stands between: what the question adds is rounding.
#[test]
fn whole_profiles_asked() {
    let mut asked = 0;
    for Row { numbers: [a, b, s, k, r, _], at, top, figures } in rows().filter(|row| row.numbers[5] == 0.0) {
        let profile: Vec<String> = at.iter().zip(&top).map(|(x, top)| format!("{x}\t{top}")).collect();
        let texts = [a, b, s, k].map(|n| n.to_string());
        let (radius, profile) = (format!("{r} m"), profile.join("\n"));
        let pairs = [
            ("ground_a", texts[0].as_str()),
            ("height_a", "0"),
            ("ground_b", &texts[1]),
            ("height_b", "0"),
            ("distance", &texts[2]),
            ("k", &texts[3]),
            ("radius", &radius),
            ("profile", &profile),
        ];
        let entry = form_urlencoded::Serializer::new(String::new()).extend_pairs(pairs).finish();
        let answer = ask("clearance", &entry).unwrap();
        for (name, (figure, _)) in FIGURES.into_iter().zip(figures) {
            let result = answer.results.iter().find(|r| r.name == name).unwrap();
            let got = result.value.unwrap_or_else(|| panic!("{name}: {entry} {:?}", answer.problems));
            assert!((got - figure).abs() <= 1e-9 * figure.abs().max(1.0), "{name}: {got} for {figure}");
            asked += 1;
        }
    }
    assert!(asked >= 40, "{asked}");
}
