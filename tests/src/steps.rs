//! Counts what passed, and says so as it goes.

use crate::Result;
use std::time::Instant;

/// The tally of a run.
#[derive(Default)]
pub struct Tally {
    passed: u32,
    failed: u32,
}

impl Tally {
    /// Runs one step.
    pub fn step<T>(&mut self, name: &str, run: impl FnOnce() -> Result<T>) -> Option<T> {
        let start = Instant::now();
        let outcome = run();
        let time = start.elapsed().as_millis();
        match outcome {
            Ok(value) => {
                self.passed += 1;
                println!("  ok   {name} ({time} ms)");
                Some(value)
            }
            Err(error) => {
                self.failed += 1;
                println!("  FAIL {name} ({time} ms): {error}");
                None
            }
        }
    }

    /// Says how many passed and failed, and ends the program accordingly.
    pub fn end(self) -> ! {
        println!("{} passed, {} failed", self.passed, self.failed);
        // A run in which nothing ran proves nothing.
        std::process::exit(i32::from(self.failed > 0 || self.passed == 0))
    }
}

/// An error unless both are the same.
pub fn same<T: PartialEq + std::fmt::Debug>(found: T, wanted: T) -> Result<()> {
    if found == wanted { Ok(()) } else { Err(format!("{found:?}, wanted {wanted:?}")) }
}

/// An error unless it holds.
pub fn check(holds: bool, error: impl FnOnce() -> String) -> Result<()> {
    if holds { Ok(()) } else { Err(error()) }
}
