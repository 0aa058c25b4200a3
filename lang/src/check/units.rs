//! Units as written to their size and dimension.

use super::environment::UserUnit;
use super::form::{Form, Key};
use super::infer::{LITTLE_H, MAGNITUDE};
use super::typed::Measure;
use super::{Checker, error, library};
use crate::ast::{Unit, UnitFactor};
use crate::print;
use num_rational::Ratio;
use smallvec::SmallVec;
use smol_str::SmolStr;
use std::sync::Arc;
use zij_stdlib::constants::values::ARCSECOND;
use zij_stdlib::dimension::{Generator, LENGTH, MASS, POWER};
use zij_stdlib::units;

/// One factor of a unit, resolved.
struct Part {
    factor: f64,
    form: Form,
    framed: bool,
    names_length: bool,
}

impl Part {
    fn of(found: units::Found) -> Part {
        Part {
            factor: found.factor,
            form: Form::dimension(&found.unit.dimension),
            framed: found.unit.framed,
            names_length: found.unit.names_length(),
        }
    }

    fn little_h() -> Part {
        Part {
            factor: 1.0,
            form: Form::of(LITTLE_H),
            framed: false,
            names_length: false,
        }
    }
}

impl Checker {
    /// A unit as written: after a number (where a tight `/word` may be a
    /// value) or in a bracket. `None` once an error has been reported.
    pub(super) fn measure(&mut self, unit: &Unit, after_number: bool) -> Option<Arc<Measure>> {
        let text = SmolStr::new(self.text(unit.span));
        let measure = match self.measures.get(&text) {
            Some(known) => Arc::clone(known),
            None => {
                let (measure, clean) = self.resolve(unit)?;
                let measure = Arc::new(measure);
                if clean {
                    self.measures.insert(text, Arc::clone(&measure));
                }
                measure
            }
        };
        if after_number && !measure.slashed.is_empty() && self.is_ambiguous(unit) {
            return None;
        }
        Some(measure)
    }

    /// The measure, and whether it was found without a warning.
    fn resolve(&mut self, unit: &Unit) -> Option<(Measure, bool)> {
        let warnings = self.diagnostics.len();
        let mut parts = Vec::with_capacity(unit.factors.len());
        for factor in &unit.factors {
            parts.push(self.part(unit, factor)?);
        }
        let clean = self.diagnostics.len() == warnings;
        let measure = product(unit, &parts);
        if let Some(reason) = objection(&measure) {
            self.report(error::surface_brightness(unit.span, reason));
            return None;
        }
        Some((as_magnitude(measure), clean))
    }

    fn part(&mut self, unit: &Unit, factor: &UnitFactor) -> Option<Part> {
        let name = factor.name.node.as_str();
        if let Some(user) = self.user_unit(name) {
            return Some(user);
        }
        if name == "h" {
            let beside = unit.factors.iter().any(|other| takes_little_h(&other.name.node));
            if !beside {
                self.report(error::bad_little_h(factor.name.span, unit.span));
                return None;
            }
            return Some(Part::little_h());
        }
        let Some(found) = units::find(name) else {
            if !self.lost.contains(&factor.name.node) {
                let diagnostic = self.unknown_unit(factor);
                self.report(diagnostic);
            }
            return None;
        };
        if let Some(meant) = units::case_slip(name) {
            self.report(error::case_of_unit(&factor.name, found.unit.name, meant));
        }
        Some(Part::of(found))
    }

    /// The size in SI of a unit that has been checked.
    #[must_use]
    pub fn size_of(&self, unit: &Unit) -> f64 {
        let part = |factor: &UnitFactor| {
            let name = factor.name.node.as_str();
            let user = || self.user_unit(name);
            let little_h = || (name == "h").then(Part::little_h);
            user()
                .or_else(little_h)
                .or_else(|| units::find(name).map(Part::of))
        };
        let parts: Option<Vec<Part>> = unit.factors.iter().map(part).collect();
        parts.map_or(f64::NAN, |parts| as_magnitude(product(unit, &parts)).factor)
    }

    fn user_unit(&self, name: &str) -> Option<Part> {
        if let Some(key) = self.environment.tally(name) {
            return Some(Part {
                factor: 1.0,
                form: Form::of(key),
                framed: false,
                names_length: false,
            });
        }
        let UserUnit { measure, .. } = self.environment.units.get(name)?;
        Some(Part {
            factor: measure.factor,
            form: measure.form.clone(),
            framed: measure.framed,
            names_length: measure.names_length,
        })
    }

