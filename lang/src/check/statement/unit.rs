//! Units that a sheet defines, and the things it counts.

use super::super::environment::{Space, UserUnit};
use super::super::form::Form;
use super::super::typed::{Measure, Typed};
use super::super::{Checker, error, library};
use crate::ast::{self, BinaryOp, Bracket, Expr, ExprKind, Name};
use smallvec::SmallVec;
use smol_str::SmolStr;
use zij_stdlib::catalogue::Definition;
use zij_stdlib::dimension::LENGTH;
use zij_stdlib::units;

impl Checker {
    pub(in crate::check) fn unit_statement(&mut self, name: &Name, value: &Expr) {
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
    pub(in crate::check) fn unit_size(&mut self, value: &Expr, typed: &Typed) -> Option<(f64, Measure)> {
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
    pub(in crate::check) fn fold(&self, expr: &Expr) -> Option<f64> {
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

    pub(in crate::check) fn may_name_unit(&mut self, name: &Name) -> bool {
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

    pub(in crate::check) fn tally_statement(&mut self, name: &Name) {
        if self.at_prompt && self.environment.tally(&name.node).is_some() {
            return;
        }
        if self.may_name_unit(name) {
            self.measures.clear();
            let place = self.place(name.span);
            self.environment.tallies.push((name.node.clone(), place));
        }
    }
}
