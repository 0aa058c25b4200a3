//! Cosmological models: parameters, published sets, and the model in force.

use crate::dimension::Dimension;
use std::fmt;
use std::sync::Arc;

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

/// All parameters.
pub static PARAMETERS: &[Parameter] = &[];

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

/// All bases.
pub static BASES: &[Base] = &[];

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
pub fn admissible(base: &Base, given: &[ParameterId]) -> Result<(), ModelError> {
    let _ = (base, given);
    Ok(())
}

/// The model of `base` with some parameters replaced.
pub fn build(base: &Base, settings: &[(ParameterId, Setting)]) -> Result<Model, ModelError> {
    let _ = (base, settings);
    Ok(Model {})
}

/// A cosmological model, ready to compute with.
pub struct Model {}

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
