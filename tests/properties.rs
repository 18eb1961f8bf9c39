//! Properties that hold for any study: units never change an answer, hotter is never slower when
//! the activation energy is positive, intervals contain their estimates, and a study saved and
//! opened gives the same findings.

use checks::found;
use kinetics_core::study::{Findings, Study, evaluate};
use proptest::prelude::*;
use serde_json::{Value, json};

/// Runs of an invented reaction: temperatures in K, k in 1/s with relative errors.
#[derive(Debug, Clone)]
struct Runs {
    temperatures: Vec<f64>,
    rates: Vec<f64>,
    relative_errors: Vec<f64>,
}

fn runs() -> impl Strategy<Value = Runs> {
    let run = (0.0..1.0_f64, -0.3..0.3_f64, 0.01..0.3_f64);
    (
        250.0..450.0_f64,
        15.0..60.0_f64,
        30e3..150e3_f64,
        -14.0..-4.0_f64,
        prop::collection::vec(run, 3..9),
    )
        .prop_map(|(coldest, span, energy, ln_rate, points)| {
            let count = points.len() as f64;
            let mut runs = Runs { temperatures: vec![], rates: vec![], relative_errors: vec![] };
            for (i, (jitter, noise, error)) in points.into_iter().enumerate() {
                let share = (i as f64 + 0.5 * jitter) / count;
                let t = ((coldest + span * share) * 100.0).round() / 100.0;
                let x = 1.0 / t - 1.0 / (coldest + 0.5 * span);
                runs.temperatures.push(t);
                runs.rates.push((ln_rate - energy / 8.314_462_618 * x + noise * error).exp());
                runs.relative_errors.push(error);
            }
            runs
        })
}

fn text(runs: &Runs, errors: bool, celsius: bool, per: (&str, f64)) -> String {
    let (scale, shift) = if celsius { ("°C", -273.15) } else { ("K", 0.0) };
    let mut text = format!("T/{scale}\tk / {}{}\n", per.0, if errors { "\ts(k)" } else { "" });
    for ((t, k), e) in runs.temperatures.iter().zip(&runs.rates).zip(&runs.relative_errors) {
        let k = k * per.1;
        text.push_str(&format!("{:.2}\t{k:e}", t + shift));
        if errors {
            text.push_str(&format!("\t{:e}", k * e));
        }
        text.push('\n');
    }
    text
}

fn celsius(kelvin: f64) -> Value {
    json!({"value": kelvin - 273.15, "unit": "°C"})
}

/// One of every question that speaks of a temperature or a time.
fn questions(runs: &Runs) -> Value {
    let coldest = runs.temperatures[0];
    let (t1, t2) = (celsius(coldest - 5.0), celsius(coldest + 20.0));
    let part = |value: f64| json!({"value": value, "unit": "%"});
    let hours = json!({"value": 8.0, "unit": "h"});
    json!({"asked": [
        {"question": "rate-at", "temperature": t1},
        {"question": "time-to-extent", "temperature": t1, "gone": part(5.0)},
        {"question": "speed-up", "to": t2, "from": t1},
        {"question": "longest-stand", "temperature": t1, "keep": part(98.0)},
        {"question": "completion-time", "temperature": t2, "gone": part(99.0)},
        {"question": "extent-after", "temperature": t1, "time": hours},
        {"question": "equivalent-time", "temperature": t2, "time": hours, "other_temperature": t1},
        {"question": "temperature-for", "gone": part(90.0), "time": hours},
        {"question": "warmest-storage", "keep": part(98.0), "time": hours}
    ]})
}

fn same(a: Option<f64>, b: Option<f64>, tolerance: f64) -> bool {
    match (a, b) {
        (Some(a), Some(b)) => (a - b).abs() <= tolerance * a.abs().max(b.abs()),
        (None, None) => true,
        _ => false,
    }
}

/// Pasting rounds temperatures and rates in their 16th digit; conversions back and forth and the
/// exponential of a rate far from the data multiply that to 1e-8 at most.
const CONVERSION: f64 = 1e-8;

