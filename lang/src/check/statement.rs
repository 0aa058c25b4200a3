//! Statements: each definition becomes a binding, each output a task.

mod read;
mod unit;
mod warn;

use super::environment::{Function, Meaning, Place, Space, Value};
use super::form::Form;
use super::typed::{Generaliser, Instance, Kind, Measure, Scheme, Typed};
use super::unify::Sort;
use super::{BindingId, Checker, Head, Local, NoHead, Outside, error};
use crate::ast::{
    self, Binding, Bracket, Definition as Written, Expr, Name, Parameter, Plot, Statement, StatementKind,
    Text,
};
use crate::source::{Source, Span};
use smol_str::SmolStr;
use std::sync::Arc;

/// Something the sheet asks to be shown.
#[derive(Clone)]
pub enum Task {
    /// A result or a printed expression.
    Show(Show),
    /// A claim.
    Claim(ClaimTask),
    /// A table.
    Table(TableTask),
    /// Where a value comes from.
    Explain(ExplainTask),
    /// A page of the handbook.
    Help(Option<SmolStr>),
}

/// A value to explain.
#[derive(Clone)]
pub struct ExplainTask {
    /// The value.
    pub show: Show,
    /// As written.
    pub expr: Arc<Expr>,
    /// It needs the model assumed.
    pub needs_model: bool,
    /// The values of the sheet that it rests on, in order.
    pub values: Vec<BindingId>,
    /// The functions of the sheet that it rests on, in order.
    pub functions: Vec<BindingId>,
    /// The bindings before it.
    pub limit: BindingId,
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
            StatementKind::Explain(value) => self.explain_statement(value),
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
        let defining = self.defining.replace((self.spaces()[0], definition.name.clone()));
        let mut typed = self.infer_with_wheres(&definition.value, &definition.wheres);
        self.defining = defining;
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
        let form = self.unifier.gathered(&typed.form);
        let form = generaliser.bind(&mut self.unifier, &form, binds);
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
        let defining = self.defining.replace((self.spaces()[1], definition.name.clone()));
        let result = self.infer_with_wheres(&definition.value, &definition.wheres);
        self.defining = defining;
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
        let form = self
            .unifier
            .gathered_apart(&result.form, takes.iter().map(|typed| &typed.form));
        let result = Typed { form, ..result };
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
        if typed.is_unknown() {
            return;
        }
        // What is shown may speak of `that`, and means the one before.
        let that = self
            .at_prompt
            .then(|| (value.clone(), wheres.clone(), typed.clone()));
        self.show_expression(value, wheres, typed, (false, None));
        if let Some((value, wheres, typed)) = that {
            self.bind_that(&value, &wheres, &typed);
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

    fn explain_statement(&mut self, value: Expr) {
        let typed = self.infer(&value);
        if typed.is_unknown() {
            return;
        }
        let needs_model = self.needs_model;
        let closure = self.environment.closure(&self.rests_on);
        let of_kind = |wanted: &dyn Fn(&Meaning) -> bool| -> Vec<BindingId> {
            closure
                .iter()
                .copied()
                .filter(|id| wanted(&self.environment.binding(*id).meaning))
                .collect()
        };
        let values = of_kind(&|meaning| matches!(meaning, Meaning::Value(_)));
        let functions = of_kind(&|meaning| matches!(meaning, Meaning::Function(_)));
        let expr = Arc::new(value.clone());
        let limit = self.environment.next();
        self.show_expression(value, Vec::new(), typed, (false, None));
        if let Some(Task::Show(show)) = self.tasks.pop() {
            self.tasks.push(Task::Explain(ExplainTask {
                show,
                expr,
                needs_model,
                values,
                functions,
                limit,
            }));
        }
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
}

/// The head of a column is its expression without the bracket.
fn head_span(column: &Expr) -> Span {
    match &column.kind {
        ast::ExprKind::Express(value, _) => head_span(value),
        ast::ExprKind::Under(_, _) => column.span,
        _ => column.span,
    }
}
