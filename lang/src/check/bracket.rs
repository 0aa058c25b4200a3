//! Brackets: in what unit a value is expressed, and what else a bracket does.

use super::form::{self, Exponent, FIRST_BOUND, FIRST_TALLY, Form, Key};
use super::infer::{ANGLE, COMOVING, LITTLE_H, MAGNITUDE};
use super::typed::{Measure, Typed};
use super::unify::Sort;
use super::{Checker, Note, Space, error, library};
use crate::ast::{Bracket, Conversion, Expr, Name};
use num_rational::Ratio;
use std::sync::Arc;
use zij_stdlib::dimension::Generator;

/// What a bracket was found to do.
pub(super) struct Bracketed<'a> {
    pub value: &'a Expr,
    pub typed: Typed,
    pub bracket: &'a Bracket,
    pub measure: Arc<Measure>,
}

impl Checker {
    pub(super) fn infer_bracket(&mut self, value: &Expr, bracket: &Bracket) -> Typed {
        let measure = self.measure(&bracket.unit, false);
        let typed = self.infer_quantity(value);
        let Some(measure) = measure else {
            self.infer_conversion(bracket);
            return Typed::unknown();
        };
        if typed.is_unknown() {
            self.infer_conversion(bracket);
            // What it should be is known, and goes on as that.
            return Typed::unknown();
        }
        let it = Bracketed {
            value,
            typed,
            bracket,
            measure,
        };
        match &bracket.conversion {
            None => self.express(&it),
            Some(Conversion::At(z)) => {
                self.infer_number(z, "a redshift");
                self.move_frame(&it)
            }
            Some(Conversion::Today(_)) => self.move_frame(&it),
            Some(Conversion::ForH(span)) => {
                self.use_model(*span);
                self.settle_h(&it)
            }
            Some(Conversion::ForGivenH(h)) => {
                self.infer_number(h, "h");
                self.settle_h(&it)
            }
            Some(Conversion::ByHand(_)) => self.declare(&it),
            Some(Conversion::Via(names)) => self.bridge(&it, names),
        }
    }

    fn infer_conversion(&mut self, bracket: &Bracket) {
        match &bracket.conversion {
            Some(Conversion::At(expr) | Conversion::ForGivenH(expr)) => drop(self.infer(expr)),
            Some(Conversion::Today(_) | Conversion::ForH(_) | Conversion::ByHand(_) | Conversion::Via(_))
            | None => {}
        }
    }

    /// What a unit asks of a value: a unit that names no frame leaves it open.
    pub(super) fn asked(&mut self, measure: &Measure) -> Form {
        let form = self.with_open_angle(measure.form.clone());
        if measure.framed {
            form
        } else {
            form.times(&self.unifier.fresh(Sort::Along(COMOVING)))
        }
    }

    fn express(&mut self, it: &Bracketed<'_>) -> Typed {
        let target = self.asked(&it.measure);
        if self.unifier.unify(&it.typed.form, &target).is_err() {
            let diagnostic = self.wrong_bracket(it, &target);
            return self.wrong(diagnostic);
        }
        let form = self.unifier.resolve(&it.typed.form);
        Typed::quantity(form).shown_in(Some(Arc::clone(&it.measure)))
    }

    /// The power of `generator` in the value, where all else agrees with the
    /// unit; an unknown one is taken to be `natural`.
    fn power_of(
        &mut self,
        it: &Bracketed<'_>,
        generator: Key,
        natural: Option<Exponent>,
    ) -> Result<Exponent, Typed> {
        let rest = it.measure.form.without(|key| key == generator);
        let mut rest = self.with_open_angle(rest);
        if generator != COMOVING && !it.measure.framed {
            rest = rest.times(&self.unifier.fresh(Sort::Along(COMOVING)));
        }
        let power = self.unifier.fresh(Sort::Along(generator));
        let target = rest.times(&power);
        if self.unifier.unify(&it.typed.form, &target).is_err() {
            let diagnostic = self.wrong_bracket(it, &target);
            return Err(self.wrong(diagnostic));
        }
        let found = self.unifier.resolve(&power);
        if !found.is_open() {
            return Ok(found.exponent(generator));
        }
        let Some(natural) = natural else {
            return Err(self.wrong(error::open_h(it.bracket.span)));
        };
        if self
            .unifier
            .unify(&found, &Form::power_of(generator, natural))
            .is_err()
        {
            let diagnostic = self.wrong_bracket(it, &target);
            return Err(self.wrong(diagnostic));
        }
        Ok(natural)
    }

