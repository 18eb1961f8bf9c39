//! From a text to a table: cells with their places, columns with roles and
//! units, the problems met, and every decision made on the user's behalf.

mod beside;
mod columns;
mod convert;
mod edit;
mod errors;
mod header;
mod layout;
#[cfg(test)]
mod properties;
mod reader;
mod refusals;
mod role;
mod roles;
mod said;
mod sample;
mod tally;
mod values;
mod view;
mod wide;

use std::ops::Range;

use serde::{Deserialize, Serialize};

pub use header::{NamedExtent, named_extent};
pub use reader::{Reader, read_table};
pub use role::{ErrorKind, Form, Role, SignalIs};
pub use view::{CellView, NoteView, RowView, TableView};

use crate::problem::Problem;
use crate::quantity::Quantity;
pub use crate::text::{Decimal, Separator};

/// What is already known about a text; by default nothing, and all is inferred.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct Hints {
    /// Columns from the left; what is stated wins over header and values.
    pub columns: Vec<ColumnHint>,
    /// The decimal mark of the whole text.
    pub decimal: Option<Decimal>,
    /// The form of the data.
    pub form: Option<Form>,
}

/// What is already known about a column.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct ColumnHint {
    /// Its role.
    pub role: Option<Role>,
    /// Its unit.
    pub unit: Option<String>,
    /// What its numbers are multiplied by to count in the unit.
    pub multiplier: Option<f64>,
}

/// Where a role or a unit was taken from.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Origin {
    /// The study, or the user.
    Stated,
    /// The header, or a row of units.
    Header,
    /// The numbers, or units beside them.
    Values,
    /// Nothing said otherwise.
    Assumed,
}

/// A column.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Column {
    /// What it holds.
    pub role: Role,
    /// Its unit as a code; none where the role has none or nothing states it.
    pub unit: Option<String>,
    /// What a number in a cell was multiplied by to give the value in `unit`.
    pub multiplier: f64,
    /// The header as written; empty if there is none.
    pub header: String,
    /// A name for messages: the header, or what the column holds.
    pub name: String,
    /// Where the role comes from.
    pub role_from: Origin,
    /// Where the unit comes from.
    pub unit_from: Origin,
    /// The decimal mark in this column.
    pub decimal: Decimal,
    /// For an error: index of the column it belongs to.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub error_of: Option<usize>,
    /// For an error: what it is, if the header says.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub error_is: Option<ErrorKind>,
    /// For a signal: what it follows, if the header says.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub signal_is: Option<SignalIs>,
    /// For one run's column of a wide table: the run's temperature.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub run_temperature: Option<Quantity>,
}

/// A row of cells, as many as there are columns.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// Physical line of the text, from 1.
    pub line: usize,
    /// The cells from the left.
    pub cells: Vec<Cell>,
}

/// A cell.
#[derive(Clone, Debug, PartialEq)]
pub struct Cell {
    /// Where it stands in the text, trimmed and inside any quotes.
    pub span: Range<usize>,
    /// What it holds.
    pub content: Content,
}

/// What a cell holds.
#[derive(Clone, Debug, PartialEq)]
pub enum Content {
    /// A number in the unit of its column, the multiplier applied; likewise the
    /// error if the cell carries one.
    Number {
        /// The value.
        value: f64,
        /// Its error.
        error: Option<f64>,
    },
    /// A number with a mark such as `*`: kept, but not used.
    Marked {
        /// The value.
        value: f64,
        /// Its error.
        error: Option<f64>,
    },
    /// Text, where text belongs; empty in a column that is not used.
    Text(Box<str>),
    /// Nothing.
    Empty,
    /// Below a limit, in the unit of the column where it is known.
    Below(Option<f64>),
    /// A word for "no value".
    NotDetermined,
    /// What could not be read; a problem says why.
    Bad,
}

impl Cell {
    /// The text of a cell that names something.
    #[must_use]
    pub fn label(&self) -> Option<String> {
        match &self.content {
            Content::Text(text) if !text.is_empty() => Some(text.to_string()),
            _ => None,
        }
    }

    /// Value and error of a cell that counts.
    #[must_use]
    pub fn number(&self) -> Option<(f64, Option<f64>)> {
        match self.content {
            Content::Number { value, error } => Some((value, error)),
            _ => None,
        }
    }
}

/// Something decided on the user's behalf, in words.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Choice {
    /// What was decided, and what it led to.
    pub sentence: String,
    /// The column it concerns, from 1.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub column: Option<usize>,
    /// What to do where another decision, as good, would change every answer.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub remedy: Option<String>,
}

impl Choice {
    fn of_column(column: usize, sentence: String) -> Self {
        Self { sentence, column: Some(column), remedy: None }
    }

    fn of_table(sentence: String) -> Self {
        Self { sentence, column: None, remedy: None }
    }
}

/// What a text is taken to mean.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    /// The form of the data, as stated or as the columns suggest.
    pub form: Option<Form>,
    /// The columns from the left.
    pub columns: Vec<Column>,
    /// The rows from the top, without headers, notes and blank lines.
    pub rows: Vec<Row>,
    /// What could not be read.
    pub problems: Vec<Problem>,
    /// The decimal mark of most columns.
    pub decimal: Decimal,
    /// What separates the fields.
    pub separator: Separator,
    /// Lines of the header.
    pub header_lines: Vec<usize>,
    /// Line of the row of units.
    pub units_line: Option<usize>,
    /// Lines that are neither header nor row, with their text.
    pub notes: Vec<(usize, String)>,
    /// Lines that hold nothing but the temperature of the run below them; progress data without
    /// a column of temperatures only.
    pub run_titles: Vec<(usize, Quantity)>,
    /// Everything decided on the user's behalf.
    pub choices: Vec<Choice>,
}
