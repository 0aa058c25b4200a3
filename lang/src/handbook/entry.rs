//! Pages of functions, constants, units, models and parameters: what the
//! catalogue says of them, in words.

use super::layout::Setter;
use super::written::{self, Form};
use crate::parser;
use zij_stdlib::catalogue::{self, Argument, Definition, Entry, Topic, Type};
use zij_stdlib::dimension::Generator;
use zij_stdlib::model::{BASES, Base, PARAMETERS, Parameter, Takes};
use zij_stdlib::prelude::{self, Written};
use zij_stdlib::units::{self, Found, Prefixes, Unit};
use zij_stdlib::words;

/// A function, constant or parameter value of the library, wherever it is
/// written.
pub(super) struct Item {
    /// The spellings it is known under, the one to show first.
    pub spellings: Vec<&'static str>,
    /// Words under which it is found as well.
    pub synonyms: Vec<&'static str>,
    /// Its chapter.
    pub topic: Topic,
    /// As in the field: `D_C(z) [cMpc]`.
    pub signature: String,
    /// What it is.
    pub about: String,
    /// Its arguments.
    arguments: Vec<(String, String)>,
    /// Label and text of what else is known.
    facts: Vec<(&'static str, String)>,
}

/// Everything of the library, in the order of the handbook.
pub(super) fn items() -> impl Iterator<Item = Item> {
    let forms = written::forms();
    let functions = prelude::written().iter();
    let functions = functions.map(move |page| of_written(page, forms.get(page.name)));
    catalogue::entries().map(of_entry).chain(functions)
}

fn of_written(page: &'static Written, form: Option<&Form>) -> Item {
    let spellings = written::spellings(page);
    let head = form.map_or("", |form| &form.head);
    let arguments = page.arguments.iter();
    Item {
        signature: format!("{}{head}", spellings[0]),
        spellings,
        synonyms: page.synonyms.clone(),
        topic: page.topic,
        about: page.about.clone(),
        arguments: arguments
            .map(|(name, about)| ((*name).into(), about.clone()))
            .collect(),
        facts: vec![
            ("formula", page.formula.clone()),
            ("holds for", page.validity.clone()),
            ("source", page.source.clone()),
            (
                "written",
                form.map_or_else(String::new, |form| form.whole.clone()),
            ),
        ],
    }
    .with_example(&page.example)
}

fn of_entry(entry: &'static Entry) -> Item {
    let shown = if entry.symbol.is_empty() {
        entry.name
    } else {
        entry.symbol
    };
    let mut spellings = vec![shown];
    spellings.extend(entry.spellings().filter(|spelling| *spelling != shown));
    let arguments = entry.arguments.iter();
    Item {
        spellings,
        synonyms: entry.synonyms.to_vec(),
        topic: entry.topic,
        signature: signature(entry, shown),
        about: entry.about.into(),
        arguments: arguments.map(|one| (one.name.into(), argument(one))).collect(),
        facts: vec![
            ("value", value(entry)),
            ("gives", gives(entry)),
            ("formula", entry.formula.into()),
            ("holds for", entry.validity.into()),
            ("source", entry.source.into()),
        ],
    }
    .with_example(entry.example)
}

impl Item {
    fn with_example(mut self, example: &str) -> Item {
        self.facts.push(("example", crate::output::one_line(example)));
        self
    }

    /// The first sentence of what it is.
    pub(super) fn summary(&self) -> String {
        crate::output::one_line(&self.about)
    }

    /// The signature without the units of the arguments, for lists.
    pub(super) fn brief(&self) -> String {
        let mut brief = String::new();
        let (mut round, mut square) = (0, 0);
        for letter in self.signature.chars() {
            match letter {
                '(' => round += 1,
                ')' => round -= 1,
                '[' if round > 0 => square += 1,
                _ => {}
            }
            if square == 0 {
                brief.push(letter);
            } else if letter == ']' {
                square -= 1;
                brief.truncate(brief.trim_end().len());
            }
        }
        brief
    }

