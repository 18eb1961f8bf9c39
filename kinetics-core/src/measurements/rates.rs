//! Runs at temperatures, from the columns of a table: rate constants, times to one extent, or
//! heat rates.

use super::Observation;
use super::cells::{TemperatureColumn, number, shown, temperature_name, to_sd};
use crate::numeric::sorting::sort_by;
use crate::problem::{Position, Problem};
use crate::quantity::Kelvin;
use crate::table::{Cell, Column, Content, ErrorKind, NamedExtent, Role, Row, Table, named_extent};
use crate::units::{ConcentrationKind, HeatRateUnit, RateUnit, TemperatureUnit, TimeUnit};

/// What was measured at each temperature; each tells ln k up to a constant.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Measurand {
    /// The rate constant itself.
    #[default]
    RateConstant,
    /// The time to one extent, inversely proportional to k.
    Time,
    /// The heat released per time and mass at the start, proportional to k.
    HeatRate,
}

impl Measurand {
    fn is(self, role: Role) -> bool {
        match self {
            Self::RateConstant => role.is_rate(),
            Self::Time => role == Role::Time,
            Self::HeatRate => role == Role::HeatRate,
        }
    }

    fn name(self) -> &'static str {
        match self {
            Self::RateConstant => "rate constant",
            Self::Time => "time",
            Self::HeatRate => "heat rate",
        }
    }
}

/// One run.
#[derive(Debug, Clone, PartialEq)]
pub struct Run {
    /// Physical line of the text.
    pub row: usize,
    /// "50 °C", or the label given.
    pub name: String,
    /// What a law sees of it.
    pub observation: Observation,
    /// The groups it shares with other runs: the column and what stands in it.
    pub groups: Vec<(usize, String)>,
}

impl Run {
    /// A run that shares nothing with others.
    pub fn new(row: usize, name: String, observation: Observation) -> Self {
        Self { row, name, observation, groups: Vec::new() }
    }
}

/// A row that gave no run although it could be read.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct LeftOut {
    /// Physical line of the text.
    pub row: usize,
    /// Why.
    pub reason: String,
}

/// Runs at temperatures.
///
/// `ln_rate` of a run is ln k for rate constants, −ln(t/s) for times and ln(q/(W/kg)) for heat
/// rates: all that is missing to ln k is one constant for all runs, see [`Rates::shift`].
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Rates {
    /// Usable runs in the order of the text.
    pub runs: Vec<Run>,
    /// Rows left out, by the user or for what they say.
    pub left_out: Vec<LeftOut>,
    /// Unit of k as stated; none where nothing states it.
    pub unit: Option<RateUnit>,
    /// The extent that the head of a column of times names.
    pub extent: Option<NamedExtent>,
    /// The initial concentration that the runs themselves tell, in the base unit of its kind.
    pub initial_concentration: Option<(f64, ConcentrationKind)>,
    /// Scale of the temperatures as stated or assumed.
    pub temperature_unit: Option<TemperatureUnit>,
    /// Usable runs that state no error although others do.
    pub errors_missing: usize,
    /// Unit of the times that were measured in place of k; rates are told in it.
    pub time_unit: Option<TimeUnit>,
    /// What could not be used.
    pub problems: Vec<Problem>,
}

impl Rates {
    /// Adds the constant that makes ln k of what was measured, and states the unit of that k; of
    /// times, k is told in theirs.
    pub fn shift(&mut self, ln_constant: f64, unit: RateUnit) {
        for run in &mut self.runs {
            run.observation.ln_rate += ln_constant;
        }
        let time = self.time_unit.unwrap_or(unit.time);
        self.unit = Some(RateUnit { time, ..unit });
    }

    /// Whether these are times that nothing makes into rate constants.
    pub fn are_bare_times(&self) -> bool {
        self.time_unit.is_some() && self.unit.is_none()
    }
}

/// Reads runs from a table; `excluded` are physical lines that the user leaves out, `error_is`
/// is what errors are where the user says so.
pub fn rates(
    table: &Table,
    measurand: Measurand,
    excluded: &[LeftOut],
    error_is: Option<ErrorKind>,
) -> Rates {
    let mut rates = Rates::default();
    let Some(layout) = Layout::of(table, measurand, &mut rates) else { return rates };
    if measurand == Measurand::Time {
        let column = table.columns.iter().find(|column| column.role == Role::Time);
        let code = column.and_then(|column| column.unit.as_deref());
        rates.time_unit = code.and_then(|code| TimeUnit::parse(code).ok());
    }
    // Sorted once: 100,000 rows with as many exclusions stay quick.
    let mut excluded: Vec<&LeftOut> = excluded.iter().collect();
    sort_by(&mut excluded, |row| row.row as f64);
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
    measurand: Measurand,
    temperature: TemperatureColumn,
    /// Columns of what was measured, each with the column of its error.
    values: Vec<(usize, Option<usize>)>,
    label: Option<usize>,
    unit: Option<RateUnit>,
}

