//! The chance that a line clears, held to sampling and to a plain sum.

use crate::{R, Random, line};
use farstaff::line::chance::{Point, chance};
use farstaff::quantity::Metres;

/// What the text of `chance` states.
const STATED: f64 = 1e-4;

fn point(spare: f64, sinks: f64, rises: f64, ground: f64, cover: f64) -> Point {
    let [spare, sinks, rises, ground, cover] = [spare, sinks, rises, ground, cover].map(Metres);
    Point { spare, sinks, rises, ground, cover }
}

fn normal(x: f64) -> f64 {
    0.5 * libm::erfc(-x / 2.0_f64.sqrt())
}

/// Many kinds of profile: points under one bulge, ground better or worse known than the air, trees on some.
fn any(random: &mut Random) -> (Vec<Point>, f64) {
    let (bulge, sinks, rises) = (random.spread(0.1, 50.0), random.spread(0.02, 3.0), random.spread(0.02, 3.0));
    let (ground, near) = (random.spread(0.01, 10.0), random.spread(0.02, 5.0));
    let points = (0..1 + random.below(40)).map(|_| {
        let x = random.share();
        let lever = 4.0 * x * (1.0 - x) * bulge;
        let cover = if random.below(3) == 0 { random.spread(0.1, 3.0) } else { 0.0 };
        point(near * random.between(-0.1, 3.0), lever * sinks * 0.1, lever * rises * 0.1, ground, cover)
    });
    let points = points.collect();
    let common = [0.0, 1.0, random.share(), random.share()][random.below(4)];
    (points, common)
}

/// Drawn again and again: one k, one shared error of the ground, and one for each point.
fn sampled(points: &[Point], common: f64, random: &mut Random, times: u32) -> f64 {
    let clear = (0..times).filter(|_| {
        let (air, shared) = (random.normal(), random.normal());
        points.iter().all(|p| {
            let bent = air * if air < 0.0 { p.sinks.0 } else { p.rises.0 };
            let ground = common.sqrt() * shared + (1.0 - common).sqrt() * random.normal();
            p.spare.0 + (bent - ground * p.ground.0 - p.cover.0 * random.normal()) / 2.0 >= 0.0
        })
    });
    f64::from(u32::try_from(clear.count()).unwrap()) / f64::from(times)
}

/// Gauss's rule of three points on strips of half a standard deviation, which meet at nought where k's sides do:
/// nothing adapts, nothing is left out. Off by 1e-6 where nothing changes within less than a strip.
fn summed(points: &[Point], common: f64) -> f64 {
    let root = libm::sqrt(0.6);
    let density = |x: f64| libm::exp(-x * x / 2.0) / libm::sqrt(2.0 * std::f64::consts::PI);
    let strips = (-12..12).map(|i| (f64::from(i) + 0.5) / 2.0);
    let weights: Vec<(f64, f64)> = strips
        .flat_map(|middle| [(-root, 5.0), (0.0, 8.0), (root, 5.0)].map(|(at, weight)| (middle + at / 4.0, weight)))
        .map(|(x, weight)| (x, weight / 18.0 / 2.0 * density(x)))
        .collect();
    let given = |air: f64, shared: f64| -> f64 {
        points
            .iter()
            .map(|p| {
                let bent = air * if air < 0.0 { p.sinks.0 } else { p.rises.0 };
                let own = libm::hypot((1.0 - common).sqrt() * p.ground.0, p.cover.0);
                let spare = 2.0 * p.spare.0 + bent - common.sqrt() * shared * p.ground.0;
                if own > 0.0 { normal(spare / own) } else { f64::from(u8::from(spare >= 0.0)) }
            })
            .product()
    };
    weights.iter().map(|(z, a)| a * weights.iter().map(|(w, b)| b * given(*z, *w)).sum::<f64>()).sum()
}

#[test]
fn as_often_as_drawn() {
    let mut random = Random(11);
    let times = 40_000;
    let (mut between, mut worst) = (0, 0.0_f64);
    for _ in 0..60 {
        let (points, common) = any(&mut random);
        let (ours, drawn) = (chance(&points, common), sampled(&points, common, &mut random, times));
        // Four and a half standard deviations of the sampling: once in 150 000.
        let spread = libm::sqrt(ours * (1.0 - ours) / f64::from(times));
        assert!((ours - drawn).abs() <= 4.5 * spread + STATED, "{ours} {drawn} {common} {points:?}");
        worst = worst.max((ours - drawn).abs() / (spread + 1e-9));
        between += u32::from(ours > 0.02 && ours < 0.98);
    }
    println!("worst {worst:.2} standard deviations, {between} between 2 % and 98 %");
    assert!(between >= 20, "{between}");
}

