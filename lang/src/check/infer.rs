//! Expressions to their dimension and frame.

use super::form::{self, Exponent, Form, Key};
use super::typed::{Instance, Kind, Measure, Typed};
use super::unify::Sort;
use super::{Checker, Meaning, Note, Space, error, library};
use crate::ast::{self, BinaryOp, Expr, ExprKind, Name, UnaryOp};
use crate::diagnostic::Diagnostic;
use crate::source::{Span, Spanned};
use num_rational::Ratio;
use smol_str::SmolStr;
use std::sync::Arc;
use zij_stdlib::catalogue::{Definition, Entry};
use zij_stdlib::dimension::Generator;

pub(super) const ANGLE: Key = Generator::Angle as Key;
pub(super) const MAGNITUDE: Key = Generator::Magnitude as Key;
pub(super) const COMOVING: Key = Generator::Comoving as Key;
pub(super) const LITTLE_H: Key = Generator::LittleH as Key;

impl Checker {
    /// What an expression is.
    pub(super) fn infer(&mut self, expr: &Expr) -> Typed {
        let typed = self.infer_kind(expr);
        self.remember(expr.span, &typed);
        typed
    }

    /// Writes down what stands at a place, where that is wanted.
    pub(super) fn remember(&mut self, span: Span, typed: &Typed) {
        let place = self.place(span);
        if let Some(record) = &mut self.record {
            record.insert(place, typed.clone());
        }
    }

    fn infer_kind(&mut self, expr: &Expr) -> Typed {
        match &expr.kind {
            ExprKind::Quantity(quantity) => self.infer_literal(&quantity.number, quantity.unit.as_ref()),
            ExprKind::Quantities(numbers, unit) => self.infer_literals(numbers, unit),
            ExprKind::Infinity => Typed::quantity(self.unifier.fresh(Sort::Any)),
            ExprKind::Name(name) => self.infer_name(name, expr.span),
            ExprKind::Call(name, arguments) => self.infer_call(name, arguments, expr.span),
            ExprKind::Field(base, name) => self.infer_field(base, name),
            ExprKind::Unary(op, operand) => self.infer_unary(*op, operand),
            ExprKind::Binary(op, left, right) => self.infer_binary(*op, left, right),
            ExprKind::Comparison(first, rest) => self.infer_comparison(first, rest),
            ExprKind::Logical(_, left, right) => {
                self.infer_truth(left);
                self.infer_truth(right);
                Typed::truth()
            }
            ExprKind::If(condition, yes, no) => self.infer_choice(condition, yes, no),
            ExprKind::Series(elements) => self.infer_series(elements),
            ExprKind::Range(range) => self.infer_range(range, expr.span),
            ExprKind::Express(value, bracket) => self.infer_bracket(value, bracket),
            ExprKind::Under(value, model) => self.infer_under(value, model),
            ExprKind::Group(inner) => self.infer(inner),
            ExprKind::Broken => Typed::unknown(),
        }
    }

    /// An expression that must be a quantity.
    pub(super) fn infer_quantity(&mut self, expr: &Expr) -> Typed {
        let typed = self.infer(expr);
        match typed.kind {
            Kind::Truth => self.wrong(error::truth_as_quantity(expr.span)),
            Kind::Quantity | Kind::Unknown => typed,
        }
    }

    /// An expression that must be a truth value.
    pub(super) fn infer_truth(&mut self, expr: &Expr) {
        let typed = self.infer(expr);
        if typed.kind == Kind::Quantity {
            let what = self.describe(&typed.form);
            self.report(error::not_a_truth(expr.span, &what));
        }
    }

    /// An expression that must be a plain number; `what` it is for.
    pub(super) fn infer_number(&mut self, expr: &Expr, what: &str) -> Typed {
        let typed = self.infer_quantity(expr);
        if !typed.is_unknown() && self.unifier.unify(&typed.form, &Form::number()).is_err() {
            let found = self.describe(&typed.form);
            return self.wrong(error::not_a_number(expr.span, what, &found));
        }
        typed
    }

