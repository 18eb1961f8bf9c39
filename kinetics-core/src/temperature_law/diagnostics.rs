//! What a fitted law says of its own runs: curvature, and the weight of single runs.

use nalgebra::DMatrix;

use super::{Contrast, FittedLaw, Scatter, Settings, Target, TemperatureLaw, fit};
use crate::constants::MOLAR_GAS_CONSTANT;
use crate::measurements::{Observation, independent_runs};
use crate::numeric::distributions::{f_tail, student_t_quantile};
use crate::numeric::least_squares;
use crate::numeric::sorting::sort_by;

/// The F test of a further term in (1/T − 1/T0)² (Draper & Smith, Applied Regression
/// Analysis, 3rd ed. 1998, §6.1; from memory).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CurvatureTest {
    /// F with (1, `degrees_of_freedom`).
    pub f: f64,
    /// Degrees of freedom left with the further term.
    pub degrees_of_freedom: usize,
    /// Probability of such an F without curvature.
    pub p: f64,
}

/// Tests the law for curvature at the weights of its fit; none with fewer than four runs or
/// three temperatures, or when the fit leaves nothing to explain.
pub fn curvature(fitted: &FittedLaw, observations: &[Observation]) -> Option<CurvatureTest> {
    let parameters = fitted.law.parameters();
    let runs = independent_runs(observations);
    if parameters > 2 || runs < 4 {
        return None;
    }
    let degrees_of_freedom = runs - 3;
    let contrasts: Vec<_> =
        observations.iter().map(|o| fitted.ln_rate_contrast(o.temperature)).collect();
    let design = DMatrix::from_fn(observations.len(), 3, |row, column| {
        if column < 2 {
            contrasts[row].coefficients[column]
        } else {
            let x = 1.0 / observations[row].temperature.0 - 1.0 / fitted.reference.0;
            x * x
        }
    });
    let observed: Vec<f64> =
        observations.iter().zip(&contrasts).map(|(o, c)| o.ln_rate - c.constant).collect();
    let bent = least_squares::fit(&design, &observed, &fitted.weights).ok()?;
    let straight: f64 = fitted.residuals.iter().zip(&fitted.weights).map(|(r, w)| w * r * r).sum();
    let scale: f64 = observed.iter().zip(&fitted.weights).map(|(y, w)| w * y * y).sum();
    if straight <= ROUNDING_SHARE * scale {
        return None;
    }
    let within = bent.weighted_sum_of_squares.max(ROUNDING_SHARE * scale);
    let f = (straight - bent.weighted_sum_of_squares).max(0.0) * degrees_of_freedom as f64 / within;
    Some(CurvatureTest { f, degrees_of_freedom, p: f_tail(f, 1.0, degrees_of_freedom as f64) })
}

/// How probable a quadratic term as far from zero as the fitted one is for a straight law, under
/// the scatter of the fit with the errors that the runs state: twice the smaller tail. None where
/// the scatter stands on the residuals alone, or with fewer than four runs.
pub fn curvature_beyond_errors(fitted: &FittedLaw, observations: &[Observation]) -> Option<f64> {
    let stated = matches!(fitted.scatter, Scatter::AsStated | Scatter::AsStatedPlusRunToRun);
    if !stated || fitted.law.parameters() != 2 || independent_runs(observations) < 4 {
        return None;
    }
    // What the law leaves of each run, beside an Arrhenius line of the law's activation energy.
    let slope = fitted.activation_energy(fitted.reference).0 / MOLAR_GAS_CONSTANT;
    let beside: Vec<Observation> = observations
        .iter()
        .zip(&fitted.residuals)
        .map(|(run, residual)| {
            let x = 1.0 / run.temperature.0 - 1.0 / fitted.reference.0;
            Observation { ln_rate: residual - slope * x, ..*run }
        })
        .collect();
    let settings = Settings { scatter: fitted.scatter.into(), ..fitted.settings };
    let bent = fit(TemperatureLaw::Curved, &beside, settings).ok()?;
    let term = Contrast { coefficients: [0.0, 0.0, 1.0], constant: 0.0, runs: 0.0 };
    let below = bent.probability_below(&term, Target::Mean, 0.0)?;
    Some(2.0 * below.min(1.0 - below).max(0.0))
}

/// Sums of squares below this share of the data's own are rounding.
const ROUNDING_SHARE: f64 = 1e-24;

/// A run that moves the law by itself.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Influence {
    /// Index of the run.
    pub run: usize,
    /// Cook's distance (R. D. Cook, Technometrics 1977, 19, 15).
    pub cooks_distance: f64,
    /// Externally studentised residual.
    pub studentised_residual: f64,
}

/// Fewer runs than this let every end point look influential: with three runs Cook's distance
/// exceeds 1 at both ends whatever the data.
const FEWEST_RUNS: usize = 5;

