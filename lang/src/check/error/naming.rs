//! Names that are not there: near ones, other kinds, later definitions.

use crate::ast::{Name, StatementKind};
use crate::check::model::{base, parameter};
use crate::check::{BoundNames, Checker, call, library};
use crate::diagnostic::Diagnostic;
use crate::source::Span;
use smol_str::SmolStr;
use zij_stdlib::model::PARAMETERS;
use zij_stdlib::units;

/// Near names shown at most.
const MOST_NEAR: usize = 3;

/// The names near to one, nearest first: a letter or two away, or the same
/// but for case and underscores.
pub fn near<'a>(name: &str, known: impl IntoIterator<Item = &'a str>) -> Vec<&'a str> {
    let plain = |text: &str| text.to_lowercase().replace('_', "");
    let length = name.chars().count();
    let most = match length {
        0 | 1 => 0,
        2..=4 => 1,
        5..=9 => 2,
        _ => 3,
    };
    let distance = |other: &str| {
        if plain(other) == plain(name) {
            0
        } else {
            strsim::osa_distance(name, other)
        }
    };
    let mut found: Vec<(usize, &str)> = known
        .into_iter()
        .filter(|other| other.chars().count().abs_diff(length) <= most || plain(other) == plain(name))
        .map(|other| (distance(other), other))
        .filter(|(distance, other)| *distance <= most && *other != name)
        .collect();
    found.sort_unstable();
    found.dedup();
    found.truncate(MOST_NEAR);
    found.into_iter().map(|(_, other)| other).collect()
}

/// With the near names as repairs.
fn with_near(mut diagnostic: Diagnostic, span: Span, near: &[impl AsRef<str>]) -> Diagnostic {
    for other in near {
        let other = other.as_ref();
        diagnostic = diagnostic.fix(format!("write {other}"), span, other);
    }
    diagnostic
}

pub(in crate::check) fn unknown_unit(name: &Name, near: &[String], counting: bool) -> Diagnostic {
    let message = format!("there is no unit {}", name.node);
    let error = Diagnostic::error("unknown-unit", message, name.span, "no such unit");
    if counting {
        return error.note(format!(
            "a thing that is counted is declared: tally {}",
            name.node
        ));
    }
    with_near(error, name.span, near)
}

pub(in crate::check) fn value_as_unit(name: &Name, after_slash: bool) -> Diagnostic {
    let message = format!("{} is a value, and a unit is wanted here", name.node);
    let error = Diagnostic::error("value-as-unit", message, name.span, "a value, no unit");
    let before = Span {
        start: name.span.start,
        end: name.span.start,
    };
    if after_slash {
        let slash = Span {
            start: name.span.start.saturating_sub(1),
            end: name.span.start,
        };
        return error.fix("divide by the value", slash, " / ");
    }
    error.fix("multiply by the value", before, "* ")
}

pub(in crate::check) fn ambiguous_slash(name: &Name) -> Diagnostic {
    let message = format!(
        "/{} could divide by the unit or by the value {}",
        name.node, name.node
    );
    let slash = Span {
        start: name.span.start.saturating_sub(1),
        end: name.span.start,
    };
    Diagnostic::error("ambiguous-slash", message, name.span, "unit or value?")
        .note(format!(
            "both are in sight and they differ: as a unit write {}^-1, as a value leave spaces around /",
            name.node
        ))
        .fix("divide by the value", slash, " / ")
        .fix(
            "divide by the unit",
            Span {
                start: slash.start,
                end: name.span.end,
            },
            format!(" {}^-1", name.node),
        )
}

pub(in crate::check) fn unknown_column(field: &Name, table: &str, columns: &[&str]) -> Diagnostic {
    let message = format!("{table} has no column {}", field.node);
    let near = near(&field.node, columns.iter().copied());
    let error = Diagnostic::error("unknown-column", message, field.span, "no such column")
        .note(format!("it has {}", columns.join(", ")));
    with_near(error, field.span, &near)
}

pub(in crate::check) fn unknown_argument(
    name: &Name,
    word: &Name,
    parameters: &[(SmolStr, bool)],
) -> Diagnostic {
    let known: Vec<&str> = parameters.iter().map(|(name, _)| name.as_str()).collect();
    let message = format!("{} has no argument {}", name.node, word.node);
    let error = Diagnostic::error("unknown-argument", message, word.span, "no such argument").note(format!(
        "it is called as {}({})",
        name.node,
        known.join(", ")
    ));
    with_near(error, word.span, &near(&word.node, known))
}

pub(in crate::check) fn unknown_model(name: &Name, known: &[&str]) -> Diagnostic {
    let message = format!("there is no model {}", name.node);
    let error = Diagnostic::error("unknown-model", message, name.span, "no such model");
    let near = near(&name.node, known.iter().copied());
    let error = if near.is_empty() {
        error.note("`help models` lists them")
    } else {
        error
    };
    with_near(error, name.span, &near)
}

pub(in crate::check) fn wrong_parameter(name: &Name) -> Diagnostic {
    let message = format!("a model has no parameter {}", name.node);
    let known = PARAMETERS
        .iter()
        .flat_map(|one| std::iter::once(one.name).chain(one.aliases.iter().copied()));
    let mut near = near(&name.node, known);
    let mut met = Vec::new();
    near.retain(|spelling| {
        let id = parameter(spelling).map(|(id, _)| id);
        let new = !met.contains(&id);
        met.push(id);
        new
    });
    let error = Diagnostic::error("wrong-parameter", message, name.span, "no such parameter");
    let error = if near.is_empty() {
        let names: Vec<&str> = PARAMETERS.iter().map(|parameter| parameter.name).collect();
        error.note(format!("it has {}", names.join(", ")))
    } else {
        error
    };
    with_near(error, name.span, &near)
}

