//! The operators on plain numbers, shared by the lanes and by the walk that
//! looks for a fault, so that both give the same digits.
//!
//! NaN is the poison that marks a failed lane. Addition and multiplication
//! hand on whatever is not finite; operations that could swallow an infinity
//! (`1/∞ = 0`, `∞ > 1`) add `0 b`, which is 0 for a number and NaN for
//! anything else.

use crate::ast::{BinaryOp, CompareOp, LogicalOp};

/// 0 for a number, NaN for an infinity or NaN.
#[inline(always)]
fn poison(x: f64) -> f64 {
    x * 0.0
}

/// One arithmetic operation.
#[inline(always)]
pub(super) fn binary(op: BinaryOp, a: f64, b: f64) -> f64 {
    match op {
        BinaryOp::Add => a + b,
        BinaryOp::Subtract => a - b,
        BinaryOp::Multiply => a * b,
        BinaryOp::Divide => divide(a, b),
        BinaryOp::Power => power(a, b),
    }
}

/// `a / b`
#[inline(always)]
pub(super) fn divide(a: f64, b: f64) -> f64 {
    a / b + poison(b)
}

/// `a ^ b` for a real exponent. Halves are square roots, which are exact to
/// the last digit and much faster.
#[inline]
pub(super) fn power(a: f64, b: f64) -> f64 {
    let value = if b == 0.5 {
        a.sqrt()
    } else if b == -0.5 {
        1.0 / a.sqrt()
    } else if b == 1.5 {
        a * a.sqrt()
    } else {
        libm::pow(a, b)
    };
    value + poison(a) + poison(b)
}

/// `a ^ n` by repeated squaring.
#[inline(always)]
pub(super) fn power_integer(a: f64, n: i32) -> f64 {
    match n {
        1 => a,
        2 => a * a,
        3 => a * a * a,
        4 => (a * a) * (a * a),
        _ => power_by_squaring(a, n),
    }
}

#[inline(always)]
fn power_by_squaring(a: f64, n: i32) -> f64 {
    let mut left = n.unsigned_abs();
    let mut square = a;
    let mut product = 1.0;
    while left > 0 {
        if left & 1 == 1 {
            product *= square;
        }
        left >>= 1;
        if left > 0 {
            square *= square;
        }
    }
    let value = if n < 0 { 1.0 / product } else { product };
    value + poison(a)
}

/// A comparison: 1 or 0.
#[inline(always)]
pub(super) fn compare(op: CompareOp, a: f64, b: f64) -> f64 {
    let holds = match op {
        CompareOp::Less => a < b,
        CompareOp::LessOrEqual => a <= b,
        CompareOp::Greater => a > b,
        CompareOp::GreaterOrEqual => a >= b,
    };
    f64::from(u8::from(holds)) + (poison(a) + poison(b))
}

/// `and`, `or`, from left to right: where the left side decides, the right
/// side may fail.
#[inline(always)]
pub(super) fn logical(op: LogicalOp, a: f64, b: f64) -> f64 {
    let deciding = match op {
        LogicalOp::And => 0.0,
        LogicalOp::Or => 1.0,
    };
    if a == deciding { a } else { b + poison(a) }
}

/// `if c then a else b`
#[inline(always)]
pub(super) fn select(c: f64, a: f64, b: f64) -> f64 {
    let chosen = if c == 0.0 { b } else { a };
    chosen + poison(c)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn whole_powers_multiply() {
        assert_eq!(power_integer(3.0, 5), 243.0);
        assert_eq!(power_integer(2.0, -3), 0.125);
        assert_eq!(power_integer(7.0, 0), 1.0);
        assert_eq!(power_integer(-2.0, 3), -8.0);
        assert_eq!(power_integer(1.0, i32::MIN), 1.0);
        assert_eq!(power_integer(10.0, 22), 1e22);
    }

    #[test]
    fn infinities_are_not_swallowed() {
        let inf = f64::INFINITY;
        assert!(divide(1.0, inf).is_nan());
        assert!(power(inf, -1.0).is_nan());
        assert!(power(0.5, inf).is_nan());
        assert!(power_integer(inf, -2).is_nan());
        assert!(power_integer(f64::NAN, 0).is_nan());
        assert!(compare(CompareOp::Less, 1.0, inf).is_nan());
        assert!(logical(LogicalOp::And, inf, 1.0).is_nan());
        assert!(select(f64::NAN, 1.0, 2.0).is_nan());
    }

    #[test]
    fn the_side_not_needed_may_fail() {
        assert_eq!(logical(LogicalOp::And, 0.0, f64::NAN), 0.0);
        assert_eq!(logical(LogicalOp::Or, 1.0, f64::NAN), 1.0);
        assert!(logical(LogicalOp::And, 1.0, f64::NAN).is_nan());
        assert_eq!(select(1.0, 3.0, f64::NAN), 3.0);
        assert_eq!(select(0.0, f64::NAN, 4.0), 4.0);
    }
}
