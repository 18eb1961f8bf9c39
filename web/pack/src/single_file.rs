//! Assembling the page: one HTML file that carries its style, its program and
//! a policy which allows exactly these and no connection.

use std::io::Write;

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use flate2::Compression;
use flate2::write::GzEncoder;
use lzma_rust2::{LzmaOptions, LzmaWriter};
use sha2::{Digest, Sha256};

use crate::command::Failure;

/// The script that unpacks and starts the program.
const START: &str = include_str!("start.js");

/// The function with which it unpacks.
const UNLZMA: &str = include_str!("unlzma.js");

/// Where the start script takes that function, and the glue.
const UNLZMA_PLACE: &str = "/*{{unlzma}}*/";
const GLUE_PLACE: &str = "/*{{glue}}*/";

/// Largest file, in bytes: what a wiki takes and a slow line brings in seconds.
pub const LIMIT_BYTES: usize = 1_000_000;

/// Largest file as a server sends it compressed, in bytes.
pub const LIMIT_GZIPPED_BYTES: usize = 400_000;

/// What the file is made of.
#[derive(Debug, Clone, Copy)]
pub struct Parts<'a> {
    /// HTML with the places `{{policy}}`, `{{sources}}`, `{{style}}`,
    /// `{{wasm}}` and `{{script}}`, each once.
    pub template: &'a str,
    /// The style sheet.
    pub style: &'a str,
    /// What wasm-bindgen wrote for the target `no-modules`.
    pub glue: &'a str,
    /// The program.
    pub wasm: &'a [u8],
    /// The hash of the sources, in hexadecimal.
    pub sources: &'a str,
}

/// Puts the parts together.
///
/// # Errors
/// When the template lacks a place, repeats one, or has one that nothing fills.
pub fn assemble(parts: &Parts<'_>) -> Result<String, Failure> {
    let style = unix_lines(&parts.style.replace("</", "<\\/"));
    let script = START.replace(UNLZMA_PLACE, UNLZMA).replace(GLUE_PLACE, &inert(parts.glue));
    let script = unix_lines(&script);
    let policy = policy(&script, &style);
    let wasm = STANDARD.encode(packed(parts.wasm)?);
    fill(
        parts.template,
        &[
            ("policy", &policy),
            ("sources", parts.sources),
            ("style", &style),
            ("wasm", &wasm),
            ("script", &script),
        ],
    )
}

/// The size of the file as a server sends it, in bytes.
///
/// # Errors
/// Only when compression itself fails.
pub fn gzipped_bytes(page: &str) -> Result<usize, Failure> {
    let mut encoder = GzEncoder::new(Vec::new(), Compression::best());
    encoder
        .write_all(page.as_bytes())
        .and_then(|()| encoder.finish())
        .map(|bytes| bytes.len())
        .map_err(|error| Failure::new(format!("could not compress the page: {error}"), ""))
}

/// Fails when the file is larger than what the project allows itself.
///
/// # Errors
/// When a limit is exceeded.
pub fn check_sizes(bytes: usize, gzipped_bytes: usize) -> Result<(), Failure> {
    let remedy = "see what the latest change or dependency adds";
    for (size, limit, what) in
        [(bytes, LIMIT_BYTES, "the page"), (gzipped_bytes, LIMIT_GZIPPED_BYTES, "the gzipped page")]
    {
        if size > limit {
            return Err(Failure::new(
                format!("{what} has {size} bytes; at most {limit} are allowed"),
                remedy,
            ));
        }
    }
    Ok(())
}

/// Nothing but this script, this style, pictures that the page draws itself
/// and workers that it makes itself.
fn policy(script: &str, style: &str) -> String {
    format!(
        "default-src 'none'; script-src '{}' 'wasm-unsafe-eval'; style-src '{}'; \
         img-src data: blob:; worker-src blob:; connect-src 'none'; base-uri 'none'; \
         form-action 'none'",
        source_hash(script),
        source_hash(style),
    )
}

fn source_hash(text: &str) -> String {
    format!("sha256-{}", STANDARD.encode(Sha256::digest(text)))
}

/// An .lzma file, as `unlzma.js` reads it: a fifth smaller than what browsers unpack by themselves.
fn packed(bytes: &[u8]) -> Result<Vec<u8>, Failure> {
    // Code has no positions modulo a power of 2, and says much about the byte that comes next.
    let options = LzmaOptions { lc: 4, lp: 0, pb: 0, nice_len: 273, ..LzmaOptions::with_preset(9) };
    LzmaWriter::new_use_header(Vec::new(), &options, Some(bytes.len() as u64))
        .and_then(|mut writer| writer.write_all(bytes).and_then(|()| writer.finish()))
        .map_err(|error| Failure::new(format!("could not compress the program: {error}"), ""))
}

/// Writes the `<` of what an HTML parser would take for an end or a nested
/// beginning of the script as an escape, which strings, patterns and templates
/// read as `<`.
fn inert(script: &str) -> String {
    let lower = script.to_ascii_lowercase();
    let mut out = String::with_capacity(script.len());
    for (at, letter) in script.char_indices() {
        let rest = lower.get(at..).unwrap_or_default();
        if ["</script", "<script", "<!--"].iter().any(|start| rest.starts_with(start)) {
            out.push_str("\\x3C");
        } else {
            out.push(letter);
        }
    }
    out
}

