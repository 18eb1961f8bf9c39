//! What a new user tries in the first hour: clicking into cells, typing bare numbers, pasting a
//! column, and finding out what can be done.

use serde_json::{Value, json};

use crate::page::{Page, built_page, with_page};
use crate::worksheet::{RATES, answer};

impl Page {
    /// A number that a script returns.
    async fn number(&self, script: &str) -> f64 {
        self.run(script, Vec::new()).await.as_f64().unwrap()
    }
}

#[test]
fn a_click_into_a_cell_edits_it_and_one_on_a_mark_leaves_the_row_out() {
    with_page(async |page| {
        page.open("").await;
        for width in [1280, 380] {
            page.appear(width, 800, false).await;
            page.click("#cell-2-1").await;
            page.focused("cell-2-1").await;
            assert_eq!(page.count(".use input:checked").await, 6);
        }
        let widest = "return Math.max(...[...document.querySelectorAll('.use input')]
            .map((box) => box.getBoundingClientRect().width));";
        assert!(page.number(widest).await <= 32.0);
        page.text_with(".about-marks", "leave the row out").await;
        page.click("tr:has(#cell-2-1) .use").await;
        assert_eq!(page.count(".use input:checked").await, 5);
        let does =
            "return getComputedStyle(document.querySelector('.out .use'), '::after').content;";
        assert_eq!(page.run(does, Vec::new()).await, "\"take it back in\"");
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn a_bare_number_keeps_the_unit_of_its_blank() {
    with_page(async |page| {
        page.open("").await;
        let blank = "#question-0-temperature";
        page.retype(blank, "40").await;
        page.text_with(&answer(1), "About 7.8\u{a0}h").await;
        page.element(&format!(".blank[data-unit=' °C'] {blank}")).await;
        page.leave().await;
        assert_eq!(page.value(blank).await, "40 °C");
        page.retype(blank, "5, 25, 40").await;
        page.leave().await;
        assert_eq!(page.value(blank).await, "5, 25, 40 °C");
        assert_eq!(page.count(".answers tbody tr").await, 3);
        page.retype(blank, "25 c").await;
        page.leave().await;
        assert_eq!(page.value(blank).await, "25 °C");
        page.text_with(&answer(1), "About 44\u{a0}h").await;
        page.retype("#question-2-time", "24").await;
        page.leave().await;
        assert_eq!(page.value("#question-2-time").await, "24 h");
        assert_eq!(page.count(".blank[data-unit]").await, 0);
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn a_range_pasted_into_a_cell_fills_from_there() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(RATES).await;
        page.paste("#cell-1-1", "0.0331\n0.0551\n", "").await;
        assert_eq!(page.value("#cell-1-1").await, "0.0331");
        assert_eq!(page.value("#cell-2-1").await, "0.0551");
        assert_eq!(page.value("#cell-2-2").await, "0.0027");
        page.paste("#cell-5-0", "78\t0.276\t0.014\r\n85\t0.49\t0.02\r\n", "").await;
        assert_eq!(page.value("#cell-6-1").await, "0.49");
        assert_eq!(page.count(".use input:checked").await, 7);
        page.press("Undo").await;
        assert_eq!(page.value("#cell-5-1").await, "0.275");
        assert_eq!(page.count(".use input:checked").await, 6);
        page.press("Undo").await;
        assert_eq!(page.value("#cell-1-1").await, "0.0332");
        // A table with a heading of its own takes the place of the table.
        page.paste("#cell-1-1", "T/°C\tk, 1/h\n50\t1\n60\t2\n", "").await;
        assert_eq!(page.count(".use input:checked").await, 2);
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn own_data_begin_with_one_question_and_the_focus_where_one_goes_on() {
    with_page(async |page| {
        page.open("").await;
        page.press("Start with your own data").await;
        page.focused("paste").await;
        assert_eq!(page.count(".asked > li").await, 1);
        assert_eq!(page.value("#question-0-temperature").await, "25 °C");
        page.press("Type into an empty table").await;
        page.focused("cell-0-0").await;
        assert_eq!(page.count(".not-used:not([hidden])").await, 0);
        page.press("State a known law").await;
        page.focused("known-energy").await;
        page.click("#remove-0").await;
        page.focused("ask").await;
        let hints = "return [...document.querySelectorAll('.blank input')].every((blank) =>
            blank.value !== '' || /^e\\.g\\. |^why/.test(blank.placeholder));";
        assert_eq!(page.run(hints, Vec::new()).await, true);
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn what_arrives_is_called_what_it_is() {
    with_page(async |page| {
        page.open("").await;
        page.paste("body", "hello world", "").await;
        page.text_with(".kept", "no table: found “hello world”").await;
        page.text_with(".welcome", "invented example").await;
        page.drop_file("runs.csv", &RATES.replace(", 1/h", " / h^-1").replace('\t', ",")).await;
        page.text_with(".kept", "“runs.csv” is read").await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn heads_are_whole_and_what_scrolls_shows_it() {
    let five =
        "batch\tT/°C\tk, 1/h\ts(k)\tnote\nA\t50\t0.0184\t0.0009\tx\nB\t60\t0.0547\t0.0027\ty\n";
    // The room of a menu's words beside the room they need.
    let cut = "const pen = document.createElement('canvas').getContext('2d');
        return [...document.querySelectorAll('.measured th select')].filter((menu) => {
          const look = getComputedStyle(menu);
          pen.font = look.font;
          const sides = parseFloat(look.paddingLeft) + parseFloat(look.paddingRight);
          const words = menu.selectedOptions[0]?.text ?? '';
          return menu.clientWidth > 0
            && pen.measureText(words).width > menu.clientWidth - sides + 1;
        }).map((menu) => menu.selectedOptions[0].text);";
    with_page(async |page| {
        page.open("").await;
        page.start_with(five).await;
        for width in [1280, 380] {
            page.appear(width, 800, false).await;
            let cut = page.run(cut, Vec::new()).await;
            assert_eq!(cut, json!([]), "heads are cut at {width} pixels");
        }
        let beyond = "const rows = document.querySelector('.rows');
            return rows.scrollWidth - rows.clientWidth;";
        assert!(page.number(beyond).await > 0.0);
        let shade = "return getComputedStyle(document.querySelector('.rows')).backgroundImage;";
        assert!(page.run(shade, Vec::new()).await.as_str().unwrap().contains("gradient"));
    });
}

#[test]
fn laws_beside_the_line_are_named_and_explained() {
    with_page(async |page| {
        page.open("").await;
        page.start_with("T/°C\tk, 1/h\ts(k)\n50\t1\t0.1\n60\t2.4\t0.2\n70\t5.4\t0.5\n").await;
        page.text_with("[aria-labelledby=measured] figcaption", "the data do not exclude").await;
        for law in ["Eyring", "log-linear"] {
            page.element(&format!("canvas.law[aria-label*='{law}']")).await;
        }
        let none: Value = json!(0);
        page.press("Undo").await;
        let shown = "return [...document.querySelectorAll('[aria-labelledby=measured] figcaption')]
            .filter((caption) => !caption.hidden).length;";
        assert_eq!(page.run(shown, Vec::new()).await, none);
    });
}
