//! Request id, log line, counters; and the writing of problem documents, which carry the id.

use std::time::Instant;

use axum::extract::{MatchedPath, Request};
use axum::http::{HeaderMap, HeaderValue, Method};
use axum::middleware::Next;
use axum::response::Response;
use tracing::Instrument;

use crate::http::error;

/// Name of the header that carries the request id both ways.
pub const REQUEST_ID: &str = "x-request-id";

/// Gives the request an id, logs and counts it, and finishes failed answers.
pub async fn observe(request: Request, next: Next) -> Response {
    let id = request_id(request.headers());
    let trace_id = trace_id(request.headers()).unwrap_or_default().to_owned();
    let span = tracing::info_span!("request", request_id = %id, %trace_id);
    let record = Record::of(&request);
    let answered = next.run(request).instrument(span.clone()).await;
    let mut response = error::finish(answered, &id);
    if let Ok(value) = HeaderValue::from_str(&id) {
        response.headers_mut().insert(REQUEST_ID, value);
    }
    response
        .headers_mut()
        .insert("x-content-type-options", HeaderValue::from_static("nosniff"));
    span.in_scope(|| record.answered(&response));
    response
}

/// The caller's own id if it is short and plain, else a new one.
fn request_id(headers: &HeaderMap) -> String {
    let given = headers.get(REQUEST_ID).and_then(|value| value.to_str().ok());
    let plain = |id: &&str| {
        let allowed = |byte: u8| byte.is_ascii_alphanumeric() || b"-_.".contains(&byte);
        (1..=64).contains(&id.len()) && id.bytes().all(allowed)
    };
    given
        .filter(plain)
        .map_or_else(|| uuid::Uuid::now_v7().to_string(), str::to_owned)
}

/// The trace id of a W3C `traceparent` header.
fn trace_id(headers: &HeaderMap) -> Option<&str> {
    let text = headers.get("traceparent")?.to_str().ok()?;
    let parts: Vec<&str> = text.split('-').collect();
    let hex = |part: &str, length: usize| part.len() == length && part.bytes().all(|byte| byte.is_ascii_hexdigit());
    let [version, trace, parent, flags, ..] = parts.as_slice() else {
        return None;
    };
    let fits = hex(version, 2) && hex(trace, 32) && hex(parent, 16) && hex(flags, 2);
    (fits && trace.bytes().any(|byte| byte != b'0')).then_some(trace)
}

/// What is noted of a request; if it is dropped without an answer, the client went away.
struct Record {
    method: Method,
    route: String,
    started: Instant,
    answered: bool,
}

impl Record {
    fn of(request: &Request) -> Self {
        let matched = request.extensions().get::<MatchedPath>();
        let route = matched.map_or("unmatched", MatchedPath::as_str).to_owned();
        Self {
            method: known(request.method()),
            route,
            started: Instant::now(),
            answered: false,
        }
    }

    fn answered(mut self, response: &Response) {
        self.answered = true;
        let (status, duration) = (response.status().as_u16(), self.started.elapsed());
        let labels = [
            ("method", self.method.to_string()),
            ("route", self.route.clone()),
            ("status", status.to_string()),
        ];
        metrics::counter!("http_requests_total", &labels).increment(1);
        metrics::histogram!("http_request_duration_seconds", &labels[..2]).record(duration.as_secs_f64());
        tracing::info!(method = %self.method, route = self.route, status, duration_ms = duration.as_millis() as u64, "answered");
    }
}

impl Drop for Record {
    fn drop(&mut self) {
        if !self.answered {
            metrics::counter!("http_requests_abandoned_total", "route" => self.route.clone()).increment(1);
            tracing::info!(method = %self.method, route = self.route, "the client went away");
        }
    }
}

/// Invented methods must not make new time series.
fn known(method: &Method) -> Method {
    let standard = [
        Method::GET,
        Method::HEAD,
        Method::POST,
        Method::PUT,
        Method::PATCH,
        Method::DELETE,
        Method::OPTIONS,
    ];
    if standard.contains(method) {
        method.clone()
    } else {
        Method::from_bytes(b"OTHER").unwrap_or(Method::TRACE)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn headers(name: &'static str, value: &'static str) -> HeaderMap {
        HeaderMap::from_iter([(
            axum::http::HeaderName::from_static(name),
            HeaderValue::from_static(value),
        )])
    }

    #[test]
    fn a_plain_id_is_kept_and_any_other_replaced() {
        assert_eq!(request_id(&headers(REQUEST_ID, "shop-42.a")), "shop-42.a");
        for odd in ["", "a b", "<script>", "a/../b"] {
            assert_eq!(request_id(&headers(REQUEST_ID, odd)).len(), 36, "{odd:?}");
        }
    }

    #[test]
    fn only_a_well_formed_traceparent_counts() {
        // The example of the W3C Trace Context recommendation, section 3.2.3.
        let good = "00-4bf92f3577b34da6a3ce929d0e0e4736-00f067aa0ba902b7-01";
        assert_eq!(
            trace_id(&headers("traceparent", good)),
            Some("4bf92f3577b34da6a3ce929d0e0e4736")
        );
        let zero = "00-00000000000000000000000000000000-00f067aa0ba902b7-01";
        assert_eq!(trace_id(&headers("traceparent", zero)), None);
        assert_eq!(trace_id(&headers("traceparent", "00-xyz")), None);
    }
}
