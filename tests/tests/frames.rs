//! What frames cost when the sheet runs: nothing but the factors that brackets
//! write; and those are the powers that the dimension says.

use proptest::prelude::*;
use zij_tests::compiled::compiled;
use zij_tests::subject;

#[track_caller]
fn same_program(framed: &str, unframed: &str) {
    assert!(compiled(framed).lines().count() > 2);
    assert_eq!(
        compiled(framed),
        compiled(unframed),
        "{framed}\nagainst\n{unframed}"
    );
}

#[test]
fn a_framed_sheet_compiles_to_the_program_of_an_unframed_one() {
    same_program(
        "half(d [cMpc]) = d/2\nresult r = half(3 cMpc) + 2 cMpc\n",
        "half(d [Mpc]) = d/2\nresult r = half(3 Mpc) + 2 Mpc\n",
    );
    same_program(
        "n = 1e-3 cMpc^-3\nresult N = n * comoving_volume(1)\n",
        "n = 1e-3 Mpc^-3\nresult N = n * comoving_volume(1)\n",
    );
    same_program("result r = 8 Mpc/h + 2 Mpc/h\n", "result r = 8 Mpc + 2 Mpc\n");
    same_program(
        "f(x) = integral(c/H(t), t = 0 .. x)\nresult r = f(1) - D_C(1)\n",
        "f(x) = integral(c/H(t), t = 0 .. x)\nresult r = f(1) - D_C(1) [Mpc]\n",
    );
    same_program("result r = 4*D_A(3) [cMpc by hand]\n", "result r = 4*D_A(3)\n");
}

#[test]
fn a_bracket_writes_its_factor_and_nothing_else() {
    let plain = compiled("result r = D_C(1)\n");
    let settled = compiled("result r = D_C(1) [Mpc at 1]\n");
    let (before, after) = (plain.lines().count(), settled.lines().count());
    assert!((1..=5).contains(&(after - before)), "{plain}\n{settled}");
}

/// A unit from the powers of a length, with its letter for the frame.
fn unit(letter: &str, power: i32) -> String {
    format!("{letter}Mpc^{power}")
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 200, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn a_bracket_takes_along_by_the_power_of_the_dimension(power in 1i32..4, below: bool, z in 0.0f64..20.0, number in 1u32..1000) {
        let power = if below { -power } else { power };
        let number = f64::from(number) / 8.0;
        let there = format!("{number} {} [{} at {z}]\n", unit("c", power), unit("p", power));
        let value = subject::last_number(&subject::run(&there)).unwrap_or(f64::NAN);
        let expected = number / (1.0 + z).powi(power);
        prop_assert!((value / expected - 1.0).abs() < 1e-14, "{there}{value} for {expected}");
        let back = format!("{value:e} {} [{} at {z}]\n", unit("p", power), unit("c", power));
        let again = subject::last_number(&subject::run(&back)).unwrap_or(f64::NAN);
        prop_assert!((again / number - 1.0).abs() < 1e-14, "{back}{again} for {number}");
    }

    #[test]
    fn a_bracket_settles_h_by_the_power_of_the_dimension(power in 1i32..4, below: bool, h in 0.4f64..1.1, number in 1u32..1000) {
        let power = if below { -power } else { power };
        let number = f64::from(number) / 8.0;
        let there = format!("{number} Mpc^{power} h^{} [Mpc^{power} for h = {h}]\n", -power);
        let value = subject::last_number(&subject::run(&there)).unwrap_or(f64::NAN);
        let expected = number / h.powi(power);
        prop_assert!((value / expected - 1.0).abs() < 1e-14, "{there}{value} for {expected}");
    }
}
