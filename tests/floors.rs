//! Holds the house of the core: each module stands on a floor and imports only
//! from lower floors, or from a neighbour along an arrow.

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

use proc_macro2::{Delimiter, TokenStream, TokenTree};

/// The floors from the ground up, with the modules that stand on each.
const FLOORS: [&[&str]; 8] = [
    // what knows no chemistry
    &["numeric"],
    // vocabulary
    &["problem", "units", "quantity", "constants", "citation", "wording"],
    // cells with positions, columns with units
    &["text", "table"],
    // what was observed, typed
    &["measurements", "history"],
    // one run
    &["rate_law", "rate_constant"],
    // all runs; reaching an extent
    &["temperature_law", "one_stage", "rivals", "extent", "heat"],
    // deciding
    &["grounds", "answer", "question", "curve", "next_measurement", "remark"],
    // memory; its record is a private part of it
    &["study"],
];

/// Neighbours on a floor: the second may import the first.
const ARROWS: [(&str, &str); 19] = [
    ("problem", "units"),
    ("problem", "quantity"),
    ("units", "quantity"),
    ("units", "wording"),
    ("quantity", "wording"),
    ("text", "table"),
    ("rate_law", "rate_constant"),
    ("temperature_law", "one_stage"),
    ("temperature_law", "rivals"),
    ("temperature_law", "extent"),
    ("temperature_law", "heat"),
    ("extent", "heat"),
    ("grounds", "answer"),
    ("grounds", "curve"),
    ("grounds", "remark"),
    ("answer", "question"),
    ("next_measurement", "question"),
    ("answer", "curve"),
    ("answer", "remark"),
];

/// A module of the crate, named by another one.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord)]
struct Import {
    from: String,
    line: usize,
}

/// The modules of the crate that a file names: by `crate::`, or by as many
/// `super::` as lead from it to the crate's root. `depth` is how many modules
/// the file itself lies below the root. Comments and strings do not count.
fn imports(source: &str, depth: usize) -> Vec<Import> {
    let mut found = BTreeSet::new();
    match source.parse::<TokenStream>() {
        Ok(tokens) => walk(tokens, depth, &mut found),
        Err(error) => panic!("no Rust: {error}"),
    }
    found.into_iter().collect()
}

fn walk(tokens: TokenStream, depth: usize, found: &mut BTreeSet<Import>) {
    let tokens: Vec<TokenTree> = tokens.into_iter().collect();
    let mut at = 0;
    while at < tokens.len() {
        let after = path_from_root(&tokens[at..], depth);
        if after > 0 {
            named(&tokens[at + after..], found);
            at += after;
            continue;
        }
        if let TokenTree::Group(group) = &tokens[at] {
            // `mod name { … }` lies one module deeper.
            let inner = at >= 2 && is_word(&tokens[at - 2], "mod");
            let deeper = usize::from(inner && group.delimiter() == Delimiter::Brace);
            walk(group.stream(), depth + deeper, found);
        }
        at += 1;
    }
}

/// How many tokens lead to the crate's root, 0 if these do not.
fn path_from_root(tokens: &[TokenTree], depth: usize) -> usize {
    let mut supers = 0;
    let mut at = 0;
    while let [word, first, second, ..] = &tokens[at..] {
        if !(is_colon(first) && is_colon(second)) {
            return 0;
        }
        at += 3;
        if is_word(word, "crate") {
            return at;
        } else if is_word(word, "super") {
            supers += 1;
        } else if !(is_word(word, "self") && supers == 0) {
            return 0;
        }
        if supers > 0 && supers == depth {
            return at;
        }
    }
    0
}

/// Notes the module that follows the root, or each of a `{list}`.
fn named(tokens: &[TokenTree], found: &mut BTreeSet<Import>) {
    match tokens.first() {
        Some(TokenTree::Ident(name)) => {
            let line = name.span().start().line;
            found.insert(Import { from: name.to_string(), line });
        }
        Some(TokenTree::Group(list)) => {
            let tokens: Vec<TokenTree> = list.stream().into_iter().collect();
            for part in tokens.split(is_comma) {
                named(part, found);
            }
        }
        // `*` and whatever else is no module's name, and so not allowed.
        Some(other) => {
            let line = other.span().start().line;
            found.insert(Import { from: other.to_string(), line });
        }
        None => {}
    }
}

fn is_word(token: &TokenTree, word: &str) -> bool {
    matches!(token, TokenTree::Ident(name) if name == word)
}

fn is_colon(token: &TokenTree) -> bool {
    matches!(token, TokenTree::Punct(mark) if mark.as_char() == ':')
}

fn is_comma(token: &TokenTree) -> bool {
    matches!(token, TokenTree::Punct(mark) if mark.as_char() == ',')
}

fn floor(module: &str) -> Option<usize> {
    FLOORS.iter().position(|modules| modules.contains(&module))
}

