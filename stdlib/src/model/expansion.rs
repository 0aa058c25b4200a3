//! The expansion rate: `E²(s)`, with `s = 1 + z`, as a sum over what fills
//! the universe.
//!
//! `E² = Ωr s⁴ + Σ Ων F(y/s) s⁴ + Ωcb s³ + Ωk s² + Ωde g(s)`
//!
//! with F of [`super::neutrino`] and `g = exp 3∫ (1 + w) d ln s`.

use super::neutrino;
use super::{DomainError, EquationOfState};
use crate::numerics::interpolate::{Cumulative, Failure, Fit};
use std::sync::OnceLock;

/// The range of `s` that a table of w(z) spans at most; beyond it w is held.
const W_RANGE: (f64, f64) = (1.0 / 16_777_216.0, 17_179_869_184.0);

/// `⟨p c⟩/(k T_ν) = 7π⁴/(180 ζ(3))` of a relativistic Fermi–Dirac gas.
const MEAN_MOMENTUM: f64 = 3.151_374_371;

/// Neutrino species of one mass.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Species {
    /// Density today in units of the critical one if they were massless.
    pub massless_density: f64,
    /// `m c²/(k T_ν)` today.
    pub mass_over_temperature: f64,
}

/// Dark energy.
pub struct Dark {
    /// Density today in units of the critical one.
    pub density: f64,
    /// Its equation of state.
    pub state: State,
}

/// An equation of state `w = p/ρ`.
pub enum State {
    /// w = −1.
    Lambda,
    /// Constant w.
    Constant(f64),
    /// `w0 + wa (1 − a)`: Chevallier & Polarski 2001, IJMPD 10, 213; Linder
    /// 2003, PRL 90, 091301.
    Linear(f64, f64),
    /// A function of z given by the user.
    Given(Box<Given>),
}

/// A function w(z) with what is tabulated of it on first use.
pub struct Given {
    function: EquationOfState,
    tables: OnceLock<Result<Tables, DomainError>>,
}

struct Tables {
    /// `∫ (1 + w)/s ds` from today.
    exponent: Cumulative,
    /// w as a function of s, for its slope.
    w: Fit,
}

/// `E²` and its derivatives.
pub struct Expansion {
    /// Photons.
    pub photons: f64,
    /// Neutrinos without mass.
    pub massless: f64,
    /// Baryons and cold dark matter.
    pub cold: f64,
    /// Curvature.
    pub curvature: f64,
    /// Neutrinos with mass.
    pub massive: Vec<Species>,
    /// Dark energy.
    pub dark: Dark,
}

impl Given {
    /// Wraps a function of z.
    pub fn new(function: EquationOfState) -> Given {
        Given {
            function,
            tables: OnceLock::new(),
        }
    }

    fn w(&self, s: f64) -> f64 {
        (self.function)(s - 1.0).unwrap_or(f64::NAN)
    }

    fn tables(&self) -> &Result<Tables, DomainError> {
        self.tables.get_or_init(|| self.tabulate())
    }

    fn tabulate(&self) -> Result<Tables, DomainError> {
        if !self.w(1.0).is_finite() {
            return Err(DomainError("w(z) has no value today, at z = 0".into()));
        }
        let lower = self.last_defined(W_RANGE.0);
        let upper = self.last_defined(W_RANGE.1);
        let exponent = Cumulative::sparse(lower, upper, |s| (1.0 + self.w(s)) / s).map_err(refusal)?;
        let w = Fit::new(lower, upper, |s| self.w(s)).map_err(refusal)?;
        Ok(Tables { exponent, w })
    }

    /// How far towards `end` the function has values, looking at eight points
    /// per octave, then halving.
    fn last_defined(&self, end: f64) -> f64 {
        let ratio = if end > 1.0 {
            1.090_507_732_665_257_7
        } else {
            0.917_004_043_204_671_2
        };
        let beyond = |s: f64| if end > 1.0 { s > end } else { s < end };
        let mut good = 1.0;
        loop {
            let next = good * ratio;
            if beyond(next) {
                return if self.w(end).is_finite() {
                    end
                } else {
                    self.edge(good, end)
                };
            }
            if !self.w(next).is_finite() {
                return self.edge(good, next);
            }
            good = next;
        }
    }

