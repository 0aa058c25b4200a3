//! Expansion rate, times and densities as functions of redshift.

mod entries;

pub use entries::ENTRIES;

use super::{
    Acceleration, Found, Frequency, Length, MassDensity, Redshift, ThermodynamicTemperature, Time, finite,
    length, time, undefined,
};
use crate::constants::values::{GRAVITATION, SPEED_OF_LIGHT};
use crate::model::Model;
use crate::model::history::Kind;
use crate::numerics::quadrature::legendre;
use crate::numerics::root::bracketed;
use std::f64::consts::PI;
use uom::si::acceleration::meter_per_second_squared;
use uom::si::frequency::hertz;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::thermodynamic_temperature::kelvin;

/// Steps per octave of the searches for epochs.
const SEARCH_RATIO: f64 = 1.090_507_732_665_257_7;
/// Searches go no further: beyond lies only what dominates already.
const SEARCH_END: f64 = 1e12;

impl Model {
    /// `E(z) = H(z)/H0`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn expansion_ratio(&self, z: Redshift) -> Found<f64> {
        self.history()?.admit(z.stretch())?;
        finite(self.expansion().rate(z.stretch()))
    }

    /// Expansion rate `H(z) = H0 E(z)`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn hubble_rate(&self, z: Redshift) -> Found<Frequency> {
        let rate = self.budget().h0_per_s * self.expansion_ratio(z)?;
        Ok(Frequency::new::<hertz>(rate))
    }

    /// `1/H0`.
    pub fn hubble_time(&self) -> Time {
        time(self.hubble_time_s())
    }

    /// Proper radius `c/H(z)` at which the recession speed is c.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn hubble_radius(&self, z: Redshift) -> Found<Length> {
        Ok(length(finite(self.hubble_length_m() / self.expansion_ratio(z)?)?))
    }

    /// Cosmic time since the big bang, `∫_z^∞ dz′/((1+z′) H)`.
    ///
    /// # Errors
    /// Where there was no big bang, or the model never had this redshift.
    ///
    /// # Accuracy
    /// Relative error ≤ 1e-12: `tests/accuracy.rs`.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, sec. 10.
    pub fn age(&self, z: Redshift) -> Found<Time> {
        Ok(time(self.since_beginning(Kind::Time, z)? * self.hubble_time_s()))
    }

    /// Time between z and today, `∫₀ᶻ dz′/((1+z′) H)`; negative for z < 0.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 30.
    pub fn lookback_time(&self, z: Redshift) -> Found<Time> {
        Ok(time(self.before_today(Kind::Time, z)? * self.hubble_time_s()))
    }

    /// Conformal time since the big bang, `∫_z^∞ dz′/H` (a = 1 today).
    ///
    /// # Errors
    /// Where it is infinite, or there was no big bang.
    pub fn conformal_time(&self, z: Redshift) -> Found<Time> {
        Ok(time(self.since_beginning(Kind::Light, z)? * self.hubble_time_s()))
    }

    /// c times the lookback time.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn light_travel_distance(&self, z: Redshift) -> Found<Length> {
        Ok(length(self.before_today(Kind::Time, z)? * self.hubble_length_m()))
    }

    /// `a = 1/(1+z)`.
    pub fn scale_factor(&self, z: Redshift) -> f64 {
        1.0 / z.stretch()
    }

    /// Critical density `3H²/(8πG)` at z, proper.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn critical_density(&self, z: Redshift) -> Found<MassDensity> {
        self.history()?.admit(z.stretch())?;
        let h0 = self.budget().h0_per_s;
        let density = 3.0 * h0 * h0 * self.expansion().square(z.stretch()) / (8.0 * PI * GRAVITATION);
        Ok(MassDensity::new::<kilogram_per_cubic_meter>(finite(density)?))
    }

    /// Cold matter in units of the critical density at z.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn cold_fraction(&self, z: Redshift) -> Found<f64> {
        self.fraction(z, |s| self.budget().cold * (s * s * s))
    }

    /// Matter in units of the critical density at z: cold matter and those
    /// massive neutrinos that are matter today.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn matter_fraction(&self, z: Redshift) -> Found<f64> {
        self.fraction(z, |s| self.budget().cold * (s * s * s) + self.matter_neutrinos(s))
    }

    /// Baryons in units of the critical density at z.
    ///
    /// # Errors
    /// Where the model does not say how much of its matter is baryonic.
    pub fn baryon_fraction(&self, z: Redshift) -> Found<f64> {
        let baryons = self.baryons()?;
        self.fraction(z, |s| baryons * (s * s * s))
    }

    /// Dark energy in units of the critical density at z.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn dark_energy_fraction(&self, z: Redshift) -> Found<f64> {
        self.fraction(z, |s| self.expansion().dark.at(s))
    }

    /// Radiation in units of the critical density at z: photons and those
    /// neutrinos that are not matter today.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn radiation_fraction(&self, z: Redshift) -> Found<f64> {
        self.fraction(z, |s| {
            let massless = (self.budget().photons + self.budget().massless) * (s * s) * (s * s);
            massless + self.expansion().massive(s) - self.matter_neutrinos(s)
        })
    }

    /// Photons in units of the critical density at z.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn photon_fraction(&self, z: Redshift) -> Found<f64> {
        self.fraction(z, |s| self.budget().photons * (s * s) * (s * s))
    }

    /// All neutrinos in units of the critical density at z.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn neutrino_fraction(&self, z: Redshift) -> Found<f64> {
        self.fraction(z, |s| {
            self.budget().massless * (s * s) * (s * s) + self.expansion().massive(s)
        })
    }

    /// `Ωk(z)`, the share of curvature.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn curvature_fraction(&self, z: Redshift) -> Found<f64> {
        self.fraction(z, |s| self.budget().curvature * (s * s))
    }

    fn fraction(&self, z: Redshift, density: impl Fn(f64) -> f64) -> Found<f64> {
        self.history()?.admit(z.stretch())?;
        finite(density(z.stretch()) / self.expansion().square(z.stretch()))
    }

    /// Energy density of the neutrinos that are matter today.
    fn matter_neutrinos(&self, s: f64) -> f64 {
        let matter = self
            .expansion()
            .massive
            .iter()
            .filter(|species| species.is_matter());
        matter.map(|species| species.at(s)).sum()
    }

    /// Ωb.
    ///
    /// # Errors
    /// Where the model does not say how much of its matter is baryonic.
    pub fn baryons(&self) -> Found<f64> {
        let missing =
            || undefined("the model does not say how much of its matter is baryonic: give it ωb or Ωb");
        self.budget().baryons.ok_or_else(missing)
    }

    /// Deceleration parameter `q = −ä a/ȧ²`.
    ///
    /// # Errors
    /// Where the model never had this redshift, or E vanishes there.
    pub fn deceleration(&self, z: Redshift) -> Found<f64> {
        self.history()?.admit(z.stretch())?;
        finite(self.expansion().deceleration(z.stretch()))
    }

    /// Jerk parameter `j = a⃛ a²/ȧ³`.
    ///
    /// # Errors
    /// Where the model never had this redshift, or E vanishes there.
    pub fn jerk(&self, z: Redshift) -> Found<f64> {
        self.history()?.admit(z.stretch())?;
        finite(self.expansion().jerk(z.stretch()))
    }

    /// Temperature of the microwave background at z.
    pub fn cmb_temperature(&self, z: Redshift) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<kelvin>(self.budget().t_cmb_k * z.stretch())
    }

    /// Rate at which the redshift of an object changes while we watch,
    /// `dz/dt₀ = (1+z) H0 − H(z)`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    ///
    /// # Source
    /// Sandage 1962, ApJ 136, 319; Loeb 1998, ApJ 499, L111.
    pub fn redshift_drift(&self, z: Redshift) -> Found<Frequency> {
        self.history()?.admit(z.stretch())?;
        Ok(Frequency::new::<hertz>(finite(
            self.budget().h0_per_s * self.drift(z),
        )?))
    }

    /// The same as a change of velocity, `c (dz/dt₀)/(1+z)`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn velocity_drift(&self, z: Redshift) -> Found<Acceleration> {
        self.history()?.admit(z.stretch())?;
        let drift = SPEED_OF_LIGHT * self.budget().h0_per_s * self.drift(z) / z.stretch();
        Ok(Acceleration::new::<meter_per_second_squared>(finite(drift)?))
    }

    /// `(1+z) − E`; near today, where the difference would cancel, as
    /// `∫₀ᶻ (1 − dE/dz) dz` with `dE/dz = E (1 + q)/(1+z)`.
    fn drift(&self, z: Redshift) -> f64 {
        let expansion = self.expansion();
        if z.get().abs() < 0.01 {
            let slope =
                |z: f64| expansion.rate(1.0 + z) * (1.0 + expansion.deceleration(1.0 + z)) / (1.0 + z);
            return legendre(0.0, z.get(), |z| 1.0 - slope(z));
        }
        z.stretch() - expansion.rate(z.stretch())
    }

    /// Redshift at which radiation (photons and neutrinos) and cold matter
    /// have equal density.
    ///
    /// # Errors
    /// Where they never have.
    pub fn matter_radiation_equality(&self) -> Found<Redshift> {
        let excess = |s: f64| {
            let expansion = self.expansion();
            let fourth = (s * s) * (s * s);
            (expansion.photons + expansion.massless) * fourth + expansion.massive(s)
                - expansion.cold * (s * s * s)
        };
        self.earliest(excess)
            .ok_or_else(|| undefined("radiation and cold matter never have equal density in this model"))
    }

    /// Redshift at which dark energy and cold matter have equal density, the
    /// last time before today or else the first after.
    ///
    /// # Errors
    /// Where they never have.
    pub fn matter_dark_energy_equality(&self) -> Found<Redshift> {
        let excess = |s: f64| self.expansion().dark.at(s) - self.expansion().cold * (s * s * s);
        self.nearest(excess)?
            .ok_or_else(|| undefined("dark energy and cold matter never have equal density in this model"))
    }

    /// Redshift at which the expansion began to accelerate, q = 0; the change
    /// nearest to today, the past before the future.
    ///
    /// # Errors
    /// Where q never changes sign.
    pub fn acceleration_onset(&self) -> Found<Redshift> {
        let q = |s: f64| self.expansion().deceleration(s);
        self.nearest(q)?.ok_or_else(|| {
            undefined("the expansion of this model never changes between slowing and accelerating")
        })
    }

    /// The sign change nearest to today, first into the past.
    fn nearest(&self, f: impl Fn(f64) -> f64) -> Found<Option<Redshift>> {
        let history = self.history()?;
        let past = history.past.place(SEARCH_END);
        let future = history.future.place(1.0 / SEARCH_END);
        let found =
            first_change(SEARCH_RATIO, past, &f).or_else(|| first_change(1.0 / SEARCH_RATIO, future, &f));
        Ok(found.map(Redshift))
    }

    /// A sign change in the past of a function that changes once.
    fn earliest(&self, f: impl Fn(f64) -> f64) -> Option<Redshift> {
        let past = self.history().ok()?.past.place(SEARCH_END);
        first_change(SEARCH_RATIO, past, &f).map(Redshift)
    }
}

/// The redshift of the first sign change from today towards `end`, in steps
/// of `ratio` of s.
pub(super) fn first_change(ratio: f64, end: f64, f: &impl Fn(f64) -> f64) -> Option<f64> {
    let beyond = |s: f64| if ratio > 1.0 { s >= end } else { s <= end };
    let (mut here, mut value) = (1.0, f(1.0));
    while !beyond(here) {
        let next = if beyond(here * ratio) { end } else { here * ratio };
        let next_value = f(next);
        if next_value.is_nan() {
            return None;
        }
        if (value < 0.0) != (next_value < 0.0) && value != 0.0 {
            return bracketed(here - 1.0, next - 1.0, |z| f(1.0 + z));
        }
        (here, value) = (next, next_value);
    }
    None
}
