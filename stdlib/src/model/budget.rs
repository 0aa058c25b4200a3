//! What fills a model, in units of the critical density today.

use super::expansion::{Dark, Expansion, Given, Species, State};
use super::parameters::id;
use super::{ModelError, ParameterId, Setting};
use crate::constants::values::{BOLTZMANN, GRAVITATION, KM_PER_S_PER_MPC, RADIATION_DENSITY, SPEED_OF_LIGHT};
use std::f64::consts::PI;

/// Effective number of neutrinos where T_CMB is given and nothing else, as in
/// Planck 2018 VI: three species heated a little by e⁺e⁻ annihilation
/// (Mangano et al. 2005, Nucl. Phys. B 729, 221).
pub const STANDARD_NEFF: f64 = 3.046;
/// Parts of the budget larger than this would leave today's expansion rate,
/// their sum, to rounding.
const MOST: f64 = 4e6;
/// A curvature smaller than this is rounding of the budget's sum.
const ROUNDING: f64 = 4.0 * f64::EPSILON;

/// The budget of a model today.
#[derive(Clone, Debug)]
pub struct Budget {
    /// Hubble constant, 1/s.
    pub h0_per_s: f64,
    /// H0/(100 km/s/Mpc).
    pub h: f64,
    /// Temperature of the microwave background, K.
    pub t_cmb_k: f64,
    /// Effective number of neutrino species.
    pub neff: f64,
    /// Photons.
    pub photons: f64,
    /// Massless neutrinos.
    pub massless: f64,
    /// Neutrinos with mass.
    pub massive: Vec<Species>,
    /// Energy density today of those that are matter today.
    pub massive_matter: f64,
    /// Energy density today of all massive ones.
    pub massive_all: f64,
    /// Baryons and cold dark matter.
    pub cold: f64,
    /// Baryons, if the model says.
    pub baryons: Option<f64>,
    /// Dark energy.
    pub dark: f64,
    /// Curvature.
    pub curvature: f64,
}

/// The values in force, by parameter.
pub struct Values<'a>(pub &'a [(ParameterId, Setting)]);

impl Values<'_> {
    /// The number given to a parameter.
    pub fn number(&self, parameter: ParameterId) -> Option<f64> {
        self.0.iter().find_map(|(id, setting)| match setting {
            Setting::Number(value) if *id == parameter => Some(*value),
            Setting::Number(_) | Setting::List(_) | Setting::Function(_) => None,
        })
    }

    /// The rest energies of the neutrinos, in J.
    fn masses(&self) -> Vec<f64> {
        let given = self.0.iter().find(|(parameter, _)| *parameter == id::M_NU);
        match given.map(|(_, setting)| setting) {
            Some(Setting::List(list)) => list.clone(),
            Some(Setting::Number(mass)) => vec![*mass],
            Some(Setting::Function(_)) | None => Vec::new(),
        }
    }
}

/// The density of photons in units of the critical one.
fn photon_density(t_cmb_k: f64, h0_per_s: f64) -> f64 {
    let energy = RADIATION_DENSITY * (t_cmb_k * t_cmb_k) * (t_cmb_k * t_cmb_k);
    let critical = 3.0 * h0_per_s * h0_per_s / (8.0 * PI * GRAVITATION);
    energy / (SPEED_OF_LIGHT * SPEED_OF_LIGHT) / critical
}

/// Temperature of a neutrino species today: each of three carries a third of
/// Neff (Komatsu et al. 2011, sec. 3.3).
fn neutrino_temperature(t_cmb_k: f64, neff: f64) -> f64 {
    libm::cbrt(4.0 / 11.0) * libm::sqrt(libm::sqrt(neff / 3.0)) * t_cmb_k
}

/// The budget that the parameters in force make.
///
/// # Errors
/// Where baryons or neutrinos outweigh the matter they are part of.
pub fn settle(parameters: &[(ParameterId, Setting)]) -> Result<Budget, ModelError> {
    let values = Values(parameters);
    let h0_per_s = values.number(id::H0).unwrap_or(f64::NAN);
    let h = h0_per_s / (100.0 * KM_PER_S_PER_MPC);
    let t_cmb_k = values.number(id::T_CMB).unwrap_or(0.0);
    let default_neff = if t_cmb_k > 0.0 { STANDARD_NEFF } else { 0.0 };
    let neff = values.number(id::NEFF).unwrap_or(default_neff);
    let photons = photon_density(t_cmb_k, h0_per_s);
    let neutrinos = Neutrinos::new(&values.masses(), t_cmb_k, neff, photons)?;
    let (cold, baryons) = matter(&values, h, neutrinos.matter)?;
    let massive_all = neutrinos
        .massive
        .iter()
        .map(|species| species.at(1.0))
        .fold(0.0, |sum, one| sum + one);
    let filled = photons + neutrinos.massless + massive_all + cold;
    if filled > MOST {
        return Err(ModelError {
            message: format!(
                "matter and radiation would be {filled:.1e} times the critical density: is H0 meant so small?"
            ),
            parameter: Some(id::H0),
        });
    }
    let (dark, curvature) = close(&values, filled);
    if !(dark.is_finite() && curvature.is_finite()) {
        return Err(ModelError {
            message: "these values do not add up to a finite density".to_owned(),
            parameter: None,
        });
    }
    Ok(Budget {
        h0_per_s,
        h,
        t_cmb_k,
        neff,
        photons,
        massless: neutrinos.massless,
        massive: neutrinos.massive,
        massive_matter: neutrinos.matter,
        massive_all,
        cold,
        baryons,
        dark,
        curvature,
    })
}

