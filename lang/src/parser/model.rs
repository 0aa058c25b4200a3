//! Models: `planck2018`, `flat with H0 = 70 km/s/Mpc, Ωm = 0.3`.

use super::input::{Extra, Rule, Tokens, name, report, sign, token};
use super::problem::Problem;
use crate::ast::{Expr, Model, Name, Setting};
use crate::token::TokenKind as T;
use chumsky::prelude::*;

/// The rules for models.
pub(super) struct Models<'src, E: Extra<'src>> {
    /// A name with a list of parameters or without, or one in parentheses.
    pub open: Rule<'src, Model, E>,
    /// A name, or anything in parentheses.
    pub closed: Rule<'src, Model, E>,
}

/// Builds the rules; `condition` is an expression without `under`.
pub(super) fn models<'src, E: Extra<'src>>(
    condition: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> Models<'src, E> {
    let bare = bare(condition).boxed();
    let parenthesised = recursive(|inner| {
        token(T::LeftParenthesis)
            .then(bare.clone().or(inner))
            .then(sign(T::RightParenthesis, "`)`"))
            .map(|((open, model), close)| Model {
                span: open.to(close),
                ..model
            })
    })
    .boxed();
    let closed = bare.clone().map_with(|model, extra| {
        if !model.settings.is_empty() {
            report(extra, Problem::BareWith { model: model.span });
        }
        model
    });
    Models {
        open: bare.or(parenthesised.clone()).labelled("a model").boxed(),
        closed: closed.or(parenthesised).labelled("a model").boxed(),
    }
}

fn bare<'src, E: Extra<'src>>(
    condition: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Model, E> + Clone + 'src {
    let settings = setting(condition)
        .separated_by(token(T::Comma))
        .at_least(1)
        .collect::<Vec<_>>();
    let list = token(T::With).ignore_then(settings);
    name().then(list.or_not()).map(|(base, settings)| {
        let settings = settings.unwrap_or_default();
        let end = settings.last().map_or(base.span, |last| last.value.span);
        Model {
            span: base.span.to(end),
            base,
            settings,
        }
    })
}

/// `H0 = 70 km/s/Mpc`, `w(z) = -1 + 0.2*z/(1+z)`
fn setting<'src, E: Extra<'src>>(
    condition: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Setting, E> + Clone + 'src {
    let variable = token(T::LeftParenthesis)
        .ignore_then(name())
        .then_ignore(sign(T::RightParenthesis, "`)`"));
    name()
        .labelled("a parameter")
        .then(variable.or_not())
        .then_ignore(sign(T::Equal, "`=`"))
        .then(condition.labelled("an expression"))
        .map(|((name, variable), value): ((Name, _), _)| Setting {
            name,
            variable,
            value,
        })
}
