//! One question: its sentence with blanks, its answer, and its place among the others.

use std::cell::RefCell;
use std::rc::Rc;

use kinetics_core::answer::whom;
use kinetics_core::quantity::Quantity;
use kinetics_core::question::{
    Blank, BlankKind, Piece, Question, exchange as exchange_questions, parse_blank,
    remove as remove_question,
};
use kinetics_core::temperature_law::Target;
use serde_json::Value;

use super::super::amount::complaints;
use super::super::blank::{Complaint, Gap, blank};
use super::super::live::follow;
use super::super::menu::{Choice, menu};
use super::super::part::{Part, button, part};
use super::super::pictures::filled;
use super::super::sheet::Sheet;
use super::answer::answer;
use super::{ASK_ID, focus_later};

/// The questions whose answer is a limit, which covers a single batch or the mean of many.
const ONE_SIDED: [&str; 3] = ["longest-stand", "completion-time", "warmest-storage"];

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
            let is_one_sided = ONE_SIDED.contains(&code);
            for piece in question.pieces() {
                sentence = match piece {
                    Piece::Text(text) => match text.strip_suffix('?').filter(|_| is_one_sided) {
                        Some(text) => {
                            sentence.text(text).text(", ").add(bound(sheet, at)).text("?")
                        }
                        None => sentence.text(text),
                    },
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
        let asked = study.asked.get(at);
        asked.map(|asked| filled(asked, gap, sheet.decimal())).unwrap_or_default()
    };
    // What a bare number gets: the unit that stands in the gap, else the usual one.
    let usual = move || match gap.kind {
        BlankKind::Temperature => {
            sheet.study().display.temperature.unwrap_or_default().symbol().to_owned()
        }
        _ => unit_of(&read(gap.example, gap.kind, '.', "")),
    };
    let unit = Rc::new(RefCell::new(usual()));
    let last = Rc::clone(&unit);
    let told = complaint.clone();
    follow(move || {
        let study = sheet.study();
        let filled = study.asked.get(at).and_then(|asked| asked.get(gap.name));
        told.set(match filled {
            Some(Value::String(unread)) => read(unread, gap.kind, sheet.decimal(), "").err(),
            None if !gap.optional && study.asked.len() > at => {
                Some(format!("Expected {}.", gap.kind.expected()))
            }
            _ => None,
        });
        let stands = filled.and_then(|filled| gap.kind.quantities(filled).pop());
        last.replace(stands.map_or_else(usual, |quantity| quantity.unit));
    });
    let take = move |text: &str| {
        let mut outcome = Ok(());
        let value = match read(text, gap.kind, sheet.decimal(), &unit.borrow()) {
            _ if text.trim().is_empty() => Value::Null,
            Ok(quantities) => {
                let values: Vec<Value> = quantities.iter().map(|q| gap.kind.value(q)).collect();
                match <[Value; 1]>::try_from(values) {
                    Ok([single]) => single,
                    Err(several) => Value::Array(several),
                }
            }
            // It stays in the study as it was typed, and the core says that it is no answer.
            Err(said) => {
                outcome = Err(said);
                text.into()
            }
        };
        write(sheet, at, gap.name, &blank_id(at, gap.name), value);
        outcome
    };
    blank(Gap {
        label: format!("Question {}: {}", at + 1, gap.name.replace('_', " ")),
        shown: Box::new(shown),
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint: complaint.clone(),
        id: blank_id(at, gap.name),
        hint: format!("e.g. {}", gap.example),
    })
}

/// Reads what was typed into a blank. A bare number keeps the unit that stood there, and a small
/// letter is as good a scale of temperature as a large one.
fn read(text: &str, kind: BlankKind, decimal: char, unit: &str) -> Result<Vec<Quantity>, String> {
    let numbers = text.trim_end_matches([' ', ',', ';']);
    let is_bare = |sign: char| sign.is_ascii_digit() || " .,;+-\u{2212}".contains(sign);
    if numbers.chars().all(is_bare)
        && let Ok(read) = parse_blank(&format!("{numbers} {unit}"), kind, decimal)
    {
        let part =
            read.iter().find(|part| part.unit == "%" && part.value > 0.0 && part.value < 1.0);
        return match part {
            // 0.98 may be a fraction, and then the answer would be hundreds of times off.
            Some(part) => {
                let (small, large) = (part.value, shown_percent(100.0 * part.value));
                Err(format!("Found “{text}”: write {large} % for the part {small}, or {small} %."))
            }
            None => Ok(read),
        };
    }
    parse_blank(text, kind, decimal).or_else(|said| {
        if kind != BlankKind::Temperature {
            return Err(said);
        }
        let large = text.to_ascii_uppercase().replace('C', "°C").replace("°°", "°");
        parse_blank(&large, kind, decimal).map_err(|_| said)
    })
}

