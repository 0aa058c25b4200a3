//! What comes from other files: data tables and included sheets.

use super::super::environment::{self, Meaning, Space, Table};
use super::super::form::Form;
use super::super::typed::{Instance, Measure, Typed};
use super::super::unify::Sort;
use super::super::{Checker, Head, Local, NoHead, Outside, error};
use crate::ast::{Expr, Read, Text};
use std::sync::Arc;

impl Checker {
    pub(in crate::check) fn read_statement(&mut self, read: Read, outside: &dyn Outside) {
        let duplicate = self.is_duplicate(&read.name, Space::Value);
        let columns = match outside.head(&read.path.node) {
            Ok(head) => Some(self.columns(&read, head)),
            Err(reason) => {
                self.report(match reason {
                    NoHead::Unreadable(reason) => error::cannot_read(read.path.span, &reason),
                    NoHead::Malformed(reason) => error::bad_data(read.path.span, &reason),
                });
                None
            }
        };
        let Some(columns) = columns else {
            if !duplicate {
                self.bind(&read.name, Space::Value, Meaning::Broken);
            }
            return;
        };
        if let Some(only) = &read.only {
            self.check_selection(only, &columns);
        }
        if !duplicate {
            let name = read.name.clone();
            let path = read.path.node.clone();
            let table = Table { read, columns, path };
            self.bind(&name, Space::Value, Meaning::Table(Arc::new(table)));
        }
    }

    pub(in crate::check) fn columns(&mut self, read: &Read, head: Head) -> Vec<environment::Column> {
        let names: Vec<String> = head.columns.iter().map(|(name, _)| name.clone()).collect();
        for (name, _) in &read.units {
            if !names.iter().any(|known| *known == name.node) {
                let known: Vec<&str> = names.iter().map(String::as_str).collect();
                self.report(error::unknown_column(name, &read.name.node, &known));
            }
        }
        let mut columns = Vec::new();
        for (place, (name, unit)) in head.columns.into_iter().enumerate() {
            let with = read.units.iter().find(|(known, _)| known.node == name);
            let measure = match (with, unit) {
                (Some((_, bracket)), _) => self.measure(&bracket.unit, false),
                (None, Some(unit)) => self.measure_of_head(read, &name, &unit),
                (None, None) => None,
            };
            let typed = match &measure {
                Some(measure) => Typed::quantity(self.asked(measure)).shown_in(Some(Arc::clone(measure))),
                None => Typed::quantity(Form::number()),
            };
            let factor = measure.map_or(1.0, |measure| measure.factor);
            let scheme = self.scheme(typed, |sort| matches!(sort, Sort::Along(_)));
            columns.push(environment::Column {
                name: name.into(),
                scheme,
                factor,
                place,
            });
        }
        columns
    }

    pub(in crate::check) fn measure_of_head(
        &mut self,
        read: &Read,
        column: &str,
        text: &str,
    ) -> Option<Arc<Measure>> {
        let resolved = crate::parser::parse_unit(text)
            .ok()
            .and_then(|unit| crate::check::units::resolve_library(&unit));
        if resolved.is_none() {
            self.report(error::unit_of_column(read.path.span, column, text));
        }
        resolved.map(Arc::new)
    }

    /// Column names stand bare in `only`.
    pub(in crate::check) fn check_selection(&mut self, only: &Expr, columns: &[environment::Column]) {
        let outer = self.locals.len();
        for column in columns {
            let instance = Instance::new(&mut self.unifier, &column.scheme.bound);
            let typed = column.scheme.typed.clone();
            let form = instance.form(&typed.form);
            let typed = Typed { form, ..typed };
            self.locals.push(Local {
                name: column.name.clone(),
                span: only.span,
                typed,
                used: true,
            });
        }
        self.infer_truth(only);
        self.locals.truncate(outer);
    }

    pub(in crate::check) fn include_statement(&mut self, path: &Text, outside: &dyn Outside) {
        if self.including.contains(&path.node) {
            self.report(error::include_cycle(path.span, &path.node));
            return;
        }
        if self.imported.contains(&path.node) {
            return;
        }
        self.imported.push(path.node.clone());
        match outside.sheet(&path.node) {
            Ok(source) => {
                let tasks = self.tasks.len();
                let id = self.add_source(source);
                self.including.push(path.node.clone());
                self.check_source(id, outside);
                self.including.pop();
                // An included sheet lends its definitions; its outputs are its own.
                self.tasks.truncate(tasks);
            }
            Err(reason) => self.report(error::cannot_read(path.span, &reason)),
        }
    }
}
