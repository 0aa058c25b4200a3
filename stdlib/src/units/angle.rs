//! Angles, and the units of plain numbers: percent, dex, magnitude.

use super::Prefixes::Small;
use super::Unit;
use crate::constants::values::{ARCMINUTE, ARCSECOND, DEGREE};
use crate::dimension::{ANGLE, MAGNITUDE, NUMBER, SOLID_ANGLE};

const DERIVED: &str = "SI Brochure, 9th edition (2019), table 4";
const ACCEPTED: &str = "SI Brochure, 9th edition (2019), table 8";

pub(super) static UNITS: &[Unit] = &[
    Unit::new("rad", "radian", 1.0, ANGLE)
        .with(Small)
        .is("the angle of an arc as long as its radius", DERIVED),
    Unit::new("sr", "steradian", 1.0, SOLID_ANGLE)
        .with(Small)
        .is("rad^2", DERIVED),
    Unit::new("deg", "degree", DEGREE, ANGLE)
        .also(&["°"])
        .is("π/180 rad", ACCEPTED),
    Unit::new("arcmin", "arcminute", ARCMINUTE, ANGLE)
        .also(&["′"])
        .is("1/60 deg", ACCEPTED),
    Unit::new("arcsec", "arcsecond", ARCSECOND, ANGLE)
        .also(&["″"])
        .digits("4.848136811095359935899141e-6")
        .with(Small)
        .is("1/60 arcmin", ACCEPTED),
    Unit::new("mas", "milliarcsecond", ARCSECOND / 1e3, ANGLE).is("1/1000 arcsec", ACCEPTED),
    // U+03BC is the letter, U+00B5 the micro sign of keyboards.
    Unit::new("uas", "microarcsecond", ARCSECOND / 1e6, ANGLE)
        .also(&["\u{3bc}as", "\u{b5}as"])
        .is("1/1000 mas", ACCEPTED),
    Unit::new("mag", "magnitude", 1.0, MAGNITUDE).with(Small).is(
        "a step of 10^(-0.4) in flux",
        "Pogson 1856, MNRAS 17, 12; IAU 2015 Resolution B2",
    ),
    Unit::new("dex", "dex", 1.0, NUMBER)
        .with(Small)
        .is("a step of 1 in log10", "common practice"),
    Unit::new("%", "percent", 0.01, NUMBER)
        .also(&["percent"])
        .is("1/100", "SI Brochure, 9th edition (2019), sec. 5.4.7"),
    Unit::new("ppm", "part per million", 1e-6, NUMBER)
        .is("10^-6", "SI Brochure, 9th edition (2019), sec. 5.4.7"),
];
