//! How the page begins.

use wasm_bindgen::JsCast;
use wasm_bindgen::prelude::wasm_bindgen;
use web_sys::HtmlElement;

/// Fills the page. The inline script of the single file calls this once.
#[wasm_bindgen]
pub fn start() {
    console_error_panic_hook::set_once();
    let document = web_sys::window().and_then(|window| window.document());
    let place = document.and_then(|document| document.get_element_by_id("page"));
    if let Some(place) = place.and_then(|place| place.dyn_into::<HtmlElement>().ok()) {
        crate::page::fill(place);
    }
}