/// Why `module` may not import `from`, if it may not.
fn objection(module: &str, from: &str) -> Option<String> {
    if module == from {
        return None;
    }
    let Some(above) = floor(module) else {
        return Some(format!("{module} stands on no floor; give it a place in FLOORS"));
    };
    match floor(from) {
        None => Some(format!("{module} imports {from}, which is no module on a floor")),
        Some(below) if below < above || ARROWS.contains(&(from, module)) => None,
        Some(below) => Some(format!(
            "{module} (floor {above}) imports {from} (floor {below}), and no arrow leads there"
        )),
    }
}

/// The core's files, each with the modules that lead to it from the root.
fn files(folder: &Path, modules: &[String]) -> Vec<(PathBuf, Vec<String>)> {
    let mut found = Vec::new();
    for entry in fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        let name = path.file_stem().unwrap().to_string_lossy().into_owned();
        let mut inner = modules.to_vec();
        if path.is_dir() {
            inner.push(name);
            found.extend(files(&path, &inner));
        } else if path.extension().is_some_and(|extension| extension == "rs") && name != "lib" {
            if name != "mod" {
                inner.push(name);
            }
            found.push((path, inner));
        }
    }
    found
}

fn core() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../kinetics-core/src")
}

#[test]
fn the_core_keeps_to_its_floors() {
    let mut objections = Vec::new();
    for (path, modules) in files(&core(), &[]) {
        let source = fs::read_to_string(&path).unwrap();
        let module = modules.first().unwrap();
        for import in imports(&source, modules.len()) {
            if let Some(why) = objection(module, &import.from) {
                objections.push(format!("{}:{}: {why}", path.display(), import.line));
            }
        }
    }
    assert!(objections.is_empty(), "\n{}", objections.join("\n"));
}

#[test]
fn every_module_of_the_core_is_read() {
    let read: BTreeSet<String> =
        files(&core(), &[]).into_iter().map(|(_, modules)| modules[0].clone()).collect();
    let lib = fs::read_to_string(core().join("lib.rs")).unwrap();
    for line in lib.lines() {
        let declared = line.trim_start_matches("pub ").strip_prefix("mod ");
        if let Some(module) = declared.and_then(|rest| rest.strip_suffix(';')) {
            assert!(read.contains(module), "{module} was not read");
            assert!(floor(module).is_some(), "{module} stands on no floor");
        }
    }
    assert!(read.contains("numeric"));
}

#[test]
fn arrows_join_neighbours_and_form_no_circle() {
    for (from, to) in ARROWS {
        assert_eq!(floor(from), floor(to), "{from} → {to}");
        assert!(floor(from).is_some(), "{from} → {to}");
    }
    // Without a circle, taking away what no arrow leads to leaves nothing.
    let mut left = ARROWS.to_vec();
    while !left.is_empty() {
        let targets: BTreeSet<&str> = left.iter().map(|(_, to)| *to).collect();
        let before = left.len();
        left.retain(|(from, _)| targets.contains(from));
        assert!(left.len() < before, "a circle within {left:?}");
    }
}

#[test]
fn imports_are_found_in_every_form() {
    let source = r#"
        //! See [`crate::record`].
        use crate::units::Unit;
        use crate::{text::Cell, table::{self, Table}, grounds};
        pub(crate) fn f() { let x = crate::answer::g("crate::record::h"); }
        fn m() { println!("{}", crate::heat::rise()); }
        use super::curve;
        use self::inner::thing;
        mod tests {
            use super::*;
            use super::super::rivals::Rival;
        }
    "#;
    let names: BTreeSet<String> = imports(source, 1).into_iter().map(|found| found.from).collect();
    let expected = ["answer", "curve", "grounds", "heat", "rivals", "table", "text", "units"];
    assert_eq!(names.iter().map(String::as_str).collect::<Vec<_>>(), expected);
    assert_eq!(imports("\n\nuse crate::units;", 1)[0].line, 3);
    // In a file two modules deep, one `super` leads to a sibling.
    assert_eq!(imports("use super::parse; use super::super::text;", 2)[0].from, "text");
}

#[test]
fn broken_rules_are_objected_to() {
    let broken = |module: &str, source: &str| {
        let found = imports(source, 1);
        found.iter().find_map(|import| objection(module, &import.from))
    };
    assert_eq!(broken("table", "use crate::text::Cell; use crate::numeric;"), None);
    assert_eq!(broken("answer", "use crate::answer::Part;"), None);
    for (module, source, why) in [
        ("numeric", "use crate::units::Unit;", "numeric (floor 0) imports units (floor 1)"),
        ("text", "use crate::{numeric, table};", "text (floor 2) imports table"),
        ("citation", "fn f() { crate::constants::R; }", "no arrow"),
        ("answer", "use crate::study::Study;", "imports study (floor 7)"),
        ("heat", "use super::question;", "imports question (floor 6)"),
        ("answer", "use crate::Kelvin;", "Kelvin, which is no module"),
        ("answer", "use crate::*;", "imports *, which is no module"),
        ("novel", "use crate::units;", "stands on no floor"),
    ] {
        let told = broken(module, source).unwrap_or_default();
        assert!(told.contains(why), "{module}: {told:?}");
    }
}
