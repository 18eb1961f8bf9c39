//! What comes in badly: markup, broken studies, long lines, unknown units, frames that forbid.

use serde_json::{Value, json};

use crate::page::{address, built_page, with_page, write_page};
use crate::worksheet::{RATES, cell, energy_of};

#[test]
fn pasted_markup_stays_text() {
    let markup = "<img src=x onerror=\"document.title='changed'\">";
    with_page(async |page| {
        page.open("").await;
        page.start_with(&RATES.replace("0.0819", markup).replace("s(k)", "<b>s</b>")).await;
        page.text_with(".not-used", "<img src=x").await;
        page.retype(".title input", markup).await;
        page.retype("#question-0-temperature", markup).await;
        page.text_with(".asked .expected", "<img").await;
        page.text_with(".record", markup).await;
        assert_eq!(page.value(&cell("k, 1/h", 5)).await, markup);
        assert_eq!(page.count("#page img, #page b").await, 0);
        assert_eq!(page.run("return document.title;", Vec::new()).await, "Kelvinclock");
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn what_is_no_study_is_said_and_nothing_is_lost() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(RATES).await;
        for (text, said) in [
            ("{\"kelvinclock\": 1,", "not JSON"),
            ("{\"kelvinclock\": \"one\"}", "kelvinclock"),
            ("{}", "kelvinclock"),
        ] {
            page.drop_file("broken.kelvinclock.json", text).await;
            page.text_with(".kept", said).await;
            assert_eq!(page.value(&cell("k, 1/h", 7)).await, "0.275");
        }
        let picture = "\u{0}\u{1}PNG";
        page.drop_file("picture.png", picture).await;
        page.text_with(".kept", "“picture.png” was not opened").await;
        assert_eq!(page.value(&cell("k, 1/h", 7)).await, "0.275");
    });
}

