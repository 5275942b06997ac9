//! The line as entered, in the air of the day and of the night, over every point.

use super::position::{Course, SEPARATION};
use super::rows::Spot;
use super::{
    CHANCE, COVER, COVER_DOUBT, GROUND, GROUND_A, GROUND_B, GROUND_DOUBT, GROUND_SHARED, GROWTH, HEIGHT_A, HEIGHT_B,
    INCLUDED, NAME, NIGHT_K, NIGHT_K_DOUBT, OVER, POINT_DOUBT, RULES, WANTED,
};
use crate::air::guide::{self, KRange, Sky};
use crate::doubt::Estimate;
use crate::line::Line;
use crate::line::along::Along;
use crate::line::chance::{self, chance};
use crate::line::profile::Profile;
use crate::order::sort;
use crate::quantity::{Coefficient, Metres};
use crate::question::field::Field;
use crate::question::{Asked, site};

/// Within this share of the line from a station the clearance wanted falls off evenly to nothing there, as the line must
/// come down to its stand. A rule of this project.
const NEAR_STATION: f64 = 0.05;
/// The guide of k goes no lower.
const FLOOR: f64 = 0.5;

/// A point of the profile.
pub struct Point {
    pub at: f64,
    pub ground: f64,
    /// Of the ground and what stands on it, growth included.
    pub top: f64,
    /// Clearance wanted here.
    pub wanted: f64,
    pub doubt: f64,
    pub cover_doubt: f64,
    pub name: String,
}

/// The line in the air of the day, or of the night.
pub struct View {
    /// Height of the line at each point, at the low end of k, as expected, at the high end.
    pub heights: Vec<[f64; 3]>,
    /// k at the middle of the line.
    pub k: KRange,
    /// Where k comes from.
    pub source: &'static str,
    /// The point where least of the clearance is to spare.
    pub worst: usize,
    /// Its clearance.
    pub least: f64,
    /// That the whole line clears what is wanted.
    pub chance: f64,
}

pub struct Case {
    pub a: f64,
    pub b: f64,
    pub s: f64,
    pub r: f64,
    pub wanted: f64,
    pub chance: f64,
    /// Those between the stations, by distance.
    pub points: Vec<Point>,
    pub day: View,
    pub night: View,
    /// At the k of the day.
    pub line: Line,
    pub at_m: Vec<f64>,
    pub top_m: Vec<f64>,
    /// Top and the clearance wanted over it.
    pub needed_m: Vec<f64>,
}

/// Whose the air is: entered for the day or the night, and the guide's sky.
struct Entered<'a> {
    k: &'a Field,
    doubt: &'a Field,
    sky: Sky,
}

impl Case {
    /// `None` where no ray joins the stations, or no point lies between them.
    pub fn of(asked: &Asked, course: &Course, spots: &[Spot]) -> Option<Case> {
        let a = asked.must(&GROUND_A) + asked.must(&HEIGHT_A);
        let b = asked.must(&GROUND_B) + asked.must(&HEIGHT_B);
        let s = course.s;
        let (r, _) = course.radius(asked);
        let rule = RULES.iter().find(|r| r.0 == asked.choice(&OVER)).map_or(0.0, |r| r.1);
        let wanted = asked.number(&WANTED).unwrap_or(rule);
        let points = points(asked, spots, s, wanted);
        let common = asked.must(&GROUND_SHARED);
        let at_m: Vec<f64> = points.iter().map(|p| p.at).collect();
        let top_m: Vec<f64> = points.iter().map(|p| p.top).collect();
        // The ground at the stations counts for the air, which is lowest there.
        let stations = [(0.0, asked.must(&GROUND_A)), (s, asked.must(&GROUND_B))];
        let under_m = [&[0.0, s], at_m.as_slice()].concat();
        let needed_m = points.iter().map(|p| p.top + p.wanted).collect();
        let ground_m: Vec<f64> = stations.iter().map(|p| p.1).chain(points.iter().map(|p| p.ground)).collect();
        let by_day = match site::sky(asked) {
            Sky::ClearNight => Sky::Unknown,
            sky => sky,
        };
        let view = |entered: Entered| {
            let guide = |h: Metres| guide::k(h, entered.sky);
            let along = Along::new(
                [Metres(a), Metres(b)],
                Metres(s),
                Profile { at_m: &under_m, top_m: &ground_m },
                Metres(FLOOR.max(wanted)),
                &guide,
                Metres(r),
            );
            let middle = along.as_ref().map_or_else(|| guide(Metres(FLOOR)), |along| along.k_at(s / 2.0));
            let (k, source) = in_force(asked, &entered, middle, along.as_ref().is_some_and(Along::varies));
            let varying = along.filter(|along| along.varies() && asked.number(entered.k).is_none());
            let line = Line::new(Metres(a), Metres(b), Metres(s), k.value, Metres(r))?;
            let range = |x: f64| varying.as_ref().map_or(k, |along| along.k_at(x));
            // A line moves with k by x(s − x)/2R, but for shares of 1e-3.
            let heights = |x: f64| {
                let (height, lever, here) = (line.height(Metres(x)).0, x * (s - x) / (2.0 * r), range(x));
                [here.low, here.value, here.high].map(|of| height + (of.0 - k.value.0) * lever)
            };
            View::of(&points, points.iter().map(|p| heights(p.at)).collect(), common, (k, source))
        };
        let day = view(Entered { k: &site::K, doubt: &site::K_DOUBT, sky: by_day })?;
        let night = view(Entered { k: &NIGHT_K, doubt: &NIGHT_K_DOUBT, sky: Sky::ClearNight })?;
        // One k that puts the line over the worst point where it runs: remedies are about that point.
        let worst = points.get(day.worst)?;
        let straight = Line::new(Metres(a), Metres(b), Metres(s), day.k.value, Metres(r))?;
        let off = day.least + worst.top - straight.height(Metres(worst.at)).0;
        let k = Coefficient(day.k.value.0 + off * 2.0 * r / (worst.at * (s - worst.at)));
        let line = straight.in_air(k)?;
        Some(Case { a, b, s, r, wanted, chance: asked.must(&CHANCE), points, day, night, line, at_m, top_m, needed_m })
    }
    /// The tops of the points.
    pub fn profile(&self) -> Profile<'_> {
        Profile { at_m: &self.at_m, top_m: &self.top_m }
    }
    /// What the line must not run below.
    pub fn needed(&self) -> Profile<'_> {
        Profile { at_m: &self.at_m, top_m: &self.needed_m }
    }
    /// The worst point by day.
    pub fn worst(&self) -> Option<&Point> {
        self.points.get(self.day.worst)
    }
    /// 95 % half-width of the clearance over a point by day, on the side that may block.
    pub fn half(&self, point: usize) -> f64 {
        self.doubt(&self.day, point).map_or(0.0, |p| Estimate::sum(&p.parts()).below)
    }
    /// What the clearance over a point may be off by, part for part.
    pub fn doubt(&self, view: &View, point: usize) -> Option<chance::Point> {
        Some(under(self.points.get(point)?, *view.heights.get(point)?))
    }
}

