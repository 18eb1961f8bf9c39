//! Where intervals come from: fitting a law under one of the scatter choices.
//!
//! *From the residuals*: ordinary least squares on ln k, s² = RSS/ν, Student's t.
//! *As stated*: weights 1/s², covariance (XᵀWX)⁻¹, normal.
//! *As stated plus run-to-run*: Var(ln kᵢ) = sᵢ² + τ² with τ unknown, averaged over what the
//! data say of it (`averaged.rs`).

use std::cell::RefCell;

use nalgebra::DMatrix;
use serde::{Deserialize, Serialize};
use thiserror::Error;

use super::{Component, FittedLaw, Kernel, MAX_PARAMETERS, TemperatureLaw};
use crate::measurements::{Observation, independent_runs};
use crate::numeric::distributions::chi_squared_tail;
use crate::numeric::least_squares::{self, LeastSquaresError, LinearFit};
use crate::numeric::sorting::sort_by;
use crate::quantity::Kelvin;

/// Which scatter is asked for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum ScatterChoice {
    /// Stated errors plus run-to-run scatter where every run states its error and there are at
    /// least three, as stated with two such runs, else from the residuals.
    #[default]
    Automatic,
    /// Stated errors are ignored.
    FromResiduals,
    /// Stated errors are taken as all there is.
    AsStated,
    /// Stated errors and an unknown scatter between runs.
    AsStatedPlusRunToRun,
}

/// How a law is fitted.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Settings {
    /// Where the intervals come from.
    pub scatter: ScatterChoice,
    /// Random standard deviation of each run's temperature in K; used where errors are taken as
    /// stated, as residuals and run-to-run scatter contain it already.
    pub thermometer_sd_kelvin: f64,
    /// Where runs are means of groups: the variance of ln k that a single run has beyond that.
    pub within_groups: Option<f64>,
}

impl From<ScatterChoice> for Settings {
    fn from(scatter: ScatterChoice) -> Self {
        Self { scatter, ..Self::default() }
    }
}

/// Which scatter the intervals stand on.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Scatter {
    /// As many parameters as runs and no stated errors: there are no intervals.
    NoneKnown,
    /// Residuals about the law.
    FromResiduals,
    /// Stated errors alone; also the stated uncertainty of a known law.
    AsStated,
    /// Stated errors and run-to-run scatter.
    AsStatedPlusRunToRun,
}

impl From<Scatter> for ScatterChoice {
    /// The choice that fits other runs as these were.
    fn from(scatter: Scatter) -> Self {
        match scatter {
            Scatter::NoneKnown => Self::Automatic,
            Scatter::FromResiduals => Self::FromResiduals,
            Scatter::AsStated => Self::AsStated,
            Scatter::AsStatedPlusRunToRun => Self::AsStatedPlusRunToRun,
        }
    }
}

/// Why no law could be fitted.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum LawError {
    /// No run is usable.
    #[error("nothing measured yet")]
    NothingMeasured,
    /// Fewer distinct temperatures than the law has parameters.
    #[error(
        "{found} distinct temperature{}, where this law needs {needed}",
        if *found == 1 { "" } else { "s" }
    )]
    TooFewTemperatures {
        /// Distinct temperatures measured.
        found: usize,
        /// Parameters of the law.
        needed: usize,
    },
    /// The choice needs an error for every run.
    #[error("{missing} of the runs state no error")]
    ErrorsMissing {
        /// How many runs lack theirs.
        missing: usize,
    },
    /// Numbers beyond what can be computed with.
    #[error("the rate constants or errors are too far apart to compute with")]
    NotComputable,
}

