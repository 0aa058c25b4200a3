//! Fixtures: a sheet that says itself what is to be said of it, in comments
//! under its lines.
//!
//! ```text
//! given d [Mpc] = 30 Mpc
//! t = d + 5 s
//! #   ^ a length
//! #       ^^^ error unlike-sides: cannot add … a time
//! #? t = d + (5 s) * c
//! D_C(1)
//! #: a length (comoving)
//! claim: 1 kpc is 3 pc
//! #: disagrees
//! ```
//!
//! - Carets mark the characters of the last line above that is no such
//!   comment. `#|` marks its first character and `#<^^` its first four, which
//!   carets cannot reach. A place that goes on to later lines is marked to the
//!   end of its first; an empty place by one caret.
//! - `error` and `warning` are followed by the code, and after a colon by words
//!   of the message; `…` stands for anything between.
//! - Other words are those of a label at that place.
//! - `#?` gives the line as one of the repairs offered leaves it.
//! - `#:` says what is known of the value shown by the statement above.
//!
//! Every diagnostic must be marked, but for unused values beside an error, and
//! every mark met. A sheet with no error
//! marked must run, and its claims must agree unless `#: disagrees` follows.
//! Every repair offered, marked or not, must make its diagnostic go away.

use crate::repository;
use crate::subject;
use std::fmt::Write;
use std::path::Path;
use zij_lang::diagnostic::{Diagnostic, Fix, Severity};
use zij_lang::report::{Item, Report};
use zij_lang::source::{Places, Span};

/// Where a fixture has an error, values that nothing uses are beside the point.
const UNUSED: &str = "unused-value";

/// A comment that asserts something.
#[derive(Debug)]
struct Mark<'a> {
    /// The line it speaks of, from 0.
    line: usize,
    asserts: Assertion<'a>,
}

