//! Series in chunks, lane by lane.

use super::*;

#[test]
fn a_formula_over_a_series() {
    let z: Vec<f64> = (0..1000).map(|i| f64::from(i) * 0.01).collect();
    let values = numbers(&expansion_rate(&z));
    for (z, value) in z.iter().zip(values) {
        let scale = 1.0 + z;
        assert_eq!(value, (0.3 * (scale * scale * scale) + 0.7).sqrt());
    }
}

#[test]
fn any_number_of_threads_gives_the_same_digits() {
    let z: Vec<f64> = (0..300_000).map(|i| f64::from(i) * 1e-4).collect();
    let program = expansion_rate(&z);
    let with = |threads: usize| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build();
        pool.expect("a pool").install(|| numbers(&program))
    };
    let alone = with(1);
    for threads in [2, 8] {
        let same = with(threads)
            .iter()
            .zip(&alone)
            .all(|(a, b)| a.to_bits() == b.to_bits());
        assert!(same, "{threads} threads");
    }
}

#[test]
fn lanes_and_the_strict_walk_agree_to_the_last_bit() {
    // The same formula as a series of one and as a number.
    for x in [0.1, 0.7, 1.9, 33.3, 1e8] {
        let formula = |main: &mut Builder, x: NodeId| {
            let three_halves = main.number(1.5);
            let third = main.number(1.0 / 3.0);
            let a = main.power(x, three_halves);
            let b = main.power(x, third);
            let c = main.add(Op::PowerInteger(x, -5));
            let d = main.over(a, b);
            let e = main.call(&LOG, &[x]);
            let f = main.times(d, e);
            let g = main.plus(f, c);
            let less = main.add(Op::Compare(CompareOp::Less, x, g));
            let negative = main.add(Op::Negate(g));
            main.add(Op::Select(less, g, negative))
        };
        let mut alone = Builder::main();
        let at = alone.number(x);
        formula(&mut alone, at);
        let mut series = Builder::main();
        let at = series.list(&[x]);
        formula(&mut series, at);
        assert_eq!(numbers(&program(series)), [number(&program(alone))]);
    }
}

#[test]
fn truth_values() {
    let mut main = Builder::main();
    let x = main.list(&[0.5, 1.5, 2.5]);
    let one = main.number(1.0);
    let two = main.number(2.0);
    let above = main.add(Op::Compare(CompareOp::Greater, x, one));
    let below = main.add(Op::Compare(CompareOp::LessOrEqual, x, two));
    let both = main.add(Op::Logical(LogicalOp::And, above, below));
    main.add(Op::Not(both));
    assert_eq!(numbers(&program(main)), [1.0, 0.0, 1.0]);
}

#[test]
fn the_branch_not_taken_is_no_fault() {
    // if x > 0 then log(x) else 1/y, with a scalar y = 0 that is never used.
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let one = main.number(1.0);
    let x = main.list(&[1.0, std::f64::consts::E]);
    let positive = main.add(Op::Compare(CompareOp::Greater, x, zero));
    let log = main.call(&LOG, &[x]);
    let broken = main.over(one, zero);
    main.add(Op::Select(positive, log, broken));
    assert_eq!(numbers(&program(main)), [0.0, 1.0]);
    // The same where the lane that fails is in the series.
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let x = main.list(&[-1.0, 1.0]);
    let positive = main.add(Op::Compare(CompareOp::Greater, x, zero));
    let log = main.call(&LOG, &[x]);
    main.add(Op::Select(positive, log, zero));
    assert_eq!(numbers(&program(main)), [0.0, 0.0]);
}

#[test]
fn what_decides_first_decides() {
    // x > 0 and log(x) < 1
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let one = main.number(1.0);
    let x = main.list(&[-1.0, 1.0, 10.0]);
    let positive = main.add(Op::Compare(CompareOp::Greater, x, zero));
    let log = main.call(&LOG, &[x]);
    let small = main.add(Op::Compare(CompareOp::Less, log, one));
    main.add(Op::Logical(LogicalOp::And, positive, small));
    assert_eq!(numbers(&program(main)), [0.0, 1.0, 0.0]);
}

#[test]
fn never_is_a_value_but_not_a_number() {
    let mut main = Builder::main();
    let held = main.add(model(&[]));
    let z = main.list(&[1.0, 3.0]);
    main.add(Op::Call(&ARRIVAL, Some(held), vec![z]));
    let mut program = program(main);
    assert_eq!(numbers(&program), [11.0, f64::INFINITY]);
    // Arithmetic with it is a fault at the call.
    program.main.nodes.push(Node {
        op: Op::Negate(2),
        span: Span::new(90, 95),
        source: 0,
        series: true,
    });
    program.main.result = 3;
    let fault = fault(&program);
    assert_eq!(fault.kind, FaultKind::Never);
    assert_eq!((fault.place.node, fault.element), (2, Some((1, 2))));
}

