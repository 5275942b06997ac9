//! What holds for every horizon.

use super::{R, Random, close, often};
use farstaff::air::guide::{Sky, k};
use farstaff::horizon;
use farstaff::quantity::{Coefficient, Metres};
use farstaff::ray::combined;

/// Eye heights from a centimetre to ten kilometres, k from −100 to just below 1.
fn eye(random: &mut Random) -> (Metres, Coefficient) {
    let k = if random.below(2) == 0 { -random.spread(1e-3, 100.0) } else { 0.99 * random.share() };
    (Metres(random.spread(0.01, 1e4)), Coefficient(k))
}

/// s = Rδ/q, the line to it is longer than the arc below by the height at most, and the ray from it passes the eye.
#[test]
fn horizon_dip_and_ray_are_one() {
    often(|random| {
        let (h, k) = eye(random);
        let s = horizon::distance(h, k, R).unwrap();
        close(horizon::dip(h, k, R).unwrap().0 * R.0, s.0 * (1.0 - k.0), 8.0);
        let line = horizon::line(h, k, R).unwrap().0;
        assert!(line > s.0 * (1.0 - s.0 * s.0 / 24.0 / R.0 / R.0) * (1.0 - 1e-15) && line < s.0 + h.0, "{h:?} {k:?}");
        // The ray that leaves the horizon level is at the eye's height there: the height grows twice as fast as s, and by
        // more where it is steep.
        let steep = libm::tan((1.0 - k.0) * s.0 / R.0) * s.0 / h.0 * (1.0 + h.0 / R.0);
        close(combined(s, k, R).unwrap().0, h.0, 8.0 * steep);
        // Short of the horizon the same formula ends at the same dip.
        close(horizon::dip_short(h, s, k, R).unwrap().0, horizon::dip(h, k, R).unwrap().0, 16.0);
    });
}

#[test]
fn higher_and_more_bent_sees_farther() {
    often(|random| {
        let (h, k) = eye(random);
        let (higher, bent) = (Metres(h.0 * (1.0 + 1e-9)), Coefficient(k.0 + 1e-9 * (1.0 + k.0.abs())));
        let s = random.sight();
        for of in [horizon::distance, horizon::line, |h, k, r| horizon::visible_range(h, Metres(30.0), k, r)] {
            assert!(of(higher, k, R) > of(h, k, R) && of(h, bent, R) > of(h, k, R), "{h:?} {k:?}");
        }
        assert!(horizon::dip(higher, k, R) > horizon::dip(h, k, R) && horizon::dip(h, bent, R) < horizon::dip(h, k, R));
        // Raising the eye never hides, more air never hides, going farther never shows.
        let hidden = |h, s, k| horizon::hidden(h, s, k, R).map_or(f64::INFINITY, |m| m.0);
        let here = hidden(h, s, k);
        assert!(hidden(higher, s, k) <= here && hidden(h, s, bent) <= here);
        assert!(hidden(h, Metres(s.0 * (1.0 + 1e-9)), k) >= here);
        // A nearer shore is lower, a farther one never above the horizon.
        let horizon = horizon::distance(h, k, R).unwrap().0;
        let [near, far] = [0.3, 0.6].map(|share| horizon::dip_short(h, Metres(share * horizon), k, R).unwrap().0);
        assert!(near > far && far > horizon::dip(h, k, R).unwrap().0);
    });
}

/// At the visible range just the top is left, and the two see each other: it is the same from both ends.
#[test]
fn raised_is_where_the_top_is_no_longer_hidden() {
    often(|random| {
        let (h, k) = eye(random);
        let target = Metres(random.spread(0.01, 1e4));
        let range = horizon::visible_range(h, target, k, R).unwrap();
        assert_eq!(range, horizon::visible_range(target, h, k, R).unwrap());
        // What is left of the range beyond the horizon is a difference, and the height grows at least as its square.
        let beyond = horizon::distance(target, k, R).unwrap().0;
        let steep = libm::tan((1.0 - k.0) * beyond / R.0) * range.0 / target.0 * (1.0 + target.0 / R.0);
        close(horizon::hidden(h, range, k, R).unwrap().0, target.0, 16.0 * steep);
        let nearer = Metres(range.0 * (1.0 - 1e-6));
        assert!(horizon::hidden(h, nearer, k, R).unwrap() < target);
        // From the horizon in, nothing is hidden.
        let horizon = horizon::distance(h, k, R).unwrap();
        assert_eq!(horizon::hidden(h, horizon, k, R), Some(Metres(0.0)));
        assert!(horizon::hidden(h, Metres(horizon.0 * (1.0 + 1e-6)), k, R).unwrap().0 > 0.0);
    });
}

