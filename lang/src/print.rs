//! The tree back to text, in the one style: what is printed reads back as the
//! same tree, places aside. Comments and the width of lines are not its
//! business; a statement becomes one line.
//!
//! Spaces carry meaning around units, so they are laid out with care: a
//! quotient of values has spaces (`70 km / t`), one inside a unit has none
//! (`70 km/s`), a power has none unless its base carries a unit.

mod expression;
mod quantity;

use crate::ast::{
    Assertion, Binding, Bracket, Claim, Conversion, Definition, Model, Name, Parameter, Plot, Read, Setting,
    Statement, StatementKind, Text, Tolerance,
};
use crate::token::{TokenKind, lex};
pub use expression::expression;
use expression::{list, write_expression};
pub use quantity::unit;
use std::fmt::Write;

/// A whole sheet, one statement a line. Broken statements are left out.
#[must_use]
pub fn sheet(statements: &[Statement]) -> String {
    let mut out = String::new();
    for statement in statements {
        if statement.kind != StatementKind::Broken {
            write_statement(&mut out, &statement.kind);
            out.push('\n');
        }
    }
    out
}

/// One statement, without a line break.
#[must_use]
pub fn statement(statement: &Statement) -> String {
    let mut out = String::new();
    write_statement(&mut out, &statement.kind);
    out
}

/// A model: `flat with H0 = 70 km/s/Mpc, Ωm = 0.3`.
#[must_use]
pub fn model(model: &Model) -> String {
    let mut out = String::new();
    write_model(&mut out, model);
    out
}

// Writing to a string never fails, so the results of `write!` are let go.

fn write_statement(out: &mut String, kind: &StatementKind) {
    match kind {
        StatementKind::Assume(model) => {
            out.push_str("assume ");
            write_model(out, model);
        }
        StatementKind::Model(name, model) => {
            let _ = write!(out, "model {} = ", name.node);
            write_model(out, model);
        }
        StatementKind::Given(definition) => {
            out.push_str("given ");
            write_definition(out, definition, None);
        }
        StatementKind::Value(definition) => write_definition(out, definition, None),
        StatementKind::Function(definition, parameters) => {
            write_definition(out, definition, Some(parameters));
        }
        StatementKind::Result(definition) => {
            out.push_str("result ");
            write_definition(out, definition, None);
        }
        StatementKind::ResultOf(name, unit, about) => {
            let _ = write!(out, "result {}", name.node);
            write_annotation(out, unit.as_ref());
            write_about(out, about.as_ref());
        }
        StatementKind::Claim(label, claim) => write_claim(out, label.as_ref(), claim),
        StatementKind::Table(plot) => write_plot(out, "table", plot),
        StatementKind::Figure(plot) => write_plot(out, "figure", plot),
        StatementKind::Read(read) => write_read(out, read),
        StatementKind::Include(path) => {
            let _ = write!(out, "include \"{}\"", path.node);
        }
        StatementKind::Unit(name, value) => {
            let _ = write!(out, "1 {} = ", name.node);
            write_expression(out, value);
        }
        StatementKind::Tally(names) => {
            out.push_str("tally ");
            list(out, names, |out, name| out.push_str(&name.node));
        }
        StatementKind::Correlate(left, right, by) => {
            let _ = write!(out, "correlate {}, {} by ", left.node, right.node);
            write_expression(out, by);
        }
        StatementKind::Explain(value) => {
            out.push_str("explain ");
            write_expression(out, value);
        }
        StatementKind::Help(topic) => {
            out.push_str("help");
            if let Some(topic) = topic {
                out.push(' ');
                write_word_or_string(out, topic);
            }
        }
        StatementKind::Expression(value, wheres) => {
            write_expression(out, value);
            write_wheres(out, wheres);
        }
        StatementKind::Broken => {}
    }
}

fn write_definition(out: &mut String, definition: &Definition, parameters: Option<&[Parameter]>) {
    out.push_str(&definition.name.node);
    if let Some(parameters) = parameters {
        out.push('(');
        list(out, parameters, write_parameter);
        out.push(')');
    }
    write_annotation(out, definition.annotation.as_ref());
    out.push_str(" = ");
    write_expression(out, &definition.value);
    write_wheres(out, &definition.wheres);
    write_about(out, definition.about.as_ref());
}

fn write_parameter(out: &mut String, parameter: &Parameter) {
    out.push_str(&parameter.name.node);
    write_annotation(out, parameter.annotation.as_ref());
    if let Some(default) = &parameter.default {
        out.push_str(" = ");
        write_expression(out, default);
    }
}

