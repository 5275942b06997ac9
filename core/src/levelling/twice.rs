//! Two books of one line, run twice the same way or there and back, compared leg by leg.

use super::net::{self, Adjusted, Observed};
use crate::doubt::Estimate;
use crate::order;

/// A point a book carried its level over.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point<'a> {
    /// Its name; points of the same name, in capitals or not, are the same point.
    pub name: &'a str,
    /// Its level as that book has it, metres.
    pub level: f64,
    /// Length of the run up to it, metres, where all distances are known.
    pub along: Option<f64>,
    /// Setups up to it.
    pub setups: usize,
}

/// From a point that both books have to the next.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Leg {
    /// Index of the point it starts from in the first book.
    pub from: usize,
    /// Index of the point it ends on in the first book.
    pub to: usize,
    /// The same two points in the second book.
    pub second: (usize, usize),
    /// Rise by the first book, and by the second, from `from` to `to`, metres.
    pub rises: [f64; 2],
    /// Mean length of the two, metres.
    pub length: Option<f64>,
    /// Mean number of setups of the two.
    pub setups: f64,
}

impl Leg {
    /// First book less second, metres; where the second ran back, the sum of both height differences as observed.
    pub fn difference(&self) -> f64 {
        self.rises[0] - self.rises[1]
    }
}

/// The legs between points that both books have, in the order of the first; points of no name are left out.
///
/// A name may come twice in a book, as where a run closes on the mark it started from: a leg then runs between those of
/// its first and last places that lie nearest to each other in the second book.
pub fn legs(first: &[Point], second: &[Point]) -> Vec<Leg> {
    let places = Places::of(second);
    let shared: Vec<(usize, [usize; 2])> =
        first.iter().enumerate().filter_map(|(i, point)| Some((i, places.find(second, point.name)?))).collect();
    shared
        .windows(2)
        .filter_map(|pair| match pair {
            [(from, starts), (to, ends)] => leg(first, second, (*from, *to), *starts, *ends),
            _ => None,
        })
        .collect()
}

fn leg(first: &[Point], second: &[Point], ends: (usize, usize), starts: [usize; 2], stops: [usize; 2]) -> Option<Leg> {
    let ways = starts.into_iter().flat_map(|start| stops.map(|stop| (start, stop)));
    let other = ways.filter(|(start, stop)| start != stop).min_by_key(|(start, stop)| start.abs_diff(*stop))?;
    let (a, b) = (first.get(ends.0)?, first.get(ends.1)?);
    let (c, d) = (second.get(other.0)?, second.get(other.1)?);
    let lengths = a.along.zip(b.along).zip(c.along.zip(d.along));
    Some(Leg {
        from: ends.0,
        to: ends.1,
        second: other,
        rises: [b.level - a.level, d.level - c.level],
        length: lengths.map(|((a, b), (c, d))| ((b - a).abs() + (d - c).abs()) / 2.0),
        setups: (a.setups.abs_diff(b.setups) + c.setups.abs_diff(d.setups)) as f64 / 2.0,
    })
}

/// Where names stand in a book: by numbers made of them, in order.
struct Places(Vec<(f64, usize)>);

impl Places {
    fn of(points: &[Point]) -> Places {
        let named = points.iter().enumerate().filter(|(_, point)| !point.name.is_empty());
        let mut places: Vec<(f64, usize)> = named.map(|(i, point)| (order::hash(point.name), i)).collect();
        order::sort(&mut places, |(key, i)| [*key, *i as f64]);
        Places(places)
    }
    /// First and last place of a name.
    fn find(&self, points: &[Point], name: &str) -> Option<[usize; 2]> {
        let key = order::hash(name);
        let start = self.0.partition_point(|(other, _)| *other < key);
        let alike = self.0.iter().skip(start).take_while(|(other, _)| *other == key).map(|(_, i)| *i);
        let mut same = alike.filter(|i| points.get(*i).is_some_and(|point| point.name.eq_ignore_ascii_case(name)));
        let first = same.next()?;
        Some([first, same.last().unwrap_or(first)])
    }
}

