//! The hourly series.
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
    /// Start of the first hour, seconds since 1970-01-01T00:00:00Z.
    pub start_unix_s: i64,
    /// What each value stands for.
    pub stamp: Stamp,
    /// Dry-bulb temperature [K]; meaningless where `known` is false.
    pub temp_k: Vec<f64>,
    /// Partial pressure of water vapour [Pa].
    pub vapour_pressure_pa: Vec<f64>,
    /// Station pressure [Pa].
    pub pressure_pa: Vec<f64>,
    /// False where the reading is missing and was not filled.
    pub known: Vec<bool>,
    /// What was read, filled and flagged on the way here.
    pub report: SeriesReport,
    /// What had to be assumed on the way here.
    pub assumptions: Vec<crate::model::notes::Assumption>,
}

/// What was read, filled and flagged.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct SeriesReport {
    /// Readings found in the source.
    pub readings: usize,
    /// Hours filled by interpolation.
    pub hours_filled: usize,
    /// Hours that stay unknown.
    pub hours_unknown: usize,
    /// Which humidity measure was used: `dew_point` or `relative_humidity`.
    pub humidity_from: &'static str,
    /// Implausible or contradictory values, never edited silently.
    pub flags: Vec<Flag>,
}

/// One kind of oddity and where it was seen.
#[derive(Debug, Clone, PartialEq)]
pub struct Flag {
    /// Stable code, for example `temperature_jump`.
    pub code: &'static str,
    /// How often.
    pub count: usize,
    /// The first twenty rows (or hour numbers), counted from 1.
    pub rows: Vec<usize>,
    /// What it means and what to do.
    pub detail: String,
}
