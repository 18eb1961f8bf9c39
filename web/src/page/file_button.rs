//! A button that asks for a file.

use wasm_bindgen::JsCast;
use web_sys::HtmlInputElement;

use super::arrivals;
use super::part::{Part, button, part};
use super::sheet::Sheet;

/// The button, with the field behind it that nobody sees.
pub fn file_button(sheet: Sheet, words: &str) -> Part {
    let field = part("input")
        .with("type", "file")
        .with("hidden", "")
        .with("aria-label", words)
        .with("accept", ".json,.txt,.csv,.tsv,.dat,text/*,application/json")
        .on("change", move |event| {
            let input = event.target().and_then(|t| t.dyn_into::<HtmlInputElement>().ok());
            let Some(input) = input else { return };
            if let Some(file) = input.files().and_then(|files| files.get(0)) {
                arrivals::take_file(sheet, file);
            }
            // The same file can be chosen again.
            input.set_value("");
        });
    let element = field.element::<HtmlInputElement>();
    let ask = move || {
        if let Some(input) = &element {
            input.click();
        }
    };
    part("span").class("slot").add(button(words, ask)).add(field)
}
