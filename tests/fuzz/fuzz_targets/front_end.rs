//! The front end on any text: it is lexed, cut, parsed, printed, parsed again
//! and checked; nothing panics, every place lies in the text, every repair can
//! be made, and what has no error reads back the same from its printed form.
//!
//! ```text
//! cargo +nightly fuzz run --fuzz-dir tests/fuzz front_end tests/fuzz/corpus examples tests/sheets/parser
//! ```
//!
//! What it finds is kept in `tests/fuzz/artifacts`; minimised, it becomes a
//! fixture.
#![no_main]

use libfuzzer_sys::fuzz_target;
use zij_tests::fixture::apply;
use zij_tests::subject;

fuzz_target!(|bytes: &[u8]| {
    let text = String::from_utf8_lossy(bytes);
    let found = subject::form(&text);
    for one in &found {
        for label in one.others.iter().chain([&one.at]) {
            assert!(text.get(label.span.range()).is_some(), "{label:?}");
        }
        for fix in &one.fixes {
            let _ = apply(&text, fix);
        }
    }
    if found.is_empty() {
        let printed = subject::printed(&subject::statements(&text));
        assert_eq!(subject::form(&printed), [], "printed: {printed}");
        assert_eq!(printed, subject::printed(&subject::statements(&printed)));
    }
    let _ = subject::said(&subject::check_only(&text));
});