/// Standard deviation of 1 km of double run, metres, with the ends of its 95 % range: the mean of both directions.
///
/// s = ½ √( (1/n) Σ d²/L ), d difference of a leg, L its length in km, n legs of known length; the mean of two runs of
/// equal weight whose difference has the expectation 0. Metres for L in km. The range is that of a standard deviation
/// from n normal values, s √(n/χ²): from 0.45 s to 32 s by one leg, 0.70 s to 1.75 s by ten. It holds for what differs
/// between the runs; what both have alike (scale of the staff, curvature, a collimation error and the same imbalance)
/// does not show. Source: common geodetic practice of double observations, from memory; ISO 17123-2 names the quantity
/// (1 km of double-run levelling, from memory), but takes it from a test field of its own.
pub fn per_km(legs: &[Leg]) -> Option<Estimate> {
    let (mut sum, mut n) = (0.0, 0);
    for leg in legs {
        let Some(length) = leg.length.filter(|length| *length > 0.0) else { continue };
        sum += leg.difference() * leg.difference() / (length / 1000.0);
        n += 1;
    }
    let s = 0.5 * (sum / f64::from(n)).sqrt();
    let (low, high) = range(n)?;
    Some(Estimate { bias: s, below: s * (1.0 - low), above: s * (high - 1.0) })
}

/// √(n/χ²) for the lower tail of 0.025 up to 9 values (tests/tables/make_level_net.py).
const FEW: [f64; 9] = [31.91, 6.285, 3.729, 2.874, 2.453, 2.202, 2.035, 1.916, 1.826];

/// By what a standard deviation from `n` normal values is to be multiplied for the ends of its 95 % range. χ² by Wilson
/// & Hilferty, n (1 − 2/9n ± z √(2/9n))³ (Proc. Nat. Acad. Sci. 17, 1931, from memory): within 1 % at the lower end, and
/// within 0.4 % at the upper from ten values on, which it has from a table below.
fn range(n: u32) -> Option<(f64, f64)> {
    const Z: f64 = 1.959_964;
    let part = 2.0 / (9.0 * f64::from(n));
    let factor = |z: f64| {
        let root = 1.0 - part + z * part.sqrt();
        1.0 / (root * root * root).sqrt()
    };
    let few = FEW.get(n.checked_sub(1)? as usize);
    Some((factor(Z), few.copied().unwrap_or_else(|| factor(-Z))))
}

/// The leg in which the books part: of those whose difference is beyond `allowed`, the one farthest beyond, as a multiple
/// of what is allowed. An `allowed` of `None` says nothing.
pub fn parting(legs: &[Leg], allowed: impl Fn(&Leg) -> Option<f64>) -> Option<usize> {
    let times = |leg: &Leg| allowed(leg).filter(|most| *most > 0.0).map(|most| leg.difference().abs() / most);
    let mut farthest = (1.0, None);
    for (i, times) in legs.iter().enumerate().filter_map(|(i, leg)| Some((i, times(leg)?))) {
        if times > farthest.0 {
            farthest = (times, Some(i));
        }
    }
    farthest.1
}

/// Both books adjusted together as one net: the level of each leg's end, in the order of the legs, the first after that of
/// the point the first leg starts from. That one is held as `first` has it; the last point of the run is held at `close`
/// where that is given. By lengths where all legs have them, else by setups. `None` without legs, or where a leg has
/// neither.
pub fn adjusted(legs: &[Leg], first: &[Point], close: Option<f64>) -> Option<Adjusted> {
    let (start, last) = (legs.first()?.from, legs.last()?.to);
    let mut known = vec![None; legs.len() + 1];
    *known.last_mut()? = if last + 1 == first.len() { close } else { None };
    *known.first_mut()? = Some(first.get(start)?.level);
    let by_length = legs.iter().all(|leg| leg.length.is_some_and(|length| length > 0.0));
    let mut observed = Vec::with_capacity(2 * legs.len());
    for (i, leg) in legs.iter().enumerate() {
        let length = if by_length { leg.length? } else { leg.setups };
        observed.extend(leg.rises.map(|rise| Observed { from: i, to: i + 1, rise, length }));
    }
    net::adjust(&known, &observed)
}
