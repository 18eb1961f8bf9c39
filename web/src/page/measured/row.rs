//! One line of the table: the cells of a row, or what is to say about it.

use std::rc::Rc;

use kinetics_core::answer::capitalised;
use kinetics_core::numeric::sorting::sort_by;
use kinetics_core::problem::Problem;
use kinetics_core::quantity::Quantity;
use kinetics_core::study::Excluded;
use kinetics_core::table::{Content, Role, Table};
use wasm_bindgen::JsCast;
use web_sys::{ClipboardEvent, HtmlInputElement, KeyboardEvent};

use super::super::arrivals;
use super::super::blank::{Complaint, Gap, blank};
use super::super::live::State;
use super::super::part::{Part, drawn, part, value_of};
use super::super::sheet::Sheet;
use super::edit::with_cell;
use super::range;
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

/// All lines, the empty one for the next row included; the rows left out come in order.
pub fn lines(table: &Table, problems: &[Problem], left_out: &[usize]) -> Vec<Line> {
    let mut lines = Vec::with_capacity(table.rows.len() + 1);
    let mut problems = problems.iter().filter_map(|problem| problem.row).peekable();
    for (row, at) in table.rows.iter().zip(0..) {
        lines.push(Line::Cells(at));
        while problems.next_if(|line| *line < row.line).is_some() {}
        if left_out.binary_search(&row.line).is_ok() {
            lines.push(Line::LeftOut(at));
        } else if problems.peek() == Some(&row.line) {
            lines.push(Line::Problems(at));
        }
    }
    lines.push(Line::Cells(u32::try_from(table.rows.len()).unwrap_or(u32::MAX)));
    lines
}

/// A line as a row of the page's table.
pub fn row(rows: &Rc<Rows>, line: Line) -> Part {
    match line {
        Line::Cells(at) => cells(rows, at as usize),
        Line::Problems(at) => problems(rows, at as usize),
        Line::LeftOut(at) => left_out(rows, at as usize),
    }
}

/// The line of the text in which a row stands.
fn line_of(sheet: Sheet, at: usize) -> Option<usize> {
    sheet.prepared().table.rows.get(at).map(|row| row.line)
}

fn is_left_out(sheet: Sheet, at: usize) -> bool {
    let line = line_of(sheet, at);
    sheet.study().measured.excluded.iter().any(|entry| Some(entry.row) == line)
}

fn cells(rows: &Rc<Rows>, at: usize) -> Part {
    let sheet = rows.sheet;
    let look = move || {
        Some(match line_of(sheet, at) {
            None => "next".to_owned(),
            Some(_) if is_left_out(sheet, at) => "out".to_owned(),
            Some(_) => String::new(),
        })
    };
    let of_cells = Rc::clone(rows);
    part("tr").follows("class", look).list(rows.places(), move |place| match place.checked_sub(1) {
        Some(column) => cell(&of_cells, at, column),
        None => mark(&of_cells, at),
    })
}

/// The first cell of a row.
fn mark(rows: &Rc<Rows>, at: usize) -> Part {
    let (sheet, rows) = (rows.sheet, Rc::clone(rows));
    part("td").class("mark").filled(
        move || line_of(sheet, at),
        move |line| {
            vec![match line {
                Some(line) => use_mark(&rows, at, *line),
                None => part("span").with("aria-hidden", "true").text("+"),
            }]
        },
    )
}

