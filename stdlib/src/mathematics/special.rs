//! Special functions: errors of normally distributed values, the gamma
//! function and its incomplete forms, Bessel functions.

use super::{FUNCTION, NUMBER_TYPE, Result, digits, does_not_exist, representable};
use crate::catalogue::{Definition, Entry, argument};

pub(super) static ENTRIES: &[Entry] = &[
    Entry {
        name: "erf",
        synonyms: &["error function", "Gaussian", "normal distribution"],
        about: "Error function: erf(n/√2) is the probability within n sigma.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "(2/√π) ∫₀ˣ exp(−t²) dt",
        source: "DLMF 7.2; example: GUM (JCGM 100:2008), table G.1",
        example: "erf(1/sqrt(2)) is 68.27%",
        definition: Definition::Function(error_function),
        ..FUNCTION
    },
    Entry {
        name: "erfc",
        synonyms: &["complementary error function", "p value"],
        about: "Complementary error function: erfc(n/√2) is the two-sided probability beyond n sigma.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "1 − erf x, without cancellation",
        source: "DLMF 7.2; example: Particle Data Group, Statistics (from memory)",
        example: "erfc(5/sqrt(2)) is 5.7e-7",
        definition: Definition::Function(complementary_error_function),
        ..FUNCTION
    },
    Entry {
        name: "gamma",
        aliases: &["Γ"],
        synonyms: &["factorial"],
        about: "Gamma function: gamma(n + 1) is n!.",
        arguments: &[argument("x", NUMBER_TYPE, "not 0 or a negative whole number")],
        result: NUMBER_TYPE,
        formula: "∫₀^∞ t^(x−1) e^(−t) dt",
        validity: "x ≠ 0, −1, −2, …",
        source: "DLMF 5.2; example: DLMF 5.4, √π",
        example: "gamma(0.5) is 1.7724538509",
        definition: Definition::Function(gamma_function),
        ..FUNCTION
    },
    Entry {
        name: "lgamma",
        aliases: &["ln_gamma"],
        synonyms: &["factorial", "log gamma"],
        about: "Natural logarithm of the absolute value of the gamma function.",
        arguments: &[argument("x", NUMBER_TYPE, "not 0 or a negative whole number")],
        result: NUMBER_TYPE,
        formula: "ln |Γ(x)|",
        validity: "x ≠ 0, −1, −2, …",
        source: "DLMF 5.2; example: ln 100! of Abramowitz & Stegun 1964, table 6.4 (from memory)",
        example: "lgamma(101) is 363.7393755556",
        definition: Definition::Function(log_gamma_function),
        ..FUNCTION
    },
    Entry {
        name: "bessel_j0",
        symbol: "J_0",
        synonyms: &["Bessel function"],
        about: "Bessel function of the first kind and order 0.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "(1/π) ∫₀^π cos(x sin t) dt",
        source: "DLMF 10.9; example: its first zero, DLMF 10.21 (from memory)",
        example: "J_0(2.4048255577) is between -1e-9 and 1e-9",
        definition: Definition::Function(bessel_0),
        ..FUNCTION
    },
    Entry {
        name: "bessel_j1",
        symbol: "J_1",
        synonyms: &["Bessel function", "Airy disk"],
        about: "Bessel function of the first kind and order 1.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "(1/π) ∫₀^π cos(t − x sin t) dt",
        source: "DLMF 10.9; example: its first zero, 1.21967 π (the Airy disk)",
        example: "J_1(1.2196698913*pi) is between -1e-9 and 1e-9",
        definition: Definition::Function(bessel_1),
        ..FUNCTION
    },
    Entry {
        name: "spherical_j0",
        symbol: "j_0",
        aliases: &["sinc"],
        synonyms: &["spherical Bessel function", "sinc"],
        about: "Spherical Bessel function of order 0, sin(x)/x of a number x.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "sin(x)/x, 1 at x = 0",
        source: "DLMF 10.49",
        example: "j_0(pi/2) is 0.636620",
        definition: Definition::Function(spherical_bessel_0),
        ..FUNCTION
    },
    Entry {
        name: "spherical_j1",
        symbol: "j_1",
        synonyms: &["spherical Bessel function"],
        about: "Spherical Bessel function of order 1.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "sin(x)/x² − cos(x)/x",
        source: "DLMF 10.49",
        example: "j_1(pi) is 0.318310",
        definition: Definition::Function(spherical_bessel_1),
        ..FUNCTION
    },
    Entry {
        name: "spherical_j2",
        symbol: "j_2",
        synonyms: &["spherical Bessel function"],
        about: "Spherical Bessel function of order 2.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "(3/x³ − 1/x) sin(x) − (3/x²) cos(x)",
        source: "DLMF 10.49",
        example: "j_2(pi) is 0.303964",
        definition: Definition::Function(spherical_bessel_2),
        ..FUNCTION
    },
    Entry {
        name: "top_hat_window",
        symbol: "W_TH",
        synonyms: &["top-hat", "filter", "sigma8"],
        about: "Fourier transform of a sphere of constant density, 1 at 0.",
        arguments: &[argument("x", NUMBER_TYPE, "wave number times radius")],
        result: NUMBER_TYPE,
        formula: "3 (sin x − x cos x)/x³",
        source: "Peebles 1980, The Large-Scale Structure of the Universe, sec. 26; closed form at π: 3/π²",
        example: "W_TH(pi) is 0.303964",
        definition: Definition::Function(top_hat_window),
        ..FUNCTION
    },
    Entry {
        name: "gamma_p",
        synonyms: &["incomplete gamma function", "chi-squared"],
        about: "Regularised lower incomplete gamma function: gamma_p(k/2, χ²/2) is the probability of less than χ² for k degrees of freedom.",
        arguments: &[
            argument("a", NUMBER_TYPE, "above 0"),
            argument("x", NUMBER_TYPE, "0 or more"),
        ],
        result: NUMBER_TYPE,
        formula: "(1/Γ(a)) ∫₀ˣ t^(a−1) e^(−t) dt",
        validity: "a > 0, x ≥ 0",
        source: "DLMF 8.2; example: GUM (JCGM 100:2008), table G.1",
        example: "gamma_p(0.5, 0.5) is 68.27%",
        definition: Definition::Function(lower_gamma),
        ..FUNCTION
    },
    Entry {
        name: "gamma_q",
        synonyms: &["incomplete gamma function", "chi-squared", "p value"],
        about: "Regularised upper incomplete gamma function: gamma_q(k/2, χ²/2) is the p value of χ² for k degrees of freedom.",
        arguments: &[
            argument("a", NUMBER_TYPE, "above 0"),
            argument("x", NUMBER_TYPE, "0 or more"),
        ],
        result: NUMBER_TYPE,
        formula: "(1/Γ(a)) ∫ₓ^∞ t^(a−1) e^(−t) dt",
        validity: "a > 0, x ≥ 0",
        source: "DLMF 8.2; example: Abramowitz & Stegun 1964, table 26.8, χ² at 5% for 10 degrees of freedom (from memory)",
        example: "gamma_q(5, 18.307/2) is 0.0500",
        definition: Definition::Function(upper_gamma),
        ..FUNCTION
    },
];

