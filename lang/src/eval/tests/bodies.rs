//! Binding forms over bodies.

use super::*;

/// A program whose first body is 1/x.
fn reciprocal() -> Program {
    let mut program = Program::default();
    let mut body = Builder::body(&program, 1);
    let x = body.input(0);
    let one = body.number(1.0);
    body.over(one, x);
    program.bodies.push(body.done());
    program
}

/// The value of one form over `program`'s last body, without captures.
fn with_bounds(mut program: Program, form: Form, from: f64, to: f64) -> Program {
    let mut main = Builder::main();
    let from = main.number(from);
    let to = main.number(to);
    let body = program.bodies.len() as BlockId - 1;
    main.bind(form, body, from, to, &[]);
    program.main = main.done();
    program
}

/// A program with the body a x² + b, a and b captured.
fn parabola() -> Program {
    let mut program = Program::default();
    let mut body = Builder::body(&program, 3);
    let x = body.input(0);
    let a = body.input(1);
    let b = body.input(2);
    let square = body.add(Op::PowerInteger(x, 2));
    let scaled = body.times(a, square);
    body.plus(scaled, b);
    program.bodies.push(body.done());
    program
}

#[test]
fn an_integral_of_a_body() {
    let program = with_bounds(reciprocal(), Form::Integral, 1.0, std::f64::consts::E);
    near(number(&program), 1.0, 1e-14);
    let program = with_bounds(reciprocal(), Form::Integral, std::f64::consts::E, 1.0);
    near(number(&program), -1.0, 1e-14);
}

#[test]
fn a_fault_in_a_body_stands_at_its_own_place_with_the_variable() {
    let program = with_bounds(reciprocal(), Form::Maximum, 0.0, 1.0);
    let fault = fault(&program);
    assert_eq!(fault.kind, FaultKind::DivisionByZero);
    assert_eq!(fault.place.span, Span::new(1020, 1025));
    assert_eq!(fault.place.block, Some(0));
    assert_eq!(fault.bound.len(), 1);
    assert_eq!(
        (fault.bound[0].place.span, fault.bound[0].value),
        (Span::new(1000, 1005), 0.0)
    );
}

#[test]
fn captures_may_be_numbers_or_series() {
    // ∫₀¹ (a x² + b) dx = a/3 + b
    let mut program = parabola();
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let one = main.number(1.0);
    let a = main.list(&[3.0, 6.0, 9.0]);
    let b = main.number(0.5);
    let integral = main.bind(Form::Integral, 0, zero, one, &[a, b]);
    main.plus(integral, a);
    program.main = main.done();
    for (value, expected) in numbers(&program).iter().zip([4.5, 8.5, 12.5]) {
        near(*value, expected, 1e-14);
    }
}

#[test]
fn bounds_may_be_series() {
    let mut program = reciprocal();
    let mut main = Builder::main();
    let one = main.number(1.0);
    let to = main.list(&[1.0, 2.0, 10.0]);
    main.bind(Form::Integral, 0, one, to, &[]);
    program.main = main.done();
    let values = numbers(&program);
    assert_eq!(values[0], 0.0);
    near(values[1], std::f64::consts::LN_2, 1e-14);
    near(values[2], std::f64::consts::LN_10, 1e-14);
}

#[test]
fn the_failing_element_of_a_mapped_form_is_told() {
    // ∫₀ᵇ 1/x dx diverges for every b but 0.
    let mut program = reciprocal();
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let to = main.list(&[0.0, 1.0]);
    main.bind(Form::Integral, 0, zero, to, &[]);
    program.main = main.done();
    let fault = fault(&program);
    assert!(matches!(fault.kind, FaultKind::Diverges(_)), "{fault:?}");
    assert_eq!(fault.element, Some((1, 2)));
    assert_eq!(fault.place.span, Span::new(20, 25));
}

#[test]
fn an_integral_within_an_integral() {
    // ∫₀¹ ∫₀ˣ y dy dx = 1/6
    let mut program = Program::default();
    let mut inner = Builder::body(&program, 1);
    inner.input(0);
    program.bodies.push(inner.done());
    let mut outer = Builder::body(&program, 1);
    let x = outer.input(0);
    let zero = outer.number(0.0);
    outer.bind(Form::Integral, 0, zero, x, &[]);
    program.bodies.push(outer.done());
    let program = with_bounds(program, Form::Integral, 0.0, 1.0);
    near(number(&program), 1.0 / 6.0, 1e-13);
}

