//! Physical constants: exact since the 2019 SI (CODATA 2018 and 2022).

/// Molar gas constant, J/(mol K).
pub const MOLAR_GAS_CONSTANT: f64 = 8.314_462_618_153_24;
/// Boltzmann constant over Planck constant, 1/(K s).
pub const BOLTZMANN_OVER_PLANCK: f64 = 1.380_649e-23 / 6.626_070_15e-34;
/// 0 °C in K.
pub const ZERO_CELSIUS_KELVIN: f64 = 273.15;
