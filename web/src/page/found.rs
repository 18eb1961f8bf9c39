//! Found: the law in numbers, and what was noticed.

use kinetics_core::answer::Basis;
use kinetics_core::quantity::Kelvin;
use kinetics_core::remark::{Remark, Severity};
use kinetics_core::study::{Estimate, Evaluation, LawFindings, Study};
use kinetics_core::wording::{self, Origin, Shown};

use super::choices;
use super::once::once;
use super::part::{Part, part};
use super::pictures::has_gap;
use super::sheet::Sheet;

/// A number of the law as it is shown: its value, its name, and its limits or what is to say
/// about it.
type Number = (String, String, String);

/// The section.
pub fn section(sheet: Sheet) -> Part {
    let numbers = once(sheet, |_, evaluation| of_law(evaluation, first));
    let more = once(sheet, |_, evaluation| of_law(evaluation, second));
    let has_law = move || sheet.evaluation().basis.is_some();
    let row = |numbers: std::rc::Rc<dyn Fn() -> Vec<Number>>| {
        part("span")
            .class("slot")
            .filled(move || numbers(), |numbers| numbers.iter().map(number).collect())
    };
    let law = move || {
        part("div")
            .add(
                part("div")
                    .class("numbers")
                    .with("aria-live", "polite")
                    .add(row(numbers.clone()))
                    .add(part("div").class("scatter").add_all(choices::sentences(sheet))),
            )
            .add(
                part("details")
                    .class("more")
                    .add(part("summary").text("enthalpy and entropy of activation"))
                    .add(part("div").class("numbers").add(row(more.clone()))),
            )
    };
    let remarks = part("ul").class("remarks").with("aria-label", "Remarks").filled(
        move || sheet.evaluation().findings.remarks.clone(),
        |remarks| remarks.iter().map(remark).collect(),
    );
    part("section")
        .with("aria-labelledby", "found")
        .add(part("h2").with("id", "found").text("Found"))
        .when(has_law, law)
        .when(
            move || !has_law(),
            move || {
                part("p")
                    .class("nothing")
                    .says(move || nothing(&sheet.study(), &sheet.evaluation()))
            },
        )
        .add(remarks)
        .add(choices::display(sheet))
}

/// Why there is no law, as questions without a gap are told.
fn nothing(study: &Study, evaluation: &Evaluation) -> String {
    let asked = study.asked.iter().zip(&evaluation.findings.answers);
    let mut whole = asked.filter(|(asked, _)| !has_gap(asked));
    let refused = whole.find_map(|(_, answer)| answer.refused.as_ref());
    refused.map_or_else(
        || {
            "No law yet: paste rate constants at two temperatures or more, or state a known law."
                .to_owned()
        },
        |refusal| format!("{} {}", refusal.reason, refusal.needs),
    )
}

fn of_law(
    evaluation: &Evaluation,
    numbers: fn(&LawFindings, &Basis) -> Vec<Number>,
) -> Vec<Number> {
    match (&evaluation.findings.law, &evaluation.basis) {
        (Some(law), Some(basis)) => numbers(law, basis),
        _ => Vec::new(),
    }
}

fn first(law: &LawFindings, basis: &Basis) -> Vec<Number> {
    let display = &basis.display;
    let rate = &law.rate_at_reference;
    let at = display.temperature(Kelvin(law.reference_temperature_kelvin), 0);
    let factor = &law.ln_pre_exponential_factor;
    // What has no unit is said to have none.
    let unit =
        if basis.base_unit.is_none() { ", in the unit of the column, not stated" } else { "" };
    let (ln_a, name, limits) = with_limits(
        &format!("{}{unit}", wording::logarithm_of("A", basis.base_unit)),
        wording::bare(shown(factor, basis), display),
        basis,
    );
    let mut numbers = vec![
        with_limits("activation energy", energy(&law.activation_energy, basis), basis),
        with_limits(
            &format!("rate constant at {at}{unit}"),
            wording::rate(shown(rate, basis), basis.shown_unit, display),
            basis,
        ),
        (ln_a, name, format!("{limits}; moves with the activation energy")),
    ];
    if let Some(z) = &law.z_value {
        numbers.push(with_limits("z", wording::kelvins(shown(z, basis), display), basis));
    }
    if let Some(d) = &law.d_value {
        let d = wording::time(shown(d, basis), display);
        numbers.push(with_limits(&format!("D at {at}"), d, basis));
    }
    numbers
}

fn second(law: &LawFindings, basis: &Basis) -> Vec<Number> {
    let display = &basis.display;
    let mut numbers = vec![with_limits(
        "enthalpy of activation",
        energy(&law.enthalpy_of_activation, basis),
        basis,
    )];
    if let Some(entropy) = &law.entropy_of_activation {
        let entropy = wording::entropy(shown(entropy, basis), display);
        numbers.push(with_limits("entropy of activation", entropy, basis));
    }
    let factor = &law.pre_exponential_factor;
    let factor = wording::rate(shown(factor, basis), basis.base_unit, display);
    numbers.push(with_limits("pre-exponential factor", factor, basis));
    numbers
}

fn shown(estimate: &Estimate, basis: &Basis) -> wording::Number {
    let stated = basis.support.is_known_law();
    wording::Number {
        value: estimate.value,
        range: estimate.low.zip(estimate.high),
        origin: if stated { Origin::Stated } else { Origin::Fitted },
    }
}

fn energy(estimate: &Estimate, basis: &Basis) -> Shown {
    wording::energy(shown(estimate, basis), &basis.display)
}

fn with_limits(name: &str, shown: Shown, basis: &Basis) -> Number {
    let level = basis.display.percent(basis.level);
    let limits = match shown.limits {
        Some((low, high)) => format!("{low} to {high} ({level})"),
        None if basis.support.is_known_law() => {
            "no interval: stated without both standard deviations".to_owned()
        }
        None => "no interval: no scatter is known".to_owned(),
    };
    (shown.value, name.to_owned(), limits)
}

fn number((value, name, limits): &Number) -> Part {
    part("div")
        .class("number")
        .add(part("span").class("value").text(value))
        .add(part("span").class("name").text(name))
        .add(part("span").class("limits").text(limits))
}

fn remark(remark: &Remark) -> Part {
    let (class, said) = match remark.severity {
        Severity::Stop => ("stop", "Stop: "),
        Severity::Caution => ("caution", "Caution: "),
        Severity::Note => ("note", ""),
    };
    part("li")
        .class(class)
        .with("data-code", &remark.code)
        .add(part("span").class("unseen").text(said))
        .text(&remark.sentence)
        .text(" ")
        .add(part("span").class("remedy").text(&remark.remedy))
}
