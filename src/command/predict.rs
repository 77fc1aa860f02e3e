//! `dipcast predict`: the same prediction without a server.

use std::path::{Path, PathBuf};
use std::sync::OnceLock;

use bytes::Bytes;
use clap::{Args, ValueEnum};
use dipcast::config::{Config, Log, Overrides};
use dipcast::http::negotiate::Format;
use dipcast::http::router;
use dipcast::http::schema::Schemas;
use dipcast::http::v1::predictions::{PredictionAnswer, csv_lines, order, pieces, problem_of};
use dipcast::service::{Clock, PredictionOrder, PredictionReport, Predictions, Weather};
use dipcast::telemetry;
use indicatif::{ProgressBar, ProgressStyle};

#[derive(Args)]
pub(super) struct Predict {
    /// The request, as for POST /v1/predictions.
    #[arg(long, value_name = "FILE")]
    request: PathBuf,
    /// The readings as CSV or gzipped CSV, for weather.kind upload.
    #[arg(long, value_name = "FILE")]
    weather: Option<PathBuf>,
    /// The whole answer as JSON, or its hours as CSV.
    #[arg(long, value_enum, default_value_t = Output::Json)]
    format: Output,
}

#[derive(Debug, Clone, Copy, ValueEnum)]
enum Output {
    Json,
    Csv,
}

pub(super) fn run(arguments: &Predict) -> Result<(), String> {
    let config = Config::load(&Overrides::default()).map_err(|error| error.to_string())?;
    let format = match arguments.format {
        Output::Json => Format::Json,
        Output::Csv => Format::Csv,
    };
    start_logs()?;
    let text = read(&arguments.request)?;
    let file = arguments.weather.as_deref().map(read).transpose()?.map(Bytes::from);
    let upload = file.is_some();
    let document = serde_json::to_value(router::document()).map_err(|error| error.to_string())?;
    let order = order(&Schemas::of(&document), &text, file, format).map_err(|problem| problem.to_string())?;
    let order = fetched(order, &config, upload)?;
    let bar = Bar::default();
    let predictions = Predictions::new(&config.runs, &config.limits);
    let report = predictions.run_here(&order, &|done, total| bar.show(done, total));
    bar.finish();
    print(
        report.map_err(|error| problem_of(error, upload).to_string())?,
        arguments.format,
        upload,
    )
}

/// Only what must not be missed; standard output is for the answer.
fn start_logs() -> Result<(), String> {
    telemetry::start_logs(&Log {
        filter: "warn".to_owned(),
        json: false,
    })
}

/// The order with its weather at hand.
fn fetched(order: PredictionOrder, config: &Config, upload: bool) -> Result<PredictionOrder, String> {
    let runtime = tokio::runtime::Runtime::new().map_err(|error| format!("the runtime could not start: {error}"))?;
    let weather = Weather::new(config, Clock::system());
    runtime
        .block_on(weather.open_store())
        .map_err(|error| error.to_string())?;
    let fetched = runtime.block_on(weather.fetched(order));
    fetched.map_err(|error| problem_of(error, upload).to_string())
}

fn read(file: &Path) -> Result<Vec<u8>, String> {
    std::fs::read(file).map_err(|error| format!("{}: {error}", file.display()))
}

fn print(report: PredictionReport, output: Output, upload: bool) -> Result<(), String> {
    match output {
        Output::Json => {
            let mut text =
                serde_json::to_vec(&PredictionAnswer::of(report, upload)).map_err(|error| error.to_string())?;
            text.push(b'\n');
            super::print(&text)
        }
        Output::Csv => pieces(report, csv_lines).try_for_each(|piece| super::print(&piece)),
    }
}

/// A bar on standard error, if that is a terminal.
#[derive(Default)]
struct Bar(OnceLock<ProgressBar>);

impl Bar {
    fn show(&self, done: usize, total: usize) -> bool {
        let bar = self.0.get_or_init(|| {
            let style = ProgressStyle::with_template("{bar:40} {percent} % of {len} hour-samples, {eta} left");
            ProgressBar::new(total as u64).with_style(style.unwrap_or_else(|_| ProgressStyle::default_bar()))
        });
        bar.set_length(total as u64);
        bar.set_position(done as u64);
        true
    }

    fn finish(&self) {
        if let Some(bar) = self.0.get() {
            bar.finish_and_clear();
        }
    }
}