    /// Its page.
    pub(super) fn set(&self, setter: &mut Setter) {
        let others: Vec<_> = self.spellings.iter().skip(1).copied().collect();
        setter.head(&self.signature, &others.join(", "));
        setter.paragraph(&self.summary());
        setter.gap();
        let arguments = self
            .arguments
            .iter()
            .map(|(name, text)| (name.as_str(), text.as_str()));
        let facts = self.facts.iter().map(|(label, text)| (*label, text.as_str()));
        setter.rows(&arguments.chain(facts).collect::<Vec<_>>());
    }
}

/// `D_C(z) [cMpc]`, `age(z = 0) [Gyr]`, `c [km/s]`
fn signature(entry: &Entry, shown: &str) -> String {
    let unit = match usual_unit(entry) {
        "" => String::new(),
        unit => format!(" [{unit}]"),
    };
    if !entry.is_function() {
        return format!("{shown}{unit}");
    }
    let arguments: Vec<_> = entry.arguments.iter().map(with_default).collect();
    format!("{shown}({}){unit}", arguments.join(", "))
}

/// The unit it is quoted in, with the frame that it has.
fn usual_unit(entry: &Entry) -> &'static str {
    let comoving = *entry.result.dimension.exponent(Generator::Comoving).numer() != 0;
    let framed = words::usual_unit(&entry.result.dimension).filter(|_| comoving);
    framed.unwrap_or(entry.usual_unit)
}

fn with_default(argument: &Argument) -> String {
    match argument.default {
        // It may be left out, and has no value then.
        Some(default) if default.is_nan() => format!("{} = …", argument.name),
        None => argument.name.into(),
        Some(default) => format!("{} = {}", argument.name, in_usual_unit(default, &argument.kind)),
    }
}

fn argument(argument: &Argument) -> String {
    format!("{}: {}", in_words(&argument.kind), argument.about)
}

fn gives(entry: &Entry) -> String {
    let words = in_words(&entry.result);
    if entry.open_today {
        format!("{words}; today, comoving and proper agree, so it fits either")
    } else {
        words
    }
}

/// A dimension and frame in words.
fn in_words(kind: &Type) -> String {
    let Some((index, exponent)) = kind.variable else {
        let words = words::name(&kind.dimension);
        return if kind.open {
            format!("{words} of open frame")
        } else {
            words
        };
    };
    let letter = char::from(b'A' + index % 26);
    let power = if *exponent.numer() == *exponent.denom() {
        letter.to_string()
    } else {
        format!("{letter}^{exponent}").replace("^1/", "^(1/") + if *exponent.denom() == 1 { "" } else { ")" }
    };
    if kind.dimension.is_number() {
        format!("of any dimension {power}")
    } else {
        format!("{} times any dimension {power}", words::name(&kind.dimension))
    }
}

fn value(entry: &Entry) -> String {
    match entry.definition {
        Definition::Constant(value, uncertainty) => match factor(entry.usual_unit) {
            Some(factor) => {
                let number = concise(value / factor, uncertainty / factor);
                format!("{number} {}", entry.usual_unit).trim_end().into()
            }
            None => format!("{} in SI base units", concise(value, uncertainty)),
        },
        Definition::ModelValue(_) => "that of the model in force".into(),
        Definition::Function(_) | Definition::Cosmology(_) => String::new(),
    }
}

/// A number in SI, in the unit a cosmologist would use.
fn in_usual_unit(value: f64, kind: &Type) -> String {
    let unit = words::usual_unit(&kind.dimension)
        .filter(|unit| *unit != "1")
        .unwrap_or("");
    match factor(unit) {
        _ if value == 0.0 || value.is_infinite() => concise(value, 0.0),
        Some(factor) => format!("{} {unit}", concise(value / factor, 0.0))
            .trim_end()
            .into(),
        None => concise(value, 0.0),
    }
}

/// The size in SI of a unit as written: `km/s/Mpc`.
fn factor(unit: &str) -> Option<f64> {
    if unit.is_empty() {
        return Some(1.0);
    }
    let unit = parser::parse_unit(unit).ok()?;
    let mut size = unit.scale;
    for part in &unit.factors {
        let found = units::find(&part.name.node)?;
        let power = f64::from(*part.power.numer()) / f64::from(*part.power.denom());
        size *= libm::pow(found.factor, power);
    }
    Some(size)
}

