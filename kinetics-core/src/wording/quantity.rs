//! Physical quantities with their limits, in the units that a study shows; and quantities as
//! one would type them.

use super::Display;
use super::number::Figures;
use crate::quantity::{JoulesPerMole, Quantity};
use crate::units::RateUnit;

/// A number with its unit, and the limits of its interval without.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Shown {
    /// "90 kJ/mol".
    pub value: String,
    /// ("85", "95"), where there is an interval.
    pub limits: Option<(String, String)>,
}

impl Shown {
    /// `value` and `range` times `scale`, rounded to what the interval supports.
    fn new(value: f64, range: Option<(f64, f64)>, scale: f64, unit: &str, decimal: char) -> Self {
        let value = value * scale;
        let range = range.map(|(low, high)| (low * scale, high * scale));
        let figures = Figures::supported(value, range);
        let space = if unit.is_empty() { "" } else { "\u{a0}" };
        Self {
            value: format!("{}{space}{unit}", figures.number(value, decimal)),
            limits: range.map(|(low, high)| figures.limits(value, low, high, decimal)),
        }
    }
}

/// A number without a unit.
pub fn bare(value: f64, range: Option<(f64, f64)>, display: &Display) -> Shown {
    Shown::new(value, range, 1.0, "", display.decimal)
}

/// A molar energy with its limits in J/mol: "90 kJ/mol".
pub fn energy(energy: JoulesPerMole, range: Option<(f64, f64)>, display: &Display) -> Shown {
    let scale = 1.0 / display.energy.joules_per_mole();
    Shown::new(energy.0, range, scale, display.energy.symbol(), display.decimal)
}

/// A molar entropy in J/(mol K).
pub fn entropy(joules_per_mole_kelvin: f64, range: Option<(f64, f64)>, display: &Display) -> Shown {
    Shown::new(joules_per_mole_kelvin, range, 1.0, "J/(mol\u{a0}K)", display.decimal)
}

/// A rate constant given in the base unit, in the unit that the data have: "0.068 h⁻¹".
pub fn rate(
    rate_in_base: f64,
    range: Option<(f64, f64)>,
    unit: Option<RateUnit>,
    display: &Display,
) -> Shown {
    let scale = unit.map_or(1.0, |unit| 1.0 / unit.to_base());
    let symbol = unit.map(RateUnit::symbol).unwrap_or_default();
    Shown::new(rate_in_base, range, scale, &symbol, display.decimal)
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

    #[test]
    fn units_of_the_study_are_used() {
        let display = Display::default();
        let found = energy(JoulesPerMole(90_412.0), Some((85_110.0, 94_790.0)), &display);
        assert_eq!(found.value, "90\u{a0}kJ/mol");
        assert_eq!(found.limits.unwrap(), ("85".into(), "95".into()));
        let calories = Display { energy: EnergyUnit::KilocaloriePerMole, ..display };
        assert_eq!(energy(JoulesPerMole(41_840.0), None, &calories).value, "10\u{a0}kcal/mol");
        let hours = RateUnit::parse("1/h").unwrap();
        let range = Some((65e-3 / 3600.0, 71e-3 / 3600.0));
        let found = rate(68e-3 / 3600.0, range, Some(hours), &display);
        assert_eq!(found.value, "0.068\u{a0}h⁻¹");
        assert_eq!(found.limits.unwrap(), ("0.065".into(), "0.071".into()));
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
