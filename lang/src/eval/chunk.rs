//! Running a plan over a chunk of lanes.
//!
//! A register holds one number per lane of a chunk; a chunk is small enough
//! that the registers of a long formula stay in the fastest cache. Each
//! element is computed from its own lane alone, so neither the size of a chunk
//! nor the number of threads can change a digit.

use super::arithmetic;
use super::body::Body;
use super::frame::Frame;
use super::model;
use super::plan::{BindWork, CallWork, Capture, ModelOperand, ModelWork, Operand, Plan, Step, Work};
use super::value::{Shape, Value};
use super::{binding, limits};
use crate::ast::{BinaryOp, CompareOp};
use smallvec::SmallVec;
use std::sync::Arc;
use zij_stdlib::catalogue::{Definition, Entry};
use zij_stdlib::model::Model;

/// Lanes of a chunk.
pub(super) const LANES: usize = limits::CHUNK_LANES;

/// What is the same in every chunk.
pub(super) struct Leaves {
    /// NaN where it could not be computed.
    pub uniforms: Vec<f64>,
    pub models: Vec<Option<Arc<Model>>>,
    pub wholes: Vec<Option<Arc<Vec<f64>>>>,
}

/// The registers of one thread.
pub(super) struct Registers {
    numbers: Vec<Vec<f64>>,
    models: Vec<Vec<Option<Arc<Model>>>>,
}

impl Registers {
    /// Registers for `plan`, for at most `lanes` lanes.
    pub fn new(plan: &Plan, lanes: usize) -> Registers {
        let lanes = lanes.min(LANES);
        Registers {
            numbers: vec![vec![0.0; lanes]; plan.registers],
            models: vec![vec![None; lanes]; plan.model_registers],
        }
    }

    fn lanes(&self) -> usize {
        self.numbers.first().map_or(LANES, Vec::len)
    }
}

/// A plan about to run.
pub(super) struct Run<'r> {
    pub plan: &'r Plan,
    pub leaves: &'r Leaves,
    /// The activation it runs in, with its leaves computed.
    pub frame: &'r Frame<'r>,
}

/// One chunk of lanes.
#[derive(Clone, Copy)]
struct Chunk<'c> {
    /// The first element.
    start: usize,
    count: usize,
    /// The values of the bound variable, where the lanes are those.
    inputs: &'c [f64],
}

/// The numbers of an operand in a chunk.
#[derive(Clone, Copy)]
enum View<'v> {
    Same(f64),
    Lanes(&'v [f64]),
}

impl View<'_> {
    #[inline(always)]
    fn at(self, lane: usize) -> f64 {
        match self {
            View::Same(number) => number,
            View::Lanes(numbers) => numbers.get(lane).copied().unwrap_or(f64::NAN),
        }
    }
}

