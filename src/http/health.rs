//! Is the process alive, is it ready, what did it count.

use axum::Json;
use axum::extract::State;
use axum::http::header;
use axum::response::{IntoResponse, Response};
use serde::Serialize;
use utoipa::ToSchema;

use super::app::App;
use super::error::{Problem, ProblemCode};

/// Whether the service takes requests.
#[derive(Debug, Serialize, ToSchema)]
pub struct Health {
    /// `ok` or `ready`.
    #[schema(examples("ok"))]
    pub status: &'static str,
    /// Version of the service.
    pub version: &'static str,
}

impl Health {
    /// This program's, in a word.
    pub fn of(status: &'static str) -> Self {
        Self {
            status,
            version: env!("CARGO_PKG_VERSION"),
        }
    }
}

/// Is the process alive
#[utoipa::path(get, path = "/livez", tag = "service", security(()),
    responses((status = 200, description = "It is.", body = Health)))]
pub async fn get_liveness() -> Json<Health> {
    Json(Health::of("ok"))
}

/// Does it take requests
///
/// 503 from the stop signal on, while running requests finish.
#[utoipa::path(get, path = "/readyz", tag = "service", security(()),
    responses((status = 200, description = "It does.", body = Health)))]
pub async fn get_readiness(State(app): State<App>) -> Result<Json<Health>, Problem> {
    if app.is_ready() {
        Ok(Json(Health::of("ready")))
    } else {
        Err(Problem::new(ProblemCode::NotReady, "the service is shutting down").retry_after(10))
    }
}

/// Counters and durations
///
/// Prometheus text format. Needs a key where keys are configured.
#[utoipa::path(get, path = "/metrics", tag = "service",
    responses((status = 200, description = "All metrics.", body = String, content_type = "text/plain")))]
pub async fn get_metrics(State(app): State<App>) -> Response {
    let text = app.metrics().render();
    (
        [(header::CONTENT_TYPE, "text/plain; version=0.0.4; charset=utf-8")],
        text,
    )
        .into_response()
}
