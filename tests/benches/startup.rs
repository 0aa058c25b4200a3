//! From nothing to the first answer: the whole process of
//! `zij -e 'D_L(1100) [Gpc]'`.
//!
//! `cargo bench -p zij-tests --bench startup`
//!
//! On two cores shared with other work: 1.9 ms; the process takes 5.7 MB. The
//! goals are 10 ms and 20 MB.

use criterion::{Criterion, criterion_group, criterion_main};
use std::path::PathBuf;
use std::process::Command;

fn program() -> PathBuf {
    let build = escargot::CargoBuild::new()
        .manifest_path(zij_tests::repository::root().join("Cargo.toml"))
        .package("zij-lang")
        .bin("zij")
        .release();
    build.run().expect("the program builds").path().to_owned()
}

fn startup(criterion: &mut Criterion) {
    let program = program();
    let answer = |line: &str| {
        let output = Command::new(&program)
            .args(["-e", line])
            .output()
            .expect("it starts");
        assert!(
            output.status.success(),
            "{}",
            String::from_utf8_lossy(&output.stderr)
        );
        output.stdout
    };
    let mut group = criterion.benchmark_group("startup");
    group.bench_function("1 + 1", |bench| bench.iter(|| answer("1 + 1")));
    group.bench_function("D_L(1100) [Gpc]", |bench| {
        bench.iter(|| answer("D_L(1100) [Gpc]"))
    });
    group.finish();
}

criterion_group!(benches, startup);
criterion_main!(benches);
