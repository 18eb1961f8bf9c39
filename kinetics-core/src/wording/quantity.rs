//! Physical quantities with their limits, in the units that a study shows; and quantities as
//! one would type them.

use super::Display;
use super::number::{Figures, Origin};
use super::time::{duration, duration_with_range};
use crate::quantity::{Quantity, Seconds};
use crate::units::RateUnit;

/// A number with its unit, and the limits of its interval without.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Shown {
    /// "90 kJ/mol".
    pub value: String,
    /// ("85", "95"), where there is an interval.
    pub limits: Option<(String, String)>,
}

/// What is to be shown: a number, the limits of its interval, and whose it is.
#[derive(Debug, Clone, Copy)]
pub struct Number {
    /// Best estimate.
    pub value: f64,
    /// Limits, where there is an interval.
    pub range: Option<(f64, f64)>,
    /// Worked out, or stated.
    pub origin: Origin,
}

impl Number {
    /// In a unit of which `scale` is the inverse size, rounded to what the interval supports.
    fn shown(self, scale: f64, unit: &str, decimal: char) -> Shown {
        let value = self.value * scale;
        let range = self.range.map(|(low, high)| (low * scale, high * scale));
        let figures = Figures::of(self.origin, value, range);
        let space = if unit.is_empty() { "" } else { "\u{a0}" };
        Shown {
            value: format!("{}{space}{unit}", figures.number(value, decimal)),
            limits: range.map(|(low, high)| figures.limits(low, high, decimal)),
        }
    }
}

/// A number without a unit.
pub fn bare(number: Number, display: &Display) -> Shown {
    number.shown(1.0, "", display.decimal)
}

/// A molar energy in J/mol: "90 kJ/mol".
pub fn energy(joules_per_mole: Number, display: &Display) -> Shown {
    let scale = 1.0 / display.energy.joules_per_mole();
    joules_per_mole.shown(scale, display.energy.symbol(), display.decimal)
}

/// A molar entropy in J/(mol K).
pub fn entropy(joules_per_mole_kelvin: Number, display: &Display) -> Shown {
    joules_per_mole_kelvin.shown(1.0, "J/(mol\u{a0}K)", display.decimal)
}

/// A difference of temperatures in K.
pub fn kelvins(kelvins: Number, display: &Display) -> Shown {
    kelvins.shown(1.0, "K", display.decimal)
}

/// A time in s, in the unit that reads best.
pub fn time(seconds: Number, display: &Display) -> Shown {
    let time = Seconds(seconds.value);
    match seconds.range {
        Some(range) => {
            let (value, low, high) = duration_with_range(time, range, display);
            Shown { value, limits: Some((low, high)) }
        }
        None => {
            let value = duration(time, Figures::supported(seconds.value, None), display);
            Shown { value, limits: None }
        }
    }
}

/// A rate constant given in the base unit, in the unit that the data have: "0.068 h⁻¹".
pub fn rate(rate_in_base: Number, unit: Option<RateUnit>, display: &Display) -> Shown {
    let scale = unit.map_or(1.0, |unit| 1.0 / unit.to_base());
    let symbol = unit.map(RateUnit::symbol).unwrap_or_default();
    rate_in_base.shown(scale, &symbol, display.decimal)
}

/// What stands at an axis of logarithms: "ln (k · h)", "ln (k / L mol⁻¹ s⁻¹)".
pub fn logarithm_of(name: &str, unit: Option<RateUnit>) -> String {
    match unit {
        None => format!("ln {name}"),
        Some(unit) if unit.concentration.is_none() => {
            format!("ln ({name}\u{a0}·\u{a0}{})", unit.time.symbol())
        }
        Some(unit) => format!("ln ({name}\u{a0}/\u{a0}{})", unit.symbol()),
    }
}

/// Quantities as one would type them, a common unit once: "5, 25, 40 °C"; with a decimal comma
/// "2,5; 25 °C".
pub fn typed(quantities: &[Quantity], decimal: char) -> String {
    let separator = if decimal == ',' { "; " } else { ", " };
    let mut text = String::new();
    for (at, quantity) in quantities.iter().enumerate() {
        if at > 0 {
            text.push_str(separator);
        }
        text.push_str(&typed_number(quantity.value, decimal));
        let shared = quantities.get(at + 1).is_some_and(|next| next.unit == quantity.unit);
        if !shared && !quantity.unit.is_empty() {
            text.push(' ');
            text.push_str(&quantity.unit);
        }
    }
    text
}

