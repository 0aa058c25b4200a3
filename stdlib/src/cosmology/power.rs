//! The linear power spectrum of matter.
//!
//! `P(k, z) = A kⁿ T²(k) D²(z)`, with the transfer function of Eisenstein & Hu
//! 1998 and A such that `σ(8 Mpc/h) = σ8`. For `σ(R)` the spectrum is laid out
//! once on nodes of ln k, so that any radius is a sum over them:
//!
//! `σ²(R) = ∫ k³P/(2π²) W²(kR) d ln k,  W(x) = 3 (sin x − x cos x)/x³`
//!
//! Beyond x = 75 stands the mean of W² over a period.

mod entries;
pub mod transfer;

pub use entries::ENTRIES;

use super::{Found, Redshift, Volume, finite, undefined};
use crate::constants::values::MEGAPARSEC;
use crate::model::parameters::id;
use crate::model::{DomainError, Model};
use crate::numerics::quadrature::points;
use std::f64::consts::PI;
use std::sync::OnceLock;
use transfer::Transfer;
use uom::si::volume::cubic_meter;

/// ln k of the nodes in 1/Mpc: from far beyond the horizon to a millionth of
/// a megaparsec.
const RANGE: (f64, f64) = (-16.2, 13.8);
/// Width of a panel of 16 nodes in ln k: resolves W to x = 75 and the
/// acoustic oscillations everywhere.
const PANEL: f64 = 0.1;
/// Between these x the mean of W² takes over, smoothly, so that no end of an
/// oscillation is left.
const MEAN_FROM: f64 = 25.0;
const MEAN_TO: f64 = 75.0;

/// What is tabulated of the spectrum.
pub(crate) struct Spectrum {
    transfer: Transfer,
    tilt: f64,
    /// A, in units of Mpc to the power that makes P a volume.
    amplitude: f64,
    /// k in 1/Mpc, and k³P/(2π²) d ln k.
    nodes: Vec<(f64, f64)>,
}

/// The spectrum is made on first use.
#[derive(Default)]
pub(crate) struct SpectrumCell(OnceLock<Result<Spectrum, DomainError>>);

impl Spectrum {
    fn new(model: &Model) -> Found<Spectrum> {
        let sigma8 = model.sigma8()?;
        let tilt = super::template::quoted(model, id::NS, "ns")?;
        let transfer = model.transfer_function()?;
        let mut spectrum = Spectrum {
            transfer,
            tilt,
            amplitude: 1.0,
            nodes: Vec::new(),
        };
        spectrum.nodes = spectrum.lay_out();
        let (variance, _) = spectrum.variance(8.0 / model.budget().h);
        spectrum.amplitude = finite(sigma8 * sigma8 / variance)?;
        let amplitude = spectrum.amplitude;
        spectrum
            .nodes
            .iter_mut()
            .for_each(|(_, weight)| *weight *= amplitude);
        Ok(spectrum)
    }

    /// Nodes and weights in ln k.
    fn lay_out(&self) -> Vec<(f64, f64)> {
        let panels = ((RANGE.1 - RANGE.0) / PANEL).round() as usize;
        let mut nodes = Vec::with_capacity(points().len() * panels);
        for panel in 0..panels {
            let middle = RANGE.0 + PANEL * (panel as f64 + 0.5);
            for (point, weight) in points() {
                let x = middle + 0.5 * PANEL * point;
                let k = libm::exp(x);
                let transfer = self.transfer.full(k);
                let power = libm::exp((3.0 + self.tilt) * x) / (2.0 * PI * PI);
                nodes.push((k, 0.5 * PANEL * weight * power * transfer * transfer));
            }
        }
        nodes
    }

    /// P at k in 1/Mpc and z = 0, in Mpc³, by a transfer function.
    fn power_mpc3(&self, k_per_mpc: f64, transfer: f64) -> f64 {
        self.amplitude * libm::pow(k_per_mpc, self.tilt) * transfer * transfer
    }

    /// `σ²` and `dσ²/d ln R` at z = 0 for a radius in Mpc.
    fn variance(&self, radius_mpc: f64) -> (f64, f64) {
        let (mut sum, mut slope) = (0.0, 0.0);
        for (k, weight) in &self.nodes {
            let (square, change) = window(k * radius_mpc);
            sum += weight * square;
            slope += weight * change;
        }
        (sum, slope)
    }
}

/// `W²` and `dW²/d ln x`, passing over smoothly to their means.
fn window(x: f64) -> (f64, f64) {
    if x < MEAN_FROM {
        return window_exact(x);
    }
    let inverse = 1.0 / (x * x);
    let mean = 4.5 * inverse * inverse * (1.0 + inverse);
    let mean_slope = -4.5 * inverse * inverse * (4.0 + 6.0 * inverse);
    if x >= MEAN_TO {
        return (mean, mean_slope);
    }
    let t = (x - MEAN_FROM) / (MEAN_TO - MEAN_FROM);
    let blend = t * t * t * (10.0 + t * (6.0 * t - 15.0));
    let (square, slope) = window_exact(x);
    (
        square + blend * (mean - square),
        slope + blend * (mean_slope - slope),
    )
}

