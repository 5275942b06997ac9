//! Level nets, two books of one line, and the marks of an overnight stop.
//!
//! The rows come from `tests/tables/make_level_net.py`: a general least-squares routine that knows nothing of levels.
#![allow(clippy::unwrap_used, clippy::indexing_slicing, reason = "a test may panic")]

#[path = "common/random.rs"]
mod random;

use farstaff::levelling::adjust::{By, corrections};
use farstaff::levelling::net::{Observed, adjust};
use farstaff::levelling::reduce::reduce;
use farstaff::levelling::stop::{Found, Readings, check};
use farstaff::levelling::twice::{Point, adjusted, legs, parting, per_km};
use farstaff::levelling::{Run, Setup, Sight};
use random::Random;
use std::collections::BTreeMap;

const ROWS: &str = include_str!("rows/net.tsv");

/// A net of the rows, and what the other routine found.
#[derive(Default)]
struct Net {
    known: Vec<Option<f64>>,
    levels: Vec<f64>,
    observed: Vec<Observed>,
    spare: usize,
    deviation: Option<f64>,
}

fn nets() -> BTreeMap<&'static str, Net> {
    let mut nets: BTreeMap<&str, Net> = BTreeMap::new();
    for line in ROWS.lines() {
        let cells: Vec<&str> = line.split('\t').collect();
        let number = |i: usize| cells[i].parse::<f64>().unwrap();
        if cells[0] == "range" {
            continue;
        }
        let net = nets.entry(cells[1]).or_default();
        match cells[0] {
            "mark" => {
                net.levels.push(number(4));
                net.known.push((cells[3] == "known").then(|| number(4)));
            }
            "line" => {
                let (from, to) = (cells[2].parse().unwrap(), cells[3].parse().unwrap());
                net.observed.push(Observed { from, to, rise: number(4), length: number(5) });
            }
            "sum" => {
                net.spare = cells[2].parse().unwrap();
                net.deviation = cells[3].parse().ok();
            }
            _ => {}
        }
    }
    nets
}

#[test]
fn a_net_agrees_with_a_general_least_squares_routine() {
    let nets = nets();
    assert_eq!(nets.len(), 6);
    for (name, net) in nets {
        let got = adjust(&net.known, &net.observed).unwrap();
        assert_eq!(got.spare, net.spare, "{name}");
        // A nanometre: what singular values leave of levels of 2000 m, and a millionth of what is read.
        for (mark, (ours, theirs)) in got.levels.iter().zip(&net.levels).enumerate() {
            assert!((ours - theirs).abs() < 1e-9, "{name}, mark {mark}: {ours} {theirs}");
        }
        match (got.deviation, net.deviation) {
            (Some(ours), Some(theirs)) => assert!((ours / theirs - 1.0).abs() < 1e-6, "{name}: {ours} {theirs}"),
            (ours, theirs) => assert_eq!(ours, theirs, "{name}"),
        }
    }
}

#[test]
fn a_run_spread_by_length_is_the_same_least_squares() {
    let net = nets().remove("between two marks").unwrap();
    let setups = net.observed.iter().map(|line| {
        let sight = |reading| Sight { reading, distance: Some(line.length / 2.0) };
        Setup { back: sight(line.rise), inters: vec![], fore: Some(sight(0.0)) }
    });
    let (start, close) = (net.known[0].unwrap(), net.known[5].unwrap());
    let run = Run { start, close: Some(close), setups: setups.collect() };
    let reduced = reduce(&run);
    let corrections = corrections(&run, reduced.sums.last - close, By::Length).unwrap();
    for (i, (station, more)) in reduced.stations.iter().zip(corrections).enumerate() {
        let off = station.fore.unwrap().level + more - net.levels[i + 1];
        assert!(off.abs() < 1e-9, "mark {}: {off:e}", i + 1);
    }
}

#[test]
fn the_order_of_marks_does_not_matter() {
    let (mut random, net) = (Random(5), nets().remove("tangled").unwrap());
    let mut order: Vec<usize> = (0..net.known.len()).collect();
    for i in (1..order.len()).rev() {
        order.swap(i, random.below(i + 1));
    }
    let mut known = vec![None; order.len()];
    for (old, new) in order.iter().enumerate() {
        known[*new] = net.known[old];
    }
    let moved = |o: &Observed| Observed { from: order[o.from], to: order[o.to], ..*o };
    let got = adjust(&known, &net.observed.iter().map(moved).collect::<Vec<_>>()).unwrap();
    for (old, new) in order.iter().enumerate() {
        assert!((got.levels[*new] - net.levels[old]).abs() < 1e-9);
    }
}

