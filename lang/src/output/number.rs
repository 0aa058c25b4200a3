//! Numbers for people: six significant digits where a value was computed, all
//! digits where it was plainly written with a few more, whole numbers whole.
//! The machine-readable forms do not come through here.

use super::look::{self, Look};
use crate::report::Numbers;

/// Significant digits of a computed value.
const DIGITS: usize = 6;

/// A value of at most this many digits was written by a person or fixed by a
/// definition (299792.458 km/s) and keeps them all.
const KEPT_DIGITS: usize = 9;

/// Beyond this many digits, two numbers differ only by rounding in the
/// arithmetic.
const SOUND_DIGITS: usize = 12;

/// From here on a whole number may be the accident of a large float.
const WHOLE_LIMIT: f64 = 1e12;

/// The number as a person reads it: `46.1963`, `299792.458`, `1.5×10^-12`.
#[must_use]
pub fn short(value: f64, look: &Look) -> String {
    if !value.is_finite() {
        return irregular(value, look);
    }
    if value == 0.0 {
        return "0".into();
    }
    let sound = Decimal::of(value, SOUND_DIGITS);
    let whole = value.trunc() == value && value.abs() < WHOLE_LIMIT;
    if whole {
        return shorter(Decimal::of(value, 17).fixed(), sound.scientific(look));
    }
    let decimal = if sound.digits.len() <= KEPT_DIGITS {
        sound
    } else {
        Decimal::of(value, DIGITS)
    };
    if (-3..6).contains(&decimal.exponent) {
        decimal.fixed()
    } else {
        decimal.scientific(look)
    }
}

/// The numbers of one column, aligned on the decimal point and padded to one
/// width. Where no digits are lost by it, all have the same number of decimals.
#[must_use]
pub fn column(values: &[f64], look: &Look) -> Vec<String> {
    let cells = match common_decimals(values, look) {
        Some(decimals) => values.iter().map(|value| fixed(*value, decimals)).collect(),
        None => values.iter().map(|value| short(*value, look)).collect::<Vec<_>>(),
    };
    align(&cells)
}

/// Numbers as text, without unit: `{1, 2, 3}` for a series, cut in the middle
/// when it is long.
#[must_use]
pub fn numbers(value: &Numbers, look: &Look) -> String {
    match value {
        Numbers::Scalar(number) => short(*number, look),
        Numbers::Series(all) => braces(all, look, |number| short(*number, look)),
        Numbers::Truth(truth) => truth.to_string(),
        Numbers::Truths(all) => braces(all, look, |truth| truth.to_string()),
        Numbers::Never => "never".into(),
        Numbers::Missing => "not computed".into(),
    }
}

/// How many elements of a long series are shown at either end.
const SERIES_ENDS: usize = 12;

fn braces<T>(all: &[T], look: &Look, show: impl Fn(&T) -> String) -> String {
    let list = |part: &[T]| part.iter().map(&show).collect::<Vec<_>>().join(", ");
    if all.len() <= 3 * SERIES_ENDS {
        return format!("{{{}}}", list(all));
    }
    let gap = if look.unicode { "…" } else { "..." };
    let (head, tail) = (&all[..SERIES_ENDS], &all[all.len() - SERIES_ENDS..]);
    format!("{{{}, {gap}, {}}}", list(head), list(tail))
}

/// The number of decimals that suits a whole column, if one does: every value
/// keeps at least four significant digits and none is in powers of ten.
fn common_decimals(values: &[f64], look: &Look) -> Option<usize> {
    let sizes = || values.iter().map(|value| value.abs()).filter(|size| *size > 0.0);
    let largest = sizes().fold(0.0, f64::max);
    let smallest = sizes().fold(f64::INFINITY, f64::min);
    if !values.iter().all(|value| value.is_finite()) || largest >= 1e6 || smallest < 1e-3 {
        return None;
    }
    let decimals = |value: &f64| {
        let text = short(*value, look);
        text.split_once('.').map_or(0, |(_, after)| after.len())
    };
    let wanted = values.iter().map(decimals).max().unwrap_or(0);
    let room = (DIGITS as i32 - 1 - Decimal::of(largest, DIGITS).exponent).max(0) as usize;
    let chosen = wanted.min(room);
    let exact = values.iter().all(|value| decimals(value) <= chosen);
    let kept = Decimal::of(smallest, DIGITS).exponent + chosen as i32 + 1;
    (exact || kept >= 4).then_some(chosen)
}

/// Pads cells so that their decimal points stand below each other.
fn align(cells: &[String]) -> Vec<String> {
    let split = |cell: &String| cell.find(['.', '×', 'e']).unwrap_or(cell.len());
    let before = |cell: &String| look::width(&cell[..split(cell)]);
    let left = cells.iter().map(before).max().unwrap_or(0);
    let padded: Vec<_> = cells
        .iter()
        .map(|cell| format!("{}{cell}", " ".repeat(left - before(cell))))
        .collect();
    let full = padded.iter().map(|cell| look::width(cell)).max().unwrap_or(0);
    padded.iter().map(|cell| look::pad(cell, full)).collect()
}

/// With this many decimals, and no minus sign before a zero.
fn fixed(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    match text.strip_prefix('-') {
        Some(digits) if digits.bytes().all(|byte| matches!(byte, b'0' | b'.')) => digits.into(),
        _ => text,
    }
}

