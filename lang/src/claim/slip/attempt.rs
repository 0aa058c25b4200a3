//! The mistakes that can have been made in one claim.

use super::rewrite::{self, Swap};
use super::{Scene, Suspect};
use crate::ast::BinaryOp;
use crate::check::library;
use crate::eval::Value;
use crate::program::{ModelNode, NodeId, Op, Program};
use rustc_hash::FxHashSet;
use std::sync::Arc;
use zij_stdlib::catalogue::Argument;
use zij_stdlib::dimension::{Dimension, Generator};
use zij_stdlib::model::{Model, ParameterId, Setting};
use zij_stdlib::slips::{self, Algebra, Mistake, Other, Slip};

/// Nodes of a claim at most for its expression to be written again with each
/// mistake; beyond that, only its value is multiplied.
const MAX_CONE: usize = 2_000;
/// Rows of data that each mistake may run over.
const MAX_ROWS: usize = 5_000;
/// Of the values of a parameter, those of at least this weight are tried where
/// a model has a function of z in it.
const PLAUSIBLE: f64 = 6.0;
/// Redshifts that are tried for powers of (1+z).
const MAX_REDSHIFTS: usize = 3;

/// One mistake, made.
pub(super) struct Attempt {
    pub key: &'static str,
    pub about: String,
    /// In parts of a thousand; shared among those that differ in a number.
    pub weight: f64,
    /// What the value is multiplied by, where that is all.
    pub factor: Option<f64>,
    gives: Gives,
}

/// Where the mistaken value is found.
enum Gives {
    /// In a node, in SI.
    Node(NodeId),
    /// It is this, in the unit of the claim.
    Number(f64),
}

impl Attempt {
    fn of(slip: &'static Slip, gives: Gives) -> Attempt {
        Attempt {
            key: slip.key,
            about: slip.about.into(),
            weight: slip.weight,
            factor: None,
            gives,
        }
    }

    /// The mistaken value in the unit of the claim.
    pub fn value(&self, suspect: &Suspect, node: &mut impl FnMut(NodeId) -> Option<f64>) -> Option<f64> {
        match self.gives {
            Gives::Node(id) => Some(node(id)? / suspect.factor),
            Gives::Number(value) => Some(value),
        }
    }

    /// Whether the two are different mistakes, which can be made together.
    pub fn goes_with(&self, other: &Attempt) -> bool {
        let family = |key: &'static str| key.split('-').next().unwrap_or(key);
        self.key != other.key
            && (family(self.key) != family(other.key) || self.factor.is_none())
            && !self
                .factor
                .zip(other.factor)
                .is_some_and(|(a, b)| super::is_same(a * b, 1.0))
    }
}

