//! Recombination and the sound horizon.
//!
//! The redshifts of last scattering and of the drag epoch are those of the
//! publication where the model has them and nothing that moves them was
//! changed. Else they are the fits of Hu & Sugiyama 1996 and Eisenstein & Hu
//! 1998, which are 0.2 % and 3.7 % away from a full calculation of
//! recombination: [`Model::notes`] then names the fit.

mod entries;

pub use entries::ENTRIES;

use super::{Found, Length, Redshift, finite, length, undefined};
use crate::model::Model;
use crate::model::parameters::id;
use crate::numerics::quadrature::tail_above;
use std::f64::consts::PI;
use std::sync::atomic::{AtomicBool, Ordering};

/// Which fits a model has been asked for, to be named beside its results.
#[derive(Default)]
pub(crate) struct Fits {
    star: AtomicBool,
    drag: AtomicBool,
}

impl Fits {
    /// The fits used so far, as sentences.
    pub fn notes(&self) -> impl Iterator<Item = String> {
        let star = "z_star by the fit of Hu & Sugiyama 1996, 0.2 % above a full calculation";
        let drag = "z_drag by the fit of Eisenstein & Hu 1998, 3.7 % below a full calculation";
        let used = [(&self.star, star), (&self.drag, drag)];
        let used = used.map(|(flag, note)| flag.load(Ordering::Relaxed).then(|| note.to_owned()));
        used.into_iter().flatten()
    }
}

impl Model {
    /// Redshift of last scattering: the published one, or the fit of Hu &
    /// Sugiyama 1996, ApJ 471, 542, eq. E-1.
    ///
    /// # Errors
    /// Where the model has no baryons or no radiation.
    pub fn last_scattering(&self) -> Found<Redshift> {
        if let Some(published) = self.quoted(id::Z_STAR) {
            return Redshift::new(published);
        }
        let (matter, baryons) = self.plasma()?;
        self.fits().star.store(true, Ordering::Relaxed);
        let first = 0.0783 * libm::pow(baryons, -0.238) / (1.0 + 39.5 * libm::pow(baryons, 0.763));
        let second = 0.560 / (1.0 + 21.1 * libm::pow(baryons, 1.81));
        let z =
            1048.0 * (1.0 + 0.00124 * libm::pow(baryons, -0.738)) * (1.0 + first * libm::pow(matter, second));
        Redshift::new(finite(z)?)
    }

    /// Redshift of the drag epoch: the published one, or the fit of
    /// Eisenstein & Hu 1998, ApJ 496, 605, eq. 4.
    ///
    /// # Errors
    /// Where the model has no baryons or no radiation.
    pub fn drag_epoch(&self) -> Found<Redshift> {
        if let Some(published) = self.quoted(id::Z_DRAG) {
            return Redshift::new(published);
        }
        let (matter, baryons) = self.plasma()?;
        self.fits().drag.store(true, Ordering::Relaxed);
        Redshift::new(finite(drag_fit(matter, baryons))?)
    }

    /// ωm (cold matter: massive neutrinos were radiation then) and ωb.
    fn plasma(&self) -> Found<(f64, f64)> {
        let baryons = self.baryons()?;
        let square = self.budget().h * self.budget().h;
        if self.budget().photons == 0.0 {
            return Err(undefined(
                "a model without radiation has no recombination: give it T_CMB",
            ));
        }
        if baryons == 0.0 {
            return Err(undefined("a model without baryons has no recombination"));
        }
        Ok((self.budget().cold * square, baryons * square))
    }

    /// Comoving sound horizon at z,
    /// `(c/H0) ∫_z^∞ dz′/(E √(3(1+R)))` with `R = 3ρ_b/(4ρ_γ)`.
    ///
    /// # Errors
    /// Where the model has no baryons, no radiation or no big bang.
    ///
    /// # Accuracy
    /// Relative error ≤ 1e-10 against 40-digit quadrature: `tests/accuracy.rs`.
    ///
    /// # Source
    /// Hu & Sugiyama 1996, ApJ 471, 542, eq. 19.
    pub fn sound_horizon(&self, z: Redshift) -> Found<Length> {
        // Also refuses models that never had this redshift or a big bang.
        self.conformal_time(z)?;
        self.plasma()?;
        let loading = 0.75 * self.baryons()? / self.budget().photons;
        let speed = |s: f64| 1.0 / libm::sqrt(3.0 * (1.0 + loading / s));
        let chi = tail_above(z.stretch(), |s| speed(s) / self.expansion().rate(s));
        Ok(length(finite(chi * self.hubble_length_m())?))
    }

    /// Sound horizon at last scattering.
    ///
    /// # Errors
    /// As [`Model::sound_horizon`].
    pub fn sound_horizon_star(&self) -> Found<Length> {
        self.sound_horizon(self.last_scattering()?)
    }

    /// Sound horizon at the drag epoch.
    ///
    /// # Errors
    /// As [`Model::sound_horizon`].
    pub fn sound_horizon_drag(&self) -> Found<Length> {
        self.sound_horizon(self.drag_epoch()?)
    }

    /// Angle of the sound horizon at last scattering, in rad.
    ///
    /// # Errors
    /// As [`Model::sound_horizon`].
    pub fn acoustic_angle_rad(&self) -> Found<f64> {
        let distance = self.transverse_comoving_distance(self.last_scattering()?)?;
        finite(self.sound_horizon_star()?.value / distance.value)
    }

    /// Acoustic scale `l_A = π D_M(z*)/r_s(z*)`.
    ///
    /// # Errors
    /// As [`Model::sound_horizon`].
    pub fn acoustic_scale(&self) -> Found<f64> {
        finite(PI / self.acoustic_angle_rad()?)
    }

    /// Shift parameter `R = √Ωm D_M(z*) H0/c`, of cold matter.
    ///
    /// # Errors
    /// Where z_star does not exist.
    ///
    /// # Source
    /// Bond, Efstathiou & Tegmark 1997, MNRAS 291, L33.
    pub fn shift_parameter(&self) -> Found<f64> {
        let matter = self.budget().cold + self.budget().massive_matter;
        finite(libm::sqrt(matter) * self.across(self.last_scattering()?)?)
    }

    /// Comoving wave number of the horizon at equality, `H(z_eq)/(c (1+z_eq))`,
    /// in 1/m.
    ///
    /// # Errors
    /// Where there was no equality.
    pub fn equality_wave_number_per_m(&self) -> Found<f64> {
        let equality = self.matter_radiation_equality()?;
        finite(self.expansion_ratio(equality)? / equality.stretch() / self.hubble_length_m())
    }
}

/// Eisenstein & Hu 1998, eq. 4, of ωm and ωb.
pub(super) fn drag_fit(matter: f64, baryons: f64) -> f64 {
    let first = 0.313 * libm::pow(matter, -0.419) * (1.0 + 0.607 * libm::pow(matter, 0.674));
    let second = 0.238 * libm::pow(matter, 0.223);
    let base = 1291.0 * libm::pow(matter, 0.251) / (1.0 + 0.659 * libm::pow(matter, 0.828));
    base * (1.0 + first * libm::pow(baryons, second))
}
