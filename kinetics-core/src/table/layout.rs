//! Where the table stands in the text: how many columns, which lines are its
//! header, its units and its rows, and which are titles and notes around it.

use super::header;
use super::sample::{Sample, attempts_number};
use super::{Choice, Decimal, Hints, Role, Separator};
use crate::problem::{Position, Problem, shortened};
use crate::quantity::Quantity;
use crate::text::lines::{MOST_FIELDS, Record};
use crate::text::number::looks_numeric;

/// The plan by which all lines are read.
#[derive(Clone, Debug)]
pub(super) struct Layout {
    pub separator: Separator,
    /// How many columns.
    pub columns: usize,
    /// The header of each column; empty where there is none.
    pub headers: Vec<String>,
    /// The cell of a row of units, for each column.
    pub units: Vec<String>,
    pub header_lines: Vec<usize>,
    pub units_line: Option<usize>,
    /// The first line that may be a row.
    pub first_line: usize,
    /// Which columns mostly hold numbers.
    pub numeric: Vec<bool>,
    pub notes: Vec<(usize, String)>,
    pub choices: Vec<Choice>,
    /// Why nothing at all is read.
    pub refusal: Option<Problem>,
}

/// What one line is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    Blank,
    Row,
    Note,
}

impl Layout {
    pub fn find(text: &str, hints: &Hints) -> Layout {
        let separator = Separator::detect(text);
        let mut layout = Layout {
            separator,
            columns: 0,
            headers: Vec::new(),
            units: Vec::new(),
            header_lines: Vec::new(),
            units_line: None,
            first_line: usize::MAX,
            numeric: Vec::new(),
            notes: Vec::new(),
            choices: Vec::new(),
            refusal: unreadable(text),
        };
        if layout.refusal.is_some() {
            return layout;
        }
        let mut sample = Sample::take(text, separator);
        let Some(first) = sample.first_row() else {
            layout.refusal = sample.nothing(text);
            return layout;
        };
        layout.first_line = sample.records.get(first).map_or(1, |record| record.line);
        layout.columns = sample.width(first);
        if layout.columns > MOST_FIELDS {
            layout.refusal = Some(too_wide(&sample, first));
            return layout;
        }
        layout.find_header(&sample, first);
        layout.numeric =
            (0..layout.columns).map(|column| sample.is_numeric(first, column)).collect();
        layout.refusal = layout
            .comma_used_twice(&sample, first, hints)
            .or_else(|| layout.lies_on_its_side(&sample, first));
        layout
    }

    /// What a line is, by what stands in the columns of numbers.
    pub fn kind(&self, text: &str, record: &Record) -> Kind {
        if record.filled() == 0 {
            return Kind::Blank;
        }
        if record.line < self.first_line {
            return Kind::Note;
        }
        let mut attempts = 0;
        for column in (0..self.columns).filter(|column| self.numeric.get(*column) == Some(&true)) {
            let field = record.field(text, column);
            attempts += usize::from(attempts_number(field));
            if attempts >= 2 || looks_numeric(field) {
                return Kind::Row;
            }
        }
        Kind::Note
    }

    /// The temperature that a line holds and nothing else, in a table that has no column of them.
    pub fn run_title(&self, text: &str, record: &Record) -> Option<Quantity> {
        if record.filled() != 1 || self.columns < 2 || record.line < self.first_line {
            return None;
        }
        let alone = record.fields.iter().find(|span| !span.is_empty() && span.len() <= 40)?;
        let temperature = header::temperature_alone(text.get(alone.clone())?)?;
        let first = self.headers.first().map_or("", String::as_str);
        let role = header::read(first, self.units.first().map_or("", String::as_str)).role;
        (role != Some(Role::Temperature)).then_some(temperature)
    }

