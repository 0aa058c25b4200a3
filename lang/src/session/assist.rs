//! What helps while a line is being typed: its dimension so far, what a word
//! could become, and what each name is.

use super::{Completion, Hint, NameKind, Session};
use crate::check::statement_words::{KEYWORDS, STATEMENTS};
use crate::check::{Checker, Meaning, Space, Task, library};
use crate::source::Source;
use crate::token::{Token, TokenKind};
use std::ops::Range;
use zij_stdlib::catalogue::entries;
use zij_stdlib::model::{BASES, PARAMETERS};
use zij_stdlib::prelude;
use zij_stdlib::units::{self, PREFIXES, UNITS};

/// Completions shown at most.
const MOST_COMPLETIONS: usize = 200;

impl Session {
    /// The dimension of a line so far, or what is wrong with it.
    #[must_use]
    pub fn hint(&self, line: &str) -> Hint {
        if line.trim().is_empty() || self.wants_more(line) {
            return Hint::Nothing;
        }
        let mut trial = self.checker.clone();
        trial.at_prompt = true;
        trial.tasks.clear();
        trial.diagnostics.clear();
        let from = trial.environment.next();
        trial.check(Source::new("line", line), &super::Reach(&*self.files));
        if let Some((_, wrong)) = trial.diagnostics.iter().find(|(_, one)| one.is_error()) {
            return Hint::Wrong(wrong.message.clone());
        }
        dimension_of(&trial, from).map_or(Hint::Nothing, Hint::Dimension)
    }

    /// What the word that ends at byte `cursor` could become, and where that
    /// word starts.
    #[must_use]
    pub fn complete(&self, line: &str, cursor: usize) -> (usize, Vec<Completion>) {
        let Some(before) = line.get(..cursor) else {
            return (cursor, Vec::new());
        };
        let is_part = |letter: char| letter.is_alphanumeric() || letter == '_' || letter == '⊙';
        let start = before
            .char_indices()
            .rev()
            .take_while(|(_, letter)| is_part(*letter))
            .last();
        let start = start.map_or(cursor, |(at, _)| at);
        let word = &before[start..];
        let mut found = match place_of(&before[..start]) {
            Spot::Unit => self.units(word),
            Spot::Model => self.models(word),
            Spot::Parameter => parameters(word),
            Spot::Column(table) => self.columns(&table, word),
            Spot::Value => self.values(word, before[..start].trim().is_empty()),
        };
        found.dedup_by(|a, b| a.name == b.name && a.kind == b.kind);
        found.truncate(MOST_COMPLETIONS);
        (start, found)
    }

    fn values(&self, word: &str, at_start: bool) -> Vec<Completion> {
        let mut found = Vec::new();
        for (id, binding) in self.checker.environment.visible() {
            let about = match &binding.meaning {
                Meaning::Function(_) => self.checker.signature_of(id),
                Meaning::Value(value) => self.checker.describe_scheme(&value.scheme),
                Meaning::Table(_) => "a table".into(),
                Meaning::Model(_) | Meaning::Broken => continue,
            };
            let own = matches!(binding.space, Space::Value | Space::Function);
            if own && binding.name.starts_with(word) {
                found.push(Completion {
                    name: binding.name.to_string(),
                    kind: "yours",
                    about,
                });
            }
        }
        for entry in entries() {
            let kind = if entry.is_function() {
                "function"
            } else {
                "constant"
            };
            for name in entry.spellings().filter(|name| name.starts_with(word)) {
                let about = format!("{}  {}", library::signature(entry), entry.about);
                found.push(Completion {
                    name: name.to_owned(),
                    kind,
                    about,
                });
            }
        }
        for item in prelude::written()
            .iter()
            .filter(|item| item.name.starts_with(word))
        {
            found.push(Completion {
                name: item.name.to_owned(),
                kind: "function",
                about: item.about.to_owned(),
            });
        }
        let words = STATEMENTS.iter().filter(|_| at_start).chain(KEYWORDS.iter());
        for (name, about) in words.filter(|(name, _)| !word.is_empty() && name.starts_with(word)) {
            found.push(Completion {
                name: (*name).to_owned(),
                kind: "word",
                about: (*about).to_owned(),
            });
        }
        found
    }

