//! Integrals: adaptive Gauss–Kronrod, with help at difficult ends.
//!
//! Each panel is measured with the 10-point Gauss and the 21-point Kronrod
//! rule (Kronrod 1965; nodes and error estimate as in Piessens et al. 1983,
//! QUADPACK, sec. 2.2), and the worst panels are halved until the errors sum
//! to the goal.
//!
//! - An infinite bound is a tail of its own, x = a ± s/t with t from 1 to 0.
//!   The scale s is where the integrand lives, found by a look over all
//!   decades, for nothing is known of its unit.
//! - Where halving creeps towards an end, as at 1/√x, the integral over
//!   panels that halve towards that end is a sequence whose limit Wynn's ε
//!   algorithm (Wynn 1956, MTAC 10, 91) gives to nearly full precision.

use super::super::body::Lanes;
use super::super::limits;
use super::super::reduce::Sum;
use super::Trouble;

mod epsilon;
mod tail;

/// Relative error aimed at.
const GOAL: f64 = 1e-12;

/// Relative error taken if more cannot be had.
const ACCEPTED: f64 = 1e-10;

/// Parts of the integral of |f| that rounding alone may cost.
const ROUNDING: f64 = 100.0 * f64::EPSILON;

/// Panels to begin with: more than one, so that a narrow feature is not
/// missed; even, so that none lies across the middle.
const FIRST_PANELS: usize = 4;

/// Panels halved in one round.
const HALVED: usize = 8;

/// Rounds after which an end is suspected.
const PATIENCE: usize = 48;

/// An end is difficult when its panel has shrunk to this part of the piece.
const CREPT: f64 = 1e-5;

/// A panel this small beside its end is lost in the rounding of its points.
const RESOLVED: f64 = 1e-8;

/// Panels towards a difficult end.
const GRADED: usize = 40;

/// The positive Kronrod nodes, from the outside in, and 0.
const NODES: [f64; 11] = [
    0.995_657_163_025_808_1,
    0.973_906_528_517_171_7,
    0.930_157_491_355_708_2,
    0.865_063_366_688_984_5,
    0.780_817_726_586_416_9,
    0.679_409_568_299_024_4,
    0.562_757_134_668_604_7,
    0.433_395_394_129_247_2,
    0.294_392_862_701_460_2,
    0.148_874_338_981_631_22,
    0.0,
];

const KRONROD: [f64; 11] = [
    0.011_694_638_867_371_874,
    0.032_558_162_307_964_725,
    0.054_755_896_574_351_995,
    0.075_039_674_810_919_96,
    0.093_125_454_583_697_6,
    0.109_387_158_802_297_64,
    0.123_491_976_262_065_84,
    0.134_709_217_311_473_34,
    0.142_775_938_577_060_09,
    0.147_739_104_901_338_49,
    0.149_445_554_002_916_9,
];

/// Gauss weights at the odd places of [`NODES`].
const GAUSS: [f64; 5] = [
    0.066_671_344_308_688_14,
    0.149_451_349_150_580_6,
    0.219_086_362_515_982_04,
    0.269_266_719_309_996_35,
    0.295_524_224_714_752_87,
];

const POINTS: usize = 21;

/// The integral of `body` from one bound to another, either of which may be
/// infinite.
pub(super) fn integral(body: &mut dyn Lanes, from: f64, to: f64) -> Result<f64, Trouble> {
    if from == to {
        return Ok(0.0);
    }
    if from > to {
        return integral(body, to, from).map(|value| -value);
    }
    let pieces = if from.is_infinite() || to.is_infinite() {
        tail::pieces(body, from, to)
    } else {
        vec![Piece::finite(from, to)]
    };
    Work::new(body, pieces).settle()
}

/// A stretch of the integral with the variable it is measured in.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Piece {
    /// The variable's range, low to high.
    low: f64,
    high: f64,
    map: Map,
}

/// How the variable t of a piece gives the point x.
#[derive(Clone, Copy, Debug, PartialEq)]
enum Map {
    /// x = t
    Plain,
    /// x = origin + scale/t: an infinite end at t = 0.
    Tail { origin: f64, scale: f64 },
}

impl Piece {
    fn finite(low: f64, high: f64) -> Piece {
        Piece {
            low,
            high,
            map: Map::Plain,
        }
    }
}

impl Map {
    /// The point and |dx/dt|.
    fn point(self, t: f64) -> (f64, f64) {
        match self {
            Map::Plain => (t, 1.0),
            Map::Tail { origin, scale } => (origin + scale / t, (scale / t / t).abs()),
        }
    }
}

/// A measured panel.
#[derive(Clone, Copy)]
struct Panel {
    piece: usize,
    low: f64,
    high: f64,
    value: f64,
    error: f64,
    /// The integral of |f|.
    size: f64,
    /// It cannot be halved again.
    last: bool,
}

