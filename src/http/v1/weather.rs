//! The readings of a prediction: in the request, in a file beside it, or fetched by coordinates.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::hints::CsvHints;
use super::layout::CsvLayout;
use super::weather_endpoint::EndpointWeather;
use crate::http::error::FaultItem;
use crate::service::WeatherChecks;
use crate::service::records::{Label, LabelName, RawReadings};

/// 0 °C in kelvin, by definition.
const ZERO_CELSIUS_K: f64 = 273.15;

/// The readings: `inline`, `upload` for a file in the part `weather` of a form, or `endpoint` for weather by coordinates.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(untagged)]
#[schema(discriminator(property_name = "kind", mapping(
    ("inline" = "#/components/schemas/InlineWeather"),
    ("upload" = "#/components/schemas/UploadedWeather"),
    ("endpoint" = "#/components/schemas/EndpointWeather"),
)))]
pub enum Weather {
    /// In the request.
    Inline(Box<InlineWeather>),
    /// In a file beside it.
    Upload(Box<UploadedWeather>),
    /// By coordinates.
    Endpoint(Box<EndpointWeather>),
}

/// Hourly readings in columns of equal length; null is a missing reading. Relative humidity or dew point is needed.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct InlineWeather {
    /// `inline`
    pub kind: InlineKind,
    /// Time of the first reading (RFC 3339); the others follow hour by hour.
    #[schema(format = DateTime, examples("2026-01-01T00:00:00Z"))]
    pub start: String,
    /// What the times say about the values. Default `instant`.
    #[serde(default)]
    pub label: Option<ReadingLabel>,
    /// Air temperature [°C].
    pub air_temperature_c: Vec<Option<f64>>,
    /// Relative humidity over liquid water [%].
    #[serde(default)]
    pub relative_humidity_pct: Option<Vec<Option<f64>>>,
    /// Dew point [°C]; used before relative humidity.
    #[serde(default)]
    pub dew_point_c: Option<Vec<Option<f64>>>,
    /// Pressure at the station [hPa]. Default: from the place's elevation.
    #[serde(default)]
    pub air_pressure_hpa: Option<Vec<Option<f64>>>,
    /// Wind speed [m/s]; used by outdoor places only.
    #[serde(default)]
    pub wind_speed_m_s: Option<Vec<Option<f64>>>,
    /// Short-wave irradiance on the level [W/m²]; used by outdoor places only.
    #[serde(default)]
    pub shortwave_w_m2: Option<Vec<Option<f64>>>,
    /// What the times say about the irradiance, where that differs from the rest: `mean_of_preceding_hour` in many
    /// services' hourly answers. Default: as `label`.
    #[serde(default)]
    pub shortwave_label: Option<ReadingLabel>,
    /// Longest gap that is interpolated [h]. Default 3.
    #[serde(default)]
    #[schema(maximum = 24)]
    pub max_gap_hours: Option<u32>,
    /// Largest share of unknown hours that is taken. Default 0.1.
    #[serde(default)]
    #[schema(minimum = 0, maximum = 1)]
    pub max_unknown_share: Option<f64>,
    /// Take readings that look swapped or in another unit: flagged, not refused. Default false.
    #[serde(default)]
    pub accept_suspicious: Option<bool>,
}

/// A CSV file, gzipped or not, in the part `weather` of the form.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct UploadedWeather {
    /// `upload`
    pub kind: UploadKind,
    /// What the columns mean. Default: found out by looking; what cannot be told is asked for.
    #[serde(default)]
    pub layout: Option<CsvLayout>,
    /// Answers to what cannot be told by looking; not beside a `layout`.
    #[serde(default)]
    pub hints: Option<CsvHints>,
    /// Longest gap that is interpolated [h]. Default 3.
    #[serde(default)]
    #[schema(maximum = 24)]
    pub max_gap_hours: Option<u32>,
    /// Largest share of unknown hours that is taken. Default 0.1.
    #[serde(default)]
    #[schema(minimum = 0, maximum = 1)]
    pub max_unknown_share: Option<f64>,
    /// Take readings that look swapped or in another unit: flagged, not refused. Default false.
    #[serde(default)]
    pub accept_suspicious: Option<bool>,
}

/// Tag of readings in the request.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum InlineKind {
    /// `inline`
    #[serde(rename = "inline")]
    Inline,
}

/// Tag of readings in a file.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum UploadKind {
    /// `upload`
    #[serde(rename = "upload")]
    Upload,
}

