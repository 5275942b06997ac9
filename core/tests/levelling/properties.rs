//! What holds for every run, and for its rows.

use super::random::Random;
use super::{book, column, value};
use farstaff::air::guide::KRange;
use farstaff::levelling::adjust::{By, corrections as spread};
use farstaff::levelling::balance::Balance;
use farstaff::levelling::closure::{Rule, allowed, length};
use farstaff::levelling::correct::{best_back, corrections, excess};
use farstaff::levelling::reduce::reduce;
use farstaff::levelling::slope::longest;
use farstaff::levelling::wires::Wires;
use farstaff::levelling::{Run, Setup, Sight};
use farstaff::quantity::{Coefficient, Metres, Tilt};
use farstaff::sight::budget::Budget;

fn often(mut check: impl FnMut(&mut Random)) {
    let mut random = Random(5);
    (0..500).for_each(|_| check(&mut random));
}

impl Random {
    /// A reading as typed, or a mean of three wires, or any number at all; now and then of a staff held head down.
    fn reading(&mut self) -> f64 {
        let step = self.below(4000) as f64 / 1000.0;
        let reading = match self.below(4) {
            0 => step * 0.3048,
            1 => step / 3.0,
            2 => 4.0 * self.share(),
            _ => step,
        };
        if self.below(20) == 0 { -reading } else { reading }
    }
    fn sight(&mut self) -> Sight {
        Sight { reading: self.reading(), distance: Some(self.spread(2.0, 120.0)) }
    }
    fn run(&mut self) -> Run {
        let mut setup = || Setup {
            back: self.sight(),
            inters: (0..self.below(4)).map(|_| self.sight()).collect(),
            fore: Some(self.sight()),
        };
        let setups = (0..20).map(|_| setup()).collect();
        Run { start: 400.0 * self.share() - 100.0, close: None, setups }
    }
    fn budget(&mut self) -> Budget {
        let k = self.share() * 8.0 - 5.0;
        Budget {
            k: KRange {
                value: Coefficient(k),
                low: Coefficient(k - self.share()),
                high: Coefficient(k + self.share()),
            },
            common: self.share(),
            radius: Metres(6_371_000.0),
            radius_doubt: 0.0056,
            collimation: Tilt((self.share() - 0.5) * 2e-4),
            collimation_doubt: Tilt(self.share() * 1e-4),
            reading: Metres(5e-4),
            reading_growth: Tilt(1e-5),
            distance_doubt: 0.05,
        }
    }
}

fn balance(run: &Run) -> Balance {
    let mut balance = Balance::default();
    run.setups.iter().for_each(|s| balance.add(s.back, s.fore.unwrap()));
    balance
}

#[test]
fn both_methods_agree_to_the_last_bit_and_so_do_the_sums() {
    often(|random| {
        let run = random.run();
        let reduced = reduce(&run);
        for station in &reduced.stations {
            for seen in station.inters.iter().chain(&station.fore) {
                assert_eq!(seen.level.to_bits(), seen.by_rise.to_bits());
            }
        }
        let [sights, rises, levels] = reduced.sums.checks();
        assert!(sights == rises && rises == levels);
        // Against plain sums of the readings: half a nanometre for each.
        let plain = run.setups.iter().fold(run.start, |level, s| level + s.back.reading - s.fore.unwrap().reading);
        assert!((plain - reduced.sums.last).abs() < 41.0 * 0.5e-9 + 1e-12);
    });
}

#[test]
fn what_is_corrected_is_what_the_balance_is_worth() {
    often(|random| {
        let (run, budget) = (random.run(), random.budget());
        let worth = balance(&run).worth(&budget).total().bias;
        let corrected = corrections(&run, &budget).last().unwrap().fore.unwrap();
        // The parabola of the balance against the exact forms: 1e-8 of the largest term of the sum.
        let terms: f64 = run
            .setups
            .iter()
            .flat_map(|s| [s.back, s.fore.unwrap()])
            .map(|s| excess(&budget, s.distance.unwrap()).abs())
            .sum();
        assert!((worth + corrected).abs() <= 1e-8 * terms, "{worth} {corrected}");
    });
}

#[test]
fn the_next_fore_sight_brings_the_balance_back() {
    often(|random| {
        let mut balance = balance(&random.run());
        let back = random.sight();
        let (fore, rest) = balance.next_fore(back.distance.unwrap(), 1e6, -1e6);
        balance.add(back, Sight { reading: 0.0, distance: Some(fore) });
        assert!(rest == 0.0 && balance.run.abs() < 1e-9);
        // Held by its limits it leaves what it says.
        let before = balance;
        let (fore, rest) = balance.next_fore(back.distance.unwrap(), 3.0, 1.0);
        balance.add(back, Sight { reading: 0.0, distance: Some(fore) });
        assert!((1.0..=3.0).contains(&fore) && (balance.run - rest).abs() < 1e-9, "{before:?}");
    });
}

