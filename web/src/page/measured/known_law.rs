//! A known law as a sentence: an activation energy, and a rate constant at one temperature.

use kinetics_core::problem::shortened;
use kinetics_core::quantity::Quantity;
use kinetics_core::question::{BlankKind, parse_blank};
use kinetics_core::study::{Measured, StatedQuantity, Study};
use kinetics_core::table::{Decimal, Form};
use kinetics_core::text::{Reading, read_cell};
use kinetics_core::units::UnitError;
use kinetics_core::wording::{typed, typed_number};
use leptos::prelude::*;

use super::super::blank::{Gap, blank};
use super::super::menu::{Choice, menu};
use super::super::sheet::Sheet;

/// The name under which a study lists an assumed activation energy.
const ENERGY: &str = "activation_energy";

/// A law to be changed to what is known: the example's, so that it can be seen at work.
pub fn begin(study: &mut Study) {
    super::take_text(study, String::new());
    let stated =
        |value, sd, unit: &str| Some(StatedQuantity { value, sd: Some(sd), unit: unit.into() });
    study.measured = Measured {
        form: Form::KnownLaw,
        activation_energy: stated(90.0, 4.0, "kJ/mol"),
        rate_constant: stated(0.068, 0.003, "1/h"),
        temperature: Some(Quantity::new(63.0, "°C")),
        ..Measured::default()
    };
}

/// The sentence with its blanks.
pub fn sentence(sheet: Sheet) -> AnyView {
    let complaints: [RwSignal<Option<String>>; 3] = std::array::from_fn(|_| RwSignal::new(None));
    let energy = stated_blank(
        sheet,
        Known { name: "Activation energy", hint: "90 ± 4 kJ/mol", id: "known-energy" },
        complaints[0],
        |measured| &mut measured.activation_energy,
        |quantity| quantity.joules_per_mole().map(drop),
    );
    let rate = stated_blank(
        sheet,
        Known { name: "Rate constant", hint: "0.068 ± 0.003 1/h", id: "known-rate" },
        complaints[1],
        |measured| &mut measured.rate_constant,
        |quantity| quantity.rate_constant().map(drop),
    );
    let shown = Signal::derive(move || {
        let stated = sheet.study(|study| study.measured.temperature.clone());
        stated.map(|quantity| typed(&[quantity], sheet.decimal())).unwrap_or_default()
    });
    let take = move |text: &str| {
        let decimal = untrack(|| sheet.decimal());
        let temperature = match parse_blank(text, BlankKind::Temperature, decimal)?.as_slice() {
            [quantity] => quantity.clone(),
            _ => return Err(format!("Found “{}”, expected one temperature.", shortened(text))),
        };
        sheet.change("known temperature", |study| study.measured.temperature = Some(temperature));
        Ok(())
    };
    let temperature = blank(Gap {
        label: "Temperature of the rate constant".into(),
        shown,
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint: complaints[2],
        id: "known-temperature".into(),
        hint: "63 °C",
    });
    let complaints = move || {
        complaints.iter().filter_map(|complaint| complaint.get()).collect::<Vec<_>>().join(" ")
    };
    view! {
        <p class="law-sentence">
            "The activation energy, " {measured_or_assumed(sheet)} ", is " {energy}
            ", and the rate constant " {rate} " at " {temperature} "."
            <span class="expected">{complaints}</span>
        </p>
        <p class="quiet">
            "What follows ± is one standard deviation; without both there are no intervals."
        </p>
    }
    .into_any()
}

fn measured_or_assumed(sheet: Sheet) -> AnyView {
    let choices = vec![Choice::new("", "measured"), Choice::new(ENERGY, "assumed")];
    let is_assumed =
        move || sheet.study(|study| study.measured.assumed.iter().any(|name| name == ENERGY));
    let chosen =
        Signal::derive(move || if is_assumed() { ENERGY.to_owned() } else { String::new() });
    let label = "Whether the activation energy was measured".to_owned();
    menu(label.into(), choices.into(), chosen, move |name| {
        sheet.change("", |study| {
            study.measured.assumed.retain(|known| known != ENERGY);
            study.measured.assumed.extend(Some(name).filter(|name| !name.is_empty()));
        });
    })
}

