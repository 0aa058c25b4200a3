//! Why a value does not exist: facts first, then a diagnostic made of them.
//!
//! The program knows no units, so a fault keeps its numbers in SI with the
//! node they belong to, and whoever turns it into a [`Diagnostic`] lends its
//! [`Words`] for them.

use crate::diagnostic::Diagnostic;
use crate::program::{BlockId, NodeId, Reduction};
use crate::source::Span;

/// A value that could not be computed.
#[derive(Clone, Debug, PartialEq)]
pub struct Fault {
    /// What happened.
    pub kind: FaultKind,
    /// The expression it happened in.
    pub place: Place,
    /// The values that met it.
    pub met: Vec<Met>,
    /// Values of bound variables at the time, innermost first.
    pub bound: Vec<Met>,
    /// Which element of a series it was, from 0, and how many there are.
    pub element: Option<(usize, usize)>,
    /// In how many elements the same value could not be computed.
    pub failed: usize,
}

/// A node and the expression it comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Place {
    /// Which source the span is in.
    pub source: u16,
    /// The expression.
    pub span: Span,
    /// The body the node is in; the main block if none.
    pub block: Option<BlockId>,
    /// The node.
    pub node: NodeId,
}

/// The value, in SI, that an expression had.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Met {
    /// The expression.
    pub place: Place,
    /// Its value.
    pub value: f64,
}

