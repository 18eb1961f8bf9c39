//! The rate constant of each run from its raw signal.
//!
//! The signal is linear in the fraction gone, y = start + (end − start)·X(κt)/X(∞), and fitted as
//! it was measured by nonlinear least squares, never after a transform that would bend its noise.
//! Starts and ends that are not given enter linearly and are eliminated.

mod curves;
mod noise;
mod orders;
mod search;

pub use curves::Level;
pub use noise::Noise;
pub use orders::{FreeOrder, RankedOrder, USUAL_ORDERS, aicc_of, compare_orders, free_order};

use nalgebra::{DMatrix, DVector};
use thiserror::Error;

use crate::measurements::ProgressRun;
use crate::numeric::nonlinear::{NonlinearFit, Unfinished};
use crate::rate_law::RateLaw;
use curves::Curves;
use search::Edge;

/// How runs are fitted.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Settings {
    /// The rate law of every run.
    pub law: RateLaw,
    /// The signal at time zero.
    pub start: Level,
    /// The signal after all has reacted; never shared.
    pub end: Level,
    /// How the noise goes with the signal, where no errors are stated.
    pub noise: Noise,
    /// The initial concentration by which k is reckoned from κ; none: what the signal changes by.
    pub initial_concentration: Option<f64>,
}

/// The rate constant of a run and what it stands on.
#[derive(Debug, Clone, PartialEq)]
pub struct RunFit {
    /// ln k, k in concentration^(1−n)/s for order n.
    pub ln_rate: f64,
    /// Standard deviation of ln k; none where the noise is not known or there is none.
    pub ln_sd: Option<f64>,
    /// ln κ, κ in 1/s, see [`RateLaw`].
    pub ln_reduced_rate: f64,
    /// The signal at time zero.
    pub start: f64,
    /// The signal after all has reacted.
    pub end: f64,
    /// Measured minus fitted signal, one a point.
    pub residuals: Vec<f64>,
    /// Points minus parameters, the parameters of a joint fit counted by share.
    pub degrees_of_freedom: usize,
    /// Standard deviation of the noise behind `ln_sd`: of the signal, relative for proportional
    /// noise, in stated errors where they are stated.
    pub residual_sd: Option<f64>,
    /// Σ w r², with weights as the noise sets them.
    pub weighted_sum_of_squares: f64,
    /// The fraction gone at the last point.
    pub extent: f64,
}

/// Why a run has no rate constant.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Error)]
pub enum NoRate {
    /// Fewer points than parameters.
    #[error("it has fewer points than there are values to find")]
    TooFewPoints,
    /// k cannot be told from zero.
    #[error("its signal changes too little to tell a rate from none")]
    NoReaction,
    /// With a free end, a short run is a straight line.
    #[error("it is too short to show where its signal ends")]
    TooShort,
    /// Everything has reacted at the first points.
    #[error("the reaction is over before the first points tell how fast it was")]
    OverAtOnce,
    /// The noise differs from run to run and one degree of freedom does not tell this run's.
    #[error("it has too few points to tell its noise, which differs from run to run")]
    NoiseNotKnown,
    /// The search for the minimum failed.
    #[error("its fit did not converge: {0}")]
    Search(Unfinished),
}

/// A larger standard deviation of ln k means that k is not above zero at the 5 % level.
const LARGEST_LN_SD: f64 = 0.6;

/// A signal within so many standard deviations of its end may as well be there.
const CLEAR_OF_NOISE: f64 = 3.0;

/// Fits every run; outcomes in the order of the runs.
pub fn fit_runs(runs: &[ProgressRun], settings: &Settings) -> Vec<Result<RunFit, NoRate>> {
    let mut outcomes = match settings.start {
        Level::Shared => fit_jointly(runs, settings),
        _ => runs.iter().map(|run| fit_alone(run, settings)).collect(),
    };
    noise::spread(runs, settings, &mut outcomes);
    for (run, outcome) in runs.iter().zip(&mut outcomes) {
        if outcome.as_ref().is_ok_and(|fit| is_over_at_once(run, settings, fit)) {
            *outcome = Err(NoRate::OverAtOnce);
        } else if outcome.as_ref().is_ok_and(|fit| fit.ln_sd.is_some_and(|s| !(s <= LARGEST_LN_SD)))
        {
            *outcome = Err(indistinct(settings));
        }
    }
    outcomes
}

/// Whether what is left at the first later point drowns in the noise: then k has no upper limit,
/// whatever the curvature at the minimum says.
fn is_over_at_once(run: &ProgressRun, settings: &Settings, fit: &RunFit) -> bool {
    let Some(first) = run.points.iter().find(|point| point.time_seconds > 0.0) else {
        return false;
    };
    let noise = match (settings.noise, first.sd) {
        (_, Some(sd)) if run.states_errors() => sd,
        (Noise::Constant, _) => fit.residual_sd.unwrap_or(0.0),
        (Noise::Proportional, _) => return false,
    };
    let theta = libm::exp(fit.ln_reduced_rate) * first.time_seconds;
    let all = settings.law.final_extent();
    let left = (fit.start - fit.end) * (1.0 - settings.law.reached(theta).extent / all);
    left.abs() < CLEAR_OF_NOISE * noise
}

