//! The explicit mapping: which columns of a file mean what. Plain data; [`Layout::faults`] checks it as a whole.

use serde::{Deserialize, Serialize};

use crate::model::weather::{Label, Quantity};

/// How to read a CSV file.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Layout {
    /// How the text is cut into cells.
    #[serde(default)]
    pub dialect: Dialect,
    /// Where the time stands and how it is meant.
    pub time: TimeLayout,
    /// Which column holds which variable, and its unit.
    pub columns: Columns,
    /// Marks of a missing value besides the usual ones (empty, `NaN`, `NA`, `N/A`, `null`, `-`, `--`, `M`, `***`), for
    /// example `-999`; numbers match by value.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub missing: Vec<String>,
    /// Read only the rows in which this holds.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub rows: Option<RowFilter>,
    /// One value a row, named beside it: what loggers write that note changes only.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub long_form: Option<LongForm>,
}

/// Files with one value a row and a column that names what was read. The columns of a [`ColumnMapping`] are then names in
/// `name_column`. A value holds until the next one of its name.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct LongForm {
    /// The column that names what was read.
    pub name_column: String,
    /// The column of the values.
    pub value_column: String,
    /// Longest time a value holds without being repeated [h]; by default a day.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub hold_hours: Option<f64>,
}

/// A column of a file without delimiters.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FixedColumn {
    /// What the rest of the layout calls it.
    pub name: String,
    /// Place of its first character in the line, from 1.
    pub start: usize,
    /// Number of characters.
    pub width: usize,
}

/// How the text is cut into cells.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Dialect {
    /// `utf-8`, `utf-16le`, `utf-16be`, `windows-1252` or another name of the WHATWG encoding standard. A byte-order mark
    /// at the start of the file wins.
    pub encoding: String,
    /// Between cells: one character, or `tab`.
    pub delimiter: String,
    /// Decimal sign: `.` or `,`.
    pub decimal: String,
    /// Sign between groups of three digits, which is read over: `.`, `,`, `'` or a space.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub thousands: Option<String>,
    /// Header rows; the first of them names the columns. 0: columns are named by place, `#1`, `#2`.
    pub header_rows: usize,
    /// Lines before the header.
    pub skip_rows: usize,
    /// Lines that start with this character are left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub comment: Option<String>,
    /// Columns by the place of their characters, for files without delimiters; such files have no header.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub fixed_width: Vec<FixedColumn>,
}

impl Default for Dialect {
    fn default() -> Self {
        Self {
            encoding: "utf-8".into(),
            delimiter: ",".into(),
            decimal: ".".into(),
            thousands: None,
            header_rows: 1,
            skip_rows: 0,
            comment: None,
            fixed_width: Vec::new(),
        }
    }
}

/// Where the time stands and how it is meant.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TimeLayout {
    /// Columns that hold the time, joined by one space before they are read.
    pub columns: Vec<String>,
    /// `rfc3339` (offset optional, `T` or a space), `unix_s`, `unix_ms`, `spreadsheet_days` (days since 1899-12-30), or a
    /// pattern of `%Y %y %m %d %j %b %H %I %M %S %p %z`.
    #[serde(default = "rfc3339")]
    pub format: String,
    /// Zone of cells without an offset: `UTC`, `+01:00`, or an IANA name.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub zone: Option<String>,
    /// How hours are counted; by default `0-23`, or `am_pm` where the pattern has `%p`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub clock: Option<Clock>,
    /// What the time says about the value; by default `instant`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub label: Option<LabelName>,
    /// What the time says about the irradiance, where that differs from the rest.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub shortwave_label: Option<LabelName>,
    /// The hour a clock shows twice in autumn.
    #[serde(default)]
    pub ambiguous: Ambiguous,
    /// The hour a clock leaves out in spring.
    #[serde(default)]
    pub nonexistent: Nonexistent,
    /// Read every date as if in this year: for typical years, whose months come from different ones.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub year: Option<i64>,
}

impl TimeLayout {
    /// RFC 3339 times in one column, each with its own offset.
    pub fn utc_or_offset(column: impl Into<String>) -> Self {
        Self {
            columns: vec![column.into()],
            format: rfc3339(),
            zone: None,
            clock: None,
            label: None,
            shortwave_label: None,
            ambiguous: Ambiguous::default(),
            nonexistent: Nonexistent::default(),
            year: None,
        }
    }
}

fn rfc3339() -> String {
    "rfc3339".into()
}

/// How hours are counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Clock {
    /// 0 to 23.
    #[serde(rename = "0-23")]
    From0To23,
    /// 1 to 24; 24 is midnight at the end of the day.
    #[serde(rename = "1-24")]
    From1To24,
    /// 12-hour clock with `%p`.
    #[serde(rename = "am_pm")]
    AmPm,
    /// Hours and minutes as one whole number, 0 to 2400: `%H` holds both.
    #[serde(rename = "hhmm")]
    HourMinute,
}

