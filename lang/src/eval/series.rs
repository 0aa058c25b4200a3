//! Ranges: the points between two ends.

use super::error::FaultKind;
use super::limits;
use crate::program::RangeStep;

/// How far from a whole number of steps still counts as one: the rounding of
/// ends and step, with a margin.
const ROUNDING: f64 = 1e-9;

/// The points from `from` to `to`, divided by a step or into `by` steps. Where
/// the division comes out even, the last point is `to` exactly.
pub(super) fn range(from: f64, to: f64, step: RangeStep, by: f64) -> Result<Vec<f64>, FaultKind> {
    if !(from.is_finite() && to.is_finite() && by.is_finite()) {
        return Err(FaultKind::Range("a range needs finite ends and a finite step"));
    }
    match step {
        RangeStep::Every(_) => every(from, to, by),
        RangeStep::EveryDex(_) => every_dex(from, to, by),
        RangeStep::Steps(_) => {
            let steps = whole_steps(by)?;
            Ok(even(from, to, steps))
        }
        RangeStep::LogSteps(_) => {
            let (low, high) = logarithms(from, to)?;
            let steps = whole_steps(by)?;
            Ok(powers(&even(low, high, steps), from, Some(to)))
        }
    }
}

fn every(from: f64, to: f64, step: f64) -> Result<Vec<f64>, FaultKind> {
    let (steps, exact) = count(from, to, step)?;
    if exact {
        return Ok(even(from, to, steps));
    }
    Ok((0..=steps).map(|i| from + i as f64 * step).collect())
}

fn every_dex(from: f64, to: f64, step: f64) -> Result<Vec<f64>, FaultKind> {
    let (low, high) = logarithms(from, to)?;
    let (steps, exact) = count(low, high, step)?;
    let exponents: Vec<f64> = (0..=steps).map(|i| low + i as f64 * step).collect();
    Ok(powers(&exponents, from, exact.then_some(to)))
}

/// How many steps fit, and whether they fit exactly.
fn count(from: f64, to: f64, step: f64) -> Result<(usize, bool), FaultKind> {
    if from == to {
        return Ok((0, true));
    }
    if step == 0.0 {
        return Err(FaultKind::Range("a range cannot advance by nothing"));
    }
    let quotient = (to - from) / step;
    if quotient < 0.0 {
        return Err(FaultKind::Range("this step leads away from the end of the range"));
    }
    let slack = ROUNDING + quotient * 1e-12;
    let steps = (quotient + slack).floor();
    let points = within_limit(steps + 1.0)?;
    Ok((points - 1, (quotient - steps).abs() <= slack))
}

fn within_limit(points: f64) -> Result<usize, FaultKind> {
    if points <= limits::RANGE_POINTS as f64 {
        Ok(points as usize)
    } else {
        Err(FaultKind::TooManyPoints(points, limits::RANGE_POINTS))
    }
}

fn whole_steps(by: f64) -> Result<usize, FaultKind> {
    let steps = by.round();
    if steps < 1.0 || (by - steps).abs() > ROUNDING {
        return Err(FaultKind::Range(
            "a range is divided into a whole number of steps, at least 1",
        ));
    }
    within_limit(steps + 1.0).map(|points| points - 1)
}

/// `steps + 1` points, both ends exact. With no step there is one point.
fn even(from: f64, to: f64, steps: usize) -> Vec<f64> {
    let all = steps as f64;
    let point = |i: usize| {
        if i == steps {
            to
        } else {
            from + (to - from) * i as f64 / all
        }
    };
    (0..=steps).map(point).collect()
}

fn logarithms(from: f64, to: f64) -> Result<(f64, f64), FaultKind> {
    if from > 0.0 && to > 0.0 {
        Ok((libm::log10(from), libm::log10(to)))
    } else {
        Err(FaultKind::Range("a logarithmic range needs both ends above zero"))
    }
}

/// Powers of ten, with the ends as they were given.
fn powers(exponents: &[f64], from: f64, to: Option<f64>) -> Vec<f64> {
    let mut points: Vec<f64> = exponents.iter().map(|exponent| libm::exp10(*exponent)).collect();
    if let (Some(last), Some(to)) = (points.last_mut(), to) {
        *last = to;
    }
    if let Some(first) = points.first_mut() {
        *first = from;
    }
    points
}

#[cfg(test)]
mod tests {
    use super::*;

    fn points(from: f64, to: f64, step: RangeStep, by: f64) -> Vec<f64> {
        range(from, to, step, by).expect("a good range")
    }

    #[test]
    fn steps_that_fit_reach_the_end() {
        assert_eq!(
            points(0.0, 3.0, RangeStep::Every(0), 0.5),
            [0.0, 0.5, 1.0, 1.5, 2.0, 2.5, 3.0]
        );
        let tenths = points(0.0, 1.0, RangeStep::Every(0), 0.1);
        assert_eq!(tenths.len(), 11);
        assert_eq!(tenths[3], 0.3);
        assert_eq!(tenths[10], 1.0);
        // In metres: 0 .. 1 Mpc every 0.1 Mpc.
        let mpc = 3.085677581491367e22;
        assert_eq!(points(0.0, mpc, RangeStep::Every(0), 0.1 * mpc).len(), 11);
    }

    #[test]
    fn steps_that_do_not_fit_stop_before_the_end() {
        assert_eq!(points(0.0, 1.0, RangeStep::Every(0), 0.3).len(), 4);
        assert_eq!(points(0.0, 0.2, RangeStep::Every(0), 0.3), [0.0]);
    }

    #[test]
    fn a_range_may_run_down() {
        assert_eq!(points(1.0, 0.0, RangeStep::Every(0), -0.5), [1.0, 0.5, 0.0]);
        assert_eq!(points(1.0, 0.0, RangeStep::Steps(0), 2.0), [1.0, 0.5, 0.0]);
        assert!(range(1.0, 0.0, RangeStep::Every(0), 0.5).is_err());
    }

    #[test]
    fn logarithmic_steps() {
        let decades = points(0.01, 10.0, RangeStep::LogSteps(0), 3.0);
        let expected = [0.01, 0.1, 1.0, 10.0];
        for (point, expected) in decades.iter().zip(expected) {
            assert!((point / expected - 1.0).abs() < 1e-15);
        }
        assert_eq!((decades[0], decades[3]), (0.01, 10.0));
        let dex = points(0.01, 10.0, RangeStep::EveryDex(0), 0.1);
        assert_eq!(dex.len(), 31);
        assert_eq!(dex[30], 10.0);
        assert!(range(0.0, 10.0, RangeStep::LogSteps(0), 3.0).is_err());
    }

    #[test]
    fn bad_divisions_are_refused() {
        assert!(range(0.0, 1.0, RangeStep::Every(0), 0.0).is_err());
        assert!(range(0.0, 1.0, RangeStep::Steps(0), 2.5).is_err());
        assert!(range(0.0, 1.0, RangeStep::Steps(0), 0.0).is_err());
        assert!(matches!(
            range(0.0, 1.0, RangeStep::Every(0), 1e-9),
            Err(FaultKind::TooManyPoints(..))
        ));
        assert!(range(0.0, f64::INFINITY, RangeStep::Steps(0), 2.0).is_err());
        assert!(matches!(
            range(0.0, 1e300, RangeStep::Every(0), 1e-300),
            Err(FaultKind::TooManyPoints(..))
        ));
    }
}
