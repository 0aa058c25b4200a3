//! Derivatives: central differences over a ladder of steps, extrapolated to
//! step zero (Ridders 1982, Advances in Engineering Software 4, 75).
//!
//! The scale of the function is not known, so the ladder climbs from steps
//! where rounding rules to steps as large as the function allows. An estimate
//! is believed only while it agrees, within its error, with those of the
//! smaller steps below it: a large step may look settled and be wrong.

use super::super::body::Lanes;
use super::Trouble;

/// Steps in the ladder, each twice the one before.
const RUNGS: usize = 56;

/// The ladder at zero, where nothing is known of the scale: these powers of 2,
/// from less than any mass in kilograms to more than any volume's side.
const RUNGS_AT_ZERO: std::ops::Range<i32> = -150..200;

/// Columns of the extrapolation.
const COLUMNS: usize = 10;

/// An estimate less certain than this is no derivative.
const ACCEPTED: f64 = 1e-6;

/// The derivative of `body` at `point`.
pub(super) fn derivative(body: &mut dyn Lanes, point: f64) -> Result<f64, Trouble> {
    let centre = body.at(point);
    if !centre.is_finite() {
        return Err(Trouble::Body(point));
    }
    let steps = ladder(point);
    let right = side(body, point, &steps, 1.0);
    let left = side(body, point, &steps, -1.0);
    let has_value = |side: &[f64]| side.first().is_some_and(|value| value.is_finite());
    let estimate = match (has_value(&left), has_value(&right)) {
        (true, true) => {
            corner(&steps, centre, &left, &right)?;
            let central = |step: f64, left: f64, right: f64| (right - left) / (2.0 * step);
            climb(&quotients(&steps, &left, &right, central), 4.0)
        }
        (false, true) => {
            let forward = |step: f64, _: f64, value: f64| (value - centre) / step;
            climb(&quotients(&steps, &right, &right, forward), 2.0)
        }
        (true, false) => {
            let backward = |step: f64, _: f64, value: f64| (centre - value) / step;
            climb(&quotients(&steps, &left, &left, backward), 2.0)
        }
        (false, false) => {
            return Err(Trouble::NoDerivative(
                "the function has no value beside this point",
            ));
        }
    };
    estimate.ok_or(Trouble::NoDerivative("the slope does not settle"))
}

/// Steps from a part in 10^13 of the point up, as they are when added to it.
fn ladder(point: f64) -> Vec<f64> {
    if point == 0.0 {
        return RUNGS_AT_ZERO.map(|power| libm::ldexp(1.0, power)).collect();
    }
    let smallest = point.abs() * 256.0 * f64::EPSILON;
    (0..RUNGS)
        .map(|rung| (point + libm::ldexp(smallest, rung as i32)) - point)
        .collect()
}

fn side(body: &mut dyn Lanes, point: f64, steps: &[f64], sign: f64) -> Vec<f64> {
    let points: Vec<f64> = steps.iter().map(|step| point + sign * step).collect();
    let mut values = vec![0.0; points.len()];
    body.lanes(&points, &mut values);
    values
}

/// One difference quotient with its rounding error.
#[derive(Clone, Copy)]
struct Quotient {
    value: f64,
    noise: f64,
}

fn quotients(
    steps: &[f64],
    left: &[f64],
    right: &[f64],
    quotient: impl Fn(f64, f64, f64) -> f64,
) -> Vec<Quotient> {
    let sides = left.iter().zip(right);
    let all = steps.iter().zip(sides).map(|(step, (left, right))| Quotient {
        value: quotient(*step, *left, *right),
        noise: 4.0 * f64::EPSILON * left.abs().max(right.abs()) / step,
    });
    all.take_while(|quotient| quotient.value.is_finite()).collect()
}

/// An error where the slopes of the two sides differ: a corner has none.
///
/// For a smooth function the gap between them shrinks with the step. The
/// smallest steps that stand clear of rounding are compared with larger ones.
fn corner(steps: &[f64], centre: f64, left: &[f64], right: &[f64]) -> Result<(), Trouble> {
    const APART: usize = 4;
    let gap = |rung: usize| {
        let step = steps[rung];
        let rise = (right[rung] - centre) / step;
        let fall = (centre - left[rung]) / step;
        let noise = 4.0 * f64::EPSILON * centre.abs().max(right[rung].abs()).max(left[rung].abs()) / step;
        ((rise - fall).abs(), rise.abs().max(fall.abs()), noise)
    };
    for rung in 0..steps.len().saturating_sub(APART) {
        let (small, slope, noise) = gap(rung);
        let (large, ..) = gap(rung + APART);
        if noise < 1e-5 * slope && large.is_finite() {
            let jumps = small > 0.5 * large && small > 1e-3 * slope;
            return match jumps {
                true => Err(Trouble::NoDerivative("the slope jumps at this point")),
                false => Ok(()),
            };
        }
    }
    Ok(())
}

