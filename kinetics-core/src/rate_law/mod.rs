//! How the rate depends on composition: from θ = ∫k dt to the fraction gone, and back.

mod order;
mod reduced;

pub use order::{ExtentError, Order};
pub use reduced::{RateLaw, Reached};
