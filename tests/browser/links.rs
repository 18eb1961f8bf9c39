//! Studies that travel in the page's address: opened, followed, copied, damaged, embedded.

use std::time::Duration;

use serde_json::{Value, json};

use crate::frames::embedded_by_text;
use crate::page::{Page, address, built_page, with_page, write_page};
use crate::worksheet::{RATES, cell, energy_of};

/// The first number of Found.
const ENERGY: &str = ".number .value";

/// A study of some rates with one question.
fn study(text: &str) -> Value {
    json!({
        "kelvinclock": 1,
        "title": "Hardener, travelling",
        "measured": {"form": "rates", "text": text},
        "asked": [{
            "question": "time-to-extent",
            "temperature": {"value": 25, "unit": "°C"},
            "gone": {"value": 5, "unit": "%"}
        }]
    })
}

/// The same rates, the last one doubled.
fn corrected() -> String {
    RATES.replace("0.275", "0.550")
}

/// An empty page to leave the built one for.
fn between() -> std::path::PathBuf {
    write_page("between.html", "<!doctype html>")
}

impl Page {
    /// A text as links carry it, packed apart from the page's own program.
    async fn packed(&self, text: &str) -> String {
        let script = "const [text] = arguments;
            const stream = new Blob([text]).stream().pipeThrough(new CompressionStream('deflate-raw'));
            return new Response(stream).arrayBuffer().then((buffer) => {
              let letters = '';
              for (const byte of new Uint8Array(buffer)) letters += String.fromCharCode(byte);
              return btoa(letters).replaceAll('+', '-').replaceAll('/', '_').replaceAll('=', '');
            });";
        self.run(script, vec![json!(text)]).await.as_str().unwrap().to_owned()
    }

    /// Opens the page anew: another fragment alone would not load it again.
    async fn open_anew(&self, fragment: &str) {
        self.visit(&between(), "").await;
        self.open(fragment).await;
    }

    async fn hash(&self) -> String {
        self.run("return location.hash;", Vec::new()).await.as_str().unwrap().to_owned()
    }

    async fn kept_text(&self) -> Value {
        self.run("return localStorage.getItem('kelvinclock.study');", Vec::new()).await
    }

    /// Presses "Copy the link" and returns what is copied.
    async fn copied_link(&self) -> String {
        let script = "window.copied = '';
            navigator.clipboard.writeText = async (text) => { window.copied = text; };";
        self.run(script, Vec::new()).await;
        self.press("Copy the link").await;
        self.text_with(".kept", "The link is copied").await;
        self.run("return window.copied;", Vec::new()).await.as_str().unwrap().to_owned()
    }
}

#[test]
fn a_study_in_the_address_wins_over_the_kept_one_and_leaves_it_alone() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(RATES).await;
        page.text_with(".kept", "Kept in this browser").await;
        let kept = page.kept_text().await;
        let packed = page.packed(&study(&corrected()).to_string()).await;

        page.open_anew(&format!("study={packed}")).await;
        page.text_with(ENERGY, &energy_of(&corrected())).await;
        page.text_with(".kept", "Opened from a link").await;
        // What is changed goes into the address, and is there after loading again.
        let again = corrected().replace("0.0184", "0.0200");
        page.retype(&cell("k, 1/h", 2), "0.0200").await;
        page.text_with(ENERGY, &energy_of(&again)).await;
        let mut moved = page.hash().await;
        while moved == format!("#study={packed}") {
            tokio::time::sleep(Duration::from_millis(50)).await;
            moved = page.hash().await;
        }
        assert_eq!(page.kept_text().await, kept);
        page.run("location.reload();", Vec::new()).await;
        page.text_with(".kept", "Opened from a link").await;
        page.text_with(ENERGY, &energy_of(&again)).await;

        page.open_anew("").await;
        page.text_with(".kept", "Restored from").await;
        page.text_with(ENERGY, &energy_of(RATES)).await;
    });
}

