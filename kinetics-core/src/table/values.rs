//! What the numbers of a column look like, from its first rows: enough to tell
//! temperatures from rate constants where no header does.

use super::Row;
use super::header::without_humidity;
use crate::numeric::sorting::sort_by;
use crate::text::number::{Reading, read_cell};
use crate::text::{Decimal, stamp};

/// Rows that are looked at.
const SAMPLE: usize = 300;

/// How times are written in a column.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub(super) enum TimeShape {
    /// Numbers.
    #[default]
    Numbers,
    /// `2024-03-01 08:00`.
    Stamps,
    /// `1:30` or `1:30:00`.
    Clock {
        /// Seconds are given.
        seconds: bool,
    },
}

/// The first cells of a column.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct Values {
    /// The numbers by row, none where there is no number.
    pub numbers: Vec<Option<f64>>,
    /// Cells that are not empty.
    pub filled: usize,
    /// Cells with a word in place of a number, or a limit.
    pub markers: usize,
    /// Units beside the numbers, the most frequent first.
    pub units: Vec<(String, usize)>,
    pub time_shape: TimeShape,
    /// Cells with nothing but `±`.
    pub signs: usize,
}

impl Values {
    pub fn of(text: &str, rows: &[Row], column: usize, decimal: Decimal) -> Values {
        let mut values = Values::default();
        let (mut stamps, mut clocks, mut with_seconds) = (0, 0, 0);
        for row in rows.iter().take(SAMPLE) {
            let cell =
                row.cells.get(column).and_then(|cell| text.get(cell.span.clone())).unwrap_or("");
            let mut number = None;
            let reading = match read_cell(cell, decimal) {
                Reading::Text => {
                    without_humidity(cell).map_or(Reading::Text, |rest| read_cell(&rest, decimal))
                }
                other => other,
            };
            match reading {
                Reading::Empty => {}
                Reading::Number(found) => {
                    values.filled += 1;
                    number = Some(found.value);
                    if let Some(unit) = found.unit.filter(|_| !found.error_percent) {
                        match values.units.iter().position(|(known, _)| *known == unit) {
                            Some(at) => values.units[at].1 += 1,
                            None if values.units.len() < 8 => values.units.push((unit, 1)),
                            None => {}
                        }
                    }
                }
                Reading::Below(_) | Reading::NotDetermined => {
                    values.filled += 1;
                    values.markers += 1;
                }
                Reading::Text => {
                    values.filled += 1;
                    values.signs += usize::from(matches!(cell, "±" | "+/-" | "+-"));
                    if stamp::stamp_seconds(cell).is_some() {
                        stamps += 1;
                    } else if let Some((_, seconds)) = stamp::clock_seconds(cell) {
                        clocks += 1;
                        with_seconds += usize::from(seconds);
                    }
                }
            }
            values.numbers.push(number);
        }
        sort_by(&mut values.units, |(_, count)| -(*count as f64));
        if stamps * 2 > values.filled {
            values.time_shape = TimeShape::Stamps;
        } else if clocks * 2 > values.filled {
            values.time_shape = TimeShape::Clock { seconds: with_seconds * 2 > clocks };
        }
        values
    }

    fn present(&self) -> impl Iterator<Item = f64> {
        self.numbers.iter().flatten().copied()
    }

    /// Mostly numbers, or words in place of them.
    pub fn is_numeric(&self) -> bool {
        let numbers = self.present().count();
        self.time_shape != TimeShape::Numbers
            || (numbers > 0 && (numbers + self.markers) * 2 >= self.filled)
    }

    pub fn range(&self) -> Option<(f64, f64)> {
        self.present().fold(None, |range, value| match range {
            None => Some((value, value)),
            Some((low, high)) => Some((f64::min(low, value), f64::max(high, value))),
        })
    }

    pub fn first(&self) -> Option<f64> {
        self.present().next()
    }

    /// Could be temperatures in °C, K or °F.
    pub fn like_temperatures(&self) -> bool {
        self.range().is_some_and(|(low, high)| {
            low >= -100.0 && (4.0..=1500.0).contains(&high) && high - low <= 800.0
        })
    }

