//! Record: the account of the study, to print and to copy.

use web_sys::Element;

use super::once::once;
use super::part::{Part, button, part};
use super::sheet::Sheet;
use super::timer::after;
use crate::keep::{clipboard, frame};

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
    let element = account.element::<Element>();
    let copy = move || {
        let element = element.clone();
        let whole = sheet.evaluation().findings.record.text.clone();
        after(async move { clipboard::copy(&whole).await }, move |is_copied| {
            if is_copied {
                sheet.tell("The record is copied.");
            } else if let Some(element) = element {
                clipboard::select(&element);
                sheet.tell(
                    "Copying by a button is forbidden here: the record is selected, press Ctrl+C.",
                );
            }
        });
    };
    let print = move || {
        frame::print();
        if frame::is_embedded() {
            sheet.tell(
                "If no print window appears, the page around this frame forbids it: copy the \
                 record as text.",
            );
        }
    };
    part("section")
        .with("aria-labelledby", "record")
        .add(part("h2").with("id", "record").text("Record"))
        .add(account)
        .add(
            part("div")
                .class("actions")
                .add(button("Copy as text", copy))
                .add(button("Print", print)),
        )
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
