//! The hash of everything that determines the built page, by which a stale
//! page is told from a fresh one.

use std::fs;
use std::path::{Path, PathBuf};

use sha2::{Digest, Sha256};

use crate::command::Failure;

/// Files and folders that determine the page, from the top of the repository.
const SOURCES: [&str; 10] = [
    "Cargo.lock",
    "Cargo.toml",
    "kinetics-core/Cargo.toml",
    "kinetics-core/src",
    "rust-toolchain.toml",
    "web/Cargo.toml",
    "web/index.html",
    "web/pack/src",
    "web/src",
    "web/style.css",
];

/// The committed page, from the top of the repository.
pub const PAGE: &str = "www-demo/kelvinclock.html";

/// The SHA-256 of the sources, in hexadecimal: of each file in the order of
/// its path, its path, length and content, with `\n` as line end.
///
/// # Errors
/// When a source cannot be read.
pub fn hash(root: &Path) -> Result<String, Failure> {
    let mut files = Vec::new();
    for source in SOURCES {
        gather(&root.join(source), &mut files)?;
    }
    let mut named = Vec::new();
    for file in files {
        let parts = file.strip_prefix(root).unwrap_or(&file).components();
        let parts: Vec<_> = parts.map(|part| part.as_os_str().to_string_lossy()).collect();
        named.push((parts.join("/"), file));
    }
    named.sort();
    let mut hasher = Sha256::new();
    for (name, file) in named {
        let content = fs::read(&file).map_err(|error| Failure::file("read", &file, &error))?;
        let content = String::from_utf8_lossy(&content).replace("\r\n", "\n");
        hasher.update(format!("{name}\n{}\n", content.len()));
        hasher.update(content);
    }
    let digest = hasher.finalize();
    Ok(digest.iter().map(|byte| format!("{byte:02x}")).collect())
}

/// Checks that the page was built from the sources as they are.
///
/// # Errors
/// When it is missing, holds no hash, or was built from other sources.
pub fn check_fresh(root: &Path, page: &Path) -> Result<(), Failure> {
    let remedy = "run `cargo pack build` and commit the page";
    let text = fs::read_to_string(page).map_err(|error| {
        Failure::new(format!("could not read {}: {error}", page.display()), remedy)
    })?;
    if embedded(&text) == Some(hash(root)?.as_str()) {
        return Ok(());
    }
    let what = format!("{} was built from other sources than these", page.display());
    Err(Failure::new(what, remedy))
}

/// The hash that a page carries.
fn embedded(page: &str) -> Option<&str> {
    let (_, rest) = page.split_once("<meta name=\"kelvinclock-sources\" content=\"")?;
    rest.split_once('"').map(|(hash, _)| hash)
}

/// Adds a file, or all files within a folder but hidden ones.
fn gather(path: &Path, files: &mut Vec<PathBuf>) -> Result<(), Failure> {
    if !path.is_dir() {
        files.push(path.to_owned());
        return Ok(());
    }
    let entries = fs::read_dir(path).map_err(|error| Failure::file("read", path, &error))?;
    for entry in entries {
        let entry = entry.map_err(|error| Failure::file("read", path, &error))?;
        if !entry.file_name().to_string_lossy().starts_with('.') {
            gather(&entry.path(), files)?;
        }
    }
    Ok(())
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    /// A made-up repository with every source, in a folder of its own.
    fn repository(name: &str) -> PathBuf {
        let root = std::env::temp_dir().join(format!("pack-{name}-{}", std::process::id()));
        let _ = fs::remove_dir_all(&root);
        for source in SOURCES {
            let path = if source.ends_with("src") {
                root.join(source).join("lib.rs")
            } else {
                root.join(source)
            };
            fs::create_dir_all(path.parent().unwrap()).unwrap();
            fs::write(path, source).unwrap();
        }
        root
    }

    #[test]
    fn the_hash_follows_content_and_names_but_not_hidden_files() {
        let root = repository("hash");
        let first = hash(&root).unwrap();
        assert_eq!(first.len(), 64);
        fs::write(root.join("web/src/.hidden"), "x").unwrap();
        fs::write(root.join("web/src/lib.rs"), "web/src").unwrap();
        assert_eq!(hash(&root).unwrap(), first);
        fs::write(root.join("web/src/lib.rs"), "web/src\r\n").unwrap();
        let changed = hash(&root).unwrap();
        assert_ne!(changed, first);
        fs::write(root.join("web/src/lib.rs"), "web/src\n").unwrap();
        assert_eq!(hash(&root).unwrap(), changed);
        fs::rename(root.join("web/src/lib.rs"), root.join("web/src/main.rs")).unwrap();
        assert_ne!(hash(&root).unwrap(), changed);
        fs::remove_dir_all(root).unwrap();
    }

    #[test]
    fn a_missing_source_is_named() {
        let root = repository("missing");
        fs::remove_file(root.join("web/style.css")).unwrap();
        assert!(hash(&root).unwrap_err().what.contains("style.css"));
        fs::remove_dir_all(root).unwrap();
    }

    #[test]
    fn a_stale_page_is_told_from_a_fresh_one() {
        let root = repository("stale");
        let page = root.join("page.html");
        assert!(check_fresh(&root, &page).unwrap_err().remedy.contains("cargo pack build"));
        let text =
            format!("<meta name=\"kelvinclock-sources\" content=\"{}\">", hash(&root).unwrap());
        fs::write(&page, text).unwrap();
        assert_eq!(check_fresh(&root, &page), Ok(()));
        fs::write(root.join("web/src/lib.rs"), "changed").unwrap();
        let told = check_fresh(&root, &page).unwrap_err();
        assert!(told.what.contains("other sources"), "{told}");
        fs::remove_dir_all(root).unwrap();
    }

    #[test]
    fn the_committed_page_is_fresh() {
        let root = crate::root();
        assert_eq!(check_fresh(&root, &root.join(PAGE)), Ok(()));
    }
}
