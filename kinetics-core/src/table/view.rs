//! A table as other programs see it, with the text of every cell.

use serde::Serialize;

use super::{Choice, Column, Content, Decimal, Form, Separator, Table};
use crate::problem::Problem;

/// What a paste is taken to mean.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct TableView<'table> {
    /// The form of the data.
    pub form: Option<Form>,
    /// The decimal mark of most columns.
    pub decimal: Decimal,
    /// What separates the fields.
    pub separator: Separator,
    /// The columns from the left.
    pub columns: &'table [Column],
    /// The rows from the top.
    pub rows: Vec<RowView<'table>>,
    /// What could not be read.
    pub problems: &'table [Problem],
    /// Everything decided on the user's behalf.
    pub choices: &'table [Choice],
    /// Lines that are neither header nor row.
    pub notes: Vec<NoteView<'table>>,
}

/// A row.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct RowView<'table> {
    /// Physical line, from 1.
    pub row: usize,
    /// The cells from the left.
    pub cells: Vec<CellView<'table>>,
}

/// A cell.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct CellView<'table> {
    /// As written.
    pub text: &'table str,
    /// `number`, `marked`, `text`, `empty`, `below`, `not-determined` or `bad`.
    pub is: &'static str,
    /// The value, or the limit of a `below`, in the unit of the column.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub value: Option<f64>,
    /// The error that the cell itself states.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub error: Option<f64>,
}

/// A line that is neither header nor row.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct NoteView<'table> {
    /// Physical line, from 1.
    pub row: usize,
    /// Its text, shortened.
    pub text: &'table str,
}

impl Table {
    /// The table with the text of its cells; `text` is what it was read from.
    #[must_use]
    pub fn view<'table>(&'table self, text: &'table str) -> TableView<'table> {
        let rows = self.rows.iter().map(|row| RowView {
            row: row.line,
            cells: row
                .cells
                .iter()
                .map(|cell| {
                    let (is, value, error) = match &cell.content {
                        Content::Number { value, error } => ("number", Some(*value), *error),
                        Content::Marked { value, error } => ("marked", Some(*value), *error),
                        Content::Text(_) => ("text", None, None),
                        Content::Empty => ("empty", None, None),
                        Content::Below(limit) => ("below", *limit, None),
                        Content::NotDetermined => ("not-determined", None, None),
                        Content::Bad => ("bad", None, None),
                    };
                    CellView { text: text.get(cell.span.clone()).unwrap_or(""), is, value, error }
                })
                .collect(),
        });
        TableView {
            form: self.form,
            decimal: self.decimal,
            separator: self.separator,
            columns: &self.columns,
            rows: rows.collect(),
            problems: &self.problems,
            choices: &self.choices,
            notes: self.notes.iter().map(|(row, text)| NoteView { row: *row, text }).collect(),
        }
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::super::{Hints, read_table};

    #[test]
    fn the_view_is_plain_json() {
        let text = "T/°C\tk, 1/h\n50\t0.0021(1)\n60\tn.d.\n";
        let table = read_table(text, &Hints::default());
        let json = serde_json::to_value(table.view(text)).unwrap();
        assert_eq!(json["form"], "rates");
        assert_eq!(json["columns"][1]["role"], "rate-constant");
        assert_eq!(json["columns"][1]["unit"], "1/h");
        assert_eq!(json["rows"][0]["row"], 2);
        let cell = &json["rows"][0]["cells"][1];
        assert_eq!(
            (cell["text"].as_str(), cell["value"].as_f64(), cell["error"].as_f64()),
            (Some("0.0021(1)"), Some(0.0021), Some(1e-4))
        );
        assert_eq!(json["rows"][1]["cells"][1]["is"], "not-determined");
        assert_eq!(json["rows"][1]["cells"][1].get("value"), None);
    }
}
