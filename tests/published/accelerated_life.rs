//! Accelerated ageing: factors between temperatures, from handbooks and standards.

use checks::{checks, close, found};
use kinetics_core::numeric::distributions::normal_quantile;
use kinetics_core::numeric::least_squares::fit;
use kinetics_core::study::Findings;
use nalgebra::DMatrix;
use serde_json::{Value, json};

/// Boltzmann's constant in eV/K and one eV in J/mol, exact since the 2019 SI.
const BOLTZMANN_ELECTRONVOLTS: f64 = 8.617_333_262_145_179e-5;
const ELECTRONVOLT: f64 = 96_485.332_123_3;
const DAY: f64 = 86400.0;

fn known(energy: f64, unit: &str, celsius: f64, law: &str, asked: Value) -> Findings {
    found(
        "",
        json!({
            "measured": {
                "form": "known-law",
                "activation_energy": {"value": energy, "unit": unit},
                "rate_constant": {"value": 1.0, "unit": "1/yr"},
                "temperature": {"value": celsius, "unit": "°C"}
            },
            "assumed": {"temperature_law": law},
            "asked": asked
        }),
    )
}

fn speed_up(to: f64, from: f64, unit: &str) -> Value {
    json!({
        "question": "speed-up",
        "to": {"value": to, "unit": unit},
        "from": {"value": from, "unit": unit}
    })
}

fn rate_at(celsius: f64) -> Value {
    json!({"question": "rate-at", "temperature": {"value": celsius, "unit": "°C"}})
}

/// NIST/SEMATECH e-Handbook of Statistical Methods, 8.4.2.1: hours to failure in three cells at
/// 85, 105 and 125 °C, with how many were on test (partly from memory).
const CELLS: [(f64, f64, &[f64]); 3] = [
    (85.0, 100.0, &[401.0, 428.0, 695.0, 725.0, 738.0]),
    (
        105.0,
        50.0,
        &[
            171.0, 187.0, 189.0, 266.0, 275.0, 285.0, 301.0, 302.0, 305.0, 316.0, 317.0, 324.0,
            349.0, 350.0, 386.0, 405.0, 480.0, 493.0, 530.0, 534.0, 536.0, 567.0, 589.0, 598.0,
            599.0, 614.0, 620.0, 650.0, 668.0, 685.0, 718.0, 795.0, 854.0, 917.0, 926.0,
        ],
    ),
    (
        125.0,
        25.0,
        &[
            24.0, 42.0, 92.0, 93.0, 141.0, 142.0, 143.0, 159.0, 181.0, 188.0, 194.0, 199.0, 207.0,
            213.0, 243.0, 256.0, 259.0, 290.0, 294.0, 305.0, 392.0, 454.0, 502.0, 696.0,
        ],
    ),
];

/// ln of the median life of a cell: the line of ln t on normal quantiles at the median ranks
/// (i − 0.3)/(n + 0.4).
fn ln_median_life(on_test: f64, hours: &[f64]) -> f64 {
    let rank = |i: usize| (i as f64 + 0.7) / (on_test + 0.4);
    let design = DMatrix::from_fn(hours.len(), 2, |i, j| [1.0, normal_quantile(rank(i))][j]);
    let ln_hours: Vec<f64> = hours.iter().map(|t| t.ln()).collect();
    fit(&design, &ln_hours, &vec![1.0; hours.len()]).unwrap().coefficients[0]
}

/// The three medians pasted as rates 1/T50, each weighing as much as units failed in its cell.
fn handbook_study() -> Findings {
    let mut text = String::from("T/°C\tk, 1/h\ts(k)\n");
    for (celsius, on_test, hours) in CELLS {
        let rate = (-ln_median_life(on_test, hours)).exp();
        // s of ln k is √ln(1 + (s/k)²); its square is to be 1e-4 over the number failed.
        let relative = (1e-4 / hours.len() as f64).exp_m1().sqrt();
        text.push_str(&format!("{celsius}\t{rate:e}\t{:e}\n", rate * relative));
    }
    let asked = [speed_up(398.16, 358.16, "K"), speed_up(398.15, 358.15, "K")];
    found(&text, json!({"assumed": {"scatter": "as-stated"}, "asked": asked}))
}

