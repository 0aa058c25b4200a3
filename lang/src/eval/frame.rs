//! One activation of a block, evaluated strictly and lazily.
//!
//! A *point* is the value of a node that is one number or model, or one
//! element of a series; it exists or is a fault at once. A *whole* is a series
//! with all its elements, of which some may have failed (NaN); asking for such
//! an element as a point finds the fault, since the walk then meets the same
//! operations one by one. Branches not taken are never walked.
//!
//! The walk keeps a stack of its own, so that a sum of a hundred thousand
//! names, each defined by the one before, is no deeper than one.

mod point;
mod whole;

use super::arithmetic;
use super::chunk::Leaves;
use super::code::Code;
use super::error::{Fault, FaultKind, Place};
use super::limits;
use super::plan::{self, Along, Plan};
use super::value::{Kinds, Shape, Value, takes_list};
use crate::program::{Bind, Block, BlockId, Form, ModelNode, NodeId, Op};
use smallvec::SmallVec;
use std::collections::HashMap;
use std::sync::Arc;
use zij_stdlib::model::ParameterId;

/// A fault on its way up.
pub(super) type Failure = Box<Fault>;

/// A series with the count of its failed elements.
#[derive(Clone)]
pub(super) struct Whole {
    pub values: Arc<Vec<f64>>,
    pub failed: usize,
    /// The first failed element.
    pub first: usize,
}

/// What has been computed in an activation.
#[derive(Clone, Default)]
pub(super) struct Memo {
    points: Vec<Option<Result<Value, Failure>>>,
    wholes: HashMap<NodeId, Result<Whole, Failure>>,
    plans: HashMap<NodeId, Arc<Plan>>,
    /// Points that are elements of a series.
    elements: Vec<NodeId>,
}

/// An activation of a block.
pub(super) struct Frame<'a> {
    pub code: &'a Code<'a>,
    pub block: &'a Block,
    pub id: Option<BlockId>,
    pub kinds: &'a Kinds,
    pub inputs: Vec<Value>,
    /// The element that stands for each series, where a point is asked for.
    pub element: Option<usize>,
    pub memo: Memo,
}

/// Something to be computed before something else.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Need {
    Point(NodeId),
    Whole(NodeId),
}

type Needs = SmallVec<[Need; 4]>;

impl Memo {
    /// Nothing computed of `block`.
    pub fn of(block: &Block) -> Memo {
        let mut memo = Memo::default();
        memo.points.resize_with(block.nodes.len(), || None);
        memo
    }
}

impl Whole {
    fn new(values: Vec<f64>) -> Whole {
        Whole {
            values: Arc::new(values),
            failed: 0,
            first: 0,
        }
    }
}

