//! A fitted law: its parameters, what is known of their uncertainty, and intervals for
//! anything linear in them.
//!
//! Whatever the scatter choice, the uncertainty is a weighted mixture of components, each
//! a location and a scale for every linear target: one component with Student's t (from
//! the residuals), one with the normal (as stated), many with the normal (stated errors
//! plus a run-to-run scatter known only through the data). An interval is read off the
//! mixture's distribution function.

use nalgebra::DMatrix;

use super::{Contrast, Settings, TemperatureLaw};
use crate::measurements::Observation;
use crate::numeric::distributions::{
    normal_cdf, normal_density, normal_quantile, student_t_cdf, student_t_density,
    student_t_quantile,
};
use crate::numeric::roots::smooth_crossing;
use crate::quantity::{JoulesPerMole, Kelvin};
use crate::temperature_law::Scatter;

/// The standard distribution that each component scales and shifts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Kernel {
    /// Standard normal.
    Normal,
    /// Student's t with these degrees of freedom.
    StudentT(f64),
}

impl Kernel {
    fn cdf(self, x: f64) -> f64 {
        match self {
            Self::Normal => normal_cdf(x),
            Self::StudentT(degrees) => student_t_cdf(x, degrees),
        }
    }

    fn density(self, x: f64) -> f64 {
        match self {
            Self::Normal => normal_density(x),
            Self::StudentT(degrees) => student_t_density(x, degrees),
        }
    }

    fn quantile(self, probability: f64) -> f64 {
        match self {
            Self::Normal => normal_quantile(probability),
            Self::StudentT(degrees) => student_t_quantile(probability, degrees),
        }
    }
}

/// What the data say if the run-to-run scatter is `run_to_run_sd`.
#[derive(Debug, Clone, PartialEq)]
pub struct Component {
    /// Share of the mixture, 0 to 1; all shares add to 1.
    pub weight: f64,
    /// Run-to-run standard deviation of ln k that this component assumes.
    pub run_to_run_sd: f64,
    /// Fitted parameters, p.
    pub parameters: Vec<f64>,
    /// Their covariance, p × p.
    pub covariance: DMatrix<f64>,
    /// Variance of ln k that one future run adds of its own.
    pub run_variance: f64,
}

/// Whose uncertainty an interval covers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Target {
    /// The law itself: the mean of many runs.
    Mean,
    /// One future run, which scatters about the law.
    NextRun,
}

/// A law fitted to runs, or a known one.
#[derive(Debug, Clone, PartialEq)]
pub struct FittedLaw {
    /// Which form.
    pub law: TemperatureLaw,
    /// T0, where the parameters are stated.
    pub reference: Kelvin,
    /// Best estimate of the parameters, p.
    pub parameters: Vec<f64>,
    /// Covariance of the estimate, p × p; absent where no scatter is known.
    pub covariance: Option<DMatrix<f64>>,
    /// n − p; absent for a known law.
    pub degrees_of_freedom: Option<usize>,
    /// Where the intervals come from.
    pub scatter: Scatter,
    /// The distribution behind the intervals.
    pub kernel: Kernel,
    /// Empty where no scatter is known: then there are no intervals.
    pub components: Vec<Component>,
    /// Best estimate of the run-to-run standard deviation of ln k, where it is estimated.
    pub run_to_run_sd: Option<f64>,
    /// Σ (r/s)² with the stated errors alone, and its upper tail probability.
    pub chi_squared: Option<(f64, f64)>,
    /// Residuals of ln k, one a run.
    pub residuals: Vec<f64>,
    /// Weights of the estimate, one a run.
    pub weights: Vec<f64>,
    /// Diagonal of the hat matrix, one a run.
    pub leverages: Vec<f64>,
    /// The runs it was fitted to; none for a known law.
    pub runs: Vec<Observation>,
    /// How it was fitted.
    pub settings: Settings,
}

impl FittedLaw {
    /// A law that is given, not fitted: ln k at `reference` and the activation energy in J/mol,
    /// each with its standard deviation. Without both of these there are no intervals.
    pub fn known(
        law: TemperatureLaw,
        reference: Kelvin,
        ln_rate: (f64, Option<f64>),
        activation_energy: (f64, Option<f64>),
    ) -> Self {
        let parameters = vec![ln_rate.0, activation_energy.0];
        let covariance = ln_rate.1.zip(activation_energy.1).map(|(ln_sd, energy_sd)| {
            DMatrix::from_row_slice(2, 2, &[ln_sd * ln_sd, 0.0, 0.0, energy_sd * energy_sd])
        });
        let component = |covariance: &DMatrix<f64>| Component {
            weight: 1.0,
            run_to_run_sd: 0.0,
            parameters: parameters.clone(),
            covariance: covariance.clone(),
            run_variance: 0.0,
        };
        Self {
            law,
            reference,
            scatter: if covariance.is_some() { Scatter::AsStated } else { Scatter::NoneKnown },
            kernel: Kernel::Normal,
            components: covariance.iter().map(component).collect(),
            parameters,
            covariance,
            degrees_of_freedom: None,
            run_to_run_sd: None,
            chi_squared: None,
            residuals: Vec::new(),
            weights: Vec::new(),
            leverages: Vec::new(),
            runs: Vec::new(),
            settings: Settings::default(),
        }
    }

