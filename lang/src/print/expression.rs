//! Expressions back to text.

use super::quantity::{write_quantities, write_quantity};
use super::{write_bracket, write_model};
use crate::ast::{Argument, BinaryOp, CompareOp, Expr, ExprKind, LogicalOp, Quantity, Range, Step, UnaryOp};
use std::fmt::Write;

/// An expression.
#[must_use]
pub fn expression(expr: &Expr) -> String {
    let mut out = String::new();
    write_expression(&mut out, expr);
    out
}

pub(super) fn write_expression(out: &mut String, expr: &Expr) {
    match &expr.kind {
        ExprKind::Quantity(quantity) => write_quantity(out, quantity),
        ExprKind::Quantities(numbers, unit) => write_quantities(out, numbers, unit),
        ExprKind::Infinity => out.push('∞'),
        ExprKind::Name(name) => out.push_str(name),
        ExprKind::Call(name, arguments) => {
            let _ = write!(out, "{}(", name.node);
            list(out, arguments, write_argument);
            out.push(')');
        }
        ExprKind::Field(of, name) => {
            write_expression(out, of);
            let _ = write!(out, ".{}", name.node);
        }
        ExprKind::Unary(op, operand) => write_unary(out, op.node, operand),
        ExprKind::Binary(op, left, right) => write_binary(out, op.node, left, right),
        ExprKind::Comparison(first, rest) => {
            write_expression(out, first);
            for (op, operand) in rest {
                let _ = write!(out, " {} ", comparison_sign(op.node));
                write_expression(out, operand);
            }
        }
        ExprKind::Logical(op, left, right) => {
            write_expression(out, left);
            out.push_str(match op.node {
                LogicalOp::And => " and ",
                LogicalOp::Or => " or ",
            });
            write_expression(out, right);
        }
        ExprKind::If(test, yes, no) => {
            out.push_str("if ");
            write_expression(out, test);
            out.push_str(" then ");
            write_expression(out, yes);
            out.push_str(" else ");
            write_expression(out, no);
        }
        ExprKind::Series(items) => {
            out.push('{');
            list(out, items, write_expression);
            out.push('}');
        }
        ExprKind::Range(range) => write_range(out, range),
        ExprKind::Express(of, bracket) => {
            write_expression(out, of);
            out.push(' ');
            write_bracket(out, bracket);
        }
        ExprKind::Under(of, model) => {
            write_expression(out, of);
            out.push_str(" under ");
            let plain = model.settings.is_empty();
            out.push_str(if plain { "" } else { "(" });
            write_model(out, model);
            out.push_str(if plain { "" } else { ")" });
        }
        ExprKind::Group(inner) => {
            out.push('(');
            write_expression(out, inner);
            out.push(')');
        }
        // What could not be read cannot be written: the mark is no name of
        // the language, so it is not read back as something else.
        ExprKind::Broken => out.push('?'),
    }
}

fn write_argument(out: &mut String, argument: &Argument) {
    match argument {
        Argument::Positional(value) => write_expression(out, value),
        Argument::Named(name, value) => {
            let _ = write!(out, "{} = ", name.node);
            write_expression(out, value);
        }
        Argument::Equation(left, right) => {
            write_expression(out, left);
            out.push_str(" = ");
            write_expression(out, right);
        }
    }
}

fn write_unary(out: &mut String, op: UnaryOp, operand: &Expr) {
    out.push_str(match op {
        UnaryOp::Negate => "-",
        UnaryOp::Plus => "+",
        UnaryOp::Not => "not ",
    });
    // `+-` is the sign of an uncertainty, and `++` none at all.
    if op == UnaryOp::Plus && matches!(operand.kind, ExprKind::Unary(..)) {
        out.push(' ');
    }
    write_expression(out, operand);
}

fn write_binary(out: &mut String, op: BinaryOp, left: &Expr, right: &Expr) {
    write_expression(out, left);
    out.push_str(match op {
        BinaryOp::Add => " + ",
        BinaryOp::Subtract => " - ",
        BinaryOp::Multiply => " * ",
        BinaryOp::Divide => " / ",
        BinaryOp::Power if ends_in_unit(left) => " ^ ",
        BinaryOp::Power => "^",
    });
    write_expression(out, right);
}

/// Whether a tight `^` would belong to a unit.
fn ends_in_unit(expr: &Expr) -> bool {
    matches!(
        expr.kind,
        ExprKind::Quantity(Quantity { unit: Some(_), .. }) | ExprKind::Quantities(..)
    )
}

fn comparison_sign(op: CompareOp) -> &'static str {
    match op {
        CompareOp::Less => "<",
        CompareOp::LessOrEqual => "<=",
        CompareOp::Greater => ">",
        CompareOp::GreaterOrEqual => ">=",
    }
}

fn write_range(out: &mut String, range: &Range) {
    write_expression(out, &range.from);
    out.push_str(" .. ");
    write_expression(out, &range.to);
    match &range.step {
        Step::None => {}
        Step::Every(size) => {
            out.push_str(" every ");
            write_expression(out, size);
        }
        Step::Steps(count) => {
            out.push_str(" in ");
            write_expression(out, count);
            out.push_str(" steps");
        }
        Step::LogSteps(count) => {
            out.push_str(" in ");
            write_expression(out, count);
            out.push_str(" log steps");
        }
    }
}

/// Items with commas between them.
pub(super) fn list<T>(out: &mut String, items: &[T], mut write: impl FnMut(&mut String, &T)) {
    for (at, item) in items.iter().enumerate() {
        if at > 0 {
            out.push_str(", ");
        }
        write(out, item);
    }
}
