//! How a rate constant depends on temperature.
//!
//! Every law is written about a reference temperature T0 in the same two parameters,
//! β₁ = ln k(T0) and β₂ = Ea(T0), the apparent activation energy −R d ln k/d(1/T) there.
//! With x = 1/T:
//!
//! | law | ln k(T) − β₁ |
//! | --- | --- |
//! | Arrhenius | −(β₂/R)(x − x0) |
//! | with T^m, A·T^m·e^(−E/RT) | m[ln(T/T0) + T0(x − x0)] − (β₂/R)(x − x0) |
//! | Eyring | the same with m = 1 |
//! | log-linear, 10^(T/z) | β₂/(R T0²)·(T − T0) |
//! | curved | −(β₂/R)(x − x0) + β₃(x − x0)² |
//!
//! so that all are linear in their parameters, and the rate and the energy at the same
//! temperature are compared whichever law is chosen. Centring keeps β₁ and β₂ nearly
//! uncorrelated (Schwaab & Pinto, Chem. Eng. Sci. 2007, 62, 2750).

mod averaged;
mod diagnostics;
mod fitted;
mod inverse;
mod likelihood;
mod scatter;
mod thermometer;

pub use diagnostics::{
    CurvatureTest, Influence, LackOfFitTest, activation_energy_on_rates, curvature,
    curvature_beyond_errors, influential, lack_of_fit,
};
pub use fitted::{Component, FittedLaw, Kernel, Target};
pub use inverse::TemperatureSet;
pub use likelihood::aicc;
pub use scatter::{LawError, Scatter, ScatterChoice, Settings, fit};
pub use thermometer::thermometer_share;

use crate::constants::{BOLTZMANN_OVER_PLANCK, MOLAR_GAS_CONSTANT};
use crate::quantity::Kelvin;

/// The forms of ln k(T) that can be fitted.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum TemperatureLaw {
    /// S. Arrhenius, Z. Phys. Chem. 1889, 4, 226.
    Arrhenius,
    /// H. Eyring, J. Chem. Phys. 1935, 3, 107.
    Eyring,
    /// k = A T^m exp(−E/RT) with the power m fixed.
    ArrheniusWithPower(f64),
    /// log10 k linear in T: the D and z of thermal processing.
    LogLinear,
    /// Arrhenius with a term in (1/T − 1/T0)².
    Curved,
}

/// The largest number of parameters that a law has.
pub const MAX_PARAMETERS: usize = 3;

/// A quantity that is linear in a law's parameters: constant + Σ cⱼβⱼ.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Contrast {
    /// The part that no parameter enters.
    pub constant: f64,
    /// One factor a parameter; zero beyond the law's number of parameters.
    pub coefficients: [f64; MAX_PARAMETERS],
    /// How many future runs enter, each with its own run-to-run scatter.
    pub runs: f64,
}

impl Contrast {
    /// This quantity minus another, as in ln k(T₂) − ln k(T₁).
    pub fn minus(self, other: Self) -> Self {
        let mut coefficients = self.coefficients;
        for (own, others) in coefficients.iter_mut().zip(other.coefficients) {
            *own -= others;
        }
        Self {
            constant: self.constant - other.constant,
            coefficients,
            runs: self.runs + other.runs,
        }
    }

    /// constant + Σ cⱼβⱼ.
    pub fn at(&self, parameters: &[f64]) -> f64 {
        let linear: f64 = self.coefficients.iter().zip(parameters).map(|(c, b)| c * b).sum();
        self.constant + linear
    }
}

