//! A gap in a sentence: as wide as its content, and forgiving while one types.

use leptos::prelude::*;
use leptos::web_sys::KeyboardEvent;

/// Takes what was typed into a gap, or says what is wrong with it.
pub type Take = Box<dyn Fn(&str) -> Result<(), String>>;

/// What a gap needs to know of the sheet.
pub struct Gap {
    /// Its name for who cannot see the sentence.
    pub label: String,
    /// What stands in it as long as nobody types.
    pub shown: Signal<String>,
    /// Takes what was typed, or says what is wrong with it.
    pub take: Take,
    /// Called when the reader leaves it.
    pub leave: Box<dyn Fn()>,
    /// What is wrong with what was typed; the sentence shows it.
    pub complaint: RwSignal<Option<String>>,
    /// The name of its element, by which it can be found.
    pub id: String,
    /// What it hints at while it is empty.
    pub hint: &'static str,
}

/// The gap. While what is typed cannot be read it stays, marked, and the study keeps its last
/// good value.
pub fn blank(gap: Gap) -> AnyView {
    let Gap { label, shown, take, leave, complaint, id, hint } = gap;
    let draft = RwSignal::new(None::<String>);
    let text = move || draft.get().unwrap_or_else(|| shown.get());
    let take = StoredValue::new_local(take);
    // What the sheet showed after the last letter typed here; anything else came from elsewhere,
    // an undo for instance, and wins over the draft.
    let own = StoredValue::new(shown.get_untracked());
    Effect::new(move |_| {
        if shown.get() != own.get_value() {
            own.set_value(shown.get_untracked());
            draft.set(None);
            complaint.set(None);
        }
    });
    let settle = move || {
        if complaint.get_untracked().is_none() {
            draft.set(None);
        }
    };
    let typed = move |text: String| {
        let outcome = take.with_value(|take| take(&text));
        own.set_value(shown.get_untracked());
        complaint.set(outcome.err());
        draft.set(Some(text));
    };
    let key = move |event: KeyboardEvent| match event.key().as_str() {
        "Enter" => settle(),
        "Escape" => {
            draft.set(None);
            complaint.set(None);
        }
        _ => {}
    };
    let wide = move || {
        let text = text();
        if text.is_empty() { hint.to_owned() } else { text }
    };
    view! {
        <span class="blank" data-text=wide>
            <input
                type="text"
                size="1"
                id=id
                autocomplete="off"
                spellcheck="false"
                placeholder=hint
                aria-label=label
                aria-invalid=move || complaint.with(Option::is_some).then_some("true")
                prop:value=text
                on:input=move |event| typed(event_target_value(&event))
                on:blur=move |_| {
                    settle();
                    leave();
                }
                on:keydown=key
            />
        </span>
    }
    .into_any()
}
