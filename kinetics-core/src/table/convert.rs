//! Turns the text of cells into contents, row by row, once roles and units are
//! decided.

use super::columns::rate_unit;
use super::header::without_humidity;
use super::tally::Tally;
use super::values::TimeShape;
use super::{Column, Content, Form, Role, Row};
use crate::numeric::decimals::read_decimal;
use crate::problem::{Position, Problem};
use crate::text::decimal::{Evidence, evidence};
use crate::text::number::{Number, Reading, read_cell};
use crate::text::{Decimal, stamp};
use crate::units::{ConcentrationUnit, HeatRateUnit, HeatingRateUnit, TemperatureUnit, TimeUnit};

/// Problems of cells that are listed one by one; the rest is counted.
const LISTED: usize = 200;

/// What the conversion of a column needs.
struct Plan {
    role: Role,
    decimal: Decimal,
    multiplier: f64,
    unit: Option<String>,
    name: String,
    error_of: Option<usize>,
    time_shape: TimeShape,
    /// An empty cell means the value above: merged cells of a spreadsheet.
    fills_down: bool,
    /// The row is of no use without it.
    required: bool,
    consequence: &'static str,
    /// Unit last met in a cell, with what turns it into the column's.
    cached: Option<(String, Option<(f64, f64)>)>,
}

/// Converts rows one after the other.
pub(super) struct Converter {
    plans: Vec<Plan>,
    /// The decimal mark was stated: nothing else is accepted.
    strict: bool,
    above: Vec<Option<Content>>,
    pub tallies: Vec<Tally>,
    pub problems: Vec<Problem>,
}

impl Converter {
    pub fn new(
        columns: &[Column],
        shapes: &[TimeShape],
        form: Option<Form>,
        strict: bool,
    ) -> Converter {
        let values = columns
            .iter()
            .filter(|column| column.role.is_value() && column.error_of.is_none())
            .count();
        let several = form == Some(Form::Progress)
            && columns.iter().filter(|column| column.role == Role::Signal).count() > 1
            || columns.iter().filter(|column| column.role.is_rate()).count() > 1;
        let plans = columns
            .iter()
            .enumerate()
            .map(|(at, column)| {
                let value =
                    matches!(column.role, Role::Signal | Role::HeatRate) || column.role.is_rate();
                Plan {
                    role: column.role,
                    decimal: column.decimal,
                    multiplier: column.multiplier,
                    unit: column.unit.clone(),
                    name: column.header.clone(),
                    error_of: column.error_of,
                    time_shape: shapes.get(at).copied().unwrap_or_default(),
                    fills_down: matches!(column.role, Role::Temperature | Role::Run) && values > 0,
                    required: column.role.is_numeric()
                        && column.role != Role::Sd
                        && !(value && several),
                    consequence: match column.role {
                        Role::Sd => "the row counts as one without an error",
                        _ if value && several => "the value is left out",
                        _ => "the row is left out",
                    },
                    cached: None,
                }
            })
            .collect();
        Converter {
            plans,
            strict,
            above: vec![None; columns.len()],
            tallies: vec![Tally::default(); columns.len()],
            problems: Vec::new(),
        }
    }

    /// Fills in the contents of a row whose cells have only their places.
    pub fn convert(&mut self, text: &str, row: &mut Row) {
        for column in 0..row.cells.len() {
            let Some(span) = row.cells.get(column).map(|cell| cell.span.clone()) else { continue };
            let cell = text.get(span).unwrap_or("");
            let content = self.content(cell, column, row);
            if let Some(slot) = row.cells.get_mut(column) {
                slot.content = content;
            }
        }
    }

    fn content(&mut self, cell: &str, column: usize, row: &Row) -> Content {
        let Some(plan) = self.plans.get(column) else { return Content::Empty };
        if plan.role == Role::Ignore {
            return Content::Text("".into());
        }
        let content = if cell.is_empty() {
            Content::Empty
        } else if plan.role.is_numeric() {
            self.number(cell, column, row)
        } else {
            Content::Text(cell.into())
        };
        self.settle(content, column, row)
    }

