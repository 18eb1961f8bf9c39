//! The first lines of a text, and what they show of its table: which are rows,
//! how wide they are, and which of their columns hold numbers.

use super::Separator;
use super::header;
use crate::problem::{Position, Problem, shortened};
use crate::text::lines::{MOST_FIELDS, Record, Records};
use crate::text::number::looks_numeric;
use crate::text::stamp;

/// Most records that are looked at before the rest is read.
const SAMPLE: usize = 300;

/// The first records that are not blank.
pub(super) struct Sample<'text> {
    pub text: &'text str,
    separator: Separator,
    pub records: Vec<Record>,
    /// For each record the fields that look like numbers.
    numeric: Vec<Vec<bool>>,
    /// The usual number of filled fields.
    usual: usize,
    /// One number in a line of the usual width makes it a row.
    lenient: bool,
}

impl<'text> Sample<'text> {
    pub fn take(text: &'text str, separator: Separator) -> Sample<'text> {
        let mut walk = Records::new(text, separator);
        let mut records = Vec::new();
        while let Some(record) = walk.next(text) {
            if (record.filled() > 0 || record.too_long) && !is_rule(text, &record) {
                records.push(record);
            }
            if records.len() >= SAMPLE {
                break;
            }
        }
        let numeric: Vec<Vec<bool>> = records
            .iter()
            .map(|record: &Record| {
                (0..record.fields.len())
                    .map(|column| {
                        let field = record.field(text, column);
                        looks_numeric(field) || stamp::looks_like(field)
                    })
                    .collect()
            })
            .collect();
        let mut counts = [0_usize; 64];
        for record in records.iter().filter(|record: &&Record| record.filled() > 1) {
            counts[record.filled().min(63)] += 1;
        }
        let usual = counts
            .iter()
            .enumerate()
            .max_by_key(|(_, count)| **count)
            .map_or(0, |(width, _)| width);
        Sample { text, separator, records, numeric, usual, lenient: false }
    }

    /// Enough of its fields are numbers.
    fn looks_like_row(&self, index: usize) -> bool {
        let (Some(record), Some(numeric)) = (self.records.get(index), self.numeric.get(index))
        else {
            return false;
        };
        let numbers = numeric.iter().filter(|number| **number).count();
        let filled = record.filled();
        numbers > 0
            && !self.is_run_title(record)
            && (numbers * 2 >= filled || (filled == self.usual && (numbers > 1 || self.lenient)))
    }

    /// A temperature alone on its line, where most lines hold more.
    pub fn is_run_title(&self, record: &Record) -> bool {
        let line = || self.text.get(record.span.clone()).unwrap_or("").trim();
        record.filled() == 1 && self.usual > 1 && header::temperature_alone(line()).is_some()
    }

    /// Index of the first record that belongs to the rows.
    pub fn first_row(&mut self) -> Option<usize> {
        let first = |sample: &Sample<'_>| {
            (0..sample.records.len()).find(|index| {
                sample.looks_like_row(*index) && !sample.is_header_of_the_rest(*index)
            })
        };
        first(self).or_else(|| {
            // Rows with hardly a number are rows all the same below a clear header.
            self.lenient = self.has_header();
            first(self).filter(|_| self.lenient)
        })
    }

    /// A line that names at least two roles.
    fn has_header(&self) -> bool {
        let roles = |record: &Record| {
            let names = (0..record.fields.len()).map(|column| record.field(self.text, column));
            names
                .filter(|name| name.chars().count() <= 40 && header::read(name, "").role.is_some())
                .count()
        };
        self.records.iter().take(10).any(|record| record.fields.len() <= 20 && roles(record) > 1)
    }

