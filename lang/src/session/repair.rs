//! Repairs are tried before they are offered: the text is mended and checked
//! again, and only what leaves fewer mistakes is kept.

use super::Reach;
use crate::check::Checker;
use crate::diagnostic::{Diagnostic, Fix};
use crate::source::Source;

/// Text checked again for one report at most; what is left over is not
/// offered.
const MAX_BYTES_TRIED: usize = 2 << 20;
/// Repairs tried for one report at most.
const MAX_TRIED: usize = 100;

pub(super) fn prove(
    diagnostics: &mut [(usize, Diagnostic)],
    before: &Checker,
    source: &Source,
    reach: &Reach<'_>,
) {
    let own = before.sources.len();
    let all = counts(diagnostics);
    let mut budget = MAX_BYTES_TRIED;
    let mut tries = MAX_TRIED;
    for (number, diagnostic) in diagnostics.iter_mut() {
        let offered = std::mem::take(&mut diagnostic.fixes);
        if *number != own {
            continue;
        }
        for fix in offered {
            if tries == 0 || budget < source.text.len() {
                break;
            }
            (tries, budget) = (tries - 1, budget - source.text.len());
            if helps(&fix, all, before, source, reach) {
                diagnostic.fixes.push(fix);
            }
        }
    }
}

/// How many errors, and how many warnings.
fn counts(diagnostics: &[(usize, Diagnostic)]) -> (usize, usize) {
    let errors = diagnostics.iter().filter(|(_, one)| one.is_error()).count();
    (errors, diagnostics.len() - errors)
}

fn helps(
    fix: &Fix,
    (errors, warnings): (usize, usize),
    before: &Checker,
    source: &Source,
    reach: &Reach<'_>,
) -> bool {
    let Some(text) = mended(&source.text, fix) else {
        return false;
    };
    let mut trial = before.clone();
    trial.tasks.clear();
    trial.diagnostics.clear();
    trial.check(Source::new(&source.name, &text), reach);
    let after = counts(&trial.diagnostics);
    after.0 < errors || (after.0 == errors && after.1 < warnings)
}

/// The text with the edits of a fix made.
#[must_use]
pub(super) fn mended(text: &str, fix: &Fix) -> Option<String> {
    let mut mended = String::with_capacity(text.len() + 16);
    let mut done = 0;
    for (span, new) in &fix.edits {
        let range = span.range();
        if range.start < done {
            return None;
        }
        mended.push_str(text.get(done..range.start)?);
        mended.push_str(new);
        done = range.end;
    }
    mended.push_str(text.get(done..)?);
    Some(mended)
}