    /// Best estimate of a linear target.
    pub fn estimate(&self, target: &Contrast) -> f64 {
        target.at(&self.parameters)
    }

    /// Best estimate of ln k at a temperature.
    pub fn ln_rate(&self, temperature: Kelvin) -> f64 {
        self.estimate(&self.ln_rate_contrast(temperature))
    }

    /// ln k(T) as a linear target.
    pub fn ln_rate_contrast(&self, temperature: Kelvin) -> Contrast {
        self.law.ln_rate(temperature, self.reference)
    }

    /// Best estimate of the apparent activation energy at a temperature.
    pub fn activation_energy(&self, temperature: Kelvin) -> JoulesPerMole {
        JoulesPerMole(self.estimate(&self.law.activation_energy(temperature, self.reference)))
    }

    /// Whether anything is known about scatter.
    pub fn has_intervals(&self) -> bool {
        !self.components.is_empty()
    }

    /// Standard error of a linear target at the best estimate.
    pub fn standard_error(&self, target: &Contrast) -> Option<f64> {
        self.covariance.as_ref().map(|c| quadratic_form(target, c).sqrt())
    }

    /// The value that the target stays below with `probability`; none where no scatter is known.
    pub fn quantile(&self, target: &Contrast, whose: Target, probability: f64) -> Option<f64> {
        let spread = self.spread(target, whose);
        let standard = self.kernel.quantile(probability);
        let ends = || spread.iter().map(|s| s.location + s.scale * standard);
        let low = ends().reduce(f64::min)?;
        let high = ends().reduce(f64::max)?;
        if low == high {
            return Some(low);
        }
        // The mixture's quantile lies between the smallest and largest of its components', and
        // near their mean.
        let distribution = |value: f64| {
            spread.iter().fold((0.0, 0.0), |(below, density), s| {
                let (own_below, own_density) = s.distribution(self.kernel, value);
                (below + own_below, density + own_density)
            })
        };
        let start = spread.iter().map(|s| s.weight * (s.location + s.scale * standard)).sum();
        Some(smooth_crossing(distribution, probability, (low, start, high)))
    }

    /// The probability that the target stays below `value`; none where no scatter is known.
    pub fn probability_below(&self, target: &Contrast, whose: Target, value: f64) -> Option<f64> {
        let spread = self.spread(target, whose);
        let below = spread.iter().map(|s| s.distribution(self.kernel, value).0).sum();
        self.has_intervals().then_some(below)
    }

    /// What each component says of a target.
    fn spread(&self, target: &Contrast, whose: Target) -> Vec<Spread> {
        let of = |component: &Component| {
            let own = match whose {
                Target::Mean => 0.0,
                Target::NextRun => target.runs * component.run_variance,
            };
            let variance = quadratic_form(target, &component.covariance) + own;
            Spread {
                weight: component.weight,
                location: target.at(&component.parameters),
                scale: variance.max(0.0).sqrt(),
            }
        };
        self.components.iter().map(of).collect()
    }

    /// Two-sided interval of a linear target at `level` (0.95 for 95 %).
    pub fn interval(&self, target: &Contrast, whose: Target, level: f64) -> Option<(f64, f64)> {
        let tail = 0.5 * (1.0 - level);
        Some((self.quantile(target, whose, tail)?, self.quantile(target, whose, 1.0 - tail)?))
    }
}

/// A component seen along one target.
struct Spread {
    weight: f64,
    location: f64,
    scale: f64,
}

impl Spread {
    /// Its share of the probability below `value`, and of the density there.
    fn distribution(&self, kernel: Kernel, value: f64) -> (f64, f64) {
        if self.scale > 0.0 {
            let standard = (value - self.location) / self.scale;
            (
                self.weight * kernel.cdf(standard),
                self.weight * kernel.density(standard) / self.scale,
            )
        } else if value >= self.location {
            (self.weight, 0.0)
        } else {
            (0.0, 0.0)
        }
    }
}

/// lᵀ C l.
fn quadratic_form(target: &Contrast, covariance: &DMatrix<f64>) -> f64 {
    let parameters = covariance.nrows();
    let mut sum = 0.0;
    for i in 0..parameters {
        for j in 0..parameters {
            sum += target.coefficients[i] * covariance[(i, j)] * target.coefficients[j];
        }
    }
    sum
}
