//! Expressions to nodes.

use super::{At, Lowering, MAX_CALLS, MORE_STACK, RED_ZONE, Scope};
use crate::ast::{
    self, Argument, BinaryOp, Bracket, Conversion, Expr, ExprKind, LogicalOp, Name, Number, UnaryOp,
};
use crate::check::call::{self, SeriesFunction};
use crate::check::infer::{is_dex, written_rational};
use crate::check::{BindingId, Meaning, Note, Place, Space, library};
use crate::program::{NodeId, Op, RangeStep, Reduction};
use crate::source::Span;
use num_rational::Ratio;
use std::sync::Arc;
use zij_stdlib::catalogue::{Definition, Entry};

impl Lowering<'_> {
    pub(super) fn lower(&mut self, expr: &Expr) -> NodeId {
        if self.too_large.is_some() {
            return 0;
        }
        stacker::maybe_grow(RED_ZONE, MORE_STACK, || self.lower_kind(expr))
    }

    fn lower_kind(&mut self, expr: &Expr) -> NodeId {
        let span = expr.span;
        match &expr.kind {
            ExprKind::Quantity(quantity) => self.literal(&quantity.number, quantity.unit.as_ref(), span),
            ExprKind::Quantities(numbers, unit) => {
                let factor = self.checker.size_of(unit);
                let values = numbers.iter().map(|number| number.value * factor).collect();
                self.emit(Op::List(Arc::new(values)), span)
            }
            ExprKind::Infinity => self.constant(f64::INFINITY, span),
            ExprKind::Name(name) => self.lower_name(name, span),
            ExprKind::Call(name, arguments) => self.lower_call(name, arguments, span),
            ExprKind::Field(base, field) => self.lower_field(base, field, span),
            ExprKind::Unary(op, operand) => {
                let node = self.lower(operand);
                match op.node {
                    UnaryOp::Negate => self.negate(node, span),
                    UnaryOp::Plus => node,
                    UnaryOp::Not => self.emit(Op::Not(node), span),
                }
            }
            ExprKind::Binary(op, left, right) => self.lower_binary(op.node, left, right, span),
            ExprKind::Comparison(first, rest) => self.lower_comparison(first, rest, span),
            ExprKind::Logical(op, left, right) => {
                let (a, b) = (self.lower(left), self.lower(right));
                self.emit(Op::Logical(op.node, a, b), span)
            }
            ExprKind::If(condition, yes, no) => {
                let (c, a, b) = (self.lower(condition), self.lower(yes), self.lower(no));
                self.emit(Op::Select(c, a, b), span)
            }
            ExprKind::Series(elements) => {
                let nodes = elements.iter().map(|element| self.lower(element)).collect();
                self.emit(Op::Gather(nodes), span)
            }
            ExprKind::Range(range) => self.lower_range(range, span),
            ExprKind::Express(value, bracket) => self.lower_bracket(value, bracket),
            ExprKind::Under(value, model) => {
                let context = self.context_of(model);
                let outer = std::mem::replace(&mut self.scope.context, context);
                let node = self.lower(value);
                self.scope.context = outer;
                node
            }
            ExprKind::Group(inner) => self.lower(inner),
            ExprKind::Broken => self.missing(span),
        }
    }

    fn note(&self, span: Span) -> Option<&Note> {
        self.checker.notes.get(&Place {
            source: self.scope.source,
            span,
        })
    }

    fn literal(&mut self, number: &Number, unit: Option<&ast::Unit>, span: Span) -> NodeId {
        let factor = match unit {
            Some(unit) => self.checker.size_of(unit),
            None => match self.note(span) {
                Some(Note::Unit(measure)) => measure.factor,
                Some(_) | None => 1.0,
            },
        };
        self.constant(number.value * factor, span)
    }

    fn negate(&mut self, node: NodeId, span: Span) -> NodeId {
        let constant = match self.builders[self.level].block.nodes[node as usize].op {
            Op::Constant(value) => Some(value),
            _ => None,
        };
        match constant {
            Some(value) => self.constant(-value, span),
            None => self.emit(Op::Negate(node), span),
        }
    }

    fn spaces(&self) -> [Space; 2] {
        if self.scope.in_library {
            [Space::LibraryValue, Space::LibraryFunction]
        } else {
            [Space::Value, Space::Function]
        }
    }

    fn find(&self, space: Space, name: &str) -> Option<BindingId> {
        self.checker.environment.find(space, name, self.scope.limit)
    }

    fn lower_name(&mut self, name: &str, span: Span) -> NodeId {
        if let Some(at) = self.local(name) {
            return self.import(at);
        }
        if let Some(node) = self.bare_column(name, span) {
            return node;
        }
        if let Some(id) = self.find(self.spaces()[0], name) {
            let at = self.value_of(id);
            return self.import(at);
        }
        if let Some(entry) = library::value(name) {
            return self.entry_value(entry, span);
        }
        match self.find(Space::LibraryValue, library::canonical(name)) {
            Some(id) => {
                let at = self.value_of(id);
                self.import(at)
            }
            None => self.missing(span),
        }
    }

    pub(super) fn entry_value(&mut self, entry: &'static Entry, span: Span) -> NodeId {
        match entry.definition {
            Definition::Constant(value, _) => self.constant(value, span),
            Definition::ModelValue(_) => {
                let model = self.model_in_force();
                self.emit(Op::Call(entry, Some(model), Vec::new()), span)
            }
            Definition::Function(_) | Definition::Cosmology(_) => self.missing(span),
        }
    }

    pub(super) fn model_in_force(&mut self) -> NodeId {
        let at = self.contexts[self.scope.context];
        self.import(at)
    }

    fn lower_call(&mut self, name: &Name, arguments: &[Argument], span: Span) -> NodeId {
        if let Some(id) = self.find(self.spaces()[1], &name.node) {
            return self.lower_user_call(id, arguments, span);
        }
        if let Some(form) = call::binding_form(&name.node, arguments) {
            return self.lower_binding_form(form, arguments, false, span);
        }
        if let Some(function) = call::series_function(&name.node) {
            return self.lower_series_function(function, arguments, span);
        }
        if let Some(entry) = library::function(&name.node) {
            return self.lower_library_call(entry, arguments, span);
        }
        match self.find(Space::LibraryFunction, library::canonical(&name.node)) {
            Some(id) => self.lower_user_call(id, arguments, span),
            None => self.missing(span),
        }
    }

    fn lower_library_call(&mut self, entry: &'static Entry, arguments: &[Argument], span: Span) -> NodeId {
        let names: Vec<&str> = entry.arguments.iter().map(|argument| argument.name).collect();
        let placed = in_order(&names, arguments);
        let mut nodes = Vec::with_capacity(placed.len());
        for (place, value) in placed.into_iter().enumerate() {
            let default = entry.arguments[place].default;
            nodes.push(match (value, default) {
                (Some(value), _) => self.settled_argument(value),
                (None, Some(default)) if default.is_nan() => break,
                (None, default) => self.constant(default.unwrap_or(f64::NAN), span),
            });
        }
        let model = match entry.definition {
            Definition::Cosmology(_) | Definition::ModelValue(_) => Some(self.model_in_force()),
            Definition::Function(_) | Definition::Constant(..) => None,
        };
        self.emit(Op::Call(entry, model, nodes), span)
    }

    /// An argument of the library, with its h settled.
    fn settled_argument(&mut self, value: &Expr) -> NodeId {
        let node = self.lower(value);
        match self.note(value.span) {
            Some(Note::SettledH(power)) => {
                let power = *power;
                let h = self.little_h(value.span);
                self.times_power(node, h, power, value.span)
            }
            Some(_) | None => node,
        }
    }

    fn little_h(&mut self, span: Span) -> NodeId {
        match library::value("h") {
            Some(entry) => self.entry_value(entry, span),
            None => self.missing(span),
        }
    }

    /// `node * base^power`
    fn times_power(&mut self, node: NodeId, base: NodeId, power: Ratio<i32>, span: Span) -> NodeId {
        if *power.numer() == 0 {
            return node;
        }
        if power == Ratio::new_raw(-1, 1) {
            return self.emit(Op::Binary(BinaryOp::Divide, node, base), span);
        }
        let raised = self.raise(base, power, span);
        self.emit(Op::Binary(BinaryOp::Multiply, node, raised), span)
    }

    fn raise(&mut self, base: NodeId, power: Ratio<i32>, span: Span) -> NodeId {
        match (*power.numer(), *power.denom()) {
            (1, 1) => base,
            (power, 1) => self.emit(Op::PowerInteger(base, power), span),
            (numerator, denominator) => {
                let exponent = self.constant(f64::from(numerator) / f64::from(denominator), span);
                self.emit(Op::Binary(BinaryOp::Power, base, exponent), span)
            }
        }
    }

    fn lower_user_call(&mut self, id: BindingId, arguments: &[Argument], span: Span) -> NodeId {
        let binding = self.checker.environment.binding(id);
        let Meaning::Function(function) = &binding.meaning else {
            return self.missing(span);
        };
        let function = Arc::clone(function);
        let (source, in_library) = (binding.place.source, binding.space == Space::LibraryFunction);
        if self.calls >= MAX_CALLS {
            self.too_large = Some((self.scope.source, span));
            return 0;
        }
        let names: Vec<&str> = function
            .parameters
            .iter()
            .map(|parameter| parameter.name.node.as_str())
            .collect();
        let values: Vec<Option<At>> = in_order(&names, arguments)
            .into_iter()
            .map(|value| {
                value.map(|value| At {
                    level: self.level,
                    node: self.lower(value),
                })
            })
            .collect();
        let blame = self
            .scope
            .blame
            .or(in_library.then_some((self.scope.source, span)));
        let scope = Scope {
            limit: id,
            source,
            base: self.locals.len(),
            in_library,
            blame,
            table: None,
            context: self.scope.context,
        };
        let outer = std::mem::replace(&mut self.scope, scope);
        let depth = self.locals.len();
        self.calls += 1;
        for (parameter, value) in function.parameters.iter().zip(values) {
            let at = value.unwrap_or_else(|| {
                let node = parameter
                    .default
                    .as_ref()
                    .map_or(0, |default| self.lower(default));
                At {
                    level: self.level,
                    node,
                }
            });
            self.locals.push((parameter.name.node.clone(), at));
        }
        let given = self.locals[depth..].iter().map(|(_, at)| at.node).collect();
        let call = (id, given, self.scope.context, self.level, blame);
        let node = match self.written_out.get(&call) {
            Some(node) => *node,
            None => {
                let node = self.with_wheres(&function.definition.value, &function.definition.wheres);
                self.builders[self.level].written_out.push(call.clone());
                self.written_out.insert(call, node);
                node
            }
        };
        self.calls -= 1;
        self.locals.truncate(depth);
        self.scope = outer;
        node
    }

    fn lower_series_function(
        &mut self,
        function: SeriesFunction,
        arguments: &[Argument],
        span: Span,
    ) -> NodeId {
        let nodes: Vec<NodeId> = arguments
            .iter()
            .filter_map(|argument| match argument {
                Argument::Positional(value) | Argument::Named(_, value) => Some(self.lower(value)),
                Argument::Equation(..) => None,
            })
            .collect();
        let reduction = match function {
            SeriesFunction::Sum => Reduction::Sum,
            SeriesFunction::Mean => Reduction::Mean,
            SeriesFunction::Median => Reduction::Median,
            SeriesFunction::Std => Reduction::Std,
            SeriesFunction::Count => self.count_of(arguments),
            SeriesFunction::Min if nodes.len() > 1 => {
                return self.extreme(ast::CompareOp::LessOrEqual, &nodes, span);
            }
            SeriesFunction::Max if nodes.len() > 1 => {
                return self.extreme(ast::CompareOp::GreaterOrEqual, &nodes, span);
            }
            SeriesFunction::Min => Reduction::Min,
            SeriesFunction::Max => Reduction::Max,
            SeriesFunction::Sort => return self.emit(Op::Sort(nodes[0]), span),
            SeriesFunction::Quantile => Reduction::Quantile,
        };
        self.emit(Op::Reduce(reduction, nodes), span)
    }

    /// `count` of a condition counts where it holds.
    fn count_of(&self, arguments: &[Argument]) -> Reduction {
        let is_truth = |expr: &Expr| matches!(expr.kind, ExprKind::Comparison(..) | ExprKind::Logical(..));
        let truth = arguments.iter().any(|argument| match argument {
            Argument::Positional(value) | Argument::Named(_, value) => is_truth(ungrouped(value)),
            Argument::Equation(..) => false,
        });
        if truth {
            Reduction::CountTrue
        } else {
            Reduction::Count
        }
    }

    fn extreme(&mut self, op: ast::CompareOp, nodes: &[NodeId], span: Span) -> NodeId {
        nodes[1..].iter().fold(nodes[0], |best, node| {
            let better = self.emit(Op::Compare(op, best, *node), span);
            self.emit(Op::Select(better, best, *node), span)
        })
    }

    fn lower_field(&mut self, base: &Expr, field: &Name, span: Span) -> NodeId {
        match &base.kind {
            ExprKind::Call(name, arguments) => match call::binding_form(&name.node, arguments) {
                Some(form) => self.lower_binding_form(form, arguments, true, span),
                None => self.missing(span),
            },
            ExprKind::Name(table) => match self.find(Space::Value, table) {
                Some(id) => {
                    let node = self.column(id, &field.node, span);
                    self.import(At { level: 0, node })
                }
                None => self.missing(span),
            },
            _ => self.missing(span),
        }
    }

    /// A column of a table, with the rows that `only` keeps; always in the
    /// main block.
    fn column(&mut self, id: BindingId, field: &str, span: Span) -> NodeId {
        let Meaning::Table(table) = &self.checker.environment.binding(id).meaning else {
            return self.missing(span);
        };
        let table = Arc::clone(table);
        let Some(place) = table.columns.iter().position(|column| column.name == field) else {
            return self.missing(span);
        };
        let level = std::mem::replace(&mut self.level, 0);
        let raw = self.raw_column(id, place, span);
        let node = match &table.read.only {
            None => raw,
            Some(only) => {
                let source = self.checker.environment.binding(id).place.source;
                let condition = self.within(id, source, |this| {
                    this.scope.table = Some(id);
                    this.lower(only)
                });
                self.emit(Op::Filter(raw, condition), span)
            }
        };
        self.level = level;
        node
    }

    /// A column that stands bare inside `only`.
    fn bare_column(&mut self, name: &str, span: Span) -> Option<NodeId> {
        let id = self.scope.table?;
        let Meaning::Table(table) = &self.checker.environment.binding(id).meaning else {
            return None;
        };
        let place = table.columns.iter().position(|column| column.name == name)?;
        Some(self.raw_column(id, place, span))
    }

    fn raw_column(&mut self, id: BindingId, place: usize, span: Span) -> NodeId {
        let next = self.columns.len() as u32;
        let number = *self.columns.entry((id, place)).or_insert(next);
        self.emit(Op::Column(number), span)
    }

    fn lower_binary(&mut self, op: BinaryOp, left: &Expr, right: &Expr, span: Span) -> NodeId {
        let a = self.lower(left);
        if op == BinaryOp::Power
            && let Some(power) = written_rational(right)
        {
            if *power.numer() == 0 {
                return self.constant(1.0, span);
            }
            return self.raise(a, power, span);
        }
        let b = self.lower(right);
        self.emit(Op::Binary(op, a, b), span)
    }

    fn lower_comparison(
        &mut self,
        first: &Expr,
        rest: &[(crate::source::Spanned<ast::CompareOp>, Expr)],
        span: Span,
    ) -> NodeId {
        let mut left = self.lower_compared(first);
        let mut all = None;
        for (op, right) in rest {
            let right = self.lower_compared(right);
            let one = self.emit(Op::Compare(op.node, left, right), span);
            all = Some(match all {
                None => one,
                Some(before) => self.emit(Op::Logical(LogicalOp::And, before, one), span),
            });
            left = right;
        }
        all.unwrap_or(left)
    }

    /// A written ∞ is beyond every number, and nothing that never comes.
    fn lower_compared(&mut self, expr: &Expr) -> NodeId {
        let (inner, sign) = match &expr.kind {
            ExprKind::Unary(op, inner) if op.node == UnaryOp::Negate => (&**inner, -1.0),
            _ => (expr, 1.0),
        };
        match inner.kind {
            ExprKind::Infinity => self.constant(sign * f64::MAX, expr.span),
            _ => self.lower(expr),
        }
    }

    fn lower_range(&mut self, range: &ast::Range, span: Span) -> NodeId {
        let (from, to) = (self.lower(&range.from), self.lower(&range.to));
        let step = match &range.step {
            ast::Step::None => return self.missing(span),
            ast::Step::Every(step) if is_dex(step) => RangeStep::EveryDex(self.lower(step)),
            ast::Step::Every(step) => RangeStep::Every(self.lower(step)),
            ast::Step::Steps(count) => RangeStep::Steps(self.lower(count)),
            ast::Step::LogSteps(count) => RangeStep::LogSteps(self.lower(count)),
        };
        self.emit(Op::Range(from, to, step), span)
    }

    fn lower_bracket(&mut self, value: &Expr, bracket: &Bracket) -> NodeId {
        let node = self.lower(value);
        let note = self.note(bracket.span).cloned();
        match (&bracket.conversion, note) {
            (Some(Conversion::At(z)), Some(Note::Redshift(power))) => {
                let z = self.lower(z);
                let one = self.constant(1.0, bracket.span);
                let stretch = self.emit(Op::Binary(BinaryOp::Add, one, z), bracket.span);
                self.times_power(node, stretch, power, bracket.span)
            }
            (Some(Conversion::ForH(span)), Some(Note::LittleH(power))) => {
                let h = self.little_h(*span);
                self.times_power(node, h, power, bracket.span)
            }
            (Some(Conversion::ForGivenH(h)), Some(Note::LittleH(power))) => {
                let h = self.lower(h);
                self.times_power(node, h, power, bracket.span)
            }
            (Some(Conversion::Via(names)), Some(Note::ToMagnitude)) => {
                let zero = self.via(&names[0]);
                self.magnitude_of(node, zero, bracket.span)
            }
            (Some(Conversion::Via(names)), Some(Note::FromMagnitude)) => {
                let zero = self.via(&names[0]);
                self.flux_of(node, zero, bracket.span)
            }
            (Some(Conversion::Via(names)), Some(Note::Bridge(sign, powers))) => {
                self.cross(node, sign, names, &powers, bracket.span)
            }
            (Some(Conversion::Today(_) | Conversion::ByHand(_)) | None, _) | (Some(_), _) => node,
        }
    }

    /// A constant of a bridge: the library's, or else a value of the sheet.
    fn via(&mut self, name: &Name) -> NodeId {
        match library::value(&name.node) {
            Some(entry) => self.entry_value(entry, name.span),
            None => self.lower_name(&name.node, name.span),
        }
    }

    /// `-2.5 log10(flux/zero)`: Pogson 1856, MNRAS 17, 12.
    fn magnitude_of(&mut self, flux: NodeId, zero: NodeId, span: Span) -> NodeId {
        let ratio = self.emit(Op::Binary(BinaryOp::Divide, flux, zero), span);
        let Some(entry) = library::function("log10") else {
            return self.missing(span);
        };
        let log = self.emit(Op::Call(entry, None, vec![ratio]), span);
        let factor = self.constant(-2.5, span);
        self.emit(Op::Binary(BinaryOp::Multiply, factor, log), span)
    }

    /// `zero 10^(-0.4 m)`
    fn flux_of(&mut self, magnitude: NodeId, zero: NodeId, span: Span) -> NodeId {
        let (ten, factor) = (self.constant(10.0, span), self.constant(-0.4, span));
        let exponent = self.emit(Op::Binary(BinaryOp::Multiply, factor, magnitude), span);
        let ratio = self.emit(Op::Binary(BinaryOp::Power, ten, exponent), span);
        self.emit(Op::Binary(BinaryOp::Multiply, zero, ratio), span)
    }

    fn cross(
        &mut self,
        node: NodeId,
        sign: i32,
        names: &[Name],
        powers: &[Ratio<i32>],
        span: Span,
    ) -> NodeId {
        let constants: Vec<NodeId> = names.iter().map(|name| self.via(name)).collect();
        let mut product = self.raise(node, Ratio::new_raw(sign, 1), span);
        for (constant, power) in constants.into_iter().zip(powers) {
            product = self.times_power(product, constant, *power, span);
        }
        product
    }
}

/// Arguments in the order of the parameters; the checker has seen that they
/// fit.
fn in_order<'a>(names: &[&str], arguments: &'a [Argument]) -> Vec<Option<&'a Expr>> {
    let mut placed = vec![None; names.len()];
    let mut next = 0;
    for argument in arguments {
        let (place, value) = match argument {
            Argument::Positional(value) => (next, value),
            Argument::Named(word, value) => (
                names.iter().position(|name| *name == word.node).unwrap_or(next),
                value,
            ),
            Argument::Equation(..) => continue,
        };
        next = place + 1;
        if let Some(slot) = placed.get_mut(place) {
            *slot = Some(value);
        }
    }
    placed
}

fn ungrouped(expr: &Expr) -> &Expr {
    match &expr.kind {
        ExprKind::Group(inner) => ungrouped(inner),
        _ => expr,
    }
}