#[test]
fn reductions_and_selections() {
    let mut main = Builder::main();
    let two = main.number(2.0);
    let x = main.list(&[3.0, 1.0, 2.0, 4.0]);
    let doubled = main.times(x, two);
    let small = main.add(Op::Compare(CompareOp::LessOrEqual, x, two));
    let sum = main.add(Op::Reduce(Reduction::Sum, vec![doubled]));
    let sorted = main.add(Op::Sort(doubled));
    let kept = main.add(Op::Filter(doubled, small));
    let count = main.add(Op::Reduce(Reduction::CountTrue, vec![small]));
    let spread = main.over(doubled, sum);
    let program = program(main);
    let mut evaluator = Evaluator::new(&program);
    let mut of = |node| evaluator.value(node).expect("a value").numbers().to_vec();
    assert_eq!(of(sum), [20.0]);
    assert_eq!(of(sorted), [2.0, 4.0, 6.0, 8.0]);
    assert_eq!(of(kept), [2.0, 4.0]);
    assert_eq!(of(count), [2.0]);
    assert_eq!(of(spread), [0.3, 0.1, 0.2, 0.4]);
}

#[test]
fn ranges_and_gathered_series() {
    let mut main = Builder::main();
    let zero = main.number(0.0);
    let half = main.number(0.5);
    let two = main.number(2.0);
    let range = main.add(Op::Range(zero, two, RangeStep::Every(half)));
    let gathered = main.add(Op::Gather(vec![two, half, zero, two, half]));
    main.plus(range, gathered);
    assert_eq!(numbers(&program(main)), [2.0, 1.0, 1.0, 3.5, 2.5]);
}

#[test]
fn columns_are_read_where_they_are() {
    let mut main = Builder::main();
    let column = main.add(Op::Column(0));
    main.times(column, column);
    let mut program = program(main);
    program.columns.push(Arc::new(vec![1.0, 2.0, 3.0]));
    assert_eq!(numbers(&program), [1.0, 4.0, 9.0]);
}

#[test]
fn a_chain_of_a_hundred_thousand_names() {
    let mut main = Builder::main();
    let one = main.number(1.0);
    let mut last = one;
    for _ in 0..100_000 {
        last = main.plus(last, one);
    }
    assert_eq!(number(&program(main)), 100_001.0);
    let mut main = Builder::main();
    let mut last = main.list(&[2.0, 1.0]);
    for _ in 0..10_000 {
        last = main.add(Op::Sort(last));
    }
    assert_eq!(numbers(&program(main)), [1.0, 2.0]);
}

#[test]
fn a_value_that_is_read_twice_is_computed_once() {
    use std::sync::atomic::{AtomicUsize, Ordering};
    static CALLS: AtomicUsize = AtomicUsize::new(0);
    static COUNTED: Entry = entry(
        "counted",
        Definition::Function(|arguments| {
            CALLS.fetch_add(1, Ordering::Relaxed);
            Ok(arguments[0])
        }),
    );
    let mut main = Builder::main();
    let one = main.number(1.0);
    let call = main.call(&COUNTED, &[one]);
    let twice = main.plus(call, call);
    let thrice = main.plus(twice, call);
    let program = program(main);
    let mut evaluator = Evaluator::new(&program);
    assert_eq!(evaluator.value(thrice).expect("a value").scalar(), Some(3.0));
    assert_eq!(evaluator.value(twice).expect("a value").scalar(), Some(2.0));
    assert_eq!(CALLS.load(Ordering::Relaxed), 1);
}

#[test]
fn models_vary_along_a_series() {
    // The library's own models are tested where they are; here only that a
    // model for each element (parameter 0 is H0, in 1/s) reaches its call.
    let mut main = Builder::main();
    let h = main.list(&[2.0e-18, 2.2e-18, 2.4e-18]);
    let z = main.list(&[0.0, 1.0, 1.5]);
    let held = main.add(model(&[(0, h)]));
    main.add(Op::Call(&ARRIVAL, Some(held), vec![z]));
    let value = value(&program(main)).expect("a value");
    assert_eq!(value.numbers(), [10.0, 11.0, 11.5]);
}
