//! What can be wrong with the form of a sheet: facts first, then one small
//! function per fact that puts it into words.
//!
//! A problem found while a statement is read does not stop the reading: the
//! node becomes `Broken` and the rest is read on, so that several mistakes are
//! reported at once. What stops the reading is looked at in `failure`.

mod layout;
mod number;
mod structure;
mod unit;

use crate::diagnostic::Diagnostic;
use crate::source::Span;
use crate::token::{Token, TokenKind};

/// What is wrong.
#[derive(Clone, Debug, PartialEq)]
pub(crate) enum Problem {
    // The sheet as a whole.
    /// More bytes than a sheet may have.
    SourceTooLarge { bytes: usize },
    /// More statements than a sheet may have.
    TooManyStatements { at: Span },
    /// More errors than are reported.
    TooManyErrors { at: Span },
    /// A statement with more tokens than one may have.
    StatementTooLong { at: Span },
    /// Brackets nested too deep.
    NestedTooDeep { at: Span },
    /// Operators that build too deep a tree.
    ChainTooLong { at: Span },

    // Brackets.
    /// An opening bracket with no partner.
    UnclosedBracket {
        open: Token,
        noticed: Option<Span>,
        end: u32,
        closing: Vec<TokenKind>,
    },
    /// A closing bracket with no partner.
    StrayClosing { close: Token },
    /// `(a]`
    MismatchedBracket { open: Token, close: Token },

    // Tokens.
    /// `1.2.3`
    BadNumber { number: Span },
    /// `1e`
    ExponentMissing { number: Span, exponent: Span },
    /// `3.`
    TrailingPoint { number: Span, point: Span },
    /// A string that its line does not end.
    OpenString { string: Span },
    /// `==`, `&&`, …
    ForeignOperator { operator: Span },
    /// `$`
    UnknownCharacter { at: Span },
    /// `1.5"`, `30°`
    AngleMark { number: Span, mark: Span },

    // Numbers.
    /// Beyond the largest number.
    NumberTooLarge { number: Span },
    /// Nearer to zero than the smallest number, yet not zero.
    NumberTooSmall { number: Span },
    /// `3.0 ± 0.1 × 10^5`
    AmbiguousExponent { sign: Span, number: Span },
    /// `67.4 km/s ± 0.5 km/s`
    UncertaintyAfterUnit {
        number: Span,
        unit: Span,
        uncertainty: Span,
    },
    /// `a ± b`
    UncertaintyOfExpression { sign: Span },
    /// `300 000`
    SplitNumber { left: Span, right: Span },
    /// `2x`, `4π`, `2(1+z)`
    ImplicitProduct {
        left: Span,
        right: Span,
        could_be_unit: bool,
    },
    /// `1/3 Mpc`
    FractionWithUnit {
        fraction: Span,
        denominator: Span,
        quantity: Span,
    },
    /// `10^(5 km)` where `10^5 km` was meant.
    UnitInExponent {
        base: Span,
        exponent: Span,
        quantity: Span,
    },
    /// `3 * 10^5 km/s`
    ProductOfPower { left: Span, power: Span, number: String },

    // Units.
    /// `W/m^2 Hz`
    AmbiguousUnit {
        factor: Span,
        joint: Span,
        slash: Span,
        below: String,
        above: String,
    },
    /// `s-1`
    MissingCaret { word: Span, whole: Span },
    /// `12 h`
    HourInUnit { hour: Span, unit: Span },
    /// `km^n`
    UnitPowerNotWritten { at: Span },
    /// `km^1000`
    UnitPowerTooLarge { at: Span },
    /// `[2]`
    NoUnitInBracket { at: Span },
    /// `{a, b} km`
    UnitOfExpressions { series: Span, unit: Span },

    // Structure.
    /// `a [km] + b`
    BracketEndsExpression { bracketed: Span, operator: Span },
    /// `a [km] [m]`
    SecondBracket { first: Span, second: Span },
    /// `a + b [kpc at z]`
    SumConverted { sum: Span, last: Span, bracket: Span },
    /// `given r [kpc at 2] = …`
    AnnotationConverts { bracket: Span },
    /// A bare `with` list in the middle of an expression.
    BareWith { model: Span },
    /// Nothing where an expression belongs.
    MissingExpression { after: Option<Span>, at: Span },
    /// `a b`
    MissingOperator { left: Span, right: Span },
    /// `=` where a condition stands.
    EqualsAsComparison { at: Span },
    /// `claim: x = 3`
    EqualsInClaim { at: Span },
    /// `a = b = c`
    ChainedAssignment { first: Span, second: Span },
    /// `model = 3`
    ReservedName { word: Span },
    /// `m = flat with …`
    ModelAsValue { name: Span, with: Span },
    /// `asume planck2018`
    UnknownStatement { word: Span, near: &'static str },
    /// `1 + 2 "text"`
    MisplacedString { string: Span },
    /// `2 beam = 3 sr`
    UnitOfMany { number: Span },
    /// `[km` used as an index, `f[2]`; a bracket with no unit.
    EmptyBracket { bracket: Span },
    /// A slot of a statement filled with something else.
    Unexpected {
        at: Span,
        found: Option<Token>,
        expected: Vec<&'static str>,
    },
}

impl Problem {
    /// The problem in words.
    pub(crate) fn diagnostic(&self, text: &str) -> Diagnostic {
        let mut diagnostic = self.words(text);
        shorten(&mut diagnostic.message);
        shorten(&mut diagnostic.at.text);
        for fix in &mut diagnostic.fixes {
            shorten(&mut fix.title);
        }
        diagnostic
    }

