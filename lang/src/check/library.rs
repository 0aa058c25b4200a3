//! The library as the checker sees it: entries by any spelling, and the
//! sheets that are written in the language itself.

use super::describe::{field_unit, join_signature};
use super::typed::Measure;
use super::{BindingId, Checker, Space};
use crate::source::Source;
use rustc_hash::FxHashMap;
use smol_str::SmolStr;
use std::sync::{Arc, OnceLock};
use zij_stdlib::catalogue::{Entry, entries};
use zij_stdlib::prelude::CHAPTERS;

/// The library's value of this spelling.
#[must_use]
pub fn value(name: &str) -> Option<&'static Entry> {
    index().values.get(name).copied()
}

/// The library's function of this spelling.
#[must_use]
pub fn function(name: &str) -> Option<&'static Entry> {
    index().functions.get(name).copied()
}

/// Every spelling of the library's values or functions.
pub fn spellings(functions: bool) -> impl Iterator<Item = &'static str> {
    let index = index();
    let written = index.written.keys().copied().filter(move |_| functions);
    let map = if functions {
        &index.functions
    } else {
        &index.values
    };
    map.keys().copied().chain(written)
}

struct Index {
    values: FxHashMap<&'static str, &'static Entry>,
    functions: FxHashMap<&'static str, &'static Entry>,
    /// Names written in chapters, and which chapter.
    written: FxHashMap<&'static str, usize>,
}

fn index() -> &'static Index {
    static INDEX: OnceLock<Index> = OnceLock::new();
    INDEX.get_or_init(|| {
        let mut index = Index {
            values: FxHashMap::default(),
            functions: FxHashMap::default(),
            written: FxHashMap::default(),
        };
        for entry in entries() {
            let map = if entry.is_function() {
                &mut index.functions
            } else {
                &mut index.values
            };
            map.extend(entry.spellings().map(|spelling| (spelling, entry)));
        }
        for (number, chapter) in CHAPTERS.iter().enumerate() {
            index
                .written
                .extend(names_of(chapter.text).map(|name| (name, number)));
        }
        index
    })
}

/// Names defined at the left margin of a chapter, and their symbols.
fn names_of(text: &'static str) -> impl Iterator<Item = &'static str> {
    text.lines().filter_map(|line| {
        if let Some(symbol) = line.strip_prefix("# symbol:") {
            return Some(symbol.trim());
        }
        let end = line.find(|letter: char| !(letter.is_alphanumeric() || letter == '_'))?;
        (end > 0 && (line[end..].starts_with('(') || line[end..].starts_with([' ', '='])))
            .then_some(&line[..end])
    })
}

/// The signature of an entry in field notation: `D_C(z) [cMpc]`.
#[must_use]
pub fn signature(entry: &Entry) -> String {
    let arguments = entry.arguments.iter().map(|argument| {
        let name = SmolStr::new_static(argument.name);
        (name, field_unit(&argument.kind, ""), argument.default.is_some())
    });
    let name = if entry.symbol.is_empty() {
        entry.name
    } else {
        entry.symbol
    };
    let unit = field_unit(&entry.result, entry.usual_unit);
    join_signature(name, entry.is_function().then(|| arguments.collect()), &unit)
}

impl Checker {
    /// A name written in the library's sheets, whose chapter is read when it
    /// is first asked for.
    pub(super) fn library_binding(&mut self, space: Space, name: &str) -> Option<BindingId> {
        let name = canonical(name);
        let chapter = *index().written.get(name)?;
        if !self.loaded.contains(&chapter) {
            self.load(chapter);
        }
        self.environment.latest(space, name)
    }

    fn load(&mut self, number: usize) {
        self.loaded.insert(number);
        let chapter = &CHAPTERS[number];
        let source = self.add_source(Source::new(chapter.name, chapter.text));
        let aside = Aside {
            locals: std::mem::take(&mut self.locals),
            rests_on: std::mem::take(&mut self.rests_on),
            source: std::mem::replace(&mut self.source, source),
            in_library: std::mem::replace(&mut self.in_library, true),
            needs_model: std::mem::take(&mut self.needs_model),
            under: std::mem::take(&mut self.under),
            in_function: std::mem::take(&mut self.in_function),
        };
        let parsed = crate::parser::parse(chapter.text);
        self.diagnostics.extend(
            parsed
                .diagnostics
                .into_iter()
                .map(|one| (usize::from(source), one)),
        );
        for statement in parsed.statements {
            self.statement(statement, &super::statement::Nothing);
        }
        self.locals = aside.locals;
        self.rests_on = aside.rests_on;
        self.source = aside.source;
        self.in_library = aside.in_library;
        self.needs_model = aside.needs_model;
        self.under = aside.under;
        self.in_function = aside.in_function;
    }

    /// The unit in which a library value is usually quoted.
    pub(super) fn library_measure(&mut self, text: &str) -> Option<Arc<Measure>> {
        if text.is_empty() {
            return None;
        }
        if let Some(measure) = self.measures.get(text) {
            return Some(Arc::clone(measure));
        }
        let unit = crate::parser::parse_unit(text).ok()?;
        let measure = Arc::new(super::units::resolve_library(&unit)?);
        self.measures.insert(text.into(), Arc::clone(&measure));
        Some(measure)
    }
}

/// The long name for a symbol of a written function.
#[must_use]
pub fn canonical(name: &str) -> &str {
    let written = zij_stdlib::prelude::written();
    let found = written
        .iter()
        .find(|item| !item.symbol.is_empty() && item.symbol == name);
    found.map_or(name, |item| item.name)
}

/// What is put aside while a chapter is read.
struct Aside {
    locals: Vec<super::Local>,
    rests_on: Vec<BindingId>,
    source: u16,
    in_library: bool,
    needs_model: bool,
    under: u32,
    in_function: bool,
}
