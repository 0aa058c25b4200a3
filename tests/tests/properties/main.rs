//! Properties that hold for any sheet: what is printed reads back the same,
//! units convert there and back, inferred dimensions are those of pencil and
//! paper, no text makes anything panic, and threads change no digit.

mod dimensioned;
mod written;

use dimensioned::{Case, FRAMES, SI, dimensioned};
use proptest::prelude::*;
use proptest::test_runner::Config;
use zij_tests::subject;

/// `PROPTEST_CASES` asks for more than the usual number of cases.
fn config(usual: u32) -> Config {
    let asked = std::env::var("PROPTEST_CASES").ok();
    Config {
        cases: asked.and_then(|text| text.parse().ok()).unwrap_or(usual),
        failure_persistence: None,
        ..Config::default()
    }
}

/// The tree of a text without its places.
fn tree(text: &str) -> String {
    let debugged = format!("{:?}", subject::statements(text));
    let mut bare = String::with_capacity(debugged.len());
    let mut rest = debugged.as_str();
    while let Some(at) = rest.find("Span { start") {
        bare.push_str(&rest[..at]);
        rest = rest[at..].split_once('}').map_or("", |(_, after)| after);
    }
    bare + rest
}

/// Every place stands in the text and between characters, and every repair can
/// be made.
fn sound(text: &str) {
    for one in subject::form(text) {
        let labels = one.others.iter().chain([&one.at]);
        for label in labels {
            assert!(text.get(label.span.range()).is_some(), "{:?} in {text:?}", label);
        }
        for fix in &one.fixes {
            let mut end = 0;
            for (span, _) in &fix.edits {
                assert!(
                    span.start >= end && text.get(span.range()).is_some(),
                    "{fix:?} in {text:?}"
                );
                end = span.end;
            }
        }
        assert!(
            !one.message.is_empty() && !one.message.contains('\n'),
            "{}",
            one.message
        );
        assert!(!one.message.ends_with('.'), "{}", one.message);
    }
}

proptest! {
    #![proptest_config(config(400))]

    #[test]
    fn what_is_printed_reads_back_the_same(sheet in written::sheet()) {
        let diagnostics = subject::form(&sheet);
        prop_assert!(diagnostics.is_empty(), "{sheet}\n{diagnostics:?}");
        let printed = subject::printed(&subject::statements(&sheet));
        prop_assert_eq!(tree(&sheet), tree(&printed), "{}\nprinted\n{}", sheet, printed);
        let again = subject::printed(&subject::statements(&printed));
        prop_assert_eq!(printed, again);
    }

    #[test]
    fn any_text_is_read_without_a_panic(text in ".{0,200}") {
        sound(&text);
    }

    #[test]
    fn any_bytes_are_read_without_a_panic(bytes in prop::collection::vec(any::<u8>(), 0..300)) {
        sound(&String::from_utf8_lossy(&bytes));
    }

    #[test]
    fn any_heap_of_words_is_read_and_checked_without_a_panic(text in written::soup()) {
        sound(&text);
        let report = subject::check_only(&text);
        prop_assert!(!report.evaluated);
        let _ = subject::said(&report);
        let _ = subject::said(&subject::run(&text));
    }

    #[test]
    fn a_torn_sheet_is_checked_without_a_panic(sheet in written::sheet(), cut in any::<prop::sample::Index>(), other in written::word()) {
        let mut places: Vec<usize> = sheet.char_indices().map(|(at, _)| at).collect();
        places.push(sheet.len());
        let at = places[cut.index(places.len())];
        let torn = format!("{}{other}{}", &sheet[..at], &sheet[at..]);
        sound(&torn);
        let _ = subject::said(&subject::run(&torn));
        let _ = subject::said(&subject::run(&sheet[..at]));
    }
}

/// Which base units a case is built of.
fn cases() -> impl Strategy<Value = Case> {
    prop_oneof![dimensioned(&SI), dimensioned(&FRAMES)]
}

