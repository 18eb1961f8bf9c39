//! What a column holds, and the forms of data that need which columns.

use serde::{Deserialize, Serialize};

use crate::units::{
    ConcentrationUnit, HeatRateUnit, HeatingRateUnit, RateUnit, TemperatureUnit, TimeUnit,
    UnitError,
};

/// The form of the data.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Form {
    /// Rate constants at temperatures.
    #[default]
    Rates,
    /// A signal against time, at several temperatures.
    Progress,
    /// The time to one stated extent, at temperatures.
    Times,
    /// Heat release at temperatures.
    HeatRates,
    /// Temperatures of a peak at heating rates.
    Peaks,
    /// An activation energy and one rate constant; no table.
    KnownLaw,
}

impl Form {
    /// The code of the form in a study.
    #[must_use]
    pub const fn code(self) -> &'static str {
        match self {
            Form::Rates => "rates",
            Form::Progress => "progress",
            Form::Times => "times",
            Form::HeatRates => "heat-rates",
            Form::Peaks => "peaks",
            Form::KnownLaw => "known-law",
        }
    }
}

/// What a column holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Role {
    /// Temperature.
    Temperature,
    /// 1/T.
    InverseTemperature,
    /// Rate constant k.
    RateConstant,
    /// ln k.
    LnRateConstant,
    /// log10 k.
    #[serde(rename = "log10-rate-constant")]
    Log10RateConstant,
    /// Time.
    Time,
    /// A signal linear in concentration.
    Signal,
    /// The error of the column of values to its left.
    Sd,
    /// Which run a row belongs to.
    Run,
    /// A name for the row.
    Label,
    /// What several runs share: an oven, a batch.
    Group,
    /// Heat release per mass.
    HeatRate,
    /// Heating rate.
    HeatingRate,
    /// Not used.
    Ignore,
}

impl Role {
    /// Every role, in the order of a menu.
    pub const ALL: &[Role] = &[
        Role::Temperature,
        Role::InverseTemperature,
        Role::RateConstant,
        Role::LnRateConstant,
        Role::Log10RateConstant,
        Role::Time,
        Role::Signal,
        Role::HeatRate,
        Role::HeatingRate,
        Role::Sd,
        Role::Run,
        Role::Group,
        Role::Label,
        Role::Ignore,
    ];

