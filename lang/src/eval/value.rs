//! Values, and what is known of a node's value before it is computed.

use super::code::Code;
use crate::program::{Bind, Block, BlockId, Form, NodeId, Op};
use std::fmt;
use std::sync::Arc;
use zij_stdlib::model::{Model, PARAMETERS, ParameterId, Takes};

/// The value of a node. Truth values are 1 and 0.
#[derive(Clone)]
pub enum Value {
    /// One number. `+∞` only where a library function says “never”.
    Scalar(f64),
    /// A series.
    Series(Arc<Vec<f64>>),
    /// A cosmological model.
    Model(Arc<Model>),
}

/// What kind of value a node has.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Shape {
    /// One number.
    Number,
    /// A series of numbers.
    Series,
    /// A model.
    Model,
    /// A model for each element of a series.
    Models,
}

/// The shapes of a block's nodes, and which of them depend on the bound
/// variable (input 0 of a body).
pub(super) struct Kinds {
    pub shapes: Vec<Shape>,
    pub varies: Vec<bool>,
}

impl Value {
    /// The number, if it is one.
    #[must_use]
    pub fn scalar(&self) -> Option<f64> {
        match self {
            Value::Scalar(number) => Some(*number),
            Value::Series(_) | Value::Model(_) => None,
        }
    }

    /// The numbers, of a series or of one number alone.
    #[must_use]
    pub fn numbers(&self) -> &[f64] {
        match self {
            Value::Scalar(number) => std::slice::from_ref(number),
            Value::Series(numbers) => numbers,
            Value::Model(_) => &[],
        }
    }
}

impl fmt::Debug for Value {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Value::Scalar(number) => write!(f, "Scalar({number:?})"),
            Value::Series(numbers) => write!(f, "Series({numbers:?})"),
            Value::Model(_) => f.write_str("Model"),
        }
    }
}

impl Shape {
    /// Whether there is one for each element.
    pub fn many(self) -> bool {
        matches!(self, Shape::Series | Shape::Models)
    }

    /// Its shape at one element.
    pub fn one(self) -> Shape {
        match self {
            Shape::Number | Shape::Series => Shape::Number,
            Shape::Model | Shape::Models => Shape::Model,
        }
    }
}

/// Whether a parameter takes a whole list, so that a series given to it does
/// not mean a model for each element.
pub(super) fn takes_list(parameter: ParameterId) -> bool {
    PARAMETERS
        .get(parameter)
        .is_some_and(|parameter| parameter.takes == Takes::List)
}

impl Kinds {
    /// The kinds of `block` where its inputs have the shapes `inputs`.
    pub fn of(code: &Code<'_>, block: &Block, inputs: &[Shape]) -> Kinds {
        let mut kinds = Kinds {
            shapes: Vec::with_capacity(block.nodes.len()),
            varies: Vec::with_capacity(block.nodes.len()),
        };
        for node in &block.nodes {
            let shape = kinds.shape_of(code, &node.op, inputs);
            let mut varies = matches!(node.op, Op::Input(0)) && block.inputs > 0;
            node.op
                .operands(|operand| varies |= kinds.varies.get(operand as usize).copied().unwrap_or(false));
            kinds.shapes.push(shape);
            kinds.varies.push(varies);
        }
        kinds
    }

    /// The shape of a node that is already known.
    pub fn shape(&self, node: NodeId) -> Shape {
        self.shapes.get(node as usize).copied().unwrap_or(Shape::Number)
    }

    /// Whether a node depends on the bound variable.
    pub fn varies(&self, node: NodeId) -> bool {
        self.varies.get(node as usize).copied().unwrap_or(false)
    }

    fn shape_of(&self, code: &Code<'_>, op: &Op, inputs: &[Shape]) -> Shape {
        match op {
            Op::Constant(_) | Op::Reduce(..) => Shape::Number,
            Op::List(_) | Op::Column(_) | Op::Gather(_) | Op::Range(..) => Shape::Series,
            Op::Sort(_) | Op::Filter(..) => Shape::Series,
            Op::Input(index) => inputs.get(*index as usize).copied().unwrap_or(Shape::Number),
            Op::Negate(_)
            | Op::Not(_)
            | Op::Binary(..)
            | Op::PowerInteger(..)
            | Op::Compare(..)
            | Op::Logical(..)
            | Op::Select(..)
            | Op::Call(..) => self.elementwise(op, Shape::Number, Shape::Series),
            Op::Bind(bind) => self.shape_of_bind(code, bind),
            Op::Model(model) => {
                let many = |node: &NodeId| self.shape(*node).many();
                let by_setting = (model.settings.iter()).any(|(id, node)| !takes_list(*id) && many(node));
                let by_capture = (model.function.iter()).any(|(_, _, captures)| captures.iter().any(many));
                if by_setting || by_capture {
                    Shape::Models
                } else {
                    Shape::Model
                }
            }
        }
    }

    fn elementwise(&self, op: &Op, one: Shape, many: Shape) -> Shape {
        let mut found = false;
        op.operands(|operand| found |= self.shape(operand).many());
        if found { many } else { one }
    }

    fn shape_of_bind(&self, code: &Code<'_>, bind: &Bind) -> Shape {
        let bounds = bind.form != Form::Sum && (self.shape(bind.from).many() || self.shape(bind.to).many());
        let captures = || bind.captures.iter().map(|node| self.shape(*node));
        let many = bounds
            || if code.sees_whole_series(bind.body) {
                captures().any(|shape| shape == Shape::Models) || self.body_is_series(code, bind)
            } else {
                captures().any(Shape::many)
            };
        if many { Shape::Series } else { Shape::Number }
    }

    fn body_is_series(&self, code: &Code<'_>, bind: &Bind) -> bool {
        if code.is_too_deep(bind.body) {
            return false;
        }
        let Some(body) = code.body(bind.body) else {
            return false;
        };
        let kinds = Kinds::of(code, body, &self.input_shapes(code, bind.body, &bind.captures));
        kinds.shape(body.result).many()
    }

    /// The shapes of a body's inputs: the bound variable, then the captures,
    /// which come element by element unless the body looks at whole series.
    pub fn input_shapes(&self, code: &Code<'_>, body: BlockId, captures: &[NodeId]) -> Vec<Shape> {
        let whole = code.sees_whole_series(body);
        let capture = |node: &NodeId| match self.shape(*node) {
            Shape::Series if whole => Shape::Series,
            shape => shape.one(),
        };
        std::iter::once(Shape::Number)
            .chain(captures.iter().map(capture))
            .collect()
    }
}
