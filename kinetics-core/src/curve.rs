//! The law as points to draw: rates and times against temperature, with limits and grounds.

use crate::answer::{Basis, Refusal};
use crate::grounds::Grounds;
use crate::quantity::Kelvin;
use crate::temperature_law::Target;

/// One point of a curve; evenly spaced in 1/T.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CurvePoint {
    /// Temperature.
    pub temperature: Kelvin,
    /// ln of the quantity: of k in the base unit, or of a time in s.
    pub ln_value: f64,
    /// Limits of ln of the quantity, for the law's mean; none where no scatter is known.
    pub limits: Option<(f64, f64)>,
    /// What the point stands on.
    pub grounds: Grounds,
}

/// ln k from the colder to the hotter end in `points` ≥ 2 points.
pub fn ln_rates(basis: &Basis, coldest: Kelvin, hottest: Kelvin, points: usize) -> Vec<CurvePoint> {
    let last = points.max(2) - 1;
    (0..=last)
        .map(|i| {
            let share = i as f64 / last as f64;
            let temperature = Kelvin(1.0 / ((1.0 - share) / coldest.0 + share / hottest.0));
            let contrast = basis.law.ln_rate_contrast(temperature);
            CurvePoint {
                temperature,
                ln_value: basis.law.estimate(&contrast),
                limits: basis.law.interval(&contrast, Target::Mean, basis.level),
                grounds: basis.support.grounds(temperature),
            }
        })
        .collect()
}

/// ln t at which the fraction `extent` is gone, made from a curve of ln k.
///
/// # Errors
/// The refusal of [`Basis::ln_theta`].
pub fn ln_times(
    basis: &Basis,
    ln_rates: &[CurvePoint],
    extent: f64,
) -> Result<Vec<CurvePoint>, Refusal> {
    let ln_theta = basis.ln_theta(extent)?;
    Ok(ln_rates
        .iter()
        .map(|point| CurvePoint {
            ln_value: ln_theta - point.ln_value,
            limits: point.limits.map(|(low, high)| (ln_theta - high, ln_theta - low)),
            ..*point
        })
        .collect())
}
