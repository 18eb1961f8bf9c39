//! The head of the page: title, undo, open, save, and where the study is kept.

use kinetics_core::study::Study;
use leptos::html::Textarea;
use leptos::prelude::*;

use super::file_button::file_button;
use super::keeping::Keeping;
use super::sheet::Sheet;
use crate::keep::{clipboard, files, frame};

/// The head.
pub fn header(sheet: Sheet, keeping: Keeping) -> AnyView {
    let title = move || sheet.study(|study| study.title.clone());
    let retitle = move |typed: String| sheet.change("title", |study| study.title = typed);
    let shows_text = RwSignal::new(false);
    let save = move |_| {
        let study = sheet.study_now(Study::clone);
        files::download(&file_name(&study.title), &study.to_json());
        // A sandboxed frame drops downloads without a word: the text is the way out.
        shows_text.set(frame::is_embedded());
    };
    view! {
        <header class="top">
            <h1>"Kelvinclock"</h1>
            <span class="title">
                <input
                    type="text"
                    aria-label="Title of the study"
                    placeholder="Title of the study"
                    autocomplete="off"
                    prop:value=title
                    on:input=move |event| retitle(event_target_value(&event))
                    on:blur=move |_| sheet.seal()
                />
            </span>
            <nav aria-label="Study">
                <button
                    type="button"
                    disabled=move || !sheet.can.get().0
                    on:click=move |_| sheet.undo()
                >
                    "Undo"
                </button>
                <button
                    type="button"
                    disabled=move || !sheet.can.get().1
                    on:click=move |_| sheet.redo()
                >
                    "Redo"
                </button>
                {file_button(sheet, "Open", "")}
                <button type="button" on:click=save>"Save"</button>
            </nav>
            <p class="kept">
                {keeping.words()}
                " "
                <span role="status" aria-live="polite">{move || sheet.said.get()}</span>
            </p>
            <Show when=move || shows_text.get()>{study_text(sheet, shows_text)}</Show>
        </header>
    }
    .into_any()
}

/// The study as text, to be carried away by hand.
fn study_text(sheet: Sheet, shown: RwSignal<bool>) -> AnyView {
    let node = NodeRef::<Textarea>::new();
    let text = move || sheet.study(Study::to_json);
    let copy = move |_| {
        let whole = sheet.study_now(Study::to_json);
        leptos::task::spawn_local(async move {
            if clipboard::copy(&whole).await {
                sheet.tell("The study is copied. Paste it into this page to open it again.");
            } else if let Some(area) = node.get_untracked() {
                area.select();
                sheet.tell(
                    "This frame forbids copying by a button: the text is selected, press Ctrl+C.",
                );
            }
        });
    };
    view! {
        <div class="paste">
            <label for="study-text" class="quiet">
                "If no file appeared, the page around this frame forbids downloads. This is the \
                 study; pasted into this page it opens again."
            </label>
            <textarea id="study-text" readonly node_ref=node prop:value=text></textarea>
            <div class="actions">
                <button type="button" on:click=copy>"Copy the study"</button>
                <button type="button" on:click=move |_| shown.set(false)>"Close"</button>
            </div>
        </div>
    }
    .into_any()
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
