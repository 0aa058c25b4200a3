//! Brackets: `[kpc]`, `[kpc at z]`, `[Gly today]`, `[Msun for h = 0.7]`,
//! `[cMpc by hand]`, `[km via G, c]`.

use super::input::{Extra, Tokens, by_hand, name, sign, token};
use crate::ast::{Bracket, Conversion, Expr};
use crate::token::TokenKind as T;
use chumsky::prelude::*;

/// A bracket after an expression or a name.
pub(super) fn bracket<'src, E: Extra<'src>>(
    closed: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Bracket, E> + Clone + 'src {
    let unit = by_hand("a unit", |scan| scan.unit_in_bracket());
    token(T::LeftBracket)
        .then(unit)
        .then(conversion(closed).boxed().or_not())
        .then(sign(T::RightBracket, "`]`"))
        .map(|(((open, unit), conversion), close)| Bracket {
            unit,
            conversion,
            span: open.to(close),
        })
}

fn conversion<'src, E: Extra<'src>>(
    closed: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Conversion, E> + Clone + 'src {
    let at = token(T::At)
        .ignore_then(closed.clone())
        .map(|z| Conversion::At(Box::new(z)));
    let h = by_hand("`h`", |scan| {
        let found = scan.word(0) == "h";
        scan.at += usize::from(found);
        found.then(|| scan.span_from(scan.at - 1))
    });
    let for_h = token(T::For)
        .ignore_then(h)
        .then(token(T::Equal).ignore_then(closed).or_not())
        .map(|(span, value)| match value {
            Some(value) => Conversion::ForGivenH(Box::new(value)),
            None => Conversion::ForH(span),
        });
    let by_hand = token(T::By)
        .then(sign(T::Hand, "`hand`"))
        .map(|(start, end)| Conversion::ByHand(start.to(end)));
    let via = token(T::Via)
        .ignore_then(
            name()
                .separated_by(token(T::Comma))
                .at_least(1)
                .collect::<Vec<_>>(),
        )
        .map(Conversion::Via);
    choice((at, token(T::Today).map(Conversion::Today), for_h, by_hand, via))
}
