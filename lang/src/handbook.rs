//! The handbook: a page for every name, unit, model, statement, word and
//! message, and a list for every chapter.
//!
//! ```text
//!   topic --exact name--> entry, language, codes --+
//!         --chapter-----> a list of those ---------+--> layout --> text
//!         --search------> by meaning, near names --+
//! ```
//!
//! What is known of the library stands in its catalogue and is only set here.

mod bibtex;
pub mod codes;
mod entry;
mod language;
mod layout;
mod search;
mod written;

pub use codes::{CODES, CodePage};

use crate::output::Look;
use entry::Item;
use language::{Chapter, LanguagePage};
use layout::Setter;
use zij_stdlib::catalogue::Topic;
use zij_stdlib::model::{BASES, PARAMETERS};
use zij_stdlib::units;

/// The page on a topic: the words of a command line or of a `help` statement.
/// Without a topic, the chapters.
///
/// # Errors
/// A sentence, where the handbook has nothing on it.
pub fn page(topic: &[String], look: &Look) -> Result<String, String> {
    let words: Vec<&str> = topic.iter().flat_map(|words| words.split_whitespace()).collect();
    if let ["bibtex", names @ ..] = words.as_slice() {
        return bibtex::records(names);
    }
    let topic = topic.join(" ");
    let topic = topic.trim();
    let mut setter = Setter::new(look);
    if topic.is_empty() {
        set_overview(&mut setter);
        return Ok(setter.finish());
    }
    if !set_exact(&mut setter, topic) && !set_chapter(&mut setter, topic) {
        search::set(&mut setter, topic)?;
    }
    Ok(setter.finish())
}

// ---- exact names ----

/// Sets every page with this very name. Whether there was one.
fn set_exact(setter: &mut Setter, name: &str) -> bool {
    let mut found = false;
    let mut next = |setter: &mut Setter| {
        if found {
            setter.gap();
        }
        found = true;
    };
    let bare = name.trim_end_matches("()");
    for item in entry::items().filter(|item| item.spellings.contains(&bare)) {
        next(setter);
        item.set(setter);
    }
    for page in language::find(name) {
        next(setter);
        set_language(setter, page);
    }
    if let Some(base) = entry::base(name) {
        next(setter);
        entry::set_base(setter, base);
    }
    if let Some(parameter) = entry::model_parameter(name) {
        next(setter);
        entry::set_parameter(setter, parameter);
    }
    if let Some(unit) = units::find(name) {
        next(setter);
        entry::set_unit(setter, name, &unit);
    }
    if let Some(page) = codes::find(name) {
        next(setter);
        set_code(setter, page);
    }
    found
}

fn set_language(setter: &mut Setter, page: &LanguagePage) {
    let title = page.names.first().copied().unwrap_or("");
    setter.head(title, page.about);
    setter.gap();
    for form in page.forms {
        setter.sheet(form);
    }
    setter.gap();
    setter.paragraph(page.text);
    if !page.example.is_empty() {
        setter.gap();
        setter.paragraph("Example:");
        setter.sheet(page.example);
    }
}

fn set_code(setter: &mut Setter, page: &CodePage) {
    setter.head(page.code, "a message");
    setter.paragraph(page.meaning);
    setter.paragraph(page.why);
    if page.wrong.is_empty() {
        return;
    }
    setter.gap();
    setter.paragraph("Wrong:");
    setter.sheet(page.wrong);
    setter.paragraph("Right:");
    setter.sheet(page.right);
}

// ---- chapters ----

/// The chapters of the library.
const TOPICS: [(Topic, &str, &str); 9] = [
    (
        Topic::Distances,
        "distances",
        "comoving, angular-diameter and luminosity distances, volumes",
    ),
    (
        Topic::Horizons,
        "horizons",
        "particle and event horizons, recession speeds, light cones",
    ),
    (
        Topic::Background,
        "background",
        "expansion rate, times, densities",
    ),
    (
        Topic::Model,
        "model values",
        "parameters of the model in force, as values",
    ),
    (
        Topic::Light,
        "light",
        "fluxes, magnitudes, wavelengths, redshifts",
    ),
    (
        Topic::Structure,
        "structure",
        "recombination, growth, the power spectrum, halos",
    ),
    (Topic::Lensing, "lensing", "lensing and dynamics"),
    (
        Topic::Constants,
        "constants",
        "constants of nature and of astronomy",
    ),
    (
        Topic::Mathematics,
        "mathematics",
        "functions of numbers and of series",
    ),
];

/// Chapters that are lists of other things than functions and values.
const LISTS: [(&str, &str); 4] = [
    ("units", "units by what they measure"),
    ("models", "published sets of parameters, textbook models"),
    ("parameters", "what `with` may set in a model"),
    (
        "messages",
        "the code of every message, with a sheet that gets it and its repair",
    ),
];

