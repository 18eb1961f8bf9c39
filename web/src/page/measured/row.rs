//! One line of the table: the cells of a row, or what is to say about it.

use std::collections::BTreeSet;

use kinetics_core::answer::capitalised;
use kinetics_core::problem::Problem;
use kinetics_core::quantity::Quantity;
use kinetics_core::study::Excluded;
use kinetics_core::table::{Content, Role, Table};
use leptos::prelude::*;

use super::super::blank::{Gap, blank};
use super::edit::with_cell;
use super::rows::Rows;
use crate::figure::geometry::Point;
use crate::figure::scene::{self, Dash, Marker, Shape, Stroke};

/// What a line shows.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Line {
    /// The cells of a row, by its place in the table; one beyond the last takes the next row.
    Cells(u32),
    /// What is wrong with the row.
    Problems(u32),
    /// Why the row is left out.
    LeftOut(u32),
}

/// All lines, the empty one for the next row included.
pub fn lines(table: &Table, problems: &[Problem], left_out: BTreeSet<usize>) -> Vec<Line> {
    let mut lines = Vec::with_capacity(table.rows.len() + 1);
    let mut problems = problems.iter().filter_map(|problem| problem.row).peekable();
    for (row, at) in table.rows.iter().zip(0..) {
        lines.push(Line::Cells(at));
        while problems.next_if(|line| *line < row.line).is_some() {}
        if left_out.contains(&row.line) {
            lines.push(Line::LeftOut(at));
        } else if problems.peek() == Some(&row.line) {
            lines.push(Line::Problems(at));
        }
    }
    lines.push(Line::Cells(u32::try_from(table.rows.len()).unwrap_or(u32::MAX)));
    lines
}

/// A line as a row of the page's table.
pub fn row(rows: Rows, line: Line) -> AnyView {
    match line {
        Line::Cells(at) => cells(rows, at as usize),
        Line::Problems(at) => problems(rows, at as usize),
        Line::LeftOut(at) => left_out(rows, at as usize),
    }
}

/// The line of the text in which a row stands.
fn line_of(rows: Rows, at: usize) -> Option<usize> {
    rows.sheet.prepared().table.rows.get(at).map(|row| row.line)
}

fn cells(rows: Rows, at: usize) -> AnyView {
    let sheet = rows.sheet;
    let line = Memo::new(move |_| line_of(rows, at));
    let is_out = Memo::new(move |_| {
        let line = line.get();
        line.is_some_and(|line| sheet.study(|s| s.measured.excluded.iter().any(|e| e.row == line)))
    });
    let cells = move || {
        (0..rows.columns.get()).map(|column| cell(rows, at, column, line)).collect::<Vec<_>>()
    };
    view! {
        <tr class:out=move || is_out.get() class:next=move || line.get().is_none()>
            <td class="mark">{move || match line.get() {
                Some(line) => use_mark(rows, at, line, is_out),
                None => view! { <span aria-hidden="true">"+"</span> }.into_any(),
            }}</td>
            {cells}
        </tr>
    }
    .into_any()
}

/// The mark of a row: coloured and shaped by its temperature, full while the row is used.
fn use_mark(rows: Rows, at: usize, line: usize, is_out: Memo<bool>) -> AnyView {
    let sheet = rows.sheet;
    let kelvin = Memo::new(move |_| temperature(rows, at));
    let colour = move || {
        let role = kelvin.get().map_or(scene::Role::Quiet, scene::Role::Temperature);
        rows.palette.get().mark(role).css
    };
    let outline = move || {
        let shape = kelvin.get().map_or(Shape::Circle, Shape::OfTemperature);
        path(rows.palette.get().shape(shape))
    };
    let toggle = move |is_used: bool| {
        sheet.change("", |study| {
            let excluded = &mut study.measured.excluded;
            excluded.retain(|entry| entry.row != line);
            if !is_used {
                excluded.push(Excluded { row: line, reason: String::new() });
                excluded.sort_by_key(|entry| entry.row);
            }
        });
    };
    view! {
        <label class="use" title="Leave this row out, or take it back in">
            <input
                type="checkbox"
                aria-label=move || format!("use row {line}, {}", sheet.cell(at, 0))
                prop:checked=move || !is_out.get()
                on:change=move |event| toggle(event_target_checked(&event))
            />
            <svg viewBox="-6 -6 12 12" aria-hidden="true" style:color=colour>
                <path d=outline />
            </svg>
        </label>
    }
    .into_any()
}

/// The temperature of a row in kelvin, where it can be told.
fn temperature(rows: Rows, at: usize) -> Option<f64> {
    let prepared = rows.sheet.prepared();
    let row = prepared.table.rows.get(at)?;
    let runs = rows.sheet.evaluation();
    let runs = &runs.rates.runs;
    if let Ok(found) = runs.binary_search_by_key(&row.line, |run| run.row) {
        return runs.get(found).map(|run| run.observation.temperature.0);
    }
    let mut columns = prepared.table.columns.iter().zip(&row.cells);
    let (column, cell) = columns.find(|(column, _)| column.role == Role::Temperature)?;
    let (value, _) = cell.number()?;
    Quantity::new(value, column.unit.clone()?).kelvin().ok().map(|kelvin| kelvin.0)
}

