//! What the book asks besides its rows.

use crate::limits;
use crate::quantity::unit::Quantity;
use crate::question::field::{Aid, Field, Opt};
use crate::question::site;
use crate::questions::sight;

const LEVELS: (f64, f64, &str) =
    (-12_000.0, 9000.0, "the ground lies between the deepest sea and the highest mountain");
const CLOSING: &str = "Closing";
const LOOK: &str = "What to look out for";

pub const START: Field = Field::number("start", "Level of the first mark", Quantity::Height, "212.345 m")
    .range(LEVELS.0, LEVELS.1, LEVELS.2)
    .help("Without it every level is a height over the first mark. A known level in the first row counts too.")
    .default("0 m");
pub const CLOSE: Field = Field::number("close", "Level of the closing mark", Quantity::Height, "211.498 m")
    .range(LEVELS.0, LEVELS.1, LEVELS.2)
    .help("Enter it once the last fore sight stands on it; of the first mark again where the run returns to it.")
    .under(CLOSING);
#[allow(clippy::indexing_slicing, reason = "worked out and checked while compiling")]
const LIMITS: &[Opt] = &{
    let own = Opt { value: "own_km", label: "my own, mm √km" };
    let mut options = [own; limits::CLOSURES.len() + 2];
    options[1] = Opt { value: "own_setups", label: "my own, mm √setups" };
    let mut i = 0;
    while i < limits::CLOSURES.len() {
        options[i + 2] = Opt { value: limits::CLOSURES[i].name, label: limits::CLOSURES[i].label };
        i += 1;
    }
    options
};
pub const LIMIT: Field = Field::choice("limit", "Limit of the misclosure", LIMITS, "they are the limits we hold")
    .help("By the square root of the length in kilometres or of the number of setups. Your specification governs.")
    .default("site_work")
    .under(CLOSING);
pub const OWN: Field = Field::number("own_limit", "My own limit", Quantity::SmallLength, "12 mm")
    .range(0.00001, 10.0, "a hundredth of a millimetre is finer than any staff, ten metres is no limit")
    .help("For one kilometre, or for one setup. Counts where my own is chosen.")
    .under(CLOSING);
pub const LENGTH: Field = Field::number("length", "Length of the run", Quantity::Distance, "1.5 km")
    .range(site::NEAREST, 1e7, "no run is longer")
    .help("Left empty: the sum of the distances booked.")
    .under(CLOSING);
pub const COUNTS: Field = Field::choice(
    "counts",
    "Levels that count",
    &[Opt { value: "booked", label: "as booked" }, Opt { value: "corrected", label: "corrected" }],
    "they are shown side by side, and one of them is judged",
)
.help("Corrected: for curvature, refraction and collimation, where the distances are known.")
.default("booked")
.under(CLOSING);
pub const ADJUST: Field = Field::choice(
    "adjust",
    "Spread the misclosure",
    &[
        Opt { value: "none", label: "no" },
        Opt { value: "length", label: "by length" },
        Opt { value: "setups", label: "by setups" },
    ],
    "they are the two usual ways",
)
.help("Refused beyond the limit, unless a reason is given: it would spread a blunder into good marks.")
.default("none")
.under(CLOSING);
pub const REASON: Field =
    Field::text("reason", "Reason to adjust all the same", 120, "it must fit the sheet", "agreed with the engineer")
        .help("Stands on the sheet.")
        .under(CLOSING);
pub const REREAD: Field = Field::number("reread", "Back sight read again", Quantity::Height, "1.234")
    .range(0.0, super::columns::LONGEST, "no staff is longer")
    .help("After a pause or a knock: that of the setup that stands. Says whether the level has moved.")
    .aid(Aid::Staff);
pub const STADIA: Field = Field::number("stadia", "Stadia constant", Quantity::Factor, "100")
    .range(10.0, 1000.0, "levels have 50, 100 or 333, and little else")
    .help("Distance over staff interval between the outer wires.")
    .default("100")
    .under(site::LEVEL);
pub const SECTION: Field = Field::number("section", "First section of the staff", Quantity::Height, "1.4 m")
    .range(0.1, 20.0, "it is a part of a staff")
    .help("Up to the first joint. Left empty: not asked after.")
    .under(sight::GROUND);
pub const LOWEST: Field = Field::number("lowest", "Lowest reading", Quantity::Height, "0.3 m")
    .range(0.0, 10.0, "it is a height over the ground")
    .help("Below it the line runs through the worst air: never below 0.2 m (Japan, grade 1, read), 0.3 to 0.5 m (common practice).")
    .default("0.3 m")
    .under(sight::GROUND);
pub const SLOPE: Field = Field::number("ground_slope", "Slope of the ground", Quantity::Gradient, "5 %")
    .range(-2.0, 2.0, "steeper than two in one is no ground to level over")
    .help("Where the level stands now: + uphill ahead. Says how long both sights may be.")
    .under(sight::GROUND);
pub const SIGHT_LIMIT: Field = Field::number("sight_limit", "Longest sight", Quantity::Distance, "60 m")
    .range(site::NEAREST, site::FARTHEST, site::DISTANCES)
    .help("By your specification (60 m: common practice, no source).")
    .default("60 m")
    .under(LOOK);
pub const IMBALANCE: Field =
    Field::number("imbalance_limit", "Most that two sights may differ", Quantity::Distance, "10 m")
        .range(0.0, site::FARTHEST, "it is the difference of two distances")
        .help("Back and fore sight of a setup: 10 m for second order (US Army EN0593, read).")
        .default("10 m")
        .under(LOOK);
pub const WIRES: Field =
    Field::number("wire_limit", "Most that half intervals may differ", Quantity::SmallLength, "3 mm")
        .range(0.0, 1.0, "it is the difference of two parts of a staff")
        .help("Of three wires (3 mm: common practice, no source).")
        .default("3 mm")
        .under(LOOK);
pub const TOLERANCE: Field = Field::number("inter_tolerance", "Tolerance of intermediate points", Quantity::SmallLength, "5 mm")
    .range(0.00001, 10.0, "a hundredth of a millimetre is finer than any staff, ten metres is no tolerance")
    .help("Bias and doubt together. A point may have its own, in its row (5 mm: slabs and drains, common practice, no source).")
    .default("5 mm")
    .under(LOOK);
