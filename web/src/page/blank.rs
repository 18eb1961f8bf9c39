//! A gap in a sentence: as wide as its content, and forgiving while one types.

use std::cell::RefCell;
use std::rc::Rc;

use web_sys::{Event, KeyboardEvent};

use super::live::{State, follow};
use super::part::{Part, part, value_of};

/// Takes what was typed into a gap, or says what is wrong with it.
pub type Take = Box<dyn Fn(&str) -> Result<(), String>>;

/// What is wrong with what was typed, as long as it is.
pub type Complaint = State<Option<String>>;

/// What a gap needs to know of the sheet.
pub struct Gap {
    /// Its name for who cannot see the sentence.
    pub label: String,
    /// What stands in it as long as nobody types.
    pub shown: Box<dyn Fn() -> String>,
    /// Takes what was typed.
    pub take: Take,
    /// Called when the reader leaves it.
    pub leave: Box<dyn Fn()>,
    /// What is wrong with what was typed; the sentence shows it.
    pub complaint: Complaint,
    /// The name of its element, by which it can be found.
    pub id: String,
    /// What it hints at while it is empty.
    pub hint: String,
}

/// A gap that is filled at the moment.
struct Filling {
    gap: Gap,
    draft: State<Option<String>>,
    /// What the sheet showed after the last letter typed here; anything else came from
    /// elsewhere, an undo for instance, and wins over the draft.
    own: RefCell<String>,
}

/// The gap. While what is typed cannot be read it stays, marked.
pub fn blank(gap: Gap) -> Part {
    let own = RefCell::new((gap.shown)());
    let (label, id, hint) = (gap.label.clone(), gap.id.clone(), gap.hint.clone());
    let filling = Rc::new(Filling { gap, draft: State::new(None), own });
    let with = |act: fn(&Filling, &Event)| {
        let filling = Rc::clone(&filling);
        move |event: &Event| act(&filling, event)
    };
    let looking = Rc::clone(&filling);
    follow(move || looking.notice());
    let (text, wide, invalid) = (Rc::clone(&filling), Rc::clone(&filling), Rc::clone(&filling));
    let unit = Rc::clone(&filling);
    let input = part("input")
        .with("type", "text")
        .with("size", "1")
        .with("id", &id)
        .with("autocomplete", "off")
        .with("spellcheck", "false")
        .with("placeholder", &hint)
        .with("aria-label", &label)
        .follows("aria-invalid", move || invalid.gap.complaint.get().map(|_| "true".to_owned()))
        .holds(move || text.text())
        .on("input", with(|filling, event| filling.typed(value_of(event))))
        .on("blur", with(|filling, _| filling.left()))
        .on("keydown", with(Filling::key));
    let wide =
        move || Some(Some(wide.text()).filter(|text| !text.is_empty()).unwrap_or(hint.clone()));
    part("span")
        .class("blank")
        .follows("data-text", wide)
        .follows("data-unit", move || unit.unit())
        .add(input)
}

impl Filling {
    fn text(&self) -> String {
        self.draft.get().unwrap_or_else(|| (self.gap.shown)())
    }

    /// The unit that a bare number was given, as long as it does not stand in the gap itself.
    fn unit(&self) -> Option<String> {
        let draft = self.draft.get()?;
        let shown = (self.gap.shown)();
        let rest = shown.strip_prefix(draft.trim_end()).filter(|rest| rest.starts_with(' '))?;
        let is_read = self.gap.complaint.get().is_none() && !draft.trim().is_empty();
        is_read.then(|| rest.to_owned())
    }

    fn notice(&self) {
        let shown = (self.gap.shown)();
        if shown != *self.own.borrow() {
            self.own.replace(shown);
            self.give_up();
        }
    }

    fn typed(&self, text: String) {
        let outcome = (self.gap.take)(&text);
        self.own.replace((self.gap.shown)());
        self.gap.complaint.set(outcome.err());
        self.draft.set(Some(text));
    }

    fn left(&self) {
        self.settle();
        (self.gap.leave)();
    }

    fn settle(&self) {
        if self.gap.complaint.get().is_none() {
            self.draft.set(None);
        }
    }

    fn give_up(&self) {
        self.draft.set(None);
        self.gap.complaint.set(None);
    }

    fn key(&self, event: &Event) {
        use wasm_bindgen::JsCast;
        match event.dyn_ref::<KeyboardEvent>().map(KeyboardEvent::key).as_deref() {
            Some("Enter") => self.settle(),
            Some("Escape") => self.give_up(),
            _ => {}
        }
    }
}