fn window_exact(x: f64) -> (f64, f64) {
    if x < 0.02 {
        let square = x * x;
        let w = 1.0 - square / 10.0 * (1.0 - square / 28.0);
        return (w * w, -2.0 * w * square / 5.0 * (1.0 - square / 14.0));
    }
    let inverse = 1.0 / (x * x);
    let (sine, cosine) = (libm::sin(x) / x, libm::cos(x));
    let w = 3.0 * inverse * (sine - cosine);
    // x W′ = −3 j₂(x), j₂ = (3/x² − 1) sin x/x − 3 cos x/x².
    let second = (3.0 * inverse - 1.0) * sine - 3.0 * inverse * cosine;
    (w * w, -6.0 * w * second)
}

impl Model {
    fn spectrum(&self) -> Found<&Spectrum> {
        let cell = self.power_cell();
        cell.0
            .get_or_init(|| Spectrum::new(self))
            .as_ref()
            .map_err(Clone::clone)
    }

    /// The transfer function of the model.
    ///
    /// # Errors
    /// Where it has no baryons, dark matter or radiation.
    pub fn transfer_function(&self) -> Found<Transfer> {
        let budget = self.budget();
        let square = budget.h * budget.h;
        let matter = (budget.cold + budget.massive_matter) * square;
        let baryons = self.baryons()? * square;
        if budget.t_cmb_k == 0.0 {
            return Err(undefined(
                "the transfer function needs radiation: give the model T_CMB",
            ));
        }
        if baryons == 0.0 || baryons >= matter {
            return Err(undefined(
                "the transfer function needs both baryons and dark matter",
            ));
        }
        Ok(Transfer::new(matter, baryons, budget.t_cmb_k))
    }

    /// Linear power spectrum at comoving wave number k, in 1/m.
    ///
    /// # Errors
    /// Where the model does not say σ8, ns or its baryons, and for k ≤ 0.
    ///
    /// # Source
    /// Eisenstein & Hu 1998, ApJ 496, 605.
    pub fn linear_power(&self, k_per_m: f64, z: Redshift) -> Found<Volume> {
        let k = wave_number_per_mpc(k_per_m)?;
        let spectrum = self.spectrum()?;
        self.grown(spectrum.power_mpc3(k, spectrum.transfer.full(k)), z)
    }

    /// The same without acoustic oscillations.
    ///
    /// # Errors
    /// As [`Model::linear_power`].
    pub fn linear_power_smooth(&self, k_per_m: f64, z: Redshift) -> Found<Volume> {
        let k = wave_number_per_mpc(k_per_m)?;
        let spectrum = self.spectrum()?;
        self.grown(spectrum.power_mpc3(k, spectrum.transfer.smooth(k)), z)
    }

    fn grown(&self, power_mpc3: f64, z: Redshift) -> Found<Volume> {
        let growth = self.growth_factor(z)?;
        let unit = MEGAPARSEC * MEGAPARSEC * MEGAPARSEC;
        Ok(Volume::new::<cubic_meter>(finite(
            power_mpc3 * growth * growth * unit,
        )?))
    }

    /// Linear rms density contrast in spheres of a comoving radius in m.
    ///
    /// # Errors
    /// Where the model does not say σ8, ns or its baryons, and for radii
    /// outside 1e-4 Mpc to 1e5 Mpc.
    ///
    /// # Accuracy
    /// Relative error ≤ 1e-6 against adaptive quadrature: `tests/structure.rs`.
    pub fn rms_contrast(&self, radius_m: f64, z: Redshift) -> Found<f64> {
        let (variance, _) = self.variance(radius_m)?;
        Ok(libm::sqrt(variance) * self.growth_factor(z)?)
    }

    /// `d ln σ/d ln R` at a comoving radius in m.
    ///
    /// # Errors
    /// As [`Model::rms_contrast`].
    pub fn rms_contrast_slope(&self, radius_m: f64) -> Found<f64> {
        let (variance, slope) = self.variance(radius_m)?;
        Ok(0.5 * slope / variance)
    }

    fn variance(&self, radius_m: f64) -> Found<(f64, f64)> {
        let radius_mpc = radius_m / MEGAPARSEC;
        if !(1e-4..=1e5).contains(&radius_mpc) {
            return Err(undefined(format_args!(
                "the linear spectrum is laid out for radii from 1e-4 Mpc to 1e5 Mpc, and this is {radius_mpc:e} Mpc"
            )));
        }
        Ok(self.spectrum()?.variance(radius_mpc))
    }
}

/// A wave number in 1/Mpc from one in 1/m, which must be positive.
pub(super) fn wave_number_per_mpc(k_per_m: f64) -> Found<f64> {
    let k = k_per_m * MEGAPARSEC;
    if k > 0.0 && k.is_finite() {
        Ok(k)
    } else {
        Err(undefined(format_args!(
            "a wave number is positive, and this is {k} Mpc⁻¹"
        )))
    }
}