/// What a rate constant that cannot be told from zero means.
fn indistinct(settings: &Settings) -> NoRate {
    if settings.end == Level::Free { NoRate::TooShort } else { NoRate::NoReaction }
}

fn fit_alone(run: &ProgressRun, settings: &Settings) -> Result<RunFit, NoRate> {
    let curves = Curves::separate(&[run], settings);
    let (start, edge) = search::starting_rate(run, settings)?;
    let fit = search::search(&curves, settings.noise, &[start]).map_err(|reason| {
        match (reason, edge) {
            (Unfinished::TooFewPoints, _) => NoRate::TooFewPoints,
            (_, Edge::Slowest) => indistinct(settings),
            (_, Edge::Fastest) => NoRate::OverAtOnce,
            (reason, Edge::Between) => NoRate::Search(reason),
        }
    })?;
    Ok(of_run(&curves, 0, settings, &fit))
}

/// All runs at once, ln κ of each along a law: `map` is a row of the design for each run, and what
/// is added to it. Linear parameters follow the nonlinear ones in the covariance.
///
/// # Errors
/// See [`Unfinished`].
pub fn fit_along(
    runs: &[&ProgressRun],
    settings: &Settings,
    (design, constant): (DMatrix<f64>, DVector<f64>),
    start: &[f64],
) -> Result<NonlinearFit, Unfinished> {
    search::search(&Curves::along(runs, settings, design, constant), settings.noise, start)
}

/// One start for all runs: those that can be fitted alone are fitted together.
fn fit_jointly(runs: &[ProgressRun], settings: &Settings) -> Vec<Result<RunFit, NoRate>> {
    let alone = Settings { start: Level::Free, ..*settings };
    let mut outcomes: Vec<Result<RunFit, NoRate>> =
        runs.iter().map(|run| fit_alone(run, &alone)).collect();
    let fitted: Vec<usize> = (0..runs.len()).filter(|i| outcomes[*i].is_ok()).collect();
    let together: Vec<&ProgressRun> = fitted.iter().map(|i| &runs[*i]).collect();
    if together.is_empty() {
        return outcomes;
    }
    let start: Vec<f64> =
        outcomes.iter().flatten().map(|outcome| outcome.ln_reduced_rate).collect();
    let curves = Curves::separate(&together, settings);
    match search::search(&curves, settings.noise, &start) {
        Ok(fit) => {
            for (place, i) in fitted.into_iter().enumerate() {
                outcomes[i] = Ok(of_run(&curves, place, settings, &fit));
            }
        }
        Err(reason) => {
            for i in fitted {
                outcomes[i] = Err(NoRate::Search(reason));
            }
        }
    }
    outcomes
}

/// What a fit says of one of its runs; `ln_sd` is still that of unit weight.
fn of_run(curves: &Curves<'_>, run: usize, settings: &Settings, fit: &NonlinearFit) -> RunFit {
    let (start, end) = curves.levels(run, &fit.linear);
    let ln_reduced_rate = curves.ln_reduced_rate(run, &fit.nonlinear);
    let power = settings.law.concentration_power();
    let own_scale = settings.initial_concentration.is_none() && power != 0.0;
    let concentration = settings.initial_concentration.unwrap_or((start - end).abs());
    let ln_rate = if power == 0.0 {
        ln_reduced_rate
    } else {
        ln_reduced_rate - power * libm::log(concentration)
    };
    let by_start = if own_scale { -power / (start - end) } else { 0.0 };
    let gradient = curves.gradient(run, by_start);
    let variance = gradient.dot(&(&fit.covariance * &gradient));
    let points = curves.points(run);
    let residuals = fit.residuals[points.clone()].to_vec();
    let weights = search::weights_of(curves, settings.noise, &fit.residuals);
    let weighted_sum_of_squares =
        residuals.iter().zip(&weights[points.clone()]).map(|(r, w)| w * r * r).sum();
    let share = fit.degrees_of_freedom as f64 * points.len() as f64 / fit.residuals.len() as f64;
    RunFit {
        ln_rate,
        ln_sd: Some(variance.max(0.0).sqrt()),
        ln_reduced_rate,
        start,
        end,
        residuals,
        degrees_of_freedom: libm::round(share) as usize,
        residual_sd: None,
        weighted_sum_of_squares,
        extent: curves.extent_followed(run, ln_reduced_rate),
    }
}

#[cfg(test)]
mod tests;
