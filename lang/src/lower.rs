//! From the tree to the program: names become nodes, units factors, functions
//! of the sheet are written out where they are called.
//!
//! Every node of a block is there once: equal operations on equal operands are
//! the same node. A name of the sheet is one node for each model it is
//! evaluated under. What the checker found out is read from its notes; no
//! dimension is looked at here.
//!
//! ```text
//!   builders   main block (level 0), bodies being built, each with its parent
//!   scope      whose names are seen: limit, source, locals, model in force
//!   import     a node of an enclosing block becomes a capture of a body
//! ```

mod binding;
mod expression;
mod model;

pub use model::DEFAULT_MODEL;

use crate::ast::{Binding as Where, Expr};
use crate::check::{BindingId, Checker, Meaning, Output, Space};
use crate::program::{Block, Node, NodeId, Op, Program};
use crate::source::Span;
use rustc_hash::FxHashMap;
use smallvec::SmallVec;
use smol_str::SmolStr;

/// Nodes of a program at most.
const MAX_NODES: usize = 4_000_000;
/// Functions of the sheet written out within one another at most.
const MAX_CALLS: usize = 1_000;
/// From how many bindings on they are lowered one by one, not each from
/// within the next.
const LONG_CHAIN: usize = 64;
/// Stack that is kept free, and how much is added when it runs short.
const RED_ZONE: usize = 128 << 10;
const MORE_STACK: usize = 4 << 20;

/// Number of a model in force.
type ContextId = usize;

/// A node and the block it is in.
#[derive(Clone, Copy, Debug)]
struct At {
    level: usize,
    node: NodeId,
}

/// A call of a function: which, with what, under which model, in which block,
/// and where a fault in it points.
type Call = (
    BindingId,
    SmallVec<[NodeId; 4]>,
    ContextId,
    usize,
    Option<(u16, Span)>,
);

/// A block being built.
struct Builder {
    block: Block,
    parent: usize,
    captures: Vec<NodeId>,
    known: FxHashMap<SmallVec<[u64; 6]>, NodeId>,
    /// What is remembered only as long as this block is built.
    remembered: Vec<(BindingId, ContextId)>,
    written_out: Vec<Call>,
}

/// Whose names are seen.
#[derive(Clone)]
struct Scope {
    limit: BindingId,
    source: u16,
    /// Locals from here on are in sight.
    base: usize,
    context: ContextId,
    in_library: bool,
    /// Where to point instead, inside a function of the library.
    blame: Option<(u16, Span)>,
    /// The table whose columns stand bare, inside `only`.
    table: Option<BindingId>,
}

/// A sheet ready to be evaluated, but for its data.
pub struct Lowered {
    /// The program.
    pub program: Program,
    /// The columns it needs, in the order of their numbers: the table and the
    /// place in it.
    pub columns: Vec<(BindingId, usize)>,
    /// Where it grew too large, if it did.
    pub too_large: Option<(u16, Span)>,
}

/// The translation of a checked sheet.
pub struct Lowering<'c> {
    checker: &'c Checker,
    program: Program,
    builders: Vec<Builder>,
    level: usize,
    scope: Scope,
    locals: Vec<(SmolStr, At)>,
    contexts: Vec<At>,
    memo: FxHashMap<(BindingId, ContextId), At>,
    columns: FxHashMap<(BindingId, usize), u32>,
    /// Functions written out before, by what they were given.
    written_out: FxHashMap<Call, NodeId>,
    calls: usize,
    nodes: usize,
    too_large: Option<(u16, Span)>,
}

