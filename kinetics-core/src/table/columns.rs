//! Gives every column its unit and its multiplier, and ties errors to what they
//! are errors of.

use super::errors;
use super::header::{Reading, read};
use super::layout::Layout;
use super::roles::{self, Roles};
use super::values::{TimeShape, Values};
use super::{Choice, Column, ColumnHint, Decimal, Form, Hints, Origin, Role};
use crate::numeric::decimals::read_decimal;
use crate::problem::{Position, Problem};
use crate::units::RateUnit;

/// The columns, and what was decided and refused about them.
pub(super) struct Columns {
    pub columns: Vec<Column>,
    pub form: Option<Form>,
    pub problems: Vec<Problem>,
    pub choices: Vec<Choice>,
}

impl Columns {
    /// Whether a line with a temperature alone can be the title of a run.
    pub fn take_run_titles(&self) -> bool {
        let says_temperature = |column: &Column| {
            matches!(column.role, Role::Temperature | Role::InverseTemperature)
                || column.run_temperature.is_some()
        };
        self.form == Some(Form::Progress) && !self.columns.iter().any(says_temperature)
    }
}

/// Decides roles, units and multipliers of all columns.
pub(super) fn decide(
    layout: &Layout,
    hints: &Hints,
    values: &[Values],
    decimals: &[Decimal],
) -> Columns {
    let empty = String::new();
    let readings: Vec<Reading> = (0..layout.columns)
        .map(|column| {
            let header = layout.headers.get(column).unwrap_or(&empty);
            read(header, layout.units.get(column).unwrap_or(&empty))
        })
        .collect();
    let roles = roles::decide(&layout.headers, &readings, values, hints);
    let mut deciding = Deciding {
        layout,
        hints,
        values,
        readings: &readings,
        problems: Vec::new(),
        choices: Vec::new(),
    };
    let mut columns: Vec<Column> =
        (0..layout.columns).map(|column| deciding.column(column, &roles, decimals)).collect();
    share_rate_unit(&mut columns);
    for at in 0..columns.len() {
        if columns[at].role == Role::Sd
            && let Some(sentence) =
                errors::tie(at, &mut columns, roles.form, &readings, values, hints)
        {
            deciding.say(at, &columns[at], &sentence);
        }
    }
    for (at, column) in columns.iter().enumerate() {
        deciding.lacking_unit(at, column);
    }
    let mut choices = roles.choices;
    choices.append(&mut deciding.choices);
    let mut problems = roles.problems;
    problems.append(&mut deciding.problems);
    Columns { columns, form: roles.form, problems, choices }
}

struct Deciding<'a> {
    layout: &'a Layout,
    hints: &'a Hints,
    values: &'a [Values],
    readings: &'a [Reading],
    problems: Vec<Problem>,
    choices: Vec<Choice>,
}

