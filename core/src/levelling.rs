//! A run of levels: what was read, in the order in which it was read. Metres throughout.
//!
//! [`reduce`] makes levels of it, [`wires`] readings of three wires, [`balance`] says what unequal sights have put in,
//! [`correct`] takes out what is known, [`closure`] judges the end and [`adjust`] spreads what is left.
//! [`blunder`] looks for the slip where it does not close, [`twice`] compares two books of one line and joins them by
//! [`net`], [`stop`] checks the marks left overnight.

pub mod adjust;
pub mod balance;
pub mod blunder;
pub mod closure;
pub mod correct;
pub mod net;
pub mod reduce;
pub mod slope;
pub mod stop;
pub mod twice;
pub mod wires;

/// One reading of a staff.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sight {
    /// What the level line cut off, from the foot of the staff; negative where the staff stood head down on a soffit.
    pub reading: f64,
    /// From the level to the staff, where it was measured or paced.
    pub distance: Option<f64>,
}

/// The level stands still: a back sight, intermediate sights, a fore sight.
#[derive(Debug, Clone, PartialEq)]
pub struct Setup {
    /// To the point of known level.
    pub back: Sight,
    /// To points that carry nothing on.
    pub inters: Vec<Sight>,
    /// To the point that carries the level on; none yet while the setup is being booked.
    pub fore: Option<Sight>,
}

/// From a mark of known level, setup by setup.
#[derive(Debug, Clone, PartialEq)]
pub struct Run {
    /// Level of the mark it starts from.
    pub start: f64,
    /// Known level of the mark it closes on, the same or another.
    pub close: Option<f64>,
    /// In the order observed; only the last may lack its fore sight.
    pub setups: Vec<Setup>,
}
