//! What the other tests rely on, tried on pages made for it: errors and
//! requests do show, and paste, keys, clicks, sizes and colours arrive.

use crate::page::{with_page, write_page};

#[test]
fn errors_and_requests_are_seen() {
    let noisy = write_page(
        "noisy.html",
        "<!doctype html><img src=\"http://elsewhere.invalid/picture.png\">\
         <script>console.error('oh dear')</script>",
    );
    with_page(async |page| {
        page.visit(&noisy, "").await;
        let errors = page.errors().await;
        assert!(errors.iter().any(|error| error.contains("oh dear")), "{errors:#?}");
        let requests = page.requests().await;
        let picture = "http://elsewhere.invalid/picture.png";
        assert!(requests.iter().any(|request| request == picture), "{requests:#?}");
    });
}

#[test]
fn paste_keys_and_clicks_arrive() {
    let sheet = write_page(
        "sheet.html",
        "<!doctype html><textarea></textarea><button>done</button><p></p><script>
         const [area, button, told] = document.body.children;
         area.onpaste = (event) => {
           event.preventDefault();
           const data = event.clipboardData;
           area.value = data.getData('text/plain') + '|' + data.getData('text/html');
         };
         button.onclick = () => { told.textContent = area.value; };
         </script>",
    );
    with_page(async |page| {
        page.visit(&sheet, "").await;
        page.paste("textarea", "50\t0.0021", "<td>50</td>").await;
        page.write("textarea", "!").await;
        page.click("button").await;
        page.text_with("p", "0.0021|<td>50</td>!").await;
        page.assert_quiet(&[&sheet]).await;
    });
}

#[test]
fn sizes_and_colours_are_taken() {
    let plain = write_page(
        "plain.html",
        "<!doctype html><style>body { margin: 0; height: 1200px }</style>",
    );
    let picture = plain.with_file_name("plain.png");
    with_page(async |page| {
        page.visit(&plain, "").await;
        let script = "return matchMedia('(prefers-color-scheme: dark)').matches;";
        page.appear(390, 700, true).await;
        assert_eq!(page.run(script, Vec::new()).await, true);
        assert_eq!(page.run("return innerWidth;", Vec::new()).await, 390);
        page.picture(500, false, &picture).await;
        assert_eq!(page.run(script, Vec::new()).await, false);
    });
    // The header of a PNG holds width and height.
    let png = std::fs::read(picture).unwrap();
    let number = |at: usize| u32::from_be_bytes(png[at..at + 4].try_into().unwrap());
    assert_eq!((number(16), number(20)), (500, 1200));
}