/// What the time beside a reading says about the value.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum ReadingLabel {
    /// Taken at that time.
    Instant,
    /// Mean over the time that starts there.
    MeanOfFollowingHour,
    /// Mean over the time that ends there.
    MeanOfPrecedingHour,
}

impl From<ReadingLabel> for LabelName {
    fn from(wire: ReadingLabel) -> Self {
        match wire {
            ReadingLabel::Instant => LabelName::Instant,
            ReadingLabel::MeanOfFollowingHour => LabelName::MeanOfFollowingHour,
            ReadingLabel::MeanOfPrecedingHour => LabelName::MeanOfPrecedingHour,
        }
    }
}

impl From<LabelName> for ReadingLabel {
    fn from(record: LabelName) -> Self {
        match record {
            LabelName::Instant => Self::Instant,
            LabelName::MeanOfFollowingHour => Self::MeanOfFollowingHour,
            LabelName::MeanOfPrecedingHour => Self::MeanOfPrecedingHour,
        }
    }
}

impl InlineWeather {
    /// The readings in SI.
    ///
    /// # Errors
    /// A start that is no instant.
    pub fn readings(self) -> Result<RawReadings, FaultItem> {
        let start_unix_s = instant_unix_s(&self.start)?;
        let label: LabelName = self.label.unwrap_or(ReadingLabel::Instant).into();
        let scaled = |column: Option<Vec<Option<f64>>>, factor: f64, shift: f64| {
            column.map(|values| in_si(values, factor, shift))
        };
        let hours = RawReadings::hourly(start_unix_s, self.air_temperature_c.len());
        Ok(RawReadings {
            label: Label::from(label),
            shortwave_label: self.shortwave_label.map(|label| LabelName::from(label).into()),
            relative_humidity: scaled(self.relative_humidity_pct, 0.01, 0.0),
            dew_point_k: scaled(self.dew_point_c, 1.0, ZERO_CELSIUS_K),
            pressure_pa: scaled(self.air_pressure_hpa, 100.0, 0.0),
            wind_speed_m_s: scaled(self.wind_speed_m_s, 1.0, 0.0),
            shortwave_w_m2: scaled(self.shortwave_w_m2, 1.0, 0.0),
            air_temp_k: in_si(self.air_temperature_c, 1.0, ZERO_CELSIUS_K),
            ..hours
        })
    }

    /// How strict to be.
    pub fn checks(&self) -> WeatherChecks {
        checks(self.max_gap_hours, self.max_unknown_share, self.accept_suspicious)
    }
}

impl UploadedWeather {
    /// How strict to be.
    pub fn checks(&self) -> WeatherChecks {
        checks(self.max_gap_hours, self.max_unknown_share, self.accept_suspicious)
    }
}

impl EndpointWeather {
    /// How strict to be.
    pub fn checks(&self) -> WeatherChecks {
        checks(self.max_gap_hours, self.max_unknown_share, self.accept_suspicious)
    }
}

fn checks(
    max_gap_hours: Option<u32>,
    max_unknown_share: Option<f64>,
    accept_suspicious: Option<bool>,
) -> WeatherChecks {
    WeatherChecks {
        max_gap_hours: max_gap_hours.map(|hours| hours as usize),
        max_unknown_share,
        accept_suspicious: accept_suspicious.unwrap_or(false),
    }
}

fn in_si(values: Vec<Option<f64>>, factor: f64, shift: f64) -> Vec<f64> {
    values
        .into_iter()
        .map(|value| value.map_or(f64::NAN, |value| value * factor + shift))
        .collect()
}

fn instant_unix_s(text: &str) -> Result<i64, FaultItem> {
    let instant = chrono::DateTime::parse_from_rfc3339(text);
    instant.map(|instant| instant.timestamp()).map_err(|_| {
        let detail = format!("expected an instant such as 2026-01-01T00:00:00Z, found {text:?}");
        FaultItem::at("/weather/start", "invalid_instant", detail)
    })
}

/// Where a column of the readings stands in the request.
pub fn inline_name(column: &str) -> Option<&'static str> {
    let names = [
        ("time", "start"),
        ("air_temperature", "air_temperature_c"),
        ("relative_humidity", "relative_humidity_pct"),
        ("dew_point", "dew_point_c"),
        ("pressure", "air_pressure_hpa"),
        ("wind_speed", "wind_speed_m_s"),
        ("shortwave", "shortwave_w_m2"),
    ];
    names
        .iter()
        .find(|(record, _)| *record == column)
        .map(|(_, wire)| *wire)
}
