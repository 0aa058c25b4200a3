//! Statements that could not be read: what a person would call the mistake,
//! and what can be saved.
//!
//! The parser knows how far it came and what would have fitted there. What is
//! wrong is often plainer from the tokens around that place: two operands
//! side by side, a word that is reserved, an `=` where a condition stands.

use super::input::{State, Tokens};
use super::problem::Problem;
use super::statement::Grammar;
use crate::ast::{Definition, Expr, ExprKind, Name, StatementKind};
use crate::layout::starts_line;
use crate::source::{Span, Spanned};
use crate::token::{Token, TokenKind as T};
use chumsky::error::{Rich, RichPattern};
use chumsky::prelude::*;

/// The error type of the second attempt.
pub(super) type Careful<'src> = extra::Full<Rich<'src, Token>, State<'src>, ()>;

/// What is made of a statement that could not be read.
pub(super) struct Diagnosis {
    pub statement: StatementKind,
    pub problems: Vec<Problem>,
    pub lost: Option<Name>,
}

/// Statement words that a first word is compared with.
const STATEMENT_WORDS: [&str; 13] = [
    "assume",
    "model",
    "given",
    "result",
    "claim",
    "table",
    "figure",
    "read",
    "include",
    "tally",
    "correlate",
    "explain",
    "help",
];

/// At most so many alternatives are listed.
const MAX_EXPECTED: usize = 4;

/// Looks at a statement that could not be read. `known` holds the problems of
/// its tokens; where there are any, it was not parsed at all.
pub(super) fn diagnose<'src>(
    grammar: &Grammar<'src, Careful<'src>>,
    text: &'src str,
    tokens: Tokens<'src>,
    defines: bool,
    known: Vec<Problem>,
) -> Diagnosis {
    let mut problems = known;
    if problems.is_empty() {
        problems.push(first_failure(grammar, text, tokens, defines));
    }
    let (statement, lost) = salvage(grammar, text, tokens);
    Diagnosis {
        statement,
        problems,
        lost,
    }
}

fn first_failure<'src>(
    grammar: &Grammar<'src, Careful<'src>>,
    text: &'src str,
    tokens: Tokens<'src>,
    defines: bool,
) -> Problem {
    let mut state = State {
        text,
        problems: Vec::new(),
    };
    let rule = grammar.rule(tokens, defines);
    let errors = rule.parse_with_state(tokens, &mut state).into_errors();
    let failure = Failure {
        text,
        tokens,
        at: errors.first().map_or(0, |error| error.span().start),
        expected: errors.first().map(expected_of).unwrap_or_default(),
    };
    failure.problem()
}

/// What would have fitted, as labels.
fn expected_of(error: &Rich<'_, Token>) -> Vec<&'static str> {
    let mut expected: Vec<&'static str> = Vec::new();
    for pattern in error.expected() {
        let label = match pattern {
            RichPattern::Label(label) => LABELS.iter().find(|known| **known == label.as_ref()).copied(),
            RichPattern::EndOfInput => Some(END),
            _ => None,
        };
        expected.extend(label.filter(|label| !expected.contains(label)));
    }
    expected.sort_by_key(|label| LABELS.iter().position(|known| known == label));
    expected
}

const END: &str = "the end of the statement";
const EXPRESSION: &str = "an expression";
const NAME: &str = "a name";
const MODEL: &str = "a model";

/// All labels of the grammar, the most telling first.
const LABELS: [&str; 27] = [
    "`=`",
    "`:`",
    "`,`",
    "`as`",
    "`by`",
    "`and`",
    "`then`",
    "`else`",
    "`steps`",
    "`hand`",
    "`h`",
    "`least`",
    "`most`",
    EXPRESSION,
    NAME,
    MODEL,
    "a parameter",
    "a column",
    "a unit",
    "a file name in quotes",
    "a label",
    "a description",
    "a topic",
    "`)`",
    "`]`",
    "`}`",
    END,
];

/// What may follow an expression that goes on with an operator as well.
const FOLLOWING: [&str; 6] = ["`)`", "`]`", "`}`", "a description", "a unit", END];

/// Where a statement stopped making sense.
struct Failure<'a> {
    text: &'a str,
    tokens: &'a [Token],
    /// Index of the first token that does not fit.
    at: usize,
    expected: Vec<&'static str>,
}