    fn infer_literal(&mut self, number: &ast::Number, unit: Option<&ast::Unit>) -> Typed {
        if number.uncertainty.is_some() {
            self.warn_of_uncertainty(number.span);
        }
        let Some(unit) = unit else {
            return Typed::quantity(self.bare_number(number.value));
        };
        match self.measure(unit, true) {
            Some(measure) => self.literal_in(measure),
            None => Typed::unknown(),
        }
    }

    fn infer_literals(&mut self, numbers: &[ast::Number], unit: &ast::Unit) -> Typed {
        match numbers.first() {
            Some(first) => self.infer_literal(first, Some(unit)),
            None => Typed::unknown(),
        }
    }

    /// A written number fits magnitudes, and a written zero anything.
    fn bare_number(&mut self, value: f64) -> Form {
        if value == 0.0 {
            self.unifier.fresh(Sort::Any)
        } else {
            self.unifier.fresh(Sort::Along(MAGNITUDE))
        }
    }

    /// A number in a unit. One whose unit names a length is of either frame.
    pub(super) fn literal_in(&mut self, measure: Arc<Measure>) -> Typed {
        let mut form = self.with_open_angle(measure.form.clone());
        if measure.names_length && !measure.framed {
            form = form.times(&self.unifier.fresh(Sort::Once(COMOVING)));
        }
        Typed::quantity(form).shown_in(Some(measure))
    }

    /// In a quantity with another dimension the radian need not be named.
    pub(super) fn with_open_angle(&mut self, form: Form) -> Form {
        if form.has_other_dimension() {
            let angle = self.unifier.fresh(Sort::Along(ANGLE));
            return form.times(&angle);
        }
        form
    }

    fn infer_name(&mut self, name: &SmolStr, span: Span) -> Typed {
        if let Some(local) = self.locals.iter_mut().rev().find(|local| local.name == *name) {
            local.used = true;
            let typed = local.typed.clone();
            let form = self.unifier.resolve(&typed.form);
            return Typed {
                form: self.with_open_angle(form),
                ..typed
            };
        }
        let [values, _] = self.spaces();
        if let Some(diagnostic) = self.own_definition(values, name, span) {
            return self.wrong(diagnostic);
        }
        if let Some(id) = self.environment.latest(values, name) {
            return self.infer_binding(id, span);
        }
        if let Some(entry) = library::value(name) {
            return self.infer_constant(entry, span);
        }
        if let Some(id) = self.library_binding(Space::LibraryValue, name) {
            return self.infer_binding(id, span);
        }
        if self.lost.contains(name) {
            return Typed::unknown();
        }
        let diagnostic = self.unknown_name(name, span);
        self.wrong(diagnostic)
    }

    /// The mistake of a definition that refers to itself. At the prompt the
    /// name means what it meant before.
    pub(super) fn own_definition(&self, space: Space, name: &str, span: Span) -> Option<Diagnostic> {
        let (own, defining) = self.defining.as_ref()?;
        let before = self.at_prompt && self.environment.latest(space, name).is_some();
        (*own == space && defining.node == name && !before)
            .then(|| error::used_before(name, span, defining.span))
    }

    fn infer_binding(&mut self, id: super::BindingId, span: Span) -> Typed {
        self.rest_on(id, span);
        let binding = self.environment.binding(id);
        binding.used.set(true);
        match &binding.meaning {
            Meaning::Value(value) => {
                let value = Arc::clone(value);
                let instance = Instance::new(&mut self.unifier, &value.scheme.bound);
                let form = self.unifier.resolve(&instance.form(&value.scheme.typed.form));
                let typed = value.scheme.typed.clone();
                Typed {
                    form: self.with_open_angle(form),
                    ..typed
                }
            }
            Meaning::Table(_) => {
                let name = binding.name.clone();
                self.wrong(error::table_as_value(span, &name))
            }
            Meaning::Function(_) | Meaning::Model(_) | Meaning::Broken => Typed::unknown(),
        }
    }

    /// Remembers that what is being checked uses this binding.
    pub(super) fn rest_on(&mut self, id: super::BindingId, span: Span) {
        if !self.rests_on.contains(&id) {
            self.rests_on.push(id);
        }
        if self.environment.binding(id).needs_model {
            self.use_model(span);
        }
    }