proptest! {
    #![proptest_config(config(150))]

    #[test]
    fn any_talk_goes_on_without_a_panic(entries in prop::collection::vec(written::entry(), 1..8), cut in any::<prop::sample::Index>()) {
        let mut talk = subject::Talk::default();
        for entry in &entries {
            let mut places: Vec<usize> = entry.char_indices().map(|(at, _)| at).collect();
            places.push(entry.len());
            talk.assist(entry, places[cut.index(places.len())]);
            let _ = talk.enter(entry);
            prop_assert!(!talk.prompt().is_empty());
        }
    }
}

proptest! {
    #![proptest_config(config(600))]

    #[test]
    fn inferred_dimensions_are_those_of_pencil_and_paper(case in cases()) {
        let sheet = case.sheet(&case.unit());
        let report = subject::run(&sheet);
        prop_assert!(!report.has_errors(), "{sheet}\n{}", subject::said(&report));
        let computed = subject::last_number(&report);
        prop_assert!(computed.is_some(), "{sheet}\n{}", subject::said(&report));
        let (computed, expected) = (computed.unwrap_or(f64::NAN), case.value());
        let close = (computed - expected).abs() <= 4.0 * case.slack();
        prop_assert!(close, "{sheet}\n{computed:e} for {expected:e}");
    }

    #[test]
    fn a_wrong_unit_is_found_out(case in cases()) {
        for wrong in case.wrong_units() {
            let sheet = case.sheet(&wrong);
            let report = subject::run(&sheet);
            prop_assert!(report.has_errors() && !report.evaluated, "{sheet}");
        }
    }

    #[test]
    fn a_wrong_sum_is_found_out(case in cases()) {
        let sheet = case.wrong_sum();
        let report = subject::run(&sheet);
        let errors = report.diagnostics.iter().filter(|(_, one)| one.is_error());
        let codes: Vec<_> = errors.map(|(_, one)| one.code).collect();
        prop_assert_eq!(codes, ["unlike-sides"], "{}", sheet);
    }
}

#[test]
fn units_convert_there_and_back() {
    let units = subject::units();
    let mut checked = 0;
    for one in &units {
        // Ten partners of each are enough to meet every row of the catalogue.
        let alike = units.iter().filter(|other| other.dimension == one.dimension);
        for other in alike.step_by(3).take(10) {
            let there = format!("3.7 {} [{}]", one.spelling, other.spelling);
            let Some(value) = subject::last_number(&subject::run(&there)) else {
                panic!("{there}\n{}", subject::said(&subject::run(&there)));
            };
            let back = format!("{value:e} {} [{}]", other.spelling, one.spelling);
            let again = subject::last_number(&subject::run(&back)).unwrap_or(f64::NAN);
            // Two conversions of two roundings each.
            assert!(
                (again / 3.7 - 1.0).abs() <= 1e-15 * 4.0,
                "{there}; {back} is {again}"
            );
            checked += 1;
        }
    }
    assert!(checked > 300, "{checked}");
}

#[test]
fn threads_change_no_digit() {
    let sheet = "\
x = 0.001 .. 20 in 100000 steps
f(y) = sqrt(0.3*(1 + y)^3 + 0.7) * exp(-y) + sin(y * 1 rad)
mean(f(x))
std(D_L(x) [Mpc])
sum(age(x) [Gyr])
quantile(f(x), 0.3)
integral(f(y), y = 0 .. 20)
table z = 0.01 .. 5 in 20000 steps: D_C(z) [Mpc], f(z)
";
    let run = || {
        let report = subject::run(sheet);
        assert!(
            !report.has_errors() && !report.faulted,
            "{}",
            subject::said(&report)
        );
        format!("{:?}", report.items)
    };
    let alone = subject::on_threads(1, run);
    for threads in [2, 3, 8] {
        assert!(
            alone == subject::on_threads(threads, run),
            "{threads} threads give other digits"
        );
    }
}
