//! How well a law explains the runs: maximum likelihood and AICc (Hurvich & Tsai, Biometrika
//! 1989, 76, 297; Burnham & Anderson, Model Selection and Multimodel Inference, 2002, §2.4).

use super::scatter::Problem;
use super::{Scatter, TemperatureLaw};
use crate::measurements::{Observation, independent_runs};
use crate::numeric::roots::secant_crossing;

/// AICc of a law fitted to ln k of the runs under a scatter; none where it is undefined
/// (n ≤ K + 1), where the law cannot be fitted, or where nothing is left to explain.
pub fn aicc(law: TemperatureLaw, observations: &[Observation], scatter: Scatter) -> Option<f64> {
    let problem = Problem::new(law, observations).ok()?;
    let runs = independent_runs(observations) as f64;
    let (deviance, variances) = match scatter {
        Scatter::NoneKnown => return None,
        Scatter::FromResiduals => (deviance_from_residuals(&problem, runs)?, 1.0),
        Scatter::AsStated => {
            (deviance(&problem, &problem.stated_sd(observations).ok()?, 0.0)?, 0.0)
        }
        Scatter::AsStatedPlusRunToRun => {
            (least_deviance(&problem, &problem.stated_sd(observations).ok()?)?, 1.0)
        }
    };
    let fitted = law.parameters() as f64 + variances;
    let spare = runs - fitted - 1.0;
    (spare > 0.0).then(|| deviance + 2.0 * fitted + 2.0 * fitted * (fitted + 1.0) / spare)
}

/// −2 ln L at the maximum when the variance is the same for all and unknown.
fn deviance_from_residuals(problem: &Problem, runs: f64) -> Option<f64> {
    let weights = &problem.shares;
    let fit = problem.solve(problem.reference(weights), weights).ok()?;
    let variance = fit.weighted_sum_of_squares / runs;
    (variance > 0.0).then(|| runs * (libm::log(2.0 * std::f64::consts::PI * variance) + 1.0))
}

/// −2 ln L with variances s² + τ². About which temperature the law is written changes nothing.
fn deviance(problem: &Problem, sd: &[f64], tau: f64) -> Option<f64> {
    let weights = problem.weights(sd, tau);
    let fit = problem.solve(problem.reference(&problem.shares), &weights).ok()?;
    let normalisation: f64 = weights
        .iter()
        .zip(&problem.shares)
        .map(|(w, share)| share * libm::log(2.0 * std::f64::consts::PI * share / w))
        .sum();
    Some(normalisation + fit.weighted_sum_of_squares)
}

/// With more runs than this the deviance has one minimum, and each look at it takes a while.
const MANY_RUNS: usize = 1000;

/// The least of [`deviance`] over τ ≥ 0: the best of a ladder, then halved steps about it.
fn least_deviance(problem: &Problem, sd: &[f64]) -> Option<f64> {
    if sd.len() > MANY_RUNS {
        return deviance(problem, sd, likeliest_tau(problem, sd)?);
    }
    const LADDER_STEP: f64 = 1.0;
    const LADDER: i32 = 20;
    const FINEST_STEP: f64 = 1e-4;
    let smallest = sd.iter().copied().fold(f64::INFINITY, f64::min);
    let at = |ln_tau: f64| deviance(problem, sd, libm::exp(ln_tau));
    let mut best = deviance(problem, sd, 0.0)?;
    let mut centre = None;
    for rung in 0..LADDER {
        let ln_tau = libm::log(0.05 * smallest) + LADDER_STEP * f64::from(rung);
        let here = at(ln_tau)?;
        if here < best {
            (best, centre) = (here, Some(ln_tau));
        }
    }
    let Some(mut centre) = centre else { return Some(best) };
    let mut step = 0.5 * LADDER_STEP;
    while step > FINEST_STEP {
        for candidate in [centre - step, centre + step] {
            let here = at(candidate)?;
            if here < best {
                (best, centre) = (here, candidate);
            }
        }
        step *= 0.5;
    }
    Some(best)
}

