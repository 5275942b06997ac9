//! Levels set out from one mark: by how much they come out too high, how far that may be borne, where the mark stands best.
//!
//! The line over a staff at distance d stands C(d) + α·d too high (`sight/budget.rs`). The mark, read at D₀, lifts the
//! height of the line by as much as is read too much there; what is set out at D comes out too high by
//! C(D) − C(D₀) + α (D − D₀): the error of a setup, with the sign of its far sight.

use super::bounds::{Stretch, places, stretches};
use super::budget::{Budget, total};
use crate::doubt::Estimate;
use crate::quantity::Metres;

/// How much too high a level comes out that is set out at `work` from a mark at `mark`, metres; negative too low.
///
/// Source: [`Budget::setup`].
pub fn too_high(budget: &Budget, mark: Metres, work: Metres) -> Estimate {
    total(&budget.setup(work, mark))
}

/// The distances about the mark's own, between `low` and `high`, at which bias and doubt stay within `allowed`; `None`
/// where not even work beside the mark does. Ends to the last bit.
pub fn within(budget: &Budget, mark: Metres, allowed: Metres, low: Metres, high: Metres) -> Option<Stretch> {
    let excess = |work: f64| too_high(budget, mark, Metres(work)).worst() - allowed.0;
    stretches(low.0, high.0, &[mark.0], excess).into_iter().find(|stretch| stretch.holds(mark.0))
}

/// Where the mark would have to stand for the worst of `works` to be least, no nearer than `nearest`, and what that
/// worst then is: |bias| + doubt, metres. `None` without works. To a part in 10⁶ of the distance.
///
/// The worst is looked up at some 40 distances up to the farthest work, and from the best of them narrowed down
/// between its neighbours by the golden section.
pub fn best_mark(budget: &Budget, works: &[Metres], nearest: Metres) -> Option<(Metres, Metres)> {
    let worst =
        |mark: f64| works.iter().map(|work| too_high(budget, Metres(mark), *work).worst()).fold(0.0_f64, f64::max);
    let farthest = works.iter().map(|work| work.0).reduce(f64::max)?;
    let high = farthest.max(nearest.0 * 1.001);
    let tried = places(nearest.0, high, &[]).into_iter().step_by(COARSE).chain([high]);
    let tried: Vec<(f64, f64)> = tried.map(|mark| (mark, worst(mark))).collect();
    let best = tried.iter().enumerate().min_by(|a, b| a.1.1.total_cmp(&b.1.1))?.0;
    let at = |i: usize| tried.get(i).map(|t| t.0);
    let (mut from, mut to) = (at(best.saturating_sub(1)).unwrap_or(nearest.0), at(best + 1).unwrap_or(high));
    while to - from > 1e-6 * to {
        let step = GOLDEN * (to - from);
        if worst(to - step) <= worst(from + step) { to = from + step } else { from = to - step }
    }
    let mark = f64::midpoint(from, to);
    Some((Metres(mark), Metres(worst(mark))))
}

/// Of the places of a search for limits, every so many-th is enough: the worst has one valley, or two far apart.
const COARSE: usize = 5;
/// (√5 − 1)/2.
const GOLDEN: f64 = 0.618_033_988_749_894_9;
