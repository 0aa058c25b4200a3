//! The numbers behind the constants, in SI, as plain `f64`.
//!
//! Exact ones are exact by definition (SI 2019, IAU resolutions) and are
//! rounded once to the nearest double; the measured ones are CODATA 2022
//! (Mohr, Newell, Taylor & Tiesinga 2025), each with its standard uncertainty
//! in a `…_UNCERTAINTY` beside it.

/// Speed of light in vacuum, m/s. Exact: SI 2019.
pub const SPEED_OF_LIGHT: f64 = 299_792_458.0;
/// Planck constant h, J s. Exact: SI 2019.
pub const PLANCK: f64 = 6.626_070_15e-34;
/// Reduced Planck constant h/(2π), J s. Exact, rounded once.
pub const REDUCED_PLANCK: f64 = 1.054_571_817_646_156_5e-34;
/// Boltzmann constant, J/K. Exact: SI 2019.
pub const BOLTZMANN: f64 = 1.380_649e-23;
/// Elementary charge, C. Exact: SI 2019.
pub const ELEMENTARY_CHARGE: f64 = 1.602_176_634e-19;
/// Avogadro constant, 1/mol. Exact: SI 2019.
pub const AVOGADRO: f64 = 6.022_140_76e23;
/// Molar gas constant N_A k_B, J/mol/K. Exact: the product of two exact numbers.
pub const MOLAR_GAS: f64 = 8.314_462_618_153_24;
/// Stefan–Boltzmann constant 2π⁵k⁴/(15h³c²), W/m²/K⁴. Exact, rounded once.
pub const STEFAN_BOLTZMANN: f64 = 5.670_374_419_184_429e-8;
/// Radiation constant 4σ/c, J/m³/K⁴. Exact, rounded once.
pub const RADIATION_DENSITY: f64 = 7.565_733_250_280_005e-16;

/// Newtonian constant of gravitation, m³/kg/s². CODATA 2022.
pub const GRAVITATION: f64 = 6.674_30e-11;
/// Standard uncertainty of [`GRAVITATION`].
pub const GRAVITATION_UNCERTAINTY: f64 = 0.000_15e-11;
/// Fine-structure constant. CODATA 2022.
pub const FINE_STRUCTURE: f64 = 7.297_352_564_3e-3;
/// Standard uncertainty of [`FINE_STRUCTURE`].
pub const FINE_STRUCTURE_UNCERTAINTY: f64 = 1.1e-12;
/// Rydberg constant R∞, 1/m. CODATA 2022.
pub const RYDBERG: f64 = 10_973_731.568_157;
/// Standard uncertainty of [`RYDBERG`].
pub const RYDBERG_UNCERTAINTY: f64 = 0.000_012;
/// Rydberg energy h c R∞, J. CODATA 2022.
pub const RYDBERG_ENERGY: f64 = 2.179_872_361_103_0e-18;
/// Standard uncertainty of [`RYDBERG_ENERGY`].
pub const RYDBERG_ENERGY_UNCERTAINTY: f64 = 2.4e-30;
/// Bohr radius, m. CODATA 2022.
pub const BOHR_RADIUS: f64 = 5.291_772_105_44e-11;
/// Standard uncertainty of [`BOHR_RADIUS`].
pub const BOHR_RADIUS_UNCERTAINTY: f64 = 8.2e-21;
/// Electron mass, kg. CODATA 2022.
pub const ELECTRON_MASS: f64 = 9.109_383_713_9e-31;
/// Standard uncertainty of [`ELECTRON_MASS`].
pub const ELECTRON_MASS_UNCERTAINTY: f64 = 2.8e-40;
/// Proton mass, kg. CODATA 2022.
pub const PROTON_MASS: f64 = 1.672_621_925_95e-27;
/// Standard uncertainty of [`PROTON_MASS`].
pub const PROTON_MASS_UNCERTAINTY: f64 = 5.2e-37;
/// Neutron mass, kg. CODATA 2022.
pub const NEUTRON_MASS: f64 = 1.674_927_500_56e-27;
/// Standard uncertainty of [`NEUTRON_MASS`].
pub const NEUTRON_MASS_UNCERTAINTY: f64 = 8.5e-37;
/// Atomic mass constant, kg. CODATA 2022.
pub const ATOMIC_MASS: f64 = 1.660_539_068_92e-27;
/// Standard uncertainty of [`ATOMIC_MASS`].
pub const ATOMIC_MASS_UNCERTAINTY: f64 = 5.2e-37;
/// Vacuum electric permittivity, F/m. CODATA 2022.
pub const VACUUM_PERMITTIVITY: f64 = 8.854_187_818_8e-12;
/// Standard uncertainty of [`VACUUM_PERMITTIVITY`].
pub const VACUUM_PERMITTIVITY_UNCERTAINTY: f64 = 1.4e-21;
/// Vacuum magnetic permeability, N/A². CODATA 2022.
pub const VACUUM_PERMEABILITY: f64 = 1.256_637_061_27e-6;
/// Standard uncertainty of [`VACUUM_PERMEABILITY`].
pub const VACUUM_PERMEABILITY_UNCERTAINTY: f64 = 2.0e-16;
/// Thomson cross section, m². CODATA 2022.
pub const THOMSON_CROSS_SECTION: f64 = 6.652_458_705_1e-29;
/// Standard uncertainty of [`THOMSON_CROSS_SECTION`].
pub const THOMSON_CROSS_SECTION_UNCERTAINTY: f64 = 6.2e-38;
/// Bohr magneton, J/T. CODATA 2022.
pub const BOHR_MAGNETON: f64 = 9.274_010_065_7e-24;
/// Standard uncertainty of [`BOHR_MAGNETON`].
pub const BOHR_MAGNETON_UNCERTAINTY: f64 = 2.9e-33;

