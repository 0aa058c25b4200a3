//! Models as written: where they start from and what they are given.

use super::environment::{self, Meaning, Space};
use super::form::Form;
use super::infer::COMOVING;
use super::typed::Typed;
use super::unify::Sort;
use super::{BindingId, Checker, Local, error};
use crate::ast::{self, Setting};
use std::sync::Arc;
use zij_stdlib::model::{self, BASES, Base, PARAMETERS, Parameter, ParameterId, Takes};

/// 100 km/s/Mpc in 1/s, of which h is the multiple.
const HUNDRED: f64 = 100.0 * zij_stdlib::constants::values::KM_PER_S_PER_MPC;

/// What a model written in the sheet starts from and gives.
#[derive(Clone)]
pub(super) struct Found {
    pub base: &'static Base,
    pub parent: Option<BindingId>,
    pub gives: Vec<ParameterId>,
}

/// The parameter of this spelling.
#[must_use]
pub fn parameter(name: &str) -> Option<(ParameterId, &'static Parameter)> {
    PARAMETERS
        .iter()
        .enumerate()
        .find(|(_, parameter)| parameter.name == name || parameter.aliases.contains(&name))
}

/// The published or textbook model of this name.
#[must_use]
pub fn base(name: &str) -> Option<&'static Base> {
    BASES.iter().find(|base| base.name == name)
}

impl Checker {
    /// Checks a model; `None` after an error.
    pub(super) fn check_model(&mut self, written: &ast::Model) -> Option<Found> {
        let start = self.model_start(&written.base);
        let mut gives = Vec::new();
        let mut spans = Vec::new();
        let outer = std::mem::take(&mut self.needs_model);
        let used_before = self.environment.model_used;
        let mut sound = true;
        for setting in &written.settings {
            match self.check_setting(setting) {
                Some(id) => {
                    if let Some(first) = gives.iter().position(|known| *known == id) {
                        let first: crate::source::Span = spans[first];
                        self.report(error::parameter_twice(&setting.name, first));
                        sound = false;
                    }
                    gives.push(id);
                    spans.push(setting.name.span);
                }
                None => sound = false,
            }
        }
        if std::mem::replace(&mut self.needs_model, outer) {
            let at = written
                .settings
                .first()
                .map_or(written.span, |setting| setting.value.span);
            self.environment.model_used = used_before;
            self.report(error::model_on_a_model(at));
            sound = false;
        }
        let (base, parent) = start?;
        if !sound {
            return None;
        }
        let all = self.all_given(parent, &gives);
        if let Err(objection) = model::admissible(base, &all) {
            let place = objection
                .parameter
                .and_then(|id| gives.iter().position(|known| *known == id));
            let span = place.map_or(written.span, |place| spans[place]);
            self.report(error::inadmissible_model(span, &objection.message));
            return None;
        }
        Some(Found { base, parent, gives })
    }

    fn model_start(&mut self, name: &ast::Name) -> Option<(&'static Base, Option<BindingId>)> {
        if let Some(id) = self.environment.latest(Space::Model, &name.node) {
            self.environment.binding(id).used.set(true);
            if !self.rests_on.contains(&id) {
                self.rests_on.push(id);
            }
            let Meaning::Model(model) = &self.environment.binding(id).meaning else {
                return None;
            };
            return Some((model.base, Some(id)));
        }
        if let Some(base) = base(&name.node) {
            return Some((base, None));
        }
        if !self.lost.contains(&name.node) {
            let own = self
                .environment
                .visible()
                .filter(|(_, binding)| binding.space == Space::Model);
            let mut known: Vec<&str> = own.map(|(_, binding)| binding.name.as_str()).collect();
            known.extend(BASES.iter().map(|base| base.name));
            let diagnostic = error::unknown_model(name, &known);
            self.report(diagnostic);
        }
        None
    }

    /// Everything given to a base: by the models in between, and here.
    pub(super) fn all_given(&self, parent: Option<BindingId>, gives: &[ParameterId]) -> Vec<ParameterId> {
        let mut all = match parent.map(|id| &self.environment.binding(id).meaning) {
            Some(Meaning::Model(model)) => self.all_given(model.parent, &model.gives),
            Some(_) | None => Vec::new(),
        };
        for id in gives {
            if !all.contains(id) {
                all.push(*id);
            }
        }
        all
    }

