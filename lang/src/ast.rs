//! The syntax tree: what was written. Every node has its place and none has a
//! meaning yet.

use crate::source::{Span, Spanned};
use num_rational::Ratio;
use smol_str::SmolStr;

/// A name and its place.
pub type Name = Spanned<SmolStr>;

/// A string literal's content (without quotes) and the place of the whole.
pub type Text = Spanned<SmolStr>;

/// One statement.
#[derive(Clone, Debug, PartialEq)]
pub struct Statement {
    /// What it is.
    pub kind: StatementKind,
    /// The place of the whole.
    pub span: Span,
}

/// The kinds of statement.
// A definition is the largest of them and also the usual one: a box would
// cost an allocation for each and save nothing.
#[allow(clippy::large_enum_variant)]
#[derive(Clone, Debug, PartialEq)]
pub enum StatementKind {
    /// `assume planck2018`
    Assume(Model),
    /// `model NAME = MODEL`
    Model(Name, Model),
    /// `given NAME [u] = EXPR "what it is"`
    Given(Definition),
    /// `NAME [u] = EXPR where …`
    Value(Definition),
    /// `NAME(a, b [kpc], c = 1) [u] = EXPR where …`
    Function(Definition, Vec<Parameter>),
    /// `result NAME [u] = EXPR "what it is"`
    Result(Definition),
    /// `result NAME [u] "what it is"` for a name already bound.
    ResultOf(Name, Option<Bracket>, Option<Text>),
    /// `claim "where": …`
    Claim(Option<Text>, Claim),
    /// `table "out.csv" z = RANGE: EXPR "about", …`
    Table(Plot),
    /// `figure "out.svg" z = RANGE: EXPR, …`
    Figure(Plot),
    /// `read "sample.csv" as sample with … only …`
    Read(Read),
    /// `include "defs.zij"`
    Include(Text),
    /// `1 beam = 3.2e-4 sr`
    Unit(Name, Expr),
    /// `tally galaxy, photon`
    Tally(Vec<Name>),
    /// `correlate A, B by -0.9`
    Correlate(Name, Name, Expr),
    /// `explain EXPR`
    Explain(Expr),
    /// `help`, `help D_L`, `help "how far"`
    Help(Option<Text>),
    /// An expression to print, with an optional `where`.
    Expression(Expr, Vec<Binding>),
    /// Could not be read; an error has been reported.
    Broken,
}

/// A name bound to an expression.
#[derive(Clone, Debug, PartialEq)]
pub struct Definition {
    /// The name.
    pub name: Name,
    /// `[unit]` after the name.
    pub annotation: Option<Bracket>,
    /// The value or function body.
    pub value: Expr,
    /// `where` bindings, each seeing those before it.
    pub wheres: Vec<Binding>,
    /// The trailing string.
    pub about: Option<Text>,
}

/// A parameter of a function.
#[derive(Clone, Debug, PartialEq)]
pub struct Parameter {
    /// Its name.
    pub name: Name,
    /// `[unit]` after the name.
    pub annotation: Option<Bracket>,
    /// `= EXPR`.
    pub default: Option<Expr>,
}

/// A local name: `x = EXPR`.
#[derive(Clone, Debug, PartialEq)]
pub struct Binding {
    /// The name.
    pub name: Name,
    /// `[unit]` after the name.
    pub annotation: Option<Bracket>,
    /// Its value.
    pub value: Expr,
}

/// The body of `table` and `figure`.
#[derive(Clone, Debug, PartialEq)]
pub struct Plot {
    /// The file, or the terminal.
    pub path: Option<Text>,
    /// The running variable.
    pub variable: Name,
    /// What it runs over.
    pub over: Expr,
    /// The columns, each with its description.
    pub columns: Vec<(Expr, Option<Text>)>,
}

/// `read "file" as NAME with a [Mpc], … only CONDITION`
#[derive(Clone, Debug, PartialEq)]
pub struct Read {
    /// The file.
    pub path: Text,
    /// The table's name.
    pub name: Name,
    /// Units of columns whose header has none.
    pub units: Vec<(Name, Bracket)>,
    /// Which rows to keep; column names stand bare in it.
    pub only: Option<Expr>,
}