/// Fits `law` to the runs under a scatter choice.
///
/// # Errors
/// See [`LawError`]; a choice that needs stated errors is refused where a run lacks its own.
pub fn fit(
    law: TemperatureLaw,
    observations: &[Observation],
    settings: impl Into<Settings>,
) -> Result<FittedLaw, LawError> {
    let settings = settings.into();
    let Settings { scatter, thermometer_sd_kelvin, within_groups } = settings;
    let problem = Problem::new(law, observations)?;
    let stated = problem.stated_sd(observations);
    let fitted = match (scatter, stated) {
        (ScatterChoice::FromResiduals, _) | (ScatterChoice::Automatic, Err(_)) => {
            problem.on_residuals(within_groups.unwrap_or(0.0))
        }
        (_, Err(missing)) => Err(missing),
        (ScatterChoice::AsStated, Ok(sd)) => problem.as_stated(&sd, thermometer_sd_kelvin),
        (ScatterChoice::AsStatedPlusRunToRun | ScatterChoice::Automatic, Ok(sd)) => {
            if problem.degrees_of_freedom > 0 {
                problem.as_stated_plus_run_to_run(&sd)
            } else if within_groups.is_some() {
                // Groups are named because they differ; nothing tells by how much.
                problem.on_residuals(0.0)
            } else {
                problem.as_stated(&sd, thermometer_sd_kelvin)
            }
        }
    }?;
    Ok(FittedLaw { runs: observations.to_vec(), settings, ..fitted })
}

impl FittedLaw {
    /// The same law fitted to other runs in the same way.
    ///
    /// # Errors
    /// As [`fit`].
    pub fn refitted(&self, runs: &[Observation]) -> Result<Self, LawError> {
        fit(self.law, runs, Settings { scatter: self.scatter.into(), ..self.settings })
    }
}

/// One law, one set of runs: what every scatter choice shares.
pub(super) struct Problem {
    pub(super) law: TemperatureLaw,
    pub(super) temperatures: Vec<Kelvin>,
    pub(super) ln_rates: Vec<f64>,
    /// How much each run counts as one of its own.
    pub(super) shares: Vec<f64>,
    pub(super) degrees_of_freedom: usize,
    /// The last design, as the same is solved with many weights.
    designed: RefCell<Option<Design>>,
}

/// The law at each run, about a reference temperature.
struct Design {
    reference: Kelvin,
    matrix: DMatrix<f64>,
    observed: Vec<f64>,
}

impl Problem {
    pub(super) fn new(law: TemperatureLaw, observations: &[Observation]) -> Result<Self, LawError> {
        if observations.is_empty() {
            return Err(LawError::NothingMeasured);
        }
        let mut distinct: Vec<f64> = observations.iter().map(|o| o.temperature.0).collect();
        sort_by(&mut distinct, |t| *t);
        distinct.dedup();
        let needed = law.parameters();
        if distinct.len() < needed {
            return Err(LawError::TooFewTemperatures { found: distinct.len(), needed });
        }
        Ok(Self {
            law,
            temperatures: observations.iter().map(|o| o.temperature).collect(),
            ln_rates: observations.iter().map(|o| o.ln_rate).collect(),
            shares: observations.iter().map(|o| o.share).collect(),
            degrees_of_freedom: independent_runs(observations).saturating_sub(needed),
            designed: RefCell::default(),
        })
    }

    pub(super) fn stated_sd(&self, observations: &[Observation]) -> Result<Vec<f64>, LawError> {
        let stated: Vec<f64> = observations.iter().filter_map(|o| o.ln_sd).collect();
        let missing = observations.len() - stated.len();
        if missing == 0 { Ok(stated) } else { Err(LawError::ErrorsMissing { missing }) }
    }

    /// 1/(s² + τ²) for a run of its own, less for one that shares its group with others.
    pub(super) fn weights(&self, sd: &[f64], tau: f64) -> Vec<f64> {
        sd.iter().zip(&self.shares).map(|(s, share)| share / (s * s + tau * tau)).collect()
    }

    /// T0 with 1/T0 = Σ w x / Σ w.
    pub(super) fn reference(&self, weights: &[f64]) -> Kelvin {
        let weighted: f64 = weights.iter().zip(&self.temperatures).map(|(w, t)| w / t.0).sum();
        Kelvin(weights.iter().sum::<f64>() / weighted)
    }

