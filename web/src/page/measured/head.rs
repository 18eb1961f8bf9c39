//! The heads of the columns: what each holds and in which unit, as the reader decided or the
//! user chose.

use kinetics_core::study::{ColumnChoice, Study};
use kinetics_core::table::{Column, Origin, Role};
use kinetics_core::units::{RateUnit, TemperatureUnit};
use leptos::prelude::*;

use super::super::menu::{Choice, menu};
use super::super::sheet::Sheet;

/// The head of a column.
pub fn head(sheet: Sheet, at: usize, column: Memo<Option<Column>>) -> AnyView {
    let name = move || column.with(|c| c.as_ref().map_or(String::new(), |c| c.name.clone()));
    let of = move |part: fn(&Column) -> String| {
        Signal::derive(move || column.with(|c| c.as_ref().map(part).unwrap_or_default()))
    };
    let roles = Signal::derive(move || column.with(|c| c.as_ref().map(roles).unwrap_or_default()));
    let units = Signal::derive(move || column.with(|c| c.as_ref().map(units).unwrap_or_default()));
    let has_units = move || units.with(|units| !units.is_empty());
    let is_stated = move |origin: fn(&Column) -> Origin| {
        let stated = column.with(|c| c.as_ref().is_some_and(|c| origin(c) == Origin::Stated));
        if stated { "stated" } else { "read" }
    };
    let origin = move |origin: fn(&Column) -> Origin| {
        column.with(|c| c.as_ref().map_or("", |c| came_from(origin(c))))
    };
    view! {
        <th scope="col" title=name>
            <span
                class=move || format!("role {}", is_stated(|c| c.role_from))
                title=move || origin(|c| c.role_from)
            >
                {menu(
                    Signal::derive(move || format!("What column {} holds", at + 1)),
                    roles,
                    of(|column| column.role.code().to_owned()),
                    move |code| sheet.change("", |study| choose_role(study, at, &code)),
                )}
            </span>
            <span
                class=move || format!("unit {}", is_stated(|c| c.unit_from))
                title=move || origin(|c| c.unit_from)
            >
                <span class="factor">{of(factor)}</span>
                <Show when=has_units fallback=|| "\u{a0}">
                    {menu(
                        Signal::derive(move || format!("Unit of column {}", at + 1)),
                        units,
                        of(|column| column.unit.clone().unwrap_or_default()),
                        move |unit| sheet.change("", |study| choose_unit(study, at, unit)),
                    )}
                </Show>
            </span>
        </th>
    }
    .into_any()
}

fn came_from(origin: Origin) -> &'static str {
    match origin {
        Origin::Stated => "chosen here",
        Origin::Header => "taken from the heading",
        Origin::Values => "judged by the values",
        Origin::Assumed => "assumed: nothing says otherwise",
    }
}

/// The roles of a menu: first the one that is in use, then all others.
fn roles(column: &Column) -> Vec<Choice> {
    let as_read = column.role_from != Origin::Stated;
    let group = |role: Role| if as_read && role == column.role { "as read" } else { "" };
    let mut choices: Vec<Choice> = Role::ALL
        .iter()
        .map(|role| Choice::new(role.code(), role.words()).under(group(*role)))
        .collect();
    choices.sort_by_key(|choice| choice.group.is_empty());
    choices
}

/// The units of a column's role; the one in use is among them however rare.
fn units(column: &Column) -> Vec<Choice> {
    let mut units = column.role.units();
    if column.role == Role::Sd {
        // An error has the unit of its values, or counts in per cent of them.
        units.extend(column.unit.clone().filter(|unit| unit != "%"));
    }
    if let Some(unit) = column.unit.as_ref().filter(|unit| !units.contains(unit)) {
        units.insert(0, unit.clone());
    }
    let mut choices: Vec<Choice> = Vec::new();
    if column.unit.is_none() && !units.is_empty() {
        choices.push(Choice::new("", "unit?"));
    }
    let as_read = column.unit_from != Origin::Stated;
    choices.extend(units.into_iter().map(|unit| {
        let is_read = as_read && column.unit.as_ref() == Some(&unit);
        let shown = symbol(column.role, &unit);
        Choice::new(unit, shown).under(if is_read { "as read" } else { "" })
    }));
    choices.sort_by_key(|choice| choice.group.is_empty());
    choices
}

/// A unit as it looks in print.
fn symbol(role: Role, unit: &str) -> String {
    match role {
        Role::Temperature => TemperatureUnit::parse(unit).map(|u| u.symbol().to_owned()),
        _ => RateUnit::parse(unit).map(RateUnit::symbol),
    }
    .unwrap_or_else(|_| unit.to_owned())
}

/// "10⁻³ ·" before the unit, where the heading states a factor.
fn factor(column: &Column) -> String {
    if column.multiplier == 1.0 {
        return String::new();
    }
    let shown = kinetics_core::wording::factor(column.multiplier);
    format!("{shown}\u{a0}· ")
}

fn choose_role(study: &mut Study, at: usize, code: &str) {
    let role = Role::ALL.iter().find(|role| role.code() == code).copied();
    let choice = chosen(study, at);
    // A unit belongs to its role.
    *choice = ColumnChoice { role, other: std::mem::take(&mut choice.other), ..Default::default() };
}

fn choose_unit(study: &mut Study, at: usize, unit: String) {
    chosen(study, at).unit = Some(unit).filter(|unit| !unit.is_empty());
}

fn chosen(study: &mut Study, at: usize) -> &mut ColumnChoice {
    let columns = &mut study.measured.columns;
    if columns.len() <= at {
        columns.resize(at + 1, ColumnChoice::default());
    }
    &mut columns[at]
}
