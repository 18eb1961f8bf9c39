//! A number with its unit, as a study states it, and the typed numbers that
//! the rest of the core computes with.

use serde::{Deserialize, Serialize};

use crate::units::{
    ConcentrationKind, ConcentrationUnit, EnergyUnit, HeatCapacityUnit, HeatRateUnit, HeatUnit,
    HeatingRateUnit, RateUnit, TemperatureUnit, TimeUnit, UnitError,
};

/// A temperature in K.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct Kelvin(pub f64);

/// A time in s.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct Seconds(pub f64);

/// A molar energy in J/mol.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct JoulesPerMole(pub f64);

/// A number and the unit it was given in. The unit is text, so that a study
/// with a misspelt one still opens; the conversions say what is wrong with it.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Quantity {
    /// The number in `unit`.
    pub value: f64,
    /// The unit, in any spelling that its subject accepts.
    pub unit: String,
}

impl Quantity {
    /// A quantity; nothing is checked before it is converted.
    #[must_use]
    pub fn new(value: f64, unit: impl Into<String>) -> Quantity {
        Quantity { value, unit: unit.into() }
    }

    /// The temperature.
    ///
    /// # Errors
    /// An unknown unit; a number that is not finite, or not above 0 K.
    pub fn kelvin(&self) -> Result<Kelvin, UnitError> {
        let unit = TemperatureUnit::parse(&self.unit)?;
        let temperature_kelvin =
            self.finite(TemperatureUnit::SUBJECT, unit.to_kelvin(self.value))?;
        if temperature_kelvin > 0.0 {
            Ok(Kelvin(temperature_kelvin))
        } else {
            Err(UnitError::NotAboveAbsoluteZero { found: self.to_string() })
        }
    }

    /// A difference of temperatures, in K: a kelvin and a Celsius degree are one.
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn kelvin_difference(&self) -> Result<f64, UnitError> {
        let unit = TemperatureUnit::parse(&self.unit)?;
        self.finite("temperature difference", self.value * unit.kelvins())
    }

    /// The time.
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn seconds(&self) -> Result<Seconds, UnitError> {
        let unit = TimeUnit::parse(&self.unit)?;
        self.finite(TimeUnit::SUBJECT, unit.to_seconds(self.value)).map(Seconds)
    }

    /// The molar energy.
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn joules_per_mole(&self) -> Result<JoulesPerMole, UnitError> {
        let unit = EnergyUnit::parse(&self.unit)?;
        self.finite("energy", unit.to_joules_per_mole(self.value)).map(JoulesPerMole)
    }

    /// The fraction of the whole, from `%`, `1` or `fraction`: 5 % is 0.05.
    ///
    /// # Errors
    /// Any other unit, or a number that is not finite. The range is not checked.
    pub fn fraction(&self) -> Result<f64, UnitError> {
        match ConcentrationUnit::parse(&self.unit) {
            Ok(ConcentrationUnit::Percent) => self.finite("fraction", self.value / 100.0),
            Ok(ConcentrationUnit::Fraction) => self.finite("fraction", self.value),
            _ => Err(UnitError::unknown("fraction", &self.unit, ["%", "1"])),
        }
    }

    /// The concentration in the base unit of its kind, and the kind.
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn concentration(&self) -> Result<(f64, ConcentrationKind), UnitError> {
        let unit = ConcentrationUnit::parse(&self.unit)?;
        let value = self.finite(ConcentrationUnit::SUBJECT, unit.to_base(self.value))?;
        Ok((value, unit.kind()))
    }

    /// The rate constant in its base unit, and that unit.
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn rate_constant(&self) -> Result<(f64, RateUnit), UnitError> {
        let unit = RateUnit::parse(&self.unit)?;
        let value = self.finite(RateUnit::SUBJECT, self.value * unit.to_base())?;
        Ok((value, unit.base()))
    }

    /// The heat per mass, in J/kg.
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn joules_per_kilogram(&self) -> Result<f64, UnitError> {
        let unit = HeatUnit::parse(&self.unit)?;
        self.finite(HeatUnit::SUBJECT, self.value * unit.joules_per_kilogram())
    }

