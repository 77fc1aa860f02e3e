//! One integration binary.
#![allow(
    missing_docs,
    clippy::unwrap_used,
    clippy::print_stdout,
    reason = "tests explain themselves by name and may fail loudly"
)]

mod agreement;
mod device;
mod facts;
mod bad_csv;
mod bad_input;
mod command;
mod demo_files;
mod endpoints;
mod house_rules;
mod intake_csv;
mod weather;
mod openapi;
mod openapi_examples;
mod openapi_twin;
mod place;
mod program;
mod prediction;
mod routes;
mod server;
mod signs;
mod store;
mod support;
mod time;
mod reference;

/// A file of `tests/data`.
fn data(name: &str) -> std::path::PathBuf {
    std::path::Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/data")
        .join(name)
}

/// Cases of a property test: the usual number, unless `PROPTEST_CASES` asks for another (`tests/run.sh long` does).
fn cases(usual: u32) -> u32 {
    std::env::var("PROPTEST_CASES")
        .ok()
        .and_then(|asked| asked.parse().ok())
        .unwrap_or(usual)
}
