//! What holds for every line.

use crate::{Ground, R, Random, line};
use farstaff::line::Line;
use farstaff::line::profile::Least;
use farstaff::quantity::{Coefficient, Metres};

/// Rounding of heights of some thousand metres.
const ROUNDING: f64 = 1e-10;
const NONE: Metres = Metres(0.0);

fn often(mut check: impl FnMut(&mut Random, Sight)) {
    let mut random = Random(3);
    for _ in 0..200 {
        let sight = Sight::any(&mut random);
        check(&mut random, sight);
    }
}

/// A line over ground that mostly comes near it.
#[derive(Debug)]
struct Sight {
    a: f64,
    b: f64,
    s: f64,
    k: f64,
    ground: Ground,
}

impl Sight {
    fn any(random: &mut Random) -> Sight {
        let level = random.spread(1.0, 3000.0);
        let (s, steep) = (random.spread(100.0, 100e3), random.spread(0.001, 0.05));
        let [a, b] = [level, level].map(|h| h + random.between(-1.0, 1.0) * steep * s);
        let k = match random.below(4) {
            0 => 0.13,
            1 => random.between(-20.0, 20.0),
            2 => 1.0,
            _ => random.between(-1.0, 1.5),
        };
        let line = line(a, b, s, k);
        let (count, depth) = (random.below(700), random.spread(0.01, 100.0));
        let ground = Ground::of((0..count).map(|_| {
            let x = s * random.share();
            (x, line.height(Metres(x)).0 - depth * (random.share() - 0.02))
        }));
        Sight { a, b, s, k, ground }
    }
    fn line(&self) -> Line {
        line(self.a, self.b, self.s, self.k)
    }
    fn least(&self) -> Option<Least> {
        self.line().least(self.ground.profile())
    }
}

/// Every point by itself.
fn plainly(line: &Line, ground: &Ground) -> Option<f64> {
    let inside = |x: f64| (x - line.length().0 / 2.0).abs() < line.length().0 / 2.0;
    let all = ground.at_m.iter().zip(&ground.top_m).filter(|(x, top)| inside(**x) && top.is_finite());
    all.map(|(&x, &top)| line.clearance(Metres(x), Metres(top)).0).min_by(f64::total_cmp)
}

#[test]
fn the_least_is_that_of_every_point() {
    often(|random, sight| {
        let least = sight.least();
        assert_eq!(least.map(|l| l.clearance.0), plainly(&sight.line(), &sight.ground), "{sight:?}");
        if let Some(least) = least {
            assert_eq!(least.at.0, sight.ground.at_m[least.row]);
        }
        // Rows that are no points change nothing, wherever they stand.
        let mut more = sight.ground.clone();
        for (x, top) in [(-1.0, 1e9), (sight.s + 1.0, 1e9), (0.0, 1e9), (sight.s, 1e9), (f64::NAN, 1e9)] {
            let at = random.below(more.at_m.len() + 1);
            more.at_m.insert(at, x);
            more.top_m.insert(at, top);
            more.at_m.push(sight.s / 2.0);
            more.top_m.push(f64::NAN);
        }
        let same = |one: Option<Least>, other: Option<Least>| {
            assert_eq!(one.map(|l| (l.at, l.clearance)), other.map(|l| (l.at, l.clearance)));
        };
        same(sight.line().least(more.profile()), least);
        more.at_m.push(sight.s / 3.0);
        more.top_m.push(f64::INFINITY);
        same(sight.line().least(more.profile()), least);
    });
}

/// Ground that follows the line within less than the parabola is off: the exact form decides between all points.
#[test]
fn ground_along_the_line() {
    for (a, b, s, k) in [(100.0, 900.0, 90e3, 0.13), (0.0, 0.0, 180e3, -3.0), (2000.0, 10.0, 30e3, 16.0)] {
        let (line, mut random) = (line(a, b, s, k), Random(5));
        let ground = Ground::of((1..5000).map(|i| {
            let x = s * f64::from(i) / 5000.0;
            (x, line.height(Metres(x)).0 - 1.0 - 1e-9 * random.share())
        }));
        assert_eq!(line.least(ground.profile()).map(|l| l.clearance.0), plainly(&line, &ground));
    }
}

