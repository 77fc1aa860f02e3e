//! Where the device stands, as it comes back: the air found there, and several places side by side.

use serde::Serialize;
use utoipa::ToSchema;

use super::periods::Period;
use super::rounded;
use super::spells::StallSpellsSummary;
use crate::http::v1::device::StallHumidity;
use crate::http::v1::notes::{Assumption, Caution};
use crate::service::PlaceOutcome;
use crate::service::records;

/// A place and the air found there, over the known hours.
#[derive(Debug, Serialize, ToSchema)]
pub struct PlaceReport {
    /// The name given to it.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub name: Option<String>,
    /// `at_device`, `outdoors`, `room` or `case`.
    #[schema(examples("room"))]
    pub kind: &'static str,
    /// The moisture rule taken, if the air went through a room.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub moisture_rule: Option<String>,
    /// Mean air temperature at the device [°C].
    pub mean_air_temp_c: f64,
    /// Mean relative humidity at the device [%].
    pub mean_relative_humidity_pct: f64,
    /// Lowest hourly relative humidity at the device [%].
    pub least_relative_humidity_pct: f64,
    /// Highest hourly relative humidity at the device [%].
    pub most_relative_humidity_pct: f64,
    /// Mean air speed at the device [m/s].
    pub mean_air_speed_m_s: f64,
    /// What the case needs, if it is one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub case: Option<CaseReport>,
}

/// What a case needs, in the mean air around it over the known hours, held steady.
#[derive(Debug, Serialize, ToSchema)]
pub struct CaseReport {
    /// Relative humidity above which the device stands still in it [%].
    pub stall_relative_humidity_pct: f64,
    /// Air changes below which its own vapour stops the device [1/h]; absent where the air around the case is too damp for
    /// any number of them.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub least_air_changes_per_hour: Option<f64>,
    /// Hours that end with dew on its glass.
    pub dew_hours: usize,
}

/// The same prediction in one of the places that are compared.
#[derive(Debug, Serialize, ToSchema)]
pub struct ComparedPlace {
    /// The place and its air.
    pub place: PlaceReport,
    /// The whole run there.
    pub summary: Period,
    /// The stalls taken together.
    pub stall_spells_summary: StallSpellsSummary,
    /// Month by month, if asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub months: Option<Vec<Period>>,
    /// Humidity at which the device stops in settled air there, at three air temperatures.
    pub stall_humidity: Vec<StallHumidity>,
    /// Everything that was not given.
    pub assumptions: Vec<Assumption>,
    /// Hazards, the most urgent first.
    pub cautions: Vec<Caution>,
}

impl PlaceReport {
    /// The place of an outcome.
    pub fn of(outcome: &PlaceOutcome) -> Self {
        let air = &outcome.prediction.air;
        Self {
            name: outcome.place.name.clone(),
            kind: kind(&outcome.place.place),
            moisture_rule: outcome.moisture_rule.clone(),
            mean_air_temp_c: rounded(air.mean_temp_c),
            mean_relative_humidity_pct: rounded(air.mean_relative_humidity_pct),
            least_relative_humidity_pct: rounded(air.least_relative_humidity_pct),
            most_relative_humidity_pct: rounded(air.most_relative_humidity_pct),
            mean_air_speed_m_s: rounded(air.mean_air_speed_m_s),
            case: outcome.prediction.case.map(|figures| CaseReport {
                stall_relative_humidity_pct: rounded(figures.stall_relative_humidity_pct),
                least_air_changes_per_hour: figures.least_air_changes_per_hour.map(rounded),
                dew_hours: air.dew_hours.unwrap_or(0),
            }),
        }
    }
}

fn kind(place: &records::Place) -> &'static str {
    match place {
        records::Place::AtDevice(_) => "at_device",
        records::Place::Outdoors(_) => "outdoors",
        records::Place::Room(_) => "room",
        records::Place::Case(_) => "case",
    }
}

impl From<&PlaceOutcome> for ComparedPlace {
    fn from(outcome: &PlaceOutcome) -> Self {
        let prediction = &outcome.prediction;
        let periods = |periods: &Vec<records::Period>| periods.iter().cloned().map(Into::into).collect();
        Self {
            place: PlaceReport::of(outcome),
            summary: prediction.summary.clone().into(),
            stall_spells_summary: StallSpellsSummary::of(&prediction.stall_spells),
            months: prediction.months.as_ref().map(periods),
            stall_humidity: outcome.stall_points.iter().map(Into::into).collect(),
            assumptions: outcome.assumptions.iter().cloned().map(Into::into).collect(),
            cautions: outcome.cautions.iter().cloned().map(Into::into).collect(),
        }
    }
}
