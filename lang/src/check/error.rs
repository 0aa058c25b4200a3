//! What can be wrong, in words. Each function here takes the facts of one
//! mistake and says it; those that need the checker to find a repair are in
//! `quantity` (unlike dimensions) and `naming` (names that are not there).
//!
//! Repairs are candidates: whoever shows them tries them first.

pub(super) mod naming;
pub(super) mod quantity;

pub(super) use naming::*;

use super::form::Form;
use super::infer::{ANGLE, MAGNITUDE};
use crate::ast::{Bracket, Name, Setting};
use crate::diagnostic::{Diagnostic, Fix};
use crate::source::Span;
use smol_str::SmolStr;

pub(super) fn truth_as_quantity(span: Span) -> Diagnostic {
    Diagnostic::error(
        "not-a-number",
        "a truth value stands where a quantity is wanted",
        span,
        "true or false",
    )
    .note("`if … then … else …` turns a condition into a value; count(…) counts true ones")
}

pub(super) fn not_a_truth(span: Span, what: &str) -> Diagnostic {
    Diagnostic::error(
        "not-a-truth",
        format!("{what} stands where a condition is wanted"),
        span,
        "no condition",
    )
    .note("a condition compares: 0 < z < 1")
}

pub(super) fn not_a_number(span: Span, role: &str, found: &str) -> Diagnostic {
    let message = format!("{role} is a plain number, and this is {found}");
    Diagnostic::error("not-a-number", message, span, found)
}

pub(super) fn unlike_kinds(yes: Span, no: Span) -> Diagnostic {
    Diagnostic::error(
        "not-a-number",
        "one branch is a condition and the other a quantity",
        no,
        "this branch",
    )
    .and(yes, "that branch")
}

pub(super) fn exponent_with_dimension(span: Span, what: &str, found: &Form) -> Diagnostic {
    let (start, end) = (
        Span {
            end: span.start,
            ..span
        },
        Span {
            start: span.end,
            ..span
        },
    );
    let only = |key| found.parts().all(|(known, _)| known == key);
    let (code, note) = if only(MAGNITUDE) {
        (
            "magnitude-for-number",
            "a flux ratio is 10^(-0.4*(m1 - m2)): the -0.4 takes the magnitudes",
        )
    } else if only(ANGLE) {
        ("angle-for-number", "an angle is no number: divide it by 1 rad")
    } else {
        ("bad-exponent", "divide it by a quantity of its own kind first")
    };
    let mut error = Diagnostic::error(
        code,
        format!("an exponent is a plain number, and this is {what}"),
        span,
        what,
    )
    .note(note);
    if code == "magnitude-for-number" {
        let edits = vec![(start, "(-0.4*".to_owned()), (end, ")".to_owned())];
        error.fixes.push(Fix {
            title: "write the flux ratio".into(),
            edits,
        });
    }
    error
}

pub(super) fn bad_exponent(base: Span, exponent: Span, what: &str) -> Diagnostic {
    let message = format!("{what} is raised to a power that is not a written number");
    Diagnostic::error("bad-exponent", message, exponent, "not written out")
        .and(base, what)
        .note("the dimension of the result depends on it: write a number such as 2, -1 or (1/2)")
}

pub(super) fn power_too_large(span: Span) -> Diagnostic {
    Diagnostic::error(
        "too-large",
        "the dimension of this power is beyond all measure",
        span,
        "power too large",
    )
}

pub(super) fn undivided_range(span: Span) -> Diagnostic {
    Diagnostic::error(
        "undivided-range",
        "a range as a series has to say its step",
        span,
        "no step",
    )
    .note("0 .. 3 every 0.5, 0 .. 3 in 60 steps, 0.01 .. 10 every 0.1 dex")
}

pub(super) fn table_as_value(span: Span, name: &str) -> Diagnostic {
    let message = format!("{name} is a table, and a calculation needs one of its columns");
    Diagnostic::error("table-as-value", message, span, "a table")
        .note(format!("a column is written {name}.z"))
}

