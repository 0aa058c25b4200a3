//! Constants of astronomy: the nominal values of the IAU for the Sun and the
//! planets, and the zero points of magnitudes.

use super::CONSTANT;
use super::values::*;
use crate::catalogue::{Definition, Entry, Type};
use crate::dimension::{FLUX, FLUX_PER_FREQUENCY, LENGTH, MASS, POWER, TEMPERATURE, TIME, VOLUME};

const B2: &str = "IAU 2015 Resolution B2";
const B3: &str = "IAU 2015 Resolution B3";
const B3_CODATA: &str = "IAU 2015 Resolution B3, table 1; G: CODATA 2022";

pub(super) static ENTRIES: &[Entry] = &[
    Entry {
        name: "solar_mass_parameter",
        symbol: "GM_sun",
        aliases: &["GM_⊙"],
        synonyms: &["Sun", "nominal"],
        about: "Nominal solar mass parameter, G times the mass of the Sun.",
        result: Type::of(VOLUME.per(TIME).per(TIME)),
        usual_unit: "km^3/s^2",
        formula: "1.3271244e20 m³/s² (nominal)",
        source: B3,
        example: "G * M_sun is 1.3271244e20 m^3/s^2",
        definition: Definition::Constant(SOLAR_MASS_PARAMETER, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "solar_mass",
        symbol: "M_sun",
        aliases: &["M_⊙"],
        synonyms: &["Sun"],
        about: "Mass of the Sun.",
        result: Type::of(MASS),
        usual_unit: "kg",
        formula: "M_sun = GM_sun/G",
        source: B3_CODATA,
        example: "M_sun is 1.9884e30 kg",
        definition: Definition::Constant(SOLAR_MASS, SOLAR_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "solar_luminosity",
        symbol: "L_sun",
        aliases: &["L_⊙"],
        synonyms: &["Sun", "nominal"],
        about: "Nominal solar luminosity.",
        result: Type::of(POWER),
        usual_unit: "W",
        formula: "3.828e26 W (nominal)",
        source: B3,
        example: "L_sun is 3.828e33 erg/s",
        definition: Definition::Constant(SOLAR_LUMINOSITY, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "solar_radius",
        symbol: "R_sun",
        aliases: &["R_⊙"],
        synonyms: &["Sun", "nominal"],
        about: "Nominal solar radius.",
        result: Type::of(LENGTH),
        usual_unit: "km",
        formula: "6.957e8 m (nominal)",
        source: B3,
        example: "R_sun is 695700 km",
        definition: Definition::Constant(SOLAR_RADIUS, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "solar_effective_temperature",
        symbol: "T_sun",
        aliases: &["T_⊙"],
        synonyms: &["Sun", "nominal"],
        about: "Nominal effective temperature of the Sun.",
        result: Type::of(TEMPERATURE),
        usual_unit: "K",
        formula: "T_sun = (L_sun/(4π σ_SB R_sun²))^(1/4), rounded (nominal)",
        source: B3,
        example: "(L_sun/(4*pi*σ_SB*R_sun^2))^(1/4) is T_sun within 0.01%",
        definition: Definition::Constant(SOLAR_TEMPERATURE, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "solar_irradiance",
        symbol: "S_sun",
        aliases: &["S_⊙"],
        synonyms: &["solar constant", "nominal"],
        about: "Nominal total solar irradiance at one astronomical unit.",
        result: Type::of(FLUX),
        usual_unit: "W/m^2",
        formula: "S_sun = L_sun/(4π au²), rounded (nominal)",
        source: B3,
        example: "L_sun/(4*pi*(1 au)^2) is S_sun within 0.02%",
        definition: Definition::Constant(SOLAR_IRRADIANCE, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "earth_mass",
        symbol: "M_earth",
        aliases: &["M_⊕"],
        synonyms: &["Earth", "nominal"],
        about: "Mass of the Earth.",
        result: Type::of(MASS),
        usual_unit: "kg",
        formula: "3.986004e14 m³/s² (nominal) over G",
        source: B3_CODATA,
        example: "G * M_earth is 3.986004e14 m^3/s^2",
        definition: Definition::Constant(EARTH_MASS, EARTH_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "earth_radius",
        symbol: "R_earth",
        aliases: &["R_⊕"],
        synonyms: &["Earth", "nominal"],
        about: "Nominal equatorial radius of the Earth.",
        result: Type::of(LENGTH),
        usual_unit: "km",
        formula: "6.3781e6 m (nominal)",
        source: B3,
        example: "R_earth is 6378.1 km",
        definition: Definition::Constant(EARTH_RADIUS, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "jupiter_mass",
        symbol: "M_jup",
        synonyms: &["Jupiter", "nominal"],
        about: "Mass of Jupiter.",
        result: Type::of(MASS),
        usual_unit: "kg",
        formula: "1.2668653e17 m³/s² (nominal) over G",
        source: B3_CODATA,
        example: "G * M_jup is 1.2668653e17 m^3/s^2",
        definition: Definition::Constant(JUPITER_MASS, JUPITER_MASS_UNCERTAINTY),
        ..CONSTANT
    },
    Entry {
        name: "jupiter_radius",
        symbol: "R_jup",
        synonyms: &["Jupiter", "nominal"],
        about: "Nominal equatorial radius of Jupiter.",
        result: Type::of(LENGTH),
        usual_unit: "km",
        formula: "7.1492e7 m (nominal)",
        source: B3,
        example: "R_jup is 71492 km",
        definition: Definition::Constant(JUPITER_RADIUS, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "bolometric_zero_luminosity",
        symbol: "L_0bol",
        synonyms: &["magnitude", "zero point"],
        about: "Luminosity of an object of absolute bolometric magnitude 0.",
        result: Type::of(POWER),
        usual_unit: "W",
        formula: "M_bol = −2.5 log₁₀(L/L₀)",
        source: B2,
        example: "-2.5*log10(L_sun/L_0bol) is 4.74",
        definition: Definition::Constant(ZERO_POINT_LUMINOSITY, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "bolometric_zero_flux",
        symbol: "f_0bol",
        synonyms: &["magnitude", "zero point"],
        about: "Flux of an object of apparent bolometric magnitude 0.",
        result: Type::of(FLUX),
        usual_unit: "W/m^2",
        formula: "f₀ = L₀/(4π (10 pc)²)",
        source: B2,
        example: "f_0bol is 2.518021e-8 W/m^2",
        definition: Definition::Constant(ZERO_POINT_IRRADIANCE, 0.0),
        ..CONSTANT
    },
    Entry {
        name: "ab_zero_flux_density",
        symbol: "f_AB",
        aliases: &["AB_zero"],
        synonyms: &["AB magnitude", "zero point"],
        about: "Flux density of an object of AB magnitude 0, the round number of common practice.",
        result: Type::of(FLUX_PER_FREQUENCY),
        usual_unit: "Jy",
        formula: "m_AB = −2.5 log₁₀(f_ν/3631 Jy)",
        source: "Oke & Gunn 1983, ApJ 266, 713",
        example: "-2.5*log10(f_AB/(1 erg/s/cm^2/Hz)) is 48.60",
        definition: Definition::Constant(AB_ZERO_POINT, 0.0),
        ..CONSTANT
    },
];
