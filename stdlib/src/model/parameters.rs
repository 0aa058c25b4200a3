//! The parameters of a model and which of them exclude each other.

use super::{Parameter, ParameterId, Takes};
use crate::dimension::{ENERGY, NUMBER, RATE, TEMPERATURE};

/// The place of each parameter in [`super::PARAMETERS`].
#[allow(missing_docs, reason = "each is named after its parameter")]
pub mod id {
    use crate::model::ParameterId;

    pub const H0: ParameterId = 0;
    pub const OMEGA_M: ParameterId = 1;
    pub const OMEGA_CB: ParameterId = 2;
    pub const OMEGA_B: ParameterId = 3;
    pub const OMEGA_C: ParameterId = 4;
    pub const PHYSICAL_M: ParameterId = 5;
    pub const PHYSICAL_B: ParameterId = 6;
    pub const PHYSICAL_C: ParameterId = 7;
    pub const OMEGA_DE: ParameterId = 8;
    pub const OMEGA_K: ParameterId = 9;
    pub const T_CMB: ParameterId = 10;
    pub const NEFF: ParameterId = 11;
    pub const M_NU: ParameterId = 12;
    pub const W0: ParameterId = 13;
    pub const WA: ParameterId = 14;
    pub const W: ParameterId = 15;
    pub const SIGMA8: ParameterId = 16;
    pub const NS: ParameterId = 17;
    pub const TAU: ParameterId = 18;
    pub const LN_AS: ParameterId = 19;
    pub const Z_STAR: ParameterId = 20;
    pub const Z_DRAG: ParameterId = 21;
}

const fn number(name: &'static str, aliases: &'static [&'static str], about: &'static str) -> Parameter {
    Parameter {
        name,
        aliases,
        dimension: NUMBER,
        takes: Takes::Number,
        usual_unit: "",
        about,
    }
}

/// All parameters, in the order of [`id`].
pub static PARAMETERS: &[Parameter] = &[
    Parameter {
        name: "H0",
        aliases: &["H_0", "H₀"],
        dimension: RATE,
        takes: Takes::Number,
        usual_unit: "km/s/Mpc",
        about: "Hubble constant: the expansion rate today.",
    },
    number(
        "Ωm",
        &["Omega_m", "Ω_m"],
        "All matter today, massive neutrinos included, in units of the critical density.",
    ),
    number(
        "Ωcb",
        &["Omega_cb", "Ω_cb"],
        "Cold matter today, baryons and dark matter, without neutrinos.",
    ),
    number("Ωb", &["Omega_b", "Ω_b"], "Baryons today."),
    number("Ωc", &["Omega_c", "Ω_c"], "Cold dark matter today."),
    number(
        "ωm",
        &["omega_m", "ω_m"],
        "Physical density of all matter: Ωm h², massive neutrinos included.",
    ),
    number("ωb", &["omega_b", "ω_b"], "Physical density of baryons: Ωb h²."),
    number(
        "ωc",
        &["omega_c", "ω_c"],
        "Physical density of cold dark matter: Ωc h².",
    ),
    number(
        "ΩΛ",
        &["Omega_Lambda", "Omega_L", "Ω_Λ", "Ωde", "Omega_de", "Ω_de"],
        "Dark energy today, whatever its equation of state.",
    ),
    number(
        "Ωk",
        &["Omega_k", "Ω_k"],
        "Curvature today: positive in an open model, negative in a closed one.",
    ),
    Parameter {
        name: "T_CMB",
        aliases: &["T_cmb", "T0", "T_0", "T₀"],
        dimension: TEMPERATURE,
        takes: Takes::Number,
        usual_unit: "K",
        about: "Temperature of the microwave background today; 0 K leaves radiation out.",
    },
    number(
        "Neff",
        &["N_eff"],
        "Effective number of neutrino species, shared by three.",
    ),
    Parameter {
        name: "mν",
        aliases: &["m_nu", "m_ν", "mnu"],
        dimension: ENERGY,
        takes: Takes::List,
        usual_unit: "eV",
        about: "Rest energies of the three neutrinos, as a list.",
    },
    number(
        "w0",
        &["w_0", "w₀"],
        "Equation of state of dark energy today, p/ρ.",
    ),
    number(
        "wa",
        &["w_a"],
        "Its change with the scale factor: w = w0 + wa (1 − a).",
    ),
    Parameter {
        name: "w",
        aliases: &[],
        dimension: NUMBER,
        takes: Takes::Function,
        usual_unit: "",
        about: "Equation of state of dark energy as a function of redshift: w(z) = ….",
    },
    number(
        "σ8",
        &["sigma8", "sigma_8", "σ_8", "σ₈"],
        "Linear rms density contrast today in spheres of 8 Mpc/h.",
    ),
    number("ns", &["n_s"], "Spectral index of the primordial fluctuations."),
    number("τ", &["tau_reio", "τ_reio"], "Optical depth to reionisation."),
    number(
        "ln10As",
        &["lnAs", "ln_As"],
        "ln(10¹⁰ A_s), the amplitude of the primordial fluctuations at 0.05/Mpc.",
    ),
    number(
        "z_star",
        &["z_∗", "zstar"],
        "Redshift of last scattering, where the publication gives it.",
    ),
    number(
        "z_drag",
        &["z_d", "zdrag"],
        "Redshift of the drag epoch, where the publication gives it.",
    ),
];

/// What a parameter settles. Of one subject a model has one parameter; a
/// later one takes the place of the one before.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Subject {
    /// How much of the matter is baryonic.
    Baryons,
    /// How much matter there is.
    Matter,
    /// What closes the budget.
    Closure,
    /// The parameter alone.
    Itself(ParameterId),
}

/// What a parameter settles.
pub fn subject(parameter: ParameterId) -> Subject {
    match parameter {
        id::OMEGA_B | id::PHYSICAL_B => Subject::Baryons,
        id::OMEGA_M | id::OMEGA_CB | id::OMEGA_C | id::PHYSICAL_M | id::PHYSICAL_C => Subject::Matter,
        id::OMEGA_DE | id::OMEGA_K => Subject::Closure,
        other => Subject::Itself(other),
    }
}

/// Whether a new value of `parameter` makes the published redshifts of
/// decoupling and of the drag epoch those of another model.
pub fn moves_recombination(parameter: ParameterId) -> bool {
    match subject(parameter) {
        Subject::Baryons | Subject::Matter => true,
        Subject::Closure => false,
        Subject::Itself(id) => matches!(id, id::T_CMB | id::NEFF | id::M_NU),
    }
}

/// The place of a parameter by its own name.
pub fn named(name: &str) -> Option<ParameterId> {
    PARAMETERS.iter().position(|parameter| parameter.name == name)
}
