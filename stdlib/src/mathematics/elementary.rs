//! Elementary functions: roots, powers and logarithms, angles, rounding.

use super::{A, ANGLE_TYPE, FUNCTION, NUMBER_TYPE, Result, digits, does_not_exist, representable};
use crate::catalogue::{Definition, Entry, Type, argument};

pub(super) static ENTRIES: &[Entry] = &[
    Entry {
        name: "pi",
        symbol: "π",
        synonyms: &["circle", "circumference"],
        about: "Ratio of a circle's circumference to its diameter; it leaves the angle open.",
        formula: "π = 3.14159265358979…",
        source: "ISO 80000-2:2019",
        example: "pi is 3.14159265358979",
        definition: Definition::Constant(std::f64::consts::PI, 0.0),
        ..FUNCTION
    },
    Entry {
        name: "sqrt",
        synonyms: &["square root"],
        about: "Square root.",
        arguments: &[argument("x", A, "0 or more")],
        result: Type::power(0, 1, 2),
        formula: "√x",
        validity: "x ≥ 0",
        source: "ISO 80000-2:2019",
        example: "sqrt(2) is 1.41421356",
        definition: Definition::Function(square_root),
        ..FUNCTION
    },
    Entry {
        name: "cbrt",
        synonyms: &["cube root"],
        about: "Cube root, of negative values too.",
        arguments: &[argument("x", A, "any value")],
        result: Type::power(0, 1, 3),
        formula: "∛x",
        source: "ISO 80000-2:2019",
        example: "cbrt(-8 Mpc^3) is -2 Mpc",
        definition: Definition::Function(cube_root),
        ..FUNCTION
    },
    Entry {
        name: "abs",
        synonyms: &["absolute value", "modulus"],
        about: "Absolute value.",
        arguments: &[argument("x", A, "any value")],
        result: A,
        formula: "|x|",
        source: "ISO 80000-2:2019",
        example: "abs(-3 km/s) is 3 km/s",
        definition: Definition::Function(absolute),
        ..FUNCTION
    },
    Entry {
        name: "sign",
        aliases: &["sgn"],
        synonyms: &["signum"],
        about: "Sign of a value: −1, 0 or 1.",
        arguments: &[argument("x", A, "any value")],
        result: NUMBER_TYPE,
        formula: "sgn x",
        source: "ISO 80000-2:2019",
        example: "sign(-3 km/s) is -1",
        definition: Definition::Function(sign),
        ..FUNCTION
    },
    Entry {
        name: "hypot",
        synonyms: &["quadrature", "Pythagoras"],
        about: "Root of the sum of two squares: errors added in quadrature.",
        arguments: &[
            argument("x", A, "any value"),
            argument("y", A, "any value of the same dimension"),
        ],
        result: A,
        formula: "√(x² + y²)",
        source: "C. L. Borges 2020, arXiv:1904.09481",
        example: "hypot(3 Mpc, 4 Mpc) is 5 Mpc",
        definition: Definition::Function(hypotenuse),
        ..FUNCTION
    },
    Entry {
        name: "floor",
        synonyms: &["round down"],
        about: "Largest whole number not above x.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "⌊x⌋",
        source: "ISO 80000-2:2019",
        example: "floor(-2.4) is -3",
        definition: Definition::Function(floor),
        ..FUNCTION
    },
    Entry {
        name: "ceil",
        aliases: &["ceiling"],
        synonyms: &["round up"],
        about: "Smallest whole number not below x.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "⌈x⌉",
        source: "ISO 80000-2:2019",
        example: "ceil(2.4) is 3",
        definition: Definition::Function(ceiling),
        ..FUNCTION
    },
    Entry {
        name: "round",
        synonyms: &["nearest whole number"],
        about: "Nearest whole number, halves away from zero.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "sgn x ⌊|x| + ½⌋",
        source: "ISO 80000-1:2022, annex B",
        example: "round(2.5) is 3",
        definition: Definition::Function(round),
        ..FUNCTION
    },
    Entry {
        name: "exp",
        synonyms: &["exponential", "Euler's number"],
        about: "Exponential function; Euler's number is exp(1).",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "eˣ",
        source: "DLMF 4.2",
        example: "exp(1) is 2.718281828459045",
        definition: Definition::Function(exponential),
        ..FUNCTION
    },
    Entry {
        name: "ln",
        synonyms: &["natural logarithm"],
        about: "Natural logarithm.",
        arguments: &[argument("x", NUMBER_TYPE, "above 0")],
        result: NUMBER_TYPE,
        formula: "ln x",
        validity: "x > 0",
        source: "DLMF 4.2",
        example: "ln(10) is 2.302585092994046",
        definition: Definition::Function(natural_logarithm),
        ..FUNCTION
    },
    Entry {
        name: "log10",
        synonyms: &["decimal logarithm", "dex"],
        about: "Decimal logarithm.",
        arguments: &[argument("x", NUMBER_TYPE, "above 0")],
        result: NUMBER_TYPE,
        formula: "lg x",
        validity: "x > 0",
        source: "DLMF 4.2",
        example: "log10(2) is 0.30102999566",
        definition: Definition::Function(decimal_logarithm),
        ..FUNCTION
    },
    Entry {
        name: "log2",
        synonyms: &["binary logarithm", "doublings"],
        about: "Binary logarithm: the number of doublings.",
        arguments: &[argument("x", NUMBER_TYPE, "above 0")],
        result: NUMBER_TYPE,
        formula: "lb x",
        validity: "x > 0",
        source: "ISO 80000-2:2019",
        example: "log2(1024) is 10",
        definition: Definition::Function(binary_logarithm),
        ..FUNCTION
    },
    Entry {
        name: "expm1",
        synonyms: &["exponential"],
        about: "exp(x) − 1 without cancellation for small x.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "eˣ − 1",
        source: "DLMF 4.2",
        example: "expm1(1e-10) is 1.00000000005e-10",
        definition: Definition::Function(exponential_less_one),
        ..FUNCTION
    },
    Entry {
        name: "log1p",
        synonyms: &["natural logarithm"],
        about: "ln(1 + x) without cancellation for small x.",
        arguments: &[argument("x", NUMBER_TYPE, "above -1")],
        result: NUMBER_TYPE,
        formula: "ln(1 + x)",
        validity: "x > −1",
        source: "DLMF 4.6",
        example: "log1p(1e-10) is 9.9999999995e-11",
        definition: Definition::Function(logarithm_of_one_more),
        ..FUNCTION
    },
    Entry {
        name: "sin",
        synonyms: &["sine"],
        about: "Sine of an angle.",
        arguments: &[argument("x", ANGLE_TYPE, "an angle")],
        result: NUMBER_TYPE,
        formula: "sin x",
        source: "DLMF 4.14",
        example: "sin(30 deg) is 0.5",
        definition: Definition::Function(sine),
        ..FUNCTION
    },
    Entry {
        name: "cos",
        synonyms: &["cosine"],
        about: "Cosine of an angle.",
        arguments: &[argument("x", ANGLE_TYPE, "an angle")],
        result: NUMBER_TYPE,
        formula: "cos x",
        source: "DLMF 4.14",
        example: "cos(60 deg) is 0.5",
        definition: Definition::Function(cosine),
        ..FUNCTION
    },
    Entry {
        name: "tan",
        synonyms: &["tangent"],
        about: "Tangent of an angle.",
        arguments: &[argument("x", ANGLE_TYPE, "an angle")],
        result: NUMBER_TYPE,
        formula: "tan x",
        source: "DLMF 4.14",
        example: "tan(45 deg) is 1.000",
        definition: Definition::Function(tangent),
        ..FUNCTION
    },
    Entry {
        name: "asin",
        aliases: &["arcsin"],
        synonyms: &["inverse sine"],
        about: "Angle in [−90°, 90°] of this sine.",
        arguments: &[argument("x", NUMBER_TYPE, "a number from -1 to 1")],
        result: ANGLE_TYPE,
        usual_unit: "rad",
        formula: "arcsin x",
        validity: "-1 ≤ x ≤ 1",
        source: "DLMF 4.23",
        example: "asin(0.5) is 30.00 deg",
        definition: Definition::Function(arc_sine),
        ..FUNCTION
    },
    Entry {
        name: "acos",
        aliases: &["arccos"],
        synonyms: &["inverse cosine"],
        about: "Angle in [0°, 180°] of this cosine.",
        arguments: &[argument("x", NUMBER_TYPE, "a number from -1 to 1")],
        result: ANGLE_TYPE,
        usual_unit: "rad",
        formula: "arccos x",
        validity: "-1 ≤ x ≤ 1",
        source: "DLMF 4.23",
        example: "acos(0.5) is 60.00 deg",
        definition: Definition::Function(arc_cosine),
        ..FUNCTION
    },
    Entry {
        name: "atan",
        aliases: &["arctan"],
        synonyms: &["inverse tangent"],
        about: "Angle in (−90°, 90°) of this tangent.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: ANGLE_TYPE,
        usual_unit: "rad",
        formula: "arctan x",
        source: "DLMF 4.23",
        example: "atan(1) is 45.00 deg",
        definition: Definition::Function(arc_tangent),
        ..FUNCTION
    },
    Entry {
        name: "atan2",
        synonyms: &["position angle", "direction"],
        about: "Angle in (−180°, 180°] of the direction with these components.",
        arguments: &[
            argument("y", A, "component across"),
            argument("x", A, "component along, of the same dimension"),
        ],
        result: ANGLE_TYPE,
        usual_unit: "rad",
        formula: "arg(x + i y)",
        validity: "not x = y = 0",
        source: "DLMF 4.23",
        example: "atan2(1 kpc, -1 kpc) is 135.0 deg",
        definition: Definition::Function(direction),
        ..FUNCTION
    },
    Entry {
        name: "sinh",
        synonyms: &["hyperbolic sine"],
        about: "Hyperbolic sine.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "(eˣ − e⁻ˣ)/2",
        source: "DLMF 4.28",
        example: "sinh(1) is 1.1752011936",
        definition: Definition::Function(hyperbolic_sine),
        ..FUNCTION
    },
    Entry {
        name: "cosh",
        synonyms: &["hyperbolic cosine"],
        about: "Hyperbolic cosine.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "(eˣ + e⁻ˣ)/2",
        source: "DLMF 4.28",
        example: "cosh(1) is 1.5430806348",
        definition: Definition::Function(hyperbolic_cosine),
        ..FUNCTION
    },
    Entry {
        name: "tanh",
        synonyms: &["hyperbolic tangent"],
        about: "Hyperbolic tangent.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "sinh x/cosh x",
        source: "DLMF 4.28",
        example: "tanh(1) is 0.7615941560",
        definition: Definition::Function(hyperbolic_tangent),
        ..FUNCTION
    },
    Entry {
        name: "asinh",
        aliases: &["arsinh"],
        synonyms: &["inverse hyperbolic sine"],
        about: "Inverse of the hyperbolic sine.",
        arguments: &[argument("x", NUMBER_TYPE, "a number")],
        result: NUMBER_TYPE,
        formula: "ln(x + √(x² + 1))",
        source: "DLMF 4.37",
        example: "asinh(1) is 0.8813735870",
        definition: Definition::Function(area_sine),
        ..FUNCTION
    },
    Entry {
        name: "acosh",
        aliases: &["arcosh"],
        synonyms: &["inverse hyperbolic cosine"],
        about: "Inverse of the hyperbolic cosine, 0 or more.",
        arguments: &[argument("x", NUMBER_TYPE, "1 or more")],
        result: NUMBER_TYPE,
        formula: "ln(x + √(x² − 1))",
        validity: "x ≥ 1",
        source: "DLMF 4.37",
        example: "acosh(2) is 1.3169578969",
        definition: Definition::Function(area_cosine),
        ..FUNCTION
    },
    Entry {
        name: "atanh",
        aliases: &["artanh"],
        synonyms: &["inverse hyperbolic tangent", "rapidity"],
        about: "Inverse of the hyperbolic tangent.",
        arguments: &[argument("x", NUMBER_TYPE, "a number between -1 and 1")],
        result: NUMBER_TYPE,
        formula: "½ ln((1 + x)/(1 − x))",
        validity: "-1 < x < 1",
        source: "DLMF 4.37",
        example: "atanh(0.5) is 0.5493061443",
        definition: Definition::Function(area_tangent),
        ..FUNCTION
    },
];

