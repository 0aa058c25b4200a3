//! Dimensions in a cosmologist's words: “a length (comoving)”, “a mass per h”.
//!
//! One table holds the dimensions that have a name in the field, each with the
//! unit in which a bare value of it is shown. A dimension that is not in the
//! table is spelt out in base units. The frame and the power of h are said
//! apart from the rest, for they are what a reader may have overlooked.
//!
//! Some things of different name share a dimension (a flux density and an
//! energy per area are both kg/s²); the table takes the one a cosmologist
//! meets most.

use crate::dimension::{
    ACCELERATION, ANGLE, AREA, CHARGE, CURRENT, DENSITY, Dimension, ENERGY, Exponent, FLUX,
    FLUX_PER_FREQUENCY, FLUX_PER_WAVELENGTH, FORCE, Generator, LENGTH, MAGNETIC_FLUX_DENSITY, MAGNITUDE,
    MASS, NUMBER, NUMBER_DENSITY, POWER, POWER_PER_WAVELENGTH, PRESSURE, RATE, SOLID_ANGLE, SPEED,
    SURFACE_DENSITY, TEMPERATURE, TIME, VOLUME, WAVE_NUMBER,
};
use num_rational::Ratio;

/// The dimension and frame in words, lower case and with an article.
///
/// `a number`, `a length (comoving)`, `a density times h^2`, and
/// `a quantity in kg m^5/s^3` where the field has no word for it.
#[must_use]
pub fn name(dimension: &Dimension) -> String {
    let bare = without_frame(dimension);
    let comoving = dimension.exponent(Generator::Comoving);
    let mut words = match known(&bare, comoving) {
        Some(row) => row.words.to_owned(),
        None => format!("a quantity in {}", base_units(&bare)),
    };
    words.push_str(&little_h(dimension.exponent(Generator::LittleH)));
    words.push_str(&frame(&bare, comoving));
    words
}

/// The unit in which a cosmologist would have a bare value of this dimension
/// shown, if there is a usual one.
///
/// Two choices need a word. A rate is shown in `1/s` and not in `km/s/Mpc`,
/// for a frequency is a rate too; the Hubble rate brings its own unit. An
/// angle is shown in `rad`, the unit in which a ratio of lengths and the angle
/// it stands for are the same number; a solid angle in `sr` likewise. A
/// comoving quantity whose unit has no comoving form (a conformal time) is
/// shown in the plain one, as a bracket would show it.
#[must_use]
pub fn usual_unit(dimension: &Dimension) -> Option<&'static str> {
    let with_h = WITH_LITTLE_H.iter().find(|(known, _)| known == dimension);
    if let Some((_, unit)) = with_h {
        return Some(unit);
    }
    if is_some(dimension.exponent(Generator::LittleH)) {
        return None;
    }
    let comoving = dimension.exponent(Generator::Comoving);
    let row = known(&without_frame(dimension), comoving)?;
    let plainly = is_some(comoving) && comoving == Ratio::from(row.lengths);
    let unit = if plainly && !row.comoving_unit.is_empty() {
        row.comoving_unit
    } else {
        row.unit
    };
    (!unit.is_empty()).then_some(unit)
}

/// A dimension that has a name.
struct Known {
    dimension: Dimension,
    /// Its name with an article.
    words: &'static str,
    /// The exponent of the lengths in it that expand with the universe: −3 in
    /// a luminosity density, although its length exponent is −1. A quantity is
    /// plainly comoving when its comoving exponent is this.
    lengths: i32,
    /// The usual unit, or `""`.
    unit: &'static str,
    /// The usual unit when comoving, or `""` where the plain one serves.
    comoving_unit: &'static str,
}

const fn known_as(dimension: Dimension, words: &'static str, unit: &'static str) -> Known {
    Known {
        dimension,
        words,
        lengths: *dimension.exponent(Generator::Length).numer(),
        unit,
        comoving_unit: "",
    }
}

