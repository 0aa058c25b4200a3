//! Dimensions in words and in field notation.

use super::form::{self, FIRST_BOUND, FIRST_TALLY, Form, Key};
use super::infer::{ANGLE, COMOVING};
use super::typed::{Scheme, Typed};
use super::{BindingId, Checker, Meaning};
use num_rational::Ratio;
use smol_str::SmolStr;
use zij_stdlib::catalogue::Type;
use zij_stdlib::dimension::Generator;
use zij_stdlib::words;

impl Checker {
    /// A dimension and frame in words: “a length (comoving)”.
    #[must_use]
    pub fn describe(&self, form: &Form) -> String {
        let resolved = self.unifier.resolve(form);
        if resolved.unknowns().any(|key| self.is_any(key)) {
            return "a quantity of any dimension".into();
        }
        let settled = self.settled(&resolved);
        let is_angle = |key: Key| key >= form::FIRST_UNKNOWN && self.unifier.sort(key).along() == Some(ANGLE);
        if resolved.unknowns().any(is_angle) && settled.has_other_dimension() {
            return self.in_words(&settled.without(|key| key == ANGLE));
        }
        self.in_words(&settled)
    }

    /// What a value is, as far as its definition settles it.
    #[must_use]
    pub fn describe_scheme(&self, scheme: &Scheme) -> String {
        let form = &scheme.typed.form;
        let place = |key: Key| {
            (FIRST_BOUND..form::FIRST_UNKNOWN)
                .contains(&key)
                .then(|| (key - FIRST_BOUND) as usize)
        };
        let along = |key: Key| place(key).and_then(|place| scheme.bound.get(place)?.along());
        let opens = |generator: Key| form.unknowns().any(|key| along(key) == Some(generator));
        let angle = opens(ANGLE) && form.has_other_dimension();
        let frame = opens(COMOVING);
        let drop = |key: Key| (angle && key == ANGLE) || (frame && key == COMOVING) || along(key).is_some();
        self.describe(&form.without(drop))
    }

    /// The same, where “proper” has to be said.
    pub(super) fn describe_frame(&self, form: &Form) -> String {
        let settled = self.settled(form);
        let words = self.in_words(&settled);
        if form::is_zero(settled.exponent(COMOVING)) {
            format!("{words} (proper)")
        } else {
            words
        }
    }

    /// A settled form in words.
    #[must_use]
    pub fn in_words(&self, form: &Form) -> String {
        let counted: Vec<String> = form
            .parts()
            .filter_map(|(key, power)| self.counted(key, power))
            .collect();
        let rest = form.library_part();
        if counted.is_empty() {
            return words::name(&rest);
        }
        let counted = counted.join(" ");
        if rest.is_number() {
            return format!("a count ({counted})");
        }
        let inverse = Form::dimension(&rest).power(Ratio::new_raw(-1, 1)).library_part();
        let per = words::name(&inverse);
        if per.starts_with("a quantity") {
            format!("{} times {counted}", words::name(&rest))
        } else {
            format!(
                "a count ({counted}) per {}",
                per.trim_start_matches("an ").trim_start_matches("a ")
            )
        }
    }

    fn counted(&self, key: Key, power: form::Exponent) -> Option<String> {
        if !(FIRST_TALLY..FIRST_BOUND).contains(&key) {
            return None;
        }
        let name = &self.environment.tallies.get((key - FIRST_TALLY) as usize)?.0;
        Some(if power == form::ONE {
            name.to_string()
        } else {
            format!("{name}^{power}")
        })
    }

    /// The signature of a function of the sheet in field notation.
    #[must_use]
    pub fn signature_of(&self, id: BindingId) -> String {
        let binding = self.environment.binding(id);
        let Meaning::Function(function) = &binding.meaning else {
            return binding.name.to_string();
        };
        let arguments = function
            .parameters
            .iter()
            .zip(&function.takes)
            .map(|(parameter, typed)| {
                (
                    parameter.name.node.clone(),
                    self.field_unit_of(typed),
                    parameter.default.is_some(),
                )
            });
        let unit = self.field_unit_of(&function.result.typed);
        join_signature(&binding.name, Some(arguments.collect()), &unit)
    }

    /// The unit that stands for a dimension in a signature; `""` for a number
    /// or where any dimension will do.
    pub(super) fn field_unit_of(&self, typed: &Typed) -> String {
        let any = |key: Key| (FIRST_BOUND..form::FIRST_UNKNOWN).contains(&key) || self.is_any(key);
        let open = self.unifier.resolve(&typed.form);
        if let Some(unit) = &typed.unit {
            return unit.text.to_string();
        }
        if open.unknowns().any(any) {
            return String::new();
        }
        self.unit_text(&self.settled(&open))
    }

    /// A unit for a settled form in which a cosmologist would quote it.
    #[must_use]
    pub fn unit_text(&self, form: &Form) -> String {
        let rest = form.library_part();
        let usual = words::usual_unit(&rest).filter(|unit| *unit != "1");
        let mut text = usual.map_or_else(|| words::in_base_units(&rest), ToOwned::to_owned);
        for (key, power) in form.parts() {
            if let Some(counted) = self.counted(key, power) {
                text = if text.is_empty() {
                    counted
                } else {
                    format!("{counted} {text}")
                };
            }
        }
        text
    }
}

/// The unit of an argument or result of the library in a signature.
#[must_use]
pub fn field_unit(kind: &Type, usual: &str) -> String {
    let framed = !form::is_zero(kind.dimension.exponent(Generator::Comoving));
    let of_dimension = words::usual_unit(&kind.dimension).unwrap_or("");
    if kind.variable.is_some() || kind.dimension.is_number() {
        String::new()
    } else if framed || usual.is_empty() {
        of_dimension.to_owned()
    } else {
        usual.to_owned()
    }
}

/// `D_C(z) [cMpc]`, `c [m/s]`.
#[must_use]
pub fn join_signature(name: &str, arguments: Option<Vec<(SmolStr, String, bool)>>, unit: &str) -> String {
    let mut text = name.to_owned();
    if let Some(arguments) = arguments {
        let each = arguments.iter().map(|(name, unit, optional)| {
            let unit = if unit.is_empty() {
                String::new()
            } else {
                format!(" [{unit}]")
            };
            format!("{name}{unit}{}", if *optional { " = …" } else { "" })
        });
        text = format!("{text}({})", each.collect::<Vec<_>>().join(", "));
    }
    if unit.is_empty() {
        text
    } else {
        format!("{text} [{unit}]")
    }
}
