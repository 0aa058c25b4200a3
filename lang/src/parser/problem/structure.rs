//! Words for problems with the form of expressions and statements.

use super::{point, slice};
use crate::diagnostic::{Diagnostic, Fix};
use crate::source::Span;
use crate::token::{Token, TokenKind};

fn parenthesised(span: Span) -> Vec<(Span, String)> {
    vec![(point(span.start), "(".into()), (point(span.end), ")".into())]
}

pub(super) fn bracket_ends_expression(text: &str, bracketed: Span, operator: Span) -> Diagnostic {
    let sign = slice(text, operator);
    let mut diagnostic = Diagnostic::error(
        "bracket-ends-expression",
        "a bracket ends its expression; more arithmetic needs parentheses",
        operator,
        format!("`{sign}` after a bracket"),
    )
    .and(bracketed, "expressed in a unit");
    diagnostic.fixes.push(Fix {
        title: "put what is expressed in parentheses".into(),
        edits: parenthesised(bracketed),
    });
    diagnostic
}

pub(super) fn second_bracket(first: Span, second: Span) -> Diagnostic {
    let mut diagnostic = Diagnostic::error(
        "bracket-ends-expression",
        "a bracket ends its expression; a second one needs parentheses",
        second,
        "a second bracket",
    )
    .and(first, "expressed in a unit");
    diagnostic.fixes.push(Fix {
        title: "put what is expressed in parentheses".into(),
        edits: parenthesised(first),
    });
    diagnostic
}

pub(super) fn sum_converted(text: &str, sum: Span, last: Span, bracket: Span) -> Diagnostic {
    let written = slice(text, bracket);
    let mut diagnostic = Diagnostic::error(
        "sum-converted",
        format!("`{written}` changes the value, and it is not clear of what: of the sum or of its last term"),
        bracket,
        "changes the value",
    )
    .and(sum, "a bare sum");
    diagnostic.fixes.push(Fix {
        title: format!("of the sum: write `({}) {written}`", slice(text, sum)),
        edits: parenthesised(sum),
    });
    diagnostic.fixes.push(Fix {
        title: format!("of the last term: write `({} {written})`", slice(text, last)),
        edits: parenthesised(last.to(bracket)),
    });
    diagnostic
}

pub(super) fn annotation_converts(bracket: Span) -> Diagnostic {
    Diagnostic::error(
        "annotation-converts",
        "the bracket after a name being defined names its unit and changes nothing",
        bracket,
        "a plain unit was expected",
    )
    .note("convert the value instead: given r = D_C(1) [kpc at 1]")
}

pub(super) fn bare_with(model: Span) -> Diagnostic {
    let mut diagnostic = Diagnostic::error(
        "bare-with",
        "a model with a list of parameters needs parentheses inside an expression",
        model,
        "where this list ends is not clear",
    );
    diagnostic.fixes.push(Fix {
        title: "put the model in parentheses".into(),
        edits: parenthesised(model),
    });
    diagnostic
}

pub(super) fn missing_expression(text: &str, after: Option<Span>, at: Span) -> Diagnostic {
    match after {
        Some(sign) => Diagnostic::error(
            "missing-expression",
            format!("an expression is missing after `{}`", slice(text, sign)),
            at,
            "an expression was expected",
        ),
        None => Diagnostic::error(
            "missing-expression",
            "an expression is missing",
            at,
            "an expression was expected",
        ),
    }
}

pub(super) fn missing_operator(text: &str, left: Span, right: Span) -> Diagnostic {
    let (first, second) = (slice(text, left), slice(text, right));
    let diagnostic = Diagnostic::error(
        "missing-operator",
        format!("there is no operator between `{first}` and `{second}`"),
        right,
        "an operator was expected before this",
    )
    .and(left, "")
    .fix(
        "to multiply write `*`",
        Span {
            start: left.end,
            end: right.start,
        },
        " * ",
    );
    if first == "%" {
        diagnostic.note("`%` is a unit, percent, and no operator")
    } else {
        diagnostic
    }
}

pub(super) fn equals_as_comparison(at: Span) -> Diagnostic {
    Diagnostic::error(
        "equals-as-comparison",
        "`=` binds a name and is not a condition",
        at,
        "",
    )
    .note("compare with < <= > >=, or state what a value is: claim: x is 3.0 within 2%")
}

pub(super) fn equals_in_claim(at: Span) -> Diagnostic {
    Diagnostic::error(
        "equals-in-claim",
        "a claim says what a value is with `is`",
        at,
        "",
    )
    .fix("write `is`", at, "is")
}