/// Mass of a hydrogen atom, 1.007825031898 atomic mass constants, kg. Wang et
/// al. 2021, Chinese Phys. C 45, 030003 (from memory).
pub const HYDROGEN_MASS: f64 = 1.673_532_840_102_174e-27;
/// Standard uncertainty of [`HYDROGEN_MASS`], that of the atomic mass constant.
pub const HYDROGEN_MASS_UNCERTAINTY: f64 = 5.2e-37;
/// Wien displacement constant for wavelength, m K. Exact, rounded once.
pub const WIEN_WAVELENGTH: f64 = 2.897_771_955_185_172_7e-3;
/// Wien displacement constant for frequency, Hz/K. Exact, rounded once.
pub const WIEN_FREQUENCY: f64 = 58_789_257_576.468_25;
/// Planck length √(ħG/c³), m.
pub const PLANCK_LENGTH: f64 = 1.616_255_024_423_705_3e-35;
/// Standard uncertainty of [`PLANCK_LENGTH`], half that of G.
pub const PLANCK_LENGTH_UNCERTAINTY: f64 = 1.8e-40;
/// Planck mass √(ħc/G), kg.
pub const PLANCK_MASS: f64 = 2.176_434_342_717_898_2e-8;
/// Standard uncertainty of [`PLANCK_MASS`], half that of G.
pub const PLANCK_MASS_UNCERTAINTY: f64 = 2.4e-13;
/// Planck time √(ħG/c⁵), s.
pub const PLANCK_TIME: f64 = 5.391_246_448_313_604e-44;
/// Standard uncertainty of [`PLANCK_TIME`], half that of G.
pub const PLANCK_TIME_UNCERTAINTY: f64 = 6.0e-49;
/// Planck temperature √(ħc⁵/G)/k, K.
pub const PLANCK_TEMPERATURE: f64 = 1.416_784_162_157_342_5e32;
/// Standard uncertainty of [`PLANCK_TEMPERATURE`], half that of G.
pub const PLANCK_TEMPERATURE_UNCERTAINTY: f64 = 1.6e27;

