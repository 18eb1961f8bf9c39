//! The table beside a picture: the same content in numbers.

use std::rc::Rc;

use kinetics_core::wording::significant;
use wasm_bindgen::JsCast;
use web_sys::HtmlDetailsElement;

use super::canvas::Drawing;
use super::live::State;
use super::part::{Part, part};
use super::sheet::Sheet;
use crate::figure::Picture;

/// More rows than this are counted, not shown.
const MOST_ROWS: usize = 200;

/// A picture that is told from others by where it lies.
struct Same(Rc<dyn Picture>);

impl PartialEq for Same {
    fn eq(&self, other: &Self) -> bool {
        Rc::ptr_eq(&self.0, &other.0)
    }
}

/// The table, behind a line that opens it.
pub fn picture_table(sheet: Sheet, drawing: Drawing) -> Part {
    let is_open = State::new(false);
    let opened = is_open.clone();
    let key = move || is_open.get().then(|| (Same(drawing()), sheet.decimal()));
    let content = part("div").filled(key, |shown| match shown {
        Some((picture, decimal)) => vec![table(&*picture.0, *decimal)],
        None => Vec::new(),
    });
    part("details")
        .on("toggle", move |event| {
            let details = event.target().and_then(|t| t.dyn_into::<HtmlDetailsElement>().ok());
            opened.set(details.is_some_and(|details| details.open()));
        })
        .add(part("summary").text("The picture as a table"))
        .add(content)
}

fn table(picture: &dyn Picture, decimal: char) -> Part {
    let table = picture.table();
    let number = |value: f64| significant(value, 4, decimal);
    let left = table.rows.len().saturating_sub(MOST_ROWS);
    let rest = if left > 0 { format!(" and {left} rows more") } else { String::new() };
    let heads = table.headers.iter().map(|head| match head.as_str() {
        "" => part("td"),
        head => part("th").with("scope", "col").text(head),
    });
    let rows =
        table.rows.iter().take(MOST_ROWS).map(|row| {
            part("tr").add_all(row.iter().map(|cell| part("td").text(&cell.text(number))))
        });
    let caption = part("caption").text(&table.caption).text(&rest);
    part("div")
        .class("beside-table")
        .with("tabindex", "0")
        .with("role", "region")
        .with("aria-label", &table.caption)
        .add(
            part("table")
                .add(caption)
                .add(part("thead").add(part("tr").add_all(heads)))
                .add(part("tbody").add_all(rows)),
        )
}
