//! The page as one saved file: it starts, alone and in silence.

use crate::page::{built_page, with_page, write_page};

#[test]
fn the_page_starts_from_disk_without_error_or_request() {
    with_page(async |page| {
        page.open("").await;
        assert_eq!(page.started().await, env!("CARGO_PKG_VERSION"));
        let starting = page.run("return document.getElementById('starting');", Vec::new()).await;
        assert!(starting.is_null(), "the sentence about starting is still there");
        assert_ne!(page.text("body").await.trim(), "");
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn the_policy_refuses_connections_and_foreign_scripts() {
    with_page(async |page| {
        page.open("").await;
        let refused = page
            .run(
                "return fetch('http://127.0.0.1:9/').then(() => 'fetched', () => 'refused');",
                Vec::new(),
            )
            .await;
        assert_eq!(refused, "refused");
        page.run(
            "const script = document.createElement('script');
             script.textContent = 'document.title = \"changed\"';
             document.body.append(script);",
            Vec::new(),
        )
        .await;
        let title = page.run("return document.title;", Vec::new()).await;
        assert!(title.as_str().unwrap().contains("Kelvinclock"), "{title}");
        let errors = page.errors().await;
        assert!(errors.iter().any(|error| error.contains("connect-src")), "{errors:#?}");
        assert!(errors.iter().any(|error| error.contains("script-src")), "{errors:#?}");
    });
}

#[test]
fn without_what_it_needs_the_page_says_so() {
    let whole = std::fs::read_to_string(built_page()).unwrap();
    // The page's own policy refuses a script that would take this away, so
    // it is taken out of this copy.
    let (before, rest) = whole.split_once("<meta http-equiv=").unwrap();
    let (_, after) = rest.split_once('>').unwrap();
    let copy = format!("<script>delete globalThis.WebAssembly</script>{before}{after}");
    let assembly = write_page("no-assembly.html", &copy);
    with_page(async |page| {
        page.visit(&assembly, "").await;
        page.text_with("[role=alert]", "WebAssembly is switched off").await;
    });
}
