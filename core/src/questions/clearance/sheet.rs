//! Results, tables and the working.

use super::case::{Case, View};
use super::decide::percent;
use super::*;
use crate::order::sort;
use crate::quantity::Metres;
use crate::quantity::show::{Round, Show, Shown, places, significant};
use crate::question::answer::{Doubt, Table};
use crate::question::pencil::line;
use std::f64::consts::PI;

/// Points of the table at most: the worst ones where there are more.
const SHOWN: usize = 60;

pub fn fill(asked: &Asked, course: &Course, case: &Case, answer: &mut Answer) {
    let show = asked.show();
    let half = case.half(case.day.worst);
    results(case, half, show, answer);
    whereabouts(asked, course, show, answer);
    answer.tables.push(remedies(case, half, show));
    answer.tables.push(points(case, show));
    course.working(&mut answer.working);
    working(case, answer);
    if let Some(worst) = case.worst() {
        let bare = case.line.least_when_cut(case.profile(), case.day.worst, Metres(worst.ground));
        if let Some(least) = bare.filter(|_| worst.top > worst.ground) {
            let won = least.clearance.0 - case.day.least;
            answer.note(format!(
                "Cutting what stands at {} would win {}: then the next point rules.",
                show.distance(worst.at, Round::Near),
                show.metres(won, won)
            ));
        }
    }
}

fn results(case: &Case, half: f64, show: Show, answer: &mut Answer) {
    let none = || Shown { text: "none".to_owned(), unit: "" };
    let plain = |text: String| Shown { text, unit: "" };
    let of = |promise: &Promised| promise.meaning.to_owned();
    answer.result(
        &LEAST,
        Some(case.day.least),
        show.metres(case.day.least, half),
        Some(Doubt { value: half, text: format!("± {}", show.metres(half, half).text) }),
        of(&LEAST),
    );
    let at = case.worst().map_or(0.0, |p| p.at);
    answer.result(&LEAST_AT, Some(at), show.distance(at, Round::Near), None, of(&LEAST_AT));
    for (promise, view) in [(&CHANCE_DAY, &case.day), (&CHANCE_NIGHT, &case.night)] {
        let k = format!("{}; k = {}, {}", promise.meaning, show.k(view.k.value.0), view.source);
        answer.result(promise, Some(view.chance), plain(percent(view.chance)), None, k);
    }
    let grazing = case.line.grazing_k(case.needed(), Metres(0.0));
    match grazing {
        Some(k) => answer.result(&K_GRAZING, Some(k.0), plain(show.k(k.0)), None, of(&K_GRAZING)),
        None => answer.result(&K_GRAZING, None, none(), None, "no k within reason makes it just clear".to_owned()),
    }
    let raises = raises(case, 0.0);
    for (promise, raise) in [&RAISE_A, &RAISE_B, &RAISE_BOTH].into_iter().zip(raises) {
        match raise {
            Some(raise) => answer.result(promise, Some(raise), show.metres(raise, raise), None, of(promise)),
            None => answer.result(promise, None, none(), None, "no height there makes it clear".to_owned()),
        }
    }
    answer.result(&DOUBT, Some(half), show.metres(half, half), None, of(&DOUBT));
    let shares = case.doubt(&case.day, case.day.worst).map_or([0.0; 3], |p| p.shares());
    for (promise, share) in [&SHARE_GROUND, &SHARE_COVER, &SHARE_K].into_iter().zip(shares) {
        let shown = Shown { text: significant(share * 100.0, 2), unit: "%" };
        answer.result(promise, Some(share), shown, None, of(promise));
    }
}

/// Where the line runs, and the earth's radius there.
fn whereabouts(asked: &Asked, course: &Course, show: Show, answer: &mut Answer) {
    answer.result(&LENGTH, Some(course.s), show.height_words(course.s), None, LENGTH.meaning.to_owned());
    match course.direction() {
        Some((angle, from)) => {
            let shown = Shown { text: places(angle.0 * 180.0 / PI, 4), unit: "°" };
            answer.result(&AZIMUTH, Some(angle.0), shown, None, from.to_owned());
        }
        None => {
            let shown = Shown { text: "not known".to_owned(), unit: "" };
            answer.result(&AZIMUTH, None, shown, None, "only the positions of A and B tell".to_owned());
        }
    }
    let (radius, source) = course.radius(asked);
    let shown = Shown { text: significant(radius / 1000.0, 5), unit: "km" };
    answer.result(&RADIUS_IN_FORCE, Some(radius), shown, None, source.to_owned());
}