fn square_root(x: &[f64]) -> Result {
    if x[0] < 0.0 {
        return does_not_exist("a negative value has no square root".into());
    }
    Ok(x[0].sqrt())
}

fn cube_root(x: &[f64]) -> Result {
    Ok(libm::cbrt(x[0]))
}

fn absolute(x: &[f64]) -> Result {
    Ok(x[0].abs())
}

fn sign(x: &[f64]) -> Result {
    Ok(if x[0] == 0.0 { 0.0 } else { x[0].signum() })
}

fn hypotenuse(x: &[f64]) -> Result {
    representable(
        libm::hypot(x[0], x[1]),
        "the hypotenuse over legs",
        x[0].max(x[1]),
    )
}

fn floor(x: &[f64]) -> Result {
    Ok(x[0].floor())
}

fn ceiling(x: &[f64]) -> Result {
    Ok(x[0].ceil())
}

fn round(x: &[f64]) -> Result {
    Ok(x[0].round())
}

fn exponential(x: &[f64]) -> Result {
    representable(libm::exp(x[0]), "the exponential", x[0])
}

fn exponential_less_one(x: &[f64]) -> Result {
    representable(libm::expm1(x[0]), "the exponential", x[0])
}

fn logarithm_of_one_more(x: &[f64]) -> Result {
    if x[0] > -1.0 {
        return Ok(libm::log1p(x[0]));
    }
    does_not_exist(format!(
        "the logarithm of 1 + {} does not exist: it needs a positive number",
        digits(x[0])
    ))
}

