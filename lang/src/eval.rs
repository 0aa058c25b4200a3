//! The evaluator: from a program to values.
//!
//! ```text
//!   one number      frame    strictly, lazily, each node once; a fault has a place
//!   a series        plan     its cone compiled to steps over registers,
//!                   chunk    run 256 lanes at a time, on all cores if large;
//!                            a lane that fails is NaN, and the frame then
//!                            walks that one element to find the fault
//!   a binding form  body     compiled likewise, its lanes being values of the
//!                   binding  bound variable
//! ```
//!
//! Everything is `f64` in SI. The same program gives the same digits on any
//! machine and with any number of threads: functions come from `libm`, each
//! element is computed from itself alone, and sums have a fixed order.

mod arithmetic;
mod binding;
mod body;
mod chunk;
mod code;
mod error;
mod frame;
mod limits;
mod model;
mod plan;
mod reduce;
mod series;
mod value;

pub use error::{Fault, FaultKind, Met, Place, PlainWords, Search, Words, plain_number};
pub use value::Value;

use crate::program::{NodeId, Program};
use code::Code;
use frame::{Frame, Memo};
use std::sync::Arc;
use value::Kinds;

/// Computes the values of a program's main block, each once.
pub struct Evaluator<'p> {
    program: &'p Program,
    code: Code<'p>,
    kinds: Kinds,
    memo: Memo,
}

/// A series of which some elements may have no value.
#[derive(Clone, Debug)]
pub struct Rows {
    /// The elements; NaN where there is none.
    pub values: Arc<Vec<f64>>,
    /// The first fault, if any element has none.
    pub fault: Option<Fault>,
}

impl<'p> Evaluator<'p> {
    /// An evaluator with nothing computed.
    #[must_use]
    pub fn new(program: &'p Program) -> Evaluator<'p> {
        let code = Code::new(program);
        let kinds = Kinds::of(&code, &program.main, &[]);
        Evaluator {
            program,
            code,
            kinds,
            memo: Memo::of(&program.main),
        }
    }

    /// The value of a node of the main block.
    ///
    /// # Errors
    /// The first [`Fault`] met. For a series, any element without a value.
    pub fn value(&mut self, node: NodeId) -> Result<Value, Box<Fault>> {
        let is_series = self.kinds.shape(node) == value::Shape::Series;
        self.run(|frame| {
            if is_series {
                frame.sound(node).map(Value::Series)
            } else {
                frame.point(node)
            }
        })
    }

    /// The elements of a series, or one number as a series, as far as they
    /// have values.
    ///
    /// # Errors
    /// A [`Fault`] where there is no series at all.
    pub fn rows(&mut self, node: NodeId) -> Result<Rows, Box<Fault>> {
        if self.kinds.shape(node) != value::Shape::Series {
            let value = self.value(node)?;
            return Ok(Rows {
                values: Arc::new(value.numbers().to_vec()),
                fault: None,
            });
        }
        self.run(|frame| {
            let whole = frame.whole(node)?;
            let fault = (whole.failed > 0).then(|| *frame.fault_of_element(node, &whole, whole.first));
            Ok(Rows {
                values: whole.values,
                fault,
            })
        })
    }

    /// Whether a node is a series.
    #[must_use]
    pub fn is_series(&self, node: NodeId) -> bool {
        self.kinds.shape(node) == value::Shape::Series
    }

    fn run<T>(&mut self, work: impl FnOnce(&mut Frame<'_>) -> T) -> T {
        let mut frame = Frame {
            code: &self.code,
            block: &self.program.main,
            id: None,
            kinds: &self.kinds,
            inputs: Vec::new(),
            element: None,
            memo: std::mem::take(&mut self.memo),
        };
        let outcome = work(&mut frame);
        self.memo = frame.memo;
        outcome
    }
}

#[cfg(test)]
mod tests;
