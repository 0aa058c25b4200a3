//! Search: pages whose meaning has the words that were asked for, and names
//! that are near to them.

use super::layout::Setter;
use super::{codes, entry, language};
use crate::output::look;
use zij_stdlib::model::BASES;
use zij_stdlib::units;

/// Pages listed at most.
const MAX_LISTED: usize = 12;

/// Pages listed at most below the one that was meant.
const MAX_OTHERS: usize = 5;

/// The score of a page that answers a question as it is put.
const ANSWERED: usize = 1000;

/// A score at which a page is meant: a synonym, or the name in other case.
const CERTAIN: usize = 80;

/// A question of more words is cut: it is a paste.
const MAX_WORDS: usize = 12;

/// Words that say nothing about the answer.
const EMPTY_WORDS: [&str; 34] = [
    "a", "an", "and", "are", "as", "at", "between", "can", "do", "does", "for", "from", "get", "how", "i",
    "in", "is", "it", "me", "much", "of", "on", "the", "their", "there", "to", "we", "what", "when", "where",
    "which", "with", "you", "zij",
];

/// Questions as they are put, and the pages that answer them.
const QUESTIONS: [(&str, &[&str]); 30] = [
    ("how far", &["D_C", "D_L", "D_A", "light_travel_distance"]),
    ("far away", &["D_C", "light_travel_distance"]),
    ("how old", &["age"]),
    ("how long ago", &["lookback_time"]),
    ("how big", &["particle_horizon", "angular_scale"]),
    ("how fast", &["recession_speed", "H"]),
    ("how bright", &["distance_modulus", "D_L"]),
    ("how heavy", &["M_sun"]),
    ("how dense", &["critical_density"]),
    ("how hot", &["T_CMB"]),
    ("horizon", &["particle_horizon", "event_horizon", "hubble_radius"]),
    ("observable universe", &["particle_horizon"]),
    (
        "faster than light",
        &["recession_speed", "recession_speed_then", "hubble_radius"],
    ),
    ("age of the universe", &["age"]),
    ("big bang", &["age", "particle_horizon"]),
    ("dark energy", &["w0", "wa", "ΩΛ"]),
    ("dark matter", &["Ωc", "Ωm"]),
    ("curvature", &["Ωk"]),
    ("neutrino", &["mν", "Neff"]),
    ("hubble constant", &["H0", "H"]),
    ("speed of light", &["c"]),
    ("size on the sky", &["D_A", "angular_scale"]),
    ("convert", &["brackets"]),
    ("conversion", &["brackets"]),
    ("plot", &["figure"]),
    ("error bars", &["numbers"]),
    ("save", &["keep", "command line"]),
    ("exit", &["leave"]),
    ("quit", &["leave"]),
    ("another cosmology", &["under", "models"]),
];

/// A page that may be meant.
struct Found {
    /// How well it fits; larger is better.
    score: usize,
    name: String,
    about: String,
}

/// Sets the one page that is meant, or a list of those that may be.
pub(super) fn set(setter: &mut Setter, question: &str) -> Result<(), String> {
    let asked = question.to_lowercase();
    let words: Vec<&str> = words_of(&asked).collect();
    let mut found = candidates(&asked, &words);
    if found.iter().any(|one| one.score > ANSWERED) {
        found.retain(|one| one.score >= CERTAIN);
    }
    found.sort_by_key(|one| std::cmp::Reverse(one.score));
    found.dedup_by(|one, other| one.name == other.name);
    let shown = look::harmless(&crate::output::one_line(question));
    let shown = look::Look::PLAIN.clip(&shown, 40);
    match found.as_slice() {
        [] => Err(format!(
            "the handbook has nothing on {shown}; help lists its chapters"
        )),
        [first, rest @ ..] if first.score >= CERTAIN && rest.iter().all(|one| one.score < CERTAIN) => {
            super::set_exact(setter, &first.name);
            set_others(setter, rest);
            Ok(())
        }
        [only] => {
            super::set_exact(setter, &only.name);
            Ok(())
        }
        [..] => {
            setter.head(&format!("on {shown}"), "help NAME shows the page of one");
            let rows = found
                .iter()
                .take(MAX_LISTED)
                .map(|one| (one.name.as_str(), one.about.as_str()));
            let rows: Vec<_> = rows.collect();
            setter.rows(&rows);
            Ok(())
        }
    }
}

/// What else may have been meant.
fn set_others(setter: &mut Setter, others: &[Found]) {
    if others.is_empty() {
        return;
    }
    setter.gap();
    setter.head("see also", "");
    let rows = others
        .iter()
        .take(MAX_OTHERS)
        .map(|one| (one.name.as_str(), one.about.as_str()));
    setter.rows(&rows.collect::<Vec<_>>());
}

