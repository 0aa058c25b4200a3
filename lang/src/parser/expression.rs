//! Expressions, from the loosest to the tightest:
//!
//! ```text
//! EXPR under MODEL
//! or
//! and
//! not
//! < <= > >=            chained: 0 < z < 1
//! A .. B every C
//! EXPR [unit]          ends its expression
//! + -
//! * /
//! - (of one operand)
//! ^                    from the right; x² too
//! .name
//! ```
//!
//! An expression is *open* where a statement may end after it or `is` may
//! follow: there a model may carry its list of parameters without
//! parentheses. Everywhere else it is *closed*.

use super::bracket::bracket;
use super::input::{Extra, Rule, Tokens, bare_name, report, sign, token};
use super::model::{Models, models};
use super::number::superscript_value;
use super::problem::Problem;
use super::quantity::{numbers_of, quantity, shared_unit, turned};
use super::range::range;
use crate::ast::{
    Argument, BinaryOp, Bracket, CompareOp, Expr, ExprKind, LogicalOp, Name, Number, Quantity, UnaryOp,
};
use crate::source::{Span, Spanned};
use crate::token::{Token, TokenKind as T};
use chumsky::input::MapExtra;
use chumsky::pratt::{infix, left, postfix, prefix, right};
use chumsky::prelude::*;
use chumsky::primitive::select;
use smol_str::format_smolstr;

/// The rules for expressions, shared by all statements.
pub(super) struct Expressions<'src, E: Extra<'src>> {
    /// Inside something else.
    pub closed: Rule<'src, Expr, E>,
    /// Where a statement may end or `is` follow.
    pub open: Rule<'src, Expr, E>,
    /// Arithmetic only: an end of `between A and B`.
    pub bound: Rule<'src, Expr, E>,
    /// `[unit …]`
    pub bracket: Rule<'src, Bracket, E>,
    /// Models, with and without parentheses.
    pub models: Models<'src, E>,
}

/// Builds the rules.
pub(super) fn expressions<'src, E: Extra<'src>>() -> Expressions<'src, E> {
    let mut closed = Recursive::declare();
    let mut condition = Recursive::declare();
    let bracket = bracket(closed.clone()).boxed();
    let models = models(condition.clone());
    let atom = atom(closed.clone(), condition.clone()).boxed();
    let arithmetic = arithmetic(atom, bracket.clone()).boxed();
    let range = range(arithmetic.clone()).boxed();
    condition.define(logic(comparison(range).boxed()).boxed());
    closed.define(under(condition.clone(), models.closed.clone()));
    let open = under(condition, models.open.clone()).boxed();
    Expressions {
        closed: closed.labelled("an expression").boxed(),
        open: open.labelled("an expression").boxed(),
        bound: arithmetic.labelled("an expression").boxed(),
        bracket,
        models,
    }
}

/// Something with no operator outside brackets.
fn atom<'src, E: Extra<'src>>(
    closed: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
    condition: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    choice((
        quantity(),
        name_or_call(closed.clone()),
        group(closed.clone()),
        series(closed),
        token(T::Infinity).map(|span| Expr {
            kind: ExprKind::Infinity,
            span,
        }),
        condition_of(condition),
    ))
    .labelled("an expression")
}

/// `z`, `D_L(z)`
fn name_or_call<'src, E: Extra<'src>>(
    closed: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    let arguments = argument(closed)
        .separated_by(token(T::Comma))
        .allow_trailing()
        .collect::<Vec<_>>()
        .then(sign(T::RightParenthesis, "`)`"));
    let arguments = token(T::LeftParenthesis).ignore_then(arguments).boxed();
    bare_name()
        .then(arguments.or_not())
        .map(|(name, arguments)| match arguments {
            Some((arguments, close)) => Expr {
                span: name.span.to(close),
                kind: ExprKind::Call(name, arguments),
            },
            None => Expr {
                span: name.span,
                kind: ExprKind::Name(name.node),
            },
        })
}

