//! Wholes: a series with all its elements.

use super::super::chunk::{Leaves, Registers, Run};
use super::super::error::FaultKind;
use super::super::plan::{self, Cost, Length, ModelOperand, Operand, Plan, Work};
use super::super::series;
use super::super::value::{Shape, Value};
use super::{Failure, Frame, Whole};
use crate::program::{NodeId, Op};
use rayon::prelude::*;
use smallvec::SmallVec;
use std::sync::Arc;
use std::sync::atomic::{AtomicUsize, Ordering};

impl Frame<'_> {
    pub(super) fn compute_whole(&mut self, node: NodeId) -> Result<Whole, Failure> {
        let Some(op) = self.op(node) else {
            return self.known_whole(node);
        };
        match op {
            Op::List(list) => Ok(self.given(list)),
            Op::Column(index) => match self.code.column(*index) {
                Some(column) => Ok(self.given(column)),
                None => Err(self.fault(FaultKind::Unsupported("this column"), node)),
            },
            Op::Input(index) => match self.inputs.get(*index as usize) {
                Some(Value::Series(series)) => Ok(self.given(series)),
                Some(Value::Scalar(_) | Value::Model(_)) | None => {
                    Err(self.fault(FaultKind::Unsupported("this input"), node))
                }
            },
            Op::Gather(nodes) => {
                let mut values = Vec::with_capacity(nodes.len());
                for node in nodes {
                    values.extend_from_slice(&self.one(*node)?);
                }
                Ok(Whole::new(values))
            }
            Op::Range(from, to, step) => {
                let (from, to, by) = (self.number(*from)?, self.number(*to)?, self.number(step.node())?);
                let points = series::range(from, to, *step, by);
                points.map(Whole::new).map_err(|kind| self.fault(kind, node))
            }
            Op::Sort(a) => {
                let mut values = self.sound_or_one(*a)?.to_vec();
                values.sort_unstable_by(f64::total_cmp);
                Ok(Whole::new(values))
            }
            Op::Filter(a, condition) => self.filter(node, *a, *condition),
            Op::Constant(_)
            | Op::Reduce(..)
            | Op::Negate(_)
            | Op::Not(_)
            | Op::Binary(..)
            | Op::PowerInteger(..)
            | Op::Compare(..)
            | Op::Logical(..)
            | Op::Select(..)
            | Op::Call(..)
            | Op::Bind(_)
            | Op::Model(_) => self.run(node),
        }
    }

    /// A series from outside, which may hold what is not a number.
    fn given(&self, values: &Arc<Vec<f64>>) -> Whole {
        let failed = |value: &f64| !value.is_finite();
        Whole {
            values: Arc::clone(values),
            failed: values.iter().filter(|value| failed(value)).count(),
            first: values.iter().position(failed).unwrap_or(0),
        }
    }

    fn one(&self, node: NodeId) -> Result<[f64; 1], Failure> {
        let number = self.number(node)?;
        if number.is_infinite() {
            return Err(self.fault(FaultKind::Never, node));
        }
        Ok([number])
    }

    fn filter(&mut self, node: NodeId, a: NodeId, condition: NodeId) -> Result<Whole, Failure> {
        let whole = self.whole(a)?;
        let keep = self.sound(condition)?;
        if whole.values.len() != keep.len() {
            return Err(self.fault(FaultKind::Lengths(whole.values.len(), keep.len()), node));
        }
        let mut kept = Vec::new();
        for (element, (value, keep)) in whole.values.iter().zip(keep.iter()).enumerate() {
            if *keep == 0.0 {
                continue;
            }
            if !value.is_finite() {
                return Err(self.fault_of_element(a, &whole, element));
            }
            kept.push(*value);
        }
        Ok(Whole::new(kept))
    }

    /// Runs the plan of a series over all its elements.
    fn run(&mut self, node: NodeId) -> Result<Whole, Failure> {
        let plan = self.plan_of(node);
        for leaf in &plan.wholes {
            self.known_whole(*leaf)?;
        }
        let leaves = self.leaves(&plan);
        let Some(count) = self.length(&plan, &leaves)? else {
            return Err(self.fault(FaultKind::Unsupported("a series of this kind"), node));
        };
        let run = Run {
            plan: &plan,
            leaves: &leaves,
            frame: self,
        };
        let whole = run_all(&run, count, |value| self.may_be_infinite(node, value));
        self.memo.plans.remove(&node);
        Ok(whole)
    }

    /// How many elements a plan has; a fault where lengths disagree.
    fn length(&self, plan: &Plan, leaves: &Leaves) -> Result<Option<usize>, Failure> {
        let mut numbers: Vec<Option<usize>> = vec![None; plan.registers];
        let mut models: Vec<Option<usize>> = vec![None; plan.model_registers];
        let whole = |index: u32| leaves.wholes[index as usize].as_ref().map(|whole| whole.len());
        let of = |numbers: &[Option<usize>], operand| match operand {
            Operand::Register(register) => numbers[register as usize],
            Operand::Slice(index) => whole(index),
            Operand::Uniform(_) | Operand::Lanes => None,
        };
        for step in &plan.steps {
            let mut found: SmallVec<[usize; 4]> = SmallVec::new();
            let of_model = |operand| match operand {
                ModelOperand::Register(register) => models[register as usize],
                ModelOperand::Uniform(_) => None,
            };
            let mut found_models: SmallVec<[usize; 1]> = SmallVec::new();
            step.work.operands(
                &mut |operand| found.extend(of(&numbers, operand)),
                &mut |operand| found_models.extend(of_model(operand)),
            );
            found.extend(found_models);
            if let Work::Bind(bind) = &step.work {
                found.extend(self.length_of_body(step.node, bind, leaves)?);
            }
            let first = found.first().copied();
            if let (Some(first), Some(other)) = (first, found.iter().find(|length| Some(**length) != first)) {
                return Err(self.fault(FaultKind::Lengths(first, *other), step.node));
            }
            if matches!(step.work, Work::Model(_) | Work::PerLane(Shape::Model)) {
                models[step.to as usize] = first;
            } else {
                numbers[step.to as usize] = first;
            }
        }
        Ok(of(&numbers, plan.output))
    }

    fn length_of_body(
        &self,
        node: NodeId,
        bind: &plan::BindWork,
        leaves: &Leaves,
    ) -> Result<SmallVec<[usize; 2]>, Failure> {
        let mut found = SmallVec::new();
        for length in &bind.body.lengths {
            match length {
                Length::Fixed(count) => found.push(*count),
                Length::Unknown => {
                    return Err(self.fault(FaultKind::Unsupported("a series made in this body"), node));
                }
                Length::OfInput(index) => {
                    let capture = (*index as usize)
                        .checked_sub(1)
                        .and_then(|index| bind.captures.get(index));
                    if let Some(plan::Capture::Whole(index)) = capture {
                        found.extend(leaves.wholes[*index as usize].as_ref().map(|whole| whole.len()));
                    }
                }
            }
        }
        Ok(found)
    }
}

