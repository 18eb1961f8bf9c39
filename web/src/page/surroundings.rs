//! What the reader's system asks for: light or dark, its own colours, a sharp screen, print.

use std::cell::Cell;
use std::rc::Rc;

use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::{MediaQueryList, Window};

use super::live::{State, enter};
use crate::figure::palette::Palette;

/// What pictures depend on besides the study.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Surroundings {
    is_dark: bool,
    has_own_colours: bool,
    is_printing: bool,
    /// Pixels of the screen to a pixel of the page.
    pub pixel_ratio: f64,
}

/// What the page asks the reader's system about.
const QUERIES: [&str; 2] = ["(prefers-color-scheme: dark)", "(forced-colors: active)"];

impl Surroundings {
    /// The colours to draw in.
    pub fn palette(self) -> Palette {
        match self {
            Self { is_printing: true, .. } => Palette::light(),
            Self { has_own_colours: true, .. } => Palette::forced(),
            Self { is_dark: true, .. } => Palette::dark(),
            _ => Palette::light(),
        }
    }

    fn now(is_printing: bool) -> Self {
        let window = web_sys::window();
        let asks = |query: &str| {
            window.as_ref().and_then(|window| media(window, query)).is_some_and(|l| l.matches())
        };
        let ratio = window.as_ref().map_or(1.0, Window::device_pixel_ratio);
        let [is_dark, has_own_colours] = QUERIES.map(asks);
        // A sheet of paper shows more than a screen does.
        let pixel_ratio = if is_printing { ratio.max(3.0) } else { ratio };
        Self { is_dark, has_own_colours, is_printing, pixel_ratio }
    }
}

/// The surroundings, and their changes as long as the page lives.
pub fn watch() -> State<Surroundings> {
    let surroundings = State::new(Surroundings::now(false));
    let Some(window) = web_sys::window() else { return surroundings };
    let is_printing = Rc::new(Cell::new(false));
    let listener = |printing: Option<bool>| {
        let (surroundings, is_printing) = (surroundings.clone(), Rc::clone(&is_printing));
        Closure::<dyn Fn()>::new(move || {
            is_printing.set(printing.unwrap_or(is_printing.get()));
            enter(|| surroundings.set(Surroundings::now(is_printing.get())));
        })
        .into_js_value()
    };
    let again = listener(None);
    for query in QUERIES {
        if let Some(list) = media(&window, query) {
            list.set_onchange(Some(again.unchecked_ref()));
            // A list that nothing holds falls silent in some browsers.
            std::mem::forget(list);
        }
    }
    let events = [
        ("resize", again),
        ("beforeprint", listener(Some(true))),
        ("afterprint", listener(Some(false))),
    ];
    for (name, listener) in events {
        // Refused only where there are no events at all.
        let _ = window.add_event_listener_with_callback(name, listener.unchecked_ref());
    }
    surroundings
}

fn media(window: &Window, query: &str) -> Option<MediaQueryList> {
    window.match_media(query).ok().flatten()
}