    /// Could be 1/T in 1/K.
    pub fn like_inverse_temperatures(&self) -> bool {
        self.range().is_some_and(|(low, high)| low >= 0.0008 && high <= 0.006)
    }

    /// Spans so much that it can hardly be temperatures.
    pub fn spans_decades(&self) -> bool {
        self.range().is_some_and(|(low, high)| low > 0.0 && high / low > 20.0)
    }

    pub fn all_positive(&self) -> bool {
        self.range().is_some_and(|(low, _)| low > 0.0)
    }

    /// The same few numbers again and again, as temperatures of runs with many points.
    pub fn repeats(&self) -> bool {
        let mut sorted: Vec<f64> = self.present().collect();
        let count = sorted.len();
        sort_by(&mut sorted, |value| *value);
        sorted.dedup();
        count >= 4 && sorted.len() * 2 <= count
    }

    /// Above zero and below the values beside it, as errors are, once multiplied by `scale`.
    pub fn like_errors_of(&self, values: &Values, scale: f64) -> bool {
        let pairs = || {
            self.numbers
                .iter()
                .zip(&values.numbers)
                .filter_map(|(error, value)| Some(((*error)? * scale, (*value)?)))
        };
        let count = pairs().count();
        let fitting =
            pairs().filter(|(error, value)| *error > 0.0 && *error < value.abs() * 0.8).count();
        count > 0 && fitting * 10 >= count * 9
    }

    /// Much the same numbers row by row, as repeated measurements are.
    pub fn like_replicates_of(&self, values: &Values) -> bool {
        let pairs =
            || self.numbers.iter().zip(&values.numbers).filter_map(|(a, b)| Some(((*a)?, (*b)?)));
        let count = pairs().count();
        let close = pairs().filter(|(a, b)| a / b > 0.33 && a / b < 3.0).count();
        count > 0 && close * 10 >= count * 9
    }

    /// The unit beside most of the cells.
    pub fn usual_unit(&self) -> Option<&str> {
        self.units
            .first()
            .filter(|(_, count)| count * 2 > self.filled)
            .map(|(unit, _)| unit.as_str())
    }
}

#[cfg(test)]
mod tests {
    use super::super::{Cell, Content};
    use super::*;

    fn values(cells: &[&str]) -> Values {
        let text = cells.join("\n");
        let mut at = 0;
        let rows: Vec<Row> = cells
            .iter()
            .enumerate()
            .map(|(line, cell)| {
                let span = at..at + cell.len();
                at += cell.len() + 1;
                Row { line: line + 1, cells: vec![Cell { span, content: Content::Empty }] }
            })
            .collect();
        Values::of(&text, &rows, 0, Decimal::Point)
    }

    #[test]
    fn temperatures_and_rate_constants_differ() {
        let temperatures = values(&["25", "40", "60"]);
        let rates = values(&["0.0021", "0.0059", "0.13"]);
        assert!(temperatures.like_temperatures() && !temperatures.spans_decades());
        assert!(!rates.like_temperatures() && rates.spans_decades());
        assert!(values(&["0.0030", "0.0032"]).like_inverse_temperatures());
    }

    #[test]
    fn errors_and_replicates_stand_beside_their_values() {
        let rates = values(&["0.0021", "0.0059"]);
        assert!(values(&["0.0001", "0.0003"]).like_errors_of(&rates, 1.0));
        assert!(!values(&["0.0001", "0.3"]).like_errors_of(&rates, 1.0));
        assert!(values(&["0.0022", "0.0061"]).like_replicates_of(&rates));
    }

    #[test]
    fn units_and_clocks_are_noticed() {
        assert_eq!(values(&["50 °C", "60 °C", "70"]).usual_unit(), Some("°C"));
        assert_eq!(values(&["2024-03-01 08:00", "2024-03-01 09:00"]).time_shape, TimeShape::Stamps);
        assert_eq!(values(&["0:30", "1:30"]).time_shape, TimeShape::Clock { seconds: false });
        assert!(
            values(&["50", "50", "60", "60"]).repeats()
                && !values(&["50", "60", "70", "80"]).repeats()
        );
    }
}
