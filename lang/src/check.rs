//! The checker: what every expression of a sheet is, and whether the sheet
//! makes sense, before any of it is evaluated.
//!
//! ```text
//!   statement   one after another; each definition becomes a binding
//!   infer       an expression to its dimension and frame (call, bracket, claim)
//!   unify       the equations that arise, over the rationals
//!   error       what is wrong, in words; describe puts dimensions in words
//! ```
//!
//! Everything is inferred; nothing need be declared. Errors do not stop it: an
//! expression that is wrong agrees with everything from there on, so one
//! mistake is one error. What the checker finds out that the program needs
//! (powers of 1+z and h that a bracket stands for, exponents of a bridge) it
//! leaves as a [`Note`] at the place.

mod bracket;
pub mod call;
pub mod claim;
mod describe;
pub mod environment;
mod error;
pub mod form;
pub mod infer;
pub mod library;
pub mod model;
mod statement;
pub mod statement_words;
pub mod typed;
mod unify;
mod units;

pub use environment::{BindingId, Environment, Meaning, Place, Space};
pub use statement::{ClaimTask, Column, ExplainTask, Face, Output, Show, TableTask, Task};
pub use typed::Measure;

use crate::ast;
use crate::diagnostic::Diagnostic;
use crate::source::{Source, Span};
use environment::Binding;
use form::{Exponent, Form};
use rustc_hash::{FxHashMap, FxHashSet};
use smol_str::SmolStr;
use std::sync::Arc;
use typed::Typed;
use unify::Unifier;

/// How many of the last messages are looked through for the same one.
const RECENT: usize = 16;

/// What the checker found out about a place and the program needs.
#[derive(Clone, Debug)]
pub enum Note {
    /// `[kpc at z]`: times (1+z) to this power.
    Redshift(Exponent),
    /// `[Mpc for h]`: times h to this power.
    LittleH(Exponent),
    /// An argument of the library: times h, in the model in force, to this power.
    SettledH(Exponent),
    /// `[cm via c]`: the value to the power ±1 times powers of the constants.
    Bridge(i32, Vec<Exponent>),
    /// `[mag via f_AB]`: the flux in magnitudes from that zero point.
    ToMagnitude,
    /// `[Jy via f_AB]`: what is so many magnitudes from that zero point.
    FromMagnitude,
    /// A bare number that takes the unit written after another.
    Unit(Arc<Measure>),
}

/// What has been checked so far.
#[derive(Clone, Default)]
pub struct Checker {
    /// What names stand for.
    pub environment: Environment,
    /// Every text that a place may be in.
    pub sources: Vec<Source>,
    /// What was found out about places.
    pub notes: FxHashMap<Place, Note>,
    /// What the sheet asks to be shown, in order.
    pub tasks: Vec<Task>,
    /// What is wrong, each with its source.
    pub diagnostics: Vec<(usize, Diagnostic)>,
    /// Values given from outside for inputs, as text.
    pub givens: Vec<(SmolStr, SmolStr)>,
    /// Later bindings replace earlier ones.
    pub at_prompt: bool,
    /// The same as expressions, until the sheet takes them.
    overrides: FxHashMap<SmolStr, (u16, ast::Expr)>,
    /// What every expression was found to be, where that is wanted.
    record: Option<FxHashMap<Place, Typed>>,
    unifier: Unifier,
    locals: Vec<Local>,
    rests_on: Vec<BindingId>,
    source: u16,
    in_library: bool,
    /// What is being checked needs the model in force.
    needs_model: bool,
    /// How many `under` are open.
    under: u32,
    /// A function's body: its model comes with the call.
    in_function: bool,
    /// The name being defined, which its definition cannot refer to.
    defining: Option<(Space, ast::Name)>,
    measures: FxHashMap<SmolStr, Arc<Measure>>,
    lost: FxHashSet<SmolStr>,
    loaded: FxHashSet<usize>,
    told_of_uncertainty: bool,
    imported: Vec<SmolStr>,
    including: Vec<SmolStr>,
    /// Where a sheet binds its names, once a mistake made it matter.
    later: Option<(u16, BoundNames)>,
}

