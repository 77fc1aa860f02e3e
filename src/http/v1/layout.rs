//! What a CSV file's columns mean: the wire twin of the intake's layout.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::weather::ReadingLabel;
use crate::service::records;

/// What a CSV file's columns mean. Without one, the documented form is expected: a header with `time` (RFC 3339),
/// `air_temperature_c` and at least one of `relative_humidity_pct` and `dew_point_c`; also `air_pressure_hpa`,
/// `wind_speed_m_s`, `shortwave_w_m2`.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvLayout {
    /// How the text is cut into cells. Default: UTF-8, commas, decimal points, one header row.
    #[serde(default)]
    pub dialect: Option<CsvDialect>,
    /// Where the time stands and how it is meant.
    pub time: CsvTime,
    /// Which column holds what, in which unit.
    pub columns: CsvColumns,
    /// Marks of a missing value besides the usual ones (empty, NaN, NA, N/A, null, -, --, M, ***).
    #[serde(default)]
    #[schema(max_items = 50, examples(json!(["-999"])))]
    pub missing: Option<Vec<String>>,
    /// Read only the rows in which this holds.
    #[serde(default)]
    pub rows: Option<CsvRowFilter>,
}

/// How the text is cut into cells.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvDialect {
    /// A name of the WHATWG encoding standard; a byte-order mark wins. Default utf-8.
    #[serde(default)]
    #[schema(examples("windows-1252"), max_length = 40)]
    pub encoding: Option<String>,
    /// Between cells: one character, or `tab`. Default a comma.
    #[serde(default)]
    #[schema(examples(";"), max_length = 3)]
    pub delimiter: Option<String>,
    /// Decimal sign: `.` or `,`. Default a point.
    #[serde(default)]
    #[schema(examples(","), max_length = 1)]
    pub decimal: Option<String>,
    /// Header rows; the first of them names the columns. 0: columns are named by place, `#1`, `#2`. Default 1.
    #[serde(default)]
    #[schema(maximum = 1000)]
    pub header_rows: Option<u32>,
    /// Lines before the header. Default 0.
    #[serde(default)]
    #[schema(maximum = 1000)]
    pub skip_rows: Option<u32>,
    /// Lines that start with this character are left out.
    #[serde(default)]
    #[schema(max_length = 1)]
    pub comment: Option<String>,
}

/// Where the time stands and how it is meant.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvTime {
    /// Columns that hold the time, joined by one space.
    #[schema(min_items = 1, max_items = 10, examples(json!(["Date", "Time"])))]
    pub columns: Vec<String>,
    /// `rfc3339`, `unix_s`, `unix_ms`, or a pattern of %Y %y %m %d %j %b %H %I %M %S %p %z. Default rfc3339.
    #[serde(default)]
    #[schema(examples("%d.%m.%Y %H:%M"), max_length = 80)]
    pub format: Option<String>,
    /// Zone of cells without an offset: `UTC`, `+01:00`, or an IANA name.
    #[serde(default)]
    #[schema(examples("Europe/Oslo"), max_length = 60)]
    pub zone: Option<String>,
    /// How hours are counted. Default `0-23`, or `am_pm` where the pattern has %p.
    #[serde(default)]
    pub clock: Option<CsvClock>,
    /// What the time says about the value. Default `instant`, and said in `assumptions`.
    #[serde(default)]
    pub label: Option<ReadingLabel>,
    /// The hour a clock shows twice in autumn. Default `row_order`.
    #[serde(default)]
    pub ambiguous: Option<AmbiguousTime>,
    /// The hour a clock leaves out in spring. Default `refuse`.
    #[serde(default)]
    pub nonexistent: Option<NonexistentTime>,
    /// Read every date as if in this year: for typical years, whose months come from different ones.
    #[serde(default)]
    #[schema(minimum = 1800, maximum = 2199)]
    pub year: Option<i64>,
}

/// How hours are counted.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum CsvClock {
    /// 0 to 23.
    #[serde(rename = "0-23")]
    From0To23,
    /// 1 to 24; 24 is midnight at the end of the day.
    #[serde(rename = "1-24")]
    From1To24,
    /// 12-hour clock with %p.
    #[serde(rename = "am_pm")]
    AmPm,
}

/// What to do with a clock time that occurs twice.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum AmbiguousTime {
    /// By the order of rows: the first pass, then the second.
    RowOrder,
    /// Always the first.
    First,
    /// Always the second.
    Second,
    /// Refuse such rows.
    Refuse,
}

/// What to do with a clock time that does not occur.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum NonexistentTime {
    /// Refuse: the clock that wrote it does not follow this zone.
    Refuse,
    /// Take it as if the clock had not moved yet.
    Unmoved,
}

