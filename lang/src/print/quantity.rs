//! Numbers and units back to text.

use super::expression::list;
use crate::ast::{Number, Quantity, Unit, UnitFactor};
use num_rational::Ratio;
use std::fmt::Write;

/// A unit as it stands after a number: `km/s/Mpc`.
#[must_use]
pub fn unit(unit: &Unit) -> String {
    let mut out = String::new();
    write_bracketed_unit(&mut out, unit);
    out
}

pub(super) fn write_quantity(out: &mut String, quantity: &Quantity) {
    write_number(out, &quantity.number);
    if let Some(unit) = &quantity.unit {
        write_unit_after(out, unit);
    }
}

pub(super) fn write_quantities(out: &mut String, numbers: &[Number], unit: &Unit) {
    out.push('{');
    list(out, numbers, write_number);
    out.push('}');
    write_unit_after(out, unit);
}

fn write_number(out: &mut String, number: &Number) {
    match &number.uncertainty {
        None => out.push_str(&number.text),
        Some(uncertainty) if is_digits(&uncertainty.written) => {
            let (digits, exponent) = split_exponent(&number.text);
            let _ = write!(out, "{digits}{}{exponent}", uncertainty.written);
        }
        Some(uncertainty) => {
            let _ = write!(out, "{} {}", number.text, uncertainty.written);
        }
    }
}

/// Whether an uncertainty is written as digits in parentheses.
fn is_digits(written: &str) -> bool {
    written.starts_with('(') && !written.starts_with("(+")
}

fn split_exponent(text: &str) -> (&str, &str) {
    text.find('e').map_or((text, ""), |at| text.split_at(at))
}

fn write_unit_after(out: &mut String, unit: &Unit) {
    let percent = unit.factors.first().is_some_and(|factor| factor.name.node == "%");
    if !percent {
        out.push(' ');
    }
    write_factors(out, &unit.factors);
}

/// A unit as it stands in brackets, where it may have a scale, or be 1.
pub(super) fn write_bracketed_unit(out: &mut String, unit: &Unit) {
    let starts_below = unit.factors.first().is_some_and(|factor| factor.after_slash);
    if unit.scale != 1.0 {
        let _ = write!(out, "{:e}", unit.scale);
        if !starts_below && !unit.factors.is_empty() {
            out.push(' ');
        }
    } else if starts_below || unit.factors.is_empty() {
        out.push('1');
    }
    write_factors(out, &unit.factors);
}

fn write_factors(out: &mut String, factors: &[UnitFactor]) {
    for (at, factor) in factors.iter().enumerate() {
        if factor.after_slash {
            out.push('/');
        } else if at > 0 {
            out.push(' ');
        }
        out.push_str(&factor.name.node);
        let power = if factor.after_slash {
            -factor.power
        } else {
            factor.power
        };
        write_power(out, power);
    }
}

fn write_power(out: &mut String, power: Ratio<i32>) {
    if power == Ratio::from_integer(1) {
        return;
    }
    if power.is_integer() {
        let _ = write!(out, "^{}", power.numer());
    } else {
        let _ = write!(out, "^({}/{})", power.numer(), power.denom());
    }
}
