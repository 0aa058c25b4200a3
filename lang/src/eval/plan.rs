//! A node's cone compiled to steps over registers.
//!
//! A block can be run along two directions. *Along the elements* every series
//! is a lane per element, and what is not a series is the same in all lanes.
//! *Along the input* a body is run for many values of its bound variable at
//! once, and what does not depend on that variable is the same in all lanes.
//!
//! ```text
//!   sqrt(Ωm*(1+z)^3 + ΩΛ)  along the elements of z, with Ωm, ΩΛ, 1 uniform
//!     r0 = 1 + z
//!     r1 = r0 ^ 3
//!     r0 = Ωm * r1
//!     r1 = r0 + ΩΛ
//!     out = sqrt r1
//! ```
//!
//! What needs a whole series of its own (a range, a sort, a filter) is a leaf,
//! read by slice. In a body, what makes a series of its own for each value of
//! the bound variable is computed lane by lane, by the strict evaluator.

use super::code::Code;
use super::value::{Kinds, Shape, takes_list};
use crate::ast::{BinaryOp, CompareOp, LogicalOp};
use crate::program::{Bind, Block, BlockId, Form, ModelNode, NodeId, Op};
use smallvec::SmallVec;
use std::collections::{HashMap, HashSet};
use std::sync::Arc;
use zij_stdlib::catalogue::Entry;
use zij_stdlib::model::{Base, ParameterId};

/// What the lanes are.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Along {
    /// One for each element of the series.
    Elements,
    /// One for each value of the bound variable.
    Input,
}

/// Where a number comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Operand {
    Register(u32),
    /// The same number in every lane.
    Uniform(u32),
    /// A whole series, read by slice.
    Slice(u32),
    /// The bound variable.
    Lanes,
}

/// Where a model comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum ModelOperand {
    Register(u32),
    Uniform(u32),
}

/// What is handed to a body or to a model's list parameter.
#[derive(Clone, Debug)]
pub(super) enum Capture {
    Number(Operand),
    Model(ModelOperand),
    Whole(u32),
    /// A list gathered from numbers of the lane.
    Gathered(Box<[Operand]>),
}

/// One step of a plan.
pub(super) struct Step {
    pub node: NodeId,
    pub to: u32,
    pub work: Work,
}

/// What a step does.
pub(super) enum Work {
    Negate(Operand),
    Not(Operand),
    Binary(BinaryOp, Operand, Operand),
    PowerInteger(Operand, i32),
    Compare(CompareOp, Operand, Operand),
    Logical(LogicalOp, Operand, Operand),
    Select(Operand, Operand, Operand),
    Call(CallWork),
    Bind(Box<BindWork>),
    Model(Box<ModelWork>),
    /// Lane by lane, strictly.
    PerLane(Shape),
}

/// A call of the library.
pub(super) struct CallWork {
    pub entry: &'static Entry,
    pub model: Option<ModelOperand>,
    pub arguments: Box<[Operand]>,
}

/// A binding form in each lane.
pub(super) struct BindWork {
    pub form: Form,
    pub from: Capture,
    pub to: Operand,
    pub captures: Box<[Capture]>,
    pub body: Arc<BodyPlan>,
}

/// A model in each lane.
pub(super) struct ModelWork {
    pub base: &'static Base,
    pub settings: Box<[(ParameterId, Capture)]>,
    pub function: Option<(ParameterId, Arc<BodyPlan>, Box<[Capture]>)>,
}

/// A compiled cone.
pub(super) struct Plan {
    pub steps: Vec<Step>,
    pub output: Operand,
    pub registers: usize,
    pub model_registers: usize,
    /// Nodes whose value is the same in every lane.
    pub uniforms: Vec<NodeId>,
    /// Models that are the same in every lane.
    pub models: Vec<NodeId>,
    /// Series needed as a whole.
    pub wholes: Vec<NodeId>,
    /// How much a lane costs.
    pub cost: Cost,
}

/// Roughly how long a lane takes, which decides when threads are worth it.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Cost {
    /// Nanoseconds.
    Arithmetic,
    /// Up to a microsecond.
    Calls,
    /// Binding forms and models.
    Searches,
}

/// A body compiled along its input.
pub(super) struct BodyPlan {
    pub id: BlockId,
    pub kinds: Kinds,
    pub plan: Plan,
    /// What settles how many elements its value has, if it is a series.
    pub lengths: Vec<Length>,
}

/// What settles the length of a body's value.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Length {
    /// The length of the series handed to this input.
    OfInput(u32),
    /// A series written in the body.
    Fixed(usize),
    /// A series made in the body, known only when it runs.
    Unknown,
}

