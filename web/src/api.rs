//! The JavaScript interface: a study in, findings out; and what a text is
//! taken to mean.

use wasm_bindgen::prelude::wasm_bindgen;

#[wasm_bindgen(typescript_custom_section)]
const TYPES: &str = include_str!("api.d.ts");

/// The version of Kelvinclock.
#[wasm_bindgen]
#[must_use]
pub fn version() -> String {
    env!("CARGO_PKG_VERSION").to_owned()
}
