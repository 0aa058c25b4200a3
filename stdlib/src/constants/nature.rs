//! Constants of nature: the seven that define the SI, what follows from them,
//! and the measured ones of CODATA 2022. They belong to the laboratory, so
//! their frame is proper.

use super::CONSTANT;
use super::values::*;
use crate::catalogue::{Definition, Entry, Type};
use crate::dimension::{
    AMOUNT, AREA, CHARGE, CURRENT, Dimension, ENERGY, FLUX, FORCE, LENGTH, MAGNETIC_FLUX_DENSITY, MASS,
    NUMBER, PRESSURE, RATE, SPEED, TEMPERATURE, TIME, VOLUME, WAVE_NUMBER,
};

const SI: &str = "SI Brochure, 9th edition (2019), sec. 2.2";
const CODATA: &str = "CODATA 2022: Mohr, Newell, Taylor & Tiesinga 2025, Rev. Mod. Phys. 97, 025002";

const ACTION: Dimension = ENERGY.times(TIME);
const ENTROPY: Dimension = ENERGY.per(TEMPERATURE);
const GRAVITATION_DIMENSION: Dimension = VOLUME.per(MASS).per(TIME).per(TIME);
const PERMEABILITY: Dimension = FORCE.per(CURRENT).per(CURRENT);
const PERMITTIVITY: Dimension = NUMBER.per(PERMEABILITY).per(SPEED).per(SPEED);
const T4: Dimension = TEMPERATURE
    .times(TEMPERATURE)
    .times(TEMPERATURE)
    .times(TEMPERATURE);

