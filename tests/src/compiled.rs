//! The program a sheet is compiled to, as text: what runs when the dimensions
//! are gone.

use std::fmt::Write;
use zij_lang::check::{Checker, Head, NoHead, Outside, Task};
use zij_lang::lower::Lowering;
use zij_lang::program::{Block, Op};
use zij_lang::source::Source;

/// No other sheets and no data.
struct Nothing;

impl Outside for Nothing {
    fn sheet(&self, path: &str) -> Result<Source, String> {
        Err(format!("{path}: no file"))
    }

    fn head(&self, path: &str) -> Result<Head, NoHead> {
        Err(NoHead::Unreadable(format!("{path}: no file")))
    }
}

/// The program of the values that a sheet shows, one line for each node.
///
/// # Panics
/// If the sheet has an error.
#[must_use]
pub fn compiled(sheet: &str) -> String {
    let mut checker = Checker::new();
    checker.check(Source::new("sheet", sheet), &Nothing);
    let wrong = checker.diagnostics.iter().find(|(_, one)| one.is_error());
    assert!(wrong.is_none(), "{wrong:?}\n{sheet}");
    let mut lowering = Lowering::new(&checker);
    for task in &checker.tasks {
        if let Task::Show(show) = task {
            lowering.output(&show.output, show.place.source);
        }
    }
    let program = lowering.finish().program;
    let mut text = String::new();
    for body in &program.bodies {
        listed(&mut text, body);
    }
    listed(&mut text, &program.main);
    text
}

fn listed(text: &mut String, block: &Block) {
    for (number, node) in block.nodes.iter().enumerate() {
        let _ = write!(text, "%{number} = {}", name(&node.op));
        node.op.operands(|operand| {
            let _ = write!(text, " %{operand}");
        });
        text.push('\n');
    }
    let _ = writeln!(text, "<- %{}", block.result);
}

fn name(op: &Op) -> String {
    match op {
        Op::Constant(number) => format!("{number:?}"),
        Op::List(numbers) => format!("{numbers:?}"),
        Op::Input(number) => format!("input {number}"),
        Op::Column(number) => format!("column {number}"),
        Op::Gather(_) => "gather".into(),
        Op::Range(..) => "range".into(),
        Op::Negate(_) => "negate".into(),
        Op::Not(_) => "not".into(),
        Op::Binary(operator, ..) => format!("{operator:?}"),
        Op::PowerInteger(_, power) => format!("power {power}"),
        Op::Compare(operator, ..) => format!("{operator:?}"),
        Op::Logical(operator, ..) => format!("{operator:?}"),
        Op::Select(..) => "select".into(),
        Op::Call(entry, ..) => entry.name.into(),
        Op::Reduce(reduction, _) => format!("{reduction:?}"),
        Op::Sort(_) => "sort".into(),
        Op::Filter(..) => "filter".into(),
        Op::Bind(bind) => format!("{:?} of body {}", bind.form, bind.body),
        Op::Model(model) => format!("model {}", model.base.name),
    }
}
