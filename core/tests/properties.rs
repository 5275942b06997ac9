//! What holds for every value: inverse pairs, monotony, symmetry, limits, and text → quantity → text.
//!
//! The values come from a counter through a fixed mixer, so that a failure comes back; a tolerance is a count of ulps of
//! our own arithmetic, or the next term of the series named beside it.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::air::guide::{Sky, k};
use farstaff::quantity::number::{number, sexagesimal, split};
use farstaff::quantity::show::{Round, Show};
use farstaff::quantity::unit::{QUANTITIES, Quantity, Scale, System};
use farstaff::quantity::{Coefficient, Metres, Tilt};
use farstaff::ray::{combined, curvature, handbook_combined, refraction};
use farstaff::sight::{SightDoubt, imbalance, reach};

#[path = "properties/horizon.rs"]
mod horizons;
#[path = "common/random.rs"]
mod random;
use random::Random;

const R: Metres = Metres(6_371_000.0);
const SYSTEMS: [System; 3] = [System::Metric, System::Foot, System::SurveyFoot];

impl Random {
    fn sight(&mut self) -> Metres {
        Metres(self.spread(1.0, 200e3))
    }
    /// −100 to 100, as often small as large, never closer to 0 than 1e-3.
    fn k(&mut self) -> f64 {
        let size = self.spread(1e-3, 100.0);
        if self.below(2) == 0 { size } else { -size }
    }
    fn doubt(&mut self) -> SightDoubt {
        SightDoubt {
            reading: Metres(self.spread(1e-6, 1e-4)),
            reading_growth: Tilt(self.spread(1e-7, 1e-4)),
            collimation: Tilt(self.spread(1e-7, 1e-4)),
            k: self.spread(0.01, 100.0),
        }
    }
}

fn often(mut check: impl FnMut(&mut Random)) {
    let mut random = Random(1);
    (0..2000).for_each(|_| check(&mut random));
}

/// Equal within so many ulps of the larger.
#[track_caller]
fn close(a: f64, b: f64, ulps: f64) {
    assert!((a - b).abs() <= ulps * f64::EPSILON * a.abs().max(b.abs()), "{a:e} {b:e}");
}

fn ray(s: Metres, k: f64) -> Option<f64> {
    combined(s, Coefficient(k), R).map(|h| h.0)
}

// --- one sight ---

#[test]
fn what_is_seen_is_curvature_less_refraction() {
    often(|random| {
        let (s, k) = (random.sight(), random.k());
        close(ray(s, 0.0).unwrap(), curvature(s, R).0, 8.0);
        assert_eq!(refraction(s, Coefficient(0.0), R), Some(Metres(0.0)));
        let bent = refraction(s, Coefficient(k), R);
        assert_eq!(bent.is_some(), ray(s, k).is_some());
        if let (Some(bent), Some(seen)) = (bent, ray(s, k)) {
            // Both are a few ulps of the larger of the three.
            let level = curvature(s, R).0;
            assert!((level - bent.0 - seen).abs() <= 16.0 * f64::EPSILON * level.max(bent.0.abs()), "{s:?} {k}");
            assert_eq!(bent.0 > 0.0, k > 0.0);
            assert_eq!(seen > 0.0, k < 1.0);
        }
    });
}

#[test]
fn farther_and_less_bent_is_more() {
    often(|random| {
        let (s, k) = (random.sight(), random.k());
        let (more, bent) = (Metres(s.0 * (1.0 + 1e-9)), k + 1e-9 * k.abs());
        assert!(curvature(more, R).0 > curvature(s, R).0);
        assert!(curvature(s, Metres(R.0 * (1.0 + 1e-9))).0 < curvature(s, R).0);
        if let (Some(here), Some(farther), Some(lower)) = (ray(s, k), ray(more, k), ray(s, bent)) {
            assert_eq!(farther > here, k < 1.0);
            assert!(lower < here);
            assert!(refraction(s, Coefficient(bent), R) > refraction(s, Coefficient(k), R));
        }
    });
}

