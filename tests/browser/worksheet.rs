//! The worksheet as a chemist uses it: paste, read, correct, ask, save, open.

use kinetics_core::study::{Study, evaluate};
use kinetics_core::wording::{self, Display};
use serde_json::{Value, json};

use crate::page::{Page, built_page, with_page};

/// Six invented rate constants with their errors.
pub const RATES: &str = "T/°C\tk, 1/h\ts(k)\n50\t0.0184\t0.0009\n55\t0.0332\t0.0017\n\
    60\t0.0547\t0.0027\n65\t0.0819\t0.0041\n70\t0.133\t0.0067\n78\t0.275\t0.0137\n";

/// A rate that doubles every ten degrees.
const OTHER_RATES: &str = "T/°C\tk, 1/h\n50\t1\n60\t2\n70\t4\n";

/// The first number of Found.
const ENERGY: &str = ".number .value";

/// The activation energy of a paste, as the core words it outside of any browser.
pub fn energy_of(text: &str) -> String {
    let mut study = Study::new();
    study.measured.text = text.to_owned();
    let energy = evaluate(&study).law.unwrap().activation_energy;
    let energy = wording::Number {
        value: energy.value,
        range: energy.low.zip(energy.high),
        origin: wording::Origin::Fitted,
    };
    wording::energy(energy, &Display::default()).value
}

/// The headline of an answer, likewise.
fn headline_of(text: &str, asked: Value) -> String {
    let mut study = Study::new();
    study.measured.text = text.to_owned();
    study.asked = vec![asked.as_object().unwrap().clone()];
    evaluate(&study).answers[0].wording.headline.clone()
}

/// A temperature as a study file has it.
fn celsius(value: f64) -> Value {
    json!({"value": value, "unit": "°C"})
}

/// A cell, by its column's name and its line.
pub fn cell(column: &str, line: usize) -> String {
    format!("input[aria-label='{column}, row {line}']")
}

/// The answer to a question, counted from 1.
pub fn answer(number: usize) -> String {
    format!(".asked > li:nth-of-type({number}) .headline")
}

impl Page {
    /// Clicks the button that reads so.
    pub async fn press(&self, words: &str) {
        let script = "const [words] = arguments;
            const buttons = [...document.querySelectorAll('button')];
            const button = buttons.find((one) => one.innerText.trim() === words);
            if (button === undefined || button.disabled) return false;
            button.click();
            return true;";
        assert_eq!(self.run(script, vec![json!(words)]).await, true, "no button {words:?}");
    }

    /// Replaces what stands in a field, as by typing.
    pub async fn retype(&self, selector: &str, text: &str) {
        let field = self.element(selector).await;
        self.run("document.querySelector(arguments[0]).select();", vec![json!(selector)]).await;
        field.send_keys(text).await.unwrap();
    }

    /// Leaves whatever has the focus.
    pub async fn leave(&self) {
        self.run("document.activeElement.blur();", Vec::new()).await;
    }

    /// What stands in a field.
    pub async fn value(&self, selector: &str) -> String {
        let script = "return document.querySelector(arguments[0])?.value ?? '';";
        self.run(script, vec![json!(selector)]).await.as_str().unwrap().to_owned()
    }

    /// Picks a line of a menu by its code.
    pub async fn pick(&self, label: &str, code: &str) {
        let script = "const [label, code] = arguments;
            const menu = document.querySelector(`select[aria-label='${label}']`);
            menu.value = code;
            menu.dispatchEvent(new Event('change', {bubbles: true}));";
        self.run(script, vec![json!(label), json!(code)]).await;
    }

    /// Saves the study and returns its text.
    pub async fn save(&self) -> String {
        // A headless browser has no place for files: the blob is caught on its way.
        let script = "const done = arguments[arguments.length - 1];
            const make = URL.createObjectURL;
            URL.createObjectURL = (blob) => { window.saved = blob; return make.call(URL, blob); };
            HTMLAnchorElement.prototype.click = function () { window.savedAs = this.download; };
            [...document.querySelectorAll('button')].find((b) => b.innerText === 'Save').click();
            return window.saved.text();";
        self.run(script, Vec::new()).await.as_str().unwrap().to_owned()
    }

