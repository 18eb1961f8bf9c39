//! The head of the page: title, undo, open, save, and where the study is kept.

use super::carry::{Carrier, file_name};
use super::file_button::file_button;
use super::keeping::Keeping;
use super::link;
use super::part::{Part, button, part, value_of};
use super::sheet::Sheet;

/// The head.
pub fn header(sheet: Sheet, keeping: &Keeping) -> Part {
    let title = part("input")
        .with("type", "text")
        .with("aria-label", "Title of the study")
        .with("placeholder", "Title of the study")
        .with("autocomplete", "off")
        .holds(move || sheet.study().title.clone())
        .is("readonly", move || sheet.is_locked())
        .on("input", move |event| {
            let typed = value_of(event);
            sheet.change("title", |study| study.title = typed);
        })
        .on("blur", move |_| sheet.seal());
    let carrier = Carrier::new(sheet, "study-text");
    let (saver, linker) = (carrier.clone(), carrier.clone());
    let save = move || {
        let study = sheet.study();
        saver.file(
            &file_name(&study.title, "kelvinclock.json"),
            "application/json",
            study.to_json(),
        );
    };
    let tools = part("nav")
        .with("aria-label", "Study")
        .add(
            button("Undo", move || sheet.undo())
                .class("changes")
                .is("disabled", move || !sheet.can().0),
        )
        .add(
            button("Redo", move || sheet.redo())
                .class("changes")
                .is("disabled", move || !sheet.can().1),
        )
        .add(part("span").class("changes").add(file_button(sheet, "Open")))
        .add(button("Save", save))
        .add(button("Copy the link", move || link::copy(sheet, &linker)));
    let said = part("span").with("role", "status").says(move || sheet.said());
    part("header")
        .class("top")
        .add(part("h1").text("Kelvinclock"))
        .add(part("span").class("title").add(title))
        .add(tools)
        .add(part("p").class("kept").add(keeping.words()).text(" ").add(said))
        .add(carrier.panel())
}
