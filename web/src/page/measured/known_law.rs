//! A known law as a sentence: an activation energy, and a rate constant at one temperature.

use kinetics_core::study::{Measured, Study};
use kinetics_core::table::Form;

use super::super::amount::{Amount, amount, complaints, quantity, without_sd};
use super::super::blank::Complaint;
use super::super::menu::{Choice, menu};
use super::super::part::{Part, part};
use super::super::sheet::Sheet;

/// The name under which a study lists an assumed activation energy.
const ASSUMED_ENERGY: &str = "activation_energy";

/// The name of the first blank's element.
pub const FIRST_BLANK: &str = "known-energy";

const ENERGY: Amount = Amount {
    name: "Activation energy",
    id: FIRST_BLANK,
    hint: "90 ± 4 kJ/mol",
    get: |study| study.measured.activation_energy.clone(),
    set: |study, stated| study.measured.activation_energy = stated,
    check: |quantity| quantity.joules_per_mole().map(drop),
};
const RATE: Amount = Amount {
    name: "Rate constant",
    id: "known-rate",
    hint: "0.068 ± 0.003 1/h",
    get: |study| study.measured.rate_constant.clone(),
    set: |study, stated| study.measured.rate_constant = stated,
    check: |quantity| quantity.rate_constant().map(drop),
};
const TEMPERATURE: Amount = Amount {
    name: "Temperature of the rate constant",
    id: "known-temperature",
    hint: "63 °C",
    get: |study| study.measured.temperature.clone().map(without_sd),
    set: |study, stated| study.measured.temperature = stated.map(quantity),
    check: |quantity| quantity.kelvin().map(drop),
};

/// A law with empty blanks.
pub fn begin(study: &mut Study) {
    super::take_text(study, String::new());
    study.measured = Measured { form: Form::KnownLaw, ..Measured::default() };
}

/// The sentence with its blanks.
pub fn sentence(sheet: Sheet) -> Vec<Part> {
    let [energy, rate, temperature] = std::array::from_fn(|_| Complaint::new(None));
    let law = part("p")
        .class("law-sentence")
        .text("The activation energy, ")
        .add(measured_or_assumed(sheet))
        .text(", is ")
        .add(amount(sheet, ENERGY, &energy))
        .text(", and the rate constant ")
        .add(amount(sheet, RATE, &rate))
        .text(" at ")
        .add(amount(sheet, TEMPERATURE, &temperature))
        .text(".")
        .add(complaints(&[&energy, &rate, &temperature]));
    let hint = "What follows ± is one standard deviation; without both there are no intervals.";
    vec![law, part("p").class("quiet").text(hint)]
}

fn measured_or_assumed(sheet: Sheet) -> Part {
    let offer = move || {
        let choices = vec![Choice::new("", "measured"), Choice::new(ASSUMED_ENERGY, "assumed")];
        let assumed = &sheet.study().measured.assumed;
        let is_assumed = assumed.iter().any(|name| name == ASSUMED_ENERGY);
        (choices, if is_assumed { ASSUMED_ENERGY.to_owned() } else { String::new() })
    };
    menu("Whether the activation energy was measured", offer, move |name| {
        sheet.change("", |study| {
            study.measured.assumed.retain(|known| known != ASSUMED_ENERGY);
            if !name.is_empty() {
                study.measured.assumed.push(name.to_owned());
            }
        });
    })
}
