//! The study file: what goes in. Keys that are not known here are kept and saved again; a key
//! whose value does not fit is set aside with a problem, and the rest still opens.

use serde::de::DeserializeOwned;
use serde::{Deserialize, Serialize};
use serde_json::{Map, Value};
use thiserror::Error;

use crate::problem::{Position, Problem, shortened};
use crate::quantity::Quantity;
use crate::rate_constant::Noise;
use crate::table::{Decimal, ErrorKind, Form, Role, SignalIs};
use crate::temperature_law::ScatterChoice;

/// The version of the study format that is written here.
pub const VERSION: u64 = 1;

/// Why a text or value is no study at all.
#[derive(Debug, Clone, PartialEq, Eq, Error)]
pub enum StudyError {
    /// Not JSON.
    #[error("This is no study file: it is not JSON (line {line}, column {column}).")]
    NotJson {
        /// Where reading stopped, from 1.
        line: usize,
        /// Where reading stopped, from 1.
        column: usize,
    },
    /// JSON, but not an object.
    #[error("This is no study: expected an object with the key “kelvinclock”, found {found}.")]
    NotAnObject {
        /// What it is instead.
        found: &'static str,
    },
    /// An object without the key that marks a study.
    #[error("This is no study: the key “kelvinclock” with a version number is missing.")]
    NoVersion,
}

/// Everything about one reaction.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, Default)]
#[serde(default)]
pub struct Study {
    /// Version of the format.
    pub kelvinclock: u64,
    /// Title.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub title: String,
    /// Free text.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub note: String,
    /// What was measured.
    pub measured: Measured,
    /// What is assumed about it.
    pub assumed: Assumed,
    /// Heats, for what they decide.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub heat: Option<HeatData>,
    /// How to show numbers.
    pub display: DisplayChoice,
    /// Questions, each an object with its code and its blanks.
    pub asked: Vec<Map<String, Value>>,
    /// Keys that this version does not know.
    #[serde(flatten)]
    pub other: Map<String, Value>,
    /// Values that did not fit, by section and key; saved again where the key is still free.
    #[serde(skip)]
    pub set_aside: Vec<(&'static str, String, Value)>,
    /// What was wrong with them.
    #[serde(skip)]
    pub problems: Vec<Problem>,
}

/// What was measured.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, Default)]
#[serde(default)]
pub struct Measured {
    /// Form of the data.
    pub form: Form,
    /// What was pasted, to the letter.
    pub text: String,
    /// Roles and units where the user chose them.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub columns: Vec<ColumnChoice>,
    /// Decimal sign where the user chose it.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub decimal: Option<Decimal>,
    /// What a stated error is: `sd`, `standard-error`, `half-width-95`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub error_is: Option<ErrorKind>,
    /// Rows left out, with reasons.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub excluded: Vec<Excluded>,
    /// Uncertainty of the thermometer.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub thermometer: Option<Thermometer>,
    /// Initial concentration, for orders other than one.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub initial_concentration: Option<Quantity>,
    /// Progress: whether the signal follows what is left or what forms.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub signal_is: Option<SignalIs>,
    /// Progress: the signal at time zero; free where absent.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub start: Option<LevelChoice>,
    /// Progress: the signal when all has reacted.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub end: Option<LevelChoice>,
    /// Progress: how noise goes with the signal; constant where absent.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub noise: Option<Noise>,
    /// Times: the part gone at each of them.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub extent: Option<Quantity>,
    /// An activation energy from elsewhere, to compare with.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub stated_activation_energy: Option<Quantity>,
    /// Known law: its activation energy.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub activation_energy: Option<StatedQuantity>,
    /// Known law: its rate constant.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub rate_constant: Option<StatedQuantity>,
    /// Known law: the temperature of that rate constant.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub temperature: Option<Quantity>,
    /// Known law: which of its values are assumed, not measured.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub assumed: Vec<String>,
    /// Keys that this version does not know.
    #[serde(flatten)]
    pub other: Map<String, Value>,
}

/// A column's role and unit as the user chose them.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, Default)]
#[serde(default)]
pub struct ColumnChoice {
    /// Role.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub role: Option<Role>,
    /// Unit.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub unit: Option<String>,
    /// What its numbers are multiplied by to count in the unit.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub multiplier: Option<f64>,
    /// Keys that this version does not know.
    #[serde(flatten)]
    pub other: Map<String, Value>,
}

/// A row left out by the user.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Excluded {
    /// Physical line of the text, from 1.
    pub row: usize,
    /// Why.
    #[serde(default)]
    pub reason: String,
}

/// A value with its standard deviation.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct StatedQuantity {
    /// The number in `unit`.
    pub value: f64,
    /// Standard deviation in `unit`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub sd: Option<f64>,
    /// The unit.
    pub unit: String,
}