impl Known {
    const fn expanding(mut self, lengths: i32, comoving_unit: &'static str) -> Known {
        self.lengths = lengths;
        self.comoving_unit = comoving_unit;
        self
    }
}

const GRAVITATION: Dimension = VOLUME.per(MASS).per(TIME).per(TIME);
const VOLTAGE: Dimension = POWER.per(CURRENT);
const LENGTH_RATE: Dimension = RATE.per(LENGTH);

/// The dimensions with a name. Where one stands twice, the earlier is proper
/// and the later is what it is called with the comoving exponent `lengths`.
static KNOWN: &[Known] = &[
    known_as(NUMBER, "a number", "1"),
    known_as(LENGTH, "a length", "Mpc").expanding(1, "cMpc"),
    known_as(MASS, "a mass", "Msun"),
    known_as(TIME, "a time", "Gyr").expanding(1, ""),
    known_as(TEMPERATURE, "a temperature", "K"),
    known_as(ANGLE, "an angle", "rad"),
    known_as(SOLID_ANGLE, "a solid angle", "sr"),
    known_as(MAGNITUDE, "a magnitude", "mag"),
    known_as(AREA, "an area", "Mpc^2").expanding(2, "cMpc^2"),
    known_as(VOLUME, "a volume", "Mpc^3").expanding(3, "cMpc^3"),
    known_as(SPEED, "a speed", "km/s"),
    known_as(SPEED.times(SPEED), "a speed squared", "km^2/s^2"),
    known_as(ACCELERATION, "an acceleration", "m/s^2"),
    known_as(RATE, "a rate", "1/s"),
    known_as(RATE.times(RATE), "a rate squared", "1/s^2"),
    known_as(TIME.times(TIME), "a time squared", ""),
    known_as(WAVE_NUMBER, "a wave number", "1/Mpc").expanding(-1, "1/cMpc"),
    // Proper number densities are mostly those of gas, comoving ones those of
    // galaxies and halos.
    known_as(NUMBER_DENSITY, "a number density", "1/cm^3").expanding(-3, "1/cMpc^3"),
    known_as(NUMBER.per(AREA), "a column density", "1/cm^2").expanding(-2, "1/cMpc^2"),
    known_as(DENSITY, "a density", "g/cm^3").expanding(-3, "Msun/cMpc^3"),
    known_as(SURFACE_DENSITY, "a surface density", "Msun/pc^2").expanding(-2, "Msun/cpc^2"),
    known_as(MASS.per(LENGTH), "a mass per length", "Msun/pc").expanding(-1, "Msun/cMpc"),
    known_as(MASS.per(TIME), "a mass per time", "Msun/yr"),
    known_as(DENSITY.per(TIME), "a mass per time and volume", "Msun/yr/Mpc^3")
        .expanding(-3, "Msun/yr/cMpc^3"),
    known_as(
        SURFACE_DENSITY.per(TIME),
        "a mass per time and area",
        "Msun/yr/kpc^2",
    )
    .expanding(-2, "Msun/yr/ckpc^2"),
    known_as(NUMBER.per(MASS), "an inverse mass", "1/Msun"),
    known_as(
        NUMBER_DENSITY.per(MASS),
        "a number density per mass",
        "1/Msun/Mpc^3",
    )
    .expanding(-3, "1/Msun/cMpc^3"),
    known_as(NUMBER_DENSITY.per(TIME), "a rate per volume", "1/yr/Mpc^3").expanding(-3, "1/yr/cMpc^3"),
    known_as(NUMBER.per(AREA).per(TIME), "a rate per area", "1/s/cm^2").expanding(-2, ""),
    known_as(
        NUMBER_DENSITY.per(MAGNITUDE),
        "a number density per magnitude",
        "1/mag/Mpc^3",
    )
    .expanding(-3, "1/mag/cMpc^3"),
    known_as(ENERGY, "an energy", "erg").expanding(0, ""),
    known_as(POWER, "a luminosity", "erg/s").expanding(0, ""),
    known_as(
        POWER_PER_WAVELENGTH,
        "a luminosity per unit wavelength",
        "erg/s/Angstrom",
    )
    .expanding(0, ""),
    known_as(FLUX, "a flux", "erg/s/cm^2").expanding(-2, ""),
    known_as(FLUX_PER_FREQUENCY, "a flux density", "Jy").expanding(-2, ""),
    known_as(
        FLUX_PER_WAVELENGTH,
        "a flux per unit wavelength",
        "erg/s/cm^2/Angstrom",
    ),
    known_as(POWER.per(VOLUME), "a luminosity density", "erg/s/Mpc^3").expanding(-3, "erg/s/cMpc^3"),
    known_as(
        FLUX.per(SOLID_ANGLE),
        "a surface brightness",
        "erg/s/cm^2/arcsec^2",
    )
    .expanding(-2, ""),
    known_as(
        FLUX_PER_FREQUENCY.per(SOLID_ANGLE),
        "a specific intensity",
        "Jy/sr",
    )
    .expanding(-2, ""),
    known_as(
        FLUX_PER_FREQUENCY.per(ANGLE),
        "a flux density per angle",
        "Jy/arcsec",
    )
    .expanding(-2, ""),
    known_as(
        FLUX_PER_WAVELENGTH.per(SOLID_ANGLE),
        "an intensity per unit wavelength",
        "",
    ),
    known_as(PRESSURE, "an energy density", "erg/cm^3").expanding(-3, "erg/cMpc^3"),
    known_as(FORCE, "a force", "N").expanding(0, ""),
    known_as(MASS.times(SPEED), "a momentum", "kg m/s").expanding(0, ""),
    known_as(ENERGY.times(TIME), "an action", "J s").expanding(0, ""),
    known_as(ENERGY.per(TEMPERATURE), "an energy per temperature", "erg/K").expanding(0, ""),
    known_as(AREA.per(MASS), "an opacity", "cm^2/g"),
    known_as(MASS.per(POWER), "a mass per luminosity", "Msun/Lsun").expanding(0, ""),
    known_as(POWER.per(MASS), "a luminosity per mass", "Lsun/Msun").expanding(0, ""),
    known_as(GRAVITATION, "a constant of gravitation", "m^3/kg/s^2"),
    known_as(GRAVITATION.times(MASS), "a mass times G", "km^3/s^2"),
    known_as(VOLUME.per(TIME), "a volume per time", "Mpc^3/yr").expanding(3, "cMpc^3/yr"),
    known_as(AREA.per(TIME), "an area per time", ""),
    known_as(LENGTH_RATE, "a rate per length", "1/s/Mpc"),
    known_as(LENGTH.times(ANGLE), "a length times an angle", "Mpc rad").expanding(1, "cMpc rad"),
    known_as(LENGTH.per(ANGLE), "a length per angle", "kpc/arcsec").expanding(1, "ckpc/arcsec"),
    known_as(AREA.per(SOLID_ANGLE), "an area per solid angle", "kpc^2/arcsec^2")
        .expanding(2, "ckpc^2/arcsec^2"),
    known_as(VOLUME.per(SOLID_ANGLE), "a volume per solid angle", "Mpc^3/sr").expanding(3, "cMpc^3/sr"),
    known_as(ANGLE.per(LENGTH), "an angle per length", "arcsec/kpc").expanding(-1, "arcsec/ckpc"),
    known_as(ANGLE.per(TIME), "an angular speed", "mas/yr"),
    known_as(NUMBER.per(ANGLE), "an inverse angle", "1/rad"),
    known_as(NUMBER.per(SOLID_ANGLE), "a number per solid angle", "1/sr"),
    known_as(RATE.per(SOLID_ANGLE), "a rate per solid angle", "1/yr/sr"),
    known_as(MAGNITUDE.per(TIME), "a magnitude per time", "mag/d"),
    known_as(MAGNITUDE.per(LENGTH), "a magnitude per length", "mag/kpc"),
    known_as(CURRENT, "an electric current", "A"),
    known_as(CHARGE, "an electric charge", "C"),
    known_as(VOLTAGE, "a voltage", "V").expanding(0, ""),
    known_as(MAGNETIC_FLUX_DENSITY, "a magnetic field", "G"),
    known_as(crate::dimension::AMOUNT, "an amount of substance", "mol"),
    known_as(crate::dimension::LUMINOUS_INTENSITY, "a luminous intensity", "cd"),
];

