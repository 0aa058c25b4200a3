//! The entries of this chapter.

use super::{Counts, Edge};
use crate::catalogue::{Argument, Definition, Entry, Topic, Type, argument, optional};
use crate::cosmology::template::{BLANK, COMOVING_LENGTH, NUMBER_TYPE, PROPER_LENGTH, Z_OR_TODAY, redshift};
use crate::dimension::{MASS, NUMBER_DENSITY, SPEED, TEMPERATURE};

const CHAPTER: Entry = Entry {
    topic: Topic::Structure,
    ..BLANK
};
const MASS_TYPE: Type = Type::of(MASS);
const COMOVING_DENSITY: Type = Type::of(NUMBER_DENSITY.comoving());
const TODAY: Argument = optional("z", NUMBER_TYPE, 0.0, "redshift; today when left out");
const M_AND_Z: &[Argument] = &[argument("M", MASS_TYPE, "mass of the halo, 0 < M"), TODAY];
const R_AND_Z: &[Argument] = &[argument("r", PROPER_LENGTH, "proper radius, 0 < r"), TODAY];
const OVERDENSITY: Argument = argument(
    "Delta",
    NUMBER_TYPE,
    "mean density over the critical density at z, 0 < Delta",
);
const BRYAN: &str = "Bryan & Norman 1998, ApJ 495, 80, eq. 6";
const NAVARRO: &str = "Navarro, Frenk & White 1997, ApJ 490, 493";
const FIT: &str = "Ωm(z) ≤ 1: flat with dark energy, or open without";
const NEEDS_SIGMA8: &str = "models that give σ8, ns, baryons and T_CMB";

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[
    Entry {
        name: "virial_overdensity",
        symbol: "Δ_vir",
        aliases: &["Delta_vir"],
        synonyms: &["halo", "collapse"],
        about: "Mean density of a virialised halo over the critical density at redshift z.",
        arguments: Z_OR_TODAY,
        formula: "18π² + 82x − 39x² with x = Ωm(z) − 1; without dark energy 18π² + 60x − 32x²",
        validity: FIT,
        source: BRYAN,
        example: "virial_overdensity(0) under concordance is 101.1429",
        definition: Definition::Cosmology(|model, x| model.virial_overdensity(redshift(x, 0)?)),
        ..CHAPTER
    },
    Entry {
        name: "halo_radius_200c",
        symbol: "r_200c",
        aliases: &["r_200"],
        synonyms: &["halo", "virial radius"],
        about: "Proper radius within which a halo of mass M has 200 times the critical density.",
        arguments: M_AND_Z,
        result: PROPER_LENGTH,
        usual_unit: "kpc",
        formula: "M = (4π/3) 200 ρ_c(z) r³",
        source: NAVARRO,
        example: "r_200c(1e12 Msun) under concordance is 206.28 kpc within 0.01%",
        definition: Definition::Cosmology(|model, x| {
            Ok(model
                .halo_radius(x[0], Edge::Critical(200.0), redshift(x, 1)?)?
                .value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "halo_radius_200m",
        symbol: "r_200m",
        synonyms: &["halo", "virial radius"],
        about: "Proper radius within which a halo of mass M has 200 times the mean density of matter.",
        arguments: M_AND_Z,
        result: PROPER_LENGTH,
        usual_unit: "kpc",
        formula: "M = (4π/3) 200 Ωm(z) ρ_c(z) r³",
        source: NAVARRO,
        example: "r_200m(1e12 Msun)/r_200c(1e12 Msun) under concordance is 1.493802",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.halo_radius(x[0], Edge::Mean(200.0), redshift(x, 1)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "virial_radius",
        symbol: "r_vir",
        synonyms: &["halo"],
        about: "Proper radius of a virialised halo of mass M.",
        arguments: M_AND_Z,
        result: PROPER_LENGTH,
        usual_unit: "kpc",
        formula: "M = (4π/3) Δ_vir(z) ρ_c(z) r³",
        validity: FIT,
        source: BRYAN,
        example: "r_vir(1e8 Msun/h, 9) [kpc/h for h] under einstein_de_sitter is 0.784 kpc/h within 0.2%",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.halo_radius(x[0], Edge::Virial, redshift(x, 1)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "halo_radius",
        synonyms: &["halo", "overdensity"],
        about: "Proper radius within which a halo of mass M has Delta times the critical density.",
        arguments: &[
            argument("M", MASS_TYPE, "mass of the halo, 0 < M"),
            OVERDENSITY,
            TODAY,
        ],
        result: PROPER_LENGTH,
        usual_unit: "kpc",
        formula: "M = (4π/3) Δ ρ_c(z) r³",
        source: NAVARRO,
        example: "halo_radius(1e12 Msun, 25)/halo_radius(1e12 Msun, 200) under concordance is 2.000",
        definition: Definition::Cosmology(|model, x| {
            Ok(model
                .halo_radius(x[0], Edge::Critical(x[1]), redshift(x, 2)?)?
                .value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "halo_mass_200c",
        symbol: "M_200c",
        aliases: &["M_200"],
        synonyms: &["halo", "virial mass"],
        about: "Mass within the proper radius r at 200 times the critical density.",
        arguments: R_AND_Z,
        result: MASS_TYPE,
        usual_unit: "Msun",
        formula: "M = (4π/3) 200 ρ_c(z) r³",
        source: NAVARRO,
        example: "M_200c(1 Mpc) under concordance is 1.13930e14 Msun within 0.01%",
        definition: Definition::Cosmology(|model, x| {
            model.halo_mass_kg(x[0], Edge::Critical(200.0), redshift(x, 1)?)
        }),
        ..CHAPTER
    },
    Entry {
        name: "halo_mass_200m",
        symbol: "M_200m",
        synonyms: &["halo", "virial mass"],
        about: "Mass within the proper radius r at 200 times the mean density of matter.",
        arguments: R_AND_Z,
        result: MASS_TYPE,
        usual_unit: "Msun",
        formula: "M = (4π/3) 200 Ωm(z) ρ_c(z) r³",
        source: NAVARRO,
        example: "M_200m(1 Mpc)/M_200c(1 Mpc) under concordance is 0.30",
        definition: Definition::Cosmology(|model, x| {
            model.halo_mass_kg(x[0], Edge::Mean(200.0), redshift(x, 1)?)
        }),
        ..CHAPTER
    },
    Entry {
        name: "halo_mass_vir",
        symbol: "M_vir",
        synonyms: &["halo", "virial mass"],
        about: "Mass of a virialised halo of proper radius r.",
        arguments: R_AND_Z,
        result: MASS_TYPE,
        usual_unit: "Msun",
        formula: "M = (4π/3) Δ_vir(z) ρ_c(z) r³",
        validity: FIT,
        source: BRYAN,
        example: "M_vir(r_vir(1e13 Msun, 2), 2) under concordance is 1.000e13 Msun",
        definition: Definition::Cosmology(|model, x| model.halo_mass_kg(x[0], Edge::Virial, redshift(x, 1)?)),
        ..CHAPTER
    },
    Entry {
        name: "halo_mass",
        synonyms: &["halo", "overdensity"],
        about: "Mass within the proper radius r at Delta times the critical density.",
        arguments: &[
            argument("r", PROPER_LENGTH, "proper radius, 0 < r"),
            OVERDENSITY,
            TODAY,
        ],
        result: MASS_TYPE,
        usual_unit: "Msun",
        formula: "M = (4π/3) Δ ρ_c(z) r³",
        source: NAVARRO,
        example: "halo_mass(1 Mpc, 500)/halo_mass(1 Mpc, 200) under concordance is 2.50",
        definition: Definition::Cosmology(|model, x| {
            model.halo_mass_kg(x[0], Edge::Critical(x[1]), redshift(x, 2)?)
        }),
        ..CHAPTER
    },
    Entry {
        name: "virial_speed",
        symbol: "V_vir",
        aliases: &["V_circ"],
        synonyms: &["halo", "circular speed", "circular velocity"],
        about: "Circular speed at the virial radius of a halo of mass M.",
        arguments: M_AND_Z,
        result: Type::of(SPEED),
        usual_unit: "km/s",
        formula: "V = √(G M/r_vir)",
        validity: FIT,
        source: "Barkana & Loeb 2001, Phys. Rep. 349, 125, eq. 25",
        example: "V_vir(1e8 Msun/h, 9) under einstein_de_sitter is 23.4 km/s",
        definition: Definition::Cosmology(|model, x| {
            Ok(model.halo_speed(x[0], Edge::Virial, redshift(x, 1)?)?.value)
        }),
        ..CHAPTER
    },
    Entry {
        name: "virial_temperature",
        symbol: "T_vir",
        synonyms: &["halo", "gas"],
        about: "Virial temperature of the gas in a halo of mass M.",
        arguments: &[
            argument("M", MASS_TYPE, "mass of the halo, 0 < M"),
            TODAY,
            optional(
                "mu",
                NUMBER_TYPE,
                0.59,
                "mean weight of a particle in units of the proton's; 0.59 ionised, 1.22 neutral",
            ),
        ],
        result: Type::of(TEMPERATURE),
        usual_unit: "K",
        formula: "T = μ m_p V²/(2k)",
        validity: FIT,
        source: "Barkana & Loeb 2001, Phys. Rep. 349, 125, eq. 26",
        example: "T_vir(1e8 Msun/h, 9, 0.6) under einstein_de_sitter is 1.98e4 K within 1%",
        definition: Definition::Cosmology(|model, x| model.virial_temperature_k(x[0], redshift(x, 1)?, x[2])),
        ..CHAPTER
    },
    Entry {
        name: "concentration_duffy2008",
        synonyms: &["halo", "NFW", "concentration"],
        about: "Concentration r_200c/r_s of a halo of mass M_200c, in simulations with the parameters of WMAP 5.",
        arguments: M_AND_Z,
        formula: "c = 5.71 (M/2e12 Msun/h)^−0.084 (1+z)^−0.47",
        validity: "1e11 to 1e15 Msun/h, z ≤ 2",
        source: "Duffy et al. 2008, MNRAS 390, L64, table 1 (from memory)",
        example: "concentration_duffy2008(2e12 Msun/h) under concordance is 5.71",
        definition: Definition::Cosmology(|model, x| model.concentration_duffy(x[0], redshift(x, 1)?)),
        ..CHAPTER
    },
    Entry {
        name: "concentration_dutton2014",
        synonyms: &["halo", "NFW", "concentration"],
        about: "Concentration r_200c/r_s of a halo of mass M_200c, in simulations with the parameters of Planck.",
        arguments: M_AND_Z,
        formula: "log₁₀ c = a + b log₁₀(M/1e12 Msun/h), a = 0.520 + 0.385 exp(−0.617 z^1.21), b = −0.101 + 0.026 z",
        validity: "1e10 to 1e15 Msun/h, 0 ≤ z ≤ 5",
        source: "Dutton & Macciò 2014, MNRAS 441, 3359, eq. 7, 10 and 11 (from memory)",
        example: "concentration_dutton2014(1e12 Msun/h) under concordance is 8.035 within 0.01%",
        definition: Definition::Cosmology(|model, x| model.concentration_dutton(x[0], redshift(x, 1)?)),
        ..CHAPTER
    },
    Entry {
        name: "lagrangian_radius",
        synonyms: &["halo", "sphere of matter"],
        about: "Comoving radius of the sphere that holds the mass M on average.",
        arguments: &[argument("M", MASS_TYPE, "mass, 0 < M")],
        result: COMOVING_LENGTH,
        usual_unit: "Mpc",
        formula: "M = (4π/3) Ωm ρ_c R³",
        source: "Press & Schechter 1974, ApJ 187, 425",
        example: "lagrangian_radius(2.786e14 Msun) [cMpc/h for h] under planck2018 is 8 cMpc/h within 0.1%",
        definition: Definition::Cosmology(|model, x| Ok(model.lagrangian_radius(x[0])?.value)),
        ..CHAPTER
    },
    Entry {
        name: "peak_height",
        symbol: "ν_peak",
        synonyms: &["halo", "rarity"],
        about: "Peak height of haloes of mass M: how many standard deviations make them.",
        arguments: M_AND_Z,
        formula: "ν = 1.686/σ(M, z)",
        validity: NEEDS_SIGMA8,
        source: "Press & Schechter 1974, ApJ 187, 425; Gunn & Gott 1972, ApJ 176, 1",
        example: "peak_height(2.786e14 Msun) under planck2018 is 2.079 within 0.1%",
        definition: Definition::Cosmology(|model, x| model.peak_height(x[0], redshift(x, 1)?)),
        ..CHAPTER
    },
    Entry {
        name: "press_schechter",
        synonyms: &["halo", "mass function", "counts"],
        about: "Comoving number density of haloes per e-folding of mass, by Press & Schechter.",
        arguments: M_AND_Z,
        result: COMOVING_DENSITY,
        usual_unit: "Mpc^-3",
        formula: "dn/d ln M = (ρ_m/M) √(2/π) ν exp(−ν²/2) |d ln σ/d ln M|",
        validity: NEEDS_SIGMA8,
        source: "Press & Schechter 1974, ApJ 187, 425",
        example: "press_schechter(1e15 Msun) < sheth_tormen(1e15 Msun) under planck2018",
        definition: Definition::Cosmology(|model, x| {
            model.halo_counts_per_m3(x[0], redshift(x, 1)?, Counts::PressSchechter)
        }),
        ..CHAPTER
    },
    Entry {
        name: "sheth_tormen",
        synonyms: &["halo", "mass function", "counts"],
        about: "Comoving number density of haloes per e-folding of mass, by Sheth & Tormen.",
        arguments: M_AND_Z,
        result: COMOVING_DENSITY,
        usual_unit: "Mpc^-3",
        formula: "dn/d ln M = (ρ_m/M) A √(2a/π) (1 + (aν²)^−p) ν exp(−aν²/2) |d ln σ/d ln M|, A = 0.3222, a = 0.707, p = 0.3",
        validity: NEEDS_SIGMA8,
        source: "Sheth & Tormen 1999, MNRAS 308, 119",
        example: "sheth_tormen(1e13 Msun) < press_schechter(1e13 Msun) under planck2018",
        definition: Definition::Cosmology(|model, x| {
            model.halo_counts_per_m3(x[0], redshift(x, 1)?, Counts::ShethTormen)
        }),
        ..CHAPTER
    },
    Entry {
        name: "press_schechter_above",
        synonyms: &["halo", "mass function", "counts"],
        about: "Comoving number density of haloes above the mass M, by Press & Schechter.",
        arguments: M_AND_Z,
        result: COMOVING_DENSITY,
        usual_unit: "Mpc^-3",
        formula: "n(> M) = ∫_M^∞ (dn/d ln M) d ln M",
        validity: NEEDS_SIGMA8,
        source: "Press & Schechter 1974, ApJ 187, 425",
        example: "press_schechter_above(1e15 Msun) < press_schechter_above(1e14 Msun) under planck2018",
        definition: Definition::Cosmology(|model, x| {
            model.halo_counts_above_per_m3(x[0], redshift(x, 1)?, Counts::PressSchechter)
        }),
        ..CHAPTER
    },
    Entry {
        name: "sheth_tormen_above",
        synonyms: &["halo", "mass function", "counts"],
        about: "Comoving number density of haloes above the mass M, by Sheth & Tormen.",
        arguments: M_AND_Z,
        result: COMOVING_DENSITY,
        usual_unit: "Mpc^-3",
        formula: "n(> M) = ∫_M^∞ (dn/d ln M) d ln M",
        validity: NEEDS_SIGMA8,
        source: "Sheth & Tormen 1999, MNRAS 308, 119",
        example: "sheth_tormen_above(1e14 Msun) under planck2018 is between 1e-5 Mpc^-3 and 4e-5 Mpc^-3",
        definition: Definition::Cosmology(|model, x| {
            model.halo_counts_above_per_m3(x[0], redshift(x, 1)?, Counts::ShethTormen)
        }),
        ..CHAPTER
    },
];