#[derive(Debug)]
enum Assertion<'a> {
    Diagnostic {
        columns: (usize, usize),
        severity: Severity,
        code: &'a str,
        words: &'a str,
    },
    Label {
        columns: (usize, usize),
        words: &'a str,
    },
    Repair(&'a str),
    Shown(&'a str),
}

/// Runs a fixture that needs no files.
///
/// # Panics
/// If anything is not as the fixture says.
#[track_caller]
pub fn check(sheet: &str) {
    verdict(sheet, &subject::run).unwrap_or_else(|failure| panic!("{failure}"));
}

/// A fixture of form alone: what the parser says of it.
///
/// # Panics
/// If anything is not as the fixture says.
#[track_caller]
pub fn check_form(sheet: &str) {
    form_verdict(sheet).unwrap_or_else(|failure| panic!("{failure}"));
}

/// The dimension of the last expression of a sheet, in words.
///
/// # Panics
/// If it is another.
#[track_caller]
pub fn check_dimension(sheet: &str, expected: &str) {
    let (before, last) = sheet.trim_end().rsplit_once('\n').unwrap_or(("", sheet));
    assert_eq!(subject::dimension(before, last), expected, "{sheet}");
}

/// One of the repairs offered for `before` gives `after`, which has no error.
///
/// # Panics
/// If none does.
#[track_caller]
pub fn check_fix(before: &str, after: &str) {
    let report = subject::run(before);
    let fixes = report
        .diagnostics
        .iter()
        .flat_map(|(_, diagnostic)| &diagnostic.fixes);
    let repaired: Vec<String> = fixes.map(|fix| apply(before, fix)).collect();
    assert!(
        repaired.iter().any(|text| text == after),
        "no repair gives\n{after}\nbut\n{repaired:#?}\nafter\n{}",
        subject::said(&report)
    );
    let again = subject::run(after);
    assert!(
        !again.has_errors(),
        "the repair is wrong itself:\n{}",
        subject::said(&again)
    );
}

/// Runs every fixture file below a folder of `tests/sheets`; the files of a
/// fixture lie beside it.
///
/// # Panics
/// If any is not as it says, or there is none.
pub fn check_sheets(folder: &str) {
    each_sheet(folder, |path, sheet| {
        verdict(sheet, &|text| subject::run_at(path, text))
    });
}

/// As [`check_sheets`], for form alone.
///
/// # Panics
/// If any is not as it says, or there is none.
pub fn check_form_sheets(folder: &str) {
    each_sheet(folder, |_, sheet| form_verdict(sheet));
}

fn each_sheet(folder: &str, verdict: impl Fn(&Path, &str) -> Result<(), String>) {
    let paths = repository::files(&format!("tests/sheets/{folder}"), "zij");
    assert!(!paths.is_empty(), "no fixtures in {folder}");
    let mut failures = String::new();
    let mut failed = 0;
    for path in &paths {
        if let Err(failure) = verdict(path, &repository::read(path)) {
            failed += 1;
            let _ = write!(failures, "\n==== {}\n{failure}", repository::relative(path));
        }
    }
    assert!(
        failed == 0,
        "{failed} of {} fixtures fail\n{failures}",
        paths.len()
    );
}

fn verdict(sheet: &str, run: &dyn Fn(&str) -> Report) -> Result<(), String> {
    let marks = marks(sheet);
    let report = run(sheet);
    let diagnostics = subject::own_diagnostics(&report);
    let mut faults = compare(sheet, &marks, &diagnostics);
    faults.extend(compare_shown(sheet, &marks, &report));
    let foreign = report.diagnostics.iter().filter(|(source, _)| *source != 0);
    faults.extend(foreign.map(|(_, one)| format!("said of another source: {one:?}")));
    let again = |text: &str| subject::own_diagnostics(&run(text));
    faults.extend(idle_repairs(sheet, &diagnostics, &again));
    finish(sheet, &faults, &diagnostics, &subject::said(&report))
}

fn form_verdict(sheet: &str) -> Result<(), String> {
    let marks = marks(sheet);
    let diagnostics = subject::form(sheet);
    let mut faults = compare(sheet, &marks, &diagnostics);
    faults.extend(idle_repairs(sheet, &diagnostics, &subject::form));
    finish(sheet, &faults, &diagnostics, "")
}

fn finish(sheet: &str, faults: &[String], found: &[Diagnostic], said: &str) -> Result<(), String> {
    if faults.is_empty() {
        return Ok(());
    }
    let mut text = faults.join("\n");
    let _ = write!(text, "\n-- found, as marks:\n{}", annotated(sheet, found));
    if !said.is_empty() {
        let _ = write!(text, "-- said:\n{said}");
    }
    Err(text)
}

// Reading the marks.

fn marks(sheet: &str) -> Vec<Mark<'_>> {
    let mut marks = Vec::new();
    let mut line = 0;
    for (number, text) in sheet.lines().enumerate() {
        match assertion(text) {
            Some(asserts) => marks.push(Mark { line, asserts }),
            None => line = number,
        }
    }
    marks
}

fn assertion(line: &str) -> Option<Assertion<'_>> {
    if let Some(repaired) = line.strip_prefix("#? ") {
        return Some(Assertion::Repair(repaired));
    }
    if let Some(words) = line.strip_prefix("#: ") {
        return Some(Assertion::Shown(words.trim()));
    }
    let (columns, words) = carets(line)?;
    for (word, severity) in [("error ", Severity::Error), ("warning ", Severity::Warning)] {
        if let Some(rest) = words.strip_prefix(word) {
            let (code, words) = rest.split_once(':').unwrap_or((rest, ""));
            let (code, words) = (code.trim(), words.trim());
            return Some(Assertion::Diagnostic {
                columns,
                severity,
                code,
                words,
            });
        }
    }
    Some(Assertion::Label { columns, words })
}

/// The characters that a line of carets marks, and the words after them.
fn carets(line: &str) -> Option<((usize, usize), &str)> {
    if let Some(words) = line.strip_prefix("#|") {
        return Some(((0, 1), words.trim()));
    }
    let comment = line.trim_start();
    let body = comment.strip_prefix('#')?;
    let indent = line.len() - body.len();
    let (start, carets) = match body.strip_prefix('<') {
        Some(rest) => (0, rest),
        None => (indent + body.len() - body.trim_start().len(), body.trim_start()),
    };
    let words = carets.trim_start_matches('^');
    let end = line.len() - words.len();
    (start < end && (start == 0 || carets.starts_with('^'))).then_some(((start, end), words.trim()))
}

// Comparing.