#[test]
fn an_infinite_bound_only_for_an_integral() {
    let mut program = Program::default();
    let mut body = Builder::body(&program, 1);
    let x = body.input(0);
    body.add(Op::PowerInteger(x, -2));
    program.bodies.push(body.done());
    let infinite = with_bounds(program, Form::Integral, 2.0, f64::INFINITY);
    near(number(&infinite), 0.5, 1e-14);
    let infinite = with_bounds(reciprocal(), Form::Root, 2.0, f64::INFINITY);
    let fault = fault(&infinite);
    assert_eq!(fault.kind, FaultKind::InfiniteBound);
    assert_eq!(fault.place.span, Span::new(10, 15));
}

#[test]
fn a_root_with_its_faults() {
    let parabola_with = |a: f64, b: f64, from: f64, to: f64| {
        let mut program = parabola();
        let mut main = Builder::main();
        let from = main.number(from);
        let to = main.number(to);
        let a = main.number(a);
        let b = main.number(b);
        main.bind(Form::Root, 0, from, to, &[a, b]);
        program.main = main.done();
        program
    };
    near(
        number(&parabola_with(1.0, -2.0, 0.0, 20.0)),
        std::f64::consts::SQRT_2,
        1e-15,
    );
    let missing = fault(&parabola_with(1.0, 2.0, 0.0, 20.0));
    let (_, diagnostic) = missing.diagnostic(&PlainWords);
    assert_eq!(
        diagnostic.message,
        "the two sides never meet between 0 and 20: left less right runs from 2 to 402 there"
    );
    assert_eq!(diagnostic.notes, ["they come closest, 2 apart, at 0"]);
    let twice = fault(&parabola_with(1.0, -4.0, -20.0, 20.0));
    let (_, diagnostic) = twice.diagnostic(&PlainWords);
    assert_eq!(diagnostic.code, "many-roots");
    assert_eq!(diagnostic.message, "the two sides meet 2 times: at -2, 2");
}

#[test]
fn extrema_and_where_they_are() {
    let mut program = Program::default();
    let mut body = Builder::body(&program, 1);
    let x = body.input(0);
    let minus = body.add(Op::Negate(x));
    let decay = body.call(&EXP, &[minus]);
    body.times(x, decay);
    program.bodies.push(body.done());
    let mut main = Builder::main();
    let from = main.number(0.0);
    let to = main.number(10.0);
    let highest = main.bind(Form::Maximum, 0, from, to, &[]);
    let at = main.bind(Form::MaximumAt, 0, from, to, &[]);
    let lowest = main.bind(Form::MinimumAt, 0, from, to, &[]);
    program.main = main.done();
    let mut evaluator = Evaluator::new(&program);
    let mut of = |node| {
        evaluator
            .value(node)
            .expect("a value")
            .scalar()
            .expect("a number")
    };
    near(of(highest), libm::exp(-1.0), 1e-15);
    near(of(at), 1.0, 1e-13);
    assert_eq!(of(lowest), 0.0);
}

#[test]
fn a_derivative() {
    let program = with_bounds(reciprocal(), Form::Derivative, 4.0, 4.0);
    near(number(&program), -1.0 / 16.0, 1e-11);
}

#[test]
fn a_sum_over_a_range() {
    // Σ 1/n² to a million: ζ(2) less the tail 1/N − 1/(2N²) + … (DLMF 25.2.8).
    let mut program = Program::default();
    let mut body = Builder::body(&program, 1);
    let n = body.input(0);
    body.add(Op::PowerInteger(n, -2));
    program.bodies.push(body.done());
    let mut main = Builder::main();
    let one = main.number(1.0);
    let million = main.number(1e6);
    let range = main.add(Op::Range(one, million, RangeStep::Every(one)));
    main.bind(Form::Sum, 0, range, range, &[]);
    program.main = main.done();
    let tail = 1e-6 - 0.5e-12;
    near(number(&program), PI * PI / 6.0 - tail, 1e-15);
}

#[test]
fn a_body_may_reduce_a_whole_series() {
    // The m that minimises Σ (y − m)² is the mean; the series is captured.
    let mut program = Program::default();
    let mut body = Builder::body(&program, 2);
    let m = body.input(0);
    let y = body.input(1);
    let off = body.minus(y, m);
    let square = body.add(Op::PowerInteger(off, 2));
    body.add(Op::Reduce(Reduction::Sum, vec![square]));
    program.bodies.push(body.done());
    let mut main = Builder::main();
    let from = main.number(0.0);
    let to = main.number(10.0);
    let y = main.list(&[1.0, 2.0, 6.0]);
    main.bind(Form::MinimumAt, 0, from, to, &[y]);
    program.main = main.done();
    near(number(&program), 3.0, 1e-12);
}

