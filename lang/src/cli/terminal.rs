//! What the terminal can show, and writing to it. Nothing here panics where
//! the reader has gone away.

use super::Failure;
use crate::output::Look;
use std::io::{IsTerminal, Write};

/// Columns where no terminal says how many.
const USUAL_WIDTH: usize = 100;

/// Narrower than this nothing useful can be laid out.
const LEAST_WIDTH: usize = 20;

/// What standard output can show.
#[must_use]
pub fn output_look() -> Look {
    let stream = std::io::stdout();
    look(stream.is_terminal(), terminal_size::terminal_size_of(stream))
}

/// What standard error can show.
#[must_use]
pub fn error_look() -> Look {
    let stream = std::io::stderr();
    look(stream.is_terminal(), terminal_size::terminal_size_of(stream))
}

fn look(terminal: bool, size: Option<(terminal_size::Width, terminal_size::Height)>) -> Look {
    let dumb = variable("TERM").as_deref() == Some("dumb");
    let width = size.map(|(width, _)| width.0.into()).filter(|width| *width > 0);
    let columns = || variable("COLUMNS").and_then(|text| text.parse().ok());
    Look {
        width: width.or_else(columns).unwrap_or(USUAL_WIDTH).max(LEAST_WIDTH),
        colour: terminal && !dumb && variable("NO_COLOR").is_none(),
        // A pipe or a file takes UTF-8, as the sheets are.
        unicode: !terminal || (!dumb && utf8_locale()),
    }
}

/// Whether the locale in force says UTF-8. The first of these variables that
/// is set decides (POSIX).
fn utf8_locale() -> bool {
    let names = ["LC_ALL", "LC_CTYPE", "LANG"];
    let locale = names.into_iter().find_map(variable).unwrap_or_default();
    let locale = locale.to_ascii_lowercase();
    locale.contains("utf-8") || locale.contains("utf8")
}

/// An environment variable that is set to something.
fn variable(name: &str) -> Option<String> {
    std::env::var(name).ok().filter(|value| !value.is_empty())
}

/// Writes to standard output.
pub fn print(text: &str) -> Result<(), Failure> {
    let mut stream = std::io::stdout().lock();
    let written = stream.write_all(text.as_bytes()).and_then(|()| stream.flush());
    written.map_err(|error| {
        Failure::new(match error.kind() {
            std::io::ErrorKind::BrokenPipe => "the output was closed before all was written".into(),
            _ => format!("cannot write the output: {}", super::files::reason(&error)),
        })
    })
}

/// Writes to standard error; if that is gone, there is nobody to tell.
pub fn complain(text: &str) {
    let _ = std::io::stderr().lock().write_all(text.as_bytes());
}
