//! Quantities: numbers with their units, and braces of numbers that share
//! one.

use super::input::{Extra, Tokens, by_hand};
use super::problem::Problem;
use super::scan::Scan;
use crate::ast::{Expr, ExprKind, Number, Quantity, UnaryOp, Uncertainty, Unit};
use crate::source::Span;
use crate::token::TokenKind;
use chumsky::prelude::*;
use smol_str::format_smolstr;

/// `70 km/s/Mpc`, `67.4(5)`, `(67.4 ± 0.5) km/s/Mpc`
pub(super) fn quantity<'src, E: Extra<'src>>() -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone {
    by_hand("a number", |scan| match scan.kind(0)? {
        TokenKind::Number | TokenKind::Concise => scan.quantity(),
        TokenKind::LeftParenthesis => scan.bracketed_quantity(),
        _ => None,
    })
}

/// A unit right after a closing brace.
pub(super) fn shared_unit<'src, E: Extra<'src>>() -> impl Parser<'src, Tokens<'src>, Unit, E> + Clone {
    by_hand("a unit", |scan| scan.unit_after_number())
}

impl Scan<'_> {
    fn quantity(&mut self) -> Option<Expr> {
        let first = self.at;
        let known = self.problems.len();
        let number = self.number()?;
        let unit = self.unit_beside(number.span);
        self.check_uncertainty(&number, unit.as_ref());
        Some(self.finish_quantity(first, known, number, unit))
    }

    fn bracketed_quantity(&mut self) -> Option<Expr> {
        let first = self.at;
        let known = self.problems.len();
        let number = self.bracketed_number()?;
        let unit = self.unit_after_number();
        Some(self.finish_quantity(first, known, number, unit))
    }

    fn finish_quantity(&mut self, first: usize, known: usize, number: Number, unit: Option<Unit>) -> Expr {
        let kind = if self.problems.len() > known {
            ExprKind::Broken
        } else {
            ExprKind::Quantity(Quantity { number, unit })
        };
        Expr {
            kind,
            span: self.span_from(first),
        }
    }

    /// The unit after a number, and what must not stand tight beside one.
    fn unit_beside(&mut self, number: Span) -> Option<Unit> {
        if !self.is_tight(0) {
            return self.unit_after_number();
        }
        let next = self.token(0)?;
        match next.kind {
            TokenKind::String => {
                self.at += 1;
                self.problems.push(Problem::AngleMark {
                    number,
                    mark: next.span,
                });
                None
            }
            TokenKind::Word if self.unit_follows() => {
                let problem = self.tight_word(number, next.span);
                self.problems.push(problem);
                self.unit_after_number()
            }
            _ => self.unit_after_number(),
        }
    }

    /// `1e`, `2x`
    fn tight_word(&self, number: Span, word: Span) -> Problem {
        if matches!(self.slice(word), "e" | "E") {
            return Problem::ExponentMissing {
                number,
                exponent: word,
            };
        }
        Problem::ImplicitProduct {
            left: number,
            right: word,
            could_be_unit: true,
        }
    }

    /// `67.4 km/s ± 0.5 km/s`
    fn check_uncertainty(&mut self, number: &Number, unit: Option<&Unit>) {
        let Some(unit) = unit else { return };
        if number.uncertainty.is_some() || !self.sees_uncertainty() {
            return;
        }
        let first = self.at;
        if self.take(TokenKind::PlusMinus) {
            if self.number().is_none() {
                self.at = first;
                return;
            }
            self.unit_after_number();
        } else {
            self.at += 7;
        }
        let uncertainty = self.span_from(first);
        self.problems.push(Problem::UncertaintyAfterUnit {
            number: number.span,
            unit: unit.span,
            uncertainty,
        });
    }
}

/// The numbers of a series, if it holds nothing else.
pub(super) fn numbers_of(items: &[Expr]) -> Option<Vec<Number>> {
    items.iter().map(number_of).collect()
}

fn number_of(item: &Expr) -> Option<Number> {
    match &item.kind {
        ExprKind::Quantity(Quantity { number, unit: None }) => Some(number.clone()),
        ExprKind::Unary(sign, inner) => {
            let number = number_of(inner).filter(|number| !number.text.starts_with('-'))?;
            match sign.node {
                UnaryOp::Negate => Some(Number {
                    value: -number.value,
                    text: format_smolstr!("-{}", number.text),
                    uncertainty: number.uncertainty.map(turned),
                    span: item.span,
                    ..number
                }),
                UnaryOp::Plus => Some(Number {
                    span: item.span,
                    ..number
                }),
                UnaryOp::Not => None,
            }
        }
        _ => None,
    }
}

/// The uncertainty of the number with the other sign: up is down.
pub(super) fn turned(uncertainty: Uncertainty) -> Uncertainty {
    Uncertainty {
        plus: uncertainty.minus,
        minus: uncertainty.plus,
        written: uncertainty.written,
    }
}