/// What the time beside a value says about it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum LabelName {
    /// Taken at that time.
    Instant,
    /// Mean over the interval that starts there.
    MeanOfFollowingHour,
    /// Mean over the interval that ends there.
    MeanOfPrecedingHour,
}

impl From<LabelName> for Label {
    fn from(name: LabelName) -> Self {
        match name {
            LabelName::Instant => Self::Instant,
            LabelName::MeanOfFollowingHour => Self::MeanOfFollowingHour,
            LabelName::MeanOfPrecedingHour => Self::MeanOfPrecedingHour,
        }
    }
}

/// What to do with a wall-clock time that occurs twice.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Ambiguous {
    /// By the order of rows: the first pass, then the second; a single pass is taken as the first, and flagged.
    #[default]
    RowOrder,
    /// Always the first.
    First,
    /// Always the second.
    Second,
    /// Refuse such rows.
    Refuse,
}

/// What to do with a wall-clock time that does not occur.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Nonexistent {
    /// Refuse: the clock that wrote it does not follow this zone.
    #[default]
    Refuse,
    /// Take it as if the clock had not moved yet.
    Unmoved,
}

/// Which column holds which variable. Air temperature, and relative humidity, dew point or wet bulb, are needed.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Columns {
    /// Dry-bulb temperature: °C, K, °F.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub air_temperature: Option<ColumnMapping>,
    /// Relative humidity: %, fraction.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub relative_humidity: Option<ColumnMapping>,
    /// Dew point: °C, K, °F. Used before relative humidity.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub dew_point: Option<ColumnMapping>,
    /// Wet bulb over liquid water: °C, K, °F. Used where neither dew point nor relative humidity is there.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub wet_bulb: Option<ColumnMapping>,
    /// Pressure at the station: hPa, kPa, Pa, inHg, mmHg.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub station_pressure: Option<ColumnMapping>,
    /// Pressure reduced to sea level, instead of station pressure.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub sea_level_pressure: Option<ColumnMapping>,
    /// Wind speed: m/s, km/h, mph, knot.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub wind_speed: Option<ColumnMapping>,
    /// Short-wave irradiance on the level: W/m2.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub shortwave: Option<ColumnMapping>,
}

impl Columns {
    /// Every mapped variable with its mapping.
    pub fn mapped(&self) -> Vec<(Quantity, &ColumnMapping)> {
        let all = [
            (Quantity::AirTemperature, &self.air_temperature),
            (Quantity::RelativeHumidity, &self.relative_humidity),
            (Quantity::DewPoint, &self.dew_point),
            (Quantity::WetBulb, &self.wet_bulb),
            (Quantity::StationPressure, &self.station_pressure),
            (Quantity::SeaLevelPressure, &self.sea_level_pressure),
            (Quantity::WindSpeed, &self.wind_speed),
            (Quantity::Shortwave, &self.shortwave),
        ];
        all.into_iter()
            .filter_map(|(quantity, mapping)| mapping.as_ref().map(|m| (quantity, m)))
            .collect()
    }

    /// The mapping of one variable, to be set.
    pub fn slot(&mut self, quantity: Quantity) -> &mut Option<ColumnMapping> {
        match quantity {
            Quantity::AirTemperature => &mut self.air_temperature,
            Quantity::RelativeHumidity => &mut self.relative_humidity,
            Quantity::DewPoint => &mut self.dew_point,
            Quantity::WetBulb => &mut self.wet_bulb,
            Quantity::StationPressure => &mut self.station_pressure,
            Quantity::SeaLevelPressure => &mut self.sea_level_pressure,
            Quantity::WindSpeed => &mut self.wind_speed,
            Quantity::Shortwave => &mut self.shortwave,
        }
    }
}

/// One column and its unit: the value is `cell * scale + offset` in `unit`.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ColumnMapping {
    /// Name in the header, or place, `#1` for the first.
    pub column: String,
    /// Unit of the value, for example `°C`.
    pub unit: String,
    /// Factor on the number in the cell.
    #[serde(default = "one", skip_serializing_if = "is_one")]
    pub scale: f64,
    /// Added after the factor.
    #[serde(default, skip_serializing_if = "is_zero")]
    pub offset: f64,
    /// Marks of a missing value in this column alone, for example `9999`.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub missing: Vec<String>,
}

impl ColumnMapping {
    /// A column whose numbers are values already.
    pub fn new(column: impl Into<String>, unit: impl Into<String>) -> Self {
        Self {
            column: column.into(),
            unit: unit.into(),
            scale: 1.0,
            offset: 0.0,
            missing: Vec::new(),
        }
    }
}

fn one() -> f64 {
    1.0
}

fn is_one(value: &f64) -> bool {
    *value == 1.0
}

fn is_zero(value: &f64) -> bool {
    *value == 0.0
}

/// Reads only rows whose cell is this text, spaces around it aside.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct RowFilter {
    /// Name in the header, or place, `#1` for the first.
    pub column: String,
    /// What the cell must be.
    pub equals: String,
}