#[test]
fn a_net_that_hangs_on_nothing_is_refused() {
    let line = |from, to| Observed { from, to, rise: 1.0, length: 100.0 };
    assert!(adjust(&[None, None], &[line(0, 1)]).is_none());
    assert!(adjust(&[Some(1.0), None, None, None], &[line(0, 1), line(2, 3)]).is_none());
    assert!(adjust(&[Some(1.0), None], &[line(0, 2)]).is_none());
    assert!(adjust(&[Some(1.0), None], &[line(1, 1)]).is_none());
    assert!(adjust(&[Some(1.0), None], &[Observed { length: 0.0, ..line(0, 1) }]).is_none());
    assert!(adjust(&[Some(1.0), None], &[Observed { rise: f64::NAN, ..line(0, 1) }]).is_none());
    assert!(adjust(&[Some(1.0), None], &[]).is_none());
}

/// A book's points at these levels, 500 m and 10 setups apart.
fn book<'a>(names: &[&'a str], levels: &[f64]) -> Vec<Point<'a>> {
    let point = |(i, (name, level)): (usize, (&&'a str, &f64))| Point {
        name,
        level: *level,
        along: Some(500.0 * i as f64),
        setups: 10 * i,
    };
    names.iter().zip(levels).enumerate().map(point).collect()
}

#[test]
fn there_and_back_leg_by_leg() {
    let there = book(&["A", "p", "B", "q", "C"], &[10.0, 11.0, 12.0, 13.0, 14.0]);
    let back = book(&["C", "x", "B", "A"], &[50.0, 49.0, 48.003, 46.001]);
    let legs = legs(&there, &back);
    assert_eq!(
        legs.iter().map(|leg| (leg.from, leg.to, leg.second)).collect::<Vec<_>>(),
        [(0, 2, (3, 2)), (2, 4, (2, 0))]
    );
    let differences: Vec<f64> = legs.iter().map(|leg| 1000.0 * leg.difference()).collect();
    // 2.000 against 2.002 m, 2.000 against 1.997.
    assert!((differences[0] + 2.0).abs() < 1e-9 && (differences[1] - 3.0).abs() < 1e-9, "{differences:?}");
    assert_eq!(legs.iter().map(|leg| leg.length.unwrap()).collect::<Vec<_>>(), [750.0, 1000.0]);
    // ½ √(½ (2²/0.75 + 3²/1)) mm, by pencil.
    let s = per_km(&legs).unwrap();
    assert!((1000.0 * s.bias - 0.5 * (0.5 * (4.0 / 0.75 + 9.0_f64)).sqrt()).abs() < 1e-12, "{s:?}");
    assert_eq!(parting(&legs, |_| Some(0.0025)), Some(1));
    assert_eq!(parting(&legs, |_| Some(0.0035)), None);
    assert_eq!(parting(&legs, |_| None), None);
}

#[test]
fn a_loop_run_both_ways_round() {
    let names = ["BM", "A", "B", "BM"];
    let first = book(&names, &[10.0, 11.0, 13.0, 10.004]);
    // The same way: 4 mm and 1 mm high, 2.5 mm in the mean, a third of it at A. The other way the second rises 0.999 m to A
    // and comes out 1 mm low: 0.9995 m in the mean, less a third of 1.5 mm.
    let both = [
        (["BM", "A", "B", "BM"], [10.0, 11.0, 13.0, 10.001], 11.0 - 0.0025 / 3.0),
        (["BM", "B", "A", "BM"], [10.0, 13.0, 11.0, 10.001], 10.9995 - 0.0015 / 3.0),
    ];
    for (names, levels, at_a) in both {
        let legs = legs(&first, &book(&names, &levels));
        assert_eq!(legs.len(), 3);
        assert!(legs.iter().all(|leg| leg.difference().abs() < 0.0041), "{legs:?}");
        let net = adjusted(&legs, &first, Some(10.0)).unwrap();
        assert!((net.levels[1] - at_a).abs() < 1e-9, "{net:?}");
    }
}

