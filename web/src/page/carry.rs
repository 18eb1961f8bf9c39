//! Carrying things away: as a file and by the clipboard, and by hand where a frame forbids both.

use web_sys::HtmlTextAreaElement;

use super::live::State;
use super::part::{Part, button, part};
use super::sheet::Sheet;
use super::timer::after;
use crate::keep::clipboard::{self, Copied};
use crate::keep::{files, frame};

/// A place that things are carried away from. What a browser may have dropped without a word is
/// shown there.
#[derive(Clone)]
pub struct Carrier {
    sheet: Sheet,
    id: &'static str,
    shown: State<Option<Shown>>,
}

/// What is to be carried away by hand.
#[derive(Clone, PartialEq)]
struct Shown {
    hint: &'static str,
    content: Content,
}

#[derive(Clone, PartialEq)]
enum Content {
    Text(String),
    /// The address of a picture, and what it shows.
    Picture(String, String),
}

const DROPPED: &str = "If no file appeared, the page around this frame forbids downloads.";

impl Carrier {
    /// One whose field has this name.
    pub fn new(sheet: Sheet, id: &'static str) -> Self {
        Self { sheet, id, shown: State::default() }
    }

    /// Offers a text as a file.
    pub fn file(&self, name: &str, kind: &str, text: String) {
        files::download(name, kind, &text);
        if frame::is_embedded() {
            self.shown.set(Some(Shown { hint: DROPPED, content: Content::Text(text) }));
        }
    }

    /// Offers a picture as a file, given as an address that holds it, with what it shows.
    pub fn picture(&self, name: &str, address: String, description: String) {
        files::follow(name, &address);
        if frame::is_embedded() {
            let content = Content::Picture(address, description);
            self.shown.set(Some(Shown { hint: DROPPED, content }));
        }
    }

    /// Copies a text, with the same as HTML where there is such, and says so.
    pub fn copy(&self, text: String, html: Option<String>, said: String) {
        let carrier = self.clone();
        let copied = Copied { text, html };
        let wait = async move { (clipboard::copy(&copied).await, copied) };
        after(wait, move |(is_copied, copied)| {
            if is_copied {
                carrier.sheet.tell(said);
                return;
            }
            const HINT: &str = "Copying by a button is forbidden here: press Ctrl+C.";
            let content = Content::Text(copied.text);
            carrier.shown.set(Some(Shown { hint: HINT, content }));
            carrier.sheet.tell(HINT);
        });
    }

    /// Where what may have been dropped is shown.
    pub fn panel(&self) -> Part {
        let (carrier, shown) = (self.clone(), self.shown.clone());
        let content = move |shown: &Option<Shown>| match shown {
            Some(shown) => vec![carrier.by_hand(shown)],
            None => Vec::new(),
        };
        part("div").class("slot").filled(move || shown.get(), content)
    }

    fn by_hand(&self, shown: &Shown) -> Part {
        let shut = self.shown.clone();
        let close = button("Close", move || shut.set(None));
        let actions = part("div").class("actions");
        // Pictures are no fields: they bear their own words.
        let label = match shown.content {
            Content::Text(_) => part("label").with("for", self.id),
            Content::Picture(..) => part("p"),
        };
        let label = label.class("quiet").text(shown.hint);
        let (content, actions) = match &shown.content {
            Content::Text(text) => {
                let whole = text.clone();
                let area = part("textarea").with("id", self.id).with("readonly", "");
                let area = area.holds(move || whole.clone());
                let (carrier, text) = (self.clone(), text.clone());
                let copy = move || carrier.copy(text.clone(), None, "It is copied.".to_owned());
                (select_on_focus(area), actions.add(button("Copy it", copy)))
            }
            Content::Picture(address, description) => {
                let image = part("img").with("src", address).with("alt", description);
                (image.with("id", self.id), actions)
            }
        };
        part("div").class("paste").add(label).add(content).add(actions.add(close))
    }
}

/// A field of which all is selected once it is entered.
fn select_on_focus(area: Part) -> Part {
    let element = area.element::<HtmlTextAreaElement>();
    area.on("focus", move |_| {
        if let Some(area) = &element {
            area.select();
        }
    })
}

/// "glaze-hardener-batch-7.kelvinclock.json", from a title and an ending.
pub fn file_name(title: &str, ending: &str) -> String {
    let words: Vec<String> = title
        .split(|letter: char| !letter.is_alphanumeric())
        .filter(|word| !word.is_empty())
        .map(str::to_ascii_lowercase)
        .take(8)
        .collect();
    let name: String = words.join("-").chars().take(60).collect();
    let name = if name.is_empty() { "study".to_owned() } else { name };
    format!("{name}.{ending}")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_file_is_named_after_its_study() {
        assert_eq!(
            file_name("Glaze hardener, batch 7 (invented example)", "kelvinclock.json"),
            "glaze-hardener-batch-7-invented-example.kelvinclock.json"
        );
        assert_eq!(file_name("../\u{202e}<b>", "kelvinclock.json"), "b.kelvinclock.json");
        assert_eq!(file_name("  ", "kelvinclock.json"), "study.kelvinclock.json");
    }
}
