//! The heads of the columns: what each holds and in which unit, as the reader decided or the
//! user chose.

use std::cell::RefCell;
use std::rc::Rc;

use kinetics_core::numeric::sorting::sort_by;
use kinetics_core::study::{ColumnChoice, Study};
use kinetics_core::table::{Column, Origin, Role};
use kinetics_core::units::{RateUnit, TemperatureUnit};

use super::super::menu::{Choice, Offer, menu};
use super::super::part::{Part, part};
use super::super::sheet::Sheet;

/// The head of a column.
pub fn head(sheet: Sheet, at: usize, columns: Rc<dyn Fn() -> Rc<Vec<Column>>>) -> Part {
    let column: Of = Rc::new(move || columns().get(at).cloned());
    let name = Rc::clone(&column);
    let role = menu(
        &format!("What column {} holds", at + 1),
        offer(&column, |column| (roles(column), column.role.code().to_owned())),
        move |code| sheet.change("", |study| choose_role(study, at, code)),
    );
    let units: Rc<dyn Fn() -> Offer> =
        Rc::new(offer(&column, |column| (units(column), column.unit.clone().unwrap_or_default())));
    let offered = Rc::clone(&units);
    let unit = menu(
        &format!("Unit of column {}", at + 1),
        move || offered(),
        move |unit| {
            let table = &sheet.prepared().table.columns;
            sheet.change("", |study| {
                choose_unit(study, at, unit);
                // Errors in the unit of their values stay in it.
                for (error, column) in table.iter().enumerate() {
                    let shares = column.unit == table.get(at).and_then(|own| own.unit.clone());
                    if column.error_of == Some(at) && shares {
                        choose_unit(study, error, unit);
                    }
                }
            });
        },
    );
    let factor_of = Rc::clone(&column);
    let factor = move || factor_of().as_ref().map(factor).unwrap_or_default();
    let no_units = move || units().0.is_empty();
    part("th")
        .with("scope", "col")
        .follows("title", move || name().map(|column| column.name))
        .add(marked("role", &column, |column| column.role_from).add(role))
        .add(
            marked("unit", &column, |column| column.unit_from)
                .add(part("span").class("factor").says(factor))
                .add(unit.is("hidden", no_units))
                .text("\u{200b}"),
        )
}

/// The column of a head, as it is now.
type Of = Rc<dyn Fn() -> Option<Column>>;

/// What a menu of the head offers, worked out when the column changes: units are read from text.
fn offer(column: &Of, of: fn(&Column) -> Offer) -> impl Fn() -> Offer + 'static {
    let column = Rc::clone(column);
    let known: RefCell<Option<(Column, Offer)>> = RefCell::new(None);
    move || {
        let Some(now) = column() else { return Offer::default() };
        if let Some((then, offered)) = known.borrow().as_ref()
            && *then == now
        {
            return offered.clone();
        }
        let offered = of(&now);
        known.replace(Some((now, offered.clone())));
        offered
    }
}

/// A place of the head that tells whether what stands there was read or chosen.
fn marked(name: &'static str, column: &Of, origin: fn(&Column) -> Origin) -> Part {
    let (marked, told) = (Rc::clone(column), Rc::clone(column));
    part("span")
        .follows("class", move || {
            let is_stated = marked().is_some_and(|column| origin(&column) == Origin::Stated);
            Some(format!("{name} {}", if is_stated { "stated" } else { "read" }))
        })
        .follows("title", move || told().map(|column| came_from(origin(&column)).to_owned()))
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
    sort_by(&mut choices, |choice| f64::from(choice.group.is_empty()));
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
    sort_by(&mut choices, |choice| f64::from(choice.group.is_empty()));
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
/// What stands before a column's unit: the temperature of its run, and its factor.
fn factor(column: &Column) -> String {
    let run = column.run_temperature.as_ref().map(|t| format!("{t}, ")).unwrap_or_default();
    if column.multiplier == 1.0 {
        return run;
    }
    let shown = kinetics_core::wording::factor(column.multiplier);
    format!("{run}{shown}\u{a0}· ")
}

fn choose_role(study: &mut Study, at: usize, code: &str) {
    let role = Role::ALL.iter().find(|role| role.code() == code).copied();
    let choice = chosen(study, at);
    // A unit belongs to its role.
    *choice = ColumnChoice { role, other: std::mem::take(&mut choice.other), ..Default::default() };
}

fn choose_unit(study: &mut Study, at: usize, unit: &str) {
    chosen(study, at).unit = Some(unit.to_owned()).filter(|unit| !unit.is_empty());
}

fn chosen(study: &mut Study, at: usize) -> &mut ColumnChoice {
    let columns = &mut study.measured.columns;
    if columns.len() <= at {
        columns.resize(at + 1, ColumnChoice::default());
    }
    &mut columns[at]
}
