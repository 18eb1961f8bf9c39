//! Progress curves through a whole study: from concentrations to decisions.
#![allow(clippy::unwrap_used)]

use checks::{found, remark_codes};
use kinetics_core::study::Findings;
use serde_json::{Value, json};

const ENERGY: f64 = 85_000.0;
const CELSIUS: [f64; 4] = [40.0, 50.0, 60.0, 70.0];
const HOURS: [f64; 6] = [0.0, 4.0, 8.0, 16.0, 30.0, 48.0];

/// k in 1/h for a rate constant of 0.01/h at 50 °C.
fn rate(celsius: f64) -> f64 {
    let x = 1.0 / (celsius + 273.15) - 1.0 / 323.15;
    0.01 * (-ENERGY / 8.314_462_618 * x).exp()
}

/// Fixed errors about 0 with variance near 1, different for each point.
fn wobble(celsius: f64, hours: f64) -> f64 {
    1.5 * (12.9898 * hours + 78.233 * celsius).sin()
}

/// % left of a first-order reaction, with half a per cent of noise.
fn left(celsius: f64, hours: f64) -> f64 {
    100.0 * (-rate(celsius) * hours).exp() + 0.3 * wobble(celsius, hours)
}

/// Runs down the page under a head of three columns.
fn long(head: &str, signal: impl Fn(f64, f64) -> f64) -> String {
    let mut text = format!("{head}\n");
    for celsius in CELSIUS {
        for hours in HOURS {
            text.push_str(&format!("{celsius}\t{hours}\t{:.6}\n", signal(celsius, hours)));
        }
    }
    text
}

fn wide(signal: impl Fn(f64, f64) -> f64) -> String {
    let heads: Vec<String> = CELSIUS.iter().map(|celsius| format!("{celsius} °C")).collect();
    let mut text = format!("t/h\t{}\n", heads.join("\t"));
    for hours in HOURS {
        let cells: Vec<String> =
            CELSIUS.iter().map(|celsius| format!("{:.6}", signal(*celsius, hours))).collect();
        text.push_str(&format!("{hours}\t{}\n", cells.join("\t")));
    }
    text
}

fn study(text: &str, measured: Value, assumed: Value, asked: Value) -> Findings {
    let mut measured = measured;
    measured["form"] = json!("progress");
    found(text, json!({"measured": measured, "assumed": assumed, "asked": asked}))
}

fn plain(text: &str) -> Findings {
    study(text, json!({}), json!({}), json!([]))
}

fn energy(findings: &Findings) -> (f64, f64, f64) {
    let energy = &findings.law.as_ref().unwrap().activation_energy;
    (energy.value, energy.low.unwrap(), energy.high.unwrap())
}

fn questions() -> Value {
    let celsius = |value: f64| json!({"value": value, "unit": "°C"});
    let percent = |value: f64| json!({"value": value, "unit": "%"});
    let time = |value: f64, unit: &str| json!({"value": value, "unit": unit});
    json!([
        {"question": "rate-at", "temperature": celsius(45.0)},
        {"question": "time-to-extent", "temperature": celsius(25.0), "gone": percent(5.0)},
        {"question": "longest-stand", "temperature": celsius(40.0), "keep": percent(98.0)},
        {"question": "completion-time", "temperature": celsius(70.0), "gone": percent(99.0)},
        {"question": "warmest-storage", "keep": percent(95.0), "time": time(30.0, "d")},
        {"question": "temperature-for", "gone": percent(90.0), "time": time(8.0, "h")},
        {"question": "extent-after", "temperature": celsius(40.0), "time": time(24.0, "h")},
        {"question": "speed-up", "to": celsius(60.0), "from": celsius(25.0)},
        {"question": "equivalent-time", "temperature": celsius(55.0),
         "time": time(2.0, "yr"), "other_temperature": celsius(25.0)}
    ])
}

