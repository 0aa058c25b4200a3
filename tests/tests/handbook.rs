//! The pages of the handbook on messages: each code has one, its wrong sheet
//! gets the code and its right sheet does not.

use std::collections::BTreeSet;
use zij_lang::handbook::{CODES, CodePage};
use zij_tests::repository;
use zij_tests::subject::{self, Folder};

/// The files that the pages speak of.
fn folder() -> Folder {
    Folder(vec![
        ("sample.csv", "z,v [km/s]\n0.5,100\n0.7,200\n"),
        ("broken.csv", "z,v [km/s]\n0.5,100\n0.7\n"),
        ("empty.csv", ""),
        ("cycle.zij", "include \"cycle.zij\"\n"),
        ("definitions.zij", "square_of(x) = x*x\n"),
    ])
}

fn codes(sheet: &str) -> Vec<&'static str> {
    let report = subject::run_with(folder(), sheet);
    report.diagnostics.iter().map(|(_, one)| one.code).collect()
}

fn shown(pages: &[String]) -> String {
    pages.join("\n")
}

#[test]
fn each_wrong_sheet_gets_its_code() {
    let missing = |page: &&CodePage| {
        let gets = codes(page.wrong).contains(&page.code);
        !page.wrong.is_empty() && !gets
    };
    let pages: Vec<String> = CODES
        .iter()
        .filter(missing)
        .map(|page| format!("{}: {:?} from\n{}", page.code, codes(page.wrong), page.wrong))
        .collect();
    assert!(pages.is_empty(), "{}", shown(&pages));
}

#[test]
fn each_right_sheet_is_free_of_it_and_of_errors() {
    let mut pages = Vec::new();
    for page in CODES.iter().filter(|page| !page.right.is_empty()) {
        let report = subject::run_with(folder(), page.right);
        if report.has_errors() || codes(page.right).contains(&page.code) {
            pages.push(format!("{}\n{}", page.code, subject::said(&report)));
        }
    }
    assert!(pages.is_empty(), "{}", shown(&pages));
}

/// The codes that the sources give, read off their text.
fn given_codes() -> BTreeSet<String> {
    let mut found = BTreeSet::new();
    for path in repository::files("lang/src", "rs") {
        let text = repository::read(&path);
        let code = text.split("#[cfg(test)]").next().unwrap_or("");
        for opening in ["Diagnostic::error(", "Diagnostic::warning(", "code: "] {
            for (at, _) in code.match_indices(opening) {
                let rest = code[at + opening.len()..].trim_start();
                let literal = rest.strip_prefix('"').and_then(|rest| rest.split('"').next());
                found.extend(literal.map(String::from));
            }
        }
    }
    found
}

#[test]
fn each_code_that_is_given_has_its_page() {
    let given = given_codes();
    assert!(given.len() > 40, "{given:?}");
    let lost: Vec<_> = given
        .iter()
        .filter(|code| !CODES.iter().any(|page| page.code == **code))
        .collect();
    assert!(lost.is_empty(), "without a page: {lost:?}");
}
