//! The International System of Units: base units, derived units with names of
//! their own, and the units of time accepted beside them.
//!
//! The hour is `hr`, for `h` in a unit is little h. The degree Celsius is not
//! a unit here: it has an offset, so no factor can express it.

use super::Prefixes::{All, Large};
use super::Unit;
use crate::constants::values::{DAY, JULIAN_YEAR};
use crate::dimension::{
    AMOUNT, AREA, CHARGE, CURRENT, Dimension, ENERGY, FORCE, LENGTH, LUMINOUS_INTENSITY,
    MAGNETIC_FLUX_DENSITY, MASS, POWER, PRESSURE, RATE, SOLID_ANGLE, SPEED, TEMPERATURE, TIME,
};

const BASE: &str = "SI Brochure, 9th edition (2019), sec. 2.3.1";
const DERIVED: &str = "SI Brochure, 9th edition (2019), table 4";
const ACCEPTED: &str = "SI Brochure, 9th edition (2019), table 8";

const VOLTAGE: Dimension = POWER.per(CURRENT);
const RESISTANCE: Dimension = VOLTAGE.per(CURRENT);
const CONDUCTANCE: Dimension = CURRENT.per(VOLTAGE);
const CAPACITANCE: Dimension = CHARGE.per(VOLTAGE);
const MAGNETIC_FLUX: Dimension = VOLTAGE.times(TIME);
const INDUCTANCE: Dimension = MAGNETIC_FLUX.per(CURRENT);
const LUMINOUS_FLUX: Dimension = LUMINOUS_INTENSITY.times(SOLID_ANGLE);
const ENERGY_PER_MASS: Dimension = SPEED.times(SPEED);

pub(super) static UNITS: &[Unit] = &[
    Unit::new("m", "metre", 1.0, LENGTH)
        .with(All)
        .is("SI base unit of length", BASE),
    Unit::new("g", "gram", 1e-3, MASS)
        .with(All)
        .is("1/1000 of the SI base unit of mass, the kilogram", BASE),
    Unit::new("s", "second", 1.0, TIME)
        .with(All)
        .is("SI base unit of time", BASE),
    Unit::new("A", "ampere", 1.0, CURRENT)
        .with(All)
        .is("SI base unit of electric current", BASE),
    Unit::new("K", "kelvin", 1.0, TEMPERATURE)
        .with(All)
        .is("SI base unit of temperature", BASE),
    Unit::new("mol", "mole", 1.0, AMOUNT)
        .with(All)
        .is("SI base unit of amount of substance", BASE),
    Unit::new("cd", "candela", 1.0, LUMINOUS_INTENSITY)
        .with(All)
        .is("SI base unit of luminous intensity", BASE),
    Unit::new("Hz", "hertz", 1.0, RATE).with(All).is("1/s", DERIVED),
    Unit::new("N", "newton", 1.0, FORCE)
        .with(All)
        .is("kg m/s^2", DERIVED),
    Unit::new("Pa", "pascal", 1.0, PRESSURE)
        .with(All)
        .is("N/m^2", DERIVED),
    Unit::new("J", "joule", 1.0, ENERGY).with(All).is("N m", DERIVED),
    Unit::new("W", "watt", 1.0, POWER).with(All).is("J/s", DERIVED),
    Unit::new("C", "coulomb", 1.0, CHARGE)
        .with(All)
        .is("A s", DERIVED),
    Unit::new("V", "volt", 1.0, VOLTAGE).with(All).is("W/A", DERIVED),
    Unit::new("F", "farad", 1.0, CAPACITANCE)
        .with(All)
        .is("C/V", DERIVED),
    // U+03A9 is the letter, U+2126 the compatibility sign that some editors put.
    Unit::new("Ohm", "ohm", 1.0, RESISTANCE)
        .also(&["ohm", "\u{3a9}", "\u{2126}"])
        .with(All)
        .is("V/A", DERIVED),
    Unit::new("S", "siemens", 1.0, CONDUCTANCE)
        .with(All)
        .is("A/V", DERIVED),
    Unit::new("Wb", "weber", 1.0, MAGNETIC_FLUX)
        .with(All)
        .is("V s", DERIVED),
    Unit::new("T", "tesla", 1.0, MAGNETIC_FLUX_DENSITY)
        .with(All)
        .is("Wb/m^2", DERIVED),
    Unit::new("H", "henry", 1.0, INDUCTANCE)
        .with(All)
        .is("Wb/A", DERIVED),
    Unit::new("lm", "lumen", 1.0, LUMINOUS_FLUX)
        .with(All)
        .is("cd sr", DERIVED),
    Unit::new("lx", "lux", 1.0, LUMINOUS_FLUX.per(AREA))
        .with(All)
        .is("lm/m^2", DERIVED),
    Unit::new("Bq", "becquerel", 1.0, RATE)
        .with(All)
        .is("1/s", DERIVED),
    Unit::new("Gy", "gray", 1.0, ENERGY_PER_MASS)
        .with(All)
        .is("J/kg", DERIVED),
    Unit::new("Sv", "sievert", 1.0, ENERGY_PER_MASS)
        .with(All)
        .is("J/kg", DERIVED),
    Unit::new("kat", "katal", 1.0, AMOUNT.per(TIME)).is("mol/s", DERIVED),
    Unit::new("min", "minute", 60.0, TIME).is("60 s", ACCEPTED),
    Unit::new("hr", "hour", 3600.0, TIME).is("60 min; `h` in a unit is little h", ACCEPTED),
    Unit::new("d", "day", DAY, TIME).is("86400 s", ACCEPTED),
    Unit::new("yr", "Julian year", JULIAN_YEAR, TIME)
        .also(&["a"])
        .with(Large)
        .is("365.25 d", "IAU Style Manual (1989), sec. 5.15"),
    Unit::new("cy", "Julian century", 100.0 * JULIAN_YEAR, TIME)
        .is("36525 d", "IAU Style Manual (1989), sec. 5.15"),
];