fn agree(a: &Findings, b: &Findings) -> Result<(), TestCaseError> {
    prop_assert_eq!(a.answers.len(), b.answers.len());
    for (a, b) in a.answers.iter().zip(&b.answers) {
        prop_assert!(same(a.value, b.value, CONVERSION), "{:?}\n{:?}", a, b);
        prop_assert!(same(a.low, b.low, CONVERSION), "{:?}\n{:?}", a, b);
        prop_assert!(same(a.high, b.high, CONVERSION), "{:?}\n{:?}", a, b);
        prop_assert_eq!(a.grounds, b.grounds);
        prop_assert_eq!(a.refused.is_some(), b.refused.is_some());
    }
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, failure_persistence: None, ..Default::default() })]

    #[test]
    fn units_never_change_an_answer(runs in runs(), errors: bool) {
        let asked = questions(&runs);
        let base = found(&text(&runs, errors, false, ("s⁻¹", 1.0)), asked.clone());
        for (celsius, per) in [
            (true, ("s⁻¹", 1.0)),
            (false, ("1/h", 3600.0)),
            (true, ("min-1", 60.0)),
            (true, ("d^-1", 86_400.0)),
        ] {
            agree(&base, &found(&text(&runs, errors, celsius, per), asked.clone()))?;
        }
        let display = json!({"display": {"temperature": "K", "energy": "kcal/mol", "time": "d", "decimal": ","}});
        let mut shown = asked.clone();
        if let (Value::Object(into), Value::Object(more)) = (&mut shown, display) {
            into.extend(more);
        }
        agree(&base, &found(&text(&runs, errors, false, ("s⁻¹", 1.0)), shown))?;
    }

    #[test]
    fn hotter_is_never_slower(runs in runs(), from in 200.0..500.0_f64, step in 0.1..80.0_f64) {
        for law in ["arrhenius", "eyring", "log-linear"] {
            let at = |t: f64| json!({"question": "rate-at", "temperature": {"value": t, "unit": "K"}});
            let findings = found(
                &text(&runs, false, false, ("s⁻¹", 1.0)),
                json!({"assumed": {"temperature_law": law}, "asked": [at(from), at(from + step)]}),
            );
            // Eyring's rate falls with temperature below T = −ΔH‡/R only.
            if findings.law.as_ref().is_some_and(|l| l.enthalpy_of_activation.value > 0.0) {
                let (slow, fast) = (findings.answers[0].value, findings.answers[1].value);
                prop_assert!(slow.unwrap_or(0.0) <= fast.unwrap_or(f64::MAX), "{law}");
            }
        }
    }

    #[test]
    fn intervals_contain_their_estimates(runs in runs(), errors: bool) {
        let findings = found(&text(&runs, errors, false, ("s⁻¹", 1.0)), questions(&runs));
        let law = findings.law.as_ref().unwrap();
        for estimate in [&law.activation_energy, &law.ln_rate_at_reference, &law.pre_exponential_factor] {
            prop_assert!(estimate.low.unwrap() <= estimate.value && estimate.value <= estimate.high.unwrap());
        }
        for answer in findings.answers.iter().filter(|a| a.refused.is_none()) {
            let value = answer.value.unwrap();
            prop_assert!(answer.low.is_none_or(|low| low <= value), "{:?}", answer);
            prop_assert!(answer.high.is_none_or(|high| value <= high), "{:?}", answer);
        }
    }

    #[test]
    fn a_study_saved_and_opened_gives_the_same_findings(runs in runs(), errors: bool) {
        let study = checks::study(&text(&runs, errors, true, ("1/h", 3600.0)), questions(&runs));
        let opened = Study::from_json(&study.to_json()).unwrap();
        prop_assert_eq!(&opened, &study);
        let (before, after) = (evaluate(&study), evaluate(&opened));
        prop_assert_eq!(
            serde_json::to_string(&before).unwrap(),
            serde_json::to_string(&after).unwrap()
        );
    }

    #[test]
    fn no_text_and_no_study_makes_it_panic(text in any::<String>(), more in "[0-9°CKkT/s,;.\t\n−e-]{0,200}") {
        found(&text, json!({}));
        let findings = found(&format!("T/K\tk, 1/s\n{more}"), json!({}));
        let printed = serde_json::to_string(&findings).unwrap();
        prop_assert!(!printed.contains("NaN"));
        if let Ok(study) = Study::from_json(&text) {
            evaluate(&study);
        }
    }
}
