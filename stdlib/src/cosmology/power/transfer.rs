//! The transfer function of Eisenstein & Hu 1998, ApJ 496, 605, in its
//! notation; equation numbers are its own. Wave numbers are in 1/Mpc and
//! lengths in Mpc. Massive neutrinos count as cold matter: the paper has none.

use crate::cosmology::early::drag_fit;
use std::f64::consts::E;

/// Everything in the fit that does not depend on k.
pub struct Transfer {
    baryon_share: f64,
    k_eq: f64,
    sound_horizon: f64,
    k_silk: f64,
    alpha_c: f64,
    beta_c: f64,
    alpha_b: f64,
    beta_b: f64,
    beta_node: f64,
    smooth: Smooth,
}

/// What the form without oscillations needs (eq. 26 to 31).
struct Smooth {
    sound_horizon: f64,
    alpha_gamma: f64,
    /// ωm/Θ² in 1/Mpc: eq. 28, with k in 1/Mpc and Γ = Ωm h, is k over this.
    shape_per_mpc: f64,
}

impl Transfer {
    /// The fit for ωm, ωb, the temperature of the microwave background.
    pub(crate) fn new(matter: f64, baryons: f64, t_cmb_k: f64) -> Transfer {
        let theta = t_cmb_k / 2.7;
        let square = theta * theta;
        let share = baryons / matter;
        let z_eq = 2.50e4 * matter / (square * square); // eq. 2
        let k_eq = 0.0746 * matter / square; // eq. 3
        let z_drag = drag_fit(matter, baryons); // eq. 4
        let loading = |z: f64| 31.5 * baryons / (square * square) * 1e3 / z; // eq. 5
        let (at_drag, at_eq) = (loading(z_drag), loading(z_eq));
        // eq. 6
        let ratio = (libm::sqrt(1.0 + at_drag) + libm::sqrt(at_drag + at_eq)) / (1.0 + libm::sqrt(at_eq));
        let sound_horizon = 2.0 / (3.0 * k_eq) * libm::sqrt(6.0 / at_eq) * libm::log(ratio);
        // eq. 7
        let k_silk = 1.6
            * libm::pow(baryons, 0.52)
            * libm::pow(matter, 0.73)
            * (1.0 + libm::pow(10.4 * matter, -0.95));
        // eq. 11
        let a1 = libm::pow(46.9 * matter, 0.670) * (1.0 + libm::pow(32.1 * matter, -0.532));
        let a2 = libm::pow(12.0 * matter, 0.424) * (1.0 + libm::pow(45.0 * matter, -0.582));
        let alpha_c = libm::pow(a1, -share) * libm::pow(a2, -share * share * share);
        // eq. 12
        let b1 = 0.944 / (1.0 + libm::pow(458.0 * matter, -0.708));
        let b2 = libm::pow(0.395 * matter, -0.0266);
        let beta_c = 1.0 / (1.0 + b1 * (libm::pow(1.0 - share, b2) - 1.0));
        // eq. 14 and 15
        let drive = drive((1.0 + z_eq) / (1.0 + z_drag));
        let alpha_b = 2.07 * k_eq * sound_horizon * libm::pow(1.0 + at_drag, -0.75) * drive;
        // eq. 23 and 24
        let beta_node = 8.41 * libm::pow(matter, 0.435);
        let steep = 17.2 * matter;
        let beta_b = 0.5 + share + (3.0 - 2.0 * share) * libm::sqrt(steep * steep + 1.0);
        Transfer {
            baryon_share: share,
            k_eq,
            sound_horizon,
            k_silk,
            alpha_c,
            beta_c,
            alpha_b,
            beta_b,
            beta_node,
            smooth: Smooth::new(matter, baryons, square),
        }
    }

    /// The whole transfer function, eq. 16.
    pub fn full(&self, k_per_mpc: f64) -> f64 {
        let ks = k_per_mpc * self.sound_horizon;
        self.baryon_share * self.baryons(k_per_mpc, ks) + (1.0 - self.baryon_share) * self.cold(k_per_mpc, ks)
    }

    /// The form without acoustic oscillations, eq. 29.
    pub fn smooth(&self, k_per_mpc: f64) -> f64 {
        self.smooth.at(k_per_mpc)
    }

    /// The sound horizon of the fit, eq. 6, in Mpc.
    pub fn sound_horizon_mpc(&self) -> f64 {
        self.sound_horizon
    }

    /// eq. 17 and 18.
    fn cold(&self, k: f64, ks: f64) -> f64 {
        let x = ks / 5.4;
        let weight = 1.0 / (1.0 + (x * x) * (x * x));
        weight * self.pressureless(k, 1.0, self.beta_c)
            + (1.0 - weight) * self.pressureless(k, self.alpha_c, self.beta_c)
    }

    /// eq. 21 and 22.
    fn baryons(&self, k: f64, ks: f64) -> f64 {
        let node = self.beta_node / ks;
        let phase = ks / libm::cbrt(1.0 + node * node * node);
        let bessel = if phase < 1e-4 {
            1.0 - phase * phase / 6.0
        } else {
            libm::sin(phase) / phase
        };
        let rise = self.beta_b / ks;
        let damping = libm::exp(-libm::pow(k / self.k_silk, 1.4));
        let early = self.pressureless(k, 1.0, 1.0) / (1.0 + (ks / 5.2) * (ks / 5.2));
        (early + self.alpha_b / (1.0 + rise * rise * rise) * damping) * bessel
    }

    /// eq. 10, 19 and 20.
    fn pressureless(&self, k: f64, alpha: f64, beta: f64) -> f64 {
        let q = k / (13.41 * self.k_eq);
        let curve = 14.2 / alpha + 386.0 / (1.0 + 69.9 * libm::pow(q, 1.08));
        let log = libm::log(E + 1.8 * beta * q);
        log / (log + curve * q * q)
    }
}

/// G(y) of eq. 15.
fn drive(y: f64) -> f64 {
    let root = libm::sqrt(1.0 + y);
    y * (-6.0 * root + (2.0 + 3.0 * y) * libm::log((root + 1.0) / (root - 1.0)))
}

impl Smooth {
    fn new(matter: f64, baryons: f64, theta_square: f64) -> Smooth {
        let share = baryons / matter;
        let sound_horizon =
            44.5 * libm::log(9.83 / matter) / libm::sqrt(1.0 + 10.0 * libm::pow(baryons, 0.75)); // eq. 26
        let alpha_gamma =
            1.0 - 0.328 * libm::log(431.0 * matter) * share + 0.38 * libm::log(22.3 * matter) * share * share; // eq. 31
        Smooth {
            sound_horizon,
            alpha_gamma,
            shape_per_mpc: matter / theta_square,
        }
    }

    fn at(&self, k: f64) -> f64 {
        let x = 0.43 * k * self.sound_horizon;
        let effective = self.alpha_gamma + (1.0 - self.alpha_gamma) / (1.0 + (x * x) * (x * x)); // eq. 30
        let q = k / (self.shape_per_mpc * effective); // eq. 28
        let log = libm::log(2.0 * E + 1.8 * q);
        log / (log + (14.2 + 731.0 / (1.0 + 62.5 * q)) * q * q) // eq. 29
    }
}
