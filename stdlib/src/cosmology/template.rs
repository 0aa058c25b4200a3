//! What most entries of the catalogue have in common.

use crate::catalogue::{Argument, Definition, Entry, Topic, Type, argument, optional};
use crate::dimension::NUMBER;

/// An entry with nothing said; others are written `Entry { …, ..BLANK }`.
pub const BLANK: Entry = Entry {
    name: "",
    symbol: "",
    aliases: &[],
    synonyms: &[],
    topic: Topic::Background,
    about: "",
    arguments: &[],
    result: Type::of(NUMBER),
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
    "redshift at which the object is seen, z ≥ 0",
)];
