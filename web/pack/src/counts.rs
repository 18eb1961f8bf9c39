//! Reading from a test runner's output how many checks passed and failed.

use std::ops::AddAssign;

/// How many checks passed and failed.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub struct Tally {
    /// Checks that passed.
    pub passed: usize,
    /// Checks that failed.
    pub failed: usize,
}

impl AddAssign for Tally {
    fn add_assign(&mut self, other: Self) {
        self.passed += other.passed;
        self.failed += other.failed;
    }
}

/// How a step's checks are counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Counting {
    /// The step is one check.
    One,
    /// Lines `test result: ok. 5 passed; 0 failed; …`, as Cargo's and
    /// wasm-bindgen's test runners write them.
    Cargo,
    /// Lines `# pass 5` and `# fail 0`, as Node's test runner writes them.
    Node,
}

impl Counting {
    /// What a step that printed `output` counts for. A step of tests which
    /// ended well without running one has failed, and so has a step which
    /// ended badly though no check of its own did.
    pub fn tally(self, succeeded: bool, output: &str) -> Tally {
        let mut tally = Tally::default();
        match self {
            Self::One => tally.passed = usize::from(succeeded),
            Self::Cargo => {
                for line in output.lines().filter(|line| line.starts_with("test result: ")) {
                    tally.passed += number_before(line, " passed");
                    tally.failed += number_before(line, " failed");
                }
            }
            Self::Node => {
                for line in output.lines() {
                    tally.passed += number_after(line, "# pass ");
                    tally.failed += number_after(line, "# fail ");
                }
            }
        }
        if tally.failed == 0 && (!succeeded || tally.passed == 0) {
            tally.failed = 1;
        }
        tally
    }
}

fn number_before(line: &str, word: &str) -> usize {
    line.split_once(word)
        .and_then(|(before, _)| before.rsplit(' ').next()?.parse().ok())
        .unwrap_or(0)
}

fn number_after(line: &str, word: &str) -> usize {
    line.strip_prefix(word).and_then(|number| number.trim().parse().ok()).unwrap_or(0)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn tally(passed: usize, failed: usize) -> Tally {
        Tally { passed, failed }
    }

    #[test]
    fn cargo_results_add_up() {
        let output = "running 2 tests\ntest result: ok. 12 passed; 0 failed; 1 ignored\n\
            test a_test_result: 5 passed ... ok\n\
            test result: FAILED. 3 passed; 2 failed; 0 ignored; finished in 0.1s\n";
        assert_eq!(Counting::Cargo.tally(false, output), tally(15, 2));
    }

    #[test]
    fn node_results_are_read() {
        let output = "TAP version 13\nok 1 - version\n# tests 4\n# pass 3\n# fail 1\n";
        assert_eq!(Counting::Node.tally(false, output), tally(3, 1));
    }

    #[test]
    fn no_test_and_no_count_are_failures() {
        let none = "test result: ok. 0 passed; 0 failed; 0 ignored\n";
        assert_eq!(Counting::Cargo.tally(true, none), tally(0, 1));
        assert_eq!(Counting::Cargo.tally(false, "error: could not compile"), tally(0, 1));
        assert_eq!(Counting::Node.tally(true, ""), tally(0, 1));
    }

    #[test]
    fn a_crash_after_passing_tests_still_counts() {
        let output = "test result: ok. 4 passed; 0 failed\n";
        assert_eq!(Counting::Cargo.tally(false, output), tally(4, 1));
    }

    #[test]
    fn a_plain_step_is_one_check() {
        assert_eq!(Counting::One.tally(true, ""), tally(1, 0));
        assert_eq!(Counting::One.tally(false, "test result: ok. 4 passed"), tally(0, 1));
    }
}
