//! Expressions whose dimension and value are known because they were built
//! with them: the checker has to find the same.
//!
//! Dimensions are powers of four base units in halves, so that roots stay
//! exact. Values are carried in those units beside the text, with the plain
//! arithmetic of `f64`. There are two sets of base units: one of the SI, and
//! one in which a proper and a comoving length take two of the places.

use proptest::prelude::*;

/// Twice the powers of the base units.
type Halves = [i32; 4];

/// Base units and what is written in them.
pub struct Base {
    symbols: [&'static str; 4],
    /// Units, their dimension, and their size in the base units.
    forms: &'static [(&'static str, Halves, f64)],
    definitions: &'static str,
    /// The value of `span` in the first unit.
    span: f64,
}

/// Metre, kilogram, second and kelvin.
pub static SI: Base = Base {
    symbols: ["m", "kg", "s", "K"],
    forms: &[
        ("km", [2, 0, 0, 0], 1e3),
        ("g", [0, 2, 0, 0], 1e-3),
        ("min", [0, 0, 2, 0], 60.0),
        ("N", [2, 2, -4, 0], 1.0),
        ("J/K", [4, 2, -4, -2], 1.0),
        ("km/s", [2, 0, -2, 0], 1e3),
        ("1", [0; 4], 1.0),
    ],
    definitions: "span [m] = 40 cm\n",
    span: 0.4,
};

/// Lengths of both frames.
pub static FRAMES: Base = Base {
    symbols: ["pMpc", "kg", "s", "cMpc"],
    forms: &[
        ("pkpc", [2, 0, 0, 0], 1e-3),
        ("ckpc", [0, 0, 0, 2], 1e-3),
        ("cGpc^3", [0, 0, 0, 6], 1e9),
        ("ckpc/s", [0, 0, -2, 2], 1e-3),
        ("kg/pkpc^3", [-6, 2, 0, 0], 1e9),
        ("g", [0, 2, 0, 0], 1e-3),
        ("1", [0; 4], 1.0),
    ],
    definitions: "span [pMpc] = 400 pkpc\n",
    span: 0.4,
};

#[derive(Clone, Debug)]
struct Term {
    text: String,
    halves: Halves,
    value: f64,
    /// How far rounding may take either side from it.
    slack: f64,
    /// Plain numbers were added: such a sum may stand for a power of (1+z), and
    /// leaves the frame open.
    open: bool,
    /// The highest power of a length met on the way: beyond some, a volume of
    /// gigaparsecs is too large for a number of the SI.
    reach: i32,
}

/// A sheet with some definitions and one expression.
#[derive(Clone, Debug)]
pub struct Case {
    term: Term,
    base: &'static Base,
}

impl std::fmt::Debug for Base {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "{:?}", self.symbols)
    }
}

impl Case {
    /// The sheet, its result in this unit.
    pub fn sheet(&self, unit: &str) -> String {
        let Base { definitions, .. } = self.base;
        format!(
            "{DEFINITIONS}{definitions}result answer = {} [{unit}]\n",
            self.term.text
        )
    }

    /// The unit of the result.
    pub fn unit(&self) -> String {
        unit(self.base, self.term.halves)
    }

    /// Its value in that unit.
    pub fn value(&self) -> f64 {
        self.term.value
    }

    /// How far rounding may take either side from it.
    pub fn slack(&self) -> f64 {
        self.term.slack
    }

    /// Units of other dimensions.
    pub fn wrong_units(&self) -> Vec<String> {
        let shifted = |place: usize, by: i32| {
            let mut halves = self.term.halves;
            halves[place] += by;
            unit(self.base, halves)
        };
        let mut wrong = vec![shifted(0, 2), shifted(1, -2), shifted(2, 1), shifted(3, 4)];
        if !self.term.open {
            let mut halves = self.term.halves;
            (halves[0], halves[3]) = (halves[0] + 2, halves[3] - 2);
            // A unit without lengths is plain, and shows any frame.
            if halves[0] != 0 || halves[3] != 0 {
                wrong.push(unit(self.base, halves));
            }
        }
        wrong
    }