impl Run<'_> {
    /// Computes elements `start ..` into `out`.
    pub fn elements(&self, start: usize, registers: &mut Registers, out: &mut [f64]) {
        let lanes = registers.lanes();
        for (index, out) in out.chunks_mut(lanes).enumerate() {
            let chunk = Chunk {
                start: start + index * lanes,
                count: out.len(),
                inputs: &[],
            };
            self.chunk(chunk, registers, out);
        }
    }

    /// Computes the body for each of `inputs`.
    pub fn inputs(&self, inputs: &[f64], registers: &mut Registers, out: &mut [f64]) {
        let lanes = registers.lanes();
        for (inputs, out) in inputs.chunks(lanes).zip(out.chunks_mut(lanes)) {
            let chunk = Chunk {
                start: 0,
                count: out.len(),
                inputs,
            };
            self.chunk(chunk, registers, out);
        }
    }

    fn chunk(&self, chunk: Chunk<'_>, registers: &mut Registers, out: &mut [f64]) {
        for step in &self.plan.steps {
            self.step(step, chunk, registers);
        }
        match self.view(registers, self.plan.output, chunk) {
            View::Same(number) => out.fill(number),
            View::Lanes(numbers) => out.copy_from_slice(numbers),
        }
    }

    fn view<'v>(&'v self, registers: &'v Registers, operand: Operand, chunk: Chunk<'v>) -> View<'v> {
        match operand {
            Operand::Register(register) => View::Lanes(&registers.numbers[register as usize][..chunk.count]),
            Operand::Uniform(index) => View::Same(self.leaves.uniforms[index as usize]),
            Operand::Lanes => View::Lanes(chunk.inputs),
            Operand::Slice(index) => {
                let whole = self.leaves.wholes[index as usize].as_ref();
                let slice = whole.and_then(|whole| whole.get(chunk.start..chunk.start + chunk.count));
                slice.map_or(View::Same(f64::NAN), View::Lanes)
            }
        }
    }

    fn model<'v>(
        &'v self,
        registers: &'v Registers,
        operand: ModelOperand,
        lane: usize,
    ) -> Option<&'v Arc<Model>> {
        match operand {
            ModelOperand::Register(register) => registers.models[register as usize][lane].as_ref(),
            ModelOperand::Uniform(index) => self.leaves.models[index as usize].as_ref(),
        }
    }

    fn step(&self, step: &Step, chunk: Chunk<'_>, registers: &mut Registers) {
        if self.is_model(step) {
            let mut models = std::mem::take(&mut registers.models[step.to as usize]);
            self.models(step, chunk, registers, &mut models[..chunk.count]);
            registers.models[step.to as usize] = models;
        } else {
            let mut numbers = std::mem::take(&mut registers.numbers[step.to as usize]);
            self.numbers(step, chunk, registers, &mut numbers[..chunk.count]);
            registers.numbers[step.to as usize] = numbers;
        }
    }

    fn is_model(&self, step: &Step) -> bool {
        matches!(step.work, Work::Model(_) | Work::PerLane(Shape::Model))
    }

    fn numbers(&self, step: &Step, chunk: Chunk<'_>, registers: &Registers, out: &mut [f64]) {
        let view = |operand: &Operand| self.view(registers, *operand, chunk);
        match &step.work {
            Work::Negate(a) => map(view(a), out, |a| -a),
            Work::Not(a) => map(view(a), out, |a| 1.0 - a),
            Work::Binary(op, a, b) => binary(*op, view(a), view(b), out),
            Work::PowerInteger(a, power) => power_integer(view(a), *power, out),
            Work::Compare(op, a, b) => compare(*op, view(a), view(b), out),
            Work::Logical(op, a, b) => zip(view(a), view(b), out, |a, b| arithmetic::logical(*op, a, b)),
            Work::Select(c, a, b) => select(view(c), view(a), view(b), out),
            Work::Call(call) => self.call(call, chunk, registers, out),
            Work::Bind(bind) => self.bind(bind, chunk, registers, out),
            Work::Model(_) => {}
            Work::PerLane(_) => {
                for (lane, out) in out.iter_mut().enumerate() {
                    let value = self.strictly(step, chunk, lane);
                    *out = value.and_then(|value| value.scalar()).unwrap_or(f64::NAN);
                }
            }
        }
    }

    fn models(&self, step: &Step, chunk: Chunk<'_>, registers: &Registers, out: &mut [Option<Arc<Model>>]) {
        if let Work::Model(work) = &step.work {
            let mut last: Option<(model::Settings, Option<Arc<Model>>)> = None;
            for (lane, out) in out.iter_mut().enumerate() {
                *out = self.build(work, chunk, registers, lane, &mut last);
            }
            return;
        }
        for (lane, out) in out.iter_mut().enumerate() {
            *out = match self.strictly(step, chunk, lane) {
                Some(Value::Model(model)) => Some(model),
                Some(Value::Scalar(_) | Value::Series(_)) | None => None,
            };
        }
    }

    /// The value of a step in one lane by the strict evaluator.
    fn strictly(&self, step: &Step, chunk: Chunk<'_>, lane: usize) -> Option<Value> {
        let mut frame = match chunk.inputs.get(lane) {
            Some(input) => self.frame.with_input(*input),
            None => self.frame.at_element(chunk.start + lane),
        };
        frame.point(step.node).ok()
    }

    fn call(&self, call: &CallWork, chunk: Chunk<'_>, registers: &Registers, out: &mut [f64]) {
        let views: SmallVec<[View<'_>; 4]> = call
            .arguments
            .iter()
            .map(|operand| self.view(registers, *operand, chunk))
            .collect();
        let mut arguments: SmallVec<[f64; 8]> = SmallVec::from_elem(0.0, views.len());
        for (lane, out) in out.iter_mut().enumerate() {
            let mut poison = 0.0;
            for (argument, view) in arguments.iter_mut().zip(&views) {
                *argument = view.at(lane);
                poison += *argument * 0.0;
            }
            let model = call.model.and_then(|model| self.model(registers, model, lane));
            *out = if poison == 0.0 {
                call_entry(call.entry, model, &arguments)
            } else {
                f64::NAN
            };
        }
    }

    fn capture(
        &self,
        capture: &Capture,
        chunk: Chunk<'_>,
        registers: &Registers,
        lane: usize,
    ) -> Option<Value> {
        match capture {
            Capture::Number(operand) => {
                let number = self.view(registers, *operand, chunk).at(lane);
                number.is_finite().then_some(Value::Scalar(number))
            }
            Capture::Model(operand) => self
                .model(registers, *operand, lane)
                .map(|model| Value::Model(Arc::clone(model))),
            Capture::Whole(index) => self.leaves.wholes[*index as usize].clone().map(Value::Series),
            Capture::Gathered(operands) => {
                let numbers = operands
                    .iter()
                    .map(|operand| self.view(registers, *operand, chunk).at(lane));
                Some(Value::Series(Arc::new(numbers.collect())))
            }
        }
    }

    fn captures(
        &self,
        captures: &[Capture],
        chunk: Chunk<'_>,
        registers: &Registers,
        lane: usize,
    ) -> Option<Vec<Value>> {
        let capture = |capture| self.capture(capture, chunk, registers, lane);
        captures.iter().map(capture).collect()
    }

    fn bind(&self, bind: &BindWork, chunk: Chunk<'_>, registers: &Registers, out: &mut [f64]) {
        let whole = bind.body.is_series(self.frame.code);
        for (lane, out) in out.iter_mut().enumerate() {
            let element = if chunk.inputs.is_empty() && whole {
                Some(chunk.start + lane)
            } else {
                self.frame.element
            };
            let value = self.bind_lane(bind, chunk, registers, lane, element);
            *out = value.unwrap_or(f64::NAN);
        }
    }

    fn bind_lane(
        &self,
        bind: &BindWork,
        chunk: Chunk<'_>,
        registers: &Registers,
        lane: usize,
        element: Option<usize>,
    ) -> Option<f64> {
        let captures = self.captures(&bind.captures, chunk, registers, lane)?;
        let mut body = Body::new(self.frame.code, &bind.body, captures, element)?;
        let over = match &bind.from {
            Capture::Whole(index) => binding::Over::Series(self.leaves.wholes[*index as usize].as_ref()?),
            Capture::Number(from) => {
                let from = self.view(registers, *from, chunk).at(lane);
                let to = self.view(registers, bind.to, chunk).at(lane);
                binding::Over::Interval(from, to)
            }
            Capture::Model(_) | Capture::Gathered(_) => return None,
        };
        binding::evaluate(bind.form, &mut body, over).ok()
    }

    fn build(
        &self,
        work: &ModelWork,
        chunk: Chunk<'_>,
        registers: &Registers,
        lane: usize,
        last: &mut Option<(model::Settings, Option<Arc<Model>>)>,
    ) -> Option<Arc<Model>> {
        let mut settings = model::Settings::new(work.base);
        for (id, capture) in &work.settings {
            settings.push(*id, &self.capture(capture, chunk, registers, lane)?);
        }
        if let Some((id, plan, captures)) = &work.function {
            let captures = self.captures(captures, chunk, registers, lane)?;
            let function = model::equation_of_state(self.frame.code, plan, captures);
            return settings.build(Some((*id, function))).ok();
        }
        if let Some((same, model)) = last
            && *same == settings
        {
            return model.clone();
        }
        let built = settings.build(None).ok();
        *last = Some((settings, built.clone()));
        built
    }
}

