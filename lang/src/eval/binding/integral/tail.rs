//! Infinite ranges: where the integrand lives, and the pieces to measure.

use super::super::super::body::Lanes;
use super::{Map, Piece};

/// Decades looked at: from far below the smallest length in metres to far
/// beyond the largest volume.
const DECADES: std::ops::Range<i32> = -60..90;

/// Points per decade.
const PER_DECADE: i32 = 4;

/// A tail that has fallen to this part of the peak does not count, should the
/// body overflow further out.
const NEGLIGIBLE: f64 = 1e-20;

/// The pieces of an integral with an infinite bound.
pub(super) fn pieces(body: &mut dyn Lanes, from: f64, to: f64) -> Vec<Piece> {
    match (from.is_infinite(), to.is_infinite()) {
        (false, false) => vec![Piece::finite(from, to)],
        (false, true) => half(body, from, 1.0),
        (true, false) => half(body, to, -1.0),
        (true, true) => {
            let mut pieces = half(body, 0.0, -1.0);
            pieces.extend(half(body, 0.0, 1.0));
            pieces
        }
    }
}

/// From `origin` to infinity in the direction of `sign`: a finite piece as far
/// as the integrand's scale, and the tail beyond.
fn half(body: &mut dyn Lanes, origin: f64, sign: f64) -> Vec<Piece> {
    let (scale, end) = look(body, origin, sign);
    let turn = origin + sign * scale;
    let near = Piece::finite(origin.min(turn), origin.max(turn));
    let far = Piece {
        low: end,
        high: 1.0,
        map: Map::Tail {
            origin,
            scale: sign * scale,
        },
    };
    vec![near, far]
}

/// The distance at which |y f| peaks, and the t at which the tail may be cut
/// off because the body has no value beyond (0 if it has).
fn look(body: &mut dyn Lanes, origin: f64, sign: f64) -> (f64, f64) {
    let least = origin.abs() * 1e-12;
    let distances: Vec<f64> = (DECADES.start * PER_DECADE..DECADES.end * PER_DECADE)
        .map(|k| libm::exp10(f64::from(k) / f64::from(PER_DECADE)))
        .filter(|y| *y > least)
        .collect();
    let points: Vec<f64> = distances.iter().map(|y| origin + sign * y).collect();
    let mut values = vec![0.0; points.len()];
    body.lanes(&points, &mut values);
    let weighed: Vec<f64> = values
        .iter()
        .zip(&distances)
        .map(|(value, y)| (value * y).abs())
        .collect();
    let finite = |weight: &&f64| weight.is_finite();
    let peak = weighed.iter().filter(finite).fold(0.0, |a, b| f64::max(a, *b));
    let scale = match weighed.iter().position(|weight| *weight == peak) {
        Some(place) if peak > 0.0 => distances[place],
        Some(_) | None => origin.abs().max(1.0),
    };
    let last = weighed.iter().rposition(|weight| weight.is_finite());
    let end = match last {
        Some(last) if last + 1 < weighed.len() && weighed[last] <= NEGLIGIBLE * peak => {
            scale / distances[last]
        }
        Some(_) | None => 0.0,
    };
    (scale, end)
}
