//! `explain EXPR`: the calculation with its values filled in, what each name
//! in it is and where it comes from, the model and what it leaves out, and the
//! sources of everything used.

use super::evaluate::{Run, parameters};
use crate::ast::{Argument, Expr, ExprKind, Step};
use crate::check::{BindingId, ExplainTask, Face, Meaning, Space, library};
use crate::eval::plain_number;
use crate::output::one_line;
use crate::program::NodeId;
use crate::report::{Numbers, Shown};
use crate::source::Span;
use std::fmt::Write;
use zij_stdlib::catalogue::{Definition, Entry};
use zij_stdlib::model::Model;
use zij_stdlib::prelude;

/// What was met in a calculation, each once, in the order met.
#[derive(Default)]
struct Met {
    entries: Vec<&'static Entry>,
    written: Vec<&'static prelude::Written>,
}

impl Run<'_> {
    pub(super) fn explain(&mut self, task: &ExplainTask, nodes: &[NodeId]) -> String {
        let shown = self.show(&task.show, nodes[0]);
        let mut text = format!("{} = {}\n", one_line(&shown.name), value_text(&shown));
        let own = self.own_values(task, &nodes[1..]);
        let filled = self.filled(task, &own);
        if filled != shown.name && filled != value_text(&shown) {
            let _ = writeln!(text, "  = {}", one_line(&filled));
        }
        let mut met = Met::default();
        self.meet(&task.expr, &mut met);
        for (id, value) in &own {
            self.describe_own(*id, value, &mut text, &mut met);
        }
        self.describe_functions(task, &mut text, &mut met);
        describe_library(&met, &mut text);
        self.describe_model(task, nodes, &mut text);
        sources(&met, &mut text);
        text
    }

    /// The values of the sheet that the calculation rests on.
    fn own_values(&mut self, task: &ExplainTask, nodes: &[NodeId]) -> Vec<(BindingId, String)> {
        let ids = task.values.clone();
        let mut found = Vec::new();
        for (id, node) in ids.into_iter().zip(nodes) {
            let Meaning::Value(value) = &self.checker.environment.binding(id).meaning else {
                continue;
            };
            let typed = &value.scheme.typed;
            let face = Face {
                form: typed.form.clone(),
                unit: typed.unit.clone(),
                truth: false,
            };
            let numbers = self.numbers(*node, &face);
            let (unit, _) = self.checker.unit_of(&face.form, face.unit.as_ref());
            let shown = Shown {
                value: numbers,
                unit,
                ..Shown::default()
            };
            found.push((id, value_text(&shown)));
        }
        found
    }

    /// The text of the expression with values in place of names.
    fn filled(&self, task: &ExplainTask, own: &[(BindingId, String)]) -> String {
        let source = &self.checker.sources[usize::from(task.show.place.source)];
        let mut edits: Vec<(Span, String)> = Vec::new();
        each(&task.expr, &mut |expr| {
            let ExprKind::Name(name) = &expr.kind else { return };
            let found = self.checker.environment.find(Space::Value, name, task.limit);
            let value = found.and_then(|id| own.iter().find(|(known, _)| *known == id));
            if let Some((_, value)) = value {
                edits.push((expr.span, value.clone()));
            }
        });
        edits.sort_by_key(|(span, _)| span.start);
        let mut text = String::new();
        let mut done = task.expr.span.start;
        for (span, value) in edits {
            text.push_str(source.slice(Span {
                start: done,
                end: span.start,
            }));
            text.push_str(&value);
            done = span.end;
        }
        text.push_str(source.slice(Span {
            start: done,
            end: task.expr.span.end,
        }));
        text
    }

    fn describe_own(&self, id: BindingId, value: &str, text: &mut String, met: &mut Met) {
        let binding = self.checker.environment.binding(id);
        let Meaning::Value(meaning) = &binding.meaning else {
            return;
        };
        let definition = &meaning.definition;
        self.meet(&definition.value, met);
        definition
            .wheres
            .iter()
            .for_each(|binding| self.meet(&binding.value, met));
        let written = self.checker.sources[usize::from(binding.place.source)].slice(definition.value.span);
        let _ = write!(text, "\n  {} = {value}", binding.name);
        if one_line(written) != value {
            let _ = write!(text, "   from {}", one_line(written));
        }
        if meaning.given {
            text.push_str(if meaning.instead.is_some() {
                "   (input, given from outside)"
            } else {
                "   (input)"
            });
        }
        if let Some(about) = &definition.about {
            let _ = write!(text, "\n      {}", about.node);
        }
    }

    /// Functions of the sheet.
    fn describe_functions(&self, task: &ExplainTask, text: &mut String, met: &mut Met) {
        for id in &task.functions {
            let binding = self.checker.environment.binding(*id);
            let Meaning::Function(function) = &binding.meaning else {
                continue;
            };
            if binding.space != Space::Function {
                continue;
            }
            self.meet(&function.definition.value, met);
            let body =
                self.checker.sources[usize::from(binding.place.source)].slice(function.definition.value.span);
            let _ = write!(
                text,
                "\n  {} = {}",
                self.checker.signature_of(*id),
                one_line(body)
            );
        }
    }

    /// Notes what of the library an expression uses.
    fn meet(&self, expr: &Expr, met: &mut Met) {
        each(expr, &mut |expr| {
            let (name, entry) = match &expr.kind {
                ExprKind::Name(name) => (name, library::value(name)),
                ExprKind::Call(name, _) => (&name.node, library::function(&name.node)),
                _ => return,
            };
            let environment = &self.checker.environment;
            let own = [Space::Value, Space::Function]
                .iter()
                .any(|space| environment.latest(*space, name).is_some());
            if own {
                return;
            }
            if let Some(entry) = entry {
                if !met.entries.iter().any(|known| std::ptr::eq(*known, entry)) {
                    met.entries.push(entry);
                }
                return;
            }
            let canonical = library::canonical(name);
            let written = prelude::written().iter().find(|item| item.name == canonical);
            if let Some(item) =
                written.filter(|item| !met.written.iter().any(|known| known.name == item.name))
            {
                met.written.push(item);
            }
        });
    }

    /// The model that the value was computed in, and what it leaves out.
    fn describe_model(&mut self, task: &ExplainTask, nodes: &[NodeId], text: &mut String) {
        let (title, node) = match &task.expr.kind {
            ExprKind::Under(_, model) => {
                let source = &self.checker.sources[usize::from(task.show.place.source)];
                (one_line(source.slice(model.span)), nodes.last().copied())
            }
            _ if task.needs_model => (self.assumed_title(), Some(self.model)),
            _ => return,
        };
        let _ = write!(text, "\n\n  model {title}");
        let Some(model) = node.and_then(|node| self.model_at(node)) else {
            return;
        };
        for (name, value, unit) in parameters(&model) {
            let shown = Shown {
                value,
                unit,
                ..Shown::default()
            };
            let _ = write!(text, "\n      {name} = {}", value_text(&shown));
        }
        if is_flat(&model) {
            text.push_str("\n      flat");
        }
        for note in model.notes() {
            let _ = write!(text, "\n      {note}");
        }
    }

    fn assumed_title(&mut self) -> String {
        match self.report_of_model() {
            Some(model) if model.by_default => {
                format!("{}, taken because the sheet assumes none", model.name)
            }
            Some(model) => model.name,
            None => String::new(),
        }
    }
}