    fn infer_constant(&mut self, entry: &'static Entry, span: Span) -> Typed {
        if matches!(entry.definition, Definition::ModelValue(_)) {
            self.use_model(span);
        }
        let mut form = Form::dimension(&entry.result.dimension);
        if entry.result.open {
            form = form.times(&self.unifier.fresh(Sort::Along(COMOVING)));
        }
        if entry.name == "pi" {
            form = form.times(&self.unifier.fresh(Sort::Along(ANGLE)));
        }
        let form = self.with_open_angle(form);
        Typed::quantity(form).shown_in(self.library_measure(entry.usual_unit))
    }

    /// Remembers that what is being checked needs the model in force, and the
    /// first thing that did before one was assumed.
    pub(super) fn use_model(&mut self, span: Span) {
        if self.under > 0 {
            return;
        }
        self.needs_model = true;
        if !self.in_function && !self.in_library && self.environment.model_used.is_none() {
            self.environment.model_used = Some(self.place(span));
        }
    }

    fn infer_unary(&mut self, op: Spanned<UnaryOp>, operand: &Expr) -> Typed {
        match op.node {
            UnaryOp::Not => {
                self.infer_truth(operand);
                Typed::truth()
            }
            UnaryOp::Negate | UnaryOp::Plus => self.infer_quantity(operand),
        }
    }

    fn infer_binary(&mut self, op: Spanned<BinaryOp>, left: &Expr, right: &Expr) -> Typed {
        if op.node == BinaryOp::Power {
            return self.infer_power(left, right);
        }
        let (a, b) = (self.infer_quantity(left), self.infer_quantity(right));
        if a.is_unknown() || b.is_unknown() {
            return Typed::unknown();
        }
        match op.node {
            BinaryOp::Add | BinaryOp::Subtract => self.infer_sum(op, (left, &a), (right, &b)),
            BinaryOp::Multiply => {
                let unit = self.unit_of_product(&a, &b);
                self.bounded(Typed::quantity(a.form.times(&b.form)).shown_in(unit), op.span)
            }
            BinaryOp::Divide | BinaryOp::Power => {
                let unit = self.is_plain(&b).then(|| a.unit.clone()).flatten();
                self.bounded(Typed::quantity(a.form.per(&b.form)).shown_in(unit), op.span)
            }
        }
    }

    /// What was found, unless a power in it is beyond all measure.
    pub(super) fn bounded(&mut self, typed: Typed, span: Span) -> Typed {
        if typed.form.is_unbounded() {
            return self.wrong(error::power_too_large(span));
        }
        typed
    }

    /// A product with a plain number is shown as the other factor is, and one
    /// of powers of a unit in a power of it.
    fn unit_of_product(&self, a: &Typed, b: &Typed) -> Option<Arc<Measure>> {
        match (self.is_plain(a), self.is_plain(b)) {
            (true, _) => b.unit.clone(),
            (false, true) => a.unit.clone(),
            (false, false) => {
                let (one, other) = (a.unit.as_ref()?, b.unit.as_ref()?);
                let ((symbol, power), (same, more)) = (simple_power(&one.text)?, simple_power(&other.text)?);
                (symbol == same)
                    .then(|| power_of(one, symbol, power, power + more))
                    .flatten()
            }
        }
    }

    fn is_plain(&self, typed: &Typed) -> bool {
        self.unifier.settled(&typed.form).is_number()
    }

    fn infer_sum(&mut self, op: Spanned<BinaryOp>, left: (&Expr, &Typed), right: (&Expr, &Typed)) -> Typed {
        let ((left, a), (right, b)) = (left, right);
        if self.unifier.unify(&a.form, &b.form).is_err() {
            let diagnostic = self.unlike_sides(op, (left, a), (right, b));
            return self.wrong(diagnostic);
        }
        let unit = if a.unit.is_some() {
            a.unit.clone()
        } else {
            b.unit.clone()
        };
        let mut form = a.form.clone();
        if (is_one(left) && !is_part(right)) || (is_one(right) && !is_part(left)) {
            // 1+z is how one settles a frame by hand.
            let fixed = self.unifier.resolve(&form);
            if fixed.parts().all(|(key, _)| key >= form::FIRST_BOUND) {
                form = form.times(&self.unifier.fresh(Sort::Along(COMOVING)));
            }
        }
        Typed::quantity(form).shown_in(unit)
    }

