//! Rate constants at temperatures: from the columns of a table to runs.

use super::Observation;
use crate::problem::{Position, Problem};
use crate::quantity::Kelvin;
use crate::table::{Cell, Column, ErrorKind, Role, Row, Table};
use crate::units::{RateUnit, TemperatureUnit};

/// What a stated error is multiplied by to be a standard deviation.
fn to_sd(kind: ErrorKind) -> f64 {
    // The normal distribution's 0.975 point: stated half-widths rarely say their ν.
    const NORMAL_975: f64 = 1.959_963_984_540_054;
    match kind {
        ErrorKind::Sd | ErrorKind::StandardError => 1.0,
        ErrorKind::HalfWidth95 => 1.0 / NORMAL_975,
    }
}

/// One run.
#[derive(Debug, Clone, PartialEq)]
pub struct Run {
    /// Physical line of the text.
    pub row: usize,
    /// "50 °C", or the label given.
    pub name: String,
    /// Rate constant in the base unit.
    pub rate_constant: f64,
    /// What a law sees of it.
    pub observation: Observation,
}

/// A row that gave no run although it could be read.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct LeftOut {
    /// Physical line of the text.
    pub row: usize,
    /// Why.
    pub reason: String,
}

/// Rate constants at temperatures.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Rates {
    /// Usable runs in the order of the text.
    pub runs: Vec<Run>,
    /// Rows left out, by the user or for what they say.
    pub left_out: Vec<LeftOut>,
    /// Unit of k as stated; none where nothing states it.
    pub unit: Option<RateUnit>,
    /// Scale of the temperatures as stated or assumed.
    pub temperature_unit: Option<TemperatureUnit>,
    /// Usable runs that state no error although others do.
    pub errors_missing: usize,
    /// What could not be used.
    pub problems: Vec<Problem>,
}

/// Reads runs from a table; `excluded` are physical lines that the user leaves out, `error_is`
/// is what errors are where the user says so.
pub fn rates(table: &Table, excluded: &[LeftOut], error_is: Option<ErrorKind>) -> Rates {
    let mut rates = Rates::default();
    let Some(layout) = Layout::of(table, &mut rates) else { return rates };
    // Sorted once: 100,000 rows with as many exclusions stay quick.
    let mut excluded: Vec<&LeftOut> = excluded.iter().collect();
    excluded.sort_by_key(|row| row.row);
    for row in &table.rows {
        if let Ok(at) = excluded.binary_search_by_key(&row.line, |e| e.row) {
            rates.left_out.push(excluded[at].clone());
            continue;
        }
        layout.read(row, error_is, &mut rates);
    }
    let stated = rates.runs.iter().filter(|r| r.observation.ln_sd.is_some()).count();
    if stated > 0 {
        rates.errors_missing = rates.runs.len() - stated;
    }
    rates
}

/// Which columns hold what.
struct Layout<'t> {
    columns: &'t [Column],
    temperature: usize,
    temperature_unit: TemperatureUnit,
    /// Columns of rate constants, each with the column of its error.
    rates: Vec<(usize, Option<usize>)>,
    label: Option<usize>,
    unit: Option<RateUnit>,
}

impl<'t> Layout<'t> {
    fn of(table: &'t Table, rates: &mut Rates) -> Option<Self> {
        let columns = &table.columns;
        if table.rows.is_empty() {
            return None;
        }
        let temperature = columns
            .iter()
            .position(|c| matches!(c.role, Role::Temperature | Role::InverseTemperature));
        let rate_columns: Vec<(usize, Option<usize>)> = columns
            .iter()
            .enumerate()
            .filter(|(_, c)| c.role.is_rate())
            .map(|(at, _)| {
                let is_its_error = |c: &Column| c.role == Role::Sd && c.error_of == Some(at);
                (at, columns.iter().position(is_its_error))
            })
            .collect();
        for (missing, expected) in [
            (temperature.is_none(), "a column of temperatures"),
            (rate_columns.is_empty(), "a column of rate constants"),
        ] {
            if missing {
                rates.problems.push(Problem::said(
                    &Position::default(),
                    "",
                    expected,
                    &format!("No column was found to be {expected}: choose it in the table's head."),
                ));
            }
        }
        let temperature = temperature?;
        let first = rate_columns.first()?.0;
        let temperature_unit = columns[temperature]
            .unit
            .as_deref()
            .and_then(|unit| TemperatureUnit::parse(unit).ok())
            .unwrap_or(TemperatureUnit::Kelvin);
        let unit = columns[first].unit.as_deref().and_then(|unit| RateUnit::parse(unit).ok());
        rates.unit = unit;
        rates.temperature_unit = Some(temperature_unit);
        let label = columns.iter().position(|c| matches!(c.role, Role::Label | Role::Run));
        Some(Self { columns, temperature, temperature_unit, rates: rate_columns, label, unit })
    }

