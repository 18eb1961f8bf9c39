//! Drives the built page in Chromium, as a file on disk and within frames.
//!
//! `KELVINCLOCK_PAGE` names the page; without it, it is the committed one.
//! `cargo pack test` runs everything with both the committed page and one
//! built just now. To run it alone:
//!
//! ```text
//! cargo pack build
//! cargo test -p checks --test browser
//! ```
//!
//! A new file of steps is a new module below; each of its tests calls
//! [`page::with_page`] and drives the [`page::Page`] that it is given.

#![allow(clippy::unwrap_used, clippy::panic)]

mod driver;
mod page;

// The steps, by subject.
mod first_hour;
mod frames;
mod handling;
mod hostile;
mod links;
mod record;
mod starting;
mod worksheet;
