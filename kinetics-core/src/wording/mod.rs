//! Numbers, times and temperatures as running text, rounded to what their intervals support.

mod number;
mod quantity;
mod time;

pub use number::{Figures, Origin, Rounding, fixed, significant};
pub use quantity::{
    Number, Shown, bare, energy, entropy, factor, kelvins, logarithm_of, rate, time, typed,
    typed_number,
};
pub use time::{duration, duration_bound, duration_range, duration_with_range};

use crate::quantity::Kelvin;
use crate::units::{EnergyUnit, TemperatureUnit, TimeUnit};

/// How a study wants its numbers shown.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Display {
    /// Scale of temperatures.
    pub temperature: TemperatureUnit,
    /// Unit of energies.
    pub energy: EnergyUnit,
    /// Unit of times; none: whichever reads best.
    pub time: Option<TimeUnit>,
    /// The decimal sign, `.` or `,`.
    pub decimal: char,
}

impl Default for Display {
    fn default() -> Self {
        Self {
            temperature: TemperatureUnit::Celsius,
            energy: EnergyUnit::KilojoulePerMole,
            time: None,
            decimal: '.',
        }
    }
}

impl Display {
    /// A temperature with its unit, to `decimals` at most, trailing zeros dropped: "62.5 °C".
    pub fn temperature(&self, temperature: Kelvin, decimals: usize) -> String {
        let value = fixed(self.temperature.from_kelvin(temperature.0), decimals, self.decimal);
        format!("{}\u{a0}{}", trimmed(&value), self.temperature)
    }

    /// Decimals of a temperature known to `half_width_kelvin`: down to that width's leading
    /// digit, one further where it is 1, two at most.
    pub fn temperature_decimals(half_width_kelvin: f64) -> usize {
        if !(half_width_kelvin > 0.0) {
            return 1;
        }
        (-number::meant_place(half_width_kelvin)).clamp(0, 2) as usize
    }

    /// A temperature with its unit, rounded to the side on which a bound still holds.
    pub fn temperature_rounded(
        &self,
        temperature: Kelvin,
        decimals: usize,
        rounding: Rounding,
    ) -> String {
        let unit = libm::pow(10.0, decimals as f64);
        let steps = self.temperature.from_kelvin(temperature.0) * unit;
        let whole = match rounding {
            Rounding::Nearest => libm::round(steps),
            Rounding::Down => libm::floor(steps + 1e-9),
            Rounding::Up => libm::ceil(steps - 1e-9),
        };
        format!("{}\u{a0}{}", fixed(whole / unit, decimals, self.decimal), self.temperature)
    }

    /// A probability or level in per cent: "95 %".
    pub fn percent(&self, fraction: f64) -> String {
        let shown = fixed(100.0 * fraction, 4, self.decimal);
        format!("{}\u{a0}%", trimmed(&shown))
    }
}

/// Without zeros, and a decimal sign, that say nothing.
fn trimmed(number: &str) -> &str {
    if number.contains(['.', ',']) {
        number.trim_end_matches('0').trim_end_matches(['.', ','])
    } else {
        number
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn temperatures_and_levels_drop_idle_zeros() {
        let display = Display { decimal: ',', ..Display::default() };
        assert_eq!(display.temperature(Kelvin(298.15), 1), "25\u{a0}°C");
        assert_eq!(display.temperature(Kelvin(335.65), 1), "62,5\u{a0}°C");
        assert_eq!(display.temperature(Kelvin(373.15), 0), "100\u{a0}°C");
        assert_eq!(display.percent(0.95), "95\u{a0}%");
        assert_eq!(display.percent(0.999), "99,9\u{a0}%");
    }
}
