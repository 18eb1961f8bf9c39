//! Learning the law from runs: the fit under the study's scatter choice, the rivals, what the
//! other choices would give, and what an offset of the thermometer would do.

use super::assumptions::thermometer;
use super::document::Study;
use crate::answer::Refusal;
use crate::grounds::Support;
use crate::measurements::{Grouped, Observation, Rates, grouped};
use crate::quantity::Kelvin;
use crate::remark::{Remark, Severity};
use crate::rivals::{Rival, rivals};
use crate::temperature_law::{
    FittedLaw, LawError, Scatter, ScatterChoice, Settings, TemperatureLaw, fit,
};

/// A law, where it holds, and what stands beside it.
pub(super) struct Learnt {
    pub law: FittedLaw,
    pub support: Support,
    /// Other laws, excluded or not.
    pub rivals: Vec<Rival>,
    /// The same law under the other scatter choices.
    pub alternatives: Vec<FittedLaw>,
    /// The same law with the thermometer off to either side.
    pub shifted: Vec<FittedLaw>,
    /// The groups of runs that it was fitted to, where groups count.
    pub grouped: Option<Grouped>,
    /// What was decided about groups.
    pub choices: Vec<String>,
}

/// The runs as they are, and taken together by their groups.
struct Sample {
    single: Vec<Observation>,
    grouped: Option<Grouped>,
    thermometer_sd_kelvin: f64,
}

impl Sample {
    /// What is fitted under a scatter choice, and how: where stated errors are all there is, groups
    /// have nothing in common.
    fn under(&self, scatter: ScatterChoice) -> (&[Observation], Settings) {
        let grouped = self.grouped.as_ref().filter(|_| scatter != ScatterChoice::AsStated);
        let settings = Settings {
            scatter,
            thermometer_sd_kelvin: self.thermometer_sd_kelvin,
            within_groups: grouped.map(|grouped| grouped.within),
        };
        (grouped.map_or(&self.single, |grouped| &grouped.observations), settings)
    }
}

/// Fits the law under the study's scatter choice, and what stands beside it.
pub(super) fn learn(
    study: &Study,
    rates: &Rates,
    law: TemperatureLaw,
    remarks: &mut Vec<Remark>,
) -> Result<Learnt, Refusal> {
    let single: Vec<Observation> = rates.runs.iter().map(|r| r.observation).collect();
    let (thermometer_sd_kelvin, offset_kelvin) = thermometer(study)?;
    let scatter = usable_scatter(study, rates, &single, remarks);
    let temperatures: Vec<Kelvin> = single.iter().map(|o| o.temperature).collect();
    let no_errors = single.iter().all(|o| o.ln_sd.is_none());
    let sample = Sample { single, grouped: grouped(&rates.runs), thermometer_sd_kelvin };
    let (observations, settings) = sample.under(scatter);
    let fitted = fit(law, observations, settings).map_err(|error| law_refusal(&error))?;
    let choices = choices(&sample, &fitted, remarks);
    let stated = !no_errors && scatter != ScatterChoice::FromResiduals;
    let support = Support::of_runs(&temperatures, stated)
        .ok_or_else(|| law_refusal(&LawError::NothingMeasured))?;
    let rivals = rivals(&fitted, observations, settings);
    if rivals.iter().any(|r| r.delta_aicc.is_none()) {
        remarks.push(Remark::new(
            "rivals-unranked",
            Severity::Note,
            "There are too few runs to tell the temperature laws apart, so each of them is still \
             possible.",
            "Five runs or more allow a ranking.",
        ));
    }
    Ok(Learnt {
        alternatives: alternatives(&fitted, &sample),
        shifted: shifted(law, observations, settings, offset_kelvin),
        grouped: sample.grouped.filter(|_| settings.within_groups.is_some()),
        choices,
        law: fitted,
        support,
        rivals,
    })
}

