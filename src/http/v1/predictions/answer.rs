//! What is answered.

use serde::Serialize;
use utoipa::ToSchema;

use super::hours::{CycleTrace, HourColumns};
use super::periods::{HourOfDay, Period};
use super::places::{ComparedPlace, PlaceReport};
use super::spells::{StallSpell, StallSpellsSummary, Visit};
use crate::http::v1::device::{DerivedFigures, Device, StallHumidity};
use crate::http::v1::notes::{Assumption, Caution};
use crate::http::v1::options::{DeviceState, Method};
use crate::http::v1::provenance::FetchedWeather;
use crate::service::records::{Flag, ModelInfo, Stamp};
use crate::service::{PlaceOutcome, PredictionReport};

/// A prediction with all that went into it. Uncalibrated periods are right within a factor of 1.5 to 2; stall hours are
/// to be read as a band.
#[derive(Debug, Serialize, ToSchema)]
pub struct PredictionAnswer {
    /// The whole run.
    pub summary: Period,
    /// Each stall that is long enough to be listed, in order.
    pub stall_spells: Vec<StallSpell>,
    /// The stalls taken together.
    pub stall_spells_summary: StallSpellsSummary,
    /// Each visit, in order.
    pub visits: Vec<Visit>,
    /// Month by month, if asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub months: Option<Vec<Period>>,
    /// Day by day, if asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub days: Option<Vec<Period>>,
    /// The 24 hours of the clock, each over the whole run.
    pub hours_of_day: Vec<HourOfDay>,
    /// Hour by hour, if asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub hours: Option<HourColumns>,
    /// One cycle close up, if asked for and if the device ever ran.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub cycle_trace: Option<CycleTrace>,
    /// The device at the end; send it back as `options.initial_state` of the next stretch.
    pub end_state: DeviceState,
    /// The device and what follows from it.
    pub device: DeviceReport,
    /// Where it stands, and the air found there.
    pub place: PlaceReport,
    /// With `places`: each of them side by side, the first included.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub comparison: Option<Vec<ComparedPlace>>,
    /// What was read, filled and flagged.
    pub weather: WeatherReport,
    /// IANA name of the zone days, months and clock times were cut in.
    pub time_zone: String,
    /// Everything that was not given.
    pub assumptions: Vec<Assumption>,
    /// Hazards, the most urgent first.
    pub cautions: Vec<Caution>,
    /// How it was computed.
    pub model: ModelReport,
}

/// The device and what follows from it.
#[derive(Debug, Serialize, ToSchema)]
pub struct DeviceReport {
    /// Name of the example, if one was taken.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub example: Option<String>,
    /// The device as given.
    pub definition: Device,
    /// Figures that follow from it.
    pub derived: DerivedFigures,
    /// Humidity at which it stops in settled air of the place's mean air speed, at three air temperatures.
    pub stall_humidity: Vec<StallHumidity>,
}

/// What was read, filled and flagged.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherReport {
    /// `inline`, `upload` or `endpoint`.
    pub source: &'static str,
    /// Readings found.
    pub readings: usize,
    /// Hours made of them.
    pub hours: usize,
    /// Hours filled by interpolation.
    pub hours_filled: usize,
    /// Hours that stay unknown.
    pub hours_unknown: usize,
    /// Which humidity was used: `dew_point` or `relative_humidity`.
    pub humidity_from: &'static str,
    /// What each hourly value stands for: `instant` or `mean_of_hour`.
    pub hourly_value: &'static str,
    /// Implausible or contradictory readings; never edited silently.
    pub flags: Vec<WeatherFlag>,
    /// Where the readings came from, if they were fetched by coordinates.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub fetched: Option<FetchedWeather>,
}

/// One kind of oddity in the readings.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherFlag {
    /// Stable code for programs.
    #[schema(examples("temperature_step"))]
    pub code: &'static str,
    /// How often.
    pub count: usize,
    /// The first twenty rows or hours, counted from 1.
    pub rows: Vec<usize>,
    /// What it means, what was done, what to do.
    pub detail: String,
}

/// How it was computed.
#[derive(Debug, Serialize, ToSchema)]
pub struct ModelReport {
    /// Version of the program and revision of the model.
    pub version: String,
    /// How the hours were solved.
    pub method: Method,
    /// Seed of the samples.
    pub seed: u64,
    /// Samples run; 0 without bands.
    pub samples: usize,
}

impl PredictionAnswer {
    /// The answer of a report; `upload` says whether the readings came in a file.
    ///
    /// # Panics
    /// If the report has no place, which the service never hands out.
    pub fn of(mut report: PredictionReport, upload: bool) -> Self {
        let weather = WeatherReport::of(&report, upload);
        let comparison = (report.is_comparison).then(|| report.outcomes.iter().map(Into::into).collect());
        let outcome = report.outcomes.swap_remove(0);
        let device = DeviceReport::of(&report, &outcome);
        let place = PlaceReport::of(&outcome);
        let prediction = outcome.prediction;
        let periods = |periods: Vec<_>| periods.into_iter().map(Period::from).collect();
        Self {
            summary: prediction.summary.into(),
            stall_spells_summary: StallSpellsSummary::of(&prediction.stall_spells),
            stall_spells: prediction.stall_spells.list.into_iter().map(Into::into).collect(),
            visits: prediction.visits.into_iter().map(Into::into).collect(),
            months: prediction.months.map(periods),
            days: prediction.days.map(periods),
            hours_of_day: HourOfDay::all(&prediction.hours_of_day),
            hours: prediction.hours.map(Into::into),
            cycle_trace: prediction.cycle_trace.map(Into::into),
            end_state: prediction.end_state.into(),
            device,
            place,
            comparison,
            weather,
            time_zone: prediction.time_zone,
            assumptions: outcome.assumptions.into_iter().map(Into::into).collect(),
            cautions: outcome.cautions.into_iter().map(Into::into).collect(),
            model: prediction.model.into(),
        }
    }
}

impl DeviceReport {
    fn of(report: &PredictionReport, outcome: &PlaceOutcome) -> Self {
        Self {
            example: report.example.clone(),
            definition: Device::from(report.definition.clone()).lit(report.lamp_hours.clone().map(Into::into)),
            derived: report.derived.into(),
            stall_humidity: outcome.stall_points.iter().map(Into::into).collect(),
        }
    }
}

impl WeatherReport {
    fn of(report: &PredictionReport, upload: bool) -> Self {
        let weather = &report.weather;
        Self {
            source: match (&report.provenance, upload) {
                (Some(_), _) => "endpoint",
                (None, true) => "upload",
                (None, false) => "inline",
            },
            readings: weather.readings,
            hours: report.hours,
            hours_filled: weather.hours_filled,
            hours_unknown: weather.hours_unknown,
            humidity_from: weather.humidity_from,
            hourly_value: match report.stamp {
                Stamp::Instant => "instant",
                Stamp::MeanOfHour => "mean_of_hour",
            },
            flags: weather.flags.iter().map(Into::into).collect(),
            fetched: report.provenance.as_ref().map(Into::into),
        }
    }
}

impl From<&Flag> for WeatherFlag {
    fn from(record: &Flag) -> Self {
        Self {
            code: record.code,
            count: record.count,
            rows: record.rows.clone(),
            detail: record.detail.clone(),
        }
    }
}

impl From<ModelInfo> for ModelReport {
    fn from(record: ModelInfo) -> Self {
        Self {
            version: record.version,
            method: record.method.into(),
            seed: record.seed,
            samples: record.samples,
        }
    }
}