#[test]
fn a_run_with_exchanged_distances_loses_the_opposite() {
    often(|random| {
        let (run, budget) = (random.run(), random.budget());
        let mut turned = run.clone();
        for setup in &mut turned.setups {
            let fore = setup.fore.as_mut().unwrap();
            std::mem::swap(&mut setup.back.distance, &mut fore.distance);
        }
        let [one, other] = [&run, &turned].map(|run| balance(run).worth(&budget).total());
        let near = |a: f64, b: f64| assert!((a - b).abs() <= 1e-12, "{a} {b}");
        near(one.bias, -other.bias);
        near(one.above, other.below);
        near(one.below, other.above);
    });
}

#[test]
fn what_is_spread_closes_the_run() {
    often(|random| {
        let run = random.run();
        let off = 0.02 * random.share() - 0.01;
        for by in [By::Length, By::Setups] {
            let all = spread(&run, off, by).unwrap();
            assert_eq!(*all.last().unwrap(), -off);
            let steps: Vec<f64> = all.iter().zip([0.0].iter().chain(&all)).map(|(now, before)| now - before).collect();
            assert!(steps.iter().all(|step| step * off <= 0.0), "no step goes back");
        }
        // A distance less: nothing to go by.
        let mut lacking = run.clone();
        lacking.setups[7].back.distance = None;
        assert_eq!(spread(&lacking, off, By::Length), None);
        assert_eq!(length(&lacking).1, 1);
    });
    assert_eq!(spread(&Run { start: 0.0, close: None, setups: vec![] }, 0.01, By::Setups), None);
}

#[test]
fn limits_grow_as_roots() {
    often(|random| {
        let (one, l) = (random.spread(1e-3, 0.1), random.spread(10.0, 1e6));
        let of = |l: f64| allowed(Rule::RootKm(one), Some(l), 9).unwrap();
        assert!((of(4.0 * l) - 2.0 * of(l)).abs() <= 4.0 * f64::EPSILON * of(4.0 * l));
        assert_eq!(of(1000.0), one);
        assert_eq!(allowed(Rule::RootSetups(one), None, 9), Some(3.0 * one));
        assert_eq!(allowed(Rule::RootKm(one), None, 9), None);
    });
}

#[test]
fn wires_that_were_moved_together_keep_their_distance() {
    often(|random| {
        let (middle, half) = (random.reading(), random.spread(0.01, 0.6));
        let wires = Wires { upper: middle + half, middle, lower: middle - half };
        assert!(wires.in_order() && wires.off().abs() < 1e-15 && wires.unequal() < 1e-14);
        assert!((wires.distance(100.0) - 200.0 * half).abs() < 1e-12);
        let down = Wires { upper: wires.lower, middle, lower: wires.upper };
        assert!(down.in_order() && down.distance(100.0) == wires.distance(100.0));
        assert!(!Wires { middle: middle + 2.0 * half, ..wires }.in_order());
    });
}

#[test]
fn no_standpoint_is_better_than_the_best() {
    often(|random| {
        let budget = random.budget();
        let sights: Vec<(f64, f64)> =
            (0..1 + random.below(6)).map(|_| (random.spread(5.0, 150.0), random.spread(1e-3, 1e-2))).collect();
        let (at, share) = best_back(&sights, &budget).unwrap();
        // The share at a standpoint, by the setup's own budget without the readings.
        let half = (budget.k.high.0 - budget.k.value.0).max(budget.k.value.0 - budget.k.low.0);
        let worst = |x: f64| {
            let of = |(d, t): &(f64, f64)| {
                let lost = excess(&budget, *d) - excess(&budget, x);
                let air = half * (d * d - x * x) / (2.0 * budget.radius.0);
                (lost.abs() + libm::hypot(air, budget.collimation_doubt.0 * (d - x))) / t
            };
            sights.iter().map(of).fold(0.0, f64::max)
        };
        assert!((worst(at) - share).abs() <= 1e-6 * share.max(1e-3), "{} {share}", worst(at));
        let near = sights.iter().map(|s| s.0).fold(f64::INFINITY, f64::min);
        let far = sights.iter().map(|s| s.0).fold(0.0, f64::max);
        // No worse than any trial between the nearest and the farthest point, nor than standing as far off as either.
        for i in 0..=60 {
            let x = near + (far - near) * f64::from(i) / 60.0;
            assert!(share <= worst(x) * (1.0 + 1e-6) + 1e-9, "{x}: {share} {}", worst(x));
        }
        assert!((near..=far).contains(&at));
    });
}

