//! The one way a request fails: an RFC 9457 problem document.
//!
//! Handlers return a [`Problem`]; it travels as a response extension until [`finish`], the outermost layer, writes it
//! with the request's id. Answers of the framework itself that are errors without a problem get one there too.

use std::fmt;

use axum::body::Body;
use axum::http::{HeaderValue, StatusCode, header};
use axum::response::{IntoResponse, Response};
use serde::Serialize;
use utoipa::ToSchema;

pub use super::problems::ProblemCode;

/// Media type of problem documents.
pub const PROBLEM_JSON: &str = "application/problem+json";

/// At most this many faults are listed; the detail says how many there are.
pub const MAX_LISTED_FAULTS: usize = 100;

/// A failed request.
#[derive(Debug, Clone)]
pub struct Problem {
    /// What went wrong.
    pub code: ProblemCode,
    /// This occurrence, in a sentence or two.
    pub detail: String,
    /// Every fault found.
    pub errors: Vec<FaultItem>,
    /// Media types that exist, for `not_acceptable`.
    pub available: Vec<&'static str>,
    /// When to try again [s].
    pub retry_after_s: Option<u64>,
}

/// A problem document (RFC 9457).
#[derive(Debug, Serialize, ToSchema)]
pub struct ProblemDocument {
    /// Reference of the problem type; a page that explains it is behind it.
    #[serde(rename = "type")]
    #[schema(format = "uri-reference", examples("/problems/invalid_request"))]
    pub problem_type: String,
    /// The type in one line.
    #[schema(examples("The request is readable but wrong"))]
    pub title: &'static str,
    /// HTTP status.
    #[schema(minimum = 400, maximum = 599, examples(422))]
    pub status: u16,
    /// This occurrence: expected, found and remedy.
    pub detail: String,
    /// The request's id, as in `X-Request-Id` and the service's log.
    pub instance: String,
    /// All faults at once, at most 100; absent if there is nothing to point at.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(required = false)]
    pub errors: Vec<FaultItem>,
    /// The formats that exist, in a 406 only.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(required = false)]
    pub available: Vec<&'static str>,
}

/// One fault: by `pointer` in JSON, by `parameter` in the query, by `row` and `column` in CSV.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FaultItem {
    /// JSON pointer (RFC 6901) into the request.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(required = false, nullable = false, examples("/device/tube/bore_mm"))]
    pub pointer: Option<String>,
    /// Query parameter.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(required = false, nullable = false)]
    pub parameter: Option<String>,
    /// Row of the file, counted from 1.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(required = false, nullable = false, minimum = 1)]
    pub row: Option<u64>,
    /// Column of the file, by its header.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(required = false, nullable = false)]
    pub column: Option<String>,
    /// Expected, found and remedy.
    pub detail: String,
    /// Stable code for programs.
    #[schema(examples("unknown_field"))]
    pub code: String,
}

impl FaultItem {
    /// A fault at a JSON pointer.
    pub fn at(pointer: impl Into<String>, code: impl Into<String>, detail: impl Into<String>) -> Self {
        Self {
            pointer: Some(pointer.into()),
            parameter: None,
            row: None,
            column: None,
            detail: detail.into(),
            code: code.into(),
        }
    }

    /// A fault of a query parameter.
    pub fn in_query(parameter: impl Into<String>, code: impl Into<String>, detail: impl Into<String>) -> Self {
        Self {
            parameter: Some(parameter.into()),
            pointer: None,
            ..Self::at("", code, detail)
        }
    }

    /// A fault in a file.
    pub fn in_file(
        row: Option<u64>,
        column: Option<String>,
        code: impl Into<String>,
        detail: impl Into<String>,
    ) -> Self {
        Self {
            row,
            column,
            pointer: None,
            ..Self::at("", code, detail)
        }
    }
}

impl Problem {
    /// A problem with its detail.
    pub fn new(code: ProblemCode, detail: impl Into<String>) -> Self {
        Self {
            code,
            detail: detail.into(),
            errors: Vec::new(),
            available: Vec::new(),
            retry_after_s: None,
        }
    }

    /// A problem with all its faults; the detail counts them.
    pub fn with_faults(code: ProblemCode, mut errors: Vec<FaultItem>) -> Self {
        let detail = match errors.as_slice() {
            [only] => only.detail.clone(),
            many if many.len() > MAX_LISTED_FAULTS => {
                format!(
                    "{} faults; the first {MAX_LISTED_FAULTS} are listed in errors",
                    many.len()
                )
            }
            many => format!("{} faults, listed in errors", many.len()),
        };
        errors.truncate(MAX_LISTED_FAULTS);
        Self {
            errors,
            ..Self::new(code, detail)
        }
    }

    /// Says when to try again [s].
    pub fn retry_after(mut self, seconds: u64) -> Self {
        self.retry_after_s = Some(seconds);
        self
    }