/// A shape as an SVG path around the origin.
fn path(shape: Shape) -> String {
    let outline = Stroke { role: scene::Role::Ink, width: 0.0, dash: Dash::Solid };
    let centre = Point::new(0.0, 0.0);
    let marker = Marker { centre, radius: 4.6, shape, fill: scene::Role::Ink, outline };
    match marker.corners(shape) {
        None => "M-4.6 0a4.6 4.6 0 1 0 9.2 0a4.6 4.6 0 1 0 -9.2 0z".to_owned(),
        Some(corners) => {
            let corners: Vec<String> =
                corners.iter().map(|corner| format!("{:.2} {:.2}", corner.x, corner.y)).collect();
            format!("M{}z", corners.join("L"))
        }
    }
}

fn cell(rows: Rows, at: usize, column: usize, line: Memo<Option<usize>>) -> AnyView {
    let sheet = rows.sheet;
    let draft = RwSignal::new(None::<String>);
    let text = move || draft.get().unwrap_or_else(|| sheet.cell(at, column));
    let look = Memo::new(move |_| {
        let prepared = sheet.prepared();
        let content = prepared.table.rows.get(at).and_then(|row| row.cells.get(column));
        let is_words =
            prepared.table.columns.get(column).is_some_and(|column| !column.role.is_numeric());
        let has_problem = line.get().is_some_and(|line| {
            let place = (Some(line), Some(column + 1));
            rows.problems.with(|problems| {
                problems.binary_search_by_key(&place, |p| (p.row, p.column)).is_ok()
            })
        });
        match content.map(|cell| &cell.content) {
            Some(Content::Bad) => "bad",
            _ if has_problem => "bad",
            Some(Content::Marked { .. } | Content::Below(_) | Content::NotDetermined) => "unused",
            _ if is_words => "words",
            _ => "",
        }
    });
    let keep = move |typed: &str| {
        let prepared = untrack(|| sheet.prepared());
        sheet.change(&format!("cell {at} {column}"), |study| {
            study.measured.text =
                with_cell(&study.measured.text, &prepared.table, at, column, typed);
        });
    };
    // A long table is read again only once the cell is left.
    let typed = move |typed: String| {
        if !rows.are_many.get_untracked() {
            keep(&typed);
        }
        draft.set(Some(typed));
    };
    let leave = move || {
        if let Some(typed) = draft.get_untracked() {
            if typed.trim() != untrack(|| sheet.cell(at, column)) {
                keep(&typed);
            }
            draft.set(None);
        }
        sheet.seal();
    };
    let label = move || {
        let name = sheet.prepared().table.columns.get(column).map(|column| column.name.clone());
        let row = line.get().map_or("next row".to_owned(), |line| format!("row {line}"));
        format!("{}, {row}", name.unwrap_or_else(|| format!("column {}", column + 1)))
    };
    view! {
        <td class=move || look.get()>
            <input
                type="text"
                inputmode=move || if look.get() == "words" { "text" } else { "decimal" }
                autocomplete="off"
                spellcheck="false"
                aria-label=label
                aria-invalid=move || (look.get() == "bad").then_some("true")
                prop:value=text
                on:input=move |event| typed(event_target_value(&event))
                on:blur=move |_| leave()
                on:keydown=move |event| if event.key() == "Enter" { leave() }
            />
        </td>
    }
    .into_any()
}

fn problems(rows: Rows, at: usize) -> AnyView {
    let sentences = move || {
        let line = line_of(rows, at);
        rows.problems.with(|problems| {
            let own = problems.iter().filter(|problem| problem.row == line);
            own.map(|problem| in_place(&problem.sentence)).collect::<Vec<_>>().join(" ")
        })
    };
    let span = move || rows.columns.get().to_string();
    view! {
        <tr class="note">
            <td class="mark"></td>
            <td colspan=span title=sentences>{sentences}</td>
        </tr>
    }
    .into_any()
}

/// The sentence without its place, where that can be seen.
fn in_place(sentence: &str) -> String {
    let rest = sentence.strip_prefix("Row ").and_then(|placed| placed.split_once("): "));
    rest.map_or_else(|| sentence.to_owned(), |(_, rest)| capitalised(rest))
}

fn left_out(rows: Rows, at: usize) -> AnyView {
    let sheet = rows.sheet;
    let line = Memo::new(move |_| line_of(rows, at).unwrap_or_default());
    let shown = Signal::derive(move || {
        let line = line.get();
        sheet.study(|study| {
            let entry = study.measured.excluded.iter().find(|entry| entry.row == line);
            entry.map(|entry| entry.reason.clone()).unwrap_or_default()
        })
    });
    let take = move |typed: &str| {
        let line = line.get_untracked();
        sheet.change(&format!("reason {line}"), |study| {
            let entry = study.measured.excluded.iter_mut().find(|entry| entry.row == line);
            if let Some(entry) = entry {
                typed.clone_into(&mut entry.reason);
            }
        });
        Ok(())
    };
    let reason = blank(Gap {
        label: format!("Why row {} is left out", line.get_untracked()),
        shown,
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint: RwSignal::new(None),
        id: format!("reason-{at}"),
        hint: "why?",
    });
    let span = move || rows.columns.get().to_string();
    view! {
        <tr class="note left-out-because">
            <td class="mark"></td>
            <td colspan=span>"left out because " {reason}</td>
        </tr>
    }
    .into_any()
}
