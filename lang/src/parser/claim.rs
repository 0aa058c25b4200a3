//! Claims: `claim "sec. 2": R_ev is 16.7 Gly within 2%`.

use super::expression::Expressions;
use super::input::{Extra, Tokens, sign, string, token};
use crate::ast::{Assertion, Claim, Expr, StatementKind, Tolerance};
use crate::token::TokenKind as T;
use chumsky::prelude::*;

/// The statement.
pub(super) fn claim<'src, E: Extra<'src>>(
    expressions: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    let label = string("a label")
        .then_ignore(sign(T::Colon, "`:`"))
        .map(Some)
        .or(token(T::Colon).map(|_| None))
        .or_not()
        .map(Option::flatten);
    let open = expressions.open.clone();
    let is = token(T::Is).ignore_then(assertion(expressions));
    let body =
        open.clone()
            .then(is.or_not())
            .then(within(open).or_not())
            .map(|((subject, assertion), within)| Claim {
                subject,
                assertion,
                within,
            });
    token(T::Claim)
        .ignore_then(label)
        .then(body)
        .map(|(label, claim)| StatementKind::Claim(label, claim))
}

/// What stands after `is`.
fn assertion<'src, E: Extra<'src>>(
    expressions: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, Assertion, E> + Clone + 'src {
    let value = expressions.open.clone();
    let word = |kind: T, make: fn(Expr) -> Assertion| token(kind).ignore_then(value.clone()).map(make);
    // A condition would swallow the `and` of `between A and B`.
    let end = expressions.bound.clone();
    let between = token(T::Between)
        .ignore_then(end.clone())
        .then_ignore(sign(T::And, "`and`"))
        .then(end)
        .map(|(low, high)| Assertion::Between(low, high));
    let at = token(T::At).ignore_then(choice((
        word(T::Least, Assertion::AtLeast).labelled("`least`"),
        word(T::Most, Assertion::AtMost).labelled("`most`"),
    )));
    choice((
        word(T::About, Assertion::About),
        word(T::Above, Assertion::Above),
        word(T::Below, Assertion::Below),
        at,
        between,
        token(T::Never).map(Assertion::Never),
        value.clone().map(Assertion::Is),
    ))
    .boxed()
}

/// `within 2%`, `within 2 sigma`
fn within<'src, E: Extra<'src>>(
    value: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Tolerance, E> + Clone + 'src {
    token(T::Within)
        .ignore_then(value)
        .then(token(T::Sigma).or_not())
        .map(|(amount, sigma)| match sigma {
            Some(_) => Tolerance::Sigma(amount),
            None => Tolerance::Amount(amount),
        })
}