/// Which column holds what. Air temperature, and relative humidity or dew point, are needed.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvColumns {
    /// Air temperature: °C, K, °F.
    #[serde(default)]
    pub air_temperature: Option<CsvColumn>,
    /// Relative humidity over liquid water: %, fraction.
    #[serde(default)]
    pub relative_humidity: Option<CsvColumn>,
    /// Dew point: °C, K, °F. Used before relative humidity.
    #[serde(default)]
    pub dew_point: Option<CsvColumn>,
    /// Pressure at the station: hPa, kPa, Pa, inHg, mmHg.
    #[serde(default)]
    pub station_pressure: Option<CsvColumn>,
    /// Pressure reduced to sea level, instead of station pressure.
    #[serde(default)]
    pub sea_level_pressure: Option<CsvColumn>,
    /// Wind speed: m/s, km/h, mph, knot.
    #[serde(default)]
    pub wind_speed: Option<CsvColumn>,
    /// Short-wave irradiance on the level: W/m2.
    #[serde(default)]
    pub shortwave: Option<CsvColumn>,
}

/// One column: the value is `cell * scale + offset` in `unit`.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvColumn {
    /// Name in the header, or place, `#1` for the first.
    #[schema(min_length = 1, max_length = 200)]
    pub column: String,
    /// Unit of the value.
    #[schema(examples("°C"), max_length = 20)]
    pub unit: String,
    /// Factor on the number in the cell. Default 1.
    #[serde(default)]
    pub scale: Option<f64>,
    /// Added after the factor. Default 0.
    #[serde(default)]
    pub offset: Option<f64>,
}

/// Reads only rows whose cell is this text.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvRowFilter {
    /// Name in the header, or place, `#1` for the first.
    #[schema(min_length = 1, max_length = 200)]
    pub column: String,
    /// What the cell must be.
    #[schema(max_length = 200)]
    pub equals: String,
}

impl From<CsvLayout> for records::Layout {
    fn from(wire: CsvLayout) -> Self {
        Self {
            dialect: wire.dialect.map(Into::into).unwrap_or_default(),
            time: wire.time.into(),
            columns: wire.columns.into(),
            missing: wire.missing.unwrap_or_default(),
            rows: wire.rows.map(|rows| records::RowFilter {
                column: rows.column,
                equals: rows.equals,
            }),
        }
    }
}

impl From<CsvDialect> for records::Dialect {
    fn from(wire: CsvDialect) -> Self {
        let usual = Self::default();
        Self {
            encoding: wire.encoding.unwrap_or(usual.encoding),
            delimiter: wire.delimiter.unwrap_or(usual.delimiter),
            decimal: wire.decimal.unwrap_or(usual.decimal),
            header_rows: wire.header_rows.map_or(usual.header_rows, |rows| rows as usize),
            skip_rows: wire.skip_rows.map_or(usual.skip_rows, |rows| rows as usize),
            comment: wire.comment,
        }
    }
}

impl From<CsvTime> for records::TimeLayout {
    fn from(wire: CsvTime) -> Self {
        Self {
            columns: wire.columns,
            format: wire.format.unwrap_or_else(|| "rfc3339".to_owned()),
            zone: wire.zone,
            clock: wire.clock.map(Into::into),
            label: wire.label.map(Into::into),
            ambiguous: wire.ambiguous.map(Into::into).unwrap_or_default(),
            nonexistent: wire.nonexistent.map(Into::into).unwrap_or_default(),
            year: wire.year,
        }
    }
}

impl From<CsvClock> for records::Clock {
    fn from(wire: CsvClock) -> Self {
        match wire {
            CsvClock::From0To23 => records::Clock::From0To23,
            CsvClock::From1To24 => records::Clock::From1To24,
            CsvClock::AmPm => records::Clock::AmPm,
        }
    }
}

impl From<AmbiguousTime> for records::Ambiguous {
    fn from(wire: AmbiguousTime) -> Self {
        match wire {
            AmbiguousTime::RowOrder => records::Ambiguous::RowOrder,
            AmbiguousTime::First => records::Ambiguous::First,
            AmbiguousTime::Second => records::Ambiguous::Second,
            AmbiguousTime::Refuse => records::Ambiguous::Refuse,
        }
    }
}

impl From<NonexistentTime> for records::Nonexistent {
    fn from(wire: NonexistentTime) -> Self {
        match wire {
            NonexistentTime::Refuse => records::Nonexistent::Refuse,
            NonexistentTime::Unmoved => records::Nonexistent::Unmoved,
        }
    }
}

impl From<CsvColumns> for records::Columns {
    fn from(wire: CsvColumns) -> Self {
        Self {
            air_temperature: wire.air_temperature.map(Into::into),
            relative_humidity: wire.relative_humidity.map(Into::into),
            dew_point: wire.dew_point.map(Into::into),
            station_pressure: wire.station_pressure.map(Into::into),
            sea_level_pressure: wire.sea_level_pressure.map(Into::into),
            wind_speed: wire.wind_speed.map(Into::into),
            shortwave: wire.shortwave.map(Into::into),
        }
    }
}

impl From<CsvColumn> for records::ColumnMapping {
    fn from(wire: CsvColumn) -> Self {
        let plain = Self::new(wire.column, wire.unit);
        Self {
            scale: wire.scale.unwrap_or(plain.scale),
            offset: wire.offset.unwrap_or(plain.offset),
            ..plain
        }
    }
}
