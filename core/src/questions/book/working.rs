//! The formulas with the numbers in them, to be checked with a pencil.

use super::case::Case;
use crate::levelling::closure::Rule;
use crate::question::Answer;
use crate::question::pencil::line;

pub fn fill(case: &Case, answer: &mut Answer) {
    let lines = &mut answer.working;
    let sums = case.reduced.sums;
    if let Some((setup, station)) = case.book.run.setups.last().zip(case.reduced.stations.last()) {
        lines.push(line(
            "last setup: height of collimation = level + back sight = {m} + {m} = {m} m",
            &[station.from, setup.back.reading, station.collimation],
        ));
        if let Some((fore, seen)) = setup.fore.zip(station.fore) {
            let numbers = [station.collimation, fore.reading, seen.level];
            lines.push(line("its level = height of collimation − fore sight = {m} − {m} = {m} m", &numbers));
        }
    }
    let [by_sights, by_rises, by_levels] = sums.checks();
    lines.push(line("Σ back − Σ fore = {m} − {m} = {m} m", &[sums.back, sums.fore, by_sights]));
    lines.push(line("Σ rise − Σ fall = {m} − {m} = {m} m", &[sums.rise, sums.fall, by_rises]));
    lines.push(line("last − first = {m} − {m} = {m} m", &[sums.last, sums.first, by_levels]));
    worth(case, lines);
    closure(case, lines);
}

fn worth(case: &Case, lines: &mut Vec<String>) {
    let (now, budget) = (case.running.now, &case.budget);
    let worth = now.worth(budget);
    let (alpha, k, r) = (budget.collimation.0, budget.k, budget.radius.0);
    lines.push(line("k = {k} (from {k} to {k}), ", &[k.value.0, k.low.0, k.high.0]) + &case.air.source);
    lines.push(line(
        "collimation = α Σ(B − F) = {mm} mm/m × {m} m = {mm} mm",
        &[alpha, now.run, worth.collimation.bias],
    ));
    lines.push(line(
        "curve and air = (1 − k) Σ(B² − F²) / 2R = (1 − ({k})) × {m} / {m} = {mm} mm",
        &[k.value.0, now.squares, 2.0 * r, worth.curve.bias],
    ));
    lines.push(line("now worth = the two together = {mm} mm; + the level is carried too high", &[worth.total().bias]));
}

fn closure(case: &Case, lines: &mut Vec<String>) {
    let Some(off) = case.misclosure() else { return };
    let (last, close) = (case.last(), case.close.unwrap_or(0.0));
    lines.push(line("misclosure = observed − known = {m} − {m} = {mm} mm as booked", &[last, close, off]));
    if let Some(corrected) = case.misclosure_corrected() {
        lines.push(line("the same with the corrected levels: {mm} mm", &[corrected]));
    }
    let Some(allowed) = case.allowed else { return };
    match case.rule {
        Some(Rule::RootKm(one)) => {
            let km = case.length.unwrap_or(0.0) / 1000.0;
            lines.push(line("allowed = {mm} mm × √{m} km = {mm} mm", &[one, km, allowed]));
        }
        Some(Rule::RootSetups(one)) => {
            lines.push(line("allowed = {mm} mm × √{m} setups = {mm} mm", &[one, case.book.done() as f64, allowed]));
        }
        None => {}
    }
}
