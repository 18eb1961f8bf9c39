//! Which numbers to write along an axis: round ones, and never so many that they touch.

use kinetics_core::units::TemperatureUnit;

use super::scale::Scale;
use super::scene::FontRole;
use super::text_size::text_width;
use kinetics_core::numeric::sorting::sort_by;

/// A number written along an axis.
#[derive(Debug, Clone, PartialEq)]
pub struct Tick {
    /// In the unit of the axis (kelvin, seconds).
    pub value: f64,
    /// As written.
    pub label: String,
}

/// Free room between two numbers side by side, in CSS pixels.
const GAP: f64 = 16.0;

/// A number with so many decimals, with a true minus sign.
pub fn number(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    match text.strip_prefix('-') {
        // Minus nothing is nothing.
        Some(digits) if digits.bytes().all(|byte| matches!(byte, b'0' | b'.')) => digits.to_owned(),
        Some(digits) => format!("\u{2212}{digits}"),
        None => text,
    }
}

/// A whole number raised, as in 10⁻³.
pub fn superscript(exponent: i32) -> String {
    exponent
        .to_string()
        .chars()
        .map(|digit| match digit {
            '-' => '⁻',
            '1' => '¹',
            '2' => '²',
            '3' => '³',
            '4' => '⁴',
            '5' => '⁵',
            '6' => '⁶',
            '7' => '⁷',
            '8' => '⁸',
            '9' => '⁹',
            _ => '⁰',
        })
        .collect()
}

/// The power of ten at or below a positive number.
fn magnitude(value: f64) -> i32 {
    // The logarithm of an exact power of ten may fall a hair short of it.
    (value.log10() + 1e-9).floor() as i32
}

fn label(value: f64, step: f64) -> String {
    let exponent = magnitude(step);
    if value != 0.0 && (value.abs() >= 1e6 || exponent < -5) {
        let power = magnitude(value.abs());
        let decimals = usize::try_from(power.saturating_sub(exponent)).unwrap_or(0).min(6);
        let mantissa = value / 10.0_f64.powi(power);
        return format!("{} × 10{}", number(mantissa, decimals), superscript(power));
    }
    number(value, usize::try_from(exponent.saturating_neg()).unwrap_or(0).min(12))
}

/// Multiples of 1, 2 or 5 times a power of ten in [low, high], at most `most` steps apart.
pub fn linear_ticks(low: f64, high: f64, most: usize) -> Vec<Tick> {
    let raw = (high - low) / most.max(1) as f64;
    if !(raw.is_normal() && raw > 0.0) {
        return Vec::new();
    }
    let power = 10.0_f64.powi(magnitude(raw));
    let step = [1.0, 2.0, 5.0, 10.0]
        .iter()
        .map(|factor| factor * power)
        .find(|step| *step >= raw * (1.0 - 1e-9))
        .unwrap_or(10.0 * power);
    multiples(low, high, step)
        .into_iter()
        .map(|value| Tick { value, label: label(value, step) })
        .collect()
}

/// The multiples of a step in [low, high]; none where the step is lost in rounding.
fn multiples(low: f64, high: f64, step: f64) -> Vec<f64> {
    let (first, last) = ((low / step - 1e-9).ceil(), (high / step + 1e-9).floor());
    if !(step > 0.0 && last - first < 1000.0 && first.abs() < 1e12 && last.abs() < 1e12) {
        return Vec::new();
    }
    (first as i64..=last as i64).map(|count| (count as f64 * step).clamp(low, high)).collect()
}

/// Whether numbers written under their ticks keep apart.
fn apart(ticks: &[Tick], scale: &Scale) -> bool {
    ticks.windows(2).all(|pair| {
        let room = |tick: &Tick| 0.5 * text_width(&tick.label, FontRole::Tick);
        match (scale.position(pair[0].value), scale.position(pair[1].value)) {
            (Some(first), Some(second)) => {
                (second - first).abs() >= room(&pair[0]) + room(&pair[1]) + GAP
            }
            _ => false,
        }
    })
}

/// Linear ticks along a level axis, as many as keep apart.
pub fn level_ticks(scale: &Scale) -> Vec<Tick> {
    let (low, high) = scale.extremes();
    let most = ((scale.length() / 45.0).floor() as usize).clamp(1, 12);
    (1..=most)
        .rev()
        .map(|most| linear_ticks(low, high, most))
        .find(|ticks| apart(ticks, scale))
        .unwrap_or_default()
}

