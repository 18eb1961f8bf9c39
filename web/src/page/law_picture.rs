//! The law's picture, beside what was measured.

use std::rc::Rc;

use super::canvas::{self, Drawing};
use super::live::State;
use super::once::once;
use super::part::{Part, part};
use super::picture_table::picture_table;
use super::pictures;
use super::sheet::Sheet;
use super::surroundings::Surroundings;
use super::take_along::{Format, take_along};
use crate::figure::Picture;

/// The picture with its table.
pub fn figure(sheet: Sheet, surroundings: State<Surroundings>) -> Part {
    let drawing: Drawing = once(sheet, move |study, evaluation| {
        Rc::new(pictures::law_picture(study, evaluation, &sheet.curve())) as Rc<dyn Picture>
    });
    let canvas = part("canvas").class("law");
    canvas::paint(&canvas, sheet, Rc::clone(&drawing), surroundings);
    let has_rivals =
        move || sheet.evaluation().basis.as_ref().is_some_and(|basis| !basis.rivals.is_empty());
    let caption = part("figcaption")
        .is("hidden", move || !has_rivals())
        .text("Grey lines: other laws, which the data do not exclude.");
    part("figure")
        .class("picture")
        .add(canvas)
        .add(caption)
        .add(picture_table(sheet, Rc::clone(&drawing)))
        .add(take_along(sheet, drawing, Format { name: "law", slope: 5.0 / 7.0 }))
}
