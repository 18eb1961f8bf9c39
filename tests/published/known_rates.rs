//! Times, extents and half-lives from one rate constant: answers printed in OpenStax, Chemistry
//! 2e (Flowers et al. 2019), §12.4 and §12.5, worked out by a known law at its own temperature.
//!
//! Printed answers are met to half a unit of their last digit, recomputed ones (closed forms) to
//! 1e-9.

use checks::{checks, close, found, paste};
use kinetics_core::answer::Answer;
use serde_json::{Value, json};

const MINUTE: f64 = 60.0;
const HOUR: f64 = 3600.0;
const DAY: f64 = 86400.0;

/// The answers of a known law at 25 °C; its activation energy is of no account there.
fn answers(k: f64, unit: &str, concentration: Option<f64>, asked: Value) -> Vec<Answer> {
    let mut measured = json!({
        "form": "known-law",
        "activation_energy": {"value": 80.0, "unit": "kJ/mol"},
        "rate_constant": {"value": k, "unit": unit},
        "temperature": room()
    });
    if let Some(c0) = concentration {
        measured["initial_concentration"] = json!({"value": c0, "unit": "mol/L"});
    }
    found("", json!({"measured": measured, "asked": asked})).answers
}

fn room() -> Value {
    json!({"value": 25, "unit": "°C"})
}

fn until(gone: f64) -> Value {
    json!({
        "question": "time-to-extent",
        "temperature": room(),
        "gone": {"value": 100.0 * gone, "unit": "%"}
    })
}

fn after(time: f64, unit: &str) -> Value {
    json!({
        "question": "extent-after",
        "temperature": room(),
        "time": {"value": time, "unit": unit}
    })
}

/// A number as printed, met to half a unit of its last digit.
#[track_caller]
fn printed(found: f64, expected: f64, last_digit: f64) {
    assert!(
        (found - expected).abs() <= 0.5 * last_digit * (1.0 + 1e-9),
        "{found} is not {expected}"
    );
}

#[track_caller]
fn value(answer: &Answer) -> f64 {
    answer.value.unwrap()
}