    fn document(&self, request_id: &str) -> ProblemDocument {
        let kind = self.code.kind();
        ProblemDocument {
            problem_type: format!("/problems/{}", kind.code),
            title: kind.title,
            status: kind.status.as_u16(),
            detail: self.detail.clone(),
            instance: request_id.to_owned(),
            errors: self.errors.clone(),
            available: self.available.clone(),
        }
    }
}

impl fmt::Display for Problem {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(
            out,
            "{} ({}): {}",
            self.code.kind().title,
            self.code.kind().code,
            self.detail
        )?;
        for fault in &self.errors {
            write!(out, "\n  {fault}")?;
        }
        Ok(())
    }
}

impl fmt::Display for FaultItem {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        if let Some(place) = self
            .pointer
            .as_ref()
            .or(self.parameter.as_ref())
            .filter(|place| !place.is_empty())
        {
            write!(out, "{place}: ")?;
        }
        if let Some(row) = self.row {
            write!(out, "row {row}: ")?;
        }
        if let Some(column) = &self.column {
            write!(out, "{column}: ")?;
        }
        write!(out, "{} ({})", self.detail, self.code)
    }
}

impl IntoResponse for Problem {
    fn into_response(self) -> Response {
        let mut response = self.code.kind().status.into_response();
        if let Some(seconds) = self.retry_after_s {
            response
                .headers_mut()
                .insert(header::RETRY_AFTER, HeaderValue::from(seconds));
        }
        if self.code == ProblemCode::Unauthorized {
            response.headers_mut().insert(
                header::WWW_AUTHENTICATE,
                HeaderValue::from_static("Bearer realm=\"dipcast\""),
            );
        }
        response.extensions_mut().insert(Pending(self));
        response
    }
}

/// A problem on its way to [`finish`].
#[derive(Debug, Clone)]
struct Pending(Problem);

/// Writes the problem document of a failed response, with the request's id; leaves other responses alone.
pub fn finish(mut response: Response, request_id: &str) -> Response {
    let status = response.status();
    if !status.is_client_error() && !status.is_server_error() {
        return response;
    }
    let problem = match response.extensions_mut().remove::<Pending>() {
        Some(Pending(problem)) => problem,
        None => from_status(status),
    };
    let (mut parts, _) = response.into_parts();
    let body =
        serde_json::to_vec(&problem.document(request_id)).expect("a problem document has only texts and numbers");
    parts.status = problem.code.kind().status;
    for stale in [
        header::CONTENT_LENGTH,
        header::CONTENT_ENCODING,
        header::TRANSFER_ENCODING,
    ] {
        parts.headers.remove(stale);
    }
    parts
        .headers
        .insert(header::CONTENT_TYPE, HeaderValue::from_static(PROBLEM_JSON));
    parts
        .headers
        .insert(header::CACHE_CONTROL, HeaderValue::from_static("no-store"));
    Response::from_parts(parts, Body::from(body))
}

/// The framework's own errors, told in our words: its texts are not part of the contract.
fn from_status(status: StatusCode) -> Problem {
    let (code, detail) = match status {
        StatusCode::NOT_FOUND => (ProblemCode::NotFound, "no resource has this path; see /docs"),
        StatusCode::METHOD_NOT_ALLOWED => (
            ProblemCode::MethodNotAllowed,
            "this path takes only the methods in the Allow header",
        ),
        StatusCode::NOT_ACCEPTABLE => (
            ProblemCode::NotAcceptable,
            "this resource does not have the format asked for",
        ),
        StatusCode::PAYLOAD_TOO_LARGE => (
            ProblemCode::BodyTooLarge,
            "the body is larger than this service accepts",
        ),
        StatusCode::UNSUPPORTED_MEDIA_TYPE => (
            ProblemCode::UnsupportedMediaType,
            "this resource does not read this Content-Type",
        ),
        status if status.is_client_error() => (ProblemCode::BadRequest, "the request is malformed"),
        _ => (ProblemCode::InternalError, INTERNAL_DETAIL),
    };
    Problem::new(code, detail)
}

/// All that a caller is told of our own faults.
pub const INTERNAL_DETAIL: &str = "something broke inside the service; the log has it under this request's id";

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_foreign_error_body_is_never_passed_on() {
        let foreign = (StatusCode::INTERNAL_SERVER_ERROR, "thread panicked at src/secret.rs").into_response();
        let finished = finish(foreign, "id-1");
        assert_eq!(finished.headers()[header::CONTENT_TYPE], PROBLEM_JSON);
        let body = futures::executor::block_on(axum::body::to_bytes(finished.into_body(), 10_000)).unwrap();
        let text = String::from_utf8(body.to_vec()).unwrap();
        assert!(
            text.contains("\"instance\":\"id-1\"") && !text.contains("secret"),
            "{text}"
        );
    }

    #[test]
    fn more_faults_than_are_listed_are_counted() {
        let faults = vec![FaultItem::at("/a", "wrong_type", "x"); 250];
        let problem = Problem::with_faults(ProblemCode::InvalidRequest, faults);
        assert_eq!(problem.errors.len(), MAX_LISTED_FAULTS);
        assert!(problem.detail.starts_with("250 faults"));
    }
}
