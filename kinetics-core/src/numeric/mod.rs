//! Numerical methods that know no chemistry.

pub mod decimals;
pub mod distributions;
pub mod errors_in_both;
pub mod least_squares;
pub mod nonlinear;
pub mod roots;
pub mod sorting;
