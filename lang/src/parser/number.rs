//! Written numbers: `46.5`, `3.0 × 10^5`, `67.4(5)`, `67.4 ± 0.5`,
//! `67.4 (+0.6, -0.5)`, as they are pasted from a paper.

use super::problem::Problem;
use super::scan::Scan;
use crate::ast::{Number, Uncertainty};
use crate::source::Span;
use crate::token::TokenKind;
use smol_str::{SmolStr, format_smolstr};

/// Exponents beyond this are far outside what a number can hold; the cut
/// keeps arithmetic on them from overflowing.
const MAX_EXPONENT: i32 = 100_000;

impl Scan<'_> {
    /// A number with its uncertainty; the next token is `Number` or `Concise`.
    pub(super) fn number(&mut self) -> Option<Number> {
        let first = self.at;
        let concise = self.sees(0, TokenKind::Concise);
        let text = self.mantissa()?;
        let (text, uncertainty) = if concise {
            let (number, digits) = split_concise(&text);
            (number, Some(Written::Digits(digits)))
        } else {
            (text, self.uneven())
        };
        if let Some(uncertainty) = uncertainty {
            let scaled = self.with_exponent(text.clone());
            let uncertainty = if scaled == text {
                uncertainty
            } else {
                uncertainty.with_exponent_of(&scaled)
            };
            let span = self.span_from(first);
            return Some(self.finish(scaled, Some(uncertainty), span));
        }
        let uncertainty = self.plus_minus(&text);
        let span = self.span_from(first);
        Some(self.finish(text, uncertainty, span))
    }

    /// `(67.4 ± 0.5)` with what makes it one number: a unit or `× 10^n` after
    /// it. Steps over nothing if it is not that.
    pub(super) fn bracketed_number(&mut self) -> Option<Number> {
        let first = self.at;
        let mut inner = Scan::new(self.tokens, first + 1, self.text);
        let mantissa = inner.mantissa()?;
        let uncertainty = inner.plus_minus(&mantissa)?;
        if !inner.take(TokenKind::RightParenthesis) {
            return None;
        }
        let text = inner.with_exponent(mantissa.clone());
        let scaled = text != mantissa;
        if !scaled && !inner.unit_follows() {
            return None;
        }
        let uncertainty = if scaled {
            uncertainty.with_exponent_of(&text)
        } else {
            uncertainty
        };
        self.at = inner.at;
        self.problems.append(&mut inner.problems);
        let span = self.span_from(first);
        Some(self.finish(text, Some(uncertainty), span))
    }

    /// The text of the number that stands here in plain ASCII, with `× 10^n`
    /// folded in.
    fn mantissa(&mut self) -> Option<SmolStr> {
        let kind = self.kind(0)?;
        if kind != TokenKind::Number && kind != TokenKind::Concise {
            return None;
        }
        if let Some(power) = self.bare_power_of_ten() {
            return Some(power);
        }
        let text = plain(self.word(0));
        self.at += 1;
        Some(if kind == TokenKind::Number {
            self.with_exponent(text)
        } else {
            text
        })
    }

    /// `10^14` where a unit follows: `10^14 Msun` is a number with a unit.
    fn bare_power_of_ten(&mut self) -> Option<SmolStr> {
        let first = self.at;
        let exponent = self.power_of_ten()?;
        if self.unit_follows() && self.is_on_line(0) {
            return Some(format_smolstr!("1e{exponent}"));
        }
        self.at = first;
        None
    }

    /// The exponent of `10^n` standing here; steps over it.
    pub(super) fn power_of_ten(&mut self) -> Option<i32> {
        if !self.sees(0, TokenKind::Number) || self.word(0) != "10" || !self.is_tight(1) {
            return None;
        }
        let (exponent, length) = match self.kind(1)? {
            TokenKind::Superscript => (superscript_value(self.word(1))?, 2),
            TokenKind::Caret | TokenKind::DoubleStar => {
                let (exponent, length) = self.written_integer(2)?;
                (exponent, 2 + length)
            }
            _ => return None,
        };
        let towers = matches!(
            self.kind(length),
            Some(TokenKind::Caret | TokenKind::DoubleStar | TokenKind::Superscript)
        );
        if towers {
            return None;
        }
        self.at += length;
        Some(exponent)
    }

    /// `-5`, `5`, `(-5)` standing tight `ahead`: its value and its length in
    /// tokens.
    pub(super) fn written_integer(&self, ahead: usize) -> Option<(i32, usize)> {
        if !self.is_tight(ahead) {
            return None;
        }
        if self.sees(ahead, TokenKind::LeftParenthesis) {
            let (value, length) = self.written_integer(ahead + 1)?;
            return self
                .sees(ahead + 1 + length, TokenKind::RightParenthesis)
                .then_some((value, length + 2));
        }
        let signed = matches!(self.kind(ahead)?, TokenKind::Minus | TokenKind::Plus);
        let digits = ahead + usize::from(signed);
        if !self.sees(digits, TokenKind::Number) || !self.is_tight(digits) {
            return None;
        }
        let value: i32 = self.word(digits).parse().ok().filter(|n| *n <= MAX_EXPONENT)?;
        let negative = self.sees(ahead, TokenKind::Minus);
        Some((if negative { -value } else { value }, digits + 1 - ahead))
    }

    /// The number with the `× 10^n` that follows it, if one does.
    fn with_exponent(&mut self, text: SmolStr) -> SmolStr {
        if !self.sees(0, TokenKind::Times) || text.contains('e') {
            return text;
        }
        self.at += 1;
        match self.power_of_ten() {
            Some(exponent) => format_smolstr!("{text}e{exponent}"),
            None => {
                self.at -= 1;
                text
            }
        }
    }

    /// `± 0.5`
    fn plus_minus(&mut self, mantissa: &str) -> Option<Written> {
        if !self.sees(0, TokenKind::PlusMinus) {
            return None;
        }
        let sign = self.token(0)?.span;
        if !self.sees(1, TokenKind::Number) {
            return None;
        }
        self.at += 1;
        let first = self.at;
        let bare = plain(self.word(0));
        let text = self.mantissa()?;
        if text != bare && !mantissa.contains('e') {
            let number = self.span_from(first);
            self.problems.push(Problem::AmbiguousExponent { sign, number });
        }
        Some(Written::Even(text))
    }

    /// `(+0.6, -0.5)`, in either order.
    fn uneven(&mut self) -> Option<Written> {
        if !self.sees(0, TokenKind::LeftParenthesis)
            || !self.sees(2, TokenKind::Number)
            || !self.sees(3, TokenKind::Comma)
            || !self.sees(5, TokenKind::Number)
            || !self.sees(6, TokenKind::RightParenthesis)
        {
            return None;
        }
        let (first, second) = (plain(self.word(2)), plain(self.word(5)));
        let written = match (self.kind(1)?, self.kind(4)?) {
            (TokenKind::Plus, TokenKind::Minus) => Written::Uneven(first, second),
            (TokenKind::Minus, TokenKind::Plus) => Written::Uneven(second, first),
            _ => return None,
        };
        self.at += 7;
        Some(written)
    }

    /// Whether `(+0.6, -0.5)` or `± 0.5` stands here.
    pub(super) fn sees_uncertainty(&self) -> bool {
        let mut probe = Scan::new(self.tokens, self.at, self.text);
        self.sees(0, TokenKind::PlusMinus) || probe.uneven().is_some()
    }

    fn finish(&mut self, text: SmolStr, uncertainty: Option<Written>, span: Span) -> Number {
        let value = self.value(&text, span);
        Number {
            value,
            last_digit: last_digit(&text),
            uncertainty: uncertainty.map(|written| self.uncertainty(&text, &written, span)),
            text,
            span,
        }
    }

    fn uncertainty(&mut self, text: &str, written: &Written, span: Span) -> Uncertainty {
        let (plus, minus) = match written {
            Written::Digits(digits) if digits.contains('.') => {
                let amount = format_smolstr!("{digits}{}", exponent_of(text));
                (amount.clone(), amount)
            }
            Written::Digits(digits) => {
                let amount = format_smolstr!("{digits}e{}", last_digit(text));
                (amount.clone(), amount)
            }
            Written::Even(amount) => (amount.clone(), amount.clone()),
            Written::Uneven(plus, minus) => (plus.clone(), minus.clone()),
        };
        Uncertainty {
            plus: self.value(&plus, span),
            minus: self.value(&minus, span),
            written: match written {
                Written::Digits(digits) => format_smolstr!("({digits})"),
                Written::Even(amount) => format_smolstr!("± {amount}"),
                Written::Uneven(plus, minus) => format_smolstr!("(+{plus}, -{minus})"),
            },
        }
    }

    fn value(&mut self, text: &str, span: Span) -> f64 {
        let value: f64 = text.parse().unwrap_or(f64::NAN);
        let digits = text.split('e').next().unwrap_or("");
        if !value.is_finite() {
            self.problems.push(Problem::NumberTooLarge { number: span });
            return 0.0;
        }
        if value == 0.0 && digits.bytes().any(|byte| (b'1'..=b'9').contains(&byte)) {
            self.problems.push(Problem::NumberTooSmall { number: span });
        }
        value
    }
}

