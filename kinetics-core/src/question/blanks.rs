//! The blanks of a question: read from a study, or from what was typed into the sentence.

use serde_json::{Map, Value};

use super::subject::Subject;
use super::{Blank, MOST_ROWS, Question};
use crate::answer::{Basis, Refusal, capitalised};
use crate::numeric::decimals::read_decimal;
use crate::problem::shortened;
use crate::quantity::{Kelvin, Quantity, Seconds};
use crate::temperature_law::Target;

/// What a blank takes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum BlankKind {
    /// A temperature.
    Temperature,
    /// A part of the initial amount, or a concentration.
    Part,
    /// A time.
    Time,
    /// Another question of the study: counted from 1 in sentences, from 0 in the study.
    Question,
}

impl BlankKind {
    /// What is expected, in words.
    pub fn expected(self) -> &'static str {
        match self {
            Self::Temperature => "a temperature such as 25 °C, or several: 5, 25, 40 °C",
            Self::Part => "a part such as 5 %, or a concentration such as 0.1 mol/L",
            Self::Time => "a time such as 8 h, or several: 1, 7, 30 d",
            Self::Question => "the number of a question, such as 1",
        }
    }

    fn default_unit(self) -> Option<&'static str> {
        match self {
            Self::Part => Some("%"),
            Self::Temperature | Self::Time | Self::Question => None,
        }
    }

    fn check(self, quantity: &Quantity) -> Result<(), String> {
        let outcome = match self {
            Self::Temperature => quantity.kelvin().map(drop),
            Self::Part => quantity.concentration().map(drop),
            Self::Time => quantity.seconds().map(drop),
            Self::Question => {
                let known = question_number(quantity.value).is_some() && quantity.unit.is_empty();
                return if known { Ok(()) } else { Err(complaint(quantity, self)) };
            }
        };
        outcome.map_err(|error| error.to_string())
    }

    /// What a study holds in a blank of this kind, one entry or a list, as quantities; a
    /// question's number counts from 1. What does not fit is left out.
    pub fn quantities(self, filled: &Value) -> Vec<Quantity> {
        entries(filled).0.iter().filter_map(|entry| self.quantity(entry)).collect()
    }

    /// What a study holds for one quantity in a blank of this kind.
    pub fn value(self, quantity: &Quantity) -> Value {
        match self {
            Self::Question => {
                question_number(quantity.value).map_or(Value::Null, |n| (n - 1).into())
            }
            _ => serde_json::to_value(quantity).unwrap_or(Value::Null),
        }
    }

    fn quantity(self, entry: &Value) -> Option<Quantity> {
        match self {
            Self::Question => {
                let from_zero = entry.as_u64().filter(|index| *index < MOST_QUESTIONS)?;
                Some(Quantity::new((from_zero + 1) as f64, ""))
            }
            _ => serde_json::from_value(entry.clone()).ok(),
        }
    }
}

/// Numbers of questions lie below this, so that they are exact as f64.
const MOST_QUESTIONS: u64 = 1 << 32;

/// A number of a question, from 1.
fn question_number(value: f64) -> Option<u64> {
    let whole = value >= 1.0 && value <= MOST_QUESTIONS as f64 && value.fract() == 0.0;
    whole.then_some(value as u64)
}

/// The entries of a blank, and whether it holds a list.
fn entries(filled: &Value) -> (&[Value], bool) {
    match filled {
        Value::Array(several) => (several.as_slice(), true),
        single => (std::slice::from_ref(single), false),
    }
}

fn complaint(found: impl std::fmt::Display, kind: BlankKind) -> String {
    let found = found.to_string();
    format!("Found “{}”, expected {}.", shortened(found.trim()), kind.expected())
}

