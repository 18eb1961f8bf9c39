//! Running other programs: a bounded wait, what they printed, and on failure
//! the command line, its output and a remedy.

use std::ffi::{OsStr, OsString};
use std::fmt;
use std::path::{Path, PathBuf};
use std::process::Stdio;
use std::time::Duration;

use tokio::io::{AsyncBufReadExt, AsyncRead, BufReader};
use tokio::process::{Child, Command};
use tokio::sync::mpsc::{UnboundedReceiver, UnboundedSender, unbounded_channel};
use tokio::time::{Instant, sleep_until, timeout};

/// Longest wait for an installation or a build.
pub const BUILD_LIMIT: Duration = Duration::from_secs(30 * 60);

/// After a program has ended, how long to wait for output that a descendant
/// of its still holds open.
const DRAIN_LIMIT: Duration = Duration::from_secs(2);

/// How many of the last lines a failure repeats.
const REPEATED_LINES: usize = 60;

/// A program with its arguments, to be run once.
#[derive(Debug, Clone)]
pub struct Task {
    program: String,
    arguments: Vec<OsString>,
    environment: Vec<(OsString, OsString)>,
    folder: PathBuf,
    limit: Duration,
    live: bool,
    remedy: String,
}

/// Why something did not work, told so that the reader can act on it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Failure {
    /// What was attempted and how it went wrong.
    pub what: String,
    /// Everything the failing program printed.
    pub output: String,
    /// Whether that output was already shown while it was printed.
    pub shown: bool,
    /// What to do about it; empty when the output says enough.
    pub remedy: String,
}

impl Failure {
    /// A failure without another program's output.
    pub fn new(what: impl Into<String>, remedy: impl Into<String>) -> Self {
        Self { what: what.into(), output: String::new(), shown: true, remedy: remedy.into() }
    }

    /// A file or folder that could not be read or written.
    pub fn file(doing: &str, path: &Path, error: &std::io::Error) -> Self {
        Self::new(
            format!("could not {doing} {}: {error}", path.display()),
            "check that the path exists and may be written",
        )
    }
}

impl fmt::Display for Failure {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(formatter, "failed: {}", self.what)?;
        if !self.shown && !self.output.trim().is_empty() {
            let lines: Vec<&str> = self.output.trim_end().lines().collect();
            let skipped = lines.len().saturating_sub(REPEATED_LINES);
            write!(formatter, "\n  it printed:")?;
            if skipped > 0 {
                write!(formatter, "\n    ({skipped} lines before these)")?;
            }
            for line in lines.iter().skip(skipped) {
                write!(formatter, "\n    {line}")?;
            }
        }
        if !self.remedy.is_empty() {
            write!(formatter, "\n  remedy: {}", self.remedy)?;
        }
        Ok(())
    }
}

impl Task {
    /// A task in `folder`, quiet, with the wait of a build.
    pub fn new(folder: &Path, program: &str) -> Self {
        Self {
            program: program.to_owned(),
            arguments: Vec::new(),
            environment: vec![("PATH".into(), search_path())],
            folder: folder.to_owned(),
            limit: BUILD_LIMIT,
            live: false,
            remedy: String::new(),
        }
    }

    /// A task from a command line whose words hold no blanks.
    pub fn line(folder: &Path, line: &str) -> Self {
        let mut words = line.split_whitespace();
        let program = words.next().unwrap_or_default();
        words.fold(Self::new(folder, program), Self::argument)
    }

    /// Adds one argument.
    pub fn argument(mut self, argument: impl AsRef<OsStr>) -> Self {
        self.arguments.push(argument.as_ref().to_owned());
        self
    }

    /// Sets one variable of the program's environment.
    pub fn environment(mut self, name: &str, value: impl AsRef<OsStr>) -> Self {
        self.environment.push((name.into(), value.as_ref().to_owned()));
        self
    }

    /// Bounds the wait.
    pub fn limit(mut self, limit: Duration) -> Self {
        self.limit = limit;
        self
    }

    /// Shows the program's output while it is printed.
    pub fn live(mut self) -> Self {
        self.live = true;
        self
    }

    /// What to do when it fails.
    pub fn remedy(mut self, remedy: impl Into<String>) -> Self {
        self.remedy = remedy.into();
        self
    }

    /// The command line as one would type it.
    pub fn shown(&self) -> String {
        let mut line = self.program.clone();
        for argument in &self.arguments {
            line.push(' ');
            line.push_str(&argument.to_string_lossy());
        }
        line
    }

    /// Runs the program and returns what it printed on both channels.
    ///
    /// # Errors
    /// When it cannot be started, ends with another status than 0, outlasts
    /// its limit, or the user interrupts. Its descendants are then ended too.
    pub async fn run(&self) -> Result<String, Failure> {
        let mut command = Command::new(&self.program);
        command
            .args(&self.arguments)
            .envs(self.environment.iter().map(|(name, value)| (name, value)))
            .current_dir(&self.folder)
            .stdin(Stdio::null())
            .stdout(Stdio::piped())
            .stderr(Stdio::piped())
            .kill_on_drop(true);
        // A group of its own, so that an end of the wait ends descendants too.
        #[cfg(unix)]
        command.process_group(0);
        let mut child = command
            .spawn()
            .map_err(|error| self.failure(format!("could not be started: {error}"), ""))?;

        let (sender, mut lines) = unbounded_channel();
        if let Some(stdout) = child.stdout.take() {
            tokio::spawn(send_lines(stdout, sender.clone()));
        }
        if let Some(stderr) = child.stderr.take() {
            tokio::spawn(send_lines(stderr, sender));
        }
        let mut output = String::new();
        match self.wait(&mut child, &mut lines, &mut output).await {
            Ok(status) if status.success() => Ok(output),
            Ok(status) => Err(self.failure(format!("ended with {status}"), &output)),
            Err(reason) => {
                end_group(&mut child).await;
                Err(self.failure(reason, &output))
            }
        }
    }

