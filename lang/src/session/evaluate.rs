//! From a checked sheet to a report: lowers what is to be shown, reads the
//! data, evaluates, and puts the numbers in their units.

use super::Files;
use super::words::Units;
use crate::ast::{self, Assertion, Expr, Tolerance};
use crate::check::claim::{is_relative, written};
use crate::check::{BindingId, Checker, ClaimTask, Face, Meaning, Output, Show, Space, TableTask, Task};
use crate::claim::slip::{self, Named, Scene, Suspect};
use crate::claim::{self, Allowance};
use crate::data::{self, Data};
use crate::diagnostic::Diagnostic;
use crate::eval::{Evaluator, Fault, Value};
use crate::lower::{DEFAULT_MODEL, Lowered, Lowering};
use crate::program::{NodeId, Program};
use crate::report::{
    ClaimReport, Frame, Item, ModelReport, Numbers, Report, Shown, TableColumn, TableReport,
};
use crate::source::Span;
use rustc_hash::FxHashMap;
use std::sync::Arc;
use zij_stdlib::model::{Model, PARAMETERS, Setting};

/// Computes everything that the sheet shows.
pub(super) fn evaluate(checker: &Checker, files: &dyn Files, report: &mut Report) {
    let mut lowering = Lowering::new(checker);
    let nodes: Vec<Vec<NodeId>> = checker
        .tasks
        .iter()
        .map(|task| lower_task(&mut lowering, task))
        .collect();
    let model = lowering.model();
    let named = lowering.named();
    let Lowered {
        mut program,
        columns,
        too_large,
    } = lowering.finish();
    if let Some((source, span)) = too_large {
        let error = Diagnostic::error(
            "too-large",
            "the calculation grows beyond all measure here",
            span,
            "too large",
        )
        .note("functions that call one another are written out where they are called");
        report.diagnostics.push((usize::from(source), error));
        return;
    }
    if let Err(error) = fill_columns(checker, files, &columns, &mut program) {
        report.diagnostics.push(*error);
        return;
    }
    report.evaluated = true;
    let mut run = Run {
        checker,
        evaluator: Evaluator::new(&program),
        faults: Vec::new(),
        model,
        misfits: Vec::new(),
        suspects: Vec::new(),
    };
    for (task, nodes) in checker.tasks.iter().zip(&nodes) {
        let item = run.item(task, nodes, report.items.len());
        report.items.push(item);
    }
    run.look_for_slips(&program, &named, &mut report.items);
    report.model = run.report_of_model();
    let faults = std::mem::take(&mut run.faults);
    report.faulted |= !run.misfits.is_empty();
    report.diagnostics.append(&mut run.misfits);
    tell_faults(checker, faults, report);
}

fn lower_task(lowering: &mut Lowering<'_>, task: &Task) -> Vec<NodeId> {
    match task {
        Task::Show(show) => vec![lowering.output(&show.output, show.place.source)],
        Task::Table(table) => lowering.table(table),
        Task::Help(_) => Vec::new(),
        Task::Explain(task) => {
            let source = task.show.place.source;
            let own = task.values.iter().map(|id| Output::Binding(*id));
            let all = std::iter::once(task.show.output.clone()).chain(own);
            let mut nodes: Vec<NodeId> = all.map(|output| lowering.output(&output, source)).collect();
            if let ast::ExprKind::Under(_, model) = &task.expr.kind {
                nodes.push(lowering.model_of(model, task.limit, source));
            }
            nodes
        }
        Task::Claim(task) => {
            let mut lower =
                |expr: &Expr| lowering.expression(expr, task.limit, task.place.source, &task.rests_on);
            let mut nodes = vec![lower(&task.claim.subject)];
            match &task.claim.assertion {
                Some(
                    Assertion::Is(quoted)
                    | Assertion::About(quoted)
                    | Assertion::Above(quoted)
                    | Assertion::Below(quoted)
                    | Assertion::AtLeast(quoted)
                    | Assertion::AtMost(quoted),
                ) => nodes.push(lower(quoted)),
                Some(Assertion::Between(low, high)) => nodes.extend([lower(low), lower(high)]),
                Some(Assertion::Never(_)) | None => {}
            }
            if let Some(Tolerance::Amount(amount) | Tolerance::Sigma(amount)) = &task.claim.within {
                nodes.push(lower(amount));
            }
            nodes
        }
    }
}

