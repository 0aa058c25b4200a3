//! The catalogue: all that is known about each name of the library.
//!
//! One [`Entry`] feeds the checker, `help`, completion and the tests, so they
//! cannot disagree. Functions are called with plain SI numbers: the checker
//! has proved the dimensions by then.

use crate::dimension::{Dimension, Exponent, NUMBER};
use crate::model::{DomainError, Model};
use crate::{constants, cosmology, mathematics, redshift};
use num_rational::Ratio;

/// What is known about one name.
pub struct Entry {
    /// The long name, in `snake_case`.
    pub name: &'static str,
    /// The field's symbol for it, or `""`.
    pub symbol: &'static str,
    /// Further spellings that mean the same (ASCII forms of symbols).
    pub aliases: &'static [&'static str],
    /// Words under which `help` also finds it.
    pub synonyms: &'static [&'static str],
    /// The chapter of the handbook it stands in.
    pub topic: Topic,
    /// One sentence: what it is.
    pub about: &'static str,
    /// The arguments, in order. Empty for a value.
    pub arguments: &'static [Argument],
    /// The dimension and frame of the result.
    pub result: Type,
    /// Whether the frame is open when every argument is left at its default
    /// ("today": comoving and proper agree there).
    pub open_today: bool,
    /// The unit in which a cosmologist quotes it, `""` for a number.
    pub usual_unit: &'static str,
    /// The formula, in Unicode.
    pub formula: &'static str,
    /// Where it holds, or `""`.
    pub validity: &'static str,
    /// Paper or standard.
    pub source: &'static str,
    /// A claim in the language that is run by the tests.
    pub example: &'static str,
    /// How it is computed.
    pub definition: Definition,
}

/// The chapter an entry belongs to.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Topic {
    /// Constants of nature and of astronomy.
    Constants,
    /// Mathematical functions.
    Mathematics,
    /// Parameters of the model in force.
    Model,
    /// Expansion rate, times, densities.
    Background,
    /// Distances and volumes.
    Distances,
    /// Horizons and light cones.
    Horizons,
    /// Fluxes, magnitudes, wavelengths.
    Light,
    /// Recombination, growth and the power spectrum.
    Structure,
    /// Lensing and dynamics.
    Lensing,
}

/// One argument of a function.
#[derive(Clone, Copy)]
pub struct Argument {
    /// Its name, usable as `name = value` in a call.
    pub name: &'static str,
    /// Its dimension.
    pub kind: Type,
    /// Its value in SI when left out. NaN: it is not there then, and the
    /// function is called with the arguments before it alone.
    pub default: Option<f64>,
    /// What it is, with its range.
    pub about: &'static str,
}

/// The dimension of an argument or a result, possibly in terms of the
/// dimensions of the arguments: `sqrt` takes `A` and gives `A^(1/2)`.
#[derive(Clone, Copy)]
pub struct Type {
    /// The fixed part.
    pub dimension: Dimension,
    /// A dimension variable of this signature and its exponent.
    pub variable: Option<(u8, Exponent)>,
    /// The frame is open: it fits the frame met, afresh at each use.
    pub open: bool,
}

/// How an entry is computed.
#[derive(Clone, Copy)]
pub enum Definition {
    /// A fixed value in SI; written without brackets. The second number is the
    /// standard uncertainty, 0 where exact.
    Constant(f64, f64),
    /// A value that depends on the model in force; written without brackets.
    ModelValue(fn(&Model) -> Result<f64, DomainError>),
    /// A function of its arguments alone.
    Function(fn(&[f64]) -> Result<f64, DomainError>),
    /// A function of the model in force and its arguments.
    Cosmology(fn(&Model, &[f64]) -> Result<f64, DomainError>),
}

impl Type {
    /// A fixed dimension.
    #[must_use]
    pub const fn of(dimension: Dimension) -> Type {
        Type {
            dimension,
            variable: None,
            open: false,
        }
    }

    /// A fixed dimension whose frame is open.
    #[must_use]
    pub const fn open(dimension: Dimension) -> Type {
        Type {
            dimension,
            variable: None,
            open: true,
        }
    }

    /// Any dimension: variable number `index` of the signature.
    #[must_use]
    pub const fn any(index: u8) -> Type {
        Type {
            dimension: NUMBER,
            variable: Some((index, Ratio::new_raw(1, 1))),
            open: false,
        }
    }

    /// A power of variable number `index`.
    #[must_use]
    pub const fn power(index: u8, numerator: i32, denominator: i32) -> Type {
        let exponent = Ratio::new_raw(numerator, denominator);
        Type {
            dimension: NUMBER,
            variable: Some((index, exponent)),
            open: false,
        }
    }
}

/// An argument that must be given.
#[must_use]
pub const fn argument(name: &'static str, kind: Type, about: &'static str) -> Argument {
    Argument {
        name,
        kind,
        default: None,
        about,
    }
}

/// An argument with a default, in SI.
#[must_use]
pub const fn optional(name: &'static str, kind: Type, default: f64, about: &'static str) -> Argument {
    Argument {
        name,
        kind,
        default: Some(default),
        about,
    }
}

impl Entry {
    /// Whether it is written with brackets, `name(…)`.
    #[must_use]
    pub fn is_function(&self) -> bool {
        matches!(
            self.definition,
            Definition::Function(_) | Definition::Cosmology(_)
        )
    }

    /// Every spelling under which the language knows it.
    pub fn spellings(&self) -> impl Iterator<Item = &'static str> + '_ {
        std::iter::once(self.name)
            .chain((!self.symbol.is_empty()).then_some(self.symbol))
            .chain(self.aliases.iter().copied())
    }
}

/// All entries, in the order of the handbook.
pub fn entries() -> impl Iterator<Item = &'static Entry> {
    let chapters = constants::ENTRIES
        .into_iter()
        .chain(mathematics::ENTRIES)
        .chain(cosmology::ENTRIES)
        .chain([redshift::ENTRIES]);
    chapters.flatten()
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::HashMap;

    #[test]
    fn no_two_entries_share_a_spelling() {
        let mut owners = HashMap::new();
        for entry in entries() {
            for spelling in entry.spellings() {
                // A value and a function of one spelling live side by side.
                if let Some(other) = owners.insert((spelling, entry.is_function()), entry.name) {
                    panic!("`{spelling}` is both {other} and {}", entry.name);
                }
            }
        }
    }

    #[test]
    fn every_entry_says_what_it_is_and_where_it_comes_from() {
        for entry in entries() {
            assert!(
                entry.about.ends_with('.'),
                "{}: about is one sentence",
                entry.name
            );
            assert!(!entry.source.is_empty(), "{} has no source", entry.name);
            assert!(!entry.example.is_empty(), "{} has no example", entry.name);
        }
    }
}
