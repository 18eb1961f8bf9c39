//! Times along a logarithmic axis, from the ladder that people use: seconds, minutes,
//! hours, a shift of 8 h, days, a week, a month, years. Inside, all are seconds.

use super::scale::Scale;
use super::ticks::{Tick, linear_ticks, number, superscript};
use kinetics_core::numeric::sorting::sort_by;

const MINUTE: f64 = 60.0;
const HOUR: f64 = 60.0 * MINUTE;
const DAY: f64 = 24.0 * HOUR;
const WEEK: f64 = 7.0 * DAY;
const MONTH: f64 = 30.4375 * DAY;
const YEAR: f64 = 365.25 * DAY;

/// Units in rising order, for times that fall between the rungs.
const UNITS: [(f64, &str); 9] = [
    (1e-6, "µs"),
    (1e-3, "ms"),
    (1.0, "s"),
    (MINUTE, "min"),
    (HOUR, "h"),
    (DAY, "d"),
    (WEEK, "wk"),
    (MONTH, "mo"),
    (YEAR, "yr"),
];

/// The rungs by the order in which they claim room.
const FIRST: [(f64, f64, &str); 7] = [
    (1.0, 1.0, "s"),
    (1.0, MINUTE, "min"),
    (1.0, HOUR, "h"),
    (1.0, DAY, "d"),
    (1.0, YEAR, "yr"),
    (1.0, 1e-3, "ms"),
    (1.0, 1e-6, "µs"),
];
const SECOND: [(f64, f64, &str); 13] = [
    (1.0, MONTH, "mo"),
    (1.0, WEEK, "wk"),
    (8.0, HOUR, "h"),
    (10.0, MINUTE, "min"),
    (10.0, 1.0, "s"),
    (10.0, YEAR, "yr"),
    (100.0, YEAR, "yr"),
    (1000.0, YEAR, "yr"),
    (100.0, 1e-3, "ms"),
    (10.0, 1e-3, "ms"),
    (100.0, 1e-6, "µs"),
    (10.0, 1e-6, "µs"),
    (0.1, 1e-6, "µs"),
];
/// Fill in where the axis shows little of the ladder.
const THIRD: [(f64, f64, &str); 19] = [
    (30.0, MINUTE, "min"),
    (30.0, 1.0, "s"),
    (2.0, WEEK, "wk"),
    (3.0, MONTH, "mo"),
    (6.0, MONTH, "mo"),
    (2.0, YEAR, "yr"),
    (5.0, YEAR, "yr"),
    (20.0, YEAR, "yr"),
    (50.0, YEAR, "yr"),
    (2.0, HOUR, "h"),
    (4.0, HOUR, "h"),
    (2.0, DAY, "d"),
    (4.0, DAY, "d"),
    (5.0, MINUTE, "min"),
    (2.0, MINUTE, "min"),
    (20.0, MINUTE, "min"),
    (5.0, 1.0, "s"),
    (2.0, 1.0, "s"),
    (20.0, 1.0, "s"),
];

/// With fewer rungs than this on view, the fill-ins come too.
const FEW: usize = 4;

/// Times to write along an axis, at least `least_distance` pixels apart.
pub fn time_ticks(scale: &Scale, least_distance: f64) -> Vec<Tick> {
    let (low, high) = scale.extremes();
    let mut placed: Vec<(f64, Tick)> = Vec::new();
    let claim = |value: f64, label: String, placed: &mut Vec<(f64, Tick)>| {
        let Some(position) = scale.position(value) else {
            return;
        };
        let free = placed.iter().all(|(taken, _)| (taken - position).abs() >= least_distance);
        if (low..=high).contains(&value) && free {
            placed.push((position, Tick { value, label }));
        }
    };
    let rungs = |rungs: &[(f64, f64, &str)], placed: &mut Vec<(f64, Tick)>| {
        for (count, unit, symbol) in rungs {
            let decimals = usize::from(*count < 1.0);
            claim(count * unit, format!("{} {symbol}", number(*count, decimals)), placed);
        }
    };
    rungs(&FIRST, &mut placed);
    rungs(&SECOND, &mut placed);
    if placed.len() < FEW {
        rungs(&THIRD, &mut placed);
    }
    for power in 4..300 {
        let label = format!("10{} yr", superscript(power));
        claim(10.0_f64.powi(power) * YEAR, label, &mut placed);
    }
    for power in 8..300 {
        let label = format!("10{} s", superscript(-power));
        claim(10.0_f64.powi(-power), label, &mut placed);
    }
    if placed.len() < 2 {
        return between_rungs(low, high);
    }
    let mut ticks: Vec<Tick> = placed.into_iter().map(|(_, tick)| tick).collect();
    sort_by(&mut ticks, |tick| tick.value);
    ticks
}