fn compare(sheet: &str, marks: &[Mark<'_>], found: &[Diagnostic]) -> Vec<String> {
    let places = Places::new(sheet);
    let mut claimed = vec![false; found.len()];
    let mut faults = Vec::new();
    for mark in marks {
        let met = match &mark.asserts {
            Assertion::Diagnostic {
                columns,
                severity,
                code,
                words,
            } => {
                let fits = |(at, one): &(usize, &Diagnostic)| {
                    !claimed[*at]
                        && one.severity == *severity
                        && one.code == *code
                        && columns_of(sheet, &places, one.at.span) == (mark.line, columns.0, columns.1)
                        && holds(&one.message, words)
                };
                let one = found.iter().enumerate().find(fits).map(|(at, _)| at);
                one.is_some_and(|at| {
                    claimed[at] = true;
                    true
                })
            }
            Assertion::Label { columns, words } => found.iter().any(|one| {
                one.others.iter().chain([&one.at]).any(|label| {
                    columns_of(sheet, &places, label.span) == (mark.line, columns.0, columns.1)
                        && holds(&label.text, words)
                })
            }),
            Assertion::Repair(expected) => found.iter().any(|one| {
                one.fixes.iter().any(|fix| {
                    let repaired = apply(sheet, fix);
                    repaired
                        .lines()
                        .nth(mark.line)
                        .is_some_and(|line| line.trim_end() == expected.trim_end())
                })
            }),
            Assertion::Shown(_) => true,
        };
        if !met {
            faults.push(format!("not met, line {}: {:?}", mark.line + 1, mark.asserts));
        }
    }
    let wrong = found.iter().any(Diagnostic::is_error);
    let unclaimed = found.iter().zip(&claimed).filter(|(_, claimed)| !**claimed);
    let unclaimed = unclaimed.filter(|(one, _)| !(wrong && one.code == UNUSED));
    faults.extend(unclaimed.map(|(one, _)| format!("not marked: {} {}", one.code, one.message)));
    faults
}

fn compare_shown(sheet: &str, marks: &[Mark<'_>], report: &Report) -> Vec<String> {
    let mut faults = Vec::new();
    let marked_error = marks.iter().any(|mark| {
        matches!(
            mark.asserts,
            Assertion::Diagnostic {
                severity: Severity::Error,
                ..
            }
        )
    });
    if marked_error {
        if report.evaluated && !report.faulted {
            faults.push("evaluated although it has an error".into());
        }
        return faults;
    }
    let shown = subject::showing(sheet);
    if !report.has_errors() && shown.len() != report.items.len() {
        faults.push(format!(
            "{} statements show {} things",
            shown.len(),
            report.items.len()
        ));
    }
    let places = Places::new(sheet);
    for (span, item) in shown.iter().zip(&report.items) {
        let first = places.position(span.start).line - 1;
        let last = places.position(span.end).line - 1;
        let expected = marks.iter().find_map(|mark| match mark.asserts {
            Assertion::Shown(words) if (first..=last).contains(&mark.line) => Some(words),
            _ => None,
        });
        let words = subject::words(item);
        let agreed = match (expected, item) {
            (Some(expected), _) => words == expected,
            (None, Item::Claim(claim)) => claim.agrees == Some(true),
            (None, _) => true,
        };
        if !agreed {
            let wanted = expected.unwrap_or("agrees");
            faults.push(format!("line {}: {words}, not {wanted}", first + 1));
        }
    }
    faults
}

/// Repairs after which the same code still stands on the same line.
fn idle_repairs(sheet: &str, found: &[Diagnostic], again: &dyn Fn(&str) -> Vec<Diagnostic>) -> Vec<String> {
    let mut faults = Vec::new();
    let line_of = |text: &str, span: Span| text[..span.start as usize].matches('\n').count();
    for one in found {
        for fix in &one.fixes {
            let repaired = apply(sheet, fix);
            let line = line_of(sheet, one.at.span);
            let count = |text: &str, all: &[Diagnostic]| {
                let same = all.iter().filter(|other| other.code == one.code);
                same.filter(|other| line_of(text, other.at.span) == line).count()
            };
            if count(&repaired, &again(&repaired)) >= count(sheet, found) {
                faults.push(format!(
                    "the repair “{}” of {} mends nothing",
                    fix.title, one.code
                ));
            }
        }
    }
    faults
}

/// The words stand in the text, those around `…` in their order.
fn holds(text: &str, words: &str) -> bool {
    let mut rest = text;
    words.split('…').map(str::trim).all(|part| match rest.find(part) {
        Some(at) => {
            rest = &rest[at + part.len()..];
            true
        }
        None => false,
    })
}

/// The text with a repair made.
#[must_use]
pub fn apply(text: &str, fix: &Fix) -> String {
    let mut repaired = text.to_owned();
    for (span, replacement) in fix.edits.iter().rev() {
        repaired.replace_range(span.range(), replacement);
    }
    repaired
}

/// Line from 0, first column from 0 and the one past the last, in characters,
/// as carets can mark them.
fn columns_of(sheet: &str, places: &Places<'_>, span: Span) -> (usize, usize, usize) {
    let (start, end) = (places.position(span.start), places.position(span.end));
    let line = start.line - 1;
    let first = start.column - 1;
    let last = if end.line == start.line {
        end.column - 1
    } else {
        sheet.lines().nth(line).map_or(0, |text| text.chars().count())
    };
    (line, first, last.max(first + 1))
}

/// The sheet without its marks and with what was found as marks, to compare
/// and, where it is right, to copy.
fn annotated(sheet: &str, found: &[Diagnostic]) -> String {
    let places = Places::new(sheet);
    let mut text = String::new();
    for (number, line) in sheet.lines().enumerate() {
        if assertion(line).is_some() {
            continue;
        }
        let _ = writeln!(text, "{line}");
        for one in found {
            let (at, start, end) = columns_of(sheet, &places, one.at.span);
            if at != number {
                continue;
            }
            let severity = if one.is_error() { "error" } else { "warning" };
            let _ = writeln!(
                text,
                "{} {severity} {}: {}",
                underline(start, end),
                one.code,
                one.message
            );
            for fix in &one.fixes {
                let repaired = apply(sheet, fix);
                let _ = writeln!(text, "#? {}", repaired.lines().nth(number).unwrap_or(""));
            }
        }
    }
    text
}

fn underline(start: usize, end: usize) -> String {
    match (start, end) {
        (0, 1) => "#|".into(),
        (0, _) => format!("#<{}", "^".repeat(end.saturating_sub(2))),
        _ => format!("#{}{}", " ".repeat(start - 1), "^".repeat(end - start)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn carets_mark_what_stands_above_them() {
        assert_eq!(carets("#   ^^ error x"), Some(((4, 6), "error x")));
        assert_eq!(carets("#^ a"), Some(((1, 2), "a")));
        assert_eq!(carets("#| a"), Some(((0, 1), "a")));
        assert_eq!(carets("#< a"), Some(((0, 2), "a")));
        assert_eq!(carets("#<^^ a"), Some(((0, 4), "a")));
        assert_eq!(carets("  # ^ a"), Some(((4, 5), "a")));
        assert_eq!(carets("# a comment ^"), None);
        assert_eq!(carets("x = 2 ^ 3"), None);
    }

    #[test]
    fn marks_speak_of_the_line_above_all_marks() {
        let marks = marks("a\nb\n# ^ x\n#: y\n# comment\n#| z\n");
        let lines: Vec<usize> = marks.iter().map(|mark| mark.line).collect();
        assert_eq!(lines, [1, 1, 4]);
    }

    #[test]
    fn a_false_fixture_fails() {
        let sheet = "d = (1 + 2\n";
        assert!(form_verdict(sheet).is_err_and(|why| why.contains("not marked: unclosed-bracket")));
        let wrong_place = "d = (1 + 2\n#  ^ error unclosed-bracket\n";
        assert!(form_verdict(wrong_place).is_err());
        let right = "d = (1 + 2\n#   ^ error unclosed-bracket: never closed\n#? d = (1 + 2)\n";
        assert_eq!(form_verdict(right), Ok(()));
        assert!(form_verdict(&right.replace("closed\n", "opened\n")).is_err());
        assert!(form_verdict(&right.replace("2)", "3)")).is_err());
        assert!(form_verdict("d = 1\n#   ^ error unclosed-bracket\n").is_err());
    }

    #[test]
    fn words_are_found_in_their_order() {
        assert!(holds("cannot add a length and a time", "cannot add … a time"));
        assert!(!holds("a time and a length", "a length … a time"));
        assert!(holds("anything", ""));
    }
}
