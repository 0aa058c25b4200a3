//! Tests of the parser: every form of the language page and the tree it
//! becomes, written as nested parentheses; every mistake it names, with the
//! repair it offers; and what a hostile text does to it.

use super::*;
use crate::ast::{
    Argument, Assertion, BinaryOp, Binding, Bracket, CompareOp, Conversion, Expr, ExprKind, LogicalOp, Model,
    Number, Range, Step, Tolerance, UnaryOp, Unit,
};
use crate::diagnostic::Fix;

mod form;
mod hostile;
mod mistake;
mod number;
mod statement;

/// The only statement of a text that has no mistake.
#[track_caller]
fn only(text: &str) -> StatementKind {
    let parsed = parse(text);
    assert_eq!(parsed.diagnostics, [], "{text}");
    assert_eq!(parsed.statements.len(), 1, "{text}");
    parsed.statements.into_iter().next().expect("one").kind
}

/// The tree of an expression.
#[track_caller]
fn tree(text: &str) -> String {
    match only(text) {
        StatementKind::Expression(expr, wheres) => format!("{}{}", shape(&expr), bindings(&wheres)),
        other => panic!("{text} is no expression: {other:?}"),
    }
}

/// The tree of an expression as nested parentheses.
fn shape(expr: &Expr) -> String {
    match &expr.kind {
        ExprKind::Quantity(quantity) => match &quantity.unit {
            None => number(&quantity.number),
            Some(written) => format!("{}[{}]", number(&quantity.number), unit(written)),
        },
        ExprKind::Quantities(numbers, written) => {
            let all: Vec<_> = numbers.iter().map(number).collect();
            format!("{{{}}}[{}]", all.join(" "), unit(written))
        }
        ExprKind::Infinity => "∞".into(),
        ExprKind::Name(name) => name.to_string(),
        ExprKind::Call(name, arguments) => {
            let all: Vec<_> = arguments.iter().map(argument).collect();
            format!("{}({})", name.node, all.join(", "))
        }
        ExprKind::Field(inner, name) => format!("{}.{}", shape(inner), name.node),
        ExprKind::Unary(op, inner) => format!("({} {})", unary(op.node), shape(inner)),
        ExprKind::Binary(op, left, right) => {
            format!("({} {} {})", binary(op.node), shape(left), shape(right))
        }
        ExprKind::Comparison(first, rest) => {
            let rest: Vec<_> = rest
                .iter()
                .map(|(op, right)| format!("{} {}", compare(op.node), shape(right)))
                .collect();
            format!("(compare {} {})", shape(first), rest.join(" "))
        }
        ExprKind::Logical(op, left, right) => {
            format!("({} {} {})", logical(op.node), shape(left), shape(right))
        }
        ExprKind::If(condition, then, otherwise) => {
            format!("(if {} {} {})", shape(condition), shape(then), shape(otherwise))
        }
        ExprKind::Series(all) => {
            let all: Vec<_> = all.iter().map(shape).collect();
            format!("{{{}}}", all.join(" "))
        }
        ExprKind::Range(range) => self::range(range),
        ExprKind::Express(inner, written) => format!("(in {} {})", bracket(written), shape(inner)),
        ExprKind::Under(inner, written) => format!("(under {} {})", model(written), shape(inner)),
        ExprKind::Group(inner) => format!("⟨{}⟩", shape(inner)),
        ExprKind::Broken => "broken".into(),
    }
}

fn number(number: &Number) -> String {
    match &number.uncertainty {
        None => number.text.to_string(),
        Some(uncertainty) => format!("{}+{}-{}", number.text, uncertainty.plus, uncertainty.minus),
    }
}

/// `km s^-1`, with every power spelled out where it is not 1.
fn unit(unit: &Unit) -> String {
    let mut parts: Vec<String> = Vec::new();
    if unit.scale != 1.0 {
        parts.push(format!("{:e}", unit.scale));
    }
    for factor in &unit.factors {
        let power = factor.power;
        parts.push(if *power.numer() == 1 && *power.denom() == 1 {
            factor.name.node.to_string()
        } else {
            format!("{}^{power}", factor.name.node)
        });
    }
    parts.join(" ")
}

fn argument(argument: &Argument) -> String {
    match argument {
        Argument::Positional(value) => shape(value),
        Argument::Named(name, value) => format!("{} = {}", name.node, shape(value)),
        Argument::Equation(left, right) => format!("{} == {}", shape(left), shape(right)),
    }
}

