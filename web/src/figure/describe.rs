//! Sentences for screen readers.

use kinetics_core::units::TemperatureUnit;

use super::grounds::Grounds;
use super::ticks::number;
use super::view::Span;

/// A temperature in kelvin as read aloud.
pub fn temperature(kelvin: f64, unit: TemperatureUnit) -> String {
    if !(0.0..1e6).contains(&kelvin) {
        return "an unknown temperature".to_owned();
    }
    let value = unit.from_kelvin(kelvin);
    let decimals = usize::from((value - value.round()).abs() >= 0.05);
    format!("{} {}", number(value, decimals), unit.symbol())
}

/// How many points were measured, and where.
pub fn measured(
    count: usize,
    temperatures: impl IntoIterator<Item = f64>,
    unit: TemperatureUnit,
) -> String {
    let points = if count == 1 { "point" } else { "points" };
    match Span::of(temperatures).ends() {
        None => "Nothing measured yet.".to_owned(),
        Some((coldest, warmest)) if coldest == warmest => {
            format!("{count} measured {points} at {}.", temperature(coldest, unit))
        }
        Some((coldest, warmest)) => format!(
            "{count} measured {points} from {} to {}.",
            temperature(coldest, unit),
            temperature(warmest, unit)
        ),
    }
}

/// Where a question stands.
pub fn question(
    question: usize,
    kelvin: f64,
    grounds: Option<Grounds>,
    unit: TemperatureUnit,
) -> String {
    let place = temperature(kelvin, unit);
    match grounds {
        Some(grounds) => format!("Question {question} at {place}, {}.", grounds.phrase()),
        None => format!("Question {question} at {place}."),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sentences_read_well() {
        let celsius = TemperatureUnit::Celsius;
        assert_eq!(
            measured(6, [323.15, 351.15], celsius),
            "6 measured points from 50 °C to 78 °C."
        );
        assert_eq!(measured(1, [323.15], celsius), "1 measured point at 50 °C.");
        assert_eq!(measured(0, [], celsius), "Nothing measured yet.");
        assert_eq!(
            question(1, 298.15, Some(Grounds::Far), celsius),
            "Question 1 at 25 °C, far from the data."
        );
    }
}