/// What can happen.
#[derive(Clone, Debug, PartialEq)]
pub enum FaultKind {
    /// `x / 0`
    DivisionByZero,
    /// A result beyond the largest number.
    Overflow,
    /// `0 ^ -1`
    ZeroToNegativePower,
    /// `(-1) ^ 0.5`, with the exponent.
    NegativeToPower(f64),
    /// The library says why.
    Domain(Box<str>),
    /// The model cannot be built; the library says why.
    Model(Box<str>),
    /// Arithmetic with a time that never comes.
    Never,
    /// `root`: the two sides never meet.
    NoSignChange(Box<Search>),
    /// `root`: the difference jumps over zero, or runs through infinity.
    Jump {
        /// The bound variable and where it jumps.
        at: Met,
        /// It runs through infinity.
        pole: bool,
    },
    /// `root`: more than one answer.
    ManyRoots {
        /// The first of them.
        places: Vec<Met>,
        /// How many there are in all.
        count: usize,
    },
    /// `root`: the two sides are equal over a whole stretch.
    Identity,
    /// `integral`: no convergence.
    NotSettled {
        /// The best value.
        value: Met,
        /// How far off it may be.
        error: f64,
    },
    /// `integral`: what is left near an end does not shrink.
    Diverges(Met),
    /// `derivative`: no limit.
    NoDerivative(&'static str),
    /// A bound that must be finite is not.
    InfiniteBound,
    /// Series of unlike length met in one operation.
    Lengths(usize, usize),
    /// A reduction of nothing, or of too little.
    TooFew(Reduction, usize),
    /// `quantile(x, p)` with p outside 0 to 1.
    NotAFraction(f64),
    /// A range that cannot be divided so.
    Range(&'static str),
    /// A range of too many points, and how many would be allowed.
    TooManyPoints(f64, usize),
    /// Too many numbers in memory at once.
    TooMuchMemory(usize),
    /// Too many evaluations of bodies.
    TooMuchWork,
    /// Binding forms nested too deeply.
    TooDeep(usize),
    /// What this form cannot do yet.
    Unsupported(&'static str),
}

/// What a search for a root saw.
#[derive(Clone, Debug, PartialEq)]
pub struct Search {
    /// The bound variable at the lower and upper end.
    pub ends: [Met; 2],
    /// Left side minus right side there; none where it has no value.
    pub differences: [Option<f64>; 2],
    /// The body, to say its values in words.
    pub body: Place,
    /// Where the difference came closest to zero, and its value there.
    pub closest: Option<(Met, f64)>,
}

/// How values and expressions are put in words.
pub trait Words {
    /// The value, in SI, of the node at `place`.
    fn value(&self, place: Place, value: f64) -> String;
    /// The text of the expression at `place`, or `""`.
    fn text(&self, place: Place) -> String;
}

/// Plain SI numbers.
pub struct PlainWords;

impl Words for PlainWords {
    fn value(&self, _: Place, value: f64) -> String {
        plain_number(value)
    }

    fn text(&self, _: Place) -> String {
        String::new()
    }
}

/// A number in seven digits at most.
#[must_use]
pub fn plain_number(value: f64) -> String {
    let rounded: f64 = format!("{value:.6e}").parse().unwrap_or(value);
    let size = rounded.abs();
    if size == 0.0 || (1e-4..1e7).contains(&size) {
        format!("{rounded}")
    } else {
        format!("{rounded:e}")
    }
}

impl Fault {
    /// A fault at a place, with nothing else known.
    #[must_use]
    pub fn new(kind: FaultKind, place: Place) -> Fault {
        Fault {
            kind,
            place,
            met: Vec::new(),
            bound: Vec::new(),
            element: None,
            failed: 0,
        }
    }

    /// With the values that met it.
    #[must_use]
    pub fn with(mut self, met: impl IntoIterator<Item = Met>) -> Fault {
        self.met.extend(met);
        self
    }

    /// Stable key of the diagnostic.
    #[must_use]
    pub fn code(&self) -> &'static str {
        match self.kind {
            FaultKind::DivisionByZero | FaultKind::ZeroToNegativePower => "division-by-zero",
            FaultKind::Overflow => "overflow",
            FaultKind::NegativeToPower(_) | FaultKind::Domain(_) => "domain-fault",
            FaultKind::Model(_) => "model-fault",
            FaultKind::Never => "never",
            FaultKind::NoSignChange(_) | FaultKind::Jump { .. } => "no-root",
            FaultKind::ManyRoots { .. } | FaultKind::Identity => "many-roots",
            FaultKind::NotSettled { .. } | FaultKind::Diverges(_) | FaultKind::NoDerivative(_) => "no-limit",
            FaultKind::InfiniteBound => "infinite-bound",
            FaultKind::Lengths(..) => "unlike-lengths",
            FaultKind::TooFew(..) => "too-few",
            FaultKind::NotAFraction(_) => "domain-fault",
            FaultKind::Range(_) => "bad-range",
            FaultKind::TooManyPoints(..)
            | FaultKind::TooMuchMemory(_)
            | FaultKind::TooMuchWork
            | FaultKind::TooDeep(_) => "too-much",
            FaultKind::Unsupported(_) => "not-yet",
        }
    }

    /// The diagnostic, and the source it points into.
    #[must_use]
    pub fn diagnostic(&self, words: &dyn Words) -> (usize, Diagnostic) {
        let message = self.kind.message(words);
        let mut diagnostic = Diagnostic::error(self.code(), message, self.place.span, self.kind.label());
        for met in self.met.iter().filter(|met| !self.is_inside(met)) {
            diagnostic = self.label(diagnostic, *met, words);
        }
        for note in self.kind.notes(words) {
            diagnostic = diagnostic.note(note);
        }
        for bound in &self.bound {
            diagnostic = diagnostic.note(format!("with {}", equation(*bound, words)));
        }
        if let Some((index, count)) = self.element {
            diagnostic = diagnostic.note(self.which_element(index, count));
        }
        (usize::from(self.place.source), diagnostic)
    }

    /// Whether this is a value in the midst of a function of the library, for
    /// which the sheet has no text but the call itself.
    fn is_inside(&self, met: &Met) -> bool {
        met.place.source == self.place.source && met.place.span == self.place.span
    }

    fn label(&self, diagnostic: Diagnostic, met: Met, words: &dyn Words) -> Diagnostic {
        let value = words.value(met.place, met.value);
        if met.place.source == self.place.source && met.place.span != self.place.span {
            diagnostic.and(met.place.span, format!("this is {value}"))
        } else {
            diagnostic.note(equation(met, words))
        }
    }

    fn which_element(&self, index: usize, count: usize) -> String {
        let place = format!("in element {} of {count}", index + 1);
        if self.failed > 1 {
            format!("{place}; {} elements have no value", self.failed)
        } else {
            place
        }
    }
}

/// `x = 3`, or the value alone where the text is not known.
fn equation(met: Met, words: &dyn Words) -> String {
    let value = words.value(met.place, met.value);
    let text = words.text(met.place);
    if text.is_empty() {
        format!("a value of {value}")
    } else {
        format!("{text} = {value}")
    }
}

impl FaultKind {
    fn message(&self, words: &dyn Words) -> String {
        let say = |met: &Met| words.value(met.place, met.value);
        match self {
            FaultKind::DivisionByZero => "division by zero".into(),
            FaultKind::Overflow => "the result is too large for a number".into(),
            FaultKind::ZeroToNegativePower => "zero to a negative power".into(),
            FaultKind::NegativeToPower(power) => {
                format!("a negative number to the power {}", plain_number(*power))
            }
            FaultKind::Domain(reason) | FaultKind::Model(reason) => reason.to_string(),
            FaultKind::Never => "this never comes, so there is nothing to calculate with".into(),
            FaultKind::NoSignChange(search) => no_sign_change(search, words),
            FaultKind::Jump { at, pole: true } => {
                format!("the two sides never meet: near {} they part to infinity", say(at))
            }
            FaultKind::Jump { at, pole: false } => {
                format!(
                    "the two sides never meet: at {} one jumps over the other",
                    say(at)
                )
            }
            FaultKind::ManyRoots { places, count } => many_roots(places, *count, words),
            FaultKind::Identity => "the two sides are equal over a whole stretch of the range".into(),
            FaultKind::NotSettled { value, error } => format!(
                "the integral did not settle: {} is good to {} only",
                say(value),
                words.value(value.place, *error)
            ),
            FaultKind::Diverges(at) => format!("the integral grows without bound near {}", say(at)),
            FaultKind::NoDerivative(why) => format!("there is no derivative here: {why}"),
            FaultKind::InfiniteBound => "this bound must be finite".into(),
            FaultKind::Lengths(left, right) => {
                format!("series of unlike length: {left} and {right} elements")
            }
            FaultKind::TooFew(reduction, count) => too_few(*reduction, *count),
            FaultKind::NotAFraction(p) => {
                format!(
                    "a quantile is asked for at a fraction from 0 to 1, not {}",
                    plain_number(*p)
                )
            }
            FaultKind::Range(why) => (*why).into(),
            FaultKind::TooManyPoints(count, limit) => {
                format!("a range of {} points; {limit} are allowed", plain_number(*count))
            }
            FaultKind::TooMuchMemory(limit) => {
                format!("the series of this sheet take more than {limit} numbers")
            }
            FaultKind::TooMuchWork => "the binding forms of this sheet take too long".into(),
            FaultKind::TooDeep(limit) => {
                format!("more than {limit} binding forms within one another")
            }
            FaultKind::Unsupported(what) => format!("{what} cannot be computed yet"),
        }
    }

    fn label(&self) -> &'static str {
        match self {
            FaultKind::DivisionByZero => "divides by zero",
            FaultKind::Overflow => "too large",
            FaultKind::ZeroToNegativePower | FaultKind::NegativeToPower(_) => "has no value",
            FaultKind::Domain(_) | FaultKind::NotAFraction(_) => "outside its range",
            FaultKind::Model(_) => "no such model",
            FaultKind::Never => "never",
            FaultKind::NoSignChange(_) | FaultKind::Jump { .. } => "no root",
            FaultKind::ManyRoots { .. } | FaultKind::Identity => "more than one root",
            FaultKind::NotSettled { .. } => "did not settle",
            FaultKind::Diverges(_) => "diverges",
            FaultKind::NoDerivative(_) => "no derivative",
            FaultKind::InfiniteBound => "not finite",
            FaultKind::Lengths(..) => "unlike lengths",
            FaultKind::TooFew(..) => "too few elements",
            FaultKind::Range(_) => "this range",
            FaultKind::TooManyPoints(..) => "too many points",
            FaultKind::TooMuchMemory(_) | FaultKind::TooMuchWork => "too much",
            FaultKind::TooDeep(_) => "too deep",
            FaultKind::Unsupported(_) => "not yet",
        }
    }

    fn notes(&self, words: &dyn Words) -> Vec<String> {
        match self {
            FaultKind::NoSignChange(search) => (search.closest.iter())
                .map(|(at, value)| {
                    let value = words.value(search.body, *value);
                    format!(
                        "they come closest, {value} apart, at {}",
                        words.value(at.place, at.value)
                    )
                })
                .collect(),
            FaultKind::ManyRoots { .. } => vec!["narrow the range to the one you mean".into()],
            FaultKind::Lengths(..) => vec!["element goes with element, so the lengths must agree".into()],
            FaultKind::DivisionByZero
            | FaultKind::Overflow
            | FaultKind::ZeroToNegativePower
            | FaultKind::NegativeToPower(_)
            | FaultKind::Domain(_)
            | FaultKind::Model(_)
            | FaultKind::Never
            | FaultKind::Jump { .. }
            | FaultKind::Identity
            | FaultKind::NotSettled { .. }
            | FaultKind::Diverges(_)
            | FaultKind::NoDerivative(_)
            | FaultKind::InfiniteBound
            | FaultKind::TooFew(..)
            | FaultKind::NotAFraction(_)
            | FaultKind::Range(_)
            | FaultKind::TooManyPoints(..)
            | FaultKind::TooMuchMemory(_)
            | FaultKind::TooMuchWork
            | FaultKind::TooDeep(_)
            | FaultKind::Unsupported(_) => Vec::new(),
        }
    }
}

fn no_sign_change(search: &Search, words: &dyn Words) -> String {
    let [from, to] = search.ends.map(|end| words.value(end.place, end.value));
    let [low, high] = search.differences.map(|difference| match difference {
        Some(difference) => words.value(search.body, difference),
        None => "no value".into(),
    });
    format!(
        "the two sides never meet between {from} and {to}: left less right runs from {low} to {high} there"
    )
}

fn many_roots(places: &[Met], count: usize, words: &dyn Words) -> String {
    let listed: Vec<String> = places
        .iter()
        .map(|met| words.value(met.place, met.value))
        .collect();
    let more = if count > places.len() { ", …" } else { "" };
    format!("the two sides meet {count} times: at {}{more}", listed.join(", "))
}

fn too_few(reduction: Reduction, count: usize) -> String {
    let name = match reduction {
        Reduction::Sum => "sum",
        Reduction::Mean => "mean",
        Reduction::Median => "median",
        Reduction::Std => "standard deviation",
        Reduction::Count | Reduction::CountTrue => "count",
        Reduction::Min => "minimum",
        Reduction::Max => "maximum",
        Reduction::Quantile => "quantile",
    };
    if count == 0 {
        format!("an empty series has no {name}")
    } else {
        format!("a series of one element has no {name}")
    }
}
