//! The commands: each reads its text, lets a session work on it, and shows
//! what came out.

use super::arguments::Invocation;
use super::files::{self, SheetFolder};
use super::terminal::{self, error_look, output_look};
use super::{Failure, STATUS_UNUSABLE};
use crate::diagnostic::render;
use crate::handbook;
use crate::output::{self, Format};
use crate::repl;
use crate::report::{Item, Report, TableReport};
use crate::session::Session;
use crate::source::Source;
use std::path::Path;

/// A sheet, or standard input for `-`.
pub fn sheet(path: &Path, invocation: &Invocation) -> Result<u8, Failure> {
    let source = files::read_sheet(path)?;
    let folder = || SheetFolder::of(path);
    run(&source, folder, invocation)
}

/// The text of `-e`.
pub fn line(text: &str, invocation: &Invocation) -> Result<u8, Failure> {
    run(&Source::new("-e", text), SheetFolder::current, invocation)
}

fn run(source: &Source, folder: impl Fn() -> SheetFolder, invocation: &Invocation) -> Result<u8, Failure> {
    refuse_empty(source)?;
    let mut session = session(folder(), invocation)?;
    let report = session.run(source);
    if report.exit_status() < STATUS_UNUSABLE {
        write_tables(&report, &folder())?;
    }
    show(&report, invocation)?;
    Ok(report.exit_status())
}

/// An empty text is hardly what was meant.
fn refuse_empty(source: &Source) -> Result<(), Failure> {
    if source.text.trim().is_empty() {
        return Err(Failure::new(format!(
            "{}: empty, so there is nothing to do",
            source.name
        )));
    }
    Ok(())
}

fn session(folder: SheetFolder, invocation: &Invocation) -> Result<Session, Failure> {
    let mut session = Session::new(Box::new(folder));
    for given in &invocation.givens {
        let refused = |why| Failure::new(format!("--given {given}: {why}"));
        session.give(given).map_err(refused)?;
    }
    Ok(session)
}

/// Writes the tables that name a file, once everything has been computed.
pub fn write_tables(report: &Report, folder: &SheetFolder) -> Result<(), Failure> {
    for item in &report.items {
        if let Item::Table(table @ TableReport { path: Some(path), .. }) = item {
            folder.write(path, &output::csv::table(table))?;
        }
    }
    Ok(())
}

/// Results to standard output or the file of `-o`, diagnostics to standard
/// error. JSON holds the diagnostics itself.
fn show(report: &Report, invocation: &Invocation) -> Result<(), Failure> {
    let json = invocation.format == Format::Json;
    if !json || invocation.output.is_some() {
        complain_of(report);
    }
    let Some(path) = &invocation.output else {
        let look = output_look();
        if json || report.evaluated {
            return terminal::print(&output::render(report, invocation.format, &look));
        }
        return Ok(());
    };
    if json || report.exit_status() < STATUS_UNUSABLE {
        let text = output::render(report, invocation.format, &output::Look::PLAIN);
        return files::write_output(path, &text);
    }
    terminal::complain(&format!("{}: not written\n", path.display()));
    Ok(())
}

/// Shows the diagnostics, with a count where there are many.
fn complain_of(report: &Report) {
    let text = render::render(&report.diagnostics, &report.sources, &error_look());
    if !text.is_empty() {
        terminal::complain(&format!("{text}{}", tally(report)));
    }
}

fn tally(report: &Report) -> String {
    let errors = report
        .diagnostics
        .iter()
        .filter(|(_, one)| one.is_error())
        .count();
    if errors < 2 {
        return String::new();
    }
    let name = report.sources.first().map_or("", |source| &source.name);
    let rest = if report.evaluated {
        ""
    } else {
        ", so nothing was evaluated"
    };
    format!("\n{name}: {errors} errors{rest}\n")
}

/// Checks sheets one by one; the status is the worst of them.
pub fn check(paths: &[std::path::PathBuf], invocation: &Invocation) -> Result<u8, Failure> {
    if invocation.output.is_some() {
        return Err(Failure::new("check writes no file: leave out -o"));
    }
    let mut worst = 0;
    for path in paths {
        let status = check_one(path, invocation).unwrap_or_else(|failure| {
            terminal::complain(&format!("zij: {}\n", failure.0));
            STATUS_UNUSABLE
        });
        worst = worst.max(status);
    }
    Ok(worst)
}

fn check_one(path: &Path, invocation: &Invocation) -> Result<u8, Failure> {
    let source = files::read_sheet(path)?;
    refuse_empty(&source)?;
    let mut session = session(SheetFolder::of(path), invocation)?;
    let report = session.check(&source);
    match invocation.format {
        Format::Json => terminal::print(&output::json::render(&report))?,
        Format::Text | Format::Csv | Format::Markdown => {
            complain_of(&report);
            if !report.has_errors() {
                terminal::print(&format!("{}: checks\n", source.name))?;
            }
        }
    }
    Ok(report.exit_status())
}

/// Judges the claims of sheets; the status is the worst of them.
pub fn referee(paths: &[std::path::PathBuf], invocation: &Invocation) -> Result<u8, Failure> {
    if invocation.format == Format::Csv {
        return Err(Failure::new(
            "--as csv: the forms of a verdict are text, json and markdown",
        ));
    }
    let mut worst = 0;
    let mut reports = Vec::new();
    for path in paths {
        match judge(path, invocation) {
            Ok(report) => {
                worst = worst.max(report.exit_status());
                reports.push(report);
            }
            Err(failure) => {
                terminal::complain(&format!("zij: {}\n", failure.0));
                worst = worst.max(STATUS_UNUSABLE);
            }
        }
    }
    if invocation.format != Format::Json || invocation.output.is_some() {
        reports.iter().for_each(complain_of);
    }
    match &invocation.output {
        None => terminal::print(&output::referee::render(
            &reports,
            invocation.format,
            &output_look(),
        ))?,
        Some(path) => {
            let text = output::referee::render(&reports, invocation.format, &output::Look::PLAIN);
            files::write_output(path, &text)?;
        }
    }
    Ok(worst)
}

fn judge(path: &Path, invocation: &Invocation) -> Result<Report, Failure> {
    let source = files::read_sheet(path)?;
    let mut session = session(SheetFolder::of(path), invocation)?;
    Ok(session.referee(&source))
}

/// Pages of the handbook.
pub fn help(topic: &[String]) -> Result<u8, Failure> {
    let page = handbook::page(topic, &output_look()).map_err(Failure::new)?;
    terminal::print(&page)?;
    Ok(0)
}

/// The prompt, or entries from standard input.
pub fn prompt(invocation: &Invocation) -> Result<u8, Failure> {
    if invocation.format != Format::Text || invocation.output.is_some() {
        let reason =
            "the prompt speaks text: for another form or a file, run a sheet, or `zij -` for standard input";
        return Err(Failure::new(reason));
    }
    repl::talk(session(SheetFolder::current(), invocation)?)
}
