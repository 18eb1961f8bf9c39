//! The page as a test handles it: opening, pasting, asking, looking.

use std::fs;
use std::panic::{AssertUnwindSafe, catch_unwind, resume_unwind};
use std::path::{Path, PathBuf};
use std::time::Duration;

use fantoccini::elements::Element;
use fantoccini::{Client, Locator};
use serde_json::{Value, json};

use crate::driver::{Driver, Extension};

/// A test that waits longer than this hangs.
const LONGEST_TEST: Duration = Duration::from_secs(90);

/// Longest wait for something to appear.
const LONGEST_WAIT: Duration = Duration::from_secs(30);

/// A browser window with the means to drive the page in it.
pub struct Page {
    client: Client,
}

/// Gives the test a browser of its own and ends it afterwards, come what may.
pub fn with_page(test: impl AsyncFnOnce(&Page)) {
    let runtime = tokio::runtime::Builder::new_current_thread().enable_all().build().unwrap();
    let driver = Driver::start();
    let page = Page { client: runtime.block_on(driver.connect()) };
    let outcome = catch_unwind(AssertUnwindSafe(|| {
        runtime
            .block_on(async { tokio::time::timeout(LONGEST_TEST, test(&page)).await })
            .expect("the test should end")
    }));
    let closed = runtime.block_on(page.client.close());
    if let Err(panic) = outcome {
        resume_unwind(panic);
    }
    closed.unwrap();
}

/// The built page under test.
pub fn built_page() -> PathBuf {
    let committed = Path::new(env!("CARGO_MANIFEST_DIR")).join("../www-demo/kelvinclock.html");
    let path = std::env::var_os("KELVINCLOCK_PAGE").map_or(committed, PathBuf::from);
    path.canonicalize().unwrap_or_else(|error| {
        panic!("no page at {}: {error}; run `cargo pack build`", path.display())
    })
}

/// Writes a page of the test's own.
pub fn write_page(name: &str, html: &str) -> PathBuf {
    let path = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    fs::write(&path, html).unwrap();
    path
}

/// A path as the address of a file.
pub fn address(path: &Path) -> String {
    url::Url::from_file_path(path).unwrap().into()
}

impl Page {
    /// Opens the built page, with what follows `#` in its address, and waits
    /// until it has started.
    pub async fn open(&self, fragment: &str) {
        self.visit(&built_page(), fragment).await;
        self.started().await;
    }

    /// Opens any file.
    pub async fn visit(&self, path: &Path, fragment: &str) {
        let hash = if fragment.is_empty() { "" } else { "#" };
        self.client.goto(&format!("{}{hash}{fragment}", address(path))).await.unwrap();
    }

    /// Waits until the program has started, and returns its version.
    pub async fn started(&self) -> String {
        let html = self.element("html[data-version]").await;
        html.attr("data-version").await.unwrap().unwrap()
    }

    /// Steps into the first frame of the page.
    pub async fn enter_frame(&self) {
        self.enter_frame_of(0).await;
    }

    /// Steps into a frame of the page, counted from 0.
    pub async fn enter_frame_of(&self, number: u16) {
        self.element(&format!("iframe:nth-of-type({})", number + 1)).await;
        self.client.enter_frame(number).await.unwrap();
    }

    /// Steps back out of a frame.
    pub async fn leave_frame(&self) {
        self.client.enter_parent_frame().await.unwrap();
    }

    /// Waits for an element.
    pub async fn element(&self, selector: &str) -> Element {
        let wait = self.client.wait().at_most(LONGEST_WAIT);
        match wait.for_element(Locator::Css(selector)).await {
            Ok(element) => element,
            Err(error) => panic!("no {selector}: {error}\n{}", self.text("body").await),
        }
    }

    /// The visible text of an element.
    pub async fn text(&self, selector: &str) -> String {
        let found = self.client.find(Locator::Css(selector)).await.unwrap();
        found.text().await.unwrap()
    }

    /// Waits until an element's text contains `part`, and returns that text.
    pub async fn text_with(&self, selector: &str, part: &str) -> String {
        let script = "const place = document.querySelector(arguments[0]); \
            return place === null ? '' : place.innerText;";
        let mut text = String::new();
        let waited = tokio::time::timeout(LONGEST_WAIT, async {
            loop {
                text = self.run(script, vec![json!(selector)]).await.as_str().unwrap().to_owned();
                if text.contains(part) {
                    return;
                }
                tokio::time::sleep(Duration::from_millis(50)).await;
            }
        });
        let found = waited.await.is_ok();
        assert!(found, "{selector} never read {part:?} but {text:?}");
        text
    }

