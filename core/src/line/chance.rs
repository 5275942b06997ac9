//! The chance that a whole line clears, all of its points at once.
//!
//! The points share the air: one k for all, or all to the same side of what was expected. They share part of the
//! error of the ground, as heights of one map do. The rest of each is its own. Multiplying the chances of the single
//! points would be wrong by far: of a hundred points under one k either all fail or none.

use crate::constants::COVERAGE;
use crate::doubt::Estimate;
use crate::order::sort;
use crate::quantity::Metres;

/// A point under the line, and what its clearance may be off by. Doubts are 95 % half-widths, ≥ 0.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// How far the line runs above it, less the clearance that is wanted.
    pub spare: Metres,
    /// How much lower the line runs when k is at its low end.
    pub sinks: Metres,
    /// How much higher when k is at its high end.
    pub rises: Metres,
    /// Doubt of the ground, against the stations.
    pub ground: Metres,
    /// Doubt of what stands on it.
    pub cover: Metres,
}

impl Point {
    /// Of the line at the three values of its k, low, expected and high, over `top`.
    pub fn new(line: [Metres; 3], top: Metres, ground: Metres, cover: Metres) -> Point {
        let [low, expected, high] = line.map(|height| height.0);
        Point {
            spare: Metres(expected - top.0),
            sinks: Metres((expected - low).max(0.0)),
            rises: Metres((high - expected).max(0.0)),
            ground,
            cover,
        }
    }

    /// What the clearance may be off by, part for part: ground, cover, k. Half-widths of 95 %.
    pub fn parts(&self) -> [Estimate; 3] {
        let air = Estimate { bias: 0.0, below: self.sinks.0, above: self.rises.0 };
        [Estimate::even(0.0, self.ground.0), Estimate::even(0.0, self.cover.0), air]
    }

    /// The share of ground, cover and k in the square of the doubt, on the side that may block; nought without doubt.
    pub fn shares(&self) -> [f64; 3] {
        let squares = self.parts().map(|part| part.below * part.below);
        let all: f64 = squares.iter().sum();
        squares.map(|square| if all > 0.0 { square / all } else { 0.0 })
    }
}

/// Points that together could not lower the chance by more than this are left out.
const LEFT_OUT: f64 = 1e-5;
/// What a panel may be off by: of the inner integral, of the outer.
const PANEL: (f64, f64) = (1e-7, 1e-6);
/// As far as a normal distribution is followed: 2e-9 lies outside.
const FAR: f64 = 6.0;
/// Halvings of a panel at most: each halves what a step in it is off by.
const HALVINGS: u32 = 24;

/// A point in standard deviations of its own error.
struct Margin {
    spare: f64,
    sinks: f64,
    rises: f64,
    shared: f64,
    own: f64,
}

/// The chance that every point's spare stays above nought. `common` is the share of the variance of the ground's error
/// that all points have alike: its correlation from point to point, 0 to 1. A point without doubt counts as it stands.
///
/// P = ∫φ(z) ∫φ(w) Π Φ((c + k(z) − √ρ·g·w)/√((1−ρ)g² + v²)) dw dz; c, g, v spare, ground, cover of the point in
/// standard deviations (half-widths over [`COVERAGE`]), ρ = `common`, φ and Φ the normal density and distribution, and
/// k(z) = sinks·z below nought, rises·z above: half of the chance lies to either side of the value of k, and z = ∓2 are
/// the ends of its range, so that a lopsided range stays as it is. The line moves straight with k but for shares of
/// 1e-3.
///
/// Adaptive Simpson's rule, panels halved until steps are found; points that cannot matter are left out. Off by 1e-4 at
/// most, mostly by 1e-5 (core/tests/line holds it to sampling and to a plain sum). Model, not measurement: independent
/// errors from row to row make the chance fall as rows are added, so that rows should be no denser than errors are
/// alike. Time grows with the points that may matter: some tens of microseconds each of them.
/// Source: conditioning on what is shared; the formula is ours.
pub fn chance(points: &[Point], common: f64) -> f64 {
    let common = common.clamp(0.0, 1.0);
    let margins = worst_first(points.iter().map(|point| Margin::of(point, common)));
    let moved = margins.iter().any(|m| m.sinks > 0.0 || m.rises > 0.0);
    let shared = margins.iter().any(|m| m.shared > 0.0);
    let table = Table::new();
    let given_air = |z: f64| {
        let given_both = |w: f64| clears(&margins, &table, z, w);
        if shared { expected(&given_both, PANEL.0) } else { given_both(0.0) }
    };
    if moved { expected(&given_air, PANEL.1).clamp(0.0, 1.0) } else { given_air(0.0).clamp(0.0, 1.0) }
}

impl Margin {
    fn of(point: &Point, common: f64) -> Margin {
        let [sinks, rises, ground, cover] =
            [point.sinks, point.rises, point.ground, point.cover].map(|half| half.0 / COVERAGE);
        Margin {
            spare: point.spare.0,
            sinks,
            rises,
            shared: common.sqrt() * ground,
            own: libm::hypot((1.0 - common).sqrt() * ground, cover),
        }
    }
    /// Not less than the chance that this point is blocked: on k's upper side it is blocked no more often than without
    /// any doubt of k, and on the lower no more often than if k were as doubtful to both.
    fn blocked(&self) -> f64 {
        let all = libm::hypot(self.sinks, libm::hypot(self.shared, self.own));
        1.5 * normal(-ratio(self.spare, all))
    }
}