/// `x`, `c = 2`, `D_L(x) = 10 Gpc`
fn argument<'src, E: Extra<'src>>(
    closed: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Argument, E> + Clone + 'src {
    closed
        .clone()
        .then(token(T::Equal).ignore_then(closed).or_not())
        .map(|(left, right)| match (left.kind, right) {
            (ExprKind::Name(node), Some(right)) => {
                let span = left.span;
                Argument::Named(Spanned { node, span }, right)
            }
            (kind, Some(right)) => Argument::Equation(Expr { kind, ..left }, right),
            (kind, None) => Argument::Positional(Expr { kind, ..left }),
        })
}

fn group<'src, E: Extra<'src>>(
    closed: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    token(T::LeftParenthesis)
        .then(closed)
        .then(sign(T::RightParenthesis, "`)`"))
        .map(|((open, inner), close)| Expr {
            kind: ExprKind::Group(Box::new(inner)),
            span: open.to(close),
        })
}

/// `{a, b, c}`, `{0, 0, 0.06} eV`
fn series<'src, E: Extra<'src>>(
    closed: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    let items = closed
        .separated_by(token(T::Comma))
        .allow_trailing()
        .collect::<Vec<_>>();
    token(T::LeftBrace)
        .then(items)
        .then(sign(T::RightBrace, "`}`"))
        .then(shared_unit().or_not())
        .map_with(|(((open, items), close), unit), extra| {
            let series = open.to(close);
            let Some(unit) = unit else {
                return Expr {
                    kind: ExprKind::Series(items),
                    span: series,
                };
            };
            let span = series.to(unit.span);
            let kind = match numbers_of(&items) {
                Some(numbers) => ExprKind::Quantities(numbers, unit),
                None => {
                    report(
                        extra,
                        Problem::UnitOfExpressions {
                            series,
                            unit: unit.span,
                        },
                    );
                    ExprKind::Broken
                }
            };
            Expr { kind, span }
        })
}

/// `if z < 1 then a else b`
fn condition_of<'src, E: Extra<'src>>(
    condition: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    token(T::If)
        .then(condition.clone())
        .then_ignore(sign(T::Then, "`then`"))
        .then(condition.clone())
        .then_ignore(sign(T::Else, "`else`"))
        .then(condition)
        .map(|(((start, test), yes), no)| Expr {
            span: start.to(no.span),
            kind: ExprKind::If(Box::new(test), Box::new(yes), Box::new(no)),
        })
}

/// Arithmetic, fields and the bracket that ends it.
fn arithmetic<'src, E: Extra<'src>>(
    atom: Rule<'src, Expr, E>,
    bracket: Rule<'src, Bracket, E>,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    let field = token(T::Dot).ignore_then(super::input::any_word());
    let superscript = select(|token: Token, extra: &mut MapExtra<'src, '_, Tokens<'src>, E>| {
        if token.kind != T::Superscript {
            return None;
        }
        let value = superscript_value(extra.state().slice(token.span))?;
        Some(literal(value, token.span))
    });
    atom.pratt((
        postfix(9, field, |of: Expr, name: Name, _: &mut _| Expr {
            span: of.span.to(name.span),
            kind: ExprKind::Field(Box::new(of), name),
        }),
        postfix(8, superscript, |base: Expr, power: Expr, extra: &mut _| {
            let at = Span {
                end: power.span.start,
                ..power.span
            };
            let op = Spanned {
                node: BinaryOp::Power,
                span: at,
            };
            binary(base, op, power, extra)
        }),
        infix(right(7), operator(power_of), binary),
        prefix(6, operator(sign_of), |op, operand, _: &mut _| unary(op, operand)),
        infix(left(5), operator(product_of), binary),
        infix(left(4), operator(sum_of), binary),
        postfix(3, bracket, express),
    ))
}

/// The operator that a kind of token stands for.
fn operator<'src, O: Copy + 'src, E: Extra<'src>>(
    of: fn(T) -> Option<O>,
) -> impl Parser<'src, Tokens<'src>, Spanned<O>, E> + Clone {
    select(move |token: Token, _| {
        of(token.kind).map(|node| Spanned {
            node,
            span: token.span,
        })
    })
}

