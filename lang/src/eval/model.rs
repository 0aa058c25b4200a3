//! Models: built when their settings are known.

use super::body::{Body, Lanes};
use super::code::{Code, ModelKey};
use super::plan::BodyPlan;
use super::value::Value;
use std::sync::Arc;
use zij_stdlib::model::{self, Base, EquationOfState, Model, ModelError, ParameterId, Setting};

/// A base with the values given to its parameters.
pub(super) struct Settings {
    base: &'static Base,
    given: Vec<(ParameterId, Setting)>,
    /// The bits of what was given: equal bits, equal models.
    bits: Vec<u64>,
}

impl PartialEq for Settings {
    fn eq(&self, other: &Settings) -> bool {
        std::ptr::eq(self.base, other.base) && self.bits == other.bits
    }
}

impl Settings {
    /// The base alone.
    pub fn new(base: &'static Base) -> Settings {
        Settings {
            base,
            given: Vec::new(),
            bits: Vec::new(),
        }
    }

    /// Gives a number or a list to a parameter.
    pub fn push(&mut self, id: ParameterId, value: &Value) {
        let numbers = value.numbers();
        self.bits.extend([id as u64, numbers.len() as u64]);
        self.bits.extend(numbers.iter().map(|number| number.to_bits()));
        match value {
            Value::Scalar(number) => self.given.push((id, Setting::Number(*number))),
            Value::Series(list) => self.given.push((id, Setting::List(list.to_vec()))),
            Value::Model(_) => {}
        }
    }

    /// The model, with a function given to one more parameter.
    pub fn build(&self, function: Option<(ParameterId, EquationOfState)>) -> Result<Arc<Model>, ModelError> {
        let mut given = self.given.clone();
        given.extend(function.map(|(id, function)| (id, Setting::Function(function))));
        model::build(self.base, &given).map(Arc::new)
    }

    /// The model, or the same one built before.
    pub fn build_or_recall(&self, code: &Code<'_>) -> Result<Arc<Model>, ModelError> {
        let key: ModelKey = (self.base.name, self.bits.clone());
        if let Some(model) = code.known_model(&key) {
            return Ok(model);
        }
        let model = self.build(None)?;
        code.remember_model(key, &model);
        Ok(model)
    }
}

/// `w(z) = …` as a function that outlives the evaluation.
pub(super) fn equation_of_state(
    code: &Code<'_>,
    plan: &Arc<BodyPlan>,
    captures: Vec<Value>,
) -> EquationOfState {
    let owned = code.owned();
    let plan = Arc::clone(plan);
    Arc::new(move |z| {
        let code = owned.code();
        let mut body = Body::new(&code, &plan, captures.clone(), None)?;
        let w = body.at(z);
        w.is_finite().then_some(w)
    })
}