#[test]
fn a_body_may_mix_an_element_with_the_whole() {
    // ∫₀¹ x y / mean(y) dx for each y.
    let mut program = Program::default();
    let mut body = Builder::body(&program, 2);
    let x = body.input(0);
    let y = body.input(1);
    let mean = body.add(Op::Reduce(Reduction::Mean, vec![y]));
    let part = body.over(y, mean);
    body.times(x, part);
    program.bodies.push(body.done());
    let mut main = Builder::main();
    let from = main.number(0.0);
    let to = main.number(1.0);
    let y = main.list(&[1.0, 2.0, 6.0]);
    main.bind(Form::Integral, 0, from, to, &[y]);
    program.main = main.done();
    for (value, expected) in numbers(&program).iter().zip([1.0 / 6.0, 1.0 / 3.0, 1.0]) {
        near(*value, expected, 1e-14);
    }
}

#[test]
fn a_body_may_be_a_written_series() {
    // ∫₀¹ {x, x²} dx = {1/2, 1/3}
    let mut program = Program::default();
    let mut body = Builder::body(&program, 1);
    let x = body.input(0);
    let square = body.add(Op::PowerInteger(x, 2));
    body.add(Op::Gather(vec![x, square]));
    program.bodies.push(body.done());
    let program = with_bounds(program, Form::Integral, 0.0, 1.0);
    let values = numbers(&program);
    assert_eq!(values.len(), 2);
    near(values[0], 0.5, 1e-14);
    near(values[1], 1.0 / 3.0, 1e-14);
}

#[test]
fn a_sum_within_an_integral() {
    // ∫₀¹ Σ_{n=1}^{3} x^n dx = 1/2 + 1/3 + 1/4, the range made in the body.
    let mut program = Program::default();
    let mut term = Builder::body(&program, 2);
    let n = term.input(0);
    let x = term.input(1);
    term.power(x, n);
    program.bodies.push(term.done());
    let mut body = Builder::body(&program, 1);
    let x = body.input(0);
    let one = body.number(1.0);
    let three = body.number(3.0);
    let range = body.add(Op::Range(one, three, RangeStep::Every(one)));
    body.bind(Form::Sum, 0, range, range, &[x]);
    program.bodies.push(body.done());
    let program = with_bounds(program, Form::Integral, 0.0, 1.0);
    near(number(&program), 13.0 / 12.0, 1e-14);
}

#[test]
fn a_sum_whose_range_depends_on_the_variable() {
    // ∫₀² (number of whole n from 0 to x) dx: 1 on [0, 1), 2 on [1, 2).
    let mut program = Program::default();
    let mut term = Builder::body(&program, 1);
    term.number(1.0);
    program.bodies.push(term.done());
    let mut body = Builder::body(&program, 1);
    let x = body.input(0);
    let zero = body.number(0.0);
    let one = body.number(1.0);
    let range = body.add(Op::Range(zero, x, RangeStep::Every(one)));
    body.bind(Form::Sum, 0, range, range, &[]);
    program.bodies.push(body.done());
    let program = with_bounds(program, Form::Integral, 0.0, 2.0);
    near(number(&program), 3.0, 1e-9);
}

#[test]
fn forms_nested_too_deeply_are_refused() {
    let mut program = Program::default();
    let mut inner = Builder::body(&program, 1);
    inner.input(0);
    program.bodies.push(inner.done());
    for depth in 0..1000 {
        let mut outer = Builder::body(&program, 1);
        let x = outer.input(0);
        let zero = outer.number(0.0);
        outer.bind(Form::Integral, depth, zero, x, &[]);
        program.bodies.push(outer.done());
    }
    let program = with_bounds(program, Form::Integral, 0.0, 1.0);
    assert!(matches!(fault(&program).kind, FaultKind::TooDeep(_)));
}

#[test]
fn a_mapped_form_over_many_rows_is_the_same_on_any_threads() {
    let mut program = parabola();
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let a: Vec<f64> = (0..500).map(|i| f64::from(i) * 0.1).collect();
    let to = main.list(&a);
    let half = main.number(0.5);
    main.bind(Form::Integral, 0, zero, to, &[to, half]);
    program.main = main.done();
    let with = |threads: usize| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build();
        pool.expect("a pool").install(|| numbers(&program))
    };
    let alone = with(1);
    assert_eq!(alone, with(4));
    near(alone[10], 1.0 / 3.0 + 0.5, 1e-14);
}
