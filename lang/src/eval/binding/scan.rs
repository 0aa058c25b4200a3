//! A first look at a body over a whole interval.

use super::super::body::Lanes;

/// Points spread evenly.
const EVEN_POINTS: usize = 257;

/// Points spread evenly in the logarithm, where the interval spans more than
/// [`WIDE`] on one side of zero.
const LOG_POINTS: usize = 96;

/// A ratio of ends from which even points alone would miss the near end.
const WIDE: f64 = 100.0;

/// How far towards an end at zero the logarithmic points go.
const DEPTH: f64 = 1e-9;

/// A body looked at: points in order and its value at each.
pub(super) struct Scan {
    pub points: Vec<f64>,
    pub values: Vec<f64>,
}

/// Looks at `body` from `low` to `high`, both ends included.
pub(super) fn scan(body: &mut dyn Lanes, low: f64, high: f64) -> Scan {
    let mut points = even(low, high, EVEN_POINTS);
    points.extend(logarithmic(low, high));
    points.sort_by(f64::total_cmp);
    points.dedup();
    let mut values = vec![0.0; points.len()];
    body.lanes(&points, &mut values);
    Scan { points, values }
}

/// `count` points from `low` to `high`, both exact.
pub(super) fn even(low: f64, high: f64, count: usize) -> Vec<f64> {
    let last = (count - 1) as f64;
    let mut points: Vec<f64> = (0..count)
        .map(|i| low + (high - low) * (i as f64 / last))
        .collect();
    if let Some(end) = points.last_mut() {
        *end = high;
    }
    points.retain(|point| (low..=high).contains(point));
    points
}

fn logarithmic(low: f64, high: f64) -> Vec<f64> {
    let (near, far) = if low >= 0.0 { (low, high) } else { (-high, -low) };
    if near < 0.0 || far <= near.abs() * WIDE {
        return Vec::new();
    }
    let near = if near == 0.0 { far * DEPTH } else { near };
    let ratio = libm::log(near / far);
    let sign = if low >= 0.0 { 1.0 } else { -1.0 };
    (0..LOG_POINTS)
        .map(|i| sign * far * libm::exp(ratio * (i as f64 / LOG_POINTS as f64)))
        .filter(|point| (low..=high).contains(point))
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_scan_holds_both_ends_in_order() {
        for (low, high) in [
            (0.0, 20.0),
            (-3.0, 5.0),
            (1e-10, 1e10),
            (-1e10, -1e-10),
            (1.0, 1.0 + 1e-15),
        ] {
            let scan = scan(&mut |x: f64| x, low, high);
            assert_eq!(scan.points.first(), Some(&low));
            assert_eq!(scan.points.last(), Some(&high));
            assert!(scan.points.is_sorted());
            assert_eq!(scan.points, scan.values);
        }
    }

    #[test]
    fn a_wide_interval_is_also_looked_at_in_the_logarithm() {
        let scan = scan(&mut |x: f64| x, 1e-10, 1e10);
        assert!(scan.points.iter().filter(|x| **x < 1.0).count() > 30);
    }
}