#[test]
fn the_ray_is_the_same_on_every_scale_and_to_both_sides() {
    often(|random| {
        let (s, k) = (random.sight(), Coefficient(random.k()));
        let (double, back) = (Metres(2.0 * s.0), Metres(-s.0));
        for of in [combined, refraction, |s, _, r| Some(curvature(s, r)), |s, k, r| Some(handbook_combined(s, k, r))] {
            // Twice is exact in binary: the same bits.
            assert_eq!(of(double, k, Metres(2.0 * R.0)).map(|h| h.0 / 2.0), of(s, k, R).map(|h| h.0));
            assert_eq!(of(back, k, R), of(s, k, R));
        }
    });
}

/// k and 2 − k bend as much to either side of the earth's curve: (1 + h/R)(1 + h′/R) = 1.
#[test]
fn mirrored_at_the_earth() {
    often(|random| {
        let (s, k) = (random.sight(), random.spread(1e-3, 50.0));
        if let (Some(up), Some(down)) = (ray(s, 1.0 - k), ray(s, 1.0 + k)) {
            // Solved for one of them, so that no digits are lost to the 1; 1 ± k is rounded by up to 1e-16.
            close(down, -up / (1.0 + up / R.0), 32.0 * (1.0 + 1.0 / k));
        }
    });
}

#[test]
fn upright_is_the_end() {
    often(|random| {
        let k = random.k();
        let end = std::f64::consts::FRAC_PI_2 * R.0 / (1.0 - k).abs();
        assert!(ray(Metres(end * (1.0 - 1e-12)), k).is_some());
        assert_eq!(ray(Metres(end * (1.0 + 1e-12)), k), None);
        assert_eq!(refraction(Metres(end * (1.0 + 1e-12)), Coefficient(k), R), None);
    });
}

#[test]
fn limits_of_the_ray() {
    often(|random| {
        let (s, k) = (random.sight(), random.k());
        assert_eq!(ray(s, 1.0), Some(0.0));
        assert_eq!(ray(Metres(50.0 * s.0), 1.0), Some(0.0));
        assert_eq!(handbook_combined(s, Coefficient(1.0), R).0, 0.0);
        assert_eq!(ray(Metres(0.0), k), Some(0.0));
        assert_eq!(curvature(Metres(0.0), R).0, 0.0);
        // k → 1: q s²/2R, and the next term is q θ²/4 of it.
        let q = libm::ldexp(1.0, -40);
        close(ray(s, 1.0 - q).unwrap(), q * s.0 * s.0 / 2.0 / R.0, 8.0 + q);
        // D → 0 and R → ∞: the parabola.
        for (s, r) in [(Metres(s.0 * 1e-9), R), (s, Metres(1e20))] {
            close(combined(s, Coefficient(k), r).unwrap().0, handbook_combined(s, Coefficient(k), r).0, 8.0);
            close(curvature(s, r).0, s.0 * s.0 / 2.0 / r.0, 8.0);
        }
    });
}

/// The parabola falls short by q²(3 + 2q)/24 · s⁴/R³, and by terms of the sixth power.
#[test]
fn the_handbook_leaves_out_the_fourth_power() {
    often(|random| {
        let (s, q) = (Metres(random.spread(20e3, 100e3)), 3.0 * random.share() - 1.0);
        let theta = s.0 / R.0;
        let left = ray(s, 1.0 - q).unwrap() - handbook_combined(s, Coefficient(1.0 - q), R).0;
        let fourth = q * q * (3.0 + 2.0 * q) / 24.0 * s.0 * theta * theta * theta;
        let sixth = 4.0 * s.0 * libm::pow(theta, 5.0);
        assert!((left - fourth).abs() <= sixth + 8.0 * f64::EPSILON * s.0 * theta, "{s:?} {q} {left:e} {fourth:e}");
    });
}

// --- how far, how unequal ---

/// What k's doubt does to sights of `mean` ± e/2, in squares: a² + b² − 2ρab = ρ(a − b)² + (1 − ρ)(a² + b²), where
/// a − b = mean · e · U_k/R does not cancel.
fn of_k(mean: f64, e: f64, doubt: f64, common: f64) -> f64 {
    let per = doubt / 2.0 / R.0;
    let apart = 2.0 * mean * e * per;
    let [a, b] = [mean - e / 2.0, mean + e / 2.0].map(|d| d * d * per);
    common * apart * apart + (1.0 - common) * (a * a + b * b)
}

