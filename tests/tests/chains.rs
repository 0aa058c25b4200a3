//! Long chains of definitions, each using the one before several times: what
//! would double with every line has to stay a line's work. There is no clock
//! here; a chain that doubles does not end.

use std::fmt::Write;
use zij_tests::subject;

fn value(sheet: &str) -> f64 {
    let report = subject::run(sheet);
    subject::last_number(&report).unwrap_or_else(|| panic!("{}", subject::said(&report)))
}

#[test]
fn functions_of_functions_are_a_lines_work_each() {
    let mut sheet = "f0(x) = x*(1 + x)\n".to_owned();
    for i in 1..60 {
        let _ = writeln!(sheet, "f{i}(x) = f{0}(x)*f{0}(x)/f{0}(x)", i - 1);
    }
    sheet.push_str("f59(2)\n");
    assert_eq!(value(&sheet), 6.0);
}

#[test]
fn values_of_values_are_a_lines_work_each() {
    let mut sheet = "x0 = 3 Mpc\n".to_owned();
    for i in 1..1000 {
        let _ = writeln!(sheet, "x{i} = x{0} * x{0} / x{0} + 1 kpc", i - 1);
    }
    sheet.push_str("x999 [kpc]\n");
    assert!((value(&sheet) - 3999.0).abs() < 1e-9);
}

#[test]
fn what_does_grow_without_measure_is_refused() {
    let mut sheet = "f0(x) = x\n".to_owned();
    for i in 1..40 {
        let _ = writeln!(sheet, "f{i}(x) = f{0}(x) + f{0}(x + {i}.5)", i - 1);
    }
    sheet.push_str("f39(2)\n");
    let report = subject::run(&sheet);
    assert!(
        subject::said(&report).contains("too-large"),
        "{}",
        subject::said(&report)
    );
}
