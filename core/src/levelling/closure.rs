//! How far a run misses the known level it closes on, and how far it may.

use super::Run;

/// A rule for the misclosure.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Rule {
    /// So many metres for a run of one kilometre, growing as the square root of the length.
    RootKm(f64),
    /// So many metres for one setup, growing as the square root of their number.
    RootSetups(f64),
}

/// What the rule allows, metres; `None` where it needs a length and there is none.
///
/// m·√(L/1 km), or m·√n. Random errors of equal sights add in squares: JCGM 100:2008, 5.1.2; the form is that of every
/// published limit in [`crate::limits`].
pub fn allowed(rule: Rule, length: Option<f64>, setups: usize) -> Option<f64> {
    match rule {
        Rule::RootKm(one) => length.map(|l| one * (l / 1000.0).sqrt()),
        Rule::RootSetups(one) => Some(one * (setups as f64).sqrt()),
    }
}

/// Length of the run along its sights, metres, over the setups that have their fore sight, and how many of those lack a
/// distance: the length is whole only where none does.
pub fn length(run: &Run) -> (f64, usize) {
    let (mut length, mut missing) = (0.0, 0);
    for setup in &run.setups {
        let Some(fore) = setup.fore else { continue };
        match setup.back.distance.zip(fore.distance) {
            Some((back, fore)) => length += back + fore,
            None => missing += 1,
        }
    }
    (length, missing)
}
