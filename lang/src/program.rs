//! The program: what is meant. Names are nodes, units are factors, dimensions
//! are gone; everything is `f64` in SI.
//!
//! A [`Block`] is a directed acyclic graph of [`Node`]s in evaluation order: a
//! node refers only to nodes before it. The body of a binding form
//! (`integral(1/E(x), x = 0 .. z)`) is a block of its own, whose inputs are
//! the bound variable and the outer values it captures.
//!
//! ```text
//!   main block                        body of the integral
//!   %0 = 1.1           (z)            %0 = input 0        (x)
//!   %1 = 0                            %1 = input 1        (model, captured)
//!   %2 = model planck2018             %2 = call E(%0) in %1
//!   %3 = bind integral %1..%0         %3 = 1 / %2   <- result
//!        captures [%2]
//! ```
//!
//! A node that is not finite is a fault: the evaluator lets NaN run through
//! and, where an output is not finite, walks the same element again to find
//! the first node that failed and the values that met it.

use crate::ast::{BinaryOp, CompareOp, LogicalOp};
use crate::source::Span;
use std::sync::Arc;
use zij_stdlib::catalogue::Entry;
use zij_stdlib::model::{Base, ParameterId};

/// Index of a node in its block.
pub type NodeId = u32;
/// Index of a block in the program.
pub type BlockId = u32;

/// Everything a sheet computes.
#[derive(Clone, Default)]
pub struct Program {
    /// The bodies of binding forms and `w(z)`; blocks refer only to earlier ones.
    pub bodies: Vec<Block>,
    /// The sheet itself; has no inputs.
    pub main: Block,
    /// Data columns, filled in before evaluation.
    pub columns: Vec<Arc<Vec<f64>>>,
}

/// A graph of nodes in evaluation order.
#[derive(Clone, Default)]
pub struct Block {
    /// The nodes.
    pub nodes: Vec<Node>,
    /// How many inputs it takes.
    pub inputs: u32,
    /// The node that is the value of a body.
    pub result: NodeId,
}

/// One value.
#[derive(Clone)]
pub struct Node {
    /// How it is computed.
    pub op: Op,
    /// The expression it comes from.
    pub span: Span,
    /// Which source the span is in (0 the sheet, then included sheets, the
    /// library's own last).
    pub source: u16,
    /// Whether it is a series (in a body: whether it varies along the lanes is
    /// the evaluator's business, and this only says that it came from one).
    pub series: bool,
}

/// How a node is computed. Truth values are 1 and 0.
#[derive(Clone)]
pub enum Op {
    /// A number.
    Constant(f64),
    /// A written list of numbers.
    List(Arc<Vec<f64>>),
    /// Input number n of a body: 0 is the bound variable, then the captures.
    Input(u32),
    /// A data column.
    Column(u32),
    /// A list of scalar values.
    Gather(Vec<NodeId>),
    /// A divided range, ends in SI.
    Range(NodeId, NodeId, RangeStep),
    /// `-x`
    Negate(NodeId),
    /// `not p`
    Not(NodeId),
    /// Arithmetic; `Power` here has a real exponent and a positive base.
    Binary(BinaryOp, NodeId, NodeId),
    /// A whole power, as multiplications.
    PowerInteger(NodeId, i32),
    /// A comparison.
    Compare(CompareOp, NodeId, NodeId),
    /// `and`, `or`
    Logical(LogicalOp, NodeId, NodeId),
    /// `if c then a else b`: the branch not taken is never a fault.
    Select(NodeId, NodeId, NodeId),
    /// A function of the library, element by element. The model, if it needs
    /// one, is a [`Op::Model`] node or an input that holds one.
    Call(&'static Entry, Option<NodeId>, Vec<NodeId>),
    /// A function of whole series.
    Reduce(Reduction, Vec<NodeId>),
    /// A series to a series of the same length, as `sort`.
    Sort(NodeId),
    /// The elements of the first for which the second is true.
    Filter(NodeId, NodeId),
    /// A binding form.
    Bind(Box<Bind>),
    /// A model in force.
    Model(Box<ModelNode>),
}

/// How a range is divided.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum RangeStep {
    /// Every so much, in SI; stops at or before the end.
    Every(NodeId),
    /// Every so many dex.
    EveryDex(NodeId),
    /// In n equal steps: n + 1 points.
    Steps(NodeId),
    /// In n equal steps of the logarithm.
    LogSteps(NodeId),
}

/// Functions of a whole series.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Reduction {
    /// `sum`
    Sum,
    /// `mean`
    Mean,
    /// `median`
    Median,
    /// `std`, the sample standard deviation (n − 1).
    Std,
    /// `count`: of true values, or of elements.
    Count,
    /// `count` of a condition.
    CountTrue,
    /// `min`
    Min,
    /// `max`
    Max,
    /// `quantile(x, p)`, linear between order statistics.
    Quantile,
}

/// A binding form.
#[derive(Clone)]
pub struct Bind {
    /// Which one.
    pub form: Form,
    /// Its body: for `root`, left minus right.
    pub body: BlockId,
    /// Values of the enclosing block that are the body's inputs 1, 2, ….
    pub captures: Vec<NodeId>,
    /// Lower bound; the point of `derivative`; the series of `sum`.
    pub from: NodeId,
    /// Upper bound; the same as `from` where there is but one. Either may be
    /// a constant infinity for `integral` (and only there).
    pub to: NodeId,
}

