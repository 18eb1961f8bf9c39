//! Files: reading those that are chosen or dropped, and offering texts and pictures as such.

use js_sys::{Array, Uint8Array};
use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use wasm_bindgen_futures::JsFuture;
use web_sys::{
    Blob, BlobPropertyBag, File, HtmlAnchorElement, TextDecoder, TextDecoderOptions, Url,
};

/// A larger file is no table of rates.
const MOST_BYTES: f64 = 50_000_000.0;

/// The text of a file, whatever a spreadsheet program encoded it in.
///
/// # Errors
/// Why it could not be read, as the end of a sentence.
pub async fn text_of(file: &File) -> Result<String, String> {
    if file.size() > MOST_BYTES {
        return Err("it has more than 50 MB; expected a table or a saved study".to_owned());
    }
    let buffer = JsFuture::from(file.array_buffer())
        .await
        .map_err(|_| "the browser could not read it".to_owned())?;
    let bytes = Uint8Array::new(&buffer);
    decoded(&bytes).ok_or_else(|| "it is not text".to_owned())
}

/// UTF-16 by its mark, UTF-8 where that fits, else the usual encoding of older programs.
fn decoded(bytes: &Uint8Array) -> Option<String> {
    let (first, second) = (bytes.get_index(0), bytes.get_index(1));
    let encodings: &[&str] = match (bytes.length(), first, second) {
        (2.., 0xff, 0xfe) => &["utf-16le"],
        (2.., 0xfe, 0xff) => &["utf-16be"],
        _ => &["utf-8", "windows-1252"],
    };
    let text = encodings.iter().find_map(|encoding| {
        let options = TextDecoderOptions::new();
        options.set_fatal(true);
        let decoder = TextDecoder::new_with_label_and_options(encoding, &options).ok()?;
        decoder.decode_with_js_u8_array(bytes).ok()
    })?;
    // Pictures and archives hold zeros, texts do not.
    (!text.contains('\0')).then_some(text)
}

/// Offers a text as a file of a kind such as `text/csv`. A sandboxed frame may drop it without a
/// word.
pub fn download(name: &str, kind: &str, text: &str) {
    // Where a browser cannot, the text can still be copied.
    let _ = try_download(name, kind, text);
}

fn try_download(name: &str, kind: &str, text: &str) -> Option<()> {
    let options = BlobPropertyBag::new();
    options.set_type(kind);
    let parts = Array::of1(&JsValue::from_str(text));
    let blob = Blob::new_with_str_sequence_and_options(&parts, &options).ok()?;
    let address = Url::create_object_url_with_blob(&blob).ok()?;
    follow(name, &address);
    // The download has its own hold on the blob once it began.
    let revoke = Closure::once_into_js(move || Url::revoke_object_url(&address));
    web_sys::window()?
        .set_timeout_with_callback_and_timeout_and_arguments_0(revoke.unchecked_ref(), 20_000)
        .ok()?;
    Some(())
}

/// Offers what an address holds as a file; likewise.
pub fn follow(name: &str, address: &str) {
    let document = web_sys::window().and_then(|window| window.document());
    let link = document.and_then(|document| document.create_element("a").ok());
    if let Some(link) = link.and_then(|link| link.dyn_into::<HtmlAnchorElement>().ok()) {
        link.set_href(address);
        link.set_download(name);
        link.click();
    }
}
