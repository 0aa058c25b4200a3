//! Points: one number or model, computed from what it needs.

use super::super::body::Body;
use super::super::error::{FaultKind, Met};
use super::super::plan::BodyPlan;
use super::super::value::{Shape, Value, takes_list};
use super::super::{arithmetic, binding, chunk, limits, model, reduce};
use super::{Failure, Frame, Need};
use crate::ast::{BinaryOp, LogicalOp};
use crate::program::{Bind, BlockId, Form, ModelNode, NodeId, Op, Reduction};
use smallvec::SmallVec;
use std::sync::Arc;
use zij_stdlib::catalogue::{Definition, Entry};
use zij_stdlib::model::Model;

impl Frame<'_> {
    pub(super) fn compute_point(&mut self, node: NodeId) -> Result<Value, Failure> {
        if let Some(value) = self.element_of_known(node) {
            return Ok(Value::Scalar(value));
        }
        let Some(op) = self.op(node) else {
            return self.known_point(node);
        };
        match op {
            Op::Constant(number) => Ok(Value::Scalar(*number)),
            Op::Input(index) => self.input(node, *index),
            Op::List(_) | Op::Column(_) | Op::Gather(_) | Op::Range(..) | Op::Sort(_) | Op::Filter(..) => {
                self.element_of(node, op).map(Value::Scalar)
            }
            Op::Negate(_) | Op::Not(_) | Op::Binary(..) | Op::PowerInteger(..) | Op::Compare(..) => {
                self.arithmetic(node, op).map(Value::Scalar)
            }
            Op::Logical(op, a, b) => self.logical(*op, *a, *b).map(Value::Scalar),
            Op::Select(condition, yes, no) => {
                let chosen = if self.number(*condition)? == 0.0 {
                    *no
                } else {
                    *yes
                };
                self.known_point(chosen)
            }
            Op::Call(entry, model, arguments) => self.call(node, entry, *model, arguments).map(Value::Scalar),
            Op::Reduce(reduction, nodes) => self.reduce(node, *reduction, nodes).map(Value::Scalar),
            Op::Bind(bind) => self.bind(node, bind).map(Value::Scalar),
            Op::Model(model) => self.model(node, model).map(Value::Model),
        }
    }

    /// An element of a series that was computed as a whole.
    fn element_of_known(&self, node: NodeId) -> Option<f64> {
        let (Some(element), Some(Ok(whole))) = (self.element, self.memo.wholes.get(&node)) else {
            return None;
        };
        let value = *whole.values.get(element)?;
        (value.is_finite() || self.may_be_infinite(node, value)).then_some(value)
    }

    fn input(&self, node: NodeId, index: u32) -> Result<Value, Failure> {
        match (self.inputs.get(index as usize), self.element) {
            (Some(Value::Series(series)), Some(element)) => match series.get(element) {
                Some(value) if value.is_finite() => Ok(Value::Scalar(*value)),
                Some(_) | None => Err(self.no_element(node)),
            },
            (Some(value), _) => Ok(value.clone()),
            (None, _) => Err(self.fault(FaultKind::Unsupported("this input"), node)),
        }
    }

    fn no_element(&self, node: NodeId) -> Failure {
        self.fault(FaultKind::Domain("this element has no value".into()), node)
    }

    /// The element of a series that stands for it here.
    fn element_of(&self, node: NodeId, op: &Op) -> Result<f64, Failure> {
        let Some(element) = self.element else {
            return Err(self.fault(FaultKind::Unsupported("a series where one number belongs"), node));
        };
        let value = match op {
            Op::List(list) => list.get(element).copied(),
            Op::Column(index) => self
                .code
                .column(*index)
                .and_then(|column| column.get(element).copied()),
            Op::Gather(nodes) => match nodes.get(element) {
                Some(node) => Some(self.number(*node)?),
                None => None,
            },
            Op::Range(..)
            | Op::Sort(_)
            | Op::Filter(..)
            | Op::Constant(_)
            | Op::Input(_)
            | Op::Negate(_)
            | Op::Not(_)
            | Op::Binary(..)
            | Op::PowerInteger(..)
            | Op::Compare(..)
            | Op::Logical(..)
            | Op::Select(..)
            | Op::Call(..)
            | Op::Reduce(..)
            | Op::Bind(_)
            | Op::Model(_) => self.known_whole(node)?.values.get(element).copied(),
        };
        let value = value.filter(|value| value.is_finite());
        value.ok_or_else(|| self.no_element(node))
    }

    fn arithmetic(&self, node: NodeId, op: &Op) -> Result<f64, Failure> {
        let (value, kind, operands): (f64, FaultKind, SmallVec<[NodeId; 2]>) = match op {
            Op::Negate(a) => (
                -self.number(*a)?,
                FaultKind::Overflow,
                SmallVec::from_slice(&[*a]),
            ),
            Op::Not(a) => (
                1.0 - self.number(*a)?,
                FaultKind::Overflow,
                SmallVec::from_slice(&[*a]),
            ),
            Op::PowerInteger(a, power) => {
                let x = self.number(*a)?;
                let value = arithmetic::power_integer(x, *power);
                (
                    value,
                    reason(BinaryOp::Power, x, f64::from(*power)),
                    SmallVec::from_slice(&[*a]),
                )
            }
            Op::Binary(op, a, b) => {
                let (x, y) = (self.number(*a)?, self.number(*b)?);
                (
                    arithmetic::binary(*op, x, y),
                    reason(*op, x, y),
                    SmallVec::from_slice(&[*a, *b]),
                )
            }
            Op::Compare(op, a, b) => {
                let (x, y) = (self.number(*a)?, self.number(*b)?);
                (
                    arithmetic::compare(*op, x, y),
                    FaultKind::Overflow,
                    SmallVec::from_slice(&[*a, *b]),
                )
            }
            Op::Constant(_)
            | Op::List(_)
            | Op::Input(_)
            | Op::Column(_)
            | Op::Gather(_)
            | Op::Range(..)
            | Op::Logical(..)
            | Op::Select(..)
            | Op::Call(..)
            | Op::Reduce(..)
            | Op::Sort(_)
            | Op::Filter(..)
            | Op::Bind(_)
            | Op::Model(_) => (f64::NAN, FaultKind::Overflow, SmallVec::new()),
        };
        if value.is_finite() || self.may_be_infinite(node, value) {
            return Ok(value);
        }
        Err(self.failed(node, kind, &operands))
    }

    /// Whether a value of this node may be infinite: the constant `∞`, and
    /// what the library calls “never”.
    pub fn may_be_infinite(&self, node: NodeId, value: f64) -> bool {
        match self.op(node) {
            Some(Op::Call(entry, ..)) => value == f64::INFINITY && chunk::may_be_never(entry),
            Some(Op::Constant(_)) => value.is_infinite(),
            Some(Op::Negate(a)) => value.is_infinite() && matches!(self.op(*a), Some(Op::Constant(_))),
            Some(
                Op::List(_)
                | Op::Input(_)
                | Op::Column(_)
                | Op::Gather(_)
                | Op::Range(..)
                | Op::Not(_)
                | Op::Binary(..)
                | Op::PowerInteger(..)
                | Op::Compare(..)
                | Op::Logical(..)
                | Op::Select(..)
                | Op::Reduce(..)
                | Op::Sort(_)
                | Op::Filter(..)
                | Op::Bind(_)
                | Op::Model(_),
            )
            | None => false,
        }
    }

    /// A fault of an operation with its operands; of one that never comes if
    /// there is one.
    fn failed(&self, node: NodeId, kind: FaultKind, operands: &[NodeId]) -> Failure {
        let infinite = |operand: &&NodeId| self.number(**operand).is_ok_and(f64::is_infinite);
        if let Some(never) = operands.iter().find(infinite) {
            return self.fault(FaultKind::Never, *never);
        }
        let mut fault = self.fault(kind, node);
        fault.met = self.met(operands);
        fault
    }

    /// The values of operands, except those written as plain numbers.
    fn met(&self, operands: &[NodeId]) -> Vec<Met> {
        let mut met = Vec::new();
        for operand in operands {
            let written = matches!(self.op(*operand), Some(Op::Constant(_)));
            if let (false, Ok(value)) = (written, self.number(*operand)) {
                let place = self.place(*operand);
                met.push(Met { place, value });
            }
        }
        met
    }

    fn logical(&self, op: LogicalOp, a: NodeId, b: NodeId) -> Result<f64, Failure> {
        let left = self.number(a)?;
        if arithmetic::logical(op, left, 0.5) != 0.5 {
            return Ok(left);
        }
        self.number(b)
    }

    fn call(
        &self,
        node: NodeId,
        entry: &'static Entry,
        model: Option<NodeId>,
        arguments: &[NodeId],
    ) -> Result<f64, Failure> {
        let model = match model {
            None => None,
            Some(model) => match self.known_point(model)? {
                Value::Model(model) => Some(model),
                Value::Scalar(_) | Value::Series(_) => None,
            },
        };
        let mut numbers: SmallVec<[f64; 8]> = SmallVec::new();
        for argument in arguments {
            numbers.push(self.number(*argument)?);
        }
        if numbers.iter().any(|number| !number.is_finite()) {
            return Err(self.failed(node, FaultKind::Overflow, arguments));
        }
        let value = chunk::call_entry(entry, model.as_ref(), &numbers);
        if value.is_nan() {
            let reason = refusal(entry, model.as_deref(), &numbers);
            return Err(self.failed(node, FaultKind::Domain(reason), arguments));
        }
        Ok(value)
    }

    fn reduce(&mut self, node: NodeId, reduction: Reduction, nodes: &[NodeId]) -> Result<f64, Failure> {
        let Some(first) = nodes.first() else {
            return Err(self.fault(FaultKind::TooFew(reduction, 0), node));
        };
        let series = self.sound_or_one(*first)?;
        let fraction = match nodes.get(1) {
            Some(fraction) => self.number(*fraction)?,
            None => 0.5,
        };
        reduce::reduce(reduction, &series, fraction).map_err(|kind| {
            let mut fault = self.fault(kind, node);
            fault.met = nodes.get(1).map_or_else(Vec::new, |node| self.met(&[*node]));
            fault
        })
    }

    /// A series without a failed element, or one number as a series.
    pub(super) fn sound_or_one(&mut self, node: NodeId) -> Result<Arc<Vec<f64>>, Failure> {
        if self.shape(node) == Shape::Series {
            return self.sound(node);
        }
        let number = self.number(node)?;
        if number.is_infinite() {
            return Err(self.fault(FaultKind::Never, node));
        }
        Ok(Arc::new(vec![number]))
    }

    /// The captures of a body, element by element or whole.
    fn captures(&mut self, body: BlockId, nodes: &[NodeId]) -> Result<Vec<Value>, Failure> {
        let mut captures = Vec::with_capacity(nodes.len());
        for node in nodes {
            captures.push(match self.capture_need(body, *node) {
                Need::Whole(node) => Value::Series(self.whole(node)?.values),
                Need::Point(node) => match self.known_point(node)? {
                    Value::Scalar(number) if number.is_infinite() => {
                        return Err(self.fault(FaultKind::Never, node));
                    }
                    value => value,
                },
            });
        }
        Ok(captures)
    }

    fn body_plan(&self, node: NodeId, body: BlockId, captures: &[NodeId]) -> Result<BodyPlan, Failure> {
        if self.code.is_too_deep(body) {
            return Err(self.fault(FaultKind::TooDeep(limits::NESTED_FORMS), node));
        }
        let shapes = self.kinds.input_shapes(self.code, body, captures);
        let plan = BodyPlan::compile(self.code, body, &shapes);
        plan.ok_or_else(|| self.fault(FaultKind::Unsupported("this body"), node))
    }

    fn bind(&mut self, node: NodeId, bind: &Bind) -> Result<f64, Failure> {
        let plan = self.body_plan(node, bind.body, &bind.captures)?;
        let captures = self.captures(bind.body, &bind.captures)?;
        let series;
        let over = if bind.form == Form::Sum {
            series = self.sound_or_one(bind.from)?;
            binding::Over::Series(&series)
        } else {
            binding::Over::Interval(self.number(bind.from)?, self.number(bind.to)?)
        };
        let Some(mut body) = Body::new(self.code, &plan, captures, self.element) else {
            return Err(self.fault(FaultKind::Unsupported("this body"), node));
        };
        let ends = [bind.from, bind.to].map(|node| self.place(node));
        let outcome = binding::evaluate(bind.form, &mut body, over);
        outcome.map_err(|trouble| trouble.fault(&body, self.place(node), ends))
    }

    fn model(&mut self, node: NodeId, model: &ModelNode) -> Result<Arc<Model>, Failure> {
        let mut settings = model::Settings::new(model.base);
        for (id, setting) in &model.settings {
            let value = if takes_list(*id) {
                Value::Series(self.sound_or_one(*setting)?)
            } else {
                Value::Scalar(self.number(*setting)?)
            };
            settings.push(*id, &value);
        }
        let built = match &model.function {
            Some((id, body, captures)) => {
                let plan = self.body_plan(node, *body, captures)?;
                let captures = self.captures(*body, captures)?;
                let function = model::equation_of_state(self.code, &Arc::new(plan), captures);
                settings.build(Some((*id, function)))
            }
            None => settings.build_or_recall(self.code),
        };
        built.map_err(|error| {
            let setting = model.settings.iter().find(|(id, _)| Some(*id) == error.parameter);
            let mut fault = self.fault(FaultKind::Model(error.message.into()), node);
            fault.met = setting.map_or_else(Vec::new, |(_, node)| self.met(&[*node]));
            fault
        })
    }
}

