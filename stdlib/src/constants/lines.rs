//! Spectral lines at rest, in vacuum. What their light became on its way is
//! `observed_wavelength(λ_Hα, z)`.

use super::CONSTANT;
use super::values::*;
use crate::catalogue::{Definition, Entry, Type};
use crate::dimension::{LENGTH, RATE};

const NIST: &str = "NIST Atomic Spectra Database (from memory)";

pub(super) static ENTRIES: &[Entry] = &[
    Entry {
        name: "hi_frequency",
        symbol: "ν_HI",
        aliases: &["nu_HI"],
        synonyms: &["21 cm", "hydrogen line"],
        about: "Frequency of the hyperfine line of neutral hydrogen.",
        result: Type::of(RATE),
        usual_unit: "MHz",
        formula: "1420.405751768(1) MHz",
        source: "Hellwig et al. 1970, IEEE Trans. Instrum. Meas. 19, 200 (from memory)",
        example: "ν_HI is 1420.405752 MHz",
        definition: Definition::Constant(HI_FREQUENCY, HI_FREQUENCY_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "hi_wavelength",
        symbol: "λ_HI",
        aliases: &["lambda_HI"],
        synonyms: &["21 cm", "hydrogen line"],
        about: "Wavelength of the hyperfine line of neutral hydrogen.",
        result: Type::of(LENGTH),
        usual_unit: "cm",
        formula: "λ_HI = c/ν_HI",
        source: "Hellwig et al. 1970, IEEE Trans. Instrum. Meas. 19, 200 (from memory)",
        example: "λ_HI is 21.10611 cm",
        definition: Definition::Constant(HI_WAVELENGTH, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "hi_transition_rate",
        symbol: "A_HI",
        aliases: &["A_10"],
        synonyms: &["21 cm", "hydrogen line", "Einstein coefficient"],
        about: "Rate of spontaneous emission in the hyperfine line of neutral hydrogen.",
        result: Type::of(RATE),
        usual_unit: "1/s",
        formula: "A₁₀ = 2.8843e-15/s",
        source: "Gould 1994, ApJ 423, 522 (from memory)",
        example: "1/A_HI is 11 Myr within 1%",
        definition: Definition::Constant(HI_TRANSITION_RATE, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "lyman_alpha",
        symbol: "λ_Lyα",
        aliases: &["lambda_Lya", "Lya"],
        synonyms: &["hydrogen", "Ly alpha"],
        about: "Vacuum wavelength of Lyman α, the mean of its doublet.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "1215.67 Å",
        source: NIST,
        example: "0.75*R_inf*λ_Lyα is 1 + m_e/m_p within 0.01%",
        definition: Definition::Constant(LYMAN_ALPHA, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "lyman_limit",
        symbol: "λ_LyC",
        aliases: &["lambda_LyC"],
        synonyms: &["hydrogen", "ionization", "Lyman break", "Lyman continuum"],
        about: "Vacuum wavelength at which light ionizes hydrogen.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "911.75 Å",
        source: NIST,
        example: "h_P*c/λ_LyC [eV] is 13.598 eV",
        definition: Definition::Constant(LYMAN_LIMIT, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "hydrogen_alpha",
        symbol: "λ_Hα",
        aliases: &["lambda_Ha", "Ha"],
        synonyms: &["Balmer", "H alpha"],
        about: "Vacuum wavelength of Hα.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "6564.614 Å",
        source: NIST,
        example: "(1/4 - 1/9)*R_inf*λ_Hα is 1 + m_e/m_p within 0.01%",
        definition: Definition::Constant(H_ALPHA, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "hydrogen_beta",
        symbol: "λ_Hβ",
        aliases: &["lambda_Hb", "Hb"],
        synonyms: &["Balmer", "H beta"],
        about: "Vacuum wavelength of Hβ.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "4862.683 Å",
        source: NIST,
        example: "(1/4 - 1/16)*R_inf*λ_Hβ is 1 + m_e/m_p within 0.01%",
        definition: Definition::Constant(H_BETA, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "oxygen_iii",
        symbol: "λ_OIII",
        aliases: &["lambda_OIII"],
        synonyms: &["[O III]", "5007"],
        about: "Vacuum wavelength of [O III] 5007.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "5008.240 Å",
        source: NIST,
        example: "λ_OIII is 5008.240 Angstrom",
        definition: Definition::Constant(OIII, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "oxygen_ii",
        symbol: "λ_OII",
        aliases: &["lambda_OII"],
        synonyms: &["[O II]", "3727"],
        about: "Vacuum wavelength of [O II] 3727, the mean of its doublet.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "(3727.092 + 3729.875)/2 Å",
        source: NIST,
        example: "λ_OII is 3728.5 Angstrom within 0.01%",
        definition: Definition::Constant(OII, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "carbon_iv",
        symbol: "λ_CIV",
        aliases: &["lambda_CIV"],
        synonyms: &["C IV", "1549"],
        about: "Vacuum wavelength of C IV 1549, the mean of its doublet.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "(1548.204 + 1550.781)/2 Å",
        source: "Morton 2003, ApJS 149, 205 (from memory)",
        example: "λ_CIV is 1549.5 Angstrom within 0.01%",
        definition: Definition::Constant(CIV, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "magnesium_ii",
        symbol: "λ_MgII",
        aliases: &["lambda_MgII"],
        synonyms: &["Mg II", "2799"],
        about: "Vacuum wavelength of Mg II 2799, the mean of its doublet.",
        result: Type::of(LENGTH),
        usual_unit: "Angstrom",
        formula: "(2796.354 + 2803.531)/2 Å",
        source: "Morton 2003, ApJS 149, 205 (from memory)",
        example: "λ_MgII is 2799.9 Angstrom within 0.01%",
        definition: Definition::Constant(MGII, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "carbon_ii_frequency",
        symbol: "ν_CII",
        aliases: &["nu_CII"],
        synonyms: &["[C II]", "158 micron"],
        about: "Frequency of the [C II] fine-structure line at 158 μm.",
        result: Type::of(RATE),
        usual_unit: "GHz",
        formula: "1900.5369 GHz",
        source: "Cooksy, Blake & Saykally 1986, ApJ 305, L89 (from memory)",
        example: "c/ν_CII is 157.74 micron",
        definition: Definition::Constant(CII_FREQUENCY, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "co_frequency",
        symbol: "ν_CO",
        aliases: &["nu_CO"],
        synonyms: &["CO(1-0)", "carbon monoxide"],
        about: "Frequency of the CO(1–0) rotation line.",
        result: Type::of(RATE),
        usual_unit: "GHz",
        formula: "115.2712018 GHz",
        source: "Winnewisser et al. 1997, J. Mol. Spectrosc. 184, 468 (from memory)",
        example: "c/ν_CO is 2.6008 mm",
        definition: Definition::Constant(CO_FREQUENCY, 0.0),
        ..CONSTANT
    },
];
