//! `dipcast inspect`: looks at a weather file without a server.

use std::path::PathBuf;

use clap::Args;
use dipcast::config::{Config, Overrides};
use dipcast::http::router;
use dipcast::http::schema::Schemas;
use dipcast::http::v1::inspections::{answer_of, told};

#[derive(Args)]
pub(super) struct Inspect {
    /// The weather as CSV or gzipped CSV.
    #[arg(value_name = "FILE")]
    file: PathBuf,
    /// Answers to questions of an earlier inspection, as JSON: '{"zone": "UTC"}'.
    #[arg(long, value_name = "JSON")]
    hints: Option<String>,
}

pub(super) fn run(arguments: &Inspect) -> Result<(), String> {
    let config = Config::load(&Overrides::default()).map_err(|error| error.to_string())?;
    let file = std::fs::read(&arguments.file).map_err(|error| format!("{}: {error}", arguments.file.display()))?;
    let document = serde_json::to_value(router::document()).map_err(|error| error.to_string())?;
    let told = told(&Schemas::of(&document), arguments.hints.as_deref()).map_err(|problem| problem.to_string())?;
    let answer = answer_of(&file, &told, &config.limits).map_err(|problem| problem.to_string())?;
    let mut text = serde_json::to_vec_pretty(&answer).map_err(|error| error.to_string())?;
    text.push(b'\n');
    super::print(&text)
}
