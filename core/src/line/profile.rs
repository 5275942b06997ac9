//! Clearance of a line over a profile.

use super::Line;
use crate::quantity::Metres;

/// Points under the line in any order: the distance from the first station along the level surface, and the height of
/// what stands there, cover and growth included. Metres; rows beyond the shorter of the two are not looked at.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Profile<'a> {
    /// Distances.
    pub at_m: &'a [f64],
    /// Heights.
    pub top_m: &'a [f64],
}

/// The point of a profile that comes nearest to the line, or stands farthest above it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Least {
    /// Which row, from 0.
    pub row: usize,
    /// How far from the first station.
    pub at: Metres,
    /// How far the line runs above it; negative where it is blocked.
    pub clearance: Metres,
}

impl Least {
    /// The lower of two; of equals the nearer to the first station, then the earlier row, so that order does not
    /// matter.
    fn or(self, other: Least) -> Least {
        let key = |l: &Least| (l.clearance.0, l.at.0);
        let later = match key(&self).partial_cmp(&key(&other)) {
            Some(std::cmp::Ordering::Equal) | None => other.row < self.row,
            Some(order) => order.is_gt(),
        };
        if later { other } else { self }
    }
}

/// A block of points is looked at again where its lowest may be the lowest of all.
const BLOCK: usize = 1024;
/// Rounding of heights in the first look, as a share of them: far above the few ulps that it is.
const ROUNDED: f64 = 1e-14;

impl<'a> Profile<'a> {
    /// How many points.
    pub fn len(&self) -> usize {
        self.at_m.len().min(self.top_m.len())
    }
    /// No point at all.
    pub fn is_empty(&self) -> bool {
        self.len() == 0
    }
    /// Row, distance and height.
    pub fn points(&self) -> impl Iterator<Item = (usize, f64, f64)> + use<'a> {
        self.at_m.iter().zip(self.top_m).enumerate().map(|(row, (&x, &top))| (row, x, top))
    }
    fn part(&self, from: usize, to: usize) -> Profile<'a> {
        let cut = |list: &'a [f64]| list.get(from..to.min(self.len())).unwrap_or_default();
        Profile { at_m: cut(self.at_m), top_m: cut(self.top_m) }
    }
}

impl Line {
    /// How far the line runs above a point: [`Line::height`] less the point's own.
    pub fn clearance(&self, x: Metres, top: Metres) -> Metres {
        Metres(self.at(x.0) - top.0)
    }

    /// The least clearance between the stations, and where: the same to the last bit as looking at every point by
    /// [`Self::clearance`], and the same whatever the order of the rows.
    ///
    /// Points at and outside the stations, and what is no number, are passed over; `None` where none is left. One pass
    /// over all points by the parabola that meets the line at both ends and in the middle, then the exact form where
    /// that leaves a doubt. The parabola leaves the line by E = max|h‴|·s³·√3/216 at most, and with β the elevation
    /// h‴ = r tan β·(tan² β + (3q + 2q²)/cos² β)/R³: 1 µm at 10 km, 0.5 mm at 50 km (k 0, level). Source: remainder of
    /// the interpolating polynomial; the derivative of [`Line::height`].
    pub fn least(&self, ground: Profile) -> Option<Least> {
        let near = Parabola::of(self);
        let blocks = ground.len().div_ceil(BLOCK);
        let block = |i: usize| ground.part(i * BLOCK, (i + 1) * BLOCK);
        let lows: Vec<f64> = (0..blocks).map(|i| near.lowest(block(i))).collect();
        let low = lows.iter().fold(f64::INFINITY, |low, &new| lower(low, new));
        // A height that is no number but infinite says nothing of the others: then all are looked at.
        let limit = if low.is_finite() { low + 2.0 * near.off + ROUNDED * low.abs() } else { f64::INFINITY };
        let mut least: Option<Least> = None;
        for (i, _) in lows.iter().enumerate().filter(|(_, low)| **low <= limit) {
            for (row, x, top) in block(i).points().filter(|&(_, x, top)| near.clearance(x, top) <= limit) {
                if self.holds(x) && top.is_finite() {
                    let clearance = self.clearance(Metres(x), Metres(top));
                    let this = Least { row: i * BLOCK + row, at: Metres(x), clearance };
                    least = Some(least.map_or(this, |known| known.or(this)));
                }
            }
        }
        least
    }

