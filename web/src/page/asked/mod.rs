//! Asked: sentences with blanks, their answers, and the time map beside them.

mod answer;
mod question;
mod time_map;

use kinetics_core::question::{Piece, QUESTIONS, Question, example};
use leptos::html::Select;
use leptos::prelude::*;
use leptos::web_sys::HtmlElement;
use wasm_bindgen::JsCast;

use super::pictures::code;
use super::sheet::Sheet;
use super::surroundings::Surroundings;

/// The section.
pub fn section(sheet: Sheet, surroundings: ReadSignal<Surroundings>) -> AnyView {
    // A question is known by its place and its kind; what stands in it follows the study.
    let questions = Memo::new(move |_| {
        sheet.study(|study| {
            let codes = study.asked.iter().map(|asked| code(asked).to_owned());
            codes.enumerate().collect::<Vec<(usize, String)>>()
        })
    });
    view! {
        <section aria-labelledby="asked">
            <h2 id="asked">"Asked"</h2>
            <div class="beside">
                <div>
                    <ol class="asked">
                        <For each=move || questions.get() key=Clone::clone let:known>
                            {question::question(sheet, known.0, &known.1)}
                        </For>
                    </ol>
                    {ask(sheet)}
                </div>
                {time_map::figure(sheet, surroundings)}
            </div>
        </section>
    }
    .into_any()
}

/// The menu of all sentences.
fn ask(sheet: Sheet) -> AnyView {
    let node = NodeRef::<Select>::new();
    let options: Vec<AnyView> = QUESTIONS
        .iter()
        .map(|question| {
            view! { <option value=question.code>{outline(question)}</option> }.into_any()
        })
        .collect();
    let add = move |_| {
        let Some(select) = node.get_untracked() else { return };
        let chosen = Question::of_code(&select.value());
        select.set_value("");
        let Some(question) = chosen else { return };
        let at = sheet.study_now(|study| study.asked.len());
        sheet.change("", |study| study.asked.push(example(question)));
        if let Some(first) = question.blanks.first() {
            focus_later(question::blank_id(at, first.name));
        }
    };
    view! {
        <p class="ask">
            <span class="menu" data-text="+ ask something else">
                <select node_ref=node aria-label="Ask something else" on:change=add>
                    <option value="">"+ ask something else"</option>
                    {options}
                </select>
            </span>
        </p>
    }
    .into_any()
}

/// The sentence with its blanks left open.
fn outline(question: &Question) -> String {
    let mut outline = String::new();
    for piece in question.pieces() {
        match piece {
            Piece::Text(text) => outline.push_str(text),
            Piece::Blank(_) => outline.push('…'),
        }
    }
    outline
}

/// Puts the focus on an element that is about to be on the page.
pub fn focus_later(id: String) {
    super::reading::later(move || {
        let element = document().get_element_by_id(&id);
        if let Some(element) = element.and_then(|e| e.dyn_into::<HtmlElement>().ok()) {
            // Without the focus there is still the element.
            let _ = element.focus();
        }
    });
}
