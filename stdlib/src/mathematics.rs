//! Mathematical functions.
//!
//! All are computed by `libm`, so every machine prints the same digits. What
//! does not exist is a [`DomainError`] in words, never NaN.

use crate::catalogue::{Definition, Entry, Topic, Type};
use crate::dimension::{ANGLE, NUMBER};
use crate::model::DomainError;

mod elementary;
mod special;

/// The entries of this chapter, in the order of the handbook.
pub static ENTRIES: [&[Entry]; 2] = [elementary::ENTRIES, special::ENTRIES];

/// Any dimension, the same wherever it stands in one signature.
const A: Type = Type::any(0);
const ANGLE_TYPE: Type = Type::of(ANGLE);
const NUMBER_TYPE: Type = Type::of(NUMBER);

/// What all functions of mathematics have in common.
const FUNCTION: Entry = Entry {
    name: "",
    symbol: "",
    aliases: &[],
    synonyms: &[],
    topic: Topic::Mathematics,
    about: "",
    arguments: &[],
    result: NUMBER_TYPE,
    open_today: false,
    usual_unit: "",
    formula: "",
    validity: "",
    source: "",
    example: "",
    definition: Definition::Constant(0.0, 0.0),
};

type Result = std::result::Result<f64, DomainError>;

fn does_not_exist(sentence: String) -> Result {
    Err(DomainError(sentence.into()))
}

/// The value, unless it is too large for a number.
fn representable(value: f64, what: &str, x: f64) -> Result {
    if value.is_finite() {
        Ok(value)
    } else {
        does_not_exist(format!(
            "{what} of {} is too large for a number (above 1.8e308)",
            digits(x)
        ))
    }
}

/// A number as a message shows it: seven digits, the power of ten apart where
/// it is far from 1.
fn digits(x: f64) -> String {
    let rounded: f64 = format!("{x:.6e}").parse().unwrap_or(x);
    if rounded == 0.0 || (1e-4..1e7).contains(&rounded.abs()) {
        format!("{rounded}")
    } else {
        format!("{rounded:e}")
    }
}
