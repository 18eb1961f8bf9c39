//! A button that asks for a file.

use leptos::html::Input;
use leptos::prelude::*;

use super::arrivals;
use super::sheet::Sheet;

/// The button; `class` is for its looks.
pub fn file_button(sheet: Sheet, words: &'static str, class: &'static str) -> AnyView {
    let node = NodeRef::<Input>::new();
    let ask = move |_| {
        if let Some(input) = node.get_untracked() {
            input.click();
        }
    };
    let take = move |_| {
        let Some(input) = node.get_untracked() else { return };
        if let Some(file) = input.files().and_then(|files| files.get(0)) {
            arrivals::take_file(sheet, file);
        }
        // The same file can be chosen again.
        input.set_value("");
    };
    view! {
        <button type="button" class=class on:click=ask>{words}</button>
        <input
            type="file"
            hidden=true
            tabindex="-1"
            aria-label=words
            node_ref=node
            accept=".json,.txt,.csv,.tsv,.dat,text/*,application/json"
            on:change=take
        />
    }
    .into_any()
}
