//! Models to nodes.

use super::{At, ContextId, Lowering, Scope};
use crate::ast::{self, Setting};
use crate::check::environment::Model;
use crate::check::model::{base, parameter};
use crate::check::{BindingId, Meaning, Space};
use crate::program::{BlockId, ModelNode, NodeId, Op};
use crate::source::Span;
use std::sync::Arc;
use zij_stdlib::model::{BASES, Base, ParameterId};

/// The model of a sheet that assumes none.
pub const DEFAULT_MODEL: &str = "planck2018";

/// What is given to a base.
#[derive(Default)]
struct Given {
    numbers: Vec<(ParameterId, NodeId)>,
    function: Option<(ParameterId, BlockId, Vec<NodeId>)>,
}

impl Lowering<'_> {
    /// The model that the sheet assumes, in the main block.
    pub(super) fn assumed_model(&mut self) -> At {
        let node = match &self.checker.environment.assumed {
            Some(model) => {
                let model = Arc::clone(model);
                self.model_node(&model)
            }
            None => {
                let base = base(DEFAULT_MODEL).or(BASES.first());
                base.map_or(0, |base| self.emit_model(base, Given::default(), Span::default()))
            }
        };
        At { level: 0, node }
    }

    /// The number of the model in force inside `under`.
    pub(super) fn context_of(&mut self, written: &ast::Model) -> ContextId {
        let has_locals = self.locals.len() > self.scope.base;
        let level = if has_locals {
            self.level
        } else {
            self.contexts[0].level
        };
        let outer = std::mem::replace(&mut self.level, level);
        let node = match (written.settings.is_empty(), self.user_model(&written.base.node)) {
            (true, Some(id)) => self.named_model(id),
            (_, parent) => self.written_model(written, parent),
        };
        self.level = outer;
        let known = self
            .contexts
            .iter()
            .position(|at| at.level == level && at.node == node);
        known.unwrap_or_else(|| {
            self.contexts.push(At { level, node });
            self.contexts.len() - 1
        })
    }

    fn user_model(&self, name: &str) -> Option<BindingId> {
        self.checker
            .environment
            .find(Space::Model, name, self.scope.limit)
    }

    /// A model of the sheet, once, in the main block.
    fn named_model(&mut self, id: BindingId) -> NodeId {
        if let Some(known) = self.memo.get(&(id, 0)) {
            return self.import(*known);
        }
        let Meaning::Model(model) = &self.checker.environment.binding(id).meaning else {
            return 0;
        };
        let model = Arc::clone(model);
        let outer = std::mem::replace(&mut self.level, 0);
        let node = self.model_node(&model);
        self.level = outer;
        let at = At { level: 0, node };
        self.memo.insert((id, 0), at);
        self.import(at)
    }

    fn model_node(&mut self, model: &Model) -> NodeId {
        let given = self.given_of(model);
        self.emit_model(model.base, given, model.written.span)
    }

    fn written_model(&mut self, written: &ast::Model, parent: Option<BindingId>) -> NodeId {
        let mut given = Given::default();
        let mut start = base(&written.base.node);
        if let Some(id) = parent
            && let Meaning::Model(model) = &self.checker.environment.binding(id).meaning
        {
            let model = Arc::clone(model);
            start = Some(model.base);
            given = self.given_of(&model);
        }
        self.settle(&mut given, &written.settings);
        start.map_or(0, |base| self.emit_model(base, given, written.span))
    }

    /// What a model of the sheet gives, with the models it starts from.
    fn given_of(&mut self, model: &Model) -> Given {
        let parent = model
            .parent
            .map(|id| self.checker.environment.binding(id).meaning.clone());
        let mut given = match parent {
            Some(Meaning::Model(parent)) => self.given_of(&parent),
            Some(_) | None => Given::default(),
        };
        let scope = Scope {
            limit: model.limit,
            source: model.place.source,
            base: self.locals.len(),
            context: 0,
            in_library: false,
            blame: None,
            table: None,
        };
        let outer = std::mem::replace(&mut self.scope, scope);
        self.settle(&mut given, &model.written.settings);
        self.scope = outer;
        given
    }

    /// Puts a `with` list over what was given before.
    fn settle(&mut self, given: &mut Given, settings: &[Setting]) {
        for setting in settings {
            let Some((id, _)) = parameter(&setting.name.node) else {
                continue;
            };
            match &setting.variable {
                None => {
                    let node = self.lower(&setting.value);
                    given.numbers.retain(|(known, _)| *known != id);
                    given.numbers.push((id, node));
                }
                Some(variable) => {
                    let (body, captures) = self.body(variable, |this| this.lower(&setting.value));
                    given.function = Some((id, body, captures));
                }
            }
        }
    }

    fn emit_model(&mut self, base: &'static Base, given: Given, span: Span) -> NodeId {
        let node = ModelNode {
            base,
            settings: given.numbers,
            function: given.function,
        };
        self.emit(Op::Model(Box::new(node)), span)
    }
}