/// Filled blanks of one question, one value each.
#[derive(Debug, Clone, PartialEq)]
pub struct Blanks {
    values: Vec<(&'static Blank, Quantity)>,
    /// Whether a blank held a list, so that the answer is a table.
    pub from_list: bool,
    /// Whose bound a one-sided question speaks of.
    pub bound: Target,
    /// The other question that this one is about, where it has such a blank.
    pub(super) subject: Option<Box<Subject>>,
}

impl Blanks {
    /// What stands in a blank; none where it is left empty.
    pub(super) fn filled(&self, name: &str) -> Option<&Quantity> {
        self.values.iter().find(|(blank, _)| blank.name == name).map(|(_, quantity)| quantity)
    }

    fn quantity(&self, name: &str) -> Result<&Quantity, Refusal> {
        self.filled(name)
            .ok_or_else(|| Refusal::new(format!("The blank “{name}” is empty."), "Fill it in."))
    }

    /// A temperature.
    ///
    /// # Errors
    /// A missing blank, an unknown unit, or a temperature that is not above 0 K.
    pub fn temperature(&self, name: &str) -> Result<Kelvin, Refusal> {
        let quantity = self.quantity(name)?;
        quantity.kelvin().map_err(|error| unusable(&error, BlankKind::Temperature))
    }

    /// A time above zero.
    ///
    /// # Errors
    /// A missing blank, an unknown unit, or a time that is not above zero.
    pub fn time(&self, name: &str) -> Result<Seconds, Refusal> {
        let time =
            self.quantity(name)?.seconds().map_err(|error| unusable(&error, BlankKind::Time))?;
        if time.0 > 0.0 {
            Ok(time)
        } else {
            Err(Refusal::new("The time is not above zero.", "Write a time above zero."))
        }
    }

    /// A part of the initial amount as a fraction.
    ///
    /// # Errors
    /// A missing blank, or as [`Basis::part`].
    pub fn part(&self, name: &str, basis: &Basis) -> Result<f64, Refusal> {
        basis.part(self.quantity(name)?)
    }

    /// The blanks as a study states them.
    pub fn to_map(&self) -> Map<String, Value> {
        let entry = |(blank, quantity): &(&Blank, Quantity)| {
            (blank.name.into(), blank.kind.value(quantity))
        };
        self.values.iter().map(entry).collect()
    }

    /// These blanks with the other question that they name.
    pub(super) fn about(self, subject: Subject) -> Self {
        Self { subject: Some(Box::new(subject)), ..self }
    }