pub(in crate::check) fn no_such_constant(name: &Name) -> Diagnostic {
    let message = format!("there is no constant {}", name.node);
    let near = near(&name.node, library::spellings(false));
    let error = Diagnostic::error("unknown-name", message, name.span, "no such constant");
    with_near(error, name.span, &near)
}

impl Checker {
    /// A name that stands for no value.
    pub(in crate::check) fn unknown_name(&mut self, name: &SmolStr, span: Span) -> Diagnostic {
        let [values, functions] = self.spaces();
        let own_function = self.environment.latest(functions, name).is_some();
        if own_function
            || library::function(name).is_some()
            || self
                .library_binding(super::super::Space::LibraryFunction, name)
                .is_some()
        {
            let message = format!("{name} is a function, and here it stands without its arguments");
            return Diagnostic::error("unknown-name", message, span, "a function")
                .note(format!("write {name}(…); `help {name}` says of what"));
        }
        if let Some(later) = self.bound_later(name, false) {
            return used_before(name, span, later);
        }
        if base(name).is_some()
            || self
                .environment
                .latest(super::super::Space::Model, name)
                .is_some()
        {
            let message = format!("{name} is a model, and here it stands as a value");
            return Diagnostic::error("model-as-value", message, span, "a model").note(format!(
                "a value is computed `under {name}`; `assume {name}` takes it for the sheet"
            ));
        }
        let known = self.environment.units.contains_key(name) || self.environment.tally(name).is_some();
        if known || (units::find(name).is_some() && name.chars().count() > 1) {
            let message = format!("{name} is a unit, and here it stands as a value");
            let before = Span {
                start: span.start,
                end: span.start,
            };
            return Diagnostic::error("unit-as-value", message, span, "a unit, no value")
                .note("a unit follows a number or stands in [ ]")
                .fix("put a number before it", before, "1 ");
        }
        let visible = self
            .environment
            .visible()
            .filter(|(_, binding)| binding.space == values);
        let mut known: Vec<String> = visible.map(|(_, binding)| binding.name.to_string()).collect();
        known.extend(self.locals.iter().map(|local| local.name.to_string()));
        known.extend(library::spellings(false).map(ToOwned::to_owned));
        let near = near(name, known.iter().map(String::as_str));
        let error = Diagnostic::error(
            "unknown-name",
            format!("there is no value {name}"),
            span,
            "no such value",
        );
        with_near(error, span, &near)
    }

    /// A name that stands for no function.
    pub(in crate::check) fn unknown_function(&mut self, name: &Name, span: Span) -> Diagnostic {
        let [values, functions] = self.spaces();
        let is_value = self.local(&name.node).is_some()
            || self.environment.latest(values, &name.node).is_some()
            || library::value(&name.node).is_some();
        if is_value {
            let message = format!("{} is a value, not a function", name.node);
            let after = Span {
                start: name.span.end,
                end: name.span.end,
            };
            return Diagnostic::error("unknown-function", message, name.span, "a value")
                .note("a product is written with *")
                .fix("multiply", after, " * ");
        }
        if let Some(later) = self.bound_later(&name.node, true) {
            return used_before(&name.node, span, later);
        }
        let visible = self
            .environment
            .visible()
            .filter(|(_, binding)| binding.space == functions);
        let mut known: Vec<String> = visible.map(|(_, binding)| binding.name.to_string()).collect();
        known.extend(library::spellings(true).map(ToOwned::to_owned));
        known.extend(call::BINDING_FORMS.iter().map(|(word, _)| (*word).to_owned()));
        known.extend(call::SERIES_FUNCTIONS.iter().map(|(word, _)| (*word).to_owned()));
        let near = near(&name.node, known.iter().map(String::as_str));
        let message = format!("there is no function {}", name.node);
        with_near(
            Diagnostic::error("unknown-function", message, name.span, "no such function"),
            name.span,
            &near,
        )
    }

    /// Where the sheet binds a name that is not bound yet. The sheet is read
    /// again, once: this is wanted only after a mistake.
    fn bound_later(&mut self, name: &str, function: bool) -> Option<Span> {
        if self.in_library {
            return None;
        }
        if self
            .later
            .as_ref()
            .is_none_or(|(source, _)| *source != self.source)
        {
            let text = &self.sources[usize::from(self.source)].text;
            self.later = Some((self.source, names_bound(text)));
        }
        let (_, names) = self.later.as_ref()?;
        names.get(&(function, SmolStr::new(name))).copied()
    }
}

fn names_bound(text: &str) -> BoundNames {
    let names = crate::parser::parse(text)
        .statements
        .into_iter()
        .filter_map(|statement| match statement.kind {
            StatementKind::Given(it) | StatementKind::Value(it) | StatementKind::Result(it) => {
                Some((false, it.name))
            }
            StatementKind::Function(it, _) => Some((true, it.name)),
            _ => None,
        });
    names
        .map(|(function, name)| ((function, name.node), name.span))
        .collect()
}

pub(in crate::check) fn used_before(name: &str, span: Span, later: Span) -> Diagnostic {
    let itself = later.start < span.start;
    let message = if itself {
        format!("{name} is used in its own definition")
    } else {
        format!("{name} is used before it is bound")
    };
    let error =
        Diagnostic::error("used-before-definition", message, span, "not bound yet").and(later, "bound here");
    error.note(if itself {
        "definitions do not refer to themselves"
    } else {
        "a name is used below its definition"
    })
}
