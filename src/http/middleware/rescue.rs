//! Panics become a 500 that says nothing; requests that take too long become a 503.

use std::any::Any;

use axum::extract::{Request, State};
use axum::middleware::Next;
use axum::response::{IntoResponse, Response};

use crate::http::app::App;
use crate::http::error::{INTERNAL_DETAIL, Problem, ProblemCode};

/// Seconds after which a request that took too long may be tried again.
const RETRY_AFTER_TIMEOUT_S: u64 = 30;

/// Stops a request that does not answer in the configured time; its run is cancelled with it.
pub async fn time_out(State(app): State<App>, request: Request, next: Next) -> Response {
    let limit = app.config().server.request_timeout;
    tokio::time::timeout(limit, next.run(request))
        .await
        .unwrap_or_else(|_| {
            let detail = format!("no answer within {} s; the run was stopped", limit.as_secs());
            Problem::new(ProblemCode::Timeout, detail)
                .retry_after(RETRY_AFTER_TIMEOUT_S)
                .into_response()
        })
}

/// The answer to a request whose handler panicked; the panic itself goes to the log alone.
pub fn from_panic(panic: Box<dyn Any + Send>) -> Response {
    let text = panic.downcast_ref::<String>().map(String::as_str);
    let text = text
        .or_else(|| panic.downcast_ref::<&str>().copied())
        .unwrap_or("not a text");
    tracing::error!(panic = text, "a handler panicked");
    Problem::new(ProblemCode::InternalError, INTERNAL_DETAIL).into_response()
}