/// A number with its standard uncertainty in the last digits, as GUM 7.2.2
/// writes it: `6.67430(15)e-11`. Without one, the shortest that says it to ten
/// digits.
fn concise(value: f64, uncertainty: f64) -> String {
    if value.is_infinite() {
        return if value > 0.0 { "∞".into() } else { "-∞".into() };
    }
    if uncertainty == 0.0 || !uncertainty.is_finite() || uncertainty >= value.abs() {
        let rounded: f64 = format!("{value:.9e}").parse().unwrap_or(value);
        let size = rounded.abs();
        return if size == 0.0 || (1e-3..1e9).contains(&size) {
            format!("{rounded}")
        } else {
            format!("{rounded:e}")
        };
    }
    let power = |number: f64| -> i32 {
        let text = format!("{number:e}");
        text.split_once('e')
            .and_then(|(_, power)| power.parse().ok())
            .unwrap_or(0)
    };
    let top = power(value);
    let digits = usize::try_from(top - power(uncertainty) + 1).unwrap_or(0);
    let decimals = usize::try_from(digits as i32 - top)
        .ok()
        .filter(|_| (-3..9).contains(&top));
    let written = format!("{value:.digits$e}");
    let (mantissa, exponent) = written.split_once('e').unwrap_or((&written, "0"));
    let last = format!("{uncertainty:.1e}");
    let last: String = last
        .chars()
        .take_while(|letter| *letter != 'e')
        .filter(char::is_ascii_digit)
        .collect();
    match decimals {
        Some(decimals) => format!("{value:.decimals$}({last})"),
        None => format!("{mantissa}({last})e{exponent}"),
    }
}

// ---- units ----

/// The page of a unit, as it was asked for.
pub(super) fn set_unit(setter: &mut Setter, spelling: &str, found: &Found) {
    let unit = found.unit;
    let prefixed = !unit.spellings().any(|known| known == spelling);
    let name = if prefixed {
        format!("{}{}", prefix_name(spelling), unit.name)
    } else {
        unit.name.into()
    };
    setter.head(spelling, &format!("{name}, {}", words::name(&unit.dimension)));
    let base = words::usual_unit(&unit.dimension).filter(|usual| *usual != spelling);
    let usual =
        base.and_then(|usual| Some(format!("{} {usual}", concise(found.factor / factor(usual)?, 0.0))));
    let others = unit.spellings().filter(|other| *other != spelling && !prefixed);
    let others: Vec<_> = others.collect();
    setter.rows(&[
        ("size", format!("{} in SI base units", concise(found.factor, 0.0))),
        ("that is", usual.unwrap_or_default()),
        ("defined", definition(unit, prefixed)),
        ("source", unit.source.into()),
        ("also", others.join(", ")),
        ("prefixes", prefixes(unit.prefixes).into()),
        ("frame", frame(unit)),
    ]);
}

fn definition(unit: &Unit, prefixed: bool) -> String {
    match (unit.definition, prefixed) {
        ("", _) => String::new(),
        (definition, false) => definition.into(),
        (definition, true) => format!("1 {} = {definition}", unit.symbol),
    }
}

fn prefix_name(spelling: &str) -> &'static str {
    let first = spelling.chars().next().map(|letter| {
        if matches!(letter, 'u' | 'µ') {
            'μ'
        } else {
            letter
        }
    });
    let fits = |prefix: &&units::Prefix| first.is_some_and(|letter| prefix.symbol.starts_with(letter));
    units::PREFIXES.iter().find(fits).map_or("", |prefix| prefix.name)
}

fn prefixes(prefixes: Prefixes) -> &'static str {
    match prefixes {
        Prefixes::None => "",
        Prefixes::All => "all of the SI but da",
        Prefixes::Large => "kilo and larger",
        Prefixes::Small => "milli and smaller",
    }
}

fn frame(unit: &Unit) -> String {
    if unit.framed {
        "fixed by the unit".into()
    } else if unit.names_length() {
        "open: fits the frame it meets first".into()
    } else {
        String::new()
    }
}

/// Units by what they measure, as rows of a list; what the field has no word
/// for stands last.
pub(super) fn unit_rows() -> Vec<(String, String)> {
    let mut rows: Vec<(String, String)> = Vec::new();
    let mut others = String::new();
    for unit in units::UNITS {
        let words = words::name(&unit.dimension);
        let bare = words.strip_prefix("a ").or(words.strip_prefix("an "));
        let bare = bare.unwrap_or(&words).to_owned();
        if bare.starts_with("quantity in ") {
            others.push_str(&format!("{} ", unit.symbol));
            continue;
        }
        match rows.iter_mut().find(|(known, _)| *known == bare) {
            Some((_, symbols)) => symbols.push_str(&format!(" {}", unit.symbol)),
            None => rows.push((bare, unit.symbol.into())),
        }
    }
    rows.push(("other".into(), others));
    rows
}

