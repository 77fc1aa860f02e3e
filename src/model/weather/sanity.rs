//! What makes a whole series unusable, whatever its values are.

use super::options::RegulariseOptions;
use super::readings::{RawReadings, WeatherFault};
use super::series::{ROWS_NAMED, SeriesReport};
use super::zone::{instant_text, wall_clock_s};

/// Columns of unequal length, or none of what is needed.
pub(super) fn shape_faults(raw: &RawReadings) -> Vec<WeatherFault> {
    if raw.is_empty() {
        return vec![WeatherFault::whole(
            "no_readings",
            "expected at least one reading; found none",
        )];
    }
    let mut faults = Vec::new();
    let lengths = raw.columns().into_iter().map(|(name, values)| (name, values.len()));
    for (name, length) in lengths
        .chain([("row", raw.row.len())])
        .filter(|(_, length)| *length != raw.len())
    {
        let detail = format!("expected {} values, one for each time; found {length}", raw.len());
        faults.push(WeatherFault::column(name, "unequal_lengths", detail));
    }
    let some = |column: &Option<Vec<f64>>| column.as_ref().is_some_and(|values| values.iter().any(|v| !v.is_nan()));
    if !raw.air_temp_k.iter().any(|t| !t.is_nan()) {
        faults.push(WeatherFault::column(
            "air_temperature",
            "no_temperature",
            "expected air temperatures; all are missing",
        ));
    }
    if !some(&raw.relative_humidity) && !some(&raw.dew_point_k) && !some(&raw.wet_bulb_k) {
        let detail = "expected relative humidity, dew point or wet bulb; there is none, or all values are missing";
        faults.push(WeatherFault::whole("no_humidity", detail));
    }
    faults
}

/// Rows with times no weather was read at.
pub(super) fn time_faults(raw: &RawReadings) -> Vec<WeatherFault> {
    let bound = |year: i64| wall_clock_s(year, 1, 1, 0, 0, 0).unwrap_or_default();
    let (from, to) = (bound(1800), bound(2200));
    let outside = |&at: &usize| raw.time_unix_s[at] < from || raw.time_unix_s[at] >= to;
    let fault = |at: usize| {
        let detail = format!(
            "expected a time from 1800 to 2200; found {}. Seconds and milliseconds mixed up, or a wrong year?",
            instant_text(raw.time_unix_s[at])
        );
        WeatherFault::row(raw.row[at] as usize, Some("time"), "time_out_of_range", detail)
    };
    (0..raw.len()).filter(outside).take(ROWS_NAMED).map(fault).collect()
}

/// Refuses a series with too many unknown hours.
pub(super) fn check_unknown(
    report: &SeriesReport,
    hours: usize,
    options: &RegulariseOptions,
) -> Result<(), Vec<WeatherFault>> {
    let share = report.hours_unknown as f64 / hours as f64;
    if share <= options.max_unknown_share {
        return Ok(());
    }
    let detail = format!(
        "{} of {hours} hours ({:.1} %) are unknown after filling gaps of up to {} hours; at most {:.1} % are taken. Send the \
         missing hours, or raise max_unknown_share (then these hours are reported as unknown) or max_gap_hours",
        report.hours_unknown,
        share * 100.0,
        options.max_gap_hours,
        options.max_unknown_share * 100.0
    );
    Err(vec![WeatherFault::whole("too_much_unknown", detail)])
}
