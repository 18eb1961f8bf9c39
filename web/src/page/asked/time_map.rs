//! The time map, with flags that can be dragged; the blanks of the sentences are the typed
//! equivalent.

use std::sync::Arc;

use kinetics_core::quantity::Quantity;
use kinetics_core::question::{BlankKind, Question};
use kinetics_core::units::{TemperatureUnit, TimeUnit};
use leptos::html::Canvas;
use leptos::prelude::*;
use leptos::web_sys::PointerEvent;

use super::super::canvas::{self, Drawing};
use super::super::picture_table::picture_table;
use super::super::pictures::{self, code, quantities, temperature_range};
use super::super::sheet::Sheet;
use super::super::surroundings::Surroundings;
use crate::figure::time_map::{Place, TimeMap, View};

/// A flag that follows the pointer.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Drag {
    question: usize,
    moves: Moves,
    view: View,
}

/// What a flag's question has a blank for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Moves {
    Temperature(&'static str),
    Time(&'static str),
}

/// The map with its table.
pub fn figure(sheet: Sheet, surroundings: ReadSignal<Surroundings>) -> AnyView {
    let node = NodeRef::<Canvas>::new();
    let drag = RwSignal::new(None::<Drag>);
    let over_flag = RwSignal::new(false);
    let held = Memo::new(move |_| drag.get().map(|drag| drag.view));
    let map = Memo::new(move |_| {
        let evaluation = sheet.evaluation();
        sheet.study(|study| pictures::time_map(study, &evaluation, held.get()))
    });
    let drawing: Signal<Drawing> = Signal::derive(move || Arc::new(map.get()) as Drawing);
    let temperatures = Signal::derive(move || temperature_range(&sheet.evaluation()));
    let size = canvas::paint(node, drawing, temperatures, surroundings);

    let at = |event: &PointerEvent| (f64::from(event.offset_x()), f64::from(event.offset_y()));
    let under = move |event: &PointerEvent| {
        let (x, y) = at(event);
        map.with_untracked(|map| drag_at(sheet, map, size.get_untracked(), x, y))
    };
    let press = move |event: PointerEvent| {
        let Some(found) = under(&event) else { return };
        event.prevent_default();
        if let Some(canvas) = node.get_untracked() {
            // Without capture the flag follows as long as the pointer is over the map.
            let _ = canvas.set_pointer_capture(event.pointer_id());
        }
        drag.set(Some(found));
    };
    let follow = move |event: PointerEvent| match drag.get_untracked() {
        None => over_flag.set(under(&event).is_some()),
        Some(drag) => {
            let (x, y) = at(&event);
            let place = map.with_untracked(|map| map.place_at(size.get_untracked(), x, y));
            move_flag(sheet, &drag, place);
        }
    };
    let release = move |_: PointerEvent| {
        if drag.get_untracked().is_some() {
            drag.set(None);
            sheet.seal();
        }
    };
    view! {
        <figure class="picture">
            <canvas
                class="map"
                class:movable=move || over_flag.get()
                node_ref=node
                on:pointerdown=press
                on:pointermove=follow
                on:pointerup=release
                on:pointercancel=release
            ></canvas>
            <figcaption>
                "Drag a flag, or type into its blank. Line: solid inside the data, dashed near, \
                 dotted far, hatched beyond."
            </figcaption>
            {picture_table(sheet, drawing)}
        </figure>
    }
    .into_any()
}

/// The flag under a pixel, if its question has one blank for it to move.
fn drag_at(sheet: Sheet, map: &TimeMap, size: (f64, f64), x: f64, y: f64) -> Option<Drag> {
    let flag = map.flags.get(map.flag_at(size, x, y)?)?;
    let question = flag.number.checked_sub(1)?;
    let moves = sheet.study_now(|study| {
        let asked = study.asked.get(question)?;
        let blanks = Question::of_code(code(asked))?.blanks;
        let named = |kind: BlankKind, name: &str| {
            let mut own = blanks.iter().filter(|blank| blank.kind == kind);
            own.find(|blank| blank.name == name && quantities(asked, name).len() == 1)
        };
        let temperature = named(BlankKind::Temperature, "temperature");
        let time = named(BlankKind::Time, "time");
        match (temperature, time) {
            (Some(blank), _) => Some(Moves::Temperature(blank.name)),
            (None, Some(blank)) => Some(Moves::Time(blank.name)),
            (None, None) => None,
        }
    })?;
    Some(Drag { question, moves, view: map.view() })
}

/// Writes the place of a flag into its blank, in the unit that stands there.
fn move_flag(sheet: Sheet, drag: &Drag, place: Place) {
    let Drag { question, moves, .. } = *drag;
    let (name, written): (_, fn(&str, Place) -> Option<Quantity>) = match moves {
        Moves::Temperature(name) => (name, |unit, place| {
            let scale = TemperatureUnit::parse(unit).ok()?;
            Some(rounded(Quantity::new(scale.from_kelvin(place.temperature), unit), 0.5))
        }),
        Moves::Time(name) => (name, |unit, place| {
            let time = TimeUnit::parse(unit).ok()?.from_seconds(place.time_seconds);
            let quantity = Quantity::new(time, unit);
            // Two figures: as fine as a hand is steady.
            let step = 10_f64.powf(quantity.value.abs().log10().floor() - 1.0);
            Some(rounded(quantity, step))
        }),
    };
    sheet.change(&format!("flag {question}"), |study| {
        let Some(asked) = study.asked.get_mut(question) else { return };
        let Some(unit) = quantities(asked, name).into_iter().next().map(|q| q.unit) else { return };
        if let Some(value) = written(&unit, place).and_then(|q| serde_json::to_value(q).ok()) {
            asked.insert(name.to_owned(), value);
        }
    });
}

fn rounded(quantity: Quantity, step: f64) -> Quantity {
    // Back through decimals, so that 0.1 steps do not show binary dust.
    let value = (quantity.value / step).round() * step;
    let decimals = (-step.log10().floor()).clamp(0.0, 12.0) as usize;
    let tidy = format!("{value:.decimals$}").parse().unwrap_or(value);
    Quantity { value: tidy, ..quantity }
}