fn under(point: &Point, heights: [f64; 3]) -> chance::Point {
    chance::Point::new(
        heights.map(Metres),
        Metres(point.top + point.wanted),
        Metres(point.doubt),
        Metres(point.cover_doubt),
    )
}

impl View {
    fn of(points: &[Point], heights: Vec<[f64; 3]>, common: f64, (k, source): (KRange, &'static str)) -> Option<View> {
        let spare = points.iter().zip(&heights).map(|(p, [_, height, _])| height - p.top - p.wanted).enumerate();
        let (worst, spare) = spare.min_by(|one, other| one.1.total_cmp(&other.1))?;
        let least = spare + points.get(worst)?.wanted;
        let under: Vec<chance::Point> = points.iter().zip(&heights).map(|(p, h)| under(p, *h)).collect();
        let chance = chance(&under, common);
        Some(View { heights, k, source, worst, least, chance })
    }
}

/// k in force: as entered, its doubt too or by the guide; else by the guide.
fn in_force(asked: &Asked, entered: &Entered, guide: KRange, varies: bool) -> (KRange, &'static str) {
    let value = asked.number(entered.k);
    let half = asked.number(entered.doubt);
    let source = match (value, half, varies) {
        (Some(_), Some(_), _) => "as entered",
        (Some(_), None, _) => "as entered, its doubt by our guide",
        (None, _, true) => "our guide, place by place along a line that runs low",
        (None, _, false) => "our guide at the height of the line",
    };
    (site::entered_or(value, half, guide), source)
}

/// The points, by distance.
fn points(asked: &Asked, spots: &[Spot], s: f64, wanted: f64) -> Vec<Point> {
    let (general, cover_doubt) = (asked.must(&GROUND_DOUBT), asked.must(&COVER_DOUBT));
    let lower = asked.number(&SEPARATION).unwrap_or(0.0);
    let mut points: Vec<Point> = spots
        .iter()
        .map(|&Spot { row, at }| {
            let of = |column: &Field| row.number(column).unwrap_or(0.0);
            let included = row.choice(&INCLUDED) == "yes";
            let cover = if included { 0.0 } else { of(&COVER) };
            let ground = of(&GROUND) - lower;
            Point {
                at,
                ground,
                top: ground + cover + of(&GROWTH),
                wanted: wanted * (at.min(s - at) / (NEAR_STATION * s)).clamp(0.0, 1.0),
                doubt: row.number(&POINT_DOUBT).unwrap_or(general),
                cover_doubt: if of(&COVER) + of(&GROWTH) > 0.0 { cover_doubt } else { 0.0 },
                name: row.text(&NAME).to_owned(),
            }
        })
        .collect();
    sort(&mut points, |point| [point.at, 0.0]);
    points
}
