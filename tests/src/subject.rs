//! What is tested: the only place of the suites that calls the crates.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::Path;
use zij_lang::ast::{Statement, StatementKind};
use zij_lang::cli::SheetFolder;
use zij_lang::diagnostic::{Diagnostic, render};
use zij_lang::output::{Look, text};
use zij_lang::report::{Frame, Item, Numbers, Report, Shown};
use zij_lang::session::{Files, Hint, NoFiles, Session};
use zij_lang::source::{Source, Span};
use zij_lang::{parser, print};

/// A sheet that is run without any file.
#[must_use]
pub fn run(text: &str) -> Report {
    run_in(Box::new(NoFiles), text)
}

/// Runs a sheet; a panic becomes a diagnostic, so that a suite goes on to its
/// other sheets and fails with all that is wrong.
fn run_in(files: Box<dyn Files>, text: &str) -> Report {
    let source = Source::new("sheet", text);
    let work = AssertUnwindSafe(|| Session::new(files).run(&source));
    catch_unwind(work).unwrap_or_else(|_| {
        let panicked = Diagnostic::error("panic", "the program panicked", Span::new(0, 1), "");
        Report {
            sources: vec![source.clone()],
            diagnostics: vec![(0, panicked)],
            ..Report::default()
        }
    })
}

/// A sheet that is checked only.
#[must_use]
pub fn check_only(text: &str) -> Report {
    Session::new(Box::new(NoFiles)).check(&Source::new("sheet", text))
}

/// A sheet of the repository, run with the files of its own folder.
#[must_use]
pub fn run_at(path: &Path, text: &str) -> Report {
    run_in(Box::new(SheetFolder::of(path)), text)
}

/// A sheet run with some `NAME=VALUE`.
///
/// # Errors
/// The sentence with which an assignment is refused.
pub fn run_given(text: &str, givens: &[&str]) -> Result<Report, String> {
    let mut session = Session::new(Box::new(NoFiles));
    for given in givens {
        session.give(given)?;
    }
    Ok(session.run(&Source::new("sheet", text)))
}

/// Files that exist for one test.
pub struct Folder(pub Vec<(&'static str, &'static str)>);

impl Files for Folder {
    fn read(&self, path: &str) -> Result<Vec<u8>, String> {
        let found = self.0.iter().find(|(name, _)| *name == path);
        found
            .map(|(_, text)| text.as_bytes().to_vec())
            .ok_or_else(|| format!("{path}: no such file"))
    }
}

/// A sheet run with files that exist for this test.
#[must_use]
pub fn run_with(files: Folder, text: &str) -> Report {
    run_in(Box::new(files), text)
}

/// What is wrong with the form of a text, before any meaning.
#[must_use]
pub fn form(text: &str) -> Vec<Diagnostic> {
    parser::parse(text).diagnostics
}

/// The statements of a text.
#[must_use]
pub fn statements(text: &str) -> Vec<Statement> {
    parser::parse(text).statements
}

/// The statements printed again.
#[must_use]
pub fn printed(statements: &[Statement]) -> String {
    print::sheet(statements)
}

/// The diagnostics of the sheet itself; those of other sources are none of its.
#[must_use]
pub fn own_diagnostics(report: &Report) -> Vec<Diagnostic> {
    let own = report.diagnostics.iter().filter(|(source, _)| *source == 0);
    own.map(|(_, diagnostic)| diagnostic.clone()).collect()
}

/// The places of the statements that show something, in order; `report.items`
/// has one entry for each.
#[must_use]
pub fn showing(text: &str) -> Vec<Span> {
    let shows = |statement: &Statement| match statement.kind {
        StatementKind::Result(_)
        | StatementKind::ResultOf(..)
        | StatementKind::Claim(..)
        | StatementKind::Table(_)
        | StatementKind::Explain(_)
        | StatementKind::Help(_)
        | StatementKind::Expression(..) => true,
        StatementKind::Assume(_)
        | StatementKind::Model(..)
        | StatementKind::Given(_)
        | StatementKind::Value(_)
        | StatementKind::Function(..)
        | StatementKind::Figure(_)
        | StatementKind::Read(_)
        | StatementKind::Include(_)
        | StatementKind::Unit(..)
        | StatementKind::Tally(_)
        | StatementKind::Correlate(..)
        | StatementKind::Broken => false,
    };
    let statements = statements(text);
    statements
        .iter()
        .filter(|one| shows(one))
        .map(|one| one.span)
        .collect()
}