/// A function of the library; NaN where it has no value. Only a cosmological
/// time may be infinite: “never”.
#[inline]
pub(super) fn call_entry(entry: &Entry, model: Option<&Arc<Model>>, arguments: &[f64]) -> f64 {
    let value = match (entry.definition, model) {
        (Definition::Constant(value, _), _) => Ok(value),
        (Definition::Function(function), _) => function(arguments),
        (Definition::ModelValue(function), Some(model)) => function(model),
        (Definition::Cosmology(function), Some(model)) => function(model, arguments),
        (Definition::ModelValue(_) | Definition::Cosmology(_), None) => return f64::NAN,
    };
    match value {
        Ok(value) if value.is_finite() || (value == f64::INFINITY && may_be_never(entry)) => value,
        Ok(_) | Err(_) => f64::NAN,
    }
}

/// Whether an infinite value of this entry means “never”.
pub(super) fn may_be_never(entry: &Entry) -> bool {
    match entry.definition {
        Definition::Cosmology(_) => true,
        Definition::Constant(..) | Definition::ModelValue(_) | Definition::Function(_) => false,
    }
}

#[inline(always)]
fn map(a: View<'_>, out: &mut [f64], f: impl Fn(f64) -> f64) {
    match a {
        View::Same(a) => out.fill(f(a)),
        View::Lanes(a) => {
            for (out, a) in out.iter_mut().zip(a) {
                *out = f(*a);
            }
        }
    }
}

