//! The entries of this chapter.

use crate::catalogue::{Argument, Definition, Entry, Topic, Type, argument, optional};
use crate::cosmology::template::{
    BLANK, COMOVING_LENGTH, NUMBER_TYPE, PROPER_LENGTH, TIME_TYPE, Z, Z_OR_TODAY, Z_SEEN, number_of, redshift,
};
use crate::cosmology::{Found, length, time};
use crate::dimension::{ANGLE, LENGTH, MAGNITUDE, SOLID_ANGLE, VOLUME};
use crate::model::Model;

const CHAPTER: Entry = Entry {
    topic: Topic::Distances,
    ..BLANK
};

/// A second redshift that may be left out: not a number then.
const ONE_OR_TWO: &[Argument] = &[
    argument(
        "z1",
        NUMBER_TYPE,
        "redshift of the object; with z2, of the nearer end",
    ),
    optional(
        "z2",
        NUMBER_TYPE,
        f64::NAN,
        "redshift of the farther end, z1 ≤ z2",
    ),
];

const LENS_AND_SOURCE: &[Argument] = &[
    argument("z_l", NUMBER_TYPE, "redshift of the lens, 0 < z_l"),
    argument("z_s", NUMBER_TYPE, "redshift of the source, z_l < z_s"),
];

const COMOVING_VOLUME: Type = Type::of(VOLUME.comoving());
const VOLUME_PER_SR: Type = Type::of(VOLUME.comoving().per(SOLID_ANGLE));
const SPHERE_SR: f64 = 4.0 * std::f64::consts::PI;

fn angular_diameter(model: &Model, x: &[f64]) -> Found<f64> {
    let z1 = redshift(x, 0)?;
    let distance = if x.len() < 2 {
        model.angular_diameter_distance(z1)?
    } else {
        model.angular_diameter_distance_between(z1, redshift(x, 1)?)?
    };
    Ok(distance.value)
}

