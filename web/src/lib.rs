//! Kelvinclock for browsers and for JavaScript: the page, its figures and the
//! interface of other programs.

pub mod api;
#[cfg(feature = "page")]
pub mod figure;
#[cfg(feature = "page")]
pub mod keep;
#[cfg(feature = "page")]
pub mod page;
#[cfg(feature = "page")]
pub mod start;