    fn infer_power(&mut self, base: &Expr, exponent: &Expr) -> Typed {
        let a = self.infer_quantity(base);
        if let Some(power) = written_rational(exponent) {
            if bare_literal(base).is_some() {
                return Typed::quantity(Form::number());
            }
            return self.raise(&a, power, exponent.span);
        }
        let b = self.infer_quantity(exponent);
        if a.is_unknown() || b.is_unknown() {
            return Typed::unknown();
        }
        if self.unifier.unify(&b.form, &Form::number()).is_err() {
            let found = self.settled(&b.form);
            let what = self.describe(&b.form);
            return self.wrong(error::exponent_with_dimension(exponent.span, &what, &found));
        }
        if self.unifier.unify(&a.form, &Form::number()).is_err() {
            let what = self.describe(&a.form);
            return self.wrong(error::bad_exponent(base.span, exponent.span, &what));
        }
        Typed::quantity(Form::number())
    }

    fn raise(&mut self, base: &Typed, power: Exponent, span: Span) -> Typed {
        if base.is_unknown() {
            return Typed::unknown();
        }
        let mut form = self.unifier.resolve(&base.form).power(power);
        if form.is_unbounded() {
            return self.wrong(error::power_too_large(span));
        }
        if *power.denom() != 1 {
            form = self.with_open_tally(form);
        }
        let unit = base.unit.as_ref().and_then(|unit| {
            let (symbol, old) = simple_power(&unit.text)?;
            let new = power * old;
            new.is_integer()
                .then(|| power_of(unit, symbol, old, *new.numer()))
                .flatten()
        });
        Typed::quantity(form).shown_in(unit)
    }

    /// A root leaves a counting unit open: its error is how one counts.
    pub(super) fn with_open_tally(&mut self, form: Form) -> Form {
        let tally = |key: Key| (form::FIRST_TALLY..form::FIRST_BOUND).contains(&key);
        let counted: Vec<Key> = form
            .parts()
            .map(|(key, _)| key)
            .filter(|key| tally(*key))
            .collect();
        counted.into_iter().fold(form, |form, key| {
            form.times(&self.unifier.fresh(Sort::Along(key)))
        })
    }

    fn infer_comparison(&mut self, first: &Expr, rest: &[(Spanned<ast::CompareOp>, Expr)]) -> Typed {
        let mut left = (first, self.infer_quantity(first));
        for (op, right) in rest {
            let typed = self.infer_quantity(right);
            let known = !left.1.is_unknown() && !typed.is_unknown();
            if known && self.unifier.unify(&left.1.form, &typed.form).is_err() {
                let diagnostic = self.unlike_comparison(op.span, (left.0, &left.1), (right, &typed));
                self.report(diagnostic);
            }
            left = (right, typed);
        }
        Typed::truth()
    }

    fn infer_choice(&mut self, condition: &Expr, yes: &Expr, no: &Expr) -> Typed {
        self.infer_truth(condition);
        let (a, b) = (self.infer(yes), self.infer(no));
        if a.is_unknown() || b.is_unknown() {
            return Typed::unknown();
        }
        if a.kind != b.kind {
            return self.wrong(error::unlike_kinds(yes.span, no.span));
        }
        self.same_or_report((yes, &a), (no, &b), "the two branches");
        let unit = if a.unit.is_some() { a.unit.clone() } else { b.unit };
        Typed { unit, ..a }
    }

    fn infer_series(&mut self, elements: &[Expr]) -> Typed {
        let Some((first, rest)) = elements.split_first() else {
            return Typed::quantity(Form::number());
        };
        let head = self.infer_quantity(first);
        for element in rest {
            let typed = self.infer_quantity(element);
            self.same_or_report((first, &head), (element, &typed), "the elements of a series");
        }
        head
    }

    /// Makes two parts of one thing the same, or says that they are not.
    pub(super) fn same_or_report(&mut self, left: (&Expr, &Typed), right: (&Expr, &Typed), what: &str) {
        let known = !left.1.is_unknown() && !right.1.is_unknown();
        if known && self.unifier.unify(&left.1.form, &right.1.form).is_err() {
            let diagnostic = self.unlike_parts(left, right, what);
            self.report(diagnostic);
        }
    }

