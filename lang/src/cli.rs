//! The command line: what is to be done, with which files, and the status the
//! process ends with.
//!
//! | status | meaning |
//! |---|---|
//! | 0 | all is well |
//! | 1 | a claim disagrees |
//! | 2 | the sheet has an error and nothing ran; or a wrong command line, or a file that cannot be read or written |
//! | 3 | a value could not be computed |

mod arguments;
mod files;
mod run;
mod terminal;

pub use files::SheetFolder;
pub(crate) use files::{read_standard_input, reason, write_new, write_output};
pub(crate) use run::write_tables;
pub(crate) use terminal::{complain, print};
pub use terminal::{error_look, output_look};

use arguments::Task;
use std::process::ExitCode;

/// Why a command ended before its work was done: a reason in one line.
#[derive(Debug)]
pub struct Failure(String);

impl Failure {
    /// A failure for this reason.
    pub fn new(reason: impl Into<String>) -> Failure {
        Failure(reason.into())
    }
}

impl std::fmt::Display for Failure {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(&self.0)
    }
}

/// The status of a wrong command line, and of files that cannot be read or
/// written.
pub(crate) const STATUS_UNUSABLE: u8 = 2;

/// Runs the program with the arguments of the process.
#[must_use]
pub fn main() -> ExitCode {
    let status = match arguments::read(std::env::args_os()) {
        Ok(invocation) => perform(&invocation),
        Err(arguments::Refusal::Shown(page)) => terminal::print(&page).map(|()| 0),
        Err(arguments::Refusal::Wrong(reason)) => Err(Failure::new(reason)),
    };
    ExitCode::from(status.unwrap_or_else(|failure| {
        terminal::complain(&format!("zij: {}\n", failure.0));
        STATUS_UNUSABLE
    }))
}

fn perform(invocation: &arguments::Invocation) -> Result<u8, Failure> {
    match &invocation.task {
        Task::Prompt => run::prompt(invocation),
        Task::Sheet(path) => run::sheet(path, invocation),
        Task::Line(text) => run::line(text, invocation),
        Task::Check(paths) => run::check(paths, invocation),
        Task::Referee(paths) => run::referee(paths, invocation),
        Task::Help(topic) => run::help(topic),
        Task::NotYet(word) => Err(Failure::new(format!("{word}: not yet"))),
    }
}
