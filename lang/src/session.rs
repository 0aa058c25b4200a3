//! A session: text in, values and diagnostics out. It touches no terminal,
//! and files only through [`Files`].

mod assist;
mod evaluate;
mod explain;
mod repair;
mod words;

use crate::ast::StatementKind;
use crate::check::{Checker, Head, Meaning, NoHead, Outside, Space, Task};
use crate::data;
use crate::report::Report;
use crate::source::Source;

/// How a session reaches files. Paths are relative to the sheet's folder.
pub trait Files {
    /// The bytes of a file, or a sentence on why not.
    fn read(&self, path: &str) -> Result<Vec<u8>, String>;
}

/// No files at all.
pub struct NoFiles;

impl Files for NoFiles {
    fn read(&self, path: &str) -> Result<Vec<u8>, String> {
        Err(format!("{path}: no files can be read here"))
    }
}

/// A sequence of sheets or entries that share their names.
pub struct Session {
    files: Box<dyn Files>,
    checker: Checker,
}

/// What the name under the cursor could become.
#[derive(Clone, Debug, PartialEq)]
pub struct Completion {
    /// The name.
    pub name: String,
    /// `function`, `constant`, `unit`, `model`, `yours`.
    pub kind: &'static str,
    /// Signature in field notation and meaning: `D_C(z) [cMpc]  comoving distance …`.
    pub about: String,
}

/// What is known of a line before Enter.
#[derive(Clone, Debug, PartialEq)]
pub enum Hint {
    /// Nothing to say.
    Nothing,
    /// The dimension so far: `a length (comoving)`.
    Dimension(String),
    /// What is wrong, in one line.
    Wrong(String),
}

/// What a name is, for colouring.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum NameKind {
    /// A function, of the library or of the user.
    Function,
    /// A value or constant.
    Value,
    /// A unit.
    Unit,
    /// A model or a model parameter.
    Model,
    /// A statement word or keyword.
    Keyword,
    /// A number.
    Number,
    /// A string or a comment.
    Text,
    /// Not known.
    Unknown,
}

/// What the checker may reach through the session's files.
struct Reach<'a>(&'a dyn Files);

impl Outside for Reach<'_> {
    fn sheet(&self, path: &str) -> Result<Source, String> {
        let bytes = self.0.read(path)?;
        let text = String::from_utf8(bytes).map_err(|_| format!("{path}: not UTF-8 text"))?;
        Ok(Source::new(path, &text))
    }

    fn head(&self, path: &str) -> Result<Head, NoHead> {
        let bytes = self.0.read(path).map_err(NoHead::Unreadable)?;
        let columns = data::read(path, &bytes).map_err(NoHead::Malformed)?.columns;
        Ok(Head { columns })
    }
}

impl Session {
    /// A session with the library and nothing else.
    #[must_use]
    pub fn new(files: Box<dyn Files>) -> Session {
        Session {
            files,
            checker: Checker::new(),
        }
    }

    /// Overrides `given NAME`, as `--given z=1.3` does. The error is a
    /// sentence.
    ///
    /// # Errors
    /// Text that is not `NAME=VALUE`.
    pub fn give(&mut self, assignment: &str) -> Result<(), String> {
        let (name, value) = assignment.split_once('=').ok_or("write it as NAME=VALUE")?;
        let (name, value) = (name.trim(), value.trim());
        if name.is_empty() || value.is_empty() {
            return Err("write it as NAME=VALUE".into());
        }
        let parsed = crate::parser::parse(value);
        if let Some(wrong) = parsed.diagnostics.first() {
            return Err(wrong.message.clone());
        }
        match parsed.statements.as_slice() {
            [one] if matches!(one.kind, StatementKind::Expression(..)) => {}
            _ => return Err(format!("{value} is not a value")),
        }
        self.checker.givens.push((name.into(), value.into()));
        Ok(())
    }

    /// Checks a whole sheet and evaluates nothing.
    pub fn check(&mut self, source: &Source) -> Report {
        let before = self.checker.clone();
        self.checker.check(source.clone(), &Reach(&*self.files));
        self.report(&before, source)
    }

