//! What the names of a sheet stand for.
//!
//! Bindings are numbered in the order they are made, and a definition sees
//! those with a smaller number than its own. So there is no recursion, and at
//! the prompt an old definition keeps meaning what it meant when a name is
//! bound again.

use super::form::{FIRST_TALLY, Key};
use super::typed::{Measure, Scheme};
use crate::ast;
use crate::source::Span;
use rustc_hash::FxHashMap;
use smallvec::SmallVec;
use smol_str::SmolStr;
use std::cell::Cell;
use std::sync::Arc;
use zij_stdlib::model::{Base, ParameterId};

/// The number of a binding.
pub type BindingId = u32;

/// A place in one of the sources.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct Place {
    /// Which source.
    pub source: u16,
    /// Where in it.
    pub span: Span,
}

/// Names of unlike kinds live side by side.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Space {
    /// Values, inputs and data tables of the sheet.
    Value,
    /// Functions of the sheet.
    Function,
    /// Models of the sheet.
    Model,
    /// Values written in the library's own sheets.
    LibraryValue,
    /// Functions written in the library's own sheets.
    LibraryFunction,
}

/// One name and what it stands for.
#[derive(Clone)]
pub struct Binding {
    /// The name.
    pub name: SmolStr,
    /// Where it is bound.
    pub place: Place,
    /// Among which names.
    pub space: Space,
    /// What it stands for.
    pub meaning: Meaning,
    /// The bindings it rests on directly.
    pub rests_on: Vec<BindingId>,
    /// It needs the model in force.
    pub needs_model: bool,
    /// Whether anything used it.
    pub used: Cell<bool>,
}

/// What a name stands for.
#[derive(Clone)]
pub enum Meaning {
    /// A value; `given` stays as it is under another model.
    Value(Arc<Value>),
    /// A function.
    Function(Arc<Function>),
    /// A model.
    Model(Arc<Model>),
    /// A data table.
    Table(Arc<Table>),
    /// A broken definition, reported.
    Broken,
}

/// A value.
pub struct Value {
    /// As written.
    pub definition: ast::Definition,
    /// Its dimension.
    pub scheme: Scheme,
    /// It is an input.
    pub given: bool,
    /// What the command line put in its place: the source and the expression.
    pub instead: Option<(u16, ast::Expr)>,
}

/// A function.
pub struct Function {
    /// As written.
    pub definition: ast::Definition,
    /// Its parameters as written.
    pub parameters: Vec<ast::Parameter>,
    /// Their dimensions, with the bound variables of `result`.
    pub takes: Vec<super::typed::Typed>,
    /// Its result.
    pub result: Scheme,
}

/// A model of the sheet.
pub struct Model {
    /// As written.
    pub written: ast::Model,
    /// Where it starts from in the end.
    pub base: &'static Base,
    /// The model of the sheet it starts from, if it is one.
    pub parent: Option<BindingId>,
    /// What its own `with` list gives.
    pub gives: Vec<ParameterId>,
    /// Where it is written.
    pub place: Place,
    /// The bindings that were made before it.
    pub limit: BindingId,
}

/// A data table.
pub struct Table {
    /// As written.
    pub read: ast::Read,
    /// Its columns.
    pub columns: Vec<Column>,
    /// The path, as the sheet gives it.
    pub path: SmolStr,
}

/// A column of a data table.
pub struct Column {
    /// Its name.
    pub name: SmolStr,
    /// Its unit and dimension.
    pub scheme: Scheme,
    /// The size of its unit in SI.
    pub factor: f64,
    /// Its place in the file.
    pub place: usize,
}

/// A unit defined in the sheet.
#[derive(Clone)]
pub struct UserUnit {
    /// Its size and dimension.
    pub measure: Measure,
    /// Where it is defined.
    pub place: Place,
}

/// All names.
#[derive(Clone, Default)]
pub struct Environment {
    /// The bindings in order.
    pub bindings: Vec<Binding>,
    names: FxHashMap<(Space, SmolStr), SmallVec<[BindingId; 1]>>,
    /// Units of the sheet.
    pub units: FxHashMap<SmolStr, UserUnit>,
    /// Counting units of the sheet and where they are declared.
    pub tallies: Vec<(SmolStr, Place)>,
    /// The model assumed.
    pub assumed: Option<Arc<Model>>,
    /// The first use of a model before any was assumed.
    pub model_used: Option<Place>,
}

impl Space {
    /// Whether a later binding is hidden from earlier definitions.
    fn is_ordered(self) -> bool {
        match self {
            Space::Value | Space::Function | Space::Model => true,
            Space::LibraryValue | Space::LibraryFunction => false,
        }
    }
}

impl Environment {
    /// Adds a binding.
    pub fn bind(&mut self, binding: Binding) -> BindingId {
        let id = self.bindings.len() as BindingId;
        self.names
            .entry((binding.space, binding.name.clone()))
            .or_default()
            .push(id);
        self.bindings.push(binding);
        id
    }

    /// Forgets a name altogether.
    pub fn strike(&mut self, space: Space, name: &str) -> bool {
        self.names.remove(&(space, name.into())).is_some()
    }

    /// What a name stands for to a definition numbered `limit`.
    #[must_use]
    pub fn find(&self, space: Space, name: &str, limit: BindingId) -> Option<BindingId> {
        let known = self.names.get(&(space, SmolStr::new(name)))?;
        let visible = |id: &&BindingId| !space.is_ordered() || **id < limit;
        known.iter().rev().find(visible).copied()
    }

    /// What a name stands for now.
    #[must_use]
    pub fn latest(&self, space: Space, name: &str) -> Option<BindingId> {
        self.find(space, name, BindingId::MAX)
    }

    /// The binding.
    #[must_use]
    pub fn binding(&self, id: BindingId) -> &Binding {
        &self.bindings[id as usize]
    }

    /// The number the next binding will have.
    #[must_use]
    pub fn next(&self) -> BindingId {
        self.bindings.len() as BindingId
    }

    /// The names visible at the end, in the order they were bound.
    pub fn visible(&self) -> impl Iterator<Item = (BindingId, &Binding)> {
        let latest = |(id, binding): &(BindingId, &Binding)| {
            let known = self.names.get(&(binding.space, binding.name.clone()));
            known.and_then(|known| known.last()) == Some(id)
        };
        (0..).zip(&self.bindings).filter(latest)
    }

    /// The key of a counting unit.
    #[must_use]
    pub fn tally(&self, name: &str) -> Option<Key> {
        let place = self.tallies.iter().position(|(known, _)| known == name)?;
        Some(FIRST_TALLY + place as Key)
    }

    /// The bindings that these rest on, all the way down, in order.
    #[must_use]
    pub fn closure(&self, roots: &[BindingId]) -> Vec<BindingId> {
        let mut open: Vec<BindingId> = roots.to_vec();
        let mut found = std::collections::BTreeSet::new();
        while let Some(id) = open.pop() {
            if found.insert(id) {
                open.extend(&self.binding(id).rests_on);
            }
        }
        found.into_iter().collect()
    }
}
