//! The browser's own storage. Reading it can already be refused, in a sandboxed frame for
//! instance; pages opened from files share one store, so that the key is our own.

use web_sys::Storage;

/// Where the study is kept.
const KEY: &str = "kelvinclock.study";

fn store() -> Option<Storage> {
    web_sys::window()?.local_storage().ok().flatten()
}

/// Whether anything can be kept.
pub fn is_allowed() -> bool {
    store().is_some()
}

/// The time of day at which a study was kept, and its text.
pub fn read() -> Option<(String, String)> {
    let kept = store()?.get_item(KEY).ok().flatten()?;
    let (time, text) = kept.split_once('\n')?;
    Some((time.to_owned(), text.to_owned()))
}

/// Keeps a study; false where the browser refuses.
pub fn write(time: &str, text: &str) -> bool {
    store().is_some_and(|store| store.set_item(KEY, &format!("{time}\n{text}")).is_ok())
}

/// Keeps nothing any more.
pub fn forget() {
    if let Some(store) = store() {
        // What cannot be removed will be overwritten.
        let _ = store.remove_item(KEY);
    }
}

/// The time of day as "14:02", as clocks on the wall show it.
pub fn time_of_day() -> String {
    let now = js_sys::Date::new_0();
    format!("{:02}:{:02}", now.get_hours(), now.get_minutes())
}
