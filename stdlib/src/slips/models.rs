//! Another model in place of the one that was stated.

use super::{Mistake, Other, Slip, anything};
use crate::constants::values::KM_PER_S_PER_MPC;
use crate::model::parameters::{id, moves_recombination, subject};
use crate::model::{BASES, Base, Model, ParameterId, Setting};

const fn slip(key: &'static str, about: &'static str, weight: f64, mistake: Mistake) -> Slip {
    Slip {
        key,
        about,
        weight,
        befalls: anything,
        functions: &[],
        mistake,
    }
}

const fn stale(about: &'static str, weight: f64, km_per_s_per_mpc: f64) -> Slip {
    slip(
        "other-H0",
        about,
        weight,
        Mistake::Parameter(id::H0, km_per_s_per_mpc * KM_PER_S_PER_MPC),
    )
}

const fn other(about: &'static str, weight: f64, place: usize) -> Slip {
    slip("other-model", about, weight, Mistake::Base(&BASES[place]))
}

fn base(name: &str) -> Option<&'static Base> {
    BASES.iter().find(|base| base.name == name)
}

fn matter(model: &Model) -> f64 {
    model.budget().cold + model.budget().massive_matter
}

fn number(parameter: ParameterId, value: f64) -> (ParameterId, Setting) {
    (parameter, Setting::Number(value))
}

/// A model of matter, dark energy and nothing else, with these values.
fn simple(name: &str, h0_per_s: f64, matter: f64, dark: Option<f64>) -> Option<Other> {
    let mut settings = vec![number(id::H0, h0_per_s), number(id::OMEGA_M, matter)];
    settings.extend(dark.map(|dark| number(id::OMEGA_DE, dark)));
    Some(Other {
        base: base(name)?,
        settings,
    })
}

/// The same model with everything it quotes, some of it replaced; none where
/// its dark energy is a function, which cannot be handed on.
fn same_but(model: &Model, replaced: Vec<(ParameterId, Setting)>) -> Option<Other> {
    let gives_way = |old: ParameterId| {
        replaced.iter().any(|(new, _)| {
            let moved = matches!(old, id::Z_STAR | id::Z_DRAG) && moves_recombination(*new);
            subject(*new) == subject(old) || moved
        })
    };
    let kept = model.parameters().iter().filter(|(old, _)| !gives_way(*old));
    let mut settings: Vec<(ParameterId, Setting)> = kept.cloned().collect();
    if settings
        .iter()
        .any(|(_, setting)| matches!(setting, Setting::Function(_)))
    {
        return None;
    }
    settings.extend(replaced);
    Some(Other {
        base: model.base(),
        settings,
    })
}

fn has_radiation(model: &Model) -> bool {
    model.budget().photons > 0.0
}

fn is_published(model: &Model) -> bool {
    !matches!(
        model.base().name,
        "flat" | "general" | "einstein_de_sitter" | "milne" | "de_sitter" | "concordance"
    )
}

fn no_radiation(model: &Model) -> Option<Other> {
    if !has_radiation(model) {
        return None;
    }
    let budget = model.budget();
    if budget.curvature == 0.0 {
        simple("flat", budget.h0_per_s, matter(model), None)
    } else {
        simple("general", budget.h0_per_s, matter(model), Some(budget.dark))
    }
}

fn no_neutrino_mass(model: &Model) -> Option<Other> {
    if model.budget().massive.is_empty() {
        return None;
    }
    same_but(model, vec![(id::M_NU, Setting::List(vec![0.0; 3]))])
}

fn three_neutrinos(model: &Model) -> Option<Other> {
    if !has_radiation(model) {
        return None;
    }
    same_but(model, vec![number(id::NEFF, 3.0)])
}

fn einstein_de_sitter(model: &Model) -> Option<Other> {
    simple("flat", model.budget().h0_per_s, 1.0, None)
}

fn open_without_dark_energy(model: &Model) -> Option<Other> {
    if model.budget().dark == 0.0 {
        return None;
    }
    simple("general", model.budget().h0_per_s, matter(model), Some(0.0))
}

fn flat_for_curved(model: &Model) -> Option<Other> {
    if model.budget().curvature == 0.0 {
        return None;
    }
    simple("flat", model.budget().h0_per_s, matter(model), None)
}

fn flat_by_matter(model: &Model) -> Option<Other> {
    if model.budget().curvature == 0.0 {
        return None;
    }
    simple("flat", model.budget().h0_per_s, 1.0 - model.budget().dark, None)
}

fn seven_tenths_dark(model: &Model) -> Option<Other> {
    if is_published(model) {
        return same_but(model, vec![number(id::OMEGA_DE, 0.7)]);
    }
    simple("general", model.budget().h0_per_s, matter(model), Some(0.7))
}

fn cosmological_constant(model: &Model) -> Option<Other> {
    let is_state = |parameter: ParameterId| matches!(parameter, id::W0 | id::WA | id::W);
    let (state, kept): (Vec<_>, Vec<_>) = model
        .parameters()
        .iter()
        .cloned()
        .partition(|(parameter, _)| is_state(*parameter));
    (!state.is_empty()).then(|| Other {
        base: model.base(),
        settings: kept,
    })
}

fn three_tenths(model: &Model) -> Option<Other> {
    simple("flat", model.budget().h0_per_s, 0.3, None)
}

fn round(value: f64, step: f64) -> f64 {
    (value / step).round() * step
}

fn rounded_to_two(model: &Model) -> Option<Other> {
    rounded(model, 1.0, 0.01)
}