/// What is known of a shown thing in a few words: `a length (comoving)`,
/// `agrees`, `disagrees`.
#[must_use]
pub fn words(item: &Item) -> String {
    match item {
        Item::Result(shown) | Item::Printed(shown) => dimension_words(shown),
        Item::Claim(claim) => match claim.agrees {
            Some(true) => "agrees".into(),
            Some(false) => "disagrees".into(),
            None => "no verdict".into(),
        },
        Item::Table(table) => format!("{} rows", table.rows()),
        Item::Text(_) => "text".into(),
    }
}

fn dimension_words(shown: &Shown) -> String {
    if shown.dimension.contains('(') {
        return shown.dimension.clone();
    }
    match shown.frame {
        Frame::Proper => shown.dimension.clone(),
        Frame::Comoving => format!("{} (comoving)", shown.dimension),
        Frame::Mixed => format!("{} (mixed frame)", shown.dimension),
    }
}

/// The number a sheet ends on: its last result or printed value.
#[must_use]
pub fn last_number(report: &Report) -> Option<f64> {
    let shown = report.items.iter().rev().find_map(|item| match item {
        Item::Result(shown) | Item::Printed(shown) => Some(shown),
        Item::Claim(_) | Item::Table(_) | Item::Text(_) => None,
    })?;
    match shown.value {
        Numbers::Scalar(number) => Some(number),
        Numbers::Series(_) | Numbers::Truth(_) | Numbers::Truths(_) | Numbers::Never | Numbers::Missing => {
            None
        }
    }
}

/// The claims of a report that do not agree, each in a line.
#[must_use]
pub fn unmet_claims(report: &Report) -> Vec<String> {
    let unmet = report.items.iter().filter_map(|item| match item {
        Item::Claim(claim) if claim.agrees != Some(true) => Some(format!(
            "{}: computed {:?} {}",
            claim.source, claim.computed, claim.unit
        )),
        Item::Claim(_) | Item::Result(_) | Item::Printed(_) | Item::Table(_) | Item::Text(_) => None,
    });
    unmet.collect()
}

/// Everything said of a sheet, as text for a failing test.
#[must_use]
pub fn said(report: &Report) -> String {
    let diagnostics = render::render(&report.diagnostics, &report.sources, &Look::PLAIN);
    format!("{diagnostics}{}", text::render(report, &Look::PLAIN))
}

/// The dimension of an expression after some statements, in words.
#[must_use]
pub fn dimension(before: &str, expression: &str) -> String {
    let mut session = Session::new(Box::new(NoFiles));
    let _ = session.enter(&Source::new("before", before));
    match session.hint(expression) {
        Hint::Dimension(words) => words,
        Hint::Wrong(why) => format!("wrong: {why}"),
        Hint::Nothing => "nothing".into(),
    }
}

/// A talk at the prompt.
pub struct Talk(Session);

impl Default for Talk {
    fn default() -> Talk {
        Talk(Session::new(Box::new(NoFiles)))
    }
}

impl Talk {
    /// One entry, and what is answered.
    pub fn enter(&mut self, entry: &str) -> String {
        let report = self.0.enter(&Source::new("entry", entry));
        let diagnostics = render::render(&report.diagnostics, &report.sources, &Look::PLAIN);
        format!("{diagnostics}{}", text::render_entry(&report, &Look::PLAIN))
    }

    /// The prompt that stands before the next entry.
    #[must_use]
    pub fn prompt(&self) -> String {
        format!("{} ∴ ", self.0.model_name())
    }
}

