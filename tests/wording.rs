//! What is said where something lacks: an interval, a unit, an extent; and what a law of its own
//! kind says of itself.

use checks::{close, found};
use kinetics_core::study::Findings;
use serde_json::{Value, json};

const TWO: &str = "T/°C\tk, 1/h\n50\t0.0021\n60\t0.0059\n";

fn celsius(t: f64) -> Value {
    json!({"value": t, "unit": "°C"})
}

fn percent(part: f64) -> Value {
    json!({"value": part, "unit": "%"})
}

fn stand(t: f64, keep: f64) -> Value {
    json!({"question": "longest-stand", "temperature": celsius(t), "keep": percent(keep)})
}

fn storage(keep: f64) -> Value {
    let time = json!({"value": 30.0, "unit": "d"});
    json!({"question": "warmest-storage", "keep": percent(keep), "time": time})
}

fn until(t: f64, gone: f64) -> Value {
    json!({"question": "time-to-extent", "temperature": celsius(t), "gone": percent(gone)})
}

fn known_law(asked: Value) -> Findings {
    let measured = json!({
        "form": "known-law",
        "activation_energy": {"value": 105.0, "unit": "kJ/mol"},
        "rate_constant": {"value": 0.0021, "unit": "1/h"},
        "temperature": celsius(50.0)
    });
    found("", json!({"measured": measured, "asked": asked}))
}

#[test]
fn a_refused_bound_tells_the_best_guess_in_words_alone() {
    let asked = json!([stand(40.0, 98.0), until(40.0, 2.0), storage(98.0)]);
    let findings = found(TWO, json!({"asked": asked}));
    let [bound, guess, warmest] = findings.answers.as_slice() else { panic!("three answers") };
    assert_eq!((bound.value, bound.low, bound.high), (None, None, None));
    let guess = guess.wording.headline.trim_start_matches("About ");
    let told = format!("the line alone gives {guess}, which is no limit");
    assert!(bound.sentence.contains(&told), "{} {told}", bound.sentence);
    assert!(warmest.sentence.contains("the line alone gives") && warmest.value.is_none());
}

#[test]
fn what_has_no_interval_is_not_said_to_know_scatter() {
    for (asked, subject) in [
        (json!([until(20.0, 2.0)]), "Question 1 reaches"),
        (json!([until(20.0, 2.0), until(10.0, 2.0)]), "Questions 1, 2 reach"),
    ] {
        let findings = found(TWO, json!({"asked": asked}));
        let remark = findings.remarks.iter().find(|r| r.code == "extrapolation").unwrap();
        assert!(remark.sentence.starts_with(subject), "{remark:?}");
        assert!(!remark.sentence.contains("scatter"), "{remark:?}");
    }
}

#[test]
fn a_known_law_without_errors_asks_for_them() {
    let findings = known_law(json!([stand(50.0, 98.0), until(50.0, 2.0), storage(98.0)]));
    for answer in [&findings.answers[0], &findings.answers[2]] {
        let refusal = answer.refused.as_ref().unwrap();
        assert!(refusal.needs.contains("standard deviations"), "{refusal:?}");
        assert!(refusal.reason.contains("the law alone gives"), "{refusal:?}");
    }
    let said = &findings.answers[1].sentence;
    assert!(said.contains("standard deviations") && !said.contains("runs"), "{said}");
}

#[test]
fn a_known_rate_is_repeated_as_stated() {
    let findings = known_law(json!([{"question": "rate-at", "temperature": celsius(50.0)}]));
    let headline = &findings.answers[0].wording.headline;
    assert_eq!(headline, "k = 0.0021\u{a0}h⁻¹");
}

#[test]
fn keeping_nothing_is_refused_in_terms_of_what_is_kept() {
    let text = "T/°C\tk, 1/h\n50\t0.0021\n60\t0.0059\n70\t0.0152\n";
    let findings =
        found(text, json!({"asked": [stand(50.0, 0.0), storage(0.0), stand(50.0, 100.0)]}));
    for answer in &findings.answers[..2] {
        let needs = &answer.refused.as_ref().unwrap().needs;
        assert_eq!(needs, "Keep more than 0 %, for example 0.1 %.");
    }
    let reason = &findings.answers[2].refused.as_ref().unwrap().reason;
    assert!(reason.contains("kept"), "{reason}");
    let just_above = found(text, json!({"asked": [stand(50.0, 0.1)]}));
    assert!(just_above.answers[0].low.is_some());
}