/// Astronomical unit, m. Exact: IAU 2012 Resolution B2.
pub const ASTRONOMICAL_UNIT: f64 = 149_597_870_700.0;
/// Parsec, 648000/π au, m. Exact, rounded once: IAU 2015 Resolution B2, note 4.
pub const PARSEC: f64 = 3.085_677_581_491_367e16;
/// Kiloparsec, m, rounded once.
pub const KILOPARSEC: f64 = 3.085_677_581_491_367e19;
/// Megaparsec, m, rounded once.
pub const MEGAPARSEC: f64 = 3.085_677_581_491_367e22;
/// Gigaparsec, m, rounded once.
pub const GIGAPARSEC: f64 = 3.085_677_581_491_367_3e25;
/// Day of 86 400 s.
pub const DAY: f64 = 86_400.0;
/// Julian year of 365.25 days, s. Exact: IAU Style Manual (1989), table 5.
pub const JULIAN_YEAR: f64 = 31_557_600.0;
/// Billion Julian years, s.
pub const GIGAYEAR: f64 = 3.155_76e16;
/// Light-year, c × one Julian year, m. Exact.
pub const LIGHT_YEAR: f64 = 9_460_730_472_580_800.0;
/// 1 km/s/Mpc in 1/s, rounded once.
pub const KM_PER_S_PER_MPC: f64 = 3.240_779_289_444_365e-20;

/// Nominal solar mass parameter, m³/s². IAU 2015 Resolution B3.
pub const SOLAR_MASS_PARAMETER: f64 = 1.327_124_4e20;
/// Nominal terrestrial mass parameter, m³/s². IAU 2015 Resolution B3.
pub const EARTH_MASS_PARAMETER: f64 = 3.986_004e14;
/// Nominal jovian mass parameter, m³/s². IAU 2015 Resolution B3.
pub const JUPITER_MASS_PARAMETER: f64 = 1.266_865_3e17;
/// Solar mass, the nominal parameter over G of CODATA 2022, kg.
pub const SOLAR_MASS: f64 = 1.988_409_870_698_050_7e30;
/// Standard uncertainty of [`SOLAR_MASS`], all of it from G.
pub const SOLAR_MASS_UNCERTAINTY: f64 = 4.4688e25;
/// Mass of the Earth, the nominal parameter over G of CODATA 2022, kg.
pub const EARTH_MASS: f64 = 5.972_167_867_791_379e24;
/// Standard uncertainty of [`EARTH_MASS`], all of it from G.
pub const EARTH_MASS_UNCERTAINTY: f64 = 1.3422e20;
/// Mass of Jupiter, the nominal parameter over G of CODATA 2022, kg.
pub const JUPITER_MASS: f64 = 1.898_124_597_336_050_2e27;
/// Standard uncertainty of [`JUPITER_MASS`], all of it from G.
pub const JUPITER_MASS_UNCERTAINTY: f64 = 4.2659e22;
/// Nominal solar radius, m. IAU 2015 Resolution B3.
pub const SOLAR_RADIUS: f64 = 6.957e8;
/// Nominal terrestrial equatorial radius, m. IAU 2015 Resolution B3.
pub const EARTH_RADIUS: f64 = 6.3781e6;
/// Nominal jovian equatorial radius, m. IAU 2015 Resolution B3.
pub const JUPITER_RADIUS: f64 = 7.1492e7;
/// Nominal solar luminosity, W. IAU 2015 Resolution B3.
pub const SOLAR_LUMINOSITY: f64 = 3.828e26;
/// Nominal total solar irradiance, W/m². IAU 2015 Resolution B3.
pub const SOLAR_IRRADIANCE: f64 = 1361.0;
/// Nominal solar effective temperature, K. IAU 2015 Resolution B3.
pub const SOLAR_TEMPERATURE: f64 = 5772.0;
/// Luminosity of absolute bolometric magnitude 0, W. IAU 2015 Resolution B2.
pub const ZERO_POINT_LUMINOSITY: f64 = 3.0128e28;
/// Irradiance of apparent bolometric magnitude 0, L0/(4π (10 pc)²), W/m².
/// IAU 2015 Resolution B2, which quotes 2.518021002e-8.
pub const ZERO_POINT_IRRADIANCE: f64 = 2.518_021_002_633_4e-8;
/// Flux density of AB magnitude 0, 3631 Jy, in W/m²/Hz. Oke & Gunn 1983;
/// the round number of common practice.
pub const AB_ZERO_POINT: f64 = 3.631e-23;

