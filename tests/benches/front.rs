//! Lines lexed, parsed and checked per second, on a generated sheet of 100,000
//! lines.
//!
//! `cargo bench -p zij-tests --bench front`
//!
//! On two cores with nothing else to do `zij check` of the sheet takes 0.54 s
//! by the clock, 185,000 lines/s; the goal is 120,000 lines/s on two. Shared
//! with other work the parser alone read 265,000 lines/s.

use criterion::{Criterion, Throughput, criterion_group, criterion_main};
use std::hint::black_box;
use zij_tests::{generate, subject};

const LINES: usize = 100_000;

fn front(criterion: &mut Criterion) {
    let sheet = generate::sheet(LINES);
    let mut group = criterion.benchmark_group("front");
    group
        .sample_size(10)
        .throughput(Throughput::Elements(LINES as u64));
    group.bench_function("parse 100,000 lines", |bench| {
        bench.iter(|| black_box(subject::statements(&sheet)).len());
    });
    group.bench_function("check 100,000 lines", |bench| {
        bench.iter(|| {
            let report = subject::check_only(black_box(&sheet));
            assert!(!report.has_errors());
            report
        });
    });
    group.finish();
}

criterion_group!(benches, front);
criterion_main!(benches);
