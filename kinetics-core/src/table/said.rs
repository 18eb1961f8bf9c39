//! Sentences about how a whole column was read.

use super::columns::shown;
use super::tally::Lines;
use super::values::TimeShape;
use super::{Choice, Column, Decimal, Separator};
use crate::problem::shortened;
use crate::quantity::Quantity;
use crate::text::decimal::Votes;
use crate::text::{Reading, read_cell};

fn choice(at: usize, column: &Column, sentence: &str) -> Choice {
    let header = if column.header.is_empty() {
        String::new()
    } else {
        format!(" ({})", shortened(&column.header))
    };
    Choice::of_column(at + 1, format!("Column {}{header}: {sentence}", at + 1))
}

/// What the decimal mark was taken to be, where anybody could doubt it:
/// `ambiguous` holds the first cell of each column that either mark explains.
pub(super) fn decimal_marks(
    columns: &[Column],
    votes: &[Votes],
    ambiguous: &[Option<String>],
    separator: Separator,
) -> Vec<Choice> {
    let mut choices = Vec::new();
    let mut all = Votes::default();
    votes.iter().for_each(|votes| all.add(votes));
    if votes.iter().any(|votes| votes.certain() == Some(Decimal::Comma)) {
        choices.push(Choice::of_table("The comma is read as the decimal mark.".to_string()));
    }
    for (at, column) in columns.iter().enumerate() {
        let (Some(votes), Some(Some(cell))) = (votes.get(at), ambiguous.get(at)) else { continue };
        // Points are what decimals usually have, unless other numbers have commas.
        let against_others = all.certain().is_some_and(|certain| certain != column.decimal);
        let doubtful = votes.doubtful(column.decimal) || against_others;
        if !column.role.is_numeric() || !doubtful || votes.certain().is_some() {
            continue;
        }
        let marks = |decimal: Decimal| {
            if decimal == Decimal::Comma { "decimal commas" } else { "decimal points" }
        };
        let why = if against_others {
            "because every number of the column has three digits after it, as a fixed number of \
             decimals has"
                .to_string()
        } else if all.certain().is_some() {
            format!("because other numbers have {}", marks(column.decimal))
        } else if separator == Separator::Semicolon {
            "because semicolons separate the columns".to_string()
        } else {
            "because nothing says that the comma marks decimals".to_string()
        };
        let other = column.decimal.other();
        let sentence = format!(
            "“{cell}” is read as {}, {why}; with {} it would be {}.",
            read_as(cell, column.decimal),
            marks(other),
            read_as(cell, other)
        );
        let as_others =
            all.certain() == Some(column.decimal) && cell.contains(column.decimal.mark());
        let remedy = (!as_others).then(|| {
            let meant = read_as(cell, other);
            format!(
                "If {meant} is meant, choose the decimal sign above the table, or correct the column."
            )
        });
        choices.push(Choice { remedy, ..choice(at, column, &sentence) });
    }
    choices
}

fn read_as(cell: &str, decimal: Decimal) -> String {
    match read_cell(cell, decimal) {
        Reading::Number(number) => shown(number.value),
        _ => "no number".to_string(),
    }
}

/// Temperatures that stand alone on a line.
pub(super) fn run_titles(titles: &[(usize, Quantity)]) -> Option<Choice> {
    let mut lines = Lines::default();
    for (line, temperature) in titles {
        lines.count(*line, &temperature.to_string());
    }
    let named = match lines.count {
        0 => return None,
        1 => "names the temperature of the run below it",
        _ => "name the temperatures of the runs below them",
    };
    let rows = lines.rows().replacen("row", "Row", 1);
    let example = titles.first().map(|title| title.1.to_string())?;
    let sentence = format!("{rows} {named} (“{example}”).");
    Some(Choice::of_table(sentence))
}

/// How times of a clock were read.
pub(super) fn clocks(columns: &[Column], shapes: &[TimeShape]) -> Vec<Choice> {
    let mut choices = Vec::new();
    for (at, (column, shape)) in columns.iter().zip(shapes).enumerate() {
        let unit = column.unit.as_deref().unwrap_or("h");
        let sentence = match shape {
            TimeShape::Numbers => continue,
            TimeShape::Stamps => format!("times count in {unit} from the first stamp of each run."),
            TimeShape::Clock { seconds: true } => {
                format!("times are read as hours:minutes:seconds, in {unit}.")
            }
            TimeShape::Clock { seconds: false } => {
                format!("times are read as hours:minutes, not minutes:seconds, in {unit}.")
            }
        };
        choices.push(choice(at, column, &sentence));
    }
    choices
}