/// The best extrapolated quotient. `order` is the factor by which the leading
/// error shrinks per halving of the step (4 for central, 2 for one-sided);
/// later errors shrink by `order`² and so on, or ×2 more each one-sided.
fn climb(quotients: &[Quotient], order: f64) -> Option<f64> {
    let mut best: Option<Estimate> = None;
    for top in 1..quotients.len() {
        let estimate = extrapolate(&quotients[..=top], order);
        let Some(believed) = best else {
            best = Some(estimate);
            continue;
        };
        if (estimate.value - believed.value).abs() > 4.0 * (believed.error + estimate.error) {
            break;
        }
        if estimate.error < believed.error {
            best = Some(estimate);
        }
    }
    let best = best?;
    // A slope of zero has no relative error: there the rounding must be all.
    let is_zero = best.value.abs() <= 4.0 * best.error && best.error <= 64.0 * best.noise;
    (is_zero || best.error <= ACCEPTED * best.value.abs()).then_some(best.value)
}

/// An extrapolated slope.
#[derive(Clone, Copy)]
struct Estimate {
    value: f64,
    error: f64,
    /// The part of the error that is rounding at the largest step.
    noise: f64,
}

/// Neville's scheme from the largest step downwards: the entry of least error.
fn extrapolate(quotients: &[Quotient], order: f64) -> Estimate {
    let rungs: Vec<&Quotient> = quotients.iter().rev().take(COLUMNS).collect();
    let mut row: Vec<f64> = Vec::new();
    let mut best = Estimate {
        value: f64::NAN,
        error: f64::INFINITY,
        noise: quotients.last().map_or(0.0, |quotient| quotient.noise),
    };
    for quotient in rungs {
        let mut entry = quotient.value;
        let mut next = vec![entry];
        let mut factor = order;
        for above in &row {
            let better = (factor * entry - above) / (factor - 1.0);
            let error = (better - entry).abs().max((better - above).abs()) + quotient.noise;
            if error < best.error {
                (best.value, best.error) = (better, error);
            }
            entry = better;
            next.push(entry);
            factor *= order;
        }
        row = next;
    }
    best
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(f: impl Fn(f64) -> f64, at: f64) -> Result<f64, Trouble> {
        derivative(&mut |x: f64| f(x), at)
    }

    #[track_caller]
    fn is(f: impl Fn(f64) -> f64, at: f64, expected: f64) {
        let value = of(f, at).expect("a derivative");
        let error = (value - expected).abs() / expected.abs().max(f64::MIN_POSITIVE);
        assert!(error < 1e-10, "{value} is {error:e} off {expected}");
    }

    #[test]
    fn smooth_functions_to_ten_digits() {
        // Elementary calculus.
        is(libm::exp, 1.0, std::f64::consts::E);
        is(libm::sin, 0.0, 1.0);
        is(libm::log, 3.0, 1.0 / 3.0);
        is(|x| x * x * x, 2.0, 12.0);
        is(|x| libm::pow(1.0 + x, -1.5), 1.0, -1.5 * libm::pow(2.0, -2.5));
        is(f64::sqrt, 1e-8, 0.5e4);
        is(|x| 1.0 / (1.0 + x), 1000.0, -1.0 / (1001.0 * 1001.0));
        // ψ(1) = −γ: DLMF 5.4.12.
        is(libm::tgamma, 1.0, -0.577_215_664_901_532_9);
    }

    #[test]
    fn any_scale_will_do() {
        is(|x| libm::sin(x / 3e25), 3e25, libm::cos(1.0) / 3e25);
        is(|x| libm::exp(x * 1e20), 1e-20, std::f64::consts::E * 1e20);
        is(|x| x * x, 1e-140, 2e-140);
        is(|x| 3.0 * x + x * x / 1e26, 0.0, 3.0);
        is(|x| 7.0 + libm::sin(x / 1e26), 0.0, 1e-26);
        is(|x| 7.0 + libm::sin(x / 1e-20), 0.0, 1e20);
    }

    #[test]
    fn a_far_flat_part_is_not_believed() {
        // A narrow bump: from afar it is flat.
        let bump = |x: f64| libm::exp(-(x - 1.0) * (x - 1.0) * 1e6);
        let at: f64 = 1.0005;
        is(bump, at, -2.0 * 1e6 * (at - 1.0) * bump(at));
    }

    #[test]
    fn one_side_is_enough_at_an_edge() {
        let edge = |x: f64| {
            if x < 1.0 {
                f64::NAN
            } else {
                (x - 1.0) * 3.0 + x * x
            }
        };
        let value = of(edge, 1.0).expect("a derivative");
        assert!((value - 5.0).abs() < 1e-8, "{value}");
    }

    #[test]
    fn zero_slopes_are_zero() {
        assert_eq!(of(|_| 3.0, 1.0), Ok(0.0));
        let flat = of(libm::cos, 0.0).expect("a derivative");
        assert!(flat.abs() < 1e-12);
    }

    #[test]
    fn corners_steps_and_infinite_slopes_have_none() {
        assert!(matches!(of(f64::abs, 0.0), Err(Trouble::NoDerivative(_))));
        let step = |x: f64| if x < 1.0 { 0.0 } else { 1.0 };
        assert!(matches!(of(step, 1.0), Err(Trouble::NoDerivative(_))));
        assert!(matches!(of(f64::sqrt, 0.0), Err(Trouble::NoDerivative(_))));
        assert_eq!(of(|_| f64::NAN, 1.0), Err(Trouble::Body(1.0)));
    }
}
