//! Library functions that are a formula, written in the language itself.
//!
//! Each chapter is a sheet: the checker reads it like a user's, after the
//! chapters before it. The comment above a definition is its page of the
//! handbook, and is read here:
//!
//! ```text
//! # Proper size of an object that subtends the angle theta at redshift z.
//! # theta: angle subtended
//! # z: redshift
//! # formula: r = θ D_A(z)
//! # source: Hogg 1999, astro-ph/9905116, sec. 6
//! # example: proper_size(1 arcsec, 1) under concordance is 8.00871 kpc
//! proper_size(theta [rad], z) [kpc] = theta * D_A(z)
//! ```
//!
//! The first lines say what it is. A line `key: …` is one of the fields
//! `symbol`, `words` (under which `help` also finds it), `formula`, `valid`,
//! `source`, `example`, or describes the argument of that name. A line indented
//! by more than one space continues the field above it. Papers are cited from
//! memory; “(from memory)” marks a figure that rests on it. A blank line after a
//! comment keeps it from belonging to what follows.

use crate::catalogue::Topic;
use std::sync::OnceLock;

/// One sheet of the library.
pub struct Chapter {
    /// Its file's name.
    pub name: &'static str,
    /// The chapter of the handbook its functions stand in.
    pub topic: Topic,
    /// Its text.
    pub text: &'static str,
}

/// What is known about one function of the chapters.
#[derive(Clone, Debug, PartialEq)]
pub struct Written {
    /// The name it is defined under.
    pub name: &'static str,
    /// The field's symbol for it, or `""`.
    pub symbol: &'static str,
    /// Words under which `help` also finds it.
    pub synonyms: Vec<&'static str>,
    /// The chapter of the handbook it stands in.
    pub topic: Topic,
    /// One or two sentences: what it is.
    pub about: String,
    /// The arguments in the order of their description, and what they are.
    pub arguments: Vec<(&'static str, String)>,
    /// The formula, in Unicode.
    pub formula: String,
    /// Where it holds, or `""`.
    pub validity: String,
    /// Paper or standard.
    pub source: String,
    /// A claim in the language that is run by the tests.
    pub example: String,
}

/// The chapters, in the order in which they are checked.
pub static CHAPTERS: &[Chapter] = &[
    chapter("light.zij", Topic::Light, include_str!("prelude/light.zij")),
    chapter("spectra.zij", Topic::Light, include_str!("prelude/spectra.zij")),
    chapter("gas.zij", Topic::Light, include_str!("prelude/gas.zij")),
    chapter("sirens.zij", Topic::Light, include_str!("prelude/sirens.zij")),
    chapter("survey.zij", Topic::Structure, include_str!("prelude/survey.zij")),
    chapter("lensing.zij", Topic::Lensing, include_str!("prelude/lensing.zij")),
    chapter(
        "dynamics.zij",
        Topic::Lensing,
        include_str!("prelude/dynamics.zij"),
    ),
    chapter(
        "statistics.zij",
        Topic::Mathematics,
        include_str!("prelude/statistics.zij"),
    ),
];

const fn chapter(name: &'static str, topic: Topic, text: &'static str) -> Chapter {
    Chapter { name, topic, text }
}

/// The pages of all functions in the chapters, in order.
#[must_use]
pub fn written() -> &'static [Written] {
    static WRITTEN: OnceLock<Vec<Written>> = OnceLock::new();
    WRITTEN.get_or_init(|| CHAPTERS.iter().flat_map(pages).collect())
}

/// The pages of one chapter.
fn pages(chapter: &Chapter) -> Vec<Written> {
    let mut pages = Vec::new();
    let mut comment: Vec<&'static str> = Vec::new();
    for line in chapter.text.lines() {
        if let Some(text) = line.strip_prefix('#') {
            comment.push(text);
            continue;
        }
        if starts_definition(line) && !comment.is_empty() {
            pages.push(page(chapter.topic, defined_name(line), &comment));
        }
        comment.clear();
    }
    pages
}

fn starts_definition(line: &str) -> bool {
    line.starts_with(|first: char| !first.is_whitespace())
}

/// The name a definition starts with: all before its bracket or `=`.
fn defined_name(line: &str) -> &str {
    line.split(['(', '[', '=']).next().unwrap_or(line).trim_end()
}

/// The page a comment makes.
fn page(topic: Topic, name: &'static str, comment: &[&'static str]) -> Written {
    let mut page = Written {
        name,
        symbol: "",
        synonyms: Vec::new(),
        topic,
        about: String::new(),
        arguments: Vec::new(),
        formula: String::new(),
        validity: String::new(),
        source: String::new(),
        example: String::new(),
    };
    let mut key = "";
    for line in comment {
        let text = line.trim();
        let continues = line.starts_with("  ");
        match text.split_once(": ").filter(|(key, _)| !continues && is_key(key)) {
            Some((found, value)) => {
                key = found;
                page.put(key, value);
            }
            None => page.put(key, text),
        }
    }
    page
}

