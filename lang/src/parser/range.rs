//! Ranges: `0 .. 3 every 0.5`, `0.01 .. 10 every 0.1 dex`, `0 .. 1 in 50
//! steps`, `0.01 .. 10 in 60 log steps`.

use super::input::{Extra, Rule, Tokens, sign, token};
use crate::ast::{Expr, ExprKind, Range, Step};
use crate::source::Span;
use crate::token::TokenKind as T;
use chumsky::prelude::*;

/// An arithmetic expression, or two with `..` between them.
pub(super) fn range<'src, E: Extra<'src>>(
    arithmetic: Rule<'src, Expr, E>,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    let upper = arithmetic.clone().labelled("an expression");
    let rest = token(T::DotDot).ignore_then(upper).then(step(arithmetic.clone()));
    arithmetic
        .then(rest.boxed().or_not())
        .map(|(from, rest)| match rest {
            None => from,
            Some((to, (step, end))) => Expr {
                span: from.span.to(to.span).to(end.unwrap_or(to.span)),
                kind: ExprKind::Range(Box::new(Range { from, to, step })),
            },
        })
}

/// How the range is divided, and where that ends.
fn step<'src, E: Extra<'src>>(
    arithmetic: Rule<'src, Expr, E>,
) -> impl Parser<'src, Tokens<'src>, (Step, Option<Span>), E> + Clone + 'src {
    let arithmetic = arithmetic.labelled("an expression");
    let every = token(T::Every).ignore_then(arithmetic.clone()).map(|size| {
        let end = size.span;
        (Step::Every(size), Some(end))
    });
    let steps = token(T::In)
        .ignore_then(arithmetic)
        .then(token(T::Log).or_not())
        .then(sign(T::Steps, "`steps`"))
        .map(|((count, log), end)| match log {
            Some(_) => (Step::LogSteps(count), Some(end)),
            None => (Step::Steps(count), Some(end)),
        });
    every
        .or(steps)
        .or_not()
        .map(|step| step.unwrap_or((Step::None, None)))
}