    fn units(&self, word: &str) -> Vec<Completion> {
        let environment = &self.checker.environment;
        let own = environment
            .units
            .keys()
            .chain(environment.tallies.iter().map(|(name, _)| name));
        let mut found: Vec<Completion> = own
            .filter(|name| name.starts_with(word))
            .map(|name| Completion {
                name: name.to_string(),
                kind: "unit",
                about: "yours".into(),
            })
            .collect();
        found.sort_by(|a, b| a.name.cmp(&b.name));
        let unit = |name: String, about: String| Completion {
            name,
            kind: "unit",
            about,
        };
        for one in UNITS {
            let plain = one.spellings().filter(|name| name.starts_with(word));
            found
                .extend(plain.map(|name| unit(name.to_owned(), format!("{}: {}", one.name, one.definition))));
        }
        for one in UNITS.iter().filter(|_| !word.is_empty()) {
            for prefix in PREFIXES.iter().filter(|prefix| one.prefixes.allow(prefix.power)) {
                let name = format!("{}{}", prefix.symbol, one.symbol);
                if name.starts_with(word) {
                    found.push(unit(name, format!("{}{}", prefix.name, one.name)));
                }
            }
        }
        found
    }

    fn models(&self, word: &str) -> Vec<Completion> {
        let own = self
            .checker
            .environment
            .visible()
            .filter(|(_, binding)| binding.space == Space::Model);
        let own = own.map(|(_, binding)| (binding.name.to_string(), "yours".to_owned()));
        let bases = BASES
            .iter()
            .map(|base| (base.name.to_owned(), base.about.to_owned()));
        let all = own.chain(bases).filter(|(name, _)| name.starts_with(word));
        all.map(|(name, about)| Completion {
            name,
            kind: "model",
            about,
        })
        .collect()
    }

    fn columns(&self, table: &str, word: &str) -> Vec<Completion> {
        let found = self.checker.environment.latest(Space::Value, table);
        let Some(Meaning::Table(table)) = found.map(|id| &self.checker.environment.binding(id).meaning)
        else {
            return Vec::new();
        };
        let columns = table
            .columns
            .iter()
            .filter(|column| column.name.starts_with(word));
        columns
            .map(|column| Completion {
                name: column.name.to_string(),
                kind: "column",
                about: self.checker.describe_scheme(&column.scheme),
            })
            .collect()
    }

    /// The pieces of a line by what they are; gaps are plain.
    #[must_use]
    pub fn highlight(&self, line: &str) -> Vec<(Range<usize>, NameKind)> {
        let tokens = crate::parser::tokens(line);
        let mut depth = 0_i32;
        let mut pieces = Vec::new();
        for (place, token) in tokens.iter().enumerate() {
            match token.kind {
                TokenKind::LeftBracket => depth += 1,
                TokenKind::RightBracket => depth -= 1,
                _ => {}
            }
            if let Some(kind) = self.kind_of(line, &tokens, place, depth > 0) {
                pieces.push((token.span.range(), kind));
            }
        }
        pieces
    }

    fn kind_of(&self, line: &str, tokens: &[Token], place: usize, in_bracket: bool) -> Option<NameKind> {
        let token = tokens[place];
        let text = line.get(token.span.range())?;
        let before = place.checked_sub(1).map(|before| tokens[before]);
        match token.kind {
            TokenKind::Number | TokenKind::Concise | TokenKind::Superscript => Some(NameKind::Number),
            TokenKind::String | TokenKind::Comment => Some(NameKind::Text),
            kind if kind.is_reserved() => Some(NameKind::Keyword),
            kind if kind.is_contextual() => Some(NameKind::Keyword),
            TokenKind::Word => Some(self.kind_of_word(text, before, tokens.get(place + 1), in_bracket)),
            _ => None,
        }
    }

