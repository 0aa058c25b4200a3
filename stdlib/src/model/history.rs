//! The history of a model: from where to where it expands, and the integrals
//! of light and of time along it.
//!
//! In units of the Hubble time, with `s = 1 + z`,
//!
//! - light: `∫ ds/E`, comoving distance and conformal time;
//! - time: `∫ ds/(s E)`, cosmic time.
//!
//! Each is tabulated once, on first use, from `s = 2⁻²⁴` to `2³⁴`, and summed
//! from today, from the beginning and from the end, each outward from its own
//! zero, so that neither the first second nor the far future is a difference
//! of large numbers. Where `E²` vanishes (a bounce, a turnaround) the
//! expanding branch ends; close to there `√|s − s_end|` is the variable.

use super::DomainError;
use super::expansion::Expansion;
use crate::numerics::interpolate::{Cumulative, Failure};
use crate::numerics::quadrature::{adaptive, legendre, tail_above, tail_below};
use crate::numerics::root::bracketed;
use std::sync::OnceLock;

/// The span of the tables.
const TABLE: (f64, f64) = (1.0 / 16_777_216.0, 17_179_869_184.0);
/// Ratio of the steps of the search for zeros of E²: 2^(1/16).
const SEARCH_RATIO: f64 = 1.044_273_782_427_413_8;
/// No zero of E² is looked for beyond this s or its inverse.
const FAR: f64 = 1e60;
/// A dip of E² this deep, relative to its terms, is searched for a zero.
const DIP: f64 = 0.3;
/// E² this far below its terms is zero: the model hovers there for ever.
const VANISHING: f64 = 1e-14;

/// Where the expanding branch ends on one side.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Edge {
    /// It goes on without end.
    Open,
    /// The expansion rate vanishes at this `s`.
    Turn(f64),
    /// w(z) has no value beyond this `s`.
    Undefined(f64),
}

/// What is integrated.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// `1/E`.
    Light,
    /// `1/(s E)`.
    Time,
}

/// The expanding branch of a model.
pub struct History {
    /// Towards s → ∞.
    pub past: Edge,
    /// Towards s → 0.
    pub future: Edge,
    /// Both as numbers: 0 and ∞ where it goes on.
    limits: (f64, f64),
    light: OnceLock<Result<Track, DomainError>>,
    time: OnceLock<Result<Track, DomainError>>,
}

/// One integral along the history.
pub struct Track {
    kind: Kind,
    past: Edge,
    future: Edge,
    table: Cumulative,
    /// From the upper end of the table to the beginning, if that is finite.
    above: Option<f64>,
    /// From the lower end of the table to the end, if that is finite.
    below: Option<f64>,
}

impl Edge {
    /// Where it is, with `open` for one that goes on.
    pub fn place(self, open: f64) -> f64 {
        match self {
            Edge::Open => open,
            Edge::Turn(s) | Edge::Undefined(s) => s,
        }
    }
}

impl History {
    /// Finds where the expanding branch ends.
    ///
    /// # Errors
    /// Where w(z) has no value today or varies too fast.
    pub fn new(expansion: &Expansion) -> Result<History, DomainError> {
        let (lower, upper) = expansion.dark.range()?;
        let mut past = if upper.is_finite() {
            Edge::Undefined(upper)
        } else {
            Edge::Open
        };
        let mut future = if lower > 0.0 {
            Edge::Undefined(lower)
        } else {
            Edge::Open
        };
        if expansion.may_vanish() {
            let ahead = |end: f64, ratio: f64, far: f64| {
                let near = if ratio > 1.0 { TABLE.1 } else { TABLE.0 };
                let first = zero(
                    expansion,
                    1.0,
                    if ratio > 1.0 { end.min(near) } else { end.max(near) },
                    ratio,
                );
                // Beyond the tables only one term is left to take over.
                let goes_on = if ratio > 1.0 { end > near } else { end < near };
                first.or_else(|| {
                    goes_on.then(|| zero(expansion, near, far, if ratio > 1.0 { 2.0 } else { 0.5 }))?
                })
            };
            if let Some(s) = ahead(upper, SEARCH_RATIO, FAR) {
                past = Edge::Turn(s);
            }
            if let Some(s) = ahead(lower, 1.0 / SEARCH_RATIO, 1.0 / FAR) {
                future = Edge::Turn(s);
            }
        }
        Ok(History {
            past,
            future,
            limits: (future.place(0.0), past.place(f64::INFINITY)),
            light: OnceLock::new(),
            time: OnceLock::new(),
        })
    }

    /// Whether the expanding branch has this `s`.
    ///
    /// # Errors
    /// A sentence on where it ends.
    #[inline]
    pub fn admit(&self, s: f64) -> Result<(), DomainError> {
        if self.limits.0 <= s && s <= self.limits.1 {
            Ok(())
        } else {
            Err(self.beyond(s))
        }
    }

