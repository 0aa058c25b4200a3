//! Statements. Each kind has a rule of its own; which one reads a statement
//! is plain from its first tokens, so none is tried in vain.

use super::claim::claim;
use super::expression::{Expressions, expressions};
use super::input::{Extra, Rule, Tokens, any_word, by_hand, name, report, sign, string, token};
use super::problem::Problem;
use crate::ast::{Binding, Bracket, Definition, Expr, Name, Parameter, Plot, Read, StatementKind, Text};
use crate::source::Spanned;
use crate::token::{Token, TokenKind as T};
use chumsky::input::MapExtra;
use chumsky::prelude::*;
use chumsky::primitive::select;

/// The rules for all statements: built once and used for many.
pub(super) struct Grammar<'src, E: Extra<'src>> {
    assume: Rule<'src, StatementKind, E>,
    model: Rule<'src, StatementKind, E>,
    given: Rule<'src, StatementKind, E>,
    result: Rule<'src, StatementKind, E>,
    claim: Rule<'src, StatementKind, E>,
    table: Rule<'src, StatementKind, E>,
    figure: Rule<'src, StatementKind, E>,
    read: Rule<'src, StatementKind, E>,
    include: Rule<'src, StatementKind, E>,
    unit: Rule<'src, StatementKind, E>,
    tally: Rule<'src, StatementKind, E>,
    correlate: Rule<'src, StatementKind, E>,
    explain: Rule<'src, StatementKind, E>,
    help: Rule<'src, StatementKind, E>,
    value: Rule<'src, StatementKind, E>,
    function: Rule<'src, StatementKind, E>,
    expression: Rule<'src, StatementKind, E>,
    /// The part of a definition before `=`.
    head: Rule<'src, Head, E>,
}

/// What stands before the `=` of a definition.
pub(super) struct Head {
    pub name: Name,
    pub parameters: Option<Vec<Parameter>>,
    pub annotation: Option<Bracket>,
}

impl<'src, E: Extra<'src>> Grammar<'src, E> {
    /// Builds the rules.
    pub fn new() -> Grammar<'src, E> {
        let parts = expressions();
        let annotation = annotation(&parts).boxed();
        let definition = definition(&parts, name().then(annotation.clone().or_not())).boxed();
        Grammar {
            assume: whole(
                token(T::Assume)
                    .ignore_then(parts.models.open.clone())
                    .map(StatementKind::Assume),
            ),
            model: whole(model(&parts)),
            given: whole(
                token(T::Given)
                    .ignore_then(definition.clone())
                    .map(StatementKind::Given),
            ),
            result: whole(result(&parts, definition.clone())),
            claim: whole(claim(&parts)),
            table: whole(plot(&parts, T::Table).map(StatementKind::Table)),
            figure: whole(plot(&parts, T::Figure).map(StatementKind::Figure)),
            read: whole(read(&parts)),
            include: whole(
                token(T::Include)
                    .ignore_then(string("a file name in quotes"))
                    .map(StatementKind::Include),
            ),
            unit: whole(unit(&parts)),
            tally: whole(tally()),
            correlate: whole(correlate(&parts)),
            explain: whole(
                token(T::Explain)
                    .ignore_then(parts.open.clone())
                    .map(StatementKind::Explain),
            ),
            help: whole(help()),
            value: whole(definition.map(StatementKind::Value)),
            function: whole(function(&parts, annotation.clone())),
            expression: whole(expression(&parts)),
            head: head(&parts, annotation).boxed(),
        }
    }

    /// The rule for a statement with these tokens; `defines` says that a bare
    /// `=` stands in it.
    pub fn rule(&self, tokens: &[Token], defines: bool) -> &Rule<'src, StatementKind, E> {
        let kind = |at: usize| tokens.get(at).map(|token| token.kind);
        match kind(0) {
            Some(T::Assume) => &self.assume,
            Some(T::Model) => &self.model,
            Some(T::Given) => &self.given,
            Some(T::Result) => &self.result,
            Some(T::Claim) => &self.claim,
            Some(T::Table) => &self.table,
            Some(T::Figure) => &self.figure,
            Some(T::Read) => &self.read,
            Some(T::Include) => &self.include,
            Some(T::Tally) => &self.tally,
            Some(T::Correlate) => &self.correlate,
            Some(T::Explain) => &self.explain,
            Some(T::Help) => &self.help,
            Some(T::Number) if defines && kind(1).is_some_and(T::is_word) => &self.unit,
            Some(first) if defines && first.is_name() => match kind(1) {
                Some(T::LeftParenthesis) => &self.function,
                _ => &self.value,
            },
            _ => &self.expression,
        }
    }

    /// Reads what a statement binds and lets the rest go.
    pub fn head(&self) -> &Rule<'src, Head, E> {
        &self.head
    }
}

