//! The entries of this chapter.

use crate::catalogue::{Definition, Entry, Topic};
use crate::cosmology::template::{BLANK, Z, Z_OR_TODAY, redshift};

const CHAPTER: Entry = Entry {
    topic: Topic::Structure,
    ..BLANK
};
const PEEBLES: &str =
    "Peebles 1980, The Large-Scale Structure of the Universe, sec. 10; Mészáros 1974, A&A 37, 225";

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[
    Entry {
        name: "growth_factor",
        symbol: "D",
        synonyms: &["structure growth", "linear growth"],
        about: "Linear growth of the density contrast of cold matter, 1 today.",
        arguments: Z,
        formula: "D″ + (1 − q) D′ = (3/2) Ωcb(a) D, ′ = d/d ln a",
        validity: "models with cold matter and a big bang; 1 + z ≤ 1e10",
        source: PEEBLES,
        example: "D(1) under concordance is 0.611806",
        definition: Definition::Cosmology(|model, x| model.growth_factor(redshift(x, 0)?)),
        ..CHAPTER
    },
    Entry {
        name: "growth_rate",
        symbol: "f",
        synonyms: &["structure growth", "redshift-space distortions"],
        about: "Logarithmic growth rate of the density contrast of cold matter.",
        arguments: Z_OR_TODAY,
        formula: "f = d ln D/d ln a",
        validity: "models with cold matter and a big bang; 1 + z ≤ 1e10",
        source: PEEBLES,
        example: "f(0) under concordance is 0.512796",
        definition: Definition::Cosmology(|model, x| model.growth_rate(redshift(x, 0)?)),
        ..CHAPTER
    },
    Entry {
        name: "growth_suppression",
        synonyms: &["structure growth"],
        about: "Growth relative to that in a universe of matter alone, 1 in the era of matter.",
        arguments: Z_OR_TODAY,
        formula: "D/a, normalised to 1 in the era of matter",
        validity: "models with cold matter and a big bang; 1 + z ≤ 1e10",
        source: "Carroll, Press & Turner 1992, ARA&A 30, 499, eq. 29",
        example: "growth_suppression(0) under concordance is 0.77898",
        definition: Definition::Cosmology(|model, x| model.growth_suppression(redshift(x, 0)?)),
        ..CHAPTER
    },
    Entry {
        name: "sigma8_at",
        symbol: "σ8",
        aliases: &["sigma8"],
        synonyms: &["amplitude", "clustering"],
        about: "Linear rms density contrast in spheres of 8 Mpc/h at redshift z.",
        arguments: Z_OR_TODAY,
        formula: "σ8(z) = σ8 D(z)",
        validity: "models that give σ8",
        source: PEEBLES,
        example: "σ8(0) under planck2018 is 0.8111",
        definition: Definition::Cosmology(|model, x| model.sigma8_at(redshift(x, 0)?)),
        ..CHAPTER
    },
    Entry {
        name: "growth_of_structure",
        symbol: "fσ8",
        aliases: &["f_sigma8", "fsigma8"],
        synonyms: &["redshift-space distortions", "RSD"],
        about: "Growth rate times σ8 at redshift z, as redshift-space distortions measure it.",
        arguments: Z_OR_TODAY,
        formula: "fσ8 = f(z) σ8 D(z)",
        validity: "models that give σ8",
        source: "Song & Percival 2009, JCAP 10, 004",
        example: "fσ8(1) under flat with H0 = 70 km/s/Mpc, Ωm = 0.3, σ8 = 0.8 is 0.425467",
        definition: Definition::Cosmology(|model, x| {
            let z = redshift(x, 0)?;
            Ok(model.growth_rate(z)? * model.sigma8_at(z)?)
        }),
        ..CHAPTER
    },
];
