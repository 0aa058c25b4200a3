//! Roots: a scan for changes of sign, then a bracketed search.

use super::super::body::Lanes;
use super::super::limits;
use super::Trouble;
use super::scan::{Scan, scan};

/// A change of sign where the function does not fall below this part of its
/// values beside it is a jump, not a zero.
const JUMP: f64 = 1e-3;

/// Zeros in a row, of all points looked at, that make an identity.
const IDENTITY_POINTS: usize = 3;

/// The one root of `body` between two bounds.
///
/// The interval is looked at in some hundred points; where the sign changes,
/// or a dip towards zero suggests that it does between two points, the bracket
/// is closed in on. Points without a value are passed over as long as there is
/// a root elsewhere.
pub(super) fn root(body: &mut dyn Lanes, from: f64, to: f64) -> Result<f64, Trouble> {
    let (low, high) = if from <= to { (from, to) } else { (to, from) };
    let scan = scan(body, low, high);
    let mut found = Found::default();
    look(body, &scan, &mut found)?;
    dips(body, &scan, &mut found);
    found.roots.sort_by(f64::total_cmp);
    found.roots.dedup();
    match (found.roots.as_slice(), found.jump) {
        ([root], _) => Ok(*root),
        ([], Some(jump)) => Err(jump),
        ([], None) => Err(none(&scan)),
        (_, _) => Err(Trouble::ManyRoots(found.roots)),
    }
}

#[derive(Default)]
struct Found {
    roots: Vec<f64>,
    jump: Option<Trouble>,
}

impl Found {
    fn add(&mut self, outcome: Result<f64, Trouble>) {
        match outcome {
            Ok(root) => self.roots.push(root),
            Err(jump) => self.jump = self.jump.take().or(Some(jump)),
        }
    }
}

/// Zeros at points and changes of sign between them.
fn look(body: &mut dyn Lanes, scan: &Scan, found: &mut Found) -> Result<(), Trouble> {
    let mut zeros_in_row = 0;
    let mut before: Option<(f64, f64)> = None;
    for (x, y) in scan.points.iter().copied().zip(scan.values.iter().copied()) {
        zeros_in_row = if y == 0.0 { zeros_in_row + 1 } else { 0 };
        if zeros_in_row == IDENTITY_POINTS {
            return Err(Trouble::Identity);
        }
        if y == 0.0 {
            found.roots.push(x);
        }
        if let Some((x0, y0)) = before
            && y0 * y.signum() < 0.0
            && y != 0.0
        {
            found.add(close_in(body, (x0, y0), (x, y)));
        }
        before = y.is_finite().then_some((x, y));
    }
    Ok(())
}

/// Two roots between neighbouring points show as a dip towards zero.
fn dips(body: &mut dyn Lanes, scan: &Scan, found: &mut Found) {
    for (points, values) in scan.points.windows(3).zip(scan.values.windows(3)) {
        let (&[a, _, c], &[fa, fb, fc]) = (points, values) else {
            continue;
        };
        let sign = fb.signum();
        let same = sign * fa > 0.0 && sign * fc > 0.0 && fb != 0.0;
        let dips = fb.abs() <= fa.abs() && fb.abs() <= fc.abs();
        // The parabola through the three falls below zero, or nearly so.
        let near = fb.abs() <= 2.0 * (fa.abs() - fb.abs()).max(fc.abs() - fb.abs());
        if same && dips && near {
            let (x, y) = lowest(body, a, c, sign);
            if y == 0.0 {
                found.roots.push(x);
            } else if y * sign < 0.0 {
                found.add(close_in(body, (a, fa), (x, y)));
                found.add(close_in(body, (x, y), (c, fc)));
            }
        }
    }
}

/// The point of an interval where `sign * body` is lowest, or the first where
/// it is not above zero: golden section.
fn lowest(body: &mut dyn Lanes, mut low: f64, mut high: f64, sign: f64) -> (f64, f64) {
    const GOLDEN: f64 = 0.381_966_011_250_105_1;
    let mut x1 = low + GOLDEN * (high - low);
    let mut x2 = high - GOLDEN * (high - low);
    let (mut y1, mut y2) = (body.at(x1), body.at(x2));
    // 40 steps narrow the interval by 4e-9, where a minimum is flat.
    for _ in 0..40 {
        if y1 * sign <= 0.0 {
            return (x1, y1);
        }
        if y2 * sign <= 0.0 {
            return (x2, y2);
        }
        if y1 * sign < y2 * sign {
            (high, x2, y2) = (x2, x1, y1);
            x1 = low + GOLDEN * (high - low);
            y1 = body.at(x1);
        } else {
            (low, x1, y1) = (x1, x2, y2);
            x2 = high - GOLDEN * (high - low);
            y2 = body.at(x2);
        }
    }
    (x1, y1)
}

