//! Working something out once for each state of the sheet, however many parts look at it.

use std::cell::RefCell;
use std::rc::Rc;

use kinetics_core::study::{Evaluation, Study};

use super::sheet::Sheet;

/// A value, and what it was worked out from.
type Known<T> = (Rc<Study>, Rc<Evaluation>, T);

/// A value that follows the study and its findings, worked out anew only when one of them is.
pub fn once<T: Clone + 'static>(
    sheet: Sheet,
    make: impl Fn(&Study, &Evaluation) -> T + 'static,
) -> Rc<dyn Fn() -> T> {
    let known: RefCell<Option<Known<T>>> = RefCell::new(None);
    Rc::new(move || {
        let (study, evaluation) = (sheet.study(), sheet.evaluation());
        if let Some((of, with, value)) = known.borrow().as_ref()
            && Rc::ptr_eq(of, &study)
            && Rc::ptr_eq(with, &evaluation)
        {
            return value.clone();
        }
        let value = make(&study, &evaluation);
        known.replace(Some((study, evaluation, value.clone())));
        value
    })
}