/// The binding forms.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Form {
    /// `integral(body, x = a .. b)`, a > b allowed.
    Integral,
    /// `sum(body, n = RANGE)`: `from` is the series node.
    Sum,
    /// `root(l = r, x = a .. b)`
    Root,
    /// `maximum(body, x = a .. b)`
    Maximum,
    /// `maximum(…).at`
    MaximumAt,
    /// `minimum(body, x = a .. b)`
    Minimum,
    /// `minimum(…).at`
    MinimumAt,
    /// `derivative(body, x = a)`
    Derivative,
}

/// A model to be built when its parameters are known.
#[derive(Clone)]
pub struct ModelNode {
    /// Where it starts from.
    pub base: &'static Base,
    /// Numbers and lists (series nodes) in SI.
    pub settings: Vec<(ParameterId, NodeId)>,
    /// `w(z)`: parameter, body with z as input 0, captures.
    pub function: Option<(ParameterId, BlockId, Vec<NodeId>)>,
}

impl Op {
    /// Calls `visit` with every node this one is computed from, in order.
    pub fn operands(&self, mut visit: impl FnMut(NodeId)) {
        match self {
            Op::Constant(_) | Op::List(_) | Op::Input(_) | Op::Column(_) => {}
            Op::Gather(nodes) | Op::Reduce(_, nodes) => nodes.iter().copied().for_each(visit),
            Op::Range(from, to, step) => [*from, *to, step.node()].into_iter().for_each(visit),
            Op::Negate(a) | Op::Not(a) | Op::PowerInteger(a, _) | Op::Sort(a) => visit(*a),
            Op::Binary(_, a, b) | Op::Compare(_, a, b) | Op::Logical(_, a, b) | Op::Filter(a, b) => {
                [*a, *b].into_iter().for_each(visit);
            }
            Op::Select(condition, yes, no) => [*condition, *yes, *no].into_iter().for_each(visit),
            Op::Call(_, model, arguments) => model.iter().chain(arguments).copied().for_each(visit),
            Op::Bind(bind) => {
                [bind.from, bind.to].into_iter().for_each(&mut visit);
                bind.captures.iter().copied().for_each(visit);
            }
            Op::Model(model) => {
                model.settings.iter().for_each(|(_, node)| visit(*node));
                if let Some((_, _, captures)) = &model.function {
                    captures.iter().copied().for_each(visit);
                }
            }
        }
    }
}

impl Op {
    /// The same operation on other operands.
    #[must_use]
    pub fn with_operands(&self, mut other: impl FnMut(NodeId) -> NodeId) -> Op {
        let mut all = |nodes: &[NodeId]| nodes.iter().map(|node| other(*node)).collect::<Vec<_>>();
        match self {
            Op::Constant(_) | Op::List(_) | Op::Input(_) | Op::Column(_) => self.clone(),
            Op::Gather(nodes) => Op::Gather(all(nodes)),
            Op::Reduce(reduction, nodes) => Op::Reduce(*reduction, all(nodes)),
            Op::Range(from, to, step) => {
                let (from, to) = (other(*from), other(*to));
                Op::Range(from, to, step.with_node(other(step.node())))
            }
            Op::Negate(a) => Op::Negate(other(*a)),
            Op::Not(a) => Op::Not(other(*a)),
            Op::PowerInteger(a, power) => Op::PowerInteger(other(*a), *power),
            Op::Sort(a) => Op::Sort(other(*a)),
            Op::Binary(op, a, b) => Op::Binary(*op, other(*a), other(*b)),
            Op::Compare(op, a, b) => Op::Compare(*op, other(*a), other(*b)),
            Op::Logical(op, a, b) => Op::Logical(*op, other(*a), other(*b)),
            Op::Filter(a, b) => Op::Filter(other(*a), other(*b)),
            Op::Select(condition, yes, no) => Op::Select(other(*condition), other(*yes), other(*no)),
            Op::Call(entry, model, arguments) => {
                let model = model.map(&mut other);
                Op::Call(entry, model, arguments.iter().map(|node| other(*node)).collect())
            }
            Op::Bind(bind) => {
                let mut bind = bind.clone();
                (bind.from, bind.to) = (other(bind.from), other(bind.to));
                bind.captures.iter_mut().for_each(|node| *node = other(*node));
                Op::Bind(bind)
            }
            Op::Model(model) => {
                let mut model = model.clone();
                model
                    .settings
                    .iter_mut()
                    .for_each(|(_, node)| *node = other(*node));
                if let Some((_, _, captures)) = &mut model.function {
                    captures.iter_mut().for_each(|node| *node = other(*node));
                }
                Op::Model(model)
            }
        }
    }
}

impl RangeStep {
    fn with_node(self, node: NodeId) -> RangeStep {
        match self {
            RangeStep::Every(_) => RangeStep::Every(node),
            RangeStep::EveryDex(_) => RangeStep::EveryDex(node),
            RangeStep::Steps(_) => RangeStep::Steps(node),
            RangeStep::LogSteps(_) => RangeStep::LogSteps(node),
        }
    }

    /// The node that holds the step or the number of steps.
    #[must_use]
    pub fn node(self) -> NodeId {
        match self {
            RangeStep::Every(node)
            | RangeStep::EveryDex(node)
            | RangeStep::Steps(node)
            | RangeStep::LogSteps(node) => node,
        }
    }
}
