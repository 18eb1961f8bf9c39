//! Living inside another page: whether we do, how high we are, and what may be forbidden.

use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::{Element, ResizeObserver, Window};

/// Whether the page stands in a frame.
pub fn is_embedded() -> bool {
    web_sys::window().is_some_and(|window| parent(&window).is_some())
}

fn parent(window: &Window) -> Option<Window> {
    let parent = window.parent().ok().flatten()?;
    let own: &JsValue = window.as_ref();
    (own != AsRef::<JsValue>::as_ref(&parent)).then_some(parent)
}

/// Tells the page around this one how high it is, whenever that changes, and nothing else.
pub fn report_height(page: &Element) {
    let Some(window) = web_sys::window() else { return };
    let Some(parent) = parent(&window) else { return };
    let told = std::cell::Cell::new(0);
    let report = {
        let page = page.clone();
        move || {
            let height = page.scroll_height();
            if told.replace(height) != height {
                // A parent that does not listen misses nothing.
                let _ = message(height).and_then(|message| parent.post_message(&message, "*"));
            }
        }
    };
    let closure = Closure::<dyn Fn()>::new(report);
    if let Ok(observer) = ResizeObserver::new(closure.as_ref().unchecked_ref()) {
        observer.observe(page);
        closure.forget();
    }
}

/// `{kelvinclock: {height: n}}`.
fn message(height: i32) -> Result<JsValue, JsValue> {
    let (message, inner) = (js_sys::Object::new(), js_sys::Object::new());
    js_sys::Reflect::set(&inner, &"height".into(), &height.into())?;
    js_sys::Reflect::set(&message, &"kelvinclock".into(), &inner)?;
    Ok(message.into())
}

/// Opens the print window, where that is allowed.
pub fn print() {
    if let Some(window) = web_sys::window() {
        // A frame may ignore it; the record can be copied.
        let _ = window.print();
    }
}