/// D falls to a tenth every z, whatever the temperature.
#[test]
fn the_log_linear_law_tells_d_and_z() {
    let text = |unit: &str| {
        let mut text = format!("T/°C\tk, {unit}\n");
        for (t, misfit) in
            [(110.0, 0.02), (115.0, -0.03), (121.1, 0.01), (125.0, 0.02), (130.0, -0.02)]
        {
            let d_value = 1.5 * 10f64.powf((121.1 - t) / 10.0);
            text.push_str(&format!("{t}\t{:e}\n", f64::ln(10.0) / d_value * f64::exp(misfit)));
        }
        text
    };
    let log_linear = json!({"assumed": {"temperature_law": "log-linear"}});
    let findings = found(&text("1/min"), log_linear.clone());
    let law = findings.law.unwrap();
    let (z, d) = (law.z_value.unwrap(), law.d_value.unwrap());
    close(z.value, 10.0, 0.02);
    assert!(z.low.unwrap() < 10.0 && 10.0 < z.high.unwrap() && z.unit == "K");
    close(d.value, 90.0 * 10f64.powf((394.25 - law.reference_temperature_kelvin) / 10.0), 0.02);
    assert!(d.low.unwrap() < d.value && d.value < d.high.unwrap() && d.unit == "s");
    close(
        d.standard_error.unwrap() / d.value,
        law.ln_rate_at_reference.standard_error.unwrap(),
        1e-9,
    );
    assert!(findings.record.text.contains("z at the reference"));
    assert!(findings.record.text.contains("D at the reference"));
    let second_order = found(&text("L/(mol min)"), log_linear).law.unwrap();
    assert!(second_order.z_value.is_some() && second_order.d_value.is_none());
    let arrhenius = found(&text("1/min"), json!({})).law.unwrap();
    assert!(arrhenius.z_value.is_none() && arrhenius.d_value.is_none());
}

#[test]
fn a_rate_without_unit_is_said_to_have_none() {
    let asked = json!({"asked": [{"question": "rate-at", "temperature": celsius(55.0)}]});
    let without = found("T/°C\tk\n50\t0.0021\n60\t0.0059\n70\t0.0152\n", asked.clone());
    let said = "in the unit of the column, which is not stated";
    assert!(without.answers[0].sentence.contains(said), "{}", without.answers[0].sentence);
    assert!(without.record.text.contains("Unit of k and A"));
    let with = found("T/°C\tk, 1/h\n50\t0.0021\n60\t0.0059\n70\t0.0152\n", asked);
    assert!(!with.answers[0].sentence.contains(said));
    assert!(!with.record.text.contains("Unit of k and A"));
}

fn times(header: &str, extent: Value) -> Findings {
    let text = format!("T/°C\t{header}\n40\t240\n50\t80\n60\t30\n");
    let mut measured = json!({"form": "times"});
    if !extent.is_null() {
        measured["extent"] = extent;
    }
    let asked = json!([{"question": "rate-at", "temperature": celsius(50.0)}]);
    found(&text, json!({"measured": measured, "asked": asked}))
}

#[test]
fn rates_from_times_are_told_in_the_unit_of_the_times() {
    let findings = times("t (days)", percent(10.0));
    assert!(findings.answers[0].wording.headline.ends_with("\u{a0}d⁻¹"), "{:?}", findings.answers);
    assert_eq!(findings.law.unwrap().rate_unit, "1/s");
}

#[test]
fn times_without_their_extent_are_no_rates() {
    let findings = times("t (days)", Value::Null);
    assert!(findings.law.is_none() && findings.runs.is_empty());
    let refusal = findings.answers[0].refused.as_ref().unwrap();
    assert!(refusal.needs.contains("part that is gone"), "{refusal:?}");
}

/// A number read a thousandfold larger or smaller is a caution, not only a line among others.
#[test]
fn a_decimal_mark_in_doubt_is_a_caution() {
    let cautioned = |text: &str, more: Value| {
        let findings = found(text, more);
        let remark = findings.remarks.iter().find(|r| r.code == "decimal-mark").cloned();
        (findings.runs[0].rate_constant.value * 3600.0, remark)
    };
    let mixed = "T/°C\tk, 1/h\n30,5\t1.210\n40\t4.200\n50\t13.900\n60\t42.100\n";
    let (rate, remark) = cautioned(mixed, json!({}));
    close(rate, 1.21, 1e-12);
    let remark = remark.unwrap();
    assert!(remark.sentence.contains("1210") && remark.remedy.contains("1210"), "{remark:?}");
    let plain = mixed.replace("30,5", "30.5");
    assert_eq!(cautioned(&plain, json!({})).1, None);
    let thousands = "T/°C\tk, 1/h\n50\t1,234\n60\t2,345\n70\t4,567\n";
    assert!(cautioned(thousands, json!({})).1.is_some());
    assert_eq!(cautioned(thousands, json!({"measured": {"decimal": ","}})).1, None);
    let commas = thousands.replace("50\t", "50,5\t");
    assert_eq!(cautioned(&commas, json!({})).1, None);
}
