//! The entries of this chapter.

use crate::catalogue::{Definition, Entry, Topic, Type};
use crate::cosmology::template::{BLANK, COMOVING_LENGTH, Z, number_of, redshift};
use crate::dimension::{ANGLE, WAVE_NUMBER};

const CHAPTER: Entry = Entry {
    topic: Topic::Structure,
    ..BLANK
};
const PLANCK: &str = "Planck Collaboration VI 2020, A&A 641, A6, table 2";
const NEEDS: &str = "models with baryons and radiation";

/// The entries of this chapter.
pub static ENTRIES: &[Entry] = &[
    Entry {
        name: "z_star",
        aliases: &["z_∗", "zstar", "last_scattering"],
        synonyms: &["recombination", "decoupling", "microwave background"],
        about: "Redshift of last scattering: the published one if nothing that moves it was changed, else a fit 0.2 % too high.",
        formula: "published, or 1048 (1 + 0.00124 ωb^−0.738)(1 + g₁ ωm^g₂)",
        validity: NEEDS,
        source: "Planck Collaboration VI 2020, A&A 641, A6, table 2; fit: Hu & Sugiyama 1996, ApJ 471, 542, eq. E-1",
        example: "z_star under planck2018 is 1089.92",
        definition: Definition::ModelValue(|model| number_of(model.last_scattering())),
        ..CHAPTER
    },
    Entry {
        name: "z_drag",
        aliases: &["z_d", "zdrag", "drag_epoch"],
        synonyms: &["recombination", "baryon acoustic oscillations", "BAO"],
        about: "Redshift at which baryons stopped being dragged by photons: the published one if nothing that moves it was changed, else a fit 3.7 % too low.",
        formula: "published, or 1291 ωm^0.251/(1 + 0.659 ωm^0.828) (1 + b₁ ωb^b₂)",
        validity: NEEDS,
        source: "Planck Collaboration VI 2020, A&A 641, A6, table 2; fit: Eisenstein & Hu 1998, ApJ 496, 605, eq. 4",
        example: "z_drag under planck2018 is 1059.94",
        definition: Definition::ModelValue(|model| number_of(model.drag_epoch())),
        ..CHAPTER
    },
    Entry {
        name: "sound_horizon",
        symbol: "r_s",
        synonyms: &["acoustic scale", "BAO", "standard ruler"],
        about: "Comoving distance that sound had travelled in the plasma by redshift z.",
        arguments: Z,
        result: COMOVING_LENGTH,
        usual_unit: "Mpc",
        formula: "r_s = ∫_z^∞ c dz′/(H √(3(1 + R))), R = 3ρ_b/(4ρ_γ)",
        validity: NEEDS,
        source: "Hu & Sugiyama 1996, ApJ 471, 542, eq. 19",
        example: "sound_horizon(1059.94) under planck2018 is 147.09 Mpc",
        definition: Definition::Cosmology(|model, x| Ok(model.sound_horizon(redshift(x, 0)?)?.value)),
        ..CHAPTER
    },
    Entry {
        name: "r_star",
        aliases: &["sound_horizon_star"],
        synonyms: &["acoustic scale", "microwave background"],
        about: "Comoving sound horizon at last scattering.",
        result: COMOVING_LENGTH,
        usual_unit: "Mpc",
        formula: "r_s(z_star)",
        validity: NEEDS,
        source: PLANCK,
        example: "r_star under planck2018 is 144.43 Mpc",
        definition: Definition::ModelValue(|model| Ok(model.sound_horizon_star()?.value)),
        ..CHAPTER
    },
    Entry {
        name: "r_drag",
        symbol: "r_d",
        aliases: &["sound_horizon_drag"],
        synonyms: &["acoustic scale", "BAO", "standard ruler"],
        about: "Comoving sound horizon at the drag epoch: the ruler of baryon acoustic oscillations.",
        result: COMOVING_LENGTH,
        usual_unit: "Mpc",
        formula: "r_s(z_drag)",
        validity: NEEDS,
        source: PLANCK,
        example: "r_drag under planck2018 is 147.09 Mpc",
        definition: Definition::ModelValue(|model| Ok(model.sound_horizon_drag()?.value)),
        ..CHAPTER
    },
    Entry {
        name: "theta_star",
        symbol: "θ_star",
        aliases: &["θ_∗", "acoustic_angle"],
        synonyms: &["acoustic scale", "microwave background"],
        about: "Angle of the sound horizon at last scattering.",
        result: Type::of(ANGLE),
        usual_unit: "deg",
        formula: "θ∗ = r_s(z_star)/D_M(z_star)",
        validity: NEEDS,
        source: PLANCK,
        example: "theta_star under planck2018 is 0.5965 deg",
        definition: Definition::ModelValue(|model| model.acoustic_angle_rad()),
        ..CHAPTER
    },
    Entry {
        name: "acoustic_scale",
        symbol: "l_A",
        synonyms: &["microwave background", "multipole"],
        about: "Multipole of the sound horizon at last scattering.",
        formula: "l_A = π/θ∗",
        validity: NEEDS,
        source: "Komatsu et al. 2009, ApJS 180, 330, eq. 65",
        example: "l_A under planck2018 is 301.8",
        definition: Definition::ModelValue(|model| model.acoustic_scale()),
        ..CHAPTER
    },
    Entry {
        name: "shift_parameter",
        aliases: &["R_shift"],
        synonyms: &["microwave background", "distance prior"],
        about: "Shift parameter: the distance to last scattering as the peaks of the microwave background see it.",
        formula: "R = √Ωm D_M(z_star) H0/c",
        validity: NEEDS,
        source: "Bond, Efstathiou & Tegmark 1997, MNRAS 291, L33",
        example: "shift_parameter under planck2018 is 1.750 within 0.3%",
        definition: Definition::ModelValue(|model| model.shift_parameter()),
        ..CHAPTER
    },
    Entry {
        name: "k_eq",
        synonyms: &["equality", "turnover of the power spectrum"],
        about: "Comoving wave number that entered the horizon when cold matter and radiation had equal density.",
        result: Type::of(WAVE_NUMBER.comoving()),
        usual_unit: "1/Mpc",
        formula: "k_eq = H(z_eq)/(c (1 + z_eq))",
        validity: "models with radiation",
        source: "Planck Collaboration VI 2020, A&A 641, A6, table 2 (0.010384 ± 0.000081 Mpc⁻¹)",
        example: "k_eq under planck2018 is 0.01038 Mpc^-1",
        definition: Definition::ModelValue(|model| model.equality_wave_number_per_m()),
        ..CHAPTER
    },
];
