//! What holds for every text: it is read without a panic, in linear time, and
//! what was printed reads back.
#![allow(clippy::unwrap_used)]

use proptest::prelude::*;

use super::{Hints, read_table};

/// Quadratic behaviour would make these take minutes.
#[test]
fn monsters_are_read_in_linear_time() {
    for text in [
        "1\t".repeat(1_000_000),
        "\"a,".repeat(700_000),
        "\"".repeat(2_000_000),
        "x\n".repeat(500_000),
        "1 ".repeat(1_000_000),
        "(".repeat(1_000_000),
        "1,\n".repeat(300_000),
    ] {
        let _ = read_table(&text, &Hints::default());
    }
}

proptest! {
    #[test]
    fn no_text_makes_it_panic(text in "\\PC{0,200}", lines in proptest::collection::vec("[0-9.,;\t °CTkhs/⁻¹×±()\"'<>|#-]{0,30}", 0..12)) {
        for text in [text, lines.join("\n"), lines.join("\r\n")] {
            let table = read_table(&text, &Hints::default());
            for row in &table.rows {
                prop_assert_eq!(row.cells.len(), table.columns.len());
                for cell in &row.cells {
                    prop_assert!(text.get(cell.span.clone()).is_some());
                }
            }
            let _ = serde_json::to_string(&table.view(&text));
        }
    }

    #[test]
    fn a_printed_table_reads_back(
        rows in proptest::collection::vec((-40_i32..200, 1_u32..99_999, -8_i32..3), 2..20),
        style in 0_usize..5,
    ) {
        let (separator, comma) = [("\t", false), (";", true), (",", false), ("   ", false), ("\t", true)][style];
        let header = ["T/°C", "k / h⁻¹"].join(separator);
        let line = |(temperature, digits, power): &(i32, u32, i32)| {
            let line = format!("{temperature}.5{separator}{}e{power}", f64::from(*digits) / 1000.0);
            if comma { line.replace('.', ",") } else { line }
        };
        let text = format!("{header}\n{}\n", rows.iter().map(line).collect::<Vec<_>>().join("\n"));
        let table = read_table(&text, &Hints::default());
        prop_assert!(table.problems.is_empty(), "{:?}", table.problems);
        prop_assert_eq!(table.rows.len(), rows.len());
        for (row, (temperature, digits, power)) in table.rows.iter().zip(&rows) {
            let t: f64 = format!("{temperature}.5").parse().unwrap();
            let k: f64 = format!("{}e{power}", f64::from(*digits) / 1000.0).parse().unwrap();
            prop_assert_eq!(row.cells[0].number(), Some((t, None)));
            prop_assert_eq!(row.cells[1].number(), Some((k, None)));
        }
    }
}