fn volume(model: &Model, x: &[f64]) -> Found<f64> {
    let z1 = redshift(x, 0)?;
    let volume = if x.len() < 2 {
        model.comoving_volume(z1)?
    } else {
        model.comoving_volume_between(z1, redshift(x, 1)?)?
    };
    Ok(volume.value)
}

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[
    Entry {
        name: "comoving_distance",
        symbol: "D_C",
        synonyms: &["how far", "distance", "line of sight"],
        about: "Comoving distance along the line of sight to redshift z.",
        arguments: Z,
        result: COMOVING_LENGTH,
        usual_unit: "Mpc",
        formula: "D_C = (c/H0) ∫₀ᶻ dz′/E(z′)",
        source: "Hogg 1999, astro-ph/9905116, eq. 15",
        example: "D_C(3) under flat with H0 = 70 km/s/Mpc, Ωm = 1 is 4282.75 Mpc",
        definition: Definition::Cosmology(|model, x| Ok(model.comoving_distance(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "transverse_comoving_distance",
        symbol: "D_M",
        synonyms: &["proper motion distance", "distance"],
        about: "Comoving distance across the line of sight: comoving size over angle.",
        arguments: Z,
        result: COMOVING_LENGTH,
        usual_unit: "Mpc",
        formula: "D_M = (c/H0) sinh(√Ωk D_C H0/c)/√Ωk; D_C in flat space; sin for Ωk < 0",
        source: "Hogg 1999, astro-ph/9905116, eq. 16",
        example: "D_M(1) under milne is 3212.0621 Mpc",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.transverse_comoving_distance(redshift(x, 0)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "angular_diameter_distance",
        symbol: "D_A",
        synonyms: &["distance", "size and angle", "lensing distance"],
        about: "Angular-diameter distance: proper size over angle; D_A(z1, z2) from z1 to z2 behind it.",
        arguments: ONE_OR_TWO,
        result: PROPER_LENGTH,
        usual_unit: "Mpc",
        formula: "D_A(z) = D_M/(1+z); D_A(z1, z2) = D_M(z1 to z2)/(1+z2)",
        validity: "z1 ≤ z2 where both are given",
        source: "Hogg 1999, astro-ph/9905116, eq. 18 and 19",
        example: "D_A(0.5, 2) under concordance is 1097.0789 Mpc",
        definition: Definition::Cosmology(angular_diameter),
        ..CHAPTER
    },
    Entry {
        name: "luminosity_distance",
        symbol: "D_L",
        synonyms: &["distance", "brightness"],
        about: "Luminosity distance: flux is luminosity over 4π D_L².",
        arguments: Z,
        result: PROPER_LENGTH,
        usual_unit: "Mpc",
        formula: "D_L = (1+z) D_M",
        source: "Hogg 1999, astro-ph/9905116, eq. 21",
        example: "D_L(1) under concordance is 6607.6576 Mpc",
        definition: Definition::Cosmology(|model, x| Ok(model.luminosity_distance(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "distance_modulus",
        symbol: "μ",
        aliases: &["mu"],
        synonyms: &["magnitude"],
        about: "Distance modulus: apparent less absolute magnitude, before any K correction.",
        arguments: &[argument("z", NUMBER_TYPE, "redshift, 0 < z")],
        result: Type::of(MAGNITUDE),
        usual_unit: "mag",
        formula: "μ = 5 log₁₀(D_L/10 pc)",
        validity: "z > 0",
        source: "Hogg 1999, astro-ph/9905116, eq. 25",
        example: "μ(1) under concordance is 44.1002 mag",
        definition: Definition::Cosmology(|model, x| model.distance_modulus(redshift(x, 0)?)),
        ..CHAPTER
    },
    Entry {
        name: "volume_averaged_distance",
        symbol: "D_V",
        synonyms: &["BAO", "baryon acoustic oscillations"],
        about: "Volume-averaged distance of isotropic baryon acoustic oscillations.",
        arguments: Z_SEEN,
        result: COMOVING_LENGTH,
        usual_unit: "Mpc",
        formula: "D_V = (z D_H(z) D_M²)^(1/3)",
        validity: "z ≥ 0",
        source: "Eisenstein et al. 2005, ApJ 633, 560, eq. 2",
        example: "D_V(0.5) under concordance is 1800.4857 Mpc",
        definition: Definition::Cosmology(|model, x| Ok(model.volume_distance(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "hubble_distance",
        symbol: "D_H",
        synonyms: &["BAO", "Hubble length"],
        about: "Comoving Hubble distance at redshift z: dD_C/dz.",
        arguments: Z_OR_TODAY,
        result: COMOVING_LENGTH,
        open_today: true,
        usual_unit: "Mpc",
        formula: "D_H(z) = c/H(z)",
        source: "DESI Collaboration 2025, arXiv:2503.14738, sec. II; Hogg 1999, astro-ph/9905116, eq. 4, for today",
        example: "D_H(1) under concordance is 2432.4382 Mpc",
        definition: Definition::Cosmology(|model, x| Ok(model.hubble_distance(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "alcock_paczynski",
        symbol: "F_AP",
        synonyms: &["BAO"],
        about: "Alcock–Paczyński parameter: width over depth of a sphere, times z.",
        arguments: Z,
        formula: "F_AP = D_M/D_H(z)",
        source: "Alcock & Paczyński 1979, Nature 281, 358",
        example: "F_AP(1) under concordance is 1.358238",
        definition: Definition::Cosmology(|model, x| model.alcock_paczynski(redshift(x, 0)?)),
        ..CHAPTER
    },
    Entry {
        name: "time_delay_distance",
        symbol: "D_Δt",
        aliases: &["D_dt"],
        synonyms: &["lensing", "time delay"],
        about: "Time-delay distance of a gravitational lens.",
        arguments: LENS_AND_SOURCE,
        result: PROPER_LENGTH,
        usual_unit: "Mpc",
        formula: "D_Δt = (1+z_l) D_A(z_l) D_A(z_s)/D_A(z_l, z_s)",
        validity: "0 < z_l < z_s",
        source: "Suyu et al. 2010, ApJ 711, 201, eq. 6",
        example: "time_delay_distance(0.5, 2) under concordance is 2972.3839 Mpc",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.time_delay_distance(redshift(x, 0)?, redshift(x, 1)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "comoving_volume",
        symbol: "V_C",
        synonyms: &["survey volume", "volume"],
        about: "Comoving volume over the whole sky within redshift z1, or between z1 and z2.",
        arguments: ONE_OR_TWO,
        result: COMOVING_VOLUME,
        usual_unit: "Gpc^3",
        formula: "V_C = (4π/3) D_C³ in flat space; 4π ∫ D_M² dD_C in any",
        validity: "0 ≤ z1 ≤ z2",
        source: "Hogg 1999, astro-ph/9905116, eq. 29",
        example: "comoving_volume(1) under concordance is 151.05713 Gpc^3",
        definition: Definition::Cosmology(volume),
        ..CHAPTER
    },
    Entry {
        name: "comoving_volume_per_sr",
        synonyms: &["survey volume", "solid angle"],
        about: "Comoving volume per steradian of sky within redshift z1, or between z1 and z2.",
        arguments: ONE_OR_TWO,
        result: VOLUME_PER_SR,
        usual_unit: "Gpc^3/sr",
        formula: "V_C/(4π sr)",
        validity: "0 ≤ z1 ≤ z2",
        source: "Hogg 1999, astro-ph/9905116, eq. 29",
        example: "comoving_volume_per_sr(0.5, 1) under concordance is 9.775228 Gpc^3/sr",
        definition: Definition::Cosmology(|model, x| Ok(volume(model, x)? / SPHERE_SR)),
        ..CHAPTER
    },
    Entry {
        name: "differential_comoving_volume",
        symbol: "dV_C",
        synonyms: &["volume element", "survey volume"],
        about: "Comoving volume per unit redshift and steradian.",
        arguments: Z,
        result: VOLUME_PER_SR,
        usual_unit: "Gpc^3/sr",
        formula: "dV_C/dz/dΩ = D_H(z) D_M²",
        source: "Hogg 1999, astro-ph/9905116, eq. 28",
        example: "differential_comoving_volume(1) under concordance is 26.550756 Gpc^3/sr",
        definition: Definition::Cosmology(|model, x| Ok(model.differential_volume(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "angular_scale",
        synonyms: &["plate scale", "kpc per arcsec", "size and angle"],
        about: "Proper length per angle on the sky at redshift z.",
        arguments: Z,
        result: Type::of(LENGTH.per(ANGLE)),
        usual_unit: "kpc/arcsec",
        formula: "D_A(z) per radian",
        source: "Hogg 1999, astro-ph/9905116, eq. 18",
        example: "angular_scale(1) under concordance is 8.008707 kpc/arcsec",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.angular_diameter_distance(redshift(x, 0)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "proper_distance",
        synonyms: &["how far", "distance today"],
        about: "Proper distance today to what is seen at redshift z.",
        arguments: Z,
        result: PROPER_LENGTH,
        usual_unit: "Gly",
        formula: "(c/H0) ∫₀ᶻ dz′/E(z′)",
        source: "Davis & Lineweaver 2004, PASA 21, 97, appendix A",
        example: "proper_distance(1) under concordance is 10.775648 Gly",
        definition: Definition::Cosmology(|model, x| Ok(model.proper_distance(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "proper_distance_then",
        synonyms: &["how far", "distance at emission"],
        about: "Proper distance of what is seen at redshift z when it emitted the light.",
        arguments: Z,
        result: PROPER_LENGTH,
        usual_unit: "Gly",
        formula: "D_C/(1+z)",
        source: "Davis & Lineweaver 2004, PASA 21, 97, appendix A",
        example: "proper_distance_then(1) under concordance is 5.387824 Gly",
        definition: Definition::Cosmology(|model, x| Ok(model.proper_distance_then(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "redshift_of_age",
        symbol: "z_of_age",
        synonyms: &["inverse"],
        about: "Redshift at a time since the big bang.",
        arguments: &[argument("t", TIME_TYPE, "cosmic time, 0 < t")],
        formula: "age(z) = t",
        validity: "models with a big bang",
        source: "Hogg 1999, astro-ph/9905116, sec. 10",
        example: "redshift_of_age(1 Gyr) under concordance is 5.606047",
        definition: Definition::Cosmology(|model, x| number_of(model.redshift_of_age(time(x[0])))),
        ..CHAPTER
    },
    Entry {
        name: "redshift_of_lookback",
        symbol: "z_of_t_L",
        synonyms: &["inverse"],
        about: "Redshift of light that has travelled a given time; negative times are in the future.",
        arguments: &[argument("t", TIME_TYPE, "lookback time")],
        formula: "lookback_time(z) = t",
        source: "Hogg 1999, astro-ph/9905116, eq. 30",
        example: "redshift_of_lookback(10 Gyr) under concordance is 1.855593",
        definition: Definition::Cosmology(|model, x| number_of(model.redshift_of_lookback(time(x[0])))),
        ..CHAPTER
    },
    Entry {
        name: "redshift_of_D_C",
        aliases: &["redshift_of_comoving_distance"],
        synonyms: &["inverse"],
        about: "Redshift at a comoving distance; negative distances are in the future.",
        arguments: &[argument("d", COMOVING_LENGTH, "comoving distance")],
        formula: "D_C(z) = d",
        source: "Hogg 1999, astro-ph/9905116, eq. 15",
        example: "redshift_of_D_C(5 Gpc) under concordance is 1.878892",
        definition: Definition::Cosmology(|model, x| {
            number_of(model.redshift_of_comoving_distance(length(x[0])))
        }),
        ..CHAPTER
    },
    Entry {
        name: "redshift_of_D_L",
        aliases: &["redshift_of_luminosity_distance"],
        synonyms: &["inverse", "standard siren", "standard candle"],
        about: "The lowest redshift with a given luminosity distance.",
        arguments: &[argument("d", PROPER_LENGTH, "luminosity distance, 0 < d")],
        formula: "D_L(z) = d",
        source: "Hogg 1999, astro-ph/9905116, eq. 21",
        example: "redshift_of_D_L(10 Gpc) under concordance is 1.397901",
        definition: Definition::Cosmology(|model, x| {
            number_of(model.redshift_of_luminosity_distance(length(x[0])))
        }),
        ..CHAPTER
    },
    Entry {
        name: "redshift_of_distance_modulus",
        aliases: &["redshift_of_μ", "redshift_of_mu"],
        synonyms: &["inverse", "supernova"],
        about: "The lowest redshift with a given distance modulus.",
        arguments: &[argument("mu", Type::of(MAGNITUDE), "distance modulus")],
        formula: "μ(z) = mu",
        source: "Hogg 1999, astro-ph/9905116, eq. 25",
        example: "redshift_of_distance_modulus(44 mag) under concordance is 0.963339",
        definition: Definition::Cosmology(|model, x| number_of(model.redshift_of_distance_modulus(x[0]))),
        ..CHAPTER
    },
    Entry {
        name: "redshift_of_D_A",
        aliases: &["redshift_of_angular_diameter_distance"],
        synonyms: &["inverse"],
        about: "Redshift with a given angular-diameter distance, the nearer of two.",
        arguments: &[argument(
            "d",
            PROPER_LENGTH,
            "angular-diameter distance, 0 < d ≤ D_A_max",
        )],
        formula: "D_A(z) = d, z ≤ z_D_A_max",
        source: "Hogg 1999, astro-ph/9905116, eq. 18",
        example: "redshift_of_D_A(1 Gpc) under concordance is 0.340115",
        definition: Definition::Cosmology(|model, x| {
            number_of(model.redshift_of_angular_diameter_distance(length(x[0])))
        }),
        ..CHAPTER
    },
    Entry {
        name: "far_redshift_of_D_A",
        aliases: &["far_redshift_of_angular_diameter_distance"],
        synonyms: &["inverse"],
        about: "Redshift with a given angular-diameter distance, the farther of two.",
        arguments: &[argument(
            "d",
            PROPER_LENGTH,
            "angular-diameter distance, 0 < d ≤ D_A_max",
        )],
        formula: "D_A(z) = d, z ≥ z_D_A_max",
        source: "Hogg 1999, astro-ph/9905116, eq. 18",
        example: "far_redshift_of_D_A(1 Gpc) under concordance is 7.919886",
        definition: Definition::Cosmology(|model, x| {
            number_of(model.far_redshift_of_angular_diameter_distance(length(x[0])))
        }),
        ..CHAPTER
    },
    Entry {
        name: "z_D_A_max",
        aliases: &["z_DA_max"],
        synonyms: &["smallest angle"],
        about: "Redshift of the largest angular-diameter distance: there an object looks smallest.",
        formula: "dD_A/dz = 0; 5/4 in an Einstein–de Sitter universe",
        source: "Hoyle 1959, IAU Symp. 9, 529",
        example: "z_D_A_max under einstein_de_sitter is 1.25",
        definition: Definition::ModelValue(|model| number_of(model.angular_diameter_peak())),
        ..CHAPTER
    },
    Entry {
        name: "D_A_max",
        synonyms: &["smallest angle"],
        about: "The largest angular-diameter distance.",
        result: PROPER_LENGTH,
        usual_unit: "Mpc",
        formula: "D_A(z_D_A_max); (8/27) c/H0 in an Einstein–de Sitter universe",
        source: "Hoyle 1959, IAU Symp. 9, 529",
        example: "D_A_max under concordance is 1747.5719 Mpc",
        definition: Definition::ModelValue(|model| {
            Ok(model
                .angular_diameter_distance(model.angular_diameter_peak()?)?
                .value)
        }),
        ..CHAPTER
    },
];
