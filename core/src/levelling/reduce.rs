//! Reduced levels, by height of collimation and by rise and fall.
//!
//! Both methods run in whole nanometres, so that they agree to the last digit whatever is shown: a reading typed in
//! millimetres, or in hundredths or thousandths of the international foot, is a whole number of them; any other is off by
//! half a nanometre at most.

use super::Run;

/// A point seen from a setup.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Seen {
    /// From the point seen before it, metres: rise positive, fall negative.
    pub rise: f64,
    /// Reduced level: height of collimation − reading.
    pub level: f64,
    /// Reduced level: that of the point before + rise. The same number.
    pub by_rise: f64,
}

/// What a setup comes to.
#[derive(Debug, Clone, PartialEq)]
pub struct Station {
    /// Level of the point of the back sight.
    pub from: f64,
    /// Height of collimation: that level + back sight.
    pub collimation: f64,
    /// The intermediate points.
    pub inters: Vec<Seen>,
    /// The point that carries on; none yet while the setup is being booked.
    pub fore: Option<Seen>,
}

/// The sums of a page, over the setups that have their fore sight: ΣB − ΣF = Σrise − Σfall = last − first.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Sums {
    /// Σ back sights.
    pub back: f64,
    /// Σ fore sights.
    pub fore: f64,
    /// Σ rises.
    pub rise: f64,
    /// Σ falls, ≥ 0.
    pub fall: f64,
    /// Level of the first mark.
    pub first: f64,
    /// Level of the last point that carries on.
    pub last: f64,
}

/// A run, reduced.
#[derive(Debug, Clone, PartialEq)]
pub struct Reduced {
    /// In the order of the run's setups.
    pub stations: Vec<Station>,
    /// Its sums.
    pub sums: Sums,
}

/// Nanometres in a metre.
const FINE: f64 = 1e9;

/// Whole nanometres.
fn fine(metres: f64) -> i64 {
    (metres * FINE).round() as i64
}

fn metres(fine: i64) -> f64 {
    fine as f64 / FINE
}

/// Sums in whole nanometres.
#[derive(Default)]
struct Totals {
    back: i64,
    fore: i64,
    rise: i64,
    fall: i64,
}

/// Reduces `run`: level = height of collimation − reading, height of collimation = level + back sight, metres.
///
/// Source: common practice of the level book; US Army FM 3-34.331, differential levelling (title, from memory). Exact for
/// readings that are whole nanometres below 9 × 10⁹ m in all.
pub fn reduce(run: &Run) -> Reduced {
    let start = fine(run.start);
    let (mut level, mut by_rise) = (start, start);
    let mut totals = Totals::default();
    let mut stations = Vec::with_capacity(run.setups.len());
    for setup in &run.setups {
        let back = fine(setup.back.reading);
        let (collimation, from) = (level + back, level);
        let (mut before, mut stepped) = (back, by_rise);
        let (mut rise, mut fall) = (0, 0);
        let mut see = |reading: i64| {
            let step = before - reading;
            (before, stepped) = (reading, stepped + step);
            if step > 0 {
                rise += step
            } else {
                fall -= step
            }
            Seen { rise: metres(step), level: metres(collimation - reading), by_rise: metres(stepped) }
        };
        let inters = setup.inters.iter().map(|sight| see(fine(sight.reading))).collect();
        let fore = setup.fore.map(|sight| see(fine(sight.reading)));
        if let Some(sight) = setup.fore {
            let reading = fine(sight.reading);
            (level, by_rise) = (collimation - reading, stepped);
            totals = Totals {
                back: totals.back + back,
                fore: totals.fore + reading,
                rise: totals.rise + rise,
                fall: totals.fall + fall,
            };
        }
        stations.push(Station { from: metres(from), collimation: metres(collimation), inters, fore });
    }
    let Totals { back, fore, rise, fall } = totals;
    let sums = Sums {
        back: metres(back),
        fore: metres(fore),
        rise: metres(rise),
        fall: metres(fall),
        first: metres(start),
        last: metres(level),
    };
    Reduced { stations, sums }
}

impl Sums {
    /// The three differences of the page check: ΣB − ΣF, Σrise − Σfall, last − first.
    pub fn checks(&self) -> [f64; 3] {
        [[self.back, self.fore], [self.rise, self.fall], [self.last, self.first]]
            .map(|[more, less]| metres(fine(more) - fine(less)))
    }
}
