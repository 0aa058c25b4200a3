//! Binding forms: the body becomes a block of its own.

use super::{At, Builder, Lowering};
use crate::ast::{Argument, BinaryOp, Expr, ExprKind, Name};
use crate::check::call::{BindingForm, Right, binding_parts};
use crate::program::{Bind, BlockId, Form, NodeId, Op};
use crate::source::Span;

impl Lowering<'_> {
    /// A binding form, or the place (`.at`) it found.
    pub(super) fn lower_binding_form(
        &mut self,
        form: BindingForm,
        arguments: &[Argument],
        place: bool,
        span: Span,
    ) -> NodeId {
        let Some(parts) = binding_parts(arguments) else {
            return self.missing(span);
        };
        let (from, to) = self.lower_bounds(form, parts.over);
        let (body, captures) = self.body(parts.variable, |this| {
            let left = this.lower(&parts.body);
            match parts.right {
                None => left,
                Some(Right(right)) => {
                    let right = this.lower(right);
                    this.emit(Op::Binary(BinaryOp::Subtract, left, right), parts.body.span)
                }
            }
        });
        let form = match (form, place) {
            (BindingForm::Integral, _) => Form::Integral,
            (BindingForm::Sum, _) => Form::Sum,
            (BindingForm::Root, _) => Form::Root,
            (BindingForm::Maximum, false) => Form::Maximum,
            (BindingForm::Maximum, true) => Form::MaximumAt,
            (BindingForm::Minimum, false) => Form::Minimum,
            (BindingForm::Minimum, true) => Form::MinimumAt,
            (BindingForm::Derivative, _) => Form::Derivative,
        };
        self.emit(
            Op::Bind(Box::new(Bind {
                form,
                body,
                captures,
                from,
                to,
            })),
            span,
        )
    }

    fn lower_bounds(&mut self, form: BindingForm, over: &Expr) -> (NodeId, NodeId) {
        match &over.kind {
            ExprKind::Range(range) if form != BindingForm::Sum => {
                (self.lower(&range.from), self.lower(&range.to))
            }
            _ => {
                let node = self.lower(over);
                (node, node)
            }
        }
    }

    /// A body of one variable, and what it captures of the block around it.
    pub(super) fn body(
        &mut self,
        variable: &Name,
        work: impl FnOnce(&mut Self) -> NodeId,
    ) -> (BlockId, Vec<NodeId>) {
        let outer = self.level;
        self.builders.push(Builder::new(outer, 1));
        self.level = self.builders.len() - 1;
        let input = self.emit(Op::Input(0), variable.span);
        self.locals.push((
            variable.node.clone(),
            At {
                level: self.level,
                node: input,
            },
        ));
        let result = work(self);
        self.locals.pop();
        self.level = outer;
        let Some(mut builder) = self.builders.pop() else {
            return (0, Vec::new());
        };
        for key in &builder.remembered {
            self.memo.remove(key);
        }
        for call in &builder.written_out {
            self.written_out.remove(call);
        }
        builder.block.result = result;
        builder.block.inputs = 1 + builder.captures.len() as u32;
        self.program.bodies.push(builder.block);
        ((self.program.bodies.len() - 1) as BlockId, builder.captures)
    }
}
