//! Error against distance, with this sight, its reach and the other one.

use super::case::{Case, Count};
use crate::quantity::show::Round;
use crate::question::Asked;
use crate::question::figure::Figure;
use crate::questions::against::Against;

/// Draws it from nought to well beyond both this sight and its reach, up to twice the allowance.
pub fn draw(asked: &Asked, case: &Case) -> Figure {
    let show = asked.show();
    let reach = case.reach(Count::All);
    let flips = reach.filter(|s| !s.open_above).map(|s| s.to);
    let widest = 8.0 * case.distance;
    let end = 1.25 * case.distance.max(flips.filter(|d| *d < widest).unwrap_or(0.0)).max(case.other.unwrap_or(0.0));
    let mut at = vec![(case.distance, format!("this sight, {}", show.distance(case.distance, Round::Near)))];
    at.extend(flips.map(|d| (d, format!("reach, {}", show.distance(d, Round::Down)))));
    at.extend(case.other.map(|other| (other, format!("the other, {}", show.distance(other, Round::Near)))));
    let far = flips.map_or("no distance in view".to_owned(), |d| show.distance(d, Round::Down).to_string());
    let here = case.error(case.distance);
    let description = format!(
        "Error of the reading against the distance. At {} it is expected to be {}, and may be anything from {} to {}; {} to either side is allowed. It leaves what is allowed at: {far}.",
        show.distance(case.distance, Round::Near),
        show.small(here.bias, here.half()),
        show.small(here.bias - here.below, here.half()),
        show.small(here.bias + here.above, here.half()),
        show.entered(case.allowed),
    );
    let picture = Against { error: &|d| case.error(d), end, allowed: case.allowed, at, beside: vec![] };
    picture.draw(show, "Error", ("Error against distance", description), "parts")
}
