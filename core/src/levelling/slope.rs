//! How long a sight may be on an even slope before the line leaves the staff or comes too near the ground.

/// Longest sights uphill and downhill, metres; infinite where nothing limits them.
///
/// Uphill (HI − c)/s, where the line comes within c of the ground; downhill (L − HI)/s, where it leaves a staff of length L.
/// HI height of the line over the ground at the level, s slope, |s|; straight line and even slope: curvature is 1 mm at
/// 120 m. Source: plane geometry.
pub fn longest(instrument: f64, staff: Option<f64>, clearance: f64, slope: f64) -> [f64; 2] {
    let run = |rise: f64| if slope == 0.0 { f64::INFINITY } else { rise.max(0.0) / slope.abs() };
    [run(instrument - clearance), staff.map_or(f64::INFINITY, |length| run(length - instrument))]
}
