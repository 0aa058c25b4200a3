//! Calls: functions of the sheet and of the library, binding forms, and
//! functions of whole series.

use super::form::Form;
use super::infer::{COMOVING, LITTLE_H, unit_like};
use super::typed::{Instance, Typed};
use super::unify::Sort;
use super::{BindingId, Checker, Local, Meaning, Note, Space, error, library};
use crate::ast::{Argument, Expr, ExprKind, Name, Range, Step};
use crate::source::Span;
use smol_str::SmolStr;
use std::borrow::Cow;
use std::sync::Arc;
use zij_stdlib::catalogue::{Definition, Entry, Type};

/// A binding form by its word.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum BindingForm {
    /// `integral(body, x = a .. b)`
    Integral,
    /// `sum(body, n = RANGE)`
    Sum,
    /// `root(l = r, x = a .. b)`
    Root,
    /// `maximum(body, x = a .. b)`
    Maximum,
    /// `minimum(body, x = a .. b)`
    Minimum,
    /// `derivative(body, x = a)`
    Derivative,
}

/// A function of whole series by its word.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SeriesFunction {
    /// `sum`
    Sum,
    /// `mean`
    Mean,
    /// `median`
    Median,
    /// `std`
    Std,
    /// `count`
    Count,
    /// `min`
    Min,
    /// `max`
    Max,
    /// `sort`
    Sort,
    /// `quantile`
    Quantile,
}

/// The words of the language that are called like functions.
pub const BINDING_FORMS: &[(&str, BindingForm)] = &[
    ("integral", BindingForm::Integral),
    ("sum", BindingForm::Sum),
    ("root", BindingForm::Root),
    ("maximum", BindingForm::Maximum),
    ("minimum", BindingForm::Minimum),
    ("derivative", BindingForm::Derivative),
];

/// The functions of whole series.
pub const SERIES_FUNCTIONS: &[(&str, SeriesFunction)] = &[
    ("sum", SeriesFunction::Sum),
    ("mean", SeriesFunction::Mean),
    ("median", SeriesFunction::Median),
    ("std", SeriesFunction::Std),
    ("count", SeriesFunction::Count),
    ("min", SeriesFunction::Min),
    ("max", SeriesFunction::Max),
    ("sort", SeriesFunction::Sort),
    ("quantile", SeriesFunction::Quantile),
];

/// What is understood and comes later.
pub const NOT_YET: &[&str] = &["uncertainty", "poisson", "spread"];

/// The binding form that a call is, if it is one.
#[must_use]
pub fn binding_form(name: &str, arguments: &[Argument]) -> Option<BindingForm> {
    let (_, form) = BINDING_FORMS.iter().find(|(word, _)| *word == name)?;
    let binds = arguments
        .iter()
        .any(|argument| !matches!(argument, Argument::Positional(_)));
    (binds || *form != BindingForm::Sum).then_some(*form)
}

/// The function of series of this name.
#[must_use]
pub fn series_function(name: &str) -> Option<SeriesFunction> {
    SERIES_FUNCTIONS
        .iter()
        .find(|(word, _)| *word == name)
        .map(|(_, function)| *function)
}

/// The parts of a binding form: what is on either side of `=` (or the body
/// alone), the variable and what it runs over.
pub struct BindingParts<'a> {
    /// The body, or the left side of an equation.
    pub body: Cow<'a, Expr>,
    /// The right side of an equation.
    pub right: Option<Right<'a>>,
    /// The variable.
    pub variable: &'a Name,
    /// What it runs over.
    pub over: &'a Expr,
}

/// The right side of the equation of a `root`.
#[derive(Clone, Copy)]
pub struct Right<'a>(pub &'a Expr);