/// Linear ticks along an upright axis.
pub fn upright_ticks(scale: &Scale) -> Vec<Tick> {
    let (low, high) = scale.extremes();
    let most = ((scale.length() / 38.0).floor() as usize).clamp(1, 10);
    linear_ticks(low, high, most)
}

/// Temperatures, round in the unit shown, along an axis on which they crowd together
/// at the hot end: each stretch between two coarse temperatures is divided as finely as
/// its own room allows, so that 5, 10, 15 … may stand at the cold end and 60, 80 at the hot one.
pub fn temperature_ticks(scale: &Scale, unit: TemperatureUnit) -> Vec<Tick> {
    let (coldest, warmest) = scale.extremes();
    let (low, high) = (unit.from_kelvin(coldest), unit.from_kelvin(warmest));
    if !(high - low).is_normal() {
        return Vec::new();
    }
    let coarse = 10.0_f64.powi(magnitude(high - low) + 1);
    let mut stretches = Vec::new();
    // Zero and one coarse step on each side of the domain's start cover the domain.
    let first = (low / coarse).floor();
    for count in [first, first + 1.0] {
        stretches.push((count * coarse, (count + 1.0) * coarse, Step::One(coarse)));
    }
    let window = Window { scale, unit, low, high };
    let mut values: Vec<f64> = Vec::new();
    while let Some((from, to, step)) = stretches.pop() {
        if to < low || from > high {
            continue;
        }
        let division = step
            .finer()
            .into_iter()
            .find(|finer| apart(&window.ticks(from, to, finer.length()), scale));
        match division {
            Some(finer) if finer.length() >= 1.0 => {
                let parts = ((to - from) / finer.length()).round() as i64;
                for part in 0..parts {
                    let start = from + part as f64 * finer.length();
                    stretches.push((start, start + finer.length(), finer));
                }
            }
            _ => values.extend([from, to]),
        }
    }
    values.retain(|value| (low - 1e-9..=high + 1e-9).contains(value));
    sort_by(&mut values, |value| *value);
    values.dedup_by(|a, b| (*a - *b).abs() < 1e-6);
    let mut ticks: Vec<Tick> = values.into_iter().map(|value| window.tick(value)).collect();
    window.fill(&mut ticks, coarse);
    ticks
}

/// With fewer temperatures than this, an axis is hard to read.
const ENOUGH: usize = 3;

/// The part of a temperature axis on view.
struct Window<'a> {
    scale: &'a Scale,
    unit: TemperatureUnit,
    low: f64,
    high: f64,
}

impl Window<'_> {
    fn tick(&self, value: f64) -> Tick {
        let (coldest, warmest) = self.scale.extremes();
        Tick { value: self.unit.to_kelvin(value).clamp(coldest, warmest), label: label(value, 1.0) }
    }

    /// Where no stretch could be divided evenly, as over many hundred kelvin, takes whatever
    /// round temperatures keep apart, the roundest first.
    fn fill(&self, ticks: &mut Vec<Tick>, coarse: f64) {
        for part in [2.0, 5.0, 10.0, 20.0, 50.0, 100.0] {
            if ticks.len() >= ENOUGH || coarse / part < 1.0 {
                return;
            }
            for tick in self.ticks(self.low, self.high, coarse / part) {
                let place = ticks.partition_point(|placed| placed.value < tick.value);
                let mut with_it = ticks.clone();
                with_it.insert(place, tick);
                if apart(&with_it, self.scale) {
                    *ticks = with_it;
                }
            }
        }
    }

    fn ticks(&self, from: f64, to: f64, step: f64) -> Vec<Tick> {
        multiples(from.max(self.low), to.min(self.high), step)
            .into_iter()
            .map(|value| self.tick(value))
            .collect()
    }
}

/// A step of 1, 2 or 5 times a power of ten.
#[derive(Clone, Copy)]
enum Step {
    One(f64),
    Two(f64),
    Five(f64),
}

impl Step {
    const fn length(self) -> f64 {
        match self {
            Self::One(length) | Self::Two(length) | Self::Five(length) => length,
        }
    }

