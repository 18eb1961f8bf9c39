//! All progress curves fitted at once: one temperature law, and starts and ends for each run.
//!
//! It uses what the curves say of each other's rates and needs no run to carry a rate constant of
//! its own, but assumes that runs differ by nothing but their temperature and the noise of their
//! signals. Rates scattered from run to run make its intervals too narrow: the two-stage way,
//! a rate constant of each run and a law through them, does not assume that.

use nalgebra::{DMatrix, DVector};

use crate::measurements::ProgressRun;
use crate::numeric::nonlinear::Unfinished;
use crate::quantity::Kelvin;
use crate::rate_constant::{RunFit, Settings, fit_along};
use crate::temperature_law::{Component, FittedLaw, Kernel, Scatter, TemperatureLaw};

/// Fits a law about `reference` to all curves at once, from `start` on. For orders other than one
/// the runs' initial concentrations are those of their own fits.
///
/// # Errors
/// The search ended without a minimum.
pub fn one_stage(
    law: TemperatureLaw,
    reference: Kelvin,
    curves: &[(&ProgressRun, &RunFit)],
    settings: &Settings,
    start: &[f64],
) -> Result<FittedLaw, Unfinished> {
    let parameters = law.parameters();
    let contrasts: Vec<_> =
        curves.iter().map(|(run, _)| law.ln_rate(run.temperature, reference)).collect();
    let design = DMatrix::from_fn(curves.len(), parameters, |i, j| contrasts[i].coefficients[j]);
    // ln κ = ln k + m ln c0, and both are known of each run from its own fit.
    let constant = DVector::from_fn(curves.len(), |i, _| {
        contrasts[i].constant + curves[i].1.ln_reduced_rate - curves[i].1.ln_rate
    });
    let runs: Vec<&ProgressRun> = curves.iter().map(|(run, _)| *run).collect();
    let found = fit_along(&runs, settings, (design, constant), start)?;
    let stated = runs.iter().all(|run| run.states_errors());
    let variance = if stated { Some(1.0) } else { found.variance().filter(|v| *v > 0.0) };
    let covariance = variance.map(|variance| {
        found.covariance.view((0, 0), (parameters, parameters)).into_owned() * variance
    });
    let component = |covariance: &DMatrix<f64>| Component {
        weight: 1.0,
        run_to_run_sd: 0.0,
        parameters: found.nonlinear.clone(),
        covariance: covariance.clone(),
        run_variance: 0.0,
    };
    let known = FittedLaw::known(law, reference, (0.0, None), (0.0, None));
    Ok(FittedLaw {
        components: covariance.iter().map(component).collect(),
        scatter: match (stated, &covariance) {
            (_, None) => Scatter::NoneKnown,
            (true, _) => Scatter::AsStated,
            (false, _) => Scatter::FromResiduals,
        },
        kernel: if stated {
            Kernel::Normal
        } else {
            Kernel::StudentT(found.degrees_of_freedom as f64)
        },
        degrees_of_freedom: Some(found.degrees_of_freedom),
        parameters: found.nonlinear.clone(),
        covariance,
        ..known
    })
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::measurements::Point;
    use crate::rate_constant::{Level, Noise, fit_runs};
    use crate::rate_law::{Order, RateLaw};

    const REFERENCE: Kelvin = Kelvin(330.0);
    const TRUE: [f64; 2] = [-3.0, 80_000.0];

    fn run(kelvin: f64, noise: f64) -> ProgressRun {
        let law = TemperatureLaw::Arrhenius;
        let rate = law.ln_rate(Kelvin(kelvin), REFERENCE).at(&TRUE).exp();
        let point = |row: usize| {
            let time_seconds = 4.0 * row as f64;
            let error = noise * (12.9898 * time_seconds + 78.233 * kelvin).sin();
            let signal = 100.0 * (-rate * time_seconds).exp() + error;
            Point { row, time_seconds, signal, sd: None }
        };
        ProgressRun {
            name: format!("{kelvin} K"),
            row: 1,
            temperature: Kelvin(kelvin),
            points: (0..7).map(point).collect(),
        }
    }

    fn law_of(noise: f64) -> FittedLaw {
        let runs = [310.0, 320.0, 330.0, 340.0].map(|kelvin| run(kelvin, noise));
        let settings = Settings {
            law: RateLaw::Order(Order::FIRST),
            start: Level::Free,
            end: Level::Given(0.0),
            noise: Noise::Constant,
            initial_concentration: None,
        };
        let fits = fit_runs(&runs, &settings);
        let curves: Vec<_> =
            runs.iter().zip(&fits).map(|(run, fit)| (run, fit.as_ref().unwrap())).collect();
        let start = [-2.5, 60_000.0];
        one_stage(TemperatureLaw::Arrhenius, REFERENCE, &curves, &settings, &start).unwrap()
    }

    #[test]
    fn curves_without_noise_give_the_law_back() {
        let law = law_of(0.0);
        assert!((law.parameters[0] - TRUE[0]).abs() < 1e-8);
        assert!((law.parameters[1] / TRUE[1] - 1.0).abs() < 1e-8);
    }

    #[test]
    fn noise_gives_intervals_that_hold_the_law() {
        let law = law_of(1.0);
        let covariance = law.covariance.as_ref().unwrap();
        for (k, truth) in TRUE.iter().enumerate() {
            let sd = covariance[(k, k)].sqrt();
            assert!((law.parameters[k] - truth).abs() < 3.0 * sd, "{k}: {law:?}");
        }
        // 28 points, two parameters and four starts.
        assert_eq!(law.degrees_of_freedom, Some(22));
    }
}