impl TemperatureLaw {
    /// The code in study and findings.
    pub fn code(self) -> &'static str {
        match self {
            Self::Arrhenius => "arrhenius",
            Self::Eyring => "eyring",
            Self::ArrheniusWithPower(_) => "arrhenius-with-power",
            Self::LogLinear => "log-linear",
            Self::Curved => "curved",
        }
    }

    /// How many parameters are fitted.
    pub fn parameters(self) -> usize {
        match self {
            Self::Curved => 3,
            _ => 2,
        }
    }

    /// ln k(T) in terms of the parameters at `reference`.
    pub fn ln_rate(self, temperature: Kelvin, reference: Kelvin) -> Contrast {
        let (t, t0) = (temperature.0, reference.0);
        let x = 1.0 / t - 1.0 / t0;
        let power_term = |m: f64| m * (libm::log(t / t0) + t0 * x);
        let (constant, energy, curvature) = match self {
            Self::Arrhenius => (0.0, -x / MOLAR_GAS_CONSTANT, 0.0),
            Self::Eyring => (power_term(1.0), -x / MOLAR_GAS_CONSTANT, 0.0),
            Self::ArrheniusWithPower(m) => (power_term(m), -x / MOLAR_GAS_CONSTANT, 0.0),
            Self::LogLinear => (0.0, (t - t0) / (MOLAR_GAS_CONSTANT * t0 * t0), 0.0),
            Self::Curved => (0.0, -x / MOLAR_GAS_CONSTANT, x * x),
        };
        Contrast { constant, coefficients: [1.0, energy, curvature], runs: 1.0 }
    }

    /// The apparent activation energy −R d ln k/d(1/T) at T, J/mol.
    pub fn activation_energy(self, temperature: Kelvin, reference: Kelvin) -> Contrast {
        let (t, t0) = (temperature.0, reference.0);
        let x = 1.0 / t - 1.0 / t0;
        let (constant, energy, curvature) = match self {
            Self::Arrhenius => (0.0, 1.0, 0.0),
            Self::Eyring => (MOLAR_GAS_CONSTANT * (t - t0), 1.0, 0.0),
            Self::ArrheniusWithPower(m) => (m * MOLAR_GAS_CONSTANT * (t - t0), 1.0, 0.0),
            Self::LogLinear => (0.0, (t / t0) * (t / t0), 0.0),
            Self::Curved => (0.0, 1.0, -2.0 * MOLAR_GAS_CONSTANT * x),
        };
        Contrast { constant, coefficients: [0.0, energy, curvature], runs: 0.0 }
    }

    /// ln A, where A = k(T0)·exp(Ea(T0)/(R T0)): the intercept of the tangent at T0.
    pub fn ln_pre_exponential_factor(self, reference: Kelvin) -> Contrast {
        Contrast {
            constant: 0.0,
            coefficients: [1.0, 1.0 / (MOLAR_GAS_CONSTANT * reference.0), 0.0],
            runs: 0.0,
        }
    }

    /// ΔH‡ = Ea − R T at the reference temperature, J/mol (solution or unimolecular; Eyring).
    pub fn enthalpy_of_activation(self, reference: Kelvin) -> Contrast {
        Contrast {
            constant: -MOLAR_GAS_CONSTANT * reference.0,
            coefficients: [0.0, 1.0, 0.0],
            runs: 0.0,
        }
    }

    /// ΔS‡ at the reference temperature, J/(mol K), for k in (mol/L)^(1−n)/s with κ = 1 and the
    /// standard concentration 1 mol/L: R ln(k h/(k_B T)) + ΔH‡/T (Eyring).
    pub fn entropy_of_activation(self, reference: Kelvin) -> Contrast {
        let r = MOLAR_GAS_CONSTANT;
        Contrast {
            constant: -r * (libm::log(BOLTZMANN_OVER_PLANCK * reference.0) + 1.0),
            coefficients: [r, 1.0 / reference.0, 0.0],
            runs: 0.0,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const LAWS: [TemperatureLaw; 5] = [
        TemperatureLaw::Arrhenius,
        TemperatureLaw::Eyring,
        TemperatureLaw::ArrheniusWithPower(-2.5),
        TemperatureLaw::LogLinear,
        TemperatureLaw::Curved,
    ];
    const REFERENCE: Kelvin = Kelvin(330.0);
    const PARAMETERS: [f64; 3] = [-9.0, 85_000.0, 4.0e5];

    #[test]
    fn parameters_are_rate_and_energy_at_the_reference() {
        for law in LAWS {
            assert_eq!(law.ln_rate(REFERENCE, REFERENCE).at(&PARAMETERS), PARAMETERS[0], "{law:?}");
            assert_eq!(law.activation_energy(REFERENCE, REFERENCE).at(&PARAMETERS), PARAMETERS[1]);
        }
    }

    /// Central differences in 1/T; their error here is below 1e-6 of the energy.
    #[test]
    fn activation_energy_is_the_slope_of_the_law() {
        for law in LAWS {
            for t in [280.0, 330.0, 400.0] {
                let step = 1e-7;
                let at = |x: f64| law.ln_rate(Kelvin(1.0 / x), REFERENCE).at(&PARAMETERS);
                let slope = (at(1.0 / t + step) - at(1.0 / t - step)) / (2.0 * step);
                let energy = law.activation_energy(Kelvin(t), REFERENCE).at(&PARAMETERS);
                assert!((-MOLAR_GAS_CONSTANT * slope / energy - 1.0).abs() < 1e-6, "{law:?} {t}");
            }
        }
    }

    #[test]
    fn eyring_parameters_give_the_rate_back() {
        let law = TemperatureLaw::Eyring;
        let enthalpy = law.enthalpy_of_activation(REFERENCE).at(&PARAMETERS);
        let entropy = law.entropy_of_activation(REFERENCE).at(&PARAMETERS);
        for t in [290.0, 330.0, 390.0] {
            let eyring = (BOLTZMANN_OVER_PLANCK * t).ln() + entropy / MOLAR_GAS_CONSTANT
                - enthalpy / (MOLAR_GAS_CONSTANT * t);
            let found = law.ln_rate(Kelvin(t), REFERENCE).at(&PARAMETERS);
            assert!((found - eyring).abs() < 1e-9);
        }
    }
}
