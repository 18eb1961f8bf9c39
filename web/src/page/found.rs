//! Found: the law in numbers, where its intervals come from, and what was noticed.

use kinetics_core::answer::Basis;
use kinetics_core::quantity::{JoulesPerMole, Kelvin};
use kinetics_core::remark::{Remark, Severity};
use kinetics_core::study::{Estimate, Evaluation, LawFindings, Study, evaluate_prepared};
use kinetics_core::table::Form;
use kinetics_core::temperature_law::{Scatter, ScatterChoice};
use kinetics_core::wording::{self, Shown};
use leptos::prelude::*;

use super::menu::{Choice, menu};
use super::sheet::Sheet;

/// The scatter choices in words.
const SCATTER: [(ScatterChoice, &str, &str); 4] = [
    (ScatterChoice::Automatic, "", "whatever the data allow"),
    (ScatterChoice::FromResiduals, "from-residuals", "the scatter of the residuals"),
    (ScatterChoice::AsStated, "as-stated", "the errors as stated"),
    (
        ScatterChoice::AsStatedPlusRunToRun,
        "as-stated-plus-run-to-run",
        "stated errors plus run-to-run scatter",
    ),
];

/// With more runs than this the other choice is not tried by itself.
const MOST_RUNS_TRIED: usize = 500;

/// The section.
pub fn section(sheet: Sheet) -> AnyView {
    let has_law = Memo::new(move |_| sheet.evaluation().basis.is_some());
    let numbers = move || {
        let evaluation = sheet.evaluation();
        with_law(&evaluation, |law, basis| {
            let name = wording::logarithm_of("A", basis.base_unit);
            let display = &basis.display;
            let temperature = display.temperature(Kelvin(law.reference_temperature_kelvin), 0);
            let rate = &law.rate_at_reference;
            vec![
                number("activation energy", energy(&law.activation_energy, basis), law, display),
                number(
                    &format!("rate constant at {temperature}"),
                    wording::rate(rate.value, range(rate), basis.shown_unit, display),
                    law,
                    display,
                ),
                view! {
                    <div class="number">
                        <span class="value">{bare(&law.ln_pre_exponential_factor, basis).value}</span>
                        <span class="name">{name}</span>
                        <span class="limits">"moves with the activation energy"</span>
                    </div>
                }
                .into_any(),
            ]
        })
    };
    let more = move || {
        let evaluation = sheet.evaluation();
        with_law(&evaluation, |law, basis| {
            let display = &basis.display;
            let enthalpy = energy(&law.enthalpy_of_activation, basis);
            let mut numbers = vec![number("enthalpy of activation", enthalpy, law, display)];
            if let Some(entropy) = &law.entropy_of_activation {
                let shown = wording::entropy(entropy.value, range(entropy), display);
                numbers.push(number("entropy of activation", shown, law, display));
            }
            let factor = &law.pre_exponential_factor;
            let shown = wording::rate(factor.value, range(factor), basis.base_unit, display);
            numbers.push(number("pre-exponential factor", shown, law, display));
            numbers
        })
    };
    let nothing = move || {
        let evaluation = sheet.evaluation();
        let refused = evaluation.findings.answers.iter().find_map(|answer| answer.refused.clone());
        refused.map_or_else(
            || "No law yet: paste rate constants at two temperatures or more, or state a known law.".to_owned(),
            |refusal| format!("{} {}", refusal.reason, refusal.needs),
        )
    };
    view! {
        <section aria-labelledby="found">
            <h2 id="found">"Found"</h2>
            <Show
                when=move || has_law.get()
                fallback=move || view! { <p class="nothing">{nothing}</p> }
            >
                <div class="numbers" aria-live="polite">
                    {numbers}
                    <div class="scatter">{scatter(sheet)}</div>
                </div>
                <details class="more">
                    <summary>"enthalpy and entropy of activation"</summary>
                    <div class="numbers">{more}</div>
                </details>
            </Show>
            {remarks(sheet)}
        </section>
    }
    .into_any()
}

fn with_law(
    evaluation: &Evaluation,
    views: impl FnOnce(&LawFindings, &Basis) -> Vec<AnyView>,
) -> Vec<AnyView> {
    match (&evaluation.findings.law, &evaluation.basis) {
        (Some(law), Some(basis)) => views(law, basis),
        _ => Vec::new(),
    }
}

fn range(estimate: &Estimate) -> Option<(f64, f64)> {
    estimate.low.zip(estimate.high)
}

fn energy(estimate: &Estimate, basis: &Basis) -> Shown {
    wording::energy(JoulesPerMole(estimate.value), range(estimate), &basis.display)
}

fn bare(estimate: &Estimate, basis: &Basis) -> Shown {
    wording::bare(estimate.value, range(estimate), &basis.display)
}

fn number(name: &str, shown: Shown, law: &LawFindings, display: &wording::Display) -> AnyView {
    let level = display.percent(law.activation_energy.level);
    let limits = match shown.limits {
        Some((low, high)) => format!("{low} to {high} ({level})"),
        None => "no interval: no scatter is known".to_owned(),
    };
    view! {
        <div class="number">
            <span class="value">{shown.value}</span>
            <span class="name">{name.to_owned()}</span>
            <span class="limits">{limits}</span>
        </div>
    }
    .into_any()
}