/// Heat of reaction and heat capacity.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, Default)]
#[serde(default)]
pub struct HeatData {
    /// Heat set free per mass.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub heat_of_reaction: Option<Quantity>,
    /// Heat capacity per mass.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub heat_capacity: Option<Quantity>,
    /// Keys that this version does not know.
    #[serde(flatten)]
    pub other: Map<String, Value>,
}

/// Uncertainty of the temperatures.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, Default)]
#[serde(default)]
pub struct Thermometer {
    /// Random, of each run.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub sd: Option<Quantity>,
    /// Common to all runs, of unknown sign.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub offset: Option<Quantity>,
}

/// What is assumed; what is absent is inferred.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, Default)]
#[serde(default)]
pub struct Assumed {
    /// Order of reaction.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub order: Option<OrderChoice>,
    /// `arrhenius`, `eyring`, `arrhenius-with-power`, `log-linear`, `curved`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub temperature_law: Option<LawChoice>,
    /// The power of T of `arrhenius-with-power`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub power: Option<f64>,
    /// `automatic`, `from-residuals`, `as-stated`, `as-stated-plus-run-to-run`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub scatter: Option<ScatterChoice>,
    /// Level of intervals; 0.95 where absent.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub level: Option<f64>,
    /// Keys that this version does not know.
    #[serde(flatten)]
    pub other: Map<String, Value>,
}

/// An order, or how to find it.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(untagged)]
pub enum OrderChoice {
    /// A number.
    Number(f64),
    /// `free` or `compare`.
    Word(OrderWord),
}

/// How an order is found from progress data.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum OrderWord {
    /// Fitted.
    Free,
    /// Chosen among usual ones.
    Compare,
}

/// A level of a signal, or how to find it.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(untagged)]
pub enum LevelChoice {
    /// `free` or `shared`.
    Word(LevelWord),
    /// Given; without a unit where the signal has none.
    Given(Quantity),
}

/// How a level is found.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum LevelWord {
    /// For each run.
    Free,
    /// Once for all runs; starts only.
    Shared,
}

/// The code of a temperature law.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize, Default)]
#[serde(rename_all = "kebab-case")]
pub enum LawChoice {
    /// Arrhenius.
    #[default]
    Arrhenius,
    /// Eyring.
    Eyring,
    /// Arrhenius with a fixed power of T.
    ArrheniusWithPower,
    /// log10 k linear in T.
    LogLinear,
    /// Arrhenius with a quadratic term.
    Curved,
}

/// How to show numbers.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, Default)]
#[serde(default)]
pub struct DisplayChoice {
    /// Scale of temperatures.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub temperature: Option<crate::units::TemperatureUnit>,
    /// Unit of energies.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub energy: Option<crate::units::EnergyUnit>,
    /// Unit of times, or `automatic`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub time: Option<String>,
    /// Decimal sign.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub decimal: Option<Decimal>,
    /// Keys that this version does not know.
    #[serde(flatten)]
    pub other: Map<String, Value>,
}

impl Study {
    /// A study with nothing in it.
    pub fn new() -> Self {
        Self { kelvinclock: VERSION, ..Self::default() }
    }

    /// Opens the text of a study file.
    ///
    /// # Errors
    /// Only where the text is no study at all; see [`StudyError`].
    pub fn from_json(text: &str) -> Result<Self, StudyError> {
        let text = text.trim_start_matches('\u{feff}');
        let value: Value = serde_json::from_str(text)
            .map_err(|e| StudyError::NotJson { line: e.line(), column: e.column() })?;
        Self::from_value(value)
    }

    /// Opens a study from its JSON value.
    ///
    /// # Errors
    /// Only where the value is no study at all; see [`StudyError`].
    pub fn from_value(value: Value) -> Result<Self, StudyError> {
        let mut document = match value {
            Value::Object(document) => document,
            other => return Err(StudyError::NotAnObject { found: kind_of(&other) }),
        };
        if !document.get("kelvinclock").is_some_and(Value::is_u64) {
            return Err(StudyError::NoVersion);
        }
        let mut problems = Vec::new();
        let mut set_aside = Vec::new();
        let mut section = |name: &'static str| -> Map<String, Value> {
            match document.remove(name) {
                None | Some(Value::Null) => Map::new(),
                Some(Value::Object(map)) => map,
                Some(other) => {
                    problems.push(misfit(name, &other, "an object"));
                    set_aside.push(("", name.to_owned(), other));
                    Map::new()
                }
            }
        };
        let (measured, assumed, display) =
            (section("measured"), section("assumed"), section("display"));
        let measured = lenient("measured", measured, &mut problems, &mut set_aside);
        let assumed = lenient("assumed", assumed, &mut problems, &mut set_aside);
        let display = lenient("display", display, &mut problems, &mut set_aside);
        let rest: Self = lenient("", document, &mut problems, &mut set_aside);
        Ok(Self { measured, assumed, display, problems, set_aside, ..rest })
    }

    /// The study as its JSON value, unknown and unfitting keys included.
    pub fn to_value(&self) -> Value {
        let mut value = serde_json::to_value(self).unwrap_or(Value::Null);
        for (section, key, kept) in &self.set_aside {
            let target = if section.is_empty() { Some(&mut value) } else { value.get_mut(section) };
            if let Some(Value::Object(map)) = target {
                map.entry(key.clone()).or_insert_with(|| kept.clone());
            }
        }
        value
    }

    /// The text of the study file.
    pub fn to_json(&self) -> String {
        serde_json::to_string_pretty(&self.to_value()).unwrap_or_default()
    }
}