impl<'a> Frame<'a> {
    /// An activation of `block` with nothing computed.
    pub fn new(
        code: &'a Code<'a>,
        block: &'a Block,
        id: Option<BlockId>,
        kinds: &'a Kinds,
        inputs: Vec<Value>,
    ) -> Frame<'a> {
        let memo = Memo::of(block);
        Frame {
            code,
            block,
            id,
            kinds,
            inputs,
            element: None,
            memo,
        }
    }

    /// The same activation with a value for the bound variable.
    pub fn with_input(&self, input: f64) -> Frame<'a> {
        let mut inputs = self.inputs.clone();
        if let Some(bound) = inputs.first_mut() {
            *bound = Value::Scalar(input);
        }
        Frame {
            inputs,
            memo: self.memo.clone(),
            ..*self
        }
    }

    /// The same activation at one element of its series.
    pub fn at_element(&self, element: usize) -> Frame<'a> {
        let mut frame = Frame {
            inputs: self.inputs.clone(),
            memo: self.memo.clone(),
            ..*self
        };
        frame.element = Some(element);
        frame
    }

    /// Where a node comes from.
    pub fn place(&self, node: NodeId) -> Place {
        let held = self.block.nodes.get(node as usize);
        Place {
            source: held.map_or(0, |node| node.source),
            span: held.map_or_else(Default::default, |node| node.span),
            block: self.id,
            node,
        }
    }

    /// A node as one number or model.
    pub fn point(&mut self, node: NodeId) -> Result<Value, Failure> {
        self.solve(Need::Point(node));
        self.known_point(node)
    }

    /// A node as a whole series.
    pub fn whole(&mut self, node: NodeId) -> Result<Whole, Failure> {
        self.solve(Need::Whole(node));
        self.known_whole(node)
    }

    /// A node as a whole series without a failed element.
    pub fn sound(&mut self, node: NodeId) -> Result<Arc<Vec<f64>>, Failure> {
        let whole = self.whole(node)?;
        if whole.failed > 0 {
            return Err(self.fault_of_element(node, &whole, whole.first));
        }
        Ok(whole.values)
    }

    /// Why an element of a series has no value.
    pub fn fault_of_element(&mut self, node: NodeId, whole: &Whole, element: usize) -> Failure {
        let kept: Vec<_> = std::mem::take(&mut self.memo.elements)
            .into_iter()
            .map(|node| (node, self.memo.points[node as usize].take()))
            .collect();
        let before = self.element.replace(element);
        let outcome = self.point(node);
        self.element = before;
        for node in std::mem::take(&mut self.memo.elements) {
            self.memo.points[node as usize] = None;
        }
        for (node, point) in kept {
            self.memo.points[node as usize] = point;
            self.memo.elements.push(node);
        }
        let mut fault = match outcome {
            Err(fault) => fault,
            Ok(_) => self.fault(FaultKind::Domain("this has no value here".into()), node),
        };
        fault.element = Some((element, whole.values.len()));
        fault.failed = whole.failed.max(1);
        fault
    }

    /// What a plan needs beforehand. A leaf that fails poisons its lanes only.
    pub fn leaves(&mut self, plan: &Plan) -> Leaves {
        let number = |value: Result<Value, Failure>| match value {
            Ok(Value::Scalar(number)) => number,
            Ok(Value::Series(_) | Value::Model(_)) | Err(_) => f64::NAN,
        };
        let model = |value: Result<Value, Failure>| match value {
            Ok(Value::Model(model)) => Some(model),
            Ok(Value::Series(_) | Value::Scalar(_)) | Err(_) => None,
        };
        Leaves {
            uniforms: plan
                .uniforms
                .iter()
                .map(|node| number(self.point(*node)))
                .collect(),
            models: plan.models.iter().map(|node| model(self.point(*node))).collect(),
            wholes: plan
                .wholes
                .iter()
                .map(|node| self.whole(*node).ok().map(|whole| whole.values))
                .collect(),
        }
    }

    fn fault(&self, kind: FaultKind, node: NodeId) -> Failure {
        Box::new(Fault::new(kind, self.place(node)))
    }

    fn known_point(&self, node: NodeId) -> Result<Value, Failure> {
        match self.memo.points.get(node as usize) {
            Some(Some(value)) => value.clone(),
            Some(None) | None => Err(self.fault(FaultKind::Unsupported("this order of evaluation"), node)),
        }
    }

    fn known_whole(&self, node: NodeId) -> Result<Whole, Failure> {
        match self.memo.wholes.get(&node) {
            Some(value) => value.clone(),
            None => Err(self.fault(FaultKind::Unsupported("this order of evaluation"), node)),
        }
    }

    fn number(&self, node: NodeId) -> Result<f64, Failure> {
        match self.known_point(node)? {
            Value::Scalar(number) => Ok(number),
            Value::Series(_) | Value::Model(_) => {
                Err(self.fault(FaultKind::Unsupported("a series where one number belongs"), node))
            }
        }
    }

    fn op(&self, node: NodeId) -> Option<&'a Op> {
        self.block.nodes.get(node as usize).map(|node| &node.op)
    }

    fn shape(&self, node: NodeId) -> Shape {
        self.kinds.shape(node)
    }
}

