//! Where to measure next, asked of whole studies: what comes out is what a study with that run
//! would give, and what cannot be said is refused with its remedy.

use checks::found;
use kinetics_core::answer::Answer;
use serde_json::{Value, json};

const TEXT: &str = "T/°C\tk, 1/d\n50\t0.0021\n60\t0.0059\n70\t0.0168\n80\t0.0391\n";

fn celsius(t: f64) -> Value {
    json!({"value": t, "unit": "°C"})
}

fn percent(p: f64) -> Value {
    json!({"value": p, "unit": "%"})
}

fn slow() -> Value {
    json!({"question": "time-to-extent", "temperature": celsius(25.0), "gone": percent(5.0)})
}

fn next(more: Value) -> Value {
    let mut entry = json!({
        "question": "next-measurement", "for": 0, "lowest": celsius(25.0), "highest": celsius(60.0)
    });
    if let (Value::Object(entry), Value::Object(more)) = (&mut entry, more) {
        entry.extend(more);
    }
    entry
}

/// The answer to `next`, the second question, the first being `about`.
fn answer(text: &str, about: Value, next: Value) -> Answer {
    found(text, json!({"asked": [about, next]})).answers.remove(1)
}

fn detail(answer: &Answer, name: &str) -> f64 {
    answer.detail.get(name).and_then(Value::as_f64).unwrap_or(f64::NAN)
}

fn refusal(answer: &Answer) -> String {
    let refused = answer.refused.as_ref().unwrap_or_else(|| panic!("{answer:?}"));
    assert!(refused.needs.ends_with('.') && refused.needs.len() > 10, "{refused:?}");
    assert_eq!((answer.value, answer.low, answer.high), (None, None, None));
    refused.reason.clone()
}

/// Half of what lies between the limits of the first answer, as a factor.
fn factor(text: &str, about: Value) -> f64 {
    let answer = found(text, json!({"asked": [about]})).answers.remove(0);
    (answer.high.unwrap() / answer.low.unwrap()).sqrt()
}

#[test]
fn the_coldest_run_that_time_allows_is_recommended() {
    let free = answer(TEXT, slow(), next(json!({})));
    assert_eq!(free.value, Some(298.15), "{}", free.sentence);
    assert!((detail(&free, "now") / factor(TEXT, slow()) - 1.0).abs() < 1e-6);
    assert!(detail(&free, "after") < detail(&free, "now"));

    let within = |days: f64| next(json!({"within": {"value": days, "unit": "d"}}));
    let month = answer(TEXT, slow(), within(60.0));
    let t = month.value.unwrap();
    assert!(t > 310.0 && t < 325.0, "{}", month.sentence);
    assert!(detail(&month, "duration") <= 60.0 * 86_400.0);
    // One kelvin colder would take too long.
    let curve = month.detail["curve"].as_array().unwrap();
    let colder =
        curve.iter().find(|p| (p["temperature"].as_f64().unwrap() - (t - 1.0)).abs() < 1e-6);
    assert!(colder.unwrap()["duration"].as_f64().unwrap() > 60.0 * 86_400.0);
    for words in ["Measure at ", "a factor of ", " becomes ", "the run takes ", "10\u{a0}% gone"] {
        assert!(month.sentence.contains(words), "{}", month.sentence);
    }
    let hour = answer(TEXT, slow(), within(0.04));
    assert!(refusal(&hour).contains("60\u{a0}°C"), "{hour:?}");
}

/// The promise is kept by the study itself: with a run at the recommended temperature that is off
/// the law by what was expected, the answer's interval is the one foretold.
#[test]
fn a_run_as_expected_gives_the_interval_foretold() {
    let findings = found(TEXT, json!({"asked": [slow(), next(json!({}))]}));
    let law = findings.law.unwrap();
    let best = findings.answers[1].value.unwrap();
    let covariance = law.covariance.unwrap();
    let x = -(1.0 / best - 1.0 / law.reference_temperature_kelvin) / 8.314_462_618_153_24;
    let s = detail(&findings.answers[1], "run_error").powi(2).ln_1p().sqrt();
    let along = covariance[0][0] + 2.0 * x * covariance[0][1] + x * x * covariance[1][1];
    let ln_rate =
        law.ln_rate_at_reference.value + x * law.activation_energy.value + (along + s * s).sqrt();
    let text = format!("{TEXT}{}\t{:e}\n", best - 273.15, ln_rate.exp() * 86_400.0);
    let foretold = detail(&findings.answers[1], "after");
    assert!((factor(&text, slow()) / foretold - 1.0).abs() < 1e-6, "{foretold}");
}

