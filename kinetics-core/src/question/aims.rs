//! What a further measurement is to narrow, for the questions that speak of a rate.

use super::Blanks;
use crate::answer::{Basis, Refusal};
use crate::next_measurement::Aim;

/// ln k at one temperature less ln k at another, on both sides.
pub(super) fn ratio(
    blanks: &Blanks,
    basis: &Basis,
    at: &str,
    against: &str,
) -> Result<Aim, Refusal> {
    let against = Some(blanks.temperature(against)?);
    Ok(Aim { against, ..Aim::two_sided(blanks.temperature(at)?, basis.level) })
}

/// ln k at `temperature`, on both sides.
pub(super) fn rate(blanks: &Blanks, basis: &Basis) -> Result<Aim, Refusal> {
    Ok(Aim::two_sided(blanks.temperature("temperature")?, basis.level))
}

/// The same on the side that counts, for whom the question is asked.
pub(super) fn bound(blanks: &Blanks, basis: &Basis) -> Result<Aim, Refusal> {
    Ok(Aim::one_sided(blanks.temperature("temperature")?, blanks.bound, basis.level))
}
