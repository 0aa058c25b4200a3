//! Units as written, after a number and inside brackets.
//!
//! After a number a unit starts with a word and runs on over spaces, tight
//! `·` and `.`, tight `/word` and powers; it stops before a word with a
//! meaning of its own, a spaced operator, a line break and `word(`. Inside
//! brackets nothing else can follow, so parentheses, a leading slash, a scale
//! and spaced signs are read as well.

use super::number::superscript_value;
use super::problem::Problem;
use super::scan::Scan;
use crate::ast::{Unit, UnitFactor};
use crate::source::{Span, Spanned};
use crate::token::{Token, TokenKind};
use num_rational::Ratio;
use smol_str::SmolStr;

/// Powers of units beyond this are slips, and products of them stay in range.
const MAX_POWER: i32 = 100;

/// Lengths nobody measures in units of 1/h: beside them `h` was meant as hour.
const EVERYDAY_LENGTHS: [&str; 5] = ["km", "m", "cm", "mm", "mi"];

impl Scan<'_> {
    /// Whether a unit starts here.
    pub(super) fn unit_follows(&self) -> bool {
        self.sees(0, TokenKind::Percent) || self.is_unit_word(0)
    }

    /// Whether the token `ahead` places on is a word that can be a unit after
    /// a number. `word(` is a call; a word on the next line is not part of it.
    fn is_unit_word(&self, ahead: usize) -> bool {
        let is_call = self.sees(ahead + 1, TokenKind::LeftParenthesis) && self.is_tight(ahead + 1);
        self.sees(ahead, TokenKind::Word)
            && !is_call
            && self.is_on_line(ahead)
            && !is_circle_constant(self.word(ahead))
    }

    /// The unit after a number.
    pub(super) fn unit_after_number(&mut self) -> Option<Unit> {
        if !self.unit_follows() {
            return None;
        }
        let first = self.at;
        let mut reading = Reading::default();
        self.factor(&mut reading, 1, false);
        loop {
            if self.sees(0, TokenKind::Slash)
                && self.is_tight(0)
                && self.is_tight(1)
                && self.is_unit_word(1)
                && !self.sees(2, TokenKind::LeftParenthesis)
            {
                reading.note_slash(self.at);
                self.at += 1;
                self.factor(&mut reading, -1, true);
            } else if matches!(self.kind(0), Some(TokenKind::Middot | TokenKind::Dot))
                && self.is_tight(0)
                && self.is_tight(1)
                && self.is_unit_word(1)
            {
                let gap = self.at;
                self.at += 1;
                self.product(&mut reading, gap, 1);
            } else if self.is_unit_word(0) {
                let gap = self.at;
                self.product(&mut reading, gap, 1);
            } else {
                break;
            }
        }
        let span = self.span_from(first);
        self.check_hour(&reading.factors, span);
        Some(Unit {
            scale: 1.0,
            factors: reading.factors,
            span,
        })
    }

    /// The unit inside brackets, up to `]` or a word that does more.
    pub(super) fn unit_in_bracket(&mut self) -> Option<Unit> {
        let first = self.at;
        let mut reading = Reading::default();
        let scale = self.scale()?;
        let bare = self.ends_bracketed_unit();
        if !bare {
            if self.sees(0, TokenKind::Slash) {
                reading.note_slash(self.at);
                self.at += 1;
                self.factor_or_group(&mut reading, -1, true)?;
            } else {
                self.factor_or_group(&mut reading, 1, false)?;
            }
            self.bracketed_product(&mut reading, 1)?;
        }
        let span = self.span_from(first);
        if bare && self.at == first {
            return None;
        }
        if bare && scale != 1.0 {
            self.problems.push(Problem::NoUnitInBracket { at: span });
        }
        self.check_hour(&reading.factors, span);
        Some(Unit {
            scale,
            factors: reading.factors,
            span,
        })
    }

    fn ends_bracketed_unit(&self) -> bool {
        match self.kind(0) {
            None => true,
            Some(kind) => {
                kind == TokenKind::RightBracket || kind == TokenKind::RightParenthesis || kind.is_contextual()
            }
        }
    }

    /// `10^-20` in `[10^-20 erg/s]`; 1 if there is none.
    fn scale(&mut self) -> Option<f64> {
        if !self.sees(0, TokenKind::Number) {
            return Some(1.0);
        }
        if let Some(exponent) = self.power_of_ten() {
            return format!("1e{exponent}").parse().ok();
        }
        let number = self.number()?;
        Some(number.value)
    }

    /// The rest of a product inside brackets. `sign` is −1 inside parentheses
    /// that stand below a slash.
    fn bracketed_product(&mut self, reading: &mut Reading, sign: i32) -> Option<()> {
        while !self.ends_bracketed_unit() {
            match self.kind(0)? {
                TokenKind::Slash => {
                    reading.note_slash(self.at);
                    self.at += 1;
                    self.factor_or_group(reading, -sign, true)?;
                }
                TokenKind::Middot | TokenKind::Dot | TokenKind::Star | TokenKind::Times => {
                    let gap = self.at;
                    self.at += 1;
                    self.product_or_group(reading, gap, sign)?;
                }
                _ => {
                    let gap = self.at;
                    self.product_or_group(reading, gap, sign)?;
                }
            }
        }
        Some(())
    }

    fn product_or_group(&mut self, reading: &mut Reading, gap: usize, sign: i32) -> Option<()> {
        if self.sees(0, TokenKind::LeftParenthesis) {
            return self.group(reading, sign, false);
        }
        if !self.sees(0, TokenKind::Word) && !self.sees(0, TokenKind::Percent) {
            return None;
        }
        self.product(reading, gap, sign);
        Some(())
    }

    fn factor_or_group(&mut self, reading: &mut Reading, sign: i32, after_slash: bool) -> Option<()> {
        match self.kind(0)? {
            TokenKind::LeftParenthesis => self.group(reading, sign, after_slash),
            TokenKind::Word | TokenKind::Percent => {
                self.factor(reading, sign, after_slash || reading.after_slash);
                Some(())
            }
            _ => None,
        }
    }

    /// `(s cm^2)`, `(km/s)^2`
    fn group(&mut self, reading: &mut Reading, sign: i32, after_slash: bool) -> Option<()> {
        let opened = self.at;
        self.at += 1;
        let start = reading.factors.len();
        // Parentheses say what stands below: `erg/(s cm^2)` is plain.
        let slash_outside = reading.slash.take();
        if self.sees(0, TokenKind::Slash) {
            reading.note_slash(self.at);
            self.at += 1;
            self.factor_or_group(reading, -sign, true)?;
        } else {
            self.factor_or_group(reading, sign, after_slash)?;
        }
        reading.after_slash |= after_slash;
        self.bracketed_product(reading, sign)?;
        if !self.take(TokenKind::RightParenthesis) {
            return None;
        }
        reading.slash = slash_outside;
        let power = self.power(1);
        let mut too_large = false;
        for factor in &mut reading.factors[start..] {
            match scaled(factor.power, power) {
                Some(product) => factor.power = product,
                None => too_large = true,
            }
        }
        if too_large {
            let at = self.span_from(opened);
            self.problems.push(Problem::UnitPowerTooLarge { at });
        }
        Some(())
    }

    /// One factor: a word and its power.
    fn factor(&mut self, reading: &mut Reading, sign: i32, after_slash: bool) {
        let Some(token) = self.token(0) else { return };
        self.at += 1;
        let power = self.power(sign);
        reading.after_slash |= after_slash;
        reading.factors.push(UnitFactor {
            name: self.unit_name(token),
            power,
            after_slash,
        });
        self.check_missing_caret(token);
    }

    /// A factor joined by a space or a dot. Below a slash that could belong
    /// either above or below.
    fn product(&mut self, reading: &mut Reading, gap: usize, sign: i32) {
        let first = self.at;
        let after_slash = reading.after_slash;
        self.factor(reading, sign, after_slash);
        if let (Some(slash), false) = (reading.slash, reading.reported) {
            reading.reported = true;
            let problem = self.ambiguous_product(reading, slash, gap, first);
            self.problems.extend(problem);
        }
    }

    fn ambiguous_product(
        &self,
        reading: &Reading,
        slash: usize,
        gap: usize,
        first: usize,
    ) -> Option<Problem> {
        let factor = reading.factors.last()?;
        let last_before = self.tokens.get(gap.checked_sub(1)?)?.span;
        let above = self.tokens.get(slash)?.span;
        let written = self.span_from(first);
        Some(Problem::AmbiguousUnit {
            factor: written,
            joint: Span {
                start: last_before.end,
                end: written.end,
            },
            slash: Span {
                start: above.start,
                end: above.start,
            },
            below: power_text(&factor.name.node, factor.power.abs_unsigned()),
            above: self.slice(written).into(),
        })
    }

    fn unit_name(&self, token: Token) -> Spanned<SmolStr> {
        Spanned {
            node: name_text(self.slice(token.span)),
            span: token.span,
        }
    }

    /// The power after a word or a group, times `sign`; 1 if none is written.
    fn power(&mut self, sign: i32) -> Ratio<i32> {
        let first = self.at;
        let written = match self.kind(0) {
            Some(TokenKind::Superscript) if self.is_tight(0) => {
                let value = superscript_value(self.word(0)).map(Ratio::from_integer);
                self.at += 1;
                value
            }
            Some(TokenKind::Caret | TokenKind::DoubleStar) if self.is_tight(0) && self.is_tight(1) => {
                self.at += 1;
                self.rational()
            }
            _ => return Ratio::from_integer(sign),
        };
        let at = self.span_from(first);
        match written {
            Some(power) if *power.numer() != 0 && in_range(power) => power * sign,
            Some(_) => {
                self.problems.push(Problem::UnitPowerTooLarge { at });
                Ratio::from_integer(sign)
            }
            None => {
                self.problems.push(Problem::UnitPowerNotWritten { at });
                Ratio::from_integer(sign)
            }
        }
    }

    /// `2`, `-1`, `0.5`, `(1/2)`, `(-1)` after a caret.
    fn rational(&mut self) -> Option<Ratio<i32>> {
        if !self.take(TokenKind::LeftParenthesis) {
            return self.signed_decimal();
        }
        let top = self.signed_decimal();
        let mut power = top?;
        if self.take(TokenKind::Slash) {
            let below = self.signed_decimal().filter(|below| *below.numer() != 0)?;
            power = checked_divide(power, below)?;
        }
        self.take(TokenKind::RightParenthesis).then_some(power)
    }

    fn signed_decimal(&mut self) -> Option<Ratio<i32>> {
        let negative = self.sees(0, TokenKind::Minus);
        if negative || self.sees(0, TokenKind::Plus) {
            self.at += 1;
        }
        if !self.sees(0, TokenKind::Number) {
            return None;
        }
        let value = decimal_ratio(self.word(0));
        self.at += 1;
        value.map(|value| if negative { -value } else { value })
    }

    /// `s-1` where `s^-1` was meant.
    fn check_missing_caret(&mut self, word: Token) {
        let signed = matches!(self.kind(0), Some(TokenKind::Minus | TokenKind::Plus));
        if !signed || !self.is_tight(0) || !self.is_tight(1) || !self.sees(1, TokenKind::Number) {
            return;
        }
        let digits = self.word(1);
        if digits.len() > 2 || !digits.bytes().all(|byte| byte.is_ascii_digit()) {
            return;
        }
        self.at += 2;
        let whole = word.span.to(self.tokens[self.at - 1].span);
        self.problems.push(Problem::MissingCaret {
            word: word.span,
            whole,
        });
    }

    /// `12 h` and `km/h`: the hour is `hr`.
    fn check_hour(&mut self, factors: &[UnitFactor], unit: Span) {
        let Some(hour) = factors.iter().find(|factor| factor.name.node == "h") else {
            return;
        };
        let everyday = |factor: &UnitFactor| EVERYDAY_LENGTHS.contains(&factor.name.node.as_str());
        let beside_length = *hour.power.numer() < 0 && factors.len() == 2 && factors.iter().any(everyday);
        if factors.len() == 1 || beside_length {
            self.problems.push(Problem::HourInUnit {
                hour: hour.name.span,
                unit,
            });
        }
    }
}

