//! Statements and layout (section 4 of the language page).

use super::*;
use crate::ast::{Claim, Definition, Parameter, Plot};

/// A statement in a few words.
#[track_caller]
fn said(text: &str) -> String {
    described(&only(text))
}

fn described(kind: &StatementKind) -> String {
    match kind {
        StatementKind::Assume(written) => format!("assume {}", model(written)),
        StatementKind::Model(name, written) => format!("model {} {}", name.node, model(written)),
        StatementKind::Given(one) => format!("given {}", definition(one)),
        StatementKind::Value(one) => format!("value {}", definition(one)),
        StatementKind::Function(one, parameters) => {
            let all: Vec<_> = parameters.iter().map(parameter).collect();
            format!("function ({}) {}", all.join(", "), definition(one))
        }
        StatementKind::Result(one) => format!("result {}", definition(one)),
        StatementKind::ResultOf(name, unit, about) => {
            let unit = unit.as_ref().map(bracket).unwrap_or_default();
            format!("result of {}{unit}{}", name.node, quoted(about.as_ref()))
        }
        StatementKind::Claim(place, claim) => format!("claim{} {}", quoted(place.as_ref()), claimed(claim)),
        StatementKind::Table(plot) => format!("table {}", plotted(plot)),
        StatementKind::Figure(plot) => format!("figure {}", plotted(plot)),
        StatementKind::Read(read) => {
            let units: Vec<_> = read
                .units
                .iter()
                .map(|(name, unit)| format!(" {}{}", name.node, bracket(unit)))
                .collect();
            let only = read.only.as_ref().map(|only| format!(" only {}", shape(only)));
            format!(
                "read \"{}\" as {}{}{}",
                read.path.node,
                read.name.node,
                units.concat(),
                only.unwrap_or_default()
            )
        }
        StatementKind::Include(path) => format!("include \"{}\"", path.node),
        StatementKind::Unit(name, value) => format!("unit {} {}", name.node, shape(value)),
        StatementKind::Tally(names) => {
            let names: Vec<_> = names.iter().map(|name| name.node.as_str()).collect();
            format!("tally {}", names.join(" "))
        }
        StatementKind::Correlate(one, other, by) => {
            format!("correlate {} {} {}", one.node, other.node, shape(by))
        }
        StatementKind::Explain(value) => format!("explain {}", shape(value)),
        StatementKind::Help(topic) => format!("help{}", quoted(topic.as_ref())),
        StatementKind::Expression(value, wheres) => format!("{}{}", shape(value), bindings(wheres)),
        StatementKind::Broken => "broken".into(),
    }
}

fn definition(one: &Definition) -> String {
    let unit = one.annotation.as_ref().map(bracket).unwrap_or_default();
    format!(
        "{}{unit} {}{}{}",
        one.name.node,
        shape(&one.value),
        bindings(&one.wheres),
        quoted(one.about.as_ref())
    )
}

fn parameter(one: &Parameter) -> String {
    let unit = one.annotation.as_ref().map(bracket).unwrap_or_default();
    let default = one.default.as_ref().map(|value| format!(" = {}", shape(value)));
    format!("{}{unit}{}", one.name.node, default.unwrap_or_default())
}

fn quoted(text: Option<&crate::ast::Text>) -> String {
    text.map(|text| format!(" \"{}\"", text.node)).unwrap_or_default()
}

fn claimed(claim: &Claim) -> String {
    let assertion = match &claim.assertion {
        None => String::new(),
        Some(Assertion::Is(value)) => format!(" is {}", shape(value)),
        Some(Assertion::About(value)) => format!(" about {}", shape(value)),
        Some(Assertion::Above(value)) => format!(" above {}", shape(value)),
        Some(Assertion::Below(value)) => format!(" below {}", shape(value)),
        Some(Assertion::AtLeast(value)) => format!(" at least {}", shape(value)),
        Some(Assertion::AtMost(value)) => format!(" at most {}", shape(value)),
        Some(Assertion::Between(low, high)) => format!(" between {} {}", shape(low), shape(high)),
        Some(Assertion::Never(_)) => " never".into(),
    };
    let within = match &claim.within {
        None => String::new(),
        Some(Tolerance::Amount(amount)) => format!(" within {}", shape(amount)),
        Some(Tolerance::Sigma(count)) => format!(" within sigma {}", shape(count)),
    };
    format!("{}{assertion}{within}", shape(&claim.subject))
}

fn plotted(plot: &Plot) -> String {
    let columns: Vec<_> = plot
        .columns
        .iter()
        .map(|(value, about)| format!("{}{}", shape(value), quoted(about.as_ref())))
        .collect();
    format!(
        "{} {} {}: {}",
        quoted(plot.path.as_ref()).trim_start(),
        plot.variable.node,
        shape(&plot.over),
        columns.join(", ")
    )
    .trim_start()
    .to_owned()
}