/// Reads each file that is used once, and each column that is used.
fn fill_columns(
    checker: &Checker,
    files: &dyn Files,
    columns: &[(BindingId, usize)],
    program: &mut Program,
) -> Result<(), Box<(usize, Diagnostic)>> {
    let mut read: FxHashMap<BindingId, Data> = FxHashMap::default();
    for (id, place) in columns {
        let binding = checker.environment.binding(*id);
        let Meaning::Table(table) = &binding.meaning else {
            continue;
        };
        let path = table.path.as_str();
        let wrong = |reason: String| {
            let error = Diagnostic::error("bad-data", reason, table.read.path.span, "read here");
            Box::new((usize::from(binding.place.source), error))
        };
        if !read.contains_key(id) {
            let data = files
                .read(path)
                .and_then(|bytes| data::read(path, &bytes))
                .map_err(wrong)?;
            read.insert(*id, data);
        }
        let column = &table.columns[*place];
        let numbers = read[id]
            .numbers(path, column.place, column.factor)
            .map_err(wrong)?;
        program.columns.push(Arc::new(numbers));
    }
    Ok(())
}

/// Says what could not be computed, in the units of the sheet.
fn tell_faults(checker: &Checker, faults: Vec<Fault>, report: &mut Report) {
    if faults.is_empty() {
        return;
    }
    report.faulted = true;
    let known = checker.every_type();
    let words = Units::new(checker, &known);
    let mut told: Vec<Fault> = Vec::new();
    for fault in faults {
        let same = |other: &Fault| other.place == fault.place && other.kind == fault.kind;
        if !told.iter().any(same) {
            report.diagnostics.push(fault.diagnostic(&words));
            told.push(fault);
        }
    }
}

pub(super) struct Run<'a> {
    pub(super) checker: &'a Checker,
    evaluator: Evaluator<'a>,
    faults: Vec<Fault>,
    /// The node of the model assumed.
    pub(super) model: NodeId,
    /// Columns that do not fit their table.
    misfits: Vec<(usize, Diagnostic)>,
    /// Claims that disagree, each with the place of its item.
    suspects: Vec<(usize, Suspect)>,
}

