//! How fast the model alone is: an hour, a year, and resolved cycles a second.

#![allow(missing_docs, reason = "the benchmark macros write public functions of their own")]

#[allow(dead_code, reason = "each benchmark uses its own part of the scene")]
mod scene;

use criterion::{BatchSize, Criterion, Throughput, criterion_group, criterion_main};
use dipcast::model::cycle::{Method, State, Tuning, run_stretch};
use dipcast::model::prediction::predict;

fn averaged_hour(c: &mut Criterion) {
    let (device, tuning, hour) = (scene::device(), Tuning::default(), scene::hour());
    let settled = State::settled(&device, &tuning, &hour.start);
    c.bench_function("averaged: one hour", |b| {
        b.iter_batched_ref(
            || settled,
            |state| run_stretch(&device, &tuning, Method::Averaged, state, &hour, 0.0, 3600.0, true),
            BatchSize::SmallInput,
        );
    });
}

/// Counted in cycles, so that the report reads as resolved cycles a second.
fn resolved_cycles(c: &mut Criterion) {
    let (device, tuning, hour) = (scene::device(), Tuning::default(), scene::hour());
    let settled = State::settled(&device, &tuning, &hour.start);
    let run = |state: &mut State| run_stretch(&device, &tuning, Method::Resolved, state, &hour, 0.0, 3600.0, true);
    let cycles = run(&mut { settled }).cycles;
    let mut group = c.benchmark_group("resolved");
    group.throughput(Throughput::Elements(cycles.round() as u64));
    group.bench_function("cycles of one hour", |b| {
        b.iter_batched_ref(|| settled, run, BatchSize::SmallInput);
    });
    group.finish();
}

fn site_year(c: &mut Criterion) {
    let (device, year) = (scene::device(), scene::placed_year());
    let mut group = c.benchmark_group("site-year, averaged");
    group.sample_size(10);
    for (name, bands) in [("without bands", false), ("with bands of 32 samples", true)] {
        let request = scene::request(&device, &year, Method::Averaged, bands);
        group.bench_function(name, |b| {
            b.iter(|| predict(&request, &|_, _| true).expect("the year runs"))
        });
    }
    group.finish();
}

criterion_group!(benches, averaged_hour, resolved_cycles, site_year);
criterion_main!(benches);
