//! Claims: what is quoted must be of the dimension and frame of what is
//! computed, and must carry the digits that its verdict needs.

use super::form::Form;
use super::statement::{ClaimTask, Face, Task};
use super::typed::{Kind, Measure, Typed};
use super::{Checker, error};
use crate::ast::{self, Assertion, Expr, ExprKind, Tolerance, UnaryOp};
use crate::source::Span;
use std::sync::Arc;

/// A number as written, with its sign.
pub struct Written<'a> {
    /// Its sign.
    pub sign: f64,
    /// The number.
    pub number: &'a ast::Number,
    /// Its unit.
    pub unit: Option<&'a ast::Unit>,
}

/// The written number that an expression is, if it is one.
#[must_use]
pub fn written(expr: &Expr) -> Option<Written<'_>> {
    match &expr.kind {
        ExprKind::Quantity(quantity) => Some(Written {
            sign: 1.0,
            number: &quantity.number,
            unit: quantity.unit.as_ref(),
        }),
        ExprKind::Group(inner) => written(inner),
        ExprKind::Unary(op, inner) if op.node == UnaryOp::Negate => {
            written(inner).map(|it| Written { sign: -it.sign, ..it })
        }
        _ => None,
    }
}

/// Whether a tolerance is a fraction of the quoted value.
#[must_use]
pub fn is_relative(amount: &Expr) -> bool {
    let unit = written(amount).and_then(|it| it.unit);
    unit.is_some_and(|unit| matches!(unit.factors.as_slice(), [one] if matches!(one.name.node.as_str(), "%" | "percent" | "ppm")))
}

impl Checker {
    pub(super) fn claim_statement(&mut self, label: Option<ast::Text>, claim: ast::Claim, span: Span) {
        let face = self.check_claim(&claim);
        let Some(face) = face else { return };
        let text_span = claim_span(&claim, span);
        let task = ClaimTask {
            label: label.map(|text| text.node),
            face: self.keep_face(face),
            place: self.place(span),
            text: self.text(text_span).into(),
            claim: Arc::new(claim),
            limit: self.environment.next(),
            rests_on: std::mem::take(&mut self.rests_on),
        };
        self.tasks.push(Task::Claim(task));
    }

    fn check_claim(&mut self, claim: &ast::Claim) -> Option<Typed> {
        let subject = self.infer(&claim.subject);
        let Some(assertion) = &claim.assertion else {
            return self.check_comparison(claim, &subject);
        };
        let quoted = self.check_assertion(claim, assertion, &subject);
        if subject.kind == Kind::Truth {
            self.report(error::truth_as_quantity(claim.subject.span));
            return None;
        }
        self.check_tolerance(claim, &subject);
        let unit = quoted?.or_else(|| subject.unit.clone());
        (!subject.is_unknown()).then(|| Typed { unit, ..subject })
    }

    fn check_comparison(&mut self, claim: &ast::Claim, subject: &Typed) -> Option<Typed> {
        if let Some(within) = &claim.within {
            self.report(error::within_without_is(tolerance_span(within)));
            return None;
        }
        if subject.kind == Kind::Quantity {
            self.report(error::claim_without_assertion(claim.subject.span));
            return None;
        }
        (!subject.is_unknown()).then(|| subject.clone())
    }

    /// The unit of what is quoted; `None` after an error.
    #[allow(clippy::option_option)] // An error, no unit, or a unit.
    fn check_assertion(
        &mut self,
        claim: &ast::Claim,
        assertion: &Assertion,
        subject: &Typed,
    ) -> Option<Option<Arc<Measure>>> {
        match assertion {
            Assertion::Is(quoted) | Assertion::About(quoted) => {
                if written(quoted).is_none() && claim.within.is_none() {
                    self.infer(quoted);
                    self.report(error::claim_needs_number(quoted.span));
                    return None;
                }
                self.check_quoted(claim, &[quoted], subject)
            }
            Assertion::Above(quoted)
            | Assertion::Below(quoted)
            | Assertion::AtLeast(quoted)
            | Assertion::AtMost(quoted) => self.check_quoted(claim, &[quoted], subject),
            Assertion::Between(low, high) => self.check_quoted(claim, &[low, high], subject),
            Assertion::Never(_) => Some(None),
        }
    }

    #[allow(clippy::option_option)] // As above.
    fn check_quoted(
        &mut self,
        claim: &ast::Claim,
        quoted: &[&Expr],
        subject: &Typed,
    ) -> Option<Option<Arc<Measure>>> {
        let typed = self.infer_with_shared_unit(quoted);
        let mut sound = true;
        for expr in quoted.iter().filter(|expr| is_list(expr)) {
            self.report(error::quotes_many(expr.span));
            sound = false;
        }
        for (expr, typed) in quoted.iter().zip(&typed) {
            if typed.is_unknown() || subject.kind != Kind::Quantity {
                sound = sound && !typed.is_unknown();
                continue;
            }
            if self.unifier.unify(&subject.form, &typed.form).is_err() {
                let diagnostic = self.unlike_claim((&claim.subject, subject), (expr, typed));
                self.report(diagnostic);
                sound = false;
            }
        }
        sound.then(|| typed.iter().rev().find_map(|one| one.unit.clone()))
    }

    fn check_tolerance(&mut self, claim: &ast::Claim, subject: &Typed) {
        match &claim.within {
            None => {}
            Some(Tolerance::Sigma(count)) => {
                self.infer_number(count, "how many sigma");
                let quoted = match &claim.assertion {
                    Some(Assertion::Is(quoted) | Assertion::About(quoted)) => written(quoted),
                    Some(_) | None => None,
                };
                if quoted.is_none_or(|quoted| quoted.number.uncertainty.is_none()) {
                    self.report(error::sigma_of_nothing(count.span));
                }
            }
            Some(Tolerance::Amount(amount)) => {
                let typed = self.infer_quantity(amount);
                if typed.is_unknown() || subject.is_unknown() || is_relative(amount) {
                    return;
                }
                if self.unifier.unify(&subject.form, &typed.form).is_err() {
                    let words = [self.describe(&subject.form), self.describe(&typed.form)];
                    let plain = self.settled(&typed.form) == Form::number();
                    self.report(error::unlike_tolerance(
                        amount.span,
                        claim.subject.span,
                        &words,
                        plain,
                    ));
                }
            }
        }
    }

    /// How something will be shown, once the whole sheet is known.
    pub(super) fn keep_face(&mut self, typed: Typed) -> Face {
        let form = self.unifier.settled_afresh(&typed.form);
        for key in form.unknowns().collect::<Vec<_>>() {
            self.unifier.keep(key);
        }
        Face {
            form,
            unit: typed.unit,
            truth: typed.kind == Kind::Truth,
        }
    }
}

/// Whether an expression is written as a series.
fn is_list(expr: &Expr) -> bool {
    match &expr.kind {
        ExprKind::Group(inner) => is_list(inner),
        ExprKind::Series(_) | ExprKind::Quantities(..) => true,
        _ => false,
    }
}

fn tolerance_span(tolerance: &Tolerance) -> Span {
    match tolerance {
        Tolerance::Amount(expr) | Tolerance::Sigma(expr) => expr.span,
    }
}

/// The text of the claim without its label.
fn claim_span(claim: &ast::Claim, statement: Span) -> Span {
    Span {
        start: claim.subject.span.start,
        end: statement.end,
    }
}
