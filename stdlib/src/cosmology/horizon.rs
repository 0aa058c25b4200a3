//! Horizons and light cones (Rindler 1956, MNRAS 116, 662; Davis &
//! Lineweaver 2004, PASA 21, 97).

mod entries;

pub use entries::ENTRIES;

use super::geometry::{area_radius, total_volume, volume};
use super::inverse::excess;
use super::{
    Found, Length, Redshift, Time, Velocity, Volume, VolumeRate, finite, in_gyr, length, time, undefined,
};
use crate::constants::values::SPEED_OF_LIGHT;
use crate::model::Model;
use crate::model::history::{Edge, Kind};
use std::f64::consts::PI;
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;

impl Model {
    /// Proper radius at z of the particle horizon: of what light since the
    /// big bang has had time to reach us from.
    ///
    /// # Errors
    /// Where there was no big bang, or the horizon is infinite.
    ///
    /// # Source
    /// Davis & Lineweaver 2004, PASA 21, 97, appendix A.
    pub fn particle_horizon(&self, z: Redshift) -> Found<Length> {
        let chi = self.since_beginning(Kind::Light, z)?;
        Ok(length(finite(chi * self.hubble_length_m() / z.stretch())?))
    }

    /// Comoving radius at z of the particle horizon.
    ///
    /// # Errors
    /// As [`Model::particle_horizon`].
    pub fn particle_horizon_comoving(&self, z: Redshift) -> Found<Length> {
        Ok(length(
            self.since_beginning(Kind::Light, z)? * self.hubble_length_m(),
        ))
    }

    /// Comoving radius that the particle horizon approaches in the far
    /// future, or has when a recollapsing model ends.
    ///
    /// # Errors
    /// Where there was no big bang, or it grows without limit.
    pub fn particle_horizon_limit(&self) -> Found<Length> {
        let past = self.since_beginning(Kind::Light, Redshift::TODAY)?;
        let future = self.to_end(Kind::Light, Redshift::TODAY)?.ok_or_else(|| {
            undefined("the particle horizon of this model grows without limit: it has no event horizon")
        })?;
        Ok(length((past + future) * self.hubble_length_m()))
    }

    /// Proper radius at z of the event horizon: from beyond, light emitted at
    /// that time never arrives.
    ///
    /// # Errors
    /// Where every event is seen in the end, as in models that slow down for
    /// ever; where the model never had this redshift or its end is unknown.
    ///
    /// # Source
    /// Davis & Lineweaver 2004, PASA 21, 97, appendix A.
    pub fn event_horizon(&self, z: Redshift) -> Found<Length> {
        let chi = self.event_horizon_comoving(z)?;
        Ok(length(chi * self.hubble_length_m() / z.stretch()))
    }

    /// Comoving radius of the event horizon at z in units of c/H0.
    fn event_horizon_comoving(&self, z: Redshift) -> Found<f64> {
        self.to_end(Kind::Light, z)?
            .ok_or_else(|| undefined("this model has no event horizon: every event is seen in the end"))
    }