    /// Checks a whole sheet and, if it has no error, runs it.
    pub fn run(&mut self, source: &Source) -> Report {
        let mut report = self.check(source);
        if !report.has_errors() {
            evaluate::evaluate(&self.checker, &*self.files, &mut report);
        }
        report
    }

    /// Checks a whole sheet and, if it has no error, judges its claims;
    /// nothing else is evaluated.
    pub fn referee(&mut self, source: &Source) -> Report {
        let mut report = self.check(source);
        if !report.has_errors() {
            self.checker.tasks.retain(|task| matches!(task, Task::Claim(_)));
            evaluate::evaluate(&self.checker, &*self.files, &mut report);
        }
        report
    }

    /// One entry at the prompt (may be several lines): names stay, a later
    /// binding replaces an earlier one, `that` is the last value.
    pub fn enter(&mut self, source: &Source) -> Report {
        let before = self.checker.clone();
        self.checker.at_prompt = true;
        self.checker.tasks.clear();
        self.checker.diagnostics.clear();
        self.checker.check(source.clone(), &Reach(&*self.files));
        let mut report = self.report(&before, source);
        if report.has_errors() {
            self.checker = before;
        } else {
            evaluate::evaluate(&self.checker, &*self.files, &mut report);
        }
        report
    }

    /// What the checker found, with the repairs that are proved to help.
    fn report(&self, before: &Checker, source: &Source) -> Report {
        let mut diagnostics = self.checker.diagnostics.clone();
        repair::prove(&mut diagnostics, before, source, &Reach(&*self.files));
        Report {
            sources: self.checker.sources.clone(),
            diagnostics,
            ..Report::default()
        }
    }

    /// The names bound at the prompt, each with its dimension in words and
    /// its source text, in order.
    #[must_use]
    pub fn names(&self) -> Vec<(String, String, String)> {
        let visible = self.checker.environment.visible();
        let own = visible
            .filter(|(_, binding)| !matches!(binding.space, Space::LibraryValue | Space::LibraryFunction));
        own.map(|(id, binding)| {
            let (name, what) = match &binding.meaning {
                Meaning::Value(value) => (
                    binding.name.to_string(),
                    self.checker.describe_scheme(&value.scheme),
                ),
                Meaning::Function(_) => (self.checker.signature_of(id), "a function".into()),
                Meaning::Model(_) => (binding.name.to_string(), "a model".into()),
                Meaning::Table(_) => (binding.name.to_string(), "a table".into()),
                Meaning::Broken => (binding.name.to_string(), String::new()),
            };
            (name, what, self.statement_text(binding.place))
        })
        .collect()
    }

    /// The text of the statement that a place is in.
    fn statement_text(&self, place: crate::check::Place) -> String {
        let text = &self.checker.sources[usize::from(place.source)].text;
        let parsed = crate::parser::parse(text);
        let around = |span: crate::source::Span| span.start <= place.span.start && place.span.end <= span.end;
        let statement = parsed.statements.iter().find(|statement| around(statement.span));
        statement.map_or_else(String::new, |statement| text[statement.span.range()].to_owned())
    }

    /// Forgets a name. The error is a sentence.
    ///
    /// # Errors
    /// A name that is not bound.
    pub fn strike(&mut self, name: &str) -> Result<(), String> {
        let spaces = [Space::Value, Space::Function, Space::Model];
        let struck = spaces.map(|space| self.checker.environment.strike(space, name));
        if struck.contains(&true) {
            Ok(())
        } else {
            Err(format!("there is no name {name} to strike"))
        }
    }

    /// The name of the assumed model, for the prompt.
    #[must_use]
    pub fn model_name(&self) -> String {
        match &self.checker.environment.assumed {
            None => crate::lower::DEFAULT_MODEL.into(),
            Some(model) if model.written.settings.is_empty() => model.written.base.node.to_string(),
            Some(model) => format!("{} with …", model.written.base.node),
        }
    }

    /// Whether an entry wants another line: an open bracket, a trailing
    /// operator, comma, `where` or `with`.
    #[must_use]
    pub fn wants_more(&self, entry: &str) -> bool {
        crate::parser::wants_more(entry)
    }
}
