//! A chromedriver of one's own for each test, and a Chromium behind it.

use std::io::{BufRead, BufReader};
use std::path::PathBuf;
use std::process::{Child, Command, Stdio};

use fantoccini::wd::WebDriverCompatibleCommand;
use fantoccini::{Client, ClientBuilder};
use hyper_util::client::legacy::connect::HttpConnector;
use serde_json::{Map, Value, json};

/// Headless, quiet, and with every name unknown: what the page would fetch
/// from elsewhere fails and shows.
const ARGUMENTS: [&str; 10] = [
    "--headless",
    "--no-sandbox",
    "--disable-gpu",
    "--disable-dev-shm-usage",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--no-first-run",
    "--hide-scrollbars",
    "--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE 127.0.0.1",
];

/// Names under which a Chromium may be installed.
const CHROMIUM_NAMES: [&str; 4] = ["chromium", "chromium-browser", "google-chrome", "chrome"];

/// A running chromedriver, which ends when dropped.
pub struct Driver {
    process: Child,
    port: u16,
    // Held open, since the driver may write to it at any time.
    _output: BufReader<std::process::ChildStdout>,
}

impl Driver {
    /// Starts chromedriver on a port that it chooses.
    pub fn start() -> Self {
        let mut process = Command::new("chromedriver")
            .arg("--port=0")
            .stdin(Stdio::null())
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .expect("chromedriver should be on the PATH; `cargo pack test` installs it");
        let mut output = BufReader::new(process.stdout.take().unwrap());
        let mut line = String::new();
        let port = loop {
            line.clear();
            assert!(output.read_line(&mut line).unwrap() > 0, "chromedriver told no port");
            let told = line.trim_end().trim_end_matches('.').rsplit_once("successfully on port ");
            if let Some((_, port)) = told {
                break port.parse().unwrap();
            }
        };
        Self { process, port, _output: output }
    }

    /// Opens a browser with an empty profile.
    pub async fn connect(&self) -> Client {
        let options = json!({"args": ARGUMENTS, "binary": chromium()});
        let logs = json!({"browser": "ALL", "performance": "ALL"});
        let capabilities = Map::from_iter([
            ("goog:chromeOptions".to_owned(), options),
            ("goog:loggingPrefs".to_owned(), logs),
        ]);
        ClientBuilder::new(HttpConnector::new())
            .capabilities(capabilities)
            .connect(&format!("http://127.0.0.1:{}", self.port))
            .await
            .unwrap()
    }
}

impl Drop for Driver {
    fn drop(&mut self) {
        let _ = self.process.kill();
        let _ = self.process.wait();
    }
}

fn chromium() -> PathBuf {
    let path = std::env::var_os("PATH").unwrap_or_default();
    CHROMIUM_NAMES
        .iter()
        .flat_map(|name| std::env::split_paths(&path).map(move |folder| folder.join(name)))
        .find(|program| program.is_file())
        .expect("a Chromium should be on the PATH; `cargo pack test` installs it")
}

/// A command beyond the WebDriver standard that chromedriver knows.
#[derive(Debug)]
pub struct Extension {
    path: &'static str,
    body: Value,
}

impl Extension {
    /// Reads, and thereby empties, one of the browser's logs.
    pub fn log(kind: &str) -> Self {
        Self { path: "se/log", body: json!({"type": kind}) }
    }

    /// Sends a command of the browser's own debugging protocol.
    pub fn debugging(command: &str, parameters: Value) -> Self {
        Self { path: "goog/cdp/execute", body: json!({"cmd": command, "params": parameters}) }
    }
}

impl WebDriverCompatibleCommand for Extension {
    fn endpoint(
        &self,
        base: &url::Url,
        session: Option<&str>,
    ) -> Result<url::Url, url::ParseError> {
        base.join(&format!("session/{}/{}", session.unwrap_or_default(), self.path))
    }

    fn method_and_body(&self, _: &url::Url) -> (http::Method, Option<String>) {
        (http::Method::POST, Some(self.body.to_string()))
    }
}