#[test]
fn a_copied_link_opens_the_same_study() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(&corrected()).await;
        page.retype(".title input", "Härter, 5 °C → 25 °C").await;
        let saved = page.save().await;
        let link = page.copied_link().await;
        let (file, packed) = link.split_once("#study=").unwrap();
        assert_eq!(file, address(&built_page()));
        assert!(
            packed.chars().all(|letter| letter.is_ascii_alphanumeric() || "-_".contains(letter))
        );
        page.open_anew(&format!("study={packed}")).await;
        page.text_with(".kept", "Opened from a link").await;
        assert_eq!(page.save().await, saved);
    });
}

#[test]
fn another_study_in_the_address_is_opened_and_undone() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(RATES).await;
        page.text_with(ENERGY, &energy_of(RATES)).await;
        let packed = page.packed(&study(&corrected()).to_string()).await;
        // At once, before the pause after which a study is kept.
        page.retype(".title input", "Not to be lost").await;
        let script = "location.hash = arguments[0];";
        page.run(script, vec![json!(format!("study={packed}"))]).await;
        page.text_with(".kept", "The study of the link is opened").await;
        page.text_with(ENERGY, &energy_of(&corrected())).await;
        assert!(page.kept_text().await.as_str().unwrap().contains("Not to be lost"));
        page.press("Undo").await;
        page.text_with(ENERGY, &energy_of(RATES)).await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn a_damaged_link_is_said_and_the_page_opens_as_usual() {
    with_page(async |page| {
        page.open("").await;
        let whole = page.packed(&study(RATES).to_string()).await;
        let nothing = page.packed(&format!("{{}}{}", " ".repeat(60_000_000))).await;
        let other = page.packed("{\"title\": \"x\"}").await;
        for (packed, said) in [
            ("", "cut short or changed"),
            ("%C3%A9*", "cut short or changed"),
            (&whole[..whole.len() / 2], "cut short or changed"),
            (&whole[1..], "cannot be read"),
            (&nothing, "longer than any study"),
            (&other, "The link holds something else."),
        ] {
            page.open_anew(&format!("study={packed}")).await;
            page.text_with(".kept", said).await;
            page.text_with(".kept", "The page opened as usual").await;
            page.text_with(".welcome", "invented example").await;
        }
        // In a page that is open already nothing is lost either.
        page.start_with(RATES).await;
        page.run("location.hash = 'study=AAAA';", Vec::new()).await;
        page.text_with(".kept", "The study in the link cannot be read").await;
        page.text_with(ENERGY, &energy_of(RATES)).await;
        page.text_with(".kept", "Kept in this browser").await;
        page.assert_quiet(&[&built_page(), &between()]).await;
    });
}

#[test]
fn a_study_too_long_for_a_link_is_advised_to_be_a_file() {
    let mut text = String::from("T/°C\tk, 1/h\n");
    for row in 0..600 {
        // Digits that do not repeat, lest they pack well.
        let noise = (f64::from(row) * 12.9898).sin() * 43758.5453;
        text.push_str(&format!(
            "{}\t{:.9}\n",
            50 + row % 30,
            0.02 + 0.001 * (noise - noise.floor())
        ));
    }
    with_page(async |page| {
        page.open("").await;
        page.start_with(&text).await;
        let link = page.copied_link().await;
        assert!(link.len() > 2_000);
        page.text_with(".kept", "some programs cut links").await;
        let packed = link.split_once("#study=").unwrap().1;
        page.open_anew(&format!("study={packed}")).await;
        page.text_with(".kept", "Opened from a link").await;
        page.retype(".title input", "Longer still").await;
        page.text_with(".kept", "too long for the page’s address").await;
        assert_eq!(page.hash().await, format!("#study={packed}"));
    });
}

/// A wiki page with frames of the built page, each with its fragment; it notes what they tell.
fn host(name: &str, fragments: &[String]) -> std::path::PathBuf {
    let source = address(&built_page());
    let frame = |fragment: &String| {
        format!(
            "<iframe sandbox=\"allow-scripts allow-same-origin\" width=\"600\" height=\"500\" src=\"{source}#{fragment}\"></iframe>"
        )
    };
    let frames: String = fragments.iter().map(frame).collect();
    let script = "window.told = []; addEventListener('message', (event) => told.push(event.data));";
    write_page(name, &format!("<!doctype html><script>{script}</script>{frames}"))
}