fn error_function(x: &[f64]) -> Result {
    Ok(libm::erf(x[0]))
}

fn complementary_error_function(x: &[f64]) -> Result {
    Ok(libm::erfc(x[0]))
}

fn gamma_function(x: &[f64]) -> Result {
    not_a_pole(x[0])?;
    representable(libm::tgamma(x[0]), "the gamma function", x[0])
}

fn log_gamma_function(x: &[f64]) -> Result {
    not_a_pole(x[0])?;
    representable(libm::lgamma(x[0]), "the logarithm of the gamma function", x[0])
}

fn not_a_pole(x: f64) -> Result {
    if x <= 0.0 && x.floor() == x {
        return does_not_exist(format!(
            "the gamma function has no value at {}: it is infinite at 0 and the negative whole numbers",
            digits(x)
        ));
    }
    Ok(x)
}

fn bessel_0(x: &[f64]) -> Result {
    Ok(libm::j0(x[0]))
}

fn bessel_1(x: &[f64]) -> Result {
    Ok(libm::j1(x[0]))
}

// Below these the closed forms lose digits to cancellation, and the series of
// DLMF 10.53 to three terms is exact to the last digit or two.
const SERIES_BELOW: f64 = 0.02;

fn spherical_bessel_0(x: &[f64]) -> Result {
    let x = x[0];
    if x.abs() < SERIES_BELOW {
        return Ok(spherical_series(x, 0));
    }
    Ok(libm::sin(x) / x)
}

fn spherical_bessel_1(x: &[f64]) -> Result {
    let x = x[0];
    if x.abs() < 0.5 {
        return Ok(x * spherical_series(x, 1));
    }
    Ok((libm::sin(x) / x - libm::cos(x)) / x)
}

