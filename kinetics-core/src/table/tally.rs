//! Counts what was set aside in a column, so that it can be said in one
//! sentence instead of once a cell.

use super::{Choice, Column, Decimal, Role};
use crate::problem::{Position, Problem, shortened};

/// Lines that are named before the rest is only counted.
const NAMED: usize = 6;

/// How often something occurred, where first, and an example of it.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct Lines {
    pub count: usize,
    first: Vec<usize>,
    example: String,
}

impl Lines {
    pub fn count(&mut self, line: usize, example: &str) {
        self.count += 1;
        if self.first.len() < NAMED {
            self.first.push(line);
        }
        if self.example.is_empty() && !example.is_empty() {
            self.example = shortened(example);
        }
    }

    /// "row 4", "rows 4 and 9", "rows 4, 5, 6, 7, 8, 9 and 12 more".
    pub fn rows(&self) -> String {
        let mut numbers: Vec<String> = self.first.iter().map(usize::to_string).collect();
        let more = self.count - self.first.len();
        if more > 0 {
            return format!("rows {} and {more} more", numbers.join(", "));
        }
        match numbers.pop() {
            None => String::new(),
            Some(last) if numbers.is_empty() => format!("row {last}"),
            Some(last) => format!("rows {} and {last}", numbers.join(", ")),
        }
    }
}

/// What was set aside in one column.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct Tally {
    pub below: Lines,
    pub not_determined: Lines,
    pub marked: Lines,
    pub empty: Lines,
    pub filled_down: Lines,
    pub other_mark: Lines,
    pub humidity: Lines,
    pub bad: usize,
    /// Bad cells without a problem of their own.
    pub unlisted: usize,
}

impl Tally {
    /// One sentence for each kind of thing set aside.
    pub fn choices(&self, at: usize, column: &Column, into: &mut Vec<Choice>) {
        let header = if column.header.is_empty() {
            String::new()
        } else {
            format!(" ({})", shortened(&column.header))
        };
        let mut say = |lines: &Lines, sentence: &dyn Fn(&str, &str) -> String| {
            if lines.count > 0 {
                let sentence = format!(
                    "Column {}{header}: {}",
                    at + 1,
                    sentence(&lines.rows(), &lines.example)
                );
                into.push(Choice::of_column(at + 1, sentence));
            }
        };
        say(&self.below, &|rows, example| {
            format!("below a limit (“{example}”) in {rows}; not used in the fit.")
        });
        say(&self.not_determined, &|rows, example| {
            format!("no value (“{example}”) in {rows}; left out.")
        });
        say(&self.marked, &|rows, example| {
            format!("marked (“{example}”) in {rows}; kept in the table and left out of the fit.")
        });
        let several = self.empty.count > 1;
        let gaps = if several { "empty cells" } else { "an empty cell" };
        say(&self.empty, &|rows, _| format!("{gaps} in {rows}; left out."));
        let cells =
            if self.filled_down.count > 1 { "empty cells take" } else { "the empty cell takes" };
        let what = if column.role == Role::Temperature { "the temperature" } else { "what stands" };
        say(&self.filled_down, &|rows, _| {
            format!("{cells} {what} above ({rows}), as merged cells do.")
        });
        say(&self.humidity, &|rows, example| {
            format!("the humidity in “{example}” is not used ({rows}).")
        });
        let mark = if column.decimal == Decimal::Point { "comma" } else { "point" };
        say(&self.other_mark, &|rows, example| {
            format!(
                "“{example}” in {rows} has a decimal {mark}, unlike most numbers of the column, and is read so."
            )
        });
    }

    /// One problem for all bad cells that have none of their own.
    pub fn unlisted_problem(&self, at: usize, column: &Column) -> Option<Problem> {
        (self.unlisted > 0).then(|| {
            let message = format!(
                "{} more cells could not be read as numbers and are left out.",
                self.unlisted
            );
            Problem::said(&Position::column(at + 1, &column.header), "", "numbers", &message)
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rows_are_named_until_there_are_too_many() {
        let mut lines = Lines::default();
        lines.count(4, "<LOQ");
        assert_eq!(lines.rows(), "row 4");
        lines.count(9, "<5");
        assert_eq!(lines.rows(), "rows 4 and 9");
        for line in 10..20 {
            lines.count(line, "");
        }
        assert_eq!(lines.rows(), "rows 4, 9, 10, 11, 12, 13 and 6 more");
        assert_eq!(lines.example, "<LOQ");
    }
}
