//! Haloes of dark matter: radii, masses, concentrations and counts.

mod entries;

pub use entries::ENTRIES;

use super::{Found, Length, Redshift, Velocity, finite, length, undefined};
use crate::constants::values::{BOLTZMANN, GRAVITATION, PROTON_MASS, SOLAR_MASS};
use crate::model::Model;
use crate::numerics::quadrature::legendre;
use std::f64::consts::PI;
use uom::si::velocity::meter_per_second;

/// Linear contrast at which a sphere collapses in a universe of matter,
/// `(3/20)(12π)^(2/3)`: Gunn & Gott 1972, ApJ 176, 1.
pub const COLLAPSE: f64 = 1.686_470_199_841_145_4;
/// Counts above a mass are summed to this many e-foldings further: haloes of
/// e²⁰ times the mass are rarer than any.
const HEAVIEST: f64 = 20.0;

/// How the edge of a halo is defined.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Edge {
    /// Mean density this many times the critical density at z.
    Critical(f64),
    /// Mean density this many times the mean density of matter at z.
    Mean(f64),
    /// Mean density of virial equilibrium: Bryan & Norman 1998.
    Virial,
}

/// How many haloes there are.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Counts {
    /// Press & Schechter 1974, ApJ 187, 425.
    PressSchechter,
    /// Sheth & Tormen 1999, MNRAS 308, 119.
    ShethTormen,
}

impl Counts {
    /// `f(ν)` with `∫ f d ln ν = 1`.
    fn multiplicity(self, nu: f64) -> f64 {
        match self {
            Counts::PressSchechter => libm::sqrt(2.0 / PI) * nu * libm::exp(-0.5 * nu * nu),
            Counts::ShethTormen => {
                let (norm, a, p) = (0.3222, 0.707, 0.3);
                let square = a * nu * nu;
                let shape = 1.0 + libm::pow(square, -p);
                norm * libm::sqrt(2.0 * square / PI) * shape * libm::exp(-0.5 * square)
            }
        }
    }
}

impl Model {
    /// Mean density of a virialised halo over the critical density at z.
    ///
    /// # Errors
    /// Outside the range of the fit, Ωm(z) ≤ 1.
    ///
    /// # Source
    /// Bryan & Norman 1998, ApJ 495, 80, eq. 6.
    pub fn virial_overdensity(&self, z: Redshift) -> Found<f64> {
        let x = self.matter_fraction(z)? - 1.0;
        // Rounding may put an Einstein–de Sitter universe a hair above 1.
        if x > 1e-9 {
            return Err(undefined(format_args!(
                "the virial overdensity is fitted for Ωm(z) ≤ 1, and here it is {:.4}",
                x + 1.0
            )));
        }
        let (linear, square) = if self.budget().dark == 0.0 {
            (60.0, 32.0)
        } else {
            (82.0, 39.0)
        };
        Ok(18.0 * PI * PI + linear * x - square * x * x)
    }

    /// Mean density within a halo's edge, in kg/m³.
    fn edge_density(&self, edge: Edge, z: Redshift) -> Found<f64> {
        let critical = self.critical_density(z)?.value;
        let times = match edge {
            Edge::Critical(times) => times,
            Edge::Mean(times) => times * self.matter_fraction(z)?,
            Edge::Virial => self.virial_overdensity(z)?,
        };
        if times > 0.0 && times.is_finite() {
            Ok(times * critical)
        } else {
            Err(undefined(format_args!(
                "an overdensity is positive, and this is {times}"
            )))
        }
    }

    /// Proper radius of a halo of a mass in kg.
    ///
    /// # Errors
    /// For masses that are not positive, and where the edge is not defined.
    pub fn halo_radius(&self, mass_kg: f64, edge: Edge, z: Redshift) -> Found<Length> {
        let volume = positive_mass(mass_kg)? / self.edge_density(edge, z)?;
        Ok(length(finite(libm::cbrt(0.75 * volume / PI))?))
    }

    /// Mass in kg within a proper radius in m.
    ///
    /// # Errors
    /// For radii that are not positive, and where the edge is not defined.
    pub fn halo_mass_kg(&self, radius_m: f64, edge: Edge, z: Redshift) -> Found<f64> {
        if !(radius_m > 0.0 && radius_m.is_finite()) {
            return Err(undefined("a halo has a positive radius"));
        }
        let volume = 4.0 / 3.0 * PI * radius_m * radius_m * radius_m;
        finite(volume * self.edge_density(edge, z)?)
    }

    /// Circular speed at the edge of a halo of a mass in kg.
    ///
    /// # Errors
    /// As [`Model::halo_radius`].
    pub fn halo_speed(&self, mass_kg: f64, edge: Edge, z: Redshift) -> Found<Velocity> {
        let radius = self.halo_radius(mass_kg, edge, z)?.value;
        Ok(Velocity::new::<meter_per_second>(finite(libm::sqrt(
            GRAVITATION * mass_kg / radius,
        ))?))
    }