// ---- models ----

/// The page of a model.
pub(super) fn set_base(setter: &mut Setter, base: &Base) {
    setter.head(base.name, "a model");
    setter.paragraph(base.about);
    setter.gap();
    let mut rows: Vec<(&str, String)> = Vec::new();
    for (name, ..) in base.parameters {
        if rows.iter().all(|(known, _)| known != name) {
            let about = parameter(name).map_or("", |parameter| parameter.about);
            let value = listed(base, name).unwrap_or_default();
            rows.push((name, format!("{value}: {about}")));
        }
    }
    rows.push(("source", base.source.into()));
    rows.push(("use", format!("assume {}", base.name)));
    setter.rows(&rows);
}

/// The value of a parameter that a published set lists, in its usual unit.
fn listed(base: &Base, name: &str) -> Option<String> {
    let unit = parameter(name).map_or("", |parameter| parameter.usual_unit);
    let factor = factor(unit).unwrap_or(1.0);
    let values = base.parameters.iter().filter(|(known, ..)| *known == name);
    let numbers: Vec<_> = values
        .map(|(_, value, uncertainty)| concise(value / factor, uncertainty / factor))
        .collect();
    let number = match numbers.as_slice() {
        [] => return None,
        [only] => only.clone(),
        all => format!("{{{}}}", all.join(", ")),
    };
    Some(format!("{number} {unit}").trim_end().into())
}

fn parameter(name: &str) -> Option<&'static Parameter> {
    PARAMETERS.iter().find(|parameter| parameter.name == name)
}

/// The page of a parameter of models.
pub(super) fn set_parameter(setter: &mut Setter, parameter: &Parameter) {
    let unit = match parameter.usual_unit {
        "" => String::new(),
        unit => format!(" [{unit}]"),
    };
    setter.head(&format!("{}{unit}", parameter.name), "a parameter of models");
    setter.paragraph(parameter.about);
    setter.gap();
    let takes = match parameter.takes {
        Takes::Number => words::name(&parameter.dimension),
        Takes::List => format!("a list: {} for each", words::name(&parameter.dimension)),
        Takes::Function => "a function of z".into(),
    };
    let mut rows = vec![("takes", takes), ("also", parameter.aliases.join(", "))];
    rows.extend(
        BASES
            .iter()
            .filter_map(|base| Some((base.name, listed(base, parameter.name)?))),
    );
    setter.rows(&rows);
}

/// Whether a model bears this name.
pub(super) fn base(name: &str) -> Option<&'static Base> {
    BASES.iter().find(|base| base.name == name)
}

/// Whether a parameter bears this name.
pub(super) fn model_parameter(name: &str) -> Option<&'static Parameter> {
    let bears = |parameter: &&Parameter| parameter.name == name || parameter.aliases.contains(&name);
    PARAMETERS.iter().find(bears)
}

#[cfg(test)]
mod tests {
    use super::*;
    use zij_stdlib::dimension::LENGTH;

    #[test]
    fn numbers_with_an_uncertainty_are_written_as_the_guide_says() {
        assert_eq!(concise(6.674_30e-11, 0.000_15e-11), "6.67430(15)e-11");
        assert_eq!(concise(67.36, 0.54), "67.36(54)");
        assert_eq!(concise(299_792_458.0, 0.0), "299792458");
        assert_eq!(concise(6.626_070_15e-34, 0.0), "6.62607015e-34");
        assert_eq!(concise(0.3, 0.0), "0.3");
    }

    #[test]
    fn the_size_of_a_unit_is_that_of_its_parts() {
        assert_eq!(factor("km/s"), Some(1000.0));
        assert_eq!(factor(""), Some(1.0));
        assert_eq!(factor("cubit"), None);
    }

    #[test]
    fn powers_of_any_dimension_are_told() {
        assert_eq!(in_words(&Type::any(0)), "of any dimension A");
        assert_eq!(in_words(&Type::power(0, 1, 2)), "of any dimension A^(1/2)");
        assert_eq!(in_words(&Type::power(1, -1, 1)), "of any dimension B^-1");
        assert_eq!(in_words(&Type::of(LENGTH.comoving())), "a length (comoving)");
    }
}