impl Failure<'_> {
    fn problem(&self) -> Problem {
        self.unclosed_bracket()
            .or_else(|| self.reserved_name())
            .or_else(|| self.model_as_value())
            .or_else(|| self.equals())
            .or_else(|| self.unknown_statement())
            .or_else(|| self.number())
            .or_else(|| self.empty_bracket())
            .or_else(|| self.side_by_side())
            .or_else(|| self.missing_expression())
            .or_else(|| self.sign())
            .unwrap_or_else(|| self.unexpected())
    }

    fn found(&self) -> Option<Token> {
        self.tokens.get(self.at).copied()
    }

    fn before(&self) -> Option<Token> {
        self.at.checked_sub(1).and_then(|at| self.tokens.get(at)).copied()
    }

    fn kind(&self, at: usize) -> Option<T> {
        self.tokens.get(at).map(|token| token.kind)
    }

    fn expects(&self, label: &str) -> bool {
        self.expected.contains(&label)
    }

    fn slice(&self, span: Span) -> &str {
        self.text.get(span.range()).unwrap_or("")
    }

    /// A line at column 0 that does not fit inside the bracket that is open
    /// before it, though the bracket is closed further down.
    fn unclosed_bracket(&self) -> Option<Problem> {
        let (before, found) = (self.before()?, self.found()?);
        if !starts_line(self.text, found) || found.kind.is_closing() {
            return None;
        }
        let mut open: Vec<Token> = Vec::new();
        for token in &self.tokens[..self.at] {
            if token.kind.is_opening() {
                open.push(*token);
            } else if token.kind.is_closing() {
                open.pop();
            }
        }
        Some(Problem::UnclosedBracket {
            open: *open.last()?,
            noticed: Some(found.span),
            end: before.span.end,
            closing: open
                .iter()
                .rev()
                .filter_map(|token| token.kind.partner())
                .collect(),
        })
    }

    /// `m = flat with H0 = 70 km/s/Mpc`
    fn model_as_value(&self) -> Option<Problem> {
        let found = self.found().filter(|token| token.kind == T::With)?;
        let name = self.tokens.first().filter(|name| name.kind.is_name())?;
        let bound = self.at == 3 && self.kind(1) == Some(T::Equal);
        bound.then_some(Problem::ModelAsValue {
            name: name.span,
            with: found.span,
        })
    }

    /// `model = 3`, `given with = 3`, `x + table`
    fn reserved_name(&self) -> Option<Problem> {
        let found = self.found()?;
        if found.kind == T::Equal
            && self.at == 1
            && let Some(word) = self.before().filter(|word| word.kind.is_reserved())
        {
            return Some(Problem::ReservedName { word: word.span });
        }
        if !found.kind.is_reserved() || found.kind == T::Infinity {
            return None;
        }
        let wants_name = self.expects(NAME) || self.expects("a parameter") || self.expects(MODEL);
        let joins = found.kind.is_operator() || matches!(found.kind, T::Where | T::With);
        let defined = self.at == 0 && self.kind(1) == Some(T::Equal);
        let stands_for_value = self.expects(EXPRESSION) && !joins;
        (defined || stands_for_value || (wants_name && !self.expects(END)))
            .then_some(Problem::ReservedName { word: found.span })
    }

    /// `=` where none may stand.
    fn equals(&self) -> Option<Problem> {
        let found = self.found().filter(|token| token.kind == T::Equal)?;
        if self.expects(NAME) || self.expects("a parameter") {
            return None;
        }
        if self.kind(0) == Some(T::Claim) {
            return Some(Problem::EqualsInClaim { at: found.span });
        }
        let outside = |at: usize| {
            let opened = self.tokens[..at]
                .iter()
                .filter(|token| token.kind.is_opening())
                .count();
            let closed = self.tokens[..at]
                .iter()
                .filter(|token| token.kind.is_closing())
                .count();
            opened == closed
        };
        let first = self.tokens[..self.at]
            .iter()
            .position(|token| token.kind == T::Equal);
        let compares = self.tokens[..self.at].iter().any(|token| {
            matches!(
                token.kind,
                T::If | T::And | T::Or | T::Not | T::Only | T::Where | T::With
            )
        });
        match first {
            Some(first) if outside(self.at) && outside(first) && !compares => {
                Some(Problem::ChainedAssignment {
                    first: self.tokens[first].span,
                    second: found.span,
                })
            }
            _ => Some(Problem::EqualsAsComparison { at: found.span }),
        }
    }

    /// `asume planck2018`
    fn unknown_statement(&self) -> Option<Problem> {
        let word = self.tokens.first().filter(|word| word.kind == T::Word)?;
        let next_fits =
            self.at == 1 && matches!(self.kind(1), Some(kind) if kind.is_name() || kind == T::String);
        if !next_fits {
            return None;
        }
        let written = self.slice(word.span);
        let near = STATEMENT_WORDS
            .iter()
            .map(|statement| (strsim::damerau_levenshtein(written, statement), *statement))
            .min()
            .filter(|(distance, statement)| *distance <= 1 + statement.len() / 5)?;
        Some(Problem::UnknownStatement {
            word: word.span,
            near: near.1,
        })
    }

    /// `3.`, `4π`, `2(1+z)`, `300 000`
    fn number(&self) -> Option<Problem> {
        let before = self.before()?;
        if before.kind == T::Dot
            && let Some(number) = self.tokens.get(self.at.wrapping_sub(2))
            && number.kind == T::Number
            && number.span.end == before.span.start
        {
            return Some(Problem::TrailingPoint {
                number: number.span,
                point: before.span,
            });
        }
        let found = self.found()?;
        if before.kind != T::Number && before.kind != T::Concise {
            return None;
        }
        let tight = before.span.end == found.span.start;
        match found.kind {
            T::Dot if tight => Some(Problem::TrailingPoint {
                number: before.span,
                point: found.span,
            }),
            T::Number if !tight => Some(Problem::SplitNumber {
                left: before.span,
                right: found.span,
            }),
            kind if tight && (kind.is_word() || kind == T::LeftParenthesis || kind == T::LeftBrace) => {
                Some(Problem::ImplicitProduct {
                    left: before.span,
                    right: found.span,
                    could_be_unit: false,
                })
            }
            _ => None,
        }
    }

    /// `[]`, `[at z]`
    fn empty_bracket(&self) -> Option<Problem> {
        let before = self.before().filter(|token| token.kind == T::LeftBracket)?;
        let found = self.found()?;
        let empty = found.kind == T::RightBracket || found.kind.is_contextual();
        (empty && self.expects("a unit")).then_some(Problem::EmptyBracket {
            bracket: before.span.to(found.span),
        })
    }

    /// Two operands with nothing between them.
    fn side_by_side(&self) -> Option<Problem> {
        let (before, found) = (self.before()?, self.found()?);
        let starts = found.kind.is_name()
            || matches!(
                found.kind,
                T::Number | T::Concise | T::LeftParenthesis | T::LeftBrace | T::Infinity
            );
        let ends = before.kind.is_name()
            || matches!(
                before.kind,
                T::Number
                    | T::Concise
                    | T::Superscript
                    | T::RightParenthesis
                    | T::RightBrace
                    | T::RightBracket
                    | T::Infinity
                    | T::Percent
            );
        let wants_other = self.expected.iter().any(|label| !FOLLOWING.contains(label));
        (starts && ends && !wants_other).then_some(Problem::MissingOperator {
            left: before.span,
            right: found.span,
        })
    }

    /// An operator, a comma, an `=` with nothing after it.
    fn missing_expression(&self) -> Option<Problem> {
        if !self.expects(EXPRESSION) {
            return None;
        }
        let at = match (self.found(), self.before()) {
            (Some(found), _) => found.span,
            (None, Some(before)) => Span {
                start: before.span.end,
                end: before.span.end,
            },
            (None, None) => return None,
        };
        let hollow = self.found().is_none_or(|found| {
            found.kind.is_closing()
                || found.kind.is_operator()
                || matches!(
                    found.kind,
                    T::Comma | T::Colon | T::Where | T::With | T::String | T::Equal | T::Within | T::Every
                )
        });
        hollow.then_some(Problem::MissingExpression {
            after: self.before().map(|before| before.span),
            at,
        })
    }

    /// `±` and strings out of place.
    fn sign(&self) -> Option<Problem> {
        let found = self.found()?;
        if found.kind == T::PlusMinus {
            return Some(Problem::UncertaintyOfExpression { sign: found.span });
        }
        let expects_string = self.expected.iter().any(|label| label.contains("quotes"));
        (found.kind == T::String && !expects_string)
            .then_some(Problem::MisplacedString { string: found.span })
    }

    fn unexpected(&self) -> Problem {
        let found = self.found();
        let at = match (found, self.before()) {
            (Some(found), _) => found.span,
            (None, Some(before)) => Span {
                start: before.span.end,
                end: before.span.end,
            },
            (None, None) => Span::default(),
        };
        let mut expected = self.expected.clone();
        expected.truncate(MAX_EXPECTED);
        Problem::Unexpected { at, found, expected }
    }
}