/// Raise A, B, both alike, for the clearance wanted and so much more.
fn raises(case: &Case, more: f64) -> [Option<f64>; 3] {
    let (ground, wanted) = (case.needed(), Metres(more));
    let line = &case.line;
    [line.raise_a(ground, wanted), line.raise_b(ground, wanted), line.raise_both(ground, wanted)]
        .map(|r| r.map(|m| m.0))
}

/// What raising costs, as expected, and with the doubt of the worst point on top.
fn remedies(case: &Case, half: f64, show: Show) -> Table {
    let (just, sure) = (raises(case, 0.0), raises(case, half));
    let cell = |raise: Option<f64>| raise.map_or("cannot".to_owned(), |m| show.metres(m, m).to_string());
    let mut rows: Vec<Vec<String>> = ["Raise A", "Raise B", "Raise both, each"]
        .iter()
        .zip(just.into_iter().zip(sure))
        .map(|(name, (just, sure))| vec![(*name).to_owned(), cell(just), cell(sure)])
        .collect();
    let cheapest = |more: f64| {
        let stands = case.line.cheapest(case.needed(), Metres(more), 1.0, 1.0);
        stands.map_or("cannot".to_owned(), |s| {
            format!("A {}, B {}", show.metres(s.a.0, s.a.0), show.metres(s.b.0, s.b.0))
        })
    };
    rows.push(vec!["Least height of stands in all".to_owned(), cheapest(0.0), cheapest(half)]);
    let columns = ["Remedy", "As expected", "Doubt of the worst point on top"].map(str::to_owned).to_vec();
    Table { name: "remedies", caption: "What would make it clear by day".to_owned(), columns, rows }
}

fn points(case: &Case, show: Show) -> Table {
    let clearance =
        |view: &View, i: usize| view.heights.get(i).zip(case.points.get(i)).map_or(0.0, |(h, p)| h[1] - p.top);
    let mut order: Vec<usize> = (0..case.points.len()).collect();
    let all = order.len();
    sort(&mut order, |i| [clearance(&case.day, *i), 0.0]);
    order.truncate(SHOWN);
    sort(&mut order, |i| [*i as f64, 0.0]);
    let row = |i: &usize| {
        let point = case.points.get(*i)?;
        let [_, height, _] = *case.day.heights.get(*i)?;
        let half = case.half(*i);
        let metre = |si: f64| show.metres(si, half.max(0.01)).text;
        let at = show.distance(point.at, Round::Near).to_string();
        let place = if point.name.is_empty() { at } else { format!("{at}, {}", point.name) };
        Some(vec![
            place,
            metre(point.top),
            metre(height),
            metre(height - point.top),
            metre(half),
            metre(clearance(&case.night, *i)),
        ])
    };
    let unit = show.metres(1.0, 1.0).unit;
    let columns = ["Point", "Top", "Line by day", "Clears by", "Doubt", "By night"].iter().enumerate();
    let columns = columns.map(|(i, c)| if i == 0 { (*c).to_owned() } else { format!("{c}, {unit}") });
    let caption = if all > SHOWN { format!("The {SHOWN} worst of {all} points") } else { "Every point".to_owned() };
    Table { name: "points", caption, columns: columns.collect(), rows: order.iter().filter_map(row).collect() }
}

/// The worst point by the handbook's parabola.
fn working(case: &Case, answer: &mut Answer) {
    let Some(worst) = case.worst() else { return };
    let (x, rest, k) = (worst.at, case.s - worst.at, case.day.k);
    let straight = case.a + (case.b - case.a) * x / case.s;
    let exact = case.day.least + worst.top;
    let curve = x * rest / (2.0 * case.r);
    // The k that the parabola needs to come to the same: that of the place, where k changes along the line.
    let here = 1.0 + (exact - straight) / curve;
    let lines = &mut answer.working;
    lines.push(line(
        "A {m} m, B {m} m, {m} m apart; the worst point {m} m from A, {m} m from B",
        &[case.a, case.b, case.s, x, rest],
    ));
    lines.push(line(
        "straight line there = {m} + ({m} − {m}) × {m} / {m} = {m} m",
        &[case.a, case.b, case.a, x, case.s, straight],
    ));
    lines.push(line("earth's bulge = x (s − x) / 2R = {m} × {m} / {m} = {m} m", &[x, rest, 2.0 * case.r, curve]));
    lines.push(line("k = {k} (from {k} to {k}), ", &[k.value.0, k.low.0, k.high.0]) + case.day.source);
    lines.push(line("line = {m} − (1 − ({k})) × {m} = {m} m", &[straight, here, curve, exact]));
    lines.push(line("clears by {m} − {m} = {m} m; {m} m wanted", &[exact, worst.top, case.day.least, worst.wanted]));
}
