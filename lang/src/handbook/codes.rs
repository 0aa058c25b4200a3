//! One page for each diagnostic code: what it says, why it is said, a sheet
//! that gets it and the same sheet repaired. The tests run both.

mod check;
mod form;
mod run;

/// The page of a diagnostic code.
#[derive(Clone, Copy, Debug)]
pub struct CodePage {
    /// The code.
    pub code: &'static str,
    /// What it says.
    pub meaning: &'static str,
    /// Why it matters.
    pub why: &'static str,
    /// A sheet that gets it; `""` where none is short enough to show.
    pub wrong: &'static str,
    /// The sheet repaired.
    pub right: &'static str,
}

const PARTS: [&[CodePage]; 3] = [form::PAGES, check::PAGES, run::PAGES];

const COUNT: usize = PARTS[0].len() + PARTS[1].len() + PARTS[2].len();

static ALL: [CodePage; COUNT] = {
    let mut all = [PARTS[0][0]; COUNT];
    let (mut part, mut place) = (0, 0);
    while part < PARTS.len() {
        let mut row = 0;
        while row < PARTS[part].len() {
            all[place] = PARTS[part][row];
            place += 1;
            row += 1;
        }
        part += 1;
    }
    all
};

/// All pages: first those on the form of a sheet, then those of the checker,
/// then those on values that could not be computed.
pub static CODES: &[CodePage] = &ALL;

/// The pages of one stage, for the list of codes.
pub(super) fn stages() -> [(&'static str, &'static [CodePage]); 3] {
    [
        ("the form of the sheet", form::PAGES),
        ("names, dimensions and frames", check::PAGES),
        ("values that could not be computed", run::PAGES),
    ]
}

/// The page of this code.
pub(super) fn find(code: &str) -> Option<&'static CodePage> {
    CODES.iter().find(|page| page.code == code)
}

const fn page(
    code: &'static str,
    meaning: &'static str,
    why: &'static str,
    wrong: &'static str,
    right: &'static str,
) -> CodePage {
    CodePage {
        code,
        meaning,
        why,
        wrong,
        right,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::parser::parse;

    #[test]
    fn each_code_has_one_page_with_all_its_parts() {
        for (at, page) in CODES.iter().enumerate() {
            assert!(
                CODES[..at].iter().all(|other| other.code != page.code),
                "{} twice",
                page.code
            );
            assert!(!page.meaning.is_empty() && !page.why.is_empty(), "{}", page.code);
            assert_eq!(page.wrong.is_empty(), page.right.is_empty(), "{}", page.code);
            assert_ne!(page.wrong.is_empty(), page.wrong != page.right, "{}", page.code);
        }
    }

    #[test]
    fn the_wrong_sheet_of_a_form_page_gets_its_code_and_no_other() {
        let mut failures = Vec::new();
        for page in form::PAGES.iter().filter(|page| !page.wrong.is_empty()) {
            let found: Vec<_> = parse(page.wrong).diagnostics.iter().map(|one| one.code).collect();
            if found != [page.code] {
                failures.push((page.code, found));
            }
        }
        assert_eq!(failures, []);
    }

    #[test]
    fn every_other_sheet_reads_without_a_complaint() {
        let right = CODES.iter().map(|page| page.right);
        let wrong = check::PAGES.iter().chain(run::PAGES).map(|page| page.wrong);
        let complaint = |sheet: &'static str| {
            let found = parse(sheet).diagnostics;
            (!found.is_empty()).then(|| (sheet, found[0].message.clone()))
        };
        let failures: Vec<_> = right.chain(wrong).filter_map(complaint).collect();
        assert_eq!(failures, []);
    }
}
