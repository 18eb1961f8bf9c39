//! What is taken away from the page: the record, the pictures and the numbers.

use serde_json::{Value, json};

use crate::page::{Page, address, built_page, with_page, write_page};

impl Page {
    /// Notes downloads instead of starting them: name and address, and the text of a blob.
    async fn note_downloads(&self) {
        let script = "window.taken = [];
            const make = URL.createObjectURL;
            let blob = null;
            URL.createObjectURL = (one) => { blob = one; return make.call(URL, one); };
            HTMLAnchorElement.prototype.click = function () {
              const text = this.href.startsWith('blob:') ? blob.text() : Promise.resolve('');
              window.taken.push(text.then((text) => [this.download, this.href, text]));
            };";
        self.run(script, Vec::new()).await;
    }

    /// Presses a button and returns name, address and text of the file that it offers.
    async fn take(&self, words: &str) -> [String; 3] {
        self.press(words).await;
        let taken = self.run("return window.taken.at(-1);", Vec::new()).await;
        [0, 1, 2].map(|at| taken[at].as_str().unwrap().to_owned())
    }

    /// The width in pixels of a picture, once it is there.
    async fn width_of(&self, address: &str) -> u64 {
        let script = "const image = new Image();
            image.src = arguments[0];
            return image.decode().then(() => image.naturalWidth);";
        self.run(script, vec![json!(address)]).await.as_u64().unwrap()
    }
}

#[test]
fn the_record_is_copied_as_a_table() {
    with_page(async |page| {
        page.open("").await;
        let listen = "addEventListener('copy', (event) => {
            const get = (kind) => event.clipboardData.getData(kind);
            window.copied = [get('text/html'), get('text/plain')];
        });";
        page.run(listen, Vec::new()).await;
        let mut earlier = Value::Null;
        for _ in 0..2 {
            page.click("[aria-labelledby=record] .actions button:nth-of-type(3)").await;
            page.text_with(".kept", "copied as a table").await;
            let copied = page.run("return window.copied;", Vec::new()).await;
            let html = copied[0].as_str().unwrap();
            assert!(html.contains("<table") && html.contains("invented example"), "{html}");
            assert_eq!(copied[0], copied[1]);
            assert!(earlier.is_null() || earlier == copied, "the record is not the same twice");
            earlier = copied;
        }
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn pictures_are_offered_as_drawing_and_as_pixels() {
    with_page(async |page| {
        page.open("").await;
        page.note_downloads().await;
        let [name, svg, _] = page.take("Picture as SVG").await;
        assert_eq!(name, "glaze-hardener-batch-7-invented-example.law.svg");
        assert!(svg.starts_with("data:image/svg+xml,%3Csvg"), "{svg}");
        assert_eq!(page.width_of(&svg).await, 720);
        let [name, png, _] = page.take("Picture as PNG").await;
        assert!(name.ends_with(".law.png"), "{name}");
        assert!(png.starts_with("data:image/png;base64,"), "{name}");
        assert_eq!(page.width_of(&png).await, 2160);
        // The same whatever the window and its colours.
        page.appear(400, 800, true).await;
        assert_eq!(page.take("Picture as SVG").await[1], svg);
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn runs_and_answers_are_offered_for_spreadsheets() {
    with_page(async |page| {
        page.open("").await;
        page.note_downloads().await;
        let [name, _, runs] = page.take("Runs as CSV").await;
        assert!(name.ends_with(".runs.csv"), "{name}");
        assert_eq!(runs.lines().count(), 7);
        assert!(runs.contains("\"50 °C\",2,323.15,"), "{runs}");
        page.pick("Decimal sign of what is shown", ",").await;
        let [_, _, runs] = page.take("Runs as CSV").await;
        assert!(runs.contains("\"50 °C\";2;323,15;"), "{runs}");
        let [name, _, answers] = page.take("Answers as CSV").await;
        assert!(name.ends_with(".answers.csv"), "{name}");
        assert!(answers.contains("1;\"At 25 °C, how long until 5 % is gone?\";"), "{answers}");
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn in_a_frame_without_downloads_all_is_shown_to_be_taken_by_hand() {
    let source = address(&built_page());
    let host = write_page(
        "record-sandbox.html",
        &format!(
            "<!doctype html><iframe sandbox=\"allow-scripts\" src=\"{source}\" width=\"700\" \
             height=\"700\"></iframe>"
        ),
    );
    with_page(async |page| {
        page.visit(&host, "").await;
        page.enter_frame().await;
        page.started().await;
        for kind in ["SVG", "PNG"] {
            page.press(&format!("Picture as {kind}")).await;
            page.element("img#law").await;
            let script = "return document.querySelector('#law').decode().then(() => true);";
            assert_eq!(page.run(script, Vec::new()).await, true);
        }
        page.press("Close").await;
        page.press("Runs as CSV").await;
        page.text_with("[aria-labelledby=record] .paste", "forbids downloads").await;
        assert!(page.value("#record-text").await.contains("323.15"));
        page.assert_quiet(&[&host, &built_page()]).await;
    });
}

#[test]
fn a_limit_covers_a_batch_or_the_mean_and_the_thermometer_has_its_share() {
    with_page(async |page| {
        page.open("").await;
        // With errors as they are stated, batches scatter no more than those say.
        page.pick("Where the intervals come from", "from-residuals").await;
        let limit = ".asked > li:nth-of-type(2) .headline";
        let batch = page.text_with(limit, "for a single batch").await;
        page.pick("Question 2: whom the limit covers", "mean").await;
        let mean = page.text_with(limit, "for the mean of many batches").await;
        assert_ne!(batch.split(" for ").next(), mean.split(" for ").next());
        let saved: Value = serde_json::from_str(&page.save().await).unwrap();
        assert_eq!(saved["asked"][1]["bound"], "mean");
        page.pick("Question 2: whom the limit covers", "").await;
        page.text_with(limit, "for a single batch").await;
        page.run("document.querySelector('.more').open = true;", Vec::new()).await;
        page.retype("#thermometer-offset", "0.5 K").await;
        page.text_with(".asked .stands", "if the thermometer is off by as much as stated").await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn where_to_measure_next_is_asked_for_a_question_that_may_move() {
    with_page(async |page| {
        page.open("").await;
        page.pick("Ask something else", "next-measurement").await;
        page.text_with(".asked > li:nth-of-type(4) .headline", "Measure at").await;
        assert_eq!(page.value("#question-3-for").await, "1");
        page.press("move down").await;
        page.element("#question-1-gone").await;
        assert_eq!(page.value("#question-3-for").await, "2");
        // An optional blank can be emptied, and the answer does without.
        page.run("document.querySelector('#question-3-within').focus();", Vec::new()).await;
        page.retype("#question-3-within", "\u{e003}").await;
        page.leave().await;
        page.text_with(".asked > li:nth-of-type(4) .headline", "Measure at").await;
        let saved: Value = serde_json::from_str(&page.save().await).unwrap();
        assert_eq!(saved["asked"][3]["within"], Value::Null);
        assert_eq!(saved["asked"][3]["for"], 1);
        page.assert_quiet(&[&built_page()]).await;
    });
}