/// What a claim's expression has in it.
#[derive(Default)]
struct Expression {
    cone: Vec<NodeId>,
    models: Vec<(NodeId, Arc<Model>)>,
    redshifts: Vec<f64>,
    /// Functions called, with how many arguments.
    called: FxHashSet<(&'static str, usize)>,
    /// The names it rests on: place in the scene, value in the unit shown.
    named: Vec<(usize, f64)>,
}

/// Every slip of the catalogue that can befall this claim.
pub(super) fn attempts(scene: &mut Scene<'_, '_>, scratch: &mut Program, suspect: &Suspect) -> Vec<Attempt> {
    let expression = read(scene, suspect);
    let met = |slip: &Slip| {
        let called = |name: &&str| {
            expression.called.iter().any(|(known, _)| known == name)
                || suspect.functions.iter().any(|known| known == name)
        };
        slip.functions.is_empty() || slip.functions.iter().any(called)
    };
    slips::slips()
        .filter(|slip| (slip.befalls)(&suspect.dimension) && met(slip))
        .flat_map(|slip| make(slip, scene, scratch, suspect, &expression))
        .collect()
}

fn read(scene: &mut Scene<'_, '_>, suspect: &Suspect) -> Expression {
    let cone = rewrite::cone(scene.program, suspect.node, MAX_CONE).unwrap_or_default();
    let mut expression = Expression::default();
    let mut rows = 0;
    for id in &cone {
        let op = &scene.program.main.nodes[*id as usize].op;
        if let Op::Column(number) = op {
            rows = rows.max(
                scene
                    .program
                    .columns
                    .get(*number as usize)
                    .map_or(0, |rows| rows.len()),
            );
        }
        if let (Op::Model(_), Ok(Value::Model(model))) = (op, scene.evaluator.value(*id)) {
            expression.models.push((*id, model));
        }
        rewrite::calls(scene.program, op, &mut |entry, count| {
            expression.called.insert((entry.name, count));
        });
        for node in redshift_nodes(scene.program, op) {
            if let Some(z) = number(scene, node) {
                note(z, &mut expression.redshifts);
            }
        }
    }
    for (place, named) in scene.named.iter().enumerate() {
        if cone.binary_search(&named.node).is_err() {
            continue;
        }
        let Some(value) = number(scene, named.node) else {
            continue;
        };
        expression.named.push((place, value / named.factor));
        if slips::is_redshift(&named.name) && named.factor == 1.0 {
            note(value, &mut expression.redshifts);
        }
    }
    expression.redshifts.truncate(MAX_REDSHIFTS);
    if rows <= MAX_ROWS {
        expression.cone = cone;
    }
    expression
}

fn number(scene: &mut Scene<'_, '_>, node: NodeId) -> Option<f64> {
    scene.evaluator.value(node).ok()?.scalar()
}

/// Nodes that stand where a redshift does: in a call, in `1 + z`, at the ends
/// of a range whose variable is one.
fn redshift_nodes(program: &Program, op: &Op) -> Vec<NodeId> {
    let is_one =
        |node: NodeId| matches!(program.main.nodes[node as usize].op, Op::Constant(value) if value == 1.0);
    if let Op::Binary(BinaryOp::Add, a, b) = *op {
        return match (is_one(a), is_one(b)) {
            (true, _) => vec![b],
            (false, true) => vec![a],
            (false, false) => Vec::new(),
        };
    }
    if let Op::Bind(bind) = op {
        let body = &program.bodies[bind.body as usize].nodes;
        let is_variable = |node: NodeId| matches!(body[node as usize].op, Op::Input(0));
        let over_z = body
            .iter()
            .any(|node| redshift_arguments(&node.op).any(is_variable));
        return if over_z {
            vec![bind.from, bind.to]
        } else {
            Vec::new()
        };
    }
    redshift_arguments(op).collect()
}

/// The arguments of a call that are redshifts.
fn redshift_arguments(op: &Op) -> impl Iterator<Item = NodeId> + '_ {
    let (takes, given): (&[Argument], &[NodeId]) = if let Op::Call(entry, _, arguments) = op {
        (entry.arguments, arguments)
    } else {
        (&[], &[])
    };
    let redshifts = takes.iter().zip(given);
    redshifts
        .filter(|(argument, _)| slips::is_redshift(argument.name))
        .map(|(_, node)| *node)
}

fn note(z: f64, known: &mut Vec<f64>) {
    if z.is_finite() && z > -1.0 && z != 0.0 && !known.contains(&z) {
        known.push(z);
    }
}

/// Makes one slip in the claim, in each way that it can be made.
fn make(
    slip: &'static Slip,
    scene: &mut Scene<'_, '_>,
    scratch: &mut Program,
    suspect: &Suspect,
    expression: &Expression,
) -> Vec<Attempt> {
    let rewritten = |node: Option<NodeId>| -> Vec<Attempt> {
        let attempt = node.map(|node| Attempt::of(slip, Gives::Node(node)));
        attempt.into_iter().collect()
    };
    let (cone, root) = (&expression.cone, suspect.node);
    match slip.mistake {
        Mistake::Function { of, instead } => {
            let swap = library::function(instead).map(|instead| Swap {
                of,
                arguments: None,
                instead,
            });
            rewritten(swap.and_then(|swap| swapped(scratch, expression, root, swap)))
        }
        Mistake::Formula {
            of,
            arguments,
            instead,
        } => {
            let swap = Swap {
                of,
                arguments: Some(arguments),
                instead,
            };
            rewritten(swapped(scratch, expression, root, swap))
        }
        Mistake::Model(change) => rewritten(other_model(scratch, suspect, expression, change)),
        // Each model with a function of z is costly to build.
        Mistake::Parameter(..) if slip.weight < PLAUSIBLE && has_function(scratch, expression) => Vec::new(),
        Mistake::Parameter(parameter, value) => {
            rewritten(with_parameter(scratch, suspect, expression, parameter, value))
        }
        Mistake::Base(base) => rewritten(other_model(scratch, suspect, expression, |model| {
            let settings = Vec::new();
            (model.base().name != base.name).then_some(Other { base, settings })
        })),
        Mistake::ExponentSign => rewritten(rewrite::with_changes(scratch, cone, root, turned_exponent)),
        Mistake::Rounded(digits) => rounded(slip, scene, scratch, suspect, expression, digits),
        Mistake::Stretch(power) => stretches(slip, suspect, expression, power),
        Mistake::StretchOfLengths(power) => {
            let lengths = whole_power(&suspect.dimension, Generator::Length);
            stretches(slip, suspect, expression, power * lengths)
        }
        Mistake::LittleH(power) => {
            let h = little_h(scene, expression, suspect);
            let attempt = h.map(|h| multiplied(slip, suspect, libm::pow(h, f64::from(power))));
            attempt.into_iter().collect()
        }
        Mistake::Factor(factor) => vec![multiplied(slip, suspect, factor)],
        Mistake::FactorPer(generator, factor) => {
            let power = whole_power(&suspect.dimension, generator);
            vec![multiplied(slip, suspect, libm::pow(factor, f64::from(power)))]
        }
        Mistake::Shift(by) => {
            let value = suspect.computed + by / suspect.factor;
            vec![Attempt::of(slip, Gives::Number(value))]
        }
        Mistake::Power(algebra) => {
            let value = raised(suspect.computed, algebra);
            vec![Attempt::of(slip, Gives::Number(value))]
        }
        // Compared with the quoted digits, not made in the expression.
        Mistake::Digits(_) => Vec::new(),
    }
}

