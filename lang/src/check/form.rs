//! Dimensions as the checker computes with them: the library's generators,
//! the counting units of the sheet, and unknowns, each with a rational power.
//!
//! A form is sparse and sorted by key, so most products are a short merge.
//! Powers that outgrow their type become [`UNBOUNDED`], which the checker
//! reports instead of overflowing.

use num_rational::Ratio;
use smallvec::SmallVec;
pub use zij_stdlib::dimension::Exponent;
use zij_stdlib::dimension::{ALL, Dimension, GENERATORS, Generator, NUMBER};

/// A generator, a counting unit or an unknown.
pub type Key = u32;

/// The first counting unit.
pub const FIRST_TALLY: Key = GENERATORS as Key;
/// The first variable bound by a scheme.
pub const FIRST_BOUND: Key = 1 << 20;
/// The first unknown.
pub const FIRST_UNKNOWN: Key = 1 << 21;

/// Stands for a power too large for its type.
pub const UNBOUNDED: Exponent = Ratio::new_raw(i32::MAX, 1);
/// Powers in a sheet stay below this; nothing in the field comes near.
pub const MAX_POWER: i32 = 100_000;

/// The power zero.
pub const ZERO: Exponent = Ratio::new_raw(0, 1);
/// The power one.
pub const ONE: Exponent = Ratio::new_raw(1, 1);

/// A product of powers.
#[derive(Clone, Debug, Default, PartialEq, Eq, Hash)]
pub struct Form {
    parts: SmallVec<[(Key, Exponent); 4]>,
}

impl Form {
    /// A plain number.
    #[must_use]
    pub fn number() -> Form {
        Form::default()
    }

    /// One key to a power.
    #[must_use]
    pub fn power_of(key: Key, exponent: Exponent) -> Form {
        let mut form = Form::default();
        if !is_zero(exponent) {
            form.parts.push((key, exponent));
        }
        form
    }

    /// One key.
    #[must_use]
    pub fn of(key: Key) -> Form {
        Form::power_of(key, ONE)
    }

    /// A dimension of the library.
    #[must_use]
    pub fn dimension(dimension: &Dimension) -> Form {
        let mut form = Form::default();
        for generator in ALL {
            let exponent = dimension.exponent(generator);
            if !is_zero(exponent) {
                form.parts.push((generator as Key, exponent));
            }
        }
        form
    }

    /// The powers, by key.
    pub fn parts(&self) -> impl DoubleEndedIterator<Item = (Key, Exponent)> + '_ {
        self.parts.iter().copied()
    }

    /// The power of a key.
    #[must_use]
    pub fn exponent(&self, key: Key) -> Exponent {
        let found = self.parts.iter().find(|(known, _)| *known == key);
        found.map_or(ZERO, |(_, exponent)| *exponent)
    }

    /// The power of a generator.
    #[must_use]
    pub fn of_generator(&self, generator: Generator) -> Exponent {
        self.exponent(generator as Key)
    }

    /// Whether nothing is left.
    #[must_use]
    pub fn is_number(&self) -> bool {
        self.parts.is_empty()
    }

    /// Whether unknowns or bound variables remain.
    #[must_use]
    pub fn is_open(&self) -> bool {
        self.parts.last().is_some_and(|(key, _)| *key >= FIRST_BOUND)
    }

    /// The unknowns and bound variables.
    pub fn unknowns(&self) -> impl Iterator<Item = Key> + '_ {
        self.parts().map(|(key, _)| key).filter(|key| *key >= FIRST_BOUND)
    }

    /// Whether a power outgrew all measure.
    #[must_use]
    pub fn is_unbounded(&self) -> bool {
        self.parts()
            .any(|(_, exponent)| exponent.numer().abs() > MAX_POWER || *exponent.denom() > MAX_POWER)
    }

    /// The product.
    #[must_use]
    pub fn times(&self, other: &Form) -> Form {
        self.merge(other, ONE)
    }

    /// The quotient.
    #[must_use]
    pub fn per(&self, other: &Form) -> Form {
        self.merge(other, Ratio::new_raw(-1, 1))
    }

    /// `self × other^exponent`.
    #[must_use]
    pub fn merge(&self, other: &Form, exponent: Exponent) -> Form {
        if other.parts.is_empty() {
            return self.clone();
        }
        let mut parts = SmallVec::with_capacity(self.parts.len() + other.parts.len());
        let (mut left, mut right) = (self.parts.as_slice(), other.parts.as_slice());
        loop {
            match (left.first(), right.first()) {
                (Some(&(a, p)), Some(&(b, q))) if a == b => {
                    let sum = add(p, multiply(q, exponent));
                    if !is_zero(sum) {
                        parts.push((a, sum));
                    }
                    (left, right) = (&left[1..], &right[1..]);
                }
                (Some(&(a, p)), Some(&(b, _))) if a < b => {
                    parts.push((a, p));
                    left = &left[1..];
                }
                (Some(&(a, p)), None) => {
                    parts.push((a, p));
                    left = &left[1..];
                }
                (_, Some(&(b, q))) => {
                    parts.push((b, multiply(q, exponent)));
                    right = &right[1..];
                }
                (None, None) => return Form { parts },
            }
        }
    }

    /// All powers times `exponent`.
    #[must_use]
    pub fn power(&self, exponent: Exponent) -> Form {
        if is_zero(exponent) {
            return Form::number();
        }
        let parts = self.parts().map(|(key, power)| (key, multiply(power, exponent)));
        Form {
            parts: parts.collect(),
        }
    }

    /// Without what `drop` says of keys.
    #[must_use]
    pub fn without(&self, drop: impl Fn(Key) -> bool) -> Form {
        Form {
            parts: self.parts().filter(|(key, _)| !drop(*key)).collect(),
        }
    }

    /// With keys renamed; the renaming may change their order.
    #[must_use]
    pub fn renamed(&self, rename: impl Fn(Key) -> Key) -> Form {
        let mut parts: SmallVec<[(Key, Exponent); 4]> = self
            .parts()
            .map(|(key, exponent)| (rename(key), exponent))
            .collect();
        parts.sort_unstable_by_key(|(key, _)| *key);
        Form { parts }
    }

    /// The part that the library has generators for.
    #[must_use]
    pub fn library_part(&self) -> Dimension {
        let known = self.parts().filter(|(key, _)| *key < FIRST_TALLY);
        known.fold(NUMBER, |dimension, (key, exponent)| {
            dimension.raised(ALL[key as usize], exponent)
        })
    }

    /// Whether a dimension other than angle, magnitude and frame is in it, so
    /// that an angle in it may go unnamed.
    #[must_use]
    pub fn has_other_dimension(&self) -> bool {
        self.parts
            .iter()
            .any(|(key, _)| *key < FIRST_BOUND && !is_sky_key(*key))
    }
}

