//! Reading tokens by hand, where spacing has a meaning.
//!
//! Numbers and units depend on what stands tight and on what comes two or
//! three tokens later, which combinators say badly. A [`Scan`] walks the
//! tokens of one statement and notes the problems it meets; `quantity` wraps
//! it into a rule of the grammar.

use super::problem::Problem;
use crate::source::Span;
use crate::token::{Token, TokenKind};

/// A place among the tokens of a statement.
pub(super) struct Scan<'a> {
    /// The tokens of the statement.
    pub tokens: &'a [Token],
    /// Index of the next one.
    pub at: usize,
    /// The whole text.
    pub text: &'a str,
    /// What was found wrong so far.
    pub problems: Vec<Problem>,
}

impl<'a> Scan<'a> {
    pub fn new(tokens: &'a [Token], at: usize, text: &'a str) -> Scan<'a> {
        Scan {
            tokens,
            at,
            text,
            problems: Vec::new(),
        }
    }

    /// The token `ahead` places on.
    pub fn token(&self, ahead: usize) -> Option<Token> {
        self.tokens.get(self.at + ahead).copied()
    }

    /// The kind of the token `ahead` places on.
    pub fn kind(&self, ahead: usize) -> Option<TokenKind> {
        self.token(ahead).map(|token| token.kind)
    }

    /// Whether the token `ahead` places on is of this kind.
    pub fn sees(&self, ahead: usize, kind: TokenKind) -> bool {
        self.kind(ahead) == Some(kind)
    }

    /// Whether nothing stands between the token `ahead` places on and the one
    /// before it.
    pub fn is_tight(&self, ahead: usize) -> bool {
        let index = self.at + ahead;
        match (self.tokens.get(index.wrapping_sub(1)), self.tokens.get(index)) {
            (Some(before), Some(token)) => before.span.end == token.span.start,
            _ => false,
        }
    }

    /// Whether the token `ahead` places on is on the line of the one before it.
    pub fn is_on_line(&self, ahead: usize) -> bool {
        let index = self.at + ahead;
        match (self.tokens.get(index.wrapping_sub(1)), self.tokens.get(index)) {
            (Some(before), Some(token)) => {
                let gap = Span {
                    start: before.span.end,
                    end: token.span.start,
                };
                !self.slice(gap).contains('\n')
            }
            _ => false,
        }
    }

    /// The text of a place.
    pub fn slice(&self, span: Span) -> &'a str {
        self.text.get(span.range()).unwrap_or("")
    }

    /// The text of the token `ahead` places on, empty at the end.
    pub fn word(&self, ahead: usize) -> &'a str {
        self.token(ahead).map_or("", |token| self.slice(token.span))
    }

    /// The place from the token at index `first` to the last one read.
    pub fn span_from(&self, first: usize) -> Span {
        match (self.tokens.get(first), self.tokens.get(self.at.wrapping_sub(1))) {
            (Some(first), Some(last)) => first.span.to(last.span),
            _ => Span::default(),
        }
    }

    /// Steps over the next token if it is of this kind.
    pub fn take(&mut self, kind: TokenKind) -> bool {
        let found = self.sees(0, kind);
        if found {
            self.at += 1;
        }
        found
    }
}
