//! What most entries of the catalogue have in common.

use super::{Found, Redshift};
use crate::catalogue::{Argument, Definition, Entry, Topic, Type, argument, optional};
use crate::dimension::{LENGTH, NUMBER, TIME};
use crate::model::Model;

/// An entry with nothing said; others are written `Entry { …, ..BLANK }`.
pub const BLANK: Entry = Entry {
    name: "",
    symbol: "",
    aliases: &[],
    synonyms: &[],
    topic: Topic::Background,
    about: "",
    arguments: &[],
    result: NUMBER_TYPE,
    open_today: false,
    usual_unit: "",
    formula: "",
    validity: "",
    source: "",
    example: "",
    definition: Definition::Constant(f64::NAN, 0.0),
};

/// A plain number.
pub const NUMBER_TYPE: Type = Type::of(NUMBER);
/// A proper length.
pub const PROPER_LENGTH: Type = Type::of(LENGTH);
/// A comoving length.
pub const COMOVING_LENGTH: Type = Type::of(LENGTH.comoving());
/// A time.
pub const TIME_TYPE: Type = Type::of(TIME);

/// `z`, to be given.
pub const Z: &[Argument] = &[argument("z", NUMBER_TYPE, "redshift, -1 < z")];

/// `z`, today unless given.
pub const Z_OR_TODAY: &[Argument] = &[optional(
    "z",
    NUMBER_TYPE,
    0.0,
    "redshift, -1 < z; today when left out",
)];

/// `z` of something seen today.
pub const Z_SEEN: &[Argument] = &[argument(
    "z",
    NUMBER_TYPE,
    "redshift at which the object is seen, 0 ≤ z",
)];

/// The redshift among the arguments of a call.
#[inline]
pub fn redshift(arguments: &[f64], place: usize) -> Found<Redshift> {
    Redshift::new(arguments[place])
}

/// A value of the model alone that is a redshift.
pub fn number_of(found: Found<Redshift>) -> Found<f64> {
    found.map(Redshift::get)
}

/// What a model says of one of its parameters.
pub fn quoted(model: &Model, parameter: usize, name: &str) -> Found<f64> {
    let missing = || {
        super::undefined(format_args!(
            "the model does not say {name}: give it one, `with {name} = …`"
        ))
    };
    model.quoted(parameter).ok_or_else(missing)
}
