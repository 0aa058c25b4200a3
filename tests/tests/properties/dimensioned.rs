//! Expressions whose dimension and value are known because they were built
//! with them: the checker has to find the same.
//!
//! Dimensions are powers of metre, kilogram, second and kelvin in halves, so
//! that roots stay exact. Values are carried in SI beside the text, with the
//! plain arithmetic of `f64`.

use proptest::prelude::*;

/// Twice the powers of m, kg, s, K.
type Halves = [i32; 4];

const SYMBOLS: [&str; 4] = ["m", "kg", "s", "K"];

#[derive(Clone, Debug)]
struct Term {
    text: String,
    halves: Halves,
    value: f64,
    /// How far rounding may take either side from it.
    slack: f64,
}

/// A sheet with some definitions and one expression.
#[derive(Clone, Debug)]
pub struct Case {
    term: Term,
}

impl Case {
    /// The sheet, its result in this unit.
    pub fn sheet(&self, unit: &str) -> String {
        format!("{DEFINITIONS}result answer = {} [{unit}]\n", self.term.text)
    }

    /// The unit of the result.
    pub fn unit(&self) -> String {
        unit(self.term.halves)
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
            unit(halves)
        };
        vec![shifted(0, 2), shifted(1, -2), shifted(2, 1), shifted(3, 4)]
    }

    /// A sum with something of another dimension.
    pub fn wrong_sum(&self) -> String {
        let mut halves = self.term.halves;
        halves[1] += 2;
        let text = &self.term.text;
        format!(
            "{DEFINITIONS}answer = ({text}) + 2 {}\nresult answer\n",
            unit(halves)
        )
    }
}

const DEFINITIONS: &str = "\
square(q) = q * q
ratio(p, q) = p / q
twice(q) = q + q
mass = 2.5 kg
span [m] = 40 cm
";

fn unit(halves: Halves) -> String {
    let factors: Vec<String> = SYMBOLS
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

fn literal(halves: Halves, number: f64) -> Term {
    let text = match unit(halves).as_str() {
        "1" => format!("{number}"),
        unit => format!("{number} {unit}"),
    };
    known(text, halves, number)
}

/// A value that a unit's factor has rounded, and its conversion once more.
fn known(text: String, halves: Halves, value: f64) -> Term {
    let slack = 4.0 * f64::EPSILON * value.abs();
    Term {
        text,
        halves,
        value,
        slack,
    }
}

/// `text` scaled into the unit `m kg s K` that a prefix stands for.
fn prefixed() -> impl Strategy<Value = Term> {
    let forms = vec![
        ("km", [2, 0, 0, 0], 1e3),
        ("g", [0, 2, 0, 0], 1e-3),
        ("min", [0, 0, 2, 0], 60.0),
        ("N", [2, 2, -4, 0], 1.0),
        ("J/K", [4, 2, -4, -2], 1.0),
        ("km/s", [2, 0, -2, 0], 1e3),
        ("1", [0; 4], 1.0),
    ];
    (prop::sample::select(forms), 1u32..500).prop_map(|((unit, halves, factor), tenths)| {
        let number = f64::from(tenths) / 8.0;
        let text = if unit == "1" {
            format!("{number}")
        } else {
            format!("{number} {unit}")
        };
        let value = number * factor;
        known(text, halves, value)
    })
}

fn leaf() -> impl Strategy<Value = Term> {
    let named = vec![("mass", [0, 2, 0, 0], 2.5), ("span", [2, 0, 0, 0], 0.4)];
    prop_oneof![
        prefixed(),
        (prop::array::uniform4(-2i32..3), 1u32..500)
            .prop_map(|(powers, eighths)| literal(powers.map(|power| 2 * power), f64::from(eighths) / 8.0)),
        prop::sample::select(named).prop_map(|(name, halves, value)| known(name.into(), halves, value)),
    ]
}

/// A value rounded once, with the slack its parts bring.
fn combine(text: String, halves: Halves, value: f64, brought: f64) -> Term {
    let slack = brought + f64::EPSILON * value.abs();
    Term {
        text,
        halves,
        value,
        slack,
    }
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
        format!("({}) * ({})", a.text, b.text),
        added(a.halves, b.halves, 1),
        a.value * b.value,
        scaled(a.value * b.value, a, 1.0, b, 1.0),
    )
}

