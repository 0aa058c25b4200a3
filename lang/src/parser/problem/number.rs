//! Words for problems with written numbers and what stands beside them.

use super::{point, slice};
use crate::diagnostic::{Diagnostic, Fix};
use crate::source::Span;

pub(super) fn bad_number(text: &str, number: Span) -> Diagnostic {
    let written = slice(text, number);
    Diagnostic::error(
        "bad-number",
        format!("`{written}` has more than one decimal point"),
        number,
        "not a number",
    )
    .note("a range is written with two points: 1 .. 3")
}

pub(super) fn exponent_missing(text: &str, number: Span, exponent: Span) -> Diagnostic {
    let whole = slice(text, number.to(exponent));
    Diagnostic::error(
        "bad-number",
        format!("`{whole}` has no digits in its exponent"),
        number.to(exponent),
        "not a number",
    )
    .note("a power of ten is written 1.2e-5 or 1.2 × 10^-5")
}

pub(super) fn trailing_point(text: &str, number: Span, point: Span) -> Diagnostic {
    let digits = slice(text, number);
    Diagnostic::error(
        "bad-number",
        format!("`{digits}.` has no digits after its point"),
        number.to(point),
        "not a number",
    )
    .fix(format!("write `{digits}`"), number.to(point), digits.to_owned())
}

pub(super) fn angle_mark(text: &str, number: Span, mark: Span) -> Diagnostic {
    let (unit, name) = match slice(text, mark).chars().next() {
        Some('\'' | '′') => ("arcmin", "minutes of arc"),
        Some('°' | 'º') => ("deg", "degrees"),
        _ => ("arcsec", "seconds of arc"),
    };
    let sign = slice(text, mark).chars().next().map_or(1, char::len_utf8) as u32;
    let mark = Span {
        start: mark.start,
        end: mark.start + sign,
    };
    let digits = slice(text, number);
    Diagnostic::error(
        "angle-mark",
        format!("{name} are written `{unit}`"),
        number.to(mark),
        "",
    )
    .fix(format!("write `{digits} {unit}`"), mark, format!(" {unit}"))
}

pub(super) fn too_large(number: Span) -> Diagnostic {
    Diagnostic::error(
        "number-too-large",
        "the number is too large; the largest is 1.8e308",
        number,
        "",
    )
}

pub(super) fn too_small(number: Span) -> Diagnostic {
    Diagnostic::error(
        "number-too-small",
        "the number is too near to zero; the smallest is 4.9e-324",
        number,
        "would become 0",
    )
}

pub(super) fn ambiguous_exponent(text: &str, sign: Span, number: Span) -> Diagnostic {
    let written = slice(text, number);
    Diagnostic::error(
        "ambiguous-exponent",
        "it is not clear whether the power of ten belongs to the uncertainty alone",
        sign.to(number),
        format!("`{written}` stands after ±"),
    )
    .note("write (3.0 ± 0.1) × 10^5 where it belongs to both, 3e5 ± 1e4 where each has its own")
}

pub(super) fn uncertainty_after_unit(text: &str, number: Span, unit: Span, uncertainty: Span) -> Diagnostic {
    let (value, unit_text) = (slice(text, number), slice(text, unit));
    let amount = slice(text, uncertainty);
    let bare = amount.strip_suffix(unit_text).unwrap_or(amount).trim_end();
    let diagnostic = Diagnostic::error(
        "uncertainty-after-unit",
        "the unit stands once, after the uncertainty",
        unit,
        "too early",
    )
    .and(uncertainty, "the uncertainty");
    let repaired = format!("{value} {bare} {unit_text}");
    diagnostic.fix(
        format!("write `{repaired}`"),
        number.to(uncertainty),
        repaired.clone(),
    )
}

pub(super) fn uncertainty_of_expression(sign: Span) -> Diagnostic {
    Diagnostic::error(
        "uncertainty-of-expression",
        "± stands between two written numbers: 67.4 ± 0.5 km/s/Mpc",
        sign,
        "",
    )
    .note("an uncertainty spreads by itself from the numbers that have one; a sum with a negative is `a + (-b)`")
}

pub(super) fn split_number(text: &str, left: Span, right: Span) -> Diagnostic {
    let joined = format!("{}{}", slice(text, left), slice(text, right));
    Diagnostic::error(
        "split-number",
        "two numbers stand side by side",
        left.to(right),
        "no operator between them",
    )
    .fix(format!("write `{joined}`"), left.to(right), joined.clone())
}

pub(super) fn implicit_product(text: &str, left: Span, right: Span, could_be_unit: bool) -> Diagnostic {
    let (number, factor) = (slice(text, left), slice(text, right));
    let product = format!("{number}*{factor}");
    let gap = Span {
        start: left.end,
        end: right.start,
    };
    let mut diagnostic = Diagnostic::error(
        "implicit-product",
        if could_be_unit {
            format!("`{number}{factor}` could be a product or a number with a unit")
        } else {
            "a product is written with `*`".to_owned()
        },
        left.to(right),
        "",
    )
    .fix(format!("for the product write `{product}`"), gap, "*");
    if could_be_unit {
        diagnostic.fixes.push(Fix {
            title: format!("for the unit write `{number} {factor}`"),
            edits: vec![(gap, " ".into())],
        });
    }
    diagnostic
}

pub(super) fn fraction_with_unit(
    text: &str,
    fraction: Span,
    denominator: Span,
    quantity: Span,
) -> Diagnostic {
    let whole = slice(text, fraction.to(quantity));
    let inner = slice(text, quantity);
    let unit = Span {
        start: denominator.end,
        end: quantity.end,
    };
    let unit_text = slice(text, unit).trim_start();
    let mut diagnostic = Diagnostic::error(
        "fraction-with-unit",
        format!("`{whole}` could divide by `{inner}` or be a fraction of the unit"),
        fraction.to(quantity),
        "",
    )
    .fix(
        format!(
            "for a fraction of the unit write `{} * 1 {unit_text}`",
            slice(text, fraction.to(denominator))
        ),
        unit,
        format!(" * 1 {unit_text}"),
    );
    diagnostic.fixes.push(Fix {
        title: format!("to divide write `({inner})`"),
        edits: vec![
            (point(quantity.start), "(".into()),
            (point(quantity.end), ")".into()),
        ],
    });
    diagnostic
}

pub(super) fn unit_in_exponent(text: &str, base: Span, exponent: Span, quantity: Span) -> Diagnostic {
    let diagnostic = Diagnostic::error(
        "unit-in-exponent",
        "the unit belongs to the exponent here",
        quantity,
        format!("`{}` is read as the exponent", slice(text, quantity)),
    )
    .and(base, "the base");
    let unit_text = slice(
        text,
        Span {
            start: exponent.end,
            end: quantity.end,
        },
    )
    .trim_start();
    let power = slice(text, base.to(exponent)).trim();
    let repaired = format!("{power} * 1 {unit_text}");
    diagnostic.fix(format!("write `{repaired}`"), base.to(quantity), repaired.clone())
}

pub(super) fn product_of_power(text: &str, left: Span, power: Span, number: &str) -> Diagnostic {
    let written = slice(text, left.to(power));
    Diagnostic::error(
        "product-of-power",
        format!("`{written}` is a product, and only its second factor has the unit"),
        left.to(power),
        "",
    )
    .note("`*` never makes one number; `×` and `e` do")
    .fix(format!("write `{number}`"), left.to(power), number)
}
