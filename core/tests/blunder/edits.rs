//! Every single edit of the listed kinds that a run allows, enumerated plainly: the digits are those of the written number.

use farstaff::levelling::Run;
use farstaff::levelling::blunder::{End, Known, Place, Side, Slip};

/// An edit, what it moves the closing level by, and the standard deviation of that where its size is unknown.
pub struct Edit {
    pub slip: Slip,
    pub moved: f64,
    pub spread: f64,
}

/// What a run came out too high by.
pub fn closes(run: &Run) -> f64 {
    let rises = run.setups.iter().map(|setup| setup.back.reading - setup.fore.unwrap().reading);
    run.start + rises.sum::<f64>() - run.close.unwrap()
}

/// Digits of a number in millimetres, the last first, the metre always among them.
fn digits(number: f64) -> Vec<u32> {
    let mut rest = (number.abs() * 1000.0).round() as u32;
    let mut digits = Vec::with_capacity(8);
    while rest > 0 || digits.len() < 4 {
        digits.push(rest % 10);
        rest /= 10;
    }
    digits
}

fn number(digits: &[u32], sign: f64) -> f64 {
    sign * f64::from(digits.iter().rev().fold(0, |number, digit| 10 * number + digit)) / 1000.0
}

/// The number with two neighbouring digits swapped, in every way that changes it.
pub fn swapped(of: f64) -> Vec<f64> {
    let written = digits(of);
    let swap = |i: usize| {
        let mut other = written.clone();
        other.swap(i, i + 1);
        (other != written).then(|| number(&other, of.signum()))
    };
    (0..written.len() - 1).filter_map(swap).collect()
}

/// The number with one digit another, in every way.
pub fn miscopied(of: f64) -> Vec<f64> {
    let written = digits(of);
    let mut others = vec![];
    for (i, digit) in written.iter().enumerate() {
        for other in (0..10).filter(|other| other != digit) {
            let mut changed = written.clone();
            changed[i] = other;
            others.push(number(&changed, of.signum()));
        }
    }
    others
}

/// Every edit.
pub fn edits(run: &Run, known: &Known) -> Vec<Edit> {
    let mut edits = vec![];
    let mut about = |slip, moved, spread: f64| edits.push(Edit { slip, moved, spread: spread.abs() });
    for step in [1.0, 0.1, 0.01, -1.0, -0.1, -0.01] {
        about(Slip::Round(step), step, 0.0);
    }
    let (mut plain, mut squares, mut above) = (0.0, 0.0, vec![0.0; known.joints.len()]);
    let mut undrawn = vec![];
    for (setup, booked) in run.setups.iter().enumerate() {
        let fore = booked.fore.unwrap();
        for (side, sight, lift) in [(Side::Back, booked.back, 1.0), (Side::Fore, fore, -1.0)] {
            let (at, was, distance) = (Place { setup, side }, sight.reading, sight.distance.unwrap());
            for reading in swapped(was).into_iter().filter(|reading| reading.abs() <= known.staff) {
                about(Slip::Swapped { at, reading }, lift * (was - reading), 0.0);
            }
            about(Slip::Inverted(at), lift * 2.0 * was, 0.0);
            for reading in [was - distance / 200.0, was + distance / 200.0] {
                if reading.abs() <= known.staff {
                    let spread = distance / 200.0 * known.distance_doubt / 2.0;
                    about(Slip::Wire { at, reading }, lift * (was - reading), spread);
                }
            }
            plain += lift * distance;
            squares += lift * distance * distance;
            for (joint, lever) in known.joints.iter().zip(&mut above) {
                *lever += if was.abs() > *joint { lift * was.signum() } else { 0.0 };
            }
            // All drawn sections of the tests' staff are equally long.
            if was > known.joints[1] && !undrawn.contains(&side) {
                undrawn.push(side);
                let section = known.joints[1] - known.joints[0];
                about(Slip::Undrawn { section, side }, lift * section, 0.0);
            }
        }
        about(Slip::Exchanged(setup), 2.0 * (booked.back.reading - fore.reading), 0.0);
        for (inter, sight) in booked.inters.iter().enumerate() {
            about(Slip::Intermediate { setup, inter }, sight.reading - fore.reading, 0.0);
        }
    }
    for (end, value, lift) in [(End::Start, run.start, 1.0), (End::Close, run.close.unwrap(), -1.0)] {
        for (swapped, levels) in [(true, swapped(value)), (false, miscopied(value))] {
            for level in levels {
                about(Slip::Mark { end, level, swapped }, lift * (value - level), 0.0);
            }
        }
    }
    for (joint, lever) in known.joints.iter().zip(above) {
        // It slides together and never apart.
        if lever * closes(run) > 0.0 {
            about(Slip::Slipped { joint: *joint, by: 0.0 }, 0.0, lever * 0.015);
        }
    }
    about(Slip::Collimation(0.0), 0.0, plain * known.collimation.half() / 2.0);
    about(Slip::Curvature(0.0), 0.0, squares * known.bend.half() / 2.0);
    edits
}

/// The run with the slip put right; `None` where the book does not show where it was.
pub fn applied(run: &Run, slip: &Slip) -> Option<Run> {
    let mut run = run.clone();
    let mut set = |at: &Place, change: &dyn Fn(f64) -> f64| {
        let setup = &mut run.setups[at.setup];
        let sight = if at.side == Side::Back { &mut setup.back } else { setup.fore.as_mut().unwrap() };
        sight.reading = change(sight.reading);
    };
    match slip {
        Slip::Swapped { at, reading } | Slip::Wire { at, reading } => set(at, &|_| *reading),
        Slip::Inverted(at) => set(at, &|was| -was),
        Slip::Exchanged(setup) => {
            let setup = &mut run.setups[*setup];
            std::mem::swap(&mut setup.back, setup.fore.as_mut().unwrap());
        }
        Slip::Intermediate { setup, inter } => {
            let setup = &mut run.setups[*setup];
            std::mem::swap(&mut setup.inters[*inter], setup.fore.as_mut().unwrap());
        }
        Slip::Mark { end: End::Start, level, .. } => run.start = *level,
        Slip::Mark { end: End::Close, level, .. } => run.close = Some(*level),
        Slip::Slipped { joint, by } => {
            each(&mut run, |was, _| if was.abs() > *joint { was - by * was.signum() } else { was })
        }
        Slip::Collimation(tilt) => each(&mut run, |was, distance| was - tilt * distance),
        Slip::Curvature(bend) => each(&mut run, |was, distance| was - bend * distance * distance),
        Slip::Round(_) | Slip::Undrawn { .. } => return None,
    }
    Some(run)
}

/// Changes every reading that carries on, by itself and its distance.
pub fn each(run: &mut Run, change: impl Fn(f64, f64) -> f64) {
    for setup in &mut run.setups {
        for sight in [&mut setup.back, setup.fore.as_mut().unwrap()] {
            sight.reading = change(sight.reading, sight.distance.unwrap_or(0.0));
        }
    }
}