fn natural_logarithm(x: &[f64]) -> Result {
    logarithm(libm::log, x[0])
}

fn decimal_logarithm(x: &[f64]) -> Result {
    logarithm(libm::log10, x[0])
}

fn binary_logarithm(x: &[f64]) -> Result {
    logarithm(libm::log2, x[0])
}

fn logarithm(function: fn(f64) -> f64, x: f64) -> Result {
    if x > 0.0 {
        return Ok(function(x));
    }
    does_not_exist(format!(
        "the logarithm of {} does not exist: it needs a positive number",
        digits(x)
    ))
}

fn sine(x: &[f64]) -> Result {
    Ok(libm::sin(x[0]))
}

fn cosine(x: &[f64]) -> Result {
    Ok(libm::cos(x[0]))
}

// No double is exactly 90°, so the tangent is large there and not infinite.
fn tangent(x: &[f64]) -> Result {
    Ok(libm::tan(x[0]))
}

fn arc_sine(x: &[f64]) -> Result {
    arc("sine", libm::asin, x[0])
}

fn arc_cosine(x: &[f64]) -> Result {
    arc("cosine", libm::acos, x[0])
}

fn arc(name: &str, function: fn(f64) -> f64, x: f64) -> Result {
    if x.abs() <= 1.0 {
        return Ok(function(x));
    }
    does_not_exist(format!(
        "no angle has the {name} {}: it lies between -1 and 1",
        digits(x)
    ))
}

