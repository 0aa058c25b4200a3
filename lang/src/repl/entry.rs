//! What was typed, pasted or piped, cut into entries: commands of the prompt,
//! each alone on its line, and text in the language.
//!
//! The cut is that of a sheet, with one freedom more: a line that ends in an
//! operator, a comma, `where` or `with` goes on in the next one even where that
//! starts at column 0. It is indented then, so that the sheet that is kept
//! reads the same.

use crate::layout::{self, Piece};
use crate::parser;
use crate::token::{self, Token, TokenKind};
use std::borrow::Cow;

/// One thing to answer.
#[derive(Debug, PartialEq)]
pub(super) enum Entry {
    /// Statements of the language.
    Text(String),
    /// A word to the prompt itself.
    Command(Command),
}

/// A word to the prompt itself.
#[derive(Debug, PartialEq)]
pub(super) enum Command {
    /// `leave`
    Leave,
    /// `names`
    Names,
    /// `strike NAME`
    Strike(String),
    /// `keep "note.zij"`
    Keep(String),
    /// `help`, `help D_L`, `help "how far"`
    Help(Vec<String>),
    /// A command that lacks something, or a word for `leave` of other
    /// programs: the word, which may be a name of the user's, and a reason.
    Misused(String, &'static str),
}

/// How far a line that goes on is indented.
pub(super) const INDENT: &str = "    ";

/// Whether an entry wants another line. An empty last line ends it.
pub(super) fn goes_on(text: &str) -> bool {
    let last = text.rsplit('\n').next().unwrap_or("");
    let hollow = text.contains('\n') && last.trim().is_empty();
    !hollow && parser::wants_more(text)
}

/// Whether a word to the prompt is among the lines, on which the checker has
/// no say.
pub(super) fn has_command(text: &str) -> bool {
    each(text).iter().any(|entry| matches!(entry, Entry::Command(_)))
}

/// The entries of a pipe: each statement is answered by itself.
pub(super) fn each(text: &str) -> Vec<Entry> {
    let text = dedent(text);
    let tokens = token::lex(&text);
    let pieces = joined(&text, &tokens, layout::cut(&text, &tokens));
    let ends = pieces
        .iter()
        .skip(1)
        .map(|piece| tokens[piece.first().map_or(0, |part| part.start)].span.start as usize)
        .chain([text.len()]);
    let starts = pieces.iter().map(|piece| {
        let first = tokens[piece.first().map_or(0, |part| part.start)].span.start as usize;
        text[..first]
            .rfind('\n')
            .map_or(0, |at| at + 1)
            .max(token::text_start(&text))
    });
    let spans: Vec<_> = starts.zip(ends).collect();
    spans
        .into_iter()
        .zip(&pieces)
        .map(|((start, end), piece)| entry(&text, &tokens, piece, start, end))
        .collect()
}

/// The entries of a block that was typed or pasted: what stands between
/// commands is read as one sheet.
pub(super) fn block(text: &str) -> Vec<Entry> {
    let mut entries = Vec::new();
    for entry in each(text) {
        match (entry, entries.last_mut()) {
            (Entry::Text(more), Some(Entry::Text(text))) => {
                text.push('\n');
                text.push_str(&more);
            }
            (entry, _) => entries.push(entry),
        }
    }
    entries
}

/// Token ranges that form one entry.
type Parts = Vec<std::ops::Range<usize>>;

/// Statements that end in the middle, with what follows them.
fn joined(text: &str, tokens: &[Token], pieces: Vec<Piece>) -> Vec<Parts> {
    let mut all: Vec<Parts> = Vec::with_capacity(pieces.len());
    let mut trails = false;
    for piece in pieces {
        let range = piece.tokens;
        let begins = tokens[range.start].kind.is_statement_word();
        trails = match all.last_mut() {
            Some(parts) if trails && !begins => {
                parts.push(range.clone());
                parser::trails(tokens[range.end - 1].kind)
            }
            _ => {
                let alone = command(text, &tokens[range.clone()]).is_some();
                let last = tokens[range.end - 1].kind;
                all.push(vec![range]);
                !alone && parser::trails(last)
            }
        };
    }
    all
}

fn entry(text: &str, tokens: &[Token], parts: &Parts, start: usize, end: usize) -> Entry {
    if let [only] = parts.as_slice()
        && let Some(command) = command(text, &tokens[only.clone()])
    {
        return Entry::Command(command);
    }
    let mut written = String::with_capacity(end - start + INDENT.len());
    let mut from = start;
    for part in parts.iter().skip(1) {
        let to = tokens[part.start].span.start as usize;
        written.push_str(&text[from..to]);
        written.push_str(INDENT);
        from = to;
    }
    written.push_str(&text[from..end]);
    written.truncate(written.trim_end().len());
    Entry::Text(written)
}

/// What these tokens tell the prompt, if they do.
fn command(text: &str, tokens: &[Token]) -> Option<Command> {
    let slice = |token: &Token| text.get(token.span.range()).unwrap_or("");
    let (first, rest) = tokens.split_first()?;
    let misused = |reason| Some(Command::Misused(slice(first).into(), reason));
    match (slice(first), rest) {
        ("leave", []) => Some(Command::Leave),
        ("names", []) => Some(Command::Names),
        ("strike", [name]) if name.kind.is_word() => Some(Command::Strike(slice(name).into())),
        ("strike", []) => misused("strike forgets a name: strike NAME"),
        ("strike", [name, ..]) if name.kind.is_word() => misused("strike takes one name: strike NAME"),
        ("keep", [path]) if path.kind == TokenKind::String => {
            Some(Command::Keep(slice(path).trim_matches('"').into()))
        }
        ("keep", []) => misused("keep saves the exchange as a sheet: keep \"note.zij\""),
        ("keep", [path, ..]) if path.kind.is_word() || path.kind == TokenKind::String => {
            misused("keep takes the name of a file in quotes: keep \"note.zij\"")
        }
        ("exit" | "quit", []) => misused("leave ends the conversation, and so does Ctrl-D"),
        ("help", rest) => Some(Command::Help(topic(text, rest))),
        _ => None,
    }
}

/// The words after `help`, without quotes.
fn topic(text: &str, rest: &[Token]) -> Vec<String> {
    let (Some(first), Some(last)) = (rest.first(), rest.last()) else {
        return Vec::new();
    };
    let written = text.get(first.span.to(last.span).range()).unwrap_or("");
    let words = written.split_whitespace().map(|word| word.trim_matches('"'));
    words.filter(|word| !word.is_empty()).map(String::from).collect()
}

/// The text without the white space that all its lines start with: a block
/// copied from an indented place.
fn dedent(text: &str) -> Cow<'_, str> {
    let indent = |line: &str| line.len() - line.trim_start_matches([' ', '\t']).len();
    let lines = || text.split('\n').filter(|line| !line.trim().is_empty());
    let common = lines().map(indent).min().unwrap_or(0);
    if common == 0 {
        return Cow::Borrowed(text);
    }
    let cut = |line: &str| line.get(common..).unwrap_or("").to_owned();
    Cow::Owned(text.split('\n').map(cut).collect::<Vec<_>>().join("\n"))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(text: &str) -> Vec<String> {
        let written = |entry| match entry {
            Entry::Text(text) => text,
            Entry::Command(command) => format!("{command:?}"),
        };
        each(text).into_iter().map(written).collect()
    }

