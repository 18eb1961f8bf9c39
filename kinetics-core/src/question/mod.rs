//! The questions that can be asked: each a sentence with blanks and the function that answers it.
//!
//! A question is one file here and one line in [`QUESTIONS`]; page, study file and record take
//! everything from there.

mod aims;
mod allowance;
mod blanks;
mod equivalent_time;
mod extent_after;
mod next_measurement;
mod ranges;
mod rate_at;
mod speed_up;
mod subject;
mod temperature_for;
mod time_to_extent;

pub use blanks::{BlankKind, Blanks, parse_blank};
pub use subject::{exchange, remove};

use serde_json::{Map, Value};

use crate::answer::{Answer, Basis, Refusal, Side, sentence};
use crate::next_measurement::Aim;
use crate::temperature_law::FittedLaw;

/// A kind of question.
#[derive(Debug, Clone, Copy)]
pub struct Question {
    /// Its code in a study.
    pub code: &'static str,
    /// The sentence, each blank's name in square brackets.
    pub sentence: &'static str,
    /// The blanks in the order of the sentence.
    pub blanks: &'static [Blank],
    /// Works out the answer from filled blanks.
    pub answer: fn(&Blanks, &Basis) -> Result<Answer, Refusal>,
    /// Two of its numbers as a range in words, beside its answer: "32 to 67 h".
    pub range: fn([f64; 2], f64, &Basis) -> String,
    /// What a further measurement would narrow for it.
    pub aim: fn(&Blanks, &Basis) -> Result<Aim, Refusal>,
}

/// A gap in a question's sentence.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Blank {
    /// Its key in a study.
    pub name: &'static str,
    /// What goes in.
    pub kind: BlankKind,
    /// What a new question starts with, as one would type it.
    pub example: &'static str,
    /// Whether it may be left empty.
    pub optional: bool,
}

/// Every question, in the order of the menu.
pub const QUESTIONS: [Question; 10] = [
    time_to_extent::QUESTION,
    allowance::LONGEST_STAND,
    allowance::COMPLETION_TIME,
    temperature_for::TEMPERATURE_FOR,
    temperature_for::WARMEST_STORAGE,
    extent_after::QUESTION,
    speed_up::QUESTION,
    equivalent_time::QUESTION,
    rate_at::QUESTION,
    next_measurement::QUESTION,
];

/// More combinations of lists than this are refused.
pub const MOST_ROWS: usize = 1000;

impl Question {
    /// The question of a code.
    pub fn of_code(code: &str) -> Option<&'static Self> {
        QUESTIONS.iter().find(|q| q.code == code)
    }

    /// The sentence cut at its blanks: text, then blank and text in turn.
    pub fn pieces(&self) -> Vec<Piece> {
        let mut pieces = Vec::new();
        for part in self.sentence.split('[') {
            match part.split_once(']') {
                Some((name, text)) => {
                    pieces.extend(self.blanks.iter().find(|b| b.name == name).map(Piece::Blank));
                    pieces.push(Piece::Text(text));
                }
                None => pieces.push(Piece::Text(part)),
            }
        }
        pieces
    }
}

