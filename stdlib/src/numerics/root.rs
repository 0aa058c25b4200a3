//! Roots of a function of one variable.

/// Steps of [`bracketed`]: bisection alone would end after 1075.
const MAX_STEPS: usize = 200;

/// The root of `f` between `a` and `b`, at which it has opposite signs, to the
/// last digits. `None` where the signs agree or a value is not a number.
///
/// Inverse quadratic interpolation guarded by bisection: Chandrupatla 1997,
/// Advances in Engineering Software 28, 145.
pub fn bracketed(a: f64, b: f64, mut f: impl FnMut(f64) -> f64) -> Option<f64> {
    let (mut x0, mut x1) = (a, b);
    let (mut f0, mut f1) = (f(x0), f(x1));
    if f0 == 0.0 {
        return Some(x0);
    }
    if f1 == 0.0 {
        return Some(x1);
    }
    if f0.is_nan() || f1.is_nan() || (f0 > 0.0) == (f1 > 0.0) {
        return None;
    }
    let mut fraction = 0.5;
    for _ in 0..MAX_STEPS {
        let x = x1 + fraction * (x0 - x1);
        let value = f(x);
        if value.is_nan() {
            return None;
        }
        let (x2, f2);
        if (value > 0.0) == (f1 > 0.0) {
            (x2, f2) = (x1, f1);
        } else {
            (x2, f2) = (x0, f0);
            (x0, f0) = (x1, f1);
        }
        (x1, f1) = (x, value);
        let (best, best_value) = if f0.abs() < f1.abs() { (x0, f0) } else { (x1, f1) };
        let width = (x0 - x1).abs();
        let limit = 0.5 * f64::EPSILON * best.abs() / width;
        if best_value == 0.0 || limit > 0.5 || width <= f64::MIN_POSITIVE {
            return Some(best);
        }
        fraction = step(x0, x1, x2, f0, f1, f2).clamp(limit, 1.0 - limit);
    }
    Some(x1)
}

/// How far to go from `x1` towards `x0`, as a fraction.
fn step(x0: f64, x1: f64, x2: f64, f0: f64, f1: f64, f2: f64) -> f64 {
    let xi = (x1 - x0) / (x2 - x0);
    let phi = (f1 - f0) / (f2 - f0);
    if phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi {
        f1 / (f0 - f1) * f2 / (f0 - f2) + (x2 - x1) / (x0 - x1) * f1 / (f2 - f1) * f0 / (f2 - f0)
    } else {
        0.5
    }
}

#[cfg(test)]
mod tests {
    use super::bracketed;

    #[test]
    fn roots_of_smooth_and_flat_functions() {
        let root = bracketed(0.0, 2.0, |x| x * x - 2.0).expect("bracketed");
        assert!((root - core::f64::consts::SQRT_2).abs() < 5e-16);
        let root = bracketed(0.0, 5.0, |x| (x - 1.0) * (x - 1.0) * (x - 1.0)).expect("bracketed");
        assert!((root - 1.0).abs() < 1e-5);
    }

    #[test]
    fn no_sign_change_is_no_root() {
        assert_eq!(bracketed(0.0, 1.0, |x| x * x + 1.0), None);
    }
}
