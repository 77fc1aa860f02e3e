//! What a CSV file's columns mean: the wire twin of the intake's layout.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::weather::ReadingLabel;

/// What a CSV file's columns mean. Without one, the documented form is expected: a header with `time` (RFC 3339),
/// `air_temperature_c` and at least one of `relative_humidity_pct` and `dew_point_c`; also `air_pressure_hpa`,
/// `wind_speed_m_s`, `shortwave_w_m2`.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvLayout {
    /// How the text is cut into cells. Default: UTF-8, commas, decimal points, one header row.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub dialect: Option<CsvDialect>,
    /// Where the time stands and how it is meant.
    pub time: CsvTime,
    /// Which column holds what, in which unit.
    pub columns: CsvColumns,
    /// Marks of a missing value besides the usual ones (empty, NaN, NA, N/A, null, -, --, M, ***).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 50, examples(json!(["-999"])))]
    pub missing: Option<Vec<String>>,
    /// Read only the rows in which this holds.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub rows: Option<CsvRowFilter>,
    /// One value a row, named beside it: what loggers write that note changes only.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub long_form: Option<CsvLongForm>,
}

/// One value a row, named in another column; the columns of `columns` are then such names. A value holds until the next one
/// of its name.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvLongForm {
    /// The column that names what was read.
    #[schema(min_length = 1, max_length = 200)]
    pub name_column: String,
    /// The column of the values.
    #[schema(min_length = 1, max_length = 200)]
    pub value_column: String,
    /// Longest time a value holds without being repeated [h]. Default 24.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0.1, maximum = 8784)]
    pub hold_hours: Option<f64>,
}

/// A column of a file without delimiters.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvFixedColumn {
    /// What the rest of the layout calls it.
    #[schema(min_length = 1, max_length = 200)]
    pub name: String,
    /// Place of its first character in the line, from 1.
    #[schema(minimum = 1, maximum = 65536)]
    pub start: u32,
    /// Number of characters.
    #[schema(minimum = 1, maximum = 200)]
    pub width: u32,
}

/// How the text is cut into cells.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvDialect {
    /// A name of the WHATWG encoding standard; a byte-order mark wins. Default utf-8.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples("windows-1252"), max_length = 40)]
    pub encoding: Option<String>,
    /// Between cells: one character, or `tab`. Default a comma.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples(";"), max_length = 3)]
    pub delimiter: Option<String>,
    /// Decimal sign: `.` or `,`. Default a point.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples(","), max_length = 1)]
    pub decimal: Option<String>,
    /// Sign between groups of three digits, which is read over. Default none.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples("."), max_length = 1)]
    pub thousands: Option<String>,
    /// Header rows; the first of them names the columns. 0: columns are named by place, `#1`, `#2`. Default 1.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(maximum = 1000)]
    pub header_rows: Option<u32>,
    /// Lines before the header. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(maximum = 1000)]
    pub skip_rows: Option<u32>,
    /// Lines that start with this character are left out.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_length = 1)]
    pub comment: Option<String>,
    /// Columns by the place of their characters, for files without delimiters; these have no header.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 200)]
    pub fixed_width: Option<Vec<CsvFixedColumn>>,
}

/// Where the time stands and how it is meant.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvTime {
    /// Columns that hold the time, joined by one space.
    #[schema(min_items = 1, max_items = 10, examples(json!(["Date", "Time"])))]
    pub columns: Vec<String>,
    /// `rfc3339`, `unix_s`, `unix_ms`, `spreadsheet_days` (days since 1899-12-30), or a pattern of %Y %y %m %d %j %b %H %I
    /// %M %S %p %z. Default rfc3339.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples("%d.%m.%Y %H:%M"), max_length = 80)]
    pub format: Option<String>,
    /// Zone of cells without an offset: `UTC`, `+01:00`, or an IANA name.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(examples("Europe/Oslo"), max_length = 60)]
    pub zone: Option<String>,
    /// How hours are counted. Default `0-23`, or `am_pm` where the pattern has %p.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub clock: Option<CsvClock>,
    /// What the time says about the value. Default `instant`, and said in `assumptions`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub label: Option<ReadingLabel>,
    /// What the time says about the irradiance. Default: as `label`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub shortwave_label: Option<ReadingLabel>,
    /// The hour a clock shows twice in autumn. Default `row_order`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub ambiguous: Option<AmbiguousTime>,
    /// The hour a clock leaves out in spring. Default `refuse`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub nonexistent: Option<NonexistentTime>,
    /// Read every date as if in this year: for typical years, whose months come from different ones.
    #[serde(default, skip_serializing_if = "Option::is_none")]
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
    /// Hours and minutes as one whole number, 0 to 2400: %H holds both.
    #[serde(rename = "hhmm")]
    HourMinute,
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

/// Which column holds what. Air temperature, and relative humidity, dew point or wet bulb, are needed.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CsvColumns {
    /// Air temperature: °C, K, °F.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub air_temperature: Option<CsvColumn>,
    /// Relative humidity over liquid water: %, fraction.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub relative_humidity: Option<CsvColumn>,
    /// Dew point: °C, K, °F. Used before relative humidity.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub dew_point: Option<CsvColumn>,
    /// Wet bulb over liquid water: °C, K, °F. Used where neither dew point nor relative humidity is there.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub wet_bulb: Option<CsvColumn>,
    /// Pressure at the station: hPa, kPa, Pa, inHg, mmHg.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub station_pressure: Option<CsvColumn>,
    /// Pressure reduced to sea level, instead of station pressure.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub sea_level_pressure: Option<CsvColumn>,
    /// Wind speed: m/s, km/h, mph, knot.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub wind_speed: Option<CsvColumn>,
    /// Short-wave irradiance on the level: W/m2.
    #[serde(default, skip_serializing_if = "Option::is_none")]
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
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub scale: Option<f64>,
    /// Added after the factor. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub offset: Option<f64>,
    /// Marks of a missing value in this column alone.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 50, examples(json!(["9999"])))]
    pub missing: Option<Vec<String>>,
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

/// Conversions both ways between the wire and the record.
mod convert;