    /// The code in a study.
    #[must_use]
    pub const fn code(self) -> &'static str {
        match self {
            Role::Temperature => "temperature",
            Role::InverseTemperature => "inverse-temperature",
            Role::RateConstant => "rate-constant",
            Role::LnRateConstant => "ln-rate-constant",
            Role::Log10RateConstant => "log10-rate-constant",
            Role::Time => "time",
            Role::Signal => "signal",
            Role::HeatRate => "heat-rate",
            Role::HeatingRate => "heating-rate",
            Role::Sd => "sd",
            Role::Run => "run",
            Role::Group => "group",
            Role::Label => "label",
            Role::Ignore => "ignore",
        }
    }

    /// The words for it in a sentence or a menu.
    #[must_use]
    pub const fn words(self) -> &'static str {
        match self {
            Role::Temperature => "temperature",
            Role::InverseTemperature => "inverse temperature",
            Role::RateConstant => "rate constant",
            Role::LnRateConstant => "ln of the rate constant",
            Role::Log10RateConstant => "log10 of the rate constant",
            Role::Time => "time",
            Role::Signal => "signal",
            Role::HeatRate => "heat release",
            Role::HeatingRate => "heating rate",
            Role::Sd => "error",
            Role::Run => "run",
            Role::Group => "group",
            Role::Label => "label",
            Role::Ignore => "not used",
        }
    }

    /// Whether its cells must be numbers.
    #[must_use]
    pub const fn is_numeric(self) -> bool {
        !matches!(self, Role::Run | Role::Group | Role::Label | Role::Ignore)
    }

    /// Whether it is what was measured, to which an error can belong.
    #[must_use]
    pub const fn is_value(self) -> bool {
        matches!(
            self,
            Role::RateConstant
                | Role::LnRateConstant
                | Role::Log10RateConstant
                | Role::Signal
                | Role::HeatRate
                | Role::Time
        )
    }

    /// Whether it holds a rate constant in some shape.
    #[must_use]
    pub const fn is_rate(self) -> bool {
        matches!(self, Role::RateConstant | Role::LnRateConstant | Role::Log10RateConstant)
    }

    /// The code of a unit that this role can have; none where the role has no unit.
    ///
    /// # Errors
    /// The unit is none for this role.
    pub fn unit_code(self, unit: &str) -> Result<Option<String>, UnitError> {
        Ok(Some(match self {
            Role::Temperature => TemperatureUnit::parse(unit)?.code().to_string(),
            Role::InverseTemperature => match crate::units::inverse_kelvin_scale(unit) {
                Some(1.0) => "1/K".to_string(),
                _ => return Err(UnitError::unknown("inverse temperature", unit, ["1/K"])),
            },
            Role::RateConstant | Role::LnRateConstant | Role::Log10RateConstant => {
                RateUnit::parse(unit)?.code()
            }
            Role::Time => TimeUnit::parse(unit)?.code().to_string(),
            Role::Signal => ConcentrationUnit::parse(unit)?.code().to_string(),
            Role::HeatRate => HeatRateUnit::parse(unit)?.code().to_string(),
            Role::HeatingRate => HeatingRateUnit::parse(unit)?.code().to_string(),
            Role::Sd => unit.to_string(),
            Role::Run | Role::Label | Role::Group | Role::Ignore => return Ok(None),
        }))
    }

    /// The code of a unit as it is shown; the code itself where it is none.
    #[must_use]
    pub fn unit_symbol(self, code: &str) -> String {
        let symbol = match self {
            Role::RateConstant | Role::LnRateConstant | Role::Log10RateConstant | Role::Sd => {
                RateUnit::parse(code).ok().map(RateUnit::symbol)
            }
            Role::InverseTemperature => Some("K⁻¹".to_string()),
            Role::Signal => {
                ConcentrationUnit::parse(code).ok().map(|unit| unit.symbol().to_string())
            }
            _ => None,
        };
        symbol.unwrap_or_else(|| code.to_string())
    }

    /// Units for its menu, as codes.
    #[must_use]
    pub fn units(self) -> Vec<String> {
        let codes = |all: &[&str]| all.iter().map(|code| (*code).to_string()).collect();
        match self {
            Role::Temperature => {
                TemperatureUnit::ALL.iter().map(|unit| unit.code().to_string()).collect()
            }
            Role::InverseTemperature => codes(&["1/K"]),
            Role::RateConstant | Role::LnRateConstant | Role::Log10RateConstant => {
                RateUnit::ALL.iter().map(|unit| unit.code()).collect()
            }
            Role::Time => TimeUnit::ALL.iter().map(|unit| unit.code().to_string()).collect(),
            Role::Signal => {
                ConcentrationUnit::ALL.iter().map(|unit| unit.code().to_string()).collect()
            }
            Role::HeatRate => {
                HeatRateUnit::ALL.iter().map(|unit| unit.code().to_string()).collect()
            }
            Role::HeatingRate => {
                HeatingRateUnit::ALL.iter().map(|unit| unit.code().to_string()).collect()
            }
            Role::Sd => codes(&["%"]),
            Role::Run | Role::Label | Role::Group | Role::Ignore => Vec::new(),
        }
    }
}

/// Whether a signal follows what is left or what forms.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum SignalIs {
    /// What is left of the starting material.
    Left,
    /// What has formed, or has gone.
    Formed,
}

/// What the header of a column of errors says they are.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum ErrorKind {
    /// Standard deviation.
    Sd,
    /// Standard error of the mean.
    StandardError,
    /// Half the width of a 95 % interval.
    #[serde(rename = "half-width-95")]
    HalfWidth95,
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn codes_are_those_of_the_study_file() {
        for role in Role::ALL {
            assert_eq!(serde_json::to_string(role).unwrap(), format!("\"{}\"", role.code()));
        }
        assert_eq!(serde_json::to_string(&Form::HeatRates).unwrap(), "\"heat-rates\"");
    }

    #[test]
    fn every_unit_in_a_menu_is_accepted() {
        for role in Role::ALL {
            for unit in role.units() {
                assert_eq!(role.unit_code(&unit).unwrap(), Some(unit));
            }
        }
        assert!(Role::Time.unit_code("°C").is_err());
        assert_eq!(Role::Label.unit_code("anything").unwrap(), None);
    }
}