    /// Empty cells: the value above, or a gap that is counted.
    fn settle(&mut self, content: Content, column: usize, row: &Row) -> Content {
        let (Some(plan), Some(above), Some(tally)) =
            (self.plans.get(column), self.above.get_mut(column), self.tallies.get_mut(column))
        else {
            return content;
        };
        if content != Content::Empty {
            if plan.fills_down {
                *above = Some(content.clone())
                    .filter(|content| !matches!(content, Content::Bad | Content::Marked { .. }));
            }
            return content;
        }
        if plan.fills_down
            && let Some(above) = above
        {
            tally.filled_down.count(row.line, "");
            return above.clone();
        }
        if plan.required {
            tally.empty.count(row.line, "");
        }
        Content::Empty
    }

    fn number(&mut self, cell: &str, column: usize, row: &Row) -> Content {
        let Some(plan) = self.plans.get(column) else { return Content::Bad };
        match plan.time_shape {
            TimeShape::Stamps => {
                if let Some(seconds) = stamp::stamp_seconds(cell) {
                    return in_unit(seconds, plan.unit.as_deref());
                }
            }
            TimeShape::Clock { .. } => {
                if let Some((seconds, _)) = stamp::clock_seconds(cell) {
                    return in_unit(seconds, plan.unit.as_deref());
                }
            }
            TimeShape::Numbers => {}
        }
        let (decimal, role) = (plan.decimal, plan.role);
        let mut reading = read_cell(cell, decimal);
        if reading == Reading::Text
            && role == Role::Temperature
            && let Some(rest) = without_humidity(cell)
        {
            reading = read_cell(&rest, decimal);
            self.tally(column, |tally| tally.humidity.count(row.line, cell));
        }
        if reading == Reading::Text
            && !self.strict
            && evidence(cell) == Evidence::Certain(decimal.other())
        {
            reading = read_cell(cell, decimal.other());
            if reading != Reading::Text {
                self.tally(column, |tally| tally.other_mark.count(row.line, cell));
            }
        }
        match reading {
            Reading::Number(number) => self.scaled(&number, cell, column, row),
            Reading::Below(limit) => {
                self.tally(column, |tally| tally.below.count(row.line, cell));
                Content::Below(limit.map(|limit| times(limit, self.multiplier(column))))
            }
            Reading::NotDetermined => {
                self.tally(column, |tally| tally.not_determined.count(row.line, cell));
                Content::NotDetermined
            }
            Reading::Empty => Content::Empty,
            Reading::Text => self.bad(cell, column, row, None),
        }
    }

    fn multiplier(&self, column: usize) -> f64 {
        self.plans.get(column).map_or(1.0, |plan| plan.multiplier)
    }

    fn tally(&mut self, column: usize, count: impl FnOnce(&mut Tally)) {
        if let Some(tally) = self.tallies.get_mut(column) {
            count(tally);
        }
    }

    /// Applies the multiplier, or the cell's own unit where it has one.
    fn scaled(&mut self, number: &Number, cell: &str, column: usize, row: &Row) -> Content {
        let in_percent = self
            .plans
            .get(column)
            .is_some_and(|plan| matches!(plan.unit.as_deref(), Some("%" | "fraction")));
        let (mut value, mut error) = (number.value, number.error);
        let own_unit = number.unit.as_deref().filter(|_| !number.error_percent || in_percent);
        if number.error_percent && !in_percent {
            // 0.5 ± 10 %
            error = error.map(|percent| value.abs() * percent / 100.0);
        }
        match own_unit {
            None => {
                value = times(value, self.multiplier(column));
                error = error.map(|error| times(error, self.multiplier(column)));
            }
            Some(own) => match self.in_column(own, column, row) {
                Some((scale, shift)) => {
                    value = value * scale + shift;
                    error = error.map(|error| error * scale);
                }
                None => return self.bad(cell, column, row, Some(own)),
            },
        }
        if !value.is_finite() {
            return self.bad(cell, column, row, None);
        }
        if number.marked {
            self.tally(column, |tally| tally.marked.count(row.line, cell));
            return Content::Marked { value, error };
        }
        // Adding zero turns −0 into 0.
        Content::Number { value: value + 0.0, error }
    }

