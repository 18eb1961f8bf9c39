//! A picture on a canvas that follows its study, its size and its surroundings.

use std::cell::RefCell;
use std::rc::Rc;

use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::{HtmlCanvasElement, ResizeObserver};

use super::live::{State, enter, follow};
use super::part::Part;
use super::sheet::Sheet;
use super::surroundings::Surroundings;
use crate::figure::temperature_colour::TemperatureRange;
use crate::figure::{Picture, canvas};

/// Makes a picture; the same one as long as nothing changed.
pub type Drawing = Rc<dyn Fn() -> Rc<dyn Picture>>;

/// What was painted last.
type Painted = (Rc<dyn Picture>, (f64, f64), TemperatureRange, Surroundings);

/// Paints `drawing` on a canvas whenever it, the size of the canvas or the surroundings change;
/// hands the size on as (width, height).
pub fn paint(
    part: &Part,
    sheet: Sheet,
    drawing: Drawing,
    surroundings: State<Surroundings>,
) -> State<(f64, f64)> {
    let size = State::new((0.0, 0.0));
    let Some(element) = part.element::<HtmlCanvasElement>() else { return size };
    watch_size(&element, size.clone());
    let measured = size.clone();
    let painted: RefCell<Option<Painted>> = RefCell::new(None);
    follow(move || {
        let (width, height) = measured.get();
        if width < 1.0 || height < 1.0 {
            return;
        }
        let around = surroundings.get();
        let range = sheet.temperatures();
        let now = (drawing(), (width, height), range, around);
        let is_same = |before: &Painted| {
            Rc::ptr_eq(&before.0, &now.0) && (before.1, before.2, before.3) == (now.1, now.2, now.3)
        };
        if painted.borrow().as_ref().is_some_and(is_same) {
            return;
        }
        let palette = around.palette().with_temperatures(range);
        // A browser without canvases still has the table beside the picture.
        let _ = canvas::paint(&element, &now.0.scene(width, height), &palette, around.pixel_ratio);
        painted.replace(Some(now));
    });
    size
}

fn watch_size(element: &HtmlCanvasElement, size: State<(f64, f64)>) {
    let measured = element.clone();
    let closure = Closure::<dyn Fn()>::new(move || {
        let now = (f64::from(measured.client_width()), f64::from(measured.client_height()));
        enter(|| size.set(now));
    });
    if let Ok(observer) = ResizeObserver::new(closure.as_ref().unchecked_ref()) {
        observer.observe(element);
        // The two canvases stay as long as the page.
        closure.forget();
    }
}