pub(super) fn no_columns(span: Span, field: &Name) -> Diagnostic {
    let message = format!("this has no column {}", field.node);
    Diagnostic::error("no-columns", message, span, "not a table")
        .note("columns belong to a table that `read` brings in")
}

pub(super) fn not_yet(span: Span, what: &str) -> Diagnostic {
    Diagnostic::error(
        "not-yet",
        format!("{what} is understood but cannot be done yet"),
        span,
        "not yet",
    )
}

pub(super) fn equation_as_argument(span: Span, name: &str) -> Diagnostic {
    Diagnostic::error(
        "equation-as-argument",
        format!("{name} takes no equation"),
        span,
        "an equation",
    )
    .note("only root(left = right, x = a .. b) does")
}

pub(super) fn argument_twice(span: Span, first: Span, name: &str) -> Diagnostic {
    Diagnostic::error(
        "too-many-arguments",
        format!("the argument {name} is given twice"),
        span,
        "again",
    )
    .and(first, "already here")
}

pub(super) fn too_many_arguments(name: &Name, span: Span, parameters: &[(SmolStr, bool)]) -> Diagnostic {
    let message = match parameters.len() {
        0 => format!("{} takes no arguments", name.node),
        1 => format!("{} takes one argument", name.node),
        count => format!("{} takes at most {count} arguments", name.node),
    };
    Diagnostic::error("too-many-arguments", message, span, "one too many")
        .note(written_call(name, parameters))
}

pub(super) fn missing_argument(name: &Name, parameter: &str, parameters: &[(SmolStr, bool)]) -> Diagnostic {
    let message = format!("{} needs its argument {parameter}", name.node);
    Diagnostic::error(
        "missing-argument",
        message,
        name.span,
        format!("{parameter} is missing"),
    )
    .note(written_call(name, parameters))
}

fn written_call(name: &Name, parameters: &[(SmolStr, bool)]) -> String {
    let names: Vec<&str> = parameters.iter().map(|(name, _)| name.as_str()).collect();
    format!("it is called as {}({})", name.node, names.join(", "))
}

pub(super) fn named_in_list(name: &Name) -> Diagnostic {
    let message = format!("{} of several values takes them without names", name.node);
    Diagnostic::error("unknown-argument", message, name.span, "named arguments")
}

pub(super) fn no_place(span: Span, name: &str) -> Diagnostic {
    Diagnostic::error(
        "no-columns",
        format!("{name}(…) has no .at"),
        span,
        "has no place",
    )
    .note("maximum(…).at and minimum(…).at say where")
}

pub(super) fn malformed_binding_form(span: Span, name: &str) -> Diagnostic {
    let (body, over) = match name {
        "root" => ("D_L(x) = 10 Gpc", "x = 0 .. 20"),
        "derivative" => ("age(x)", "x = 1"),
        "sum" => ("1/n^2", "n = 1 .. 100 every 1"),
        _ => ("1/E(x)", "x = 0 .. 3"),
    };
    Diagnostic::error(
        "binding-form",
        format!("{name} wants a body, and a variable with what it runs over"),
        span,
        "",
    )
    .note(format!("as in {name}({body}, {over})"))
}

pub(super) fn root_wants_equation(span: Span, variable: &str) -> Diagnostic {
    Diagnostic::error(
        "root-wants-equation",
        "root solves an equation, and this is one side of it",
        span,
        "no equation",
    )
    .note(format!("write it as root(… = 0, {variable} = a .. b)"))
}

pub(super) fn derivative_at_a_point(span: Span) -> Diagnostic {
    Diagnostic::error(
        "binding-form",
        "a derivative is taken at a point, not over a range",
        span,
        "a range",
    )
    .note("as in derivative(age(x), x = 1)")
}

pub(super) fn bounds_are_no_range(span: Span, name: &str) -> Diagnostic {
    Diagnostic::error(
        "binding-form",
        format!("{name} wants a range for its variable"),
        span,
        "no range",
    )
    .note("as in x = 0 .. 3; ∞ may be an end of an integral")
}

pub(super) fn divided_bounds(span: Span, name: &str) -> Diagnostic {
    let message = format!("the range of {name} has two ends and no step");
    Diagnostic::error("binding-form", message, span, "divided")
}

