//! What is known of an expression: its dimension and frame, and in which unit
//! it would be shown.

use super::form::{FIRST_BOUND, FIRST_UNKNOWN, Form, Key};
use super::unify::{Sort, Unifier};
use smallvec::SmallVec;
use smol_str::SmolStr;
use std::sync::Arc;

/// What an expression is.
#[derive(Clone, Debug)]
pub struct Typed {
    /// What kind of thing.
    pub kind: Kind,
    /// Its dimension and frame, if it is a quantity.
    pub form: Form,
    /// The unit it would be shown in.
    pub unit: Option<Arc<Measure>>,
}

/// Kinds of thing.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// A number with a dimension, or a series of them.
    Quantity,
    /// A truth value, or a series of them.
    Truth,
    /// Wrong, and reported: agrees with everything.
    Unknown,
}

/// A unit of measurement, resolved.
#[derive(Clone, Debug, PartialEq)]
pub struct Measure {
    /// As printed.
    pub text: SmolStr,
    /// Its size in SI; a power of h has the size 1.
    pub factor: f64,
    /// Its dimension, with the frame it names itself.
    pub form: Form,
    /// It says which frame (`cMpc`, `pMpc`).
    pub framed: bool,
    /// It names a length, so that a literal in it leaves the frame open.
    pub names_length: bool,
    /// Its words after a tight `/`, which could be values too.
    pub slashed: SmallVec<[SmolStr; 2]>,
}

/// A dimension with variables to be put in at each use.
#[derive(Clone, Debug)]
pub struct Scheme {
    /// With bound variables.
    pub typed: Typed,
    /// The sorts of the bound variables.
    pub bound: SmallVec<[Sort; 2]>,
}

impl Typed {
    /// A quantity without a unit to show it in.
    #[must_use]
    pub fn quantity(form: Form) -> Typed {
        Typed {
            kind: Kind::Quantity,
            form,
            unit: None,
        }
    }

    /// A truth value.
    #[must_use]
    pub fn truth() -> Typed {
        Typed {
            kind: Kind::Truth,
            ..Typed::quantity(Form::number())
        }
    }

    /// Wrong and reported.
    #[must_use]
    pub fn unknown() -> Typed {
        Typed {
            kind: Kind::Unknown,
            ..Typed::quantity(Form::number())
        }
    }

    /// Shown in this unit.
    #[must_use]
    pub fn shown_in(mut self, unit: Option<Arc<Measure>>) -> Typed {
        self.unit = unit;
        self
    }

    /// Whether an error in it has been reported.
    #[must_use]
    pub fn is_unknown(&self) -> bool {
        self.kind == Kind::Unknown
    }
}

/// Collects the unknowns that a scheme binds.
#[derive(Default)]
pub struct Generaliser {
    keys: Vec<Key>,
}

impl Generaliser {
    /// The form with those of its unknowns bound that `binds` says; the others
    /// will belong to the sheet.
    pub fn bind(&mut self, unifier: &mut Unifier, form: &Form, binds: impl Fn(Sort) -> bool) -> Form {
        let form = unifier.resolve(form);
        if !form.is_open() {
            return form;
        }
        for key in form.unknowns().collect::<SmallVec<[Key; 4]>>() {
            if key < FIRST_UNKNOWN || self.keys.contains(&key) || !unifier.is_local(key) {
                continue;
            }
            if binds(unifier.sort(key)) {
                self.keys.push(key);
            } else {
                unifier.keep(key);
            }
        }
        form.renamed(|key| self.place(key).map_or(key, |place| FIRST_BOUND + place))
    }

    fn place(&self, key: Key) -> Option<Key> {
        self.keys
            .iter()
            .position(|known| *known == key)
            .map(|place| place as Key)
    }

    /// The sorts of what was bound.
    #[must_use]
    pub fn sorts(&self, unifier: &Unifier) -> SmallVec<[Sort; 2]> {
        self.keys.iter().map(|key| unifier.sort(*key)).collect()
    }
}

/// New unknowns for the bound variables of a scheme.
pub struct Instance {
    fresh: SmallVec<[Form; 2]>,
}

impl Instance {
    /// One for a use of a scheme.
    pub fn new(unifier: &mut Unifier, bound: &[Sort]) -> Instance {
        Instance {
            fresh: bound.iter().map(|sort| unifier.fresh(*sort)).collect(),
        }
    }

    /// A form of the scheme for this use.
    #[must_use]
    pub fn form(&self, form: &Form) -> Form {
        if self.fresh.is_empty() || !form.is_open() {
            return form.clone();
        }
        let bound = |key: Key| (FIRST_BOUND..FIRST_UNKNOWN).contains(&key);
        form.parts()
            .filter(|(key, _)| bound(*key))
            .fold(form.without(bound), |form, (key, exponent)| {
                form.merge(&self.fresh[(key - FIRST_BOUND) as usize], exponent)
            })
    }
}