/// The usual units of quantities that carry h.
static WITH_LITTLE_H: &[(Dimension, &str)] = &[
    (per_h(LENGTH, 1), "Mpc/h"),
    (per_h(LENGTH.comoving(), 1), "cMpc/h"),
    (per_h(AREA, 2), "Mpc^2/h^2"),
    (per_h(AREA.comoving(), 2), "cMpc^2/h^2"),
    (per_h(VOLUME, 3), "Mpc^3/h^3"),
    (per_h(VOLUME.comoving(), 3), "cMpc^3/h^3"),
    (per_h(MASS, 1), "Msun/h"),
    (per_h(POWER, 2), "Lsun/h^2"),
    (per_h(WAVE_NUMBER, -1), "h/Mpc"),
    (per_h(WAVE_NUMBER.comoving(), -1), "h/cMpc"),
    (per_h(NUMBER_DENSITY, -3), "h^3/Mpc^3"),
    (per_h(NUMBER_DENSITY.comoving(), -3), "h^3/cMpc^3"),
    (per_h(DENSITY, -2), "h^2 Msun/Mpc^3"),
    (per_h(DENSITY.comoving(), -2), "h^2 Msun/cMpc^3"),
    (per_h(SURFACE_DENSITY, -1), "h Msun/pc^2"),
    (per_h(SURFACE_DENSITY.comoving(), -1), "h Msun/cpc^2"),
];