fn arc_tangent(x: &[f64]) -> Result {
    Ok(libm::atan(x[0]))
}

fn direction(x: &[f64]) -> Result {
    if x[0] == 0.0 && x[1] == 0.0 {
        return does_not_exist("two components of 0 have no direction".into());
    }
    Ok(libm::atan2(x[0], x[1]))
}

fn hyperbolic_sine(x: &[f64]) -> Result {
    representable(libm::sinh(x[0]), "the hyperbolic sine", x[0])
}

fn hyperbolic_cosine(x: &[f64]) -> Result {
    representable(libm::cosh(x[0]), "the hyperbolic cosine", x[0])
}

fn hyperbolic_tangent(x: &[f64]) -> Result {
    Ok(libm::tanh(x[0]))
}

fn area_sine(x: &[f64]) -> Result {
    Ok(libm::asinh(x[0]))
}

fn area_cosine(x: &[f64]) -> Result {
    if x[0] >= 1.0 {
        return Ok(libm::acosh(x[0]));
    }
    does_not_exist(format!(
        "no number has the hyperbolic cosine {}: it is 1 or more",
        digits(x[0])
    ))
}

fn area_tangent(x: &[f64]) -> Result {
    if x[0].abs() < 1.0 {
        return Ok(libm::atanh(x[0]));
    }
    does_not_exist(format!(
        "no number has the hyperbolic tangent {}: it lies between -1 and 1",
        digits(x[0])
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    type Function = fn(&[f64]) -> Result;

    #[test]
    fn what_does_not_exist_is_said_in_words() {
        let cases: [(Function, &[f64], &str); 8] = [
            (natural_logarithm, &[-3.0], "the logarithm of -3 does not exist"),
            (decimal_logarithm, &[0.0], "the logarithm of 0 does not exist"),
            (square_root, &[-1.0], "a negative value has no square root"),
            (arc_sine, &[1.5], "no angle has the sine 1.5"),
            (direction, &[0.0, -0.0], "two components of 0"),
            (area_tangent, &[1.0], "no number has the hyperbolic tangent 1"),
            (exponential, &[710.0], "the exponential of 710 is too large"),
            (
                natural_logarithm,
                &[-2.754_062_24e-10],
                "the logarithm of -2.754062e-10 does",
            ),
        ];
        for (function, arguments, start) in cases {
            let error = function(arguments).expect_err(start);
            assert!(error.0.starts_with(start), "{error}");
        }
    }

    #[test]
    fn the_ends_of_a_domain_belong_to_it() {
        assert_eq!(square_root(&[0.0]), Ok(0.0));
        assert_eq!(arc_cosine(&[1.0]), Ok(0.0));
        assert_eq!(area_cosine(&[1.0]), Ok(0.0));
        assert_eq!(direction(&[0.0, -1.0]), Ok(std::f64::consts::PI));
        assert_eq!(sign(&[-0.0]), Ok(0.0));
    }
}