/// Without air: the straight line that touches a sphere.
#[test]
fn without_air_it_is_the_tangent() {
    let k = Coefficient(0.0);
    often(|random| {
        let (h, s) = (random.spread(0.01, 1e4), random.sight());
        let tangent = libm::sqrt(h * (2.0 * R.0 + h));
        close(horizon::dip(Metres(h), k, R).unwrap().0, libm::atan2(tangent, R.0), 8.0);
        close(horizon::distance(Metres(h), k, R).unwrap().0, R.0 * libm::atan2(tangent, R.0), 8.0);
        close(horizon::line(Metres(h), k, R).unwrap().0, tangent, 8.0);
        // From the eye to the shore: across and down in the plane of both.
        let theta = s.0 / R.0;
        let half = libm::sin(theta / 2.0);
        let down = libm::atan2(h + 2.0 * R.0 * half * half, R.0 * libm::sin(theta));
        close(horizon::dip_short(Metres(h), s, k, R).unwrap().0, down, 16.0);
    });
}

#[test]
fn limits_of_the_horizon() {
    often(|random| {
        let (h, s) = (Metres(random.spread(0.01, 1e4)), random.sight());
        for k in [1.0, 1.0 - 1e-12, 1.001, 2.0, 100.0] {
            let k = Coefficient(k);
            assert_eq!((horizon::dip(h, k, R), horizon::distance(h, k, R), horizon::line(h, k, R)), (None, None, None));
            assert_eq!(horizon::visible_range(h, h, k, R), None);
            assert_eq!(horizon::hidden(h, s, k, R), Some(Metres(0.0)));
        }
        // A shore is seen at any k: at 1 in proportion to its distance, above it higher still.
        let level = horizon::dip_short(h, s, Coefficient(1.0), R).unwrap().0;
        close(libm::tan(level), libm::log1p(h.0 / R.0) * R.0 / s.0, 8.0 + level * level * 1e3);
        assert!(horizon::dip_short(h, s, Coefficient(1.01), R).unwrap().0 < level);
        assert_eq!(horizon::dip_short(h, Metres(1e6), Coefficient(-100.0), R), None);
        // Low over the surface, and on a flat earth, the parabola; twice is exact in binary: the same bits.
        let (_, k) = eye(random);
        for (h, r) in [(Metres(h.0 * 1e-15), R), (h, Metres(R.0 * 1e15))] {
            close(horizon::distance(h, k, r).unwrap().0, libm::sqrt(2.0 * r.0 * h.0 / (1.0 - k.0)), 16.0);
        }
        let (double, twice) = (Metres(2.0 * R.0), Metres(2.0 * h.0));
        assert_eq!(horizon::distance(twice, k, double).unwrap().0, 2.0 * horizon::distance(h, k, R).unwrap().0);
        assert_eq!(horizon::dip(twice, k, double), horizon::dip(h, k, R));
    });
}

/// Our rule for water: from the water's own air, low, to the guide's highest row, high; it always holds nautical tables' k.
#[test]
fn air_over_water() {
    for sky in [Sky::Sunny, Sky::Overcast, Sky::Unknown, Sky::ClearNight] {
        let aloft = k(Metres(100.0), sky);
        let mut last = horizon::over_water(Metres(0.001), sky);
        assert!((last.low.0 + 0.04).abs() < 1e-12 && last.low.0 < last.value.0, "{last:?}");
        for step in 0..1000 {
            let now = horizon::over_water(Metres(0.01 * libm::exp(f64::from(step) * 0.03)), sky);
            assert!(now.low.0 >= last.low.0 && now.high.0 <= last.high.0 && (now.low.0 - last.low.0) < 0.01);
            assert!(now.low.0 < now.value.0 && now.value.0 < now.high.0);
            assert!((now.low.0..=now.high.0).contains(&horizon::NAUTICAL_K.0));
            last = now;
        }
        assert!((last.low.0 - aloft.low.0).abs() < 1e-4 && (last.high.0 - aloft.high.0).abs() < 1e-4);
    }
    // The mean over a leg, weighted by what the air does to it, is a sixth; the legs are symmetric.
    assert_eq!(horizon::line_height(Metres(12.0), Metres(0.0)), Metres(2.0));
    assert_eq!(horizon::line_height(Metres(9.0), Metres(9.0)), Metres(1.5));
    assert_eq!(horizon::line_height(Metres(4.0), Metres(100.0)), horizon::line_height(Metres(100.0), Metres(4.0)));
}
