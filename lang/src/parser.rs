//! The parser: text to statements, with everything that is wrong with their
//! form.
//!
//! ```text
//!   text --token--> tokens --layout--> pieces --statement--> statements
//!                                        |
//!                                        +--failure--> diagnostics
//! ```
//!
//! The indent rule cuts a sheet into statements before any of it is parsed
//! (`layout`), and each is parsed alone. First with an error type that costs
//! nothing; only where that fails again with one that remembers what was
//! expected, and `failure` makes of it what a person would call the mistake.
//! Big sheets are parsed in parallel, small ones without waking a thread.
//!
//! Rules bear the name of what they read. A rule that may read nothing is made
//! so where it is used, by `or_not`. Problems that do not stop the reading are
//! noted in the state and the node becomes `Broken` (`problem`).

mod bracket;
mod claim;
mod expression;
mod failure;
mod input;
mod model;
mod number;
mod problem;
mod quantity;
mod range;
mod scan;
mod statement;
#[cfg(test)]
mod tests;
mod unit;

pub(crate) use problem::Problem;

use crate::ast::{Name, Statement, StatementKind, Unit};
use crate::diagnostic::Diagnostic;
use crate::layout::{self, MAX_ERRORS, MAX_SOURCE_BYTES, MAX_STATEMENTS, Piece};
use crate::source::Span;
use crate::token::{self, Token, TokenKind};
use chumsky::prelude::*;
use failure::{Diagnosis, diagnose};
use input::{State, Tokens};
use rayon::prelude::*;
use scan::Scan;
use statement::Grammar;

/// What a sheet says.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Parsed {
    /// The statements in order. One that could not be read is `Broken`, or a
    /// definition with a `Broken` value where its name was plain.
    pub statements: Vec<Statement>,
    /// What is wrong with their form, in order of place.
    pub diagnostics: Vec<Diagnostic>,
    /// Names of models, units and tables that broken statements would have
    /// bound: uses of them are no further mistakes.
    pub lost: Vec<Name>,
}

/// Below this many statements threads cost more than they save.
const PARALLEL_STATEMENTS: usize = 2_000;
/// How many statements share one set of rules.
const STATEMENTS_AT_ONCE: usize = 1_000;

/// Parses a sheet. Any text will do; what is wrong with it is in the
/// diagnostics.
#[must_use]
pub fn parse(text: &str) -> Parsed {
    if text.len() > MAX_SOURCE_BYTES {
        let problem = Problem::SourceTooLarge { bytes: text.len() };
        return Parsed {
            diagnostics: vec![problem.diagnostic("")],
            ..Parsed::default()
        };
    }
    let tokens = token::lex(text);
    let mut pieces = layout::cut(text, &tokens);
    let surplus = pieces
        .get(MAX_STATEMENTS)
        .map(|piece| Problem::TooManyStatements {
            at: place(&tokens[piece.tokens.clone()]),
        });
    pieces.truncate(MAX_STATEMENTS);
    let readings = read_all(text, &tokens, &pieces);
    let mut parsed = collect(text, &tokens, &pieces, readings);
    parsed
        .diagnostics
        .extend(surplus.map(|problem| problem.diagnostic(text)));
    parsed
}

/// Whether an entry at the prompt wants another line: a bracket is open, or
/// it ends in an operator, a comma, `where`, `with` and the like.
#[must_use]
pub fn wants_more(text: &str) -> bool {
    if text.len() > MAX_SOURCE_BYTES {
        return false;
    }
    let tokens = token::lex(text);
    let Some(last) = tokens.last() else { return false };
    trails(last.kind) || layout::ends_open(text, &tokens)
}

/// Whether a line that ends in this token goes on.
pub(crate) fn trails(last: TokenKind) -> bool {
    last.is_operator()
        || matches!(
            last,
            TokenKind::Comma | TokenKind::Equal | TokenKind::Colon | TokenKind::Where | TokenKind::With
        )
}

