//! Record: the account of the study, to print and to copy.

use kinetics_core::study::{Evaluation, Study};

use super::carry::{Carrier, file_name};
use super::csv::{self, csv};
use super::once::once;
use super::part::{Part, button, part};
use super::sheet::Sheet;
use crate::figure::table::Table;
use crate::keep::frame;

/// A longer account is shown in part; copying takes the whole.
const MOST_SHOWN_BYTES: usize = 60_000;

/// The section.
pub fn section(sheet: Sheet) -> Part {
    let text = once(sheet, |_, evaluation| shown(&evaluation.findings.record.text));
    let account = part("pre")
        .class("record")
        .with("tabindex", "0")
        .with("role", "region")
        .with("aria-label", "The account as text")
        .says(move || text());
    let carrier = Carrier::new(sheet, "record-text");
    let (words, table) = (carrier.clone(), carrier.clone());
    let copy = move || {
        let text = sheet.evaluation().findings.record.text.clone();
        words.copy(text, None, "The record is copied.".to_owned());
    };
    let copy_html = move || {
        let html = sheet.evaluation().findings.record.html.clone();
        table.copy(html.clone(), Some(html), "The record is copied as a table.".to_owned());
    };
    let print = move || {
        frame::print();
        if frame::is_embedded() {
            sheet.tell(
                "If no print window appears, the page around this frame forbids it: copy the \
                 record, or print the page at its own address.",
            );
        }
    };
    // Spreadsheets take UTF-8 for something else without this mark.
    let take = |name: &'static str, table: fn(&Study, &Evaluation) -> Table| {
        let carrier = carrier.clone();
        move || {
            let study = sheet.study();
            let text = csv(&table(&study, &sheet.evaluation()), sheet.decimal());
            carrier.file(&file_name(&study.title, name), "text/csv", format!("\u{feff}{text}"));
        }
    };
    let runs = take("runs.csv", |_, evaluation| csv::runs(evaluation));
    let answers = take("answers.csv", csv::answers);
    part("section")
        .with("aria-labelledby", "record")
        .add(part("h2").with("id", "record").text("Record"))
        .add(account)
        .add(
            part("div")
                .class("actions")
                .add(button("Print", print))
                .add(button("Copy as text", copy))
                .add(button("Copy as HTML table", copy_html))
                .add(button("Runs as CSV", runs))
                .add(button("Answers as CSV", answers)),
        )
        .add(carrier.panel())
}

fn shown(text: &str) -> String {
    if text.len() <= MOST_SHOWN_BYTES {
        return text.to_owned();
    }
    let end = (0..=MOST_SHOWN_BYTES).rev().find(|at| text.is_char_boundary(*at)).unwrap_or(0);
    let part = text.get(..end).unwrap_or_default();
    format!("{part}\n…\n(This is the beginning; copying takes the whole account.)")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_long_account_is_shown_in_part() {
        assert_eq!(shown("short"), "short");
        let long = "µ".repeat(MOST_SHOWN_BYTES);
        let part = shown(&long);
        assert!(part.len() < MOST_SHOWN_BYTES + 100 && part.contains("copying takes the whole"));
    }
}
