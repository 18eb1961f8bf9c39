//! The JavaScript interface: a study in, findings out.

use wasm_bindgen::prelude::wasm_bindgen;

/// The version of Kelvinclock.
#[wasm_bindgen]
pub fn version() -> String {
    env!("CARGO_PKG_VERSION").to_owned()
}