    /// Clicks an element.
    pub async fn click(&self, selector: &str) {
        self.element(selector).await.click().await.unwrap();
    }

    /// Types into an element.
    pub async fn write(&self, selector: &str, text: &str) {
        self.element(selector).await.send_keys(text).await.unwrap();
    }

    /// Pastes as from a spreadsheet: plain text and, unless empty, HTML.
    pub async fn paste(&self, selector: &str, text: &str, html: &str) {
        self.element(selector).await;
        let script = "const [selector, text, html] = arguments;
            const place = document.querySelector(selector);
            const data = new DataTransfer();
            data.setData('text/plain', text);
            if (html !== '') data.setData('text/html', html);
            place.focus();
            const paste = {clipboardData: data, bubbles: true, cancelable: true};
            place.dispatchEvent(new ClipboardEvent('paste', paste));";
        self.run(script, vec![json!(selector), json!(text), json!(html)]).await;
    }

    /// Runs a script in the page.
    pub async fn run(&self, script: &str, arguments: Vec<Value>) -> Value {
        self.client.execute(script, arguments).await.unwrap()
    }

    /// Sets the size of the window and the preferred colours.
    pub async fn appear(&self, width: u32, height: u32, dark: bool) {
        let size = json!({
            "width": width, "height": height, "deviceScaleFactor": 1, "mobile": false,
        });
        self.debug("Emulation.setDeviceMetricsOverride", size).await;
        let scheme = if dark { "dark" } else { "light" };
        let media = json!({"features": [{"name": "prefers-color-scheme", "value": scheme}]});
        self.debug("Emulation.setEmulatedMedia", media).await;
    }

    /// Writes a picture of the whole page, `width` pixels wide, as a PNG.
    pub async fn picture(&self, width: u32, dark: bool, out: &Path) {
        self.appear(width, 800, dark).await;
        let script = "return document.documentElement.scrollHeight;";
        let height = self.run(script, Vec::new()).await.as_u64().unwrap();
        self.appear(width, u32::try_from(height).unwrap(), dark).await;
        fs::write(out, self.client.screenshot().await.unwrap()).unwrap();
    }

    /// The errors on the console since the last call, of all frames.
    pub async fn errors(&self) -> Vec<String> {
        let log = self.client.issue_cmd(Extension::log("browser")).await.unwrap();
        let entries = log.as_array().unwrap();
        let severe = entries.iter().filter(|entry| entry["level"] == "SEVERE");
        severe.map(|entry| entry["message"].as_str().unwrap().to_owned()).collect()
    }

    /// The addresses that all frames asked for since the last call, but for
    /// what lies in the file itself (`data:`, `blob:`, `about:`).
    pub async fn requests(&self) -> Vec<String> {
        let log = self.client.issue_cmd(Extension::log("performance")).await.unwrap();
        let mut addresses = Vec::new();
        for entry in log.as_array().unwrap() {
            let event: Value = serde_json::from_str(entry["message"].as_str().unwrap()).unwrap();
            if event["message"]["method"] == "Network.requestWillBeSent" {
                let address = event["message"]["params"]["request"]["url"].as_str().unwrap();
                if !["data:", "blob:", "about:"].iter().any(|own| address.starts_with(own)) {
                    addresses.push(address.to_owned());
                }
            }
        }
        addresses
    }

    /// Fails if there was an error on the console, or a request for anything
    /// but these files.
    pub async fn assert_quiet(&self, files: &[&Path]) {
        let errors = self.errors().await;
        assert!(errors.is_empty(), "errors on the console: {errors:#?}");
        let known: Vec<String> = files.iter().map(|path| address(path)).collect();
        let mut requests = self.requests().await;
        requests.retain(|request| !known.iter().any(|file| request == file));
        assert!(requests.is_empty(), "the page asked for {requests:#?}");
    }

    async fn debug(&self, command: &str, parameters: Value) {
        self.client.issue_cmd(Extension::debugging(command, parameters)).await.unwrap();
    }
}
