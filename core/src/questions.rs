//! Every question, in the page's order.

mod clearance;
mod horizon;
mod reading;
mod sight;

use crate::question::Question;

/// All of them.
pub const ALL: &[&Question] = &[&sight::QUESTION, &reading::QUESTION, &clearance::QUESTION, &horizon::QUESTION];
