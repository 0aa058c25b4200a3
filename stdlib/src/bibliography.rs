//! The works that sources name, as BibTeX.
//!
//! They stand in `bibliography.bib`, each with the words by which a source
//! cites it: `Hogg 1999` in “Hogg 1999, astro-ph/9905116, sec. 4”. So what an
//! entry rests on is found in its source, and nothing is said twice.

use std::sync::OnceLock;

/// A work.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Reference {
    /// Its key, by which LaTeX cites it.
    pub key: &'static str,
    /// The words by which sources name it.
    pub cited_as: Vec<&'static str>,
    /// Its BibTeX record.
    pub bibtex: String,
}

/// All works, in the order of the file.
#[must_use]
pub fn references() -> &'static [Reference] {
    static REFERENCES: OnceLock<Vec<Reference>> = OnceLock::new();
    REFERENCES.get_or_init(|| records(include_str!("bibliography.bib")))
}

/// The works that a source names, in the order of the file.
#[must_use]
pub fn cited_in(source: &str) -> Vec<&'static Reference> {
    let named = |reference: &&Reference| reference.cited_as.iter().any(|words| source.contains(words));
    references().iter().filter(named).collect()
}

fn records(text: &'static str) -> Vec<Reference> {
    let blocks = text.split("\n\n").map(str::trim);
    blocks
        .filter(|block| block.starts_with('@'))
        .map(record)
        .collect()
}

fn record(block: &'static str) -> Reference {
    let mut reference = Reference {
        key: "",
        cited_as: Vec::new(),
        bibtex: String::new(),
    };
    for line in block.lines() {
        if let Some(cited) = line.trim().strip_prefix("cited = {") {
            reference.cited_as = cited.trim_end_matches("},").split('|').collect();
            continue;
        }
        if let Some((_, key)) = line.split_once('{').filter(|_| line.starts_with('@')) {
            reference.key = key.trim_end_matches(',');
        }
        reference.bibtex.push_str(line);
        reference.bibtex.push('\n');
    }
    reference
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::catalogue::entries;
    use crate::model::BASES;
    use crate::prelude::written;
    use crate::units::UNITS;
    use std::collections::HashSet;

    /// What needs no work to stand on.
    const OF_ITSELF: [&str; 3] = ["common practice", "exact identity", "closed form"];

    #[test]
    fn every_source_names_a_work() {
        let catalogue = entries().map(|entry| (entry.name, entry.source));
        let units = UNITS.iter().map(|unit| (unit.symbol, unit.source));
        let models = BASES.iter().map(|base| (base.name, base.source));
        let prelude = written().iter().map(|page| (page.name, page.source.as_str()));
        let unknown: Vec<String> = catalogue
            .chain(units)
            .chain(models)
            .chain(prelude)
            .filter(|(_, source)| {
                cited_in(source).is_empty() && !OF_ITSELF.iter().any(|words| source.contains(words))
            })
            .map(|(name, source)| format!("{name}: {source}"))
            .collect();
        assert!(
            unknown.is_empty(),
            "add a record to bibliography.bib for:\n{}",
            unknown.join("\n")
        );
    }

    #[test]
    fn records_are_complete_and_their_keys_unlike() {
        let mut keys = HashSet::new();
        for reference in references() {
            let (key, bibtex) = (reference.key, &reference.bibtex);
            assert!(keys.insert(key), "{key} stands there twice");
            assert!(!reference.cited_as.is_empty(), "{key}: not cited as anything");
            for field in ["author", "title", "year"] {
                assert!(
                    bibtex.contains(&format!("  {field} = {{")),
                    "{key} has no {field}"
                );
            }
            assert_eq!(bibtex.matches('{').count(), bibtex.matches('}').count(), "{key}");
            assert!(bibtex.is_ascii() && !bibtex.contains("cited"), "{key}");
        }
    }

    #[test]
    fn a_source_names_its_works() {
        let keys: Vec<&str> = cited_in("IAU 2015 Resolution B3; G: CODATA 2022")
            .iter()
            .map(|reference| reference.key)
            .collect();
        assert_eq!(keys, ["codata2022", "iau2015b3"]);
        assert!(cited_in("common practice").is_empty());
    }
}
