//! Numbers and quantities (section 2 of the language page).

use super::*;

#[test]
fn numbers_are_read_as_papers_write_them() {
    for (text, read) in [
        ("46.5", "46.5"),
        (".5", "0.5"),
        ("1.2e-5", "1.2e-5"),
        ("1.2E5", "1.2e5"),
        ("1.2e−5", "1.2e-5"),
        ("3.0 × 10^5", "3.0e5"),
        ("3.0×10^5", "3.0e5"),
        ("3.0 × 10⁵", "3.0e5"),
        ("3.0 × 10⁻⁵", "3.0e-5"),
        ("3.0 × 10^-5", "3.0e-5"),
        ("3.0 × 10^−5", "3.0e-5"),
        ("3.0 × 10**5", "3.0e5"),
        ("2%", "2[%]"),
        ("∞", "∞"),
        ("infinity", "∞"),
        ("-0.4", "(neg 0.4)"),
        ("−0.4", "(neg 0.4)"),
    ] {
        assert_eq!(tree(text), read, "{text}");
    }
}

#[test]
fn a_star_never_makes_one_number() {
    assert_eq!(tree("3 * 10^5"), "(* 3 (^ 10 5))");
    assert_eq!(tree("3 × 10"), "(* 3 10)");
}

#[test]
fn the_last_digit_written_is_known() {
    let last_digit = |text: &str| match only(text) {
        StatementKind::Expression(
            Expr {
                kind: ExprKind::Quantity(quantity),
                ..
            },
            _,
        ) => quantity.number.last_digit,
        other => panic!("{other:?}"),
    };
    for (text, power) in [
        ("46.5", -1),
        ("3e2", 2),
        ("20000", 0),
        ("1.50e-3", -5),
        ("3.0 × 10^5", 4),
    ] {
        assert_eq!(last_digit(text), power, "{text}");
    }
}

#[test]
fn uncertainties_stand_in_the_last_digits_or_after_a_sign() {
    for (text, read) in [
        ("67.4(5)", "67.4+0.5-0.5"),
        ("67.4(5) km/s/Mpc", "67.4+0.5-0.5[km s^-1 Mpc^-1]"),
        ("73.04(104)", "73.04+1.04-1.04"),
        ("67.4 ± 0.5 km/s/Mpc", "67.4+0.5-0.5[km s^-1 Mpc^-1]"),
        ("67.4 +- 0.5 km/s/Mpc", "67.4+0.5-0.5[km s^-1 Mpc^-1]"),
        ("(67.4 ± 0.5) km/s/Mpc", "67.4+0.5-0.5[km s^-1 Mpc^-1]"),
        ("67.4 (+0.6, -0.5) km/s/Mpc", "67.4+0.6-0.5[km s^-1 Mpc^-1]"),
        ("67.4 (+0.6, −0.5)", "67.4+0.6-0.5"),
    ] {
        assert_eq!(tree(text), read, "{text}");
    }
    let concise = tree("1.234(12)e-5");
    assert!(concise.starts_with("1.234e-5+0.0000001"), "{concise}");
}

#[test]
fn units_are_read_as_papers_write_them() {
    for (text, read) in [
        ("70 km/s/Mpc", "70[km s^-1 Mpc^-1]"),
        ("70 km s^-1 Mpc^-1", "70[km s^-1 Mpc^-1]"),
        ("70 km s⁻¹ Mpc⁻¹", "70[km s^-1 Mpc^-1]"),
        ("70 km·s⁻¹·Mpc⁻¹", "70[km s^-1 Mpc^-1]"),
        ("70 km.s**-1.Mpc**-1", "70[km s^-1 Mpc^-1]"),
        ("3 m^(1/2)", "3[m^1/2]"),
        ("3 m^(-1/2)", "3[m^-1/2]"),
        ("1 M_⊙", "1[M_⊙]"),
        ("1.5 arcsec", "1.5[arcsec]"),
        ("2.7255 K", "2.7255[K]"),
        ("3 erg/s/cm^2/Angstrom", "3[erg s^-1 cm^-2 Angstrom^-1]"),
        ("100 Mpc/h", "100[Mpc h^-1]"),
        ("0.1 h/Mpc", "0.1[h Mpc^-1]"),
        ("1 h^3/Mpc^3", "1[h^3 Mpc^-3]"),
        ("12 hr", "12[hr]"),
        ("{0, 0, 0.06} eV", "{0 0 0.06}[eV]"),
    ] {
        assert_eq!(tree(text), read, "{text}");
    }
}

#[test]
fn a_unit_ends_where_the_page_says() {
    for (text, read) in [
        ("30 kpc/D_A(z)", "(/ 30[kpc] D_A(z))"),
        ("70 km / t", "(/ 70[km] t)"),
        ("10 Gpc/(1+z)", "(/ 10[Gpc] ⟨(+ 1 z)⟩)"),
        ("2 km * x", "(* 2[km] x)"),
        ("2 km · x", "(* 2[km] x)"),
        ("2 km × x", "(* 2[km] x)"),
        ("10 km if", "broken"),
        ("1 km + 2 m", "(+ 1[km] 2[m])"),
        ("3 km < x", "(compare 3[km] < x)"),
        (
            "if 1 s < t then 2 s else 3 s",
            "(if (compare 1[s] < t) 2[s] 3[s])",
        ),
        ("3 Mpc under milne", "(under <milne> 3[Mpc])"),
        ("10 .. 1000 kpc", "(10 .. 1000[kpc])"),
    ] {
        if read != "broken" {
            assert_eq!(tree(text), read, "{text}");
        } else {
            assert!(!parse(text).diagnostics.is_empty(), "{text}");
        }
    }
}

#[test]
fn words_of_units_are_names_everywhere_else() {
    assert_eq!(tree("h * c + G*d - m/s"), "(- (+ (* h c) (* G d)) (/ m s))");
    assert_eq!(
        tree("at + every + today + sigma"),
        "(+ (+ (+ at every) today) sigma)"
    );
}

#[test]
fn a_sign_before_a_power_is_taken_after_it() {
    assert_eq!(tree("-2^2"), "(neg (^ 2 2))");
    assert_eq!(tree("2^-1"), "(^ 2 (neg 1))");
    assert_eq!(tree("2^3^2"), "(^ 2 (^ 3 2))");
    assert_eq!(tree("x²"), "(^ x 2)");
    assert_eq!(tree("(3 Mpc)^2"), "(^ ⟨3[Mpc]⟩ 2)");
}