const fn per_h(dimension: Dimension, power: i32) -> Dimension {
    dimension.with(Generator::LittleH, -power)
}

/// The row of a dimension without frame: the one whose comoving exponent this
/// is, else the first.
fn known(bare: &Dimension, comoving: Exponent) -> Option<&'static Known> {
    let mut rows = KNOWN.iter().filter(|row| row.dimension == *bare);
    let first = rows.next()?;
    if !is_some(comoving) || comoving == Ratio::from(first.lengths) {
        return Some(first);
    }
    let called_so = rows.find(|row| comoving == Ratio::from(row.lengths));
    Some(called_so.unwrap_or(first))
}

fn without_frame(dimension: &Dimension) -> Dimension {
    dimension.with(Generator::Comoving, 0).with(Generator::LittleH, 0)
}

fn is_some(exponent: Exponent) -> bool {
    *exponent.numer() != 0
}

/// ` per h`, ` times h^2`, or nothing.
fn little_h(exponent: Exponent) -> String {
    let power = power("h", magnitude(exponent));
    match exponent.numer() {
        0 => String::new(),
        1.. => format!(" times {power}"),
        _ => format!(" per {power}"),
    }
}

/// ` (comoving)` where every length in it is; what is mixed is said as it is.
fn frame(bare: &Dimension, comoving: Exponent) -> String {
    if !is_some(comoving) {
        return String::new();
    }
    let lengths = known(bare, comoving).map_or_else(
        || bare.exponent(Generator::Length),
        |row| Ratio::from(row.lengths),
    );
    let proper = lengths - comoving;
    if !is_some(proper) {
        return " (comoving)".into();
    }
    let (over, under): (Vec<_>, Vec<_>) = [("comoving", comoving), ("proper", proper)]
        .into_iter()
        .partition(|(_, exponent)| *exponent.numer() > 0);
    format!(" ({})", quotient(&over, &under, " times ", " over "))
}

