//! Progress curves: runs that follow a signal against time, each at one temperature.

mod gather;
mod judge;

use crate::problem::Problem;
use crate::quantity::Kelvin;
use crate::table::{ErrorKind, SignalIs, Table};
use crate::units::{ConcentrationUnit, TemperatureUnit, TimeUnit};

use super::LeftOut;

/// One measurement of a run.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// Physical line of the text.
    pub row: usize,
    /// Time since the start, s.
    pub time_seconds: f64,
    /// The signal, in the base unit of its kind where it has a unit.
    pub signal: f64,
    /// Standard deviation of the signal, where an error is stated.
    pub sd: Option<f64>,
}

/// One run.
#[derive(Debug, Clone, PartialEq)]
pub struct ProgressRun {
    /// "50 °C", or the label given; counted where several runs have the same.
    pub name: String,
    /// Physical line of its first point.
    pub row: usize,
    /// Its temperature.
    pub temperature: Kelvin,
    /// At least two points, their times from zero up and never falling.
    pub points: Vec<Point>,
}

impl ProgressRun {
    /// Whether every point states its error.
    pub fn states_errors(&self) -> bool {
        self.points.iter().all(|point| point.sd.is_some())
    }
}

/// Progress curves as they were read.
#[derive(Debug, Clone, PartialEq)]
pub struct ProgressRuns {
    /// Usable runs in the order of the text.
    pub runs: Vec<ProgressRun>,
    /// Whether the signal follows what is left or what forms.
    pub signal_is: SignalIs,
    /// Unit in which signals count here; none where nothing states it.
    pub unit: Option<ConcentrationUnit>,
    /// Unit of the times as stated; without one they are counted as seconds.
    pub time_unit: Option<TimeUnit>,
    /// Scale of the temperatures as stated or assumed.
    pub temperature_unit: Option<TemperatureUnit>,
    /// Rows left out, by the user or for what they say.
    pub left_out: Vec<LeftOut>,
    /// What could not be used, whole runs included.
    pub problems: Vec<Problem>,
    /// What was decided on the user's behalf, in sentences.
    pub choices: Vec<String>,
}

/// What the user says about signals; what is absent is inferred.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct AboutSignals {
    /// What the signal follows.
    pub signal_is: Option<SignalIs>,
    /// A signal may be negative, as with an end that is not known.
    pub may_be_negative: bool,
    /// What stated errors are.
    pub error_is: Option<ErrorKind>,
}

/// Reads runs from a table; `excluded` are physical lines that the user leaves out.
pub fn progress(table: &Table, excluded: &[LeftOut], about: AboutSignals) -> ProgressRuns {
    let gathered = gather::gather(table, excluded, about.error_is);
    judge::judge(gathered, about)
}

#[cfg(test)]
mod tests;
