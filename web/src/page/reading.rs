//! Reading a long text in slices, so that the page stays alive.

use std::rc::Rc;
use std::sync::atomic::{AtomicU64, Ordering};

use kinetics_core::study::{Prepared, Study, hints};
use kinetics_core::table::Reader;

/// A text up to so many bytes is read at once.
const SHORT_BYTES: usize = 40_000;
/// Rows in a slice: a few hundredths of a second on a slow machine.
const SLICE_ROWS: usize = 2_000;

static NUMBERS: AtomicU64 = AtomicU64::new(0);

/// A study whose text is being read.
pub struct Reading {
    /// The study.
    pub study: Rc<Study>,
    /// Whether it is a new step of the history, and not one that was walked to.
    pub is_new_step: bool,
    /// Tells it from others.
    pub number: u64,
    reader: Reader<'static>,
}

impl Reading {
    /// Begins.
    pub fn new(study: Rc<Study>, is_new_step: bool) -> Self {
        let reader = Reader::new(study.measured.text.clone(), hints(&study));
        let number = NUMBERS.fetch_add(1, Ordering::Relaxed);
        Self { study, is_new_step, number, reader }
    }

    /// Whether it can be read at once.
    pub fn is_short(&self) -> bool {
        self.study.measured.text.len() <= SHORT_BYTES
    }

    /// Reads on; how far it is, from 0 to 1, or none at the end.
    pub fn slice(&mut self) -> Option<f64> {
        self.reader.read_rows(SLICE_ROWS).then(|| self.reader.progress())
    }

    /// Reads what is left.
    pub fn finish(self) -> (Rc<Study>, Prepared) {
        (self.study, Prepared { table: self.reader.finish() })
    }
}
