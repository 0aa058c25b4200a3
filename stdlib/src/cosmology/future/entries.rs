//! The entries of this chapter.

use crate::catalogue::{Definition, Entry, Type, argument};
use crate::cosmology::template::{BLANK, PROPER_LENGTH, TIME_TYPE, number_of};
use crate::cosmology::time;
use crate::dimension::RATE;

const FRIEDMANN: &str = "Friedmann 1922, Z. Phys. 10, 377";

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[
    Entry {
        name: "scale_factor_at",
        synonyms: &["future", "size of the universe"],
        about: "Size of the universe at a time since the big bang, 1 today; through turnaround and collapse if need be.",
        arguments: &[argument("t", TIME_TYPE, "cosmic time, 0 < t")],
        formula: "age(1/a − 1) = t",
        validity: "models with a big bang",
        source: FRIEDMANN,
        example: "scale_factor_at(20 Gyr) under concordance is 1.544670",
        definition: Definition::Cosmology(|model, x| model.scale_factor_at(time(x[0]))),
        ..BLANK
    },
    Entry {
        name: "z_turnaround",
        aliases: &["z_turn"],
        synonyms: &["recollapse", "big crunch", "future"],
        about: "Redshift, negative, at which the expansion turns into collapse.",
        formula: "E(z) = 0, z < 0",
        validity: "models that recollapse",
        source: FRIEDMANN,
        example: "z_turnaround under general with H0 = 70 km/s/Mpc, Ωm = 2, ΩΛ = 0 is -0.500000",
        definition: Definition::ModelValue(|model| number_of(model.turnaround())),
        ..BLANK
    },
    Entry {
        name: "turnaround_time",
        synonyms: &["recollapse", "big crunch", "future"],
        about: "Time since the big bang at which the expansion turns into collapse.",
        result: TIME_TYPE,
        usual_unit: "Gyr",
        formula: "age(z_turnaround)",
        validity: "models that recollapse",
        source: FRIEDMANN,
        example: "turnaround_time under general with H0 = 70 km/s/Mpc, Ωm = 2, ΩΛ = 0 is 43.883212 Gyr",
        definition: Definition::ModelValue(|model| Ok(model.turnaround_time()?.value)),
        ..BLANK
    },
    Entry {
        name: "big_crunch_time",
        synonyms: &["recollapse", "end of the universe", "future"],
        about: "Time since the big bang at which a recollapsing model ends.",
        result: TIME_TYPE,
        usual_unit: "Gyr",
        formula: "2 turnaround_time",
        validity: "models that recollapse",
        source: FRIEDMANN,
        example: "big_crunch_time under general with H0 = 70 km/s/Mpc, Ωm = 2, ΩΛ = 0 is 87.766425 Gyr",
        definition: Definition::ModelValue(|model| Ok(model.big_crunch_time()?.value)),
        ..BLANK
    },
    Entry {
        name: "big_rip_time",
        synonyms: &["phantom energy", "end of the universe", "future"],
        about: "Time from today until phantom dark energy makes the scale factor infinite.",
        result: TIME_TYPE,
        usual_unit: "Gyr",
        formula: "∫_{−1}^0 dz/((1+z) H(z))",
        validity: "models with w < −1 in the far future",
        source: "Caldwell, Kamionkowski & Weinberg 2003, PRL 91, 071301",
        example: "big_rip_time under flat with H0 = 70 km/s/Mpc, Ωm = 0.3, w0 = -1.5 is 21.674631 Gyr",
        definition: Definition::ModelValue(|model| Ok(model.big_rip_time()?.value)),
        ..BLANK
    },
    Entry {
        name: "hubble_rate_limit",
        symbol: "H_∞",
        aliases: &["H_inf"],
        synonyms: &["de Sitter", "future"],
        about: "The constant expansion rate that the far future approaches.",
        result: Type::open(RATE),
        usual_unit: "km/s/Mpc",
        formula: "H0 √ΩΛ",
        validity: "models that expand for ever with a cosmological constant",
        source: "de Sitter 1917, MNRAS 78, 3",
        example: "hubble_rate_limit under concordance is 58.566202 km/s/Mpc",
        definition: Definition::ModelValue(|model| Ok(model.hubble_rate_limit()?.value)),
        ..BLANK
    },
    Entry {
        name: "event_horizon_limit",
        synonyms: &["de Sitter", "horizon", "future"],
        about: "Proper radius of the event horizon that the far future approaches.",
        result: PROPER_LENGTH,
        usual_unit: "Gly",
        formula: "c/(H0 √ΩΛ)",
        validity: "models that expand for ever with a cosmological constant",
        source: "de Sitter 1917, MNRAS 78, 3",
        example: "event_horizon_limit under concordance is 16.695503 Gly",
        definition: Definition::ModelValue(|model| Ok(model.event_horizon_limit()?.value)),
        ..BLANK
    },
];