/// What groups do, in a sentence; and a remark where there are too few of them.
fn choices(sample: &Sample, fitted: &FittedLaw, remarks: &mut Vec<Remark>) -> Vec<String> {
    let Some(grouped) = &sample.grouped else { return Vec::new() };
    let (runs, groups) = (sample.single.len(), grouped.groups);
    if fitted.settings.within_groups.is_none() {
        return vec![format!(
            "The {runs} runs form {groups} groups. Stated errors are taken for all the scatter there \
             is, so groups change nothing."
        )];
    }
    if fitted.scatter == Scatter::NoneKnown {
        let needed = fitted.law.parameters() + 1;
        remarks.push(Remark::new(
            "groups-few",
            Severity::Caution,
            format!(
                "The {runs} runs form {groups} group{} only: nothing tells how much groups differ, \
                 so no answer has an interval.",
                if groups == 1 { "" } else { "s" }
            ),
            format!(
                "Measure in {needed} groups or more, or ignore the column of groups if they have \
                 nothing in common."
            ),
        ));
    }
    vec![format!(
        "The {runs} runs form {groups} groups: runs of one group at one temperature are averaged, a \
         group counts as one run, and degrees of freedom count groups."
    )]
}

/// The scatter choice, or the residuals where it needs errors that are not stated.
fn usable_scatter(
    study: &Study,
    rates: &Rates,
    observations: &[Observation],
    remarks: &mut Vec<Remark>,
) -> ScatterChoice {
    let choice = study.assumed.scatter.unwrap_or_default();
    let uses_errors = choice != ScatterChoice::FromResiduals;
    if rates.errors_missing > 0 && uses_errors {
        remarks.push(Remark::new(
            "errors-incomplete",
            Severity::Caution,
            format!(
                "{} of {} runs state no error, so the stated errors are not used: the intervals \
                 come from the residuals.",
                rates.errors_missing,
                rates.runs.len()
            ),
            "State an error for every run, or leave out the runs without one.",
        ));
        return ScatterChoice::FromResiduals;
    }
    let no_errors = observations.iter().all(|o| o.ln_sd.is_none());
    let asks_for_errors =
        matches!(choice, ScatterChoice::AsStated | ScatterChoice::AsStatedPlusRunToRun);
    if no_errors && asks_for_errors && !observations.is_empty() {
        remarks.push(Remark::new(
            "errors-incomplete",
            Severity::Caution,
            "The scatter choice needs stated errors and there are none: the intervals come from \
             the residuals.",
            "Paste a column of errors, or choose the scatter of the residuals.",
        ));
        return ScatterChoice::FromResiduals;
    }
    choice
}

/// What the other scatter choices that the runs allow would give.
fn alternatives(fitted: &FittedLaw, sample: &Sample) -> Vec<FittedLaw> {
    [ScatterChoice::AsStatedPlusRunToRun, ScatterChoice::AsStated, ScatterChoice::FromResiduals]
        .into_iter()
        .filter_map(|scatter| {
            let (observations, settings) = sample.under(scatter);
            fit(fitted.law, observations, settings).ok()
        })
        .filter(|other| other.has_intervals() && other.scatter != fitted.scatter)
        .collect()
}

/// The law if every temperature were too high, or too low, by the offset.
fn shifted(
    law: TemperatureLaw,
    observations: &[Observation],
    settings: Settings,
    offset_kelvin: f64,
) -> Vec<FittedLaw> {
    if offset_kelvin == 0.0 {
        return Vec::new();
    }
    [-offset_kelvin, offset_kelvin]
        .into_iter()
        .filter_map(|shift| {
            let moved: Vec<Observation> = observations
                .iter()
                .map(|o| Observation { temperature: Kelvin(o.temperature.0 + shift), ..*o })
                .collect();
            fit(law, &moved, settings).ok()
        })
        .collect()
}

fn law_refusal(error: &LawError) -> Refusal {
    match error {
        LawError::NothingMeasured => Refusal::new(
            "Nothing is measured yet.",
            "Paste rate constants at two temperatures or more, or state a known law.",
        ),
        LawError::TooFewTemperatures { needed, .. } => Refusal::new(
            format!("There is no law yet: {error}."),
            format!("Measure at {needed} temperatures or more, or state a known law."),
        ),
        LawError::ErrorsMissing { .. } => Refusal::new(
            format!("There is no law: {error}."),
            "State an error for every run, or choose the scatter of the residuals.",
        ),
        LawError::NotComputable => Refusal::new(
            format!("There is no law: {error}."),
            "Check the units and the errors of the runs.",
        ),
    }
}
