//! Ties a column of errors to the values beside it, and finds in what its
//! numbers count: in the unit of those values, scaled as they are, unless the
//! column says otherwise; or in per cent of the value.

use super::columns::shown;
use super::convert::factor;
use super::header::Reading;
use super::values::Values;
use super::{Column, Form, Hints, Origin, Role};
use crate::text::lower;

/// Ties the errors in column `at`; a sentence where their scale needs one.
pub(super) fn tie(
    at: usize,
    columns: &mut [Column],
    form: Option<Form>,
    readings: &[Reading],
    values: &[Values],
    hints: &Hints,
) -> Option<String> {
    let of = value_of(at, columns, form)?;
    let value = columns.get(of)?.clone();
    let reading = readings.get(at)?;
    let hint = hints.columns.get(at);
    if hint.is_none_or(|hint| hint.role.is_none()) && follows_unused_mean(at, columns) {
        let error = columns.get_mut(at)?;
        error.role = Role::Ignore;
        return Some(
            "it holds the errors of the mean beside it and, like that one, is not used."
                .to_string(),
        );
    }
    let error = columns.get_mut(at)?;
    error.error_of = Some(of);
    let stated =
        hint.and_then(|hint| hint.unit.as_deref()).map(str::trim).filter(|unit| !unit.is_empty());
    let stated_multiplier =
        hint.and_then(|hint| hint.multiplier).filter(|multiplier| *multiplier > 0.0);
    if stated == Some("%")
        || (stated.is_none() && is_relative(error, reading, &value, values.get(at)))
    {
        error.unit = Some("%".to_string());
        error.multiplier = stated_multiplier.unwrap_or(1.0);
        return None;
    }
    if stated.is_none() {
        error.unit_from = if reading.unit.is_some() { Origin::Header } else { value.unit_from };
    }
    let logarithm = matches!(value.role, Role::LnRateConstant | Role::Log10RateConstant);
    // As the unit of an error, per cent always means of the value; an absolute one has none then.
    error.unit = value.unit.clone().filter(|unit| unit != "%" && !logarithm);
    if logarithm {
        error.multiplier = stated_multiplier.unwrap_or(reading.multiplier);
        return None;
    }
    // A lone s is a standard deviation here, not a second.
    let in_header = reading.unit.as_deref().filter(|_| error.header != "s");
    let own = stated.filter(|unit| Some(*unit) != value.unit.as_deref()).or(in_header);
    let conversion = match (own, value.unit.as_deref()) {
        (Some(own), Some(of)) => factor(value.role, own, of),
        _ => Some(1.0),
    };
    if let Some(multiplier) = stated_multiplier {
        error.multiplier = multiplier;
        return None;
    }
    let Some(conversion) = conversion else {
        error.multiplier = value.multiplier;
        return Some(format!(
            "its unit does not suit that of column {}, whose errors it holds; its numbers are taken in the unit of that column.",
            of + 1
        ));
    };
    let literal = reading.multiplier != 1.0
        || (in_header.is_some()
            && value.multiplier != 1.0
            && values.get(at)?.like_errors_of(values.get(of)?, conversion / value.multiplier));
    error.multiplier = conversion * if literal { reading.multiplier } else { value.multiplier };
    let by_factor = error.multiplier != conversion;
    let symbol = error
        .unit
        .as_deref()
        .map_or(String::new(), |unit| format!(" in {}", value.role.unit_symbol(unit)));
    match (error.multiplier == 1.0, literal, by_factor) {
        (true, true, _) if value.multiplier != 1.0 => Some(format!(
            "its numbers count{symbol} as they are, without the factor of column {}.",
            of + 1
        )),
        (true, ..) => None,
        (false, false, true) => Some(format!(
            "its numbers are multiplied by {}, as those of column {}.",
            shown(error.multiplier),
            of + 1
        )),
        _ => Some(format!(
            "its numbers are multiplied by {}, so that they count{symbol}.",
            shown(error.multiplier)
        )),
    }
}

/// The nearest column of values on the left, else on the right.
fn value_of(at: usize, columns: &[Column], form: Option<Form>) -> Option<usize> {
    let wanted = |role: Role| match form {
        Some(Form::Rates) => role.is_rate(),
        Some(Form::Progress) => role == Role::Signal,
        Some(Form::Times) => role == Role::Time,
        Some(Form::HeatRates) => role == Role::HeatRate,
        Some(Form::Peaks) => role == Role::Temperature,
        Some(Form::KnownLaw) | None => role.is_value(),
    };
    let fits = |other: &usize| columns.get(*other).is_some_and(|column| wanted(column.role));
    (0..at).rev().find(fits).or_else(|| (at + 1..columns.len()).find(fits))
}

