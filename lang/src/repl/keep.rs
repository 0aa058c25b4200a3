//! The exchange as a sheet.
//!
//! At the prompt a name may be bound again and the model assumed anew; in a
//! sheet neither may be. So the sheet that is kept says what holds at the end:
//! what was replaced, and what no longer checks without it, stands in comments.

use crate::ast::{Definition, Name, Statement, StatementKind};
use crate::cli::{self, SheetFolder};
use crate::diagnostic::Diagnostic;
use crate::parser;
use crate::session::Session;
use crate::source::Source;
use crate::token::{self, TokenKind};
use std::path::{Path, PathBuf};

/// Rounds of checking in which statements become comments. Each takes out at
/// least one; what needs more is not kept.
const MAX_ROUNDS: usize = 100;

/// A statement that has grown longer by what `that` stood for is a comment.
const MAX_THAT: usize = 4096;

/// The statements of a conversation that had no error.
#[derive(Default)]
pub(super) struct Exchange {
    statements: Vec<Kept>,
    /// What the last value at the prompt was computed from.
    that: Option<String>,
    /// The file kept last and its text, which may be replaced.
    last: Option<(PathBuf, String)>,
}

/// One statement.
#[derive(Clone)]
struct Kept {
    text: String,
    binds: Vec<Bound>,
    role: Role,
    /// Why it is a comment, if it is one.
    comment: Option<String>,
}

/// A name in its namespace: a function and a value may share one.
#[derive(Clone, Debug, PartialEq)]
enum Bound {
    Value(String),
    Function(String),
    Model(String),
    Unit(String),
}

/// What changes when the model is assumed anew.
#[derive(Clone, Copy, Debug, PartialEq)]
enum Role {
    /// The assumption itself.
    Assumes,
    /// Binds names: holds under the new model.
    Binds,
    /// Shows something: was shown under the old one.
    Shows,
}

impl Exchange {
    /// Adds an entry that had no error.
    pub(super) fn add(&mut self, text: &str) {
        let parsed = parser::parse(text);
        let starts: Vec<_> = parsed
            .statements
            .iter()
            .map(|one| one.span.start as usize)
            .collect();
        let ends = starts.iter().skip(1).copied().chain([text.len()]);
        for ((statement, start), end) in parsed.statements.iter().zip(&starts).zip(ends) {
            let written = text.get(*start..end).unwrap_or("").trim_end();
            let lines: Vec<_> = written.split('\n').map(str::trim_end).collect();
            self.add_statement(statement, &lines.join("\n"));
        }
    }

    fn add_statement(&mut self, statement: &Statement, written: &str) {
        let (role, binds) = bindings(&statement.kind);
        for earlier in &mut self.statements {
            let replaced = earlier.binds.iter().any(|bound| binds.contains(bound));
            let outdated = role == Role::Assumes && earlier.role != Role::Binds;
            if replaced || outdated {
                let why = if replaced {
                    "replaced below"
                } else {
                    "under the model before"
                };
                earlier.comment.get_or_insert_with(|| why.into());
            }
        }
        let text = self.spelled_out(written);
        if let StatementKind::Expression(_, wheres) = &statement.kind {
            self.that = wheres.is_empty().then(|| text.clone());
        }
        let kept = Kept {
            text,
            binds,
            role,
            comment: None,
        };
        match role {
            Role::Assumes => self.put_first(kept),
            Role::Binds | Role::Shows => self.statements.push(kept),
        }
    }

    /// In a sheet the model comes before all that needs it, and after what it
    /// is made of.
    fn put_first(&mut self, assumption: Kept) {
        let mut needed = words_of(&assumption.text);
        let mut before = Vec::new();
        let mut after = Vec::new();
        for kept in std::mem::take(&mut self.statements).into_iter().rev() {
            let live = kept.comment.is_none();
            if live
                && kept
                    .binds
                    .iter()
                    .any(|bound| needed.iter().any(|word| word == bound.name()))
            {
                needed.extend(words_of(&kept.text));
                before.push(kept);
            } else {
                after.push(kept);
            }
        }
        self.statements.extend(before.into_iter().rev());
        self.statements.push(assumption);
        self.statements.extend(after.into_iter().rev());
    }

    /// The statement with `that` replaced by what it stood for.
    fn spelled_out(&self, written: &str) -> String {
        let Some(that) = &self.that else {
            return written.into();
        };
        let mut text = String::new();
        let mut at = 0;
        for token in token::lex(written) {
            let range = token.span.range();
            if token.kind == TokenKind::Word && written.get(range.clone()) == Some("that") {
                text.push_str(&written[at..range.start]);
                text.push_str(&format!("({that})"));
                at = range.end;
            }
            if text.len() > MAX_THAT {
                return written.into();
            }
        }
        text.push_str(&written[at..]);
        text
    }

