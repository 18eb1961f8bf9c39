//! "Read as rate constants with a decimal point, of first order": the choices about the whole
//! table, as menus in a sentence.

use kinetics_core::numeric::decimals::read_decimal;
use kinetics_core::rate_law::Order;
use kinetics_core::study::{HeatData, OrderChoice};
use kinetics_core::table::{Decimal, ErrorKind, Form, Role};
use kinetics_core::wording::typed_number;
use serde::Serialize;
use serde::de::DeserializeOwned;
use serde_json::Value;

use super::super::amount::{Amount, amount, complaints, quantity, without_sd};
use super::super::blank::Complaint;
use super::super::menu::{Choice, menu};
use super::super::part::{Part, part};
use super::super::sheet::Sheet;

/// What a table may hold.
const FORMS: [(Form, &str); 5] = [
    (Form::Rates, "rate constants"),
    (Form::Times, "times to one extent"),
    (Form::Progress, "signals against time"),
    (Form::HeatRates, "heat releases"),
    (Form::Peaks, "peaks at heating rates"),
];

/// Orders worth a line in the menu.
const ORDERS: [f64; 5] = [0.0, 0.5, 1.0, 1.5, 2.0];

/// What a stated error may be.
const ERRORS: [(ErrorKind, &str); 3] = [
    (ErrorKind::Sd, "standard deviations"),
    (ErrorKind::StandardError, "standard errors"),
    (ErrorKind::HalfWidth95, "half-widths of 95 % intervals"),
];

const CONCENTRATION: Amount = Amount {
    name: "Initial concentration",
    id: "initial-concentration",
    hint: "0.8 mol/L",
    get: |study| study.measured.initial_concentration.clone().map(without_sd),
    set: |study, stated| study.measured.initial_concentration = stated.map(quantity),
    check: |quantity| quantity.concentration().map(drop),
};
const EXTENT: Amount = Amount {
    name: "Part gone at each of the times",
    id: "extent",
    hint: "5 %",
    get: |study| study.measured.extent.clone().map(without_sd),
    set: |study, stated| study.measured.extent = stated.map(quantity),
    check: |quantity| quantity.concentration().map(drop),
};

const HEAT: Amount = Amount {
    name: "Heat of reaction",
    id: "heat-of-reaction",
    hint: "180 kJ/kg",
    get: |study| study.heat.as_ref()?.heat_of_reaction.clone().map(without_sd),
    set: |study, stated| {
        let heat = study.heat.get_or_insert_default();
        heat.heat_of_reaction = stated.map(quantity);
        if *heat == HeatData::default() {
            study.heat = None;
        }
    },
    check: |quantity| quantity.joules_per_kilogram().map(drop),
};

/// The sentence.
pub fn reading(sheet: Sheet) -> Part {
    let has_errors = move || {
        sheet.prepared().table.columns.iter().any(|column| column.role == Role::Sd)
            || sheet.evaluation().rates.runs.first().is_some_and(|r| r.observation.ln_sd.is_some())
    };
    let needs_concentration = move || {
        sheet.evaluation().findings.read.order.is_some_and(|order| order != 1.0)
            || sheet.study().measured.initial_concentration.is_some()
    };
    let are_times = move || sheet.study().measured.form == Form::Times;
    let are_heats = move || sheet.study().measured.form == Form::HeatRates;
    let [start, extent, heat] = std::array::from_fn(|_| Complaint::new(None));
    let told = complaints(&[&start, &extent, &heat]);
    part("p")
        .class("reading")
        .text("Read as ")
        .add(form(sheet))
        .when(are_times, move || {
            let extent = amount(sheet, EXTENT, &extent);
            part("span").text(", each until ").add(extent).text(" is gone,")
        })
        .when(are_heats, move || {
            let heat = amount(sheet, HEAT, &heat);
            part("span").text(", the whole heat being ").add(heat).text(",")
        })
        .text(" with a decimal ")
        .add(decimal(sheet))
        .text(", of ")
        .add(order(sheet))
        .when(has_errors, move || part("span").text("; the errors are ").add(errors(sheet)))
        .when(needs_concentration, move || {
            let start = amount(sheet, CONCENTRATION, &start);
            part("span").text("; the initial concentration is ").add(start)
        })
        .text(".")
        .add(told)
}

fn form(sheet: Sheet) -> Part {
    let offer = move || {
        let choices = FORMS.iter().map(|(form, words)| Choice::new(form.code(), *words));
        (choices.collect(), sheet.study().measured.form.code().to_owned())
    };
    menu("What the table holds", offer, move |code| {
        sheet.change("", |study| study.measured.form = from_code(code).unwrap_or_default());
    })
}

fn decimal(sheet: Sheet) -> Part {
    let name = |decimal: Decimal| if decimal.mark() == ',' { "comma" } else { "point" };
    let offer = move || {
        let is_read = sheet.study().measured.decimal.is_none();
        let read = sheet.prepared().table.decimal;
        let choices = vec![
            Choice::new(read.mark(), name(read)).under(if is_read { "as read" } else { "" }),
            Choice::new(read.other().mark(), name(read.other())),
        ];
        (choices, read.mark().to_string())
    };
    menu("Decimal sign", offer, move |mark| {
        sheet.change("", |study| study.measured.decimal = from_code(mark));
    })
}

/// The order of reaction, as the unit of k has it or as the user chose it.
fn order(sheet: Sheet) -> Part {
    let name = |order: f64| {
        Order::new(order).map_or_else(|| format!("order {}", typed_number(order, '.')), Order::name)
    };
    let offer = move || {
        let stated = match sheet.study().assumed.order {
            Some(OrderChoice::Number(order)) => Some(order),
            _ => None,
        };
        let read = sheet.evaluation().findings.read.order.unwrap_or(1.0);
        let mut choices = vec![match stated {
            None => Choice::new("", name(read)).under("as read"),
            Some(_) => Choice::new("", "the order that the unit of k has"),
        }];
        choices.extend(ORDERS.iter().map(|order| Choice::new(order.to_string(), name(*order))));
        if let Some(order) = stated.filter(|order| !ORDERS.contains(order)) {
            choices.push(Choice::new(order.to_string(), name(order)));
        }
        (choices, stated.map(|order| order.to_string()).unwrap_or_default())
    };
    menu("Order of reaction", offer, move |code| {
        let order = read_decimal(code).map(OrderChoice::Number);
        sheet.change("", |study| study.assumed.order = order);
    })
}

fn errors(sheet: Sheet) -> Part {
    let offer = move || {
        let prepared = sheet.prepared();
        let in_heading = || prepared.table.columns.iter().find_map(|column| column.error_is);
        let chosen = sheet.study().measured.error_is.or_else(in_heading);
        let choices = ERRORS.iter().map(|(kind, words)| Choice::new(code(kind), *words));
        (choices.collect(), code(chosen.unwrap_or(ErrorKind::Sd)))
    };
    menu("What the errors are", offer, move |code| {
        sheet.change("", |study| study.measured.error_is = from_code(code));
    })
}

/// The code of a value in a study file.
fn code(value: impl Serialize) -> String {
    match serde_json::to_value(value) {
        Ok(Value::String(code)) => code,
        _ => String::new(),
    }
}

/// The value of a code in a study file.
fn from_code<T: DeserializeOwned>(code: &str) -> Option<T> {
    serde_json::from_value(Value::String(code.to_owned())).ok()
}
