//! Keeping the study in the browser between visits, where that is allowed.

use std::time::Duration;

use kinetics_core::study::Study;
use leptos::prelude::*;

use super::example;
use super::sheet::Sheet;
use crate::keep::{frame, storage};

/// The study is kept so long after the last change.
const PAUSE: Duration = Duration::from_millis(600);
/// A longer text is not kept: browsers give a few megabytes.
const MOST_BYTES: usize = 1_500_000;

/// Where the study is kept.
#[derive(Debug, Clone, PartialEq, Eq)]
enum State {
    /// Nothing was changed yet.
    Untouched,
    /// A study of an earlier visit is shown, kept at that time of day.
    Restored(String),
    /// Kept at that time of day.
    Kept(String),
    /// Not kept, and why.
    NotKept(&'static str),
}

/// Keeps the study of a sheet.
#[derive(Clone, Copy)]
pub struct Keeping {
    sheet: Sheet,
    state: RwSignal<State>,
}

/// What was kept, and when.
pub struct Kept {
    study: Study,
    time: String,
}

/// The study of an earlier visit. None in a frame: frames of one page share what is kept.
pub fn earlier() -> Option<Kept> {
    if frame::is_embedded() {
        return None;
    }
    let (time, text) = storage::read()?;
    Some(Kept { study: Study::from_json(&text).ok()?, time })
}

impl Keeping {
    /// Starts with the study of an earlier visit, or the example.
    pub fn begin() -> (Sheet, Self) {
        let (study, state) = match earlier() {
            Some(kept) => (kept.study, State::Restored(kept.time)),
            None if frame::is_embedded() => (example::study(), State::NotKept("inside a frame")),
            None if !storage::is_allowed() => {
                (example::study(), State::NotKept("the browser does not allow it"))
            }
            None => (example::study(), State::Untouched),
        };
        let sheet = Sheet::with(study);
        let keeping = Self { sheet, state: RwSignal::new(state) };
        keeping.follow();
        (sheet, keeping)
    }

    /// Keeps each study a moment after it came about.
    fn follow(self) {
        let latest = StoredValue::new(0_u64);
        Effect::new(move |before: Option<()>| {
            self.sheet.study(|_| ());
            let is_kept_here = self.state.with_untracked(|state| {
                !matches!(state, State::NotKept("inside a frame" | "the browser does not allow it"))
            });
            if before.is_none() || !is_kept_here {
                return;
            }
            let number = latest.get_value() + 1;
            latest.set_value(number);
            set_timeout(
                move || {
                    if latest.get_value() == number {
                        self.keep()
                    }
                },
                PAUSE,
            );
        });
    }

    fn keep(self) {
        let text = self
            .sheet
            .study_now(|study| (study.measured.text.len() <= MOST_BYTES).then(|| study.to_json()));
        let time = storage::time_of_day();
        self.state.set(match text {
            None => State::NotKept("it is too large"),
            Some(text) if storage::write(&time, &text) => State::Kept(time),
            Some(_) => State::NotKept("the browser has no room for it"),
        });
    }

    /// The sentence about it.
    pub fn words(self) -> AnyView {
        let sheet = self.sheet;
        let state = self.state;
        let start_clean = move |_| {
            storage::forget();
            sheet.open(example::study());
        };
        let sentence = move || match state.get() {
            State::Untouched => "Nothing leaves this page.".to_owned(),
            State::Restored(time) => format!("Restored from {time}."),
            State::Kept(time) => format!("Kept in this browser at {time}."),
            State::NotKept(why) => {
                format!("Not saved here ({why}): save the study as a file.")
            }
        };
        view! {
            {sentence}
            <Show when=move || matches!(state.get(), State::Restored(_))>
                " "
                <button type="button" on:click=start_clean>"Start clean"</button>
            </Show>
        }
        .into_any()
    }
}