fn range(range: &Range) -> String {
    let step = match &range.step {
        Step::None => String::new(),
        Step::Every(step) => format!(" every {}", shape(step)),
        Step::Steps(count) => format!(" steps {}", shape(count)),
        Step::LogSteps(count) => format!(" log {}", shape(count)),
    };
    format!("({} .. {}{step})", shape(&range.from), shape(&range.to))
}

fn bracket(bracket: &Bracket) -> String {
    let conversion = match &bracket.conversion {
        None => String::new(),
        Some(Conversion::At(z)) => format!(" at {}", shape(z)),
        Some(Conversion::Today(_)) => " today".into(),
        Some(Conversion::ForH(_)) => " for h".into(),
        Some(Conversion::ForGivenH(h)) => format!(" for h = {}", shape(h)),
        Some(Conversion::ByHand(_)) => " by hand".into(),
        Some(Conversion::Via(names)) => {
            let names: Vec<_> = names.iter().map(|name| name.node.as_str()).collect();
            format!(" via {}", names.join(" "))
        }
    };
    format!("[{}{conversion}]", unit(&bracket.unit))
}

fn model(model: &Model) -> String {
    let settings: Vec<_> = model
        .settings
        .iter()
        .map(|setting| {
            let variable = setting.variable.as_ref().map(|name| format!("({})", name.node));
            format!(
                " {}{}={}",
                setting.name.node,
                variable.unwrap_or_default(),
                shape(&setting.value)
            )
        })
        .collect();
    format!("<{}{}>", model.base.node, settings.concat())
}

fn bindings(all: &[Binding]) -> String {
    let written = |one: &Binding| {
        let annotation = one.annotation.as_ref().map(bracket).unwrap_or_default();
        format!(" where {}{annotation}={}", one.name.node, shape(&one.value))
    };
    all.iter().map(written).collect()
}

const fn unary(op: UnaryOp) -> &'static str {
    match op {
        UnaryOp::Negate => "neg",
        UnaryOp::Plus => "pos",
        UnaryOp::Not => "not",
    }
}

const fn binary(op: BinaryOp) -> &'static str {
    match op {
        BinaryOp::Add => "+",
        BinaryOp::Subtract => "-",
        BinaryOp::Multiply => "*",
        BinaryOp::Divide => "/",
        BinaryOp::Power => "^",
    }
}

const fn compare(op: CompareOp) -> &'static str {
    match op {
        CompareOp::Less => "<",
        CompareOp::LessOrEqual => "<=",
        CompareOp::Greater => ">",
        CompareOp::GreaterOrEqual => ">=",
    }
}

const fn logical(op: LogicalOp) -> &'static str {
    match op {
        LogicalOp::And => "and",
        LogicalOp::Or => "or",
    }
}

/// The codes of the mistakes in a text.
fn codes(text: &str) -> Vec<&'static str> {
    parse(text).diagnostics.iter().map(|one| one.code).collect()
}

/// A text with the edits of a repair made.
fn mended(text: &str, fix: &Fix) -> String {
    let mut edits = fix.edits.clone();
    edits.sort_by_key(|(span, _)| std::cmp::Reverse((span.start, span.end)));
    let mut mended = text.to_owned();
    for (span, replacement) in edits {
        mended.replace_range(span.range(), &replacement);
    }
    mended
}

#[test]
fn the_sheet_of_the_language_page_reads_without_a_complaint() {
    let parsed = parse(
        r#"# How far can we see?
assume planck2018

given z = 1.1            "redshift of the farthest Larkspur galaxy"

recession(d [Mpc]) [km/s] = H0 * d

result R_obs  = particle_horizon() [Gly]     "radius of the observable universe"

claim "abstract":  2 * R_obs is 93 Gly within 2%
claim "sec. 2.1":  recession(3 Mpc) under flat with H0 = 70 km/s/Mpc, Ωm = 0.3 is 210 km/s

table z = 0.5 .. 3 every 0.5: D_C(z) [Gly], D_L(z) [Gpc], age(z) [Gyr]
figure "reach.svg" z = 0.01 .. 1000 every 0.05 dex: D_A(z) [Gly], hubble_radius(z) [Gly]
"#,
    );
    assert_eq!(parsed.diagnostics, []);
    assert_eq!(parsed.statements.len(), 8);
}
