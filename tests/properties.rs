//! Properties that hold for any study: units never change an answer, hotter is never slower when
//! the activation energy is positive, intervals contain their estimates, and a study saved and
//! opened gives the same findings.

use checks::found;
use kinetics_core::quantity::Seconds;
use kinetics_core::study::{Findings, Study, evaluate};
use kinetics_core::units::TimeUnit;
use kinetics_core::wording::{Display, Figures, Rounding, duration_bound};
use proptest::prelude::*;
use serde_json::{Value, json};

/// Runs of an invented reaction: temperatures in K, k in 1/s with relative errors.
#[derive(Debug, Clone)]
struct Runs {
    temperatures: Vec<f64>,
    rates: Vec<f64>,
    relative_errors: Vec<f64>,
}

fn runs() -> impl Strategy<Value = Runs> {
    let run = (0.0..1.0_f64, -0.3..0.3_f64, 0.01..0.3_f64);
    (
        250.0..450.0_f64,
        15.0..60.0_f64,
        30e3..150e3_f64,
        -14.0..-4.0_f64,
        prop::collection::vec(run, 3..9),
    )
        .prop_map(|(coldest, span, energy, ln_rate, points)| {
            let count = points.len() as f64;
            let mut runs = Runs { temperatures: vec![], rates: vec![], relative_errors: vec![] };
            for (i, (jitter, noise, error)) in points.into_iter().enumerate() {
                let share = (i as f64 + 0.5 * jitter) / count;
                let t = ((coldest + span * share) * 100.0).round() / 100.0;
                let x = 1.0 / t - 1.0 / (coldest + 0.5 * span);
                runs.temperatures.push(t);
                runs.rates.push((ln_rate - energy / 8.314_462_618 * x + noise * error).exp());
                runs.relative_errors.push(error);
            }
            runs
        })
}

fn text(runs: &Runs, errors: bool, celsius: bool, per: (&str, f64)) -> String {
    let (scale, shift) = if celsius { ("°C", -273.15) } else { ("K", 0.0) };
    let mut text = format!("T/{scale}\tk / {}{}\n", per.0, if errors { "\ts(k)" } else { "" });
    for ((t, k), e) in runs.temperatures.iter().zip(&runs.rates).zip(&runs.relative_errors) {
        let k = k * per.1;
        text.push_str(&format!("{:.2}\t{k:e}", t + shift));
        if errors {
            text.push_str(&format!("\t{:e}", k * e));
        }
        text.push('\n');
    }
    text
}

fn celsius(kelvin: f64) -> Value {
    json!({"value": kelvin - 273.15, "unit": "°C"})
}

/// One of every question that speaks of a temperature or a time.
fn questions(runs: &Runs) -> Value {
    let coldest = runs.temperatures[0];
    let (t1, t2) = (celsius(coldest - 5.0), celsius(coldest + 20.0));
    let part = |value: f64| json!({"value": value, "unit": "%"});
    let hours = json!({"value": 8.0, "unit": "h"});
    json!({"asked": [
        {"question": "rate-at", "temperature": t1},
        {"question": "time-to-extent", "temperature": t1, "gone": part(5.0)},
        {"question": "speed-up", "to": t2, "from": t1},
        {"question": "longest-stand", "temperature": t1, "keep": part(98.0)},
        {"question": "completion-time", "temperature": t2, "gone": part(99.0)},
        {"question": "extent-after", "temperature": t1, "time": hours},
        {"question": "equivalent-time", "temperature": t2, "time": hours, "other_temperature": t1},
        {"question": "temperature-for", "gone": part(90.0), "time": hours},
        {"question": "warmest-storage", "keep": part(98.0), "time": hours}
    ]})
}

fn same(a: Option<f64>, b: Option<f64>, tolerance: f64) -> bool {
    match (a, b) {
        (Some(a), Some(b)) => (a - b).abs() <= tolerance * a.abs().max(b.abs()),
        (None, None) => true,
        _ => false,
    }
}

