//! A net of levels: height differences between marks, adjusted together by least squares.
//!
//! Observation from i to j: H_j − H_i = l + v, variance in proportion to its length, so weight p = 1/length; Σ p v² is
//! made least. Normal equations AᵀPA x = AᵀPl over the unknown marks, solved by Cholesky's method inside the envelope of
//! the matrix, so that a line or a double run costs as much as it has points (A. George & J. Liu, Computer Solution of
//! Large Sparse Positive Definite Systems, ch. 4, from memory). The solution is put in and solved for what is left once
//! more: then it holds to the last digits however far the marks stand from zero. Source of the model: Ghilani & Wolf,
//! Elementary Surveying, adjustment of level nets, from memory; held to an independent solution in core/tests/rows/net.tsv.

/// A height difference between two marks.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Observed {
    /// Mark it starts from, as an index into the marks.
    pub from: usize,
    /// Mark it ends on.
    pub to: usize,
    /// Rise, metres.
    pub rise: f64,
    /// Length of the line, above 0: metres, or setups.
    pub length: f64,
}

/// What a net comes to.
#[derive(Debug, Clone, PartialEq)]
pub struct Adjusted {
    /// Level of each mark, metres.
    pub levels: Vec<f64>,
    /// Observations more than were needed.
    pub spare: usize,
    /// Standard deviation of an observation of length 1, √(Σ p v² / spare), metres; `None` where none is spare.
    pub deviation: Option<f64>,
}

/// Most numbers an envelope may hold: 32 MB.
const MOST: usize = 4_000_000;

/// Adjusts a net; `known` has the level of every mark that is held fixed. `None` where a mark hangs on no known one, an
/// observation names a mark that is none, or one mark twice, or has no length or rise, or the net is too large and too
/// tangled to hold.
pub fn adjust(known: &[Option<f64>], observed: &[Observed]) -> Option<Adjusted> {
    let mut unknown = 0;
    let mut number = |level: &Option<f64>| {
        level.is_none().then(|| {
            unknown += 1;
            unknown - 1
        })
    };
    let column: Vec<Option<usize>> = known.iter().map(&mut number).collect();
    let sound = |o: &Observed| {
        o.from != o.to && o.from.max(o.to) < known.len() && o.length > 0.0 && (o.length + o.rise).is_finite()
    };
    if !observed.iter().all(sound) || !known.iter().flatten().all(|level| level.is_finite()) {
        return None;
    }
    let ends = |o: &Observed| Some((*column.get(o.from)?, *column.get(o.to)?));
    let mut normal = Envelope::new(unknown, observed.iter().filter_map(ends))?;
    for o in observed {
        let (from, to) = ends(o)?;
        normal.weigh(from, to, 1.0 / o.length);
    }
    let root = normal.factored()?;
    let mut levels: Vec<f64> = known.iter().map(|level| level.unwrap_or(0.0)).collect();
    for _ in 0..2 {
        let mut right = vec![0.0; unknown];
        for o in observed {
            let (from, to) = ends(o)?;
            let pull = misfit(&levels, o)? / o.length;
            for (end, pull) in [(from, -pull), (to, pull)] {
                if let Some(sum) = end.and_then(|end| right.get_mut(end)) {
                    *sum += pull;
                }
            }
        }
        root.solve(&mut right);
        for (level, column) in levels.iter_mut().zip(&column) {
            *level += column.and_then(|column| right.get(column)).unwrap_or(&0.0);
        }
    }
    let spare = observed.len().checked_sub(unknown)?;
    let squares: f64 = observed.iter().filter_map(|o| misfit(&levels, o).map(|v| v * v / o.length)).sum();
    let deviation = (spare > 0).then(|| (squares / spare as f64).sqrt());
    Some(Adjusted { levels, spare, deviation })
}

/// Observed − computed.
fn misfit(levels: &[f64], o: &Observed) -> Option<f64> {
    Some(o.rise - (levels.get(o.to)? - levels.get(o.from)?))
}

/// The lower half of a symmetric matrix, each row from its first number that is not nothing to the diagonal.
struct Envelope {
    rows: Vec<Row>,
}

struct Row {
    first: usize,
    numbers: Vec<f64>,
}

impl Envelope {
    /// Room for every pair of unknowns that an observation joins; `None` where that is too much.
    fn new(size: usize, joined: impl Iterator<Item = (Option<usize>, Option<usize>)>) -> Option<Envelope> {
        let mut firsts: Vec<usize> = (0..size).collect();
        for (from, to) in joined {
            let Some((from, to)) = from.zip(to) else { continue };
            let first = firsts.get_mut(from.max(to))?;
            *first = from.min(to).min(*first);
        }
        let room: usize = firsts.iter().enumerate().map(|(i, first)| i + 1 - first).sum();
        let row = |(i, first): (usize, usize)| Row { first, numbers: vec![0.0; i + 1 - first] };
        (room <= MOST).then(|| Envelope { rows: firsts.into_iter().enumerate().map(row).collect() })
    }
    /// Adds what an observation of that weight between two marks says; a known mark has no column.
    fn weigh(&mut self, from: Option<usize>, to: Option<usize>, weight: f64) {
        for (row, column, more) in [(from, from, weight), (to, to, weight), (from.max(to), from.min(to), -weight)] {
            let Some((row, column)) = row.zip(column) else { continue };
            if let Some(place) = self.rows.get_mut(row).and_then(|r| r.numbers.get_mut(column.checked_sub(r.first)?)) {
                *place += more;
            }
        }
    }
    /// L with L Lᵀ = this; `None` where a pivot vanishes: some mark hangs on nothing.
    fn factored(mut self) -> Option<Envelope> {
        for i in 0..self.rows.len() {
            let (done, rest) = self.rows.split_at_mut(i);
            let row = rest.first_mut()?;
            for j in row.first..i {
                let above = done.get(j)?;
                let overlap = row.first.max(above.first);
                let mine = row.numbers.get(overlap - row.first..j - row.first)?;
                let sum = dot(mine, above.numbers.get(overlap - above.first..)?);
                let place = row.numbers.get_mut(j - row.first)?;
                *place = (*place - sum) / above.numbers.last()?;
            }
            let (pivot, before) = row.numbers.split_last_mut()?;
            let left = *pivot - dot(before, before);
            // A mark that hangs on nothing leaves rounding only.
            if left.is_nan() || left <= *pivot * 1e-13 {
                return None;
            }
            *pivot = left.sqrt();
        }
        Some(self)
    }
    /// Solves L Lᵀ x = `right` in place.
    fn solve(&self, right: &mut [f64]) {
        for (i, row) in self.rows.iter().enumerate() {
            let Some((pivot, before)) = row.numbers.split_last() else { continue };
            let sum = right.get(row.first..i).map_or(0.0, |solved| dot(before, solved));
            if let Some(x) = right.get_mut(i) {
                *x = (*x - sum) / pivot;
            }
        }
        for (i, row) in self.rows.iter().enumerate().rev() {
            let Some((pivot, before)) = row.numbers.split_last() else { continue };
            let Some(x) = right.get_mut(i) else { continue };
            *x /= pivot;
            let x = *x;
            for (sum, number) in right.iter_mut().skip(row.first).zip(before) {
                *sum -= number * x;
            }
        }
    }
}

/// Σ of products, over as many as the shorter has.
fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}