struct Work<'b> {
    body: &'b mut dyn Lanes,
    pieces: Vec<Piece>,
    panels: Vec<Panel>,
}

/// An estimate over some panels.
#[derive(Clone, Copy, Default)]
struct Estimate {
    value: f64,
    error: f64,
    size: f64,
}

impl Estimate {
    fn over<'p>(panels: impl IntoIterator<Item = &'p Panel>) -> Estimate {
        let mut sums = [Sum::default(); 3];
        for panel in panels {
            let parts = [panel.value, panel.error, panel.size];
            for (sum, part) in sums.iter_mut().zip(parts) {
                sum.add(part);
            }
        }
        let [value, error, size] = sums.map(Sum::total);
        Estimate { value, error, size }
    }

    /// Whether it is good to a part of its value, or as good as rounding lets
    /// it be.
    fn is_within(self, part: f64) -> bool {
        self.error <= (part * self.value.abs()).max(ROUNDING * self.size)
    }
}

impl Work<'_> {
    fn new(body: &mut dyn Lanes, pieces: Vec<Piece>) -> Work<'_> {
        Work {
            body,
            pieces,
            panels: Vec::new(),
        }
    }

    fn settle(mut self) -> Result<f64, Trouble> {
        self.begin()?;
        for rounds in [PATIENCE, limits::PANELS] {
            let estimate = self.adapt(rounds)?;
            if estimate.is_within(GOAL) {
                return Ok(estimate.value);
            }
            if let Some(value) = self.grade_ends()? {
                return Ok(value);
            }
        }
        let Estimate { value, error, .. } = Estimate::over(&self.panels);
        let estimate = Estimate::over(&self.panels);
        if estimate.is_within(ACCEPTED) {
            return Ok(value);
        }
        Err(Trouble::NotSettled { value, error })
    }

    /// Halves panels until the goal is reached, or for so many rounds.
    fn adapt(&mut self, rounds: usize) -> Result<Estimate, Trouble> {
        for _ in 0..rounds {
            let estimate = Estimate::over(&self.panels);
            if !estimate.value.is_finite() {
                return Err(Trouble::Overflow);
            }
            if estimate.is_within(GOAL) || self.panels.len() >= limits::PANELS || !self.halve_worst()? {
                break;
            }
        }
        Ok(Estimate::over(&self.panels))
    }

    fn begin(&mut self) -> Result<(), Trouble> {
        let mut stretches = Vec::new();
        for (index, piece) in self.pieces.iter().enumerate() {
            let width = (piece.high - piece.low) / FIRST_PANELS as f64;
            let mut low = piece.low;
            for part in 1..=FIRST_PANELS {
                let high = if part == FIRST_PANELS {
                    piece.high
                } else {
                    piece.low + width * part as f64
                };
                stretches.push((index, low, high));
                low = high;
            }
        }
        self.measure(&stretches)
    }

    /// Halves the panels of largest error; false if none can be halved.
    fn halve_worst(&mut self) -> Result<bool, Trouble> {
        let worst = |panel: &Panel| if panel.last { 0.0 } else { panel.error };
        self.panels.sort_by(|a, b| worst(b).total_cmp(&worst(a)));
        let largest = self.panels.first().map_or(0.0, worst);
        if largest == 0.0 {
            return Ok(false);
        }
        let count = self
            .panels
            .iter()
            .take(HALVED)
            .take_while(|panel| worst(panel) > largest / 64.0)
            .count();
        let halved: Vec<Panel> = self.panels.drain(..count).collect();
        let stretches: Vec<(usize, f64, f64)> = halved
            .iter()
            .flat_map(|panel| {
                let middle = 0.5 * panel.low + 0.5 * panel.high;
                [
                    (panel.piece, panel.low, middle),
                    (panel.piece, middle, panel.high),
                ]
            })
            .collect();
        self.measure(&stretches)?;
        Ok(true)
    }

    /// Measures stretches and adds them to the panels.
    fn measure(&mut self, stretches: &[(usize, f64, f64)]) -> Result<(), Trouble> {
        let mut points = Vec::with_capacity(stretches.len() * POINTS);
        let mut weights = Vec::with_capacity(points.capacity());
        for (piece, low, high) in stretches {
            let map = self.pieces[*piece].map;
            for t in nodes(*low, *high) {
                let (point, weight) = map.point(t);
                points.push(point);
                weights.push(weight);
            }
        }
        let mut values = vec![0.0; points.len()];
        self.body.lanes(&points, &mut values);
        for ((value, weight), point) in values.iter_mut().zip(&weights).zip(&points) {
            if !value.is_finite() {
                return Err(Trouble::Body(*point));
            }
            *value *= weight;
        }
        for ((piece, low, high), values) in stretches.iter().zip(values.chunks(POINTS)) {
            self.panels.push(panel(*piece, *low, *high, values));
        }
        Ok(())
    }

    /// The integral with the half pieces at difficult ends replaced by limits.
    fn grade_ends(&mut self) -> Result<Option<f64>, Trouble> {
        let mut rest = self.panels.clone();
        let mut parts = Vec::new();
        for (index, piece) in self.pieces.clone().into_iter().enumerate() {
            let middle =
                piece.low + (piece.high - piece.low) / FIRST_PANELS as f64 * (FIRST_PANELS / 2) as f64;
            for end in [piece.low, piece.high] {
                if !self.has_crept(index, end, piece.high - piece.low) {
                    continue;
                }
                parts.push(self.grade(piece, end, middle)?);
                let (low, high) = (end.min(middle), end.max(middle));
                rest.retain(|panel| panel.piece != index || panel.low < low || panel.high > high);
            }
        }
        let mut total = Estimate::over(&rest);
        for part in &parts {
            total.value += part.value;
            total.error += part.error;
            total.size += part.size;
        }
        Ok((!parts.is_empty() && total.is_within(ACCEPTED)).then_some(total.value))
    }

    fn has_crept(&self, piece: usize, end: f64, width: f64) -> bool {
        self.panels.iter().any(|panel| {
            panel.piece == piece
                && (panel.low == end || panel.high == end)
                && panel.high - panel.low < CREPT * width
        })
    }

    /// The integral from an end to the middle of a piece, as the limit of
    /// integrals that leave out less and less at the end.
    fn grade(&mut self, piece: Piece, end: f64, middle: f64) -> Result<Estimate, Trouble> {
        let mut sum = Estimate::default();
        let mut sums = Vec::new();
        let mut terms = Vec::new();
        for k in 0..GRADED {
            let outer = end + libm::ldexp(middle - end, -(k as i32));
            let inner = end + libm::ldexp(middle - end, -(k as i32) - 1);
            if (outer - inner).abs() <= RESOLVED * end.abs() {
                break;
            }
            let part = Piece {
                low: outer.min(inner),
                high: outer.max(inner),
                map: piece.map,
            };
            let mut work = Work::new(self.body, vec![part]);
            work.begin()?;
            let term = work.adapt(PATIENCE)?;
            sum.value += term.value;
            sum.error += term.error;
            sum.size += term.size;
            sums.push(sum.value);
            terms.push(term.value);
        }
        if epsilon::grows(&terms) {
            return Err(Trouble::Diverges(piece.map.point(end).0));
        }
        let limit = epsilon::limit(&sums);
        Ok(Estimate {
            value: limit.value,
            error: limit.error + sum.error,
            size: sum.size,
        })
    }
}