/// Pasting rounds temperatures and rates in their 16th digit; conversions back and forth and the
/// exponential of a rate far from the data multiply that to 1e-8 at most.
const CONVERSION: f64 = 1e-8;

fn agree(a: &Findings, b: &Findings) -> Result<(), TestCaseError> {
    prop_assert_eq!(a.answers.len(), b.answers.len());
    for (a, b) in a.answers.iter().zip(&b.answers) {
        prop_assert!(same(a.value, b.value, CONVERSION), "{:?}\n{:?}", a, b);
        prop_assert!(same(a.low, b.low, CONVERSION), "{:?}\n{:?}", a, b);
        prop_assert!(same(a.high, b.high, CONVERSION), "{:?}\n{:?}", a, b);
        prop_assert_eq!(a.grounds, b.grounds);
        prop_assert_eq!(a.refused.is_some(), b.refused.is_some());
    }
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, failure_persistence: None, ..Default::default() })]

    #[test]
    fn units_never_change_an_answer(runs in runs(), errors: bool) {
        let asked = questions(&runs);
        let base = found(&text(&runs, errors, false, ("s⁻¹", 1.0)), asked.clone());
        for (celsius, per) in [
            (true, ("s⁻¹", 1.0)),
            (false, ("1/h", 3600.0)),
            (true, ("min-1", 60.0)),
            (true, ("d^-1", 86_400.0)),
        ] {
            agree(&base, &found(&text(&runs, errors, celsius, per), asked.clone()))?;
        }
        let display = json!({"display": {"temperature": "K", "energy": "kcal/mol", "time": "d", "decimal": ","}});
        let mut shown = asked.clone();
        if let (Value::Object(into), Value::Object(more)) = (&mut shown, display) {
            into.extend(more);
        }
        agree(&base, &found(&text(&runs, errors, false, ("s⁻¹", 1.0)), shown))?;
    }

    #[test]
    fn hotter_is_never_slower(runs in runs(), from in 200.0..500.0_f64, step in 0.1..80.0_f64) {
        for law in ["arrhenius", "eyring", "log-linear"] {
            let at = |t: f64| json!({"question": "rate-at", "temperature": {"value": t, "unit": "K"}});
            let findings = found(
                &text(&runs, false, false, ("s⁻¹", 1.0)),
                json!({"assumed": {"temperature_law": law}, "asked": [at(from), at(from + step)]}),
            );
            // Eyring's rate falls with temperature below T = −ΔH‡/R only.
            if findings.law.as_ref().is_some_and(|l| l.enthalpy_of_activation.value > 0.0) {
                let (slow, fast) = (findings.answers[0].value, findings.answers[1].value);
                prop_assert!(slow.unwrap_or(0.0) <= fast.unwrap_or(f64::MAX), "{law}");
            }
        }
    }

    #[test]
    fn intervals_contain_their_estimates(runs in runs(), errors: bool) {
        let findings = found(&text(&runs, errors, false, ("s⁻¹", 1.0)), questions(&runs));
        let law = findings.law.as_ref().unwrap();
        for estimate in [&law.activation_energy, &law.ln_rate_at_reference, &law.pre_exponential_factor] {
            prop_assert!(estimate.low.unwrap() <= estimate.value && estimate.value <= estimate.high.unwrap());
        }
        for answer in findings.answers.iter().filter(|a| a.refused.is_none()) {
            let value = answer.value.unwrap();
            prop_assert!(answer.low.is_none_or(|low| low <= value), "{:?}", answer);
            prop_assert!(answer.high.is_none_or(|high| value <= high), "{:?}", answer);
        }
    }

    #[test]
    fn a_study_saved_and_opened_gives_the_same_findings(runs in runs(), errors: bool) {
        let study = checks::study(&text(&runs, errors, true, ("1/h", 3600.0)), questions(&runs));
        let opened = Study::from_json(&study.to_json()).unwrap();
        prop_assert_eq!(&opened, &study);
        let (before, after) = (evaluate(&study), evaluate(&opened));
        prop_assert_eq!(
            serde_json::to_string(&before).unwrap(),
            serde_json::to_string(&after).unwrap()
        );
    }

    #[test]
    fn no_text_and_no_study_makes_it_panic(text in any::<String>(), more in "[0-9°CKkT/s,;.\t\n−e-]{0,200}") {
        found(&text, json!({}));
        let findings = found(&format!("T/K\tk, 1/s\n{more}"), json!({}));
        let printed = serde_json::to_string(&findings).unwrap();
        prop_assert!(!printed.contains("NaN"));
        if let Ok(study) = Study::from_json(&text) {
            evaluate(&study);
        }
    }
}

