//! What comes to the page from outside: pastes, dropped and chosen files. Each is a table or a
//! saved study.

use kinetics_core::study::Study;
use leptos::prelude::*;
use leptos::web_sys::{ClipboardEvent, DragEvent, Event, File, HtmlElement};
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;

use super::measured;
use super::sheet::Sheet;
use crate::keep::files;

/// A text from anywhere: a saved study is opened, anything else is read as a table.
pub fn take_text(sheet: Sheet, text: String) {
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
    sheet.tell("The paste is read. Undo brings back what was there before.");
}

/// The text of a paste, as spreadsheets give it.
pub fn text_of_paste(event: &ClipboardEvent) -> Option<String> {
    let text = event.clipboard_data()?.get_data("text/plain").ok()?;
    Some(text).filter(|text| !text.trim().is_empty())
}

/// Takes the first of some files.
pub fn take_file(sheet: Sheet, file: File) {
    let name = file.name();
    leptos::task::spawn_local(async move {
        match files::text_of(&file).await {
            Ok(text) => take_text(sheet, text),
            Err(problem) => sheet.tell(format!("“{name}” was not opened: {problem}.")),
        }
    });
}

/// Listens for pastes and drops anywhere on the page, as long as it lives.
pub fn listen(sheet: Sheet) {
    let document = document();
    let on = |name: &str, closure: Closure<dyn Fn(Event)>| {
        // Refused only where there are no events at all.
        let _ = document.add_event_listener_with_callback(name, closure.as_ref().unchecked_ref());
        closure.forget();
    };
    on(
        "paste",
        Closure::new(move |event: Event| {
            let Some(event) = event.dyn_ref::<ClipboardEvent>() else { return };
            let Some(text) = text_of_paste(event) else { return };
            // A word pasted into a field belongs to that field; a table belongs to the page.
            let is_table = text.trim().contains(['\n', '\t']);
            if is_table || !is_in_a_field(event) {
                event.prevent_default();
                take_text(sheet, text);
            }
        }),
    );
    on(
        "dragover",
        Closure::new(|event: Event| {
            event.prevent_default();
            mark_dropping(true);
        }),
    );
    on("dragleave", Closure::new(|_| mark_dropping(false)));
    on(
        "drop",
        Closure::new(move |event: Event| {
            event.prevent_default();
            mark_dropping(false);
            let transfer = event.dyn_ref::<DragEvent>().and_then(DragEvent::data_transfer);
            let Some(transfer) = transfer else { return };
            match transfer.files().and_then(|files| files.get(0)) {
                Some(file) => take_file(sheet, file),
                None => match transfer.get_data("text/plain") {
                    Ok(text) if !text.trim().is_empty() => take_text(sheet, text),
                    _ => {}
                },
            }
        }),
    );
}

fn is_in_a_field(event: &Event) -> bool {
    let target = event.target().and_then(|target| target.dyn_into::<HtmlElement>().ok());
    target.is_some_and(|element| matches!(element.tag_name().as_str(), "INPUT" | "TEXTAREA"))
}

fn mark_dropping(is_dropping: bool) {
    if let Some(body) = document().body() {
        // An outline less does no harm.
        let _ = body.class_list().toggle_with_force("dropping", is_dropping);
    }
}
