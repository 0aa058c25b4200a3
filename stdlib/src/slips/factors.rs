//! Factors forgotten, added, or taken twice, and digits miscopied.

use super::{Algebra, Copying, Mistake, Slip, anything, power_of};
use crate::dimension::{Dimension, Generator};
use std::f64::consts::{LN_10, PI, SQRT_2};

/// Light years in a parsec, from the definitions of both.
const LY_PER_PC: f64 = 648_000.0 / PI * 149_597_870_700.0 / 9_460_730_472_580_800.0;
const DEG_PER_RAD: f64 = 180.0 / PI;
/// 2 √(2 ln 2)
const FWHM_PER_SIGMA: f64 = 2.354_820_045_030_949_4;
/// 2.5/ln 10: a small magnitude as a relative change.
const MAG_PER_RATIO: f64 = 2.5 / LN_10;
const SQRT_3: f64 = 1.732_050_807_568_877_2;

fn not_magnitude(dimension: &Dimension) -> bool {
    power_of(dimension, Generator::Magnitude) == 0
}

fn magnitude(dimension: &Dimension) -> bool {
    !not_magnitude(dimension)
}

fn has_length(dimension: &Dimension) -> bool {
    power_of(dimension, Generator::Length) != 0 && not_magnitude(dimension)
}

fn has_extent(dimension: &Dimension) -> bool {
    let others = [Generator::Mass, Generator::Time, Generator::Temperature];
    has_length(dimension) && others.iter().all(|other| power_of(dimension, *other) == 0)
}

fn has_mass(dimension: &Dimension) -> bool {
    power_of(dimension, Generator::Mass) != 0
}

fn is_wave_number(dimension: &Dimension) -> bool {
    let others = [
        Generator::Mass,
        Generator::Time,
        Generator::Temperature,
        Generator::Angle,
    ];
    power_of(dimension, Generator::Length) == -1
        && others.iter().all(|other| power_of(dimension, *other) == 0)
}

fn takes_h(dimension: &Dimension) -> bool {
    (has_length(dimension) || has_mass(dimension)) && !is_speed(dimension) && !is_wave_number(dimension)
}

fn has_angle(dimension: &Dimension) -> bool {
    power_of(dimension, Generator::Angle) != 0
}

/// An angle may go unnamed: a ratio of lengths.
fn solid_angle(dimension: &Dimension) -> bool {
    power_of(dimension, Generator::Angle).abs() == 2
}

fn is_speed(dimension: &Dimension) -> bool {
    power_of(dimension, Generator::Length) == -power_of(dimension, Generator::Time)
        && power_of(dimension, Generator::Length) != 0
}

fn energy_like(dimension: &Dimension) -> bool {
    has_mass(dimension) && power_of(dimension, Generator::Time) <= -2
}

const fn slip(
    key: &'static str,
    about: &'static str,
    weight: f64,
    befalls: fn(&Dimension) -> bool,
    mistake: Mistake,
) -> Slip {
    Slip {
        key,
        about,
        weight,
        befalls,
        functions: &[],
        mistake,
    }
}

const fn times(
    key: &'static str,
    about: &'static str,
    weight: f64,
    befalls: fn(&Dimension) -> bool,
    factor: f64,
) -> Slip {
    slip(key, about, weight, befalls, Mistake::Factor(factor))
}

/// A slip that is made with certain functions alone.
const fn with(
    key: &'static str,
    about: &'static str,
    weight: f64,
    functions: &'static [&'static str],
    mistake: Mistake,
) -> Slip {
    Slip {
        key,
        about,
        weight,
        befalls: anything,
        functions,
        mistake,
    }
}

const fn stretch(key: &'static str, about: &'static str, weight: f64, power: i32) -> Slip {
    slip(key, about, weight, anything, Mistake::Stretch(power))
}

const fn little_h(key: &'static str, about: &'static str, weight: f64, power: i32) -> Slip {
    slip(key, about, weight, takes_h, Mistake::LittleH(power))
}

const fn shift(about: &'static str, weight: f64, by: f64) -> Slip {
    slip("AB-for-Vega", about, weight, magnitude, Mistake::Shift(by))
}

