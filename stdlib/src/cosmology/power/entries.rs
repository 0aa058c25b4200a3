//! The entries of this chapter.

use crate::catalogue::{Argument, Definition, Entry, Topic, Type, argument, optional};
use crate::cosmology::power::wave_number_per_mpc;
use crate::cosmology::template::{BLANK, COMOVING_LENGTH, NUMBER_TYPE, redshift};
use crate::dimension::{VOLUME, WAVE_NUMBER};

const CHAPTER: Entry = Entry {
    topic: Topic::Structure,
    ..BLANK
};
const WAVE: Type = Type::of(WAVE_NUMBER.comoving());
const POWER: Type = Type::of(VOLUME.comoving());
const K: &[Argument] = &[argument("k", WAVE, "comoving wave number, 0 < k")];
const K_AND_Z: &[Argument] = &[
    argument("k", WAVE, "comoving wave number, 0 < k"),
    optional("z", NUMBER_TYPE, 0.0, "redshift; today when left out"),
];
const EISENSTEIN: &str = "Eisenstein & Hu 1998, ApJ 496, 605";
const NEEDS: &str = "models with baryons, dark matter and radiation; massive neutrinos count as cold matter";
const NEEDS_SIGMA8: &str =
    "models that give σ8, ns, baryons and T_CMB; massive neutrinos count as cold matter";

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[
    Entry {
        name: "transfer_function",
        symbol: "T",
        synonyms: &["power spectrum", "acoustic oscillations"],
        about: "Transfer function of matter, 1 on large scales, with acoustic oscillations.",
        arguments: K,
        formula: "T(k), eq. 16 to 24 of the source",
        validity: NEEDS,
        source: EISENSTEIN,
        example: "T(0.1 Mpc^-1) under planck2018 is 0.0838421",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.transfer_function()?.full(wave_number_per_mpc(x[0])?))
        }),
        ..CHAPTER
    },
    Entry {
        name: "transfer_function_smooth",
        symbol: "T_smooth",
        synonyms: &["power spectrum", "no wiggles"],
        about: "Transfer function of matter without acoustic oscillations.",
        arguments: K,
        formula: "T(k), eq. 26 to 31 of the source",
        validity: NEEDS,
        source: EISENSTEIN,
        example: "T_smooth(0.1 Mpc^-1) under planck2018 is 0.0831563",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.transfer_function()?.smooth(wave_number_per_mpc(x[0])?))
        }),
        ..CHAPTER
    },
    Entry {
        name: "linear_power",
        symbol: "P",
        synonyms: &["power spectrum", "clustering"],
        about: "Linear power spectrum of matter at comoving wave number k.",
        arguments: K_AND_Z,
        result: POWER,
        usual_unit: "Mpc^3",
        formula: "P = A kⁿˢ T²(k) D²(z), σ(8 Mpc/h) = σ8",
        validity: NEEDS_SIGMA8,
        source: EISENSTEIN,
        example: "P(0.1 Mpc^-1) under planck2018 is 10589.75 Mpc^3",
        definition: Definition::Cosmology(|model, x| Ok(model.linear_power(x[0], redshift(x, 1)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "linear_power_smooth",
        symbol: "P_smooth",
        synonyms: &["power spectrum", "no wiggles"],
        about: "Linear power spectrum of matter without acoustic oscillations.",
        arguments: K_AND_Z,
        result: POWER,
        usual_unit: "Mpc^3",
        formula: "P = A kⁿˢ T_smooth²(k) D²(z), A as for P",
        validity: NEEDS_SIGMA8,
        source: EISENSTEIN,
        example: "P(1 Mpc^-1)/P_smooth(1 Mpc^-1) under planck2018 is 1.01820",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.linear_power_smooth(x[0], redshift(x, 1)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "rms_contrast",
        symbol: "σ",
        aliases: &["sigma"],
        synonyms: &["σ8", "clustering", "mass variance"],
        about: "Linear rms density contrast in spheres of comoving radius R.",
        arguments: &[
            argument("R", COMOVING_LENGTH, "comoving radius, 1e-4 Mpc to 1e5 Mpc"),
            optional("z", NUMBER_TYPE, 0.0, "redshift; today when left out"),
        ],
        formula: "σ² = ∫ k³P/(2π²) W²(kR) d ln k, W(x) = 3 (sin x − x cos x)/x³",
        validity: NEEDS_SIGMA8,
        source: "Peebles 1980, The Large-Scale Structure of the Universe, sec. 26; Eisenstein & Hu 1998, ApJ 496, 605",
        example: "σ(8 Mpc/h) under planck2018 is 0.8111",
        definition: Definition::Cosmology(|model, x| model.rms_contrast(x[0], redshift(x, 1)?)),
        ..CHAPTER
    },
];