/// The mark of a row: coloured and shaped by its temperature, full while the row is used.
fn use_mark(rows: &Rc<Rows>, at: usize, line: usize) -> Part {
    let sheet = rows.sheet;
    let (coloured, shaped) = (Rc::clone(rows), Rc::clone(rows));
    let colour = move || {
        let role = temperature(sheet, at).map_or(scene::Role::Quiet, scene::Role::Temperature);
        coloured.palette().mark(role).css
    };
    let outline = move || {
        let shape = temperature(sheet, at).map_or(Shape::Circle, Shape::OfTemperature);
        Some(path(shaped.palette().shape(shape)))
    };
    let toggle = move |is_used: bool| {
        sheet.change("", |study| {
            let excluded = &mut study.measured.excluded;
            excluded.retain(|entry| entry.row != line);
            if !is_used {
                excluded.push(Excluded { row: line, reason: String::new() });
                sort_by(excluded, |entry| entry.row as f64);
            }
        });
    };
    let tick = part("input")
        .with("type", "checkbox")
        .follows("aria-label", move || Some(format!("use row {line}, {}", sheet.cell(at, 0))))
        .ticked(move || !is_left_out(sheet, at))
        .on("change", move |event| {
            let target = event.target().and_then(|t| t.dyn_into::<HtmlInputElement>().ok());
            toggle(target.is_some_and(|input| input.checked()));
        });
    let drawing = drawn("svg")
        .with("viewBox", "-6 -6 12 12")
        .with("aria-hidden", "true")
        .styled("color", colour)
        .add(drawn("path").follows("d", outline));
    let does = move || {
        let does = if is_left_out(sheet, at) { "take it back in" } else { "leave it out" };
        Some(does.to_owned())
    };
    part("label")
        .class("use")
        .with("title", "Leave this row out, or take it back in")
        .follows("data-does", does)
        .add(tick)
        .add(drawing)
}

/// The temperature of a row in kelvin, where it can be told.
fn temperature(sheet: Sheet, at: usize) -> Option<f64> {
    let prepared = sheet.prepared();
    let row = prepared.table.rows.get(at)?;
    let evaluation = sheet.evaluation();
    let runs = &evaluation.rates.runs;
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

/// How a cell looks: `bad`, `unused`, `words`, or as any number.
fn look(rows: &Rows, at: usize, column: usize) -> &'static str {
    let prepared = rows.sheet.prepared();
    let content = prepared.table.rows.get(at).and_then(|row| row.cells.get(column));
    let is_words =
        prepared.table.columns.get(column).is_some_and(|column| !column.role.is_numeric());
    let has_problem = line_of(rows.sheet, at).is_some_and(|line| {
        let place = (Some(line), Some(column + 1));
        (rows.problems)().binary_search_by_key(&place, |p| (p.row, p.column)).is_ok()
    });
    match content.map(|cell| &cell.content) {
        Some(Content::Bad) => "bad",
        _ if has_problem => "bad",
        Some(Content::Marked { .. } | Content::Below(_) | Content::NotDetermined) => "unused",
        _ if is_words => "words",
        _ => "",
    }
}

/// The name of a cell's element.
pub fn cell_id(at: usize, column: usize) -> String {
    format!("cell-{at}-{column}")
}

/// A cell in which one types.
struct Typing {
    rows: Rc<Rows>,
    at: usize,
    column: usize,
    draft: State<Option<String>>,
}

fn cell(rows: &Rc<Rows>, at: usize, column: usize) -> Part {
    let sheet = rows.sheet;
    let typing = Rc::new(Typing { rows: Rc::clone(rows), at, column, draft: State::new(None) });
    let (looks, kind, invalid) = (Rc::clone(rows), Rc::clone(rows), Rc::clone(rows));
    let label = move || {
        let prepared = sheet.prepared();
        let name = prepared.table.columns.get(column).map(|column| column.name.clone());
        let row = line_of(sheet, at).map_or("next row".to_owned(), |line| format!("row {line}"));
        Some(format!("{}, {row}", name.unwrap_or_else(|| format!("column {}", column + 1))))
    };
    let mode = move || {
        let mode = if look(&kind, at, column) == "words" { "text" } else { "decimal" };
        Some(mode.to_owned())
    };
    let (text, write, leave, enter, paste) =
        (Rc::clone(&typing), Rc::clone(&typing), Rc::clone(&typing), Rc::clone(&typing), typing);
    let input = part("input")
        .with("type", "text")
        .with("id", &cell_id(at, column))
        .with("autocomplete", "off")
        .with("spellcheck", "false")
        .follows("inputmode", mode)
        .follows("aria-label", label)
        .follows("aria-invalid", move || {
            (look(&invalid, at, column) == "bad").then(|| "true".to_owned())
        })
        .holds(move || text.draft.get().unwrap_or_else(|| sheet.cell(at, column)))
        .on("input", move |event| write.typed(value_of(event)))
        .on("blur", move |_| leave.left())
        .on("keydown", move |event| {
            if event.dyn_ref::<KeyboardEvent>().is_some_and(|key| key.key() == "Enter") {
                enter.left();
            }
        })
        .on("paste", move |event| {
            let pasted = event.dyn_ref::<ClipboardEvent>().and_then(arrivals::text_of_paste);
            if let Some(pasted) = pasted.filter(|text| range::is_range(text)) {
                event.prevent_default();
                paste.pasted(&pasted);
            }
        });
    part("td").follows("class", move || Some(look(&looks, at, column).to_owned())).add(input)
}