/// Functions in which a source is seen with its time and its waves stretched.
const SPECTRA: &[&str] = &[
    "observed_wavelength",
    "emitted_wavelength",
    "observed_frequency",
    "emitted_frequency",
    "observed_duration",
    "emitted_duration",
    "redshift_of_wavelength",
    "redshift_of_frequency",
];
const SIRENS: &[&str] = &["detector_frame_mass", "source_frame_mass", "chirp_mass"];
const SPECTRAL_INDEX: &[&str] = &[
    "luminosity_per_frequency",
    "flux_density_of",
    "luminosity_per_wavelength",
    "flux_per_wavelength_of",
];
const MULTIPOLES: &[&str] = &[
    "acoustic_scale",
    "transverse_wave_number",
    "line_of_sight_wave_number",
    "wavelength_of_wave_number",
];

/// Blanton & Roweis 2007, AJ 133, 734, table 1: AB minus Vega.
const V: f64 = 0.02;
const R: f64 = 0.21;
const I: f64 = 0.45;
const J: f64 = 0.91;
const H: f64 = 1.39;
const K: f64 = 1.85;

/// The table.
pub static SLIPS: &[Slip] = &[
    slip(
        "comoving-for-proper",
        "the comoving size in place of the proper one",
        25.0,
        has_length,
        Mistake::StretchOfLengths(1),
    ),
    slip(
        "proper-for-comoving",
        "the proper size in place of the comoving one",
        25.0,
        has_length,
        Mistake::StretchOfLengths(-1),
    ),
    stretch("dropped-1+z", "one factor (1+z) missing", 20.0, -1),
    stretch("extra-1+z", "one factor (1+z) too many", 20.0, 1),
    stretch("dropped-1+z-2", "two factors (1+z) missing", 8.0, -2),
    stretch("extra-1+z-2", "two factors (1+z) too many", 8.0, 2),
    stretch("dropped-1+z-3", "three factors (1+z) missing", 4.0, -3),
    stretch("extra-1+z-3", "three factors (1+z) too many", 4.0, 3),
    stretch(
        "dropped-1+z-4",
        "four factors (1+z) missing, the dimming of a surface",
        5.0,
        -4,
    ),
    stretch(
        "extra-1+z-4",
        "four factors (1+z) too many, the dimming of a surface",
        5.0,
        4,
    ),
    with(
        "rest-for-observed",
        "the rest frame in place of the observed one",
        25.0,
        SPECTRA,
        Mistake::Stretch(-1),
    ),
    with(
        "observed-for-rest",
        "the observed frame in place of the rest frame",
        25.0,
        SPECTRA,
        Mistake::Stretch(1),
    ),
    with(
        "detector-for-source",
        "a mass in the frame of the detector in place of the source's",
        25.0,
        SIRENS,
        Mistake::Stretch(1),
    ),
    with(
        "source-for-detector",
        "a mass in the frame of the source in place of the detector's",
        25.0,
        SIRENS,
        Mistake::Stretch(-1),
    ),
    with(
        "spectral-index-sign",
        "the spectral index with the other sign",
        20.0,
        SPECTRAL_INDEX,
        Mistake::ExponentSign,
    ),
    with(
        "ell-half",
        "2π over an angle or a length in place of π",
        15.0,
        MULTIPOLES,
        Mistake::Factor(2.0),
    ),
    with(
        "ell-half",
        "π over an angle or a length in place of 2π",
        15.0,
        MULTIPOLES,
        Mistake::Factor(0.5),
    ),
    slip(
        "k-in-h",
        "1/Mpc under the name of h/Mpc",
        20.0,
        is_wave_number,
        Mistake::LittleH(1),
    ),
    slip(
        "k-in-h",
        "h/Mpc under the name of 1/Mpc",
        20.0,
        is_wave_number,
        Mistake::LittleH(-1),
    ),
    little_h(
        "h-dropped",
        "a value per h read as one without: h left out",
        20.0,
        1,
    ),
    little_h("h-inverted", "a division by h where none belongs", 15.0, -1),
    little_h("h-power", "h squared too much", 8.0, 2),
    little_h("h-power", "h squared too little", 8.0, -2),
    little_h("h-power", "h cubed too much", 6.0, 3),
    little_h("h-power", "h cubed too little", 6.0, -3),
    slip(
        "5logh",
        "5 log10 h added where it is left out",
        15.0,
        magnitude,
        Mistake::LittleH(2),
    ),
    slip(
        "5logh",
        "5 log10 h left out",
        15.0,
        magnitude,
        Mistake::LittleH(-2),
    ),
    slip(
        "Gpc-for-Gly",
        "parsecs under the name of light years",
        20.0,
        has_length,
        Mistake::FactorPer(Generator::Length, 1.0 / LY_PER_PC),
    ),
    slip(
        "Gly-for-Gpc",
        "light years under the name of parsecs",
        20.0,
        has_length,
        Mistake::FactorPer(Generator::Length, LY_PER_PC),
    ),
    slip(
        "diameter-for-radius",
        "the diameter in place of the radius",
        20.0,
        has_extent,
        Mistake::FactorPer(Generator::Length, 2.0),
    ),
    slip(
        "radius-for-diameter",
        "the radius in place of the diameter",
        20.0,
        has_extent,
        Mistake::FactorPer(Generator::Length, 0.5),
    ),
    times("half", "a factor 2 missing", 12.0, not_magnitude, 0.5),
    times("double", "a factor 2 too many", 12.0, not_magnitude, 2.0),
    times(
        "4pi-dropped",
        "a factor 4π missing",
        10.0,
        not_magnitude,
        0.25 / PI,
    ),
    times("4pi-added", "a factor 4π too many", 8.0, not_magnitude, 4.0 * PI),
    times("pi-dropped", "a factor π missing", 6.0, not_magnitude, 1.0 / PI),
    times("pi-added", "a factor π too many", 6.0, not_magnitude, PI),
    times(
        "sphere-for-cube",
        "a factor 4π/3 missing",
        5.0,
        not_magnitude,
        0.75 / PI,
    ),
    times(
        "cube-for-sphere",
        "a factor 4π/3 too many",
        5.0,
        not_magnitude,
        4.0 * PI / 3.0,
    ),
    times("2pi-dropped", "a factor 2π missing", 5.0, not_magnitude, 0.5 / PI),
    times("2pi-added", "a factor 2π too many", 5.0, not_magnitude, 2.0 * PI),
    slip(
        "arcsec-as-rad",
        "seconds of arc under the name of radians",
        8.0,
        has_angle,
        Mistake::FactorPer(Generator::Angle, 3600.0 * DEG_PER_RAD),
    ),
    slip(
        "rad-as-arcsec",
        "radians under the name of seconds of arc",
        8.0,
        has_angle,
        Mistake::FactorPer(Generator::Angle, 1.0 / (3600.0 * DEG_PER_RAD)),
    ),
    slip(
        "arcmin-for-arcsec",
        "minutes of arc under the name of seconds",
        8.0,
        has_angle,
        Mistake::FactorPer(Generator::Angle, 1.0 / 60.0),
    ),
    slip(
        "arcsec-for-arcmin",
        "seconds of arc under the name of minutes",
        8.0,
        has_angle,
        Mistake::FactorPer(Generator::Angle, 60.0),
    ),
    slip(
        "arcmin-as-rad",
        "minutes of arc under the name of radians",
        5.0,
        has_angle,
        Mistake::FactorPer(Generator::Angle, 60.0 * DEG_PER_RAD),
    ),
    slip(
        "deg-as-rad",
        "degrees under the name of radians",
        8.0,
        has_angle,
        Mistake::FactorPer(Generator::Angle, DEG_PER_RAD),
    ),
    slip(
        "rad-as-deg",
        "radians under the name of degrees",
        8.0,
        has_angle,
        Mistake::FactorPer(Generator::Angle, 1.0 / DEG_PER_RAD),
    ),
    times(
        "deg2-for-sr",
        "square degrees under the name of steradians",
        8.0,
        solid_angle,
        DEG_PER_RAD * DEG_PER_RAD,
    ),
    times(
        "ln-for-log10",
        "a natural logarithm in place of a decimal one",
        6.0,
        anything,
        LN_10,
    ),
    times(
        "log10-for-ln",
        "a decimal logarithm in place of a natural one",
        6.0,
        anything,
        1.0 / LN_10,
    ),
    times(
        "magnitude-as-ratio",
        "a relative change read as one in magnitudes",
        5.0,
        anything,
        1.0 / MAG_PER_RATIO,
    ),
    times(
        "ratio-as-magnitude",
        "a change in magnitudes read as a relative one",
        5.0,
        anything,
        MAG_PER_RATIO,
    ),
    times(
        "fwhm-for-sigma",
        "the full width at half maximum in place of the standard deviation",
        8.0,
        not_magnitude,
        FWHM_PER_SIGMA,
    ),
    times(
        "sigma-for-fwhm",
        "the standard deviation in place of the full width at half maximum",
        8.0,
        not_magnitude,
        1.0 / FWHM_PER_SIGMA,
    ),
    times(
        "hwhm",
        "half the width at half maximum in place of the standard deviation",
        4.0,
        not_magnitude,
        0.5 * FWHM_PER_SIGMA,
    ),
    times(
        "three-d-for-one-d",
        "a velocity dispersion in three dimensions in place of one",
        8.0,
        is_speed,
        SQRT_3,
    ),
    times(
        "one-d-for-three-d",
        "a velocity dispersion in one dimension in place of three",
        8.0,
        is_speed,
        1.0 / SQRT_3,
    ),
    times(
        "three-d-for-one-d",
        "the square of a velocity dispersion in three dimensions in place of one",
        4.0,
        has_mass,
        3.0,
    ),
    times(
        "one-d-for-three-d",
        "the square of a velocity dispersion in one dimension in place of three",
        4.0,
        has_mass,
        1.0 / 3.0,
    ),
    times("root-two", "a factor √2 too many", 4.0, not_magnitude, SQRT_2),
    times(
        "root-two",
        "a factor √2 missing",
        4.0,
        not_magnitude,
        1.0 / SQRT_2,
    ),
    times(
        "cgs-for-SI",
        "ergs under the name of joules",
        6.0,
        energy_like,
        1e7,
    ),
    times(
        "SI-for-cgs",
        "joules under the name of ergs",
        6.0,
        energy_like,
        1e-7,
    ),
    times(
        "power-of-ten",
        "a power of ten: 10 times too large",
        12.0,
        not_magnitude,
        10.0,
    ),
    times(
        "power-of-ten",
        "a power of ten: 10 times too small",
        12.0,
        not_magnitude,
        0.1,
    ),
    times(
        "power-of-ten",
        "a power of ten: 100 times too large",
        5.0,
        not_magnitude,
        100.0,
    ),
    times(
        "power-of-ten",
        "a power of ten: 100 times too small",
        5.0,
        not_magnitude,
        0.01,
    ),
    times(
        "power-of-ten",
        "a prefix: 1000 times too large",
        10.0,
        not_magnitude,
        1e3,
    ),
    times(
        "power-of-ten",
        "a prefix: 1000 times too small",
        10.0,
        not_magnitude,
        1e-3,
    ),
    times(
        "power-of-ten",
        "a prefix: a million times too large",
        4.0,
        not_magnitude,
        1e6,
    ),
    times(
        "power-of-ten",
        "a prefix: a million times too small",
        4.0,
        not_magnitude,
        1e-6,
    ),
    slip(
        "inverse",
        "the reciprocal",
        5.0,
        not_magnitude,
        Mistake::Power(Algebra::Inverse),
    ),
    slip(
        "sqrt",
        "the square root",
        3.0,
        not_magnitude,
        Mistake::Power(Algebra::Root),
    ),
    slip(
        "square",
        "the square",
        3.0,
        not_magnitude,
        Mistake::Power(Algebra::Square),
    ),
    shift("AB for Vega magnitudes in V", 2.0, V),
    shift("AB for Vega magnitudes in R", 3.0, R),
    shift("AB for Vega magnitudes in I", 3.0, I),
    shift("AB for Vega magnitudes in J", 3.0, J),
    shift("AB for Vega magnitudes in H", 3.0, H),
    shift("AB for Vega magnitudes in K", 3.0, K),
    shift("Vega for AB magnitudes in V", 2.0, -V),
    shift("Vega for AB magnitudes in R", 3.0, -R),
    shift("Vega for AB magnitudes in I", 3.0, -I),
    shift("Vega for AB magnitudes in J", 3.0, -J),
    shift("Vega for AB magnitudes in H", 3.0, -H),
    shift("Vega for AB magnitudes in K", 3.0, -K),
    slip(
        "transposed-digits",
        "two digits swapped",
        20.0,
        anything,
        Mistake::Digits(Copying::Transposed),
    ),
    slip(
        "one-digit",
        "one digit miscopied",
        20.0,
        anything,
        Mistake::Digits(Copying::OneWrong),
    ),
    slip(
        "truncated",
        "digits cut off where they should have been rounded",
        25.0,
        anything,
        Mistake::Digits(Copying::Truncated),
    ),
    slip(
        "rounded-input",
        "an input rounded to one digit",
        5.0,
        anything,
        Mistake::Rounded(1),
    ),
    slip(
        "rounded-input",
        "an input rounded to two digits",
        20.0,
        anything,
        Mistake::Rounded(2),
    ),
    slip(
        "rounded-input",
        "an input rounded to three digits",
        15.0,
        anything,
        Mistake::Rounded(3),
    ),
];