    /// A line with numbers in it that is a header all the same: `t/h 50 60 70`.
    fn is_header_of_the_rest(&self, index: usize) -> bool {
        let later = || (index + 1..self.records.len()).filter(|other| self.looks_like_row(*other));
        let rest = later().count();
        let (Some(record), Some(numeric)) = (self.records.get(index), self.numeric.get(index))
        else {
            return false;
        };
        (0..record.fields.len()).any(|column| {
            let field = record.field(self.text, column);
            let filled_below = later().filter(|other| {
                self.records
                    .get(*other)
                    .is_some_and(|below| !below.field(self.text, column).is_empty())
            });
            let filled_below = filled_below.count();
            let numeric_below = later()
                .filter(|other| {
                    self.numeric.get(*other).and_then(|row| row.get(column)) == Some(&true)
                })
                .count();
            let text_above_numbers = !field.is_empty()
                && numeric.get(column) == Some(&false)
                && !attempts_number(field)
                && filled_below > 0
                && numeric_below * 10 >= filled_below * 6;
            let empty_corner = column == 0
                && field.is_empty()
                && record.filled() > 1
                && rest > 1
                && filled_below == rest;
            text_above_numbers || empty_corner
        })
    }

    pub fn rows(&self, first: usize) -> impl Iterator<Item = &Record> {
        (first..self.records.len())
            .filter(|index| self.looks_like_row(*index))
            .filter_map(|index| self.records.get(index))
    }

    pub fn width(&self, first: usize) -> usize {
        let last_filled = |record: &Record| {
            record.fields.iter().rposition(|span| !span.is_empty()).map_or(0, |last| last + 1)
        };
        if self.separator.is_spaces() {
            let mut counts = vec![0_usize; MOST_FIELDS + 1];
            for record in self.rows(first) {
                counts[record.fields.len().min(MOST_FIELDS)] += 1;
            }
            // The narrowest of equally frequent widths: the last field may contain spaces.
            let most = counts.iter().max().copied().unwrap_or(0);
            return counts
                .iter()
                .position(|count| *count == most)
                .filter(|_| most > 0)
                .unwrap_or(0);
        }
        let header =
            first.checked_sub(1).and_then(|above| self.records.get(above)).map_or(0, last_filled);
        let rows = self.rows(first).map(last_filled).max().unwrap_or(0);
        // A title with commas is no wide header.
        if header > rows && first > 0 && self.separator == Separator::Comma && header > 2 * rows {
            rows
        } else {
            rows.max(header)
        }
    }

    pub fn is_numeric(&self, first: usize, column: usize) -> bool {
        let (mut filled, mut numbers) = (0, 0);
        for index in (first..self.records.len()).filter(|index| self.looks_like_row(*index)) {
            let number = self.numeric.get(index).and_then(|row| row.get(column)) == Some(&true);
            filled += usize::from(
                self.records
                    .get(index)
                    .is_some_and(|record| !record.field(self.text, column).is_empty()),
            );
            numbers += usize::from(number);
        }
        filled > 0 && numbers * 2 >= filled
    }

    /// Why there is no row at all; none for an empty text.
    pub fn nothing(&self, text: &str) -> Option<Problem> {
        let first = self.records.first()?;
        if first.too_long {
            return None;
        }
        let line = text.get(first.span.clone()).unwrap_or("");
        Some(Problem::said(
            &Position::row(first.line),
            line,
            "a table with a row of numbers for each measurement",
            &format!(
                "found “{}”, but no row of numbers anywhere; paste a table with a row for each measurement.",
                shortened(line)
            ),
        ))
    }
}

/// Begins as a number does, even if it is none.
pub(super) fn attempts_number(field: &str) -> bool {
    let mut characters = field.chars().skip_while(|character| {
        matches!(
            character,
            '-' | '+' | '−' | '–' | '<' | '≤' | '>' | '≥' | '±' | '.' | ',' | ' ' | '('
        )
    });
    characters.next().is_some_and(|first| first.is_ascii_digit())
}

/// The ruled line of a text table: `|---|---|`, `=====`.
pub(super) fn is_rule(text: &str, record: &Record) -> bool {
    let line = text.get(record.span.clone()).unwrap_or("");
    line.len() >= 3
        && line.contains(['-', '=', '_', '─', '━'])
        && !line.contains('\t')
        && line.chars().all(|character| {
            matches!(character, '-' | '=' | '_' | '─' | '━' | '|' | '+' | ':' | ' ' | '┼')
        })
        && line.matches(['-', '=', '_', '─', '━']).count() >= 3
}
