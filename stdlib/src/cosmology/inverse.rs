//! From an age, a time or a distance back to the redshift.
//!
//! Every search starts today and goes outward in steps of an eighth of an
//! octave of 1 + z until the value is passed, then closes in on z itself, so
//! that a redshift of 1e-8 keeps its digits.

use super::geometry::{area_radius, area_radius_slope};
use super::{Found, Length, Redshift, Time, in_gyr, in_mpc, length, undefined};
use crate::constants::values::MEGAPARSEC;
use crate::model::Model;
use crate::model::history::{Edge, Kind, Track};
use crate::numerics::root::bracketed;

/// 2^(1/8).
const STEP: f64 = 1.090_507_732_665_257_7;
/// No search goes beyond this 1 + z or its inverse.
const END: f64 = 1e30;

impl Model {
    /// Redshift at a cosmic time since the big bang.
    ///
    /// # Errors
    /// For times before the big bang or after the last expansion.
    pub fn redshift_of_age(&self, age: Time) -> Found<Redshift> {
        let today = self.since_beginning(Kind::Time, Redshift::TODAY)?;
        let wanted = age.value / self.hubble_time_s();
        if wanted <= 0.0 || wanted.is_nan() {
            return Err(undefined(format_args!(
                "{} is not after the big bang",
                in_gyr(age.value)
            )));
        }
        let track = self.track(Kind::Time)?;
        let value = |z: f64| track.since_beginning(self.expansion(), z).unwrap_or(f64::NAN) - wanted;
        let found = if wanted <= today {
            self.outward(STEP, &value)
        } else {
            self.outward(1.0 / STEP, &value)
        };
        found.ok_or_else(|| self.never(format_args!("an age of {}", in_gyr(age.value))))
    }

    /// Redshift from which light has travelled this time; a negative time is
    /// in the future.
    ///
    /// # Errors
    /// For times before the big bang.
    pub fn redshift_of_lookback(&self, lookback: Time) -> Found<Redshift> {
        let wanted = lookback.value / self.hubble_time_s();
        let found = self.at_integral(Kind::Time, wanted)?;
        found.ok_or_else(|| self.never(format_args!("a lookback time of {}", in_gyr(lookback.value))))
    }

    /// Redshift at a comoving distance; a negative distance is in the future.
    ///
    /// # Errors
    /// Beyond the particle horizon.
    pub fn redshift_of_comoving_distance(&self, distance: Length) -> Found<Redshift> {
        let wanted = distance.value / self.hubble_length_m();
        let found = self.at_integral(Kind::Light, wanted)?;
        found.ok_or_else(|| self.never(format_args!("a comoving distance of {}", in_mpc(distance.value))))
    }

    /// The lowest redshift with this luminosity distance.
    ///
    /// # Errors
    /// Where there is none.
    pub fn redshift_of_luminosity_distance(&self, distance: Length) -> Found<Redshift> {
        let wanted = positive(distance, "luminosity distance")? / self.hubble_length_m();
        let (track, curvature) = (self.track(Kind::Light)?, self.budget().curvature);
        let value =
            |z: f64| area_radius(track.before_today(self.expansion(), z), curvature) * (1.0 + z) - wanted;
        let found = self.outward(STEP, &value);
        found.ok_or_else(|| {
            self.never(format_args!(
                "a luminosity distance of {}",
                in_mpc(distance.value)
            ))
        })
    }

    /// The lowest redshift with this distance modulus, in magnitudes.
    ///
    /// # Errors
    /// Where there is none.
    pub fn redshift_of_distance_modulus(&self, modulus_mag: f64) -> Found<Redshift> {
        let distance_mpc = libm::exp10((modulus_mag - 25.0) / 5.0);
        self.redshift_of_luminosity_distance(length(distance_mpc * MEGAPARSEC))
    }

    /// The redshift with this angular-diameter distance on the near side of
    /// its maximum.
    ///
    /// # Errors
    /// Where no object has it.
    pub fn redshift_of_angular_diameter_distance(&self, distance: Length) -> Found<Redshift> {
        let wanted = positive(distance, "angular-diameter distance")? / self.hubble_length_m();
        let track = self.track(Kind::Light)?;
        let value = |z: f64| self.angular(track, z) - wanted;
        let peak = self.angular_diameter_peak().ok();
        let found = match peak {
            Some(peak) if value(peak.get()) < 0.0 => None,
            Some(peak) => bracketed(0.0, peak.get(), value).map(Redshift),
            None => self.outward(STEP, &value),
        };
        found.ok_or_else(|| self.no_such_angular_distance(distance, peak))
    }

    /// The redshift with this angular-diameter distance on the far side of
    /// its maximum.
    ///
    /// # Errors
    /// Where no object has it, or the distance has no maximum.
    pub fn far_redshift_of_angular_diameter_distance(&self, distance: Length) -> Found<Redshift> {
        let wanted = positive(distance, "angular-diameter distance")? / self.hubble_length_m();
        let peak = self.angular_diameter_peak()?;
        let track = self.track(Kind::Light)?;
        let value = |z: f64| self.angular(track, z) - wanted;
        if value(peak.get()) < 0.0 {
            return Err(self.no_such_angular_distance(distance, Some(peak)));
        }
        let found = self.outward_from(peak.get(), STEP, &value);
        found.ok_or_else(|| {
            self.never(format_args!(
                "an angular-diameter distance of {} again",
                in_mpc(distance.value)
            ))
        })
    }

