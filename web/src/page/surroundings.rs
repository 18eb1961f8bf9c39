//! What the reader's system asks for: light or dark, its own colours, a sharp screen, print.

use leptos::prelude::*;
use leptos::web_sys::{MediaQueryList, Window};
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;

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

    fn of(window: &Window, is_printing: bool) -> Self {
        let asks = |query: &str| media(window, query).is_some_and(|list| list.matches());
        // A sheet of paper shows more than a screen does.
        let pixel_ratio = window.device_pixel_ratio().max(if is_printing { 3.0 } else { 0.0 });
        Self {
            is_dark: asks("(prefers-color-scheme: dark)"),
            has_own_colours: asks("(forced-colors: active)"),
            is_printing,
            pixel_ratio,
        }
    }
}

/// The surroundings, and their changes as long as the page lives.
pub fn watch() -> ReadSignal<Surroundings> {
    let window = window();
    let (surroundings, set) = signal(Surroundings::of(&window, false));
    let look = move |is_printing: bool| {
        let now = Surroundings::of(&leptos::prelude::window(), is_printing);
        if surroundings.get_untracked() != now {
            set.set(now);
        }
    };
    let again = Closure::<dyn Fn()>::new(move || look(false));
    for query in ["(prefers-color-scheme: dark)", "(forced-colors: active)"] {
        if let Some(list) = media(&window, query) {
            list.set_onchange(Some(again.as_ref().unchecked_ref()));
            // A list that nothing holds falls silent in some browsers.
            std::mem::forget(list);
        }
    }
    let listen = |name: &str, closure: &Closure<dyn Fn()>| {
        // Refused only where there are no events at all.
        let _ = window.add_event_listener_with_callback(name, closure.as_ref().unchecked_ref());
    };
    let printing = Closure::<dyn Fn()>::new(move || look(true));
    listen("resize", &again);
    listen("afterprint", &again);
    listen("beforeprint", &printing);
    again.forget();
    printing.forget();
    surroundings
}

fn media(window: &Window, query: &str) -> Option<MediaQueryList> {
    window.match_media(query).ok().flatten()
}
