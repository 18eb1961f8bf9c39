//! Times in the unit that reads best.

use super::Display;
use super::number::{Figures, Rounding};
use crate::quantity::Seconds;
use crate::units::TimeUnit;

/// From how many seconds on a unit is used: minutes from two, hours from two, days from three,
/// months from four, years from two. Weeks are never picked: a week and a half reads badly.
const LADDER: [(f64, TimeUnit); 5] = [
    (2.0 * 31_557_600.0, TimeUnit::Year),
    (4.0 * 2_629_800.0, TimeUnit::Month),
    (3.0 * 86_400.0, TimeUnit::Day),
    (2.0 * 3600.0, TimeUnit::Hour),
    (2.0 * 60.0, TimeUnit::Minute),
];

fn best_unit(time_seconds: f64, display: &Display) -> TimeUnit {
    display.time.unwrap_or_else(|| {
        LADDER
            .iter()
            .find(|(from, _)| time_seconds.abs() >= *from)
            .map_or(TimeUnit::Second, |(_, unit)| *unit)
    })
}

/// "6.5 years", "44 h": words for days and longer, symbols for what a clock counts.
fn with_unit(number: &str, unit: TimeUnit) -> String {
    let name = match unit {
        TimeUnit::Second | TimeUnit::Minute | TimeUnit::Hour => unit.symbol(),
        longer => longer.word(number != "1"),
    };
    format!("{number}\u{a0}{name}")
}

/// A time without an interval.
pub fn duration(time: Seconds, figures: Figures, display: &Display) -> String {
    let unit = best_unit(time.0, display);
    with_unit(&figures.number(unit.from_seconds(time.0), display.decimal), unit)
}

/// Times this many times apart are not said in one unit.
const OF_ANOTHER_SIZE: f64 = 50.0;

/// Whether two times read well in one unit.
fn share(unit: TimeUnit, short_seconds: f64, long_seconds: f64, display: &Display) -> bool {
    let (short, long) = (unit.from_seconds(short_seconds), unit.from_seconds(long_seconds));
    let small = short < 0.1 && best_unit(short_seconds, display) != unit;
    short > 0.0 && !small && long < OF_ANOTHER_SIZE * short
}

/// A bound on a time, rounded to the side on which it still holds, and the best guess beside it
/// to the same place: ("2.7 h", "3.1 h").
pub fn duration_bound(
    limit: Seconds,
    best: Seconds,
    rounding: Rounding,
    display: &Display,
) -> (String, String) {
    let unit = best_unit(limit.0, display);
    let (bound, guess) = (unit.from_seconds(limit.0), unit.from_seconds(best.0));
    let figures = Figures::supported(bound, Some((bound, 2.0 * guess - bound)));
    let shown = figures.number(figures.rounded(bound, rounding), display.decimal);
    let best = if share(unit, limit.0.min(best.0), limit.0.max(best.0), display) {
        with_unit(&figures.number(guess, display.decimal), unit)
    } else {
        duration(best, Figures::exactly(2), display)
    };
    (with_unit(&shown, unit), best)
}

/// A time and its limits: ("6.5 years", "3.2", "13") in one unit where they are of one size,
/// else each limit in its own ("9 days", "40 min", "200 years").
pub fn duration_with_range(
    time: Seconds,
    range: (f64, f64),
    display: &Display,
) -> (String, String, String) {
    let unit = best_unit(time.0, display);
    let value = unit.from_seconds(time.0);
    let (low, high) = (unit.from_seconds(range.0), unit.from_seconds(range.1));
    let figures = Figures::supported(value, Some((low, high)));
    let number = with_unit(&figures.number(value, display.decimal), unit);
    if share(unit, range.0, range.1, display) {
        let (low, high) = figures.limits(low, high, display.decimal);
        return (number, low, high);
    }
    let alone = |limit: f64| duration(Seconds(limit), Figures::exactly(2), display);
    (number, alone(range.0), alone(range.1))
}

/// Two times that are compared with a third, in its unit where all are of one size: ("62 h",
/// "82 h").
pub fn duration_range(
    low: Seconds,
    high: Seconds,
    like: Seconds,
    display: &Display,
) -> [String; 2] {
    let unit = best_unit(like.0, display);
    if !share(unit, low.0.min(like.0), high.0.max(like.0), display) {
        return [low, high].map(|time| duration(time, Figures::exactly(2), display));
    }
    let [low, high] = [low, high].map(|time| unit.from_seconds(time.0));
    let figures = Figures::compared(low, high);
    [low, high].map(|time| with_unit(&figures.number(time, display.decimal), unit))
}

#[cfg(test)]
mod tests {
    use super::*;

    const YEAR: f64 = 31_557_600.0;

    #[test]
    fn times_choose_their_unit() {
        let display = Display::default();
        let say = |seconds: f64| duration(Seconds(seconds), Figures::exactly(2), &display);
        assert_eq!(say(90.0), "90\u{a0}s");
        assert_eq!(say(600.0), "10\u{a0}min");
        assert_eq!(say(44.0 * 3600.0), "44\u{a0}h");
        assert_eq!(say(22.0 * 86_400.0), "22\u{a0}days");
        assert_eq!(say(1.5 * YEAR), "18\u{a0}months");
        assert_eq!(say(6.54 * YEAR), "6.5\u{a0}years");
        let hours = Display { time: Some(TimeUnit::Hour), ..display };
        assert_eq!(duration(Seconds(86_400.0), Figures::exactly(2), &hours), "24\u{a0}h");
    }

    #[test]
    fn bounds_stand_beside_their_best_guess() {
        let hours = |h: f64| Seconds(3600.0 * h);
        let display = Display::default();
        let least = duration_bound(hours(2.738), hours(3.06), Rounding::Down, &display);
        assert_eq!((&least.0[..], &least.1[..]), ("2.7\u{a0}h", "3.1\u{a0}h"));
        let most = duration_bound(hours(36.12), hours(34.3), Rounding::Up, &display);
        assert_eq!((&most.0[..], &most.1[..]), ("36.2\u{a0}h", "34.3\u{a0}h"));
        // One place and one unit for both, across a power of ten and a step of the ladder.
        let most = duration_bound(hours(105.2), hours(94.4), Rounding::Up, &display);
        assert_eq!((&most.0[..], &most.1[..]), ("4.4\u{a0}days", "3.9\u{a0}days"));
        let least = duration_bound(hours(62.4), hours(81.6), Rounding::Down, &display);
        assert_eq!((&least.0[..], &least.1[..]), ("62\u{a0}h", "82\u{a0}h"));
    }

    #[test]
    fn limits_share_the_unit_unless_they_are_of_another_size() {
        let display = Display::default();
        let (time, low, high) =
            duration_with_range(Seconds(6.54 * YEAR), (3.21 * YEAR, 13.3 * YEAR), &display);
        assert_eq!((&time[..], &low[..], &high[..]), ("6.5\u{a0}years", "3.2", "13"));
        let (_, low, high) =
            duration_with_range(Seconds(9.0 * 86_400.0), (2400.0, 200.0 * YEAR), &display);
        assert_eq!((&low[..], &high[..]), ("40\u{a0}min", "200\u{a0}years"));
        let hour = |h: f64| Seconds(3600.0 * h);
        let range = |like: f64| duration_range(hour(62.0), hour(81.6), hour(like), &display);
        assert_eq!(range(70.0), ["62\u{a0}h", "82\u{a0}h"]);
        assert_eq!(range(75.0), ["2.6\u{a0}days", "3.4\u{a0}days"]);
    }
}
