//! Three wires: the two outer ones check the middle one and give the distance.

/// The wires as read on one staff, metres.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Wires {
    /// The upper one.
    pub upper: f64,
    /// The middle one.
    pub middle: f64,
    /// The lower one.
    pub lower: f64,
}

impl Wires {
    /// The mean of the three, which is the reading booked.
    ///
    /// (U + M + L)/3. It differs from the middle one by a third of the difference of the half intervals (US Army
    /// FM 3-34.331, table 7-1, read).
    pub fn mean(&self) -> f64 {
        (self.upper + self.middle + self.lower) / 3.0
    }
    /// The middle one less the mean: (2M − U − L)/3.
    pub fn off(&self) -> f64 {
        (2.0 * self.middle - self.upper - self.lower) / 3.0
    }
    /// The half intervals |U − M| and |M − L|: equal where all three were read well, whichever way up the staff was.
    pub fn halves(&self) -> [f64; 2] {
        [(self.upper - self.middle).abs(), (self.middle - self.lower).abs()]
    }
    /// How much the half intervals differ: |U + L − 2M|.
    pub fn unequal(&self) -> f64 {
        (self.upper + self.lower - 2.0 * self.middle).abs()
    }
    /// The middle one lies between the outer ones.
    pub fn in_order(&self) -> bool {
        (self.upper - self.middle) * (self.middle - self.lower) > 0.0
    }
    /// Distance from the level to the staff: the staff interval |U − L| times the stadia `constant`.
    ///
    /// For a staff held upright and a level that focuses inside, whose additive constant is nothing (common practice).
    pub fn distance(&self, constant: f64) -> f64 {
        (self.upper - self.lower).abs() * constant
    }
}