fn quotient(a: &Term, b: &Term) -> Term {
    combine(
        format!("({}) / ({})", a.text, b.text),
        added(a.halves, b.halves, -1),
        a.value / b.value,
        scaled(a.value / b.value, a, 1.0, b, 1.0),
    )
}

/// `b` brought to the dimension of `a` by a literal, then added.
fn sum(a: &Term, b: &Term, minus: bool) -> Term {
    let bridge = literal(added(a.halves, b.halves, -1), 1.5);
    let like = product(b, &bridge);
    let (sign, value) = if minus {
        ("-", a.value - like.value)
    } else {
        ("+", a.value + like.value)
    };
    combine(
        format!("({}) {sign} ({})", a.text, like.text),
        a.halves,
        value,
        a.slack + like.slack,
    )
}

fn power(a: &Term, by: i32) -> Term {
    let text = format!("({})^{by}", a.text);
    let value = a.value.powi(by);
    let slack = scaled(value, a, 2.0 * f64::from(by.abs()), a, 0.0);
    combine(text, a.halves.map(|half| half * by), value, slack)
}

/// Only of whole metres, so that a root of a root is the end of it.
fn root(a: &Term) -> Term {
    let even = a.halves.iter().all(|half| half % 2 == 0);
    if !even || a.value <= 0.0 {
        return a.clone();
    }
    combine(
        format!("sqrt({})", a.text),
        a.halves.map(|half| half / 2),
        libm::sqrt(a.value),
        scaled(libm::sqrt(a.value), a, 0.5, a, 0.0),
    )
}

fn call(name: &str, a: &Term, b: &Term) -> Term {
    match name {
        "square" => combine(
            format!("square({})", a.text),
            a.halves.map(|half| 2 * half),
            a.value * a.value,
            scaled(a.value * a.value, a, 2.0, a, 0.0),
        ),
        "twice" => combine(
            format!("twice({})", a.text),
            a.halves,
            a.value + a.value,
            2.0 * a.slack,
        ),
        _ => combine(
            format!("ratio({}, q = {})", a.text, b.text),
            added(a.halves, b.halves, -1),
            a.value / b.value,
            scaled(a.value / b.value, a, 1.0, b, 1.0),
        ),
    }
}

/// An expression built with its dimension.
pub fn dimensioned() -> impl Strategy<Value = Case> {
    let term = leaf().prop_recursive(5, 24, 2, |inner| {
        let pair = (inner.clone(), inner.clone());
        prop_oneof![
            pair.clone().prop_map(|(a, b)| product(&a, &b)),
            pair.clone().prop_map(|(a, b)| quotient(&a, &b)),
            (pair.clone(), any::<bool>()).prop_map(|((a, b), minus)| sum(&a, &b, minus)),
            (inner.clone(), prop::sample::select(vec![-2, -1, 2, 3])).prop_map(|(a, by)| power(&a, by)),
            inner.clone().prop_map(|a| root(&a)),
            inner
                .clone()
                .prop_map(|a| combine(format!("-({})", a.text), a.halves, -a.value, a.slack)),
            (pair, prop::sample::select(vec!["square", "twice", "ratio"]))
                .prop_map(|((a, b), name)| call(name, &a, &b)),
        ]
    });
    // Beyond these sizes nobody writes a unit, and sums lose their digits.
    let usual = |term: &Term| {
        let size = term.value.abs();
        (1e-100..1e100).contains(&size)
            && term.slack < 1e-9 * size
            && term.halves.iter().all(|half| half.abs() <= 60)
    };
    term.prop_filter("a usual size", usual)
        .prop_map(|term| Case { term })
}
