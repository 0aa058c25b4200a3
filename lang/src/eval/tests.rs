//! Small programs built by hand. Every node has a span of its own: node n of
//! the main block stands at bytes 10 n to 10 n + 5, of body b at 1000 (b + 1)
//! more.

use super::*;
use crate::ast::{BinaryOp, CompareOp, LogicalOp};
use crate::program::{Bind, Block, BlockId, Form, ModelNode, Node, Op, RangeStep, Reduction};
use crate::source::Span;
use std::f64::consts::PI;
use zij_stdlib::catalogue::{Definition, Entry, Topic, Type};
use zij_stdlib::dimension::NUMBER;
use zij_stdlib::model::{Base, DomainError};

mod bodies;
mod faults;
mod lanes;

/// A block under construction.
struct Builder {
    block: Block,
    offset: usize,
}

impl Builder {
    fn main() -> Builder {
        Builder {
            block: Block::default(),
            offset: 0,
        }
    }

    /// The next body of `program`, with the bound variable and captures.
    fn body(program: &Program, inputs: u32) -> Builder {
        let block = Block {
            inputs,
            ..Block::default()
        };
        let offset = 1000 * (program.bodies.len() + 1);
        Builder { block, offset }
    }

    fn add(&mut self, op: Op) -> NodeId {
        let start = self.offset + 10 * self.block.nodes.len();
        self.block.nodes.push(Node {
            op,
            span: Span::new(start, start + 5),
            source: 0,
            series: false,
        });
        self.block.nodes.len() as NodeId - 1
    }

    fn number(&mut self, number: f64) -> NodeId {
        self.add(Op::Constant(number))
    }

    fn list(&mut self, numbers: &[f64]) -> NodeId {
        self.add(Op::List(Arc::new(numbers.to_vec())))
    }

    fn input(&mut self, index: u32) -> NodeId {
        self.add(Op::Input(index))
    }

    fn plus(&mut self, a: NodeId, b: NodeId) -> NodeId {
        self.add(Op::Binary(BinaryOp::Add, a, b))
    }

    fn minus(&mut self, a: NodeId, b: NodeId) -> NodeId {
        self.add(Op::Binary(BinaryOp::Subtract, a, b))
    }

    fn times(&mut self, a: NodeId, b: NodeId) -> NodeId {
        self.add(Op::Binary(BinaryOp::Multiply, a, b))
    }

    fn over(&mut self, a: NodeId, b: NodeId) -> NodeId {
        self.add(Op::Binary(BinaryOp::Divide, a, b))
    }

    fn power(&mut self, a: NodeId, b: NodeId) -> NodeId {
        self.add(Op::Binary(BinaryOp::Power, a, b))
    }

    fn call(&mut self, entry: &'static Entry, arguments: &[NodeId]) -> NodeId {
        self.add(Op::Call(entry, None, arguments.to_vec()))
    }

    fn bind(&mut self, form: Form, body: BlockId, from: NodeId, to: NodeId, captures: &[NodeId]) -> NodeId {
        self.add(Op::Bind(Box::new(Bind {
            form,
            body,
            captures: captures.to_vec(),
            from,
            to,
        })))
    }

    /// The last node is the result.
    fn done(mut self) -> Block {
        self.block.result = self.block.nodes.len() as NodeId - 1;
        self.block
    }
}

fn program(main: Builder) -> Program {
    Program {
        main: main.done(),
        ..Program::default()
    }
}

fn value(program: &Program) -> Result<Value, Box<Fault>> {
    Evaluator::new(program).value(program.main.result)
}

#[track_caller]
fn number(program: &Program) -> f64 {
    value(program).expect("a value").scalar().expect("one number")
}

#[track_caller]
fn numbers(program: &Program) -> Vec<f64> {
    value(program).expect("a value").numbers().to_vec()
}

#[track_caller]
fn fault(program: &Program) -> Fault {
    *value(program).expect_err("a fault")
}

#[track_caller]
fn near(value: f64, expected: f64, part: f64) {
    let error = (value / expected - 1.0).abs();
    assert!(error <= part, "{value} is {error:e} off {expected}");
}

const fn entry(name: &'static str, definition: Definition) -> Entry {
    Entry {
        name,
        symbol: "",
        aliases: &[],
        synonyms: &[],
        topic: Topic::Mathematics,
        about: "",
        arguments: &[],
        result: Type::of(NUMBER),
        open_today: false,
        usual_unit: "",
        formula: "",
        validity: "",
        source: "",
        example: "",
        definition,
    }
}

static LOG: Entry = entry(
    "log",
    Definition::Function(|arguments| match arguments {
        [x] if *x > 0.0 => Ok(libm::log(*x)),
        _ => Err(DomainError("the logarithm of nothing positive".into())),
    }),
);

static EXP: Entry = entry(
    "exp",
    Definition::Function(|arguments| Ok(libm::exp(arguments[0]))),
);

static ARRIVAL: Entry = entry(
    "arrival",
    Definition::Cosmology(|_, arguments| {
        Ok(if arguments[0] < 2.0 {
            arguments[0] + 10.0
        } else {
            f64::INFINITY
        })
    }),
);

static BASE: Base = Base {
    name: "test",
    about: "",
    source: "",
    parameters: &[("H0", 2.2e-18, 0.0), ("Ωm", 0.3, 0.0)],
};

fn model(settings: &[(usize, NodeId)]) -> Op {
    Op::Model(Box::new(ModelNode {
        base: &BASE,
        settings: settings.to_vec(),
        function: None,
    }))
}

/// sqrt(Ωm (1+z)^3 + ΩΛ) over a series, as a program.
fn expansion_rate(z: &[f64]) -> Program {
    let mut main = Builder::main();
    let matter = main.number(0.3);
    let lambda = main.number(0.7);
    let one = main.number(1.0);
    let half = main.number(0.5);
    let z = main.list(z);
    let scale = main.plus(one, z);
    let cube = main.add(Op::PowerInteger(scale, 3));
    let density = main.times(matter, cube);
    let total = main.plus(density, lambda);
    main.power(total, half);
    program(main)
}
