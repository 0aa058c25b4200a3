//! Maxima and minima: a scan, a search around the best point, and a polish.
//!
//! Comparing values finds a smooth maximum to the square root of the rounding
//! only, for there the function is flat. Where the function is smooth its
//! Chebyshev interpolant on some width around is as good as the function, and
//! the zero of the interpolant's derivative is where the maximum is, to nearly
//! full precision (Trefethen 2013, Approximation Theory and Approximation
//! Practice, ch. 18).

use super::super::body::Lanes;
use super::Trouble;
use super::scan::scan;

/// Degree of the interpolant.
const DEGREE: usize = 24;

/// A tail of coefficients below this part of the largest is rounding: the
/// interpolant is as good as the function.
const SMOOTH: f64 = 1e-13;

/// Golden section steps; the interval shrinks to 1e-9 of two scan steps.
const GOLDEN_STEPS: usize = 44;

/// An extremum.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Peak {
    pub at: f64,
    pub value: f64,
}

/// The highest point of `body` between two bounds, ends included.
pub(super) fn maximum(body: &mut dyn Lanes, from: f64, to: f64) -> Result<Peak, Trouble> {
    search(body, from, to, 1.0)
}

/// The lowest point of `body` between two bounds, ends included.
pub(super) fn minimum(body: &mut dyn Lanes, from: f64, to: f64) -> Result<Peak, Trouble> {
    search(body, from, to, -1.0)
}

/// The highest point of `sign * body`.
fn search(body: &mut dyn Lanes, from: f64, to: f64, sign: f64) -> Result<Peak, Trouble> {
    let (low, high) = if from <= to { (from, to) } else { (to, from) };
    let scan = scan(body, low, high);
    if let Some(place) = scan.values.iter().position(|value| !value.is_finite()) {
        return Err(Trouble::Body(scan.points[place]));
    }
    let mut best = 0;
    for (place, value) in scan.values.iter().enumerate() {
        if sign * *value > sign * scan.values[best] {
            best = place;
        }
    }
    let left = scan.points[best.saturating_sub(1)];
    let right = scan.points[(best + 1).min(scan.points.len() - 1)];
    let start = Peak {
        at: scan.points[best],
        value: scan.values[best],
    };
    let peak = golden(body, left, right, start, sign)?;
    if peak.at == low || peak.at == high {
        return Ok(peak);
    }
    Ok(polish(body, low, high, (left, right), peak, sign).unwrap_or(peak))
}

fn golden(body: &mut dyn Lanes, left: f64, right: f64, start: Peak, sign: f64) -> Result<Peak, Trouble> {
    const GOLDEN: f64 = 0.381_966_011_250_105_1;
    let (mut low, mut high) = (left, right);
    let mut best = start;
    let mut look = |x: f64, best: &mut Peak| {
        let value = body.at(x);
        if !value.is_finite() {
            return Err(Trouble::Body(x));
        }
        if sign * value > sign * best.value {
            *best = Peak { at: x, value };
        }
        Ok(sign * value)
    };
    let mut x1 = low + GOLDEN * (high - low);
    let mut x2 = high - GOLDEN * (high - low);
    let (mut y1, mut y2) = (look(x1, &mut best)?, look(x2, &mut best)?);
    for _ in 0..GOLDEN_STEPS {
        if y1 > y2 {
            (high, x2, y2) = (x2, x1, y1);
            x1 = low + GOLDEN * (high - low);
            y1 = look(x1, &mut best)?;
        } else {
            (low, x1, y1) = (x1, x2, y2);
            x2 = high - GOLDEN * (high - low);
            y2 = look(x2, &mut best)?;
        }
    }
    Ok(best)
}

/// A better place for the extremum, where the function is smooth around it.
fn polish(
    body: &mut dyn Lanes,
    low: f64,
    high: f64,
    bracket: (f64, f64),
    peak: Peak,
    sign: f64,
) -> Option<Peak> {
    let step = (bracket.1 - bracket.0) / 2.0;
    // The wider the better, as long as the interpolant holds.
    for width in [32.0, 16.0, 8.0, 4.0, 2.0, 1.0, 0.25, 0.0625] {
        let half = (width * step).min(peak.at - low).min(high - peak.at);
        if half <= 0.0 {
            return None;
        }
        let Some(fit) = Chebyshev::fit(body, peak.at, half) else {
            continue;
        };
        if fit.tail() > SMOOTH {
            continue;
        }
        let at = peak.at + half * fit.zero_of_slope()?;
        let value = body.at(at);
        // The interpolant may only refine what the search found: beyond what
        // rounding hides, the value must not be worse.
        let slack = 8.0 * f64::EPSILON * fit.size();
        let good = value.is_finite() && sign * value >= sign * peak.value - slack;
        return good.then_some(Peak { at, value });
    }
    None
}

/// The interpolant in Chebyshev polynomials on `centre ± half`.
pub(super) struct Chebyshev {
    coefficients: Vec<f64>,
}