    fn words(&self, text: &str) -> Diagnostic {
        match self {
            Problem::SourceTooLarge { bytes } => layout::source_too_large(*bytes),
            Problem::TooManyStatements { at } => layout::too_many_statements(*at),
            Problem::TooManyErrors { at } => layout::too_many_errors(*at),
            Problem::StatementTooLong { at } => layout::statement_too_long(*at),
            Problem::NestedTooDeep { at } => layout::nested_too_deep(*at),
            Problem::ChainTooLong { at } => layout::chain_too_long(*at),
            Problem::UnclosedBracket {
                open,
                noticed,
                end,
                closing,
            } => layout::unclosed_bracket(text, *open, *noticed, *end, closing),
            Problem::StrayClosing { close } => layout::stray_closing(text, *close),
            Problem::MismatchedBracket { open, close } => layout::mismatched_bracket(text, *open, *close),
            Problem::BadNumber { number } => number::bad_number(text, *number),
            Problem::ExponentMissing { number, exponent } => {
                number::exponent_missing(text, *number, *exponent)
            }
            Problem::TrailingPoint { number, point } => number::trailing_point(text, *number, *point),
            Problem::OpenString { string } => layout::open_string(*string),
            Problem::ForeignOperator { operator } => structure::foreign_operator(text, *operator),
            Problem::UnknownCharacter { at } => layout::unknown_character(text, *at),
            Problem::AngleMark { number, mark } => number::angle_mark(text, *number, *mark),
            Problem::NumberTooLarge { number } => number::too_large(*number),
            Problem::NumberTooSmall { number } => number::too_small(*number),
            Problem::AmbiguousExponent { sign, number } => number::ambiguous_exponent(text, *sign, *number),
            Problem::UncertaintyAfterUnit {
                number,
                unit,
                uncertainty,
            } => number::uncertainty_after_unit(text, *number, *unit, *uncertainty),
            Problem::UncertaintyOfExpression { sign } => number::uncertainty_of_expression(*sign),
            Problem::SplitNumber { left, right } => number::split_number(text, *left, *right),
            Problem::ImplicitProduct {
                left,
                right,
                could_be_unit,
            } => number::implicit_product(text, *left, *right, *could_be_unit),
            Problem::FractionWithUnit {
                fraction,
                denominator,
                quantity,
            } => number::fraction_with_unit(text, *fraction, *denominator, *quantity),
            Problem::UnitInExponent {
                base,
                exponent,
                quantity,
            } => number::unit_in_exponent(text, *base, *exponent, *quantity),
            Problem::ProductOfPower { left, power, number } => {
                number::product_of_power(text, *left, *power, number)
            }
            Problem::AmbiguousUnit {
                factor,
                joint,
                slash,
                below,
                above,
            } => unit::ambiguous(*factor, *joint, *slash, below, above),
            Problem::MissingCaret { word, whole } => unit::missing_caret(text, *word, *whole),
            Problem::HourInUnit { hour, unit } => unit::hour(text, *hour, *unit),
            Problem::UnitPowerNotWritten { at } => unit::power_not_written(*at),
            Problem::UnitPowerTooLarge { at } => unit::power_too_large(*at),
            Problem::NoUnitInBracket { at } => unit::no_unit_in_bracket(text, *at),
            Problem::UnitOfExpressions { series, unit } => unit::of_expressions(text, *series, *unit),
            Problem::BracketEndsExpression { bracketed, operator } => {
                structure::bracket_ends_expression(text, *bracketed, *operator)
            }
            Problem::SecondBracket { first, second } => structure::second_bracket(*first, *second),
            Problem::SumConverted { sum, last, bracket } => {
                structure::sum_converted(text, *sum, *last, *bracket)
            }
            Problem::AnnotationConverts { bracket } => structure::annotation_converts(*bracket),
            Problem::BareWith { model } => structure::bare_with(*model),
            Problem::MissingExpression { after, at } => structure::missing_expression(text, *after, *at),
            Problem::MissingOperator { left, right } => structure::missing_operator(text, *left, *right),
            Problem::EqualsAsComparison { at } => structure::equals_as_comparison(*at),
            Problem::EqualsInClaim { at } => structure::equals_in_claim(*at),
            Problem::ChainedAssignment { first, second } => structure::chained_assignment(*first, *second),
            Problem::ReservedName { word } => structure::reserved_name(text, *word),
            Problem::ModelAsValue { name, with } => structure::model_as_value(text, *name, *with),
            Problem::UnknownStatement { word, near } => structure::unknown_statement(text, *word, near),
            Problem::MisplacedString { string } => structure::misplaced_string(*string),
            Problem::UnitOfMany { number } => unit::of_many(*number),
            Problem::EmptyBracket { bracket } => unit::empty_bracket(*bracket),
            Problem::Unexpected { at, found, expected } => structure::unexpected(text, *at, *found, expected),
        }
    }
}

/// Messages repeat what was written; they stay readable when that is long.
const MAX_WORDS: usize = 240;

fn shorten(words: &mut String) {
    if words.len() > MAX_WORDS {
        let cut = (0..=MAX_WORDS).rev().find(|at| words.is_char_boundary(*at));
        words.truncate(cut.unwrap_or(0));
        words.push('…');
    }
}

/// The text of a place.
fn slice(text: &str, span: Span) -> &str {
    text.get(span.range()).unwrap_or("")
}

/// The empty place before a byte.
fn point(at: u32) -> Span {
    Span { start: at, end: at }
}