/// Reads a section; a key whose value does not fit is set aside and named in a problem.
fn lenient<T: DeserializeOwned + Default>(
    section: &'static str,
    mut map: Map<String, Value>,
    problems: &mut Vec<Problem>,
    set_aside: &mut Vec<(&'static str, String, Value)>,
) -> T {
    if let Ok(whole) = serde_json::from_value(Value::Object(map.clone())) {
        return whole;
    }
    let keys: Vec<String> = map.keys().cloned().collect();
    for key in keys {
        let Some(value) = map.get(&key) else { continue };
        let alone = Map::from_iter([(key.clone(), value.clone())]);
        if let Err(error) = serde_json::from_value::<T>(Value::Object(alone)) {
            let name = if section.is_empty() { key.clone() } else { format!("{section}.{key}") };
            problems.push(misfit(&name, value, &expectation(&error)));
            if let Some(value) = map.remove(&key) {
                set_aside.push((section, key, value));
            }
        }
    }
    serde_json::from_value(Value::Object(map)).unwrap_or_default()
}

fn misfit(name: &str, found: &Value, expected: &str) -> Problem {
    let message = format!(
        "The study file has “{name}” = {}; expected {expected}. It is kept in the file and not used.",
        shortened(&found.to_string())
    );
    Problem::said(&Position::default(), &found.to_string(), expected, &message)
}

/// What serde expected: the part of its message after that word, or the whole of it.
fn expectation(error: &serde_json::Error) -> String {
    let message = error.to_string();
    match message.split_once("expected ") {
        Some((_, expected)) => expected.to_owned(),
        None => format!("a value of another kind ({message})"),
    }
}

fn kind_of(value: &Value) -> &'static str {
    match value {
        Value::Null => "null",
        Value::Bool(_) => "true or false",
        Value::Number(_) => "a number",
        Value::String(_) => "a text",
        Value::Array(_) => "a list",
        Value::Object(_) => "an object",
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    #[test]
    fn what_is_no_study_is_said() {
        let said = |text: &str| Study::from_json(text).unwrap_err().to_string();
        assert!(said("").contains("not JSON"));
        assert!(said("[1]").contains("found a list"));
        assert!(said("{}").contains("missing"));
        assert!(said("{\"kelvinclock\": \"1\"}").contains("missing"));
        let deep = "[".repeat(100_000);
        assert!(said(&deep).contains("not JSON"));
    }

    #[test]
    fn unknown_and_unfitting_keys_survive_saving() {
        let text = r#"{
            "kelvinclock": 1, "title": 5, "later": {"a": [1]},
            "measured": {"form": "rates", "text": "x", "decimal": 7, "excluded": "all", "extra": true},
            "assumed": {"scatter": "by feeling", "level": 0.9},
            "display": "large",
            "asked": []
        }"#;
        let study = Study::from_json(text).unwrap();
        assert_eq!(study.measured.text, "x");
        assert_eq!(study.assumed.level, Some(0.9));
        assert_eq!(study.problems.len(), 5, "{:#?}", study.problems);
        let scatter = study.problems.iter().find(|p| p.sentence.contains("scatter")).unwrap();
        assert!(scatter.sentence.contains("by feeling") && scatter.sentence.contains("automatic"));
        let saved = study.to_value();
        let given: Value = serde_json::from_str(text).unwrap();
        for (section, key) in
            [("measured", "decimal"), ("measured", "extra"), ("assumed", "scatter")]
        {
            assert_eq!(saved[section][key], given[section][key], "{section}.{key}");
        }
        assert_eq!(saved["title"], 5);
        assert_eq!(saved["later"], given["later"]);
        assert_eq!(saved["display"].as_object().map(Map::len), Some(0));
    }

    #[test]
    fn a_study_saved_and_opened_is_the_same() {
        let mut study = Study::new();
        study.title = "Glaze hardener".into();
        study.measured.text = "T/°C\tk, 1/h\n50\t0.02".into();
        study.assumed.order = Some(OrderChoice::Number(1.5));
        assert_eq!(Study::from_json(&study.to_json()).unwrap(), study);
    }
}
