//! Rules of the trade, where the law must agree with them.

use checks::{checks, close, found, paste};
use serde_json::json;

fn speed_up(from_celsius: f64, to_celsius: f64) -> serde_json::Value {
    json!({
        "question": "speed-up",
        "to": {"value": to_celsius, "unit": "°C"},
        "from": {"value": from_celsius, "unit": "°C"}
    })
}

checks! {
    /// ASTM F1980 (accelerated ageing of sterile barrier systems): with Q10 = 2, 730 days at
    /// 25 °C are stood in for by 730/8 = 91.25 days at 55 °C. A rate that doubles per 10 K is a
    /// log-linear law; the rule stands beside the answer as its detail. Exact but for rounding.
    fn doubling_per_ten_kelvin_ages_730_days_in_91() {
        let text = paste("1/d", &[298.15, 308.15], &[1e-3, 2e-3]);
        let findings = found(&text, json!({
            "assumed": {"temperature_law": "log-linear"},
            "asked": [speed_up(25.0, 55.0)]
        }));
        let answer = &findings.answers[0];
        close(730.0 / answer.value.unwrap(), 91.25, 1e-12);
        close(730.0 / answer.detail["doubling_rule"].as_f64().unwrap(), 91.25, 1e-12);
    }

    /// OpenStax, Chemistry 2e, §12.5: a rate that doubles every 10 °C is 4 times as fast at 45 as
    /// at 25 °C, and 128 times at 95 °C. Exact.
    fn doubling_rule_multiplies() {
        let text = paste("1/s", &[298.15, 318.15], &[1.0, 3.0]);
        let asked = json!({"asked": [speed_up(25.0, 45.0), speed_up(25.0, 95.0)]});
        let findings = found(&text, asked);
        let rule = |i: usize| findings.answers[i].detail["doubling_rule"].as_f64().unwrap();
        close(rule(0), 4.0, 1e-14);
        close(rule(1), 128.0, 1e-14);
    }

    /// Common practice, no source: near room temperature many reactions about double their rate
    /// for every 10 °C. That is what an activation energy of about 53 kJ/mol does between 25 and
    /// 35 °C (52.949 recomputed independently).
    fn doubling_near_room_temperature_is_53_kilojoules() {
        let findings = found("", json!({
            "measured": {
                "form": "known-law",
                "activation_energy": {"value": 52.949, "unit": "kJ/mol"},
                "rate_constant": {"value": 1.0, "unit": "1/h"},
                "temperature": {"value": 25.0, "unit": "°C"}
            },
            "asked": [speed_up(25.0, 35.0)]
        }));
        // Five digits of the energy leave 1e-5 of its exponential.
        close(findings.answers[0].value.unwrap(), 2.0, 1e-5);
    }

    /// OpenStax, Chemistry 2e, §12.5: sucrose from two rate constants; k at 47 °C printed as
    /// 3.2e-10 (3 % for its two digits), recomputed 3.1527e-10.
    fn sucrose_at_47_degrees() {
        let text = paste("1/s", &[300.15, 310.15], &[2.1e-11, 8.5e-11]);
        let findings = found(&text, json!({"asked": [
            {"question": "rate-at", "temperature": {"value": 47.0, "unit": "°C"}}
        ]}));
        close(findings.answers[0].value.unwrap(), 3.2e-10, 0.03);
        close(findings.answers[0].value.unwrap(), 3.1527269593338135e-10, 1e-9);
    }
}
