//! One question: its sentence with blanks, its answer, and its place among the others.

use kinetics_core::question::{Blank, Piece, Question, parse_blank};
use kinetics_core::study::Study;
use kinetics_core::wording::typed;
use leptos::prelude::*;
use serde_json::Value;

use super::super::blank::{Gap, blank};
use super::super::pictures::quantities;
use super::super::sheet::Sheet;
use super::answer::answer;
use super::focus_later;

/// The name of a blank's element.
pub fn blank_id(at: usize, name: &str) -> String {
    format!("question-{at}-{name}")
}

/// A question as an item of the list.
pub fn question(sheet: Sheet, at: usize, code: &str) -> AnyView {
    let complaints: Vec<RwSignal<Option<String>>>;
    let sentence: AnyView = match Question::of_code(code) {
        Some(question) => {
            let mut own = Vec::new();
            let pieces: Vec<AnyView> = question
                .pieces()
                .into_iter()
                .map(|piece| match piece {
                    Piece::Text(text) => text.into_any(),
                    Piece::Blank(blank) => {
                        let complaint = RwSignal::new(None);
                        own.push(complaint);
                        gap(sheet, at, blank, complaint)
                    }
                })
                .collect();
            complaints = own;
            pieces.into_any()
        }
        None => {
            complaints = Vec::new();
            format!("A question of a later version: “{code}”.").into_any()
        }
    };
    let complaint = move || {
        complaints.iter().filter_map(|complaint| complaint.get()).collect::<Vec<_>>().join(" ")
    };
    view! {
        <li>
            <span class="flag" aria-hidden="true">{at + 1}</span>
            <div>
                <p class="sentence">
                    {sentence}
                    <span class="expected" role="status">{complaint}</span>
                </p>
                <div aria-live="polite" aria-atomic="true">{answer(sheet, at)}</div>
                {arrange(sheet, at)}
            </div>
        </li>
    }
    .into_any()
}

fn gap(
    sheet: Sheet,
    at: usize,
    gap: &'static Blank,
    complaint: RwSignal<Option<String>>,
) -> AnyView {
    let shown = Signal::derive(move || {
        sheet.study(|study| {
            let filled = study.asked.get(at).map(|asked| quantities(asked, gap.name));
            let decimal = study.display.decimal.map_or('.', |decimal| decimal.mark());
            filled.map(|filled| typed(&filled, decimal)).unwrap_or_default()
        })
    });
    let take = move |text: &str| {
        let quantities = parse_blank(text, gap.kind, untrack(|| sheet.decimal()))?;
        let values: Vec<Value> =
            quantities.iter().filter_map(|q| serde_json::to_value(q).ok()).collect();
        let value = match <[Value; 1]>::try_from(values) {
            Ok([single]) => single,
            Err(several) => Value::Array(several),
        };
        sheet.change(&blank_id(at, gap.name), |study| {
            if let Some(asked) = study.asked.get_mut(at) {
                asked.insert(gap.name.to_owned(), value);
            }
        });
        Ok(())
    };
    blank(Gap {
        label: format!("Question {}: {}", at + 1, gap.name.replace('_', " ")),
        shown,
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint,
        id: blank_id(at, gap.name),
        hint: gap.example,
    })
}

/// Moves and removal.
fn arrange(sheet: Sheet, at: usize) -> AnyView {
    let number = at + 1;
    let is_last = Memo::new(move |_| sheet.study(|study| study.asked.len()) <= at + 1);
    let exchange = move |other: usize, id: &str| {
        sheet.change("", |study: &mut Study| {
            if at.max(other) < study.asked.len() {
                study.asked.swap(at, other);
            }
        });
        focus_later(format!("{id}-{other}"));
    };
    let remove = move |_| {
        sheet.change("", |study: &mut Study| {
            if at < study.asked.len() {
                study.asked.remove(at);
            }
        });
        sheet.tell(format!("Question {number} is removed. Undo brings it back."));
    };
    view! {
        <div class="arrange">
            <button
                type="button"
                id=format!("up-{at}")
                disabled=at == 0
                aria-label=format!("Move question {number} up")
                on:click=move |_| if let Some(above) = at.checked_sub(1) { exchange(above, "up") }
            >
                "move up"
            </button>
            <button
                type="button"
                id=format!("down-{at}")
                disabled=move || is_last.get()
                aria-label=format!("Move question {number} down")
                on:click=move |_| exchange(at + 1, "down")
            >
                "move down"
            </button>
            <button type="button" aria-label=format!("Remove question {number}") on:click=remove>
                "remove"
            </button>
        </div>
    }
    .into_any()
}