/// A unit of the catalogue as the properties need it.
#[derive(Clone, Debug)]
pub struct KnownUnit {
    /// Its spelling, prefix included.
    pub spelling: String,
    /// A key that units of the same dimension and frame share.
    pub dimension: String,
}

/// Every unit of the catalogue, with some of the prefixes it takes.
#[must_use]
pub fn units() -> Vec<KnownUnit> {
    let prefixes = ["", "k", "M", "G", "m", "μ", "n"];
    let spelled = |unit: &zij_stdlib::units::Unit| {
        let all = prefixes.map(|prefix| format!("{prefix}{}", unit.symbol));
        all.into_iter()
            .filter(|spelling| {
                zij_stdlib::units::find(spelling).is_some_and(|found| found.unit.symbol == unit.symbol)
            })
            .map(|spelling| KnownUnit {
                spelling,
                dimension: format!("{:?}", unit.dimension),
            })
            .collect::<Vec<_>>()
    };
    // The little h stands only beside another unit.
    let alone = zij_stdlib::units::UNITS.iter().filter(|unit| unit.symbol != "h");
    alone.flat_map(spelled).collect()
}

/// The examples of the catalogue and of the library's own sheets: the name of
/// each entry and its claim.
#[must_use]
pub fn examples() -> Vec<(String, String)> {
    let native =
        zij_stdlib::catalogue::entries().map(|entry| (entry.name.to_owned(), entry.example.to_owned()));
    let written = zij_stdlib::prelude::written()
        .iter()
        .map(|one| (one.name.to_owned(), one.example.clone()));
    native.chain(written).collect()
}

/// Runs on a pool of so many threads.
///
/// # Panics
/// If the pool cannot be built.
pub fn on_threads<T: Send>(threads: usize, work: impl FnOnce() -> T + Send) -> T {
    let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build();
    pool.expect("threads can be started").install(work)
}

/// A claim's verdict, and the slips found: their names and what they give.
#[derive(Clone, Debug)]
pub struct Judged {
    /// The verdict.
    pub agrees: Option<bool>,
    /// The slips, the likeliest first.
    pub slips: Vec<(String, f64)>,
}

/// The verdicts of a report.
#[must_use]
pub fn judged(report: &Report) -> Vec<Judged> {
    let judged = |item: &Item| match item {
        Item::Claim(claim) => Some(Judged {
            agrees: claim.agrees,
            slips: claim
                .slips
                .iter()
                .map(|slip| (slip.key.clone(), slip.gives))
                .collect(),
        }),
        Item::Result(_) | Item::Printed(_) | Item::Table(_) | Item::Text(_) => None,
    };
    report.items.iter().filter_map(judged).collect()
}

/// The single numbers that a report shows, in order.
#[must_use]
pub fn numbers(report: &Report) -> Vec<f64> {
    let number = |item: &Item| match item {
        Item::Result(Shown {
            value: Numbers::Scalar(value),
            ..
        })
        | Item::Printed(Shown {
            value: Numbers::Scalar(value),
            ..
        }) => Some(*value),
        Item::Result(_) | Item::Printed(_) | Item::Claim(_) | Item::Table(_) | Item::Text(_) => None,
    };
    report.items.iter().filter_map(number).collect()
}

impl Talk {
    /// Everything the prompt asks for while a line is being typed, the cursor
    /// after so many bytes.
    pub fn assist(&self, line: &str, cursor: usize) {
        let _ = self.0.hint(line);
        let (start, _) = self.0.complete(line, cursor);
        assert!(
            line.get(start..cursor).is_some(),
            "completion of {line:?} at {cursor} starts at {start}"
        );
        for (place, _) in self.0.highlight(line) {
            assert!(
                line.get(place.clone()).is_some(),
                "colour of {line:?} at {place:?}"
            );
        }
        let _ = self.0.wants_more(line);
        let _ = self.0.names();
    }
}