    /// Virial temperature in K, `μ m_p V²/(2k)`.
    ///
    /// # Errors
    /// As [`Model::halo_radius`].
    ///
    /// # Source
    /// Barkana & Loeb 2001, Phys. Rep. 349, 125, eq. 26.
    pub fn virial_temperature_k(&self, mass_kg: f64, z: Redshift, mean_weight: f64) -> Found<f64> {
        let speed = self.halo_speed(mass_kg, Edge::Virial, z)?.value;
        finite(mean_weight * PROTON_MASS * speed * speed / (2.0 * BOLTZMANN))
    }

    /// Concentration `c_200c` of a halo of `M_200c` in kg.
    ///
    /// # Errors
    /// For masses that are not positive.
    ///
    /// # Source
    /// Duffy et al. 2008, MNRAS 390, L64, table 1: NFW, full sample, from
    /// memory.
    pub fn concentration_duffy(&self, mass_kg: f64, z: Redshift) -> Found<f64> {
        let pivot = 2e12 * SOLAR_MASS / self.budget().h;
        let mass = positive_mass(mass_kg)? / pivot;
        finite(5.71 * libm::pow(mass, -0.084) * libm::pow(z.stretch(), -0.47))
    }

    /// Concentration `c_200c` of a halo of `M_200c` in kg.
    ///
    /// # Errors
    /// For masses that are not positive, and z < 0.
    ///
    /// # Source
    /// Dutton & Macciò 2014, MNRAS 441, 3359, eq. 7, 10 and 11, from memory.
    pub fn concentration_dutton(&self, mass_kg: f64, z: Redshift) -> Found<f64> {
        self.seen(z)?;
        let pivot = 1e12 * SOLAR_MASS / self.budget().h;
        let mass = positive_mass(mass_kg)? / pivot;
        let height = 0.520 + (0.905 - 0.520) * libm::exp(-0.617 * libm::pow(z.get(), 1.21));
        let slope = -0.101 + 0.026 * z.get();
        finite(libm::exp10(height + slope * libm::log10(mass)))
    }

    /// Mean comoving density of matter today in kg/m³.
    fn matter_density(&self) -> Found<f64> {
        let matter = self.budget().cold + self.budget().massive_matter;
        if matter == 0.0 {
            return Err(undefined("a model without matter has no haloes"));
        }
        Ok(matter * self.critical_density(Redshift::TODAY)?.value)
    }

    /// Comoving radius of the sphere that holds a mass in kg on average.
    ///
    /// # Errors
    /// For masses that are not positive, and models without matter.
    pub fn lagrangian_radius(&self, mass_kg: f64) -> Found<Length> {
        let volume = positive_mass(mass_kg)? / self.matter_density()?;
        Ok(length(finite(libm::cbrt(0.75 * volume / PI))?))
    }

    /// Peak height `ν = δ_c/σ(M, z)` with δ_c = 1.686.
    ///
    /// # Errors
    /// As [`Model::rms_contrast`].
    pub fn peak_height(&self, mass_kg: f64, z: Redshift) -> Found<f64> {
        let radius = self.lagrangian_radius(mass_kg)?.value;
        finite(COLLAPSE / self.rms_contrast(radius, z)?)
    }

    /// Comoving number density of haloes per e-folding of mass, in 1/m³.
    ///
    /// # Errors
    /// As [`Model::rms_contrast`].
    pub fn halo_counts_per_m3(&self, mass_kg: f64, z: Redshift, counts: Counts) -> Found<f64> {
        let radius = self.lagrangian_radius(mass_kg)?.value;
        let nu = COLLAPSE / self.rms_contrast(radius, z)?;
        // d ln ν/d ln M = −(1/3) d ln σ/d ln R.
        let slope = -self.rms_contrast_slope(radius)? / 3.0;
        finite(self.matter_density()? / mass_kg * counts.multiplicity(nu) * slope)
    }

    /// Comoving number density of haloes above a mass, in 1/m³.
    ///
    /// # Errors
    /// As [`Model::rms_contrast`].
    pub fn halo_counts_above_per_m3(&self, mass_kg: f64, z: Redshift, counts: Counts) -> Found<f64> {
        // Checks the mass and the model before summing.
        self.halo_counts_per_m3(mass_kg, z, counts)?;
        let per_fold = |fold: f64| {
            let mass = mass_kg * libm::exp(fold);
            // Beyond the largest radius of the spectrum there is nothing.
            self.halo_counts_per_m3(mass, z, counts).unwrap_or(0.0)
        };
        let panels = (0..HEAVIEST as u32).map(f64::from);
        Ok(panels.map(|start| legendre(start, start + 1.0, per_fold)).sum())
    }
}

fn positive_mass(mass_kg: f64) -> Found<f64> {
    if mass_kg > 0.0 && mass_kg.is_finite() {
        Ok(mass_kg)
    } else {
        Err(undefined("a halo has a positive mass"))
    }
}