/// What to say where there is no root.
fn none(scan: &Scan) -> Trouble {
    let defined = || scan.values.iter().filter(|value| value.is_finite());
    if defined().next().is_none() {
        return Trouble::Body(scan.points.first().copied().unwrap_or(f64::NAN));
    }
    let pairs = scan.points.iter().copied().zip(scan.values.iter().copied());
    let closest = pairs
        .filter(|(_, value)| value.is_finite())
        .min_by(|a, b| a.1.abs().total_cmp(&b.1.abs()));
    let ends = |all: &[f64]| {
        [
            all.first().copied().unwrap_or(f64::NAN),
            all.last().copied().unwrap_or(f64::NAN),
        ]
    };
    Trouble::NoSignChange {
        ends: ends(&scan.points),
        differences: ends(&scan.values),
        closest,
    }
}

/// The zero between two points of unlike sign, to the last digit.
///
/// Chandrupatla 1997 (Advances in Engineering Software 28, 145): inverse
/// quadratic interpolation where it is safe, else bisection.
fn close_in(body: &mut dyn Lanes, start: (f64, f64), end: (f64, f64)) -> Result<f64, Trouble> {
    let scale = start.1.abs().max(end.1.abs());
    let mut a = end;
    let mut b = start;
    let mut c;
    let mut t = 0.5;
    for _ in 0..limits::SEARCH_STEPS {
        let x = a.0 + t * (b.0 - a.0);
        let y = body.at(x);
        if y == 0.0 {
            return Ok(x);
        }
        if !y.is_finite() {
            // A point where the function has no value between two where it
            // differs in sign is a pole.
            return Err(Trouble::Jump { at: x, pole: true });
        }
        if (y > 0.0) == (a.1 > 0.0) {
            c = a;
        } else {
            c = b;
            b = a;
        }
        a = (x, y);
        let best = if a.1.abs() < b.1.abs() { a } else { b };
        let tolerance = f64::EPSILON * best.0.abs() + f64::MIN_POSITIVE;
        let part = tolerance / (b.0 - a.0).abs();
        if part >= 0.5 {
            return settle(best, [a, b], scale);
        }
        t = next_part(a, b, c).clamp(part, 1.0 - part);
    }
    let best = if a.1.abs() < b.1.abs() { a } else { b };
    settle(best, [a, b], scale)
}

/// Where to look next, as a part of the way from `a` to `b`.
fn next_part(a: (f64, f64), b: (f64, f64), c: (f64, f64)) -> f64 {
    let xi = (a.0 - b.0) / (c.0 - b.0);
    let phi = (a.1 - b.1) / (c.1 - b.1);
    let is_safe = phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi;
    if !is_safe {
        return 0.5;
    }
    let t = a.1 / (b.1 - a.1) * (c.1 / (b.1 - c.1))
        + (c.0 - a.0) / (b.0 - a.0) * (a.1 / (c.1 - a.1)) * (b.1 / (c.1 - b.1));
    if t.is_finite() { t } else { 0.5 }
}