    fn infer_range(&mut self, range: &ast::Range, span: Span) -> Typed {
        if matches!(range.step, ast::Step::None) {
            self.interval(range);
            return self.wrong(error::undivided_range(span));
        }
        self.interval(range)
    }

    /// A range, divided or not.
    pub(super) fn interval(&mut self, range: &ast::Range) -> Typed {
        let step = match &range.step {
            ast::Step::Every(step) if !is_dex(step) => Some(step),
            ast::Step::None | ast::Step::Every(_) => None,
            ast::Step::Steps(count) | ast::Step::LogSteps(count) => {
                self.infer_number(count, "how many steps");
                None
            }
        };
        let parts: Vec<&Expr> = [&range.from, &range.to].into_iter().chain(step).collect();
        let typed = self.infer_with_shared_unit(&parts);
        for (part, typed_part) in parts.iter().zip(&typed).skip(1) {
            self.same_or_report((parts[0], &typed[0]), (part, typed_part), "the parts of a range");
        }
        let unit = typed.iter().rev().find_map(|part| part.unit.clone());
        let wrong = typed.iter().any(Typed::is_unknown);
        if wrong {
            Typed::unknown()
        } else {
            typed[0].clone().shown_in(unit)
        }
    }

    /// A unit written once, last, serves the bare numbers before it.
    pub(super) fn infer_with_shared_unit(&mut self, parts: &[&Expr]) -> Vec<Typed> {
        let shared = parts.iter().rev().find_map(|part| literal_unit(part));
        let Some(unit) = shared else {
            return parts.iter().map(|part| self.infer_quantity(part)).collect();
        };
        let measure = self.measure(unit, true);
        let mut typed = Vec::new();
        for part in parts {
            typed.push(match (&measure, bare_literal(part)) {
                (Some(measure), Some(span)) => {
                    self.note(span, Note::Unit(Arc::clone(measure)));
                    self.literal_in(Arc::clone(measure))
                }
                (Some(_) | None, _) => self.infer_quantity(part),
            });
        }
        typed
    }

    fn infer_under(&mut self, value: &Expr, model: &ast::Model) -> Typed {
        self.check_model(model);
        self.under += 1;
        let typed = self.infer(value);
        self.under -= 1;
        typed
    }

    fn infer_field(&mut self, base: &Expr, field: &Name) -> Typed {
        match &base.kind {
            ExprKind::Name(table) => self.infer_column(table, base.span, field),
            ExprKind::Call(form, arguments) if field.node == "at" => {
                self.infer_place_of(form, arguments, base.span)
            }
            _ => {
                self.infer(base);
                self.wrong(error::no_columns(base.span, field))
            }
        }
    }

    fn infer_column(&mut self, table: &SmolStr, span: Span, field: &Name) -> Typed {
        let found = self.environment.latest(Space::Value, table);
        let meaning = found.map(|id| {
            self.rest_on(id, span);
            self.environment.binding(id).used.set(true);
            self.environment.binding(id).meaning.clone()
        });
        match meaning {
            Some(Meaning::Table(table)) => {
                let Some(column) = table.columns.iter().find(|column| column.name == field.node) else {
                    let names: Vec<&str> = table.columns.iter().map(|column| column.name.as_str()).collect();
                    return self.wrong(error::unknown_column(field, &table.read.name.node, &names));
                };
                let instance = Instance::new(&mut self.unifier, &column.scheme.bound);
                let typed = column.scheme.typed.clone();
                let form = self.with_open_angle(instance.form(&typed.form));
                Typed { form, ..typed }
            }
            Some(Meaning::Broken) => Typed::unknown(),
            None if self.lost.contains(table) => Typed::unknown(),
            None if library::value(table).is_none() && self.local(table).is_none() => {
                let diagnostic = self.unknown_name(table, span);
                self.wrong(diagnostic)
            }
            Some(_) | None => self.wrong(error::no_columns(span, field)),
        }
    }

    pub(super) fn local(&self, name: &str) -> Option<&super::Local> {
        self.locals.iter().rev().find(|local| local.name == name)
    }
}

