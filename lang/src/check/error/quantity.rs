//! Unlike dimensions and frames: which side is what, why it matters, and what
//! would settle it.

use crate::ast::{Argument, BinaryOp, Bracket, Expr, ExprKind, Name, UnaryOp};
use crate::check::bracket::Bracketed;
use crate::check::form::{self, FIRST_BOUND, Form, Key};
use crate::check::infer::{ANGLE, COMOVING, LITTLE_H, MAGNITUDE};
use crate::check::typed::Typed;
use crate::check::{Checker, library};
use crate::diagnostic::Diagnostic;
use crate::source::{Span, Spanned};
use smol_str::SmolStr;

/// An expression with what it was found to be.
type Side<'a> = (&'a Expr, &'a Typed);

/// In what two quantities differ.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Difference {
    /// Only in frame.
    Frame,
    /// In the power of h, and perhaps in frame.
    LittleH,
    /// An angle and a number.
    Angle,
    /// A magnitude and a number.
    Magnitude,
    /// In dimension.
    Dimension,
}

impl Difference {
    /// The code of a message about it; `otherwise` where dimensions differ.
    fn code(self, otherwise: &'static str) -> &'static str {
        match self {
            Difference::Frame => "mixed-frames",
            Difference::LittleH => "mixed-h",
            Difference::Angle => "angle-for-number",
            Difference::Magnitude => "magnitude-for-number",
            Difference::Dimension => otherwise,
        }
    }
}

/// Repairs offered for one mistake at most.
const MOST_REPAIRS: usize = 3;

/// Constants that are left out most often, as they would be written.
const CONSTANTS: &[(&str, &str, i32)] = &[
    ("* c", "c", 1),
    ("/ c", "c", -1),
    ("/ H0", "H0", -1),
    ("* H0", "H0", 1),
    ("* c^2", "c", 2),
    ("/ c^2", "c", -2),
    ("* G", "G", 1),
    ("/ G", "G", -1),
    ("* k_B", "k_B", 1),
    ("/ k_B", "k_B", -1),
    ("* h_P", "h_P", 1),
    ("/ h_P", "h_P", -1),
];

impl Checker {
    fn difference(&self, a: &Form, b: &Form) -> Difference {
        let quotient = self.unifier.resolve(&a.per(b));
        let open: Vec<Key> = quotient
            .unknowns()
            .filter(|key| *key >= form::FIRST_UNKNOWN)
            .filter_map(|key| self.unifier.sort(key).along())
            .collect();
        let wrong: Vec<Key> = quotient
            .parts()
            .map(|(key, _)| key)
            .filter(|key| *key < FIRST_BOUND && !open.contains(key))
            .collect();
        let all = |allowed: &[Key]| wrong.iter().all(|key| allowed.contains(key));
        if all(&[COMOVING]) {
            Difference::Frame
        } else if all(&[COMOVING, LITTLE_H]) {
            Difference::LittleH
        } else if all(&[ANGLE]) {
            Difference::Angle
        } else if all(&[MAGNITUDE]) {
            Difference::Magnitude
        } else {
            Difference::Dimension
        }
    }

    fn words_of(&self, difference: Difference, form: &Form) -> String {
        if difference == Difference::Frame {
            self.describe_frame(form)
        } else {
            self.describe(form)
        }
    }

    /// An error about two sides, with its notes and repairs.
    fn unlike(
        &mut self,
        message: &dyn Fn(&str, &str) -> String,
        at: Span,
        left: Side<'_>,
        right: Side<'_>,
    ) -> Diagnostic {
        let difference = self.difference(&left.1.form, &right.1.form);
        let words = [
            self.words_of(difference, &left.1.form),
            self.words_of(difference, &right.1.form),
        ];
        let code = difference.code("unlike-sides");
        let mut error = Diagnostic::error(code, message(&words[0], &words[1]), at, "");
        if at == right.0.span {
            error.at.text.clone_from(&words[1]);
            error = error.and(left.0.span, &words[0]);
        } else if at == left.0.span {
            error.at.text.clone_from(&words[0]);
        } else {
            error = error.and(left.0.span, &words[0]).and(right.0.span, &words[1]);
        }
        self.settle_sides(error, difference, left, right)
    }