/// Right behind a mean that is left out because its single values are there.
fn follows_unused_mean(at: usize, columns: &[Column]) -> bool {
    let before = at.checked_sub(1).and_then(|before| columns.get(before));
    before.is_some_and(|column| {
        let name = lower(&column.header);
        column.role == Role::Ignore
            && ["mean", "average", "avg", "mittel", "moyenne"]
                .iter()
                .any(|word| name.contains(word))
    })
}

/// In per cent of the value, by name, unit or cells.
fn is_relative(error: &Column, reading: &Reading, value: &Column, cells: Option<&Values>) -> bool {
    let lower = lower(&error.header);
    let by_name = ["rsd", "cv", "relativ"].iter().any(|word| lower.contains(word));
    // Beside values in per cent, errors in per cent are taken as absolute.
    let value_in_percent = matches!(value.unit.as_deref(), Some("%" | "fraction"));
    let in_percent = reading.relative || cells.and_then(Values::usual_unit) == Some("%");
    by_name || (in_percent && !value_in_percent)
}

#[cfg(test)]
mod tests {
    use super::super::{ColumnHint, Hints, read_table};
    use super::*;

    /// Unit, multiplier, and whether it was said.
    fn tied(k: &str, sd: &str, numbers: (&str, &str)) -> (Option<String>, f64, bool) {
        let text =
            format!("T/°C\t{k}\t{sd}\n50\t{}\t{}\n60\t5.9\t{}\n", numbers.0, numbers.1, numbers.1);
        let table = read_table(&text, &Hints::default());
        let said = table.choices.iter().any(|choice| choice.column == Some(3));
        let error = &table.columns[2];
        assert_eq!((error.role, error.error_of), (Role::Sd, Some(1)), "{sd}");
        (error.unit.clone(), error.multiplier, said)
    }

    #[test]
    fn errors_follow_their_values() {
        let unit = |unit: &str| Some(unit.to_string());
        assert_eq!(tied("k / h⁻¹", "sd", ("2.1", "0.1")), (unit("1/h"), 1.0, false));
        assert_eq!(tied("10^4 k / s⁻¹", "s(k)", ("2.1", "0.1")), (unit("1/s"), 1e-4, true));
        assert_eq!(tied("k / h⁻¹", "RSD (%)", ("2.1", "5")), (unit("%"), 1.0, false));
        assert_eq!(tied("k / h⁻¹", "sd, %", ("2.1", "5")), (unit("%"), 1.0, false));
        assert_eq!(tied("k / h⁻¹", "sd (1/min)", ("2.1", "0.001")), (unit("1/h"), 60.0, true));
        assert_eq!(tied("k / h⁻¹", "s", ("2.1", "0.1")), (unit("1/h"), 1.0, false));
        assert_eq!(tied("ln(k/s⁻¹)", "sd", ("-2.1", "0.1")), (None, 1.0, false));
    }

    #[test]
    fn a_unit_without_the_factor_is_taken_by_size() {
        let unit = Some("1/s".to_string());
        assert_eq!(tied("10^4 k / s⁻¹", "s(k) / s⁻¹", ("2.1", "0.1")), (unit.clone(), 1e-4, true));
        assert_eq!(tied("10^4 k / s⁻¹", "s(k) / s⁻¹", ("2.1", "1e-5")), (unit.clone(), 1.0, true));
        assert_eq!(tied("10^4 k / s⁻¹", "10^5 s(k) / s⁻¹", ("2.1", "1")), (unit, 1e-5, true));
    }

    #[test]
    fn a_stated_per_cent_is_of_the_value() {
        let per_cent = ColumnHint { unit: Some("%".to_string()), ..ColumnHint::default() };
        let hints = Hints {
            columns: vec![ColumnHint::default(), ColumnHint::default(), per_cent],
            ..Hints::default()
        };
        let table = read_table("t/h\tassay (%)\tsd\n0\t99\t0.4\n1\t98\t0.4\n", &hints);
        assert_eq!(table.columns[2].unit.as_deref(), Some("%"));
        let table =
            read_table("t/h\tassay (%)\tsd (%)\n0\t99\t0.4\n1\t98\t0.4\n", &Hints::default());
        assert_eq!(table.columns[2].unit, None);
    }
}
