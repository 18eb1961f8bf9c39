//! Problems of whole lines.

use crate::problem::{Position, Problem, shortened};
use crate::quantity::Quantity;
use crate::text::lines::{LONGEST_LINE, MOST_FIELDS, Record};

fn line_of<'text>(text: &'text str, record: &Record) -> &'text str {
    text.get(record.span.clone()).unwrap_or("")
}

/// Too many characters, or too many fields.
pub(super) fn long_line(text: &str, record: &Record) -> Problem {
    let start: String = line_of(text, record).chars().take(80).collect();
    let (what, limit) = if record.span.len() > LONGEST_LINE {
        (format!("{} characters", record.span.len()), LONGEST_LINE.to_string())
    } else {
        (format!("more than {MOST_FIELDS} columns"), format!("{MOST_FIELDS} columns"))
    };
    Problem::said(
        &Position::row(record.line),
        &start,
        &format!("at most {limit} in a line"),
        &format!("the line has {what}, at most {limit} are read; it is left out."),
    )
}

/// A header between rows that is not the one above them.
pub(super) fn other_table(text: &str, record: &Record) -> Problem {
    let line = line_of(text, record);
    let message = format!(
        "a second table with other headers begins here (“{}”); it is not read. Paste one table at a time, or give both \
         the same columns.",
        shortened(line)
    );
    Problem::said(&Position::row(record.line), line, "one table with one header", &message)
}

/// A temperature alone on a line, where the rows below are no run.
pub(super) fn run_title(line: usize, temperature: &Quantity) -> Problem {
    let found = temperature.to_string();
    let message = format!(
        "“{found}” stands alone on its line and is not read as the temperature of the rows below; give them a column of \
         temperatures."
    );
    Problem::said(&Position::row(line), &found, "a column of temperatures", &message)
}

/// A filled field behind the last column.
pub(super) fn field_beyond(line: usize, found: &str, columns: usize) -> Problem {
    let expected = format!("{columns} columns, as in the rows above");
    Problem::new(&Position::row(line), found, &expected, "what is beyond them is not read")
}
