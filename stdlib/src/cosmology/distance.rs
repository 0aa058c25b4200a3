//! Distances and volumes (Hogg 1999, astro-ph/9905116).

mod entries;

pub use entries::ENTRIES;

use super::geometry::{area_radius, volume};
use super::{Found, Length, Redshift, Time, Volume, finite, length, undefined};
use crate::constants::values::MEGAPARSEC;
use crate::model::Model;
use crate::numerics::quadrature::legendre;
use uom::si::volume::cubic_meter;

/// Two redshifts closer than this, relative to 1 + z, are integrated between
/// directly: the difference of two distances would cancel.
const CLOSE: f64 = 0.125;

impl Model {
    /// Comoving distance along the line of sight to redshift `z`.
    ///
    /// `D_C = (c/H0) ∫₀ᶻ dz′ / E(z′)`; negative for z < 0.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    ///
    /// # Accuracy
    /// Relative error ≤ 1e-12 for 0 < z ≤ 1e9: `tests/accuracy.rs`.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 15.
    #[inline]
    pub fn comoving_distance(&self, z: Redshift) -> Found<Length> {
        Ok(length(self.light(z)? * self.hubble_length_m()))
    }

    /// Comoving distance across the line of sight, `D_M`: the comoving
    /// circumference at z over 2π.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 16.
    #[inline]
    pub fn transverse_comoving_distance(&self, z: Redshift) -> Found<Length> {
        Ok(length(self.across(z)? * self.hubble_length_m()))
    }

    /// Angular-diameter distance, `D_A = D_M/(1+z)`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 18.
    #[inline]
    pub fn angular_diameter_distance(&self, z: Redshift) -> Found<Length> {
        Ok(length(self.across(z)? * self.hubble_length_m() / z.stretch()))
    }

    /// Angular-diameter distance from an observer at `z1` to an object behind
    /// at `z2`.
    ///
    /// # Errors
    /// Where z2 < z1, or the model never had one of them.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 19 (which holds for Ωk ≥ 0; this for
    /// any).
    pub fn angular_diameter_distance_between(&self, z1: Redshift, z2: Redshift) -> Found<Length> {
        let radius = area_radius(self.light_between(z1, z2)?, self.budget().curvature);
        Ok(length(radius * self.hubble_length_m() / z2.stretch()))
    }

    /// Luminosity distance, `D_L = (1+z) D_M`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 21.
    #[inline]
    pub fn luminosity_distance(&self, z: Redshift) -> Found<Length> {
        Ok(length(self.across(z)? * self.hubble_length_m() * z.stretch()))
    }

    /// Distance modulus in magnitudes, `μ = 5 log₁₀(D_L/10 pc)`.
    ///
    /// # Errors
    /// For z ≤ 0, and where the model never had this redshift.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 25.
    pub fn distance_modulus(&self, z: Redshift) -> Found<f64> {
        if z <= Redshift::TODAY {
            return Err(undefined(format_args!(
                "a distance modulus needs an object at z > 0, and z is {}",
                z.get()
            )));
        }
        let distance_mpc = self.luminosity_distance(z)?.value / MEGAPARSEC;
        finite(5.0 * libm::log10(distance_mpc) + 25.0)
    }

    /// Volume-averaged distance of isotropic baryon acoustic oscillations,
    /// `D_V = (z D_H(z) D_M²)^(1/3)`, comoving.
    ///
    /// # Errors
    /// For z < 0, and where the model never had this redshift.
    ///
    /// # Source
    /// Eisenstein et al. 2005, ApJ 633, 560, eq. 2.
    pub fn volume_distance(&self, z: Redshift) -> Found<Length> {
        self.seen(z)?;
        let across = self.across(z)?;
        let cube = z.get() * across * across / self.expansion_ratio(z)?;
        Ok(length(libm::cbrt(cube) * self.hubble_length_m()))
    }

    /// Comoving Hubble distance `D_H = c/H(z)` (c/H0 today).
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn hubble_distance(&self, z: Redshift) -> Found<Length> {
        self.hubble_radius(z)
    }

    /// Alcock–Paczyński parameter `F_AP = D_M/D_H(z)`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    ///
    /// # Source
    /// Alcock & Paczyński 1979, Nature 281, 358.
    pub fn alcock_paczynski(&self, z: Redshift) -> Found<f64> {
        finite(self.across(z)? * self.expansion_ratio(z)?)
    }

