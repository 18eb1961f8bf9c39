//! A piece of a header as a unit, whatever it measures.

use super::multiplier::leading_power;
use crate::table::Role;
use crate::units::{
    ConcentrationUnit, HeatRateUnit, HeatingRateUnit, RateUnit, TemperatureUnit, TimeUnit,
    inverse_kelvin_scale,
};

/// What a unit measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Family {
    Temperature,
    InverseTemperature,
    Time,
    Rate,
    Concentration,
    HeatRate,
    HeatingRate,
}

impl Family {
    /// The role of a column of which only the unit is known.
    pub(super) const fn role(self) -> Role {
        match self {
            Family::Temperature => Role::Temperature,
            Family::InverseTemperature => Role::InverseTemperature,
            Family::Time => Role::Time,
            Family::Rate => Role::RateConstant,
            Family::Concentration => Role::Signal,
            Family::HeatRate => Role::HeatRate,
            Family::HeatingRate => Role::HeatingRate,
        }
    }

    /// Whether a column of this role can have such a unit.
    pub(super) fn suits(self, role: Role) -> bool {
        role == Role::Sd || role == self.role()
    }
}

/// A unit with its scale.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Measure {
    pub family: Family,
    pub code: String,
    /// A number written in the unit, as in `10⁻⁴ s⁻¹`.
    pub scale: f64,
    /// That number is written with a multiplication sign, which is read both ways.
    pub times: bool,
}

/// Reads a text as a unit.
pub(super) fn measure(text: &str) -> Option<Measure> {
    let bare = bare(text);
    let text = bare.trim();
    if text.is_empty() || text.chars().count() > 60 {
        return None;
    }
    let found = |family: Family, code: &str, scale: f64| {
        let times = text.contains(['×', '*']) && scale != 1.0 || text.starts_with(['x', 'X']);
        Some(Measure { family, code: code.to_string(), scale, times })
    };
    if let Ok(unit) = TemperatureUnit::parse(text) {
        return found(Family::Temperature, unit.code(), 1.0);
    }
    // "1/h" is a unit, "1 M" and "7 d" are quantities.
    let counts = text.strip_prefix('1').is_some_and(|rest| {
        !rest.is_empty()
            && !rest.trim_start().starts_with('/')
            && !rest.starts_with(['0', 'e', 'E'])
    });
    if counts {
        return None;
    }
    let start = text.trim_start_matches(['×', '·', '*', ' ']);
    let start = start
        .strip_prefix(['x', 'X'])
        .filter(|rest| rest.trim_start().starts_with("10"))
        .map_or(start, str::trim_start);
    if let Some(scale) = inverse_kelvin_scale(start) {
        return found(Family::InverseTemperature, "1/K", scale);
    }
    if let Some((scale, unit)) = RateUnit::parse_scaled(start) {
        return found(Family::Rate, &unit.code(), scale);
    }
    let (scale, rest) = match leading_power(start) {
        Some((scale, rest)) if scale != 1.0 => {
            (scale, rest.trim_start_matches([' ', '·', '×', '*']))
        }
        _ => (1.0, start),
    };
    if let Ok(unit) = TimeUnit::parse(rest) {
        return found(Family::Time, unit.code(), scale);
    }
    if let Ok(unit) = ConcentrationUnit::parse(rest) {
        return found(Family::Concentration, unit.code(), scale);
    }
    if let Ok(unit) = HeatRateUnit::parse(rest) {
        return found(Family::HeatRate, unit.code(), scale);
    }
    let unit = HeatingRateUnit::parse(rest).ok()?;
    found(Family::HeatingRate, unit.code(), scale)
}

/// Without brackets around the whole, and without "in" before it.
pub(super) fn bare(text: &str) -> String {
    let mut text = text.trim();
    for (open, close) in [('(', ')'), ('[', ']'), ('{', '}')] {
        if let Some(inside) = text.strip_prefix(open).and_then(|rest| rest.strip_suffix(close))
            && !inside.contains([open, close])
        {
            text = inside.trim();
        }
    }
    text.strip_prefix("in ").unwrap_or(text).trim().to_string()
}