/// The parts of a binding form, if it has them.
#[must_use]
pub fn binding_parts(arguments: &[Argument]) -> Option<BindingParts<'_>> {
    let [first, Argument::Named(variable, over)] = arguments else {
        return None;
    };
    match first {
        Argument::Positional(body) => Some(BindingParts {
            body: Cow::Borrowed(body),
            right: None,
            variable,
            over,
        }),
        Argument::Equation(body, right) => Some(BindingParts {
            body: Cow::Borrowed(body),
            right: Some(Right(right)),
            variable,
            over,
        }),
        // The left side is a name alone: `root(t = 3 - t, t = 0 .. 10)`.
        Argument::Named(name, right) => {
            let body = Expr {
                kind: ExprKind::Name(name.node.clone()),
                span: name.span,
            };
            Some(BindingParts {
                body: Cow::Owned(body),
                right: Some(Right(right)),
                variable,
                over,
            })
        }
    }
}

impl Checker {
    pub(super) fn infer_call(&mut self, name: &Name, arguments: &[Argument], span: Span) -> Typed {
        let [_, functions] = self.spaces();
        if let Some(diagnostic) = self.own_definition(functions, &name.node, name.span) {
            self.infer_arguments(arguments);
            return self.wrong(diagnostic);
        }
        if let Some(id) = self.environment.latest(functions, &name.node) {
            return self.infer_user_call(id, name, arguments, span);
        }
        if let Some(form) = binding_form(&name.node, arguments) {
            return self.infer_binding_form(form, name, arguments, span);
        }
        if let Some(function) = series_function(&name.node) {
            return self.infer_series_function(function, name, arguments);
        }
        if let Some(entry) = library::function(&name.node) {
            return self.infer_library_call(entry, name, arguments, span);
        }
        if let Some(id) = self.library_binding(Space::LibraryFunction, &name.node) {
            return self.infer_user_call(id, name, arguments, span);
        }
        self.infer_arguments(arguments);
        if NOT_YET.contains(&name.node.as_str()) {
            return self.wrong(error::not_yet(name.span, &format!("{}(…)", name.node)));
        }
        if self.lost.contains(&name.node) {
            return Typed::unknown();
        }
        let diagnostic = self.unknown_function(name, span);
        self.wrong(diagnostic)
    }

    /// Finds the mistakes within arguments of what is itself a mistake.
    fn infer_arguments(&mut self, arguments: &[Argument]) {
        for argument in arguments {
            match argument {
                Argument::Positional(value) => drop(self.infer(value)),
                Argument::Named(..) | Argument::Equation(..) => {}
            }
        }
    }