/// The points of both rules on a panel.
fn nodes(low: f64, high: f64) -> impl Iterator<Item = f64> {
    let (centre, half) = (0.5 * low + 0.5 * high, 0.5 * high - 0.5 * low);
    (0..POINTS).map(move |i| {
        if i < 11 {
            centre - half * NODES[i]
        } else {
            centre + half * NODES[POINTS - 1 - i]
        }
    })
}

/// A panel from the integrand at its points.
fn panel(piece: usize, low: f64, high: f64, values: &[f64]) -> Panel {
    let half = 0.5 * high - 0.5 * low;
    let weight = |i: usize| KRONROD[i.min(POINTS - 1 - i)];
    let gauss = |i: usize| {
        let place = i.min(POINTS - 1 - i);
        if place % 2 == 1 { GAUSS[place / 2] } else { 0.0 }
    };
    let over = |f: &dyn Fn(usize) -> f64| (0..POINTS).map(f).sum::<f64>();
    let kronrod = over(&|i| weight(i) * values[i]);
    let mean = 0.5 * kronrod;
    let size = half * over(&|i| weight(i) * values[i].abs());
    let spread = half * over(&|i| weight(i) * (values[i] - mean).abs());
    let difference = half * (kronrod - over(&|i| gauss(i) * values[i])).abs();
    let width = high - low;
    Panel {
        piece,
        low,
        high,
        value: half * kronrod,
        error: error_of(difference, spread, size),
        size,
        last: width <= 256.0 * f64::EPSILON * low.abs().max(high.abs()),
    }
}

/// The error estimate of QUADPACK, sec. 2.2.
fn error_of(difference: f64, spread: f64, size: f64) -> f64 {
    let mut error = difference;
    if spread > 0.0 && difference > 0.0 {
        let ratio = 200.0 * difference / spread;
        error = spread * (ratio * ratio.sqrt()).min(1.0);
    }
    error.max(50.0 * f64::EPSILON * size)
}

#[cfg(test)]
mod tests;
