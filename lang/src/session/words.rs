//! The words in which a fault tells its numbers: each in the unit in which its
//! expression would be shown.
//!
//! The program knows no units, so the sheet is checked once more with every
//! expression's dimension written down. That is done only where there is a
//! fault to tell of.

use crate::check::typed::Typed;
use crate::check::{Checker, Place};
use crate::eval::{self, Words, plain_number};
use rustc_hash::FxHashMap;

pub(super) struct Units<'a> {
    checker: &'a Checker,
    known: &'a FxHashMap<Place, Typed>,
}

impl<'a> Units<'a> {
    pub fn new(checker: &'a Checker, known: &'a FxHashMap<Place, Typed>) -> Units<'a> {
        Units { checker, known }
    }
}

impl Words for Units<'_> {
    fn value(&self, place: eval::Place, value: f64) -> String {
        let place = Place {
            source: place.source,
            span: place.span,
        };
        let Some(typed) = self.known.get(&place) else {
            return plain_number(value);
        };
        let (unit, factor) = self.checker.unit_of(&typed.form, typed.unit.as_ref());
        let shown = plain_number(value / factor);
        if unit.is_empty() {
            shown
        } else {
            format!("{shown} {unit}")
        }
    }

    fn text(&self, place: eval::Place) -> String {
        self.checker.sources[usize::from(place.source)]
            .slice(place.span)
            .to_owned()
    }
}
