//! The parameters of the model in force, as values: `H0`, `Ωm`, `σ8`, ….

use super::template::{BLANK, quoted};
use super::{Redshift, undefined};
use crate::catalogue::{Definition, Entry, Topic, Type};
use crate::dimension::{ENERGY, RATE, TEMPERATURE};
use crate::model::parameters::id;
use crate::model::{Model, Setting};

const CHAPTER: Entry = Entry {
    topic: Topic::Model,
    ..BLANK
};
const PLANCK: &str = "Planck Collaboration VI 2020, A&A 641, A6, table 1";
const HOGG: &str = "Hogg 1999, astro-ph/9905116, sec. 2";

fn dark_matter(model: &Model) -> super::Found<f64> {
    Ok(model.budget().cold - model.baryons()?)
}

fn physical(model: &Model, fraction: f64) -> f64 {
    fraction * model.budget().h * model.budget().h
}

fn matter(model: &Model) -> f64 {
    model.budget().cold + model.budget().massive_matter
}

fn neutrinos(model: &Model) -> f64 {
    model.budget().massless + model.budget().massive_all
}

/// The sum of the rest energies in J.
fn mass_sum(model: &Model) -> f64 {
    let given = model
        .parameters()
        .iter()
        .find(|(parameter, _)| *parameter == id::M_NU);
    match given.map(|(_, setting)| setting) {
        Some(Setting::List(masses)) => masses.iter().sum(),
        Some(Setting::Number(mass)) => *mass,
        Some(Setting::Function(_)) | None => 0.0,
    }
}

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[
    Entry {
        name: "H0",
        aliases: &["H_0", "H₀", "hubble_constant"],
        synonyms: &["Hubble constant", "expansion"],
        about: "Hubble constant: the expansion rate today.",
        result: Type::open(RATE),
        usual_unit: "km/s/Mpc",
        formula: "H0 = ȧ/a today",
        source: "Lemaître 1927, Ann. Soc. Sci. Bruxelles 47, 49; Hubble 1929, PNAS 15, 168",
        example: "H0 under concordance is 70.0 km/s/Mpc",
        definition: Definition::ModelValue(|model| Ok(model.budget().h0_per_s)),
        ..CHAPTER
    },
    Entry {
        name: "h",
        synonyms: &["little h"],
        about: "Hubble constant in units of 100 km/s/Mpc.",
        formula: "h = H0/(100 km/s/Mpc)",
        source: "Croton 2013, PASA 30, e052",
        example: "h under concordance is 0.70",
        definition: Definition::ModelValue(|model| Ok(model.budget().h)),
        ..CHAPTER
    },
    Entry {
        name: "Ωm",
        aliases: &["Omega_m", "Ω_m"],
        synonyms: &["matter", "density parameter"],
        about: "All matter today, massive neutrinos included, in units of the critical density.",
        formula: "Ωm = Ωcb + Ων (those with mass)",
        source: PLANCK,
        example: "Ωm under planck2018 is 0.3152 within 0.1%",
        definition: Definition::ModelValue(|model| Ok(matter(model))),
        ..CHAPTER
    },
    Entry {
        name: "Ωcb",
        aliases: &["Omega_cb", "Ω_cb"],
        synonyms: &["matter", "density parameter"],
        about: "Cold matter today, baryons and dark matter, in units of the critical density.",
        formula: "Ωcb = Ωb + Ωc",
        source: PLANCK,
        example: "Ωcb under concordance is 0.30",
        definition: Definition::ModelValue(|model| Ok(model.budget().cold)),
        ..CHAPTER
    },
    Entry {
        name: "Ωb",
        aliases: &["Omega_b", "Ω_b"],
        synonyms: &["baryons", "density parameter"],
        about: "Baryons today in units of the critical density.",
        formula: "Ωb = ωb/h²",
        validity: "models that give ωb or Ωb",
        source: PLANCK,
        example: "Ωb under planck2018 is 0.04930",
        definition: Definition::ModelValue(Model::baryons),
        ..CHAPTER
    },
    Entry {
        name: "Ωc",
        aliases: &["Omega_c", "Ω_c"],
        synonyms: &["dark matter", "density parameter"],
        about: "Cold dark matter today in units of the critical density.",
        formula: "Ωc = ωc/h²",
        validity: "models that give ωb or Ωb",
        source: PLANCK,
        example: "Ωc under planck2018 is 0.2645",
        definition: Definition::ModelValue(dark_matter),
        ..CHAPTER
    },
    Entry {
        name: "ΩΛ",
        aliases: &["Omega_Lambda", "Omega_L", "Ω_Λ", "Ωde", "Omega_de", "Ω_de"],
        synonyms: &["dark energy", "cosmological constant", "density parameter"],
        about: "Dark energy today in units of the critical density.",
        formula: "ΩΛ = 1 − Ωm − Ωr − Ωk",
        source: PLANCK,
        example: "ΩΛ under concordance is 0.70",
        definition: Definition::ModelValue(|model| Ok(model.budget().dark)),
        ..CHAPTER
    },
    Entry {
        name: "Ωk",
        aliases: &["Omega_k", "Ω_k"],
        synonyms: &["curvature", "density parameter"],
        about: "Share of curvature in the expansion rate today: positive in an open model.",
        formula: "Ωk = 1 − Σ Ωᵢ",
        source: HOGG,
        example: "Ωk under general with H0 = 70 km/s/Mpc, Ωm = 0.3, ΩΛ = 0.6 is 0.10",
        definition: Definition::ModelValue(|model| Ok(model.budget().curvature)),
        ..CHAPTER
    },
    Entry {
        name: "Ωr",
        aliases: &["Omega_r", "Ω_r"],
        synonyms: &["radiation", "density parameter"],
        about: "Photons and the neutrinos that are not matter today, in units of the critical density.",
        formula: "Ωr = Ωγ + Ων (those without mass)",
        source: "Komatsu et al. 2011, ApJS 192, 18, sec. 3.3",
        example: "Ωr under flat with H0 = 70 km/s/Mpc, Ωm = 0.3, T_CMB = 2.7255 K, Neff = 3.046 is 8.53817e-5",
        definition: Definition::ModelValue(|model| model.radiation_fraction(Redshift::TODAY)),
        ..CHAPTER
    },
    Entry {
        name: "Ωγ",
        aliases: &["Omega_gamma", "Ω_γ"],
        synonyms: &["radiation", "photons", "density parameter"],
        about: "Photons of the microwave background today in units of the critical density.",
        formula: "Ωγ = (4σ T_CMB⁴/c³)/ρ_c",
        source: "Komatsu et al. 2011, ApJS 192, 18, sec. 3.3",
        example: "Ωγ under flat with H0 = 70 km/s/Mpc, Ωm = 0.3, T_CMB = 2.7255 K is 5.04689e-5",
        definition: Definition::ModelValue(|model| Ok(model.budget().photons)),
        ..CHAPTER
    },
    Entry {
        name: "Ων",
        aliases: &["Omega_nu", "Ω_ν"],
        synonyms: &["neutrinos", "density parameter"],
        about: "All neutrinos today in units of the critical density.",
        formula: "Ων = Σ (7/8)(4/11)^(4/3) (Neff/3) Ωγ F(m c²/k T_ν)",
        source: "Komatsu et al. 2011, ApJS 192, 18, sec. 3.3, eq. 25",
        example: "Ων under flat with H0 = 70 km/s/Mpc, Ωm = 0.3, T_CMB = 2.7255 K, Neff = 3.046 is 3.49128e-5",
        definition: Definition::ModelValue(|model| Ok(neutrinos(model))),
        ..CHAPTER
    },
    Entry {
        name: "ωm",
        aliases: &["omega_m", "ω_m"],
        synonyms: &["matter", "physical density"],
        about: "Physical density of all matter today.",
        formula: "ωm = Ωm h²",
        source: PLANCK,
        example: "ωm under planck2018 is 0.1430",
        definition: Definition::ModelValue(|model| Ok(physical(model, matter(model)))),
        ..CHAPTER
    },
    Entry {
        name: "ωb",
        aliases: &["omega_b", "ω_b"],
        synonyms: &["baryons", "physical density"],
        about: "Physical density of baryons today.",
        formula: "ωb = Ωb h²",
        validity: "models that give ωb or Ωb",
        source: PLANCK,
        example: "ωb under planck2018 is 0.02237",
        definition: Definition::ModelValue(|model| Ok(physical(model, model.baryons()?))),
        ..CHAPTER
    },
    Entry {
        name: "ωc",
        aliases: &["omega_c", "ω_c"],
        synonyms: &["dark matter", "physical density"],
        about: "Physical density of cold dark matter today.",
        formula: "ωc = Ωc h²",
        validity: "models that give ωb or Ωb",
        source: PLANCK,
        example: "ωc under planck2018 is 0.1200",
        definition: Definition::ModelValue(|model| Ok(physical(model, dark_matter(model)?))),
        ..CHAPTER
    },
    Entry {
        name: "ων",
        aliases: &["omega_nu", "ω_ν"],
        synonyms: &["neutrinos", "physical density"],
        about: "Physical density of all neutrinos today.",
        formula: "ων = Ων h²",
        source: "Komatsu et al. 2011, ApJS 192, 18, sec. 3.3, eq. 25",
        example: "ων under planck2018 is 0.00064 within 3%",
        definition: Definition::ModelValue(|model| Ok(physical(model, neutrinos(model)))),
        ..CHAPTER
    },
    Entry {
        name: "T_CMB",
        aliases: &["T_cmb", "T0", "T_0", "T₀"],
        synonyms: &["microwave background"],
        about: "Temperature of the microwave background today.",
        result: Type::of(TEMPERATURE),
        usual_unit: "K",
        formula: "T_CMB",
        source: "Fixsen 2009, ApJ 707, 916",
        example: "T_CMB under planck2018 is 2.7255 K",
        definition: Definition::ModelValue(|model| Ok(model.budget().t_cmb_k)),
        ..CHAPTER
    },
    Entry {
        name: "Neff",
        aliases: &["N_eff"],
        synonyms: &["neutrinos"],
        about: "Effective number of neutrino species.",
        formula: "ρ_ν = (7/8)(4/11)^(4/3) Neff ρ_γ while relativistic",
        source: "Mangano et al. 2005, Nucl. Phys. B 729, 221",
        example: "Neff under planck2018 is 3.046",
        definition: Definition::ModelValue(|model| Ok(model.budget().neff)),
        ..CHAPTER
    },
    Entry {
        name: "Σmν",
        aliases: &["sum_m_nu", "Σm_ν"],
        synonyms: &["neutrinos", "neutrino mass"],
        about: "Sum of the rest energies of the three neutrinos.",
        result: Type::of(ENERGY),
        usual_unit: "eV",
        formula: "Σ m c²",
        source: PLANCK,
        example: "Σmν under planck2018 is 0.060 eV",
        definition: Definition::ModelValue(|model| Ok(mass_sum(model))),
        ..CHAPTER
    },
    Entry {
        name: "w0",
        aliases: &["w_0", "w₀"],
        synonyms: &["dark energy", "equation of state"],
        about: "Equation of state of dark energy today.",
        formula: "w(z) = w0 + wa z/(1+z)",
        source: "Chevallier & Polarski 2001, IJMPD 10, 213; Linder 2003, PRL 90, 091301",
        example: "w0 under concordance is -1.0",
        definition: Definition::ModelValue(|model| super::finite(model.expansion().dark.w(1.0))),
        ..CHAPTER
    },
    Entry {
        name: "wa",
        aliases: &["w_a"],
        synonyms: &["dark energy", "equation of state"],
        about: "Change of the equation of state with the scale factor.",
        formula: "w(z) = w0 + wa z/(1+z)",
        validity: "models whose w is not given as a function",
        source: "Chevallier & Polarski 2001, IJMPD 10, 213; Linder 2003, PRL 90, 091301",
        example: "wa under flat with H0 = 70 km/s/Mpc, Ωm = 0.3, w0 = -0.9, wa = 0.2 is 0.20",
        definition: Definition::ModelValue(|model| {
            if model
                .parameters()
                .iter()
                .any(|(parameter, _)| *parameter == id::W)
            {
                return Err(undefined("the model gives w(z) as a function: it has no wa"));
            }
            Ok(model.quoted(id::WA).unwrap_or(0.0))
        }),
        ..CHAPTER
    },
    Entry {
        name: "σ8",
        aliases: &["sigma8", "sigma_8", "σ_8", "σ₈"],
        synonyms: &["amplitude", "clustering"],
        about: "Linear rms density contrast today in spheres of 8 Mpc/h.",
        formula: "σ8 = σ(8 Mpc/h, z = 0)",
        validity: "models that give it",
        source: PLANCK,
        example: "σ8 under planck2018 is 0.8111",
        definition: Definition::ModelValue(|model| quoted(model, id::SIGMA8, "σ8")),
        ..CHAPTER
    },
    Entry {
        name: "S8",
        aliases: &["S_8", "S₈"],
        synonyms: &["amplitude", "clustering", "weak lensing"],
        about: "Amplitude as weak lensing measures it.",
        formula: "S8 = σ8 √(Ωm/0.3)",
        validity: "models that give σ8",
        source: "Planck Collaboration VI 2020, A&A 641, A6, table 2 (0.832 ± 0.013)",
        example: "S8 under planck2018 is 0.832 within 0.2%",
        definition: Definition::ModelValue(|model| {
            Ok(quoted(model, id::SIGMA8, "σ8")? * libm::sqrt(matter(model) / 0.3))
        }),
        ..CHAPTER
    },
    Entry {
        name: "ns",
        aliases: &["n_s"],
        synonyms: &["spectral index", "tilt"],
        about: "Spectral index of the primordial fluctuations.",
        formula: "P(k) ∝ k^ns",
        validity: "models that give it",
        source: PLANCK,
        example: "ns under planck2018 is 0.9649",
        definition: Definition::ModelValue(|model| quoted(model, id::NS, "ns")),
        ..CHAPTER
    },
    Entry {
        name: "τ",
        aliases: &["tau_reio", "τ_reio"],
        synonyms: &["reionisation", "optical depth"],
        about: "Optical depth to reionisation.",
        formula: "τ = ∫ n_e σ_T c dt",
        validity: "models that give it",
        source: PLANCK,
        example: "τ under planck2018 is 0.0544",
        definition: Definition::ModelValue(|model| quoted(model, id::TAU, "τ")),
        ..CHAPTER
    },
    Entry {
        name: "ln10As",
        aliases: &["lnAs", "ln_As"],
        synonyms: &["amplitude", "primordial fluctuations"],
        about: "Amplitude of the primordial fluctuations at 0.05/Mpc, as ln(10¹⁰ A_s).",
        formula: "ln(10¹⁰ A_s)",
        validity: "models that give it",
        source: PLANCK,
        example: "ln10As under planck2018 is 3.044",
        definition: Definition::ModelValue(|model| quoted(model, id::LN_AS, "ln10As")),
        ..CHAPTER
    },
];