    fn edge(&self, mut good: f64, mut bad: f64) -> f64 {
        for _ in 0..60 {
            let middle = 0.5 * (good + bad);
            if self.w(middle).is_finite() {
                good = middle;
            } else {
                bad = middle;
            }
        }
        good
    }

    /// `exp 3∫ (1 + w) d ln s`; not a number where w(z) has no value.
    fn growth(&self, s: f64) -> f64 {
        let Ok(tables) = self.tables() else {
            return f64::NAN;
        };
        if let Some(integral) = tables.exponent.from_one(s - 1.0) {
            return libm::exp(3.0 * integral);
        }
        let (lower, upper) = tables.exponent.ends();
        let end = if s < lower { lower } else { upper };
        if end != W_RANGE.0 && end != W_RANGE.1 {
            return f64::NAN;
        }
        let integral = tables.exponent.from_one(end - 1.0).unwrap_or(f64::NAN);
        libm::exp(3.0 * (integral + (1.0 + self.w(end)) * libm::log(s / end)))
    }
}

fn refusal(failure: Failure) -> DomainError {
    match failure {
        Failure::NotFinite(s) => DomainError(format!("w(z) has no value at z = {}", s - 1.0).into()),
        Failure::TooRough(s) => DomainError(format!("w(z) varies too fast near z = {}", s - 1.0).into()),
    }
}

impl Dark {
    /// Density at `s` in units of the critical one today.
    pub fn at(&self, s: f64) -> f64 {
        match &self.state {
            _ if self.density == 0.0 => 0.0,
            State::Lambda => self.density,
            State::Constant(w) => self.density * libm::pow(s, 3.0 * (1.0 + w)),
            State::Linear(w0, wa) => {
                let power = 3.0 * (1.0 + w0 + wa) * libm::log(s) - 3.0 * wa * (1.0 - 1.0 / s);
                self.density * libm::exp(power)
            }
            State::Given(given) => self.density * given.growth(s),
        }
    }

    /// w at `s`.
    pub fn w(&self, s: f64) -> f64 {
        match &self.state {
            State::Lambda => -1.0,
            State::Constant(w) => *w,
            State::Linear(w0, wa) => w0 + wa * (1.0 - 1.0 / s),
            State::Given(given) => given.w(s),
        }
    }

    /// `dw/ds` at `s`.
    fn w_slope(&self, s: f64) -> f64 {
        match &self.state {
            State::Lambda | State::Constant(_) => 0.0,
            State::Linear(_, wa) => wa / (s * s),
            State::Given(given) => match given.tables() {
                Ok(tables) => tables.w.slope(s).unwrap_or(f64::NAN),
                Err(_) => f64::NAN,
            },
        }
    }

    /// The power of s it follows for s → ∞ (`early`) or s → 0.
    fn power(&self, early: bool) -> f64 {
        match &self.state {
            State::Lambda => 0.0,
            State::Constant(w) => 3.0 * (1.0 + w),
            State::Linear(w0, wa) if early => 3.0 * (1.0 + w0 + wa),
            State::Linear(_, wa) if *wa > 0.0 => f64::NEG_INFINITY,
            State::Linear(w0, wa) if *wa == 0.0 => 3.0 * (1.0 + w0),
            State::Linear(..) => f64::INFINITY,
            State::Given(given) => 3.0 * (1.0 + given.w(if early { W_RANGE.1 } else { W_RANGE.0 })),
        }
    }

    /// The range of s in which it is defined, open ends as 0 and ∞.
    pub fn range(&self) -> Result<(f64, f64), DomainError> {
        let State::Given(given) = &self.state else {
            return Ok((0.0, f64::INFINITY));
        };
        let (lower, upper) = given.tables().as_ref().map_err(Clone::clone)?.exponent.ends();
        let open_lower = if lower == W_RANGE.0 { 0.0 } else { lower };
        let open_upper = if upper == W_RANGE.1 { f64::INFINITY } else { upper };
        Ok((open_lower, open_upper))
    }
}

impl Species {
    /// Whether it is matter today: its rest energy exceeds the mean momentum
    /// of the distribution, 3.15 k T_ν.
    #[must_use]
    pub fn is_matter(&self) -> bool {
        self.mass_over_temperature > MEAN_MOMENTUM
    }

    /// Energy density at `s` in units of the critical one today.
    pub fn at(&self, s: f64) -> f64 {
        let fourth = s * s * (s * s);
        self.massless_density * fourth * neutrino::energy(self.mass_over_temperature / s)
    }