/// Whether the library finds no curvature in a model.
fn is_flat(model: &Model) -> bool {
    match library::value("Ωk").map(|entry| entry.definition) {
        Some(Definition::ModelValue(curvature)) => curvature(model).is_ok_and(|value| value == 0.0),
        Some(Definition::Constant(..) | Definition::Function(_) | Definition::Cosmology(_)) | None => false,
    }
}

fn describe_library(met: &Met, text: &mut String) {
    for entry in &met.entries {
        let _ = write!(text, "\n  {}   {}", library::signature(entry), entry.about);
        if !entry.formula.is_empty() {
            let _ = write!(text, "\n      {}", entry.formula);
        }
        if let Definition::Constant(value, uncertainty) = entry.definition {
            let _ = write!(text, "\n      {value:e} in SI");
            if uncertainty > 0.0 {
                let _ = write!(text, ", standard uncertainty {uncertainty:e}");
            }
        }
        if !entry.validity.is_empty() {
            let _ = write!(text, "\n      {}", entry.validity);
        }
    }
    for item in &met.written {
        let _ = write!(text, "\n  {}   {}\n      {}", item.name, item.about, item.formula);
    }
}

fn sources(met: &Met, text: &mut String) {
    let entries = met.entries.iter().map(|entry| entry.source);
    let mut sources: Vec<&str> = entries
        .chain(met.written.iter().map(|item| item.source.as_str()))
        .collect();
    sources.retain(|source| !source.is_empty());
    sources.sort_unstable();
    sources.dedup();
    if !sources.is_empty() {
        text.push_str("\n\n  sources");
    }
    for source in sources {
        let _ = write!(text, "\n      {source}");
    }
}

