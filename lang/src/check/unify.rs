//! Unification in the group of dimensions: linear algebra over the rationals.
//!
//! An equation `a = b` is `a/b = 1`. Its unknowns are of three sorts: an
//! [`Sort::Any`] stands for any dimension whatever, and solves an equation it
//! occurs in at once,
//!
//! ```text
//!   L · x² = 1      gives      x = L^(-1/2);
//! ```
//!
//! an [`Sort::Along`] stands for a power of one generator, as the open frame
//! of `H0` is some power of *comoving*. Once no `Any` is left, each generator
//! is an equation by itself. [`Sort::Once`] is the same, but keeps what it
//! was found to be for the rest of the sheet, as the frame of a literal does.
//!
//! Every unknown has a level: 0 belongs to the sheet, 1 to the statement being
//! checked. A definition is generalised over its unknowns of level 1; one that
//! got into an unknown of the sheet has come down to level 0 with it (the
//! usual bookkeeping of let-polymorphism; Kennedy 1996, “Relational
//! parametricity and units of measure”, has the group case).

use super::form::{FIRST_BOUND, FIRST_UNKNOWN, Form, Key, divide, is_zero};
use super::infer::COMOVING;

/// What an unknown may stand for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Sort {
    /// Any dimension.
    Any,
    /// Some power of this generator, afresh at each use of a name.
    Along(Key),
    /// Some power of this generator, the same at each use.
    Once(Key),
}

/// The unknowns and what is known of them.
#[derive(Clone, Default)]
pub struct Unifier {
    unknowns: Vec<Unknown>,
    /// Whether an unknown of the sheet was touched since [`Unifier::mark`].
    touched: bool,
}

#[derive(Clone)]
struct Unknown {
    sort: Sort,
    level: u8,
    value: Option<Form>,
}

/// How many unknowns there were at some time, and what was touched by then.
pub struct Mark {
    unknowns: usize,
    touched: bool,
}

/// Two forms that cannot be the same: what is left of their quotient.
#[derive(Clone, Debug, PartialEq)]
pub struct Unlike;

impl Sort {
    /// The generator it runs along.
    #[must_use]
    pub fn along(self) -> Option<Key> {
        match self {
            Sort::Any => None,
            Sort::Along(generator) | Sort::Once(generator) => Some(generator),
        }
    }
}

impl Unifier {
    /// A new unknown of the statement being checked.
    pub fn fresh(&mut self, sort: Sort) -> Form {
        self.fresh_at(sort, 1)
    }

    /// A new unknown of a level.
    pub fn fresh_at(&mut self, sort: Sort, level: u8) -> Form {
        let key = FIRST_UNKNOWN + self.unknowns.len() as Key;
        self.unknowns.push(Unknown {
            sort,
            level,
            value: None,
        });
        Form::of(key)
    }

    /// The unknowns there are, and a clean record of what is touched.
    pub fn mark(&mut self) -> Mark {
        Mark {
            unknowns: self.unknowns.len(),
            touched: std::mem::take(&mut self.touched),
        }
    }

    /// Forgets the unknowns since `mark`, if none of the sheet's rests on them.
    pub fn forget(&mut self, mark: &Mark) {
        if !self.touched {
            self.unknowns.truncate(mark.unknowns);
        }
        self.touched |= mark.touched;
    }

    /// The sort of an unknown.
    #[must_use]
    pub fn sort(&self, key: Key) -> Sort {
        self.unknown(key).sort
    }

    /// Whether an unknown belongs to the statement being checked.
    #[must_use]
    pub fn is_local(&self, key: Key) -> bool {
        self.unknown(key).level > 0
    }

    fn unknown(&self, key: Key) -> &Unknown {
        &self.unknowns[(key - FIRST_UNKNOWN) as usize]
    }

    /// The form with all that is known put in.
    #[must_use]
    pub fn resolve(&self, form: &Form) -> Form {
        let known = |key: Key| key >= FIRST_UNKNOWN && self.unknown(key).value.is_some();
        let mut form = form.clone();
        loop {
            let found = form.parts().rev().find(|(key, _)| known(*key));
            let Some((key, exponent)) = found else { return form };
            if let Some(value) = &self.unknown(key).value {
                form = form.without(|other| other == key).merge(value, exponent);
            }
        }
    }

    /// The form of a value that is about to be generalised, with one unknown
    /// along each generator: several that nothing else rests on can be no more
    /// than one can. Otherwise `y = x * x / x` would have three times those of
    /// `x`, and a chain of such names more than can be counted.
    #[must_use]
    pub fn gathered(&self, form: &Form) -> Form {
        self.gather(form, &|sort, _| matches!(sort, Sort::Along(_)))
    }