fn has_function(program: &Program, expression: &Expression) -> bool {
    expression.models.iter().any(|(node, _)| {
        matches!(&program.main.nodes[*node as usize].op, Op::Model(model) if model.function.is_some())
    })
}

fn raised(value: f64, algebra: Algebra) -> f64 {
    match algebra {
        Algebra::Inverse => 1.0 / value,
        Algebra::Root => libm::sqrt(value),
        Algebra::Square => value * value,
    }
}

fn swapped(scratch: &mut Program, expression: &Expression, root: NodeId, swap: Swap) -> Option<NodeId> {
    let is_meant = |(name, count): &(&str, usize)| {
        *name == swap.of && swap.arguments.is_none_or(|arguments| arguments == *count)
    };
    if !expression.called.iter().any(is_meant) {
        return None;
    }
    rewrite::swapped(scratch, &expression.cone, root, swap)
}

/// Each named value rounded, one at a time.
fn rounded(
    slip: &'static Slip,
    scene: &Scene<'_, '_>,
    scratch: &mut Program,
    suspect: &Suspect,
    expression: &Expression,
    digits: u32,
) -> Vec<Attempt> {
    let share = 1.0 / expression.named.len().max(1) as f64;
    let mut attempts = Vec::new();
    for (place, value) in &expression.named {
        let named = &scene.named[*place];
        let rounded = to_digits(*value, digits);
        if rounded == *value || named.node == suspect.node {
            continue;
        }
        let op = Op::Constant(rounded * named.factor);
        let change = |_: &mut Program, id: NodeId| (id == named.node).then(|| op.clone());
        if let Some(node) = rewrite::with_changes(scratch, &expression.cone, suspect.node, change) {
            attempts.push(Attempt {
                about: format!("{} rounded to {rounded} before it was used", named.name),
                weight: slip.weight * share,
                ..Attempt::of(slip, Gives::Node(node))
            });
        }
    }
    attempts
}

/// A power with the sign turned of what stands beside 1 in its exponent.
fn turned_exponent(scratch: &mut Program, id: NodeId) -> Option<Op> {
    let node = |id: NodeId| &scratch.main.nodes[id as usize].op;
    let is_one = |id: NodeId| matches!(node(id), Op::Constant(value) if *value == 1.0);
    let Op::Binary(BinaryOp::Power, base, exponent) = *node(id) else {
        return None;
    };
    let Op::Binary(op, a, b) = *node(exponent) else {
        return None;
    };
    let (one_first, one_last) = (is_one(a), is_one(b));
    let turned = if op == BinaryOp::Subtract && one_last {
        let negative = rewrite::plain(scratch, Op::Negate(a), false);
        Op::Binary(BinaryOp::Subtract, negative, b)
    } else if op == BinaryOp::Subtract && one_first {
        Op::Binary(BinaryOp::Add, a, b)
    } else if op == BinaryOp::Add && one_first {
        Op::Binary(BinaryOp::Subtract, a, b)
    } else if op == BinaryOp::Add && one_last {
        Op::Binary(BinaryOp::Subtract, b, a)
    } else {
        return None;
    };
    let turned = rewrite::plain(scratch, turned, false);
    Some(Op::Binary(BinaryOp::Power, base, turned))
}

