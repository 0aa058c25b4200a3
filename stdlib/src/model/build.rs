//! From a base and the values given to a model: which combinations make
//! sense, what replaces what, and the budget that follows.

use super::budget::{self, Budget};
use super::parameters::{PARAMETERS, Subject, id, moves_recombination, named, subject};
use super::{Base, Model, ModelError, ParameterId, Setting, Takes};
use crate::constants::values::KM_PER_S_PER_MPC;

/// Values of this size are taken for a slip of unit or of sign.
const ABSURD: f64 = 1e6;

/// Hubble constants that can be meant, in km/s/Mpc.
const H0_RANGE: (f64, f64) = (1e-3, 1e6);

/// What a base lets one change.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Family {
    /// Starts from nothing; dark energy closes the budget.
    Flat,
    /// Starts from nothing; ΩΛ or Ωk must be given.
    General,
    /// A textbook model, defined by its matter and dark energy.
    Textbook,
    /// A published set.
    Published,
}

fn family(base: &Base) -> Family {
    match base.name {
        "flat" => Family::Flat,
        "general" => Family::General,
        "einstein_de_sitter" | "milne" | "de_sitter" => Family::Textbook,
        _ => Family::Published,
    }
}

fn error(parameter: ParameterId, message: String) -> ModelError {
    ModelError {
        message,
        parameter: Some(parameter),
    }
}

fn name(parameter: ParameterId) -> &'static str {
    PARAMETERS
        .get(parameter)
        .map_or("this parameter", |parameter| parameter.name)
}

/// See [`super::admissible`].
pub fn admissible(base: &Base, given: &[ParameterId]) -> Result<(), ModelError> {
    for (place, &parameter) in given.iter().enumerate() {
        if parameter >= PARAMETERS.len() {
            return Err(error(parameter, "a model has no such parameter".to_owned()));
        }
        compatible_with_earlier(parameter, &given[..place])?;
        compatible_with_base(base, parameter)?;
    }
    let listed = base.parameters.iter().filter_map(|(name, _, _)| named(name));
    let replaced = |listed: &ParameterId| given.iter().any(|&new| replaces(new, *listed));
    let mut all: Vec<ParameterId> = listed.filter(|listed| !replaced(listed)).collect();
    all.extend(given);
    complete(base, &all)
}

fn compatible_with_earlier(parameter: ParameterId, earlier: &[ParameterId]) -> Result<(), ModelError> {
    for &other in earlier {
        if other == parameter {
            return Err(error(parameter, format!("{} is given twice", name(parameter))));
        }
        let both = format!("{} and {}", name(other), name(parameter));
        let message = match (subject(parameter), subject(other)) {
            (Subject::Baryons, Subject::Baryons) => {
                format!("{both} both say how much is baryonic: give one of them")
            }
            (Subject::Matter, Subject::Matter) => {
                format!("{both} both say how much matter there is: give one of them")
            }
            (Subject::Closure, Subject::Closure) => {
                format!("{both} close the budget twice over: give one of them, the other follows")
            }
            _ if is_state(parameter) && is_state(other) && (parameter == id::W || other == id::W) => {
                format!("{both} both give the equation of state of dark energy: give one of them")
            }
            _ => continue,
        };
        return Err(error(parameter, message));
    }
    Ok(())
}

fn is_state(parameter: ParameterId) -> bool {
    matches!(parameter, id::W0 | id::WA | id::W)
}

fn compatible_with_base(base: &Base, parameter: ParameterId) -> Result<(), ModelError> {
    let closes = subject(parameter) == Subject::Closure;
    let defines = closes
        || is_state(parameter)
        || subject(parameter) == Subject::Matter
        || matches!(parameter, id::T_CMB | id::NEFF | id::M_NU);
    match family(base) {
        Family::Flat if closes => Err(error(
            parameter,
            format!(
                "dark energy closes the budget of a flat model: leave {} out, or start from general",
                name(parameter)
            ),
        )),
        Family::Textbook if defines => Err(error(
            parameter,
            format!(
                "{} is part of what makes {}: start from flat or general",
                name(parameter),
                base.name
            ),
        )),
        Family::Flat | Family::General | Family::Textbook | Family::Published => Ok(()),
    }
}

/// Whether all that a model needs is among `all`.
fn complete(base: &Base, all: &[ParameterId]) -> Result<(), ModelError> {
    let has = |parameter: ParameterId| all.contains(&parameter);
    let settles = |wanted: Subject| all.iter().any(|&parameter| subject(parameter) == wanted);
    let lacks = |message: String| ModelError {
        message,
        parameter: None,
    };
    if !has(id::H0) {
        return Err(lacks(format!("{} needs H0", base.name)));
    }
    if !settles(Subject::Matter) {
        return Err(lacks(format!("{} needs Ωm", base.name)));
    }
    for cold in [id::OMEGA_C, id::PHYSICAL_C] {
        if has(cold) && !settles(Subject::Baryons) {
            let message = format!("{} is dark matter alone: give Ωb or ωb as well", name(cold));
            return Err(error(cold, message));
        }
    }
    if family(base) == Family::General && !settles(Subject::Closure) {
        return Err(lacks(
            "general needs ΩΛ or Ωk; flat closes the budget by itself".to_owned(),
        ));
    }
    for neutrino in [id::NEFF, id::M_NU] {
        if has(neutrino) && !has(id::T_CMB) {
            let message = format!(
                "{} needs T_CMB: neutrinos follow the temperature of the photons",
                name(neutrino)
            );
            return Err(error(neutrino, message));
        }
    }
    Ok(())
}