fn write_wheres(out: &mut String, wheres: &[Binding]) {
    if wheres.is_empty() {
        return;
    }
    out.push_str(" where ");
    list(out, wheres, |out, binding| {
        out.push_str(&binding.name.node);
        write_annotation(out, binding.annotation.as_ref());
        out.push_str(" = ");
        write_expression(out, &binding.value);
    });
}

fn write_annotation(out: &mut String, annotation: Option<&Bracket>) {
    if let Some(bracket) = annotation {
        out.push(' ');
        write_bracket(out, bracket);
    }
}

fn write_about(out: &mut String, about: Option<&Text>) {
    if let Some(about) = about {
        let _ = write!(out, " \"{}\"", about.node);
    }
}

/// `[kpc at z]`
fn write_bracket(out: &mut String, bracket: &Bracket) {
    out.push('[');
    quantity::write_bracketed_unit(out, &bracket.unit);
    match &bracket.conversion {
        None => {}
        Some(Conversion::At(z)) => {
            out.push_str(" at ");
            write_expression(out, z);
        }
        Some(Conversion::Today(_)) => out.push_str(" today"),
        Some(Conversion::ForH(_)) => out.push_str(" for h"),
        Some(Conversion::ForGivenH(h)) => {
            out.push_str(" for h = ");
            write_expression(out, h);
        }
        Some(Conversion::ByHand(_)) => out.push_str(" by hand"),
        Some(Conversion::Via(names)) => {
            out.push_str(" via ");
            list(out, names, |out, name: &Name| out.push_str(&name.node));
        }
    }
    out.push(']');
}

fn write_model(out: &mut String, model: &Model) {
    out.push_str(&model.base.node);
    if !model.settings.is_empty() {
        out.push_str(" with ");
        list(out, &model.settings, write_setting);
    }
}

fn write_setting(out: &mut String, setting: &Setting) {
    out.push_str(&setting.name.node);
    if let Some(variable) = &setting.variable {
        let _ = write!(out, "({})", variable.node);
    }
    out.push_str(" = ");
    write_expression(out, &setting.value);
}

fn write_claim(out: &mut String, label: Option<&Text>, claim: &Claim) {
    out.push_str("claim");
    if let Some(label) = label {
        let _ = write!(out, " \"{}\"", label.node);
    }
    out.push_str(": ");
    write_expression(out, &claim.subject);
    if let Some(assertion) = &claim.assertion {
        write_assertion(out, assertion);
    }
    match &claim.within {
        None => {}
        Some(Tolerance::Amount(amount)) => {
            out.push_str(" within ");
            write_expression(out, amount);
        }
        Some(Tolerance::Sigma(count)) => {
            out.push_str(" within ");
            write_expression(out, count);
            out.push_str(" sigma");
        }
    }
}

fn write_assertion(out: &mut String, assertion: &Assertion) {
    let (words, value) = match assertion {
        Assertion::Is(value) => (" is ", value),
        Assertion::About(value) => (" is about ", value),
        Assertion::Above(value) => (" is above ", value),
        Assertion::Below(value) => (" is below ", value),
        Assertion::AtLeast(value) => (" is at least ", value),
        Assertion::AtMost(value) => (" is at most ", value),
        Assertion::Between(low, high) => {
            out.push_str(" is between ");
            write_expression(out, low);
            (" and ", high)
        }
        Assertion::Never(_) => {
            out.push_str(" is never");
            return;
        }
    };
    out.push_str(words);
    write_expression(out, value);
}

fn write_plot(out: &mut String, word: &str, plot: &Plot) {
    out.push_str(word);
    write_about(out, plot.path.as_ref());
    let _ = write!(out, " {} = ", plot.variable.node);
    write_expression(out, &plot.over);
    out.push_str(": ");
    list(out, &plot.columns, |out, (column, about)| {
        write_expression(out, column);
        write_about(out, about.as_ref());
    });
}

fn write_read(out: &mut String, read: &Read) {
    let _ = write!(out, "read \"{}\" as {}", read.path.node, read.name.node);
    if !read.units.is_empty() {
        out.push_str(" with ");
        list(out, &read.units, |out, (column, unit)| {
            write_word_or_string(out, column);
            out.push(' ');
            write_bracket(out, unit);
        });
    }
    if let Some(only) = &read.only {
        out.push_str(" only ");
        write_expression(out, only);
    }
}

/// A word as it is, anything else in quotes.
fn write_word_or_string(out: &mut String, text: &Text) {
    let tokens = lex(&text.node);
    let is_word = match tokens.as_slice() {
        [token] => {
            (token.kind.is_word() || token.kind == TokenKind::Percent)
                && token.span.range() == (0..text.node.len())
        }
        _ => false,
    };
    if is_word {
        out.push_str(&text.node);
    } else {
        let _ = write!(out, "\"{}\"", text.node);
    }
}
