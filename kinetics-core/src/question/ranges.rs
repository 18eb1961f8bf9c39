//! Two numbers of one kind as a range in words.

use crate::answer::Basis;
use crate::quantity::{Kelvin, Seconds};
use crate::wording::{Figures, Rounding, duration, significant};

/// Both ends printed by `show`; one where they read the same.
fn joined(low: f64, high: f64, show: impl Fn(f64) -> String) -> String {
    let (low, high) = (show(low), show(high));
    if low == high { format!("about {low}") } else { format!("{low} to {high}") }
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
