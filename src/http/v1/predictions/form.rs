//! `multipart/form-data` with the parts `request` and `weather`, in any order.

use axum::extract::multipart::{Field, MultipartError};
use axum::extract::{FromRequest, Multipart, Request};
use axum::http::StatusCode;
use bytes::Bytes;
use utoipa::ToSchema;

use super::PredictionRequest;
use crate::http::body_room::{NoRoom, is_caused_by};
use crate::http::error::{FaultItem, Problem, ProblemCode};
use crate::http::extract::{check_stated_length, no_room, too_large};

/// The request and the file beside it.
#[derive(serde::Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "only its schema is used: the form is read part by part")]
pub struct PredictionForm {
    /// The request, with `weather.kind` `upload`.
    request: PredictionRequest,
    /// CSV, gzipped or not; needed with `weather.kind` `upload`.
    #[schema(required = false, value_type = String, format = Binary, content_media_type = "text/csv")]
    weather: Option<Vec<u8>>,
}

/// The text of `request` and, if there is one, the file of `weather`. The limit on what is read is the router's.
pub(super) async fn read(request: Request, limit: usize) -> Result<(Bytes, Option<Bytes>), Problem> {
    check_stated_length(request.headers(), limit)?;
    let unreadable = |_| Problem::new(ProblemCode::InvalidMultipart, "the Content-Type names no boundary");
    let mut form = Multipart::from_request(request, &()).await.map_err(unreadable)?;
    let mut parts = Parts::default();
    while let Some(field) = form.next_field().await.map_err(|error| broken(&error, limit))? {
        parts.take(field, limit).await?;
    }
    parts.finish()
}

#[derive(Default)]
struct Parts {
    request: Option<Bytes>,
    weather: Option<Bytes>,
    faults: Vec<FaultItem>,
}

impl Parts {
    async fn take(&mut self, field: Field<'_>, limit: usize) -> Result<(), Problem> {
        let name = field.name().unwrap_or_default().to_owned();
        let content = field.bytes().await.map_err(|error| broken(&error, limit))?;
        let place = match name.as_str() {
            "request" => &mut self.request,
            "weather" => &mut self.weather,
            _ => {
                self.fault(
                    &name,
                    "unknown_part",
                    format!("there is no part {name:?}; the parts are request and weather"),
                );
                return Ok(());
            }
        };
        if place.replace(content).is_some() {
            self.fault(
                &name,
                "repeated_part",
                format!("the part {name} is there twice; send it once"),
            );
        }
        Ok(())
    }

    fn fault(&mut self, part: &str, code: &str, detail: String) {
        self.faults.push(FaultItem::in_query(part, code, detail));
    }

    fn finish(mut self) -> Result<(Bytes, Option<Bytes>), Problem> {
        if self.request.is_none() {
            self.fault(
                "request",
                "missing_part",
                "the part request is missing; it holds the JSON of the request".to_owned(),
            );
        }
        match (self.request, self.faults.is_empty()) {
            (Some(request), true) => Ok((request, self.weather)),
            _ => Err(Problem::with_faults(ProblemCode::InvalidMultipart, self.faults)),
        }
    }
}

/// A form that cannot be read.
pub fn broken(error: &MultipartError, limit: usize) -> Problem {
    if error.status() == StatusCode::PAYLOAD_TOO_LARGE {
        return too_large(limit);
    }
    if is_caused_by::<NoRoom>(error) {
        return no_room();
    }
    Problem::new(
        ProblemCode::InvalidMultipart,
        format!("the form cannot be read: {}", error.body_text()),
    )
}
