//! What comes to the page from outside: pastes, dropped and chosen files. Each is a table or a
//! saved study.

use kinetics_core::problem::shortened;
use kinetics_core::study::Study;
use wasm_bindgen::JsCast;
use web_sys::{ClipboardEvent, DragEvent, Event, File, HtmlElement};

use super::measured;
use super::part::{Part, document};
use super::sheet::Sheet;
use super::timer::after;
use crate::keep::files;

/// What a paste is called.
pub const PASTE: &str = "The paste";

/// A text from anywhere, and what it is: a saved study is opened, anything else is read as a
/// table.
pub fn take_text(sheet: Sheet, text: String, what: &str) {
    if sheet.is_locked() {
        return;
    }
    if text.trim_start().starts_with('{') {
        match Study::from_json(&text) {
            Ok(study) => {
                sheet.open(study);
                sheet.tell("The study is opened. Undo brings the previous one back.");
            }
            Err(error) => sheet.tell(error.to_string()),
        }
        return;
    }
    sheet.change("", |study| measured::take_text(study, text));
    sheet.tell(format!("{what} is read. Undo brings back what was there before."));
}

/// The text of a paste, as spreadsheets give it.
pub fn text_of_paste(event: &ClipboardEvent) -> Option<String> {
    let text = event.clipboard_data()?.get_data("text/plain").ok()?;
    Some(text).filter(|text| !text.trim().is_empty())
}

/// Takes a file.
pub fn take_file(sheet: Sheet, file: File) {
    let name = file.name();
    after(async move { files::text_of(&file).await }, move |outcome| match outcome {
        Ok(text) => take_text(sheet, text, &format!("“{name}”")),
        Err(problem) => sheet.tell(format!("“{name}” was not opened: {problem}.")),
    });
}

/// Listens for pastes and drops anywhere on the page.
pub fn listen(body: Part, sheet: Sheet) -> Part {
    body.on("paste", move |event| {
        let Some(paste) = event.dyn_ref::<ClipboardEvent>() else { return };
        let Some(text) = text_of_paste(paste) else { return };
        // A word belongs to the field it is pasted into; a table, or a study, to the page.
        let is_table = text.trim().contains(['\n', '\t']);
        let is_study = text.trim_start().starts_with('{') && !is_in_a_field(event);
        if event.default_prevented() {
            return;
        }
        if is_table || is_study {
            event.prevent_default();
            take_text(sheet, text, PASTE);
        } else if !is_in_a_field(event) {
            let found = shortened(text.trim());
            sheet.tell(format!(
                "The paste is no table: found “{found}”, expected rows with a temperature and a \
                 rate constant each. Nothing is changed."
            ));
        }
    })
    .on("dragover", |event| {
        event.prevent_default();
        mark_dropping(true);
    })
    .on("dragleave", |_| mark_dropping(false))
    .on("drop", move |event| {
        event.prevent_default();
        mark_dropping(false);
        let transfer = event.dyn_ref::<DragEvent>().and_then(DragEvent::data_transfer);
        let Some(transfer) = transfer else { return };
        match transfer.files().and_then(|files| files.get(0)) {
            Some(file) => take_file(sheet, file),
            None => match transfer.get_data("text/plain") {
                Ok(text) if !text.trim().is_empty() => take_text(sheet, text, "The dropped text"),
                _ => {}
            },
        }
    })
}

fn is_in_a_field(event: &Event) -> bool {
    let target = event.target().and_then(|target| target.dyn_into::<HtmlElement>().ok());
    target.is_some_and(|element| matches!(element.tag_name().as_str(), "INPUT" | "TEXTAREA"))
}

fn mark_dropping(is_dropping: bool) {
    if let Some(body) = document().and_then(|document| document.body()) {
        body.set_class_name(if is_dropping { "dropping" } else { "" });
    }
}