/// Where the deviance is flat: its change with τ² is Σ w − Σ w² r², as the fit minimises Σ w r².
fn likeliest_tau(problem: &Problem, sd: &[f64]) -> Option<f64> {
    let reference = problem.reference(&problem.shares);
    let rising = |tau: f64| {
        let weights = problem.weights(sd, tau);
        let fit = problem.solve(reference, &weights).ok()?;
        let pull: f64 = weights.iter().zip(&fit.residuals).map(|(w, r)| w * w * r * r).sum();
        Some(1.0 - pull / weights.iter().sum::<f64>())
    };
    if rising(0.0)? >= 0.0 {
        return Some(0.0);
    }
    let (mut below, mut above) = (0.0, sd.iter().copied().fold(f64::INFINITY, f64::min));
    while rising(above)? < 0.0 {
        below = above;
        above *= 2.0;
    }
    Some(secant_crossing(|tau| rising(tau).unwrap_or(f64::NAN), 0.0, below, above, 1e-9))
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::quantity::Kelvin;

    fn runs(sd: Option<f64>) -> Vec<Observation> {
        [-4.02, -2.88, -2.05, -1.02, -0.3, 0.61]
            .iter()
            .enumerate()
            .map(|(i, y)| Observation::new(Kelvin(320.0 + 10.0 * i as f64), *y, sd))
            .collect()
    }

    /// n ln(RSS/n) + 2K + 2K(K+1)/(n−K−1) up to n(ln 2π + 1), which every law shares.
    #[test]
    fn residual_form_is_the_usual_one() {
        let runs = runs(None);
        let law = TemperatureLaw::Arrhenius;
        let fitted =
            super::super::fit(law, &runs, crate::temperature_law::ScatterChoice::Automatic);
        let rss: f64 = fitted.unwrap().residuals.iter().map(|r| r * r).sum();
        let usual = 6.0 * (rss / 6.0).ln() + 6.0 + 2.0 * 3.0 * 4.0 / 2.0;
        let shared = 6.0 * ((2.0 * std::f64::consts::PI).ln() + 1.0);
        let found = aicc(law, &runs, Scatter::FromResiduals).unwrap();
        assert!((found - usual - shared).abs() < 1e-9);
    }

    /// With equal stated errors far below the scatter, τ takes the place of the residual scale.
    #[test]
    fn run_to_run_form_meets_the_residual_form() {
        let residual = aicc(TemperatureLaw::Eyring, &runs(None), Scatter::FromResiduals).unwrap();
        let stated =
            aicc(TemperatureLaw::Eyring, &runs(Some(1e-4)), Scatter::AsStatedPlusRunToRun).unwrap();
        assert!((residual - stated).abs() < 1e-4, "{residual} {stated}");
    }

    #[test]
    fn too_few_runs_have_no_ranking() {
        assert_eq!(aicc(TemperatureLaw::Arrhenius, &runs(None)[..4], Scatter::FromResiduals), None);
        assert!(
            aicc(TemperatureLaw::Arrhenius, &runs(None)[..5], Scatter::FromResiduals).is_some()
        );
        assert_eq!(aicc(TemperatureLaw::Curved, &runs(None)[..5], Scatter::FromResiduals), None);
    }

    #[test]
    fn many_runs_are_likeliest_where_the_deviance_is_least() {
        let run = |i: u32| {
            let t = 320.0 + 0.03 * f64::from(i);
            let off = f64::from((i * 37) % 101) / 101.0 - 0.5;
            Observation::new(
                Kelvin(t),
                30.0 - 11_000.0 / t + 0.3 * off,
                Some(0.02 + 1e-5 * f64::from(i)),
            )
        };
        let runs: Vec<Observation> = (0..1200).map(run).collect();
        let problem = Problem::new(TemperatureLaw::Arrhenius, &runs).unwrap();
        let sd = problem.stated_sd(&runs).unwrap();
        let tau = likeliest_tau(&problem, &sd).unwrap();
        let least = least_deviance(&problem, &sd).unwrap();
        assert!(tau > 0.0);
        for beside in [0.99 * tau, 1.01 * tau, 0.0] {
            assert!(deviance(&problem, &sd, beside).unwrap() > least);
        }
    }
}
