//! The place to paste into.

use leptos::prelude::*;

use super::super::arrivals;
use super::super::sheet::Sheet;

/// What a paste may look like.
const SAMPLE: &str = "T/°C\tk, 1/h\ts(k)\n50\t0.0184\t0.0009\n60\t0.0547\t0.0027\n…";

/// Where nothing is measured yet.
pub fn first(sheet: Sheet) -> AnyView {
    view! {
        <div class="welcome">
            <p>
                "Paste a table of temperatures and rate constants, or drop a file here. \
                 Headings with units are understood; so are decimal commas."
            </p>
        </div>
        {area(sheet, || ())}
    }
    .into_any()
}

/// Beside a table that is there; undo brings that back.
pub fn again(sheet: Sheet, wanted: RwSignal<bool>) -> AnyView {
    area(sheet, move || wanted.set(false))
}

fn area(sheet: Sheet, done: impl Fn() + Copy + Send + Sync + 'static) -> AnyView {
    let text = RwSignal::new(String::new());
    let read = move || {
        let typed = text.get_untracked();
        if !typed.trim().is_empty() {
            arrivals::take_text(sheet, typed);
            done();
        }
    };
    view! {
        <div class="paste">
            <label class="unseen" for="paste">"Table of what was measured"</label>
            <textarea
                id="paste"
                spellcheck="false"
                autocomplete="off"
                placeholder=SAMPLE
                prop:value=move || text.get()
                on:input=move |event| text.set(event_target_value(&event))
                on:paste=move |event| {
                    if let Some(pasted) = arrivals::text_of_paste(&event) {
                        event.prevent_default();
                        event.stop_propagation();
                        arrivals::take_text(sheet, pasted);
                        done();
                    }
                }
            ></textarea>
            <Show when=move || !text.with(|text| text.trim().is_empty())>
                <button type="button" class="main" on:click=move |_| read()>"Read this table"</button>
            </Show>
        </div>
    }
    .into_any()
}
