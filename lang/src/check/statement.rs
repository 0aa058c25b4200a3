//! Statements: each definition becomes a binding, each output a task.

use super::environment::{self, Function, Meaning, Place, Space, Table, UserUnit, Value};
use super::form::Form;
use super::typed::{Generaliser, Instance, Kind, Measure, Scheme, Typed};
use super::unify::Sort;
use super::{BindingId, Checker, Head, Local, NoHead, Outside, call, error, library};
use crate::ast::{
    self, BinaryOp, Binding, Bracket, Definition as Written, Expr, ExprKind, Name, Parameter, Plot, Read,
    Statement, StatementKind, Text,
};
use crate::source::{Source, Span};
use smallvec::SmallVec;
use smol_str::SmolStr;
use std::sync::Arc;
use zij_stdlib::catalogue::Definition;
use zij_stdlib::dimension::LENGTH;
use zij_stdlib::units;

/// Something the sheet asks to be shown.
#[derive(Clone)]
pub enum Task {
    /// A result or a printed expression.
    Show(Show),
    /// A claim.
    Claim(ClaimTask),
    /// A table.
    Table(TableTask),
    /// A page of the handbook.
    Help(Option<SmolStr>),
}

/// A value to show.
#[derive(Clone)]
pub struct Show {
    /// It is a named result.
    pub result: bool,
    /// The name, or the text of the expression.
    pub name: SmolStr,
    /// What to compute.
    pub output: Output,
    /// How it is shown.
    pub face: Face,
    /// What it is.
    pub about: Option<SmolStr>,
    /// The place of its value.
    pub place: Place,
}

/// What to compute.
#[derive(Clone)]
pub enum Output {
    /// A name's value.
    Binding(BindingId),
    /// An expression with its `where`, by what the bindings before `limit` mean.
    Expression(Arc<(Expr, Vec<Binding>)>, BindingId, Vec<BindingId>),
}

/// How a value is shown.
#[derive(Clone)]
pub struct Face {
    /// Its dimension and frame.
    pub form: Form,
    /// The unit asked for.
    pub unit: Option<Arc<Measure>>,
    /// It is a truth value.
    pub truth: bool,
}

/// A quoted number to check.
#[derive(Clone)]
pub struct ClaimTask {
    /// Where it is quoted.
    pub label: Option<SmolStr>,
    /// Its text.
    pub text: SmolStr,
    /// As written.
    pub claim: Arc<ast::Claim>,
    /// In which unit it is judged.
    pub face: Face,
    /// Its place.
    pub place: Place,
    /// The bindings before it.
    pub limit: BindingId,
    /// The bindings it rests on.
    pub rests_on: Vec<BindingId>,
}

/// A table to compute.
#[derive(Clone)]
pub struct TableTask {
    /// As written.
    pub plot: Arc<Plot>,
    /// How the running variable is shown.
    pub variable: Face,
    /// The columns: head, how they are shown, what they are.
    pub columns: Vec<Column>,
    /// Its place.
    pub place: Place,
    /// The bindings before it.
    pub limit: BindingId,
    /// The bindings it rests on.
    pub rests_on: Vec<BindingId>,
}

/// A column of a table.
#[derive(Clone)]
pub struct Column {
    /// Its head.
    pub name: SmolStr,
    /// How it is shown.
    pub face: Face,
    /// What it is.
    pub about: Option<SmolStr>,
}

/// No files at all: what the library's own sheets may reach.
pub(super) struct Nothing;

impl Outside for Nothing {
    fn sheet(&self, path: &str) -> Result<Source, String> {
        Err(format!("{path}: no files can be read here"))
    }

    fn head(&self, path: &str) -> Result<Head, NoHead> {
        Err(NoHead::Unreadable(format!("{path}: no files can be read here")))
    }
}