#[test]
fn the_doubt_at_the_reach_is_the_allowance() {
    often(|random| {
        let (doubt, allowed) = (random.doubt(), random.spread(2e-4, 0.1));
        let d = reach(Metres(allowed), doubt, R).unwrap().0;
        let tilts = libm::hypot(doubt.reading_growth.0, doubt.collimation.0) * d;
        let bend = d * d * doubt.k / 2.0 / R.0;
        close(libm::sqrt(doubt.reading.0 * doubt.reading.0 + tilts * tilts + bend * bend), allowed, 8.0);
        let more = reach(Metres(allowed * 1.001), doubt, R).unwrap().0;
        assert!(more > d);
        for worse in [
            SightDoubt { reading: Metres(doubt.reading.0 * 1.1), ..doubt },
            SightDoubt { reading_growth: Tilt(doubt.reading_growth.0 * 1.1), ..doubt },
            SightDoubt { collimation: Tilt(doubt.collimation.0 * 1.1), ..doubt },
            SightDoubt { k: doubt.k * 1.1, ..doubt },
        ] {
            assert!(reach(Metres(allowed), worse, R).unwrap().0 <= d);
        }
        let none = SightDoubt { reading_growth: Tilt(0.0), collimation: Tilt(0.0), k: 0.0, ..doubt };
        assert_eq!(reach(Metres(allowed), none, R), Some(Metres(f64::INFINITY)));
        assert_eq!(reach(doubt.reading, doubt, R), Some(Metres(0.0)));
        assert_eq!(reach(Metres(doubt.reading.0 * 0.999), doubt, R), None);
    });
}

#[test]
fn the_doubt_at_the_imbalance_is_within_the_allowance() {
    let (mut exact, mut bounded) = (0, 0);
    often(|random| {
        let (doubt, allowed, mean) = (random.doubt(), Metres(random.spread(2e-4, 0.1)), random.spread(1.0, 200.0));
        let common = if random.below(2) == 0 { 1.0 } else { random.share() };
        let Some(Metres(e)) = imbalance(allowed, Metres(mean), doubt, common, R) else { return };
        if e > 2.0 * mean {
            return;
        }
        let (near, far) = (mean - e / 2.0, mean + e / 2.0);
        let reading = |d: f64| libm::hypot(doubt.reading.0, doubt.reading_growth.0 * d);
        let tilt = doubt.collimation.0 * e;
        let squares = reading(near) * reading(near) + reading(far) * reading(far) + tilt * tilt;
        let all = libm::sqrt(squares + of_k(mean, e, doubt.k, common));
        // Exact where k is the same on both sights. Where it is not, the doubt of k counts for a little too much.
        if common == 1.0 {
            exact += 1;
            close(all, allowed.0, 16.0);
        } else {
            bounded += 1;
            assert!(all <= allowed.0 * (1.0 + 16.0 * f64::EPSILON), "{doubt:?} {allowed:?} {mean} {common}");
            // By (1 − ρ)/4 (D e U_k/R)², less a little of the fourth power of e.
            let slack = (1.0 - common) * (mean * e * doubt.k / R.0) * (mean * e * doubt.k / R.0) / 4.0;
            assert!(
                libm::sqrt(all * all + slack) >= allowed.0 * (1.0 - 16.0 * f64::EPSILON),
                "{doubt:?} {mean} {common}"
            );
        }
        let more = imbalance(Metres(allowed.0 * 1.01), Metres(mean), doubt, common, R);
        assert!(more.unwrap().0 > e);
        assert!(imbalance(allowed, Metres(mean * 1.01), doubt, common, R).is_none_or(|longer| longer.0 <= e));
        assert!(imbalance(allowed, Metres(mean), doubt, common * 0.9, R).is_none_or(|apart| apart.0 <= e));
    });
    assert!(exact > 100 && bounded > 100, "{exact} {bounded}");
}