fn spherical_bessel_2(x: &[f64]) -> Result {
    let x = x[0];
    if x.abs() < 1.0 {
        return Ok(x * x * spherical_series(x, 2));
    }
    Ok((3.0 * (libm::sin(x) / x - libm::cos(x)) / x - libm::sin(x)) / x)
}

fn top_hat_window(x: &[f64]) -> Result {
    let x = x[0];
    if x.abs() < 0.5 {
        return Ok(3.0 * spherical_series(x, 1));
    }
    Ok(3.0 * (libm::sin(x) / x - libm::cos(x)) / (x * x))
}

/// `j_n(x)/xⁿ = Σ (−x²/2)ᵏ / (k! (2n + 2k + 1)!!)`, DLMF 10.53.
fn spherical_series(x: f64, order: u32) -> f64 {
    let quarter = -0.5 * x * x;
    let mut term = 1.0 / (0..=order).map(|k| f64::from(2 * k + 1)).product::<f64>();
    let mut sum = term;
    let mut k = 0.0;
    while term.abs() > 1e-17 * sum.abs() {
        k += 1.0;
        term *= quarter / (k * (f64::from(2 * order) + 2.0 * k + 1.0));
        sum += term;
    }
    sum
}

fn lower_gamma(x: &[f64]) -> Result {
    in_domain(x[0], x[1])?;
    Ok(if x[1] < x[0] + 1.0 {
        gamma_series(x[0], x[1])
    } else {
        1.0 - gamma_fraction(x[0], x[1])
    })
}

fn upper_gamma(x: &[f64]) -> Result {
    in_domain(x[0], x[1])?;
    Ok(if x[1] < x[0] + 1.0 {
        1.0 - gamma_series(x[0], x[1])
    } else {
        gamma_fraction(x[0], x[1])
    })
}

/// Above this the terms needed grow beyond [`MAX_TERMS`].
const MAX_SHAPE: f64 = 1e8;
const MAX_TERMS: u32 = 200_000;

fn in_domain(a: f64, x: f64) -> Result {
    if a <= 0.0 || x < 0.0 {
        return does_not_exist(format!(
            "the incomplete gamma function of {} and {} does not exist: the first is above 0, the second 0 or more",
            digits(a),
            digits(x)
        ));
    }
    if a > MAX_SHAPE {
        return does_not_exist(format!(
            "the incomplete gamma function is computed up to a = 1e8, not for {}",
            digits(a)
        ));
    }
    Ok(a)
}

/// `e^(−x) x^a / Γ(a + 1)`
fn gamma_front(a: f64, x: f64) -> f64 {
    if x == 0.0 {
        return 0.0;
    }
    libm::exp(a * libm::log(x) - x - libm::lgamma(a + 1.0))
}

/// P by its power series, DLMF 8.11; for x < a + 1 the terms fall at once.
fn gamma_series(a: f64, x: f64) -> f64 {
    let (mut term, mut sum) = (1.0, 1.0);
    for n in 1..MAX_TERMS {
        term *= x / (a + f64::from(n));
        sum += term;
        if term < 1e-17 * sum {
            break;
        }
    }
    (sum * gamma_front(a, x)).min(1.0)
}