#[test]
fn a_progress_study_answers_every_question() {
    let findings = study(&wide(left), json!({}), json!({}), questions());
    let (value, low, high) = energy(&findings);
    assert!(low < ENERGY && ENERGY < high && (value / ENERGY - 1.0).abs() < 0.05, "{value}");
    let law = findings.law.as_ref().unwrap();
    assert_eq!(law.scatter, kinetics_core::temperature_law::Scatter::AsStatedPlusRunToRun);
    for answer in &findings.answers {
        assert_eq!(answer.refused, None, "{}", answer.question);
        assert!(answer.value.is_some(), "{}", answer.question);
    }
    assert_eq!(findings.runs.len(), 4);
    for (run, celsius) in findings.runs.iter().zip(CELSIUS) {
        let course = run.course.as_ref().unwrap();
        assert_eq!((course.points, course.termination), (6, "converged"));
        let off = run.rate_constant.value * 3600.0 / rate(celsius) - 1.0;
        let error = run.rate_constant.standard_error.unwrap() / run.rate_constant.value;
        assert!(off.abs() < 4.0 * error && error < 0.1, "{celsius}: {off} {error}");
    }
    assert!(findings.problems.is_empty(), "{:?}", findings.problems);
}

#[test]
fn both_ways_to_a_law_agree_where_runs_differ_by_noise_alone() {
    let findings = plain(&wide(left));
    let (value, low, high) = energy(&findings);
    let at_once = findings.one_stage.as_ref().unwrap();
    let energy_at_once = &at_once.activation_energy;
    assert!(low < energy_at_once.value && energy_at_once.value < high, "{value}");
    assert!(energy_at_once.high.unwrap() - energy_at_once.low.unwrap() < high - low);
    // 24 points, two parameters of the law and four starts.
    assert_eq!(at_once.degrees_of_freedom, Some(18));
    assert!(!remark_codes(&findings).contains(&"stages-disagree"));
    // One run twice as fast as its temperature makes it.
    let batch =
        |celsius: f64, hours: f64| left(celsius, if celsius == 50.0 { 2.0 * hours } else { hours });
    let codes = plain(&wide(batch));
    let codes = remark_codes(&codes);
    assert!(codes.contains(&"stages-disagree") && !codes.contains(&"excess-scatter"), "{codes:?}");
}

#[test]
fn the_record_holds_every_point_of_every_curve() {
    let findings = study(&wide(left), json!({"end": "free"}), json!({}), json!([]));
    let text = &findings.record.text;
    for words in ["End of the signal: found for each run", "The curve of 70 °C", "converged"] {
        assert!(text.contains(words), "{words}:\n{text}");
    }
    for run in &findings.runs {
        for residual in &run.course.as_ref().unwrap().residuals {
            assert!(text.contains(&format!("{residual:+.3e}")), "{residual}");
        }
    }
    assert!(text.contains("Golub") && text.contains("all curves at once"));
}

#[test]
fn the_shape_of_the_table_does_not_matter() {
    let long = plain(&long("T/°C\tt/h\t% left", left));
    let wide = plain(&wide(left));
    assert_eq!(energy(&long), energy(&wide));
    assert_eq!(long.runs[2].rate_constant, wide.runs[2].rate_constant);
}

#[test]
fn what_forms_tells_the_same_rates_as_what_is_left() {
    let formed = |celsius: f64, hours: f64| 100.0 - left(celsius, hours);
    let of_left = plain(&long("T/°C\tt/h\t% left", left));
    let of_formed = plain(&long("T/°C\tt/h\tconversion (%)", formed));
    for (a, b) in of_left.runs.iter().zip(&of_formed.runs) {
        let ratio = a.rate_constant.value / b.rate_constant.value;
        assert!((ratio - 1.0).abs() < 1e-4, "{}: {ratio}", a.label);
    }
}

#[test]
fn a_second_order_study_reckons_with_its_own_concentration() {
    // k in L/(mol h) is rate/0.5 mol/L, so that it goes as far as the others.
    let signal = |celsius: f64, hours: f64| {
        0.5 / (1.0 + rate(celsius) * hours) + 0.001 * wobble(celsius, hours)
    };
    let text = long("T/°C\tt/h\tc, mol/L", signal);
    let findings = study(&text, json!({}), json!({"order": 2}), questions());
    assert_eq!(findings.runs[0].rate_constant.unit, "L/(mol s)");
    let found = findings.runs[2].rate_constant.value * 3600.0;
    assert!((found / (rate(60.0) / 0.5) - 1.0).abs() < 0.05, "{found}");
    for answer in &findings.answers {
        assert_eq!(answer.refused, None, "{}", answer.question);
    }
    let compared = study(&text, json!({}), json!({"order": "compare"}), json!([]));
    assert_eq!(compared.read.order, Some(2.0));
    let free = study(&text, json!({}), json!({"order": "free"}), json!([]));
    assert!((free.read.order.unwrap() - 2.0).abs() < 0.4, "{:?}", free.read.order);
    assert!(free.read.choices.iter().any(|choice| choice.contains("The order fits best")));
}

