//! Numerical methods that know no chemistry.

pub mod distributions;
pub mod least_squares;
pub mod roots;
