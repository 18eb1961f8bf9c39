//! Doing something a while later.

use std::time::Duration;

use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;

use super::live::enter;

/// Does something after a pause, at least after the browser had its turn; then all parts look
/// again.
pub fn later(pause: Duration, task: impl FnOnce() + 'static) {
    later_boxed(pause, Box::new(task));
}

fn later_boxed(pause: Duration, task: Box<dyn FnOnce()>) {
    let Some(window) = web_sys::window() else { return };
    let task = Closure::once_into_js(move || enter(task));
    let milliseconds = i32::try_from(pause.as_millis()).unwrap_or(i32::MAX);
    // Refused only where there are no timers at all.
    let _ = window
        .set_timeout_with_callback_and_timeout_and_arguments_0(task.unchecked_ref(), milliseconds);
}

/// Waits for something outside the page, then does what is to be done about it; then all parts
/// look again.
pub fn after<T: 'static>(wait: impl Future<Output = T> + 'static, task: impl FnOnce(T) + 'static) {
    wasm_bindgen_futures::spawn_local(async move {
        let outcome = wait.await;
        enter(|| task(outcome));
    });
}
