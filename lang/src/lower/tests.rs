//! Frames, h and angles end with the checker: what runs is the same with them
//! and without, but for the factors that brackets write.

use super::Lowering;
use crate::check::{Checker, Head, NoHead, Outside, Task};
use crate::program::{Block, Op};
use crate::source::Source;

struct Nowhere;

impl Outside for Nowhere {
    fn sheet(&self, path: &str) -> Result<Source, String> {
        Err(path.to_owned())
    }

    fn head(&self, path: &str) -> Result<Head, NoHead> {
        Err(NoHead::Unreadable(path.to_owned()))
    }
}

/// The operations of the main block, each as a few words.
fn operations(sheet: &str) -> Vec<String> {
    let mut checker = Checker::new();
    checker.check(Source::new("sheet", sheet), &Nowhere);
    let errors: Vec<_> = checker
        .diagnostics
        .iter()
        .filter(|(_, one)| one.is_error())
        .collect();
    assert!(errors.is_empty(), "{sheet}\n{errors:?}");
    let mut lowering = Lowering::new(&checker);
    for task in &checker.tasks {
        if let Task::Show(show) = task {
            lowering.output(&show.output, show.place.source);
        }
    }
    let (program, _, too_large) = lowering.finish();
    assert!(too_large.is_none());
    words(&program.main)
}

fn words(block: &Block) -> Vec<String> {
    let word = |op: &Op| match op {
        Op::Constant(value) => format!("{value:e}"),
        Op::Call(entry, _, arguments) => format!("{} of {arguments:?}", entry.name),
        Op::Binary(op, a, b) => format!("{op:?} {a} {b}"),
        Op::PowerInteger(a, power) => format!("{a}^{power}"),
        Op::Model(_) => "model".into(),
        _ => "other".into(),
    };
    block.nodes.iter().map(|node| word(&node.op)).collect()
}

#[test]
fn a_frame_costs_nothing_where_no_bracket_moves_it() {
    let plain = operations("f(x) = x * 2\nr = 3 Mpc\nf(r) + 5 Mpc\nr^2 / (1 + 1)");
    let framed = operations("f(x) = x * 2\nr = 3 cMpc\nf(r) + 5 cMpc\nr^2 / (1 + 1) [cMpc^2]");
    assert_eq!(plain, framed);
}

#[test]
fn little_h_and_angles_cost_nothing_where_no_bracket_settles_them() {
    assert_eq!(operations("3 Mpc/h + 2 Mpc/h"), operations("3 Mpc + 2 Mpc"));
    assert_eq!(operations("2 rad * 3 Mpc [Mpc]"), operations("2 * 3 Mpc [Mpc]"));
    assert_eq!(operations("20 mag + 5"), operations("20 + 5"));
}

#[test]
fn a_bracket_writes_its_factor_and_nothing_more() {
    let before = operations("3 cMpc");
    let after = operations("3 cMpc [Mpc at 1]");
    // The number one, the sum 1+z (z is the same one) and the quotient.
    assert_eq!(after.len(), before.len() + 3, "{after:?}");
    assert_eq!(operations("3 cMpc [Mpc today]"), before);
    assert_eq!(operations("3 Mpc [cMpc by hand]"), before);
}
