//! Dimensions: products of rational powers of a fixed set of generators.
//!
//! The seven base dimensions of the SI are here with four more that the field
//! mixes up at its peril: angle, magnitude, the comoving frame and little h.
//! All eleven are rows of one table, and a dimension is a vector over it.
//! Counting units (`tally galaxy`) are generators too, but belong to a sheet,
//! so the checker adds them in its own form of this vector.

use num_rational::Ratio;

/// The exponent of a generator.
pub type Exponent = Ratio<i32>;

/// One independent direction of the group of dimensions.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
#[repr(u8)]
pub enum Generator {
    /// Length, in metres.
    Length,
    /// Mass, in kilograms.
    Mass,
    /// Time, in seconds.
    Time,
    /// Electric current, in amperes.
    Current,
    /// Thermodynamic temperature, in kelvins.
    Temperature,
    /// Amount of substance, in moles.
    Amount,
    /// Luminous intensity, in candelas.
    LuminousIntensity,
    /// Plane angle, in radians; a solid angle is its square.
    Angle,
    /// Astronomical magnitude.
    Magnitude,
    /// The power of (1+z) that turns the quantity into a proper one.
    Comoving,
    /// The power of h = H0/(100 km/s/Mpc) the quantity is quoted in.
    LittleH,
}

/// How many generators there are.
pub const GENERATORS: usize = 11;

/// All generators, in the order of their place in a [`Dimension`].
pub const ALL: [Generator; GENERATORS] = [
    Generator::Length,
    Generator::Mass,
    Generator::Time,
    Generator::Current,
    Generator::Temperature,
    Generator::Amount,
    Generator::LuminousIntensity,
    Generator::Angle,
    Generator::Magnitude,
    Generator::Comoving,
    Generator::LittleH,
];

/// A dimension and frame: one exponent for each generator.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Dimension {
    exponents: [Exponent; GENERATORS],
}

const ZERO: Exponent = Ratio::new_raw(0, 1);

/// A plain number.
pub const NUMBER: Dimension = Dimension {
    exponents: [ZERO; GENERATORS],
};
/// Length (m).
pub const LENGTH: Dimension = NUMBER.with(Generator::Length, 1);
/// Mass (kg).
pub const MASS: Dimension = NUMBER.with(Generator::Mass, 1);
/// Time (s).
pub const TIME: Dimension = NUMBER.with(Generator::Time, 1);
/// Electric current (A).
pub const CURRENT: Dimension = NUMBER.with(Generator::Current, 1);
/// Temperature (K).
pub const TEMPERATURE: Dimension = NUMBER.with(Generator::Temperature, 1);
/// Amount of substance (mol).
pub const AMOUNT: Dimension = NUMBER.with(Generator::Amount, 1);
/// Luminous intensity (cd).
pub const LUMINOUS_INTENSITY: Dimension = NUMBER.with(Generator::LuminousIntensity, 1);
/// Plane angle (rad).
pub const ANGLE: Dimension = NUMBER.with(Generator::Angle, 1);
/// Solid angle (sr).
pub const SOLID_ANGLE: Dimension = NUMBER.with(Generator::Angle, 2);
/// Magnitude (mag).
pub const MAGNITUDE: Dimension = NUMBER.with(Generator::Magnitude, 1);
/// Area (m²).
pub const AREA: Dimension = NUMBER.with(Generator::Length, 2);
/// Volume (m³).
pub const VOLUME: Dimension = NUMBER.with(Generator::Length, 3);
/// Speed (m/s).
pub const SPEED: Dimension = LENGTH.with(Generator::Time, -1);
/// Acceleration (m/s²).
pub const ACCELERATION: Dimension = LENGTH.with(Generator::Time, -2);
/// Rate or frequency (1/s).
pub const RATE: Dimension = NUMBER.with(Generator::Time, -1);
/// Force (N).
pub const FORCE: Dimension = MASS.times(ACCELERATION);
/// Pressure (Pa).
pub const PRESSURE: Dimension = FORCE.per(AREA);
/// Energy (J).
pub const ENERGY: Dimension = FORCE.times(LENGTH);
/// Power or luminosity (W).
pub const POWER: Dimension = ENERGY.per(TIME);
/// Mass density (kg/m³).
pub const DENSITY: Dimension = MASS.per(VOLUME);
/// Number density (1/m³).
pub const NUMBER_DENSITY: Dimension = NUMBER.per(VOLUME);
/// Wave number (1/m).
pub const WAVE_NUMBER: Dimension = NUMBER.per(LENGTH);
/// Surface density (kg/m²).
pub const SURFACE_DENSITY: Dimension = MASS.per(AREA);
/// Flux (W/m²).
pub const FLUX: Dimension = POWER.per(AREA);
/// Flux per unit frequency (W/m²/Hz).
pub const FLUX_PER_FREQUENCY: Dimension = FLUX.per(RATE);
/// Flux per unit wavelength (W/m³).
pub const FLUX_PER_WAVELENGTH: Dimension = FLUX.per(LENGTH);
/// Luminosity per unit frequency (W/Hz).
pub const POWER_PER_FREQUENCY: Dimension = POWER.per(RATE);
/// Luminosity per unit wavelength (W/m).
pub const POWER_PER_WAVELENGTH: Dimension = POWER.per(LENGTH);
/// Electric charge (C).
pub const CHARGE: Dimension = CURRENT.times(TIME);
/// Magnetic flux density (T).
pub const MAGNETIC_FLUX_DENSITY: Dimension = MASS.per(CURRENT).per(TIME).per(TIME);

impl Dimension {
    /// This dimension with `generator` raised to the whole power `power`.
    #[must_use]
    pub const fn with(mut self, generator: Generator, power: i32) -> Dimension {
        self.exponents[generator as usize] = Ratio::new_raw(power, 1);
        self
    }

    /// This dimension with `generator` raised to `power`.
    #[must_use]
    pub fn raised(mut self, generator: Generator, power: Exponent) -> Dimension {
        self.exponents[generator as usize] = power;
        self
    }

    /// The exponent of `generator`.
    #[must_use]
    pub const fn exponent(&self, generator: Generator) -> Exponent {
        self.exponents[generator as usize]
    }

    /// The product of two dimensions with whole exponents.
    #[must_use]
    pub const fn times(self, other: Dimension) -> Dimension {
        self.combine(other, 1)
    }

    /// The quotient of two dimensions with whole exponents.
    #[must_use]
    pub const fn per(self, other: Dimension) -> Dimension {
        self.combine(other, -1)
    }

    /// A length as measured today along with the expansion: the comoving
    /// exponent is the length exponent.
    #[must_use]
    pub const fn comoving(mut self) -> Dimension {
        self.exponents[Generator::Comoving as usize] = self.exponents[Generator::Length as usize];
        self
    }

    /// Whether this is a plain number.
    #[must_use]
    pub fn is_number(&self) -> bool {
        self.exponents.iter().all(|exponent| *exponent.numer() == 0)
    }

    // Catalogue dimensions are written with whole exponents, so the product
    // can stay a `const fn` that only adds numerators.
    const fn combine(mut self, other: Dimension, sign: i32) -> Dimension {
        let mut place = 0;
        while place < GENERATORS {
            assert!(*self.exponents[place].denom() == 1 && *other.exponents[place].denom() == 1);
            let sum = *self.exponents[place].numer() + sign * *other.exponents[place].numer();
            self.exponents[place] = Ratio::new_raw(sum, 1);
            place += 1;
        }
        self
    }
}
