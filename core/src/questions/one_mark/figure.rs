//! How high the work comes out against its distance, with the mark, the finish radius and other skies.

use super::case::Case;
use crate::quantity::show::{Round, Show};
use crate::question::figure::{Figure, Stroke};
use crate::questions::against::{Against, Line};

/// Draws it from nought to beyond the farthest work.
pub fn draw(case: &Case, show: Show) -> Figure {
    let far = case.farthest().max(case.mark);
    let finish = case.finish.filter(|s| !s.open_above).map(|s| s.to);
    let end = 1.15 * finish.filter(|d| *d < 2.0 * far).unwrap_or(0.0).max(far);
    let mut at = vec![(case.mark, format!("mark, {}", show.distance(case.mark, Round::Near)))];
    at.extend(finish.map(|d| (d, format!("finish, {}", show.distance(d, Round::Down)))));
    let here = case.error(case.farthest());
    let description = format!(
        "How much too high the work comes out against its distance. At {} it is expected to be {}, and may be anything from {} to {}; {} to either side is allowed.",
        show.distance(case.farthest(), Round::Near),
        show.small(here.bias, here.half()),
        show.small(here.bias - here.below, here.half()),
        show.small(here.bias + here.above, here.half()),
        show.entered(case.allowed),
    );
    let (sunny, night) = (|d: f64| case.under(d)[0].bias, |d: f64| case.under(d)[2].bias);
    let beside = vec![
        Line { name: "sun on hot ground", stroke: Stroke::Dashed, error: &sunny },
        Line { name: "clear calm night", stroke: Stroke::Dotted, error: &night },
    ];
    let picture = Against { error: &|d| case.error(d), end, allowed: case.allowed, at, beside };
    picture.draw(show, "Too high", ("Too high against distance", description), "drawn")
}
