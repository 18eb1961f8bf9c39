//! Installing what building and checking need and the machine lacks.

use std::path::{Path, PathBuf};

use crate::command::{Failure, Task, find};

const WASM: &str = "wasm32-unknown-unknown";

/// Names under which a Chromium may be installed, the usual one first.
const CHROMIUM_NAMES: [&str; 4] = ["chromium", "chromium-browser", "google-chrome", "chrome"];

/// Makes sure that the page can be built: the wasm target, wasm-pack, and the
/// wasm-bindgen program of exactly the version that Cargo.lock names.
///
/// # Errors
/// When an installation fails.
pub async fn for_building(root: &Path) -> Result<(), Failure> {
    wasm_target(root).await?;
    if find("wasm-pack").is_none() {
        println!("installing wasm-pack (a few minutes)");
        Task::line(root, "cargo install wasm-pack --locked")
            .remedy("install wasm-pack 0.15 by hand so that it is on the PATH")
            .run()
            .await?;
    }
    wasm_bindgen(root).await
}

/// Makes sure that everything can be checked: what building needs, formatter,
/// linter, Node, and a Chromium with its driver.
///
/// # Errors
/// When an installation fails or cannot be attempted on this machine.
pub async fn for_checking(root: &Path) -> Result<(), Failure> {
    for_building(root).await?;
    for (question, component) in
        [("cargo fmt --version", "rustfmt"), ("cargo clippy --version", "clippy")]
    {
        if Task::line(root, question).run().await.is_err() {
            println!("installing {component}");
            Task::line(root, &format!("rustup component add {component}"))
                .remedy(format!("install {component} for the pinned toolchain"))
                .run()
                .await?;
        }
    }
    let mut packages = Vec::new();
    if chromium().is_none() {
        packages.push("chromium");
    }
    if find("chromedriver").is_none() {
        packages.push("chromium-driver");
    }
    if find("node").is_none() {
        packages.push("nodejs");
    }
    system_packages(root, &packages).await
}

/// The installed Chromium, if there is one.
pub fn chromium() -> Option<PathBuf> {
    CHROMIUM_NAMES.iter().find_map(|name| find(name))
}

/// Asks rustc rather than rustup, so that other ways to install Rust do too.
async fn wasm_target(root: &Path) -> Result<(), Failure> {
    let question = format!("rustc --print target-libdir --target {WASM}");
    let folder = Task::line(root, &question).run().await?;
    if Path::new(folder.trim()).is_dir() {
        return Ok(());
    }
    println!("installing the Rust target {WASM}");
    Task::line(root, &format!("rustup target add {WASM}"))
        .remedy(format!(
            "install the Rust standard library for {WASM}, with rustup or the system's package manager"
        ))
        .run()
        .await
        .map(drop)
}

/// Not `--locked`: the program's own lock file names a withdrawn dependency.
async fn wasm_bindgen(root: &Path) -> Result<(), Failure> {
    let path = root.join("Cargo.lock");
    let lock =
        std::fs::read_to_string(&path).map_err(|error| Failure::file("read", &path, &error))?;
    let Some(wanted) = locked_version(&lock, "wasm-bindgen") else {
        return Err(Failure::new(
            "Cargo.lock names no wasm-bindgen",
            "run `cargo generate-lockfile`",
        ));
    };
    if let Ok(told) = Task::line(root, "wasm-bindgen --version").run().await
        && told.split_whitespace().nth(1) == Some(wanted)
        && find("wasm-bindgen-test-runner").is_some()
    {
        return Ok(());
    }
    println!("installing wasm-bindgen {wanted} (a few minutes)");
    let line = format!("cargo install wasm-bindgen-cli --version {wanted}");
    Task::line(root, &line)
        .remedy(format!(
            "install wasm-bindgen-cli {wanted} by hand so that it comes first on the PATH"
        ))
        .run()
        .await
        .map(drop)
}

/// Installs packages of a Debian-like system; nothing when none are missing.
async fn system_packages(root: &Path, packages: &[&str]) -> Result<(), Failure> {
    if packages.is_empty() {
        return Ok(());
    }
    let names = packages.join(" ");
    let remedy = format!("install {names} with the system's package manager");
    let user = Task::line(root, "id -u").run().await.unwrap_or_default();
    if find("apt-get").is_none() || user.trim() != "0" {
        return Err(Failure::new(
            format!("{names} missing, and only root on a Debian-like system can add them here"),
            remedy,
        ));
    }
    println!("installing {names}");
    for line in [
        "apt-get update".to_owned(),
        format!("apt-get install --yes --no-install-recommends {names}"),
    ] {
        Task::line(root, &line)
            .environment("DEBIAN_FRONTEND", "noninteractive")
            .remedy(&remedy)
            .run()
            .await?;
    }
    Ok(())
}

/// The version that a lock file holds for a package.
fn locked_version<'lock>(lock: &'lock str, package: &str) -> Option<&'lock str> {
    let name = format!("name = \"{package}\"");
    let mut lines = lock.lines().skip_while(|line| *line != name);
    lines.next()?;
    lines.next()?.strip_prefix("version = \"")?.strip_suffix('"')
}

#[cfg(test)]
mod tests {
    use super::*;

    const LOCK: &str = "[[package]]\nname = \"wasm-bindgen-shared\"\nversion = \"0.2.9\"\n\n\
        [[package]]\nname = \"wasm-bindgen\"\nversion = \"0.2.130\"\n";

    #[test]
    fn the_locked_version_is_that_of_the_very_package() {
        assert_eq!(locked_version(LOCK, "wasm-bindgen"), Some("0.2.130"));
        assert_eq!(locked_version(LOCK, "wasm"), None);
        assert_eq!(locked_version("name = \"wasm\"", "wasm"), None);
    }
}
