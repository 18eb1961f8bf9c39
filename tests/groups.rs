//! Runs that share an oven or a batch: groups count as runs, and then intervals cover what they
//! claim where runs taken one by one do not.

use checks::{close, found, remark_codes};
use kinetics_core::study::Findings;
use rand_distr::{Distribution, StandardNormal};
use rand_pcg::Pcg64Mcg;
use rand_pcg::rand_core::SeedableRng;
use serde_json::{Value, json};

/// A run: °C, name of its batch, misfit in ln k.
type Run<'a> = (f64, &'a str, f64);

fn ln_rate(celsius: f64) -> f64 {
    -11.0 - 85_000.0 / 8.314_462_618 * (1.0 / (celsius + 273.15) - 1.0 / 333.15)
}

/// A paste with a column of batches, and one of errors where they are stated in per cent.
fn paste(runs: &[Run], percent: Option<f64>) -> String {
    let error = percent.map_or(String::new(), |percent| format!("\t{percent}"));
    let head = if percent.is_some() { "\ts(k), %" } else { "" };
    let mut text = format!("T/°C\tk, 1/s{head}\tbatch\n");
    for (t, batch, misfit) in runs {
        text.push_str(&format!("{t}\t{:e}{error}\t{batch}\n", (ln_rate(*t) + misfit).exp()));
    }
    text
}

/// The same runs, each its own.
fn ungrouped(percent: Option<f64>) -> Value {
    let mut columns = vec![json!({}); if percent.is_some() { 3 } else { 2 }];
    columns.push(json!({"role": "ignore"}));
    json!({"measured": {"columns": columns}})
}

fn energy(findings: &Findings) -> [f64; 3] {
    let energy = &findings.law.as_ref().unwrap().activation_energy;
    [energy.value, energy.low.unwrap_or(f64::NAN), energy.high.unwrap_or(f64::NAN)]
}

const NESTED: [Run; 8] = [
    (50.0, "A", 0.10),
    (50.0, "A", 0.14),
    (60.0, "B", -0.08),
    (60.0, "B", -0.12),
    (70.0, "C", 0.03),
    (70.0, "C", 0.05),
    (80.0, "D", -0.02),
    (80.0, "D", -0.06),
];

/// Equal groups, each at one temperature: least squares on their means, with the degrees of
/// freedom of the means.
#[test]
fn groups_of_one_temperature_are_least_squares_on_their_means() {
    let means: Vec<Run> = NESTED
        .chunks(2)
        .map(|pair| (pair[0].0, pair[0].1, 0.5 * (pair[0].2 + pair[1].2)))
        .collect();
    // Two errors of 4 % make one of 4 %/√2 on the scale of logarithms.
    let halved = ((1.0_f64 + 0.04 * 0.04).ln() / 2.0).exp_m1().sqrt() * 100.0;
    for (single, mean) in [(None, None), (Some(4.0), Some(halved))] {
        let grouped = found(&paste(&NESTED, single), json!({}));
        let expected = found(&paste(&means, mean), json!({}));
        for (found, expected) in energy(&grouped).into_iter().zip(energy(&expected)) {
            close(found, expected, 1e-9);
        }
        let law = grouped.law.as_ref().unwrap();
        assert_eq!(law.chi_squared.is_some(), single.is_some());
        assert_eq!((law.degrees_of_freedom, law.groups), (Some(2), Some(4)));
        assert!(grouped.record.text.contains("Degrees of freedom: 2, of 4 groups"));
        let choice = grouped.read.choices.iter().find(|c| c.contains("8 runs form 4 groups"));
        assert!(choice.is_some_and(|c| c.contains("count groups")), "{:?}", grouped.read.choices);
        assert_eq!(grouped.runs.len(), 8);
        assert_eq!(grouped.runs[2].group.as_deref(), Some("B"));
        // Every run keeps its own residual: the two of a batch differ by what they differ.
        let residual = |run: usize| grouped.runs[run].ln_residual.unwrap();
        close(residual(1) - residual(0), 0.04, 1e-9);
    }
}

#[test]
fn batches_of_one_run_and_stated_errors_alone_change_nothing() {
    let own: Vec<(f64, String, f64)> =
        NESTED.iter().enumerate().map(|(i, r)| (r.0, format!("b{i}"), r.2)).collect();
    let own: Vec<Run> = own.iter().map(|(t, batch, e)| (*t, &batch[..], *e)).collect();
    let one_each = found(&paste(&own, None), json!({}));
    assert_eq!(energy(&one_each), energy(&found(&paste(&own, None), ungrouped(None))));
    assert_eq!(one_each.law.unwrap().groups, None);

    let stated = json!({"assumed": {"scatter": "as-stated"}});
    let mut alone = ungrouped(Some(4.0));
    alone["assumed"] = stated["assumed"].clone();
    let text = paste(&NESTED, Some(4.0));
    let grouped = found(&text, stated);
    assert_eq!(energy(&grouped), energy(&found(&text, alone)));
    assert!(grouped.read.choices.iter().any(|c| c.contains("groups change nothing")));
}

