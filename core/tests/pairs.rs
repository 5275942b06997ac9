//! The two-peg test and levels set out from one mark: what holds for any readings, distances and air.
//!
//! A tolerance is a count of ulps of our own arithmetic, or the next term of the series named beside it.
#![allow(clippy::unwrap_used, clippy::panic, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::air::guide::KRange;
use farstaff::doubt::Estimate;
use farstaff::pairs::{PegTest, Shot, Station, agree, reading_to_set};
use farstaff::quantity::{Coefficient, Metres, Tilt};
use farstaff::ray::combined;
use farstaff::sight::budget::{Budget, Part, Term, total};
use farstaff::sight::one_mark::{best_mark, too_high, within};

#[path = "common/random.rs"]
mod random;
use random::Random;

const R: Metres = Metres(6_371_000.0);

impl Random {
    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.share()
    }
    fn k(&mut self) -> f64 {
        self.between(-14.0, 16.0)
    }
    /// Air, level and observer, all in doubt; k's range lopsided.
    fn budget(&mut self) -> Budget {
        let k = self.k();
        let range = [k - self.between(0.0, 8.0), k, k + self.between(0.0, 8.0)].map(Coefficient);
        Budget {
            k: KRange { value: range[1], low: range[0], high: range[2] },
            common: self.between(0.0, 1.0),
            radius: R,
            radius_doubt: 0.0056,
            collimation: Tilt(self.between(-2e-4, 2e-4)),
            collimation_doubt: Tilt(self.between(0.0, 1e-4)),
            reading: Metres(self.between(1e-5, 2e-3)),
            reading_growth: Tilt(self.between(0.0, 5e-5)),
            distance_doubt: self.between(0.0, 0.08),
        }
    }
    /// Both pegs from two stations anywhere, as a level of collimation error `s` reads them.
    fn test(&mut self, s: f64, k: f64) -> PegTest {
        let (rise, lines) = (self.between(-3.0, 3.0), [self.between(1.0, 4.0), self.between(1.0, 4.0)]);
        let mut shot = |line: f64, peg: f64| {
            let d = self.between(0.0, 80.0);
            let bent = combined(Metres(d), Coefficient(k), R).unwrap().0;
            Shot { reading: Metres(line - peg + (s * d + bent)), distance: Metres(d) }
        };
        let [first, second] = lines.map(|line| Station { a: shot(line, 0.0), b: shot(line, rise) });
        PegTest { first, second }
    }
}

fn often(mut check: impl FnMut(&mut Random)) {
    let mut random = Random(4);
    (0..3000).for_each(|_| check(&mut random));
}

/// A budget in which nothing is in doubt.
fn sure(k: f64) -> Budget {
    let k = Coefficient(k);
    Budget {
        k: KRange { value: k, low: k, high: k },
        common: 0.5,
        radius: R,
        radius_doubt: 0.0,
        collimation: Tilt(0.0),
        collimation_doubt: Tilt(0.0),
        reading: Metres(0.0),
        reading_growth: Tilt(0.0),
        distance_doubt: 0.0,
    }
}

fn estimate(parts: Option<[Part; 4]>) -> Estimate {
    total(&parts.unwrap())
}

fn shots(test: &mut PegTest) -> [&mut Shot; 4] {
    [&mut test.first.a, &mut test.first.b, &mut test.second.a, &mut test.second.b]
}

// --- the two-peg test ---

#[test]
fn an_error_that_was_put_in_comes_out() {
    often(|random| {
        let (s, k) = (random.between(-1e-3, 1e-3), random.k());
        let test = random.test(s, k);
        let lever = test.lever(&sure(k)).unwrap().0.abs();
        // Four readings of up to 8 m, each rounded some four times on the way in and once out.
        let ulps = 16.0 * f64::EPSILON * 8.0;
        let found = estimate(test.collimation(&sure(k)));
        assert!((found.bias - s).abs() <= ulps / lever, "{s} {} {lever}", found.bias);
        assert_eq!((found.below, found.above), (0.0, 0.0));
        // What a level in order would read: the same less s·d, to two roundings.
        let set = reading_to_set(test.second.a, Tilt(s)).0;
        assert!((set + s * test.second.a.distance.0 - test.second.a.reading.0).abs() <= 2.0 * ulps);
    });
}