/// An uncertainty as written.
enum Written {
    /// `(5)`
    Digits(SmolStr),
    /// `± 0.5`
    Even(SmolStr),
    /// `(+0.6, -0.5)`, without the signs.
    Uneven(SmolStr, SmolStr),
}

impl Written {
    /// The exponent that follows the whole, `(3.0 ± 0.1) × 10^5`, is also that
    /// of the uncertainty. Bracketed digits follow the number's last digit and
    /// need no word about it.
    fn with_exponent_of(self, number: &str) -> Written {
        let exponent = exponent_of(number);
        let scaled = |amount: SmolStr| {
            if amount.contains('e') {
                amount
            } else {
                format_smolstr!("{amount}{exponent}")
            }
        };
        match self {
            Written::Digits(digits) => Written::Digits(digits),
            Written::Even(amount) => Written::Even(scaled(amount)),
            Written::Uneven(plus, minus) => Written::Uneven(scaled(plus), scaled(minus)),
        }
    }
}

/// `e5` of `3.0e5`, or nothing.
fn exponent_of(text: &str) -> &str {
    text.find('e').map_or("", |at| &text[at..])
}

/// A number's text in plain ASCII: `.5` is `0.5`, `1E−5` is `1e-5`.
fn plain(text: &str) -> SmolStr {
    let usual = text
        .bytes()
        .all(|byte| byte.is_ascii_digit() || byte == b'.' || byte == b'e' || byte == b'-');
    if usual && !text.starts_with('.') {
        return text.into();
    }
    let lead = if text.starts_with('.') { "0" } else { "" };
    let body = text.replace('E', "e").replace('−', "-").replace("e+", "e");
    format_smolstr!("{lead}{body}")
}

