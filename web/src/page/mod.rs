//! The page, read top to bottom: Measured, Found, Asked, Record.
//!
//! One study is the truth ([`sheet`]); the core turns it into findings, and everything here
//! shows them. Nothing is computed here that a chemist would read.

mod arrivals;
mod asked;
mod blank;
mod canvas;
mod example;
mod file_button;
mod found;
mod header;
mod history;
mod keeping;
mod law_picture;
mod measured;
mod menu;
mod picture_table;
mod pictures;
mod reading;
mod record;
mod sheet;
mod surroundings;

use keeping::Keeping;
use leptos::mount::mount_to;
use leptos::prelude::*;
use leptos::web_sys::{HtmlElement, KeyboardEvent};
use sheet::Sheet;
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;

use crate::keep::frame;

/// Fills an element with the page, for as long as the document lives.
pub fn fill(place: HtmlElement) {
    frame::report_height(&place);
    mount_to(place, page).forget();
}

fn page() -> impl IntoView {
    let (sheet, keeping) = Keeping::begin();
    let surroundings = surroundings::watch();
    arrivals::listen(sheet);
    listen_for_keys(sheet);
    view! {
        {header::header(sheet, keeping)}
        <main>
            {measured::section(sheet, surroundings)}
            {found::section(sheet)}
            {asked::section(sheet, surroundings)}
            {record::section(sheet)}
        </main>
        <footer class="foot">
            <p>
                "Results are estimates for screening. Decisions that can hurt someone rest on \
                 calorimetry, on local codes and on licensed practice."
            </p>
            <p>
                "Kelvinclock " {crate::api::version()}
                ". It computes in this page: no server, no network, nothing is sent anywhere."
            </p>
        </footer>
    }
}

/// Undo and redo by keys, outside of fields, which have their own.
fn listen_for_keys(sheet: Sheet) {
    let closure = Closure::<dyn Fn(KeyboardEvent)>::new(move |event: KeyboardEvent| {
        let is_command = (event.ctrl_key() || event.meta_key()) && !event.alt_key();
        let target = event.target().and_then(|t| t.dyn_into::<HtmlElement>().ok());
        let is_field = target
            .is_some_and(|element| matches!(element.tag_name().as_str(), "INPUT" | "TEXTAREA"));
        if !is_command || is_field {
            return;
        }
        match (event.key().to_lowercase().as_str(), event.shift_key()) {
            ("z", false) => sheet.undo(),
            ("z", true) | ("y", _) => sheet.redo(),
            _ => return,
        }
        event.prevent_default();
    });
    // Refused only where there are no events at all; the buttons stay.
    let _ =
        document().add_event_listener_with_callback("keydown", closure.as_ref().unchecked_ref());
    closure.forget();
}