/// Elements from which threads pay for themselves, and how many elements a
/// thread takes at a time.
fn threading(cost: Cost) -> (usize, usize) {
    match cost {
        Cost::Arithmetic => (65_536, 16_384),
        Cost::Calls => (16_384, 2_048),
        Cost::Searches => (128, 16),
    }
}

fn run_all(run: &Run<'_>, count: usize, may_be: impl Fn(f64) -> bool + Sync) -> Whole {
    let mut values = vec![0.0; count];
    let failed = AtomicUsize::new(0);
    let first = AtomicUsize::new(usize::MAX);
    let work = |start: usize, registers: &mut Registers, out: &mut [f64]| {
        run.elements(start, registers, out);
        let bad = |value: &f64| !value.is_finite() && !may_be(*value);
        if let Some(position) = out.iter().position(bad) {
            first.fetch_min(start + position, Ordering::Relaxed);
            for value in out.iter_mut().filter(|value| bad(value)) {
                failed.fetch_add(1, Ordering::Relaxed);
                *value = f64::NAN;
            }
        }
    };
    let (least, piece) = threading(run.plan.cost);
    if count < least {
        work(0, &mut Registers::new(run.plan, count), &mut values);
    } else {
        values.par_chunks_mut(piece).enumerate().for_each_init(
            || Registers::new(run.plan, piece),
            |registers, (index, out)| work(index * piece, registers, out),
        );
    }
    Whole {
        values: Arc::new(values),
        failed: failed.into_inner(),
        first: first.into_inner(),
    }
}