/// A number, its limits and the unit of the last place of each as printed.
fn printed(number: &str) -> (f64, i32) {
    let number = number.replace('\u{2212}', "-");
    let (mantissa, power) = match number.split_once("\u{a0}×\u{a0}10") {
        Some((mantissa, raised)) => {
            let digits = raised.chars().map(|c| match c {
                '⁻' => '-',
                '¹' => '1',
                '²' => '2',
                '³' => '3',
                other => char::from_digit(other as u32 - 0x2070, 10).unwrap(),
            });
            (mantissa.to_owned(), digits.collect::<String>().parse::<i32>().unwrap())
        }
        None => (number.clone(), 0),
    };
    let decimals = mantissa.split_once('.').map_or(0, |(_, decimals)| decimals.len() as i32);
    (format!("{mantissa}e{power}").parse().unwrap(), power - decimals)
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(4000))]

    /// Estimate and limits stand at one decimal place, whatever powers of ten lie between them,
    /// unless they differ by factors; none is further from its number than half a unit of that
    /// place, and that unit is no more than the half-width's leading digit.
    #[test]
    fn a_triple_is_printed_to_one_place(
        ln_value in -20.0..20.0_f64,
        below in 0.001..3.0_f64,
        above in 0.001..3.0_f64,
    ) {
        let value = ln_value.exp();
        let (low, high) = (value * (-below).exp(), value * above.exp());
        let figures = Figures::supported(value, Some((low, high)));
        let (low_text, high_text) = figures.limits(low, high, '.');
        let texts = [figures.number(value, '.'), low_text, high_text];
        let [(shown, place), (least, least_place), (most, most_place)] =
            [0, 1, 2].map(|i| printed(&texts[i]));
        prop_assert!(least <= shown && shown <= most, "{texts:?}");
        let half_width = 0.5 * (high - low);
        for ((found, place), exact) in
            [(shown, place), (least, least_place), (most, most_place)].into_iter().zip([value, low, high])
        {
            // Zeros before the decimal sign may stand for nothing: 230 from 226.
            let unit = 10f64.powi(place.max((half_width.log10().floor()) as i32));
            prop_assert!((found - exact).abs() <= 0.500_001 * unit, "{texts:?} {exact}");
        }
        if high / low < 3.0 {
            prop_assert!(place == least_place && place == most_place, "{texts:?}");
        }
    }

    /// A bound is printed on the side on which it holds, its best guess to the same place.
    #[test]
    fn a_bound_is_printed_where_it_holds(ln_bound in -3.0..25.0_f64, apart in 0.001..2.0_f64) {
        let hours = Display { time: Some(TimeUnit::Hour), ..Display::default() };
        let (bound, best) = (ln_bound.exp(), (ln_bound + apart).exp());
        let number = |text: &str| printed(text.strip_suffix("\u{a0}h").unwrap());
        let say = |limit: f64, best: f64, rounding| {
            let (limit, best) = duration_bound(Seconds(limit), Seconds(best), rounding, &hours);
            (number(&limit), number(&best))
        };
        let (least, _) = say(bound, best, Rounding::Down);
        prop_assert!(least.0 > 0.0 && least.0 <= bound / 3600.0 * (1.0 + 1e-9));
        let (most, guess) = say(best, bound, Rounding::Up);
        prop_assert!(most.0 >= best / 3600.0 * (1.0 - 1e-9));
        if best / bound < 1.4 {
            prop_assert_eq!(most.1, guess.1);
        }
    }
}
