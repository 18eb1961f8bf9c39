//! Units: how each is spelled, printed and turned into the internal one.
//!
//! Internally temperatures are in K, times in s, energies in J/mol. Every unit
//! has a *code*, plain enough for files and keyboards (`L/(mol s)`), and a
//! *symbol* for the eye (`L mol⁻¹ s⁻¹`); [`parse`](TimeUnit::parse) reads both,
//! and the many other spellings that people paste.

mod concentration;
mod energy;
pub(crate) mod expression;
mod heat;
mod named;
mod rate;
mod symbols;
mod temperature;
mod time;

pub use concentration::{ConcentrationKind, ConcentrationUnit};
pub use energy::EnergyUnit;
pub use heat::{HeatCapacityUnit, HeatRateUnit, HeatUnit, HeatingRateUnit};
pub use rate::RateUnit;
pub use temperature::TemperatureUnit;
pub use time::TimeUnit;

use named::unit_list;

/// Why a unit, or a quantity with a unit, could not be used.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum UnitError {
    /// The spelling is none that is known.
    #[error("“{found}” is not a unit of {subject} known here; expected {accepted}")]
    Unknown {
        /// What the unit should measure, as in "time".
        subject: &'static str,
        /// The spelling met.
        found: String,
        /// Units that would have been accepted.
        accepted: String,
    },
    /// The number is infinite or not a number.
    #[error("the {subject} {found} is not a finite number")]
    NotFinite {
        /// What was being read, as in "time".
        subject: &'static str,
        /// The value with its unit.
        found: String,
    },
    /// The temperature is at or below absolute zero.
    #[error("{found} is not above absolute zero (0 K, −273.15 °C, −459.67 °F)")]
    NotAboveAbsoluteZero {
        /// The value with its unit.
        found: String,
    },
}

impl UnitError {
    /// An unknown spelling, with the accepted ones joined into a list.
    pub(crate) fn unknown<'a>(
        subject: &'static str,
        found: &str,
        accepted: impl IntoIterator<Item = &'a str>,
    ) -> UnitError {
        UnitError::Unknown {
            subject,
            found: crate::problem::shortened(found),
            accepted: either(accepted),
        }
    }
}

/// Whether a text is made of symbols of units alone, of whatever dimension.
pub(crate) fn is_unit(text: &str) -> bool {
    TemperatureUnit::parse(text).is_ok()
        || expression::readings(text)
            .first()
            .is_some_and(|unit| unit.scale == 1.0 && !unit.factors.is_empty())
}

/// Reads a unit of inverse temperature: how many 1/K it is, as in `10⁻³ K⁻¹`.
pub(crate) fn inverse_kelvin_scale(text: &str) -> Option<f64> {
    let reading = expression::readings(text).into_iter().next()?;
    (reading.factors == [("K", -1.0)]).then_some(reading.scale)
}

/// "a, b or c".
fn either<'a>(words: impl IntoIterator<Item = &'a str>) -> String {
    let words: Vec<&str> = words.into_iter().collect();
    match words.split_last() {
        None => String::new(),
        Some((last, [])) => (*last).to_string(),
        Some((last, others)) => format!("{} or {last}", others.join(", ")),
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn an_unknown_spelling_says_what_was_found_and_what_is_accepted() {
        let message = TimeUnit::parse("fortnight").unwrap_err().to_string();
        assert_eq!(
            message,
            "“fortnight” is not a unit of time known here; expected s, min, h, d, wk, mo or yr"
        );
    }

    #[test]
    fn lists_are_joined_with_or() {
        assert_eq!(either([]), "");
        assert_eq!(either(["a"]), "a");
        assert_eq!(either(["a", "b"]), "a or b");
        assert_eq!(either(["a", "b", "c"]), "a, b or c");
    }
}
