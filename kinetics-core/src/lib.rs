//! Temperature dependence of reaction rates: from pasted measurements to
//! answers with intervals, and what they stand on.
//!
//! The modules in the order in which data flows; each imports only from those
//! above it. Internally temperatures are in K, times in s, energies in J/mol,
//! amounts of concentration in mol/L unless a unit says otherwise.

// 0 · knows no chemistry
pub mod numeric;

// 1 · vocabulary
pub mod citation;
pub mod constants;
pub mod problem;
pub mod quantity;
pub mod units;
pub mod wording;

// 2 · from text to a table
pub mod text;

pub mod table;

// 3 · what was observed
pub mod measurements;

// 4 · one run
pub mod rate_constant;
pub mod rate_law;

// 5 · all runs
pub mod one_stage;
pub mod rivals;
pub mod temperature_law;

// 6 · deciding
pub mod answer;
pub mod curve;
pub mod grounds;
pub mod next_measurement;
pub mod question;
pub mod remark;

// 7 · memory
pub mod study;
