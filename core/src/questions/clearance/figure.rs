//! The profile over the curved level surface, with the line, its band and what is wanted.

use super::case::Case;
use crate::quantity::show::Round;
use crate::quantity::unit::Quantity;
use crate::question::Asked;
use crate::question::figure::{Band, Figure, Mark, Reading, Series, Stroke, axis};

/// Points of the smooth lines, and of the profile at most.
const POINTS: u32 = 60;
const PROFILE_POINTS: usize = 400;

pub fn draw(asked: &Asked, case: &Case) -> Figure {
    let show = asked.show();
    // Heights are drawn over a chord between the stations' level points, so that the level surface bulges as it does.
    let bulge = |x: f64| x * (case.s - x) / (2.0 * case.r);
    let step = case.points.len().div_ceil(PROFILE_POINTS).max(1);
    // Of each handful of points the highest, so that no crest is lost.
    let crests: Vec<usize> = (0..case.points.len())
        .step_by(step)
        .filter_map(|from| {
            (from..(from + step).min(case.points.len())).max_by(|a, b| top(case, *a).total_cmp(&top(case, *b)))
        })
        .collect();
    let at = |i: &usize| case.points.get(*i).map_or(0.0, |p| p.at);
    let xs: Vec<f64> = crests.iter().map(at).collect();
    let raised = |of: &dyn Fn(usize) -> f64| -> Vec<f64> { crests.iter().map(|i| of(*i) + bulge(at(i))).collect() };
    let ground = raised(&|i| case.points.get(i).map_or(0.0, |p| p.ground));
    let tops = raised(&|i| top(case, i));
    let line = |which: usize| raised(&|i| case.day.heights.get(i).and_then(|h| h.get(which)).copied().unwrap_or(0.0));
    let ends = |inner: Vec<f64>, a: f64, b: f64| -> Vec<f64> { [vec![a], inner, vec![b]].concat() };
    let (low, expected, high) =
        (ends(line(0), case.a, case.b), ends(line(1), case.a, case.b), ends(line(2), case.a, case.b));
    let wanted = raised(&|i| case.needed_m.get(i).copied().unwrap_or(0.0));
    let floor = ground.iter().chain([&case.a, &case.b]).copied().fold(f64::INFINITY, f64::min);
    let ceiling = [&high, &tops, &wanted].into_iter().flatten().copied().fold(f64::NEG_INFINITY, f64::max);
    let margin = 0.06 * (ceiling - floor).max(1.0);
    let (bottom, up) = (floor - margin, ceiling + margin);
    let y = |h: f64| ((h - bottom) / (up - bottom)).clamp(0.0, 1.0);
    let x = |d: f64| (d / case.s).clamp(0.0, 1.0);
    let across = |xs: &[f64]| -> Vec<f64> { xs.iter().map(|d| x(*d)).collect() };
    let heights = |hs: &[f64]| -> Vec<f64> { hs.iter().map(|h| y(*h)).collect() };
    let full: Vec<f64> = ends(xs.clone(), 0.0, case.s);
    let smooth: Vec<f64> = (0..=POINTS).map(|i| case.s * f64::from(i) / f64::from(POINTS)).collect();
    let datum: Vec<f64> = smooth.iter().map(|d| floor + bulge(*d)).collect();
    let worst = case.worst();
    let mut marks = vec![
        Mark::Point { x: 0.0, y: y(case.a), label: "A".to_owned() },
        Mark::Point { x: 1.0, y: y(case.b), label: "B".to_owned() },
    ];
    if let Some(p) = worst {
        let label = format!("worst, {}", show.distance(p.at, Round::Near));
        marks.push(Mark::Span {
            x: x(p.at),
            from: y(p.top + bulge(p.at)),
            to: y(case.day.least + p.top + bulge(p.at)),
            label,
        });
    }
    let readings = crests.iter().zip(&xs).map(|(i, d)| Reading {
        at: x(*d),
        text: format!(
            "{}: top {}, line clears by {}",
            show.distance(*d, Round::Near),
            show.metres(top(case, *i), 0.1),
            show.metres(case.day.heights.get(*i).map_or(0.0, |h| h[1]) - top(case, *i), 0.1)
        ),
    });
    let readings = readings.collect();
    let (long, unit) = (show.distance(case.s, Round::Near).unit, Quantity::Height.usual(show.0));
    let along = Quantity::Distance.unit(long).unwrap_or(Quantity::Distance.usual(show.0));
    let small = |si: f64| unit.from_si(si).unwrap_or(0.0);
    let series = |name: &str, stroke, xs: &[f64], ys: &[f64]| Series {
        name: name.to_owned(),
        stroke,
        x: across(xs),
        y: heights(ys),
    };
    let mut lines = vec![
        series("line of sight by day", Stroke::Heavy, &full, &expected),
        series("ground", Stroke::Thin, &xs, &ground),
        series("top of what stands on it", Stroke::Dashed, &xs, &tops),
        series("level surface", Stroke::Dotted, &smooth, &datum),
    ];
    if case.wanted > 0.0 {
        lines.push(series("clearance wanted", Stroke::Dotted, &xs, &wanted));
    }
    Figure {
        title: "The line over the ground".to_owned(),
        description: format!(
            "From A to B over {}. The line comes nearest to the ground at {}, where it clears by {}.",
            show.distance(case.s, Round::Near),
            show.distance(worst.map_or(0.0, |p| p.at), Round::Near),
            show.metres(case.day.least, case.day.least),
        ),
        x: axis(format!("From A, {long}"), 0.0, along.from_si(case.s).unwrap_or(1.0)),
        y: axis(format!("Height, {} (at A and B)", unit.symbol), small(bottom), small(up)),
        bands: vec![Band {
            name: "where the line may run by day".to_owned(),
            x: across(&full),
            low: heights(&low),
            high: heights(&high),
        }],
        series: lines,
        marks,
        readings,
        note: "The level surface is drawn as it bulges between A and B; everything stands on it.".to_owned(),
        table: "points",
    }
}

fn top(case: &Case, i: usize) -> f64 {
    case.top_m.get(i).copied().unwrap_or(f64::NEG_INFINITY)
}