    /// A name was struck: what bound it is a comment.
    pub(super) fn strike(&mut self, name: &str) {
        for kept in &mut self.statements {
            if kept.binds.iter().any(|bound| bound.name() == name) {
                kept.comment.get_or_insert_with(|| "struck".into());
            }
        }
    }

    /// Writes the sheet. The result says what was done, the error why nothing
    /// was.
    pub(super) fn keep(&mut self, path: &str, model: &str) -> Result<String, String> {
        if self.statements.is_empty() {
            return Err("there is nothing to keep yet".into());
        }
        if path.trim().is_empty() {
            return Err("keep takes the name of a file: keep \"note.zij\"".into());
        }
        let (text, comments) = self.sheet(model)?;
        let target = Path::new(path);
        let replaced = self.write(target, &text)?;
        self.last = Some((target.into(), text));
        let count = self.statements.len();
        let noun = if count == 1 { "statement" } else { "statements" };
        let verb = if replaced { "kept again" } else { "kept" };
        let aside = match comments {
            0 => String::new(),
            some => format!(", {some} of them as comments"),
        };
        Ok(format!("{verb}: {count} {noun} in {path}{aside}"))
    }

    /// Whether a sheet kept before was replaced.
    fn write(&self, target: &Path, text: &str) -> Result<bool, String> {
        let written = cli::write_new(target, text).map_err(|failure| failure.to_string())?;
        if written {
            return Ok(false);
        }
        let unchanged = self.last.as_ref().is_some_and(|(path, last)| {
            path == target && std::fs::read_to_string(path).is_ok_and(|now| now == *last)
        });
        if unchanged {
            cli::write_output(target, text).map_err(|failure| failure.to_string())?;
            return Ok(true);
        }
        let name = target.display();
        Err(format!(
            "{name} is there already and stays as it is: choose another name"
        ))
    }

    /// The sheet and how many of its statements are comments. It checks, and
    /// says the model that the prompt named.
    fn sheet(&self, model: &str) -> Result<(String, usize), String> {
        let mut statements = self.statements.clone();
        if statements.iter().all(|kept| kept.role != Role::Assumes) {
            let assumption = Kept {
                text: format!("assume {model}"),
                binds: Vec::new(),
                role: Role::Assumes,
                comment: None,
            };
            statements.insert(0, assumption);
        }
        for _ in 0..MAX_ROUNDS {
            let (text, places) = laid_out(&statements);
            let mut session = Session::new(Box::new(SheetFolder::current()));
            let report = session.check(&Source::new("sheet", &text));
            let errors = report.diagnostics.iter().filter(|(_, one)| one.is_error());
            let errors: Vec<_> = errors.map(|(_, one)| one).collect();
            if errors.is_empty() {
                let comments = statements.iter().filter(|kept| kept.comment.is_some()).count();
                return Ok((text, comments));
            }
            if !comment_out(&mut statements, &places, &errors) {
                break;
            }
        }
        Err("this exchange does not make a sheet that checks; nothing is kept".into())
    }
}

/// Turns the statements with errors into comments. Whether there were any.
fn comment_out(statements: &mut [Kept], places: &[usize], errors: &[&Diagnostic]) -> bool {
    let mut changed = false;
    for error in errors {
        let after = places.partition_point(|start| *start <= error.at.span.start as usize);
        let Some(kept) = after.checked_sub(1).and_then(|at| statements.get_mut(at)) else {
            continue;
        };
        if kept.comment.is_none() {
            kept.comment = Some(error.message.clone());
            changed = true;
        }
    }
    changed
}

/// The text of the sheet, and where each statement starts in it.
fn laid_out(statements: &[Kept]) -> (String, Vec<usize>) {
    let mut text = String::from("# kept from the prompt\n");
    let mut places = Vec::with_capacity(statements.len());
    for kept in statements {
        places.push(text.len());
        match &kept.comment {
            None => text.push_str(&kept.text),
            Some(why) => text.push_str(&commented(&kept.text, why)),
        }
        text.push('\n');
    }
    (text, places)
}

fn commented(text: &str, why: &str) -> String {
    let why = crate::output::one_line(why);
    let mut lines: Vec<_> = text
        .split('\n')
        .map(|line| format!("# {}", line.trim_end()))
        .collect();
    if let Some(last) = lines.last_mut() {
        last.push_str(&format!("   ({why})"));
    }
    lines.join("\n")
}

/// The names in a text.
fn words_of(text: &str) -> Vec<String> {
    let words = token::lex(text).into_iter().filter(|token| token.kind.is_name());
    words
        .filter_map(|token| text.get(token.span.range()).map(String::from))
        .collect()
}