    fn settle_sides(
        &mut self,
        mut error: Diagnostic,
        difference: Difference,
        left: Side<'_>,
        right: Side<'_>,
    ) -> Diagnostic {
        match difference {
            Difference::Frame => {
                let z = self.redshift_near(&[left.0, right.0]);
                error = error.note(frame_note(z.as_deref()));
                let is_comoving = !form::is_zero(self.settled(&left.1.form).exponent(COMOVING));
                let order = if is_comoving {
                    [(left, right), (right, left)]
                } else {
                    [(right, left), (left, right)]
                };
                for (side, other) in order {
                    error = self.frame_repair(error, side, &other.1.form, z.as_deref(), Wrap::Operand);
                }
                error
            }
            Difference::LittleH => {
                error = error.note(self.h_note());
                for (side, other) in [(left, right), (right, left)] {
                    error = self.h_repair(error, side, &other.1.form, Wrap::Operand);
                }
                error
            }
            Difference::Angle => {
                error = error.note("a bare number is never an angle: say rad, deg, arcmin or arcsec");
                self.unit_repair(error, left, right, ANGLE, &["deg", "rad", "arcsec"])
            }
            Difference::Magnitude => {
                error =
                    error.note("a computed number is no magnitude: 2.5*log10(x) is, with its 2.5 written");
                for (expr, _) in [left, right] {
                    error = log_repair(error, expr);
                }
                self.unit_repair(error, left, right, MAGNITUDE, &["mag"])
            }
            Difference::Dimension => self.constant_repair(error, left, right),
        }
    }

    /// How much a power of h is, in the model assumed.
    fn h_note(&self) -> String {
        let h = self.assumed_h();
        let percent = (100.0 * (1.0 - h)).round();
        format!(
            "they differ by a power of h: in the model assumed h = {}, so by {percent}% for each",
            crate::eval::plain_number(h)
        )
    }

    /// `a + b` of unlike sides.
    pub(in crate::check) fn unlike_sides(
        &mut self,
        op: Spanned<BinaryOp>,
        left: Side<'_>,
        right: Side<'_>,
    ) -> Diagnostic {
        let sum = op.node == BinaryOp::Add;
        let message = move |a: &str, b: &str| {
            if sum {
                format!("cannot add {a} and {b}")
            } else {
                format!("cannot subtract {b} from {a}")
            }
        };
        let mut error = self.unlike(&message, op.span, left, right);
        error.at.text = "unlike sides".into();
        error
    }

    pub(in crate::check) fn unlike_comparison(
        &mut self,
        op: Span,
        left: Side<'_>,
        right: Side<'_>,
    ) -> Diagnostic {
        let mut error = self.unlike(&|a, b| format!("cannot compare {a} with {b}"), op, left, right);
        error.at.text = "unlike sides".into();
        error
    }

    pub(in crate::check) fn unlike_parts(
        &mut self,
        left: Side<'_>,
        right: Side<'_>,
        what: &str,
    ) -> Diagnostic {
        self.unlike(
            &|a, b| format!("{what} must be alike, and these are {a} and {b}"),
            right.0.span,
            left,
            right,
        )
    }

    pub(in crate::check) fn unlike_claim(&mut self, subject: Side<'_>, quoted: Side<'_>) -> Diagnostic {
        self.unlike(
            &|a, b| format!("what is computed is {a}, and what is quoted {b}"),
            quoted.0.span,
            subject,
            quoted,
        )
    }

