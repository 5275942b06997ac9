//! Over which distances an error stays inside its limit.

use crate::order::sort;

/// A stretch of distances, metres; `open` ends lie at the edge of what was searched.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stretch {
    /// From.
    pub from: f64,
    /// To.
    pub to: f64,
    /// Reaches the low edge of the search.
    pub open_below: bool,
    /// Reaches the high edge of the search.
    pub open_above: bool,
}

impl Stretch {
    /// Holds this distance.
    pub fn holds(&self, d: f64) -> bool {
        self.from <= d && d <= self.to
    }
}

/// Steps of the search between its edges, evenly spaced in the logarithm: about 7 % each over 0.1 m to 200 km.
const STEPS: u32 = 200;

/// The distances to look at between `low` and `high`, in order: the steps, and those of `at` that lie between.
pub fn places(low: f64, high: f64, at: &[f64]) -> Vec<f64> {
    let ratio = libm::log(high / low) / f64::from(STEPS);
    let mut places: Vec<f64> = (0..STEPS).map(|i| low * libm::exp(ratio * f64::from(i))).collect();
    places.extend(at.iter().copied().filter(|d| *d > low && *d < high));
    places.push(high);
    sort(&mut places, |place| [*place, 0.0]);
    places
}

/// The stretches of `low..=high` in which `excess` ≤ 0, ends found to the last bit; `at` as in [`places`].
pub fn stretches(low: f64, high: f64, at: &[f64], excess: impl Fn(f64) -> f64) -> Vec<Stretch> {
    let within = |d: f64| excess(d) <= 0.0;
    joined(places(low, high, at).into_iter().map(|d| (d, within(d))), within)
}

/// The stretches between [`places`] of which each is known to be `within` or not.
///
/// A stretch narrower than a step that holds no place may be missed; a bump narrower than a step may be passed over.
pub fn joined(known: impl Iterator<Item = (f64, bool)>, within: impl Fn(f64) -> bool) -> Vec<Stretch> {
    let edge = |mut inside: f64, mut outside: f64| {
        loop {
            let middle = f64::midpoint(inside, outside);
            if middle == inside || middle == outside {
                return inside;
            }
            if within(middle) {
                inside = middle;
            } else {
                outside = middle;
            }
        }
    };
    let mut found: Vec<Stretch> = vec![];
    let mut before: Option<(f64, bool)> = None;
    for (d, ok) in known {
        match (before, ok) {
            (None, true) => found.push(Stretch { from: d, to: d, open_below: true, open_above: false }),
            (Some((last, false)), true) => {
                let from = edge(d, last);
                found.push(Stretch { from, to: d, open_below: false, open_above: false });
            }
            (Some((last, true)), _) => {
                if let Some(open) = found.last_mut() {
                    open.to = if ok { d } else { edge(last, d) };
                }
            }
            _ => {}
        }
        before = Some((d, ok));
    }
    if let (Some((_, true)), Some(open)) = (before, found.last_mut()) {
        open.open_above = true;
    }
    found
}
