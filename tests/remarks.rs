//! Every remark fires on its trigger, and just does not beside it.

use checks::{found, remark_codes};
use serde_json::{Value, json};

const R: f64 = 8.314_462_618;

/// Runs on an Arrhenius law: temperatures in °C, each with its misfit in ln k; energy in kJ/mol,
/// k in 1/h at 60 °C.
fn paste(energy: f64, at_60: f64, unit: &str, runs: &[(f64, f64)]) -> String {
    let mut text = format!("T/°C\tk, {unit}\n");
    for (t, misfit) in runs {
        let x = 1.0 / (t + 273.15) - 1.0 / 333.15;
        text.push_str(&format!("{t}\t{:e}\n", at_60 * (misfit - energy * 1000.0 / R * x).exp()));
    }
    text
}

const SIX: [(f64, f64); 6] =
    [(50.0, 0.03), (55.0, -0.04), (60.0, -0.01), (65.0, 0.02), (70.0, 0.03), (75.0, -0.03)];

fn usual() -> String {
    paste(90.0, 0.05, "1/h", &SIX)
}

#[track_caller]
fn check(code: &str, fires: (&str, Value), just_not: (&str, Value)) {
    let with = found(fires.0, fires.1);
    let remark = with.remarks.iter().find(|r| r.code == code);
    let remark = remark.unwrap_or_else(|| panic!("{code} is not in {:?}", remark_codes(&with)));
    for text in [&remark.sentence, &remark.remedy] {
        assert!(text.ends_with('.') && text.len() > 15 && !text.contains("NaN"), "{text}");
    }
    let without = found(just_not.0, just_not.1);
    assert!(without.law.is_some(), "{:?}", without.problems);
    assert!(!remark_codes(&without).contains(&code), "{:?}", without.remarks);
}

fn asked(question: Value) -> Value {
    json!({"asked": [question]})
}

fn celsius(t: f64) -> Value {
    json!({"value": t, "unit": "°C"})
}

fn stated(kilojoules: f64) -> Value {
    json!({"measured": {"stated_activation_energy": {"value": kilojoules, "unit": "kJ/mol"}}})
}

#[test]
fn celsius_as_kelvin() {
    let as_kelvin = usual().replace("T/°C", "T/K");
    let barely = "T/K\tk, 1/h\n151\t1e-3\n160\t2e-3\n170\t4e-3\n";
    check("celsius-as-kelvin", (&as_kelvin, json!({})), (barely, json!({})));
}

#[test]
fn log_base() {
    let fitted = found(&usual(), json!({})).law.map_or(0.0, |l| l.activation_energy.value / 1e3);
    check(
        "log-base",
        (&usual(), stated(fitted / 2.303 * 1.015)),
        (&usual(), stated(fitted / 2.303 * 1.03)),
    );
}

#[test]
fn unit_of_energy() {
    let fitted = found(&usual(), json!({})).law.map_or(0.0, |l| l.activation_energy.value / 1e3);
    check("unit-of-energy", (&usual(), stated(fitted * 4.184)), (&usual(), stated(fitted * 4.3)));
    check("unit-of-energy", (&usual(), stated(fitted / 1000.0)), (&usual(), stated(fitted)));
}

#[test]
fn negative_activation_energy() {
    let falling = paste(-20.0, 0.05, "1/h", &SIX);
    check("negative-ea", (&falling, json!({})), (&usual(), json!({})));
    // Positive, but its interval includes zero.
    let unsure = paste(5.0, 0.05, "1/h", &SIX.map(|(t, e)| (t, 10.0 * e)));
    check("negative-ea", (&unsure, json!({})), (&usual(), json!({})));
}

#[test]
fn two_points() {
    let two = paste(90.0, 0.05, "1/h", &SIX[..2]);
    check("two-points", (&two, json!({})), (&paste(90.0, 0.05, "1/h", &SIX[..3]), json!({})));
}

#[test]
fn curvature() {
    let bend = |size: f64| {
        let bent = SIX.map(|(t, e)| (t, 0.2 * e + size * ((t - 62.5) / 12.5_f64).powi(2)));
        paste(90.0, 0.05, "1/h", &bent)
    };
    check("curvature", (&bend(0.1), json!({})), (&bend(0.0), json!({})));
}

