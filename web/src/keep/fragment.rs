//! The study in the page's own address, after `#`: packed by the browser's deflate, in letters
//! that addresses may hold.

use js_sys::{Array, Function, Reflect, Uint8Array};
use wasm_bindgen::{JsCast, JsValue};
use wasm_bindgen_futures::JsFuture;
use web_sys::{Blob, ReadableStreamDefaultReader, ReadableWritablePair, Window};

/// A study that unpacks to more is none: a short link can hold gigabytes of nothing.
const MOST_BYTES: usize = 20_000_000;

/// What an embedding page wants to be seen.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum View {
    /// The whole page.
    #[default]
    All,
    /// The questions with their answers.
    Answers,
    /// The pictures.
    Picture,
}

impl View {
    /// As it is written in an address.
    pub const fn code(self) -> &'static str {
        match self {
            Self::All => "all",
            Self::Answers => "answers",
            Self::Picture => "picture",
        }
    }
}

/// What the page's address says: `#study=…&view=answers&locked=1`.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Fragment {
    /// The study, packed; none where there is none.
    pub packed: Option<String>,
    /// What is to be seen.
    pub view: View,
    /// Whether nothing can be changed.
    pub is_locked: bool,
}

impl Fragment {
    /// That of the page as it is now.
    pub fn now() -> Self {
        let hash = web_sys::window().and_then(|window| window.location().hash().ok());
        Self::parse(&hash.unwrap_or_default())
    }

    /// Reads what follows `#`; what is not known is passed over.
    fn parse(hash: &str) -> Self {
        let mut fragment = Self::default();
        for part in hash.trim_start_matches('#').split('&') {
            match part.split_once('=').unwrap_or((part, "")) {
                ("study", packed) => fragment.packed = Some(packed.to_owned()),
                ("view", code) => {
                    let known = [View::All, View::Answers, View::Picture];
                    let view = known.into_iter().find(|view| view.code() == code);
                    fragment.view = view.unwrap_or_default();
                }
                ("locked", value) => fragment.is_locked = value == "1",
                _ => {}
            }
        }
        fragment
    }

    /// As it follows `#`.
    fn text(&self) -> String {
        let mut text = format!("study={}", self.packed.as_deref().unwrap_or_default());
        if self.view != View::default() {
            text.push_str("&view=");
            text.push_str(self.view.code());
        }
        if self.is_locked {
            text.push_str("&locked=1");
        }
        text
    }

    /// Puts it into the page's address, in place of what is there; false where that is refused,
    /// in a frame that has no address for instance.
    pub fn put(&self) -> bool {
        let history = web_sys::window().and_then(|window| window.history().ok());
        let address = format!("#{}", self.text());
        history.is_some_and(|history| {
            history.replace_state_with_url(&JsValue::NULL, "", Some(&address)).is_ok()
        })
    }
}

/// The address of the page with a packed study in it; none where the page has no address.
pub fn link(packed: &str) -> Option<String> {
    let address = web_sys::window()?.location().href().ok()?;
    let page = address.split('#').next().unwrap_or_default();
    let known = ["http:", "https:", "file:"];
    known.iter().any(|scheme| page.starts_with(scheme)).then(|| format!("{page}#study={packed}"))
}

/// Packs a text; none where the browser cannot.
pub async fn pack(text: String) -> Option<String> {
    let parts = Array::of1(&JsValue::from_str(&text));
    let blob = Blob::new_with_str_sequence(&parts).ok()?;
    let bytes = through(&blob, "CompressionStream").await.ok()?;
    let letters: String = bytes.into_iter().map(char::from).collect();
    Some(
        web_sys::window()?
            .btoa(&letters)
            .ok()?
            .replace('+', "-")
            .replace('/', "_")
            .replace('=', ""),
    )
}

/// Unpacks a text.
///
/// # Errors
/// Why it cannot, as the end of a sentence.
pub async fn unpack(packed: &str) -> Result<String, &'static str> {
    const DAMAGED: &str = "it was cut short or changed on its way";
    let letters = packed.replace('-', "+").replace('_', "/");
    let unlettered = |window: Window| window.atob(&letters).ok();
    let letters = web_sys::window().and_then(unlettered).ok_or(DAMAGED)?;
    let bytes: Option<Vec<u8>> = letters.chars().map(|letter| u8::try_from(letter).ok()).collect();
    let bytes = Uint8Array::from(bytes.ok_or(DAMAGED)?.as_slice());
    let blob = Blob::new_with_u8_array_sequence(&Array::of1(&bytes)).map_err(|_| DAMAGED)?;
    match through(&blob, "DecompressionStream").await {
        Ok(bytes) => String::from_utf8(bytes).map_err(|_| DAMAGED),
        Err(Some(TooLong)) => Err("what it holds is longer than any study"),
        Err(None) => Err(DAMAGED),
    }
}

/// More came out than a study has.
struct TooLong;

/// What comes out of one of the browser's own streams that bytes are sent through; an error
/// without a reason where they do not fit it.
async fn through(blob: &Blob, name: &str) -> Result<Vec<u8>, Option<TooLong>> {
    let stream = stream(name).map_err(|_| None)?;
    let reader = blob.stream().pipe_through(&stream).get_reader();
    let reader: ReadableStreamDefaultReader = reader.unchecked_into();
    let mut bytes = Vec::new();
    loop {
        let next = JsFuture::from(reader.read()).await.map_err(|_| None)?;
        let chunk = Reflect::get(&next, &JsValue::from_str("value")).map_err(|_| None)?;
        let Ok(chunk) = chunk.dyn_into::<Uint8Array>() else { return Ok(bytes) };
        bytes.extend(chunk.to_vec());
        if bytes.len() > MOST_BYTES {
            // What is not read any more is not unpacked either.
            let _ = reader.cancel();
            return Err(Some(TooLong));
        }
    }
}

/// A stream by the name of what makes it.
fn stream(name: &str) -> Result<ReadableWritablePair, JsValue> {
    let make: Function = Reflect::get(&js_sys::global(), &name.into())?.dyn_into()?;
    let format = JsValue::from_str("deflate-raw");
    Ok(Reflect::construct(&make, &Array::of1(&format))?.unchecked_into())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_address_says_what_to_show() {
        let fragment = Fragment::parse("#study=q1Y-_w&view=answers&locked=1");
        assert_eq!(fragment.packed.as_deref(), Some("q1Y-_w"));
        assert_eq!((fragment.view, fragment.is_locked), (View::Answers, true));
        assert_eq!(Fragment::parse(&fragment.text()), fragment);
        assert_eq!(Fragment::parse("#view=picture").view, View::Picture);
    }

    #[test]
    fn what_is_not_known_in_an_address_is_passed_over() {
        for hash in ["", "#", "#asked", "#view=upside-down&locked=yes", "#&&=&"] {
            assert_eq!(Fragment::parse(hash), Fragment::default(), "{hash}");
        }
        assert_eq!(Fragment::parse("#study").packed.as_deref(), Some(""));
    }
}
