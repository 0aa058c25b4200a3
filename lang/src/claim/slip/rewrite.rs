//! A program with a mistake in it: the part that leads to one node is written
//! once more, with some operations replaced. What does not change is shared.

use crate::program::{Block, BlockId, Node, NodeId, Op, Program};
use crate::source::Span;
use rustc_hash::FxHashMap;
use zij_stdlib::catalogue::Entry;

/// The nodes that `root` is computed from and itself, in order; none if there
/// are more than `most`.
pub(super) fn cone(program: &Program, root: NodeId, most: usize) -> Option<Vec<NodeId>> {
    let mut seen: rustc_hash::FxHashSet<NodeId> = [root].into_iter().collect();
    let mut open = vec![root];
    while let Some(node) = open.pop() {
        program.main.nodes.get(node as usize)?.op.operands(|operand| {
            if seen.insert(operand) {
                open.push(operand);
            }
        });
        if seen.len() > most {
            return None;
        }
    }
    let mut nodes: Vec<NodeId> = seen.into_iter().collect();
    nodes.sort_unstable();
    Some(nodes)
}

/// Writes the cone once more with other operations. `None` where none of them
/// is replaced.
pub(super) fn with_changes(
    program: &mut Program,
    cone: &[NodeId],
    root: NodeId,
    mut change: impl FnMut(&mut Program, NodeId) -> Option<Op>,
) -> Option<NodeId> {
    let mut moved: FxHashMap<NodeId, NodeId> = FxHashMap::default();
    for id in cone {
        let changed = change(program, *id);
        let node = &program.main.nodes[*id as usize];
        let mut touched = changed.is_some();
        let op = changed.as_ref().unwrap_or(&node.op);
        op.operands(|operand| touched |= moved.contains_key(&operand));
        if touched {
            let op = op.with_operands(|operand| moved.get(&operand).copied().unwrap_or(operand));
            let node = Node { op, ..node.clone() };
            moved.insert(*id, push(program, node));
        }
    }
    moved.get(&root).copied()
}

/// A constant of the main block.
pub(super) fn constant(program: &mut Program, value: f64) -> NodeId {
    plain(program, Op::Constant(value), false)
}

/// An operation of the main block on no node that was there before.
pub(super) fn plain(program: &mut Program, op: Op, series: bool) -> NodeId {
    let node = Node {
        op,
        span: Span::default(),
        source: 0,
        series,
    };
    push(program, node)
}

fn push(program: &mut Program, node: Node) -> NodeId {
    program.main.nodes.push(node);
    (program.main.nodes.len() - 1) as NodeId
}

/// What is called instead of what, with how many arguments.
#[derive(Clone, Copy)]
pub(super) struct Swap {
    pub of: &'static str,
    pub arguments: Option<usize>,
    pub instead: &'static Entry,
}

impl Swap {
    /// The call that takes the place of this operation, if it is meant.
    fn of_op(self, op: &Op) -> Option<Op> {
        let Op::Call(entry, model, arguments) = op else {
            return None;
        };
        let fits = match self.arguments {
            Some(count) => count == arguments.len(),
            None => arguments.len() <= self.instead.arguments.len(),
        };
        (entry.name == self.of && fits).then(|| Op::Call(self.instead, *model, arguments.clone()))
    }
}

/// Whether a function is called in an operation, or in the bodies below it.
pub(super) fn calls(program: &Program, op: &Op, visit: &mut dyn FnMut(&'static Entry, usize)) {
    if let Op::Call(entry, _, arguments) = op {
        visit(entry, arguments.len());
    }
    if let Op::Bind(bind) = op {
        for node in &program.bodies[bind.body as usize].nodes {
            calls(program, &node.op, visit);
        }
    }
}

/// One function in place of another, in bodies as well.
pub(super) fn swapped(program: &mut Program, cone: &[NodeId], root: NodeId, swap: Swap) -> Option<NodeId> {
    with_changes(program, cone, root, |program, id| {
        let op = program.main.nodes[id as usize].op.clone();
        swap_in(program, &op, swap)
    })
}

fn swap_in(program: &mut Program, op: &Op, swap: Swap) -> Option<Op> {
    if let Op::Bind(bind) = op {
        let body = swap_body(program, bind.body, swap)?;
        let mut bind = bind.clone();
        bind.body = body;
        return Some(Op::Bind(bind));
    }
    swap.of_op(op)
}

fn swap_body(program: &mut Program, body: BlockId, swap: Swap) -> Option<BlockId> {
    let block: Block = program.bodies[body as usize].clone();
    let mut changed = block.clone();
    let mut any = false;
    for (place, node) in block.nodes.iter().enumerate() {
        if let Some(op) = swap_in(program, &node.op, swap) {
            changed.nodes[place].op = op;
            any = true;
        }
    }
    any.then(|| {
        program.bodies.push(changed);
        (program.bodies.len() - 1) as BlockId
    })
}
