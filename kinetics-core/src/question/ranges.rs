//! Two numbers of one kind as a range in words.

use crate::answer::Basis;
use crate::quantity::{Kelvin, Seconds};
use crate::wording::{Figures, Rounding, duration, significant};

/// Both ends printed by `show`; one where they read the same, and a unit that both share once.
fn joined(low: f64, high: f64, show: impl Fn(f64) -> String) -> String {
    let (low, high) = (show(low), show(high));
    if low == high {
        return format!("about {low}");
    }
    match (low.rsplit_once('\u{a0}'), high.rsplit_once('\u{a0}')) {
        (Some((number, unit)), Some((_, same))) if unit == same => format!("{number} to {high}"),
        _ => format!("{low} to {high}"),
    }
}

/// Times in s.
pub(super) fn time(low: f64, high: f64, basis: &Basis) -> String {
    joined(low, high, |t| duration(Seconds(t), Figures::exactly(2), &basis.display))
}

/// Numbers without unit.
pub(super) fn ratio(low: f64, high: f64, basis: &Basis) -> String {
    joined(low, high, |value| significant(value, 2, basis.display.decimal))
}

/// Fractions, in %.
pub(super) fn percent(low: f64, high: f64, basis: &Basis) -> String {
    let percent = |value: f64| significant(100.0 * value, 2, basis.display.decimal);
    format!("{}\u{a0}%", joined(low, high, percent))
}

/// Rate constants in the base unit, in the unit of the data.
pub(super) fn rate(low: f64, high: f64, basis: &Basis) -> String {
    let scale = basis.shown_unit.map_or(1.0, |unit| 1.0 / unit.to_base());
    let unit = basis.shown_unit.map(|u| format!("\u{a0}{}", u.symbol())).unwrap_or_default();
    let show = |value: f64| significant(value * scale, 2, basis.display.decimal);
    format!("{}{unit}", joined(low, high, show))
}

/// Temperatures in K, on the scale of the display.
pub(super) fn temperature(low: f64, high: f64, basis: &Basis) -> String {
    joined(low, high, |t| basis.display.temperature_rounded(Kelvin(t), 0, Rounding::Nearest))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_shared_unit_is_said_once() {
        let show = |v: f64| format!("{v}\u{a0}{}", if v < 60.0 { "h" } else { "days" });
        assert_eq!(joined(28.0, 44.0, show), "28 to 44\u{a0}h");
        assert_eq!(joined(28.0, 90.0, show), "28\u{a0}h to 90\u{a0}days");
        assert_eq!(joined(28.0, 28.0, show), "about 28\u{a0}h");
        assert_eq!(joined(1.0, 2.0, |v| v.to_string()), "1 to 2");
    }
}
