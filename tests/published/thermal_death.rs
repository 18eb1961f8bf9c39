//! D and z of thermal processing: D = ln 10/k, and a log-linear law.

use checks::{checks, close, found};
use kinetics_core::study::Findings;
use serde_json::{Value, json};
use std::f64::consts::LN_10;

const MINUTE: f64 = 60.0;
const MOLAR_GAS_CONSTANT: f64 = 8.314_462_618_153_24;

/// T. E. Odlaug & I. J. Pflug, Appl. Environ. Microbiol. 1977, 34, 23 (abstract): Clostridium
/// botulinum, D in min at these temperatures in °C, in tomato juice and in buffer.
const CELSIUS: [f64; 3] = [115.6, 110.0, 104.4];
const TOMATO: [f64; 3] = [0.4, 1.6, 6.0];
const BUFFER: [f64; 3] = [1.3, 4.4, 17.6];

/// D pasted as k = ln 10/D, asked at 121.1 °C.
fn decimal_reductions(minutes: [f64; 3], law: &str) -> Findings {
    let mut text = String::from("T/°C\tk / min⁻¹\n");
    for (t, d) in CELSIUS.iter().zip(minutes) {
        text.push_str(&format!("{t}\t{:e}\n", LN_10 / d));
    }
    found(
        &text,
        json!({
            "assumed": {"temperature_law": law},
            "asked": [{"question": "rate-at", "temperature": {"value": 121.1, "unit": "°C"}}]
        }),
    )
}

fn detail(findings: &Findings, name: &str) -> f64 {
    findings.answers[0].detail[name].as_f64().unwrap()
}

/// A law with its z in K at a temperature: Ea = ln 10·R T²/z there.
fn known(d_minutes: f64, z: f64, celsius: f64, law: &str, asked: Value) -> Findings {
    let kelvin = celsius + 273.15;
    found(
        "",
        json!({
            "measured": {
                "form": "known-law",
                "activation_energy":
                    {"value": LN_10 * MOLAR_GAS_CONSTANT * kelvin * kelvin / z, "unit": "J/mol"},
                "rate_constant": {"value": LN_10 / d_minutes, "unit": "1/min"},
                "temperature": {"value": celsius, "unit": "°C"}
            },
            "assumed": {"temperature_law": law},
            "asked": asked
        }),
    )
}

checks! {
    /// Published z: 9.4 and 9.9 °C. Three points with D rounded to one decimal leave 0.2 °C;
    /// the line of log10 D on T through them, worked out independently, is met to 1e-9.
    fn botulinum_in_tomato_juice_and_buffer() {
        let tomato = decimal_reductions(TOMATO, "log-linear");
        close(detail(&tomato, "z_value"), 9.4, 0.2 / 9.4);
        close(detail(&tomato, "z_value"), 9.523070521749135, 1e-9);
        close(detail(&tomato, "d_value") / MINUTE, 0.10695143858030055, 1e-9);
        let buffer = decimal_reductions(BUFFER, "log-linear");
        close(detail(&buffer, "z_value"), 9.9, 0.2 / 9.9);
        close(detail(&buffer, "z_value"), 9.89775866711154, 1e-9);
        close(detail(&buffer, "d_value") / MINUTE, 0.3516982555226382, 1e-9);
    }

    /// The Arrhenius line through the same D, recomputed independently; the energy that z stands
    /// for at the mean of the temperatures differs by 1e-3 of itself.
    fn botulinum_as_activation_energies() {
        for (minutes, from_d, from_z) in [
            (TOMATO, 295009.7699183165, 295128.0685023871),
            (BUFFER, 283963.5537225295, 283955.7422868582),
        ] {
            let energy = |law| decimal_reductions(minutes, law).law.unwrap().activation_energy.value;
            close(energy("arrhenius"), from_d, 1e-9);
            close(energy("log-linear"), from_z, 1e-3);
        }
    }

    /// Clostridium botulinum, D = 0.21 min at 121.1 °C and z = 10 °C: twelve decimal reductions take
    /// 2.52 min. What is left, 1e-12 of the whole, keeps four digits in a double, of which the
    /// logarithm makes 3e-6.
    fn twelve_decimal_reductions() {
        let steriliser = json!({"value": 121.1, "unit": "°C"});
        let findings = known(0.21, 10.0, 121.1, "log-linear", json!([
            {"question": "rate-at", "temperature": steriliser},
            {
                "question": "time-to-extent",
                "temperature": steriliser,
                "gone": {"value": 99.9999999999, "unit": "%"}
            },
            {
                "question": "equivalent-time",
                "temperature": steriliser,
                "time": {"value": 100.0, "unit": "min"},
                "other_temperature": {"value": 101.1, "unit": "°C"}
            }
        ]));
        close(detail(&findings, "d_value") / MINUTE, 0.21, 1e-12);
        close(detail(&findings, "z_value"), 10.0, 1e-12);
        close(findings.answers[1].value.unwrap() / MINUTE, 2.52, 1e-5);
        // F: each z colder counts a tenth, so that two make 100 min worth 1 min.
        close(findings.answers[2].value.unwrap() / MINUTE, 1.0, 1e-12);
    }

    /// I. Van den Broeck et al., J. Agric. Food Chem. 1998, 46, 2001: L-ascorbic acid at 120 to
    /// 150 °C, z = 27.15 °C in orange and 30.15 °C in tomato; as activation energies at 135 °C
    /// 117.468 and 105.780 kJ/mol (recomputed independently with 2.302585 for ln 10, 4e-8 less than it
    /// is). Under Arrhenius z holds there only.
    fn ascorbic_acid() {
        for (z, energy) in [(27.15, 117468.01336330985), (30.15, 105779.65382467205)] {
            let asked = json!([
                {"question": "rate-at", "temperature": {"value": 135, "unit": "°C"}},
                {"question": "rate-at", "temperature": {"value": 150, "unit": "°C"}}
            ]);
            let findings = known(10.0, z, 135.0, "arrhenius", asked);
            close(findings.law.as_ref().unwrap().activation_energy.value, energy, 1e-7);
            close(detail(&findings, "z_value"), z, 1e-12);
            let warmer = findings.answers[1].detail["z_value"].as_f64().unwrap();
            close(warmer, z * (423.15_f64 / 408.15).powi(2), 1e-12);
        }
    }

    /// Pasteurisation units, minutes·1.393^(T − 60 °C): z = 6.947 °C, 305.875 kJ/mol at 60 °C. Formula
    /// from memory; figures recomputed independently.
    fn pasteurisation_units() {
        let z = 10.0_f64.ln() / 1.393_f64.ln();
        close(z, 6.9468026705316355, 1e-12);
        let findings = known(1.0, z, 60.0, "log-linear", json!([{
            "question": "equivalent-time",
            "temperature": {"value": 60, "unit": "°C"},
            "time": {"value": 1, "unit": "min"},
            "other_temperature": {"value": 63, "unit": "°C"}
        }]));
        close(findings.answers[0].value.unwrap() / MINUTE, 1.393_f64.powi(3), 1e-10);
        close(findings.law.unwrap().activation_energy.value, 305875.39725172275, 1e-9);
    }
}