checks! {
    /// C4H8 at k = 9.2e-3 1/s: 80 % gone after 1.7e2 s.
    fn cyclobutane_four_fifths() {
        let found = answers(9.2e-3, "1/s", None, json!([until(0.8)]));
        printed(value(&found[0]), 170.0, 10.0);
        close(value(&found[0]), 174.93890352544568, 1e-9);
    }

    /// Iodine-131, k = 0.138 1/d: 90 % gone after 16.7 d, half after 5.02 d.
    fn iodine_131() {
        let asked = json!([until(0.9), {"question": "rate-at", "temperature": room()}]);
        let found = answers(0.138, "1/d", None, asked);
        printed(value(&found[0]) / DAY, 16.7, 0.1);
        close(value(&found[0]) / DAY, 16.685399224594534, 1e-9);
        let half_life = found[1].detail["half_life"].as_f64().unwrap() / DAY;
        printed(half_life, 5.02, 0.01);
        close(half_life, 5.022805656231487, 1e-9);
    }

    /// Phosphorus-32, k = 0.0485 1/d: half-life 14.3 d.
    fn phosphorus_32() {
        let found = answers(0.0485, "1/d", None, json!([until(0.5)]));
        printed(value(&found[0]) / DAY, 14.3, 0.1);
        close(value(&found[0]) / DAY, 14.291694444534954, 1e-9);
    }

    /// Butadiene, second order, k = 5.76e-2 L/(mol min): 0.179 mol/L left of 0.200 after 10 min,
    /// 0.0195 of 0.0200 after 20 min, half-life 86.8 min at 0.200 mol/L.
    fn butadiene() {
        let asked = json!([after(10.0, "min"), until(0.5)]);
        let found = answers(0.0576, "L/(mol min)", Some(0.2), asked);
        let left = 0.2 * found[0].detail["left"].as_f64().unwrap();
        printed(left, 0.179, 0.001);
        close(left, 0.1793400286944046, 1e-9);
        printed(value(&found[1]) / MINUTE, 86.8, 0.1);
        close(value(&found[1]) / MINUTE, 86.80555555555556, 1e-9);

        let dilute = answers(0.0576, "L/(mol min)", Some(0.02), json!([after(20.0, "min")]));
        let left = 0.02 * dilute[0].detail["left"].as_f64().unwrap();
        // 0.01955 recomputed: the book cuts where rounding would give 0.0195 or 0.0196.
        printed(left, 0.0195, 0.0001);
        close(left, 0.01954957772912105, 1e-9);
    }

    /// NOCl, k = 8.0e-8 L/(mol s) and 0.15 mol/L: half-life 8.3e7 s; k = 2.42 L/(mol s) and
    /// 0.500 mol/L: 0.826 s.
    fn second_order_half_lives() {
        let found = answers(8e-8, "L/(mol s)", Some(0.15), json!([until(0.5)]));
        printed(value(&found[0]), 8.3e7, 0.1e7);
        close(value(&found[0]), 1.0 / (8e-8 * 0.15), 1e-9);
        let found = answers(2.42, "L mol⁻¹ s⁻¹", Some(0.5), json!([until(0.5)]));
        printed(value(&found[0]), 0.826, 0.001);
        close(value(&found[0]), 0.8264462809917356, 1e-9);
    }

    /// Ammonia on tungsten, zero order: 0.0028 mol/L becomes 0.0015 in 1000 s, hence
    /// k = 1.3e-6 mol/(L s); 0.0001 mol/L is left after 35 min, half after 18 min.
    fn ammonia_on_tungsten() {
        let asked = json!([until(1.0 - 0.0001 / 0.0028), until(0.5)]);
        let found = answers(1.3e-6, "mol/(L s)", Some(0.0028), asked);
        printed(value(&found[0]) / MINUTE, 35.0, 1.0);
        close(value(&found[0]) / MINUTE, 34.61538461538462, 1e-9);
        printed(value(&found[1]) / MINUTE, 18.0, 1.0);
        close(value(&found[1]) / MINUTE, 17.94871794871795, 1e-9);
    }

    /// Cyclopropane at 499 °C, k = 5.95e-4 1/s: half-life 1.16e3 s (an older printing has
    /// 1.67e3), and 20 % left after 0.75 h.
    fn cyclopropane_at_499_degrees() {
        let asked = json!([until(0.5), after(0.75, "h")]);
        let found = answers(5.95e-4, "1/s", None, asked);
        printed(value(&found[0]), 1160.0, 10.0);
        close(value(&found[0]), 1164.9532446385633, 1e-9);
        let left = found[1].detail["left"].as_f64().unwrap();
        printed(left, 0.20, 0.01);
        close(left, 0.200588446465658, 1e-9);
    }

    /// A steroid of 42 d half-life is down to 1/64 after 252 d: six half-lives, exact.
    fn six_half_lives() {
        let k = std::f64::consts::LN_2 / 42.0;
        let found = answers(k, "1/d", None, json!([until(63.0 / 64.0)]));
        close(value(&found[0]) / DAY, 252.0, 1e-12);
    }

    /// Sucrose, §12.5: 108 kJ/mol (printed to 1 kJ/mol), and 1.81e8 h at 27 °C from 0.150 to
    /// 1.65e-7 mol/L. The 7.6e6 d printed beside it are not 1.81e8 h, which are 7.56e6 d. What is
    /// left is 1.1e-6 of the whole, so that sixteen digits of what is gone leave ten of it.
    fn sucrose() {
        let text = paste("1/s", &[300.15, 310.15], &[2.1e-11, 8.5e-11]);
        let gone = 100.0 * (1.0 - 1.65e-7 / 0.150);
        let findings = found(&text, json!({"asked": [{
            "question": "time-to-extent",
            "temperature": {"value": 27, "unit": "°C"},
            "gone": {"value": gone, "unit": "%"}
        }]}));
        let energy = findings.law.unwrap().activation_energy.value / 1000.0;
        printed(energy, 108.0, 1.0);
        close(energy, 108.2160071959188, 1e-9);
        let hours = value(&findings.answers[0]) / HOUR;
        printed(hours, 1.81e8, 0.01e8);
        close(hours, 181484131.98624274, 1e-9);
    }

    /// Alkaline phosphatase, §12.5: 1.47 times as fast at 37 as at 30 °C; 43 kJ/mol.
    fn alkaline_phosphatase() {
        let text = paste("1/s", &[303.15, 310.15], &[1.0, 1.47]);
        let energy = found(&text, json!({})).law.unwrap().activation_energy.value / 1000.0;
        printed(energy, 43.0, 0.1);
        close(energy, 43.02512391134064, 1e-9);
    }
}
