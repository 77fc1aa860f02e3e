//! What the model runs on: air hour by hour.

use crate::model::notes::Assumption;

/// What one hourly value stands for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Stamp {
    /// The value holds at the start of the hour; the hour runs from it to the next value.
    Instant,
    /// The value is the mean over the hour that starts at its time.
    MeanOfHour,
}

/// Air hour by hour, without holes in its time axis. N readings make N hours; hour i starts at `start_unix_s + 3600 i`.
#[derive(Debug, Clone, PartialEq)]
pub struct HourlySeries {
    /// Start of the first hour, seconds since 1970-01-01T00:00:00Z. Not always on a full hour of UTC: half-hour zones.
    pub start_unix_s: i64,
    /// What each value stands for.
    pub stamp: Stamp,
    /// Dry-bulb temperature [K]; meaningless where `known` is false.
    pub temp_k: Vec<f64>,
    /// Partial pressure of water vapour [Pa], never above saturation over liquid; meaningless where `known` is false.
    pub vapour_pressure_pa: Vec<f64>,
    /// Station pressure [Pa]; a usable number in every hour.
    pub pressure_pa: Vec<f64>,
    /// Wind speed [m/s], where it was read; NaN in hours it is missing and was not filled. Only outdoor places use it.
    pub wind_speed_m_s: Option<Vec<f64>>,
    /// Short-wave irradiance on the level [W/m2], where it was read; NaN in hours it is missing and was not filled.
    pub shortwave_w_m2: Option<Vec<f64>>,
    /// What each irradiance stands for; it may differ from `stamp`.
    pub shortwave_stamp: Stamp,
    /// False where temperature or humidity is missing and was not filled.
    pub known: Vec<bool>,
    /// What was read, filled and flagged on the way here.
    pub report: SeriesReport,
    /// What had to be assumed on the way here.
    pub assumptions: Vec<Assumption>,
}

/// What was read, filled and flagged.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct SeriesReport {
    /// Readings found in the source.
    pub readings: usize,
    /// Hours filled by interpolation, in temperature or humidity.
    pub hours_filled: usize,
    /// Hours that stay unknown.
    pub hours_unknown: usize,
    /// Which humidity measure was used: `dew_point`, `relative_humidity` or `wet_bulb`.
    pub humidity_from: &'static str,
    /// Implausible or contradictory values, never edited silently.
    pub flags: Vec<Flag>,
}

/// One kind of oddity and where it was seen.
#[derive(Debug, Clone, PartialEq)]
pub struct Flag {
    /// Stable code, for example `temperature_step`.
    pub code: &'static str,
    /// How often.
    pub count: usize,
    /// The first twenty rows (or hour numbers), counted from 1.
    pub rows: Vec<usize>,
    /// What it means, what was done with the values, and what to do.
    pub detail: String,
}

/// How many row numbers a flag or a list of faults names before it only counts.
pub const ROWS_NAMED: usize = 20;

/// Collects the rows of one kind of oddity.
#[derive(Debug, Default, Clone)]
pub(crate) struct Sightings {
    count: usize,
    rows: Vec<usize>,
}

impl Sightings {
    /// Notes one more sighting at this row.
    pub(crate) fn add(&mut self, row: usize) {
        self.count += 1;
        if self.rows.len() < ROWS_NAMED {
            self.rows.push(row);
        }
    }

    /// How many were noted.
    pub(crate) fn count(&self) -> usize {
        self.count
    }

    /// Pushes a flag when anything was seen.
    pub(crate) fn flag_into(self, flags: &mut Vec<Flag>, code: &'static str, detail: impl Into<String>) {
        if self.count > 0 {
            flags.push(Flag {
                code,
                count: self.count,
                rows: self.rows,
                detail: detail.into(),
            });
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sightings_name_twenty_rows_and_count_all() {
        let mut seen = Sightings::default();
        (1..=50).for_each(|row| seen.add(row));
        let mut flags = Vec::new();
        seen.flag_into(&mut flags, "x", "y");
        assert_eq!((flags[0].count, flags[0].rows.len(), flags[0].rows[19]), (50, 20, 20));
    }

    #[test]
    fn nothing_seen_raises_no_flag() {
        let mut flags = Vec::new();
        Sightings::default().flag_into(&mut flags, "x", "y");
        assert!(flags.is_empty());
    }
}