/// Lower-case words that say something.
fn words_of(text: &str) -> impl Iterator<Item = &str> {
    text.split(|letter: char| !letter.is_alphanumeric())
        .filter(|word| !word.is_empty() && !EMPTY_WORDS.contains(word))
        .take(MAX_WORDS)
}

fn candidates(asked: &str, words: &[&str]) -> Vec<Found> {
    let answers: Vec<&str> = QUESTIONS
        .iter()
        .filter(|(question, _)| asked.contains(question))
        .flat_map(|(_, names)| names.iter().copied())
        .collect();
    let rank = |names: &[&str]| answers.iter().position(|answer| names.contains(answer));
    let score = |names: &[&str], synonyms: &[&str], about: &str| {
        let near = names.iter().map(|name| nearness(asked, name)).max().unwrap_or(0);
        let bonus = rank(names).map_or(0, |rank| ANSWERED + answers.len() - rank);
        bonus + near + matching(asked, words, names, synonyms, about)
    };
    let mut found = Vec::new();
    let mut add = |score: usize, name: &str, about: String| {
        if score > 0 {
            found.push(Found {
                score,
                name: name.into(),
                about,
            });
        }
    };
    for item in entry::items() {
        let score = score(&item.spellings, &item.synonyms, &item.about);
        add(score, item.spellings[0], item.summary());
    }
    for page in language::PAGES {
        add(
            score(page.names, &[], page.about),
            page.names[0],
            page.about.into(),
        );
    }
    for base in BASES {
        add(score(&[base.name], &[], base.about), base.name, base.about.into());
    }
    for page in codes::CODES {
        add(score(&[page.code], &[], ""), page.code, page.meaning.into());
    }
    for unit in units::UNITS {
        add(score(&[unit.name], &[], ""), unit.symbol, unit.name.into());
    }
    for near in units::near(asked) {
        if let Some(unit) = units::find(&near) {
            add(20, &near, unit.unit.name.into());
        }
    }
    found
}

/// How many of the words stand in what is known of a page, synonyms and names
/// counting more than sentences. All words must be met somewhere.
fn matching(asked: &str, words: &[&str], names: &[&str], synonyms: &[&str], about: &str) -> usize {
    if words.is_empty() {
        return 0;
    }
    if synonyms.iter().any(|synonym| synonym.to_lowercase() == asked) {
        return 90;
    }
    let mut score = 0;
    for word in words {
        if names.iter().chain(synonyms).any(|known| begins(known, word)) {
            score += 10;
        } else if begins(about, word) {
            score += 4;
        } else {
            return 0;
        }
    }
    score
}

/// Whether a word of the text begins so; a short one has to be the same.
fn begins(text: &str, word: &str) -> bool {
    let whole = word.chars().count() <= 3;
    let fits = |known: &str| {
        if whole {
            known == word
        } else {
            known.starts_with(word)
        }
    };
    text.to_lowercase()
        .split(|letter: char| !letter.is_alphanumeric())
        .any(fits)
}

/// More than 0 for a name that differs by a slip of typing or by case alone.
fn nearness(asked: &str, name: &str) -> usize {
    let lower = name.to_lowercase();
    if lower == asked {
        return 80;
    }
    let length = asked.chars().count();
    if length < 3 || length.abs_diff(name.chars().count()) > 2 {
        return 0;
    }
    let distance = strsim::damerau_levenshtein(asked, &lower);
    if distance <= 1 + length / 6 {
        40 - 10 * distance.min(3)
    } else {
        0
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::output::Look;

    #[test]
    fn every_answer_has_a_page() {
        let lost = QUESTIONS.iter().flat_map(|(_, names)| *names).filter(|name| {
            let mut setter = Setter::new(&Look::PLAIN);
            !super::super::set_exact(&mut setter, name) && !super::super::set_chapter(&mut setter, name)
        });
        assert_eq!(lost.collect::<Vec<_>>(), [&""; 0]);
    }

    #[test]
    fn questions_synonyms_and_slips_lead_to_their_pages() {
        for (asked, first) in [
            ("how far", "D_C"),
            ("how old is the universe", "age("),
            ("comoving_distnace", "D_C"),
            ("plank2018", "planck2018"),
            ("d_l", "D_L"),
            ("megaparsec", "Mpc"),
            ("mixed frames", "mixed-frames"),
        ] {
            let page = super::super::page(&[asked.to_owned()], &Look::PLAIN).expect(asked);
            let start: Vec<_> = page.lines().take(2).collect();
            assert!(start.join("\n").contains(first), "{asked}: {start:?}");
        }
    }
}