/// Without tilts, equal sights reach D⁴ = 2R²(allowed² − 2U_0²)/((1 − ρ)U_k²), and beyond it nothing helps.
#[test]
fn longest_equal_sights() {
    often(|random| {
        let (allowed, common) = (random.spread(2e-4, 0.1), 0.9 * random.share());
        let none = Tilt(0.0);
        let doubt = SightDoubt { reading_growth: none, collimation: none, ..random.doubt() };
        let left = allowed * allowed - 2.0 * doubt.reading.0 * doubt.reading.0;
        let end = libm::sqrt(libm::sqrt(2.0 * left / (1.0 - common)) * R.0 / doubt.k);
        let at = |d: f64| imbalance(Metres(allowed), Metres(d), doubt, common, R);
        assert!(at(end * (1.0 - 1e-12)).is_some());
        assert_eq!(at(end * (1.0 + 1e-12)), None);
        let growing = SightDoubt { reading_growth: Tilt(1e-5), ..doubt };
        assert_eq!(imbalance(Metres(allowed), Metres(end * (1.0 - 1e-12)), growing, common, R), None);
    });
}

// --- the guide of k ---

#[test]
fn the_guide_is_ordered_and_without_a_jump() {
    for sky in [Sky::Sunny, Sky::Overcast, Sky::ClearNight, Sky::Unknown] {
        let mut last = k(Metres(0.4), sky);
        for step in 0..2000 {
            let now = k(Metres(0.4 * libm::exp(f64::from(step) * 0.003)), sky);
            assert!(now.low.0 < now.value.0 && now.value.0 < now.high.0);
            // The steepest part, over 0.3 % of height: 25 in k per doubling at night, 8.5 by day.
            assert!((now.value.0 - last.value.0).abs() < 0.05 && (now.high.0 - last.high.0).abs() < 0.2);
            last = now;
        }
        // Outside, the nearest end, whatever is asked.
        for (outside, end) in [(0.0, 0.5), (-3.0, 0.5), (f64::NAN, 0.5), (f64::INFINITY, 100.0), (1e3, 100.0)] {
            assert_eq!(k(Metres(outside), sky), k(Metres(end), sky));
        }
    }
}

// --- text, quantity, text ---

/// Every way a unit is written.
fn each_unit(mut check: impl FnMut(Quantity, farstaff::quantity::unit::Unit)) {
    for q in QUANTITIES {
        q.units.iter().for_each(|info| check(q.name, *q.name.unit(info.symbol).unwrap()));
    }
}

#[test]
fn units_go_there_and_back() {
    each_unit(|quantity, unit| {
        let mut random = Random(2);
        for _ in 0..200 {
            let size = random.spread(1e-3, 80.0);
            let si = unit.to_si(size).unwrap();
            // Near k = 1 the factor loses what 1/n keeps: its digits are those of 1 − k.
            let lost = if unit.scale == Scale::RadiusFactor { 1.0 + 1.0 / (1.0 - si).abs() + si.abs() } else { 1.0 };
            close(unit.from_si(si).unwrap(), size, 8.0 * lost);
            if unit.scale != Scale::RadiusFactor {
                assert_eq!(unit.to_si(-size), Some(-si), "{quantity:?} {}", unit.symbol);
                assert_eq!(unit.from_si(-si), unit.from_si(si).map(|n| -n));
            }
        }
        // What has no value is refused, never handed on.
        for number in [0.0, 1.0, f64::MAX, f64::INFINITY, f64::NAN] {
            assert!(unit.to_si(number).is_none_or(f64::is_finite) && unit.from_si(number).is_none_or(f64::is_finite));
        }
    });
}

#[test]
fn every_spelling_of_a_unit_is_that_unit() {
    each_unit(|quantity, unit| {
        for spelling in unit.also.iter().copied().chain([unit.symbol]) {
            assert_eq!(quantity.unit(spelling), Some(&unit), "{quantity:?} {spelling}");
            assert_eq!(
                quantity.unit(&format!(" ({}) ", spelling.to_uppercase())),
                Some(&unit),
                "{quantity:?} {spelling}"
            );
        }
    });
    for quantity in QUANTITIES {
        for (system, symbol) in SYSTEMS.into_iter().zip([quantity.metric, quantity.foot, quantity.survey_foot]) {
            assert_eq!(quantity.name.usual(system).symbol, symbol);
        }
    }
}

