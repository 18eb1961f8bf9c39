//! The question that another question is about, and keeping such numbers true when questions
//! change places.

use serde_json::{Map, Value};

use super::{BlankKind, Blanks, Question, blanks};
use crate::answer::{Basis, Refusal};
use crate::next_measurement::Aim;
use crate::problem::shortened;

/// A question with its blanks filled.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Subject {
    /// Its number from 1.
    pub number: usize,
    code: &'static str,
    blanks: Blanks,
}

impl Subject {
    /// What a measurement would narrow for it.
    ///
    /// # Errors
    /// The question's own refusal, with its number.
    pub fn aim(&self, basis: &Basis) -> Result<Aim, Refusal> {
        let question = Question::of_code(self.code).ok_or_else(|| none(self.number))?;
        (question.aim)(&self.blanks, basis).map_err(|refusal| {
            let reason = format!("Question {} has no answer: {}", self.number, refusal.reason);
            Refusal { reason, ..refusal }
        })
    }
}

fn none(number: usize) -> Refusal {
    Refusal::new(
        format!("There is no question {number}."),
        "Write the number of a question that is asked here.",
    )
}

/// The blanks with the question that they name, if they name one.
pub(super) fn found(
    question: &Question,
    blanks: Blanks,
    asked: &[Map<String, Value>],
) -> Result<Blanks, Refusal> {
    let Some(blank) = question.blanks.iter().find(|blank| blank.kind == BlankKind::Question) else {
        return Ok(blanks);
    };
    let number = blanks.question(blank.name)?;
    let entry = number.checked_sub(1).and_then(|at| asked.get(at)).ok_or_else(|| none(number))?;
    let code = entry.get("question").and_then(Value::as_str).unwrap_or_default();
    let other = Question::of_code(code).ok_or_else(|| {
        Refusal::new(
            format!("Question {number}, “{}”, is not known here.", shortened(code)),
            "Write the number of another question.",
        )
    })?;
    if other.blanks.iter().any(|blank| blank.kind == BlankKind::Question) {
        return Err(Refusal::new(
            format!("Question {number} itself asks where to measure."),
            "Write the number of a question about a rate, a time or a temperature.",
        ));
    }
    let mut combinations = blanks::read(other, entry).map_err(|refusal| {
        let reason = format!("Question {number} has no answer: {}", refusal.reason);
        Refusal { reason, ..refusal }
    })?;
    match (combinations.pop(), combinations.is_empty()) {
        (Some(only), true) => Ok(blanks.about(Subject { number, code: other.code, blanks: only })),
        _ => Err(Refusal::new(
            format!("Question {number} asks for several values at once."),
            "Ask it for one value, or write the number of another question.",
        )),
    }
}

/// Exchanges two questions of a study; what other questions are about stays the same.
pub fn exchange(asked: &mut [Map<String, Value>], one: usize, other: usize) {
    if one.max(other) < asked.len() {
        asked.swap(one, other);
        renumber(asked, |at| match at {
            at if at == one => Some(other),
            at if at == other => Some(one),
            at => Some(at),
        });
    }
}

/// Takes a question out of a study; questions about it have an empty blank afterwards.
pub fn remove(asked: &mut Vec<Map<String, Value>>, gone: usize) {
    if gone < asked.len() {
        asked.remove(gone);
        renumber(asked, |at| (at != gone).then(|| at - usize::from(at > gone)));
    }
}

/// Gives every index in a blank for questions its new value; none empties the blank.
fn renumber(asked: &mut [Map<String, Value>], new: impl Fn(usize) -> Option<usize>) {
    let renewed = |value: &Value| match value.as_u64().and_then(|at| usize::try_from(at).ok()) {
        Some(at) => new(at).map(Value::from),
        None => Some(value.clone()),
    };
    for entry in asked {
        let code = entry.get("question").and_then(Value::as_str).unwrap_or_default();
        let blanks = Question::of_code(code).map(|question| question.blanks).unwrap_or_default();
        for blank in blanks.iter().filter(|blank| blank.kind == BlankKind::Question) {
            let Some(filled) = entry.get_mut(blank.name) else { continue };
            *filled = match &*filled {
                Value::Array(several) => several.iter().filter_map(renewed).collect(),
                single => renewed(single).unwrap_or(Value::Null),
            };
        }
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use serde_json::json;

    fn asked() -> Vec<Map<String, Value>> {
        ["rate-at", "speed-up", "next-measurement", "next-measurement"]
            .iter()
            .zip([json!(null), json!(null), json!(1), json!([0, 1])])
            .map(|(code, about)| {
                let entry = json!({"question": code, "for": about});
                entry.as_object().unwrap().clone()
            })
            .collect()
    }

    fn about(asked: &[Map<String, Value>]) -> Vec<&Value> {
        asked
            .iter()
            .filter(|entry| entry["question"] == "next-measurement")
            .map(|entry| &entry["for"])
            .collect()
    }

    #[test]
    fn numbers_follow_the_questions_they_name() {
        let mut moved = asked();
        exchange(&mut moved, 0, 1);
        assert_eq!(about(&moved), [&json!(0), &json!([1, 0])]);
        exchange(&mut moved, 1, 2);
        assert_eq!(about(&moved), [&json!(0), &json!([2, 0])]);
        exchange(&mut moved, 0, 9);
        assert_eq!(about(&moved), [&json!(0), &json!([2, 0])]);
        let mut fewer = asked();
        remove(&mut fewer, 0);
        assert_eq!(about(&fewer), [&json!(0), &json!([0])]);
        remove(&mut fewer, 0);
        assert_eq!(about(&fewer), [&json!(null), &json!([])]);
        remove(&mut fewer, 7);
        assert_eq!(fewer.len(), 2);
    }
}