impl BodyPlan {
    /// Compiles body `id` for captures of the shapes given.
    pub fn compile(code: &Code<'_>, id: BlockId, shapes: &[Shape]) -> Option<BodyPlan> {
        let block = code.body(id)?;
        let kinds = Kinds::of(code, block, shapes);
        let plan = compile(code, block, &kinds, Along::Input, block.result, &|_| false);
        let lengths = lengths(code, block, &kinds);
        Some(BodyPlan {
            id,
            kinds,
            plan,
            lengths,
        })
    }

    /// Whether its value is a series, so that it is run for one element at a
    /// time.
    pub fn is_series(&self, code: &Code<'_>) -> bool {
        code.body(self.id)
            .is_some_and(|block| self.kinds.shape(block.result).many())
    }
}

/// What settles the length of a body's value: the series that reach it
/// element by element.
fn lengths(code: &Code<'_>, block: &Block, kinds: &Kinds) -> Vec<Length> {
    let mut lengths = Vec::new();
    let mut seen = HashSet::new();
    let mut stack = vec![block.result];
    while let Some(node) = stack.pop() {
        let Some(held) = block.nodes.get(node as usize) else {
            continue;
        };
        if !kinds.shape(node).many() || !seen.insert(node) {
            continue;
        }
        match &held.op {
            Op::Input(index) => lengths.push(Length::OfInput(*index)),
            Op::List(list) => lengths.push(Length::Fixed(list.len())),
            Op::Column(index) => {
                lengths.extend(code.column(*index).map(|column| Length::Fixed(column.len())))
            }
            Op::Gather(nodes) => lengths.push(Length::Fixed(nodes.len())),
            Op::Range(..) | Op::Sort(_) | Op::Filter(..) => lengths.push(Length::Unknown),
            Op::Constant(_) | Op::Reduce(..) => {}
            Op::Negate(_)
            | Op::Not(_)
            | Op::Binary(..)
            | Op::PowerInteger(..)
            | Op::Compare(..)
            | Op::Logical(..)
            | Op::Select(..)
            | Op::Call(..)
            | Op::Bind(_)
            | Op::Model(_) => held.op.operands(|operand| stack.push(operand)),
        }
    }
    lengths
}

/// Compiles the cone of `output`. Series for which `ready` holds are read and
/// not computed again.
pub(super) fn compile(
    code: &Code<'_>,
    block: &Block,
    kinds: &Kinds,
    along: Along,
    output: NodeId,
    ready: &dyn Fn(NodeId) -> bool,
) -> Plan {
    let mut compiler = Compiler {
        code,
        block,
        kinds,
        along,
        output,
        ready,
        numbers: HashMap::new(),
        models: HashMap::new(),
        free: [Vec::new(), Vec::new()],
        plan: Plan {
            steps: Vec::new(),
            output: Operand::Lanes,
            registers: 0,
            model_registers: 0,
            uniforms: Vec::new(),
            models: Vec::new(),
            wholes: Vec::new(),
            cost: Cost::Arithmetic,
        },
    };
    let cone = compiler.cone();
    compiler.emit(&cone);
    compiler.plan.output = compiler.operand(output);
    compiler.plan
}

/// How a node takes part in a plan.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Class {
    Leaf,
    Step,
    PerLane,
}

struct Compiler<'a> {
    code: &'a Code<'a>,
    block: &'a Block,
    kinds: &'a Kinds,
    along: Along,
    output: NodeId,
    ready: &'a dyn Fn(NodeId) -> bool,
    numbers: HashMap<NodeId, Operand>,
    models: HashMap<NodeId, ModelOperand>,
    /// Free registers: numbers, models.
    free: [Vec<u32>; 2],
    plan: Plan,
}