impl Checker {
    pub(super) fn statement(&mut self, statement: Statement, outside: &dyn Outside) {
        self.rests_on.clear();
        self.needs_model = false;
        let mark = self.unifier.mark();
        let span = statement.span;
        match statement.kind {
            StatementKind::Assume(model) => self.assume_statement(model),
            StatementKind::Model(name, model) => self.model_statement(&name, model),
            StatementKind::Given(definition) => self.given_statement(definition),
            StatementKind::Value(definition) => {
                self.value_statement(definition, false);
            }
            StatementKind::Function(definition, parameters) => {
                self.function_statement(definition, parameters)
            }
            StatementKind::Result(definition) => self.result_statement(definition),
            StatementKind::ResultOf(name, bracket, about) => {
                self.result_of_statement(&name, bracket.as_ref(), about)
            }
            StatementKind::Claim(label, claim) => self.claim_statement(label, claim, span),
            StatementKind::Table(plot) => self.table_statement(plot, span),
            StatementKind::Read(read) => self.read_statement(read, outside),
            StatementKind::Include(path) => self.include_statement(&path, outside),
            StatementKind::Unit(name, value) => self.unit_statement(&name, &value),
            StatementKind::Tally(names) => names.iter().for_each(|name| self.tally_statement(name)),
            StatementKind::Help(topic) => self.tasks.push(Task::Help(topic.map(|topic| topic.node))),
            StatementKind::Expression(value, wheres) => self.expression_statement(value, wheres),
            StatementKind::Figure(_) => self.not_yet(span, "figure"),
            StatementKind::Correlate(..) => self.not_yet(span, "correlate"),
            StatementKind::Explain(_) => self.not_yet(span, "explain"),
            StatementKind::Broken => {}
        }
        if self.record.is_none() {
            self.unifier.forget(&mark);
        }
    }

    fn not_yet(&mut self, span: Span, word: &str) {
        let at = Span {
            start: span.start,
            end: span.start + word.len() as u32,
        };
        self.report(error::not_yet(at, word));
    }

    /// Whether a name is already bound in this sheet, which is reported.
    pub(super) fn is_duplicate(&mut self, name: &Name, space: Space) -> bool {
        if self.at_prompt && !self.in_library {
            return false;
        }
        let Some(id) = self.environment.latest(space, &name.node) else {
            return false;
        };
        let first = self.environment.binding(id).place;
        let here = (first.source == self.source).then_some(first.span);
        let elsewhere = self.sources[usize::from(first.source)].name.to_string();
        self.report(error::duplicate_name(name, here, &elsewhere));
        true
    }

    fn given_statement(&mut self, definition: Written) {
        self.value_statement(definition, true);
    }

    /// Checks and binds a value; `None` where it could not be bound.
    fn value_statement(&mut self, definition: Written, given: bool) -> Option<BindingId> {
        let outer = self.locals.len();
        let mut typed = self.infer_with_wheres(&definition.value, &definition.wheres);
        self.end_wheres(outer);
        typed = self.annotated(&definition, typed);
        let instead = if given {
            self.instead_of(&definition, &typed)
        } else {
            None
        };
        self.bind_value(definition, typed, given, instead)
    }

    fn bind_value(
        &mut self,
        definition: Written,
        typed: Typed,
        given: bool,
        instead: Option<(u16, Expr)>,
    ) -> Option<BindingId> {
        let space = self.spaces()[0];
        self.warn_of_library_name(&definition.name, false);
        if self.is_duplicate(&definition.name, space) {
            return None;
        }
        let scheme = self.scheme(typed, |sort| matches!(sort, Sort::Along(_)));
        let name = definition.name.clone();
        let value = Value {
            definition,
            scheme,
            given,
            instead,
        };
        Some(self.bind(&name, space, Meaning::Value(Arc::new(value))))
    }

    fn scheme(&mut self, typed: Typed, binds: impl Fn(Sort) -> bool) -> Scheme {
        let mut generaliser = Generaliser::default();
        let form = generaliser.bind(&mut self.unifier, &typed.form, binds);
        Scheme {
            typed: Typed { form, ..typed },
            bound: generaliser.sorts(&self.unifier),
        }
    }

