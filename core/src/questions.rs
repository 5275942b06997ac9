//! Every question, in the page's order.

mod against;
mod book;
mod clearance;
mod horizon;
mod one_mark;
mod peg;
mod reading;
mod sight;

use crate::question::Question;

/// All of them.
pub const ALL: &[&Question] = &[
    &sight::QUESTION,
    &reading::QUESTION,
    &book::QUESTION,
    &peg::QUESTION,
    &one_mark::QUESTION,
    &clearance::QUESTION,
    &horizon::QUESTION,
];