#[test]
fn the_rise_is_what_it_was() {
    often(|random| {
        let (s, k) = (random.between(-1e-3, 1e-3), random.k());
        let test = random.test(s, k);
        let budget = sure(k);
        let lever = test.lever(&budget).unwrap().0.abs();
        let rise = estimate(test.rise(&budget)).bias;
        // Seen from each station by itself, with the error taken off.
        for Station { a, b } in [test.first, test.second] {
            let level =
                |shot: Shot| reading_to_set(shot, Tilt(s)).0 - combined(shot.distance, Coefficient(k), R).unwrap().0;
            let seen = level(a) - level(b);
            // Weights are up to 160 m over the lever.
            assert!((rise - seen).abs() <= 32.0 * f64::EPSILON * 8.0 * (1.0 + 160.0 / lever), "{rise} {seen} {lever}");
        }
    });
}

#[test]
fn pegs_or_stations_exchanged_change_no_bit() {
    often(|random| {
        let budget = random.budget();
        let test = random.test(1e-4, budget.k.value.0);
        let turned = |station: Station| Station { a: station.b, b: station.a };
        let pegs = PegTest { first: turned(test.first), second: turned(test.second) };
        let stations = PegTest { first: test.second, second: test.first };
        let found = test.collimation(&budget);
        assert_eq!(stations.collimation(&budget).is_some(), found.is_some());
        let Some(found) = found else { return };
        let (found, rise) = (total(&found), estimate(test.rise(&budget)));
        for other in [pegs, stations] {
            let same = estimate(other.collimation(&budget));
            assert_eq!(same.bias, found.bias);
            near(same.below, found.below, 8.0);
            near(same.above, found.above, 8.0);
        }
        assert_eq!(estimate(pegs.rise(&budget)).bias, -rise.bias);
        near(estimate(stations.rise(&budget)).half(), rise.half(), 8.0);
    });
}

/// Equal within so many ulps of the larger.
#[track_caller]
fn near(a: f64, b: f64, ulps: f64) {
    assert!((a - b).abs() <= ulps * f64::EPSILON * a.abs().max(b.abs()), "{a:e} {b:e}");
}

#[test]
fn equal_sights_show_nothing() {
    often(|random| {
        let mut test = random.test(1e-4, 0.13);
        // Both stations as unequal as each other.
        let unequal = test.first.a.distance.0 - test.first.b.distance.0;
        test.second.a.distance.0 = test.second.b.distance.0 + unequal;
        let budget = Budget { distance_doubt: 1e-9, ..sure(0.13) };
        assert_eq!(test.collimation(&budget), None);
        assert_eq!(test.rise(&budget), None);
        assert_eq!(test.lever(&budget), None);
    });
}

#[test]
fn doubt_is_what_small_changes_do() {
    often(|random| {
        let budget = Budget { radius_doubt: 0.0, ..random.budget() };
        let test = {
            let s = random.between(-5e-4, 5e-4);
            random.test(s, budget.k.value.0)
        };
        let Some(parts) = test.collimation(&budget) else { return };
        let bias = |test: &PegTest| estimate(test.collimation(&Budget { distance_doubt: 0.0, ..budget })).bias;
        let here = bias(&test);
        let (mut readings, mut distances) = (0.0_f64, 0.0_f64);
        for i in 0..4 {
            let (mut read, mut stood) = (test, test);
            let d = shots(&mut read)[i].distance.0;
            let doubt = libm::hypot(budget.reading.0, budget.reading_growth.0 * d);
            shots(&mut read)[i].reading.0 += doubt;
            readings = libm::hypot(readings, bias(&read) - here);
            let step = 1e-4;
            shots(&mut stood)[i].distance.0 += step;
            distances = libm::hypot(distances, (bias(&stood) - here) / step * budget.distance_doubt * d);
        }
        let of = |term| parts.iter().find(|p| p.term == term).unwrap().error.half();
        // Linear in the readings; in the distances up to the second order, step over lever, and what is rounded off.
        let lever = test.lever(&budget).unwrap().0.abs();
        let rounding = 1e-14 / lever;
        assert!((of(Term::Reading) - readings).abs() <= 1e-12 * of(Term::Reading) + rounding);
        let wide = (4.0 * 1e-4 / lever) * distances + 160.0 * rounding / 1e-4;
        assert!((of(Term::Distance) - distances).abs() <= wide, "{} {}", of(Term::Distance), distances);
    });
}

/// k the same for all sights: the two ends of its range give the two ends of the result's.
#[test]
fn air_shared_by_all_moves_the_result_as_k_does() {
    often(|random| {
        let budget = Budget { common: 1.0, radius_doubt: 0.0, ..random.budget() };
        let test = random.test(1e-4, budget.k.value.0);
        let Some(parts) = test.collimation(&budget) else { return };
        let at = |k: Coefficient| {
            let k = KRange { value: k, low: k, high: k };
            estimate(test.collimation(&Budget { k, ..budget })).bias
        };
        let moved = [budget.k.low, budget.k.high].map(|k| at(k) - at(budget.k.value));
        let air = parts.iter().find(|p| p.term == Term::Refraction).unwrap().error;
        let lever = test.lever(&budget).unwrap().0.abs();
        let rounding = 64.0 * f64::EPSILON * 8.0 / lever;
        assert!((air.above - moved[0].max(moved[1]).max(0.0)).abs() <= rounding, "{air:?} {moved:?}");
        assert!((air.below - (-moved[0]).max(-moved[1]).max(0.0)).abs() <= rounding, "{air:?} {moved:?}");
    });
}