#[test]
fn the_order_of_the_rows_does_not_matter() {
    often(|random, mut sight| {
        // Some twice, so that there are equals.
        let again: Vec<f64> = sight.ground.at_m.iter().copied().take(20).collect();
        let heights: Vec<f64> = sight.ground.top_m.iter().copied().take(20).collect();
        sight.ground.at_m.extend(again);
        sight.ground.top_m.extend(heights);
        let mut rows: Vec<(f64, f64)> =
            sight.ground.at_m.iter().copied().zip(sight.ground.top_m.iter().copied()).collect();
        for i in (1..rows.len()).rev() {
            rows.swap(i, random.below(i + 1));
        }
        let shuffled = Ground::of(rows);
        let (line, wanted) = (sight.line(), Metres(random.between(0.0, 10.0)));
        let (one, other) = (sight.ground.profile(), shuffled.profile());
        assert_eq!(line.least(one).map(|l| (l.at, l.clearance)), line.least(other).map(|l| (l.at, l.clearance)));
        assert_eq!(line.grazing_k(one, wanted), line.grazing_k(other, wanted));
        assert_eq!(line.raise_a(one, wanted), line.raise_a(other, wanted));
        assert_eq!(line.raise_b(one, wanted), line.raise_b(other, wanted));
        assert_eq!(line.raise_both(one, wanted), line.raise_both(other, wanted));
        assert_eq!(line.cheapest(one, wanted, 1.0, 2.0), line.cheapest(other, wanted, 1.0, 2.0));
    });
}

#[test]
fn a_sees_b_as_b_sees_a() {
    often(|random, sight| {
        let back = line(sight.b, sight.a, sight.s, sight.k);
        let turned =
            Ground { at_m: sight.ground.at_m.iter().map(|x| sight.s - x).collect(), top_m: sight.ground.top_m.clone() };
        let close = |one: Option<f64>, other: Option<f64>, tolerance: f64| match (one, other) {
            (Some(one), Some(other)) => assert!((one - other).abs() <= tolerance, "{one} {other} {sight:?}"),
            _ => assert_eq!(one, other),
        };
        // A difference of heights of two points an ulp of s apart.
        let least = |line: Line, ground: &Ground| line.least(ground.profile()).map(|l| l.clearance.0);
        close(least(sight.line(), &sight.ground), least(back, &turned), ROUNDING);
        let wanted = Metres(random.between(0.0, 10.0));
        let both = |line: Line, ground: &Ground| line.raise_both(ground.profile(), wanted).map(|m| m.0);
        close(both(sight.line(), &sight.ground), both(back, &turned), ROUNDING);
        let there = sight.line().raise_a(sight.ground.profile(), wanted).map(|m| m.0);
        let here = back.raise_b(turned.profile(), wanted).map(|m| m.0);
        close(there, here, 1e-9 * there.unwrap_or(0.0).max(1.0));
    });
}

#[test]
fn the_line_starts_and_ends_at_its_stations() {
    often(|_, sight| {
        let line = sight.line();
        // Six ulps are promised.
        let close = |got: Metres, station: f64| assert!((got.0 - station).abs() <= 6.0 * f64::EPSILON * station.abs());
        close(line.height(NONE), sight.a);
        close(line.height(Metres(sight.s)), sight.b);
        assert_eq!(line.handbook_height(NONE).0, sight.a);
    });
}

#[test]
fn raising_never_hides_and_ground_never_opens() {
    often(|random, sight| {
        let Some(least) = sight.least() else { return };
        let raise = random.spread(0.01, 100.0);
        for (a, b) in [(raise, 0.0), (0.0, raise), (raise, raise)] {
            let raised = sight.line().raised(Metres(a), Metres(b)).unwrap().least(sight.ground.profile()).unwrap();
            assert!(raised.clearance > least.clearance, "{sight:?}");
        }
        let mut higher = sight.ground.clone();
        let row = random.below(higher.at_m.len());
        higher.top_m[row] += raise;
        assert!(sight.line().least(higher.profile()).unwrap().clearance <= least.clearance);
        higher.at_m.push(sight.s * random.share());
        higher.top_m.push(sight.a - random.spread(0.1, 100.0));
        assert!(sight.line().least(higher.profile()).unwrap().clearance <= least.clearance);
        // Cutting never hides, and wins no more than the next worst leaves.
        let cut =
            sight.line().least_when_cut(sight.ground.profile(), least.row, Metres(least.clearance.0 - 1e4)).unwrap();
        let mut without = sight.ground.clone();
        without.top_m[least.row] = least.clearance.0 - 1e4;
        assert_eq!(Some(cut), sight.line().least(without.profile()));
        assert!(cut.clearance >= least.clearance);
    });
}

#[test]
fn more_bent_is_higher() {
    often(|random, sight| {
        let Some(least) = sight.least() else { return };
        let more = line(sight.a, sight.b, sight.s, sight.k + random.spread(1e-3, 1.0));
        // A point so near to a station hardly rises.
        assert!(more.least(sight.ground.profile()).unwrap().clearance.0 >= least.clearance.0 - ROUNDING);
        let x = Metres(sight.s * random.between(0.01, 0.99));
        assert!(more.height(x) > sight.line().height(x));
    });
}

