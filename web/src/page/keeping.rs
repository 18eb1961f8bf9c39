//! Keeping the study in the browser between visits, where that is allowed.

use std::cell::RefCell;
use std::rc::Rc;
use std::time::Duration;

use kinetics_core::study::Study;

use super::example;
use super::live::{State, follow};
use super::part::{Part, button, part};
use super::sheet::Sheet;
use super::timer::later;
use crate::keep::{frame, storage};

/// The study is kept so long after the last change.
const PAUSE: Duration = Duration::from_millis(600);
/// A longer text is not kept: browsers give a few megabytes.
const MOST_BYTES: usize = 1_500_000;

/// Where the study is kept.
#[derive(Debug, Clone, PartialEq, Eq)]
enum Keep {
    /// Nothing was changed yet.
    Untouched,
    /// A study of an earlier visit is shown, kept at that time of day.
    Restored(String),
    /// Kept at that time of day.
    Kept(String),
    /// Not kept this time, and why.
    NotNow(&'static str),
    /// Not kept at all, and why.
    Never(&'static str),
}

/// Keeps the study of a sheet.
#[derive(Clone)]
pub struct Keeping {
    sheet: Sheet,
    state: State<Keep>,
}

/// The time of day and the study of an earlier visit. None in a frame: frames of one page share
/// what is kept.
fn earlier() -> Option<(String, Study)> {
    if frame::is_embedded() {
        return None;
    }
    let (time, text) = storage::read()?;
    Some((time, Study::from_json(&text).ok()?))
}

impl Keeping {
    /// Starts with the study of an earlier visit, or the example.
    pub fn begin() -> (Sheet, Self) {
        let (study, state) = match earlier() {
            Some((time, study)) => (study, Keep::Restored(time)),
            None if frame::is_embedded() => (example::study(), Keep::Never("inside a frame")),
            None if !storage::is_allowed() => {
                (example::study(), Keep::Never("the browser does not allow it"))
            }
            None => (example::study(), Keep::Untouched),
        };
        let sheet = Sheet::with(study);
        let keeping = Self { sheet, state: State::new(state) };
        keeping.follow_changes();
        (sheet, keeping)
    }

    /// Keeps each study a moment after it came about.
    fn follow_changes(&self) {
        let keeping = self.clone();
        let last = RefCell::new(self.sheet.study());
        follow(move || {
            let study = keeping.sheet.study();
            if Rc::ptr_eq(&study, &last.borrow()) {
                return;
            }
            last.replace(Rc::clone(&study));
            if matches!(keeping.state.get(), Keep::Never(_)) {
                return;
            }
            let keeping = keeping.clone();
            later(PAUSE, move || {
                // A later change is kept in its own time.
                if Rc::ptr_eq(&study, &keeping.sheet.study()) {
                    keeping.keep(&study);
                }
            });
        });
    }

    fn keep(&self, study: &Study) {
        let time = storage::time_of_day();
        self.state.set(if study.measured.text.len() > MOST_BYTES {
            Keep::NotNow("it is too large")
        } else if storage::write(&time, &study.to_json()) {
            Keep::Kept(time)
        } else {
            Keep::NotNow("the browser has no room for it")
        });
    }

    /// The sentence about it.
    pub fn words(&self) -> Part {
        let (state, restored) = (self.state.clone(), self.state.clone());
        let sheet = self.sheet;
        let sentence = move || match state.get() {
            Keep::Untouched => "Nothing leaves this page.".to_owned(),
            Keep::Restored(time) => format!("Restored from {time}."),
            Keep::Kept(time) => format!("Kept in this browser at {time}."),
            Keep::NotNow(why) | Keep::Never(why) => {
                format!("Not saved here ({why}): save the study as a file.")
            }
        };
        let start_clean = move || {
            storage::forget();
            sheet.open(example::study());
        };
        part("span").says(sentence).text(" ").when(
            move || matches!(restored.get(), Keep::Restored(_)),
            move || button("Start clean", start_clean),
        )
    }
}
