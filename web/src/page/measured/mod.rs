//! Measured: a paste that became a table, or a known law; and the law's picture beside it.

mod edit;
mod head;
mod known_law;
mod more;
mod notes;
mod paste;
mod range;
mod row;
mod rows;
mod sentence;

use kinetics_core::study::{Measured, Study};
use kinetics_core::table::{Form, Hints, read_table};

use super::asked::focus_later;
use super::live::State;
use super::part::{Part, button, part};
use super::sheet::Sheet;
use super::surroundings::Surroundings;
use super::{example, file_button::file_button, law_picture};

/// So many characters of a text tell what it holds.
const MOST_SAMPLED: usize = 20_000;

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
pub fn section(sheet: Sheet, surroundings: State<Surroundings>) -> Part {
    let wants_paste = State::new(false);
    let shape = move || {
        let study = sheet.study();
        match study.measured.form {
            Form::KnownLaw => Shape::KnownLaw,
            _ if study.measured.text.trim().is_empty() => Shape::Nothing,
            _ => Shape::Table,
        }
    };
    let (asking, around) = (wants_paste.clone(), surroundings.clone());
    let body = part("div").filled(shape, move |shape| match shape {
        Shape::Nothing => paste::first(sheet),
        Shape::Table => {
            let (asked, ask) = (asking.clone(), asking.clone());
            let again = move || paste::area(sheet, Some(ask.clone()));
            vec![
                part("div").when(move || asked.get(), again),
                rows::table(sheet, around.clone()),
                rows::about_marks(sheet),
                sentence::reading(sheet),
                more::more(sheet),
                notes::notes(sheet),
            ]
        }
        Shape::KnownLaw => known_law::sentence(sheet),
    });
    let key = move || (shape(), sheet.shows_example());
    let actions = part("div")
        .class("actions")
        .filled(key, move |(shape, is_example)| actions(sheet, *shape, *is_example, &wants_paste));
    let left = part("div")
        .when(move || sheet.shows_example(), move || welcome(sheet))
        .when(move || sheet.progress().is_some(), move || progress(sheet))
        .when(
            move || sheet.is_working(),
            || {
                part("p")
                    .class("progress")
                    .with("role", "status")
                    .text("Working out what follows …")
            },
        )
        .add(body)
        .add(actions);
    part("section")
        .with("aria-labelledby", "measured")
        .add(part("h2").with("id", "measured").text("Measured"))
        .add(part("div").class("beside").add(left).add(law_picture::figure(sheet, surroundings)))
}

/// What can be done below the table.
fn actions(sheet: Sheet, shape: Shape, is_example: bool, wants_paste: &State<bool>) -> Vec<Part> {
    let mut actions = Vec::new();
    let wants_paste = wants_paste.clone();
    match shape {
        Shape::Table if !is_example => {
            let toggle = move || {
                wants_paste.set(!wants_paste.get());
                focus_later(paste::PASTE_ID);
            };
            actions.push(button("Paste something else", toggle));
        }
        Shape::KnownLaw => {
            actions.push(button("Paste measurements", move || start_again(sheet)));
        }
        Shape::Table | Shape::Nothing => {}
    }
    actions.push(file_button(sheet, "Choose a file"));
    if shape == Shape::Nothing {
        let begin = move || {
            sheet.change("", rows::begin_typing);
            focus_later(&row::cell_id(0, 0));
        };
        actions.push(button("Type into an empty table", begin));
    }
    if shape != Shape::KnownLaw {
        let begin = move || {
            sheet.change("", known_law::begin);
            focus_later(known_law::FIRST_BLANK);
        };
        actions.push(button("State a known law", begin));
    }
    if shape == Shape::Nothing {
        actions.push(button("Show the example", move || sheet.open(example::study())));
    }
    actions
}

/// Above the invented example.
fn welcome(sheet: Sheet) -> Part {
    let start = button("Start with your own data", move || start_again(sheet));
    part("div")
        .class("welcome")
        .add(part("p").text(
            "An invented example, already worked out: a small maker of glazes and hardeners timed \
             one hardener at six temperatures. Change any number or blank and see.",
        ))
        .add(start.class("main"))
}

/// How far a long text is read.
fn progress(sheet: Sheet) -> Part {
    let bar = part("progress")
        .with("aria-label", "How much is read")
        .with("max", "1")
        .follows("value", move || sheet.progress().map(|share| share.to_string()));
    part("div")
        .class("progress")
        .with("role", "status")
        .add(part("span").text("Reading …"))
        .add(bar)
        .add(button("Stop", move || sheet.stop_reading()))
}

/// Clears what was measured and leaves the questions.
fn start_again(sheet: Sheet) {
    sheet.change("", |study| take_text(study, String::new()));
    focus_later(paste::PASTE_ID);
}

/// Puts a new text in the place of what was measured. What was chosen for the old text, its
/// columns and its order for instance, says nothing about the new one.
pub fn take_text(study: &mut Study, text: String) {
    if example::is_shown(study) {
        example::leave(study);
    }
    let form = form_of(&text);
    study.measured = Measured { form, text, ..Measured::default() };
    study.assumed.order = None;
    study.assumed.scatter = None;
}

/// What the beginning of a text suggests that it holds.
fn form_of(text: &str) -> Form {
    let end = text.char_indices().map(|(at, _)| at).nth(MOST_SAMPLED).unwrap_or(text.len());
    let sample = text.get(..end).unwrap_or_default();
    read_table(sample, &Hints::default()).form.unwrap_or_default()
}