    /// What the command line gives for an input, if it is of its dimension.
    fn instead_of(&mut self, definition: &Written, typed: &Typed) -> Option<(u16, Expr)> {
        let (source, expr) = self.overrides.remove(&definition.name.node)?;
        let outer = std::mem::replace(&mut self.source, source);
        let other = self.infer(&expr);
        let alike = other.kind == typed.kind && self.unifier.unify(&typed.form, &other.form).is_ok();
        if !alike && !other.is_unknown() && !typed.is_unknown() {
            let words = [self.describe(&typed.form), self.describe(&other.form)];
            self.report(error::wrong_given(expr.span, &definition.name.node, &words));
        }
        self.source = outer;
        Some((source, expr))
    }

    /// An expression that sees its `where` names, which stay until
    /// [`Self::end_wheres`].
    fn infer_with_wheres(&mut self, value: &Expr, wheres: &[Binding]) -> Typed {
        for binding in wheres {
            let typed = self.infer(&binding.value);
            let typed = match &binding.annotation {
                Some(bracket) => self.fits_annotation(typed, binding.value.span, bracket),
                None => typed,
            };
            let span = binding.name.span;
            self.locals.push(Local {
                name: binding.name.node.clone(),
                span,
                typed,
                used: false,
            });
        }
        self.infer(value)
    }

    fn end_wheres(&mut self, outer: usize) {
        for local in self.locals.split_off(outer) {
            if !local.used && !local.typed.is_unknown() {
                self.report(error::unused(local.span, &local.name));
            }
        }
    }

    fn annotated(&mut self, definition: &Written, typed: Typed) -> Typed {
        match &definition.annotation {
            Some(bracket) => self.fits_annotation(typed, definition.value.span, bracket),
            None => typed,
        }
    }

    /// A value with the unit that its definition announces.
    fn fits_annotation(&mut self, typed: Typed, value: Span, bracket: &Bracket) -> Typed {
        let Some(measure) = self.measure(&bracket.unit, false) else {
            return Typed::unknown();
        };
        if typed.is_unknown() {
            return typed;
        }
        let asked = self.asked(&measure);
        if typed.kind == Kind::Truth || self.unifier.unify(&typed.form, &asked).is_err() {
            let diagnostic = self.unlike_annotation((value, &typed), bracket, &asked);
            return self.wrong(diagnostic);
        }
        let form = self.unifier.resolve(&typed.form);
        Typed::quantity(form).shown_in(Some(measure))
    }

    fn function_statement(&mut self, definition: Written, parameters: Vec<Parameter>) {
        let outer = self.locals.len();
        let was_in_function = std::mem::replace(&mut self.in_function, true);
        let takes: Vec<Typed> = parameters
            .iter()
            .map(|parameter| self.parameter(parameter))
            .collect();
        for (parameter, typed) in parameters.iter().zip(&takes) {
            if let Some(first) = self.locals[outer..]
                .iter()
                .find(|local| local.name == parameter.name.node)
            {
                let first = first.span;
                self.report(error::duplicate_name(&parameter.name, Some(first), ""));
            }
            let (name, span) = (parameter.name.node.clone(), parameter.name.span);
            self.locals.push(Local {
                name,
                span,
                typed: typed.clone(),
                used: true,
            });
        }
        let inner = self.locals.len();
        let result = self.infer_with_wheres(&definition.value, &definition.wheres);
        self.end_wheres(inner);
        self.locals.truncate(outer);
        let result = self.annotated(&definition, result);
        self.in_function = was_in_function;
        self.bind_function(definition, parameters, takes, result);
    }

    fn bind_function(
        &mut self,
        definition: Written,
        parameters: Vec<Parameter>,
        takes: Vec<Typed>,
        result: Typed,
    ) {
        let space = self.spaces()[1];
        self.warn_of_library_name(&definition.name, true);
        if self.is_duplicate(&definition.name, space) {
            return;
        }
        let mut generaliser = Generaliser::default();
        let mut bind = |typed: Typed| {
            let form = generaliser.bind(&mut self.unifier, &typed.form, |_| true);
            Typed { form, ..typed }
        };
        let takes = takes.into_iter().map(&mut bind).collect();
        let typed = bind(result);
        let result = Scheme {
            typed,
            bound: generaliser.sorts(&self.unifier),
        };
        let name = definition.name.clone();
        let function = Function {
            definition,
            parameters,
            takes,
            result,
        };
        self.bind(&name, space, Meaning::Function(Arc::new(function)));
    }

