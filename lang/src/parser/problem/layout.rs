//! Words for problems of size, brackets, strings and characters.

use super::{point, slice};
use crate::diagnostic::{Diagnostic, Fix};
use crate::layout::{
    MAX_DEPTH, MAX_ERRORS, MAX_NESTING, MAX_SOURCE_BYTES, MAX_STATEMENT_TOKENS, MAX_STATEMENTS,
};
use crate::source::Span;
use crate::token::{Token, TokenKind};

pub(super) fn source_too_large(bytes: usize) -> Diagnostic {
    let megabytes = |bytes: usize| bytes.div_ceil(1 << 20);
    Diagnostic::error(
        "source-too-large",
        format!(
            "the sheet is {} MiB long; a sheet holds at most {} MiB",
            megabytes(bytes),
            megabytes(MAX_SOURCE_BYTES)
        ),
        Span::default(),
        "",
    )
    .note("numbers by the million belong in a data file: read \"data.csv\" as data")
}

pub(super) fn too_many_statements(at: Span) -> Diagnostic {
    Diagnostic::error(
        "too-many-statements",
        format!("a sheet holds at most {MAX_STATEMENTS} statements"),
        at,
        "one too many",
    )
}

pub(super) fn too_many_errors(at: Span) -> Diagnostic {
    Diagnostic::error(
        "too-many-errors",
        format!("more than {MAX_ERRORS} errors; those from here on are not listed"),
        at,
        "the next one",
    )
}

pub(super) fn statement_too_long(at: Span) -> Diagnostic {
    Diagnostic::error(
        "statement-too-long",
        format!("a statement holds at most {MAX_STATEMENT_TOKENS} words, numbers and signs"),
        at,
        "too long from here",
    )
    .note("long lists belong in a data file: read \"data.csv\" as data")
}

pub(super) fn nested_too_deep(at: Span) -> Diagnostic {
    Diagnostic::error(
        "nested-too-deep",
        format!("brackets may be nested at most {MAX_NESTING} deep"),
        at,
        "too deep from here",
    )
    .note("name the inner parts in statements of their own, or with where")
}

pub(super) fn chain_too_long(at: Span) -> Diagnostic {
    Diagnostic::error(
        "expression-too-long",
        format!("an expression may chain at most {MAX_DEPTH} operators"),
        at,
        "too long from here",
    )
    .note("a long sum is written sum({a, b, c}); other expressions split into named parts")
}

pub(super) fn unclosed_bracket(
    text: &str,
    open: Token,
    noticed: Option<Span>,
    end: u32,
    missing: &[TokenKind],
) -> Diagnostic {
    let opening = slice(text, open.span);
    let closing = closing_of(opening);
    let all: String = missing.iter().map(|kind| sign_of(*kind)).collect();
    let diagnostic = Diagnostic::error(
        "unclosed-bracket",
        format!("this `{opening}` is never closed"),
        open.span,
        "opened here",
    );
    let diagnostic = match noticed {
        Some(place) => diagnostic.and(place, format!("no `{closing}` before this")),
        None => diagnostic.and(point(end), format!("no `{closing}` before the end")),
    };
    diagnostic.fix(format!("close it with `{all}`"), point(end), all.clone())
}

pub(super) fn stray_closing(text: &str, close: Token) -> Diagnostic {
    let closing = slice(text, close.span);
    Diagnostic::error(
        "stray-bracket",
        format!("this `{closing}` closes nothing"),
        close.span,
        "no opening bracket before it",
    )
    .fix(format!("remove the `{closing}`"), close.span, "")
}

pub(super) fn mismatched_bracket(text: &str, open: Token, close: Token) -> Diagnostic {
    let (opening, closing) = (slice(text, open.span), slice(text, close.span));
    let wanted = closing_of(opening);
    Diagnostic::error(
        "mismatched-bracket",
        format!("`{opening}` is closed by `{closing}`"),
        close.span,
        format!("`{wanted}` was expected"),
    )
    .and(open.span, "opened here")
    .fix(format!("write `{wanted}`"), close.span, wanted)
}

pub(super) fn open_string(string: Span) -> Diagnostic {
    Diagnostic::error(
        "unterminated-string",
        "the string does not end on its line",
        string,
        "no closing `\"`",
    )
    .fix("close it at the end of the line", point(string.end), "\"")
}

pub(super) fn unknown_character(text: &str, at: Span) -> Diagnostic {
    let written = slice(text, at);
    let character = written.chars().next().unwrap_or(' ');
    let shown = if character.is_control() || character.is_whitespace() || character == '\u{feff}' {
        format!("U+{:04X}", character as u32)
    } else {
        format!("`{character}`")
    };
    let diagnostic = Diagnostic::error(
        "unknown-character",
        format!("{shown} has no meaning here"),
        at,
        "",
    );
    match replacement(character) {
        Some(Replacement::Text(text)) => diagnostic.fix(format!("write `{text}`"), at, text),
        Some(Replacement::Advice(advice)) => diagnostic.note(advice),
        None => Diagnostic {
            fixes: vec![Fix {
                title: "remove it".into(),
                edits: vec![(at, String::new())],
            }],
            ..diagnostic
        },
    }
}

enum Replacement {
    Text(&'static str),
    Advice(&'static str),
}

/// What stands for a sign that papers use and this language does not.
fn replacement(character: char) -> Option<Replacement> {
    use Replacement::{Advice, Text};
    Some(match character {
        '\u{2010}'..='\u{2015}' => Text("-"),
        '“' | '”' | '„' | '«' | '»' => Text("\""),
        '∗' | '•' | '⨯' | '✕' => Text("*"),
        '÷' | '∕' | '⁄' => Text("/"),
        '∼' | '≈' | '≃' | '~' => Advice("a rounded number is claimed as `is about 16 Gly`"),
        '√' => Advice("a root is written `sqrt(x)`"),
        '∫' => Advice("an integral is written `integral(1/E(x), x = 0 .. z)`"),
        '∑' => Advice("a sum is written `sum(f(n), n = 1 .. 10 every 1)`"),
        '°' => Advice("an angle in degrees is written `30 deg`"),
        '′' | '\'' => Advice("an angle in minutes is written `2 arcmin`"),
        '″' => Advice("an angle in seconds is written `1.5 arcsec`"),
        ';' => Advice("each statement stands on a line of its own"),
        '&' => Advice("conditions are joined by `and`"),
        '|' => Advice("conditions are joined by `or`; a size is `abs(x)`"),
        '!' => Advice("a condition is denied by `not`"),
        '\\' => Advice("a statement goes on where the next line starts with a space"),
        '…' => Advice("a range is written `0 .. 3`"),
        _ => return None,
    })
}

fn closing_of(opening: &str) -> &'static str {
    match opening {
        "(" => ")",
        "[" => "]",
        _ => "}",
    }
}

fn sign_of(closing: TokenKind) -> &'static str {
    match closing {
        TokenKind::RightParenthesis => ")",
        TokenKind::RightBracket => "]",
        _ => "}",
    }
}
