//! Where fetched weather came from, as answered.

use serde::Serialize;
use utoipa::ToSchema;

use super::predictions::{instant, rounded};
use crate::service::records;

/// Where fetched readings came from: credit, place served, stretches.
#[derive(Debug, Serialize, ToSchema)]
pub struct FetchedWeather {
    /// Name of the source.
    #[schema(examples("fixture"))]
    pub source: &'static str,
    /// Name of the source for people.
    pub title: &'static str,
    /// Credit line; show it wherever the figures are shown.
    pub credit: &'static str,
    /// Where the credit leads.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub credit_url: Option<&'static str>,
    /// Terms of the data.
    pub licence: &'static str,
    /// The place asked for.
    pub asked: WeatherPlace,
    /// The place the readings are of; often a cell of a grid.
    pub served: WeatherPlace,
    /// From the place asked for to the one served [km].
    pub distance_km: f64,
    /// Start of the first hour.
    pub from: String,
    /// End of the last hour, excluded.
    pub to: String,
    /// True if the source did not answer and a kept answer that has expired was taken for part of the hours.
    pub stale: bool,
    /// What the series was put together from, in order of time.
    pub stretches: Vec<WeatherStretch>,
}

/// A place of weather.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherPlace {
    /// Latitude [degree north].
    pub latitude: f64,
    /// Longitude [degree east].
    pub longitude: f64,
    /// Elevation above mean sea level [m], where it is known.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub elevation_m: Option<f64>,
}

/// A stretch of the series that came in one answer of the source.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherStretch {
    /// Start of its first hour.
    pub from: String,
    /// End of its last hour, excluded.
    pub to: String,
    /// What kind of knowledge it is.
    pub nature: WeatherNature,
    /// When it was fetched; absent for what is computed here.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub fetched_at: Option<String>,
    /// True if it has expired and the source did not answer with newer.
    pub stale: bool,
    /// Hours of it that came without temperature or humidity.
    pub hours_missing: usize,
}

/// What kind of knowledge a stretch of weather is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum WeatherNature {
    /// Computed afterwards from observations.
    Reanalysis,
    /// The first hours of forecasts made at the time.
    PastForecast,
    /// The last days, from the model that also forecasts.
    RecentDays,
    /// Not yet happened when it was fetched.
    Forecast,
    /// Made up by a formula.
    Invented,
}

impl From<records::Nature> for WeatherNature {
    fn from(record: records::Nature) -> Self {
        match record {
            records::Nature::Reanalysis => Self::Reanalysis,
            records::Nature::PastForecast => Self::PastForecast,
            records::Nature::RecentDays => Self::RecentDays,
            records::Nature::Forecast => Self::Forecast,
            records::Nature::Invented => Self::Invented,
        }
    }
}

impl From<&records::Provenance> for FetchedWeather {
    fn from(record: &records::Provenance) -> Self {
        let facts = record.facts;
        let place = |at: records::Coordinates, elevation_m| WeatherPlace {
            latitude: at.latitude_deg,
            longitude: at.longitude_deg,
            elevation_m,
        };
        Self {
            source: facts.name,
            title: facts.title,
            credit: facts.credit,
            credit_url: facts.credit_url,
            licence: facts.licence,
            asked: place(record.asked, record.asked_elevation_m),
            served: place(record.served.at, record.served.elevation_m),
            distance_km: rounded(record.distance_km()),
            from: instant(record.span.from_unix_s),
            to: instant(record.span.to_unix_s),
            stale: record.is_stale(),
            stretches: record.stretches.iter().map(Into::into).collect(),
        }
    }
}

impl From<&records::Stretch> for WeatherStretch {
    fn from(record: &records::Stretch) -> Self {
        Self {
            from: instant(record.span.from_unix_s),
            to: instant(record.span.to_unix_s),
            nature: record.nature.into(),
            fetched_at: record.fetched_unix_s.map(instant),
            stale: record.stale,
            hours_missing: record.hours_missing,
        }
    }
}
