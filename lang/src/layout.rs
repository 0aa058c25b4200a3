//! Layout: the tokens of a sheet cut into statements.
//!
//! A statement starts at column 0. A line that starts with white space
//! continues it, and so does any line inside an open bracket. That alone cuts
//! a sheet into statements before any grammar is known, so each can be parsed
//! alone, in parallel, and an error in one hides none in the next.
//!
//! Brackets are matched here, once for all, with a stack and no recursion; a
//! statement that is nested or chained too deep is refused before a tree of
//! it is built, because trees are walked and dropped by recursion.
//!
//! Where a bracket is never closed, every line to the end would continue the
//! statement. Then the statement is cut at the first line that looks like one
//! of its own, and reading goes on there.

use crate::parser::Problem;
use crate::source::Span;
use crate::token::{Token, TokenKind};
use smallvec::{SmallVec, smallvec};
use std::ops::Range;

/// Bytes in a sheet: three times a sheet of 100,000 lines. Places are kept
/// in 32 bits and every byte may become a token of twelve.
pub const MAX_SOURCE_BYTES: usize = 16 << 20;
/// Statements in a sheet: each takes some hundred bytes of tree.
pub const MAX_STATEMENTS: usize = 500_000;
/// Tokens in a statement: enough for a list of fifty thousand numbers.
pub const MAX_STATEMENT_TOKENS: usize = 100_000;
/// Brackets inside brackets: beyond what a reader can follow.
pub const MAX_NESTING: usize = 128;
/// Depth of a tree, as a bound from operators and brackets. Checking a sheet
/// walks its trees by recursion on a stack of two megabytes, in a build
/// without optimisation too.
pub const MAX_DEPTH: usize = 256;
/// Errors that are reported: a wrong encoding would otherwise make millions.
pub const MAX_ERRORS: usize = 500;
/// Unreadable tokens and stray brackets reported in one statement.
const MAX_FAULTS: usize = 10;

/// The tokens of one statement.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Piece {
    /// Indices of its tokens; never empty.
    pub tokens: Range<usize>,
    /// It binds a name: an `=` stands outside brackets, and no word that
    /// would give it another meaning before it.
    pub defines: bool,
    /// What is wrong with its tokens and brackets; if anything is, it is not
    /// parsed.
    pub problems: Vec<Problem>,
}

/// The statements of a sheet. Tokens hold no comments.
pub(crate) fn cut(text: &str, tokens: &[Token]) -> Vec<Piece> {
    let mut pieces = Vec::with_capacity(tokens.len() / 12 + 1);
    let mut at = 0;
    while at < tokens.len() {
        let piece = Cutter::new(text, tokens, at).cut();
        at = piece.tokens.end;
        pieces.push(piece);
    }
    pieces
}

/// Whether a bracket is open at the end of the last statement.
pub(crate) fn ends_open(text: &str, tokens: &[Token]) -> bool {
    cut(text, tokens).last().is_some_and(|piece| {
        piece.tokens.end == tokens.len()
            && matches!(
                piece.problems.last(),
                Some(Problem::UnclosedBracket { noticed: None, .. })
            )
    })
}

/// Whether a token stands at column 0.
pub(crate) fn starts_line(text: &str, token: Token) -> bool {
    let start = token.span.start as usize;
    start == crate::token::text_start(text) || text.as_bytes().get(start.wrapping_sub(1)) == Some(&b'\n')
}

/// Cuts one statement.
struct Cutter<'a> {
    text: &'a str,
    tokens: &'a [Token],
    first: usize,
    at: usize,
    levels: SmallVec<[Level; 6]>,
    defines: Option<bool>,
    problems: Vec<Problem>,
    faults: usize,
    refused: bool,
}

/// What is open: the statement itself, then its brackets.
struct Level {
    /// Index of the opening bracket.
    open: usize,
    /// Operators since the last separator.
    operators: usize,
    /// The deepest bracket since the last separator.
    inner: usize,
    /// The deepest part before the last separator.
    done: usize,
}

