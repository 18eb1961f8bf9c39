//! Random errors of the thermometer, each run its own: where stated errors are all there is,
//! the law is the line with errors in both coordinates of York et al., Am. J. Phys. 2004, 72,
//! 367.

use nalgebra::DMatrix;

use super::scatter::Problem;
use super::{FittedLaw, LawError, Scatter};
use crate::constants::MOLAR_GAS_CONSTANT;
use crate::numeric::errors_in_both::{self, Point};
use crate::numeric::least_squares::LinearFit;
use crate::quantity::Kelvin;

/// Rounds of T0 and weights with a thermometer's error; they settle in a handful.
const ROUNDS: usize = 30;

impl Problem {
    /// Errors in both coordinates: the line of York et al. 2004 where the law has two
    /// parameters, effective weights where it has three.
    pub(super) fn as_stated_with_thermometer(
        &self,
        sd: &[f64],
        thermometer_sd_kelvin: f64,
    ) -> Result<FittedLaw, LawError> {
        // Weights depend on the slope and T0 on the weights: a few rounds settle both to
        // rounding, since T0 only labels the line.
        let mut weights = self.weights(sd, 0.0);
        let mut reference = self.reference(&weights);
        let mut fit = self.solve(reference, &weights)?;
        for _ in 0..ROUNDS {
            let line = self.line_with_thermometer(sd, thermometer_sd_kelvin, reference, &fit);
            weights = match &line {
                Some(line) => line.weights.clone(),
                None => self.effective_weights(sd, thermometer_sd_kelvin, reference, &fit),
            };
            let settled = self.reference(&weights);
            fit = self.solve(reference, &weights)?;
            if let Some(line) = line {
                fit.coefficients[0] = line.intercept;
                fit.coefficients[1] = line.slope;
                fit.covariance = DMatrix::from_fn(2, 2, |i, j| line.covariance[i][j]);
                fit.weighted_sum_of_squares = line.weighted_sum_of_squares;
            }
            if (settled.0 / reference.0 - 1.0).abs() < 1e-12 {
                break;
            }
            reference = settled;
        }
        let mut fitted = self.standing_on_stated(reference, weights, fit);
        fitted.residuals = self
            .temperatures
            .iter()
            .zip(&self.ln_rates)
            .map(|(t, y)| y - fitted.ln_rate(*t))
            .collect();
        Ok(fitted)
    }

    /// Each run's temperature error seen on the ln k scale: (Ea(T)/(R T²))·u.
    fn temperature_sds(&self, u: f64, reference: Kelvin, fit: &LinearFit) -> Vec<f64> {
        self.temperatures
            .iter()
            .map(|t| {
                let energy = self.law.activation_energy(*t, reference);
                energy.at(fit.coefficients.as_slice()) / (MOLAR_GAS_CONSTANT * t.0 * t.0) * u
            })
            .collect()
    }

    fn line_with_thermometer(
        &self,
        sd: &[f64],
        u: f64,
        reference: Kelvin,
        fit: &LinearFit,
    ) -> Option<errors_in_both::Line> {
        if self.law.parameters() != 2 {
            return None;
        }
        let slope = fit.coefficients[1];
        let on_ln_scale = self.temperature_sds(u, reference, fit);
        let points: Vec<Point> = self
            .temperatures
            .iter()
            .zip(&self.ln_rates)
            .zip(sd.iter().zip(&on_ln_scale))
            .map(|((t, ln_rate), (s, from_temperature))| {
                let contrast = self.law.ln_rate(*t, reference);
                Point {
                    x: contrast.coefficients[1],
                    y: ln_rate - contrast.constant,
                    x_variance: (from_temperature / slope).powi(2),
                    y_variance: s * s,
                }
            })
            .collect();
        errors_in_both::fit(&points, slope)
    }

    fn effective_weights(
        &self,
        sd: &[f64],
        u: f64,
        reference: Kelvin,
        fit: &LinearFit,
    ) -> Vec<f64> {
        let on_ln_scale = self.temperature_sds(u, reference, fit);
        sd.iter().zip(&on_ln_scale).map(|(s, t)| 1.0 / (s * s + t * t)).collect()
    }
}

/// How much of the variance of ln k of a run the thermometer makes, on average over the runs:
/// (Ea u/(R T²))² in s² + (Ea u/(R T²))² where stated errors are all there is, else in what the
/// residuals or the run-to-run scatter say, which contain it; none without runs or a scatter.
pub fn thermometer_share(fitted: &FittedLaw) -> Option<f64> {
    let u = fitted.settings.thermometer_sd_kelvin;
    let shares = fitted.runs.iter().map(|run| {
        let t = run.temperature;
        let slope = fitted.activation_energy(t).0 / (MOLAR_GAS_CONSTANT * t.0 * t.0);
        let own = (slope * u).powi(2);
        let stated = run.ln_sd.map(|sd| sd * sd);
        let all = match fitted.scatter {
            Scatter::NoneKnown => None,
            Scatter::FromResiduals => fitted.components.first().map(|c| c.run_variance),
            Scatter::AsStated => stated.map(|variance| variance + own),
            Scatter::AsStatedPlusRunToRun => {
                stated.zip(fitted.run_to_run_sd).map(|(variance, tau)| variance + tau * tau)
            }
        };
        Some(own / all?)
    });
    let mean = shares.sum::<Option<f64>>()? / fitted.runs.len() as f64;
    mean.is_finite().then_some(mean)
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use crate::constants::MOLAR_GAS_CONSTANT;
    use crate::measurements::Observation;
    use crate::quantity::Kelvin;
    use crate::temperature_law::{FittedLaw, ScatterChoice, Settings, TemperatureLaw, fit};

    /// With a thermometer error u, and Ea and T alike for all runs, every run's variance grows by
    /// (E u/(R T²))²; over 30 K that holds to a tenth.
    #[test]
    fn a_thermometer_error_widens_what_stands_on_stated_errors() {
        let settings = |u| Settings { thermometer_sd_kelvin: u, ..ScatterChoice::AsStated.into() };
        let bare = fit(TemperatureLaw::Arrhenius, &runs(), settings(0.0)).unwrap();
        let with = fit(TemperatureLaw::Arrhenius, &runs(), settings(0.5)).unwrap();
        let from_temperature = with.parameters[1] / (MOLAR_GAS_CONSTANT * 338.15 * 338.15) * 0.5;
        let expected = (1.0 + (from_temperature / 0.02).powi(2)).sqrt();
        let width = |law: &FittedLaw| law.covariance.as_ref().unwrap()[(1, 1)].sqrt();
        assert!((width(&with) / width(&bare) / expected - 1.0).abs() < 0.1);
        // Residuals contain it already.
        let residual = |u| Settings { scatter: ScatterChoice::FromResiduals, ..settings(u) };
        let components =
            |u| fit(TemperatureLaw::Arrhenius, &runs(), residual(u)).unwrap().components;
        assert_eq!(components(0.5), components(0.0));
    }

    fn runs() -> Vec<Observation> {
        [(323.15, -4.02), (333.15, -2.88), (343.15, -2.05), (353.15, -1.02)]
            .iter()
            .map(|&(t, y)| Observation::new(Kelvin(t), y, Some(0.02)))
            .collect()
    }
}
