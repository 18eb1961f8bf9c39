//! The place to paste into.

use wasm_bindgen::JsCast;
use web_sys::ClipboardEvent;

use super::super::arrivals;
use super::super::live::State;
use super::super::part::{Part, button, part, value_of};
use super::super::sheet::Sheet;

/// The name of the area's element.
pub const PASTE_ID: &str = "paste";

/// What a paste may look like.
const SAMPLE: &str = "T/°C\tk, 1/h\ts(k)\n50\t0.0184\t0.0009\n60\t0.0547\t0.0027\n…";

/// Where nothing is measured yet.
pub fn first(sheet: Sheet) -> Vec<Part> {
    let invitation = part("div").class("welcome").add(part("p").text(
        "Paste a table of temperatures and rate constants, or drop a file here. Headings with \
         units are understood; so are decimal commas.",
    ));
    vec![invitation, area(sheet, None)]
}

/// The area. Beside a table that is there, `wanted` says whether it is shown; undo brings the
/// table back.
pub fn area(sheet: Sheet, wanted: Option<State<bool>>) -> Part {
    let typed = State::new(String::new());
    let take = move |text: String| {
        arrivals::take_text(sheet, text, arrivals::PASTE);
        if let Some(wanted) = &wanted {
            wanted.set(false);
        }
    };
    let take = std::rc::Rc::new(take);
    let (take_paste, take_typed) = (std::rc::Rc::clone(&take), take);
    let (content, writing) = (typed.clone(), typed.clone());
    let area = part("textarea")
        .with("id", PASTE_ID)
        .with("spellcheck", "false")
        .with("autocomplete", "off")
        .with("placeholder", SAMPLE)
        .holds(move || content.get())
        .on("input", move |event| writing.set(value_of(event)))
        .on("paste", move |event| {
            let paste = event.dyn_ref::<ClipboardEvent>();
            if let Some(pasted) = paste.and_then(arrivals::text_of_paste) {
                event.prevent_default();
                take_paste(pasted);
            }
        });
    let is_typed = typed.clone();
    let read = move || {
        let (typed, take) = (typed.clone(), std::rc::Rc::clone(&take_typed));
        button("Read this table", move || take(typed.get())).class("main")
    };
    part("div")
        .class("paste")
        .add(part("label").class("unseen").with("for", PASTE_ID).text("Table of what was measured"))
        .add(area)
        .when(move || !is_typed.get().trim().is_empty(), read)
}