impl Run<'_> {
    fn item(&mut self, task: &Task, nodes: &[NodeId], place: usize) -> Item {
        match task {
            Task::Show(show) => {
                let shown = self.show(show, nodes[0]);
                if show.result {
                    Item::Result(shown)
                } else {
                    Item::Printed(shown)
                }
            }
            Task::Claim(task) => Item::Claim(self.claim(task, nodes, place)),
            Task::Table(table) => Item::Table(self.table(table, nodes)),
            Task::Explain(task) => Item::Text(self.explain(task, nodes)),
            Task::Help(topic) => Item::Text(help(topic.as_deref())),
        }
    }

    pub(super) fn show(&mut self, show: &Show, node: NodeId) -> Shown {
        let numbers = self.numbers(node, &show.face);
        let (unit, _) = self.checker.unit_of(&show.face.form, show.face.unit.as_ref());
        let form = self.checker.shown_form(&show.face);
        let dimension = if show.face.truth {
            "a truth value".into()
        } else {
            self.checker.in_words(&form)
        };
        Shown {
            name: show.name.to_string(),
            value: numbers,
            unit: if show.face.truth { String::new() } else { unit },
            frame: frame(&form, &dimension),
            dimension,
            about: show.about.as_ref().map(ToString::to_string),
        }
    }

    fn value(&mut self, node: NodeId) -> Option<Value> {
        match self.evaluator.value(node) {
            Ok(value) => Some(value),
            Err(fault) => {
                self.faults.push(*fault);
                None
            }
        }
    }

    /// The numbers of a node in the unit in which it is shown.
    pub(super) fn numbers(&mut self, node: NodeId, face: &Face) -> Numbers {
        let Some(value) = self.value(node) else {
            return Numbers::Missing;
        };
        let (_, factor) = self.checker.unit_of(&face.form, face.unit.as_ref());
        match (value, face.truth) {
            (Value::Scalar(one), true) => Numbers::Truth(one != 0.0),
            (Value::Series(many), true) => Numbers::Truths(many.iter().map(|one| *one != 0.0).collect()),
            (Value::Scalar(one), false) if one == f64::INFINITY => Numbers::Never,
            (Value::Scalar(one), false) => Numbers::Scalar(one / factor),
            (Value::Series(many), false) => Numbers::Series(many.iter().map(|one| one / factor).collect()),
            (Value::Model(_), _) => Numbers::Missing,
        }
    }

    fn table(&mut self, table: &TableTask, nodes: &[NodeId]) -> TableReport {
        let variable = crate::check::Column {
            name: table.plot.variable.node.clone(),
            face: table.variable.clone(),
            about: None,
        };
        let is_variable = |column: &ast::Expr| matches!(&column.kind, ast::ExprKind::Name(name) if *name == table.plot.variable.node);
        let listed = table.plot.columns.iter().any(|(column, _)| is_variable(column));
        let own = table.plot.columns.iter().map(|(column, _)| column.span);
        let spans = std::iter::once(table.plot.over.span).chain(own);
        let heads = std::iter::once(&variable).chain(&table.columns);
        let mut columns: Vec<TableColumn> = heads
            .zip(nodes)
            .map(|(head, node)| self.column(head, *node))
            .collect();
        let rows = columns[0].values.len();
        for (column, span) in columns.iter_mut().zip(spans) {
            match column.values.len() {
                length if length == rows => {}
                // A column that does not depend on the variable is the same in each row.
                1 => column.values = vec![column.values[0]; rows],
                0 => column.values = vec![f64::NAN; rows],
                length => {
                    self.misfits
                        .push((usize::from(table.place.source), misfit(span, length, rows)));
                    column.values = vec![f64::NAN; rows];
                }
            }
        }
        if listed {
            columns.remove(0);
        }
        TableReport {
            path: table.plot.path.as_ref().map(|path| path.node.to_string()),
            columns,
        }
    }

    fn column(&mut self, head: &crate::check::Column, node: NodeId) -> TableColumn {
        let (unit, factor) = self.checker.unit_of(&head.face.form, head.face.unit.as_ref());
        let form = self.checker.settled(&head.face.form);
        let values = match self.evaluator.rows(node) {
            Ok(rows) => {
                self.faults.extend(rows.fault);
                rows.values.iter().map(|value| value / factor).collect()
            }
            Err(fault) => {
                self.faults.push(*fault);
                Vec::new()
            }
        };
        let comoving = frame(&form, &self.checker.in_words(&form)) == Frame::Comoving;
        let shown = Shown {
            unit: unit.clone(),
            frame: if comoving { Frame::Comoving } else { Frame::Proper },
            ..Shown::default()
        };
        let word = crate::output::frame_word(&shown);
        let about = match (&head.about, word) {
            (Some(about), Some(word)) if !about.contains(word) => Some(format!("{about} ({word})")),
            (about, word) => about
                .as_ref()
                .map(ToString::to_string)
                .or(word.map(ToOwned::to_owned)),
        };
        TableColumn {
            name: head.name.to_string(),
            unit,
            about,
            values,
        }
    }

    fn claim(&mut self, task: &ClaimTask, nodes: &[NodeId], place: usize) -> ClaimReport {
        let (unit, factor) = self.checker.unit_of(&task.face.form, task.face.unit.as_ref());
        let computed = self.numbers(nodes[0], &task.face);
        let quoted = task.claim.assertion.as_ref();
        let mut claim = ClaimReport {
            place: task.label.as_ref().map_or_else(String::new, ToString::to_string),
            source: task.text.to_string(),
            agrees: None,
            quoted: quoted.map_or_else(String::new, |quoted| self.quoted_text(quoted, task)),
            quoted_value: None,
            computed,
            unit: if task.face.truth { String::new() } else { unit },
            tolerance: None,
            slips: Vec::new(),
            searched: false,
        };
        let others: Option<Vec<f64>> = nodes[1..]
            .iter()
            .map(|node| self.value(*node)?.scalar())
            .collect();
        if let Some(others) = others {
            let allowance = judge(&mut claim, &task.claim, &others, factor);
            if let Some(suspect) = allowance
                .and_then(|allowance| suspect(&claim, task, nodes[0], factor, self.checker, allowance))
            {
                self.suspects.push((place, suspect));
            }
        }
        claim
    }

    /// Looks for the slips behind the claims that disagree, all at once.
    fn look_for_slips(&mut self, program: &Program, named: &[(BindingId, NodeId)], items: &mut [Item]) {
        if self.suspects.is_empty() {
            return;
        }
        let named: Vec<Named> = named.iter().filter_map(|named| self.named(*named)).collect();
        let (places, suspects): (Vec<usize>, Vec<Suspect>) =
            std::mem::take(&mut self.suspects).into_iter().unzip();
        let mut scene = Scene {
            program,
            evaluator: &mut self.evaluator,
            named: &named,
            model: self.model,
        };
        for (place, found) in places.into_iter().zip(slip::search(&mut scene, &suspects)) {
            if let Some(Item::Claim(claim)) = items.get_mut(place) {
                claim.slips = found;
                claim.searched = true;
            }
        }
    }

    /// A name of the sheet with its value.
    fn named(&self, (id, node): (BindingId, NodeId)) -> Option<Named> {
        let binding = self.checker.environment.binding(id);
        let Meaning::Value(value) = &binding.meaning else {
            return None;
        };
        if binding.space != Space::Value {
            return None;
        }
        let typed = &value.scheme.typed;
        let (_, factor) = self.checker.unit_of(&typed.form, typed.unit.as_ref());
        let name = binding.name.to_string();
        Some(Named { name, node, factor })
    }

    fn quoted_text(&self, quoted: &Assertion, task: &ClaimTask) -> String {
        let span = match quoted {
            Assertion::Is(expr)
            | Assertion::About(expr)
            | Assertion::Above(expr)
            | Assertion::Below(expr)
            | Assertion::AtLeast(expr)
            | Assertion::AtMost(expr) => expr.span,
            Assertion::Between(low, high) => low.span.to(high.span),
            Assertion::Never(span) => *span,
        };
        self.checker.sources[usize::from(task.place.source)]
            .slice(span)
            .to_owned()
    }

    /// The model of a node, if it can be built.
    pub(super) fn model_at(&mut self, node: NodeId) -> Option<Arc<Model>> {
        match self.evaluator.value(node).ok()? {
            Value::Model(model) => Some(model),
            Value::Scalar(_) | Value::Series(_) => None,
        }
    }

    /// The model assumed, if it can be built.
    pub(super) fn report_of_model(&mut self) -> Option<ModelReport> {
        let assumed = self.checker.environment.assumed.as_ref();
        let used = self.checker.environment.model_used.is_some();
        if !used && assumed.is_none() {
            return None;
        }
        let model = self.model_at(self.model)?;
        let name = match assumed {
            Some(model) => {
                let text = self.checker.sources[usize::from(model.place.source)].slice(model.place.span);
                crate::output::one_line(text)
            }
            None => DEFAULT_MODEL.into(),
        };
        Some(ModelReport {
            name,
            by_default: assumed.is_none(),
            used,
            parameters: parameters(&model),
            source: model.base().source.into(),
            notes: model.notes(),
        })
    }
}

