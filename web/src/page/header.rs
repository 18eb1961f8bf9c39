//! The head of the page: title, undo, open, save, and where the study is kept.

use web_sys::HtmlTextAreaElement;

use super::file_button::file_button;
use super::keeping::Keeping;
use super::live::State;
use super::part::{Part, button, part, value_of};
use super::sheet::Sheet;
use super::timer::after;
use crate::keep::{clipboard, files, frame};

/// The head.
pub fn header(sheet: Sheet, keeping: &Keeping) -> Part {
    let title = part("input")
        .with("type", "text")
        .with("aria-label", "Title of the study")
        .with("placeholder", "Title of the study")
        .with("autocomplete", "off")
        .holds(move || sheet.study().title.clone())
        .on("input", move |event| {
            let typed = value_of(event);
            sheet.change("title", |study| study.title = typed);
        })
        .on("blur", move |_| sheet.seal());
    let shows_text = State::new(false);
    let showing = shows_text.clone();
    let save = move || {
        let study = sheet.study();
        files::download(&file_name(&study.title), &study.to_json());
        // A sandboxed frame drops downloads without a word: the text is the way out.
        showing.set(frame::is_embedded());
    };
    let tools = part("nav")
        .with("aria-label", "Study")
        .add(button("Undo", move || sheet.undo()).is("disabled", move || !sheet.can().0))
        .add(button("Redo", move || sheet.redo()).is("disabled", move || !sheet.can().1))
        .add(file_button(sheet, "Open"))
        .add(button("Save", save));
    let said = part("span").with("role", "status").says(move || sheet.said());
    let is_shown = shows_text.clone();
    part("header")
        .class("top")
        .add(part("h1").text("Kelvinclock"))
        .add(part("span").class("title").add(title))
        .add(tools)
        .add(part("p").class("kept").add(keeping.words()).text(" ").add(said))
        .when(move || is_shown.get(), move || study_text(sheet, &shows_text))
}

/// The study as text, to be carried away by hand.
fn study_text(sheet: Sheet, is_shown: &State<bool>) -> Part {
    let area = part("textarea")
        .with("id", "study-text")
        .with("readonly", "")
        .holds(move || sheet.study().to_json());
    let element = area.element::<HtmlTextAreaElement>();
    let copy = move || {
        let element = element.clone();
        let whole = sheet.study().to_json();
        after(async move { clipboard::copy(&whole).await }, move |is_copied| {
            if is_copied {
                sheet.tell("The study is copied. Paste it into this page to open it again.");
            } else if let Some(area) = element {
                area.select();
                sheet.tell(
                    "Copying by a button is forbidden here: the text is selected, press Ctrl+C.",
                );
            }
        });
    };
    let is_shown = is_shown.clone();
    part("div")
        .class("paste")
        .add(part("label").with("for", "study-text").class("quiet").text(
            "If no file appeared, the page around this frame forbids downloads. This is the study; \
             pasted into this page it opens again.",
        ))
        .add(area)
        .add(
            part("div")
                .class("actions")
                .add(button("Copy the study", copy))
                .add(button("Close", move || is_shown.set(false))),
        )
}

/// "glaze-hardener-batch-7.kelvinclock.json".
fn file_name(title: &str) -> String {
    let words: Vec<String> = title
        .split(|letter: char| !letter.is_alphanumeric())
        .filter(|word| !word.is_empty())
        .map(str::to_lowercase)
        .take(8)
        .collect();
    let name: String = words.join("-").chars().take(60).collect();
    let name = if name.is_empty() { "study".to_owned() } else { name };
    format!("{name}.kelvinclock.json")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_file_is_named_after_its_study() {
        assert_eq!(
            file_name("Glaze hardener, batch 7 (invented example)"),
            "glaze-hardener-batch-7-invented-example.kelvinclock.json"
        );
        assert_eq!(file_name("../\u{202e}<b>"), "b.kelvinclock.json");
        assert_eq!(file_name("  "), "study.kelvinclock.json");
    }
}
