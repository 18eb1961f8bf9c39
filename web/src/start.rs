//! How the page begins.

use wasm_bindgen::prelude::wasm_bindgen;

/// Fills the page. The inline script of the single file calls this once.
#[wasm_bindgen]
pub fn start() {
    let document = web_sys::window().and_then(|window| window.document());
    if let Some(page) = document.and_then(|document| document.get_element_by_id("page")) {
        page.set_text_content(Some(&format!("Kelvinclock {}", crate::api::version())));
    }
}