    /// The same for the result of a function, all of whose unknowns are
    /// generalised: what its parameters `take` is tied to them and stays.
    #[must_use]
    pub fn gathered_apart<'f>(&self, form: &Form, take: impl Iterator<Item = &'f Form>) -> Form {
        let tied: Vec<Key> = take
            .flat_map(|form| self.resolve(form).unknowns().collect::<Vec<_>>())
            .collect();
        self.gather(form, &|sort, key| sort != Sort::Any && !tied.contains(&key))
    }

    fn gather(&self, form: &Form, is_free: &dyn Fn(Sort, Key) -> bool) -> Form {
        let form = self.resolve(form);
        if !form.is_open() {
            return form;
        }
        let free = |key: Key| {
            let local = key >= FIRST_UNKNOWN && self.is_local(key);
            let along = local.then(|| self.sort(key)).filter(|sort| is_free(*sort, key));
            along.and_then(Sort::along)
        };
        let mut seen: Vec<Key> = Vec::new();
        let mut surplus: Vec<Key> = Vec::new();
        for key in form.unknowns() {
            match free(key) {
                Some(generator) if seen.contains(&generator) => surplus.push(key),
                Some(generator) => seen.push(generator),
                None => {}
            }
        }
        form.without(|key| surplus.contains(&key))
    }

    /// Makes `a` and `b` the same, if they can be.
    ///
    /// # Errors
    /// [`Unlike`], with nothing changed.
    pub fn unify(&mut self, a: &Form, b: &Form) -> Result<(), Unlike> {
        if a == b {
            return Ok(());
        }
        let quotient = self.resolve(&a.per(b));
        self.annul(&quotient)
    }

    /// Makes a form a number, if it can be one.
    fn annul(&mut self, form: &Form) -> Result<(), Unlike> {
        if form.is_number() {
            return Ok(());
        }
        if form
            .parts()
            .any(|(key, _)| (FIRST_BOUND..FIRST_UNKNOWN).contains(&key))
        {
            return Err(Unlike);
        }
        let free = form
            .parts()
            .rev()
            .find(|(key, _)| *key >= FIRST_UNKNOWN && self.sort(*key) == Sort::Any);
        if let Some((key, exponent)) = free {
            self.solve(key, exponent, form);
            return Ok(());
        }
        self.annul_each(form)
    }

    /// No `Any` is left: each generator is an equation of its own.
    fn annul_each(&mut self, form: &Form) -> Result<(), Unlike> {
        let along =
            |this: &Unifier, key: Key| (key >= FIRST_UNKNOWN).then(|| this.sort(key).along()).flatten();
        for (generator, _) in form.parts().filter(|(key, _)| *key < FIRST_UNKNOWN) {
            if !form.unknowns().any(|key| along(self, key) == Some(generator)) {
                return Err(Unlike);
            }
        }
        let mut done: Vec<Key> = Vec::new();
        for (key, _) in form.parts().rev() {
            let Some(generator) = along(self, key) else {
                continue;
            };
            if done.contains(&generator) {
                continue;
            }
            done.push(generator);
            let part = form.without(|other| other != generator && along(self, other) != Some(generator));
            let (key, exponent) = self.easiest(&part);
            self.solve(key, exponent, &part);
        }
        Ok(())
    }

    /// The unknown to solve for: one that need not be remembered, and the
    /// newest.
    fn easiest(&self, part: &Form) -> (Key, num_rational::Ratio<i32>) {
        let unknowns = || part.parts().rev().filter(|(key, _)| *key >= FIRST_UNKNOWN);
        let afresh = unknowns().find(|(key, _)| matches!(self.sort(*key), Sort::Along(_)));
        afresh
            .or_else(|| unknowns().next())
            .expect("the part has an unknown along its generator")
    }

    /// `key^exponent · rest = 1`, so `key = rest^(-1/exponent)`.
    fn solve(&mut self, key: Key, exponent: num_rational::Ratio<i32>, form: &Form) {
        let rest = form.without(|other| other == key);
        let value = rest.power(divide(-super::form::ONE, exponent));
        let level = self.unknown(key).level;
        if level == 0 {
            self.touched = true;
        }
        let inside: Vec<Key> = value.unknowns().filter(|other| *other >= FIRST_UNKNOWN).collect();
        for other in inside {
            let unknown = &mut self.unknowns[(other - FIRST_UNKNOWN) as usize];
            unknown.level = unknown.level.min(level);
        }
        self.unknowns[(key - FIRST_UNKNOWN) as usize].value = Some(value);
    }

    /// What a value is when nothing more is asked of it: an open frame is
    /// proper in the end, and other open powers are zero.
    #[must_use]
    pub fn settled(&self, form: &Form) -> Form {
        let resolved = self.resolve(form);
        if !resolved.is_open() {
            return resolved;
        }
        let along = |key: Key| {
            if key >= FIRST_UNKNOWN {
                self.sort(key).along()
            } else {
                None
            }
        };
        let frame = resolved.unknowns().any(|key| along(key) == Some(COMOVING));
        resolved.without(|key| along(key).is_some() || (frame && key == COMOVING))
    }

    /// The same, but what later statements may still settle is left open.
    #[must_use]
    pub fn settled_afresh(&self, form: &Form) -> Form {
        let resolved = self.resolve(form);
        if !resolved.is_open() {
            return resolved;
        }
        let sort = |key: Key| (key >= FIRST_UNKNOWN).then(|| self.sort(key));
        let frame = resolved
            .unknowns()
            .any(|key| sort(key) == Some(Sort::Along(COMOVING)));
        let of_frame = |key: Key| key == COMOVING || sort(key).and_then(Sort::along) == Some(COMOVING);
        resolved.without(|key| matches!(sort(key), Some(Sort::Along(_))) || (frame && of_frame(key)))
    }

    /// Whether two forms could be the same, with nothing changed.
    #[must_use]
    pub fn could_be(&self, a: &Form, b: &Form) -> bool {
        let quotient = self.resolve(&a.per(b));
        let any = |key: Key| key >= FIRST_UNKNOWN && self.sort(key) == Sort::Any;
        if quotient.is_number() || quotient.unknowns().any(any) {
            return true;
        }
        let along = |key: Key| (key >= FIRST_UNKNOWN).then(|| self.sort(key).along()).flatten();
        let mut fixed = quotient
            .parts()
            .filter(|(key, exponent)| *key < FIRST_UNKNOWN && !is_zero(*exponent));
        fixed.all(|(generator, _)| quotient.unknowns().any(|key| along(key) == Some(generator)))
    }

    /// Lets an unknown belong to the sheet.
    pub fn keep(&mut self, key: Key) {
        self.unknowns[(key - FIRST_UNKNOWN) as usize].level = 0;
        self.touched = true;
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use num_rational::Ratio;
    use zij_stdlib::dimension::{LENGTH, TIME};

    #[test]
    fn a_square_root_is_solved_for() {
        let mut unifier = Unifier::default();
        let x = unifier.fresh(Sort::Any);
        let length = Form::dimension(&LENGTH);
        assert_eq!(unifier.unify(&x.power(Ratio::new(2, 1)), &length), Ok(()));
        assert_eq!(unifier.resolve(&x), length.power(Ratio::new(1, 2)));
    }

    #[test]
    fn an_open_frame_fits_either_frame_and_no_other_dimension() {
        let mut unifier = Unifier::default();
        let open = Form::dimension(&LENGTH).times(&unifier.fresh(Sort::Along(COMOVING)));
        assert_eq!(unifier.unify(&open, &Form::dimension(&TIME)), Err(Unlike));
        assert_eq!(unifier.unify(&open, &Form::dimension(&LENGTH.comoving())), Ok(()));
        assert_eq!(unifier.unify(&open, &Form::dimension(&LENGTH)), Err(Unlike));
    }

    #[test]
    fn two_unknowns_of_a_sum_are_tied_together() {
        let mut unifier = Unifier::default();
        let (x, y) = (unifier.fresh(Sort::Any), unifier.fresh(Sort::Any));
        assert_eq!(unifier.unify(&x, &y), Ok(()));
        assert_eq!(unifier.unify(&y, &Form::dimension(&TIME)), Ok(()));
        assert_eq!(unifier.resolve(&x), Form::dimension(&TIME));
    }

    #[test]
    fn an_unknown_of_the_sheet_pulls_others_down_to_it() {
        let mut unifier = Unifier::default();
        let old = unifier.fresh_at(Sort::Any, 0);
        let new = unifier.fresh(Sort::Along(COMOVING));
        assert_eq!(unifier.unify(&old, &new.times(&Form::dimension(&LENGTH))), Ok(()));
        let key = new.unknowns().next().expect("an unknown");
        assert!(!unifier.is_local(key));
    }
}
