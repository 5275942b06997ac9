//! How many digits the levels of a book have.

use crate::quantity::show::{Show, Shown, places};
use crate::quantity::unit::{Quantity, Unit};

/// The unit of the levels and their places: as many as were read, so that a pencil finds the same.
#[derive(Clone, Copy)]
pub struct Digits {
    pub unit: Unit,
    pub places: usize,
    pub show: Show,
}

impl Digits {
    /// Enough for every one of `readings`, metres; a mean of three wires has a digit more than its wires.
    pub fn of(show: Show, readings: impl Iterator<Item = f64>, means: bool) -> Digits {
        let unit = Quantity::Height.usual(show.0);
        let (least, most) = if unit.symbol == "m" { (3, 5) } else { (2, 4) };
        let mut places = if means { least + 1 } else { least };
        for reading in readings {
            let value = unit.from_si(reading).unwrap_or(0.0);
            while places < most && !whole(value, places) {
                places += 1;
            }
        }
        Digits { unit: *unit, places, show }
    }
    /// A level or a reading, without its unit.
    pub fn text(self, si: f64) -> String {
        places(self.unit.from_si(si).unwrap_or(0.0), self.places)
    }
    pub fn shown(self, si: f64) -> Shown {
        Shown { text: self.text(si), unit: self.unit.symbol }
    }
    /// A corrected or adjusted level: one digit more at least than a millimetre has.
    pub fn fine(self, si: f64) -> String {
        let finer = if self.unit.symbol == "m" { 4 } else { 3 };
        Digits { places: self.places.max(finer), ..self }.text(si)
    }
}

/// `value` has no more places than that.
fn whole(value: f64, places: usize) -> bool {
    let scaled = (0..places).fold(value, |v, _| v * 10.0);
    (scaled - libm::round(scaled)).abs() < 1e-6
}
