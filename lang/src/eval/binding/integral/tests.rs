//! Integrals with known values, and what has none.

use super::*;
use std::f64::consts::PI;

fn of(f: impl Fn(f64) -> f64, from: f64, to: f64) -> Result<f64, Trouble> {
    integral(&mut |x: f64| f(x), from, to)
}

#[track_caller]
fn is(f: impl Fn(f64) -> f64, from: f64, to: f64, expected: f64) {
    is_within(f, from, to, expected, 1e-12);
}

#[track_caller]
fn is_within(f: impl Fn(f64) -> f64, from: f64, to: f64, expected: f64, part: f64) {
    let value = of(f, from, to).expect("an integral");
    let error = (value / expected - 1.0).abs();
    assert!(error < part, "{value} is {error:e} off {expected}");
}

#[test]
fn the_rules_are_exact_for_polynomials() {
    // The Kronrod rule of 21 points has degree 31, the Gauss rule of 10 points
    // degree 19 (Laurie 1997, Math. Comp. 66, 1133).
    let powers = |n: i32| nodes(-1.0, 1.0).map(|t| t.powi(n)).collect::<Vec<f64>>();
    for n in (0..=30).step_by(2) {
        let panel = panel(0, -1.0, 1.0, &powers(n));
        let exact = 2.0 / f64::from(n + 1);
        assert!((panel.value - exact).abs() < 1e-15, "degree {n}");
        if n <= 18 {
            assert!(panel.error < 1e-13, "degree {n}");
        }
    }
}

#[test]
fn smooth_integrands() {
    is(libm::exp, 0.0, 1.0, std::f64::consts::E - 1.0);
    is(|x| 4.0 / (1.0 + x * x), 0.0, 1.0, PI);
    // Comoving distance in Einstein–de Sitter: 2 (1 − 1/√(1+z)).
    is(|z| libm::pow(1.0 + z, -1.5), 0.0, 3.0, 1.0);
    is(
        |z| libm::pow(1.0 + z, -1.5),
        0.0,
        1e9,
        2.0 * (1.0 - 1.0 / (1.0 + 1e9_f64).sqrt()),
    );
}

#[test]
fn order_and_coincidence_of_bounds() {
    assert_eq!(of(libm::exp, 2.0, 2.0), Ok(0.0));
    let forth = of(libm::exp, 0.0, 1.0).expect("an integral");
    assert_eq!(of(libm::exp, 1.0, 0.0), Ok(-forth));
    assert_eq!(of(libm::exp, f64::INFINITY, f64::INFINITY), Ok(0.0));
}

#[test]
fn cancelling_parts_give_zero() {
    let value = of(libm::sin, 0.0, 2.0 * PI).expect("an integral");
    assert!(value.abs() < 1e-14);
}

#[test]
fn narrow_features_and_corners() {
    is(
        |x| libm::exp(-(x - 0.37) * (x - 0.37) * 1e4),
        0.0,
        1.0,
        (PI / 1e4).sqrt(),
    );
    is(|x| (x - 0.3).abs(), 0.0, 1.0, 0.29);
    is(|x| if x < 0.3 { 0.0 } else { 1.0 }, 0.0, 1.0, 0.7);
}

#[test]
fn infinite_bounds() {
    is(|x| libm::exp(-x), 0.0, f64::INFINITY, 1.0);
    is(|x| libm::exp(-x * x), f64::NEG_INFINITY, f64::INFINITY, PI.sqrt());
    is(|x| 1.0 / (x * x), 2.0, f64::INFINITY, 0.5);
    is(|x| 1.0 / (x * x), f64::NEG_INFINITY, -2.0, 0.5);
    is(|x| 1.0 / (1.0 + x * x), f64::NEG_INFINITY, f64::INFINITY, PI);
    is(|x| 1.0 / (x * x.sqrt()), 1.0, f64::INFINITY, 2.0);
}

#[test]
fn any_unit_will_do() {
    // The same integrals with x in units far from 1.
    is(|x| libm::exp(-x / 3e26), 0.0, f64::INFINITY, 3e26);
    is(|x| libm::exp(-x / 2e-30), 0.0, f64::INFINITY, 2e-30);
    is(|x| 1.0 / (x * x), 1e26, f64::INFINITY, 1e-26);
}

#[test]
fn a_tail_that_overflows_after_it_has_died_away() {
    // DLMF 25.5.1: ∫ x³/(eˣ − 1) dx = Γ(4) ζ(4) = π⁴/15.
    let planck = |x: f64| {
        let e = libm::exp(x);
        if e.is_finite() {
            x * x * x / (e - 1.0)
        } else {
            f64::NAN
        }
    };
    is(planck, 0.0, f64::INFINITY, PI.powi(4) / 15.0);
    is(|x| planck(x / 1e12), 0.0, f64::INFINITY, 1e12 * PI.powi(4) / 15.0);
}

#[test]
fn integrable_ends() {
    // DLMF 5.12.1 (the beta function) and elementary calculus.
    is(|x| 1.0 / x.sqrt(), 0.0, 1.0, 2.0);
    is(libm::log, 0.0, 1.0, -1.0);
    is(f64::sqrt, 0.0, 1.0, 2.0 / 3.0);
    is(|x| libm::pow(x, -0.9), 0.0, 1.0, 10.0);
    is(|x| libm::log(x) / x.sqrt(), 0.0, 1.0, -4.0);
    // The end is not at zero, so 1 − x is only known to rounding.
    is_within(|x| 1.0 / (1.0 - x).sqrt(), 0.0, 1.0, 2.0, 1e-10);
    is_within(|x| 1.0 / (1.0 - x * x).sqrt(), -1.0, 1.0, PI, 1e-10);
    // Γ(1/2) on an infinite range.
    is(|x| libm::exp(-x) / x.sqrt(), 0.0, f64::INFINITY, PI.sqrt());
}

#[test]
fn divergence_is_told() {
    assert!(matches!(
        of(|x| 1.0 / x, 0.0, 1.0),
        Err(Trouble::Diverges(x)) if x == 0.0
    ));
    assert!(matches!(
        of(|x| libm::pow(x, -1.5), 0.0, 1.0),
        Err(Trouble::Diverges(_))
    ));
    assert!(matches!(
        of(|x| 1.0 / (1.0 + x), 0.0, f64::INFINITY),
        Err(Trouble::Diverges(_) | Trouble::NotSettled { .. })
    ));
    assert!(of(|_| 1.0, 0.0, f64::INFINITY).is_err());
    assert!(of(|x| 1.0 / (x - 0.3), 0.0, 1.0).is_err());
}

#[test]
fn a_point_without_a_value_is_told() {
    let outcome = of(|x| if x > 0.5 { f64::NAN } else { 1.0 }, 0.0, 1.0);
    assert!(matches!(outcome, Err(Trouble::Body(x)) if x > 0.5));
}