pub(super) fn open_h(span: Span) -> Diagnostic {
    let message = "what power of h is settled here depends on what the function is given";
    Diagnostic::error("open-h", message, span, "which power?").note("say it at the parameter: r [Mpc/h]")
}

pub(super) fn frame_already(value: Span, bracket: &Bracket, what: &str) -> Diagnostic {
    let message = format!("this is {what} already in the frame of the bracket");
    Diagnostic::error("frame-already", message, bracket.span, "nothing to take along")
        .and(value, what)
        .note("[cMpc at z] goes from proper to comoving, [Mpc at z] from comoving to proper")
        .fix("only change the unit", conversion(bracket), "")
}

pub(super) fn h_already(value: Span, bracket: &Bracket, what: &str, plain: bool) -> Diagnostic {
    let message = if plain {
        "there is no h in this to settle"
    } else {
        "this carries that power of h already"
    };
    Diagnostic::error("h-already", message, bracket.span, "nothing to settle")
        .and(value, what)
        .note("[Mpc for h] settles h, [Mpc/h for h] goes back to units of h")
        .fix("only change the unit", conversion(bracket), "")
}

/// What a bracket does beside naming a unit.
fn conversion(bracket: &Bracket) -> Span {
    Span {
        start: bracket.unit.span.end,
        end: bracket.span.end.saturating_sub(1),
    }
}

pub(super) fn open_bridge(span: Span) -> Diagnostic {
    Diagnostic::error(
        "no-bridge",
        "the dimension of this is not known yet, so no bridge can be solved for",
        span,
        "any dimension",
    )
    .note("say it at the parameter: x [Hz]")
}

pub(super) fn no_bridge(
    span: Span,
    value: Span,
    words: &[String; 2],
    left: &str,
    names: &[Name],
) -> Diagnostic {
    let constants = list(names);
    let message = format!("no powers of {constants} lead from {} to {}", words[0], words[1]);
    Diagnostic::error("no-bridge", message, span, &words[1])
        .and(value, &words[0])
        .note(format!("the constants would have to make up {left}"))
}

pub(super) fn many_bridges(span: Span, names: &[Name]) -> Diagnostic {
    let message = format!("more than one set of powers of {} leads across", list(names));
    Diagnostic::error("many-bridges", message, span, "not unique")
        .note("name only the constants that are needed")
}

fn list(names: &[Name]) -> String {
    names
        .iter()
        .map(|name| name.node.as_str())
        .collect::<Vec<_>>()
        .join(", ")
}

pub(super) fn surface_brightness(span: Span, reason: &str) -> Diagnostic {
    Diagnostic::error("wrong-bracket", reason, span, "mag/arcsec^2 is meant")
        .note("its area stands inside the logarithm, so no unit can rescale it")
        .fix("quote it per square arcsecond", span, "mag/arcsec^2")
}

pub(super) fn bad_little_h(name: Span, unit: Span) -> Diagnostic {
    let message = "h in a unit is little h, and needs a length, a mass or a luminosity beside it";
    let error = Diagnostic::error("hour-or-little-h", message, name, "the hour is `hr`")
        .note("the hour is hr; Planck's constant is the value h_P");
    if unit == name {
        error
    } else {
        error.and(unit, "no length, mass or luminosity")
    }
    .fix("the hour is meant", name, "hr")
}

pub(super) fn model_on_a_model(span: Span) -> Diagnostic {
    Diagnostic::error(
        "assume-on-itself",
        "a parameter of a model cannot rest on a model",
        span,
        "needs a model",
    )
    .note("write the number, or settle it first: `H0 under planck2018`")
}

pub(super) fn inadmissible_model(span: Span, message: &str) -> Diagnostic {
    Diagnostic::error("wrong-parameter", message, span, "does not go with the rest")
}

pub(super) fn parameter_twice(name: &Name, first: Span) -> Diagnostic {
    Diagnostic::error(
        "wrong-parameter",
        format!("{} is given twice", name.node),
        name.span,
        "again",
    )
    .and(first, "already here")
}