/// A power of the unit of an argument in which a result can be shown:
/// `square(2 km)` in `km^2`.
pub(super) fn unit_like(form: &Form, unit: &Measure) -> Option<Arc<Measure>> {
    let (symbol, old) = simple_power(&unit.text)?;
    let (key, own) = unit.form.parts().find(|(key, _)| *key != COMOVING)?;
    let ratio = form::divide(form.exponent(key), own);
    let new = ratio * old;
    let same = form
        .per(&unit.form.power(ratio))
        .without(|key| key == COMOVING || key == ANGLE || key >= form::FIRST_BOUND);
    (same.is_number() && new.is_integer())
        .then(|| power_of(unit, symbol, old, *new.numer()))
        .flatten()
}

/// Whether this is a written part, `3%`, which is no redshift.
fn is_part(expr: &Expr) -> bool {
    literal_unit(expr).is_some()
}

/// A unit that is one symbol to a whole power: `km`, `km^2`.
fn simple_power(text: &str) -> Option<(&str, i32)> {
    let (symbol, power) = text.split_once('^').unwrap_or((text, "1"));
    let is_symbol = !symbol.is_empty() && symbol.chars().all(char::is_alphabetic);
    is_symbol
        .then(|| power.parse().ok().map(|power| (symbol, power)))
        .flatten()
}

/// A unit, which is `symbol` to the power `old`, to the power `new` instead.
fn power_of(unit: &Measure, symbol: &str, old: i32, new: i32) -> Option<Arc<Measure>> {
    if old == 0 || new == 0 {
        return None;
    }
    let text = if new == 1 {
        symbol.into()
    } else {
        format!("{symbol}^{new}").into()
    };
    let factor = libm::pow(unit.factor, f64::from(new) / f64::from(old));
    let form = unit.form.power(Ratio::new(new, old));
    Some(Arc::new(Measure {
        text,
        factor,
        form,
        ..unit.clone()
    }))
}

/// Whether this is the written number one.
fn is_one(expr: &Expr) -> bool {
    matches!(&expr.kind, ExprKind::Quantity(quantity) if quantity.unit.is_none() && quantity.number.value == 1.0)
}

/// Whether a step is in dex.
pub fn is_dex(step: &Expr) -> bool {
    literal_unit(step).is_some_and(|unit| unit.factors.len() == 1 && unit.factors[0].name.node == "dex")
}

fn literal_unit(expr: &Expr) -> Option<&ast::Unit> {
    match &expr.kind {
        ExprKind::Quantity(quantity) => quantity.unit.as_ref(),
        ExprKind::Unary(op, operand) if op.node != UnaryOp::Not => literal_unit(operand),
        _ => None,
    }
}

/// The place of a number written without a unit.
fn bare_literal(expr: &Expr) -> Option<Span> {
    match &expr.kind {
        ExprKind::Quantity(quantity) if quantity.unit.is_none() => Some(expr.span),
        ExprKind::Unary(op, operand) if op.node != UnaryOp::Not => bare_literal(operand),
        _ => None,
    }
}

/// Decimal places of an exponent that is still taken as a fraction.
const MAX_DECIMALS: i32 = 4;

/// The exponent as a fraction, if it is written as one: `2`, `-1/2`, `0.5`.
pub fn written_rational(expr: &Expr) -> Option<Exponent> {
    match &expr.kind {
        ExprKind::Quantity(quantity) if quantity.unit.is_none() && quantity.number.uncertainty.is_none() => {
            rational_of(&quantity.number)
        }
        ExprKind::Group(inner) => written_rational(inner),
        ExprKind::Unary(op, inner) => match op.node {
            UnaryOp::Negate => written_rational(inner).map(|value| -value),
            UnaryOp::Plus => written_rational(inner),
            UnaryOp::Not => None,
        },
        ExprKind::Binary(op, left, right) if op.node == BinaryOp::Divide => {
            let (left, right) = (written_rational(left)?, written_rational(right)?);
            (!form::is_zero(right)).then(|| form::divide(left, right))
        }
        _ => None,
    }
}

fn rational_of(number: &ast::Number) -> Option<Exponent> {
    let decimals = (-number.last_digit).clamp(0, MAX_DECIMALS + 1);
    if decimals > MAX_DECIMALS || number.value.abs() > 1e4 {
        return None;
    }
    let scale = 10i32.pow(decimals as u32);
    let scaled = number.value * f64::from(scale);
    Some(Ratio::new(scaled.round() as i32, scale))
}
