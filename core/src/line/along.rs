//! k along a line that runs low, where the air changes with the height of the line over the ground.
//!
//! A shallow ray obeys h″ = (1 − k(x))/R with its two ends held: a string under the load k/R. What bends it at x is
//! then the mean of k over the line weighted by Green's function of the string, G(x, t) = t(s − x)/s before x and x(s −
//! t)/s behind, whose integral is x(s − x)/2: a k of its own for each x. The nearer to x, the more the air counts
//! there.

use super::profile::Profile;
use crate::air::guide::KRange;
use crate::constants::HANDBOOK_K;
use crate::order::sort;
use crate::quantity::{Coefficient, Metres};

/// Below this height over the ground k is not one number: 15 to 20 m is what lines need for k = 0.13 to hold
/// (Torge & Müller, Geodesy, 4th ed., 5.5.1).
pub const LOW: Metres = Metres(20.0);
/// A line has a k for every place when more of it than this runs lower than [`LOW`]. A rule of this project.
pub const LOW_SHARE: f64 = 0.1;

/// k and its range at a height over the ground.
pub type Air<'a> = &'a dyn Fn(Metres) -> KRange;

/// Pieces of the line at least.
const PIECES: u32 = 256;
/// So near to an end, as a share of the line, its limit is taken: 1e-6 of k off, where the quotient loses more.
const END: f64 = 1e-6;
/// Rounds at most, and the shift of the line in the last one.
const ROUNDS: u32 = 200;
const SETTLED: f64 = 1e-4;

/// The air along one line, found together with the line that runs through it.
#[derive(Debug, Clone, PartialEq)]
pub struct Along {
    s: f64,
    nodes: Vec<Node>,
    low_share: f64,
}

/// A place on the line. `k` runs straight from one to the next.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Node {
    x: f64,
    ground: f64,
    height: f64,
    k: [f64; 3],
    /// ∫k dx and ∫∫k dx dx from the first station.
    once: [f64; 3],
    twice: [f64; 3],
}

impl Along {
    /// The line between heights `a` and `b`, `s` apart, over `ground`, in air whose k at a height over it is `air`.
    ///
    /// The ground runs straight from point to point, level beyond the outermost. Where the line is blocked or runs
    /// lower than `floor`, the air is that at `floor`: a line that is to be made clear will not run lower. The line
    /// starts at one k and is drawn anew through the air that it meets, half of the way each round, less where that
    /// swings about, until it is within 0.1 mm of the next. `None` where 200 rounds do not bring it there, or there is
    /// no ground: then one number must do. Over hot ground several lines may join the same stations (mirage): this is
    /// the highest that the rounds come to rest at. Heights by the parabola, which moves k by nothing that counts; k
    /// straight within pieces of s/256 at most, cut at every point too: 0.1 % of k off where the line comes down to
    /// half a metre. Time grows with the number of points, times the rounds. Source: derived here; as seen from its end
    /// a line is bent by k_eff = (2/s²)∫(s − x)k dx, which is the limit x → 0.
    pub fn new(ends: [Metres; 2], s: Metres, ground: Profile, floor: Metres, air: Air, r: Metres) -> Option<Along> {
        let mut along = Along { s: s.0, nodes: nodes(s.0, ground)?, low_share: 0.0 };
        let straight = |x: f64| ends[0].0 + (ends[1].0 - ends[0].0) * (x / s.0);
        let curve = |x: f64| x * (s.0 - x) / (2.0 * r.0);
        for node in &mut along.nodes {
            node.height = straight(node.x) - (1.0 - HANDBOOK_K.0) * curve(node.x);
        }
        let (mut part, mut before) = (0.5, 0.0_f64);
        for _ in 0..ROUNDS {
            along.load(floor, air);
            let shift = |node: &Node| straight(node.x) - (1.0 - along.mean(node.x, 0)) * curve(node.x) - node.height;
            let shifts: Vec<f64> = along.nodes.iter().map(shift).collect();
            let largest = shifts.iter().fold(0.0_f64, |most, new| if new.abs() > most.abs() { *new } else { most });
            if largest.abs() <= SETTLED {
                along.low_share = along.share_below(LOW.0);
                return Some(along);
            }
            // Down and up again by turns: the air pushes back harder than the line was moved.
            if largest * before < 0.0 {
                part *= 0.7;
            }
            before = largest;
            for (node, shift) in along.nodes.iter_mut().zip(shifts) {
                node.height += part * shift;
            }
        }
        None
    }

    /// The k to reckon the line's height at `x` with, and its range, all of the air being to the same side of what is
    /// expected: 2/(x(s − x))·∫G(x, t)k(t)dt. At 0 and s, what bends the line as seen from that end.
    pub fn k_at(&self, x: f64) -> KRange {
        let [value, low, high] = [0, 1, 2].map(|which| Coefficient(self.mean(x.clamp(0.0, self.s), which)));
        KRange { value, low, high }
    }

