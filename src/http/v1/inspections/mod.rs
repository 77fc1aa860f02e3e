//! `POST /v1/weather/inspections`: a CSV file in; how it is read, what is in it, and the layout to send back out.

mod answer;
mod form;

pub use answer::{
    AnswerCandidate, ColumnConfidence, ColumnRole, FileForm, InspectedColumn, InspectedReadings, InspectedRow,
    InspectedTime, WeatherInspection, WeatherQuestion,
};
pub use form::{CsvBody, InspectionForm};

use axum::Json;
use axum::extract::{Request, State};
use bytes::Bytes;

use crate::http::app::App;
use crate::http::error::{FaultItem, Problem, ProblemCode};
use crate::http::extract::{content_type, read_body};
use crate::http::schema::Schemas;
use crate::http::v1::predictions::problem_of;
use crate::service::records::WeatherFault;
use crate::service::{Told, WeatherTrouble, inspect, trouble};

/// Look at a weather file before it is used
///
/// Answers how the file is read: encoding, delimiter, columns with their variable and unit, time and zone, the first
/// readings, odd values by row, and the `layout` to send with a prediction, as it is or edited. What cannot be told from the
/// file is in `questions`, with the answers that fit and the line that gives each. Send the CSV as the body, gzipped or not,
/// or as the part `weather` of a form, beside it `hints` or a `layout` if there is something to say.
#[utoipa::path(
    post, path = "/v1/weather/inspections", tag = "weather",
    request_body(
        description = "The CSV file itself, or a form with it.",
        content((InspectionForm = "multipart/form-data"), (CsvBody = "text/csv"), (CsvBody = "application/gzip")),
    ),
    responses((status = 200, description = "What was found, faults and questions included.", body = WeatherInspection)),
)]
pub async fn create_weather_inspection(
    State(app): State<App>,
    request: Request,
) -> Result<Json<WeatherInspection>, Problem> {
    let (request, _room) = app.body_room().meter(request);
    let (file, parts) = read(&app, request).await?;
    let reader = app.clone();
    let looking = app.reading().run(move |_| {
        Ok(parts
            .told(reader.schemas())
            .and_then(|told| look(&file, &told, &reader)))
    });
    looking.await.map_err(|error| problem_of(error, true))?.map(Json)
}

/// The file and what is said about it.
async fn read(app: &App, request: Request) -> Result<(Bytes, form::Said), Problem> {
    let kind = content_type(request.headers())?;
    let limit = app.config().limits.body_bytes;
    match (kind.type_().as_str(), kind.subtype().as_str()) {
        ("multipart", "form-data") => form::read(request, limit).await,
        ("text", "csv" | "plain" | "tab-separated-values")
        | ("application", "csv" | "gzip" | "x-gzip" | "octet-stream" | "vnd.ms-excel") => {
            let (parts, body) = request.into_parts();
            Ok((read_body(&parts.headers, body, limit).await?, form::Said::default()))
        }
        _ => {
            let detail = format!(
                "found {kind}; send the CSV with Content-Type text/csv (or application/gzip), or as the part `weather` of \
                 multipart/form-data (curl: -F weather=@file.csv)"
            );
            Err(Problem::new(ProblemCode::UnsupportedMediaType, detail))
        }
    }
}

/// What is said about a file in the words of the command line.
///
/// # Errors
/// 400 if it is no JSON; 422 for faults against the schema.
pub fn told(schemas: &Schemas, hints: Option<&str>) -> Result<Told, Problem> {
    form::Said::hints(hints).told(schemas)
}

fn look(file: &[u8], told: &Told, app: &App) -> Result<WeatherInspection, Problem> {
    answer_of(file, told, &app.config().limits)
}

/// Looks at a file; for the command line too.
///
/// # Errors
/// 400 where it is no CSV, 413 where it is too large, 422 for wrong hints or a wrong layout.
pub fn answer_of(file: &[u8], told: &Told, limits: &crate::config::Limits) -> Result<WeatherInspection, Problem> {
    inspect(file, told, limits)
        .map(WeatherInspection::from)
        .map_err(|faults| refused(&faults))
}

fn refused(faults: &[WeatherFault]) -> Problem {
    let any = |kind: WeatherTrouble| faults.iter().any(|fault| trouble(fault) == kind);
    let code = match (any(WeatherTrouble::TooLarge), any(WeatherTrouble::Unreadable)) {
        (true, _) => ProblemCode::BodyTooLarge,
        (_, true) => ProblemCode::UnreadableWeather,
        _ => ProblemCode::InvalidWeather,
    };
    Problem::with_faults(code, faults.iter().map(item).collect())
}

/// A fault of the file by row and column, of hints or layout by its pointer in their part.
fn item(fault: &WeatherFault) -> FaultItem {
    let told = fault
        .column
        .as_deref()
        .filter(|column| column.starts_with("layout/") || column.starts_with("hints/"));
    match told {
        Some(path) => FaultItem::at(format!("/{path}"), fault.code, fault.detail.clone()),
        None => {
            let row = fault.row.map(|row| row as u64);
            FaultItem::in_file(row, fault.column.clone(), fault.code, fault.detail.clone())
        }
    }
}