/// The runs whose Cook's distance exceeds 1 or whose studentised residual lies beyond the
/// Bonferroni 5 % point, worst first.
pub fn influential(fitted: &FittedLaw) -> Vec<Influence> {
    let runs = independent_runs(&fitted.runs);
    let parameters = fitted.parameters.len();
    if runs < FEWEST_RUNS || runs < parameters + 2 {
        return Vec::new();
    }
    let degrees = (runs - parameters) as f64;
    let sum: f64 = fitted.residuals.iter().zip(&fitted.weights).map(|(r, w)| w * r * r).sum();
    let variance = sum / degrees;
    if !(variance > 0.0) {
        return Vec::new();
    }
    let limit = student_t_quantile(1.0 - 0.025 / runs as f64, degrees - 1.0);
    let mut found: Vec<Influence> = (0..fitted.residuals.len())
        .filter_map(|run| {
            let left = 1.0 - fitted.leverages[run];
            if left < 1e-9 {
                return None;
            }
            let squared = fitted.weights[run] * fitted.residuals[run].powi(2) / (variance * left);
            let cooks_distance = squared * fitted.leverages[run] / (left * parameters as f64);
            let spare = (degrees - squared).max(1e-12);
            let studentised_residual = (squared * (degrees - 1.0) / spare).sqrt();
            (cooks_distance > 1.0 || studentised_residual > limit).then_some(Influence {
                run,
                cooks_distance,
                studentised_residual,
            })
        })
        .collect();
    sort_by(&mut found, |run| -run.cooks_distance);
    found
}

/// The F test of the scatter about the law against the scatter between replicates (Draper &
/// Smith, Applied Regression Analysis, 3rd ed. 1998, §2.1; from memory).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LackOfFitTest {
    /// F with the two degrees of freedom.
    pub f: f64,
    /// Temperatures minus parameters.
    pub numerator: usize,
    /// Runs minus temperatures.
    pub denominator: usize,
    /// Probability of such an F if the law holds.
    pub p: f64,
}

/// Tests a law against its replicates at the weights of its fit; none without replicates, with
/// no more temperatures than parameters, where replicates are exactly alike, or where a group has
/// runs at several temperatures, so that replicates are not independent.
pub fn lack_of_fit(fitted: &FittedLaw, observations: &[Observation]) -> Option<LackOfFitTest> {
    if observations.iter().any(|o| o.share < 1.0) {
        return None;
    }
    let mut order: Vec<usize> = (0..observations.len()).collect();
    let temperature = |i: usize| observations[i].temperature.0;
    sort_by(&mut order, |i| temperature(*i));
    let (mut temperatures, mut pure) = (0, 0.0);
    for alike in order.chunk_by(|a, b| temperature(*a) == temperature(*b)) {
        temperatures += 1;
        let total: f64 = alike.iter().map(|&i| fitted.weights[i]).sum();
        let weighted = |i: &usize| fitted.weights[*i] * fitted.residuals[*i];
        let mean = alike.iter().map(weighted).sum::<f64>() / total;
        pure += alike
            .iter()
            .map(|&i| fitted.weights[i] * (fitted.residuals[i] - mean).powi(2))
            .sum::<f64>();
    }
    let denominator = observations.len() - temperatures;
    let numerator = temperatures.checked_sub(fitted.law.parameters()).filter(|n| *n > 0)?;
    let all: f64 = fitted.residuals.iter().zip(&fitted.weights).map(|(r, w)| w * r * r).sum();
    if denominator == 0 || pure <= ROUNDING_SHARE * all {
        return None;
    }
    let f = ((all - pure).max(0.0) / numerator as f64) / (pure / denominator as f64);
    Some(LackOfFitTest {
        f,
        numerator,
        denominator,
        p: f_tail(f, numerator as f64, denominator as f64),
    })
}

