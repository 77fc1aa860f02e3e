//! How fast a year of CSV is read, beside a plain pass of the `csv` crate over the same bytes, which parses no number.

#![allow(missing_docs, reason = "the benchmark macros write public functions of their own")]

#[allow(dead_code, reason = "each benchmark uses its own part of the scene")]
mod scene;

use criterion::{Criterion, Throughput, criterion_group, criterion_main};
use dipcast::intake::csv::{Limits, read};
use dipcast::model::weather::{RegulariseOptions, regularise};

fn plain_pass(bytes: &[u8]) -> usize {
    let mut reader = csv::Reader::from_reader(bytes);
    let mut record = csv::ByteRecord::new();
    let mut fields = 0;
    while reader
        .read_byte_record(&mut record)
        .expect("the invented year is plain CSV")
    {
        fields += record.len();
    }
    fields
}

fn csv_year(c: &mut Criterion) {
    let text = scene::csv();
    let bytes = text.as_bytes();
    let mut group = c.benchmark_group("CSV year");
    group.throughput(Throughput::Bytes(bytes.len() as u64));
    group.bench_function("plain pass of the csv crate", |b| b.iter(|| plain_pass(bytes)));
    group.bench_function("read", |b| {
        b.iter(|| read(bytes, None, &Limits::default()).expect("the year reads"))
    });
    let readings = read(bytes, None, &Limits::default()).expect("the year reads");
    group.bench_function("lay on hours", |b| {
        b.iter(|| regularise(readings.clone(), &RegulariseOptions::default()).expect("the year is in order"));
    });
    group.finish();
}

criterion_group!(benches, csv_year);
criterion_main!(benches);