/// A cosmological model: a base and what replaces its parameters.
#[derive(Clone, Debug, PartialEq)]
pub struct Model {
    /// `planck2018`, `flat`, `general`, or a name bound by `model`.
    pub base: Name,
    /// After `with`.
    pub settings: Vec<Setting>,
    /// The place of the whole.
    pub span: Span,
}

/// One entry of a `with` list.
#[derive(Clone, Debug, PartialEq)]
pub struct Setting {
    /// The parameter.
    pub name: Name,
    /// `z` in `w(z) = …`.
    pub variable: Option<Name>,
    /// Its value.
    pub value: Expr,
}

/// A quoted number to check.
#[derive(Clone, Debug, PartialEq)]
pub struct Claim {
    /// What is computed; a comparison when there is no `is`.
    pub subject: Expr,
    /// What is asserted of it; `None` for a bare comparison.
    pub assertion: Option<Assertion>,
    /// `within …`
    pub within: Option<Tolerance>,
}

/// What stands after `is`.
#[derive(Clone, Debug, PartialEq)]
pub enum Assertion {
    /// `is EXPR`
    Is(Expr),
    /// `is about EXPR`
    About(Expr),
    /// `is above EXPR`
    Above(Expr),
    /// `is below EXPR`
    Below(Expr),
    /// `is at least EXPR`
    AtLeast(Expr),
    /// `is at most EXPR`
    AtMost(Expr),
    /// `is between A and B`
    Between(Expr, Expr),
    /// `is never`
    Never(Span),
}

/// What stands after `within`.
#[derive(Clone, Debug, PartialEq)]
pub enum Tolerance {
    /// `within 2%` or `within 0.3 Gly`: told apart by the unit of the literal.
    Amount(Expr),
    /// `within 2 sigma`
    Sigma(Expr),
}

/// An expression.
#[derive(Clone, Debug, PartialEq)]
pub struct Expr {
    /// What it is.
    pub kind: ExprKind,
    /// Its place.
    pub span: Span,
}

/// The kinds of expression.
#[derive(Clone, Debug, PartialEq)]
pub enum ExprKind {
    /// `70 km/s/Mpc`, `67.4(5)`, `2%`
    Quantity(Quantity),
    /// `{0, 0, 0.06} eV`: numbers that share a unit.
    Quantities(Vec<Number>, Unit),
    /// `∞`, `infinity`
    Infinity,
    /// A value's name.
    Name(SmolStr),
    /// `f(x, c = 2)`; binding forms too: `integral(1/E(x), x = 0 .. z)`.
    Call(Name, Vec<Argument>),
    /// `sample.z`, `maximum(…).at`
    Field(Box<Expr>, Name),
    /// `-x`, `not p`
    Unary(Spanned<UnaryOp>, Box<Expr>),
    /// `a + b`
    Binary(Spanned<BinaryOp>, Box<Expr>, Box<Expr>),
    /// `0 < z <= 1`
    Comparison(Box<Expr>, Vec<(Spanned<CompareOp>, Expr)>),
    /// `a and b`, `a or b`
    Logical(Spanned<LogicalOp>, Box<Expr>, Box<Expr>),
    /// `if c then a else b`
    If(Box<Expr>, Box<Expr>, Box<Expr>),
    /// `{a, b, c}`
    Series(Vec<Expr>),
    /// `0 .. 3 every 0.5`
    Range(Box<Range>),
    /// `EXPR [unit …]`
    Express(Box<Expr>, Bracket),
    /// `EXPR under MODEL`
    Under(Box<Expr>, Model),
    /// `(EXPR)`: kept, for it matters what a bare sum is.
    Group(Box<Expr>),
    /// Could not be read; an error has been reported.
    Broken,
}

/// An argument of a call.
#[derive(Clone, Debug, PartialEq)]
pub enum Argument {
    /// `x`
    Positional(Expr),
    /// `name = x`; in a binding form, the variable and its range.
    Named(Name, Expr),
    /// `left = right` where left is not a bare name: what `root` solves.
    Equation(Expr, Expr),
}

