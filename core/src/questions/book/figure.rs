//! The level along the line, and under it what unequal sights have put in since the last mark.

use super::case::Case;
use crate::quantity::show::Round;
use crate::quantity::unit::Quantity;
use crate::question::figure::{Axis, Band, Figure, Mark, Reading, Series, Stroke, Tick, axis};

/// Points drawn at most.
const POINTS: usize = 400;
/// Where the upper part begins and the lower ends.
const UPPER: f64 = 0.42;
const LOWER: f64 = 0.3;

/// Something drawn in a part of the height.
struct Part {
    low: f64,
    high: f64,
    from: f64,
    to: f64,
}

impl Part {
    fn of(values: impl Iterator<Item = f64>, least: f64, from: f64, to: f64) -> Part {
        let (low, high) = values.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), v| (l.min(v), h.max(v)));
        let margin = 0.06 * (high - low).max(least);
        Part { low: low - margin, high: high + margin, from, to }
    }
    fn y(&self, value: f64) -> f64 {
        let share = ((value - self.low) / (self.high - self.low)).clamp(0.0, 1.0);
        self.from + share * (self.to - self.from)
    }
    /// Its figures, in a unit of which one is `scale` of ours.
    fn ticks(&self, scale: f64) -> Vec<Tick> {
        let within = |tick: Tick| Tick { at: self.from + tick.at * (self.to - self.from), ..tick };
        axis(String::new(), self.low * scale, self.high * scale).ticks.into_iter().map(within).collect()
    }
}

pub fn draw(case: &Case) -> Figure {
    let show = case.digits.show;
    let steps = &case.running.steps;
    // Along the sights where every distance is known, else setup by setup.
    let metres = case.running.whole.missing == 0 && case.running.whole.length > 0.0;
    let along = |i: usize, at: f64| if metres { at } else { (i + 1) as f64 };
    let levels: Vec<f64> = case.reduced.stations.iter().filter_map(|s| Some(s.fore?.level)).collect();
    let mut places = vec![0.0];
    let mut heights = vec![case.reduced.sums.first];
    let mut worths = vec![[0.0; 3]];
    let mut names = vec![case.book.places.first().map_or(String::new(), |p| case.book.name(p.back))];
    let every = steps.len().div_ceil(POINTS).max(1);
    for (i, (step, level)) in steps.iter().zip(&levels).enumerate() {
        if (i + 1) % every == 0 || i + 1 == steps.len() {
            places.push(along(i, step.along));
            heights.push(*level);
            let worth = step.worth;
            worths.push([worth.bias - worth.below, worth.bias, worth.bias + worth.above]);
            names.push(case.book.places.get(i).and_then(|p| p.fore).map_or(String::new(), |spot| case.book.name(spot)));
        }
    }
    let end = places.last().copied().filter(|p| *p > 0.0).unwrap_or(1.0);
    let (upper, lower) = (
        Part::of(heights.iter().copied(), 0.1, UPPER, 1.0),
        Part::of(worths.iter().flatten().copied(), 0.001, 0.0, LOWER),
    );
    let x: Vec<f64> = places.iter().map(|p| (p / end).clamp(0.0, 1.0)).collect();
    let worth = |which: fn(&[f64; 3]) -> f64| worths.iter().map(|w| lower.y(which(w))).collect::<Vec<f64>>();
    let small = show.small_unit(0.001);
    let (of_level, of_worth) = (case.digits.unit.from_si(1.0).unwrap_or(1.0), small.from_si(1.0).unwrap_or(1.0));
    let long = show.distance(end, Round::Near).unit;
    let scale = Quantity::Distance.unit(long).and_then(|u| u.from_si(1.0)).unwrap_or(1.0);
    let readings =
        x.iter().zip(&names).zip(heights.iter().zip(&worths)).map(|((at, name), (height, [_, worth, _]))| Reading {
            at: *at,
            text: format!("{name}: {}, balance worth {}", case.digits.shown(*height), show.own(*worth)),
        });
    let last = worths.last().map_or(0.0, |w| w[1]);
    Figure {
        title: "The run and its balance".to_owned(),
        description: format!(
            "Level from {} to {}; below it what unequal sights have put into it since the last mark, now {}.",
            case.digits.shown(case.reduced.sums.first),
            case.digits.shown(case.reduced.sums.last),
            show.own(last)
        ),
        x: if metres {
            axis(format!("Along the sights, {long}"), 0.0, end * scale)
        } else {
            axis("Setups".to_owned(), 0.0, end)
        },
        y: Axis {
            label: format!("Level, {} · below: balance worth, {}", case.digits.unit.symbol, small.symbol),
            ticks: [lower.ticks(of_worth), upper.ticks(of_level)].concat(),
        },
        bands: vec![Band {
            name: "doubt of the balance's worth".to_owned(),
            x: x.clone(),
            low: worth(|w| w[0]),
            high: worth(|w| w[2]),
        }],
        readings: readings.collect(),
        series: vec![
            Series {
                name: "level".to_owned(),
                stroke: Stroke::Heavy,
                x: x.clone(),
                y: heights.iter().map(|h| upper.y(*h)).collect(),
            },
            Series { name: "balance, what it is worth".to_owned(), stroke: Stroke::Thin, x, y: worth(|w| w[1]) },
        ],
        marks: vec![Mark::Level { y: lower.y(0.0), label: "balanced".to_owned() }],
        note: "The two parts have scales of their own.".to_owned(),
        table: "run",
    }
}