/// The walk: needs before what needs them.
impl Frame<'_> {
    fn solve(&mut self, need: Need) {
        let mut stack = vec![need];
        while let Some(top) = stack.last().copied() {
            if self.is_met(top) {
                stack.pop();
                continue;
            }
            let before = stack.len();
            for need in self.needs(top) {
                if !self.is_met(need) && need.may_precede(top) {
                    stack.push(need);
                }
            }
            if stack.len() == before {
                self.meet(top);
                stack.pop();
            } else {
                stack[before..].reverse();
            }
        }
    }

    fn is_met(&self, need: Need) -> bool {
        match need {
            Need::Point(node) => !matches!(self.memo.points.get(node as usize), Some(None)),
            Need::Whole(node) => self.memo.wholes.contains_key(&node),
        }
    }

    fn meet(&mut self, need: Need) {
        match need {
            Need::Point(node) => {
                let value = self.compute_point(node);
                if let Some(place) = self.memo.points.get_mut(node as usize) {
                    *place = Some(value);
                    if self.kinds.shape(node).many() {
                        self.memo.elements.push(node);
                    }
                }
            }
            Need::Whole(node) => {
                let whole = self.compute_whole(node).and_then(|whole| self.keep(node, whole));
                self.memo.wholes.insert(node, whole);
            }
        }
    }

    /// Only the sheet itself keeps its series.
    fn keep(&self, node: NodeId, whole: Whole) -> Result<Whole, Failure> {
        let held = matches!(self.op(node), Some(Op::List(_) | Op::Column(_)));
        if self.id.is_none() && !held && !self.code.keep(whole.values.len()) {
            return Err(self.fault(FaultKind::TooMuchMemory(limits::NUMBERS_KEPT), node));
        }
        Ok(whole)
    }

    fn needs(&mut self, need: Need) -> Needs {
        match need {
            Need::Point(node) => self.needs_of_point(node),
            Need::Whole(node) => self.needs_of_whole(node),
        }
    }

    fn needs_of_point(&self, node: NodeId) -> Needs {
        let Some(op) = self.op(node) else {
            return Needs::new();
        };
        match op {
            Op::Constant(_) | Op::Input(_) | Op::List(_) | Op::Column(_) => Needs::new(),
            Op::Gather(nodes) => {
                let chosen = self.element.and_then(|element| nodes.get(element));
                chosen.into_iter().map(|node| Need::Point(*node)).collect()
            }
            Op::Range(..) | Op::Sort(_) | Op::Filter(..) => Needs::from_iter([Need::Whole(node)]),
            Op::Select(condition, yes, no) => {
                let branch = match self.number_if_met(*condition) {
                    Some(0.0) => Some(*no),
                    Some(_) => Some(*yes),
                    None => None,
                };
                std::iter::once(*condition)
                    .chain(branch)
                    .map(Need::Point)
                    .collect()
            }
            Op::Logical(op, a, b) => {
                let more = self
                    .number_if_met(*a)
                    .is_some_and(|a| arithmetic::logical(*op, a, 0.5) == 0.5);
                std::iter::once(*a)
                    .chain(more.then_some(*b))
                    .map(Need::Point)
                    .collect()
            }
            Op::Reduce(_, nodes) => nodes.iter().map(|node| self.whole_or_point(*node)).collect(),
            Op::Bind(bind) => self.needs_of_bind(bind),
            Op::Model(model) => self.needs_of_model(model),
            Op::Negate(_)
            | Op::Not(_)
            | Op::Binary(..)
            | Op::PowerInteger(..)
            | Op::Compare(..)
            | Op::Call(..) => {
                let mut needs = Needs::new();
                op.operands(|operand| needs.push(Need::Point(operand)));
                needs
            }
        }
    }

    fn number_if_met(&self, node: NodeId) -> Option<f64> {
        self.number(node).ok()
    }

    fn whole_or_point(&self, node: NodeId) -> Need {
        if self.shape(node) == Shape::Series {
            Need::Whole(node)
        } else {
            Need::Point(node)
        }
    }

    fn capture_need(&self, body: BlockId, node: NodeId) -> Need {
        if self.code.sees_whole_series(body) {
            self.whole_or_point(node)
        } else {
            Need::Point(node)
        }
    }

    fn needs_of_bind(&self, bind: &Bind) -> Needs {
        let bounds: [Need; 2] = if bind.form == Form::Sum {
            [self.whole_or_point(bind.from); 2]
        } else {
            [Need::Point(bind.from), Need::Point(bind.to)]
        };
        let captures = bind
            .captures
            .iter()
            .map(|node| self.capture_need(bind.body, *node));
        bounds.into_iter().chain(captures).collect()
    }

    fn needs_of_model(&self, model: &ModelNode) -> Needs {
        let setting = |(id, node): &(ParameterId, NodeId)| {
            if takes_list(*id) {
                self.whole_or_point(*node)
            } else {
                Need::Point(*node)
            }
        };
        let function = model.function.iter();
        let captures = function
            .flat_map(|(_, body, captures)| captures.iter().map(|node| self.capture_need(*body, *node)));
        model.settings.iter().map(setting).chain(captures).collect()
    }

    fn needs_of_whole(&mut self, node: NodeId) -> Needs {
        let Some(op) = self.op(node) else {
            return Needs::new();
        };
        match op {
            Op::List(_) | Op::Column(_) | Op::Input(_) | Op::Constant(_) | Op::Reduce(..) => Needs::new(),
            Op::Gather(nodes) => nodes.iter().map(|node| Need::Point(*node)).collect(),
            Op::Range(from, to, step) => [*from, *to, step.node()].into_iter().map(Need::Point).collect(),
            Op::Sort(a) => Needs::from_iter([self.whole_or_point(*a)]),
            Op::Filter(a, c) => [*a, *c].iter().map(|node| self.whole_or_point(*node)).collect(),
            Op::Negate(_)
            | Op::Not(_)
            | Op::Binary(..)
            | Op::PowerInteger(..)
            | Op::Compare(..)
            | Op::Logical(..)
            | Op::Select(..)
            | Op::Call(..)
            | Op::Bind(_)
            | Op::Model(_) => {
                let plan = self.plan_of(node);
                let points = plan
                    .uniforms
                    .iter()
                    .chain(&plan.models)
                    .map(|node| Need::Point(*node));
                let wholes = plan.wholes.iter().map(|node| Need::Whole(*node));
                points.chain(wholes).collect()
            }
        }
    }

    /// The plan of a series, compiled when first asked for.
    fn plan_of(&mut self, node: NodeId) -> Arc<Plan> {
        if let Some(plan) = self.memo.plans.get(&node) {
            return Arc::clone(plan);
        }
        let wholes = &self.memo.wholes;
        let ready = |node: NodeId| matches!(wholes.get(&node), Some(Ok(_)));
        let plan = plan::compile(self.code, self.block, self.kinds, Along::Elements, node, &ready);
        let plan = Arc::new(plan);
        self.memo.plans.insert(node, Arc::clone(&plan));
        plan
    }
}

impl Need {
    /// A program refers only backwards; anything else would never end.
    fn may_precede(self, later: Need) -> bool {
        match (self, later) {
            (Need::Whole(a), Need::Point(b)) => a <= b,
            (Need::Point(a) | Need::Whole(a), Need::Point(b) | Need::Whole(b)) => a < b,
        }
    }
}
