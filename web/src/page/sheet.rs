//! The state of the page: one study is the truth. Its text is read into a table, and the core
//! turns both into findings; the page shows them.

use std::sync::Arc;

use kinetics_core::study::{Evaluation, Prepared, Study, evaluate_prepared, hints};
use leptos::prelude::*;

use super::example;
use super::history::History;
use super::reading::{self, Reading};

/// What is on the page, and the ways to change it.
#[derive(Clone, Copy)]
pub struct Sheet {
    study: RwSignal<Study>,
    /// The table of exactly this study's text.
    prepared: RwSignal<Arc<Prepared>>,
    evaluation: RwSignal<Arc<Evaluation>>,
    history: StoredValue<History>,
    /// Whether something can be undone, and redone.
    pub can: RwSignal<(bool, bool)>,
    /// A text that is being read: nothing on the page changes before its end.
    reading: StoredValue<Option<Reading>>,
    /// How far reading is, from 0 to 1.
    pub progress: RwSignal<Option<f64>>,
    /// The latest thing to tell, for the status line.
    pub said: RwSignal<String>,
    /// Counts the studies that took the place of all that was there.
    pub opened: RwSignal<usize>,
}

impl Sheet {
    /// A page with a study on it.
    pub fn with(study: Study) -> Self {
        let prepared = Arc::new(kinetics_core::study::prepare(&study));
        let evaluation = Arc::new(evaluate_prepared(&study, &prepared));
        Self {
            study: RwSignal::new(study),
            prepared: RwSignal::new(prepared),
            evaluation: RwSignal::new(evaluation),
            history: StoredValue::new(History::default()),
            can: RwSignal::new((false, false)),
            reading: StoredValue::new(None),
            progress: RwSignal::new(None),
            said: RwSignal::new(String::new()),
            opened: RwSignal::new(0),
        }
    }

    /// A part of the study; what depends on it follows.
    pub fn study<T>(self, part: impl FnOnce(&Study) -> T) -> T {
        self.study.with(part)
    }

    /// A part of the study, without following it.
    pub fn study_now<T>(self, part: impl FnOnce(&Study) -> T) -> T {
        self.study.with_untracked(part)
    }

    /// The table.
    pub fn prepared(self) -> Arc<Prepared> {
        self.prepared.get()
    }

    /// The findings and what they were made from.
    pub fn evaluation(self) -> Arc<Evaluation> {
        self.evaluation.get()
    }

    /// The findings, without following them.
    pub fn evaluation_now(self) -> Arc<Evaluation> {
        self.evaluation.get_untracked()
    }

    /// The text of a cell, to the letter.
    pub fn cell(self, row: usize, column: usize) -> String {
        let prepared = self.prepared.get();
        let span = prepared.table.rows.get(row).and_then(|row| row.cells.get(column));
        let Some(span) = span.map(|cell| cell.span.clone()) else { return String::new() };
        self.study.with(|study| study.measured.text.get(span).unwrap_or_default().to_owned())
    }

    /// The decimal sign in which quantities are typed and shown.
    pub fn decimal(self) -> char {
        self.study.with(|study| study.display.decimal.map_or('.', |decimal| decimal.mark()))
    }

    /// Changes the study. Changes of the same `step`, such as letters typed into one place, are
    /// undone at once; an empty `step` stands alone.
    pub fn change(self, step: &str, edit: impl FnOnce(&mut Study)) {
        let before = self.latest();
        let mut after = before.clone();
        edit(&mut after);
        if after != before {
            self.history.update_value(|history| history.record(before, step));
            self.adopt(after, true);
        }
    }

    /// Ends a step: what is typed next is undone by itself.
    pub fn seal(self) {
        self.history.update_value(History::seal);
    }

    /// Puts a study in the place of all that is there; undo brings that back.
    pub fn open(self, study: Study) {
        self.history.update_value(|history| history.record(self.latest(), ""));
        self.adopt(study, true);
        self.opened.update(|count| *count += 1);
    }

    /// Takes the last change back.
    pub fn undo(self) {
        let now = self.latest();
        if let Some(study) = self.history.try_update_value(|h| h.undo(now)).flatten() {
            self.adopt(study, false);
        }
    }

    /// Makes the last undone change again.
    pub fn redo(self) {
        let now = self.latest();
        if let Some(study) = self.history.try_update_value(|h| h.redo(now)).flatten() {
            self.adopt(study, false);
        }
    }

    /// Gives up reading; what was there before stays.
    pub fn stop_reading(self) {
        let stopped = self.reading.try_update_value(Option::take).flatten();
        self.progress.set(None);
        if stopped.is_some_and(|reading| reading.is_new_step) {
            self.history.update_value(History::forget_last);
        }
        self.tell("Reading was stopped; what was there before is back.");
        self.can.set(self.history.with_value(History::can));
    }

    /// Says something in the status line.
    pub fn tell(self, sentence: impl Into<String>) {
        self.said.set(sentence.into());
    }

    /// Whether the measured text is the invented example.
    pub fn shows_example(self) -> bool {
        self.study.with(example::is_shown)
    }

    /// The study as it will be once all is read.
    fn latest(self) -> Study {
        let pending = self
            .reading
            .with_value(|reading| reading.as_ref().map(|reading| reading.study.clone()));
        pending.unwrap_or_else(|| self.study.get_untracked())
    }

    /// Shows a study, after its text is read where that is a new one.
    fn adopt(self, study: Study, is_new_step: bool) {
        self.can.set(self.history.with_value(History::can));
        let is_read = self.study.with_untracked(|shown| {
            shown.measured.text == study.measured.text && hints(shown) == hints(&study)
        });
        if is_read {
            self.reading.set_value(None);
            self.progress.set(None);
            self.show(study, self.prepared.get_untracked());
            return;
        }
        let reading = Reading::new(study, is_new_step);
        if reading.is_short() {
            self.reading.set_value(None);
            self.progress.set(None);
            let (study, prepared) = reading.finish();
            self.show(study, Arc::new(prepared));
            return;
        }
        self.progress.set(Some(0.0));
        let number = reading.number;
        self.reading.set_value(Some(reading));
        reading::later(move || self.read_on(number));
    }

    /// Reads one slice, and shows the study after the last.
    fn read_on(self, number: u64) {
        let outcome = self.reading.try_update_value(|slot| {
            // A later change has its own slices.
            let reading = slot.as_mut().filter(|reading| reading.number == number)?;
            match reading.slice() {
                Some(progress) => Some(Ok(progress)),
                None => slot.take().map(Err),
            }
        });
        match outcome.flatten() {
            None => {}
            Some(Ok(progress)) => {
                self.progress.set(Some(progress));
                reading::later(move || self.read_on(number));
            }
            Some(Err(reading)) => {
                self.progress.set(None);
                let (study, prepared) = reading.finish();
                self.show(study, Arc::new(prepared));
            }
        }
    }

    fn show(self, study: Study, prepared: Arc<Prepared>) {
        let evaluation = Arc::new(evaluate_prepared(&study, &prepared));
        self.study.set(study);
        self.prepared.set(prepared);
        self.evaluation.set(evaluation);
    }
}