fn bindings(kind: &StatementKind) -> (Role, Vec<Bound>) {
    let value = |name: &Name| Bound::Value(name.node.to_string());
    let of = |definition: &Definition| value(&definition.name);
    match kind {
        StatementKind::Assume(_) => (Role::Assumes, Vec::new()),
        StatementKind::Model(name, _) => (Role::Binds, vec![Bound::Model(name.node.to_string())]),
        StatementKind::Given(one) | StatementKind::Value(one) => (Role::Binds, vec![of(one)]),
        StatementKind::Result(one) => (Role::Binds, vec![of(one)]),
        StatementKind::Function(one, _) => (Role::Binds, vec![Bound::Function(one.name.node.to_string())]),
        StatementKind::Read(read) => (Role::Binds, vec![value(&read.name)]),
        StatementKind::Unit(name, _) => (Role::Binds, vec![Bound::Unit(name.node.to_string())]),
        StatementKind::Tally(names) => {
            let units = names.iter().map(|name| Bound::Unit(name.node.to_string()));
            (Role::Binds, units.collect())
        }
        StatementKind::Include(_) | StatementKind::Correlate(..) => (Role::Binds, Vec::new()),
        StatementKind::ResultOf(..)
        | StatementKind::Claim(..)
        | StatementKind::Table(_)
        | StatementKind::Figure(_)
        | StatementKind::Explain(_)
        | StatementKind::Help(_)
        | StatementKind::Expression(..)
        | StatementKind::Broken => (Role::Shows, Vec::new()),
    }
}

impl Bound {
    fn name(&self) -> &str {
        match self {
            Bound::Value(name) | Bound::Function(name) | Bound::Model(name) | Bound::Unit(name) => name,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn exchange(entries: &[&str]) -> Exchange {
        let mut exchange = Exchange::default();
        for entry in entries {
            exchange.add(entry);
        }
        exchange
    }

    fn text(exchange: &Exchange) -> String {
        laid_out(&exchange.statements).0
    }

    #[test]
    fn what_was_replaced_is_a_comment() {
        let exchange = exchange(&["x = 1", "f(x) = x", "f = 2", "x = 2   # again"]);
        assert_eq!(
            text(&exchange),
            "# kept from the prompt\n# x = 1   (replaced below)\nf(x) = x\nf = 2\nx = 2   # again\n"
        );
    }

    #[test]
    fn the_model_assumed_last_comes_first() {
        let exchange = exchange(&["x = 1", "D_L(x)", "assume wmap9", "D_L(x)"]);
        assert_eq!(
            text(&exchange),
            "# kept from the prompt\nassume wmap9\nx = 1\n# D_L(x)   (under the model before)\nD_L(x)\n"
        );
    }

    #[test]
    fn the_model_stays_below_what_it_is_made_of() {
        let exchange = exchange(&[
            "x = 1",
            "w = -0.9",
            "model m = planck2018 with w0 = w",
            "assume m",
        ]);
        assert_eq!(
            text(&exchange),
            "# kept from the prompt\nw = -0.9\nmodel m = planck2018 with w0 = w\nassume m\nx = 1\n"
        );
    }

    #[test]
    fn what_is_kept_checks_and_names_its_model() {
        let mut exchange = exchange(&[
            "x = 1",
            "y = x + 1",
            "D_C(y) [Gpc]",
            "that * 2",
            "x = 3",
            "struck = 1",
            "struck + 1",
        ]);
        exchange.strike("struck");
        let (text, comments) = exchange.sheet("planck2018").expect("a sheet");
        let report = Session::new(Box::new(SheetFolder::current())).check(&Source::new("s", &text));
        assert!(!report.has_errors(), "{text}");
        assert!(text.contains("\nassume planck2018\n"), "{text}");
        assert!(comments >= 3, "{text}");
        assert!(text.contains("\nx = 3\n") && text.contains("# x = 1"), "{text}");
    }

    #[test]
    fn that_is_spelled_out() {
        let exchange = exchange(&["1 + 2", "that * that", "y = that"]);
        assert_eq!(
            text(&exchange),
            "# kept from the prompt\n1 + 2\n(1 + 2) * (1 + 2)\ny = ((1 + 2) * (1 + 2))\n"
        );
    }

    #[test]
    fn that_does_not_grow_without_end() {
        let exchange = exchange(
            &["1 + 2"]
                .into_iter()
                .chain(["that * that"; 40])
                .collect::<Vec<_>>(),
        );
        assert!(
            exchange
                .statements
                .iter()
                .all(|kept| kept.text.len() <= 3 * MAX_THAT)
        );
    }

    #[test]
    fn a_struck_name_is_a_comment_over_all_its_lines() {
        let mut exchange = exchange(&["x = (1 +\n    2)", "y = 1"]);
        exchange.strike("x");
        assert_eq!(
            text(&exchange),
            "# kept from the prompt\n# x = (1 +\n#     2)   (struck)\ny = 1\n"
        );
    }
}
