//! The table that stands beside each picture: the same content as numbers.

/// One cell.
#[derive(Debug, Clone, PartialEq)]
pub enum Cell {
    /// Words.
    Words(String),
    /// A number, in the unit of its column.
    Number(f64),
    /// Nothing known.
    Empty,
}

impl Cell {
    /// A number, or nothing where it is none.
    pub fn number(value: impl Into<Option<f64>>) -> Self {
        match value.into() {
            Some(value) if value.is_finite() => Self::Number(value),
            _ => Self::Empty,
        }
    }

    /// Words, or nothing where there are none.
    pub fn words(words: impl Into<String>) -> Self {
        let words = words.into();
        if words.is_empty() { Self::Empty } else { Self::Words(words) }
    }

    /// As text; `number` writes numbers.
    pub fn text(&self, number: impl FnOnce(f64) -> String) -> String {
        match self {
            Self::Words(words) => words.clone(),
            Self::Number(value) => number(*value),
            Self::Empty => String::new(),
        }
    }
}

/// A table; every row is as long as the headers.
#[derive(Debug, Clone, PartialEq)]
pub struct Table {
    /// What it lists.
    pub caption: String,
    /// Name and unit of each column.
    pub headers: Vec<String>,
    /// The cells.
    pub rows: Vec<Vec<Cell>>,
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_no_number_is_an_empty_cell() {
        assert_eq!(Cell::number(f64::NAN), Cell::Empty);
        assert_eq!(Cell::number(None), Cell::Empty);
        assert_eq!(Cell::number(1.5).text(|value| format!("{value:.2}")), "1.50");
        assert_eq!(Cell::words(""), Cell::Empty);
    }
}
