//! Constants of nature and of astronomy.
//!
//! The numbers stand in [`values`]; here each has its name, the field's symbol,
//! what it is and where it comes from.

use crate::catalogue::{Definition, Entry, Topic, Type};
use crate::dimension::NUMBER;

mod astronomy;
mod lines;
mod nature;
pub mod values;

/// The entries of this chapter, in the order of the handbook.
pub static ENTRIES: [&[Entry]; 3] = [nature::ENTRIES, astronomy::ENTRIES, lines::ENTRIES];

/// What all constants have in common.
const CONSTANT: Entry = Entry {
    name: "",
    symbol: "",
    aliases: &[],
    synonyms: &[],
    topic: Topic::Constants,
    about: "",
    arguments: &[],
    result: Type::of(NUMBER),
    open_today: false,
    usual_unit: "",
    formula: "",
    validity: "",
    source: "",
    example: "",
    definition: Definition::Constant(0.0, 0.0),
};

#[cfg(test)]
mod tests {
    use super::values::*;
    use std::f64::consts::PI;

    fn agree(left: f64, right: f64, relative: f64) {
        assert!((left / right - 1.0).abs() <= relative, "{left} is not {right}");
    }

    #[test]
    fn constants_hang_together_as_physics_says() {
        agree(REDUCED_PLANCK, PLANCK / (2.0 * PI), 1e-15);
        agree(RADIATION_DENSITY, 4.0 * STEFAN_BOLTZMANN / SPEED_OF_LIGHT, 1e-15);
        agree(MOLAR_GAS, AVOGADRO * BOLTZMANN, 1e-15);
        agree(
            WIEN_WAVELENGTH * WIEN_FREQUENCY / SPEED_OF_LIGHT,
            2.821_439_372_122_079 / 4.965_114_231_744_276,
            1e-15,
        );
        agree(
            VACUUM_PERMITTIVITY * VACUUM_PERMEABILITY * SPEED_OF_LIGHT.powi(2),
            1.0,
            1e-11,
        );
        // The adjusted values of CODATA 2022 agree to their uncertainties.
        let charge = ELEMENTARY_CHARGE.powi(2) / (4.0 * PI * VACUUM_PERMITTIVITY);
        agree(charge / REDUCED_PLANCK / SPEED_OF_LIGHT, FINE_STRUCTURE, 1e-10);
        let radius = charge / (ELECTRON_MASS * SPEED_OF_LIGHT.powi(2));
        agree(8.0 * PI / 3.0 * radius.powi(2), THOMSON_CROSS_SECTION, 1e-9);
        agree(BOHR_RADIUS * FINE_STRUCTURE.powi(2), radius, 1e-9);
        agree(RYDBERG * PLANCK * SPEED_OF_LIGHT, RYDBERG_ENERGY, 1e-13);
    }

    #[test]
    fn derived_constants_follow_from_their_definition() {
        agree(
            PLANCK_LENGTH * PLANCK_MASS,
            REDUCED_PLANCK / SPEED_OF_LIGHT,
            1e-15,
        );
        agree(PLANCK_LENGTH, SPEED_OF_LIGHT * PLANCK_TIME, 1e-15);
        agree(
            PLANCK_TEMPERATURE * BOLTZMANN,
            PLANCK_MASS * SPEED_OF_LIGHT.powi(2),
            1e-15,
        );
        agree(SOLAR_MASS * GRAVITATION, SOLAR_MASS_PARAMETER, 1e-15);
        agree(HI_FREQUENCY * HI_WAVELENGTH, SPEED_OF_LIGHT, 1e-14);
    }
}