    fn parameter(&mut self, parameter: &Parameter) -> Typed {
        let typed = match &parameter.annotation {
            Some(bracket) => match self.measure(&bracket.unit, false) {
                Some(measure) => Typed::quantity(self.asked(&measure)).shown_in(Some(measure)),
                None => Typed::unknown(),
            },
            None => Typed::quantity(self.unifier.fresh(Sort::Any)),
        };
        if let Some(default) = &parameter.default {
            let value = self.infer_quantity(default);
            let known = !value.is_unknown() && !typed.is_unknown();
            if known && self.unifier.unify(&value.form, &typed.form).is_err() {
                let diagnostic = self.unlike_default((default.span, &value), (parameter.name.span, &typed));
                self.report(diagnostic);
            } else if typed.unit.is_none() {
                return typed.shown_in(value.unit);
            }
        }
        typed
    }

    fn result_statement(&mut self, definition: Written) {
        let name = definition.name.node.clone();
        let about = definition.about.as_ref().map(|text| text.node.clone());
        let place = self.place(definition.value.span);
        if let Some(id) = self.value_statement(definition, false) {
            self.show_binding(id, name, about, None, place);
        }
    }

    fn result_of_statement(&mut self, name: &Name, bracket: Option<&Bracket>, about: Option<Text>) {
        let space = self.spaces()[0];
        let expr = Expr {
            kind: ast::ExprKind::Name(name.node.clone()),
            span: name.span,
        };
        let typed = self.infer(&expr);
        let typed = match bracket {
            Some(bracket) => self.fits_annotation(typed, name.span, bracket),
            None => typed,
        };
        if typed.is_unknown() {
            return;
        }
        let place = self.place(name.span);
        let about = about.map(|text| text.node);
        match self.environment.latest(space, &name.node) {
            Some(id) => self.show_binding(id, name.node.clone(), about, Some(typed), place),
            None => self.show_expression(expr, Vec::new(), typed, (true, about)),
        }
    }

    fn show_binding(
        &mut self,
        id: BindingId,
        name: SmolStr,
        about: Option<SmolStr>,
        as_typed: Option<Typed>,
        place: Place,
    ) {
        self.environment.binding(id).used.set(true);
        let Meaning::Value(value) = &self.environment.binding(id).meaning else {
            return;
        };
        let about = about.or_else(|| value.definition.about.as_ref().map(|text| text.node.clone()));
        let value = Arc::clone(value);
        let typed = as_typed.unwrap_or_else(|| {
            let instance = Instance::new(&mut self.unifier, &value.scheme.bound);
            let typed = value.scheme.typed.clone();
            Typed {
                form: instance.form(&typed.form),
                ..typed
            }
        });
        if typed.is_unknown() {
            return;
        }
        let face = self.keep_face(typed);
        self.tasks.push(Task::Show(Show {
            result: true,
            name,
            output: Output::Binding(id),
            face,
            about,
            place,
        }));
    }

    fn expression_statement(&mut self, value: Expr, wheres: Vec<Binding>) {
        let outer = self.locals.len();
        let typed = self.infer_with_wheres(&value, &wheres);
        self.end_wheres(outer);
        if self.at_prompt && !typed.is_unknown() {
            self.bind_that(&value, &wheres, &typed);
        }
        if !typed.is_unknown() {
            self.show_expression(value, wheres, typed, (false, None));
        }
    }

    /// At the prompt `that` is the last value.
    fn bind_that(&mut self, value: &Expr, wheres: &[Binding], typed: &Typed) {
        let name = Name {
            node: SmolStr::new_static("that"),
            span: value.span,
        };
        let definition = Written {
            name: name.clone(),
            annotation: None,
            value: value.clone(),
            wheres: wheres.to_vec(),
            about: None,
        };
        let rests_on = self.rests_on.clone();
        let scheme = self.scheme(typed.clone(), |sort| matches!(sort, Sort::Along(_)));
        let meaning = Meaning::Value(Arc::new(Value {
            definition,
            scheme,
            given: false,
            instead: None,
        }));
        let id = self.bind(&name, Space::Value, meaning);
        self.environment.binding(id).used.set(true);
        self.rests_on = rests_on;
    }

