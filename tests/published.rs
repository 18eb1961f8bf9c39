//! Checks against published standards, handbooks and data sets, run natively and as wasm.
//!
//! Each check names its source and says what its tolerance is made of.

#![allow(clippy::unwrap_used)]

#[path = "published/accelerated_life.rs"]
mod accelerated_life;
#[path = "published/errors_in_both.rs"]
mod errors_in_both;
#[path = "published/known_rates.rs"]
mod known_rates;
#[path = "published/linear_fit.rs"]
mod linear_fit;
#[path = "published/linear_laws.rs"]
mod linear_laws;
#[path = "published/nonlinear_fit.rs"]
mod nonlinear_fit;
#[path = "published/progress_curves.rs"]
mod progress_curves;
#[path = "published/rate_constants.rs"]
mod rate_constants;
#[path = "published/rules.rs"]
mod rules;
#[path = "published/thermal_death.rs"]
mod thermal_death;