impl<'t> Layout<'t> {
    fn of(table: &'t Table, measurand: Measurand, rates: &mut Rates) -> Option<Self> {
        let columns = &table.columns;
        if table.rows.is_empty() {
            return None;
        }
        let temperature = TemperatureColumn::of(columns);
        let values: Vec<(usize, Option<usize>)> = columns
            .iter()
            .enumerate()
            .filter(|(_, c)| measurand.is(c.role))
            .map(|(at, _)| {
                let is_its_error = |c: &Column| c.role == Role::Sd && c.error_of == Some(at);
                (at, columns.iter().position(is_its_error))
            })
            .collect();
        for (missing, what) in
            [(temperature.is_none(), "temperature"), (values.is_empty(), measurand.name())]
        {
            if missing {
                rates.problems.push(Problem::said(
                    &Position::default(),
                    "",
                    &format!("a column of {what}s"),
                    &format!("No column holds a {what}: choose its role in the head of the table."),
                ));
            }
        }
        let temperature = temperature?;
        let first = values.first()?.0;
        let unit = columns[first].unit.as_deref().and_then(|unit| RateUnit::parse(unit).ok());
        rates.unit = unit;
        if measurand == Measurand::Time {
            rates.extent = named_extent(&columns[first].header);
        }
        rates.temperature_unit = Some(temperature.unit);
        let label = columns.iter().position(|c| matches!(c.role, Role::Label | Role::Run));
        Some(Self { columns, measurand, temperature, values, label, unit })
    }

    fn read(&self, row: &Row, error_is: Option<ErrorKind>, rates: &mut Rates) {
        if let Some(reason) = self.reason_to_leave_out(row) {
            rates.left_out.push(LeftOut { row: row.line, reason: reason.into() });
            return;
        }
        let temperature = match self.temperature.kelvin(row, self.columns) {
            None => return,
            Some(Err(problem)) => {
                rates.problems.push(problem);
                return;
            }
            Some(Ok(temperature)) => temperature,
        };
        for &(column, sd_column) in &self.values {
            let Some((value, in_cell)) = number(row, column) else { continue };
            let ln_rate = match self.ln_rate(column, value) {
                Ok(ln_rate) => ln_rate,
                Err(expected) => {
                    rates.problems.push(Problem::new(
                        &self.position(row, column),
                        &shown(value),
                        &expected,
                        "the row is left out",
                    ));
                    continue;
                }
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
                observation: Observation::new(temperature, ln_rate, ln_sd),
                groups: self.groups(row),
            });
        }
    }

    /// Why a row that can be read gives no run, if so: it is marked, or its value is none.
    fn reason_to_leave_out(&self, row: &Row) -> Option<&'static str> {
        let cells = std::iter::once(self.temperature.at).chain(self.values.iter().map(|v| v.0));
        let contents: Vec<&Content> =
            cells.filter_map(|at| row.cells.get(at)).map(|cell| &cell.content).collect();
        if contents.iter().any(|c| matches!(c, Content::Marked { .. })) {
            return Some("marked in the text");
        }
        let has_value = contents.iter().skip(1).any(|c| matches!(c, Content::Number { .. }));
        let without = |kind: fn(&Content) -> bool| {
            !has_value && contents.iter().skip(1).any(|content| kind(content))
        };
        if without(|c| matches!(c, Content::Below(_))) {
            return Some("below a limit of quantitation");
        }
        without(|c| matches!(c, Content::NotDetermined)).then_some("no value")
    }

    /// ln k up to the constant of the measurand, or what was expected instead.
    fn ln_rate(&self, at: usize, value: f64) -> Result<f64, String> {
        let column = &self.columns[at];
        let unit = column.unit.as_deref();
        let positive_ln = |scale: f64| {
            if value > 0.0 {
                Ok(libm::log(value) + libm::log(scale))
            } else {
                Err(format!("a {} above zero", self.measurand.name()))
            }
        };
        let ln_rate = match (self.measurand, column.role) {
            (Measurand::Time, _) => {
                let unit = unit.and_then(|u| TimeUnit::parse(u).ok());
                -positive_ln(unit.map_or(1.0, TimeUnit::seconds))?
            }
            (Measurand::HeatRate, _) => {
                let unit = unit.and_then(|u| HeatRateUnit::parse(u).ok());
                positive_ln(unit.map_or(1.0, HeatRateUnit::watts_per_kilogram))?
            }
            (Measurand::RateConstant, role) => {
                let unit = unit.and_then(|u| RateUnit::parse(u).ok()).or(self.unit);
                let scale = unit.map_or(1.0, RateUnit::to_base);
                match role {
                    Role::LnRateConstant => value + libm::log(scale),
                    Role::Log10RateConstant => value * std::f64::consts::LN_10 + libm::log(scale),
                    _ => positive_ln(scale)?,
                }
            }
        };
        let back = libm::exp(ln_rate);
        if back > 0.0 && back.is_finite() {
            Ok(ln_rate)
        } else {
            Err(format!("a {} that can be computed with (1e-300 to 1e300)", self.measurand.name()))
        }
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
                let to_base = |unit: Option<&str>| match self.measurand {
                    Measurand::RateConstant => {
                        unit.and_then(|u| RateUnit::parse(u).ok()).map(RateUnit::to_base)
                    }
                    Measurand::Time => {
                        unit.and_then(|u| TimeUnit::parse(u).ok()).map(TimeUnit::seconds)
                    }
                    Measurand::HeatRate => unit
                        .and_then(|u| HeatRateUnit::parse(u).ok())
                        .map(HeatRateUnit::watts_per_kilogram),
                };
                let scale = match (to_base(sd_unit), to_base(rate_unit)) {
                    (Some(error), Some(rate)) => error / rate,
                    _ => 1.0,
                };
                error * scale / value
            }
        };
        positive(libm::sqrt(libm::log1p(relative * relative))).filter(|_| relative > 0.0)
    }

    fn groups(&self, row: &Row) -> Vec<(usize, String)> {
        let columns = self.columns.iter().zip(&row.cells).enumerate();
        columns
            .filter(|(_, (column, _))| column.role == Role::Group)
            .filter_map(|(at, (_, cell))| Some((at, cell.label()?)))
            .collect()
    }

    fn name(&self, row: &Row, temperature: Kelvin) -> String {
        let label = self.label.and_then(|at| row.cells.get(at)).and_then(Cell::label);
        label.unwrap_or_else(|| temperature_name(temperature, self.temperature.unit))
    }

    fn position(&self, row: &Row, column: usize) -> Position<'t> {
        Position::cell(row.line, column + 1, &self.columns[column].name)
    }
}

