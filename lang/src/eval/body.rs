//! A body at work: a compiled body with its captures, run for any values of
//! its bound variable.

use super::chunk::{Leaves, Registers, Run};
use super::code::Code;
use super::error::{Fault, FaultKind, Met, Place};
use super::frame::{Failure, Frame};
use super::plan::BodyPlan;
use super::value::Value;
use crate::program::{NodeId, Op};

/// Something that gives a number for each number, many at once. NaN or an
/// infinity where it has no value.
pub(super) trait Lanes {
    /// Computes `out[i]` at `inputs[i]`.
    fn lanes(&mut self, inputs: &[f64], out: &mut [f64]);

    /// The value at one point.
    fn at(&mut self, input: f64) -> f64 {
        let mut out = [0.0];
        self.lanes(&[input], &mut out);
        out[0]
    }
}

/// An activation of a body.
pub(super) struct Body<'a> {
    frame: Frame<'a>,
    plan: &'a BodyPlan,
    leaves: Leaves,
    registers: Registers,
    capacity: usize,
}

impl<'a> Body<'a> {
    /// The body of `plan` with its captures; for one element of a series
    /// where its value is a series. Nothing if the program is broken.
    pub fn new(
        code: &'a Code<'a>,
        plan: &'a BodyPlan,
        captures: Vec<Value>,
        element: Option<usize>,
    ) -> Option<Body<'a>> {
        let block = code.body(plan.id)?;
        // The bound variable has no value until lanes are run.
        let inputs = std::iter::once(Value::Scalar(f64::NAN)).chain(captures).collect();
        let mut frame = Frame::new(code, block, Some(plan.id), &plan.kinds, inputs);
        frame.element = element;
        let leaves = frame.leaves(&plan.plan);
        Some(Body {
            frame,
            plan,
            leaves,
            registers: Registers::new(&plan.plan, 1),
            capacity: 1,
        })
    }

    /// Why it has no value at `input`.
    pub fn fault_at(&self, input: f64) -> Failure {
        let mut fault = if self.frame.code.is_exhausted() {
            Box::new(Fault::new(FaultKind::TooMuchWork, self.place()))
        } else {
            let value = self.frame.with_input(input).point(self.frame.block.result);
            value.err().unwrap_or_else(|| {
                let reason = FaultKind::Domain("this has no value here".into());
                Box::new(Fault::new(reason, self.place()))
            })
        };
        fault.bound.push(self.variable(input));
        fault
    }

    /// The body's result.
    pub fn place(&self) -> Place {
        self.frame.place(self.frame.block.result)
    }

    /// The bound variable with a value.
    pub fn variable(&self, value: f64) -> Met {
        let nodes = &self.frame.block.nodes;
        let input = nodes.iter().position(|node| matches!(node.op, Op::Input(0)));
        let place = match input {
            Some(node) => self.frame.place(node as NodeId),
            None => self.place(),
        };
        Met { place, value }
    }
}

impl Lanes for Body<'_> {
    fn lanes(&mut self, inputs: &[f64], out: &mut [f64]) {
        if !self.frame.code.spend(inputs.len()) {
            out.fill(f64::NAN);
            return;
        }
        if inputs.len() > self.capacity {
            self.registers = Registers::new(&self.plan.plan, inputs.len());
            self.capacity = inputs.len();
        }
        let run = Run {
            plan: &self.plan.plan,
            leaves: &self.leaves,
            frame: &self.frame,
        };
        run.inputs(inputs, &mut self.registers, out);
    }
}

impl<F: FnMut(f64) -> f64> Lanes for F {
    fn lanes(&mut self, inputs: &[f64], out: &mut [f64]) {
        for (out, input) in out.iter_mut().zip(inputs) {
            *out = self(*input);
        }
    }
}