/// Why an arithmetic operation on finite numbers fails.
fn reason(op: BinaryOp, a: f64, b: f64) -> FaultKind {
    match op {
        BinaryOp::Add | BinaryOp::Subtract | BinaryOp::Multiply => FaultKind::Overflow,
        BinaryOp::Divide if b == 0.0 => FaultKind::DivisionByZero,
        BinaryOp::Power if a == 0.0 && b < 0.0 => FaultKind::ZeroToNegativePower,
        BinaryOp::Power if a < 0.0 && b.fract() != 0.0 => FaultKind::NegativeToPower(b),
        BinaryOp::Divide | BinaryOp::Power => FaultKind::Overflow,
    }
}

/// What the library says of arguments it has no value for.
fn refusal(entry: &Entry, model: Option<&Model>, arguments: &[f64]) -> Box<str> {
    let answer = match (entry.definition, model) {
        (Definition::Function(function), _) => function(arguments),
        (Definition::ModelValue(function), Some(model)) => function(model),
        (Definition::Cosmology(function), Some(model)) => function(model, arguments),
        (Definition::Constant(..), _) => Ok(f64::NAN),
        (Definition::ModelValue(_) | Definition::Cosmology(_), None) => {
            return format!("{} needs a model", entry.name).into();
        }
    };
    match answer {
        Err(error) => error.0,
        Ok(_) => format!("{} has no finite value here", entry.name).into(),
    }
}
