//! The form of sheets: what reads, what does not, and what is said of it.

use zij_tests::fixture::{check_form, check_form_sheets};

#[test]
fn fixtures_of_form() {
    check_form_sheets("parser");
}

#[test]
fn every_sheet_of_the_examples_reads() {
    for path in zij_tests::repository::files("examples", "zij") {
        check_form(&zij_tests::repository::read(&path));
    }
}

#[test]
fn ten_thousand_open_brackets_are_one_clear_error() {
    for (opening, code) in [
        ("(", "nested-too-deep"),
        ("[", "nested-too-deep"),
        ("{", "nested-too-deep"),
    ] {
        let text = format!("x = {}", opening.repeat(10_000));
        let found = zij_tests::subject::form(&text);
        let codes: Vec<_> = found.iter().map(|one| one.code).collect();
        assert!(codes.contains(&code), "{codes:?}");
        assert!(codes.len() <= 3, "{codes:?}");
    }
}

#[test]
fn a_hundred_thousand_levels_of_any_kind_end_in_an_error() {
    let depth = 100_000;
    let texts = [
        format!("x = {}1{}", "(".repeat(depth), ")".repeat(depth)),
        format!("x = {}1", "-".repeat(depth)),
        format!("x = {}1 > 2", "not ".repeat(depth)),
        format!("x = {}1", "1 + ".repeat(depth)),
        format!("x = {}1", "2^".repeat(depth)),
        format!("x = {}1", "if 1 < 2 then 1 else ".repeat(depth)),
        format!("x = y{}", ".z".repeat(depth)),
        format!("x = y{}", " under m".repeat(depth)),
        format!("x = {}1{}", "f(".repeat(depth), ")".repeat(depth)),
        format!("x = {}1{}", "{".repeat(depth), "}".repeat(depth)),
        format!("x = 1 {}", "m/".repeat(depth)),
        format!("x = y{}", " [m]".repeat(depth)),
    ];
    for text in texts {
        let found = zij_tests::subject::form(&text);
        assert!(found.iter().any(|one| one.is_error()), "{}", &text[..40]);
    }
}

#[test]
fn the_generated_sheet_has_the_right_form_and_length() {
    let sheet = zij_tests::generate::sheet(1000);
    check_form(&sheet);
    assert!(
        (1000..1060).contains(&sheet.lines().count()),
        "{}",
        sheet.lines().count()
    );
}

#[track_caller]
fn refused_for(text: &str, code: &str) {
    let found = zij_tests::subject::form(text);
    assert!(found.iter().any(|one| one.code == code), "{:?}", found.first());
    assert!(found.len() <= 501, "{}", found.len());
}

#[test]
fn what_is_too_much_is_refused_by_name() {
    refused_for(&"1 + 1\n".repeat(3 << 20), "source-too-large");
    refused_for(&"1\n".repeat(500_001), "too-many-statements");
    refused_for(
        &format!("x = {{{}1}}\n", "1, ".repeat(100_000)),
        "statement-too-long",
    );
    refused_for(&"2x\n".repeat(2_000), "too-many-errors");
    refused_for(&format!("x = {}1\n", "1 + ".repeat(5_000)), "expression-too-long");
    refused_for(
        &format!("x = {}1{}\n", "(".repeat(200), ")".repeat(200)),
        "nested-too-deep",
    );
}