    /// A sum with something of another dimension.
    pub fn wrong_sum(&self) -> String {
        let mut halves = self.term.halves;
        halves[1] += 2;
        let text = &self.term.text;
        let Base { definitions, .. } = self.base;
        let other = literal(self.base, halves, 2.0).text;
        format!("{DEFINITIONS}{definitions}answer = ({text}) + {other}\nresult answer\n")
    }
}

const DEFINITIONS: &str = "\
square(q) = q * q
ratio(p, q) = p / q
twice(q) = q + q
mass = 2.5 kg
";

fn unit(base: &Base, halves: Halves) -> String {
    let factors: Vec<String> = base
        .symbols
        .iter()
        .zip(halves)
        .filter(|(_, power)| *power != 0)
        .map(|(symbol, power)| match power {
            2 => (*symbol).to_owned(),
            even if even % 2 == 0 => format!("{symbol}^{}", even / 2),
            odd => format!("{symbol}^({odd}/2)"),
        })
        .collect();
    if factors.is_empty() {
        "1".into()
    } else {
        factors.join(" ")
    }
}

fn literal(base: &Base, halves: Halves, number: f64) -> Term {
    let text = match unit(base, halves).as_str() {
        "1" => format!("{number}"),
        unit => format!("{number} {unit}"),
    };
    known(text, halves, number)
}

/// A value that a unit's factor has rounded, and its conversion once more.
fn known(text: String, halves: Halves, value: f64) -> Term {
    let slack = 4.0 * f64::EPSILON * value.abs();
    let reach = reach(halves);
    Term {
        text,
        halves,
        value,
        slack,
        open: false,
        reach,
    }
}

/// A number with a unit that is no base unit.
fn prefixed(base: &'static Base) -> impl Strategy<Value = Term> {
    (prop::sample::select(base.forms), 1u32..500).prop_map(|((unit, halves, factor), eighths)| {
        let number = f64::from(eighths) / 8.0;
        let text = if unit == "1" {
            format!("{number}")
        } else {
            format!("{number} {unit}")
        };
        known(text, halves, number * factor)
    })
}

fn leaf(base: &'static Base) -> impl Strategy<Value = Term> {
    let named = vec![("mass", [0, 2, 0, 0], 2.5), ("span", [2, 0, 0, 0], base.span)];
    prop_oneof![
        prefixed(base),
        (prop::array::uniform4(-2i32..3), 1u32..500).prop_map(|(powers, eighths)| literal(
            base,
            powers.map(|power| 2 * power),
            f64::from(eighths) / 8.0
        )),
        prop::sample::select(named).prop_map(|(name, halves, value)| known(name.into(), halves, value)),
    ]
}

/// A value rounded once, with the slack its parts bring.
fn combine(parts: &[&Term], text: String, halves: Halves, value: f64, brought: f64) -> Term {
    let slack = brought + f64::EPSILON * value.abs();
    let open = parts.iter().any(|part| part.open);
    let met = parts.iter().map(|part| part.reach);
    let reach = met.fold(reach(halves), i32::max);
    Term {
        text,
        halves,
        value,
        slack,
        open,
        reach,
    }
}

fn reach(halves: Halves) -> i32 {
    halves[0].abs() + halves[3].abs()
}

/// A sum of numbers, whatever their frame.
fn opened(mut sum: Term, base: &Base) -> Term {
    let [one, kilograms, seconds, other] = sum.halves;
    let lengths = if base.symbols[3] == "cMpc" {
        one + other
    } else {
        one | other
    };
    sum.open |= (lengths, kilograms, seconds) == (0, 0, 0);
    sum
}

/// The slack of something that goes with the powers `p` and `q` of two terms.
fn scaled(value: f64, a: &Term, p: f64, b: &Term, q: f64) -> f64 {
    value.abs() * (p * (a.slack / a.value).abs() + q * (b.slack / b.value).abs())
}

fn added(a: Halves, b: Halves, sign: i32) -> Halves {
    std::array::from_fn(|place| a[place] + sign * b[place])
}

