//! Temperature scales. Celsius and Fahrenheit are shifted against K, so a
//! temperature and a difference of temperatures convert differently.

use super::UnitError;

/// A temperature scale.
#[derive(
    Clone, Copy, Debug, PartialEq, Eq, Hash, Default, serde::Serialize, serde::Deserialize,
)]
#[serde(into = "String", try_from = "String")]
pub enum TemperatureUnit {
    /// degree Celsius
    #[default]
    Celsius,
    /// kelvin
    Kelvin,
    /// degree Fahrenheit
    Fahrenheit,
}

impl TemperatureUnit {
    /// What these units measure, in words.
    pub const SUBJECT: &str = "temperature";

    /// Every unit, in the order of a menu.
    pub const ALL: &[TemperatureUnit] =
        &[TemperatureUnit::Celsius, TemperatureUnit::Kelvin, TemperatureUnit::Fahrenheit];

    /// The spelling for files and keyboards, the same as the symbol.
    #[must_use]
    pub const fn code(self) -> &'static str {
        self.symbol()
    }

    /// The spelling for the eye.
    #[must_use]
    pub const fn symbol(self) -> &'static str {
        match self {
            TemperatureUnit::Celsius => "°C",
            TemperatureUnit::Kelvin => "K",
            TemperatureUnit::Fahrenheit => "°F",
        }
    }

    /// Reads any usual spelling: `°C`, `C`, `deg C`, `ºC`, `℃`, `oC`, `kelvin` …
    ///
    /// # Errors
    /// [`UnitError::Unknown`], listing what is accepted.
    pub fn parse(text: &str) -> Result<TemperatureUnit, UnitError> {
        let folded: String = text
            .chars()
            .filter(|character| !character.is_whitespace() && *character != '.')
            .take(20)
            .map(|character| if matches!(character, 'º' | '˚' | '∘') { '°' } else { character })
            .collect();
        let bare = match folded.to_ascii_lowercase() {
            lower if lower.starts_with("degrees") => lower[7..].to_string(),
            lower if lower.starts_with("degree") => lower[6..].to_string(),
            lower if lower.starts_with("deg") => lower[3..].to_string(),
            lower if lower.starts_with("grad") => lower[4..].to_string(),
            lower => lower.strip_prefix('°').map_or(lower.clone(), str::to_string),
        };
        match bare.as_str() {
            // A lone small c is a concentration, a small k a rate constant.
            "c" | "f" | "k" if folded == bare => Err(TemperatureUnit::unknown(text)),
            "c" | "oc" | "℃" | "celsius" | "centigrade" => Ok(TemperatureUnit::Celsius),
            "k" | "kelvin" | "kelvins" => Ok(TemperatureUnit::Kelvin),
            "f" | "of" | "℉" | "fahrenheit" => Ok(TemperatureUnit::Fahrenheit),
            _ => Err(TemperatureUnit::unknown(text)),
        }
    }

    fn unknown(text: &str) -> UnitError {
        UnitError::unknown(
            TemperatureUnit::SUBJECT,
            text,
            TemperatureUnit::ALL.iter().map(|unit| unit.symbol()),
        )
    }

    /// A reading on this scale, in K; may be at or below zero.
    #[must_use]
    pub const fn to_kelvin(self, value: f64) -> f64 {
        match self {
            TemperatureUnit::Kelvin => value,
            TemperatureUnit::Celsius => value + 273.15,
            TemperatureUnit::Fahrenheit => (value + 459.67) / 1.8,
        }
    }

    /// A temperature in K, on this scale.
    #[must_use]
    pub const fn from_kelvin(self, temperature_kelvin: f64) -> f64 {
        match self {
            TemperatureUnit::Kelvin => temperature_kelvin,
            TemperatureUnit::Celsius => temperature_kelvin - 273.15,
            TemperatureUnit::Fahrenheit => temperature_kelvin * 1.8 - 459.67,
        }
    }

    /// The size of one degree in K, for differences and standard deviations.
    #[must_use]
    pub const fn kelvins(self) -> f64 {
        match self {
            TemperatureUnit::Kelvin | TemperatureUnit::Celsius => 1.0,
            TemperatureUnit::Fahrenheit => 1.0 / 1.8,
        }
    }
}

impl std::fmt::Display for TemperatureUnit {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(self.symbol())
    }
}

impl From<TemperatureUnit> for String {
    fn from(unit: TemperatureUnit) -> String {
        unit.code().to_string()
    }
}

impl TryFrom<String> for TemperatureUnit {
    type Error = UnitError;
    fn try_from(text: String) -> Result<TemperatureUnit, UnitError> {
        TemperatureUnit::parse(&text)
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn usual_spellings_are_read() {
        for text in [
            "°C", "C", "degC", "deg C", "deg. C", "ºC", "° C", "℃", "oC", "Celsius", "Grad C", "˚C",
        ] {
            assert_eq!(TemperatureUnit::parse(text).unwrap(), TemperatureUnit::Celsius, "{text}");
        }
        for text in ["K", "kelvin", "°K", "Kelvin"] {
            assert_eq!(TemperatureUnit::parse(text).unwrap(), TemperatureUnit::Kelvin, "{text}");
        }
        for text in ["°F", "F", "degrees Fahrenheit", "℉"] {
            assert_eq!(
                TemperatureUnit::parse(text).unwrap(),
                TemperatureUnit::Fahrenheit,
                "{text}"
            );
        }
        for text in ["", "k", "c", "f", "°", "R", "°R", "cc"] {
            assert!(TemperatureUnit::parse(text).is_err(), "{text}");
        }
    }

    #[test]
    fn scales_meet_where_they_should() {
        assert_eq!(TemperatureUnit::Celsius.to_kelvin(25.0), 298.15);
        assert!((TemperatureUnit::Fahrenheit.to_kelvin(-40.0) - 233.15).abs() < 1e-12);
        assert!((TemperatureUnit::Fahrenheit.from_kelvin(373.15) - 212.0).abs() < 1e-12);
    }
}
