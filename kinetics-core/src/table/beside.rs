//! Columns that hold again what another one holds: derived ones, which are left
//! out, and second tables beside the first, which are refused.

use super::roles::Roles;
use super::{Origin, Role};
use crate::units::{RateUnit, TemperatureUnit};

impl Roles<'_> {
    /// `T  k  T  k`: a second table beside the first, with temperatures or times
    /// of its own. To read its values at the first one's would be wrong.
    pub(super) fn beside(&mut self) {
        for again in [Role::Temperature, Role::Time] {
            let Some(first) = self.position(|role| role == again) else { continue };
            let value = |role: Role| role.is_value() && role != Role::Time;
            let mut between = None;
            for column in first + 1..self.roles.len() {
                let Some(Some((role, Origin::Header))) = self.roles.get(column).copied() else {
                    continue;
                };
                if value(role) && between.is_none() {
                    between = Some(role);
                }
                let others = (column + 1..self.roles.len())
                    .any(|later| between.is_some() && self.role(later) == between);
                if role == again && others && !self.same_values(first, column) {
                    self.refuse_beside(column, again);
                    return;
                }
            }
        }
    }

    fn refuse_beside(&mut self, from: usize, again: Role) {
        let found = self.header(from).to_string();
        let message = format!(
            "a second table with {}s of its own begins here, beside the first; it is not read. Put one table below the \
             other, under the same headers.",
            again.words()
        );
        self.refuse(from, &found, "one table", &message);
        for column in from..self.roles.len() {
            if !matches!(self.roles.get(column), Some(Some((_, Origin::Stated)))) {
                self.set(column, Role::Ignore, Origin::Header);
            }
        }
    }

    /// The same rate constants in different units.
    fn same_rates(&self, first: usize, other: usize) -> bool {
        let base = |column: usize| -> Option<(RateUnit, Vec<Option<f64>>)> {
            let reading = self
                .readings
                .get(column)
                .filter(|_| self.role(column) == Some(Role::RateConstant))?;
            let unit = RateUnit::parse(reading.unit.as_deref()?).ok()?;
            let scale = reading.multiplier * unit.to_base();
            let numbers = &self.values.get(column)?.numbers;
            Some((unit, numbers.iter().map(|number| Some((*number)? * scale)).collect()))
        };
        let Some(((unit, a), (other_unit, b))) = base(first).zip(base(other)) else { return false };
        unit != other_unit
            && unit.base() == other_unit.base()
            && a.iter()
                .zip(&b)
                .all(|(a, b)| a.zip(*b).is_none_or(|(a, b)| (a / b - 1.0).abs() < 0.05))
    }

    /// The same temperatures, perhaps on another scale, or the same times.
    fn same_values(&self, first: usize, other: usize) -> bool {
        let kelvin = |column: usize| -> Vec<Option<f64>> {
            let unit = self.readings.get(column).and_then(|reading| reading.unit.as_deref());
            let unit = unit.and_then(|unit| TemperatureUnit::parse(unit).ok());
            let numbers =
                self.values.get(column).map(|values| values.numbers.clone()).unwrap_or_default();
            numbers
                .into_iter()
                .map(|number| {
                    Some(unit.map_or(number?, |unit| unit.to_kelvin(number.unwrap_or(0.0))))
                })
                .collect()
        };
        let (a, b) = (kelvin(first), kelvin(other));
        a.iter().zip(&b).all(|(a, b)| a.zip(*b).is_none_or(|(a, b)| (a - b).abs() < 0.2))
    }

    /// One temperature, one time; logarithms of k step back behind k.
    pub(super) fn drop_duplicates(&mut self) {
        let is_temperature =
            |role: Role| matches!(role, Role::Temperature | Role::InverseTemperature);
        let keep_temperature = self
            .position(|role| role == Role::Temperature)
            .or_else(|| self.position(is_temperature));
        let keep_time = self.position(|role| role == Role::Time);
        let best_rate = [Role::RateConstant, Role::LnRateConstant, Role::Log10RateConstant]
            .into_iter()
            .find(|rate| self.has(|role| role == *rate));
        for column in 0..self.roles.len() {
            let Some(Some((role, origin))) = self.roles.get(column).copied() else { continue };
            if origin == Origin::Stated {
                continue;
            }
            let repeated = (0..column).find(|other| self.same_rates(*other, column));
            let (kept, what) = match role {
                Role::RateConstant if repeated.is_some() => (repeated, "the same rate constant"),
                role if is_temperature(role) && keep_temperature != Some(column) => {
                    (keep_temperature, "a temperature")
                }
                Role::Time if keep_time != Some(column) => (keep_time, "a time"),
                role if role.is_rate() && Some(role) != best_rate => {
                    (self.position(|role| Some(role) == best_rate), "a rate constant")
                }
                _ => continue,
            };
            let kept =
                kept.map_or(String::new(), |kept| self.title(kept).replacen("Column", "column", 1));
            self.set(column, Role::Ignore, origin);
            self.say(
                column,
                format!("{} also holds {what} and is not used; {kept} is.", self.title(column)),
            );
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::{Hints, Table, read_table};
    use super::*;

    fn roles(text: &str) -> (Vec<Role>, Table) {
        let table = read_table(text, &Hints::default());
        (table.columns.iter().map(|column| column.role).collect(), table)
    }

    #[test]
    fn a_table_beside_the_first_is_refused() {
        let (found, table) =
            roles("T/°C\tk 1/h\tT/°C\tk 1/h\n50\t0.0021\t60\t0.0059\n70\t0.0160\t80\t0.0412\n");
        assert_eq!(found, [Role::Temperature, Role::RateConstant, Role::Ignore, Role::Ignore]);
        assert!(table.problems[0].sentence.contains("beside the first"));
        let (found, table) = roles("t/h\tc (50 °C)\tt/h\tc (60 °C)\n0\t1\t0\t1\n10\t0.9\t5\t0.8\n");
        assert_eq!(found, [Role::Time, Role::Signal, Role::Ignore, Role::Ignore]);
        assert_eq!(table.problems.len(), 1);
    }

    #[test]
    fn derived_columns_are_left_out() {
        let (found, table) = roles(
            "T/°C\tk 1/h\tT/K\tk 1/s\n50\t0.0021\t323.15\t5.8e-7\n70\t0.0160\t343.15\t4.4e-6\n",
        );
        assert_eq!(found, [Role::Temperature, Role::RateConstant, Role::Ignore, Role::Ignore]);
        assert!(table.problems.is_empty());
    }
}
