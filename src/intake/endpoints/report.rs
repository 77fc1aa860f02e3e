//! What came back from a source, and where each hour of it came from.

use super::coordinates::Coordinates;
use super::facts::Facts;
use super::span::HourSpan;
use crate::model::weather::RawReadings;

/// Readings of a place with all that must be said about them.
#[derive(Debug, Clone)]
pub struct FetchedWeather {
    /// The readings, one an hour, in order.
    pub readings: RawReadings,
    /// Elevation the readings belong to [m], if the source tells it.
    pub elevation_m: Option<f64>,
    /// Longest gap that has to be interpolated for this source [h], where it exceeds the usual.
    pub gap_hours: Option<usize>,
    /// Where they came from.
    pub provenance: Provenance,
}

/// Where readings came from.
#[derive(Debug, Clone, PartialEq)]
pub struct Provenance {
    /// The source.
    pub facts: &'static Facts,
    /// The place asked for.
    pub asked: Coordinates,
    /// The elevation asked for [m], if one was given.
    pub asked_elevation_m: Option<f64>,
    /// The place the source answered for.
    pub served: Served,
    /// The hours asked for.
    pub span: HourSpan,
    /// The stretches the series was put together from, in order of time.
    pub stretches: Vec<Stretch>,
}

/// The place a source answered for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Served {
    /// Where.
    pub at: Coordinates,
    /// Elevation of its readings [m above mean sea level].
    pub elevation_m: Option<f64>,
}

/// A stretch of a series that came in one answer.
#[derive(Debug, Clone, PartialEq)]
pub struct Stretch {
    /// Its hours.
    pub span: HourSpan,
    /// What kind of knowledge it is.
    pub nature: Nature,
    /// When it was fetched, seconds since 1970; none for what is computed here.
    pub fetched_unix_s: Option<i64>,
    /// True if it has expired and the source did not answer with newer.
    pub stale: bool,
    /// Hours of it without temperature or humidity.
    pub hours_missing: usize,
}

/// What kind of knowledge a stretch is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Nature {
    /// Computed afterwards from observations.
    Reanalysis,
    /// The first hours of forecasts made at the time.
    PastForecast,
    /// The last days, from the model that also forecasts.
    RecentDays,
    /// Not yet happened when it was fetched.
    Forecast,
    /// Made up.
    Invented,
}

impl Nature {
    /// In words.
    pub fn words(self) -> &'static str {
        match self {
            Self::Reanalysis => "reanalysis",
            Self::PastForecast => "past forecasts",
            Self::RecentDays => "recent days of the forecast model",
            Self::Forecast => "forecast",
            Self::Invented => "invented weather",
        }
    }
}

impl Provenance {
    /// True if any stretch is stale.
    pub fn is_stale(&self) -> bool {
        self.stretches.iter().any(|stretch| stretch.stale)
    }

    /// How far the served place is from the one asked for [km].
    pub fn distance_km(&self) -> f64 {
        self.asked.distance_km(&self.served.at)
    }
}
