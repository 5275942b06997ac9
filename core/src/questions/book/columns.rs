//! The book itself: a row for each point, as a level book has them.

use super::flags;
use crate::quantity::unit::Quantity;
use crate::question::field::{Aid, Booking, Field, Opt, Pause};
use crate::question::site;

/// Longest staff that is read, metres.
pub const LONGEST: f64 = 20.0;
const READINGS: &str = "no staff is longer, and one held head down has its own column";
/// Most rows of a book.
const MOST: usize = 20_000;
const MORE: &str = "More of this point";

const fn staff(name: &'static str, label: &'static str, example: &'static str) -> Field {
    Field::number(name, label, Quantity::Height, example).range(0.0, LONGEST, READINGS).aid(Aid::Staff)
}

pub const POINT: Field = Field::text("point", "Point", 24, "it must fit beside its level", "CP 3")
    .aid(Aid::Numbered)
    .help("Its name. Rows of one point that follow each other are one point.");
pub const BACK: Field = staff("back", "Back sight", "1.234").help("To the point of known level: it begins a setup.");
pub const INTER: Field = staff("inter", "Inter sight", "0.985").help("To a point that carries nothing on.");
pub const FORE: Field = staff("fore", "Fore sight", "2.310")
    .help("To the point that carries the level on: it ends the setup. The next back sight may stand in the same row.");
pub const DISTANCE: Field = Field::number("distance", "Distance", Quantity::Distance, "35 m")
    .range(site::NEAREST, site::FARTHEST, site::DISTANCES)
    .help("From the level to the staff. Paces are good enough. Where a row has a fore and a back sight: of the fore sight.");
pub const BACK_DISTANCE: Field = Field::number("back_distance", "Back distance", Quantity::Distance, "30 m")
    .range(site::NEAREST, site::FARTHEST, site::DISTANCES)
    .help("Where a row has a fore and a back sight.")
    .under(MORE);
pub const UPPER: Field = staff("upper", "Upper wire", "1.306")
    .help("With the lower one it gives the distance and checks the reading.")
    .under(MORE);
pub const LOWER: Field =
    staff("lower", "Lower wire", "1.162").help("The reading then counts as the mean of the three.").under(MORE);
pub const INVERTED: Field = Field::choice(
    "inverted",
    "Head down?",
    &[Opt { value: "no", label: "no" }, Opt { value: "yes", label: "yes: held up to a soffit" }],
    "it is or it is not",
)
.help("The reading is then taken as negative: never type a minus.")
.default("no")
.under(MORE);
pub const REMARK: Field =
    Field::text("remark", "Remark", 60, "it must fit the sheet", "on the kerb").help("What to know later.").under(MORE);
pub const TIME: Field = Field::text("time", "Time", 24, "a date and a time are no longer", "14:05")
    .aid(Aid::Stamped)
    .help("When it was read: a long pause within a setup is then seen.")
    .under(MORE);
pub const MARK: Field = Field::number("mark", "Known level", Quantity::Height, "212.345 m")
    .range(-12_000.0, 9000.0, "the ground lies between the deepest sea and the highest mountain")
    .help("Where the point is a mark: the run begins with it, is compared with it on the way, or closes on it.")
    .under(MORE);
pub const TOLERANCE: Field = Field::number("tolerance", "Tolerance", Quantity::SmallLength, "3 mm")
    .range(0.00001, 10.0, "a hundredth of a millimetre is finer than any staff, ten metres is no tolerance")
    .help("For an intermediate point. Left empty: as given for all.")
    .under(MORE);

/// In the order of the page.
pub const COLUMNS: &[Field] =
    &[POINT, BACK, INTER, FORE, DISTANCE, BACK_DISTANCE, UPPER, LOWER, INVERTED, REMARK, TIME, MARK, TOLERANCE];

/// A table of such rows; a second run has one too.
pub const fn table(name: &'static str, label: &'static str) -> Field {
    Field::table(name, label, COLUMNS, "row").rows(MOST, "no day holds more")
}

const BOOKING: Booking = Booking {
    rows: flags::booked,
    pause: Some(Pause {
        after: flags::PAUSE,
        text: "Has the level moved since? Read the back sight again before going on.",
        field: super::fields::REREAD.name,
    }),
};
pub const BOOK: Field = table("book", "Level book")
    .booking(&BOOKING)
    .help("One row for each point: a back sight, an intermediate or a fore sight; a change point may have fore and back in one row.")
    .example("BM 4\t1.216\t\t\t31\nCP 1\t1.386\t\t2.508\t30\t28\nkerb\t\t1.625\t\t45\nBM 7\t\t\t1.196\t29")
    .required();
