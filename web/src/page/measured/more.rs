//! What else may be known about the measurements: how good the thermometer is, and an activation
//! energy from elsewhere.

use kinetics_core::quantity::Quantity;
use kinetics_core::study::{Study, Thermometer};

use super::super::amount::{Amount, amount, complaints, quantity, without_sd};
use super::super::blank::Complaint;
use super::super::part::{Part, part};
use super::super::sheet::Sheet;

const SCATTER: Amount = Amount {
    name: "Uncertainty of each temperature",
    id: "thermometer-sd",
    hint: "0.3 K",
    get: |study| thermometer(study, |thermometer| &thermometer.sd).map(without_sd),
    set: |study, stated| set(study, |t| &mut t.sd, stated.map(quantity)),
    check: |quantity| quantity.kelvin_difference().map(drop),
};
const OFFSET: Amount = Amount {
    name: "Uncertainty common to all temperatures",
    id: "thermometer-offset",
    hint: "0.5 K",
    get: |study| thermometer(study, |thermometer| &thermometer.offset).map(without_sd),
    set: |study, stated| set(study, |t| &mut t.offset, stated.map(quantity)),
    check: |quantity| quantity.kelvin_difference().map(drop),
};
const ENERGY: Amount = Amount {
    name: "Activation energy from elsewhere",
    id: "stated-energy",
    hint: "85 kJ/mol",
    get: |study| study.measured.stated_activation_energy.clone().map(without_sd),
    set: |study, stated| study.measured.stated_activation_energy = stated.map(quantity),
    check: |quantity| quantity.joules_per_mole().map(drop),
};

/// The sentences, behind a line that opens them.
pub fn more(sheet: Sheet) -> Part {
    let [scatter, offset, energy] = std::array::from_fn(|_| Complaint::new(None));
    let study = sheet.study();
    let measured = &study.measured;
    let is_filled = measured.thermometer.is_some() || measured.stated_activation_energy.is_some();
    let sentence = part("p")
        .class("reading")
        .text("Each temperature is uncertain by ")
        .add(amount(sheet, SCATTER, &scatter))
        .text(" and all of them together by ")
        .add(amount(sheet, OFFSET, &offset))
        .text("; from elsewhere the activation energy is said to be ")
        .add(amount(sheet, ENERGY, &energy))
        .text(".")
        .add(complaints(&[&scatter, &offset, &energy]));
    let details = part("details").class("more");
    let details = if is_filled { details.with("open", "") } else { details };
    details.add(part("summary").text("thermometer, and an energy from elsewhere")).add(sentence)
}

fn thermometer(study: &Study, part: fn(&Thermometer) -> &Option<Quantity>) -> Option<Quantity> {
    study.measured.thermometer.as_ref().and_then(|thermometer| part(thermometer).clone())
}

fn set(
    study: &mut Study,
    part: fn(&mut Thermometer) -> &mut Option<Quantity>,
    quantity: Option<Quantity>,
) {
    let thermometer = study.measured.thermometer.get_or_insert_default();
    *part(thermometer) = quantity;
    if *thermometer == Thermometer::default() {
        study.measured.thermometer = None;
    }
}