    /// The least clearance once one row is cut down to `top`: less [`Self::least`], what the cutting wins. The next
    /// worst point bounds it.
    pub fn least_when_cut(&self, ground: Profile, row: usize, top: Metres) -> Option<Least> {
        let after = row.saturating_add(1);
        let shifted = |l: Least| Least { row: l.row + after, ..l };
        let cut = ground.at_m.get(row).filter(|x| self.holds(**x) && top.0.is_finite());
        let own = cut.map(|&x| Least { row, at: Metres(x), clearance: self.clearance(Metres(x), top) });
        let rest = [self.least(ground.part(0, row)), self.least(ground.part(after, ground.len())).map(shifted)];
        rest.into_iter().chain([own]).flatten().reduce(Least::or)
    }

    /// The points that stand higher than `wanted` below the line: distance and least height that the line must have.
    pub(super) fn short_of(&self, ground: Profile, wanted: Metres) -> Vec<(f64, f64)> {
        let near = Parabola::of(self);
        let may = wanted.0 + near.off + ROUNDED * wanted.0.abs();
        let all = ground.points().filter(|&(_, x, top)| near.clearance(x, top) < may && self.holds(x));
        let needed = all.map(|(_, x, top)| (x, top + wanted.0));
        needed.filter(|&(x, height)| height.is_finite() && self.at(x) < height).collect()
    }
}

/// Plain comparison instead of `f64::min`: one instruction, and what is no number never wins.
fn lower(low: f64, new: f64) -> f64 {
    if new < low { new } else { low }
}

/// The parabola through the line's ends and middle.
struct Parabola {
    start: f64,
    slope: f64,
    bend: f64,
    half: f64,
    /// How far it may lie from the line, rounding included.
    off: f64,
}

impl Parabola {
    fn of(line: &Line) -> Parabola {
        let (s, middle) = (line.s, line.at(line.s / 2.0));
        let bend = 2.0 * (line.a + line.b - 2.0 * middle) / s / s;
        let steepest = line.slopes().iter().fold(0.0_f64, |most, slope| most.max(slope.abs()));
        let (angle, square) = (s / line.r, steepest * steepest);
        // No point of the line is farther out than its steepest slope, kept up all along, leads.
        let farthest = (line.r + line.a.max(line.b)) * libm::exp(angle * steepest);
        let third = farthest * steepest * (square + (1.0 + square) * (line.q * (3.0 + 2.0 * line.q)).abs());
        let remainder = third * angle * angle * angle * 3.0_f64.sqrt() / 216.0;
        let rounding = ROUNDED * (line.a.abs() + line.b.abs() + middle.abs() + (bend * s * s).abs());
        Parabola {
            start: line.a,
            slope: (line.b - line.a) / s - bend * s,
            bend,
            half: s / 2.0,
            off: remainder * (1.0 + 1e-9) + rounding,
        }
    }
    fn clearance(&self, x: f64, top: f64) -> f64 {
        self.start + x * (self.slope + x * self.bend) - top
    }
    /// The lowest of a block, infinite where there is none.
    fn lowest(&self, block: Profile) -> f64 {
        let mut low = f64::INFINITY;
        for (&x, &top) in block.at_m.iter().zip(block.top_m) {
            let clearance = self.clearance(x, top);
            // Seldom lower than all before, so that the processor guesses right and asks where x lies as seldom. A
            // choice without a branch, side by side in vectors, is no faster natively and three times slower in wasm.
            if clearance < low && (x - self.half).abs() < self.half {
                low = clearance;
            }
        }
        low
    }
}