impl Level {
    fn new(open: usize) -> Level {
        Level {
            open,
            operators: 0,
            inner: 0,
            done: 0,
        }
    }

    /// A bound on the depth of the tree: every operator may stand above the
    /// deepest bracket.
    fn depth(&self) -> usize {
        self.done.max(self.operators + self.inner)
    }
}

impl<'a> Cutter<'a> {
    fn new(text: &'a str, tokens: &'a [Token], first: usize) -> Cutter<'a> {
        Cutter {
            text,
            tokens,
            first,
            at: first,
            levels: smallvec![Level::new(first)],
            defines: None,
            problems: Vec::new(),
            faults: 0,
            refused: false,
        }
    }

    fn cut(mut self) -> Piece {
        while let Some(token) = self.tokens.get(self.at).copied() {
            if self.at > self.first && starts_line(self.text, token) {
                let open = self.levels.len() > 1;
                if !open || self.refused || token.kind.is_statement_word() {
                    break;
                }
            }
            if !self.refused {
                self.take(token);
            }
            self.at += 1;
        }
        if self.levels.len() > 1 && !self.refused {
            self.end_unclosed();
        }
        Piece {
            tokens: self.first..self.at,
            defines: self.defines == Some(true),
            problems: self.problems,
        }
    }

    fn take(&mut self, token: Token) {
        let kind = token.kind;
        if self.at - self.first >= MAX_STATEMENT_TOKENS {
            self.refuse(Problem::StatementTooLong { at: token.span });
        } else if kind.is_opening() {
            self.open(token);
        } else if kind.is_closing() {
            self.close(token);
        } else if kind.is_fault() {
            self.fault(token);
        } else {
            self.count(token);
        }
    }

    fn refuse(&mut self, problem: Problem) {
        self.problems.push(problem);
        self.refused = true;
    }

    fn open(&mut self, token: Token) {
        if self.levels.len() > MAX_NESTING {
            // Many lines that each leave a bracket open are many small
            // mistakes and no deep nesting.
            if self.next_statement_line().is_some() {
                self.end_unclosed();
                self.refused = true;
                self.at -= 1;
            } else {
                self.refuse(Problem::NestedTooDeep { at: token.span });
            }
            return;
        }
        if token.kind == TokenKind::LeftBracket {
            self.count_operator(token);
        }
        self.levels.push(Level::new(self.at));
    }

    fn close(&mut self, token: Token) {
        let open = match self.levels.as_slice() {
            [_, .., level] => self.tokens[level.open],
            _ => {
                self.note(Problem::StrayClosing { close: token });
                return;
            }
        };
        if open.kind.partner() != Some(token.kind) {
            self.note(Problem::MismatchedBracket { open, close: token });
        }
        let depth = self.levels.pop().map_or(0, |level| level.depth());
        if let Some(outer) = self.levels.last_mut() {
            outer.inner = outer.inner.max(depth + 1);
        }
        self.check_depth(token);
    }

    fn note(&mut self, problem: Problem) {
        self.faults += 1;
        if self.faults <= MAX_FAULTS {
            self.problems.push(problem);
        }
    }

    fn fault(&mut self, token: Token) {
        let at = token.span;
        let before = self.at.checked_sub(1).and_then(|at| self.tokens.get(at));
        let number = before.filter(|before| before.kind == TokenKind::Number && before.span.end == at.start);
        let written = self.text.get(at.range()).unwrap_or("");
        let is_mark = written.starts_with(['"', '\'', '′', '″', '°']);
        self.note(match (number, token.kind) {
            (Some(number), _) if is_mark => Problem::AngleMark {
                number: number.span,
                mark: at,
            },
            (_, TokenKind::BadNumber) => Problem::BadNumber { number: at },
            (_, TokenKind::OpenString) => Problem::OpenString {
                string: trimmed(self.text, at),
            },
            (_, TokenKind::Foreign) => Problem::ForeignOperator { operator: at },
            (_, _) => Problem::UnknownCharacter { at },
        });
    }

    /// Counts what a token adds to the depth of the tree, and looks for the
    /// `=` that makes a definition.
    fn count(&mut self, token: Token) {
        let outside = self.levels.len() == 1;
        match token.kind {
            TokenKind::Comma | TokenKind::Colon => self.separate(),
            TokenKind::Equal => {
                self.separate();
                if outside {
                    self.defines.get_or_insert(true);
                }
            }
            TokenKind::Where | TokenKind::With => {
                self.separate();
                self.defines.get_or_insert(false);
            }
            kind if kind.is_operator() => {
                self.count_operator(token);
                if outside {
                    self.defines.get_or_insert(false);
                }
            }
            TokenKind::Dot | TokenKind::Superscript => self.count_operator(token),
            _ => {}
        }
    }

    fn separate(&mut self) {
        if let Some(level) = self.levels.last_mut() {
            level.done = level.depth();
            level.operators = 0;
            level.inner = 0;
        }
    }

    fn count_operator(&mut self, token: Token) {
        if let Some(level) = self.levels.last_mut() {
            level.operators += 1;
        }
        self.check_depth(token);
    }

    fn check_depth(&mut self, token: Token) {
        if self.levels.last().is_some_and(|level| level.depth() > MAX_DEPTH) {
            self.refuse(Problem::ChainTooLong { at: token.span });
        }
    }

    /// The statement ended inside a bracket. If a line after the first open
    /// bracket looks like a statement, this one ends before it.
    fn end_unclosed(&mut self) {
        if let Some(line) = self.next_statement_line() {
            self.at = line;
        }
        let unclosed = |level: &&Level| level.open < self.at;
        let Some(open) = self.levels[1..].iter().rfind(unclosed) else {
            return;
        };
        let end = self.tokens[self.at - 1].span.end;
        let closing = self.levels[1..]
            .iter()
            .filter(unclosed)
            .rev()
            .filter_map(|level| self.tokens[level.open].kind.partner())
            .collect();
        let problem = Problem::UnclosedBracket {
            open: self.tokens[open.open],
            noticed: self.tokens.get(self.at).map(|token| token.span),
            end,
            closing,
        };
        self.problems
            .retain(|problem| place_of(problem).is_none_or(|place| place.start < end));
        self.problems.push(problem);
    }

    /// The first line after the first open bracket that looks like a
    /// statement.
    fn next_statement_line(&self) -> Option<usize> {
        let open = self.levels.get(1)?.open;
        (open + 1..self.at).find(|at| self.looks_like_statement(*at))
    }

    /// `name =`, `name(…) … =` and the like at the start of a line.
    fn looks_like_statement(&self, at: usize) -> bool {
        let token = self.tokens[at];
        if !starts_line(self.text, token) || !token.kind.is_name() {
            return false;
        }
        let mut depth = 0_usize;
        for next in &self.tokens[at + 1..self.at] {
            if starts_line(self.text, *next) {
                return false;
            }
            if next.kind.is_opening() {
                depth += 1;
            } else if next.kind.is_closing() {
                if depth == 0 {
                    return false;
                }
                depth -= 1;
            } else if depth == 0 {
                return next.kind == TokenKind::Equal;
            }
        }
        false
    }
}

/// The place of a problem of tokens and brackets.
fn place_of(problem: &Problem) -> Option<Span> {
    match problem {
        Problem::StrayClosing { close } | Problem::MismatchedBracket { close, .. } => Some(close.span),
        Problem::BadNumber { number } => Some(*number),
        Problem::OpenString { string } => Some(*string),
        Problem::ForeignOperator { operator } => Some(*operator),
        Problem::UnknownCharacter { at } => Some(*at),
        Problem::AngleMark { mark, .. } => Some(*mark),
        _ => None,
    }
}

/// A place without white space at its end.
fn trimmed(text: &str, span: Span) -> Span {
    let written = text.get(span.range()).unwrap_or("");
    Span {
        start: span.start,
        end: span.start + written.trim_end().len() as u32,
    }
}