/// Even steps of one unit, for an axis that shows less than the ladder resolves.
fn between_rungs(low: f64, high: f64) -> Vec<Tick> {
    let (length, symbol) =
        UNITS.into_iter().rev().find(|(length, _)| *length <= low).unwrap_or(UNITS[0]);
    linear_ticks(low / length, high / length, 3)
        .into_iter()
        .map(|tick| Tick {
            value: (tick.value * length).clamp(low, high),
            label: format!("{} {symbol}", tick.label),
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::super::scale::Spacing;
    use super::*;
    use proptest::prelude::*;

    fn labels(low: f64, high: f64, pixels: f64) -> Vec<String> {
        let scale = Scale::new(Spacing::Log, (low, high), (pixels, 0.0));
        time_ticks(&scale, 22.0).into_iter().map(|tick| tick.label).collect()
    }

    #[test]
    fn the_ladder_from_minutes_to_a_year() {
        assert_eq!(
            labels(200.0, 1.5 * YEAR, 400.0),
            ["10 min", "1 h", "8 h", "1 d", "1 wk", "1 mo", "1 yr"]
        );
    }

    #[test]
    fn beyond_a_lifetime_come_powers_of_ten() {
        assert_eq!(
            labels(0.5 * YEAR, 2e5 * YEAR, 200.0),
            ["1 yr", "10 yr", "100 yr", "1000 yr", "10⁴ yr", "10⁵ yr"]
        );
        assert_eq!(
            labels(1e-8, 1e-3, 150.0),
            ["10⁻⁸ s", "0.1 µs", "1 µs", "10 µs", "100 µs", "1 ms"]
        );
    }

    #[test]
    fn a_short_stretch_is_filled_in() {
        assert_eq!(labels(1.5 * HOUR, 2.2 * DAY, 300.0), ["2 h", "4 h", "8 h", "1 d", "2 d"]);
        assert_eq!(labels(3.05 * HOUR, 3.35 * HOUR, 300.0), ["3.1 h", "3.2 h", "3.3 h"]);
    }

    #[test]
    fn a_low_axis_keeps_the_first_rungs() {
        assert_eq!(labels(0.5, 2.0 * YEAR, 140.0), ["1 s", "1 min", "1 h", "1 d", "1 yr"]);
    }

    proptest! {
        #[test]
        fn times_stay_inside_and_apart(power in -12.0..16.0_f64, decades in 0.01..20.0_f64, pixels in 100.0..900.0_f64) {
            let (low, high) = (10.0_f64.powf(power), 10.0_f64.powf(power + decades));
            let scale = Scale::new(Spacing::Log, (low, high), (pixels, 0.0));
            let ticks = time_ticks(&scale, 18.0);
            prop_assert!(!ticks.is_empty());
            prop_assert!(ticks.iter().all(|tick| (low..=high).contains(&tick.value)));
            let positions: Vec<f64> = ticks.iter().filter_map(|tick| scale.position(tick.value)).collect();
            prop_assert!(positions.windows(2).all(|pair| (pair[0] - pair[1]).abs() >= 18.0), "{ticks:?}");
        }
    }
}
