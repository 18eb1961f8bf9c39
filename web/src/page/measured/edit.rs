//! Edits of single cells, made in the pasted text itself: the text stays the truth, and what
//! was not touched stays to the letter.

use kinetics_core::table::{Separator, Table};

/// The text with one cell replaced. A row beyond the last appends a line.
pub fn with_cell(text: &str, table: &Table, row: usize, column: usize, typed: &str) -> String {
    let typed = typed.trim().replace(['\n', '\r', '\t'], " ");
    match table.rows.get(row) {
        Some(row) => {
            table.with_cell(text, row.line, column, &typed).unwrap_or_else(|| text.to_owned())
        }
        None => with_line(text, table.separator, column, &[&typed]),
    }
}

/// The text with a new last line that holds some cells, from a column on.
pub fn with_line(text: &str, separator: Separator, column: usize, typed: &[&str]) -> String {
    let (sign, empty) = match separator {
        Separator::Tab => ("\t", ""),
        Separator::Comma => (",", ""),
        Separator::Semicolon => (";", ""),
        Separator::Bar => ("|", ""),
        // Between spaces a dash holds the place of what is empty.
        Separator::WideSpaces => ("   ", "-"),
        Separator::Spaces => (" ", "-"),
    };
    let mut longer = text.trim_end_matches([' ', '\n', '\r']).to_owned();
    if !longer.is_empty() {
        longer.push_str(if text.contains("\r\n") { "\r\n" } else { "\n" });
    }
    for _ in 0..column {
        longer.push_str(empty);
        longer.push_str(sign);
    }
    for (at, typed) in typed.iter().enumerate() {
        longer.push_str(if at > 0 { sign } else { "" });
        if empty.is_empty() && (typed.contains(sign) || typed.contains('"')) {
            longer.push_str(&format!("\"{}\"", typed.replace('"', "\"\"")));
        } else {
            longer.push_str(if typed.is_empty() { empty } else { typed });
        }
    }
    longer.push('\n');
    longer
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use kinetics_core::table::{Hints, read_table};

    use super::*;

    fn edited(text: &str, row: usize, column: usize, typed: &str) -> String {
        with_cell(text, &read_table(text, &Hints::default()), row, column, typed)
    }

    /// The cells of a text as they stand in it.
    fn cells(text: &str) -> Vec<Vec<&str>> {
        let table = read_table(text, &Hints::default());
        let row = |row: &kinetics_core::table::Row| {
            row.cells.iter().map(|cell| text.get(cell.span.clone()).unwrap()).collect()
        };
        table.rows.iter().map(row).collect()
    }

    #[test]
    fn one_cell_changes_and_nothing_else() {
        let text = "T/°C\tk, 1/h\r\n50\t 0.02 \r\n60\t0.06\r\n";
        assert_eq!(edited(text, 0, 1, "0.021"), "T/°C\tk, 1/h\r\n50\t 0.021 \r\n60\t0.06\r\n");
        assert_eq!(edited(text, 1, 0, "<b>"), "T/°C\tk, 1/h\r\n50\t 0.02 \r\n<b>\t0.06\r\n");
        assert_eq!(edited(text, 0, 9, "x"), text);
    }

    #[test]
    fn a_row_beyond_the_last_is_a_new_line() {
        let text = "T/°C\tk, 1/h\n50\t0.02\n60\t0.06";
        let longer = edited(text, 2, 0, "70");
        assert_eq!(longer, "T/°C\tk, 1/h\n50\t0.02\n60\t0.06\n70\n");
        let whole = edited(&longer, 2, 1, "0.15");
        assert_eq!(cells(&whole)[2], ["70", "0.15"]);
        let from_the_right = edited(text, 2, 1, "0.15");
        assert_eq!(cells(&from_the_right)[2], ["", "0.15"]);
        let commas = "T/°C,k / 1/h\n50,0.02\n60,0.06\n";
        assert_eq!(edited(commas, 2, 0, "7,0"), format!("{commas}\"7,0\"\n"));
    }

    #[test]
    fn no_text_makes_it_panic() {
        for text in ["", "\u{feff}", "a", "\"", "50\t\"0.0\n60\t1", "µ,µ\nµ,µ", "\r\r\n"] {
            let table = read_table(text, &Hints::default());
            for row in 0..3 {
                for column in 0..3 {
                    for typed in ["", "1", "\"", "a\tb", "µ"] {
                        with_cell(text, &table, row, column, typed);
                    }
                }
            }
        }
    }
}