pub(super) fn function_parameter(name: &Name, parameter: &str) -> Diagnostic {
    Diagnostic::error(
        "wrong-parameter",
        format!("{parameter} is a function of redshift"),
        name.span,
        "without its variable",
    )
    .note(format!("as in {parameter}(z) = -1 + 0.2*z/(1+z)"))
}

pub(super) fn number_parameter(span: Span, parameter: &str) -> Diagnostic {
    Diagnostic::error(
        "wrong-parameter",
        format!("{parameter} is a number, not a function"),
        span,
        "no variable here",
    )
}

pub(super) fn parameter_dimension(setting: &Setting, words: &[String; 2], unit: Option<&str>) -> Diagnostic {
    let message = format!("{} is {}, and this is {}", setting.name.node, words[0], words[1]);
    let error = Diagnostic::error("wrong-parameter", message, setting.value.span, &words[1])
        .and(setting.name.span, &words[0]);
    let end = Span {
        start: setting.value.span.end,
        end: setting.value.span.end,
    };
    match unit {
        Some(unit) => error.fix(format!("give it in {unit}"), end, format!(" {unit}")),
        None => error,
    }
}

pub(super) fn second_assume(span: Span, first: Option<Span>) -> Diagnostic {
    let error = Diagnostic::error("second-assume", "a sheet assumes one model", span, "a second")
        .note("`EXPR under MODEL` evaluates in another");
    first
        .into_iter()
        .fold(error, |error, first| error.and(first, "the first"))
}

pub(super) fn assume_too_late(span: Span, used: Option<Span>) -> Diagnostic {
    let message = "the model is assumed after something needed it";
    let error = Diagnostic::error("assume-too-late", message, span, "too late")
        .note("move it to the top of the sheet");
    used.into_iter()
        .fold(error, |error, used| error.and(used, "needs a model"))
}

pub(super) fn within_without_is(span: Span) -> Diagnostic {
    Diagnostic::error(
        "claim-comparison",
        "a comparison has no tolerance",
        span,
        "within what?",
    )
    .note("write `claim A is B within 2%`")
}

pub(super) fn claim_without_assertion(span: Span) -> Diagnostic {
    Diagnostic::error(
        "claim-without-is",
        "this claims nothing: it says of what, but not what it is",
        span,
        "is what?",
    )
    .note("`is 46.5 Gly`, `is about 16 Gly`, `is below 1 c`, `is between 13 and 14 Gyr`, or a comparison")
}

pub(super) fn claim_needs_number(span: Span) -> Diagnostic {
    let message = "a claim without a tolerance is judged by the digits of a written number";
    Diagnostic::error("claim-needs-number", message, span, "has no digits")
        .note("write the number as quoted, or say how close: `within 1%`")
}

pub(super) fn quotes_many(span: Span) -> Diagnostic {
    Diagnostic::error(
        "claim-needs-number",
        "a claim quotes one number, and this is a series",
        span,
        "a series",
    )
    .note("a series on the left agrees if each of its values does")
}

pub(super) fn unlike_tolerance(amount: Span, subject: Span, words: &[String; 2], plain: bool) -> Diagnostic {
    let message = format!(
        "the tolerance is {}, and the claim is about {}",
        words[1], words[0]
    );
    let error = Diagnostic::error("unlike-sides", message, amount, &words[1]).and(subject, &words[0]);
    let end = Span {
        start: amount.end,
        end: amount.end,
    };
    if plain {
        error
            .note("a fraction of the quoted value is written in %")
            .fix("make it per cent", end, "%")
    } else {
        error
    }
}

pub(super) fn duplicate_name(name: &Name, first: Option<Span>, elsewhere: &str) -> Diagnostic {
    let message = format!("{} is bound a second time", name.node);
    let error = Diagnostic::error("duplicate-name", message, name.span, "again");
    match first {
        Some(first) => error.and(first, "first here"),
        None => error.note(format!("it is first bound in {elsewhere}")),
    }
}

