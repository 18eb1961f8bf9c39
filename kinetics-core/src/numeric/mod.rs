//! Numerical methods that know no chemistry.