pub(super) fn parameters(model: &Model) -> Vec<(String, Numbers, String)> {
    // A function of z is written out in the name of the model.
    let row = |(id, setting): &(usize, Setting)| {
        let parameter = &PARAMETERS[*id];
        let factor = size_of(parameter.usual_unit);
        let value = match setting {
            Setting::Number(value) => Numbers::Scalar(value / factor),
            Setting::List(values) => Numbers::Series(values.iter().map(|value| value / factor).collect()),
            Setting::Function(_) => return None,
        };
        Some((parameter.name.to_owned(), value, parameter.usual_unit.to_owned()))
    };
    model.parameters().iter().filter_map(row).collect()
}

/// The size of a unit of the library.
fn size_of(unit: &str) -> f64 {
    let parsed = crate::parser::parse_unit(unit).ok();
    parsed.map_or(1.0, |unit| Checker::new().size_of(&unit))
}

fn misfit(span: Span, length: usize, rows: usize) -> Diagnostic {
    let message = format!("a column of {length} values in a table of {rows} rows");
    Diagnostic::error("unlike-lengths", message, span, "unlike length")
        .note("a column has one value for each row")
}

/// The page of the handbook on a topic, or why there is none.
fn help(topic: Option<&str>) -> String {
    let words: Vec<String> = topic.map(ToOwned::to_owned).into_iter().collect();
    crate::handbook::page(&words, &crate::output::Look::PLAIN).unwrap_or_else(|reason| reason)
}

fn frame(form: &crate::check::form::Form, words: &str) -> Frame {
    let power = form.of_generator(zij_stdlib::dimension::Generator::Comoving);
    if *power.numer() == 0 {
        Frame::Proper
    } else if words.contains("(comoving)") {
        Frame::Comoving
    } else {
        Frame::Mixed
    }
}