    /// A default that is not what its parameter is announced as.
    pub(in crate::check) fn unlike_default(
        &self,
        (value, typed): (Span, &Typed),
        (name, takes): (Span, &Typed),
    ) -> Diagnostic {
        let difference = self.difference(&typed.form, &takes.form);
        let words = [
            self.words_of(difference, &takes.form),
            self.words_of(difference, &typed.form),
        ];
        let message = format!("the parameter is {}, and its default {}", words[0], words[1]);
        Diagnostic::error(difference.code("unlike-sides"), message, value, &words[1]).and(name, &words[0])
    }

    pub(in crate::check) fn unlike_annotation(
        &mut self,
        (value, typed): (Span, &Typed),
        bracket: &Bracket,
        asked: &Form,
    ) -> Diagnostic {
        let difference = self.difference(&typed.form, asked);
        let words = [
            self.words_of(difference, asked),
            self.words_of(difference, &typed.form),
        ];
        let message = format!(
            "the bracket announces {}, and the value is {}",
            words[0], words[1]
        );
        Diagnostic::error(difference.code("unlike-sides"), message, value, &words[1])
            .and(bracket.span, &words[0])
    }

    /// An argument that is not what the function takes.
    pub(in crate::check) fn wrong_argument(
        &mut self,
        (name, signature): (&Name, &str),
        parameters: &[(SmolStr, bool)],
        place: usize,
        (value, actual): Side<'_>,
        expected: &Form,
    ) -> Diagnostic {
        let difference = self.difference(&actual.form, expected);
        let words = [
            self.words_of(difference, expected),
            self.words_of(difference, &actual.form),
        ];
        let message = format!(
            "{} takes {} for {}, and this is {}",
            name.node, words[0], parameters[place].0, words[1]
        );
        let code = difference.code("wrong-argument");
        let error =
            Diagnostic::error(code, message, value.span, &words[1]).note(format!("it is {signature}"));
        let wanted = Typed::quantity(expected.clone());
        match difference {
            Difference::Frame => {
                let z = self.redshift_near(&[value]);
                self.frame_repair(
                    error.note(frame_note(z.as_deref())),
                    (value, actual),
                    expected,
                    z.as_deref(),
                    Wrap::Argument,
                )
            }
            Difference::LittleH => self.h_repair(error, (value, actual), expected, Wrap::Argument),
            Difference::Angle => self.unit_repair(
                error,
                (value, actual),
                (value, &wanted),
                ANGLE,
                &["deg", "rad", "arcsec"],
            ),
            Difference::Magnitude => {
                self.unit_repair(error, (value, actual), (value, &wanted), MAGNITUDE, &["mag"])
            }
            Difference::Dimension => self.constant_of_side(error, (value, actual), expected),
        }
    }

    /// A bracket whose unit is not of the value's kind.
    pub(in crate::check) fn wrong_bracket(&mut self, it: &Bracketed<'_>, target: &Form) -> Diagnostic {
        let difference = self.difference(&it.typed.form, target);
        let words = [
            self.words_of(difference, &it.typed.form),
            self.words_of(difference, target),
        ];
        let code = difference.code("wrong-bracket");
        let unit = it.measure.text.as_str();
        let message = format!(
            "{} cannot be expressed in {unit}, for that is {}",
            words[0], words[1]
        );
        let mut error =
            Diagnostic::error(code, message, it.bracket.span, &words[1]).and(it.value.span, &words[0]);
        let inside = Span {
            start: it.bracket.unit.span.end,
            end: it.bracket.unit.span.end,
        };
        match difference {
            Difference::Frame => {
                let z = self.redshift_near(&[it.value]);
                error = error.note("a plain bracket changes the unit shown, never the frame");
                match z {
                    Some(z) => error.fix(
                        format!("take it along to redshift {z}"),
                        inside,
                        format!(" at {z}"),
                    ),
                    None => error.fix("take it as of today", inside, " today"),
                }
            }
            Difference::LittleH => error
                .note("a plain bracket changes the unit shown, and h is more than a unit")
                .fix("settle h with the model", inside, " for h"),
            Difference::Angle | Difference::Magnitude => error,
            Difference::Dimension => self.via_repair(error, it, target, inside),
        }
    }