/// A unit while it is read.
#[derive(Default)]
struct Reading {
    factors: Vec<UnitFactor>,
    /// A slash stands somewhere before.
    after_slash: bool,
    /// The first slash of this level of parentheses, as a token index.
    slash: Option<usize>,
    /// An ambiguous product was reported.
    reported: bool,
}

impl Reading {
    fn note_slash(&mut self, at: usize) {
        self.slash = self.slash.or(Some(at));
    }
}

/// π is never a unit: `4 π` lacks a sign.
fn is_circle_constant(word: &str) -> bool {
    word == "π"
}

/// A name as it is compared: three letters of Unicode have an older double
/// that keyboards and papers still produce (ohm, ångström and micro signs).
pub(super) fn name_text(written: &str) -> SmolStr {
    if written.is_ascii() || !written.contains(['\u{2126}', '\u{212b}', '\u{b5}']) {
        return written.into();
    }
    written
        .replace('\u{2126}', "Ω")
        .replace('\u{212b}', "Å")
        .replace('\u{b5}', "μ")
        .into()
}

fn in_range(power: Ratio<i32>) -> bool {
    power.numer().abs() <= MAX_POWER && *power.denom() <= MAX_POWER
}

fn scaled(power: Ratio<i32>, by: Ratio<i32>) -> Option<Ratio<i32>> {
    // Both are in range, so the product of their parts fits easily.
    Some(power * by).filter(|product| in_range(*product))
}