    /// Whether a line between rows is the header of another table.
    pub fn is_other_header(&self, text: &str, record: &Record) -> bool {
        let short = record.fields.iter().all(|span| span.len() <= 40);
        if !short || record.filled() < 2 || record.fields.len() > 20 {
            return false;
        }
        let cells: Vec<String> =
            (0..record.fields.len()).map(|column| record.field(text, column).to_string()).collect();
        let same = cells
            .iter()
            .zip(&self.headers)
            .all(|(cell, header)| cell.split_whitespace().eq(header.split_whitespace()));
        let roles = cells.iter().filter(|cell| header::read(cell, "").role.is_some()).count();
        let with_unit = cells.iter().any(|cell| header::read(cell, "").unit.is_some());
        !same && roles > 1 && (with_unit || roles == self.columns)
    }

    fn find_header(&mut self, sample: &Sample<'_>, first: usize) {
        self.headers = vec![String::new(); self.columns];
        self.units = vec![String::new(); self.columns];
        let before = sample.records.get(..first).unwrap_or_default();
        // The title of the first run may stand between the header and its rows.
        let titles = before.iter().rev().take_while(|record| sample.is_run_title(record)).count();
        let (before, titles) = before.split_at(before.len() - titles);
        let mut rest = before;
        if let Some((last, others)) = before.split_last()
            && let Some(cells) = self.header_cells(sample.text, last)
        {
            rest = others;
            let upper = others
                .last()
                .filter(|record| record.line + record.lines == last.line)
                .and_then(|record| Some((record, self.header_cells(sample.text, record)?)));
            let only_units = cells.iter().all(|cell| cell.is_empty() || header::is_unit_cell(cell));
            match upper {
                Some((record, upper)) if only_units => {
                    self.units_line = Some(last.line);
                    self.units = cells;
                    self.header_lines = vec![record.line];
                    self.headers = upper;
                    rest = others.get(..others.len() - 1).unwrap_or_default();
                }
                Some((record, upper)) if sense(&joined(&upper, &cells)) > sense(&cells) => {
                    self.header_lines = vec![record.line, last.line];
                    self.headers = joined(&upper, &cells);
                    rest = others.get(..others.len() - 1).unwrap_or_default();
                }
                _ => {
                    self.header_lines = vec![last.line];
                    self.headers = cells;
                }
            }
        }
        for record in rest.iter().chain(titles) {
            self.notes
                .push((record.line, shortened(sample.text.get(record.span.clone()).unwrap_or(""))));
        }
    }

    /// The cells of a line above the rows, if it can be their header.
    fn header_cells(&self, text: &str, record: &Record) -> Option<Vec<String>> {
        if record.too_long {
            return None;
        }
        let mut cells: Vec<String> = if self.separator.is_spaces() {
            let line = text.get(record.span.clone()).unwrap_or("").trim();
            header::cut_line(line.strip_prefix('#').unwrap_or(line), self.columns)?
        } else {
            (0..self.columns)
                .map(|column| record.field(text, column).replace("\"\"", "\""))
                .collect()
        };
        if let Some(first) = cells.first_mut()
            && let Some(rest) = first.strip_prefix('#')
            && !rest.trim().is_empty()
        {
            *first = rest.trim().to_string();
        }
        let filled = cells.iter().filter(|cell| !cell.is_empty()).count();
        let alone = self.columns > 1 && filled == 1;
        if alone && cells.iter().any(|cell| header::temperature_alone(cell).is_some()) {
            return None; // the title of a run
        }
        // A single field above several columns is a title, unless it reads as a header.
        let fits =
            filled > 1 || !alone || cells.iter().any(|cell| header::read(cell, "").unit.is_some());
        // A title may be long; a header is not a sentence.
        let short = cells.iter().all(|cell| cell.chars().count() <= 120);
        (filled > 0 && fits && short).then_some(cells)
    }