    #[cold]
    fn beyond(&self, s: f64) -> DomainError {
        let z = s - 1.0;
        let edge = if s > 1.0 { self.past } else { self.future };
        let message = match edge {
            Edge::Turn(end) if s > 1.0 => {
                format!(
                    "this model had no big bang: it bounced at z = {:.6}, and nothing ever had z = {z}",
                    end - 1.0
                )
            }
            Edge::Turn(end) => {
                format!(
                    "this model turns round at z = {:.6} and never expands to z = {z}",
                    end - 1.0
                )
            }
            Edge::Undefined(end) => format!(
                "w(z) has no value beyond z = {:.6}, so z = {z} is out of reach",
                end - 1.0
            ),
            Edge::Open => format!("there is no epoch of z = {z}"),
        };
        DomainError(message.into())
    }

    /// An integral along the history, tabulated on first use.
    #[inline]
    pub fn track(&self, expansion: &Expansion, kind: Kind) -> Result<&Track, DomainError> {
        let cell = match kind {
            Kind::Light => &self.light,
            Kind::Time => &self.time,
        };
        let track = cell.get_or_init(|| Track::new(expansion, kind, self.past, self.future));
        track.as_ref().map_err(Clone::clone)
    }
}

/// The first zero of E² on the way from `start` to `end`, in steps of `ratio`.
fn zero(expansion: &Expansion, start: f64, end: f64, ratio: f64) -> Option<f64> {
    let beyond = |s: f64| if ratio > 1.0 { s > end } else { s < end };
    let (mut before, mut here) = (start, start);
    let mut values = (f64::INFINITY, expansion.balance(start));
    while !beyond(here) {
        let next = here * ratio;
        let value = expansion.balance(next);
        if value <= 0.0 {
            return bracketed(here, next, |s| expansion.square(s));
        }
        if values.1 < values.0 && values.1 < value && values.1 < DIP {
            let lowest = minimum(before, next, |s| expansion.balance(s));
            let depth = expansion.balance(lowest);
            if depth <= 0.0 {
                return bracketed(before, lowest, |s| expansion.square(s));
            }
            if depth < VANISHING {
                return Some(lowest);
            }
        }
        (before, here) = (here, next);
        values = (values.1, value);
    }
    None
}

/// The minimum of `f` between `a` and `b`, by golden sections.
fn minimum(a: f64, b: f64, f: impl Fn(f64) -> f64) -> f64 {
    const GOLDEN: f64 = 0.618_033_988_749_894_9;
    let (mut a, mut b) = (a, b);
    for _ in 0..80 {
        let (left, right) = (b - GOLDEN * (b - a), a + GOLDEN * (b - a));
        if f(left) < f(right) {
            b = right;
        } else {
            a = left;
        }
    }
    0.5 * (a + b)
}

impl Kind {
    #[inline]
    fn integrand(self, expansion: &Expansion, s: f64) -> f64 {
        match self {
            Kind::Light => 1.0 / expansion.rate(s),
            Kind::Time => 1.0 / (s * expansion.rate(s)),
        }
    }
}

impl Track {
    fn new(expansion: &Expansion, kind: Kind, past: Edge, future: Edge) -> Result<Track, DomainError> {
        let upper = match past {
            Edge::Open => TABLE.1,
            Edge::Undefined(s) => s.min(TABLE.1),
            Edge::Turn(s) => s - (s / 64.0).min(0.5 * (s - 1.0)),
        };
        let lower = match future {
            Edge::Open => TABLE.0,
            Edge::Undefined(s) => s.max(TABLE.0),
            Edge::Turn(s) => s + (s / 64.0).min(0.5 * (1.0 - s)),
        };
        let table = Cumulative::new(lower, upper, |s| kind.integrand(expansion, s)).map_err(refusal)?;
        let mut track = Track {
            kind,
            past,
            future,
            table,
            above: None,
            below: None,
        };
        track.above = track.beginning(expansion, upper);
        track.below = track.end(expansion, lower);
        Ok(track)
    }

    /// The power of s below which the integral to s → ∞ converges and above
    /// which that to s → 0 does.
    fn critical_power(&self) -> f64 {
        match self.kind {
            Kind::Light => 2.0,
            Kind::Time => 0.0,
        }
    }

    fn beginning(&self, expansion: &Expansion, upper: f64) -> Option<f64> {
        match self.past {
            Edge::Undefined(_) => None,
            Edge::Turn(end) => Some(self.near(expansion, end, upper, end)),
            Edge::Open if expansion.early_power() > self.critical_power() => {
                known(tail_above(upper, |s| self.kind.integrand(expansion, s)))
            }
            Edge::Open => None,
        }
    }

