//! Measured: a paste that became a table, or a known law; and the law's picture beside it.

mod edit;
mod head;
mod known_law;
mod notes;
mod paste;
mod row;
mod rows;
mod sentence;

use kinetics_core::study::Study;
use kinetics_core::table::Form;
use leptos::prelude::*;

use super::sheet::Sheet;
use super::surroundings::Surroundings;
use super::{example, file_button, law_picture};

/// What the left column holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Shape {
    /// A place to paste into.
    Nothing,
    /// Rows and columns.
    Table,
    /// The sentence of a known law.
    KnownLaw,
}

/// The section.
pub fn section(sheet: Sheet, surroundings: ReadSignal<Surroundings>) -> AnyView {
    let wants_paste = RwSignal::new(false);
    Effect::new(move |_| {
        sheet.opened.track();
        wants_paste.set(false);
    });
    let shape = Memo::new(move |_| {
        sheet.study(|study| match study.measured.form {
            Form::KnownLaw => Shape::KnownLaw,
            _ if study.measured.text.trim().is_empty() => Shape::Nothing,
            _ => Shape::Table,
        })
    });
    let is_example = Memo::new(move |_| sheet.shows_example());
    let body = move || match shape.get() {
        Shape::Nothing => paste::first(sheet),
        Shape::Table => view! {
            {move || wants_paste.get().then(|| paste::again(sheet, wants_paste))}
            {rows::table(sheet, surroundings)}
            {sentence::reading(sheet)}
            {notes::notes(sheet)}
        }
        .into_any(),
        Shape::KnownLaw => known_law::sentence(sheet),
    };
    let actions = move || {
        let is_shape = shape.get();
        view! {
            <Show when=move || is_shape == Shape::Table && !is_example.get()>
                <button type="button" on:click=move |_| wants_paste.update(|wants| *wants = !*wants)>
                    "Paste something else"
                </button>
            </Show>
            <Show when=move || is_shape == Shape::KnownLaw>
                <button type="button" on:click=move |_| sheet.change("", start_again)>
                    "Paste measurements"
                </button>
            </Show>
            {file_button::file_button(sheet, "Choose a file", "")}
            <Show when=move || is_shape == Shape::Nothing>
                <button type="button" on:click=move |_| sheet.change("", rows::begin_typing)>
                    "Type into an empty table"
                </button>
            </Show>
            <Show when=move || is_shape != Shape::KnownLaw>
                <button type="button" on:click=move |_| sheet.change("", known_law::begin)>
                    "State a known law"
                </button>
            </Show>
            <Show when=move || is_shape == Shape::Nothing>
                <button type="button" on:click=move |_| sheet.open(example::study())>
                    "Show the example"
                </button>
            </Show>
        }
    };
    view! {
        <section aria-labelledby="measured">
            <h2 id="measured">"Measured"</h2>
            <div class="beside">
                <div>
                    <Show when=move || is_example.get()>{welcome(sheet)}</Show>
                    {progress(sheet)}
                    {body}
                    <div class="actions">{actions}</div>
                </div>
                {law_picture::figure(sheet, surroundings)}
            </div>
        </section>
    }
    .into_any()
}

/// Above the invented example.
fn welcome(sheet: Sheet) -> AnyView {
    view! {
        <div class="welcome">
            <p>
                "An invented example, already worked out: a small maker of glazes and hardeners \
                 timed one hardener at six temperatures. Change any number or blank and see."
            </p>
            <button type="button" class="main" on:click=move |_| sheet.change("", start_again)>
                "Start with your own data"
            </button>
        </div>
    }
    .into_any()
}

/// How far a long text is read.
fn progress(sheet: Sheet) -> AnyView {
    view! {
        <Show when=move || sheet.progress.get().is_some()>
            <div class="progress" role="status">
                <span>"Reading …"</span>
                <progress
                    aria-label="How much is read"
                    max="1"
                    value=move || sheet.progress.get().unwrap_or(0.0).to_string()
                ></progress>
                <button type="button" on:click=move |_| sheet.stop_reading()>"Stop"</button>
            </div>
        </Show>
    }
    .into_any()
}

/// Clears what was measured and leaves the questions.
fn start_again(study: &mut Study) {
    take_text(study, String::new());
}

/// Puts a new text in the place of what was measured. What was chosen for the old text, its
/// columns and its order for instance, says nothing about the new one.
pub fn take_text(study: &mut Study, text: String) {
    if example::is_shown(study) {
        study.title.clear();
    }
    study.measured = kinetics_core::study::Measured { text, ..Default::default() };
    study.assumed.order = None;
    study.assumed.scatter = None;
}
