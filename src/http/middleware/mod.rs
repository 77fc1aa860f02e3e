//! What happens around every request, from the outside in: id, log and count; compression; browsers; keys; rate;
//! panics; time.

/// Keys.
pub mod access;
/// Request id, log line, counters, problem documents.
pub mod observe;
/// Requests a minute.
pub mod rate_limit;
/// Panics and time.
pub mod rescue;

use axum::Router;
use axum::extract::DefaultBodyLimit;
use axum::http::{HeaderName, HeaderValue, Method, header};
use axum::middleware::{from_fn, from_fn_with_state};
use tower_http::catch_panic::CatchPanicLayer;
use tower_http::compression::CompressionLayer;
use tower_http::cors::{AllowOrigin, CorsLayer};

use super::app::App;

/// Wraps the routes in everything of this room. The last layer added is the outermost.
pub fn wrap(routes: Router, app: &App) -> Router {
    let wrapped = routes
        .layer(DefaultBodyLimit::max(app.config().limits.body_bytes))
        .layer(from_fn_with_state(app.clone(), rescue::time_out))
        .layer(CatchPanicLayer::custom(rescue::from_panic))
        .layer(from_fn_with_state(app.clone(), rate_limit::limit))
        .layer(from_fn_with_state(app.clone(), access::check_key));
    let origins = &app.config().access.cors_origins;
    let wrapped = if origins.is_empty() {
        wrapped
    } else {
        wrapped.layer(cors(origins))
    };
    wrapped.layer(CompressionLayer::new()).layer(from_fn(observe::observe))
}

fn cors(origins: &[String]) -> CorsLayer {
    let origins: Vec<HeaderValue> = origins.iter().filter_map(|origin| origin.parse().ok()).collect();
    let asked = [header::CONTENT_TYPE, header::ACCEPT, header::AUTHORIZATION];
    let own = ["x-api-key", "x-request-id", "traceparent"].map(HeaderName::from_static);
    let shown = [HeaderName::from_static("x-request-id"), header::RETRY_AFTER];
    CorsLayer::new()
        .allow_origin(AllowOrigin::list(origins))
        .allow_methods([Method::GET, Method::POST])
        .allow_headers(asked.into_iter().chain(own).collect::<Vec<_>>())
        .expose_headers(shown)
        .max_age(std::time::Duration::from_secs(3600))
}