#[test]
fn two_sets_agree_up_to_their_doubt() {
    let edge = 2e-5 * std::f64::consts::SQRT_2;
    assert!(agree(Tilt(1e-4), Tilt(1e-4 + 0.999_999 * edge), Tilt(2e-5)));
    assert!(!agree(Tilt(1e-4), Tilt(1e-4 - 1.000_001 * edge), Tilt(2e-5)));
    often(|random| {
        let (one, other) = (random.test(1e-4, 0.0), random.test(-3e-4, 0.0));
        // Distances of the first count for both.
        let mut same = other;
        let [a, b, c, d] = [one.first.a, one.first.b, one.second.a, one.second.b].map(|shot| shot.distance);
        for (shot, d) in shots(&mut same).into_iter().zip([a, b, c, d]) {
            shot.distance = d;
        }
        let budget = sure(0.0);
        let of = |test: &PegTest| estimate(test.collimation(&budget)).bias;
        let lever = one.lever(&budget).unwrap().0.abs();
        let (mean, both) = (of(&one.mean(&other)), f64::midpoint(of(&one), of(&same)));
        assert!((mean - both).abs() <= 64.0 * f64::EPSILON * 8.0 / lever, "{mean} {both}");
    });
}

// --- levels set out from one mark ---

#[test]
fn the_finish_radius_is_where_the_allowance_is_met() {
    let mut met = 0;
    often(|random| {
        let (budget, mark) = (random.budget(), Metres(random.between(1.0, 300.0)));
        let allowed = Metres(random.spread(5e-4, 0.05));
        let worst = |d: f64| too_high(&budget, mark, Metres(d)).worst();
        match within(&budget, mark, allowed, Metres(0.1), Metres(200e3)) {
            None => assert!(worst(mark.0) > allowed.0),
            Some(stretch) => {
                assert!(stretch.holds(mark.0));
                let (from, to) = (stretch.from, stretch.to);
                // To the last bit: the next number outwards is out.
                for (end, out, open) in
                    [(from, from.next_down(), stretch.open_below), (to, to.next_up(), stretch.open_above)]
                {
                    assert!(worst(end) <= allowed.0);
                    if !open {
                        assert!(worst(out) > allowed.0, "{end} {mark:?}");
                        met += 1;
                    }
                }
            }
        }
    });
    assert!(met > 1000, "{met} ends");
}

#[test]
fn beside_the_mark_only_the_readings_count() {
    often(|random| {
        let budget = Budget { common: 1.0, distance_doubt: 0.0, ..random.budget() };
        let mark = Metres(random.between(1.0, 300.0));
        let error = too_high(&budget, mark, mark);
        let reading = libm::hypot(budget.reading.0, budget.reading_growth.0 * mark.0) * std::f64::consts::SQRT_2;
        assert_eq!(error.bias, 0.0);
        near(error.half(), reading, 8.0);
        // Exchanged, what came out too high comes out too low.
        let work = Metres(random.between(1.0, 500.0));
        assert_eq!(too_high(&budget, mark, work).bias, -too_high(&budget, work, mark).bias);
    });
}

#[test]
fn no_mark_is_better_than_the_best() {
    let mut random = Random(9);
    for _ in 0..100 {
        let budget = random.budget();
        let works: Vec<Metres> = (0..=random.below(4)).map(|_| Metres(random.between(2.0, 400.0))).collect();
        let (best, worst) = best_mark(&budget, &works, Metres(1.0)).unwrap();
        let of =
            |mark: f64| works.iter().map(|work| too_high(&budget, Metres(mark), *work).worst()).fold(0.0_f64, f64::max);
        assert_eq!(of(best.0), worst.0);
        for i in 1..=2000 {
            let mark = 1.0 + 400.0 * f64::from(i) / 2000.0;
            // The search is good to a part in 10⁶ of the distance, and the worst no steeper than four times in it.
            assert!(of(mark) >= worst.0 * (1.0 - 4e-6), "{mark} beats {best:?}: {} {}", of(mark), worst.0);
        }
    }
    assert_eq!(best_mark(&sure(0.13), &[], Metres(1.0)), None);
}