    /// The heat capacity per mass, in J/(kg K).
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn joules_per_kilogram_kelvin(&self) -> Result<f64, UnitError> {
        let unit = HeatCapacityUnit::parse(&self.unit)?;
        self.finite(HeatCapacityUnit::SUBJECT, self.value * unit.joules_per_kilogram_kelvin())
    }

    /// The heat release per mass, in W/kg.
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn watts_per_kilogram(&self) -> Result<f64, UnitError> {
        let unit = HeatRateUnit::parse(&self.unit)?;
        self.finite(HeatRateUnit::SUBJECT, self.value * unit.watts_per_kilogram())
    }

    /// The heating rate, in K/s.
    ///
    /// # Errors
    /// An unknown unit, or a number that is not finite.
    pub fn kelvins_per_second(&self) -> Result<f64, UnitError> {
        let unit = HeatingRateUnit::parse(&self.unit)?;
        self.finite(HeatingRateUnit::SUBJECT, self.value * unit.kelvins_per_second())
    }

    fn finite(&self, subject: &'static str, value: f64) -> Result<f64, UnitError> {
        if value.is_finite() {
            Ok(value)
        } else {
            Err(UnitError::NotFinite { subject, found: self.to_string() })
        }
    }
}

impl std::fmt::Display for Quantity {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let size = self.value.abs();
        if size != 0.0 && !(1e-4..1e9).contains(&size) {
            write!(f, "{:e} {}", self.value, crate::problem::shortened(&self.unit))
        } else {
            write!(f, "{} {}", self.value, crate::problem::shortened(&self.unit))
        }
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn quantities_convert() {
        assert_eq!(Quantity::new(25.0, "°C").kelvin().unwrap(), Kelvin(298.15));
        assert_eq!(Quantity::new(0.3, "°C").kelvin_difference().unwrap(), 0.3);
        assert_eq!(Quantity::new(2.0, "h").seconds().unwrap(), Seconds(7200.0));
        assert_eq!(
            Quantity::new(41.0, "kJ/mol").joules_per_mole().unwrap(),
            JoulesPerMole(41_000.0)
        );
        assert_eq!(Quantity::new(5.0, "%").fraction().unwrap(), 0.05);
        assert_eq!(Quantity::new(0.05, "1").fraction().unwrap(), 0.05);
        assert_eq!(
            Quantity::new(0.8, "M").concentration().unwrap(),
            (0.8, ConcentrationKind::Molar)
        );
        assert_eq!(
            Quantity::new(36.0, "1/h").rate_constant().unwrap(),
            (0.01, RateUnit::PER_SECOND)
        );
        assert_eq!(Quantity::new(1.9, "kJ/(kg K)").joules_per_kilogram_kelvin().unwrap(), 1900.0);
        assert_eq!(Quantity::new(180.0, "kJ/kg").joules_per_kilogram().unwrap(), 180_000.0);
        assert_eq!(Quantity::new(60.0, "K/min").kelvins_per_second().unwrap(), 1.0);
    }

    #[test]
    fn refusals_say_what_was_found_and_what_is_accepted() {
        let said = |error: UnitError| error.to_string();
        assert_eq!(
            said(Quantity::new(-300.0, "°C").kelvin().unwrap_err()),
            "-300 °C is not above absolute zero (0 K, −273.15 °C, −459.67 °F)"
        );
        assert_eq!(
            said(Quantity::new(f64::INFINITY, "h").seconds().unwrap_err()),
            "the time inf h is not a finite number"
        );
        assert_eq!(
            said(Quantity::new(5.0, "mol/L").fraction().unwrap_err()),
            "“mol/L” is not a unit of fraction known here; expected % or 1"
        );
        assert!(Quantity::new(0.0, "K").kelvin().is_err());
        assert!(Quantity::new(f64::NAN, "K").kelvin().is_err());
    }

    #[test]
    fn reads_json_with_keys_it_does_not_know() {
        let read: Quantity =
            serde_json::from_str(r#"{"value": 0.3, "unit": "K", "why": "certificate"}"#).unwrap();
        assert_eq!(read, Quantity::new(0.3, "K"));
    }
}
