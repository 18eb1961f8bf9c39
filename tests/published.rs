//! Checks against published standards, handbooks and data sets, run natively and as wasm.
//!
//! Each check names its source and says what its tolerance is made of.

#[path = "published/errors_in_both.rs"]
mod errors_in_both;
#[path = "published/linear_fit.rs"]
mod linear_fit;
#[path = "published/rate_constants.rs"]
mod rate_constants;
#[path = "published/rules.rs"]
mod rules;
