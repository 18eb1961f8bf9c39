//! What every form of data takes from a row: numbers, errors, the temperature.

use crate::problem::{Position, Problem};
use crate::quantity::Kelvin;
use crate::table::{Column, ErrorKind, Role, Row};
use crate::units::TemperatureUnit;

/// What a stated error is multiplied by to be a standard deviation.
pub(super) fn to_sd(kind: ErrorKind) -> f64 {
    // The normal distribution's 0.975 point: stated half-widths rarely say their ν.
    const NORMAL_975: f64 = 1.959_963_984_540_054;
    match kind {
        ErrorKind::Sd | ErrorKind::StandardError => 1.0,
        ErrorKind::HalfWidth95 => 1.0 / NORMAL_975,
    }
}

/// Value and error of a cell that counts.
pub(super) fn number(row: &Row, column: usize) -> Option<(f64, Option<f64>)> {
    row.cells.get(column)?.number()
}

/// A number in a sentence.
pub(super) fn shown(value: f64) -> String {
    value.to_string().replace('-', "\u{2212}")
}

/// "50 °C".
pub(super) fn temperature_name(temperature: Kelvin, unit: TemperatureUnit) -> String {
    let value = unit.from_kelvin(temperature.0);
    // Ten digits hide what a conversion of units leaves behind.
    let rounded = libm::round(value * 1e6) / 1e6;
    format!("{} {unit}", shown(rounded))
}

/// The column that holds T or 1/T.
#[derive(Debug, Clone, Copy)]
pub(super) struct TemperatureColumn {
    pub at: usize,
    pub unit: TemperatureUnit,
    inverse: bool,
}

impl TemperatureColumn {
    pub fn of(columns: &[Column]) -> Option<Self> {
        let holds = |c: &Column| matches!(c.role, Role::Temperature | Role::InverseTemperature);
        let at = columns.iter().position(holds)?;
        let unit = columns[at].unit.as_deref().and_then(|unit| TemperatureUnit::parse(unit).ok());
        Some(Self {
            at,
            unit: unit.unwrap_or(TemperatureUnit::Kelvin),
            inverse: columns[at].role == Role::InverseTemperature,
        })
    }

    /// The temperature of a row; none where the cell holds no number, a problem where that number
    /// is no temperature.
    pub fn kelvin(&self, row: &Row, columns: &[Column]) -> Option<Result<Kelvin, Problem>> {
        let (value, _) = number(row, self.at)?;
        let kelvin = if self.inverse { 1.0 / value } else { self.unit.to_kelvin(value) };
        if kelvin > 0.0 && kelvin.is_finite() {
            return Some(Ok(Kelvin(kelvin)));
        }
        let (found, expected) = if self.inverse {
            (shown(value), "1/T above zero")
        } else {
            (format!("{} {}", shown(value), self.unit), "a temperature above 0 K")
        };
        let position = Position::cell(row.line, self.at + 1, &columns[self.at].name);
        Some(Err(Problem::new(&position, &found, expected, "the row is left out")))
    }
}
