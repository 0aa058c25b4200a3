//! A million luminosity distances, and a formula of the user on a million rows
//! beside the same loop in Rust.
//!
//! `cargo bench -p zij-tests --bench values`
//!
//! A run through a session holds the check of the sheet, the range and the sum
//! as well; `range` measures what those take alone.
//!
//! On two cores with nothing else to do: range 2.3 ms, distances 16.4 ms with
//! their range, the formula 14.4 ms where the loop by hand takes 5.6 ms. The
//! goals are 20 ms for the distances, and three times the loop.

use criterion::{Criterion, Throughput, criterion_group, criterion_main};
use std::hint::black_box;
use zij_tests::subject;

const ROWS: u64 = 1_000_000;

const RANGE: &str = "sum(0.001 .. 10 in 999999 steps)\n";

const DISTANCES: &str = "assume planck2018\nsum(D_L(0.001 .. 10 in 999999 steps))\n";

const FORMULA: &str = "\
Om = 0.3
OL = 0.7
f(z) = sqrt(Om*(1+z)^3+OL)
sum(f(0.001 .. 10 in 999999 steps))
";

fn run(sheet: &str) -> f64 {
    let report = subject::run(black_box(sheet));
    subject::last_number(&report).expect("a number")
}

/// What the formula does, by hand: the rows, the values, their sum.
fn by_hand() -> f64 {
    let (om, ol) = (black_box(0.3_f64), black_box(0.7_f64));
    let step = (10.0 - 0.001) / 999_999.0;
    let rows: Vec<f64> = (0..ROWS).map(|row| 0.001 + step * row as f64).collect();
    let value = |z: &f64| {
        let scale = 1.0 + z;
        (om * (scale * scale * scale) + ol).sqrt()
    };
    let values: Vec<f64> = rows.iter().map(value).collect();
    values.iter().sum()
}

fn values(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("values");
    group.sample_size(20).throughput(Throughput::Elements(ROWS));
    group.bench_function("range", |bench| bench.iter(|| run(RANGE)));
    group.bench_function("D_L", |bench| bench.iter(|| run(DISTANCES)));
    group.bench_function("formula", |bench| bench.iter(|| run(FORMULA)));
    group.bench_function("formula by hand", |bench| bench.iter(by_hand));
    group.finish();
}

criterion_group!(benches, values);
criterion_main!(benches);
