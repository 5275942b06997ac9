//! k along a line that runs low.

use crate::{Ground, R, Random, line};
use farstaff::air::guide::{self, KRange, Sky};
use farstaff::line::along::{Air, Along, LOW_SHARE};
use farstaff::quantity::{Coefficient, Metres};

/// So large an earth that nothing bends the line: its heights are known, and k_eff does not depend on the radius.
const FLAT: Metres = Metres(1e15);

fn range(k: f64) -> KRange {
    let [value, low, high] = [k, k - 0.5, k + 2.0].map(Coefficient);
    KRange { value, low, high }
}

fn along(a: f64, b: f64, s: f64, ground: &Ground, air: Air, r: Metres) -> Option<Along> {
    Along::new([Metres(a), Metres(b)], Metres(s), ground.profile(), Metres(0.5), air, r)
}

fn level() -> Ground {
    Ground::of([(0.0, 0.0)])
}

fn near(got: f64, expected: f64, tolerance: f64) {
    assert!((got - expected).abs() <= tolerance, "{got} for {expected}");
}

/// k of the air over ground that gives off 200 W/m² at u* = 0.25 m/s, 298.15 K, 1013.25 hPa: Monin–Obukhov with Dyer's
/// (1974) gradient, k = 503 P/T² (0.0343 + dT/dz) (Hirt et al. 2010).
fn heated(height: Metres) -> KRange {
    let (heat, friction, kelvin, hectopascal) = (200.0, 0.25, 298.15, 1013.25);
    let (karman, capacity, gravity, gas) = (0.4, 1005.0, 9.81, 287.05);
    let density = 100.0 * hectopascal / (gas * kelvin);
    let scale = -libm::pow(friction, 3.0) * kelvin * density * capacity / (karman * gravity * heat);
    let gradient =
        -heat / (density * capacity * friction) / (karman * height.0) / libm::sqrt(1.0 - 16.0 * height.0 / scale)
            - gravity / capacity;
    range(503.0 * hectopascal / (kelvin * kelvin) * (0.0343 + gradient))
}

/// The same air at 1.5, 10 and 30 m in 50-digit arithmetic, then over 500 m from 1.5 to 10 m and from 10 to 1.5 m as
/// seen from the first end, and the plain mean: figures of our own, three digits.
#[test]
fn as_seen_from_either_end() {
    near(heated(Metres(1.5)).value.0, -2.92292992952075, 1e-13);
    near(heated(Metres(10.0)).value.0, -0.0574645238511492, 1e-13);
    near(heated(Metres(30.0)).value.0, 0.102007446148779, 1e-13);
    let up = along(1.5, 10.0, 500.0, &level(), &heated, FLAT).unwrap();
    near(up.k_at(0.0).value.0, -0.863, 5e-4);
    near(up.k_at(500.0).value.0, -0.263, 5e-4);
    let down = along(10.0, 1.5, 500.0, &level(), &heated, FLAT).unwrap();
    near(down.k_at(0.0).value.0, -0.263, 5e-4);
    // The mean of what both ends see is the plain mean.
    near((up.k_at(0.0).value.0 + up.k_at(500.0).value.0) / 2.0, -0.563, 5e-4);
}

/// k growing evenly along the line, from k₀ to k₁: the string's deflection is a cubic, and k at x is
/// k₀ + (k₁ − k₀)(s + x)/3s.
#[test]
fn evenly_growing_k() {
    let air = |height: Metres| range(0.1 * height.0 - 1.0);
    for (a, b, s) in [(2.0, 40.0, 3000.0), (30.0, 1.0, 800.0)] {
        let along = along(a, b, s, &level(), &air, FLAT).unwrap();
        for i in 0..=100 {
            let x = s * f64::from(i) / 100.0;
            let expected = 0.1 * (a + (b - a) * (s + x) / (3.0 * s)) - 1.0;
            let found = along.k_at(x);
            // Straight from piece to piece is what it is: only rounding is left, s/(s − x) times as much at the end.
            near(found.value.0, expected, 1e-10);
            near(found.low.0, expected - 0.5, 1e-10);
            near(found.high.0, expected + 2.0, 1e-10);
        }
    }
}

/// Against Green's function of the string, summed in 200 000 strips: what the pieces leave of a sharply curved k.
#[test]
fn as_greens_function_has_it() {
    let (a, b, s) = (1.6, 3.0, 2000.0);
    let hill = Ground::of([(0.0, 0.0), (700.0, 1.5), (1500.0, -6.0), (2000.0, 0.0)]);
    let ground = |x: f64| {
        let ends = [(0.0, 0.0), (700.0, 1.5), (1500.0, -6.0), (2000.0, 0.0)];
        let at = ends.windows(2).find(|w| x <= w[1].0).unwrap();
        at[0].1 + (at[1].1 - at[0].1) * (x - at[0].0) / (at[1].0 - at[0].0)
    };
    let air = |height: Metres| guide::k(height, Sky::Sunny);
    let found = along(a, b, s, &hill, &air, FLAT).unwrap();
    let strips = 200_000;
    for x in [100.0, 700.0, 1000.0, 1900.0] {
        let sum: f64 = (0..strips)
            .map(|i| s * (f64::from(i) + 0.5) / f64::from(strips))
            .map(|t| {
                let green = if t <= x { t * (s - x) / s } else { x * (s - t) / s };
                green * air(Metres((a + (b - a) * t / s - ground(t)).max(0.5))).value.0
            })
            .sum();
        let expected = sum * s / f64::from(strips) / (x * (s - x) / 2.0);
        near(found.k_at(x).value.0, expected, 0.001 * expected.abs());
    }
}