/// Q by its continued fraction, DLMF 8.9, summed by the method of Lentz
/// (1976, Appl. Opt. 15, 668).
fn gamma_fraction(a: f64, x: f64) -> f64 {
    const TINY: f64 = 1e-300;
    let mut b = x + 1.0 - a;
    let mut c = 1.0 / TINY;
    let mut d = 1.0 / b;
    let mut value = d;
    for n in 1..MAX_TERMS {
        let numerator = -f64::from(n) * (f64::from(n) - a);
        b += 2.0;
        d = numerator * d + b;
        d = 1.0 / if d.abs() < TINY { TINY } else { d };
        c = b + numerator / c;
        c = if c.abs() < TINY { TINY } else { c };
        value *= c * d;
        if (c * d - 1.0).abs() < 1e-16 {
            break;
        }
    }
    (value * a * gamma_front(a, x)).clamp(0.0, 1.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn close(found: Result, expected: f64, relative: f64) {
        let found = found.expect("a value");
        assert!(
            (found / expected - 1.0).abs() <= relative,
            "{found} is not {expected}"
        );
    }

    /// Values to 17 digits by mpmath 1.3 at 40 digits.
    #[test]
    fn values_of_a_reference_library_are_met() {
        close(lower_gamma(&[0.5, 0.5]), 0.682_689_492_137_085_9, 1e-13);
        close(upper_gamma(&[0.5, 0.5]), 0.317_310_507_862_914_1, 1e-13);
        close(lower_gamma(&[5.0, 9.1535]), 0.949_999_410_908_601_8, 1e-13);
        close(upper_gamma(&[5.0, 9.1535]), 0.050_000_589_091_398_095, 1e-13);
        close(lower_gamma(&[50.0, 30.0]), 0.000_518_891_462_548_034_3, 1e-13);
        close(upper_gamma(&[50.0, 30.0]), 0.999_481_108_537_452, 1e-13);
        close(lower_gamma(&[50.0, 80.0]), 0.999_869_216_023_408_6, 1e-13);
        close(upper_gamma(&[50.0, 80.0]), 0.000_130_783_976_591_410_34, 1e-13);
        close(lower_gamma(&[1000.0, 1010.0]), 0.627_678_944_736_994_7, 1e-12);
        close(upper_gamma(&[1000.0, 1010.0]), 0.372_321_055_263_005_3, 1e-12);
        close(lower_gamma(&[1.0e6, 1.001e6]), 0.841_344_786_368_340_3, 1e-9);
        close(upper_gamma(&[1.0e6, 1.001e6]), 0.158_655_213_631_659_71, 1e-9);
        close(spherical_bessel_0(&[0.01]), 0.999_983_333_416_666_5, 1e-15);
        close(spherical_bessel_1(&[0.01]), 0.003_333_300_000_119_047_5, 1e-14);
        close(spherical_bessel_2(&[0.01]), 6.666_619_047_751_322_5e-6, 1e-14);
        close(spherical_bessel_0(&[0.3]), 0.985_067_355_537_798_6, 1e-15);
        close(spherical_bessel_1(&[0.3]), 0.099_102_888_040_641_88, 1e-14);
        close(spherical_bessel_2(&[0.3]), 0.005_961_524_868_620_218, 1e-14);
        close(spherical_bessel_0(&[0.7]), 0.920_310_981_768_130_1, 1e-15);
        close(spherical_bessel_1(&[0.7]), 0.222_098_277_833_773_78, 1e-14);
        close(spherical_bessel_2(&[0.7]), 0.031_538_780_376_614_72, 1e-14);
        close(spherical_bessel_0(&[10.0]), -0.054_402_111_088_936_98, 1e-15);
        close(spherical_bessel_1(&[10.0]), 0.078_466_941_798_751_55, 1e-14);
        close(spherical_bessel_2(&[10.0]), 0.077_942_193_628_562_45, 1e-14);
        close(bessel_0(&[5.0]), -0.177_596_771_314_338_3, 1e-14);
        close(bessel_1(&[5.0]), -0.327_579_137_591_465_23, 1e-14);
        close(gamma_function(&[4.5]), 11.631_728_396_567_448, 1e-15);
        close(log_gamma_function(&[1000.5]), 5_908.674_175_848_678, 1e-15);
        close(error_function(&[0.5]), 0.520_499_877_813_046_5, 1e-15);
        close(
            complementary_error_function(&[5.0]),
            1.537_459_794_428_035e-12,
            1e-14,
        );
    }

    #[test]
    fn series_and_closed_form_meet() {
        for (function, at, relative) in [
            (spherical_bessel_0 as fn(&[f64]) -> Result, SERIES_BELOW, 1e-15),
            (spherical_bessel_1, 0.5, 1e-14),
            (spherical_bessel_2, 1.0, 1e-14),
            (top_hat_window, 0.5, 1e-14),
        ] {
            let below = function(&[at - 1e-15]).expect("a value");
            close(function(&[at]), below, relative);
        }
        assert_eq!(top_hat_window(&[0.0]), Ok(1.0));
        assert_eq!(spherical_bessel_0(&[0.0]), Ok(1.0));
        assert_eq!(spherical_bessel_2(&[0.0]), Ok(0.0));
    }

    #[test]
    fn poles_and_bad_arguments_are_said_in_words() {
        for bad in [0.0, -1.0, -7.0] {
            assert!(gamma_function(&[bad]).is_err() && log_gamma_function(&[bad]).is_err());
        }
        assert!(
            gamma_function(&[172.0]).is_err(),
            "172 is above the range of a double"
        );
        assert!(lower_gamma(&[0.0, 1.0]).is_err() && upper_gamma(&[1.0, -1.0]).is_err());
    }
}