/// An HTML parser turns every line end into `\n` before the browser hashes.
fn unix_lines(text: &str) -> String {
    text.replace("\r\n", "\n").replace('\r', "\n")
}

/// Fills each `{{name}}` of the template; what is filled in is not read again.
fn fill(template: &str, values: &[(&str, &str)]) -> Result<String, Failure> {
    let remedy = "mend web/index.html";
    let mut out = String::new();
    let mut filled = vec![0_usize; values.len()];
    let mut rest = template;
    while let Some((before, after)) = rest.split_once("{{") {
        let Some((name, after)) = after.split_once("}}") else {
            return Err(Failure::new("the template has a {{ without }}", remedy));
        };
        let Some(index) = values.iter().position(|(known, _)| *known == name) else {
            let what = format!("nothing fills the place {{{{{name}}}}} of the template");
            return Err(Failure::new(what, remedy));
        };
        out.push_str(before);
        out.push_str(values[index].1);
        filled[index] += 1;
        rest = after;
    }
    out.push_str(rest);
    for ((name, _), count) in values.iter().zip(filled) {
        if count != 1 {
            let what = format!("the template has the place {{{{{name}}}}} {count} times, not once");
            return Err(Failure::new(what, remedy));
        }
    }
    Ok(out)
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use std::io::Read;

    use lzma_rust2::LzmaReader;

    use super::*;

    const TEMPLATE: &str = "<meta content=\"{{policy}}\"><meta content=\"{{sources}}\">\
        <style>{{style}}</style><script id=\"wasm\">{{wasm}}</script><script>{{script}}</script>";

    fn parts(glue: &str) -> String {
        assemble(&Parts {
            template: TEMPLATE,
            style: "p { color: red }\r\n",
            glue,
            wasm: b"\0asm, {{style}} and so on",
            sources: "abc",
        })
        .unwrap()
    }

    fn between<'a>(text: &'a str, start: &str, end: &str) -> &'a str {
        text.split_once(start).unwrap().1.split_once(end).unwrap().0
    }

    #[test]
    fn the_program_comes_back_out() {
        let page = parts("let wasm_bindgen;");
        let packed = STANDARD.decode(between(&page, "id=\"wasm\">", "</script>")).unwrap();
        let mut wasm = Vec::new();
        let mut reader = LzmaReader::new_mem_limit(&packed[..], u32::MAX, None).unwrap();
        reader.read_to_end(&mut wasm).unwrap();
        assert_eq!(wasm, b"\0asm, {{style}} and so on");
    }

    #[test]
    fn the_policy_holds_the_hashes_of_what_stands_in_the_page() {
        let page = parts("let wasm_bindgen;");
        let script = between(&page, "<script>", "</script>");
        let style = between(&page, "<style>", "</style>");
        assert!(script.contains("let wasm_bindgen;"));
        assert_eq!(style, "p { color: red }\n");
        let policy = between(&page, "content=\"", "\"");
        assert_eq!(policy, super::policy(script, style));
        assert!(policy.starts_with("default-src 'none'; script-src 'sha256-"));
        assert!(!policy.contains("unsafe-inline"));
    }

    #[test]
    fn a_known_hash() {
        // printf 'alert(1)' | openssl dgst -sha256 -binary | base64
        assert_eq!(source_hash("alert(1)"), "sha256-bhHHL3z2vDgxUt0W3dWQOrprscmda2Y5pLsLg4GF+pI=");
    }

    #[test]
    fn glue_cannot_end_its_script() {
        let page = parts("const a = '</SCRIPT><script>', b = /<!--/, c = 'é</script x';");
        let script = between(&page, "<script>", "</script>");
        assert!(script.contains(
            "const a = '\\x3C/SCRIPT>\\x3Cscript>', b = /\\x3C!--/, c = 'é\\x3C/script x';"
        ));
        assert!(script.trim_end().ends_with("})();"));
    }

    #[test]
    fn the_start_script_has_one_place_for_each_part_and_is_itself_inert() {
        for place in [UNLZMA_PLACE, GLUE_PLACE] {
            assert_eq!(START.matches(place).count(), 1);
        }
        assert_eq!(inert(START), START);
        assert_eq!(inert(UNLZMA), UNLZMA);
    }

    #[test]
    fn templates_must_name_each_place_once() {
        let told = |template| fill(template, &[("a", "1")]).unwrap_err().what;
        assert_eq!(fill("x{{a}}y", &[("a", "{{a}}")]).unwrap(), "x{{a}}y");
        assert!(told("x").contains("{{a}} 0 times"));
        assert!(told("{{a}}{{a}}").contains("{{a}} 2 times"));
        assert!(told("{{b}}").contains("nothing fills the place {{b}}"));
        assert!(told("{{a").contains("without }}"));
    }

    #[test]
    fn sizes_beyond_the_limits_are_errors() {
        assert!(check_sizes(LIMIT_BYTES, LIMIT_GZIPPED_BYTES).is_ok());
        let told = check_sizes(LIMIT_BYTES + 1, 0).unwrap_err().what;
        assert!(told.contains("the page has 1000001 bytes"), "{told}");
        let told = check_sizes(0, LIMIT_GZIPPED_BYTES + 1).unwrap_err().what;
        assert!(told.contains("the gzipped page has 400001 bytes"), "{told}");
    }

    #[test]
    fn gzip_shrinks_what_repeats() {
        assert!(gzipped_bytes(&"kelvin".repeat(1000)).unwrap() < 200);
    }
}
