//! Gives every column its role: what is stated wins, then the header, then the
//! numbers themselves; what was taken from the numbers is said.

use super::header::Reading;
use super::values::{TimeShape, Values};
use super::{Choice, Form, Hints, Origin, Role};
use crate::problem::{Position, Problem, shortened};
use crate::quantity::Quantity;

/// Roles in the making.
pub(super) struct Roles<'a> {
    headers: &'a [String],
    pub readings: &'a [Reading],
    pub values: &'a [Values],
    pub roles: Vec<Option<(Role, Origin)>>,
    pub run_temperatures: Vec<Option<Quantity>>,
    pub form: Option<Form>,
    pub choices: Vec<Choice>,
    pub problems: Vec<Problem>,
}

/// Decides the role of every column, and the form of the data.
pub(super) fn decide<'a>(
    headers: &'a [String],
    readings: &'a [Reading],
    values: &'a [Values],
    hints: &'a Hints,
) -> Roles<'a> {
    let roles = (0..readings.len())
        .map(|column| {
            let stated = hints
                .columns
                .get(column)
                .and_then(|hint| hint.role)
                .map(|role| (role, Origin::Stated));
            stated.or_else(|| readings.get(column)?.role.map(|role| (role, Origin::Header)))
        })
        .collect();
    let run_temperatures = vec![None; readings.len()];
    let form = hints.form.filter(|form| *form != Form::KnownLaw);
    let mut deciding = Roles {
        headers,
        readings,
        values,
        roles,
        run_temperatures,
        form,
        choices: Vec::new(),
        problems: Vec::new(),
    };
    deciding.correct_letters();
    deciding.beside();
    deciding.units_in_cells();
    deciding.wide();
    deciding.times_across();
    deciding.form =
        deciding.form.or_else(|| deciding.form_of_known()).or_else(|| deciding.form_of_values());
    deciding.fill();
    deciding.form = deciding.form.or_else(|| deciding.form_of_known());
    deciding.drop_duplicates();
    deciding.leave_rest();
    deciding
}

