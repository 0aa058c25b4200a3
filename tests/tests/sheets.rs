//! Suites of sheets: fixtures of the checker, golden sessions, published
//! values, the examples of the library and the example sheets.

use zij_tests::exchange::{check_examples, check_sessions};
use zij_tests::fixture::check_sheets;
use zij_tests::published::check_published;
use zij_tests::{repository, subject};

#[test]
fn fixtures_of_units() {
    check_sheets("units");
}

#[test]
fn fixtures_of_the_checker() {
    check_sheets("checker");
}

#[test]
fn fixtures_of_frames() {
    check_sheets("frames");
}

#[test]
fn fixtures_of_running() {
    check_sheets("run");
}

#[test]
fn golden_sessions() {
    check_sessions();
}

#[test]
fn golden_examples() {
    check_examples();
}

#[test]
fn published_values() {
    check_published();
}

#[test]
fn every_example_of_the_library_holds() {
    let mut failures = Vec::new();
    let mut run = 0;
    for (name, example) in subject::examples() {
        let report = subject::run(&format!("claim: {example}\n"));
        run += 1;
        let unmet = subject::unmet_claims(&report);
        if report.exit_status() != 0 || report.items.len() != 1 {
            failures.push(format!(
                "{name}: {example}\n{}\n{}",
                unmet.join("\n"),
                subject::said(&report)
            ));
        }
    }
    assert!(run > 20, "only {run} examples");
    assert!(
        failures.is_empty(),
        "{} of {run} examples fail\n{}",
        failures.len(),
        failures.join("\n")
    );
}

#[test]
fn every_example_sheet_runs_and_its_claims_agree() {
    let paths = repository::files("examples", "zij");
    let mut failures = Vec::new();
    for path in &paths {
        let report = subject::run_at(path, &repository::read(path));
        // The numbers of a paper as it was submitted: some are wrong.
        let expected = u8::from(path.ends_with("referee_report.zij"));
        let bad = report.exit_status() != expected || !report.diagnostics.is_empty();
        if bad {
            let unmet = subject::unmet_claims(&report).join("\n");
            failures.push(format!(
                "==== {}\n{unmet}\n{}",
                repository::relative(path),
                subject::said(&report)
            ));
        }
    }
    assert!(paths.len() >= 10, "only {} example sheets", paths.len());
    assert!(failures.is_empty(), "{}", failures.join("\n"));
}

#[test]
fn the_generated_sheet_runs_and_its_claims_agree() {
    let report = subject::run(&zij_tests::generate::sheet(250));
    assert_eq!(report.exit_status(), 0, "{}", subject::said(&report));
    assert!(report.diagnostics.is_empty(), "{}", subject::said(&report));
}