/// One k everywhere is that k everywhere, to every digit but rounding, whatever ground and radius.
#[test]
fn one_air_is_one_k() {
    let mut random = Random(21);
    for _ in 0..50 {
        let (s, k) = (random.spread(100.0, 50e3), random.between(-5.0, 5.0));
        let ground = Ground::of((0..random.below(30) + 1).map(|_| (s * random.share(), random.between(-50.0, 50.0))));
        let same = |_: Metres| range(k);
        let along = along(random.between(0.0, 100.0), 20.0, s, &ground, &same, R).unwrap();
        for x in [0.0, 1e-3 * s, 0.3 * s, 0.999 * s, s] {
            near(along.k_at(x).value.0, k, 1e-9);
            near(along.k_at(x).high.0, k + 2.0, 1e-9);
        }
    }
}

/// The line that is found runs through the air that bends it: by equal steps from the first station, h″ = (1 − k)/R.
#[test]
fn the_line_and_its_air_agree() {
    for (a, b, s, sky) in [
        (2.0, 2.0, 800.0, Sky::Sunny),
        (1.6, 4.0, 1500.0, Sky::ClearNight),
        (5.0, 12.0, 4000.0, Sky::Overcast),
        (30.0, 30.0, 15e3, Sky::Unknown),
    ] {
        let air = |height: Metres| guide::k(height, sky);
        let found = along(a, b, s, &level(), &air, R).unwrap();
        let height = |x: f64| line(a, b, s, found.k_at(x).value.0).height(Metres(x)).0;
        let step = s / 500.0;
        for i in 1..500 {
            let x = step * f64::from(i);
            let bent = (height(x - step) - 2.0 * height(x) + height(x + step)) / step / step;
            let k = air(Metres(height(x).max(0.5))).value.0;
            // The height is settled to 0.1 mm, k at half a metre changes by 17 a metre; k is straight in pieces.
            near(1.0 - bent * R.0, k, 0.02 * k.abs().max(1.0));
        }
    }
}

#[test]
fn the_same_from_both_ends() {
    let mut random = Random(22);
    for _ in 0..30 {
        let (a, b, s) = (random.between(1.0, 30.0), random.between(1.0, 30.0), random.spread(200.0, 3000.0));
        let points: Vec<(f64, f64)> = (0..20).map(|_| (s * random.share(), random.between(-20.0, 0.5))).collect();
        let turned = Ground::of(points.iter().map(|(x, top)| (s - x, *top)));
        let air = |height: Metres| guide::k(height, Sky::Overcast);
        let there = along(a, b, s, &Ground::of(points), &air, R).unwrap();
        let back = along(b, a, s, &turned, &air, R).unwrap();
        for x in [0.0, 0.2 * s, 0.5 * s, s] {
            // 0.1 mm of height is what each is settled to.
            near(there.k_at(x).value.0, back.k_at(s - x).value.0, 2e-3);
        }
        near(there.low_share(), back.low_share(), 1e-3);
    }
}

#[test]
fn where_it_is_used() {
    let air = |height: Metres| guide::k(height, Sky::Sunny);
    let none = Ground::default();
    assert_eq!(along(1.0, 1.0, 100.0, &none, &air, R), None);
    let low = along(1.6, 1.6, 500.0, &level(), &air, R).unwrap();
    near(low.low_share(), 1.0, 0.0);
    assert!(low.varies());
    let high = along(60.0, 60.0, 5000.0, &level(), &air, R).unwrap();
    near(high.low_share(), 0.0, 0.0);
    assert!(!high.varies());
    // From a tripod across a valley: low over the first 20 m of fall and the last.
    let valley = Ground::of([(0.0, 0.0), (500.0, -100.0), (9500.0, -100.0), (10e3, 0.0)]);
    let across = along(1.6, 1.6, 10e3, &valley, &air, R).unwrap();
    near(across.low_share(), 2.0 * 92.0 / 10e3, 1e-3);
    assert!(!across.varies() && across.low_share() < LOW_SHARE);
    // The k of the middle counts little for what stands beside the station, and the other way about.
    assert!(across.k_at(20.0).value < across.k_at(5000.0).value);
}

/// Hot ground, long and low: whatever comes of it, it is a number or nothing.
#[test]
fn any_ground_is_legal() {
    let mut random = Random(23);
    let (mut found, mut none) = (0, 0);
    for _ in 0..100 {
        let s = random.spread(10.0, 100e3);
        let points = (0..random.below(40)).map(|_| {
            let x = [s * random.share(), random.between(-s, 2.0 * s), f64::NAN, 0.0, s][random.below(5)];
            (x, [0.0, random.between(-100.0, 100.0), f64::NAN, f64::INFINITY, 1e300][random.below(5)])
        });
        let ground = Ground::of(points);
        let sky = [Sky::Sunny, Sky::Overcast, Sky::ClearNight, Sky::Unknown][random.below(4)];
        let air = |height: Metres| guide::k(height, sky);
        match along(random.between(-10.0, 50.0), random.between(-10.0, 50.0), s, &ground, &air, R) {
            Some(along) => {
                found += 1;
                for x in [-1.0, 0.0, 1e-9, s / 3.0, s * (1.0 - 1e-15), s, 2.0 * s] {
                    let k = along.k_at(x);
                    assert!(k.low <= k.value && k.value <= k.high && k.value.0.abs() < 100.0, "{x} {k:?}");
                }
            }
            None => none += 1,
        }
    }
    println!("{found} found, {none} not");
    assert!(found > 50);
}