    /// Time-delay distance of a lens, `(1+z_l) D_A(z_l) D_A(z_s)/D_A(z_l, z_s)`.
    ///
    /// # Errors
    /// Unless z_s > z_l > 0.
    ///
    /// # Source
    /// Suyu et al. 2010, ApJ 711, 201, eq. 6.
    pub fn time_delay_distance(&self, lens: Redshift, source: Redshift) -> Found<Length> {
        self.seen(lens)?;
        let between = self.angular_diameter_distance_between(lens, source)?.value;
        if between == 0.0 {
            return Err(undefined(
                "a lens and a source at the same redshift delay nothing",
            ));
        }
        let (near, far) = (
            self.angular_diameter_distance(lens)?,
            self.angular_diameter_distance(source)?,
        );
        Ok(length(finite(lens.stretch() * near.value * far.value / between)?))
    }

    /// Comoving volume within redshift `z` over the whole sky.
    ///
    /// # Errors
    /// For z < 0, and where the model never had this redshift.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 29.
    pub fn comoving_volume(&self, z: Redshift) -> Found<Volume> {
        self.seen(z)?;
        let ball = volume(self.light(z)?, self.budget().curvature);
        Ok(self.cubic(ball))
    }

    /// Comoving volume between two redshifts over the whole sky.
    ///
    /// # Errors
    /// Unless 0 ≤ z1 ≤ z2.
    pub fn comoving_volume_between(&self, z1: Redshift, z2: Redshift) -> Found<Volume> {
        self.seen(z1)?;
        let depth = self.light_between(z1, z2)?;
        let (near, far) = (self.light(z1)?, self.light(z2)?);
        let curvature = self.budget().curvature;
        if depth < CLOSE * far {
            // 4π ∫ S² dχ over the thin shell.
            let area = |chi: f64| {
                let radius = area_radius(chi, curvature);
                4.0 * std::f64::consts::PI * radius * radius
            };
            return Ok(self.cubic(depth * legendre(0.0, 1.0, |part| area(near + part * depth))));
        }
        Ok(self.cubic(volume(far, curvature) - volume(near, curvature)))
    }

    /// Comoving volume per unit redshift and steradian, `D_H(z) D_M²`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    ///
    /// # Source
    /// Hogg 1999, astro-ph/9905116, eq. 28.
    pub fn differential_volume(&self, z: Redshift) -> Found<Volume> {
        let across = self.across(z)?;
        Ok(self.cubic(finite(across * across / self.expansion_ratio(z)?)?))
    }

    /// Proper distance today to what is seen at z: what D_C is in metres.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn proper_distance(&self, z: Redshift) -> Found<Length> {
        self.comoving_distance(z)
    }

    /// Proper distance of what is seen at z when its light was emitted,
    /// `D_C/(1+z)`.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn proper_distance_then(&self, z: Redshift) -> Found<Length> {
        Ok(length(self.light(z)? * self.hubble_length_m() / z.stretch()))
    }

    /// Light travel time between two redshifts.
    ///
    /// # Errors
    /// Where the model never had one of them.
    pub fn travel_time(&self, z1: Redshift, z2: Redshift) -> Found<Time> {
        Ok(self.lookback_time(z2)? - self.lookback_time(z1)?)
    }

    /// D_M in units of c/H0.
    #[inline]
    pub(crate) fn across(&self, z: Redshift) -> Found<f64> {
        Ok(area_radius(self.light(z)?, self.budget().curvature))
    }

    /// Comoving distance between two redshifts in units of c/H0.
    pub(crate) fn light_between(&self, z1: Redshift, z2: Redshift) -> Found<f64> {
        if z2 < z1 {
            return Err(undefined(format_args!(
                "an observer at z = {} sees nothing at z = {}: that is later",
                z1.get(),
                z2.get()
            )));
        }
        let (near, far) = (self.light(z1)?, self.light(z2)?);
        if z2.get() - z1.get() < CLOSE * z1.stretch() {
            let expansion = self.expansion();
            let depth = z2.get() - z1.get();
            return Ok(depth * legendre(0.0, 1.0, |part| 1.0 / expansion.rate(z1.stretch() + part * depth)));
        }
        Ok(far - near)
    }

    /// Refuses the future, where nothing is seen.
    pub(crate) fn seen(&self, z: Redshift) -> Found<()> {
        if z < Redshift::TODAY {
            return Err(undefined(format_args!(
                "nothing is seen at z = {}: that is in the future",
                z.get()
            )));
        }
        Ok(())
    }

    /// A volume from units of (c/H0)³.
    pub(super) fn cubic(&self, volume: f64) -> Volume {
        let unit = self.hubble_length_m();
        Volume::new::<cubic_meter>(volume * unit * unit * unit)
    }
}
