//! The mistakes that can have been made in one claim.

use super::rewrite::{self, Swap};
use super::{Scene, Suspect};
use crate::ast::BinaryOp;
use crate::check::library;
use crate::eval::Value;
use crate::program::{ModelNode, NodeId, Op, Program};
use rustc_hash::FxHashSet;
use std::sync::Arc;
use zij_stdlib::dimension::{Dimension, Generator};
use zij_stdlib::model::{Model, ParameterId, Setting};
use zij_stdlib::slips::{self, Algebra, Mistake, Other, Slip};

/// Nodes of a claim at most for its expression to be written again with each
/// mistake; beyond that, only its value is multiplied.
const MAX_CONE: usize = 2_000;
/// Rows of data that each mistake may run over.
const MAX_ROWS: usize = 5_000;
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
    let mut all = Vec::new();
    for slip in slips::slips().filter(|slip| (slip.befalls)(&suspect.dimension)) {
        make(slip, scene, scratch, suspect, &expression, &mut all);
    }
    all
}

fn read(scene: &mut Scene<'_, '_>, suspect: &Suspect) -> Expression {
    let cone = rewrite::cone(scene.program, suspect.node, MAX_CONE).unwrap_or_default();
    let mut expression = Expression {
        cone: Vec::new(),
        models: Vec::new(),
        redshifts: Vec::new(),
        called: FxHashSet::default(),
        named: Vec::new(),
    };
    let mut repeatable = true;
    for id in &cone {
        let op = &scene.program.main.nodes[*id as usize].op;
        match op {
            Op::Model(_) => {
                if let Ok(Value::Model(model)) = scene.evaluator.value(*id) {
                    expression.models.push((*id, model));
                }
            }
            Op::Column(number) => {
                let rows = scene
                    .program
                    .columns
                    .get(*number as usize)
                    .map_or(0, |rows| rows.len());
                repeatable &= rows <= MAX_ROWS;
            }
            _ => {}
        }
        rewrite::calls(scene.program, op, &mut |entry, count| {
            expression.called.insert((entry.name, count));
        });
        let candidates = redshift_nodes(scene, op);
        for node in candidates {
            note_redshift(scene, node, &mut expression.redshifts);
        }
    }
    for (place, named) in scene.named.iter().enumerate() {
        if cone.binary_search(&named.node).is_err() {
            continue;
        }
        let Some(value) = scene
            .evaluator
            .value(named.node)
            .ok()
            .and_then(|value| value.scalar())
        else {
            continue;
        };
        expression.named.push((place, value / named.factor));
        if slips::is_redshift(&named.name) && named.factor == 1.0 {
            note(value, &mut expression.redshifts);
        }
    }
    expression.redshifts.truncate(MAX_REDSHIFTS);
    if repeatable {
        expression.cone = cone;
    }
    expression
}

/// Nodes that stand where a redshift does: in a call, in `1 + z`, at the end
/// of a range whose variable is one.
fn redshift_nodes(scene: &Scene<'_, '_>, op: &Op) -> Vec<NodeId> {
    match op {
        Op::Call(entry, _, arguments) => entry
            .arguments
            .iter()
            .zip(arguments)
            .filter(|(argument, _)| slips::is_redshift(argument.name))
            .map(|(_, node)| *node)
            .collect(),
        Op::Binary(BinaryOp::Add, a, b) => {
            let is_one = |node: &NodeId| matches!(scene.program.main.nodes[*node as usize].op, Op::Constant(value) if value == 1.0);
            [(a, b), (b, a)]
                .into_iter()
                .filter(|(one, _)| is_one(one))
                .map(|(_, other)| *other)
                .take(1)
                .collect()
        }
        Op::Bind(bind) => {
            let body = &scene.program.bodies[bind.body as usize];
            let over_z = body.nodes.iter().any(|node| match &node.op {
                Op::Call(entry, _, arguments) => {
                    entry.arguments.iter().zip(arguments).any(|(argument, node)| {
                        slips::is_redshift(argument.name)
                            && matches!(body.nodes[*node as usize].op, Op::Input(0))
                    })
                }
                _ => false,
            });
            if over_z {
                vec![bind.from, bind.to]
            } else {
                Vec::new()
            }
        }
        _ => Vec::new(),
    }
}

