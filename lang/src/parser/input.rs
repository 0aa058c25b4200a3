//! What every rule of the grammar stands on: the input, the state that
//! travels along, and rules for single tokens.

use super::problem::Problem;
use super::unit::name_text;
use crate::ast::{Name, Text};
use crate::source::{Span, Spanned};
use crate::token::{Token, TokenKind};
use chumsky::error::LabelError;
use chumsky::extra::ParserExtra;
use chumsky::input::{Checkpoint, Cursor, InputRef, MapExtra};
use chumsky::inspector::Inspector;
use chumsky::prelude::*;
use chumsky::primitive::select;

/// The tokens of one statement.
pub(super) type Tokens<'src> = &'src [Token];

/// A rule of the grammar, boxed: the joints are boxed so that the types, and
/// with them the build, stay small.
pub(super) type Rule<'src, O, E> = Boxed<'src, 'src, Tokens<'src>, O, E>;

/// What a rule needs of its error type: any will do that can be told what was
/// expected. A statement is read with one that costs nothing, and again with
/// one that remembers only where that failed.
pub(super) trait Extra<'src>:
    ParserExtra<
        'src,
        Tokens<'src>,
        State = State<'src>,
        Context = (),
        Error: LabelError<'src, Tokens<'src>, &'static str>,
    > + 'src
{
}

impl<'src, T> Extra<'src> for T where
    T: ParserExtra<
            'src,
            Tokens<'src>,
            State = State<'src>,
            Context = (),
            Error: LabelError<'src, Tokens<'src>, &'static str>,
        > + 'src
{
}

/// What travels along while a statement is read.
pub(super) struct State<'src> {
    /// The whole text.
    pub text: &'src str,
    /// What was found wrong on the way; taken back when the parser goes back.
    pub problems: Vec<Problem>,
}

impl State<'_> {
    /// The text of a place.
    pub fn slice(&self, span: Span) -> &str {
        self.text.get(span.range()).unwrap_or("")
    }
}

impl<'src> Inspector<'src, Tokens<'src>> for State<'src> {
    type Checkpoint = usize;

    fn on_token(&mut self, _: &Token) {}

    fn on_save<'parse>(&self, _: &Cursor<'src, 'parse, Tokens<'src>>) -> usize {
        self.problems.len()
    }

    fn on_rewind<'parse>(&mut self, mark: &Checkpoint<'src, 'parse, Tokens<'src>, usize>) {
        self.problems.truncate(*mark.inspector());
    }
}

/// A token of this kind.
pub(super) fn token<'src, E: Extra<'src>>(
    kind: TokenKind,
) -> impl Parser<'src, Tokens<'src>, Span, E> + Clone {
    select(move |token: Token, _| (token.kind == kind).then_some(token.span))
}

/// A token of this kind, known to the reader by `label`.
pub(super) fn sign<'src, E: Extra<'src>>(
    kind: TokenKind,
    label: &'static str,
) -> impl Parser<'src, Tokens<'src>, Span, E> + Clone {
    token(kind).labelled(label)
}

/// A name.
pub(super) fn name<'src, E: Extra<'src>>() -> impl Parser<'src, Tokens<'src>, Name, E> + Clone {
    bare_name().labelled("a name")
}

/// A name, unlabelled.
pub(super) fn bare_name<'src, E: Extra<'src>>() -> impl Parser<'src, Tokens<'src>, Name, E> + Clone {
    select(|token: Token, extra: &mut MapExtra<'src, '_, Tokens<'src>, E>| {
        token.kind.is_name().then(|| Spanned {
            node: name_text(extra.state().slice(token.span)),
            span: token.span,
        })
    })
}

/// A word of any sort, reserved or not.
pub(super) fn any_word<'src, E: Extra<'src>>() -> impl Parser<'src, Tokens<'src>, Name, E> + Clone {
    select(|token: Token, extra: &mut MapExtra<'src, '_, Tokens<'src>, E>| {
        token.kind.is_word().then(|| Spanned {
            node: name_text(extra.state().slice(token.span)),
            span: token.span,
        })
    })
    .labelled("a name")
}

/// A string, without its quotes.
pub(super) fn string<'src, E: Extra<'src>>(
    label: &'static str,
) -> impl Parser<'src, Tokens<'src>, Text, E> + Clone {
    select(|token: Token, extra: &mut MapExtra<'src, '_, Tokens<'src>, E>| {
        (token.kind == TokenKind::String).then(|| {
            let written = extra.state().slice(token.span);
            Spanned {
                node: written.trim_matches('"').into(),
                span: token.span,
            }
        })
    })
    .labelled(label)
}

/// A rule read by hand: `read` gets the tokens of the statement and the index
/// of the next one, and says how many it took.
pub(super) fn by_hand<'src, O: 'src, E: Extra<'src>>(
    label: &'static str,
    read: impl Fn(&mut super::scan::Scan<'src>) -> Option<O> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, O, E> + Clone {
    custom(move |input: &mut InputRef<'src, '_, Tokens<'src>, E>| {
        let tokens: Tokens<'src> = input.full_slice();
        let before = input.cursor();
        let at = *before.inner();
        let mut scan = super::scan::Scan::new(tokens, at, input.state().text);
        match read(&mut scan) {
            Some(output) => {
                for _ in at..scan.at {
                    input.skip();
                }
                input.state().problems.append(&mut scan.problems);
                Ok(output)
            }
            None => {
                let found = input.peek_maybe();
                Err(LabelError::<'src, Tokens<'src>, &'static str>::expected_found(
                    [label],
                    found,
                    input.span_since(&before),
                ))
            }
        }
    })
}

/// Notes a problem.
pub(super) fn report<'src, E: Extra<'src>>(
    extra: &mut MapExtra<'src, '_, Tokens<'src>, E>,
    problem: Problem,
) {
    extra.state().problems.push(problem);
}
