//! What could not be read: where it stands, what was found and what was
//! expected. The sentence is put together here and nowhere else.

use serde::{Deserialize, Serialize};

/// One thing that was refused, with its place. Rows are physical lines of the
/// text and columns are fields, both counted from 1.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Problem {
    /// The line, unless the problem concerns the whole text or a column.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub row: Option<usize>,
    /// The column, unless the problem concerns the whole text or a line.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub column: Option<usize>,
    /// The header of the column, as it was written.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub column_name: Option<String>,
    /// What stood there, at most 60 characters.
    pub found: String,
    /// What should have stood there.
    pub expected: String,
    /// All of it, and what follows from it, in a sentence.
    pub sentence: String,
}

/// A place in a pasted text; what is unknown is left out of the sentence.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Position<'a> {
    /// Physical line, from 1.
    pub row: Option<usize>,
    /// Field of the line, from 1.
    pub column: Option<usize>,
    /// Header of the column.
    pub column_name: Option<&'a str>,
}

impl<'a> Position<'a> {
    /// A cell.
    #[must_use]
    pub fn cell(row: usize, column: usize, column_name: &'a str) -> Position<'a> {
        Position { row: Some(row), ..Position::column(column, column_name) }
    }

    /// A whole line.
    #[must_use]
    pub fn row(row: usize) -> Position<'a> {
        Position { row: Some(row), ..Position::default() }
    }

    /// A whole column.
    #[must_use]
    pub fn column(column: usize, column_name: &'a str) -> Position<'a> {
        let column_name = Some(column_name.trim()).filter(|name| !name.is_empty());
        Position { row: None, column: Some(column), column_name }
    }
}

impl Problem {
    /// Renders the sentence. `consequence` says what was done about it, as in
    /// "the row is left out"; it may be empty.
    #[must_use]
    pub fn new(position: &Position<'_>, found: &str, expected: &str, consequence: &str) -> Problem {
        let found = shortened(found);
        let mut sentence = place(position);
        let begins = sentence.is_empty();
        if !begins {
            sentence.push_str(": ");
        }
        let what = match (found.is_empty(), begins) {
            (true, true) => "Found nothing".to_string(),
            (true, false) => "found nothing".to_string(),
            (false, true) => format!("Found “{found}”"),
            (false, false) => format!("found “{found}”"),
        };
        sentence.push_str(&what);
        if !expected.is_empty() {
            sentence.push_str(", expected ");
            sentence.push_str(expected);
        }
        if !consequence.is_empty() {
            sentence.push_str("; ");
            sentence.push_str(consequence);
        }
        sentence.push('.');
        Problem {
            row: position.row,
            column: position.column,
            column_name: position.column_name.map(shortened),
            found,
            expected: expected.to_string(),
            sentence,
        }
    }

    /// A problem that needs its own words: `message` follows the place.
    #[must_use]
    pub fn said(position: &Position<'_>, found: &str, expected: &str, message: &str) -> Problem {
        let place = place(position);
        let sentence =
            if place.is_empty() { message.to_string() } else { format!("{place}: {message}") };
        Problem { sentence, ..Problem::new(position, found, expected, "") }
    }
}

impl std::fmt::Display for Problem {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(&self.sentence)
    }
}

/// "Row 4, column 2 (k, 1/h)".
fn place(position: &Position<'_>) -> String {
    let mut place = match (position.row, position.column) {
        (Some(row), Some(column)) => format!("Row {row}, column {column}"),
        (Some(row), None) => format!("Row {row}"),
        (None, Some(column)) => format!("Column {column}"),
        (None, None) => String::new(),
    };
    if let Some(name) = position.column_name {
        if place.is_empty() {
            place.push_str("Column");
        }
        place.push_str(&format!(" ({})", shortened(name)));
    }
    place
}

/// At most 60 characters on one line, with an ellipsis where something was cut;
/// control characters are shown as a sign, so that a message stays one line.
#[must_use]
pub fn shortened(text: &str) -> String {
    const LONGEST: usize = 60;
    let mut kept: String = text
        .trim()
        .chars()
        .take(LONGEST + 1)
        .map(|character| match character {
            '\t' | '\n' | '\r' => ' ',
            control if control.is_control() => '\u{fffd}',
            other => other,
        })
        .collect();
    if let Some((cut, _)) = kept.char_indices().nth(LONGEST) {
        let shorter = kept.char_indices().nth(LONGEST - 1).map_or(cut, |(at, _)| at);
        kept.truncate(shorter);
        kept.push('…');
    }
    kept
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn a_cell_is_named_by_row_column_and_header() {
        let problem = Problem::new(
            &Position::cell(4, 2, "k, 1/h"),
            "0.0O59",
            "a number",
            "the row is left out",
        );
        assert_eq!(
            problem.to_string(),
            "Row 4, column 2 (k, 1/h): found “0.0O59”, expected a number; the row is left out."
        );
        assert_eq!((problem.row, problem.column), (Some(4), Some(2)));
    }

    #[test]
    fn places_that_are_unknown_are_left_out() {
        let nowhere = Problem::new(&Position::default(), "", "a table", "");
        assert_eq!(nowhere.sentence, "Found nothing, expected a table.");
        let column = Problem::new(&Position::column(3, " "), "furlongs", "a unit of time", "");
        assert_eq!(column.sentence, "Column 3: found “furlongs”, expected a unit of time.");
        let said = Problem::said(
            &Position::row(9),
            "50,0,0021",
            "two fields",
            "three fields where two are usual.",
        );
        assert_eq!(said.sentence, "Row 9: three fields where two are usual.");
    }

    #[test]
    fn long_findings_are_cut_and_stay_on_one_line() {
        let problem = Problem::new(&Position::row(1), &"µ".repeat(5_000_000), "a number", "");
        assert_eq!(problem.found.chars().count(), 60);
        assert!(problem.found.ends_with('…'));
        assert_eq!(shortened(&"a".repeat(60)), "a".repeat(60));
        assert_eq!(shortened("a\nb\u{0}"), "a b\u{fffd}");
    }

    #[test]
    fn serialises_without_the_places_it_lacks() {
        let problem = Problem::new(&Position::row(2), "x", "a number", "");
        let json = serde_json::to_string(&problem).unwrap();
        assert_eq!(
            json,
            r#"{"row":2,"found":"x","expected":"a number","sentence":"Row 2: found “x”, expected a number."}"#
        );
        assert_eq!(serde_json::from_str::<Problem>(&json).unwrap(), problem);
    }
}