#[test]
fn at_the_grazing_k_the_clearance_is_what_was_wanted() {
    let mut found = 0;
    often(|random, sight| {
        let wanted = Metres(random.between(-1.0, 10.0));
        let Some(k) = sight.line().grazing_k(sight.ground.profile(), wanted) else {
            return;
        };
        found += 1;
        let there = sight.line().in_air(k).unwrap().least(sight.ground.profile()).unwrap();
        // Its own stop is a nanometre.
        assert!((there.clearance.0 - wanted.0).abs() <= 2e-9, "{sight:?} {k:?} {there:?}");
        let spare = sight.least().unwrap().clearance.0 - wanted.0;
        assert!(spare.abs() < 1e-9 || (spare > 0.0) == (k.0 < sight.k), "{sight:?} {k:?}");
    });
    assert!(found > 50, "{found}");
}

/// No air helps what stands above the line at a station, no ray passes above the sky.
#[test]
fn what_cannot_be_is_said() {
    let flat = line(10.0, 10.0, 1000.0, 0.13);
    let none = Ground::default();
    assert_eq!(flat.least(none.profile()), None);
    assert_eq!(flat.grazing_k(none.profile(), NONE), None);
    assert_eq!(flat.raise_a(none.profile(), NONE), Some(NONE));
    assert_eq!(flat.raise_both(none.profile(), NONE), Some(NONE));
    let stands = flat.cheapest(none.profile(), NONE, 1.0, 1.0).unwrap();
    assert_eq!((stands.a, stands.b), (NONE, NONE));
    assert_eq!(flat.grazing_k(Ground::of([(1.0, 200.0)]).profile(), NONE), None);
    for (a, s, k) in [(f64::NAN, 1e3, 0.0), (-7e6, 1e3, 0.0), (0.0, -1.0, 0.0), (0.0, f64::NAN, 0.0), (0.0, 1e3, 1e9)] {
        assert_eq!(Line::new(Metres(a), NONE, Metres(s), Coefficient(k), R), None, "{a} {s} {k}");
    }
}

#[test]
fn raised_so_far_it_clears_and_no_farther() {
    let mut blocked = 0;
    often(|random, sight| {
        let (line, profile, wanted) = (sight.line(), sight.ground.profile(), Metres(random.between(0.0, 3.0)));
        let Some(least) = sight.least() else { return };
        let lacking = least.clearance.0 < wanted.0;
        blocked += u32::from(lacking);
        let [a, b, both] =
            [line.raise_a(profile, wanted), line.raise_b(profile, wanted), line.raise_both(profile, wanted)];
        for (a, b) in [(a, Some(NONE)), (Some(NONE), b), (both, both)] {
            let (Some(a), Some(b)) = (a, b) else { continue };
            let raise = a.0.max(b.0);
            if raise > 1e4 {
                // From beside a station: the ray leaves steeply, and what is lost to its slope is no longer rounding.
                continue;
            }
            assert_eq!(raise > 0.0, lacking);
            if lacking {
                let then = line.raised(a, b).unwrap().least(profile).unwrap().clearance.0;
                assert!((then - wanted.0).abs() <= 2e-9, "{then} {wanted:?} {sight:?}");
            }
        }
    });
    assert!(blocked > 50, "{blocked}");
}

/// No pair on a grid of pairs is cheaper, and the cheapest clears.
#[test]
fn no_pair_of_stands_is_cheaper() {
    let (mut pairs, mut single) = (0, 0);
    often(|random, sight| {
        let (line, profile, wanted) = (sight.line(), sight.ground.profile(), Metres(random.between(0.0, 3.0)));
        let (cost_a, cost_b) = (random.spread(0.3, 3.0), random.spread(0.3, 3.0));
        let Some(stands) = line.cheapest(profile, wanted, cost_a, cost_b) else { return };
        if stands.cost == 0.0 {
            assert!(sight.least().is_none_or(|l| l.clearance.0 >= wanted.0 - ROUNDING));
            return;
        }
        *(if stands.a.0 > 0.0 && stands.b.0 > 0.0 { &mut pairs } else { &mut single }) += 1;
        assert!((stands.cost - cost_a * stands.a.0 - cost_b * stands.b.0).abs() <= ROUNDING);
        let then = line.raised(stands.a, stands.b).unwrap().least(profile).unwrap();
        assert!(then.clearance.0 >= wanted.0 - 2e-9, "{then:?} {wanted:?}");
        // The other stand that a stand at A calls for is known exactly: along all of A, nothing is cheaper but for the
        // share of a thousandth that the text allows.
        for i in 0..=20 {
            let a = 2.0 * stands.a.0.max(stands.b.0) * f64::from(i) / 20.0;
            let Some(b) = line.raised(Metres(a), NONE).unwrap().raise_b(profile, wanted) else { continue };
            assert!(cost_a * a + cost_b * b.0 >= stands.cost * 0.999, "{a} {b:?} {stands:?} {sight:?}");
        }
    });
    assert!(pairs > 30 && single > 3, "{pairs} {single}");
}