/// The points that may matter, the worst first, so that a product of chances soon comes to nought.
fn worst_first(margins: impl Iterator<Item = Margin>) -> Vec<Margin> {
    let mut all: Vec<(f64, Margin)> = margins.map(|m| (m.blocked(), m)).collect();
    sort(&mut all, |one| [-one.0, 0.0]);
    let mut left = 0.0;
    while let Some((blocked, _)) = all.last() {
        left += blocked;
        if left > LEFT_OUT {
            break;
        }
        all.pop();
    }
    all.into_iter().map(|(_, margin)| margin).collect()
}

/// The chance that all clear, given the air and what the ground's errors share.
fn clears(margins: &[Margin], table: &Table, z: f64, w: f64) -> f64 {
    let mut product = 1.0;
    for m in margins {
        let spare = m.spare + z * if z < 0.0 { m.sinks } else { m.rises } - w * m.shared;
        let ratio = ratio(spare, m.own);
        if ratio < FAR {
            product *= table.normal(ratio);
            if product < 1e-12 {
                return 0.0;
            }
        }
    }
    product
}

/// How many standard deviations a spare is; without any, whether it is there.
fn ratio(spare: f64, own: f64) -> f64 {
    if own > 0.0 {
        spare / own
    } else if spare >= 0.0 {
        f64::INFINITY
    } else {
        f64::NEG_INFINITY
    }
}

/// Φ between −6 and 6 in pieces of the third degree that meet in value and slope: 3e-9 off, in a tenth of the time.
struct Table(Vec<[f64; 4]>);

/// Pieces to a standard deviation.
const FINE: f64 = 32.0;

impl Table {
    fn new() -> Table {
        let edges = (0..).map(|i| f64::from(i) / FINE - FAR).take_while(|x| *x < FAR);
        let piece = |x: f64| {
            let next = x + 1.0 / FINE;
            let (from, to, start, end) = (normal(x), normal(next), density(x) / FINE, density(next) / FINE);
            [from, start, 3.0 * (to - from) - 2.0 * start - end, start + end - 2.0 * (to - from)]
        };
        Table(edges.map(piece).collect())
    }
    fn normal(&self, x: f64) -> f64 {
        let place = (x + FAR) * FINE;
        // OK as an index: what is below the table, −∞ too, becomes 0 and is told apart.
        match self.0.get(place as usize) {
            Some([a, b, c, d]) if place >= 0.0 => {
                let t = place - place.floor();
                a + t * (b + t * (c + t * d))
            }
            _ => {
                if x < 0.0 {
                    0.0
                } else {
                    1.0
                }
            }
        }
    }
}

/// Φ, the normal distribution.
fn normal(x: f64) -> f64 {
    0.5 * libm::erfc(-x * std::f64::consts::FRAC_1_SQRT_2)
}

/// φ, its density.
fn density(x: f64) -> f64 {
    0.5 * std::f64::consts::FRAC_2_SQRT_PI * std::f64::consts::FRAC_1_SQRT_2 * libm::exp(-x * x / 2.0)
}

/// ∫φ(x)·of(x) dx of a function between 0 and 1 that only rises or only falls. Panels start apart at 0, where k's two
/// sides meet.
fn expected(of: &dyn Fn(f64) -> f64, allowed: f64) -> f64 {
    let at = |x: f64| (x, of(x));
    let edges = [-FAR, -3.0, -1.5, 0.0, 1.5, 3.0, FAR].map(at);
    let panels = edges.iter().zip(edges.iter().skip(1));
    panels.map(|(&from, &to)| panel(of, from, at(f64::midpoint(from.0, to.0)), to, allowed, HALVINGS)).sum()
}

/// One panel by Simpson's rule, halved where that moves it.
fn panel(
    of: &dyn Fn(f64) -> f64,
    from: (f64, f64),
    middle: (f64, f64),
    to: (f64, f64),
    allowed: f64,
    left: u32,
) -> f64 {
    // The function only rises or only falls: between its two ends lies the truth.
    let weight = normal(to.0) - normal(from.0);
    if (to.1 - from.1).abs() * weight <= allowed {
        return f64::midpoint(from.1, to.1) * weight;
    }
    let at = |x: f64| (x, of(x));
    let (lower, upper) = (at(f64::midpoint(from.0, middle.0)), at(f64::midpoint(middle.0, to.0)));
    let [f, l, m, u, t] = [from, lower, middle, upper, to].map(|(x, value)| density(x) * value);
    let width = (to.0 - from.0) / 6.0;
    let (whole, halves) = (width * (f + 4.0 * m + t), width / 2.0 * (f + 4.0 * l + 2.0 * m + 4.0 * u + t));
    if left == 0 || (halves - whole).abs() <= 15.0 * allowed {
        return halves + (halves - whole) / 15.0;
    }
    panel(of, from, lower, middle, allowed, left - 1) + panel(of, middle, upper, to, allowed, left - 1)
}
