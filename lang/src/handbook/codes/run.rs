//! Codes on values that could not be computed.

use super::{CodePage, page};

pub(super) const PAGES: &[CodePage] = &[
    page(
        "division-by-zero",
        "A divisor is zero, or zero is raised to a negative power.",
        "The quotient does not exist, and nothing computed from it would mean anything.",
        "x = 3 - 3\ny = 1 / x\nresult y",
        "x = 3 - 2\ny = 1 / x\nresult y",
    ),
    page(
        "overflow",
        "A result is too large for a number.",
        "The largest is 1.8e308; in other units, or as a logarithm, it may fit.",
        "result y = 1e200 * 1e200",
        "result y = 1e100 * 1e100",
    ),
    page(
        "domain-fault",
        "A function was asked for a value that does not exist: the root of a negative number, a distance to z = -1.",
        "The message gives the value that met it and the range in which there is one.",
        "result x = log10(2 - 3)",
        "result x = log10(3 - 2)",
    ),
    page(
        "model-fault",
        "A model cannot be built from the values it is given.",
        "The message says which value, and why: a density below zero, a rate in the wrong unit, a budget that does not close.",
        "result d = D_C(1) under flat with H0 = 70000000 km/s/Mpc, Ωm = 0.3",
        "result d = D_C(1) under flat with H0 = 70 km/s/Mpc, Ωm = 0.3",
    ),
    page(
        "never",
        "A time that never comes was used in a calculation.",
        "`never` may be shown and claimed, but there is no number in it.",
        "",
        "",
    ),
    page(
        "no-root",
        "The two sides of the equation of a `root` do not meet in the range.",
        "The message gives both sides at the ends of the range; a wider range, or another model, may have a root.",
        "result z = root(D_L(x) = 1000 Gpc, x = 0 .. 1)",
        "result z = root(D_L(x) = 1 Gpc, x = 0 .. 1)",
    ),
    page(
        "many-roots",
        "The two sides of the equation of a `root` meet more than once in the range.",
        "Which one is meant only the writer knows; narrow the range to it. D_A has two redshifts for most distances.",
        "result z = root(D_A(x) = 1 Gpc, x = 0 .. 20)",
        "result z = root(D_A(x) = 1 Gpc, x = 0 .. 1)",
    ),
    page(
        "no-limit",
        "An integral did not settle or grows without bound, or a derivative does not exist.",
        "What was reached by then would be a number without meaning.",
        "result x = integral(1/t, t = 0 .. 1)",
        "result x = integral(1/t, t = 1 .. 2)",
    ),
    page(
        "infinite-bound",
        "A bound is infinite where it must be finite.",
        "Roots and extrema are searched for in a finite range; integrals may run to infinity.",
        "result x = root(t = 3 - t, t = 0 .. ∞)",
        "result x = root(t = 3 - t, t = 0 .. 10)",
    ),
    page(
        "unlike-lengths",
        "Two series of unlike length meet in one expression.",
        "Series are combined element by element.",
        "result x = {1, 2, 3} + {1, 2}",
        "result x = {1, 2, 3} + {1, 2, 4}",
    ),
    page(
        "too-few",
        "A series has too few elements for what is asked of it.",
        "The mean of nothing and the scatter of one value do not exist.",
        "result x = std({3})",
        "result x = std({3, 4})",
    ),
    page(
        "bad-range",
        "A range runs backwards, has a step of zero, or steps by factors through zero.",
        "It would have no points, or no end.",
        "result x = sum(n, n = 1 .. 3 every 0)",
        "result x = sum(n, n = 1 .. 3 every 1)",
    ),
    page(
        "too-much",
        "A range or a nest of binding forms takes more points, memory or work than is allowed.",
        "A sheet from a stranger always ends, and soon; coarser steps usually serve as well.",
        "result x = sum(n, n = 0 .. 1 in 1e12 steps)",
        "result x = sum(n, n = 0 .. 1 in 1000 steps)",
    ),
];
