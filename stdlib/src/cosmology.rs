//! Distances, times and horizons of a model.
//!
//! The functions are methods of [`Model`], in SI quantities typed by `uom`;
//! beside each chapter stand its catalogue entries. Inside, lengths are in
//! units of c/H0 and times in units of 1/H0.
//!
//! `a = 1` today and `s = 1 + z = 1/a` throughout.

pub mod background;
pub mod distance;
pub mod early;
pub mod future;
mod geometry;
pub mod growth;
pub mod halo;
pub mod horizon;
pub mod inverse;
pub mod power;
pub(crate) mod template;
pub mod values;

use crate::catalogue::Entry;
use crate::constants::values::{GIGAYEAR, MEGAPARSEC, SPEED_OF_LIGHT};
use crate::model::history::{Edge, Kind};
use crate::model::{DomainError, Model};
use std::fmt::Display;

pub use uom::si::f64::{
    Acceleration, Frequency, Length, MassDensity, ThermodynamicTemperature, Time, Velocity, Volume,
    VolumeRate,
};
use uom::si::{length::meter, time::second};

/// The entries of these chapters, in the order of the handbook.
pub static ENTRIES: [&[Entry]; 9] = [
    values::ENTRIES,
    background::ENTRIES,
    future::ENTRIES,
    distance::ENTRIES,
    horizon::ENTRIES,
    early::ENTRIES,
    growth::ENTRIES,
    power::ENTRIES,
    halo::ENTRIES,
];

/// What a function of this library returns.
pub type Found<T> = Result<T, DomainError>;

/// A redshift: greater than −1 and finite; negative in the future.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct Redshift(f64);

impl Redshift {
    /// Today.
    pub const TODAY: Redshift = Redshift(0.0);

    /// Checks a number.
    ///
    /// # Errors
    /// [`DomainError`] unless `z > -1` and finite.
    #[inline]
    pub fn new(z: f64) -> Found<Redshift> {
        if z > -1.0 && z < f64::INFINITY {
            Ok(Redshift(z))
        } else {
            Err(no_redshift(z))
        }
    }

    /// The number.
    #[inline]
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }

    /// `1 + z`.
    #[inline]
    #[must_use]
    pub fn stretch(self) -> f64 {
        1.0 + self.0
    }
}

#[cold]
fn no_redshift(z: f64) -> DomainError {
    if z == f64::INFINITY {
        return undefined("an infinite redshift is no epoch");
    }
    undefined(format!("a redshift is greater than -1, and this is {z}"))
}

/// A [`DomainError`] with this sentence.
#[cold]
pub(crate) fn undefined(message: impl Display) -> DomainError {
    DomainError(message.to_string().into())
}

/// A number that must be finite: too large values end as errors, not as ∞.
#[inline]
pub(crate) fn finite(value: f64) -> Found<f64> {
    if value.is_finite() {
        Ok(value)
    } else {
        Err(undefined("the result is too large for a number"))
    }
}

pub(crate) fn in_gyr(seconds: f64) -> String {
    format!("{:.5} Gyr", seconds / GIGAYEAR)
}

pub(crate) fn in_mpc(metres: f64) -> String {
    format!("{:.6} Mpc", metres / MEGAPARSEC)
}

#[inline]
pub(crate) fn length(metres: f64) -> Length {
    Length::new::<meter>(metres)
}

#[inline]
pub(crate) fn time(seconds: f64) -> Time {
    Time::new::<second>(seconds)
}

/// What the chapters share, in units of c/H0 and 1/H0.
impl Model {
    /// 1/H0 in seconds.
    #[inline]
    pub(crate) fn hubble_time_s(&self) -> f64 {
        1.0 / self.budget().h0_per_s
    }

    /// c/H0 in metres.
    #[inline]
    pub(crate) fn hubble_length_m(&self) -> f64 {
        SPEED_OF_LIGHT / self.budget().h0_per_s
    }

    /// Comoving distance to z, negative in the future.
    #[inline]
    pub(crate) fn light(&self, z: Redshift) -> Found<f64> {
        self.before_today(Kind::Light, z)
    }

    /// An integral from today to z.
    #[inline]
    pub(crate) fn before_today(&self, kind: Kind, z: Redshift) -> Found<f64> {
        let history = self.history()?;
        history.admit(z.stretch())?;
        let track = history.track(self.expansion(), kind)?;
        finite(track.before_today(self.expansion(), z.get()))
    }

    /// An integral from the big bang to z.
    pub(crate) fn since_beginning(&self, kind: Kind, z: Redshift) -> Found<f64> {
        let history = self.history()?;
        match history.past {
            Edge::Turn(s) => {
                return Err(undefined(format_args!(
                    "this model had no big bang: it bounced at z = {:.6}",
                    s - 1.0
                )));
            }
            Edge::Undefined(s) => {
                return Err(undefined(format_args!(
                    "w(z) has no value beyond z = {:.6}, so the beginning is unknown",
                    s - 1.0
                )));
            }
            Edge::Open => {}
        }
        history.admit(z.stretch())?;
        let track = history.track(self.expansion(), kind)?;
        track.since_beginning(self.expansion(), z.get()).ok_or_else(|| {
            undefined(match kind {
                Kind::Light => {
                    "this model has no particle horizon: light has crossed any distance since its beginning"
                }
                Kind::Time => "this model had no beginning: its age is infinite",
            })
        })
    }

    /// An integral from z to the end of time, through the turnaround and the
    /// collapse if there is one. `None` where it is infinite.
    pub(crate) fn to_end(&self, kind: Kind, z: Redshift) -> Found<Option<f64>> {
        let history = self.history()?;
        history.admit(z.stretch())?;
        let track = history.track(self.expansion(), kind)?;
        let rest = track.to_end(self.expansion(), z.get());
        match history.future {
            Edge::Open => Ok(rest),
            Edge::Turn(_) => {
                // What follows the turnaround mirrors what came before it.
                let back = track.to_end(self.expansion(), 0.0);
                let collapse = match history.past {
                    Edge::Open => track.since_beginning(self.expansion(), 0.0),
                    Edge::Turn(_) | Edge::Undefined(_) => None,
                };
                Ok(rest
                    .zip(back)
                    .zip(collapse)
                    .map(|((rest, back), collapse)| rest + back + collapse))
            }
            Edge::Undefined(s) => Err(undefined(format_args!(
                "w(z) has no value below z = {:.6}, so the far future is unknown",
                s - 1.0
            ))),
        }
    }
}
