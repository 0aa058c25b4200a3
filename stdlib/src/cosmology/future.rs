//! The future: how large the universe will be, and how it ends.

mod entries;

pub use entries::ENTRIES;

use super::{Found, Frequency, Length, Redshift, Time, in_gyr, length, time, undefined};
use crate::model::Model;
use crate::model::expansion::State;
use crate::model::history::{Edge, Kind};
use uom::si::frequency::hertz;

impl Model {
    /// Scale factor at a cosmic time since the big bang, through turnaround
    /// and collapse.
    ///
    /// # Errors
    /// For times before the big bang or after the end.
    pub fn scale_factor_at(&self, cosmic_time: Time) -> Found<f64> {
        if let Edge::Turn(_) = self.history()?.future {
            let turn = self.turnaround_time()?;
            if cosmic_time > turn {
                let mirrored = turn + turn - cosmic_time;
                if mirrored.value <= 0.0 {
                    return Err(undefined(format_args!(
                        "this model ends {} after its big bang",
                        in_gyr(2.0 * turn.value)
                    )));
                }
                return Ok(self.scale_factor(self.redshift_of_age(mirrored)?));
            }
        }
        if let Some(end) = self.rip()? {
            let now = self.since_beginning(Kind::Time, Redshift::TODAY)? * self.hubble_time_s();
            if cosmic_time.value >= now + end {
                return Err(undefined(format_args!(
                    "this model is torn apart {} after its big bang",
                    in_gyr(now + end)
                )));
            }
        }
        Ok(self.scale_factor(self.redshift_of_age(cosmic_time)?))
    }

    /// Redshift, negative, at which the expansion turns into collapse.
    ///
    /// # Errors
    /// Where it never does.
    pub fn turnaround(&self) -> Found<Redshift> {
        match self.history()?.future {
            Edge::Turn(s) => Redshift::new(s - 1.0),
            Edge::Open => Err(undefined("this model expands for ever")),
            Edge::Undefined(s) => Err(undefined(format_args!(
                "w(z) has no value below z = {:.6}, so the far future is unknown",
                s - 1.0
            ))),
        }
    }

    /// Cosmic time since the big bang at which the expansion turns round.
    ///
    /// # Errors
    /// Where it never does, or there was no big bang.
    pub fn turnaround_time(&self) -> Found<Time> {
        self.turnaround()?;
        let before = self.since_beginning(Kind::Time, Redshift::TODAY)?;
        let track = self.track(Kind::Time)?;
        let after = track.to_end(self.expansion(), 0.0);
        let after = after.ok_or_else(|| undefined("this model takes for ever to turn round"))?;
        Ok(time((before + after) * self.hubble_time_s()))
    }

    /// Cosmic time since the big bang of the final collapse.
    ///
    /// # Errors
    /// Where there is none, or there was no big bang.
    pub fn big_crunch_time(&self) -> Found<Time> {
        Ok(self.turnaround_time()? * 2.0)
    }

    /// Time from today until phantom dark energy makes the scale factor
    /// infinite.
    ///
    /// # Errors
    /// Where that never happens.
    ///
    /// # Source
    /// Caldwell, Kamionkowski & Weinberg 2003, PRL 91, 071301.
    pub fn big_rip_time(&self) -> Found<Time> {
        self.rip()?.map(time).ok_or_else(|| {
            undefined("this model is never torn apart: that takes dark energy with w below -1 for ever")
        })
    }

    /// Seconds from today until the scale factor is infinite.
    fn rip(&self) -> Found<Option<f64>> {
        match self.history()?.future {
            Edge::Open => Ok(self
                .to_end(Kind::Time, Redshift::TODAY)?
                .map(|rest| rest * self.hubble_time_s())),
            Edge::Turn(_) | Edge::Undefined(_) => Ok(None),
        }
    }

    /// The constant expansion rate `H0 √ΩΛ` approached when nothing but a
    /// cosmological constant is left.
    ///
    /// # Errors
    /// Where the dark energy is not a cosmological constant above zero, or
    /// the model recollapses.
    pub fn hubble_rate_limit(&self) -> Found<Frequency> {
        let dark = &self.expansion().dark;
        let constant = matches!(dark.state, State::Lambda) && dark.density > 0.0;
        match self.history()?.future {
            Edge::Open if constant => Ok(Frequency::new::<hertz>(
                self.budget().h0_per_s * libm::sqrt(dark.density),
            )),
            Edge::Open => Err(undefined(
                "this model approaches no constant expansion rate: that takes a cosmological constant",
            )),
            Edge::Turn(_) | Edge::Undefined(_) => Err(undefined("this model does not expand for ever")),
        }
    }

    /// Proper radius of the event horizon that the model approaches, `c` over
    /// [`Model::hubble_rate_limit`].
    ///
    /// # Errors
    /// As there.
    pub fn event_horizon_limit(&self) -> Found<Length> {
        self.hubble_rate_limit()?;
        Ok(length(
            self.hubble_length_m() / libm::sqrt(self.expansion().dark.density),
        ))
    }
}
