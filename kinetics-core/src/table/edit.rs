//! Puts an edited cell back into the text it came from, so that the text stays
//! what the study keeps.

use super::{Separator, Table};
use crate::text::lines::{Record, Records};

impl Table {
    /// The text with one cell replaced: `line` is the physical line of its row,
    /// `column` counts from 0. None if there is no such row or column.
    ///
    /// Quotes are added where the new text needs them, and separators where the
    /// row was too short. Between single spaces an empty cell becomes `-`, so
    /// that the other cells keep their columns.
    #[must_use]
    pub fn with_cell(&self, text: &str, line: usize, column: usize, new: &str) -> Option<String> {
        let row = self.rows.get(self.rows.binary_search_by_key(&line, |row| row.line).ok()?)?;
        let cell = row.cells.get(column)?;
        let mut records = Records::new(text, self.separator);
        let record =
            std::iter::from_fn(|| records.next(text)).find(|record| record.line == line)?;
        let written = self.written(text, &record, column, new);
        let span = if column < record.fields.len() {
            cell.span.clone()
        } else {
            record.span.end..record.span.end
        };
        let mut edited = String::with_capacity(text.len() + written.len());
        edited.push_str(text.get(..span.start)?);
        edited.push_str(&written);
        edited.push_str(text.get(span.end..)?);
        Some(edited)
    }

    fn written(&self, text: &str, record: &Record, column: usize, new: &str) -> String {
        let new = new.trim().replace(['\r', '\n'], " ");
        let Some(mark) = self.mark() else {
            return self.between_spaces(record, column, &new);
        };
        let quoted = record.fields.get(column).is_some_and(|span| {
            let before = span.start.checked_sub(1).and_then(|at| text.as_bytes().get(at));
            before == Some(&b'"') && text.as_bytes().get(span.end) == Some(&b'"')
        });
        let needs_quotes = new.contains(mark) || new.starts_with('"');
        let doubled = new.replace('"', "\"\"");
        let value = match (quoted, needs_quotes) {
            (true, _) => doubled,
            (false, true) => format!("\"{doubled}\""),
            (false, false) => new,
        };
        let missing = (column + 1).saturating_sub(record.fields.len().max(1));
        format!("{}{value}", mark.to_string().repeat(missing))
    }

    fn between_spaces(&self, record: &Record, column: usize, new: &str) -> String {
        let single = self.separator == Separator::Spaces;
        let words: Vec<&str> = new.split_whitespace().collect();
        let value = if words.is_empty() {
            "-".to_string()
        } else {
            words.join(if single { "" } else { " " })
        };
        let missing = (column + 1).saturating_sub(record.fields.len());
        let gap = if single { " " } else { "   " };
        let placeholders = format!("{gap}-").repeat(missing.saturating_sub(1));
        if missing > 0 { format!("{placeholders}{gap}{value}") } else { value }
    }

    fn mark(&self) -> Option<char> {
        match self.separator {
            Separator::Tab => Some('\t'),
            Separator::Semicolon => Some(';'),
            Separator::Bar => Some('|'),
            Separator::Comma => Some(','),
            Separator::WideSpaces | Separator::Spaces => None,
        }
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::super::{Hints, read_table};

    fn edited(text: &str, line: usize, column: usize, new: &str) -> Option<String> {
        read_table(text, &Hints::default()).with_cell(text, line, column, new)
    }

    #[test]
    fn a_cell_is_replaced_in_place() {
        let text = "T/°C\tk, 1/h\r\n50\t0.0O21\r\n60\t0.0059\r\n";
        let wanted = "T/°C\tk, 1/h\r\n50\t0.0021\r\n60\t0.0059\r\n";
        assert_eq!(edited(text, 2, 1, "0.0021").as_deref(), Some(wanted));
        assert_eq!(edited(text, 1, 1, "0.0021"), None);
        assert_eq!(edited(text, 2, 7, "0.0021"), None);
    }

    #[test]
    fn quotes_and_separators_are_added_where_needed() {
        let text = "T,k 1/h,note\n50,0.0021,ok\n60,0.0059\n70,0.0160,\"a, b\"\n";
        assert_eq!(edited(text, 2, 2, "a, b").unwrap().lines().nth(1), Some("50,0.0021,\"a, b\""));
        assert_eq!(edited(text, 3, 2, "late").unwrap().lines().nth(2), Some("60,0.0059,late"));
        assert_eq!(
            edited(text, 4, 2, "say \"no\"").unwrap().lines().nth(3),
            Some("70,0.0160,\"say \"\"no\"\"\"")
        );
    }

    #[test]
    fn between_spaces_columns_stay_in_place() {
        let text = "T k s(k)\n50 0.0021 0.0001\n60 0.0059 0.0003\n";
        assert_eq!(edited(text, 2, 1, "").unwrap().lines().nth(1), Some("50 - 0.0001"));
        assert_eq!(
            edited(text, 2, 1, "1.2 × 10^-3").unwrap().lines().nth(1),
            Some("50 1.2×10^-3 0.0001")
        );
    }
}