/// Any f64 written out is read as the same f64, with point or comma, grouped or not, whatever minus and space it has.
#[test]
fn numbers_are_read_as_they_are_written() {
    often(|random| {
        let value = random.spread(1e-9, 1e9) * if random.below(2) == 0 { -1.0 } else { 1.0 };
        let (plain, exponent) = (format!("{value}"), format!("{value:e}"));
        let (head, tail) = plain.split_once('.').unwrap_or((&plain, ""));
        let grouped = if head.trim_start_matches('-').len() == 6 {
            let at = head.len() - 3;
            format!("{} {}.{tail}0", &head[..at], &head[at..])
        } else {
            plain.clone()
        };
        for text in [&plain, &exponent, &plain.replace('.', ","), &grouped] {
            for (minus, gap) in [('-', ""), ('−', " "), ('–', "\u{a0}"), ('‑', "\u{202f}")] {
                let typed = format!(" {}{gap}m ", text.replacen('-', &minus.to_string(), usize::from(value < 0.0)));
                let (digits, unit) = split(&typed);
                assert_eq!((number(&digits).map(|n| n.value), unit.as_str()), (Ok(value), "m"), "{typed}");
            }
        }
        // The text it gives back is read as the same number.
        let again = number(&number(&plain.replace('.', ",")).unwrap().text).unwrap();
        assert_eq!((again.value, again.text), (value, plain));
    });
}

#[test]
fn angles_are_read_as_they_are_written() {
    often(|random| {
        let (degrees, minutes) = (random.below(360), random.below(60));
        let seconds = f64::from(u32::try_from(random.below(6000)).unwrap()) / 100.0;
        let whole = f64::from(u32::try_from(degrees * 60 + minutes).unwrap());
        let value = (whole + seconds / 60.0) / 60.0;
        for (text, value) in [
            (format!("{degrees}°{minutes}′{seconds}″"), value),
            (format!("-{degrees}° {minutes}' {seconds}\""), -value),
            (format!("−{degrees}d{minutes}’{seconds}''"), -value),
            (format!("{degrees}º{minutes}′{}”", seconds.to_string().replace('.', ",")), value),
        ] {
            let read = sexagesimal(&text).unwrap().unwrap();
            close(read.value, value, 4.0);
            assert_eq!(sexagesimal(&read.text).unwrap().unwrap().value, read.value);
        }
    });
}

/// What is shown can be typed: it is read as the value, but for the digits left off, and is then shown the same.
#[test]
fn what_is_shown_is_read_again() {
    let read = |text: &str, quantity: Quantity| {
        let (digits, unit) = split(text);
        quantity.unit(&unit).unwrap().to_si(number(&digits).unwrap().value).unwrap()
    };
    often(|random| {
        let show = Show(SYSTEMS[random.below(3)]);
        let d = random.spread(0.1, 200e3);
        let text = |d: f64, round: Round| show.distance(d, round).to_string();
        let (near, down, up) = (text(d, Round::Near), text(d, Round::Down), text(d, Round::Up));
        let [n, low, high] = [&near, &down, &up].map(|t| read(t, Quantity::Distance));
        let ours = 4e-12 * d;
        assert!(low <= d + ours && d <= high + ours && (low..=high).contains(&n), "{d}: {down} {near} {up}");
        // Three digits, or a tenth of the unit.
        assert!(high - low <= d / 99.0 + 0.1 + ours, "{d}: {down} {up}");
        let small = if random.below(2) == 0 { random.spread(1e-6, 9.0) } else { -random.spread(1e-6, 9.0) };
        let shown = show.own(small).to_string();
        let back = read(&shown, Quantity::SmallLength);
        assert!((back - small).abs() <= small.abs() / 20.0 * 1.0001, "{small}: {shown}");
        close(read(&show.own(back).to_string(), Quantity::SmallLength), back, 4.0);
        let height = show.height(small).to_string();
        assert_eq!(show.height(read(&height, Quantity::Height)).to_string(), height, "{small}");
    });
}

/// Any text: a number that is finite, or none; never a panic.
#[test]
fn any_text_is_legal() {
    let alphabet: Vec<char> = "0123456789.,-−+/: eE′″°'\"dmft%‰()\u{a0}\u{202f}kg½٣\u{0}∞😀".chars().collect();
    often(|random| {
        let text: String = (0..random.below(24)).map(|_| alphabet[random.below(alphabet.len())]).collect();
        let (digits, unit) = split(&text);
        for read in [number(&text), number(&digits)].into_iter().chain(sexagesimal(&text)) {
            assert!(read.is_err() || read.is_ok_and(|n| n.value.is_finite()), "{text}");
        }
        for q in QUANTITIES {
            let _ = q.name.unit(&unit);
        }
    });
}
