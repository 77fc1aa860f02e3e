//! What a sender can say about a CSV file without writing a whole layout: the wire twin of the intake's hints.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::layout::CsvRowFilter;
use super::weather::ReadingLabel;
use crate::service::records;

/// Answers to what cannot be told from a CSV file by looking; whatever is left out is found out.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvHints {
    /// A name of the WHATWG encoding standard.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples("windows-1252"), max_length = 40)]
    pub encoding: Option<String>,
    /// Between cells: one character, or `tab`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples(";"), min_length = 1, max_length = 3)]
    pub delimiter: Option<String>,
    /// Decimal sign: `.` or `,`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples(","), max_length = 1)]
    pub decimal: Option<String>,
    /// Columns that hold the time, in the order date, time.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 10, examples(json!(["Date", "Time"])))]
    pub time: Option<Vec<String>>,
    /// Zone of times without an offset: `UTC`, `+01:00`, or an IANA name.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples("Europe/Oslo"), max_length = 60)]
    pub zone: Option<String>,
    /// True: 03/04 is 3 April. False: it is March 4th.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub day_first: Option<bool>,
    /// What the time says about the value.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub label: Option<ReadingLabel>,
    /// Read every date as if in this year: for typical years.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 1800, maximum = 2199)]
    pub year: Option<i64>,
    /// Read only the rows in which this holds.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub rows: Option<CsvRowFilter>,
    /// Marks of a missing value besides the usual ones.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 50, examples(json!(["-999"])))]
    pub missing: Option<Vec<String>>,
    /// Columns and units of single variables.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub columns: Option<CsvColumnHints>,
    /// Columns to leave alone.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 100)]
    pub ignore: Option<Vec<String>>,
}

/// Columns and units of single variables.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvColumnHints {
    /// Air temperature; the humidity of the same sensor follows it.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub air_temperature: Option<CsvColumnHint>,
    /// Relative humidity.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub relative_humidity: Option<CsvColumnHint>,
    /// Dew point.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub dew_point: Option<CsvColumnHint>,
    /// Wet bulb.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub wet_bulb: Option<CsvColumnHint>,
    /// Pressure at the station.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub station_pressure: Option<CsvColumnHint>,
    /// Pressure reduced to sea level.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub sea_level_pressure: Option<CsvColumnHint>,
    /// Wind speed.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub wind_speed: Option<CsvColumnHint>,
    /// Short-wave irradiance.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub shortwave: Option<CsvColumnHint>,
}

/// Which column, in which unit; either may be left to be found out.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvColumnHint {
    /// Name in the header, or place, `#1` for the first.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(min_length = 1, max_length = 200)]
    pub column: Option<String>,
    /// Unit of the value.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples("°C"), max_length = 20)]
    pub unit: Option<String>,
}

impl From<CsvHints> for records::Hints {
    fn from(wire: CsvHints) -> Self {
        Self {
            encoding: wire.encoding,
            delimiter: wire.delimiter,
            decimal: wire.decimal,
            time: wire.time.unwrap_or_default(),
            zone: wire.zone,
            day_first: wire.day_first,
            label: wire.label.map(Into::into),
            year: wire.year,
            rows: wire.rows.map(Into::into),
            missing: wire.missing.unwrap_or_default(),
            columns: wire.columns.map(Into::into).unwrap_or_default(),
            ignore: wire.ignore.unwrap_or_default(),
        }
    }
}

impl From<CsvColumnHints> for records::ColumnHints {
    fn from(wire: CsvColumnHints) -> Self {
        Self {
            air_temperature: wire.air_temperature.map(Into::into),
            relative_humidity: wire.relative_humidity.map(Into::into),
            dew_point: wire.dew_point.map(Into::into),
            wet_bulb: wire.wet_bulb.map(Into::into),
            station_pressure: wire.station_pressure.map(Into::into),
            sea_level_pressure: wire.sea_level_pressure.map(Into::into),
            wind_speed: wire.wind_speed.map(Into::into),
            shortwave: wire.shortwave.map(Into::into),
        }
    }
}

impl From<CsvColumnHint> for records::ColumnHint {
    fn from(wire: CsvColumnHint) -> Self {
        Self {
            column: wire.column,
            unit: wire.unit,
        }
    }
}