/// What a blank of the sentence is called.
struct Known {
    name: &'static str,
    hint: &'static str,
    id: &'static str,
}

fn stated_blank(
    sheet: Sheet,
    known: Known,
    complaint: RwSignal<Option<String>>,
    place: fn(&mut Measured) -> &mut Option<StatedQuantity>,
    check: fn(&Quantity) -> Result<(), UnitError>,
) -> AnyView {
    let Known { name, hint, id } = known;
    let shown = Signal::derive(move || {
        // The place is named once, for writing; reading works on a copy.
        let stated = sheet.study(|study| place(&mut study.measured.clone()).clone());
        stated.map(|stated| words(&stated, sheet.decimal())).unwrap_or_default()
    });
    let take = move |text: &str| {
        let decimal = untrack(|| sheet.decimal());
        let stated = parse(text, decimal, check)
            .map_err(|said| format!("{name}: {said}, for example {hint}."))?;
        sheet.change(id, |study| *place(&mut study.measured) = Some(stated));
        Ok(())
    };
    blank(Gap {
        label: name.into(),
        shown,
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint,
        id: id.into(),
        hint,
    })
}

/// "90 ± 4 kJ/mol".
fn words(stated: &StatedQuantity, decimal: char) -> String {
    let value = typed_number(stated.value, decimal);
    let sd = stated.sd.map(|sd| format!(" ± {}", typed_number(sd, decimal))).unwrap_or_default();
    format!("{value}{sd} {}", stated.unit)
}

/// A number with an optional standard deviation and a unit.
fn parse(
    text: &str,
    decimal: char,
    check: fn(&Quantity) -> Result<(), UnitError>,
) -> Result<StatedQuantity, String> {
    let mark = if decimal == ',' { Decimal::Comma } else { Decimal::Point };
    let found = || format!("found “{}”, expected a number and its unit", shortened(text));
    // An error alone is no value.
    if text.trim_start().starts_with('±') {
        return Err(found());
    }
    // The unit begins at the first place from which on it is one.
    let starts = text.char_indices().filter(|(_, sign)| !sign.is_ascii_digit()).map(|(at, _)| at);
    let mut complaint = None;
    for at in starts {
        let (number, unit) = text.split_at(at);
        let Reading::Number(number) = read_cell(number, mark) else { continue };
        if number.unit.is_some() || unit.trim().is_empty() {
            continue;
        }
        match check(&Quantity::new(number.value, unit.trim())) {
            Ok(()) => {
                let (value, sd) = (number.value, number.error);
                return Ok(StatedQuantity { value, sd, unit: unit.trim().to_owned() });
            }
            Err(error) => complaint = Some(error.to_string()),
        }
    }
    // The last complaint speaks of the shortest rest, which is the likeliest unit.
    Err(complaint.unwrap_or_else(found))
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    fn energy(text: &str) -> Result<StatedQuantity, String> {
        parse(text, '.', |quantity| quantity.joules_per_mole().map(drop))
    }

    #[test]
    fn a_value_with_its_error_and_unit_is_read() {
        let found = energy("90 ± 4 kJ/mol").unwrap();
        assert_eq!((found.value, found.sd, found.unit.as_str()), (90.0, Some(4.0), "kJ/mol"));
        let found = energy("21.5 kcal/mol").unwrap();
        assert_eq!((found.value, found.sd, found.unit.as_str()), (21.5, None, "kcal/mol"));
        let rate = |text: &str| parse(text, ',', |quantity| quantity.rate_constant().map(drop));
        let found = rate("0,068 ± 0,003 1/h").unwrap();
        assert_eq!((found.value, found.sd, found.unit.as_str()), (0.068, Some(0.003), "1/h"));
        assert_eq!(rate("2e-3 L/(mol s)").unwrap().unit, "L/(mol s)");
        assert_eq!(words(&found, ','), "0,068 ± 0,003 1/h");
    }

    #[test]
    fn what_is_no_energy_is_said() {
        for text in ["", "90", "much", "90 furlongs", "kJ/mol", "± 4 kJ/mol"] {
            assert!(energy(text).is_err(), "{text}");
        }
    }
}
