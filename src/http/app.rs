//! What the handlers share.

use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};

use axum::body::Bytes;
use metrics_exporter_prometheus::PrometheusHandle;

use super::body_room::BodyRoom;
use super::middleware::rate_limit::RateLimit;
use super::schema::Schemas;
use crate::config::Config;
use crate::service::{Clock, Places, Predictions, Weather};

/// Shared by all requests; cheap to clone.
#[derive(Clone)]
pub struct App(Arc<Inner>);

struct Inner {
    config: Config,
    ready: AtomicBool,
    metrics: PrometheusHandle,
    rate_limit: Option<RateLimit>,
    document: Bytes,
    document_3_0: Bytes,
    schemas: Schemas,
    predictions: Predictions,
    weather: Weather,
    reading: Places,
    body_room: BodyRoom,
}

impl App {
    /// Builds it from the settings and the API description.
    pub fn new(config: Config, document: &utoipa::openapi::OpenApi) -> Self {
        let value = serde_json::to_value(document).expect("the API description is plain data");
        Self(Arc::new(Inner {
            reading: Places::new(config.runs.parallel, config.server.max_connections),
            body_room: BodyRoom::new(config.limits.bodies_bytes),
            predictions: Predictions::new(&config.runs, &config.limits),
            weather: Weather::new(&config, Clock::system()),
            rate_limit: RateLimit::new(config.access.requests_per_minute),
            config,
            ready: AtomicBool::new(true),
            metrics: crate::telemetry::metrics(),
            document: super::openapi::text(document).into(),
            document_3_0: super::openapi::twin_text(document)
                .expect("a test rewrites the description")
                .into(),
            schemas: Schemas::of(&value),
        }))
    }

    /// The settings.
    pub fn config(&self) -> &Config {
        &self.0.config
    }

    /// False from the stop signal on.
    pub fn is_ready(&self) -> bool {
        self.0.ready.load(Ordering::Relaxed)
    }

    /// Tells `/readyz` that no new requests should come.
    pub fn stop(&self) {
        self.0.ready.store(false, Ordering::Relaxed);
    }

    /// The process's metrics.
    pub fn metrics(&self) -> &PrometheusHandle {
        &self.0.metrics
    }

    /// The limit on requests, if one is set.
    pub fn rate_limit(&self) -> Option<&RateLimit> {
        self.0.rate_limit.as_ref()
    }

    /// The API description as served.
    pub fn document(&self) -> Bytes {
        self.0.document.clone()
    }

    /// Its twin in OpenAPI 3.0.3.
    pub fn document_3_0(&self) -> Bytes {
        self.0.document_3_0.clone()
    }

    /// The use case behind `/v1/predictions`.
    pub fn predictions(&self) -> &Predictions {
        &self.0.predictions
    }

    /// Fetches weather by coordinates.
    pub fn weather(&self) -> &Weather {
        &self.0.weather
    }

    /// Places for reading requests: large ones take a core for a while.
    pub fn reading(&self) -> &Places {
        &self.0.reading
    }

    /// Room in memory for request bodies.
    pub fn body_room(&self) -> &BodyRoom {
        &self.0.body_room
    }

    /// The schemas requests are checked against.
    pub fn schemas(&self) -> &Schemas {
        &self.0.schemas
    }
}