    #[test]
    fn a_pipe_is_cut_into_statements() {
        assert_eq!(
            texts("x = 1\n# note\ny = (x +\n1)\n\nz = x\n  + y\n"),
            ["x = 1\n# note", "y = (x +\n1)", "z = x\n  + y"]
        );
        assert_eq!(texts("\n  \n# nothing\n"), [""; 0]);
    }

    #[test]
    fn a_line_that_ends_in_the_middle_goes_on_at_column_0() {
        assert_eq!(
            texts("x = 1 +\n2 *\n3\ny = 1"),
            ["x = 1 +\n    2 *\n    3", "y = 1"]
        );
        assert_eq!(texts("x = 1 +\nassume milne"), ["x = 1 +", "assume milne"]);
    }

    #[test]
    fn an_unfinished_last_entry_is_an_entry() {
        assert_eq!(texts("x = (1 +"), ["x = (1 +"]);
        assert_eq!(texts("1 +\n"), ["1 +"]);
    }

    #[test]
    fn commands_stand_alone_on_their_line() {
        let command = |text: &str| match each(text).pop() {
            Some(Entry::Command(command)) => Some(command),
            Some(Entry::Text(_)) | None => None,
        };
        assert_eq!(command("leave"), Some(Command::Leave));
        assert_eq!(command("  leave # home"), Some(Command::Leave));
        assert_eq!(command("names"), Some(Command::Names));
        assert_eq!(command("strike Ωm"), Some(Command::Strike("Ωm".into())));
        assert_eq!(command("keep \"a b.zij\""), Some(Command::Keep("a b.zij".into())));
        assert_eq!(command("help"), Some(Command::Help(vec![])));
        let words = vec!["how".into(), "far".into()];
        assert_eq!(command("help \"how far\""), Some(Command::Help(words)));
        for misused in ["strike", "strike a b", "keep", "keep note.zij", "quit", "exit"] {
            assert!(
                matches!(command(misused), Some(Command::Misused(..))),
                "{misused}"
            );
        }
        for text in ["leave = 3", "names + 1", "strike(2)", "keep * 2", "leaves"] {
            assert_eq!(command(text), None, "{text}");
        }
    }

    #[test]
    fn a_block_is_one_sheet_between_commands() {
        assert_eq!(
            block("  x = 1\n  y = 2\n  names\n  x\n"),
            [
                Entry::Text("x = 1\ny = 2".into()),
                Entry::Command(Command::Names),
                Entry::Text("x".into())
            ]
        );
    }

    #[test]
    fn an_open_entry_goes_on_until_an_empty_line() {
        assert!(goes_on("x = (1 +"));
        assert!(goes_on("x = (1 +\n    2"));
        assert!(goes_on("a where"));
        assert!(!goes_on("x = (1 +\n    "));
        assert!(!goes_on(""));
        assert!(!goes_on("x = 1"));
    }
}
