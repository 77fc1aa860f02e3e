//! One integration binary.
#![allow(
    missing_docs,
    clippy::unwrap_used,
    clippy::print_stdout,
    reason = "tests explain themselves by name and may fail loudly"
)]

mod device;
mod bad_csv;
mod bad_input;
mod command;
mod demo_files;
mod house_rules;
mod intake_csv;
mod weather;
mod openapi;
mod prediction;
mod routes;
mod server;
mod support;
mod reference;

/// A file of `tests/data`.
fn data(name: &str) -> std::path::PathBuf {
    std::path::Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/data")
        .join(name)
}
