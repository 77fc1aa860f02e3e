//! Runs one case a given number of times and ends, for a tool that counts instructions (`tests/benches/instructions.sh`).

#[allow(dead_code, reason = "each benchmark uses its own part of the scene")]
mod scene;

use std::hint::black_box;

use dipcast::intake::csv::{Limits, read};
use dipcast::model::cycle::{Method, State, Tuning, run_stretch};
use dipcast::model::prediction::predict;

fn main() {
    let arguments: Vec<String> = std::env::args()
        .skip(1)
        .filter(|argument| !argument.starts_with("--"))
        .collect();
    let [case, times] = arguments.as_slice() else {
        eprintln!("usage: instructions averaged-hour|resolved-hour|site-year|csv-year TIMES");
        return;
    };
    let times: usize = times.parse().expect("TIMES is a whole number");
    match case.as_str() {
        "averaged-hour" => hours(Method::Averaged, times),
        "resolved-hour" => hours(Method::Resolved, times),
        "site-year" => years(times),
        "csv-year" => csv_years(times),
        other => panic!("there is no case {other}"),
    }
}

fn hours(method: Method, times: usize) {
    let (device, tuning, hour) = (scene::device(), Tuning::default(), scene::hour());
    let settled = State::settled(&device, &tuning, &hour.start);
    for _ in 0..times {
        let mut state = settled;
        black_box(run_stretch(
            &device, &tuning, method, &mut state, &hour, 0.0, 3600.0, true,
        ));
    }
}

fn years(times: usize) {
    let (device, year) = (scene::device(), scene::placed_year());
    let request = scene::request(&device, &year, Method::Averaged, false);
    for _ in 0..times {
        black_box(predict(&request, &|_, _| true).expect("the year runs"));
    }
}

fn csv_years(times: usize) {
    let text = scene::csv();
    for _ in 0..times {
        black_box(read(text.as_bytes(), None, &Limits::default()).expect("the year reads"));
    }
}
