//! From the cells of a table to runs, whatever the shape: a column of temperatures or of run
//! names, one column for each run, one block of rows below the other.

use std::collections::HashMap;

use super::super::cells::{TemperatureColumn, number, shown, temperature_name, to_sd};
use super::{LeftOut, Point};
use crate::numeric::sorting::sort_by;
use crate::problem::{Position, Problem};
use crate::quantity::Kelvin;
use crate::table::{Cell, Column, Content, ErrorKind, Role, Row, SignalIs, Table};
use crate::units::{ConcentrationUnit, TemperatureUnit, TimeUnit};

/// A run before it is judged.
pub(super) struct Draft {
    pub name: String,
    /// From 1; the run's own column where each run has one.
    pub column: Option<(usize, String)>,
    /// Lowest and highest temperature that its rows state.
    pub temperatures: Option<(f64, f64)>,
    pub points: Vec<Point>,
}

/// Everything that a table says of runs.
pub(super) struct Gathered {
    pub drafts: Vec<Draft>,
    pub signal_is: Option<SignalIs>,
    pub unit: Option<ConcentrationUnit>,
    pub time_unit: Option<TimeUnit>,
    pub temperature_unit: Option<TemperatureUnit>,
    pub left_out: Vec<LeftOut>,
    pub problems: Vec<Problem>,
    pub choices: Vec<String>,
}

/// What tells one run from another.
#[derive(PartialEq, Eq, Hash, Clone)]
struct Key {
    column: usize,
    label: Option<String>,
    /// Bits of the temperature, unless a name tells the runs apart.
    temperature: Option<u64>,
    /// Line of the title above.
    title: Option<usize>,
}

pub(super) fn gather(table: &Table, excluded: &[LeftOut], error_is: Option<ErrorKind>) -> Gathered {
    let mut gathered = Gathered {
        drafts: Vec::new(),
        signal_is: table.columns.iter().find_map(|column| column.signal_is),
        unit: None,
        time_unit: None,
        temperature_unit: None,
        left_out: Vec::new(),
        problems: Vec::new(),
        choices: Vec::new(),
    };
    let Some(layout) = Layout::of(table, error_is, &mut gathered) else { return gathered };
    let mut excluded: Vec<&LeftOut> = excluded.iter().collect();
    sort_by(&mut excluded, |row| row.row as f64);
    let mut places = HashMap::new();
    for row in &table.rows {
        match excluded.binary_search_by_key(&row.line, |e| e.row) {
            Ok(at) => gathered.left_out.push(excluded[at].clone()),
            Err(_) => layout.read(row, &mut places, &mut gathered),
        }
    }
    number_names(&mut gathered.drafts);
    gathered
}

/// Runs of the same name are counted: "50 °C", "50 °C (2)".
fn number_names(drafts: &mut [Draft]) {
    let mut seen: HashMap<String, usize> = HashMap::new();
    for draft in drafts {
        let count = seen.entry(draft.name.clone()).or_default();
        *count += 1;
        if *count > 1 {
            draft.name = format!("{} ({count})", draft.name);
        }
    }
}

/// Which columns hold what.
struct Layout<'t> {
    table: &'t Table,
    time: usize,
    time_unit: TimeUnit,
    temperature: Option<TemperatureColumn>,
    temperature_unit: TemperatureUnit,
    run: Option<usize>,
    signals: Vec<SignalColumn>,
    error_is: Option<ErrorKind>,
}

/// A column of signals.
struct SignalColumn {
    at: usize,
    sd: Option<usize>,
    /// What turns its numbers into the base unit.
    scale: f64,
    /// Temperature of its run, from the header.
    temperature: Option<Kelvin>,
}

impl<'t> Layout<'t> {
    fn of(table: &'t Table, error_is: Option<ErrorKind>, gathered: &mut Gathered) -> Option<Self> {
        let columns = &table.columns;
        if table.rows.is_empty() {
            return None;
        }
        let time = columns.iter().position(|c| c.role == Role::Time);
        let unit_of = |column: &Column| {
            column.unit.as_deref().and_then(|unit| ConcentrationUnit::parse(unit).ok())
        };
        let signals: Vec<SignalColumn> = columns
            .iter()
            .enumerate()
            .filter(|(_, c)| c.role == Role::Signal)
            .map(|(at, column)| {
                let is_its_error = |c: &Column| c.role == Role::Sd && c.error_of == Some(at);
                SignalColumn {
                    at,
                    sd: columns.iter().position(is_its_error),
                    scale: unit_of(column).map_or(1.0, ConcentrationUnit::in_base),
                    temperature: column.run_temperature.as_ref().and_then(|t| t.kelvin().ok()),
                }
            })
            .collect();
        for (missing, what) in [(time.is_none(), "time"), (signals.is_empty(), "signal")] {
            if missing {
                gathered.problems.push(Problem::said(
                    &Position::default(),
                    "",
                    &format!("a column of {what}s"),
                    &format!("No column holds a {what}: choose its role in the head of the table."),
                ));
            }
        }
        let time = time?;
        let first = &columns[signals.first()?.at];
        gathered.unit = unit_of(first).map(|unit| unit.kind().base());
        let temperature = TemperatureColumn::of(columns);
        let stated = |quantity: &crate::quantity::Quantity| TemperatureUnit::parse(&quantity.unit);
        let from_headers = columns.iter().find_map(|c| c.run_temperature.as_ref());
        let from_titles = table.run_titles.first().map(|title| &title.1);
        let temperature_unit = temperature
            .map(|column| column.unit)
            .or_else(|| from_headers.or(from_titles).and_then(|quantity| stated(quantity).ok()));
        gathered.temperature_unit = temperature_unit;
        let time_unit = columns[time].unit.as_deref().and_then(|unit| TimeUnit::parse(unit).ok());
        gathered.time_unit = time_unit;
        Some(Self {
            table,
            time,
            time_unit: time_unit.unwrap_or(TimeUnit::Second),
            temperature,
            temperature_unit: temperature_unit.unwrap_or(TemperatureUnit::Kelvin),
            run: columns.iter().position(|c| c.role == Role::Run),
            signals,
            error_is,
        })
    }