/// A number with so many significant digits.
fn to_digits(value: f64, digits: u32) -> f64 {
    let places = digits.max(1) as usize - 1;
    format!("{value:.places$e}").parse().unwrap_or(value)
}

fn whole_power(dimension: &Dimension, generator: Generator) -> i32 {
    let power = dimension.exponent(generator);
    if *power.denom() == 1 { *power.numer() } else { 0 }
}

/// The computed value times a factor; a magnitude is changed by it.
fn multiplied(slip: &'static Slip, suspect: &Suspect, factor: f64) -> Attempt {
    let is_magnitude = whole_power(&suspect.dimension, Generator::Magnitude) != 0;
    let by_power = matches!(
        slip.mistake,
        Mistake::Stretch(_) | Mistake::StretchOfLengths(_) | Mistake::LittleH(_)
    );
    if is_magnitude && by_power {
        let gives = suspect.computed + 2.5 * libm::log10(factor) / suspect.factor;
        return Attempt::of(slip, Gives::Number(gives));
    }
    Attempt {
        factor: Some(factor),
        ..Attempt::of(slip, Gives::Number(suspect.computed * factor))
    }
}

/// The value times a power of (1+z), for each redshift that was met.
fn stretches(slip: &'static Slip, suspect: &Suspect, expression: &Expression, power: i32) -> Vec<Attempt> {
    let count = expression.redshifts.len();
    let stretch = |z: &f64| {
        let attempt = multiplied(slip, suspect, libm::pow(1.0 + z, f64::from(power)));
        let which = if count > 1 {
            format!(", with z = {z}")
        } else {
            String::new()
        };
        Attempt {
            about: format!("{}{which}", slip.about),
            weight: slip.weight / count as f64,
            ..attempt
        }
    };
    expression.redshifts.iter().map(stretch).collect()
}

/// h of the model met, or of the one assumed where h is in the unit.
fn little_h(scene: &mut Scene<'_, '_>, expression: &Expression, suspect: &Suspect) -> Option<f64> {
    if let Some((_, model)) = expression.models.first() {
        return Some(slips::little_h(model));
    }
    if whole_power(&suspect.dimension, Generator::LittleH) == 0 {
        return None;
    }
    match scene.evaluator.value(scene.model).ok()? {
        Value::Model(model) => Some(slips::little_h(&model)),
        Value::Scalar(_) | Value::Series(_) => None,
    }
}

/// The expression with every model in it replaced.
fn other_model(
    scratch: &mut Program,
    suspect: &Suspect,
    expression: &Expression,
    change: impl Fn(&Model) -> Option<Other>,
) -> Option<NodeId> {
    rewrite::with_changes(scratch, &expression.cone, suspect.node, |scratch, id| {
        let (_, model) = expression.models.iter().find(|(node, _)| *node == id)?;
        let other = change(model)?;
        let settings = other
            .settings
            .into_iter()
            .filter_map(|(parameter, setting)| Some((parameter, setting_node(scratch, setting)?)))
            .collect();
        Some(Op::Model(Box::new(ModelNode {
            base: other.base,
            settings,
            function: None,
        })))
    })
}

fn setting_node(scratch: &mut Program, setting: Setting) -> Option<NodeId> {
    match setting {
        Setting::Number(value) => Some(rewrite::constant(scratch, value)),
        Setting::List(values) => Some(rewrite::plain(scratch, Op::List(Arc::new(values)), true)),
        Setting::Function(_) => None,
    }
}

/// The expression with one parameter of its models replaced.
fn with_parameter(
    scratch: &mut Program,
    suspect: &Suspect,
    expression: &Expression,
    parameter: ParameterId,
    value: f64,
) -> Option<NodeId> {
    rewrite::with_changes(scratch, &expression.cone, suspect.node, |scratch, id| {
        let known = expression.models.iter().any(|(node, _)| *node == id);
        let Op::Model(model) = &scratch.main.nodes[id as usize].op else {
            return None;
        };
        let mut model = model.clone();
        known.then(|| {
            let node = rewrite::constant(scratch, value);
            model.settings.retain(|(given, _)| *given != parameter);
            model.settings.push((parameter, node));
            Op::Model(model)
        })
    })
}