#[test]
fn as_a_plain_sum_has_it() {
    let mut random = Random(12);
    let (mut worst, mut smooth) = (0.0_f64, 0);
    for _ in 0..60 {
        let (points, common) = any(&mut random);
        // Where a point's own error is small, chances change within a strip: such cases are left to the sampling and to
        // those below.
        let rough = points.iter().any(|p| {
            let own = libm::hypot((1.0 - common).sqrt() * p.ground.0, p.cover.0);
            own < 0.3 * common.sqrt() * p.ground.0 || own < 0.3 * p.sinks.0.max(p.rises.0)
        });
        if rough {
            continue;
        }
        smooth += 1;
        let off = (chance(&points, common) - summed(&points, common)).abs();
        assert!(off <= STATED, "{off:e} {common} {points:?}");
        worst = worst.max(off);
    }
    println!("{smooth} smooth, off by {worst:e} at most");
    assert!(smooth >= 10, "{smooth}");
}

/// Where the answer is a closed form.
#[test]
fn what_is_known() {
    let check = |points: &[Point], common: f64, truth: f64| {
        let got = chance(points, common);
        assert!((got - truth).abs() <= STATED, "{got} for {truth}");
    };
    check(&[], 0.5, 1.0);
    // Nothing doubtful.
    assert_eq!(chance(&[point(0.1, 0.0, 0.0, 0.0, 0.0)], 0.5), 1.0);
    assert_eq!(chance(&[point(0.1, 0.0, 0.0, 0.0, 0.0), point(-0.1, 0.0, 0.0, 0.0, 0.0)], 0.5), 0.0);
    for spare in [-2.0, -0.3, 0.0, 0.01, 0.7, 1.0, 2.5] {
        // One point: all doubts in one square, two standard deviations each.
        let all = libm::sqrt(0.4 * 0.4 + 1.0 + 0.25);
        for common in [0.0, 0.3, 1.0] {
            check(&[point(spare, 0.4, 0.4, 1.0, 0.5)], common, normal(2.0 * spare / all));
        }
        // Alone: k to either side, ground, cover.
        let sides = normal(2.0 * spare / if spare > 0.0 { 0.4 } else { 3.0 });
        check(&[point(spare, 0.4, 3.0, 0.0, 0.0)], 0.3, sides);
        check(&[point(spare, 0.0, 0.0, 2.0, 0.0)], 0.3, normal(spare));
        check(&[point(spare, 0.0, 0.0, 0.0, 2.0)], 0.3, normal(spare));
        // Ten alike: ten times the same event, or ten events.
        let ten = |ground: f64, cover: f64| vec![point(spare, 0.0, 0.0, ground, cover); 10];
        check(&ten(2.0, 0.0), 1.0, normal(spare));
        check(&ten(2.0, 0.0), 0.0, libm::pow(normal(spare), 10.0));
        check(&ten(0.0, 2.0), 1.0, libm::pow(normal(spare), 10.0));
        check(&vec![point(spare, 2.0, 2.0, 0.0, 0.0); 10], 0.0, normal(spare));
        // A rock known to the millimetre among trees: a step in a slope.
        let (rock, trees) = (point(spare, 0.0, 0.0, 2.0, 0.0), point(1.0, 0.0, 0.0, 0.0, 2.0));
        check(&[rock, trees], 1.0, normal(spare) * normal(1.0));
    }
}

/// Points far below the line may be as many as they like.
#[test]
fn far_points_do_not_matter() {
    let near = point(0.5, 0.4, 0.8, 1.0, 0.5);
    let mut points = vec![near];
    points.extend((0..100_000).map(|i| point(8.0 + f64::from(i) * 1e-5, 0.4, 0.8, 1.0, 0.5)));
    let (alone, all) = (chance(&[near], 0.5), chance(&points, 0.5));
    assert!((alone - all).abs() <= STATED, "{alone} {all}");
}

#[test]
fn more_spare_is_no_less_chance() {
    let mut random = Random(13);
    for _ in 0..60 {
        let (mut points, common) = any(&mut random);
        let before = chance(&points, common);
        assert!((0.0..=1.0).contains(&before));
        let row = random.below(points.len());
        points[row].spare.0 += random.spread(0.01, 10.0);
        assert!(chance(&points, common) >= before - 2.0 * STATED);
        let all = chance(&points, common);
        points.push(point(random.between(-1.0, 5.0), 0.1, 0.1, 1.0, 0.0));
        assert!(chance(&points, common) <= all + 2.0 * STATED);
    }
}

#[test]
fn shares_of_the_doubt() {
    let point = point(1.0, 0.6, 5.0, 1.2, 0.0);
    let [ground, cover, k] = point.shares();
    // 1.44 and 0.36 of 1.80: k counts on the side on which the line sinks.
    assert!((ground - 0.8).abs() < 1e-15 && cover == 0.0 && (k - 0.2).abs() < 1e-15);
    assert_eq!(self::point(1.0, 0.0, 9.0, 0.0, 0.0).shares(), [0.0; 3]);
    let heights = [0.06, 0.13, 0.2].map(|k| line(100.0, 100.0, 20e3, k).height(Metres(10e3)));
    let made = Point::new(heights, Metres(80.0), Metres(3.0), Metres(2.0));
    // x(s − x)/2R for each k: 0.07 of it.
    assert!((made.sinks.0 - 0.07 * 1e8 / 2.0 / R.0).abs() < 1e-3 && (made.rises.0 - made.sinks.0).abs() < 1e-3);
    assert!((made.spare.0 - (heights[1].0 - 80.0)).abs() < 1e-12);
}