#[test]
fn a_steeper_slope_takes_shorter_sights() {
    often(|random| {
        let (instrument, clearance) = (random.spread(1.2, 1.8), random.spread(0.1, 0.6));
        let slope = random.spread(0.001, 1.0);
        let [up, down] = longest(instrument, Some(4.0), clearance, slope);
        assert!(
            (up * slope - (instrument - clearance)).abs() < 1e-9 && (down * slope - (4.0 - instrument)).abs() < 1e-9
        );
        assert_eq!(longest(instrument, Some(4.0), clearance, -slope), [up, down]);
        assert!(longest(instrument, None, clearance, slope)[1].is_infinite());
        assert!(longest(instrument, Some(4.0), clearance, 0.0).iter().all(|d| d.is_infinite()));
    });
}

/// Rows of a run in millimetres, metres or feet, some with wires, some change points in one row and some in two.
fn rows(random: &mut Random, setups: usize, together: bool) -> String {
    let mut text = String::new();
    let reading = |random: &mut Random| format!("{}.{:03}", random.below(3), random.below(1000));
    let mut pending: Option<String> = None;
    for i in 0..setups {
        let (back, far) = (reading(random), 10 + random.below(50));
        match pending.take() {
            Some(fore) if together => text.push_str(&format!("C{i}\t{back}\t\t{fore}\t{far}\n")),
            Some(fore) => {
                text.push_str(&format!("C{i}\t\t\t{fore}\t{}\nC{i}\t{back}\t\t\t{far}\n", 10 + random.below(50)))
            }
            None => text.push_str(&format!("A\t{back}\t\t\t{far}\n")),
        }
        for j in 0..random.below(3) {
            text.push_str(&format!("P{i}.{j}\t\t{}\t\t{far}\n", reading(random)));
        }
        pending = Some(reading(random));
    }
    text + &format!("B\t\t\t{}\t30\n", pending.unwrap())
}

#[test]
fn the_sheet_shows_both_methods_alike() {
    let mut random = Random(9);
    for i in 0..40 {
        let text = rows(&mut random, 3 + i % 7, i % 2 == 0);
        for units in ["metric", "foot", "survey_foot"] {
            let answer = book(&text, &[("units", units), ("start", "212.3456")]);
            assert_eq!(answer.problems, vec![]);
            assert_eq!(column(&answer, "Level by collimation"), column(&answer, "Level by rise"));
            let checks = answer.tables.iter().find(|t| t.name == "checks").unwrap();
            assert!(checks.rows.iter().all(|row| row[3] == checks.rows[0][3]), "{checks:?}");
        }
    }
}

#[test]
fn striking_and_bringing_back_changes_nothing() {
    let mut random = Random(11);
    for _ in 0..30 {
        let text = rows(&mut random, 5, true);
        let before = book(&text, &[]);
        let lines: Vec<&str> = text.lines().collect();
        let at = random.below(lines.len());
        let struck: Vec<String> =
            lines.iter().enumerate().map(|(i, l)| if i == at { format!("~{l}") } else { (*l).to_owned() }).collect();
        let without = book(&struck.join("\n"), &[]);
        let left: Vec<&str> = lines.iter().enumerate().filter(|l| l.0 != at).map(|l| *l.1).collect();
        let gone = book(&left.join("\n"), &[]);
        // A row that is struck counts as if it were not there, but for the numbers of the rows.
        assert_eq!((&without.results, without.problems.len()), (&gone.results, gone.problems.len()));
        let back: Vec<String> =
            struck.iter().map(|l| l.strip_prefix('~').map_or_else(|| l.clone(), str::to_owned)).collect();
        assert_eq!(book(&back.join("\n"), &[]), before);
    }
}

#[test]
fn every_beginning_of_a_book_is_answered_and_keeps_its_levels() {
    let mut random = Random(13);
    let text = rows(&mut random, 12, true);
    let whole = column(&book(&text, &[]), "Level by collimation");
    let lines: Vec<&str> = text.lines().collect();
    for many in 1..=lines.len() {
        let answer = book(&lines[..many].join("\n"), &[]);
        assert_eq!(answer.problems, vec![], "{many}");
        assert_eq!(column(&answer, "Level by collimation"), whole[..many], "{many}");
        assert!(value(&answer, "last_level").is_some());
    }
}