    fn end(&self, expansion: &Expansion, lower: f64) -> Option<f64> {
        match self.future {
            Edge::Undefined(_) => None,
            Edge::Turn(end) => Some(self.near(expansion, end, end, lower)),
            Edge::Open if expansion.late_power() < self.critical_power() => {
                known(tail_below(lower, |s| self.kind.integrand(expansion, s)))
            }
            Edge::Open => None,
        }
    }

    /// The integral between two points close to where E² vanishes.
    fn near(&self, expansion: &Expansion, turn: f64, from: f64, to: f64) -> f64 {
        let side = if turn > 1.0 { -1.0 } else { 1.0 };
        let (a, b) = (libm::sqrt((from - turn).abs()), libm::sqrt((to - turn).abs()));
        let (a, b) = if a < b { (a, b) } else { (b, a) };
        legendre(a, b, |v| {
            let value = self.kind.integrand(expansion, turn + side * v * v);
            // Rounding may put a point on the wrong side of the zero.
            if value.is_finite() { 2.0 * v * value } else { 0.0 }
        })
    }

    /// The integral between two points of which at most one is in the table.
    fn between(&self, expansion: &Expansion, from: f64, to: f64) -> f64 {
        match (self.past, self.future) {
            (Edge::Turn(turn), _) if to > 1.0 => self.near(expansion, turn, from, to),
            (_, Edge::Turn(turn)) if from < 1.0 => self.near(expansion, turn, from, to),
            _ => adaptive(libm::log(from), libm::log(to), 1e-14, |x| {
                let s = libm::exp(x);
                s * self.kind.integrand(expansion, s)
            }),
        }
    }

    /// From today to z: positive into the past.
    #[inline]
    pub fn before_today(&self, expansion: &Expansion, z: f64) -> f64 {
        match self.table.from_one(z) {
            Some(value) => value,
            None => self.before_today_afar(expansion, 1.0 + z),
        }
    }

    #[cold]
    fn before_today_afar(&self, expansion: &Expansion, s: f64) -> f64 {
        let (lower, upper) = self.table.ends();
        let (to_lower, to_upper) = self.table.around_one();
        if s > upper {
            to_upper + self.between(expansion, upper, s)
        } else {
            -to_lower - self.between(expansion, s, lower)
        }
    }

    /// From the beginning to z; `None` if that is infinite or undefined.
    #[inline]
    pub fn since_beginning(&self, expansion: &Expansion, z: f64) -> Option<f64> {
        let above = self.above?;
        match self.table.to_upper(z) {
            Some(value) => Some(value + above),
            None => Some(self.since_beginning_afar(expansion, 1.0 + z, above)),
        }
    }

    #[cold]
    fn since_beginning_afar(&self, expansion: &Expansion, s: f64, above: f64) -> f64 {
        let (lower, upper) = self.table.ends();
        if s < lower {
            let (to_lower, to_upper) = self.table.around_one();
            return above + to_upper + to_lower + self.between(expansion, s, lower);
        }
        match self.past {
            Edge::Turn(turn) => self.near(expansion, turn, s, turn),
            Edge::Open | Edge::Undefined(_) => {
                debug_assert!(s > upper);
                tail_above(s, |s| self.kind.integrand(expansion, s))
            }
        }
    }

    /// From z to the end: to s = 0, or to the turnaround; `None` if that is
    /// infinite or undefined.
    #[inline]
    pub fn to_end(&self, expansion: &Expansion, z: f64) -> Option<f64> {
        let below = self.below?;
        match self.table.to_lower(z) {
            Some(value) => Some(value + below),
            None => Some(self.to_end_afar(expansion, 1.0 + z, below)),
        }
    }

    #[cold]
    fn to_end_afar(&self, expansion: &Expansion, s: f64, below: f64) -> f64 {
        let (lower, upper) = self.table.ends();
        if s > upper {
            let (to_lower, to_upper) = self.table.around_one();
            return below + to_upper + to_lower + self.between(expansion, upper, s);
        }
        match self.future {
            Edge::Turn(turn) => self.near(expansion, turn, turn, s),
            Edge::Open | Edge::Undefined(_) => {
                debug_assert!(s < lower);
                tail_below(s, |s| self.kind.integrand(expansion, s))
            }
        }
    }
}

/// A value unless it is not a number: an integral past what can be followed.
fn known(value: f64) -> Option<f64> {
    value.is_finite().then_some(value)
}

fn refusal(failure: Failure) -> DomainError {
    let (Failure::NotFinite(s) | Failure::TooRough(s)) = failure;
    DomainError(format!("the expansion rate cannot be integrated near z = {}", s - 1.0).into())
}