#[test]
fn two_frames_on_a_page_share_nothing() {
    with_page(async |page| {
        page.open("").await;
        let mut fragments = Vec::new();
        for text in [RATES.to_owned(), corrected()] {
            fragments.push(format!("study={}", page.packed(&study(&text).to_string()).await));
        }
        let host = host("two-frames.html", &fragments);
        page.visit(&host, "").await;
        page.enter_frame_of(0).await;
        page.text_with(ENERGY, &energy_of(RATES)).await;
        let changed = RATES.replace("0.0184", "0.0200");
        page.retype(&cell("k, 1/h", 2), "0.0200").await;
        page.text_with(ENERGY, &energy_of(&changed)).await;
        tokio::time::sleep(Duration::from_millis(1000)).await;
        page.text_with(".kept", "Not saved here (inside a frame)").await;
        assert_eq!(page.hash().await, format!("#{}", fragments[0]));
        assert!(page.kept_text().await.is_null());
        page.leave_frame().await;
        page.enter_frame_of(1).await;
        page.text_with(ENERGY, &energy_of(&corrected())).await;
    });
}

#[test]
fn a_frame_shows_what_is_asked_for_and_can_be_locked() {
    with_page(async |page| {
        page.open("").await;
        let packed = page.packed(&study(RATES).to_string()).await;
        let wishes = ["view=answers&locked=1", "view=picture", "view=all&locked=1"];
        let fragments = wishes.map(|wish| format!("study={packed}&{wish}"));
        let host = host("views.html", &fragments);
        page.visit(&host, "").await;
        let seen = "return [...document.querySelectorAll(arguments[0])]
            .filter((one) => one.checkVisibility()).length;";
        let count =
            async |selector: &str| page.run(seen, vec![json!(selector)]).await.as_u64().unwrap();
        page.enter_frame_of(0).await;
        page.text_with(".asked .headline", "About 44\u{a0}h").await;
        assert_eq!(count("section[aria-labelledby=asked]").await, 1);
        assert_eq!(count("section, canvas, nav button").await, 1);
        assert_eq!(count(".sentence input").await, 2);
        let disabled = "return document.querySelector('.sentence input').matches(':disabled');";
        assert_eq!(page.run(disabled, Vec::new()).await, true);
        page.paste("body", &corrected(), "").await;
        page.drop_file("other.json", &study(&corrected()).to_string()).await;
        page.text_with(".asked .headline", "About 44\u{a0}h").await;
        page.leave_frame().await;

        page.enter_frame_of(1).await;
        page.text_with("figure", "The picture as a table").await;
        assert_eq!(count("canvas").await, 2);
        assert_eq!(count(".sentence, .number, .record, table.measured").await, 0);
        page.leave_frame().await;

        page.enter_frame_of(2).await;
        page.text_with(ENERGY, &energy_of(RATES)).await;
        assert_eq!(count("section").await, 4);
        assert_eq!(count("fieldset :is(button, input, select):not(:disabled)").await, 0);
        // A true click: without one, browsers copy nothing in a frame.
        page.click("[aria-labelledby=record] .actions button:nth-of-type(2)").await;
        page.text_with(".kept", "The record is copied").await;
        page.assert_quiet(&[&host, &built_page()]).await;
    });
}

#[test]
fn a_frame_without_an_address_says_that_it_has_no_link() {
    let host = embedded_by_text("no-link.html", "");
    with_page(async |page| {
        page.visit(&host, "").await;
        page.enter_frame().await;
        page.started().await;
        page.press("Copy the link").await;
        page.text_with(".kept", "no address of its own").await;
        page.run("location.hash = 'study=AAAA';", Vec::new()).await;
        page.text_with(".kept", "cannot be read").await;
        page.assert_quiet(&[&host]).await;
    });
}