impl Deciding<'_> {
    fn column(&mut self, at: usize, roles: &Roles<'_>, decimals: &[Decimal]) -> Column {
        let (role, role_from) =
            roles.roles.get(at).copied().flatten().unwrap_or((Role::Ignore, Origin::Assumed));
        let header = self.layout.headers.get(at).map_or("", |header| header.trim()).to_string();
        let name = if header.is_empty() {
            role.words().to_string()
        } else {
            header.split_whitespace().collect::<Vec<_>>().join(" ")
        };
        let mut column = Column {
            role,
            unit: None,
            multiplier: 1.0,
            header,
            name,
            role_from,
            unit_from: Origin::Assumed,
            decimal: decimals.get(at).copied().unwrap_or_default(),
            error_of: None,
            error_is: None,
            signal_is: None,
            run_temperature: roles.run_temperatures.get(at).cloned().flatten(),
        };
        if role.is_numeric() {
            self.unit(at, &mut column);
            self.multiplier(at, &mut column);
        }
        if let Some(reading) = self.readings.get(at) {
            column.error_is = reading.error_is.filter(|_| role == Role::Sd);
            column.signal_is = reading.signal_is.filter(|_| role == Role::Signal);
            if reading.base_unsaid && role == Role::Log10RateConstant && role_from == Origin::Header
            {
                self.say(at, &column, "“log” is taken to base 10.");
            }
        }
        column
    }

    fn hint(&self, at: usize) -> Option<&ColumnHint> {
        self.hints.columns.get(at)
    }

    fn say(&mut self, at: usize, column: &Column, what: &str) {
        let header = if column.header.is_empty() {
            String::new()
        } else {
            format!(" ({})", crate::problem::shortened(&column.header))
        };
        let sentence = format!("Column {}{header}: {what}", at + 1);
        self.choices.push(Choice::of_column(at + 1, sentence));
    }

    fn symbol(&self, column: &Column) -> String {
        column.unit.as_deref().map_or(String::new(), |code| column.role.unit_symbol(code))
    }

    /// Stated, else from the header, else from the cells, else by default.
    fn unit(&mut self, at: usize, column: &mut Column) {
        let role = column.role;
        if let Some(stated) =
            self.hint(at).and_then(|hint| hint.unit.clone()).filter(|unit| !unit.trim().is_empty())
        {
            match role.unit_code(&stated) {
                Ok(code) => {
                    (column.unit, column.unit_from) = (code, Origin::Stated);
                    return;
                }
                Err(error) => {
                    let message = format!("the unit stated for it is not used: {error}.");
                    self.problems.push(Problem::said(
                        &Position::column(at + 1, &column.header),
                        &stated,
                        "a unit that suits the column",
                        &message,
                    ));
                }
            }
        }
        let from_header = self.readings.get(at).and_then(|reading| reading.unit.as_deref());
        if let Some(code) = from_header.and_then(|unit| role.unit_code(unit).ok()).flatten() {
            (column.unit, column.unit_from) = (Some(code), Origin::Header);
            return;
        }
        let Some(values) = self.values.get(at) else { return };
        if let Some(code) =
            values.units.iter().find_map(|(unit, _)| role.unit_code(unit).ok().flatten())
        {
            if values.usual_unit().is_none() {
                let symbol = role.unit_symbol(&code);
                let sentence = format!(
                    "its cells name their units; all are counted in {symbol}, those without a unit too."
                );
                self.say(at, column, &sentence);
            }
            (column.unit, column.unit_from) = (Some(code), Origin::Values);
            return;
        }
        match role {
            Role::Temperature => {
                let (low, high) = values.range().unwrap_or((0.0, 0.0));
                let kelvin = low >= 250.0;
                column.unit = Some(if kelvin { "K" } else { "°C" }.to_string());
                let why = if low == high {
                    format!("by its value {low}")
                } else {
                    format!("because its values lie between {low} and {high}")
                };
                let (taken, other) = if kelvin { ("K", "°C") } else { ("°C", "K") };
                self.say(
                    at,
                    column,
                    &format!("no unit is given; it is taken as {taken}, not {other}, {why}."),
                );
            }
            Role::InverseTemperature => column.unit = Some("1/K".to_string()),
            Role::Time if values.time_shape != TimeShape::Numbers => {
                (column.unit, column.unit_from) = (Some("h".to_string()), Origin::Values);
            }
            _ => {}
        }
    }

    fn multiplier(&mut self, at: usize, column: &mut Column) {
        if let Some(multiplier) = self
            .hint(at)
            .and_then(|hint| hint.multiplier)
            .filter(|multiplier| multiplier.is_finite() && *multiplier > 0.0)
        {
            column.multiplier = multiplier;
            return;
        }
        let Some(reading) = self.readings.get(at) else { return };
        let role_of_reading = reading.role;
        if role_of_reading.is_some() && role_of_reading != Some(column.role) {
            return;
        }
        column.multiplier = reading.multiplier;
        if column.role == Role::InverseTemperature && self.plausible_inverse(at, column) {
            return;
        }
        if column.multiplier == 1.0 || column.role == Role::Sd {
            return;
        }
        let unit =
            column.unit.as_ref().map_or(String::new(), |_| format!(" {}", self.symbol(column)));
        let first = self.values.get(at).and_then(Values::first);
        let taken = first.map_or(String::new(), |first| {
            format!(", so that {first} is read as {}{unit}", shown(first * column.multiplier))
        });
        let mut sentence =
            format!("its numbers are multiplied by {}{taken}.", shown(column.multiplier));
        if reading.doubtful {
            let other = first.map_or(String::new(), |first| {
                format!(", {first} would be {}{unit}", shown(first / column.multiplier))
            });
            sentence.push_str(&format!(
                " The header can also be meant the other way round: multiplied by {}{other}.",
                shown(1.0 / column.multiplier)
            ));
        }
        self.say(at, column, &sentence);
    }

    /// 1/T lies between 0.0005 and 0.02 1/K; a header that says otherwise is taken by what it must mean.
    fn plausible_inverse(&mut self, at: usize, column: &mut Column) -> bool {
        let Some((low, high)) = self.values.get(at).and_then(Values::range) else { return false };
        let fits = |multiplier: f64| low * multiplier > 0.0005 && high * multiplier < 0.02;
        let possible = [1.0, 1e-3, 1e-4].into_iter().find(|multiplier| fits(*multiplier));
        let Some(multiplier) = possible.filter(|_| !fits(column.multiplier)) else { return false };
        column.multiplier = multiplier;
        let sentence = format!(
            "its numbers are multiplied by {multiplier}, since by the letter of the header they would be no inverse \
             temperatures; {low} is read as {} K⁻¹.",
            shown(low * multiplier)
        );
        self.say(at, column, &sentence);
        true
    }

    /// Says which columns lack a unit, and what stood in its place.
    fn lacking_unit(&mut self, at: usize, column: &Column) {
        let example = match column.role {
            Role::RateConstant | Role::LnRateConstant | Role::Log10RateConstant => {
                "a unit such as 1/h, 1/s or L/(mol s)"
            }
            Role::Time => "a unit such as s, min, h or d",
            Role::HeatRate => "a unit such as W/kg",
            Role::HeatingRate => "a unit such as K/min",
            Role::Temperature => "°C, K or °F",
            _ => return,
        };
        let found = self.readings.get(at).and_then(|reading| reading.no_unit.clone());
        let instead = found.as_ref().map_or("no unit is given".to_string(), |found| {
            format!(
                "“{}” is no unit known here for a {}",
                crate::problem::shortened(found),
                column.role.words()
            )
        });
        if column.unit.is_some()
            && !(column.role == Role::Temperature
                && column.unit_from == Origin::Assumed
                && found.is_some())
        {
            return;
        }
        let message =
            format!("{instead}, expected {example}; choose it in the head of the column.");
        self.problems.push(Problem::said(
            &Position::column(at + 1, &column.header),
            found.as_deref().unwrap_or(""),
            example,
            &message,
        ));
    }
}

/// Replicates without a unit of their own have that of the first.
fn share_rate_unit(columns: &mut [Column]) {
    let first = columns
        .iter()
        .find(|column| column.role == Role::RateConstant && column.unit.is_some())
        .cloned();
    let Some(first) = first else { return };
    for column in columns
        .iter_mut()
        .filter(|column| column.role == Role::RateConstant && column.unit.is_none())
    {
        column.unit.clone_from(&first.unit);
        column.unit_from = Origin::Assumed;
        if column.multiplier == 1.0 && column.header.is_empty() {
            column.multiplier = first.multiplier;
        }
    }
}

/// A number for a sentence: 12 digits hide what binary fractions leave behind.
pub(super) fn shown(value: f64) -> String {
    let rounded = read_decimal(&format!("{value:.11e}")).unwrap_or(value);
    let size = rounded.abs();
    if size != 0.0 && !(1e-4..1e7).contains(&size) {
        format!("{rounded:e}")
    } else {
        rounded.to_string()
    }
}

/// The unit of a column of rate constants, in its typed form.
pub(super) fn rate_unit(unit: Option<&str>) -> Option<RateUnit> {
    unit.and_then(|unit| RateUnit::parse(unit).ok())
}
