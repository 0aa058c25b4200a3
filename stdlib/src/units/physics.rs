//! The units of physics beside the SI: the electronvolt and its like, what
//! remains of the centimetre–gram–second system, atoms, and `c` as a unit.

use super::Prefixes::{All, Large, Small};
use super::Unit;
use crate::constants::values::{ATOMIC_MASS, ELEMENTARY_CHARGE, RYDBERG_ENERGY, SPEED_OF_LIGHT};
use crate::dimension::{AREA, CHARGE, ENERGY, FORCE, LENGTH, MAGNETIC_FLUX_DENSITY, MASS, SPEED};

const CGS: &str = "SI Brochure, 8th edition (2006), table 9";
const CUSTOM: &str = "SI Brochure, 8th edition (2006), table 8";
const CODATA: &str = "CODATA 2022";

pub(super) static UNITS: &[Unit] = &[
    Unit::new("eV", "electronvolt", ELEMENTARY_CHARGE, ENERGY)
        .with(All)
        .is("1.602176634e-19 J", "SI Brochure, 9th edition (2019), table 8"),
    Unit::new("Ry", "rydberg", RYDBERG_ENERGY, ENERGY)
        .with(Small)
        .is("h c R_∞ = 2.1798723611030e-18 J", CODATA),
    Unit::new("u", "atomic mass unit", ATOMIC_MASS, MASS)
        .also(&["amu"])
        .is("1/12 of the mass of a ¹²C atom, 1.66053906892e-27 kg", CODATA),
    Unit::new("Da", "dalton", ATOMIC_MASS, MASS)
        .with(Large)
        .is("the atomic mass unit, 1.66053906892e-27 kg", CODATA),
    Unit::new("erg", "erg", 1e-7, ENERGY).is("10^-7 J", CGS),
    Unit::new("dyn", "dyne", 1e-5, FORCE).is("10^-5 N", CGS),
    Unit::new("G", "gauss", 1e-4, MAGNETIC_FLUX_DENSITY)
        .with(All)
        .is("10^-4 T", CGS),
    // U+00C5 is the letter, U+212B the compatibility sign.
    Unit::new("Angstrom", "angstrom", 1e-10, LENGTH)
        .also(&["angstrom", "\u{c5}", "\u{212b}"])
        .is("10^-10 m", CUSTOM),
    Unit::new("micron", "micron", 1e-6, LENGTH).is("10^-6 m", "common practice for the micrometre"),
    Unit::new("barn", "barn", 1e-28, AREA)
        .with(All)
        .is("10^-28 m^2", CUSTOM),
    // 10⁻²¹/c C m², rounded once.
    Unit::new("D", "debye", 3.335_640_951_981_521e-30, CHARGE.times(LENGTH))
        .is("10^-18 statC cm = (10^-21/299792458) C m", "VOUnits 1.1"),
    Unit::new("c", "speed of light", SPEED_OF_LIGHT, SPEED).is("299792458 m/s", "SI 2019"),
];