/// `1.234(12)e-5` as `1.234e-5` and `12`.
fn split_concise(text: &str) -> (SmolStr, SmolStr) {
    match (text.find('('), text.find(')')) {
        (Some(open), Some(close)) if open < close => (
            format_smolstr!("{}{}", &text[..open], &text[close + 1..]),
            text[open + 1..close].into(),
        ),
        _ => (text.into(), SmolStr::default()),
    }
}

/// The power of ten of the last written digit.
fn last_digit(text: &str) -> i32 {
    let (digits, exponent) = text.split_once('e').unwrap_or((text, "0"));
    let negative = exponent.starts_with('-');
    let exponent = exponent
        .parse::<i32>()
        .unwrap_or(if negative { -MAX_EXPONENT } else { MAX_EXPONENT })
        .clamp(-MAX_EXPONENT, MAX_EXPONENT);
    let decimals = digits.find('.').map_or(0, |dot| digits.len() - dot - 1);
    exponent - i32::try_from(decimals).unwrap_or(MAX_EXPONENT)
}

/// `⁻¹²` as −12.
pub(super) fn superscript_value(text: &str) -> Option<i32> {
    let mut value: i32 = 0;
    let mut negative = false;
    for sign in text.chars() {
        let digit = match sign {
            '⁺' => continue,
            '⁻' => {
                negative = true;
                continue;
            }
            '⁰' => 0,
            '¹' => 1,
            '²' => 2,
            '³' => 3,
            '⁴'..='⁹' => sign as i32 - '⁴' as i32 + 4,
            _ => return None,
        };
        value = value.checked_mul(10)?.checked_add(digit)?;
    }
    (value <= MAX_EXPONENT).then_some(if negative { -value } else { value })
}
