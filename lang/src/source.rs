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

/// The places of a long text, for looking up many: line starts, and how many
/// characters stand before each block of bytes.
pub struct Places<'a> {
    text: &'a str,
    line_starts: Vec<u32>,
    characters: Vec<u32>,
}

/// Bytes between two counts of characters.
const BLOCK: usize = 1024;

impl Places<'_> {
    /// Reads the text once.
    #[must_use]
    pub fn new(text: &str) -> Places<'_> {
        let breaks = text.bytes().enumerate().filter(|(_, byte)| *byte == b'\n');
        let line_starts = std::iter::once(0)
            .chain(breaks.map(|(at, _)| at as u32 + 1))
            .collect();
        let mut before = 0;
        let count = |block: &[u8]| {
            let here = before;
            before += block.iter().filter(|byte| starts_character(**byte)).count() as u32;
            here
        };
        let characters = text.as_bytes().chunks(BLOCK).map(count).collect();
        Places {
            text,
            line_starts,
            characters,
        }
    }

    /// The line and column of a byte offset.
    #[must_use]
    pub fn position(&self, offset: u32) -> Position {
        let offset = offset.min(self.text.len() as u32);
        let line = self.line_starts.partition_point(|start| *start <= offset);
        let start = self.line_starts[line - 1];
        Position {
            line,
            column: (self.characters_before(offset) - self.characters_before(start)) as usize + 1,
        }
    }

    fn characters_before(&self, offset: u32) -> u32 {
        let block = offset as usize / BLOCK;
        let bytes = self.text.as_bytes();
        let rest = &bytes[block * BLOCK..offset as usize];
        let here = rest.iter().filter(|byte| starts_character(**byte)).count() as u32;
        match self.characters.get(block) {
            Some(before) => before + here,
            None => bytes.iter().filter(|byte| starts_character(**byte)).count() as u32,
        }
    }
}

fn starts_character(byte: u8) -> bool {
    byte & 0xC0 != 0x80
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_ways_of_finding_a_place_agree() {
        let text = "Ωm = 0.3\n\n× Λ z\n".repeat(200) + &"Ω".repeat(BLOCK);
        let source = Source::new("s", &text);
        let places = Places::new(&text);
        for (offset, _) in text.char_indices() {
            assert_eq!(places.position(offset as u32), source.position(offset as u32));
        }
        let end = text.len() as u32;
        assert_eq!(places.position(end), source.position(end));
        assert_eq!(places.position(end + 5), source.position(end));
    }

    #[test]
    fn the_end_of_a_whole_block_is_found() {
        let text = "a".repeat(BLOCK);
        assert_eq!(Places::new(&text).position(BLOCK as u32).column, BLOCK + 1);
        assert_eq!(Places::new("").position(0), Position { line: 1, column: 1 });
    }
}