/// Angle, magnitude, frame and h: what rides on a quantity.
#[must_use]
pub fn is_sky_key(key: Key) -> bool {
    (Generator::Angle as Key..=Generator::LittleH as Key).contains(&key)
}

/// Whether a power is zero.
#[must_use]
pub fn is_zero(exponent: Exponent) -> bool {
    *exponent.numer() == 0
}

/// The sum of two powers.
#[must_use]
pub fn add(a: Exponent, b: Exponent) -> Exponent {
    if *a.denom() == 1 && *b.denom() == 1 {
        return a
            .numer()
            .checked_add(*b.numer())
            .map_or(UNBOUNDED, |sum| Ratio::new_raw(sum, 1));
    }
    let wide = |x: Exponent| Ratio::new_raw(i128::from(*x.numer()), i128::from(*x.denom()));
    narrow(wide(a) + wide(b))
}

/// The product of two powers.
#[must_use]
pub fn multiply(a: Exponent, b: Exponent) -> Exponent {
    if *a.denom() == 1 && *b.denom() == 1 {
        return a
            .numer()
            .checked_mul(*b.numer())
            .map_or(UNBOUNDED, |product| Ratio::new_raw(product, 1));
    }
    let wide = |x: Exponent| Ratio::new_raw(i128::from(*x.numer()), i128::from(*x.denom()));
    narrow(wide(a) * wide(b))
}

/// The quotient of two powers, the second not zero.
#[must_use]
pub fn divide(a: Exponent, b: Exponent) -> Exponent {
    let inverse = if *b.numer() < 0 {
        Ratio::new_raw(-*b.denom(), b.numer().saturating_neg())
    } else {
        Ratio::new_raw(*b.denom(), *b.numer())
    };
    multiply(a, inverse)
}

fn narrow(wide: Ratio<i128>) -> Exponent {
    match (i32::try_from(*wide.numer()), i32::try_from(*wide.denom())) {
        (Ok(numerator), Ok(denominator)) => Ratio::new_raw(numerator, denominator),
        _ => UNBOUNDED,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use zij_stdlib::dimension::{LENGTH, TIME};

    #[test]
    fn a_product_with_the_inverse_is_a_number() {
        let speed = Form::dimension(&LENGTH).per(&Form::dimension(&TIME));
        assert!(speed.times(&speed.power(-ONE)).is_number());
        assert_eq!(speed.power(Ratio::new(1, 2)).power(Ratio::new(2, 1)), speed);
    }

    #[test]
    fn a_power_beyond_all_measure_is_marked_and_does_not_wrap() {
        let mut form = Form::dimension(&LENGTH);
        for _ in 0..8 {
            form = form.power(Ratio::new(1000, 1));
        }
        assert!(form.is_unbounded());
        let odd = Form::dimension(&LENGTH).power(Ratio::new(1, 2_147_483_629));
        assert!(
            odd.times(&Form::dimension(&LENGTH).power(Ratio::new(1, 2_147_483_587)))
                .is_unbounded()
        );
    }
}
