//! The units of astronomy: lengths of the sky, the Sun and planets, flux
//! densities, and the lengths that carry their frame.

use super::Prefixes::{All, Large};
use super::Unit;
use crate::constants::values::{
    ASTRONOMICAL_UNIT, DAY, EARTH_MASS, EARTH_RADIUS, GIGAPARSEC, JUPITER_MASS, JUPITER_RADIUS, KILOPARSEC,
    LIGHT_YEAR, MEGAPARSEC, PARSEC, SOLAR_LUMINOSITY, SOLAR_MASS, SOLAR_RADIUS,
};
use crate::dimension::{
    AREA, FLUX_PER_FREQUENCY, Generator, LENGTH, MASS, NUMBER, POWER, RATE, SOLID_ANGLE, TIME,
};

const B2_2012: &str = "IAU 2012 Resolution B2";
const B2_2015: &str = "IAU 2015 Resolution B2, note 4";
const B3_2015: &str = "IAU 2015 Resolution B3";
const B3_CODATA: &str = "IAU 2015 Resolution B3; G: CODATA 2022";
const YEAR: &str = "IAU Style Manual (1989), sec. 5.15; SI 2019";
const FRAMES: &str = "common practice (the letter c or p before a length)";

pub(super) static UNITS: &[Unit] = &[
    Unit::new("pc", "parsec", PARSEC, LENGTH)
        .digits("3.085677581491367278913938e16")
        .with(All)
        .is("648000/π au", B2_2015),
    Unit::new("ly", "light-year", LIGHT_YEAR, LENGTH)
        .also(&["lyr"])
        .with(Large)
        .is("c times one Julian year", YEAR),
    Unit::new("au", "astronomical unit", ASTRONOMICAL_UNIT, LENGTH)
        .also(&["AU"])
        .is("149597870700 m", B2_2012),
    Unit::new("Msun", "solar mass", SOLAR_MASS, MASS)
        .also(&["M_sun", "solMass", "M_⊙", "M⊙", "M_☉", "M☉"])
        .is("1.3271244e20 m^3/s^2 (nominal) over G", B3_CODATA),
    Unit::new("Lsun", "solar luminosity", SOLAR_LUMINOSITY, POWER)
        .also(&["L_sun", "solLum", "L_⊙", "L⊙", "L_☉", "L☉"])
        .is("3.828e26 W (nominal)", B3_2015),
    Unit::new("Rsun", "solar radius", SOLAR_RADIUS, LENGTH)
        .also(&["R_sun", "solRad", "R_⊙", "R⊙", "R_☉", "R☉"])
        .is("6.957e8 m (nominal)", B3_2015),
    Unit::new("Mearth", "Earth mass", EARTH_MASS, MASS)
        .also(&["M_earth", "M_⊕", "M⊕"])
        .is("3.986004e14 m^3/s^2 (nominal) over G", B3_CODATA),
    Unit::new("Rearth", "Earth radius", EARTH_RADIUS, LENGTH)
        .also(&["R_earth", "R_⊕", "R⊕"])
        .is("6.3781e6 m (nominal, equatorial)", B3_2015),
    Unit::new("Mjup", "Jupiter mass", JUPITER_MASS, MASS)
        .also(&["M_jup"])
        .is("1.2668653e17 m^3/s^2 (nominal) over G", B3_CODATA),
    Unit::new("Rjup", "Jupiter radius", JUPITER_RADIUS, LENGTH)
        .also(&["R_jup"])
        .is("7.1492e7 m (nominal, equatorial)", B3_2015),
    Unit::new("Jy", "jansky", 1e-26, FLUX_PER_FREQUENCY)
        .with(All)
        .is("10^-26 W/m^2/Hz", "IAU 1973, Commission 40; VOUnits 1.1"),
    // 10^10/(4π), of photons, which are counted and have no dimension here.
    Unit::new(
        "R",
        "rayleigh",
        795_774_715.459_476_7,
        RATE.per(AREA).per(SOLID_ANGLE),
    )
    .is(
        "10^10/(4π) photons/m^2/s/sr",
        "Hunten, Roach & Chamberlain 1956; VOUnits 1.1",
    ),
    Unit::new("Ba", "Besselian year", 365.242_198_781 * DAY, TIME).is(
        "365.242198781 d, the tropical year at B1950.0",
        "Lieske 1979, A&A 73, 282 (from memory)",
    ),
    Unit::new("ta", "tropical year", 365.242_19 * DAY, TIME).is(
        "365.24219 d, at J2000.0",
        "Simon et al. 1994, A&A 282, 663 (from memory)",
    ),
    Unit::new("h", "little h", 1.0, NUMBER.with(Generator::LittleH, 1)).is(
        "H0/(100 km/s/Mpc), left standing in the unit",
        "Croton 2013, PASA 30, e052",
    ),
    comoving("cpc", "comoving parsec", PARSEC).is("what is 1 pc long today, a0 = 1", FRAMES),
    comoving("ckpc", "comoving kiloparsec", KILOPARSEC).is("what is 1 kpc long today, a0 = 1", FRAMES),
    comoving("cMpc", "comoving megaparsec", MEGAPARSEC).is("what is 1 Mpc long today, a0 = 1", FRAMES),
    comoving("cGpc", "comoving gigaparsec", GIGAPARSEC).is("what is 1 Gpc long today, a0 = 1", FRAMES),
    comoving("cly", "comoving light-year", LIGHT_YEAR).is("what is 1 ly long today, a0 = 1", FRAMES),
    comoving("ckly", "comoving thousand light-years", LIGHT_YEAR * 1e3)
        .is("what is 1 kly long today, a0 = 1", FRAMES),
    comoving("cMly", "comoving million light-years", LIGHT_YEAR * 1e6)
        .is("what is 1 Mly long today, a0 = 1", FRAMES),
    comoving("cGly", "comoving billion light-years", LIGHT_YEAR * 1e9)
        .is("what is 1 Gly long today, a0 = 1", FRAMES),
    proper("ppc", "proper parsec", PARSEC).is("1 pc, as measured at its own epoch", FRAMES),
    proper("pkpc", "proper kiloparsec", KILOPARSEC).is("1 kpc, as measured at its own epoch", FRAMES),
    proper("pMpc", "proper megaparsec", MEGAPARSEC).is("1 Mpc, as measured at its own epoch", FRAMES),
    proper("pGpc", "proper gigaparsec", GIGAPARSEC).is("1 Gpc, as measured at its own epoch", FRAMES),
    proper("ply", "proper light-year", LIGHT_YEAR).is("1 ly, as measured at its own epoch", FRAMES),
    proper("pkly", "proper thousand light-years", LIGHT_YEAR * 1e3)
        .is("1 kly, as measured at its own epoch", FRAMES),
    proper("pMly", "proper million light-years", LIGHT_YEAR * 1e6)
        .is("1 Mly, as measured at its own epoch", FRAMES),
    proper("pGly", "proper billion light-years", LIGHT_YEAR * 1e9)
        .is("1 Gly, as measured at its own epoch", FRAMES),
];

const fn comoving(symbol: &'static str, name: &'static str, factor: f64) -> Unit {
    Unit::new(symbol, name, factor, LENGTH.comoving()).framed()
}

const fn proper(symbol: &'static str, name: &'static str, factor: f64) -> Unit {
    Unit::new(symbol, name, factor, LENGTH).framed()
}
