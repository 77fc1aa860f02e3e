//! Logs and metrics: set up once a process.

use std::sync::OnceLock;

use metrics_exporter_prometheus::{Matcher, PrometheusBuilder, PrometheusHandle};
use tracing_subscriber::EnvFilter;
use tracing_subscriber::util::SubscriberInitExt;

use crate::config::Log;

/// Upper bounds of the duration buckets [s].
const DURATION_BUCKETS_S: [f64; 11] = [0.001, 0.003, 0.01, 0.03, 0.1, 0.3, 1.0, 3.0, 10.0, 30.0, 100.0];

/// Starts logging to standard error.
///
/// # Errors
/// A filter that cannot be read, in words.
pub fn start_logs(log: &Log) -> Result<(), String> {
    let filter = EnvFilter::try_new(&log.filter).map_err(|error| format!("log.filter: {error}"))?;
    let builder = tracing_subscriber::fmt()
        .with_env_filter(filter)
        .with_writer(std::io::stderr);
    let started = if log.json {
        builder.json().finish().try_init()
    } else {
        builder.finish().try_init()
    };
    started.map_err(|error| format!("logging could not be started: {error}"))
}

/// The process's metrics; installed at the first call.
pub fn metrics() -> PrometheusHandle {
    static HANDLE: OnceLock<PrometheusHandle> = OnceLock::new();
    HANDLE.get_or_init(install_metrics).clone()
}

fn install_metrics() -> PrometheusHandle {
    let builder = PrometheusBuilder::new()
        .set_buckets_for_metric(Matcher::Suffix("duration_seconds".to_owned()), &DURATION_BUCKETS_S)
        .expect("the list of buckets is not empty");
    let recorder = builder.build_recorder();
    let handle = recorder.handle();
    if metrics::set_global_recorder(recorder).is_err() {
        tracing::warn!("another metrics recorder is in place; /metrics stays empty");
    }
    describe();
    handle
}

fn describe() {
    metrics::describe_counter!("http_requests_total", "Requests answered, by route, method and status.");
    metrics::describe_counter!(
        "http_requests_abandoned_total",
        "Requests whose client went away before the answer."
    );
    metrics::describe_histogram!(
        "http_request_duration_seconds",
        "Time from request head to answer head."
    );
    metrics::describe_gauge!("predictions_running", "Predictions being computed.");
    metrics::describe_gauge!("predictions_waiting", "Predictions waiting for a place.");
    metrics::describe_counter!(
        "weather_questions_total",
        "Questions to weather sources, by source and outcome."
    );
    metrics::describe_histogram!(
        "weather_question_duration_seconds",
        "Time of one question to a weather source."
    );
    metrics::describe_counter!(
        "weather_answers_total",
        "Answers used, by source and by where they came from: kept, fetched, unchanged, stale."
    );
    metrics::describe_gauge!(
        "weather_budget_left_day",
        "Weighted calls a source may still be asked today."
    );
    metrics::describe_counter!("store_failures_total", "Failures of the store, by what it was doing.");
    metrics::describe_histogram!("prediction_duration_seconds", "Time of computing one prediction.");
}