/// With stated errors a bend counts only where it exceeds them, whichever scatter they enter; how
/// well four runs happen to follow a parabola says nothing.
#[test]
fn curvature_beside_stated_errors() {
    let bend = |runs: &[(f64, f64)], size: f64, percent: f64| {
        let bent: Vec<(f64, f64)> = runs
            .iter()
            .map(|(t, e)| (*t, 0.02 * e + size * ((t - 62.5) / 12.5_f64).powi(2)))
            .collect();
        let mut text = String::new();
        for (i, line) in paste(90.0, 0.05, "1/h", &bent).lines().enumerate() {
            let error = if i == 0 { "s(k), %".to_owned() } else { percent.to_string() };
            text.push_str(&format!("{line}\t{error}\n"));
        }
        text
    };
    let as_stated = json!({"assumed": {"scatter": "as-stated"}});
    for choice in [json!({}), as_stated.clone()] {
        let (fires, just_not) = (bend(&SIX, 0.1, 2.0), bend(&SIX, 0.1, 8.0));
        check("curvature", (&fires, choice.clone()), (&just_not, choice));
    }
    // Four runs, stated to 7.5 % and bent by 1 %: F is in the hundreds.
    let four = bend(&SIX[..4], 0.02, 7.5);
    check("curvature", (&bend(&SIX[..4], 0.2, 1.0), as_stated), (&four, json!({})));
    // Nor does a single degree of freedom of the residuals say anything.
    let from_residuals = json!({"assumed": {"scatter": "from-residuals"}});
    check("curvature", (&bend(&SIX, 0.1, 8.0), from_residuals.clone()), (&four, from_residuals));
}

#[test]
fn influence() {
    let slipped = |slip: f64| {
        let mut runs = SIX;
        runs[2].1 += slip;
        paste(90.0, 0.05, "1/h", &runs)
    };
    check("influence", (&slipped(0.6), json!({})), (&slipped(0.0), json!({})));
}

#[test]
fn implausible_a() {
    let slow = paste(90.0, 1e-6, "1/h", &SIX);
    check("implausible-a", (&slow, json!({})), (&paste(90.0, 0.3, "1/h", &SIX), json!({})));
}

#[test]
fn diffusion_limit() {
    let unit = "L/(mol s)";
    let fast = paste(20.0, 2e10, unit, &SIX);
    check("diffusion-limit", (&fast, json!({})), (&paste(20.0, 0.5e10, unit, &SIX), json!({})));
    let slow = paste(20.0, 0.8e10, unit, &SIX[..4]);
    let hot = asked(json!({"question": "rate-at", "temperature": celsius(90.0)}));
    check("diffusion-limit", (&slow, hot), (&slow, json!({})));
}

#[test]
fn excess_scatter() {
    let with_errors = |share: f64| {
        let text = usual();
        let mut lines: Vec<String> = text.lines().map(str::to_owned).collect();
        for (i, line) in lines.iter_mut().enumerate() {
            let error = if i == 0 { "s".into() } else { format!("{share} %") };
            line.push_str(&format!(
                "\t{}",
                if i == 0 { "s(k), %".into() } else { error.replace(" %", "") }
            ));
        }
        lines.join("\n")
    };
    check("excess-scatter", (&with_errors(1.0), json!({})), (&with_errors(4.0), json!({})));
    let as_stated = json!({"assumed": {"scatter": "as-stated"}});
    check("excess-scatter", (&with_errors(1.0), as_stated.clone()), (&with_errors(4.0), as_stated));
}

#[test]
fn lack_of_fit() {
    let pairs = |step: f64| {
        let runs: Vec<(f64, f64)> = [(50.0, 0.0), (60.0, step), (70.0, 0.0), (80.0, -step)]
            .iter()
            .flat_map(|&(t, e)| [(t, e + 0.02), (t, e - 0.02)])
            .collect();
        paste(90.0, 0.05, "1/h", &runs)
    };
    check("lack-of-fit", (&pairs(0.15), json!({})), (&pairs(0.01), json!({})));
}

#[test]
fn weighting() {
    // Bent upwards alike at both ends: the line in ln k does not tilt, that in k follows the hot
    // end alone.
    let quiet =
        [(50.0, 0.03), (55.0, -0.03), (60.0, 0.0), (65.0, 0.01), (70.0, -0.01), (75.0, 0.0)];
    let bent = |size: f64| {
        let runs = quiet.map(|(t, e)| (t, e + size * ((t - 62.5) / 12.5_f64).powi(2)));
        paste(90.0, 0.05, "1/h", &runs)
    };
    check("weighting", (&bent(0.1), json!({})), (&bent(0.0), json!({})));
}

/// Runs with their stated errors in per cent, in the order of [`SIX`].
fn with_errors(percent: [f64; 6]) -> String {
    let mut text = usual().replacen("1/h\n", "1/h\ts(k), %\n", 1);
    for (line, error) in usual().lines().skip(1).zip(percent) {
        text = text.replacen(&format!("{line}\n"), &format!("{line}\t{error}\n"), 1);
    }
    text
}

