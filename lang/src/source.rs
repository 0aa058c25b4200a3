//! Text with a name, and places in it.

use std::sync::Arc;

/// A range of bytes in a source.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord, Default)]
pub struct Span {
    /// First byte.
    pub start: u32,
    /// One past the last byte.
    pub end: u32,
}

impl Span {
    /// The bytes from `start` up to `end`.
    #[must_use]
    pub const fn new(start: usize, end: usize) -> Span {
        Span {
            start: start as u32,
            end: end as u32,
        }
    }

    /// The smallest span that covers both.
    #[must_use]
    pub fn to(self, other: Span) -> Span {
        Span {
            start: self.start.min(other.start),
            end: self.end.max(other.end),
        }
    }

    /// As a range of `usize`, for slicing.
    #[must_use]
    pub fn range(self) -> std::ops::Range<usize> {
        self.start as usize..self.end as usize
    }
}

/// Something with the place it stands at.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Spanned<T> {
    /// The thing.
    pub node: T,
    /// Its place.
    pub span: Span,
}

/// A sheet's text and the name it is known by in messages.
#[derive(Clone, Debug)]
pub struct Source {
    /// A path, `<stdin>`, or `entry 3` at the prompt.
    pub name: Arc<str>,
    /// The text.
    pub text: Arc<str>,
}

/// A place as a person counts: from 1, in characters.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Position {
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
}

impl Source {
    /// A source of this name and text.
    #[must_use]
    pub fn new(name: &str, text: &str) -> Source {
        Source {
            name: name.into(),
            text: text.into(),
        }
    }

    /// The text of a span.
    #[must_use]
    pub fn slice(&self, span: Span) -> &str {
        self.text.get(span.range()).unwrap_or("")
    }

    /// The line and column of a byte offset.
    #[must_use]
    pub fn position(&self, offset: u32) -> Position {
        let before = self.text.get(..offset as usize).unwrap_or(&self.text);
        let line_start = before.rfind('\n').map_or(0, |at| at + 1);
        Position {
            line: before.bytes().filter(|byte| *byte == b'\n').count() + 1,
            column: before[line_start..].chars().count() + 1,
        }
    }
}
