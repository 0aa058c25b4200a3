//! The binding forms: `integral`, `sum`, `root`, `maximum`, `minimum`,
//! `derivative`, over a body that is run for many values at once.

mod derivative;
mod extremum;
mod integral;
mod root;
mod scan;

use super::body::{Body, Lanes};
use super::error::{Fault, FaultKind, Met, Place, Search};
use super::frame::Failure;
use super::limits;
use super::reduce::Sum;
use crate::program::Form;

/// What the bound variable runs over.
#[derive(Clone, Copy)]
pub(super) enum Over<'o> {
    /// From one bound to another; twice the same for a point.
    Interval(f64, f64),
    /// The elements of a series.
    Series(&'o [f64]),
}

/// Why a form has no value, in numbers alone.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Trouble {
    /// The body has no value at this point.
    Body(f64),
    /// The bound at this end (0 or 1) is infinite.
    InfiniteBound(usize),
    /// No two neighbouring points of unlike sign.
    NoSignChange {
        ends: [f64; 2],
        differences: [f64; 2],
        closest: Option<(f64, f64)>,
    },
    /// A sign change without a zero.
    Jump { at: f64, pole: bool },
    /// More than one root.
    ManyRoots(Vec<f64>),
    /// Zero over a whole stretch.
    Identity,
    /// No convergence: the best value and its error.
    NotSettled { value: f64, error: f64 },
    /// No limit near this point.
    Diverges(f64),
    /// No derivative.
    NoDerivative(&'static str),
    /// The value is beyond the largest number.
    Overflow,
}

/// The value of a form.
pub(super) fn evaluate(form: Form, body: &mut dyn Lanes, over: Over<'_>) -> Result<f64, Trouble> {
    let (from, to) = match over {
        Over::Series(series) => return sum(body, series),
        Over::Interval(from, to) => (from, to),
    };
    if form != Form::Integral {
        for (end, bound) in [from, to].into_iter().enumerate() {
            if bound.is_infinite() {
                return Err(Trouble::InfiniteBound(end));
            }
        }
    }
    if from.is_nan() || to.is_nan() {
        return Err(Trouble::Body(f64::NAN));
    }
    match form {
        Form::Integral => integral::integral(body, from, to),
        Form::Sum => sum(body, &[from]),
        Form::Root => root::root(body, from, to),
        Form::Maximum => extremum::maximum(body, from, to).map(|peak| peak.value),
        Form::MaximumAt => extremum::maximum(body, from, to).map(|peak| peak.at),
        Form::Minimum => extremum::minimum(body, from, to).map(|peak| peak.value),
        Form::MinimumAt => extremum::minimum(body, from, to).map(|peak| peak.at),
        Form::Derivative => derivative::derivative(body, from),
    }
}

/// The sum of the body over the elements of a series, in their order.
fn sum(body: &mut dyn Lanes, series: &[f64]) -> Result<f64, Trouble> {
    let mut sum = Sum::default();
    let mut terms = [0.0; limits::CHUNK_LANES];
    for points in series.chunks(limits::CHUNK_LANES) {
        let terms = &mut terms[..points.len()];
        body.lanes(points, terms);
        for (point, term) in points.iter().zip(terms.iter()) {
            if !term.is_finite() {
                return Err(Trouble::Body(*point));
            }
            sum.add(*term);
        }
    }
    let total = sum.total();
    if total.is_finite() {
        Ok(total)
    } else {
        Err(Trouble::Overflow)
    }
}

impl Trouble {
    /// The fault it is, for the form at `place` with its bounds at `ends`.
    pub fn fault(self, body: &Body<'_>, place: Place, ends: [Place; 2]) -> Failure {
        let kind = match self {
            Trouble::Body(point) => return body.fault_at(point),
            Trouble::InfiniteBound(end) => {
                let place = ends.get(end).copied().unwrap_or(place);
                return Box::new(Fault::new(FaultKind::InfiniteBound, place));
            }
            Trouble::NoSignChange {
                ends,
                differences,
                closest,
            } => FaultKind::NoSignChange(Box::new(Search {
                ends: ends.map(|end| body.variable(end)),
                differences: differences.map(|difference| difference.is_finite().then_some(difference)),
                body: body.place(),
                closest: closest.map(|(at, value)| (body.variable(at), value)),
            })),
            Trouble::Jump { at, pole } => FaultKind::Jump {
                at: body.variable(at),
                pole,
            },
            Trouble::ManyRoots(places) => FaultKind::ManyRoots {
                count: places.len(),
                places: places
                    .iter()
                    .take(limits::ROOTS_LISTED)
                    .map(|at| body.variable(*at))
                    .collect(),
            },
            Trouble::Identity => FaultKind::Identity,
            Trouble::NotSettled { value, error } => FaultKind::NotSettled {
                value: Met { place, value },
                error,
            },
            Trouble::Diverges(at) => FaultKind::Diverges(body.variable(at)),
            Trouble::NoDerivative(why) => FaultKind::NoDerivative(why),
            Trouble::Overflow => FaultKind::Overflow,
        };
        Box::new(Fault::new(kind, place))
    }
}