pub(super) static ENTRIES: &[Entry] = &[
    Entry {
        name: "speed_of_light",
        symbol: "c",
        synonyms: &["light speed", "lightspeed"],
        about: "Speed of light in vacuum.",
        result: Type::of(SPEED),
        usual_unit: "km/s",
        formula: "c = 299792458 m/s, by which the metre is defined",
        source: SI,
        example: "c is 299792.458 km/s",
        definition: Definition::Constant(SPEED_OF_LIGHT, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "gravitational_constant",
        symbol: "G",
        aliases: &["G_N"],
        synonyms: &["gravity", "Newton"],
        about: "Newtonian constant of gravitation.",
        result: Type::of(GRAVITATION_DIMENSION),
        usual_unit: "m^3/kg/s^2",
        formula: "F = G m₁ m₂/r²",
        source: CODATA,
        example: "G is 6.67430e-11 m^3/kg/s^2",
        definition: Definition::Constant(GRAVITATION, GRAVITATION_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "planck_constant",
        symbol: "h_P",
        aliases: &["h_Planck"],
        synonyms: &["quantum of action"],
        about: "Planck constant; little h is `h`.",
        result: Type::of(ACTION),
        usual_unit: "J s",
        formula: "E = h_P ν",
        source: SI,
        example: "h_P is 6.62607015e-34 J s",
        definition: Definition::Constant(PLANCK, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "reduced_planck_constant",
        symbol: "ħ",
        aliases: &["hbar"],
        synonyms: &["Dirac constant"],
        about: "Reduced Planck constant.",
        result: Type::of(ACTION),
        usual_unit: "J s",
        formula: "ħ = h_P/(2π)",
        source: CODATA,
        example: "hbar is 1.0545718e-34 J s",
        definition: Definition::Constant(REDUCED_PLANCK, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "boltzmann_constant",
        symbol: "k_B",
        synonyms: &["thermal energy"],
        about: "Boltzmann constant.",
        result: Type::of(ENTROPY),
        usual_unit: "J/K",
        formula: "E = k_B T",
        source: SI,
        example: "k_B is 1.380649e-23 J/K",
        definition: Definition::Constant(BOLTZMANN, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "elementary_charge",
        symbol: "e",
        synonyms: &["electron charge", "proton charge"],
        about: "Electric charge of the proton; Euler's number is `exp(1)`.",
        result: Type::of(CHARGE),
        usual_unit: "C",
        formula: "e = 1.602176634e-19 C, by which the ampere is defined",
        source: SI,
        example: "e is 1.602176634e-19 C",
        definition: Definition::Constant(ELEMENTARY_CHARGE, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "avogadro_constant",
        symbol: "N_A",
        synonyms: &["mole"],
        about: "Number of entities in a mole.",
        result: Type::of(NUMBER.per(AMOUNT)),
        usual_unit: "1/mol",
        formula: "N_A = 6.02214076e23/mol, by which the mole is defined",
        source: SI,
        example: "N_A is 6.02214076e23 mol^-1",
        definition: Definition::Constant(AVOGADRO, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "molar_gas_constant",
        symbol: "R_gas",
        synonyms: &["ideal gas"],
        about: "Molar gas constant.",
        result: Type::of(ENTROPY.per(AMOUNT)),
        usual_unit: "J/mol/K",
        formula: "R = N_A k_B",
        source: CODATA,
        example: "R_gas is 8.314462618 J/mol/K",
        definition: Definition::Constant(MOLAR_GAS, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "stefan_boltzmann_constant",
        symbol: "σ_SB",
        aliases: &["sigma_SB"],
        synonyms: &["black body", "thermal radiation"],
        about: "Flux from a black body over the fourth power of its temperature.",
        result: Type::of(FLUX.per(T4)),
        usual_unit: "W/m^2/K^4",
        formula: "σ_SB = 2π⁵ k_B⁴/(15 h_P³ c²)",
        source: CODATA,
        example: "σ_SB is 5.670374419e-8 W/m^2/K^4",
        definition: Definition::Constant(STEFAN_BOLTZMANN, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "radiation_constant",
        symbol: "a_rad",
        aliases: &["a_R"],
        synonyms: &["radiation density", "black body"],
        about: "Energy density of thermal radiation over the fourth power of its temperature.",
        result: Type::of(PRESSURE.per(T4)),
        usual_unit: "J/m^3/K^4",
        formula: "a_rad = 4 σ_SB/c",
        source: "the ratio of two exact constants of CODATA 2022",
        example: "a_rad * (2.7255 K)^4 is 0.26057 eV/cm^3",
        definition: Definition::Constant(RADIATION_DENSITY, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "wien_wavelength_constant",
        symbol: "b_Wien",
        aliases: &["b_λ"],
        synonyms: &["black body peak", "displacement law"],
        about: "Wavelength at which a black body's flux per unit wavelength peaks, times its temperature.",
        result: Type::of(LENGTH.times(TEMPERATURE)),
        usual_unit: "mm K",
        formula: "λ_peak = b/T, b = h_P c/(4.965114… k_B)",
        source: CODATA,
        example: "b_Wien is 2.897771955e-3 m K",
        definition: Definition::Constant(WIEN_WAVELENGTH, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "wien_frequency_constant",
        symbol: "b_ν",
        aliases: &["b_nu"],
        synonyms: &["black body peak", "displacement law"],
        about: "Frequency at which a black body's flux per unit frequency peaks, over its temperature.",
        result: Type::of(RATE.per(TEMPERATURE)),
        usual_unit: "GHz/K",
        formula: "ν_peak = b_ν T, b_ν = 2.821439… k_B/h_P",
        source: CODATA,
        example: "b_ν is 58.789258 GHz/K",
        definition: Definition::Constant(WIEN_FREQUENCY, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "fine_structure_constant",
        symbol: "α_fs",
        aliases: &["alpha_fs"],
        synonyms: &["Sommerfeld"],
        about: "Fine-structure constant.",
        result: Type::of(NUMBER),
        formula: "α_fs = e²/(4π ε_0 ħ c)",
        source: CODATA,
        example: "1/α_fs is 137.035999177",
        definition: Definition::Constant(FINE_STRUCTURE, FINE_STRUCTURE_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "rydberg_constant",
        symbol: "R_inf",
        aliases: &["R_∞"],
        synonyms: &["hydrogen"],
        about: "Rydberg constant for an infinitely heavy nucleus.",
        result: Type::of(WAVE_NUMBER),
        usual_unit: "1/m",
        formula: "R_inf = α_fs² m_e c/(2 h_P)",
        source: CODATA,
        example: "h_P * c * R_inf [eV] is 13.60569312299 eV",
        definition: Definition::Constant(RYDBERG, RYDBERG_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "bohr_radius",
        symbol: "a_Bohr",
        synonyms: &["hydrogen", "atom"],
        about: "Bohr radius.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "a_Bohr = ħ/(α_fs m_e c)",
        source: CODATA,
        example: "a_Bohr is 5.29177210544e-11 m",
        definition: Definition::Constant(BOHR_RADIUS, BOHR_RADIUS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "electron_mass",
        symbol: "m_e",
        about: "Mass of the electron.",
        result: Type::of(MASS),
        usual_unit: "kg",
        source: CODATA,
        example: "m_e [keV via c] is 510.9989507 keV",
        definition: Definition::Constant(ELECTRON_MASS, ELECTRON_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "proton_mass",
        symbol: "m_p",
        about: "Mass of the proton.",
        result: Type::of(MASS),
        usual_unit: "kg",
        source: CODATA,
        example: "m_p [MeV via c] is 938.2720894 MeV",
        definition: Definition::Constant(PROTON_MASS, PROTON_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "neutron_mass",
        symbol: "m_n",
        about: "Mass of the neutron.",
        result: Type::of(MASS),
        usual_unit: "kg",
        source: CODATA,
        example: "m_n [MeV via c] is 939.565422 MeV",
        definition: Definition::Constant(NEUTRON_MASS, NEUTRON_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "atomic_mass_constant",
        symbol: "m_u",
        aliases: &["amu_mass"],
        synonyms: &["dalton", "atomic mass unit"],
        about: "One twelfth of the mass of a carbon-12 atom.",
        result: Type::of(MASS),
        usual_unit: "kg",
        formula: "m_u = m(¹²C)/12",
        source: CODATA,
        example: "m_u [MeV via c] is 931.4941037 MeV",
        definition: Definition::Constant(ATOMIC_MASS, ATOMIC_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "hydrogen_mass",
        symbol: "m_H",
        synonyms: &["HI", "atom"],
        about: "Mass of a hydrogen atom.",
        result: Type::of(MASS),
        usual_unit: "kg",
        formula: "m_H = 1.007825031898 m_u",
        source: "Wang et al. 2021, Chinese Phys. C 45, 030003 (from memory); m_u: CODATA 2022",
        example: "m_H/m_u is 1.00782503",
        definition: Definition::Constant(HYDROGEN_MASS, HYDROGEN_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "vacuum_permittivity",
        symbol: "ε_0",
        aliases: &["ε0", "eps_0", "epsilon_0"],
        synonyms: &["electric constant"],
        about: "Electric permittivity of the vacuum.",
        result: Type::of(PERMITTIVITY),
        usual_unit: "F/m",
        formula: "ε_0 = 1/(μ_0 c²)",
        source: CODATA,
        example: "ε_0 is 8.8541878188e-12 F/m",
        definition: Definition::Constant(VACUUM_PERMITTIVITY, VACUUM_PERMITTIVITY_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "vacuum_permeability",
        symbol: "μ_0",
        aliases: &["μ0", "mu_0"],
        synonyms: &["magnetic constant"],
        about: "Magnetic permeability of the vacuum.",
        result: Type::of(PERMEABILITY),
        usual_unit: "N/A^2",
        formula: "μ_0 = 2 α_fs h_P/(e² c)",
        source: CODATA,
        example: "μ_0 is 1.25663706127e-6 N/A^2",
        definition: Definition::Constant(VACUUM_PERMEABILITY, VACUUM_PERMEABILITY_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "thomson_cross_section",
        symbol: "σ_T",
        aliases: &["sigma_T"],
        synonyms: &["electron scattering"],
        about: "Thomson cross section of the electron.",
        result: Type::of(AREA),
        usual_unit: "cm^2",
        formula: "σ_T = (8π/3) (e²/(4π ε_0 m_e c²))²",
        source: CODATA,
        example: "σ_T is 6.6524587051e-29 m^2",
        definition: Definition::Constant(THOMSON_CROSS_SECTION, THOMSON_CROSS_SECTION_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "bohr_magneton",
        symbol: "μ_B",
        aliases: &["mu_B"],
        synonyms: &["Zeeman"],
        about: "Bohr magneton.",
        result: Type::of(ENERGY.per(MAGNETIC_FLUX_DENSITY)),
        usual_unit: "J/T",
        formula: "μ_B = e ħ/(2 m_e)",
        source: CODATA,
        example: "μ_B is 9.2740100657e-24 J/T",
        definition: Definition::Constant(BOHR_MAGNETON, BOHR_MAGNETON_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "planck_length",
        symbol: "l_P",
        synonyms: &["Planck units"],
        about: "Planck length.",
        result: Type::of(LENGTH),
        usual_unit: "m",
        formula: "l_P = √(ħ G/c³)",
        source: CODATA,
        example: "l_P is 1.616255e-35 m",
        definition: Definition::Constant(PLANCK_LENGTH, PLANCK_LENGTH_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "planck_mass",
        symbol: "m_P",
        aliases: &["m_Pl"],
        synonyms: &["Planck units"],
        about: "Planck mass, not the reduced one.",
        result: Type::of(MASS),
        usual_unit: "kg",
        formula: "m_P = √(ħ c/G)",
        source: CODATA,
        example: "m_P [GeV via c] is 1.220890e19 GeV",
        definition: Definition::Constant(PLANCK_MASS, PLANCK_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "planck_time",
        symbol: "t_P",
        synonyms: &["Planck units"],
        about: "Planck time.",
        result: Type::of(TIME),
        usual_unit: "s",
        formula: "t_P = √(ħ G/c⁵)",
        source: CODATA,
        example: "t_P is 5.39125e-44 s",
        definition: Definition::Constant(PLANCK_TIME, PLANCK_TIME_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "planck_temperature",
        symbol: "T_P",
        synonyms: &["Planck units"],
        about: "Planck temperature.",
        result: Type::of(TEMPERATURE),
        usual_unit: "K",
        formula: "T_P = m_P c²/k_B",
        source: CODATA,
        example: "T_P is 1.416784e32 K",
        definition: Definition::Constant(PLANCK_TEMPERATURE, PLANCK_TEMPERATURE_UNCERTAINTY),
        ..CONSTANT
    },
];