    fn kind_of_word(
        &self,
        text: &str,
        before: Option<Token>,
        after: Option<&Token>,
        in_bracket: bool,
    ) -> NameKind {
        let called = after.is_some_and(|token| token.kind == TokenKind::LeftParenthesis);
        let environment = &self.checker.environment;
        let is_unit = units::find(text).is_some()
            || text == "h"
            || environment.units.contains_key(text)
            || environment.tally(text).is_some();
        let after_number = before.is_some_and(|token| {
            matches!(
                token.kind,
                TokenKind::Number | TokenKind::Concise | TokenKind::RightBrace
            )
        });
        if is_unit && (in_bracket || after_number) {
            return NameKind::Unit;
        }
        let after_model_word =
            before.is_some_and(|token| matches!(token.kind, TokenKind::Assume | TokenKind::Under));
        if after_model_word
            || BASES.iter().any(|base| base.name == text)
            || environment.latest(Space::Model, text).is_some()
        {
            return NameKind::Model;
        }
        if called {
            let known = environment.latest(Space::Function, text).is_some()
                || library::spellings(true).any(|name| name == text);
            let word = crate::check::call::BINDING_FORMS
                .iter()
                .any(|(name, _)| *name == text)
                || crate::check::call::series_function(text).is_some();
            return if known || word {
                NameKind::Function
            } else {
                NameKind::Unknown
            };
        }
        if environment.latest(Space::Value, text).is_some() || library::value(text).is_some() {
            return NameKind::Value;
        }
        if is_unit {
            NameKind::Unit
        } else {
            NameKind::Unknown
        }
    }
}

/// The dimension of what the last statement shows or binds.
fn dimension_of(checker: &Checker, from: u32) -> Option<String> {
    if let Some(task) = checker.tasks.last() {
        return match task {
            Task::Show(show) if show.face.truth => Some("true or false".into()),
            Task::Show(show) => Some(checker.in_words(&checker.settled(&show.face.form))),
            Task::Claim(claim) => Some(checker.in_words(&checker.settled(&claim.face.form))),
            Task::Explain(task) => Some(checker.in_words(&checker.settled(&task.show.face.form))),
            Task::Table(_) | Task::Help(_) => None,
        };
    }
    let id = checker
        .environment
        .next()
        .checked_sub(1)
        .filter(|id| *id >= from)?;
    match &checker.environment.binding(id).meaning {
        Meaning::Value(value) => Some(checker.describe_scheme(&value.scheme)),
        Meaning::Function(_) => Some(checker.signature_of(id)),
        Meaning::Model(_) => Some("a model".into()),
        Meaning::Table(_) => Some("a table".into()),
        Meaning::Broken => None,
    }
}

/// What can stand where the cursor is.
enum Spot {
    Unit,
    Model,
    Parameter,
    Column(String),
    Value,
}

/// What can stand after this text.
fn place_of(before: &str) -> Spot {
    let tokens = crate::parser::tokens(before);
    let opened = |kind: TokenKind| tokens.iter().filter(|token| token.kind == kind).count();
    if opened(TokenKind::LeftBracket) > opened(TokenKind::RightBracket) {
        return Spot::Unit;
    }
    let last = tokens.last().map(|token| token.kind);
    match last {
        Some(TokenKind::Number | TokenKind::Concise | TokenKind::RightBrace) => Spot::Unit,
        Some(TokenKind::Assume | TokenKind::Under) => Spot::Model,
        Some(TokenKind::With) => Spot::Parameter,
        Some(TokenKind::Comma) if in_with_list(&tokens) => Spot::Parameter,
        Some(TokenKind::Dot) => match tokens.iter().rev().nth(1) {
            Some(token) if token.kind == TokenKind::Word => {
                Spot::Column(before[token.span.range()].to_owned())
            }
            Some(_) | None => Spot::Value,
        },
        Some(_) | None => Spot::Value,
    }
}

/// Whether a comma separates entries of a `with` list.
fn in_with_list(tokens: &[Token]) -> bool {
    let with = tokens.iter().rposition(|token| token.kind == TokenKind::With);
    let inside = with.map_or(&tokens[..0], |with| &tokens[with..]);
    let count = |kind: TokenKind| inside.iter().filter(|token| token.kind == kind).count();
    with.is_some() && count(TokenKind::LeftParenthesis) == count(TokenKind::RightParenthesis)
}

fn parameters(word: &str) -> Vec<Completion> {
    let spelt = |name: &&str| name.starts_with(word);
    let mut found = Vec::new();
    for parameter in PARAMETERS {
        for name in std::iter::once(parameter.name)
            .chain(parameter.aliases.iter().copied())
            .filter(spelt)
        {
            found.push(Completion {
                name: name.to_owned(),
                kind: "parameter",
                about: parameter.about.to_owned(),
            });
        }
    }
    found
}