#[test]
fn a_hostile_study_opens_with_its_problems_named() {
    let deep = (0..90).fold(json!(1), |inner, _| json!([inner]));
    let study = json!({
        "kelvinclock": 7,
        "title": "<script>document.title = 'changed'</script>",
        "note": 5,
        "later": deep,
        "measured": {
            "form": "rates",
            "text": format!("{RATES}\u{202e}80\t<b>\t\u{0}\n"),
            "columns": [{"role": "emperor"}, {"unit": "furlong"}],
            "decimal": ";",
            "excluded": [{"row": 99_999_999_999_u64, "reason": "</textarea><img src=x>"}],
            "initial_concentration": {"value": -1e300, "unit": "mol/L"}
        },
        "assumed": {"order": "none", "level": 7, "scatter": []},
        "display": {"decimal": "x", "temperature": "°Re"},
        "asked": [
            {"question": "time-to-extent", "temperature": [], "gone": {"value": 1e308, "unit": "%"}},
            {"question": "<img src=x onerror=alert(1)>"},
            {"question": "longest-stand", "temperature": "hot", "keep": {"value": "98"}},
            {"question": 12}
        ]
    });
    with_page(async |page| {
        page.open("").await;
        page.drop_file("hostile.json", &study.to_string()).await;
        page.text_with(".not-used", "emperor").await;
        assert_eq!(page.count(".asked > li").await, 4);
        page.text_with(".asked", "<img src=x").await;
        assert_eq!(page.count("#page img, #page script, #page b").await, 0);
        // What was not understood is saved again.
        let saved: Value = serde_json::from_str(&page.save().await).unwrap();
        assert_eq!(saved["later"], study["later"]);
        assert_eq!(saved["measured"]["columns"], study["measured"]["columns"]);
        assert_eq!(saved["asked"], study["asked"]);
        assert_eq!(page.run("return document.title;", Vec::new()).await, "Kelvinclock");
        page.press("Undo").await;
        page.text_with(".welcome", "invented example").await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn a_unit_that_is_none_is_asked_for() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(&RATES.replace("k, 1/h", "k, 1/furlong")).await;
        page.text_with(".asked > li .refused", "unit").await;
        page.pick("Unit of column 2", "1/h").await;
        page.text_with(".asked > li .headline", "About 44\u{a0}h").await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn a_line_of_five_megabytes_is_refused_in_words() {
    with_page(async |page| {
        page.open("").await;
        page.press("Start with your own data").await;
        let script = "const data = new DataTransfer();
            data.setData('text/plain', '7'.repeat(5000000));
            const paste = {clipboardData: data, bubbles: true, cancelable: true};
            document.getElementById('paste').dispatchEvent(new ClipboardEvent('paste', paste));";
        page.run(script, Vec::new()).await;
        page.text_with(".not-used", "Row 1").await;
        page.press("Undo").await;
        page.element("#paste").await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn a_hundred_thousand_rows_are_read_while_the_page_stays_alive() {
    with_page(async |page| {
        page.open("").await;
        page.press("Start with your own data").await;
        let script = "let text = 'T/°C\\tk, 1/h\\n';
            for (let row = 0; row < 100000; row += 1) {
              const celsius = 50 + (row % 281) / 10;
              const wobble = 1 + 0.04 * Math.sin(row * 1.7);
              const rate = 0.0184 * wobble * Math.exp(-10800 * (1 / (celsius + 273.15) - 1 / 323.15));
              text += celsius.toFixed(1) + '\\t' + rate.toPrecision(5) + '\\n';
            }
            const data = new DataTransfer();
            data.setData('text/plain', text);
            const paste = {clipboardData: data, bubbles: true, cancelable: true};
            document.getElementById('paste').dispatchEvent(new ClipboardEvent('paste', paste));";
        page.run(script, Vec::new()).await;
        page.text_with(".number .value", "kJ/mol").await;
        assert!(page.count("table.measured tr").await < 150);
        page.run("document.querySelector('.rows').scrollTop = 1e9;", Vec::new()).await;
        page.element(&cell("T/°C", 100_001)).await;
        assert!(page.count("table.measured tr").await < 150);
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn everything_works_in_a_frame_that_forbids_nearly_all() {
    let source = address(&built_page());
    let host = write_page(
        "worksheet-sandbox.html",
        &format!(
            "<!doctype html><iframe sandbox=\"allow-scripts\" src=\"{source}\" width=\"900\" \
             height=\"700\"></iframe><script>window.told = [];
             addEventListener('message', (event) => told.push(event.data));</script>"
        ),
    );
    let corrected = RATES.replace("0.275", "0.550");
    with_page(async |page| {
        page.visit(&host, "").await;
        page.enter_frame().await;
        page.started().await;
        page.text_with(".kept", "Not saved here").await;
        page.start_with(RATES).await;
        page.text_with(".number .value", "90\u{a0}kJ/mol").await;
        page.retype(&cell("k, 1/h", 7), "0.550").await;
        page.text_with(".number .value", &energy_of(&corrected)).await;
        page.press("Save").await;
        page.text_with(".paste", "forbids downloads").await;
        let saved = page.value("#study-text").await;
        let study: Value = serde_json::from_str(&saved).unwrap();
        assert!(study["measured"]["text"].as_str().unwrap().contains("0.550"));
        page.press("Close").await;
        page.press("Copy as text").await;
        page.text_with(".kept", "copied").await;
        page.press("Undo").await;
        page.text_with(".number .value", "90\u{a0}kJ/mol").await;
        page.paste("body", &saved, "").await;
        page.text_with(".number .value", &energy_of(&corrected)).await;
        page.assert_quiet(&[&host, &built_page()]).await;

        page.leave_frame().await;
        let told = page.run("return window.told;", Vec::new()).await;
        let told = told.as_array().unwrap();
        assert!(!told.is_empty());
        for message in told {
            let height = message["kelvinclock"]["height"].as_f64().unwrap();
            assert!(height > 500.0);
            assert_eq!(message.as_object().unwrap().len(), 1);
        }
    });
}