    fn read(&self, row: &Row, error_is: Option<ErrorKind>, rates: &mut Rates) {
        let Some(temperature) = self.temperature(row, rates) else { return };
        for &(column, sd_column) in &self.rates {
            let Some((value, in_cell)) = number(row, column) else { continue };
            let Some((rate_constant, ln_rate)) = self.rate(row, column, value, rates) else {
                continue;
            };
            let stated = sd_column
                .and_then(|at| Some((at, number(row, at)?.0)))
                .or(in_cell.map(|error| (column, error)));
            let ln_sd = match stated {
                None => None,
                Some((at, error)) => {
                    let kind = error_is.or(self.columns[at].error_is).unwrap_or(ErrorKind::Sd);
                    let found = self.ln_sd(at, column, error * to_sd(kind), value);
                    if found.is_none() {
                        rates.problems.push(Problem::new(
                            &self.position(row, at),
                            &shown(error),
                            "an error above zero",
                            "the error is not used",
                        ));
                    }
                    found
                }
            };
            rates.runs.push(Run {
                row: row.line,
                name: self.name(row, temperature),
                rate_constant,
                observation: Observation { temperature, ln_rate, ln_sd },
            });
        }
    }

    fn temperature(&self, row: &Row, rates: &mut Rates) -> Option<Kelvin> {
        let (value, _) = number(row, self.temperature)?;
        let inverse = self.columns[self.temperature].role == Role::InverseTemperature;
        let kelvin = if inverse { 1.0 / value } else { self.temperature_unit.to_kelvin(value) };
        if kelvin > 0.0 && kelvin.is_finite() {
            return Some(Kelvin(kelvin));
        }
        let (found, expected) = if inverse {
            (shown(value), "1/T above zero")
        } else {
            (format!("{} {}", shown(value), self.temperature_unit), "a temperature above 0 K")
        };
        rates.problems.push(Problem::new(
            &self.position(row, self.temperature),
            &found,
            expected,
            "the row is left out",
        ));
        None
    }

    /// k and ln k in the base unit.
    fn rate(&self, row: &Row, at: usize, value: f64, rates: &mut Rates) -> Option<(f64, f64)> {
        let column = &self.columns[at];
        let unit = column.unit.as_deref().and_then(|u| RateUnit::parse(u).ok()).or(self.unit);
        let ln_scale = libm::log(unit.map_or(1.0, RateUnit::to_base));
        let ln_rate = ln_scale
            + match column.role {
                Role::LnRateConstant => value,
                Role::Log10RateConstant => value * std::f64::consts::LN_10,
                _ => {
                    if !(value > 0.0) {
                        rates.problems.push(Problem::new(
                            &self.position(row, at),
                            &shown(value),
                            "a rate constant above zero",
                            "the row is left out",
                        ));
                        return None;
                    }
                    libm::log(value)
                }
            };
        let rate_constant = libm::exp(ln_rate);
        if rate_constant > 0.0 && rate_constant.is_finite() {
            return Some((rate_constant, ln_rate));
        }
        rates.problems.push(Problem::new(
            &self.position(row, at),
            &shown(value),
            "a rate constant that can be computed with (1e-300 to 1e300)",
            "the row is left out",
        ));
        None
    }

    /// Standard deviation of ln k: √ln(1 + (s/k)²), the log-normal with that relative error; or
    /// the error itself where the column holds logarithms. None unless above zero.
    fn ln_sd(&self, sd_at: usize, rate_at: usize, error: f64, value: f64) -> Option<f64> {
        let sd_unit = self.columns[sd_at].unit.as_deref();
        let rate_unit = self.columns[rate_at].unit.as_deref();
        let relative = match self.columns[rate_at].role {
            Role::LnRateConstant => return positive(error),
            Role::Log10RateConstant => return positive(error * std::f64::consts::LN_10),
            _ if sd_unit == Some("%") && sd_at != rate_at => error / 100.0,
            _ => {
                let to_base = |unit: Option<&str>| {
                    unit.and_then(|u| RateUnit::parse(u).ok()).map(RateUnit::to_base)
                };
                let scale = match (to_base(sd_unit), to_base(rate_unit)) {
                    (Some(error), Some(rate)) => error / rate,
                    _ => 1.0,
                };
                error * scale / value
            }
        };
        positive(libm::sqrt(libm::log1p(relative * relative)))
            .filter(|_| relative > 0.0)
    }

    fn name(&self, row: &Row, temperature: Kelvin) -> String {
        let label = self.label.and_then(|at| row.cells.get(at)).and_then(Cell::label);
        label.unwrap_or_else(|| {
            let value = self.temperature_unit.from_kelvin(temperature.0);
            // Ten digits hide what a conversion of units leaves behind.
            let rounded = libm::round(value * 1e6) / 1e6;
            format!("{} {}", shown(rounded), self.temperature_unit)
        })
    }

    fn position(&self, row: &Row, column: usize) -> Position<'t> {
        Position::cell(row.line, column + 1, &self.columns[column].name)
    }
}

fn number(row: &Row, column: usize) -> Option<(f64, Option<f64>)> {
    row.cells.get(column)?.number()
}

fn positive(value: f64) -> Option<f64> {
    (value > 0.0 && value.is_finite()).then_some(value)
}

fn shown(value: f64) -> String {
    value.to_string().replace('-', "\u{2212}")
}