    fn show_expression(
        &mut self,
        value: Expr,
        wheres: Vec<Binding>,
        typed: Typed,
        (result, about): (bool, Option<SmolStr>),
    ) {
        let place = self.place(value.span);
        let name = SmolStr::new(self.text(value.span));
        let face = self.keep_face(typed);
        let rests_on = std::mem::take(&mut self.rests_on);
        let output = Output::Expression(Arc::new((value, wheres)), self.environment.next(), rests_on);
        self.tasks.push(Task::Show(Show {
            result,
            name,
            output,
            face,
            about,
            place,
        }));
    }

    fn table_statement(&mut self, plot: Plot, span: Span) {
        let over = self.infer_quantity(&plot.over);
        let sound = !over.is_unknown();
        let variable = over.clone();
        let (name, at) = (plot.variable.node.clone(), plot.variable.span);
        self.remember(at, &over);
        self.locals.push(Local {
            name,
            span: at,
            typed: over,
            used: true,
        });
        let typed: Vec<Typed> = plot
            .columns
            .iter()
            .map(|(column, _)| self.infer(column))
            .collect();
        self.locals.pop();
        if !sound || typed.iter().any(Typed::is_unknown) {
            return;
        }
        let variable = self.keep_face(variable);
        let mut columns = Vec::new();
        for ((column, about), typed) in plot.columns.iter().zip(typed) {
            let name = SmolStr::new(self.text(head_span(column)));
            let about = about.as_ref().map(|text| text.node.clone());
            columns.push(Column {
                name,
                face: self.keep_face(typed),
                about,
            });
        }
        let task = TableTask {
            plot: Arc::new(plot),
            variable,
            columns,
            place: self.place(span),
            limit: self.environment.next(),
            rests_on: std::mem::take(&mut self.rests_on),
        };
        self.tasks.push(Task::Table(task));
    }

    fn read_statement(&mut self, read: Read, outside: &dyn Outside) {
        let duplicate = self.is_duplicate(&read.name, Space::Value);
        let columns = match outside.head(&read.path.node) {
            Ok(head) => Some(self.columns(&read, head)),
            Err(reason) => {
                self.report(match reason {
                    NoHead::Unreadable(reason) => error::cannot_read(read.path.span, &reason),
                    NoHead::Malformed(reason) => error::bad_data(read.path.span, &reason),
                });
                None
            }
        };
        let Some(columns) = columns else {
            if !duplicate {
                self.bind(&read.name, Space::Value, Meaning::Broken);
            }
            return;
        };
        if let Some(only) = &read.only {
            self.check_selection(only, &columns);
        }
        if !duplicate {
            let name = read.name.clone();
            let path = read.path.node.clone();
            let table = Table { read, columns, path };
            self.bind(&name, Space::Value, Meaning::Table(Arc::new(table)));
        }
    }

    fn columns(&mut self, read: &Read, head: Head) -> Vec<environment::Column> {
        let names: Vec<String> = head.columns.iter().map(|(name, _)| name.clone()).collect();
        for (name, _) in &read.units {
            if !names.iter().any(|known| *known == name.node) {
                let known: Vec<&str> = names.iter().map(String::as_str).collect();
                self.report(error::unknown_column(name, &read.name.node, &known));
            }
        }
        let mut columns = Vec::new();
        for (place, (name, unit)) in head.columns.into_iter().enumerate() {
            let with = read.units.iter().find(|(known, _)| known.node == name);
            let measure = match (with, unit) {
                (Some((_, bracket)), _) => self.measure(&bracket.unit, false),
                (None, Some(unit)) => self.measure_of_head(read, &name, &unit),
                (None, None) => None,
            };
            let typed = match &measure {
                Some(measure) => Typed::quantity(self.asked(measure)).shown_in(Some(Arc::clone(measure))),
                None => Typed::quantity(Form::number()),
            };
            let factor = measure.map_or(1.0, |measure| measure.factor);
            let scheme = self.scheme(typed, |sort| matches!(sort, Sort::Along(_)));
            columns.push(environment::Column {
                name: name.into(),
                scheme,
                factor,
                place,
            });
        }
        columns
    }