/// Whether giving `new` takes a base's `listed` parameter away.
fn replaces(new: ParameterId, listed: ParameterId) -> bool {
    if subject(new) == subject(listed)
        || (new == id::W && is_state(listed))
        || (listed == id::W && is_state(new))
    {
        return true;
    }
    matches!(listed, id::Z_STAR | id::Z_DRAG) && moves_recombination(new)
}

/// See [`super::build`].
pub fn build(base: &'static Base, settings: &[(ParameterId, Setting)]) -> Result<Model, ModelError> {
    let given: Vec<ParameterId> = settings.iter().map(|(parameter, _)| *parameter).collect();
    admissible(base, &given)?;
    let parameters = merge(base, settings);
    for (parameter, setting) in &parameters {
        check(*parameter, setting)?;
    }
    let budget: Budget = budget::settle(&parameters)?;
    let expansion = budget::expansion(&budget, &parameters)?;
    Ok(Model::new(base, parameters, budget, expansion))
}

/// The base's parameters that stay and those given, in the order of
/// [`PARAMETERS`].
fn merge(base: &Base, settings: &[(ParameterId, Setting)]) -> Vec<(ParameterId, Setting)> {
    let mut all: Vec<(ParameterId, Setting)> = Vec::new();
    for (listed, value, _) in base.parameters {
        let Some(listed) = named(listed) else { continue };
        if settings.iter().any(|(new, _)| replaces(*new, listed)) {
            continue;
        }
        // A list stands in a base as one row for each element.
        if PARAMETERS[listed].takes == Takes::List {
            if let Some((_, Setting::List(list))) = all.iter_mut().find(|(known, _)| *known == listed) {
                list.push(*value);
            } else {
                all.push((listed, Setting::List(vec![*value])));
            }
        } else {
            all.push((listed, Setting::Number(*value)));
        }
    }
    all.extend(settings.iter().cloned());
    all.sort_by_key(|(parameter, _)| *parameter);
    all
}

/// Whether a value can be meant.
fn check(parameter: ParameterId, setting: &Setting) -> Result<(), ModelError> {
    let kind = match (PARAMETERS[parameter].takes, setting) {
        (Takes::Number, Setting::Number(value)) => return check_number(parameter, *value),
        (Takes::List, Setting::Number(value)) => return check_masses(&[*value]),
        (Takes::List, Setting::List(values)) => return check_masses(values),
        (Takes::Function, Setting::Function(_)) => return Ok(()),
        (Takes::Number, _) => "one number",
        (Takes::List, _) => "a list of numbers",
        (Takes::Function, _) => "a function of z",
    };
    Err(error(parameter, format!("{} takes {kind}", name(parameter))))
}

fn check_number(parameter: ParameterId, value: f64) -> Result<(), ModelError> {
    let must_be = |what: &str| {
        Err(error(
            parameter,
            format!("{} must be {what}, and is {value}", name(parameter)),
        ))
    };
    if !value.is_finite() {
        return must_be("a finite number");
    }
    match parameter {
        id::H0 if value <= 0.0 => Err(error(
            parameter,
            "H0 must be positive: zij describes models that expand today".to_owned(),
        )),
        id::SIGMA8 if value <= 0.0 => must_be("positive"),
        id::H0 if !(H0_RANGE.0..=H0_RANGE.1).contains(&(value / KM_PER_S_PER_MPC)) => Err(error(
            parameter,
            format!(
                "H0 is {:.1e} km/s/Mpc: is its unit meant?",
                value / KM_PER_S_PER_MPC
            ),
        )),
        id::H0 => Ok(()),
        id::T_CMB if value < 0.0 => Err(error(parameter, "T_CMB must not be negative".to_owned())),
        id::OMEGA_M
        | id::OMEGA_CB
        | id::OMEGA_B
        | id::OMEGA_C
        | id::PHYSICAL_M
        | id::PHYSICAL_B
        | id::PHYSICAL_C
        | id::NEFF
        | id::Z_STAR
        | id::Z_DRAG
            if value < 0.0 =>
        {
            must_be("zero or more")
        }
        _ if value.abs() > ABSURD => must_be("within a million of zero"),
        _ => Ok(()),
    }
}

fn check_masses(values: &[f64]) -> Result<(), ModelError> {
    if values.len() > 3 {
        let message = format!("mν takes the masses of three neutrinos, and has {}", values.len());
        return Err(error(id::M_NU, message));
    }
    if values.iter().all(|mass| mass.is_finite() && *mass >= 0.0) {
        Ok(())
    } else {
        Err(error(
            id::M_NU,
            "a neutrino's mass must be zero or more".to_owned(),
        ))
    }
}
