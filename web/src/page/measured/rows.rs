//! The table: only the rows in view are on the page, so that a hundred thousand scroll as well
//! as six.

use std::rc::Rc;

use kinetics_core::numeric::sorting::sort_by;
use kinetics_core::problem::Problem;
use kinetics_core::study::Study;
use kinetics_core::table::{Column, read_table};
use wasm_bindgen::JsCast;
use web_sys::Element;

use super::super::live::State;
use super::super::once::once;
use super::super::part::{Part, part};
use super::super::sheet::Sheet;
use super::super::surroundings::Surroundings;
use super::head::head;
use super::row::{self, row};
use crate::figure::palette::Palette;

/// From so many rows on, lines are of one height and only those in view exist.
const MANY: usize = 300;
/// The height of a line in CSS pixels, as the style sheet has it.
const LINE_HEIGHT: f64 = 35.0;
/// Lines kept above and below those in view.
const MARGIN: usize = 12;
/// A longer text is no mere heading.
const LONGEST_HEADING: usize = 1_000;
/// The heading of a table that is typed.
const TYPED_HEADING: &str = "T/°C\tk, 1/h\ts(k)\n";

/// An empty table to type into.
pub fn begin_typing(study: &mut Study) {
    super::take_text(study, TYPED_HEADING.to_owned());
}

/// Whether nothing is typed into an empty table yet.
pub fn is_untouched(study: &Study) -> bool {
    study.measured.text == TYPED_HEADING
}

/// What marks mean, and what they do.
pub fn about_marks(sheet: Sheet) -> Part {
    part("p")
        .class("about-marks quiet")
        .is("hidden", move || sheet.prepared().table.rows.is_empty())
        .text(
            "A row’s mark tells its temperature by colour and by shape, ▼ ■ ● ◆ ▲ from cold to \
             warm. Press it to leave the row out; it is hollow then.",
        )
}

/// What rows need to know of the sheet.
pub struct Rows {
    /// The sheet.
    pub sheet: Sheet,
    /// What pictures and marks depend on besides.
    pub surroundings: State<Surroundings>,
    /// Everything wrong with cells, by line and column.
    pub problems: Rc<dyn Fn() -> Rc<Vec<Problem>>>,
    /// The columns.
    pub columns: Rc<dyn Fn() -> Rc<Vec<Column>>>,
}

impl Rows {
    /// Whether there are so many rows that lines keep one height.
    pub fn are_many(&self) -> bool {
        self.sheet.prepared().table.rows.len() >= MANY
    }

    /// The places of a row: 0 for its mark, then one for each column.
    pub fn places(&self) -> impl Fn() -> Vec<usize> + 'static {
        let columns = Rc::clone(&self.columns);
        move || (0..=columns().len()).collect()
    }

    /// Colours and shapes for temperatures.
    pub fn palette(&self) -> Palette {
        self.surroundings.get().palette().with_temperatures(self.sheet.temperatures())
    }
}