impl Typing {
    fn typed(&self, typed: String) {
        // A long table is read again only once the cell is left.
        if !self.rows.are_many() {
            self.keep(&typed);
        }
        self.draft.set(Some(typed));
    }

    fn left(&self) {
        if let Some(typed) = self.draft.get() {
            if typed.trim() != self.rows.sheet.cell(self.at, self.column) {
                self.keep(&typed);
            }
            self.draft.set(None);
        }
        self.rows.sheet.seal();
    }

    /// A range of a spreadsheet goes into this cell and those below and to the right.
    fn pasted(&self, pasted: &str) {
        let sheet = self.rows.sheet;
        self.draft.set(None);
        let (study, prepared) = (sheet.study(), sheet.prepared());
        let place = (self.at, self.column);
        let hints = kinetics_core::study::hints(&study);
        let columns = (self.rows.columns)().len();
        let filled =
            range::filled(&study.measured.text, &prepared.table, &hints, columns, place, pasted);
        sheet.change("", |study| study.measured.text = filled.text);
        sheet.tell(match filled.left_over {
            0 => "The range is pasted into the table. Undo takes it out again.",
            _ => "The range is wider than the table: what lies to the right of it is not pasted.",
        });
    }

    fn keep(&self, typed: &str) {
        let Self { rows, at, column, .. } = self;
        let prepared = rows.sheet.prepared();
        rows.sheet.change(&format!("cell {at} {column}"), |study| {
            let text = &study.measured.text;
            study.measured.text = with_cell(text, &prepared.table, *at, *column, typed);
        });
    }
}

/// The cell of a note, as wide as all columns.
fn note(rows: &Rc<Rows>, class: &str, words: Part) -> Part {
    let columns = Rc::clone(&rows.columns);
    let words = words.follows("colspan", move || Some(columns().len().to_string()));
    part("tr").class(class).add(part("td").class("mark")).add(words)
}

fn problems(rows: &Rc<Rows>, at: usize) -> Part {
    let (sheet, problems) = (rows.sheet, Rc::clone(&rows.problems));
    let sentences = move || {
        let line = line_of(sheet, at);
        let problems = problems();
        let own = problems.iter().filter(|problem| problem.row == line);
        own.map(|problem| in_place(&problem.sentence)).collect::<Vec<_>>().join(" ")
    };
    note(rows, "note", part("td").says(sentences))
}

/// The sentence without its place, where that can be seen.
fn in_place(sentence: &str) -> String {
    let rest = sentence.strip_prefix("Row ").and_then(|placed| placed.split_once("): "));
    rest.map_or_else(|| sentence.to_owned(), |(_, rest)| capitalised(rest))
}

fn left_out(rows: &Rc<Rows>, at: usize) -> Part {
    let sheet = rows.sheet;
    let shown = move || {
        let (study, line) = (sheet.study(), line_of(sheet, at));
        let entry = study.measured.excluded.iter().find(|entry| Some(entry.row) == line);
        entry.map(|entry| entry.reason.clone()).unwrap_or_default()
    };
    let take = move |typed: &str| {
        let line = line_of(sheet, at);
        sheet.change(&format!("reason {at}"), |study| {
            let mut entries = study.measured.excluded.iter_mut();
            if let Some(entry) = entries.find(|entry| Some(entry.row) == line) {
                typed.clone_into(&mut entry.reason);
            }
        });
        Ok(())
    };
    let line = line_of(sheet, at).unwrap_or_default();
    let reason = blank(Gap {
        label: format!("Why row {line} is left out"),
        shown: Box::new(shown),
        take: Box::new(take),
        leave: Box::new(move || sheet.seal()),
        complaint: Complaint::new(None),
        id: format!("reason-{at}"),
        hint: "why?".into(),
    });
    note(rows, "note left-out-because", part("td").text("left out because ").add(reason))
}
