//! A quiet menu: what is chosen reads as a part of the text around it, and is as wide.

use std::rc::Rc;

use web_sys::{Event, HtmlSelectElement};

use super::live::follow;
use super::part::{Part, part};

/// One line of a menu.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Choice {
    /// What a choice of it hands over.
    pub value: String,
    /// What it reads as.
    pub text: String,
    /// The heading under which it stands; empty for none.
    pub group: &'static str,
}

impl Choice {
    /// A line under no heading.
    pub fn new(value: impl Into<String>, text: impl Into<String>) -> Self {
        Self { value: value.into(), text: text.into(), group: "" }
    }

    /// The same under a heading.
    #[must_use]
    pub fn under(self, group: &'static str) -> Self {
        Self { group, ..self }
    }
}

/// What a menu offers now, and the value of the line that is chosen.
pub type Offer = (Vec<Choice>, String);

/// A menu that shows what is chosen and hands over what the user picks.
pub fn menu(
    label: &str,
    offer: impl Fn() -> Offer + 'static,
    pick: impl Fn(&str) + 'static,
) -> Part {
    menu_boxed(label, Rc::new(offer), Box::new(pick))
}

fn menu_boxed(label: &str, offer: Rc<dyn Fn() -> Offer>, pick: Box<dyn Fn(&str)>) -> Part {
    let shown = Rc::clone(&offer);
    let choices = Rc::clone(&offer);
    let select = part("select")
        .with("aria-label", label)
        .filled(move || choices().0, |choices| lines(choices))
        .on("change", move |event| {
            if let Some(select) = select_of(event) {
                pick(&select.value());
                // What was not accepted is shown as it was, by the look that follows.
                super::live::changed();
            }
        });
    if let Some(element) = select.element::<HtmlSelectElement>() {
        follow(move || {
            let (_, chosen) = offer();
            if element.value() != chosen {
                element.set_value(&chosen);
            }
        });
    }
    let words = move || {
        let (choices, chosen) = shown();
        choices.into_iter().find(|choice| choice.value == chosen).map(|choice| choice.text)
    };
    part("span").class("menu").follows("data-text", words).add(select)
}

/// The menu that an event comes from.
pub fn select_of(event: &Event) -> Option<HtmlSelectElement> {
    use wasm_bindgen::JsCast;
    event.target().and_then(|target| target.dyn_into().ok())
}

/// The lines, those of a heading together under it.
pub fn lines(choices: &[Choice]) -> Vec<Part> {
    let mut lines = Vec::new();
    for group in choices.chunk_by(|a, b| a.group == b.group) {
        let options = group
            .iter()
            .map(|choice| part("option").with("value", &choice.value).text(&choice.text));
        match group.first().map(|choice| choice.group) {
            Some("") | None => lines.extend(options),
            Some(heading) => {
                lines.push(part("optgroup").with("label", heading).add_all(options));
            }
        }
    }
    lines
}
