//! The JavaScript interface: a study in, findings out; and what a text is
//! taken to mean.

use js_sys::JSON;
use kinetics_core::study::{self, Study, StudyError};
use kinetics_core::table::{self, Cell, Content, Hints, Table};
use serde::{Deserialize, Serialize};
use serde_json::{Value, json};
use serde_wasm_bindgen::Serializer;
use wasm_bindgen::JsCast;
use wasm_bindgen::prelude::{JsError, JsValue, wasm_bindgen};

#[wasm_bindgen(typescript_custom_section)]
const TYPES: &str = include_str!("api.d.ts");

/// The findings of a study.
///
/// # Errors
/// Only when the argument is no study: no object, or no `kelvinclock` in it,
/// or something that no JSON can hold.
#[wasm_bindgen(unchecked_return_type = "Findings")]
pub fn evaluate(
    #[wasm_bindgen(unchecked_param_type = "Study")] study: &JsValue,
) -> Result<JsValue, JsError> {
    let text = json_text(study)?.ok_or(StudyError::NotAnObject { found: "nothing" })?;
    to_javascript(&study::evaluate(&Study::from_json(&text)?))
}

/// What a pasted text is taken to mean, before anything is computed.
///
/// # Errors
/// Only when the hints are no hints.
#[wasm_bindgen(unchecked_return_type = "Table")]
pub fn read_table(
    text: &str,
    #[wasm_bindgen(unchecked_optional_param_type = "Hints")] hints: &JsValue,
) -> Result<JsValue, JsError> {
    let hints = match json_text(hints)? {
        None => Hints::default(),
        Some(json) => known_hints(&json)?,
    };
    to_javascript(&table_value(text, &table::read_table(text, &hints)))
}

/// The JSON of a value; none where there is no value.
fn json_text(value: &JsValue) -> Result<Option<String>, JsError> {
    let text = JSON::stringify(value).map_err(|error| {
        let reason = error.dyn_ref::<js_sys::Error>().map(|error| String::from(error.message()));
        JsError::new(&format!(
            "The argument cannot be written as JSON: {}",
            reason.unwrap_or_else(|| "it throws something else than an error".to_owned())
        ))
    })?;
    // `undefined`, and functions and symbols, give no text at all.
    Ok(JsValue::from(text).as_string().filter(|text| text != "null"))
}

/// As JSON would hold it: no `Map`, no `undefined`, and `null` for what is not
/// finite.
fn to_javascript(document: &impl Serialize) -> Result<JsValue, JsError> {
    let value = serde_json::to_value(document)?;
    Ok(value.serialize(&Serializer::json_compatible())?)
}

fn known_hints(json: &str) -> Result<Hints, JsError> {
    let value: Value = serde_json::from_str(json)?;
    if !value.is_object() {
        return Err(JsError::new("The hints are no object."));
    }
    Hints::deserialize(value).map_err(|error| JsError::new(&format!("The hints are none: {error}")))
}

fn table_value(text: &str, table: &Table) -> Value {
    let rows: Vec<Value> = table
        .rows
        .iter()
        .map(|row| {
            let cells: Vec<Value> = row.cells.iter().map(|cell| cell_value(text, cell)).collect();
            json!({"row": row.line, "cells": cells})
        })
        .collect();
    json!({
        "form": table.form,
        "decimal": table.decimal,
        "columns": table.columns,
        "rows": rows,
        "problems": table.problems,
        "choices": table.choices,
    })
}

fn cell_value(text: &str, cell: &Cell) -> Value {
    let (kind, value, error) = match cell.content {
        Content::Number { value, error } => ("number", Some(value), error),
        Content::Marked { value, error } => ("marked", Some(value), error),
        Content::Below(limit) => ("below", limit, None),
        Content::Text(_) => ("text", None, None),
        Content::Empty => ("empty", None, None),
        Content::NotDetermined => ("not-determined", None, None),
        Content::Bad => ("bad", None, None),
    };
    let written = text.get(cell.span.clone()).unwrap_or_default();
    json!({"text": written, "kind": kind, "value": value, "error": error})
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    #[test]
    fn cells_show_what_was_written_and_what_it_means() {
        let text = "T/°C\tk, 1/h\n50\t0.0021\n60\tn.d.\n";
        let value = table_value(text, &table::read_table(text, &Hints::default()));
        assert_eq!(value["rows"][0]["row"], 2);
        assert_eq!(
            value["rows"][0]["cells"][1],
            json!({"text": "0.0021", "kind": "number", "value": 0.0021, "error": null})
        );
        assert_eq!(value["rows"][1]["cells"][1]["kind"], "not-determined");
        assert_eq!(value["columns"].as_array().unwrap().len(), 2);
        assert_eq!(value["problems"], json!([]));
    }

    #[test]
    fn the_types_name_every_role_and_form() {
        let types = include_str!("api.d.ts");
        let roles = table::Role::ALL.iter().map(|role| role.code());
        let questions = kinetics_core::question::QUESTIONS.iter().map(|question| question.code);
        for code in roles.chain(questions) {
            assert!(types.contains(&format!("\"{code}\"")), "{code}");
        }
    }
}