/// Without the dust of binary fractions.
fn shown_percent(percent: f64) -> f64 {
    (1e9 * percent).round() / 1e9
}

/// The unit of the last of some quantities.
fn unit_of(read: &Result<Vec<Quantity>, String>) -> String {
    let last = read.as_ref().ok().and_then(|quantities| quantities.last());
    last.map(|quantity| quantity.unit.clone()).unwrap_or_default()
}

/// Puts a value into a question; nothing takes the key out.
fn write(sheet: Sheet, at: usize, key: &str, step: &str, value: Value) {
    sheet.change(step, |study| {
        let Some(asked) = study.asked.get_mut(at) else { return };
        match value {
            Value::Null => drop(asked.remove(key)),
            value => drop(asked.insert(key.to_owned(), value)),
        }
    });
}

/// Whom the bound of a one-sided answer covers.
fn bound(sheet: Sheet, at: usize) -> Part {
    const CODES: [(&str, Target); 2] = [("", Target::NextRun), ("mean", Target::Mean)];
    let offer = move || {
        let choices = CODES.iter().map(|(code, target)| Choice::new(*code, whom(*target)));
        let study = sheet.study();
        let chosen =
            study.asked.get(at).and_then(|asked| asked.get("bound")).and_then(Value::as_str);
        let chosen = chosen.filter(|code| *code == "mean").unwrap_or_default();
        (choices.collect(), chosen.to_owned())
    };
    let pick = move |code: &str| {
        let value = if code.is_empty() { Value::Null } else { code.into() };
        write(sheet, at, "bound", "", value);
    };
    menu(&format!("Question {}: whom the limit covers", at + 1), offer, pick)
}

/// Moves and removal.
fn arrange(sheet: Sheet, at: usize) -> Part {
    let number = at + 1;
    let exchange = move |other: usize, id: &str| {
        sheet.change("", |study| exchange_questions(&mut study.asked, at, other));
        focus_later(&format!("{id}-{other}"));
    };
    let up = move || {
        if let Some(above) = at.checked_sub(1) {
            exchange(above, "up");
        }
    };
    let remove = move || {
        sheet.change("", |study| remove_question(&mut study.asked, at));
        sheet.tell(format!("Question {number} is removed. Undo brings it back."));
        // The question that took its place, or the last one.
        match sheet.study().asked.len().checked_sub(1) {
            Some(last) => focus_later(&format!("remove-{}", at.min(last))),
            None => focus_later(ASK_ID),
        }
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

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    fn values(text: &str, kind: BlankKind, unit: &str) -> Result<Vec<(f64, String)>, String> {
        let read = read(text, kind, '.', unit)?;
        Ok(read.into_iter().map(|quantity| (quantity.value, quantity.unit)).collect())
    }

    #[test]
    fn bare_numbers_keep_the_unit_that_stood_there() {
        let celsius = |value: f64| (value, "°C".to_owned());
        let read = values("5, 25, 30", BlankKind::Temperature, "°C");
        assert_eq!(read, Ok(vec![celsius(5.0), celsius(25.0), celsius(30.0)]));
        assert_eq!(values("25 c", BlankKind::Temperature, "K"), Ok(vec![celsius(25.0)]));
    }

    #[test]
    fn a_bare_part_below_one_may_be_a_fraction_and_is_asked_about() {
        let said = values("0.98", BlankKind::Part, "%").unwrap_err();
        assert!(said.contains("write 98 % for the part 0.98, or 0.98 %"), "{said}");
        assert_eq!(values("0.98 %", BlankKind::Part, "%"), Ok(vec![(0.98, "%".into())]));
        assert_eq!(values("98", BlankKind::Part, "%"), Ok(vec![(98.0, "%".into())]));
    }
}
