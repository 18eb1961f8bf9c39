//! A picture of the page, for a look at it while working on it.

use std::path::{Path, PathBuf};

use crate::command::{Failure, Task};
use crate::tools;

/// What to look at and how.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct View {
    /// The page.
    pub page: PathBuf,
    /// What follows `#` in its address; may be empty.
    pub fragment: String,
    /// Width of the window in CSS pixels.
    pub width: u32,
    /// Height of the window in CSS pixels.
    pub height: u32,
    /// Whether the system prefers dark colours.
    pub dark: bool,
    /// The PNG to write.
    pub out: PathBuf,
}

/// Writes a screenshot, once the page has come to rest.
///
/// # Errors
/// When there is no Chromium or it fails.
pub async fn look(root: &Path, view: &View) -> Result<(), Failure> {
    let Some(chromium) = tools::chromium() else {
        return Err(Failure::new("there is no Chromium on the PATH", "install chromium"));
    };
    let page = std::path::absolute(&view.page)
        .map_err(|error| Failure::file("find", &view.page, &error))?;
    let out =
        std::path::absolute(&view.out).map_err(|error| Failure::file("find", &view.out, &error))?;
    let scheme = if view.dark { 0 } else { 1 };
    Task::new(root, &chromium.to_string_lossy())
        .argument("--headless")
        .argument("--no-sandbox")
        .argument("--disable-gpu")
        .argument("--disable-background-networking")
        .argument("--disable-component-update")
        .argument("--hide-scrollbars")
        .argument("--virtual-time-budget=10000")
        .argument(format!("--blink-settings=preferredColorScheme={scheme}"))
        .argument(format!("--window-size={},{}", view.width, view.height))
        .argument(format!("--screenshot={}", out.display()))
        .argument(format!("file://{}#{}", page.display(), view.fragment))
        .run()
        .await?;
    println!("wrote {}", out.display());
    Ok(())
}
