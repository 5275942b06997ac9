//! Along the run, setup by setup: the balance since the last mark.

use super::rows::{Book, Spot};
use crate::doubt::Estimate;
use crate::levelling::balance::Balance;
use crate::sight::budget::Budget;

/// The run after a setup that has its fore sight.
#[derive(Clone, Copy)]
pub struct Step {
    /// What the balance since the last mark is worth.
    pub worth: Estimate,
    /// From the first mark along the sights, metres; of the setups whose distances are known.
    pub along: f64,
    /// Since the last mark.
    pub balance: Balance,
    /// The balance with which the next setup begins: nothing, after a mark.
    pub next: Balance,
}

pub struct Running {
    pub steps: Vec<Step>,
    /// Since the last mark, to where the run has come: where it ends on a mark, to that mark.
    pub now: Balance,
    /// Where that mark is.
    pub since: Option<Spot>,
    /// Of the whole run, whatever marks it passes.
    pub whole: Balance,
    pub budget: Budget,
}

pub fn running(book: &Book, budget: &Budget) -> Running {
    let (mut now, mut whole) = (Balance::default(), Balance::default());
    let mut since = book.places.first().map(|places| places.back);
    let mut steps = Vec::with_capacity(book.places.len());
    let setups = book.run.setups.len();
    for (i, (setup, places)) in book.run.setups.iter().zip(&book.places).enumerate() {
        let (Some(fore), Some(spot)) = (setup.fore, places.fore) else { continue };
        now.add(setup.back, fore);
        whole.add(setup.back, fore);
        let (balance, worth) = (now, now.worth(budget).total());
        if book.mark(spot).is_some() && i + 1 < setups {
            (now, since) = (Balance::default(), Some(spot));
        }
        steps.push(Step { balance, worth, along: whole.length, next: now });
    }
    Running { steps, now, since, whole, budget: *budget }
}