    /// The number from 1 of the question that stands in a blank.
    ///
    /// # Errors
    /// A missing blank, or no such number.
    pub(super) fn question(&self, name: &str) -> Result<usize, Refusal> {
        let number = question_number(self.quantity(name)?.value);
        number.and_then(|number| usize::try_from(number).ok()).ok_or_else(|| {
            let expected = BlankKind::Question.expected();
            Refusal::new("The blank holds no question.", format!("Write {expected}."))
        })
    }
}

fn unusable(error: &crate::units::UnitError, kind: BlankKind) -> Refusal {
    let reason = format!("{}.", capitalised(&error.to_string()));
    Refusal::new(reason, format!("Write {}.", kind.expected()))
}

/// `bound`: `next-run`, also where it is absent, or `mean`.
fn bound(asked: &Map<String, Value>) -> Result<Target, Refusal> {
    match asked.get("bound").map(|b| b.as_str().unwrap_or_default()) {
        None | Some("next-run") => Ok(Target::NextRun),
        Some("mean") => Ok(Target::Mean),
        Some(other) => Err(Refusal::new(
            format!("“{}” is no bound known here.", shortened(other)),
            "Write next-run for a single batch, or mean for the average of many.",
        )),
    }
}

/// Every combination of the lists in a question's blanks, the last blank running fastest.
pub(super) fn read(
    question: &Question,
    asked: &Map<String, Value>,
) -> Result<Vec<Blanks>, Refusal> {
    let bound = bound(asked)?;
    let mut combinations =
        vec![Blanks { values: Vec::new(), from_list: false, bound, subject: None }];
    for blank in question.blanks {
        let given = match asked.get(blank.name).filter(|v| !v.is_null()) {
            Some(given) => given,
            None if blank.optional => continue,
            None => {
                return Err(Refusal::new(
                    format!("The blank “{}” is empty.", blank.name),
                    format!("Write {}.", blank.kind.expected()),
                ));
            }
        };
        let (entries, is_list) = entries(given);
        if combinations.len().saturating_mul(entries.len()) > MOST_ROWS {
            return Err(Refusal::new(
                format!("The lists make more than {MOST_ROWS} combinations."),
                "Shorten them, or ask twice.",
            ));
        }
        let quantities = entries
            .iter()
            .map(|entry| {
                blank.kind.quantity(entry).ok_or_else(|| {
                    Refusal::new(
                        format!(
                            "The blank “{}” holds {}.",
                            blank.name,
                            shortened(&entry.to_string())
                        ),
                        format!("Write {}.", blank.kind.expected()),
                    )
                })
            })
            .collect::<Result<Vec<Quantity>, Refusal>>()?;
        combinations = combinations
            .iter()
            .flat_map(|so_far| {
                quantities.iter().map(|quantity| {
                    let mut next = so_far.clone();
                    next.values.push((blank, quantity.clone()));
                    next.from_list |= is_list;
                    next
                })
            })
            .collect();
    }
    if combinations.is_empty() {
        return Err(Refusal::new("A list is empty.", "Write at least one value."));
    }
    Ok(combinations)
}

/// Reads what was typed into a blank: one quantity or a list that shares the last unit,
/// `25 °C`, `5, 25, 40 °C`, `8 h; 2 d`. `decimal` is the decimal sign in use; with `,` a list is
/// separated by `;` or by a comma before a space.
///
/// # Errors
/// What was found and what is expected, as a sentence.
pub fn parse_blank(text: &str, kind: BlankKind, decimal: char) -> Result<Vec<Quantity>, String> {
    let complaint = |found: &str| complaint(found, kind);
    let mut entries: Vec<(f64, String)> = Vec::new();
    for piece in split_list(text, decimal) {
        let (number, unit) = split_number(piece, decimal).ok_or_else(|| complaint(piece))?;
        entries.push((number, unit.to_owned()));
    }
    let mut last_unit = kind.default_unit().unwrap_or_default().to_owned();
    for (_, unit) in entries.iter_mut().rev() {
        if unit.is_empty() {
            unit.clone_from(&last_unit);
        } else {
            last_unit.clone_from(unit);
        }
    }
    let quantities: Vec<Quantity> =
        entries.into_iter().map(|(value, unit)| Quantity { value, unit }).collect();
    if quantities.is_empty() || quantities.len() > MOST_ROWS {
        return Err(complaint(text));
    }
    for quantity in &quantities {
        if quantity.unit.is_empty() && kind != BlankKind::Question {
            return Err(complaint(text));
        }
        kind.check(quantity)?;
    }
    Ok(quantities)
}

fn split_list(text: &str, decimal: char) -> impl Iterator<Item = &str> {
    let mut pieces = Vec::new();
    let mut start = 0;
    for (at, sign) in text.char_indices() {
        let next_is_space = text[at + sign.len_utf8()..].starts_with(char::is_whitespace);
        if sign == ';' || (sign == ',' && (decimal != ',' || next_is_space)) {
            pieces.push(&text[start..at]);
            start = at + sign.len_utf8();
        }
    }
    pieces.push(&text[start..]);
    pieces.into_iter().map(str::trim).filter(|p| !p.is_empty())
}

fn split_number(piece: &str, decimal: char) -> Option<(f64, &str)> {
    let end = piece
        .char_indices()
        .find(|(_, c)| !(c.is_ascii_digit() || matches!(c, '.' | ',' | '-' | '+' | '\u{2212}')))
        .map_or(piece.len(), |(at, _)| at);
    // An exponent belongs to the number: 1e-3 h.
    let exponent = piece[end..].strip_prefix(['e', 'E']).and_then(|rest| {
        let digits = rest
            .char_indices()
            .find(|(i, c)| !(c.is_ascii_digit() || (*i == 0 && matches!(c, '-' | '+'))))
            .map_or(rest.len(), |(at, _)| at);
        rest[..digits].ends_with(|c: char| c.is_ascii_digit()).then_some(end + 1 + digits)
    });
    let end = exponent.unwrap_or(end);
    let mut number = piece[..end].replace('\u{2212}', "-");
    if decimal == ',' {
        number = number.replace(',', ".");
    }
    read_decimal(&number).map(|n| (n, piece[end..].trim()))
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    fn read(text: &str, kind: BlankKind, decimal: char) -> Vec<(f64, String)> {
        let quantities = parse_blank(text, kind, decimal).unwrap();
        quantities.into_iter().map(|q| (q.value, q.unit)).collect()
    }

    #[test]
    fn one_value_or_several_share_the_unit_that_follows() {
        let celsius = |v: f64| (v, "°C".to_owned());
        assert_eq!(read("25 °C", BlankKind::Temperature, '.'), [celsius(25.0)]);
        assert_eq!(
            read("5, 25,40°C", BlankKind::Temperature, '.'),
            [celsius(5.0), celsius(25.0), celsius(40.0)]
        );
        assert_eq!(read("2,5; 7,5 °C", BlankKind::Temperature, ','), [celsius(2.5), celsius(7.5)]);
        assert_eq!(
            read("8 h; 2 d", BlankKind::Time, '.'),
            [(8.0, "h".to_owned()), (2.0, "d".to_owned())]
        );
        assert_eq!(read("\u{2212}18 °C", BlankKind::Temperature, '.'), [celsius(-18.0)]);
        assert_eq!(read("1e-3 h", BlankKind::Time, '.'), [(1e-3, "h".to_owned())]);
        assert_eq!(read("5", BlankKind::Part, '.'), [(5.0, "%".to_owned())]);
    }

    #[test]
    fn questions_count_from_one_in_sentences_and_from_zero_in_studies() {
        let kind = BlankKind::Question;
        let several = parse_blank("1, 3", kind, '.').unwrap();
        let kept: Vec<Value> = several.iter().map(|q| kind.value(q)).collect();
        assert_eq!(kept, [0, 2]);
        assert_eq!(kind.quantities(&Value::Array(kept)), several);
        assert!(kind.quantities(&serde_json::json!([-1, 0.5, "1", null])).is_empty());
        for text in ["0", "1.5", "-1", "1 h", "first", "1e300"] {
            assert!(parse_blank(text, kind, '.').is_err(), "{text}");
        }
    }

    #[test]
    fn what_is_no_quantity_is_said() {
        for text in ["", "warm", "25", "25 h", "-300 °C", "NaN °C", "1e999 °C", "<b>"] {
            let message = parse_blank(text, BlankKind::Temperature, '.').unwrap_err();
            assert!(message.len() > 20, "{text}: {message}");
        }
    }

    #[test]
    fn lists_multiply_and_the_last_runs_fastest() {
        let asked = serde_json::json!({
            "temperature": [{"value": 5, "unit": "°C"}, {"value": 25, "unit": "°C"}],
            "gone": [{"value": 1, "unit": "%"}, {"value": 5, "unit": "%"}]
        });
        let question = Question::of_code("time-to-extent").unwrap();
        let combinations = super::read(question, asked.as_object().unwrap()).unwrap();
        let gone: Vec<f64> =
            combinations.iter().map(|b| b.quantity("gone").unwrap().value).collect();
        let at: Vec<f64> =
            combinations.iter().map(|b| b.quantity("temperature").unwrap().value).collect();
        assert_eq!(gone, [1.0, 5.0, 1.0, 5.0]);
        assert_eq!(at, [5.0, 5.0, 25.0, 25.0]);
        assert!(combinations[0].from_list);
    }
}