fn product(a: &Term, b: &Term) -> Term {
    combine(
        &[a, b],
        format!("({}) * ({})", a.text, b.text),
        added(a.halves, b.halves, 1),
        a.value * b.value,
        scaled(a.value * b.value, a, 1.0, b, 1.0),
    )
}

fn quotient(a: &Term, b: &Term) -> Term {
    combine(
        &[a, b],
        format!("({}) / ({})", a.text, b.text),
        added(a.halves, b.halves, -1),
        a.value / b.value,
        scaled(a.value / b.value, a, 1.0, b, 1.0),
    )
}

/// `b` brought to the dimension of `a` by a literal, then added.
fn sum(base: &Base, a: &Term, b: &Term, minus: bool) -> Term {
    let bridge = literal(base, added(a.halves, b.halves, -1), 1.5);
    let like = product(b, &bridge);
    let (sign, value) = if minus {
        ("-", a.value - like.value)
    } else {
        ("+", a.value + like.value)
    };
    opened(
        combine(
            &[a, &like],
            format!("({}) {sign} ({})", a.text, like.text),
            a.halves,
            value,
            a.slack + like.slack,
        ),
        base,
    )
}

fn power(a: &Term, by: i32) -> Term {
    let text = format!("({})^{by}", a.text);
    let value = a.value.powi(by);
    let slack = scaled(value, a, 2.0 * f64::from(by.abs()), a, 0.0);
    combine(&[a], text, a.halves.map(|half| half * by), value, slack)
}

/// Only of whole metres, so that a root of a root is the end of it.
fn root(a: &Term) -> Term {
    let even = a.halves.iter().all(|half| half % 2 == 0);
    if !even || a.value <= 0.0 {
        return a.clone();
    }
    combine(
        &[a],
        format!("sqrt({})", a.text),
        a.halves.map(|half| half / 2),
        libm::sqrt(a.value),
        scaled(libm::sqrt(a.value), a, 0.5, a, 0.0),
    )
}

fn call(base: &Base, name: &str, a: &Term, b: &Term) -> Term {
    match name {
        "square" => combine(
            &[a],
            format!("square({})", a.text),
            a.halves.map(|half| 2 * half),
            a.value * a.value,
            scaled(a.value * a.value, a, 2.0, a, 0.0),
        ),
        "twice" => opened(
            combine(
                &[a],
                format!("twice({})", a.text),
                a.halves,
                a.value + a.value,
                2.0 * a.slack,
            ),
            base,
        ),
        _ => combine(
            &[a, b],
            format!("ratio({}, q = {})", a.text, b.text),
            added(a.halves, b.halves, -1),
            a.value / b.value,
            scaled(a.value / b.value, a, 1.0, b, 1.0),
        ),
    }
}

/// An expression built with its dimension.
pub fn dimensioned(base: &'static Base) -> impl Strategy<Value = Case> {
    let term = leaf(base).prop_recursive(5, 24, 2, move |inner| {
        let pair = (inner.clone(), inner.clone());
        prop_oneof![
            pair.clone().prop_map(|(a, b)| product(&a, &b)),
            pair.clone().prop_map(|(a, b)| quotient(&a, &b)),
            (pair.clone(), any::<bool>()).prop_map(move |((a, b), minus)| sum(base, &a, &b, minus)),
            (inner.clone(), prop::sample::select(vec![-2, -1, 2, 3])).prop_map(|(a, by)| power(&a, by)),
            inner.clone().prop_map(|a| root(&a)),
            inner
                .clone()
                .prop_map(|a| combine(&[&a], format!("-({})", a.text), a.halves, -a.value, a.slack)),
            (pair, prop::sample::select(vec!["square", "twice", "ratio"]))
                .prop_map(move |((a, b), name)| call(base, name, &a, &b)),
        ]
    });
    // Beyond these sizes nobody writes a unit, and sums lose their digits.
    let usual = |term: &Term| {
        let size = term.value.abs();
        (1e-100..1e100).contains(&size)
            && term.slack < 1e-9 * size
            && term.halves.iter().all(|half| half.abs() <= 60)
            && term.reach <= 14
    };
    term.prop_filter("a usual size", usual)
        .prop_map(move |term| Case { term, base })
}