    /// A bridge that would lead across.
    fn via_repair(
        &mut self,
        mut error: Diagnostic,
        it: &Bracketed<'_>,
        target: &Form,
        inside: Span,
    ) -> Diagnostic {
        let (value, target) = (self.settled(&it.typed.form), self.settled(target));
        for names in [
            &["c"][..],
            &["k_B"],
            &["h_P"],
            &["h_P", "c"],
            &["G", "c"],
            &["c", "hbar"],
            &["H0"],
            &["c", "H0"],
            &["m_p"],
        ] {
            if error.fixes.len() < MOST_REPAIRS && self.bridge_with(&value, &target, names) {
                let names = names.join(", ");
                error = error.fix(format!("cross with {names}"), inside, format!(" via {names}"));
            }
        }
        error
    }

    /// Takes one side along to the frame of the other.
    fn frame_repair(
        &self,
        error: Diagnostic,
        (expr, typed): Side<'_>,
        other: &Form,
        z: Option<&str>,
        wrap: Wrap,
    ) -> Diagnostic {
        let own = self.settled(&typed.form);
        let target = self.settled(other).exponent(COMOVING);
        if own.exponent(COMOVING) == target {
            return error;
        }
        let unit = if form::is_zero(target) {
            self.unit_without_frame(typed)
        } else {
            let there = own
                .without(|key| key == COMOVING)
                .times(&Form::power_of(COMOVING, target));
            self.unit_text(&there)
        };
        match z {
            Some(z) => bracketed(
                error,
                expr,
                &unit,
                &format!("at {z}"),
                &format!("take it along to redshift {z}"),
                wrap,
            ),
            None => bracketed(error, expr, &unit, "today", "take it as of today", wrap),
        }
    }

    fn h_repair(&self, error: Diagnostic, (expr, typed): Side<'_>, other: &Form, wrap: Wrap) -> Diagnostic {
        let (own, other) = (self.settled(&typed.form), self.settled(other));
        if form::is_zero(own.exponent(LITTLE_H)) || !form::is_zero(other.exponent(LITTLE_H)) {
            return error;
        }
        let plain = own.without(|key| key == LITTLE_H);
        let unit = typed
            .unit
            .as_ref()
            .map(|unit| without_h(&unit.text))
            .filter(|text| !text.is_empty());
        let unit = unit.unwrap_or_else(|| self.unit_text(&plain));
        bracketed(error, expr, &unit, "for h", "settle h with the model", wrap)
    }

    fn unit_without_frame(&self, typed: &Typed) -> String {
        match &typed.unit {
            Some(unit) if !unit.framed => unit.text.to_string(),
            Some(_) | None => {
                let plain = self.settled(&typed.form).without(|key| key == COMOVING);
                self.unit_text(&plain)
            }
        }
    }

    /// Gives a bare number its unit.
    fn unit_repair(
        &self,
        mut error: Diagnostic,
        left: Side<'_>,
        right: Side<'_>,
        generator: Key,
        units: &[&str],
    ) -> Diagnostic {
        for (expr, typed) in [left, right] {
            let bare = self.settled(&typed.form).exponent(generator) == form::ZERO;
            if bare && is_bare_literal(expr) {
                let end = Span {
                    start: expr.span.end,
                    end: expr.span.end,
                };
                for unit in units {
                    error = error.fix(format!("say {unit}"), end, format!(" {unit}"));
                }
            }
        }
        error
    }

    fn constant_repair(&mut self, mut error: Diagnostic, left: Side<'_>, right: Side<'_>) -> Diagnostic {
        error = self.constant_of_side(error, right, &left.1.form);
        self.constant_of_side(error, left, &right.1.form)
    }

