//! Running every check of the project and counting them.

use std::path::Path;
use std::time::Duration;

use crate::command::{Failure, Task};
use crate::counts::{Counting, Tally};
use crate::{build, sources, tools};

/// Longest wait for the browser tests of one page, once they are compiled.
const BROWSER_LIMIT: Duration = Duration::from_secs(10 * 60);

/// Formatting, lints and documentation; each line is one check.
const LINTS: [&str; 6] = [
    "cargo fmt --all --check",
    "cargo clippy --quiet --workspace --all-targets -- -D warnings",
    "cargo clippy --quiet -p checks --test browser -- -D warnings",
    "cargo clippy --quiet -p web --no-default-features --all-targets -- -D warnings",
    "cargo clippy --quiet -p web --target wasm32-unknown-unknown -- -D warnings",
    "cargo clippy --quiet -p web --target wasm32-unknown-unknown --no-default-features -- -D warnings",
];

/// The targets of the crate `checks` that also run as wasm, in Node.
const WASM_TESTS: [&str; 1] = ["published"];

/// Runs all checks, also after failures, and returns their count.
pub async fn run(root: &Path) -> Tally {
    let mut report = Report { tally: Tally::default(), failed: Vec::new() };
    if let Err(failure) = tools::for_checking(root).await {
        report.note("installing what the checks need", Counting::One, Err(failure));
        return report.close();
    }
    for line in LINTS {
        report.step(Task::line(root, line), Counting::One).await;
    }
    // Compiled apart, so that compiling does not use up the wait for the tests.
    let compile = Task::line(root, "cargo test --quiet --workspace --no-run");
    report.step(compile, Counting::One).await;
    let tests = Task::line(root, "cargo test --quiet --workspace --no-fail-fast");
    report.step(tests, Counting::Cargo).await;
    for name in WASM_TESTS {
        let line = format!("cargo test -p checks --target wasm32-unknown-unknown --test {name}");
        report.step(Task::line(root, &line), Counting::Cargo).await;
    }
    node(root, &mut report).await;
    browser(root, &mut report).await;
    report.close()
}

async fn node(root: &Path, report: &mut Report) {
    let package = build::target_folder(root).join("kelvinclock-node");
    let built = build::node_package(root, &package).await;
    if report.note("building the package for Node", Counting::One, built.map(|()| String::new())) {
        let task = Task::line(
            root,
            "node --test --test-reporter=tap tests/node/evaluate.mjs tests/node/unlzma.mjs",
        )
        .environment("KELVINCLOCK_PACKAGE", package);
        report.step(task, Counting::Node).await;
    }
}

/// Drives the committed page and one built just now.
async fn browser(root: &Path, report: &mut Report) {
    let fresh = build::target_folder(root).join("kelvinclock.html");
    // Lest a failed build leave an earlier page to be tested in its place.
    let _ = std::fs::remove_file(&fresh);
    let built = build::page(root, &fresh).await;
    report.note("building a page", Counting::One, built.map(|()| String::new()));
    let compile = Task::line(root, "cargo test --quiet -p checks --test browser --no-run");
    if !report.step(compile, Counting::One).await {
        return;
    }
    let committed = root.join(sources::PAGE);
    let built = fresh.is_file().then_some(fresh);
    for page in [Some(committed), built].into_iter().flatten() {
        println!("== the browser tests with {}", page.display());
        let task = Task::line(root, "cargo test --quiet -p checks --test browser")
            .environment("KELVINCLOCK_PAGE", page)
            .limit(BROWSER_LIMIT);
        report.step(task, Counting::Cargo).await;
    }
}

struct Report {
    tally: Tally,
    failed: Vec<String>,
}

impl Report {
    /// Runs a step, shows what it prints, and tells whether it went well.
    async fn step(&mut self, task: Task, counting: Counting) -> bool {
        println!("== {}", task.shown());
        let result = task.clone().live().run().await;
        self.note(&task.shown(), counting, result)
    }

    fn note(&mut self, name: &str, counting: Counting, result: Result<String, Failure>) -> bool {
        let (succeeded, output) = match result {
            Ok(output) => (true, output),
            Err(failure) => {
                println!("{failure}");
                (false, failure.output)
            }
        };
        let tally = counting.tally(succeeded, &output);
        self.tally += tally;
        if tally.failed > 0 {
            self.failed.push(format!("{} of {name}", tally.failed));
        }
        tally.failed == 0
    }

    /// Tells the failures; the very last line is the count of all checks.
    fn close(self) -> Tally {
        for name in &self.failed {
            println!("failed: {name}");
        }
        println!("{} passed, {} failed", self.tally.passed, self.tally.failed);
        self.tally
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn failures_are_named_and_counted() {
        let mut report = Report { tally: Tally::default(), failed: Vec::new() };
        assert!(report.note("lint", Counting::One, Ok(String::new())));
        let output = "test result: FAILED. 3 passed; 2 failed;\n".to_owned();
        let failure = Failure { output, ..Failure::new("`cargo test` ended", "") };
        assert!(!report.note("tests", Counting::Cargo, Err(failure)));
        assert_eq!(report.failed, ["2 of tests"]);
        assert_eq!(report.tally, Tally { passed: 4, failed: 2 });
    }
}
