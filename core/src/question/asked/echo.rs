//! What was entered, in everyday words or in the other unit: so that a slip is heard.

use crate::constants::{PACE_M, WALK_M_PER_MIN};
use crate::quantity::show::{Show, significant};
use crate::quantity::unit::{Quantity, Scale, Unit};

/// The echo of a value beside its field; empty where there is nothing to add.
pub fn words(quantity: Quantity, si: f64, unit: &Unit, show: Show) -> String {
    let metres = |places: i32| format!("{}\u{a0}m", significant(si, places));
    match quantity {
        Quantity::Distance => {
            let everyday = walk(si);
            if unit.symbol == "m" { everyday } else { format!("{}, {everyday}", metres(4)) }
        }
        Quantity::Height if unit.symbol != "m" => metres(5),
        Quantity::SmallLength if unit.symbol != "mm" => format!("{}\u{a0}mm", significant(si * 1000.0, 3)),
        Quantity::Radius if unit.symbol != "km" => format!("{}\u{a0}km", significant(si / 1000.0, 5)),
        Quantity::Collimation => show.tilt(si),
        Quantity::Gradient => slope(si),
        Quantity::Latitude => show.position(si) + if si < 0.0 { " south" } else { " north" },
        Quantity::Longitude => show.position(si) + if si < 0.0 { " west" } else { " east" },
        Quantity::Refraction if unit.scale != Scale::Ratio(1.0, 1.0) => format!("k = {}", show.k(si)),
        _ => String::new(),
    }
}

/// A distance as one walks it: "about 4 minutes' walk, 400 paces".
fn walk(si: f64) -> String {
    let paces = significant(libm::round(si / PACE_M), if si < 75.0 { 3 } else { 2 });
    let minutes = libm::round(si / WALK_M_PER_MIN);
    match minutes {
        m if m < 1.0 => format!("about {paces} paces"),
        m if m < 2.0 => format!("about a minute's walk, {paces} paces"),
        m if m < 90.0 => format!("about {} minutes' walk, {paces} paces", significant(m, 2)),
        m => format!("about {} hours' walk", significant(m / 60.0, 2)),
    }
}

/// A slope of the ground: which way, and one in how many.
fn slope(si: f64) -> String {
    let way = match si {
        s if s > 0.0 => "uphill",
        s if s < 0.0 => "downhill",
        _ => return "level".to_owned(),
    };
    format!("{way}, 1 in {}", significant(1.0 / si.abs(), 3))
}