/// The tokens of a text, comments and unreadable pieces included, for
/// colouring it.
#[must_use]
pub fn tokens(text: &str) -> Vec<Token> {
    if text.len() > MAX_SOURCE_BYTES {
        return Vec::new();
    }
    token::lex_all(text)
}

/// Reads a unit that stands alone, as in the header of a data column:
/// `km s-1` is refused there as everywhere. The error is a sentence.
pub fn parse_unit(text: &str) -> Result<Unit, String> {
    let tokens = token::lex(text);
    let mut scan = Scan::new(&tokens, 0, text);
    let unit = scan.unit_in_bracket().filter(|_| scan.at == tokens.len());
    match (unit, scan.problems.first()) {
        (Some(unit), None) => Ok(unit),
        (_, Some(problem)) => Err(problem.diagnostic(text).message),
        (None, None) => Err(format!("`{text}` is not a unit")),
    }
}

/// One statement as read at the first, cheap attempt.
struct Reading {
    /// `None` where it could not be read.
    statement: Option<StatementKind>,
    problems: Vec<Problem>,
}

type Cheap<'src> = extra::Full<EmptyErr, State<'src>, ()>;

fn read_all(text: &str, tokens: &[Token], pieces: &[Piece]) -> Vec<Reading> {
    let read_some = |pieces: &[Piece]| {
        let grammar: Grammar<'_, Cheap<'_>> = Grammar::new();
        pieces
            .iter()
            .map(|piece| read(&grammar, text, tokens, piece))
            .collect::<Vec<_>>()
    };
    if pieces.len() < PARALLEL_STATEMENTS {
        return read_some(pieces);
    }
    let readings: Vec<Vec<Reading>> = pieces.par_chunks(STATEMENTS_AT_ONCE).map(read_some).collect();
    readings.into_iter().flatten().collect()
}

fn read<'src>(
    grammar: &Grammar<'src, Cheap<'src>>,
    text: &'src str,
    tokens: &'src [Token],
    piece: &Piece,
) -> Reading {
    if !piece.problems.is_empty() {
        return Reading {
            statement: None,
            problems: piece.problems.clone(),
        };
    }
    let input: Tokens<'src> = &tokens[piece.tokens.clone()];
    let mut state = State {
        text,
        problems: Vec::new(),
    };
    let rule = grammar.rule(input, piece.defines);
    let statement = rule.parse_with_state(input, &mut state).into_output();
    Reading {
        problems: if statement.is_some() {
            state.problems
        } else {
            Vec::new()
        },
        statement,
    }
}

/// Puts the statements together, and looks at those that could not be read
/// until there are errors enough.
fn collect(text: &str, tokens: &[Token], pieces: &[Piece], readings: Vec<Reading>) -> Parsed {
    let mut parsed = Parsed {
        statements: Vec::with_capacity(readings.len()),
        ..Parsed::default()
    };
    let mut diagnosis = None;
    for (piece, reading) in pieces.iter().zip(readings) {
        let input = &tokens[piece.tokens.clone()];
        let span = place(input);
        let mut problems = reading.problems;
        let full = parsed.diagnostics.len() > MAX_ERRORS;
        let kind = match reading.statement {
            Some(kind) => kind,
            None if full => StatementKind::Broken,
            None => {
                let grammar = diagnosis.get_or_insert_with(Grammar::new);
                let found: Diagnosis = diagnose(grammar, text, input, piece.defines, problems);
                problems = found.problems;
                parsed.lost.extend(found.lost);
                found.statement
            }
        };
        parsed.statements.push(Statement { kind, span });
        if full || problems.is_empty() {
            continue;
        }
        if parsed.diagnostics.len() >= MAX_ERRORS {
            problems = vec![Problem::TooManyErrors { at: span }];
        }
        let words = problems.iter().map(|problem| problem.diagnostic(text));
        parsed.diagnostics.extend(words);
    }
    parsed
}

/// The place of some tokens.
fn place(tokens: &[Token]) -> Span {
    match (tokens.first(), tokens.last()) {
        (Some(first), Some(last)) => first.span.to(last.span),
        _ => Span::default(),
    }
}
