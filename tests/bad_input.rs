//! Odd and bad inputs with golden accounts of what was read, refused and
//! decided: `bad_input/NN-name.txt` beside `NN-name.golden`.
//!
//! `UPDATE_GOLDEN=1 cargo test -p checks --test bad_input` writes the accounts
//! anew; read every difference before keeping it. The text files are bytes, as
//! pasted: some have CR LF, a byte order mark, or no line end at all.
#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

use std::fmt::Write;
use std::fs;
use std::path::PathBuf;

use kinetics_core::measurements::{AboutSignals, progress};
use kinetics_core::table::{Cell, Column, Content, Form, Hints, Role, Table, read_table};

/// Rows of an account; the rest is only counted.
const ROWS: usize = 8;

#[test]
fn every_input_gives_its_golden_account() {
    let folder = PathBuf::from(concat!(env!("CARGO_MANIFEST_DIR"), "/bad_input"));
    let mut inputs: Vec<PathBuf> = fs::read_dir(&folder)
        .expect("the folder of bad inputs")
        .map(|entry| entry.expect("a file").path())
        .filter(|path| path.extension().is_some_and(|extension| extension == "txt"))
        .collect();
    inputs.sort();
    assert!(inputs.len() >= 60, "only {} inputs were found", inputs.len());
    let update = std::env::var_os("UPDATE_GOLDEN").is_some();
    let mut differing = Vec::new();
    for input in inputs {
        let text = String::from_utf8_lossy(&fs::read(&input).expect("an input")).into_owned();
        let found = account(&read_table(&text, &Hints::default()));
        let golden = input.with_extension("golden");
        if update {
            fs::write(&golden, found).expect("a golden account");
        } else {
            let expected = fs::read_to_string(&golden).unwrap_or_default();
            if expected != found {
                differing.push(format!(
                    "{}\n--- expected\n{expected}--- found\n{found}",
                    input.display()
                ));
            }
        }
    }
    assert!(differing.is_empty(), "{}", differing.join("\n"));
}

/// Every golden account belongs to an input.
#[test]
fn no_golden_account_is_left_behind() {
    let folder = PathBuf::from(concat!(env!("CARGO_MANIFEST_DIR"), "/bad_input"));
    for entry in fs::read_dir(&folder).expect("the folder of bad inputs") {
        let path = entry.expect("a file").path();
        assert!(path.with_extension("txt").exists(), "{} has no input", path.display());
    }
}

/// What a table says about itself, as text.
fn account(table: &Table) -> String {
    let mut account = String::new();
    let form = table.form.map_or("none".to_string(), |form| format!("{form:?}").to_lowercase());
    let _ = writeln!(
        account,
        "{form}; {}; decimal {}; header {:?}; units row {:?}; {} rows",
        table.separator.name(),
        table.decimal.mark(),
        table.header_lines,
        table.units_line,
        table.rows.len()
    );
    for (at, column) in table.columns.iter().enumerate() {
        let _ = writeln!(account, "column {}: {}", at + 1, described(column));
    }
    for row in table.rows.iter().take(ROWS) {
        let cells: Vec<String> = row
            .cells
            .iter()
            .zip(&table.columns)
            .map(|(cell, column)| shown(cell, column))
            .collect();
        let _ = writeln!(account, "row {}: {}", row.line, cells.join(" | "));
    }
    for problem in table.problems.iter().take(12) {
        let _ = writeln!(account, "problem: {problem}");
    }
    if table.problems.len() > 12 {
        let _ = writeln!(
            account,
            "and {} problems more, the last: {}",
            table.problems.len() - 12,
            table.problems[table.problems.len() - 1]
        );
    }
    for choice in &table.choices {
        let _ = writeln!(account, "choice: {}", choice.sentence);
    }
    for (line, note) in table.notes.iter().take(6) {
        let _ = writeln!(account, "note {line}: {note}");
    }
    if table.form == Some(Form::Progress) {
        runs(table, &mut account);
    }
    account
}

/// What the rows of progress data are taken for.
fn runs(table: &Table, account: &mut String) {
    let read = progress(table, &[], AboutSignals::default());
    for run in &read.runs {
        let _ = writeln!(
            account,
            "run “{}” at {} K from row {}: {} points",
            run.name,
            number(run.temperature.0),
            run.row,
            run.points.len()
        );
    }
    for problem in read.problems.iter().take(12) {
        let _ = writeln!(account, "run refused: {problem}");
    }
    for left_out in read.left_out.iter().take(12) {
        let _ = writeln!(account, "row {} left out: {}", left_out.row, left_out.reason);
    }
    for choice in &read.choices {
        let _ = writeln!(account, "choice: {choice}");
    }
}

fn described(column: &Column) -> String {
    let mut described = column.role.code().to_string();
    if let Some(unit) = &column.unit {
        let _ = write!(described, " in {unit}");
    }
    if column.multiplier != 1.0 {
        let _ = write!(described, " times {:e}", column.multiplier);
    }
    if let Some(temperature) = &column.run_temperature {
        let _ = write!(described, " at {temperature}");
    }
    if let Some(of) = column.error_of {
        let _ = write!(described, " of column {}", of + 1);
    }
    if let Some(kind) = column.error_is {
        let _ = write!(described, " ({kind:?})");
    }
    if let Some(signal) = column.signal_is {
        let _ = write!(described, " ({signal:?})");
    }
    let _ = write!(described, "; role {:?}, unit {:?}", column.role_from, column.unit_from);
    described.to_string()
}

fn shown(cell: &Cell, column: &Column) -> String {
    let with_error = |value: f64, error: Option<f64>| {
        error.map_or(number(value), |error| format!("{} ± {}", number(value), number(error)))
    };
    match &cell.content {
        Content::Number { value, error } => with_error(*value, *error),
        Content::Marked { value, error } => format!("{} (marked)", with_error(*value, *error)),
        Content::Text(_) if column.role == Role::Ignore => "·".to_string(),
        Content::Text(text) => format!("“{text}”"),
        Content::Empty => "(empty)".to_string(),
        Content::Below(None) => "(below a limit)".to_string(),
        Content::Below(Some(limit)) => format!("(below {})", number(*limit)),
        Content::NotDetermined => "(no value)".to_string(),
        Content::Bad => "(bad)".to_string(),
    }
}

/// Twelve digits: the account is about reading, not about the last bit.
fn number(value: f64) -> String {
    format!("{value:.11e}")
        .parse::<f64>()
        .map_or_else(|_| value.to_string(), |rounded| rounded.to_string())
}
