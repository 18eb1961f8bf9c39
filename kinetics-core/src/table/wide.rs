//! Tables with one column for each run, its temperature in the header.

use super::roles::Roles;
use super::{Origin, Role};
use crate::numeric::decimals::read_decimal;
use crate::quantity::Quantity;
use crate::units::TimeUnit;

impl Roles<'_> {
    /// Time down and one column for each run across, its temperature in the header.
    pub(super) fn wide(&mut self) {
        let runs: Vec<usize> = (0..self.readings.len())
            .filter(|column| {
                self.readings.get(*column).is_some_and(|reading| reading.run_temperature.is_some())
            })
            .filter(|column| {
                matches!(self.role(*column), None | Some(Role::Signal | Role::Sd))
                    && self.numeric(*column)
            })
            .collect();
        if runs.is_empty() {
            self.wide_with_bare_numbers();
            self.wide_with_numbered_runs();
            return;
        }
        for column in &runs {
            if self.role(*column).is_none() {
                self.set(*column, Role::Signal, Origin::Header);
            }
            let temperature =
                self.readings.get(*column).and_then(|reading| reading.run_temperature.clone());
            if let Some(slot) = self.run_temperatures.get_mut(*column) {
                *slot = temperature;
            }
        }
        if !self.has(|role| role == Role::Time)
            && let Some(column) = self.unknown().first().copied()
        {
            self.set(column, Role::Time, Origin::Assumed);
            self.say(
                column,
                format!(
                    "{} is taken as the time, because the other columns name temperatures.",
                    self.title(column)
                ),
            );
        }
    }

    /// `t/h 50 60 70`: headers that are numbers, above signals.
    fn wide_with_bare_numbers(&mut self) {
        let unknown = self.unknown();
        let time = self.position(|role| role == Role::Time);
        let bare: Vec<(usize, f64)> = unknown
            .iter()
            .filter_map(|column| {
                Some((*column, read_decimal(&self.header(*column).replace(',', "."))?))
            })
            .collect();
        let others: Vec<usize> = unknown
            .iter()
            .copied()
            .filter(|column| !bare.iter().any(|(other, _)| other == column))
            .collect();
        let plausible = bare.iter().all(|(_, value)| (-100.0..1000.0).contains(value));
        let clear = time.is_some() && others.is_empty() || time.is_none() && others == [0];
        if bare.len() < 2
            || !plausible
            || !clear
            || self.has(|role| matches!(role, Role::Temperature | Role::InverseTemperature))
        {
            return;
        }
        let unit = if bare.iter().all(|(_, value)| *value >= 250.0) { "K" } else { "°C" };
        for (column, value) in &bare {
            self.set(*column, Role::Signal, Origin::Assumed);
            if let Some(slot) = self.run_temperatures.get_mut(*column) {
                *slot = Some(Quantity::new(*value, unit));
            }
        }
        if let Some(column) = others.first() {
            self.set(*column, Role::Time, Origin::Assumed);
        }
        let numbers: Vec<String> =
            bare.iter().take(4).map(|(_, value)| value.to_string()).collect();
        let first = bare.first().map_or(0, |(column, _)| *column);
        self.say(
            first,
            format!(
                "The headers {} are taken as temperatures of runs in {unit}, each column as the signal of one run{}.",
                numbers.join(", "),
                if others.is_empty() { "" } else { ", and column 1 as the time" }
            ),
        );
    }

    /// `t/h  run 1  run 2`: runs beside a time, whose temperatures are not said.
    fn wide_with_numbered_runs(&mut self) {
        let runs: Vec<usize> = (0..self.roles.len())
            .filter(|column| self.roles.get(*column) == Some(&Some((Role::Run, Origin::Header))))
            .filter(|column| {
                self.numeric(*column) && self.header(*column).contains(|c: char| c.is_ascii_digit())
            })
            .collect();
        if runs.len() > 1
            && self.has(|role| role == Role::Time)
            && !self.has(|role| role == Role::Signal)
        {
            for column in runs {
                self.set(column, Role::Signal, Origin::Assumed);
                let sentence = format!(
                    "{} is taken as the signal of one run; its header names no temperature.",
                    self.title(column)
                );
                self.say(column, sentence);
            }
        }
    }

    /// `T/°C  0 d  7 d  14 d`: one row for each run and its times across, which is not read.
    pub(super) fn times_across(&mut self) {
        let across: Vec<usize> = self
            .unknown()
            .into_iter()
            .filter(|column| names_a_time(self.header(*column)))
            .collect();
        let (Some(first), true) = (across.first().copied(), across.len() > 1) else { return };
        let found = self.header(first).to_string();
        let last = across.last().map_or(first, |last| *last) + 1;
        let message = format!(
            "the headers from here to column {last} name times, and a table with its times across is not read; put \
             the times down the first column and each temperature into a column of its own (in a spreadsheet: copy, \
             paste special, transpose)."
        );
        self.refuse(first, &found, "times down a column", &message);
        for column in across {
            self.set(column, Role::Ignore, Origin::Header);
        }
    }
}

/// `7 d`, `3 months`, `day 14`, `6 M`, `week 4`.
fn names_a_time(header: &str) -> bool {
    let words: Vec<&str> = header.split_whitespace().collect();
    let number = |word: &str| read_decimal(&word.replace(',', ".")).is_some();
    let unit = |word: &str| matches!(word, "M" | "W" | "D") || TimeUnit::parse(word).is_ok();
    match words.as_slice() {
        [first, second] => (number(first) && unit(second)) || (unit(first) && number(second)),
        [only] => {
            let end = only.find(|c: char| !c.is_ascii_digit()).unwrap_or(only.len());
            end > 0 && end < only.len() && unit(&only[end..])
        }
        _ => false,
    }
}

#[cfg(test)]
mod tests {
    use super::super::{Hints, read_table};
    use super::*;

    #[test]
    fn headers_that_name_times() {
        for header in ["7 d", "3 months", "day 14", "6 M", "week 4", "24h"] {
            assert!(names_a_time(header), "{header}");
        }
        for header in ["", "50 °C", "time", "k1", "7", "d"] {
            assert!(!names_a_time(header), "{header}");
        }
    }

    #[test]
    fn times_across_are_refused_with_a_remedy() {
        let table = read_table(
            "T/°C\t0 d\t7 d\t14 d\n40\t100\t98\t96\n50\t100\t95\t91\n",
            &Hints::default(),
        );
        assert_eq!(table.problems.len(), 1);
        assert!(table.problems[0].sentence.contains("transpose"));
        assert!(table.columns.iter().skip(1).all(|column| column.role == Role::Ignore));
    }
}