fn rounded_to_three(model: &Model) -> Option<Other> {
    rounded(model, 0.1, 0.001)
}

fn rounded(model: &Model, rate: f64, fraction: f64) -> Option<Other> {
    let h0 = round(model.budget().h0_per_s / KM_PER_S_PER_MPC, rate) * KM_PER_S_PER_MPC;
    simple("flat", h0, round(matter(model), fraction), None)
}

/// A stale or rounded H0, with the matter as a fraction kept.
fn with_h0(model: &Model, km_per_s_per_mpc: f64) -> Option<Other> {
    let h0 = number(id::H0, km_per_s_per_mpc * KM_PER_S_PER_MPC);
    if !is_published(model) {
        return None;
    }
    same_but(model, vec![h0, number(id::OMEGA_M, matter(model))])
}

const KEPT: &str = "H0 = 70 km/s/Mpc with the same Ωm";

/// The table.
pub static SLIPS: &[Slip] = &[
    stale("H0 = 50 km/s/Mpc", 5.0, 50.0),
    stale("H0 = 65 km/s/Mpc", 4.0, 65.0),
    stale("H0 = 67 km/s/Mpc", 4.0, 67.0),
    stale("H0 = 67.4 km/s/Mpc", 6.0, 67.4),
    stale("H0 = 67.7 km/s/Mpc", 3.0, 67.7),
    stale("H0 = 68 km/s/Mpc", 4.0, 68.0),
    stale("H0 = 70 km/s/Mpc", 12.0, 70.0),
    stale("H0 = 71 km/s/Mpc", 4.0, 71.0),
    stale("H0 = 72 km/s/Mpc", 5.0, 72.0),
    stale("H0 = 73 km/s/Mpc", 6.0, 73.0),
    stale("H0 = 74 km/s/Mpc", 3.0, 74.0),
    stale("H0 = 75 km/s/Mpc", 5.0, 75.0),
    stale("H0 = 100 km/s/Mpc", 5.0, 100.0),
    slip(
        "other-H0",
        KEPT,
        8.0,
        Mistake::Model(|model| with_h0(model, 70.0)),
    ),
    slip(
        "other-H0",
        "H0 = 73 km/s/Mpc with the same Ωm",
        5.0,
        Mistake::Model(|model| with_h0(model, 73.0)),
    ),
    slip(
        "other-H0",
        "H0 = 67.4 km/s/Mpc with the same Ωm",
        3.0,
        Mistake::Model(|model| with_h0(model, 67.4)),
    ),
    slip(
        "other-H0",
        "H0 = 100 km/s/Mpc with the same Ωm",
        3.0,
        Mistake::Model(|model| with_h0(model, 100.0)),
    ),
    other("the model planck2018", 8.0, 2),
    other("the model planck2018_bao", 4.0, 3),
    other("the model planck2015", 6.0, 4),
    other("the model planck2013", 5.0, 5),
    other("the model wmap9", 5.0, 6),
    other("the model wmap7", 4.0, 7),
    other("the model wmap5", 3.0, 8),
    other("the model wmap3", 3.0, 9),
    other("the model wmap1", 3.0, 10),
    other("the model act_dr4", 3.0, 11),
    other("the model des_y3", 3.0, 12),
    other("the model desi_dr2", 3.0, 13),
    other(
        "the concordance model: flat, Ωm = 0.3, H0 = 70 km/s/Mpc",
        12.0,
        14,
    ),
    slip(
        "other-model",
        "a flat model with Ωm = 0.3 and the same H0",
        5.0,
        Mistake::Model(three_tenths),
    ),
    slip(
        "rounded-input",
        "a flat model with H0 and Ωm rounded to two digits",
        8.0,
        Mistake::Model(rounded_to_two),
    ),
    slip(
        "rounded-input",
        "a flat model with H0 and Ωm rounded to three digits",
        8.0,
        Mistake::Model(rounded_to_three),
    ),
    slip(
        "no-radiation",
        "radiation left out",
        25.0,
        Mistake::Model(no_radiation),
    ),
    slip(
        "no-neutrino-mass",
        "neutrinos without mass",
        8.0,
        Mistake::Model(no_neutrino_mass),
    ),
    slip(
        "Neff-3",
        "three species of neutrinos exactly",
        6.0,
        Mistake::Model(three_neutrinos),
    ),
    slip(
        "no-dark-energy",
        "an Einstein–de Sitter model: flat, all matter",
        15.0,
        Mistake::Model(einstein_de_sitter),
    ),
    slip(
        "no-dark-energy",
        "dark energy left out: an open model",
        12.0,
        Mistake::Model(open_without_dark_energy),
    ),
    slip(
        "curvature-ignored",
        "curvature left out, with the same Ωm",
        20.0,
        Mistake::Model(flat_for_curved),
    ),
    slip(
        "curvature-ignored",
        "curvature left out, with the same ΩΛ",
        8.0,
        Mistake::Model(flat_by_matter),
    ),
    slip(
        "curvature-added",
        "ΩΛ = 0.7 beside this Ωm, with the rest left as curvature",
        5.0,
        Mistake::Model(seven_tenths_dark),
    ),
    slip(
        "constant-dark-energy",
        "a cosmological constant in place of this dark energy",
        12.0,
        Mistake::Model(cosmological_constant),
    ),
];

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_words_name_the_model_that_is_meant() {
        for slip in SLIPS {
            if let Mistake::Base(base) = slip.mistake {
                let named = slip.about.contains(base.name);
                assert!(named, "{} is {}", slip.about, base.name);
            }
        }
    }
}
