//! `GET /v1/weather-sources`: whom weather by coordinates can be asked of, and what state they are in.

use axum::Json;
use axum::extract::{RawQuery, State};
use axum::http::HeaderMap;
use serde::Serialize;
use utoipa::ToSchema;

use super::predictions::instant;
use super::weather_endpoint::Climate;
use crate::http::app::App;
use crate::http::error::Problem;
use crate::http::negotiate::{self, JsonFormatQuery};
use crate::service::records::BudgetLeft;
use crate::service::{SourceReport, SourceState};

/// All sources of weather by coordinates.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherSourceList {
    /// One item a source, the built-in one first.
    pub items: Vec<WeatherSourceItem>,
}

impl WeatherSourceList {
    /// The built-in source alone: the same in every service.
    pub fn built_in() -> Self {
        Self {
            items: vec![(&SourceReport::built_in()).into()],
        }
    }
}

/// A source of weather by coordinates.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherSourceItem {
    /// Name to send as `weather.source`.
    #[schema(examples("fixture"))]
    pub name: &'static str,
    /// Name for people.
    pub title: &'static str,
    /// Whether it can be asked.
    pub state: WeatherSourceState,
    /// Why it cannot be asked, if it cannot.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub state_detail: Option<String>,
    /// Which places and hours it knows.
    pub coverage: &'static str,
    /// Does it know hours that are over.
    pub knows_past: bool,
    /// Does it know hours to come.
    pub knows_future: bool,
    /// What it tells of each hour.
    pub variables: Vec<&'static str>,
    /// Climates to choose from, for the built-in source.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(required = false)]
    pub climates: Vec<Climate>,
    /// Credit line; show it wherever the figures are shown.
    pub credit: &'static str,
    /// Where the credit leads.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub credit_url: Option<&'static str>,
    /// Terms of the data.
    pub licence: &'static str,
    /// When it last answered this service.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub last_success: Option<String>,
    /// When it last failed, since this service was started.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub last_failure: Option<String>,
    /// What this service may still ask of it.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub budget_left: Option<WeatherBudgetLeft>,
}

/// Whether a source can be asked.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum WeatherSourceState {
    /// It can.
    Ready,
    /// Something is missing in the settings of this service.
    NotConfigured,
    /// It failed, or asked to be left in peace, and rests.
    Resting,
}

/// Weighted calls that are left; a year of history may count for many.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherBudgetLeft {
    /// Within a minute from the calls before.
    pub minute: f64,
    /// Within an hour.
    pub hour: f64,
    /// Within a day.
    pub day: f64,
}

/// The sources of weather by coordinates
///
/// Each with its coverage, terms, credit line, present state and what is left of its budget.
#[utoipa::path(get, path = "/v1/weather-sources", tag = "tables", params(JsonFormatQuery),
    responses((status = 200, description = "All sources.", body = WeatherSourceList)))]
pub async fn list_weather_sources(
    State(app): State<App>,
    headers: HeaderMap,
    RawQuery(query): RawQuery,
) -> Result<Json<WeatherSourceList>, Problem> {
    negotiate::json_only(&headers, query.as_deref())?;
    let reports = app.weather().sources().await;
    Ok(Json(WeatherSourceList {
        items: reports.iter().map(Into::into).collect(),
    }))
}

impl From<&SourceReport> for WeatherSourceItem {
    fn from(report: &SourceReport) -> Self {
        let (facts, past) = (report.facts, &report.past);
        let (state, state_detail) = told(&report.state);
        Self {
            name: facts.name,
            title: facts.title,
            state,
            state_detail,
            coverage: facts.coverage,
            knows_past: facts.knows_past,
            knows_future: facts.knows_future,
            variables: facts.variables.to_vec(),
            climates: if report.budget_left.is_none() && state == WeatherSourceState::Ready {
                Climate::ALL.to_vec()
            } else {
                Vec::new()
            },
            credit: facts.credit,
            credit_url: facts.credit_url,
            licence: facts.licence,
            last_success: past.last_success_unix_s.map(instant),
            last_failure: past.last_failure.as_ref().map(|(unix_s, _)| instant(*unix_s)),
            budget_left: report.budget_left.map(Into::into),
        }
    }
}

fn told(state: &SourceState) -> (WeatherSourceState, Option<String>) {
    match state {
        SourceState::Ready => (WeatherSourceState::Ready, None),
        SourceState::NotConfigured(reason) => (WeatherSourceState::NotConfigured, Some((*reason).to_owned())),
        SourceState::Resting(wait) => {
            let detail = format!("it failed or refused; it is asked again in {} s", wait.as_secs().max(1));
            (WeatherSourceState::Resting, Some(detail))
        }
    }
}

impl From<BudgetLeft> for WeatherBudgetLeft {
    fn from(record: BudgetLeft) -> Self {
        Self {
            minute: record.minute,
            hour: record.hour,
            day: record.day,
        }
    }
}