/// Functions (true) and values (false) of a sheet, and where they are bound.
type BoundNames = FxHashMap<(bool, SmolStr), Span>;

/// A parameter, a bound variable or a `where` name.
#[derive(Clone)]
struct Local {
    name: SmolStr,
    span: Span,
    typed: Typed,
    used: bool,
}

/// How the checker reaches what is outside the sheet.
pub trait Outside {
    /// The text of another sheet, or a sentence on why not.
    fn sheet(&self, path: &str) -> Result<Source, String>;
    /// The head of a data table, or why not.
    fn head(&self, path: &str) -> Result<Head, NoHead>;
}

/// Why a data table cannot be used; a sentence.
pub enum NoHead {
    /// The file cannot be read.
    Unreadable(String),
    /// It is no table.
    Malformed(String),
}

/// The head of a data table.
pub struct Head {
    /// Names of the columns with the units written beside them.
    pub columns: Vec<(String, Option<String>)>,
}

impl Checker {
    /// A checker that knows the library alone.
    #[must_use]
    pub fn new() -> Checker {
        Checker::default()
    }

    /// Checks a sheet, or an entry at the prompt.
    pub fn check(&mut self, source: Source, outside: &dyn Outside) {
        let id = self.add_source(source);
        let before = (self.diagnostics.len(), self.environment.next());
        self.read_givens();
        let name = Arc::clone(&self.sources[usize::from(id)].name);
        let own = name.rsplit(['/', '\\']).next().unwrap_or("");
        self.including.push(own.into());
        self.check_source(id, outside);
        self.including.pop();
        self.refuse_left_over();
        self.warn_of_unstated_model();
        self.warn_of_unused(id, before.1);
        self.sort_diagnostics(before.0);
    }

    /// Gives a text a number.
    pub fn add_source(&mut self, source: Source) -> u16 {
        self.sources.push(source);
        (self.sources.len() - 1) as u16
    }

    fn read_givens(&mut self) {
        for (name, text) in std::mem::take(&mut self.givens) {
            let source = self.add_source(Source::new(&format!("--given {name}"), &text));
            let statements = crate::parser::parse(&text).statements;
            let value = statements.into_iter().find_map(|statement| match statement.kind {
                ast::StatementKind::Expression(value, _) => Some(value),
                _ => None,
            });
            self.overrides.extend(value.map(|value| (name, (source, value))));
        }
    }

    /// Values that were given for what is no input.
    fn refuse_left_over(&mut self) {
        let mut left: Vec<(SmolStr, (u16, ast::Expr))> = self.overrides.drain().collect();
        left.sort_by_key(|(_, (source, _))| *source);
        for (name, (source, value)) in left {
            let bound = self.environment.latest(Space::Value, &name).is_some();
            let diagnostic = error::no_such_given(value.span, &name, bound);
            self.diagnostics.push((usize::from(source), diagnostic));
        }
    }

    /// What every expression is; found by checking once more.
    #[must_use]
    pub fn every_type(&self) -> FxHashMap<Place, Typed> {
        let mut trial = self.clone();
        trial.at_prompt = true;
        trial.record = Some(FxHashMap::default());
        let is_library = |name: &str| {
            zij_stdlib::prelude::CHAPTERS
                .iter()
                .any(|chapter| chapter.name == name)
        };
        for (id, source) in self
            .sources
            .iter()
            .enumerate()
            .filter(|(_, source)| !is_library(&source.name))
        {
            trial.source = id as u16;
            for statement in crate::parser::parse(&source.text).statements {
                use ast::StatementKind::{Include, Read, Tally, Unit};
                if !matches!(statement.kind, Include(_) | Read(_) | Tally(_) | Unit(..)) {
                    trial.statement(statement, &statement::Nothing);
                }
            }
        }
        let record = trial.record.take().unwrap_or_default();
        let settled = record.into_iter().map(|(place, typed)| {
            let form = trial.settled(&typed.form);
            (place, Typed { form, ..typed })
        });
        settled.collect()
    }

