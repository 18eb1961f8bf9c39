//! Copying: by the clipboard, by the old command where a frame forbids that, else by hand.

use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use wasm_bindgen_futures::JsFuture;
use web_sys::{ClipboardEvent, Document, Event, HtmlDocument, HtmlTextAreaElement};

/// What is put on the clipboard.
#[derive(Debug, Clone)]
pub struct Copied {
    /// For whoever takes text.
    pub text: String,
    /// For whoever takes HTML.
    pub html: Option<String>,
}

/// Copies; false where the browser refuses every way.
pub async fn copy(copied: &Copied) -> bool {
    // The command is the one way that takes HTML in every browser.
    if copied.html.is_none() && by_clipboard(&copied.text).await {
        return true;
    }
    by_command(copied).unwrap_or(false)
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
fn by_command(copied: &Copied) -> Option<bool> {
    let document = web_sys::window()?.document()?.dyn_into::<HtmlDocument>().ok()?;
    let body = document.body()?;
    let focused = document.active_element();
    let area = document.create_element("textarea").ok()?.dyn_into::<HtmlTextAreaElement>().ok()?;
    area.set_class_name("unseen");
    area.set_value(&copied.text);
    body.append_child(&area).ok()?;
    area.select();
    let is_copied = with_html(&document, copied, || document.exec_command("copy").unwrap_or(false));
    area.remove();
    if let Some(focused) =
        focused.and_then(|element| element.dyn_into::<web_sys::HtmlElement>().ok())
    {
        // Without the focus nothing is lost but a place.
        let _ = focused.focus();
    }
    Some(is_copied)
}

/// Runs the command, and adds the HTML to what it copies.
fn with_html(document: &Document, copied: &Copied, command: impl FnOnce() -> bool) -> bool {
    let Some(html) = copied.html.clone() else { return command() };
    let text = copied.text.clone();
    let fill = Closure::<dyn Fn(Event)>::new(move |event: Event| {
        let data = event.dyn_ref::<ClipboardEvent>().and_then(ClipboardEvent::clipboard_data);
        if let Some(data) = data {
            event.prevent_default();
            // Of two kinds, one that is refused leaves the other.
            let _ = data.set_data("text/html", &html);
            let _ = data.set_data("text/plain", &text);
        }
    });
    let listener = fill.as_ref().unchecked_ref();
    if document.add_event_listener_with_callback("copy", listener).is_err() {
        return command();
    }
    let is_copied = command();
    // A listener that stayed would be called no more: its closure ends here.
    let _ = document.remove_event_listener_with_callback("copy", listener);
    is_copied
}