    /// `[kpc at z]`, `[Gly today]`, `[cMpc at z]`.
    fn move_frame(&mut self, it: &Bracketed<'_>) -> Typed {
        let target = it.measure.form.exponent(COMOVING);
        let length = it.measure.form.of_generator(Generator::Length);
        let natural = if form::is_zero(target) { length } else { form::ZERO };
        let power = match self.power_of(it, COMOVING, Some(natural)) {
            Ok(power) => power,
            Err(wrong) => return wrong,
        };
        if power == target {
            let what = self.describe(&it.typed.form);
            return self.wrong(error::frame_already(it.value.span, it.bracket, &what));
        }
        self.note(it.bracket.span, Note::Redshift(target - power));
        let form = self
            .unifier
            .resolve(&it.typed.form)
            .without(|key| key == COMOVING);
        let form = form.times(&Form::power_of(COMOVING, target));
        Typed::quantity(form).shown_in(Some(Arc::clone(&it.measure)))
    }

    /// `[Mpc for h]`, `[Mpc for h = 0.7]`, `[Mpc/h for h]`.
    fn settle_h(&mut self, it: &Bracketed<'_>) -> Typed {
        let target = it.measure.form.exponent(LITTLE_H);
        let power = match self.power_of(it, LITTLE_H, None) {
            Ok(power) => power,
            Err(wrong) => return wrong,
        };
        if power == target {
            let what = self.describe(&it.typed.form);
            return self.wrong(error::h_already(
                it.value.span,
                it.bracket,
                &what,
                form::is_zero(target),
            ));
        }
        self.note(it.bracket.span, Note::LittleH(power - target));
        let form = self
            .unifier
            .resolve(&it.typed.form)
            .without(|key| key == LITTLE_H);
        let form = form.times(&Form::power_of(LITTLE_H, target));
        Typed::quantity(form).shown_in(Some(Arc::clone(&it.measure)))
    }

    /// `[cMpc by hand]`: the sheet knows better about all that rides on a
    /// quantity.
    fn declare(&mut self, it: &Bracketed<'_>) -> Typed {
        let rides = |key: Key| form::is_sky_key(key) || (FIRST_TALLY..FIRST_BOUND).contains(&key);
        let value = self.unifier.resolve(&it.typed.form);
        let declared = it.measure.form.clone();
        let keys: Vec<Key> = value
            .parts()
            .chain(declared.parts())
            .map(|(key, _)| key)
            .filter(|key| rides(*key))
            .collect();
        let mut target = declared.clone();
        for key in keys.into_iter().chain([ANGLE, MAGNITUDE, COMOVING, LITTLE_H]) {
            target = target.times(&self.unifier.fresh(Sort::Along(key)));
        }
        if self.unifier.unify(&value, &target).is_err() {
            let diagnostic = self.wrong_bracket(it, &declared);
            return self.wrong(diagnostic);
        }
        let form = self.with_open_angle(declared);
        Typed::quantity(form).shown_in(Some(Arc::clone(&it.measure)))
    }

    /// `[cm via c]`: the exponents of the constants are solved for.
    fn bridge(&mut self, it: &Bracketed<'_>, names: &[Name]) -> Typed {
        let mut constants = Vec::new();
        for name in names {
            match self.infer_via(name) {
                Some(form) => constants.push(bare(&form)),
                None => return Typed::unknown(),
            }
        }
        let settled = self.settled(&it.typed.form);
        if self
            .unifier
            .resolve(&it.typed.form)
            .unknowns()
            .any(|key| self.is_any(key))
        {
            return self.wrong(error::open_bridge(it.value.span));
        }
        if let Some(typed) = self.by_zero_point(it, &constants, &settled) {
            return typed;
        }
        let (value, target) = (bare(&settled), bare(&it.measure.form));
        let ways = ways_across(&value, &target, &constants);
        match ways.as_slice() {
            [Way::One(sign, exponents)] => {
                self.note(it.bracket.span, Note::Bridge(*sign, exponents.clone()));
                let rides = settled.without(|key| key != COMOVING && key != LITTLE_H);
                let form = it.measure.form.times(&rides.power(Ratio::new_raw(*sign, 1)));
                let form = self.with_open_angle(form);
                Typed::quantity(form).shown_in(Some(Arc::clone(&it.measure)))
            }
            [] => {
                let words = [self.describe(&value), self.describe(&target)];
                let left = self.describe(&target.per(&value));
                self.wrong(error::no_bridge(
                    it.bracket.span,
                    it.value.span,
                    &words,
                    &left,
                    names,
                ))
            }
            _ => self.wrong(error::many_bridges(it.bracket.span, names)),
        }
    }

    /// A flux and a magnitude with one zero point between them: Pogson's
    /// relation instead of a product of powers.
    fn by_zero_point(&mut self, it: &Bracketed<'_>, constants: &[Form], settled: &Form) -> Option<Typed> {
        let [zero] = constants else { return None };
        let magnitude = Form::of(MAGNITUDE);
        let (value, target) = (bare(settled), bare(&it.measure.form));
        let is_written = self.unifier.could_be(&it.typed.form, &magnitude);
        let note = if target == magnitude && value == *zero {
            Note::ToMagnitude
        } else if target == *zero && is_written && !zero.is_number() {
            Note::FromMagnitude
        } else {
            return None;
        };
        self.note(it.bracket.span, note);
        let form = self.with_open_angle(it.measure.form.clone());
        Some(Typed::quantity(form).shown_in(Some(Arc::clone(&it.measure))))
    }