/// One word: an argument's name or a field.
fn is_key(word: &str) -> bool {
    !word.is_empty() && !word.contains(char::is_whitespace)
}

impl Written {
    /// Adds a line to the field of this key.
    fn put(&mut self, key: &'static str, text: &'static str) {
        match key {
            "" => append(&mut self.about, text),
            "symbol" => self.symbol = text,
            "words" => self.synonyms.extend(text.split(", ")),
            "formula" => append(&mut self.formula, text),
            "valid" => append(&mut self.validity, text),
            "source" => append(&mut self.source, text),
            "example" => append(&mut self.example, text),
            argument => match self.arguments.last_mut().filter(|(name, _)| *name == argument) {
                Some((_, about)) => append(about, text),
                None => self.arguments.push((argument, text.to_owned())),
            },
        }
    }
}

fn append(field: &mut String, text: &str) {
    if !field.is_empty() {
        field.push(' ');
    }
    field.push_str(text);
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::catalogue::entries;
    use std::collections::HashSet;

    #[test]
    fn a_comment_becomes_a_page() {
        let text = "# How far light runs,\n# and back.\n# symbol: d\n# words: road, way\n# t: time it takes,\n#    both ways\n\
                    # formula: d = c t/2\n# source: Larkspur 1\n# example: road(2 s) is 299792.458 km\n\
                    road(t [s]) [km] = c*t/2\n";
        let chapter = chapter("test", Topic::Light, text);
        let pages = pages(&chapter);
        assert_eq!(pages.len(), 1);
        let page = &pages[0];
        assert_eq!((page.name, page.symbol), ("road", "d"));
        assert_eq!(page.about, "How far light runs, and back.");
        assert_eq!(page.synonyms, ["road", "way"]);
        assert_eq!(page.arguments, [("t", "time it takes, both ways".to_owned())]);
        assert_eq!(page.formula, "d = c t/2");
        assert_eq!(page.example, "road(2 s) is 299792.458 km");
    }

    #[test]
    fn a_comment_before_a_blank_line_is_no_page() {
        let text = "# About the chapter.\n\nx(y) = y\n";
        assert!(pages(&chapter("test", Topic::Light, text)).is_empty());
    }

    #[test]
    fn every_definition_has_a_full_page() {
        let definitions: usize = CHAPTERS
            .iter()
            .map(|chapter| {
                let lines = chapter.text.lines();
                lines
                    .filter(|line| starts_definition(line) && !line.starts_with('#'))
                    .count()
            })
            .sum();
        assert_eq!(written().len(), definitions);
        for page in written() {
            let name = page.name;
            assert!(page.about.ends_with('.'), "{name}: the first lines are sentences");
            assert!(!page.formula.is_empty(), "{name} has no formula");
            assert!(!page.source.is_empty(), "{name} has no source");
            let used = [name, page.symbol]
                .iter()
                .any(|name| !name.is_empty() && page.example.contains(name));
            assert!(used, "{name}: the example does not use it");
        }
    }

    #[test]
    fn pages_describe_the_arguments_of_their_definition() {
        for chapter in CHAPTERS {
            for page in pages(chapter) {
                let start = format!("\n{}(", page.name);
                let Some(at) = chapter.text.find(&start) else {
                    continue;
                };
                let list = &chapter.text[at + start.len()..];
                let named: Vec<&str> = arguments(list);
                let described: Vec<&str> = page.arguments.iter().map(|(name, _)| *name).collect();
                assert_eq!(named, described, "{}", page.name);
            }
        }
    }

    #[test]
    fn no_name_is_taken_twice() {
        let functions = entries().filter(|entry| entry.is_function());
        let mut taken: HashSet<&str> = functions.flat_map(|entry| entry.spellings()).collect();
        for page in written() {
            for name in [page.name, page.symbol] {
                assert!(name.is_empty() || taken.insert(name), "`{name}` is taken twice");
            }
        }
    }

    /// The argument names at the start of `a [Mpc], b = f(1), c) …`.
    fn arguments(list: &'static str) -> Vec<&'static str> {
        let (mut depth, mut start, mut found) = (0, 0, Vec::new());
        for (at, letter) in list.char_indices() {
            match letter {
                '(' | '[' => depth += 1,
                ']' => depth -= 1,
                ')' if depth > 0 => depth -= 1,
                ',' | ')' if depth == 0 => {
                    let word = list[start..at].trim().split([' ', '=']).next().unwrap_or("");
                    found.push(word);
                    start = at + 1;
                    if letter == ')' {
                        break;
                    }
                }
                _ => {}
            }
        }
        found
    }
}