fn positive(value: f64) -> Option<f64> {
    (value > 0.0 && value.is_finite()).then_some(value)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::table::{Form, Hints, read_table};

    fn read(form: Form, measurand: Measurand, text: &str) -> Rates {
        let table = read_table(text, &Hints { form: Some(form), ..Hints::default() });
        rates(&table, measurand, &[], None)
    }

    #[test]
    fn errors_in_per_cent_and_in_the_unit_are_the_same() {
        let absolute = "T/°C\tk, 1/h\ts(k), 1/h\n50\t0.02\t0.001\n";
        let relative = "T/°C\tk, 1/h\ts(k), %\n50\t0.02\t5\n";
        let sd =
            |text: &str| read(Form::Rates, Measurand::RateConstant, text).runs[0].observation.ln_sd;
        let expected = (1.0_f64 + 0.05 * 0.05).ln().sqrt();
        for text in [absolute, relative] {
            assert!((sd(text).unwrap_or_default() - expected).abs() < 1e-12, "{text}");
        }
    }

    #[test]
    fn what_gives_no_run_is_said() {
        let text = "T/°C\tk, 1/h\ts(k)\n50\t0.02\t0.001\n-300\t0.03\t0.001\n60\t-0.05\t0.001\n\
                    70\t0.1\t0\n80\t0.2*\t0.01\n90\tn.d.\t\n";
        let rates = read(Form::Rates, Measurand::RateConstant, text);
        let rows: Vec<usize> = rates.runs.iter().map(|run| run.row).collect();
        assert_eq!(rows, [2, 5]);
        assert_eq!(rates.runs[1].observation.ln_sd, None);
        assert_eq!(rates.errors_missing, 1);
        let said: Vec<&str> = rates.problems.iter().map(|p| p.expected.as_str()).collect();
        let expected =
            ["a temperature above 0 K", "a rate constant above zero", "an error above zero"];
        assert_eq!(said, expected);
        let reasons: Vec<&str> = rates.left_out.iter().map(|l| l.reason.as_str()).collect();
        assert_eq!(reasons, ["marked in the text", "no value"]);
    }

    #[test]
    fn times_and_heat_rates_tell_the_rate_up_to_a_constant() {
        let times = read(Form::Times, Measurand::Time, "T/°C\tt, h\n50\t2\n60\t1\n");
        assert!((times.runs[0].observation.ln_rate + 7200.0_f64.ln()).abs() < 1e-12);
        let heat = read(Form::HeatRates, Measurand::HeatRate, "T/°C\tq, W/g\n50\t0.02\n60\t0.1\n");
        assert!((heat.runs[0].observation.ln_rate - 20.0_f64.ln()).abs() < 1e-12);
    }
}
