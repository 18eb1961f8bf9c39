//! The table: only the rows in view are on the page, so that a hundred thousand scroll as well
//! as six.

use std::sync::Arc;

use kinetics_core::problem::Problem;
use kinetics_core::study::Study;
use kinetics_core::table::{Column, Hints, Table, read_table};
use leptos::html::Div;
use leptos::prelude::*;

use super::super::pictures::temperature_range;
use super::super::sheet::Sheet;
use super::super::surroundings::Surroundings;
use super::head::head;
use super::row::{self, Line, row};

/// From so many rows on, lines are of one height and only those in view exist.
const MANY: usize = 300;
/// The height of a line in CSS pixels, as the style sheet has it.
const LINE_HEIGHT: f64 = 35.0;
/// Lines kept above and below those in view.
const MARGIN: usize = 12;
/// The heading of a table that is typed.
const TYPED_HEADING: &str = "T/°C\tk, 1/h\ts(k)\n";

/// An empty table to type into.
pub fn begin_typing(study: &mut Study) {
    super::take_text(study, TYPED_HEADING.to_owned());
}

/// What rows need to know of the sheet.
#[derive(Clone, Copy)]
pub struct Rows {
    /// The sheet.
    pub sheet: Sheet,
    /// Everything wrong with cells, by line and column.
    pub problems: Memo<Arc<Vec<Problem>>>,
    /// How many columns there are.
    pub columns: Memo<usize>,
    /// Colours and shapes for temperatures.
    pub palette: Memo<crate::figure::palette::Palette>,
    /// Whether there are so many rows that lines keep one height.
    pub are_many: Memo<bool>,
}

/// The table with its heads.
pub fn table(sheet: Sheet, surroundings: ReadSignal<Surroundings>) -> AnyView {
    let heads = Memo::new(move |_| columns_of(sheet));
    let problems = Memo::new(move |_| Arc::new(in_cells(&sheet.evaluation().findings.problems)));
    let rows = Rows {
        sheet,
        problems,
        columns: Memo::new(move |_| heads.with(Vec::len)),
        palette: Memo::new(move |_| {
            let range = temperature_range(&sheet.evaluation());
            surroundings.get().palette().with_temperatures(range)
        }),
        are_many: Memo::new(move |_| sheet.prepared().table.rows.len() >= MANY),
    };
    let lines = Memo::new(move |_| {
        let left_out = sheet.study(|s| s.measured.excluded.iter().map(|e| e.row).collect());
        Arc::new(row::lines(&sheet.prepared().table, &problems.get(), left_out))
    });

    let node = NodeRef::<Div>::new();
    let (scrolled, set_scrolled) = signal((0.0, 800.0));
    let look = move || {
        if let Some(element) = node.get_untracked() {
            let seen = (f64::from(element.scroll_top()), f64::from(element.client_height()));
            set_scrolled.set(seen);
        }
    };
    let view = Memo::new(move |_| {
        let count = lines.with(|lines| lines.len());
        if !rows.are_many.get() {
            return (0, count);
        }
        let (top, height) = scrolled.get();
        let first = (top / LINE_HEIGHT) as usize;
        let last = ((top + height) / LINE_HEIGHT) as usize + 1;
        (first.saturating_sub(MARGIN).min(count), (last + MARGIN).min(count))
    });
    let in_view = move || {
        let (first, last) = view.get();
        lines.with(|lines| lines.get(first..last).unwrap_or_default().to_vec())
    };
    let gap = move |lines: usize| format!("{}px", lines as f64 * LINE_HEIGHT);
    let above = move || gap(view.get().0);
    let below = move || gap(lines.with(|lines| lines.len()) - view.get().1);
    let span = move || (rows.columns.get() + 1).to_string();
    let heads_row = move || {
        (0..rows.columns.get())
            .map(|at| head(sheet, at, Memo::new(move |_| heads.with(|h| h.get(at).cloned()))))
            .collect::<Vec<_>>()
    };
    view! {
        <div
            class="rows"
            class:many=move || rows.are_many.get()
            node_ref=node
            tabindex=move || rows.are_many.get().then_some("0")
            role="region"
            aria-label="Table of what was measured"
            on:scroll=move |_| look()
        >
            <table
                class="measured"
                aria-rowcount=move || (lines.with(|lines| lines.len()) + 1).to_string()
                style:min-width=move || format!("{}px", 34 + 92 * rows.columns.get())
            >
                <thead>
                    <tr>
                        <th class="mark"><span class="unseen">"used"</span></th>
                        {heads_row}
                    </tr>
                </thead>
                <tbody>
                    <tr class="gap" aria-hidden="true">
                        <td colspan=span style:height=above></td>
                    </tr>
                    <For each=in_view key=|line: &Line| *line let:line>
                        {row(rows, line)}
                    </For>
                    <tr class="gap" aria-hidden="true">
                        <td colspan=span style:height=below></td>
                    </tr>
                </tbody>
            </table>
        </div>
    }
    .into_any()
}

/// The columns of the table; of one that is being begun, those of its heading.
fn columns_of(sheet: Sheet) -> Vec<Column> {
    let prepared = sheet.prepared();
    if !prepared.table.columns.is_empty() {
        return prepared.table.columns.clone();
    }
    let (text, hints) = sheet.study(|study| {
        (study.measured.text.clone(), Hints { form: None, ..kinetics_core::study::hints(study) })
    });
    // The reader wants a row before it speaks of columns.
    let sampled = format!("{}\n50\t0.02\t0.001\n", text.trim_end());
    let table: Table =
        if text.len() > 1000 { return Vec::new() } else { read_table(&sampled, &hints) };
    table.columns
}

/// Problems with a place, in the order of the text.
fn in_cells(problems: &[Problem]) -> Vec<Problem> {
    let mut placed: Vec<Problem> = problems.iter().filter(|p| p.row.is_some()).cloned().collect();
    placed.sort_by_key(|problem| (problem.row, problem.column));
    placed
}