    /// The unit in which a value of this dimension is shown and its size: the
    /// one asked for, or else the usual one.
    #[must_use]
    pub fn unit_of(&self, form: &Form, unit: Option<&Arc<Measure>>) -> (String, f64) {
        let form = self.settled(form);
        if let Some(measure) = unit.filter(|measure| is_unit_for(measure, &form)) {
            let text = if measure.text == "1" {
                ""
            } else {
                measure.text.as_str()
            };
            return (text.to_owned(), measure.factor);
        }
        let text = self.unit_text(&without_open_angle(form));
        let factor = crate::parser::parse_unit(&text).map_or(1.0, |unit| self.size_of(&unit));
        (text, factor)
    }

    /// What a value is, as it is shown in that unit: an angle that no unit
    /// names goes without saying.
    #[must_use]
    pub fn shown_form(&self, face: &Face) -> Form {
        let form = self.settled(&face.form);
        match &face.unit {
            Some(measure) if is_unit_for(measure, &form) => form,
            Some(_) | None => without_open_angle(form),
        }
    }

    fn check_source(&mut self, id: u16, outside: &dyn Outside) {
        let text = Arc::clone(&self.sources[usize::from(id)].text);
        let parsed = crate::parser::parse(&text);
        let found = parsed
            .diagnostics
            .into_iter()
            .map(|diagnostic| (usize::from(id), diagnostic));
        self.diagnostics.extend(found);
        let outer = std::mem::replace(&mut self.source, id);
        self.lost.extend(parsed.lost.into_iter().map(|name| name.node));
        for statement in parsed.statements {
            self.statement(statement, outside);
        }
        self.source = outer;
    }

    /// What is wrong in the order of the sheets, each in the order of place.
    fn sort_diagnostics(&mut self, from: usize) {
        self.diagnostics[from..].sort_by_key(|(source, diagnostic)| (*source, diagnostic.at.span.start));
    }

    fn report(&mut self, diagnostic: Diagnostic) {
        let source = usize::from(self.source);
        // The parser may have said it already, and a unit may be looked at twice.
        let recent = self.diagnostics.iter().rev().take(RECENT);
        let same = |(other, said): &(usize, Diagnostic)| {
            *other == source && said.code == diagnostic.code && said.at.span == diagnostic.at.span
        };
        if !recent.into_iter().any(same) {
            self.diagnostics.push((source, diagnostic));
        }
    }

    /// Reports and goes on with what agrees with everything.
    fn wrong(&mut self, diagnostic: Diagnostic) -> Typed {
        self.report(diagnostic);
        Typed::unknown()
    }

    fn place(&self, span: Span) -> Place {
        Place {
            source: self.source,
            span,
        }
    }

    fn note(&mut self, span: Span, note: Note) {
        self.notes.insert(self.place(span), note);
    }

    fn text(&self, span: Span) -> &str {
        self.sources[usize::from(self.source)].slice(span)
    }

    fn spaces(&self) -> [Space; 2] {
        if self.in_library {
            [Space::LibraryValue, Space::LibraryFunction]
        } else {
            [Space::Value, Space::Function]
        }
    }

    fn bind(&mut self, name: &ast::Name, space: Space, meaning: Meaning) -> BindingId {
        let rests_on = std::mem::take(&mut self.rests_on);
        self.environment.bind(Binding {
            name: name.node.clone(),
            place: self.place(name.span),
            space,
            meaning,
            rests_on,
            needs_model: self.needs_model,
            used: std::cell::Cell::new(false),
        })
    }

    /// What a form has become, with everything open settled.
    #[must_use]
    pub fn settled(&self, form: &Form) -> Form {
        let form = self.unifier.settled(form);
        if form.is_open() {
            form.without(|key| key >= form::FIRST_BOUND)
        } else {
            form
        }
    }
}

fn without_open_angle(form: Form) -> Form {
    if form.has_other_dimension() {
        form.without(|key| key == infer::ANGLE)
    } else {
        form
    }
}

/// Whether values of a dimension can be shown in a unit; the frame is said
/// beside it.
fn is_unit_for(measure: &Measure, form: &Form) -> bool {
    let angle_is_open = form.has_other_dimension() || measure.form.has_other_dimension();
    let free = |key| key == infer::COMOVING || (angle_is_open && key == infer::ANGLE);
    form.per(&measure.form).without(free).is_number()
}