    /// Speed `H0 D_C` at which what is seen at z recedes today.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn recession_speed(&self, z: Redshift) -> Found<Velocity> {
        Ok(Velocity::new::<meter_per_second>(self.light(z)? * SPEED_OF_LIGHT))
    }

    /// Speed `H(z) D_C/(1+z)` at which what is seen at z receded when its
    /// light was emitted.
    ///
    /// # Errors
    /// Where the model never had this redshift.
    pub fn recession_speed_then(&self, z: Redshift) -> Found<Velocity> {
        let speed = self.light(z)? * self.expansion_ratio(z)? / z.stretch();
        Ok(Velocity::new::<meter_per_second>(finite(speed * SPEED_OF_LIGHT)?))
    }

    /// Redshift of what recedes at c today, on the Hubble sphere.
    ///
    /// # Errors
    /// Where nothing seen recedes as fast.
    pub fn hubble_sphere_redshift(&self) -> Found<Redshift> {
        self.at_integral(Kind::Light, 1.0)?.ok_or_else(|| {
            undefined("nothing that is seen recedes at the speed of light today in this model")
        })
    }

    /// Redshift beyond which what we see receded faster than light when the
    /// light was emitted: the tip of our past light cone.
    ///
    /// # Errors
    /// Where the light cone has no tip.
    pub fn light_cone_peak(&self) -> Found<Redshift> {
        let track = self.track(Kind::Light)?;
        let slope = |z: f64| {
            let chi = track.before_today(self.expansion(), z);
            excess(1.0 + z, self.expansion().rate(1.0 + z) * chi)
        };
        self.outward(1.090_507_732_665_257_7, &slope).ok_or_else(|| {
            undefined("nothing that is seen receded as fast as light when it emitted in this model")
        })
    }

    /// Redshift of what is on the event horizon today: light it emits now
    /// will only just not arrive.
    ///
    /// # Errors
    /// Where there is no event horizon or nothing is seen so far away.
    pub fn event_horizon_redshift(&self) -> Found<Redshift> {
        let radius = self.event_horizon_comoving(Redshift::TODAY)?;
        self.at_integral(Kind::Light, radius)?
            .ok_or_else(|| undefined("nothing is seen as far away as the event horizon in this model"))
    }

    /// Proper distance of our past light cone at a cosmic time.
    ///
    /// # Errors
    /// For times before the big bang or after today.
    pub fn light_cone(&self, cosmic_time: Time) -> Found<Length> {
        let today = self.age(Redshift::TODAY)?;
        // A time computed as the age of today may miss it by a rounding.
        if cosmic_time > today * (1.0 + 4.0 * f64::EPSILON) {
            return Err(undefined(format_args!(
                "our past light cone ends today, {} after the big bang, and this is {}",
                in_gyr(today.value),
                in_gyr(cosmic_time.value)
            )));
        }
        let z = self.redshift_of_age(cosmic_time)?;
        Ok(length(
            (self.light(z)? / z.stretch() * self.hubble_length_m()).max(0.0),
        ))
    }

    /// Cosmic time at which light emitted today by what is now seen at z
    /// reaches us; infinite for never.
    ///
    /// # Errors
    /// For z < 0, and where there was no big bang.
    pub fn arrival_time(&self, z: Redshift) -> Found<Time> {
        let today = self.since_beginning(Kind::Time, Redshift::TODAY)?;
        Ok(time(self.hubble_time_s() * today) + self.arrival_wait(z)?)
    }

    /// How long from today until light emitted today by what is now seen at z
    /// reaches us; infinite for never.
    ///
    /// # Errors
    /// For z < 0.
    pub fn arrival_wait(&self, z: Redshift) -> Found<Time> {
        self.seen(z)?;
        let chi = self.light(z)?;
        let limit = self
            .to_end(Kind::Light, Redshift::TODAY)?
            .unwrap_or(f64::INFINITY);
        if chi >= limit {
            return Ok(time(f64::INFINITY));
        }
        Ok(time(self.hubble_time_s() * self.wait_for(chi)?))
    }

    /// Time from today in which light covers a comoving distance, through the
    /// turnaround if need be.
    fn wait_for(&self, chi: f64) -> Found<f64> {
        if let Some(z) = self.at_integral(Kind::Light, -chi)? {
            return Ok(-self.before_today(Kind::Time, z)?);
        }
        let too_late = || undefined("it arrives so late that its redshift is no longer a number");
        let (light, clock) = (self.track(Kind::Light)?, self.track(Kind::Time)?);
        let Edge::Turn(_) = self.history()?.future else {
            return Err(too_late());
        };
        // In the collapse: the mirror image of the light cone.
        let half = light.to_end(self.expansion(), 0.0).ok_or_else(too_late)?;
        let clock_half = clock.to_end(self.expansion(), 0.0).ok_or_else(too_late)?;
        let mirrored = self
            .at_integral(Kind::Light, chi - 2.0 * half)?
            .ok_or_else(too_late)?;
        Ok(2.0 * clock_half + self.before_today(Kind::Time, mirrored)?)
    }

    /// The latest cosmic time, by its own clock, at which we shall ever see
    /// what is now seen at z.
    ///
    /// # Errors
    /// For z ≤ 0, and where there is no event horizon.
    pub fn last_sight(&self, z: Redshift) -> Found<Time> {
        if z <= Redshift::TODAY {
            return Err(undefined(
                "what never leaves our sight has no last moment in it: z must be positive",
            ));
        }
        let chi = self.light(z)?;
        self.event_horizon_comoving(Redshift::TODAY)?;
        let remains = |z: f64| {
            self.to_end(Kind::Light, Redshift(z))
                .ok()
                .flatten()
                .unwrap_or(f64::NAN)
                - chi
        };
        let inside = remains(0.0) > 0.0;
        let found = self.outward(
            if inside {
                0.917_004_043_204_671_2
            } else {
                1.090_507_732_665_257_7
            },
            &remains,
        );
        match found {
            Some(last) => self.age(last),
            None => Err(undefined(
                "it leaves our sight so late that its redshift is no longer a number",
            )),
        }
    }

    /// Comoving volume that enters the particle horizon per unit of cosmic
    /// time at z.
    ///
    /// # Errors
    /// Where there is no particle horizon.
    pub fn particle_horizon_growth(&self, z: Redshift) -> Found<VolumeRate> {
        self.sweep(self.since_beginning(Kind::Light, z)?, z)
    }

    /// Comoving volume that leaves the event horizon per unit of cosmic time
    /// at z.
    ///
    /// # Errors
    /// Where there is no event horizon.
    pub fn event_horizon_loss(&self, z: Redshift) -> Found<VolumeRate> {
        self.sweep(self.event_horizon_comoving(z)?, z)
    }

    /// The comoving area of a sphere times the comoving speed of light.
    fn sweep(&self, chi: f64, z: Redshift) -> Found<VolumeRate> {
        let radius = area_radius(chi, self.budget().curvature) * self.hubble_length_m();
        let rate = finite(4.0 * PI * radius * radius * SPEED_OF_LIGHT * z.stretch())?;
        Ok(VolumeRate::new::<cubic_meter_per_second>(rate))
    }

    /// Radius of curvature of space today, `c/(H0 √|Ωk|)`.
    ///
    /// # Errors
    /// In a flat model.
    pub fn curvature_radius(&self) -> Found<Length> {
        match self.budget().curvature {
            0.0 => Err(undefined("a flat model has no radius of curvature")),
            curvature => Ok(length(self.hubble_length_m() / libm::sqrt(curvature.abs()))),
        }
    }

    /// Volume today of all space in a closed model.
    ///
    /// # Errors
    /// Where space is infinite.
    pub fn total_volume(&self) -> Found<Volume> {
        self.closed()?;
        Ok(self.cubic(total_volume(self.budget().curvature)))
    }

    /// Length today of a straight way round a closed model.
    ///
    /// # Errors
    /// Where space is infinite.
    pub fn circumference(&self) -> Found<Length> {
        self.closed()?;
        Ok(self.curvature_radius()? * (2.0 * PI))
    }

    /// Share of a closed model's space within the particle horizon.
    ///
    /// # Errors
    /// Where space is infinite or there is no particle horizon.
    pub fn observable_fraction(&self) -> Found<f64> {
        self.closed()?;
        let curvature = self.budget().curvature;
        let chi = self.since_beginning(Kind::Light, Redshift::TODAY)?;
        Ok(volume(chi, curvature) / total_volume(curvature))
    }

    /// Radius of curvature of the smallest closed universe that a bound on
    /// Ωk allows, with this model's H0.
    ///
    /// # Errors
    /// Where the bound is zero or not a number.
    pub fn smallest_radius(&self, bound: f64) -> Found<Length> {
        if bound == 0.0 || !bound.is_finite() {
            return Err(undefined("a bound on Ωk is a number other than zero"));
        }
        Ok(length(self.hubble_length_m() / libm::sqrt(bound.abs())))
    }

    /// Volume of the smallest closed universe that a bound on Ωk allows.
    ///
    /// # Errors
    /// Where the bound is zero or not a number.
    pub fn smallest_volume(&self, bound: f64) -> Found<Volume> {
        self.smallest_radius(bound)?;
        Ok(self.cubic(total_volume(-bound.abs())))
    }

    fn closed(&self) -> Found<()> {
        if self.budget().curvature < 0.0 {
            Ok(())
        } else {
            Err(undefined(
                "space is infinite in this model: only a closed one, Ωk < 0, has an end to it",
            ))
        }
    }
}
