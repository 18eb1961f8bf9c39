//! The page within frames: a wiki's sandbox, and wikis that forbid too much.

use crate::page::{address, built_page, with_page, write_page};

#[test]
fn the_page_starts_in_a_sandboxed_frame() {
    let source = address(&built_page());
    let host = write_page(
        "sandbox.html",
        &format!("<!doctype html><iframe sandbox=\"allow-scripts\" src=\"{source}\"></iframe>"),
    );
    with_page(async |page| {
        page.visit(&host, "").await;
        page.enter_frame().await;
        assert_eq!(page.started().await, env!("CARGO_PKG_VERSION"));
        assert_ne!(page.text("body").await.trim(), "");
        page.assert_quiet(&[&host, &built_page()]).await;
    });
}

/// A host page that embeds the file by its text, under a policy of its own.
pub fn embedded_by_text(name: &str, policy: &str) -> std::path::PathBuf {
    let text = std::fs::read_to_string(built_page()).unwrap();
    let text = text.replace('&', "&amp;").replace('"', "&quot;");
    let policy = if policy.is_empty() {
        String::new()
    } else {
        format!("<meta http-equiv=\"Content-Security-Policy\" content=\"{policy}\">")
    };
    write_page(
        name,
        &format!(
            "<!doctype html><meta charset=\"utf-8\">{policy}<iframe srcdoc=\"{text}\" width=\"900\"></iframe>"
        ),
    )
}

#[test]
fn the_page_starts_when_embedded_by_its_text() {
    let host = embedded_by_text("text.html", "");
    with_page(async |page| {
        page.visit(&host, "").await;
        page.enter_frame().await;
        assert_eq!(page.started().await, env!("CARGO_PKG_VERSION"));
        page.assert_quiet(&[&host]).await;
    });
}

#[test]
fn a_frame_that_forbids_assembly_is_told_about() {
    let host = embedded_by_text("no-assembly-here.html", "script-src 'unsafe-inline'");
    with_page(async |page| {
        page.visit(&host, "").await;
        page.enter_frame().await;
        let told = page.text_with("[role=alert]", "forbids WebAssembly").await;
        assert!(told.contains("iframe with src"), "{told}");
    });
}

#[test]
fn a_frame_that_forbids_scripts_is_told_about() {
    let host = embedded_by_text("no-scripts.html", "script-src 'none'; style-src 'none'");
    with_page(async |page| {
        page.visit(&host, "").await;
        page.enter_frame().await;
        let told = page.text_with("#starting", "forbids scripts").await;
        assert!(told.contains("iframe with src"), "{told}");
    });
}