    pub(super) fn solve(&self, reference: Kelvin, weights: &[f64]) -> Result<LinearFit, LawError> {
        self.with_design(reference, |design| {
            least_squares::fit(&design.matrix, &design.observed, weights)
        })
        .map_err(|error| match error {
            LeastSquaresError::TooFewRows | LeastSquaresError::RankDeficient => {
                LawError::TooFewTemperatures { found: 1, needed: self.law.parameters() }
            }
            LeastSquaresError::NotFinite => LawError::NotComputable,
        })
    }

    /// Diagonal of the hat matrix of a fit with these weights.
    pub(super) fn leverages(
        &self,
        reference: Kelvin,
        weights: &[f64],
        fit: &LinearFit,
    ) -> Vec<f64> {
        self.with_design(reference, |design| fit.leverages(&design.matrix, weights))
    }

    fn with_design<T>(&self, reference: Kelvin, look: impl FnOnce(&Design) -> T) -> T {
        let mut designed = self.designed.borrow_mut();
        look(match &mut *designed {
            Some(designed) if designed.reference == reference => designed,
            stale => stale.insert(self.design(reference)),
        })
    }

    fn design(&self, reference: Kelvin) -> Design {
        let contrasts: Vec<_> =
            self.temperatures.iter().map(|t| self.law.ln_rate(*t, reference)).collect();
        Design {
            reference,
            matrix: DMatrix::from_fn(contrasts.len(), self.law.parameters(), |row, column| {
                contrasts[row].coefficients[column]
            }),
            observed: self.ln_rates.iter().zip(&contrasts).map(|(y, c)| y - c.constant).collect(),
        }
    }

    pub(super) fn fitted(&self, reference: Kelvin, weights: Vec<f64>, fit: LinearFit) -> FittedLaw {
        let leverages = self.leverages(reference, &weights, &fit);
        FittedLaw {
            law: self.law,
            reference,
            parameters: fit.coefficients.as_slice().to_vec(),
            covariance: Some(fit.covariance),
            degrees_of_freedom: Some(self.degrees_of_freedom),
            scatter: Scatter::NoneKnown,
            kernel: Kernel::Normal,
            components: Vec::new(),
            run_to_run_sd: None,
            chi_squared: None,
            residuals: fit.residuals,
            weights,
            leverages,
            runs: Vec::new(),
            settings: Settings::default(),
        }
    }

    fn on_residuals(&self, within_groups: f64) -> Result<FittedLaw, LawError> {
        let weights = self.shares.clone();
        let reference = self.reference(&weights);
        let fit = self.solve(reference, &weights)?;
        let sum_of_squares = fit.weighted_sum_of_squares;
        let mut fitted = self.fitted(reference, weights, fit);
        if self.degrees_of_freedom == 0 {
            fitted.covariance = None;
            return Ok(fitted);
        }
        let degrees = self.degrees_of_freedom as f64;
        let variance = sum_of_squares / degrees;
        let covariance = fitted.covariance.take().map(|c| c * variance);
        fitted.covariance.clone_from(&covariance);
        fitted.scatter = Scatter::FromResiduals;
        fitted.kernel = Kernel::StudentT(degrees);
        fitted.components.extend(covariance.map(|covariance| Component {
            weight: 1.0,
            run_to_run_sd: 0.0,
            parameters: fitted.parameters.clone(),
            covariance,
            run_variance: variance + within_groups,
        }));
        Ok(fitted)
    }

    fn as_stated(&self, sd: &[f64], thermometer_sd_kelvin: f64) -> Result<FittedLaw, LawError> {
        if thermometer_sd_kelvin > 0.0 {
            return self.as_stated_with_thermometer(sd, thermometer_sd_kelvin);
        }
        let weights = self.weights(sd, 0.0);
        let reference = self.reference(&weights);
        let fit = self.solve(reference, &weights)?;
        Ok(self.standing_on_stated(reference, weights, fit))
    }

    pub(super) fn standing_on_stated(
        &self,
        reference: Kelvin,
        weights: Vec<f64>,
        fit: LinearFit,
    ) -> FittedLaw {
        FittedLaw {
            scatter: Scatter::AsStated,
            components: vec![component(1.0, 0.0, &fit)],
            chi_squared: self.chi_squared(fit.weighted_sum_of_squares),
            ..self.fitted(reference, weights, fit)
        }
    }