/// Tells a zero from a jump over it and from a pole.
fn settle(best: (f64, f64), sides: [(f64, f64); 2], scale: f64) -> Result<f64, Trouble> {
    let [left, right] = sides.map(|side| side.1.abs());
    if left.max(right) > 1e3 * scale {
        return Err(Trouble::Jump {
            at: best.0,
            pole: true,
        });
    }
    if left.max(right) > JUMP * scale {
        return Err(Trouble::Jump {
            at: best.0,
            pole: false,
        });
    }
    Ok(best.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(f: impl Fn(f64) -> f64, from: f64, to: f64) -> Result<f64, Trouble> {
        root(&mut |x: f64| f(x), from, to)
    }

    #[test]
    fn roots_are_found_to_the_last_digits() {
        // DLMF 4.13: Ω e^Ω = 1 at Ω = 0.56714 32904 09783 87299 99686…
        let omega = of(|x| x * libm::exp(x) - 1.0, 0.0, 1.0);
        assert!((omega.expect("a root") - 0.567_143_290_409_783_8).abs() < 2e-16);
        // The Dottie number, OEIS A003957: cos x = x.
        let dottie = of(|x| libm::cos(x) - x, 0.0, 20.0);
        assert!((dottie.expect("a root") - 0.739_085_133_215_160_6).abs() < 2e-16);
        let square = of(|x| x * x - 2.0, 5.0, 0.0).expect("a root");
        assert!((square - std::f64::consts::SQRT_2).abs() < 3e-16);
    }

    #[test]
    fn roots_across_many_decades() {
        let root = of(|x| x - 3e-8, 1e-10, 1e10).expect("a root");
        assert!((root / 3e-8 - 1.0).abs() < 1e-15);
        let metres = of(|x| 1.0 / x - 1e-26, 1e20, 1e30).expect("a root");
        assert!((metres / 1e26 - 1.0).abs() < 1e-15);
        let near_zero = of(|x| libm::exp(x) - 1.0 - 1e-12, 0.0, 20.0).expect("a root");
        assert!((near_zero / 1e-12 - 1.0).abs() < 1e-3);
    }

    #[test]
    fn a_zero_at_an_end_counts() {
        assert_eq!(of(|x| x, 0.0, 20.0), Ok(0.0));
        assert_eq!(of(|x| x - 20.0, 0.0, 20.0), Ok(20.0));
        assert_eq!(of(|x| x - 1.0, 1.0, 1.0), Ok(1.0));
    }

    #[test]
    fn no_sign_change_tells_the_ends() {
        let outcome = of(|x| x * x + 1.0, -1.0, 2.0);
        let expected = Trouble::NoSignChange {
            ends: [-1.0, 2.0],
            differences: [2.0, 5.0],
            closest: None,
        };
        match (outcome, expected) {
            (
                Err(Trouble::NoSignChange {
                    ends, differences, ..
                }),
                Trouble::NoSignChange {
                    ends: e,
                    differences: d,
                    ..
                },
            ) => assert_eq!((ends, differences), (e, d)),
            (other, _) => panic!("{other:?}"),
        }
    }

    #[test]
    fn several_roots_are_listed() {
        match of(libm::sin, 1.0, 10.0) {
            Err(Trouble::ManyRoots(places)) => {
                assert_eq!(places.len(), 3);
                assert!((places[0] - std::f64::consts::PI).abs() < 1e-15);
            }
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn two_roots_between_points_are_seen() {
        let close = |x: f64| (x - 0.500_1) * (x - 0.500_9);
        match of(close, 0.0, 1.0) {
            Err(Trouble::ManyRoots(places)) => {
                assert_eq!(places.len(), 2);
                assert!((places[1] - 0.500_9).abs() < 1e-12);
            }
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn poles_and_jumps_are_not_roots() {
        assert!(matches!(
            of(|x| 1.0 / (x - 0.3), 0.0, 1.0),
            Err(Trouble::Jump { pole: true, .. })
        ));
        assert!(matches!(
            of(libm::tan, 1.0, 2.0),
            Err(Trouble::Jump { pole: true, .. })
        ));
        let step = |x: f64| if x < 0.3 { -1.0 } else { 1.0 };
        assert!(matches!(
            of(step, 0.0, 1.0),
            Err(Trouble::Jump { pole: false, .. })
        ));
        // A root beside a pole is still the root.
        let both = of(|x| libm::tan(x) - 1.0, 0.0, 2.0).expect("a root");
        assert!((both - std::f64::consts::FRAC_PI_4).abs() < 1e-15);
    }

    #[test]
    fn points_without_a_value_are_passed_over() {
        // log x has no value for x <= 0.
        let log = |x: f64| if x > 0.0 { libm::log(x) - 1.0 } else { f64::NAN };
        let e = of(log, -5.0, 5.0).expect("a root");
        assert!((e - std::f64::consts::E).abs() < 1e-15);
        assert_eq!(of(|_| f64::NAN, 1.0, 2.0), Err(Trouble::Body(1.0)));
    }

    #[test]
    fn an_identity_is_told() {
        assert_eq!(of(|_| 0.0, 0.0, 1.0), Err(Trouble::Identity));
    }
}
