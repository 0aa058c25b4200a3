//! Brackets and expressions (sections 3 and 6 of the language page).

use super::*;

#[test]
fn brackets_say_in_which_unit_and_frame() {
    for (text, read) in [
        ("D_L(z) [Gpc]", "(in [Gpc] D_L(z))"),
        ("x [1]", "(in [] x)"),
        ("x [kpc at z]", "(in [kpc at z] x)"),
        ("x [kpc at 1 + z]", "(in [kpc at (+ 1 z)] x)"),
        ("x [Gly today]", "(in [Gly today] x)"),
        ("x [Mpc for h]", "(in [Mpc for h] x)"),
        ("x [Msun for h = 0.7]", "(in [Msun for h = 0.7] x)"),
        ("x [Mpc/h for h]", "(in [Mpc h^-1 for h] x)"),
        ("x [cMpc by hand]", "(in [cMpc by hand] x)"),
        ("x [1 by hand]", "(in [ by hand] x)"),
        ("x [cm via c]", "(in [cm via c] x)"),
        ("13.6 eV [nm via h_P, c]", "(in [nm via h_P c] 13.6[eV])"),
        ("x [1/Mpc]", "(in [Mpc^-1] x)"),
        ("x [/Mpc]", "(in [Mpc^-1] x)"),
        ("x [W/(m^2 Hz)]", "(in [W m^-2 Hz^-1] x)"),
        ("x [10^-20 erg/s]", "(in [1e-20 erg s^-1] x)"),
    ] {
        assert_eq!(tree(text), read, "{text}");
    }
}

#[test]
fn a_bracket_binds_looser_than_sums_and_tighter_than_comparisons() {
    assert_eq!(tree("a + b [Mpc]"), "(in [Mpc] (+ a b))");
    assert_eq!(tree("a * b [Mpc]"), "(in [Mpc] (* a b))");
    assert_eq!(tree("a [Mpc] < b [kpc]"), "(compare (in [Mpc] a) < (in [kpc] b))");
    assert_eq!(tree("a [Mpc] under milne"), "(under <milne> (in [Mpc] a))");
    assert_eq!(tree("a + (b [kpc at z])"), "(+ a ⟨(in [kpc at z] b)⟩)");
    assert_eq!(tree("(a + b) [kpc at z]"), "(in [kpc at z] ⟨(+ a b)⟩)");
}

#[test]
fn operators_bind_as_in_mathematics() {
    for (text, read) in [
        ("a + b * c", "(+ a (* b c))"),
        ("a - b - c", "(- (- a b) c)"),
        ("a / b / c", "(/ (/ a b) c)"),
        ("a * b ^ c", "(* a (^ b c))"),
        ("-a * b", "(* (neg a) b)"),
        ("a ** b", "(^ a b)"),
        ("a × b · c", "(* (* a b) c)"),
        ("+a", "(pos a)"),
        ("not a < b", "(not (compare a < b))"),
        (
            "a < b and c < d or e < f",
            "(or (and (compare a < b) (compare c < d)) (compare e < f))",
        ),
        ("not p and q", "(and (not p) q)"),
        ("0 < z < 1", "(compare 0 < z < 1)"),
        ("a ≤ b ≥ c", "(compare a <= b >= c)"),
        ("a <= b", "(compare a <= b)"),
        ("if a < b then c else d + e", "(if (compare a < b) c (+ d e))"),
        (
            "if a < 1 then b else if a < 2 then c else d",
            "(if (compare a < 1) b (if (compare a < 2) c d))",
        ),
    ] {
        assert_eq!(tree(text), read, "{text}");
    }
}

#[test]
fn calls_fields_and_series() {
    for (text, read) in [
        ("f()", "f()"),
        ("f(x, 2)", "f(x, 2)"),
        ("f(x, c = 2)", "f(x, c = 2)"),
        ("sample.z", "sample.z"),
        (
            "maximum(D_A(x), x = 0 .. 10).at",
            "maximum(D_A(x), x = (0 .. 10)).at",
        ),
        ("{a, b + 1, 3}", "{a (+ b 1) 3}"),
        ("{1, 2}", "{1 2}"),
        ("Ωm(z) + Ωm", "(+ Ωm(z) Ωm)"),
        (
            "root(D_L(x) = 10 Gpc, x = 0 .. 20)",
            "root(D_L(x) == 10[Gpc], x = (0 .. 20))",
        ),
        (
            "integral(1/E(x), x = 0 .. z)",
            "integral((/ 1 E(x)), x = (0 .. z))",
        ),
        ("derivative(age(x), x = 1)", "derivative(age(x), x = 1)"),
    ] {
        assert_eq!(tree(text), read, "{text}");
    }
}

#[test]
fn ranges_are_divided_in_four_ways() {
    for (text, read) in [
        ("0 .. 3 every 0.5", "(0 .. 3 every 0.5)"),
        ("0..3", "(0 .. 3)"),
        ("0.01 .. 10 every 0.1 dex", "(0.01 .. 10 every 0.1[dex])"),
        ("0 .. 1 in 50 steps", "(0 .. 1 steps 50)"),
        ("0.01 .. 10 in 60 log steps", "(0.01 .. 10 log 60)"),
        ("a + 1 .. 2*b", "((+ a 1) .. (* 2 b))"),
        ("0 .. ∞", "(0 .. ∞)"),
    ] {
        assert_eq!(tree(text), read, "{text}");
    }
}

#[test]
fn models_stand_after_under() {
    for (text, read) in [
        ("a under milne", "(under <milne> a)"),
        ("a + b under milne", "(under <milne> (+ a b))"),
        ("a under (milne)", "(under <milne> a)"),
        (
            "a under flat with H0 = 70 km/s/Mpc, Ωm = 0.3",
            "(under <flat H0=70[km s^-1 Mpc^-1] Ωm=0.3> a)",
        ),
        (
            "(a under (flat with Ωm = 0.3)) / b",
            "(/ ⟨(under <flat Ωm=0.3> a)⟩ b)",
        ),
        (
            "a under general with w(z) = -1 + 0.2*z/(1+z)",
            "(under <general w(z)=(+ (neg 1) (/ (* 0.2 z) ⟨(+ 1 z)⟩))> a)",
        ),
        (
            "a under general with mν = {0, 0, 0.06} eV",
            "(under <general mν={0 0 0.06}[eV]> a)",
        ),
        ("a under m1 under m2", "(under <m2> (under <m1> a))"),
    ] {
        assert_eq!(tree(text), read, "{text}");
    }
}

#[test]
fn local_names_follow_where() {
    assert_eq!(
        tree("x + y where x = 1, y [km] = 2 km"),
        "(+ x y) where x=1 where y[km]=2[km]"
    );
}
