//! The factor 1+z, refused where there is no such redshift.
//!
//! The library's own formulas use it wherever no distance or rate would refuse
//! a redshift of −1 or less for them.

use crate::catalogue::{Definition, Entry, Topic, Type, argument};
use crate::dimension::NUMBER;
use crate::model::DomainError;

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[Entry {
    name: "redshift_factor",
    symbol: "",
    aliases: &[],
    synonyms: &["1+z", "stretching of light", "time dilation"],
    topic: Topic::Light,
    about: "The factor 1 + z by which wavelengths and durations grow on their way from redshift z.",
    arguments: &[argument("z", Type::of(NUMBER), "redshift, -1 < z")],
    result: Type::open(NUMBER),
    open_today: false,
    usual_unit: "",
    formula: "1 + z",
    validity: "z > −1",
    source: "Hogg 1999, astro-ph/9905116, sec. 2",
    example: "redshift_factor(7.085) is 8.085",
    definition: Definition::Function(redshift_factor),
}];

fn redshift_factor(x: &[f64]) -> Result<f64, DomainError> {
    let z = x[0];
    if z > -1.0 {
        return Ok(1.0 + z);
    }
    let sentence = format!("a redshift is greater than -1, and this is {z}");
    Err(DomainError(sentence.into()))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn there_is_no_redshift_of_minus_one_or_less() {
        assert_eq!(redshift_factor(&[-0.5]), Ok(0.5));
        for bad in [-1.0, -2.0, f64::NEG_INFINITY, f64::NAN] {
            assert!(redshift_factor(&[bad]).is_err());
        }
    }
}
