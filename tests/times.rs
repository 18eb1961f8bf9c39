//! Times to one extent: the extent is stated, or named in the head of the times, and never guessed.

use checks::{close, found, remark_codes};
use kinetics_core::study::Findings;
use serde_json::{Value, json};

fn times(head: &str, extent: Value) -> Findings {
    let text = format!("T/°C\t{head}\n50\t330\n60\t117\n70\t45\n80\t18\n");
    let asked = json!([{"question": "rate-at", "temperature": {"value": 60, "unit": "°C"}}]);
    found(&text, json!({"measured": {"form": "times", "extent": extent}, "asked": asked}))
}

fn rate(findings: &Findings) -> f64 {
    findings.answers[0].value.unwrap_or_else(|| panic!("{:?}", findings.answers))
}

#[test]
fn half_lives_need_no_extent_and_a_stated_one_goes_first() {
    let half = times("t½, h", Value::Null);
    let stated = times("t, h", json!({"value": 50, "unit": "%"}));
    assert_eq!(rate(&half), rate(&stated));
    // k = ln 2/t½ at 60 °C, give or take the scatter of the runs.
    close(rate(&half), 2.0_f64.ln() / (117.0 * 3600.0), 0.1);
    assert!(half.read.choices.iter().any(|c| c.contains("50\u{a0}% is gone")));
    assert!(!stated.read.choices.iter().any(|c| c.contains("is gone")));
    let other = times("t½, h", json!({"value": 10, "unit": "%"}));
    close(rate(&half) / rate(&other), 0.5_f64.ln() / 0.9_f64.ln(), 1e-9);
    let loss = times("time to 10 % loss, h", Value::Null);
    close(rate(&loss), rate(&other), 1e-12);
}

/// As shelf lives are named; whoever means the other is cautioned, and a stated extent goes first.
#[test]
fn the_name_of_a_shelf_life_says_what_is_left() {
    let tenth = times("t, h", json!({"value": 10, "unit": "%"}));
    let cautioned = |findings: &Findings| remark_codes(findings).contains(&"extent-by-name");
    let shelf_life = times("t90 (h)", Value::Null);
    close(rate(&shelf_life), rate(&tenth), 1e-12);
    assert!(cautioned(&shelf_life));
    assert!(shelf_life.read.choices.iter().any(|c| c.contains("10\u{a0}% is taken to be gone")));
    let stated = times("t90 (h)", json!({"value": 90, "unit": "%"}));
    close(rate(&stated) / rate(&tenth), 0.1_f64.ln() / 0.9_f64.ln(), 1e-9);
    assert!(!cautioned(&stated));
    for head in ["t10% (h)", "t10 (h)", "time to 10 % degradation (h)"] {
        let named = times(head, Value::Null);
        close(rate(&named), rate(&tenth), 1e-12);
        assert!(!cautioned(&named), "{head}");
    }
}

#[test]
fn a_head_that_may_mean_two_things_asks_which() {
    let refused = times("time to 10 %, h", Value::Null).answers[0].refused.clone().unwrap();
    assert!(refused.reason.contains("10\u{a0}% is gone, or that it is left"), "{refused:?}");
    assert!(refused.needs.contains("10\u{a0}% or 90\u{a0}%"), "{refused:?}");
    let nothing = times("t, h", Value::Null).answers[0].refused.clone().unwrap();
    assert!(nothing.reason.contains("do not say"), "{nothing:?}");
}