/// A range of values.
#[derive(Clone, Debug, PartialEq)]
pub struct Range {
    /// First value.
    pub from: Expr,
    /// Last value.
    pub to: Expr,
    /// How it is divided.
    pub step: Step,
}

/// How a range is divided.
#[derive(Clone, Debug, PartialEq)]
pub enum Step {
    /// Not at all: an interval.
    None,
    /// `every 0.5`; `every 0.1 dex` has the unit `dex` on its literal.
    Every(Expr),
    /// `in 50 steps`
    Steps(Expr),
    /// `in 60 log steps`
    LogSteps(Expr),
}

/// A number with an optional unit.
#[derive(Clone, Debug, PartialEq)]
pub struct Quantity {
    /// The number.
    pub number: Number,
    /// Its unit; `2%` has the unit `%`.
    pub unit: Option<Unit>,
}

/// A written number.
#[derive(Clone, Debug, PartialEq)]
pub struct Number {
    /// Its value.
    pub value: f64,
    /// The power of ten of its last written digit: −1 for `46.5`, 2 for `3e2`.
    pub last_digit: i32,
    /// Its text in plain ASCII: `3.0e5` for `3.0 × 10^5`.
    pub text: SmolStr,
    /// `(5)`, `± 0.5`, `(+0.6, -0.5)`.
    pub uncertainty: Option<Uncertainty>,
    /// Its place, without the unit.
    pub span: Span,
}

/// The standard uncertainty of a written number, in the number's unit.
#[derive(Clone, Debug, PartialEq)]
pub struct Uncertainty {
    /// Upwards.
    pub plus: f64,
    /// Downwards, positive.
    pub minus: f64,
    /// How it was written, for printing again.
    pub written: SmolStr,
}

/// A unit as written: a product of powers.
#[derive(Clone, Debug, PartialEq)]
pub struct Unit {
    /// A leading scale factor (`[10^-20 erg/s]`), else 1.
    pub scale: f64,
    /// The factors, in order; empty for the unit `1`.
    pub factors: Vec<UnitFactor>,
    /// The place of the whole.
    pub span: Span,
}

/// One factor of a unit.
#[derive(Clone, Debug, PartialEq)]
pub struct UnitFactor {
    /// Its symbol as written.
    pub name: Name,
    /// Its power, negative after `/`.
    pub power: Ratio<i32>,
    /// It follows a tight `/`, as `G` in `1.5 Mpc/G`.
    pub after_slash: bool,
}

/// `[unit …]`
#[derive(Clone, Debug, PartialEq)]
pub struct Bracket {
    /// The unit.
    pub unit: Unit,
    /// What else it does.
    pub conversion: Option<Conversion>,
    /// The place with the brackets.
    pub span: Span,
}

/// What a bracket does beside naming a unit.
#[derive(Clone, Debug, PartialEq)]
pub enum Conversion {
    /// `at z`
    At(Box<Expr>),
    /// `today`
    Today(Span),
    /// `for h`
    ForH(Span),
    /// `for h = 0.7`
    ForGivenH(Box<Expr>),
    /// `by hand`
    ByHand(Span),
    /// `via G, c`
    Via(Vec<Name>),
}

/// Operators on one operand.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum UnaryOp {
    /// `-x`
    Negate,
    /// `+x`
    Plus,
    /// `not p`
    Not,
}

/// Arithmetic on two operands.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum BinaryOp {
    /// `+`
    Add,
    /// `-`
    Subtract,
    /// `*`, ` · `, `×`
    Multiply,
    /// `/`
    Divide,
    /// `^`
    Power,
}

/// Comparisons.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum CompareOp {
    /// `<`
    Less,
    /// `<=`, `≤`
    LessOrEqual,
    /// `>`
    Greater,
    /// `>=`, `≥`
    GreaterOrEqual,
}

/// `and`, `or`.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum LogicalOp {
    /// `and`
    And,
    /// `or`
    Or,
}
