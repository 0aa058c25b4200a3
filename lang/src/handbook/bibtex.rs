//! The works behind names, as BibTeX records for a paper.

use crate::check::library;
use zij_stdlib::bibliography::{Reference, cited_in, references};
use zij_stdlib::model::BASES;
use zij_stdlib::{prelude, units};

/// The records of the works that stand behind these names, each once; of all
/// works, where no name is given.
///
/// # Errors
/// A sentence on the first name that the library does not know.
pub(super) fn records(names: &[&str]) -> Result<String, String> {
    let mut found: Vec<&Reference> = Vec::new();
    for name in names {
        let Some(source) = source_of(name) else {
            return Err(format!("the library has no {name}, so there is no work to name"));
        };
        for reference in cited_in(&source) {
            if !found.iter().any(|known| known.key == reference.key) {
                found.push(reference);
            }
        }
    }
    if names.is_empty() {
        found.extend(references());
    }
    let texts: Vec<&str> = found.iter().map(|reference| reference.bibtex.as_str()).collect();
    Ok(texts.join("\n"))
}

/// What the library says of where a function, value, model or unit comes from.
fn source_of(name: &str) -> Option<String> {
    let entry = library::function(name).or_else(|| library::value(name));
    let entry = entry.map(|entry| entry.source.to_owned());
    let canonical = library::canonical(name);
    let written = || prelude::written().iter().find(|item| item.name == canonical);
    let base = || BASES.iter().find(|base| base.name == name);
    entry
        .or_else(|| written().map(|item| item.source.clone()))
        .or_else(|| base().map(|base| base.source.to_owned()))
        .or_else(|| units::find(name).map(|found| found.unit.source.to_owned()))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_function_a_model_and_a_unit_have_their_works() {
        let records = records(&["D_C", "planck2018"]).expect("records");
        assert!(
            records.contains("Hogg") && records.contains("Planck"),
            "{records}"
        );
        assert_eq!(records.matches("@").count(), 2, "{records}");
        assert!(super::records(&["D_C", "nothing"]).is_err());
    }

    #[test]
    fn without_a_name_all_works_are_given() {
        let all = records(&[]).expect("records");
        assert_eq!(all.matches("\n@").count() + 1, references().len());
    }
}
