//! Finding the minimum: a start from any data, then Levenberg–Marquardt, with weights that follow
//! the fitted signal where the noise does.

use super::curves::Curves;
use super::noise::Noise;
use super::{NoRate, Settings};
use crate::measurements::ProgressRun;
use crate::numeric::nonlinear::{NonlinearFit, Problem, Unfinished, fit};

/// Where the best of the tried rates lies.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Edge {
    /// Slower than the run could show.
    Slowest,
    Between,
    /// Over before the first point.
    Fastest,
}

/// Rates are tried in steps of this in ln κ.
const STEP: f64 = 0.4;
/// From the slowest that changes this part of the signal by the last point …
const LEAST_EXTENT: f64 = 1e-3;
/// … to the fastest that leaves this part at the first.
const LEAST_LEFT: f64 = 1e-3;
/// Points of a run on which rates are tried.
const MOST_TRIED_POINTS: usize = 60;
/// Most rounds of weighting by the fitted signal.
const ROUNDS: usize = 30;
/// A signal counts as at least this part of the largest when noise is proportional: where the
/// signal vanishes the noise does not.
const LEAST_SIGNAL: f64 = 0.01;

/// The best ln κ of a ladder of rates that covers all that a run can show: with starts and ends
/// eliminated one parameter is left, so that no guess is needed.
pub(super) fn starting_rate(run: &ProgressRun, settings: &Settings) -> Result<(f64, Edge), NoRate> {
    let run = &thinned(run);
    let times = || run.points.iter().map(|point| point.time_seconds).filter(|time| *time > 0.0);
    let first = times().fold(f64::INFINITY, f64::min);
    let last = times().fold(0.0, f64::max);
    let all = settings.law.final_extent();
    let ln_theta = |extent: f64| settings.law.ln_theta(extent).unwrap_or(0.0);
    let lowest = ln_theta(LEAST_EXTENT * all) - libm::log(last);
    let highest = ln_theta((1.0 - LEAST_LEFT) * all) - libm::log(first);
    if !(highest > lowest) {
        return Err(NoRate::TooFewPoints);
    }
    let curves = Curves::separate(&[run], settings);
    let observed = curves.observed();
    let weights = weights_of(&curves, settings.noise, &vec![0.0; observed.len()]);
    let mut best: Option<(f64, usize)> = None;
    let steps = libm::ceil((highest - lowest) / STEP) as usize;
    for step in 0..=steps {
        let at = |_: &[f64]| curves.expand(&[lowest + STEP * step as f64]).map(without_slopes);
        let problem = Problem { observed: &observed, weights: &weights, model: &at };
        match fit(&problem, &[]) {
            Err(Unfinished::TooFewPoints) => return Err(NoRate::TooFewPoints),
            Ok(tried) if best.is_none_or(|(least, _)| tried.weighted_sum_of_squares < least) => {
                best = Some((tried.weighted_sum_of_squares, step));
            }
            _ => {}
        }
    }
    let (_, step) = best.ok_or(NoRate::Search(Unfinished::NotComputable))?;
    let edge = if step == 0 {
        Edge::Slowest
    } else if step == steps {
        Edge::Fastest
    } else {
        Edge::Between
    };
    Ok((lowest + STEP * step as f64, edge))
}

/// A run with few enough points to try many rates on: evenly taken, both ends kept.
fn thinned(run: &ProgressRun) -> ProgressRun {
    let stride = run.points.len().div_ceil(MOST_TRIED_POINTS);
    let last = run.points.len().saturating_sub(1);
    let kept = run.points.iter().enumerate().filter(|(i, _)| i % stride == 0 || *i == last);
    ProgressRun { points: kept.map(|(_, point)| *point).collect(), ..run.clone() }
}

fn without_slopes(
    mut expansion: crate::numeric::nonlinear::Expansion,
) -> crate::numeric::nonlinear::Expansion {
    expansion.offset_derivatives = nalgebra::DMatrix::zeros(expansion.offset.len(), 0);
    expansion.basis_derivatives.clear();
    expansion
}

/// The minimum from `start` on. Proportional noise is weighted by the fitted signal, round by
/// round until the rates stay (iteratively reweighted least squares: Carroll & Ruppert,
/// Transformation and Weighting in Regression, 1988, §2).
pub(super) fn search(
    curves: &Curves<'_>,
    noise: Noise,
    start: &[f64],
) -> Result<NonlinearFit, Unfinished> {
    let observed = curves.observed();
    let model = |parameters: &[f64]| curves.expand(parameters);
    let mut residuals = vec![0.0; observed.len()];
    let mut from = start.to_vec();
    for round in 0..ROUNDS {
        let weights = weights_of(curves, noise, &residuals);
        let problem = Problem { observed: &observed, weights: &weights, model: &model };
        let found = fit(&problem, &from)?;
        let moved = found.nonlinear.iter().zip(&from).map(|(a, b)| (a - b).abs());
        let settled = round > 0 && moved.fold(0.0, f64::max) < 1e-9;
        if settled || curves.states_errors() || noise == Noise::Constant {
            return Ok(found);
        }
        residuals.clone_from(&found.residuals);
        from.clone_from(&found.nonlinear);
    }
    Err(Unfinished::OutOfPatience)
}

/// Weights of all points: 1/s² where errors are stated, else by the noise about what was fitted,
/// which is what was observed minus `residuals`.
pub(super) fn weights_of(curves: &Curves<'_>, noise: Noise, residuals: &[f64]) -> Vec<f64> {
    let points = || curves.runs.iter().flat_map(|run| &run.points);
    if curves.states_errors() {
        return points().filter_map(|point| point.sd).map(|sd| 1.0 / (sd * sd)).collect();
    }
    match noise {
        Noise::Constant => vec![1.0; residuals.len()],
        Noise::Proportional => {
            let largest = points().map(|point| point.signal.abs()).fold(0.0, f64::max);
            let weight = |(point, residual): (&crate::measurements::Point, &f64)| {
                let size = (point.signal - residual).abs().max(LEAST_SIGNAL * largest);
                1.0 / (size * size)
            };
            points().zip(residuals).map(weight).collect()
        }
    }
}
