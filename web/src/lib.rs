//! Kelvinclock for browsers and for JavaScript: the page, its figures and the
//! interface of other programs.

// The page's program exports nothing but what starts it.
#[cfg(any(test, not(feature = "page")))]
pub mod api;
#[cfg(feature = "page")]
pub mod figure;
#[cfg(feature = "page")]
pub mod keep;
#[cfg(feature = "page")]
pub mod page;
#[cfg(feature = "page")]
pub mod start;

/// The version of Kelvinclock.
#[wasm_bindgen::prelude::wasm_bindgen]
#[must_use]
pub fn version() -> String {
    env!("CARGO_PKG_VERSION").to_owned()
}
