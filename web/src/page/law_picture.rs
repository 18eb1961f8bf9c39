//! The law's picture, beside what was measured.

use std::sync::Arc;

use leptos::html::Canvas;
use leptos::prelude::*;

use super::canvas::{self, Drawing};
use super::picture_table::picture_table;
use super::pictures::{self, temperature_range};
use super::sheet::Sheet;
use super::surroundings::Surroundings;

/// The picture with its table.
pub fn figure(sheet: Sheet, surroundings: ReadSignal<Surroundings>) -> AnyView {
    let node = NodeRef::<Canvas>::new();
    let drawing: Signal<Drawing> = Signal::derive(move || {
        let evaluation = sheet.evaluation();
        Arc::new(sheet.study(|study| pictures::law_picture(study, &evaluation))) as Drawing
    });
    let temperatures = Signal::derive(move || temperature_range(&sheet.evaluation()));
    canvas::paint(node, drawing, temperatures, surroundings);
    view! {
        <figure class="picture">
            <canvas class="law" node_ref=node></canvas>
            {picture_table(sheet, drawing)}
        </figure>
    }
    .into_any()
}