/// A dimension as a product of base units and little h, `""` for a number.
#[must_use]
pub fn in_base_units(dimension: &Dimension) -> String {
    let h = dimension.exponent(Generator::LittleH);
    let bare = without_frame(dimension);
    let units = if bare.is_number() {
        String::new()
    } else {
        base_units(&bare)
    };
    match (units.is_empty(), is_some(h)) {
        (_, false) => units,
        (true, true) => signed_power("h", h),
        (false, true) => format!("{units} {}", signed_power("h", h)),
    }
}

fn signed_power(word: &str, exponent: Exponent) -> String {
    match (exponent.numer(), exponent.denom()) {
        (1, 1) => word.to_owned(),
        (numerator, 1) => format!("{word}^{numerator}"),
        (numerator, denominator) => format!("{word}^({numerator}/{denominator})"),
    }
}

/// The product of base units: `kg m^2/s^3`.
fn base_units(bare: &Dimension) -> String {
    let units = BASE_UNITS.map(|(generator, unit)| (unit, bare.exponent(generator)));
    let (over, under): (Vec<_>, Vec<_>) = units
        .into_iter()
        .filter(|(_, exponent)| is_some(*exponent))
        .partition(|(_, exponent)| *exponent.numer() > 0);
    quotient(&over, &under, " ", "/")
}

const BASE_UNITS: [(Generator, &str); 9] = [
    (Generator::Mass, "kg"),
    (Generator::Length, "m"),
    (Generator::Time, "s"),
    (Generator::Current, "A"),
    (Generator::Temperature, "K"),
    (Generator::Amount, "mol"),
    (Generator::LuminousIntensity, "cd"),
    (Generator::Angle, "rad"),
    (Generator::Magnitude, "mag"),
];

fn quotient(over: &[(&str, Exponent)], under: &[(&str, Exponent)], times: &str, per: &str) -> String {
    let factors = |list: &[(&str, Exponent)]| -> Vec<String> {
        list.iter()
            .map(|(word, exponent)| power(word, magnitude(*exponent)))
            .collect()
    };
    let mut text = match over {
        [] => "1".to_owned(),
        _ => factors(over).join(times),
    };
    for factor in factors(under) {
        text.push_str(per);
        text.push_str(&factor);
    }
    text
}

fn magnitude(exponent: Exponent) -> Exponent {
    Ratio::new(exponent.numer().saturating_abs(), *exponent.denom())
}