/// Where the intervals come from, as a menu.
fn scatter(sheet: Sheet) -> AnyView {
    let used = Memo::new(move |_| sheet.evaluation().findings.read.scatter);
    let chosen = move || sheet.study(|study| study.assumed.scatter.unwrap_or_default());
    let choices = Signal::derive(move || {
        let automatic = chosen() == ScatterChoice::Automatic;
        let mut choices: Vec<Choice> = Vec::new();
        if automatic {
            choices.push(Choice::new("", used.get().map_or("", name_of_used)).under("automatic"));
        } else {
            choices.push(Choice::new("", "automatic"));
        }
        choices.extend(SCATTER.iter().skip(1).map(|(_, code, words)| Choice::new(*code, *words)));
        choices
    });
    let shown = Signal::derive(move || {
        let chosen = chosen();
        let found = SCATTER.iter().find(|(choice, ..)| *choice == chosen);
        found.map_or("", |(_, code, _)| code).to_owned()
    });
    let pick = move |code: String| {
        let found = SCATTER.iter().find(|(_, known, _)| *known == code).map(|(choice, ..)| *choice);
        sheet.change("", |study| {
            study.assumed.scatter = found.filter(|choice| *choice != ScatterChoice::Automatic);
        });
    };
    let explained = move || used.get().map_or("", explanation);
    let other = move || used.get().and_then(|used| other_choice(sheet, used));
    let menu = menu("Where the intervals come from".to_owned().into(), choices, shown, pick);
    let is_known_law = move || sheet.study(|study| study.measured.form == Form::KnownLaw);
    view! {
        <p>
            <span class="quiet">"intervals from "</span>
            <span hidden=is_known_law>{menu}</span>
            <span hidden=move || !is_known_law()>"what was stated"</span>
        </p>
        <p class="quiet" hidden=is_known_law>{explained} " " {other}</p>
    }
    .into_any()
}

/// What the interval of the activation energy would be under the next choice.
fn other_choice(sheet: Sheet, used: Scatter) -> Option<String> {
    let evaluation = sheet.evaluation();
    if evaluation.rates.runs.is_empty() || evaluation.rates.runs.len() > MOST_RUNS_TRIED {
        return None;
    }
    let (choice, words) = match used {
        Scatter::NoneKnown => return None,
        Scatter::FromResiduals => (ScatterChoice::AsStatedPlusRunToRun, SCATTER[3].2),
        Scatter::AsStated => (ScatterChoice::AsStatedPlusRunToRun, SCATTER[3].2),
        Scatter::AsStatedPlusRunToRun => (ScatterChoice::AsStated, SCATTER[2].2),
    };
    if evaluation.rates.runs.iter().any(|run| run.observation.ln_sd.is_none()) {
        return None;
    }
    let mut study = sheet.study(Study::clone);
    study.assumed.scatter = Some(choice);
    study.asked.clear();
    let other = evaluate_prepared(&study, &sheet.prepared());
    let (law, basis) = (other.findings.law.as_ref()?, other.basis.as_ref()?);
    let shown = energy(&law.activation_energy, basis);
    let (low, high) = shown.limits?;
    let unit = basis.display.energy.symbol();
    Some(format!("With {words}: {low} to {high}\u{a0}{unit}."))
}

fn name_of_used(scatter: Scatter) -> &'static str {
    match scatter {
        Scatter::NoneKnown => "nothing: no scatter is known",
        Scatter::FromResiduals => SCATTER[1].2,
        Scatter::AsStated => SCATTER[2].2,
        Scatter::AsStatedPlusRunToRun => SCATTER[3].2,
    }
}

fn explanation(scatter: Scatter) -> &'static str {
    match scatter {
        Scatter::NoneKnown => {
            "As many runs as unknowns and no stated errors: measure a third temperature, or state \
             errors."
        }
        Scatter::FromResiduals => "How far the runs lie from the law says how much they scatter.",
        Scatter::AsStated => "The stated errors are taken to be all the scatter there is.",
        Scatter::AsStatedPlusRunToRun => {
            "The stated errors, and whatever the runs scatter beyond them."
        }
    }
}

fn remarks(sheet: Sheet) -> AnyView {
    let remarks = Memo::new(move |_| sheet.evaluation().findings.remarks.clone());
    let items = move || remarks.get().into_iter().map(remark).collect::<Vec<_>>();
    view! { <ul class="remarks" aria-label="Remarks">{items}</ul> }.into_any()
}

fn remark(remark: Remark) -> AnyView {
    let (class, said) = match remark.severity {
        Severity::Stop => ("stop", "Stop: "),
        Severity::Caution => ("caution", "Caution: "),
        Severity::Note => ("note", ""),
    };
    view! {
        <li class=class data-code=remark.code>
            <span class="unseen">{said}</span>
            {remark.sentence}
            " "
            <span class="remedy">{remark.remedy}</span>
        </li>
    }
    .into_any()
}
