//! Linear differential equations of second order.
//!
//! `y″ = p(x) y′ + q(x) y` is solved by Gauss collocation with five points, an
//! implicit Runge–Kutta method of order 10 (Hairer, Nørsett & Wanner 1993,
//! Solving Ordinary Differential Equations I, sec. II.7). The equation being
//! linear, each step is one system of ten equations.

use gauss_quad::GaussLegendre;
use std::num::NonZeroUsize;
use std::sync::OnceLock;

const STAGES: usize = 5;
const UNKNOWNS: usize = 2 * STAGES;

/// The method: points in (0, 1), weights, and the matrix of the integrals of
/// the Lagrange polynomials from 0 to each point.
struct Method {
    points: [f64; STAGES],
    weights: [f64; STAGES],
    matrix: [[f64; STAGES]; STAGES],
}

fn method() -> &'static Method {
    static METHOD: OnceLock<Method> = OnceLock::new();
    METHOD.get_or_init(|| {
        let degree = NonZeroUsize::new(STAGES).expect("five is not zero");
        let mut rule: Vec<(f64, f64)> = GaussLegendre::new(degree).into_iter().collect();
        rule.sort_by(|a, b| a.0.total_cmp(&b.0));
        let mut method = Method {
            points: [0.0; STAGES],
            weights: [0.0; STAGES],
            matrix: [[0.0; STAGES]; STAGES],
        };
        for (place, (node, weight)) in rule.iter().enumerate() {
            method.points[place] = 0.5 * (1.0 + node);
            method.weights[place] = 0.5 * weight;
        }
        for row in 0..STAGES {
            for column in 0..STAGES {
                // ∫₀ᶜ of a polynomial of degree 4: the same rule is exact.
                let end = method.points[row];
                let terms = method.points.iter().zip(&method.weights);
                let sum: f64 = terms
                    .map(|(point, weight)| weight * method.lagrange(column, end * point))
                    .sum();
                method.matrix[row][column] = end * sum;
            }
        }
        method
    })
}

impl Method {
    fn lagrange(&self, which: usize, x: f64) -> f64 {
        let others = self
            .points
            .iter()
            .enumerate()
            .filter(|(place, _)| *place != which);
        others
            .map(|(_, point)| (x - point) / (self.points[which] - point))
            .product()
    }
}

/// `(y, y′)` at `x + step` from `(y, y′)` at `x`. `coefficients(x)` gives
/// `(p, q)`. The step may be negative.
pub fn step(
    x: f64,
    step: f64,
    (y, slope): (f64, f64),
    mut coefficients: impl FnMut(f64) -> (f64, f64),
) -> (f64, f64) {
    let method = method();
    let at = method.points.map(|point| coefficients(x + step * point));
    // Unknowns: y′ and y″ at the five points. y′ᵢ − h Σ aᵢⱼ y″ⱼ = y′₀, and
    // y″ᵢ − pᵢ h Σ aᵢⱼ y″ⱼ − qᵢ h Σ aᵢⱼ y′ⱼ = pᵢ y′₀ + qᵢ y₀.
    let mut system = [[0.0; UNKNOWNS + 1]; UNKNOWNS];
    for row in 0..STAGES {
        let (p, q) = at[row];
        system[row][row] = 1.0;
        system[STAGES + row][STAGES + row] = 1.0;
        for column in 0..STAGES {
            let entry = step * method.matrix[row][column];
            system[row][STAGES + column] -= entry;
            system[STAGES + row][STAGES + column] -= p * entry;
            system[STAGES + row][column] -= q * entry;
        }
        system[row][UNKNOWNS] = slope;
        system[STAGES + row][UNKNOWNS] = p * slope + q * y;
    }
    let solution = solve(&mut system);
    let (mut rise, mut turn) = (0.0, 0.0);
    for place in 0..STAGES {
        rise += method.weights[place] * solution[place];
        turn += method.weights[place] * solution[STAGES + place];
    }
    (y + step * rise, slope + step * turn)
}

/// Gaussian elimination with pivots.
fn solve(system: &mut [[f64; UNKNOWNS + 1]; UNKNOWNS]) -> [f64; UNKNOWNS] {
    for column in 0..UNKNOWNS {
        let size = |row: &usize| system[*row][column].abs();
        let pivot = (column..UNKNOWNS)
            .max_by(|a, b| size(a).total_cmp(&size(b)))
            .unwrap_or(column);
        system.swap(column, pivot);
        let upper = system[column];
        for row in system.iter_mut().skip(column + 1) {
            let factor = row[column] / upper[column];
            for place in column..=UNKNOWNS {
                row[place] -= factor * upper[place];
            }
        }
    }
    let mut solution = [0.0; UNKNOWNS];
    for row in (0..UNKNOWNS).rev() {
        let known: f64 = (row + 1..UNKNOWNS)
            .map(|place| system[row][place] * solution[place])
            .sum();
        solution[row] = (system[row][UNKNOWNS] - known) / system[row][row];
    }
    solution
}

#[cfg(test)]
mod tests {
    use super::step;

    #[test]
    fn a_wave_keeps_its_phase() {
        let mut state = (0.0, 1.0);
        for place in 0..40 {
            state = step(0.25 * f64::from(place), 0.25, state, |_| (0.0, -1.0));
        }
        assert!((state.0 - libm::sin(10.0)).abs() < 1e-13);
        assert!((state.1 - libm::cos(10.0)).abs() < 1e-13);
    }

    #[test]
    fn varying_coefficients_are_met_both_ways() {
        // y = exp(−x²): y″ = −2x y′ − 2y.
        let coefficients = |x: f64| (-2.0 * x, -2.0);
        let mut state = (1.0, 0.0);
        for place in 0..8 {
            state = step(0.125 * f64::from(place), 0.125, state, coefficients);
        }
        assert!((state.0 - libm::exp(-1.0)).abs() < 1e-14);
        let back = step(1.0, -0.125, state, coefficients);
        assert!((back.0 - libm::exp(-0.875 * 0.875)).abs() < 1e-14);
    }
}
