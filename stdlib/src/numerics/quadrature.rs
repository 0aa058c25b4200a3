//! Integrals of plain functions of one real variable.
//!
//! The rules are Gauss–Legendre of 16 points, whose nodes come from
//! `gauss-quad`, and an adaptive rule of ours on top: a panel is halved until
//! its two halves agree with the whole. Tails to infinity are summed over
//! panels of the logarithm, where powers become exponentials.

use gauss_quad::GaussLegendre;
use std::num::NonZeroUsize;
use std::sync::OnceLock;

const POINTS: usize = 16;
/// Halvings after which a panel is taken as it is: its width is then below
/// 1e-12 of the whole, too small for any bounded integrand to matter.
const MAX_DEPTH: u32 = 40;
/// Panels that may be halved: a kink needs 40, a rough function some hundred.
const MAX_PANELS: u32 = 2000;
/// Panels of a tail: `e^(3·60)` spans every epoch that `f64` can tell apart.
const TAIL_PANELS: usize = 60;
/// Width of a tail's panel in the logarithm.
const TAIL_WIDTH: f64 = 2.0;

fn rule() -> &'static [(f64, f64); POINTS] {
    static RULE: OnceLock<[(f64, f64); POINTS]> = OnceLock::new();
    RULE.get_or_init(|| {
        let degree = NonZeroUsize::new(POINTS).expect("16 is not zero");
        let mut pairs = [(0.0, 0.0); POINTS];
        for (place, (node, weight)) in pairs.iter_mut().zip(GaussLegendre::new(degree)) {
            *place = (node, weight);
        }
        // The order of summation is part of the result: fix it.
        pairs.sort_by(|a, b| a.0.total_cmp(&b.0));
        pairs
    })
}

/// The points of the rule in (−1, 1) and their weights, in rising order.
pub fn points() -> &'static [(f64, f64); POINTS] {
    rule()
}

/// `∫ₐᵇ f dx` by one 16-point Gauss–Legendre rule: exact to the last digits
/// for a function that is smooth on the scale of the interval.
pub fn legendre(a: f64, b: f64, mut f: impl FnMut(f64) -> f64) -> f64 {
    let (middle, half) = (0.5 * (a + b), 0.5 * (b - a));
    let sum: f64 = rule()
        .iter()
        .map(|(node, weight)| weight * f(middle + half * node))
        .sum();
    half * sum
}

/// `∫ₐᵇ f dx`, halving panels until they agree to `relative` of the whole, or
/// until `MAX_PANELS` were used: what is left then is noise.
pub fn adaptive(a: f64, b: f64, relative: f64, mut f: impl FnMut(f64) -> f64) -> f64 {
    let whole = legendre(a, b, &mut f);
    let mut halving = Halving {
        f,
        tolerance: relative * whole.abs(),
        panels: MAX_PANELS,
    };
    halving.halve(a, b, whole, MAX_DEPTH)
}

struct Halving<F> {
    f: F,
    tolerance: f64,
    panels: u32,
}

impl<F: FnMut(f64) -> f64> Halving<F> {
    fn halve(&mut self, a: f64, b: f64, whole: f64, depth: u32) -> f64 {
        let middle = 0.5 * (a + b);
        let (left, right) = (legendre(a, middle, &mut self.f), legendre(middle, b, &mut self.f));
        let sum = left + right;
        let agrees = (sum - whole).abs() <= self.tolerance.max(4.0 * f64::EPSILON * sum.abs());
        if agrees || depth == 0 || self.panels == 0 || !sum.is_finite() {
            return sum;
        }
        self.panels -= 1;
        // The tolerance is absolute and not halved: errors of smooth panels
        // fall by far more than two, and a kink lives in one panel only.
        self.halve(a, middle, left, depth - 1) + self.halve(middle, b, right, depth - 1)
    }
}

/// `∫ₐ^∞ f ds` for `f` that falls faster than 1/s, `a > 0`. Panels of the
/// logarithm, then the rest as the power law the last panel shows.
pub fn tail_above(a: f64, f: impl FnMut(f64) -> f64) -> f64 {
    tail(libm::log(a), TAIL_WIDTH, f)
}

/// `∫₀ᵃ f ds` for `f` that grows slower than 1/s towards zero.
pub fn tail_below(a: f64, f: impl FnMut(f64) -> f64) -> f64 {
    tail(libm::log(a), -TAIL_WIDTH, f)
}

fn tail(start: f64, width: f64, mut f: impl FnMut(f64) -> f64) -> f64 {
    let mut integrand = |x: f64| {
        let s = libm::exp(x);
        f(s) * s
    };
    let (mut sum, mut x) = (0.0, start);
    let mut panel = f64::INFINITY;
    for _ in 0..TAIL_PANELS {
        let next = legendre(x, x + width, &mut integrand).abs();
        x += width;
        sum += next;
        let ratio = next / panel;
        panel = next;
        if next <= 1e-18 * sum {
            return sum;
        }
        // Geometric series from here on, once the ratio has settled.
        if 0.0 < ratio && ratio < 1.0 && settled(&mut integrand, x, width) {
            return sum + panel * ratio / (1.0 - ratio);
        }
    }
    sum
}

/// Whether the integrand is a pure exponential in x from `x` on, so that its
/// rest may be summed as a geometric series.
fn settled(integrand: &mut impl FnMut(f64) -> f64, x: f64, width: f64) -> bool {
    let values = [-1.0, 0.0, 1.0, 4.0].map(|step| integrand(x + step * width));
    let first = values[1] / values[0];
    let second = values[2] / values[1];
    let third = values[3] / values[2];
    let close = |a: f64, b: f64| (a - b).abs() <= 3e-14 * b.abs().max(a.abs());
    close(first, second) && close(third, second * second * second)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_smooth_panel_is_exact() {
        assert!((legendre(0.0, 1.0, libm::exp) - (core::f64::consts::E - 1.0)).abs() < 1e-15);
    }

    #[test]
    fn a_kink_is_found_by_halving() {
        let value = adaptive(0.0, 1.0, 1e-14, |x| (x - 0.3).abs());
        assert!((value - (0.045 + 0.245)).abs() < 1e-13);
    }

    #[test]
    fn noise_ends() {
        let noise = |x: f64| (x.to_bits().wrapping_mul(0x9E37_79B9_7F4A_7C15) >> 11) as f64 / 9.0e15;
        let value = adaptive(0.0, 1.0, 1e-14, noise);
        assert!((value - 0.5).abs() < 0.1, "{value}");
    }

    #[test]
    fn tails_of_powers_are_closed_forms() {
        for power in [1.05, 1.5, 2.0, 3.0] {
            let value = tail_above(7.0, |s| libm::pow(s, -power));
            let expect = libm::pow(7.0, 1.0 - power) / (power - 1.0);
            assert!((value / expect - 1.0).abs() < 1e-13, "power {power}: {value}");
        }
        let value = tail_below(0.2, |s| libm::pow(s, -0.4));
        assert!((value / (libm::pow(0.2, 0.6) / 0.6) - 1.0).abs() < 1e-13);
    }
}
