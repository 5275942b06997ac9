//! Spreading a misclosure over the run.

use super::Run;

/// What a setup's share is in proportion to.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum By {
    /// Its length, back and fore sight together.
    Length,
    /// Every setup alike.
    Setups,
}

/// The correction of every level seen from each setup, metres: of its fore sight's point and of its intermediate points
/// alike. `None` where a length is needed and not every setup has both distances, or nothing can be spread.
///
/// −w · (share of the run up to and with this setup), w = `misclosure`, observed − known. Least squares for a single line
/// of levels whose variances grow as length or number of setups gives the same (Ghilani & Wolf, Elementary Surveying,
/// adjusting a level circuit, from memory). A setup without its fore sight yet has the share of the one before it.
pub fn corrections(run: &Run, misclosure: f64, by: By) -> Option<Vec<f64>> {
    let mut done = 0.0;
    let mut reached = Vec::with_capacity(run.setups.len());
    for setup in &run.setups {
        if let Some(fore) = setup.fore {
            done += match by {
                By::Length => setup.back.distance? + fore.distance?,
                By::Setups => 1.0,
            };
        }
        reached.push(done);
    }
    (done > 0.0).then(|| reached.into_iter().map(|d| -misclosure * (d / done)).collect())
}