    /// `50,0,0021`: commas between the columns and commas inside the numbers.
    fn comma_used_twice(
        &self,
        sample: &Sample<'_>,
        first: usize,
        hints: &Hints,
    ) -> Option<Problem> {
        if self.separator != Separator::Comma || hints.decimal == Some(Decimal::Point) {
            return None;
        }
        let rows: Vec<&Record> = sample.rows(first).collect();
        let quoted_or_point = |record: &&Record| {
            (0..record.fields.len())
                .any(|column| record.field(sample.text, column).contains(['.', ',']))
        };
        let after_integer_part = |record: &&&Record| {
            (1..record.fields.len()).any(|column| {
                let (before, field) =
                    (record.field(sample.text, column - 1), record.field(sample.text, column));
                let digits =
                    |text: &str| !text.is_empty() && text.bytes().all(|byte| byte.is_ascii_digit());
                digits(before.trim_start_matches(['-', '−']))
                    && digits(field)
                    && field.len() > 1
                    && field.starts_with('0')
            })
        };
        let named = self.headers.iter().filter(|header| !header.is_empty()).count();
        let suspicious = rows.iter().filter(after_integer_part).count();
        let wider = rows.iter().filter(|record| named > 0 && record.filled() > named).count();
        let without_points = !rows.iter().any(quoted_or_point);
        let twice = without_points && (suspicious * 2 >= rows.len() || wider * 2 > rows.len());
        let row = rows.iter().find(|record| after_integer_part(record)).or_else(|| rows.first())?;
        twice.then(|| {
            let line = sample.text.get(row.span.clone()).unwrap_or("");
            Problem::said(
                &Position::row(row.line),
                line,
                "decimal points, or semicolons or tabs between the columns",
                &format!(
                    "found “{}”, where commas seem to mark decimals as well as to separate columns, so that nothing \
                     was read; write decimal points, or put semicolons or tabs between the columns.",
                    shortened(line)
                ),
            )
        })
    }

    /// Headers down the first column instead of along the first line.
    fn lies_on_its_side(&self, sample: &Sample<'_>, first: usize) -> Option<Problem> {
        if !self.header_lines.is_empty() || self.columns < 3 || self.numeric.first() == Some(&true)
        {
            return None;
        }
        let rows: Vec<&Record> = sample.rows(first).collect();
        let roles = rows
            .iter()
            .filter(|record| header::read(record.field(sample.text, 0), "").role.is_some())
            .count();
        (rows.len() <= 6 && roles >= 2).then(|| {
            let row = rows.first().map_or(1, |record| record.line);
            let found = rows.first().map_or("", |record| record.field(sample.text, 0));
            Problem::said(
                &Position::row(row),
                found,
                "one row for each measurement",
                "the table lies on its side, with its headers in the first column; transpose it, so that each \
                 measurement has a row (in a spreadsheet: copy, paste special, transpose), and paste it again.",
            )
        })
    }
}

/// Two lines of headers as one.
fn joined(upper: &[String], lower: &[String]) -> Vec<String> {
    upper
        .iter()
        .zip(lower)
        .map(|(above, below)| format!("{above} {below}").trim().to_string())
        .collect()
}

/// How much headers say.
fn sense(headers: &[String]) -> usize {
    headers
        .iter()
        .map(|cell| header::read(cell, ""))
        .map(|reading| {
            usize::from(reading.role.is_some())
                + usize::from(reading.unit.is_some())
                + usize::from(reading.run_temperature.is_some())
        })
        .sum()
}

/// Texts that are no text.
fn unreadable(text: &str) -> Option<Problem> {
    if !text.contains('\0') {
        return None;
    }
    let at = text.find('\0').unwrap_or(0);
    let row = text.get(..at).unwrap_or("").lines().count().max(1);
    Some(Problem::said(
        &Position::row(row),
        "NUL",
        "plain text",
        "found NUL characters, which no plain text has, so that nothing was read; save the file as text (UTF-8), or \
         copy the cells and paste them.",
    ))
}

fn too_wide(sample: &Sample<'_>, first: usize) -> Problem {
    let (line, start) = sample
        .records
        .get(first)
        .map_or((1, ""), |record| (record.line, record.field(sample.text, 0)));
    Problem::said(
        &Position::row(line),
        start,
        &format!("at most {MOST_FIELDS} columns"),
        &format!(
            "the table has more than {MOST_FIELDS} columns, so that nothing was read; paste those that are needed."
        ),
    )
}