    fn measure_of_head(&mut self, read: &Read, column: &str, text: &str) -> Option<Arc<Measure>> {
        let resolved = crate::parser::parse_unit(text)
            .ok()
            .and_then(|unit| super::units::resolve_library(&unit));
        if resolved.is_none() {
            self.report(error::unit_of_column(read.path.span, column, text));
        }
        resolved.map(Arc::new)
    }

    /// Column names stand bare in `only`.
    fn check_selection(&mut self, only: &Expr, columns: &[environment::Column]) {
        let outer = self.locals.len();
        for column in columns {
            let instance = Instance::new(&mut self.unifier, &column.scheme.bound);
            let typed = column.scheme.typed.clone();
            let form = instance.form(&typed.form);
            let typed = Typed { form, ..typed };
            self.locals.push(Local {
                name: column.name.clone(),
                span: only.span,
                typed,
                used: true,
            });
        }
        self.infer_truth(only);
        self.locals.truncate(outer);
    }

    fn include_statement(&mut self, path: &Text, outside: &dyn Outside) {
        if self.including.contains(&path.node) {
            self.report(error::include_cycle(path.span, &path.node));
            return;
        }
        if self.imported.contains(&path.node) {
            return;
        }
        self.imported.push(path.node.clone());
        match outside.sheet(&path.node) {
            Ok(source) => {
                let tasks = self.tasks.len();
                let id = self.add_source(source);
                self.including.push(path.node.clone());
                self.check_source(id, outside);
                self.including.pop();
                // An included sheet lends its definitions; its outputs are its own.
                self.tasks.truncate(tasks);
            }
            Err(reason) => self.report(error::cannot_read(path.span, &reason)),
        }
    }

    fn unit_statement(&mut self, name: &Name, value: &Expr) {
        let typed = self.infer_quantity(value);
        if typed.is_unknown() || !self.may_name_unit(name) {
            self.lost.insert(name.node.clone());
            return;
        }
        let Some((factor, measure)) = self.unit_size(value, &typed) else {
            self.lost.insert(name.node.clone());
            self.report(error::unit_is_no_literal(value.span));
            return;
        };
        let measure = Measure {
            text: name.node.clone(),
            factor,
            slashed: SmallVec::new(),
            ..measure
        };
        self.measures.clear();
        self.environment.units.insert(
            name.node.clone(),
            UserUnit {
                measure,
                place: self.place(name.span),
            },
        );
    }

    /// The size and dimension of what a unit is defined as.
    fn unit_size(&mut self, value: &Expr, typed: &Typed) -> Option<(f64, Measure)> {
        let size = self.fold(value)?;
        let form = self.settled(&typed.form);
        let written = typed.unit.as_ref();
        let measure = Measure {
            text: SmolStr::default(),
            factor: 1.0,
            framed: written.is_some_and(|unit| unit.framed),
            names_length: written.is_some_and(|unit| unit.names_length) || form == Form::dimension(&LENGTH),
            form,
            slashed: SmallVec::new(),
        };
        (size > 0.0 && size.is_finite()).then_some((size, measure))
    }

    /// The value of an expression of written numbers and constants.
    fn fold(&self, expr: &Expr) -> Option<f64> {
        match &expr.kind {
            ExprKind::Quantity(quantity) => {
                let factor = quantity.unit.as_ref().map_or(1.0, |unit| self.size_of(unit));
                Some(quantity.number.value * factor)
            }
            ExprKind::Group(inner) | ExprKind::Express(inner, Bracket { conversion: None, .. }) => {
                self.fold(inner)
            }
            ExprKind::Name(name) => match library::value(name)?.definition {
                Definition::Constant(value, _) if self.environment.latest(Space::Value, name).is_none() => {
                    Some(value)
                }
                _ => None,
            },
            ExprKind::Unary(op, inner) if op.node == ast::UnaryOp::Negate => {
                self.fold(inner).map(|value| -value)
            }
            ExprKind::Binary(op, left, right) => {
                let (a, b) = (self.fold(left)?, self.fold(right)?);
                Some(match op.node {
                    BinaryOp::Add => a + b,
                    BinaryOp::Subtract => a - b,
                    BinaryOp::Multiply => a * b,
                    BinaryOp::Divide => a / b,
                    BinaryOp::Power => libm::pow(a, b),
                })
            }
            _ => None,
        }
    }

