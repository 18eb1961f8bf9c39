//! The table beside a picture: the same content in numbers.

use kinetics_core::wording::significant;
use leptos::prelude::*;
use leptos::web_sys::{Event, HtmlDetailsElement};
use wasm_bindgen::JsCast;

use super::canvas::Drawing;
use super::sheet::Sheet;

/// More rows than this are counted, not shown.
const MOST_ROWS: usize = 200;

/// The table, behind a line that opens it.
pub fn picture_table(sheet: Sheet, drawing: Signal<Drawing>) -> AnyView {
    let is_open = RwSignal::new(false);
    let toggled = move |event: Event| {
        let details = event.target().and_then(|t| t.dyn_into::<HtmlDetailsElement>().ok());
        is_open.set(details.is_some_and(|details| details.open()));
    };
    view! {
        <details on:toggle=toggled>
            <summary>"The picture as a table"</summary>
            {move || is_open.get().then(|| table(&drawing.get(), sheet.decimal()))}
        </details>
    }
    .into_any()
}

fn table(drawing: &Drawing, decimal: char) -> AnyView {
    let table = drawing.table();
    let number = |value: f64| significant(value, 4, decimal);
    let left = table.rows.len().saturating_sub(MOST_ROWS);
    let heads: Vec<AnyView> = table
        .headers
        .iter()
        .map(|head| view! { <th scope="col">{head.clone()}</th> }.into_any())
        .collect();
    let rows: Vec<AnyView> = table
        .rows
        .iter()
        .take(MOST_ROWS)
        .map(|row| {
            let cells: Vec<AnyView> =
                row.iter().map(|cell| view! { <td>{cell.text(number)}</td> }.into_any()).collect();
            view! { <tr>{cells}</tr> }.into_any()
        })
        .collect();
    let rest = (left > 0).then(|| format!("and {left} rows more"));
    view! {
        <div class="beside-table" tabindex="0" role="region" aria-label=table.caption.clone()>
            <table>
                <caption>{table.caption.clone()} " " {rest}</caption>
                <thead><tr>{heads}</tr></thead>
                <tbody>{rows}</tbody>
            </table>
        </div>
    }
    .into_any()
}
