//! Two numbers of one kind as a range in words.

use crate::answer::Basis;
use crate::quantity::{Kelvin, Seconds};
use crate::wording::{Figures, Rounding, duration_range};

/// Both ends; one where they read the same, and a unit that both share once.
fn joined([low, high]: [String; 2]) -> String {
    if low == high {
        return format!("about {low}");
    }
    match (low.rsplit_once('\u{a0}'), high.rsplit_once('\u{a0}')) {
        (Some((number, unit)), Some((_, same))) if unit == same => format!("{number} to {high}"),
        _ => format!("{low} to {high}"),
    }
}

/// Times in s, in the unit of the answer beside them.
pub(super) fn time([low, high]: [f64; 2], answer: f64, basis: &Basis) -> String {
    joined(duration_range(Seconds(low), Seconds(high), Seconds(answer), &basis.display))
}

/// Numbers without unit.
pub(super) fn ratio(range: [f64; 2], _answer: f64, basis: &Basis) -> String {
    joined(numbers(range, basis))
}

/// Fractions, in %.
pub(super) fn percent(range: [f64; 2], _answer: f64, basis: &Basis) -> String {
    let range = range.map(|fraction| 100.0 * fraction);
    let figures = Figures::compared(range[0], range[1]);
    let shown = range.map(|value| figures.percent(value, range[1], basis.display.decimal));
    format!("{}\u{a0}%", joined(shown))
}

/// Rate constants in the base unit, in the unit of the data.
pub(super) fn rate(range: [f64; 2], _answer: f64, basis: &Basis) -> String {
    let scale = basis.shown_unit.map_or(1.0, |unit| 1.0 / unit.to_base());
    let unit = basis.shown_unit.map(|u| format!("\u{a0}{}", u.symbol())).unwrap_or_default();
    format!("{}{unit}", joined(numbers(range.map(|value| value * scale), basis)))
}

/// Temperatures in K, on the scale of the display.
pub(super) fn temperature(range: [f64; 2], _answer: f64, basis: &Basis) -> String {
    let shown = |t| basis.display.temperature_rounded(Kelvin(t), 0, Rounding::Nearest);
    joined(range.map(shown))
}

fn numbers(range: [f64; 2], basis: &Basis) -> [String; 2] {
    let figures = Figures::compared(range[0], range[1]);
    range.map(|value| figures.number(value, basis.display.decimal))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_shared_unit_is_said_once() {
        let said = |low: &str, high: &str| joined([low, high].map(String::from));
        assert_eq!(said("28\u{a0}h", "44\u{a0}h"), "28 to 44\u{a0}h");
        assert_eq!(said("28\u{a0}h", "90\u{a0}days"), "28\u{a0}h to 90\u{a0}days");
        assert_eq!(said("28\u{a0}h", "28\u{a0}h"), "about 28\u{a0}h");
        assert_eq!(said("1", "2"), "1 to 2");
    }
}
