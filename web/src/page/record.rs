//! Record: the account of the study, to print and to copy.

use leptos::html::Pre;
use leptos::prelude::*;

use super::sheet::Sheet;
use crate::keep::{clipboard, frame};

/// A longer account is shown in part; copying takes the whole.
const MOST_SHOWN_BYTES: usize = 60_000;

/// The section.
pub fn section(sheet: Sheet) -> AnyView {
    let node = NodeRef::<Pre>::new();
    let text = Memo::new(move |_| shown(&sheet.evaluation().findings.record.text));
    let copy = move |_| {
        let whole = sheet.evaluation_now().findings.record.text.clone();
        leptos::task::spawn_local(async move {
            if clipboard::copy(&whole).await {
                sheet.tell("The record is copied.");
            } else if let Some(element) = node.get_untracked() {
                clipboard::select(&element);
                sheet.tell(
                    "This frame forbids copying by a button: the record is selected, press Ctrl+C.",
                );
            }
        });
    };
    let print = move |_| {
        frame::print();
        if frame::is_embedded() {
            sheet.tell(
                "If no print window appears, the page around this frame forbids it: copy the \
                 record as text.",
            );
        }
    };
    view! {
        <section aria-labelledby="record">
            <h2 id="record">"Record"</h2>
            <pre class="record" tabindex="0" role="region" aria-label="Record" node_ref=node>
                {move || text.get()}
            </pre>
            <div class="actions">
                <button type="button" on:click=copy>"Copy as text"</button>
                <button type="button" on:click=print>"Print"</button>
            </div>
        </section>
    }
    .into_any()
}

fn shown(text: &str) -> String {
    if text.len() <= MOST_SHOWN_BYTES {
        return text.to_owned();
    }
    let end = text.char_indices().map(|(at, _)| at).take_while(|at| *at <= MOST_SHOWN_BYTES).last();
    let part = text.get(..end.unwrap_or(0)).unwrap_or_default();
    format!(
        "{part}\n…\n(The whole account is {} characters long; copying takes all of it.)",
        text.chars().count()
    )
}
