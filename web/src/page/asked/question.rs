//! One question: its sentence with blanks, its answer, and its place among the others.

use kinetics_core::question::{Blank, Piece, Question, parse_blank};
use kinetics_core::study::Study;
use kinetics_core::wording::typed;
use serde_json::Value;

use super::super::amount::complaints;
use super::super::blank::{Complaint, Gap, blank};
use super::super::part::{Part, button, part};
use super::super::pictures::quantities;
use super::super::sheet::Sheet;
use super::answer::answer;
use super::focus_later;

/// The name of a blank's element.
pub fn blank_id(at: usize, name: &str) -> String {
    format!("question-{at}-{name}")
}

/// A question as an item of the list.
pub fn question(sheet: Sheet, at: usize, code: &str) -> Part {
    let mut sentence = part("p").class("sentence");
    let mut all: Vec<Complaint> = Vec::new();
    match Question::of_code(code) {
        Some(question) => {
            for piece in question.pieces() {
                sentence = match piece {
                    Piece::Text(text) => sentence.text(text),
                    Piece::Blank(blank) => {
                        let complaint = Complaint::new(None);
                        let gap = gap(sheet, at, blank, &complaint);
                        all.push(complaint);
                        sentence.add(gap)
                    }
                };
            }
        }
        None => sentence = sentence.text(&format!("A question of a later version: “{code}”.")),
    }
    let all: Vec<&Complaint> = all.iter().collect();
    let body = part("div")
        .add(sentence.add(complaints(&all)))
        .add(answer(sheet, at))
        .add(arrange(sheet, at));
    let flag = part("span").class("flag").with("aria-hidden", "true").text(&(at + 1).to_string());
    part("li").add(flag).add(body)
}

fn gap(sheet: Sheet, at: usize, gap: &'static Blank, complaint: &Complaint) -> Part {
    let shown = move || {
        let study = sheet.study();
        let filled = study.asked.get(at).map(|asked| quantities(asked, gap.name));
        filled.map(|filled| typed(&filled, sheet.decimal())).unwrap_or_default()
    };
    let take = move |text: &str| {
        let quantities = parse_blank(text, gap.kind, sheet.decimal())?;
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
        shown: Box::new(shown),
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint: complaint.clone(),
        id: blank_id(at, gap.name),
        hint: gap.example,
    })
}

/// Moves and removal.
fn arrange(sheet: Sheet, at: usize) -> Part {
    let number = at + 1;
    let exchange = move |other: usize, id: &str| {
        sheet.change("", |study: &mut Study| {
            if at.max(other) < study.asked.len() {
                study.asked.swap(at, other);
            }
        });
        focus_later(format!("{id}-{other}"));
    };
    let up = move || {
        if let Some(above) = at.checked_sub(1) {
            exchange(above, "up");
        }
    };
    let remove = move || {
        sheet.change("", |study: &mut Study| {
            if at < study.asked.len() {
                study.asked.remove(at);
            }
        });
        sheet.tell(format!("Question {number} is removed. Undo brings it back."));
    };
    let named = |words: &str, id: &str, label: String, press: Box<dyn Fn()>| {
        button(words, press).with("id", &format!("{id}-{at}")).with("aria-label", &label)
    };
    let is_last = move || sheet.study().asked.len() <= at + 1;
    part("div")
        .class("arrange")
        .add(
            named("move up", "up", format!("move up, question {number}"), Box::new(up))
                .is("disabled", move || at == 0),
        )
        .add(
            named(
                "move down",
                "down",
                format!("move down, question {number}"),
                Box::new(move || exchange(at + 1, "down")),
            )
            .is("disabled", is_last),
        )
        .add(named("remove", "remove", format!("remove, question {number}"), Box::new(remove)))
}