    /// Pressure at `s` in the same units.
    pub fn pressure(&self, s: f64) -> f64 {
        self.massless_density * (s * s) * (s * s) * neutrino::pressure(self.mass_over_temperature / s)
    }

    /// `d p/d ln s` in the same units.
    fn pressure_slope(&self, s: f64) -> f64 {
        let y = self.mass_over_temperature / s;
        let slope = 4.0 * neutrino::pressure(y) + neutrino::pressure_fall(y);
        self.massless_density * (s * s) * (s * s) * slope
    }
}

impl Expansion {
    /// `E²` at `s = 1 + z`; not a number where w(z) has no value.
    #[inline]
    pub fn square(&self, s: f64) -> f64 {
        let base = s * s * (self.curvature + s * (self.cold + s * (self.photons + self.massless)));
        base + self.dark.at(s) + self.massive(s)
    }

    /// `E` at `s`.
    #[inline]
    pub fn rate(&self, s: f64) -> f64 {
        libm::sqrt(self.square(s))
    }

    /// Energy density of the massive neutrinos.
    #[inline]
    pub fn massive(&self, s: f64) -> f64 {
        self.massive.iter().map(|species| species.at(s)).sum()
    }

    /// `E²` relative to the sum of the sizes of its terms: how nearly they
    /// cancel.
    pub fn balance(&self, s: f64) -> f64 {
        let cold = s * s * s * (self.cold + s * (self.photons + self.massless)) + self.massive(s);
        let (curvature, dark) = (self.curvature * s * s, self.dark.at(s));
        (cold + curvature + dark) / (cold.abs() + curvature.abs() + dark.abs())
    }

    /// Whether some term is negative, so that E² may vanish.
    pub fn may_vanish(&self) -> bool {
        self.curvature < 0.0 || self.dark.density < 0.0
    }

    /// `q = −ä a/ȧ²`: half the sum of `ρ + 3p`.
    pub fn deceleration(&self, s: f64) -> f64 {
        let fourth = s * s * (s * s);
        let radiation = 2.0 * (self.photons + self.massless) * fourth;
        let massive: f64 = self
            .massive
            .iter()
            .map(|one| one.at(s) + 3.0 * one.pressure(s))
            .sum();
        let dark = self.dark.at(s);
        let dark = if dark == 0.0 {
            0.0
        } else {
            dark * (1.0 + 3.0 * self.dark.w(s))
        };
        0.5 * (radiation + self.cold * s * s * s + massive + dark) / self.square(s)
    }

    /// `j = a⃛ a²/ȧ³ = 1 − s (E²)′/E² + s² (E²)″/(2E²)`, term by term.
    pub fn jerk(&self, s: f64) -> f64 {
        let fourth = s * s * (s * s);
        let radiation = 3.0 * (self.photons + self.massless) * fourth;
        let massive = self
            .massive
            .iter()
            .map(|one| one.at(s) + 1.5 * one.pressure_slope(s));
        let dark = self.dark.at(s);
        let dark = if dark == 0.0 {
            0.0
        } else {
            let power = 3.0 * (1.0 + self.dark.w(s));
            dark * (1.0 - power + 0.5 * power * (power - 1.0) + 1.5 * s * self.dark.w_slope(s))
        };
        (radiation + self.cold * s * s * s + massive.sum::<f64>() + dark) / self.square(s)
    }

    /// The power of s that E² follows for s → ∞.
    pub fn early_power(&self) -> f64 {
        self.powers(true).fold(f64::NEG_INFINITY, f64::max)
    }

    /// The power of s that E² follows for s → 0.
    pub fn late_power(&self) -> f64 {
        self.powers(false).fold(f64::INFINITY, f64::min)
    }

    fn powers(&self, early: bool) -> impl Iterator<Item = f64> + '_ {
        let radiation = self.photons + self.massless;
        let massive: f64 = self.massive.iter().map(|one| one.massless_density).sum();
        let terms = [
            (radiation, 4.0),
            (massive, if early { 4.0 } else { 3.0 }),
            (self.cold, 3.0),
            (self.curvature, 2.0),
            (self.dark.density, self.dark.power(early)),
        ];
        terms
            .into_iter()
            .filter(|(density, _)| *density != 0.0)
            .map(|(_, power)| power)
    }
}