/// A statement ends where its tokens do.
fn whole<'src, O: 'src, E: Extra<'src>>(
    rule: impl Parser<'src, Tokens<'src>, O, E> + Clone + 'src,
) -> Rule<'src, O, E> {
    rule.then_ignore(end()).boxed()
}

/// `[unit]` after a name being defined.
fn annotation<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, Bracket, E> + Clone + 'src {
    parts.bracket.clone().map_with(|bracket, extra| {
        if bracket.conversion.is_some() {
            report(
                extra,
                Problem::AnnotationConverts {
                    bracket: bracket.span,
                },
            );
        }
        bracket
    })
}

/// The text that ends a definition or a column.
fn about<'src, E: Extra<'src>>() -> impl Parser<'src, Tokens<'src>, Option<Text>, E> + Clone + 'src {
    string("a description").or_not()
}

/// `= EXPR where … "about"` after the name and its annotation.
fn definition<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
    head: impl Parser<'src, Tokens<'src>, (Name, Option<Bracket>), E> + Clone + 'src,
) -> impl Parser<'src, Tokens<'src>, Definition, E> + Clone + 'src {
    head.then_ignore(sign(T::Equal, "`=`")).then(body(parts)).map(
        |((name, annotation), (value, wheres, about))| Definition {
            name,
            annotation,
            value,
            wheres,
            about,
        },
    )
}

type Body = (Expr, Vec<Binding>, Option<Text>);

/// A value, its local names and its description, which may come first.
fn body<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, Body, E> + Clone + 'src {
    let after_text = about().then(wheres(parts).or_not());
    parts
        .open
        .clone()
        .then(after_text)
        .then(about())
        .map(|((value, (before, wheres)), after)| (value, wheres.unwrap_or_default(), before.or(after)))
}

/// `where x = …, y = …`
fn wheres<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, Vec<Binding>, E> + Clone + 'src {
    let binding = name()
        .then(annotation(parts).or_not())
        .then_ignore(sign(T::Equal, "`=`"))
        .then(parts.closed.clone())
        .map(|((name, annotation), value)| Binding {
            name,
            annotation,
            value,
        });
    token(T::Where).ignore_then(
        binding
            .separated_by(token(T::Comma))
            .at_least(1)
            .allow_trailing()
            .collect::<Vec<_>>(),
    )
}

/// `(a, b [kpc], c = 1)`
fn parameters<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, Vec<Parameter>, E> + Clone + 'src {
    let parameter = name()
        .labelled("a parameter")
        .then(annotation(parts).or_not())
        .then(token(T::Equal).ignore_then(parts.closed.clone()).or_not())
        .map(|((name, annotation), default): ((Name, _), _)| Parameter {
            name,
            annotation,
            default,
        });
    token(T::LeftParenthesis)
        .ignore_then(
            parameter
                .separated_by(token(T::Comma))
                .allow_trailing()
                .collect::<Vec<_>>(),
        )
        .then_ignore(sign(T::RightParenthesis, "`)`"))
}

fn function<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
    annotation: Rule<'src, Bracket, E>,
) -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    name()
        .then(parameters(parts))
        .then(annotation.or_not())
        .then_ignore(sign(T::Equal, "`=`"))
        .then(body(parts))
        .map(|(((name, parameters), annotation), (value, wheres, about))| {
            let definition = Definition {
                name,
                annotation,
                value,
                wheres,
                about,
            };
            StatementKind::Function(definition, parameters)
        })
}

/// The part before `=`, for statements whose rest cannot be read.
fn head<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
    annotation: Rule<'src, Bracket, E>,
) -> impl Parser<'src, Tokens<'src>, Head, E> + Clone + 'src {
    let word = token(T::Given).or(token(T::Result)).or(token(T::Model));
    word.or_not()
        .ignore_then(name())
        .then(parameters(parts).or_not())
        .then(annotation.or_not())
        .then_ignore(token(T::Equal))
        .then_ignore(any().repeated())
        .map(|((name, parameters), annotation)| Head {
            name,
            parameters,
            annotation,
        })
}

/// `model NAME = MODEL`
fn model<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    token(T::Model)
        .ignore_then(name())
        .then_ignore(sign(T::Equal, "`=`"))
        .then(parts.models.open.clone())
        .map(|(name, model)| StatementKind::Model(name, model))
}