/// A value with its unit in a line.
fn value_text(shown: &Shown) -> String {
    let unit = if shown.unit.is_empty() {
        String::new()
    } else {
        format!(" {}", shown.unit)
    };
    let frame = crate::output::frame_word(shown).map_or_else(String::new, |word| format!(" ({word})"));
    let unit = format!("{unit}{frame}");
    match &shown.value {
        Numbers::Scalar(value) => format!("{}{unit}", plain_number(*value)),
        Numbers::Series(values) => {
            let first: Vec<String> = values.iter().take(3).map(|value| plain_number(*value)).collect();
            let more = if values.len() > 3 { ", …" } else { "" };
            format!("{{{}{more}}}{unit}", first.join(", "))
        }
        Numbers::Truth(value) => value.to_string(),
        Numbers::Truths(values) => format!("{} truth values", values.len()),
        Numbers::Never => "never".into(),
        Numbers::Missing => "not computed".into(),
    }
}

/// Visits an expression and all in it.
fn each<'a>(expr: &'a Expr, visit: &mut dyn FnMut(&'a Expr)) {
    visit(expr);
    match &expr.kind {
        ExprKind::Quantity(_)
        | ExprKind::Quantities(..)
        | ExprKind::Infinity
        | ExprKind::Name(_)
        | ExprKind::Broken => {}
        ExprKind::Call(_, arguments) => arguments.iter().for_each(|argument| match argument {
            Argument::Positional(value) | Argument::Named(_, value) => each(value, visit),
            Argument::Equation(left, right) => [left, right].into_iter().for_each(|side| each(side, visit)),
        }),
        ExprKind::Field(inner, _) | ExprKind::Unary(_, inner) | ExprKind::Group(inner) => each(inner, visit),
        ExprKind::Express(inner, _) | ExprKind::Under(inner, _) => each(inner, visit),
        ExprKind::Binary(_, left, right) | ExprKind::Logical(_, left, right) => {
            each(left, visit);
            each(right, visit);
        }
        ExprKind::Comparison(first, rest) => {
            each(first, visit);
            rest.iter().for_each(|(_, side)| each(side, visit));
        }
        ExprKind::If(condition, yes, no) => [condition, yes, no]
            .into_iter()
            .for_each(|part| each(part, visit)),
        ExprKind::Series(elements) => elements.iter().for_each(|element| each(element, visit)),
        ExprKind::Range(range) => {
            each(&range.from, visit);
            each(&range.to, visit);
            match &range.step {
                Step::None => {}
                Step::Every(step) | Step::Steps(step) | Step::LogSteps(step) => each(step, visit),
            }
        }
    }
}
