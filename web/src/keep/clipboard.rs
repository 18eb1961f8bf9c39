//! Copying: by the clipboard, by the old command where a frame forbids that, else by hand.

use wasm_bindgen::{JsCast, JsValue};
use wasm_bindgen_futures::JsFuture;
use web_sys::{Element, HtmlDocument, HtmlTextAreaElement};

/// Copies a text; false where the browser refuses every way.
pub async fn copy(text: &str) -> bool {
    by_clipboard(text).await || by_command(text).unwrap_or(false)
}

async fn by_clipboard(text: &str) -> bool {
    let Some(window) = web_sys::window() else { return false };
    let navigator = window.navigator();
    // Pages without a secure origin have no clipboard, whatever the types say.
    let has_clipboard = js_sys::Reflect::get(&navigator, &JsValue::from_str("clipboard"))
        .is_ok_and(|clipboard| clipboard.is_object());
    has_clipboard && JsFuture::from(navigator.clipboard().write_text(text)).await.is_ok()
}

/// Through a text area that is there for a moment.
fn by_command(text: &str) -> Option<bool> {
    let document = web_sys::window()?.document()?.dyn_into::<HtmlDocument>().ok()?;
    let body = document.body()?;
    let focused = document.active_element();
    let area = document.create_element("textarea").ok()?.dyn_into::<HtmlTextAreaElement>().ok()?;
    area.set_class_name("unseen");
    area.set_value(text);
    body.append_child(&area).ok()?;
    area.select();
    let copied = document.exec_command("copy").unwrap_or(false);
    area.remove();
    if let Some(focused) =
        focused.and_then(|element| element.dyn_into::<web_sys::HtmlElement>().ok())
    {
        // Without the focus nothing is lost but a place.
        let _ = focused.focus();
    }
    Some(copied)
}

/// Selects all of an element, for a copy by hand.
pub fn select(element: &Element) {
    let selection = web_sys::window().and_then(|window| window.get_selection().ok().flatten());
    if let Some(selection) = selection {
        // Where nothing can be selected the reader still can.
        let _ = selection.select_all_children(element);
    }
}