    /// The redshift of the largest angular-diameter distance.
    ///
    /// # Errors
    /// Where the distance only grows with z.
    pub fn angular_diameter_peak(&self) -> Found<Redshift> {
        let (track, curvature) = (self.track(Kind::Light)?, self.budget().curvature);
        let slope = |z: f64| {
            let chi = track.before_today(self.expansion(), z);
            let rate = self.expansion().rate(1.0 + z);
            excess(
                (1.0 + z) * area_radius_slope(chi, curvature),
                rate * area_radius(chi, curvature),
            )
        };
        let found = self.outward(STEP, &slope);
        found.ok_or_else(|| undefined("the angular-diameter distance of this model only grows with z"))
    }

    fn angular(&self, track: &Track, z: f64) -> f64 {
        area_radius(track.before_today(self.expansion(), z), self.budget().curvature) / (1.0 + z)
    }

    fn no_such_angular_distance(
        &self,
        distance: Length,
        peak: Option<Redshift>,
    ) -> crate::model::DomainError {
        let most = peak.and_then(|z| Some((z, self.angular_diameter_distance(z).ok()?)));
        match most {
            Some((z, largest)) => undefined(format_args!(
                "no object has an angular-diameter distance of {}: the largest is {} at z = {:.6}",
                in_mpc(distance.value),
                in_mpc(largest.value),
                z.get()
            )),
            None => self.never(format_args!(
                "an angular-diameter distance of {}",
                in_mpc(distance.value)
            )),
        }
    }

    /// The redshift at which an integral from today has a value.
    pub(super) fn at_integral(&self, kind: Kind, wanted: f64) -> Found<Option<Redshift>> {
        let track = self.track(kind)?;
        if wanted == 0.0 {
            return Ok(Some(Redshift::TODAY));
        }
        let value = |z: f64| track.before_today(self.expansion(), z) - wanted;
        let step = if wanted > 0.0 { STEP } else { 1.0 / STEP };
        Ok(self.outward(step, &value))
    }

    /// The first redshift, going out from today, where `f` changes sign.
    pub(super) fn outward(&self, step: f64, f: &impl Fn(f64) -> f64) -> Option<Redshift> {
        self.outward_from(0.0, step, f)
    }

    /// The same, going out from `start`.
    fn outward_from(&self, start: f64, step: f64, f: &impl Fn(f64) -> f64) -> Option<Redshift> {
        let history = self.history().ok()?;
        let end = if step > 1.0 {
            history.past.place(END)
        } else {
            history.future.place(1.0 / END)
        };
        let beyond = |s: f64| if step > 1.0 { s >= end } else { s <= end };
        let mut here = start;
        let value = f(here);
        if value == 0.0 {
            return Redshift::new(here).ok();
        }
        let mut stretch = 1.0 + here;
        while !beyond(stretch) {
            stretch = if beyond(stretch * step) {
                end
            } else {
                stretch * step
            };
            let next = stretch - 1.0;
            let next_value = f(next);
            if next_value.is_nan() || next == here {
                return None;
            }
            if (next_value > 0.0) != (value > 0.0) || next_value == 0.0 {
                return bracketed(here, next, f).and_then(|z| Redshift::new(z).ok());
            }
            here = next;
        }
        None
    }

    /// “this model never had …”, with where it begins and ends.
    pub(super) fn never(&self, what: std::fmt::Arguments<'_>) -> crate::model::DomainError {
        let Ok(history) = self.history() else {
            return undefined(format_args!("no redshift has {what}"));
        };
        let span = match (history.past, history.future) {
            (Edge::Open, Edge::Open) => {
                return undefined(format_args!("no redshift has {what} in this model"));
            }
            (Edge::Turn(s), _) => format!("it bounced at z = {:.6}", s - 1.0),
            (_, Edge::Turn(s)) => format!("it turns round at z = {:.6}", s - 1.0),
            (Edge::Undefined(s), _) | (_, Edge::Undefined(s)) => {
                format!("w(z) has no value beyond z = {:.6}", s - 1.0)
            }
        };
        undefined(format_args!("no redshift has {what} in this model: {span}"))
    }
}

/// `a − b` relative to their sizes, above zero where it drowns in rounding:
/// a distance that only approaches its limit has no maximum.
pub(super) fn excess(a: f64, b: f64) -> f64 {
    const ROUNDING: f64 = 1e-13;
    let difference = (a - b) / (a.abs() + b.abs());
    if difference.abs() < ROUNDING {
        ROUNDING
    } else {
        difference
    }
}

/// A distance in metres that must be positive.
fn positive(distance: Length, what: &str) -> Found<f64> {
    if distance.value > 0.0 && distance.value.is_finite() {
        Ok(distance.value)
    } else {
        Err(undefined(format_args!(
            "a {what} is positive, and this is {}",
            in_mpc(distance.value)
        )))
    }
}