/// What a broken statement binds, so that uses of the name are no further
/// mistakes.
fn salvage<'src>(
    grammar: &Grammar<'src, Careful<'src>>,
    text: &'src str,
    tokens: Tokens<'src>,
) -> (StatementKind, Option<Name>) {
    let mut state = State {
        text,
        problems: Vec::new(),
    };
    let first = tokens.first().map(|token| token.kind);
    let Some(head) = grammar.head().parse_with_state(tokens, &mut state).into_output() else {
        return (StatementKind::Broken, lost_name(text, tokens));
    };
    if first == Some(T::Model) {
        return (StatementKind::Broken, Some(head.name));
    }
    let definition = Definition {
        value: Expr {
            kind: ExprKind::Broken,
            span: super::place(tokens),
        },
        name: head.name,
        annotation: head.annotation,
        wheres: Vec::new(),
        about: None,
    };
    let statement = match (first, head.parameters) {
        (_, Some(parameters)) => StatementKind::Function(definition, parameters),
        (Some(T::Given), None) => StatementKind::Given(definition),
        (Some(T::Result), None) => StatementKind::Result(definition),
        (_, None) => StatementKind::Value(definition),
    };
    (statement, None)
}

/// The name that a broken `read`, `tally` or unit definition would bind.
fn lost_name(text: &str, tokens: &[Token]) -> Option<Name> {
    let kind = |at: usize| tokens.get(at).map(|token| token.kind);
    let word = match kind(0)? {
        T::Read => {
            let as_word = tokens.iter().position(|token| token.kind == T::As)?;
            tokens.get(as_word + 1)
        }
        T::Number | T::Tally | T::Given | T::Result | T::Model => tokens.get(1),
        first if first.is_name() && kind(1) == Some(T::LeftParenthesis) => tokens.first(),
        _ => None,
    };
    word.filter(|word| word.kind.is_name()).map(|word| Spanned {
        node: text.get(word.span.range()).unwrap_or("").into(),
        span: word.span,
    })
}
