//! Strict reading of requests: size, content type, JSON, schema, types; every fault with its place.

use axum::body::{Body, Bytes};
use axum::http::{HeaderMap, header};
use http_body_util::{BodyExt, LengthLimitError, Limited};
use mime::Mime;
use serde::de::DeserializeOwned;

use super::body_room::{NoRoom, is_caused_by};
use super::error::{FaultItem, Problem, ProblemCode};
use super::schema::Schemas;
use super::strict_json;

/// When a busy service may be asked again [s].
pub const RETRY_AFTER_BUSY_S: u64 = 5;

/// The request's content type.
///
/// # Errors
/// 415 if it is missing or cannot be read, or if the body as a whole is compressed.
pub fn content_type(headers: &HeaderMap) -> Result<Mime, Problem> {
    if headers
        .get(header::CONTENT_ENCODING)
        .is_some_and(|coding| coding != "identity")
    {
        let detail = "the body as a whole may not be compressed; a gzipped CSV goes into the part weather of a form";
        return Err(Problem::new(ProblemCode::UnsupportedMediaType, detail));
    }
    let value = headers.get(header::CONTENT_TYPE).and_then(|value| value.to_str().ok());
    let found = value.and_then(|text| text.parse().ok());
    found.ok_or_else(|| {
        Problem::new(
            ProblemCode::UnsupportedMediaType,
            "the Content-Type header is missing or unreadable",
        )
    })
}

/// Reads a whole body of at most `limit` bytes; a longer stated length is refused before a byte is read.
///
/// # Errors
/// 413 above the limit, 400 when the body breaks off, 503 when there is no room for it.
pub async fn read_body(headers: &HeaderMap, body: Body, limit: usize) -> Result<Bytes, Problem> {
    check_stated_length(headers, limit)?;
    match Limited::new(body, limit).collect().await {
        Ok(collected) => Ok(collected.to_bytes()),
        Err(error) if error.is::<LengthLimitError>() => Err(too_large(limit)),
        Err(error) if is_caused_by::<NoRoom>(error.as_ref()) => Err(no_room()),
        Err(_) => Err(Problem::new(
            ProblemCode::BadRequest,
            "the body broke off before its end",
        )),
    }
}

/// Refuses a body whose stated length is above the limit.
///
/// # Errors
/// 413.
pub fn check_stated_length(headers: &HeaderMap, limit: usize) -> Result<(), Problem> {
    if stated_length(headers).is_some_and(|length| length > limit as u64) {
        Err(too_large(limit))
    } else {
        Ok(())
    }
}

/// The body's length as stated, if it is.
pub fn stated_length(headers: &HeaderMap) -> Option<u64> {
    headers.get(header::CONTENT_LENGTH)?.to_str().ok()?.parse().ok()
}

/// 503 while the memory for bodies is taken.
pub fn no_room() -> Problem {
    let detail = "the memory for request bodies is taken by others; send the same request again";
    Problem::new(ProblemCode::Busy, detail).retry_after(RETRY_AFTER_BUSY_S)
}

/// 413 with the limit named.
pub fn too_large(limit: usize) -> Problem {
    Problem::new(
        ProblemCode::BodyTooLarge,
        format!("the body is larger than the {limit} bytes this service accepts"),
    )
}

/// Reads JSON into `T`, whose schema is published under `schema_name`.
///
/// # Errors
/// 400 if it is not JSON; 422 with every fault against the schema.
pub fn parse_json<T: DeserializeOwned>(schemas: &Schemas, schema_name: &str, text: &[u8]) -> Result<T, Problem> {
    let mut value = strict_json::parse(text)
        .map_err(|error| Problem::new(ProblemCode::InvalidJson, format!("the JSON cannot be read: {error}")))?;
    let faults = schemas.check(schema_name, &mut value);
    if !faults.is_empty() {
        return Err(Problem::with_faults(ProblemCode::InvalidRequest, faults));
    }
    serde_path_to_error::deserialize(value).map_err(|error| {
        let pointer = pointer_of(error.path());
        let fault = FaultItem::at(pointer, "wrong_type", error.into_inner().to_string());
        Problem::with_faults(ProblemCode::InvalidRequest, vec![fault])
    })
}

fn pointer_of(path: &serde_path_to_error::Path) -> String {
    use serde_path_to_error::Segment;
    let steps = path.iter().map(|segment| match segment {
        Segment::Seq { index } => format!("/{index}"),
        Segment::Map { key } => format!("/{}", key.replace('~', "~0").replace('/', "~1")),
        Segment::Enum { .. } | Segment::Unknown => String::new(),
    });
    steps.collect()
}