#[test]
fn every_statement_of_the_page_is_read() {
    for (text, read) in [
        ("assume planck2018", "assume <planck2018>"),
        (
            "model local = planck2018 with H0 = 73.0(10) km/s/Mpc",
            "model local <planck2018 H0=73.0+1-1[km s^-1 Mpc^-1]>",
        ),
        ("given z = 1.1 \"redshift\"", "given z 1.1 \"redshift\""),
        ("given r [kpc] = 30 kpc", "given r[kpc] 30[kpc]"),
        ("x = 1 + 2", "value x (+ 1 2)"),
        ("x [km] = 3 km", "value x[km] 3[km]"),
        (
            "f(a, b [kpc], c = 1) [km/s] = a where d = 2",
            "function (a, b[kpc], c = 1) f[km s^-1] a where d=2",
        ),
        ("f() = 1", "function () f 1"),
        (
            "result R = age(0) [Gyr] \"age\"",
            "result R (in [Gyr] age(0)) \"age\"",
        ),
        ("result R [Gly] \"size\"", "result of R[Gly] \"size\""),
        ("result R", "result of R"),
        (
            "table z = 0 .. 1 every 0.5: D_C(z) [Gly], age(z) \"age\"",
            "table z (0 .. 1 every 0.5): (in [Gly] D_C(z)), age(z) \"age\"",
        ),
        ("table \"out.csv\" z = {1, 2}: z", "table \"out.csv\" z {1 2}: z"),
        (
            "figure \"out.svg\" z = 0 .. 1 in 9 steps: z",
            "figure \"out.svg\" z (0 .. 1 steps 9): z",
        ),
        ("read \"sample.csv\" as sample", "read \"sample.csv\" as sample"),
        (
            "read \"sample.csv\" as s with r_Mpc [Mpc], v [km/s] only z > 0.01",
            "read \"sample.csv\" as s r_Mpc[Mpc] v[km s^-1] only (compare z > 0.01)",
        ),
        ("include \"defs.zij\"", "include \"defs.zij\""),
        ("1 beam = 3.2e-4 sr", "unit beam 3.2e-4[sr]"),
        ("tally galaxy, photon", "tally galaxy photon"),
        ("correlate A, B by -0.9", "correlate A B (neg 0.9)"),
        ("explain D_L(1)", "explain D_L(1)"),
        ("help", "help"),
        ("help D_L", "help \"D_L\""),
        ("help claim", "help \"claim\""),
        ("help \"how far\"", "help \"how far\""),
    ] {
        assert_eq!(said(text), read, "{text}");
    }
}

#[test]
fn every_claim_of_the_page_is_read() {
    for (text, read) in [
        (
            "claim \"abstract\": x is 46.5 Gly",
            "claim \"abstract\" x is 46.5[Gly]",
        ),
        ("claim: x is 46.5 Gly", "claim x is 46.5[Gly]"),
        ("claim: x is about 16 Gly", "claim x about 16[Gly]"),
        ("claim: x is 93 Gly within 2%", "claim x is 93[Gly] within 2[%]"),
        (
            "claim: x is 93 Gly within 0.3 Gly",
            "claim x is 93[Gly] within 0.3[Gly]",
        ),
        ("claim: x is y within 2 sigma", "claim x is y within sigma 2"),
        ("claim: x is above 1 c", "claim x above 1[c]"),
        ("claim: x is below 1 c", "claim x below 1[c]"),
        ("claim: x is at least 1", "claim x at least 1"),
        ("claim: x is at most 1", "claim x at most 1"),
        ("claim: x is between 1 and 2 Gly", "claim x between 1 2[Gly]"),
        ("claim: x is never", "claim x never"),
        ("claim: a < b", "claim (compare a < b)"),
        ("claim: x is 67.36(54)", "claim x is 67.36+0.54-0.54"),
        (
            "claim: f(3 Mpc) under flat with H0 = 70 km/s/Mpc, Ωm = 0.3 is 210 km/s",
            "claim (under <flat H0=70[km s^-1 Mpc^-1] Ωm=0.3> f(3[Mpc])) is 210[km s^-1]",
        ),
    ] {
        assert_eq!(said(text), read, "{text}");
    }
}

#[test]
fn a_statement_goes_on_in_indented_lines_and_in_brackets() {
    let parsed = parse("x = 1 +\n  2   # two\n\n# nothing\n\t+ 3\ny = f(\n1,\n2\n)\nz = 3\n");
    assert_eq!(parsed.diagnostics, []);
    let all: Vec<_> = parsed.statements.iter().map(|one| described(&one.kind)).collect();
    assert_eq!(all, ["value x (+ (+ 1 2) 3)", "value y f(1, 2)", "value z 3"]);
}

#[test]
fn line_ends_of_every_kind_and_a_byte_order_mark_are_read() {
    for text in ["\u{feff}x = 1\r\ny = 2\r\n", "x = 1\ny = 2"] {
        let parsed = parse(text);
        assert_eq!(parsed.diagnostics, []);
        assert_eq!(parsed.statements.len(), 2);
    }
}

#[test]
fn words_that_mean_something_in_their_place_are_names_elsewhere() {
    for word in [
        "at", "every", "in", "by", "via", "for", "as", "only", "today", "hand", "steps", "log", "sigma",
    ] {
        assert_eq!(said(&format!("{word} = 1")), format!("value {word} 1"));
        assert_eq!(
            said(&format!("{word}({word}) = {word}")),
            format!("function ({word}) {word} {word}")
        );
    }
}

#[test]
fn an_entry_wants_more_after_an_open_end() {
    for text in [
        "f(",
        "{1,",
        "x [",
        "1 +",
        "a where",
        "flat with",
        "x =",
        "claim \"a\":",
        "not",
        "1 <",
        "if",
        "a,",
    ] {
        assert!(wants_more(text), "{text}");
    }
    for text in ["", "x", "x = 1", "f(1)", "1 km", "f(1))", "\"open", "(1 +\nx = 3"] {
        assert!(!wants_more(text), "{text}");
    }
}
