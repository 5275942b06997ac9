//! Bias and doubt, kept apart: how parts add up, and how a sum stands to a limit.

use serde::Serialize;

/// How a decision stands to its limit.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[cfg_attr(feature = "ts", derive(tsify::Tsify))]
#[serde(rename_all = "snake_case")]
pub enum State {
    /// Bias and doubt together are inside the limit.
    Within,
    /// The limit lies inside the doubt.
    Doubtful,
    /// Outside the limit, whatever the doubt hides.
    Beyond,
    /// Not enough is known.
    Unknown,
}

/// What is known of an error: its bias, and 95 % half-widths to either side. SI, any quantity.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Estimate {
    /// What is expected, with its sign.
    pub bias: f64,
    /// How far the truth may lie below the bias, ≥ 0.
    pub below: f64,
    /// How far the truth may lie above the bias, ≥ 0.
    pub above: f64,
}

impl Estimate {
    /// The same doubt to either side.
    pub fn even(bias: f64, half: f64) -> Estimate {
        Estimate { bias, below: half, above: half }
    }
    /// Sum of independent parts: biases add, doubts add in squares, each side for itself (JCGM 100, 5.1.2).
    pub fn sum<'a>(parts: impl IntoIterator<Item = &'a Estimate>) -> Estimate {
        let (mut bias, mut below, mut above) = (0.0, 0.0, 0.0);
        for part in parts {
            bias += part.bias;
            below += part.below * part.below;
            above += part.above * part.above;
        }
        Estimate { bias, below: below.sqrt(), above: above.sqrt() }
    }
    /// The greater side of the doubt.
    pub fn half(&self) -> f64 {
        self.below.max(self.above)
    }
    /// |bias| + doubt: the farther end of the range from zero.
    pub fn worst(&self) -> f64 {
        (self.bias + self.above).max(self.below - self.bias)
    }
    /// The two sides of the doubt differ by more than a tenth.
    pub fn lopsided(&self) -> bool {
        (self.above - self.below).abs() > 0.1 * self.half()
    }
    /// What is left once the bias is taken off as a correction.
    pub fn corrected(&self) -> Estimate {
        Estimate { bias: 0.0, ..*self }
    }
    /// How it stands to `allowed`: accepted when [`Self::worst`] ≤ `allowed`, refused when the nearer end is beyond it.
    pub fn state(&self, allowed: f64) -> State {
        if self.worst() <= allowed {
            State::Within
        } else if self.bias - self.below > allowed || self.bias + self.above < -allowed {
            State::Beyond
        } else {
            State::Doubtful
        }
    }
}
