//! Lines from a terminal that cannot move its cursor: a prompt, a line, and
//! more lines while the entry goes on.

use super::{Line, entry};
use crate::cli::{self, Failure};
use crate::output::look;
use std::io::{self, BufRead};

/// A terminal that only takes one line after the other.
pub(super) struct Plain;

impl Plain {
    /// The next entry. One that the input ends in the middle of is returned
    /// as far as it goes.
    pub(super) fn line(&mut self, prompt: &str) -> Result<Line, Failure> {
        cli::print(prompt)?;
        let mut text = String::new();
        loop {
            let mut bytes = Vec::new();
            let read = io::stdin().lock().read_until(b'\n', &mut bytes);
            match read {
                Ok(0) if text.is_empty() => {
                    cli::print("\n")?;
                    return Ok(Line::Ended);
                }
                Ok(0) => return Ok(Line::Text(text)),
                Ok(_) => {}
                Err(error) => return Err(Failure::new(format!("the keyboard: {}", cli::reason(&error)))),
            }
            let Ok(line) = String::from_utf8(bytes) else {
                cli::complain("that line is not UTF-8 text, so it was dropped\n");
                return Ok(Line::Cleared);
            };
            text.push_str(&line);
            if !entry::goes_on(text.trim_end_matches(['\r', '\n'])) || line.trim().is_empty() {
                return Ok(Line::Text(text));
            }
            cli::print(&" ".repeat(look::width(prompt)))?;
        }
    }
}
