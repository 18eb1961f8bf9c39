//! A picture on a canvas that follows its study, its size and its surroundings.

use std::sync::Arc;

use leptos::html::Canvas;
use leptos::prelude::*;
use leptos::web_sys::{HtmlCanvasElement, ResizeObserver};
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;

use super::surroundings::Surroundings;
use crate::figure::palette::Palette;
use crate::figure::temperature_colour::TemperatureRange;
use crate::figure::{Picture, canvas};

/// A picture that signals can carry.
pub type Drawing = Arc<dyn Picture + Send + Sync>;

/// Paints `drawing` on the canvas whenever one of them changes; the size on the page is handed
/// on as (width, height).
pub fn paint(
    node: NodeRef<Canvas>,
    drawing: Signal<Drawing>,
    temperatures: Signal<TemperatureRange>,
    surroundings: ReadSignal<Surroundings>,
) -> ReadSignal<(f64, f64)> {
    let (size, set_size) = signal((0.0, 0.0));
    node.on_load(move |element| {
        watch_size(&element, move |measured| {
            if size.get_untracked() != measured {
                set_size.set(measured);
            }
        })
    });
    Effect::new(move |_| {
        let (width, height) = size.get();
        let Some(element) = node.get() else { return };
        if width < 1.0 || height < 1.0 {
            return;
        }
        let around = surroundings.get();
        let palette: Palette = around.palette().with_temperatures(temperatures.get());
        let scene = drawing.get().scene(width, height);
        // A browser without canvases still has the table beside the picture.
        let _ = canvas::paint(&element, &scene, &palette, around.pixel_ratio);
    });
    size
}

fn watch_size(element: &HtmlCanvasElement, tell: impl Fn((f64, f64)) + 'static) {
    let measured = {
        let element = element.clone();
        move || tell((f64::from(element.client_width()), f64::from(element.client_height())))
    };
    measured();
    let closure = Closure::<dyn Fn()>::new(measured);
    if let Ok(observer) = ResizeObserver::new(closure.as_ref().unchecked_ref()) {
        observer.observe(element);
        // The two canvases stay as long as the page.
        closure.forget();
    }
}