    /// Scale and shift from a cell's own unit into the column's.
    fn in_column(&mut self, own: &str, column: usize, row: &Row) -> Option<(f64, f64)> {
        let plan = self.plans.get_mut(column)?;
        if let Some((known, factor)) = &plan.cached
            && known == own
        {
            return *factor;
        }
        if plan.role == Role::Sd && own == "%" && plan.unit.as_deref() != Some("%") {
            // An error in per cent of a value, among absolute ones.
            let value = plan.error_of.and_then(|of| row.cells.get(of)?.number());
            return value.map(|(value, _)| (value.abs() / 100.0, 0.0));
        }
        let factor = match (plan.role, plan.unit.as_deref()) {
            (Role::Temperature, Some(unit)) => between_scales(own, unit),
            (Role::Sd, Some("%")) if own == "%" => Some((1.0, 0.0)),
            (Role::Sd, None) if own == "%" => Some((1.0, 0.0)),
            (Role::Sd, Some(unit)) => {
                [Role::RateConstant, Role::Signal, Role::Time, Role::HeatRate]
                    .into_iter()
                    .find_map(|role| factor(role, own, unit))
                    .or_else(|| between_scales(own, unit).map(|(scale, _)| scale))
                    .map(|scale| (scale, 0.0))
            }
            (role, Some(unit)) => factor(role, own, unit).map(|scale| (scale, 0.0)),
            (_, None) => None,
        };
        plan.cached = Some((own.to_string(), factor));
        factor
    }

    fn bad(&mut self, cell: &str, column: usize, row: &Row, unit: Option<&str>) -> Content {
        self.tally(column, |tally| tally.bad += 1);
        if self.problems.len() < LISTED
            && let Some(plan) = self.plans.get(column)
        {
            let expected = match unit {
                Some(_) => {
                    plan.unit.as_deref().map_or("a number without a unit".to_string(), |unit| {
                        format!("a number in {}", plan.role.unit_symbol(unit))
                    })
                }
                None => expected(cell, plan),
            };
            let position = Position::cell(row.line, column + 1, &plan.name);
            self.problems.push(Problem::new(&position, cell, &expected, plan.consequence));
        } else {
            self.tally(column, |tally| tally.unlisted += 1);
        }
        Content::Bad
    }
}

/// Multiplied; by a power of ten as one shifts the decimal point on paper, so
/// that 2.1 in a column of 10³ k is 0.0021 and not 0.0021000000000000003.
fn times(value: f64, multiplier: f64) -> f64 {
    let power = libm::round(libm::log10(multiplier));
    if multiplier == 1.0
        || power.abs() > 300.0
        || read_decimal(&format!("1e{power}")) != Some(multiplier)
    {
        return value * multiplier;
    }
    let written = format!("{value:e}");
    let shifted = written.split_once('e').and_then(|(digits, own)| {
        read_decimal(&format!("{digits}e{}", read_decimal(own)? + power))
    });
    shifted.unwrap_or(value * multiplier)
}

/// A time of a clock in the unit of its column.
fn in_unit(seconds: f64, unit: Option<&str>) -> Content {
    let unit = unit.and_then(|unit| TimeUnit::parse(unit).ok()).unwrap_or(TimeUnit::Hour);
    Content::Number { value: unit.from_seconds(seconds), error: None }
}

/// What turns a number in one unit of a role into another; none if nothing does.
pub(super) fn factor(role: Role, from: &str, to: &str) -> Option<f64> {
    Some(match role {
        Role::Time => TimeUnit::parse(from).ok()?.seconds() / TimeUnit::parse(to).ok()?.seconds(),
        Role::RateConstant => {
            let (from, to) = (rate_unit(Some(from))?, rate_unit(Some(to))?);
            (from.base() == to.base()).then(|| from.to_base() / to.to_base())?
        }
        Role::Signal => {
            let (from, to) =
                (ConcentrationUnit::parse(from).ok()?, ConcentrationUnit::parse(to).ok()?);
            (from.kind() == to.kind()).then(|| from.in_base() / to.in_base())?
        }
        Role::HeatRate => {
            HeatRateUnit::parse(from).ok()?.watts_per_kilogram()
                / HeatRateUnit::parse(to).ok()?.watts_per_kilogram()
        }
        Role::HeatingRate => {
            HeatingRateUnit::parse(from).ok()?.kelvins_per_second()
                / HeatingRateUnit::parse(to).ok()?.kelvins_per_second()
        }
        Role::Temperature => {
            TemperatureUnit::parse(from).ok()?.kelvins()
                / TemperatureUnit::parse(to).ok()?.kelvins()
        }
        _ => return None,
    })
}

