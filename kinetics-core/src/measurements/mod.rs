//! What was observed, typed: runs with a temperature and what tells their rate.

mod cells;
mod progress;
mod rates;

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
}
