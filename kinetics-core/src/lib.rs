//! Temperature dependence of reaction rates: from pasted measurements to
//! answers with intervals, and what they stand on.
//!
//! The modules in the order in which data flows; each imports only from those
//! above it. Internally temperatures are in K, times in s, energies in J/mol,
//! amounts of concentration in mol/L unless a unit says otherwise.

// 0 · knows no chemistry
pub mod numeric;

// 1 · vocabulary
pub mod problem;
pub mod quantity;
pub mod units;
