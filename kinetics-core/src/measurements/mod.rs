//! What was observed, typed: runs with a temperature and what tells their rate.

mod cells;
mod groups;
mod progress;
mod rates;

pub use groups::{Grouped, grouped};
pub use progress::{AboutSignals, Point, ProgressRun, ProgressRuns, progress};
pub use rates::{LeftOut, Measurand, Rates, Run, rates};

use crate::quantity::Kelvin;

/// One run as a law sees it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Observation {
    /// Temperature of the run.
    pub temperature: Kelvin,
    /// ln of its rate constant, in the base unit of the study.
    pub ln_rate: f64,
    /// Standard deviation of that logarithm, where an error is stated.
    pub ln_sd: Option<f64>,
    /// How much it counts as a run of its own: 1, or 1/m where its group has m of them.
    pub share: f64,
}

impl Observation {
    /// A run of its own.
    pub fn new(temperature: Kelvin, ln_rate: f64, ln_sd: Option<f64>) -> Self {
        Self { temperature, ln_rate, ln_sd, share: 1.0 }
    }
}

/// How many runs of their own there are among observations: runs, or groups where they share one.
pub fn independent_runs(observations: &[Observation]) -> usize {
    libm::round(observations.iter().map(|o| o.share).sum()) as usize
}
