//! What would make a line clear: other air, raised stations, a pair of stands.
//!
//! Through any two points runs one ray ([`Line::new`]), known also beyond them: the height that a station needs is that
//! of the ray from the other station over the obstacle. So nothing is searched for but where two heights grow together.

use super::Line;
use super::profile::Profile;
use crate::order::sort;
use crate::quantity::{Coefficient, Metres};

/// How high the two stations are to be raised.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stands {
    /// The first.
    pub a: Metres,
    /// The second.
    pub b: Metres,
    /// What both cost, in the units the costs were given in.
    pub cost: f64,
}

/// A point that a line must not run below: distance, height.
type Point = (f64, f64);

impl Line {
    /// The k at which the least clearance is `wanted`: the line clears by it where k is greater.
    ///
    /// Greatest over the points of k + (wanted − clearance)·2R/(x(s − x))·cos² β, β the slope from station to station;
    /// exact for the parabola of a level line, repeated with the exact clearance until it stands, in four or five
    /// rounds. `None` without points, and where the air that it takes lies outside |1 − k|·s/R ≤ 1 or is too wild for
    /// the rounds to settle (k of thousands). Good to a few ulps of the heights times 2R/(x(s − x)). Source:
    /// [`Line::height`].
    pub fn grazing_k(&self, ground: Profile, wanted: Metres) -> Option<Coefficient> {
        let slope = (self.b - self.a) / self.s;
        let needed = |line: &Line, height: &dyn Fn(f64) -> f64| {
            let points = ground.points().filter(|&(_, x, top)| line.holds(x) && top.is_finite());
            let lacking = points.map(|(_, x, top)| (top + wanted.0 - height(x), line.lever(x) * (1.0 + slope * slope)));
            let steps = lacking.map(|(height, lever)| Step { by: height / lever, height });
            steps.max_by(|one, other| one.by.total_cmp(&other.by))
        };
        let start = self.k + needed(self, &|x| self.handbook_height(Metres(x)).0)?.by;
        let step = |k: f64| {
            let line = self.in_air(Coefficient(k)).filter(|line| line.q.abs() * (line.s / line.r) <= 1.0)?;
            needed(&line, &|x| line.at(x))
        };
        settled(start, step).map(Coefficient)
    }

    /// How far the first station must be raised for the line to clear by `wanted`; nought where it does.
    ///
    /// The highest of the rays from the other station over the points, at the first: closed, no rounds. `None` where
    /// none of these rays gets there. Clearance at the stations themselves is not asked for. Source: [`Line::height`].
    pub fn raise_a(&self, ground: Profile, wanted: Metres) -> Option<Metres> {
        let over = |&point: &Point| self.across(point, (self.s, self.b), 0.0);
        self.greatest(ground, wanted, over).map(|height| Metres((height - self.a).max(0.0)))
    }

    /// As [`Self::raise_a`] for the second station.
    pub fn raise_b(&self, ground: Profile, wanted: Metres) -> Option<Metres> {
        let over = |&point: &Point| self.across((0.0, self.a), point, self.s);
        self.greatest(ground, wanted, over).map(|height| Metres((height - self.b).max(0.0)))
    }

    /// How far both stations must be raised alike. A line rises by what its ends do, but for shares of 1e-3 at most:
    /// what is lacking is added until nothing is, three or four rounds. `None` as for [`Self::raise_a`].
    pub fn raise_both(&self, ground: Profile, wanted: Metres) -> Option<Metres> {
        let short = self.short_of(ground, wanted);
        let step = |raise: f64| {
            let line = self.raised(Metres(raise), Metres(raise))?;
            let lacking = short.iter().map(|&(x, height)| height - line.at(x)).max_by(f64::total_cmp)?;
            Some(Step { by: lacking, height: lacking })
        };
        if short.is_empty() { Some(Metres(0.0)) } else { settled(0.0, step).map(Metres) }
    }

    /// The pair of stands that costs least, a metre of each costing `cost_a` and `cost_b`, for the line to clear by
    /// `wanted`.
    ///
    /// Stations and points together have an upper hull, edges being rays. The cheapest line lies on one of its edges,
    /// for turning a line about a corner raises one end as it lowers the other, at a rate that is constant but for
    /// shares of 1e-3 or so of the height: so much at most may the cost be off where two edges cost alike to that
    /// share. Each edge is drawn out to both stations. `None` where none gets there. Source: linear programming in two
    /// unknowns, its corners enumerated.
    pub fn cheapest(&self, ground: Profile, wanted: Metres, cost_a: f64, cost_b: f64) -> Option<Stands> {
        let hull = self.hull(self.short_of(ground, wanted));
        let edges = hull.iter().zip(hull.iter().skip(1));
        let stands = edges.filter_map(|(&from, &to)| {
            let a = (self.across(from, to, 0.0)? - self.a).max(0.0);
            let b = (self.across(from, to, self.s)? - self.b).max(0.0);
            Some(Stands { a: Metres(a), b: Metres(b), cost: cost_a * a + cost_b * b })
        });
        stands.min_by(|one, other| one.cost.total_cmp(&other.cost))
    }

    /// Both stations and those of `points` that a thread drawn taut over all of them would touch, in order.
    fn hull(&self, mut points: Vec<Point>) -> Vec<Point> {
        sort(&mut points, |point| [point.0, point.1]);
        points.push((self.s, self.b));
        let mut hull = vec![(0.0, self.a)];
        for new in points {
            while let [.., before, last] = hull[..]
                && (last.0 >= new.0 || self.across(before, new, last.0).is_some_and(|height| height >= last.1))
            {
                hull.pop();
            }
            hull.push(new);
        }
        hull
    }

    /// The highest of what `over` makes of the points that stand too high; −∞ where none does.
    fn greatest(&self, ground: Profile, wanted: Metres, over: impl Fn(&Point) -> Option<f64>) -> Option<f64> {
        let short = self.short_of(ground, wanted);
        short.iter().try_fold(f64::NEG_INFINITY, |most, point| Some(over(point)?.max(most)))
    }

    /// Height at `x` of the ray through two points of which the first lies nearer to the first station.
    fn across(&self, from: Point, to: Point, x: f64) -> Option<f64> {
        let (start, end, span) = (Metres(from.1), Metres(to.1), Metres(to.0 - from.0));
        if x == from.0 {
            return Some(from.1);
        }
        if x == to.0 {
            return Some(to.1);
        }
        let line = Line::new(start, end, span, Coefficient(self.k), Metres(self.r))?;
        let height = line.at(x - from.0);
        height.is_finite().then_some(height)
    }
}

/// What is to be added, and the height that is lacking.
struct Step {
    by: f64,
    height: f64,
}

/// A nanometre: above the rounding of heights, below what anything else leaves open.
const CLOSE: f64 = 1e-9;

/// Adds to `value` what `lacking` says until that no longer shrinks; `None` where the height does not come [`CLOSE`].
fn settled(mut value: f64, lacking: impl Fn(f64) -> Option<Step>) -> Option<f64> {
    let mut before = f64::INFINITY;
    loop {
        let step = lacking(value).filter(|step| step.by.is_finite())?;
        // OK as an end: what is lacking is halved each time or this is the last.
        if step.by.abs() >= before / 2.0 || step.by == 0.0 {
            return (step.height.abs() <= CLOSE).then_some(value);
        }
        value += step.by;
        before = step.by.abs();
    }
}