    /// A constant that makes one side like the other.
    fn constant_of_side(
        &mut self,
        mut error: Diagnostic,
        (expr, typed): Side<'_>,
        other: &Form,
    ) -> Diagnostic {
        for (text, constant, power) in CONSTANTS {
            let Some(entry) = library::value(constant) else {
                continue;
            };
            let factor = Form::dimension(&entry.result.dimension).power(form::Exponent::from(*power));
            let mended = self.unifier.resolve(&typed.form).times(&factor);
            let mended = self.with_open_angle(mended);
            if error.fixes.len() >= MOST_REPAIRS
                || !self.unifier.could_be(&mended, other)
                || self.is_open_form(&typed.form)
            {
                continue;
            }
            error = with_edits(error, format!("write {text}"), appended(expr, text));
        }
        error
    }

    fn is_open_form(&self, form: &Form) -> bool {
        self.unifier.resolve(form).unknowns().any(|key| self.is_any(key))
    }

    /// Two arguments that stand in each other's place.
    pub(in crate::check) fn swapped_arguments(
        &self,
        (name, signature): (&Name, &str),
        one: Side<'_>,
        other: Side<'_>,
    ) -> Diagnostic {
        let words = [self.describe(&one.1.form), self.describe(&other.1.form)];
        let (first, second) = (one.0.span, other.0.span);
        let message = format!(
            "{} is given {} and {} in each other's place",
            name.node, words[0], words[1]
        );
        let edits = vec![
            (first, self.text(second).to_owned()),
            (second, self.text(first).to_owned()),
        ];
        let error = Diagnostic::error("wrong-argument", message, first, &words[0]).and(second, &words[1]);
        with_edits(
            error.note(format!("it is {signature}")),
            "swap the arguments".into(),
            edits,
        )
    }

    /// The redshift that stands nearest: an argument of a function of z in
    /// one of the expressions, or a name `z` in sight.
    fn redshift_near(&self, exprs: &[&Expr]) -> Option<String> {
        let found = exprs
            .iter()
            .find_map(|expr| argument_z(expr))
            .map(|span| self.text(span).to_owned());
        let named = || {
            let in_sight =
                self.local("z").is_some() || self.environment.latest(self.via_space(), "z").is_some();
            in_sight.then(|| "z".to_owned())
        };
        found.or_else(named)
    }
}

fn frame_note(z: Option<&str>) -> String {
    match z.and_then(|text| text.parse::<f64>().ok()) {
        Some(z) => format!(
            "proper is comoving over 1+z: at z = {z} they differ by a factor of {}",
            crate::eval::plain_number(1.0 + z)
        ),
        None => "proper is comoving over 1+z, so they agree only today".into(),
    }
}

fn with_edits(mut error: Diagnostic, title: String, edits: Vec<(Span, String)>) -> Diagnostic {
    error.fixes.push(crate::diagnostic::Fix { title, edits });
    error
}

/// Appends a factor to an expression, with parentheses round a sum.
fn appended(expr: &Expr, text: &str) -> Vec<(Span, String)> {
    let end = Span {
        start: expr.span.end,
        end: expr.span.end,
    };
    let start = Span {
        start: expr.span.start,
        end: expr.span.start,
    };
    if is_sum(expr) {
        vec![(start, "(".into()), (end, format!(") {text}"))]
    } else {
        vec![(end, format!(" {text}"))]
    }
}

/// Whether a bracket needs parentheses round it where it stands.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Wrap {
    /// Among operators.
    Operand,
    /// As a whole argument.
    Argument,
}

/// Adds or completes a bracket: `(x [Mpc at z])`.
fn bracketed(error: Diagnostic, expr: &Expr, unit: &str, what: &str, title: &str, wrap: Wrap) -> Diagnostic {
    if unit.is_empty() {
        return error;
    }
    if let ExprKind::Express(_, bracket) = &ungrouped(expr).kind {
        let inside = Span {
            start: bracket.unit.span.end,
            end: bracket.unit.span.end,
        };
        return error.fix(title, inside, format!(" {what}"));
    }
    let title = format!("{title}: [{unit} {what}]");
    let (start, end) = (
        Span {
            end: expr.span.start,
            ..expr.span
        },
        Span {
            start: expr.span.end,
            ..expr.span
        },
    );
    let sum = is_sum(expr);
    let (mut open, mut close) = (String::new(), format!(" [{unit} {what}]"));
    if sum {
        open.push('(');
        close.insert(0, ')');
    }
    if wrap == Wrap::Operand {
        open.push('(');
        close.push(')');
    }
    let mut edits = vec![(end, close)];
    if !open.is_empty() {
        edits.insert(0, (start, open));
    }
    with_edits(error, title, edits)
}

