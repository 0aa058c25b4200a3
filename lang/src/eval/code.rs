//! What every activation of a block shares: the bodies, the columns, the
//! models built so far and the account of the work done.

use super::limits;
use crate::program::{Block, BlockId, Form, Node, Op, Program};
use std::collections::HashMap;
use std::sync::atomic::{AtomicU64, AtomicUsize, Ordering};
use std::sync::{Arc, Mutex, OnceLock};
use zij_stdlib::model::Model;

/// The program as the evaluator sees it. It borrows, so that nothing is
/// copied unless a model keeps a `w(z)` of its own.
pub(super) struct Code<'p> {
    bodies: &'p [Block],
    columns: &'p [Arc<Vec<f64>>],
    traits: Vec<Traits>,
    owned: OnceLock<Arc<OwnedCode>>,
    models: Mutex<HashMap<ModelKey, Arc<Model>>>,
    work: AtomicU64,
    numbers: AtomicUsize,
}

/// The same, owned by the closures that outlive an evaluation.
pub(super) struct OwnedCode {
    bodies: Vec<Block>,
    columns: Vec<Arc<Vec<f64>>>,
    traits: Vec<Traits>,
}

/// A base and the bits of its settings.
pub(super) type ModelKey = (&'static str, Vec<u64>);

/// What is known of a body whatever it is given.
#[derive(Clone, Copy)]
struct Traits {
    /// How many binding forms it nests, itself included.
    depth: usize,
    /// Whether it makes or looks at a series as a whole.
    whole: bool,
}

impl<'p> Code<'p> {
    /// The code of `program`.
    pub fn new(program: &'p Program) -> Code<'p> {
        let mut traits: Vec<Traits> = Vec::with_capacity(program.bodies.len());
        for body in &program.bodies {
            traits.push(traits_of(body, &traits));
        }
        Code::with(&program.bodies, &program.columns, traits)
    }

    fn with(bodies: &'p [Block], columns: &'p [Arc<Vec<f64>>], traits: Vec<Traits>) -> Code<'p> {
        Code {
            bodies,
            columns,
            traits,
            owned: OnceLock::new(),
            models: Mutex::default(),
            work: AtomicU64::new(0),
            numbers: AtomicUsize::new(0),
        }
    }

    /// A copy that borrows nothing.
    pub fn owned(&self) -> Arc<OwnedCode> {
        let copy = || {
            Arc::new(OwnedCode {
                bodies: self.bodies.to_vec(),
                columns: self.columns.to_vec(),
                traits: self.traits.clone(),
            })
        };
        Arc::clone(self.owned.get_or_init(copy))
    }

    /// A body, or nothing if the program is broken.
    pub fn body(&self, id: BlockId) -> Option<&'p Block> {
        self.bodies.get(id as usize)
    }

    /// A data column, or nothing if the program is broken.
    pub fn column(&self, index: u32) -> Option<&'p Arc<Vec<f64>>> {
        self.columns.get(index as usize)
    }

    /// Whether a body makes or looks at a series as a whole; otherwise series
    /// reach it one element at a time.
    pub fn sees_whole_series(&self, id: BlockId) -> bool {
        self.traits.get(id as usize).is_some_and(|traits| traits.whole)
    }

    /// Whether a body nests more binding forms than we follow.
    pub fn is_too_deep(&self, id: BlockId) -> bool {
        (self.traits.get(id as usize)).is_none_or(|traits| traits.depth > limits::NESTED_FORMS)
    }

    /// Takes note of `points` evaluations of bodies; false once there have
    /// been too many in all.
    pub fn spend(&self, points: usize) -> bool {
        let before = self.work.fetch_add(points as u64, Ordering::Relaxed);
        before < limits::BODY_EVALUATIONS
    }

    /// Whether too many evaluations of bodies have been spent.
    pub fn is_exhausted(&self) -> bool {
        self.work.load(Ordering::Relaxed) >= limits::BODY_EVALUATIONS
    }

    /// Takes note of a series kept in memory; false if it is too much in all.
    pub fn keep(&self, numbers: usize) -> bool {
        let before = self.numbers.fetch_add(numbers, Ordering::Relaxed);
        before.saturating_add(numbers) <= limits::NUMBERS_KEPT
    }

    /// A model built before from the same settings.
    pub fn known_model(&self, key: &ModelKey) -> Option<Arc<Model>> {
        self.models.lock().ok()?.get(key).cloned()
    }

    /// Remembers a model.
    pub fn remember_model(&self, key: ModelKey, model: &Arc<Model>) {
        if let Ok(mut models) = self.models.lock()
            && models.len() < limits::MODELS_KEPT
        {
            models.insert(key, Arc::clone(model));
        }
    }
}

impl OwnedCode {
    /// The code it holds.
    pub fn code(&self) -> Code<'_> {
        Code::with(&self.bodies, &self.columns, self.traits.clone())
    }
}

fn traits_of(body: &Block, before: &[Traits]) -> Traits {
    let mut traits = Traits {
        depth: 1,
        whole: false,
    };
    for node in &body.nodes {
        if let Some(inner) = inner_body(node) {
            // A body that is not before this one does not exist for us.
            let inner = before.get(inner as usize).copied().unwrap_or(Traits {
                depth: limits::NESTED_FORMS,
                whole: false,
            });
            traits.depth = traits.depth.max(inner.depth + 1);
            traits.whole |= inner.whole;
        }
        traits.whole |= is_whole(&node.op);
    }
    traits
}

fn inner_body(node: &Node) -> Option<BlockId> {
    match &node.op {
        Op::Bind(bind) => Some(bind.body),
        Op::Model(model) => model.function.as_ref().map(|(_, body, _)| *body),
        Op::Constant(_)
        | Op::List(_)
        | Op::Input(_)
        | Op::Column(_)
        | Op::Gather(_)
        | Op::Range(..)
        | Op::Negate(_)
        | Op::Not(_)
        | Op::Binary(..)
        | Op::PowerInteger(..)
        | Op::Compare(..)
        | Op::Logical(..)
        | Op::Select(..)
        | Op::Call(..)
        | Op::Reduce(..)
        | Op::Sort(_)
        | Op::Filter(..) => None,
    }
}

fn is_whole(op: &Op) -> bool {
    match op {
        Op::List(_)
        | Op::Column(_)
        | Op::Gather(_)
        | Op::Range(..)
        | Op::Reduce(..)
        | Op::Sort(_)
        | Op::Filter(..) => true,
        Op::Bind(bind) => bind.form == Form::Sum,
        Op::Constant(_)
        | Op::Input(_)
        | Op::Negate(_)
        | Op::Not(_)
        | Op::Binary(..)
        | Op::PowerInteger(..)
        | Op::Compare(..)
        | Op::Logical(..)
        | Op::Select(..)
        | Op::Call(..)
        | Op::Model(_) => false,
    }
}