/// The table with its heads.
pub fn table(sheet: Sheet, surroundings: State<Surroundings>) -> Part {
    let rows = Rc::new(Rows {
        sheet,
        surroundings,
        problems: once(sheet, |_, evaluation| Rc::new(in_cells(&evaluation.findings.problems))),
        columns: once(sheet, move |_, _| Rc::new(columns_of(sheet))),
    });
    let problems = Rc::clone(&rows.problems);
    let lines = once(sheet, move |study, _| {
        let mut left_out: Vec<usize> =
            study.measured.excluded.iter().map(|entry| entry.row).collect();
        sort_by(&mut left_out, |row| *row as f64);
        Rc::new(row::lines(&sheet.prepared().table, &problems(), &left_out))
    });

    // From the top of what is seen, and how much is seen, in CSS pixels.
    let seen = State::new((0.0, 800.0));
    let looking = seen.clone();
    let (of_view, of_lines) = (Rc::clone(&rows), Rc::clone(&lines));
    let view = Rc::new(move || {
        let count = of_lines().len();
        if !of_view.are_many() {
            return (0, count);
        }
        let (top, height) = seen.get();
        let first = (top / LINE_HEIGHT) as usize;
        let last = ((top + height) / LINE_HEIGHT) as usize + 1;
        (first.saturating_sub(MARGIN).min(count), (last + MARGIN).min(count))
    });
    let (first, last) = (Rc::clone(&view), Rc::clone(&view));
    let (all, length) = (Rc::clone(&lines), Rc::clone(&lines));
    let in_view = move || {
        let (first, last) = view();
        lines().get(first..last).unwrap_or_default().to_vec()
    };
    let gap = |lines: usize| format!("{}px", lines as f64 * LINE_HEIGHT);
    let above = move || gap(first().0);
    let below = move || gap(all().len() - last().1);

    let heads = heads(&rows);
    let (count, wide, many) = (Rc::clone(&rows), Rc::clone(&rows), Rc::clone(&rows));
    let table = part("table")
        .class("measured")
        .follows("aria-rowcount", move || Some((length().len() + 1).to_string()))
        .styled("min-width", move || format!("{}px", 34 + 92 * (count.columns)().len()))
        .add(part("thead").add(heads))
        .add(space(&rows, above))
        .add(part("tbody").list(in_view, move |line| row(&wide, *line)))
        .add(space(&many, below));
    part("div")
        .follows("class", {
            let rows = Rc::clone(&many);
            move || Some(if rows.are_many() { "rows many".into() } else { "rows".into() })
        })
        .follows("tabindex", move || many.are_many().then(|| "0".to_owned()))
        .with("role", "region")
        .with("aria-label", "Table of what was measured")
        .on("scroll", move |event| {
            let target = event.target().and_then(|target| target.dyn_into::<Element>().ok());
            if let Some(element) = target {
                let height = f64::from(element.client_height());
                looking.set((f64::from(element.scroll_top()), height));
            }
        })
        .add(table)
}

/// A head for the marks and one for each column.
fn heads(rows: &Rc<Rows>) -> Part {
    let columns = Rc::clone(&rows.columns);
    let sheet = rows.sheet;
    part("tr").list(rows.places(), move |place| match place.checked_sub(1) {
        Some(at) => head(sheet, at, Rc::clone(&columns)),
        None => part("th").class("mark").add(part("span").class("unseen").text("used")),
    })
}

/// Room for the rows that are not in view.
fn space(rows: &Rc<Rows>, height: impl Fn() -> String + 'static) -> Part {
    let columns = Rc::clone(&rows.columns);
    let cell = part("td")
        .follows("colspan", move || Some((columns().len() + 1).to_string()))
        .styled("height", height);
    part("tbody").class("space").with("aria-hidden", "true").add(part("tr").add(cell))
}

/// The columns of the table; of one that is being begun, those of its heading.
fn columns_of(sheet: Sheet) -> Vec<Column> {
    let (study, prepared) = (sheet.study(), sheet.prepared());
    if !prepared.table.columns.is_empty() || study.measured.text.len() > LONGEST_HEADING {
        return prepared.table.columns.clone();
    }
    // The reader wants a row before it speaks of columns.
    let sampled = format!("{}\n50\t0.02\t0.001\n", study.measured.text.trim_end());
    read_table(&sampled, &kinetics_core::study::hints(&study)).columns
}

/// Problems with a place, in the order of the text.
fn in_cells(problems: &[Problem]) -> Vec<Problem> {
    let mut placed: Vec<Problem> = problems.iter().filter(|p| p.row.is_some()).cloned().collect();
    let place = |number: Option<usize>| number.map_or(-1.0, |number| number as f64);
    sort_by(&mut placed, |problem| place(problem.column));
    sort_by(&mut placed, |problem| place(problem.row));
    placed
}
