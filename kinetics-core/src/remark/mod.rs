//! What the tool notices by itself: each remark one sentence with its remedy, fired by one
//! numeric trigger.
//!
//! A remark is one function in a file of its subject and one line in [`CHECKS`].

mod answers;
mod law;
mod scatter;
mod stated;

use serde::Serialize;

use crate::answer::{Answer, Basis};
use crate::measurements::Observation;
use crate::numeric::sorting::sort_by;
use crate::quantity::JoulesPerMole;

/// How much a remark weighs.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Severity {
    /// Answers of some kind are refused.
    Stop,
    /// Answers may mislead.
    Caution,
    /// Good to know.
    Note,
}

/// Something noticed.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Remark {
    /// Which remark.
    pub code: String,
    /// How much it weighs.
    pub severity: Severity,
    /// What was noticed and what it does to the answers.
    pub sentence: String,
    /// What to do about it.
    pub remedy: String,
}

impl Remark {
    /// A remark of a sentence and a remedy.
    pub fn new(
        code: &str,
        severity: Severity,
        sentence: impl Into<String>,
        remedy: impl Into<String>,
    ) -> Self {
        Self { code: code.into(), severity, sentence: sentence.into(), remedy: remedy.into() }
    }
}

/// What the checks look at.
#[derive(Debug, Clone, Copy)]
pub struct Evidence<'a> {
    /// Runs behind the law; none for a known law.
    pub observations: &'a [Observation],
    /// How a run is named in a sentence, one a run.
    pub run_names: &'a [String],
    /// Temperatures were taken to be in K.
    pub read_as_kelvin: bool,
    /// An activation energy that the user states for comparison.
    pub stated_activation_energy: Option<JoulesPerMole>,
    /// Law and surroundings.
    pub basis: &'a Basis,
    /// Answers given, one a question.
    pub answers: &'a [Answer],
}

type Check = fn(&Evidence) -> Option<Remark>;

const CHECKS: [Check; 15] = [
    stated::celsius_as_kelvin,
    stated::log_base,
    stated::unit_of_energy,
    law::negative_activation_energy,
    law::two_points,
    law::curvature,
    law::influence,
    law::implausible_pre_exponential_factor,
    law::diffusion_limit,
    scatter::excess_scatter,
    scatter::lack_of_fit,
    scatter::weighting,
    scatter::thermometer,
    answers::extrapolation,
    answers::doubling_rule,
];

/// All remarks that fire, the weightiest first.
pub fn remarks(evidence: &Evidence) -> Vec<Remark> {
    let mut found: Vec<Remark> = CHECKS.iter().filter_map(|check| check(evidence)).collect();
    sort_by(&mut found, |remark| f64::from(remark.severity as u8));
    found
}
