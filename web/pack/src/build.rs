//! Building the program and, from it, the page.

use std::ffi::OsString;
use std::fs;
use std::path::{Path, PathBuf};

use crate::command::{Failure, Task, cargo_home};
use crate::single_file::{Parts, assemble, check_sizes, gzipped_bytes};
use crate::sources;

/// Builds the page and writes it to `out`; tells its sizes.
///
/// # Errors
/// When a build step fails, a file cannot be read or written, or the page is
/// larger than allowed.
pub async fn page(root: &Path, out: &Path) -> Result<(), Failure> {
    // Before the build, so that an edit during it shows as stale afterwards.
    let sources = sources::hash(root)?;
    println!("building the program (the first time takes a few minutes)");
    let package = target_folder(root).join("kelvinclock-page");
    package_into(root, &package, &["--target", "no-modules", "--no-typescript"], &[]).await?;

    let read = |path: PathBuf| {
        fs::read_to_string(&path).map_err(|error| Failure::file("read", &path, &error))
    };
    let wasm_path = package.join("web_bg.wasm");
    let wasm = fs::read(&wasm_path).map_err(|error| Failure::file("read", &wasm_path, &error))?;
    let page = assemble(&Parts {
        template: &read(root.join("web/index.html"))?,
        style: &read(root.join("web/style.css"))?,
        glue: &read(package.join("web.js"))?,
        wasm: &wasm,
        sources: &sources,
    })?;

    if let Some(folder) = out.parent() {
        fs::create_dir_all(folder).map_err(|error| Failure::file("create", folder, &error))?;
    }
    fs::write(out, &page).map_err(|error| Failure::file("write", out, &error))?;
    let gzipped = gzipped_bytes(&page)?;
    println!("wrote {}", out.display());
    println!("page: {} bytes, gzipped {gzipped} bytes; program: {} bytes", page.len(), wasm.len());
    // Last, so that a page that is too large can still be looked at.
    check_sizes(page.len(), gzipped)
}

/// Builds the JavaScript interface alone, as a package for Node.
///
/// # Errors
/// When the build fails.
pub async fn node_package(root: &Path, folder: &Path) -> Result<(), Failure> {
    println!("building the package for Node");
    package_into(root, folder, &["--target", "nodejs"], &["--", "--no-default-features"]).await
}

/// Where Cargo puts what it builds.
pub fn target_folder(root: &Path) -> PathBuf {
    root.join(std::env::var_os("CARGO_TARGET_DIR").unwrap_or_else(|| "target".into()))
}

async fn package_into(
    root: &Path,
    folder: &Path,
    options: &[&str],
    for_cargo: &[&str],
) -> Result<(), Failure> {
    let task = Task::line(root, "wasm-pack build web --release --mode no-install --no-pack")
        .environment("CARGO_ENCODED_RUSTFLAGS", compiler_flags(root))
        .argument("--out-dir")
        .argument(folder);
    let task = options.iter().chain(for_cargo).fold(task, Task::argument);
    task.run().await.map(drop)
}

/// Compiler flags that shorten the paths of source files, which panics name
/// and the program thus carries, to what is the same on every machine, and
/// that keep small functions apart, which packs a little better.
fn compiler_flags(root: &Path) -> OsString {
    let mut shortened = vec![(root.to_owned(), ".")];
    if let Some(home) = cargo_home() {
        let registries = fs::read_dir(home.join("registry/src"));
        shortened.push((home, "cargo"));
        // The compiler takes the last that matches: the more special ones follow.
        for registry in registries.into_iter().flatten().flatten() {
            shortened.push((registry.path(), "crates"));
        }
    }
    let mut flags = OsString::from("-Cllvm-args=-inline-threshold=-10");
    for (from, to) in shortened {
        flags.push("\u{1f}--remap-path-prefix=");
        flags.push(from);
        flags.push("=");
        flags.push(to);
    }
    flags
}
