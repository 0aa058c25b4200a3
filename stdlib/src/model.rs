//! Cosmological models: parameters, published sets, and the model in force.
//!
//! A [`Base`] with some [`Setting`]s becomes a [`Model`] by [`build`]: the
//! settings replace what the base lists ([`parameters`] says what replaces
//! what), [`budget`] adds up what fills the universe, [`expansion`] is the
//! Friedmann equation and [`history`] its integrals, tabulated on first use.

pub mod budget;
mod build;
pub mod expansion;
pub mod history;
pub mod neutrino;
pub mod parameters;
mod published;

pub use parameters::PARAMETERS;
pub use published::BASES;

use crate::cosmology::early::Fits;
use crate::cosmology::growth::GrowthCell;
use crate::cosmology::power::SpectrumCell;
use crate::dimension::Dimension;
use budget::{Budget, Values};
use expansion::Expansion;
use history::{History, Kind, Track};
use parameters::id;
use std::fmt;
use std::sync::{Arc, OnceLock};

/// A parameter of a model.
pub struct Parameter {
    /// Its name as `help` and the JSON show it (`H0`, `Ωm`).
    pub name: &'static str,
    /// Other spellings (`Omega_m`).
    pub aliases: &'static [&'static str],
    /// Its dimension.
    pub dimension: Dimension,
    /// What kind of value it takes.
    pub takes: Takes,
    /// The unit it is quoted in.
    pub usual_unit: &'static str,
    /// What it is.
    pub about: &'static str,
}

/// What kind of value a parameter takes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Takes {
    /// One number.
    Number,
    /// A list of numbers (neutrino masses).
    List,
    /// A function of z, written `w(z) = …`.
    Function,
}

/// Index into [`PARAMETERS`].
pub type ParameterId = usize;

/// A named model that `with` may start from: a published set, a textbook
/// model, or `flat` and `general`, which start from nothing.
pub struct Base {
    /// Its name in the language.
    pub name: &'static str,
    /// What it is.
    pub about: &'static str,
    /// Paper and table.
    pub source: &'static str,
    /// The parameters it lists: value in SI and standard uncertainty.
    pub parameters: &'static [(&'static str, f64, f64)],
}

/// A dark-energy equation of state given by the user.
pub type EquationOfState = Arc<dyn Fn(f64) -> Option<f64> + Send + Sync>;

/// A value given to a parameter by `with`.
#[derive(Clone)]
pub enum Setting {
    /// One number, in SI.
    Number(f64),
    /// A list, in SI.
    List(Vec<f64>),
    /// A function of z.
    Function(EquationOfState),
}

/// Whether `base` may be given these parameters together, before their values
/// are known. The error is a sentence for the user.
///
/// # Errors
/// Where two of them settle the same thing, one contradicts the base, or
/// something is still missing.
pub fn admissible(base: &Base, given: &[ParameterId]) -> Result<(), ModelError> {
    build::admissible(base, given)
}

/// The model of `base` with some parameters replaced.
///
/// # Errors
/// As [`admissible`]; and where a value is absurd or the parts outweigh the
/// whole.
pub fn build(base: &'static Base, settings: &[(ParameterId, Setting)]) -> Result<Model, ModelError> {
    build::build(base, settings)
}

/// A cosmological model, ready to compute with.
pub struct Model {
    base: &'static Base,
    parameters: Vec<(ParameterId, Setting)>,
    budget: Budget,
    expansion: Expansion,
    history: OnceLock<Result<History, DomainError>>,
    growth: GrowthCell,
    spectrum: SpectrumCell,
    fits: Fits,
}

impl Model {
    fn new(
        base: &'static Base,
        parameters: Vec<(ParameterId, Setting)>,
        budget: Budget,
        expansion: Expansion,
    ) -> Model {
        Model {
            base,
            parameters,
            budget,
            expansion,
            history: OnceLock::new(),
            growth: GrowthCell::default(),
            spectrum: SpectrumCell::default(),
            fits: Fits::default(),
        }
    }

    /// The base it was built from.
    pub fn base(&self) -> &'static Base {
        self.base
    }

    /// All parameters in force that were quoted, in the order of
    /// [`PARAMETERS`].
    pub fn parameters(&self) -> &[(ParameterId, Setting)] {
        &self.parameters
    }

    /// What fills it.
    pub fn budget(&self) -> &Budget {
        &self.budget
    }

    /// Its Friedmann equation.
    pub fn expansion(&self) -> &Expansion {
        &self.expansion
    }

    /// The number quoted for a parameter, if one is.
    pub fn quoted(&self, parameter: ParameterId) -> Option<f64> {
        Values(&self.parameters).number(parameter)
    }

    /// What the model leaves out or takes for granted, and which fits it was
    /// asked for so far, as sentences.
    pub fn notes(&self) -> Vec<String> {
        let mut notes = Vec::new();
        let budget = &self.budget;
        if budget.photons == 0.0 {
            notes.push("no radiation (T_CMB = 0 K)".to_owned());
        } else {
            if self.quoted(id::NEFF).is_none() {
                notes.push(format!("Neff = {} assumed", budget::STANDARD_NEFF));
            }
            if budget.massive.is_empty() {
                notes.push("neutrinos without mass".to_owned());
            }
        }
        if let Ok(history) = self.history() {
            match history.past {
                history::Edge::Open => {}
                history::Edge::Turn(s) => {
                    notes.push(format!("no big bang: it bounced at z = {:.4}", s - 1.0))
                }
                history::Edge::Undefined(s) => {
                    notes.push(format!("w(z) has no value beyond z = {:.4}", s - 1.0))
                }
            }
            match history.future {
                history::Edge::Open => {}
                history::Edge::Turn(s) => {
                    notes.push(format!("it turns round at z = {:.4} and recollapses", s - 1.0))
                }
                history::Edge::Undefined(s) => {
                    notes.push(format!("w(z) has no value below z = {:.4}", s - 1.0))
                }
            }
        }
        notes.extend(self.fits.notes());
        notes
    }

    /// From where to where it expands.
    #[inline]
    pub(crate) fn history(&self) -> Result<&History, DomainError> {
        let history = self.history.get_or_init(|| History::new(&self.expansion));
        history.as_ref().map_err(Clone::clone)
    }

    /// Its linear growth.
    pub(crate) fn growth(&self) -> &GrowthCell {
        &self.growth
    }

    /// The fits it was asked for.
    pub(crate) fn fits(&self) -> &Fits {
        &self.fits
    }

    /// Its linear power spectrum.
    pub(crate) fn power_cell(&self) -> &SpectrumCell {
        &self.spectrum
    }

    /// One of its integrals.
    #[inline]
    pub(crate) fn track(&self, kind: Kind) -> Result<&Track, DomainError> {
        self.history()?.track(&self.expansion, kind)
    }
}

/// Why a model cannot be built.
#[derive(Clone, Debug, PartialEq)]
pub struct ModelError {
    /// A sentence in lower case without a full stop.
    pub message: String,
    /// The parameter to point at, if it is one.
    pub parameter: Option<ParameterId>,
}

/// Why a value does not exist.
#[derive(Clone, Debug, PartialEq)]
pub struct DomainError(pub Box<str>);

impl fmt::Display for DomainError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.0)
    }
}

impl std::error::Error for DomainError {}
