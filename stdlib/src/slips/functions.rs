//! Functions taken for one another, and formulas used where they do not hold.

use super::{Mistake, Slip, anything};
use crate::catalogue::{Definition, Entry};
use crate::constants::values::SPEED_OF_LIGHT;
use crate::cosmology::Found;
use crate::cosmology::template::{BLANK, redshift};
use crate::model::Model;

const fn swap(
    key: &'static str,
    about: &'static str,
    weight: f64,
    of: &'static str,
    instead: &'static str,
) -> Slip {
    Slip {
        key,
        about,
        weight,
        befalls: anything,
        functions: &[],
        mistake: Mistake::Function { of, instead },
    }
}

const fn formula(
    key: &'static str,
    about: &'static str,
    weight: f64,
    (of, arguments): (&'static str, usize),
    instead: &'static Entry,
) -> Slip {
    Slip {
        key,
        about,
        weight,
        befalls: anything,
        functions: &[],
        mistake: Mistake::Formula {
            of,
            arguments,
            instead,
        },
    }
}

const fn of_model(name: &'static str, compute: fn(&Model, &[f64]) -> Found<f64>) -> Entry {
    Entry {
        name,
        definition: Definition::Cosmology(compute),
        ..BLANK
    }
}

/// `c t(z)` for the particle horizon.
static AGE_TIMES_C: Entry = of_model("c t", |model, x| {
    Ok(SPEED_OF_LIGHT * model.age(redshift(x, 0)?)?.value)
});
/// `c z`
static CZ: Entry = of_model("c z", |_, x| Ok(SPEED_OF_LIGHT * redshift(x, 0)?.get()));
/// The Doppler formula of special relativity.
static DOPPLER: Entry = of_model("Doppler", |_, x| {
    let square = redshift(x, 0)?.stretch() * redshift(x, 0)?.stretch();
    Ok(SPEED_OF_LIGHT * (square - 1.0) / (square + 1.0))
});
/// `c z/H0`
static HUBBLE_LAW: Entry = of_model("c z / H0", |model, x| {
    Ok(model.hubble_length_m() * redshift(x, 0)?.get())
});
/// `D_S − D_L`
static DIFFERENCE: Entry = of_model("D_S - D_L", |model, x| {
    let far = model.angular_diameter_distance(redshift(x, 1)?)?.value;
    Ok(far - model.angular_diameter_distance(redshift(x, 0)?)?.value)
});
/// `c/H0` for `c/H(z)`
static HUBBLE_TODAY: Entry = of_model("c / H0", |model, _| Ok(model.hubble_length_m()));
/// `H0` for `H(z)`
static RATE_TODAY: Entry = of_model("H0", |model, _| Ok(model.budget().h0_per_s));
/// The critical density of today at z.
static CRITICAL_TODAY: Entry = of_model("critical density today", |model, _| {
    Ok(model.critical_density(crate::cosmology::Redshift::TODAY)?.value)
});
/// The mean density of matter for the critical one.
static MEAN_DENSITY: Entry = of_model("mean density", |model, x| {
    let z = redshift(x, 0)?;
    Ok(model.matter_fraction(z)? * model.critical_density(z)?.value)
});

const D_A: &str = "angular_diameter_distance";
const D_C: &str = "comoving_distance";
const D_M: &str = "transverse_comoving_distance";
const D_L: &str = "luminosity_distance";
const D_T: &str = "light_travel_distance";

const CZ_OVER_H0: &str = "c z/H0, Hubble's law beyond its range";

/// The table.
pub static SLIPS: &[Slip] = &[
    swap(
        "luminosity-for-comoving",
        "the luminosity distance D_L in place of the comoving one",
        25.0,
        D_C,
        D_L,
    ),
    swap(
        "luminosity-for-transverse",
        "the luminosity distance D_L in place of the comoving one D_M",
        20.0,
        D_M,
        D_L,
    ),
    swap(
        "luminosity-for-angular",
        "the luminosity distance D_L in place of the angular diameter distance",
        25.0,
        D_A,
        D_L,
    ),
    swap(
        "angular-for-comoving",
        "the angular diameter distance D_A in place of the comoving one",
        25.0,
        D_C,
        D_A,
    ),
    swap(
        "angular-for-transverse",
        "the angular diameter distance D_A in place of the comoving one D_M",
        20.0,
        D_M,
        D_A,
    ),
    swap(
        "angular-for-luminosity",
        "the angular diameter distance D_A in place of the luminosity distance",
        25.0,
        D_L,
        D_A,
    ),
    swap(
        "comoving-for-luminosity",
        "the comoving distance in place of the luminosity distance D_L",
        25.0,
        D_L,
        D_M,
    ),
    swap(
        "comoving-for-angular",
        "the comoving distance in place of the angular diameter distance D_A",
        25.0,
        D_A,
        D_M,
    ),
    swap(
        "line-of-sight-for-luminosity",
        "the comoving distance along the line of sight, D_C, in place of D_L",
        4.0,
        D_L,
        D_C,
    ),
    swap(
        "line-of-sight-for-angular",
        "the comoving distance along the line of sight, D_C, in place of D_A",
        4.0,
        D_A,
        D_C,
    ),
    swap(
        "transverse-for-comoving",
        "the transverse comoving distance D_M in place of D_C",
        8.0,
        D_C,
        D_M,
    ),
    swap(
        "comoving-for-transverse",
        "the comoving distance along the line of sight, D_C, in place of D_M",
        8.0,
        D_M,
        D_C,
    ),
    swap(
        "light-travel-for-comoving",
        "the light-travel distance in place of the comoving one",
        25.0,
        D_C,
        D_T,
    ),
    swap(
        "light-travel-for-transverse",
        "the light-travel distance in place of the comoving one D_M",
        10.0,
        D_M,
        D_T,
    ),
    swap(
        "light-travel-for-luminosity",
        "the light-travel distance in place of the luminosity distance",
        10.0,
        D_L,
        D_T,
    ),
    swap(
        "light-travel-for-angular",
        "the light-travel distance in place of the angular diameter distance",
        8.0,
        D_A,
        D_T,
    ),
    swap(
        "comoving-for-light-travel",
        "the comoving distance in place of the light-travel distance",
        25.0,
        D_T,
        D_C,
    ),
    swap(
        "luminosity-for-light-travel",
        "the luminosity distance in place of the light-travel distance",
        5.0,
        D_T,
        D_L,
    ),
    swap(
        "angular-for-light-travel",
        "the angular diameter distance in place of the light-travel distance",
        5.0,
        D_T,
        D_A,
    ),
    formula(
        "light-travel-for-comoving",
        "c times the age in place of the particle horizon",
        25.0,
        ("particle_horizon", 1),
        &AGE_TIMES_C,
    ),
    swap(
        "hubble-radius-for-horizon",
        "the Hubble radius in place of the particle horizon",
        10.0,
        "particle_horizon",
        "hubble_radius",
    ),
    swap(
        "hubble-radius-for-horizon",
        "the Hubble radius in place of the event horizon",
        10.0,
        "event_horizon",
        "hubble_radius",
    ),
    swap(
        "horizon-for-hubble-radius",
        "the particle horizon in place of the Hubble radius",
        6.0,
        "hubble_radius",
        "particle_horizon",
    ),
    swap(
        "event-for-particle-horizon",
        "the event horizon in place of the particle horizon",
        10.0,
        "particle_horizon",
        "event_horizon",
    ),
    swap(
        "particle-for-event-horizon",
        "the particle horizon in place of the event horizon",
        10.0,
        "event_horizon",
        "particle_horizon",
    ),
    swap(
        "comoving-for-proper",
        "the comoving particle horizon in place of the proper one",
        15.0,
        "particle_horizon",
        "particle_horizon_comoving",
    ),
    swap(
        "proper-for-comoving",
        "the proper particle horizon in place of the comoving one",
        15.0,
        "particle_horizon_comoving",
        "particle_horizon",
    ),
    formula(
        "light-travel-for-comoving",
        "c times the age in place of the particle horizon",
        15.0,
        ("particle_horizon_comoving", 1),
        &AGE_TIMES_C,
    ),
    swap(
        "age-for-lookback",
        "the age in place of the lookback time",
        30.0,
        "lookback_time",
        "age",
    ),
    swap(
        "lookback-for-age",
        "the lookback time in place of the age",
        30.0,
        "age",
        "lookback_time",
    ),
    swap(
        "age-for-lookback",
        "the redshift at this age in place of this lookback time",
        20.0,
        "redshift_of_lookback",
        "redshift_of_age",
    ),
    swap(
        "lookback-for-age",
        "the redshift at this lookback time in place of this age",
        20.0,
        "redshift_of_age",
        "redshift_of_lookback",
    ),
    swap(
        "conformal-for-cosmic-time",
        "the conformal time in place of the cosmic one",
        6.0,
        "age",
        "conformal_time",
    ),
    swap(
        "speed-then-for-now",
        "the recession speed when the light left in place of today's",
        25.0,
        "recession_speed",
        "recession_speed_then",
    ),
    swap(
        "speed-now-for-then",
        "the recession speed today in place of the one when the light left",
        25.0,
        "recession_speed_then",
        "recession_speed",
    ),
    formula(
        "v-is-cz",
        "v = c z at a high redshift",
        25.0,
        ("recession_speed", 1),
        &CZ,
    ),
    formula(
        "v-is-cz",
        "v = c z at a high redshift",
        15.0,
        ("recession_speed_then", 1),
        &CZ,
    ),
    formula(
        "relativistic-doppler",
        "the Doppler formula of special relativity",
        20.0,
        ("recession_speed", 1),
        &DOPPLER,
    ),
    formula(
        "relativistic-doppler",
        "the Doppler formula of special relativity",
        15.0,
        ("recession_speed_then", 1),
        &DOPPLER,
    ),
    formula("hubble-law-low-z", CZ_OVER_H0, 15.0, (D_C, 1), &HUBBLE_LAW),
    formula("hubble-law-low-z", CZ_OVER_H0, 10.0, (D_M, 1), &HUBBLE_LAW),
    formula("hubble-law-low-z", CZ_OVER_H0, 15.0, (D_L, 1), &HUBBLE_LAW),
    formula("hubble-law-low-z", CZ_OVER_H0, 10.0, (D_A, 1), &HUBBLE_LAW),
    formula("hubble-law-low-z", CZ_OVER_H0, 10.0, (D_T, 1), &HUBBLE_LAW),
    formula(
        "subtracted-angular-distances",
        "D_LS taken as D_S - D_L",
        25.0,
        (D_A, 2),
        &DIFFERENCE,
    ),
    formula(
        "today-for-then",
        "the Hubble radius of today in place of that at z",
        10.0,
        ("hubble_radius", 1),
        &HUBBLE_TODAY,
    ),
    formula(
        "today-for-then",
        "the Hubble rate of today in place of that at z",
        10.0,
        ("hubble_rate", 1),
        &RATE_TODAY,
    ),
    formula(
        "today-for-then",
        "the critical density of today in place of that at z",
        10.0,
        ("critical_density", 1),
        &CRITICAL_TODAY,
    ),
    formula(
        "mean-for-critical",
        "the mean density of matter in place of the critical density",
        15.0,
        ("critical_density", 1),
        &MEAN_DENSITY,
    ),
    swap(
        "shell-for-sphere",
        "the volume per redshift in place of the volume",
        4.0,
        "comoving_volume",
        "differential_comoving_volume",
    ),
    swap(
        "200m-for-200c",
        "the radius at 200 times the mean density in place of the critical one",
        15.0,
        "halo_radius_200c",
        "halo_radius_200m",
    ),
    swap(
        "200c-for-200m",
        "the radius at 200 times the critical density in place of the mean one",
        15.0,
        "halo_radius_200m",
        "halo_radius_200c",
    ),
    swap(
        "vir-for-200c",
        "the virial radius in place of that at 200 times the critical density",
        12.0,
        "halo_radius_200c",
        "virial_radius",
    ),
    swap(
        "200c-for-vir",
        "the radius at 200 times the critical density in place of the virial one",
        12.0,
        "virial_radius",
        "halo_radius_200c",
    ),
    swap(
        "200m-for-200c",
        "the mass at 200 times the mean density in place of the critical one",
        15.0,
        "halo_mass_200c",
        "halo_mass_200m",
    ),
    swap(
        "200c-for-200m",
        "the mass at 200 times the critical density in place of the mean one",
        15.0,
        "halo_mass_200m",
        "halo_mass_200c",
    ),
    swap(
        "vir-for-200c",
        "the virial mass in place of that at 200 times the critical density",
        12.0,
        "halo_mass_200c",
        "halo_mass_vir",
    ),
    swap(
        "200c-for-vir",
        "the mass at 200 times the critical density in place of the virial one",
        12.0,
        "halo_mass_vir",
        "halo_mass_200c",
    ),
    swap(
        "growth-for-rate",
        "the growth factor in place of the growth rate",
        10.0,
        "growth_rate",
        "growth_factor",
    ),
    swap(
        "rate-for-growth",
        "the growth rate in place of the growth factor",
        8.0,
        "growth_factor",
        "growth_rate",
    ),
    swap(
        "ln-for-log10",
        "the natural logarithm in place of the decimal one",
        15.0,
        "log10",
        "ln",
    ),
    swap(
        "log10-for-ln",
        "the decimal logarithm in place of the natural one",
        15.0,
        "ln",
        "log10",
    ),
];
