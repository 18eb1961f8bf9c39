//! Asked: sentences with blanks, their answers, and the time map beside them.

mod answer;
mod question;
mod time_map;

use std::time::Duration;

use kinetics_core::question::{QUESTIONS, Question, example};
use wasm_bindgen::JsCast;
use web_sys::HtmlElement;

use super::csv::with_blanks;
use super::live::State;
use super::menu::{Choice, lines, select_of};
use super::part::{Part, document, part};
use super::pictures::code;
use super::sheet::Sheet;
use super::surroundings::Surroundings;
use super::timer::later;

/// The section.
pub fn section(sheet: Sheet, surroundings: State<Surroundings>) -> Part {
    // A question is known by its place and its kind; what stands in it follows the study.
    let questions = move || {
        let study = sheet.study();
        let codes = study.asked.iter().map(|asked| code(asked).to_owned());
        codes.enumerate().collect::<Vec<(usize, String)>>()
    };
    let list = part("ol")
        .class("asked")
        .list(questions, move |(at, code)| question::question(sheet, *at, code));
    part("section")
        .with("aria-labelledby", "asked")
        .add(part("h2").with("id", "asked").text("Asked"))
        .add(
            part("div")
                .class("beside")
                .add(part("div").add(list).add(ask(sheet)).add(part("p").class("care").text(CARE)))
                .add(time_map::figure(sheet, surroundings)),
        )
}

/// What every answer is, beside all of them.
const CARE: &str = "Answers are estimates for screening. Where one can hurt someone (heat, scale-up, food, \
                    medicine, storage), decide by calorimetry and real-time data, local codes and \
                    licensed practice.";

/// The name of the menu's element.
const ASK_ID: &str = "ask";

/// The menu of all sentences.
fn ask(sheet: Sheet) -> Part {
    const INVITATION: &str = "+ ask something else";
    let mut choices = vec![Choice::new("", INVITATION)];
    choices.extend(
        QUESTIONS
            .iter()
            .map(|question| Choice::new(question.code, with_blanks(question, |_| "…".to_owned()))),
    );
    let select = part("select")
        .with("id", ASK_ID)
        .with("aria-label", "Ask something else")
        .add_all(lines(&choices))
        .on("change", move |event| {
            let Some(select) = select_of(event) else { return };
            let chosen = Question::of_code(&select.value());
            select.set_value("");
            let Some(question) = chosen else { return };
            let at = sheet.study().asked.len();
            sheet.change("", |study| study.asked.push(example(question)));
            if let Some(first) = question.blanks.first() {
                focus_later(&question::blank_id(at, first.name));
            }
        });
    part("p").class("ask").add(part("span").class("menu").with("data-text", INVITATION).add(select))
}

/// Puts the focus on an element that is about to be on the page.
pub fn focus_later(id: &str) {
    let id = id.to_owned();
    later(Duration::ZERO, move || {
        let element = document().and_then(|document| document.get_element_by_id(&id));
        if let Some(element) = element.and_then(|e| e.dyn_into::<HtmlElement>().ok()) {
            // Without the focus there is still the element.
            let _ = element.focus();
        }
    });
}
