//! Numbers as digits: two of them swapped, one of them wrong.

/// The finest a staff or a mark is read to: five decimals.
const MOST: f64 = 1e5;

/// How many steps of the last decimal make a unit, as a power of ten: the fewest decimals, but no fewer than `least` has
/// and at most [`MOST`], with which all `values` (metres, booked in units of `unit` metres) come out whole.
pub fn steps(values: impl Iterator<Item = f64> + Clone, unit: f64, least: f64) -> f64 {
    let mut steps = least;
    // A booked number is whole but for the last bits of its conversion.
    let whole = |scaled: f64| (scaled - libm::round(scaled)).abs() < 1e-4;
    while steps < MOST && !values.clone().all(|value| whole(value / unit * steps)) {
        steps *= 10.0;
    }
    steps
}

/// A number in whole steps; no mark and no staff is longer than the bound, below which nothing overflows.
pub fn whole(number: f64, step: f64) -> i64 {
    libm::round(number.abs() / step).min(1e12) as i64
}

/// By how many steps each swap of two neighbouring digits of a number of so many steps makes it greater. A number below
/// one unit is written with the zero before its point: 0456 for 0.456 is swapped to 4.056.
pub fn swaps(number: i64, unit: i64, mut each: impl FnMut(i64)) {
    let mut place = 1;
    while place * 10 <= number.max(unit) {
        let (low, high) = (number / place % 10, number / place / 10 % 10);
        if low != high {
            each((low - high) * 9 * place);
        }
        place *= 10;
    }
}

/// By how many steps each other digit in one place makes a number of so many steps greater.
pub fn misreads(number: i64, unit: i64, mut each: impl FnMut(i64)) {
    let mut place = 1;
    while place <= number.max(unit) {
        let digit = number / place % 10;
        for other in (0..10).filter(|other| *other != digit) {
            each((other - digit) * place);
        }
        place *= 10;
    }
}