    /// Drops a file on the page.
    pub async fn drop_file(&self, name: &str, text: &str) {
        let script = "const [name, text] = arguments;
            const data = new DataTransfer();
            data.items.add(new File([text], name));
            const drop = {dataTransfer: data, bubbles: true, cancelable: true};
            document.body.dispatchEvent(new DragEvent('drop', drop));";
        self.run(script, vec![json!(name), json!(text)]).await;
    }

    /// Starts with data of one's own.
    pub async fn start_with(&self, text: &str) {
        self.press("Start with your own data").await;
        self.paste("#paste", text, "").await;
    }

    /// Waits until an element of this name has the focus.
    pub async fn focused(&self, id: &str) {
        self.element(&format!("[id='{id}']:focus")).await;
    }

    /// How many elements there are.
    pub async fn count(&self, selector: &str) -> u64 {
        let script = "return document.querySelectorAll(arguments[0]).length;";
        self.run(script, vec![json!(selector)]).await.as_u64().unwrap()
    }
}

#[test]
fn the_first_opening_shows_an_evaluated_example() {
    with_page(async |page| {
        page.open("").await;
        page.text_with(".welcome", "invented example").await;
        page.text_with(ENERGY, "90\u{a0}kJ/mol").await;
        // Every number has its interval, ln A too.
        page.text_with(".number:nth-of-type(3) .limits", "(95\u{a0}%); moves with").await;
        page.text_with(&answer(1), "About 44\u{a0}h").await;
        page.text_with(&answer(2), "At most 2.6\u{a0}h").await;
        page.text_with(&answer(3), "About 86.6\u{a0}°C").await;
        page.text_with(".record", "invented example").await;
        assert_eq!(page.count(".use input:checked").await, 6);
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn paste_correct_ask_save_and_open() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(RATES).await;
        page.text_with(ENERGY, "90\u{a0}kJ/mol").await;
        page.text_with(&answer(1), "About 44\u{a0}h").await;

        page.retype(&cell("k, 1/h", 7), "0.550").await;
        page.text_with(ENERGY, &energy_of(&RATES.replace("0.275", "0.550"))).await;
        page.leave().await;
        page.press("Undo").await;
        page.text_with(ENERGY, "90\u{a0}kJ/mol").await;
        assert_eq!(page.value(&cell("k, 1/h", 7)).await, "0.275");

        page.pick("Ask something else", "speed-up").await;
        page.retype("#question-1-to", "70 °C").await;
        page.retype("#question-1-from", "50 °C").await;
        let asked = json!({"question": "speed-up", "to": celsius(70.0), "from": celsius(50.0)});
        page.text_with(&answer(2), &headline_of(RATES, asked)).await;
        page.text_with(".asked > li:nth-of-type(2) .stands", "inside the data").await;

        page.retype("#question-0-temperature", "5, 25, 40 °C").await;
        page.text_with(".asked > li:nth-of-type(1) .answers", "7.8\u{a0}h").await;
        assert_eq!(page.count(".answers tbody tr").await, 3);

        page.retype(".title input", "Hardener, second series").await;
        let saved = page.save().await;
        let name = page.run("return window.savedAs;", Vec::new()).await;
        assert_eq!(name, "hardener-second-series.kelvinclock.json");
        let study: Value = serde_json::from_str(&saved).unwrap();
        assert_eq!(study["kelvinclock"], 1);
        assert_eq!(study["measured"]["text"], RATES);
        assert_eq!(study["asked"][0]["temperature"][1]["value"], 25.0);

        page.press("Paste something else").await;
        page.paste("#paste", OTHER_RATES, "").await;
        page.text_with(ENERGY, &energy_of(OTHER_RATES)).await;
        page.drop_file("series.kelvinclock.json", &saved).await;
        page.text_with(ENERGY, "90\u{a0}kJ/mol").await;
        assert_eq!(page.value(".title input").await, "Hardener, second series");
        assert_eq!(page.save().await, saved);
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn what_was_read_can_be_changed_and_left_out() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(&RATES.replace("0.0819", "0.08l9")).await;
        page.text_with(".not-used", "Row 5, column 2").await;
        page.text_with("tr.note", "expected a number").await;
        assert_eq!(page.count("td.bad").await, 1);
        page.retype(&cell("k, 1/h", 5), "0.0819").await;
        page.leave().await;
        page.text_with(ENERGY, "90\u{a0}kJ/mol").await;
        assert_eq!(page.count("td.bad, .not-used:not([hidden])").await, 0);

        page.run("document.querySelector(\"input[aria-label^='use row 2']\").click();", Vec::new())
            .await;
        page.text_with(ENERGY, &energy_of(&RATES.replace("50\t0.0184\t0.0009\n", ""))).await;
        page.retype("#reason-0", "probe slipped").await;
        page.text_with(".record", "probe slipped").await;
        page.run("document.querySelector(\"input[aria-label^='use row 2']\").click();", Vec::new())
            .await;
        page.text_with(ENERGY, "90\u{a0}kJ/mol").await;

        page.pick("Unit of column 1", "K").await;
        page.text_with(".remarks", "K").await;
        page.pick("Unit of column 1", "°C").await;
        page.pick("What the errors are", "half-width-95").await;
        page.pick("Order of reaction", "2").await;
        page.text_with(".remarks .stop", "order").await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn two_rates_are_typed_into_an_empty_table() {
    with_page(async |page| {
        page.open("").await;
        page.press("Start with your own data").await;
        page.text_with(".nothing", "Nothing is measured yet").await;
        page.press("Type into an empty table").await;
        let next = "tr.next td:nth-child(2) input";
        page.retype(next, "50").await;
        page.write(&cell("T/°C", 2), "\t0.02\t").await;
        page.retype(next, "60").await;
        page.write(&cell("T/°C", 3), "\t0.06").await;
        page.text_with(ENERGY, "98\u{a0}kJ/mol").await;
        page.text_with(".number .limits", "no interval").await;
        page.pick("Ask something else", "longest-stand").await;
        page.text_with(".asked > li:nth-of-type(2) .refused", "nothing can be promised").await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn a_known_law_is_a_sentence() {
    with_page(async |page| {
        page.open("").await;
        page.press("State a known law").await;
        page.text_with(".nothing", "lacks its activation energy").await;
        for blank in ["#known-energy", "#known-rate", "#known-temperature"] {
            assert_eq!(page.value(blank).await, "");
        }
        page.retype("#known-energy", "80 ± 5 kJ/mol").await;
        page.retype("#known-rate", "0.02 ± 0.001 1/h").await;
        page.retype("#known-temperature", "50 °C").await;
        page.text_with(ENERGY, "80\u{a0}kJ/mol").await;
        page.text_with(&answer(1), "About 31\u{a0}h").await;
        page.retype("#known-energy", "80 furlongs").await;
        page.text_with(".law-sentence .expected", "Activation energy").await;
        assert_eq!(page.value("#known-energy").await, "80 furlongs");
        page.text_with(".nothing", "lacks its activation energy").await;
        page.retype("#known-energy", "80 ± 5").await;
        page.text_with(ENERGY, "80\u{a0}kJ/mol").await;
        page.leave().await;
        assert_eq!(page.value("#known-energy").await, "80 ± 5 kJ/mol");
        page.pick("Whether the activation energy was measured", "activation_energy").await;
        page.text_with(".record", "Assumed, not measured: activation_energy").await;
        page.assert_quiet(&[&built_page()]).await;
    });
}

#[test]
fn a_blank_that_cannot_be_read_keeps_what_was_typed() {
    with_page(async |page| {
        page.open("").await;
        page.retype("#question-0-temperature", "warm").await;
        page.leave().await;
        page.text_with(".asked .expected", "expected a temperature").await;
        assert_eq!(page.value("#question-0-temperature").await, "warm");
        // The old answer is no answer to what stands there now, also after another visit.
        page.text_with(".asked > li:nth-of-type(1) .refused", "Not answered.").await;
        page.text_with(".asked > li:nth-of-type(1) .refused", "“temperature” holds \"warm\"").await;
        assert_eq!(page.count(&answer(1)).await, 0);
        assert!(!page.text(".record").await.contains("44\u{a0}h"));
        page.text_with(".kept", "Kept in this browser at").await;
        page.run("location.reload();", Vec::new()).await;
        page.text_with(".asked .expected", "expected a temperature").await;
        assert_eq!(page.value("#question-0-temperature").await, "warm");
        page.retype("#question-0-temperature", "\u{e003}").await;
        page.text_with(".asked > li:nth-of-type(1) .refused", "“temperature” is empty").await;
        page.text_with(".asked .expected", "Expected a temperature").await;
        page.leave().await;
        page.retype("#question-0-temperature", "25 °C").await;
        page.text_with(&answer(1), "About 44\u{a0}h").await;
        page.leave().await;
        page.retype("#question-0-temperature", "40 °C").await;
        let gone = json!({"value": 5, "unit": "%"});
        let asked =
            json!({"question": "time-to-extent", "temperature": celsius(40.0), "gone": gone});
        page.text_with(&answer(1), &headline_of(RATES, asked)).await;
        page.leave().await;
        page.press("Undo").await;
        page.text_with(&answer(1), "About 44\u{a0}h").await;
        assert_eq!(page.value("#question-0-temperature").await, "25 °C");
    });
}

#[test]
fn questions_move_and_go() {
    with_page(async |page| {
        page.open("").await;
        page.click("#down-0").await;
        page.text_with(&answer(1), "At most 2.6\u{a0}h").await;
        page.text_with(&answer(2), "About 44\u{a0}h").await;
        page.click("button[aria-label='remove, question 1']").await;
        page.text_with(&answer(1), "About 44\u{a0}h").await;
        assert_eq!(page.count(".asked > li").await, 2);
        page.focused("remove-0").await;
        page.press("Undo").await;
        page.text_with(&answer(1), "At most 2.6\u{a0}h").await;
    });
}

#[test]
fn a_flag_is_dragged_and_its_blank_follows() {
    with_page(async |page| {
        page.open("").await;
        // Flags are found by feel: where the pointer would take hold of one.
        let script = "const map = document.querySelector('canvas.map');
            map.scrollIntoView({block: 'center'});
            const {left, top, width, height} = map.getBoundingClientRect();
            const send = (kind, x, y) => map.dispatchEvent(new PointerEvent(kind, {
              clientX: left + x, clientY: top + y, bubbles: true, cancelable: true, pointerId: 1,
            }));
            for (let y = 8; y < height; y += 8) {
              for (let x = 30; x < width; x += 8) {
                send('pointermove', x, y);
                if (map.classList.contains('movable')) {
                  send('pointerdown', x, y);
                  for (let step = 1; step <= 5; step += 1) send('pointermove', x + 10 * step, y);
                  send('pointerup', x + 50, y);
                  return true;
                }
              }
            }
            return false;";
        // The pictures are there once the page came to rest.
        page.element("canvas.map[aria-label]").await;
        assert_eq!(page.run(script, Vec::new()).await, true, "no flag on the map");
        page.press("Undo").await;
        let undone = page.value("#question-0-temperature").await;
        page.press("Redo").await;
        let moved = page.value("#question-0-temperature").await;
        assert_eq!(undone, "25 °C");
        let degrees: f64 = moved.trim_end_matches(" °C").parse().unwrap();
        assert!((26.0..45.0).contains(&degrees), "{moved}");
        let seconds = page.text(&answer(1)).await;
        assert!(!seconds.contains("44\u{a0}h"), "{seconds}");
        page.errors().await.is_empty().then_some(()).unwrap();
    });
}

#[test]
fn a_study_is_found_again_and_can_be_put_away() {
    with_page(async |page| {
        page.open("").await;
        page.start_with(RATES).await;
        page.retype(".title input", "Kept").await;
        // At once: what is not kept yet is kept on leaving.
        page.run("location.reload();", Vec::new()).await;
        page.text_with(".kept", "Restored from").await;
        assert_eq!(page.value(".title input").await, "Kept");
        page.press("Start clean").await;
        page.text_with(".welcome", "invented example").await;
        page.run("location.reload();", Vec::new()).await;
        page.text_with(".welcome", "invented example").await;
    });
}

#[test]
fn a_narrow_window_needs_no_scrolling_sideways() {
    with_page(async |page| {
        page.open("").await;
        for width in [360, 380, 600, 899, 900, 1280] {
            page.appear(width, 800, width % 2 == 0).await;
            let script = "return document.scrollingElement.scrollWidth;";
            let needed = page.run(script, Vec::new()).await.as_u64().unwrap();
            assert!(needed <= u64::from(width), "{needed} pixels needed where there are {width}");
        }
    });
}