impl Chebyshev {
    /// Interpolates `body`; nothing if it has no value somewhere.
    pub fn fit(body: &mut dyn Lanes, centre: f64, half: f64) -> Option<Chebyshev> {
        let count = DEGREE + 1;
        let angle = |j: usize| std::f64::consts::PI * (j as f64 + 0.5) / count as f64;
        let nodes: Vec<f64> = (0..count).map(|j| centre + half * libm::cos(angle(j))).collect();
        let mut values = vec![0.0; count];
        body.lanes(&nodes, &mut values);
        if values.iter().any(|value| !value.is_finite()) {
            return None;
        }
        let coefficient = |k: usize| {
            let terms = values.iter().enumerate();
            let sum: f64 = terms
                .map(|(j, value)| value * libm::cos(k as f64 * angle(j)))
                .sum();
            sum * if k == 0 { 1.0 } else { 2.0 } / count as f64
        };
        Some(Chebyshev {
            coefficients: (0..count).map(coefficient).collect(),
        })
    }

    /// The largest of the last coefficients relative to the largest of all.
    pub fn tail(&self) -> f64 {
        let size = self.size();
        let tail = self.coefficients.iter().rev().take(4);
        tail.map(|c| c.abs()).fold(0.0, f64::max) / size.max(f64::MIN_POSITIVE)
    }

    /// The largest coefficient.
    pub fn size(&self) -> f64 {
        self.coefficients.iter().map(|c| c.abs()).fold(0.0, f64::max)
    }

    /// The derivative at `t` in −1 to 1: Σ k c_k U_{k−1}(t).
    fn slope(&self, t: f64) -> f64 {
        let (mut before, mut now, mut sum) = (0.0, 1.0, 0.0);
        for (k, coefficient) in self.coefficients.iter().enumerate().skip(1) {
            sum += k as f64 * coefficient * now;
            (before, now) = (now, 2.0 * t * now - before);
        }
        sum
    }

    /// The zero of the derivative nearest the centre.
    fn zero_of_slope(&self) -> Option<f64> {
        // The centre is the extremum to some 1e-8, so a small bracket does.
        let mut reach = 1e-6;
        while self.slope(-reach) * self.slope(reach) > 0.0 {
            reach *= 4.0;
            if reach > 1.0 {
                return None;
            }
        }
        let (mut low, mut high) = (-reach, reach);
        let rising = self.slope(high) > 0.0;
        for _ in 0..64 {
            let middle = 0.5 * (low + high);
            if (self.slope(middle) > 0.0) == rising {
                high = middle;
            } else {
                low = middle;
            }
        }
        Some(0.5 * (low + high))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_smooth_maximum_is_found_to_many_digits() {
        // x e^-x: at 1, e^-1.
        let peak = maximum(&mut |x: f64| x * libm::exp(-x), 0.0, 10.0).expect("a maximum");
        assert!((peak.at - 1.0).abs() < 1e-13, "{}", peak.at);
        assert!((peak.value - libm::exp(-1.0)).abs() < 1e-16);
        // Γ on the positive axis, DLMF 5.4.19–20: minimum 0.88560 31944 10888…
        // at 1.46163 21449 68362…
        let low = minimum(&mut libm::tgamma, 0.5, 4.0).expect("a minimum");
        assert!((low.at - 1.461_632_144_968_362_3).abs() < 1e-12, "{}", low.at);
        assert!((low.value - 0.885_603_194_410_888_7).abs() < 1e-15);
    }

    #[test]
    fn the_angular_distance_peaks_at_five_quarters() {
        // Einstein–de Sitter, D_A ∝ (1 − (1+z)^-½)/(1+z): maximum at z = 5/4
        // (Hogg 1999, astro-ph/9905116, from eqs. 15 and 18).
        let distance = |z: f64| (1.0 - 1.0 / (1.0 + z).sqrt()) / (1.0 + z);
        let peak = maximum(&mut |z: f64| distance(z), 0.0, 10.0).expect("a maximum");
        assert!((peak.at - 1.25).abs() < 1e-13);
    }

    #[test]
    fn ends_count() {
        let rising = maximum(&mut |x: f64| x, 0.0, 3.0).expect("a maximum");
        assert_eq!(rising, Peak { at: 3.0, value: 3.0 });
        let falling = minimum(&mut |x: f64| x, 3.0, 1.0).expect("a minimum");
        assert_eq!(falling.at, 1.0);
        let point = maximum(&mut |x: f64| x, 2.0, 2.0).expect("a maximum");
        assert_eq!(point.at, 2.0);
    }

    #[test]
    fn corners_are_found() {
        let peak = maximum(&mut |x: f64| 1.0 - (x - 0.3).abs(), 0.0, 1.0).expect("a maximum");
        assert!((peak.at - 0.3).abs() < 1e-10);
    }

    #[test]
    fn a_body_without_a_value_is_told() {
        let outcome = maximum(&mut |x: f64| if x > 0.5 { f64::NAN } else { x }, 0.0, 1.0);
        assert!(matches!(outcome, Err(Trouble::Body(x)) if x > 0.5));
    }
}
