//! A quantity in a sentence, with the standard deviation that some of them have: "90 ± 4 kJ/mol".

use std::cell::RefCell;
use std::rc::Rc;

use kinetics_core::problem::shortened;
use kinetics_core::quantity::Quantity;
use kinetics_core::study::{StatedQuantity, Study};
use kinetics_core::table::Decimal;
use kinetics_core::text::{Reading, read_cell};
use kinetics_core::units::UnitError;
use kinetics_core::wording::typed_number;

use super::blank::{Complaint, Gap, blank};
use super::part::{Part, part};
use super::sheet::Sheet;

/// A place of the study that holds a quantity, or nothing.
#[derive(Clone, Copy)]
pub struct Amount {
    /// Its name.
    pub name: &'static str,
    /// The name of its element.
    pub id: &'static str,
    /// What it may look like.
    pub hint: &'static str,
    /// Reads it.
    pub get: fn(&Study) -> Option<StatedQuantity>,
    /// Writes it.
    pub set: fn(&mut Study, Option<StatedQuantity>),
    /// Whether its unit fits.
    pub check: fn(&Quantity) -> Result<(), UnitError>,
}

/// The gap of a sentence that shows an amount and takes another.
pub fn amount(sheet: Sheet, amount: Amount, complaint: &Complaint) -> Part {
    let Amount { name, id, hint, get, set, check } = amount;
    // A bare number keeps the unit that stood there before.
    let unit = Rc::new(RefCell::new(String::new()));
    let last = Rc::clone(&unit);
    let shown = move || {
        let Some(stated) = get(&sheet.study()) else { return String::new() };
        last.borrow_mut().clone_from(&stated.unit);
        words(&stated, sheet.decimal())
    };
    let take = move |text: &str| {
        let read = match text.trim() {
            "" => Ok(None),
            text => with_unit(text, &unit.borrow(), sheet.decimal(), check).map(Some),
        };
        // What cannot be read leaves nothing behind that would pass for it.
        let stated = read.as_ref().ok().cloned().flatten();
        sheet.change(id, |study| set(study, stated));
        read.map(drop).map_err(|said| format!("{name}: {said}, for example {hint}."))
    };
    blank(Gap {
        label: name.into(),
        shown: Box::new(shown),
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint: complaint.clone(),
        id: id.into(),
        hint: format!("e.g. {hint}"),
    })
}

/// All complaints of a sentence, one after the other.
pub fn complaints(all: &[&Complaint]) -> Part {
    let all: Vec<Complaint> = all.iter().copied().cloned().collect();
    part("span")
        .class("expected")
        .with("role", "status")
        .says(move || all.iter().filter_map(Complaint::get).collect::<Vec<_>>().join(" "))
}

/// A quantity as an amount without a standard deviation.
pub fn without_sd(quantity: Quantity) -> StatedQuantity {
    StatedQuantity { value: quantity.value, sd: None, unit: quantity.unit }
}

/// An amount as a quantity.
pub fn quantity(stated: StatedQuantity) -> Quantity {
    Quantity::new(stated.value, stated.unit)
}

/// "90 ± 4 kJ/mol".
fn words(stated: &StatedQuantity, decimal: char) -> String {
    let value = typed_number(stated.value, decimal);
    let sd = stated.sd.map(|sd| format!(" ± {}", typed_number(sd, decimal))).unwrap_or_default();
    format!("{value}{sd} {}", stated.unit)
}

/// An amount as it was typed; where it lacks a unit, with the one that stood there.
fn with_unit(
    text: &str,
    unit: &str,
    decimal: char,
    check: fn(&Quantity) -> Result<(), UnitError>,
) -> Result<StatedQuantity, String> {
    let read = parse(text, decimal, check);
    if read.is_ok() || !text.ends_with(|sign: char| sign.is_ascii_digit()) {
        return read;
    }
    parse(&format!("{text} {unit}"), decimal, check).or(read)
}

/// A number with an optional standard deviation and a unit.
fn parse(
    text: &str,
    decimal: char,
    check: fn(&Quantity) -> Result<(), UnitError>,
) -> Result<StatedQuantity, String> {
    let mark = if decimal == ',' { Decimal::Comma } else { Decimal::Point };
    let found = || format!("found “{}”, expected a number and its unit", shortened(text));
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
    fn a_bare_number_keeps_the_unit_that_stood_there() {
        let energy = |text: &str, unit: &str| {
            with_unit(text, unit, '.', |quantity| quantity.joules_per_mole().map(drop))
        };
        let found = energy("85 ± 3", "kJ/mol").unwrap();
        assert_eq!((found.value, found.sd, found.unit.as_str()), (85.0, Some(3.0), "kJ/mol"));
        assert_eq!(energy("21 kcal/mol", "kJ/mol").unwrap().unit, "kcal/mol");
        for (text, unit) in [("85", ""), ("85 furlongs", "kJ/mol"), ("warm", "kJ/mol")] {
            assert!(energy(text, unit).is_err(), "{text}");
        }
    }

    #[test]
    fn what_is_no_energy_is_said() {
        for text in ["", "90", "much", "90 furlongs", "kJ/mol", "± 4 kJ/mol"] {
            assert!(energy(text).is_err(), "{text}");
        }
        let said = energy("90 furlongs").unwrap_err();
        assert!(said.contains("furlongs"), "{said}");
    }
}
