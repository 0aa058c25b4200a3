//! Golden sessions: what a user types at the prompt and what is answered.
//!
//! ```text
//! planck2018 ∴ 1 pc [m]
//! 3.0857e16 m
//! ```
//!
//! Lines with the sign `∴` are entries, and those that start with `  … ` go
//! on with one; the rest is the answer. A golden file guards appearance, never
//! a physical number. `UPDATE=1` writes the answers anew: read every line that
//! changes.

use crate::{repository, subject};
use std::fmt::Write;
use std::fs;
use std::path::Path;

const SIGN: &str = " ∴ ";
const MORE: &str = "  … ";

/// Replays every file of `tests/sessions`.
///
/// # Panics
/// If an answer differs, or there is no session.
pub fn check_sessions() {
    let paths = repository::files("tests/sessions", "txt");
    assert!(!paths.is_empty(), "no sessions");
    let mut failures = String::new();
    for path in &paths {
        let recorded = repository::read(path);
        settle(path, &recorded, &replay(&recorded), &mut failures);
    }
    assert!(
        failures.is_empty(),
        "sessions differ (UPDATE=1 writes them anew){failures}"
    );
}

/// Runs every sheet of `examples` and compares what is shown with the file of
/// the same name in `tests/sessions/examples`.
///
/// # Panics
/// If an output differs, or there is no example.
pub fn check_examples() {
    let paths = repository::files("examples", "zij");
    assert!(!paths.is_empty(), "no examples");
    let mut failures = String::new();
    for path in &paths {
        let name = path.file_stem().unwrap_or_default();
        let golden = repository::root()
            .join("tests/sessions/examples")
            .join(name)
            .with_extension("out");
        let shown = subject::said(&subject::run_at(path, &repository::read(path)));
        settle(
            &golden,
            &fs::read_to_string(&golden).unwrap_or_default(),
            &shown,
            &mut failures,
        );
    }
    assert!(
        failures.is_empty(),
        "outputs differ (UPDATE=1 writes them anew){failures}"
    );
}

/// Writes a golden file anew where that is asked for, and otherwise notes the
/// difference.
fn settle(path: &Path, recorded: &str, now: &str, failures: &mut String) {
    if recorded == now {
        return;
    }
    if std::env::var_os("UPDATE").is_some() {
        let written = fs::write(path, now);
        written.unwrap_or_else(|error| panic!("{}: {error}", path.display()));
    } else {
        let _ = write!(
            failures,
            "\n==== {}\n{}",
            repository::relative(path),
            difference(recorded, now)
        );
    }
}

/// The session with the answers given now.
#[must_use]
pub fn replay(recorded: &str) -> String {
    let mut talk = subject::Talk::default();
    let mut text = String::new();
    for comment in recorded.lines().take_while(|line| !line.contains(SIGN)) {
        let _ = writeln!(text, "{comment}");
    }
    for entry in entries(recorded) {
        let shown = entry.replace('\n', &format!("\n{MORE}"));
        let _ = writeln!(text, "{}{shown}", talk.prompt());
        text.push_str(&talk.enter(&entry));
    }
    text
}

fn entries(recorded: &str) -> Vec<String> {
    let mut entries: Vec<String> = Vec::new();
    for line in recorded.lines() {
        if let Some((_, entry)) = line.split_once(SIGN) {
            entries.push(entry.into());
        } else if let (Some(entry), Some(more)) = (entries.last_mut(), line.strip_prefix(MORE)) {
            let _ = write!(entry, "\n{more}");
        }
    }
    entries
}

/// What differs between two texts: the lines between their common beginning
/// and their common end.
fn difference(recorded: &str, replayed: &str) -> String {
    let (old, new): (Vec<&str>, Vec<&str>) = (recorded.lines().collect(), replayed.lines().collect());
    let same = old
        .iter()
        .zip(&new)
        .take_while(|(one, other)| one == other)
        .count();
    let (old, new) = (&old[same..], &new[same..]);
    let backwards = old.iter().rev().zip(new.iter().rev());
    let end = backwards.take_while(|(one, other)| one == other).count();
    let lines = |sign: &str, lines: &[&str]| -> String {
        lines[..lines.len() - end]
            .iter()
            .map(|line| format!("{sign} {line}\n"))
            .collect()
    };
    format!("line {}:\n{}{}", same + 1, lines("-", old), lines("+", new))
}