/// `result NAME = EXPR`, `result NAME [unit]`
fn result<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
    definition: Rule<'src, Definition, E>,
) -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    let bound = name()
        .then(parts.bracket.clone().or_not())
        .then(about())
        .then_ignore(end())
        .map(|((name, unit), about)| StatementKind::ResultOf(name, unit, about));
    token(T::Result).ignore_then(bound.or(definition.map(StatementKind::Result)))
}

/// `table "out.csv" z = RANGE: EXPR [u] "about", …`
fn plot<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
    word: T,
) -> impl Parser<'src, Tokens<'src>, Plot, E> + Clone + 'src {
    let columns = parts
        .closed
        .clone()
        .then(about())
        .separated_by(token(T::Comma))
        .at_least(1)
        .allow_trailing()
        .collect::<Vec<_>>();
    token(word)
        .ignore_then(string("a file name in quotes").or_not())
        .then(name())
        .then_ignore(sign(T::Equal, "`=`"))
        .then(parts.closed.clone())
        .then_ignore(sign(T::Colon, "`:`"))
        .then(columns)
        .map(|(((path, variable), over), columns)| Plot {
            path,
            variable,
            over,
            columns,
        })
}

/// `read "sample.csv" as sample with r [Mpc] only z > 0.01`
fn read<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    let column = string("a column")
        .or(any_word())
        .then(parts.bracket.clone().map_with(|bracket: Bracket, extra| {
            if bracket.conversion.is_some() {
                report(
                    extra,
                    Problem::AnnotationConverts {
                        bracket: bracket.span,
                    },
                );
            }
            bracket
        }));
    let units = token(T::With).ignore_then(
        column
            .separated_by(token(T::Comma))
            .at_least(1)
            .allow_trailing()
            .collect::<Vec<_>>(),
    );
    token(T::Read)
        .ignore_then(string("a file name in quotes"))
        .then_ignore(sign(T::As, "`as`"))
        .then(name())
        .then(units.or_not())
        .then(token(T::Only).ignore_then(parts.closed.clone()).or_not())
        .map(|(((path, name), units), only)| {
            StatementKind::Read(Read {
                path,
                name,
                units: units.unwrap_or_default(),
                only,
            })
        })
}

/// `1 beam = 3.2e-4 sr`
fn unit<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    let one = by_hand("`1`", |scan| {
        let number = scan.token(0).filter(|token| token.kind == T::Number)?;
        if scan.word(0) != "1" {
            scan.problems.push(Problem::UnitOfMany { number: number.span });
        }
        scan.at += 1;
        Some(())
    });
    one.ignore_then(name())
        .then_ignore(sign(T::Equal, "`=`"))
        .then(parts.open.clone())
        .map(|(name, value)| StatementKind::Unit(name, value))
}

/// `tally galaxy, photon`
fn tally<'src, E: Extra<'src>>() -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    token(T::Tally)
        .ignore_then(
            name()
                .separated_by(token(T::Comma))
                .at_least(1)
                .allow_trailing()
                .collect::<Vec<_>>(),
        )
        .map(StatementKind::Tally)
}

/// `correlate A, B by -0.9`
fn correlate<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    token(T::Correlate)
        .ignore_then(name())
        .then_ignore(sign(T::Comma, "`,`"))
        .then(name())
        .then_ignore(sign(T::By, "`by`"))
        .then(parts.open.clone())
        .map(|((left, right), by)| StatementKind::Correlate(left, right, by))
}

/// `help`, `help D_L`, `help "how far"`
fn help<'src, E: Extra<'src>>() -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    let topic = string("a topic").or(any_word()).or(select(
        |token: Token, extra: &mut MapExtra<'src, '_, Tokens<'src>, E>| {
            (token.kind == T::Percent).then(|| Spanned {
                node: extra.state().slice(token.span).into(),
                span: token.span,
            })
        },
    ));
    token(T::Help)
        .ignore_then(topic.or_not())
        .map(StatementKind::Help)
}

/// An expression to print.
fn expression<'src, E: Extra<'src>>(
    parts: &Expressions<'src, E>,
) -> impl Parser<'src, Tokens<'src>, StatementKind, E> + Clone + 'src {
    parts
        .open
        .clone()
        .then(wheres(parts).or_not())
        .map(|(value, wheres)| StatementKind::Expression(value, wheres.unwrap_or_default()))
}