fn power_of(kind: T) -> Option<BinaryOp> {
    matches!(kind, T::Caret | T::DoubleStar).then_some(BinaryOp::Power)
}

fn product_of(kind: T) -> Option<BinaryOp> {
    match kind {
        T::Star | T::Times | T::Middot => Some(BinaryOp::Multiply),
        T::Slash => Some(BinaryOp::Divide),
        _ => None,
    }
}

fn sum_of(kind: T) -> Option<BinaryOp> {
    match kind {
        T::Plus => Some(BinaryOp::Add),
        T::Minus => Some(BinaryOp::Subtract),
        _ => None,
    }
}

fn sign_of(kind: T) -> Option<UnaryOp> {
    match kind {
        T::Minus => Some(UnaryOp::Negate),
        T::Plus => Some(UnaryOp::Plus),
        _ => None,
    }
}

fn comparison_of(kind: T) -> Option<CompareOp> {
    match kind {
        T::Less => Some(CompareOp::Less),
        T::LessOrEqual => Some(CompareOp::LessOrEqual),
        T::Greater => Some(CompareOp::Greater),
        T::GreaterOrEqual => Some(CompareOp::GreaterOrEqual),
        _ => None,
    }
}

/// A whole number as an expression, negative ones by a sign.
fn literal(value: i32, span: Span) -> Expr {
    let number = Expr {
        kind: ExprKind::Quantity(Quantity {
            number: Number {
                value: f64::from(value.abs()),
                last_digit: 0,
                text: format_smolstr!("{}", value.abs()),
                uncertainty: None,
                span,
            },
            unit: None,
        }),
        span,
    };
    if value >= 0 {
        return number;
    }
    unary(
        Spanned {
            node: UnaryOp::Negate,
            span,
        },
        number,
    )
}

fn unary(op: Spanned<UnaryOp>, mut operand: Expr) -> Expr {
    // The minus of `-0.9 (+0.1, -0.2)` belongs to the number: 0.1 is the
    // uncertainty upwards of what is written, and downwards of 0.9.
    if let (UnaryOp::Negate, ExprKind::Quantity(quantity)) = (op.node, &mut operand.kind) {
        quantity.number.uncertainty = quantity.number.uncertainty.take().map(turned);
    }
    Expr {
        span: op.span.to(operand.span),
        kind: ExprKind::Unary(op, Box::new(operand)),
    }
}

fn binary<'src, E: Extra<'src>>(
    left: Expr,
    op: Spanned<BinaryOp>,
    right: Expr,
    extra: &mut MapExtra<'src, '_, Tokens<'src>, E>,
) -> Expr {
    let span = left.span.to(right.span);
    let kind = match misread(&left, op, &right, extra.state().text) {
        Some(problem) => {
            report(extra, problem);
            ExprKind::Broken
        }
        None => ExprKind::Binary(op, Box::new(left), Box::new(right)),
    };
    Expr { kind, span }
}

/// What the language reads in one way and a person might mean in another.
fn misread(left: &Expr, op: Spanned<BinaryOp>, right: &Expr, text: &str) -> Option<Problem> {
    if let ExprKind::Express(..) = left.kind {
        return Some(Problem::BracketEndsExpression {
            bracketed: left.span,
            operator: op.span,
        });
    }
    let (number, unit) = quantity_with_unit(right)?;
    let quantity = number.span.to(unit);
    match op.node {
        BinaryOp::Power => Some(Problem::UnitInExponent {
            base: left.span,
            exponent: Span {
                end: number.span.end,
                ..right.span
            },
            quantity,
        }),
        BinaryOp::Divide => {
            let tight = left.span.end == op.span.start && op.span.end == number.span.start;
            let above = last_literal(left).filter(|_| tight)?;
            Some(Problem::FractionWithUnit {
                fraction: above.span,
                denominator: number.span,
                quantity,
            })
        }
        BinaryOp::Multiply => {
            let power_of_ten = text.get(number.span.range())?.starts_with("10");
            let exponent = number.text.strip_prefix("1e").filter(|_| power_of_ten)?;
            let above = last_literal(left).filter(|above| !above.text.contains('e'))?;
            Some(Problem::ProductOfPower {
                left: above.span,
                power: number.span,
                number: format!("{}e{exponent}", above.text),
            })
        }
        BinaryOp::Add | BinaryOp::Subtract => None,
    }
}

