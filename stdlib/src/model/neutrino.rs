//! The energy of relic neutrinos, exactly.
//!
//! Neutrinos keep the momentum distribution `1/(eˣ + 1)`, x = p c/(k T_ν), with
//! which they decoupled. A species of mass m has, in units of its energy
//! density if it were massless and with `y = m c²/(k T_ν)`,
//!
//! `F(y) = (120/7π⁴) ∫₀^∞ x² √(x² + y²)/(eˣ + 1) dx`
//!
//! (Komatsu et al. 2011, ApJS 192, 18, sec. 3.3, eq. 25, not its fit).
//! The integral is a trapezoidal sum in the variable of `x = exp(t − e⁻ᵗ)`,
//! which converges exponentially. Below y = 2⁻⁸ stands its series, above
//! y = 64 its asymptotic one, and between them a table made once per process.

use crate::numerics::interpolate::Fit;
use std::f64::consts::PI;
use std::sync::OnceLock;

/// `7π⁴/120`: the integral for y = 0.
const MASSLESS: f64 = 7.0 * PI * PI * PI * PI / 120.0;
const EULER: f64 = 0.577_215_664_901_532_9;
const LN_PI: f64 = 1.144_729_885_849_400_2;
const SERIES_BELOW: f64 = 1.0 / 256.0;
const ASYMPTOTIC_ABOVE: f64 = 64.0;
/// Terms of the asymptotic series: the first left out is 1e-17 at y = 64.
const TERMS: usize = 11;

/// Energy density relative to a massless species.
#[inline]
pub fn energy(y: f64) -> f64 {
    if y < SERIES_BELOW {
        series(y)
    } else {
        let fermi = fermi();
        fermi.table.value(y).unwrap_or_else(|| fermi.asymptote(y))
    }
}

/// Pressure over the energy density of a massless species: 1/3 for y = 0.
pub fn pressure(y: f64) -> f64 {
    let nodes = fermi().nodes.iter();
    nodes
        .map(|(x, weight)| weight * x * x / libm::sqrt(x * x + y * y))
        .sum::<f64>()
        / (3.0 * MASSLESS)
}

/// `−y dP/dy` of [`pressure`].
pub fn pressure_fall(y: f64) -> f64 {
    let nodes = fermi().nodes.iter();
    let sum = nodes.map(|(x, weight)| {
        let square = x * x + y * y;
        weight * x * x * y * y / (square * libm::sqrt(square))
    });
    sum.sum::<f64>() / (3.0 * MASSLESS)
}

/// `7π⁴/120 + π²y²/24 + y⁴((ln(y/π) + γ)/16 + 1/64) − y⁵/30`, from the Mellin
/// transform of the integrand; the next term is 0.013 y⁶.
fn series(y: f64) -> f64 {
    let square = y * y;
    let quartic = if y > 0.0 {
        (libm::log(y) - LN_PI + EULER) / 16.0 + 1.0 / 64.0 - y / 30.0
    } else {
        0.0
    };
    1.0 + square * (PI * PI / 24.0 + square * quartic) / MASSLESS
}

/// The quadrature and what is made from it.
struct Fermi {
    /// x, and x²/(eˣ + 1) dx.
    nodes: Vec<(f64, f64)>,
    table: Fit,
    /// Coefficients of y¹⁻²ᵏ.
    terms: [f64; TERMS],
}

fn fermi() -> &'static Fermi {
    static FERMI: OnceLock<Fermi> = OnceLock::new();
    FERMI.get_or_init(|| {
        let nodes = nodes();
        let energy = |y: f64| {
            let sum: f64 = nodes
                .iter()
                .map(|(x, weight)| weight * libm::sqrt(x * x + y * y))
                .sum();
            sum / MASSLESS
        };
        let table = Fit::new(SERIES_BELOW, ASYMPTOTIC_ABOVE, energy).expect("the integral is smooth in y");
        let terms = asymptotic(&nodes);
        Fermi { nodes, table, terms }
    })
}

/// Nodes and weights for the momentum distribution.
fn nodes() -> Vec<(f64, f64)> {
    const STEP: f64 = 1.0 / 12.0;
    let node = |place: i32| {
        let t = STEP * f64::from(place);
        let fall = libm::exp(-t);
        let x = libm::exp(t - fall);
        (x, STEP * (1.0 + fall) * x * x * x / (libm::exp(x) + 1.0))
    };
    (-28..56).map(node).collect()
}

/// `√(x² + y²) = Σ binomial(½, k) x²ᵏ y¹⁻²ᵏ`, integrated term by term.
fn asymptotic(nodes: &[(f64, f64)]) -> [f64; TERMS] {
    let mut terms = [0.0; TERMS];
    let mut binomial = 1.0;
    for (k, term) in terms.iter_mut().enumerate() {
        let moment: f64 = nodes.iter().map(|(x, weight)| weight * power(x * x, k)).sum();
        *term = binomial * moment / MASSLESS;
        binomial *= (0.5 - k as f64) / (k + 1) as f64;
    }
    terms
}

fn power(base: f64, exponent: usize) -> f64 {
    (0..exponent).fold(1.0, |product, _| product * base)
}

impl Fermi {
    fn asymptote(&self, y: f64) -> f64 {
        let square = 1.0 / (y * y);
        y * self.terms.iter().rev().fold(0.0, |sum, term| sum * square + term)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 30-digit quadrature of the definition with a general multiple-precision
    /// library.
    const REFERENCE: &[(f64, f64)] = &[
        (1e-6, 1.0000000000000724),
        (1e-3, 1.0000000723721946),
        (0.0039, 1.0000011007673603),
        (0.004, 1.000001157939937),
        (0.01, 1.0000072366853584),
        (0.1, 1.0007207833053764),
        (0.7, 1.0328143424375573),
        (1.0, 1.0639626203517057),
        (3.3, 1.4959888145531804),
        (10.0, 3.3658091566873826),
        (40.0, 12.743957719668192),
        (63.9, 20.308935484847635),
        (64.1, 20.372300170815066),
        (150.0, 47.611_961_966_872_53),
        (357.5, 113.44830979451535),
        (5000.0, 1586.6097467761033),
        (1e6, 317321.8672380953),
    ];

    #[test]
    fn energy_and_pressure_agree_with_30_digit_quadrature() {
        for (y, expect) in REFERENCE {
            assert!(
                (energy(*y) / expect - 1.0).abs() < 2e-15,
                "y = {y}: {} for {expect}",
                energy(*y)
            );
        }
    }

    #[test]
    fn the_branches_meet() {
        for y in [SERIES_BELOW, ASYMPTOTIC_ABOVE] {
            let (below, above) = (energy(y * (1.0 - 1e-15)), energy(y * (1.0 + 1e-15)));
            assert!(
                (below / above - 1.0).abs() < 1e-14,
                "at y = {y}: {below} and {above}"
            );
        }
    }

    #[test]
    fn pressure_is_a_third_without_mass_and_obeys_conservation() {
        assert!((pressure(0.0) - 1.0 / 3.0).abs() < 1e-15);
        // y dF/dy = F − 3 P: energy is conserved.
        for y in [0.1, 1.0, 7.0, 50.0] {
            let step = 1e-4 * y;
            let slope = y * (energy(y + step) - energy(y - step)) / (2.0 * step);
            assert!((slope - (energy(y) - 3.0 * pressure(y))).abs() < 1e-7 * energy(y));
            let slope = y * (pressure(y + step) - pressure(y - step)) / (2.0 * step);
            assert!((slope + pressure_fall(y)).abs() < 1e-7);
        }
    }
}