/// Dark energy and curvature, of which one is given or neither.
fn close(values: &Values<'_>, filled: f64) -> (f64, f64) {
    let (dark, curvature) = match (values.number(id::OMEGA_DE), values.number(id::OMEGA_K)) {
        (Some(dark), _) => (dark, (1.0 - filled) - dark),
        (None, Some(curvature)) => ((1.0 - filled) - curvature, curvature),
        (None, None) => (1.0 - filled, 0.0),
    };
    let scale = 1.0 + filled.abs() + dark.abs();
    let settled = |share: f64| {
        if share.abs() < ROUNDING * scale {
            0.0
        } else {
            share
        }
    };
    (settled(dark), settled(curvature))
}

struct Neutrinos {
    massless: f64,
    massive: Vec<Species>,
    matter: f64,
}

impl Neutrinos {
    fn new(masses: &[f64], t_cmb_k: f64, neff: f64, photons: f64) -> Result<Neutrinos, ModelError> {
        let cube_root = libm::cbrt(4.0 / 11.0);
        let all = 7.0 / 8.0 * (4.0 / 11.0) * cube_root * neff * photons;
        let thermal = BOLTZMANN * neutrino_temperature(t_cmb_k, neff);
        let with_mass: Vec<f64> = masses.iter().copied().filter(|mass| *mass > 0.0).collect();
        if !with_mass.is_empty() && thermal == 0.0 {
            return Err(ModelError {
                message: "neutrinos with mass need T_CMB and Neff above zero".to_owned(),
                parameter: Some(id::M_NU),
            });
        }
        let massive = group(&with_mass, all / 3.0, thermal);
        let matter = massive
            .iter()
            .filter(|species| species.is_matter())
            .map(|species| species.at(1.0))
            .fold(0.0, |sum, one| sum + one);
        let massless = all * (3 - with_mass.len()) as f64 / 3.0;
        Ok(Neutrinos {
            massless,
            massive,
            matter,
        })
    }
}

/// One [`Species`] for all neutrinos of equal mass.
fn group(masses: &[f64], each: f64, thermal: f64) -> Vec<Species> {
    let mut species: Vec<Species> = Vec::new();
    for mass in masses {
        let mass_over_temperature = mass / thermal;
        match species
            .iter_mut()
            .find(|known| known.mass_over_temperature == mass_over_temperature)
        {
            Some(known) => known.massless_density += each,
            None => species.push(Species {
                massless_density: each,
                mass_over_temperature,
            }),
        }
    }
    species
}

/// Cold matter and baryons.
fn matter(values: &Values<'_>, h: f64, neutrinos: f64) -> Result<(f64, Option<f64>), ModelError> {
    let square = h * h;
    let physical = |parameter| values.number(parameter).map(|value| value / square);
    let baryons = values.number(id::OMEGA_B).or_else(|| physical(id::PHYSICAL_B));
    let dark = values.number(id::OMEGA_C).or_else(|| physical(id::PHYSICAL_C));
    let total = values.number(id::OMEGA_M).or_else(|| physical(id::PHYSICAL_M));
    let cold = match (values.number(id::OMEGA_CB), dark, total) {
        (Some(cold), _, _) => cold,
        (None, Some(dark), _) => dark + baryons.unwrap_or(0.0),
        (None, None, Some(total)) => total - neutrinos,
        (None, None, None) => 0.0,
    };
    if cold < 0.0 {
        let message = format!("the neutrinos alone make Ων = {neutrinos:.4}, more than all the matter given");
        return Err(ModelError {
            message,
            parameter: Some(id::M_NU),
        });
    }
    match baryons {
        Some(baryons) if baryons > cold * (1.0 + 1e-12) => Err(ModelError {
            message: format!("baryons are Ωb = {baryons:.4}, more than the cold matter, Ωcb = {cold:.4}"),
            parameter: values
                .0
                .iter()
                .map(|(id, _)| *id)
                .find(|id| matches!(*id, id::OMEGA_B | id::PHYSICAL_B)),
        }),
        _ => Ok((cold, baryons)),
    }
}

/// The expansion rate of a budget.
///
/// # Errors
/// Where the equation of state is not finite.
pub fn expansion(budget: &Budget, parameters: &[(ParameterId, Setting)]) -> Result<Expansion, ModelError> {
    let values = Values(parameters);
    let function = parameters.iter().find_map(|(_, setting)| match setting {
        Setting::Function(function) => Some(function.clone()),
        Setting::Number(_) | Setting::List(_) => None,
    });
    let w0 = values.number(id::W0).unwrap_or(-1.0);
    let wa = values.number(id::WA).unwrap_or(0.0);
    let state = match function {
        Some(function) => State::Given(Box::new(Given::new(function))),
        None if wa != 0.0 => State::Linear(w0, wa),
        None if w0 == -1.0 => State::Lambda,
        None => State::Constant(w0),
    };
    Ok(Expansion {
        photons: budget.photons,
        massless: budget.massless,
        cold: budget.cold,
        curvature: budget.curvature,
        massive: budget.massive.clone(),
        dark: Dark {
            density: budget.dark,
            state,
        },
    })
}