/// Whether an expression binds more loosely than a product.
fn is_sum(expr: &Expr) -> bool {
    match &expr.kind {
        ExprKind::Binary(op, ..) => matches!(op.node, BinaryOp::Add | BinaryOp::Subtract),
        ExprKind::Express(..) | ExprKind::If(..) | ExprKind::Under(..) | ExprKind::Range(_) => true,
        ExprKind::Comparison(..) | ExprKind::Logical(..) => true,
        ExprKind::Quantity(_) | ExprKind::Quantities(..) | ExprKind::Infinity | ExprKind::Name(_) => false,
        ExprKind::Call(..) | ExprKind::Field(..) | ExprKind::Unary(..) | ExprKind::Series(_) => false,
        ExprKind::Group(_) | ExprKind::Broken => false,
    }
}

fn ungrouped(expr: &Expr) -> &Expr {
    match &expr.kind {
        ExprKind::Group(inner) => ungrouped(inner),
        _ => expr,
    }
}

fn is_bare_literal(expr: &Expr) -> bool {
    match &expr.kind {
        ExprKind::Quantity(quantity) => quantity.unit.is_none(),
        ExprKind::Unary(op, inner) => op.node != UnaryOp::Not && is_bare_literal(inner),
        _ => false,
    }
}

/// `Mpc/h` without its h.
fn without_h(text: &str) -> String {
    text.split_once("/h")
        .map(|(before, after)| format!("{before}{after}"))
        .unwrap_or_default()
}

/// `log10(x)` where `2.5*log10(x)` is meant.
fn log_repair(error: Diagnostic, expr: &Expr) -> Diagnostic {
    match &expr.kind {
        ExprKind::Call(name, _) if name.node == "log10" => {
            let start = Span {
                start: expr.span.start,
                end: expr.span.start,
            };
            error.fix("write it in magnitudes", start, "2.5*")
        }
        _ => error,
    }
}

/// The argument of the first function in an expression that is written like
/// one of a redshift.
fn argument_z(expr: &Expr) -> Option<Span> {
    match &expr.kind {
        ExprKind::Call(name, arguments) => redshift_argument(&name.node, arguments),
        ExprKind::Group(inner)
        | ExprKind::Unary(_, inner)
        | ExprKind::Express(inner, _)
        | ExprKind::Under(inner, _) => argument_z(inner),
        ExprKind::Binary(_, left, right) => argument_z(left).or_else(|| argument_z(right)),
        _ => None,
    }
}

/// The last argument that is a redshift: the epoch of the result, as of a
/// distance from one redshift to another.
fn redshift_argument(name: &str, arguments: &[Argument]) -> Option<Span> {
    let parameters = library::function(name).map_or(&[][..], |entry| entry.arguments);
    let is_redshift = |place: usize| {
        parameters
            .get(place)
            .is_some_and(|parameter| parameter.name.starts_with('z'))
    };
    let own = arguments
        .iter()
        .enumerate()
        .rev()
        .find_map(|(place, argument)| match argument {
            Argument::Positional(value) => is_redshift(place).then_some(value.span),
            Argument::Named(word, value) => word.node.starts_with('z').then_some(value.span),
            Argument::Equation(..) => None,
        });
    own.or_else(|| {
        arguments.iter().find_map(|argument| match argument {
            Argument::Positional(value) | Argument::Named(_, value) => argument_z(value),
            Argument::Equation(left, right) => argument_z(left).or_else(|| argument_z(right)),
        })
    })
}