#[test]
fn stated_errors_and_every_question_are_served() {
    let with_errors = TEXT.replace("k, 1/d", "k, 1/d\ts, %").replace("1\n", "1\t4\n");
    let with_errors = with_errors.replace("9\n", "9\t4\n").replace("8\n", "8\t4\n");
    let hours = json!({"value": 8.0, "unit": "h"});
    for about in [
        json!({"question": "rate-at", "temperature": celsius(25.0)}),
        json!({"question": "longest-stand", "temperature": celsius(25.0), "keep": percent(98.0)}),
        json!({"question": "completion-time", "temperature": celsius(90.0), "gone": percent(99.0)}),
        json!({"question": "extent-after", "temperature": celsius(25.0), "time": hours}),
        json!({"question": "speed-up", "to": celsius(60.0), "from": celsius(25.0)}),
        json!({"question": "equivalent-time", "temperature": celsius(55.0), "time": hours,
               "other_temperature": celsius(25.0)}),
        json!({"question": "temperature-for", "gone": percent(99.0), "time": hours}),
        json!({"question": "warmest-storage", "keep": percent(98.0), "time": hours}),
    ] {
        for (text, tail) in [(TEXT, ""), (&with_errors[..], " as stated plus run-to-run")] {
            let answer = answer(text, about.clone(), next(json!({"highest": celsius(95.0)})));
            assert!(answer.refused.is_none(), "{about}{tail}: {answer:?}");
            let (now, after) = (detail(&answer, "now"), detail(&answer, "after"));
            assert!(after < now && after > 0.0, "{about}{tail}: {}", answer.sentence);
            let in_kelvins = answer.sentence.contains("K becomes ±");
            let asks_for_temperature =
                about["question"] == "temperature-for" || about["question"] == "warmest-storage";
            assert_eq!(in_kelvins, asks_for_temperature, "{}", answer.sentence);
            // Every place of the curve has all numbers, from the coldest to the hottest.
            let curve = answer.detail["curve"].as_array().unwrap();
            let column = |name: &str| -> Vec<f64> {
                curve.iter().map(|point| point[name].as_f64().unwrap()).collect()
            };
            assert!(column("temperature").windows(2).all(|p| p[0] < p[1]));
            assert!(column("duration").windows(2).all(|p| p[0] > p[1]));
            let least = column("after").into_iter().fold(f64::INFINITY, f64::min);
            assert_eq!(least, after);
        }
    }
}

#[test]
fn two_exact_runs_are_told_what_a_third_gives() {
    let two = "T/°C\tk, 1/d\n50\t0.0021\n60\t0.0059\n";
    let third = answer(two, slow(), next(json!({"relative_error": percent(5.0)})));
    assert!(third.sentence.contains("no interval becomes a factor of"), "{}", third.sentence);
    assert!(third.sentence.contains("if every run errs by 5.0\u{a0}%"), "{}", third.sentence);
    let usual = answer(two, slow(), next(json!({})));
    assert_eq!(usual.sentence, third.sentence);
    let better = answer(two, slow(), next(json!({"relative_error": percent(1.0)})));
    assert!(detail(&better, "after") < detail(&third, "after"));
}

#[test]
fn before_any_data_a_known_law_plans_the_first_run() {
    let known = |sd: Value| {
        json!({
            "measured": {
                "form": "known-law",
                "activation_energy": {"value": 95, "sd": sd, "unit": "kJ/mol"},
                "rate_constant": {"value": 0.006, "sd": 0.001, "unit": "1/d"},
                "temperature": celsius(60.0)
            },
            "asked": [slow(), next(json!({}))]
        })
    };
    let planned = found("", known(json!(8))).answers.remove(1);
    assert!(detail(&planned, "after") < detail(&planned, "now"), "{planned:?}");
    assert!(planned.sentence.contains("5.0\u{a0}%"), "{}", planned.sentence);
    let mut bare = known(json!(null));
    bare["measured"]["rate_constant"] = json!({"value": 0.006, "unit": "1/d"});
    bare["measured"]["activation_energy"] = json!({"value": 95, "unit": "kJ/mol"});
    assert!(refusal(&found("", bare).answers[1]).contains("no standard deviations"));
}

