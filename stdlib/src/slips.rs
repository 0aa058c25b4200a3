//! How a quoted number goes wrong: the catalogue of known slips, as data.
//!
//! Each row names one mistake, says how common it is beside the others, where
//! it can have been made, and what it does: to the functions that were called,
//! to the model, to the result, or to the digits as they were copied. `lang`
//! makes the mistake in the claim's own expression; nothing here computes.
//!
//! Weights are a judgement, in parts of a thousand: a slip of weight 20 is met
//! twice as often as one of weight 10. A group of rows that differ in a number
//! alone (the values of `H0`, the published models) shares one weight.

mod factors;
mod functions;
mod models;

use crate::catalogue::Entry;
use crate::dimension::{Dimension, Generator};
use crate::model::{Base, Model, ParameterId, Setting};

/// One known mistake.
pub struct Slip {
    /// Its stable name; rows that differ in a number share it.
    pub key: &'static str,
    /// What was done, as it stands after “would follow from”.
    pub about: &'static str,
    /// How common it is, in parts of a thousand.
    pub weight: f64,
    /// The dimensions of a result in which it can have been made.
    pub befalls: fn(&Dimension) -> bool,
    /// Functions, of which the expression calls one; any expression where
    /// there are none.
    pub functions: &'static [&'static str],
    /// What it does.
    pub mistake: Mistake,
}

/// What a slip does.
#[derive(Clone, Copy)]
pub enum Mistake {
    /// One function of the library was taken for another, by their names.
    Function {
        /// What should have been called.
        of: &'static str,
        /// What was called instead, with the same arguments.
        instead: &'static str,
    },
    /// A function was replaced by a formula that does not hold there.
    Formula {
        /// What should have been called.
        of: &'static str,
        /// With how many arguments.
        arguments: usize,
        /// The formula, as an entry that no catalogue lists.
        instead: &'static Entry,
    },
    /// Another model; none where the mistake changes nothing.
    Model(fn(&Model) -> Option<Other>),
    /// A value given to one parameter.
    Parameter(ParameterId, f64),
    /// A published model taken for the one in force.
    Base(&'static Base),
    /// Times (1+z) to this power; magnitudes change by 2.5 log10 of it.
    Stretch(i32),
    /// Times (1+z) to this power, once for each length in the dimension.
    StretchOfLengths(i32),
    /// Times h to this power; magnitudes change by 2.5 log10 of it.
    LittleH(i32),
    /// Times a number.
    Factor(f64),
    /// Times a number, once for each power of a generator in the dimension.
    FactorPer(Generator, f64),
    /// The sign of what stands beside 1 in the exponent of (1+z).
    ExponentSign,
    /// A number added, in SI.
    Shift(f64),
    /// The number quoted is a power of what it should be, in the unit quoted.
    Power(Algebra),
    /// The digits were not copied right.
    Digits(Copying),
    /// A named value was rounded to this many digits before it was used.
    Rounded(u32),
}

/// Plain algebra gone wrong.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Algebra {
    /// 1/x for x.
    Inverse,
    /// √x for x.
    Root,
    /// x² for x.
    Square,
}

/// How digits are miscopied.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Copying {
    /// Two neighbours changed places.
    Transposed,
    /// One digit is another one.
    OneWrong,
    /// Cut off where it should have been rounded.
    Truncated,
}

/// A model made by mistake: a base and what it is given.
pub struct Other {
    /// Where it starts from.
    pub base: &'static Base,
    /// What it is given, in SI.
    pub settings: Vec<(ParameterId, Setting)>,
}

/// The tables of the catalogue, in the order of their chapters.
pub fn slips() -> impl Iterator<Item = &'static Slip> {
    [functions::SLIPS, models::SLIPS, factors::SLIPS]
        .into_iter()
        .flatten()
}

/// H0/(100 km/s/Mpc) of a model.
#[must_use]
pub fn little_h(model: &Model) -> f64 {
    model.budget().h
}

/// Whether an argument or a name of the sheet is called like a redshift.
#[must_use]
pub fn is_redshift(name: &str) -> bool {
    let rest = name.strip_prefix('z').unwrap_or("?");
    rest.is_empty() || rest.starts_with(|next: char| next == '_' || next.is_ascii_digit())
}

fn anything(_: &Dimension) -> bool {
    true
}

fn power_of(dimension: &Dimension, generator: Generator) -> i32 {
    let power = dimension.exponent(generator);
    if *power.denom() == 1 { *power.numer() } else { 0 }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::catalogue::entries;

    #[test]
    fn every_function_that_is_mistaken_is_in_the_library() {
        let known = |name: &str| entries().any(|entry| entry.name == name);
        for slip in slips() {
            let names = if let Mistake::Function { of, instead } = slip.mistake {
                vec![of, instead]
            } else if let Mistake::Formula { of, .. } = slip.mistake {
                vec![of]
            } else {
                Vec::new()
            };
            assert!(names.into_iter().all(known), "{}", slip.key);
            let written = |name: &&str| crate::prelude::written().iter().any(|one| one.name == *name);
            let any = slip.functions.iter().all(|name| known(name) || written(name));
            assert!(any, "{}: {:?}", slip.key, slip.functions);
        }
    }

    #[test]
    fn every_slip_can_be_said_after_would_follow_from() {
        for slip in slips() {
            assert!(slip.weight > 0.0, "{}", slip.key);
            assert!(
                !slip.about.is_empty() && !slip.about.ends_with('.'),
                "{}",
                slip.key
            );
            assert!(!slip.key.contains(' '), "{}", slip.key);
        }
    }

    #[test]
    fn names_of_redshifts_are_known() {
        assert!(["z", "z_s", "z1", "z_obs"].into_iter().all(is_redshift));
        assert!(!["zeta", "x", "az", ""].into_iter().any(is_redshift));
    }
}