fn set_overview(setter: &mut Setter) {
    setter.head("The handbook of zij", "");
    setter.paragraph(
        "help NAME shows a page: of a function, constant, unit, model, parameter, word of the language, or the code \
         of a message. help CHAPTER lists one of the chapters below. Other words are searched for: help \"how far\".",
    );
    setter.gap();
    setter.head("The language", "");
    setter.rows(&Chapter::ALL.map(|chapter| (chapter.name(), chapter.about())));
    setter.gap();
    setter.head("The library", "");
    let filled = TOPICS
        .iter()
        .filter(|(topic, ..)| entry::items().any(|item| item.topic == *topic));
    let chapters = filled.map(|(_, name, about)| (*name, *about));
    let rows: Vec<_> = chapters.chain(LISTS).collect();
    setter.rows(&rows);
    setter.gap();
    setter.head("Start here", "");
    for line in [
        "help distances",
        "help D_L",
        "help claim",
        "help brackets",
        "help mixed-frames",
        "help bibtex D_L",
    ] {
        setter.sheet(line);
    }
}

/// Sets the list of a chapter. Whether there is such a chapter.
fn set_chapter(setter: &mut Setter, name: &str) -> bool {
    let name = name.to_lowercase();
    if let Some(chapter) = Chapter::ALL.into_iter().find(|chapter| chapter.name() == name) {
        setter.head(chapter.name(), chapter.about());
        let rows: Vec<_> = language::of(chapter)
            .map(|page| (page.names[0], page.about))
            .collect();
        setter.rows(&rows);
        return true;
    }
    if let Some((topic, name, about)) = TOPICS.into_iter().find(|(_, known, _)| *known == name) {
        let items: Vec<_> = entry::items().filter(|item| item.topic == topic).collect();
        if items.is_empty() {
            return false;
        }
        setter.head(name, about);
        set_list(setter, &items);
        return true;
    }
    match name.as_str() {
        "units" => {
            setter.head("units", "by what they measure");
            setter.rows(&entry::unit_rows());
        }
        "models" => {
            setter.head("models", "use: assume NAME, EXPR under NAME, NAME with H0 = …");
            let rows: Vec<_> = BASES.iter().map(|base| (base.name, base.about)).collect();
            setter.rows(&rows);
        }
        "parameters" => {
            setter.head("parameters", "of models, set after `with`");
            let rows: Vec<_> = PARAMETERS.iter().map(|one| (one.name, one.about)).collect();
            setter.rows(&rows);
        }
        "messages" | "errors" | "codes" | "warnings" => {
            setter.head("messages", "help CODE shows the page of one");
            for (stage, pages) in codes::stages() {
                setter.gap();
                setter.head(stage, "");
                let rows: Vec<_> = pages.iter().map(|page| (page.code, page.meaning)).collect();
                setter.rows(&rows);
            }
        }
        _ => return false,
    }
    true
}

fn set_list(setter: &mut Setter, items: &[Item]) {
    let rows: Vec<_> = items.iter().map(|item| (item.brief(), item.summary())).collect();
    setter.rows(&rows);
}

#[cfg(test)]
mod tests {
    use super::*;

    fn text(topic: &str) -> String {
        page(&[topic.to_owned()], &Look::PLAIN).unwrap_or_else(|reason| panic!("{topic}: {reason}"))
    }

    #[test]
    fn every_code_chapter_unit_and_name_has_a_page_that_begins_with_it() {
        for one in CODES {
            assert!(text(one.code).contains(&format!("{}   a message", one.code)));
        }
        for chapter in Chapter::ALL {
            assert!(text(chapter.name()).starts_with(chapter.name()));
        }
        for unit in units::UNITS {
            assert!(text(unit.symbol).contains(unit.source), "{}", unit.symbol);
        }
        for item in entry::items() {
            for spelling in &item.spellings {
                let title = item.signature.split(' ').next().unwrap_or("");
                assert!(text(spelling).contains(title), "{spelling}");
            }
        }
        for base in BASES {
            assert!(text(base.name).contains(base.source) || look_wraps(base.source));
        }
    }

    /// A long source is broken between lines.
    fn look_wraps(source: &str) -> bool {
        source.len() > 60
    }

    #[test]
    fn pages_fit_on_a_narrow_terminal() {
        let look = Look {
            width: 30,
            ..Look::PLAIN
        };
        let long = |line: &&str| {
            let word = line.split_whitespace().map(crate::output::look::width).max();
            crate::output::look::width(line) > 30 && word.unwrap_or(0) < 20 && !line.starts_with("    ")
        };
        for topic in [
            "",
            "constants",
            "messages",
            "units",
            "brackets",
            "mixed-frames",
            "k_B",
            "Mpc",
        ] {
            let text = page(&[topic.to_owned()], &look).unwrap_or_default();
            assert!(!text.is_empty(), "{topic}");
            assert_eq!(text.lines().find(long), None, "{topic}");
        }
    }

    #[test]
    fn pages_for_an_ascii_terminal_are_ascii() {
        let look = Look {
            unicode: false,
            ..Look::PLAIN
        };
        let topics = [
            "",
            "messages",
            "units",
            "notation",
            "brackets",
            "numbers",
            "constants",
        ];
        for topic in topics {
            let text = page(&[topic.to_owned()], &look).unwrap_or_default();
            assert!(text.is_ascii() && !text.is_empty(), "{topic}: {text}");
        }
    }

    #[test]
    fn nonsense_is_refused_in_one_line() {
        for topic in ["qqqqzzzz", "\u{1b}[2J", "\0", &"qq ".repeat(1000)] {
            let refused = page(&[topic.to_owned()], &Look::PLAIN);
            let reason = refused.expect_err(topic);
            assert!(reason.lines().count() == 1 && reason.len() < 200, "{reason}");
        }
    }
}