impl<'c> Lowering<'c> {
    /// Begins with the model that the sheet assumes.
    #[must_use]
    pub fn new(checker: &'c Checker) -> Lowering<'c> {
        let mut lowering = Lowering {
            checker,
            program: Program::default(),
            builders: vec![Builder::new(0, 0)],
            level: 0,
            scope: Scope {
                limit: BindingId::MAX,
                source: 0,
                base: 0,
                context: 0,
                in_library: false,
                blame: None,
                table: None,
            },
            locals: Vec::new(),
            contexts: Vec::new(),
            memo: FxHashMap::default(),
            columns: FxHashMap::default(),
            written_out: FxHashMap::default(),
            calls: 0,
            nodes: 0,
            too_large: None,
        };
        let assumed = lowering.assumed_model();
        lowering.contexts.push(assumed);
        lowering
    }

    /// The node of the model assumed.
    #[must_use]
    pub fn model(&self) -> NodeId {
        self.contexts[0].node
    }

    /// The node of a model that stands in a statement.
    pub fn model_of(&mut self, written: &crate::ast::Model, limit: BindingId, source: u16) -> NodeId {
        self.within(limit, source, |this| {
            let context = this.context_of(written);
            this.contexts[context].node
        })
    }

    /// The node of an output.
    pub fn output(&mut self, output: &Output, source: u16) -> NodeId {
        match output {
            Output::Binding(id) => {
                self.in_order(&[*id]);
                self.value_of(*id).node
            }
            Output::Expression(written, limit, rests_on) => {
                self.in_order(rests_on);
                let (value, wheres) = &**written;
                self.within(*limit, source, |this| this.with_wheres(value, wheres))
            }
        }
    }

    /// The node of an expression that stands in a statement.
    pub fn expression(
        &mut self,
        expr: &Expr,
        limit: BindingId,
        source: u16,
        rests_on: &[BindingId],
    ) -> NodeId {
        self.in_order(rests_on);
        self.within(limit, source, |this| this.lower(expr))
    }

    /// The nodes of the columns of a table: first what the variable runs over.
    pub fn table(&mut self, table: &crate::check::TableTask) -> Vec<NodeId> {
        self.in_order(&table.rests_on);
        let plot = &*table.plot;
        self.within(table.limit, table.place.source, |this| {
            let over = this.lower(&plot.over);
            this.locals
                .push((plot.variable.node.clone(), At { level: 0, node: over }));
            let columns: Vec<NodeId> = plot
                .columns
                .iter()
                .map(|(column, _)| this.lower(column))
                .collect();
            this.locals.pop();
            std::iter::once(over).chain(columns).collect()
        })
    }

    /// The nodes of the main block that are values of names, in the order of
    /// the names: one for each model a name was evaluated under.
    #[must_use]
    pub fn named(&self) -> Vec<(BindingId, NodeId)> {
        let in_main = self.memo.iter().filter(|(_, at)| at.level == 0);
        let mut named: Vec<_> = in_main.map(|((id, _), at)| (*id, at.node)).collect();
        named.sort_unstable();
        named
    }

    /// What has been lowered.
    #[must_use]
    pub fn finish(mut self) -> Lowered {
        let main = self.builders.swap_remove(0);
        self.program.main = main.block;
        let mut columns: Vec<((BindingId, usize), u32)> = self.columns.into_iter().collect();
        columns.sort_by_key(|(_, number)| *number);
        Lowered {
            program: self.program,
            columns: columns.into_iter().map(|(column, _)| column).collect(),
            too_large: self.too_large,
        }
    }

    fn within<T>(&mut self, limit: BindingId, source: u16, work: impl FnOnce(&mut Self) -> T) -> T {
        let scope = Scope {
            limit,
            source,
            base: self.locals.len(),
            ..self.scope.clone()
        };
        let outer = std::mem::replace(&mut self.scope, scope);
        let result = work(self);
        self.scope = outer;
        result
    }

    /// Lowers long chains of definitions from their beginning, so that none is
    /// lowered from deep within another.
    fn in_order(&mut self, roots: &[BindingId]) {
        let chain = self.checker.environment.closure(roots);
        if chain.len() > LONG_CHAIN {
            for id in chain {
                if matches!(self.checker.environment.binding(id).meaning, Meaning::Value(_)) {
                    self.value_of(id);
                }
            }
        }
    }

    /// The node of a name's value under the model in force.
    fn value_of(&mut self, id: BindingId) -> At {
        let binding = self.checker.environment.binding(id);
        let Meaning::Value(value) = &binding.meaning else {
            return At {
                level: self.level,
                node: self.missing(binding.place.span),
            };
        };
        let context = if value.given || !binding.needs_model {
            0
        } else {
            self.scope.context
        };
        if let Some(known) = self.memo.get(&(id, context)) {
            return *known;
        }
        let level = self.contexts[context].level;
        let in_library = binding.space == Space::LibraryValue;
        let scope = Scope {
            limit: id,
            source: binding.place.source,
            base: self.locals.len(),
            context,
            in_library,
            blame: self.scope.blame.filter(|_| in_library),
            table: None,
        };
        let outer = (
            std::mem::replace(&mut self.scope, scope),
            std::mem::replace(&mut self.level, level),
        );
        let node = match &value.instead {
            Some((source, expr)) => {
                self.scope.source = *source;
                self.lower(expr)
            }
            None => self.with_wheres(&value.definition.value, &value.definition.wheres),
        };
        (self.scope, self.level) = outer;
        let at = At { level, node };
        self.memo.insert((id, context), at);
        self.builders[level].remembered.push((id, context));
        at
    }

    fn with_wheres(&mut self, value: &Expr, wheres: &[Where]) -> NodeId {
        let outer = self.locals.len();
        for binding in wheres {
            let node = self.lower(&binding.value);
            self.locals.push((
                binding.name.node.clone(),
                At {
                    level: self.level,
                    node,
                },
            ));
        }
        let node = self.lower(value);
        self.locals.truncate(outer);
        node
    }

    /// A node of an enclosing block, in the block being built.
    fn import(&mut self, at: At) -> NodeId {
        self.import_into(at, self.level)
    }

    fn import_into(&mut self, at: At, into: usize) -> NodeId {
        if at.level == into {
            return at.node;
        }
        let held = &self.builders[at.level].block.nodes[at.node as usize];
        if let Op::Constant(_) = held.op {
            let (op, span) = (held.op.clone(), held.span);
            return self.emit_in(into, op, span);
        }
        let parent = self.builders[into].parent;
        let outer = self.import_into(at, parent);
        let builder = &mut self.builders[into];
        let place = builder
            .captures
            .iter()
            .position(|known| *known == outer)
            .unwrap_or_else(|| {
                builder.captures.push(outer);
                builder.captures.len() - 1
            });
        let span = self.builders[at.level].block.nodes[at.node as usize].span;
        self.emit_in(into, Op::Input(place as u32 + 1), span)
    }

    fn emit(&mut self, op: Op, span: Span) -> NodeId {
        self.emit_in(self.level, op, span)
    }

    fn emit_in(&mut self, level: usize, op: Op, span: Span) -> NodeId {
        let key = key_of(&op);
        if let Some(known) = key.as_ref().and_then(|key| self.builders[level].known.get(key)) {
            return *known;
        }
        let (source, span) = self.scope.blame.unwrap_or((self.scope.source, span));
        self.nodes += 1;
        if self.nodes > MAX_NODES && self.too_large.is_none() {
            self.too_large = Some((source, span));
        }
        let builder = &mut self.builders[level];
        let id = builder.block.nodes.len() as NodeId;
        let series = is_series(&op, &builder.block);
        builder.block.nodes.push(Node {
            op,
            span,
            source,
            series,
        });
        if let Some(key) = key {
            builder.known.insert(key, id);
        }
        id
    }

    fn constant(&mut self, value: f64, span: Span) -> NodeId {
        self.emit(Op::Constant(value), span)
    }

    /// Stands where nothing can be computed; an error has been reported.
    fn missing(&mut self, span: Span) -> NodeId {
        self.constant(f64::NAN, span)
    }

    fn local(&self, name: &str) -> Option<At> {
        let in_sight = &self.locals[self.scope.base.min(self.locals.len())..];
        in_sight
            .iter()
            .rev()
            .find(|(known, _)| known == name)
            .map(|(_, at)| *at)
    }
}

impl Builder {
    fn new(parent: usize, inputs: u32) -> Builder {
        Builder {
            block: Block {
                inputs,
                ..Block::default()
            },
            parent,
            captures: Vec::new(),
            known: FxHashMap::default(),
            remembered: Vec::new(),
            written_out: Vec::new(),
        }
    }
}

fn is_series(op: &Op, block: &Block) -> bool {
    match op {
        Op::List(_) | Op::Gather(_) | Op::Column(_) | Op::Range(..) | Op::Sort(_) | Op::Filter(..) => true,
        Op::Constant(_) | Op::Input(_) | Op::Reduce(..) | Op::Model(_) => false,
        Op::Negate(_)
        | Op::Not(_)
        | Op::Binary(..)
        | Op::PowerInteger(..)
        | Op::Compare(..)
        | Op::Logical(..)
        | Op::Select(..)
        | Op::Call(..)
        | Op::Bind(_) => {
            let mut found = false;
            op.operands(|operand| found |= block.nodes.get(operand as usize).is_some_and(|node| node.series));
            found
        }
    }
}

/// What makes an operation the same as another; none where each is its own.
fn key_of(op: &Op) -> Option<SmallVec<[u64; 6]>> {
    let mut key: SmallVec<[u64; 6]> = SmallVec::new();
    let head: [u64; 2] = match op {
        Op::Constant(value) => [1, value.to_bits()],
        Op::Input(number) => [2, u64::from(*number)],
        Op::Column(number) => [3, u64::from(*number)],
        Op::Negate(_) => [4, 0],
        Op::Not(_) => [5, 0],
        Op::Binary(op, ..) => [6, *op as u64],
        Op::PowerInteger(_, power) => [7, *power as u64],
        Op::Compare(op, ..) => [8, *op as u64],
        Op::Logical(op, ..) => [9, *op as u64],
        Op::Select(..) => [10, 0],
        Op::Call(entry, model, _) => {
            key.push(u64::from(model.is_some()));
            [11, std::ptr::from_ref(*entry) as usize as u64]
        }
        Op::Reduce(reduction, _) => [12, *reduction as u64],
        Op::Sort(_) => [13, 0],
        Op::Filter(..) => [14, 0],
        Op::Gather(_) => [15, 0],
        Op::List(_) | Op::Range(..) | Op::Bind(_) | Op::Model(_) => return None,
    };
    key.extend(head);
    op.operands(|operand| key.push(u64::from(operand)));
    Some(key)
}