    /// Puts arguments in the order of the parameters. `None` after an error.
    fn in_order<'a>(
        &mut self,
        name: &Name,
        parameters: &[(SmolStr, bool)],
        arguments: &'a [Argument],
    ) -> Option<Vec<Option<&'a Expr>>> {
        let mut placed: Vec<Option<&Expr>> = vec![None; parameters.len()];
        let mut next = 0;
        for argument in arguments {
            let (place, value) = match argument {
                Argument::Positional(value) => (Some(next), value),
                Argument::Named(word, value) => {
                    let place = parameters
                        .iter()
                        .position(|(parameter, _)| *parameter == word.node);
                    if place.is_none() {
                        self.infer(value);
                        self.report(error::unknown_argument(name, word, parameters));
                        return None;
                    }
                    (place, value)
                }
                Argument::Equation(left, right) => {
                    self.report(error::equation_as_argument(left.span.to(right.span), &name.node));
                    return None;
                }
            };
            let place = place.unwrap_or(next);
            next = place + 1;
            match placed.get_mut(place) {
                Some(slot @ None) => *slot = Some(value),
                Some(Some(first)) => {
                    let first = first.span;
                    self.report(error::argument_twice(value.span, first, &parameters[place].0));
                    return None;
                }
                None => {
                    self.report(error::too_many_arguments(name, value.span, parameters));
                    return None;
                }
            }
        }
        let missing = parameters
            .iter()
            .zip(&placed)
            .find(|((_, default), value)| !default && value.is_none());
        if let Some(((parameter, _), _)) = missing {
            self.report(error::missing_argument(name, parameter, parameters));
            return None;
        }
        Some(placed)
    }

    fn infer_user_call(&mut self, id: BindingId, name: &Name, arguments: &[Argument], span: Span) -> Typed {
        self.rest_on(id, span);
        self.environment.binding(id).used.set(true);
        let Meaning::Function(function) = &self.environment.binding(id).meaning else {
            self.infer_arguments(arguments);
            return Typed::unknown();
        };
        let function = Arc::clone(function);
        let parameters: Vec<(SmolStr, bool)> = (function.parameters.iter())
            .map(|parameter| (parameter.name.node.clone(), parameter.default.is_some()))
            .collect();
        let Some(placed) = self.in_order(name, &parameters, arguments) else {
            return Typed::unknown();
        };
        let instance = Instance::new(&mut self.unifier, &function.result.bound);
        let mut given = Vec::new();
        for (place, value) in placed.iter().enumerate() {
            let Some(value) = *value else { continue };
            let actual = self.infer_quantity(value);
            if !actual.is_unknown() && !function.takes[place].is_unknown() {
                let expected = instance.form(&function.takes[place].form);
                given.push(Given {
                    place,
                    value,
                    actual,
                    expected,
                });
            }
        }
        let wrong = self.fit_arguments(&given, &parameters, name, &|this| this.signature_of(id));
        if wrong && function.result.typed.is_unknown() {
            return Typed::unknown();
        }
        let typed = function.result.typed.clone();
        let form = self.unifier.resolve(&instance.form(&typed.form));
        let unit = typed.unit.clone().or_else(|| {
            let units = given.iter().filter_map(|one| one.actual.unit.as_deref());
            units
                .filter_map(|unit| unit_like(&self.unifier.settled(&form), unit))
                .next()
        });
        let form = self.with_open_angle(form);
        self.bounded(Typed { form, unit, ..typed }, span)
    }

    fn infer_library_call(
        &mut self,
        entry: &'static Entry,
        name: &Name,
        arguments: &[Argument],
        span: Span,
    ) -> Typed {
        if matches!(entry.definition, Definition::Cosmology(_)) {
            self.use_model(span);
        }
        let parameters: Vec<(SmolStr, bool)> = (entry.arguments.iter())
            .map(|argument| (SmolStr::new_static(argument.name), argument.default.is_some()))
            .collect();
        let Some(placed) = self.in_order(name, &parameters, arguments) else {
            return Typed::unknown();
        };
        let mut variables: Vec<Form> = Vec::new();
        let mut only_unit = None;
        let mut given = Vec::new();
        for (place, value) in placed.iter().enumerate() {
            let Some(value) = *value else { continue };
            let actual = self.infer_quantity(value);
            let kind = &entry.arguments[place].kind;
            let expected = self.type_form(kind, &mut variables);
            if !actual.is_unknown() {
                let form = self.with_h_settled(&actual, value, &expected, kind);
                only_unit.clone_from(&actual.unit);
                given.push(Given {
                    place,
                    value,
                    actual: Typed { form, ..actual },
                    expected,
                });
            }
        }
        self.fit_arguments(&given, &parameters, name, &|_| library::signature(entry));
        let mut form = self.type_form(&entry.result, &mut variables);
        if is_root(&entry.result) {
            form = self.unifier.resolve(&form);
            form = self.with_open_tally(form);
        }
        if entry.open_today && placed.iter().all(Option::is_none) {
            form = form.times(&self.unifier.fresh(Sort::Along(COMOVING)));
        }
        let form = self.unifier.resolve(&form);
        let form = self.with_open_angle(form);
        let usual = self.library_measure(entry.usual_unit);
        let unit = match (entry.result.variable, &only_unit) {
            (Some(_), Some(unit)) => unit_like(&self.unifier.settled(&form), unit),
            (Some(_), None) => None,
            (None, _) => usual,
        };
        Typed::quantity(form).shown_in(unit)
    }

    /// Makes each argument what the function takes, or says why it is not;
    /// whether any was wrong.
    fn fit_arguments(
        &mut self,
        given: &[Given<'_>],
        parameters: &[(SmolStr, bool)],
        name: &Name,
        signature: &dyn Fn(&Checker) -> String,
    ) -> bool {
        let mut wrong = false;
        let mut swapped = None;
        for (index, one) in given.iter().enumerate() {
            if swapped == Some(index) || self.unifier.unify(&one.actual.form, &one.expected).is_ok() {
                continue;
            }
            wrong = true;
            let signature = signature(self);
            let place = (index + 1..given.len()).find(|other| self.are_swapped(one, &given[*other]));
            let diagnostic = match place {
                Some(place) => {
                    swapped = Some(place);
                    let other = &given[place];
                    self.swapped_arguments(
                        (name, &signature),
                        (one.value, &one.actual),
                        (other.value, &other.actual),
                    )
                }
                None => {
                    let side = (one.value, &one.actual);
                    self.wrong_argument((name, &signature), parameters, one.place, side, &one.expected)
                }
            };
            self.report(diagnostic);
        }
        wrong
    }

    fn are_swapped(&self, one: &Given<'_>, other: &Given<'_>) -> bool {
        self.unifier.could_be(&one.actual.form, &other.expected)
            && self.unifier.could_be(&other.actual.form, &one.expected)
            && !self.unifier.could_be(&other.actual.form, &other.expected)
    }

    /// An argument of the library that carries h is settled with the model in
    /// force.
    fn with_h_settled(&mut self, actual: &Typed, value: &Expr, expected: &Form, kind: &Type) -> Form {
        let form = self.unifier.resolve(&actual.form);
        let power = form.of_generator(zij_stdlib::dimension::Generator::LittleH);
        if super::form::is_zero(power) || kind.variable.is_some() {
            return form;
        }
        let settled = form.without(|key| key == LITTLE_H);
        if self.unifier.could_be(&settled, expected) {
            self.use_model(value.span);
            self.note(value.span, Note::SettledH(power));
            return settled;
        }
        form
    }

    fn type_form(&mut self, kind: &Type, variables: &mut Vec<Form>) -> Form {
        let mut form = Form::dimension(&kind.dimension);
        if let Some((index, exponent)) = kind.variable {
            while variables.len() <= usize::from(index) {
                let fresh = self.unifier.fresh(Sort::Any);
                variables.push(fresh);
            }
            form = form.merge(&variables[usize::from(index)], exponent);
        }
        if kind.open {
            form = form.times(&self.unifier.fresh(Sort::Along(COMOVING)));
        }
        form
    }

    fn infer_series_function(
        &mut self,
        function: SeriesFunction,
        name: &Name,
        arguments: &[Argument],
    ) -> Typed {
        let extreme = matches!(function, SeriesFunction::Min | SeriesFunction::Max);
        if extreme && arguments.len() > 1 {
            return self.infer_extreme_of(name, arguments);
        }
        let mut parameters = vec![(SmolStr::new_static("series"), false)];
        if function == SeriesFunction::Quantile {
            parameters.push((SmolStr::new_static("fraction"), false));
        }
        let Some(placed) = self.in_order(name, &parameters, arguments) else {
            return Typed::unknown();
        };
        if let Some(Some(fraction)) = placed.get(1) {
            self.infer_number(fraction, "the fraction of a quantile");
        }
        let Some(series) = placed[0] else {
            return Typed::unknown();
        };
        if function == SeriesFunction::Count {
            self.infer(series);
            return Typed::quantity(Form::number());
        }
        self.infer_quantity(series)
    }

    /// `max(a, b)`: element by element.
    fn infer_extreme_of(&mut self, name: &Name, arguments: &[Argument]) -> Typed {
        let mut first: Option<(&Expr, Typed)> = None;
        for argument in arguments {
            let Argument::Positional(value) = argument else {
                return self.wrong(error::named_in_list(name));
            };
            let typed = self.infer_quantity(value);
            match &first {
                Some((head, known)) => {
                    let (head, known) = (*head, known.clone());
                    self.same_or_report(
                        (head, &known),
                        (value, &typed),
                        &format!("the arguments of {}", name.node),
                    );
                }
                None => first = Some((value, typed)),
            }
        }
        first.map_or_else(Typed::unknown, |(_, typed)| typed)
    }

    fn infer_binding_form(
        &mut self,
        form: BindingForm,
        name: &Name,
        arguments: &[Argument],
        span: Span,
    ) -> Typed {
        match self.infer_bound_body(form, name, arguments, span) {
            None => Typed::unknown(),
            Some(bound) => self.result_of_form(form, &bound),
        }
    }

    /// `maximum(…).at`: where the body is largest.
    pub(super) fn infer_place_of(&mut self, name: &Name, arguments: &[Argument], span: Span) -> Typed {
        match binding_form(&name.node, arguments) {
            Some(form @ (BindingForm::Maximum | BindingForm::Minimum)) => {
                let bound = self.infer_bound_body(form, name, arguments, span);
                bound.map_or_else(Typed::unknown, |bound| bound.variable)
            }
            Some(_) | None => {
                self.infer_arguments(arguments);
                self.wrong(error::no_place(span, &name.node))
            }
        }
    }

    fn result_of_form(&mut self, form: BindingForm, bound: &Bound) -> Typed {
        match form {
            BindingForm::Sum | BindingForm::Maximum | BindingForm::Minimum => bound.body.clone(),
            BindingForm::Root => bound.variable.clone(),
            BindingForm::Integral => Typed::quantity(bound.body.form.times(&bound.variable.form)),
            BindingForm::Derivative => Typed::quantity(bound.body.form.per(&bound.variable.form)),
        }
    }

    fn infer_bound_body(
        &mut self,
        form: BindingForm,
        name: &Name,
        arguments: &[Argument],
        span: Span,
    ) -> Option<Bound> {
        let Some(parts) = binding_parts(arguments) else {
            self.report(error::malformed_binding_form(span, &name.node));
            return None;
        };
        if form == BindingForm::Root && parts.right.is_none() {
            self.report(error::root_wants_equation(parts.body.span, &parts.variable.node));
            return None;
        }
        if form != BindingForm::Root && parts.right.is_some() {
            self.report(error::equation_as_argument(parts.body.span, &name.node));
            return None;
        }
        let variable = self.infer_bounds(form, &name.node, parts.over)?;
        self.remember(parts.variable.span, &variable);
        self.locals.push(Local {
            name: parts.variable.node.clone(),
            span: parts.variable.span,
            typed: variable.clone(),
            used: true,
        });
        let body = self.infer_quantity(&parts.body);
        if let Some(Right(right)) = parts.right {
            let typed = self.infer_quantity(right);
            self.same_or_report((&parts.body, &body), (right, &typed), "the sides of the equation");
        }
        self.locals.pop();
        (!body.is_unknown() && !variable.is_unknown()).then_some(Bound { body, variable })
    }

    /// The variable's dimension from what it runs over.
    fn infer_bounds(&mut self, form: BindingForm, name: &str, over: &Expr) -> Option<Typed> {
        match (form, &over.kind) {
            (BindingForm::Derivative, ExprKind::Range(range)) => {
                self.interval(range);
                self.report(error::derivative_at_a_point(over.span));
                None
            }
            (BindingForm::Derivative | BindingForm::Sum, _) => Some(self.infer_quantity(over)),
            (_, ExprKind::Range(range)) => self.infer_interval(range, over.span, name),
            (_, _) => {
                self.infer(over);
                self.report(error::bounds_are_no_range(over.span, name));
                None
            }
        }
    }

    fn infer_interval(&mut self, range: &Range, span: Span, name: &str) -> Option<Typed> {
        let typed = self.interval(range);
        if matches!(range.step, Step::None) {
            return Some(typed);
        }
        self.report(error::divided_bounds(span, name));
        None
    }
}

/// An argument that was given.
struct Given<'a> {
    place: usize,
    value: &'a Expr,
    actual: Typed,
    expected: Form,
}

/// A body and its variable.
struct Bound {
    body: Typed,
    variable: Typed,
}

/// Whether a result is a root of an argument.
fn is_root(kind: &Type) -> bool {
    kind.variable.is_some_and(|(_, exponent)| *exponent.denom() != 1)
}