fn thermometer_of(kelvins: f64, scatter: &str) -> Value {
    let sd = json!({"value": kelvins, "unit": "K"});
    json!({"measured": {"thermometer": {"sd": sd}}, "assumed": {"scatter": scatter}})
}

/// (Ea u/(R T²))² is a quarter of the whole where it is a third of the 5 % stated: at 0.30 K about
/// 62.5 °C. The run-to-run scatter and the residuals contain it: there it is a quarter of theirs.
#[test]
fn thermometer() {
    let text = with_errors([5.0; 6]);
    let with = |kelvins: f64, scatter: &str| thermometer_of(kelvins, scatter);
    check("thermometer", (&text, with(0.31, "as-stated")), (&text, with(0.29, "as-stated")));
    let plus = "as-stated-plus-run-to-run";
    check("thermometer", (&text, with(0.27, plus)), (&text, with(0.25, plus)));
    let from = "from-residuals";
    let law = found(&usual(), with(0.0, from)).law.unwrap();
    // Var(ln k at T0) is s²/6.
    let residual = (6.0 * law.covariance.unwrap()[0][0]).sqrt();
    let energy = law.activation_energy.value;
    let quarter = 0.5 * residual * R * 335.65 * 335.65 / energy;
    check(
        "thermometer",
        (&usual(), with(1.05 * quarter, from)),
        (&usual(), with(0.95 * quarter, from)),
    );
}

/// What a run's leaving would do is said of the fit that was made, its thermometer included.
#[test]
fn influence_keeps_the_thermometer() {
    let text = with_errors([0.2, 8.0, 8.0, 8.0, 8.0, 0.2]);
    let energy_without = |row: usize, kelvins: f64| {
        let mut study = thermometer_of(kelvins, "as-stated");
        study["measured"]["excluded"] = json!([{"row": row, "reason": "to compare"}]);
        let energy = found(&text, study).law.unwrap().activation_energy.value;
        format!("{:.1}", energy / 1e3)
    };
    let findings = found(&text, thermometer_of(1.0, "as-stated"));
    let remark = findings.remarks.iter().find(|r| r.code == "influence").unwrap();
    let row: usize = remark.sentence.split("(row ").nth(1).unwrap()[..1].parse().unwrap();
    assert!(remark.sentence.contains(&energy_without(row, 1.0)), "{}", remark.sentence);
    assert_ne!(energy_without(row, 1.0), energy_without(row, 0.0));
}

#[test]
fn extrapolation() {
    let time = |t: f64| {
        asked(
            json!({"question": "time-to-extent", "temperature": celsius(t), "gone": {"value": 5.0, "unit": "%"}}),
        )
    };
    check("extrapolation", (&usual(), time(34.9)), (&usual(), time(39.0)));
}

#[test]
fn doubling_rule() {
    let speed_up = |energy: f64| {
        let text = paste(energy, 0.05, "1/h", &SIX);
        (text, asked(json!({"question": "speed-up", "to": celsius(60.0), "from": celsius(40.0)})))
    };
    let (fast, question) = speed_up(90.0);
    // Twice per 10 K between 40 and 60 °C is 60.1 kJ/mol.
    let (as_the_rule, _) = speed_up(62.0);
    check("doubling-rule", (&fast, question.clone()), (&as_the_rule, question));
}

#[test]
fn order_and_unit() {
    let order = |n: f64| json!({"assumed": {"order": n}});
    check("order-and-unit", (&usual(), order(2.0)), (&usual(), order(1.0)));
    let refused = found(
        &usual(),
        json!({"assumed": {"order": 2.0}, "asked": [{"question": "rate-at", "temperature": celsius(25.0)}]}),
    );
    assert!(refused.law.is_none() && refused.answers[0].refused.is_some());
}

#[test]
fn errors_incomplete() {
    let some = "T/°C\tk, 1/h\ts(k)\n50\t0.0021\t0.0001\n60\t0.0059\t\n70\t0.0152\t0.0007\n";
    let all = some.replace("0.0059\t", "0.0059\t0.0003");
    check("errors-incomplete", (some, json!({})), (&all, json!({})));
    assert_eq!(
        serde_json::to_value(found(some, json!({})).read.scatter).ok(),
        Some(json!("from-residuals"))
    );
}

#[test]
fn rivals_unranked() {
    let runs = |n: usize| paste(90.0, 0.05, "1/h", &SIX[..n]);
    check("rivals-unranked", (&runs(4), json!({})), (&runs(5), json!({})));
}

#[test]
fn later_version() {
    check(
        "later-version",
        (&usual(), json!({"kelvinclock": 2})),
        (&usual(), json!({"kelvinclock": 1})),
    );
}
