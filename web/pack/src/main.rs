//! `cargo pack`: builds, serves and checks Kelvinclock, and installs what
//! these need and the machine lacks.

mod build;
mod checks;
mod command;
mod counts;
mod look;
mod serve;
mod single_file;
mod sources;
mod tools;

use std::path::{Path, PathBuf};
use std::process::ExitCode;

use lexopt::prelude::{Long, Short, Value, ValueExt};

use crate::command::Failure;

const HELP: &str = "\
cargo pack serve [--port N]     build the page and serve it to this machine
cargo pack build [--out PATH]   build the page, usually www-demo/kelvinclock.html
cargo pack test                 run every check; the last line counts them
cargo pack fresh                tell whether the committed page is up to date
cargo pack look --out PNG [--page PATH] [--fragment TEXT] [--width N] [--height N] [--dark]
                                take a picture of the built page";

/// One command line.
#[derive(Debug, Clone, PartialEq, Eq)]
enum Wish {
    Help,
    Serve { port: u16 },
    Build { out: Option<PathBuf> },
    Test,
    Fresh,
    Look(look::View),
}

fn main() -> ExitCode {
    let wish = match parse(lexopt::Parser::from_env()) {
        Ok(wish) => wish,
        Err(error) => {
            eprintln!("{error}\n\n{HELP}");
            return ExitCode::from(2);
        }
    };
    let runtime = tokio::runtime::Builder::new_current_thread().enable_all().build();
    let result = match runtime {
        Ok(runtime) => runtime.block_on(carry_out(wish)),
        Err(error) => Err(Failure::new(format!("could not start: {error}"), "")),
    };
    match result {
        Ok(code) => code,
        Err(failure) => {
            eprintln!("{failure}");
            ExitCode::FAILURE
        }
    }
}

async fn carry_out(wish: Wish) -> Result<ExitCode, Failure> {
    let root = root();
    let committed = root.join(sources::PAGE);
    match wish {
        Wish::Help => println!("{HELP}"),
        Wish::Build { out } => {
            tools::for_building(&root).await?;
            build::page(&root, &out.unwrap_or(committed)).await?;
        }
        Wish::Serve { port } => {
            tools::for_building(&root).await?;
            build::page(&root, &committed).await?;
            serve::serve(&root.join("www-demo"), port, "kelvinclock.html").await?;
        }
        Wish::Test => {
            if checks::run(&root).await.failed > 0 {
                return Ok(ExitCode::FAILURE);
            }
        }
        Wish::Fresh => {
            sources::check_fresh(&root, &committed)?;
            println!("{} is up to date", committed.display());
        }
        Wish::Look(view) => look::look(&root, &view).await?,
    }
    Ok(ExitCode::SUCCESS)
}

/// The top of the repository.
fn root() -> PathBuf {
    let here = Path::new(env!("CARGO_MANIFEST_DIR"));
    here.ancestors().nth(2).unwrap_or(here).to_owned()
}

fn parse(mut parser: lexopt::Parser) -> Result<Wish, lexopt::Error> {
    let name = match parser.next()? {
        Some(Value(name)) => name.string()?,
        Some(Long("help") | Short('h')) | None => return Ok(Wish::Help),
        Some(other) => return Err(other.unexpected()),
    };
    let mut wish = match name.as_str() {
        "help" => Wish::Help,
        "serve" => Wish::Serve { port: serve::USUAL_PORT },
        "build" => Wish::Build { out: None },
        "test" => Wish::Test,
        "fresh" => Wish::Fresh,
        "look" => Wish::Look(look::View {
            page: root().join(sources::PAGE),
            fragment: String::new(),
            width: 1280,
            height: 900,
            dark: false,
            out: PathBuf::new(),
        }),
        _ => return Err(format!("there is no command {name:?}").into()),
    };
    while let Some(argument) = parser.next()? {
        match (&mut wish, argument) {
            (Wish::Serve { port }, Long("port")) => *port = parser.value()?.parse()?,
            (Wish::Build { out }, Long("out")) => *out = Some(parser.value()?.into()),
            (Wish::Look(view), Long("page" | "file")) => view.page = parser.value()?.into(),
            (Wish::Look(view), Long("fragment")) => view.fragment = parser.value()?.string()?,
            (Wish::Look(view), Long("width")) => view.width = parser.value()?.parse()?,
            (Wish::Look(view), Long("height")) => view.height = parser.value()?.parse()?,
            (Wish::Look(view), Long("dark")) => view.dark = true,
            (Wish::Look(view), Long("out")) => view.out = parser.value()?.into(),
            (_, other) => return Err(other.unexpected()),
        }
    }
    match &wish {
        Wish::Look(view) if view.out.as_os_str().is_empty() => {
            Err("`look` needs --out and a path for the picture".into())
        }
        _ => Ok(wish),
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    fn parsed(line: &str) -> Result<Wish, String> {
        parse(lexopt::Parser::from_args(line.split_whitespace())).map_err(|error| error.to_string())
    }

    #[test]
    fn commands_and_options() {
        assert_eq!(parsed(""), Ok(Wish::Help));
        assert_eq!(parsed("serve"), Ok(Wish::Serve { port: 8630 }));
        assert_eq!(parsed("serve --port 9000"), Ok(Wish::Serve { port: 9000 }));
        assert_eq!(parsed("build --out a.html"), Ok(Wish::Build { out: Some("a.html".into()) }));
        let Ok(Wish::Look(view)) = parsed("look --dark --width=390 --out x.png") else {
            unreachable!("`look` is a command")
        };
        assert!(view.dark && view.width == 390 && view.out == Path::new("x.png"));
    }

    #[test]
    fn what_is_not_understood_is_named() {
        assert!(parsed("bake").unwrap_err().contains("\"bake\""));
        assert!(parsed("fresh --out x").unwrap_err().contains("--out"));
        assert!(parsed("look --dark").unwrap_err().contains("--out"));
        assert!(parsed("serve --port many").unwrap_err().contains("many"));
    }

    #[test]
    fn the_root_holds_the_workspace() {
        assert!(root().join("Cargo.lock").is_file());
    }
}