fn checked_divide(top: Ratio<i32>, below: Ratio<i32>) -> Option<Ratio<i32>> {
    (in_range(top) && in_range(below)).then(|| top / below)
}

/// `2`, `0.5`, `1.25` as a fraction.
fn decimal_ratio(text: &str) -> Option<Ratio<i32>> {
    let (whole, decimals) = text.split_once('.').unwrap_or((text, ""));
    if decimals.len() > 4 || whole.len() > 4 {
        return None;
    }
    let digits: i32 = format!("{whole}{decimals}").parse().ok()?;
    let scale = 10_i32.pow(u32::try_from(decimals.len()).ok()?);
    Some(Ratio::new(digits, scale))
}

/// `m^2`, `Hz`
fn power_text(name: &str, power: Ratio<i32>) -> String {
    if power == Ratio::from_integer(1) {
        name.to_owned()
    } else if power.is_integer() {
        format!("{name}^{}", power.numer())
    } else {
        format!("{name}^({power})")
    }
}

/// The size of a power, whatever its sign.
trait AbsoluteRatio {
    fn abs_unsigned(&self) -> Ratio<i32>;
}

impl AbsoluteRatio for Ratio<i32> {
    fn abs_unsigned(&self) -> Ratio<i32> {
        Ratio::new(self.numer().abs(), *self.denom())
    }
}