checks! {
    /// The medians of the handbook's cells, printed to 1e-6.
    fn handbook_medians() {
        for ((_, on_test, hours), printed) in CELLS.iter().zip([8.167866, 6.415268, 5.319294]) {
            let found = ln_median_life(*on_test, hours);
            assert!((found - printed).abs() <= 0.6e-6, "{found} is not {printed}");
        }
    }

    /// ln T50 = −18.31134 + 0.8084907·x with x = 11605/T, weighted by the numbers failed, and
    /// 13.89814 times as fast at 125 as at 85 °C. The handbook converts with 273.15 in the line and
    /// with 273.16 in the factor; so must whoever meets its digits. Printed to seven digits, met
    /// to 1e-7 relative or their last digit.
    fn handbook_line_and_factor() {
        let findings = handbook_study();
        let law = findings.law.as_ref().unwrap();
        let slope = law.activation_energy.value / ELECTRONVOLT / BOLTZMANN_ELECTRONVOLTS / 11605.0;
        close(slope, 0.8084907, 1e-7);
        close(slope, 0.8084907364673799, 1e-9);
        let per_hour = law.pre_exponential_factor.value * 3600.0;
        close(-per_hour.ln(), -18.3113408, 1e-8);
        close(1.0 / per_hour, 1.115542e-8, 1e-6);
        close(findings.answers[0].value.unwrap(), 13.89814, 5e-7);
        close(findings.answers[0].value.unwrap(), 13.898141305003085, 1e-9);
    }

    /// What exact constants move: 1/k_B is 11604.518 K/eV, which makes 0.80852 eV of 0.80849, and
    /// 273.15 in the factor too makes 13.9001 of 13.8981 (recomputed independently).
    fn handbook_with_exact_constants() {
        let findings = handbook_study();
        let energy = findings.law.as_ref().unwrap().activation_energy.value / ELECTRONVOLT;
        close(energy, 0.8085243091033674, 1e-9);
        close(energy / 0.8084907, 11605.0 / 11_604.518_121_55, 1e-7);
        close(findings.answers[1].value.unwrap(), 13.900081389635782, 1e-9);
    }

    /// NIST/SEMATECH e-Handbook 8.1.5.1: from 25 to 125 °C 133 times for 0.5 eV and 17 597 times for
    /// 1.0 eV, met to their last digit with the 11605 K/eV and 273.16 of its section 8.4.2.1. Exact
    /// constants make 17 599.90 of it (recomputed independently).
    fn factors_of_half_and_one_electronvolt() {
        let asked = json!([speed_up(125.0, 25.0, "°C"), speed_up(398.16, 298.16, "K")]);
        let half = known(0.5, "eV", 25.0, "arrhenius", asked.clone());
        close(half.answers[0].value.unwrap(), 133.0, 0.5 / 133.0);
        close(half.answers[0].value.unwrap(), 132.66461466942792, 1e-9);
        let one = known(1.0, "eV", 25.0, "arrhenius", asked.clone());
        close(one.law.as_ref().unwrap().activation_energy.value, ELECTRONVOLT, 1e-10);
        close(one.answers[0].value.unwrap(), 17599.89998538779, 1e-9);
        // The handbook's own digits, by the energy that its constant makes of 1 eV.
        let rounded = 11605.0 * BOLTZMANN_ELECTRONVOLTS;
        let handbook = known(rounded, "eV", 25.0, "arrhenius", asked);
        close(handbook.answers[1].value.unwrap(), 17597.0, 0.5 / 17597.0);
    }

    /// ASTM F1980: factors Q10^((T − T_room)/10), and days that stand in for a year (partly from
    /// memory; recomputed independently). A fixed Q10 is a log-linear law, Ea = R T² ln Q10/10 K.
    fn ageing_factors() {
        for (q10, warm, room, factor, days) in [
            (2.0, 55.0, 22.0, 9.849155306759329, 37.05901558375325),
            (2.0, 55.0, 23.0, 9.18958683997628, 39.71886945038566),
            (1.8, 60.0, 25.0, 7.824449066867265, 46.64865179397709),
        ] {
            let kelvin: f64 = room + 273.15;
            let energy = 8.314_462_618_153_24e-3 * kelvin * kelvin * f64::ln(q10) / 10.0;
            let findings = known(energy, "kJ/mol", room, "log-linear", json!([
                speed_up(warm, room, "°C"),
                {
                    "question": "equivalent-time",
                    "temperature": {"value": warm, "unit": "°C"},
                    "time": {"value": 365, "unit": "d"},
                    "other_temperature": {"value": room, "unit": "°C"}
                },
                rate_at(40.0)
            ]));
            close(findings.answers[0].value.unwrap(), factor, 1e-9);
            close(findings.answers[1].value.unwrap() / DAY, days, 1e-9);
            close(findings.answers[2].detail["q10"].as_f64().unwrap(), q10, 1e-9);
        }
    }

    /// Q10 = exp(10 Ea/(R T(T + 10))) is no constant: 2 from 25 to 35 °C means 52.949 kJ/mol, from
    /// 45 to 55 °C 60.168 (five digits printed, which leave 1e-5 of the factor).
    fn doubling_means_more_energy_the_warmer_it_is() {
        for (energy, celsius) in [(52.949, 25.0), (60.168, 45.0)] {
            let findings = known(energy, "kJ/mol", celsius, "arrhenius", json!([rate_at(celsius)]));
            close(findings.answers[0].detail["q10"].as_f64().unwrap(), 2.0, 1e-5);
        }
    }

    /// OpenStax, Chemistry 2e, §12.5: what takes 48 min takes 12 min 20 K warmer by the doubling
    /// rule. Exact.
    fn doubling_rule_shortens() {
        let findings = known(60.0, "kJ/mol", 25.0, "arrhenius", json!([{
            "question": "equivalent-time",
            "temperature": {"value": 45, "unit": "°C"},
            "time": {"value": 48, "unit": "min"},
            "other_temperature": {"value": 25, "unit": "°C"}
        }]));
        close(findings.answers[0].detail["doubling_rule"].as_f64().unwrap() / 60.0, 12.0, 1e-12);
    }

    /// Sodium hypochlorite. M. W. Lister, Can. J. Chem. 1956, 34, 465: 24.8 kcal/mol, which is Q10 =
    /// 4.0727 from 20 to 30 °C (recomputed; the trade's rule is 3.5). D. F. Church, Ind. Eng. Chem. Res.
    /// 1994, 33, 239: with copper Ea = 83.3 and ΔH‡ = 80.55 kJ/mol at 40 to 70 °C; Ea − RT at 55 °C
    /// is 80.57, and agrees within half a digit of that Ea.
    fn hypochlorite() {
        let findings = known(24.8, "kcal/mol", 20.0, "arrhenius", json!([rate_at(20.0)]));
        close(findings.answers[0].detail["q10"].as_f64().unwrap(), 4.072698637055003, 1e-9);

        let with_copper = known(83.3, "kJ/mol", 55.0, "arrhenius", json!([]));
        let enthalpy = with_copper.law.unwrap().enthalpy_of_activation.value / 1000.0;
        assert!((enthalpy - 80.55).abs() <= 0.05, "{enthalpy}");
        close(enthalpy, 80.5716090919033, 1e-9);
    }

    /// Hypochlorous acid, L. C. Adam et al., Inorg. Chem. 1992, 31, 3534: ΔH‡ = 64.0 kJ/mol and ΔS‡ =
    /// −67 J/(mol K), third order, 15 to 50 °C. Rate constants made of these by Eyring's equation, k =
    /// (k_B T/h)·exp(ΔS‡/R)·exp(−ΔH‡/(RT)) (from memory), give both back. The paste keeps sixteen
    /// digits, of which ln k and the slope leave eleven.
    fn hypochlorous_acid() {
        let gas_constant = BOLTZMANN_ELECTRONVOLTS * ELECTRONVOLT;
        let mut text = String::from("T/°C\tk, L^2/(mol^2 s)\n");
        for celsius in [15.0, 25.0, 35.0, 50.0] {
            let t: f64 = celsius + 273.15;
            let k = 20_836_619_123.3 * t * (-67.0 / gas_constant - 64.0e3 / (gas_constant * t)).exp();
            text.push_str(&format!("{celsius}\t{k:e}\n"));
        }
        let findings = found(&text, json!({"assumed": {"temperature_law": "eyring"}}));
        let law = findings.law.unwrap();
        assert_eq!(findings.read.order, Some(3.0));
        close(law.enthalpy_of_activation.value, 64.0e3, 1e-9);
        close(law.entropy_of_activation.unwrap().value, -67.0, 1e-9);
        let thermal = gas_constant * law.reference_temperature_kelvin;
        close(law.activation_energy.value, 64.0e3 + thermal, 1e-9);
    }
}