pub(super) fn wrong_given(span: Span, name: &str, words: &[String; 2]) -> Diagnostic {
    let message = format!(
        "the sheet's {name} is {}, and what is given for it is {}",
        words[0], words[1]
    );
    Diagnostic::error("wrong-given", message, span, &words[1])
}

pub(super) fn model_not_stated(used: Span) -> Diagnostic {
    let message = format!(
        "the results rest on a model, and the sheet assumes none: {} is taken",
        crate::lower::DEFAULT_MODEL
    );
    let top = Span { start: 0, end: 0 };
    Diagnostic::warning("model-not-stated", message, used, "needs a model").fix(
        "say which",
        top,
        format!("assume {}\n", crate::lower::DEFAULT_MODEL),
    )
}

pub(super) fn no_such_given(span: Span, name: &str, bound: bool) -> Diagnostic {
    let message = format!("the sheet has no input {name}");
    let error = Diagnostic::error("wrong-given", message, span, "given for nothing");
    error.note(if bound {
        format!("{name} is bound in it, but not by `given`, so it cannot be replaced")
    } else {
        "an input is a line `given NAME = …`".into()
    })
}

pub(super) fn include_cycle(span: Span, path: &str) -> Diagnostic {
    let message = format!("{path} is being read already, so it cannot be included here");
    Diagnostic::error("include-cycle", message, span, "includes itself")
}

pub(super) fn sigma_of_nothing(span: Span) -> Diagnostic {
    let message = "sigma is an uncertainty, and the quoted number has none";
    Diagnostic::error("claim-needs-number", message, span, "of what?")
        .note("quote it with its uncertainty: `is 67.4(5) km/s/Mpc within 2 sigma`")
}

pub(super) fn cannot_read(span: Span, reason: &str) -> Diagnostic {
    Diagnostic::error("cannot-read", reason, span, "cannot be read")
}

pub(super) fn bad_data(span: Span, reason: &str) -> Diagnostic {
    Diagnostic::error("bad-data", reason, span, "no table that can be read")
}

pub(super) fn unit_of_column(span: Span, column: &str, unit: &str) -> Diagnostic {
    let message = format!("the column {column} has the unit {unit:?}, which is not known");
    Diagnostic::error("unknown-unit", message, span, "in this file")
        .note(format!("say it in the sheet: with {column} [unit]"))
}

pub(super) fn unit_is_no_literal(span: Span) -> Diagnostic {
    let message = "a unit is defined by written numbers and constants, greater than zero";
    Diagnostic::error("bad-unit", message, span, "not a fixed size").note("as in 1 beam = 3.2e-4 sr")
}

pub(super) fn unit_of_library(name: &Name) -> Diagnostic {
    let message = format!("{} is a unit already", name.node);
    Diagnostic::error("duplicate-name", message, name.span, "a unit of the library")
}

pub(super) fn unit_shadows_name(name: &Name) -> Diagnostic {
    let message = format!(
        "{} is a value too: after a number it will be read as the unit",
        name.node
    );
    Diagnostic::warning("unit-shadows-name", message, name.span, "also a value")
}

pub(super) fn rebinds_library(name: &Name, kind: &str) -> Diagnostic {
    let message = format!(
        "{} is a {kind} of the library; from here on it is yours",
        name.node
    );
    Diagnostic::warning("rebinds-library-name", message, name.span, "bound anew")
}

pub(super) fn unused(span: Span, name: &str) -> Diagnostic {
    Diagnostic::warning("unused-value", format!("nothing uses {name}"), span, "unused")
}

pub(super) fn case_of_unit(name: &Name, unit: &str, meant: &str) -> Diagnostic {
    let message = format!(
        "{} is a {unit} with a prefix, and {meant} is probably meant",
        name.node
    );
    Diagnostic::warning("case-of-unit", message, name.span, format!("{meant}?")).fix(
        format!("write {meant}"),
        name.span,
        meant,
    )
}

pub(super) fn uncertainty_not_carried(span: Span) -> Diagnostic {
    let message = "uncertainties are read, but the calculation does not carry them yet";
    Diagnostic::warning("not-yet", message, span, "its value alone is used")
}