impl Compiler<'_> {
    fn op(&self, node: NodeId) -> Option<&Op> {
        self.block.nodes.get(node as usize).map(|node| &node.op)
    }

    fn class(&self, node: NodeId) -> Class {
        let Some(op) = self.op(node) else {
            return Class::Leaf;
        };
        match self.along {
            Along::Elements if !self.kinds.shape(node).many() => Class::Leaf,
            Along::Elements if node != self.output && (self.ready)(node) => Class::Leaf,
            Along::Input if !self.kinds.varies(node) => Class::Leaf,
            Along::Elements | Along::Input => self.class_of_op(op),
        }
    }

    /// The class of a node that differs from lane to lane.
    fn class_of_op(&self, op: &Op) -> Class {
        match op {
            Op::Constant(_) | Op::List(_) | Op::Column(_) | Op::Input(_) => Class::Leaf,
            Op::Negate(_)
            | Op::Not(_)
            | Op::Binary(..)
            | Op::PowerInteger(..)
            | Op::Compare(..)
            | Op::Logical(..)
            | Op::Select(..)
            | Op::Call(..) => Class::Step,
            Op::Bind(bind) => self.step_if(self.is_bind_step(bind)),
            Op::Model(model) => self.step_if(self.is_model_step(model)),
            Op::Gather(_) | Op::Range(..) | Op::Sort(_) | Op::Filter(..) | Op::Reduce(..) => match self.along
            {
                Along::Elements => Class::Leaf,
                Along::Input => Class::PerLane,
            },
        }
    }

    fn step_if(&self, possible: bool) -> Class {
        if possible { Class::Step } else { Class::PerLane }
    }

    fn is_bind_step(&self, bind: &Bind) -> bool {
        let fixed = |node: NodeId| self.along == Along::Elements || !self.kinds.varies(node);
        let from =
            bind.form != Form::Sum || (fixed(bind.from) && self.kinds.shape(bind.from) == Shape::Series);
        let mut captures = bind.captures.iter();
        !self.code.is_too_deep(bind.body)
            && from
            && captures.all(|node| fixed(*node) || !self.is_whole_capture(bind.body, *node))
    }

    fn is_whole_capture(&self, body: BlockId, node: NodeId) -> bool {
        self.kinds.shape(node) == Shape::Series && self.code.sees_whole_series(body)
    }

    fn is_model_step(&self, model: &ModelNode) -> bool {
        let settings = model.settings.iter().all(|(id, node)| {
            let varying = self.along == Along::Input && self.kinds.varies(*node);
            let gathered = matches!(self.op(*node), Some(Op::Gather(_)));
            !takes_list(*id) || !self.kinds.shape(*node).many() || !varying || gathered
        });
        let function = model.function.as_ref().is_none_or(|(_, body, captures)| {
            !self.code.is_too_deep(*body) && !captures.iter().any(|node| self.is_whole_capture(*body, *node))
        });
        settings && function
    }

    /// The nodes a step needs in its own lane.
    fn lane_operands(&self, op: &Op, visit: &mut dyn FnMut(NodeId)) {
        match op {
            Op::Bind(bind) => {
                if bind.form != Form::Sum {
                    visit(bind.from);
                    visit(bind.to);
                }
                let by_lane = |node: &&NodeId| !self.is_whole_capture(bind.body, **node);
                bind.captures.iter().filter(by_lane).for_each(|node| visit(*node));
            }
            Op::Model(model) => {
                for (id, node) in &model.settings {
                    self.setting_operands(*id, *node, visit);
                }
                if let Some((_, _, captures)) = &model.function {
                    captures.iter().for_each(|node| visit(*node));
                }
            }
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
            | Op::Filter(..) => op.operands(visit),
        }
    }

    fn setting_operands(&self, id: ParameterId, node: NodeId, visit: &mut dyn FnMut(NodeId)) {
        if !takes_list(id) || !self.kinds.shape(node).many() {
            visit(node);
        } else if let Some(Op::Gather(nodes)) = self.op(node)
            && self.along == Along::Input
            && self.kinds.varies(node)
        {
            nodes.iter().for_each(|node| visit(*node));
        }
    }

    /// The nodes that become steps, in evaluation order.
    fn cone(&self) -> Vec<NodeId> {
        let mut found = HashSet::new();
        let mut stack = vec![self.output];
        while let Some(node) = stack.pop() {
            let class = self.class(node);
            if class == Class::Leaf || !found.insert(node) {
                continue;
            }
            if let (Class::Step, Some(op)) = (class, self.op(node)) {
                self.lane_operands(op, &mut |operand| stack.push(operand));
            }
        }
        let mut cone: Vec<NodeId> = found.into_iter().collect();
        cone.sort_unstable();
        cone
    }

    fn emit(&mut self, cone: &[NodeId]) {
        let last_uses = self.last_uses(cone);
        for (index, node) in cone.iter().enumerate() {
            let work = self.work(*node);
            let is_model = self.kinds.shape(*node).one() == Shape::Model;
            self.plan.cost = self.plan.cost.max(work.cost());
            let to = self.take_register(is_model);
            if is_model {
                self.models.insert(*node, ModelOperand::Register(to));
            } else {
                self.numbers.insert(*node, Operand::Register(to));
            }
            self.plan.steps.push(Step {
                node: *node,
                to,
                work,
            });
            for done in last_uses.get(&index).into_iter().flatten() {
                self.release(*done);
            }
        }
    }

    /// After which step each node of the cone is no longer needed.
    fn last_uses(&self, cone: &[NodeId]) -> HashMap<usize, SmallVec<[NodeId; 2]>> {
        let mut last: HashMap<NodeId, usize> = HashMap::new();
        for (index, node) in cone.iter().enumerate() {
            if let (Class::Step, Some(op)) = (self.class(*node), self.op(*node)) {
                self.lane_operands(op, &mut |operand| {
                    last.insert(operand, index);
                });
            }
        }
        let mut by_step: HashMap<usize, SmallVec<[NodeId; 2]>> = HashMap::new();
        for node in cone {
            if let Some(index) = last.get(node) {
                by_step.entry(*index).or_default().push(*node);
            }
        }
        by_step
    }

    fn take_register(&mut self, is_model: bool) -> u32 {
        let count = if is_model {
            &mut self.plan.model_registers
        } else {
            &mut self.plan.registers
        };
        self.free[usize::from(is_model)].pop().unwrap_or_else(|| {
            *count += 1;
            *count as u32 - 1
        })
    }

    fn release(&mut self, node: NodeId) {
        if let Some(Operand::Register(register)) = self.numbers.get(&node) {
            self.free[0].push(*register);
        }
        if let Some(ModelOperand::Register(register)) = self.models.get(&node) {
            self.free[1].push(*register);
        }
    }

    fn operand(&mut self, node: NodeId) -> Operand {
        if let Some(known) = self.numbers.get(&node) {
            return *known;
        }
        let operand = if self.along == Along::Input && self.kinds.varies(node) {
            Operand::Lanes
        } else if self.along == Along::Elements && self.kinds.shape(node).many() {
            Operand::Slice(self.whole(node))
        } else {
            Operand::Uniform(place_of(&mut self.plan.uniforms, node))
        };
        self.numbers.insert(node, operand);
        operand
    }

    fn model(&mut self, node: NodeId) -> ModelOperand {
        let known = self.models.get(&node).copied();
        known.unwrap_or_else(|| {
            let leaf = ModelOperand::Uniform(place_of(&mut self.plan.models, node));
            self.models.insert(node, leaf);
            leaf
        })
    }

    fn whole(&mut self, node: NodeId) -> u32 {
        place_of(&mut self.plan.wholes, node)
    }

    fn capture(&mut self, body: BlockId, node: NodeId) -> Capture {
        match self.kinds.shape(node) {
            Shape::Model | Shape::Models => Capture::Model(self.model(node)),
            Shape::Series if self.code.sees_whole_series(body) => Capture::Whole(self.whole(node)),
            Shape::Series | Shape::Number => Capture::Number(self.operand(node)),
        }
    }

    fn captures(&mut self, body: BlockId, nodes: &[NodeId]) -> Box<[Capture]> {
        nodes.iter().map(|node| self.capture(body, *node)).collect()
    }

    fn work(&mut self, node: NodeId) -> Work {
        let block = self.block;
        let per_lane = Work::PerLane(self.kinds.shape(node).one());
        let (Class::Step, Some(held)) = (self.class(node), block.nodes.get(node as usize)) else {
            return per_lane;
        };
        match &held.op {
            Op::Negate(a) => Work::Negate(self.operand(*a)),
            Op::Not(a) => Work::Not(self.operand(*a)),
            Op::Binary(op, a, b) => Work::Binary(*op, self.operand(*a), self.operand(*b)),
            Op::PowerInteger(a, power) => Work::PowerInteger(self.operand(*a), *power),
            Op::Compare(op, a, b) => Work::Compare(*op, self.operand(*a), self.operand(*b)),
            Op::Logical(op, a, b) => Work::Logical(*op, self.operand(*a), self.operand(*b)),
            Op::Select(c, a, b) => Work::Select(self.operand(*c), self.operand(*a), self.operand(*b)),
            Op::Call(entry, model, arguments) => Work::Call(CallWork {
                entry,
                model: model.map(|model| self.model(model)),
                arguments: arguments.iter().map(|node| self.operand(*node)).collect(),
            }),
            Op::Bind(bind) => self.bind(bind).unwrap_or(per_lane),
            Op::Model(model) => self.model_work(model).unwrap_or(per_lane),
            Op::Constant(_)
            | Op::List(_)
            | Op::Input(_)
            | Op::Column(_)
            | Op::Gather(_)
            | Op::Range(..)
            | Op::Reduce(..)
            | Op::Sort(_)
            | Op::Filter(..) => per_lane,
        }
    }

    fn bind(&mut self, bind: &Bind) -> Option<Work> {
        let shapes = self.kinds.input_shapes(self.code, bind.body, &bind.captures);
        let body = BodyPlan::compile(self.code, bind.body, &shapes)?;
        let sum = bind.form == Form::Sum;
        let from = if sum {
            Capture::Whole(self.whole(bind.from))
        } else {
            Capture::Number(self.operand(bind.from))
        };
        let to = if sum {
            Operand::Lanes
        } else {
            self.operand(bind.to)
        };
        Some(Work::Bind(Box::new(BindWork {
            form: bind.form,
            from,
            to,
            captures: self.captures(bind.body, &bind.captures),
            body: Arc::new(body),
        })))
    }

    fn model_work(&mut self, model: &ModelNode) -> Option<Work> {
        let settings = model
            .settings
            .iter()
            .map(|(id, node)| (*id, self.setting(*id, *node)))
            .collect();
        let function = match &model.function {
            None => None,
            Some((id, body, captures)) => {
                let shapes = self.kinds.input_shapes(self.code, *body, captures);
                let plan = BodyPlan::compile(self.code, *body, &shapes)?;
                Some((*id, Arc::new(plan), self.captures(*body, captures)))
            }
        };
        Some(Work::Model(Box::new(ModelWork {
            base: model.base,
            settings,
            function,
        })))
    }

    fn setting(&mut self, id: ParameterId, node: NodeId) -> Capture {
        if !takes_list(id) {
            return Capture::Number(self.operand(node));
        }
        if !self.kinds.shape(node).many() {
            return Capture::Gathered(Box::new([self.operand(node)]));
        }
        let block = self.block;
        match block.nodes.get(node as usize).map(|node| &node.op) {
            Some(Op::Gather(nodes)) if self.along == Along::Input && self.kinds.varies(node) => {
                Capture::Gathered(nodes.iter().map(|node| self.operand(*node)).collect())
            }
            Some(_) | None => Capture::Whole(self.whole(node)),
        }
    }
}