    fn may_name_unit(&mut self, name: &Name) -> bool {
        if units::find(&name.node).is_some() || name.node == "h" {
            self.report(error::unit_of_library(name));
            return false;
        }
        let unit = self.environment.units.get(&name.node).map(|unit| unit.place);
        let tally = self
            .environment
            .tallies
            .iter()
            .find(|(known, _)| *known == name.node)
            .map(|(_, place)| *place);
        if let Some(first) = unit.or(tally) {
            let here = (first.source == self.source).then_some(first.span);
            let elsewhere = self.sources[usize::from(first.source)].name.to_string();
            self.report(error::duplicate_name(name, here, &elsewhere));
            return false;
        }
        if self.environment.latest(Space::Value, &name.node).is_some() {
            self.report(error::unit_shadows_name(name));
        }
        true
    }

    fn tally_statement(&mut self, name: &Name) {
        if self.at_prompt && self.environment.tally(&name.node).is_some() {
            return;
        }
        if self.may_name_unit(name) {
            self.measures.clear();
            let place = self.place(name.span);
            self.environment.tallies.push((name.node.clone(), place));
        }
    }

    /// Warns once where a name of the library is bound anew.
    fn warn_of_library_name(&mut self, name: &Name, function: bool) {
        if self.in_library {
            return;
        }
        let known = if function {
            library::function(&name.node)
        } else {
            library::value(&name.node)
        }
        .is_some();
        let word = function
            && (call::BINDING_FORMS.iter().any(|(word, _)| *word == name.node)
                || call::series_function(&name.node).is_some());
        let [values, functions] = self.spaces();
        let space = if function { functions } else { values };
        if (known || word) && self.environment.latest(space, &name.node).is_none() {
            self.report(error::rebinds_library(
                name,
                if function { "function" } else { "value" },
            ));
        }
    }

    /// Warns of values and functions that nothing rests on, in a sheet that
    /// shows something.
    pub(super) fn warn_of_unused(&mut self, source: u16, from: BindingId) {
        let wrong = self
            .diagnostics
            .iter()
            .any(|(_, diagnostic)| diagnostic.is_error());
        if self.at_prompt || self.tasks.is_empty() || wrong {
            return;
        }
        let unused: Vec<(Span, SmolStr)> = self.environment.bindings[from as usize..]
            .iter()
            .filter(|binding| !binding.used.get() && binding.place.source == source)
            .filter(|binding| matches!(binding.space, Space::Value | Space::Function | Space::Model))
            .map(|binding| (binding.place.span, binding.name.clone()))
            .collect();
        for (span, name) in unused {
            self.diagnostics
                .push((usize::from(source), error::unused(span, &name)));
        }
    }

    /// Warns where a sheet has results that rest on a model and names none:
    /// nobody could reproduce them once the default changes.
    pub(super) fn warn_of_unstated_model(&mut self) {
        let stated = self.at_prompt || self.environment.assumed.is_some();
        let is_output = |task: &Task| match task {
            Task::Show(show) => show.result,
            Task::Claim(_) | Task::Table(_) => true,
            Task::Help(_) => false,
        };
        let Some(used) = self.environment.model_used.filter(|_| !stated) else {
            return;
        };
        if self.tasks.iter().any(is_output) {
            let warning = error::model_not_stated(used.span);
            self.diagnostics.push((usize::from(used.source), warning));
        }
    }

    /// Says once that uncertainties are not carried yet.
    pub(super) fn warn_of_uncertainty(&mut self, span: Span) {
        if !std::mem::replace(&mut self.told_of_uncertainty, true) {
            self.report(error::uncertainty_not_carried(span));
        }
    }
}

/// The head of a column is its expression without the bracket.
fn head_span(column: &Expr) -> Span {
    match &column.kind {
        ast::ExprKind::Express(value, _) => head_span(value),
        ast::ExprKind::Under(_, _) => column.span,
        _ => column.span,
    }
}
