//! Runs as a party brings them home, with one slip in each.

use crate::edits::{each, miscopied, swapped};
use crate::random::Random;
use farstaff::levelling::blunder::{End, Place, Side, Slip};
use farstaff::levelling::{Run, Setup, Sight};

pub const KINDS: [&str; 12] = [
    "round metre, decimetre, centimetre",
    "digits of a reading swapped",
    "staff head down",
    "back and fore exchanged",
    "intermediate taken as fore",
    "outer wire for the middle",
    "section not drawn out",
    "staff slipped at a joint",
    "one digit of a mark",
    "digits of a mark swapped",
    "collimation",
    "curvature and refraction",
];

/// As the staff is read, to the millimetre.
fn mm(metres: f64) -> f64 {
    (metres * 1000.0).round() / 1000.0
}

impl Random {
    /// Normal, by the sum of twelve: tails end at six.
    pub fn normal(&mut self) -> f64 {
        (0..12).map(|_| self.share()).sum::<f64>() - 6.0
    }
    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.share()
    }
    fn either<T>(&mut self, one: T, other: T) -> T {
        if self.below(2) == 0 { one } else { other }
    }
}

/// A run without noise: sights of 15 to 60 m, most of them balanced within metres, some always longer downhill; a soffit
/// now and then.
pub fn staffed(random: &mut Random, setups: usize) -> Run {
    let length = random.between(15.0, 50.0);
    let bent = if random.below(3) == 0 { random.between(-20.0, 20.0) } else { 0.0 };
    let soffits = random.below(10) == 0;
    let mut sight = |bent: f64| {
        let distance = (length + bent + 1.5 * random.normal()).max(5.0);
        let head_down = soffits && random.below(15) == 0;
        let reading = mm(random.between(0.2, 4.8));
        Sight { reading: if head_down { -reading } else { reading }, distance: Some((10.0 * distance).round() / 10.0) }
    };
    let mut setup = |_| {
        let (back, fore) = (sight(bent / 2.0), sight(-bent / 2.0));
        Setup { back, inters: vec![sight(0.0), sight(10.0)], fore: Some(fore) }
    };
    let mut setups: Vec<Setup> = (0..setups).map(&mut setup).collect();
    for setup in &mut setups {
        setup.inters.truncate(random.below(3));
    }
    let start = mm(random.between(2.0, 900.0));
    let rise: f64 = setups.iter().map(|setup| setup.back.reading - setup.fore.unwrap().reading).sum();
    Run { start, close: Some(mm(start + rise)), setups }
}

/// A run of 5 to 60 setups with noise of 1 to 3 mm√km and one slip of that kind, the standard deviation of its honest
/// misclosure, and the slip with what is right; `None` where the run has no place for one.
pub fn planted(random: &mut Random, kind: usize) -> Option<(Run, f64, Slip)> {
    let count = 5 + random.below(56);
    let mut run = staffed(random, count);
    let per_root_km = random.spread(0.001, 0.003);
    let mut variance = 0.0;
    let noisy = |random: &mut Random, sight: &mut Sight, exact: f64| {
        sight.reading = mm(exact + per_root_km * libm::sqrt(sight.distance.unwrap_or(0.0) / 1000.0) * random.normal());
    };
    let slip = silent(random, kind, &mut run);
    for setup in &mut run.setups {
        for sight in [&mut setup.back, setup.fore.as_mut()?] {
            // Rounding to the millimetre adds its own share.
            variance += per_root_km * per_root_km * sight.distance? / 1000.0 + 1e-6 / 12.0;
            let exact = sight.reading;
            noisy(random, sight, exact);
        }
    }
    let slip = slip.or_else(|| loud(random, kind, &mut run))?;
    // As measured by the wires.
    for setup in &mut run.setups {
        for sight in [&mut setup.back, setup.fore.as_mut()?] {
            sight.distance = sight.distance.map(|d| (10.0 * (d + 0.1 * random.normal())).round() / 10.0);
        }
    }
    Some((run, libm::sqrt(variance), slip))
}

/// Slips that go into readings before they are rounded.
fn silent(random: &mut Random, kind: usize, run: &mut Run) -> Option<Slip> {
    match kind {
        7 => {
            let (joint, by) = ([1.3, 2.55, 3.8][random.below(3)], (0.015 * random.normal()).abs());
            each(run, |was, _| if was.abs() > joint { was + by * was.signum() } else { was });
            Some(Slip::Slipped { joint, by })
        }
        10 => {
            let tilt = 10.0 / 206_264.8 * random.normal();
            each(run, |was, distance| was + tilt * distance);
            Some(Slip::Collimation(tilt))
        }
        11 => {
            let bend = 1.5 / (2.0 * 6_371_000.0) * random.normal();
            each(run, |was, distance| was + bend * distance * distance);
            Some(Slip::Curvature(bend))
        }
        _ => None,
    }
}

/// Slips of the hand or the eye, at one place.
fn loud(random: &mut Random, kind: usize, run: &mut Run) -> Option<Slip> {
    let at = Place { setup: random.below(run.setups.len()), side: random.either(Side::Back, Side::Fore) };
    let setup = &mut run.setups[at.setup];
    let lift = if at.side == Side::Back { 1.0 } else { -1.0 };
    let sight = if at.side == Side::Back { &mut setup.back } else { setup.fore.as_mut()? };
    let right = sight.reading;
    match kind {
        0 => {
            let off = [1.0, 0.1, 0.01][random.below(3)] * random.either(1.0, -1.0);
            sight.reading = mm(right + off);
            (sight.reading.abs() <= 5.0).then_some(Slip::Round(lift * off))
        }
        1 => {
            let ways: Vec<f64> = swapped(right).into_iter().filter(|other| other.abs() <= 5.0).collect();
            sight.reading = *ways.get(random.below(3))?;
            Some(Slip::Swapped { at, reading: right })
        }
        2 => {
            sight.reading = -right;
            Some(Slip::Inverted(at))
        }
        3 => {
            std::mem::swap(&mut setup.back, setup.fore.as_mut()?);
            Some(Slip::Exchanged(at.setup))
        }
        4 => {
            let inter = random.below(setup.inters.len().max(1));
            std::mem::swap(setup.inters.get_mut(inter)?, setup.fore.as_mut()?);
            Some(Slip::Intermediate { setup: at.setup, inter })
        }
        5 => {
            sight.reading = mm(right + sight.distance? / 200.0 * random.either(1.0, -1.0));
            (sight.reading.abs() <= 5.0).then_some(())?;
            Some(Slip::Wire { at, reading: right })
        }
        6 => {
            sight.reading = mm(right + 1.25);
            (right > 2.55 && sight.reading <= 5.0).then_some(Slip::Undrawn { section: 1.25, side: at.side })
        }
        8 | 9 => mark(random, kind == 9, run),
        _ => None,
    }
}

/// The level of a mark, copied wrong.
fn mark(random: &mut Random, swap: bool, run: &mut Run) -> Option<Slip> {
    let end = random.either(End::Start, End::Close);
    let level = if end == End::Start { run.start } else { run.close? };
    let ways = if swap { swapped(level) } else { miscopied(level) };
    let wrong = *ways.get(random.below(ways.len().max(1)))?;
    if end == End::Start {
        run.start = wrong
    } else {
        run.close = Some(wrong)
    }
    Some(Slip::Mark { end, level, swapped: swap })
}
