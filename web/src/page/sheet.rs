//! The state of the page: one study is the truth. Its text is read into a table, and the core
//! turns both into findings; the page shows them.

use std::cell::{Cell, RefCell};
use std::rc::Rc;
use std::time::Duration;

use kinetics_core::study::{Evaluation, Prepared, Study, evaluate_prepared, hints};

use super::example;
use super::history::History;
use super::live::changed;
use super::pictures::{Curve, curve, temperature_range};
use super::reading::Reading;
use super::timer::later;
use crate::figure::temperature_colour::TemperatureRange;
use crate::keep::fragment::View;

/// A longer table is evaluated after a pause, so that typing on is not held up.
const MOST_ROWS_AT_ONCE: usize = 2_000;
const PAUSE: Duration = Duration::from_millis(250);

/// What is on the page, and the ways to change it.
#[derive(Clone, Copy)]
pub struct Sheet(&'static Content);

struct Content {
    shown: RefCell<Shown>,
    history: RefCell<History>,
    /// A text that is being read: nothing on the page changes before its end.
    reading: RefCell<Option<Reading>>,
    progress: Cell<Option<f64>>,
    /// Counts studies shown; a late evaluation of an earlier one is dropped.
    studies: Cell<u64>,
    is_working: Cell<bool>,
    said: RefCell<String>,
    /// What is to be seen, and whether nothing can be changed.
    appearance: Cell<(View, bool)>,
}

/// A study with the table of exactly its text, and what follows from them.
struct Shown {
    study: Rc<Study>,
    prepared: Rc<Prepared>,
    evaluation: Rc<Evaluation>,
    temperatures: TemperatureRange,
    curve: Curve,
}

impl Sheet {
    /// A page with a study on it. It lives as long as the document.
    pub fn with(study: Study) -> Self {
        let prepared = kinetics_core::study::prepare(&study);
        let evaluation = evaluate_prepared(&study, &prepared);
        let shown = Shown {
            temperatures: temperature_range(&evaluation),
            curve: curve(&study, &evaluation),
            study: Rc::new(study),
            prepared: Rc::new(prepared),
            evaluation: Rc::new(evaluation),
        };
        Self(Box::leak(Box::new(Content {
            shown: RefCell::new(shown),
            history: RefCell::default(),
            reading: RefCell::default(),
            progress: Cell::default(),
            studies: Cell::default(),
            is_working: Cell::default(),
            said: RefCell::default(),
            appearance: Cell::default(),
        })))
    }

    /// The study.
    pub fn study(self) -> Rc<Study> {
        Rc::clone(&self.0.shown.borrow().study)
    }

    /// Its table.
    pub fn prepared(self) -> Rc<Prepared> {
        Rc::clone(&self.0.shown.borrow().prepared)
    }

    /// The findings and what they were made from.
    pub fn evaluation(self) -> Rc<Evaluation> {
        Rc::clone(&self.0.shown.borrow().evaluation)
    }

    /// The temperatures between which colours run.
    pub fn temperatures(self) -> TemperatureRange {
        self.0.shown.borrow().temperatures
    }

    /// The law over all temperatures that pictures show.
    pub fn curve(self) -> Curve {
        Curve::clone(&self.0.shown.borrow().curve)
    }

    /// Whether the findings are those of an earlier study, until a long table is evaluated.
    pub fn is_working(self) -> bool {
        self.0.is_working.get()
    }

    /// How far reading is, from 0 to 1, while a long text is read.
    pub fn progress(self) -> Option<f64> {
        self.0.progress.get()
    }

    /// The latest thing to tell.
    pub fn said(self) -> String {
        self.0.said.borrow().clone()
    }

    /// Whether something can be undone, and redone.
    pub fn can(self) -> (bool, bool) {
        self.0.history.borrow().can()
    }

    /// The text of a cell, to the letter.
    pub fn cell(self, row: usize, column: usize) -> String {
        let (study, prepared) = (self.study(), self.prepared());
        let cell = prepared.table.rows.get(row).and_then(|row| row.cells.get(column));
        let text = cell.and_then(|cell| study.measured.text.get(cell.span.clone()));
        text.unwrap_or_default().to_owned()
    }

    /// The decimal sign in which quantities are typed and shown.
    pub fn decimal(self) -> char {
        self.study().display.decimal.map_or('.', |decimal| decimal.mark())
    }

    /// What is to be seen.
    pub fn view(self) -> View {
        self.0.appearance.get().0
    }

    /// Whether the reader may only look.
    pub fn is_locked(self) -> bool {
        self.0.appearance.get().1
    }

    /// Shows this much, to be changed or not.
    pub fn appear(self, view: View, is_locked: bool) {
        self.0.appearance.set((view, is_locked));
        changed();
    }

    /// Whether the study is the invented example.
    pub fn shows_example(self) -> bool {
        example::is_shown(&self.study())
    }

    /// Says something in the status line.
    pub fn tell(self, sentence: impl Into<String>) {
        self.0.said.replace(sentence.into());
        changed();
    }

    /// Changes the study. Changes of the same `step`, such as letters typed into one place, are
    /// undone at once; an empty `step` stands alone.
    pub fn change(self, step: &str, edit: impl FnOnce(&mut Study)) {
        if self.is_locked() {
            return;
        }
        let before = self.latest();
        let mut after = Study::clone(&before);
        edit(&mut after);
        if after != *before {
            self.0.history.borrow_mut().record(before, step);
            self.adopt(Rc::new(after), true);
        }
    }

    /// Ends a step: what is typed next is undone by itself.
    pub fn seal(self) {
        self.0.history.borrow_mut().seal();
    }

    /// Puts a study in the place of all that is there; undo brings that back.
    pub fn open(self, study: Study) {
        let before = self.latest();
        self.0.history.borrow_mut().record(before, "");
        self.adopt(Rc::new(study), true);
    }

    /// Takes the last change back.
    pub fn undo(self) {
        if self.is_locked() {
            return;
        }
        let now = self.latest();
        let before = self.0.history.borrow_mut().undo(now);
        if let Some(study) = before {
            self.adopt(study, false);
        }
    }

    /// Makes the last undone change again.
    pub fn redo(self) {
        if self.is_locked() {
            return;
        }
        let now = self.latest();
        let after = self.0.history.borrow_mut().redo(now);
        if let Some(study) = after {
            self.adopt(study, false);
        }
    }

    /// Gives up reading; what was there before stays.
    pub fn stop_reading(self) {
        let stopped = self.0.reading.take();
        self.0.progress.set(None);
        if stopped.is_some_and(|reading| reading.is_new_step) {
            self.0.history.borrow_mut().forget_last();
        }
        self.tell("Reading was stopped; what was there before is back.");
    }

    /// The study as it will be once all is read.
    fn latest(self) -> Rc<Study> {
        let reading = self.0.reading.borrow();
        reading.as_ref().map_or_else(|| self.study(), |reading| Rc::clone(&reading.study))
    }

    /// Shows a study, after its text is read where that is a new one.
    fn adopt(self, study: Rc<Study>, is_new_step: bool) {
        changed();
        self.0.reading.replace(None);
        self.0.progress.set(None);
        let shown = self.study();
        if shown.measured.text == study.measured.text && hints(&shown) == hints(&study) {
            let prepared = self.prepared();
            self.show(study, prepared);
            return;
        }
        let reading = Reading::new(study, is_new_step);
        if reading.is_short() {
            let (study, prepared) = reading.finish();
            self.show(study, Rc::new(prepared));
            return;
        }
        let number = reading.number;
        self.0.progress.set(Some(0.0));
        self.0.reading.replace(Some(reading));
        later(Duration::ZERO, move || self.read_on(number));
    }

    /// Reads one slice, and shows the study after the last. A later change has its own slices.
    fn read_on(self, number: u64) {
        let Some(mut reading) = self.0.reading.take() else { return };
        if reading.number != number {
            self.0.reading.replace(Some(reading));
            return;
        }
        changed();
        let progress = reading.slice();
        self.0.progress.set(progress);
        if progress.is_some() {
            self.0.reading.replace(Some(reading));
            later(Duration::ZERO, move || self.read_on(number));
        } else {
            let (study, prepared) = reading.finish();
            self.show(study, Rc::new(prepared));
        }
    }

    fn show(self, study: Rc<Study>, prepared: Rc<Prepared>) {
        let is_long = prepared.table.rows.len() > MOST_ROWS_AT_ONCE;
        let number = self.0.studies.get() + 1;
        self.0.studies.set(number);
        self.0.is_working.set(is_long);
        {
            let mut shown = self.0.shown.borrow_mut();
            shown.study = study;
            shown.prepared = prepared;
        }
        if is_long {
            later(PAUSE, move || self.evaluate(number));
        } else {
            self.evaluate(number);
        }
    }

    /// Works out the findings, unless a later change will.
    fn evaluate(self, number: u64) {
        if self.0.studies.get() == number {
            let evaluation = evaluate_prepared(&self.study(), &self.prepared());
            {
                let mut shown = self.0.shown.borrow_mut();
                shown.temperatures = temperature_range(&evaluation);
                shown.curve = curve(&shown.study, &evaluation);
                shown.evaluation = Rc::new(evaluation);
            }
            self.0.is_working.set(false);
            changed();
        }
    }
}
