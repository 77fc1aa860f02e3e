//! How fast weather is read: a year in the documented form, and a large plain file in a form of its own, found out and read,
//! beside the `csv` crate's reader that parses the same cells into numbers and leaves the times alone.

#![allow(missing_docs, reason = "the benchmark macros write public functions of their own")]
#![allow(clippy::print_stdout, reason = "the ratio is printed")]

#[allow(dead_code, reason = "each benchmark uses its own part of the scene")]
mod scene;

use std::fmt::Write;
use std::time::Instant;

use criterion::{Criterion, Throughput, criterion_group, criterion_main};
use dipcast::intake::csv::{Limits, read};
use dipcast::model::weather::zone::instant_text;
use dipcast::model::weather::{RegulariseOptions, regularise};

/// Ten-minute readings of eight years: 27 MB.
fn large_file() -> String {
    let mut text = "time (UTC),air temperature (°C),relative humidity (%),dew point (°C),pressure (hPa),wind (m/s),solar radiation (W/m2)\n".to_owned();
    for step in 0..8 * 365 * 144i64 {
        let time = instant_text(1_577_836_800 + step * 600)
            .replace('T', " ")
            .replace('Z', "");
        let turn = (step % 144) as f64 / 144.0;
        writeln!(
            text,
            "{time},{:.2},{:.1},{:.2},{:.1},{:.2},{:.0}",
            15.0 + 8.0 * turn,
            80.0 - 30.0 * turn,
            9.0 + turn,
            1010.0 + turn,
            3.0 * turn,
            800.0 * turn
        )
        .expect("a string takes all");
    }
    text
}

/// Every cell cut out by the library, every number parsed by the standard library.
fn general_purpose(bytes: &[u8]) -> Vec<Vec<f64>> {
    let mut reader = csv::Reader::from_reader(bytes);
    let mut record = csv::StringRecord::new();
    let mut columns = vec![Vec::new(); 6];
    while reader.read_record(&mut record).expect("the invented file is plain CSV") {
        for (column, cell) in columns.iter_mut().zip(record.iter().skip(1)) {
            column.push(cell.parse::<f64>().unwrap_or(f64::NAN));
        }
    }
    columns
}

fn large(c: &mut Criterion) {
    let text = large_file();
    let bytes = text.as_bytes();
    let mut group = c.benchmark_group("large file");
    group.throughput(Throughput::Bytes(bytes.len() as u64)).sample_size(10);
    group.bench_function("csv crate into numbers", |b| b.iter(|| general_purpose(bytes)));
    group.bench_function("found out and read", |b| {
        b.iter(|| read(bytes, None, &Limits::default()).expect("it reads"))
    });
    group.finish();
    print_ratio(bytes);
}

/// The best of five each, in MB/s, and their ratio.
fn print_ratio(bytes: &[u8]) {
    let best = |work: &dyn Fn() -> usize| {
        let seconds = (0..5).map(|_| {
            let started = Instant::now();
            std::hint::black_box(work());
            started.elapsed().as_secs_f64()
        });
        bytes.len() as f64 / 1e6 / seconds.fold(f64::INFINITY, f64::min)
    };
    let theirs = best(&|| general_purpose(bytes).len());
    let ours = best(&|| read(bytes, None, &Limits::default()).expect("it reads").len());
    println!(
        "large file: found out and read {ours:.0} MB/s, csv crate into numbers {theirs:.0} MB/s, ratio {:.2}",
        ours / theirs
    );
}

fn csv_year(c: &mut Criterion) {
    let text = scene::csv();
    let bytes = text.as_bytes();
    let mut group = c.benchmark_group("CSV year");
    group.throughput(Throughput::Bytes(bytes.len() as u64));
    group.bench_function("read", |b| {
        b.iter(|| read(bytes, None, &Limits::default()).expect("the year reads"))
    });
    let readings = read(bytes, None, &Limits::default()).expect("the year reads");
    group.bench_function("lay on hours", |b| {
        b.iter(|| regularise(readings.clone(), &RegulariseOptions::default()).expect("the year is in order"));
    });
    group.finish();
}

criterion_group!(benches, csv_year, large);
criterion_main!(benches);