fn irregular(value: f64, look: &Look) -> String {
    if value.is_nan() {
        return "not computed".into();
    }
    let infinity = if look.unicode { "∞" } else { "infinity" };
    let sign = if value < 0.0 { "-" } else { "" };
    format!("{sign}{infinity}")
}

fn shorter(fixed: String, scientific: String) -> String {
    let plain = fixed.trim_start_matches('-').len() <= 7;
    if plain || fixed.chars().count() <= scientific.chars().count() {
        fixed
    } else {
        scientific
    }
}

/// A number rounded to some significant digits, without trailing zeros.
struct Decimal {
    negative: bool,
    /// The digits; the point stands after the first.
    digits: String,
    /// The power of ten of the first digit.
    exponent: i32,
}

impl Decimal {
    /// The standard library rounds correctly, to even on a tie of the exact
    /// binary value.
    fn of(value: f64, significant: usize) -> Decimal {
        let text = format!("{:.*e}", significant - 1, value.abs());
        let (mantissa, exponent) = text.split_once('e').unwrap_or((&text, "0"));
        let digits = mantissa.replace('.', "");
        let trimmed = digits.trim_end_matches('0');
        Decimal {
            negative: value < 0.0,
            digits: if trimmed.is_empty() { "0" } else { trimmed }.into(),
            exponent: exponent.parse().unwrap_or(0),
        }
    }

    fn sign(&self) -> &'static str {
        if self.negative { "-" } else { "" }
    }

    fn fixed(&self) -> String {
        let sign = self.sign();
        if self.exponent < 0 {
            let zeros = "0".repeat((-self.exponent - 1) as usize);
            return format!("{sign}0.{zeros}{}", self.digits);
        }
        let whole = self.exponent as usize + 1;
        if self.digits.len() <= whole {
            let zeros = "0".repeat(whole - self.digits.len());
            return format!("{sign}{}{zeros}", self.digits);
        }
        format!("{sign}{}.{}", &self.digits[..whole], &self.digits[whole..])
    }

    fn scientific(&self, look: &Look) -> String {
        let (first, rest) = self.digits.split_at(1);
        let point = if rest.is_empty() { "" } else { "." };
        let times = if look.unicode { "×10^" } else { "e" };
        format!("{}{first}{point}{rest}{times}{}", self.sign(), self.exponent)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn plain(value: f64) -> String {
        short(value, &Look::PLAIN)
    }

    #[test]
    fn computed_values_have_six_digits() {
        assert_eq!(plain(46.196_312_345_6), "46.1963");
        assert_eq!(plain(0.802_213_456_789), "0.802213");
        assert_eq!(plain(-1.0 / 3.0), "-0.333333");
        assert_eq!(plain(999_999.96), "999999.96");
        assert_eq!(plain(999_999.961_234_5), "1×10^6");
    }

    #[test]
    fn written_values_keep_their_digits_and_lose_rounding() {
        assert_eq!(plain(0.1 + 0.2), "0.3");
        assert_eq!(plain(299_792.458), "299792.458");
        assert_eq!(plain(1420.4058), "1420.4058");
        assert_eq!(plain(70.000_000_000_000_01), "70");
    }

    #[test]
    fn whole_numbers_stay_whole() {
        assert_eq!(plain(299_792_458.0), "299792458");
        assert_eq!(plain(149_597_870_700.0), "149597870700");
        assert_eq!(plain(-1_234_567.0), "-1234567");
        assert_eq!(plain(20_000.0), "20000");
        assert_eq!(plain(3e10), "3×10^10");
    }

    #[test]
    fn very_large_and_small_use_powers_of_ten() {
        assert_eq!(plain(3.085_677_581_491_367e16), "3.08568×10^16");
        assert_eq!(plain(6.674_3e-11), "6.6743×10^-11");
        let ascii = Look {
            unicode: false,
            ..Look::PLAIN
        };
        assert_eq!(short(6.674_3e-11, &ascii), "6.6743e-11");
    }

    #[test]
    fn irregular_values_are_words() {
        assert_eq!(plain(f64::INFINITY), "∞");
        assert_eq!(plain(f64::NAN), "not computed");
        assert_eq!(plain(-0.0), "0");
    }

    #[test]
    fn columns_align_on_the_point() {
        assert_eq!(column(&[0.5, 1.0, 10.0], &Look::PLAIN), [" 0.5", " 1.0", "10.0"]);
        assert_eq!(
            column(&[1.0, 2.5e9, 0.25], &Look::PLAIN),
            ["1       ", "2.5×10^9", "0.25    "]
        );
    }

    #[test]
    fn a_column_of_like_sizes_has_like_decimals() {
        let values = [3.303_829_12, 10.123_456_78];
        assert_eq!(column(&values, &Look::PLAIN), [" 3.3038", "10.1235"]);
    }

    #[test]
    fn long_series_are_cut_in_the_middle() {
        let all: Vec<f64> = (0..100).map(f64::from).collect();
        let text = numbers(&Numbers::Series(all), &Look::PLAIN);
        assert!(
            text.starts_with("{0, 1, 2,") && text.ends_with("98, 99}"),
            "{text}"
        );
        assert!(text.contains("11, …, 88"), "{text}");
    }
}