    pub(super) fn is_any(&self, key: Key) -> bool {
        key >= form::FIRST_UNKNOWN && self.unifier.sort(key) == Sort::Any
    }

    /// `via` means the library's constant, or else a value of the sheet.
    fn infer_via(&mut self, name: &Name) -> Option<Form> {
        if let Some(entry) = library::value(&name.node) {
            if matches!(entry.definition, zij_stdlib::catalogue::Definition::ModelValue(_)) {
                self.use_model(name.span);
            }
            return Some(Form::dimension(&entry.result.dimension));
        }
        let [values, _] = self.spaces();
        if self.local(&name.node).is_none() && self.environment.latest(values, &name.node).is_none() {
            self.report(error::no_such_constant(name));
            return None;
        }
        let expr = Expr {
            kind: crate::ast::ExprKind::Name(name.node.clone()),
            span: name.span,
        };
        let typed = self.infer_quantity(&expr);
        let form = self.settled(&typed.form);
        (!typed.is_unknown()).then_some(form)
    }

    /// Whether there is a way across with these constants of the library: for
    /// proposing it.
    pub(super) fn bridge_with(&self, value: &Form, target: &Form, names: &[&str]) -> bool {
        let constants: Vec<Form> = names
            .iter()
            .filter_map(|name| library::value(name))
            .map(|entry| bare(&Form::dimension(&entry.result.dimension)))
            .collect();
        let ways = ways_across(&bare(value), &bare(target), &constants);
        let needed = |way: &Way| matches!(way, Way::One(_, powers) if powers.iter().all(|power| !form::is_zero(*power)));
        ways.len() == 1 && ways.iter().all(needed)
    }

    /// The space of a name given to `via`.
    pub(super) fn via_space(&self) -> Space {
        self.spaces()[0]
    }
}

/// Without frame, h and angle: constants cross dimensions, not conventions.
fn bare(form: &Form) -> Form {
    form.without(|key| key == COMOVING || key == LITTLE_H || key == ANGLE || key >= FIRST_BOUND)
}

/// A way from one dimension to another.
enum Way {
    /// The sign of the value, and the powers of the constants.
    One(i32, Vec<Exponent>),
    /// More than one set of powers.
    Many,
}

fn ways_across(value: &Form, target: &Form, constants: &[Form]) -> Vec<Way> {
    let signs: &[i32] = if value.is_number() { &[1] } else { &[1, -1] };
    let way = |sign: &i32| {
        let needed = target.merge(value, Ratio::new_raw(-sign, 1));
        match solve(constants, &needed)? {
            Some(powers) => Some(Way::One(*sign, powers)),
            None => Some(Way::Many),
        }
    };
    signs.iter().filter_map(way).collect()
}

/// The powers of `constants` whose product is `needed`: none, or several
/// (`Some(None)`), or one set. Gauss–Jordan elimination.
fn solve(constants: &[Form], needed: &Form) -> Option<Option<Vec<Exponent>>> {
    let mut keys: Vec<Key> = constants
        .iter()
        .chain([needed])
        .flat_map(|form| form.parts().map(|(key, _)| key))
        .collect();
    keys.sort_unstable();
    keys.dedup();
    let columns = constants.len();
    let row = |key: &Key| -> Vec<Exponent> {
        constants
            .iter()
            .chain([needed])
            .map(|form| form.exponent(*key))
            .collect()
    };
    let mut rows: Vec<Vec<Exponent>> = keys.iter().map(row).collect();
    let mut rank = 0;
    for column in 0..columns {
        let Some(pivot) = (rank..rows.len()).find(|row| !form::is_zero(rows[*row][column])) else {
            continue;
        };
        rows.swap(rank, pivot);
        let head = rows[rank][column];
        rows[rank]
            .iter_mut()
            .for_each(|entry| *entry = form::divide(*entry, head));
        let lead = rows[rank].clone();
        for (_, other) in rows.iter_mut().enumerate().filter(|(index, _)| *index != rank) {
            let factor = other[column];
            for (entry, known) in other.iter_mut().zip(&lead) {
                *entry = form::add(*entry, -form::multiply(*known, factor));
            }
        }
        rank += 1;
    }
    if rows[rank..].iter().any(|row| !form::is_zero(row[columns])) {
        return None;
    }
    if rank < columns {
        return Some(None);
    }
    Some(Some(rows[..rank].iter().map(|row| row[columns]).collect()))
}
