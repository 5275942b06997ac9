//! The test as entered, and what it comes to.

use super::*;
use crate::doubt::Estimate;
use crate::pairs::{PegTest, Shot, Station, agree};
use crate::quantity::show::{Round, Show, Shown};
use crate::quantity::{Metres, Tilt};
use crate::ray;
use crate::sight::budget::{Budget, Part, total};

/// What sets of readings say.
pub enum Sets {
    /// One set only; so many readings of the second were entered.
    One(usize),
    /// Two: the second's collimation error less the first's, the most that the readings explain, and whether they do.
    Two { difference: f64, explained: f64, agree: bool },
}

pub struct Case {
    pub budget: Budget,
    pub air: site::AirInForce,
    /// With the readings of both sets in the mean.
    pub test: PegTest,
    pub sets: Sets,
    pub lever: f64,
    pub parts: [Part; 4],
    pub error: Estimate,
    pub rise: Estimate,
    pub limit: f64,
    /// Whose the limit is.
    pub whose: &'static str,
}

impl Case {
    /// Words where the geometry cannot tell, or distances are missing.
    pub fn of(asked: &Asked) -> Result<Case, String> {
        let air = site::air(asked, site::sky(asked));
        let distances = distances(asked)?;
        let readings = [&FIRST_A, &FIRST_B, &SECOND_A, &SECOND_B].map(|field| asked.must(field));
        let one = test(readings, distances);
        let mut budget = site::budget(asked, air.k, asked.must(&DISTANCE_DOUBT));
        let second = [&REPEAT_FIRST_A, &REPEAT_FIRST_B, &REPEAT_SECOND_A, &REPEAT_SECOND_B].map(|f| asked.number(f));
        let found = |test: &PegTest, budget: &Budget| test.collimation(budget).ok_or_else(|| blind(asked, distances));
        let parts = found(&one, &budget)?;
        let (mut test_in_force, mut sets) = (one, Sets::One(second.iter().flatten().count()));
        if let [Some(a), Some(b), Some(c), Some(d)] = second {
            let other = test([a, b, c, d], distances);
            let (first, second) = (total(&parts).bias, total(&found(&other, &budget)?).bias);
            let [readings, ..] = parts;
            let half = Tilt(readings.error.half());
            sets = Sets::Two {
                difference: second - first,
                explained: half.0 * std::f64::consts::SQRT_2,
                agree: agree(Tilt(first), Tilt(second), half),
            };
            test_in_force = one.mean(&other);
            // The mean of two independent readings.
            budget.reading.0 *= std::f64::consts::FRAC_1_SQRT_2;
            budget.reading_growth.0 *= std::f64::consts::FRAC_1_SQRT_2;
        }
        let parts = found(&test_in_force, &budget)?;
        let rise = test_in_force.rise(&budget).map_or(Estimate::even(0.0, 0.0), |parts| total(&parts));
        let lever = test_in_force.lever(&budget).map_or(0.0, |lever| lever.0);
        let (limit, whose) = limit(asked);
        let error = total(&parts);
        Ok(Case { budget, air, test: test_in_force, sets, lever, parts, error, rise, limit, whose })
    }
    /// What curve and air put into this reading.
    pub fn combined(&self, shot: Shot) -> f64 {
        ray::curvature(shot.distance, self.budget.radius).0 - self.budget.bend(shot.distance).value
    }
    /// Of the second station, the staff that shows the error most.
    pub fn far(&self) -> Shot {
        let Station { a, b } = self.test.second;
        if a.distance >= b.distance { a } else { b }
    }
    /// The most that a staff so far off may be misread by.
    pub fn readable(&self, shot: Shot) -> f64 {
        self.budget.reading_doubt(shot.distance)
    }
}

/// The limit, and whose it is.
fn limit(asked: &Asked) -> (f64, &'static str) {
    if let Some(own) = asked.number(&LIMIT) {
        return (own, "as entered");
    }
    let rule = limits::COLLIMATION.iter().find(|rule| rule.name == asked.choice(&LIMIT_RULE));
    rule.map_or((0.0, ""), |rule| (rule.most.0, rule.label))
}

/// To A and to B from the first station, then from the second.
fn distances(asked: &Asked) -> Result<[f64; 4], String> {
    let (pegs, near) = (asked.must(&PEGS), asked.must(&NEAR));
    match asked.choice(&LAYOUT) {
        "middle" => Ok([pegs / 2.0, pegs / 2.0, pegs + near, near]),
        "near" if near * 2.0 >= pegs => {
            Err("The level stands near neither peg: its distance from the near peg must be less than half of that from peg to peg.".to_owned())
        }
        "near" => Ok([near, pegs - near, pegs - near, near]),
        _ => {
            let all = [&FIRST_DISTANCE_A, &FIRST_DISTANCE_B, &SECOND_DISTANCE_A, &SECOND_DISTANCE_B];
            match all.map(|field| asked.number(field)) {
                [Some(a), Some(b), Some(c), Some(d)] => Ok([a, b, c, d]),
                _ => Err("Enter all four distances from the level to the staffs.".to_owned()),
            }
        }
    }
}

fn test([a, b, c, d]: [f64; 4], [p, q, r, s]: [f64; 4]) -> PegTest {
    let shot = |reading, distance| Shot { reading: Metres(reading), distance: Metres(distance) };
    PegTest { first: Station { a: shot(a, p), b: shot(b, q) }, second: Station { a: shot(c, r), b: shot(d, s) } }
}

/// Why the geometry cannot tell.
fn blind(asked: &Asked, [a, b, c, d]: [f64; 4]) -> String {
    let lever = asked.show().distance((a - b - c + d).abs(), Round::Near);
    format!(
        "At both stations the two sights differ by nearly the same: a lever of {lever} is within the doubt of the distances, and a collimation error cannot show. Stand midway once, then close to one peg."
    )
}

/// A tilt in mm/m, to the digits that `grain` leaves it.
pub fn tilt(show: Show, si: f64, grain: f64) -> Shown {
    show.small_in(Quantity::Collimation.usual(show.0), si, grain)
}

/// A tilt as an angle.
pub fn seconds(show: Show, si: f64, grain: f64) -> Shown {
    let unit = Quantity::Collimation.unit("″").unwrap_or(Quantity::Collimation.usual(show.0));
    show.small_in(unit, si, grain)
}