#[test]
fn the_range_of_a_deviation_is_that_of_chi_square() {
    let rows = ROWS.lines().filter_map(|line| line.strip_prefix("range\t"));
    let mut seen = 0;
    for row in rows {
        let cells: Vec<f64> = row.split('\t').map(|cell| cell.parse().unwrap()).collect();
        let names: Vec<String> = (0..=cells[0] as usize).map(|i| i.to_string()).collect();
        let names: Vec<&str> = names.iter().map(String::as_str).collect();
        let flat = book(&names, &vec![0.0; names.len()]);
        let out: Vec<f64> = (0..names.len()).map(|i| if i % 2 == 0 { 0.0 } else { 0.002 }).collect();
        let s = per_km(&legs(&flat, &book(&names, &out))).unwrap();
        let (low, high) = ((s.bias - s.below) / s.bias, (s.bias + s.above) / s.bias);
        assert!((low / cells[1] - 1.0).abs() < 0.01, "{row}: {low}");
        assert!((high / cells[2] - 1.0).abs() < 0.004, "{row}: {high}");
        seen += 1;
    }
    assert_eq!(seen, 15);
}

#[test]
fn the_net_of_a_double_run_says_what_the_legs_say() {
    let mut random = Random(9);
    let mut spread = |size: f64| random.spread(0.5 * size, size) * (random.share() - 0.5);
    let names: Vec<String> = (0..30).map(|i| format!("P{i}")).collect();
    let names: Vec<&str> = names.iter().map(String::as_str).collect();
    let level: Vec<f64> = names.iter().map(|_| 100.0 + spread(20.0)).collect();
    let [one, other] = [(); 2].map(|()| level.iter().map(|level| level + spread(0.004)).collect::<Vec<f64>>());
    let (first, second) = (book(&names, &one), book(&names, &other));
    let legs = legs(&first, &second);
    let net = adjusted(&legs, &first, None).unwrap();
    // One kilometre, the mean of two runs: √(1000 m) of an observation's deviation, over √2.
    let by_net = net.deviation.unwrap() * (1000.0_f64 / 2.0).sqrt();
    let by_legs = per_km(&legs).unwrap().bias;
    assert!((by_net / by_legs - 1.0).abs() < 1e-9, "{by_net} {by_legs}");
    // With nothing to close on, the net is the mean of the two.
    let mean = |i: usize| one[0] + (one[i] - one[0] + other[i] - other[0]) / 2.0;
    assert!((0..30).all(|i| (net.levels[i] - mean(i)).abs() < 1e-9));
}

#[test]
fn names_are_found_in_long_books() {
    let names: Vec<String> = (0..20_000).map(|i| format!("point {i}")).collect();
    let all: Vec<&str> = names.iter().map(String::as_str).collect();
    let (first, second) = all.split_at(10_000);
    let (zero, start) = (vec![0.0; 10_000], std::time::Instant::now());
    assert!(legs(&book(first, &zero), &book(second, &zero)).is_empty());
    let mut back = first.to_vec();
    back.reverse();
    let there = book(first, &zero);
    let all = legs(&there, &book(&back, &zero));
    assert_eq!(all.len(), 9_999);
    assert!(adjusted(&all, &there, Some(0.0)).is_some());
    println!("{:?}", start.elapsed());
}

fn pair(first: f64, second: f64) -> Readings {
    Readings { first, second, third: None }
}

#[test]
fn marks_left_overnight() {
    let found = |leaving, returning| check(leaving, returning, 0.002).found;
    assert_eq!(found(pair(1.612, 1.204), pair(1.433, 1.025)), Found::Held);
    assert_eq!(found(pair(1.612, 1.204), pair(1.433, 1.018)), Found::Moved);
    assert!((check(pair(1.612, 1.204), pair(1.433, 1.018), 0.002).change() - 0.007).abs() < 1e-12);
    assert_eq!(found(pair(1.612, 1.204), pair(1.025, 1.433)), Found::Exchanged);
    // Less than 0.3 m is no check, however well it agrees; 0.3 m is one.
    assert_eq!(found(pair(1.612, 1.313), pair(1.612, 1.313)), Found::NoCheck);
    assert_eq!(found(pair(1.612, 1.312), pair(1.612, 1.312)), Found::Held);
}

#[test]
fn a_third_point_tells_which_mark_moved() {
    let three = |first, second, third| Readings { first, second, third: Some(third) };
    let leaving = three(1.612, 1.204, 2.300);
    let is = |returning, second: bool, by: f64| match check(leaving, returning, 0.002).found {
        Found::This { second: which, by: how } => which == second && (how - by).abs() < 1e-9,
        _ => false,
    };
    assert!(is(three(1.512, 1.114, 2.200), true, -0.010));
    assert!(is(three(1.502, 1.104, 2.200), false, 0.010));
    assert_eq!(check(leaving, three(1.512, 1.114, 2.250), 0.002).found, Found::All);
}
