//! "Read with a decimal point, as first order": the choices about the whole table, as menus in
//! a sentence.

use kinetics_core::problem::shortened;
use kinetics_core::quantity::Quantity;
use kinetics_core::rate_law::Order;
use kinetics_core::study::{OrderChoice, Study};
use kinetics_core::table::{Decimal, ErrorKind, Role};
use kinetics_core::wording::{typed, typed_number};
use leptos::prelude::*;
use serde::Serialize;
use serde::de::DeserializeOwned;
use serde_json::Value;

use super::super::blank::{Gap, blank};
use super::super::menu::{Choice, menu};
use super::super::sheet::Sheet;

/// Orders worth a line in the menu.
const ORDERS: [f64; 5] = [0.0, 0.5, 1.0, 1.5, 2.0];

/// What a stated error may be, as code and in words.
const ERRORS: [(&str, &str); 3] = [
    ("sd", "standard deviations"),
    ("standard-error", "standard errors"),
    ("half-width-95", "half-widths of 95 % intervals"),
];

/// The sentence.
pub fn reading(sheet: Sheet) -> AnyView {
    let has_errors = Memo::new(move |_| {
        sheet.evaluation().rates.runs.iter().any(|run| run.observation.ln_sd.is_some())
            || sheet.prepared().table.columns.iter().any(|column| column.role == Role::Sd)
    });
    let needs_concentration = Memo::new(move |_| {
        let order = sheet.evaluation().findings.read.order;
        order.is_some_and(|order| order != 1.0)
            || sheet.study(|study| study.measured.initial_concentration.is_some())
    });
    let complaint = RwSignal::new(None);
    view! {
        <p class="reading">
            "Read with a decimal " {decimal(sheet)} ", as " {order(sheet)}
            <Show when=move || has_errors.get()>
                "; the errors are " {errors(sheet)}
            </Show>
            <Show when=move || needs_concentration.get()>
                "; the initial concentration is " {concentration(sheet, complaint)}
            </Show>
            "."
            {move || complaint.get().map(|said: String| view! { <span class="expected">{said}</span> })}
        </p>
    }
    .into_any()
}

fn decimal(sheet: Sheet) -> AnyView {
    let name = |decimal: Decimal| if decimal.mark() == ',' { "comma" } else { "point" };
    let read = move || sheet.prepared().table.decimal;
    let choices = Signal::derive(move || {
        let chosen = sheet.study(|study| study.measured.decimal);
        let as_read = if chosen.is_none() { "as read" } else { "" };
        let (first, second) = (read(), read().other());
        vec![
            Choice::new(first.mark(), name(first)).under(as_read),
            Choice::new(second.mark(), name(second)),
        ]
    });
    let chosen = Signal::derive(move || read().mark().to_string());
    menu("Decimal sign".to_owned().into(), choices, chosen, move |mark| {
        sheet.change("", |study| {
            study.measured.decimal = from_code(&mark);
        });
    })
}

/// The order of reaction, as the unit of k has it or as the user chose it.
fn order(sheet: Sheet) -> AnyView {
    let stated = move || {
        sheet.study(|study| match study.assumed.order {
            Some(OrderChoice::Number(order)) => Some(order),
            _ => None,
        })
    };
    let name = |order: f64| {
        Order::new(order).map_or_else(|| format!("order {}", typed_number(order, '.')), Order::name)
    };
    let choices = Signal::derive(move || {
        let mut choices = Vec::new();
        if stated().is_none() {
            let read = sheet.evaluation().findings.read.order.unwrap_or(1.0);
            choices.push(Choice::new("", name(read)).under("as read"));
        } else {
            choices.push(Choice::new("", "as the unit of k has it"));
        }
        choices.extend(ORDERS.iter().map(|order| Choice::new(order.to_string(), name(*order))));
        if let Some(order) = stated().filter(|order| !ORDERS.contains(order)) {
            choices.push(Choice::new(order.to_string(), name(order)));
        }
        choices
    });
    let chosen =
        Signal::derive(move || stated().map(|order| order.to_string()).unwrap_or_default());
    menu("Order of reaction".to_owned().into(), choices, chosen, move |code| {
        sheet.change("", |study| {
            study.assumed.order = code.parse().ok().map(OrderChoice::Number);
        });
    })
}

fn errors(sheet: Sheet) -> AnyView {
    let choices = ERRORS.iter().map(|(code, words)| Choice::new(*code, *words)).collect::<Vec<_>>();
    let chosen = Signal::derive(move || {
        let stated = sheet.study(|study| study.measured.error_is);
        let in_heading =
            || sheet.prepared().table.columns.iter().find_map(|column| column.error_is);
        stated.or_else(in_heading).map_or("sd".to_owned(), code)
    });
    menu("What the errors are".to_owned().into(), choices.into(), chosen, move |code| {
        sheet.change("", |study| {
            study.measured.error_is = from_code::<ErrorKind>(&code);
        });
    })
}

fn concentration(sheet: Sheet, complaint: RwSignal<Option<String>>) -> AnyView {
    let shown = Signal::derive(move || {
        let stated = sheet.study(|study| study.measured.initial_concentration.clone());
        stated.map(|quantity| typed(&[quantity], sheet.decimal())).unwrap_or_default()
    });
    let take = move |text: &str| {
        let quantity = if text.trim().is_empty() { None } else { Some(amount(sheet, text)?) };
        sheet.change("concentration", |study: &mut Study| {
            study.measured.initial_concentration = quantity;
        });
        Ok(())
    };
    blank(Gap {
        label: "Initial concentration".into(),
        shown,
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint,
        id: "initial-concentration".into(),
        hint: "0.8 mol/L",
    })
}

/// A concentration as typed.
fn amount(sheet: Sheet, text: &str) -> Result<Quantity, String> {
    use kinetics_core::question::{BlankKind, parse_blank};
    let decimal = untrack(|| sheet.decimal());
    match parse_blank(text, BlankKind::Part, decimal)?.as_slice() {
        [quantity] => Ok(quantity.clone()),
        _ => Err(format!("Found “{}”, expected one concentration.", shortened(text))),
    }
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