    fn unknown_unit(&self, factor: &UnitFactor) -> crate::diagnostic::Diagnostic {
        let name = &factor.name;
        let [values, _] = self.spaces();
        let is_value = self.local(&name.node).is_some()
            || self.environment.latest(values, &name.node).is_some()
            || library::value(&name.node).is_some();
        if is_value {
            return error::value_as_unit(name, factor.after_slash);
        }
        let mut near = units::near(&name.node);
        let own = self
            .environment
            .units
            .keys()
            .chain(self.environment.tallies.iter().map(|(name, _)| name));
        let mut own: Vec<&SmolStr> = own
            .filter(|own| strsim::osa_distance(own, &name.node) <= 2)
            .collect();
        own.sort();
        near.splice(0..0, own.into_iter().map(ToString::to_string));
        error::unknown_unit(name, &near, units::counting(&name.node))
    }

    /// Whether a tight `/word` is also a value of another size.
    fn is_ambiguous(&mut self, unit: &Unit) -> bool {
        let slashed = || unit.factors.iter().filter(|factor| factor.after_slash);
        let clash = slashed()
            .find(|factor| self.is_value_of_another_size(&factor.name.node))
            .cloned();
        if let Some(factor) = &clash {
            self.report(error::ambiguous_slash(&factor.name));
        }
        clash.is_some()
    }

    fn is_value_of_another_size(&self, name: &SmolStr) -> bool {
        let [values, _] = self.spaces();
        if self.local(name).is_some() || self.environment.latest(values, name).is_some() {
            return true;
        }
        let Some(entry) = library::value(name) else {
            return false;
        };
        let same = |found: units::Found| match entry.definition {
            zij_stdlib::catalogue::Definition::Constant(value, _) => {
                value == found.factor && entry.result.dimension == found.unit.dimension
            }
            _ => false,
        };
        name != "h" && !units::find(name).is_some_and(same)
    }
}

/// Whether little h may stand beside this unit.
fn takes_little_h(name: &str) -> bool {
    units::find(name).is_some_and(|found| {
        let dimension = found.unit.dimension.with(Generator::Comoving, 0);
        found.unit.names_length() || dimension == LENGTH || dimension == MASS || dimension == POWER
    })
}

fn product(unit: &Unit, parts: &[Part]) -> Measure {
    let mut measure = Measure {
        text: print::unit(unit).into(),
        factor: unit.scale,
        form: Form::number(),
        framed: parts.iter().any(|part| part.framed),
        names_length: parts.iter().any(|part| part.names_length),
        slashed: SmallVec::new(),
    };
    for (factor, part) in unit.factors.iter().zip(parts) {
        measure.factor *= raised(part.factor, factor.power);
        measure.form = measure.form.merge(&part.form, factor.power);
        if factor.after_slash {
            measure.slashed.push(factor.name.node.clone());
        }
    }
    measure
}

/// A size to a rational power; whole powers are products, so that they round
/// as a person would expect.
fn raised(factor: f64, power: Ratio<i32>) -> f64 {
    let (numerator, denominator) = (*power.numer(), *power.denom());
    if denominator != 1 {
        return libm::pow(factor, f64::from(numerator) / f64::from(denominator));
    }
    let size = numerator.unsigned_abs();
    let whole = if size <= 16 {
        (0..size).fold(1.0, |product, _| product * factor)
    } else {
        libm::pow(factor, f64::from(size))
    };
    if numerator < 0 { 1.0 / whole } else { whole }
}

const ANGLE: Key = Generator::Angle as Key;

/// `mag/arcsec^2` is a magnitude whose area stands inside the logarithm, so
/// only the area that everybody means can be read.
fn objection(measure: &Measure) -> Option<&'static str> {
    let square_arcsecond = 1.0 / (ARCSECOND * ARCSECOND);
    let other_size = (measure.factor / square_arcsecond - 1.0).abs() > 1e-12;
    let per_angle = is_surface_brightness(&measure.form) && other_size;
    per_angle.then_some("a magnitude per angle is quoted per square arcsecond")
}

fn is_surface_brightness(form: &Form) -> bool {
    let per_area = form.exponent(ANGLE) == Ratio::new_raw(-2, 1);
    form.exponent(MAGNITUDE) == super::form::ONE && per_area && form.parts().count() == 2
}

fn as_magnitude(mut measure: Measure) -> Measure {
    if is_surface_brightness(&measure.form) {
        measure.form = Form::of(MAGNITUDE);
        measure.factor = 1.0;
    }
    measure
}

/// A unit that the library writes.
pub(super) fn resolve_library(unit: &Unit) -> Option<Measure> {
    let part = |factor: &UnitFactor| match factor.name.node.as_str() {
        "h" => Some(Part::little_h()),
        name => units::find(name).map(Part::of),
    };
    let parts = unit.factors.iter().map(part).collect::<Option<Vec<_>>>()?;
    Some(as_magnitude(product(unit, &parts)))
}