impl Work {
    fn cost(&self) -> Cost {
        match self {
            Work::Negate(_)
            | Work::Not(_)
            | Work::Binary(..)
            | Work::PowerInteger(..)
            | Work::Compare(..)
            | Work::Logical(..)
            | Work::Select(..) => Cost::Arithmetic,
            Work::Call(_) => Cost::Calls,
            Work::Bind(_) | Work::Model(_) | Work::PerLane(_) => Cost::Searches,
        }
    }

    /// Calls `number` and `model` with what differs from lane to lane.
    pub fn operands(&self, number: &mut dyn FnMut(Operand), model: &mut dyn FnMut(ModelOperand)) {
        match self {
            Work::Negate(a) | Work::Not(a) | Work::PowerInteger(a, _) => number(*a),
            Work::Binary(_, a, b) | Work::Compare(_, a, b) | Work::Logical(_, a, b) => {
                [*a, *b].into_iter().for_each(number);
            }
            Work::Select(c, a, b) => [*c, *a, *b].into_iter().for_each(number),
            Work::Call(call) => {
                call.arguments.iter().copied().for_each(number);
                call.model.into_iter().for_each(model);
            }
            Work::Bind(bind) => {
                number(bind.to);
                let captures = std::iter::once(&bind.from).chain(&bind.captures);
                captures.for_each(|capture| capture.operands(number, model));
            }
            Work::Model(work) => {
                let settings = work.settings.iter().map(|(_, setting)| setting);
                let captures = work.function.iter().flat_map(|(_, _, captures)| captures);
                settings
                    .chain(captures)
                    .for_each(|capture| capture.operands(number, model));
            }
            Work::PerLane(_) => {}
        }
    }
}

impl Capture {
    fn operands(&self, number: &mut dyn FnMut(Operand), model: &mut dyn FnMut(ModelOperand)) {
        match self {
            Capture::Number(operand) => number(*operand),
            Capture::Model(operand) => model(*operand),
            Capture::Whole(_) => {}
            Capture::Gathered(operands) => operands.iter().copied().for_each(number),
        }
    }
}

/// The index of `node` in a list of leaves, added if new.
fn place_of(leaves: &mut Vec<NodeId>, node: NodeId) -> u32 {
    let found = leaves.iter().position(|leaf| *leaf == node);
    found.unwrap_or_else(|| {
        leaves.push(node);
        leaves.len() - 1
    }) as u32
}
