//! The page, read top to bottom: Measured, Found, Asked, Record.
//!
//! One study is the truth ([`sheet`]); the core turns it into findings, and everything here
//! shows them. Nothing is computed here that a chemist would read.

// What all parts share.
mod live;
mod once;
mod part;
mod timer;

// The state.
mod example;
mod history;
mod keeping;
mod reading;
mod sheet;

// Small parts.
mod amount;
mod arrivals;
mod blank;
mod canvas;
mod carry;
mod csv;
mod file_button;
mod link;
mod menu;
mod picture_table;
mod pictures;
mod surroundings;
mod take_along;

// The sections.
mod asked;
mod choices;
mod found;
mod header;
mod law_picture;
mod measured;
mod record;

use keeping::Keeping;
use kinetics_core::study::Study;
use part::{Part, document, part};
use sheet::Sheet;
use timer::after;
use wasm_bindgen::JsCast;
use web_sys::{Element, Event, HtmlElement, KeyboardEvent};

use crate::keep::fragment::Fragment;
use crate::keep::frame;

/// Fills an element with the page, for as long as the document lives. A study in the page's
/// address is unpacked first.
pub fn fill(place: Element) {
    let fragment = Fragment::now();
    match fragment.packed.clone() {
        Some(packed) => {
            after(link::study(packed), move |study| build(place, &fragment, Some(study)))
        }
        None => build(place, &fragment, None),
    }
}

fn build(place: Element, fragment: &Fragment, linked: Option<Result<Study, String>>) {
    let (linked, complaint) = match linked {
        Some(Ok(study)) => (Some(study), None),
        Some(Err(complaint)) => (None, Some(complaint)),
        None => (None, None),
    };
    let (sheet, keeping) = Keeping::begin(linked);
    sheet.appear(fragment.view, fragment.is_locked);
    if let Some(complaint) = complaint {
        sheet.tell(format!("{complaint} The page opened as usual."));
    }
    link::listen(sheet, &keeping);
    let surroundings = surroundings::watch();
    if let Some(body) = document().and_then(|document| document.body()) {
        let body = arrivals::listen(Part::of(body.into()), sheet);
        drop(body.on("keydown", move |event| undo_by_key(sheet, event)));
    }
    let busy = move || sheet.is_working().then(|| "true".to_owned());
    // What is locked can be read and taken along, not changed.
    let changeable = part("fieldset")
        .class("slot")
        .is("disabled", move || sheet.is_locked())
        .add(measured::section(sheet, surroundings.clone()))
        .add(found::section(sheet))
        .add(asked::section(sheet, surroundings));
    let main = part("main")
        .follows("aria-busy", busy)
        .follows("class", move || sheet.is_working().then(|| "working".to_owned()))
        .add(changeable)
        .add(record::section(sheet));
    frame::report_height(&place);
    let page = Part::of(place)
        .follows("data-view", move || Some(sheet.view().code().to_owned()))
        .is("data-locked", move || sheet.is_locked());
    drop(page.add(header::header(sheet, &keeping)).add(main).add(footer()));
}

fn footer() -> Part {
    let version = crate::version();
    part("footer").class("foot").add(part("p").text(&format!(
        "Kelvinclock {version}. It computes in this page: no server, no network, nothing is \
             sent anywhere."
    )))
}

/// Undo and redo by keys, outside of fields, which have their own.
fn undo_by_key(sheet: Sheet, event: &Event) {
    let Some(key) = event.dyn_ref::<KeyboardEvent>() else { return };
    let is_command = (key.ctrl_key() || key.meta_key()) && !key.alt_key();
    let target = event.target().and_then(|target| target.dyn_into::<HtmlElement>().ok());
    let is_field =
        target.is_some_and(|element| matches!(element.tag_name().as_str(), "INPUT" | "TEXTAREA"));
    if !is_command || is_field {
        return;
    }
    match (key.key().to_ascii_lowercase().as_str(), key.shift_key()) {
        ("z", false) => sheet.undo(),
        ("z", true) | ("y", _) => sheet.redo(),
        _ => return,
    }
    event.prevent_default();
}
