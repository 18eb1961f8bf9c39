//! A range of a spreadsheet that is pasted into a cell: it fills the table downwards and to the
//! right, and adds rows where the table ends.

use kinetics_core::table::{Hints, Table, read_table};

use super::edit::{with_cell, with_line};

/// A text with a range in it.
pub struct Filled {
    /// The text.
    pub text: String,
    /// How many cells of the range lay to the right of the table.
    pub left_over: usize,
}

/// Whether a paste is a range for a cell: several cells, and no table with a heading of its own
/// nor a study.
pub fn is_range(pasted: &str) -> bool {
    let pasted = pasted.trim_matches(['\r', '\n']);
    let heading = pasted.lines().next().unwrap_or_default();
    let is_heading = heading.contains('\t') && !heading.split('\t').any(is_number_like);
    pasted.contains(['\t', '\n']) && !is_heading && !pasted.starts_with('{')
}

fn is_number_like(cell: &str) -> bool {
    cell.trim_start_matches([' ', '+', '-', '\u{2212}', '<', '≈', '.', ','])
        .starts_with(|sign: char| sign.is_ascii_digit())
}

/// The text of a table with a pasted range in it, whose first cell lies at `place`: a row, which
/// may be the one after the last, and a column of `columns`.
pub fn filled(
    text: &str,
    table: &Table,
    hints: &Hints,
    columns: usize,
    (first_row, first_column): (usize, usize),
    pasted: &str,
) -> Filled {
    let room = columns.saturating_sub(first_column);
    let mut left_over = 0;
    let lines: Vec<Vec<&str>> = pasted
        .trim_end_matches(['\r', '\n'])
        .lines()
        .map(|line| {
            let cells: Vec<&str> = line.split('\t').map(str::trim).collect();
            left_over += cells.iter().skip(room).filter(|cell| !cell.is_empty()).count();
            cells.into_iter().take(room).collect()
        })
        .collect();
    let within = table.rows.len().saturating_sub(first_row).min(lines.len());
    let (inside, beyond) = lines.split_at(within);
    let mut text = text.to_owned();
    // From the end on, so that what comes before stays where it was read.
    for (at, cells) in inside.iter().enumerate().rev() {
        let row = first_row + at;
        let found = table.rows.get(row).and_then(|row| row.cells.get(first_column..));
        let is_whole = found
            .is_some_and(|found| found.iter().take(cells.len()).all(|cell| !cell.span.is_empty()));
        if is_whole || cells.len() < 2 {
            for (column, cell) in cells.iter().enumerate().rev() {
                text = with_cell(&text, table, row, first_column + column, cell);
            }
        } else {
            // What stands first moves what stands behind it.
            for (column, cell) in cells.iter().enumerate() {
                let now = read_table(&text, hints);
                text = with_cell(&text, &now, row, first_column + column, cell);
            }
        }
    }
    for cells in beyond {
        text = with_line(&text, table.separator, first_column, cells);
    }
    Filled { text, left_over }
}

#[cfg(test)]
mod tests {
    use super::*;

    const TABLE: &str = "T/°C\tk, 1/h\ts(k)\n50\t0.02\t0.001\n60\t0.06\n70\t0.15\t0.008\n";

    fn pasted(text: &str, place: (usize, usize), pasted: &str) -> (String, usize) {
        let hints = Hints::default();
        let filled = filled(text, &read_table(text, &hints), &hints, 3, place, pasted);
        (filled.text, filled.left_over)
    }

    #[test]
    fn a_column_fills_downwards_and_adds_rows() {
        let (text, left_over) = pasted(TABLE, (1, 1), "0.061\r\n0.16\r\n0.33\r\n");
        let wanted = "T/°C\tk, 1/h\ts(k)\n50\t0.02\t0.001\n60\t0.061\n70\t0.16\t0.008\n\t0.33\n";
        assert_eq!((text.as_str(), left_over), (wanted, 0));
    }

    #[test]
    fn a_range_fills_to_the_right_also_where_rows_are_short() {
        let (text, left_over) = pasted(TABLE, (0, 1), "1\t2\t9\n3\t4\n5\t6");
        let wanted = "T/°C\tk, 1/h\ts(k)\n50\t1\t2\n60\t3\t4\n70\t5\t6\n";
        assert_eq!((text.as_str(), left_over), (wanted, 1));
        let short = "T/°C\tk, 1/h\ts(k)\n50\t0.02\t0.001\n60\n";
        let (text, _) = pasted(short, (1, 1), "0.06\t0.002");
        assert_eq!(text, "T/°C\tk, 1/h\ts(k)\n50\t0.02\t0.001\n60\t0.06\t0.002\n");
    }

    #[test]
    fn an_empty_table_takes_a_range() {
        let (text, _) = pasted("T/°C\tk, 1/h\ts(k)\n", (0, 0), "50\t0.02\n60\t\"0.06\"\n");
        assert_eq!(text, "T/°C\tk, 1/h\ts(k)\n50\t0.02\n60\t\"\"\"0.06\"\"\"\n");
        let (text, _) = pasted("T,k 1/h,s\n50,0.02,0.001\n", (1, 0), "60\t0,06");
        assert_eq!(text, "T,k 1/h,s\n50,0.02,0.001\n60,\"0,06\"\n");
    }

    #[test]
    fn a_table_with_its_heading_is_no_range() {
        for text in ["0.1\n0.2\n", "50\t0.02", "\n-5\t1\n", "a\nb", "A-17\t50\t0.02\n"] {
            assert!(is_range(text), "{text}");
        }
        for text in ["0.02", "0.02\n", "T\tk\n50\t0.02\n", "{\n\"kelvinclock\": 1}", ""] {
            assert!(!is_range(text), "{text}");
        }
    }

    #[test]
    fn no_paste_makes_it_panic() {
        for text in ["", "\"", "50\t\"0.0\n60\t1", "µ,µ\nµ,µ", TABLE] {
            for place in [(0, 0), (1, 2), (9, 9)] {
                for range in ["\t", "\n\n", "a\tb\tc\td\n\"\t\"", "µ\nµ\r\n"] {
                    pasted(text, place, range);
                }
            }
        }
    }
}