#[test]
fn too_few_groups_have_no_interval_and_say_what_would_help() {
    for percent in [None, Some(4.0)] {
        let at = json!({"question": "rate-at", "temperature": {"value": 55, "unit": "°C"}});
        let two = found(&paste(&NESTED[..4], percent), json!({"asked": [at]}));
        assert!(two.answers[0].sentence.contains("so few groups"), "{}", two.answers[0].sentence);
        assert!(!remark_codes(&two).contains(&"two-points"), "{:?}", remark_codes(&two));
        let remark = two.remarks.iter().find(|r| r.code == "groups-few").unwrap();
        assert!(remark.sentence.contains("4 runs form 2 groups"), "{}", remark.sentence);
        assert!(remark.remedy.contains("3 groups or more"), "{}", remark.remedy);
        assert!(two.law.unwrap().activation_energy.low.is_none());
        // One batch at four temperatures is one run, whatever its residuals.
        let one: Vec<Run> = NESTED.iter().step_by(2).map(|r| (r.0, "A", r.2)).collect();
        let one = found(&paste(&one, percent), json!({}));
        assert!(one.law.unwrap().activation_energy.low.is_none());
        let three = found(&paste(&NESTED[..6], percent), json!({}));
        assert!(!remark_codes(&three).contains(&"groups-few"));
        assert!(three.law.unwrap().activation_energy.low.is_some());
    }
}

const REPLICATES: usize = 300;
/// Three Monte-Carlo standard errors below 0.94, see `coverage.rs`.
const LOWEST: f64 = 0.94 - 3.0 * 0.0137;

/// The share of simulated studies whose interval of k at a temperature covers the truth, with
/// groups and without: batches differ by 10 %, runs of a batch by 3 %.
fn coverage(design: &[(f64, &str)], percent: Option<f64>, celsius: f64, seed: u64) -> [f64; 2] {
    let mut random = Pcg64Mcg::seed_from_u64(seed);
    let mut normal = || -> f64 { StandardNormal.sample(&mut random) };
    let asked = json!([{"question": "rate-at", "temperature": {"value": celsius, "unit": "°C"}}]);
    let mut covered = [0; 2];
    for _ in 0..REPLICATES {
        let mut effects: Vec<(&str, f64)> = Vec::new();
        let mut runs: Vec<Run> = Vec::new();
        for (t, batch) in design {
            let effect = match effects.iter().find(|(name, _)| name == batch) {
                Some((_, effect)) => *effect,
                None => {
                    effects.push((batch, 0.1 * normal()));
                    effects[effects.len() - 1].1
                }
            };
            runs.push((*t, batch, effect + 0.03 * normal()));
        }
        let text = paste(&runs, percent);
        let choices = [json!({}), ungrouped(percent)];
        for (more, covered) in choices.into_iter().zip(&mut covered) {
            let mut more = more;
            more["asked"] = asked.clone();
            let answer = found(&text, more).answers.remove(0);
            let truth = ln_rate(celsius).exp();
            *covered += usize::from(answer.low.unwrap() <= truth && truth <= answer.high.unwrap());
        }
    }
    covered.map(|covered| covered as f64 / REPLICATES as f64)
}

#[track_caller]
fn holds(design: &[(f64, &str)], percent: Option<f64>, celsius: f64, seed: u64) -> f64 {
    let [grouped, alone] = coverage(design, percent, celsius, seed);
    assert!(grouped >= LOWEST, "with groups {grouped}, without {alone}");
    assert!(alone < 0.87, "with groups {grouped}, without {alone}");
    alone
}

/// One oven load a temperature, four runs in each.
#[test]
fn intervals_cover_with_one_batch_a_temperature() {
    let design: Vec<(f64, &str)> = [(50.0, "A"), (60.0, "B"), (70.0, "C"), (80.0, "D")]
        .iter()
        .flat_map(|place| [*place; 4])
        .collect();
    assert!(holds(&design, None, 25.0, 1) < 0.8);
    assert!(holds(&design, Some(3.0), 25.0, 2) < 0.8);
}

/// Every batch at three temperatures.
#[test]
fn intervals_cover_with_batches_that_span_temperatures() {
    let design: Vec<(f64, &str)> = ["A", "B", "C", "D", "E"]
        .iter()
        .flat_map(|batch| [(50.0, *batch), (65.0, *batch), (80.0, *batch)])
        .collect();
    holds(&design, None, 65.0, 3);
    holds(&design, Some(3.0), 65.0, 4);
}

/// One large batch and single ones.
#[test]
fn intervals_cover_with_batches_of_unequal_size() {
    let mut design: Vec<(f64, &str)> = (0..8).map(|i| (50.0 + 4.0 * f64::from(i), "A")).collect();
    design.extend([(50.0, "B"), (60.0, "C"), (70.0, "D"), (80.0, "E")]);
    holds(&design, None, 65.0, 5);
    holds(&design, Some(3.0), 65.0, 6);
}