pub(super) fn chained_assignment(first: Span, second: Span) -> Diagnostic {
    Diagnostic::error(
        "chained-assignment",
        "a statement binds one name",
        second,
        "a second `=`",
    )
    .and(first, "the first")
    .note("give each name a statement of its own")
}

pub(super) fn reserved_name(text: &str, word: Span) -> Diagnostic {
    let name = slice(text, word);
    Diagnostic::error(
        "reserved-name",
        format!("`{name}` is a word of the language and cannot be a name"),
        word,
        "reserved",
    )
    .fix(format!("write `{name}_`"), point(word.end), "_")
}

pub(super) fn unknown_statement(text: &str, word: Span, near: &str) -> Diagnostic {
    let written = slice(text, word);
    Diagnostic::error(
        "unknown-statement",
        format!("there is no statement `{written}`"),
        word,
        format!("did you mean `{near}`?"),
    )
    .fix(format!("write `{near}`"), word, near)
}

pub(super) fn model_as_value(text: &str, name: Span, with: Span) -> Diagnostic {
    let written = slice(text, name);
    Diagnostic::error(
        "model-as-value",
        format!("a model is named by a statement of its own: model {written} = …"),
        with,
        "a list of parameters makes a model",
    )
    .fix(format!("write `model {written}`"), point(name.start), "model ")
}

pub(super) fn misplaced_string(string: Span) -> Diagnostic {
    Diagnostic::error(
        "misplaced-string",
        "a description has no place here",
        string,
        "",
    )
    .note("a description ends a definition or a column: result d = D_L(z) [Gpc] \"luminosity distance\"; elsewhere use a comment: # …")
}

pub(super) fn foreign_operator(text: &str, operator: Span) -> Diagnostic {
    let sign = slice(text, operator);
    let diagnostic = Diagnostic::error(
        "foreign-operator",
        format!("there is no operator `{sign}`"),
        operator,
        "",
    );
    match sign {
        "==" | "===" => diagnostic
            .note("whether two values are equal is a claim: claim: a is b within 1e-6; an equation to solve has one `=`: root(D_L(x) = 10 Gpc, x = 0 .. 20)"),
        "!=" | "≠" | "<>" => diagnostic.note("values that differ are compared with < or >; a condition is denied by `not`"),
        "&&" => diagnostic.fix("write `and`", operator, spaced(text, operator, "and")),
        "||" => diagnostic.fix("write `or`", operator, spaced(text, operator, "or")),
        ":=" => diagnostic.fix("write `=`", operator, "="),
        "=>" => diagnostic.note("at least is written >= ; a condition is if … then … else …").fix("write `>=`", operator, ">="),
        "//" => diagnostic.note("a comment starts with `#`; a quotient is written `/`, `floor(a/b)` where whole"),
        "++" | "+=" | "-=" | "*=" | "/=" => {
            diagnostic.note("a name is bound once and keeps its value: bind the new value to a new name")
        }
        _ => diagnostic.note("a function is defined as f(x) = …"),
    }
}

/// A word with the spaces it needs where a sign had none.
fn spaced(text: &str, sign: Span, word: &str) -> String {
    let before = text[..sign.start as usize].ends_with(char::is_whitespace);
    let after = text[sign.end as usize..].starts_with(char::is_whitespace);
    let space = |present: bool| if present { "" } else { " " };
    format!("{}{word}{}", space(before), space(after))
}

pub(super) fn unexpected(
    text: &str,
    at: Span,
    found: Option<Token>,
    expected: &[&'static str],
) -> Diagnostic {
    let met = match found {
        Some(token) => shown(text, token),
        None => "the end of the statement".to_owned(),
    };
    let message = if expected.is_empty() {
        format!("{met} does not fit here")
    } else {
        format!("expected {}, found {met}", listed(expected))
    };
    let label = match found {
        Some(_) => "does not fit here",
        None => "more was expected here",
    };
    Diagnostic::error("unexpected", message, at, label)
}

/// At most this many characters of the sheet are repeated in a message.
const SHOWN_CHARACTERS: usize = 40;

fn shown(text: &str, token: Token) -> String {
    let written = slice(text, token.span);
    if token.kind == TokenKind::String {
        return "a string".to_owned();
    }
    if written.chars().count() <= SHOWN_CHARACTERS {
        return format!("`{written}`");
    }
    let start: String = written.chars().take(SHOWN_CHARACTERS).collect();
    format!("`{start}…`")
}

/// `a, b or c`
fn listed(items: &[&'static str]) -> String {
    match items {
        [] => String::new(),
        [only] => (*only).to_owned(),
        [most @ .., last] => format!("{} or {last}", most.join(", ")),
    }
}
