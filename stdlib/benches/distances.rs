//! Speed of the distance library: tables on first use, then a million
//! distances through the catalogue, as the evaluator calls them.

use criterion::{BatchSize, Criterion, Throughput, criterion_group, criterion_main};
use std::hint::black_box;
use zij_stdlib::catalogue::{Definition, Entry, entries};
use zij_stdlib::model::parameters::named;
use zij_stdlib::model::{self, BASES, Model, Setting};

fn build(name: &str, numbers: &[(&str, f64)]) -> Model {
    let base = BASES.iter().find(|base| base.name == name).expect("a known base");
    let setting = |(name, value): &(&str, f64)| (named(name).expect("a parameter"), Setting::Number(*value));
    let settings: Vec<_> = numbers.iter().map(setting).collect();
    model::build(base, &settings).expect("a model")
}

fn function(name: &str) -> &'static Entry {
    entries()
        .find(|entry| entry.name == name && entry.is_function())
        .expect("a function of the library")
}

fn call(entry: &Entry, model: &Model, arguments: &[f64]) -> f64 {
    match entry.definition {
        Definition::Cosmology(function) => function(model, arguments).expect("a value"),
        Definition::Constant(..) | Definition::ModelValue(_) | Definition::Function(_) => f64::NAN,
    }
}

fn million(c: &mut Criterion) {
    let z: Vec<f64> = (0..1_000_000)
        .map(|place| 1e-3 + 1e-6 * f64::from(place) * 1.1e3)
        .collect();
    let models = [
        ("planck2018", build("planck2018", &[])),
        ("closed", build("planck2018", &[("Ωk", -0.01)])),
    ];
    let mut group = c.benchmark_group("a million");
    group
        .throughput(Throughput::Elements(z.len() as u64))
        .sample_size(20);
    for (label, model) in &models {
        for name in [
            "comoving_distance",
            "luminosity_distance",
            "lookback_time",
            "age",
            "distance_modulus",
            "hubble_rate",
        ] {
            let entry = function(name);
            group.bench_function(format!("{name} under {label}"), |bencher| {
                bencher.iter(|| {
                    z.iter()
                        .map(|z| call(entry, model, black_box(&[*z])))
                        .sum::<f64>()
                });
            });
        }
    }
    group.finish();
}

fn first_use(c: &mut Criterion) {
    let mut group = c.benchmark_group("first use");
    let distance = function("luminosity_distance");
    let age = function("age");
    let cases = [
        ("concordance", build("concordance", &[]), vec![]),
        ("planck2018", build("planck2018", &[]), vec![]),
        (
            "w0 and wa",
            build("planck2018", &[]),
            vec![("w0", -0.9), ("wa", 0.2)],
        ),
    ];
    for (label, base, changes) in cases {
        let name = base.base().name;
        group.bench_function(format!("distances under {label}"), |bencher| {
            bencher.iter_batched(
                || build(name, &changes),
                |model| call(distance, &model, &[1100.0]),
                BatchSize::SmallInput,
            );
        });
        group.bench_function(format!("times under {label}"), |bencher| {
            bencher.iter_batched(
                || build(name, &changes),
                |model| call(age, &model, &[0.0]),
                BatchSize::SmallInput,
            );
        });
    }
    group.finish();
}

fn inverses(c: &mut Criterion) {
    let model = build("planck2018", &[]);
    let entry = function("redshift_of_D_L");
    c.bench_function("redshift_of_D_L(10 Gpc)", |bencher| {
        bencher.iter(|| call(entry, &model, black_box(&[3.085_677_581_491_367e26])));
    });
}

criterion_group!(benches, million, first_use, inverses);
criterion_main!(benches);