    async fn wait(
        &self,
        child: &mut Child,
        lines: &mut UnboundedReceiver<String>,
        output: &mut String,
    ) -> Result<std::process::ExitStatus, String> {
        let end = sleep_until(Instant::now() + self.limit);
        tokio::pin!(end);
        let mut open = true;
        let status = loop {
            tokio::select! {
                line = lines.recv(), if open => match line {
                    Some(line) => self.take_line(&line, output),
                    None => open = false,
                },
                status = child.wait() => break status.map_err(|error| error.to_string())?,
                () = &mut end => {
                    return Err(format!("did not end within {} s", self.limit.as_secs()));
                }
                _ = tokio::signal::ctrl_c() => return Err("was interrupted".to_owned()),
            }
        };
        while let Ok(Some(line)) = timeout(DRAIN_LIMIT, lines.recv()).await {
            self.take_line(&line, output);
        }
        Ok(status)
    }

    fn take_line(&self, line: &str, output: &mut String) {
        if self.live {
            println!("{line}");
        }
        output.push_str(line);
        output.push('\n');
    }

    fn failure(&self, reason: impl fmt::Display, output: &str) -> Failure {
        Failure {
            what: format!("`{}` {reason}", self.shown()),
            output: output.to_owned(),
            shown: self.live,
            remedy: self.remedy.clone(),
        }
    }
}

/// Sends each line without its end; bytes that are no UTF-8 become `�`.
async fn send_lines(source: impl AsyncRead + Unpin, sender: UnboundedSender<String>) {
    let mut reader = BufReader::new(source);
    let mut bytes = Vec::new();
    while let Ok(1..) = reader.read_until(b'\n', &mut bytes).await {
        let line = String::from_utf8_lossy(&bytes);
        let whole = line.trim_end_matches(['\n', '\r']).to_owned();
        bytes.clear();
        if sender.send(whole).is_err() {
            return;
        }
    }
}

/// Ends a program and, where processes have groups, all its descendants.
async fn end_group(child: &mut Child) {
    if cfg!(unix)
        && let Some(id) = child.id()
    {
        // The shell's own `kill`, since small systems come without the program.
        let _ = Command::new("sh")
            .arg("-c")
            .arg(format!("kill -s KILL -- -{id}"))
            .stderr(Stdio::null())
            .status()
            .await;
    }
    let _ = child.kill().await;
}

/// `PATH`, preceded by the folder into which `cargo install` puts programs.
pub fn search_path() -> OsString {
    let path = std::env::var_os("PATH").unwrap_or_default();
    let folders =
        cargo_home().map(|home| home.join("bin")).into_iter().chain(std::env::split_paths(&path));
    std::env::join_paths(folders).unwrap_or(path)
}

/// Cargo's own folder.
pub fn cargo_home() -> Option<PathBuf> {
    std::env::var_os("CARGO_HOME")
        .map(PathBuf::from)
        .or_else(|| std::env::home_dir().map(|home| home.join(".cargo")))
}

/// Where a program is found, if it is.
pub fn find(program: &str) -> Option<PathBuf> {
    std::env::split_paths(&search_path())
        .map(|folder| folder.join(program))
        .find(|path| path.is_file())
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    fn run(task: &Task) -> Result<String, Failure> {
        tokio::runtime::Builder::new_current_thread()
            .enable_all()
            .build()
            .unwrap()
            .block_on(task.run())
    }

    fn shell(script: &str) -> Task {
        Task::new(&std::env::temp_dir(), "sh").argument("-c").argument(script)
    }

    #[test]
    fn output_of_both_channels_is_kept() {
        let output = run(&shell("echo out; echo err >&2")).unwrap();
        let mut lines: Vec<&str> = output.lines().collect();
        lines.sort_unstable();
        assert_eq!(lines, ["err", "out"]);
    }

    #[test]
    fn a_failure_tells_command_output_and_remedy() {
        let task = shell("echo cause >&2; exit 3").remedy("mend it");
        let told = run(&task).unwrap_err().to_string();
        assert!(told.contains("`sh -c echo cause"), "{told}");
        assert!(told.contains("exit status: 3"), "{told}");
        assert!(told.contains("\n    cause\n"), "{told}");
        assert!(told.ends_with("remedy: mend it"), "{told}");
    }

    #[test]
    fn a_missing_program_is_named() {
        let told =
            run(&Task::new(&std::env::temp_dir(), "no-such-program-here")).unwrap_err().to_string();
        assert!(told.contains("`no-such-program-here` could not be started"));
    }

    #[test]
    fn the_wait_is_bounded_and_ends_descendants() {
        let marker = std::env::temp_dir().join(format!("pack-wait-{}", std::process::id()));
        let _ = std::fs::remove_file(&marker);
        let script = format!("(sleep 1; echo late > '{}') & wait", marker.display());
        let told = run(&shell(&script).limit(Duration::from_millis(200))).unwrap_err().to_string();
        assert!(told.contains("did not end within"), "{told}");
        std::thread::sleep(Duration::from_secs(2));
        assert!(!marker.exists(), "the descendant outlived the wait");
    }

    #[test]
    fn long_output_is_cut_from_the_front() {
        let told = run(&shell("seq 1 100; false")).unwrap_err().to_string();
        assert!(told.contains("(40 lines before these)"), "{told}");
        assert!(!told.contains("\n    40\n") && told.contains("\n    41\n"));
    }
}