/// The verdict, from the values that were computed: `others` are what is
/// quoted and the tolerance, in SI.
///
/// Returns what was allowed, where a number was quoted.
fn judge(
    claim: &mut ClaimReport,
    written_claim: &ast::Claim,
    others: &[f64],
    factor: f64,
) -> Option<Allowance> {
    let mut allowed = None;
    let values = match &claim.computed {
        Numbers::Scalar(one) => vec![*one],
        Numbers::Series(many) => many.clone(),
        Numbers::Never => vec![f64::INFINITY],
        Numbers::Truth(one) => {
            claim.agrees = Some(*one);
            return None;
        }
        Numbers::Truths(many) => {
            claim.agrees = Some(many.iter().all(|one| *one));
            return None;
        }
        Numbers::Missing => return None,
    };
    let assertion = written_claim.assertion.as_ref()?;
    let all = |holds: &dyn Fn(f64) -> bool| values.iter().all(|value| holds(*value));
    let quoted: Vec<f64> = others.iter().map(|value| value / factor).collect();
    claim.quoted_value = match assertion {
        Assertion::Between(..) | Assertion::Never(_) => None,
        _ => quoted.first().copied(),
    };
    let verdict = match (assertion, quoted.as_slice()) {
        (Assertion::Is(expr) | Assertion::About(expr), [value, ..]) => {
            let about = matches!(assertion, Assertion::About(_));
            let tolerance = written_claim.within.as_ref().zip(others.get(1));
            let allowance = allowance(expr, about, tolerance, *value, factor)?;
            claim.tolerance = Some(allowance.width());
            allowed = Some(allowance);
            all(&|computed| allowance.admits(*value, computed))
        }
        (Assertion::Above(_), [value, ..]) => all(&|computed| computed > *value),
        (Assertion::Below(_), [value, ..]) => all(&|computed| computed < *value),
        (Assertion::AtLeast(_), [value, ..]) => all(&|computed| computed >= *value),
        (Assertion::AtMost(_), [value, ..]) => all(&|computed| computed <= *value),
        (Assertion::Between(..), [low, high, ..]) => all(&|computed| *low <= computed && computed <= *high),
        (Assertion::Never(_), _) => all(&|computed| computed == f64::INFINITY),
        (_, _) => return None,
    };
    claim.agrees = Some(verdict);
    allowed
}

/// The library's functions written in the language that a claim rests on.
fn functions(task: &ClaimTask, checker: &Checker) -> Vec<String> {
    let rests_on = checker.environment.closure(&task.rests_on).into_iter();
    let bindings = rests_on.map(|id| checker.environment.binding(id));
    let written = bindings.filter(|binding| binding.space == Space::LibraryFunction);
    written.map(|binding| binding.name.to_string()).collect()
}

/// A claim whose slip is to be looked for: a number that was written and
/// disagrees.
fn suspect(
    claim: &ClaimReport,
    task: &ClaimTask,
    node: NodeId,
    factor: f64,
    checker: &Checker,
    allowance: Allowance,
) -> Option<Suspect> {
    let (Some(false), Numbers::Scalar(computed), Some(quoted)) =
        (claim.agrees, &claim.computed, claim.quoted_value)
    else {
        return None;
    };
    let (Some(Assertion::Is(expr) | Assertion::About(expr)), true) =
        (&task.claim.assertion, *computed != 0.0 && quoted != 0.0)
    else {
        return None;
    };
    let number = written(expr)?;
    let about = matches!(task.claim.assertion, Some(Assertion::About(_)));
    let unit = (quoted / (number.number.value * number.sign)).abs();
    let digits = if about {
        claim::about(number.number)
    } else {
        claim::as_written(&number)
    };
    Some(Suspect {
        node,
        factor,
        dimension: checker.settled(&task.face.form).library_part(),
        computed: *computed,
        quoted,
        functions: functions(task, checker),
        text: number.number.text.as_str().into(),
        exact: number.number.uncertainty.is_none(),
        allowance,
        digits: Allowance {
            below: digits.below * unit,
            above: digits.above * unit,
        },
    })
}

/// How far off the computed value may be, in the unit of the quoted one.
fn allowance(
    quoted: &Expr,
    about: bool,
    within: Option<(&Tolerance, &f64)>,
    value: f64,
    factor: f64,
) -> Option<Allowance> {
    let number = written(quoted);
    match within {
        Some((Tolerance::Amount(amount), size)) if is_relative(amount) => {
            Some(Allowance::even(size * value.abs()))
        }
        Some((Tolerance::Amount(_), size)) => Some(Allowance::even(size / factor)),
        Some((Tolerance::Sigma(_), count)) => {
            let number = number?;
            let uncertainty = number.number.uncertainty.as_ref()?;
            Some(claim::within(uncertainty, number.sign, *count))
        }
        None if about => Some(claim::about(number?.number)),
        None => Some(claim::as_written(&number?)),
    }
}