#[test]
fn a_run_without_a_rate_is_said_and_the_rest_is_used() {
    let text = long("T/°C\tt/h\t% left", |celsius, hours| {
        if celsius == 40.0 { 99.0 + 0.3 * (hours * 0.8).cos() } else { left(celsius, hours) }
    });
    let findings = plain(&text);
    assert_eq!(findings.runs.len(), 3);
    let said: Vec<&str> = findings.problems.iter().map(|p| p.sentence.as_str()).collect();
    assert_eq!(
        said,
        ["Row 2: the run “40 °C” has no rate constant: its signal changes too little to tell a \
          rate from none; it is left out."]
    );
    assert!(findings.law.is_some());
}

#[test]
fn remarks_fire_on_what_the_curves_do() {
    let codes = |findings: &Findings| -> Vec<String> {
        remark_codes(findings).into_iter().map(String::from).collect()
    };
    let has = |findings: &Findings, code: &str| codes(findings).iter().any(|c| c == code);
    let good = plain(&wide(left));
    for code in ["low-conversion", "levels-off", "order-doubtful"] {
        assert!(!has(&good, code), "{code}");
    }
    let early = plain(&wide(|celsius, hours| left(celsius, 0.03 * hours)));
    assert!(has(&early, "low-conversion"), "{:?} {:?}", codes(&early), early.problems);
    // Ten per cent never react.
    let rest = |celsius: f64, hours: f64| 20.0 + 0.8 * left(celsius, 4.0 * hours);
    assert!(has(&plain(&wide(rest)), "levels-off"));
    let free = study(&wide(rest), json!({"end": "free"}), json!({}), json!([]));
    assert!(!has(&free, "levels-off"));
}

#[test]
fn what_cannot_be_used_is_refused_in_words() {
    let refusal = |text: &str, measured: Value, assumed: Value| {
        let findings = study(text, measured, assumed, questions());
        findings.answers[1].refused.clone().unwrap().reason
    };
    let text = long("T/°C\tt/h\t% left", left);
    let end = json!({"end": {"value": 2, "unit": "mol/L"}});
    assert!(refusal(&text, end, json!({})).contains("the signal counts in %"));
    assert!(refusal(&text, json!({}), json!({"order": -1})).contains("not a number from zero up"));
    let timeless = long("T/°C\tt\t% left", left);
    assert!(refusal(&timeless, json!({}), json!({})).contains("unit"));
    assert!(refusal("", json!({}), json!({})).contains("Nothing is measured yet"));
}

#[test]
fn odd_curves_give_findings_and_never_a_panic() {
    let odd: [&[(f64, f64)]; 8] = [
        &[(0.0, 1e300), (1.0, 1e299), (2.0, 1e298)],
        &[(0.0, 1e-300), (1.0, 1e-301), (2.0, 1e-302)],
        &[(0.0, 100.0), (0.0, 90.0), (1e-12, 50.0), (1e12, 1.0)],
        &[(1e300, 5.0), (1.5e300, 4.0), (1.7e300, 1.0)],
        &[(0.0, 0.0), (1.0, 0.0), (2.0, 5e-324)],
        &[(0.0, 100.0), (1.0, 0.0), (2.0, 0.0), (3.0, 0.0)],
        &[(0.0, 1.0), (1.0, 1e9), (2.0, -1e9), (3.0, 1.0)],
        &[(5.0, 10.0), (5.0, 20.0), (6.0, 10.0)],
    ];
    for points in odd {
        let mut text = String::from("T/°C\tt/h\tsignal\n");
        for celsius in [40, 50, 60] {
            for (time, signal) in points {
                text.push_str(&format!("{celsius}\t{time:e}\t{signal:e}\n"));
            }
        }
        for order in [json!(0), json!(1), json!(2.5), json!("compare"), json!("free")] {
            for (start, end, noise) in [
                (json!("free"), json!("free"), "constant"),
                (json!("shared"), json!({"value": 0, "unit": ""}), "proportional"),
                (json!({"value": 1, "unit": ""}), json!("shared"), "constant"),
            ] {
                let measured = json!({"start": start, "end": end, "noise": noise});
                let findings = study(&text, measured, json!({"order": order}), questions());
                assert_eq!(findings.answers.len(), 9);
                for run in &findings.runs {
                    assert!(run.rate_constant.value.is_finite(), "{run:?}");
                }
            }
        }
    }
}