    fn read(&self, row: &Row, places: &mut HashMap<Key, usize>, gathered: &mut Gathered) {
        let columns = &self.table.columns;
        let title = self.table.run_titles.iter().rfind(|title| title.0 < row.line);
        let of_row = match self.temperature.and_then(|column| column.kelvin(row, columns)) {
            Some(Err(problem)) => return gathered.problems.push(problem),
            Some(Ok(temperature)) => Some(temperature),
            None => title.and_then(|title| title.1.kelvin().ok()),
        };
        let label = self.run.and_then(|at| row.cells.get(at)).and_then(Cell::label);
        let Some((time, _)) = number(row, self.time) else { return };
        let time_seconds = time * self.time_unit.seconds();
        if !(time_seconds >= 0.0 && time_seconds.is_finite()) {
            let position = Position::cell(row.line, self.time + 1, &columns[self.time].name);
            let found = shown(time);
            let expected = "a time from zero up";
            let left_out = "the row is left out";
            gathered.problems.push(Problem::new(&position, &found, expected, left_out));
            return;
        }
        for signal in &self.signals {
            let temperature = signal.temperature.or(of_row);
            let key = Key {
                column: signal.at,
                temperature: temperature.filter(|_| label.is_none()).map(|t| t.0.to_bits()),
                label: label.clone(),
                title: title.map(|title| title.0),
            };
            let cell = row.cells.get(signal.at).map(|cell| &cell.content);
            let Some(Content::Number { value, error }) = cell else {
                if let Some(reason) = cell.and_then(why_left_out) {
                    let name = self.name(&key, temperature);
                    let reason = format!("{name}: {reason}");
                    gathered.left_out.push(LeftOut { row: row.line, reason });
                }
                continue;
            };
            let point = Point {
                row: row.line,
                time_seconds,
                signal: value * signal.scale,
                sd: self.sd(row, signal, *value, *error, gathered),
            };
            let at = self.place(&key, temperature, time_seconds, places, gathered);
            let Some(draft) = gathered.drafts.get_mut(at) else { continue };
            draft.points.push(point);
            if let Some(Kelvin(kelvin)) = temperature {
                let (low, high) = draft.temperatures.unwrap_or((kelvin, kelvin));
                draft.temperatures = Some((low.min(kelvin), high.max(kelvin)));
            }
        }
    }

    /// The run that a point belongs to: a new one where its time begins again.
    fn place(
        &self,
        key: &Key,
        temperature: Option<Kelvin>,
        time_seconds: f64,
        places: &mut HashMap<Key, usize>,
        gathered: &mut Gathered,
    ) -> usize {
        if let Some(at) = places.get(key).copied()
            && let Some(draft) = gathered.drafts.get(at)
            && !begins_again(&draft.points, time_seconds)
        {
            return at;
        }
        let column = &self.table.columns[key.column];
        let several = self.signals.len() > 1;
        gathered.drafts.push(Draft {
            name: self.name(key, temperature),
            column: several.then(|| (key.column + 1, column.name.clone())),
            temperatures: None,
            points: Vec::new(),
        });
        let at = gathered.drafts.len() - 1;
        places.insert(key.clone(), at);
        at
    }

    fn name(&self, key: &Key, temperature: Option<Kelvin>) -> String {
        if let Some(label) = &key.label {
            return label.clone();
        }
        let column = &self.table.columns[key.column];
        match temperature {
            Some(temperature) => temperature_name(temperature, self.temperature_unit),
            None if self.signals.len() > 1 => column.name.clone(),
            None => "without a name".into(),
        }
    }

    /// Standard deviation of a signal in the base unit; a problem where what is stated is none.
    fn sd(
        &self,
        row: &Row,
        signal: &SignalColumn,
        value: f64,
        in_cell: Option<f64>,
        gathered: &mut Gathered,
    ) -> Option<f64> {
        let columns = &self.table.columns;
        let beside = signal.sd.and_then(|at| Some((at, number(row, at)?.0)));
        let (at, error) = beside.or(in_cell.map(|error| (signal.at, error)))?;
        let kind = self.error_is.or(columns[at].error_is).unwrap_or(ErrorKind::Sd);
        let relative = at != signal.at && columns[at].unit.as_deref() == Some("%");
        let absolute = if relative { error / 100.0 * value.abs() } else { error };
        let sd = absolute * to_sd(kind) * signal.scale;
        if sd > 0.0 && sd.is_finite() {
            return Some(sd);
        }
        gathered.problems.push(Problem::new(
            &Position::cell(row.line, at + 1, &columns[at].name),
            &shown(error),
            "an error above zero",
            "the error is not used",
        ));
        None
    }
}

/// Whether a point returns to where its run began: a further run of the same name.
fn begins_again(points: &[Point], time_seconds: f64) -> bool {
    match (points.first(), points.last()) {
        (Some(first), Some(last)) => {
            time_seconds <= first.time_seconds && last.time_seconds > first.time_seconds
        }
        _ => false,
    }
}

fn why_left_out(content: &Content) -> Option<&'static str> {
    match content {
        Content::Marked { .. } => Some("marked in the text"),
        Content::Below(_) => Some("below a limit of quantitation"),
        Content::NotDetermined => Some("no value"),
        _ => None,
    }
}
