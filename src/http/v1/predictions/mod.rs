//! `POST /v1/predictions`: a device and an hourly series in; cycles, stall hours and water out.

mod answer;
mod faults;
mod form;
mod hours;
mod periods;
mod places;
mod request;
mod spells;
mod table;

pub use answer::{DeviceReport, ModelReport, PredictionAnswer, WeatherFlag, WeatherReport};
pub use faults::problem_of;
pub use form::{PredictionForm, broken as broken_form};
pub use hours::{CycleTrace, HourColumns, HourRow, StateFractions, TracePoint};
pub use periods::{Band, HourOfDay, Period, PeriodBands, StallHours, StallHoursBands, Substance, SubstanceBands};
pub use places::{CaseReport, ComparedPlace, PlaceReport};
pub use request::{PredictionRequest, SCHEMA_NAME};
pub use spells::{HealedBy, HourState, StallSpell, StallSpellsSummary, Visit, VisitCause};
pub use table::{csv_lines, json_lines, pieces};

use std::convert::Infallible;

use axum::Json;
use axum::body::Body;
use axum::extract::{Request, State};
use axum::http::header;
use axum::response::{IntoResponse, Response};
use bytes::Bytes;
use futures::stream;

use crate::http::app::App;
use crate::http::error::{Problem, ProblemCode};
use crate::http::extract::{content_type, parse_json, read_body};
use crate::http::negotiate::{self, Format, FormatQuery};
use crate::http::schema::Schemas;
use crate::service::{PredictionOrder, PredictionReport};

/// What a prediction exists as; the first is the default.
const FORMATS: [Format; 3] = [Format::Json, Format::Csv, Format::NdJson];

/// Predict cycles, stall hours and water
///
/// One device over one series of hourly readings, sent in the request, as a CSV file in a form, or fetched by coordinates
/// from one of `/v1/weather-sources`; in one place, or in several that are compared. Answered at once up to 200,000 hours
/// (method `averaged`) or 2,208 hours (`resolved`), and up to 6,400,000 hours times samples with bands, all places
/// together; beyond it 422 `too_many_hours`. `text/csv` and `application/x-ndjson` give the hours alone, of one place
/// after the other.
#[utoipa::path(
    post, path = "/v1/predictions", tag = "predictions", params(FormatQuery),
    request_body(
        description = "The request alone, with inline readings, or a form with a CSV file beside it.",
        content((PredictionRequest = "application/json"), (PredictionForm = "multipart/form-data")),
    ),
    responses((
        status = 200,
        description = "The prediction; as CSV or NDJSON the hours alone, one row or line each with the fields of HourRow.",
        content((PredictionAnswer = "application/json"), (String = "text/csv"), (String = "application/x-ndjson")),
    )),
)]
pub async fn create_prediction(State(app): State<App>, request: Request) -> Result<Response, Problem> {
    let format = negotiate::choose(request.headers(), request.uri().query(), &FORMATS)?;
    let (request, _room) = app.body_room().meter(request);
    let (text, file) = read(&app, request).await?;
    let upload = file.is_some();
    let told = |error| problem_of(error, upload);
    let reader = app.clone();
    let reading = app
        .reading()
        .run(move |_| Ok(order(reader.schemas(), &text, file, format)));
    let order = reading.await.map_err(told)??;
    let order = app.weather().fetched(order).await.map_err(told)?;
    app.predictions()
        .run(order, move |report| respond(report, format, upload))
        .await
        .map_err(told)
}

/// The text of the request and the file beside it, if there is one.
async fn read(app: &App, request: Request) -> Result<(Bytes, Option<Bytes>), Problem> {
    let kind = content_type(request.headers())?;
    let limit = app.config().limits.body_bytes;
    match (kind.type_().as_str(), kind.subtype().as_str()) {
        ("application", "json") => {
            let (parts, body) = request.into_parts();
            Ok((read_body(&parts.headers, body, limit).await?, None))
        }
        ("multipart", "form-data") => form::read(request, limit).await,
        _ => {
            let detail =
                format!("found {kind}; send application/json, or multipart/form-data with `request` and `weather`");
            Err(Problem::new(ProblemCode::UnsupportedMediaType, detail))
        }
    }
}

/// Reads a request, strictly, into an order of the service.
///
/// # Errors
/// 400 if it is not JSON; 422 with every fault.
pub fn order(schemas: &Schemas, text: &[u8], file: Option<Bytes>, format: Format) -> Result<PredictionOrder, Problem> {
    let wanted: PredictionRequest = parse_json(schemas, SCHEMA_NAME, text)?;
    let mut order = wanted.order(file)?;
    order.options.keep_hours |= format != Format::Json;
    Ok(order)
}

fn respond(report: PredictionReport, format: Format, upload: bool) -> Response {
    let content_type = [(header::CONTENT_TYPE, format.media_type())];
    match format {
        Format::Json => Json(PredictionAnswer::of(report, upload)).into_response(),
        Format::Csv => (
            content_type,
            Body::from_stream(stream::iter(pieces(report, csv_lines).map(infallible))),
        )
            .into_response(),
        Format::NdJson => (
            content_type,
            Body::from_stream(stream::iter(pieces(report, json_lines).map(infallible))),
        )
            .into_response(),
    }
}

fn infallible(piece: Vec<u8>) -> Result<Bytes, Infallible> {
    Ok(Bytes::from(piece))
}

/// Six decimals: finer than anything the model knows, and half the bytes.
pub fn rounded(value: f64) -> f64 {
    // The sum turns -0.0 into 0.0.
    (value * 1e6).round() / 1e6 + 0.0
}

/// An instant as RFC 3339 in UTC.
pub fn instant(unix_s: i64) -> String {
    let instant = chrono::DateTime::from_timestamp(unix_s, 0).unwrap_or_default();
    instant.to_rfc3339_opts(chrono::SecondsFormat::Secs, true)
}