    /// How much of the line runs lower than [`LOW`] over the ground.
    pub fn low_share(&self) -> f64 {
        self.low_share
    }

    /// Whether k changes so much along the line that one number will not do: [`LOW_SHARE`].
    pub fn varies(&self) -> bool {
        self.low_share > LOW_SHARE
    }

    /// k of the air along the line at its height.
    fn load(&mut self, floor: Metres, air: Air) {
        let mut before: Option<Node> = None;
        for node in &mut self.nodes {
            let k = air(Metres((node.height - node.ground).max(floor.0)));
            node.k = [k.value.0, k.low.0, k.high.0];
            (node.once, node.twice) = ([0.0; 3], [0.0; 3]);
            if let Some(last) = before {
                let which = [0, 1, 2];
                let sums = which.map(|i| last.sums(node.x, i, pick(&node.k, i)));
                (node.once, node.twice) = (sums.map(|s| s.0), sums.map(|s| s.1));
            }
            before = Some(*node);
        }
    }

    /// With F = ∫∫k from the first station: 2(F(s)·x/s − F(x))/(x(s − x)), and its limits.
    fn mean(&self, x: f64, which: usize) -> f64 {
        let Some(last) = self.nodes.last() else { return f64::NAN };
        let (once, all) = (pick(&last.once, which), pick(&last.twice, which));
        if x <= END * self.s {
            return 2.0 * all / (self.s * self.s);
        }
        if x >= self.s - END * self.s {
            return 2.0 * (once - all / self.s) / self.s;
        }
        let behind = self.nodes.partition_point(|node| node.x <= x);
        let pair = (self.nodes.get(behind.saturating_sub(1)), self.nodes.get(behind));
        let (Some(here), Some(next)) = pair else { return f64::NAN };
        let (from, to) = (pick(&here.k, which), pick(&next.k, which));
        let k = from + (to - from) * ((x - here.x) / (next.x - here.x));
        let (_, twice) = here.sums(x, which, k);
        2.0 * (all * (x / self.s) - twice) / (x * (self.s - x))
    }

    fn share_below(&self, height: f64) -> f64 {
        let pieces = self.nodes.iter().zip(self.nodes.iter().skip(1));
        let low = pieces.map(|(from, to)| {
            let (start, end) = (from.height - from.ground - height, to.height - to.ground - height);
            let share = match (start < 0.0, end < 0.0) {
                (true, true) => 1.0,
                (false, false) => 0.0,
                (true, false) => start / (start - end),
                (false, true) => end / (end - start),
            };
            share * (to.x - from.x)
        });
        low.sum::<f64>() / self.s
    }
}

impl Node {
    /// ∫k and ∫∫k as far as `x`, where k has come to `k` in a straight line.
    fn sums(&self, x: f64, which: usize, k: f64) -> (f64, f64) {
        let (width, from) = (x - self.x, pick(&self.k, which));
        let (once, twice) = (pick(&self.once, which), pick(&self.twice, which));
        (once + width * (from + k) / 2.0, twice + width * (once + width * (2.0 * from + k) / 6.0))
    }
}

fn pick(three: &[f64; 3], which: usize) -> f64 {
    three.get(which).copied().unwrap_or(f64::NAN)
}

/// The pieces' ends and the profile's own points, in order, with the ground at each; `None` without ground.
fn nodes(s: f64, ground: Profile) -> Option<Vec<Node>> {
    let mut known: Vec<(f64, f64)> = ground.points().map(|(_, x, top)| (x, top)).collect();
    known.retain(|(x, top)| x.is_finite() && top.is_finite());
    sort(&mut known, |point| [point.0, -point.1]);
    known.dedup_by_key(|point| point.0);
    let (first, last) = (*known.first()?, *known.last()?);
    let mut places: Vec<f64> = (0..=PIECES).map(|i| s * f64::from(i) / f64::from(PIECES)).collect();
    places.extend(known.iter().map(|point| point.0).filter(|&x| x > 0.0 && x < s));
    sort(&mut places, |place| [*place, 0.0]);
    places.dedup();
    let mut pieces = known.iter().zip(known.iter().skip(1)).peekable();
    let at = |x: f64| {
        while pieces.next_if(|(_, to)| to.0 < x).is_some() {}
        let height = match pieces.peek() {
            _ if x <= first.0 => first.1,
            Some((from, to)) => from.1 + (to.1 - from.1) * ((x - from.0) / (to.0 - from.0)),
            None => last.1,
        };
        let none = [0.0; 3];
        Node { x, ground: height, height: 0.0, k: none, once: none, twice: none }
    };
    Some(places.into_iter().map(at).collect())
}
