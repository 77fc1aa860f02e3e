//! Readings as they come, column by column, before they are laid on hours.

use super::series::{Flag, Stamp};
use crate::model::notes::Assumption;

/// What the time beside a reading says about the value.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Label {
    /// The value was taken at that time.
    #[default]
    Instant,
    /// The value is a mean over the time that starts there (labelled by the start of the interval).
    MeanOfFollowingHour,
    /// The value is a mean over the time that ends there (labelled by the end of the interval, `24:00` included).
    MeanOfPrecedingHour,
}

impl Label {
    /// The name used in layouts and requests.
    pub fn name(self) -> &'static str {
        match self {
            Self::Instant => "instant",
            Self::MeanOfFollowingHour => "mean_of_following_hour",
            Self::MeanOfPrecedingHour => "mean_of_preceding_hour",
        }
    }

    /// What hourly values made from such readings stand for.
    pub fn stamp(self) -> Stamp {
        match self {
            Self::Instant => Stamp::Instant,
            Self::MeanOfFollowingHour | Self::MeanOfPrecedingHour => Stamp::MeanOfHour,
        }
    }
}

/// Readings in SI, one entry per reading in every column that is there; NaN = missing. Any order, any spacing.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct RawReadings {
    /// Time of the reading, seconds since 1970-01-01T00:00:00Z.
    pub time_unix_s: Vec<i64>,
    /// Row (line) number in the source, from 1, for messages.
    pub row: Vec<u32>,
    /// What the times say about the values.
    pub label: Label,
    /// Dry-bulb temperature [K].
    pub air_temp_k: Vec<f64>,
    /// Relative humidity over liquid water [fraction].
    pub relative_humidity: Option<Vec<f64>>,
    /// Dew point [K].
    pub dew_point_k: Option<Vec<f64>>,
    /// Wet bulb over liquid water [K], for readings with neither dew point nor relative humidity.
    pub wet_bulb_k: Option<Vec<f64>>,
    /// Pressure [Pa].
    pub pressure_pa: Option<Vec<f64>>,
    /// True when `pressure_pa` is reduced to mean sea level.
    pub pressure_is_sea_level: bool,
    /// Wind speed [m/s].
    pub wind_speed_m_s: Option<Vec<f64>>,
    /// Short-wave irradiance [W/m2].
    pub shortwave_w_m2: Option<Vec<f64>>,
    /// What the times say about the irradiance, where that differs from the rest.
    pub shortwave_label: Option<Label>,
    /// Oddities met while reading (times, for example).
    pub flags: Vec<Flag>,
    /// Assumptions made while reading.
    pub assumptions: Vec<Assumption>,
}

impl RawReadings {
    /// An hourly time axis of `hours` readings from `start_unix_s`, rows numbered from 1, no values yet.
    pub fn hourly(start_unix_s: i64, hours: usize) -> Self {
        Self {
            time_unix_s: (0..hours as i64)
                .map(|hour| start_unix_s.saturating_add(hour * 3600))
                .collect(),
            row: (1..=hours as u32).collect(),
            ..Self::default()
        }
    }

    /// Number of readings.
    pub fn len(&self) -> usize {
        self.time_unix_s.len()
    }

    /// True when there is not one reading.
    pub fn is_empty(&self) -> bool {
        self.time_unix_s.is_empty()
    }

    /// Every value column that is there, by name.
    pub(crate) fn columns(&self) -> Vec<(&'static str, &Vec<f64>)> {
        let optional = [
            ("relative_humidity", &self.relative_humidity),
            ("dew_point", &self.dew_point_k),
            ("wet_bulb", &self.wet_bulb_k),
            ("pressure", &self.pressure_pa),
            ("wind_speed", &self.wind_speed_m_s),
            ("shortwave", &self.shortwave_w_m2),
        ];
        let present = optional
            .into_iter()
            .filter_map(|(name, column)| column.as_ref().map(|values| (name, values)));
        std::iter::once(("air_temperature", &self.air_temp_k))
            .chain(present)
            .collect()
    }

    /// Every value column that is there, to be changed.
    pub(crate) fn columns_mut(&mut self) -> impl Iterator<Item = &mut Vec<f64>> {
        let optional = [
            &mut self.relative_humidity,
            &mut self.dew_point_k,
            &mut self.wet_bulb_k,
            &mut self.pressure_pa,
            &mut self.wind_speed_m_s,
            &mut self.shortwave_w_m2,
        ];
        std::iter::once(&mut self.air_temp_k).chain(optional.into_iter().filter_map(Option::as_mut))
    }
}

/// One thing wrong with weather as it was sent. All of them are reported at once.
#[derive(Debug, Clone, PartialEq)]
pub struct WeatherFault {
    /// Row (line) in the source, from 1, where it is one row's fault.
    pub row: Option<usize>,
    /// Column in the source, where it is one column's fault.
    pub column: Option<String>,
    /// Stable code for programs, for example `bad_number`.
    pub code: &'static str,
    /// Expected, found and remedy, in a sentence.
    pub detail: String,
}

impl WeatherFault {
    /// A fault of the whole series.
    pub fn whole(code: &'static str, detail: impl Into<String>) -> Self {
        Self {
            row: None,
            column: None,
            code,
            detail: detail.into(),
        }
    }

    /// A fault of one column.
    pub fn column(column: impl Into<String>, code: &'static str, detail: impl Into<String>) -> Self {
        Self {
            row: None,
            column: Some(column.into()),
            code,
            detail: detail.into(),
        }
    }

    /// A fault of one row.
    pub fn row(row: usize, column: Option<&str>, code: &'static str, detail: impl Into<String>) -> Self {
        Self {
            row: Some(row),
            column: column.map(str::to_string),
            code,
            detail: detail.into(),
        }
    }
}

impl std::fmt::Display for WeatherFault {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        if let Some(row) = self.row {
            write!(f, "row {row}: ")?;
        }
        if let Some(column) = &self.column {
            write!(f, "{column}: ")?;
        }
        write!(f, "{} ({})", self.detail, self.code)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hourly_axis_steps_by_the_hour() {
        let raw = RawReadings::hourly(7200, 3);
        assert_eq!(raw.time_unix_s, [7200, 10_800, 14_400]);
        assert_eq!((raw.row[0], raw.len(), raw.is_empty()), (1, 3, false));
    }

    #[test]
    fn a_fault_prints_its_place() {
        let fault = WeatherFault::row(7, Some("temp"), "bad_number", "expected a number");
        assert_eq!(fault.to_string(), "row 7: temp: expected a number (bad_number)");
    }
}