#[inline(always)]
fn zip(a: View<'_>, b: View<'_>, out: &mut [f64], f: impl Fn(f64, f64) -> f64) {
    match (a, b) {
        (View::Same(a), View::Same(b)) => out.fill(f(a, b)),
        (View::Same(a), View::Lanes(b)) => {
            for (out, b) in out.iter_mut().zip(b) {
                *out = f(a, *b);
            }
        }
        (View::Lanes(a), View::Same(b)) => {
            for (out, a) in out.iter_mut().zip(a) {
                *out = f(*a, b);
            }
        }
        (View::Lanes(a), View::Lanes(b)) => {
            for ((out, a), b) in out.iter_mut().zip(a).zip(b) {
                *out = f(*a, *b);
            }
        }
    }
}

fn binary(op: BinaryOp, a: View<'_>, b: View<'_>, out: &mut [f64]) {
    match op {
        BinaryOp::Add => zip(a, b, out, |a, b| a + b),
        BinaryOp::Subtract => zip(a, b, out, |a, b| a - b),
        BinaryOp::Multiply => zip(a, b, out, |a, b| a * b),
        BinaryOp::Divide => zip(a, b, out, arithmetic::divide),
        BinaryOp::Power => power(a, b, out),
    }
}

fn power(a: View<'_>, b: View<'_>, out: &mut [f64]) {
    match b {
        // Known beforehand, so that the loop is a plain square root.
        View::Same(0.5) => map(a, out, |a| arithmetic::power(a, 0.5)),
        View::Same(_) | View::Lanes(_) => zip(a, b, out, arithmetic::power),
    }
}

fn power_integer(a: View<'_>, power: i32, out: &mut [f64]) {
    match power {
        2 => map(a, out, |a| arithmetic::power_integer(a, 2)),
        3 => map(a, out, |a| arithmetic::power_integer(a, 3)),
        4 => map(a, out, |a| arithmetic::power_integer(a, 4)),
        -1 => map(a, out, |a| arithmetic::power_integer(a, -1)),
        -2 => map(a, out, |a| arithmetic::power_integer(a, -2)),
        _ => map(a, out, |a| arithmetic::power_integer(a, power)),
    }
}

fn compare(op: CompareOp, a: View<'_>, b: View<'_>, out: &mut [f64]) {
    match op {
        CompareOp::Less => zip(a, b, out, |a, b| arithmetic::compare(CompareOp::Less, a, b)),
        CompareOp::LessOrEqual => zip(a, b, out, |a, b| {
            arithmetic::compare(CompareOp::LessOrEqual, a, b)
        }),
        CompareOp::Greater => zip(a, b, out, |a, b| arithmetic::compare(CompareOp::Greater, a, b)),
        CompareOp::GreaterOrEqual => {
            zip(a, b, out, |a, b| {
                arithmetic::compare(CompareOp::GreaterOrEqual, a, b)
            });
        }
    }
}

fn select(c: View<'_>, a: View<'_>, b: View<'_>, out: &mut [f64]) {
    for (lane, out) in out.iter_mut().enumerate() {
        *out = arithmetic::select(c.at(lane), a.at(lane), b.at(lane));
    }
}