    pub(super) fn chi_squared(&self, misfit: f64) -> Option<(f64, f64)> {
        let degrees = self.degrees_of_freedom as f64;
        (degrees > 0.0).then(|| (misfit, chi_squared_tail(misfit, degrees)))
    }
}

pub(super) fn component(weight: f64, tau: f64, fit: &LinearFit) -> Component {
    debug_assert!(fit.coefficients.len() <= MAX_PARAMETERS);
    Component {
        weight,
        run_to_run_sd: tau,
        parameters: fit.coefficients.as_slice().to_vec(),
        covariance: fit.covariance.clone(),
        run_variance: tau * tau,
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::numeric::distributions::{normal_quantile, student_t_quantile};
    use crate::temperature_law::Target;

    fn runs(sd: Option<f64>) -> Vec<Observation> {
        [(323.15, -4.02), (333.15, -2.88), (343.15, -2.05), (353.15, -1.02)]
            .iter()
            .map(|&(t, y)| Observation::new(Kelvin(t), y, sd))
            .collect()
    }

    fn energy_interval(fitted: &FittedLaw) -> (f64, f64) {
        let energy = fitted.law.activation_energy(fitted.reference, fitted.reference);
        fitted.interval(&energy, Target::Mean, 0.95).unwrap()
    }

    #[test]
    fn two_runs_without_errors_have_a_line_and_no_interval() {
        let line = fit(TemperatureLaw::Arrhenius, &runs(None)[..2], ScatterChoice::Automatic);
        let line = line.unwrap();
        assert_eq!(line.scatter, Scatter::NoneKnown);
        assert!(!line.has_intervals() && line.covariance.is_none());
        assert!((line.ln_rate(Kelvin(333.15)) + 2.88).abs() < 1e-12);
    }

    #[test]
    fn two_runs_with_errors_stand_on_them() {
        let line = fit(TemperatureLaw::Arrhenius, &runs(Some(0.05))[..2], ScatterChoice::Automatic);
        let line = line.unwrap();
        assert_eq!(line.scatter, Scatter::AsStated);
        let (low, high) = energy_interval(&line);
        let x = 1.0 / 323.15 - 1.0 / 333.15;
        let sd = 0.05 * 2.0_f64.sqrt() / x * crate::constants::MOLAR_GAS_CONSTANT;
        assert!(((high - low) / (2.0 * normal_quantile(0.975) * sd) - 1.0).abs() < 1e-9);
    }

    #[test]
    fn a_future_run_scatters_more_than_the_mean() {
        let fitted = fit(TemperatureLaw::Arrhenius, &runs(None), ScatterChoice::Automatic).unwrap();
        let rate = fitted.ln_rate_contrast(Kelvin(338.15));
        let mean = fitted.interval(&rate, Target::Mean, 0.95).unwrap();
        let run = fitted.interval(&rate, Target::NextRun, 0.95).unwrap();
        let s = fitted.components[0].run_variance.sqrt();
        assert!(run.0 < mean.0 && run.1 > mean.1);
        assert!(run.1 - run.0 > 2.0 * s * student_t_quantile(0.975, 2.0));
    }

    #[test]
    fn unusable_runs_are_refused_in_words() {
        let one = fit(TemperatureLaw::Arrhenius, &runs(None)[..1], ScatterChoice::Automatic);
        assert_eq!(one.unwrap_err().to_string(), "1 distinct temperature, where this law needs 2");
        let none = fit(TemperatureLaw::Arrhenius, &[], ScatterChoice::Automatic);
        assert_eq!(none.unwrap_err(), LawError::NothingMeasured);
        let stated = fit(TemperatureLaw::Arrhenius, &runs(None), ScatterChoice::AsStated);
        assert_eq!(stated.unwrap_err(), LawError::ErrorsMissing { missing: 4 });
    }
}
