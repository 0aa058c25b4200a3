//! Words for problems with units.

use super::{point, slice};
use crate::diagnostic::{Diagnostic, Fix};
use crate::source::Span;

pub(super) fn ambiguous(factor: Span, joint: Span, slash: Span, below: &str, above: &str) -> Diagnostic {
    let mut diagnostic = Diagnostic::error(
        "ambiguous-unit",
        format!("it is not clear whether `{above}` stands above or below the slash"),
        factor,
        "a product after a slash",
    )
    .and(
        Span {
            start: slash.start,
            end: slash.start + 1,
        },
        "the slash",
    )
    .fix(format!("below it: write `/{below}`"), joint, format!("/{below}"));
    diagnostic.fixes.push(Fix {
        title: format!("above it: write `{above}` before the slash"),
        edits: vec![(slash, format!(" {above}")), (joint, String::new())],
    });
    diagnostic
}

pub(super) fn missing_caret(text: &str, word: Span, whole: Span) -> Diagnostic {
    let (unit, written) = (slice(text, word), slice(text, whole));
    let power = written.strip_prefix(unit).unwrap_or("");
    Diagnostic::error(
        "missing-caret",
        format!("a power is written with `^`: {unit}^{}", ascii(power)),
        whole,
        "",
    )
    .note("a difference has spaces around its sign")
    .fix(format!("write `{unit}^{}`", ascii(power)), point(word.end), "^")
}

fn ascii(power: &str) -> String {
    power.replace('−', "-")
}

pub(super) fn hour(text: &str, hour: Span, unit: Span) -> Diagnostic {
    let written = slice(text, unit);
    let diagnostic = Diagnostic::error(
        "hour-or-little-h",
        "`h` in a unit is the h of the Hubble constant, and stands beside a length, a mass or a luminosity",
        hour,
        "the hour is `hr`",
    )
    .fix("for the hour write `hr`", hour, "hr");
    if written == "h" {
        diagnostic.note("as a value, h is H0/(100 km/s/Mpc): write `* h`; Planck's constant is h_P")
    } else {
        diagnostic
    }
}

pub(super) fn power_not_written(at: Span) -> Diagnostic {
    Diagnostic::error(
        "unit-power",
        "the power of a unit is a written number: ^2, ^-1, ^(1/2)",
        at,
        "not a written number",
    )
}

pub(super) fn power_too_large(at: Span) -> Diagnostic {
    Diagnostic::error(
        "unit-power",
        "the power of a unit is zero or too large",
        at,
        "from 1 to 100, or a fraction of such",
    )
}

pub(super) fn no_unit_in_bracket(text: &str, at: Span) -> Diagnostic {
    let number = slice(text, at);
    Diagnostic::error(
        "no-unit-in-bracket",
        format!("`[{number}]` names no unit"),
        at,
        "a unit was expected",
    )
    .note("brackets name a unit, as on an axis: D_L(z) [Gpc]; [1] is the unit one; a call has parentheses: f(2)")
}

pub(super) fn empty_bracket(bracket: Span) -> Diagnostic {
    Diagnostic::error(
        "no-unit-in-bracket",
        "the bracket names no unit",
        bracket,
        "a unit was expected",
    )
    .note("brackets name a unit, as on an axis: D_L(z) [Gpc], D_A(z) [kpc today]; [1] is the unit one")
}

pub(super) fn of_expressions(text: &str, series: Span, unit: Span) -> Diagnostic {
    let written = slice(text, unit);
    Diagnostic::error(
        "unit-of-expressions",
        "a unit stands after braces that hold written numbers only",
        unit,
        "",
    )
    .and(series, "not all of these are numbers")
    .fix(
        format!("to multiply write `* 1 {written}`"),
        point(unit.start),
        "* 1 ",
    )
}

pub(super) fn of_many(number: Span) -> Diagnostic {
    Diagnostic::error(
        "unit-of-many",
        "a unit is defined by what one of it is: 1 beam = 3.2e-4 sr",
        number,
        "must be 1",
    )
}