    fn check_setting(&mut self, setting: &Setting) -> Option<ParameterId> {
        let Some((id, parameter)) = parameter(&setting.name.node) else {
            self.infer_setting_value(setting);
            self.report(error::wrong_parameter(&setting.name));
            return None;
        };
        let typed = self.infer_setting_value(setting);
        match (parameter.takes, &setting.variable) {
            (Takes::Function, None) => {
                self.report(error::function_parameter(&setting.name, parameter.name));
                return None;
            }
            (Takes::Number | Takes::List, Some(variable)) => {
                self.report(error::number_parameter(variable.span, parameter.name));
                return None;
            }
            (Takes::Function, Some(_)) | (Takes::Number | Takes::List, None) => {}
        }
        if typed.is_unknown() {
            return None;
        }
        let frame = self.unifier.fresh(Sort::Along(COMOVING));
        let expected = self.with_open_angle(Form::dimension(&parameter.dimension).times(&frame));
        if self.unifier.unify(&typed.form, &expected).is_err() {
            let words = [self.describe(&expected), self.describe(&typed.form)];
            let unit = (!parameter.usual_unit.is_empty()).then_some(parameter.usual_unit);
            self.report(error::parameter_dimension(setting, &words, unit));
            return None;
        }
        Some(id)
    }

    fn infer_setting_value(&mut self, setting: &Setting) -> Typed {
        let Some(variable) = &setting.variable else {
            return self.infer_quantity(&setting.value);
        };
        self.locals.push(Local {
            name: variable.node.clone(),
            span: variable.span,
            typed: Typed::quantity(Form::number()),
            used: true,
        });
        let typed = self.infer_quantity(&setting.value);
        self.locals.pop();
        typed
    }

    /// The h of the model assumed, as far as it is written: for telling how
    /// much it matters.
    pub(super) fn assumed_h(&self) -> f64 {
        let assumed = self.environment.assumed.as_ref();
        let is_rate = |name: &str| parameter(name).is_some_and(|(_, parameter)| parameter.name == "H0");
        let given = assumed.and_then(|model| {
            let setting = model
                .written
                .settings
                .iter()
                .find(|setting| is_rate(&setting.name.node))?;
            let written = super::claim::written(&setting.value)?;
            Some(written.number.value * written.unit.map_or(1.0, |unit| self.size_of(unit)))
        });
        let base = assumed.map_or_else(|| base(crate::lower::DEFAULT_MODEL), |model| Some(model.base));
        let listed = base.and_then(|base| base.parameters.iter().find(|(name, ..)| *name == "H0"));
        let rate = given.or(listed.map(|(_, rate, _)| *rate));
        rate.map_or(0.7, |rate| rate / HUNDRED)
    }

    /// `model NAME = MODEL`
    pub(super) fn model_statement(&mut self, name: &ast::Name, written: ast::Model) {
        let found = self.check_model(&written);
        if base(&name.node).is_some() {
            self.report(error::rebinds_library(name, "model"));
        }
        if self.is_duplicate(name, Space::Model) {
            return;
        }
        let meaning = found.map_or(Meaning::Broken, |found| {
            Meaning::Model(Arc::new(self.found_model(written, found)))
        });
        self.bind(name, Space::Model, meaning);
    }

    fn found_model(&self, written: ast::Model, found: Found) -> environment::Model {
        environment::Model {
            place: self.place(written.span),
            base: found.base,
            parent: found.parent,
            gives: found.gives,
            limit: self.environment.next(),
            written,
        }
    }

    /// `assume MODEL`
    pub(super) fn assume_statement(&mut self, written: ast::Model) {
        let span = written.span;
        let found = self.check_model(&written);
        if !self.at_prompt {
            if let Some(first) = &self.environment.assumed {
                let first = (first.place.source == self.source).then_some(first.place.span);
                self.report(error::second_assume(span, first));
                return;
            }
            if let Some(used) = self.environment.model_used {
                let used = (used.source == self.source).then_some(used.span);
                self.report(error::assume_too_late(span, used));
                return;
            }
        }
        if let Some(found) = found {
            self.rests_on.clear();
            self.environment.assumed = Some(Arc::new(self.found_model(written, found)));
        }
    }
}
