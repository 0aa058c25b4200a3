//! Linear growth of structure.
//!
//! The density contrast of cold matter obeys, with `x = ln a`,
//!
//! `D″ + (1 − q) D′ = (3/2) Ωcb(a) D`
//!
//! (Peebles 1980, The Large-Scale Structure of the Universe, sec. 10), with
//! radiation, neutrinos, curvature and dark energy in the expansion but smooth.
//! It is integrated once, from `1 + z = 10¹⁰`, where `f = D′/D` solves
//! `f² + q f = (3/2) Ωcb`: f = 1 in matter, the rise of Mészáros 1974 (A&A 37,
//! 225), `D ∝ a + (2/3) a_eq`, in radiation.

mod entries;

pub use entries::ENTRIES;

use super::{Found, Redshift, finite, undefined};
use crate::model::history::Edge;
use crate::model::parameters::id;
use crate::model::{DomainError, Model};
use crate::numerics::ode;
use std::sync::OnceLock;

/// Where the integration starts and ends, as ln a; the end lies at
/// 1 + z = 6e-8.
const START: f64 = -23.025_850_929_940_457;
const END: f64 = 16.6;
/// Step in ln a: the method is of order 10, its error below 1e-15 per step.
const STEP: f64 = 0.125;
/// Growth is not followed closer to a turnaround than this in 1 + z: q is
/// infinite there.
const MARGIN: f64 = 1.0 / 64.0;

/// The growing mode on a grid of ln a.
pub(crate) struct Growth {
    /// `(D, D′)` at START + n STEP, normalised to a in the era of matter.
    states: Vec<(f64, f64)>,
    /// D today.
    today: f64,
}

/// Growth tables are made on first use.
#[derive(Default)]
pub(crate) struct GrowthCell(OnceLock<Result<Growth, DomainError>>);

impl GrowthCell {
    /// The growth of `model`.
    fn get(&self, model: &Model) -> Found<&Growth> {
        self.0
            .get_or_init(|| Growth::new(model))
            .as_ref()
            .map_err(Clone::clone)
    }
}

/// `(p, q)` of `D″ = p D′ + q D` at x.
fn coefficients(model: &Model, x: f64) -> (f64, f64) {
    let s = libm::exp(-x);
    let expansion = model.expansion();
    let cold = expansion.cold * (s * s * s) / expansion.square(s);
    (expansion.deceleration(s) - 1.0, 1.5 * cold)
}

impl Growth {
    fn new(model: &Model) -> Found<Growth> {
        let history = model.history()?;
        if model.budget().cold == 0.0 {
            return Err(undefined("a model without cold matter has nothing that grows"));
        }
        match history.past {
            Edge::Open => {}
            Edge::Turn(_) | Edge::Undefined(_) => {
                return Err(undefined(
                    "growth starts from a big bang, which this model does not have",
                ));
            }
        }
        let end = match history.future {
            Edge::Open => END,
            Edge::Turn(s) | Edge::Undefined(s) => -libm::log(s + (1.0 - s) * MARGIN),
        };
        let budget = model.budget();
        let relativistic: f64 = budget
            .massive
            .iter()
            .map(|species| species.massless_density)
            .sum();
        let equality = (budget.photons + budget.massless + relativistic) / budget.cold;
        let (slope, source) = coefficients(model, START);
        let q = slope + 1.0;
        let rate = 0.5 * (libm::sqrt(q * q + 4.0 * source) - q);
        let start = libm::exp(START) + 2.0 / 3.0 * equality;
        let mut states = vec![(start, rate * start)];
        let mut x = START;
        while x + STEP <= end.max(0.0) + STEP && x < END {
            let last = states[states.len() - 1];
            let next = ode::step(x, STEP, last, |x| coefficients(model, x));
            if !(next.0.is_finite() && next.1.is_finite()) {
                break;
            }
            states.push(next);
            x = START + STEP * (states.len() - 1) as f64;
        }
        let mut growth = Growth { states, today: 1.0 };
        growth.today = growth.at(model, 0.0).0;
        if growth.today.is_finite() && growth.today > 0.0 {
            Ok(growth)
        } else {
            Err(undefined("structure does not grow regularly in this model"))
        }
    }

    /// `(D, D′)` at x: one step from the grid point before.
    fn at(&self, model: &Model, x: f64) -> (f64, f64) {
        let place = ((x - START) / STEP).max(0.0) as usize;
        let place = place.min(self.states.len() - 1);
        let from = START + STEP * place as f64;
        if x == from {
            return self.states[place];
        }
        ode::step(from, x - from, self.states[place], |x| coefficients(model, x))
    }
}

impl Model {
    /// `(D, D′)`, D being a in the era of matter.
    fn growing_mode(&self, z: Redshift) -> Found<((f64, f64), f64)> {
        let history = self.history()?;
        history.admit(z.stretch())?;
        let growth = self.growth().get(self)?;
        let x = -libm::log(z.stretch());
        let last = START + STEP * (growth.states.len() - 1) as f64;
        let turn = history.future.place(0.0);
        let too_close = matches!(history.future, Edge::Turn(_)) && z.stretch() < turn + (1.0 - turn) * MARGIN;
        if x < START || x > last || too_close {
            return Err(undefined(format_args!(
                "growth is not followed to z = {}",
                z.get()
            )));
        }
        Ok((growth.at(self, x), growth.today))
    }

    /// Growth factor of cold matter, 1 today.
    ///
    /// # Errors
    /// Where there is no cold matter or was no big bang, and beyond 1 + z = 10¹⁰.
    ///
    /// # Accuracy
    /// Relative error ≤ 1e-9 against 40-digit references: `tests/accuracy.rs`.
    pub fn growth_factor(&self, z: Redshift) -> Found<f64> {
        let ((value, _), today) = self.growing_mode(z)?;
        finite(value / today)
    }

    /// Growth rate `f = d ln D/d ln a`.
    ///
    /// # Errors
    /// As [`Model::growth_factor`].
    pub fn growth_rate(&self, z: Redshift) -> Found<f64> {
        let ((value, slope), _) = self.growing_mode(z)?;
        finite(slope / value)
    }

    /// Growth relative to that in a universe of matter alone: D/a, 1 in the
    /// era of matter.
    ///
    /// # Errors
    /// As [`Model::growth_factor`].
    ///
    /// # Source
    /// Carroll, Press & Turner 1992, ARA&A 30, 499, eq. 29.
    pub fn growth_suppression(&self, z: Redshift) -> Found<f64> {
        let ((value, _), _) = self.growing_mode(z)?;
        finite(value * z.stretch())
    }

    /// σ8 at z: σ8 D(z).
    ///
    /// # Errors
    /// Where the model does not say σ8.
    pub fn sigma8_at(&self, z: Redshift) -> Found<f64> {
        Ok(self.sigma8()? * self.growth_factor(z)?)
    }

    /// σ8 as the model says it.
    pub(crate) fn sigma8(&self) -> Found<f64> {
        super::template::quoted(self, id::SIGMA8, "σ8")
    }
}