    /// Round steps that divide this one, the finest first.
    fn finer(self) -> Vec<Self> {
        match self {
            // Twos between tens read badly; twenties between hundreds are needed at the hot end.
            Self::One(length) if length > 10.0 => {
                vec![Self::One(length / 10.0), Self::Two(length / 5.0), Self::Five(length / 2.0)]
            }
            Self::One(length) => vec![Self::One(length / 10.0), Self::Five(length / 2.0)],
            Self::Two(length) => vec![Self::Five(length / 4.0), Self::One(length / 2.0)],
            Self::Five(length) => vec![Self::One(length / 5.0)],
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::scale::Spacing;
    use super::*;
    use proptest::prelude::*;

    fn labels(ticks: &[Tick]) -> Vec<&str> {
        ticks.iter().map(|tick| tick.label.as_str()).collect()
    }

    #[test]
    fn linear_ticks_are_round() {
        assert_eq!(labels(&linear_ticks(-0.35, 0.35, 4)), ["−0.2", "0.0", "0.2"]);
        assert_eq!(
            labels(&linear_ticks(2.7, 3.45, 8)),
            ["2.7", "2.8", "2.9", "3.0", "3.1", "3.2", "3.3", "3.4"]
        );
        assert_eq!(labels(&linear_ticks(0.0, 3e7, 3)), ["0", "1 × 10⁷", "2 × 10⁷", "3 × 10⁷"]);
        assert!(linear_ticks(1.0, 1.0, 5).is_empty());
        assert!(linear_ticks(f64::NAN, 1.0, 5).is_empty());
    }

    #[test]
    fn temperatures_thin_out_at_the_hot_end() {
        let wide = Scale::new(Spacing::ReciprocalTemperature, (273.15, 373.15), (0.0, 500.0));
        let narrow = Scale::new(Spacing::ReciprocalTemperature, (273.15, 373.15), (0.0, 230.0));
        assert_eq!(
            labels(&temperature_ticks(&wide, TemperatureUnit::Celsius)),
            ["0", "5", "10", "20", "30", "40", "50", "60", "70", "80", "90", "100"]
        );
        assert_eq!(
            labels(&temperature_ticks(&narrow, TemperatureUnit::Celsius)),
            ["0", "20", "40", "60", "80", "100"]
        );
    }

    #[test]
    fn temperatures_are_round_in_the_unit_shown() {
        let scale = Scale::new(Spacing::ReciprocalTemperature, (300.0, 400.0), (0.0, 300.0));
        let kelvin = temperature_ticks(&scale, TemperatureUnit::Kelvin);
        assert!(labels(&kelvin).contains(&"350") || labels(&kelvin).contains(&"360"));
        let fahrenheit = temperature_ticks(&scale, TemperatureUnit::Fahrenheit);
        assert!(labels(&fahrenheit).contains(&"100"), "{fahrenheit:?}");
    }

    #[test]
    fn minus_nothing_is_nothing() {
        assert_eq!(number(-0.001, 1), "0.0");
        assert_eq!(number(-1.0, 1), "−1.0");
    }

    proptest! {
        #[test]
        fn ticks_stay_inside_and_apart(
            cold in 100.0..900.0_f64, width in 20.0..900.0_f64, pixels in 200.0..1400.0_f64, turned in any::<bool>(),
        ) {
            let domain = if turned { (cold + width, cold) } else { (cold, cold + width) };
            let scale = Scale::new(Spacing::ReciprocalTemperature, domain, (0.0, pixels));
            for unit in [TemperatureUnit::Celsius, TemperatureUnit::Kelvin, TemperatureUnit::Fahrenheit] {
                let ticks = temperature_ticks(&scale, unit);
                prop_assert!(ticks.len() >= 2, "{ticks:?}");
                prop_assert!(apart(&ticks, &scale), "{ticks:?}");
                prop_assert!(ticks.iter().all(|tick| (cold..=cold + width).contains(&tick.value)));
            }
        }

        #[test]
        fn linear_ticks_stay_inside(low in -1e9..1e9_f64, width in 1e-3..1e9_f64, most in 1usize..12) {
            let ticks = linear_ticks(low, low + width, most);
            prop_assert!(ticks.len() <= most + 1);
            prop_assert!(ticks.iter().all(|tick| (low..=low + width).contains(&tick.value)));
        }

        #[test]
        fn nothing_hangs_or_panics(from in any::<f64>(), to in any::<f64>()) {
            for spacing in [Spacing::Linear, Spacing::Log, Spacing::ReciprocalTemperature] {
                let scale = Scale::new(spacing, (from, to), (0.0, 400.0));
                level_ticks(&scale);
                upright_ticks(&scale);
                if spacing == Spacing::ReciprocalTemperature {
                    temperature_ticks(&scale, TemperatureUnit::Celsius);
                }
            }
        }
    }
}
