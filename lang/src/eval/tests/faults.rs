//! Faults: the first node that failed and the values that met it.

use super::*;

/// The span of node `n` of the main block.
fn span(node: usize) -> Span {
    Span::new(10 * node, 10 * node + 5)
}

#[test]
fn division_by_zero_points_at_the_division_with_its_values() {
    let mut main = Builder::main();
    let two = main.number(2.0);
    let x = main.minus(two, two);
    let y = main.over(two, x);
    main.plus(y, two);
    let fault = fault(&program(main));
    assert_eq!(fault.kind, FaultKind::DivisionByZero);
    assert_eq!(fault.place.span, span(2));
    assert_eq!(fault.met.len(), 1, "the written 2 needs no saying");
    assert_eq!((fault.met[0].place.span, fault.met[0].value), (span(1), 0.0));
    let (source, diagnostic) = fault.diagnostic(&PlainWords);
    assert_eq!(source, 0);
    assert_eq!(diagnostic.code, "division-by-zero");
    assert_eq!(diagnostic.message, "division by zero");
    assert_eq!(diagnostic.others[0].text, "this is 0");
}

#[test]
fn the_first_failing_element_is_told() {
    let mut main = Builder::main();
    let half = main.number(0.5);
    let x = main.list(&[4.0, 1.0, -1.0, -4.0]);
    main.power(x, half);
    let fault = fault(&program(main));
    assert_eq!(fault.kind, FaultKind::NegativeToPower(0.5));
    assert_eq!((fault.element, fault.failed), (Some((2, 4)), 2));
    assert_eq!(fault.met[0].value, -1.0);
    let (_, diagnostic) = fault.diagnostic(&PlainWords);
    assert_eq!(diagnostic.message, "a negative number to the power 0.5");
    assert_eq!(diagnostic.notes, ["in element 3 of 4; 2 elements have no value"]);
}

#[test]
fn the_rows_that_have_values_are_kept() {
    let mut main = Builder::main();
    let x = main.list(&[1.0, 0.0, 4.0]);
    let one = main.number(1.0);
    let y = main.over(one, x);
    let program = program(main);
    let rows = Evaluator::new(&program).rows(y).expect("rows");
    assert_eq!((rows.values[0], rows.values[2]), (1.0, 0.25));
    assert!(rows.values[1].is_nan());
    assert_eq!(
        rows.fault.map(|fault| fault.kind),
        Some(FaultKind::DivisionByZero)
    );
}

#[test]
fn an_overflow_is_not_swallowed_by_a_division() {
    // 1/exp(1000) is not 0.
    let mut main = Builder::main();
    let one = main.number(1.0);
    let thousand = main.number(1000.0);
    let big = main.call(&EXP, &[thousand]);
    main.over(one, big);
    let alone = fault(&program(main));
    assert_eq!(alone.place.span, span(2));
    assert!(matches!(alone.kind, FaultKind::Domain(_)));
    // Nor where it is one lane of many.
    let mut main = Builder::main();
    let one = main.number(1.0);
    let x = main.list(&[1.0, 1e200]);
    let square = main.times(x, x);
    main.over(one, square);
    let in_lane = fault(&program(main));
    assert_eq!(in_lane.kind, FaultKind::Overflow);
    assert_eq!(in_lane.place.span, span(2));
}

#[test]
fn powers_of_zero() {
    let mut main = Builder::main();
    let zero = main.number(0.0);
    main.add(Op::PowerInteger(zero, -2));
    assert_eq!(fault(&program(main)).kind, FaultKind::ZeroToNegativePower);
}

#[test]
fn the_library_says_why() {
    let mut main = Builder::main();
    let minus = main.number(-1.0);
    let two = main.number(2.0);
    let x = main.times(minus, two);
    main.call(&LOG, &[x]);
    let fault = fault(&program(main));
    assert_eq!(
        fault.kind,
        FaultKind::Domain("the logarithm of nothing positive".into())
    );
    assert_eq!((fault.place.span, fault.met[0].value), (span(3), -2.0));
}

#[test]
fn series_of_unlike_length_name_both() {
    let mut main = Builder::main();
    let a = main.list(&[1.0, 2.0]);
    let b = main.list(&[1.0, 2.0, 3.0]);
    let one = main.number(1.0);
    let c = main.plus(a, one);
    main.times(c, b);
    let unlike = fault(&program(main));
    assert_eq!(unlike.kind, FaultKind::Lengths(2, 3));
    assert_eq!(unlike.place.span, span(4));
    let mut main = Builder::main();
    let a = main.list(&[1.0, 2.0]);
    let b = main.list(&[1.0, 0.0, 1.0]);
    main.add(Op::Filter(a, b));
    assert_eq!(fault(&program(main)).kind, FaultKind::Lengths(2, 3));
}

#[test]
fn empty_series_have_no_mean() {
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let x = main.list(&[1.0, 2.0]);
    let none = main.add(Op::Compare(CompareOp::Less, x, zero));
    let kept = main.add(Op::Filter(x, none));
    main.add(Op::Reduce(Reduction::Mean, vec![kept]));
    let fault = fault(&program(main));
    assert_eq!(fault.kind, FaultKind::TooFew(Reduction::Mean, 0));
    assert_eq!(
        fault.diagnostic(&PlainWords).1.message,
        "an empty series has no mean"
    );
}

#[test]
fn a_reduction_reports_the_element_that_failed() {
    let mut main = Builder::main();
    let one = main.number(1.0);
    let x = main.list(&[1.0, 0.0]);
    let y = main.over(one, x);
    main.add(Op::Reduce(Reduction::Sum, vec![y]));
    let fault = fault(&program(main));
    assert_eq!(fault.kind, FaultKind::DivisionByZero);
    assert_eq!(fault.element, Some((1, 2)));
}

#[test]
fn a_filter_needs_only_what_it_keeps() {
    let mut main = Builder::main();
    let one = main.number(1.0);
    let zero = main.number(0.0);
    let x = main.list(&[2.0, 0.0]);
    let y = main.over(one, x);
    let positive = main.add(Op::Compare(CompareOp::Greater, x, zero));
    main.add(Op::Filter(y, positive));
    assert_eq!(numbers(&program(main)), [0.5]);
}

#[test]
fn data_that_is_not_a_number_is_a_fault() {
    let mut main = Builder::main();
    let x = main.add(Op::Column(0));
    let one = main.number(1.0);
    main.plus(x, one);
    let mut program = program(main);
    program.columns.push(Arc::new(vec![1.0, f64::NAN]));
    let fault = fault(&program);
    assert_eq!((fault.place.node, fault.element), (0, Some((1, 2))));
}

#[test]
fn a_range_too_long_is_refused_before_it_is_made() {
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let one = main.number(1.0);
    let tiny = main.number(1e-12);
    main.add(Op::Range(zero, one, RangeStep::Every(tiny)));
    let fault = fault(&program(main));
    assert!(matches!(fault.kind, FaultKind::TooManyPoints(..)));
    assert_eq!(fault.place.span, span(3));
}

#[test]
fn a_broken_program_ends_all_the_same() {
    for op in [
        Op::Negate(0),
        Op::Negate(7),
        Op::Column(3),
        Op::Input(2),
        Op::Reduce(Reduction::Sum, vec![]),
    ] {
        let mut main = Builder::main();
        main.add(op);
        assert!(value(&program(main)).is_err());
    }
    let mut main = Builder::main();
    let one = main.number(1.0);
    main.bind(Form::Integral, 5, one, one, &[]);
    assert!(value(&program(main)).is_err());
}