/// Angle of 1°, π/180 rad, rounded once.
pub const DEGREE: f64 = 0.017_453_292_519_943_295;
/// Angle of 1′, rounded once.
pub const ARCMINUTE: f64 = 2.908_882_086_657_216e-4;
/// Angle of 1″, rounded once.
pub const ARCSECOND: f64 = 4.848_136_811_095_36e-6;

/// Frequency of the hyperfine line of neutral hydrogen, Hz. Hellwig et al.
/// 1970, IEEE Trans. Instrum. Meas. 19, 200 (from memory).
pub const HI_FREQUENCY: f64 = 1_420_405_751.768;
/// Standard uncertainty of [`HI_FREQUENCY`] (from memory).
pub const HI_FREQUENCY_UNCERTAINTY: f64 = 0.001;
/// Wavelength of the same line, c/ν, m.
pub const HI_WAVELENGTH: f64 = 0.211_061_140_541_598;
/// Rate of spontaneous emission in the same line, 1/s. Gould 1994, ApJ 423,
/// 522 (from memory).
pub const HI_TRANSITION_RATE: f64 = 2.884_3e-15;
/// Vacuum wavelength of Lyman α, the mean of its doublet, m. NIST (from memory).
pub const LYMAN_ALPHA: f64 = 1.215_67e-7;
/// Vacuum wavelength of the Lyman limit of hydrogen, 911.75 Å, m (from memory).
pub const LYMAN_LIMIT: f64 = 9.1175e-8;
/// Vacuum wavelength of Hα, m: 6564.614 Å, from the air wavelength 6562.801 Å
/// (from memory).
pub const H_ALPHA: f64 = 6.564_614e-7;
/// Vacuum wavelength of Hβ, m: 4862.683 Å (from memory).
pub const H_BETA: f64 = 4.862_683e-7;
/// Vacuum wavelength of \[O III\] 5007, m: 5008.240 Å (from memory).
pub const OIII: f64 = 5.008_240e-7;
/// Vacuum wavelength of \[O II\], the mean of its doublet 3727.092, 3729.875 Å,
/// m (from memory).
pub const OII: f64 = 3.728_483_5e-7;
/// Vacuum wavelength of C IV 1549, the mean of its doublet 1548.204, 1550.781
/// Å, m. Morton 2003, ApJS 149, 205 (from memory).
pub const CIV: f64 = 1.549_492_5e-7;
/// Vacuum wavelength of Mg II 2799, the mean of its doublet 2796.354, 2803.531
/// Å, m. Morton 2003, ApJS 149, 205 (from memory).
pub const MGII: f64 = 2.799_942_5e-7;
/// Frequency of the \[C II\] fine-structure line at 158 μm, Hz. Cooksy, Blake
/// & Saykally 1986, ApJ 305, L89 (from memory).
pub const CII_FREQUENCY: f64 = 1.900_536_9e12;
/// Frequency of the CO(1–0) line, Hz. Winnewisser et al. 1997, J. Mol.
/// Spectrosc. 184, 468 (from memory).
pub const CO_FREQUENCY: f64 = 1.152_712_018e11;
