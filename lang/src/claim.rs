//! Claims: whether a computed value agrees with what is quoted, and which slip
//! would explain it where it does not.

pub mod slip;

use crate::ast::{Number, Uncertainty};
use crate::check::claim::Written;

/// What the quoted number allows.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Allowance {
    /// How far the computed value may be below.
    pub below: f64,
    /// How far it may be above.
    pub above: f64,
}

/// Rounding of the comparison itself, relative to the quoted value: a value
/// that is exactly half a digit off agrees.
const GRACE: f64 = 1e-12;

impl Allowance {
    /// The same on both sides.
    #[must_use]
    pub fn even(width: f64) -> Allowance {
        Allowance {
            below: width,
            above: width,
        }
    }

    /// The larger of the two.
    #[must_use]
    pub fn width(self) -> f64 {
        self.below.max(self.above)
    }

    /// Whether `computed` is close enough to `quoted`.
    #[must_use]
    pub fn admits(self, quoted: f64, computed: f64) -> bool {
        // A number too large for its unit is near nothing.
        if !quoted.is_finite() {
            return quoted == computed;
        }
        let grace = GRACE * quoted.abs().max(computed.abs());
        let off = computed - quoted;
        off <= self.above + grace && -off <= self.below + grace
    }
}

/// `is 46.5 Gly`: to half of the last digit written; with an uncertainty,
/// within it.
#[must_use]
pub fn as_written(quoted: &Written<'_>) -> Allowance {
    match &quoted.number.uncertainty {
        Some(uncertainty) => within(uncertainty, quoted.sign, 1.0),
        None => Allowance::even(0.5 * power_of_ten(quoted.number.last_digit)),
    }
}

/// `within 2 sigma` of the quoted uncertainty.
#[must_use]
pub fn within(uncertainty: &Uncertainty, sign: f64, count: f64) -> Allowance {
    let (below, above) = if sign < 0.0 {
        (uncertainty.plus, uncertainty.minus)
    } else {
        (uncertainty.minus, uncertainty.plus)
    };
    Allowance {
        below: count * below,
        above: count * above,
    }
}

/// `is about 16000`: to half a unit of the last digit that is not zero.
#[must_use]
pub fn about(number: &Number) -> Allowance {
    let digits: String = number
        .text
        .split(['e', 'E'])
        .next()
        .unwrap_or("")
        .chars()
        .filter(char::is_ascii_digit)
        .collect();
    let zeros = digits.len() - digits.trim_end_matches('0').len();
    let zeros = if zeros == digits.len() { 0 } else { zeros };
    Allowance::even(0.5 * power_of_ten(number.last_digit + zeros as i32))
}

fn power_of_ten(power: i32) -> f64 {
    // Read, not computed, so that 10^-2 is the double nearest to 0.01.
    format!("1e{power}").parse().unwrap_or(f64::INFINITY)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::source::Span;

    fn number(text: &str, value: f64, last_digit: i32) -> Number {
        Number {
            value,
            last_digit,
            text: text.into(),
            uncertainty: None,
            span: Span::default(),
        }
    }

    fn written(number: &Number) -> Written<'_> {
        Written {
            sign: 1.0,
            number,
            unit: None,
        }
    }

    #[test]
    fn a_number_agrees_to_half_of_its_last_digit() {
        let quoted = number("46.5", 46.5, -1);
        let allowance = as_written(&written(&quoted));
        assert!(allowance.admits(46.5, 46.54) && allowance.admits(46.5, 46.45));
        assert!(!allowance.admits(46.5, 46.56) && !allowance.admits(46.5, 46.44));
    }

    #[test]
    fn nothing_agrees_with_a_number_too_large_to_hold() {
        assert!(!Allowance::even(5e299).admits(f64::INFINITY, 13.8));
        assert!(!Allowance::even(5e299).admits(f64::NAN, 13.8));
    }

    #[test]
    fn about_looks_at_the_last_digit_that_is_not_zero() {
        assert_eq!(about(&number("20000", 2e4, 0)), Allowance::even(5000.0));
        assert_eq!(about(&number("16", 16.0, 0)), Allowance::even(0.5));
        assert_eq!(about(&number("3.0e5", 3e5, 4)), Allowance::even(5e4));
    }

    #[test]
    fn uneven_errors_are_taken_on_their_side() {
        let uneven = Uncertainty {
            plus: 0.6,
            minus: 0.5,
            written: "(+0.6, -0.5)".into(),
        };
        let allowance = within(&uneven, 1.0, 1.0);
        assert!(allowance.admits(67.4, 68.0) && !allowance.admits(67.4, 66.8));
    }
}