/// A stretch of a question's sentence.
#[derive(Debug, Clone, Copy)]
pub enum Piece {
    /// Fixed words.
    Text(&'static str),
    /// A gap to fill.
    Blank(&'static Blank),
}

/// Answers one entry of a study's `asked` by itself; a missing basis refuses with its reason.
pub fn answer(asked: &Map<String, Value>, basis: Result<&Basis, &Refusal>) -> Answer {
    answer_among(std::slice::from_ref(asked), 0, basis)
}

/// Answers the entry at an index of a study's `asked`, which may be about another one of them.
pub fn answer_among(
    asked: &[Map<String, Value>],
    at: usize,
    basis: Result<&Basis, &Refusal>,
) -> Answer {
    let Some(own) = asked.get(at) else {
        return Answer::refused("", Refusal::new("Nothing is asked.", "Ask a question."));
    };
    let code = own.get("question").and_then(Value::as_str).unwrap_or_default();
    let Some(question) = Question::of_code(code) else {
        let known: Vec<&str> = QUESTIONS.iter().map(|q| q.code).collect();
        let reason = format!("“{}” is no question known here.", crate::problem::shortened(code));
        let needs = format!("Known questions are: {}.", known.join(", "));
        return Answer::refused(code, Refusal::new(reason, needs));
    };
    let outcome = blanks::read(question, own).and_then(|combinations| {
        let basis = basis.map_err(Clone::clone)?;
        Ok(answer_each(question, combinations, asked, basis))
    });
    outcome.unwrap_or_else(|refusal| Answer::refused(code, refusal))
}

fn answer_each(
    question: &Question,
    combinations: Vec<Blanks>,
    asked: &[Map<String, Value>],
    basis: &Basis,
) -> Answer {
    let one = |blanks: Blanks| {
        subject::found(question, blanks, asked)
            .and_then(|blanks| answer_one(question, &blanks, basis))
            .unwrap_or_else(|refusal| Answer::refused(question.code, refusal))
    };
    if combinations.iter().any(|blanks| blanks.from_list) {
        let rows: Vec<Answer> = combinations
            .into_iter()
            .map(|blanks| Answer { blanks: Some(blanks.to_map()), ..one(blanks) })
            .collect();
        let sentence = format!("{} answers, one for each combination.", rows.len());
        return Answer { sentence, rows: Some(rows), ..Answer::empty(question.code) };
    }
    let single = combinations.into_iter().next().map(one);
    single.unwrap_or_else(|| Answer::empty(question.code))
}

fn answer_one(question: &Question, blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let mut answer = (question.answer)(blanks, basis)?;
    if !answer.value.is_some_and(f64::is_finite) {
        return Err(Refusal::new(
            "The numbers become too large or too small to compute with.",
            "Ask for a temperature nearer to the measured ones.",
        ));
    }
    // A recommendation has no side, and no range under other laws.
    if answer.side.is_none() {
        answer.sentence = sentence(&answer.wording, Side::Two);
        return Ok(answer);
    }
    let own = answer.key_number().unwrap_or(f64::NAN);
    if let Some((low, high)) = under(question, blanks, basis, &basis.rivals) {
        (answer.rival_low, answer.rival_high) = (Some(low), Some(high));
        answer.wording.rival =
            format!("if another law holds: {}", (question.range)([low, high], own, basis));
    }
    if let Some((low, high)) = under(question, blanks, basis, &basis.shifted) {
        answer = answer.with_detail("offset_low", Some(low)).with_detail("offset_high", Some(high));
        answer.wording.offset = format!(
            "if the thermometer is off by as much as stated: {}",
            (question.range)([low, high], own, basis)
        );
    }
    answer.sentence = sentence(&answer.wording, answer.side.unwrap_or(Side::Two));
    Ok(answer)
}

/// The least and largest key number of a question if other laws hold; none without any.
fn under(
    question: &Question,
    blanks: &Blanks,
    basis: &Basis,
    laws: &[FittedLaw],
) -> Option<(f64, f64)> {
    let numbers = laws.iter().filter_map(|law| {
        let (rivals, shifted) = (Vec::new(), Vec::new());
        let other = Basis { law: law.clone(), rivals, shifted, ..basis.clone() };
        (question.answer)(blanks, &other).ok()?.key_number().filter(|number| number.is_finite())
    });
    numbers.fold(None, |range, number| {
        let (low, high) = range.unwrap_or((number, number));
        Some((low.min(number), high.max(number)))
    })
}

/// A question with the examples of the blanks that it needs filled in, as an entry of `asked`.
pub fn example(question: &Question) -> Map<String, Value> {
    let mut asked = Map::new();
    asked.insert("question".into(), question.code.into());
    for blank in question.blanks.iter().filter(|blank| !blank.optional) {
        if let Ok([quantity]) = parse_blank(blank.example, blank.kind, '.').as_deref() {
            asked.insert(blank.name.into(), blank.kind.value(quantity));
        }
    }
    asked
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_blank_stands_in_its_sentence_and_has_a_readable_example() {
        for question in &QUESTIONS {
            let blanks: Vec<&str> = question
                .pieces()
                .iter()
                .filter_map(|p| if let Piece::Blank(b) = p { Some(b.name) } else { None })
                .collect();
            let declared: Vec<&str> = question.blanks.iter().map(|b| b.name).collect();
            assert_eq!(blanks, declared, "{}", question.code);
            let needed = question.blanks.iter().filter(|blank| !blank.optional).count();
            assert_eq!(example(question).len(), needed + 1, "{}", question.code);
        }
    }

    #[test]
    fn codes_are_unique() {
        for (i, question) in QUESTIONS.iter().enumerate() {
            assert!(QUESTIONS[..i].iter().all(|q| q.code != question.code));
        }
    }
}