fn note_redshift(scene: &mut Scene<'_, '_>, node: NodeId, known: &mut Vec<f64>) {
    if let Some(z) = scene.evaluator.value(node).ok().and_then(|value| value.scalar()) {
        note(z, known);
    }
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
    all: &mut Vec<Attempt>,
) {
    let mut push = |about: String, weight: f64, factor: Option<f64>, gives: Gives| {
        all.push(Attempt {
            key: slip.key,
            about,
            weight,
            factor,
            gives,
        });
    };
    let about = || slip.about.to_owned();
    let root = suspect.node;
    let cone = &expression.cone;
    match slip.mistake {
        Mistake::Function { of, instead } => {
            let called = expression.called.iter().any(|(name, _)| *name == of);
            let Some(instead) = library::function(instead).filter(|_| called) else {
                return;
            };
            let swap = Swap {
                of,
                arguments: None,
                instead,
            };
            if let Some(node) = rewrite::swapped(scratch, cone, root, swap) {
                push(about(), slip.weight, None, Gives::Node(node));
            }
        }
        Mistake::Formula {
            of,
            arguments,
            instead,
        } => {
            if !expression.called.contains(&(of, arguments)) {
                return;
            }
            let swap = Swap {
                of,
                arguments: Some(arguments),
                instead,
            };
            if let Some(node) = rewrite::swapped(scratch, cone, root, swap) {
                push(about(), slip.weight, None, Gives::Node(node));
            }
        }
        Mistake::Model(change) => {
            if let Some(node) = other_model(scratch, suspect, expression, |_, model| change(model)) {
                push(about(), slip.weight, None, Gives::Node(node));
            }
        }
        Mistake::Parameter(parameter, value) => {
            if let Some(node) = with_parameter(scratch, suspect, expression, parameter, value) {
                push(about(), slip.weight, None, Gives::Node(node));
            }
        }
        Mistake::Base(base) => {
            let change = |_: NodeId, model: &Model| {
                (model.base().name != base.name).then_some(Other {
                    base,
                    settings: Vec::new(),
                })
            };
            if let Some(node) = other_model(scratch, suspect, expression, change) {
                push(about(), slip.weight, None, Gives::Node(node));
            }
        }
        Mistake::Stretch(power) => {
            stretches(
                suspect,
                expression,
                power,
                &mut |about_z, share, factor, gives| {
                    push(
                        format!("{}{about_z}", slip.about),
                        slip.weight * share,
                        factor,
                        gives,
                    );
                },
            );
        }
        Mistake::StretchOfLengths(power) => {
            let lengths = whole_power(&suspect.dimension, Generator::Length);
            stretches(
                suspect,
                expression,
                power * lengths,
                &mut |about_z, share, factor, gives| {
                    push(
                        format!("{}{about_z}", slip.about),
                        slip.weight * share,
                        factor,
                        gives,
                    );
                },
            );
        }
        Mistake::LittleH(power) => {
            if let Some(h) = little_h(scene, expression, suspect) {
                let (factor, gives) = multiplied(suspect, libm::pow(h, f64::from(power)));
                push(about(), slip.weight, factor, gives);
            }
        }
        Mistake::Factor(factor) => {
            let gives = Gives::Number(suspect.computed * factor);
            push(about(), slip.weight, Some(factor), gives);
        }
        Mistake::FactorPer(generator, factor) => {
            let power = whole_power(&suspect.dimension, generator);
            let factor = libm::pow(factor, f64::from(power));
            push(
                about(),
                slip.weight,
                Some(factor),
                Gives::Number(suspect.computed * factor),
            );
        }
        Mistake::Shift(by) => {
            let gives = Gives::Number(suspect.computed + by / suspect.factor);
            push(about(), slip.weight, None, gives);
        }
        Mistake::Power(algebra) => {
            let x = suspect.computed;
            let value = match algebra {
                Algebra::Inverse => 1.0 / x,
                Algebra::Root => libm::sqrt(x),
                Algebra::Square => x * x,
            };
            push(about(), slip.weight, None, Gives::Number(value));
        }
        // Compared with the quoted digits, not made in the expression.
        Mistake::Digits(_) => {}
        Mistake::Rounded(digits) => {
            let share = 1.0 / expression.named.len().max(1) as f64;
            for (place, value) in &expression.named {
                let named = &scene.named[*place];
                let rounded = to_digits(*value, digits);
                if rounded == *value || named.node == root {
                    continue;
                }
                let op = Op::Constant(rounded * named.factor);
                let change = |_: &mut Program, id: NodeId| (id == named.node).then(|| op.clone());
                if let Some(node) = rewrite::with_changes(scratch, cone, root, change) {
                    let about = format!("{} rounded to {rounded} before it was used", named.name);
                    push(about, slip.weight * share, None, Gives::Node(node));
                }
            }
        }
    }
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
fn multiplied(suspect: &Suspect, factor: f64) -> (Option<f64>, Gives) {
    if whole_power(&suspect.dimension, Generator::Magnitude) == 0 {
        return (Some(factor), Gives::Number(suspect.computed * factor));
    }
    let gives = suspect.computed + 2.5 * libm::log10(factor) / suspect.factor;
    (None, Gives::Number(gives))
}

/// The value times a power of (1+z), for each redshift that was met.
fn stretches(
    suspect: &Suspect,
    expression: &Expression,
    power: i32,
    push: &mut dyn FnMut(String, f64, Option<f64>, Gives),
) {
    let several = expression.redshifts.len() > 1;
    let share = 1.0 / expression.redshifts.len().max(1) as f64;
    for z in &expression.redshifts {
        let (factor, gives) = multiplied(suspect, libm::pow(1.0 + z, f64::from(power)));
        let about = if several {
            format!(", with z = {z}")
        } else {
            String::new()
        };
        push(about, share, factor, gives);
    }
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
    change: impl Fn(NodeId, &Model) -> Option<Other>,
) -> Option<NodeId> {
    rewrite::with_changes(scratch, &expression.cone, suspect.node, |scratch, id| {
        let (_, model) = expression.models.iter().find(|(node, _)| *node == id)?;
        let other = change(id, model)?;
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