/// The activation energy at T0 in J/mol if k itself, not ln k, scatters alike at all
/// temperatures: least squares on k by Gauss–Newton from the fitted law; none where it does not
/// settle or the law has more than two parameters.
pub fn activation_energy_on_rates(fitted: &FittedLaw, observations: &[Observation]) -> Option<f64> {
    const MOST_ROUNDS: usize = 100;
    if fitted.law.parameters() != 2 {
        return None;
    }
    let contrasts: Vec<_> =
        observations.iter().map(|o| fitted.ln_rate_contrast(o.temperature)).collect();
    let largest = observations.iter().map(|o| o.ln_rate).fold(f64::NEG_INFINITY, f64::max);
    let mut parameters = fitted.parameters.clone();
    for _ in 0..MOST_ROUNDS {
        // About the present law k ≈ k̂(1 + δ ln k): a weighted fit of the correction.
        let rates: Vec<f64> =
            contrasts.iter().map(|c| libm::exp(c.at(&parameters) - largest)).collect();
        let design = DMatrix::from_fn(observations.len(), 2, |row, column| {
            contrasts[row].coefficients[column]
        });
        let correction: Vec<f64> = observations
            .iter()
            .zip(&rates)
            .map(|(o, rate)| libm::exp(o.ln_rate - largest) / rate - 1.0)
            .collect();
        let weights: Vec<f64> = rates.iter().map(|rate| (rate * rate).max(1e-200)).collect();
        let step = least_squares::fit(&design, &correction, &weights).ok()?;
        for (parameter, change) in parameters.iter_mut().zip(step.coefficients.iter()) {
            *parameter += change.clamp(-0.5 * parameter.abs() - 1.0, 0.5 * parameter.abs() + 1.0);
        }
        if (step.coefficients[1] / parameters[1]).abs() < 1e-10 {
            return Some(parameters[1]);
        }
    }
    None
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::quantity::Kelvin;
    use crate::temperature_law::{ScatterChoice, TemperatureLaw, fit};

    fn runs(bend: f64, slip: f64) -> (FittedLaw, Vec<Observation>) {
        let noise = [0.02, -0.03, 0.01, 0.03, -0.02, -0.01];
        let observations: Vec<Observation> = noise
            .iter()
            .enumerate()
            .map(|(i, e)| {
                let t = 320.0 + 8.0 * i as f64;
                let x = 1.0 / t - 1.0 / 340.0;
                let slipped = if i == 5 { slip } else { 0.0 };
                let ln_rate = -3.0 - 1.0e4 * x + bend * x * x * 1e6 + e + slipped;
                Observation::new(Kelvin(t), ln_rate, None)
            })
            .collect();
        let fitted =
            fit(TemperatureLaw::Arrhenius, &observations, ScatterChoice::Automatic).unwrap();
        (fitted, observations)
    }

    #[test]
    fn a_bend_is_seen_and_a_line_is_not_bent() {
        let (fitted, observations) = runs(0.0, 0.0);
        assert!(curvature(&fitted, &observations).unwrap().p > 0.05);
        let (fitted, observations) = runs(20.0, 0.0);
        assert!(curvature(&fitted, &observations).unwrap().p < 0.01);
        assert_eq!(curvature(&fitted, &observations[..3]), None);
    }

    /// Deleting the run must move the fit as Cook's distance says:
    /// D = (β − β₋ᵢ)ᵀ XᵀX (β − β₋ᵢ)/(p s²).
    #[test]
    fn cooks_distance_is_the_shift_of_the_fit() {
        let (fitted, observations) = runs(0.0, 0.8);
        let worst = influential(&fitted)[0];
        assert_eq!(worst.run, 5);
        let without = fit(fitted.law, &observations[..5], ScatterChoice::Automatic).unwrap();
        let shift: f64 = observations
            .iter()
            .map(|o| fitted.ln_rate(o.temperature) - without.ln_rate(o.temperature))
            .map(|d| d * d)
            .sum();
        let variance = fitted.components[0].run_variance;
        assert!((worst.cooks_distance / (shift / (2.0 * variance)) - 1.0).abs() < 1e-8);
        // The externally studentised residual is the misfit against the line without the run.
        let misfit = observations[5].ln_rate - without.ln_rate(observations[5].temperature);
        let contrast = without.ln_rate_contrast(observations[5].temperature);
        let own = without.standard_error(&contrast).unwrap();
        let expected = misfit / (own * own + without.components[0].run_variance).sqrt();
        assert!((worst.studentised_residual / expected.abs() - 1.0).abs() < 1e-8);
        assert!(influential(&runs(0.0, 0.0).0).is_empty());
    }

    #[test]
    fn replicates_that_agree_with_each_other_and_not_with_the_law_are_seen() {
        let at = |t: f64, y: f64| Observation::new(Kelvin(t), y, None);
        let good = [
            at(320.0, -5.0),
            at(320.0, -4.9),
            at(330.0, -4.05),
            at(330.0, -3.95),
            at(340.0, -3.1),
            at(340.0, -3.0),
        ];
        let law = |runs: &[Observation]| {
            fit(TemperatureLaw::Arrhenius, runs, ScatterChoice::Automatic).unwrap()
        };
        let test = lack_of_fit(&law(&good), &good).unwrap();
        assert_eq!((test.numerator, test.denominator), (1, 3));
        assert!(test.p > 0.05);
        let mut bent = good;
        for run in &mut bent[2..4] {
            run.ln_rate += 1.0;
        }
        assert!(lack_of_fit(&law(&bent), &bent).unwrap().p < 0.01);
        assert_eq!(lack_of_fit(&law(&good[..4]), &good[..4]), None);
    }

    /// Against a search over the energy, the rate at T0 solved for each.
    #[test]
    fn the_fit_on_rates_is_the_least_sum_of_squares_in_k() {
        let (fitted, observations) = runs(0.0, 0.3);
        let found = activation_energy_on_rates(&fitted, &observations).unwrap();
        let misfit = |energy: f64| {
            let shape =
                |o: &Observation| (fitted.ln_rate_contrast(o.temperature).at(&[0.0, energy])).exp();
            let (above, below) = observations.iter().fold((0.0, 0.0), |(a, b), o| {
                (a + o.ln_rate.exp() * shape(o), b + shape(o).powi(2))
            });
            let scale = above / below;
            observations.iter().map(|o| (o.ln_rate.exp() - scale * shape(o)).powi(2)).sum::<f64>()
        };
        assert!(misfit(found) < misfit(found * 1.000_1));
        assert!(misfit(found) < misfit(found * 0.999_9));
    }
}