/// Scale and shift between two temperature scales.
fn between_scales(from: &str, to: &str) -> Option<(f64, f64)> {
    let (from, to) = (TemperatureUnit::parse(from).ok()?, TemperatureUnit::parse(to).ok()?);
    if from == to {
        return Some((1.0, 0.0));
    }
    let shift = to.from_kelvin(from.to_kelvin(0.0));
    Some((from.kelvins() / to.kelvins(), shift))
}

/// What a number cell should have held, with a guess at what went wrong.
fn expected(cell: &str, plan: &Plan) -> String {
    let reads = |text: &str| matches!(read_cell(text, plan.decimal), Reading::Number(_));
    let number = "a number";
    if plan.time_shape == TimeShape::Stamps {
        return "a time stamp such as 2024-03-01 08:00".to_string();
    }
    let short = cell.chars().count() <= 60;
    let zeros: String =
        if short { cell.replace(['O', 'o'], "0").replace(['l', 'I'], "1") } else { String::new() };
    let digits = |c: char| c.is_ascii_digit() || matches!(c, '.' | ',' | 'e' | 'E' | '-' | '+');
    let hint = if cell
        .to_ascii_lowercase()
        .trim_matches(['-', '+', '∞'])
        .trim_start_matches("inf")
        .is_empty()
    {
        "infinity is none"
    } else if cell.starts_with(['>', '≥']) {
        "a value beyond a limit says too little"
    } else if cell.starts_with('#') {
        "this is an error of the spreadsheet"
    } else if cell.starts_with('=') {
        "this is a formula, not its result"
    } else if short && zeros != cell && reads(&zeros) {
        "a letter stands where a digit is meant"
    } else if matches!(read_cell(cell, plan.decimal.other()), Reading::Number(_)) {
        match plan.decimal {
            Decimal::Point => "the comma is not read as a decimal mark here",
            Decimal::Comma => "the point is not read as a decimal mark here",
        }
    } else if cell.contains(['e', 'E'])
        && cell.chars().all(digits)
        && cell.matches(['e', 'E']).count() == 1
        && cell.ends_with(|c: char| c.is_ascii_digit())
    {
        "its size is beyond what can be computed with"
    } else if cell.contains('±') && cell.contains("10") {
        "put value and error in brackets before the power of ten, as in (2.1 ± 0.1)e-3"
    } else if cell.contains("×10")
        || cell.contains("x10")
        || cell.contains("× 10")
        || cell.contains("x 10")
    {
        "write the power of ten as in 1.2e-3"
    } else if plan.role == Role::Time && cell.contains(':') && cell.contains(['.', '/']) {
        "write dates as in 2024-03-01 08:00"
    } else if plan.role == Role::Time && cell.contains(':') {
        "or a duration as in 1:30"
    } else if cell.chars().filter(char::is_ascii_digit).count() > 0
        && cell.chars().filter(|c| matches!(c, '.' | ',')).count() > 1
    {
        "it has more than one decimal mark"
    } else {
        return number.to_string();
    };
    format!("{number} ({hint})")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn powers_of_ten_shift_the_decimal_point() {
        assert_eq!(times(2.1, 1e-3), 0.0021);
        assert_eq!(times(5.9, 1.0 / 1e5), 5.9e-5);
        assert_eq!(times(-2.1, 1e4), -21_000.0);
        assert_eq!(times(2.1, 60.0), 126.0);
        assert_eq!(times(0.0, 1e-3), 0.0);
        assert_eq!(times(2.1, 1.0), 2.1);
    }

    #[test]
    fn units_of_one_kind_convert_and_others_do_not() {
        assert_eq!(factor(Role::Time, "h", "min"), Some(60.0));
        assert_eq!(factor(Role::Signal, "M", "mmol/L"), Some(1000.0));
        assert_eq!(factor(Role::Signal, "%", "mol/L"), None);
        assert_eq!(factor(Role::RateConstant, "1/h", "L/(mol s)"), None);
        assert_eq!(factor(Role::Label, "h", "min"), None);
        assert_eq!(between_scales("K", "°C"), Some((1.0, -273.15)));
    }
}