/// A number in full, as one would type it.
pub fn typed_number(value: f64, decimal: char) -> String {
    let size = value.abs();
    let text = if size != 0.0 && !(1e-4..1e9).contains(&size) {
        format!("{value:e}")
    } else {
        value.to_string()
    };
    text.replace('.', decimal.encode_utf8(&mut [0; 4]))
}

/// A factor as it stands before a unit: "10⁻³", "1000" becomes "10³", and "2.5" stays.
pub fn factor(factor: f64) -> String {
    let scientific = format!("{factor:e}");
    let raised = |digit: char| match digit {
        '-' => '⁻',
        '1' => '¹',
        '2' => '²',
        '3' => '³',
        other => other.to_digit(10).and_then(|d| char::from_u32(0x2070 + d)).unwrap_or(other),
    };
    match scientific.strip_prefix("1e") {
        Some(exponent) => format!("10{}", exponent.chars().map(raised).collect::<String>()),
        None => factor.to_string(),
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::units::EnergyUnit;

    fn fitted(value: f64, range: Option<(f64, f64)>) -> Number {
        Number { value, range, origin: Origin::Fitted }
    }

    #[test]
    fn units_of_the_study_are_used() {
        let display = Display::default();
        let found = energy(fitted(90_412.0, Some((85_110.0, 94_790.0))), &display);
        assert_eq!(found.value, "90\u{a0}kJ/mol");
        assert_eq!(found.limits.unwrap(), ("85".into(), "95".into()));
        let calories = Display { energy: EnergyUnit::KilocaloriePerMole, ..display };
        assert_eq!(energy(fitted(41_840.0, None), &calories).value, "10\u{a0}kcal/mol");
        let hours = RateUnit::parse("1/h").unwrap();
        let range = Some((65e-3 / 3600.0, 71e-3 / 3600.0));
        let found = rate(fitted(68e-3 / 3600.0, range), Some(hours), &display);
        assert_eq!(found.value, "0.068\u{a0}h⁻¹");
        assert_eq!(found.limits.unwrap(), ("0.065".into(), "0.071".into()));
    }

    #[test]
    fn what_was_stated_is_repeated_as_stated() {
        let display = Display::default();
        let stated =
            |value: f64, range| energy(Number { value, range, origin: Origin::Stated }, &display);
        assert_eq!(stated(105_000.0, None).value, "105\u{a0}kJ/mol");
        assert_eq!(stated(105.25 * 1000.0, None).value, "105.25\u{a0}kJ/mol");
        assert_eq!(stated(25.0 * 4184.0, None).value, "104.6\u{a0}kJ/mol");
        assert_eq!(stated(25.1 * 4184.0 + 0.01, None).value, "105.0\u{a0}kJ/mol");
        let with_limits = stated(105_000.0, Some((99_120.0, 110_880.0)));
        assert_eq!(with_limits.value, "105\u{a0}kJ/mol");
        assert_eq!(with_limits.limits.unwrap(), ("99".into(), "111".into()));
        let hours = RateUnit::parse("1/h").unwrap();
        let k = Number {
            value: libm::exp(libm::log(0.0021 / 3600.0)),
            range: None,
            origin: Origin::Stated,
        };
        assert_eq!(rate(k, Some(hours), &display).value, "0.0021\u{a0}h⁻¹");
    }

    #[test]
    fn axes_of_logarithms_say_what_was_divided_by() {
        let label = |unit: &str| logarithm_of("k", RateUnit::parse(unit).ok());
        assert_eq!(label("1/h"), "ln (k\u{a0}·\u{a0}h)");
        assert_eq!(label("L/(mol s)"), "ln (k\u{a0}/\u{a0}L mol⁻¹ s⁻¹)");
        assert_eq!(label(""), "ln k");
    }

    #[test]
    fn factors_are_powers_of_ten_where_they_can_be() {
        assert_eq!([1e-3, 1e-4, 1000.0, 2.5].map(factor), ["10⁻³", "10⁻⁴", "10³", "2.5"]);
    }

    #[test]
    fn quantities_are_written_as_typed() {
        let celsius = |v: f64| Quantity::new(v, "°C");
        assert_eq!(typed(&[celsius(5.0), celsius(25.0)], '.'), "5, 25 °C");
        let mixed = [celsius(2.5), Quantity::new(310.0, "K")];
        assert_eq!(typed(&mixed, ','), "2,5 °C; 310 K");
        assert_eq!(typed(&[Quantity::new(1.5e-7, "h")], ','), "1,5e-7 h");
        assert_eq!(typed(&[Quantity::new(1.0, ""), Quantity::new(2.0, "")], '.'), "1, 2");
    }
}