/// The number and unit of `5 km`, `-5 km`.
fn quantity_with_unit(expr: &Expr) -> Option<(&Number, Span)> {
    match &expr.kind {
        ExprKind::Quantity(Quantity {
            number,
            unit: Some(unit),
        }) => Some((number, unit.span)),
        ExprKind::Unary(_, inner) => quantity_with_unit(inner),
        _ => None,
    }
}

/// The plain number that an expression ends with.
fn last_literal(expr: &Expr) -> Option<&Number> {
    match &expr.kind {
        ExprKind::Quantity(Quantity { number, unit: None }) if number.uncertainty.is_none() => Some(number),
        ExprKind::Binary(_, _, right) => last_literal(right),
        ExprKind::Unary(_, inner) => last_literal(inner),
        _ => None,
    }
}

fn express<'src, E: Extra<'src>>(
    of: Expr,
    bracket: Bracket,
    extra: &mut MapExtra<'src, '_, Tokens<'src>, E>,
) -> Expr {
    let span = of.span.to(bracket.span);
    let problem = match &of.kind {
        ExprKind::Express(..) => Some(Problem::SecondBracket {
            first: of.span,
            second: bracket.span,
        }),
        ExprKind::Binary(op, _, last)
            if matches!(op.node, BinaryOp::Add | BinaryOp::Subtract) && bracket.conversion.is_some() =>
        {
            Some(Problem::SumConverted {
                sum: of.span,
                last: last.span,
                bracket: bracket.span,
            })
        }
        _ => None,
    };
    let kind = match problem {
        Some(problem) => {
            report(extra, problem);
            ExprKind::Broken
        }
        None => ExprKind::Express(Box::new(of), bracket),
    };
    Expr { kind, span }
}

/// `0 < z <= 1`
fn comparison<'src, E: Extra<'src>>(
    range: Rule<'src, Expr, E>,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    let rest = operator(comparison_of).then(range.clone());
    range
        .then(rest.repeated().collect::<Vec<_>>())
        .map(|(first, rest)| match rest.last() {
            None => first,
            Some((_, last)) => Expr {
                span: first.span.to(last.span),
                kind: ExprKind::Comparison(Box::new(first), rest),
            },
        })
}

/// `not`, `and`, `or`
fn logic<'src, E: Extra<'src>>(
    comparison: Rule<'src, Expr, E>,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    let not = |kind| (kind == T::Not).then_some(UnaryOp::Not);
    let and = |kind| (kind == T::And).then_some(LogicalOp::And);
    let or = |kind| (kind == T::Or).then_some(LogicalOp::Or);
    comparison.pratt((
        prefix(3, operator(not), |op, operand, _: &mut _| unary(op, operand)),
        infix(left(2), operator(and), logical),
        infix(left(1), operator(or), logical),
    ))
}

fn logical<'src, E: Extra<'src>>(
    left: Expr,
    op: Spanned<LogicalOp>,
    right: Expr,
    _: &mut MapExtra<'src, '_, Tokens<'src>, E>,
) -> Expr {
    Expr {
        span: left.span.to(right.span),
        kind: ExprKind::Logical(op, Box::new(left), Box::new(right)),
    }
}

/// `EXPR under MODEL`
fn under<'src, E: Extra<'src>>(
    condition: impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src,
    model: Rule<'src, crate::ast::Model, E>,
) -> impl Parser<'src, Tokens<'src>, Expr, E> + Clone + 'src {
    condition.foldl(
        token(T::Under).ignore_then(model).repeated(),
        |of: Expr, model| Expr {
            span: of.span.to(model.span),
            kind: ExprKind::Under(Box::new(of), model),
        },
    )
}
