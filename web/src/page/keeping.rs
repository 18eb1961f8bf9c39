//! Keeping the study in the browser between visits, where that is allowed; one that came by a
//! link stays in the page's address instead.

use std::cell::{Cell, RefCell};
use std::rc::Rc;
use std::time::Duration;

use kinetics_core::study::Study;

use super::example;
use super::link::MOST_LETTERS;
use super::live::{State, follow};
use super::part::{Part, button, on_window, part};
use super::sheet::Sheet;
use super::timer::{after, later};
use crate::keep::fragment::{self, Fragment};
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
    /// In the page's address.
    InAddress,
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
    /// Whether the study came by a link: then what is kept in the browser is another one, and
    /// stays as it is.
    is_linked: Rc<Cell<bool>>,
    /// The study that was kept last.
    last: Rc<RefCell<Rc<Study>>>,
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
    /// Starts with the study of a link, that of an earlier visit, or the example.
    pub fn begin(linked: Option<Study>) -> (Sheet, Self) {
        let is_linked = linked.is_some();
        let (study, state) = match linked.map(|study| (String::new(), study)).or_else(earlier) {
            Some((_, study)) if frame::is_embedded() => (study, Keep::Never("inside a frame")),
            Some((_, study)) if is_linked => (study, Keep::InAddress),
            Some((time, study)) => (study, Keep::Restored(time)),
            None if frame::is_embedded() => (example::study(), Keep::Never("inside a frame")),
            None if !storage::is_allowed() => {
                (example::study(), Keep::Never("the browser does not allow it"))
            }
            None => (example::study(), Keep::Untouched),
        };
        let sheet = Sheet::with(study);
        let keeping = Self {
            sheet,
            state: State::new(state),
            is_linked: Rc::new(Cell::new(is_linked)),
            last: Rc::new(RefCell::new(sheet.study())),
        };
        keeping.follow_changes();
        (sheet, keeping)
    }

    /// Keeps each study a moment after it came about.
    fn follow_changes(&self) {
        let leaving = self.clone();
        on_window("pagehide", move || leaving.keep());
        let keeping = self.clone();
        let seen = RefCell::new(self.sheet.study());
        follow(move || {
            let study = keeping.sheet.study();
            if Rc::ptr_eq(&study, &seen.borrow()) {
                return;
            }
            seen.replace(Rc::clone(&study));
            let keeping = keeping.clone();
            later(PAUSE, move || {
                // A later change is kept in its own time.
                if Rc::ptr_eq(&study, &keeping.sheet.study()) {
                    keeping.keep();
                }
            });
        });
    }

    /// From now on the study is that of a link.
    pub fn turn_to_address(&self) {
        self.keep();
        self.is_linked.set(true);
        if !frame::is_embedded() {
            self.state.set(Keep::InAddress);
        }
    }

    /// Keeps the study as it is, unless it is kept already.
    fn keep(&self) {
        let study = self.sheet.study();
        let is_kept = Rc::ptr_eq(&study, &self.last.borrow());
        let is_never = matches!(self.state.get(), Keep::Never(_));
        if is_kept || is_never && !self.is_linked.get() || frame::is_embedded() {
            return;
        }
        self.last.replace(Rc::clone(&study));
        if self.is_linked.get() {
            self.keep_in_address(study);
            return;
        }
        let time = storage::time_of_day();
        self.state.set(if study.measured.text.len() > MOST_BYTES {
            Keep::NotNow("it is too large")
        } else if storage::write(&time, &study.to_json()) {
            Keep::Kept(time)
        } else {
            Keep::NotNow("the browser has no room for it")
        });
    }

    fn keep_in_address(&self, study: Rc<Study>) {
        let keeping = self.clone();
        after(fragment::pack(study.to_value().to_string()), move |packed| {
            // A later change is packed in its own time.
            if !Rc::ptr_eq(&study, &keeping.sheet.study()) {
                return;
            }
            let is_short = |packed: &String| packed.len() <= MOST_LETTERS;
            keeping.state.set(match packed.filter(is_short) {
                None => Keep::NotNow("it is too long for the page’s address"),
                Some(packed) => {
                    if (Fragment { packed: Some(packed), ..Fragment::now() }).put() {
                        Keep::InAddress
                    } else {
                        Keep::NotNow("the browser lets its address be")
                    }
                }
            });
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
            Keep::InAddress => "Opened from a link; changes stay in the page’s address.".to_owned(),
            Keep::NotNow(why) | Keep::Never(why) => {
                format!("Not saved here ({why}): save the study as a file, or copy the link.")
            }
        };
        let start_clean = move || {
            storage::forget();
            sheet.open(example::study());
        };
        part("span").class("changes").says(sentence).text(" ").when(
            move || matches!(restored.get(), Keep::Restored(_)),
            move || button("Start clean", start_clean),
        )
    }
}
