//! How the page begins.

use wasm_bindgen::prelude::wasm_bindgen;

/// Fills the page. The inline script of the single file calls this once.
#[wasm_bindgen]
pub fn start() {
    console_error_panic_hook::set_once();
    let document = web_sys::window().and_then(|window| window.document());
    if let Some(place) = document.and_then(|document| document.get_element_by_id("page")) {
        crate::page::fill(place);
    }
}
