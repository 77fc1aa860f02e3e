//! `multipart/form-data` with the file in the part `weather`, whatever its content type, and `hints` or `layout` beside it.

use axum::extract::multipart::Field;
use axum::extract::{FromRequest, Multipart, Request};
use bytes::Bytes;
use utoipa::ToSchema;

use crate::http::error::{FaultItem, Problem, ProblemCode};
use crate::http::extract::{check_stated_length, parse_json};
use crate::http::schema::Schemas;
use crate::http::v1::hints::CsvHints;
use crate::http::v1::layout::CsvLayout;
use crate::http::v1::predictions::broken_form;
use crate::service::Told;

/// A CSV file with what is said about it beforehand.
#[derive(serde::Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "only its schema is used: the form is read part by part")]
pub struct InspectionForm {
    /// CSV, gzipped or not.
    #[schema(value_type = String, format = Binary, content_media_type = "text/csv")]
    weather: Vec<u8>,
    /// Answers to questions of an earlier inspection.
    #[schema(required = false)]
    hints: Option<CsvHints>,
    /// The whole layout, instead of hints: shows what a prediction would read by it.
    #[schema(required = false)]
    layout: Option<CsvLayout>,
}

/// A CSV file, gzipped or not.
#[derive(ToSchema)]
#[schema(value_type = String, format = Binary)]
#[expect(dead_code, reason = "only its schema is used: the body is read as bytes")]
pub struct CsvBody(Vec<u8>);

/// What is said about the file, as sent.
#[derive(Debug, Default)]
pub(super) struct Said {
    hints: Option<Bytes>,
    layout: Option<Bytes>,
}

impl Said {
    /// Hints alone.
    pub(super) fn hints(text: Option<&str>) -> Self {
        Self {
            hints: text.map(|text| Bytes::copy_from_slice(text.as_bytes())),
            layout: None,
        }
    }

    /// The hints or the layout.
    ///
    /// # Errors
    /// 400 if one is no JSON; 422 for faults against the schema, or when both are there.
    pub(super) fn told(self, schemas: &Schemas) -> Result<Told, Problem> {
        match (self.hints, self.layout) {
            (Some(_), Some(_)) => {
                let detail = "hints and layout are both there; a layout says everything, so send one of them";
                let fault = FaultItem::in_query("hints", "one_of_two", detail);
                Err(Problem::with_faults(ProblemCode::InvalidRequest, vec![fault]))
            }
            (None, Some(layout)) => {
                let layout: CsvLayout = parse_json(schemas, "CsvLayout", &layout)?;
                Ok(Told::Layout(Box::new(layout.into())))
            }
            (Some(hints), None) => {
                let hints: CsvHints = parse_json(schemas, "CsvHints", &hints)?;
                Ok(Told::Hints(Box::new(hints.into())))
            }
            (None, None) => Ok(Told::Hints(Box::default())),
        }
    }
}

/// The file and what is said about it. The limit on what is read is the router's.
pub(super) async fn read(request: Request, limit: usize) -> Result<(Bytes, Said), Problem> {
    check_stated_length(request.headers(), limit)?;
    let unreadable = |_| Problem::new(ProblemCode::InvalidMultipart, "the Content-Type names no boundary");
    let mut form = Multipart::from_request(request, &()).await.map_err(unreadable)?;
    let (mut weather, mut said, mut faults) = (None, Said::default(), Vec::new());
    while let Some(field) = form.next_field().await.map_err(|error| broken_form(&error, limit))? {
        take(field, limit, &mut weather, &mut said, &mut faults).await?;
    }
    if weather.is_none() {
        faults.push(FaultItem::in_query(
            "weather",
            "missing_part",
            "the part weather is missing; it holds the CSV file",
        ));
    }
    match weather {
        Some(weather) if faults.is_empty() => Ok((weather, said)),
        _ => Err(Problem::with_faults(ProblemCode::InvalidMultipart, faults)),
    }
}

async fn take(
    field: Field<'_>,
    limit: usize,
    weather: &mut Option<Bytes>,
    said: &mut Said,
    faults: &mut Vec<FaultItem>,
) -> Result<(), Problem> {
    let name = field.name().unwrap_or_default().to_owned();
    let content = field.bytes().await.map_err(|error| broken_form(&error, limit))?;
    let place = match name.as_str() {
        "weather" => weather,
        "hints" => &mut said.hints,
        "layout" => &mut said.layout,
        _ => {
            let detail = format!("there is no part {name:?}; the parts are weather, and hints or layout");
            faults.push(FaultItem::in_query(name, "unknown_part", detail));
            return Ok(());
        }
    };
    if place.replace(content).is_some() {
        let detail = format!("the part {name} is there twice; send it once");
        faults.push(FaultItem::in_query(name, "repeated_part", detail));
    }
    Ok(())
}
