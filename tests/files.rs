//! Rules that every file of the repository keeps.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;

/// The most lines a file may have.
const MOST_LINES: usize = 600;

/// What no file may contain, each written in two parts lest this file do.
/// Whole words are marked by blanks around them.
const FORBIDDEN: [(&str, &str); 9] = [
    // The page estimates; it vouches for nothing.
    (" sa", "fe "),
    // Where packages come from is the machine's own affair.
    ("crates", ".io"),
    ("registry.", "npmjs"),
    ("pypi", ".org"),
    ("debian", ".org"),
    // Stubs and other people's folders.
    ("TO", "DO"),
    ("to", "do!("),
    ("unimple", "mented!("),
    ("/ro", "ot/"),
];

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("..")
}

/// The repository's text files, but for lock files, the built page and data.
fn texts() -> Vec<(String, String)> {
    let listed = Command::new("git")
        .args(["ls-files", "-z", "--cached", "--others", "--exclude-standard"])
        .current_dir(root())
        .output()
        .unwrap();
    assert!(listed.status.success(), "git could not list the files");
    let names = String::from_utf8(listed.stdout).unwrap();
    names
        .split('\0')
        .filter(|name| !name.is_empty() && !is_generated(name))
        .filter_map(|name| Some((name.to_owned(), fs::read_to_string(root().join(name)).ok()?)))
        .collect()
}

fn is_generated(name: &str) -> bool {
    name.ends_with("Cargo.lock") || name == "www-demo/kelvinclock.html" || name.ends_with(".json")
}

/// The forbidden things in a text, whole words as such.
fn offences(text: &str) -> Vec<(usize, String)> {
    let mut found = Vec::new();
    for (index, line) in text.lines().enumerate() {
        let lower = line.to_lowercase();
        let spaced = format!(" {} ", lower.replace(|c: char| !c.is_alphanumeric(), " "));
        for (first, second) in FORBIDDEN {
            let thing = format!("{first}{second}");
            let there = if thing.starts_with(' ') {
                spaced.contains(&thing)
            } else {
                line.contains(&thing)
            };
            if there {
                found.push((index + 1, thing));
            }
        }
    }
    found
}

#[test]
fn files_stay_short() {
    let texts = texts();
    assert!(texts.len() > 20, "only {} files were found", texts.len());
    for (name, text) in texts {
        let lines = text.lines().count();
        assert!(lines <= MOST_LINES, "{name} has {lines} lines; at most {MOST_LINES} are allowed");
    }
}

#[test]
fn files_name_nothing_forbidden() {
    let mut found = Vec::new();
    for (name, text) in texts() {
        for (line, thing) in offences(&text) {
            found.push(format!("{name}:{line}: {thing:?}"));
        }
    }
    assert!(found.is_empty(), "\n{}", found.join("\n"));
}

#[test]
fn offences_are_told_from_innocent_words() {
    let word = ["Sa", "fe"].concat();
    assert_eq!(offences(&format!("fine\nIt is {word}, they say."))[0].0, 2);
    assert_eq!(offences("unsafe_code, unsafe, safety, AssertUnwindSafe"), []);
    assert_eq!(offences(&["see crates", ".io"].concat()).len(), 1);
    assert_eq!(offences(&["// TO", "DO: more"].concat()).len(), 1);
}
