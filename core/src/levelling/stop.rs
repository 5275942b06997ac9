//! An overnight stop: two marks left behind, and what they say on return.
//!
//! Between two marks only their difference can be compared: it says that one moved against the other, not which. Two
//! marks of nearly the same height are no check: that one was taken for the other would not show. Source: US Army
//! Engineer School, EN0593 Surveying III (2001), overnight stops, as read: two marks a setup apart that differ by at least
//! 0.3 m, checked from midway on return.

/// Least difference of the two marks, metres: EN0593 (read).
pub const LEAST: f64 = 0.3;

/// What the marks say.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Found {
    /// They differ by less than [`LEAST`]: no check.
    NoCheck,
    /// Neither moved against the other by more than expected.
    Held,
    /// The differences agree once one mark is taken for the other.
    Exchanged,
    /// The second moved up against the first by [`Check::change`], or the first down: two marks do not tell which.
    Moved,
    /// The third point did not move against the other mark, so it was this one, up by so much, metres.
    This {
        /// The first of the two marks, or the second.
        second: bool,
        /// How far up.
        by: f64,
    },
    /// All three moved against each other.
    All,
}

/// Readings of one staff from one setup.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Readings {
    /// On the first mark, metres.
    pub first: f64,
    /// On the second.
    pub second: f64,
    /// On a third point, such as the last change point, where it was read too.
    pub third: Option<f64>,
}

/// A stop, checked.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Check {
    /// How far the second mark stood over the first on leaving, metres.
    pub before: f64,
    /// The same on return.
    pub after: f64,
    /// What it comes to.
    pub found: Found,
}

impl Check {
    /// How far the second mark went up against the first.
    pub fn change(&self) -> f64 {
        self.after - self.before
    }
}

/// Compares what was read on leaving and on return; `expected` is the most by which two honest differences disagree,
/// metres.
pub fn check(leaving: Readings, returning: Readings, expected: f64) -> Check {
    let over = |r: Readings| r.first - r.second;
    let (before, after) = (over(leaving), over(returning));
    let mut check = Check { before, after, found: Found::Held };
    let change = check.change();
    // The 0.3 m are typed in millimetres: the last bits of a difference must not refuse them.
    check.found = if before.abs() < LEAST - 1e-9 {
        Found::NoCheck
    } else if change.abs() <= expected {
        Found::Held
    } else if (after + before).abs() <= expected {
        Found::Exchanged
    } else if let Some((then, now)) = leaving.third.zip(returning.third) {
        // How far each mark went up against the third.
        let first = (now - returning.first) - (then - leaving.first);
        let second = (now - returning.second) - (then - leaving.second);
        match (first.abs() <= expected, second.abs() <= expected) {
            (true, false) => Found::This { second: true, by: second },
            (false, true) => Found::This { second: false, by: first },
            // Each within what is expected of the third, and yet more than that apart.
            (true, true) => Found::Moved,
            (false, false) => Found::All,
        }
    } else {
        Found::Moved
    };
    check
}