#[test]
fn what_cannot_be_planned_is_refused_with_its_remedy() {
    let said = |about: Value, more: Value| refusal(&answer(TEXT, about, next(more)));
    assert!(said(slow(), json!({"for": 7})).contains("no question 8"));
    assert!(said(slow(), json!({"for": 1})).contains("itself asks where"));
    assert!(said(slow(), json!({"for": null})).contains("“for” is empty"));
    assert!(said(slow(), json!({"for": "first"})).contains("“for” holds"));
    assert!(said(json!({"question": "how-come"}), json!({})).contains("how-come"));
    assert!(said(json!({"question": "rate-at"}), json!({})).contains("Question 1 has no answer"));
    let all =
        json!({"question": "completion-time", "temperature": celsius(25.0), "gone": percent(98.0)});
    let several = json!({"question": "rate-at", "temperature": [celsius(5.0), celsius(25.0)]});
    assert!(said(several, json!({})).contains("several"));
    assert!(said(all.clone(), json!({"lowest": celsius(61.0)})).contains("above the highest"));
    assert!(said(all.clone(), json!({"relative_error": percent(0.0)})).contains("not above zero"));
    let litres = json!({"value": 1, "unit": "mol/L"});
    assert!(said(all, json!({"relative_error": litres})).contains("cannot be used"));
    let exact = "T/K\tk, 1/s\n300\t1\n310\t1\n320\t1\n";
    let at = json!({"question": "rate-at", "temperature": celsius(25.0)});
    assert!(refusal(&answer(exact, at, next(json!({})))).contains("exactly"));
}

#[test]
fn without_a_unit_of_k_the_place_is_known_and_the_time_is_not() {
    let text = TEXT.replace(", 1/d", "");
    let at = json!({"question": "speed-up", "to": celsius(60.0), "from": celsius(25.0)});
    let place = answer(&text, at.clone(), next(json!({})));
    assert!(place.value.is_some() && place.detail["curve"][0]["duration"].is_null(), "{place:?}");
    let within = next(json!({"within": {"value": 9, "unit": "d"}}));
    assert!(refusal(&answer(&text, at, within)).contains("unit of the rate constants"));
}

#[test]
fn a_list_of_places_is_a_table_and_the_record_has_the_curve() {
    let several = next(json!({"lowest": [celsius(25.0), celsius(40.0)]}));
    let findings = found(TEXT, json!({"asked": [slow(), several]}));
    let rows = findings.answers[1].rows.as_ref().unwrap();
    assert_eq!(rows.len(), 2);
    assert_eq!(rows[1].blanks.as_ref().unwrap()["for"], 0);
    let text = findings.record.text;
    assert!(text.contains("next for question 1, from 25 °C, 40 °C to 60 °C"), "{text}");
    assert!(text.contains("duration") && text.contains("Ind. Eng. Chem. Res. 33, 62"));
    assert!(!text.contains("[{"));
}

/// Runs that scatter by a hundredth learn nothing from one that errs by a twentieth.
#[test]
fn a_run_that_would_widen_the_answer_is_not_recommended() {
    let text = "T/°C\tk, 1/d\n5\t0.00021\n15\t0.00085\n25\t0.0031\n32\t0.0072\n40\t0.0181\n";
    let exact = text.replace("0.00085", "0.000836").replace("0.0072", "0.00722");
    let coarse = json!({"relative_error": percent(50.0), "highest": celsius(80.0)});
    let reason = refusal(&answer(&exact, slow(), next(coarse)));
    assert!(reason.starts_with("No run more at these temperatures would narrow"), "{reason}");
    let fine = answer(&exact, slow(), next(json!({"highest": celsius(80.0)})));
    assert!(detail(&fine, "after") < detail(&fine, "now"), "{}", fine.sentence);
}