/// `m`, `m^2`, `m^(1/2)`.
fn power(word: &str, exponent: Exponent) -> String {
    match (exponent.numer(), exponent.denom()) {
        (1, 1) => word.to_owned(),
        (numerator, 1) => format!("{word}^{numerator}"),
        (numerator, denominator) => format!("{word}^({numerator}/{denominator})"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units;

    #[test]
    fn plain_dimensions_bear_the_words_of_the_field() {
        let cases = [
            (NUMBER, "a number"),
            (LENGTH, "a length"),
            (SPEED, "a speed"),
            (SOLID_ANGLE, "a solid angle"),
            (MAGNITUDE, "a magnitude"),
            (RATE, "a rate"),
            (POWER, "a luminosity"),
            (FLUX_PER_FREQUENCY, "a flux density"),
            (FLUX_PER_WAVELENGTH, "a flux per unit wavelength"),
            (LENGTH.per(ANGLE), "a length per angle"),
        ];
        for (dimension, words) in cases {
            assert_eq!(name(&dimension), words);
        }
    }

    #[test]
    fn frames_and_powers_of_h_are_said_apart() {
        assert_eq!(name(&LENGTH.comoving()), "a length (comoving)");
        assert_eq!(name(&per_h(MASS, 1)), "a mass per h");
        assert_eq!(name(&per_h(LENGTH.comoving(), 1)), "a length per h (comoving)");
        assert_eq!(
            name(&per_h(WAVE_NUMBER.comoving(), -1)),
            "a wave number times h (comoving)"
        );
        assert_eq!(name(&per_h(DENSITY, -2)), "a density times h^2");
        let density = POWER.per(VOLUME).with(Generator::Comoving, -3);
        assert_eq!(name(&density), "a luminosity density (comoving)");
    }

    #[test]
    fn a_mixed_frame_says_what_is_mixed() {
        assert_eq!(
            name(&AREA.with(Generator::Comoving, 1)),
            "an area (comoving times proper)"
        );
        assert_eq!(
            name(&NUMBER.with(Generator::Comoving, 1)),
            "a number (comoving over proper)"
        );
        assert_eq!(
            name(&NUMBER.with(Generator::Comoving, -1)),
            "a number (proper over comoving)"
        );
        assert_eq!(
            name(&MASS.with(Generator::Comoving, 2)),
            "a mass (comoving^2 over proper^2)"
        );
    }

    #[test]
    fn unnamed_dimensions_are_spelt_in_base_units() {
        let odd = MASS.times(VOLUME).times(AREA).per(TIME).per(TIME).per(TIME);
        assert_eq!(name(&odd), "a quantity in kg m^5/s^3");
        let inverse = NUMBER.per(TEMPERATURE).per(TIME).per(TIME);
        assert_eq!(name(&inverse), "a quantity in 1/s^2/K");
    }

    #[test]
    fn every_usual_unit_has_the_dimension_it_is_listed_for() {
        for row in KNOWN {
            assert_dimension(row.unit, row.dimension);
            let comoving = row.dimension.with(Generator::Comoving, row.lengths);
            assert_dimension(row.comoving_unit, comoving);
        }
        for (dimension, unit) in WITH_LITTLE_H {
            assert_dimension(unit, *dimension);
        }
    }

    #[test]
    fn names_with_an_article_and_no_dimension_twice_in_a_frame() {
        for (place, row) in KNOWN.iter().enumerate() {
            assert!(
                row.words.starts_with("a ") || row.words.starts_with("an "),
                "{}",
                row.words
            );
            let again = KNOWN[..place]
                .iter()
                .any(|other| other.dimension == row.dimension && other.lengths == row.lengths);
            assert!(!again, "{} stands there twice", row.words);
        }
    }

    #[test]
    fn bare_values_are_shown_in_the_units_of_the_field() {
        assert_eq!(usual_unit(&LENGTH), Some("Mpc"));
        assert_eq!(usual_unit(&LENGTH.comoving()), Some("cMpc"));
        assert_eq!(usual_unit(&per_h(MASS, 1)), Some("Msun/h"));
        assert_eq!(usual_unit(&TIME), Some("Gyr"));
        assert_eq!(usual_unit(&TIME.with(Generator::Comoving, 1)), Some("Gyr"));
        assert_eq!(usual_unit(&AREA.with(Generator::Comoving, 1)), Some("Mpc^2"));
        assert_eq!(usual_unit(&per_h(TIME, 1)), None);
    }

    /// Reads `Msun/yr/Mpc^3` with the catalogue of units alone.
    fn assert_dimension(unit: &str, expected: Dimension) {
        if unit.is_empty() || unit == "1" {
            return;
        }
        let mut found = NUMBER;
        for (place, group) in unit.split('/').enumerate() {
            for factor in group.split(' ').filter(|factor| *factor != "1") {
                let (symbol, power) = factor.split_once('^').unwrap_or((factor, "1"));
                let power: i32 = power.parse().expect("a whole power");
                let one = units::find(symbol)
                    .expect("a unit of the catalogue")
                    .unit
                    .dimension;
                for _ in 0..power {
                    found = if place == 0 {
                        found.times(one)
                    } else {
                        found.per(one)
                    };
                }
            }
        }
        assert_eq!(found, expected, "{unit}");
    }
}