impl Roles<'_> {
    pub fn role(&self, column: usize) -> Option<Role> {
        self.roles.get(column).copied().flatten().map(|(role, _)| role)
    }

    pub(super) fn position(&self, wanted: impl Fn(Role) -> bool) -> Option<usize> {
        (0..self.roles.len()).find(|column| self.role(*column).is_some_and(&wanted))
    }

    pub(super) fn has(&self, wanted: impl Fn(Role) -> bool) -> bool {
        self.position(wanted).is_some()
    }

    pub(super) fn set(&mut self, column: usize, role: Role, origin: Origin) {
        if let Some(slot) = self.roles.get_mut(column) {
            *slot = Some((role, origin));
        }
    }

    pub(super) fn say(&mut self, column: usize, sentence: String) {
        self.choices.push(Choice::of_column(column + 1, sentence));
    }

    pub(super) fn refuse(&mut self, column: usize, found: &str, expected: &str, message: &str) {
        let header = self.header(column).to_string();
        self.problems.push(Problem::said(
            &Position::column(column + 1, &header),
            found,
            expected,
            message,
        ));
    }

    pub(super) fn header(&self, column: usize) -> &str {
        self.headers.get(column).map_or("", |header| header.trim())
    }

    pub(super) fn title(&self, column: usize) -> String {
        match self.header(column) {
            "" => format!("Column {}", column + 1),
            header => format!("Column {} ({})", column + 1, shortened(header)),
        }
    }

    pub(super) fn numeric(&self, column: usize) -> bool {
        self.values.get(column).is_some_and(Values::is_numeric)
    }

    /// Columns of numbers without a role, from the left.
    pub(super) fn unknown(&self) -> Vec<usize> {
        (0..self.roles.len())
            .filter(|column| self.role(*column).is_none() && self.numeric(*column))
            .collect()
    }

    /// Single letters that mean one thing beside others: `s` behind `k` is an
    /// error, `C` beside a temperature a concentration.
    fn correct_letters(&mut self) {
        for column in 0..self.roles.len() {
            if !matches!(self.roles.get(column), Some(Some((_, Origin::Header)))) {
                continue;
            }
            let before = (0..column).rev().find_map(|before| self.role(before));
            let other_temperature = (0..self.roles.len())
                .any(|other| other != column && self.role(other) == Some(Role::Temperature));
            match self.header(column) {
                "s" if before.is_some_and(Role::is_rate) => {
                    self.set(column, Role::Sd, Origin::Header)
                }
                "C" if other_temperature => self.set(column, Role::Signal, Origin::Header),
                _ => {}
            }
        }
    }

    /// Columns without a header whose cells name their units.
    fn units_in_cells(&mut self) {
        for column in self.unknown() {
            let Some(unit) = self.values.get(column).and_then(Values::usual_unit) else { continue };
            let roles = [
                Role::Temperature,
                Role::Time,
                Role::RateConstant,
                Role::HeatRate,
                Role::HeatingRate,
                Role::Signal,
            ];
            let suits = |role: &Role| role.unit_code(unit).is_ok();
            let run =
                self.readings.get(column).is_some_and(|reading| reading.run_temperature.is_some());
            if let Some(role) = roles.into_iter().find(suits).filter(|_| !run) {
                let sentence = format!(
                    "{} is taken as the {}, because its cells count in {unit}.",
                    self.title(column),
                    role.words()
                );
                self.set(column, role, Origin::Values);
                self.say(column, sentence);
            }
        }
    }

    /// The form that the roles known so far belong to.
    fn form_of_known(&self) -> Option<Form> {
        let spare = self.unknown().len();
        let has = |wanted: Role| self.has(|role| role == wanted);
        if self.has(Role::is_rate) {
            Some(Form::Rates)
        } else if has(Role::HeatingRate) {
            Some(Form::Peaks)
        } else if has(Role::HeatRate) {
            Some(Form::HeatRates)
        } else if has(Role::Time) && (has(Role::Signal) || spare > 0) {
            Some(Form::Progress)
        } else if has(Role::Time) && (has(Role::Temperature) || has(Role::InverseTemperature)) {
            Some(Form::Times)
        } else if (has(Role::Temperature) || has(Role::InverseTemperature))
            && spare > 0
            && !has(Role::Signal)
        {
            Some(Form::Rates)
        } else {
            None
        }
    }

    /// The form by the numbers alone.
    fn form_of_values(&self) -> Option<Form> {
        let unknown = self.unknown();
        let values = |at: usize| unknown.get(at).and_then(|column| self.values.get(*column));
        let (first, second) = (values(0)?, values(1));
        let block = first.like_temperatures() && first.repeats() && unknown.len() >= 3;
        let clock = (0..unknown.len())
            .any(|at| values(at).is_some_and(|values| values.time_shape != TimeShape::Numbers));
        if block || clock {
            return Some(Form::Progress);
        }
        if self.has(|role| role == Role::Signal) {
            return Some(Form::Progress);
        }
        second.is_some().then_some(Form::Rates)
    }

    /// Gives the roles that the form still lacks to the columns without one.
    fn fill(&mut self) {
        let Some(form) = self.form else { return };
        let wide = self.run_temperatures.iter().any(Option::is_some);
        if !wide && !self.has(|role| matches!(role, Role::Temperature | Role::InverseTemperature)) {
            self.fill_temperature(form);
        }
        let lacks: Vec<Role> = match form {
            Form::Rates if !self.has(Role::is_rate) => vec![Role::RateConstant],
            Form::Progress => vec![Role::Time, Role::Signal],
            Form::Times => vec![Role::Time],
            Form::HeatRates => vec![Role::HeatRate],
            Form::Peaks => vec![Role::HeatingRate],
            Form::Rates | Form::KnownLaw => Vec::new(),
        };
        for wanted in lacks {
            if self.has(|role| role == wanted) {
                continue;
            }
            let unknown = self.unknown();
            let clock = unknown.iter().copied().find(|column| {
                self.values
                    .get(*column)
                    .is_some_and(|values| values.time_shape != TimeShape::Numbers)
            });
            let column = if wanted == Role::Time {
                clock.or_else(|| unknown.first().copied())
            } else {
                unknown.first().copied()
            };
            let Some(column) = column else { continue };
            let negative = self.values.get(column).is_some_and(|values| !values.all_positive());
            let role = if wanted == Role::RateConstant && negative {
                Role::LnRateConstant
            } else {
                wanted
            };
            self.take(column, role);
        }
        self.fill_errors_and_replicates();
    }

    fn fill_temperature(&mut self, form: Form) {
        let unknown = self.unknown();
        let values = |column: &usize| self.values.get(*column);
        let by = |test: &dyn Fn(&Values) -> bool| {
            unknown.iter().copied().find(|column| values(column).is_some_and(test))
        };
        let found = by(&|values| values.like_temperatures() && !values.spans_decades())
            .or_else(|| by(&Values::like_temperatures))
            .map(|column| (column, Role::Temperature))
            .or_else(|| {
                by(&Values::like_inverse_temperatures)
                    .map(|column| (column, Role::InverseTemperature))
            });
        let enough = unknown.len() > usize::from(!self.has(Role::is_value));
        let repeated =
            found.is_some_and(|(column, _)| values(&column).is_some_and(Values::repeats));
        // A time and a signal are two columns that may look like temperatures.
        let free = form != Form::Progress || repeated;
        if let Some((column, role)) = found
            && enough
            && free
        {
            self.take(column, role);
        }
    }

    /// A role for a column that no header names, in words.
    fn take(&mut self, column: usize, role: Role) {
        self.set(column, role, Origin::Values);
        let range = self.values.get(column).and_then(Values::range);
        let range = range.map_or(String::new(), |(low, high)| {
            if low == high { format!(" ({low})") } else { format!(" ({low} to {high})") }
        });
        let words = role.words();
        let sentence = match self.header(column) {
            "" => format!(
                "Column {} has no header; by its values{range} it is taken as the {words}.",
                column + 1
            ),
            _ => format!(
                "{}: the header names nothing known here; by its values{range} it is taken as the {words}.",
                self.title(column)
            ),
        };
        self.say(column, sentence);
    }

    /// Columns without a header behind a value: its errors, or more of the same.
    fn fill_errors_and_replicates(&mut self) {
        let wanted = match self.form {
            Some(Form::Rates) => Role::RateConstant,
            Some(Form::Progress) => Role::Signal,
            Some(Form::Times) => Role::Time,
            _ => return,
        };
        for column in self.unknown() {
            if !self.header(column).is_empty() {
                continue;
            }
            let Some(value) = (0..column).rev().find(|other| self.role(*other) == Some(wanted))
            else {
                continue;
            };
            let (Some(own), Some(values)) = (self.values.get(column), self.values.get(value))
            else {
                continue;
            };
            if wanted == Role::RateConstant && own.like_replicates_of(values) {
                self.take(column, Role::RateConstant);
            } else if own.like_errors_of(values, 1.0) && self.role(column - 1) == Some(wanted) {
                self.take(column, Role::Sd);
            }
        }
    }

    /// What is left over: a label, or not used.
    fn leave_rest(&mut self) {
        for column in 0..self.roles.len() {
            let refused = self.readings.get(column).and_then(|reading| reading.refused);
            if let Some(reason) = refused.filter(|_| self.role(column) == Some(Role::Ignore)) {
                self.say(column, format!("{} is not used: {reason}.", self.title(column)));
            }
            if self.role(column).is_some() {
                continue;
            }
            // A column of ± between a value and its error needs no words.
            let filled = self.values.get(column).is_some_and(|values| values.filled > values.signs);
            let label = filled
                && !self.numeric(column)
                && !self.has(|role| matches!(role, Role::Label | Role::Run));
            self.set(column, if label { Role::Label } else { Role::Ignore }, Origin::Assumed);
            if label {
                self.say(
                    column,
                    format!(
                        "{} holds text and is taken as the label of the row.",
                        self.title(column)
                    ),
                );
            } else if filled || !self.header(column).is_empty() {
                let why = if self.header(column).is_empty() {
                    "nothing says what it holds"
                } else {
                    "its header names nothing known here"
                };
                self.say(column, format!("{} is not used: {why}.", self.title(column)));
            }
        }
    }
}
