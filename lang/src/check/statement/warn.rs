//! Warnings: what is right but probably not meant.

use super::super::environment::Space;
use super::super::{BindingId, Checker, call, error, library};
use super::Task;
use crate::ast::Name;
use crate::source::Span;
use smol_str::SmolStr;

impl Checker {
    /// Warns once where a name of the library is bound anew.
    pub(in crate::check) fn warn_of_library_name(&mut self, name: &Name, function: bool) {
        if self.in_library {
            return;
        }
        let entry = if function {
            library::function(&name.node)
        } else {
            library::value(&name.node)
        };
        // A function of one letter is nobody's to keep; a constant, `c`, is.
        let short = function && name.node.chars().count() == 1;
        let known = entry.is_some_and(|entry| entry.name == name.node || !short);
        let word = function
            && (call::BINDING_FORMS.iter().any(|(word, _)| *word == name.node)
                || call::series_function(&name.node).is_some());
        let [values, functions] = self.spaces();
        let space = if function { functions } else { values };
        if (known || word) && self.environment.latest(space, &name.node).is_none() {
            self.report(error::rebinds_library(
                name,
                if function { "function" } else { "value" },
            ));
        }
    }

    /// Warns of values and functions that nothing rests on, in a sheet that
    /// shows something.
    pub(in crate::check) fn warn_of_unused(&mut self, source: u16, from: BindingId) {
        let wrong = self
            .diagnostics
            .iter()
            .any(|(_, diagnostic)| diagnostic.is_error());
        if self.at_prompt || self.tasks.is_empty() || wrong {
            return;
        }
        let unused: Vec<(Span, SmolStr)> = self.environment.bindings[from as usize..]
            .iter()
            .filter(|binding| !binding.used.get() && binding.place.source == source)
            .filter(|binding| matches!(binding.space, Space::Value | Space::Function | Space::Model))
            .map(|binding| (binding.place.span, binding.name.clone()))
            .collect();
        for (span, name) in unused {
            self.diagnostics
                .push((usize::from(source), error::unused(span, &name)));
        }
    }

    /// Warns where a sheet has results that rest on a model and names none:
    /// nobody could reproduce them once the default changes.
    pub(in crate::check) fn warn_of_unstated_model(&mut self) {
        let stated = self.at_prompt || self.environment.assumed.is_some();
        let is_output = |task: &Task| match task {
            Task::Show(show) => show.result,
            Task::Claim(_) | Task::Table(_) => true,
            Task::Explain(_) | Task::Help(_) => false,
        };
        let Some(used) = self.environment.model_used.filter(|_| !stated) else {
            return;
        };
        if self.tasks.iter().any(is_output) {
            let warning = error::model_not_stated(used.span);
            self.diagnostics.push((usize::from(used.source), warning));
        }
    }

    /// Says once that uncertainties are not carried yet.
    pub(in crate::check) fn warn_of_uncertainty(&mut self, span: Span) {
        if !std::mem::replace(&mut self.told_of_uncertainty, true) {
            self.report(error::uncertainty_not_carried(span));
        }
    }
}
