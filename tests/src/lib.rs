//! Shared helpers of the checks.

pub mod simulation;

use kinetics_core::study::{Findings, Study, evaluate};
use serde_json::{Value, json};

/// Declares tests that run natively and, through Node, as wasm.
#[macro_export]
macro_rules! checks {
    ($($(#[$about:meta])* fn $name:ident() $body:block)*) => {
        $(
            $(#[$about])*
            #[cfg_attr(not(target_arch = "wasm32"), test)]
            #[cfg_attr(target_arch = "wasm32", wasm_bindgen_test::wasm_bindgen_test)]
            fn $name() $body
        )*
    };
}

/// Fails unless `found` is within a relative `tolerance` of `expected`.
#[track_caller]
pub fn close(found: f64, expected: f64, tolerance: f64) {
    let off = (found / expected - 1.0).abs();
    assert!(
        off <= tolerance,
        "found {found}, expected {expected} within {tolerance:e}, off {off:e}"
    );
}

/// A study of pasted text with further keys, as a JSON object.
pub fn study(text: &str, more: Value) -> Study {
    let mut document = json!({"kelvinclock": 1, "measured": {"form": "rates", "text": text}});
    merge(&mut document, more);
    Study::from_value(document).unwrap_or_default()
}

/// Findings of a pasted text with further keys.
pub fn found(text: &str, more: Value) -> Findings {
    evaluate(&study(text, more))
}

/// A paste of temperatures in K and rate constants under a unit, every digit kept.
pub fn paste(unit: &str, temperatures_kelvin: &[f64], rate_constants: &[f64]) -> String {
    let mut text = format!("T/K\tk / {unit}\n");
    for (t, k) in temperatures_kelvin.iter().zip(rate_constants) {
        text.push_str(&format!("{t}\t{k:e}\n"));
    }
    text
}

/// The codes of the remarks that fired.
pub fn remark_codes(findings: &Findings) -> Vec<&str> {
    findings.remarks.iter().map(|r| r.code.as_str()).collect()
}

fn merge(into: &mut Value, more: Value) {
    match (into, more) {
        (Value::Object(into), Value::Object(more)) => {
            for (key, value) in more {
                merge(into.entry(key).or_insert(Value::Null), value);
            }
        }
        (into, more) => *into = more,
    }
}
