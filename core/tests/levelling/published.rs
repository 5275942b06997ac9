//! Runs that others have published, figure for figure.

use super::{Readings, book, column, run};
use farstaff::levelling::adjust::{By, corrections};
use farstaff::levelling::reduce::reduce;
use farstaff::levelling::wires::Wires;

/// Worked example with intermediate sights by height of collimation, adjusted per setup (published figures, recomputed).
const SIX: [Readings; 6] = [
    (1.216, &[0.025, 1.555], 2.508),
    (1.386, &[3.625], 1.196),
    (1.235, &[], 3.566),
    (3.655, &[], 0.506),
    (2.126, &[2.605, 1.094], 3.628),
    (1.125, &[1.394], 0.484),
];
const COLLIMATIONS: [f64; 6] = [107.582, 106.460, 106.499, 106.588, 108.208, 105.705];
const LEVELS: [f64; 12] =
    [107.557, 106.027, 105.074, 102.835, 105.264, 102.933, 106.082, 105.603, 107.114, 104.580, 104.311, 105.221];
const ADJUSTED: [f64; 12] =
    [107.564, 106.034, 105.081, 102.849, 105.278, 102.954, 106.110, 105.638, 107.149, 104.615, 104.353, 105.263];

/// Printed to a millimetre.
fn printed(one: f64, other: f64) {
    assert!((one - other).abs() < 1e-9, "{one} {other}");
}

#[test]
fn a_run_of_six_setups_with_intermediate_sights() {
    let run = run(106.366, &SIX);
    let reduced = reduce(&run);
    let shares = corrections(&run, -0.042, By::Setups).unwrap();
    let (mut levels, mut adjusted) = (vec![], vec![]);
    for ((station, known), share) in reduced.stations.iter().zip(COLLIMATIONS).zip(shares) {
        printed(station.collimation, known);
        for seen in station.inters.iter().chain(&station.fore) {
            levels.push(seen.level);
            adjusted.push(seen.level + share);
        }
    }
    assert_eq!((levels.len(), adjusted.len()), (12, 12));
    levels.into_iter().zip(LEVELS).for_each(|(one, known)| printed(one, known));
    adjusted.into_iter().zip(ADJUSTED).for_each(|(one, known)| printed(one, known));
    printed(reduced.sums.back, 10.743);
    printed(reduced.sums.fore, 11.888);
    assert_eq!(reduced.sums.checks(), [-1.145; 3]);
}

/// The same as a person books it, each row of the sheet as printed.
#[test]
fn the_same_as_it_is_booked() {
    let rows = "A\t1.216\nP1\t\t0.025\nP2\t\t1.555\nC1\t1.386\t\t2.508\nP3\t\t3.625\nC2\t1.235\t\t1.196\nC3\t3.655\t\t3.566\nC4\t2.126\t\t0.506\nP4\t\t2.605\nP5\t\t1.094\nC5\t1.125\t\t3.628\nP6\t\t1.394\nB\t\t\t0.484";
    let more = [("start", "106.366"), ("close", "105.263"), ("adjust", "setups"), ("reason", "to compare")];
    let answer = book(rows, &more);
    let text = |figures: &[f64], places: usize| figures.iter().map(|f| format!("{f:.places$}")).collect::<Vec<_>>();
    assert_eq!(column(&answer, "Level by collimation")[1..], text(&LEVELS, 3));
    assert_eq!(column(&answer, "Level by rise")[1..], text(&LEVELS, 3));
    assert_eq!(column(&answer, "Adjusted")[1..], text(&ADJUSTED, 4));
    let collimations: Vec<String> = column(&answer, "Height").into_iter().filter(|c| c != "·").collect();
    assert_eq!(collimations, text(&COLLIMATIONS, 3));
}

/// Ghilani & Wolf, Elementary Surveying, 14th ed., problem 5.12 (inputs published, recomputed).
#[test]
fn a_loop_of_five_setups() {
    let fores = [(4.388, 4.538), (6.907, 8.800), (4.680, 5.978), (3.730, 5.245), (8.464, 3.598)];
    let setups = fores.map(|(back, fore)| (back, [].as_slice(), fore));
    let levels: Vec<f64> = reduce(&run(852.045, &setups)).stations.iter().map(|s| s.fore.unwrap().level).collect();
    levels.into_iter().zip([851.895, 850.002, 848.704, 847.189, 852.055]).for_each(|(one, known)| printed(one, known));
}

/// Ghilani & Wolf, Elementary Surveying, 15th ed., problem 5.24: half intervals in millimetres (published figures). The
/// first and the third sight are to be flagged; the others are not.
#[test]
fn half_intervals_of_three_wires() {
    let sights = [
        ([1.076, 0.829, 0.573], [247.0, 256.0]),
        ([1.131, 0.858, 0.586], [273.0, 272.0]),
        ([0.989, 0.767, 0.555], [222.0, 212.0]),
        ([1.089, 0.851, 0.611], [238.0, 240.0]),
    ];
    for ([upper, middle, lower], known) in sights {
        let wires = Wires { upper, middle, lower };
        for (half, known) in wires.halves().into_iter().zip(known) {
            printed(half, known / 1000.0);
        }
        // FM 3-34.331, table 7-1: the middle wire is corrected by a third of the difference.
        printed(wires.off(), (known[1] - known[0]) / 3000.0);
        printed(wires.unequal(), (known[0] - known[1]).abs() / 1000.0);
    }
    let rows = "A\t0.829\t\t\t\t\t1.076\t0.573\nC\t\t\t0.858\t\t\t1.131\t0.586\nC\t0.767\t\t\t\t\t0.989\t0.555\nB\t\t\t0.851\t\t\t1.089\t0.611";
    let answer = book(rows, &[("start", "83.097")]);
    let flagged: Vec<usize> = answer.booked[0].rows.iter().filter(|r| !r.cautions.is_empty()).map(|r| r.row).collect();
    assert_eq!(flagged, [0, 2]);
    assert_eq!(column(&answer, "Level by collimation").last().unwrap(), "82.9847");
}
